//! What the picture of the sign is made of: a few paths, whatever the number of letters.

use core::fmt::Write;
use core::ops::Range;

use kurbo::{BezPath, PathEl, Point, Rect, Shape};
use tubewright::Workup;

use super::joint::ends;

/// One tube colour of the picture.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Layer {
    pub(super) colour: String,
    pub(super) width_mm: f64,
    /// Whether it is set back, because something else is looked at.
    pub(super) dim: bool,
    pub(super) path: String,
}

/// The number of a circuit, beside its first piece.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Badge {
    pub(super) number: usize,
    pub(super) at: Point,
    pub(super) dim: bool,
}

/// The picture.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Scene {
    pub(super) bounds: Rect,
    pub(super) layers: Vec<Layer>,
    /// Painted-out glass.
    pub(super) hidden: String,
    /// Electrodes, as points.
    pub(super) electrodes: String,
    /// From piece to piece of each circuit.
    pub(super) jumpers: String,
    pub(super) badges: Vec<Badge>,
    /// Each piece alone, to be tapped.
    pub(super) pieces: Vec<String>,
    /// The pieces of each row.
    pub(super) rows: Vec<Range<usize>>,
}

impl Scene {
    /// The strokes of a row's pieces; nothing where there is no such row.
    pub(super) fn row(&self, row: usize) -> String {
        let pieces = self
            .rows
            .get(row)
            .and_then(|row| self.pieces.get(row.clone()));
        pieces.unwrap_or_default().concat()
    }

    /// The strokes of a piece; nothing where there is no such piece.
    pub(super) fn piece(&self, piece: usize) -> &str {
        self.pieces.get(piece).map_or("", String::as_str)
    }
}

/// Colour of a tube the book does not have.
pub(super) const UNKNOWN: &str = "#c9c6bd";
const UNKNOWN_MM: f64 = 12.0;

/// Arranges a work-up; with a circuit in focus the others are set back.
pub(super) fn scene(workup: &Workup, focus: Option<usize>) -> Scene {
    let pieces = &workup.takeoff.pieces;
    let mut circuit_of = vec![None; pieces.len()];
    for (number, circuit) in workup.circuits.iter().enumerate() {
        for &piece in &circuit.pieces {
            if let Some(slot) = circuit_of.get_mut(piece) {
                *slot = Some(number);
            }
        }
    }
    let dim = |circuit: Option<usize>| focus.is_some() && circuit != focus;
    let mut layers: Vec<Layer> = Vec::new();
    let (mut hidden, mut electrodes, mut jumpers) = (String::new(), String::new(), String::new());
    let mut alone = Vec::with_capacity(pieces.len());
    for (at, piece) in pieces.iter().enumerate() {
        let tube = workup.tubes.iter().find(|total| total.name == piece.tube);
        let tube = tube.and_then(|total| total.tube.as_ref());
        let colour = tube.map_or(UNKNOWN, |tube| tube.colour.as_str());
        let width_mm = tube.map_or(UNKNOWN_MM, |tube| tube.outer.mm());
        let dim = dim(circuit_of[at]);
        let path: String = piece
            .strokes
            .iter()
            .map(|stroke| drawn(&stroke.path))
            .collect();
        match layers
            .iter_mut()
            .find(|l| l.dim == dim && l.colour == colour && l.width_mm == width_mm)
        {
            Some(layer) => layer.path.push_str(&path),
            None => layers.push(Layer {
                colour: colour.to_owned(),
                width_mm,
                dim,
                path: path.clone(),
            }),
        }
        alone.push(path);
        hidden.extend(piece.jumps.iter().map(|jump| drawn(&jump.path)));
        for end in piece.electrodes {
            let _ = write!(electrodes, "M{:.1} {:.1}h0", end.x, end.y);
        }
    }
    let mut badges = Vec::new();
    for (number, circuit) in workup.circuits.iter().enumerate() {
        for place in 0..circuit.pieces.len().saturating_sub(1) {
            // With a mid-point return the two strings meet at the supply, not at each other.
            if place + 1 == circuit.first_string {
                continue;
            }
            let [from, to] = [place, place + 1].map(|place| ends(workup, circuit, place));
            if let (Some([_, a]), Some([b, _])) = (from, to) {
                let _ = write!(jumpers, "M{:.1} {:.1}L{:.1} {:.1}", a.x, a.y, b.x, b.y);
            }
        }
        if let Some(first) = circuit.pieces.first().and_then(|&at| pieces.get(at)) {
            let around = first
                .strokes
                .iter()
                .map(|stroke| stroke.path.bounding_box())
                .reduce(|all, here| all.union(here))
                .unwrap_or_default();
            badges.push(Badge {
                number: number + 1,
                at: around.origin(),
                dim: dim(Some(number)),
            });
        }
    }
    // What is set back is drawn first.
    layers.sort_by_key(|layer| !layer.dim);
    Scene {
        bounds: workup.takeoff.bounds,
        layers,
        hidden,
        electrodes,
        jumpers,
        badges,
        pieces: alone,
        rows: workup
            .takeoff
            .rows
            .iter()
            .map(|row| row.pieces.clone())
            .collect(),
    }
}

