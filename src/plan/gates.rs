//! Whether a string fits a supply, decided without solving for its operating point.
//!
//! On the steady branch of a supply's curve a string has one crossing. It lies at or below running
//! volts V* exactly when the string, at the current I* the supply gives at V*, takes at most V*. So
//! each limit is one comparison at one known current, and sums over prefixes of the pieces give the
//! string's volts there at once. `circuit::assess` says the same at length; a test holds the two
//! together.

use std::f64::consts::SQRT_2;
use std::ops::Range;

use super::split::Fit;
use super::{Task, two_strings};
use crate::book::{ChartLength, Gas, SupplyKind};
use crate::circuit::{
    Basis, CHART_FULL, CONTINUOUS_TO, Curve, Window, chart_share, pair_as_length,
};
use crate::rules::Grade;

/// More pieces than a circuit ever has: on the largest supply that can be entered, 30 kV, so many
/// electrode pairs would have to take under 100 V each. Without a bound a mistyped pair voltage
/// makes circuits of thousands of pieces, and the search takes hours.
const MOST_PIECES: usize = 250;

/// A fitting string.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Fitting {
    /// None or look.
    pub grade: Option<Grade>,
    /// How far from the middle of the window's target, squared; of the worse string.
    pub off_middle: f64,
}

/// A comparison at one current: the string's volts there against `volts`.
#[derive(Debug, Clone)]
struct Gate {
    volts: f64,
    /// current^-n for each exponent of the task.
    powers: Vec<f64>,
}

/// A bound on the string's current.
#[derive(Debug, Clone)]
enum CurrentGate {
    Always,
    Never,
    /// Holds when the string takes at least (for an upper bound) these volts.
    At(Gate),
}

/// The gates of one supply for strings with or without neon.
#[derive(Debug, Clone)]
struct Loads {
    over: Gate,
    over_at_low_mains: Option<Gate>,
    heavy: Option<Gate>,
    light: Gate,
    middle: Gate,
}

#[derive(Debug, Clone)]
struct SupplyGates {
    /// Index 0 without neon, 1 with.
    loads: [Loads; 2],
    /// By tube type of the task: upper bound at nominal and high mains, lower bound at nominal.
    most: Vec<[CurrentGate; 2]>,
    least: Vec<CurrentGate>,
    /// Share of the plate's length chart that the first i pieces use up; none: it has no chart.
    chart: Option<Vec<f64>>,
    /// By tube type of the task, whether the plate has a length chart without it.
    not_in_chart: Vec<bool>,
}

/// All gates of a task.
#[derive(Debug, Clone)]
pub struct Gates {
    /// Volts of electrode pairs of the first i pieces.
    pairs: Vec<f64>,
    /// Column constants of the first i pieces, by exponent.
    columns: Vec<Vec<f64>>,
    /// Neon pieces among the first i.
    neon: Vec<usize>,
    /// Tube type of each piece, as a place in the distinct list.
    tube: Vec<usize>,
    /// By tube type of the distinct list, how many of the first i pieces are of it.
    of_tube: Vec<Vec<usize>>,
    supplies: Vec<SupplyGates>,
}

