//! The pen that draws subpaths, and the shapes that are not paths in the file.

use super::MOST_SEGMENTS;
use kurbo::{BezPath, Point, Vec2};
use std::f64::consts::{FRAC_PI_2, PI, TAU};

/// Curves in a whole turn of an arc. The error of a length falls with its sixth power; at 48 it is
/// below a part in 10¹⁰.
const IN_A_TURN: f64 = 48.0;

/// How near its beginning a subpath must end to be closed, as a part of its size.
const CLOSED: f64 = 1e-9;

/// More lines and curves than a drawing may have.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct TooMany;

/// One subpath and whether it ends where it begins.
pub(super) type Subpath = (BezPath, bool);

/// Draws subpaths one after the other.
#[derive(Default)]
pub(super) struct Pen {
    done: Vec<Subpath>,
    path: BezPath,
    start: Point,
    at: Point,
    /// The subpath was drawn on, even if not from the spot.
    drawn: bool,
    segments: usize,
    /// Subpaths that never leave their spot.
    pub(super) dots: usize,
    too_many: bool,
}

impl Pen {
    pub(super) fn at(&self) -> Point {
        self.at
    }

    /// Whether more was drawn than may be; what is drawn on is of no use.
    pub(super) fn is_full(&self) -> bool {
        self.too_many
    }

    pub(super) fn move_to(&mut self, to: Point) {
        self.finish(false);
        self.start = to;
        self.at = to;
    }

    /// One more segment, unless it does not leave the spot: such have no direction and add nothing.
    fn draw(&mut self, points: &[Point], add: impl FnOnce(&mut BezPath)) {
        self.drawn = true;
        if points.iter().all(|&point| point == self.at) {
            return;
        }
        if self.segments >= MOST_SEGMENTS {
            self.too_many = true;
            return;
        }
        self.segments += 1;
        if self.path.is_empty() {
            self.path.move_to(self.at);
        }
        add(&mut self.path);
        self.at = points.last().copied().unwrap_or(self.at);
    }

    pub(super) fn line_to(&mut self, to: Point) {
        self.draw(&[to], |path| path.line_to(to));
    }

    pub(super) fn quad_to(&mut self, by: Point, to: Point) {
        self.draw(&[by, to], |path| path.quad_to(by, to));
    }

    pub(super) fn cubic_to(&mut self, first: Point, second: Point, to: Point) {
        self.draw(&[first, second, to], |path| {
            path.curve_to(first, second, to);
        });
    }

    pub(super) fn close(&mut self) {
        self.drawn = true;
        self.finish(true);
        self.at = self.start;
    }

    fn finish(&mut self, closed: bool) {
        let mut path = std::mem::take(&mut self.path);
        let drawn = std::mem::take(&mut self.drawn);
        if path.is_empty() {
            self.dots += usize::from(drawn);
            return;
        }
        let size = self.size_of(&path);
        let back = self.at.distance(self.start) <= CLOSED * size && path.elements().len() > 2;
        if closed || back {
            path.close_path();
        }
        self.done.push((path, closed || back));
    }

    /// How far the points of a path are from its beginning, at most.
    fn size_of(&self, path: &BezPath) -> f64 {
        let ends = path.elements().iter().filter_map(kurbo::PathEl::end_point);
        ends.map(|end| end.distance(self.start)).fold(0.0, f64::max)
    }

    /// What was drawn.
    pub(super) fn subpaths(mut self) -> Result<(Vec<Subpath>, usize), TooMany> {
        self.finish(false);
        if self.too_many {
            return Err(TooMany);
        }
        Ok((self.done, self.dots))
    }

