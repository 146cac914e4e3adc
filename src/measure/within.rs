//! Reading a length that must lie within a limit, and may be left empty.

use super::read::{LengthUnit, length};
use super::{Length, Limit};

/// Reads a length in millimetres where no unit is typed. Nothing typed is none. A minus before it is
/// read where the limit allows less than nothing.
///
/// # Errors
/// What is wrong with it, as the rest of a sentence behind a colon, without the full stop.
pub fn length_within(text: &str, limit: &Limit) -> Result<Option<Length>, String> {
    let typed = text.trim();
    if typed.is_empty() {
        return Ok(None);
    }
    let below = typed
        .strip_prefix(['-', '\u{2212}'])
        .filter(|_| limit.least < 0.0);
    let read = length(below.unwrap_or(typed), LengthUnit::Millimetres)
        .map_err(|error| error.to_string())?
        .length()
        .mm();
    // From zero, so that a minus before nothing is nothing.
    let mm = if below.is_some() { 0.0 - read } else { read };
    if limit.holds(mm) {
        Ok(Some(Length::from_mm(mm)))
    } else {
        Err(format!("{limit}, but is {mm} mm"))
    }
}
