//! Reading points: how far across and how far up, with a comma between, as in `600 mm, 1' 6"`.
//!
//! A comma may also be the decimal sign of either length. It parts the two where only so both can be
//! read: `12,5, 30` is 12.5 across. Where more than one comma would do, as in `12,5,30`, nothing is
//! guessed.

use super::read::{ExactLength, LengthUnit, ReadError, length, quoted, with_units};

/// More commas than any point has; each is looked at.
const MOST_COMMAS: usize = 20;

/// Reads one point: across, then up. A bare number takes `bare`.
///
/// # Errors
/// A [`ReadError`] with the place in the text, or in the one of its lengths that cannot be read.
pub fn point(text: &str, bare: LengthUnit) -> Result<[ExactLength; 2], ReadError> {
    let (across, up) = parted(text)?;
    Ok([length(across, bare)?, length(up, bare)?])
}

/// The points of a text, parted by semicolons, with `bare` written out wherever a number had no unit.
/// A point that cannot be read stays as it was.
pub fn points_with_units(text: &str, bare: LengthUnit) -> String {
    let written = |text: &str| match parted(text) {
        Ok((across, up)) => format!("{},{}", with_units(across, bare), with_units(up, bare)),
        Err(_) => text.to_owned(),
    };
    text.split(';').map(written).collect::<Vec<_>>().join(";")
}

/// The two lengths of a point.
fn parted(text: &str) -> Result<(&str, &str), ReadError> {
    const EXPECTED: &str = "one comma, between across and up";
    if let Some((at, _)) = text.match_indices(',').nth(MOST_COMMAS) {
        return Err(ReadError::new(text, text[..at].chars().count(), EXPECTED));
    }
    let reads = |text: &str| length(text, LengthUnit::Millimetres).is_ok();
    let ways = || {
        text.match_indices(',')
            .map(|(at, comma)| (&text[..at], &text[at + comma.len()..]))
    };
    let mut good = ways().filter(|(across, up)| reads(across) && reads(up));
    match (good.next(), good.next()) {
        (Some(way), None) => Ok(way),
        (Some((one, rest)), Some((more, other))) => {
            let hint = format!(
                "it could be {} across and {} up, or {} and {}: write decimals with a point",
                quoted(one.trim()),
                quoted(rest.trim()),
                quoted(more.trim()),
                quoted(other.trim())
            );
            let at = one.chars().count();
            Err(ReadError::new(text, at, EXPECTED).hint(hint))
        }
        // What is wrong with it, the reader says best: of the comma with a space after it, if there
        // is one, else of the first.
        (None, _) => ways()
            .find(|(_, up)| up.starts_with(char::is_whitespace))
            .or_else(|| ways().next())
            .ok_or_else(|| {
                let end = text.trim_end().chars().count();
                ReadError::new(text, end, "a comma and how far up the point is")
                    .hint("a point is written as 600 mm, 300 mm")
            }),
    }
}
