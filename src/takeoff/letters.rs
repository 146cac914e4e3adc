//! A row of letters: laid out, then each letter, or each word of a joined face, a piece.

use std::collections::HashMap;

use kurbo::{Affine, BezPath};

use super::drawn::{Drawn, Made};
use super::finding;
use super::route::{Route, route};
use crate::drawing::{self, Bend, BendBy, Face, Layout, Letter, Shaped, face};
use crate::job::{Align, Curve, TextRow};
use crate::measure::{self, LengthUnit, Limit};
use crate::rules::Finding;

/// The letters of a row.
pub(super) fn row(at: usize, row: &TextRow, findings: &mut Vec<Finding>) -> Made {
    if !has_text(at, &row.text, findings) {
        return Made::default();
    }
    let Some(face) = face(&row.face) else {
        findings.push(finding::no_face(at, &row.face));
        return Made::default();
    };
    let Some(height_mm) = height(at, &row.height, findings) else {
        return Made::default();
    };
    // Worked out in the units of the face, where points are the figures of its file, and scaled at the
    // end: twice the height is exactly twice the glass.
    let scale = height_mm / face.cap_units;
    let how = layout(at, row, (face, scale), findings);
    let shaped = lay_out(at, row, (face, scale), how, findings);
    if !shaped.missing.is_empty() {
        findings.push(finding::no_shape(at, face, &row.text, &shaped.missing));
    }
    let bounds = shaped.bounds.scale_from_origin(scale);
    let several = shaped.letters.windows(2);
    let mut several = several.map(|pair| pair[0].word == pair[1].word);
    if face.joined && (how.bend.is_some() || how.spacing != 0.0) && several.any(|same| same) {
        findings.push(finding::joints(at, face));
    }
    // The same letter, or word on a straight line, is run through the same way wherever it stands.
    let mut known: HashMap<String, Route> = HashMap::new();
    let pieces = bits(shaped.letters, face.joined)
        .into_iter()
        .map(|bit| {
            let alike = !face.joined || how.bend.is_none();
            let way = match known.get(&bit.label) {
                Some(way) if alike => way.clone(),
                _ => route(&bit.own),
            };
            known
                .entry(bit.label.clone())
                .or_insert_with(|| way.clone());
            let strokes = bit.names.into_iter().zip(bit.own).collect();
            Drawn::named(bit.label, strokes, &way)
                .in_word(bit.word)
                .placed(bit.place, scale)
        })
        .collect();
    Made { pieces, bounds }
}

/// Whether a text is there and no longer than a row of letters may be.
pub(super) fn has_text(at: usize, text: &str, findings: &mut Vec<Finding>) -> bool {
    if text.trim().is_empty() {
        findings.push(finding::no_text(at));
        return false;
    }
    #[allow(clippy::cast_precision_loss, reason = "a count of characters")]
    let characters = text.chars().count() as f64;
    let limit = &measure::TEXT_CHARACTERS;
    if !limit.holds(characters) {
        findings.push(finding::outside(at, None, limit, characters));
        return false;
    }
    true
}

/// The height of a capital in millimetres; None where it cannot be read or is not taken.
pub(super) fn height(at: usize, typed: &str, findings: &mut Vec<Finding>) -> Option<f64> {
    let height_mm = match measure::length(typed, LengthUnit::Millimetres) {
        Ok(height) => height.length().mm(),
        Err(error) => {
            findings.push(finding::unreadable(at, "Letter height", &error));
            return None;
        }
    };
    let limit = &measure::LETTER_HEIGHT_MM;
    if !limit.holds(height_mm) {
        findings.push(finding::outside(at, None, limit, height_mm));
        return None;
    }
    Some(height_mm)
}

/// What becomes one piece: its strokes as the pen writes its first letter, and where that stands.
struct Bit {
    label: String,
    word: usize,
    own: Vec<BezPath>,
    /// The names of the strokes: number of the letter, the letter, number of its stroke.
    names: Vec<String>,
    place: Affine,
}

