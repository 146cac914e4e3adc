//! The job: what the customer wants, and the choices made for it. Nothing derived is stored.
//!
//! Lengths stay as typed, with their unit (`"450 mm"`, `"1' 6 1/2\""`); a bare number in a file is
//! millimetres.

mod shape;
mod wiring;

use std::sync::Arc;

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD;
use serde::{Deserialize, Deserializer, Serialize, Serializer};

use crate::book::Dampness;

pub use shape::{Shape, ShapeRow};
pub use wiring::{CircuitLeads, Feed, LeadRun, Wiring};

/// What the `tubewright` field of a job file says.
pub const KIND: &str = "job";
/// The newest version of the job file that this program knows. A job is written in the oldest version
/// that can hold it, so that an older program still opens what it understands: 2 brought artwork and
/// the layout of letters; 3 brought shapes, groups, choices of pieces, the sign's outline, fonts and
/// insets; 4 brought leads and the feed.
pub const VERSION: u32 = 4;
/// The oldest version that is read.
const OLDEST: u32 = 1;

/// One sign.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Job {
    /// Always [`KIND`]; tells a job file from a book file.
    pub tubewright: String,
    /// File version; [`VERSION`] for every job in hand.
    pub version: u32,
    /// What the job is called.
    pub name: String,
    /// For whom.
    #[serde(default)]
    pub customer: String,
    /// Anything else worth keeping.
    #[serde(default)]
    pub note: String,
    /// What the sign says and is made of, top to bottom; also the order of the pieces.
    #[serde(default)]
    pub rows: Vec<Row>,
    /// The artwork files that rows take their lines from, each once.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub artwork: Vec<ArtworkFile>,
    /// The font files that rows take their letters from, each once.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub fonts: Vec<FontFile>,
    /// Name of the rule set in the book that this job is held against.
    #[serde(default)]
    pub rules: String,
    /// What the plan strives for.
    #[serde(default)]
    pub wish: Wish,
    /// Where the sign hangs.
    #[serde(default)]
    pub site: Site,
    /// The size the whole sign has to stay inside, where one is given.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub outline: Option<Outline>,
    /// How the leads of its circuits are run.
    #[serde(default, skip_serializing_if = "Wiring::is_usual")]
    pub wiring: Wiring,
    /// What feeds its supplies.
    #[serde(default, skip_serializing_if = "Feed::is_usual")]
    pub feed: Feed,
}

/// The outer size of a sign: of its board, box or the space on the wall. As typed.
#[derive(Debug, Clone, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Outline {
    /// Width; empty: not limited.
    #[serde(default)]
    pub width: String,
    /// Height; empty: not limited.
    #[serde(default)]
    pub height: String,
}

impl Default for Job {
    fn default() -> Self {
        Self {
            tubewright: KIND.to_owned(),
            version: VERSION,
            name: "New sign".to_owned(),
            customer: String::new(),
            note: String::new(),
            rows: Vec::new(),
            artwork: Vec::new(),
            fonts: Vec::new(),
            rules: String::new(),
            wish: Wish::default(),
            site: Site::default(),
            outline: None,
            wiring: Wiring::default(),
            feed: Feed::default(),
        }
    }
}

/// One row of the sign.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(tag = "row", rename_all = "lowercase")]
pub enum Row {
    /// A word or line of letters.
    Text(TextRow),
    /// Pieces of glass given by their stroke lengths.
    Strokes(StrokesRow),
    /// The lines of an artwork file.
    Artwork(ArtworkRow),
    /// A plain shape.
    Shape(ShapeRow),
    /// Letters of a font file.
    Outline(OutlineRow),
}

/// An artwork file as it was opened. Copies share the text: a drawing may be large, and every step
/// that can be undone holds the job.
#[derive(Debug, Clone, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ArtworkFile {
    /// Its name; a row names it so.
    pub name: String,
    /// What is in it.
    #[serde(serialize_with = "write_text", deserialize_with = "read_text")]
    pub text: Arc<str>,
}

impl PartialEq for ArtworkFile {
    fn eq(&self, other: &Self) -> bool {
        self.name == other.name && same_text(&self.text, &other.text)
    }
}