impl Gates {
    /// Prepares the gates of a task.
    pub fn new(task: &Task) -> Self {
        let mut exponents: Vec<f64> = Vec::new();
        let mut names: Vec<&str> = Vec::new();
        let mut distinct = Vec::new();
        let mut tube = Vec::with_capacity(task.pieces.len());
        for (_, kind) in task.pieces {
            if !exponents.contains(&kind.exponent) {
                exponents.push(kind.exponent);
            }
            let place = names
                .iter()
                .position(|name| *name == kind.name)
                .unwrap_or_else(|| {
                    names.push(&kind.name);
                    distinct.push(*kind);
                    names.len() - 1
                });
            tube.push(place);
        }
        let count = task.pieces.len() + 1;
        let (mut pairs, mut neon) = (vec![0.0; count], vec![0; count]);
        let mut columns = vec![vec![0.0; count]; exponents.len()];
        for (i, (piece, kind)) in task.pieces.iter().enumerate() {
            pairs[i + 1] = pairs[i] + kind.pair_volts;
            neon[i + 1] = neon[i] + usize::from(kind.gas == Gas::Neon);
            for (column, exponent) in columns.iter_mut().zip(&exponents) {
                let more = if kind.exponent == *exponent {
                    kind.column(piece.column(), task.cold)
                } else {
                    0.0
                };
                column[i + 1] = column[i] + more;
            }
        }
        let supplies = task
            .candidates
            .iter()
            .map(|candidate| {
                let rating = &candidate.rating;
                let part = if two_strings(rating) { 0.5 } else { 1.0 };
                let at = |curve: Curve, volts: f64| Gate {
                    volts,
                    powers: {
                        let current = curve.current(volts);
                        exponents.iter().map(|n| current.powf(-n)).collect()
                    },
                };
                let curve = |mains: f64| Curve::of(rating, part, mains);
                let nominal = curve(1.0);
                let loads = [false, true].map(|neon| {
                    let window = Window::of(rating, neon, task.loading);
                    let strike = |share: f64| share * SQRT_2 / task.loading.strike_factor;
                    let basis = |curve: Curve| match (window.basis, curve) {
                        (Basis::RatedLoad, Curve::Electronic { rated_volts, .. }) => rated_volts,
                        _ => curve.no_load().volts(),
                    };
                    // Every limit that stops, as running volts of a curve.
                    let stop = |curve: Curve| {
                        (window.stop_from * basis(curve))
                            .min(curve.edge().0.volts())
                            .min(strike(1.0) * curve.no_load().volts())
                    };
                    let low = curve(1.0 - crate::circuit::MAINS_SPREAD);
                    let heavy = (window.look_above * basis(nominal))
                        .min(strike(crate::circuit::STRIKE_LOOK) * nominal.no_load().volts());
                    let share = |share: f64| {
                        at(
                            nominal,
                            (share * basis(nominal)).min(nominal.edge().0.volts()),
                        )
                    };
                    Loads {
                        over: at(nominal, stop(nominal)),
                        over_at_low_mains: (rating.kind == SupplyKind::Iron)
                            .then(|| at(low, stop(low))),
                        heavy: (heavy < nominal.edge().0.volts()).then(|| at(nominal, heavy)),
                        light: share(window.look_below),
                        middle: share(window.middle()),
                    }
                });
                let bound = |curve: Curve, current: Option<f64>, upper: bool| {
                    let Some(current) = current else {
                        return CurrentGate::Always;
                    };
                    let short = match curve {
                        Curve::Iron { short_ma, .. } | Curve::Electronic { short_ma, .. } => {
                            short_ma
                        }
                    };
                    let (above, below) = if upper {
                        (CurrentGate::Always, CurrentGate::Never)
                    } else {
                        (CurrentGate::Never, CurrentGate::Always)
                    };
                    if current >= short {
                        return above;
                    }
                    match curve.volts_at(current) {
                        Some(volts) => CurrentGate::At(at(curve, volts)),
                        None => below,
                    }
                };
                let high = curve(1.0 + crate::circuit::MAINS_SPREAD);
                SupplyGates {
                    loads,
                    most: distinct
                        .iter()
                        .map(|kind| {
                            let rated = kind.electrode.as_ref().and_then(|kind| kind.rated);
                            let bounds = [kind.most, rated].into_iter().flatten();
                            let most = bounds.map(crate::measure::Milliamps::ma).reduce(f64::min);
                            [bound(nominal, most, true), bound(high, most, true)]
                        })
                        .collect(),
                    least: distinct
                        .iter()
                        .map(|kind| {
                            bound(
                                nominal,
                                kind.least.map(crate::measure::Milliamps::ma),
                                false,
                            )
                        })
                        .collect(),
                    not_in_chart: distinct
                        .iter()
                        .map(|kind| {
                            let named = |line: &ChartLength| line.tube == kind.name;
                            !rating.chart.is_empty() && !rating.chart.iter().any(named)
                        })
                        .collect(),
                    chart: (!rating.chart.is_empty()).then(|| {
                        let used = task.pieces.iter().scan(0.0, |used, (piece, kind)| {
                            let pair = pair_as_length(kind);
                            *used += chart_share(rating, &kind.name, piece.column(), 1, pair)
                                .unwrap_or(0.0);
                            Some(*used)
                        });
                        std::iter::once(0.0).chain(used).collect()
                    }),
                }
            })
            .collect();
        const {
            assert!(
                CONTINUOUS_TO < 0.76,
                "the edge of an iron supply is its last steady point"
            );
        }
        Self {
            pairs,
            columns,
            neon,
            of_tube: (0..distinct.len())
                .map(|kind| {
                    let so_far = tube.iter().scan(0, |count, &of| {
                        *count += usize::from(of == kind);
                        Some(*count)
                    });
                    std::iter::once(0).chain(so_far).collect()
                })
                .collect(),
            tube,
            supplies,
        }
    }

