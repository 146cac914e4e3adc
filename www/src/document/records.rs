//! The document as named records: `job`, `book`, `state`, `step-<number>` for each step, and
//! `file-<mark>` for each artwork and font file, so that a large one is stored once and not with
//! every step that holds it.

use std::cell::RefCell;
use std::collections::{HashMap, HashSet};
use std::sync::Arc;

use serde::{Deserialize, Serialize};
use tubewright::{Book, Job, book, job};

use super::history::{Change, Step};

/// Records by name, as a store gives them back.
pub type Kept = HashMap<String, String>;

/// A record to store under a name, or to remove.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Write {
    /// Name of the record.
    pub name: String,
    /// Its text; None removes it.
    pub value: Option<String>,
}

#[derive(Serialize, Deserialize)]
struct State {
    first: u64,
    done: usize,
    steps: usize,
}

#[derive(Serialize, Deserialize)]
struct StepRecord {
    says: String,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    job: Option<(Job, Job)>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    book: Option<(Book, Book)>,
}

fn write(name: impl Into<String>, value: String) -> Write {
    Write {
        name: name.into(),
        value: Some(value),
    }
}

pub(super) fn job(job: &Job) -> Write {
    write("job", job::write(&light(job)))
}

/// What stands in a record in place of a file's text: no drawing begins so, and no base64 does.
const ELSEWHERE: &str = "in record ";
const FILE: &str = "file-";
/// Marks of texts remembered: the files of a large sign.
const MARKS: usize = 16;

thread_local! {
    // A font may be some megabytes, and is marked several times at every keystroke.
    static MARKED: RefCell<Vec<(Arc<str>, String)>> = const { RefCell::new(Vec::new()) };
}

/// Name of the record of a text: FNV-1a over it, and its length. Two texts of one name would have
/// to be made on purpose, by the person whose device it is.
fn file_name(text: &Arc<str>) -> String {
    MARKED.with_borrow_mut(|known| {
        if let Some((_, name)) = known.iter().find(|(known, _)| Arc::ptr_eq(known, text)) {
            return name.clone();
        }
        let mark = text.bytes().fold(0xcbf2_9ce4_8422_2325_u64, |mark, byte| {
            (mark ^ u64::from(byte)).wrapping_mul(0x0100_0000_01b3)
        });
        let name = format!("{FILE}{mark:016x}-{}", text.len());
        known.insert(0, (text.clone(), name.clone()));
        known.truncate(MARKS);
        name
    })
}

/// The texts of a job's files.
fn texts(job: &Job) -> impl Iterator<Item = &Arc<str>> {
    let artwork = job.artwork.iter().map(|file| &file.text);
    artwork.chain(job.fonts.iter().map(|file| &file.data))
}

fn texts_mut(job: &mut Job) -> impl Iterator<Item = &mut Arc<str>> {
    let artwork = job.artwork.iter_mut().map(|file| &mut file.text);
    artwork.chain(job.fonts.iter_mut().map(|file| &mut file.data))
}

/// Names of the records of a job's files.
pub(super) fn file_names(job: &Job) -> impl Iterator<Item = String> {
    texts(job).map(file_name)
}

/// The records of a job's files that are not `filed` yet; they are then.
pub(super) fn files(job: &Job, filed: &mut HashSet<String>) -> Vec<Write> {
    texts(job)
        .filter_map(|text| {
            let name = file_name(text);
            filed
                .insert(name.clone())
                .then(|| write(name, text.to_string()))
        })
        .collect()
}

/// Whether a record is that of a file.
pub(super) fn is_file(name: &str) -> bool {
    name.starts_with(FILE)
}

/// The job with the texts of its files elsewhere.
fn light(job: &Job) -> Job {
    let mut light = job.clone();
    for text in texts_mut(&mut light) {
        *text = format!("{ELSEWHERE}{}", file_name(text)).into();
    }
    light
}

/// Texts of files by the names of their records, each in memory once.
#[derive(Default)]
struct Shelf(HashMap<String, Arc<str>>);

impl Shelf {
    /// The job with the texts of its files again; a text that is lost stays the name of its record,
    /// which then is a file that cannot be read.
    fn whole(&mut self, mut job: Job, kept: &Kept) -> Job {
        for text in texts_mut(&mut job) {
            let Some(name) = text.strip_prefix(ELSEWHERE) else {
                continue;
            };
            if let Some(known) = self.0.get(name) {
                *text = known.clone();
            } else if let Some(found) = kept.get(name) {
                let found: Arc<str> = found.as_str().into();
                self.0.insert(name.to_owned(), found.clone());
                *text = found;
            }
        }
        job
    }
}

