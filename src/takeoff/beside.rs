//! Glass that runs back beside itself: both sides of a stem that is outlined, or of a narrow gap.

use kurbo::{BezPath, Line, ParamCurve, PathEl, Point, Rect, Shape};

use super::near::Near;

/// How far the chords may lie off the curves they stand for, in millimetres.
const OFF_MM: f64 = 0.02;
/// Ends nearer than this are one place, in millimetres.
const SAME_MM: f64 = 0.6;
/// What is nearer along the glass than so many of the least spacings is one bend, whose tightness is
/// looked at as such: a hairpin, or a corner of less than about 30 degrees.
const ALONG: usize = 4;

/// A stroke in the parts that its pieces have, put together again.
pub(super) struct Loop {
    /// Chords from its beginning on, by how far along they begin.
    chords: Vec<(f64, Line)>,
    long: f64,
}

impl Loop {
    /// The closed stroke of these parts, each from where to where as shares of it; None where they
    /// are not all of one, or it is not closed.
    pub(super) fn of<'a>(parts: impl Iterator<Item = ([f64; 2], &'a BezPath)>) -> Option<Self> {
        let mut parts: Vec<([f64; 2], Vec<Line>)> = parts
            .map(|([from, to], path)| match chords(path) {
                chords if from <= to => ([from, to], chords),
                chords => {
                    let back = chords.into_iter().rev();
                    ([to, from], back.map(|line| line.reversed()).collect())
                }
            })
            .collect();
        parts.sort_by(|one, other| one.0[0].total_cmp(&other.0[0]));
        let whole: f64 = parts.iter().map(|([from, to], _)| to - from).sum();
        let lines: Vec<Line> = parts.into_iter().flat_map(|(_, lines)| lines).collect();
        let (first, last) = (lines.first()?, lines.last()?);
        if (whole - 1.0).abs() > 1e-6 || first.p0.distance(last.p1) > SAME_MM {
            return None;
        }
        let mut long = 0.0;
        let chords = lines
            .into_iter()
            .map(|line| {
                let along = long;
                long += (line.p1 - line.p0).hypot();
                (along, line)
            })
            .collect();
        Some(Self { chords, long })
    }

    /// What two loops of the same shape have alike, wherever they stand.
    pub(super) fn shape(&self) -> [i64; 3] {
        let points = self.chords.iter().map(|(_, line)| line.p0);
        let boxes = points.map(|point| Rect::from_points(point, point));
        let bounds = boxes.reduce(|all, one| all.union(one)).unwrap_or_default();
        #[allow(
            clippy::cast_possible_truncation,
            reason = "a cast stops at its limits"
        )]
        [self.long, bounds.width(), bounds.height()].map(|mm| (mm * 1e6).round() as i64)
    }

    /// How near two of its sides come to each other, in millimetres, where they come nearer than
    /// `least_mm`.
    pub(super) fn beside_itself(&self, least_mm: f64) -> Option<f64> {
        // In stretches about as long as the spacing, each told from those around it.
        #[allow(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "a share of the pieces' greatest length"
        )]
        let stretch_of = |along: f64| (along / least_mm).max(0.0) as usize;
        let mut near = Near::new(least_mm);
        for &(along, line) in &self.chords {
            let long = (line.p1 - line.p0).hypot();
            let parts = (long / least_mm).ceil().clamp(1.0, 100_000.0);
            let mut done = 0.0;
            while done < parts {
                let part = line.subsegment(done / parts..(done + 1.0) / parts);
                let middle = along + (done + 0.5) / parts * long;
                near.add(stretch_of(middle), &part.to_path(OFF_MM));
                done += 1.0;
            }
        }
        let stretches = stretch_of(self.long).saturating_add(1);
        let pairs = near.pairs(least_mm, |one, other| {
            let apart = other - one;
            apart.min(stretches.saturating_sub(apart)) > ALONG
        });
        let distances = pairs.into_values().map(|(distance, _)| distance);
        distances.reduce(f64::min)
    }
}

