//! A font file, and a line of text in it.
//!
//! Read with `read-fonts`, the layer under `skrifa` of the same project: it gives the same
//! unscaled outlines, and bounds the work that a malformed font can ask for (components of a glyph,
//! their depth, points, operations of a glyph program). `skrifa` itself would bring hinting for
//! small pixel sizes, which no tube needs: 151 kB of the page gzipped instead of 48 kB.
//!
//! What is read: the outlines (`glyf`, or `CFF ` and `CFF2`), the Unicode map, widths, names, the
//! height of capitals, and kerning (see [`super::kerning`]). A variable font is drawn as it is
//! without any axis set. What is not: ligatures and other substitutions, the placing of combining
//! marks, and scripts that join their letters or run from right to left; such characters are told
//! as missing, because drawn letter by letter they would be wrong and look right.

use kurbo::{Affine, BezPath, PathEl, Rect, Shape};
use read_fonts::model::glyph::outline::PathSink;
use read_fonts::ps::Transform;
use read_fonts::ps::cff::CffFontRef;
use read_fonts::ps::charstring::NopFilterSink;
use read_fonts::tables::cmap::{CmapSubtable, PlatformId};
use read_fonts::tables::glyf::outline::{Outline, OutlineTables, PathContourStart, ScaleF32};
use read_fonts::tables::hmtx::GlyphMetricRecords;
use read_fonts::types::{GlyphId, NameId};
use read_fonts::{FileRef, FontRef, TableProvider};

use super::kerning::Kerning;
use crate::measure::quoted;

/// The largest font file that is read. Fonts of whole East Asian scripts are about this large.
pub const MOST_BYTES: usize = 20_000_000;
/// Most lines and curves of one letter. An ornate capital has some hundred; much more is no letter a
/// tube can follow, and insets of it take the time of its crossings.
const MOST_SEGMENTS: usize = 4000;
/// Height of capitals over the em, where a font neither has an H nor says. Common text faces have
/// 0.66 to 0.74.
const CAP_SHARE: f64 = 0.7;
/// Longest name of a font that is kept.
const NAME_CHARACTERS: usize = 80;

/// What the height of the capitals was taken from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum CapHeight {
    /// Top of the letter H over the baseline.
    Letter,
    /// The font has no H; its table says the height.
    Table,
    /// The font has neither: 0.7 of its em, a guess that has to be said.
    Share,
}

/// A font file that was read.
#[derive(Debug, Clone)]
pub struct Font {
    bytes: Vec<u8>,
    name: String,
    notes: Vec<String>,
    cap_height: CapHeight,
    cap_units: f64,
}

/// A letter of a text, in place.
#[derive(Debug, Clone)]
pub struct OutlineLetter {
    /// The character.
    pub character: char,
    /// Number of the word it belongs to, from 0.
    pub word: usize,
    /// Its outlines and counters, each closed, with the exact curves of the font.
    pub contours: Vec<BezPath>,
}

/// A text in a font and height.
#[derive(Debug, Clone)]
pub struct OutlineText {
    /// Letters with outlines, in reading order. Spaces are left out.
    pub letters: Vec<OutlineLetter>,
    /// Characters that cannot be drawn, with their place in the text, from 0: the font has no shape
    /// for them or a damaged or endless one, or they are of a kind that is not laid out (see the
    /// head of this file).
    pub missing: Vec<(usize, char)>,
    /// Box around all outlines in millimetres, baseline at 0; empty for no letters.
    pub bounds: Rect,
}

