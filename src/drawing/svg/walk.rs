//! The walk through the elements of a file, from the page down to each line.

use super::geometry::{Pen, Subpath};
use super::style::{Sheet, Style, spend, without_comments};
use super::units::{self, Along, Length, MM_PER_PX};
use super::{DEEPEST, FARTHEST, MOST_SEGMENTS, path, scan, transform};
use crate::drawing::artwork::LEAST;
use crate::drawing::{Area, ArtStroke, Artwork, Filling, Unread};
use crate::measure::quoted;
use kurbo::{Affine, Point, Shape, Size, Vec2};
use roxmltree::{Document, Node, NodeId};
use std::cell::Cell;
use std::collections::HashMap;
use svgtypes::{Color, Paint, PaintFallback};

/// Work that may be done for a file, in steps of some nanoseconds: elements that use each other, or
/// style rules against elements, grow to any size in a file of a few lines.
const MOST_WORK: u64 = 20_000_000;
/// What looking at one element costs of it.
const ELEMENT_WORK: u64 = 100;
/// Things not read that are named one by one; the rest is counted.
const MOST_UNREAD: usize = 1_000;
/// Characters of a layer's name that are kept.
const LAYER_NAME: usize = 100;
/// Bytes of a line beyond which the line alone does not lead to an element.
const LONG_LINE: usize = 200;

/// Text from a file, for the middle of a sentence.
pub(super) fn shown(text: &str) -> String {
    quoted(text.trim())
}

/// What fills a line or an area.
#[derive(Clone, Copy, PartialEq)]
enum Ink {
    None,
    /// The colour of `color`, taken where it is used.
    Current,
    Colour([u8; 3]),
    /// Something that is no single colour.
    Unknown,
}

/// What an element takes over from the one around it.
#[derive(Clone)]
struct Around {
    transform: Affine,
    fill: Ink,
    stroke: Ink,
    colour: Option<[u8; 3]>,
    clear_fill: bool,
    filling: Filling,
    clear_stroke: bool,
    visible: bool,
    layer: Option<String>,
    /// What percentages are parts of.
    page: Option<Size>,
    depth: usize,
    /// The outermost `use` this comes from.
    used_at: Option<usize>,
}

/// Why the file as a whole is not read.
type Stop = String;

struct Walk<'a, 'i> {
    document: &'a Document<'i>,
    sheet: &'a Sheet<'a>,
    ids: HashMap<&'a str, Node<'a, 'i>>,
    /// Where each line begins.
    lines: Vec<usize>,
    left: Cell<u64>,
    segments: usize,
    strokes: Vec<ArtStroke>,
    /// Filled areas so far.
    areas: usize,
    unread: Vec<Unread>,
    /// Not read and not named.
    more: usize,
    /// What is being used, outermost first.
    using: Vec<NodeId>,
}

/// Whether an element is of SVG. Files without the namespace are read too: what they mean is plain.
fn of_svg(node: Node<'_, '_>) -> bool {
    node.is_element()
        && matches!(
            node.tag_name().namespace(),
            None | Some("http://www.w3.org/2000/svg")
        )
}

