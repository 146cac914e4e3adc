//! A row of outline letters: letters of the user's own font file, each closed outline a piece.
//!
//! The tube runs on the outline itself, or on an inset of it, around the letter and around each of
//! its counters. Lines stand under each other by their middles.

use std::cell::RefCell;
use std::collections::HashMap;
use std::rc::Rc;
use std::sync::Arc;

use kurbo::{Affine, BezPath, Point, Rect, Shape};

use super::drawn::{Drawn, Made};
use super::finding;
use super::letters;
use super::route::{ends, route};
use crate::drawing::outline::{CapHeight, Font, Inset, Join, inset};
use crate::job::{FontFile, OutlineRow};
use crate::measure::{self, LengthUnit};
use crate::rules::{Finding, Grade};

/// Fonts remembered once read.
const REMEMBERED: usize = 4;
/// From baseline to baseline, in heights of a capital: as letters of the faces stand by default.
const PITCH: f64 = 1.6;

type Read = Rc<Result<Font, String>>;

thread_local! {
    // A font file may be some megabytes and the same one is read at every keystroke. What is
    // remembered is what reading it again would give.
    static READ: RefCell<Vec<(Arc<str>, Read)>> = const { RefCell::new(Vec::new()) };
}

/// The font in a file of the job; a sentence where it cannot be read.
pub fn font(file: &FontFile) -> Read {
    READ.with_borrow_mut(|known| {
        let same = |data: &Arc<str>| Arc::ptr_eq(data, &file.data) || *data == file.data;
        if let Some(at) = known.iter().position(|(data, _)| same(data)) {
            return known[at].1.clone();
        }
        let bytes = file.bytes().ok_or_else(|| {
            "Its data is damaged; expected the bytes of a font file in base64.".to_owned()
        });
        let read = Rc::new(bytes.and_then(|bytes| Font::read(&bytes)));
        known.insert(0, (file.data.clone(), read.clone()));
        known.truncate(REMEMBERED);
        read
    })
}

/// Takes a row of outline letters off.
pub(super) fn row(
    at: usize,
    row: &OutlineRow,
    files: &[FontFile],
    findings: &mut Vec<Finding>,
) -> Made {
    if !letters::has_text(at, &row.text, findings) {
        return Made::default();
    }
    let Some(file) = files.iter().find(|file| file.name == row.font) else {
        findings.push(finding::no_font(at, &row.font));
        return Made::default();
    };
    let read = font(file);
    let font = match &*read {
        Ok(font) => font,
        Err(why) => {
            findings.push(finding::bad_file(at, &file.name, why));
            return Made::default();
        }
    };
    let grade = match font.cap_height() {
        // The height of every letter hangs on a guess.
        CapHeight::Share => Grade::Look,
        CapHeight::Letter | CapHeight::Table => Grade::Note,
    };
    let notes = font.notes().iter();
    findings.extend(notes.map(|note| finding::of_font(at, grade, note)));
    let Some(height_mm) = letters::height(at, &row.height, findings) else {
        return Made::default();
    };
    let distance_mm = distance(at, &row.inset, "Inset", findings);

    let mut made = Made::default();
    let mut bounds: Option<Rect> = None;
    let mut missing = Vec::new();
    let mut told = Told::default();
    let mut known: HashMap<char, (Point, Inset)> = HashMap::new();
    let (mut before, mut letter_number) = (0, 0);
    for (number, line) in row.text.split('\n').enumerate() {
        let shaped = font.shape(line, height_mm);
        // Words are counted anew in each line; a line has no more of them than characters.
        let first_word = before;
        missing.extend(shaped.missing.iter().map(|&(at, c)| (before + at, c)));
        before += line.chars().count() + 1;
        #[allow(clippy::cast_precision_loss, reason = "a count of lines")]
        let down = number as f64 * PITCH * height_mm;
        let to_line = Affine::translate((-shaped.bounds.center().x, down));
        for letter in &shaped.letters {
            let Some(first) = letter.contours.first() else {
                continue;
            };
            let [begin, _] = ends(first);
            letter_number += 1;
            // The same letter is the same shape wherever it stands.
            let (origin, inset) = known.entry(letter.character).or_insert_with(|| {
                let inset = inset(&letter.contours, distance_mm, Join::Round);
                told.hear(letter.character, &inset, distance_mm);
                (begin, inset)
            });
            let place = to_line * Affine::translate(begin - *origin);
            let alone = inset.paths.len() == 1;
            for (number, path) in inset.paths.iter().enumerate() {
                let path: BezPath = place * path;
                let here = path.bounding_box();
                bounds = Some(bounds.map_or(here, |all| all.union(here)));
                let label = if alone {
                    letter.character.to_string()
                } else {
                    format!("{} {}", letter.character, number + 1)
                };
                let way = route(std::slice::from_ref(&path));
                let name = format!("{letter_number} {} {}", letter.character, number + 1);
                let drawn =
                    Drawn::named(label, vec![(name, path)], &way).in_word(first_word + letter.word);
                if drawn.lit() < measure::PIECE_LENGTH_MM.least {
                    told.tiny.push(letter.character);
                }
                made.pieces.push(drawn);
            }
        }
    }
    if !missing.is_empty() {
        findings.push(finding::no_outline(at, font.name(), &row.text, &missing));
    }
    told.say(at, distance_mm, findings);
    made.bounds = bounds.unwrap_or(Rect::ZERO);
    made
}

/// How far a tube lies inside an outline: as typed, or on it where nothing is typed or what is
/// cannot be taken. `field` is what the sentence calls it.
pub(super) fn distance(at: usize, typed: &str, field: &str, findings: &mut Vec<Finding>) -> f64 {
    if typed.trim().is_empty() {
        return 0.0;
    }
    match measure::length(typed, LengthUnit::Millimetres) {
        Ok(distance) if measure::INSET_MM.holds(distance.length().mm()) => distance.length().mm(),
        Ok(distance) => {
            findings.push(finding::inset_outside(at, field, distance.length().mm()));
            0.0
        }
        Err(error) => {
            findings.push(finding::unreadable_inset(at, field, &error));
            0.0
        }
    }
}

/// Letters with something to tell of their insets.
#[derive(Default)]
struct Told {
    nothing_left: Vec<char>,
    thinned: Vec<char>,
    split: Vec<char>,
    opened: Vec<char>,
    united: Vec<char>,
    tiny: Vec<char>,
}

impl Told {
    fn hear(&mut self, letter: char, inset: &Inset, distance_mm: f64) {
        if inset.paths.is_empty() {
            self.nothing_left.push(letter);
            return;
        }
        for (list, so) in [
            (&mut self.thinned, inset.vanished > 0 && distance_mm > 0.0),
            (&mut self.split, inset.split),
            (&mut self.opened, inset.opened > 0),
            (&mut self.united, inset.united),
        ] {
            if so {
                list.push(letter);
            }
        }
    }

    fn say(self, at: usize, distance_mm: f64, findings: &mut Vec<Finding>) {
        let mut tell = |letters: &[char], says: fn(usize, f64, &[char]) -> Finding| {
            if !letters.is_empty() {
                findings.push(says(at, distance_mm, letters));
            }
        };
        tell(&self.nothing_left, finding::nothing_left);
        tell(&self.thinned, finding::part_vanished);
        tell(&self.split, finding::inset_splits);
        tell(&self.opened, finding::inset_opens);
        tell(&self.tiny, finding::tiny_outlines);
        tell(&self.united, finding::united);
    }
}
