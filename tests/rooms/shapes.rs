//! Plain shapes against closed forms; what of a shape is refused, in which words; its file.

use core::f64::consts::PI;

use insta::assert_snapshot;
use kurbo::{BezPath, ParamCurveArclen, Point, Rect, Shape as _};
use proptest::prelude::*;
use proptest::sample::select;
use tubewright::book::Allowances;
use tubewright::drawing::shapes::{self, Arrow};
use tubewright::job::{self, Job, Row, Shape, ShapeRow};
use tubewright::measure::{LengthUnit, length, point, points_with_units};
use tubewright::rules::{Grade, Place};
use tubewright::takeoff::{Takeoff, takeoff};

fn length_of(path: &BezPath) -> f64 {
    path.segments().map(|segment| segment.arclen(1e-12)).sum()
}

/// Equal to a part in 10⁹.
fn near(found: f64, expect: f64, what: &str) {
    assert!(
        (found / expect - 1.0).abs() < 1e-9,
        "{what}: {found}, closed form {expect}"
    );
}

/// First and last point of the elements as they stand.
fn ends(path: &BezPath) -> (Point, Point) {
    let points: Vec<Point> = path
        .elements()
        .iter()
        .map(|element| element.end_point().expect("no bare closing element"))
        .collect();
    (points[0], points[points.len() - 1])
}

fn closed(path: &BezPath) -> Point {
    let (first, last) = ends(path);
    assert_eq!(first, last, "it ends at the very point it begins at");
    first
}

fn near_box(path: &BezPath, width: f64, height: f64) {
    let found = path.bounding_box();
    assert!(
        (found.width() - width).abs() < 1e-6 * width
            && (found.height() - height).abs() < 1e-6 * height,
        "{width} by {height}: {found:?}"
    );
}

#[test]
fn circles() {
    for diameter in [10.0, 600.0, 20_000.0] {
        let path = shapes::ellipse(diameter, diameter);
        near(length_of(&path), PI * diameter, "πd");
        assert_eq!(closed(&path), Point::new(0.0, diameter / 2.0), "the bottom");
        near_box(&path, diameter, diameter);
    }
}

#[test]
fn ellipses() {
    // 4a E(1 - b²/a²), the complete elliptic integral of mpmath 1.3.0 at 30 digits; the second stands
    // in tests/reference/paths, too.
    for (width, height, expect) in [
        (600.0, 300.0, 1_453.267_233_082_151_4),
        (120.0, 50.0, 278.479_746_855_423_7),
        (2_000.0, 10.0, 4_000.309_233_212_023),
        (10.0, 20_000.0, 40_000.042_435_987_81),
        (300.0, 900.0, 2_004.733_983_083_288_7),
    ] {
        let path = shapes::ellipse(width, height);
        near(length_of(&path), expect, &format!("{width} by {height}"));
        assert_eq!(closed(&path), Point::new(0.0, height / 2.0), "the bottom");
        near_box(&path, width, height);
    }
}

#[test]
fn rectangles() {
    let (w, h) = (600.0, 300.0);
    for r in [0.0, 1e-3, 40.0, 149.9, 150.0] {
        let path = shapes::rectangle(w, h, r);
        let expect = 2.0 * (w + h) - 8.0 * r + 2.0 * PI * r;
        near(length_of(&path), expect, &format!("corners of {r}"));
        assert_eq!(
            closed(&path),
            Point::new(0.0, 150.0),
            "the middle of the lower side"
        );
        near_box(&path, w, h);
        // Corners are cut off by the square less the quarter circle, four times.
        let area = path.area().abs();
        near(area, w * h - (4.0 - PI) * r * r, "area");
    }
    // Both radii are half a side: a circle.
    near(
        length_of(&shapes::rectangle(300.0, 300.0, 150.0)),
        PI * 300.0,
        "a circle",
    );
}

#[test]
fn arcs() {
    for sweep in [1.0, 90.0, 120.0, 180.0, 270.0, 359.0] {
        let path = shapes::arc(400.0, sweep);
        near(length_of(&path), 400.0 * PI * sweep / 180.0, "rφ");
        let (from, to) = ends(&path);
        assert!(
            from.x < to.x && from.y == to.y,
            "{from:?} level with {to:?}"
        );
        // The chord, 2r sin(φ/2).
        near(
            from.distance(to),
            800.0 * (PI * sweep / 360.0).sin(),
            "chord",
        );
        let top = path.bounding_box().y0;
        assert!((top + 400.0).abs() < 1e-6, "its middle is the top: {top}");
    }
}

