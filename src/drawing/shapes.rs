//! Plain shapes, each one stroke: from millimetres to a path.
//!
//! A closed shape ends with a line or curve to the very point it begins at: its two electrodes stand
//! there side by side. It begins where a pair of electrodes is seen least by who stands before and
//! below it: in the middle of the lower side, where the glass runs straight or evenly and no bend is
//! in the way; in a star in the lowest notch, between two points; in an arrow in the middle of the
//! tail, far from the head that is looked at.
//!
//! Which figures make a shape is for the caller to check: from a radius larger than its side comes
//! nonsense, though no panic.

use core::f64::consts::{FRAC_PI_2, PI, TAU};

use kurbo::{BezPath, Point, Vec2};

use super::dxf::curves::arc as curve;

/// A straight line lying down.
pub fn line(length_mm: f64) -> BezPath {
    joined(&[Point::ZERO, Point::new(length_mm, 0.0)])
}

/// Straight lines from point to point, measured upwards; closed where the last point is the first.
pub fn polyline(points_mm: &[Point]) -> BezPath {
    let downwards = points_mm
        .iter()
        .map(|point| Point::new(point.x, 0.0 - point.y));
    joined(&downwards.collect::<Vec<Point>>())
}

/// A rectangle, its corners bent to a radius; sharp at 0.
pub fn rectangle(width_mm: f64, height_mm: f64, corner_mm: f64) -> BezPath {
    let half = Vec2::new(width_mm / 2.0, height_mm / 2.0);
    let begin = Point::new(0.0, half.y);
    let mut path = BezPath::new();
    path.move_to(begin);
    // As the hands of a clock go, from the lower left corner on. The run comes along the one side and
    // leaves along the other; both, from the corner's middle, point to them.
    let (left, up, right, down) = (
        Vec2::new(-1.0, 0.0),
        Vec2::new(0.0, -1.0),
        Vec2::new(1.0, 0.0),
        Vec2::new(0.0, 1.0),
    );
    for (along, leaving) in [(down, left), (left, up), (up, right), (right, down)] {
        let to = along + leaving;
        let corner = Point::new(to.x * half.x, to.y * half.y);
        go(&mut path, corner - leaving * corner_mm);
        if corner_mm > 0.0 {
            let middle = corner - to * corner_mm;
            let radii = (along * corner_mm, leaving * corner_mm);
            let end = corner - along * corner_mm;
            curve(&mut path, middle, radii, 0.0, FRAC_PI_2, end);
        }
    }
    go(&mut path, begin);
    path
}

/// An ellipse, or with both sizes the same a circle.
pub fn ellipse(width_mm: f64, height_mm: f64) -> BezPath {
    let (down, left) = (
        Vec2::new(0.0, height_mm / 2.0),
        Vec2::new(-width_mm / 2.0, 0.0),
    );
    let begin = Point::ZERO + down;
    let mut path = BezPath::new();
    path.move_to(begin);
    curve(&mut path, Point::ZERO, (down, left), 0.0, TAU, begin);
    path
}

/// A part of a circle, its middle at the top: both ends hang down as far.
pub fn arc(radius_mm: f64, sweep_degrees: f64) -> BezPath {
    let sweep = sweep_degrees.to_radians();
    let end = |side: f64| {
        let (sin, cos) = (sweep / 2.0).sin_cos();
        Point::new(side * radius_mm * sin, -radius_mm * cos)
    };
    let radii = (Vec2::new(0.0, -radius_mm), Vec2::new(radius_mm, 0.0));
    let mut path = BezPath::new();
    path.move_to(end(-1.0));
    curve(&mut path, Point::ZERO, radii, -sweep / 2.0, sweep, end(1.0));
    path
}

/// A polygon of equal sides, one of them lying at the bottom. Its size is the diameter of the circle
/// through its corners.
pub fn polygon(sides: u32, across_corners_mm: f64) -> BezPath {
    let radius = across_corners_mm / 2.0;
    let half_side = PI / f64::from(sides);
    let begin = Point::new(0.0, radius * half_side.cos());
    let corners = (0..sides).map(|number| {
        // Counted from straight down, to the left.
        let angle = half_side * (1.0 + 2.0 * f64::from(number));
        Point::new(-radius * angle.sin(), radius * angle.cos())
    });
    joined(&closed(begin, corners))
}

/// A star standing on its lower points, one point straight up. Its sizes are the diameters of the
/// circles through its points and through its notches.
pub fn star(points: u32, outer_mm: f64, inner_mm: f64) -> BezPath {
    let half_point = PI / f64::from(points);
    // Corners are counted from the top, every other one a notch; of an odd number of points the
    // lowest notch is straight down, of an even one it is beside the lowest point.
    let lowest = if points.is_multiple_of(2) {
        points.saturating_sub(1)
    } else {
        points
    };
    let corner = |number: u32| {
        let across = if number.is_multiple_of(2) {
            outer_mm
        } else {
            inner_mm
        };
        let angle = half_point * f64::from(number);
        Point::new(across / 2.0 * angle.sin(), -across / 2.0 * angle.cos())
    };
    let others = (1..points.saturating_mul(2)).map(|number| corner(lowest.saturating_add(number)));
    joined(&closed(corner(lowest), others))
}

/// Sizes of an arrow, in millimetres.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Arrow {
    /// From the tail to the tip.
    pub length: f64,
    /// Of that, the head.
    pub head_length: f64,
    /// The head where it is widest.
    pub head_width: f64,
    /// The shaft.
    pub shaft_width: f64,
}

/// The outline of an arrow pointing to the right.
pub fn arrow(size: Arrow) -> BezPath {
    let (head, shaft) = (size.head_width / 2.0, size.shaft_width / 2.0);
    let neck = size.length - size.head_length;
    let corners = [
        (0.0, -shaft),
        (neck, -shaft),
        (neck, -head),
        (size.length, 0.0),
        (neck, head),
        (neck, shaft),
        (0.0, shaft),
    ];
    joined(&closed(Point::ZERO, corners.into_iter().map(Point::from)))
}

/// All corners and the beginning again.
fn closed(begin: Point, others: impl Iterator<Item = Point>) -> Vec<Point> {
    let mut points = vec![begin];
    points.extend(others);
    points.push(begin);
    points
}

fn joined(points: &[Point]) -> BezPath {
    let mut path = BezPath::new();
    let mut points = points.iter();
    if let Some(&first) = points.next() {
        path.move_to(first);
    }
    for &point in points {
        go(&mut path, point);
    }
    path
}

/// A line to a point, unless it is reached already: what has no length has no direction either.
fn go(path: &mut BezPath, to: Point) {
    let at = path.elements().last().and_then(kurbo::PathEl::end_point);
    if at != Some(to) {
        path.line_to(to);
    }
}
