//! Spreadsheet cells that hold a list: bench readings and length charts.
//!
//! Items are parted by semicolons: `600 mm 25 mA 596 V; 1000 mm 25 mA 830 V`, and `15 mm neon: 9000
//! mm, pair 300 mm; "a; b": 8000 mm`. A name stands in quotes where it holds `;`, `:` or a quote, is
//! empty, or begins or ends with a space; a quote inside quotes is written twice.

use super::{ChartLength, Reading};
use crate::measure::{self, quoted};

/// Bench readings as a cell.
pub(super) fn readings_cell(readings: &[Reading]) -> String {
    let one = |read: &Reading| format!("{} mm {} mA {} V", read.length_mm, read.ma, read.volts);
    joined(readings.iter().map(one))
}

/// A length chart as a cell.
pub(super) fn chart_cell(chart: &[ChartLength]) -> String {
    let one = |length: &ChartLength| {
        let pair = length.pair_mm;
        let pair = pair.map_or_else(String::new, |pair| format!(", pair {pair} mm"));
        format!("{}: {} mm{pair}", named(&length.tube), length.longest_mm)
    };
    joined(chart.iter().map(one))
}

/// Reads bench readings.
///
/// # Errors
/// What was expected, as the rest of a sentence.
pub(super) fn readings_of(text: &str) -> Result<Vec<Reading>, String> {
    let items = text.split(';').map(str::trim);
    let items = items.filter(|item| !item.is_empty());
    items
        .map(|item| {
            let figures = item.split_once("mm").and_then(|(length, rest)| {
                let (current, rest) = rest.split_once("mA")?;
                rest.trim_end()
                    .ends_with('V')
                    .then_some((length, current, rest))
            });
            let Some((length, current, volts)) = figures else {
                return Err(format!(
                    "expected readings such as 600 mm 25 mA 596 V, parted by semicolons, but found {}",
                    quoted(item)
                ));
            };
            Ok(Reading {
                length_mm: figure(length, "mm")?,
                ma: figure(current, "mA")?,
                volts: figure(volts, "V")?,
            })
        })
        .collect()
}

/// Reads a length chart.
///
/// # Errors
/// What was expected, as the rest of a sentence.
pub(super) fn chart_of(text: &str) -> Result<Vec<ChartLength>, String> {
    let mut chart = Vec::new();
    let mut rest = text.trim_start();
    while !rest.is_empty() {
        let expected = |found: &str| {
            format!(
                "expected lengths such as 15 mm neon: 9000 mm, pair 300 mm, parted by semicolons, but \
                 found {}",
                quoted(found)
            )
        };
        let (tube, after) = name_of(rest).ok_or_else(|| expected(rest))?;
        let (item, next) = after.split_once(';').unwrap_or((after, ""));
        // A decimal comma has no space after it, and no word.
        let (longest, pair) = match item.split_once("pair") {
            Some((longest, pair)) => {
                let longest = longest.trim_end().strip_suffix(',');
                (longest.ok_or_else(|| expected(item))?, Some(pair))
            }
            None => (item, None),
        };
        chart.push(ChartLength {
            tube,
            longest_mm: figure(longest, "mm")?,
            pair_mm: pair.map(|pair| figure(pair, "mm")).transpose()?,
        });
        rest = next.trim_start();
    }
    Ok(chart)
}

/// The name a text begins with, and what follows its colon.
fn name_of(text: &str) -> Option<(String, &str)> {
    let Some(mut rest) = text.strip_prefix('"') else {
        let (name, rest) = text.split_once(':')?;
        let name = name.trim_end();
        let plain = !name.is_empty() && !name.contains([';', '"']);
        return plain.then(|| (name.to_owned(), rest));
    };
    let mut name = String::new();
    loop {
        let (part, after) = rest.split_once('"')?;
        name.push_str(part);
        match after.strip_prefix('"') {
            Some(after) => {
                name.push('"');
                rest = after;
            }
            None => return Some((name, after.trim_start().strip_prefix(':')?)),
        }
    }
}

fn named(name: &str) -> String {
    if name.is_empty() || name.contains([';', ':', '"']) || name.trim() != name {
        format!("\"{}\"", name.replace('"', "\"\""))
    } else {
        name.to_owned()
    }
}

/// A figure whose unit may stand after it; without it, it is read to the last bit.
fn figure(text: &str, unit: &str) -> Result<f64, String> {
    let bare = text.trim();
    let number = bare.strip_suffix(unit).map(str::trim_end);
    let number = number.filter(|number| number.ends_with(|c: char| c.is_ascii_digit()));
    measure::figure(number.unwrap_or(bare), unit).map_err(|error| error.to_string())
}

fn joined(items: impl Iterator<Item = String>) -> String {
    items.collect::<Vec<_>>().join("; ")
}
