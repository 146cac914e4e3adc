//! The sentences of this room. The place is set by whoever works the circuit up.

use super::assess::{Half, STRIKE_LOOK};
use super::load::Operating;
use super::window::{Basis, Window, Zone};
use crate::measure::{Milliamps, Volts, volts_shown};
use crate::rules::{Finding, Grade, Place, Source};
use crate::supply::Rating;

fn found(grade: Grade, says: String, source: Source) -> Finding {
    Finding::new(grade, Place::Job, says, source)
}

fn source(window: &Window) -> Source {
    if window.from_plate {
        Source::entry()
    } else {
        Source::model()
    }
}

fn of_basis(window: &Window) -> &'static str {
    match window.basis {
        Basis::NoLoad => "of no-load volts",
        Basis::RatedLoad => "of the rated load volts",
    }
}

/// The loading in its window.
pub(super) fn zone(half: &Half, window: &Window, rating: &Rating) -> Option<Finding> {
    let percent = half.share * 100.0;
    let basis = of_basis(window);
    let finding = |grade, says: String, limit: f64| {
        Some(found(grade, says, source(window)).with(percent, limit * 100.0, "%"))
    };
    match half.zone {
        Zone::UnderTarget | Zone::Target | Zone::OverTarget => None,
        Zone::Light => finding(
            Grade::Look,
            format!(
                "Underloaded: running volts are {percent:.0} % {basis}, under {:.0} %; the tubes \
                 and electrodes carry nearly the short-circuit current.",
                window.look_below * 100.0
            ),
            window.look_below,
        ),
        Zone::Heavy => finding(
            Grade::Look,
            format!(
                "Heavily loaded: running volts are {percent:.0} % {basis}, over {:.0} %; it may \
                 flicker or fail to strike when cold or on low mains.",
                window.look_above * 100.0
            ),
            window.look_above,
        ),
        Zone::Over => match half.operating {
            Operating::Overloaded { wanted, given } => Some(
                found(
                    Grade::Stop,
                    format!(
                        "Overloaded: the string wants {} where {} gives at most {}; there is no \
                         current at which it runs.",
                        volts_shown(wanted),
                        rating.name,
                        volts_shown(given)
                    ),
                    source(window),
                )
                .with(wanted.volts(), given.volts(), "V"),
            ),
            Operating::Runs { gaps, .. } => finding(
                Grade::Stop,
                format!(
                    "Overloaded: running volts are {percent:.0} % {basis}, at or over {:.0} %{}.",
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
            "{:.1} mA is above the {} mA that {tube} stands: more glass on it, or a smaller supply.",
            current.ma(),
            most.ma()
        ),
        Source::entry(),
    )
    .with(current.ma(), most.ma(), "mA")
}

pub(super) fn overdriven_at_high_mains(current: Milliamps, most: Milliamps, tube: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "At 110 % of the input volts the current is {:.1} mA, above the {} mA that {tube} stands.",
            current.ma(),
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
            "{:.1} mA is under the {} mA at which {tube} runs steadily.",
            current.ma(),
            least.ma()
        ),
        Source::entry(),
    )
    .with(current.ma(), least.ma(), "mA")
}

pub(super) fn strike(needed: Volts, peak: Volts) -> Option<Finding> {
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
                "Striking needs about {}; the no-load peak is {}.",
                volts_shown(needed),
                volts_shown(peak)
            ),
            Source::model(),
        )
        .with(needed.volts(), peak.volts(), "V"),
    )
}

pub(super) fn low_mains(share: f64, window: &Window) -> Finding {
    found(
        Grade::Look,
        format!(
            "At 90 % of the input volts it is overloaded ({:.0} % {}): it may go out when the mains \
             sag.",
            share * 100.0,
            of_basis(window)
        ),
        Source::model(),
    )
    .with(share * 100.0, window.stop_from * 100.0, "%")
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
