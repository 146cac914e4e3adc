//! Places along the gas column of a piece.

use kurbo::BezPath;

use super::drawn::{cut, length};
use super::{Jump, Piece};

impl Piece {
    /// The part of its gas column between two shares of the column's length, counted from its first
    /// electrode, as it lies on the sign: along strokes and painted-out jumps.
    ///
    /// A share is held to 0 to 1; where `from` is not before `to` there is nothing.
    pub fn stretch(&self, from: f64, to: f64) -> BezPath {
        let mut found = BezPath::new();
        let column = self.column().mm();
        let (from, to) = (from.clamp(0.0, 1.0) * column, to.clamp(0.0, 1.0) * column);
        if from >= to || from.is_nan() || to.is_nan() {
            return found;
        }
        // A jump is longer than it is drawn: a crossover takes glass of its own.
        let drawn: f64 = self.jumps.iter().map(|jump| length(&jump.path)).sum();
        #[allow(clippy::cast_precision_loss, reason = "a count of jumps")]
        let crossover = (self.hidden.mm() - drawn).max(0.0) / self.jumps.len().max(1) as f64;
        let mut before = 0.0;
        let mut pass = |path: &BezPath, turned: bool, more: f64| {
            let drawn = length(path);
            let counted = drawn + more;
            let share = |at: f64| ((at - before) / counted).clamp(0.0, 1.0);
            if counted > 0.0 && from < before + counted && to > before {
                let (from, to) = (share(from), share(to));
                let (from, to) = if turned {
                    (1.0 - to, 1.0 - from)
                } else {
                    (from, to)
                };
                let [up_to, _] = cut(path, to * drawn);
                let [_, part] = cut(&up_to, from * drawn);
                found.extend(part);
            }
            before += counted;
        };
        for (at, stroke) in self.strokes.iter().enumerate() {
            pass(&stroke.path, stroke.turned, 0.0);
            let jump = |jump: &&Jump| jump.after == at;
            if let Some(jump) = self.jumps.iter().find(jump) {
                pass(&jump.path, false, crossover);
            }
        }
        found
    }
}

#[cfg(test)]
mod tests {
    use kurbo::{Point, Shape};

    use super::super::{Stroke, route::ends};
    use super::*;
    use crate::measure::Length;

    fn line(from: (f64, f64), to: (f64, f64)) -> BezPath {
        let mut path = BezPath::new();
        path.move_to(from);
        path.line_to(to);
        path
    }

    /// 100 mm to the right; a jump of 50 mm drawn and 100 mm of glass; 100 mm drawn from right to left
    /// that the glass runs from left to right: a column of 300 mm.
    fn piece() -> Piece {
        let stroke = |path, turned| Stroke {
            name: String::new(),
            path,
            part: [0.0, 1.0],
            turned,
        };
        Piece {
            row: 0,
            copy: 0,
            label: String::new(),
            name: String::new(),
            whole: 0,
            group: String::new(),
            tube: String::new(),
            lit: Length::from_mm(200.0),
            hidden: Length::from_mm(100.0),
            tails: Length::ZERO,
            strokes: vec![
                stroke(line((0.0, 0.0), (100.0, 0.0)), false),
                stroke(line((250.0, 0.0), (150.0, 0.0)), true),
            ],
            jumps: vec![Jump {
                after: 0,
                path: line((100.0, 0.0), (150.0, 0.0)),
            }],
            electrodes: [Point::new(0.0, 0.0), Point::new(250.0, 0.0)],
            bends: Vec::new(),
        }
    }

    fn reach(from: f64, to: f64) -> (f64, f64) {
        let around = piece().stretch(from, to).bounding_box();
        (around.x0, around.x1)
    }

    #[test]
    fn a_stretch_follows_the_glass_over_jumps_and_against_the_drawing() {
        for ((from, to), (left, right)) in [
            ((0.0, 1.0), (0.0, 250.0)),
            ((0.1, 0.2), (30.0, 60.0)),
            // Half of the jump's glass is half of the jump.
            ((0.0, 0.5), (0.0, 125.0)),
            ((0.5, 0.8), (125.0, 190.0)),
            ((0.9, 1.0), (220.0, 250.0)),
            ((-1.0, 0.1), (0.0, 30.0)),
        ] {
            let found = reach(from, to);
            assert!(
                (found.0 - left).abs() < 1e-6 && (found.1 - right).abs() < 1e-6,
                "{from} to {to}: {found:?}"
            );
        }
        assert!(piece().stretch(0.4, 0.4).elements().is_empty(), "nothing");
        assert!(
            piece().stretch(f64::NAN, 0.4).elements().is_empty(),
            "nor this"
        );
        let [start, _] = ends(&piece().stretch(0.0, 0.2));
        assert_eq!(start, Point::new(0.0, 0.0));
    }
}
