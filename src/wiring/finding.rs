//! The sentences of this room.

use crate::book::OutputEarthing;
use crate::job::LeadRun;
use crate::measure::{self, Length, Volts, grouped, quoted, told_from, volts_shown};
use crate::rules::{EarthWord, Finding, Grade, Place, Rule, Source};

fn found(grade: Grade, says: impl Into<String>, source: Source) -> Finding {
    Finding::new(grade, Place::Job, says, source)
}

fn typed() -> Source {
    Source::entry("as typed for the leads")
}

fn entry() -> Source {
    Source::entry("the cable's entry")
}

/// Derived, where codes name cables and do not say which goes with which supply: 600.32(B) of the NEC
/// names 5, 10 and 15 kV.
fn derived() -> Source {
    Source {
        clause: String::new(),
        from: "electrical model".to_owned(),
        standing: "derived: the codes read here name cables of 5, 10 and 15 kV, not which supply each is for",
    }
}

/// Millimetres, told from the limit beside them.
fn mm(value: f64, limit: f64) -> String {
    let shown = grouped(value);
    if shown == grouped(limit) && value != limit {
        told_from(value, limit, 1)
    } else {
        shown
    }
}

// ---- what is typed ----

/// A length that cannot be used.
pub(super) fn unreadable(called: &str, why: &str) -> Finding {
    found(
        Grade::Look,
        format!("{called} counts as not given: {why}."),
        typed(),
    )
}

pub(super) fn slack(percent: f64) -> Finding {
    let limit = &measure::SLACK_PERCENT;
    found(
        Grade::Look,
        format!("No length of a lead is taken from the drawing: {limit}, but is {percent}."),
        typed(),
    )
}

pub(super) fn half_a_place() -> Finding {
    found(
        Grade::Note,
        "The place of the supplies needs both how far right and how far up: no lead is measured on \
         the drawing.",
        typed(),
    )
}

pub(super) fn not_described() -> Finding {
    found(
        Grade::Note,
        "Leads are not described: their lengths, their cable, what they leak and the limits on them \
         were not checked. Describe them under Leads and feed, on the Circuits place.",
        typed(),
    )
}

pub(super) fn leads_not_given(without: usize, of: usize, limits: &[String]) -> Finding {
    let which = if without == of {
        "Lead lengths are not given".to_owned()
    } else {
        format!("Lead lengths of {without} of {of} circuits are not given")
    };
    let limits = if limits.is_empty() {
        String::new()
    } else {
        format!(" ({})", limits.join("; "))
    };
    found(
        Grade::Note,
        format!(
            "{which}: the limits on lead lengths{limits} were not checked for them. Type the \
             lengths, or where the supplies stand."
        ),
        typed(),
    )
}

/// A limit in a few words.
pub(super) fn limit_words(rule: &Rule) -> Option<String> {
    let value = rule.value?;
    let clause = if rule.clause.is_empty() {
        String::new()
    } else {
        format!(", {}", rule.clause)
    };
    Some(format!("at most {} mm{clause}", grouped(value)))
}

pub(super) fn jumpers_not_given() -> Finding {
    found(
        Grade::Note,
        "Lengths of some jumpers are not known, nor what they leak: pieces given by the lengths of \
         their strokes have no place on the drawing. Type a length for jumpers.",
        typed(),
    )
}

/// Pieces by name, as many as can be read in a sentence; None where there are none.
fn named(pieces: &[&str]) -> Option<String> {
    const MOST_NAMED: usize = 3;
    let mut named: Vec<String> = pieces
        .iter()
        .take(MOST_NAMED)
        .map(|name| quoted(name))
        .collect();
    if pieces.len() > MOST_NAMED {
        named.push(format!("{} more", pieces.len() - MOST_NAMED));
    }
    let last = named.pop()?;
    Some(if named.is_empty() {
        last
    } else {
        format!("{} and {last}", named.join(", "))
    })
}

pub(super) fn no_such_circuits(first: &[&str]) -> Option<Finding> {
    Some(found(
        Grade::Note,
        format!(
            "Leads are typed for a circuit that begins with {}, and none does now: they are not used.",
            named(first)?
        ),
        typed(),
    ))
}

pub(super) fn several_circuits(first: &[&str]) -> Option<Finding> {
    Some(found(
        Grade::Note,
        format!(
            "Several circuits begin with a piece called {}: the leads typed for it count for each.",
            named(first)?
        ),
        typed(),
    ))
}

