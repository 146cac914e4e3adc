//! Rows to pieces of glass, by hand from the shapes of the letters.

use insta::assert_snapshot;
use kurbo::Shape;
use proptest::prelude::*;
use tubewright::book::Allowances;
use tubewright::job::{Align, Curve, Job, Row, StrokesRow, TextRow};
use tubewright::takeoff::{Takeoff, takeoff};

fn letters(text: &str, face: &str, height: &str) -> Row {
    Row::Text(TextRow {
        text: text.to_owned(),
        height: height.to_owned(),
        face: face.to_owned(),
        tube: "t".to_owned(),
        count: 1,
        ..TextRow::default()
    })
}

fn strokes(strokes: &str, count: i64) -> Row {
    Row::Strokes(StrokesRow {
        label: "bar".to_owned(),
        strokes: strokes.to_owned(),
        tube: "t".to_owned(),
        count,
        ..StrokesRow::default()
    })
}

/// Nothing is too long here: what is cut has a jump less.
fn off(rows: Vec<Row>) -> Takeoff {
    takeoff(
        &Job {
            rows,
            ..Job::default()
        },
        &Allowances {
            longest_piece_mm: 100_000.0,
            ..Allowances::default()
        },
    )
}

fn near(found: f64, expect: f64) {
    assert!((found - expect).abs() < 1e-6, "{found}, by hand {expect}");
}

fn labels(off: &Takeoff) -> Vec<&str> {
    off.pieces
        .iter()
        .map(|piece| piece.label.as_str())
        .collect()
}

#[test]
fn the_glass_of_an_h() {
    // The H of the sans face, 21 units high: two stems of 21 and a bar of 14, joined 10 units under
    // the top. From each end of the bar the nearer end of a stem is 10 away. At 210 mm a unit is
    // 10 mm; each electrode adds a tail of 150 mm.
    let off = off(vec![letters("H", "sans", "210 mm")]);
    let piece = &off.pieces[0];
    near(piece.lit.mm(), 560.0);
    near(piece.hidden.mm(), 200.0);
    near(piece.tails.mm(), 300.0);
    near(piece.column().mm(), 760.0);
    near(piece.glass().mm(), 1_060.0);
    let jumps: f64 = piece
        .jumps
        .iter()
        .map(|jump| jump.path.perimeter(1e-9))
        .sum();
    near(jumps, 200.0);
}

#[test]
fn glass_that_lies_on_glass_shines_once() {
    // The H of the face with accents is drawn in one, running back over both stems. In units of its
    // file: stems of 629.9 and 626.9 and a bar of 400 shine; from the top of the left stem back to the
    // bar, 293, and from the top of the right one, 290, the glass is painted out. Together it is what
    // the pen runs, 2239.8 (tests/reference/letters/readability_lengths.csv).
    let off = off(vec![letters("H", "accents", "629.9 mm")]);
    let piece = &off.pieces[0];
    near(piece.lit.mm(), 1656.8);
    near(piece.hidden.mm(), 583.0);
    near(piece.column().mm(), 2239.8);
}

#[test]
fn letters_are_pieces_and_a_joined_word_is_one() {
    assert_eq!(
        labels(&off(vec![letters("ab cd", "sans", "100 mm")])),
        ["a", "b", "c", "d"]
    );
    assert_eq!(
        labels(&off(vec![letters("ab cd", "script", "100 mm")])),
        ["ab", "cd"]
    );
}

#[test]
fn glass_grows_as_the_letters_do() {
    for face in ["sans", "script"] {
        let at = |height: &str| off(vec![letters("Open 24 Hours, WELCOME!", face, height)]);
        let (small, large) = (at("100 mm"), at("1500 mm"));
        for (small, large) in small.pieces.iter().zip(&large.pieces) {
            near(large.lit.mm() / small.lit.mm(), 15.0);
            near(large.hidden.mm(), small.hidden.mm() * 15.0);
        }
    }
}

#[test]
fn strokes_are_the_lengths_typed() {
    assert_eq!(
        labels(&off(vec![strokes("1200 mm; 500 mm", 1)])),
        ["bar 1", "bar 2"]
    );
    assert_eq!(labels(&off(vec![strokes("1200 mm", 1)])), ["bar"]);
    let off = off(vec![strokes("1200 mm; 2 x 300 mm + 95 mm", 3)]);
    let lit: Vec<f64> = off.pieces.iter().map(|piece| piece.lit.mm()).collect();
    assert_eq!(lit, [1200.0, 695.0, 1200.0, 695.0, 1200.0, 695.0]);
    assert!(off.pieces.iter().all(|piece| piece.hidden.mm() == 0.0));
    assert_eq!(
        off.pieces
            .iter()
            .map(|piece| piece.copy)
            .collect::<Vec<_>>(),
        [0, 0, 1, 1, 2, 2]
    );
}

