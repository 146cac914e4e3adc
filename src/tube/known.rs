//! How the volts of a tube type are known, and how far off they may be.

use crate::measure::quoted;

/// How the volts of a tube type are known.
#[derive(Debug, Clone, PartialEq)]
pub enum Known {
    /// The default model gave the volts per metre.
    Model {
        /// How far off they may be, percent either way.
        percent: f64,
    },
    /// Typed into the book; how far off they may be is not known.
    Entered,
    /// Fitted to readings at the shop's own bench.
    Measured {
        /// When they were taken, as typed; empty: not given.
        on: String,
        /// How many readings.
        readings: usize,
        /// How far off the volts of a typical piece may be, percent either way, 95 times in 100.
        percent: f64,
        /// Least current that was read, milliamperes.
        from_ma: f64,
        /// Greatest current that was read, milliamperes.
        to_ma: f64,
    },
}

impl Known {
    /// In a few words, to stand after the figures.
    pub fn words(&self) -> String {
        match self {
            Self::Model { percent } => format!("model, ±{percent} %"),
            Self::Entered => "as entered".to_owned(),
            Self::Measured {
                on,
                readings,
                percent,
                ..
            } => {
                let on = day(on);
                format!("measured here{on}, {readings} readings, ±{percent} %")
            }
        }
    }
}

/// A date as it follows "measured here": `2026-05-03` is " on 3 May 2026"; anything else stands in
/// quotes as it was typed.
pub(super) fn day(typed: &str) -> String {
    const MONTHS: [&str; 12] = [
        "January",
        "February",
        "March",
        "April",
        "May",
        "June",
        "July",
        "August",
        "September",
        "October",
        "November",
        "December",
    ];
    let typed = typed.trim();
    if typed.is_empty() {
        return String::new();
    }
    let figures: Option<Vec<usize>> = typed
        .split('-')
        .zip([4, 2, 2])
        .map(|(part, digits)| {
            let plain = part.len() == digits && part.bytes().all(|b| b.is_ascii_digit());
            plain.then(|| part.parse().ok()).flatten()
        })
        .collect();
    let whole = typed.split('-').count() == 3;
    if let Some([year, month, day]) = figures.filter(|_| whole).as_deref()
        && let Some(month) = month.checked_sub(1).and_then(|at| MONTHS.get(at))
        && (1..=31).contains(day)
    {
        return format!(" on {day} {month} {year}");
    }
    format!(" ({})", quoted(typed))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn how_a_day_is_told() {
        assert_eq!(day("2026-05-03"), " on 3 May 2026");
        assert_eq!(day(" 2026-12-31 "), " on 31 December 2026");
        assert_eq!(day(""), "");
        for typed in [
            "last spring",
            "2026-13-01",
            "2026-00-01",
            "2026-05-32",
            "2026-05",
            "2026-05-03-1",
            "26-5-3",
            "+026-05-03",
        ] {
            assert_eq!(day(typed), format!(" (“{typed}”)"));
        }
    }

    #[test]
    fn known_in_words() {
        assert_eq!(Known::Model { percent: 15.0 }.words(), "model, ±15 %");
        assert_eq!(Known::Entered.words(), "as entered");
        let measured = |on: &str, percent| Known::Measured {
            on: on.to_owned(),
            readings: 7,
            percent,
            from_ma: 15.0,
            to_ma: 30.0,
        };
        assert_eq!(
            measured("2026-05-03", 2.0).words(),
            "measured here on 3 May 2026, 7 readings, ±2 %"
        );
        assert_eq!(
            measured("", 1.3).words(),
            "measured here, 7 readings, ±1.3 %"
        );
    }
}