/// Reads a document.
pub(super) fn walk(document: &Document<'_>) -> Result<Artwork, Stop> {
    let root = document.root_element();
    let name = root.tag_name().name();
    if !of_svg(root) || name != "svg" {
        return Err(format!(
            "expected an SVG drawing, but the file begins with {}",
            quoted(&format!("<{name}>"))
        ));
    }
    let mut sheets = String::new();
    let mut ids = HashMap::new();
    for node in root.descendants().filter(Node::is_element) {
        if let Some(id) = node.attribute("id") {
            ids.entry(id).or_insert(node);
        }
        let kind = node.attribute("type").unwrap_or_default();
        if of_svg(node) && node.tag_name().name() == "style" && matches!(kind, "" | "text/css") {
            for text in node.children().filter_map(|child| child.text()) {
                sheets.push_str(text);
            }
            sheets.push('\n');
        }
    }
    let sheets = without_comments(&sheets);
    let sheet = Sheet::read(&sheets);
    let text = document.input_text();
    let mut walk = Walk {
        document,
        sheet: &sheet,
        ids,
        lines: std::iter::once(0)
            .chain(text.match_indices('\n').map(|(at, _)| at + 1))
            .collect(),
        left: Cell::new(MOST_WORK),
        segments: 0,
        strokes: Vec::new(),
        areas: 0,
        unread: Vec::new(),
        more: 0,
        using: Vec::new(),
    };
    for rule in &sheet.unread {
        walk.leave("style".to_owned(), format!("{rule} is not followed"));
    }
    let mm_per_unit = walk.page(root)?;
    let mut unread = walk.unread;
    if walk.more > 0 {
        unread.push(Unread {
            element: format!("{} more", walk.more),
            why: "only the first of what was not read are named".to_owned(),
        });
    }
    Ok(Artwork::new(walk.strokes, mm_per_unit, unread))
}

impl<'a, 'i> Walk<'a, 'i> {
    fn leave(&mut self, element: String, why: impl Into<String>) {
        if self.unread.len() < MOST_UNREAD {
            let why = why.into();
            self.unread.push(Unread { element, why });
        } else {
            self.more += 1;
        }
    }

    /// The line of a node, from 1.
    fn line(&self, at: usize) -> usize {
        self.lines.partition_point(|&begin| begin <= at)
    }

    /// What an element is and where, for sentences.
    fn name(&self, node: Node<'_, '_>, around: &Around) -> String {
        let at = node.range().start;
        let line = self.line(at);
        let tag = node.tag_name().name();
        // The tags of SVG are short and plain, another may be anything.
        let plain = tag.len() <= 24 && tag.bytes().all(|byte| byte.is_ascii_alphanumeric());
        let tag = if plain { tag.to_owned() } else { quoted(tag) };
        let id = node
            .attribute("id")
            .map_or_else(String::new, |id| format!(" {}", quoted(id)));
        let begin = self.lines[line - 1];
        let end = self.lines.get(line).copied();
        let end = end.unwrap_or(self.document.input_text().len());
        let column = if end - begin > LONG_LINE {
            format!(", column {}", at - begin + 1)
        } else {
            String::new()
        };
        let used = around.used_at.map_or_else(String::new, |used| {
            format!(" (used at line {})", self.line(used))
        });
        format!("{tag}{id} at line {line}{column}{used}")
    }

    /// The outermost element: the size of a unit, then all that is in it.
    fn page(&mut self, root: Node<'a, 'i>) -> Result<Option<f64>, Stop> {
        let mut around = Around {
            transform: Affine::IDENTITY,
            fill: Ink::Colour([0, 0, 0]),
            stroke: Ink::None,
            colour: Some([0, 0, 0]),
            clear_fill: false,
            filling: Filling::Winding,
            clear_stroke: false,
            visible: true,
            layer: None,
            page: None,
            depth: 0,
            used_at: None,
        };
        let style = Style::of(root, self.sheet, &self.left);
        let element = self.name(root, &around);
        let mut size = |name: &str| {
            let text = style.get(name).filter(|text| *text != "auto")?;
            match Length::read(text) {
                Ok(Length::Percent(_)) => None,
                Ok(Length::Bare(px)) => Some((px, false)),
                Ok(Length::Px(px)) => Some((px, true)),
                Err(why) => {
                    self.leave(element.clone(), format!("its {name} {} {why}", shown(text)));
                    None
                }
            }
            .filter(|&(px, _)| px > 0.0)
        };
        let (width, height) = (size("width"), size("height"));
        let box_text = root.attribute("viewBox");
        let view = box_text.and_then(units::view_box);
        if let (Some(text), None) = (box_text, view) {
            let why = format!("its viewBox {} cannot be read", shown(text));
            self.leave(element.clone(), why);
        }
        let real = [width, height].into_iter().flatten().any(|(_, real)| real);
        let mut px_per_unit = 1.0;
        if let Some(view) = view {
            around.page = Some(Size::new(view.w, view.h));
            let aspect = root.attribute("preserveAspectRatio");
            let aspect = units::aspect(aspect).unwrap_or_else(|| {
                self.leave(element, "its preserveAspectRatio cannot be read");
                svgtypes::AspectRatio::default()
            });
            // A side that is not given follows the other.
            let (wide, high) = match (width, height) {
                (Some((w, _)), Some((h, _))) => (w, h),
                (Some((w, _)), None) => (w, w / view.w * view.h),
                (None, Some((h, _))) => (h / view.h * view.w, h),
                (None, None) => (view.w, view.h),
            };
            let scale = units::scales(view, Size::new(wide, high), aspect);
            px_per_unit = scale.x;
            // A unit has one size; a page that is pulled in one direction pulls the lines instead.
            around.transform = Affine::scale_non_uniform(1.0, scale.y / scale.x);
        } else if let (Some((w, _)), Some((h, _))) = (width, height) {
            around.page = Some(Size::new(w, h));
        }
        let mm_per_unit =
            Some(px_per_unit * MM_PER_PX).filter(|size| real && size.is_finite() && *size > 0.0);
        self.element(root, &around, true)?;
        Ok(mm_per_unit)
    }

