//! Showing figures: one rounding, at the end, with the unit.

use super::{Length, Milliamps, Volts};

/// What a person reads lengths in.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Units {
    /// Millimetres and metres.
    #[default]
    Metric,
    /// Feet and inches, to the nearest sixteenth.
    FeetInches,
}

/// A whole number with thin spaces between thousands: `5 004`.
#[allow(
    clippy::cast_possible_truncation,
    reason = "rounded and kept inside i64 just before"
)]
pub fn grouped(value: f64) -> String {
    if !value.is_finite() {
        return "–".to_owned();
    }
    let whole = value.round().clamp(-1e15, 1e15) as i64;
    let digits = whole.unsigned_abs().to_string();
    let mut out = String::new();
    if whole < 0 {
        out.push('−');
    }
    for (i, c) in digits.chars().enumerate() {
        if i > 0 && (digits.len() - i).is_multiple_of(3) && digits.len() > 3 {
            out.push('\u{202f}');
        }
        out.push(c);
    }
    out
}

/// A length for a place on the sign: whole millimetres, or feet and inches to the nearest sixteenth
/// (a tie goes up).
pub fn length_shown(length: Length, units: Units) -> String {
    match units {
        Units::Metric => format!("{} mm", grouped(length.mm())),
        Units::FeetInches => feet_inches(length, 16),
    }
}

/// A length so fine that reading it back gives the typed length: thousandths of a millimetre, or
/// 64ths of an inch.
pub fn length_exact(length: Length, units: Units) -> String {
    match units {
        Units::Metric => {
            let text = format!("{:.3}", length.mm());
            let text = text.trim_end_matches('0').trim_end_matches('.');
            format!("{text} mm")
        }
        Units::FeetInches => feet_inches(length, 64),
    }
}

/// A sum of glass: metres or feet, two decimals.
pub fn glass(length: Length, units: Units) -> String {
    match units {
        Units::Metric => format!("{:.2} m", length.m()),
        Units::FeetInches => format!("{:.2} ft", length.mm() / 304.8),
    }
}

/// Volts: whole volts below 10 kV are still volts, since limits are given so.
pub fn volts_shown(volts: Volts) -> String {
    format!("{} V", grouped(volts.volts()))
}

/// Milliamperes, one decimal.
pub fn milliamps_shown(current: Milliamps) -> String {
    if current.ma().is_finite() {
        format!("{:.1} mA", current.ma())
    } else {
        "– mA".to_owned()
    }
}

/// A figure to so many decimals, or to as many as it takes to tell it from the limit beside it:
/// "70 %, over 70 %" would not be believed.
pub fn told_from(value: f64, limit: f64, decimals: usize) -> String {
    const MOST: usize = 3;
    (decimals..MOST)
        .map(|decimals| format!("{value:.decimals$}"))
        .find(|shown| shown.parse::<f64>().is_ok_and(|shown| shown != limit))
        .unwrap_or_else(|| format!("{value:.MOST$}"))
}

/// A sentence begun small as it begins on its own.
pub(crate) fn large_first(text: &str) -> String {
    let mut chars = text.chars();
    chars.next().map_or_else(String::new, |first| {
        first.to_uppercase().chain(chars).collect()
    })
}

/// A sentence as it stands after a colon.
pub(crate) fn small_first(text: &str) -> String {
    let mut chars = text.chars();
    chars.next().map_or_else(String::new, |first| {
        first.to_lowercase().chain(chars).collect()
    })
}

#[allow(
    clippy::cast_possible_truncation,
    reason = "rounded and kept inside i64 just before"
)]
fn feet_inches(length: Length, parts: i64) -> String {
    #[allow(clippy::cast_precision_loss, reason = "16 or 64")]
    let ticks = (length.mm() / 25.4 * parts as f64 + 0.5)
        .floor()
        .clamp(0.0, 1e15) as i64;
    let (inches, over) = (ticks / parts, ticks % parts);
    let (feet, inches) = (inches / 12, inches % 12);
    let mut out = String::new();
    if feet > 0 {
        out = format!("{feet} ft ");
    }
    if over == 0 {
        return out + &format!("{inches} in");
    }
    let shared = 1 << over.trailing_zeros().min(parts.trailing_zeros());
    if inches > 0 || feet > 0 {
        // `4 ft 0 1/16 in`: without the nought the sixteenth is easily read as part of the feet.
        out.push_str(&inches.to_string());
        out.push(' ');
    }
    out + &format!("{}/{} in", over / shared, parts / shared)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_figure_is_told_from_its_limit() {
        assert_eq!(told_from(71.2, 75.0, 0), "71");
        assert_eq!(told_from(75.2, 75.0, 0), "75.2");
        assert_eq!(told_from(30.04, 30.0, 1), "30.04");
        assert_eq!(told_from(30.000_01, 30.0, 1), "30.000");
    }
}
