//! The current in the earthed mid-point of an output when the string has a fault to earth, and the
//! stretch of the string where it is too small to be sensed.
//!
//! A fault to earth parts the string in two loops: the half winding of lead A with the tubes between
//! lead A and the fault, and that of lead B with the rest. The mid-point carries the difference of the
//! two currents, which are out of phase, so waveforms are subtracted and not rms values.
//!
//! # Source
//! The square-wave model of `curve.rs`, each half winding with half the no-load volts behind half the
//! reactance (independent leakage of the halves is an assumption). Checked against ngspice 39
//! (`tests/reference/midpoint_fault`, `tests/spice.rs`). A fault is taken to have no resistance and the
//! tubes to keep the volts they ran at.

use std::f64::consts::{PI, SQRT_2};

use super::curve::{Curve, conduction};
use crate::book::{OutputEarthing, SupplyKind};
use crate::measure::{Milliamps, Volts};
use crate::supply::Rating;

/// One half's current over a half period of the supply, in units of the peak short-circuit current.
#[derive(Debug, Clone, Copy)]
struct Wave {
    /// Running over no-load peak volts.
    u: f64,
    /// Where conduction starts, 0 to π/2.
    start: f64,
    /// For how long it goes on, at most π.
    long: f64,
}

impl Wave {
    /// The wave at `r` = running over no-load volts of the half.
    fn of(r: f64) -> Self {
        let (start, long) = conduction(r);
        Self {
            u: r / SQRT_2,
            start,
            long,
        }
    }

    /// The current between θ = `from` and `to`, neither before 0 nor after π and no change of state
    /// between, as p + q cos θ + g θ.
    fn between(&self, from: f64, to: f64) -> [f64; 3] {
        let middle = f64::midpoint(from, to);
        let a = self.start.cos();
        if middle >= self.start && middle < self.start + self.long {
            [a + self.u * self.start, -1.0, -self.u]
        } else if middle + PI < self.start + self.long {
            // The end of the half wave before, which is the other way round.
            [-a + self.u * (PI - self.start), -1.0, self.u]
        } else {
            [0.0; 3]
        }
    }
}

/// Nodes and weights of Gauss-Legendre's rule of ten points, the positive half (Abramowitz & Stegun,
/// table 25.4). On waves of at most twice the mains frequency over half a period it is exact to
/// rounding.
const GAUSS: [(f64, f64); 5] = [
    (0.148_874_338_981_631_2, 0.295_524_224_714_752_9),
    (0.433_395_394_129_247_2, 0.269_266_719_309_996_4),
    (0.679_409_568_299_024_4, 0.219_086_362_515_982_04),
    (0.865_063_366_688_984_5, 0.149_451_349_150_580_6),
    (0.973_906_528_517_171_7, 0.066_671_344_308_688_14),
];

/// rms of the difference of the currents of two half windings, over the rms short-circuit current.
///
/// `r_a` and `r_b` are running over no-load volts of each half; from √2 on a half carries nothing.
/// Negative or NaN gives NaN.
pub fn difference(r_a: f64, r_b: f64) -> f64 {
    if r_a.is_nan() || r_b.is_nan() || r_a < 0.0 || r_b < 0.0 {
        return f64::NAN;
    }
    let (a, b) = (Wave::of(r_a), Wave::of(r_b));
    let mut edges = [0.0, PI, PI, PI, PI, PI];
    for (at, wave) in [a, b].into_iter().enumerate() {
        edges[1 + 2 * at] = wave.start;
        let end = wave.start + wave.long;
        // A half wave that goes on beyond π is the end of the one before, seen from 0.
        edges[2 + 2 * at] = if end >= PI { end - PI } else { end };
    }
    edges.sort_by(f64::total_cmp);
    let mut square = 0.0;
    for pair in edges.windows(2) {
        let (from, to) = (pair[0], pair[1]);
        let half = (to - from) / 2.0;
        if half <= 0.0 {
            continue;
        }
        let ([pa, qa, ga], [pb, qb, gb]) = (a.between(from, to), b.between(from, to));
        let at = |theta: f64| (pa - pb) + (qa - qb) * theta.cos() + (ga - gb) * theta;
        let middle = f64::midpoint(from, to);
        square += half
            * GAUSS
                .iter()
                .map(|&(node, weight)| {
                    weight * (at(middle - half * node).powi(2) + at(middle + half * node).powi(2))
                })
                .sum::<f64>();
    }
    // Units of the peak short-circuit current, which is √2 of its rms.
    SQRT_2 * (square / PI).sqrt()
}

/// What the mid-point of an output would carry for a fault, in milliamperes.
#[derive(Debug, Clone, Copy)]
pub struct MidPoint {
    kind: SupplyKind,
    /// No-load volts of a half.
    no_load: f64,
    short_ma: f64,
    /// Rated current and rated load volts of a half; electronic supplies.
    rated: Option<(f64, f64)>,
}

impl MidPoint {
    /// That of a rating; `mains` scales the input. None where no mid-point is earthed.
    pub fn of(rating: &Rating, mains: f64) -> Option<Self> {
        if !matches!(
            rating.earthing,
            OutputEarthing::MidPoint | OutputEarthing::MidPointReturn
        ) {
            return None;
        }
        Some(match Curve::of(rating, 0.5, mains) {
            Curve::Iron { no_load, short_ma } => Self {
                kind: SupplyKind::Iron,
                no_load,
                short_ma,
                rated: None,
            },
            Curve::Electronic {
                no_load,
                short_ma,
                rated_ma,
                rated_volts,
            } => Self {
                kind: SupplyKind::Electronic,
                no_load,
                short_ma,
                rated: Some((rated_ma, rated_volts)),
            },
        })
    }

