//! What a person does to pieces on the picture, as choices of their row: join two, part one at a
//! crossover, cut a stroke, change the order.

use kurbo::{ParamCurve, ParamCurveArclen, ParamCurveNearest, Point};

use super::Piece;
use super::bends::corners;
use super::drawn::{ARC_LENGTH, LEAST_PART_MM, length};
use crate::job::{Cut, Pieces};
use crate::measure::quoted;

/// A cut this near to a corner is meant at the corner, in millimetres.
const SNAP_MM: f64 = 8.0;
/// Shares that differ by less are one place.
const SAME_SHARE: f64 = 1e-9;

/// Makes two pieces one.
///
/// # Errors
/// A sentence, where they cannot be one.
pub fn join(choices: &mut Pieces, one: &Piece, other: &Piece) -> Result<(), String> {
    let both = format!("{} and {}", quoted(&one.label), quoted(&other.label));
    if one.row != other.row {
        return Err(format!(
            "{both} are of two rows. Only pieces of one row can be joined."
        ));
    }
    if one.tube != other.tube {
        return Err(format!(
            "{both} are of different tubes and stay two pieces."
        ));
    }
    if one.name == other.name {
        return Err(format!(
            "{both} are the same piece of two copies. Choose two pieces of one copy."
        ));
    }
    // What was cut or parted between them is taken back before anything is joined.
    let meets = |share: f64, a: &Piece, b: &Piece, stroke: &str| {
        let at = |piece: &Piece, end: usize| {
            let mut strokes = piece.strokes.iter();
            strokes.any(|s| s.name == stroke && (s.part[end] - share).abs() < SAME_SHARE)
        };
        at(a, 1) && at(b, 0)
    };
    let cut = choices.cuts.iter().position(|cut| {
        meets(cut.share, one, other, &cut.stroke) || meets(cut.share, other, one, &cut.stroke)
    });
    if let Some(cut) = cut {
        choices.cuts.remove(cut);
        return Ok(());
    }
    let has = |piece: &Piece, name: &str| piece.strokes.iter().any(|stroke| stroke.name == name);
    let parted = choices
        .parted
        .iter()
        .position(|[a, b]| has(one, a) && has(other, b) || has(one, b) && has(other, a));
    if let Some(parted) = parted {
        choices.parted.remove(parted);
        return Ok(());
    }
    if one.whole == other.whole {
        return Err(format!(
            "{both} are parts of a piece that is longer than the shop bends in one. To have it in one, \
             choose so for the row."
        ));
    }
    if let (Some(a), Some(b)) = (one.strokes.first(), other.strokes.first()) {
        choices.joined.push([a.name.clone(), b.name.clone()]);
    }
    Ok(())
}

/// Ends a piece after one of its strokes; the rest is a piece of its own.
///
/// # Errors
/// A sentence, where the piece has no stroke after that one.
pub fn part(choices: &mut Pieces, piece: &Piece, after: usize) -> Result<(), String> {
    let names = |at: usize| piece.strokes.get(at).map(|stroke| stroke.name.clone());
    let (Some(one), Some(other)) = (names(after), names(after + 1)) else {
        return Err(format!(
            "{} has no stroke to be parted from there.",
            quoted(&piece.label)
        ));
    };
    choices.parted.push([one, other]);
    Ok(())
}

/// Cuts a piece at the place of its strokes that is nearest to a point of the sign; at a corner,
/// where one is near.
///
/// # Errors
/// A sentence, where too little would be left of the stroke.
pub fn cut(choices: &mut Pieces, piece: &Piece, point: Point) -> Result<(), String> {
    let mut nearest: Option<(f64, usize, f64)> = None;
    for (at, stroke) in piece.strokes.iter().enumerate() {
        let mut done = 0.0;
        for segment in stroke.path.segments() {
            let there = segment.nearest(point, 1e-6);
            if nearest.is_none_or(|(known, ..)| there.distance_sq < known) {
                let along = segment.subsegment(0.0..there.t).arclen(ARC_LENGTH);
                nearest = Some((there.distance_sq, at, done + along));
            }
            done += segment.arclen(ARC_LENGTH);
        }
    }
    let Some((_, at, along)) = nearest else {
        return Err(format!("{} has no strokes to cut.", quoted(&piece.label)));
    };
    let stroke = &piece.strokes[at];
    let long = length(&stroke.path);
    let corner = corners(&stroke.path)
        .into_iter()
        .min_by(|a, b| (a - along).abs().total_cmp(&(b - along).abs()))
        .filter(|corner| (corner - along).abs() <= SNAP_MM);
    let along = corner.unwrap_or(along);
    if along < LEAST_PART_MM || long - along < LEAST_PART_MM {
        return Err(format!(
            "That is the end of a stroke of {}. Cut it at least {LEAST_PART_MM} mm from its end, or \
             part it at a crossover.",
            quoted(&piece.label)
        ));
    }
    let [from, to] = stroke.part;
    choices.cuts.push(Cut {
        stroke: stroke.name.clone(),
        share: from + (to - from) * along / long,
    });
    Ok(())
}

/// Moves one of a row's pieces (of one copy, in their order now) to another place among them.
pub fn reorder(choices: &mut Pieces, pieces: &[&Piece], from: usize, to: usize) {
    let mut order: Vec<String> = pieces.iter().map(|piece| piece.name.clone()).collect();
    if from < order.len() && to < order.len() {
        let moved = order.remove(from);
        order.insert(to, moved);
        choices.order = order;
    }
}
