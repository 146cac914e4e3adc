//! Reader of the Hershey letter files (JHF): y downwards, capitals from -12 to 9.
//!
//! A line holds a glyph: columns 0 to 4 a number, 5 to 7 the count of coordinate pairs, then the
//! pairs as two characters each, value = ASCII code - 82. The first pair is the left and right
//! bearing; the pair `" R"` lifts the pen. Long glyphs go on over the following lines.
//!
//! # Source
//! Format by James Hurt, Cognition, Inc., as described with the data (see NOTICE).

use kurbo::{BezPath, Point};

use super::face::Glyph;

/// All glyphs of a file, in order; the first belongs to the space character.
///
/// A glyph that is cut short keeps what was read of it: the files are part of the program and are
/// checked against their published lengths in the tests.
pub(super) fn read(text: &str) -> Vec<Glyph> {
    let mut glyphs = Vec::new();
    let mut lines = text.lines();
    while let Some(line) = lines.next() {
        let count: usize = line
            .get(5..8)
            .and_then(|count| count.trim().parse().ok())
            .unwrap_or(0);
        let mut body = line.get(8..).unwrap_or_default().to_owned();
        while body.len() < 2 * count {
            let Some(more) = lines.next() else { break };
            body.push_str(more);
        }
        glyphs.push(glyph(body.as_bytes()));
    }
    glyphs
}

fn glyph(body: &[u8]) -> Glyph {
    let value = |byte: u8| f64::from(byte) - 82.0;
    let mut pairs = body.as_chunks::<2>().0.iter();
    let Some(&[left, right]) = pairs.next() else {
        return Glyph::default();
    };
    let mut strokes = Vec::new();
    let mut stroke = BezPath::new();
    for pair in pairs {
        if pair == b" R" {
            finish(&mut strokes, &mut stroke);
            continue;
        }
        let point = Point::new(value(pair[0]), value(pair[1]));
        if stroke.elements().is_empty() {
            stroke.move_to(point);
        } else {
            stroke.line_to(point);
        }
    }
    finish(&mut strokes, &mut stroke);
    Glyph {
        bearings: (value(left), value(right)),
        strokes,
    }
}

fn finish(strokes: &mut Vec<BezPath>, stroke: &mut BezPath) {
    let done = std::mem::take(stroke);
    // A lone point is no glass.
    if done.elements().len() > 1 {
        strokes.push(done);
    }
}
