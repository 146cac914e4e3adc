//! The reasons: what the next smaller and next larger supply come to, and what is nearest when
//! nothing fits.

use std::ops::Range;

use super::gates::Gates;
use super::{LeftOver, Task, on};
use crate::circuit::{Assessment, CONTINUOUS_TO, Operating};
use crate::measure::{Volts, grouped, volts_shown};
use crate::rules::{Finding, Grade};
use crate::supply::Rating;

/// Another supply for the same pieces.
#[derive(Debug, Clone)]
pub struct Neighbour {
    /// Place in the task's candidates.
    pub candidate: usize,
    /// Why it was not taken, as a sentence.
    pub says: String,
}

/// The supply that comes nearest to running pieces that nothing runs.
#[derive(Debug, Clone)]
pub struct Rejection {
    /// Place in the task's candidates.
    pub candidate: usize,
    /// What stops it.
    pub findings: Vec<Finding>,
}

/// By size: rated volt-amperes, then no-load volts.
fn size(rating: &Rating) -> (f64, f64) {
    (rating.rated_va, rating.no_load.volts())
}

fn by_size(a: &Rating, b: &Rating) -> std::cmp::Ordering {
    let (a, b) = (size(a), size(b));
    a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1))
}

/// The largest supply smaller than the one taken.
pub(super) fn smaller(
    task: &Task,
    gates: &Gates,
    pieces: &Range<usize>,
    taken: usize,
) -> Option<Neighbour> {
    let size = &task.candidates[taken].rating;
    let next = (0..task.candidates.len())
        .filter(|&other| by_size(&task.candidates[other].rating, size).is_lt())
        .max_by(|&a, &b| by_size(&task.candidates[a].rating, &task.candidates[b].rating))?;
    Some(neighbour(task, gates, pieces, taken, next))
}

/// The smallest supply larger than the one taken.
pub(super) fn larger(
    task: &Task,
    gates: &Gates,
    pieces: &Range<usize>,
    taken: usize,
) -> Option<Neighbour> {
    let size = &task.candidates[taken].rating;
    let next = (0..task.candidates.len())
        .filter(|&other| by_size(&task.candidates[other].rating, size).is_gt())
        .min_by(|&a, &b| by_size(&task.candidates[a].rating, &task.candidates[b].rating))?;
    Some(neighbour(task, gates, pieces, taken, next))
}

fn neighbour(
    task: &Task,
    gates: &Gates,
    pieces: &Range<usize>,
    taken: usize,
    other: usize,
) -> Neighbour {
    let there = &task.candidates[other];
    let worked = on(
        task,
        pieces,
        gates.second_from(task, pieces, other),
        &there.rating,
    );
    let grave = worked
        .findings
        .iter()
        .filter(|finding| finding.grade >= Grade::Look)
        .max_by_key(|finding| finding.grade);
    let says = match grave {
        Some(finding) => finding.says.clone(),
        None if there.look => {
            "Runs it, but the supply itself needs a look under the rule set.".to_owned()
        }
        None => {
            let load = format!(
                "runs it at {:.0} % of its window's basis",
                worked.heavier().share * 100.0
            );
            let price = match (there.rating.price, task.candidates[taken].rating.price) {
                (Some(there), Some(here)) if there > here => {
                    format!("; costs {} more", there - here)
                }
                (Some(there), Some(here)) if there < here => {
                    format!("; costs {} less", here - there)
                }
                (Some(_), Some(_)) => "; costs the same".to_owned(),
                _ => String::new(),
            };
            format!(
                "Larger than needed: {load}, {} to earth{price}.",
                volts_shown(worked.to_earth_no_load)
            )
        }
    };
    Neighbour {
        candidate: other,
        says,
    }
}

/// The nearest miss for pieces that nothing runs.
pub(super) fn left_over(task: &Task, pieces: Range<usize>) -> LeftOver {
    let gates = Gates::new(task);
    let (longest, _) = pieces
        .clone()
        .map(|piece| (piece, task.pieces[piece].0.column().mm()))
        .max_by(|a, b| a.1.total_cmp(&b.1))
        .unwrap_or((pieces.start, 0.0));
    // All of them together, and the longest alone: whichever comes nearer is the one to speak of.
    let nearest = [pieces.clone(), longest..longest + 1]
        .into_iter()
        .flat_map(|range| (0..task.candidates.len()).map(move |supply| (range.clone(), supply)))
        .map(|(range, supply)| {
            let rating = &task.candidates[supply].rating;
            let worked = on(
                task,
                &range,
                gates.second_from(task, &range, supply),
                rating,
            );
            let miss = miss(&worked);
            (range, supply, worked, miss)
        })
        .min_by(|a, b| a.3.total_cmp(&b.3));
    let Some((range, supply, worked, _)) = nearest else {
        return LeftOver {
            pieces,
            nearest: None,
            would_fit: "There is no supply to choose from: add one to the shop book, or see why \
                        each was refused."
                .to_owned(),
        };
    };
    let would_fit = remedy(task, &range, supply, &worked);
    let findings = worked
        .findings
        .into_iter()
        .filter(|finding| finding.grade == Grade::Stop)
        .collect();
    LeftOver {
        pieces,
        nearest: Some(Rejection {
            candidate: supply,
            findings,
        }),
        would_fit,
    }
}

/// How far a string is from running, as a ratio above 1, of its worst stop.
fn miss(worked: &Assessment) -> f64 {
    worked
        .findings
        .iter()
        .filter(|finding| finding.grade == Grade::Stop)
        .map(|finding| match (finding.value, finding.limit) {
            (Some(value), Some(limit)) => value / limit,
            _ => f64::MAX,
        })
        .fold(0.0, f64::max)
}

/// The smallest change that would make it fit, in words.
fn remedy(task: &Task, pieces: &Range<usize>, supply: usize, worked: &Assessment) -> String {
    let rating = &task.candidates[supply].rating;
    let overdriven = worked
        .findings
        .iter()
        .find(|f| f.grade == Grade::Stop && f.unit == "mA");
    let half = worked.heavier();
    match half.operating {
        Operating::Runs { gaps: false, .. } if let Some(finding) = overdriven => format!(
            "A supply of at most {} mA short circuit for this tube, or more glass on the circuit.",
            finding.limit.map_or_else(String::new, grouped)
        ),
        _ => {
            // The window's look limit is where a plan wants to stay.
            let share = worked.window.look_above.min(CONTINUOUS_TO);
            let needed = Volts::from_volts(half.operating.volts().volts() / share);
            let parts = (half.share / share).ceil().max(2.0);
            let shape = if pieces.len() == 1 {
                format!("the piece bent as {parts:.0} pieces with electrodes of their own")
            } else {
                format!("the pieces on {parts:.0} circuits")
            };
            format!(
                "A supply of about {} no-load at {} mA, or {shape}, or a wider tube.",
                volts_shown(Volts::from_volts((needed.volts() / 100.0).ceil() * 100.0)),
                rating.short_circuit.ma()
            )
        }
    }
}