    /// Volts of some pieces at a gate's current.
    fn volts(&self, pieces: &Range<usize>, gate: &Gate) -> f64 {
        let (i, j) = (pieces.start, pieces.end);
        let columns = self.columns.iter().zip(&gate.powers);
        self.pairs[j] - self.pairs[i]
            + columns
                .map(|(column, power)| (column[j] - column[i]) * power)
                .sum::<f64>()
    }

    /// Whether some pieces fit a supply.
    pub fn fit(&self, task: &Task, pieces: Range<usize>, supply: usize) -> Fit<Fitting> {
        if pieces.len() > MOST_PIECES {
            return Fit::TooMuch;
        }
        if !two_strings(&task.candidates[supply].rating) {
            return self.string(&pieces, supply, self.neon(&pieces));
        }
        if pieces.len() < 2 {
            return match self.string(&pieces, supply, self.neon(&pieces)) {
                Fit::TooMuch => Fit::TooMuch,
                _ => Fit::NotYet,
            };
        }
        if let Some((_, fitting)) = self.halves(&pieces, supply) {
            return Fit::Fits(fitting);
        }
        // Both halves together over twice a half's limit: one of them always is.
        let over = &self.supplies[supply].loads[self.neon(&pieces)].over;
        if self.volts(&pieces, over) > 2.0 * over.volts {
            Fit::TooMuch
        } else {
            Fit::NotYet
        }
    }

    /// Where the second string begins on a supply with a mid-point return.
    pub(super) fn second_from(
        &self,
        task: &Task,
        pieces: &Range<usize>,
        supply: usize,
    ) -> Option<usize> {
        if !two_strings(&task.candidates[supply].rating) || pieces.len() < 2 {
            return None;
        }
        self.halves(pieces, supply)
            .map(|(from, _)| from)
            .or_else(|| {
                // Nothing fits: halve the volts as well as may be, to say by how much.
                let over = &self.supplies[supply].loads[0].over;
                (pieces.start + 1..pieces.end).min_by(|&a, &b| {
                    let off = |from: usize| {
                        (self.volts(&(pieces.start..from), over)
                            - self.volts(&(from..pieces.end), over))
                        .abs()
                    };
                    off(a).total_cmp(&off(b))
                })
            })
    }

    /// The best halving: lightest grade, then best balance between the halves.
    ///
    /// Looked for from the balanced halving outwards, the better balanced side first, so that the
    /// first one found of a grade is the best of it.
    fn halves(&self, pieces: &Range<usize>, supply: usize) -> Option<(usize, Fitting)> {
        // One window for both strings, as `circuit::assess` holds them.
        let neon = self.neon(pieces);
        let loads = &self.supplies[supply].loads[neon];
        // Volts of the first string beyond the second's: they only grow with its pieces.
        let beyond = |from: usize| {
            self.volts(&(pieces.start..from), &loads.middle)
                - self.volts(&(from..pieces.end), &loads.middle)
        };
        // A string under the window's foot needs a look; so does one of two that are under it
        // together. A hair of room is for rounding.
        let light = self.volts(pieces, &loads.light) < 2.0 * loads.light.volts * (1.0 - 1e-9);
        let (mut least, mut most) = (pieces.start + 1, pieces.end);
        while least < most {
            let middle = usize::midpoint(least, most);
            if beyond(middle) < 0.0 {
                least = middle + 1;
            } else {
                most = middle;
            }
        }
        let mut left = (pieces.start + 1..least).rev().peekable();
        let mut right = (least..pieces.end).peekable();
        let mut look = None;
        loop {
            let leftwards = match (left.peek(), right.peek()) {
                (Some(&left), Some(&right)) => -beyond(left) <= beyond(right),
                (Some(_), None) => true,
                (None, Some(_)) => false,
                (None, None) => return look,
            };
            let from = if leftwards { left.next() } else { right.next() }?;
            let first = self.string(&(pieces.start..from), supply, neon);
            let second = self.string(&(from..pieces.end), supply, neon);
            if let (Fit::Fits(a), Fit::Fits(b)) = (first, second) {
                let fitting = Fitting {
                    grade: a.grade.max(b.grade),
                    off_middle: a.off_middle.max(b.off_middle),
                };
                if fitting.grade.is_none() {
                    return Some((from, fitting));
                }
                look = look.or(Some((from, fitting)));
                if light {
                    return look;
                }
            }
            // Farther out the string that is too much already only grows.
            if leftwards && second == Fit::TooMuch {
                left = (0..0).rev().peekable();
            } else if !leftwards && first == Fit::TooMuch {
                right = (0..0).peekable();
            }
        }
    }

