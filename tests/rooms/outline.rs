//! Letters of a font and their insets, against the figures in `tests/reference/outlines`, closed
//! forms, and damaged files.

use kurbo::{Affine, BezPath, ParamCurveArclen, ParamCurveNearest, Point, Rect, Shape, Vec2};
use proptest::prelude::*;
use serde_json::Value;
use tubewright::drawing::outline::{CapHeight, Font, Inset, Join, MOST_BYTES, inset};

/// Source of both: `tests/reference/outlines/PROVENANCE.md`; fontTools, svgpathtools, shapely.
const GLYPHS: &str = include_str!("../reference/outlines/outline_dejavu.json");
/// The same; `HarfBuzz`.
const LINES: &str = include_str!("../reference/outlines/layout.json");
const LETTERS: &[u8] = include_bytes!("../reference/outlines/letters.ttf");
const COMPACT: &[u8] = include_bytes!("../reference/outlines/compact.otf");
/// Height of H in the units of both fonts: letters this high in millimetres have the figures of the
/// references.
const CAP_UNITS: f64 = 1493.0;

fn letters() -> Font {
    Font::read(LETTERS).expect("the font of the references")
}

fn compact() -> Font {
    Font::read(COMPACT).expect("the compact font of the references")
}

/// The outlines of one letter, a unit of the font to a millimetre.
fn outlines(font: &Font, letter: &str) -> Vec<BezPath> {
    let shaped = font.shape(letter, CAP_UNITS);
    assert_eq!(shaped.missing, [], "{letter}");
    shaped.letters[0].contours.clone()
}

fn length(paths: &[BezPath]) -> f64 {
    let segments = paths.iter().flat_map(BezPath::segments);
    segments.map(|segment| segment.arclen(1e-9)).sum()
}

fn area(paths: &[BezPath]) -> f64 {
    paths.iter().map(Shape::area).sum::<f64>().abs()
}

fn polygon(points: &[(f64, f64)]) -> BezPath {
    let mut path = BezPath::new();
    path.move_to(points[0]);
    for &point in &points[1..] {
        path.line_to(point);
    }
    path.close_path();
    path
}

fn close(found: f64, wanted: f64, within: f64, what: &str) {
    assert!(
        (found - wanted).abs() <= within * wanted.abs(),
        "{what}: {found}, reference {wanted}"
    );
}

fn number(value: &Value) -> f64 {
    value.as_f64().expect("a number of the reference")
}

fn glyphs() -> Vec<(String, Value)> {
    let file: Value = serde_json::from_str(GLYPHS).expect("the reference");
    let glyphs = file["glyphs"].as_object().expect("glyphs");
    assert_eq!(glyphs.len(), 8, "the reference is whole");
    glyphs.clone().into_iter().collect()
}

#[test]
fn outlines_of_a_font_against_other_readers() {
    let font = letters();
    assert_eq!(font.name(), "Tubewright Outline Test");
    assert_eq!(font.cap_height(), CapHeight::Letter);
    assert_eq!(font.notes(), [""; 0]);
    for (letter, wanted) in glyphs() {
        let found = outlines(&font, &letter);
        close(length(&found), number(&wanted["perimeter"]), 1e-9, &letter);
        close(area(&found), number(&wanted["area"]), 1e-9, &letter);
        assert_eq!(Some(found.len() as u64), wanted["contours"].as_u64());
        let bounds = font.shape(&letter, CAP_UNITS).bounds;
        // The reference has y upwards.
        let sides = [bounds.x0, -bounds.y1, bounds.x1, -bounds.y0];
        for (found, wanted) in sides
            .iter()
            .zip(wanted["bounds"].as_array().expect("a box"))
        {
            assert!(
                (found - number(wanted)).abs() < 0.5,
                "{letter}: box {sides:?}, reference {wanted}"
            );
        }
    }
}

