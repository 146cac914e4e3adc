//! The bends of a piece: how far the glass turns, how tightly, and how much room it has to.
//!
//! Every turn of the run is taken: corners between straight lines, and curves in steps. Turns in one
//! direction that follow each other closely are one bend. Faces and drawings often give a curve as
//! many short lines, so a bend is not held against the corner as drawn but against the widest radius
//! that fits between its neighbours: what a bender can make of it.

use core::f64::consts::PI;

use kurbo::{ParamCurve, ParamCurveArclen, ParamCurveDeriv, PathSeg, Point, Vec2};

use super::drawn::{ARC_LENGTH, Drawn};

/// Turns below this are none: a bender does not see them.
const LEAST_DEGREES: f64 = 10.0;
/// A corner of more than this is a bend of its own unless the next is near. This and the two
/// distances are our own choice, with no source.
const CORNER_DEGREES: f64 = 35.0;
/// How near, in millimetres.
const CORNER_GAP_MM: f64 = 60.0;
/// Lesser corners are one curve as long as they follow each other within this.
const CURVE_GAP_MM: f64 = 300.0;
/// Curves are taken in steps of at most so many degrees.
const STEP_DEGREES: f64 = 5.0;
/// Bends of more than this are looked at in parts of `PART_DEGREES`: the two ends of a hairpin do not
/// give each other room.
const WHOLE_DEGREES: f64 = 120.0;
const PART_DEGREES: f64 = 60.0;

/// A corner of more than this cannot be bent in the plane of the sign: the glass is folded, and runs
/// back behind itself. Our own choice, no source.
const FOLD_DEGREES: f64 = 150.0;

/// A bend of a piece.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bend {
    /// How far the glass turns.
    pub angle_degrees: f64,
    /// Radius as drawn, to the middle of the tube, over the whole bend; 0 for a sharp corner.
    pub radius_mm: f64,
    /// The widest radius that fits there without running into the next bend or beyond the end. A
    /// fold is left out of it: where there is nothing else, it is infinite.
    pub room_mm: f64,
    /// How many corners of it turn so far back that the glass is folded behind itself.
    pub folds: usize,
    /// Its middle, on the sign.
    pub at: Point,
}

/// A turn of the run: at a corner, or over a step of a curve.
#[derive(Debug, Clone, Copy)]
struct Turn {
    /// To the right above zero, radians.
    by: f64,
    /// Where along the run it begins and ends.
    along: [f64; 2],
    at: [Point; 2],
    /// Direction before and after, of length 1.
    heading: [Vec2; 2],
}

impl Turn {
    fn folds(&self) -> bool {
        self.along[0] == self.along[1] && self.by.abs().to_degrees() > FOLD_DEGREES
    }

    /// How far a straight may go on to the next turn of the same bend.
    fn reach(&self) -> f64 {
        let long = self.along[1] - self.along[0];
        if long > 0.0 {
            // A curve as such: shorter than its radius a straight is part of it.
            long / self.by.abs()
        } else if self.by.abs().to_degrees() > CORNER_DEGREES {
            CORNER_GAP_MM
        } else {
            CURVE_GAP_MM
        }
    }
}

/// The bends of a piece, in the unit of its strokes.
pub(super) fn bends(drawn: &Drawn) -> Vec<Bend> {
    let mut found = Vec::new();
    let breaks: Vec<usize> = drawn.jumps().map(|(after, ..)| after).collect();
    let mut chain = Chain::default();
    for (at, strand) in drawn.run.iter().enumerate() {
        let mut segments: Vec<PathSeg> = strand.path.segments().collect();
        if strand.turned {
            segments.reverse();
            for segment in &mut segments {
                *segment = segment.reverse();
            }
        }
        for segment in segments {
            chain.add(segment);
        }
        if breaks.contains(&at) {
            found.extend(std::mem::take(&mut chain).bends());
        }
    }
    found.extend(chain.bends());
    found
}

/// The finest length of an arc that is asked for, millimetres.
const FINEST: f64 = 1e-9;

/// A part of the run without a jump.
#[derive(Default)]
struct Chain {
    turns: Vec<Turn>,
    long: f64,
    heading: Option<Vec2>,
}

