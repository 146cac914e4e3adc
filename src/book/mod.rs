//! The shop book: supplies, tube types, rule sets, rates and allowances, kept by the user.
//!
//! Entries are as typed, possibly incomplete or contradictory; the rooms [`crate::supply`] and
//! [`crate::tube`] check them. A figure that is not known is absent, never zero.

mod cells;
mod parts;
mod sheet;
mod starter;
mod text;

use std::ops::RangeInclusive;

use rust_decimal::Decimal;
use serde::{Deserialize, Serialize};

use crate::rules::RuleSet;

pub use parts::{CableEntry, ChartLength, ElectrodeEntry, Reading};
pub use sheet::{Sheet, read_supplies, read_tubes, write_supplies, write_tubes};
pub use starter::starter;
pub use text::text_of;
pub(crate) use text::{json_trouble, without_mark};

/// What the `tubewright` field of a book file says.
pub const KIND: &str = "book";
/// The newest version of the book file that this program knows. A book is written in the oldest
/// version that can hold it: 2 brought the limits of bending; 3 brought electrodes, cables, bench
/// readings, length charts and the rules of leads and feeds.
pub const VERSION: u32 = 3;
/// The oldest version that is read.
const OLDEST: u32 = 1;

/// The shop.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Book {
    /// Always [`KIND`]; tells a book file from a job file.
    pub tubewright: String,
    /// File version, [`VERSION`] when written by this program.
    pub version: u32,
    /// Name of the shop or of the book.
    pub name: String,
    /// Anything worth keeping; an invented book says so here.
    #[serde(default)]
    pub note: String,
    /// Supplies the shop can use.
    #[serde(default)]
    pub supplies: Vec<SupplyEntry>,
    /// Tube types the shop bends.
    #[serde(default)]
    pub tubes: Vec<TubeEntry>,
    /// Electrodes the shop uses.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub electrodes: Vec<ElectrodeEntry>,
    /// High-voltage cables the shop uses.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub cables: Vec<CableEntry>,
    /// Rule sets a job can be held against.
    #[serde(default)]
    pub rule_sets: Vec<RuleSet>,
    /// Prices.
    #[serde(default)]
    pub rates: Rates,
    /// Glass beyond what is lit.
    #[serde(default)]
    pub allowances: Allowances,
    /// When a circuit is called well loaded.
    #[serde(default)]
    pub loading: Loading,
    /// What the shop bends and how near its tubes may come.
    #[serde(default, skip_serializing_if = "Bending::is_usual")]
    pub bending: Bending,
}

impl Default for Book {
    fn default() -> Self {
        Self {
            tubewright: KIND.to_owned(),
            version: VERSION,
            name: "Shop book".to_owned(),
            note: String::new(),
            supplies: Vec::new(),
            tubes: Vec::new(),
            electrodes: Vec::new(),
            cables: Vec::new(),
            rule_sets: Vec::new(),
            rates: Rates::default(),
            allowances: Allowances::default(),
            loading: Loading::default(),
            bending: Bending::default(),
        }
    }
}

/// How a supply limits its current.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum SupplyKind {
    /// Iron leakage transformer.
    Iron,
    /// Electronic (high-frequency) supply.
    Electronic,
}

/// What of the output is joined to earth.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum OutputEarthing {
    /// The mid-point of the output is earthed; one string between the two leads.
    MidPoint,
    /// The mid-point is earthed and brought out; two strings, each from a lead to the mid-point.
    MidPointReturn,
    /// One end of the output is earthed.
    OneEnd,
    /// Nothing is earthed.
    Isolated,
}

/// How wet a place is, driest first.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Default, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Dampness {
    /// Indoors, dry.
    #[default]
    Dry,
    /// Sheltered, at times moist.
    Damp,
    /// Rain reaches it.
    Wet,
}

/// A supply as its nameplate says, in the shop's own words.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct SupplyEntry {
    /// The shop's name for it.
    pub name: String,
    /// Iron or electronic; None: not known, and the supply cannot be worked with.
    pub kind: Option<SupplyKind>,
    /// Mains volts it is made for.
    pub input_volts: Option<f64>,
    /// Mains frequency it is made for.
    pub input_hertz: Option<f64>,
    /// Rated input in volt-amperes.
    pub input_va: Option<f64>,
    /// No-load output volts, rms, lead to lead.
    pub no_load_volts: Option<f64>,
    /// Short-circuit output current.
    pub short_circuit_ma: Option<f64>,
    /// Rated output current, where the plate gives one beside the short-circuit current.
    pub rated_ma: Option<f64>,
    /// Electronic supplies: output volts at the rated current.
    pub rated_load_volts: Option<f64>,
    /// What of the output is earthed; None: not known, and the supply cannot be worked with.
    pub earthing: Option<OutputEarthing>,
    /// Whether it switches off on an earth fault of the output.
    pub earth_fault_protection: bool,
    /// Trip current of that protection.
    pub trip_ma: Option<f64>,
    /// Trip time of that protection.
    pub trip_seconds: Option<f64>,
    /// Whether it switches off when the string is open.
    pub open_circuit_protection: bool,
    /// Output frequency; an iron supply's is that of the mains.
    pub output_hertz: Option<f64>,
    /// The plate's least running volts, as a share of no-load volts in percent.
    pub least_load_percent: Option<f64>,
    /// The plate's greatest running volts, as a share of no-load volts in percent.
    pub most_load_percent: Option<f64>,
    /// The wettest place it is made for.
    pub place: Dampness,
    /// Price of one, in the book's currency.
    pub price: Option<Decimal>,
    /// How many are on the shelf.
    pub stock: Option<u32>,
    /// Anything else.
    pub note: String,
    /// Longest lead, supply to first electrode, that the plate allows.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub longest_lead_mm: Option<f64>,
    /// Longest lengths of tube types that the plate or its leaflet allows.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub chart: Vec<ChartLength>,
}