#[test]
fn compact_outlines_draw_the_same_letters() {
    // Quadratic curves raised to cubics are the same curves; the file rounds to 1/65536 unit.
    let font = compact();
    assert_eq!(font.cap_height(), CapHeight::Table, "it has no H");
    for letter in ["A", "O", "V"] {
        let (found, wanted) = (outlines(&font, letter), outlines(&letters(), letter));
        assert_eq!(found.len(), wanted.len(), "{letter}");
        close(length(&found), length(&wanted), 1e-6, letter);
        close(area(&found), area(&wanted), 1e-6, letter);
    }
}

/// Where letters begin against the reference: each letter's box against its box alone.
fn check_lines(font: &Font, file: &str) {
    let lines: Value = serde_json::from_str(LINES).expect("the reference");
    let lines = lines[file].as_array().expect("lines");
    assert!(lines.len() > 1, "the reference is whole");
    for line in lines {
        let text = line["text"].as_str().expect("a text");
        let shaped = font.shape(text, CAP_UNITS);
        let wanted = line["origins"].as_array().expect("origins");
        assert_eq!(shaped.letters.len(), wanted.len(), "{text}");
        for (letter, wanted) in shaped.letters.iter().zip(wanted) {
            let alone = &outlines(font, &letter.character.to_string())[0];
            let moved = letter.contours[0].bounding_box().x0 - alone.bounding_box().x0;
            assert!(
                (moved - number(wanted)).abs() < 1e-6,
                "{} of “{text}” begins at {moved}, reference {wanted}",
                letter.character
            );
        }
    }
}

#[test]
fn letters_stand_where_harfbuzz_sets_them() {
    check_lines(&letters(), "letters.ttf");
    check_lines(&compact(), "compact.otf");
}

#[test]
fn a_font_without_pair_features_is_kerned_by_its_table() {
    // The kern table has the same pairs as the feature, A V −131 among them.
    let mut bytes = LETTERS.to_vec();
    let at = bytes.windows(4).position(|tag| tag == b"GPOS");
    bytes[at.expect("a GPOS table") + 3] = b'T';
    let font = Font::read(&bytes).expect("still a font");
    check_lines(&font, "letters.ttf");
    // Without either, letters stand by their widths alone: A is 1401 wide.
    let at = bytes.windows(4).position(|tag| tag == b"kern");
    bytes[at.expect("a kern table") + 3] = b'o';
    let font = Font::read(&bytes).expect("still a font");
    let wide = font.shape("AV", CAP_UNITS).letters[1].contours[0].bounding_box();
    let alone = outlines(&font, "V")[0].bounding_box();
    assert!((wide.x0 - alone.x0 - 1401.0).abs() < 1e-6, "{wide:?}");
}

#[test]
fn a_capital_is_as_high_as_asked_and_words_are_counted() {
    let shaped = letters().shape("HO\u{a0}H  A", 250.0);
    let first = shaped.letters[0].contours[0].bounding_box();
    assert!((first.y0 + 250.0).abs() < 1e-9 && first.y1.abs() < 1e-9);
    let words: Vec<_> = shaped
        .letters
        .iter()
        .map(|l| (l.character, l.word))
        .collect();
    assert_eq!(words, [('H', 0), ('O', 0), ('H', 1), ('A', 3)]);
    for height in [0.0, -1.0, f64::NAN, f64::INFINITY] {
        let shaped = letters().shape("HO", height);
        assert_eq!((shaped.letters.len(), shaped.bounds), (0, Rect::ZERO));
    }
}

#[test]
fn characters_that_cannot_be_drawn_are_named_with_their_place() {
    let missing = |text: &str| letters().shape(text, 100.0).missing;
    assert_eq!(missing("AÉg"), [(1, 'É')]);
    // A mark to be set over the letter before, and a letter that joins, are not laid out.
    assert_eq!(missing("e\u{301}A"), [(0, 'e'), (1, '\u{301}')]);
    assert_eq!(missing("\u{627}🍕"), [(0, '\u{627}'), (1, '🍕')]);
    let (with, without) = (letters().shape("AÉV", 100.0), letters().shape("AV", 100.0));
    assert_eq!(with.bounds, without.bounds, "as if it had not been typed");
}

