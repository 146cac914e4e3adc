//! Tube types: the volts a column of gas and a pair of electrodes take at a current.
//!
//! `U = U_pair + E L`, `E = E_ref (I_ref / I)^n`. L runs from electrode shell to electrode shell,
//! painted-out parts included.
//!
//! # Source
//! The default model is a similarity model anchored on a few published points (lamp data of
//! IEC 60081 as remembered, Gaster & Dow *Modern Illuminating Engineering* p. 112, and others), about
//! ±15 % for glass of 12 to 15 mm and ±25 % outside. It is not a transcription of a handbook.
//! Bench readings of the shop's own tubes are better; so is any figure typed into the book.

mod electrode;
mod finding;
mod fit;
mod known;
mod line;
mod measured;

use crate::book::{ElectrodeEntry, Gas, TubeEntry};
use crate::measure::{Length, Milliamps, Volts};
use crate::rules::{Finding, Grade, Place, Source};

pub use electrode::Electrode;
pub use known::Known;
pub use line::{Interval, Line, student_t};
pub use measured::{AtCurrent, LEAST_PERCENT, Measured, Placed, measured};

use finding::{MOST_MA, MOST_OUTER_MM};

/// Current the default model's figures are given at.
const MODEL_MA: f64 = 25.0;
/// Below 0 °C, mercury tubes: low confidence, from memory (+10 to +30 % reported orally).
const MODEL_COLD_FACTOR: f64 = 1.15;
/// Greatest exponent of the fall of volts with current.
const MOST_EXPONENT: f64 = 0.45;
/// Greatest volts per metre at the reference current.
const MOST_VOLTS_PER_M: f64 = 10_000.0;
/// Greatest volts of one electrode pair.
const MOST_PAIR_VOLTS: f64 = 2_000.0;

/// Default figures for a gas and a bore.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ModelFigures {
    /// Running volts per metre at 25 mA.
    pub volts_per_m: f64,
    /// Exponent n of the fall with current.
    pub exponent: f64,
    /// Volts of one electrode pair.
    pub pair_volts: f64,
    /// How far off the volts per metre may be, percent either way.
    pub uncertainty_percent: f64,
}

/// The default model: `bore_mm` is the inner diameter in millimetres.
pub fn model(gas: Gas, bore_mm: f64) -> ModelFigures {
    // Tubes of 12 to 15 mm outer diameter, as the model's data bracket them.
    let uncertainty_percent = if (10.0..=13.0).contains(&bore_mm) {
        15.0
    } else {
        25.0
    };
    let (at_10_mm, slope, exponent, pair_volts) = match gas {
        Gas::Neon => (720.0, 0.75, 0.25, 180.0),
        Gas::ArgonMercury => (425.0, 0.70, 0.30, 210.0),
    };
    ModelFigures {
        volts_per_m: at_10_mm * (10.0 / bore_mm).powf(slope),
        exponent,
        pair_volts,
        uncertainty_percent,
    }
}

/// A tube type with every figure known.
#[derive(Debug, Clone, PartialEq)]
pub struct TubeType {
    /// Name in the book.
    pub name: String,
    /// Its gas.
    pub gas: Gas,
    /// Outer diameter of the glass.
    pub outer: Length,
    /// Colour to draw it in, `#rrggbb`.
    pub colour: String,
    /// Running volts per metre at `at_ma`, warm.
    pub volts_per_m: f64,
    /// Current of `volts_per_m`, milliamperes.
    pub at_ma: f64,
    /// Volts go as current to the power of minus this.
    pub exponent: f64,
    /// Volts of one electrode pair.
    pub pair_volts: f64,
    /// Factor on volts per metre below 0 °C.
    pub cold_factor: f64,
    /// Whether that factor is the default.
    pub cold_by_default: bool,
    /// Least steady current.
    pub least: Option<Milliamps>,
    /// Greatest current of glass and electrodes.
    pub most: Option<Milliamps>,
    /// How the volts are known.
    pub known: Known,
    /// What of its volts the entry leaves to the default, each in a few words; what of them readings
    /// give is not among it.
    pub filled_in: Vec<String>,
    /// Its electrodes, where the entry names some of the book.
    pub electrode: Option<Electrode>,
    /// What is to be said of it though its volts can be worked out.
    pub findings: Vec<Finding>,
}

