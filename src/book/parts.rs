//! What the shop wires and measures with: electrodes, cables, bench readings, plates' length charts.

use serde::{Deserialize, Serialize};

/// An electrode type.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct ElectrodeEntry {
    /// The shop's name for it.
    pub name: String,
    /// Greatest steady current it is rated for.
    pub rated_ma: Option<f64>,
    /// Least outer diameter of glass it fits.
    pub least_outer_mm: Option<f64>,
    /// Greatest outer diameter of glass it fits.
    pub most_outer_mm: Option<f64>,
    /// Where the figures came from, in the shop's words.
    pub source: String,
}

/// A high-voltage cable. Its capacitance is either given, or worked out from its sizes and how it is
/// run.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct CableEntry {
    /// The shop's name for it.
    pub name: String,
    /// Volts its insulation is rated for.
    pub rated_volts: Option<f64>,
    /// Capacitance to earth as it is run, picofarads per metre, where the cable's data give it.
    pub pf_per_m: Option<f64>,
    /// Diameter of the conductor.
    pub conductor_mm: Option<f64>,
    /// Outer diameter of the insulation.
    pub insulation_mm: Option<f64>,
    /// Relative permittivity of the insulation.
    pub permittivity: Option<f64>,
    /// Whether it has an earthed screen on its insulation.
    pub screened: bool,
    /// Where the figures came from, in the shop's words.
    pub source: String,
}

/// One reading at the bench: a tube of a lit length, between electrode shells, at a current.
#[derive(Debug, Clone, Copy, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Reading {
    /// Length of the gas column, electrode shell to electrode shell.
    pub length_mm: f64,
    /// Current, rms.
    pub ma: f64,
    /// Running volts across the tube, rms.
    pub volts: f64,
}

/// The longest length of a tube type that a supply's plate or leaflet allows, typed in by the shop.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct ChartLength {
    /// Tube type, by its name in the book.
    pub tube: String,
    /// Longest length, all pieces together.
    pub longest_mm: f64,
    /// Length that each pair of electrodes uses up; None: worked out from the tube type's volts.
    pub pair_mm: Option<f64>,
}