/// `letters.ttf` as the first of a collection of so many fonts, all of them the same.
fn collection(fonts: u32) -> Vec<u8> {
    let header = 12 + 4 * fonts;
    let mut bytes = b"ttcf\0\x01\0\0".to_vec();
    bytes.extend(fonts.to_be_bytes());
    for _ in 0..fonts {
        bytes.extend(header.to_be_bytes());
    }
    let mut font = LETTERS.to_vec();
    let tables = usize::from(u16::from_be_bytes([font[4], font[5]]));
    for table in 0..tables {
        let place = 12 + 16 * table + 8;
        let field: [u8; 4] = font[place..place + 4].try_into().expect("four bytes");
        let moved = u32::from_be_bytes(field) + header;
        font[place..place + 4].copy_from_slice(&moved.to_be_bytes());
    }
    bytes.extend(font);
    bytes
}

#[test]
fn what_a_file_is_stands_in_a_sentence() {
    let refused = |bytes: &[u8]| Font::read(bytes).expect_err("no font");
    insta::assert_snapshot!(refused(b"%PDF-1.7"), @"The file is not a font that can be read; expected a TrueType or OpenType file (.ttf, .otf or .ttc).");
    insta::assert_snapshot!(refused(b"wOF2...."), @"The file is a font packed for web pages (WOFF); expected the font itself, a .ttf, .otf or .ttc file.");
    insta::assert_snapshot!(refused(&vec![0; MOST_BYTES + 1]), @"The font file must be at most 20 MB, but has 21 MB.");
    let without = |tag: &[u8; 4]| {
        let mut bytes = LETTERS.to_vec();
        let at = bytes.windows(4).position(|found| found == tag);
        bytes[at.expect("the table")] = b'!';
        refused(&bytes)
    };
    insta::assert_snapshot!(without(b"loca"), @"The font cannot be used: it has no outlines, only pictures or nothing.");
    insta::assert_snapshot!(without(b"cmap"), @"The font cannot be used: it has no list of its characters.");
    insta::assert_snapshot!(without(b"hmtx"), @"The font cannot be used: it has no widths of its letters.");
    let font = Font::read(&collection(3)).expect("a collection");
    insta::assert_snapshot!(font.notes().join("\n"), @"The file holds 3 fonts; the first of them, “Tubewright Outline Test”, is used.");
    check_lines(&font, "letters.ttf");
    assert_eq!(Font::read(&collection(1)).expect("a font").notes(), [""; 0]);
}

#[test]
fn insets_of_letters_against_another_tool() {
    let font = letters();
    for (letter, wanted) in glyphs() {
        let contours = outlines(&font, &letter);
        let bare = inset(&contours, 0.0, Join::Round);
        assert_eq!(
            bare.paths, contours,
            "{letter}: the outline itself, exactly"
        );
        assert!(
            !bare.united && !bare.split && bare.vanished == 0,
            "{bare:?}"
        );
        for distance in ["40", "60"] {
            let wanted = &wanted["inset"][distance];
            let what = format!("{letter} inset by {distance}");
            let distance = distance.parse().expect("a distance");
            let found = inset(&contours, distance, Join::Round);
            close(area(&found.paths), number(&wanted["area"]), 1e-4, &what);
            close(
                length(&found.paths),
                number(&wanted["perimeter"]),
                1e-4,
                &what,
            );
            assert_eq!(Some(found.parts as u64), wanted["parts"].as_u64(), "{what}");
            // The é is two parts before.
            assert_eq!(found.split, found.parts > bare.parts, "{what}");
            assert_eq!((found.vanished, found.united), (0, false), "{what}");
        }
    }
    // The reference has it: g falls into two parts between 40 and 60.
    let g = outlines(&font, "g");
    assert!(!inset(&g, 40.0, Join::Round).split);
    assert!(inset(&g, 60.0, Join::Round).split);
}