impl TubeType {
    /// Checks an entry of a book with these electrodes; figures left out come from the default model.
    ///
    /// # Errors
    /// Every contradiction, as findings at the tube.
    pub fn of_book(entry: &TubeEntry, electrodes: &[ElectrodeEntry]) -> Result<Self, Vec<Finding>> {
        let mut tube = Self::read(entry)?;
        let (electrode, findings) =
            Electrode::of(&tube.name, tube.outer, &entry.electrode, electrodes);
        tube.electrode = electrode;
        tube.findings.extend(findings);
        Ok(tube)
    }

    /// Checks an entry without its electrode; figures left out come from the default model.
    ///
    /// # Errors
    /// Every contradiction, as findings at the tube.
    pub fn read(entry: &TubeEntry) -> Result<Self, Vec<Finding>> {
        let mut wrong = Vec::new();
        let mut stop = |says: String| {
            wrong.push(Finding::new(
                Grade::Stop,
                Place::Tube(entry.name.clone()),
                says,
                Source::entry("the tube's entry"),
            ));
        };
        let mut above_zero = |name: &str, value: Option<f64>, most: f64, unit: &str| {
            if let Some(value) = value
                && !(value > 0.0 && value <= most)
            {
                stop(format!(
                    "{name} must be above 0 and at most {most}{unit}, but is {value}."
                ));
            }
        };
        above_zero("Outer diameter", entry.outer_mm, MOST_OUTER_MM, " mm");
        above_zero("Wall", entry.wall_mm, 10.0, " mm");
        above_zero(
            "Volts per metre",
            entry.volts_per_m,
            MOST_VOLTS_PER_M,
            " V/m",
        );
        above_zero("Reference current", entry.at_ma, MOST_MA, " mA");
        above_zero(
            "Volts of an electrode pair",
            entry.pair_volts,
            MOST_PAIR_VOLTS,
            " V",
        );
        above_zero("Cold factor", entry.cold_factor, 3.0, "");
        above_zero("Least current", entry.least_ma, MOST_MA, " mA");
        above_zero("Greatest current", entry.most_ma, MOST_MA, " mA");
        // Up to here every crossing with a supply's steady branch is stable, so there is only one;
        // published exponents of cold-cathode columns are 0.2 to 0.36.
        if let Some(n) = entry.exponent
            && !(0.0..=MOST_EXPONENT).contains(&n)
        {
            stop(format!(
                "The exponent must be 0 to {MOST_EXPONENT}, but is {n}."
            ));
        }
        if let (Some(least), Some(most)) = (entry.least_ma, entry.most_ma)
            && least > most
        {
            stop(format!(
                "The least current, {least} mA, is above the greatest, {most} mA."
            ));
        }
        let outer_mm = entry.outer_mm.unwrap_or_else(|| {
            stop(
                "The outer diameter is missing: it is needed to draw and to model the tube.".into(),
            );
            f64::NAN
        });
        let bore_mm = outer_mm - 2.0 * entry.wall_mm.unwrap_or(1.0);
        if outer_mm > 0.0 && bore_mm <= 0.0 {
            stop(format!(
                "The walls leave no bore: outer diameter {outer_mm} mm."
            ));
        }
        if !wrong.is_empty() {
            return Err(wrong);
        }
        let figures = model(entry.gas, bore_mm);
        // A gradient given at another current than 25 mA keeps its own reference.
        let at_ma = entry
            .at_ma
            .filter(|_| entry.volts_per_m.is_some())
            .unwrap_or(MODEL_MA);
        let mut tube = Self {
            name: entry.name.clone(),
            gas: entry.gas,
            outer: Length::from_mm(outer_mm),
            colour: colour(&entry.colour, entry.gas),
            volts_per_m: entry.volts_per_m.unwrap_or(figures.volts_per_m),
            at_ma,
            exponent: entry.exponent.unwrap_or(figures.exponent),
            pair_volts: entry.pair_volts.unwrap_or(figures.pair_volts),
            cold_by_default: entry.cold_factor.is_none(),
            cold_factor: entry.cold_factor.unwrap_or(match entry.gas {
                Gas::Neon => 1.0,
                Gas::ArgonMercury => MODEL_COLD_FACTOR,
            }),
            least: entry.least_ma.map(Milliamps::from_ma),
            most: entry.most_ma.map(Milliamps::from_ma),
            known: match entry.volts_per_m {
                Some(_) => Known::Entered,
                None => Known::Model {
                    percent: figures.uncertainty_percent,
                },
            },
            filled_in: filled_in(entry, &figures),
            electrode: None,
            findings: Vec::new(),
        };
        match measured(entry) {
            None => {}
            Some(Err(why)) => tube.findings = why,
            Some(Ok(measured)) => tube.take(entry, measured),
        }
        Ok(tube)
    }

