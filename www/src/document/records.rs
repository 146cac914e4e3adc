//! The document as named records: `job`, `book`, `state`, and `step-<number>` for each step.

use std::collections::HashMap;

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
    write("job", job::write(job))
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
        Change::Job(both) => (Some((**both).clone()), None),
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
                .and_then(|text| read_step(text))
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
        Some(Ok(job)) => found.job = Some(job),
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

fn read_step(text: &str) -> Option<Step> {
    let record: StepRecord = serde_json::from_str(text).ok()?;
    let change = match (record.job, record.book) {
        (Some(both), None) => Change::Job(Box::new(both)),
        (None, Some(both)) => Change::Book(Box::new(both)),
        _ => return None,
    };
    Some(Step {
        says: record.says,
        change,
    })
}
