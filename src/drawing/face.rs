//! The faces, and laying a text out in one of them.

use std::sync::OnceLock;

use kurbo::{Affine, BezPath, Rect, Shape};

use super::jhf::{self, Glyph};

/// Height of a capital in the units of the face files: shaped at this height, every point of a letter
/// is a whole number.
pub const CAP_UNITS: f64 = 21.0;
/// The baseline in those units.
const BASELINE_UNITS: f64 = 9.0;
/// First character of the files.
const FIRST: u32 = ' ' as u32;

/// A letter face.
#[derive(Debug)]
pub struct Face {
    /// What a row calls it.
    pub name: &'static str,
    /// In a few words, for a list.
    pub says: &'static str,
    /// Whether the letters of a word run into each other and are bent as one piece.
    pub joined: bool,
    glyphs: Vec<Glyph>,
}

/// A letter of a text, in place.
#[derive(Debug, Clone)]
pub struct Letter {
    /// The character.
    pub character: char,
    /// Number of the word it belongs to, from 0.
    pub word: usize,
    /// Its strokes.
    pub strokes: Vec<BezPath>,
}

/// A text in a face and height.
#[derive(Debug, Clone)]
pub struct Shaped {
    /// Letters with strokes, in reading order. Spaces are left out.
    pub letters: Vec<Letter>,
    /// Characters the face has no shape for, with their place in the text, from 0.
    pub missing: Vec<(usize, char)>,
    /// Box around all strokes in millimetres, baseline at 0; empty for no letters.
    pub bounds: Rect,
}

/// Every face, in the order a list shows them.
pub fn faces() -> &'static [Face] {
    static FACES: OnceLock<Vec<Face>> = OnceLock::new();
    FACES.get_or_init(|| {
        vec![
            Face {
                name: "sans",
                says: "plain, one stroke",
                joined: false,
                glyphs: jhf::read(include_str!("faces/rowmans.jhf")),
            },
            Face {
                name: "script",
                says: "joined within a word",
                joined: true,
                glyphs: jhf::read(include_str!("faces/scripts.jhf")),
            },
        ]
    })
}

/// The face of a name.
pub fn face(name: &str) -> Option<&'static Face> {
    faces().iter().find(|face| face.name == name)
}

impl Face {
    /// Lays out one line of text with capitals `height_mm` high, starting at x = 0 on y = 0.
    pub fn shape(&self, text: &str, height_mm: f64) -> Shaped {
        let scale = height_mm / CAP_UNITS;
        let mut shaped = Shaped {
            letters: Vec::new(),
            missing: Vec::new(),
            bounds: Rect::ZERO,
        };
        let mut bounds: Option<Rect> = None;
        let mut pen = 0.0;
        let mut word = 0;
        for (at, character) in text.chars().enumerate() {
            let Some(glyph) = self.glyph(character) else {
                shaped.missing.push((at, character));
                continue;
            };
            let (left, right) = glyph.bearings;
            if glyph.strokes.is_empty() {
                word += 1;
            } else {
                let place = Affine::scale(scale) * Affine::translate((pen - left, -BASELINE_UNITS));
                let strokes: Vec<BezPath> =
                    glyph.strokes.iter().map(|stroke| place * stroke).collect();
                for stroke in &strokes {
                    let stroke_box = stroke.bounding_box();
                    bounds = Some(bounds.map_or(stroke_box, |all| all.union(stroke_box)));
                }
                shaped.letters.push(Letter {
                    character,
                    word,
                    strokes,
                });
            }
            pen += right - left;
        }
        shaped.bounds = bounds.unwrap_or(Rect::ZERO);
        shaped
    }

    fn glyph(&self, character: char) -> Option<&Glyph> {
        // Spaces of every kind are a gap. The files go on past the tilde with a shape of their own,
        // which stands for no character a person types.
        let code = match character {
            _ if character.is_whitespace() => FIRST,
            ' '..='~' => u32::from(character),
            _ => return None,
        };
        let index = usize::try_from(code.checked_sub(FIRST)?).ok()?;
        let glyph = self.glyphs.get(index)?;
        let space = index == 0;
        (space || !glyph.strokes.is_empty()).then_some(glyph)
    }
}