    /// Bench readings rule over figures typed in or modelled.
    fn take(&mut self, entry: &TubeEntry, measured: Measured) {
        self.volts_per_m = measured.volts_per_m.value;
        self.at_ma = measured.at_ma;
        self.exponent = measured.exponent;
        self.pair_volts = measured.pair_volts.value;
        self.known = Known::Measured {
            on: entry.measured_on.clone(),
            readings: entry.readings.len(),
            percent: measured.percent,
            from_ma: entry
                .readings
                .iter()
                .map(|read| read.ma)
                .fold(f64::INFINITY, f64::min),
            to_ma: entry
                .readings
                .iter()
                .map(|read| read.ma)
                .fold(0.0, f64::max),
        };
        self.filled_in.clear();
        self.findings = measured.findings;
    }

    /// How far off the volts may be, percent either way. None: they were typed in, and nobody said.
    pub const fn uncertainty_percent(&self) -> Option<f64> {
        match self.known {
            Known::Model { percent } | Known::Measured { percent, .. } => Some(percent),
            Known::Entered => None,
        }
    }

    /// How the volts are known, in a few words.
    pub fn known_words(&self) -> String {
        self.known.words()
    }

    /// The same tube were its volts off by all they may be: more with 1, less with -1. What the model
    /// may be off by is the column's; what a bench may be off by is the whole piece's.
    #[must_use]
    pub fn off_by(&self, sign: f64) -> Self {
        let factor = 1.0 + sign * self.uncertainty_percent().unwrap_or(0.0) / 100.0;
        let pair_factor = match self.known {
            Known::Measured { .. } => factor,
            Known::Model { .. } | Known::Entered => 1.0,
        };
        Self {
            volts_per_m: self.volts_per_m * factor,
            pair_volts: self.pair_volts * pair_factor,
            ..self.clone()
        }
    }

    /// The column constant of a length: volts of the column are `column(length) * I^-n`, I in mA.
    pub fn column(&self, length: Length, cold: bool) -> f64 {
        let warm = self.volts_per_m * length.m() * self.at_ma.powf(self.exponent);
        if cold { warm * self.cold_factor } else { warm }
    }

    /// Running volts of one piece.
    pub fn running(&self, length: Length, current: Milliamps, cold: bool) -> Volts {
        Volts::from_volts(
            self.pair_volts + self.column(length, cold) * current.ma().powf(-self.exponent),
        )
    }
}

/// What of the volts of an entry is left to the default.
fn filled_in(entry: &TubeEntry, figures: &ModelFigures) -> Vec<String> {
    let mut filled = Vec::new();
    if entry.pair_volts.is_none() {
        filled.push(format!("{} V for a pair of electrodes", figures.pair_volts));
    }
    if entry.exponent.is_none() {
        filled.push(format!(
            "volts that go as the current to the power of -{}",
            figures.exponent
        ));
    }
    if entry.volts_per_m.is_some() && entry.at_ma.is_none() {
        filled.push(format!(
            "{MODEL_MA} mA as the current of its volts per metre"
        ));
    }
    if entry.volts_per_m.is_none() && entry.wall_mm.is_none() {
        filled.push("a wall of 1 mm".to_owned());
    }
    filled
}

/// The entry's colour if it is `#rrggbb`, else a colour of the gas.
fn colour(typed: &str, gas: Gas) -> String {
    let fine = typed.len() == 7
        && typed.starts_with('#')
        && typed.bytes().skip(1).all(|b| b.is_ascii_hexdigit());
    if fine {
        return typed.to_owned();
    }
    match gas {
        Gas::Neon => "#ff5a3c".to_owned(),
        Gas::ArgonMercury => "#9fc4ff".to_owned(),
    }
}
