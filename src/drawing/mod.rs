//! Letter faces: characters as strokes, drawn to a letter height.
//!
//! Strokes are kurbo paths in millimetres, x to the right, y downwards, the baseline at y = 0.

mod face;
mod jhf;

pub use face::{CAP_UNITS, Face, Letter, Shaped, face, faces};