const L: [(f64, f64); 6] = [
    (0.0, 0.0),
    (100.0, 0.0),
    (100.0, 40.0),
    (40.0, 40.0),
    (40.0, 100.0),
    (0.0, 100.0),
];

#[test]
fn insets_of_an_l_against_the_closed_form() {
    use std::f64::consts::PI;
    // Inset by 10: an L of arms 20 wide and 80 long, 80 · 20 + 60 · 20 = 2800, around it
    // 4 · 80 = 320. A round corner keeps of the square of 10 · 10 what lies outside the quarter
    // circle, 100 (1 − π/4) more, and goes 5π around it instead of 20.
    let mitre = inset(&[polygon(&L)], 10.0, Join::Mitre);
    close(area(&mitre.paths), 2800.0, 1e-6, "mitre");
    close(length(&mitre.paths), 320.0, 1e-6, "mitre");
    let round = inset(&[polygon(&L)], 10.0, Join::Round);
    close(
        area(&round.paths),
        2800.0 + 100.0 * (1.0 - PI / 4.0),
        1e-5,
        "round",
    );
    close(length(&round.paths), 300.0 + 5.0 * PI, 1e-5, "round");
    // More than half the arms, but the corner is thicker: the mitre leaves nothing there, the round
    // join what of the square from 20.5 to 40 lies outside the circle of 20.5 around (40, 40). With
    // u from that corner: 19.5² less 19.5 · √40, less the area under the circle from √40 to 19.5.
    let under = |u: f64| f64::midpoint(u * (420.25 - u * u).sqrt(), 420.25 * (u / 20.5).asin());
    let corner = 19.5 * 19.5 - 19.5 * 40_f64.sqrt() - (under(19.5) - under(40_f64.sqrt()));
    let mitre = inset(&[polygon(&L)], 20.5, Join::Mitre);
    assert_eq!((mitre.paths.len(), mitre.parts, mitre.vanished), (0, 0, 1));
    let round = inset(&[polygon(&L)], 20.5, Join::Round);
    close(area(&round.paths), corner, 1e-3, "round, past half");
    assert_eq!((round.parts, round.split, round.vanished), (1, false, 0));
}

fn square(from: f64, to: f64) -> BezPath {
    polygon(&[(from, from), (to, from), (to, to), (from, to)])
}

fn told(inset: &Inset) -> (usize, usize, bool, usize, usize, bool) {
    let paths = inset.paths.len();
    (
        paths,
        inset.parts,
        inset.split,
        inset.vanished,
        inset.opened,
        inset.united,
    )
}

#[test]
fn counters_grow_until_they_open() {
    // A frame of 100 with a hole of 60: walls 20 thick.
    let frame = [square(0.0, 100.0), square(20.0, 80.0).reverse_subpaths()];
    let found = inset(&frame, 4.0, Join::Mitre);
    assert_eq!(told(&found), (2, 1, false, 0, 0, false));
    // Outside 92, the hole 68.
    close(area(&found.paths), 92.0 * 92.0 - 68.0 * 68.0, 1e-6, "frame");
    assert_eq!(
        told(&inset(&frame, 10.5, Join::Mitre)),
        (0, 0, false, 2, 0, false)
    );
    // A hole to one side: its thin wall opens, and what was a ring is one bent band.
    let aside = [square(0.0, 100.0), square(5.0, 70.0).reverse_subpaths()];
    let found = inset(&aside, 4.0, Join::Mitre);
    assert_eq!(told(&found), (1, 1, false, 0, 1, false));
    // Two bars on a bridge 2 thick: they part.
    let bars = polygon(&[
        (0.0, 0.0),
        (20.0, 0.0),
        (20.0, 40.0),
        (40.0, 40.0),
        (40.0, 0.0),
        (60.0, 0.0),
        (60.0, 80.0),
        (40.0, 80.0),
        (40.0, 42.0),
        (20.0, 42.0),
        (20.0, 80.0),
        (0.0, 80.0),
    ]);
    assert_eq!(
        told(&inset(&[bars], 3.0, Join::Round)),
        (2, 2, true, 0, 0, false)
    );
}