    /// Whether any of some pieces is neon, as the place of its gates.
    fn neon(&self, pieces: &Range<usize>) -> usize {
        usize::from(self.neon[pieces.end] > self.neon[pieces.start])
    }

    /// One string, held against the window with or without neon.
    fn string(&self, pieces: &Range<usize>, supply: usize, neon: usize) -> Fit<Fitting> {
        let gates = &self.supplies[supply];
        let loads = &gates.loads[neon];
        let full = |chart: &Vec<f64>| chart[pieces.end] - chart[pieces.start] > CHART_FULL;
        if self.volts(pieces, &loads.over) >= loads.over.volts
            || gates.chart.as_ref().is_some_and(full)
        {
            return Fit::TooMuch;
        }
        let mut look = loads
            .over_at_low_mains
            .as_ref()
            .is_some_and(|low| self.volts(pieces, low) >= low.volts)
            || loads
                .heavy
                .as_ref()
                .is_some_and(|heavy| self.volts(pieces, heavy) > heavy.volts)
            || self.volts(pieces, &loads.light) < loads.light.volts;
        // Each tube type of the string is asked, by whichever list is shorter.
        let mut ask = |tube: usize| {
            let [nominal, high] = &gates.most[tube];
            look |= !self.holds(pieces, high)
                || self.breaks(pieces, &gates.least[tube])
                || gates.not_in_chart[tube];
            self.holds(pieces, nominal)
        };
        let fits = if self.of_tube.len() <= pieces.len() {
            let in_it = |counts: &Vec<usize>| counts[pieces.end] > counts[pieces.start];
            let tubes = self.of_tube.iter().enumerate();
            tubes
                .filter(|(_, counts)| in_it(counts))
                .all(|(tube, _)| ask(tube))
        } else {
            self.tube[pieces.clone()].iter().all(|&tube| ask(tube))
        };
        if !fits {
            return Fit::NotYet;
        }
        let share = self.volts(pieces, &loads.middle) / loads.middle.volts - 1.0;
        Fit::Fits(Fitting {
            grade: look.then_some(Grade::Look),
            off_middle: share * share,
        })
    }

    /// Whether an upper bound on the current holds.
    fn holds(&self, pieces: &Range<usize>, gate: &CurrentGate) -> bool {
        match gate {
            CurrentGate::Always => true,
            CurrentGate::Never => false,
            CurrentGate::At(gate) => self.volts(pieces, gate) >= gate.volts,
        }
    }

    /// Whether a lower bound on the current is broken.
    fn breaks(&self, pieces: &Range<usize>, gate: &CurrentGate) -> bool {
        match gate {
            CurrentGate::Always => false,
            CurrentGate::Never => true,
            CurrentGate::At(gate) => self.volts(pieces, gate) > gate.volts,
        }
    }
}

#[cfg(test)]
mod tests {
    use kurbo::Point;
    use proptest::prelude::*;
    use proptest::sample::select;