#[test]
fn polygons() {
    for sides in [3, 4, 5, 6, 12, 60] {
        let path = shapes::polygon(sides, 500.0);
        let n = f64::from(sides);
        // n sides of d sin(π/n).
        near(
            length_of(&path),
            n * 500.0 * (PI / n).sin(),
            &format!("{sides} sides"),
        );
        // Half d² sin(2π/n) / 4 for each of the triangles: every corner is on the circle, in order.
        let triangle = 0.5 * 250.0 * 250.0 * (2.0 * PI / n).sin();
        near(path.area().abs(), n * triangle, "area");
        let begin = closed(&path);
        near(begin.y, 250.0 * (PI / n).cos(), "on the lower side");
        assert!(begin.x.abs() < 1e-12, "in its middle");
        assert!(
            (path.bounding_box().y1 - begin.y).abs() < 1e-9,
            "nothing is below the lower side"
        );
    }
    // A square of 500 across its corners has sides of 500/√2.
    near_box(
        &shapes::polygon(4, 500.0),
        125_000_f64.sqrt(),
        125_000_f64.sqrt(),
    );
}

#[test]
fn stars() {
    for points in [3, 4, 5, 6, 7, 60] {
        let path = shapes::star(points, 600.0, 230.0);
        let n = f64::from(points);
        // 2n sides between circles of R and r, π/n apart: the law of cosines.
        let (outer, inner) = (300.0_f64, 115.0_f64);
        let side = (outer * outer + inner * inner - 2.0 * outer * inner * (PI / n).cos()).sqrt();
        near(
            length_of(&path),
            2.0 * n * side,
            &format!("{points} points"),
        );
        near(
            path.area().abs(),
            n * outer * inner * (PI / n).sin(),
            "area",
        );
        let begin = closed(&path);
        near(begin.to_vec2().hypot(), inner, "in a notch");
        let notches = path.segments().map(|segment| match segment {
            kurbo::PathSeg::Line(line) => line.p0,
            curve => panic!("a star is of lines: {curve:?}"),
        });
        let lowest = notches
            .filter(|corner| corner.to_vec2().hypot() < 200.0)
            .map(|corner| corner.y)
            .fold(f64::MIN, f64::max);
        assert!((begin.y - lowest).abs() < 1e-9, "none is lower");
        assert!(
            (path.bounding_box().y0 + outer).abs() < 1e-9,
            "a point stands straight up"
        );
    }
}

#[test]
fn arrows_lines_and_polylines() {
    let path = shapes::arrow(Arrow {
        length: 600.0,
        head_length: 200.0,
        head_width: 300.0,
        shaft_width: 100.0,
    });
    // Two sides of the shaft of 400, its end of 100, the two steps to the head of 100 each, and two
    // slants of √(200² + 150²) = 250.
    near(length_of(&path), 800.0 + 100.0 + 200.0 + 500.0, "arrow");
    assert_eq!(closed(&path), Point::ZERO, "the middle of the tail");
    assert_eq!(path.bounding_box(), Rect::new(0.0, -150.0, 600.0, 150.0));

    let line = shapes::line(457.2);
    assert_eq!(length_of(&line), 457.2);
    assert_eq!(ends(&line), (Point::ZERO, Point::new(457.2, 0.0)));

    let corners = [(0.0, 0.0), (30.0, 40.0), (30.0, 40.0), (30.0, 100.0)].map(Point::from);
    let open = shapes::polyline(&corners);
    assert_eq!(length_of(&open), 110.0);
    assert_eq!(
        open.to_svg(),
        "M0,0 L30,-40 L30,-100",
        "upwards, and no line of no length"
    );
    let triangle = [(0.0, 0.0), (30.0, 0.0), (30.0, 40.0), (0.0, 0.0)].map(Point::from);
    assert_eq!(closed(&shapes::polyline(&triangle)), Point::ZERO);
}

fn row(shape: Shape) -> ShapeRow {
    ShapeRow {
        shape,
        tube: "t".to_owned(),
        ..ShapeRow::default()
    }
}

fn off(row: ShapeRow) -> Takeoff {
    let job = Job {
        rows: vec![Row::Shape(row)],
        ..Job::default()
    };
    // Nothing is too long here: a shape is one piece.
    let allowances = Allowances {
        longest_piece_mm: 100_000.0,
        ..Allowances::default()
    };
    takeoff(&job, &allowances)
}

fn s(text: &str) -> String {
    text.to_owned()
}