impl Font {
    /// Reads a font file; of a collection the first font.
    ///
    /// # Errors
    /// A sentence on what the file is instead, or what it lacks.
    pub fn read(bytes: &[u8]) -> Result<Self, String> {
        if bytes.len() > MOST_BYTES {
            return Err(format!(
                "The font file must be at most {} MB, but has {} MB.",
                MOST_BYTES / 1_000_000,
                bytes.len().div_ceil(1_000_000)
            ));
        }
        if bytes.starts_with(b"wOFF") || bytes.starts_with(b"wOF2") {
            return Err(
                "The file is a font packed for web pages (WOFF); expected the font itself, \
                 a .ttf, .otf or .ttc file."
                    .to_owned(),
            );
        }
        let mut notes = Vec::new();
        let (file, first) = match FileRef::new(bytes) {
            Ok(FileRef::Font(font)) => (font, None),
            Ok(FileRef::Collection(collection)) => match collection.get(0) {
                Ok(font) => (font, Some(collection.len())),
                Err(_) => return Err(no_font()),
            },
            Err(_) => return Err(no_font()),
        };
        let open = Open::new(&file)?;
        let name = name(&file);
        if let Some(fonts @ 2..) = first {
            notes.push(format!(
                "The file holds {fonts} fonts; the first of them, {}, is used.",
                quoted(&name)
            ));
        }
        if file.fvar().is_ok() {
            notes.push(format!(
                "{} is a variable font; it is drawn as it is without any setting.",
                quoted(&name)
            ));
        }
        let (cap_height, cap_units) = open.cap_height();
        if cap_height == CapHeight::Share {
            notes.push(format!(
                "{} has no H and does not say how high its capitals are; {CAP_SHARE} of its em is \
                 taken.",
                quoted(&name)
            ));
        }
        Ok(Self {
            bytes: bytes.to_vec(),
            name,
            notes,
            cap_height,
            cap_units,
        })
    }

    /// The full name of the font as the file gives it, without control characters, at most 80
    /// characters. It is text from outside: in a sentence it goes through [`quoted`].
    pub fn name(&self) -> &str {
        &self.name
    }

    /// Sentences on how the file is understood: a collection, a variable font, capitals whose height
    /// had to be guessed. Usually none.
    pub fn notes(&self) -> &[String] {
        &self.notes
    }

    /// What the height of the capitals is measured on.
    pub fn cap_height(&self) -> CapHeight {
        self.cap_height
    }

    /// Lays out one line of text with capitals `cap_height_mm` high, starting at x = 0 on y = 0.
    ///
    /// A character that is missing leaves no gap, as if it had not been typed; a space of any kind
    /// is the font's own space. A height that is no positive number gives no letters.
    pub fn shape(&self, text: &str, cap_height_mm: f64) -> OutlineText {
        let mut shaped = OutlineText {
            letters: Vec::new(),
            missing: Vec::new(),
            bounds: Rect::ZERO,
        };
        let scale = cap_height_mm / self.cap_units;
        // Read a second time from the same bytes, which were found readable.
        let file = FileRef::new(&self.bytes)
            .ok()
            .and_then(|file| file.fonts().next()?.ok());
        let open = file.as_ref().and_then(|file| Open::new(file).ok());
        let Some(open) = open.filter(|_| scale.is_finite() && scale > 0.0) else {
            return shaped;
        };
        let mut kerning = Kerning::new(open.file);
        let mut bounds: Option<Rect> = None;
        let mut pen = 0.0;
        let mut word = 0;
        let mut before: Option<GlyphId> = None;
        for (at, character) in text.chars().enumerate() {
            let space = character.is_whitespace();
            let glyph = open.glyph(if space { ' ' } else { character });
            let contours = match glyph {
                _ if space => Some(Vec::new()),
                Some(glyph) if stands_alone(character) => open.contours(glyph),
                _ => None,
            };
            // An empty shape is none: a quote that counts it would be too low.
            let Some(contours) = contours.filter(|contours| space || !contours.is_empty()) else {
                shaped.missing.push((at, character));
                continue;
            };
            if let (Some(before), Some(glyph)) = (before, glyph) {
                pen += kerning.between(before, glyph, character);
            }
            if space {
                word += 1;
            } else {
                let place =
                    Affine::scale_non_uniform(scale, -scale) * Affine::translate((pen, 0.0));
                let contours: Vec<BezPath> =
                    contours.into_iter().map(|path| place * path).collect();
                for contour in &contours {
                    let contour_box = contour.bounding_box();
                    bounds = Some(bounds.map_or(contour_box, |all| all.union(contour_box)));
                }
                shaped.letters.push(OutlineLetter {
                    character,
                    word,
                    contours,
                });
            }
            // A font without a space of its own gets a third of its em.
            pen += glyph.map_or(open.units_per_em / 3.0, |glyph| open.advance(glyph));
            before = glyph;
        }
        shaped.bounds = bounds.unwrap_or(Rect::ZERO);
        shaped
    }
}

fn no_font() -> String {
    "The file is not a font that can be read; expected a TrueType or OpenType file (.ttf, .otf or \
     .ttc)."
        .to_owned()
}

