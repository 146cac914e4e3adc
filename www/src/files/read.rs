//! What a file holds.

use tubewright::book::{SupplyEntry, TubeEntry, read_supplies, read_tubes, text_of};
use tubewright::drawing::{self, Artwork, outline};
use tubewright::job::{ArtworkFile, FontFile};
use tubewright::measure::quoted;
use tubewright::{Book, Job, book, job};

/// A file larger than this is none of ours; reading it would only stall the page.
const MOST_BYTES: usize = 20_000_000;
/// A job file may be larger: it has the job's artwork and fonts in it.
const MOST_JOB_BYTES: usize = 100_000_000;
/// Most text of artwork and fonts that a job takes in. Written to a file it becomes longer by the
/// marks before quotes and line ends, which is less than as much again.
pub(super) const MOST_FILES: usize = 45_000_000;

/// What a file held. The sentences say what of it was left out.
#[derive(Debug, Clone, PartialEq)]
pub enum Opened {
    /// A job.
    Job(Box<Job>),
    /// A whole shop book.
    Book(Box<Book>),
    /// Supplies, to be put into the open book.
    Supplies(Vec<SupplyEntry>, Vec<String>),
    /// Tube types, likewise.
    Tubes(Vec<TubeEntry>, Vec<String>),
    /// Artwork, to be put into the open job.
    Artwork(ArtworkFile),
    /// A font, likewise.
    Font(FontFile),
}

/// Reads a file by what is in it; its name serves only the sentences.
///
/// # Errors
/// A sentence that names the file, says what is wrong with it and what would be right.
pub fn read(name: &str, bytes: &[u8]) -> Result<Opened, String> {
    let file = quoted(name);
    if is_font(bytes) {
        // It says itself how large a font may be.
        let read = outline::Font::read(bytes);
        return match read {
            Ok(_) => Ok(Opened::Font(FontFile::new(name, bytes))),
            Err(why) => Err(format!("{file} was not opened. {why}")),
        };
    }
    let json = bytes.trim_ascii_start().starts_with(b"{");
    if bytes.len() > if json { MOST_JOB_BYTES } else { MOST_BYTES } {
        return Err(format!(
            "{file} was not opened: it is larger than any {}.",
            if json {
                "job or shop book (100 MB)"
            } else {
                "list or artwork (20 MB)"
            }
        ));
    }
    let start = bytes
        .strip_prefix(b"\xef\xbb\xbf")
        .unwrap_or(bytes)
        .trim_ascii_start();
    if start.is_empty() {
        return Err(format!("{file} was not opened: it is empty."));
    }
    let told = |why: String| format!("{file} was not opened. {why}");
    if start.starts_with(b"{") {
        let text = core::str::from_utf8(bytes)
            .map_err(|error| told(format!("It is not UTF-8 text: {error}.")))?;
        return if says_book(text) {
            book::read(text)
                .map(|book| Opened::Book(Box::new(book)))
                .map_err(told)
        } else {
            job::read(text)
                .map(|job| Opened::Job(Box::new(job)))
                .map_err(told)
        };
    }
    if let (Err(why), [0xff, 0xfe, ..] | [0xfe, 0xff, ..]) = (text_of(bytes), bytes) {
        return Err(told(why));
    }
    if start.starts_with(b"<") {
        let text = core::str::from_utf8(bytes)
            .map_err(|error| told(format!("It is not UTF-8 text: {error}.")))?;
        return artwork(name, text, drawing::svg::read(text)).map_err(told);
    }
    let drawn = std::path::Path::new(name)
        .extension()
        .is_some_and(|ending| ending.eq_ignore_ascii_case("dxf"));
    if drawn || start.starts_with(b"0\n") || start.starts_with(b"0\r\n") {
        let read = drawing::dxf::read(bytes);
        // Older files are not UTF-8; the names of their layers are then read as Latin-1.
        let text = core::str::from_utf8(bytes).map_or_else(
            |_| bytes.iter().copied().map(char::from).collect(),
            str::to_owned,
        );
        return artwork(name, &text, read).map_err(told);
    }
    let line = start
        .split(|&byte| byte == b'\n')
        .next()
        .unwrap_or_default();
    let names = String::from_utf8_lossy(line).to_ascii_lowercase();
    let list = |trouble: Vec<String>| {
        trouble
            .into_iter()
            .map(|why| format!("{file}: {why}"))
            .collect()
    };
    if names.contains("no_load_volts") || names.contains("short_circuit_ma") {
        let sheet = read_supplies(bytes).map_err(told)?;
        some(Opened::Supplies(sheet.entries, list(sheet.trouble)), &file)
    } else if names.contains("outer_mm") || names.contains("gas") {
        let sheet = read_tubes(bytes).map_err(told)?;
        some(Opened::Tubes(sheet.entries, list(sheet.trouble)), &file)
    } else {
        Err(told(
            "It is neither a job or shop book of this program (JSON), nor a list of supplies or \
             tube types (CSV with column names such as name, no_load_volts or outer_mm in its \
             first line), nor artwork (SVG or DXF), nor a font (TTF or OTF)."
                .to_owned(),
        ))
    }
}

/// Whether a file begins as a font does, or as one packed for web pages, which gets its sentence.
fn is_font(bytes: &[u8]) -> bool {
    [b"\0\x01\0\0", b"OTTO", b"true", b"ttcf", b"wOFF", b"wOF2"]
        .iter()
        .any(|mark| bytes.starts_with(*mark))
}

