//! Capacitance of a wire to earth, picofarads for each metre: closed forms, lengths in any one unit.
//!
//! Where two materials lie in series and their border is no equipotential, the border is taken as one:
//! a conducting sheet laid into a field can only raise its capacitance, so the figure is never too
//! small. Sizes that are no cable (a radius of nothing, an earthed part inside the insulation) give no
//! figure.

/// The electric constant of CODATA 2022, in picofarads for each metre.
pub const ELECTRIC_CONSTANT_PF_PER_M: f64 = 8.854_187_818_8;

const TWO_PI_EPSILON: f64 = core::f64::consts::TAU * ELECTRIC_CONSTANT_PF_PER_M;

/// Only what can be: above 0 and no infinity.
fn sound(pf_per_m: f64) -> Option<f64> {
    (pf_per_m.is_finite() && pf_per_m > 0.0).then_some(pf_per_m)
}

/// A wire of a radius in the middle of an earthed cylinder of an inner radius, filled with a material of
/// one relative permittivity: `2 π ε0 εr / ln(b/a)`.
pub fn coaxial(wire: f64, cylinder: f64, permittivity: f64) -> Option<f64> {
    layered(wire, &[(cylinder, permittivity)])
}

/// The same with several materials, each given by its outer radius and its relative permittivity, from
/// the wire outwards.
pub fn layered(wire: f64, layers: &[(f64, f64)]) -> Option<f64> {
    let (mut inner, mut elastance) = (wire, 0.0);
    for &(outer, permittivity) in layers {
        if !(inner > 0.0 && outer > inner && permittivity >= 1.0) {
            return None;
        }
        elastance += (outer / inner).ln() / permittivity;
        inner = outer;
    }
    sound(TWO_PI_EPSILON / elastance)
}

/// A bare wire of a radius with its axis so high over an earthed plane, in air:
/// `2 π ε0 / arcosh(h/r)`.
pub fn over_plane(wire: f64, height: f64) -> Option<f64> {
    (wire > 0.0 && height > wire)
        .then(|| TWO_PI_EPSILON / (height / wire).acosh())
        .and_then(sound)
}

/// A wire of a radius in an earthed cylinder of an inner radius, its axis so far from the middle, all
/// filled with one material: `2 π ε0 εr / arcosh((R² + r² - d²) / (2 R r))`.
pub fn eccentric(wire: f64, cylinder: f64, offset: f64, permittivity: f64) -> Option<f64> {
    let inside = wire > 0.0 && offset >= 0.0 && wire + offset < cylinder;
    (inside && permittivity >= 1.0)
        .then(|| {
            let ratio =
                (cylinder * cylinder + wire * wire - offset * offset) / (2.0 * cylinder * wire);
            TWO_PI_EPSILON * permittivity / ratio.acosh()
        })
        .and_then(sound)
}

/// An insulated wire over an earthed plane, its axis so high: insulation, then air.
pub fn insulated_over_plane(
    wire: f64,
    insulation: f64,
    permittivity: f64,
    height: f64,
) -> Option<f64> {
    in_series(
        coaxial(wire, insulation, permittivity)?,
        over_plane(insulation, height)?,
    )
}

/// An insulated wire in an earthed metal conduit of an inner radius.
///
/// A cable lies on the wall of its conduit; in the middle it would have less, often half. Lying there it
/// has no closed form, but two that it stays below: as if its insulation were screened all round, and
/// as if the conduit were filled with the insulation. The smaller of the two is taken.
pub fn in_metal_conduit(wire: f64, insulation: f64, permittivity: f64, bore: f64) -> Option<f64> {
    let screened = coaxial(wire, insulation, permittivity)?;
    if insulation >= bore {
        return None;
    }
    let filled = eccentric(wire, bore, bore - insulation, permittivity)?;
    Some(screened.min(filled))
}

/// Two capacitances in series.
fn in_series(one: f64, other: f64) -> Option<f64> {
    sound(1.0 / (1.0 / one + 1.0 / other))
}
