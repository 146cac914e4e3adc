//! Tubes measured here: the figures of a tube type out of readings at the shop's own bench.
//!
//! Readings whose currents lie within 2 % of each other are of one current, and lengths within 2 %
//! are one length. At each current the volts are fitted to the lengths by a line of its own, to be
//! looked at; the figures that are used come from one fit of all readings ([`super::fit`]), with one
//! volts of an electrode pair, one volts per metre at the reference current, and one exponent of the
//! fall with current. With readings of one current, or of currents too near each other to tell it,
//! the exponent stays what it was: typed, or the default model's.
//!
//! The intervals hold 95 times in 100 if the readings scatter about the model alike and on their
//! own. An error of the meter itself is common to all readings and leaves no trace in their scatter:
//! hence [`LEAST_PERCENT`].

use super::finding::{self, Refusal};
use super::fit::{Fit, Point};
use super::line::{Interval, Line, student_t};
use super::{MODEL_MA, MOST_EXPONENT, MOST_PAIR_VOLTS, MOST_VOLTS_PER_M, model};
use crate::book::{Reading, TubeEntry};
use crate::measure::Length;
use crate::rules::Finding;

/// Currents, and lengths, nearer to each other than this factor are one.
const ALIKE: f64 = 1.02;
/// A piece of this length stands for all where it was measured that long.
const TYPICAL_MM: f64 = 1_500.0;
/// No meter at a bench is better than this, percent. No source: the class of fair high-voltage probes.
pub const LEAST_PERCENT: f64 = 1.0;
/// Readings that leave the volts less sure than this tell less than the default model at its worst.
pub(super) const MOST_PERCENT: f64 = 25.0;
/// Volts at one length and current further apart than this, percent of their mean, contradict.
pub(super) const APART_PERCENT: f64 = 10.0;
/// No reading is finer than this share of itself: readings that agree to the last digit do not make
/// the next one odd.
const FINEST: f64 = 1e-4;
/// A reading nearer to the fit than this is never called odd, percent: no bench reads closer.
const NEVER_ODD_PERCENT: f64 = 0.5;

/// What the readings of a tube type say.
#[derive(Debug, Clone, PartialEq)]
pub struct Measured {
    /// The reference current, milliamperes: 25 where currents on both sides of it were read, else the
    /// nearest to it that was.
    pub at_ma: f64,
    /// Running volts per metre at the reference current.
    pub volts_per_m: Interval,
    /// Volts of one electrode pair.
    pub pair_volts: Interval,
    /// Volts go as current to the power of minus this.
    pub exponent: f64,
    /// The exponent as fitted; None where the readings do not tell it and it stays what it was.
    pub exponent_fit: Option<Interval>,
    /// The currents, least first.
    pub currents: Vec<AtCurrent>,
    /// The readings, in the order of the entry.
    pub points: Vec<Placed>,
    /// Standard deviation of a reading about the fit, volts.
    pub residual_volts: f64,
    /// Readings less figures drawn from them.
    pub freedom: usize,
    /// The piece that stands for all.
    pub typical: Length,
    /// How far off the volts of such a piece may be at any current that was read, percent either
    /// way, 95 times in 100; rounded up to a tenth.
    pub percent: f64,
    /// What is to be said of them though they are used.
    pub findings: Vec<Finding>,
    fit: Fit,
}

/// Readings of one current.
#[derive(Debug, Clone, PartialEq)]
pub struct AtCurrent {
    /// Their mean current, milliamperes.
    pub ma: f64,
    /// Which, as places in the entry's list.
    pub readings: Vec<usize>,
    /// Volts against metres at this current alone; None with one length only.
    pub line: Option<Line>,
}

/// A reading and how it lies.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Placed {
    /// Volts the fit gives for it.
    pub fitted: f64,
    /// Volts read over volts fitted.
    pub residual: f64,
    /// Its residual over its standard deviation as the other readings tell it; None where they are
    /// too few to tell.
    pub studentised: Option<f64>,
    /// Whether it does not lie with the others.
    pub odd: bool,
}

impl Measured {
    /// Volts of a piece of a length at a current, milliamperes, by the fit.
    pub fn volts(&self, length: Length, ma: f64) -> f64 {
        self.fit.volts(length.m(), self.at_ma / ma)
    }

    /// Volts of one more piece, with the interval they will lie in.
    pub fn next(&self, length: Length, ma: f64) -> Interval {
        self.fit.next(length.m(), self.at_ma / ma)
    }
}

