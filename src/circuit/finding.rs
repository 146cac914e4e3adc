//! The sentences of this room. The place is set by whoever works the circuit up.

use super::assess::{Assessment, Half, STRIKE_LOOK};
use super::load::Operating;
use super::window::{Window, Zone};
use crate::book::OutputEarthing;
use crate::measure::{Milliamps, Volts, small_first, told_from, volts_shown};
use crate::rules::{Finding, Grade, Place, Source};
use crate::supply::Rating;

fn found(grade: Grade, says: String, source: Source) -> Finding {
    Finding::new(grade, Place::Job, says, source)
}

fn source(window: &Window) -> Source {
    if window.from_plate {
        Source::entry("the supply's entry")
    } else {
        Source::model()
    }
}

/// One string of two, or the only one.
fn half_of(rating: &Rating) -> bool {
    rating.earthing == OutputEarthing::MidPointReturn
}

/// The loading in its window.
pub(super) fn zone(half: &Half, window: &Window, rating: &Rating) -> Option<Finding> {
    let percent = half.share * 100.0;
    let of_what = window.of_what(rating);
    let shown = |limit: f64| told_from(percent, limit * 100.0, 0);
    let finding = |grade, says: String, limit: f64| {
        Some(found(grade, says, source(window)).with(percent, limit * 100.0, "%"))
    };
    match half.zone {
        Zone::UnderTarget | Zone::Target | Zone::OverTarget => None,
        Zone::Light => finding(
            Grade::Look,
            format!(
                "Underloaded: running volts are {} % {of_what}, under {:.0} %; the tubes and \
                 electrodes carry nearly the short-circuit current.",
                shown(window.look_below),
                window.look_below * 100.0
            ),
            window.look_below,
        ),
        Zone::Heavy => finding(
            Grade::Look,
            format!(
                "Heavily loaded: running volts are {} % {of_what}, over {:.0} %; it may flicker or \
                 fail to strike when cold or on low mains.",
                shown(window.look_above),
                window.look_above * 100.0
            ),
            window.look_above,
        ),
        Zone::Over => match half.operating {
            Operating::Overloaded { wanted, given } => Some(
                found(
                    Grade::Stop,
                    format!(
                        "{OVERLOADED}the string wants {} where the supply gives {} {}; there is no \
                         current at which it runs.",
                        volts_shown(wanted),
                        if half_of(rating) {
                            "each of its two strings at most"
                        } else {
                            "at most"
                        },
                        volts_shown(given)
                    ),
                    source(window),
                )
                .with(wanted.volts(), given.volts(), "V"),
            ),
            Operating::Runs { gaps, .. } => finding(
                Grade::Stop,
                format!(
                    "{OVERLOADED}running volts are {percent:.0} % {of_what}, at or over {:.0} %{}.",
                    window.stop_from * 100.0,
                    if gaps {
                        "; the current has gaps and the tube flickers"
                    } else {
                        ""
                    }
                ),
                window.stop_from,
            ),
        },
    }
}

pub(super) fn overdriven(current: Milliamps, most: Milliamps, tube: &str) -> Finding {
    found(
        Grade::Stop,
        format!(
            "{} mA is above the {} mA that {tube} stands: more glass on it, or a supply of less current.",
            told_from(current.ma(), most.ma(), 1),
            most.ma()
        ),
        Source::entry("the tube's entry"),
    )
    .with(current.ma(), most.ma(), "mA")
}

pub(super) fn overdriven_at_high_mains(current: Milliamps, most: Milliamps, tube: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "At 110 % of the input volts the current is {} mA, above the {} mA that {tube} stands.",
            told_from(current.ma(), most.ma(), 1),
            most.ma()
        ),
        Source::model(),
    )
    .with(current.ma(), most.ma(), "mA")
}

pub(super) fn too_little_current(current: Milliamps, least: Milliamps, tube: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "{} mA is under the {} mA at which {tube} runs steadily.",
            told_from(current.ma(), least.ma(), 1),
            least.ma()
        ),
        Source::entry("the tube's entry"),
    )
    .with(current.ma(), least.ma(), "mA")
}

/// The peak a string strikes from, in words.
fn peak_words(rating: &Rating) -> &'static str {
    if half_of(rating) {
        "no-load peak of one half"
    } else {
        "no-load peak"
    }
}

pub(super) fn strike(needed: Volts, peak: Volts, rating: &Rating) -> Option<Finding> {
    let grade = if needed > peak {
        Grade::Stop
    } else if needed > peak * STRIKE_LOOK {
        Grade::Look
    } else {
        return None;
    };
    Some(
        found(
            grade,
            format!(
                "Striking needs about {}; the {} is {}.",
                volts_shown(needed),
                peak_words(rating),
                volts_shown(peak)
            ),
            Source::model(),
        )
        .with(needed.volts(), peak.volts(), "V"),
    )
}

pub(super) fn low_mains(share: f64, window: &Window, rating: &Rating) -> Finding {
    found(
        Grade::Look,
        format!(
            "At 90 % of the input volts it is overloaded ({:.0} % {} it has then): it may go out \
             when the mains sag.",
            share * 100.0,
            window
                .of_what(rating)
                .replacen("of no-load", "of the no-load", 1)
        ),
        Source::model(),
    )
    .with(share * 100.0, window.stop_from * 100.0, "%")
}

