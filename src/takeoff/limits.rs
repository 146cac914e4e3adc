//! The takeoff held against what the shop bends: radii, letter heights, spacing, electrodes, and the
//! sign's outer size. The limits are the shop's own settings ([`crate::book::Bending`]).

use std::collections::{BTreeMap, HashMap};

use kurbo::{Point, Rect};

use super::beside::Loop;
use super::near::Near;
use super::{Piece, Stroke, Takeoff, finding};
use crate::book::{Bending, Book};
use crate::job::{Job, Row};
use crate::measure::{self, LengthUnit, Limit};
use crate::rules::Finding;

/// Diameters of tubes that are held against anything.
const GLASS_MM: std::ops::RangeInclusive<f64> = 3.0..=50.0;
/// Figures that miss a limit by less than this do not, in millimetres.
const SLACK_MM: f64 = 0.05;
/// Electrodes of two pieces nearer than this are where one stroke was cut.
const SAME_PLACE_MM: f64 = 0.6;

/// What of a takeoff the shop would not bend, or not so.
pub fn against_shop(off: &Takeoff, job: &Job, book: &Book) -> Vec<Finding> {
    let mut findings = Vec::new();
    let limits = &sensible(&book.bending, &mut findings);
    let diameter = |tube: &str| {
        let entry = book.tubes.iter().find(|entry| entry.name == tube)?;
        // What is no glass tube is told of by its entry.
        entry.outer_mm.filter(|outer| GLASS_MM.contains(outer))
    };
    for (at, (row, taken)) in job.rows.iter().zip(&off.rows).enumerate() {
        // Copies are alike: one of them tells all.
        let pieces: Vec<(usize, &Piece)> = (taken.pieces.clone())
            .filter_map(|number| Some((number, off.pieces.get(number)?)))
            .filter(|(_, piece)| piece.copy == 0)
            .collect();
        bends(&pieces, limits, diameter, &mut findings);
        folds(&pieces, &mut findings);
        let letters_of = match row {
            Row::Text(row) => Some((&row.height, &row.tube)),
            Row::Outline(row) => Some((&row.height, &row.tube)),
            Row::Strokes(_) | Row::Artwork(_) | Row::Shape(_) => None,
        };
        if let Some((height, tube)) = letters_of {
            letters(at, height, diameter(tube), limits, &mut findings);
        }
        spacing(&pieces, limits, diameter, &mut findings);
        beside(&pieces, limits, diameter, &mut findings);
        electrodes(&pieces, limits, &mut findings);
    }
    outline(off, job, diameter, &mut findings);
    findings
}

/// The limits that make sense; a finding for each that does not, which is not checked.
fn sensible(set: &Bending, findings: &mut Vec<Finding>) -> Bending {
    let mut limit = |value: Option<f64>, limit: &Limit| {
        let value = value?;
        if limit.holds(value) {
            return Some(value);
        }
        findings.push(finding::no_limit(limit, value));
        None
    };
    Bending {
        least_radius_diameters: limit(set.least_radius_diameters, &measure::RADIUS_DIAMETERS),
        least_letter_diameters: limit(set.least_letter_diameters, &measure::LETTER_DIAMETERS),
        least_spacing_diameters: limit(set.least_spacing_diameters, &measure::SPACING_DIAMETERS),
        least_electrode_spacing_mm: limit(
            set.least_electrode_spacing_mm,
            &measure::ELECTRODE_SPACING_MM,
        ),
    }
}

fn bends(
    pieces: &[(usize, &Piece)],
    limits: &Bending,
    diameter: impl Fn(&str) -> Option<f64>,
    findings: &mut Vec<Finding>,
) {
    let Some(factor) = limits.least_radius_diameters else {
        return;
    };
    // The tightest bend against its limit, by tube: pieces of a row may be of several.
    let mut by_tube: BTreeMap<&str, (usize, f64, usize, f64)> = BTreeMap::new();
    for &(at, piece) in pieces {
        let Some(outer) = diameter(&piece.tube) else {
            continue;
        };
        let rooms = piece.bends.iter().map(|bend| bend.room_mm);
        let room = rooms.fold(f64::INFINITY, f64::min);
        if room < factor * outer - SLACK_MM {
            let (many, tightest, which, _) =
                by_tube.entry(&piece.tube).or_insert((0, room, at, outer));
            *many += 1;
            if room < *tightest {
                (*tightest, *which) = (room, at);
            }
        }
    }
    for (many, room, at, outer) in by_tube.into_values() {
        let label = label_of(pieces, at);
        let own = Bending::default().least_radius_diameters != Some(factor);
        findings.push(finding::tight(at, label, many, room, (factor, outer), own));
    }
}

