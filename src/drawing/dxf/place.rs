//! Blocks placed, colours and layers resolved: the strokes of a drawing.

use std::collections::BTreeSet;

use kurbo::{Affine, BezPath, Rect};

use super::colours::{Ink, WHITE, written};
use super::document::{Document, Item, Layer};
use super::elements::{Insert, Shape};
use super::groups::LARGEST;
use super::{SEGMENTS_MOST, shown, too_many_segments};
use crate::drawing::artwork::LEAST;
use crate::drawing::{ArtStroke, Artwork, Unread};
use crate::measure::quoted;

/// Blocks in blocks in blocks.
const DEPTH_MOST: usize = 32;
/// Most elements that are looked at, each as often as its block is placed.
const PLACED_MOST: usize = 1_000_000;
/// Most entries of what was not read; the rest is counted.
const UNREAD_MOST: usize = 1000;

/// Where the elements of a block, or of the drawing, come to stand.
#[derive(Clone, Copy)]
struct Frame {
    affine: Affine,
    /// The layer of the INSERT, which elements on layer 0 take over; none in the drawing itself.
    layer: Option<usize>,
    /// The colour of the INSERT.
    rgb: u32,
}

struct Placer<'a> {
    document: &'a Document,
    strokes: Vec<ArtStroke>,
    unread: Vec<Unread>,
    untold: usize,
    /// Lines of elements that are in `unread` already: one in a block is told once, not as often as
    /// the block is placed.
    told: BTreeSet<usize>,
    /// Elements left out, for each layer.
    hidden: Vec<usize>,
    /// The blocks that are being placed.
    open: Vec<usize>,
    placed: usize,
    segments: usize,
}

/// The artwork of a document.
pub(super) fn placed(document: &Document) -> Result<Artwork, String> {
    let mut placer = Placer {
        document,
        strokes: Vec::new(),
        unread: document.unread.clone(),
        untold: 0,
        told: BTreeSet::new(),
        hidden: vec![0; document.layers.len()],
        open: Vec::new(),
        placed: 0,
        segments: 0,
    };
    placer.place(
        &document.items,
        Frame {
            // y grows upwards in a drawing.
            affine: Affine::FLIP_Y,
            layer: None,
            rgb: WHITE,
        },
    )?;
    placer.tell_layouts();
    placer.tell_layers();
    if placer.untold > 0 {
        placer.unread.push(Unread {
            element: format!("{} more elements", placer.untold),
            why: "only the first are listed one by one".to_owned(),
        });
    }
    Ok(Artwork::new(
        placer.strokes,
        document.mm_per_unit,
        placer.unread,
    ))
}

fn elements(count: usize) -> String {
    match count {
        1 => "1 element".to_owned(),
        _ => format!("{count} elements"),
    }
}