    use super::super::{Candidate, on};
    use super::*;
    use crate::book::{Loading, OutputEarthing, SupplyEntry, TubeEntry};
    use crate::circuit::Load;
    use crate::job::Wish;
    use crate::measure::{Length, Milliamps};
    use crate::rules::Finding;
    use crate::supply::Rating;
    use crate::takeoff::Piece;
    use crate::tube::{Electrode, TubeType};

    fn piece(length_mm: f64) -> Piece {
        Piece {
            row: 0,
            copy: 0,
            label: String::new(),
            name: String::new(),
            whole: 0,
            group: String::new(),
            tube: String::new(),
            lit: Length::from_mm(length_mm),
            hidden: Length::ZERO,
            tails: Length::ZERO,
            strokes: Vec::new(),
            jumps: Vec::new(),
            electrodes: [Point::ZERO; 2],
            bends: Vec::new(),
        }
    }

    /// Tube types of both gases, with and without bounds on the current.
    fn tubes() -> impl Strategy<Value = Vec<TubeType>> {
        let tube = (
            select(vec![Gas::Neon, Gas::ArgonMercury]),
            8.0..20.0_f64,
            prop::option::of(0.0..0.45_f64),
            prop::option::of(5.0..30.0_f64),
            (
                prop::option::of(20.0..60.0_f64),
                prop::option::weighted(0.3, 15.0..60.0_f64),
            ),
        );
        prop::collection::vec(tube, 1..4).prop_map(|tubes| {
            let tube = |(at, (gas, outer_mm, exponent, least_ma, (most_ma, rated_ma)))| {
                let (least_ma, most_ma): (Option<f64>, Option<f64>) = (least_ma, most_ma);
                let rated_ma: Option<f64> = rated_ma;
                let mut tube = TubeType::read(&TubeEntry {
                    name: format!("{at}"),
                    gas,
                    outer_mm: Some(outer_mm),
                    exponent,
                    least_ma: least_ma.map(|least| least.min(most_ma.unwrap_or(least))),
                    most_ma,
                    ..TubeEntry::default()
                })
                .expect("a whole tube");
                tube.electrode = rated_ma.map(|rated_ma| Electrode {
                    name: format!("electrode of {at}"),
                    rated: Some(Milliamps::from_ma(rated_ma)),
                    least_outer: None,
                    most_outer: None,
                });
                tube
            };
            tubes.into_iter().enumerate().map(tube).collect()
        })
    }

    /// A nameplate whose no-load volts are some times what a string takes.
    #[derive(Debug)]
    struct Plate {
        kind: SupplyKind,
        earthing: OutputEarthing,
        times: f64,
        short_ma: f64,
        rated_share: f64,
        load_share: f64,
        window: Option<(f64, f64)>,
        /// Longest length of the first tube type, and of its pairs.
        chart: Option<(f64, Option<f64>)>,
    }

    impl Plate {
        fn candidate(&self, takes_volts: f64) -> Candidate {
            let no_load = (self.times * takes_volts).clamp(200.0, 30_000.0);
            let electronic = self.kind == SupplyKind::Electronic;
            let entry = SupplyEntry {
                kind: Some(self.kind),
                earthing: Some(self.earthing),
                no_load_volts: Some(no_load),
                short_circuit_ma: Some(self.short_ma),
                rated_ma: electronic.then_some(self.rated_share * self.short_ma),
                rated_load_volts: electronic.then_some(self.load_share * no_load),
                least_load_percent: self.window.map(|(least, _)| least),
                most_load_percent: self.window.map(|(least, more)| least + more),
                chart: self
                    .chart
                    .map(|(longest_mm, pair_mm)| ChartLength {
                        tube: "0".to_owned(),
                        longest_mm,
                        pair_mm,
                    })
                    .into_iter()
                    .collect(),
                ..SupplyEntry::default()
            };
            let rating = Rating::read(&entry).expect("a whole nameplate");
            Candidate {
                entry: 0,
                rating,
                look: false,
            }
        }
    }

