//! The takeoff: rows to strokes to pieces of glass, placed on the sign.
//!
//! One piece for each letter; a word of a joined face is one piece; lines of a drawing that touch are
//! one. The strokes of a piece are one run of glass: between strokes it runs on, painted out, over the
//! shortest straight jumps. That hidden glass carries the same current and takes the same volts as lit
//! glass. Each of the two electrodes adds a tail. What a person joined, parted or cut otherwise is
//! followed, and pieces longer than the shop bends are cut where it shows least.

mod artwork;
mod assemble;
mod bends;
mod beside;
pub mod choose;
mod column;
mod drawn;
mod finding;
mod letters;
mod limits;
mod near;
mod outline;
mod pieces;
mod route;
mod shape;
mod split;

use kurbo::{BezPath, Point, Rect};

use crate::measure::Length;

pub use artwork::artwork;
pub use bends::Bend;
pub use limits::against_shop;
pub use outline::font;
pub use pieces::{Takeoff, takeoff};

/// A stroke of a piece, or the part of one that the piece has.
#[derive(Debug, Clone)]
pub struct Stroke {
    /// What the stroke is called in its row; choices of pieces name it so.
    pub name: String,
    /// As drawn, on the sign, millimetres.
    pub path: BezPath,
    /// From where to where on the drawn stroke, as shares of its length; 0 to 1 for all of it.
    pub part: [f64; 2],
    /// Whether the glass runs through it against the way it is drawn.
    pub turned: bool,
}

/// Painted-out glass from one stroke of a piece to the next.
#[derive(Debug, Clone)]
pub struct Jump {
    /// Which of the piece's strokes it follows.
    pub after: usize,
    /// On the sign, millimetres.
    pub path: BezPath,
}

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
    /// What it is called among the pieces of its row; the order of pieces names it so.
    pub name: String,
    /// Which of its row's pieces it is or is a part of, counted before any was cut.
    pub whole: usize,
    /// The group its row lights with; empty for none.
    pub group: String,
    /// Name of its tube type in the book.
    pub tube: String,
    /// Glass that shines.
    pub lit: Length,
    /// Glass painted out between strokes.
    pub hidden: Length,
    /// Glass of both electrodes' tails together.
    pub tails: Length,
    /// Its strokes in the order the glass runs through them.
    pub strokes: Vec<Stroke>,
    /// The painted-out jumps.
    pub jumps: Vec<Jump>,
    /// Where the two electrodes sit.
    pub electrodes: [Point; 2],
    /// Its bends in the order the glass runs, those of crossovers and tails not counted.
    pub bends: Vec<Bend>,
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
