//! The output curve of a supply.
//!
//! # Source
//! The square-wave model of a leakage transformer with an arc load, derived from `X di/dθ = V_m sin θ
//! − U` with half-wave symmetry, and checked against ngspice 39 (`tests/reference/operating_point`).

use std::f64::consts::{FRAC_PI_2, PI, SQRT_2};

use crate::book::SupplyKind;
use crate::measure::{Milliamps, Volts};
use crate::supply::Rating;

/// Running over no-load volts up to which the current has no gaps: `√2 / √(1 + π²/4)`.
pub const CONTINUOUS_TO: f64 = 0.759_474_0;

/// Current of an iron supply, as shares of its short-circuit current.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Waveform {
    /// rms current over rms short-circuit current.
    pub rms: f64,
    /// Mean of the rectified current over rms short-circuit current.
    pub mean: f64,
    /// Whether the current has gaps.
    pub gaps: bool,
}

/// Current of an iron supply at `r` = running volts (square wave) over no-load volts (rms).
///
/// Exact for an ideal reactance: a closed form up to [`CONTINUOUS_TO`], beyond it the waveform with
/// gaps. Nothing flows from r = √2 on. A negative or NaN `r` gives NaN.
pub fn iron(r: f64) -> Waveform {
    if r.is_nan() || r < 0.0 {
        return Waveform {
            rms: f64::NAN,
            mean: f64::NAN,
            gaps: false,
        };
    }
    if r <= CONTINUOUS_TO {
        // c = (π²/8)(1 − 2(5/6 − 8/π²)) = 1.177533
        let eighth = PI * PI / 8.0;
        let c = eighth * (1.0 - 2.0 * (5.0 / 6.0 - 8.0 / (PI * PI)));
        return Waveform {
            rms: (1.0 - c * r * r).max(0.0).sqrt(),
            mean: 2.0 * SQRT_2 / PI * (1.0 - eighth * r * r).max(0.0).sqrt(),
            gaps: false,
        };
    }
    with_gaps(r / SQRT_2)
}

/// Where conduction starts after the no-load volts pass zero, 0 to π/2, and for how long it goes on, at
/// most π, in radians, at `r` as in [`iron`].
pub(super) fn conduction(r: f64) -> (f64, f64) {
    let u = r / SQRT_2;
    if r <= CONTINUOUS_TO {
        return ((FRAC_PI_2 * u).acos(), PI);
    }
    if u >= 1.0 {
        return (FRAC_PI_2, 0.0);
    }
    let start = u.asin();
    let cos_start = start.cos();
    let current = |phi: f64| cos_start - (start + phi).cos() - u * phi;
    // The current rises until sin θ falls to u again, at φ = π − 2 θ₀, then falls through zero before
    // π. There it bends downwards, so Newton's steps from π come down on the zero from above and
    // never beyond it.
    let mut end = PI;
    for _ in 0..64 {
        let step = current(end) / ((start + end).sin() - u);
        // Past the zero by rounding, or a step too small to be one: this is it.
        if step <= 1e-16 * end || !step.is_finite() {
            break;
        }
        end -= step;
    }
    (start, end)
}

/// The waveform with gaps; `u` = running volts over no-load peak.
///
/// Conduction starts at θ₀, `sin θ₀ = u`, and with φ = θ − θ₀ the current is
/// `i = (V_m / X) (cos θ₀ − cos θ − u φ)` until it comes back to zero before θ₀ + π.
fn with_gaps(u: f64) -> Waveform {
    if u >= 1.0 {
        return Waveform {
            rms: 0.0,
            mean: 0.0,
            gaps: true,
        };
    }
    let (start, end) = conduction(u * SQRT_2);
    let cos_start = start.cos();
    // Integrals of i and i² over 0..end, i = a − cos θ − u φ with a = cos θ₀, written out.
    let theta = start + end;
    let (sin_s, cos_s, sin_e, cos_e) = (start.sin(), cos_start, theta.sin(), theta.cos());
    let a = cos_start;
    let area = a * end - (sin_e - sin_s) - u * end * end / 2.0;
    let cos_squared = end / 2.0 + (sin_e * cos_e - sin_s * cos_s) / 2.0;
    // ∫ φ cos θ dφ = φ sin θ + cos θ
    let phi_cos = end * sin_e + cos_e - cos_s;
    let square = a * a * end - 2.0 * a * (sin_e - sin_s) - a * u * end * end
        + cos_squared
        + 2.0 * u * phi_cos
        + u * u * end.powi(3) / 3.0;
    // i is in units of V_m / X = √2 I_sc, and the half wave lasts π.
    Waveform {
        rms: SQRT_2 * (square.max(0.0) / PI).sqrt(),
        mean: SQRT_2 * area.max(0.0) / PI,
        gaps: true,
    }
}

