//! Artwork read from a file: lines and outlines as paths, and what of the file could not be read.

use kurbo::{Affine, BezPath, ParamCurve, ParamCurveArclen, PathSeg, Rect, Shape};

/// What is smaller, in units of the file, has no length: the squares of its coordinates vanish.
pub(super) const LEAST: f64 = 1e-100;

/// Artwork read from a file, in the file's own units.
#[derive(Clone, Debug, PartialEq)]
pub struct Artwork {
    /// Lines and outlines in the order of the file.
    pub strokes: Vec<ArtStroke>,
    /// Millimetres in one unit, where the file says its size; otherwise a person has to say it.
    pub mm_per_unit: Option<f64>,
    /// What the file holds and `strokes` does not, or does not as the file has it.
    pub unread: Vec<Unread>,
    /// The smallest rectangle around all strokes, the width of their lines aside; zero where there
    /// are none.
    pub bounds: Rect,
}

/// One line or outline of an artwork.
#[derive(Clone, Debug, PartialEq)]
pub struct ArtStroke {
    /// One subpath, x to the right, y downwards.
    pub path: BezPath,
    /// Whether it ends where it begins. The path of a closed stroke ends with a closing element.
    pub closed: bool,
    /// The area whose edge it is, where it is drawn by its filling and not by a line.
    pub area: Option<Area>,
    /// Colour of the line, or of the filling, as `#rrggbb` in small letters.
    pub colour: Option<String>,
    /// Name of the layer as the file has it. Text from outside.
    pub layer: Option<String>,
    /// What it is and where, for sentences: `path at line 12`.
    pub element: String,
}

/// A filled area. Its edges are the strokes of the same number, which follow each other.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Area {
    /// Which area of the file it is.
    pub number: usize,
    /// What of it is filled.
    pub filling: Filling,
}

/// Which side of closed lines is inside.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Filling {
    /// Where lines go round more often one way than the other: a hole runs against what is around it.
    #[default]
    Winding,
    /// Where an odd number of lines go round, whichever way: every other line is a hole.
    EvenOdd,
}

/// Something of a file that was not read, or not as the file has it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Unread {
    /// What it is and where: `text at line 12`.
    pub element: String,
    /// Why, as the rest of a sentence or a sentence: `text must be turned into outlines`.
    pub why: String,
}

/// The strokes of one colour in one layer: what a person picks from.
#[derive(Clone, Debug, PartialEq)]
pub struct ArtGroup {
    /// Colour of all of them.
    pub colour: Option<String>,
    /// Layer of all of them.
    pub layer: Option<String>,
    /// How many there are.
    pub strokes: usize,
    /// How many of them are closed.
    pub closed: usize,
    /// How many of them are edges of areas, not lines.
    pub filled: usize,
    /// Their length together, in units of the file.
    pub length: f64,
}

impl Artwork {
    /// Artwork of these strokes; its bounds are worked out here.
    pub fn new(strokes: Vec<ArtStroke>, mm_per_unit: Option<f64>, unread: Vec<Unread>) -> Self {
        let bounds = strokes
            .iter()
            .map(|stroke| stroke.path.bounding_box())
            .reduce(|all, one| all.union(one))
            .unwrap_or(Rect::ZERO);
        Self {
            strokes,
            mm_per_unit,
            unread,
            bounds,
        }
    }

    /// Length of all strokes together, in units of the file.
    pub fn length(&self) -> f64 {
        // From 0: the sum of nothing is -0, which shows.
        let lengths = self.strokes.iter().map(ArtStroke::length);
        lengths.fold(0.0, |sum, length| sum + length)
    }

