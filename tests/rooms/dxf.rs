//! DXF drawings against the lengths and places in `tests/reference/dxf`, closed forms, and damage.

use std::fmt::Write as _;

use kurbo::{Ellipse, ParamCurveNearest, Point, Rect, Shape};
use proptest::prelude::*;
use tubewright::drawing::{ArtStroke, Artwork, dxf};

/// Source of both drawings and their tables: `tests/reference/dxf/PROVENANCE.md`.
const LENGTHS_DXF: &str = include_str!("../reference/dxf/fixture_lengths.dxf");
const LENGTHS: &str = include_str!("../reference/dxf/fixture_lengths.csv");
const PLACED_DXF: &str = include_str!("../reference/dxf/fixture_placed.dxf");
const PLACED: &str = include_str!("../reference/dxf/fixture_placed.csv");

fn read(text: &str) -> Artwork {
    dxf::read(text.as_bytes()).expect("a drawing")
}

/// Codes and values, parted by blanks, as lines.
fn pairs(words: &str) -> String {
    words
        .split_whitespace()
        .flat_map(|word| [word, "\n"])
        .collect()
}

/// A drawing of these elements, with these blocks and layers.
fn with(layers: &str, blocks: &str, entities: &str) -> String {
    pairs(&format!(
        "0 SECTION 2 TABLES 0 TABLE 2 LAYER {layers} 0 ENDTAB 0 ENDSEC \
         0 SECTION 2 BLOCKS {blocks} 0 ENDSEC 0 SECTION 2 ENTITIES {entities} 0 ENDSEC 0 EOF"
    ))
}

fn drawing(entities: &str) -> Artwork {
    read(&with("", "", entities))
}

/// The only stroke of a drawing of which all was read.
fn only(entities: &str) -> ArtStroke {
    let art = drawing(entities);
    assert_eq!(art.unread, [], "{entities}");
    let [stroke] = &art.strokes[..] else {
        panic!("{entities}: {} strokes", art.strokes.len());
    };
    stroke.clone()
}

/// What was not read, a line for each.
fn unread(art: &Artwork) -> String {
    let told = art.unread.iter();
    told.flat_map(|unread| [&unread.element, ": ", &unread.why, "\n"])
        .collect()
}

#[track_caller]
fn near(found: f64, wanted: f64) {
    assert!(
        (found - wanted).abs() <= 1e-9 * wanted.abs(),
        "{found} is not {wanted}, off by {:e} of it",
        (found / wanted - 1.0).abs()
    );
}

#[track_caller]
fn near_point(found: Point, wanted: (f64, f64)) {
    assert!(
        found.distance(wanted.into()) < 1e-8,
        "{found:?} is not {wanted:?}"
    );
}

fn ends(stroke: &ArtStroke) -> [Point; 2] {
    let segments = || stroke.path.segments();
    let first = segments().next().expect("a segment");
    let last = segments().last().expect("a segment");
    [first.start(), last.end()]
}

trait Ends {
    fn start(&self) -> Point;
    fn end(&self) -> Point;
}

impl Ends for kurbo::PathSeg {
    fn start(&self) -> Point {
        kurbo::ParamCurve::start(self)
    }

    fn end(&self) -> Point {
        kurbo::ParamCurve::end(self)
    }
}

fn distance(stroke: &ArtStroke, point: Point) -> f64 {
    stroke
        .path
        .segments()
        .map(|segment| segment.nearest(point, 1e-12).distance_sq.sqrt())
        .fold(f64::INFINITY, f64::min)
}

fn rows(table: &str) -> Vec<(String, Vec<f64>)> {
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(table.as_bytes());
    reader
        .records()
        .map(|row| {
            let row = row.expect("a row");
            let figures = row
                .iter()
                .skip(1)
                .map(|cell| cell.parse().expect("a figure"));
            (row[0].to_owned(), figures.collect())
        })
        .collect()
}

#[test]
fn lengths_are_those_of_the_reference_element_by_element() {
    let art = read(LENGTHS_DXF);
    assert_eq!(art.unread, []);
    assert_eq!(art.mm_per_unit, Some(1.0));
    let rows = rows(LENGTHS);
    assert_eq!(rows.len(), 7);
    // The last row is an INSERT of two elements.
    let mut lengths: Vec<f64> = art.strokes[..6].iter().map(ArtStroke::length).collect();
    lengths.push(art.strokes[6..].iter().map(ArtStroke::length).sum());
    assert_eq!(art.strokes.len(), 8);
    for (found, (name, figures)) in lengths.iter().zip(&rows) {
        assert!(
            (found / figures[0] - 1.0).abs() < 1e-9,
            "{name}: {found} is not {}",
            figures[0]
        );
    }
    let closed: Vec<bool> = art.strokes.iter().map(|stroke| stroke.closed).collect();
    assert_eq!(
        closed,
        [false, false, true, true, false, false, false, false]
    );
}

