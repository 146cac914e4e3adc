//! The plan: pieces in reading order split into circuits, and a supply for each, with the reasons.
//!
//! Exact over all splits into neighbouring pieces (of at most 250 each, more than any supply can
//! run) that light together: pieces of two groups are never on one circuit. Order of what is avoided and sought: pieces left
//! without a supply; circuits that need a look; then the job's wish. Ties go to the better balance
//! (each string near the middle of its window).

mod gates;
mod split;
mod why;

use std::ops::Range;

use crate::book::{Loading, OutputEarthing};
use crate::circuit::{Assessment, Load, Operating, assess, beyond_readings, volts_off};
use crate::job::Wish;
use crate::rules::{Finding, Grade, RuleSet};
use crate::supply::Rating;
use crate::takeoff::Piece;
use crate::tube::{Known, TubeType};

pub use gates::Gates;
pub use split::{Fit, Split, Summed, best_split};
pub use why::{Neighbour, Rejection};

/// A supply the plan may use.
#[derive(Debug, Clone)]
pub struct Candidate {
    /// Place in the book's list of supplies.
    pub entry: usize,
    /// Its rating.
    pub rating: Rating,
    /// Whether the rule set or the site alone already ask for a look.
    pub look: bool,
}

/// What the plan works from.
#[derive(Debug, Clone, Copy)]
pub struct Task<'a> {
    /// Pieces with their tube types, in reading order.
    pub pieces: &'a [(&'a Piece, &'a TubeType)],
    /// Supplies that may be used.
    pub candidates: &'a [Candidate],
    /// Windows.
    pub loading: &'a Loading,
    /// What to strive for.
    pub wish: Wish,
    /// Whether the site is cold.
    pub cold: bool,
    /// The rule set, for the reasons only: its word for earth, and no supply is spoken of that it
    /// forbids. What it says of the candidates is decided before.
    pub rules: Option<&'a RuleSet>,
}

/// A circuit of the plan.
#[derive(Debug, Clone)]
pub struct Circuit {
    /// Its pieces, as a range of the task's pieces.
    pub pieces: Range<usize>,
    /// Where the second string begins, with a mid-point return.
    pub second_from: Option<usize>,
    /// Its supply, a place in the task's candidates.
    pub candidate: usize,
    /// The circuit worked up.
    pub assessment: Assessment,
    /// The next smaller supply and what it fails by.
    pub smaller: Option<Neighbour>,
    /// The next larger supply and what speaks against it.
    pub larger: Option<Neighbour>,
}

/// Pieces that no supply can run, together or alone.
#[derive(Debug, Clone)]
pub struct LeftOver {
    /// The pieces, as a range of the task's pieces.
    pub pieces: Range<usize>,
    /// The supply that comes nearest and what it fails by; None when there is no supply at all.
    pub nearest: Option<Rejection>,
    /// What would make it fit, in words.
    pub would_fit: String,
}

/// The best plan.
#[derive(Debug, Clone, Default)]
pub struct Plan {
    /// Circuits in reading order.
    pub circuits: Vec<Circuit>,
    /// Pieces without a supply.
    pub left_over: Vec<LeftOver>,
}

/// The cost of a plan, compared in this order; sums of circuits' costs.
type Cost = [u64; 6];

/// Finds the best plan.
pub fn plan(task: &Task) -> Plan {
    let gates = Gates::new(task);
    let mut found = Plan::default();
    for run in groups(task) {
        plan_run(task, &gates, run, &mut found);
    }
    found
}

/// Runs of neighbouring pieces that light together. No circuit reaches from one into the next, and
/// costs are sums, so the best plans of the runs are the best plan.
fn groups(task: &Task) -> Vec<Range<usize>> {
    let mut runs: Vec<Range<usize>> = Vec::new();
    for (at, (piece, _)) in task.pieces.iter().enumerate() {
        match runs.last_mut() {
            Some(run) if task.pieces[run.start].0.group == piece.group => run.end = at + 1,
            _ => runs.push(at..at + 1),
        }
    }
    runs
}

/// Adds the best plan of a run of pieces.
fn plan_run(task: &Task, gates: &Gates, run: Range<usize>, found: &mut Plan) {
    let left_out: Cost = [1, 0, 0, 0, 0, 0];
    let of_task = |part: Range<usize>| part.start + run.start..part.end + run.start;
    let Some(split) = best_split(
        run.len(),
        task.candidates.len(),
        Some(left_out),
        |pieces, supply| {
            gates
                .fit(task, of_task(pieces), supply)
                .map(|fit| cost(task, supply, fit))
        },
    ) else {
        return;
    };
    let mut stranded: Option<Range<usize>> = None;
    for (pieces, supply) in split.parts {
        let pieces = of_task(pieces);
        let Some(candidate) = supply else {
            match &mut stranded {
                Some(range) => range.end = pieces.end,
                None => stranded = Some(pieces),
            }
            continue;
        };
        found
            .left_over
            .extend(stranded.take().map(|pieces| why::left_over(task, pieces)));
        found.circuits.push(circuit(task, gates, pieces, candidate));
    }
    found
        .left_over
        .extend(stranded.map(|pieces| why::left_over(task, pieces)));
}

/// What a fitting string costs, by the wish.
fn cost(task: &Task, supply: usize, fit: gates::Fitting) -> Cost {
    let candidate = &task.candidates[supply];
    let looks = u64::from(fit.grade == Some(Grade::Look) || candidate.look);
    let va = scaled(candidate.rating.rated_va, 10.0);
    let price = match candidate.rating.price {
        Some(price) => scaled(f64::try_from(price).unwrap_or(f64::MAX), 100.0),
        // An unknown price is never the lowest.
        None => UNKNOWN_PRICE,
    };
    let balance = scaled(fit.off_middle, 1e6);
    match task.wish {
        Wish::FewestSupplies => [0, looks, 1, va, price, balance],
        Wish::LowestPrice => [0, looks, price, 1, va, balance],
    }
}

