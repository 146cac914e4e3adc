//! A piece as it is drawn in its row, before the row is placed on the sign: strokes in the order the
//! glass runs through them.

use kurbo::{Affine, BezPath, ParamCurve, ParamCurveArclen, PathSeg, Point, Rect};

use super::bends::{Bend, bends};
use super::route::{self, Route};
use super::{Jump, Piece, Stroke};
use crate::measure::Length;

/// Accuracy of stroke lengths, in millimetres or letter units: far below what glass can be bent to.
pub(super) const ARC_LENGTH: f64 = 1e-9;

/// A cut nearer to the end of a stroke than this is refused.
pub(super) const LEAST_PART_MM: f64 = 5.0;

/// A row's pieces before they are placed.
#[derive(Default)]
pub(super) struct Made {
    pub(super) pieces: Vec<Drawn>,
    pub(super) bounds: Rect,
}

/// A stroke, or a part of one, as the glass runs through it.
#[derive(Debug, Clone)]
pub(super) struct Strand {
    /// What its stroke is called in its row.
    pub(super) name: String,
    /// As drawn, from its beginning.
    pub(super) path: BezPath,
    pub(super) length: f64,
    /// Whether the glass runs from its end to its beginning.
    pub(super) turned: bool,
    /// From where to where on the drawn stroke, as shares of its length.
    pub(super) part: [f64; 2],
}

impl Strand {
    fn ends(&self) -> [Point; 2] {
        route::ends(&self.path)
    }

    pub(super) fn enters(&self) -> Point {
        self.ends()[usize::from(self.turned)]
    }

    pub(super) fn leaves(&self) -> Point {
        self.ends()[usize::from(!self.turned)]
    }

    /// The two parts before and after a place, `along` from its drawn beginning; their lengths
    /// are those of the whole together.
    pub(super) fn cut(&self, along: f64) -> [Self; 2] {
        let along = along.clamp(0.0, self.length);
        let share = if self.length > 0.0 {
            along / self.length
        } else {
            0.0
        };
        let at = self.part[0] + share * (self.part[1] - self.part[0]);
        let [first, second] = cut(&self.path, along);
        let part = |path, length, part| Self {
            name: self.name.clone(),
            path,
            length,
            turned: self.turned,
            part,
        };
        [
            part(first, along, [self.part[0], at]),
            part(second, self.length - along, [at, self.part[1]]),
        ]
    }
}

/// A path up to and from a place along it.
pub(super) fn cut(path: &BezPath, along: f64) -> [BezPath; 2] {
    let (mut first, mut second) = (BezPath::new(), BezPath::new());
    let mut left = along;
    let mut through = false;
    for segment in path.segments() {
        if through {
            add(&mut second, segment);
            continue;
        }
        let length = segment.arclen(ARC_LENGTH);
        if left > length {
            left -= length;
            add(&mut first, segment);
            continue;
        }
        through = true;
        let t = if left <= 0.0 {
            0.0
        } else if left >= length {
            1.0
        } else {
            segment.inv_arclen(left, ARC_LENGTH)
        };
        if t > 0.0 {
            add(&mut first, segment.subsegment(0.0..t));
        }
        if t < 1.0 {
            add(&mut second, segment.subsegment(t..1.0));
        }
    }
    // A place at an end leaves a part of no length, which still stands somewhere.
    let [start, end] = route::ends(path);
    if first.elements().is_empty() {
        first.move_to(start);
    }
    if second.elements().is_empty() {
        second.move_to(end);
    }
    [first, second]
}

fn add(path: &mut BezPath, segment: PathSeg) {
    if path.elements().is_empty() {
        path.move_to(segment.start());
    }
    path.push(segment.as_path_el());
}

/// Length of a path.
pub(super) fn length(path: &BezPath) -> f64 {
    let lengths = path.segments().map(|segment| segment.arclen(ARC_LENGTH));
    lengths.fold(0.0, |sum, length| sum + length)
}

/// A piece of glass.
#[derive(Debug, Clone)]
pub(super) struct Drawn {
    pub(super) label: String,
    /// Its tube, where the pieces of a row are not all of one.
    pub(super) tube: Option<String>,
    /// Pieces of one number are one where a row is made of whole words or drawings.
    pub(super) word: usize,
    /// Which piece it is a part of, counted before any was cut.
    pub(super) whole: usize,
    /// Its strokes in the order the glass runs through them.
    pub(super) run: Vec<Strand>,
    /// Jumps up to here are none: the strokes touch.
    pub(super) tie: f64,
}

impl Drawn {
    /// Strokes, and the way through them. They are called 1, 2 and so on in their row unless they
    /// are named.
    pub(super) fn new(label: String, strokes: Vec<BezPath>, way: &Route) -> Self {
        let named = strokes.into_iter().map(|path| (String::new(), path));
        Self::named(label, named.collect(), way)
    }

