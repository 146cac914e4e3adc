//! The sentences of this room: contradictions on a nameplate, rule sets and sites against a rating.

use super::{Rating, earthing_words};
use crate::book::{Dampness, SupplyEntry, SupplyKind};
use crate::job::Site;
use crate::measure::{grouped, large_first, quoted, volts_shown};
use crate::rules::{Finding, Grade, Limits, Place, RuleSet, Source, Standing};

/// Mains volts may lie this far from the plate's, either way (common supply tolerance, shop's to
/// judge beyond).
const MAINS_TOLERANCE: f64 = 0.10;

/// Beyond this a droop line could cross a string's falling volts twice, and nothing could be said.
const MOST_DROOP: f64 = 3.0;

/// What is missing or impossible on a nameplate.
pub(super) fn contradictions(entry: &SupplyEntry) -> Vec<Finding> {
    let mut wrong = Vec::new();
    let mut stop = |says: String| {
        let place = Place::Supply(entry.name.clone());
        wrong.push(Finding::new(
            Grade::Stop,
            place,
            says,
            Source::entry("the supply's entry"),
        ));
    };
    for (name, value, most, unit) in [
        ("No-load volts", entry.no_load_volts, 30_000.0, "V"),
        (
            "Short-circuit current",
            entry.short_circuit_ma,
            2_000.0,
            "mA",
        ),
        ("Rated current", entry.rated_ma, 2_000.0, "mA"),
        ("Rated load volts", entry.rated_load_volts, 30_000.0, "V"),
        ("Input volts", entry.input_volts, 1_000.0, "V"),
        ("Input frequency", entry.input_hertz, 1_000.0, "Hz"),
        ("Input", entry.input_va, 20_000.0, "VA"),
        ("Trip current", entry.trip_ma, 2_000.0, "mA"),
        ("Trip time", entry.trip_seconds, 60.0, "s"),
        ("Output frequency", entry.output_hertz, 1_000_000.0, "Hz"),
        ("Least load", entry.least_load_percent, 100.0, "%"),
        ("Greatest load", entry.most_load_percent, 100.0, "%"),
        ("Longest lead", entry.longest_lead_mm, 100_000.0, "mm"),
    ] {
        if let Some(value) = value
            && !(value > 0.0 && value <= most)
        {
            stop(format!(
                "{name} must be above 0 and at most {most} {unit}, but is {value}."
            ));
        }
    }
    for (at, length) in entry.chart.iter().enumerate() {
        if entry.chart[..at]
            .iter()
            .any(|other| other.tube == length.tube)
        {
            stop(format!(
                "Its length chart names {} twice: one tube type has one longest length.",
                quoted(&length.tube)
            ));
        }
        for (name, value) in [
            ("longest length", Some(length.longest_mm)),
            ("length of a pair of electrodes", length.pair_mm),
        ] {
            if let Some(value) = value
                && !(value > 0.0 && value <= 1_000_000.0)
            {
                stop(format!(
                    "The {name} of {} in its length chart must be above 0 and at most 1000000 mm, but \
                     is {value}.",
                    quoted(&length.tube)
                ));
            }
        }
    }
    if entry.no_load_volts.is_none() {
        stop("No-load volts are missing: copy them from the nameplate.".to_owned());
    }
    match entry.kind {
        None => stop(
            "The kind of the supply is not given: iron transformer or electronic. How it holds its \
             current depends on it."
                .to_owned(),
        ),
        Some(SupplyKind::Iron) => {
            if entry.short_circuit_ma.is_none() {
                stop("Short-circuit current is missing: copy it from the nameplate.".to_owned());
            }
        }
        Some(SupplyKind::Electronic) => {
            if entry.rated_ma.is_none() {
                stop(
                    "Rated current is missing: an electronic supply is worked out from its rated \
                      current and the volts at it."
                        .to_owned(),
                );
            }
            if entry.rated_load_volts.is_none() {
                stop(
                    "Rated load volts are missing: an electronic supply is worked out from the \
                      volts at its rated current."
                        .to_owned(),
                );
            }
        }
    }
    if let (Some(rated), Some(short)) = (entry.rated_ma, entry.short_circuit_ma)
        && rated > short
    {
        stop(format!(
            "The rated current, {rated} mA, is above the short-circuit current, {short} mA."
        ));
    }
    if entry.earthing.is_none() {
        stop(
            "The earthing of the output is not given: mid-point, one end, isolated, or mid-point \
             with return. Volts to earth depend on it."
                .to_owned(),
        );
    }
    if let (Some(rated), Some(short), Some(SupplyKind::Electronic)) =
        (entry.rated_ma, entry.short_circuit_ma, entry.kind)
        && short > MOST_DROOP * rated
    {
        stop(format!(
            "The short-circuit current, {short} mA, is more than {MOST_DROOP} times the rated \
             current, {rated} mA: an electronic supply holds its current closer."
        ));
    }
    if let (Some(load), Some(no_load)) = (entry.rated_load_volts, entry.no_load_volts)
        && load > no_load
    {
        stop(format!(
            "The rated load volts, {load} V, are above the no-load volts, {no_load} V."
        ));
    }
    if let (Some(trip), Some(short)) = (entry.trip_ma, entry.short_circuit_ma.or(entry.rated_ma))
        && trip > short
    {
        stop(format!(
            "The trip current, {trip} mA, is above the short-circuit current, {short} mA: it could \
             never trip."
        ));
    }
    match (entry.least_load_percent, entry.most_load_percent) {
        (Some(least), Some(most)) if least >= most => stop(format!(
            "The loading window is upside down: least {least} %, greatest {most} %."
        )),
        (Some(_), None) | (None, Some(_)) => {
            stop("The plate's loading window needs both its ends, least and greatest.".to_owned());
        }
        _ => {}
    }
    wrong
}