    /// All elements in an element.
    fn children(&mut self, node: Node<'a, 'i>, around: &Around) -> Result<(), Stop> {
        for child in node.children().filter(|child| of_svg(*child)) {
            self.element(child, around, false)?;
        }
        Ok(())
    }

    /// One element with all in it. `drawn` is whether it is drawn although its kind is only drawn
    /// where it is used.
    fn element(&mut self, node: Node<'a, 'i>, outside: &Around, drawn: bool) -> Result<(), Stop> {
        let tag = node.tag_name().name();
        match tag {
            // Drawn where they are used, or not at all.
            "defs" | "title" | "desc" | "metadata" | "script" | "style" | "linearGradient"
            | "radialGradient" | "meshgradient" | "hatch" | "solidcolor" | "marker"
            | "clipPath" | "mask" | "pattern" | "filter" | "view" | "cursor" | "font"
            | "font-face" | "color-profile" => return Ok(()),
            "symbol" if !drawn => return Ok(()),
            _ => {}
        }
        let letters: usize = node.attributes().map(|one| one.value().len()).sum();
        // What stands in the file once is bounded by its size, what is used again is not.
        let letters = letters as u64 / if outside.used_at.is_some() { 1 } else { 8 };
        spend(&self.left, ELEMENT_WORK + letters);
        let style = Style::of(node, self.sheet, &self.left);
        if self.left.get() == 0 {
            return Err(
                "The drawing has more elements, or uses its own parts or style rules more often, \
                 than any drawing needs; expand the parts and keep the lines only."
                    .to_owned(),
            );
        }
        if outside.depth >= DEEPEST {
            return Err(scan::too_deep(self.line(node.range().start)));
        }
        if style.get("display") == Some("none") {
            return Ok(());
        }
        let name = self.name(node, outside);
        let mut around = outside.clone();
        around.depth += 1;
        self.inherit(&style, &name, &mut around);
        match tag {
            "g" | "a" | "switch" | "svg" | "symbol" | "use" | "path" | "rect" | "circle"
            | "ellipse" | "line" | "polyline" | "polygon" => {}
            _ => {
                // What is hidden is not missed.
                if around.visible {
                    self.leave(name, not_lines(tag));
                }
                return Ok(());
            }
        }
        if transparent(&style, "opacity") {
            self.leave(name, "it is fully transparent");
            return Ok(());
        }
        match Self::transform(&style, outside.page) {
            Ok(by) => around.transform *= by,
            Err(why) => {
                self.leave(name, why);
                return Ok(());
            }
        }
        self.effects(&style, &name);
        match tag {
            "g" => {
                around.layer = layer(node).or(around.layer);
                self.children(node, &around)
            }
            "switch" => {
                let first = node.children().find(|child| {
                    of_svg(*child)
                        && child
                            .attribute("requiredExtensions")
                            .is_none_or(|wants| wants.trim().is_empty())
                });
                first.map_or(Ok(()), |child| self.element(child, &around, false))
            }
            "svg" if node.parent_element().is_some() => {
                self.framed(node, &style, name, around, None)
            }
            "a" | "svg" => self.children(node, &around),
            "symbol" => self.framed(node, &style, name, around, None),
            "use" => self.used(node, &style, name, around),
            _ => self.shape(node, tag, &style, name, &around),
        }
    }