/// The gas, as far as its electrical behaviour goes.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Gas {
    /// Neon, in clear or coloured glass.
    #[default]
    Neon,
    /// Argon, or argon and neon, with mercury; coated or clear glass.
    ArgonMercury,
}

/// A tube type. Electrical figures left out are taken from the default model and said to be.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct TubeEntry {
    /// The shop's name for it.
    pub name: String,
    /// Its gas.
    pub gas: Gas,
    /// Outer diameter of the glass.
    pub outer_mm: Option<f64>,
    /// Wall of the glass; 1 mm when not given.
    pub wall_mm: Option<f64>,
    /// Colour to draw it in, `#rrggbb`.
    pub colour: String,
    /// Least current it runs steadily at.
    pub least_ma: Option<f64>,
    /// Greatest current its glass and electrodes stand.
    pub most_ma: Option<f64>,
    /// Running volts per metre at the reference current.
    pub volts_per_m: Option<f64>,
    /// The reference current; 25 mA when not given.
    pub at_ma: Option<f64>,
    /// How volts fall with current: volts go as current to the power of minus this.
    pub exponent: Option<f64>,
    /// Volts lost at one pair of electrodes.
    pub pair_volts: Option<f64>,
    /// Factor on volts per metre below 0 °C.
    pub cold_factor: Option<f64>,
    /// Price of a metre of this glass, in the book's currency.
    pub price_per_m: Option<Decimal>,
    /// Where the figures came from, in the shop's words.
    pub source: String,
    /// Its electrodes, by their name in the book; empty: not given.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub electrode: String,
    /// Readings of such tubes at the shop's own bench; with enough of them, the volts are fitted to
    /// them.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub readings: Vec<Reading>,
    /// When they were taken, as typed.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub measured_on: String,
}

/// Prices and minutes for the first sum.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Rates {
    /// Currency, as written before a figure.
    pub currency: String,
    /// One electrode.
    pub electrode: Decimal,
    /// An hour of labour.
    pub labour_hour: Decimal,
    /// Minutes of bending and processing for each piece.
    pub minutes_per_piece: Decimal,
    /// Minutes of bending for each metre of glass.
    pub minutes_per_m: Decimal,
    /// Minutes of wiring for each circuit.
    pub minutes_per_circuit: Decimal,
    /// Markup on the whole, percent.
    pub markup_percent: Decimal,
    /// Tax on top, percent.
    pub tax_percent: Decimal,
}

impl Default for Rates {
    fn default() -> Self {
        Self {
            currency: "€".to_owned(),
            electrode: Decimal::ZERO,
            labour_hour: Decimal::ZERO,
            minutes_per_piece: Decimal::ZERO,
            minutes_per_m: Decimal::ZERO,
            minutes_per_circuit: Decimal::ZERO,
            markup_percent: Decimal::ZERO,
            tax_percent: Decimal::ZERO,
        }
    }
}

/// Glass beyond what is lit. Defaults are common practice, no source.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Allowances {
    /// Glass for each electrode's tail.
    pub tail_mm: f64,
    /// Glass broken or cut off, percent of the glass bent.
    pub waste_percent: f64,
    /// Longest piece of glass, lit and hidden parts, that the shop bends in one.
    pub longest_piece_mm: f64,
    /// Glass added to each painted-out jump between strokes, for stepping back behind the sign and
    /// forward again.
    #[serde(skip_serializing_if = "is_zero")]
    pub crossover_mm: f64,
}

#[allow(clippy::trivially_copy_pass_by_ref, reason = "asked so by serde")]
fn is_zero(value: &f64) -> bool {
    *value == 0.0
}

impl Default for Allowances {
    fn default() -> Self {
        Self {
            tail_mm: 150.0,
            waste_percent: 10.0,
            longest_piece_mm: 2_400.0,
            crossover_mm: 0.0,
        }
    }
}

