//! Artwork from DXF drawings: lines, arcs, polylines, splines and blocks, measured right to 1e-9.
//!
//! ASCII DXF of every version, after the published reference of the format: HEADER for the unit,
//! TABLES for the layers, BLOCKS and ENTITIES. Whatever stands in the drawing and gives no stroke is
//! named with its line and the reason. A polyline with a width gives its centre line; blocks that
//! nothing places give nothing.
//!
//! The reader is our own because the crate for the format brings pictures, dates and random numbers
//! into a page that has to stay small, for a format that is pairs of lines.

mod colours;
pub(super) mod curves;
mod document;
mod elements;
mod groups;
mod place;

use super::Artwork;
use crate::measure::grouped;
use document::Document;

/// Largest file, in bytes.
const BYTES_MOST: usize = 50_000_000;
/// Most segments of all strokes together, and of all blocks and elements of the file.
const SEGMENTS_MOST: usize = 200_000;

/// Reads a DXF drawing.
///
/// # Errors
/// A sentence: no ASCII DXF, damaged, or larger than can be drawn.
pub fn read(bytes: &[u8]) -> Result<Artwork, String> {
    if bytes.len() > BYTES_MOST {
        return Err(format!(
            "The file has {} MB, and drawings are read up to {} MB.",
            bytes.len().div_ceil(1_000_000),
            BYTES_MOST / 1_000_000
        ));
    }
    if bytes.starts_with(b"AutoCAD Binary DXF") {
        return Err("This is a binary DXF. Save it as ASCII DXF and open that.".to_owned());
    }
    if bytes.starts_with(b"AC10") {
        return Err("This is a DWG file. Save it as ASCII DXF and open that.".to_owned());
    }
    place::placed(&Document::read(bytes)?)
}

/// The sentence for more segments than can be drawn.
fn too_many_segments() -> String {
    format!(
        "The drawing has more than {} segments. Save only the part that is the sign.",
        shown(SEGMENTS_MOST)
    )
}

/// A limit as it is shown everywhere.
#[expect(clippy::cast_precision_loss, reason = "limits are far below 2^52")]
fn shown(limit: usize) -> String {
    grouped(limit as f64)
}