    fn plate() -> impl Strategy<Value = Plate> {
        use OutputEarthing::{Isolated, MidPoint, MidPointReturn, OneEnd};
        (
            select(vec![
                SupplyKind::Iron,
                SupplyKind::Iron,
                SupplyKind::Electronic,
            ]),
            select(vec![
                MidPoint,
                MidPointReturn,
                MidPointReturn,
                OneEnd,
                Isolated,
            ]),
            1.1..3.0_f64,
            18.0..60.0_f64,
            (0.4..1.0_f64, 0.4..1.0_f64),
            prop::option::weighted(0.3, (10.0..60.0_f64, 1.0..40.0_f64)),
            prop::option::weighted(
                0.3,
                (500.0..12_000.0_f64, prop::option::of(100.0..600.0_f64)),
            ),
        )
            .prop_map(
                |(kind, earthing, times, short_ma, (rated_share, load_share), window, chart)| {
                    Plate {
                        kind,
                        earthing,
                        times,
                        short_ma,
                        rated_share,
                        load_share,
                        window,
                        chart,
                    }
                },
            )
    }

    /// The default windows and such a shop may set, neon's far from mercury's.
    fn loading() -> impl Strategy<Value = Loading> {
        let own = (
            0.1..0.3_f64,
            0.4..0.6_f64,
            0.5..0.76_f64,
            0.6..0.76_f64,
            1.0..2.5_f64,
        );
        let own = own.prop_map(
            |(look_below, neon, mercury, stop_from, strike_factor)| Loading {
                look_below,
                target_from: 0.3,
                neon_target_to: 0.4,
                neon_look_above: neon,
                mercury_target_to: 0.5,
                mercury_look_above: mercury.min(stop_from),
                stop_from,
                strike_factor,
            },
        );
        prop_oneof![Just(Loading::default()), own]
    }

    /// What the full work-up says: notes count as nothing, the best halving counts.
    fn judged(task: &Task, pieces: &Range<usize>, supply: usize) -> Option<Grade> {
        let rating = &task.candidates[supply].rating;
        let grade = |second_from| {
            let worked = on(task, pieces, second_from, rating);
            Finding::gravest(&worked.findings).filter(|&grade| grade > Grade::Note)
        };
        if two_strings(rating) && pieces.len() > 1 {
            let halvings = (pieces.start + 1..pieces.end).map(|from| grade(Some(from)));
            halvings.min().expect("two pieces can be halved")
        } else {
            grade(None)
        }
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(1_500))]

        #[test]
        fn a_gate_says_what_the_full_work_up_says(
            tubes in tubes(),
            made_of in prop::collection::vec((0..3_usize, 50.0..3_000.0_f64), 1..6),
            plate in plate(),
            loading in loading(),
            cold in any::<bool>(),
        ) {
            let glass: Vec<Piece> = made_of.iter().map(|&(_, length)| piece(length)).collect();
            let kinds = made_of.iter().map(|&(tube, _)| &tubes[tube % tubes.len()]);
            let pieces: Vec<(&Piece, &TubeType)> = glass.iter().zip(kinds).collect();
            let all = Load::of(pieces.iter().copied(), cold);
            let candidates = [plate.candidate(all.volts(0.7 * plate.short_ma))];
            let task = Task {
                pieces: &pieces,
                candidates: &candidates,
                loading: &loading,
                wish: Wish::FewestSupplies,
                cold,
                rules: None,
            };
            let gates = Gates::new(&task);
            let count = pieces.len();
            for from in 0..count {
                let mut never = false;
                for to in from + 1..=count {
                    let judged = judged(&task, &(from..to), 0);
                    let fit = gates.fit(&task, from..to, 0);
                    let gate = match fit {
                        Fit::Fits(fitting) => fitting.grade,
                        Fit::NotYet | Fit::TooMuch => Some(Grade::Stop),
                    };
                    prop_assert_eq!(gate, judged, "pieces {}..{}", from, to);
                    if let Fit::Fits(fitting) = fit {
                        let second_from = gates.second_from(&task, &(from..to), 0);
                        let worked = on(&task, &(from..to), second_from, &candidates[0].rating);
                        let grade = Finding::gravest(&worked.findings);
                        prop_assert_eq!(grade.filter(|&grade| grade > Grade::Note), fitting.grade);
                    }
                    // What is too much stays too much with more.
                    prop_assert!(!never || judged == Some(Grade::Stop), "{}..{} fits after all", from, to);
                    never |= fit == Fit::TooMuch;
                }
            }
        }
    }
}