pub(super) fn typed_twice(first: &[&str]) -> Option<Finding> {
    Some(found(
        Grade::Look,
        format!(
            "Leads are typed twice for the circuit that begins with {}: the first are used.",
            named(first)?
        ),
        typed(),
    ))
}

// ---- the cable ----

pub(super) fn no_cable() -> Finding {
    found(
        Grade::Note,
        "No cable is chosen: what leads leak, and whether their insulation is made for the volts, \
         was not checked.",
        typed(),
    )
}

pub(super) fn cable_gone(name: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "The cable {} is not in the shop book: what leads leak, and whether their insulation is \
             made for the volts, was not checked.",
            quoted(name)
        ),
        typed(),
    )
}

pub(super) fn two_cables(name: &str) -> Finding {
    found(
        Grade::Look,
        format!("Two cables are called {}: the first is used.", quoted(name)),
        entry(),
    )
}

pub(super) fn cable_contradicts(name: &str, wrong: &[String]) -> Finding {
    found(
        Grade::Look,
        format!(
            "The cable {} cannot be worked with, so leads are not checked against it: {}.",
            quoted(name),
            wrong.join("; ")
        ),
        entry(),
    )
}

pub(super) fn rated_volts_unknown(name: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "The volts that {} is rated for are not in the shop book: whether its insulation is made \
             for the no-load volts was not checked.",
            quoted(name)
        ),
        entry(),
    )
}

pub(super) fn no_capacitance(name: &str, why: &str) -> Finding {
    found(
        Grade::Note,
        format!(
            "What leads of {} leak was not worked out: {why}.",
            quoted(name)
        ),
        typed(),
    )
}

pub(super) fn cable_volts(name: &str, rated: f64, no_load: Volts, word: EarthWord) -> Finding {
    found(
        Grade::Stop,
        format!(
            "The cable {} is rated for {}; with no load its leads stand at {} to {}.",
            quoted(name),
            volts_shown(Volts::from_volts(rated)),
            volts_shown(no_load),
            word.word()
        ),
        derived(),
    )
    .with(no_load.volts(), rated, "V")
}

// ---- lengths and distances ----

const fn run_words(run: LeadRun) -> &'static str {
    match run {
        LeadRun::MetalConduit => "in metal conduit",
        LeadRun::PlasticConduit => "in conduit that is not metal",
        LeadRun::FreeAir => "in free air",
    }
}

pub(super) fn too_long(
    called: &str,
    length: Length,
    limit: f64,
    run: LeadRun,
    source: Source,
) -> Finding {
    found(
        Grade::Stop,
        format!(
            "{called} is {} mm long {}; the limit is {} mm from the supply to the first electrode.",
            mm(length.mm(), limit),
            run_words(run),
            grouped(limit)
        ),
        source,
    )
    .with(length.mm(), limit, "mm")
}

pub(super) fn longer_than_plate(called: &str, length: Length, longest: Length) -> Finding {
    found(
        Grade::Stop,
        format!(
            "{called} is {} mm long; the supply's plate allows {} mm.",
            mm(length.mm(), longest.mm()),
            grouped(longest.mm())
        ),
        Source::entry("the supply's entry"),
    )
    .with(length.mm(), longest.mm(), "mm")
}

pub(super) fn too_near(
    plastic: bool,
    clear: f64,
    limit: f64,
    word: EarthWord,
    source: Source,
) -> Finding {
    let (whose, from) = if plastic {
        (
            "The conduit of the leads",
            format!("{} parts", word.joined()),
        )
    } else {
        ("The leads", "other parts".to_owned())
    };
    found(
        Grade::Stop,
        format!(
            "{whose} can be at most {} mm from {from}, by the distance typed less half the cable; the \
             limit is at least {} mm.",
            mm(clear, limit),
            told_limit(limit)
        ),
        source,
    )
    .with(clear, limit, "mm")
}

