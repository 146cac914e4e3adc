//! Supplies and tube types as spreadsheet files (CSV, RFC 4180), one line each.
//!
//! One table of columns for each list says how a cell is written and read; the file's first line
//! names the columns, units in the names. Order is free, columns may be missing, a cell left empty
//! is a figure not given. Figures are read as those typed into a field are: `6 kV` and `6000` in a
//! column of volts are the same, `9,000` is not guessed at.

use std::collections::HashSet;

use rust_decimal::Decimal;

use super::cells::{chart_cell, chart_of, readings_cell, readings_of};
use super::{Dampness, Gas, OutputEarthing, SupplyEntry, SupplyKind, TubeEntry};
use crate::measure::{self, quoted};

/// What a file held.
#[derive(Debug, Clone, PartialEq)]
pub struct Sheet<T> {
    /// Lines that could be read.
    pub entries: Vec<T>,
    /// A sentence for each line, cell or column that could not, with its place; after the first
    /// hundred, how many more.
    pub trouble: Vec<String>,
}

/// Reads supplies.
///
/// # Errors
/// A sentence when the file as a whole is not such a list; single bad lines are `trouble`.
pub fn read_supplies(bytes: &[u8]) -> Result<Sheet<SupplyEntry>, String> {
    read(bytes, SUPPLY, "supplies", |supply| &supply.name)
}

/// Reads tube types.
///
/// # Errors
/// A sentence when the file as a whole is not such a list; single bad lines are `trouble`.
pub fn read_tubes(bytes: &[u8]) -> Result<Sheet<TubeEntry>, String> {
    read(bytes, TUBE, "tube types", |tube| &tube.name)
}

/// Supplies as a file.
pub fn write_supplies(supplies: &[SupplyEntry]) -> String {
    write(supplies, SUPPLY)
}

/// Tube types as a file.
pub fn write_tubes(tubes: &[TubeEntry]) -> String {
    write(tubes, TUBE)
}

struct Column<T> {
    name: &'static str,
    get: fn(&T) -> String,
    set: fn(&mut T, &Cell) -> Result<(), String>,
}

/// A cell that is not empty.
struct Cell<'t> {
    text: &'t str,
}

impl Cell<'_> {
    fn figure(&self, unit: &str) -> Result<Option<f64>, String> {
        let read = measure::figure(self.text, unit);
        read.map(Some).map_err(|error| error.to_string())
    }

    fn money(&self) -> Result<Option<Decimal>, String> {
        let read = measure::money(self.text);
        read.map(Some).map_err(|error| error.to_string())
    }

    fn count(&self) -> Result<Option<u32>, String> {
        self.text
            .parse()
            .map(Some)
            .map_err(|_| format!("expected a whole number, but found {}", quoted(self.text)))
    }

    fn yes(&self) -> Result<bool, String> {
        match self.text.to_ascii_lowercase().as_str() {
            "yes" | "true" | "1" => Ok(true),
            "no" | "false" | "0" => Ok(false),
            _ => Err(format!(
                "expected yes or no, but found {}",
                quoted(self.text)
            )),
        }
    }

    fn word<W: Copy>(&self, words: &[(&str, W)]) -> Result<W, String> {
        let found = self.text.to_ascii_lowercase();
        words
            .iter()
            .find(|(word, _)| *word == found)
            .map(|&(_, value)| value)
            .ok_or_else(|| {
                let known: Vec<&str> = words.iter().map(|&(word, _)| word).collect();
                format!(
                    "expected {}, but found {}",
                    known.join(" or "),
                    quoted(self.text)
                )
            })
    }
}