#[test]
fn rows_lie_under_each_other_and_all_glass_inside_its_row() {
    let off = off(vec![
        letters("OPEN", "sans", "300 mm"),
        strokes("1500 mm", 2),
        letters("Qjpg daily", "script", "6 in"),
        strokes("900 mm; 500 mm", 1),
    ]);
    for pair in off.rows.windows(2) {
        assert!(
            pair[0].bounds.y1 <= pair[1].bounds.y0,
            "{:?} {:?}",
            pair[0].bounds,
            pair[1].bounds
        );
    }
    for row in &off.rows {
        for piece in &off.pieces[row.pieces.clone()] {
            for stroke in &piece.strokes {
                let inside = row.bounds.inflate(1e-6, 1e-6);
                assert_eq!(
                    stroke.path.bounding_box().intersect(inside),
                    stroke.path.bounding_box()
                );
            }
        }
        let lit: f64 = off.pieces[row.pieces.clone()]
            .iter()
            .map(|piece| piece.lit.mm())
            .sum();
        near(row.lit.mm(), lit);
    }
}

#[test]
fn tails_that_make_no_sense_are_said_and_counted_as_none() {
    for tail_mm in [-1.0, f64::NAN, f64::INFINITY, 1e9] {
        let allowances = Allowances {
            tail_mm,
            ..Allowances::default()
        };
        let off = takeoff(
            &Job {
                rows: vec![strokes("1200 mm", 1)],
                ..Job::default()
            },
            &allowances,
        );
        assert_eq!(off.pieces[0].glass().mm(), 1200.0, "{tail_mm}");
        assert!(
            off.findings[0]
                .says
                .starts_with("The tail allowance must be"),
            "{:?}",
            off.findings
        );
    }
}

fn set(text: &str, face: &str, how: TextRow) -> Takeoff {
    off(vec![Row::Text(TextRow {
        text: text.to_owned(),
        height: "210 mm".to_owned(),
        face: face.to_owned(),
        tube: "t".to_owned(),
        ..how
    })])
}

fn said(off: &Takeoff) -> String {
    let sentences = off
        .findings
        .iter()
        .map(|finding| format!("{:?}: {}", finding.grade, finding.says));
    sentences.collect::<Vec<String>>().join("\n")
}

#[test]
fn lines_of_a_text_are_laid_out_in_millimetres() {
    // At 210 mm a unit of the sans face is 10 mm. The first line is 210 mm high; 60 % of that, and
    // another 210 mm.
    let off = set("H\nH", "sans", TextRow::default());
    assert_eq!(labels(&off), ["H", "H"]);
    near(off.bounds.height(), 546.0);
    let how = TextRow {
        line_gap_percent: 100.0,
        width_percent: 150.0,
        align: Align::Right,
        ..TextRow::default()
    };
    let off = set("HH\nH", "sans", how);
    near(off.bounds.height(), 630.0);
    let right = |at: usize| {
        off.pieces[at]
            .strokes
            .iter()
            .map(|s| s.path.bounding_box().x1)
            .fold(f64::MIN, f64::max)
    };
    near(right(1), right(2));
    near(off.pieces[0].lit.mm(), 420.0 + 140.0 * 1.5);
    assert_eq!(
        off.findings.len(),
        1,
        "that jumps are estimated: {}",
        said(&off)
    );
}

#[test]
fn an_arc_rises_as_high_as_typed() {
    for (typed, down) in [("120 mm", 1.0), ("-12 cm", -1.0)] {
        let how = TextRow {
            arc: Some(Curve::Rise(typed.to_owned())),
            spacing_percent: 100.0,
            ..TextRow::default()
        };
        let off = set("IIIII", "sans", how);
        let foot = |at: usize| {
            off.pieces[at]
                .electrodes
                .map(|end| end.y)
                .into_iter()
                .fold(f64::MIN, f64::max)
        };
        near(foot(0) - foot(2), 120.0 * down);
        assert_eq!(said(&off), "");
    }
}