fn folds(pieces: &[(usize, &Piece)], findings: &mut Vec<Finding>) {
    let folded = pieces.iter().filter_map(|&(at, piece)| {
        let many = piece.bends.iter().map(|bend| bend.folds).sum::<usize>();
        (many > 0).then_some((at, piece, many))
    });
    let folded: Vec<(usize, &Piece, usize)> = folded.collect();
    if let Some(&(at, piece, _)) = folded.first() {
        let many = folded.iter().map(|(.., many)| many).sum();
        findings.push(finding::folds(at, &piece.label, folded.len(), many));
    }
}

fn label_of<'a>(pieces: &[(usize, &'a Piece)], at: usize) -> &'a str {
    let found = pieces.iter().find(|&&(number, _)| number == at);
    found.map_or("", |(_, piece)| &piece.label)
}

fn letters(
    at: usize,
    height: &str,
    outer: Option<f64>,
    limits: &Bending,
    findings: &mut Vec<Finding>,
) {
    let (Some(factor), Some(outer)) = (limits.least_letter_diameters, outer) else {
        return;
    };
    // A height that cannot be read or is out of range is told of by the takeoff.
    let height = measure::length(height, LengthUnit::Millimetres);
    let height = height.map_or(f64::NAN, |height| height.length().mm());
    if measure::LETTER_HEIGHT_MM.holds(height) && height < factor * outer - SLACK_MM {
        let own = Bending::default().least_letter_diameters != Some(factor);
        findings.push(finding::small_letters(at, height, (factor, outer), own));
    }
}

fn spacing(
    pieces: &[(usize, &Piece)],
    limits: &Bending,
    diameter: impl Fn(&str) -> Option<f64>,
    findings: &mut Vec<Finding>,
) {
    let Some(factor) = limits.least_spacing_diameters else {
        return;
    };
    let outers: Vec<f64> = pieces
        .iter()
        .map(|(_, piece)| diameter(&piece.tube).unwrap_or(0.0))
        .collect();
    let widest = outers.iter().copied().fold(0.0, f64::max);
    if widest <= 0.0 || pieces.len() < 2 {
        return;
    }
    let mut near = Near::new(factor * widest);
    for (number, (_, piece)) in pieces.iter().enumerate() {
        for stroke in &piece.strokes {
            near.add(number, &stroke.path);
        }
    }
    let least = |one: usize, other: usize| factor * f64::midpoint(outers[one], outers[other]);
    let pairs = near.pairs(factor * widest, |one, other| {
        outers[one] > 0.0 && outers[other] > 0.0 && !meet(pieces[one].1, pieces[other].1)
    });
    let mut tight: Vec<(f64, usize, usize)> = pairs
        .into_iter()
        .map(|((one, other), (distance, _))| (distance, one, other))
        .filter(|&(distance, one, other)| distance < least(one, other) - SLACK_MM)
        .collect();
    tight.sort_by(|a, b| a.0.total_cmp(&b.0).then((a.1, a.2).cmp(&(b.1, b.2))));
    if let Some(&(distance, one, other)) = tight.first() {
        let ((at, first), (_, second)) = (pieces[one], pieces[other]);
        let own = Bending::default().least_spacing_diameters != Some(factor);
        findings.push(finding::too_near(
            at,
            [&first.label, &second.label],
            tight.len(),
            distance,
            (factor, least(one, other)),
            own,
        ));
    }
}