impl Chain {
    fn add(&mut self, segment: PathSeg) {
        let length = segment.arclen(ARC_LENGTH);
        if length <= 0.0 {
            return;
        }
        let [enters, leaves] = [0.0, 1.0].map(|t| heading(segment, t));
        let (Some(enters), Some(leaves)) = (enters, leaves) else {
            return;
        };
        if let Some(before) = self.heading {
            let at = segment.start();
            self.turn(before, enters, [self.long; 2], [at; 2]);
        }
        if !matches!(segment, PathSeg::Line(_)) {
            self.curve(segment, length, enters);
        }
        self.long += length;
        self.heading = Some(leaves);
    }

    /// A curve in steps, evenly in its parameter, of which each turns little.
    fn curve(&mut self, segment: PathSeg, length: f64, enters: Vec2) {
        // The turning of the control polygon is at least that of the curve.
        let points: Vec<Point> = match segment {
            PathSeg::Line(line) => vec![line.p0, line.p1],
            PathSeg::Quad(quad) => vec![quad.p0, quad.p1, quad.p2],
            PathSeg::Cubic(cubic) => vec![cubic.p0, cubic.p1, cubic.p2, cubic.p3],
        };
        let legs: Vec<Vec2> = points
            .windows(2)
            .map(|pair| pair[1] - pair[0])
            .filter(|leg| leg.hypot2() > 0.0)
            .collect();
        let turning: f64 = legs
            .windows(2)
            .map(|pair| angle(pair[0], pair[1]).abs())
            .sum();
        // Twice as many, because a curve turns unevenly.
        let steps = (2.0 * turning.to_degrees() / STEP_DEGREES)
            .ceil()
            .clamp(1.0, 200.0);
        let (mut t, mut before, mut done) = (0.0, enters, 0.0);
        while t < 1.0 {
            let next = if t + 1.5 / steps > 1.0 {
                1.0
            } else {
                t + 1.0 / steps
            };
            let part = segment.subsegment(t..next);
            let long = if next < 1.0 {
                // A share of the length, but never finer than what a float can tell of a place on the
                // sign: on a curve shorter than that the library would halve it for hours.
                part.arclen((1e-6 * length).max(FINEST))
            } else {
                length - done
            };
            if let Some(after) = heading(segment, next) {
                let along = [self.long + done, self.long + done + long];
                self.turn(before, after, along, [part.start(), part.end()]);
                before = after;
            }
            done += long;
            t = next;
        }
    }

    fn turn(&mut self, before: Vec2, after: Vec2, along: [f64; 2], at: [Point; 2]) {
        let by = angle(before, after);
        if by.abs() > 1e-9 {
            self.turns.push(Turn {
                by,
                along,
                at,
                heading: [before, after],
            });
        }
    }

    /// The turns as bends: those of one direction that follow each other closely together.
    fn bends(self) -> Vec<Bend> {
        let mut groups: Vec<std::ops::Range<usize>> = Vec::new();
        for (at, turn) in self.turns.iter().enumerate() {
            let last = at.checked_sub(1).and_then(|before| self.turns.get(before));
            let follows = last.is_some_and(|before| {
                let gap = turn.along[0] - before.along[1];
                before.by * turn.by > 0.0 && gap <= before.reach().min(turn.reach())
            });
            match groups.last_mut() {
                Some(group) if follows => group.end = at + 1,
                _ => groups.push(at..at + 1),
            }
        }
        groups
            .into_iter()
            .filter_map(|group| self.bend(group))
            .collect()
    }

    fn bend(&self, group: std::ops::Range<usize>) -> Option<Bend> {
        let turns = &self.turns[group.clone()];
        let (first, last) = (turns.first()?, turns.last()?);
        let angle = turns.iter().map(|turn| turn.by.abs()).sum::<f64>();
        if angle.to_degrees() < LEAST_DEGREES {
            return None;
        }
        let middle = f64::midpoint(first.along[0], last.along[1]);
        let nearest = turns.iter().min_by(|a, b| {
            let off = |turn: &Turn| (f64::midpoint(turn.along[0], turn.along[1]) - middle).abs();
            off(a).total_cmp(&off(b))
        })?;
        Some(Bend {
            angle_degrees: angle.to_degrees(),
            radius_mm: (last.along[1] - first.along[0]) / angle,
            room_mm: self.room(group),
            folds: turns.iter().filter(|turn| turn.folds()).count(),
            at: nearest.at[0].midpoint(nearest.at[1]),
        })
    }

