//! The reasons: what the next smaller and next larger supply come to, and what is nearest when
//! nothing fits.
//!
//! The next smaller and larger are what a person would reach for: of the same kind, earthing and
//! current class as the one taken, the next by no-load volts. Only where there is none in that
//! direction, the next by rated volt-amperes of any sort.

use std::cmp::Ordering;
use std::ops::Range;

use super::gates::Gates;
use super::{LeftOver, Task, on};
use crate::book::OutputEarthing;
use crate::circuit::{Assessment, Basis, CONTINUOUS_TO, Operating, Zone};
use crate::measure::{Volts, grouped, quoted, told_from, volts_shown};
use crate::rules::{EarthWord, Finding, Grade, Limits};
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

/// Short-circuit currents up to this share apart are of one class: the tubes for one run on the other.
const SAME_CLASS: f64 = 0.20;

fn alike(a: &Rating, b: &Rating) -> bool {
    let (one, other) = (a.short_circuit.ma(), b.short_circuit.ma());
    a.kind == b.kind && a.earthing == b.earthing && (one - other).abs() <= SAME_CLASS * one
}

/// By no-load volts, then rated volt-amperes.
fn by_volts(a: &Rating, b: &Rating) -> Ordering {
    (a.no_load.volts().total_cmp(&b.no_load.volts())).then(a.rated_va.total_cmp(&b.rated_va))
}

/// By rated volt-amperes, then no-load volts.
fn by_va(a: &Rating, b: &Rating) -> Ordering {
    (a.rated_va.total_cmp(&b.rated_va)).then(a.no_load.volts().total_cmp(&b.no_load.volts()))
}

/// The next supply in a direction.
fn next(task: &Task, taken: usize, way: Ordering) -> Option<usize> {
    let here = &task.candidates[taken].rating;
    let nearest = |alike_only: bool, by: fn(&Rating, &Rating) -> Ordering| {
        (0..task.candidates.len())
            .map(|other| (other, &task.candidates[other].rating))
            .filter(|(_, there)| by(there, here) == way && (!alike_only || alike(here, there)))
            .min_by(|(_, a), (_, b)| {
                let nearer = if way.is_lt() { by(b, a) } else { by(a, b) };
                // Of two the same, the cheaper one; one without a price is never the cheaper.
                nearer
                    .then(a.price.is_none().cmp(&b.price.is_none()))
                    .then(a.price.cmp(&b.price))
            })
            .map(|(other, _)| other)
    };
    nearest(true, by_volts).or_else(|| nearest(false, by_va))
}

/// The next supply smaller than the one taken.
pub(super) fn smaller(
    task: &Task,
    gates: &Gates,
    pieces: &Range<usize>,
    taken: usize,
) -> Option<Neighbour> {
    let other = next(task, taken, Ordering::Less)?;
    Some(neighbour(task, gates, pieces, taken, other, "Fits too"))
}

/// The next supply larger than the one taken.
pub(super) fn larger(
    task: &Task,
    gates: &Gates,
    pieces: &Range<usize>,
    taken: usize,
) -> Option<Neighbour> {
    let other = next(task, taken, Ordering::Greater)?;
    let fits = "Fits too, but is larger";
    Some(neighbour(task, gates, pieces, taken, other, fits))
}

fn neighbour(
    task: &Task,
    gates: &Gates,
    pieces: &Range<usize>,
    taken: usize,
    other: usize,
    fits: &str,
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
            "Would run it, but the supply itself needs a look, under the rule set or at this site."
                .to_owned()
        }
        None => {
            let here = &task.candidates[taken].rating;
            format!(
                "{}{}.",
                runs(task, &worked, &there.rating, fits),
                costs(&there.rating, here)
            )
        }
    };
    Neighbour {
        candidate: other,
        says,
    }
}

/// How a supply would run what nothing speaks against.
fn runs(task: &Task, worked: &Assessment, rating: &Rating, fits: &str) -> String {
    let heavier = worked.heavier();
    let window = &worked.window;
    let (from, to) = (window.target_from * 100.0, window.target_to * 100.0);
    let (opening, edge) = match heavier.zone {
        Zone::Light | Zone::UnderTarget => ("Larger than needed", from),
        Zone::OverTarget | Zone::Heavy | Zone::Over => ("Runs it over its target", to),
        Zone::Target => (fits, f64::NAN),
    };
    format!(
        "{opening}: it would run at {} % {} (target {from:.0} to {to:.0} %), {} to {} with no load",
        told_from(heavier.share * 100.0, edge, 0),
        window.of_what(rating),
        volts_shown(worked.to_earth_no_load),
        task.rules
            .map_or_else(EarthWord::default, |rules| rules.earth_word)
            .word(),
    )
}

