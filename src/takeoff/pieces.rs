//! Rows into placed pieces.

use kurbo::{Affine, BezPath, Point, Rect};

use super::assemble::{Bent, assemble};
use super::drawn::{Drawn, Made};
use super::route::as_drawn;
use super::split::SAME_MM;
use super::{Piece, RowTakeoff, artwork, finding, letters, outline, shape};
use crate::book::Allowances;
use crate::job::{Job, Row, StrokesRow};
use crate::measure::{self, Length, LengthUnit};
use crate::rules::Finding;

/// Clear space between rows, as a share of the taller row's height.
const ROW_GAP: f64 = 0.35;
/// Distance between straight strokes drawn under each other, as a share of the longest.
const BAR_PITCH: f64 = 0.03;

/// Everything taken off a job.
#[derive(Debug, Clone)]
pub struct Takeoff {
    /// One for each row of the job.
    pub rows: Vec<RowTakeoff>,
    /// All pieces in reading order.
    pub pieces: Vec<Piece>,
    /// The whole sign's box on its own plane, millimetres.
    pub bounds: Rect,
    /// What was found on the way.
    pub findings: Vec<Finding>,
}

/// Takes a job off: strokes, pieces, glass.
pub fn takeoff(job: &Job, allowances: &Allowances) -> Takeoff {
    let mut off = Takeoff {
        rows: Vec::new(),
        pieces: Vec::new(),
        bounds: Rect::ZERO,
        findings: Vec::new(),
    };
    let tail_mm = sane(allowances.tail_mm, 0.0, 2_000.0).unwrap_or_else(|| {
        off.findings.push(finding::allowance(format!(
            "The tail allowance must be 0 to 2000 mm, but is {}: counted as none.",
            allowances.tail_mm
        )));
        0.0
    });
    let crossover_mm = sane(allowances.crossover_mm, 0.0, 2_000.0).unwrap_or_else(|| {
        off.findings.push(finding::allowance(format!(
            "The glass added to a crossover must be 0 to 2000 mm, but is {}: counted as none.",
            allowances.crossover_mm
        )));
        0.0
    });
    let longest = sane(allowances.longest_piece_mm, 100.0, 100_000.0).map(Length::from_mm);
    let bent = Bent {
        longest_mm: longest.map(Length::mm),
        crossover_mm,
    };
    let mut sheet = Sheet {
        below: 0.0,
        last_height: 0.0,
        bounds: None,
    };
    for (at, row) in job.rows.iter().enumerate() {
        #[allow(clippy::cast_precision_loss, reason = "a handful of rows")]
        let over = at as f64 >= measure::ROWS.most;
        if over {
            off.findings
                .push(finding::too_many(&measure::ROWS, job.rows.len()));
            break;
        }
        let first = off.pieces.len();
        let room = whole(measure::PIECES.most).saturating_sub(first);
        let mut made = match row {
            Row::Text(row) => letters::row(at, row, &mut off.findings),
            Row::Strokes(row) => strokes(at, row, &mut off.findings),
            Row::Artwork(row) => artwork::row(at, row, &job.artwork, &mut off.findings),
            Row::Shape(row) => shape::row(at, row, &mut off.findings),
            Row::Outline(row) => outline::row(at, row, &job.fonts, &mut off.findings),
        };
        let choices = row.pieces();
        made.pieces = assemble(at, made.pieces, choices, bent, &mut off.findings);
        let copies = count(at, row.count(), &mut off.findings);
        let wanted = made.pieces.len() * copies;
        if wanted > room {
            off.findings
                .push(finding::too_many(&measure::PIECES, first + wanted));
            made.pieces.truncate(room / copies.max(1));
        }
        let own = row.tubes().first().copied().unwrap_or_default();
        let mut bounds: Option<Rect> = None;
        for copy in 0..copies {
            if made.pieces.is_empty() {
                break;
            }
            let place = sheet.place(made.bounds);
            for drawn in &made.pieces {
                let piece = drawn.piece(at, (copy, copies), own, (tail_mm, crossover_mm), place);
                off.pieces.push(Piece {
                    group: row.group().to_owned(),
                    ..piece
                });
            }
            let here = place.transform_rect_bbox(made.bounds);
            bounds = Some(bounds.map_or(here, |all| all.union(here)));
        }
        if let Some(longest) = longest {
            off.too_long(at, &made.pieces, (first, copies), longest);
        }
        let pieces = first..off.pieces.len();
        off.rows.push(RowTakeoff {
            bounds: bounds.unwrap_or(Rect::ZERO),
            lit: off.pieces[pieces.clone()]
                .iter()
                .map(|piece| piece.lit)
                .sum(),
            glass: off.pieces[pieces.clone()].iter().map(Piece::glass).sum(),
            pieces,
        });
    }
    off.bounds = sheet.bounds.unwrap_or(Rect::ZERO);
    if off.pieces.iter().any(|piece| piece.hidden > Length::ZERO) {
        off.findings.push(finding::crossovers());
    }
    off
}