/// Closed strokes whose own sides come too near each other, also those cut into more pieces.
fn beside(
    pieces: &[(usize, &Piece)],
    limits: &Bending,
    diameter: impl Fn(&str) -> Option<f64>,
    findings: &mut Vec<Finding>,
) {
    let Some(factor) = limits.least_spacing_diameters else {
        return;
    };
    let mut by_name: BTreeMap<&str, (usize, Vec<&Stroke>)> = BTreeMap::new();
    for (number, (_, piece)) in pieces.iter().enumerate() {
        for stroke in &piece.strokes {
            let parts = by_name.entry(&stroke.name).or_insert((number, Vec::new()));
            parts.1.push(stroke);
        }
    }
    // The same letter is looked at once.
    let mut known: HashMap<[i64; 4], Option<f64>> = HashMap::new();
    let mut many = 0;
    let mut nearest: Option<(f64, usize, f64)> = None;
    for (number, parts) in by_name.into_values() {
        let Some(outer) = diameter(&pieces[number].1.tube) else {
            continue;
        };
        let parts = parts.iter().map(|stroke| (stroke.part, &stroke.path));
        let Some(stroke) = Loop::of(parts) else {
            continue;
        };
        let least = factor * outer;
        let [long, wide, high] = stroke.shape();
        #[allow(
            clippy::cast_possible_truncation,
            reason = "a cast stops at its limits"
        )]
        let shape = [long, wide, high, (least * 1e6) as i64];
        let found = known.entry(shape);
        let found = *found.or_insert_with(|| stroke.beside_itself(least));
        if let Some(distance) = found.filter(|distance| *distance < least - SLACK_MM) {
            many += 1;
            let first = |&(known, of, _): &(f64, usize, f64)| (distance, number) < (known, of);
            if nearest.as_ref().is_none_or(first) {
                nearest = Some((distance, number, least));
            }
        }
    }
    if let Some((distance, number, least)) = nearest {
        let (at, piece) = pieces[number];
        let own = Bending::default().least_spacing_diameters != Some(factor);
        let limit = (factor, least);
        findings.push(finding::beside_itself(
            at,
            &piece.label,
            many,
            distance,
            limit,
            own,
        ));
    }
}

/// Whether an end of one piece is an end of another: there one stroke, or one run, was cut.
fn meet(one: &Piece, other: &Piece) -> bool {
    let near = |a: Point| {
        let mut ends = other.electrodes.iter();
        ends.any(|&b| a.distance(b) < SAME_PLACE_MM)
    };
    one.electrodes.into_iter().any(near)
}

fn electrodes(pieces: &[(usize, &Piece)], limits: &Bending, findings: &mut Vec<Finding>) {
    let Some(least) = limits.least_electrode_spacing_mm else {
        return;
    };
    let mut ends: Vec<(Point, usize)> = pieces
        .iter()
        .enumerate()
        .flat_map(|(number, (_, piece))| piece.electrodes.map(|end| (end, number)))
        .collect();
    ends.sort_by(|a, b| a.0.x.total_cmp(&b.0.x));
    let (mut many, mut nearest) = (0, None::<(f64, usize, usize)>);
    for (at, &(end, one)) in ends.iter().enumerate() {
        let following = ends[at + 1..].iter();
        for &(other_end, other) in following.take_while(|(other, _)| other.x - end.x < least) {
            let distance = end.distance(other_end);
            if other == one || distance >= least - SLACK_MM {
                continue;
            }
            many += 1;
            if nearest.is_none_or(|(known, ..)| distance < known) {
                nearest = Some((distance, one.min(other), one.max(other)));
            }
        }
    }
    if let Some((distance, one, other)) = nearest {
        let ((at, first), (_, second)) = (pieces[one], pieces[other]);
        let labels = [first.label.as_str(), second.label.as_str()];
        findings.push(finding::electrodes_near(at, labels, many, distance, least));
    }
}

fn outline(
    off: &Takeoff,
    job: &Job,
    diameter: impl Fn(&str) -> Option<f64>,
    findings: &mut Vec<Finding>,
) {
    let Some(outline) = &job.outline else {
        return;
    };
    let rows = job.rows.iter().zip(&off.rows);
    let bounds = rows.filter(|(_, taken)| !taken.pieces.is_empty());
    let bounds = bounds.map(|(row, taken)| {
        let outers = row.tubes().into_iter().filter_map(&diameter);
        let around = outers.fold(0.0, f64::max) / 2.0;
        taken.bounds.inflate(around, around)
    });
    let Some(bounds): Option<Rect> = bounds.reduce(|all, here| all.union(here)) else {
        return;
    };
    for (called, typed, is) in [
        ("width", &outline.width, bounds.width()),
        ("height", &outline.height, bounds.height()),
    ] {
        if typed.trim().is_empty() {
            continue;
        }
        match measure::length(typed, LengthUnit::Millimetres) {
            Ok(most) if is > most.length().mm() + SLACK_MM => {
                findings.push(finding::beyond_outline(called, is, most.length().mm()));
            }
            Ok(_) => {}
            Err(error) => findings.push(finding::unreadable_outline(called, &error)),
        }
    }
}
