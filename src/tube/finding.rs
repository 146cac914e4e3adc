//! The sentences of this room: contradictions of tube types and electrodes, and bench readings that
//! are not used.

use super::line::Interval;
use super::measured::{APART_PERCENT, MOST_PERCENT};
use super::{
    Electrode, MODEL_MA, MOST_EXPONENT, MOST_PAIR_VOLTS, MOST_VOLTS_PER_M, Measured, model,
};
use crate::book::{ElectrodeEntry, Reading, TubeEntry};
use crate::measure::{Length, quoted};
use crate::rules::{Finding, Grade, Place, Source};

/// Greatest outer diameter of glass there is, millimetres.
pub(super) const MOST_OUTER_MM: f64 = 60.0;
/// Greatest current of a tube or an electrode, milliamperes.
pub(super) const MOST_MA: f64 = 1_000.0;

/// What contradicts itself in an electrode's entry.
pub(super) fn of_electrode(entry: &ElectrodeEntry) -> Vec<Finding> {
    let mut wrong = Vec::new();
    let mut stop = |says: String| {
        wrong.push(Finding::new(
            Grade::Stop,
            Place::Electrode(entry.name.clone()),
            says,
            Source::entry("the electrode's entry"),
        ));
    };
    for (name, value, most, unit) in [
        ("Rated current", entry.rated_ma, MOST_MA, "mA"),
        ("Least glass", entry.least_outer_mm, MOST_OUTER_MM, "mm"),
        ("Greatest glass", entry.most_outer_mm, MOST_OUTER_MM, "mm"),
    ] {
        if let Some(value) = value
            && !(value > 0.0 && value <= most)
        {
            stop(format!(
                "{name} must be above 0 and at most {most} {unit}, but is {value}."
            ));
        }
    }
    if let (Some(least), Some(most)) = (entry.least_outer_mm, entry.most_outer_mm)
        && least > most
    {
        stop(format!(
            "The least glass it fits, {least} mm, is above the greatest, {most} mm."
        ));
    }
    wrong
}

/// The tube names an electrode that is not in the book.
pub(super) fn no_electrode(tube: &str, named: &str) -> Finding {
    Finding::new(
        Grade::Look,
        Place::Tube(tube.to_owned()),
        format!(
            "The electrode {} is not in the shop book: whether it fits the glass and stands the \
             current is not checked. Choose one of the book, or add it.",
            quoted(named)
        ),
        Source::entry("the tube's entry"),
    )
}

/// Two electrodes of one name.
pub(super) fn two_electrodes(named: &str) -> Finding {
    Finding::new(
        Grade::Look,
        Place::Electrode(named.to_owned()),
        format!(
            "Two electrodes are called {}: the first is used.",
            quoted(named)
        ),
        Source::entry("the electrodes' entries"),
    )
}

/// The glass is outside what the electrode fits.
pub(super) fn does_not_fit(tube: &str, outer: Length, electrode: &Electrode) -> Finding {
    let fits = match (electrode.least_outer, electrode.most_outer) {
        (Some(least), Some(most)) => format!("{} to {} mm", least.mm(), most.mm()),
        (Some(least), None) => format!("{} mm and more", least.mm()),
        (None, Some(most)) => format!("up to {} mm", most.mm()),
        (None, None) => "any".to_owned(),
    };
    let limit = match electrode.least_outer {
        Some(least) if outer < least => least,
        _ => electrode.most_outer.unwrap_or(outer),
    };
    Finding::new(
        Grade::Stop,
        Place::Tube(tube.to_owned()),
        format!(
            "The electrode {} does not fit: it is for glass of {fits} outer diameter, but the tube \
             has {} mm.",
            quoted(&electrode.name),
            outer.mm()
        ),
        Source::entry("the electrode's entry"),
    )
    .with(outer.mm(), limit.mm(), "mm")
}

/// Volts further from the default model than this factor are doubted; the model itself claims a
/// quarter at worst.
const FAR_FACTOR: f64 = 1.5;