/// A font file as it was opened. Copies share the data, as those of an artwork file do.
#[derive(Debug, Clone, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FontFile {
    /// Its name; a row names it so.
    pub name: String,
    /// The bytes of the file in base64.
    #[serde(serialize_with = "write_text", deserialize_with = "read_text")]
    pub data: Arc<str>,
}

impl FontFile {
    /// The font file of these bytes.
    pub fn new(name: &str, bytes: &[u8]) -> Self {
        Self {
            name: name.to_owned(),
            data: STANDARD.encode(bytes).into(),
        }
    }

    /// The bytes of the file; None where the data is damaged.
    pub fn bytes(&self) -> Option<Vec<u8>> {
        STANDARD.decode(self.data.as_bytes()).ok()
    }
}

impl PartialEq for FontFile {
    fn eq(&self, other: &Self) -> bool {
        self.name == other.name && same_text(&self.data, &other.data)
    }
}

/// Jobs are compared at every edit, and most of their files are the very same.
fn same_text(one: &Arc<str>, other: &Arc<str>) -> bool {
    Arc::ptr_eq(one, other) || one == other
}

fn write_text<S: Serializer>(text: &Arc<str>, to: S) -> Result<S::Ok, S::Error> {
    to.serialize_str(text)
}

fn read_text<'de, D: Deserializer<'de>>(from: D) -> Result<Arc<str>, D::Error> {
    String::deserialize(from).map(Arc::from)
}

/// The lines of an artwork file, each colour and layer in a tube of its own.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ArtworkRow {
    /// What it is.
    pub label: String,
    /// The file, by its name in the job.
    pub file: String,
    /// How wide it is made, as typed; empty: as large as the file says.
    #[serde(default)]
    pub width: String,
    /// What each kind of line is made of. Kinds that are not named are not decided.
    #[serde(default)]
    pub lines: Vec<ArtworkLines>,
    /// How many times this row is made.
    #[serde(default = "one")]
    pub count: i64,
    /// Rows of one group light together; rows of another group are never on one circuit with them.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub group: String,
    /// How its strokes become pieces of glass, where that is not as usual.
    #[serde(default, skip_serializing_if = "Pieces::is_usual")]
    pub pieces: Pieces,
}

impl Default for ArtworkRow {
    fn default() -> Self {
        Self {
            label: String::new(),
            file: String::new(),
            width: String::new(),
            lines: Vec::new(),
            count: one(),
            group: String::new(),
            pieces: Pieces::default(),
        }
    }
}

/// The lines of one colour in one layer of an artwork.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ArtworkLines {
    /// Their colour, `#rrggbb`, where they have one.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub colour: Option<String>,
    /// Their layer, where they have one.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub layer: Option<String>,
    /// Tube type, by its name in the book; empty: these lines are not tube.
    pub tube: String,
    /// How far inside the edges of filled areas the tube runs, as typed; empty: on the edge itself.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub inset: String,
}

/// Letters of a font file, the tube along their outlines.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct OutlineRow {
    /// What it says; a line break begins another line.
    pub text: String,
    /// Height of a capital letter, as typed.
    pub height: String,
    /// The font file, by its name in the job.
    pub font: String,
    /// How far inside the outline the tube runs, as typed; empty: on the outline itself.
    #[serde(default)]
    pub inset: String,
    /// Tube type, by its name in the book.
    pub tube: String,
    /// How many times this row is made.
    #[serde(default = "one")]
    pub count: i64,
    /// Rows of one group light together; rows of another group are never on one circuit with them.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub group: String,
    /// How its strokes become pieces of glass, where that is not as usual.
    #[serde(default, skip_serializing_if = "Pieces::is_usual")]
    pub pieces: Pieces,
}

impl Default for OutlineRow {
    fn default() -> Self {
        Self {
            text: String::new(),
            height: String::new(),
            font: String::new(),
            inset: String::new(),
            tube: String::new(),
            count: one(),
            group: String::new(),
            pieces: Pieces::default(),
        }
    }
}

