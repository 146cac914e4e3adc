//! Supplies: a rating that can be worked with, and what a rule set and a site say of it.
//!
//! Never invents a figure of a nameplate. What is not given and not needed stays unknown.

mod finding;

use rust_decimal::Decimal;

use crate::book::{ChartLength, Dampness, OutputEarthing, SupplyEntry, SupplyKind};
use crate::job::Site;
use crate::measure::{Length, Milliamps, Volts};
use crate::rules::{EarthWord, Finding, RuleSet};

pub(crate) use finding::{blanks, one_mains};

/// A checked rating.
#[derive(Debug, Clone, PartialEq)]
pub struct Rating {
    /// Name in the book.
    pub name: String,
    /// Iron or electronic.
    pub kind: SupplyKind,
    /// No-load output volts, rms, lead to lead.
    pub no_load: Volts,
    /// Short-circuit output current.
    pub short_circuit: Milliamps,
    /// Rated output current; for iron, the short-circuit current where the plate gives no other.
    pub rated: Milliamps,
    /// Output volts at the rated current; electronic supplies only.
    pub rated_load: Option<Volts>,
    /// What of the output is earthed.
    pub earthing: OutputEarthing,
    /// Whether it switches off on an earth fault.
    pub earth_fault_protection: bool,
    /// Trip current of that protection.
    pub trip: Option<Milliamps>,
    /// Whether it switches off when the string is open.
    pub open_circuit_protection: bool,
    /// Rated size: the plate's volt-amperes, or no-load volts times short-circuit current.
    pub rated_va: f64,
    /// The plate's input volt-amperes.
    pub input_va: Option<f64>,
    /// The plate's loading window, shares of no-load volts (least, most).
    pub plate_window: Option<(f64, f64)>,
    /// Mains volts it is made for.
    pub input_volts: Option<f64>,
    /// Mains frequency it is made for.
    pub input_hertz: Option<f64>,
    /// Output frequency: for iron that of the mains it is made for, where no other is given.
    pub output_hertz: Option<f64>,
    /// Trip time of its earth-fault protection, seconds.
    pub trip_seconds: Option<f64>,
    /// Longest lead, supply to first electrode, that the plate allows.
    pub longest_lead: Option<Length>,
    /// Longest lengths of tube types that the plate allows.
    pub chart: Vec<ChartLength>,
    /// The wettest place it is made for.
    pub place: Dampness,
    /// Price of one.
    pub price: Option<Decimal>,
}

impl Rating {
    /// Checks an entry.
    ///
    /// # Errors
    /// Everything that is missing or contradicts itself, as findings at the supply.
    pub fn read(entry: &SupplyEntry) -> Result<Self, Vec<Finding>> {
        let wrong = finding::contradictions(entry);
        let (Some(kind), Some(earthing), Some(no_load), Some(short_circuit), true) = (
            entry.kind,
            entry.earthing,
            entry.no_load_volts,
            entry.short_circuit_ma.or(match entry.kind {
                // An electronic supply that names only its rated current is taken to hold it.
                Some(SupplyKind::Electronic) => entry.rated_ma,
                Some(SupplyKind::Iron) | None => None,
            }),
            wrong.is_empty(),
        ) else {
            return Err(wrong);
        };
        let share = |percent: f64| percent / 100.0;
        Ok(Self {
            name: entry.name.clone(),
            kind,
            no_load: Volts::from_volts(no_load),
            short_circuit: Milliamps::from_ma(short_circuit),
            rated: Milliamps::from_ma(entry.rated_ma.unwrap_or(short_circuit)),
            rated_load: entry.rated_load_volts.map(Volts::from_volts),
            earthing,
            earth_fault_protection: entry.earth_fault_protection,
            trip: entry.trip_ma.map(Milliamps::from_ma),
            open_circuit_protection: entry.open_circuit_protection,
            rated_va: entry.input_va.unwrap_or(no_load * short_circuit / 1000.0),
            input_va: entry.input_va,
            plate_window: entry
                .least_load_percent
                .map(share)
                .zip(entry.most_load_percent.map(share)),
            input_volts: entry.input_volts,
            input_hertz: entry.input_hertz,
            output_hertz: entry.output_hertz.or(match kind {
                SupplyKind::Iron => entry.input_hertz,
                SupplyKind::Electronic => None,
            }),
            trip_seconds: entry.trip_seconds,
            longest_lead: entry.longest_lead_mm.map(Length::from_mm),
            chart: entry.chart.clone(),
            place: entry.place,
            price: entry.price,
        })
    }

    /// Greatest volts from any terminal to earth with no load: what insulation must stand. On an
    /// isolated output this is the whole no-load voltage (NEC Article 100: for an ungrounded
    /// circuit, the greatest voltage to any other conductor).
    pub fn no_load_to_earth(&self) -> Volts {
        match self.earthing {
            OutputEarthing::MidPoint | OutputEarthing::MidPointReturn => self.no_load * 0.5,
            OutputEarthing::OneEnd | OutputEarthing::Isolated => self.no_load,
        }
    }

    /// What a rule set says of this rating, whatever hangs on it. A stop means the rating is not to
    /// be used under the set.
    pub fn against_rules(&self, rules: &RuleSet) -> Vec<Finding> {
        finding::rules(self, rules)
    }

    /// What the site says of this rating.
    pub fn against_site(&self, site: &Site) -> Vec<Finding> {
        finding::site(self, site)
    }

    /// Whether iron and isolated, the only supplies the exemption from earth-fault protection names.
    pub(crate) fn isolated_transformer(&self) -> bool {
        self.kind == SupplyKind::Iron && self.earthing == OutputEarthing::Isolated
    }

    /// The rating in words: `9 000 V, 30 mA, mid-point earthed`, or `grounded` by the word.
    pub fn words(&self, word: EarthWord) -> String {
        format!(
            "{}, {} mA, {}",
            crate::measure::volts_shown(self.no_load),
            self.short_circuit.ma(),
            earthing_words(self.earthing, word)
        )
    }
}

/// The earthing of an output in words: `mid-point earthed`, or `mid-point grounded` by the word of the
/// rule set in use.
pub const fn earthing_words(earthing: OutputEarthing, word: EarthWord) -> &'static str {
    use EarthWord::{Earth, Ground};
    use OutputEarthing::{Isolated, MidPoint, MidPointReturn, OneEnd};
    match (earthing, word) {
        (MidPoint, Earth) => "mid-point earthed",
        (MidPoint, Ground) => "mid-point grounded",
        (MidPointReturn, Earth) => "mid-point earthed with return",
        (MidPointReturn, Ground) => "mid-point grounded with return",
        (OneEnd, Earth) => "one end earthed",
        (OneEnd, Ground) => "one end grounded",
        (Isolated, Earth | Ground) => "isolated",
    }
}