pub(super) fn book(book: &Book) -> Write {
    write("book", book::write(book))
}

pub(super) fn state(first: u64, done: usize, steps: usize) -> Write {
    write(
        "state",
        serde_json::to_string(&State { first, done, steps }).unwrap_or_default(),
    )
}

pub(super) fn step(number: u64, step: &Step) -> Write {
    let (job, book) = match &step.change {
        Change::Job(both) => (Some((light(&both.0), light(&both.1))), None),
        Change::Book(both) => (None, Some((**both).clone())),
    };
    let record = StepRecord {
        says: step.says.clone(),
        job,
        book,
    };
    write(
        step_name(number),
        serde_json::to_string(&record).unwrap_or_default(),
    )
}

pub(super) fn no_step(number: u64) -> Write {
    Write {
        name: step_name(number),
        value: None,
    }
}

fn step_name(number: u64) -> String {
    format!("step-{number}")
}

/// What could be read.
#[derive(Default)]
pub(super) struct Found {
    pub(super) job: Option<Job>,
    pub(super) book: Option<Book>,
    pub(super) steps: Vec<Step>,
    pub(super) done: usize,
    pub(super) first: u64,
    /// Documents that are there and cannot be read.
    pub(super) unreadable: Vec<Write>,
}

/// Name under which a document that cannot be read is set aside.
pub(super) const ASIDE: [&str; 2] = ["unreadable-job", "unreadable-book"];

/// Reads records back; a sentence for each that cannot be read.
pub(super) fn read(kept: &Kept) -> (Found, Vec<String>) {
    let (mut found, mut trouble) = (Found::default(), Vec::new());
    let mut shelf = Shelf::default();
    if let Some(state) = kept
        .get("state")
        .and_then(|text| serde_json::from_str::<State>(text).ok())
    {
        found.first = state.first;
        found.done = state.done;
        // Steps stand on each other: a gap ends the history that can be walked.
        for number in (state.first..).take(state.steps) {
            let Some(step) = kept
                .get(&step_name(number))
                .and_then(|text| read_step(text, kept, &mut shelf))
            else {
                trouble.push(
                    "A part of the undo history could not be read and was let go.".to_owned(),
                );
                (found.steps, found.done) = (Vec::new(), 0);
                found.first = state.first + u64::try_from(state.steps).unwrap_or_default();
                break;
            };
            found.steps.push(step);
        }
    }
    match kept.get("job").map(|text| job::read(text)) {
        Some(Ok(job)) => found.job = Some(shelf.whole(job, kept)),
        Some(Err(why)) => {
            let done = found.done.min(found.steps.len());
            found.job = found.steps[..done]
                .iter()
                .rev()
                .find_map(|step| match &step.change {
                    Change::Job(both) => Some(both.1.clone()),
                    Change::Book(_) => None,
                });
            trouble.push(format!(
                "The job kept on this device could not be read. {why}"
            ));
            found
                .unreadable
                .extend(kept.get("job").map(|text| write(ASIDE[0], text.clone())));
        }
        None => {}
    }
    match kept.get("book").map(|text| book::read(text)) {
        Some(Ok(book)) => found.book = Some(book),
        Some(Err(why)) => {
            let done = found.done.min(found.steps.len());
            found.book = found.steps[..done]
                .iter()
                .rev()
                .find_map(|step| match &step.change {
                    Change::Book(both) => Some(both.1.clone()),
                    Change::Job(_) => None,
                });
            trouble.push(format!(
                "The shop book kept on this device could not be read. {why}"
            ));
            found
                .unreadable
                .extend(kept.get("book").map(|text| write(ASIDE[1], text.clone())));
        }
        None => {}
    }
    (found, trouble)
}

fn read_step(text: &str, kept: &Kept, shelf: &mut Shelf) -> Option<Step> {
    let record: StepRecord = serde_json::from_str(text).ok()?;
    let change = match (record.job, record.book) {
        (Some((before, after)), None) => Change::Job(Box::new((
            shelf.whole(before, kept),
            shelf.whole(after, kept),
        ))),
        (None, Some(both)) => Change::Book(Box::new(both)),
        _ => return None,
    };
    Some(Step {
        says: record.says,
        change,
    })
}
