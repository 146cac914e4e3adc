//! Rule sets as data, and findings: every limit met or missed, with where it comes from.

mod finding;
mod sets;

use serde::{Deserialize, Serialize};

pub use finding::{Finding, Grade, Place, Source};
pub use sets::{iec_en, nec, shop};

/// A named list of limits.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct RuleSet {
    /// What the set is called; a job names it.
    pub name: String,
    /// Where it is law or custom.
    #[serde(default)]
    pub jurisdiction: String,
    /// Edition of the code.
    #[serde(default)]
    pub edition: String,
    /// "earth" or "ground", as the code says.
    #[serde(default)]
    pub earth_word: EarthWord,
    /// What should be known of the set as a whole.
    #[serde(default)]
    pub note: String,
    /// The limits.
    #[serde(default)]
    pub rules: Vec<Rule>,
}

/// The word a code uses for the same thing.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum EarthWord {
    /// "volts to earth", "earthed".
    #[default]
    Earth,
    /// "volts to ground", "grounded".
    Ground,
}

impl EarthWord {
    /// The word in a sentence.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Earth => "earth",
            Self::Ground => "ground",
        }
    }

    /// What is joined to it: "earthed", "grounded".
    pub const fn joined(self) -> &'static str {
        match self {
            Self::Earth => "earthed",
            Self::Ground => "grounded",
        }
    }
}

/// One limit of a rule set.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Rule {
    /// What is limited, and how.
    pub limits: Limits,
    /// The figure, in the unit of [`Limits::unit`]. None: not known here, the user's to fill in.
    #[serde(default)]
    pub value: Option<f64>,
    /// Clause of the code.
    #[serde(default)]
    pub clause: String,
    /// How the value is known.
    pub standing: Standing,
}

/// What a rule limits. The comparison belongs to the quantity.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Limits {
    /// No-load output volts, at most.
    NoLoadVolts,
    /// No-load output volts that the set applies to, more than.
    NoLoadVoltsAbove,
    /// Volts from any output terminal to earth, at most.
    VoltsToEarth,
    /// Rated output current in milliamperes, at most.
    RatedCurrent,
    /// Rated no-load volts times rated current in volt-amperes, at most.
    RatedVoltAmperes,
    /// Earth-fault protection of the output is required. The value, when given, is the greatest
    /// no-load volts up to which an isolated iron transformer is exempt.
    EarthFaultProtection,
    /// Open-circuit protection of the output is required (no value).
    OpenCircuitProtection,
    /// Trip current of the earth-fault protection in milliamperes, at most.
    TripCurrent,
    /// Outputs are not joined in series or in parallel (no value).
    OutputsApart,
    /// A high-voltage lead from supply to first electrode, however it is run, in millimetres, at most.
    Lead,
    /// The same in metal conduit.
    LeadInMetal,
    /// The same in conduit that is not metal.
    LeadInPlastic,
    /// Distance of conduit that is not metal from earthed parts, in millimetres, at least, up to an
    /// output frequency of 100 Hz.
    PlasticFromEarthed,
    /// The same above 100 Hz.
    PlasticFromEarthedAbove100Hz,
    /// Distance of conductors from each other and from all but their insulators and tubes, outside
    /// metal conduit, in millimetres, at least.
    ConductorsApart,
    /// Rated current of a branch circuit that feeds luminous tubes only, in amperes, at most.
    TubeCircuit,
    /// Rated current of any other branch circuit of signs, in amperes, at most.
    OtherCircuit,
    /// Rated current of the branch circuit of an outlet the code asks for, in amperes, at least.
    OutletCircuit,
    /// Load that such an outlet is counted with, in volt-amperes, at least.
    OutletLoad,
    /// What a continuous load is counted as, in percent of itself, at least.
    ContinuousLoad,
}

