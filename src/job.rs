//! The job: what the customer wants, and the choices made for it. Nothing derived is stored.
//!
//! Lengths stay as typed, with their unit (`"450 mm"`, `"1' 6 1/2\""`); a bare number in a file is
//! millimetres.

use std::sync::Arc;

use serde::{Deserialize, Deserializer, Serialize, Serializer};

use crate::book::Dampness;

/// What the `tubewright` field of a job file says.
pub const KIND: &str = "job";
/// The version of the job file written by this program.
pub const VERSION: u32 = 1;

/// One sign.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Job {
    /// Always [`KIND`]; tells a job file from a book file.
    pub tubewright: String,
    /// File version, [`VERSION`] when written by this program.
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
    /// Name of the rule set in the book that this job is held against.
    #[serde(default)]
    pub rules: String,
    /// What the plan strives for.
    #[serde(default)]
    pub wish: Wish,
    /// Where the sign hangs.
    #[serde(default)]
    pub site: Site,
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
            rules: String::new(),
            wish: Wish::default(),
            site: Site::default(),
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
}

/// An artwork file as it was opened. Copies share the text: a drawing may be large, and every step
/// that can be undone holds the job.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ArtworkFile {
    /// Its name; a row names it so.
    pub name: String,
    /// What is in it.
    #[serde(serialize_with = "write_text", deserialize_with = "read_text")]
    pub text: Arc<str>,
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
}

/// The lines of one colour in one layer of an artwork.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
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
}

/// A word or line of letters in one face, height and tube.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TextRow {
    /// What it says.
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
}

impl Row {
    /// Tube types, by their names in the book. An artwork has as many as it has kinds of lines.
    pub fn tubes(&self) -> Vec<&str> {
        match self {
            Self::Text(row) => vec![&row.tube],
            Self::Strokes(row) => vec![&row.tube],
            Self::Artwork(row) => {
                let named = row.lines.iter().map(|lines| lines.tube.as_str());
                named.filter(|tube| !tube.is_empty()).collect()
            }
        }
    }

    /// How many times this row is made.
    pub fn count(&self) -> i64 {
        match self {
            Self::Text(row) => row.count,
            Self::Strokes(row) => row.count,
            Self::Artwork(row) => row.count,
        }
    }

    /// What the row is called in sentences: its text or label.
    pub fn label(&self) -> &str {
        match self {
            Self::Text(row) => &row.text,
            Self::Strokes(row) => &row.label,
            Self::Artwork(row) => &row.label,
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

/// Reads a job file.
///
/// # Errors
/// A sentence saying what is wrong and where, for text that is not a job of a known version.
pub fn read(text: &str) -> Result<Job, String> {
    let text = crate::book::without_mark(text);
    crate::book::check_kind(text, KIND, VERSION)?;
    serde_json::from_str(text).map_err(|error| {
        let trouble = crate::book::json_trouble(&error);
        format!("This job file cannot be read: {trouble}.")
    })
}

/// The job as the text of a file.
pub fn write(job: &Job) -> String {
    // A job holds only strings, whole numbers and optional floats; JSON takes all but NaN, which
    // becomes null and reads back as "not given".
    serde_json::to_string_pretty(job).unwrap_or_default()
}
