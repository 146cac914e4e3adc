//! What lies near what: strokes as short lines in squares, so that a large drawing is not searched
//! for each of its strokes.

use std::collections::HashMap;

use kurbo::{BezPath, Line, ParamCurve, ParamCurveNearest, PathEl, Point};

/// How far the short lines may lie off the strokes they stand for, in millimetres.
const OFF_MM: f64 = 0.02;

/// Short lines, each with the number of what it belongs to.
pub(super) struct Near {
    square_mm: f64,
    lines: Vec<(usize, Line)>,
    squares: HashMap<(i64, i64), Vec<u32>>,
}

impl Near {
    /// Nothing yet, in squares of `square_mm`.
    pub(super) fn new(square_mm: f64) -> Self {
        Self {
            square_mm: square_mm.max(0.1),
            lines: Vec::new(),
            squares: HashMap::new(),
        }
    }

    /// Adds a stroke of the owner.
    pub(super) fn add(&mut self, owner: usize, path: &BezPath) {
        let (mut first, mut last) = (Point::ZERO, Point::ZERO);
        let mut lines = Vec::new();
        kurbo::flatten(path, OFF_MM, |element| match element {
            PathEl::MoveTo(point) => (first, last) = (point, point),
            PathEl::LineTo(point) => {
                lines.push(Line::new(last, point));
                last = point;
            }
            PathEl::ClosePath => {
                lines.push(Line::new(last, first));
                last = first;
            }
            PathEl::QuadTo(..) | PathEl::CurveTo(..) => {}
        });
        for line in lines {
            // Long lines in parts, so that a slanting one does not fill a large square of squares.
            let parts = ((line.p1 - line.p0).hypot() / (2.0 * self.square_mm)).ceil();
            let parts = parts.clamp(1.0, 100_000.0);
            let mut done = 0.0;
            while done < parts {
                let part = line.subsegment(done / parts..(done + 1.0) / parts);
                self.add_line(owner, part);
                done += 1.0;
            }
        }
    }

    fn add_line(&mut self, owner: usize, line: Line) {
        let Ok(number) = u32::try_from(self.lines.len()) else {
            return;
        };
        self.lines.push((owner, line));
        for square in self.around(line, 0.0) {
            self.squares.entry(square).or_default().push(number);
        }
    }

    /// The squares a line lies in or comes within `reach` of.
    fn around(&self, line: Line, reach: f64) -> impl Iterator<Item = (i64, i64)> + use<> {
        let square = self.square_mm;
        #[allow(
            clippy::cast_possible_truncation,
            reason = "a cast to i64 stops at its limits"
        )]
        let at = move |mm: f64| (mm / square).floor() as i64;
        let x = [
            line.p0.x.min(line.p1.x) - reach,
            line.p0.x.max(line.p1.x) + reach,
        ]
        .map(at);
        let y = [
            line.p0.y.min(line.p1.y) - reach,
            line.p0.y.max(line.p1.y) + reach,
        ]
        .map(at);
        (x[0]..=x[1]).flat_map(move |x| (y[0]..=y[1]).map(move |y| (x, y)))
    }

    /// Every owner with a line within `reach` of a point, some more than once.
    pub(super) fn owners_at(&self, point: Point, reach: f64) -> impl Iterator<Item = usize> {
        let squares = self.around(Line::new(point, point), reach);
        squares
            .filter_map(|square| self.squares.get(&square))
            .flatten()
            .filter_map(move |&number| {
                let (owner, line) = self.lines[number as usize];
                (line.nearest(point, 1e-9).distance_sq <= reach * reach).then_some(owner)
            })
    }

    /// The nearest that two owners come, for those that come within `reach` of each other and are
    /// taken by `taken`: both owners, the lower first, the distance, and where.
    pub(super) fn pairs(
        &self,
        reach: f64,
        taken: impl Fn(usize, usize) -> bool,
    ) -> HashMap<(usize, usize), (f64, Point)> {
        let mut nearest: HashMap<(usize, usize), (f64, Point)> = HashMap::new();
        for &(owner, line) in &self.lines {
            for square in self.around(line, reach) {
                for &number in self.squares.get(&square).into_iter().flatten() {
                    let (other, there) = self.lines[number as usize];
                    // Each pair once, from its lower owner.
                    if other <= owner || !taken(owner, other) {
                        continue;
                    }
                    let (distance, at) = apart(line, there);
                    if distance <= reach {
                        let slot = nearest.entry((owner, other)).or_insert((distance, at));
                        if distance < slot.0 {
                            *slot = (distance, at);
                        }
                    }
                }
            }
        }
        nearest
    }
}

/// The distance of two lines, and a point half way across.
fn apart(a: Line, b: Line) -> (f64, Point) {
    if let Some(at) = crossing(a, b) {
        return (0.0, at);
    }
    let ends = [(b.p0, a), (b.p1, a), (a.p0, b), (a.p1, b)];
    let distances = ends.map(|(point, line)| {
        let nearest = line.nearest(point, 1e-9);
        (
            nearest.distance_sq.sqrt(),
            point.midpoint(line.eval(nearest.t)),
        )
    });
    let mut least = distances[0];
    for found in distances {
        if found.0 < least.0 {
            least = found;
        }
    }
    least
}

fn crossing(a: Line, b: Line) -> Option<Point> {
    let (along_a, along_b, between) = (a.p1 - a.p0, b.p1 - b.p0, b.p0 - a.p0);
    let cross = along_a.cross(along_b);
    if cross == 0.0 {
        return None;
    }
    let on_a = between.cross(along_b) / cross;
    let on_b = between.cross(along_a) / cross;
    let inside = 0.0..=1.0;
    (inside.contains(&on_a) && inside.contains(&on_b)).then(|| a.eval(on_a))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn line(from: (f64, f64), to: (f64, f64)) -> BezPath {
        let mut path = BezPath::new();
        path.move_to(from);
        path.line_to(to);
        path
    }

    #[test]
    fn what_is_near_is_found_in_squares_of_any_size() {
        for square in [0.5, 3.0, 40.0, 1e4] {
            let mut near = Near::new(square);
            near.add(0, &line((0.0, 0.0), (100.0, 0.0)));
            near.add(1, &line((50.0, 7.0), (50.0, 90.0)));
            near.add(2, &line((-20.0, 40.0), (120.0, 41.0)));
            near.add(3, &line((0.0, -500.0), (100.0, -500.0)));
            let pairs = near.pairs(10.0, |_, _| true);
            assert_eq!(pairs.len(), 2, "squares of {square}: {pairs:?}");
            assert!((pairs[&(0, 1)].0 - 7.0).abs() < 1e-9, "{pairs:?}");
            assert_eq!(pairs[&(1, 2)].0, 0.0, "they cross");
            let mut at: Vec<usize> = near.owners_at(Point::new(50.0, 3.0), 4.5).collect();
            at.sort_unstable();
            at.dedup();
            assert_eq!(at, [0, 1], "squares of {square}");
        }
    }
}
