//! Arcs, bulges and B-splines as Bézier paths whose lengths are right to 1e-9.

use crate::drawing::artwork::segment_length;
use kurbo::common::GAUSS_LEGENDRE_COEFFS_16;
use kurbo::{BezPath, CubicBez, ParamCurve, Point, Vec2};

use super::{SEGMENTS_MOST, shown};

/// A cubic stands for at most this much of a circle, 9°: its length is then long by 1.4e-10 of it.
const ARC_STEP: f64 = std::f64::consts::PI / 20.0;
/// Below this a bulge is a straight line: the length differs by less than a part in 10¹³.
const LEAST_BULGE: f64 = 1e-7;
/// Highest degree of a spline; drawing programs stop at 11.
pub(super) const DEGREE_MOST: usize = 15;

/// Adds the arc `centre + u cos a + v sin a`, `a` from `from` over `sweep`, ending just at `end`.
pub(in crate::drawing) fn arc(
    path: &mut BezPath,
    centre: Point,
    (u, v): (Vec2, Vec2),
    from: f64,
    sweep: f64,
    end: Point,
) {
    let steps = (sweep.abs() / ARC_STEP).ceil().max(1.0);
    let step = sweep / steps;
    let handle = 4.0 / 3.0 * (step / 4.0).tan();
    let on = |angle: f64| centre + u * angle.cos() + v * angle.sin();
    let along = |angle: f64| (v * angle.cos() - u * angle.sin()) * handle;
    let mut angle = from;
    let mut begin = on(from);
    let mut number = 1.0;
    while number <= steps {
        let next_angle = from + step * number;
        let next = if number == steps { end } else { on(next_angle) };
        path.curve_to(begin + along(angle), next - along(next_angle), next);
        (angle, begin) = (next_angle, next);
        number += 1.0;
    }
}

/// Adds a line or, with a bulge, an arc from `begin` to `end`. The bulge is the tangent of a quarter
/// of the arc's angle, positive where it turns counter-clockwise.
pub(super) fn edge(path: &mut BezPath, begin: Point, end: Point, bulge: f64) {
    let chord = end - begin;
    if chord.hypot() == 0.0 {
        return;
    }
    if bulge.abs() < LEAST_BULGE {
        path.line_to(end);
        return;
    }
    let to_left = Vec2::new(-chord.y, chord.x);
    let centre = begin.midpoint(end) + to_left * ((1.0 / bulge - bulge) / 4.0);
    // Counted from the beginning, so that no angle has to be found from coordinates.
    let u = begin - centre;
    let v = Vec2::new(-u.y, u.x);
    arc(path, centre, (u, v), 0.0, 4.0 * bulge.atan(), end);
}

/// A point times its weight, and the weight.
type Weighted = [f64; 3];

/// Between two weighted points; beyond them where `t` is outside of 0 to 1.
fn mix(a: Weighted, b: Weighted, t: f64) -> Weighted {
    std::array::from_fn(|i| (1.0 - t) * a[i] + t * b[i])
}

fn point([x, y, weight]: Weighted) -> Point {
    Point::new(x / weight, y / weight)
}

/// A B-spline, rational where the weights differ.
pub(super) struct Spline {
    pub(super) degree: usize,
    pub(super) knots: Vec<f64>,
    pub(super) points: Vec<Point>,
    /// One for each point, or none.
    pub(super) weights: Vec<f64>,
}

impl Spline {
    /// The spline as Bézier segments, span for span of the knots. Up to degree three they are the
    /// spline itself; others, and rational ones, are met in length, with the distance below a
    /// ten-millionth of the span. Each try to meet a stretch of it takes one of `fits`.
    ///
    /// # Errors
    /// Why it is no spline, as the rest of a sentence.
    pub(super) fn path(&self, fits: &mut usize) -> Result<BezPath, String> {
        let (degree, count) = (self.degree, self.points.len());
        if !(1..=DEGREE_MOST).contains(&degree) {
            return Err(format!(
                "splines are read up to degree {DEGREE_MOST}, and it has degree {degree}"
            ));
        }
        if count <= degree {
            return Err(format!(
                "a spline of degree {degree} needs {} control points, and it has {count}",
                degree + 1
            ));
        }
        if count > SEGMENTS_MOST {
            return Err(format!(
                "it has more than {} control points",
                shown(SEGMENTS_MOST)
            ));
        }
        if self.knots.len() != count + degree + 1 {
            return Err(format!(
                "its {count} control points need {} knots, and it has {}",
                count + degree + 1,
                self.knots.len()
            ));
        }
        if !self.knots.is_sorted() {
            return Err("its knots do not rise".to_owned());
        }
        if !self.weights.is_empty() && self.weights.len() != count {
            return Err(format!(
                "its {count} control points need {count} weights, and it has {}",
                self.weights.len()
            ));
        }
        if self.weights.iter().any(|&weight| weight <= 0.0) {
            return Err("a weight is not above 0".to_owned());
        }
        let first = self.weights.first().copied().unwrap_or(1.0);
        let rational = self.weights.iter().any(|&weight| weight != first);
        let mut path = BezPath::new();
        for span in degree..count {
            let controls = &self.points[span - degree..=span];
            let still = controls.iter().all(|&control| control == controls[0]);
            if still || self.knots[span] >= self.knots[span + 1] {
                continue;
            }
            let piece = self.piece(span, rational);
            Self::add(&mut path, &piece, rational, fits)?;
            if path.elements().len() > SEGMENTS_MOST {
                break;
            }
        }
        Ok(path)
    }