pub(super) fn no_strike_at_low_mains(needed: Volts, peak: Volts, rating: &Rating) -> Finding {
    found(
        Grade::Look,
        format!(
            "At 90 % of the input volts it may not strike: that needs about {}, and the {} is then \
             {}.",
            volts_shown(needed),
            peak_words(rating),
            volts_shown(peak)
        ),
        Source::model(),
    )
    .with(needed.volts(), peak.volts(), "V")
}

pub(super) fn needs_two_strings() -> Finding {
    found(
        Grade::Stop,
        "A supply with a mid-point return carries two strings; one piece makes only one."
            .to_owned(),
        Source::model(),
    )
}

pub(super) fn electronic_shape() -> Finding {
    found(
        Grade::Note,
        "Electronic: current is taken to fall in a straight line to the rated load, and the output \
         to hold at 90 to 110 % of the input volts. The plate and a measurement know better."
            .to_owned(),
        Source::model(),
    )
}

pub(super) fn mixed() -> Finding {
    found(
        Grade::Note,
        "Neon and argon-mercury in one string share one current; the stricter window is used, and \
         the brightness of each should be judged by eye."
            .to_owned(),
        Source::practice(),
    )
}

/// What stops a circuit whose tubes take so much `off` (as in "15 % more") of what the default model
/// says, as a look at the circuit that is fine without it.
pub(crate) fn model_off(worked: &Assessment, off: &str) -> Option<Finding> {
    let stop = worked
        .findings
        .iter()
        .find(|finding| finding.grade == Grade::Stop)?;
    let says = stop.says.trim_end_matches('.');
    let what = match (says.strip_prefix(OVERLOADED), stop.unit) {
        (Some(how), _) => format!("it is overloaded: {how}"),
        (None, "mA") => format!("it is overdriven: {says}"),
        (None, _) => format!("it will not strike: {}", small_first(says)),
    };
    Some(Finding {
        grade: Grade::Look,
        says: format!(
            "If its tubes take {off} than the default model says, {what}; bench readings of your own \
             glass settle it."
        ),
        source: Source::model(),
        ..stop.clone()
    })
}

const OVERLOADED: &str = "Overloaded: ";

#[cfg(test)]
mod tests {
    use super::super::{Load, assess};
    use super::*;
    use crate::book::{Loading, SupplyEntry, SupplyKind};

    fn rating(earthing: OutputEarthing) -> Rating {
        Rating::read(&SupplyEntry {
            name: "T".to_owned(),
            no_load_volts: Some(8_000.0),
            short_circuit_ma: Some(30.0),
            kind: Some(SupplyKind::Iron),
            earthing: Some(earthing),
            ..SupplyEntry::default()
        })
        .expect("a whole plate")
    }

    /// A string that takes so many volts at any current.
    fn steady(volts: f64) -> Load {
        Load {
            pair_volts: volts,
            ..Load::new()
        }
    }

    fn says(volts: f64, earthing: OutputEarthing, loading: &Loading) -> Vec<String> {
        let load = steady(volts);
        let two = [&load, &load];
        let strings = if earthing == OutputEarthing::MidPointReturn {
            &two[..]
        } else {
            &two[..1]
        };
        let mut says: Vec<String> = assess(strings, &rating(earthing), loading)
            .findings
            .into_iter()
            .map(|finding| finding.says)
            .collect();
        says.dedup();
        says
    }

    #[test]
    fn shares_say_what_they_are_of() {
        let loading = Loading::default();
        // 3 280 V are 82 % of the 4 000 V of a half.
        let halves = says(3_280.0, OutputEarthing::MidPointReturn, &loading);
        assert!(
            halves[0]
                .starts_with("Overloaded: running volts are 82 % of half the no-load volts, at"),
            "{halves:?}"
        );
        // 5 720 V are 71.5 % of 8 000 V, and 79 % of 7 200 V.
        let whole = says(5_720.0, OutputEarthing::MidPoint, &loading);
        let low = "At 90 % of the input volts it is overloaded (79 % of the no-load volts it has \
                   then): it may go out when the mains sag.";
        assert!(whole.iter().any(|says| says == low), "{whole:?}");
        let halves = says(2_860.0, OutputEarthing::MidPointReturn, &loading);
        assert!(
            halves
                .iter()
                .any(|says| says.contains("(79 % of half the no-load volts it has then)")),
            "{halves:?}"
        );
    }

    #[test]
    fn striking_on_low_mains_is_not_called_overloading() {
        // 55 % of no-load volts: striking at 2.5 times that takes 11 000 V. The peak is 11 314 V,
        // and 10 182 V at 90 % of the input volts.
        let loading = Loading {
            strike_factor: 2.5,
            ..Loading::default()
        };
        let found = says(4_400.0, OutputEarthing::MidPoint, &loading);
        assert_eq!(
            found,
            [
                "Striking needs about 11\u{202f}000 V; the no-load peak is 11\u{202f}314 V.",
                "At 90 % of the input volts it may not strike: that needs about 11\u{202f}000 V, and \
                 the no-load peak is then 10\u{202f}182 V.",
            ]
        );
    }
}