    /// Takes over what the element says of ink, visibility and colour.
    fn inherit(&mut self, style: &Style<'a, 'i>, name: &str, around: &mut Around) {
        if let Some(text) = style.get("color") {
            match text.parse::<Color>() {
                Ok(colour) => around.colour = Some([colour.red, colour.green, colour.blue]),
                Err(_) if inherited(text) || text.eq_ignore_ascii_case("currentColor") => {}
                Err(_) => {
                    around.colour = None;
                    let why = format!("its colour {} is not known", shown(text));
                    self.leave(name.to_owned(), why);
                }
            }
        }
        if let Some(text) = style.get("fill") {
            around.fill = self.ink(text, name, around.fill, Ink::Colour([0, 0, 0]));
        }
        if let Some(text) = style.get("stroke") {
            around.stroke = self.ink(text, name, around.stroke, Ink::None);
        }
        for (property, clear) in [
            ("fill-opacity", &mut around.clear_fill),
            ("stroke-opacity", &mut around.clear_stroke),
        ] {
            if style.get(property).is_some_and(|text| !inherited(text)) {
                *clear = transparent(style, property);
            }
        }
        match style.get("fill-rule") {
            Some("evenodd") => around.filling = Filling::EvenOdd,
            Some("nonzero" | "initial") => around.filling = Filling::Winding,
            _ => {}
        }
        match style.get("visibility") {
            Some("hidden" | "collapse") => around.visible = false,
            Some("visible" | "initial") => around.visible = true,
            _ => {}
        }
    }

    /// Reads what something is painted with.
    fn ink(&mut self, text: &str, name: &str, outside: Ink, initial: Ink) -> Ink {
        if inherited(text) {
            return outside;
        }
        if text.eq_ignore_ascii_case("initial") {
            return initial;
        }
        let solid = |colour: Color| match colour.alpha {
            0 => Ink::None,
            _ => Ink::Colour([colour.red, colour.green, colour.blue]),
        };
        if text.eq_ignore_ascii_case("none") || text.eq_ignore_ascii_case("transparent") {
            return Ink::None;
        }
        match Paint::from_str(text) {
            Ok(Paint::None) => Ink::None,
            Ok(Paint::Inherit) => outside,
            Ok(Paint::CurrentColor) => Ink::Current,
            Ok(Paint::Color(colour)) => solid(colour),
            Ok(Paint::FuncIRI(id, fallback)) => {
                let kind = match self.ids.get(id).map(|node| node.tag_name().name()) {
                    Some("pattern") => "a pattern",
                    Some("linearGradient" | "radialGradient" | "meshgradient") => "a gradient",
                    Some(_) => "no colour",
                    // By the book, what is not there counts as the colour behind it, or none.
                    None => {
                        let why = format!("its colour is {}, which is not there", shown(id));
                        self.leave(name.to_owned(), why);
                        return match fallback {
                            Some(PaintFallback::Color(colour)) => solid(colour),
                            Some(PaintFallback::CurrentColor) => Ink::Current,
                            // A line must not vanish because its gradient did.
                            Some(PaintFallback::None) | None => Ink::Unknown,
                        };
                    }
                };
                let why = format!("its colour is {kind}; the line is read without a colour");
                self.leave(name.to_owned(), why);
                Ink::Unknown
            }
            Ok(Paint::ContextFill | Paint::ContextStroke) => Ink::Unknown,
            Err(_) if text.eq_ignore_ascii_case("currentColor") => Ink::Current,
            Err(_) => {
                let why = format!("its colour {} is not known", shown(text));
                self.leave(name.to_owned(), why);
                Ink::Unknown
            }
        }
    }