fn chords(path: &BezPath) -> Vec<Line> {
    let mut chords = Vec::new();
    let (mut first, mut last) = (Point::ZERO, Point::ZERO);
    kurbo::flatten(path, OFF_MM, |element| match element {
        PathEl::MoveTo(point) => (first, last) = (point, point),
        PathEl::LineTo(point) => {
            chords.push(Line::new(last, point));
            last = point;
        }
        PathEl::ClosePath => {
            chords.push(Line::new(last, first));
            last = first;
        }
        PathEl::QuadTo(..) | PathEl::CurveTo(..) => {}
    });
    chords
}

#[cfg(test)]
mod tests {
    use kurbo::Circle;

    use super::*;

    fn beside_itself(path: &BezPath, least_mm: f64) -> Option<f64> {
        Loop::of(std::iter::once(([0.0, 1.0], path)))?.beside_itself(least_mm)
    }

    fn polygon(corners: &[(f64, f64)]) -> BezPath {
        let mut path = BezPath::new();
        path.move_to(corners[0]);
        for &corner in &corners[1..] {
            path.line_to(corner);
        }
        path.close_path();
        path
    }

    #[test]
    fn the_sides_of_a_stem_are_as_far_apart_as_it_is_wide() {
        let stem = Rect::new(0.0, 0.0, 20.0, 300.0).to_path(0.01);
        let found = beside_itself(&stem, 24.0).expect("20 is less than 24");
        assert!((found - 20.0).abs() < 1e-9, "{found}");
        assert_eq!(beside_itself(&stem, 19.0), None, "but more than 19");
        // Open at one end it is a hairpin of two legs, which are pieces of another kind.
        let open = polygon(&[(0.0, 0.0), (20.0, 0.0), (20.0, 300.0)]);
        let open: BezPath = open.elements()[..3].iter().copied().collect();
        assert_eq!(beside_itself(&open, 24.0), None);
    }

    #[test]
    fn a_stroke_that_was_cut_is_looked_at_whole() {
        // The stem of the test above, cut at (0, 100) and (20, 100), its second part the other way.
        let part = |points: &[(f64, f64)]| {
            let mut path = BezPath::new();
            path.move_to(points[0]);
            for &point in &points[1..] {
                path.line_to(point);
            }
            path
        };
        let near = part(&[(20.0, 100.0), (20.0, 0.0), (0.0, 0.0), (0.0, 100.0)]);
        let far = part(&[(20.0, 100.0), (20.0, 300.0), (0.0, 300.0), (0.0, 100.0)]);
        let cut = 220.0 / 640.0;
        let whole = Loop::of([([1.0, cut], &far), ([0.0, cut], &near)].into_iter());
        let whole = whole.expect("both parts are all of it");
        let found = whole.beside_itself(24.0).expect("20 is less than 24");
        assert!((found - 20.0).abs() < 1e-9, "{found}");
        assert!(Loop::of([([1.0, cut], &far)].into_iter()).is_none());
    }

    #[test]
    fn a_gap_between_two_arms_is_seen_from_outside() {
        // A block of 300 by 300 with a slot 12 wide and 200 deep.
        let slotted = polygon(&[
            (0.0, 0.0),
            (144.0, 0.0),
            (144.0, 200.0),
            (156.0, 200.0),
            (156.0, 0.0),
            (300.0, 0.0),
            (300.0, 300.0),
            (0.0, 300.0),
        ]);
        let found = beside_itself(&slotted, 24.0).expect("12 is less than 24");
        assert!((found - 12.0).abs() < 1e-9, "{found}");
    }

    #[test]
    fn corners_and_bends_are_not_beside_themselves() {
        for radius in [5.0, 11.0, 13.0, 200.0] {
            let circle = Circle::new((0.0, 0.0), radius).to_path(1e-6);
            assert_eq!(beside_itself(&circle, 24.0), None, "{radius}");
        }
        let triangle = polygon(&[(0.0, 0.0), (300.0, 0.0), (150.0, 260.0)]);
        assert_eq!(beside_itself(&triangle, 24.0), None);
        // A needle of 8 degrees is: its sides are 24 apart 170 from the tip.
        let needle = polygon(&[(0.0, 0.0), (600.0, -42.0), (600.0, 42.0)]);
        assert!(beside_itself(&needle, 24.0).is_some());
    }
}
