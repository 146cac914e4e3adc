//! Volts to earth along a string, joint by joint.

use super::assess::Assessment;
use super::curve::Curve;
use super::load::Operating;
use crate::book::OutputEarthing;
use crate::measure::{Milliamps, Volts};
use crate::supply::Rating;
use crate::takeoff::Piece;
use crate::tube::TubeType;

/// Volts to earth from lead A to lead B.
#[derive(Debug, Clone, PartialEq)]
pub struct Profile {
    /// Lead A, the joints between pieces, lead B: one more than there are pieces.
    pub joints: Vec<Joint>,
    /// The pieces between them.
    pub spans: Vec<Span>,
    /// Running volts from lead A to lead B, of both strings with a mid-point return.
    pub total: Volts,
    /// Whether it runs. Where it does not, the volts are those it would want.
    pub runs: bool,
    /// Volts to earth that may stand anywhere on the string when a tube breaks: the whole string hangs
    /// on the lead that is still joined to it.
    pub no_load: Volts,
    /// Whether anything holds the output to earth. Where nothing does, no running profile is known.
    pub held: bool,
}

/// Where two pieces meet, or a piece and a lead.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Joint {
    /// Share of all running volts between lead A and here.
    pub share: f64,
    /// Running volts to earth, the lead A side of earth above zero; the no-load volts where nothing
    /// holds the output to earth.
    pub running: Volts,
    /// Whether the mid-point return joins here.
    pub mid_point: bool,
}

/// A piece between two joints.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Span {
    /// Running volts of the piece, electrodes and column.
    pub volts: Volts,
    /// Of those, at its pair of electrodes; half is taken at each end.
    pub pair: Volts,
}

/// A place on a string.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Spot {
    /// The piece, counted along the string from 0.
    pub piece: usize,
    /// How far along its gas column from the electrode nearer lead A, 0 to 1.
    pub along: f64,
}

/// Ratings of high-voltage cable that NEC 600.32(B) names, in kilovolts.
const CLASSES_KV: [u32; 3] = [5, 10, 15];

/// The least class of insulation for leads, joints and sleeves, in kilovolts, by the no-load volts to
/// earth; None above the highest class.
///
/// NEC 600.32(B) names cable of 5, 10 and 15 kV and does not say which goes with which supply. The
/// choice, the smallest class that is not below the no-load volts to earth, is derived here, not the
/// code's: a broken tube lets any joint rise to these volts.
pub fn insulation_class(no_load_to_earth: Volts) -> Option<u32> {
    CLASSES_KV
        .into_iter()
        .find(|&kv| f64::from(kv) * 1_000.0 >= no_load_to_earth.volts())
}

/// The profile of a circuit: `pieces` in order from lead A, `first_string` of them before the mid-point
/// return where there is one.
pub fn profile(
    pieces: &[(&Piece, &TubeType)],
    first_string: usize,
    assessment: &Assessment,
    rating: &Rating,
    cold: bool,
) -> Profile {
    let returned = rating.earthing == OutputEarthing::MidPointReturn;
    let curve = Curve::of(rating, if returned { 0.5 } else { 1.0 }, 1.0);
    let current = |string: usize| -> Milliamps {
        match assessment.halves.get(string).map(|half| half.operating) {
            Some(Operating::Runs { current, .. }) => current,
            _ => curve.edge().1,
        }
    };
    let string_of = |at: usize| usize::from(returned && at >= first_string);
    let spans: Vec<Span> = pieces
        .iter()
        .enumerate()
        .map(|(at, (piece, tube))| Span {
            volts: tube.running(piece.column(), current(string_of(at)), cold),
            pair: Volts::from_volts(tube.pair_volts),
        })
        .collect();
    let total: Volts = spans.iter().map(|span| span.volts).sum();
    let first: Volts = spans
        .iter()
        .take(if returned { first_string } else { spans.len() })
        .map(|span| span.volts)
        .sum();
    // Where the string is at earth, in volts from lead A.
    let earthed = match rating.earthing {
        OutputEarthing::MidPoint => total * 0.5,
        OutputEarthing::MidPointReturn => first,
        OutputEarthing::OneEnd | OutputEarthing::Isolated => total,
    };
    let held = rating.earthing != OutputEarthing::Isolated;
    let mut from_a = Volts::from_volts(0.0);
    let mut joints = Vec::with_capacity(spans.len() + 1);
    for at in 0..=spans.len() {
        joints.push(Joint {
            share: if total.volts() > 0.0 {
                from_a / total
            } else {
                0.0
            },
            running: if held {
                earthed - from_a
            } else {
                rating.no_load
            },
            mid_point: returned && at == first_string,
        });
        if let Some(span) = spans.get(at) {
            from_a += span.volts;
        }
    }
    Profile {
        joints,
        spans,
        total,
        runs: assessment
            .halves
            .iter()
            .all(|half| matches!(half.operating, Operating::Runs { .. })),
        no_load: rating.no_load_to_earth(),
        held,
    }
}

impl Profile {
    /// The place on the string at a share of all running volts from lead A.
    pub fn spot(&self, share: f64) -> Option<Spot> {
        let volts = self.total.volts() * share.clamp(0.0, 1.0);
        let mut before = 0.0;
        for (piece, span) in self.spans.iter().enumerate() {
            let here = span.volts.volts();
            if volts <= before + here || piece + 1 == self.spans.len() {
                let pair = span.pair.volts();
                let column = here - pair;
                let along = if column > 0.0 {
                    (volts - before - pair / 2.0) / column
                } else {
                    0.5
                };
                return Some(Spot {
                    piece,
                    along: along.clamp(0.0, 1.0),
                });
            }
            before += here;
        }
        None
    }
}