/// A word, or lines of letters, in one face, height and tube.
///
/// What is not given of the layout is as it is usual, and is not written to the file.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TextRow {
    /// What it says; a line break begins another line.
    pub text: String,
    /// Height of a capital letter, as typed.
    pub height: String,
    /// Letter face, by name.
    #[serde(default = "sans")]
    pub face: String,
    /// Tube type, by its name in the book.
    pub tube: String,
    /// How many times this row is made.
    #[serde(default = "one")]
    pub count: i64,
    /// How wide the letters are, in percent of how the face draws them.
    #[serde(default = "hundred", skip_serializing_if = "is_hundred")]
    pub width_percent: f64,
    /// What is added to the space after each letter, in percent of the letter height.
    #[serde(default, skip_serializing_if = "is_zero")]
    pub spacing_percent: f64,
    /// How several lines stand to each other.
    #[serde(default, skip_serializing_if = "is_centre")]
    pub align: Align,
    /// Clear space between a baseline and the capitals of the next line, in percent of the letter
    /// height.
    #[serde(default = "sixty", skip_serializing_if = "is_sixty")]
    pub line_gap_percent: f64,
    /// The arc the letters stand on; none: they stand on a straight line.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub arc: Option<Curve>,
    /// How far the whole is turned; above zero it rises to the right.
    #[serde(default, skip_serializing_if = "is_zero")]
    pub rotation_degrees: f64,
    /// Rows of one group light together; rows of another group are never on one circuit with them.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub group: String,
    /// How its strokes become pieces of glass, where that is not as usual.
    #[serde(default, skip_serializing_if = "Pieces::is_usual")]
    pub pieces: Pieces,
}

impl Default for TextRow {
    fn default() -> Self {
        Self {
            text: String::new(),
            height: String::new(),
            face: sans(),
            tube: String::new(),
            count: one(),
            width_percent: hundred(),
            spacing_percent: 0.0,
            align: Align::default(),
            line_gap_percent: sixty(),
            arc: None,
            rotation_degrees: 0.0,
            group: String::new(),
            pieces: Pieces::default(),
        }
    }
}

impl TextRow {
    /// Whether the layout is the usual one in everything.
    fn is_plain(&self) -> bool {
        is_hundred(&self.width_percent)
            && is_zero(&self.spacing_percent)
            && is_centre(&self.align)
            && is_sixty(&self.line_gap_percent)
            && self.arc.is_none()
            && is_zero(&self.rotation_degrees)
    }
}

/// How the lines of a text stand to each other.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Align {
    /// They begin under each other.
    Left,
    /// Their middles are under each other.
    #[default]
    Centre,
    /// They end under each other.
    Right,
}

/// The arc a text stands on, by one length as typed. A minus before it turns the arc over: the middle
/// hangs down instead of standing up.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Curve {
    /// By the radius of the first line's baseline.
    Radius(String),
    /// By how much higher the middle of the first line stands than its ends.
    Rise(String),
}

impl Curve {
    /// Whether the middle hangs down, and the length without its sign.
    pub fn parts(&self) -> (bool, &str) {
        let (Self::Radius(typed) | Self::Rise(typed)) = self;
        let typed = typed.trim();
        let hangs = typed.strip_prefix(['-', '\u{2212}']);
        hangs.map_or((false, typed), |typed| (true, typed.trim_start()))
    }
}

/// Pieces of glass given by length: borders, underlines, anything measured on a drawing.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct StrokesRow {
    /// What it is.
    pub label: String,
    /// Lengths as typed, one piece of glass each, parted by semicolons:
    /// `"1200 mm; 2 x 300 mm + 95 mm"` is two pieces.
    pub strokes: String,
    /// Tube type, by its name in the book.
    pub tube: String,
    /// How many times this row is made.
    #[serde(default = "one")]
    pub count: i64,
    /// Rows of one group light together; rows of another group are never on one circuit with them.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub group: String,
    /// How its strokes become pieces of glass, where that is not as usual.
    #[serde(default, skip_serializing_if = "Pieces::is_usual")]
    pub pieces: Pieces,
}

impl Default for StrokesRow {
    fn default() -> Self {
        Self {
            label: String::new(),
            strokes: String::new(),
            tube: String::new(),
            count: one(),
            group: String::new(),
            pieces: Pieces::default(),
        }
    }
}

