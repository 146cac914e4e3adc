//! Reader of letter files in a plain form of our own.
//!
//! Lines that start with `#` are remarks. Every other line holds a glyph: its code point in
//! hexadecimal, how far the pen moves on, and its path, parted by a space each. The path is written as
//! in SVG with `M`, `L` and `C` only (move, line, cubic, to places from the origin), x to the right,
//! y upwards, the baseline near 0.
//!
//! Drawn letters often run back over a line to go on elsewhere. Of glass that lies on glass only one
//! shines, so such a line is left out and the stroke is parted there: how the tube gets from one part to
//! the next, and that this is painted out, is for whoever makes glass of it.

use std::collections::BTreeMap;

use kurbo::{BezPath, Line, ParamCurve, PathEl, Point};

use super::face::Glyph;

/// Lines are on each other up to here, in units of the file. Its figures are rounded to a tenth, and
/// lines that are meant to lie on each other have the same figures.
const ON_EACH_OTHER: f64 = 0.01;

/// All glyphs of a file. What cannot be read of a glyph is left out: the files are part of the program
/// and are checked against their measured lengths in the tests.
pub(super) fn read(text: &str) -> BTreeMap<char, Glyph> {
    let lines = text.lines().filter(|line| !line.starts_with('#'));
    lines.filter_map(glyph).collect()
}

fn glyph(line: &str) -> Option<(char, Glyph)> {
    let mut fields = line.splitn(3, ' ');
    let code = u32::from_str_radix(fields.next()?, 16).ok()?;
    let advance = fields.next()?.parse().ok()?;
    let strokes = fields.next().map_or_else(Vec::new, strokes);
    let glyph = Glyph {
        bearings: (0.0, advance),
        strokes,
    };
    Some((char::from_u32(code)?, glyph))
}

/// The strokes of a path, y turned downwards.
fn strokes(path: &str) -> Vec<BezPath> {
    let mut pen = Pen::default();
    let mut rest = path;
    while let Some(command) = rest.chars().next() {
        rest = &rest[command.len_utf8()..];
        let end = rest.find(['M', 'L', 'C']).unwrap_or(rest.len());
        let (figures, after) = rest.split_at(end);
        rest = after;
        let figures = figures_of(figures);
        let points: Vec<Point> = figures
            .as_chunks::<2>()
            .0
            .iter()
            .map(|&[x, y]| Point::new(x, 0.0 - y))
            .collect();
        match (command, &points[..]) {
            ('M', &[to]) => pen.lift(to),
            ('L', &[to]) => pen.line(to),
            ('C', &[one, two, to]) => pen.cubic(one, two, to),
            _ => {}
        }
    }
    pen.lift(Point::ZERO);
    pen.strokes
}

/// Figures parted by spaces or by the sign of the next.
fn figures_of(text: &str) -> Vec<f64> {
    text.replace('-', " -")
        .split_whitespace()
        .filter_map(|figure| figure.parse().ok())
        .collect()
}

#[derive(Default)]
struct Pen {
    at: Point,
    stroke: BezPath,
    strokes: Vec<BezPath>,
    /// Every straight line of the glyph so far.
    lines: Vec<Line>,
}

impl Pen {
    fn lift(&mut self, to: Point) {
        let done = std::mem::take(&mut self.stroke);
        self.strokes
            .extend(Some(done).filter(|done| !done.is_empty()));
        self.at = to;
    }

    fn line(&mut self, to: Point) {
        let line = Line::new(self.at, to);
        for (from, until) in bare(line, &self.lines) {
            self.draw(line.eval(from), PathEl::LineTo(line.eval(until)));
        }
        self.lines.push(line);
        self.at = to;
    }

    fn cubic(&mut self, one: Point, two: Point, to: Point) {
        self.draw(self.at, PathEl::CurveTo(one, two, to));
        self.at = to;
    }

    /// Draws on from where the stroke is, or begins another one.
    fn draw(&mut self, from: Point, element: PathEl) {
        let end = self.stroke.elements().last().and_then(PathEl::end_point);
        if end.is_none_or(|end| end.distance(from) > ON_EACH_OTHER) {
            self.lift(from);
            self.stroke.move_to(from);
        }
        self.stroke.push(element);
    }
}

/// The parts of a line that lie on none of the others, as shares of its length.
fn bare(line: Line, others: &[Line]) -> Vec<(f64, f64)> {
    let along = line.p1 - line.p0;
    let length = along.hypot();
    if length < ON_EACH_OTHER {
        return Vec::new();
    }
    let shortest = ON_EACH_OTHER / length;
    let mut parts = vec![(0.0_f64, 1.0_f64)];
    for other in others {
        let off = |point: Point| (along.cross(point - line.p0) / length).abs();
        if off(other.p0).max(off(other.p1)) > ON_EACH_OTHER {
            continue;
        }
        let share = |point: Point| along.dot(point - line.p0) / (length * length);
        let (one, two) = (share(other.p0), share(other.p1));
        let (from, until) = (one.min(two), one.max(two));
        parts = parts
            .into_iter()
            .flat_map(|(a, b)| [(a, b.min(from)), (a.max(until), b)])
            .filter(|(a, b)| b - a > shortest)
            .collect();
    }
    parts
}

#[cfg(test)]
mod tests {
    use super::*;
    use kurbo::Shape;

    fn drawn(path: &str) -> Vec<String> {
        strokes(path).iter().map(BezPath::to_svg).collect()
    }

    #[test]
    fn figures_part_at_spaces_and_signs() {
        assert_eq!(drawn("M1 2L-3-4.5"), ["M1,-2 L-3,4.5"]);
        assert_eq!(
            drawn("M0 0C1 2-3 4 5 6M9 9L9 10"),
            ["M0,0 C1,-2 -3,-4 5,-6", "M9,-9 L9,-10"]
        );
    }

    #[test]
    fn a_line_that_runs_back_parts_the_stroke() {
        // An H in one: up, half down again, over, up, all the way down.
        assert_eq!(
            drawn("M0 0L0 20L0 10L14 10L14 20L14 0"),
            ["M0,0 L0,-20", "M0,-10 L14,-10 L14,-20", "M14,-10 L14,0"]
        );
        // Lines that cross, touch or run beside each other are all there.
        let side_by_side = "M0 0L10 0L10 1L0 1M5 5L5-5";
        let length: f64 = strokes(side_by_side)
            .iter()
            .map(|stroke| stroke.perimeter(1e-9))
            .sum();
        assert!((length - 31.0).abs() < 1e-9, "{length}");
    }

    #[test]
    fn what_is_no_path_draws_nothing() {
        for text in [
            "",
            "é",
            "M",
            "M1 2",
            "M1 2 3",
            "C1 2 3 4 5",
            "MLC",
            "M1 1L1 1",
            "Q1 2 3 4",
        ] {
            assert!(drawn(text).is_empty(), "{text}: {:?}", drawn(text));
        }
        assert!(read("zz 1 M0 0L1 1\nd800 1 M0 0\n41\n41 x M0 0L1 1\n#41 1 M0 0L1 1").is_empty());
    }
}