    /// The control points of the Bézier curve over one span. The k-th is the blossom of the spline
    /// at `degree - k` times the begin and `k` times the end of the span, which is what inserting
    /// both knots until they are full comes to, whatever the knots around are.
    fn piece(&self, span: usize, rational: bool) -> Vec<Weighted> {
        let p = self.degree;
        let (begin, end) = (self.knots[span], self.knots[span + 1]);
        let first = span - p;
        let controls: Vec<Weighted> = (first..=span)
            .map(|i| {
                let at = self.points[i];
                let weight = if rational { self.weights[i] } else { 1.0 };
                [at.x * weight, at.y * weight, weight]
            })
            .collect();
        let blossom = |ends: usize| {
            let mut points = controls.clone();
            for round in 1..=p {
                let at = if round <= p - ends { begin } else { end };
                for j in (round..=p).rev() {
                    let low = self.knots[first + j];
                    let high = self.knots[first + j + p + 1 - round];
                    let share = (at - low) / (high - low);
                    points[j] = mix(points[j - 1], points[j], share);
                }
            }
            points[p]
        };
        (0..=p).map(blossom).collect()
    }

    /// Adds the curve over one span.
    fn add(
        path: &mut BezPath,
        piece: &[Weighted],
        rational: bool,
        fits: &mut usize,
    ) -> Result<(), String> {
        let points: Vec<Point> = piece.iter().map(|&weighted| point(weighted)).collect();
        let size: f64 = points.windows(2).map(|two| two[0].distance(two[1])).sum();
        if !size.is_finite() {
            return Err("its figures are too far apart to work with".to_owned());
        }
        if size == 0.0 {
            return Ok(());
        }
        match path.elements().last().and_then(kurbo::PathEl::end_point) {
            None => path.move_to(points[0]),
            // Rounding aside, a span begins where the one before it ended.
            Some(last) if last.distance(points[0]) <= 1e-9 * (size + last.to_vec2().hypot()) => {}
            Some(_) => return Err("its knots break it in two".to_owned()),
        }
        match *points {
            [_, b] if !rational => path.line_to(b),
            [_, b, c] if !rational => path.quad_to(b, c),
            [_, b, c, d] if !rational => path.curve_to(b, c, d),
            _ => {
                // Counted from its begin, so that a small curve far out keeps its digits.
                let origin = points[0].to_vec2();
                let piece: Vec<Weighted> = piece
                    .iter()
                    .map(|&[x, y, weight]| [x - origin.x * weight, y - origin.y * weight, weight])
                    .collect();
                let mut fit = Fit {
                    piece: &piece,
                    origin,
                    size,
                    cubics: 0,
                    fits,
                };
                if !fit.add(path, (0.0, 1.0), 0) {
                    return Err("its weights are too far apart to measure it".to_owned());
                }
            }
        }
        Ok(())
    }
}

/// A Bézier curve of any degree, with weights, to be met by cubics.
struct Fit<'a> {
    piece: &'a [Weighted],
    /// Where the piece is counted from.
    origin: Vec2,
    /// Length of its control polygon, what is small is measured by.
    size: f64,
    /// How many there are so far.
    cubics: usize,
    /// How many more tries there may be.
    fits: &'a mut usize,
}

