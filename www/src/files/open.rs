//! Taking a file from the browser and putting what it holds on the desk.

use leptos::prelude::*;
use tubewright::Job;
use tubewright::drawing::Artwork;
use tubewright::job::{ArtworkFile, ArtworkLines, ArtworkRow, FontFile, OutlineRow, Row};
use wasm_bindgen::JsCast;
use wasm_bindgen_futures::JsFuture;

use super::read::{MOST_FILES, Opened, merge, read};
use crate::desk::{Desk, Where};
use crate::places::{enter_last_row, usual_height, usual_tube};

/// The file of an input element was chosen.
pub fn choose(desk: Desk, event: &web_sys::Event) {
    let Some(input) = event
        .target()
        .and_then(|to| to.dyn_into::<web_sys::HtmlInputElement>().ok())
    else {
        return;
    };
    if let Some(file) = input.files().and_then(|files| files.get(0)) {
        take(desk, file);
    }
    // So that choosing the same file again is heard too.
    input.set_value("");
}

/// Files were dropped on the page; the first is opened.
pub fn dropped(desk: Desk, event: &web_sys::DragEvent) {
    event.prevent_default();
    let files = event.data_transfer().and_then(|carried| carried.files());
    if let Some(file) = files.and_then(|files| files.get(0)) {
        take(desk, file);
    }
}

fn take(desk: Desk, file: web_sys::File) {
    let name = file.name();
    leptos::task::spawn_local(async move {
        match JsFuture::from(file.array_buffer()).await {
            Ok(buffer) => {
                let bytes = js_sys::Uint8Array::new(&buffer).to_vec();
                match read(&name, &bytes) {
                    Ok(opened) => put(desk, opened),
                    Err(why) => desk.trouble(vec![why]),
                }
            }
            Err(_) => desk.trouble(vec![format!(
                "{} was not opened: the browser could not read it.",
                tubewright::measure::quoted(&name)
            )]),
        }
    });
}

/// Puts what a file held on the desk, as one step that can be undone.
pub fn put(desk: Desk, opened: Opened) {
    desk.settle();
    match opened {
        Opened::Job(job) => {
            let says = format!(
                "Opened the job “{}”. Undo brings the one before back.",
                job.name
            );
            desk.edit_job("open", "Open a job", |open| *open = *job);
            desk.piece.set(None);
            desk.circuit.set(0);
            desk.tell(says);
        }
        Opened::Book(book) => {
            let says = format!(
                "Opened the shop book “{}”: {} supplies, {} tube types. Undo brings the one before \
                 back.",
                book.name,
                book.supplies.len(),
                book.tubes.len()
            );
            desk.edit_book("open", "Open a shop book", |open| *open = *book);
            desk.place.set(Where::ShopBook);
            desk.tell(says);
        }
        Opened::Supplies(entries, trouble) => {
            let mut counted = (0, 0);
            desk.edit_book("open", "Take in supplies", |book| {
                counted = merge(&mut book.supplies, entries, |entry| &entry.name);
            });
            told(desk, "supplies", counted, trouble);
        }
        Opened::Artwork(file) => artwork(desk, file),
        Opened::Font(file) => font(desk, file),
        Opened::Tubes(entries, trouble) => {
            let mut counted = (0, 0);
            desk.edit_book("open", "Take in tube types", |book| {
                counted = merge(&mut book.tubes, entries, |entry| &entry.name);
            });
            told(desk, "tube types", counted, trouble);
        }
    }
    desk.settle();
    desk.turn();
}

