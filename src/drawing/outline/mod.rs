//! Outline letters: the shop's own font files, laid out as a line of text, and the tube on the
//! outline itself or on an inset of it.
//!
//! [`Font`] reads a TrueType or OpenType file and gives the exact curves of its letters; [`inset`]
//! moves them inwards, so that the glass lies inside the letter it stands for.
//!
//! Lengths are millimetres, x to the right, y downwards, the baseline at y = 0, as in the faces of
//! strokes beside this folder.

mod font;
mod inset;
mod kerning;

pub use font::{CapHeight, Font, MOST_BYTES, OutlineLetter, OutlineText};
pub use inset::{FLATNESS_MM, Inset, Join, filled, inset};