    /// The same with the name of each stroke.
    pub(super) fn named(label: String, strokes: Vec<(String, BezPath)>, way: &Route) -> Self {
        let mut strokes: Vec<Option<(String, BezPath)>> = strokes.into_iter().map(Some).collect();
        let run = way.order.iter().filter_map(|&(stroke, entry)| {
            let (name, path) = strokes.get_mut(stroke)?.take()?;
            Some(Strand {
                name,
                length: length(&path),
                path,
                turned: entry == 1,
                part: [0.0, 1.0],
            })
        });
        Self {
            label,
            tube: None,
            word: 0,
            whole: 0,
            run: run.collect(),
            tie: way.tie,
        }
    }

    /// The same in a tube of its own.
    pub(super) fn of(mut self, tube: &str) -> Self {
        self.tube = Some(tube.to_owned());
        self
    }

    /// The same as part of a word.
    pub(super) fn in_word(mut self, word: usize) -> Self {
        self.word = word;
        self
    }

    /// The same drawing moved or turned, then so many times as large. What it measures is not worked
    /// out again: it is so many times as much.
    pub(super) fn placed(mut self, place: Affine, by: f64) -> Self {
        let to = Affine::scale(by) * place;
        for strand in &mut self.run {
            strand.path.apply_affine(to);
            strand.length *= by;
        }
        self.tie *= by;
        self
    }

    /// Glass that shines.
    pub(super) fn lit(&self) -> f64 {
        self.run.iter().fold(0.0, |sum, strand| sum + strand.length)
    }

    /// Painted-out glass from one stroke to the next: after which stroke, from where, to where.
    pub(super) fn jumps(&self) -> impl Iterator<Item = (usize, Point, Point)> {
        self.run.windows(2).enumerate().filter_map(|(at, pair)| {
            let (from, to) = (pair[0].leaves(), pair[1].enters());
            (from.distance(to) > self.tie).then_some((at, from, to))
        })
    }

    /// The length of the gas column with `crossover` added for each jump.
    pub(super) fn column(&self, crossover: f64) -> f64 {
        self.jumps().fold(self.lit(), |sum, (_, from, to)| {
            sum + from.distance(to) + crossover
        })
    }

    /// What the piece is called among those of its row: after the place it begins at.
    pub(super) fn name(&self) -> String {
        self.run
            .first()
            .map_or_else(String::new, |strand| match strand.part {
                [0.0, 1.0] => strand.name.clone(),
                [from, _] => format!("{} from {from:.4}", strand.name),
            })
    }

    pub(super) fn piece(
        &self,
        row: usize,
        (copy, copies): (usize, usize),
        tube: &str,
        (tail_mm, crossover_mm): (f64, f64),
        place: Affine,
    ) -> Piece {
        // Four like quarters of a border are to be told apart on the bench and in sentences.
        let label = if copies > 1 {
            format!("{} ({} of {copies})", self.label, copy + 1)
        } else {
            self.label.clone()
        };
        let (mut hidden, mut jumps) = (0.0, Vec::new());
        for (after, from, to) in self.jumps() {
            hidden += from.distance(to) + crossover_mm;
            let mut path = BezPath::new();
            path.move_to(place * from);
            path.line_to(place * to);
            jumps.push(Jump { after, path });
        }
        let ends = [
            self.run.first().map_or(Point::ZERO, Strand::enters),
            self.run.last().map_or(Point::ZERO, Strand::leaves),
        ];
        let strokes = self.run.iter().map(|strand| Stroke {
            name: strand.name.clone(),
            path: place * &strand.path,
            part: strand.part,
            turned: strand.turned,
        });
        let bends = bends(self).into_iter().map(|bend| Bend {
            at: place * bend.at,
            ..bend
        });
        Piece {
            row,
            copy,
            label,
            name: self.name(),
            group: String::new(),
            whole: self.whole,
            tube: self.tube.as_deref().unwrap_or(tube).to_owned(),
            lit: Length::from_mm(self.lit()),
            hidden: Length::from_mm(hidden),
            tails: Length::from_mm(2.0 * tail_mm),
            strokes: strokes.collect(),
            jumps,
            electrodes: ends.map(|end| place * end),
            bends: bends.collect(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use kurbo::{Arc, Shape};

    #[test]
    fn a_cut_stroke_is_as_long_as_before() {
        let mut path = Arc::new((0.0, 0.0), (80.0, 80.0), 0.3, 2.5, 0.0).to_path(1e-9);
        path.line_to((200.0, 10.0));
        path.line_to((0.0, 0.0));
        let whole = length(&path);
        for tenth in 0..=10 {
            let along = whole * f64::from(tenth) / 10.0;
            let parts = cut(&path, along).map(|part| length(&part));
            assert!((parts[0] - along).abs() < 1e-6, "{parts:?} at {along}");
            assert!((parts[0] + parts[1] - whole).abs() < 1e-6, "{parts:?}");
        }
    }

    #[test]
    fn a_closed_path_is_cut_through_its_closing_line_too() {
        let path = Rect::new(0.0, 0.0, 30.0, 10.0).to_path(0.1);
        let [first, second] = cut(&path, 75.0).map(|part| length(&part));
        assert!((first - 75.0).abs() < 1e-9 && (second - 5.0).abs() < 1e-9);
    }
}
