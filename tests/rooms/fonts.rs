//! Rows of letters from a font file, and insets of filled artwork: pieces of glass against the
//! figures in `tests/reference/outlines` and closed forms, and what is said of them.

use insta::assert_snapshot;
use serde_json::Value;
use tubewright::Job;
use tubewright::book::Allowances;
use tubewright::job::{ArtworkFile, ArtworkLines, ArtworkRow, FontFile, OutlineRow, Row};
use tubewright::rules::Grade;
use tubewright::takeoff::{Takeoff, against_shop, takeoff};

/// Source: `tests/reference/outlines/PROVENANCE.md`; fontTools, shapely.
const GLYPHS: &str = include_str!("../reference/outlines/outline_dejavu.json");
const LETTERS: &[u8] = include_bytes!("../reference/outlines/letters.ttf");
const COMPACT: &[u8] = include_bytes!("../reference/outlines/compact.otf");

fn off(rows: Vec<Row>, fonts: Vec<FontFile>, artwork: Vec<ArtworkFile>) -> Takeoff {
    let job = Job {
        rows,
        fonts,
        artwork,
        ..Job::default()
    };
    // Longer than any letter, so that the findings are of fonts and insets alone.
    let allowances = Allowances {
        longest_piece_mm: 100_000.0,
        ..Allowances::default()
    };
    takeoff(&job, &allowances)
}

fn set(text: &str, height: &str, inset: &str) -> Takeoff {
    let row = OutlineRow {
        text: text.to_owned(),
        height: height.to_owned(),
        font: "letters.ttf".to_owned(),
        inset: inset.to_owned(),
        tube: "t".to_owned(),
        ..OutlineRow::default()
    };
    off(
        vec![Row::Outline(row)],
        vec![FontFile::new("letters.ttf", LETTERS)],
        Vec::new(),
    )
}

fn labels(off: &Takeoff) -> Vec<&str> {
    off.pieces.iter().map(|piece| &*piece.label).collect()
}

fn lit(off: &Takeoff) -> f64 {
    off.pieces.iter().map(|piece| piece.lit.mm()).sum()
}

fn said(off: &Takeoff) -> String {
    let says = off.findings.iter();
    let says: Vec<String> = says
        .map(|finding| format!("{:?}: {}", finding.grade, finding.says))
        .collect();
    says.join("\n").replace('\u{202f}', " ")
}

fn close(found: f64, wanted: f64, within: f64, what: &str) {
    assert!(
        (found - wanted).abs() <= within * wanted,
        "{what}: {found}, reference {wanted}"
    );
}

#[test]
fn the_glass_of_outline_letters_against_other_tools() {
    let file: Value = serde_json::from_str(GLYPHS).expect("the reference");
    let glyphs = file["glyphs"].as_object().expect("glyphs");
    assert_eq!(glyphs.len(), 8, "the reference is whole");
    let number = |value: &Value| value.as_f64().expect("a number");
    for (letter, wanted) in glyphs {
        // H is 1493 units high: a unit of the font is a millimetre.
        let bare = set(letter, "1493 mm", "");
        close(lit(&bare), number(&wanted["perimeter"]), 1e-9, letter);
        assert_eq!(Some(bare.pieces.len() as u64), wanted["contours"].as_u64());
        for distance in ["40", "60"] {
            let found = set(letter, "1493 mm", &format!("{distance} mm"));
            let wanted = number(&wanted["inset"][distance]["perimeter"]);
            close(lit(&found), wanted, 1e-4, &format!("{letter} {distance}"));
        }
    }
}

#[test]
fn each_closed_outline_is_a_piece_with_a_name() {
    let off = set("OAV", "200 mm", "");
    assert_eq!(labels(&off), ["O 1", "O 2", "A 1", "A 2", "V"]);
    assert_eq!(off.findings.len(), 0, "{}", said(&off));
    for piece in &off.pieces {
        assert_eq!(piece.strokes.len(), 1, "one outline");
        assert_eq!(piece.electrodes[0], piece.electrodes[1], "it is closed");
        assert_eq!(piece.hidden.mm(), 0.0, "nothing is painted out");
    }
    // Twice the height is twice the glass.
    close(
        lit(&set("OAV", "400 mm", "")),
        2.0 * lit(&off),
        1e-9,
        "twice",
    );
    // The same letter is the same glass wherever it stands, inset or not.
    for inset in ["", "6 mm"] {
        let twice = set("gAg", "200 mm", inset);
        let (first, last) = (&twice.pieces[..2], &twice.pieces[4..]);
        for (one, other) in first.iter().zip(last) {
            close(one.lit.mm(), other.lit.mm(), 1e-9, "g");
        }
    }
}