#[test]
fn blocks_in_blocks_stand_where_another_library_puts_them() {
    let art = read(PLACED_DXF);
    assert_eq!(art.unread, []);
    assert_eq!(art.mm_per_unit, Some(25.4));
    let rows = rows(PLACED);
    assert_eq!(rows.len(), 38);
    assert_eq!(art.strokes.len(), rows.len());
    let mut left: Vec<&ArtStroke> = art.strokes.iter().collect();
    for (name, figures) in &rows {
        let [length, points @ ..] = &figures[..] else {
            panic!("{name}: no figures");
        };
        // The table has y upwards, artwork has it downwards.
        let point = |i: usize| Point::new(points[2 * i], -points[2 * i + 1]);
        let (begin, between, end) = (point(0), point(1), point(2));
        let at = left.iter().position(|stroke| {
            let [first, last] = ends(stroke);
            let joins = |a: Point, b: Point| a.distance(begin).max(b.distance(end)) < 1e-7;
            (joins(first, last) || joins(last, first))
                && distance(stroke, between) < 1e-6
                && (stroke.length() / length - 1.0).abs() < 1e-9
        });
        let at = at.unwrap_or_else(|| panic!("{name}: no stroke from {begin:?} to {end:?}"));
        left.swap_remove(at);
    }
}

#[test]
fn an_arc_by_its_bulge_has_its_closed_form() {
    for bulge in [1e-8, 1e-6, 0.01, 0.4, 1.0, 2.5, 40.0, -0.4, -1.0] {
        let stroke = only(&format!(
            "0 LWPOLYLINE 90 2 10 3 20 4 42 {bulge} 10 33 20 44"
        ));
        // Chord 50; radius chord (1 + b²) / (4 b), angle 4 atan b.
        let b = f64::abs(bulge);
        near(
            stroke.length(),
            50.0 * (1.0 + b * b) / (4.0 * b) * 4.0 * b.atan(),
        );
        // A positive bulge lies to the right of the way, for the arc turns to the left. In artwork y
        // is turned over: from (3, -4), the sagitta b chord / 2 to the right is at (18 + 20 b, …).
        let top = Point::new(18.0 + 20.0 * bulge, -(24.0 - 15.0 * bulge));
        assert!(distance(&stroke, top) < 1e-5, "{bulge}: not by {top:?}");
    }
}

#[test]
fn a_ring_of_two_bulges_is_a_circle() {
    let ring = "0 LWPOLYLINE 90 2 70 1 10 0 20 0 42 1 10 10 20 0 42 1";
    let old = "0 POLYLINE 66 1 70 1 0 VERTEX 10 0 20 0 42 1 0 VERTEX 10 10 20 0 42 1 0 SEQEND";
    for entities in [ring, old] {
        let stroke = only(entities);
        assert!(stroke.closed);
        near(stroke.length(), std::f64::consts::PI * 10.0);
        let room = stroke.path.bounding_box();
        assert!((room.width() - 10.0).abs() < 1e-7 && (room.height() - 10.0).abs() < 1e-7);
    }
}

#[test]
fn a_circle_scaled_unevenly_is_an_ellipse() {
    let blocks = "0 BLOCK 2 RING 10 5 20 5 0 CIRCLE 10 5 20 5 40 10 0 ENDBLK";
    for (x, y) in [(3.0, 0.7), (-1.0, 0.01), (2.0, -2.0)] {
        let art = read(&with(
            "",
            blocks,
            &format!("0 INSERT 2 ring 10 100 20 50 41 {x} 42 {y} 50 30"),
        ));
        let ellipse = Ellipse::new((0.0, 0.0), (10.0 * f64::abs(x), 10.0 * f64::abs(y)), 0.0);
        near(art.length(), ellipse.perimeter(1e-12));
        assert!(art.strokes[0].closed);
        near_point(art.bounds.center(), (100.0, -50.0));
    }
}

#[test]
fn mirrored_and_turned_over_elements_keep_their_length_and_change_sides() {
    // From (10, 0) over 90°; seen from below x is turned over, and y is turned over for artwork.
    let arc = "0 ARC 10 0 20 0 40 10 50 0 51 90";
    let [begin, end] = ends(&only(arc));
    near_point(begin, (10.0, 0.0));
    near_point(end, (0.0, -10.0));
    let below = only(&format!("{arc} 210 0 220 0 230 -1"));
    near_point(ends(&below)[0], (-10.0, 0.0));
    near_point(ends(&below)[1], (0.0, -10.0));
    near(below.length(), 5.0 * std::f64::consts::PI);
    let blocks = format!("0 BLOCK 2 A {arc} 0 ENDBLK");
    let art = read(&with("", &blocks, "0 INSERT 2 A 10 0 20 0 41 -2 42 2"));
    near_point(ends(&art.strokes[0])[0], (-20.0, 0.0));
    near(art.length(), 10.0 * std::f64::consts::PI);
}

#[test]
fn whole_turns_are_closed_and_rounded_ones_too() {
    for turn in [
        "50 0 51 360",
        "50 30 51 30",
        "50 0 51 359.99999",
        "50 -90 51 270",
    ] {
        let stroke = only(&format!("0 ARC 10 1 20 2 40 10 {turn}"));
        assert!(stroke.closed, "{turn}");
        near(stroke.length(), 20.0 * std::f64::consts::PI);
    }
    let stroke = only("0 ELLIPSE 10 0 20 0 11 10 21 0 40 0.5 41 0 42 6.283185");
    assert!(stroke.closed);
    near(
        stroke.length(),
        Ellipse::new((0.0, 0.0), (10.0, 5.0), 0.0).perimeter(1e-12),
    );
    // One degree short is no whole turn.
    let stroke = only("0 ARC 10 0 20 0 40 10 50 0 51 359");
    assert!(!stroke.closed);
    near(stroke.length(), 359.0_f64.to_radians() * 10.0);
}

