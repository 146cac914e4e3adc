//! Copper conductors and their resistance.
//!
//! # Source
//! IEC 60228, greatest direct-current resistance at 20 °C of plain copper conductors of classes 1 and 2
//! (solid, stranded) and of classes 5 and 6 (flexible), as several reproductions of the table give it
//! alike. NEC (NFPA 70) Chapter 9 Table 8, direct-current resistance at 75 °C of uncoated copper, solid
//! and of seven strands, read in unofficial transcriptions of 2017 and 2023 that agree. The two are at
//! different temperatures and are never mixed; neither holds the reactance, which is small at these
//! sizes.

/// A table of conductors.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Table {
    /// IEC 60228, at 20 °C.
    Iec60228,
    /// NEC Chapter 9 Table 8, at 75 °C.
    NecTable8,
}

impl Table {
    /// The temperature of its figures, °C.
    pub const fn celsius(self) -> f64 {
        match self {
            Self::Iec60228 => 20.0,
            Self::NecTable8 => 75.0,
        }
    }

    /// Its name, with the temperature.
    pub const fn words(self) -> &'static str {
        match self {
            Self::Iec60228 => "IEC 60228, at 20 °C",
            Self::NecTable8 => "NEC Chapter 9 Table 8, at 75 °C",
        }
    }
}

/// Rise of the resistance of copper for each kelvin from 20 °C (IEC 60287).
pub const COPPER_PER_KELVIN: f64 = 0.003_93;

/// How much more than at 20 °C copper resists at a temperature.
pub const fn warmer(celsius: f64) -> f64 {
    1.0 + COPPER_PER_KELVIN * (celsius - 20.0)
}

/// One conductor.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Conductor {
    /// What a job names it by.
    pub name: &'static str,
    /// The table it is of.
    pub table: Table,
    /// Resistance of one conductor at the table's temperature, ohms for each kilometre.
    pub ohm_per_km: f64,
}

const fn iec(name: &'static str, ohm_per_km: f64) -> Conductor {
    Conductor {
        name,
        table: Table::Iec60228,
        ohm_per_km,
    }
}

const fn nec(name: &'static str, ohm_per_km: f64) -> Conductor {
    Conductor {
        name,
        table: Table::NecTable8,
        ohm_per_km,
    }
}

/// All conductors a feed may have. Their names are part of the job file.
pub const CONDUCTORS: [Conductor; 18] = [
    iec("1.5 mm²", 12.1),
    iec("2.5 mm²", 7.41),
    iec("4 mm²", 4.61),
    iec("6 mm²", 3.08),
    iec("1.5 mm² flexible", 13.3),
    iec("2.5 mm² flexible", 7.98),
    iec("4 mm² flexible", 4.95),
    iec("6 mm² flexible", 3.30),
    nec("18 AWG solid", 25.5),
    nec("18 AWG stranded", 26.1),
    nec("16 AWG solid", 16.0),
    nec("16 AWG stranded", 16.4),
    nec("14 AWG solid", 10.1),
    nec("14 AWG stranded", 10.3),
    nec("12 AWG solid", 6.34),
    nec("12 AWG stranded", 6.50),
    nec("10 AWG solid", 3.984),
    nec("10 AWG stranded", 4.070),
];

/// The conductor of a name.
pub fn conductor(name: &str) -> Option<&'static Conductor> {
    CONDUCTORS.iter().find(|conductor| conductor.name == name)
}

impl Conductor {
    /// Volts lost over a feed of a length one way in metres, there and back, at amperes: `2 L R I`.
    pub fn drop_volts(&self, length_m: f64, amps: f64) -> f64 {
        2.0 * length_m * self.ohm_per_km / 1000.0 * amps
    }
}