#[test]
fn lines_stand_under_each_other_by_their_middles() {
    let off = set("H\n\nHH", "100 mm", "");
    let bounds = |pieces: std::ops::Range<usize>| {
        let strokes = off.pieces[pieces].iter().flat_map(|piece| &piece.strokes);
        let boxes = strokes.map(|stroke| kurbo::Shape::bounding_box(&stroke.path));
        boxes.reduce(|all, one| all.union(one)).expect("strokes")
    };
    let (first, last) = (bounds(0..1), bounds(1..3));
    // Two lines of 1.6 heights down.
    assert!(
        (last.y1 - first.y1 - 320.0).abs() < 1e-9,
        "{first:?} {last:?}"
    );
    assert!((last.center().x - first.center().x).abs() < 1e-9);
    assert_eq!(off.bounds, first.union(last));
}

#[test]
fn what_an_inset_does_to_a_letter_is_told_by_letter() {
    // The reference has it: at 1493 mm g falls into two parts between 40 and 60 mm.
    assert_eq!(said(&set("gO", "1493 mm", "40 mm")), "");
    assert_snapshot!(said(&set("gOg", "1493 mm", "60 mm")), @r"
    Look: Inset by 60 mm, thin places of “g” are gone: each part that is left is a piece of glass of its own.
    Look: Inset by 60 mm, the wall around a counter of “g” is gone: the tube goes in and out there, not around the counter.
    ");
    // The stems are 202 units wide: more than half of that leaves nothing of them.
    let none = set("AH", "1493 mm", "150 mm");
    assert_eq!(none.pieces.len(), 0);
    assert_snapshot!(said(&none), @"Stop: Inset by 150 mm, nothing is left of “A”, “H”: glass and price are without it. Type a smaller inset, or make the letters higher.");
    // The accent of é is thinner than its e.
    assert_snapshot!(said(&set("é", "1493 mm", "85 mm")), @r"
    Look: Inset by 85 mm, a part of “é” vanishes: glass and price are without it.
    Look: Inset by 85 mm, thin places of “é” are gone: each part that is left is a piece of glass of its own.
    Look: Inset by 85 mm, the wall around a counter of “é” is gone: the tube goes in and out there, not around the counter.
    ");
    assert_snapshot!(said(&set("8", "1493 mm", "82 mm")), @r"
    Look: Inset by 82 mm, thin places of “8” are gone: each part that is left is a piece of glass of its own.
    Look: Inset by 82 mm, the wall around a counter of “8” is gone: the tube goes in and out there, not around the counter.
    ");
    assert_snapshot!(said(&set("é", "10 mm", "")), @"Look: An outline of “é” is shorter than 10 mm all round: no glass is bent so small.");
}

#[test]
fn both_sides_of_a_stem_need_room_for_the_tube() {
    let font = "letters.ttf";
    let told = |text: &str, height: &str, inset: &str| {
        let row = OutlineRow {
            text: text.to_owned(),
            height: height.to_owned(),
            font: font.to_owned(),
            inset: inset.to_owned(),
            tube: "15 mm neon".to_owned(),
            ..OutlineRow::default()
        };
        let job = Job {
            rows: vec![Row::Outline(row)],
            fonts: vec![FontFile::new(font, LETTERS)],
            ..Job::default()
        };
        let book = tubewright::book::starter();
        let off = takeoff(&job, &book.allowances);
        let near = against_shop(&off, &job, &book);
        let near = near.iter().map(|finding| finding.says.as_str());
        let near: Vec<&str> = near
            .filter(|says| says.contains("centre to centre"))
            .collect();
        near.join("\n")
    };
    // The stem of H is 202 of 1493 units wide (its outline, read with fontTools): 202 mm, and less
    // 2 x 86 mm are 30 mm, twice the tube.
    assert_eq!(told("HO", "1493 mm", ""), "");
    assert_eq!(told("H", "1493 mm", "85.9 mm"), "");
    assert_snapshot!(told("H", "1493 mm", "88 mm"), @"“H 1, part 1” runs back 26 mm beside itself, centre to centre, and 1 more stroke does; the shop's least is 30 mm, 2 diameters.");
    // At 200 mm its bar, 170 units, is 22.8 mm wide; O comes as near to its counter.
    assert_snapshot!(told("HO", "200 mm", ""), @r"
    “O 1” and “O 2” come within 21.9 mm of each other, centre to centre; the shop's least is 30 mm, 2 diameters.
    “H” runs back 22.7 mm beside itself, centre to centre; the shop's least is 30 mm, 2 diameters.
    ");
}

#[test]
fn an_inset_that_is_not_taken_leaves_the_tube_on_the_outline() {
    let bare = lit(&set("O", "200 mm", ""));
    for zero in ["0", "0 mm", "  "] {
        assert_eq!(lit(&set("O", "200 mm", zero)), bare, "{zero:?}");
    }
    for (typed, what) in [
        ("2 km", "unreadable"),
        ("-3 mm", "negative"),
        ("1001 mm", "too far"),
    ] {
        let off = set("O", "200 mm", typed);
        assert_eq!(lit(&off), bare, "{what}");
        assert_eq!(off.findings[0].grade, Grade::Stop, "{what}");
    }
    assert_snapshot!(said(&set("O", "200 mm", "6 hands")), @"Stop: Inset: expected “+”, “x” or the end, but found “hands” at character 3 of “6 hands”; units are mm, cm, m, in or ft: the tube follows the outline itself.");
    assert_snapshot!(said(&set("O", "200 mm", "1001 mm")), @"Stop: Inset: the inset must be 0 to 1000 mm (no letter that is made is so thick that more would leave anything of it), but is 1001 mm: the tube follows the outline itself.");
}

#[test]
fn what_is_wrong_with_a_font_stands_in_a_sentence() {
    let row = |text: &str, font: &str| {
        vec![Row::Outline(OutlineRow {
            text: text.to_owned(),
            height: "200 mm".to_owned(),
            font: font.to_owned(),
            tube: "t".to_owned(),
            ..OutlineRow::default()
        })]
    };
    let fonts = || {
        vec![
            FontFile::new("compact.otf", COMPACT),
            FontFile::new("cut.ttf", &LETTERS[..400]),
            FontFile {
                name: "typed.ttf".to_owned(),
                data: "no base64!".into(),
            },
        ]
    };
    let told = |text: &str, font: &str| said(&off(row(text, font), fonts(), Vec::new()));
    assert_snapshot!(told("A", "gone.ttf"), @"Stop: The font file “gone.ttf” is not in this job: open it again.");
    assert_snapshot!(told("A", ""), @"Stop: No font is chosen: choose one, or open a font file.");
    assert_snapshot!(told("A", "cut.ttf"), @"Stop: “cut.ttf”: The font cannot be used: it has no outlines, only pictures or nothing.");
    assert_snapshot!(told("A", "typed.ttf"), @"Stop: “typed.ttf”: Its data is damaged; expected the bytes of a font file in base64.");
    assert_snapshot!(told(" ", "compact.otf"), @"Look: Nothing to make: the row has no letters.");
    assert_snapshot!(told("AB\nVé", "compact.otf"), @"Stop: The font “Tubewright Compact Test” has no shape that can be used for “B” (line 1, character 2), “é” (line 2, character 2): glass and price are without it. Use another font, or give it as strokes.");
    assert_eq!(told("AVO", "compact.otf"), "");
    let high = set("O", "9 m", "");
    assert_eq!(high.pieces.len(), 0);
    assert!(
        said(&high).contains("Letter height must be"),
        "{}",
        said(&high)
    );
}

/// A filled ring by a rule of what is inside, a filled bar of another element that runs the other
/// way, an open filled edge, and a plain line; all red, a unit a millimetre.
fn ring(rule: &str) -> String {
    format!(
        r##"<svg xmlns="http://www.w3.org/2000/svg" width="300mm" height="100mm" viewBox="0 0 300 100">
        <path fill="#ff0000" fill-rule="{rule}" d="M0 0 H100 V100 H0 Z M20 20 H80 V80 H20 Z"/>
        <path fill="#ff0000" d="M110 0 V100 H150 V0 Z"/>
        <path fill="#ff0000" d="M160 0 H200 V50"/>
        <path stroke="#ff0000" fill="none" d="M210 0 H300"/></svg>"##
    )
}

fn inset_art(svg: &str, inset: &str) -> Takeoff {
    let row = ArtworkRow {
        label: "Sign".to_owned(),
        file: "a.svg".to_owned(),
        lines: vec![ArtworkLines {
            colour: Some("#ff0000".to_owned()),
            tube: "t".to_owned(),
            inset: inset.to_owned(),
            ..ArtworkLines::default()
        }],
        ..ArtworkRow::default()
    };
    let file = ArtworkFile {
        name: "a.svg".to_owned(),
        text: svg.into(),
    };
    off(vec![Row::Artwork(row)], Vec::new(), vec![file])
}

fn lengths(off: &Takeoff) -> Vec<f64> {
    let mut lengths: Vec<f64> = off.pieces.iter().map(|piece| piece.lit.mm()).collect();
    lengths.sort_by(f64::total_cmp);
    lengths
}

fn are(off: &Takeoff, wanted: &[f64]) {
    let found = lengths(off);
    assert_eq!(found.len(), wanted.len(), "{found:?}, not {wanted:?}");
    for (found, wanted) in found.iter().zip(wanted) {
        close(*found, *wanted, 1e-4, "a piece");
    }
}

#[test]
fn filled_artwork_is_inset_with_its_holes() {
    use std::f64::consts::PI;
    // On the edge: the line, the open edge, the hole, the bar, the ring.
    are(
        &inset_art(&ring("evenodd"), ""),
        &[90.0, 90.0, 240.0, 280.0, 400.0],
    );
    // 8 inside: the ring is 84 square, the bar 24 by 84; the hole grows to sides of 60 with quarter
    // circles of 8 at its corners. The line and the open edge stay.
    let hole = 240.0 + 16.0 * PI;
    are(
        &inset_art(&ring("evenodd"), "8 mm"),
        &[90.0, 90.0, 216.0, hole, 336.0],
    );
    // By winding the inner square runs with the outer and is no hole: only the outer edge is left.
    are(
        &inset_art(&ring("nonzero"), "8 mm"),
        &[90.0, 90.0, 216.0, 336.0],
    );
    assert_snapshot!(said(&inset_art(&ring("evenodd"), "")), @"Note: 4 of the lines of #ff0000 are edges of filled areas: the tube follows the edge itself. Type an inset to run it that far inside.");
    assert_snapshot!(said(&inset_art(&ring("evenodd"), "8 mm")), @r"
    Note: 4 of the lines of #ff0000 are edges of filled areas: the tube runs 8 mm inside the edge. Leave the inset empty to run it on the edge itself.
    Look: 1 of the lines of #ff0000 is the edge of a filled area and not closed: not inset, but left where drawn.
    ");
    // The walls of the ring are 20 thick, the bar 40.
    assert_snapshot!(said(&inset_art(&ring("evenodd"), "11 mm")), @r"
    Note: 4 of the lines of #ff0000 are edges of filled areas: the tube runs 11 mm inside the edge. Leave the inset empty to run it on the edge itself.
    Look: 1 of the lines of #ff0000 is the edge of a filled area and not closed: not inset, but left where drawn.
    Look: Inset by 11 mm, of the filled areas of #ff0000 an area falls into more parts, and a hole runs into another or into the outside. Look at the picture.
    ");
    assert_snapshot!(said(&inset_art(&ring("evenodd"), "30 mm")), @r"
    Note: 4 of the lines of #ff0000 are edges of filled areas: the tube runs 30 mm inside the edge. Leave the inset empty to run it on the edge itself.
    Look: 1 of the lines of #ff0000 is the edge of a filled area and not closed: not inset, but left where drawn.
    Stop: Inset by 30 mm, nothing is left of the filled areas of #ff0000: glass and price are without them. Type a smaller inset, or make it wider.
    ");
    assert_snapshot!(said(&inset_art(&ring("evenodd"), "3 hands")), @r"
    Stop: Inset of #ff0000: expected “+”, “x” or the end, but found “hands” at character 3 of “3 hands”; units are mm, cm, m, in or ft: the tube follows the outline itself.
    Note: 4 of the lines of #ff0000 are edges of filled areas: the tube follows the edge itself. Type an inset to run it that far inside.
    ");
}

#[test]
fn areas_that_cover_each_other_are_one() {
    // Two squares of 100 that run against each other and share a strip of 20: one of 180 by 100.
    let svg = r##"<svg xmlns="http://www.w3.org/2000/svg" width="180mm" height="100mm" viewBox="0 0 180 100">
        <path fill="#ff0000" d="M0 0 H100 V100 H0 Z"/>
        <path fill="#ff0000" d="M80 0 V100 H180 V0 Z"/></svg>"##;
    close(lit(&inset_art(svg, "")), 800.0, 1e-9, "on their edges");
    are(&inset_art(svg, "10 mm"), &[2.0 * (160.0 + 80.0)]);
}

#[test]
fn an_inset_of_plain_lines_is_asked_about() {
    let svg = r##"<svg xmlns="http://www.w3.org/2000/svg" width="90mm" height="90mm" viewBox="0 0 90 90">
        <path stroke="#ff0000" fill="none" d="M0 0 H90 V90 Z"/></svg>"##;
    assert_snapshot!(said(&inset_art(svg, "5 mm")), @"Look: None of the lines of #ff0000 is the closed edge of a filled area: they stay where they are, without an inset.");
    assert_eq!(
        lengths(&inset_art(svg, "5 mm")),
        lengths(&inset_art(svg, ""))
    );
}