    /// The widest radius that fits a bend.
    fn room(&self, group: std::ops::Range<usize>) -> f64 {
        let turned = |range: std::ops::Range<usize>| -> f64 {
            let turns = self.turns[range].iter();
            turns.map(|turn| turn.by.abs()).sum::<f64>().to_degrees()
        };
        if turned(group.clone()) <= WHOLE_DEGREES {
            return self.fillet(&group);
        }
        let mut room = f64::INFINITY;
        for from in group.clone() {
            let to = (from + 1..=group.end).find(|&to| turned(from..to) >= PART_DEGREES);
            let Some(to) = to else { break };
            if !self.turns[from..to].iter().any(Turn::folds) {
                room = room.min(self.fillet(&(from..to)));
            }
        }
        room
    }

    /// The radius of the arc that touches both straights beside some turns of a bend as far out as
    /// they go: half way to the next turn, which needs the other half, or to the end of the run.
    fn fillet(&self, part: &std::ops::Range<usize>) -> f64 {
        let (first, last) = (&self.turns[part.start], &self.turns[part.end - 1]);
        let before = match part.start.checked_sub(1).map(|at| &self.turns[at]) {
            Some(turn) => (first.along[0] - turn.along[1]) / 2.0,
            None => first.along[0],
        };
        let after = match self.turns.get(part.end) {
            Some(turn) => (turn.along[0] - last.along[1]) / 2.0,
            None => self.long - last.along[1],
        };
        let angle: f64 = self.turns[part.clone()]
            .iter()
            .map(|turn| turn.by.abs())
            .sum();
        let (enters, leaves) = (first.heading[0], last.heading[1]);
        let way = last.at[1] - first.at[0];
        let cross = enters.cross(leaves);
        if angle >= PI || cross.abs() < 1e-9 {
            // It comes back on itself: as wide as half the way across.
            return way.cross(enters).abs() / 2.0;
        }
        // From where the two straights meet to the first turn and from the last.
        let sides = [way.cross(leaves) / cross, enters.cross(way) / cross];
        let reach = (sides[0] + before).min(sides[1] + after);
        (reach / (angle / 2.0).tan()).max(0.0)
    }
}

/// Where along a path it turns by more than a corner of [`CORNER_DEGREES`], its ends left out.
pub(super) fn corners(path: &kurbo::BezPath) -> Vec<f64> {
    let mut chain = Chain::default();
    for segment in path.segments() {
        chain.add(segment);
    }
    let corner = |turn: &&Turn| {
        turn.along[0] == turn.along[1] && turn.by.abs().to_degrees() > CORNER_DEGREES
    };
    let turns = chain.turns.iter().filter(corner);
    turns.map(|turn| turn.along[0]).collect()
}

/// From one direction to another, in radians, half a turn at most either way.
fn angle(from: Vec2, to: Vec2) -> f64 {
    from.cross(to).atan2(from.dot(to))
}

/// Direction of a segment, of length 1; None for a segment that stays where it is.
fn heading(segment: PathSeg, t: f64) -> Option<Vec2> {
    let along = match segment {
        PathSeg::Line(line) => line.p1 - line.p0,
        PathSeg::Quad(quad) => {
            let there = quad.deriv().eval(t).to_vec2();
            if there.hypot2() > 0.0 {
                there
            } else {
                quad.p2 - quad.p0
            }
        }
        PathSeg::Cubic(cubic) => {
            let there = cubic.deriv().eval(t).to_vec2();
            // With a handle of no length the curve sets out for the next point.
            let points = [cubic.p0, cubic.p1, cubic.p2, cubic.p3];
            let next = if t < 0.5 {
                points[1..]
                    .iter()
                    .map(|&point| point - cubic.p0)
                    .find(|leg| leg.hypot2() > 0.0)
            } else {
                points[..3]
                    .iter()
                    .rev()
                    .map(|&point| cubic.p3 - point)
                    .find(|leg| leg.hypot2() > 0.0)
            };
            if there.hypot() > 1e-9 * (cubic.p3 - cubic.p0).hypot() {
                there
            } else {
                next?
            }
        }
    };
    (along.hypot2() > 0.0 && along.is_finite()).then(|| along.normalize())
}

#[cfg(test)]
mod tests {
    use super::super::route::as_drawn;
    use super::*;
    use kurbo::{Arc, BezPath, Circle, RoundedRect, Shape};

    fn of(path: BezPath) -> Vec<Bend> {
        let way = as_drawn(std::slice::from_ref(&path));
        bends(&Drawn::new("x".to_owned(), vec![path], &way))
    }