/// What a supply costs beside the one taken.
fn costs(there: &Rating, here: &Rating) -> String {
    let more = match (there.price, here.price) {
        (Some(there), Some(here)) => there.checked_sub(here),
        _ => None,
    };
    match more {
        Some(more) if more.is_zero() => "; costs the same".to_owned(),
        Some(more) if more.is_sign_negative() => format!("; costs {} less", more.abs()),
        Some(more) => format!("; costs {more} more"),
        None => String::new(),
    }
}

/// The nearest miss for pieces that nothing runs.
pub(super) fn left_over(task: &Task, pieces: Range<usize>) -> LeftOver {
    let gates = Gates::new(task);
    let (longest, _) = pieces
        .clone()
        // Of some as long the first is spoken of.
        .rev()
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
    let alone = pieces.len() == 1;
    let would_fit = remedy(task, &range, alone, supply, &worked);
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

/// The smallest change that would make some pieces fit, in words; unless `only`, there are others
/// that nothing runs beside them.
fn remedy(
    task: &Task,
    pieces: &Range<usize>,
    only: bool,
    supply: usize,
    worked: &Assessment,
) -> String {
    let rating = &task.candidates[supply].rating;
    let overdriven = worked
        .findings
        .iter()
        .find(|f| f.grade == Grade::Stop && f.unit == "mA");
    let half = worked.heavier();
    match half.operating {
        Operating::Runs { gaps: false, .. } if let Some(finding) = overdriven => format!(
            "A supply like it of at most {} mA short circuit, or more glass on the circuit.",
            finding.limit.map_or_else(String::new, grouped)
        ),
        _ => {
            let pair = pieces
                .clone()
                .map(|piece| task.pieces[piece].1.pair_volts)
                .sum::<f64>();
            let volts = half.operating.volts().volts();
            // The window's look limit is where a plan wants to stay.
            let share = worked.window.look_above.min(CONTINUOUS_TO);
            let fair = share * volts / half.share;
            let mut ways = Vec::new();
            let alone = pieces.len() == 1;
            let with_return = rating.earthing == OutputEarthing::MidPointReturn;
            let needed = (volts / share / 100.0).ceil() * 100.0;
            let (needed, sort) = match with_return {
                // One piece is one string, and needs no return.
                true if alone => (needed, " without a mid-point return"),
                true => (needed * 2.0, ""),
                false => (needed, ""),
            };
            let shown = volts_shown(Volts::from_volts(needed));
            let (no_load, wanted) = match rating.rated_load {
                Some(rated) if worked.window.basis == Basis::RatedLoad => (
                    needed * (rating.no_load / rated),
                    format!("{shown} at its rated {} mA", rating.rated.ma()),
                ),
                _ => (
                    needed,
                    format!("{shown} no-load at {} mA", rating.short_circuit.ma()),
                ),
            };
            if no_load <= most_no_load(task, rating) {
                ways.push(format!("a supply{sort} of about {wanted}"));
            }
            if alone && fair > pair {
                // Each part has a pair of electrodes again.
                let parts = ((volts - pair) / (fair - pair)).ceil().max(2.0);
                let label = quoted(&task.pieces[pieces.start].0.label);
                // Two are the two strings of a supply with a mid-point return.
                let with = if with_return && parts == 2.0 {
                    " with electrodes of their own"
                } else {
                    ", each with electrodes and a supply of its own"
                };
                ways.push(if only {
                    format!("the piece {label} bent as {parts:.0} pieces{with}")
                } else {
                    format!(
                        "the longest piece, {label}, bent as {parts:.0}{with}, and the others \
                         likewise"
                    )
                });
            }
            if volts <= fair * WIDER {
                ways.push("a wider tube".to_owned());
            }
            if ways.is_empty() {
                ways.push("less glass in a piece".to_owned());
            }
            let text = format!("{}.", ways.join(", or "));
            let mut chars = text.chars();
            chars.next().map_or_else(String::new, |first| {
                first.to_uppercase().chain(chars).collect()
            })
        }
    }
}

/// A wider tube takes about this much off the volts at the most.
const WIDER: f64 = 1.5;
/// Supplies of higher no-load volts are not made for signs.
const MOST_NO_LOAD: f64 = 15_000.0;

/// The greatest no-load volts of a supply earthed as this one that the rule set allows.
fn most_no_load(task: &Task, rating: &Rating) -> f64 {
    let limit = |limits| task.rules?.rule(limits)?.value;
    let to_earth = rating.no_load_to_earth() / rating.no_load;
    let by_earth = limit(Limits::VoltsToEarth).map(|volts| volts / to_earth);
    [limit(Limits::NoLoadVolts), by_earth]
        .into_iter()
        .flatten()
        .fold(MOST_NO_LOAD, f64::min)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::book::{Allowances, Loading, SupplyEntry, SupplyKind, TubeEntry};
    use crate::job::{Job, Row, StrokesRow, Wish};
    use crate::plan::{Candidate, Circuit, Plan, plan};
    use crate::rules::{RuleSet, iec_en, nec};
    use crate::takeoff::{Piece, takeoff};
    use crate::tube::TubeType;

    fn supply(name: &str, volts: f64, ma: f64, price: i64) -> SupplyEntry {
        SupplyEntry {
            name: name.to_owned(),
            kind: Some(SupplyKind::Iron),
            earthing: Some(OutputEarthing::MidPoint),
            no_load_volts: Some(volts),
            short_circuit_ma: Some(ma),
            price: Some(price.into()),
            ..SupplyEntry::default()
        }
    }

    fn candidates(supplies: &[SupplyEntry]) -> Vec<Candidate> {
        supplies
            .iter()
            .enumerate()
            .map(|(entry, supply)| Candidate {
                entry,
                rating: Rating::read(supply).expect("a whole plate"),
                look: false,
            })
            .collect()
    }

    /// The plan for some lengths of a tube that takes 500 V a metre and 200 V a pair.
    fn planned(lengths: &str, candidates: &[Candidate], wish: Wish, rules: &RuleSet) -> Plan {
        let row = Row::Strokes(StrokesRow {
            label: "b".to_owned(),
            strokes: lengths.to_owned(),
            tube: "t".to_owned(),
            count: 1,
            // However long: these are sentences about supplies.
            pieces: crate::job::Pieces {
                keep_long: true,
                ..crate::job::Pieces::default()
            },
            ..StrokesRow::default()
        });
        let job = Job {
            rows: vec![row],
            ..Job::default()
        };
        let off = takeoff(&job, &Allowances::default());
        let tube = TubeType::read(&TubeEntry {
            volts_per_m: Some(500.0),
            at_ma: Some(25.0),
            exponent: Some(0.0),
            pair_volts: Some(200.0),
            outer_mm: Some(12.0),
            ..TubeEntry::default()
        })
        .expect("a whole tube");
        let pieces: Vec<(&Piece, &TubeType)> =
            off.pieces.iter().map(|piece| (piece, &tube)).collect();
        let loading = Loading::default();
        plan(&Task {
            pieces: &pieces,
            candidates,
            loading: &loading,
            wish,
            cold: false,
            rules: Some(rules),
        })
    }

    /// The one circuit of some lengths.
    fn circuit(lengths: &str, candidates: &[Candidate], wish: Wish) -> Circuit {
        let mut found = planned(lengths, candidates, wish, &nec());
        assert_eq!(found.circuits.len(), 1, "{found:?}");
        found.circuits.remove(0)
    }

    fn named(neighbour: Option<&Neighbour>, candidates: &[Candidate]) -> Option<(String, String)> {
        neighbour.map(|found| {
            let name = candidates[found.candidate].rating.name.clone();
            (name, found.says.replace('\u{202f}', " "))
        })
    }

    #[test]
    fn neighbours_are_of_the_same_sort() {
        let mut with_return = supply("6.5 kV return", 6_500.0, 30.0, 158);
        // By volt-amperes it would be the next below the 270 VA of 9 kV.
        with_return.input_va = Some(240.0);
        with_return.earthing = Some(OutputEarthing::MidPointReturn);
        let mut electronic = supply("Electronic 10 kV", 10_000.0, 30.0, 149);
        electronic.kind = Some(SupplyKind::Electronic);
        (electronic.rated_ma, electronic.rated_load_volts) = (Some(30.0), Some(9_000.0));
        let candidates = candidates(&[
            supply("7.5 kV", 7_500.0, 30.0, 134),
            with_return,
            supply("9 kV", 9_000.0, 30.0, 152),
            electronic,
            // 300 VA lies between 270 and 450, but 5 kV can never run what needs 9 kV.
            supply("5 kV 60 mA", 5_000.0, 60.0, 148),
            supply("15 kV dear", 15_000.0, 30.0, 300),
            supply("15 kV", 15_000.0, 30.0, 228),
        ]);
        // 10 m and two pairs: 5 400 V, 60 % of 9 000 V and 36 % of 15 000 V.
        let found = circuit("5 m; 5 m", &candidates, Wish::FewestSupplies);
        assert_eq!(candidates[found.candidate].rating.name, "9 kV");
        let smaller = named(found.smaller.as_ref(), &candidates).expect("one");
        assert_eq!(smaller.0, "7.5 kV");
        let (name, says) = named(found.larger.as_ref(), &candidates).expect("one");
        assert_eq!(name, "15 kV", "the cheaper one of two alike");
        assert_eq!(
            says,
            "Larger than needed: it would run at 36 % of no-load volts (target 50 to 65 %), 7 500 V \
             to ground with no load; costs 76 more."
        );
    }

    #[test]
    fn where_none_is_alike_the_nearest_of_any_is_named() {
        let mut one_end = supply("3 kV one end", 3_000.0, 30.0, 57);
        one_end.earthing = Some(OutputEarthing::OneEnd);
        let candidates = candidates(&[one_end, supply("4 kV", 4_000.0, 30.0, 70)]);
        // 2 400 V: 60 % of 4 000 V, 80 % of 3 000 V.
        let found = circuit("2200 mm; 1800 mm", &candidates, Wish::FewestSupplies);
        let (name, _) = named(found.smaller.as_ref(), &candidates).expect("one");
        assert_eq!(name, "3 kV one end");
        assert!(found.larger.is_none(), "{:?}", found.larger);
    }

    #[test]
    fn a_neighbour_in_its_target_is_said_to_fit() {
        let candidates = candidates(&[
            supply("4 kV", 4_000.0, 30.0, 90),
            supply("4.5 kV", 4_500.0, 30.0, 80),
        ]);
        // 2 400 V: 60 % of 4 000 V, 53 % of 4 500 V.
        let found = circuit("2200 mm; 1800 mm", &candidates, Wish::FewestSupplies);
        let (_, says) = named(found.larger.as_ref(), &candidates).expect("one");
        assert_eq!(
            says,
            "Fits too, but is larger: it would run at 53 % of no-load volts (target 50 to 65 %), \
             2 250 V to ground with no load; costs 10 less."
        );
        let found = circuit("2200 mm; 1800 mm", &candidates, Wish::LowestPrice);
        let (_, says) = named(found.smaller.as_ref(), &candidates).expect("one");
        assert_eq!(
            says,
            "Fits too: it would run at 60 % of no-load volts (target 50 to 65 %), 2 000 V to ground \
             with no load; costs 10 more."
        );
    }

    #[test]
    fn no_supply_is_wished_for_that_is_not_made_or_not_allowed() {
        let candidates = candidates(&[supply("6 kV", 6_000.0, 30.0, 90)]);
        let would_fit = |lengths: &str, rules: &RuleSet| {
            let found = planned(lengths, &candidates, Wish::FewestSupplies, rules);
            found.left_over[0].would_fit.replace('\u{202f}', " ")
        };
        // 7 700 V; 0.70 of 6 000 V are 4 200 V, and each of two parts takes 3 950 V.
        assert_eq!(
            would_fit("15 m", &nec()),
            "A supply of about 11 000 V no-load at 30 mA, or the piece “b” bent as 2 pieces, each \
             with electrodes and a supply of its own."
        );
        assert_eq!(
            would_fit("15 m", &iec_en()),
            "The piece “b” bent as 2 pieces, each with electrodes and a supply of its own."
        );
        // 5 200 V are less than half as much again as 4 200 V.
        assert_eq!(
            would_fit("10 m", &iec_en()),
            "A supply of about 7 500 V no-load at 30 mA, or the piece “b” bent as 2 pieces, each \
             with electrodes and a supply of its own, or a wider tube."
        );
    }
}
