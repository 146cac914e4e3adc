//! The faces: which there are, and their letters.

use std::collections::BTreeMap;
use std::sync::OnceLock;

use kurbo::{Affine, BezPath, Rect, Shape};

use super::layout::{Layout, NoArc, layout};
use super::{jhf, plain};

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
    pub(super) baseline: f64,
    glyphs: BTreeMap<char, Glyph>,
}

/// A letter as its file has it, in the units of the file, y downwards.
#[derive(Debug, Clone, Default)]
pub(super) struct Glyph {
    /// Left and right bearing.
    pub(super) bearings: (f64, f64),
    /// One path for each stroke of the pen.
    pub(super) strokes: Vec<BezPath>,
}

/// A letter of a text.
#[derive(Debug, Clone)]
pub struct Letter {
    /// The character.
    pub character: char,
    /// Number of the word it belongs to, from 0.
    pub word: usize,
    /// Its strokes where the pen writes it: from x = 0 on the baseline. The same letter has the same
    /// ones wherever it stands.
    pub own: Vec<BezPath>,
    /// From there to its place: moved and turned, never stretched.
    pub place: Affine,
}

impl Letter {
    /// Its strokes in place.
    pub fn strokes(&self) -> Vec<BezPath> {
        self.own.iter().map(|stroke| self.place * stroke).collect()
    }
}

/// A text in a face and height.
#[derive(Debug, Clone, Default)]
pub struct Shaped {
    /// Letters with strokes, in reading order. Spaces are left out.
    pub letters: Vec<Letter>,
    /// Characters the face has no shape for, with their place in the text, from 0.
    pub missing: Vec<(usize, char)>,
    /// Box around all strokes, the middle of the first baseline at y = 0; empty for no letters.
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
    /// Lays out a text with capitals `height_mm` high and nothing else changed; the first line starts
    /// at x = 0 on y = 0.
    pub fn shape(&self, text: &str, height_mm: f64) -> Shaped {
        // There is no arc that it could not stand on.
        self.lay_out(text, &Layout::plain(height_mm))
            .unwrap_or_default()
    }

    /// Lays out a text.
    ///
    /// # Errors
    /// Where it cannot stand on the arc that is asked for.
    pub fn lay_out(&self, text: &str, how: &Layout) -> Result<Shaped, NoArc> {
        layout(self, text, how)
    }

    pub(super) fn glyph(&self, character: char) -> Option<&Glyph> {
        // Spaces of every kind are a gap.
        let wanted = if character.is_whitespace() {
            ' '
        } else {
            character
        };
        self.glyphs.get(&wanted)
    }
}
