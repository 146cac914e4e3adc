//! The faces against the stroke lengths in `tests/reference/letters`.

use kurbo::{Point, Rect, Shape};
use proptest::prelude::*;
use tubewright::drawing::{Align, Bend, BendBy, Layout, Letter, NoArc, Shaped, face, faces};

/// Source: `tests/reference/letters/PROVENANCE.md`; an independent reader of the same files.
const LENGTHS: &str = include_str!("../reference/letters/stroke_lengths_caps.csv");

/// Length of all strokes.
fn strokes_mm(shaped: &Shaped) -> f64 {
    let strokes = shaped.letters.iter().flat_map(Letter::strokes);
    strokes.map(|stroke| stroke.perimeter(1e-9)).sum()
}

/// The rows of the table: letter, strokes and length over cap height of one face.
fn table(file: &str) -> Vec<(char, usize, f64)> {
    let mut reader = csv::Reader::from_reader(LENGTHS.as_bytes());
    let headers = reader
        .headers()
        .expect("the table has a first line")
        .clone();
    let column = |name: &str| {
        headers
            .iter()
            .position(|header| header == name)
            .expect("a column")
    };
    let (letter, pieces, length) = (
        column("letter"),
        column(&format!("{file}_pieces")),
        column(&format!("{file}_len_per_cap")),
    );
    reader
        .records()
        .map(|record| {
            let record = record.expect("a row of the table");
            (
                record[letter].parse().expect("one letter"),
                record[pieces].parse().expect("a count of strokes"),
                record[length].parse().expect("a length"),
            )
        })
        .collect()
}

/// Every capital of a face against a column of the table, and the sum printed in its provenance.
fn check(name: &str, file: &str, printed_sum: f64) {
    let face = face(name).expect("the face is shipped");
    let table = table(file);
    let letters: String = table.iter().map(|&(letter, ..)| letter).collect();
    assert_eq!(letters, "ABCDEFGHIJKLMNOPQRSTUVWXYZ", "the table is whole");
    for height_mm in [100.0, 457.2] {
        let mut sum = 0.0;
        for &(letter, strokes, per_cap) in &table {
            let shaped = face.shape(&letter.to_string(), height_mm);
            let found = strokes_mm(&shaped) / height_mm;
            assert!(
                (found - per_cap).abs() < 1e-9,
                "{name} {letter} at {height_mm} mm: {found}, reference {per_cap}"
            );
            assert_eq!(
                shaped.letters[0].own.len(),
                strokes,
                "strokes of {name} {letter}"
            );
            sum += found;
        }
        assert!(
            (sum - printed_sum).abs() < 5e-7,
            "{name} A to Z: {sum}, reference {printed_sum}"
        );
    }
}

#[test]
fn capitals_of_the_sans_face() {
    check("sans", "rowmans", 67.480_859);
}

#[test]
fn capitals_of_the_script_face() {
    check("script", "scripts", 103.715_126);
}

/// Source: `tests/reference/letters/PROVENANCE.md`; two other readers of the file the face was made of.
const ACCENTS: &str = include_str!("../reference/letters/readability_lengths.csv");
/// Height of H in that file, from the same source.
const ACCENTS_CAP: f64 = 629.9;

