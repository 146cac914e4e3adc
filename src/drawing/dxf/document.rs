//! A DXF file as its sections have it: unit, layers, blocks and elements, nothing placed yet.

use std::collections::BTreeMap;

use kurbo::Point;

use super::colours::{Ink, WHITE};
use super::elements::{Common, Polyline, Record, Shape};
use super::groups::{Group, Groups, text};
use super::{SEGMENTS_MOST, shown, too_many_segments};
use crate::drawing::Unread;

/// Most elements of a file.
const ELEMENTS_MOST: usize = 500_000;
/// Most groups of one element; a spline of all segments there may be has fewer.
const GROUPS_MOST: usize = 1_500_000;

/// Most tries to meet splines that are no Bézier curves: some seconds of work, or several hundred
/// circles written as splines.
const FITS_MOST: usize = 50_000;

/// What a file holds.
#[derive(Default)]
pub(super) struct Document {
    pub(super) mm_per_unit: Option<f64>,
    pub(super) layers: Vec<Layer>,
    pub(super) blocks: Vec<Block>,
    /// The elements of the drawing itself.
    pub(super) items: Vec<Item>,
    /// What is missing of the file as a whole.
    pub(super) unread: Vec<Unread>,
    layer_names: BTreeMap<String, usize>,
    block_names: BTreeMap<String, usize>,
}

pub(super) struct Layer {
    pub(super) name: String,
    pub(super) off: bool,
    pub(super) frozen: bool,
    pub(super) rgb: u32,
}

#[derive(Default)]
pub(super) struct Block {
    pub(super) name: String,
    pub(super) base: Point,
    pub(super) elsewhere: bool,
    pub(super) items: Vec<Item>,
}

/// An element, in the coordinates of its block or of the drawing.
pub(super) struct Item {
    /// What it is and where.
    pub(super) element: String,
    pub(super) line: usize,
    pub(super) layer: usize,
    pub(super) ink: Ink,
    pub(super) shape: Shape,
}

impl Document {
    pub(super) fn read(bytes: &[u8]) -> Result<Self, String> {
        Reader::default().read(bytes)
    }

    /// The block of a name. DXF does not tell small from capital letters in names.
    pub(super) fn block(&self, name: &str) -> Option<usize> {
        self.block_names.get(&name.to_lowercase()).copied()
    }

    /// The layer of a name; a new one where the table does not have it, or not yet.
    fn layer(&mut self, name: &str) -> usize {
        let layers = &mut self.layers;
        *self
            .layer_names
            .entry(name.to_lowercase())
            .or_insert_with(|| {
                layers.push(Layer {
                    name: name.to_owned(),
                    off: false,
                    frozen: false,
                    rgb: WHITE,
                });
                layers.len() - 1
            })
    }

    fn header(&mut self, groups: &[Group<'_>]) {
        let unit = groups.windows(2).find_map(|two| {
            let named = two[0].code == 9 && two[0].value == b"$INSUNITS";
            named.then(|| two[1].whole().ok())?
        });
        self.mm_per_unit = unit.and_then(mm_per_unit);
    }

    fn layer_table(&mut self, record: &Record<'_>) {
        let Some(name) = record.first(2) else { return };
        let at = self.layer(&text(name.value));
        let figure = |code| record.first(code).and_then(|group| group.whole().ok());
        let layer = &mut self.layers[at];
        layer.off = figure(62).is_some_and(|index| index < 0);
        layer.frozen = figure(70).is_some_and(|flags| flags & 1 != 0);
        if let Ink::Rgb(rgb) = Ink::new(figure(62), figure(420)) {
            layer.rgb = rgb;
        }
    }
}

/// Millimetres in a unit by its number in `$INSUNITS`; those between stars are left out.
fn mm_per_unit(unit: i64) -> Option<f64> {
    // The survey foot of the United States, 1200/3937 m.
    const SURVEY_FOOT: f64 = 1_200_000.0 / 3937.0;
    Some(match unit {
        1 => 25.4,
        2 => 304.8,
        3 => 1_609_344.0,
        4 => 1.0,
        5 => 10.0,
        6 => 1000.0,
        7 => 1e6,
        8 => 25.4e-6,
        9 => 0.0254,
        10 => 914.4,
        11 => 1e-7,
        12 => 1e-6,
        13 => 1e-3,
        14 => 100.0,
        15 => 1e4,
        16 => 1e5,
        21 => SURVEY_FOOT,
        22 => SURVEY_FOOT / 12.0,
        23 => SURVEY_FOOT * 3.0,
        24 => SURVEY_FOOT * 5280.0,
        _ => return None,
    })
}

#[derive(Clone, Copy, Default, PartialEq)]
enum Section {
    #[default]
    None,
    Tables,
    Blocks,
    Entities,
    Other,
}

/// Reads a file record by record.
#[derive(Default)]
struct Reader {
    document: Document,
    section: Section,
    has_entities: bool,
    /// The block whose elements are being read.
    block: Option<Block>,
    /// The POLYLINE whose vertices are being read.
    polyline: Option<Polyline>,
    elements: usize,
    segments: usize,
    fits: usize,
}

impl Reader {
    fn read(mut self, bytes: &[u8]) -> Result<Document, String> {
        let mut groups = Groups::new(bytes);
        let mut record = Record {
            kind: b"",
            line: 0,
            groups: Vec::new(),
        };
        loop {
            match groups.next()? {
                Some(group) if group.code == 0 => {
                    self.take(&record)?;
                    record.kind = group.value;
                    record.line = group.line;
                    record.groups.clear();
                    if group.value == b"EOF" {
                        break;
                    }
                }
                Some(group) if record.groups.len() < GROUPS_MOST => record.groups.push(group),
                Some(_) => {
                    return Err(format!(
                        "The element at line {} has more than {} values.",
                        record.line,
                        shown(GROUPS_MOST)
                    ));
                }
                None => {
                    self.cut(&record, groups.lines())?;
                    break;
                }
            }
        }
        self.end_polyline()?;
        self.end_block();
        if !self.has_entities {
            return Err(
                "This is no whole DXF drawing: it has no section ENTITIES, where the lines stand."
                    .to_owned(),
            );
        }
        Ok(self.document)
    }