    fn lines(points: &[(f64, f64)]) -> Vec<Bend> {
        let mut path = BezPath::new();
        path.move_to(points[0]);
        for &point in &points[1..] {
            path.line_to(point);
        }
        of(path)
    }

    fn near(found: f64, by_hand: f64, within: f64) {
        assert!(
            (found - by_hand).abs() <= within * by_hand.abs(),
            "{found}, by hand {by_hand}"
        );
    }

    #[test]
    fn a_corner_has_the_room_of_its_shorter_leg() {
        let found = lines(&[(0.0, 0.0), (100.0, 0.0), (100.0, 40.0)]);
        assert_eq!(found.len(), 1);
        near(found[0].angle_degrees, 90.0, 1e-9);
        assert_eq!(found[0].radius_mm, 0.0, "sharp as drawn");
        // The arc touches both legs at its radius from the corner of 90 degrees.
        near(found[0].room_mm, 40.0, 1e-9);
        assert_eq!(found[0].at, Point::new(100.0, 0.0));
    }

    #[test]
    fn two_corners_share_the_leg_between_them() {
        // Z of 80 between: each corner has 40 of it.
        let found = lines(&[(0.0, 0.0), (100.0, 0.0), (100.0, 80.0), (200.0, 80.0)]);
        assert_eq!(found.len(), 2, "{found:?}");
        for bend in found {
            near(bend.room_mm, 40.0, 1e-9);
        }
    }

    #[test]
    fn a_hairpin_of_two_corners_is_one_bend_as_tight_as_it_is_wide() {
        let found = lines(&[(0.0, 0.0), (100.0, 0.0), (100.0, 20.0), (0.0, 20.0)]);
        assert_eq!(found.len(), 1, "{found:?}");
        near(found[0].angle_degrees, 180.0, 1e-9);
        near(found[0].room_mm, 10.0, 1e-9);
    }

    #[test]
    fn a_circle_is_one_bend_of_its_radius() {
        let found = of(Circle::new((0.0, 0.0), 55.0).to_path(1e-9));
        assert_eq!(found.len(), 1, "{found:?}");
        near(found[0].angle_degrees, 360.0, 1e-6);
        near(found[0].radius_mm, 55.0, 1e-6);
        near(found[0].room_mm, 55.0, 2e-3);
        // The same as a polygon, as faces give it: the circle inside it fits.
        let sides = 24;
        let points: Vec<(f64, f64)> = (0..=sides)
            .map(|at| {
                let (sin, cos) = (2.0 * PI * f64::from(at) / f64::from(sides)).sin_cos();
                (55.0 * cos, 55.0 * sin)
            })
            .collect();
        let drawn = lines(&points);
        assert_eq!(drawn.len(), 1, "{drawn:?}");
        near(drawn[0].room_mm, 55.0 * (PI / f64::from(sides)).cos(), 1e-6);
    }

    #[test]
    fn a_rounded_rectangle_has_four_bends_of_its_corners() {
        let found = of(RoundedRect::new(0.0, 0.0, 600.0, 300.0, 40.0).to_path(1e-9));
        assert_eq!(found.len(), 4, "{found:?}");
        for bend in &found {
            near(bend.angle_degrees, 90.0, 1e-4);
            near(bend.radius_mm, 40.0, 1e-3);
            assert!(bend.room_mm >= 40.0, "{bend:?}");
        }
    }

    #[test]
    fn an_s_turns_twice() {
        let mut path = Arc::new((0.0, 0.0), (50.0, 50.0), 0.0, PI, 0.0).to_path(1e-9);
        let second = Arc::new((-100.0, 0.0), (50.0, 50.0), 0.0, -PI, 0.0).to_path(1e-9);
        path.extend(second.elements()[1..].iter().copied());
        let found = of(path);
        assert_eq!(found.len(), 2, "{found:?}");
        for bend in found {
            near(bend.angle_degrees, 180.0, 1e-6);
            near(bend.radius_mm, 50.0, 1e-6);
        }
    }

    #[test]
    fn strokes_that_stay_where_they_are_have_no_bends() {
        assert_eq!(lines(&[(3.0, 3.0), (3.0, 3.0)]), []);
        assert_eq!(lines(&[(0.0, 0.0), (0.0, 0.0), (10.0, 0.0)]), []);
    }
}