#[test]
fn a_circle_as_a_rational_spline_is_as_long_as_the_circle() {
    // Nine points around a square, the corners with weight √½: the circle of radius 10.
    let corners = [
        (10, 0),
        (10, 10),
        (0, 10),
        (-10, 10),
        (-10, 0),
        (-10, -10),
        (0, -10),
        (10, -10),
        (10, 0),
    ];
    let points = corners.map(|(x, y)| format!(" 10 {x} 20 {y}")).concat();
    let weights: String = (0..9)
        .map(|i| {
            if i % 2 == 0 {
                " 41 1"
            } else {
                " 41 0.70710678118654752"
            }
        })
        .collect();
    let knots = "40 0 40 0 40 0 40 1 40 1 40 2 40 2 40 3 40 3 40 4 40 4 40 4";
    let stroke = only(&format!("0 SPLINE 70 12 71 2 {knots}{weights}{points}"));
    near(stroke.length(), 20.0 * std::f64::consts::PI);
    assert!(stroke.closed);
    assert!(
        stroke.path.elements().len() < 200,
        "not more pieces than it takes: {}",
        stroke.path.elements().len()
    );
    let room = stroke.path.bounding_box();
    assert!((room.width() - 20.0).abs() < 1e-5 && (room.height() - 20.0).abs() < 1e-5);
}

#[test]
fn a_spline_of_higher_degree_than_it_needs_is_the_same_curve() {
    // The parabola (0,0) (50,100) (100,0) of tests/reference/paths, raised to degree four by hand:
    // raising from n: each point is i/(n+1) of the one before and the rest of the one at i.
    let stroke = only(
        "0 SPLINE 71 4 40 0 40 0 40 0 40 0 40 0 40 1 40 1 40 1 40 1 40 1 \
         10 0 20 0 10 25 20 50 10 50 20 66.6666666666666667 10 75 20 50 10 100 20 0",
    );
    near(stroke.length(), 147.894_285_754_459_74);
    let steps = only("0 SPLINE 71 1 40 0 40 0 40 1 40 2 40 2 10 0 20 0 10 30 20 40 10 30 20 0");
    near(steps.length(), 90.0);
}

#[test]
fn a_small_spline_far_out_keeps_its_digits() {
    let at = |x: f64| {
        only(&format!(
            "0 SPLINE 71 4 40 0 40 0 40 0 40 0 40 0 40 1 40 1 40 1 40 1 40 1 10 {} 20 0 \
             10 {} 20 1 10 {} 20 -2 10 {} 20 0 10 {} 20 1",
            x,
            x + 1.0,
            x + 2.0,
            x + 3.0,
            x + 4.0
        ))
    };
    let (near_by, far_out) = (at(0.0), at(1e6));
    near(far_out.length(), near_by.length());
    assert_eq!(
        far_out.path.elements().len(),
        near_by.path.elements().len(),
        "noise in the figures is not taken for shape"
    );
}

#[test]
fn a_cusp_is_met_in_length() {
    // cubic_cusp of tests/reference/paths, raised to degree four by hand: its speed is 0 inside.
    let stroke = only(
        "0 SPLINE 71 4 40 0 40 0 40 0 40 0 40 0 40 1 40 1 40 1 40 1 40 1 \
         10 0 20 0 10 75 20 75 10 50 20 100 10 25 20 75 10 100 20 0",
    );
    near(stroke.length(), 182.842_712_474_619_01);
}

#[test]
fn rows_and_columns_are_turned_but_not_scaled() {
    let blocks = "0 BLOCK 2 A 0 LINE 10 0 20 0 11 1 21 0 0 ENDBLK";
    let art = read(&with(
        "",
        blocks,
        "0 INSERT 2 A 10 0 20 0 41 2 42 2 50 90 70 3 71 2 44 10 45 5",
    ));
    let begins: Vec<Point> = art.strokes.iter().map(|stroke| ends(stroke)[0]).collect();
    // Columns go up after the quarter turn, rows to the left.
    let wanted = [(0, 0), (0, -10), (0, -20), (-5, 0), (-5, -10), (-5, -20)];
    for (begin, (x, y)) in begins.iter().zip(wanted) {
        near_point(*begin, (f64::from(x), f64::from(y)));
    }
    assert_eq!(begins.len(), 6);
    near(art.length(), 12.0);
}

#[test]
fn a_block_turned_inside_one_scaled_unevenly_is_sheared() {
    let blocks = "0 BLOCK 2 IN 10 2 20 1 0 LINE 10 0 20 0 11 3 21 4 0 ENDBLK \
                  0 BLOCK 2 OUT 10 -1 20 3 0 INSERT 2 IN 10 5 20 6 41 -2 42 1.5 50 25 0 ENDBLK";
    let outer = "0 INSERT 2 OUT 10 100 20 50 41 1.2 42 -0.8 50 -70";
    let art = read(&with("", blocks, outer));
    let [begin, end] = ends(&art.strokes[0]);
    // The product of the matrices, with numpy: move, turn, scale, less the base, twice.
    near_point(begin, (101.706_505_208_798_9, -37.520_034_920_566_18));
    near_point(end, (96.252_271_476_734_38, -45.717_193_840_450_32));
}