/// Whether a character is drawn right by its own shape alone, from left to right: not so marks that
/// go over the letter before, nor the scripts from Hebrew to Tibetan and their like, which join,
/// stack or run the other way.
fn stands_alone(character: char) -> bool {
    !matches!(u32::from(character),
        0x0300..=0x036F | 0x0483..=0x0489 | 0x0590..=0x109F | 0x1700..=0x1CFF | 0x1DC0..=0x1DFF
        | 0x20D0..=0x20FF | 0x2D7F..=0x2DFF | 0xA800..=0xABFF | 0xD7B0..=0xD7FF
        | 0xFB1D..=0xFDFF | 0xFE00..=0xFE0F | 0xFE20..=0xFE2F | 0xFE70..=0xFEFF
        | 0x1_0800..=0x1_1FFF | 0x1_E800..=0x1_EFFF)
}

/// The name for people to read, else that of the family.
fn name(file: &FontRef) -> String {
    let said = file.name().ok().and_then(|table| {
        let wanted = [NameId::FULL_NAME, NameId::FAMILY_NAME];
        wanted.into_iter().find_map(|wanted| {
            let mut found = table
                .name_record()
                .iter()
                .filter(|record| record.name_id() == wanted)
                .filter_map(|record| record.string(table.string_data()).ok())
                .map(|text| {
                    let text = text.chars().filter(|c| !c.is_control());
                    text.take(NAME_CHARACTERS).collect::<String>()
                })
                .filter(|text| !text.trim().is_empty());
            found.next()
        })
    });
    said.unwrap_or_else(|| "font without a name".to_owned())
}

/// A font file with the tables at hand that a text needs.
struct Open<'a> {
    file: &'a FontRef<'a>,
    maps: Vec<CmapSubtable<'a>>,
    widths: GlyphMetricRecords<'a>,
    shapes: Shapes<'a>,
    units_per_em: f64,
}