/// What the shop bends and how near its tubes may come, as multiples of the tube's outer diameter
/// where they say so. None: not checked. Defaults are common practice without a source, but for the
/// spacing: a column on pattern-making (Signs of the Times) sets parallel tubes one diameter apart,
/// which is two from centre to centre.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Bending {
    /// Tightest radius of a bend, to the middle of the tube, in outer diameters.
    pub least_radius_diameters: Option<f64>,
    /// Least height of a letter, in outer diameters.
    pub least_letter_diameters: Option<f64>,
    /// Least distance of two tubes, from centre to centre, in outer diameters.
    pub least_spacing_diameters: Option<f64>,
    /// Least distance of electrodes of two pieces.
    pub least_electrode_spacing_mm: Option<f64>,
}

impl Bending {
    fn is_usual(&self) -> bool {
        *self == Self::default()
    }
}

impl Default for Bending {
    fn default() -> Self {
        Self {
            least_radius_diameters: Some(1.5),
            least_letter_diameters: Some(8.0),
            least_spacing_diameters: Some(2.0),
            least_electrode_spacing_mm: None,
        }
    }
}

/// The default loading windows, as shares of no-load volts. From the square-wave model and the
/// reignition of the gases; a rating's own plate window replaces them.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Loading {
    /// Below this the string is underloaded: look.
    pub look_below: f64,
    /// Start of the target.
    pub target_from: f64,
    /// End of the target for strings with neon.
    pub neon_target_to: f64,
    /// Above this a string with neon: look.
    pub neon_look_above: f64,
    /// End of the target for mercury strings.
    pub mercury_target_to: f64,
    /// Above this a mercury string: look.
    pub mercury_look_above: f64,
    /// From here on: stop. Beyond 0.7595 the current has gaps.
    pub stop_from: f64,
    /// Volts needed to strike, as a multiple of running volts.
    pub strike_factor: f64,
}

impl Default for Loading {
    fn default() -> Self {
        Self {
            look_below: 0.35,
            target_from: 0.50,
            neon_target_to: 0.65,
            neon_look_above: 0.70,
            mercury_target_to: 0.70,
            mercury_look_above: 0.75,
            stop_from: 0.76,
            strike_factor: 1.5,
        }
    }
}

/// Reads a book file.
///
/// # Errors
/// A sentence saying what is wrong and where, for text that is not a book of a known version.
pub fn read(text: &str) -> Result<Book, String> {
    let text = without_mark(text);
    check_kind(text, KIND, OLDEST..=VERSION)?;
    let mut book: Book = serde_json::from_str(text)
        .map_err(|error| format!("This book file cannot be read: {}.", json_trouble(&error)))?;
    book.version = VERSION;
    Ok(book)
}

/// The book as the text of a file, of the oldest version that can hold it.
pub fn write(book: &Book) -> String {
    let book = &Book {
        version: oldest(book),
        ..book.clone()
    };
    // Floats that are not finite cannot be typed or read in; JSON would write them as null.
    serde_json::to_string_pretty(book).unwrap_or_default()
}

/// The oldest version that can hold a book.
fn oldest(book: &Book) -> u32 {
    let wired = |supply: &SupplyEntry| supply.longest_lead_mm.is_some() || !supply.chart.is_empty();
    let measured = |tube: &TubeEntry| {
        !tube.electrode.is_empty() || !tube.readings.is_empty() || !tube.measured_on.is_empty()
    };
    let mut rules = book.rule_sets.iter().flat_map(|set| &set.rules);
    if !book.electrodes.is_empty()
        || !book.cables.is_empty()
        || book.supplies.iter().any(wired)
        || book.tubes.iter().any(measured)
        || rules.any(|rule| rule.limits.of_wiring())
    {
        3
    } else if !book.bending.is_usual() || !is_zero(&book.allowances.crossover_mm) {
        2
    } else {
        OLDEST
    }
}

/// Whether a text is JSON at all, of the wanted kind and of a version this program knows.
pub(crate) fn check_kind(
    text: &str,
    kind: &str,
    versions: RangeInclusive<u32>,
) -> Result<(), String> {
    let newest = *versions.end();
    let head: serde_json::Value = serde_json::from_str(text).map_err(|error| {
        format!(
            "This is not a {kind} file: expected JSON written by this program, but {}.",
            json_trouble(&error)
        )
    })?;
    match head.get("tubewright").and_then(serde_json::Value::as_str) {
        Some(found) if found == kind => {}
        Some(found) => {
            return Err(format!(
                "Expected a {kind} file, but this is a {} file.",
                crate::measure::quoted(found)
            ));
        }
        None => {
            return Err(format!(
                "This is not a {kind} file: it has no “tubewright” field that says “{kind}”."
            ));
        }
    }
    match head.get("version").and_then(serde_json::Value::as_u64) {
        Some(found) if u32::try_from(found).is_ok_and(|found| versions.contains(&found)) => Ok(()),
        Some(found) if found > u64::from(newest) => Err(format!(
            "This {kind} file has version {found}; this program knows versions up to {newest}. \
             Open it with a newer program."
        )),
        _ => Err(format!(
            "This {kind} file names no version that exists; this program knows versions up to \
             {newest}."
        )),
    }
}