fn rectangle(width: &str, height: &str, corner: &str) -> Shape {
    Shape::Rectangle {
        width: s(width),
        height: s(height),
        corner: s(corner),
    }
}

fn star(points: i64, outer: &str, inner: &str) -> Shape {
    Shape::Star {
        points,
        outer_diameter: s(outer),
        inner_diameter: s(inner),
    }
}

fn arrow(length: &str, head_length: &str, head_width: &str, shaft_width: &str) -> Shape {
    Shape::Arrow {
        length: s(length),
        head_length: s(head_length),
        head_width: s(head_width),
        shaft_width: s(shaft_width),
    }
}

fn polyline(points: &str) -> Shape {
    Shape::Polyline { points: s(points) }
}

/// One of each kind, and its length worked out by hand.
fn one_of_each() -> Vec<(Shape, f64)> {
    vec![
        (
            Shape::Line {
                length: s("1' 6 in"),
            },
            457.2,
        ),
        (polyline("0, 0; 30 cm, 0; 300, 400; 0, 0"), 1_200.0),
        (
            rectangle("600 mm", "300 mm", "40 mm"),
            1_800.0 - 320.0 + 80.0 * PI,
        ),
        (rectangle("600 mm", "300 mm", ""), 1_800.0),
        (
            Shape::Circle {
                diameter: s("500 mm"),
            },
            500.0 * PI,
        ),
        (
            Shape::Ellipse {
                width: s("600 mm"),
                height: s("300 mm"),
            },
            1_453.267_233_082_151_4,
        ),
        (
            Shape::Arc {
                radius: s("600 mm"),
                sweep_degrees: 120.0,
            },
            400.0 * PI,
        ),
        (
            Shape::Polygon {
                sides: 6,
                across_corners: s("400 mm"),
            },
            1_200.0,
        ),
        // A square with notches halfway in: eight sides of √(300² + 150² - 300 · 150 · √2).
        (
            star(4, "600 mm", "300 mm"),
            8.0 * (112_500.0 - 45_000.0 * 2.0_f64.sqrt()).sqrt(),
        ),
        (arrow("600 mm", "200 mm", "300 mm", "100 mm"), 1_600.0),
    ]
}

#[test]
fn every_shape_is_one_piece_of_its_length() {
    for (shape, expect) in one_of_each() {
        let kind = shape.kind();
        let off = off(row(shape));
        assert!(
            off.findings.is_empty() || expect > 2_400.0,
            "{kind}: {:?}",
            off.findings
        );
        assert_eq!(off.pieces.len(), 1, "{kind}");
        let piece = &off.pieces[0];
        near(piece.lit.mm(), expect, kind);
        assert_eq!(piece.hidden.mm(), 0.0, "{kind}");
        assert_eq!(piece.label, kind, "called by its kind");
        let [one, other] = piece.electrodes;
        let open = ["line", "arc"].contains(&kind);
        assert_eq!(
            one == other,
            !open,
            "{kind}: electrodes at {one:?}, {other:?}"
        );
    }
}

#[test]
fn a_shape_is_turned_as_letters_are_and_made_several_times() {
    let line = |rotation_degrees: f64, count| ShapeRow {
        label: s("Post"),
        rotation_degrees,
        count,
        ..row(Shape::Line {
            length: s("600 mm"),
        })
    };
    let upright = off(line(90.0, 2));
    let labels: Vec<&str> = upright.pieces.iter().map(|p| p.label.as_str()).collect();
    assert_eq!(labels, ["Post (1 of 2)", "Post (2 of 2)"]);
    let [low, high] = upright.pieces[0].electrodes;
    assert!(
        (low.y - high.y - 600.0).abs() < 1e-9 && (low.x - high.x).abs() < 1e-9,
        "its right end rises: {low:?} {high:?}"
    );
    near(upright.pieces[0].lit.mm(), 600.0, "as long");
    let wrong = off(line(200.0, 1));
    assert_eq!(wrong.pieces.len(), 1, "drawn all the same");
    assert_snapshot!(wrong.findings[0].says, @"Rotation must be -180 to 180 degrees (half a turn either way is every direction there is), but is 200 degrees: drawn upright.");
}

/// All sentences about the row; there must be no piece.
fn refused(shape: Shape) -> String {
    let off = off(row(shape));
    assert!(off.pieces.is_empty(), "nothing is made of it");
    let told = |finding: &tubewright::rules::Finding| {
        assert_eq!(finding.grade, Grade::Stop);
        assert_eq!(finding.place, Place::Row(0));
        finding.says.clone()
    };
    let says: Vec<String> = off.findings.iter().map(told).collect();
    says.join("\n")
}