#[test]
fn every_letter_of_the_face_with_accents() {
    let face = face("accents").expect("the face is shipped");
    let (mut letters, mut capitals) = (0, 0.0);
    for record in csv::Reader::from_reader(ACCENTS.as_bytes()).records() {
        let record = record.expect("a row of the table");
        let code = u32::from_str_radix(&record[0], 16).expect("a code point");
        let letter = char::from_u32(code).expect("a character");
        let once: f64 = record[3].parse().expect("a length");
        for height_mm in [100.0, 457.2] {
            let shaped = face.shape(&letter.to_string(), height_mm);
            assert_eq!(shaped.missing, [], "{letter}");
            let (found, per_cap) = (strokes_mm(&shaped) / height_mm, once / ACCENTS_CAP);
            assert!(
                (found - per_cap).abs() < 1e-9,
                "{letter} at {height_mm} mm: {found}, reference {per_cap}"
            );
        }
        // How far the pen moves on: where the next letter begins, less where it begins after nothing.
        let advance: f64 = record[1].parse().expect("a figure");
        let x = |text: &str| face.shape(text, ACCENTS_CAP).letters.pop();
        let left = |text: &str| x(text).expect("a letter").strokes()[0].bounding_box().x0;
        let moved = left(&format!("{letter}I")) - left("I");
        assert!((moved - advance).abs() < 1e-9, "{letter}: {moved}");
        letters += 1;
        if letter.is_ascii_uppercase() {
            capitals += once / ACCENTS_CAP;
        }
    }
    assert_eq!(letters, 206, "the table is whole");
    assert!((capitals - 65.475_990).abs() < 5e-7, "{capitals}");
}

/// Source: `tests/reference/letters/PROVENANCE.md`; svgpathtools on the SVG fonts themselves.
const FONTS: &str = include_str!("../reference/letters/svgfont_caps.json");

/// Height of H and length of each capital of one of those fonts, in its units.
fn capitals(font: &str) -> (f64, Vec<(char, f64)>) {
    let fonts: serde_json::Value = serde_json::from_str(FONTS).expect("the reference");
    let font = &fonts["faces"][font];
    let lengths = font["len_units"].as_object().expect("lengths");
    assert_eq!(lengths.len(), 26, "the reference is whole");
    let lengths = lengths.iter().map(|(letter, length)| {
        let letter = letter.parse().expect("one letter");
        (letter, length.as_f64().expect("a length"))
    });
    let height = font["H_extent"].as_f64().expect("a height");
    (height, lengths.collect())
}

#[test]
fn capitals_of_the_face_with_accents_are_those_of_its_font() {
    let (height, lengths) = capitals("EMSReadability");
    let face = face("accents").expect("the face is shipped");
    let shaped = |letter: char| face.shape(&letter.to_string(), height);
    assert!((shaped('H').bounds.height() - height).abs() < 1e-9);
    // How far the font goes back over its own lines: what it draws less what shines.
    let mut twice = std::collections::BTreeMap::new();
    for row in csv::Reader::from_reader(ACCENTS.as_bytes()).records() {
        let row = row.expect("a row of the table");
        let figure = |at: usize| row[at].parse::<f64>().expect("a figure");
        let code = u32::from_str_radix(&row[0], 16).expect("a code point");
        twice.insert(code, figure(2) - figure(3));
    }
    let mut went_back = String::new();
    for (letter, drawn) in lengths {
        let back = twice[&u32::from(letter)];
        if back > 0.0 {
            went_back.push(letter);
        }
        let found = strokes_mm(&shaped(letter)) + back;
        assert!(
            (found - drawn).abs() < 1e-6,
            "{letter}: {found}, the font draws {drawn}"
        );
    }
    assert_eq!(went_back, "ABEFHRTY");
}

#[test]
fn capitals_of_the_other_faces_are_near_their_rounded_copies() {
    for (name, font) in [("sans", "HersheySans1"), ("script", "HersheyScript1")] {
        let (height, lengths) = capitals(font);
        let face = face(name).expect("the face is shipped");
        for (letter, drawn) in lengths {
            let found = strokes_mm(&face.shape(&letter.to_string(), height));
            assert!(
                (found / drawn - 1.0).abs() < 2e-3,
                "{name} {letter}: {found}, the copy draws {drawn}"
            );
        }
    }
}

#[test]
fn what_a_shop_abroad_writes_is_there() {
    let shaped = |text: &str| face("accents").expect("shipped").shape(text, 100.0);
    for text in [
        "CAFÉ NOËL",
        "Käsespätzle Grüße",
        "Smørrebrød på Ås",
        "Año ¿Qué?",
        "Œ",
        "ÇA VA “été” – 5 €",
        "PÃO",
        "İstanbul ğış",
    ] {
        let missing = shaped(text).missing;
        let expected: &[(usize, char)] = if text == "Œ" { &[(0, 'Œ')] } else { &[] };
        assert_eq!(missing, expected, "{text}");
    }
    // Named as missing, never drawn as something like it.
    assert_eq!(shaped("Łódź’").missing, [(0, 'Ł'), (3, 'ź'), (4, '’')]);
}

