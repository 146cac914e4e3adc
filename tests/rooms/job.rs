//! Job files.

use insta::assert_snapshot;
use tubewright::book::Dampness;
use tubewright::job::{self, Job, Row, Site, StrokesRow, TextRow, Wish};

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
            }),
            Row::Strokes(StrokesRow {
                label: String::new(),
                strokes: "3 x 180 mm; 95 mm".to_owned(),
                tube: String::new(),
                count: i64::MAX,
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
fn job_files_that_cannot_be_read() {
    assert_snapshot!(error("OPEN"), @"This is not a job file: expected JSON written by this program, but no value stands there (line 1, column 1).");
    assert_snapshot!(error(r#"{"tubewright": "book", "version": 1, "name": "x"}"#), @"Expected a job file, but this is a “book” file.");
    assert_snapshot!(error(r#"{"tubewright": "<b>", "version": 1, "name": "x"}"#), @"Expected a job file, but this is a “<b>” file.");
    assert_snapshot!(error(r#"{"tubewright": "job", "version": 99, "name": "x"}"#), @"This job file has version 99; this program knows versions up to 1. Open it with a newer program.");
    assert_snapshot!(error(r#"{"tubewright": "job", "version": "1", "name": "x"}"#), @"This job file names no version that exists; this program knows versions up to 1.");
    assert_snapshot!(error(r#"{"tubewright": "job", "version": 1}"#), @"This job file cannot be read: “name” is missing (line 1, column 35).");
    assert_snapshot!(error(r#"{"tubewright": "job", "version": 1, "name": "x", "price": 1}"#), @"This job file cannot be read: unknown field “price” (line 1, column 56).");
    assert_snapshot!(
        error(r#"{"tubewright": "job", "version": 1, "name": "x", "rows": [{"row": "circle"}]}"#),
        @"This job file cannot be read: expected text or strokes, but found “circle” (line 1, column 74)."
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
