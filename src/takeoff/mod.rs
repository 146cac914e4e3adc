//! The takeoff: rows to strokes to pieces of glass, placed on the sign.
//!
//! One piece for each letter; a word of a joined face is one piece. The strokes of a piece are one
//! run of glass: between strokes it runs on, painted out, over the shortest straight jumps. That
//! hidden glass carries the same current and takes the same volts as lit glass. Each of the two
//! electrodes adds a tail.
//!
//! First cut: crossovers are estimated by those jumps, bends are not counted.

mod artwork;
mod finding;
mod letters;
mod outline;
mod pieces;
mod route;
mod shape;

use kurbo::{BezPath, Point, Rect};

use crate::measure::Length;

pub use artwork::artwork;
pub use outline::font;
pub use pieces::{Takeoff, takeoff};

/// One continuous glass with a pair of electrodes.
#[derive(Debug, Clone)]
pub struct Piece {
    /// Row of the job it comes from.
    pub row: usize,
    /// Which of the row's copies, from 0.
    pub copy: usize,
    /// What it is called: the letter, the word, or label and number; with "(2 of 4)" after it where
    /// its row is made more than once.
    pub label: String,
    /// Name of its tube type in the book.
    pub tube: String,
    /// Glass that shines.
    pub lit: Length,
    /// Glass painted out between strokes.
    pub hidden: Length,
    /// Glass of both electrodes' tails together.
    pub tails: Length,
    /// Its strokes on the sign, millimetres.
    pub strokes: Vec<BezPath>,
    /// The painted-out jumps on the sign, millimetres.
    pub jumps: Vec<BezPath>,
    /// Where the two electrodes sit.
    pub electrodes: [Point; 2],
}

impl Piece {
    /// The length of the gas column, electrode to electrode.
    pub fn column(&self) -> Length {
        self.lit + self.hidden
    }

    /// All the glass to bend.
    pub fn glass(&self) -> Length {
        self.column() + self.tails
    }
}

/// A row as taken off.
#[derive(Debug, Clone)]
pub struct RowTakeoff {
    /// Its pieces, as a range of the takeoff's pieces.
    pub pieces: std::ops::Range<usize>,
    /// Where it sits on the sign, all copies.
    pub bounds: Rect,
    /// Lit glass of all its pieces.
    pub lit: Length,
    /// Glass to bend of all its pieces.
    pub glass: Length,
}