/// Up to so many pieces of a row are told one by one that they are too long.
const TOO_LONG_EACH: usize = 3;

impl Takeoff {
    /// Tells of the pieces of a row that the shop cannot bend in one; of its copies once.
    fn too_long(
        &mut self,
        row: usize,
        drawn: &[Drawn],
        (first, copies): (usize, usize),
        longest: Length,
    ) {
        let long: Vec<(usize, &Drawn)> = (first..)
            .zip(drawn)
            .filter(|&(at, _)| {
                let piece = self.pieces.get(at);
                piece.is_some_and(|piece| piece.column().mm() > longest.mm() + SAME_MM)
            })
            .collect();
        if long.len() <= TOO_LONG_EACH {
            for (at, drawn) in long {
                let called = (drawn.label.as_str(), copies);
                let said = finding::too_long(at, &self.pieces[at], called, longest);
                self.findings.push(said);
            }
            return;
        }
        let many = long.len();
        let most = long
            .into_iter()
            // Of some as long the first is named.
            .rev()
            .map(|(at, drawn)| (drawn.label.as_str(), self.pieces[at].column()))
            .max_by(|a, b| a.1.mm().total_cmp(&b.1.mm()));
        self.findings
            .extend(most.map(|most| finding::many_too_long(row, many, most, longest)));
    }
}

/// The plane rows are laid out on: centred, one under the other.
struct Sheet {
    below: f64,
    last_height: f64,
    bounds: Option<Rect>,
}

impl Sheet {
    fn place(&mut self, bounds: Rect) -> Affine {
        let height = bounds.height();
        let gap = if self.bounds.is_some() {
            ROW_GAP * height.max(self.last_height).max(bounds.width() * BAR_PITCH)
        } else {
            0.0
        };
        let top = self.below + gap;
        let place = Affine::translate((-bounds.center().x, top - bounds.y0));
        (self.below, self.last_height) = (top + height, height);
        let here = place.transform_rect_bbox(bounds);
        self.bounds = Some(self.bounds.map_or(here, |all| all.union(here)));
        place
    }
}

fn strokes(at: usize, row: &StrokesRow, findings: &mut Vec<Finding>) -> Made {
    let mut lengths_mm = Vec::new();
    let mut product = None;
    for (number, typed) in row.strokes.split(';').enumerate() {
        if typed.trim().is_empty() {
            continue;
        }
        let field = format!("Stroke {}", number + 1);
        match measure::length(typed, LengthUnit::Millimetres) {
            Ok(length) if measure::PIECE_LENGTH_MM.holds(length.length().mm()) => {
                lengths_mm.push(length.length().mm());
                let count = measure::repeated(typed, LengthUnit::Millimetres);
                product = product.or(count.map(|(count, each)| (typed, count, each)));
            }
            Ok(length) => {
                findings.push(finding::outside(
                    at,
                    Some(&field),
                    &measure::PIECE_LENGTH_MM,
                    length.length().mm(),
                ));
            }
            Err(error) => findings.push(finding::unreadable(at, &field, &error)),
        }
        if lengths_mm.len() > whole(measure::PIECES.most) {
            break;
        }
    }
    if lengths_mm.is_empty() {
        if row.strokes.split(';').all(|typed| typed.trim().is_empty()) {
            findings.push(finding::no_strokes(at));
        }
        return Made::default();
    }
    findings.push(finding::drawn_straight(at));
    if let Some((typed, count, each)) = product {
        findings.push(finding::one_piece(at, typed, count, each.length()));
    }
    let longest = lengths_mm.iter().copied().fold(0.0, f64::max);
    let alone = lengths_mm.len() == 1;
    // "The piece “”" would be no name.
    let called = match row.label.trim() {
        "" => "stroke",
        label => label,
    };
    let mut bounds: Option<Rect> = None;
    let pieces = lengths_mm
        .iter()
        .enumerate()
        .map(|(number, &length)| {
            #[allow(clippy::cast_precision_loss, reason = "a count of strokes")]
            let y = number as f64 * longest * BAR_PITCH;
            let (from, to) = (Point::new(-length / 2.0, y), Point::new(length / 2.0, y));
            let mut stroke = BezPath::new();
            stroke.move_to(from);
            stroke.line_to(to);
            let here = Rect::from_points(from, to);
            bounds = Some(bounds.map_or(here, |all| all.union(here)));
            let label = if alone {
                called.to_owned()
            } else {
                format!("{called} {}", number + 1)
            };
            let way = as_drawn(std::slice::from_ref(&stroke));
            Drawn::new(label, vec![stroke], &way)
        })
        .collect();
    Made {
        pieces,
        bounds: bounds.unwrap_or(Rect::ZERO),
    }
}