/// How the strokes of a row become pieces of glass.
///
/// Usually each letter, each word of a joined face and each line of touching strokes is a piece. What
/// a person chose otherwise is kept here. Strokes are called by the names the takeoff gives them
/// ([`crate::takeoff::Piece::strokes`]); a choice whose strokes are not there any more is told of and
/// has no effect.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub struct Pieces {
    /// What is one piece before anything is joined or parted.
    #[serde(skip_serializing_if = "is_usual")]
    pub each: Each,
    /// Pairs of strokes whose pieces are made as one.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub joined: Vec<[String; 2]>,
    /// Pairs of strokes that follow each other in a piece, which ends between them.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub parted: Vec<[String; 2]>,
    /// Places on strokes where a piece ends and another begins.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub cuts: Vec<Cut>,
    /// Whether pieces longer than the shop bends stay in one.
    #[serde(skip_serializing_if = "std::ops::Not::not")]
    pub keep_long: bool,
    /// Pieces by the names the takeoff gives them, in the order they are wired in. One that is not
    /// named follows the one it follows in reading order.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub order: Vec<String>,
}

impl Pieces {
    /// Whether nothing was chosen.
    pub fn is_usual(&self) -> bool {
        *self == Self::default()
    }
}

/// What is one piece of glass.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Each {
    /// A letter, a word of a joined face, or strokes that touch.
    #[default]
    Usual,
    /// Strokes that touch, and no others.
    Touching,
    /// A word; of a drawing, all lines of one tube.
    Whole,
}

#[allow(clippy::trivially_copy_pass_by_ref, reason = "asked so by serde")]
fn is_usual(each: &Each) -> bool {
    *each == Each::Usual
}

/// A place on a stroke.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Cut {
    /// The stroke, by the name the takeoff gives it.
    pub stroke: String,
    /// How far along it from its drawn beginning, as a share of its length.
    pub share: f64,
}

impl Row {
    /// Tube types, by their names in the book. An artwork has as many as it has kinds of lines.
    pub fn tubes(&self) -> Vec<&str> {
        match self {
            Self::Text(row) => vec![&row.tube],
            Self::Strokes(row) => vec![&row.tube],
            Self::Shape(row) => vec![&row.tube],
            Self::Outline(row) => vec![&row.tube],
            Self::Artwork(row) => {
                let named = row.lines.iter().map(|lines| lines.tube.as_str());
                named.filter(|tube| !tube.is_empty()).collect()
            }
        }
    }

    /// The group it lights with; empty: with all rows of no group.
    pub fn group(&self) -> &str {
        match self {
            Self::Text(row) => &row.group,
            Self::Strokes(row) => &row.group,
            Self::Artwork(row) => &row.group,
            Self::Shape(row) => &row.group,
            Self::Outline(row) => &row.group,
        }
    }

    /// The group, to be changed.
    pub fn group_mut(&mut self) -> &mut String {
        match self {
            Self::Text(row) => &mut row.group,
            Self::Strokes(row) => &mut row.group,
            Self::Artwork(row) => &mut row.group,
            Self::Shape(row) => &mut row.group,
            Self::Outline(row) => &mut row.group,
        }
    }

    /// How its strokes become pieces.
    pub fn pieces(&self) -> &Pieces {
        match self {
            Self::Text(row) => &row.pieces,
            Self::Strokes(row) => &row.pieces,
            Self::Artwork(row) => &row.pieces,
            Self::Shape(row) => &row.pieces,
            Self::Outline(row) => &row.pieces,
        }
    }

    /// How its strokes become pieces, to be changed.
    pub fn pieces_mut(&mut self) -> &mut Pieces {
        match self {
            Self::Text(row) => &mut row.pieces,
            Self::Strokes(row) => &mut row.pieces,
            Self::Artwork(row) => &mut row.pieces,
            Self::Shape(row) => &mut row.pieces,
            Self::Outline(row) => &mut row.pieces,
        }
    }

    /// How many times this row is made.
    pub fn count(&self) -> i64 {
        match self {
            Self::Text(row) => row.count,
            Self::Strokes(row) => row.count,
            Self::Artwork(row) => row.count,
            Self::Shape(row) => row.count,
            Self::Outline(row) => row.count,
        }
    }