/// Why bench readings are not used. Readings are places in the entry's list.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Refusal {
    /// More than anybody types.
    TooMany { count: usize },
    /// A figure no bench gives.
    Beyond {
        reading: usize,
        what: &'static str,
        unit: &'static str,
        least: f64,
        most: f64,
        found: f64,
    },
    /// The same length and current, volts far apart.
    Contradict { readings: [usize; 2], percent: f64 },
    /// One length only at every current.
    OneLength,
    /// No current with a reading more than it takes to draw a line.
    TooFew,
    /// Fewer volts on more glass.
    Falls { ma: f64, volts_per_m: f64 },
    /// Volts per metre that cannot be.
    VoltsPerMetre(Interval),
    /// Volts of an electrode pair that cannot be.
    PairVolts(Interval),
    /// An exponent that cannot be.
    Exponent(Interval),
    /// Too much scatter to say anything.
    Scatter { percent: f64 },
}

/// Most readings of one tube type.
const MOST_READINGS: usize = 200;
/// What a bench can read: name, unit, least and most.
const LENGTH: (&str, &str, f64, f64) = ("length", "mm", 50.0, 20_000.0);
const CURRENT: (&str, &str, f64, f64) = ("current", "mA", 1.0, MOST_MA);
const VOLTS: (&str, &str, f64, f64) = ("volts", "V", 50.0, 30_000.0);

/// Readings with figures no bench gives.
pub(super) fn beyond_limits(readings: &[Reading]) -> Vec<Refusal> {
    if readings.len() > MOST_READINGS {
        let count = readings.len();
        return vec![Refusal::TooMany { count }];
    }
    let figures = readings.iter().enumerate().flat_map(|(reading, read)| {
        [
            (reading, LENGTH, read.length_mm),
            (reading, CURRENT, read.ma),
            (reading, VOLTS, read.volts),
        ]
    });
    figures
        .filter(|&(_, (.., least, most), found)| !(least..=most).contains(&found))
        .map(
            |(reading, (what, unit, least, most), found)| Refusal::Beyond {
                reading,
                what,
                unit,
                least,
                most,
                found,
            },
        )
        .collect()
}

impl Refusal {
    fn says(&self) -> String {
        match *self {
            Self::TooMany { count } => format!(
                "there are {count}, more than the {MOST_READINGS} that are fitted; keep the best"
            ),
            Self::Beyond {
                reading,
                what,
                unit,
                least,
                most,
                found,
            } => format!(
                "the {what} of reading {} must be {least} to {most} {unit}, but is {found}",
                reading + 1
            ),
            Self::Contradict {
                readings: [a, b],
                percent,
            } => format!(
                "readings {} and {} are of one length and current, but their volts are {percent:.0} \
                 % apart, over {APART_PERCENT} %; read them again, or remove the wrong one",
                a + 1,
                b + 1
            ),
            Self::OneLength => "at no current were two different lengths read, and only they tell the \
                                column from the electrodes; read a longer or a shorter tube too (2 % \
                                and less is one length)"
                .to_owned(),
            Self::TooFew => "at no current are there three readings of two or more lengths, and two \
                             lie on a line whatever they are; read a third tube at one of the currents"
                .to_owned(),
            Self::Falls { ma, volts_per_m } => format!(
                "at {ma:.1} mA the volts fall by {:.0} V for each metre more, but must rise; look for \
                 lengths or volts that were changed round",
                -volts_per_m
            ),
            Self::VoltsPerMetre(found) => format!(
                "they give {} V/m, which must be above 0 and at most {MOST_VOLTS_PER_M}; look for \
                 lengths or volts that were changed round",
                within(found, 0)
            ),
            Self::PairVolts(found) if found.most() <= 0.0 => format!(
                "they give {} V for a pair of electrodes, surely below 0, which cannot be; look for \
                 lengths measured over the electrodes, or volts that were changed round",
                within(found, 0)
            ),
            Self::PairVolts(found) if found.value <= 0.0 => format!(
                "they give {} V for a pair of electrodes, which must be above 0: they cannot tell \
                 electrodes from column; read shorter tubes too",
                within(found, 0)
            ),
            Self::PairVolts(found) => format!(
                "they give {} V for a pair of electrodes, which must be at most {MOST_PAIR_VOLTS}; \
                 look for lengths or volts that were changed round",
                within(found, 0)
            ),
            Self::Exponent(found) => format!(
                "the exponent of the fall with current must be 0 to {MOST_EXPONENT}, but they give \
                 {}; look for currents or volts that were changed round",
                within(found, 2)
            ),
            Self::Scatter { percent } => format!(
                "they scatter so much that the volts are only known to ±{percent:.1} %, over \
                 {MOST_PERCENT} %; read more tubes, or look for the odd one"
            ),
        }
    }
}