fn count(at: usize, typed: i64, findings: &mut Vec<Finding>) -> usize {
    #[allow(
        clippy::cast_precision_loss,
        reason = "only compared with a small limit"
    )]
    let value = typed as f64;
    if measure::COUNT.holds(value) {
        return usize::try_from(typed).unwrap_or(0);
    }
    findings.push(finding::outside(at, None, &measure::COUNT, value));
    0
}

fn sane(value: f64, least: f64, most: f64) -> Option<f64> {
    (least <= value && value <= most).then_some(value)
}

#[allow(
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss,
    reason = "limits of counts are small whole numbers"
)]
fn whole(limit: f64) -> usize {
    limit as usize
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::job::TextRow;
    use crate::rules::Place;

    /// A job of one text row.
    fn texts(text: &str, height: &str, face: &str, count: i64) -> Job {
        Job {
            rows: vec![Row::Text(TextRow {
                text: text.to_owned(),
                height: height.to_owned(),
                face: face.to_owned(),
                tube: "t".to_owned(),
                count,
                ..TextRow::default()
            })],
            ..Job::default()
        }
    }

    #[test]
    fn twice_the_height_is_twice_the_glass() {
        for text in ["Mending", "Moth", "the moon holds late hours"] {
            let per_mm = |height: u32| {
                let job = texts(text, &format!("{height} mm"), "script", 1);
                // In one however long: a piece that is cut has a jump less.
                let allowances = Allowances {
                    longest_piece_mm: 100_000.0,
                    ..Allowances::default()
                };
                let off = takeoff(&job, &allowances);
                assert!(!off.pieces.is_empty(), "{text} has pieces");
                let column: Length = off.pieces.iter().map(Piece::column).sum();
                column.mm() / f64::from(height)
            };
            let at_100 = per_mm(100);
            for height in (100..=400).step_by(10).chain([127, 333]) {
                let here = per_mm(height);
                assert!(
                    (here / at_100 - 1.0).abs() < 1e-9,
                    "{text} at {height} mm: {here} for each mm of height, {at_100} at 100 mm"
                );
            }
        }
    }

    #[test]
    fn copies_are_told_apart() {
        let job = Job {
            rows: vec![
                Row::Strokes(StrokesRow {
                    label: "Border, quarter".to_owned(),
                    strokes: "1850 mm; 3057 mm".to_owned(),
                    tube: "t".to_owned(),
                    count: 2,
                    ..StrokesRow::default()
                }),
                Row::Strokes(StrokesRow {
                    label: String::new(),
                    strokes: "300 mm; 300 mm".to_owned(),
                    tube: "t".to_owned(),
                    count: 1,
                    ..StrokesRow::default()
                }),
                texts("Hi", "100 mm", "sans", 1).rows.remove(0),
            ],
            ..Job::default()
        };
        let allowances = Allowances {
            longest_piece_mm: 2_700.0,
            ..Allowances::default()
        };
        let off = takeoff(&job, &allowances);
        let labels: Vec<&str> = off
            .pieces
            .iter()
            .map(|piece| piece.label.as_str())
            .collect();
        assert_eq!(
            labels,
            [
                "Border, quarter 1 (1 of 2)",
                "Border, quarter 2, part 1 (1 of 2)",
                "Border, quarter 2, part 2 (1 of 2)",
                "Border, quarter 1 (2 of 2)",
                "Border, quarter 2, part 1 (2 of 2)",
                "Border, quarter 2, part 2 (2 of 2)",
                "stroke 1",
                "stroke 2",
                "H",
                "i",
            ]
        );
        let said = |off: &Takeoff| -> Vec<String> {
            let long = off.findings.iter();
            long.filter(|finding| finding.says.contains("longer than the shop bends"))
                .map(|finding| finding.says.clone())
                .collect()
        };
        assert_eq!(
            said(&off),
            [
                "“Border, quarter 2” would be 3\u{202f}057 mm of glass between its electrodes, longer \
                 than the shop bends in one (2\u{202f}700 mm): made in 2, cut where it shows least. Cut \
                 it elsewhere on the picture, or keep it in one."
            ]
        );
        let mut kept = job;
        kept.rows[0].pieces_mut().keep_long = true;
        let off = takeoff(&kept, &allowances);
        assert_eq!(off.pieces[1].label, "Border, quarter 2 (1 of 2)");
        assert_eq!(
            said(&off),
            [
                "The piece “Border, quarter 2”, made 2 times, is 3\u{202f}057 mm of glass between its \
                 electrodes, longer than the shop bends in one (2\u{202f}700 mm): it stays in one piece."
            ]
        );
    }

    #[test]
    fn a_hair_too_long_is_not_shown_as_just_long_enough() {
        let row = Row::Strokes(StrokesRow {
            label: "Bar".to_owned(),
            strokes: "2400.3 mm".to_owned(),
            tube: "t".to_owned(),
            count: 1,
            ..StrokesRow::default()
        });
        let job = Job {
            rows: vec![row],
            ..Job::default()
        };
        let off = takeoff(&job, &Allowances::default());
        let says = &off.findings[1].says;
        assert!(says.contains("would be 2400.3 mm of glass"), "{says}");
    }

    #[test]
    fn a_row_of_large_letters_is_told_once_that_they_are_too_long() {
        let long = |job: &Job| -> Vec<String> {
            let off = takeoff(job, &Allowances::default());
            let said = off.findings.iter();
            said.filter(|finding| {
                finding.says.contains("than the shop bends") && finding.place == Place::Row(0)
            })
            .map(|finding| finding.says.clone())
            .collect()
        };
        let mut job = texts("MINNOW", "3 m", "sans", 2);
        // M: two stems of 3 m and two slants of √(8² + 21²) / 21 × 3 m, which touch.
        assert_eq!(
            long(&job),
            [
                "6 pieces of this row would be longer than the shop bends in one (2\u{202f}400 mm), the \
                 longest “M” with 12\u{202f}421 mm of glass between its electrodes: made in parts, that \
                 one in 6, cut where it shows least. Cut them elsewhere on the picture, or keep them in \
                 one."
            ]
        );
        job.rows[0].pieces_mut().keep_long = true;
        assert_eq!(
            long(&job),
            [
                "6 pieces of this row are longer than the shop bends in one (2\u{202f}400 mm), the \
                 longest “M” with 12\u{202f}421 mm of glass between its electrodes: it stays in \
                 one piece."
            ]
        );
    }

    #[test]
    fn parts_just_as_long_as_the_shop_bends_are_not_too_long() {
        for parts in [2, 3, 7] {
            let row = Row::Strokes(StrokesRow {
                label: "Bar".to_owned(),
                strokes: format!("{parts} x 700.1 mm"),
                ..StrokesRow::default()
            });
            let job = Job {
                rows: vec![row],
                ..Job::default()
            };
            let allowances = Allowances {
                longest_piece_mm: 700.1,
                ..Allowances::default()
            };
            let off = takeoff(&job, &allowances);
            assert_eq!(off.pieces.len(), parts);
            let said = off
                .findings
                .iter()
                .filter(|f| f.says.contains("stays in one"));
            assert_eq!(said.count(), 0, "{:?}", off.findings);
        }
    }

    #[test]
    fn limits_are_whole_sentences() {
        let off = takeoff(&texts("A", "1/3 in", "sans", 1), &Allowances::default());
        assert_eq!(
            off.findings[0].says,
            "Letter height must be 10 to 5000 mm (smaller cannot be bent in glass, larger is built \
             from parts given as strokes), but is 8.467 mm."
        );
    }
}
