//! Letter faces: characters as strokes, drawn to a letter height; plain shapes; artwork files.
//!
//! Strokes are kurbo paths in millimetres, x to the right, y downwards, the baseline of letters at
//! y = 0.

mod artwork;
pub mod dxf;
mod face;
mod jhf;
mod layout;
pub mod outline;
mod plain;
pub mod shapes;
pub mod svg;

pub use artwork::{Area, ArtGroup, ArtStroke, Artwork, Filling, Unread};
pub use face::{Face, Letter, Shaped, face, faces};
pub use layout::{Align, Bend, BendBy, Layout, NoArc};