impl Limits {
    /// Unit of the value.
    pub const fn unit(self) -> &'static str {
        match self {
            Self::NoLoadVolts
            | Self::NoLoadVoltsAbove
            | Self::VoltsToEarth
            | Self::EarthFaultProtection => "V",
            Self::RatedCurrent | Self::TripCurrent => "mA",
            Self::RatedVoltAmperes | Self::OutletLoad => "VA",
            Self::Lead
            | Self::LeadInMetal
            | Self::LeadInPlastic
            | Self::PlasticFromEarthed
            | Self::PlasticFromEarthedAbove100Hz
            | Self::ConductorsApart => "mm",
            Self::TubeCircuit | Self::OtherCircuit | Self::OutletCircuit => "A",
            Self::ContinuousLoad => "%",
            Self::OpenCircuitProtection | Self::OutputsApart => "",
        }
    }

    /// The rule in words, as a caption, with the word of its set.
    pub const fn caption(self, word: EarthWord) -> &'static str {
        match self {
            Self::NoLoadVolts => "no-load volts, at most",
            Self::NoLoadVoltsAbove => "applies to no-load volts above",
            Self::VoltsToEarth => match word {
                EarthWord::Earth => "volts to earth at any terminal, at most",
                EarthWord::Ground => "volts to ground at any terminal, at most",
            },
            Self::RatedCurrent => "rated current, at most",
            Self::RatedVoltAmperes => "no-load volts x rated current, at most",
            Self::EarthFaultProtection => match word {
                EarthWord::Earth => {
                    "earth-fault protection required; isolated transformers exempt up to"
                }
                EarthWord::Ground => {
                    "ground-fault protection required; isolated transformers exempt up to"
                }
            },
            Self::OpenCircuitProtection => "open-circuit protection required",
            Self::TripCurrent => match word {
                EarthWord::Earth => "trip current of the earth-fault protection, at most",
                EarthWord::Ground => "trip current of the ground-fault protection, at most",
            },
            Self::OutputsApart => "outputs not in series, not in parallel",
            Self::Lead => "each high-voltage lead, supply to first electrode, at most",
            Self::LeadInMetal => {
                "each high-voltage lead in metal conduit, supply to first electrode, at most"
            }
            Self::LeadInPlastic => {
                "each high-voltage lead in non-metallic conduit, supply to first electrode, at most"
            }
            Self::PlasticFromEarthed => match word {
                EarthWord::Earth => {
                    "non-metallic conduit from earthed parts, output up to 100 Hz, at least"
                }
                EarthWord::Ground => {
                    "non-metallic conduit from grounded parts, output up to 100 Hz, at least"
                }
            },
            Self::PlasticFromEarthedAbove100Hz => match word {
                EarthWord::Earth => {
                    "non-metallic conduit from earthed parts, output above 100 Hz, at least"
                }
                EarthWord::Ground => {
                    "non-metallic conduit from grounded parts, output above 100 Hz, at least"
                }
            },
            Self::ConductorsApart => {
                "high-voltage conductors outside metal conduit from all but their supports, at least"
            }
            Self::TubeCircuit => "branch circuit of luminous tubes only, at most",
            Self::OtherCircuit => "branch circuit of any other sign loads, at most",
            Self::OutletCircuit => "branch circuit of a required sign outlet, at least",
            Self::OutletLoad => "a required sign outlet is counted with, at least",
            Self::ContinuousLoad => "sign loads, as continuous loads, are counted with, at least",
        }
    }

    /// Whether it came with the rules of leads and feeds (book version 3).
    pub(crate) const fn of_wiring(self) -> bool {
        !matches!(
            self,
            Self::NoLoadVolts
                | Self::NoLoadVoltsAbove
                | Self::VoltsToEarth
                | Self::RatedCurrent
                | Self::RatedVoltAmperes
                | Self::EarthFaultProtection
                | Self::OpenCircuitProtection
                | Self::TripCurrent
                | Self::OutputsApart
        )
    }

    /// Whether the rule needs a figure to be checked.
    pub const fn needs_value(self) -> bool {
        !matches!(
            self,
            Self::EarthFaultProtection | Self::OpenCircuitProtection | Self::OutputsApart
        )
    }
}

/// How the value of a rule is known.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Standing {
    /// Read in the code's text, in transcription.
    ReadInText,
    /// Reported by another published place.
    Reported,
    /// From memory.
    FromMemory,
    /// Not confirmed: the user fills it in from the official text.
    ToBeFilledIn,
    /// Set by the shop.
    ShopSetting,
}

impl Standing {
    /// The standing in words.
    pub const fn words(self) -> &'static str {
        match self {
            Self::ReadInText => "read in the text",
            Self::Reported => "reported elsewhere",
            Self::FromMemory => "from memory",
            Self::ToBeFilledIn => "to be filled in from the official text",
            Self::ShopSetting => "shop setting",
        }
    }
}

impl RuleSet {
    /// The first rule on a quantity.
    pub fn rule(&self, limits: Limits) -> Option<&Rule> {
        self.rules.iter().find(|rule| rule.limits == limits)
    }

    /// The rules that the shipped set of this name has and this one has not: a set kept in an older
    /// book does not have those that came later.
    pub fn lacks(&self) -> Vec<Rule> {
        [nec(), iec_en(), shop()]
            .into_iter()
            .filter(|shipped| shipped.name == self.name)
            .flat_map(|shipped| shipped.rules)
            .filter(|rule| self.rule(rule.limits).is_none())
            .collect()
    }

    /// A rule as the source of a finding.
    pub fn source(&self, rule: &Rule) -> Source {
        Source {
            clause: rule.clause.clone(),
            from: if self.edition.is_empty() {
                self.name.clone()
            } else {
                format!("{} ({})", self.name, self.edition)
            },
            standing: rule.standing.words(),
        }
    }
}
