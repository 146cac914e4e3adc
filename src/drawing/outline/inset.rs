//! Outlines moved inwards: outer lines shrink, counters grow.
//!
//! Worked out with `i_overlay`, on a fine grid of whole numbers. Tried beside it was
//! `cavalier_contours`, which keeps true arcs and met the closed forms of an L to the last digit
//! where this, with 50 chords to a quarter turn, is 5 parts in a million off. On letters and on
//! 3000 random polygons both agreed and neither panicked, and their weight is much the same (66 kB
//! and 56 kB of the page, gzipped). But `cavalier_contours` expects outlines that do not cross, and
//! the letters of variable fonts often do; `i_overlay` has to be there to unite them, and is enough
//! then. Its whole-number arithmetic also gives the same result in a browser as on a desk.
//!
//! What is inside is decided by winding: a counter is a contour that runs against the one around
//! it, as fonts have it. Contours that cross or cover each other are united first.

use std::f64::consts::PI;

use i_overlay::core::fill_rule::FillRule;
use i_overlay::float::simplify::SimplifyShape;
use i_overlay::mesh::float::outline::offset::OutlineOffset;
use i_overlay::mesh::float::style::{LineJoin, OutlineStyle};
use kurbo::{BezPath, PathEl, Point};

use crate::drawing::Filling;

/// How far a chord may be from the curve it stands for, in millimetres, on drawings up to 10 m; on
/// larger ones a millionth of their size. Lengths come out short by at most a third of this over the
/// radius: 0.0001 of the length at a radius of 30 mm.
pub const FLATNESS_MM: f64 = 0.01;
/// Chords of a round join, in radians: 50 to a quarter turn, the finest there is.
const ARC_STEP: f64 = 0.01 * PI;
/// A mitre sharper than this is cut off: about four times as long as the inset is deep.
const SHARPEST_MITRE: f64 = 0.5;
/// What lies further out is on no sign, and would leave no figures for a millimetre.
const FAR_MM: f64 = 1e7;

/// What becomes of a corner that the inset opens: one of a counter, or the inner corner of an L.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Join {
    /// An arc around the corner, everywhere as far from the outline as asked. Glass bends so.
    Round,
    /// The lines run on until they meet.
    Mitre,
}

/// Outlines moved inwards.
#[derive(Debug, Clone)]
pub struct Inset {
    /// Closed paths. On the outline itself the exact curves; on an inset chords within
    /// [`FLATNESS_MM`].
    pub paths: Vec<BezPath>,
    /// Separate shapes there are now.
    pub parts: usize,
    /// Whether a shape fell into more parts than it was before.
    pub split: bool,
    /// Contours of shapes that left nothing: too thin for the inset, or no shape at all.
    pub vanished: usize,
    /// Counters that ran into the outside or into each other, so that they are no paths of their
    /// own any more.
    pub opened: usize,
    /// Whether contours crossed or covered each other and were united. The paths are chords then,
    /// also on the outline itself.
    pub united: bool,
}

type Contour = Vec<[f64; 2]>;

/// Moves the outlines of one letter inwards by `distance_mm`.
///
/// At distance 0 the outlines come back as they are, curves and all. A distance that is not a
/// positive number counts as 0.
pub fn inset(contours: &[BezPath], distance_mm: f64, join: Join) -> Inset {
    let distance_mm = if distance_mm > 0.0 { distance_mm } else { 0.0 };
    let used: Vec<&BezPath> = contours.iter().filter(|path| near(path)).collect();
    let flat = flattened(&used);
    let shapes = flat.simplify_shape_as::<i64>(FillRule::NonZero);
    let found: usize = shapes.iter().map(Vec::len).sum();
    let (before, after) = (sizes(flat.iter()), sizes(shapes.iter().flatten()));
    let mut result = Inset {
        paths: Vec::new(),
        parts: 0,
        split: false,
        vanished: (contours.len() - used.len()) + (flat.len().max(found) - found),
        opened: 0,
        // Areas of contours that are all there as they were add up to the same, whichever way they
        // run. The grid is some millionths of the size.
        united: (before - after).abs() > 1e-6 * before,
    };
    if result.united {
        // What was taken up by another contour has not vanished.
        result.vanished = contours.len() - used.len();
    }
    if distance_mm == 0.0 {
        result.parts = shapes.len();
        result.paths = if result.united {
            shapes
                .iter()
                .flatten()
                .map(|contour| path(contour))
                .collect()
        } else {
            used.into_iter().cloned().collect()
        };
        return result;
    }
    let style = OutlineStyle::new(-distance_mm).line_join(match join {
        Join::Round => LineJoin::Round(ARC_STEP),
        Join::Mitre => LineJoin::Miter(SHARPEST_MITRE),
    });
    // Shapes that lie apart are inset apart, so that it is known which of them split or vanished.
    for shape in &shapes {
        let left = if distance_mm * 2.0 < thickness(shape) {
            shape.outline_as::<i64>(&style)
        } else {
            Vec::new()
        };
        if left.is_empty() {
            result.vanished += shape.len();
            continue;
        }
        let counters: usize = left.iter().map(|part| part.len().saturating_sub(1)).sum();
        result.opened += shape.len().saturating_sub(1).saturating_sub(counters);
        result.split |= left.len() > 1;
        result.parts += left.len();
        result
            .paths
            .extend(left.iter().flatten().map(|contour| path(contour)));
    }
    result
}