#[test]
fn units_of_the_file_are_millimetres_or_are_asked_for() {
    let line = "0 SECTION 2 ENTITIES 0 LINE 10 0 20 0 11 1 21 0 0 ENDSEC 0 EOF";
    let of = |unit: &str| read(&pairs(&format!("{unit} {line}"))).mm_per_unit;
    let header = |unit: &str| {
        of(&format!(
            "0 SECTION 2 HEADER 9 $INSUNITS 70 {unit} 0 ENDSEC"
        ))
    };
    assert_eq!(of(""), None);
    for (unit, mm) in [
        ("0", None),
        ("1", Some(25.4)),
        ("2", Some(304.8)),
        ("4", Some(1.0)),
        ("5", Some(10.0)),
        ("6", Some(1000.0)),
        ("10", Some(914.4)),
        ("99", None),
        ("mm", None),
    ] {
        assert_eq!(header(unit), mm, "unit {unit}");
    }
}

#[test]
fn colours_come_from_the_element_its_layer_or_its_block() {
    let line = "10 0 20 0 11 1 21 0";
    let layers = "0 LAYER 2 Red 70 0 62 1 0 LAYER 2 True 70 0 62 1 420 1193046";
    let blocks = format!(
        "0 BLOCK 2 A 0 LINE 8 0 62 0 {line} 0 LINE 8 0 {line} 0 LINE 8 Red 62 4 {line} 0 ENDBLK"
    );
    let art = read(&with(
        layers,
        &blocks,
        &format!(
            "0 LINE 8 red {line} 0 LINE 8 True {line} 0 LINE 8 Red 62 5 {line} \
             0 LINE 8 Red 62 5 420 255 {line} 0 LINE {line} 0 LINE 8 New 62 0 {line} \
             0 INSERT 2 A 8 True 62 3 10 0 20 0"
        ),
    ));
    let found: Vec<(&str, &str)> = art
        .strokes
        .iter()
        .map(|stroke| {
            (
                stroke.colour.as_deref().unwrap_or_default(),
                stroke.layer.as_deref().unwrap_or_default(),
            )
        })
        .collect();
    assert_eq!(
        found,
        [
            ("#ff0000", "Red"),
            ("#123456", "True"),
            ("#0000ff", "Red"),
            ("#0000ff", "Red"),
            ("#ffffff", "0"),
            ("#ffffff", "New"),
            ("#00ff00", "True"),
            ("#123456", "True"),
            ("#00ffff", "Red"),
        ]
    );
}