    /// What the row is called in sentences: its text or label.
    pub fn label(&self) -> &str {
        match self {
            Self::Text(row) => &row.text,
            Self::Strokes(row) => &row.label,
            Self::Artwork(row) => &row.label,
            Self::Shape(row) => &row.label,
            Self::Outline(row) => &row.text,
        }
    }
}

/// What the plan strives for, after what is stopped or needs a look is avoided.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Wish {
    /// Fewest supplies, then the smallest total rating, then the lowest price.
    #[default]
    FewestSupplies,
    /// The lowest price of the supplies, whatever their number.
    LowestPrice,
}

/// Where the sign hangs and what feeds it.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Site {
    /// Mains volts at the sign; supplies made for other volts are left out. None: not checked.
    #[serde(default)]
    pub mains_volts: Option<f64>,
    /// How wet the place of the supplies is.
    #[serde(default)]
    pub place: Dampness,
    /// Outdoors below 0 °C at times: mercury tubes then take more volts.
    #[serde(default)]
    pub cold: bool,
}

fn sans() -> String {
    "sans".to_owned()
}

const fn one() -> i64 {
    1
}

const fn hundred() -> f64 {
    100.0
}

const fn sixty() -> f64 {
    60.0
}

// What is no number is not written either: JSON has no word for it, and it could not be read back.

#[allow(clippy::trivially_copy_pass_by_ref, reason = "asked so by serde")]
fn is_hundred(value: &f64) -> bool {
    *value == hundred() || !value.is_finite()
}

#[allow(clippy::trivially_copy_pass_by_ref, reason = "asked so by serde")]
fn is_sixty(value: &f64) -> bool {
    *value == sixty() || !value.is_finite()
}

#[allow(clippy::trivially_copy_pass_by_ref, reason = "asked so by serde")]
fn is_zero(value: &f64) -> bool {
    *value == 0.0 || !value.is_finite()
}

#[allow(clippy::trivially_copy_pass_by_ref, reason = "asked so by serde")]
fn is_centre(align: &Align) -> bool {
    *align == Align::Centre
}

/// Reads a job file.
///
/// # Errors
/// A sentence saying what is wrong and where, for text that is not a job of a known version.
pub fn read(text: &str) -> Result<Job, String> {
    let text = crate::book::without_mark(text);
    crate::book::check_kind(text, KIND, OLDEST..=VERSION)?;
    let mut job: Job = serde_json::from_str(text).map_err(|error| {
        let trouble = crate::book::json_trouble(&error);
        format!("This job file cannot be read: {trouble}.")
    })?;
    job.version = VERSION;
    Ok(job)
}

/// The job as the text of a file, of the oldest version that can hold it.
pub fn write(job: &Job) -> String {
    let job = Job {
        version: oldest(job),
        ..job.clone()
    };
    // A job holds only strings, whole numbers and floats. JSON takes all but NaN: of a layout it is
    // left out, and where a float may be absent it becomes null and reads back as "not given".
    serde_json::to_string_pretty(&job).unwrap_or_default()
}

/// The oldest version that can hold a job.
fn oldest(job: &Job) -> u32 {
    let of_row = |row: &Row| {
        if !row.group().is_empty() || !row.pieces().is_usual() {
            return 3;
        }
        match row {
            Row::Text(row) if row.is_plain() => OLDEST,
            Row::Strokes(_) => OLDEST,
            Row::Artwork(row) if row.lines.iter().any(|lines| !lines.inset.is_empty()) => 3,
            Row::Text(_) | Row::Artwork(_) => 2,
            Row::Shape(_) | Row::Outline(_) => 3,
        }
    };
    let of_rows = job.rows.iter().map(of_row).max().unwrap_or(OLDEST);
    of_rows
        .max(if job.artwork.is_empty() { OLDEST } else { 2 })
        .max(if job.fonts.is_empty() { OLDEST } else { 3 })
        .max(if job.outline.is_none() { OLDEST } else { 3 })
        .max(if job.wiring.is_usual() && job.feed.is_usual() {
            OLDEST
        } else {
            4
        })
}
