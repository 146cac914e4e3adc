//! The faces, and laying a text out in one of them.

use std::collections::BTreeMap;
use std::sync::OnceLock;

use kurbo::{Affine, BezPath, Rect, Shape};

use super::jhf::{self, Glyph};
use super::plain;

/// A letter face.
#[derive(Debug)]
pub struct Face {
    /// What a row calls it.
    pub name: &'static str,
    /// In a few words, for a list.
    pub says: &'static str,
    /// Whether the letters of a word run into each other and are bent as one piece.
    pub joined: bool,
    /// Height of a capital in the units of the face's file: shaped at this height, the points of a
    /// letter are the figures of the file.
    pub cap_units: f64,
    /// The baseline in those units, y downwards.
    baseline: f64,
    glyphs: BTreeMap<char, Glyph>,
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
            hershey(
                "sans",
                "plain, one stroke",
                false,
                include_str!("faces/rowmans.jhf"),
            ),
            hershey(
                "script",
                "joined within a word",
                true,
                include_str!("faces/scripts.jhf"),
            ),
            readability(),
        ]
    })
}

/// A face of a Hershey file: the characters from the space to the tilde, capitals of 21 units.
fn hershey(name: &'static str, says: &'static str, joined: bool, file: &str) -> Face {
    Face {
        name,
        says,
        joined,
        cap_units: 21.0,
        baseline: 9.0,
        // The files go on past the tilde with a shape of their own, which stands for no character a
        // person types.
        glyphs: (' '..='~')
            .zip(jhf::read(file))
            .filter(|(character, glyph)| *character == ' ' || !glyph.strokes.is_empty())
            .collect(),
    }
}

/// The face with accents. Nothing in its file tells the height of its capitals: H is measured.
fn readability() -> Face {
    let glyphs = plain::read(include_str!("faces/readability.txt"));
    let strokes = glyphs.get(&'H').into_iter().flat_map(|h| &h.strokes);
    let h = strokes
        .map(Shape::bounding_box)
        .reduce(|all, one| all.union(one))
        .unwrap_or(Rect::ZERO);
    Face {
        name: "accents",
        says: "plain, with accents",
        joined: false,
        cap_units: h.height(),
        baseline: h.y1,
        glyphs,
    }
}

/// The face of a name.
pub fn face(name: &str) -> Option<&'static Face> {
    faces().iter().find(|face| face.name == name)
}

impl Face {
    /// Lays out one line of text with capitals `height_mm` high, starting at x = 0 on y = 0.
    pub fn shape(&self, text: &str, height_mm: f64) -> Shaped {
        let scale = height_mm / self.cap_units;
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
                let place = Affine::scale(scale) * Affine::translate((pen - left, -self.baseline));
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
        // Spaces of every kind are a gap.
        let wanted = if character.is_whitespace() {
            ' '
        } else {
            character
        };
        self.glyphs.get(&wanted)
    }
}