/// More than any supply costs, small enough that thousands of them add up.
const UNKNOWN_PRICE: u64 = 1 << 40;

#[allow(
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss,
    reason = "clamped to a range that u64 holds"
)]
fn scaled(value: f64, by: f64) -> u64 {
    (value * by).round().clamp(0.0, 1e12) as u64
}

fn circuit(task: &Task, gates: &Gates, pieces: Range<usize>, candidate: usize) -> Circuit {
    let second_from = gates.second_from(task, &pieces, candidate);
    let rating = &task.candidates[candidate].rating;
    let mut assessment = on(task, &pieces, second_from, rating);
    unsure(task, &pieces, second_from, rating, &mut assessment);
    Circuit {
        assessment,
        smaller: why::smaller(task, gates, &pieces, candidate),
        larger: why::larger(task, gates, &pieces, candidate),
        pieces,
        second_from,
        candidate,
    }
}

/// Where a circuit runs at either end of what the volts of its tubes may be off by, and what would stop
/// it there that does not as worked out. It speaks of the circuit chosen; the choice is made without
/// it.
fn unsure(
    task: &Task,
    pieces: &Range<usize>,
    second_from: Option<usize>,
    rating: &Rating,
    nominal: &mut Assessment,
) {
    let percents = || {
        let tubes = task.pieces[pieces.clone()].iter();
        tubes.filter_map(|(_, tube)| tube.uncertainty_percent())
    };
    let least = percents().fold(f64::INFINITY, f64::min);
    let most = percents().fold(0.0, f64::max);
    if most == 0.0 {
        return;
    }
    let at = |sign: f64| {
        let here = &task.pieces[pieces.clone()];
        let tubes: Vec<TubeType> = here.iter().map(|(_, tube)| tube.off_by(sign)).collect();
        let alone: Vec<(&Piece, &TubeType)> = here.iter().map(|here| here.0).zip(&tubes).collect();
        let alone = Task {
            pieces: &alone,
            ..*task
        };
        let second_from = second_from.map(|from| from - pieces.start);
        on(&alone, &(0..pieces.len()), second_from, rating)
    };
    let (more, less) = (at(1.0), at(-1.0));
    let ends = less.halves.iter().zip(&more.halves);
    for (half, (less, more)) in nominal.halves.iter_mut().zip(ends) {
        half.band = Some((less.operating, more.operating));
    }
    beyond(task, pieces, second_from, nominal);
    if nominal.grade() == Some(Grade::Stop) {
        return;
    }
    let percent = if least == most {
        format!("{most} %")
    } else {
        format!("{least} to {most} %")
    };
    let mut known = task.pieces[pieces.clone()].iter().map(|(_, tube)| tube);
    let modelled = known
        .clone()
        .any(|tube| matches!(tube.known, Known::Model { .. }));
    let measured = known.any(|tube| matches!(tube.known, Known::Measured { .. }));
    let (say, settled) = match (modelled, measured) {
        (true, true) => (
            "the default model and the fit to your bench readings say",
            "bench readings of your own glass",
        ),
        (false, _) => ("the fit to your bench readings says", "more readings"),
        (true, false) => ("the default model says", "bench readings of your own glass"),
    };
    let found: Vec<Finding> = [(&more, "more"), (&less, "less")]
        .into_iter()
        .filter_map(|(worked, way)| {
            volts_off(worked, &format!("{percent} {way} than {say}"), settled)
        })
        .collect();
    nominal.findings.extend(found);
}

/// How far beyond the currents that were read a measured tube may run before a person has to look, as a
/// share. Our own choice, no source.
const BEYOND_READINGS: f64 = 0.10;

/// Tells of measured tubes that run at a current their readings do not reach.
fn beyond(task: &Task, pieces: &Range<usize>, second_from: Option<usize>, worked: &mut Assessment) {
    let mut told: Vec<&str> = Vec::new();
    for at in pieces.clone() {
        let tube = task.pieces[at].1;
        let string = usize::from(second_from.is_some_and(|from| at >= from));
        let operating = worked.halves.get(string).map(|half| half.operating);
        if let Known::Measured { from_ma, to_ma, .. } = tube.known
            && let Some(Operating::Runs { current, .. }) = operating
            && !(from_ma * (1.0 - BEYOND_READINGS)..=to_ma * (1.0 + BEYOND_READINGS))
                .contains(&current.ma())
            && !told.contains(&tube.name.as_str())
        {
            told.push(&tube.name);
            let found = beyond_readings(current, from_ma, to_ma, &tube.name);
            worked.findings.push(found);
        }
    }
}

/// Some pieces on a rating, worked up in full.
fn on(
    task: &Task,
    pieces: &Range<usize>,
    second_from: Option<usize>,
    rating: &Rating,
) -> Assessment {
    let load = |range: Range<usize>| Load::of(task.pieces[range].iter().copied(), task.cold);
    match second_from {
        Some(from) => {
            let (first, second) = (load(pieces.start..from), load(from..pieces.end));
            assess(&[&first, &second], rating, task.loading)
        }
        None => assess(&[&load(pieces.clone())], rating, task.loading),
    }
}

const fn two_strings(rating: &Rating) -> bool {
    matches!(rating.earthing, OutputEarthing::MidPointReturn)
}
