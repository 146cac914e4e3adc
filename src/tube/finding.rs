//! The sentences of this room: contradictions of tube types and electrodes, and bench readings that
//! are not used.

use super::Electrode;
use crate::book::ElectrodeEntry;
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