/// A figure and what it may be off by.
fn within(figure: Interval, decimals: usize) -> String {
    format!("{:.decimals$} ± {:.decimals$}", figure.value, figure.half).replace('-', "\u{2212}")
}

/// Readings that are not used, one finding for each reason.
pub(super) fn not_used(entry: &TubeEntry, refusals: &[Refusal]) -> Vec<Finding> {
    const MOST_TOLD: usize = 5;
    let stays = match entry.volts_per_m {
        Some(_) => "The volts as entered are used.",
        None => "The default model is used.",
    };
    let more = refusals.len().saturating_sub(MOST_TOLD);
    let more = (more > 0).then(|| format!("{more} more reasons like these"));
    refusals
        .iter()
        .take(MOST_TOLD)
        .map(Refusal::says)
        .chain(more)
        .map(|why| {
            of_readings(
                Grade::Look,
                entry,
                format!("The bench readings are not used: {why}. {stays}"),
            )
        })
        .collect()
}

/// What is to be said of readings that are used.
pub(super) fn of_measured(entry: &TubeEntry, measured: &Measured) -> Vec<Finding> {
    let mut found = Vec::new();
    for (at, point) in measured.points.iter().enumerate() {
        let Some(reading) = entry.readings.get(at).filter(|_| point.odd) else {
            continue;
        };
        found.push(of_readings(
            Grade::Look,
            entry,
            format!(
                "Reading {} does not lie with the others: {:.0} V were read where they give {:.0} V. \
                 It is used all the same; read it again, or remove it.",
                at + 1,
                reading.volts,
                point.fitted
            ),
        ));
    }
    found.extend(far_from_model(entry, measured));
    let mut note = |says: String| found.push(of_readings(Grade::Note, entry, says));
    match measured.exponent_fit {
        None => note(format!(
            "The bench readings do not tell how the volts fall with current: the exponent stays {}, {}. \
             Readings at two currents well apart tell it.",
            measured.exponent,
            match entry.exponent {
                Some(_) => "as entered",
                None => "the default model's",
            }
        )),
        Some(fitted) if fitted.value != measured.exponent => note(format!(
            "The bench readings give an exponent of {}; {} is used, the nearest there is.",
            within(fitted, 2),
            measured.exponent
        )),
        Some(_) => {}
    }
    if entry.volts_per_m.is_some() || entry.pair_volts.is_some() {
        note(
            "Volts are typed in beside the bench readings: the readings are used. To use what is \
             typed, remove the readings."
                .to_owned(),
        );
    }
    found
}

/// Readings that give volts unlike any tube of this gas and bore: a slip in a length or a meter's range
/// lies as well on a line as the truth.
fn far_from_model(entry: &TubeEntry, measured: &Measured) -> Option<Finding> {
    let bore_mm = entry.outer_mm? - 2.0 * entry.wall_mm.unwrap_or(1.0);
    if bore_mm.is_nan() || bore_mm <= 0.0 {
        return None;
    }
    let usual = model(entry.gas, bore_mm);
    let by_model = usual.pair_volts
        + usual.volts_per_m
            * measured.typical.m()
            * (MODEL_MA / measured.at_ma).powf(usual.exponent);
    let by_readings = measured.volts(measured.typical, measured.at_ma);
    let factor = by_readings / by_model;
    if (1.0 / FAR_FACTOR..=FAR_FACTOR).contains(&factor) {
        return None;
    }
    let says = format!(
        "The bench readings give {by_readings:.0} V for a tube of {:.0} mm at {} mA, the default model \
         {by_model:.0} V: are the gas, the bore, the lengths and the meter's range right?",
        measured.typical.mm(),
        measured.at_ma
    );
    Some(of_readings(Grade::Look, entry, says).with(by_readings, by_model, "V"))
}

fn of_readings(grade: Grade, entry: &TubeEntry, says: String) -> Finding {
    Finding::new(
        grade,
        Place::Tube(entry.name.clone()),
        says,
        Source::bench(),
    )
}