    /// The mid-point's current while half A works into `a` and half B into `b` running volts, rms.
    pub fn current(&self, a: Volts, b: Volts) -> Milliamps {
        Milliamps::from_ma(match self.rated {
            None => difference(a.volts() / self.no_load, b.volts() / self.no_load) * self.short_ma,
            Some((rated_ma, rated_volts)) => {
                // Each half on its droop line, carried on beyond the rated load: what a half does there
                // is not known, and this is the smallest difference, so nothing is called seen that
                // may not be.
                let half = |volts: f64| {
                    (self.short_ma - (self.short_ma - rated_ma) * volts / rated_volts).max(0.0)
                };
                (half(a.volts()) - half(b.volts())).abs()
            }
        })
    }

    /// Whether the figures are an estimate only: electronic supplies, taken as in phase.
    pub fn estimate(&self) -> bool {
        self.kind == SupplyKind::Electronic
    }
}

/// What a stretch is worked out of: how the strings of a supply run.
#[derive(Debug, Clone, Copy)]
pub struct Strings {
    /// Running volts between lead A and the mid-point (with a return), or of the whole string.
    pub first: Volts,
    /// Running volts between the mid-point and lead B, with a mid-point return.
    pub second: Option<Volts>,
}

impl Strings {
    /// All volts, from lead A to lead B.
    pub fn total(&self) -> Volts {
        self.second.map_or(self.first, |second| self.first + second)
    }

    /// The mid-point's current for a fault at a share of all volts from lead A, 0 to 1.
    pub fn at(&self, mid_point: &MidPoint, share: f64) -> Milliamps {
        let from_a = self.total() * share;
        match self.second {
            None => mid_point.current(from_a, self.first - from_a),
            // The string that has no fault runs on as it did; of the other only the part between
            // its lead and the fault still carries current.
            Some(second) if from_a <= self.first => mid_point.current(from_a, second),
            Some(_) => mid_point.current(self.first, self.total() - from_a),
        }
    }

    /// The mid-point's current at `count` + 1 places, evenly from lead A to lead B.
    pub fn along(&self, mid_point: &MidPoint, count: u32) -> Vec<(f64, Milliamps)> {
        let share = |at: u32| f64::from(at) / f64::from(count);
        let mut found: Vec<(f64, Milliamps)> = Vec::new();
        for at in 0..=count {
            // Of one string the far half mirrors the near one.
            let mirrored = self
                .second
                .is_none()
                .then(|| found.get((count - at) as usize));
            let here = match mirrored.flatten() {
                Some(&(_, current)) => current,
                None => self.at(mid_point, share(at)),
            };
            found.push((share(at), here));
        }
        found
    }

    /// The stretch, as shares of all volts from lead A, where a fault gives the mid-point less than
    /// `trip`; None where it gives so much everywhere.
    ///
    /// The mid-point's current falls from lead A to the place where both halves carry alike, and rises
    /// from there to lead B.
    pub fn unseen(&self, mid_point: &MidPoint, trip: Milliamps) -> Option<(f64, f64)> {
        let least = self.least();
        if self.beyond(mid_point, trip, least) >= 0.0 {
            return None;
        }
        let from = self.edge(mid_point, trip, least, 0.0);
        let to = match self.second {
            None => 1.0 - from,
            Some(_) => self.edge(mid_point, trip, least, 1.0),
        };
        Some((from, to))
    }

    /// How much more than `trip` the mid-point carries, milliamperes. What is no number is not seen.
    fn beyond(&self, mid_point: &MidPoint, trip: Milliamps, share: f64) -> f64 {
        let beyond = (self.at(mid_point, share) - trip).ma();
        if beyond.is_nan() {
            f64::NEG_INFINITY
        } else {
            beyond
        }
    }

    /// Where the stretch around `least` ends on the side of `end`, a hair wide of it rather than short:
    /// false position with the halving of the end that stays.
    fn edge(&self, mid_point: &MidPoint, trip: Milliamps, least: f64, end: f64) -> f64 {
        let beyond = |share: f64| self.beyond(mid_point, trip, share);
        let (mut seen, mut unseen) = (end, least);
        let (mut above, mut below) = (beyond(seen), beyond(unseen));
        if above < 0.0 {
            return end;
        }
        let mut stayed = 0_i8;
        for _ in 0..100 {
            if (seen - unseen).abs() <= 1e-9 {
                break;
            }
            let mut at = unseen + (seen - unseen) * below / (below - above);
            if !(seen.min(unseen) < at && at < seen.max(unseen)) {
                at = f64::midpoint(seen, unseen);
            }
            let here = beyond(at);
            if here >= 0.0 {
                (seen, above) = (at, here);
                if here <= 1e-9 * trip.ma() {
                    break;
                }
                if stayed == 1 {
                    below /= 2.0;
                }
                stayed = 1;
            } else {
                (unseen, below) = (at, here);
                if stayed == -1 {
                    above /= 2.0;
                }
                stayed = -1;
            }
        }
        seen
    }

    /// Where the mid-point's current is least: in the middle of one string; with a return, where the
    /// part left of the string with the fault takes as many volts as the other string.
    fn least(&self) -> f64 {
        match self.second {
            Some(second) if self.total().volts() > 0.0 => second / self.total(),
            _ => 0.5,
        }
    }
}
