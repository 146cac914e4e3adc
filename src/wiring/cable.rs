//! A cable of the book as it is run: what its entry contradicts, and its capacitance for each metre.

use super::capacitance::{coaxial, in_metal_conduit, insulated_over_plane};
use crate::book::CableEntry;
use crate::job::LeadRun;
use crate::measure::Length;

/// What cannot be of a cable's entry, as clauses; empty where it can be worked with.
pub fn contradictions(cable: &CableEntry) -> Vec<String> {
    let mut wrong = Vec::new();
    for (name, value, least, most, unit) in [
        ("its rated volts", cable.rated_volts, 100.0, 100_000.0, "V"),
        ("its capacitance", cable.pf_per_m, 1.0, 10_000.0, "pF/m"),
        ("its conductor", cable.conductor_mm, 0.1, 50.0, "mm"),
        ("its insulation", cable.insulation_mm, 0.2, 100.0, "mm"),
        ("its permittivity", cable.permittivity, 1.0, 20.0, ""),
    ] {
        if let Some(value) = value
            && !(least..=most).contains(&value)
        {
            let unit = if unit.is_empty() {
                String::new()
            } else {
                format!(" {unit}")
            };
            wrong.push(format!(
                "{name} must be {least} to {most}{unit}, but is {value}"
            ));
        }
    }
    if let (Some(conductor), Some(insulation)) = (cable.conductor_mm, cable.insulation_mm)
        && insulation <= conductor
    {
        wrong.push(format!(
            "its insulation, {insulation} mm, is no wider than its conductor, {conductor} mm"
        ));
    }
    wrong
}

/// Picofarads to earth for each metre: from the cable's data, else from its sizes and how it is run.
///
/// # Errors
/// What is missing, as the rest of a sentence.
pub(super) fn pf_per_m(
    cable: &CableEntry,
    run: LeadRun,
    bore: Option<Length>,
    from_earthed: Option<Length>,
) -> Result<f64, &'static str> {
    if let Some(known) = cable.pf_per_m {
        return Ok(known);
    }
    let (Some(conductor), Some(insulation), Some(permittivity)) =
        (cable.conductor_mm, cable.insulation_mm, cable.permittivity)
    else {
        return Err(
            "the shop book gives neither its capacitance nor its conductor, insulation and \
             permittivity",
        );
    };
    let (wire, insulated) = (conductor / 2.0, insulation / 2.0);
    if cable.screened {
        return coaxial(wire, insulated, permittivity).ok_or("its sizes are no cable");
    }
    match run {
        LeadRun::MetalConduit => {
            let bore = bore.ok_or("the bore of its conduit is not given")?;
            in_metal_conduit(wire, insulated, permittivity, bore.mm() / 2.0)
                .ok_or("the conduit is too narrow for it")
        }
        LeadRun::PlasticConduit | LeadRun::FreeAir => {
            let height = from_earthed.ok_or("its distance from earthed parts is not given")?;
            insulated_over_plane(wire, insulated, permittivity, height.mm())
                .ok_or("the earthed part would be inside its insulation")
        }
    }
}