    /// The transform of an element, or why it cannot be followed.
    fn transform(style: &Style<'a, 'i>, page: Option<Size>) -> Result<Affine, String> {
        for property in ["rotate", "scale", "translate", "offset-path"] {
            if style.styled(property).is_some_and(|text| text != "none") {
                return Err(format!("its style has {property}, which is not followed"));
            }
        }
        let Some(text) = style.get("transform").filter(|text| !text.is_empty()) else {
            return Ok(Affine::IDENTITY);
        };
        let by = transform::read(text, page)
            .ok_or_else(|| format!("its transform {} cannot be followed", shown(text)))?;
        let Some(origin) = style.get("transform-origin") else {
            return Ok(by);
        };
        let boxed = style.get("transform-box");
        if boxed.is_some_and(|text| text != "view-box") {
            return Err("its transform-box is not followed".to_owned());
        }
        let about = transform::origin(origin, page)
            .ok_or_else(|| format!("its transform-origin {} cannot be followed", shown(origin)))?;
        let about = Affine::translate(about);
        Ok(about * by * about.inverse())
    }

    /// Names what changes the look of an element and is not followed. The element itself is read.
    fn effects(&mut self, style: &Style<'a, 'i>, name: &str) {
        for (property, why) in [
            ("clip-path", "it is cut by a clip-path, and is read whole"),
            ("mask", "it is cut by a mask, and is read whole"),
            ("filter", "it has a filter, and is read without"),
            ("marker", "it has markers, and is read without"),
            ("marker-start", "it has markers, and is read without"),
            ("marker-mid", "it has markers, and is read without"),
            ("marker-end", "it has markers, and is read without"),
            ("stroke-dasharray", "it is dashed, and is read as one line"),
        ] {
            let set = style.get(property);
            if set.is_some_and(|text| {
                !text.is_empty() && !text.eq_ignore_ascii_case("none") && !inherited(text)
            }) && set != Some("0")
            {
                self.leave(name.to_owned(), why);
            }
        }
    }

    /// A length of an element; nothing where it is not given or `auto`.
    fn length(
        style: &Style<'a, 'i>,
        property: &str,
        along: Along,
        page: Option<Size>,
    ) -> Result<Option<f64>, String> {
        let Some(text) = style.get(property).filter(|text| *text != "auto") else {
            return Ok(None);
        };
        let length = Length::read(text).and_then(|length| length.units(along, page));
        length
            .map(Some)
            .map_err(|why| format!("its {property} {} {why}", shown(text)))
    }

    /// An svg within the drawing, or a symbol: a frame of its own with a viewBox. `size` is what a
    /// `use` makes of its size.
    fn framed(
        &mut self,
        node: Node<'a, 'i>,
        style: &Style<'a, 'i>,
        name: String,
        mut around: Around,
        size: Option<[Option<f64>; 2]>,
    ) -> Result<(), Stop> {
        let page = around.page;
        let mut frame = || -> Result<Affine, String> {
            let get = |property, along| Self::length(style, property, along, page);
            let [wide, high] = size.unwrap_or_default();
            let own = |given: Option<f64>, property, along| match given {
                Some(given) => Ok(Some(given)),
                None => get(property, along),
            };
            let wide = own(wide, "width", Along::Width)?.or(page.map(|page| page.width));
            let high = own(high, "height", Along::Height)?.or(page.map(|page| page.height));
            let x = get("x", Along::Width)?.unwrap_or(0.0);
            let y = get("y", Along::Height)?.unwrap_or(0.0);
            let place = Affine::translate((x, y));
            let size = wide.zip(high).map(|(wide, high)| Size::new(wide, high));
            if size.is_some_and(|size| size.width <= 0.0 || size.height <= 0.0) {
                return Err("its frame has no size".to_owned());
            }
            let Some(text) = node.attribute("viewBox") else {
                around.page = size;
                return Ok(place);
            };
            let view = units::view_box(text)
                .ok_or_else(|| format!("its viewBox {} cannot be read", shown(text)))?;
            let aspect = units::aspect(node.attribute("preserveAspectRatio"))
                .ok_or("its preserveAspectRatio cannot be read")?;
            let size = size.ok_or("its size is not known")?;
            around.page = Some(Size::new(view.w, view.h));
            Ok(place * units::fit(view, size, aspect))
        };
        match frame() {
            Ok(frame) => {
                around.transform *= frame;
                self.children(node, &around)
            }
            Err(why) => {
                self.leave(name, why);
                Ok(())
            }
        }
    }