/// A distance as a code gives it, without noughts behind.
fn told_limit(limit: f64) -> String {
    let text = format!("{limit:.2}");
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

pub(super) fn distance_not_given(limit: f64, word: EarthWord, source: Source) -> Finding {
    found(
        Grade::Note,
        format!(
            "The distance of the leads from {} parts is not given, so it was not checked: at least {} \
             mm.",
            word.joined(),
            told_limit(limit)
        ),
        source,
    )
}

pub(super) fn from_conduit_wall(limit: f64, word: EarthWord, source: Source) -> Finding {
    found(
        Grade::Note,
        format!(
            "The distance typed is from the middle of the cable; the limit, {} mm, counts from the wall \
             of the conduit to {} parts: measure it there too.",
            told_limit(limit),
            word.joined()
        ),
        source,
    )
}

pub(super) fn no_width(source: Source) -> Finding {
    found(
        Grade::Look,
        "The outer diameter of the cable is not in the shop book: the leads are nearer by half of it \
         than the distance typed.",
        source,
    )
}

pub(super) fn no_slack() -> Finding {
    found(
        Grade::Look,
        "Lengths of leads are taken straight from the drawing with no slack and nothing for the ends: \
         as they are run they are longer.",
        typed(),
    )
}

pub(super) fn free_air_not_limited() -> Finding {
    found(
        Grade::Look,
        "The rule set limits the length of leads in conduit only: of leads in free air no length was \
         checked. See whether it allows them at all.",
        typed(),
    )
}

// ---- what leads leak ----

pub(super) fn lost(grade: Grade, sum: f64, share: f64, limit: f64, word: EarthWord) -> Finding {
    let (percent, most) = (share * 100.0, limit * 100.0);
    let then = if grade == Grade::Stop {
        "what is worked out of this circuit does not hold"
    } else {
        "measure the current of the tubes"
    };
    found(
        grade,
        format!(
            "Leads and jumpers leak {sum:.2} mA to {} in all, at worst {} % of the current of a string, \
             above {most} %: {then}.",
            word.word(),
            told_from(percent, most, 1)
        ),
        Source::own_choice(),
    )
    .with(percent, most, "%")
}

pub(super) fn trips(
    grade: Grade,
    difference: f64,
    trip: f64,
    limit: f64,
    word: EarthWord,
) -> Finding {
    let then = if grade == Grade::Stop {
        "it would switch off with no fault"
    } else {
        "it may switch off with no fault"
    };
    found(
        grade,
        format!(
            "With no fault, leads and jumpers drive {} mA through the {}-fault protection, which trips \
             at {trip} mA: {then}.",
            told_from(difference, limit, 2),
            word.word()
        ),
        Source::own_choice(),
    )
    .with(difference, limit, "mA")
}

pub(super) fn trip_unknown(difference: f64, word: EarthWord) -> Finding {
    found(
        Grade::Note,
        format!(
            "With no fault, leads and jumpers drive {difference:.2} mA through the {}-fault \
             protection; its trip current is not in the shop book, so it was not held against it.",
            word.word()
        ),
        Source::entry("the supply's entry"),
    )
}

pub(super) fn frequency_unknown(supply: &str) -> Finding {
    found(
        Grade::Note,
        format!(
            "What the leads of {} leak was not worked out: its output frequency is not in the shop book.",
            quoted(supply)
        ),
        Source::entry("the supply's entry"),
    )
    .at(Place::Supply(supply.to_owned()))
}

pub(super) fn harmonics() -> Finding {
    found(
        Grade::Note,
        "What leads leak is worked out for a sine. The volts of tubes on an iron transformer are nearer \
         to a square wave, whose steep sides drive spikes through a capacitance: more leaks than is \
         shown.",
        Source::model(),
    )
}

// ---- advice ----

/// Whether what leaks on one side goes against the other.
pub(super) const fn balances(earthing: OutputEarthing) -> bool {
    matches!(
        earthing,
        OutputEarthing::MidPoint | OutputEarthing::MidPointReturn
    )
}

pub(super) fn equal_leads(a: Length, b: Length) -> String {
    format!(
        "Make both leads equally long (A is {} mm, B is {} mm): what they leak then cancels at the \
         mid-point.",
        grouped(a.mm()),
        grouped(b.mm())
    )
}

pub(super) fn shorter() -> String {
    "Make the leads shorter: what they leak goes with their length.".to_owned()
}

pub(super) fn nearer_supply() -> String {
    "Stand the supply nearer to the first and the last electrode, as far from one as from the other."
        .to_owned()
}

pub(super) fn less_capacitance() -> String {
    "Run them with more air around: wider conduit, conduit that is not metal, or further from earthed \
     parts, as far as the rules allow."
        .to_owned()
}
