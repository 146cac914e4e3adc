//! A row of artwork: the lines of a file, at the wanted size, as pieces of glass.
//!
//! Lines of one tube of which an end lies on another are one piece; each piece is run through like a
//! letter. Pieces are in reading order.

use std::cell::RefCell;
use std::rc::Rc;
use std::sync::Arc;

use kurbo::{Affine, BezPath, Rect, Shape};

use super::assemble::{touching, way};
use super::drawn::{Drawn, Made};
use super::finding;
use super::outline;
use crate::drawing::outline::{Join, filled, inset};
use crate::drawing::{ArtGroup, ArtStroke, Artwork, dxf, svg};
use crate::job::{ArtworkFile, ArtworkLines, ArtworkRow};
use crate::measure::{self, LengthUnit, Limit};
use crate::rules::Finding;

/// Most lines of a row that are tube. Each is held against those near it, and a drawing of more is
/// no sign but a picture cut into bits.
const MOST_LINES: usize = 20_000;
/// Files remembered once read.
const REMEMBERED: usize = 6;

/// The wanted width of an artwork.
const WIDTH_MM: Limit = Limit {
    name: "the artwork's width",
    least: 10.0,
    most: 50_000.0,
    unit: "mm",
    why: "smaller cannot be bent in glass, larger is planned as several jobs",
};

/// How high an artwork may become at the wanted width.
const HEIGHT_MM: Limit = Limit {
    name: "the artwork's height at this width",
    least: 0.0,
    ..WIDTH_MM
};

type Read = Rc<Result<Artwork, String>>;

thread_local! {
    // Reading a large drawing takes longer than all the rest of a work-up, and the same file is
    // read at every keystroke. What is remembered is what reading it again would give.
    static READ: RefCell<Vec<(Arc<str>, Read)>> = const { RefCell::new(Vec::new()) };
}

/// What an artwork file holds; a sentence where it cannot be read.
pub fn artwork(file: &ArtworkFile) -> Read {
    READ.with_borrow_mut(|known| {
        let same = |text: &Arc<str>| Arc::ptr_eq(text, &file.text) || *text == file.text;
        if let Some(at) = known.iter().position(|(text, _)| same(text)) {
            return known[at].1.clone();
        }
        // An SVG file is XML and begins with it; DXF begins with a group code.
        let read = if file
            .text
            .trim_start_matches('\u{feff}')
            .trim_start()
            .starts_with('<')
        {
            svg::read(&file.text)
        } else {
            dxf::read(file.text.as_bytes())
        };
        let read = Rc::new(read);
        known.insert(0, (file.text.clone(), read.clone()));
        known.truncate(REMEMBERED);
        read
    })
}

/// Takes a row of artwork off.
pub(super) fn row(
    at: usize,
    row: &ArtworkRow,
    files: &[ArtworkFile],
    findings: &mut Vec<Finding>,
) -> Made {
    let Some(file) = files.iter().find(|file| file.name == row.file) else {
        findings.push(finding::no_artwork(at, &row.file));
        return Made::default();
    };
    let read = artwork(file);
    let art = match &*read {
        Ok(art) => art,
        Err(why) => {
            findings.push(finding::bad_file(at, &file.name, why));
            return Made::default();
        }
    };
    findings.extend(finding::unread(at, &art.unread));
    let Some(mm_per_unit) = size(at, row, art, findings) else {
        return Made::default();
    };
    let mut made = Made::default();
    let tube = |group: &ArtGroup| {
        let mut chosen = row.lines.iter();
        let of = |lines: &&ArtworkLines| lines.colour == group.colour && lines.layer == group.layer;
        chosen.find(of).is_some_and(|lines| !lines.tube.is_empty())
    };
    let groups = art.groups();
    let lines = groups.iter().filter(|group| tube(group));
    let lines: usize = lines.map(|group| group.strokes).sum();
    if lines > MOST_LINES {
        findings.push(finding::too_many_lines(at, lines, MOST_LINES));
        return made;
    }
    let mut bounds: Option<Rect> = None;
    for group in groups {
        let Some(lines) = row
            .lines
            .iter()
            .find(|lines| lines.colour == group.colour && lines.layer == group.layer)
        else {
            findings.push(finding::undecided(at, &group, mm_per_unit));
            continue;
        };
        if lines.tube.is_empty() {
            continue;
        }
        let strokes = strokes(at, art, &group, (mm_per_unit, &lines.inset), findings);
        for (_, path) in &strokes {
            let here = path.bounding_box();
            bounds = Some(bounds.map_or(here, |all| all.union(here)));
        }
        let paths: Vec<&BezPath> = strokes.iter().map(|(_, path)| path).collect();
        let runs = touching(&paths);
        let mut strokes: Vec<Option<(String, BezPath)>> = strokes.into_iter().map(Some).collect();
        for run in runs {
            let run: Vec<(String, BezPath)> = run
                .into_iter()
                .filter_map(|at| strokes[at].take())
                .collect();
            let paths: Vec<BezPath> = run.iter().map(|(_, path)| path.clone()).collect();
            let drawn = Drawn::named(String::new(), run, &way(&paths));
            made.pieces.push(drawn.of(&lines.tube));
        }
    }
    in_reading_order(&mut made.pieces);
    for (number, drawn) in made.pieces.iter_mut().enumerate() {
        drawn.label = match row.label.trim() {
            "" => format!("line {}", number + 1),
            label => format!("{label} {}", number + 1),
        };
    }
    made.bounds = bounds.unwrap_or(Rect::ZERO);
    made
}

