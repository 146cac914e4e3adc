//! The three rule sets shipped with the page. The official text and the local authority govern.
//!
//! # Source
//! NEC: NFPA 70, 2017, Article 600, and the 2020 text as adopted in the 2022 California Electrical
//! Code, both read in unofficial transcriptions that agree. IEC/EN: IEC 61050:1991 with
//! Amendment 1 and its national adoption GOST R IEC 61050-99, clauses 1.1 and 8.1; EN 50107-1:2002,
//! clause 1 (scope) as catalogued. Figures of EN 50107 that could not be confirmed are left blank.

use super::{EarthWord, Limits, Rule, RuleSet, Standing};

fn rule(limits: Limits, value: Option<f64>, clause: &str, standing: Standing) -> Rule {
    Rule {
        limits,
        value,
        clause: clause.to_owned(),
        standing,
    }
}

/// NEC Article 600, editions 2017 and 2020.
pub fn nec() -> RuleSet {
    use Standing::ReadInText;
    RuleSet {
        name: "NEC Article 600".to_owned(),
        jurisdiction: "United States".to_owned(),
        edition: "2017 and 2020".to_owned(),
        earth_word: EarthWord::Ground,
        note: "From unofficial transcriptions; the official NFPA text and the local authority \
               govern. On an ungrounded circuit, voltage to ground is the greatest voltage to any \
               other conductor (Article 100). The exemption in 600.23(B) names transformers, so it \
               is not given to electronic supplies. Canada's code differs (6000 V, rule 34-300, \
               reported): do not use this set there."
            .to_owned(),
        rules: vec![
            rule(Limits::NoLoadVolts, Some(15_000.0), "600.23(C)", ReadInText),
            rule(
                Limits::VoltsToEarth,
                Some(7_500.0),
                "600.23(C), Article 100",
                ReadInText,
            ),
            rule(Limits::RatedCurrent, Some(300.0), "600.23(D)", ReadInText),
            rule(
                Limits::EarthFaultProtection,
                Some(7_500.0),
                "600.23(B)",
                ReadInText,
            ),
            rule(Limits::OutputsApart, None, "600.23(E)", ReadInText),
            // Either unit complies (90.9(D)), so of each pair the laxer figure is the limit: 20 ft
            // and not 6 m, 50 ft and not 15 m, 1-3/4 in and not 45 mm, but 38 mm and not 1-1/2 in.
            rule(
                Limits::LeadInMetal,
                Some(6_096.0),
                "600.32(J)(1), 20 ft or 6 m",
                ReadInText,
            ),
            rule(
                Limits::LeadInPlastic,
                Some(15_240.0),
                "600.32(J)(1), 50 ft or 15 m",
                ReadInText,
            ),
            rule(
                Limits::PlasticFromEarthed,
                Some(38.0),
                "600.32(A)(4), 1-1/2 in or 38 mm",
                ReadInText,
            ),
            rule(
                Limits::PlasticFromEarthedAbove100Hz,
                Some(44.45),
                "600.32(A)(4), 1-3/4 in or 45 mm",
                ReadInText,
            ),
            rule(
                Limits::ConductorsApart,
                Some(38.0),
                "600.32(E), 1-1/2 in or 38 mm",
                ReadInText,
            ),
            rule(
                Limits::TubeCircuit,
                Some(30.0),
                "600.5(B)(1) of 2017, 600.5(C)(1) of 2020",
                ReadInText,
            ),
            rule(
                Limits::OtherCircuit,
                Some(20.0),
                "600.5(B)(2) of 2017, 600.5(C)(2) of 2020",
                ReadInText,
            ),
            rule(Limits::OutletCircuit, Some(20.0), "600.5(A)", ReadInText),
            rule(Limits::OutletLoad, Some(1_200.0), "220.14(F)", ReadInText),
            rule(
                Limits::ContinuousLoad,
                Some(125.0),
                "600.5(B) of 2017, 600.5(C) of 2020, 210.20(A)",
                ReadInText,
            ),
        ],
    }
}

/// IEC and EN standards for no-load outputs above 1 kV and up to 10 kV.
pub fn iec_en() -> RuleSet {
    use Standing::{ReadInText, Reported, ToBeFilledIn};
    RuleSet {
        name: "IEC/EN 1 to 10 kV".to_owned(),
        jurisdiction: "Europe and countries that adopt IEC".to_owned(),
        edition: "IEC 61050:1991 with A1:1994, EN 50107-1:2002".to_owned(),
        earth_word: EarthWord::Earth,
        note:
            "Only values with a source. Volts to earth, trip current, creepage, cable length and \
               heights of EN 50107 were not confirmed and are left for you to fill in from the \
               official text; national rules add to it."
                .to_owned(),
        rules: vec![
            rule(
                Limits::NoLoadVoltsAbove,
                Some(1_000.0),
                "IEC 61050 clause 1.1",
                ReadInText,
            ),
            rule(
                Limits::NoLoadVolts,
                Some(10_000.0),
                "IEC 61050 clause 1.1",
                ReadInText,
            ),
            rule(
                Limits::RatedVoltAmperes,
                Some(2_500.0),
                "IEC 61050 clause 8.1",
                Reported,
            ),
            rule(Limits::VoltsToEarth, None, "EN 50107-1", ToBeFilledIn),
            rule(Limits::TripCurrent, None, "EN 50107-2", ToBeFilledIn),
            rule(Limits::Lead, None, "EN 50107-1", ToBeFilledIn),
        ],
    }
}

/// The shop's own limits: empty.
pub fn shop() -> RuleSet {
    RuleSet {
        name: "Shop rules".to_owned(),
        jurisdiction: String::new(),
        edition: String::new(),
        earth_word: EarthWord::Earth,
        note: "Your own limits. Nothing is checked until you fill figures in.".to_owned(),
        rules: vec![
            rule(Limits::NoLoadVolts, None, "", Standing::ShopSetting),
            rule(Limits::VoltsToEarth, None, "", Standing::ShopSetting),
            rule(Limits::RatedCurrent, None, "", Standing::ShopSetting),
        ],
    }
}