#[test]
fn contours_that_cross_are_united_and_said() {
    // Two squares of 10, over each other by 5 · 5: 175.
    let crossing = [square(0.0, 10.0), square(5.0, 15.0)];
    let found = inset(&crossing, 0.0, Join::Round);
    assert_eq!(told(&found), (1, 1, false, 0, 0, true));
    close(area(&found.paths), 175.0, 1e-6, "united");
    let found = inset(&crossing, 1.0, Join::Mitre);
    // Two squares of 8, over each other by 3 · 3, less nothing at the two inner corners.
    close(
        area(&found.paths),
        2.0 * 64.0 - 9.0,
        1e-6,
        "united and inset",
    );
    assert!(found.united);
}

#[test]
fn what_is_no_shape_or_no_distance() {
    let far = square(1e8, 1e9);
    let broken = polygon(&[(0.0, 0.0), (f64::NAN, 1.0), (1.0, 1.0)]);
    let line = polygon(&[(0.0, 0.0), (5.0, 5.0)]);
    let all = [square(0.0, 10.0), far, broken, line];
    let found = inset(&all, 1.0, Join::Mitre);
    assert_eq!(told(&found), (1, 1, false, 3, 0, false));
    for distance in [-3.0, f64::NAN, f64::NEG_INFINITY] {
        assert_eq!(inset(&all[..1], distance, Join::Round).paths, all[..1]);
    }
    for distance in [5.0, 1e300, f64::INFINITY] {
        let found = inset(&all[..1], distance, Join::Round);
        assert_eq!(told(&found), (0, 0, false, 1, 0, false), "{distance}");
    }
    assert_eq!(
        told(&inset(&[], 1.0, Join::Round)),
        (0, 0, false, 0, 0, false)
    );
}

/// Corners around a middle, in order, so that the lines between them do not cross.
fn star() -> impl Strategy<Value = BezPath> {
    let arms = prop::collection::vec(10.0..100.0_f64, 3..24);
    arms.prop_map(|arms| {
        let count = u8::try_from(arms.len()).expect("few arms");
        let step = std::f64::consts::TAU / f64::from(count);
        let corners = (0..count).zip(&arms).map(|(at, arm)| {
            let (sin, cos) = (f64::from(at) * step).sin_cos();
            (arm * cos, arm * sin)
        });
        polygon(&corners.collect::<Vec<_>>())
    })
}

/// Any corners, crossing as they like; on whole numbers many lie on each other's lines.
fn tangle() -> impl Strategy<Value = BezPath> {
    let corner = prop_oneof![
        (-50.0..50.0_f64, -50.0..50.0_f64),
        (-5..5_i8, -5..5_i8).prop_map(|(x, y)| (f64::from(x), f64::from(y))),
    ];
    prop::collection::vec(corner, 1..20).prop_map(|corners| polygon(&corners))
}

fn to_outline(path: &BezPath, point: Point) -> f64 {
    let nearest = path.segments().map(|segment| segment.nearest(point, 1e-9));
    nearest
        .map(|found| found.distance_sq.sqrt())
        .fold(f64::MAX, f64::min)
}

fn corners(paths: &[BezPath]) -> Vec<Point> {
    let ends = paths.iter().flat_map(BezPath::elements);
    ends.filter_map(kurbo::PathEl::end_point).collect()
}