/// Millimetres in a unit of the artwork at the wanted size.
fn size(at: usize, row: &ArtworkRow, art: &Artwork, findings: &mut Vec<Finding>) -> Option<f64> {
    if art.strokes.is_empty() {
        findings.push(finding::empty_artwork(at));
        return None;
    }
    if row.width.trim().is_empty() {
        let wide = art
            .mm_per_unit
            .map(|mm| mm * art.bounds.width().max(art.bounds.height()));
        return match (art.mm_per_unit, wide) {
            (Some(mm), Some(wide)) if WIDTH_MM.holds(wide) => Some(mm),
            (Some(_), Some(wide)) => {
                findings.push(finding::outside(at, None, &WIDTH_MM, wide));
                None
            }
            _ => {
                findings.push(finding::no_size(at));
                None
            }
        };
    }
    match measure::length(&row.width, LengthUnit::Millimetres) {
        Ok(wide) if WIDTH_MM.holds(wide.length().mm()) => {
            // One so narrow that no figure says how it is to be scaled is as good as upright.
            let scale = wide.length().mm() / art.bounds.width();
            let high = scale * art.bounds.height();
            if !high.is_finite() {
                findings.push(finding::no_width(at));
                None
            } else if HEIGHT_MM.holds(high) {
                Some(scale)
            } else {
                findings.push(finding::outside(at, None, &HEIGHT_MM, high));
                None
            }
        }
        Ok(wide) => {
            findings.push(finding::outside(at, None, &WIDTH_MM, wide.length().mm()));
            None
        }
        Err(error) => {
            findings.push(finding::unreadable(at, "Width", &error));
            None
        }
    }
}

/// The lines of a group at their size, the edges of filled areas inset by what is typed. A line is
/// called by its number in the file, a line of an inset by its own.
fn strokes(
    at: usize,
    art: &Artwork,
    group: &ArtGroup,
    (mm_per_unit, typed): (f64, &str),
    findings: &mut Vec<Finding>,
) -> Vec<(String, BezPath)> {
    // From where the drawing begins: far out, as maps are drawn, curves have too few digits.
    let place = Affine::scale(mm_per_unit) * Affine::translate(-art.bounds.origin().to_vec2());
    let of_group = || art.of_group(group);
    let at_size =
        |(number, stroke): (usize, &ArtStroke)| ((number + 1).to_string(), place * &stroke.path);
    let distance_mm = outline::distance(at, typed, &finding::inset_of(group), findings);
    if group.filled > 0 {
        findings.push(finding::filled(at, group, distance_mm));
    }
    if distance_mm == 0.0 {
        return of_group().map(at_size).collect();
    }
    let edge = |stroke: &ArtStroke| stroke.closed && stroke.area.is_some();
    let edges: Vec<&ArtStroke> = of_group()
        .map(|(_, stroke)| stroke)
        .filter(|stroke| edge(stroke))
        .collect();
    let drawn: Vec<(usize, &ArtStroke)> = of_group().filter(|(_, stroke)| !edge(stroke)).collect();
    let open = drawn
        .iter()
        .filter(|(_, stroke)| stroke.area.is_some())
        .count();
    let mut strokes: Vec<(String, BezPath)> = drawn.into_iter().map(at_size).collect();
    if edges.is_empty() {
        findings.push(finding::no_inside(at, group));
        return strokes;
    }
    if open > 0 {
        findings.push(finding::open_edges(at, group, open));
    }
    // Each area by its own rule of what is a hole; areas that touch or cover each other are then one.
    let of_areas = edges.chunk_by(|one, next| one.area == next.area);
    let areas: Vec<BezPath> = of_areas
        .flat_map(|area| {
            let paths: Vec<BezPath> = area.iter().map(|stroke| place * &stroke.path).collect();
            let filling = area[0].area.map(|area| area.filling);
            filled(&paths, filling.unwrap_or_default())
        })
        .collect();
    let inset = inset(&areas, distance_mm, Join::Round);
    if inset.paths.is_empty() {
        findings.push(finding::no_area_left(at, group, distance_mm));
    } else {
        findings.extend(finding::areas_changed(at, group, distance_mm, &inset));
    }
    let inset = inset.paths.into_iter().enumerate();
    strokes.extend(inset.map(|(number, path)| (format!("inset {}", number + 1), path)));
    strokes
}