/// A rating against a rule set.
pub(super) fn rules(rating: &Rating, set: &RuleSet) -> Vec<Finding> {
    let earth = set.earth_word.word();
    let place = || Place::Supply(rating.name.clone());
    let mut found = Vec::new();
    for rule in &set.rules {
        let over = |value: f64, says: String| {
            rule.value.filter(|&limit| value > limit).map(|limit| {
                Finding::new(Grade::Stop, place(), says, set.source(rule)).with(
                    value,
                    limit,
                    rule.limits.unit(),
                )
            })
        };
        let limit = rule.value.map_or_else(String::new, |value| {
            format!("{} {}", grouped(value), rule.limits.unit())
        });
        let no_load = rating.no_load.volts();
        found.extend(match rule.limits {
            Limits::NoLoadVolts => over(
                no_load,
                format!(
                    "No-load volts {} are above {limit}.",
                    volts_shown(rating.no_load)
                ),
            ),
            Limits::NoLoadVoltsAbove => rule.value.filter(|&from| no_load <= from).map(|from| {
                Finding::new(
                    Grade::Look,
                    place(),
                    format!(
                        "The set is for no-load volts above {limit}; this supply has {}, so other \
                         rules hold for it.",
                        volts_shown(rating.no_load)
                    ),
                    set.source(rule),
                )
                .with(no_load, from, "V")
            }),
            Limits::VoltsToEarth => over(
                rating.no_load_to_earth().volts(),
                format!(
                    "Volts to {earth} reach {} on an output that is {}; the limit is {limit}.",
                    volts_shown(rating.no_load_to_earth()),
                    earthing_words(rating.earthing, set.earth_word)
                ),
            ),
            Limits::RatedCurrent => over(
                rating.rated.ma(),
                format!(
                    "The rated current {} mA is above {limit}.",
                    rating.rated.ma()
                ),
            ),
            Limits::RatedVoltAmperes => {
                let va = no_load * rating.rated.ma() / 1000.0;
                over(
                    va,
                    format!("No-load volts x rated current is {va:.0} VA, above {limit}."),
                )
            }
            Limits::EarthFaultProtection => {
                earth_fault(rating, set, rule.value).map(|finding| Finding {
                    source: set.source(rule),
                    ..finding
                })
            }
            Limits::OpenCircuitProtection => (!rating.open_circuit_protection).then(|| {
                Finding::new(
                    Grade::Stop,
                    place(),
                    "Open-circuit protection is required and this supply has none.",
                    set.source(rule),
                )
            }),
            Limits::TripCurrent => match rating.trip {
                Some(trip) if rating.earth_fault_protection => over(
                    trip.ma(),
                    format!("The trip current {} mA is above {limit}.", trip.ma()),
                ),
                None if rating.earth_fault_protection && rule.value.is_some() => Some(Finding::new(
                    Grade::Look,
                    place(),
                    format!(
                        "Not checked: the trip current is not in the shop book; the limit is {limit}."
                    ),
                    set.source(rule),
                )),
                _ => None,
            },
            // Outputs apart is held by the plan: no circuit ever has more than one supply. The rest is of
            // leads and feeds, not of a rating.
            Limits::OutputsApart
            | Limits::Lead
            | Limits::LeadInMetal
            | Limits::LeadInPlastic
            | Limits::PlasticFromEarthed
            | Limits::PlasticFromEarthedAbove100Hz
            | Limits::ConductorsApart
            | Limits::TubeCircuit
            | Limits::OtherCircuit
            | Limits::OutletCircuit
            | Limits::OutletLoad
            | Limits::ContinuousLoad => None,
        });
    }
    if !rating.earth_fault_protection && set.rule(Limits::EarthFaultProtection).is_none() {
        found.push(Finding::new(
            Grade::Look,
            place(),
            format!(
                "No {earth}-fault protection. The rule set does not ask for it here; local code may, \
                 and nothing switches off when glass, cable or sleeve fails to {earth}."
            ),
            Source::model(),
        ));
    }
    if !rating.open_circuit_protection && !found.iter().any(|finding| finding.grade == Grade::Stop)
    {
        found.push(Finding::new(
            Grade::Note,
            place(),
            format!(
                "No open-circuit protection: a broken or open tube can leave up to {} between the \
                 leads of a dark sign.",
                volts_shown(rating.no_load)
            ),
            Source::model(),
        ));
    }
    found
}

