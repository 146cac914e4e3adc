//! The sentences of this room.

use super::{COPPER_PER_KELVIN, DROP_LOOK_PERCENT, SupplyLoad, warmer};
use crate::measure::{self, grouped, quoted, told_from};
use crate::rules::{Finding, Grade, Place, Source};

fn found(grade: Grade, says: impl Into<String>, source: Source) -> Finding {
    Finding::new(grade, Place::Job, says, source)
}

fn typed() -> Source {
    Source::entry("as typed for the feed")
}

/// Supplies whose amperes are not known, and why.
pub(super) fn loads_unknown(supplies: &[SupplyLoad]) -> Option<Finding> {
    let names = |wanted: fn(&&SupplyLoad) -> bool| -> Option<String> {
        const MOST_NAMED: usize = 3;
        let found: Vec<&SupplyLoad> = supplies.iter().filter(wanted).collect();
        let mut named: Vec<String> = found
            .iter()
            .take(MOST_NAMED)
            .map(|supply| quoted(&supply.name))
            .collect();
        if found.len() > MOST_NAMED {
            named.push(format!("{} more", found.len() - MOST_NAMED));
        }
        (!named.is_empty()).then(|| named.join(", "))
    };
    let mut why = Vec::new();
    if let Some(names) = names(|supply| supply.va.is_none()) {
        why.push(format!(
            "the volt-amperes of {names} are not in the shop book"
        ));
    }
    if let Some(names) = names(|supply| supply.va.is_some() && supply.amps.is_none()) {
        why.push(format!(
            "neither the input volts of {names} nor the mains volts are given"
        ));
    }
    (!why.is_empty()).then(|| {
        found(
            Grade::Note,
            format!(
                "The amperes of the feed were not worked out: {}.",
                why.join("; ")
            ),
            Source::entry("the supply's entry"),
        )
    })
}

pub(super) fn counted_as_it_is() -> Finding {
    found(
        Grade::Note,
        "No rule in use says what a continuous load is counted as: the feed's load is counted as 100 % \
         of itself.",
        Source::entry("the job's choice of rules"),
    )
}

pub(super) fn odd_percent(percent: f64, source: Source) -> Finding {
    found(
        Grade::Look,
        format!(
            "A continuous load cannot be counted as {percent} % of itself: it is counted as 100 %."
        ),
        source,
    )
}

pub(super) fn outlet_floor(va: f64, floor: f64, source: Source) -> Finding {
    found(
        Grade::Note,
        format!(
            "The supplies draw {} VA; a required outlet is counted with at least {} VA.",
            grouped(va),
            grouped(floor)
        ),
        source,
    )
    .with(va, floor, "VA")
}

pub(super) fn circuit_not_given() -> Finding {
    found(
        Grade::Note,
        "The rating of the branch circuit is not given: whether it may be so large, and how many are \
         needed, was not checked. Give it under Leads and feed, on the Circuits place.",
        typed(),
    )
}

pub(super) fn circuit_amps(amps: f64) -> Finding {
    found(
        Grade::Look,
        format!(
            "The rating of the branch circuit counts as not given: {}, but is {amps}.",
            measure::CIRCUIT_AMPS
        ),
        typed(),
    )
}

pub(super) fn circuit_too_large(
    amps: f64,
    most: f64,
    other_loads: bool,
    source: Source,
) -> Finding {
    let whose = if other_loads {
        "that other sign loads hang on too"
    } else {
        "of luminous tubes"
    };
    found(
        Grade::Stop,
        format!(
            "A branch circuit {whose} is rated for at most {most} A, but this one for {amps} A."
        ),
        source,
    )
    .with(amps, most, "A")
}

pub(super) fn outlet_shared(source: Source) -> Finding {
    found(
        Grade::Look,
        "The branch circuit of a required sign outlet feeds nothing else, and other loads are said to \
         hang on it.",
        source,
    )
}

pub(super) fn outlet_circuit(amps: f64, least: f64, source: Source) -> Finding {
    found(
        Grade::Stop,
        format!(
            "The branch circuit of a required outlet is rated for at least {least} A, but this one for \
             {amps} A."
        ),
        source,
    )
    .with(amps, least, "A")
}

pub(super) fn one_too_large(name: &str, counted: f64, amps: f64) -> Finding {
    found(
        Grade::Stop,
        format!(
            "One {} alone is counted with {} A, more than the {amps} A of the branch circuit.",
            quoted(name),
            told_from(counted, amps, 1)
        ),
        typed(),
    )
    .with(counted, amps, "A")
}

pub(super) fn floor_too_large(counted: f64, amps: f64) -> Finding {
    found(
        Grade::Stop,
        format!(
            "The load of the required outlet is counted with {} A, more than the {amps} A of the \
             branch circuit.",
            told_from(counted, amps, 1)
        ),
        typed(),
    )
    .with(counted, amps, "A")
}

pub(super) fn unreadable(why: &str) -> Finding {
    found(
        Grade::Look,
        format!("The length of the feed counts as not given: {why}."),
        typed(),
    )
}

pub(super) fn no_such_conductor(name: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "There is no conductor {} in the table of conductors: the volts of the feed were not worked \
             out.",
            quoted(name)
        ),
        typed(),
    )
}

pub(super) fn drops(volts: f64, percent: f64) -> Finding {
    found(
        Grade::Look,
        format!(
            "The feed loses {volts:.1} V, {} % of the mains volts, more than {DROP_LOOK_PERCENT} %: a \
             wider conductor or a shorter way.",
            told_from(percent, DROP_LOOK_PERCENT, 1)
        ),
        Source::practice(),
    )
    .with(percent, DROP_LOOK_PERCENT, "%")
}

pub(super) fn warmer_wire() -> Finding {
    const WARM: f64 = 70.0;
    found(
        Grade::Note,
        format!(
            "The volts of the feed are for a conductor at 20 °C; a warmer one loses more, at {WARM:.0} °C \
             {:.4} times as much (copper, {COPPER_PER_KELVIN} for each kelvin).",
            warmer(WARM)
        ),
        Source {
            clause: "Table 1".to_owned(),
            from: "IEC 60287".to_owned(),
            standing: "reported elsewhere",
        },
    )
}

pub(super) fn hours(hours: f64) -> Finding {
    found(
        Grade::Look,
        format!(
            "What is taken in a year was not worked out: {}, but is {hours}.",
            measure::HOURS_PER_YEAR
        ),
        typed(),
    )
}

pub(super) fn watts_and_volt_amperes() -> Finding {
    found(
        Grade::Note,
        "The year is worked out from the watts of the tubes, so it is at least what is said: what the \
         supplies themselves lose comes on top. The feed is worked out from volt-amperes, which are \
         more than watts.",
        Source::model(),
    )
}