/// Lines of pieces beside each other, top to bottom, each from left to right. Pieces far higher than
/// most, as borders are, come first.
fn in_reading_order(pieces: &mut Vec<Drawn>) {
    let mut boxed: Vec<(Rect, Drawn)> = std::mem::take(pieces)
        .into_iter()
        .map(|drawn| {
            let boxes = drawn.run.iter().map(|strand| strand.path.bounding_box());
            let all = boxes.reduce(|all, here| all.union(here));
            (all.unwrap_or(Rect::ZERO), drawn)
        })
        .collect();
    let mut heights: Vec<f64> = boxed.iter().map(|(here, _)| here.height()).collect();
    heights.sort_by(f64::total_cmp);
    let usual = heights.get(heights.len() / 2).copied().unwrap_or(0.0);
    let (tall, mut rest): (Vec<_>, Vec<_>) = boxed
        .drain(..)
        .partition(|(here, _)| usual > 0.0 && here.height() > 3.0 * usual);
    pieces.extend(tall.into_iter().map(|(_, drawn)| drawn));
    rest.sort_by(|a, b| a.0.y0.total_cmp(&b.0.y0));
    let mut rest = rest.into_iter().peekable();
    while let Some(first) = rest.next() {
        let below = first.0.y1;
        let mut line = vec![first];
        while let Some(next) = rest.next_if(|(here, _)| here.center().y <= below) {
            line.push(next);
        }
        line.sort_by(|a, b| a.0.x0.total_cmp(&b.0.x0));
        pieces.extend(line.into_iter().map(|(_, drawn)| drawn));
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::{Finding, Grade};

    const ART: &str = r##"<svg xmlns="http://www.w3.org/2000/svg" width="100mm" height="50mm" viewBox="0 0 100 50">
        <path stroke="#ff0000" fill="none" d="M0 0 H40"/>
        <path stroke="#ff0000" fill="none" d="M40 0 V30"/>
        <path stroke="#ff0000" fill="none" d="M60 0 H100"/>
        <circle stroke="#0000ff" fill="none" cx="50" cy="25" r="10"/>
        <text x="1" y="1">hello</text></svg>"##;

    fn made(width: &str, lines: Vec<ArtworkLines>) -> (Made, Vec<Finding>) {
        let files = [ArtworkFile {
            name: "a.svg".to_owned(),
            text: ART.into(),
        }];
        let taken = ArtworkRow {
            label: "Ornament".to_owned(),
            file: "a.svg".to_owned(),
            width: width.to_owned(),
            lines,
            count: 1,
            ..ArtworkRow::default()
        };
        let mut findings = Vec::new();
        (row(0, &taken, &files, &mut findings), findings)
    }

    fn lines(colour: &str, tube: &str) -> ArtworkLines {
        ArtworkLines {
            colour: Some(colour.to_owned()),
            layer: None,
            tube: tube.to_owned(),
            ..ArtworkLines::default()
        }
    }

    #[test]
    fn lines_that_touch_are_one_piece_at_the_wanted_size() {
        let (made, findings) = made(
            "1000 mm",
            vec![
                lines("#ff0000", "12 mm neon"),
                lines("#0000ff", "10 mm blue"),
            ],
        );
        let lit: Vec<f64> = made
            .pieces
            .iter()
            .map(|piece| piece.lit().round())
            .collect();
        // Ten times the file, from left to right: 40 + 30 joined at the corner, a circle of 10 round,
        // 40 alone.
        assert_eq!(lit, [700.0, (200.0 * std::f64::consts::PI).round(), 400.0]);
        assert!(
            (made.pieces[1].lit() - 200.0 * std::f64::consts::PI).abs() < 1e-6,
            "exact"
        );
        assert_eq!(
            made.pieces[1].tube.as_deref(),
            Some("10 mm blue"),
            "its own tube"
        );
        let unread: Vec<&Finding> = findings
            .iter()
            .filter(|f| f.says.contains("text"))
            .collect();
        assert_eq!(unread.len(), 1, "the text is told of: {findings:?}");
    }

    #[test]
    fn what_is_not_decided_is_asked_and_what_is_no_tube_is_left_out() {
        let (made, findings) = made("", vec![lines("#0000ff", "")]);
        assert_eq!(made.pieces.len(), 0, "nothing is tube yet");
        let asked: Vec<&Finding> = findings
            .iter()
            .filter(|f| f.says.contains("#ff0000"))
            .collect();
        assert_eq!(
            asked.len(),
            1,
            "red is asked for, blue is decided: {findings:?}"
        );
        assert_eq!(asked[0].grade, Grade::Look, "a person decides");
    }

    #[test]
    fn a_width_that_cannot_be_gets_a_sentence() {
        for (width, says) in [("2 km", "expected"), ("1 mm", "width"), ("60 m", "width")] {
            let (made, findings) = made(width, vec![lines("#ff0000", "t")]);
            assert!(made.pieces.is_empty(), "{width}: nothing is made");
            assert!(
                findings
                    .iter()
                    .any(|f| f.grade == Grade::Stop && f.says.contains(says)),
                "{width}: {findings:?}"
            );
        }
    }
}