#[test]
fn a_layout_that_is_not_taken_is_said_and_drawn_as_usual() {
    let how = TextRow {
        width_percent: 500.0,
        spacing_percent: f64::NAN,
        line_gap_percent: -5.0,
        rotation_degrees: 181.0,
        arc: Some(Curve::Radius("wide".to_owned())),
        ..TextRow::default()
    };
    let odd = set("HI\nHO", "sans", how);
    assert_snapshot!(said(&odd), @r"
    Stop: Letter width must be 50 to 200 % (further from what the face draws it is another face), but is 500 %: drawn at 100 %.
    Stop: Letter spacing must be -20 to 100 % (of the letter height; nearer letters touch, further ones are no word), but is NaN %: drawn at 0 %.
    Stop: Line gap must be 0 to 300 % (of the letter height; nearer lines run into each other, further ones are rows), but is -5 %: drawn at 60 %.
    Stop: Rotation must be -180 to 180 degrees (half a turn either way is every direction there is), but is 181 degrees: drawn upright.
    Stop: Arc radius: expected a number such as 450, but found “wide” at character 1 of “wide”: drawn straight.
    Note: Painted-out glass between the strokes of a piece is estimated by the shortest straight jumps; a bender's double-backs may take more.
    ");
    assert_eq!(odd.bounds, set("HI\nHO", "sans", TextRow::default()).bounds);
    let arcs =
        ["1 mm", "200 km", "-", "30 mm", "-30 mm"].map(|typed| Curve::Radius(typed.to_owned()));
    let rises = ["0 mm", "400 mm"].map(|typed| Curve::Rise(typed.to_owned()));
    let sentences: Vec<String> = arcs
        .into_iter()
        .chain(rises)
        .map(|arc| {
            let off = set(
                "HELLO",
                "sans",
                TextRow {
                    arc: Some(arc),
                    ..TextRow::default()
                },
            );
            assert_eq!(off.bounds, set("HELLO", "sans", TextRow::default()).bounds);
            said(&off).lines().next().unwrap_or_default().to_owned()
        })
        .collect();
    assert_snapshot!(sentences.join("\n"), @r"
    Stop: Arc radius must be 10 to 100000 mm (a larger one is a straight line), but is 1 mm: drawn straight.
    Stop: Arc radius: expected “+”, “x” or the end, but found “km” at character 5 of “200 km”; units are mm, cm, m, in or ft: drawn straight.
    Stop: Arc radius: expected a number such as 450, but the text ends at character 1 of “”: drawn straight.
    Stop: The arc's radius must be at least 210 mm (a line goes round once at most, and no letter reaches beyond the centre), but is 30 mm: drawn straight.
    Stop: The arc's radius must be at least 210 mm (a line goes round once at most, and no letter reaches beyond the centre), but is 30 mm: drawn straight.
    Stop: Arc rise must be 1 to 20000 mm (with less the line is straight), but is 0 mm: drawn straight.
    Stop: The arc's rise must be at most 323.6 mm (a line as short as the first one rises no higher), but is 400 mm: drawn straight.
    ");
}

#[test]
fn characters_without_a_shape_are_found_in_their_line() {
    let off = set("HI\nHÉ", "sans", TextRow::default());
    assert_eq!(
        off.findings[0].says,
        "The face sans has no shape for “É” (line 2, character 2): glass and price are without it. The \
         face accents has it; or give it as strokes."
    );
}

#[test]
fn a_joined_word_that_is_set_apart_says_so() {
    let apart = TextRow {
        spacing_percent: 20.0,
        ..TextRow::default()
    };
    let bent = TextRow {
        arc: Some(Curve::Radius("2 m".to_owned())),
        ..TextRow::default()
    };
    let straight = set(
        "Moon",
        "script",
        TextRow {
            rotation_degrees: 30.0,
            ..TextRow::default()
        },
    );
    let usual = set("Moon", "script", TextRow::default());
    near(
        straight.pieces[0].column().mm(),
        usual.pieces[0].column().mm(),
    );
    assert!(
        !said(&straight).contains("one by one"),
        "{}",
        said(&straight)
    );
    for how in [apart, bent] {
        let off = set("Moon", "script", how.clone());
        assert_eq!(
            off.findings[0].says,
            "The letters of script run into each other, but are set one by one here, so that their ends \
             do not meet: what lies between them is counted as painted out. Have the joints drawn."
        );
        near(off.pieces[0].lit.mm(), usual.pieces[0].lit.mm());
        assert!(off.pieces[0].hidden > usual.pieces[0].hidden);
        // Letters that stand alone are not joined to anything.
        assert!(!said(&set("M o", "script", how)).contains("one by one"));
    }
}

proptest! {
    #[test]
    fn glass_is_as_long_on_an_arc_and_turned(
        text in "[A-Za-z0-9 ]{1,12}(\n[A-Za-z]{1,8})?",
        face in prop::sample::select(vec!["sans", "accents"]),
        radius in 100..5_000_u32,
        hangs: bool,
        rotation_degrees in -180.0..180.0,
    ) {
        let sign = if hangs { "-" } else { "" };
        let arc = Some(Curve::Radius(format!("{sign}{radius} mm")));
        let bent = set(&text, face, TextRow { arc, rotation_degrees, ..TextRow::default() });
        let straight = set(&text, face, TextRow::default());
        prop_assert_eq!(bent.pieces.len(), straight.pieces.len());
        for (bent, straight) in bent.pieces.iter().zip(&straight.pieces) {
            // Not only near: strokes are measured before they are placed.
            prop_assert_eq!(bent.lit, straight.lit);
            let hidden = straight.hidden.mm();
            prop_assert!((bent.hidden.mm() - hidden).abs() <= 1e-9 * hidden, "{} {}", bent.hidden.mm(), hidden);
            let drawn: f64 = bent.jumps.iter().map(|jump| jump.path.perimeter(1e-9)).sum();
            prop_assert!((drawn - bent.hidden.mm()).abs() < 1e-6);
        }
    }
}