    /// An arc by the endpoint form of the SVG book.
    ///
    /// Own arithmetic: the ready-made one makes few curves of it, and takes the root of rounding
    /// noise where the radii are too small to reach, which costs a part in 10⁶.
    pub(super) fn arc_to(&mut self, radii: Vec2, turn: f64, large: bool, sweep: bool, to: Point) {
        let from = self.at;
        let (rx, ry) = (radii.x.abs(), radii.y.abs());
        if from == to {
            self.drawn = true;
            return;
        }
        if rx == 0.0 || ry == 0.0 {
            self.line_to(to);
            return;
        }
        let half = rotated((from - to) / 2.0, -turn);
        // Where the end lies in the circle that the ellipse is squeezed from.
        let unit = Vec2::new(half.x / rx, half.y / ry);
        let reach = unit.hypot();
        // Radii that do not reach are scaled up until they just do; then the centre is halfway.
        let grow = reach.max(1.0);
        let (rx, ry, unit) = (rx * grow, ry * grow, unit / grow);
        let off = if reach >= 1.0 {
            0.0
        } else {
            (1.0 / unit.hypot2() - 1.0).max(0.0).sqrt()
        };
        let off = if large == sweep { -off } else { off };
        let centre = Vec2::new(off * unit.y, -off * unit.x);
        let begin = (unit - centre).atan2();
        let end = (-unit - centre).atan2();
        let mut by = end - begin;
        if reach >= 1.0 {
            // Half a turn by its definition; the difference of two angles would carry noise.
            by = if sweep { PI } else { -PI };
        } else if sweep && by < 0.0 {
            by += TAU;
        } else if !sweep && by > 0.0 {
            by -= TAU;
        }
        let middle = from.midpoint(to) + rotated(Vec2::new(centre.x * rx, centre.y * ry), turn);
        self.turn(middle, Vec2::new(rx, ry), turn, begin, by, to);
    }

    /// Curves along an ellipse from an angle on, ending at a point that is known exactly.
    fn turn(&mut self, middle: Point, radii: Vec2, tilt: f64, from: f64, by: f64, to: Point) {
        let count = (by.abs() / TAU * IN_A_TURN).ceil().clamp(1.0, IN_A_TURN);
        let step = by / count;
        let reach = 4.0 / 3.0 * (step / 4.0).tan();
        let on = |unit: Vec2| middle + rotated(Vec2::new(unit.x * radii.x, unit.y * radii.y), tilt);
        let mut begin = Vec2::from_angle(from);
        let mut number = 0.0;
        while number < count {
            number += 1.0;
            let end = Vec2::from_angle(from + step * number);
            let first = begin + Vec2::new(-begin.y, begin.x) * reach;
            let second = end - Vec2::new(-end.y, end.x) * reach;
            let last = if number < count { on(end) } else { to };
            self.cubic_to(on(first), on(second), last);
            begin = end;
        }
    }

    /// A whole ellipse, from its right end, clockwise as the eye sees it.
    pub(super) fn ellipse(&mut self, middle: Point, radii: Vec2) {
        let right = middle + Vec2::new(radii.x, 0.0);
        self.move_to(right);
        self.turn(middle, radii, 0.0, 0.0, TAU, right);
        self.close();
    }

    /// A rectangle, its corners rounded where the radii say so.
    pub(super) fn rect(&mut self, corner: Point, size: Vec2, radii: Vec2) {
        let (rx, ry) = (radii.x.min(size.x / 2.0), radii.y.min(size.y / 2.0));
        if rx <= 0.0 || ry <= 0.0 {
            self.move_to(corner);
            self.line_to(corner + Vec2::new(size.x, 0.0));
            self.line_to(corner + size);
            self.line_to(corner + Vec2::new(0.0, size.y));
            self.close();
            return;
        }
        let radii = Vec2::new(rx, ry);
        // Middles of the corners from the upper right on, and the direction of each first radius.
        let corners = [
            (Vec2::new(size.x - rx, ry), -FRAC_PI_2),
            (Vec2::new(size.x - rx, size.y - ry), 0.0),
            (Vec2::new(rx, size.y - ry), FRAC_PI_2),
            (Vec2::new(rx, ry), PI),
        ];
        self.move_to(corner + Vec2::new(rx, 0.0));
        for (middle, from) in corners {
            let middle = corner + middle;
            let ends = |angle: f64| {
                let unit = Vec2::from_angle(angle);
                // Right angles: a cosine that should be 0 must not bend the straight sides.
                middle + Vec2::new(unit.x.round() * rx, unit.y.round() * ry)
            };
            self.line_to(ends(from));
            self.turn(middle, radii, 0.0, from, FRAC_PI_2, ends(from + FRAC_PI_2));
        }
        self.close();
    }
}

fn rotated(vector: Vec2, by: f64) -> Vec2 {
    let (sin, cos) = by.sin_cos();
    Vec2::new(
        vector.x * cos - vector.y * sin,
        vector.x * sin + vector.y * cos,
    )
}