    /// The last record of a file without its mark of the end.
    fn cut(&mut self, record: &Record<'_>, lines: usize) -> Result<(), String> {
        // The begin of a section is whole, but what should stand in it is not there.
        if matches!(record.kind, b"ENDSEC" | b"SECTION") {
            self.take(record)?;
        }
        if self.section == Section::None {
            return Ok(());
        }
        self.document.unread.push(Unread {
            element: format!("the end of the file at line {lines}"),
            why: "the file is cut short; its last element and what came behind it are missing"
                .to_owned(),
        });
        // A polyline whose last vertices are missing would be measured too short.
        self.polyline = None;
        Ok(())
    }

    fn take(&mut self, record: &Record<'_>) -> Result<(), String> {
        match record.kind {
            b"SECTION" => {
                self.end_polyline()?;
                self.end_block();
                self.section = match record.first(2).map(|name| name.value) {
                    Some(b"HEADER") => {
                        self.document.header(&record.groups);
                        Section::Other
                    }
                    Some(b"TABLES") => Section::Tables,
                    Some(b"BLOCKS") => Section::Blocks,
                    Some(b"ENTITIES") => {
                        self.has_entities = true;
                        Section::Entities
                    }
                    _ => Section::Other,
                };
            }
            b"ENDSEC" => {
                self.end_polyline()?;
                self.end_block();
                self.section = Section::None;
            }
            kind => match self.section {
                Section::Tables if kind == b"LAYER" => self.document.layer_table(record),
                Section::Blocks if kind == b"BLOCK" => {
                    self.end_polyline()?;
                    self.end_block();
                    self.block = Some(block(record));
                }
                Section::Blocks if kind == b"ENDBLK" => {
                    self.end_polyline()?;
                    self.end_block();
                }
                Section::Blocks | Section::Entities => self.element(record)?,
                Section::None | Section::Tables | Section::Other => {}
            },
        }
        Ok(())
    }

    fn element(&mut self, record: &Record<'_>) -> Result<(), String> {
        if let (Some(polyline), b"VERTEX") = (&mut self.polyline, record.kind) {
            polyline.push(record);
            return Ok(());
        }
        self.end_polyline()?;
        match record.kind {
            // Also ends the texts of an INSERT.
            b"SEQEND" => Ok(()),
            b"POLYLINE" => {
                self.polyline = Some(record.polyline());
                Ok(())
            }
            _ => {
                let mut fits = FITS_MOST - self.fits;
                let shape = record.shape(&mut fits);
                self.fits = FITS_MOST - fits;
                if fits == 0 {
                    return Err(
                        "The drawing has more splines of high degree or with weights than can be \
                         measured. Save it with arcs and polylines in their place."
                            .to_owned(),
                    );
                }
                self.push(record.common(), shape)
            }
        }
    }

    fn end_polyline(&mut self) -> Result<(), String> {
        match self.polyline.take() {
            Some(polyline) => {
                let (common, shape) = polyline.finish();
                self.push(common, shape)
            }
            None => Ok(()),
        }
    }

    fn end_block(&mut self) {
        let Some(block) = self.block.take() else {
            return;
        };
        let number = self.document.blocks.len();
        self.document
            .block_names
            .insert(block.name.to_lowercase(), number);
        self.document.blocks.push(block);
    }

    fn push(&mut self, common: Common, shape: Shape) -> Result<(), String> {
        self.elements += 1;
        if self.elements > ELEMENTS_MOST {
            return Err(format!(
                "The drawing has more than {} elements. Save only the part that is the sign.",
                shown(ELEMENTS_MOST)
            ));
        }
        if let Shape::Path(path, _) = &shape {
            self.segments += path.elements().len() - 1;
            if self.segments > SEGMENTS_MOST {
                return Err(too_many_segments());
            }
        }
        let item = Item {
            element: common.element,
            line: common.line,
            layer: self.document.layer(&common.layer),
            ink: common.ink,
            shape,
        };
        match &mut self.block {
            Some(block) => block.items.push(item),
            None => self.document.items.push(item),
        }
        Ok(())
    }
}

fn block(record: &Record<'_>) -> Block {
    Block {
        name: record
            .first(2)
            .map_or_else(String::new, |name| text(name.value)),
        // Without a base point the block is counted from its origin.
        base: record.point(10).map_or(Point::ZERO, |(base, _)| base),
        elsewhere: record.whole(70, 0).is_ok_and(|flags| flags & 4 != 0),
        items: Vec::new(),
    }
}