/// Artwork that was read well enough to be of use.
fn artwork(name: &str, text: &str, read: Result<Artwork, String>) -> Result<Opened, String> {
    if read?.strokes.is_empty() {
        return Err("It has no lines that can be measured.".to_owned());
    }
    Ok(Opened::Artwork(ArtworkFile {
        name: name.to_owned(),
        text: text.into(),
    }))
}

/// Whether a JSON text says it is a book; anything unclear is left for the job reader to explain.
fn says_book(text: &str) -> bool {
    #[derive(serde::Deserialize)]
    struct Head {
        tubewright: String,
    }
    serde_json::from_str::<Head>(text.trim_start_matches('\u{feff}'))
        .is_ok_and(|head| head.tubewright == book::KIND)
}

fn some(opened: Opened, file: &str) -> Result<Opened, String> {
    let (Opened::Supplies(_, trouble) | Opened::Tubes(_, trouble)) = &opened else {
        return Ok(opened);
    };
    let none = match &opened {
        Opened::Supplies(entries, _) => entries.is_empty(),
        Opened::Tubes(entries, _) => entries.is_empty(),
        _ => false,
    };
    if none {
        let why = trouble
            .first()
            .map_or("It has no lines after the first.", String::as_str);
        return Err(format!("Nothing was taken from {file}. {why}"));
    }
    Ok(opened)
}

/// Puts entries into a list: same name replaces, a new name is added, nothing is removed. Gives
/// how many were replaced and added.
pub fn merge<T>(list: &mut Vec<T>, entries: Vec<T>, name: fn(&T) -> &str) -> (usize, usize) {
    let (mut replaced, mut added) = (0, 0);
    for entry in entries {
        if let Some(old) = list.iter_mut().find(|old| name(old) == name(&entry)) {
            *old = entry;
            replaced += 1;
        } else {
            list.push(entry);
            added += 1;
        }
    }
    (replaced, added)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn why(name: &str, bytes: &[u8]) -> String {
        read(name, bytes).expect_err("this file must be refused")
    }

    #[test]
    fn files_are_known_by_what_is_in_them() {
        let job = job::write(&Job::default());
        assert!(
            matches!(read("a.txt", job.as_bytes()), Ok(Opened::Job(_))),
            "a job"
        );
        let book = book::write(&Book::default());
        assert!(
            matches!(read("b", book.as_bytes()), Ok(Opened::Book(_))),
            "a book"
        );
        let marked = [b"\xef\xbb\xbf".as_slice(), book.as_bytes()].concat();
        assert!(
            matches!(read("b", &marked), Ok(Opened::Book(_))),
            "a book with a mark before it"
        );
        let list = b"name;no_load_volts;short_circuit_ma\nA;6000;30\n";
        assert!(
            matches!(read("c", list), Ok(Opened::Supplies(entries, _)) if entries.len() == 1),
            "a list"
        );
        let list = b"name,gas,outer_mm\n12 neon,neon,12\n";
        assert!(
            matches!(read("d", list), Ok(Opened::Tubes(entries, _)) if entries.len() == 1),
            "tubes"
        );
    }

    #[test]
    fn a_font_is_known_by_what_is_in_it() {
        let letters = include_bytes!("../../../tests/reference/outlines/letters.ttf");
        let compact = include_bytes!("../../../tests/reference/outlines/compact.otf");
        for bytes in [letters.as_slice(), compact.as_slice()] {
            let Ok(Opened::Font(file)) = read("anything", bytes) else {
                panic!("a font");
            };
            assert_eq!(file.name, "anything");
            assert_eq!(file.bytes().as_deref(), Some(bytes), "whole");
        }
    }

    #[test]
    fn what_cannot_be_read_gets_a_sentence() {
        assert!(why("x.json", b"").contains("empty"), "nothing in it");
        assert!(
            why("x.json", b"{\"tubewright\": \"job\", ").contains("x.json"),
            "names the file"
        );
        assert!(
            why("x.json", b"{\"tubewright\": \"job\", ").contains("line 1"),
            "and the place"
        );
        assert!(
            why("photo.jpg", &[0xff, 0xd8, 0xff, 0xe0]).contains("neither"),
            "a picture"
        );
        assert!(
            why("x.csv", b"name,no_load_volts\n").contains("nothing under it"),
            "a list of nothing"
        );
        assert!(
            why("x.csv", b"\xff\xfen\0a\0m\0e\0").contains("UTF-16"),
            "a spreadsheet's other kind of text"
        );
        let newer = "{\"tubewright\":\"book\",\"version\":9,\"name\":\"x\"}";
        assert!(
            why("x", newer.as_bytes()).contains("version 9"),
            "a newer book"
        );
        assert!(
            why("x", &vec![b'a'; MOST_BYTES + 1]).contains("20 MB"),
            "too large"
        );
        let mut large = b"OTTO".to_vec();
        large.resize(outline::MOST_BYTES + 1, 0);
        assert_eq!(
            why("x.otf", &large),
            "“x.otf” was not opened. The font file must be at most 20 MB, but has 21 MB."
        );
        assert!(
            why("x.ttf", b"\0\x01\0\0").contains("not a font"),
            "cut off"
        );
        assert!(
            why("x.woff2", b"wOF2").contains("packed for web pages"),
            "packed"
        );
    }

    #[test]
    fn a_list_adds_and_replaces_and_removes_nothing() {
        let mut list = vec![("a", 1), ("b", 2)];
        assert_eq!(
            merge(&mut list, vec![("b", 3), ("c", 4)], |entry| entry.0),
            (1, 1),
            "counted"
        );
        assert_eq!(list, [("a", 1), ("b", 3), ("c", 4)], "a is still there");
    }
}
