//! Reading SVG files as artwork: every line of them, in double precision, or a word why not.
//!
//! Coordinates are those of the outermost viewBox, or of the page in px (96 to the inch) where there
//! is none. What the page cuts off is read all the same. Nothing is run and nothing is fetched.

mod geometry;
mod path;
mod scan;
mod style;
mod transform;
mod units;
mod walk;

use super::Artwork;

/// Most bytes in a file.
const MOST_BYTES: usize = 50_000_000;
/// Most elements within each other, those that a `use` brings in counted where they are used. What
/// people draw stays far below; beyond it the reader would run out of stack in a browser.
const DEEPEST: usize = 200;
/// Most lines and curves of a drawing, an arc being several curves.
const MOST_SEGMENTS: usize = 200_000;
/// Beyond this a coordinate has too few digits left behind the point.
const FARTHEST: f64 = 1e9;

/// The lines and outlines of an SVG file.
///
/// Whatever is in the file and not in the strokes is in [`Artwork::unread`]; only what the file
/// itself does not show (display none, hidden, definitions nobody uses) goes without a word.
///
/// The size is known where the page has a width or height with a unit. A bare number is none: by the
/// book it is px, in practice programs mean anything by it.
///
/// # Errors
///
/// One sentence, where the file cannot be read as a whole: it is not SVG, it is broken, or it is
/// larger or deeper than any drawing.
///
/// ```
/// let art = tubewright::drawing::svg::read(
///     r#"<svg width="60mm" viewBox="0 0 300 200"><path stroke="red" d="M0 0 L30 40"/></svg>"#,
/// )?;
/// assert_eq!(art.strokes[0].length(), 50.0);
/// assert!(art.mm_per_unit.is_some_and(|size| (size - 0.2).abs() < 1e-12));
/// # Ok::<(), String>(())
/// ```
pub fn read(text: &str) -> Result<Artwork, String> {
    let text = text.strip_prefix('\u{feff}').unwrap_or(text);
    scan::check(text)?;
    let options = roxmltree::ParsingOptions {
        // The scan lets a document type through only when it declares nothing.
        allow_dtd: true,
        nodes_limit: 1_000_000,
        ..roxmltree::ParsingOptions::default()
    };
    let document = roxmltree::Document::parse_with_options(text, options)
        .map_err(|error| scan::broken(&error))?;
    walk::walk(&document)
}