impl Fit<'_> {
    /// Where the curve is, and how it moves on.
    fn at(&self, t: f64) -> (Point, Vec2) {
        let mut points = [[0.0; 3]; DEGREE_MOST + 1];
        let count = self.piece.len();
        points[..count].copy_from_slice(self.piece);
        for round in (2..count).rev() {
            for i in 0..round {
                points[i] = mix(points[i], points[i + 1], t);
            }
        }
        let [a, b] = [points[0], points[1]];
        let here = mix(a, b, t);
        let at = point(here);
        #[expect(clippy::cast_precision_loss, reason = "a degree is small")]
        let degree = (count - 1) as f64;
        let rate = |i: usize| degree * (b[i] - a[i]);
        let moves = Vec2::new(rate(0), rate(1)) - at.to_vec2() * rate(2);
        (at, moves / here[2])
    }

    fn length(&self, from: f64, to: f64) -> f64 {
        let half = (to - from) / 2.0;
        let sum: f64 = GAUSS_LEGENDRE_COEFFS_16
            .iter()
            .map(|&(weight, x)| weight * self.at(from + half * (1.0 + x)).1.hypot())
            .sum();
        sum * half
    }

    /// Adds the curve over a range; whether it could be met. Where no cubic meets it, its halves are
    /// tried, and by a cusp their halves; what is left of one in the end is too small to see.
    fn add(&mut self, path: &mut BezPath, (from, to): (f64, f64), depth: u32) -> bool {
        const HALVINGS_MOST: u32 = 40;
        const CUBICS_MOST: usize = 2000;
        let Some(left) = self.fits.checked_sub(1) else {
            return false;
        };
        *self.fits = left;
        if depth == HALVINGS_MOST {
            path.line_to(self.at(to).0 + self.origin);
        } else if let Some(cubic) = self.cubic(from, to) {
            let [p1, p2, p3] = [cubic.p1, cubic.p2, cubic.p3].map(|point| point + self.origin);
            path.curve_to(p1, p2, p3);
        } else {
            let middle = from.midpoint(to);
            return self.add(path, (from, middle), depth + 1)
                && self.add(path, (middle, to), depth + 1);
        }
        self.cubics += 1;
        self.cubics < CUBICS_MOST
    }

    /// The cubic of the same ends and directions, its handles stretched.
    fn hermite(&self, from: f64, to: f64, stretch: f64) -> CubicBez {
        let ((p0, d0), (p3, d3)) = (self.at(from), self.at(to));
        let handle = (to - from) / 3.0 * stretch;
        CubicBez::new(p0, p0 + d0 * handle, p3 - d3 * handle, p3)
    }

    /// A cubic that keeps the length and is near enough, where there is one.
    fn cubic(&self, from: f64, to: f64) -> Option<CubicBez> {
        let middle = from.midpoint(to);
        let wanted = self.length(from, to);
        let halves = self.length(from, middle) + self.length(middle, to);
        // Said so that a length that is no number is none either.
        let sure = (wanted - halves).abs() <= 1e-12 * self.size;
        if !sure {
            return None;
        }
        let least = 1e-11 * wanted + 1e-14 * self.size;
        let missing = |cubic: CubicBez| segment_length(cubic.into()) - wanted;
        // Handles as long as the curve moves, then stretched until the length is right.
        let mut before = (1.0, missing(self.hermite(from, to, 1.0)));
        let mut now = before;
        if now.1.abs() > least {
            now = (1.001, missing(self.hermite(from, to, 1.001)));
        }
        for _ in 0..6 {
            if now.1.abs() <= least {
                break;
            }
            let next = now.0 - now.1 * (now.0 - before.0) / (now.1 - before.1);
            // No stretch, or one that would bend the curve into another.
            if !(0.7..1.4).contains(&next) {
                return None;
            }
            (before, now) = (now, (next, missing(self.hermite(from, to, next))));
        }
        let cubic = self.hermite(from, to, now.0);
        let near = [0.25, 0.5, 0.75].iter().all(|&t| {
            let (at, moves) = self.at(from + (to - from) * t);
            let aside = moves.cross(cubic.eval(t) - at).abs();
            aside <= 1e-7 * self.size * moves.hypot()
        });
        (near && now.1.abs() <= least).then_some(cubic)
    }
}

/// Closes a path that ends where it begins, or that is to be closed; whether it is.
pub(super) fn close(path: BezPath, closed: bool) -> (BezPath, bool) {
    let mut elements = path.into_elements();
    let ends = (
        elements.first().and_then(kurbo::PathEl::end_point),
        elements.last().and_then(kurbo::PathEl::end_point),
    );
    let (Some(begin), Some(end)) = ends else {
        return (BezPath::from_vec(elements), false);
    };
    let meets = begin == end && elements.len() > 1;
    if meets || closed {
        elements.push(kurbo::PathEl::ClosePath);
    }
    (BezPath::from_vec(elements), meets || closed)
}