    /// A part of the drawing used once more.
    fn used(
        &mut self,
        node: Node<'a, 'i>,
        style: &Style<'a, 'i>,
        name: String,
        mut around: Around,
    ) -> Result<(), Stop> {
        let link = node
            .attributes()
            .find(|one| one.name() == "href")
            .map(|one| one.value().trim());
        let target = match link.map(|link| (link, link.strip_prefix('#'))) {
            None | Some(("", _)) => Err("it does not say what it uses".to_owned()),
            Some((link, None)) => Err(format!("it uses {}, which is another file", shown(link))),
            Some((_, Some(id))) => self
                .ids
                .get(id)
                .copied()
                .ok_or_else(|| format!("it uses {}, which is not there", shown(id))),
        };
        let target = target.and_then(|target| {
            let itself =
                self.using.contains(&target.id()) || node.ancestors().any(|outer| outer == target);
            if itself {
                return Err("it uses itself".to_owned());
            }
            let svg = of_svg(target);
            svg.then_some(target)
                .ok_or_else(|| "what it uses cannot be drawn".to_owned())
        });
        let page = around.page;
        let get = |property, along| Self::length(style, property, along, page);
        let all = target.and_then(|target| {
            Ok((
                target,
                get("x", Along::Width)?.unwrap_or(0.0),
                get("y", Along::Height)?.unwrap_or(0.0),
                get("width", Along::Width)?,
                get("height", Along::Height)?,
            ))
        });
        let (target, x, y, width, height) = match all {
            Ok(all) => all,
            Err(why) => {
                self.leave(name, why);
                return Ok(());
            }
        };
        around.transform *= Affine::translate((x, y));
        around.used_at.get_or_insert(node.range().start);
        self.using.push(target.id());
        let tag = target.tag_name().name();
        let result = if matches!(tag, "svg" | "symbol") {
            self.used_frame(target, around, [width, height])
        } else {
            let before = self.strokes.len() + self.unread.len() + self.more;
            let result = self.element(target, &around, true);
            let kind_only = matches!(
                tag,
                "defs" | "clipPath" | "mask" | "pattern" | "marker" | "linearGradient"
            );
            if kind_only && before == self.strokes.len() + self.unread.len() + self.more {
                self.leave(name, "what it uses cannot be drawn");
            }
            result
        };
        self.using.pop();
        result
    }

    /// A symbol or an svg that is used: as any element, but for its size.
    fn used_frame(
        &mut self,
        node: Node<'a, 'i>,
        outside: Around,
        size: [Option<f64>; 2],
    ) -> Result<(), Stop> {
        if outside.depth >= DEEPEST {
            return Err(scan::too_deep(self.line(node.range().start)));
        }
        spend(&self.left, ELEMENT_WORK);
        let style = Style::of(node, self.sheet, &self.left);
        if style.get("display") == Some("none") {
            return Ok(());
        }
        let name = self.name(node, &outside);
        let mut around = outside;
        around.depth += 1;
        self.inherit(&style, &name, &mut around);
        if transparent(&style, "opacity") {
            self.leave(name, "it is fully transparent");
            return Ok(());
        }
        match Self::transform(&style, around.page) {
            Ok(by) => around.transform *= by,
            Err(why) => {
                self.leave(name, why);
                return Ok(());
            }
        }
        self.effects(&style, &name);
        self.framed(node, &style, name, around, Some(size))
    }