#[test]
fn a_capital_is_as_high_as_asked() {
    // H is the cap height by definition; it stands on the baseline.
    for name in ["sans", "accents"] {
        let bounds = face(name).expect("shipped").shape("H", 250.0).bounds;
        assert!(
            (bounds.y0 + 250.0).abs() < 1e-9 && bounds.y1.abs() < 1e-9,
            "{name}: {bounds:?}"
        );
    }
}

#[test]
fn characters_without_a_shape_are_named_with_their_place() {
    for face in faces().iter().filter(|face| face.name != "accents") {
        let missing = |text: &str| face.shape(text, 100.0).missing;
        assert_eq!(missing("CAFÉ"), [(3, 'É')], "{}", face.name);
        assert_eq!(
            missing("é🍕B\u{7f}"),
            [(0, 'é'), (1, '🍕'), (3, '\u{7f}')],
            "{}",
            face.name
        );
        assert_eq!(missing("A\u{200d}"), [(1, '\u{200d}')], "{}", face.name);
        assert_eq!(missing(""), [], "{}", face.name);
        // The rest of the text is there as if the character had not been typed.
        let (with, without) = (face.shape("CAéFE", 100.0), face.shape("CAFE", 100.0));
        assert_eq!(strokes_mm(&with), strokes_mm(&without), "{}", face.name);
    }
}

#[test]
fn every_printable_ascii_character_has_a_shape() {
    let all: String = (' '..='~').collect();
    for face in faces() {
        let shaped = face.shape(&all, 100.0);
        assert_eq!(shaped.missing, [], "{}", face.name);
        assert_eq!(
            shaped.letters.len(),
            94,
            "95 characters, one of them the space; {}",
            face.name
        );
    }
}

#[test]
fn spaces_part_words_and_have_no_strokes() {
    let shaped = faces()[1].shape("ab c\u{a0}d", 100.0);
    let words: Vec<(char, usize)> = shaped
        .letters
        .iter()
        .map(|letter| (letter.character, letter.word))
        .collect();
    assert_eq!(words, [('a', 0), ('b', 0), ('c', 1), ('d', 2)]);
}

fn laid_out(text: &str, how: &Layout) -> Shaped {
    let sans = face("sans").expect("shipped");
    sans.lay_out(text, how).expect("it stands on its arc")
}

fn near(found: f64, expect: f64) {
    assert!((found - expect).abs() < 1e-9, "{found}, by hand {expect}");
}

/// Boxes of the letters.
fn boxes(shaped: &Shaped) -> Vec<Rect> {
    let whole = |letter: &Letter| {
        letter
            .strokes()
            .iter()
            .map(Shape::bounding_box)
            .reduce(|all, one| all.union(one))
    };
    shaped.letters.iter().filter_map(whole).collect()
}

/// The I is one upright line, drawn from the top: its head and foot.
fn upright(letter: &Letter) -> [Point; 2] {
    let line = letter.strokes()[0]
        .segments()
        .next()
        .expect("a line")
        .as_line()
        .expect("straight");
    [line.p0, line.p1]
}

#[test]
fn wider_letters_are_wider_and_as_high() {
    // Sans, 21 units high. H: two stems of 21 and a bar of 14. A: two slants of 8 by 21 and a bar of
    // 10 by 0; its letters begin and end where H's and A's do.
    for width in [0.5, 1.0, 1.5, 2.0] {
        let how = Layout {
            width,
            ..Layout::plain(21.0)
        };
        near(strokes_mm(&laid_out("H", &how)), 42.0 + 14.0 * width);
        near(
            strokes_mm(&laid_out("A", &how)),
            2.0 * (8.0 * width).hypot(21.0) + 10.0 * width,
        );
        let all = laid_out("AH", &how).bounds;
        near(all.height(), 21.0);
        near(
            all.width(),
            laid_out("AH", &Layout::plain(21.0)).bounds.width() * width,
        );
    }
}