/// Puts an artwork into the job, with a row of its own. Lines of one kind get the usual tube; where
/// there are more kinds a person says what each is.
fn artwork(desk: Desk, mut file: ArtworkFile) {
    if !has_room(desk, &file.name, file.text.len()) {
        return;
    }
    let wanted = file.name.clone();
    file.name = desk.job.with_untracked(|job| {
        let taken = |name: &str| job.artwork.iter().any(|file| file.name == name);
        free_name(&wanted, taken)
    });
    let tube = usual_tube(desk);
    let groups = tubewright::takeoff::artwork(&file)
        .as_ref()
        .as_ref()
        .map(Artwork::groups)
        .unwrap_or_default();
    let lines = match groups.as_slice() {
        [only] => vec![ArtworkLines {
            colour: only.colour.clone(),
            layer: only.layer.clone(),
            tube,
            ..ArtworkLines::default()
        }],
        _ => Vec::new(),
    };
    let row = Row::Artwork(ArtworkRow {
        label: wanted
            .rsplit_once('.')
            .map_or(wanted.as_str(), |(name, _)| name)
            .to_owned(),
        file: file.name.clone(),
        width: String::new(),
        lines,
        count: 1,
        ..ArtworkRow::default()
    });
    let kinds = groups.len();
    desk.edit_job("open", "Take in artwork", |job| {
        job.artwork.push(file);
        job.rows.push(row);
    });
    desk.place.set(Where::Sign);
    desk.tell(if kinds > 1 {
        format!("“{wanted}” is in the sign, with {kinds} kinds of lines: say below what each is made of.")
    } else {
        format!("“{wanted}” is in the sign.")
    });
}

/// Puts a font into the job, with a row of letters in it. A font that is there already is not put
/// in twice.
fn font(desk: Desk, mut file: FontFile) {
    let known = desk.job.with_untracked(|job| {
        let same = job.fonts.iter().find(|known| known.data == file.data);
        same.map(|known| known.name.clone())
    });
    let new = known.is_none();
    if let Some(name) = known {
        file.name = name;
    } else if has_room(desk, &file.name, file.data.len()) {
        file.name = desk.job.with_untracked(|job| {
            let taken = |name: &str| job.fonts.iter().any(|file| file.name == name);
            free_name(&file.name, taken)
        });
    } else {
        return;
    }
    let row = Row::Outline(OutlineRow {
        height: usual_height(desk),
        font: file.name.clone(),
        tube: usual_tube(desk),
        ..OutlineRow::default()
    });
    let says = format!(
        "The font “{}” is in this job: type what its letters say.",
        file.name
    );
    desk.edit_job("open", "Letters from a font file", |job| {
        if new {
            job.fonts.push(file);
        }
        job.rows.push(row);
    });
    desk.place.set(Where::Sign);
    enter_last_row(desk);
    desk.tell(says);
}

/// Whether a job has room for a file; says so where not, because a job file that large could not be
/// opened again.
fn has_room(desk: Desk, name: &str, size: usize) -> bool {
    let text = |job: &Job| {
        let artwork = job.artwork.iter().map(|file| file.text.len());
        let fonts = job.fonts.iter().map(|file| file.data.len());
        artwork.chain(fonts).sum::<usize>()
    };
    let room = MOST_FILES.saturating_sub(desk.job.with_untracked(text));
    if size > room {
        desk.trouble(vec![format!(
            "{} was not put into this job: its artwork and fonts may be {} MB together, there is room \
             for {} MB, and this one takes {} MB. Remove a row that has a font or artwork of its own.",
            tubewright::measure::quoted(name),
            MOST_FILES / 1_000_000,
            room / 1_000_000,
            size.div_ceil(1_000_000),
        )]);
    }
    size <= room
}

/// The name, with a number before it where it is taken.
fn free_name(wanted: &str, taken: impl Fn(&str) -> bool) -> String {
    let mut name = wanted.to_owned();
    let mut number = 2;
    while taken(&name) {
        name = format!("{number} {wanted}");
        number += 1;
    }
    name
}

fn told(desk: Desk, what: &str, (replaced, added): (usize, usize), mut trouble: Vec<String>) {
    desk.place.set(Where::ShopBook);
    let says = format!(
        "Into the shop book, {what}: {added} added, {replaced} replaced, none removed. Undo takes it \
         back."
    );
    if trouble.is_empty() {
        desk.tell(says);
    } else {
        trouble.insert(0, says);
        desk.trouble(trouble);
    }
}