/// Fits the readings of an entry. None where it has none.
///
/// # Errors
/// Why they are not used, and what would be right, as findings at the tube.
pub fn measured(entry: &TubeEntry) -> Option<Result<Measured, Vec<Finding>>> {
    if entry.readings.is_empty() {
        return None;
    }
    let exponent = entry
        .exponent
        .filter(|n| (0.0..=MOST_EXPONENT).contains(n))
        .unwrap_or_else(|| model(entry.gas, 10.0).exponent);
    let fitted = fit(&entry.readings, exponent);
    Some(match fitted {
        Ok(mut measured) => {
            measured.findings = finding::of_measured(entry, &measured);
            Ok(measured)
        }
        Err(refusals) => Err(finding::not_used(entry, &refusals)),
    })
}

/// The readings by current, least first: sorted by current, a new one begins where a reading is not
/// alike the least of the last.
fn by_current(readings: &[Reading]) -> Vec<AtCurrent> {
    let mut order: Vec<usize> = (0..readings.len()).collect();
    order.sort_by(|&a, &b| readings[a].ma.total_cmp(&readings[b].ma));
    let mut groups: Vec<Vec<usize>> = Vec::new();
    for at in order {
        match groups.last_mut() {
            Some(group) if readings[at].ma <= readings[group[0]].ma * ALIKE => group.push(at),
            _ => groups.push(vec![at]),
        }
    }
    let group = |mut group: Vec<usize>| {
        // The same sums whatever the order they were typed in.
        group.sort_by(|&a, &b| {
            let key = |at: usize| [readings[at].length_mm, readings[at].volts, readings[at].ma];
            key(a)
                .partial_cmp(&key(b))
                .unwrap_or(core::cmp::Ordering::Equal)
        });
        let here: Vec<(f64, f64)> = group
            .iter()
            .map(|&at| (readings[at].length_mm / 1_000.0, readings[at].volts))
            .collect();
        let (least, most) = (here[0].0, here[here.len() - 1].0);
        #[allow(clippy::cast_precision_loss, reason = "a count of readings")]
        let ma = group.iter().map(|&at| readings[at].ma).sum::<f64>() / group.len() as f64;
        AtCurrent {
            ma,
            line: (most > least * ALIKE).then(|| Line::fit(&here)).flatten(),
            readings: group,
        }
    };
    groups.into_iter().map(group).collect()
}

/// Two readings of one length and current whose volts are far apart.
fn contradicting(readings: &[Reading], currents: &[AtCurrent]) -> Vec<Refusal> {
    let mut found = Vec::new();
    for current in currents {
        for (nth, &a) in current.readings.iter().enumerate() {
            for &b in &current.readings[nth + 1..] {
                let (one, other) = (readings[a], readings[b]);
                // Sorted by length: the other is no shorter.
                if other.length_mm > one.length_mm * ALIKE {
                    break;
                }
                let apart = (one.volts - other.volts).abs() / f64::midpoint(one.volts, other.volts);
                if apart * 100.0 > APART_PERCENT {
                    found.push(Refusal::Contradict {
                        readings: [a.min(b), a.max(b)],
                        percent: apart * 100.0,
                    });
                }
            }
        }
    }
    found
}

/// What speaks against the readings before they are fitted.
fn unfit(readings: &[Reading], currents: &[AtCurrent]) -> Vec<Refusal> {
    let wrong = contradicting(readings, currents);
    if !wrong.is_empty() {
        return wrong;
    }
    if currents.iter().all(|current| current.line.is_none()) {
        return vec![Refusal::OneLength];
    }
    let falls = currents.iter().filter_map(|current| {
        let line = current.line.as_ref()?;
        let surely = line.slope_interval().is_none_or(|slope| slope.most() < 0.0);
        (line.slope <= 0.0 && surely).then_some(Refusal::Falls {
            ma: current.ma,
            volts_per_m: line.slope,
        })
    });
    let falls: Vec<Refusal> = falls.collect();
    if !falls.is_empty() {
        return falls;
    }
    let enough = |current: &AtCurrent| current.line.is_some() && current.readings.len() >= 3;
    if !currents.iter().any(enough) {
        return vec![Refusal::TooFew];
    }
    Vec::new()
}

/// The reference current, milliamperes.
fn reference(currents: &[AtCurrent]) -> f64 {
    let tenth = |ma: f64| (ma * 10.0).round() / 10.0;
    match (currents.first(), currents.last()) {
        (Some(least), Some(_)) if least.ma > MODEL_MA => tenth(least.ma),
        (Some(_), Some(most)) if most.ma < MODEL_MA => tenth(most.ma),
        _ => MODEL_MA,
    }
}