#[test]
fn what_is_not_read_is_named_with_its_line_and_why() {
    let line = "10 0 20 0 11 1 21 0";
    let layers = "0 LAYER 2 Off 70 0 62 -1 0 LAYER 2 Ice 70 1 62 1";
    let blocks = format!(
        "0 BLOCK 2 SELF 0 INSERT 2 SELF 10 0 20 0 0 ENDBLK 0 BLOCK 2 FAR 70 4 0 ENDBLK \
         0 BLOCK 2 T 0 TEXT 5 A1 1 hi 0 LINE 8 Ice {line} 0 ENDBLK 0 BLOCK 2 NONE 0 ENDBLK \
         0 BLOCK 2 *Paper_Space0 0 LINE {line} 0 ENDBLK"
    );
    let entities = format!(
        "0 TEXT 5 2F 1 hi 0 HATCH 5 30 0 DIMENSION 0 POINT 10 0 20 0 0 3DFACE 0 WIDGET 0 W<b> \
         0 LINE 8 OFF {line} 0 LINE 8 Ice {line} 0 LINE 60 1 {line} 0 LINE 67 1 {line} \
         0 INSERT 2 SELF 10 0 20 0 0 INSERT 2 GONE 10 0 20 0 0 INSERT 2 FAR 10 0 20 0 \
         0 INSERT 2 NONE 10 0 20 0 0 INSERT 2 T 10 0 20 0 70 3 44 1 \
         0 INSERT 10 0 20 0 0 INSERT 2 T 10 0 20 0 41 0 \
         0 LINE 10 0 20 0 0 LINE 10 0 20 0 11 0 21 0 0 LINE 10 0 20 0 11 1 21 1 31 5 \
         0 CIRCLE 10 0 20 0 40 nan 0 CIRCLE 10 inf 20 0 40 1 0 CIRCLE 10 1e10 20 0 40 1 \
         0 CIRCLE 10 x 20 0 40 1 0 CIRCLE 10 0 20 0 40 -1 0 CIRCLE 10 0 20 0 40 1 210 1 230 0 \
         0 ELLIPSE 10 0 20 0 11 1 21 0 40 0 0 POLYLINE 70 16 0 VERTEX 10 0 20 0 0 SEQEND \
         0 POLYLINE 70 8 0 VERTEX 10 0 20 0 0 VERTEX 10 1 20 0 30 1 0 SEQEND \
         0 VERTEX 10 0 20 0 0 LWPOLYLINE 10 0 10 1 20 1 0 LWPOLYLINE 90 0 70 x \
         0 SPLINE 71 3 11 0 21 0 0 SPLINE 71 99 0 SPLINE 71 -1 0 SPLINE 71 2 10 0 20 0 \
         0 SPLINE 71 1 10 0 20 0 10 1 20 0 40 0 0 SPLINE 71 1 10 0 20 0 10 1 20 0 40 0 40 2 40 1 40 3 \
         0 SPLINE 71 1 10 0 20 0 10 1 20 0 40 0 40 0 40 1 40 1 41 1 \
         0 SPLINE 71 1 10 0 20 0 10 1 20 0 40 0 40 0 40 1 40 1 41 1 41 -1 \
         0 SPLINE 71 1 10 0 20 0 10 1 20 0 10 5 20 5 10 6 20 5 40 0 40 0 40 1 40 1 40 2 40 2"
    );
    let art = read(&with(layers, &blocks, &entities));
    assert_eq!(art.strokes, []);
    insta::assert_snapshot!(unread(&art), @r"
    TEXT 2F at line 108: text must be turned into outlines
    HATCH 30 at line 114: fillings are not read; draw the outline as a polyline
    DIMENSION at line 118: dimensions and notes are no artwork
    POINT at line 120: a point has no length
    3DFACE at line 126: faces and solids are no lines
    WIDGET at line 128: elements of this kind are not read
    “W<b>” at line 130: elements of this kind are not read
    LINE at line 156: it is hidden
    LINE at line 168: it stands on a layout of paper, not in the drawing
    INSERT at line 38: its block “SELF” holds itself
    INSERT at line 188: there is no block “GONE”
    INSERT at line 196: its block “FAR” is in another file
    INSERT at line 204: its block “NONE” is empty
    TEXT A1 at line 60: text must be turned into outlines
    INSERT at line 224: it names no block
    INSERT at line 230: its scale is 0
    LINE at line 240: group 11 is missing
    LINE at line 246: it has no length
    LINE at line 256: it rises out of the plane of the drawing
    CIRCLE at line 268: “nan” in line 274 is no number
    CIRCLE at line 276: “inf” in line 278 is too large
    CIRCLE at line 284: “1e10” in line 286 is too large
    CIRCLE at line 292: “x” in line 294 is no number
    CIRCLE at line 300: its radius is below 0
    CIRCLE at line 308: it lies in a plane tilted out of the drawing
    ELLIPSE at line 320: its ratio of axes is not above 0
    POLYLINE at line 332: meshes are no lines
    POLYLINE at line 344: it rises out of the plane of the drawing
    VERTEX at line 364: it belongs to no POLYLINE
    LWPOLYLINE at line 370: group 20 of a point is missing
    LWPOLYLINE at line 378: “x” in line 382 is no whole number
    SPLINE at line 384: it has fit points only; save it with the control points of its curve
    SPLINE at line 392: splines are read up to degree 15, and it has degree 99
    SPLINE at line 396: its degree is below 0
    SPLINE at line 400: a spline of degree 2 needs 3 control points, and it has 1
    SPLINE at line 408: its 2 control points need 4 knots, and it has 1
    SPLINE at line 422: its knots do not rise
    SPLINE at line 442: its 2 control points need 2 weights, and it has 1
    SPLINE at line 464: a weight is not above 0
    SPLINE at line 488: its knots break it in two
    layout “*Paper_Space0”: not part of the drawing itself; 1 element on it
    layer “Off”: it is switched off; 1 element on it
    layer “Ice”: it is frozen; 4 elements on it
    ");
}

#[test]
fn a_file_that_is_no_drawing_is_refused_with_a_sentence() {
    let refused = |bytes: &[u8]| dxf::read(bytes).expect_err("a sentence");
    insta::assert_snapshot!(refused(b"AutoCAD Binary DXF\r\n\x1a\0\0"), @"This is a binary DXF. Save it as ASCII DXF and open that.");
    insta::assert_snapshot!(refused(b"AC1032\0\0"), @"This is a DWG file. Save it as ASCII DXF and open that.");
    insta::assert_snapshot!(refused(b""), @"This is no whole DXF drawing: it has no section ENTITIES, where the lines stand.");
    insta::assert_snapshot!(refused(b"<svg><path/></svg>\n"), @"Line 1 should be a group code and is “<svg><path/></svg>”: the file is damaged, or no ASCII DXF.");
    insta::assert_snapshot!(refused(b"0\nSECTION\n2\nHEADER\n"), @"This is no whole DXF drawing: it has no section ENTITIES, where the lines stand.");
    insta::assert_snapshot!(refused(b"0\nSECTION\n2\nENTITIES\n0\nLINE\n10\n0\nx\x1by\n0\n"), @"Line 9 should be a group code and is “x\\u{1b}y”: the file is damaged, or no ASCII DXF.");
    insta::assert_snapshot!(refused(&vec![b' '; 50_000_001]), @"The file has 51 MB, and drawings are read up to 50 MB.");
}

#[test]
fn a_drawing_that_is_too_large_is_refused_with_a_sentence() {
    let refused = |text: &str| dxf::read(text.as_bytes()).expect_err("a sentence");
    // Blocks of ten INSERTs, each of the block before: ten million lines.
    let mut blocks = String::from("0 BLOCK 2 B0 0 LINE 10 0 20 0 11 1 21 0 0 ENDBLK");
    for level in 1..8 {
        let insert = format!(" 0 INSERT 2 B{} 10 0 20 0", level - 1);
        write!(blocks, " 0 BLOCK 2 B{level}{} 0 ENDBLK", insert.repeat(10)).expect("room for it");
    }
    insta::assert_snapshot!(refused(&with("", &blocks, "0 INSERT 2 B7 10 0 20 0")), @"The drawing has more than 200 000 segments. Save only the part that is the sign.");
    // The same with nothing to draw in it, and a grid.
    let empty = blocks.replace("0 LINE 10 0 20 0 11 1 21 0", "0 TEXT");
    insta::assert_snapshot!(refused(&with("", &empty, "0 INSERT 2 B7 10 0 20 0")), @"The blocks of the drawing are placed in each other so often that it has more than 1 000 000 elements.");
    let grid = "0 INSERT 2 B0 10 0 20 0 70 32767 71 32767 44 1 45 1";
    insta::assert_snapshot!(refused(&with("", &blocks, grid)), @"The drawing has more than 200 000 segments. Save only the part that is the sign.");
    let many = "0\nPOINT\n".repeat(500_002);
    insta::assert_snapshot!(refused(&format!("0\nSECTION\n2\nENTITIES\n{many}")), @"The drawing has more than 500 000 elements. Save only the part that is the sign.");
    let vertices = "10\n0\n20\n0\n10\n1\n20\n1\n".repeat(100_001);
    insta::assert_snapshot!(
        refused(&format!("0\nSECTION\n2\nENTITIES\n0\nLWPOLYLINE\n{vertices}0\nENDSEC\n")), @"The drawing has more than 200 000 segments. Save only the part that is the sign."
    );
    insta::assert_snapshot!(
        refused(&format!("0\nSECTION\n2\nENTITIES\n0\nX\n{}", "1\n\n".repeat(1_500_001))), @"The element at line 6 has more than 1 500 000 values."
    );
}

#[test]
fn splines_that_are_too_much_to_measure_are_refused_or_named() {
    let spline = |degree: usize, weights: [&str; 4], count: usize| {
        let ends = format!(" 40 0{}", " 40 0".repeat(degree));
        let knots = format!("{ends}{}", ends.replace("40 0", "40 1"));
        let points: String = (0..=degree)
            .flat_map(|i| {
                [
                    " 10 ",
                    ["0", "9"][i % 2],
                    " 20 ",
                    ["0", "5", "8"][i % 3],
                    " 41 ",
                    weights[i % 4],
                ]
            })
            .collect();
        with(
            "",
            "",
            &format!("0 SPLINE 71 {degree}{knots}{points} ").repeat(count),
        )
    };
    let refused = |text: &str| dxf::read(text.as_bytes()).expect_err("a sentence");
    insta::assert_snapshot!(refused(&spline(7, ["1", "40", "1", "0.1"], 9000)), @"The drawing has more splines of high degree or with weights than can be measured. Save it with arcs and polylines in their place.");
    // Weights from one end of the numbers to the other give a stroke or a reason, in no long time.
    let art = read(&spline(15, ["1e-9", "1e9", "1", "1e9"], 3));
    assert_eq!(art.strokes.len() + art.unread.len(), 3);
}

#[test]
fn blocks_deeper_than_any_drawing_are_named() {
    let mut blocks = String::from("0 BLOCK 2 B0 0 LINE 10 0 20 0 11 1 21 0 0 ENDBLK");
    for level in 1..40 {
        write!(
            blocks,
            " 0 BLOCK 2 B{level} 0 INSERT 2 B{} 10 1 20 0 0 ENDBLK",
            level - 1
        )
        .expect("room for it");
    }
    // B31 is the thirty-second block down to B0.
    let art = read(&with("", &blocks, "0 INSERT 2 B31 10 1 20 0"));
    assert_eq!((art.strokes.len(), art.unread.len()), (1, 0));
    near_point(ends(&art.strokes[0])[0], (32.0, 0.0));
    let art = read(&with("", &blocks, "0 INSERT 2 B32 10 1 20 0"));
    assert_eq!(art.strokes.len(), 0);
    insta::assert_snapshot!(unread(&art), @"INSERT at line 38: blocks are read 32 deep, and its block “B0” is deeper");
    // Scales that multiply beyond any number.
    let huge = blocks.replace("10 1 20 0 0 ENDBLK", "10 1 20 0 41 1e9 42 1e9 0 ENDBLK");
    let art = read(&with("", &huge, "0 INSERT 2 B31 10 1 20 0"));
    assert_eq!(art.strokes.len(), 0);
    insta::assert_snapshot!(unread(&art), @"LINE at line 22: its place or scale is too large");
}

#[test]
fn more_than_a_thousand_unread_elements_are_counted() {
    let art = drawing(&"0 POINT 10 0 20 0 ".repeat(1500));
    assert_eq!(art.unread.len(), 1001);
    insta::assert_snapshot!(format!("{}: {}", art.unread[1000].element, art.unread[1000].why), @"500 more elements: only the first are listed one by one");
}

#[test]
fn a_file_that_is_cut_short_says_so() {
    let whole =
        pairs("0 SECTION 2 ENTITIES 0 LINE 10 0 20 0 11 3 21 4 0 LINE 10 0 20 0 11 30 21 4");
    let art = read(&whole);
    near(art.length(), 5.0);
    insta::assert_snapshot!(unread(&art), @"the end of the file at line 24: the file is cut short; its last element and what came behind it are missing");
    // A polyline whose vertices may not all be there is not measured.
    let art = read(&pairs(
        "0 SECTION 2 ENTITIES 0 POLYLINE 0 VERTEX 10 0 20 0 0 VERTEX 10 1 20 0 0 VERTEX 10 2",
    ));
    assert_eq!((art.strokes.len(), art.unread.len()), (0, 1));
    // Without the mark of the end, but whole.
    let art = read(&format!("{whole}0\nENDSEC\n"));
    assert_eq!((art.strokes.len(), art.unread.len()), (2, 0));
    // Wherever it is cut, it says so, or lacks the section of the lines.
    for lines in 0..LENGTHS_DXF.lines().count() - 1200 {
        let cut = LENGTHS_DXF.split_inclusive('\n').take(lines);
        let cut: String = cut.collect();
        match dxf::read(cut.as_bytes()) {
            Ok(art) => assert!(
                !art.unread.is_empty() || cut.ends_with("ENDSEC\n") || art.strokes.len() == 8,
                "{lines} lines"
            ),
            Err(why) => assert!(why.ends_with('.'), "{lines} lines: {why}"),
        }
    }
}

#[test]
fn ends_of_lines_remarks_and_old_letters_do_not_matter() {
    let plain = read(LENGTHS_DXF);
    assert_eq!(read(&LENGTHS_DXF.replace('\n', "\r\n")), plain);
    assert_eq!(read(&LENGTHS_DXF.replace('\n', "\r")), plain);
    assert_eq!(read(&format!("\u{feff}{LENGTHS_DXF}\n\n\u{1a}")), plain);
    let entities = "0 SECTION 2 ENTITIES 999 remark 0 LINE 8 R?hre 10 0 20 0 11 1 21 0 0 ENDSEC";
    let mut latin = pairs(entities).into_bytes();
    let at = latin.iter().position(|&byte| byte == b'?').expect("a mark");
    latin[at] = 0xf6;
    let art = dxf::read(&latin).expect("a drawing");
    assert_eq!(art.strokes[0].layer.as_deref(), Some("Röhre"));
    assert_eq!(art.strokes[0].element, "LINE at line 8");
    let utf8 = read(&pairs(entities).replace('?', "ö"));
    assert_eq!(utf8.strokes[0].layer.as_deref(), Some("Röhre"));
}

#[test]
fn a_frame_of_a_polyline_spline_is_no_part_of_it() {
    let stroke = only(
        "0 POLYLINE 70 4 0 VERTEX 10 99 20 99 70 16 0 VERTEX 10 0 20 0 70 8 \
         0 VERTEX 10 3 20 4 70 8 0 SEQEND",
    );
    near(stroke.length(), 5.0);
}

#[test]
fn layers_that_are_off_or_frozen_reach_into_blocks_as_they_should() {
    let line = "10 0 20 0 11 1 21 0";
    let layers = "0 LAYER 2 Off 62 -1 0 LAYER 2 Ice 70 1";
    let blocks = format!("0 BLOCK 2 A 0 LINE 8 0 {line} 0 LINE 8 On {line} 0 ENDBLK");
    let shown = |layer: &str| {
        let art = read(&with(
            layers,
            &blocks,
            &format!("0 INSERT 8 {layer} 2 A 10 0 20 0"),
        ));
        (art.strokes.len(), unread(&art))
    };
    assert_eq!(shown("On"), (2, String::new()));
    // Off: what takes the layer of the INSERT is hidden. Frozen: all of it.
    assert_eq!(
        shown("Off"),
        (
            1,
            "layer “Off”: it is switched off; 1 element on it\n".to_owned()
        )
    );
    assert_eq!(
        shown("Ice"),
        (0, "layer “Ice”: it is frozen; 1 element on it\n".to_owned())
    );
}

/// The fixture as an INSERT places it: its elements as a block.
fn inserted(insert: &str) -> Artwork {
    let (_, entities) = LENGTHS_DXF.split_once("ENTITIES\n").expect("the section");
    let (entities, _) = entities.split_once("  0\nENDSEC").expect("its end");
    let (blocks, _) = LENGTHS_DXF
        .split_once("BLOCKS\n")
        .expect("the section")
        .1
        .split_once("  0\nENDSEC")
        .expect("its end");
    read(&format!(
        "0\nSECTION\n2\nBLOCKS\n{blocks}0\nBLOCK\n2\nALL\n10\n7\n20\n9\n{entities}0\nENDBLK\n0\nENDSEC\n{}",
        pairs(&format!(
            "0 SECTION 2 ENTITIES 0 INSERT 2 ALL {insert} 0 ENDSEC 0 EOF"
        ))
    ))
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(64))]

    #[test]
    fn turning_and_mirroring_keeps_lengths_and_scaling_scales_them(
        angle in -720.0_f64..720.0,
        scale in 0.001_f64..1000.0,
        (x, y) in (-1e4_f64..1e4, -1e4_f64..1e4),
        (mirror, below) in (any::<bool>(), any::<bool>()),
    ) {
        let plain = read(LENGTHS_DXF);
        let across = if mirror { -scale } else { scale };
        let side = if below { -1 } else { 1 };
        let placed = inserted(&format!(
            "10 {x} 20 {y} 41 {across} 42 {scale} 50 {angle} 210 0 220 0 230 {side}"
        ));
        prop_assert_eq!(placed.strokes.len(), 8);
        prop_assert_eq!(&placed.unread, &[]);
        for (placed, plain) in placed.strokes.iter().zip(&plain.strokes) {
            let ratio = placed.length() / (plain.length() * scale);
            prop_assert!((ratio - 1.0).abs() < 1e-9, "{}: {ratio}", placed.element);
        }
    }

    #[test]
    fn any_bytes_give_a_drawing_or_a_sentence(bytes in prop::collection::vec(any::<u8>(), 0..400)) {
        if let Err(why) = dxf::read(&bytes) {
            prop_assert!(why.ends_with('.'), "{why}");
        }
    }

    #[test]
    fn any_groups_give_a_drawing_or_a_sentence(
        groups in prop::collection::vec(
            (
                prop::sample::select(vec![
                    0, 0, 0, 2, 5, 8, 10, 11, 20, 21, 30, 40, 40, 41, 42, 50, 51, 60, 62, 70, 71,
                    210, 230,
                ]),
                prop::sample::select(vec![
                    "LINE", "ARC", "CIRCLE", "ELLIPSE", "LWPOLYLINE", "POLYLINE", "VERTEX", "SEQEND",
                    "SPLINE", "INSERT", "BLOCK", "ENDBLK", "SECTION", "BLOCKS", "ENTITIES", "A", "0",
                    "1", "2", "-1", "0.5", "1e9", "-1e-300", "nan", "inf", "",
                ]),
            ),
            0..80,
        ),
    ) {
        let mut text = String::from("0\nSECTION\n2\nENTITIES\n");
        for (code, value) in groups {
            write!(text, "{code}\n{value}\n").expect("room for it");
        }
        whole(dxf::read(text.as_bytes()))?;
    }

    #[test]
    fn a_damaged_drawing_gives_a_drawing_or_a_sentence(
        placed in any::<bool>(),
        damage in prop::collection::vec((any::<prop::sample::Index>(), any::<u8>()), 1..20),
        cut in any::<prop::sample::Index>(),
    ) {
        // From the blocks on, which is where the elements are.
        let file = if placed { PLACED_DXF } else { LENGTHS_DXF };
        let (_, file) = file.split_once("BLOCKS\n").expect("the section");
        let (file, _) = file.split_once("OBJECTS").expect("the section behind");
        let mut bytes = format!("0\nSECTION\n2\nBLOCKS\n{file}").into_bytes();
        for (at, byte) in damage {
            let at = at.index(bytes.len());
            bytes[at] = byte;
        }
        let length = bytes.len();
        // One in two is cut as well.
        bytes.truncate(length / 2 + cut.index(length));
        whole(dxf::read(&bytes))?;
    }

    #[test]
    fn any_figures_of_a_spline_give_a_stroke_or_a_reason(
        degree in 1_usize..16,
        points in prop::collection::vec(
            (-1e3_f64..1e3, -1e3_f64..1e3, prop::sample::select(vec![1.0, 1.0, 0.001, 7.0, 1e6])),
            2..24,
        ),
        steps in prop::collection::vec(0_u8..3, 40),
    ) {
        let mut entity = format!("0 SPLINE 71 {degree}");
        let mut knot = 0;
        for step in &steps[..=points.len() + degree] {
            knot += u32::from(*step);
            write!(entity, " 40 {knot}").expect("room for it");
        }
        for (x, y, weight) in &points {
            write!(entity, " 10 {x} 20 {y} 41 {weight}").expect("room for it");
        }
        let art = whole(dxf::read(with("", "", &entity).as_bytes()))?;
        let art = art.expect("a drawing");
        prop_assert_eq!(art.strokes.len() + art.unread.len(), 1);
        // A spline stays among its control points.
        let room = points.iter().map(|&(x, y, _)| Rect::from_points((x, -y), (x, -y)));
        let room = room.reduce(|a, b| a.union(b)).expect("points").inflate(1e-2, 1e-2);
        for stroke in &art.strokes {
            let found = stroke.path.bounding_box();
            prop_assert_eq!(room.union(found), room, "{:?}", found);
        }
    }
}

/// Whatever was read is whole: figures that are numbers, strokes of one subpath, sentences.
fn whole(read: Result<Artwork, String>) -> Result<Option<Artwork>, TestCaseError> {
    match read {
        Ok(art) => {
            for stroke in &art.strokes {
                prop_assert!(stroke.path.is_finite());
                let length = stroke.length();
                prop_assert!(length.is_finite() && length > 0.0, "{length}");
                let moves = stroke.path.elements().iter();
                let moves = moves.filter(|element| matches!(element, kurbo::PathEl::MoveTo(_)));
                prop_assert_eq!(moves.count(), 1);
            }
            Ok(Some(art))
        }
        Err(why) => {
            prop_assert!(why.ends_with('.'), "{}", why);
            Ok(None)
        }
    }
}
