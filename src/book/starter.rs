//! The book a shop starts from: tube types on the default model, the three rule sets, no supplies.

use super::{Book, Gas, TubeEntry};
use crate::rules::{iec_en, nec, shop};

/// Outer diameters with the currents their glass and electrodes usually carry, milliamperes
/// (common practice, no source).
const SIZES: [(f64, f64, f64); 8] = [
    (8.0, 10.0, 25.0),
    (10.0, 15.0, 30.0),
    (12.0, 15.0, 35.0),
    (13.0, 15.0, 35.0),
    (15.0, 15.0, 40.0),
    (18.0, 25.0, 65.0),
    (20.0, 30.0, 80.0),
    (25.0, 50.0, 150.0),
];

/// A fresh book.
pub fn starter() -> Book {
    let gases = [
        (Gas::Neon, "neon", "#ff5a3c"),
        (Gas::ArgonMercury, "argon-mercury", "#9fc4ff"),
    ];
    let tubes = gases
        .into_iter()
        .flat_map(|(gas, word, colour)| {
            SIZES
                .into_iter()
                .map(move |(outer_mm, least_ma, most_ma)| TubeEntry {
                    name: format!("{outer_mm} mm {word}"),
                    gas,
                    outer_mm: Some(outer_mm),
                    wall_mm: Some(1.0),
                    colour: colour.to_owned(),
                    least_ma: Some(least_ma),
                    most_ma: Some(most_ma),
                    source: "default model; currents are common practice, no source".to_owned(),
                    ..TubeEntry::default()
                })
        })
        .collect();
    Book {
        name: "My shop book".to_owned(),
        note: "Fresh: type your own supplies in from their nameplates.".to_owned(),
        tubes,
        rule_sets: vec![nec(), iec_en(), shop()],
        ..Book::default()
    }
}