fn bits(letters: Vec<Letter>, joined: bool) -> Vec<Bit> {
    let mut bits: Vec<Bit> = Vec::new();
    for (at, letter) in letters.into_iter().enumerate() {
        let Letter {
            character,
            word,
            own,
            place,
        } = letter;
        let number = at + 1;
        let names = (1..=own.len()).map(|stroke| format!("{number} {character} {stroke}"));
        match bits.last_mut() {
            Some(bit) if joined && bit.word == word => {
                let from_first = bit.place.inverse() * place;
                bit.label.push(character);
                bit.names.extend(names);
                bit.own.extend(own.iter().map(|stroke| from_first * stroke));
            }
            _ => bits.push(Bit {
                label: character.to_string(),
                word,
                names: names.collect(),
                own,
                place,
            }),
        }
    }
    bits
}

/// On the arc that is asked for, or straight where it will not stand on it.
fn lay_out(
    at: usize,
    row: &TextRow,
    (face, scale): (&Face, f64),
    how: Layout,
    findings: &mut Vec<Finding>,
) -> Shaped {
    let typed_mm = match how.bend.map(|bend| bend.by) {
        Some(BendBy::Radius(by) | BendBy::Rise(by)) => by * scale,
        None => 0.0,
    };
    face.lay_out(&row.text, &how).unwrap_or_else(|why| {
        findings.push(finding::no_arc(at, typed_mm, why, scale));
        let straight = Layout { bend: None, ..how };
        face.lay_out(&row.text, &straight).unwrap_or_default()
    })
}

/// The layout in units of the face, `scale` millimetres each.
fn layout(
    at: usize,
    row: &TextRow,
    (face, scale): (&Face, f64),
    findings: &mut Vec<Finding>,
) -> Layout {
    let usual = TextRow::default();
    let mut share = |limit: &Limit, typed: f64, usual: f64| {
        if limit.holds(typed) {
            return typed / 100.0;
        }
        let instead = format!("drawn at {usual} %");
        findings.push(finding::not_laid_out(at, limit, typed, &instead));
        usual / 100.0
    };
    let width = share(
        &measure::WIDTH_PERCENT,
        row.width_percent,
        usual.width_percent,
    );
    let spacing = share(
        &measure::SPACING_PERCENT,
        row.spacing_percent,
        usual.spacing_percent,
    );
    // A line gap that is not asked for is not found fault with.
    let gap = if row.text.contains('\n') {
        share(
            &measure::LINE_GAP_PERCENT,
            row.line_gap_percent,
            usual.line_gap_percent,
        )
    } else {
        0.0
    };
    let turned = if measure::ROTATION_DEGREES.holds(row.rotation_degrees) {
        row.rotation_degrees
    } else {
        findings.push(finding::not_laid_out(
            at,
            &measure::ROTATION_DEGREES,
            row.rotation_degrees,
            "drawn upright",
        ));
        0.0
    };
    let cap = face.cap_units;
    Layout {
        cap,
        width,
        spacing: spacing * cap,
        pitch: (1.0 + gap) * cap,
        align: match row.align {
            Align::Left => drawing::Align::Left,
            Align::Centre => drawing::Align::Centre,
            Align::Right => drawing::Align::Right,
        },
        bend: row
            .arc
            .as_ref()
            .and_then(|curve| bend(at, curve, scale, findings)),
        turned,
    }
}

/// The arc in units of the face; None where its length cannot be read or is not taken.
fn bend(at: usize, curve: &Curve, scale: f64, findings: &mut Vec<Finding>) -> Option<Bend> {
    let (hangs, typed) = curve.parts();
    let (field, limit) = match curve {
        Curve::Radius(_) => ("Arc radius", &measure::ARC_RADIUS_MM),
        Curve::Rise(_) => ("Arc rise", &measure::ARC_RISE_MM),
    };
    let mm = match measure::length(typed, LengthUnit::Millimetres) {
        Ok(length) => length.length().mm(),
        Err(error) => {
            findings.push(finding::unreadable_arc(at, field, &error));
            return None;
        }
    };
    if !limit.holds(mm) {
        findings.push(finding::not_laid_out(at, limit, mm, "drawn straight"));
        return None;
    }
    let by = mm / scale;
    let by = match curve {
        Curve::Radius(_) => BendBy::Radius(by),
        Curve::Rise(_) => BendBy::Rise(by),
    };
    Some(Bend { by, hangs })
}