/// The two ways in which fonts write their outlines.
enum Shapes<'a> {
    TrueType(OutlineTables<'a>),
    Compact(CffFontRef<'a>),
}

impl<'a> Open<'a> {
    fn new(file: &'a FontRef<'a>) -> Result<Self, String> {
        let lacks = |what: &str| format!("The font cannot be used: it has no {what}.");
        let em = file.head().map_err(|_| no_font())?.units_per_em();
        if !(16..=16_384).contains(&em) {
            return Err(format!(
                "The font is damaged: its em must be 16 to 16384 units, but is {em}."
            ));
        }
        let compact = file
            .cff()
            .map(|table| table.offset_data())
            .or_else(|_| file.cff2().map(|table| table.offset_data()))
            .ok()
            .and_then(|data| CffFontRef::new(data.as_bytes(), 0, Some(i32::from(em))).ok());
        let shapes = match compact {
            Some(compact) => Shapes::Compact(compact),
            None => Shapes::TrueType(
                OutlineTables::new(file)
                    .map_err(|_| lacks("outlines, only pictures or nothing"))?,
            ),
        };
        let widths = file
            .h_glyph_metric_records()
            .map_err(|_| lacks("widths of its letters"))?;
        let table = file.cmap().map_err(|_| lacks("list of its characters"))?;
        // Maps of old systems number the same codes differently, and would give a wrong letter.
        let maps: Vec<_> = table
            .encoding_records()
            .iter()
            .filter(|record| {
                record.platform_id() == PlatformId::Unicode
                    || record.platform_id() == PlatformId::Windows
                        && matches!(record.encoding_id(), 1 | 10)
            })
            .filter_map(|record| record.subtable(table.offset_data()).ok())
            .collect();
        if maps.is_empty() {
            return Err(lacks("list of its characters by Unicode"));
        }
        Ok(Self {
            file,
            maps,
            widths,
            shapes,
            units_per_em: f64::from(em),
        })
    }

    /// The glyph of a character; glyph 0 is the picture of a missing one.
    fn glyph(&self, character: char) -> Option<GlyphId> {
        self.maps
            .iter()
            .find_map(|map| map.map_codepoint(character))
            .filter(|glyph| glyph.to_u32() != 0)
    }

    fn advance(&self, glyph: GlyphId) -> f64 {
        f64::from(self.widths.advance(glyph).unwrap_or_default())
    }

    /// Closed outlines in units of the font, y upwards; none for a shape that is damaged or endless.
    fn contours(&self, glyph: GlyphId) -> Option<Vec<BezPath>> {
        let mut pen = Pen::default();
        match &self.shapes {
            Shapes::TrueType(tables) => {
                let mut outline = Outline::<ScaleF32>::new();
                let outline = outline.load(tables, glyph, None).ok()?;
                if !outline.to_path(PathContourStart::default(), &mut pen) {
                    return None;
                }
            }
            Shapes::Compact(font) => {
                let part = font.subfont(font.subfont_index(glyph)?, &[]).ok()?;
                let transform = font.transform(&part, None);
                if transform == Transform::IDENTITY {
                    let mut sink = NopFilterSink::new(&mut pen);
                    font.evaluate_charstring(&part, glyph, &[], &mut sink)
                        .ok()?;
                } else {
                    // Only here are fractions of a unit cut off, which such fonts seldom have.
                    font.draw(&part, glyph, &[], None, &mut pen).ok()?;
                }
            }
        }
        pen.contours()
    }

    /// Where the height of capitals is from, and the height in units of the font.
    fn cap_height(&self) -> (CapHeight, f64) {
        let letter = self.glyph('H').and_then(|glyph| self.contours(glyph));
        let tops = letter.iter().flatten().map(|path| path.bounding_box().y1);
        let top = tops.fold(0.0, f64::max);
        // Less than a sixteenth of the em is no letter but a dot in its place.
        let real = |height: f64| height * 16.0 >= self.units_per_em;
        if real(top) {
            return (CapHeight::Letter, top);
        }
        let said = self.file.os2().ok().and_then(|table| table.s_cap_height());
        match said.map(f64::from) {
            Some(said) if real(said) => (CapHeight::Table, said),
            _ => (CapHeight::Share, CAP_SHARE * self.units_per_em),
        }
    }
}

/// Collects what a glyph draws, and stops listening when it is endless.
#[derive(Default)]
struct Pen {
    drawn: Vec<BezPath>,
    segments: usize,
}

impl Pen {
    fn draw(&mut self, element: PathEl) {
        self.segments += 1;
        if self.segments > MOST_SEGMENTS {
            return;
        }
        if matches!(element, PathEl::MoveTo(_)) || self.drawn.is_empty() {
            self.drawn.push(BezPath::new());
        }
        if let Some(path) = self.drawn.last_mut() {
            // A path that does not begin with a move is not one; kurbo would panic on it.
            if !path.elements().is_empty() || matches!(element, PathEl::MoveTo(_)) {
                path.push(element);
            }
        }
    }

    fn contours(self) -> Option<Vec<BezPath>> {
        if self.segments > MOST_SEGMENTS || self.drawn.iter().any(|path| !path.is_finite()) {
            return None;
        }
        let closed = self.drawn.into_iter().map(|mut path| {
            if !matches!(path.elements().last(), Some(PathEl::ClosePath)) {
                path.close_path();
            }
            path
        });
        // Single points and lines there and back are marks for composing glyphs, not shapes.
        let shapes = closed.filter(|path| {
            let drawn = path
                .elements()
                .iter()
                .filter(|element| !matches!(element, PathEl::MoveTo(_) | PathEl::ClosePath));
            let size = path.bounding_box();
            drawn.count() > 1 && size.width() > 0.0 && size.height() > 0.0
        });
        Some(shapes.collect())
    }
}

impl PathSink for Pen {
    fn move_to(&mut self, x: f32, y: f32) {
        self.draw(PathEl::MoveTo(at(x, y)));
    }

    fn line_to(&mut self, x: f32, y: f32) {
        self.draw(PathEl::LineTo(at(x, y)));
    }

    fn quad_to(&mut self, cx0: f32, cy0: f32, x: f32, y: f32) {
        self.draw(PathEl::QuadTo(at(cx0, cy0), at(x, y)));
    }

    fn curve_to(&mut self, cx0: f32, cy0: f32, cx1: f32, cy1: f32, x: f32, y: f32) {
        self.draw(PathEl::CurveTo(at(cx0, cy0), at(cx1, cy1), at(x, y)));
    }

    fn close(&mut self) {
        self.draw(PathEl::ClosePath);
    }
}

fn at(x: f32, y: f32) -> kurbo::Point {
    kurbo::Point::new(f64::from(x), f64::from(y))
}