fn earth_fault(rating: &Rating, set: &RuleSet, exempt_to: Option<f64>) -> Option<Finding> {
    if rating.earth_fault_protection {
        return None;
    }
    let earth = set.earth_word.word();
    let no_load = rating.no_load.volts();
    let place = Place::Supply(rating.name.clone());
    match exempt_to {
        Some(limit) if rating.isolated_transformer() && no_load <= limit => Some(
            Finding::new(
                Grade::Note,
                place,
                format!(
                    "No {earth}-fault protection: exempt as an isolated transformer of at most {} V.",
                    grouped(limit)
                ),
                Source::shop(),
            )
            .with(no_load, limit, "V"),
        ),
        _ => {
            let why = match exempt_to {
                Some(limit) if rating.isolated_transformer() => {
                    format!("; isolated transformers are exempt up to {} V only", grouped(limit))
                }
                Some(_) if rating.kind == SupplyKind::Electronic => {
                    "; the exemption names transformers, not electronic supplies".to_owned()
                }
                _ => String::new(),
            };
            let says =
                format!("{earth}-fault protection is required and this supply has none{why}.");
            Some(Finding::new(Grade::Stop, place, large_first(&says), Source::shop()))
        }
    }
}

/// A rating against the site.
pub(super) fn site(rating: &Rating, site: &Site) -> Vec<Finding> {
    let place = || Place::Supply(rating.name.clone());
    let mut found = Vec::new();
    if rating.place < site.place {
        found.push(Finding::new(
            Grade::Stop,
            place(),
            format!(
                "Made for a {} place; the sign's is {}.",
                damp_words(rating.place),
                damp_words(site.place)
            ),
            Source::entry("the supply's entry"),
        ));
    }
    if let (None, Some(there)) = (rating.input_volts, site.mains_volts) {
        found.push(Finding::new(
            Grade::Look,
            place(),
            format!(
                "The supply's input volts are not in the shop book, so it was not checked that it \
                 suits the site's {there} V."
            ),
            Source::entry("the supply's entry"),
        ));
    }
    if let (Some(made_for), Some(there)) = (rating.input_volts, site.mains_volts)
        && (there.is_nan() || (made_for - there).abs() > MAINS_TOLERANCE * made_for)
    {
        found.push(
            Finding::new(
                Grade::Stop,
                place(),
                format!("Made for {made_for} V mains; the site has {there} V."),
                Source::entry("the supply's entry"),
            )
            .with(there, made_for, "V"),
        );
    }
    found
}

/// Whether some mains suit supplies made for these least and greatest volts.
pub(crate) fn one_mains(least: f64, most: f64) -> bool {
    (1.0 - MAINS_TOLERANCE) * most <= (1.0 + MAINS_TOLERANCE) * least
}

/// Rules of a set that want a figure and have none: whatever their standing, they are not checked,
/// and nothing may count as meeting them.
pub(crate) fn blanks(set: &RuleSet) -> Vec<Finding> {
    set.rules
        .iter()
        .filter(|rule| rule.limits.needs_value() && rule.value.is_none())
        .map(|rule| {
            let why = match rule.standing {
                Standing::ToBeFilledIn => {
                    "No confirmed figure is known here: take it from the official text and fill it \
                     in, in the shop book."
                }
                Standing::ShopSetting => "The shop book has no figure for it: fill it in there.",
                Standing::ReadInText | Standing::Reported | Standing::FromMemory => {
                    "The shop book has no figure for it any more: take it from the official text \
                     and fill it in there."
                }
            };
            Finding::new(
                Grade::Look,
                Place::Rules(set.name.clone()),
                format!(
                    "Not checked: {}. {why}",
                    rule.limits
                        .caption(set.earth_word)
                        .trim_end_matches(", at most")
                        .trim_end_matches(", at least")
                ),
                set.source(rule),
            )
        })
        .collect()
}

const fn damp_words(place: Dampness) -> &'static str {
    match place {
        Dampness::Dry => "dry",
        Dampness::Damp => "damp",
        Dampness::Wet => "wet",
    }
}