    /// A shape or a path.
    fn shape(
        &mut self,
        node: Node<'a, 'i>,
        tag: &str,
        style: &Style<'a, 'i>,
        name: String,
        around: &Around,
    ) -> Result<(), Stop> {
        if !around.visible {
            return Ok(());
        }
        let line = around.stroke != Ink::None && !around.clear_stroke;
        // A straight line has no inside to fill.
        let area = around.fill != Ink::None && !around.clear_fill && tag != "line";
        if !line && !area {
            self.leave(name, "it has neither a line nor a filling");
            return Ok(());
        }
        let ink = if line { around.stroke } else { around.fill };
        let colour = match ink {
            Ink::Colour(colour) => Some(colour),
            Ink::Current => around.colour,
            Ink::None | Ink::Unknown => None,
        };
        let colour = colour.map(|[r, g, b]| format!("#{r:02x}{g:02x}{b:02x}"));
        let pen = match draw(node, tag, style, around.page) {
            Ok(pen) => pen,
            Err(why) => {
                self.leave(name, why);
                return Ok(());
            }
        };
        let drawn = pen.subpaths();
        let (subpaths, dots) = drawn.map_err(|super::geometry::TooMany| too_many())?;
        if dots > 0 {
            self.leave(name.clone(), "it has a point that is no line");
        }
        let area = (!line).then_some(Area {
            number: self.areas,
            filling: around.filling,
        });
        self.areas += usize::from(!line);
        for (mut path, closed) in subpaths {
            self.segments += path.elements().len() - 1 - usize::from(closed);
            if self.segments > MOST_SEGMENTS {
                return Err(too_many());
            }
            path.apply_affine(around.transform);
            if let Err(why) = measurable(&(path.clone(), closed)) {
                self.leave(name.clone(), why);
                continue;
            }
            self.strokes.push(ArtStroke {
                path,
                closed,
                area,
                colour: colour.clone(),
                layer: around.layer.clone(),
                element: name.clone(),
            });
        }
        Ok(())
    }
}

fn too_many() -> Stop {
    format!(
        "A drawing must have at most {MOST_SEGMENTS} lines and curves, but this one has more; \
         leave only the lines of the tubes in it, or simplify them."
    )
}

/// Whether a path can be worked with.
fn measurable((path, _): &Subpath) -> Result<(), &'static str> {
    let far = |point: &Point| !(point.x.abs() <= FARTHEST && point.y.abs() <= FARTHEST);
    let out = path.elements().iter().any(|element| match element {
        kurbo::PathEl::MoveTo(a) | kurbo::PathEl::LineTo(a) => far(a),
        kurbo::PathEl::QuadTo(a, b) => far(a) || far(b),
        kurbo::PathEl::CurveTo(a, b, c) => far(a) || far(b) || far(c),
        kurbo::PathEl::ClosePath => false,
    });
    if out {
        return Err("it reaches farther out than 1000000000 units");
    }
    let bounds = path.bounding_box();
    if bounds.width().max(bounds.height()) < LEAST {
        return Err("it has no length");
    }
    Ok(())
}

/// Whether a word takes the value of the element around.
fn inherited(text: &str) -> bool {
    text.eq_ignore_ascii_case("inherit") || text.eq_ignore_ascii_case("unset")
}

/// Whether an opacity is none at all.
fn transparent(style: &Style<'_, '_>, property: &str) -> bool {
    let number = style.get(property).and_then(|text| {
        let text = text.trim_end_matches('%');
        text.parse::<f64>().ok()
    });
    number.is_some_and(|opacity| opacity <= 0.0)
}

