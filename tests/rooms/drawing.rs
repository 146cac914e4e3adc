//! The faces against the stroke lengths in `tests/reference/letters`.

use kurbo::{BezPath, ParamCurveArclen, Shape};
use tubewright::drawing::{Shaped, face, faces};

/// Source: `tests/reference/letters/PROVENANCE.md`; an independent reader of the same files.
const LENGTHS: &str = include_str!("../reference/letters/stroke_lengths_caps.csv");

/// Length of all strokes.
fn strokes_mm(shaped: &Shaped) -> f64 {
    let strokes = shaped.letters.iter().flat_map(|letter| &letter.strokes);
    strokes
        .flat_map(BezPath::segments)
        .map(|segment| segment.arclen(1e-9))
        .sum()
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
                shaped.letters[0].strokes.len(),
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
        let left = |text: &str| x(text).expect("a letter").strokes[0].bounding_box().x0;
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