proptest! {
    // Exact arithmetic unoptimised is slow; these are the cases of an ordinary run.
    #![proptest_config(ProptestConfig::with_cases(64))]

    #[test]
    fn an_inset_keeps_its_distance(path in star(), distance in 0.1..20.0_f64) {
        let found = inset(std::slice::from_ref(&path), distance, Join::Round);
        for corner in corners(&found.paths) {
            prop_assert!(path.winding(corner) != 0, "{corner} is outside");
            let away = to_outline(&path, corner);
            prop_assert!((away - distance).abs() < 0.01 + 1e-3 * distance, "{away} away");
        }
        let mut before = area(std::slice::from_ref(&path)) + 1e-6;
        for share in [0.25, 0.5, 1.0, 1.5] {
            let now = area(&inset(std::slice::from_ref(&path), distance * share, Join::Round).paths);
            prop_assert!(now <= before + 1e-3, "{now} after {before}");
            before = now;
        }
    }

    #[test]
    fn insets_scale(path in star(), distance in 0.1..10.0_f64, scale in 0.5..20.0_f64) {
        let small = inset(std::slice::from_ref(&path), distance, Join::Mitre);
        let larger = [Affine::scale(scale) * path.clone()];
        let large = inset(&larger, distance * scale, Join::Mitre);
        let (found, wanted) = (area(&large.paths), area(&small.paths) * scale * scale);
        prop_assert!((found - wanted).abs() < 1e-5 * area(&larger), "{found}, not {wanted}");
    }

    #[test]
    fn insets_of_tangles_stay_inside(paths in prop::collection::vec(tangle(), 1..4), distance in 0.0..8.0_f64, round: bool) {
        let join = if round { Join::Round } else { Join::Mitre };
        let found = inset(&paths, distance, join);
        let all: BezPath = paths.iter().flat_map(|path| path.elements().iter().copied()).collect();
        for corner in corners(&found.paths) {
            // Just level with a corner of the outline the winding may be counted wrong, so places a
            // hair beside are asked as well.
            let hair = Vec2::new(1e-6, 1.7e-6);
            let places = [corner, corner + hair, corner - hair];
            let inside = places.iter().any(|&place| all.winding(place) != 0)
                || to_outline(&all, corner) < 1e-3;
            prop_assert!(inside, "{corner} is outside");
        }
        let whole = area(&inset(&paths, 1e-9, join).paths);
        prop_assert!(area(&found.paths) <= whole + 1e-3);
    }

    #[test]
    fn letters_scale(height in 1.0..3000.0_f64) {
        let (one, other) = (letters().shape("gOA é", 100.0), letters().shape("gOA é", height));
        for (one, other) in one.letters.iter().zip(&other.letters) {
            let (found, wanted) = (length(&other.contours), length(&one.contours) * height / 100.0);
            prop_assert!((found - wanted).abs() < 1e-7 * wanted, "{found}, not {wanted}");
        }
    }

    #[test]
    fn no_bytes_break_the_reader(bytes in prop::collection::vec(any::<u8>(), 0..400)) {
        if let Ok(font) = Font::read(&bytes) {
            font.shape("AV", 100.0);
        }
    }

    #[test]
    fn no_damage_breaks_the_reader(
        compact: bool,
        damage in prop::collection::vec((any::<prop::sample::Index>(), any::<u8>()), 1..12),
        kept in any::<prop::sample::Index>(),
        cut: bool,
    ) {
        let mut bytes = if compact { COMPACT } else { LETTERS }.to_vec();
        for (at, byte) in damage {
            let at = at.index(bytes.len());
            bytes[at] = byte;
        }
        if cut {
            bytes.truncate(kept.index(bytes.len()));
        }
        if let Ok(font) = Font::read(&bytes) {
            for letter in font.shape("AVO é8", 100.0).letters {
                inset(&letter.contours, 2.0, Join::Round);
            }
        }
    }
}