#[test]
fn sizes_that_cannot_be_read_or_made() {
    assert_snapshot!(refused(Shape::default()), @"Length: expected a number such as 450, but the text ends at character 1 of “”.");
    assert_snapshot!(refused(Shape::Circle { diameter: s("12 parsecs") }), @"Diameter: expected “+”, “x” or the end, but found “parsecs” at character 4 of “12 parsecs”; units are mm, cm, m, in or ft.");
    assert_snapshot!(refused(Shape::Circle { diameter: s("9 mm") }), @"Diameter must be 10 to 20000 mm (smaller cannot be bent in glass, larger is built from several shapes), but is 9 mm.");
    assert_snapshot!(refused(rectangle("wide", "30 m", "soft")), @r"
    Width: expected a number such as 450, but found “wide” at character 1 of “wide”.
    Height must be 10 to 20000 mm (smaller cannot be bent in glass, larger is built from several shapes), but is 30000 mm.
    Corner radius: expected a number such as 450, but found “soft” at character 1 of “soft”.
    ");
    assert_snapshot!(refused(Shape::Ellipse { width: s("600 mm"), height: s("0") }), @"Height must be 10 to 20000 mm (smaller cannot be bent in glass, larger is built from several shapes), but is 0 mm.");
    assert_snapshot!(refused(Shape::Arc { radius: s("1 mm"), sweep_degrees: 360.0 }), @r"
    Arc radius must be 10 to 100000 mm (a larger one is a straight line), but is 1 mm.
    Arc sweep must be 1 to 359 degrees (with less it is a straight line, all of it is a circle), but is 360 degrees.
    ");
    assert_snapshot!(refused(Shape::Arc { radius: s("20 mm"), sweep_degrees: 2.0 }), @"The glass of one shape must be 10 to 100000 mm (shorter cannot be bent, longer is built from several shapes), but is 0.698 mm.");
    assert_snapshot!(refused(Shape::Arc { radius: s("100 m"), sweep_degrees: 180.0 }), @"The glass of one shape must be 10 to 100000 mm (shorter cannot be bent, longer is built from several shapes), but is 314159.265 mm.");
    assert_snapshot!(refused(Shape::Arc { radius: s("1 m"), sweep_degrees: f64::NAN }), @"Arc sweep must be 1 to 359 degrees (with less it is a straight line, all of it is a circle), but is NaN degrees.");
    assert_snapshot!(refused(Shape::Polygon { sides: 2, across_corners: s("1 m") }), @"Sides must be 3 to 60 (with fewer nothing is enclosed, with more it looks like a circle), but is 2.");
    assert_snapshot!(refused(star(i64::MAX, "600 mm", "200 mm")), @"Points of a star must be 3 to 60 (with fewer it is no star, more cannot be told apart), but is 9e18.");
}

#[test]
fn sizes_that_contradict_each_other() {
    assert_snapshot!(refused(rectangle("600 mm", "300 mm", "151 mm")), @"Corner radius must be at most 150 mm (half the shorter side; there the corners meet), but is 151 mm.");
    assert_eq!(
        off(row(rectangle("600 mm", "300 mm", "150 mm")))
            .pieces
            .len(),
        1,
        "half is enough"
    );
    // A third of an inch, 8.4666…: what the sentence asks for must do.
    assert_snapshot!(refused(rectangle("600 mm", "2/3 in", "1/2 in")), @"Corner radius must be at most 8.466 mm (half the shorter side; there the corners meet), but is 12.7 mm.");
    assert_eq!(
        off(row(rectangle("600 mm", "2/3 in", "8.466 mm")))
            .pieces
            .len(),
        1
    );
    assert_snapshot!(refused(star(5, "600 mm", "600 mm")), @"Inner diameter must be less than 485.41 mm (there the sides run straight from point to point), but is 600 mm.");
    // 600 cos 36° = 485.410…: at that a star is a pentagon.
    assert_snapshot!(refused(star(5, "600 mm", "485.411 mm")), @"Inner diameter must be less than 485.41 mm (there the sides run straight from point to point), but is 485.411 mm.");
    assert_eq!(off(row(star(5, "600 mm", "485.41 mm"))).pieces.len(), 1);
    assert_snapshot!(refused(arrow("300 mm", "300 mm", "200 mm", "250 mm")), @r"
    Head length must be less than 300 mm (the length of the whole arrow), but is 300 mm.
    Shaft width must be less than 200 mm (the width of the head), but is 250 mm.
    ");
}

#[test]
fn points_of_a_polyline() {
    let mm = |text: &str| {
        let found = point(text, LengthUnit::Millimetres).unwrap_or_else(|why| panic!("{why}"));
        found.map(|length| length.length().mm())
    };
    assert_eq!(mm("0,0"), [0.0, 0.0]);
    assert_eq!(mm(" 600 mm , 1' 6\" "), [600.0, 457.2]);
    assert_eq!(
        mm("12,5, 30"),
        [12.5, 30.0],
        "a decimal comma where only it can be one"
    );
    assert_eq!(mm("12, 30,5"), [12.0, 30.5]);
    assert_eq!(mm("12,5, 30,5"), [12.5, 30.5]);
    assert_eq!(mm("2 x 180 + 95, 1 m"), [455.0, 1_000.0]);

    assert_snapshot!(refused(polyline("")), @"Points must be 2 to 200 (a line goes from one to another; a drawing of more is artwork), but is 0.");
    assert_snapshot!(refused(polyline("0, 0;")), @"Points must be 2 to 200 (a line goes from one to another; a drawing of more is artwork), but is 1.");
    assert_snapshot!(refused(polyline("0, 0; 600")), @"Point 2: expected a comma and how far up the point is, but the text ends at character 4 of “600”; a point is written as 600 mm, 300 mm.");
    assert_snapshot!(refused(polyline("0, 0; 12,5,30; 4, x")), @r"
    Point 2: expected one comma, between across and up, but found “,5,30” at character 3 of “12,5,30”; it could be “12” across and “5,30” up, or “12,5” and “30”: write decimals with a point.
    Point 3: expected a number such as 450, but found “x” at character 2 of “ x”.
    ");
    assert_snapshot!(refused(polyline("0, 0; -5, 10; 30 m, 0")), @r"
    Point 2: expected a figure from 0 on, but found “-5” at character 1 of “-5”; nothing here is ever negative.
    Point 3: across must be 0 to 20000 mm (from the lower left; larger is built from several shapes), but is 30000 mm.
    ");
    assert_snapshot!(refused(polyline("5, 5; 5, 5")), @"The glass of one shape must be 10 to 100000 mm (shorter cannot be bent, longer is built from several shapes), but is 0 mm.");
    assert_snapshot!(refused(polyline(&"0, 0; ".repeat(201))), @"Points must be 2 to 200 (a line goes from one to another; a drawing of more is artwork), but is 201.");
    assert_snapshot!(refused(polyline(&format!("0, 0; {}", ",".repeat(100_000)))), @"Point 2: expected one comma, between across and up, but found “,,,,,,,,,,,,,,,,,,,,,,,,…” at character 21 of “,,,,,,,,,,,,,,,,,,,,,,,,…”.");

    assert_eq!(
        points_with_units("0, 0; 600, 1' 6; 12,5,30;x", LengthUnit::Inches),
        "0 in, 0 in; 600 in, 1' 6; 12,5,30;x",
        "what cannot be read stays"
    );
}

#[test]
fn a_shape_written_and_read_is_the_same() {
    let shapes = one_of_each().into_iter().map(|(shape, _)| shape);
    let job = Job {
        rows: shapes
            .map(|shape| {
                Row::Shape(ShapeRow {
                    label: s("Border"),
                    count: 2,
                    rotation_degrees: -7.5,
                    group: s("sky"),
                    ..row(shape)
                })
            })
            .collect(),
        ..Job::default()
    };
    let text = job::write(&job);
    assert!(text.contains("\"version\": 3,"), "shapes are new");
    assert_eq!(job::read(&text), Ok(job));

    // As it stands in a file, and what may be left out.
    let file = |row: &str| {
        let text = format!(
            r#"{{"tubewright": "job", "version": 3, "name": "x", "rows": [{{"row": "shape", {row}}}]}}"#
        );
        job::read(&text).map(|mut job| job.rows.remove(0))
    };
    assert_eq!(
        file(r#""shape": {"rectangle": {"width": "600 mm", "height": "300 mm"}}, "tube": "t""#),
        Ok(Row::Shape(row(rectangle("600 mm", "300 mm", ""))))
    );
    assert_eq!(
        file(r#""shape": {"polygon": {"sides": 6, "across_corners": "400 mm"}}, "tube": "t""#),
        Ok(Row::Shape(row(Shape::Polygon {
            sides: 6,
            across_corners: s("400 mm")
        })))
    );
    let trouble = |row: &str| file(row).expect_err("not a shape");
    assert_snapshot!(trouble(r#""shape": {"blob": {}}, "tube": "t""#), @"This job file cannot be read: expected line or polyline or rectangle or circle or ellipse or arc or polygon or star or arrow, but found “blob” (line 1, column 111).");
    assert_snapshot!(trouble(r#""shape": {"circle": {"radius": "1"}}, "tube": "t""#), @"This job file cannot be read: unknown field “radius” (line 1, column 126).");
    assert_snapshot!(trouble(r#""tube": "t""#), @"This job file cannot be read: “shape” is missing (line 1, column 88).");

    // What is no number is left out, or the file could not be read again.
    let arc = |sweep_degrees: f64| Job {
        rows: vec![Row::Shape(row(Shape::Arc {
            radius: s("1 m"),
            sweep_degrees,
        }))],
        ..Job::default()
    };
    assert_eq!(job::read(&job::write(&arc(f64::NAN))), Ok(arc(180.0)));
}

fn typed() -> impl Strategy<Value = String> {
    prop_oneof![
        4 => (0..30_000_u32).prop_map(|mm| format!("{mm} mm")),
        2 => select(vec!["", "0", "1/3 in", "1' 6 1/2\"", "12,5", "9 km", "-1", "1e9", "∞"]).prop_map(s),
        1 => any::<String>(),
    ]
}

/// A shape of any kind, of sizes that make sense and such as do not.
pub(super) fn any_shape() -> impl Strategy<Value = Shape> {
    let count = prop_oneof![4 => 0..70_i64, 1 => any::<i64>()];
    (
        0..9,
        typed(),
        typed(),
        typed(),
        typed(),
        count,
        any::<f64>(),
    )
        .prop_map(|(kind, a, b, c, d, count, degrees)| match kind {
            0 => Shape::Line { length: a },
            1 => polyline(&format!("{a}, {b}; {c},{d}; {a};{d}")),
            2 => rectangle(&a, &b, &c),
            3 => Shape::Circle { diameter: a },
            4 => Shape::Ellipse {
                width: a,
                height: b,
            },
            5 => Shape::Arc {
                radius: a,
                sweep_degrees: degrees % 400.0,
            },
            6 => Shape::Polygon {
                sides: count,
                across_corners: a,
            },
            7 => star(count, &a, &b),
            _ => arrow(&a, &b, &c, &d),
        })
}

proptest! {
    #[test]
    fn a_shape_is_one_piece_or_stopped(shape in any_shape(), turned in -400.0..400.0_f64) {
        let off = off(ShapeRow { rotation_degrees: turned, ..row(shape) });
        let stops = off.findings.iter().filter(|finding| finding.grade == Grade::Stop);
        let drawn = stops.clone().all(|finding| finding.says.contains("drawn upright"));
        prop_assert_eq!(off.pieces.len(), usize::from(drawn), "{:?}", off.findings);
        for piece in &off.pieces {
            prop_assert!(piece.lit.mm().is_finite() && piece.lit.mm() >= 10.0);
            let bounds = off.rows[0].bounds;
            prop_assert!(bounds.is_finite());
            prop_assert!(piece.electrodes.iter().all(|end| bounds.inflate(1e-6, 1e-6).contains(*end)));
        }
    }

    #[test]
    fn units_written_out_change_no_point(text in "[0-9x+/.,;' \"½minft-]{0,40}", inches in any::<bool>()) {
        let (bare, other) = if inches {
            (LengthUnit::Inches, LengthUnit::Millimetres)
        } else {
            (LengthUnit::Millimetres, LengthUnit::Inches)
        };
        let written = points_with_units(&text, bare);
        prop_assert_eq!(points_with_units(&written, other), written.clone(), "stable");
        for (typed, written) in text.split(';').zip(written.split(';')) {
            prop_assert_eq!(point(typed, bare).ok(), point(written, other).ok(), "{} {}", typed, written);
        }
    }

    #[test]
    fn a_point_is_what_its_two_lengths_are(across in 0..99_999_u32, up in 0..99_999_u32) {
        let (across, up) = (format!("{across} mm"), format!("{up} in"));
        let found = point(&format!("{across}, {up}"), LengthUnit::Inches);
        let alone = [&across, &up].map(|text| length(text, LengthUnit::Millimetres).expect("a length"));
        prop_assert_eq!(found, Ok(alone));
    }
}
