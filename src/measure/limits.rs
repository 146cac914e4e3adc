//! The one table of limits on what may be typed. The check, the sentence and the documentation all
//! read from here, so a limit is written once.

use core::fmt;

/// A range that a typed figure must lie in, with the words for the message.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limit {
    /// What is limited, as the sentence names it.
    pub name: &'static str,
    /// Least figure allowed.
    pub least: f64,
    /// Greatest figure allowed.
    pub most: f64,
    /// Unit, shown after each figure; empty for plain counts.
    pub unit: &'static str,
    /// Why the range ends where it does.
    pub why: &'static str,
}

impl Limit {
    /// Whether the figure lies inside; NaN never does.
    pub fn holds(&self, value: f64) -> bool {
        self.least <= value && value <= self.most
    }
}

impl fmt::Display for Limit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let unit = if self.unit.is_empty() {
            String::new()
        } else {
            format!(" {}", self.unit)
        };
        write!(
            f,
            "{} must be {} to {}{unit} ({})",
            self.name, self.least, self.most, self.why
        )
    }
}

/// Letter (cap) height of a text row.
pub const LETTER_HEIGHT_MM: Limit = Limit {
    name: "letter height",
    least: 10.0,
    most: 5_000.0,
    unit: "mm",
    why: "smaller cannot be bent in glass, larger is built from parts given as strokes",
};

/// Length of one piece of glass in a strokes row.
pub const PIECE_LENGTH_MM: Limit = Limit {
    name: "one piece of glass",
    least: 10.0,
    most: 20_000.0,
    unit: "mm",
    why: "no piece between two electrodes is shorter or longer than this; give it as more pieces",
};

/// How many times a row is made.
pub const COUNT: Limit = Limit {
    name: "count",
    least: 1.0,
    most: 200.0,
    unit: "",
    why: "a row is made at least once; more than 200 alike are given as rows",
};

/// Characters in one text row.
pub const TEXT_CHARACTERS: Limit = Limit {
    name: "text",
    least: 1.0,
    most: 400.0,
    unit: "characters",
    why: "a line of letters longer than this is given as several rows",
};

/// Rows in a job.
pub const ROWS: Limit = Limit {
    name: "rows",
    least: 0.0,
    most: 200.0,
    unit: "",
    why: "a larger sign is planned as several jobs",
};

/// Pieces of glass in a job.
pub const PIECES: Limit = Limit {
    name: "pieces of glass",
    least: 0.0,
    most: 4_000.0,
    unit: "",
    why: "a larger sign is planned as several jobs",
};
