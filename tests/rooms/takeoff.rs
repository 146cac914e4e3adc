//! Rows to pieces of glass, by hand from the shapes of the letters.

use kurbo::Shape;
use tubewright::book::Allowances;
use tubewright::job::{Job, Row, StrokesRow, TextRow};
use tubewright::takeoff::{Takeoff, takeoff};

fn letters(text: &str, face: &str, height: &str) -> Row {
    Row::Text(TextRow {
        text: text.to_owned(),
        height: height.to_owned(),
        face: face.to_owned(),
        tube: "t".to_owned(),
        count: 1,
    })
}

fn strokes(strokes: &str, count: i64) -> Row {
    Row::Strokes(StrokesRow {
        label: "bar".to_owned(),
        strokes: strokes.to_owned(),
        tube: "t".to_owned(),
        count,
    })
}

fn off(rows: Vec<Row>) -> Takeoff {
    takeoff(
        &Job {
            rows,
            ..Job::default()
        },
        &Allowances::default(),
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
    let jumps: f64 = piece.jumps.iter().map(|jump| jump.perimeter(1e-9)).sum();
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
                    stroke.bounding_box().intersect(inside),
                    stroke.bounding_box()
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