/// The output curve of a rating, or of one half of it, at some input volts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Curve {
    /// No-load volts behind a reactance.
    Iron {
        /// No-load volts, rms.
        no_load: f64,
        /// Short-circuit current in milliamperes, rms.
        short_ma: f64,
    },
    /// Straight droop, then shut-off.
    Electronic {
        /// No-load volts, rms.
        no_load: f64,
        /// Current at no volts, milliamperes.
        short_ma: f64,
        /// Current at the rated load volts, milliamperes.
        rated_ma: f64,
        /// Output volts at the rated current.
        rated_volts: f64,
    },
}

impl Curve {
    /// The curve of a rating for one string. With a mid-point return each of the two strings has
    /// half the volts. `mains` scales the input: iron follows it, electronic supplies are taken to
    /// hold their output.
    pub fn of(rating: &Rating, halves: f64, mains: f64) -> Self {
        let (no_load, short_ma) = (rating.no_load.volts() * halves, rating.short_circuit.ma());
        match (rating.kind, rating.rated_load) {
            (SupplyKind::Electronic, Some(rated_volts)) => Self::Electronic {
                no_load,
                short_ma,
                rated_ma: rating.rated.ma(),
                rated_volts: rated_volts.volts() * halves,
            },
            _ => Self::Iron {
                no_load: no_load * mains,
                short_ma: short_ma * mains,
            },
        }
    }

    /// No-load volts.
    pub const fn no_load(&self) -> Volts {
        match self {
            Self::Iron { no_load, .. } | Self::Electronic { no_load, .. } => {
                Volts::from_volts(*no_load)
            }
        }
    }

    /// The greatest running volts the supply works at steadily, and the current there.
    pub fn edge(&self) -> (Volts, Milliamps) {
        match *self {
            Self::Iron { no_load, short_ma } => (
                Volts::from_volts(CONTINUOUS_TO * no_load),
                Milliamps::from_ma(iron(CONTINUOUS_TO).rms * short_ma),
            ),
            Self::Electronic {
                rated_ma,
                rated_volts,
                ..
            } => (Volts::from_volts(rated_volts), Milliamps::from_ma(rated_ma)),
        }
    }

    /// The current at some running volts, inside the edge.
    pub fn current(&self, volts: f64) -> f64 {
        match *self {
            Self::Iron { no_load, short_ma } => iron(volts / no_load).rms * short_ma,
            Self::Electronic {
                short_ma,
                rated_ma,
                rated_volts,
                ..
            } => short_ma - (short_ma - rated_ma) * volts / rated_volts,
        }
    }

    /// The running volts at a current between that of the edge and the short-circuit current; the
    /// inverse of [`Self::current`]. None outside, and for a supply that holds its current.
    pub fn volts_at(&self, current_ma: f64) -> Option<f64> {
        let (_, edge) = self.edge();
        match *self {
            Self::Iron { no_load, short_ma } => {
                if !(edge.ma() <= current_ma && current_ma <= short_ma) {
                    return None;
                }
                let eighth = PI * PI / 8.0;
                let c = eighth * (1.0 - 2.0 * (5.0 / 6.0 - 8.0 / (PI * PI)));
                let share = current_ma / short_ma;
                Some(no_load * ((1.0 - share * share) / c).max(0.0).sqrt())
            }
            Self::Electronic {
                short_ma,
                rated_ma,
                rated_volts,
                ..
            } => (rated_ma <= current_ma && current_ma <= short_ma && rated_ma < short_ma)
                .then(|| rated_volts * (short_ma - current_ma) / (short_ma - rated_ma)),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_limit_of_gapless_current_is_where_both_forms_meet() {
        let limit = SQRT_2 / (1.0 + FRAC_PI_2 * FRAC_PI_2).sqrt();
        assert!(
            (CONTINUOUS_TO - limit).abs() < 1e-6,
            "{CONTINUOUS_TO} against {limit}"
        );
        let (below, above) = (iron(limit - 1e-6), iron(limit + 1e-6));
        assert!(
            (below.rms - above.rms).abs() < 1e-5,
            "rms {below:?} {above:?}"
        );
        assert!(
            (below.mean - above.mean).abs() < 1e-5,
            "mean {below:?} {above:?}"
        );
    }

    #[test]
    fn volts_at_undoes_current() {
        let iron = Curve::Iron {
            no_load: 9_000.0,
            short_ma: 30.0,
        };
        let droop = Curve::Electronic {
            no_load: 8_000.0,
            short_ma: 32.0,
            rated_ma: 28.0,
            rated_volts: 6_000.0,
        };
        for curve in [iron, droop] {
            for volts in [10.0, 2_000.0, 4_500.0, 5_900.0] {
                let back = curve.volts_at(curve.current(volts));
                assert!(
                    back.is_some_and(|back| (back - volts).abs() < 1e-6),
                    "{volts} {back:?}"
                );
            }
        }
    }
}
