//! Job files.

use insta::assert_snapshot;
use tubewright::book::Dampness;
use tubewright::job::{
    self, Align, ArtworkLines, ArtworkRow, Curve, Cut, Each, FontFile, Job, Outline, OutlineRow,
    Pieces, Row, Site, StrokesRow, TextRow, Wish,
};

fn error(text: &str) -> String {
    job::read(text).expect_err("no job")
}

fn job() -> Job {
    Job {
        name: "Café “Ü”".to_owned(),
        customer: "A \\ \"B\"\n<script>".to_owned(),
        rows: vec![
            Row::Text(TextRow {
                text: "OPEN \u{1f355}".to_owned(),
                height: "1' 6 1/2\"".to_owned(),
                face: "sans".to_owned(),
                tube: "12 mm neon".to_owned(),
                count: -3,
                ..TextRow::default()
            }),
            Row::Strokes(StrokesRow {
                label: String::new(),
                strokes: "3 x 180 mm; 95 mm".to_owned(),
                tube: String::new(),
                count: i64::MAX,
                ..StrokesRow::default()
            }),
        ],
        rules: "NEC Article 600".to_owned(),
        wish: Wish::LowestPrice,
        site: Site {
            mains_volts: Some(230.0),
            place: Dampness::Wet,
            cold: true,
        },
        ..Job::default()
    }
}

#[test]
fn a_job_written_and_read_is_the_same() {
    assert_eq!(job::read(&job::write(&job())), Ok(job()));
    assert_eq!(
        job::read(&format!("\u{feff}{}", job::write(&Job::default()))),
        Ok(Job::default())
    );
}

#[test]
fn a_job_with_little_in_it_is_read_with_the_defaults() {
    let little = r#"{"tubewright": "job", "version": 1, "name": "x", "rows": [
        {"row": "text", "text": "A", "height": "100", "tube": "t"}]}"#;
    let read = job::read(little).expect("a job");
    let Row::Text(row) = &read.rows[0] else {
        panic!("a row of letters: {read:?}")
    };
    assert_eq!((row.face.as_str(), row.count), ("sans", 1));
    assert_eq!(read.wish, Wish::FewestSupplies);
}

#[test]
fn a_layout_is_written_where_it_is_not_the_usual_one() {
    let mut changed = job();
    assert!(
        job::write(&changed).contains("\"version\": 1,"),
        "an older program opens it"
    );
    let Row::Text(row) = &mut changed.rows[0] else {
        panic!("a row of letters");
    };
    let plain = serde_json::to_value(&*row).expect("a row");
    assert_eq!(
        plain.as_object().map(serde_json::Map::len),
        Some(5),
        "{plain}"
    );
    row.text = "OPEN\nLATE".to_owned();
    row.width_percent = 120.0;
    row.spacing_percent = -5.0;
    row.align = Align::Right;
    row.line_gap_percent = 80.0;
    row.arc = Some(Curve::Rise("-120 mm".to_owned()));
    row.rotation_degrees = 7.5;
    let laid_out = r#"{"row": "text", "text": "OPEN\nLATE", "height": "1' 6 1/2\"", "face": "sans",
        "tube": "12 mm neon", "count": -3, "width_percent": 120, "spacing_percent": -5,
        "align": "right", "line_gap_percent": 80, "arc": {"rise": "-120 mm"},
        "rotation_degrees": 7.5}"#;
    assert_eq!(
        serde_json::from_str::<Row>(laid_out).ok().as_ref(),
        changed.rows.first()
    );
    assert_eq!(job::read(&job::write(&changed)), Ok(changed.clone()));
    assert!(
        job::write(&changed).contains("\"version\": 2,"),
        "an older program says it is too old"
    );
    // What is no number is left out, or the file could not be read again.
    let Row::Text(row) = &mut changed.rows[0] else {
        panic!("a row of letters");
    };
    row.width_percent = f64::NAN;
    row.rotation_degrees = f64::INFINITY;
    let back = job::read(&job::write(&changed)).expect("a job");
    let Row::Text(row) = &back.rows[0] else {
        panic!("a row of letters");
    };
    assert_eq!((row.width_percent, row.rotation_degrees), (100.0, 0.0));
}

#[test]
fn fonts_and_insets_are_written_as_version_3() {
    let bytes: Vec<u8> = (0..=255).cycle().take(1000).collect();
    let mut with_font = job();
    with_font.fonts.push(FontFile::new("a.ttf", &bytes));
    with_font.rows.push(Row::Outline(OutlineRow {
        text: "OPEN".to_owned(),
        height: "200 mm".to_owned(),
        font: "a.ttf".to_owned(),
        inset: "6 mm".to_owned(),
        tube: "12 mm neon".to_owned(),
        ..OutlineRow::default()
    }));
    let text = job::write(&with_font);
    assert!(text.contains("\"version\": 3,"), "{text}");
    let back = job::read(&text).expect("a job");
    assert_eq!(back, with_font);
    assert_eq!(back.fonts[0].bytes(), Some(bytes), "byte by byte");
    let bare = r#"{"row": "outline", "text": "A", "height": "100", "font": "a.ttf", "tube": "t"}"#;
    let Ok(Row::Outline(row)) = serde_json::from_str(bare) else {
        panic!("a row of outline letters");
    };
    assert_eq!((row.inset.as_str(), row.count), ("", 1));

    let lines = |inset: &str| {
        let lines = ArtworkLines {
            tube: "t".to_owned(),
            inset: inset.to_owned(),
            ..ArtworkLines::default()
        };
        let row = ArtworkRow {
            lines: vec![lines],
            ..ArtworkRow::default()
        };
        job::write(&Job {
            rows: vec![Row::Artwork(row)],
            ..Job::default()
        })
    };
    assert!(lines("").contains("\"version\": 2,") && !lines("").contains("inset"));
    assert!(lines("5 mm").contains("\"version\": 3,"));
}