/// Why an element that is no shape is not read.
fn not_lines(tag: &str) -> &'static str {
    match tag {
        "text" | "tspan" | "textPath" | "tref" | "flowRoot" => "text must be turned into outlines",
        "image" => "a picture holds no lines",
        "foreignObject" => "it holds a document of another kind",
        "animate" | "animateTransform" | "animateMotion" | "animateColor" | "set" => {
            "movement is not followed"
        }
        _ => "it is no element that draws lines",
    }
}

/// The layer that a group is. Programs mark layers each in its own namespace by the same words;
/// elsewhere the outermost group with a name is as near as a file comes to it.
fn layer(node: Node<'_, '_>) -> Option<String> {
    let other = |name: &str| {
        let mut all = node.attributes();
        all.find(|one| one.namespace().is_some() && one.name() == name)
            .map(|one| one.value())
    };
    let name = if other("groupmode") == Some("layer") {
        other("label").or_else(|| node.attribute("id"))
    } else if in_named_group(node) {
        None
    } else {
        node.attribute("data-name").or_else(|| node.attribute("id"))
    };
    name.filter(|name| !name.trim().is_empty())
        .map(|name| name.trim().chars().take(LAYER_NAME).collect())
}

/// Whether a group around this one has a name.
fn in_named_group(node: Node<'_, '_>) -> bool {
    node.ancestors().skip(1).any(|outer| {
        outer.tag_name().name() == "g"
            && (outer.has_attribute("id") || outer.has_attribute("data-name"))
    })
}

/// Draws a shape in its own coordinates, or says why not.
fn draw<'a>(
    node: Node<'a, '_>,
    tag: &str,
    style: &Style<'a, '_>,
    page: Option<Size>,
) -> Result<Pen, String> {
    let get = |property, along| Walk::length(style, property, along, page);
    let across = |property| Ok::<_, String>(get(property, Along::Width)?.unwrap_or(0.0));
    let down = |property| Ok::<_, String>(get(property, Along::Height)?.unwrap_or(0.0));
    let radius = |property, along| {
        let radius = get(property, along)?;
        if radius.is_some_and(|radius| radius < 0.0) {
            return Err(format!("its {property} is negative"));
        }
        Ok(radius)
    };
    let mut pen = Pen::default();
    match tag {
        "path" => {
            if style.styled("d").is_some() {
                return Err("its path data stand in a style, which is not followed".to_owned());
            }
            return path::path(node.attribute("d").unwrap_or_default());
        }
        "polyline" | "polygon" => {
            let points = node.attribute("points").unwrap_or_default();
            return path::points(points, tag == "polygon");
        }
        "line" => {
            pen.move_to(Point::new(across("x1")?, down("y1")?));
            pen.line_to(Point::new(across("x2")?, down("y2")?));
        }
        "rect" => {
            let corner = Point::new(across("x")?, down("y")?);
            let size = Vec2::new(across("width")?, down("height")?);
            if !(size.x > 0.0 && size.y > 0.0) {
                return Err("it has no size".to_owned());
            }
            let (rx, ry) = (radius("rx", Along::Width)?, radius("ry", Along::Height)?);
            // One radius alone is both.
            let radii = Vec2::new(rx.or(ry).unwrap_or(0.0), ry.or(rx).unwrap_or(0.0));
            pen.rect(corner, size, radii);
        }
        _ => {
            let (rx, ry) = if tag == "circle" {
                let r = radius("r", Along::Both)?;
                (r, r)
            } else {
                let (rx, ry) = (radius("rx", Along::Width)?, radius("ry", Along::Height)?);
                (rx.or(ry), ry.or(rx))
            };
            let radii = Vec2::new(rx.unwrap_or(0.0), ry.unwrap_or(0.0));
            if !(radii.x > 0.0 && radii.y > 0.0) {
                return Err("it has no size".to_owned());
            }
            pen.ellipse(Point::new(across("cx")?, down("cy")?), radii);
        }
    }
    Ok(pen)
}