#[test]
fn spacing_comes_after_each_character() {
    let at = |spacing| {
        boxes(&laid_out(
            "II I",
            &Layout {
                spacing,
                ..Layout::plain(21.0)
            },
        ))
    };
    let (usual, wide) = (at(0.0), at(3.5));
    for (letter, characters_before) in [(0, 0.0), (1, 1.0), (2, 3.0)] {
        near(wide[letter].x0 - usual[letter].x0, 3.5 * characters_before);
    }
}

#[test]
fn lines_stand_under_each_other() {
    for (align, edge) in [
        (Align::Left, (|b| b.x0) as fn(&Rect) -> f64),
        (Align::Centre, |b| b.center().x),
        (Align::Right, |b| b.x1),
    ] {
        let how = Layout {
            align,
            pitch: 30.0,
            ..Layout::plain(21.0)
        };
        let shaped = laid_out("HELLO\n\nH", &how);
        let all = boxes(&shaped);
        let first = all[..5]
            .iter()
            .copied()
            .reduce(|all, one| all.union(one))
            .expect("five letters");
        near(edge(&first), edge(&all[5]));
        // The line between is empty and takes its room.
        near(all[5].y1, 60.0);
        assert_eq!(shaped.letters[5].word, 2, "words go on over lines");
    }
    // A line break is a character as any other when those without a shape are counted.
    assert_eq!(laid_out("A\nÉ", &Layout::plain(21.0)).missing, [(2, 'É')]);
}

#[test]
fn letters_stand_upright_on_their_arc() {
    let apart = Layout {
        spacing: 40.0,
        ..Layout::plain(21.0)
    };
    for hangs in [false, true] {
        for rise in [0.5, 5.0, 20.0, 60.0] {
            let bend = Bend {
                by: BendBy::Rise(rise),
                hangs,
            };
            let how = Layout {
                bend: Some(bend),
                ..apart
            };
            let straight = laid_out("IIIII", &apart).bounds.width();
            let shaped = laid_out("IIIII", &how);
            let lines: Vec<[Point; 2]> = shaped.letters.iter().map(upright).collect();
            let down = if hangs { -1.0 } else { 1.0 };
            // The middle of the line is as much above its ends as asked, or below.
            near(lines[2][1].y, 0.0);
            near(lines[0][1].y, rise * down);
            near(lines[4][1].y, rise * down);
            // The radius by the chord and the rise; the arc between the ends is as long as the line.
            let half_chord = f64::midpoint(lines[4][1].x, -lines[0][1].x);
            let radius = (half_chord * half_chord + rise * rise) / (2.0 * rise);
            let half_angle = half_chord.atan2(radius - rise);
            near(2.0 * radius * half_angle, straight);
            let centre = Point::new(0.0, radius * down);
            for [head, foot] in lines {
                near(foot.distance(centre), radius);
                // Head, foot and centre on one line, the head outside of an arc that stands.
                near(head.distance(centre), radius + 21.0 * down);
            }
            // The same arc by its radius.
            let by = BendBy::Radius(radius);
            let same = laid_out(
                "IIIII",
                &Layout {
                    bend: Some(Bend { by, hangs }),
                    ..how
                },
            );
            near(
                upright(&same.letters[0])[0].x,
                upright(&shaped.letters[0])[0].x,
            );
        }
    }
}