    /// The strokes of one group, each with its place in the file, from 0.
    pub fn of_group<'a>(
        &'a self,
        group: &'a ArtGroup,
    ) -> impl Iterator<Item = (usize, &'a ArtStroke)> {
        let all = self.strokes.iter().enumerate();
        all.filter(|(_, stroke)| stroke.colour == group.colour && stroke.layer == group.layer)
    }

    /// The strokes sorted by colour and layer, in the order in which the groups begin in the file.
    pub fn groups(&self) -> Vec<ArtGroup> {
        let mut groups: Vec<ArtGroup> = Vec::new();
        // The place of each group, so that a file of many colours is not searched for each stroke.
        let mut places = std::collections::BTreeMap::new();
        for stroke in &self.strokes {
            let key = (stroke.colour.as_deref(), stroke.layer.as_deref());
            let place = *places.entry(key).or_insert_with(|| {
                groups.push(ArtGroup {
                    colour: stroke.colour.clone(),
                    layer: stroke.layer.clone(),
                    strokes: 0,
                    closed: 0,
                    filled: 0,
                    length: 0.0,
                });
                groups.len() - 1
            });
            let group = &mut groups[place];
            group.strokes += 1;
            group.closed += usize::from(stroke.closed);
            group.filled += usize::from(stroke.area.is_some());
            group.length += stroke.length();
        }
        groups
    }
}

impl ArtStroke {
    /// Length of the stroke in units of the file, to about a part in 10¹¹.
    pub fn length(&self) -> f64 {
        self.path.segments().map(segment_length).sum()
    }
}

/// Length of one segment, to about a part in 10¹¹.
///
/// Measured at size one, beginning at zero: only there is a tolerance neither coarse, as a fixed one
/// is for a file in metres, nor below the noise of far coordinates, where the halving of curves goes
/// on to its end.
pub(super) fn segment_length(segment: PathSeg) -> f64 {
    let begin = segment.start().to_vec2();
    let segment = Affine::translate(-begin) * segment;
    let hull = match segment {
        PathSeg::Line(line) => return line.length(),
        PathSeg::Quad(quad) => quad.p0.distance(quad.p1) + quad.p1.distance(quad.p2),
        PathSeg::Cubic(cubic) => {
            cubic.p0.distance(cubic.p1) + cubic.p1.distance(cubic.p2) + cubic.p2.distance(cubic.p3)
        }
    };
    // So small that one over it is no number: the hull is as good.
    if !hull.recip().is_finite() {
        return hull;
    }
    (Affine::scale(hull.recip()) * segment).arclen(1e-12) * hull
}

#[cfg(test)]
mod tests {
    use super::*;

    fn stroke(d: &str, colour: Option<&str>, layer: Option<&str>) -> ArtStroke {
        ArtStroke {
            path: BezPath::from_svg(d).expect("a path"),
            closed: d.ends_with('Z'),
            area: None,
            colour: colour.map(str::to_owned),
            layer: layer.map(str::to_owned),
            element: "path".to_owned(),
        }
    }

    #[test]
    fn groups_count_and_measure_what_belongs_together() {
        let red = Some("#ff0000");
        let art = Artwork::new(
            vec![
                stroke("M0 0 L30 40", red, None),
                stroke("M0 0 L0 10 L10 10 L10 0 Z", None, Some("a")),
                stroke("M0 0 L0 7", red, None),
                stroke("M0 0 L0 1", red, Some("a")),
            ],
            None,
            Vec::new(),
        );
        let groups = art.groups();
        let found: Vec<_> = groups
            .iter()
            .map(|group| (group.strokes, group.closed, group.filled, group.length))
            .collect();
        assert_eq!(
            found,
            [(2, 0, 0, 57.0), (1, 1, 0, 40.0), (1, 0, 0, 1.0)],
            "in the order in which they begin"
        );
        assert_eq!(art.of_group(&groups[0]).count(), 2);
        assert_eq!(art.length(), 98.0);
        assert_eq!(art.bounds, Rect::new(0.0, 0.0, 30.0, 40.0));
        let empty = Artwork::new(Vec::new(), None, Vec::new());
        assert_eq!(empty.bounds, Rect::ZERO);
        assert!(empty.length().is_sign_positive(), "nothing is not -0");
    }

    #[test]
    fn lengths_hold_at_any_scale() {
        // The parabola of tests/reference/paths.
        for scale in [1e-6, 1.0, 1e6] {
            let mut one = stroke("M0 0 Q50 100 100 0", None, None);
            one.path.apply_affine(kurbo::Affine::scale(scale));
            let ratio = one.length() / (scale * 147.894_285_754_459_74);
            assert!((ratio - 1.0).abs() < 1e-11, "{scale}: {ratio}");
        }
    }
}