fn said<W: Copy + PartialEq>(value: W, words: &[(&'static str, W)]) -> String {
    words
        .iter()
        .find(|&&(_, known)| known == value)
        .map_or_else(String::new, |&(word, _)| word.to_owned())
}

const KINDS: &[(&str, SupplyKind)] = &[
    ("iron", SupplyKind::Iron),
    ("electronic", SupplyKind::Electronic),
];
const EARTHINGS: &[(&str, OutputEarthing)] = &[
    ("mid-point", OutputEarthing::MidPoint),
    ("mid-point-return", OutputEarthing::MidPointReturn),
    ("one-end", OutputEarthing::OneEnd),
    ("isolated", OutputEarthing::Isolated),
];
const PLACES: &[(&str, Dampness)] = &[
    ("dry", Dampness::Dry),
    ("damp", Dampness::Damp),
    ("wet", Dampness::Wet),
];
const GASES: &[(&str, Gas)] = &[("neon", Gas::Neon), ("argon-mercury", Gas::ArgonMercury)];

fn shown<T: ToString>(value: Option<T>) -> String {
    value.map_or_else(String::new, |value| value.to_string())
}

fn yes_no(value: bool) -> String {
    if value { "yes" } else { "no" }.to_owned()
}

macro_rules! column {
    ($name:ident as text) => {
        Column {
            name: stringify!($name),
            get: |entry| entry.$name.clone(),
            set: |entry, cell| {
                entry.$name = cell.text.to_owned();
                Ok(())
            },
        }
    };
    ($name:ident as yes) => {
        Column {
            name: stringify!($name),
            get: |entry| yes_no(entry.$name),
            set: |entry, cell| cell.yes().map(|value| entry.$name = value),
        }
    };
    ($name:ident as known word $words:ident) => {
        Column {
            name: stringify!($name),
            get: |entry| {
                entry
                    .$name
                    .map_or_else(String::new, |value| said(value, $words))
            },
            set: |entry, cell| cell.word($words).map(|value| entry.$name = Some(value)),
        }
    };
    ($name:ident as word $words:ident) => {
        Column {
            name: stringify!($name),
            get: |entry| said(entry.$name, $words),
            set: |entry, cell| cell.word($words).map(|value| entry.$name = value),
        }
    };
    ($name:ident in $unit:literal) => {
        Column {
            name: stringify!($name),
            get: |entry| shown(entry.$name),
            set: |entry, cell| cell.figure($unit).map(|value| entry.$name = value),
        }
    };
    ($name:ident by $write:ident, $read:ident) => {
        Column {
            name: stringify!($name),
            get: |entry| $write(&entry.$name),
            set: |entry, cell| $read(cell.text).map(|value| entry.$name = value),
        }
    };
    ($name:ident as $kind:ident) => {
        Column {
            name: stringify!($name),
            get: |entry| shown(entry.$name),
            set: |entry, cell| cell.$kind().map(|value| entry.$name = value),
        }
    };
}

const SUPPLY: &[Column<SupplyEntry>] = &[
    column!(name as text),
    column!(kind as known word KINDS),
    column!(input_volts in "V"),
    column!(input_hertz in "Hz"),
    column!(input_va in "VA"),
    column!(no_load_volts in "V"),
    column!(short_circuit_ma in "mA"),
    column!(rated_ma in "mA"),
    column!(rated_load_volts in "V"),
    column!(earthing as known word EARTHINGS),
    column!(earth_fault_protection as yes),
    column!(trip_ma in "mA"),
    column!(trip_seconds in "s"),
    column!(open_circuit_protection as yes),
    column!(output_hertz in "Hz"),
    column!(least_load_percent in "%"),
    column!(most_load_percent in "%"),
    column!(place as word PLACES),
    column!(price as money),
    column!(stock as count),
    column!(note as text),
    column!(longest_lead_mm in "mm"),
    column!(chart by chart_cell, chart_of),
];

const TUBE: &[Column<TubeEntry>] = &[
    column!(name as text),
    column!(gas as word GASES),
    column!(outer_mm in "mm"),
    column!(wall_mm in "mm"),
    column!(colour as text),
    column!(least_ma in "mA"),
    column!(most_ma in "mA"),
    column!(volts_per_m in "V/m"),
    column!(at_ma in "mA"),
    column!(exponent in ""),
    column!(pair_volts in "V"),
    column!(cold_factor in ""),
    column!(price_per_m as money),
    column!(source as text),
    column!(electrode as text),
    column!(measured_on as text),
    column!(readings by readings_cell, readings_of),
];

fn write<T>(entries: &[T], columns: &[Column<T>]) -> String {
    let mut writer = csv::WriterBuilder::new()
        .terminator(csv::Terminator::CRLF)
        .from_writer(Vec::new());
    // Writing to memory does not fail.
    let _ = writer.write_record(columns.iter().map(|column| column.name));
    for entry in entries {
        let _ = writer.write_record(columns.iter().map(|column| (column.get)(entry)));
    }
    writer
        .into_inner()
        .ok()
        .and_then(|bytes| String::from_utf8(bytes).ok())
        .unwrap_or_default()
}

fn read<T: Default>(
    bytes: &[u8],
    columns: &[Column<T>],
    what: &str,
    name: fn(&T) -> &String,
) -> Result<Sheet<T>, String> {
    let text = decoded(bytes)?;
    if text.trim().is_empty() {
        return Err(format!("The file of {what} is empty."));
    }
    let first = text.lines().next().unwrap_or_default();
    let separator = [';', '\t', ',']
        .into_iter()
        .max_by_key(|separator| first.matches(*separator).count())
        .unwrap_or(',');
    let known = || {
        columns
            .iter()
            .map(|column| column.name)
            .collect::<Vec<_>>()
            .join(", ")
    };
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(u8::try_from(separator).unwrap_or(b','))
        .flexible(true)
        .trim(csv::Trim::All)
        .from_reader(text.as_bytes());
    let headers = reader
        .headers()
        .map_err(|error| format!("The file of {what} cannot be read: {error}."))?
        .clone();
    let mut trouble = Trouble::default();
    let mut taken = HashSet::new();
    let chosen: Vec<Option<&Column<T>>> = headers
        .iter()
        .map(|header| {
            let column = columns
                .iter()
                .find(|column| column.name.eq_ignore_ascii_case(header));
            match column {
                None => {
                    let says = format!("Column {} is not known and was left out.", quoted(header));
                    trouble.push(says);
                    None
                }
                Some(column) if !taken.insert(column.name) => {
                    trouble.push(format!(
                        "Column {} is there twice: the first is used.",
                        quoted(header)
                    ));
                    None
                }
                Some(column) => Some(column),
            }
        })
        .collect();
    if !chosen.iter().flatten().any(|column| column.name == "name") {
        return Err(format!(
            "This is not a list of {what}: its first line has no column “name”. The columns are: \
             {}.",
            known()
        ));
    }
    let open = open_quotes(&text, separator, chosen.len());
    if let Some(quote) = open.first().filter(|quote| quote.lines[0] == 1) {
        return Err(format!(
            "The file of {what} cannot be read: {}.",
            not_closed(quote)
        ));
    }
    let mut open = open.into_iter().peekable();
    let mut entries: Vec<T> = Vec::new();
    let mut names: HashSet<String> = HashSet::new();
    let mut lines = Lines::of(&text);
    for record in reader.records() {
        let record = match record {
            Ok(record) => record,
            Err(error) => {
                trouble.push(format!("A line was left out: {error}."));
                continue;
            }
        };
        let line = lines.of_byte(record.position().map_or(0, csv::Position::byte));
        if let Some(quote) = open.next_if(|quote| quote.record <= lines.byte) {
            while open.next_if(|quote| quote.record <= lines.byte).is_some() {}
            let out = match quote.lines {
                [first, _, last] if first == last => format!("Line {first} was"),
                [first, _, last] => format!("Lines {first} to {last} were"),
            };
            trouble.push(format!("{out} left out: {}.", not_closed(&quote)));
            continue;
        }
        if record.iter().all(str::is_empty) {
            continue;
        }
        if record.len() > chosen.len() {
            trouble.push(format!(
                "Line {line} was left out: it has {} cells where the first line names {} columns. \
                 A text with a separator in it must stand in quotes.",
                record.len(),
                chosen.len()
            ));
            continue;
        }
        let mut entry = T::default();
        let mut fine = true;
        for (column, text) in chosen.iter().zip(&record) {
            let Some(column) = column else { continue };
            if text.is_empty() {
                continue;
            }
            if let Err(error) = (column.set)(&mut entry, &Cell { text }) {
                trouble.push(format!(
                    "Line {line} was left out: column {}, {error}.",
                    column.name
                ));
                fine = false;
                break;
            }
        }
        if !fine {
            continue;
        }
        let characters = name(&entry).chars().count();
        if characters == 0 {
            trouble.push(format!("Line {line} was left out: it has no name."));
        } else if characters > MOST_NAME_CHARACTERS {
            trouble.push(format!(
                "Line {line} was left out: its name has {characters} characters, more than \
                 {MOST_NAME_CHARACTERS}; a quote may be missing."
            ));
        } else if !names.insert(name(&entry).clone()) {
            trouble.push(format!(
                "Line {line} was left out: the name {} stands further up already.",
                quoted(name(&entry))
            ));
        } else {
            entries.push(entry);
        }
    }
    let trouble = trouble.told();
    if entries.is_empty() && trouble.is_empty() {
        return Err(format!(
            "The file of {what} has a first line but nothing under it."
        ));
    }
    Ok(Sheet { entries, trouble })
}

/// A name is to be read in a list; a longer one is a cell that was never closed.
const MOST_NAME_CHARACTERS: usize = 200;

/// Sentences of what could not be read: the first of them, and how many more there were. A file of
/// another kind would give one for each of its lines.
#[derive(Default)]
struct Trouble {
    told: Vec<String>,
    more: usize,
}

impl Trouble {
    const MOST_TOLD: usize = 100;

    fn push(&mut self, sentence: String) {
        if self.told.len() < Self::MOST_TOLD {
            self.told.push(sentence);
        } else {
            self.more += 1;
        }
    }

    fn told(mut self) -> Vec<String> {
        if self.more > 0 {
            self.told
                .push(format!("And {} more like these.", self.more));
        }
        self.told
    }
}

/// Numbers of lines as an editor counts them: the csv reader passes over empty lines, and a cell in
/// quotes may go on over several.
struct Lines<'t> {
    text: &'t [u8],
    byte: usize,
    line: usize,
}

impl<'t> Lines<'t> {
    fn of(text: &'t str) -> Self {
        Self {
            text: text.as_bytes(),
            byte: 0,
            line: 1,
        }
    }

    /// The line of the first character at or after a byte that does not end a line. Bytes must be
    /// asked for in order.
    fn of_byte(&mut self, byte: u64) -> usize {
        let byte = usize::try_from(byte).unwrap_or(usize::MAX);
        while let Some(here) = self.text.get(self.byte)
            && (self.byte < byte || matches!(here, b'\r' | b'\n'))
        {
            self.line += usize::from(*here == b'\n');
            self.byte += 1;
        }
        self.line
    }
}

/// Text of a file of fair size.
fn decoded(bytes: &[u8]) -> Result<String, String> {
    const MOST_BYTES: usize = 4_000_000;
    if bytes.len() > MOST_BYTES {
        return Err(format!(
            "The file is larger than {} MB.",
            MOST_BYTES / 1_000_000
        ));
    }
    super::text_of(bytes)
}

/// A quote that opens a cell and takes whole lines into it, because it is not closed where the cell
/// ends.
struct OpenQuote {
    /// Byte the record begins at.
    record: usize,
    /// Line the record begins in, line the quote opens in and line its cell ends in.
    lines: [usize; 3],
}

fn not_closed(quote: &OpenQuote) -> String {
    format!(
        "the quote that opens in line {} is not closed where its cell ends; close it or take it \
         away, and read the file again",
        quote.lines[1]
    )
}

/// Finds the cells of a file that swallow others: never closed, closed only by a quote of a later
/// line, or with a line inside that has all the separators of a line of `columns` columns.
///
/// Records and cells are told apart as the csv reader does.
fn open_quotes(text: &str, separator: char, columns: usize) -> Vec<OpenQuote> {
    let whole_line = columns.saturating_sub(1).max(1);
    let ends_line = |c: char| matches!(c, '\r' | '\n');
    let mut found = Vec::new();
    let mut line = 1;
    let (mut record, mut record_line) = (0, 1);
    let (mut at_record, mut at_cell) = (true, true);
    let mut chars = text.char_indices().peekable();
    while let Some((at, c)) = chars.next() {
        if ends_line(c) {
            line += usize::from(c == '\n');
            (at_record, at_cell) = (true, true);
            continue;
        }
        if at_record {
            (record, record_line, at_record) = (at, line, false);
        }
        if c != '"' || !at_cell {
            at_cell = c == separator;
            continue;
        }
        at_cell = false;
        let opened = line;
        let (mut separators, mut swallows, mut closed) = (0, false, false);
        while let Some((_, c)) = chars.next() {
            if c == '"' {
                if chars.next_if(|&(_, next)| next == '"').is_none() {
                    closed = true;
                    break;
                }
            } else if c == separator {
                separators += 1;
            } else if ends_line(c) {
                line += usize::from(c == '\n');
                swallows |= separators >= whole_line;
                separators = 0;
            }
        }
        swallows |= separators >= whole_line && line > opened;
        let follows = chars.peek().map(|&(_, next)| next);
        let cut_short =
            line > opened && follows.is_some_and(|next| next != separator && !next.is_whitespace());
        if !closed || swallows || cut_short {
            // After the last line end there is no further line.
            let past_end = !closed && line > opened && text.ends_with(ends_line);
            found.push(OpenQuote {
                record,
                lines: [record_line, opened, line - usize::from(past_end)],
            });
        }
    }
    found
}