#[test]
fn lines_on_arcs_share_their_centre() {
    for (hangs, down) in [(false, 1.0), (true, -1.0)] {
        for align in [Align::Left, Align::Centre, Align::Right] {
            let bend = Some(Bend {
                by: BendBy::Radius(100.0),
                hangs,
            });
            let how = Layout {
                bend,
                align,
                pitch: 40.0,
                ..Layout::plain(21.0)
            };
            let shaped = laid_out("IIII\nI", &how);
            let (centre, lower) = (
                Point::new(0.0, 100.0 * down),
                upright(&shaped.letters[4])[1],
            );
            near(lower.distance(centre), 100.0 - 40.0 * down);
            // The lower line is on the ray through the first, the middle or the last of the upper.
            let along = |point: Point| (point.x / ((centre.y - point.y) * down)).atan();
            let feet: Vec<f64> = shaped.letters[..4]
                .iter()
                .map(|l| along(upright(l)[1]))
                .collect();
            let ray = match align {
                Align::Left => feet[0],
                Align::Centre => f64::midpoint(feet[1], feet[2]),
                Align::Right => feet[3],
            };
            near(along(lower), ray);
        }
    }
}

#[test]
fn an_arc_that_is_too_small_is_refused_with_what_will_do() {
    let sans = face("sans").expect("shipped");
    let on = |by, hangs| {
        let bend = Some(Bend { by, hangs });
        sans.lay_out(
            "HELLO WORLD\nHI",
            &Layout {
                bend,
                ..Layout::plain(21.0)
            },
        )
    };
    for hangs in [false, true] {
        let Err(NoArc::Radius { least }) = on(BendBy::Radius(1.0), hangs) else {
            panic!("a radius of 1");
        };
        assert!(on(BendBy::Radius(least), hangs).is_ok(), "{least}");
        assert!(on(BendBy::Radius(least * 0.999), hangs).is_err(), "{least}");
        let Err(NoArc::Rise { most }) = on(BendBy::Rise(1e3), hangs) else {
            panic!("a rise of 1000");
        };
        assert!(on(BendBy::Rise(most), hangs).is_ok(), "{most}");
        assert!(on(BendBy::Rise(most * 1.001), hangs).is_err(), "{most}");
    }
    // One upright line has no width to rise over; a text of nothing stands anywhere.
    let bend = Some(Bend {
        by: BendBy::Rise(5.0),
        hangs: false,
    });
    let how = Layout {
        bend,
        ..Layout::plain(21.0)
    };
    assert_eq!(
        sans.lay_out("I", &how).map(|_| ()),
        Err(NoArc::Rise { most: 0.0 })
    );
    assert!(sans.lay_out(" \n ", &how).is_ok());
}

#[test]
fn a_turned_text_rises_to_the_right() {
    let how = Layout {
        turned: 90.0,
        ..Layout::plain(21.0)
    };
    let turned = laid_out("HI", &how);
    let straight = laid_out("HI", &Layout::plain(21.0));
    near(turned.bounds.height(), straight.bounds.width());
    near(turned.bounds.width(), 21.0);
    let all = boxes(&turned);
    assert!(all[1].y1 < all[0].y0, "I is above H: {all:?}");
}

proptest! {
    #[test]
    fn letters_are_turned_never_bent(
        text in "[A-Za-z0-9ÀÉçß&@ \n]{1,40}",
        name in prop::sample::select(vec!["sans", "script", "accents"]),
        width in 0.5..2.0,
        spacing in -4.0..20.0,
        turned in -180.0..180.0,
        rise in 0.1..30.0,
        hangs: bool,
    ) {
        let face = face(name).expect("shipped");
        let straight = Layout { width, spacing, ..Layout::plain(21.0) };
        let bend = Some(Bend { by: BendBy::Rise(rise), hangs });
        let lengths = |how: &Layout| face.lay_out(&text, how).map(|shaped| {
            let letters = shaped.letters.iter();
            let lengths = letters.map(|l| l.strokes().iter().map(|s| s.perimeter(1e-9)).sum::<f64>());
            lengths.collect::<Vec<f64>>()
        });
        let flat = lengths(&straight).expect("straight");
        if let Ok(bent) = lengths(&Layout { bend, turned, ..straight }) {
            prop_assert_eq!(flat.len(), bent.len());
            for (flat, bent) in flat.iter().zip(bent) {
                prop_assert!((flat - bent).abs() < 1e-8 * (1.0 + flat), "{} {}", flat, bent);
            }
        }
    }
}
