//! Kerning: how much nearer or further two letters stand than their widths say.
//!
//! Read are the pair adjustments of the `kern` feature (`GPOS` lookups of type 2, formats 1 and 2,
//! also in extensions) of the language a script has by default, and of them what moves the second
//! letter along the line. A font without that feature is kerned by its `kern` table. Not read are
//! pairs that depend on the letters around them, and adjustments of variable fonts.

use read_fonts::tables::gpos::{PairPos, PositionSubtables};
use read_fonts::tables::kern::{Kern, SubtableKind};
use read_fonts::types::{BigEndian, GlyphId, GlyphId16, Tag};
use read_fonts::{FontRef, TableProvider};

/// Most tables of pairs that are looked through for one pair of letters; common fonts have a few.
const MOST_TABLES: usize = 200;

/// The kerning of a font, found script by script.
pub(super) struct Kerning<'a> {
    file: &'a FontRef<'a>,
    table: Option<Kern<'a>>,
    /// Tables of pairs by script, each list one lookup; no lookups where the font has no `kern`
    /// feature for the script.
    scripts: Vec<(Tag, Vec<Vec<PairPos<'a>>>)>,
}

impl<'a> Kerning<'a> {
    pub(super) fn new(file: &'a FontRef<'a>) -> Self {
        Self {
            file,
            table: file.kern().ok(),
            scripts: Vec::new(),
        }
    }

    /// How far the second glyph moves along the line, in units of the font; `character` is what it
    /// stands for.
    pub(super) fn between(&mut self, first: GlyphId, second: GlyphId, character: char) -> f64 {
        let script = script(character);
        let known = self.scripts.iter().position(|(tag, _)| *tag == script);
        let at = known.unwrap_or_else(|| {
            let lookups = lookups(self.file, script).unwrap_or_default();
            self.scripts.push((script, lookups));
            self.scripts.len() - 1
        });
        match self.scripts.get(at) {
            Some((_, lookups)) if !lookups.is_empty() => {
                // Every lookup moves the letter; within one the first table that knows the pair.
                let moves = lookups.iter().filter_map(|tables| {
                    tables.iter().find_map(|table| pair(table, first, second))
                });
                moves.map(f64::from).sum()
            }
            _ => self
                .table
                .as_ref()
                .map_or(0.0, |table| from_table(table, first, second)),
        }
    }
}

/// The script whose kerning applies, by the letter.
fn script(character: char) -> Tag {
    match u32::from(character) {
        0x0370..=0x03FF | 0x1F00..=0x1FFF => Tag::new(b"grek"),
        0x0400..=0x052F => Tag::new(b"cyrl"),
        _ => Tag::new(b"latn"),
    }
}

/// The tables of pairs of a script; of the default script where the font does not know it.
fn lookups<'a>(file: &FontRef<'a>, script: Tag) -> Option<Vec<Vec<PairPos<'a>>>> {
    let gpos = file.gpos().ok()?;
    let scripts = gpos.script_list().ok()?;
    let records = scripts.script_records();
    let record = [script, Tag::new(b"DFLT"), Tag::new(b"latn")]
        .iter()
        .find_map(|tag| records.iter().find(|record| record.script_tag() == *tag))?;
    let language = record
        .script(scripts.offset_data())
        .ok()?
        .default_lang_sys()?
        .ok()?;
    let features = gpos.feature_list().ok()?;
    let mut numbers: Vec<u16> = language
        .feature_indices()
        .iter()
        .filter_map(|at| features.feature_records().get(usize::from(at.get())))
        .filter(|record| record.feature_tag() == Tag::new(b"kern"))
        .filter_map(|record| record.feature(features.offset_data()).ok())
        .flat_map(|feature| feature.lookup_list_indices().iter())
        .map(BigEndian::get)
        .collect();
    numbers.sort_unstable();
    numbers.dedup();
    let all = gpos.lookup_list().ok()?.lookups();
    let mut left = MOST_TABLES;
    let mut found = Vec::new();
    for number in numbers {
        let lookup = all.get(usize::from(number)).ok();
        if let Some(PositionSubtables::Pair(tables)) = lookup.and_then(|it| it.subtables().ok()) {
            let tables: Vec<_> = tables.iter().take(left).filter_map(Result::ok).collect();
            left -= tables.len();
            found.push(tables);
        }
    }
    Some(found)
}

/// The adjustment of a pair by one table; none where the table does not decide it.
fn pair(table: &PairPos, first: GlyphId, second: GlyphId) -> Option<i16> {
    match table {
        PairPos::Format1(pairs) => {
            let set = pairs.coverage().ok()?.get(first)?;
            let set = pairs.pair_sets().get(usize::try_from(set).ok()?).ok()?;
            let record = set.find_pair_value_record(GlyphId16::try_from(second).ok()?)?;
            Some(record.value_record1().x_advance().unwrap_or(0))
        }
        PairPos::Format2(classes) => {
            classes.coverage().ok()?.get(first)?;
            let first = classes.class_def1().ok()?.get(first);
            let second = classes.class_def2().ok()?.get(second);
            let records = classes
                .value_record_refs(u16::try_from(first).ok()?, u16::try_from(second).ok()?)?;
            Some(records[0].x_advance().unwrap_or(0))
        }
        PairPos::Format3(_) | PairPos::Format4(_) => None,
    }
}

/// The adjustment of a pair by the `kern` table.
fn from_table(table: &Kern, first: GlyphId, second: GlyphId) -> f64 {
    let mut moved = 0;
    for part in table.subtables().take(MOST_TABLES).filter_map(Result::ok) {
        if part.is_horizontal() && !part.is_cross_stream() && !part.is_variable() {
            let found = match part.kind() {
                Ok(SubtableKind::Format0(pairs)) => pairs.kerning(first, second),
                Ok(SubtableKind::Format2(classes)) => classes.kerning(first, second),
                Ok(SubtableKind::Format3(classes)) => classes.kerning(first, second),
                _ => None,
            };
            moved += found.map_or(0, |found| found.clamp(-32_768, 32_767));
        }
    }
    f64::from(moved)
}