fn fit(readings: &[Reading], exponent: f64) -> Result<Measured, Vec<Refusal>> {
    let refused = |refusal: Refusal| Err(vec![refusal]);
    let limits = finding::beyond_limits(readings);
    if !limits.is_empty() {
        return Err(limits);
    }
    let currents = by_current(readings);
    let wrong = unfit(readings, &currents);
    if !wrong.is_empty() {
        return Err(wrong);
    }
    let at_ma = reference(&currents);
    let point = |reading: &Reading| Point {
        metres: reading.length_mm / 1_000.0,
        ratio: at_ma / reading.ma,
        volts: reading.volts,
    };
    // By current and length, so that the order they were typed in changes not even the last digit.
    let ordered: Vec<Point> = currents
        .iter()
        .flat_map(|current| &current.readings)
        .map(|&at| point(&readings[at]))
        .collect();
    let Some(given) = Fit::given(&ordered, exponent) else {
        return refused(Refusal::OneLength);
    };
    let whole = (currents.len() > 1)
        .then(|| Fit::whole(&ordered, guess(&currents).unwrap_or(exponent)))
        .flatten();
    let (fit, exponent_fit) = match whole.as_ref().map(|fit| (fit, fit.exponent())) {
        // Wider than all the exponents there are, it tells nothing.
        Some((_, Some(n))) if n.most() < 0.0 || n.least() > MOST_EXPONENT => {
            return refused(Refusal::Exponent(n));
        }
        Some((fit, Some(n))) if n.half <= MOST_EXPONENT / 2.0 => {
            let held = n.value.clamp(0.0, MOST_EXPONENT);
            let fit = if held == n.value {
                Some(fit.clone())
            } else {
                Fit::held(&ordered, held)
            };
            (fit.unwrap_or(given), Some(n))
        }
        _ => (given, None),
    };
    let (volts_per_m, pair_volts) = (fit.per_metre(), fit.pair());
    if !(volts_per_m.value > 0.0 && volts_per_m.value <= MOST_VOLTS_PER_M) {
        return refused(Refusal::VoltsPerMetre(volts_per_m));
    }
    if !(pair_volts.value > 0.0 && pair_volts.value <= MOST_PAIR_VOLTS) {
        return refused(Refusal::PairVolts(pair_volts));
    }
    let longest = readings.iter().map(|r| r.length_mm).fold(0.0, f64::max);
    let typical = Length::from_mm(longest.min(TYPICAL_MM));
    let share = |current: &AtCurrent| {
        let next = fit.next(typical.m(), at_ma / current.ma);
        next.half / next.value * 100.0
    };
    let percent = currents.iter().map(share).fold(LEAST_PERCENT, f64::max);
    // A hair less, so that what is a tenth but for the last digit is not rounded up another.
    let percent = (percent * 10.0 - 1e-6).ceil() / 10.0;
    if percent.is_nan() || percent > MOST_PERCENT {
        return refused(Refusal::Scatter { percent });
    }
    Ok(Measured {
        at_ma,
        volts_per_m,
        pair_volts,
        exponent: fit.exponent,
        exponent_fit,
        points: readings
            .iter()
            .map(|r| placed(&fit, &point(r), readings.len()))
            .collect(),
        currents,
        residual_volts: fit.residual_deviation(),
        freedom: fit.freedom,
        typical,
        percent,
        findings: Vec::new(),
        fit,
    })
}

/// A first guess of the exponent: the line of ln E against ln I over the currents that have a line.
fn guess(currents: &[AtCurrent]) -> Option<f64> {
    let logs: Vec<(f64, f64)> = currents
        .iter()
        .filter_map(|current| Some((current.ma, current.line.as_ref()?.slope)))
        .filter(|&(_, slope)| slope > 0.0)
        .map(|(ma, slope)| (ma.ln(), slope.ln()))
        .collect();
    Line::fit(&logs).map(|line| -line.slope)
}

/// How a reading lies: odd where its externally studentised residual is beyond what the greatest of
/// so many would reach once in twenty sets (Bonferroni).
fn placed(fit: &Fit, point: &Point, count: usize) -> Placed {
    let residual = fit.residual(point);
    let free = 1.0 - fit.share(point.metres, point.ratio);
    let others = fit.freedom.checked_sub(1).filter(|&freedom| freedom > 0);
    let studentised = others.and_then(|freedom| {
        #[allow(clippy::cast_precision_loss, reason = "a count of readings")]
        let variance = (fit.line.scatter - residual * residual / free) / freedom as f64;
        let deviation = variance.max(0.0).sqrt().max(FINEST * point.volts);
        // A reading the fit must pass through cannot be told apart from it.
        (free > 1e-9).then(|| residual / (deviation * free.sqrt()))
    });
    let odd = others
        .zip(studentised)
        .is_some_and(|(freedom, studentised)| {
            #[allow(clippy::cast_precision_loss, reason = "a count of readings")]
            let rare = 0.05 / (2.0 * count as f64);
            studentised.abs() > student_t(1.0 - rare, freedom)
                && residual.abs() > NEVER_ODD_PERCENT / 100.0 * point.volts
        });
    Placed {
        fitted: point.volts - residual,
        residual,
        studentised,
        odd,
    }
}
