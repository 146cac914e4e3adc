//! How a sign is wired and fed: leads, jumpers and the branch circuit. Choices as typed; what they
//! come to is worked out elsewhere.

use rust_decimal::Decimal;
use serde::{Deserialize, Serialize};

/// How the high-voltage leads of all circuits are run.
///
/// A lead goes from the supply to the first electrode of its string; a jumper from piece to piece.
/// Where no length is typed, lengths are taken from positions on the drawing, straight, plus slack.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Wiring {
    /// The cable, by its name in the book; empty: not chosen.
    pub cable: String,
    /// What the leads run in.
    pub run: LeadRun,
    /// Inner diameter of the metal conduit, as typed; empty: not known.
    pub conduit_bore: String,
    /// Distance from the middle of the cable to the nearest earthed part, outside metal conduit, as
    /// typed; empty: not known.
    pub from_earthed: String,
    /// How far right of the sign's left edge the supplies stand, as typed; a minus before it: to the
    /// left. Empty: not given.
    pub supply_right: String,
    /// How far above the sign's bottom edge they stand, as typed; a minus before it: below. Empty:
    /// not given.
    pub supply_up: String,
    /// What is added to a length taken from the drawing, percent of it.
    pub slack_percent: f64,
    /// What is added to each such length at its ends, as typed; empty: nothing.
    pub ends: String,
    /// Length of every lead A, as typed; empty: from positions.
    pub lead_a: String,
    /// Length of every lead B, as typed; empty: from positions.
    pub lead_b: String,
    /// Length of every jumper, as typed; empty: from positions.
    pub jumper: String,
    /// Lengths of single circuits, instead of those above.
    pub circuits: Vec<CircuitLeads>,
}

impl Wiring {
    /// Whether nothing was chosen.
    pub fn is_usual(&self) -> bool {
        *self == Self::default()
    }
}

/// The leads of one circuit. A circuit is told by the piece it begins with, since the plan may number
/// circuits otherwise once the sign changes.
#[derive(Debug, Clone, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct CircuitLeads {
    /// The label of the circuit's first piece.
    pub first: String,
    /// Length of its lead A, as typed; empty: as for all circuits.
    pub a: String,
    /// Length of its lead B, as typed; empty: as for all circuits.
    pub b: String,
}

/// What a lead runs in.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum LeadRun {
    /// In earthed metal conduit.
    #[default]
    MetalConduit,
    /// In conduit that is not metal.
    PlasticConduit,
    /// In free air, on insulators or in sleeves.
    FreeAir,
}

/// The mains feed of the supplies.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Feed {
    /// Rated current of the branch circuit's overcurrent device, amperes.
    pub circuit_amps: Option<f64>,
    /// Whether other sign loads than luminous tubes hang on the same branch circuit.
    pub other_loads: bool,
    /// Whether it is the branch circuit of an outlet that the code asks for.
    pub required_outlet: bool,
    /// The conductor, by its name in the table of conductors; empty: not chosen.
    pub conductor: String,
    /// Length of the feed one way, as typed; empty: not given.
    pub length: String,
    /// Hours the sign is lit in a year.
    pub hours_per_year: Option<f64>,
    /// Price of a kilowatt-hour, in the book's currency.
    pub price_per_kwh: Option<Decimal>,
}

impl Feed {
    /// Whether nothing was chosen.
    pub fn is_usual(&self) -> bool {
        *self == Self::default()
    }
}