impl Placer<'_> {
    fn tell(&mut self, element: String, why: String) {
        if self.unread.len() < UNREAD_MOST {
            self.unread.push(Unread { element, why });
        } else {
            self.untold += 1;
        }
    }

    fn tell_item(&mut self, item: &Item, why: String) {
        if self.told.insert(item.line) {
            self.tell(item.element.clone(), why);
        }
    }

    /// What stands in blocks that are sheets of paper, or that should have been the drawing.
    fn tell_layouts(&mut self) {
        for block in &self.document.blocks {
            let name = block.name.to_lowercase();
            let layout = [
                "*model_space",
                "*paper_space",
                "$model_space",
                "$paper_space",
            ]
            .iter()
            .any(|layout| name.starts_with(layout));
            if layout && !block.items.is_empty() {
                self.tell(
                    format!("layout {}", quoted(&block.name)),
                    format!(
                        "not part of the drawing itself; {} on it",
                        elements(block.items.len())
                    ),
                );
            }
        }
    }

    fn tell_layers(&mut self) {
        let document = self.document;
        for (number, layer) in document.layers.iter().enumerate() {
            let count = self.hidden[number];
            if count == 0 {
                continue;
            }
            let state = if layer.frozen {
                "frozen"
            } else {
                "switched off"
            };
            self.tell(
                format!("layer {}", quoted(&layer.name)),
                format!("it is {state}; {} on it", elements(count)),
            );
        }
    }

    fn place(&mut self, items: &[Item], frame: Frame) -> Result<(), String> {
        for item in items {
            self.placed += 1;
            if self.placed > PLACED_MOST {
                return Err(format!(
                    "The blocks of the drawing are placed in each other so often that it has more \
                     than {} elements.",
                    shown(PLACED_MOST)
                ));
            }
            let number = match frame.layer {
                Some(outer) if self.document.layers[item.layer].name == "0" => outer,
                _ => item.layer,
            };
            let layer = &self.document.layers[number];
            // An INSERT on a layer that is off still shows what its block has on other layers.
            let insert = matches!(item.shape, Shape::Insert(_));
            if layer.frozen || layer.off && !insert {
                self.hidden[number] += 1;
                continue;
            }
            let rgb = match item.ink {
                Ink::Rgb(rgb) => rgb,
                Ink::Layer => layer.rgb,
                Ink::Block => frame.rgb,
            };
            match &item.shape {
                Shape::Unread(why) => self.tell_item(item, why.clone()),
                Shape::Path(path, closed) => {
                    self.stroke(item, frame.affine, path, *closed, layer, rgb)?;
                }
                Shape::Insert(insert) => {
                    let frame = Frame {
                        affine: frame.affine,
                        layer: Some(number),
                        rgb,
                    };
                    self.insert(item, insert, frame)?;
                }
            }
        }
        Ok(())
    }

    fn stroke(
        &mut self,
        item: &Item,
        affine: Affine,
        path: &BezPath,
        closed: bool,
        layer: &Layer,
        rgb: u32,
    ) -> Result<(), String> {
        self.segments += path.elements().len() - 1;
        if self.segments > SEGMENTS_MOST {
            return Err(too_many_segments());
        }
        // Scales of blocks in blocks multiply; beyond this a product may be no number.
        let small = affine.as_coeffs().iter().all(|figure| figure.abs() < 1e100);
        if !small {
            self.tell_item(item, "its place or scale is too large".to_owned());
            return Ok(());
        }
        let path = affine * path;
        let room = path.control_box();
        if !path.is_finite() || !within(room) {
            self.tell_item(item, "its place or scale is too large".to_owned());
            return Ok(());
        }
        if room.width().max(room.height()) < LEAST {
            self.tell_item(item, "it has no length".to_owned());
            return Ok(());
        }
        self.strokes.push(ArtStroke {
            path,
            closed,
            area: None,
            colour: Some(written(rgb)),
            layer: Some(layer.name.clone()),
            element: item.element.clone(),
        });
        Ok(())
    }

    fn insert(&mut self, item: &Item, insert: &Insert, frame: Frame) -> Result<(), String> {
        let document = self.document;
        let name = quoted(&insert.block);
        let Some(number) = document.block(&insert.block) else {
            self.tell_item(item, format!("there is no block {name}"));
            return Ok(());
        };
        let block = &document.blocks[number];
        if block.elsewhere && block.items.is_empty() {
            self.tell_item(item, format!("its block {name} is in another file"));
            return Ok(());
        }
        if self.open.contains(&number) {
            self.tell_item(item, format!("its block {name} holds itself"));
            return Ok(());
        }
        if self.open.len() == DEPTH_MOST {
            self.tell_item(
                item,
                format!("blocks are read {DEPTH_MOST} deep, and its block {name} is deeper"),
            );
            return Ok(());
        }
        if block.items.is_empty() {
            self.tell_item(item, format!("its block {name} is empty"));
            return Ok(());
        }
        self.open.push(number);
        for row in 0..insert.rows {
            for column in 0..insert.columns {
                let affine = frame.affine * insert.cell(column, row, block.base);
                self.place(&block.items, Frame { affine, ..frame })?;
            }
        }
        self.open.pop();
        Ok(())
    }
}

fn within(room: Rect) -> bool {
    [room.x0, room.y0, room.x1, room.y1]
        .iter()
        .all(|figure| figure.abs() <= LARGEST)
}