/// SVG path data to a tenth of a millimetre, finer than any screen shows.
pub(super) fn drawn(path: &BezPath) -> String {
    let mut out = String::new();
    for element in path.elements() {
        let _ = match element {
            PathEl::MoveTo(p) => write!(out, "M{:.1} {:.1}", p.x, p.y),
            PathEl::LineTo(p) => write!(out, "L{:.1} {:.1}", p.x, p.y),
            PathEl::QuadTo(a, p) => write!(out, "Q{:.1} {:.1} {:.1} {:.1}", a.x, a.y, p.x, p.y),
            PathEl::CurveTo(a, b, p) => write!(
                out,
                "C{:.1} {:.1} {:.1} {:.1} {:.1} {:.1}",
                a.x, a.y, b.x, b.y, p.x, p.y
            ),
            PathEl::ClosePath => write!(out, "Z"),
        };
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::files::demo;
    use tubewright::workup;

    #[test]
    fn every_piece_is_drawn_once_and_every_circuit_has_its_number() {
        for job in demo::jobs() {
            let worked = workup(&job, &demo::book());
            let found = scene(&worked, None);
            assert_eq!(
                found.pieces.len(),
                worked.takeoff.pieces.len(),
                "{}",
                job.name
            );
            let together: usize = found.layers.iter().map(|layer| layer.path.len()).sum();
            let alone: usize = found.pieces.iter().map(String::len).sum();
            assert_eq!(
                together, alone,
                "{}: the layers hold the pieces, no more",
                job.name
            );
            assert_eq!(found.badges.len(), worked.circuits.len(), "{}", job.name);
            let rows: String = (0..job.rows.len()).map(|row| found.row(row)).collect();
            assert_eq!(
                rows,
                found.pieces.concat(),
                "{}: the rows hold them too",
                job.name
            );
            assert_eq!(
                found.row(job.rows.len()) + found.piece(9_999),
                "",
                "no more"
            );
        }
    }

    #[test]
    fn a_circuit_in_focus_sets_the_others_back() {
        let job = demo::jobs().remove(1);
        let worked = workup(&job, &demo::book());
        assert!(
            worked.circuits.len() > 1,
            "the shop front has several circuits"
        );
        let found = scene(&worked, Some(0));
        let bright: String = found
            .layers
            .iter()
            .filter(|layer| !layer.dim)
            .map(|layer| &*layer.path)
            .collect();
        let mine: usize = worked.circuits[0]
            .pieces
            .iter()
            .map(|&at| found.pieces[at].len())
            .sum();
        assert_eq!(bright.len(), mine, "only its pieces shine");
    }
}