/// What closed paths fill, as chords that do not cross: a counter runs against the contour around
/// it, so that [`inset`] takes it for one.
///
/// Of several areas each by its own filling, together they are one drawing.
pub fn filled(contours: &[BezPath], filling: Filling) -> Vec<BezPath> {
    let used: Vec<&BezPath> = contours.iter().filter(|path| near(path)).collect();
    let rule = match filling {
        Filling::Winding => FillRule::NonZero,
        Filling::EvenOdd => FillRule::EvenOdd,
    };
    let shapes = flattened(&used).simplify_shape_as::<i64>(rule);
    let contours = shapes.iter().flatten();
    contours.map(|contour| path(contour)).collect()
}

/// Whether a path can be worked with.
fn near(path: &BezPath) -> bool {
    let reach = path.control_box().abs();
    path.is_finite()
        && reach.x0.abs().max(reach.x1.abs()) < FAR_MM
        && reach.y0.abs().max(reach.y1.abs()) < FAR_MM
}

/// Chords of closed paths, each without its first point again at the end.
fn flattened(paths: &[&BezPath]) -> Vec<Contour> {
    let size = paths
        .iter()
        .map(|path| path.control_box())
        .map(|size| size.width().max(size.height()))
        .fold(0.0, f64::max);
    let mut found: Vec<Contour> = Vec::new();
    for path in paths {
        let flatness = FLATNESS_MM.max(size * 1e-6);
        kurbo::flatten(
            path.elements().iter().copied(),
            flatness,
            |element| match element {
                PathEl::MoveTo(point) => found.push(vec![[point.x, point.y]]),
                PathEl::LineTo(point) => {
                    if let Some(contour) = found.last_mut() {
                        contour.push([point.x, point.y]);
                    }
                }
                _ => {}
            },
        );
    }
    for contour in &mut found {
        contour.dedup();
        if contour.len() > 1 && contour.first() == contour.last() {
            contour.pop();
        }
    }
    found
}

/// Sum of what each contour encloses by itself.
fn sizes<'a>(contours: impl Iterator<Item = &'a Contour>) -> f64 {
    let area = |contour: &Contour| {
        let next = contour.iter().cycle().skip(1);
        let twice: f64 = contour
            .iter()
            .zip(next)
            .map(|(a, b)| a[0] * b[1] - b[0] * a[1])
            .sum();
        twice.abs() / 2.0
    };
    contours.map(area).sum()
}

/// The smaller side of the box around a shape.
fn thickness(shape: &[Contour]) -> f64 {
    let reach = |axis: usize| {
        let along = || shape.iter().flatten().map(move |point| point[axis]);
        along().fold(f64::MIN, f64::max) - along().fold(f64::MAX, f64::min)
    };
    reach(0).min(reach(1))
}

fn path(contour: &[[f64; 2]]) -> BezPath {
    let mut path = BezPath::new();
    for (at, &[x, y]) in contour.iter().enumerate() {
        if at == 0 {
            path.move_to(Point::new(x, y));
        } else {
            path.line_to(Point::new(x, y));
        }
    }
    path.close_path();
    path
}