#[test]
fn a_minus_turns_an_arc_over() {
    let parts = |typed: &str| Curve::Radius(typed.to_owned()).parts().1.to_owned();
    for typed in ["120 mm", " 120 mm ", "-120 mm", "\u{2212} 120 mm"] {
        assert_eq!(parts(typed), "120 mm");
    }
    assert!(!Curve::Rise("1 m".to_owned()).parts().0);
    assert!(Curve::Rise(" \u{2212}1 m".to_owned()).parts().0);
}

#[test]
fn job_files_that_cannot_be_read() {
    assert_snapshot!(error("OPEN"), @"This is not a job file: expected JSON written by this program, but no value stands there (line 1, column 1).");
    assert_snapshot!(error(r#"{"tubewright": "book", "version": 1, "name": "x"}"#), @"Expected a job file, but this is a “book” file.");
    assert_snapshot!(error(r#"{"tubewright": "<b>", "version": 1, "name": "x"}"#), @"Expected a job file, but this is a “<b>” file.");
    assert_snapshot!(error(r#"{"tubewright": "job", "version": 99, "name": "x"}"#), @"This job file has version 99; this program knows versions up to 4. Open it with a newer program.");
    assert_snapshot!(error(r#"{"tubewright": "job", "version": "1", "name": "x"}"#), @"This job file names no version that exists; this program knows versions up to 4.");
    assert_snapshot!(error(r#"{"tubewright": "job", "version": 1}"#), @"This job file cannot be read: “name” is missing (line 1, column 35).");
    assert_snapshot!(error(r#"{"tubewright": "job", "version": 1, "name": "x", "price": 1}"#), @"This job file cannot be read: unknown field “price” (line 1, column 56).");
    assert_snapshot!(
        error(r#"{"tubewright": "job", "version": 1, "name": "x", "rows": [{"row": "circle"}]}"#),
        @"This job file cannot be read: expected text or strokes or artwork or shape or outline, but found “circle” (line 1, column 74)."
    );
    assert_snapshot!(
        error(r#"{"tubewright": "job", "version": 1, "name": "x", "rows": [{"row": "text", "text": "A"}]}"#),
        @"This job file cannot be read: “height” is missing (line 1, column 87)."
    );
    assert_snapshot!(
        error(
            r#"{"tubewright": "job", "version": 1, "name": "x", "rows": [
                {"row": "text", "text": "A", "height": "1", "tube": "t", "bold": true}]}"#
        ),
        @"This job file cannot be read: unknown field “bold” (line 2, column 87)."
    );
    assert_snapshot!(error(r#"{"tubewright": "job", "version": 1, "name": "x", "wish": "best"}"#), @"This job file cannot be read: expected fewest-supplies or lowest-price, but found “best” (line 1, column 63).");
}

#[test]
fn deep_nesting_does_not_crash() {
    for open in [
        "[",
        r#"{"a":"#,
        r#"{"tubewright":"job","version":1,"name":"x","rows":["#,
    ] {
        assert!(error(&open.repeat(200_000)).len() < 500);
    }
}

#[test]
fn choices_of_pieces_are_kept_and_ask_for_the_version_that_knows_them() {
    let plain = Job {
        rows: vec![Row::Text(TextRow {
            text: "HI".to_owned(),
            ..TextRow::default()
        })],
        ..Job::default()
    };
    assert!(job::write(&plain).contains("\"version\": 1"));
    let with = |change: fn(&mut Job)| {
        let mut job = plain.clone();
        change(&mut job);
        let text = job::write(&job);
        assert_eq!(job::read(&text).as_ref(), Ok(&job), "{text}");
        text
    };
    for text in [
        with(|job| *job.rows[0].group_mut() = "door".to_owned()),
        with(|job| job.rows[0].pieces_mut().keep_long = true),
        with(|job| {
            *job.rows[0].pieces_mut() = Pieces {
                each: Each::Touching,
                joined: vec![["1 H 1".to_owned(), "2 I 1".to_owned()]],
                parted: vec![["1 H 1".to_owned(), "1 H 3".to_owned()]],
                cuts: vec![Cut {
                    stroke: "1 H 2".to_owned(),
                    share: 1.0 / 3.0,
                }],
                keep_long: false,
                order: vec!["2 I 1".to_owned(), "1 H 1".to_owned()],
            };
        }),
        with(|job| {
            job.outline = Some(Outline {
                width: "2 m".to_owned(),
                height: String::new(),
            });
        }),
    ] {
        assert!(text.contains("\"version\": 3"), "{text}");
    }
}

#[test]
fn leads_and_the_feed_are_kept_and_ask_for_the_version_that_knows_them() {
    let mut wired = Job::default();
    wired.wiring.cable = "GTO".to_owned();
    let mut fed = Job::default();
    fed.feed.circuit_amps = Some(20.0);
    for job in [wired, fed] {
        let text = job::write(&job);
        assert!(text.contains("\"version\": 4"), "{text}");
        assert_eq!(job::read(&text), Ok(job));
    }
}
