//! Steps, undo and redo.

use std::collections::{HashSet, VecDeque};

use tubewright::{Book, Job};

use super::records::{self, Kept, Write};

/// Steps that can be undone; older ones are let go.
pub(super) const MOST_STEPS: usize = 200;

/// One edit, forwards and backwards.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Step {
    pub(super) says: String,
    pub(super) change: Change,
}

/// What an edit changed, before and after.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Change {
    /// The job.
    Job(Box<(Job, Job)>),
    /// The book.
    Book(Box<(Book, Book)>),
}

/// The open job and book.
#[derive(Debug, Clone)]
pub struct Document {
    job: Job,
    book: Book,
    steps: VecDeque<Step>,
    /// Steps that are done; the rest were undone.
    done: usize,
    /// Number of the oldest step since the beginning, so that each record has a name of its own.
    first: u64,
    /// The field being edited: edits of the same field go into one step until it is left.
    field: Option<String>,
    writes: Vec<Write>,
    /// Documents that were kept and cannot be read, as they are: never written over.
    aside: Vec<Write>,
    /// Names of the records of files that are stored already.
    filed: HashSet<String>,
}

impl Document {
    /// A document with no history.
    pub fn new(job: Job, book: Book) -> Self {
        Self {
            job,
            book,
            steps: VecDeque::new(),
            done: 0,
            first: 0,
            field: None,
            writes: Vec::new(),
            aside: Vec::new(),
            filed: HashSet::new(),
        }
    }

    /// The document as it was kept. Records that cannot be read are told of in the sentences; what
    /// can be read is used, the rest comes from `job` and `book`.
    pub fn restore(kept: &Kept, job: Job, book: Book) -> (Self, Vec<String>) {
        let (found, trouble) = records::read(kept);
        let mut document = Self::new(found.job.unwrap_or(job), found.book.unwrap_or(book));
        document.steps = found.steps.into();
        document.done = found.done.min(document.steps.len());
        document.first = found.first;
        document.aside = found.unreadable;
        for name in records::ASIDE {
            let known = document.aside.iter().any(|write| write.name == name);
            if let Some(text) = kept.get(name).filter(|_| !known) {
                document.aside.push(Write {
                    name: name.to_owned(),
                    value: Some(text.clone()),
                });
            }
        }
        document.writes.clone_from(&document.aside);
        // Files that neither the job nor a step holds any more are let go.
        let held: HashSet<String> = document.jobs().flat_map(records::file_names).collect();
        for name in kept.keys().filter(|name| records::is_file(name)) {
            if held.contains(name) {
                document.filed.insert(name.clone());
            } else {
                document.writes.push(Write {
                    name: name.clone(),
                    value: None,
                });
            }
        }
        (document, trouble)
    }

    /// The open job.
    pub const fn job(&self) -> &Job {
        &self.job
    }

    /// The open book.
    pub const fn book(&self) -> &Book {
        &self.book
    }

    /// What undo would take back.
    pub fn undoes(&self) -> Option<&str> {
        let last = self.done.checked_sub(1)?;
        self.steps.get(last).map(|step| step.says.as_str())
    }

    /// What redo would do again.
    pub fn redoes(&self) -> Option<&str> {
        self.steps.get(self.done).map(|step| step.says.as_str())
    }

    /// Changes the job. `field` names what is being edited: changes of the same field in a row
    /// become one step until [`Self::settle`].
    pub fn edit_job(&mut self, field: &str, says: &str, edit: impl FnOnce(&mut Job)) {
        let mut after = self.job.clone();
        edit(&mut after);
        if after == self.job {
            return;
        }
        let before = std::mem::replace(&mut self.job, after.clone());
        let joined = match self.open_step(field) {
            Some(Change::Job(both)) => {
                both.1 = after.clone();
                true
            }
            _ => false,
        };
        if !joined {
            self.push(says, Change::Job(Box::new((before, after))));
        }
        self.field = Some(field.to_owned());
        self.write_last(true);
    }

    /// Changes the book, likewise.
    pub fn edit_book(&mut self, field: &str, says: &str, edit: impl FnOnce(&mut Book)) {
        let mut after = self.book.clone();
        edit(&mut after);
        if after == self.book {
            return;
        }
        let before = std::mem::replace(&mut self.book, after.clone());
        let joined = match self.open_step(field) {
            Some(Change::Book(both)) => {
                both.1 = after.clone();
                true
            }
            _ => false,
        };
        if !joined {
            self.push(says, Change::Book(Box::new((before, after))));
        }
        self.field = Some(field.to_owned());
        self.write_last(false);
    }

    /// The field was left: the next edit is a step of its own.
    pub fn settle(&mut self) {
        self.field = None;
    }

    /// Takes the last step back.
    pub fn undo(&mut self) {
        self.settle();
        let Some(last) = self.done.checked_sub(1) else {
            return;
        };
        let Some(step) = self.steps.get(last) else {
            return;
        };
        match &step.change {
            Change::Job(both) => self.job = both.0.clone(),
            Change::Book(both) => self.book = both.0.clone(),
        }
        let job = matches!(step.change, Change::Job(_));
        self.done = last;
        self.write_state(job);
    }

    /// Does an undone step again.
    pub fn redo(&mut self) {
        self.settle();
        let Some(step) = self.steps.get(self.done) else {
            return;
        };
        match &step.change {
            Change::Job(both) => self.job = both.1.clone(),
            Change::Book(both) => self.book = both.1.clone(),
        }
        let job = matches!(step.change, Change::Job(_));
        self.done += 1;
        self.write_state(job);
    }

    /// What is to be kept since the last call, in order.
    pub fn take_writes(&mut self) -> Vec<Write> {
        std::mem::take(&mut self.writes)
    }

    /// Texts that were kept and cannot be read, by a name for a file.
    pub fn set_aside(&self) -> Vec<(String, String)> {
        self.aside
            .iter()
            .filter_map(|write| Some((write.name.clone(), write.value.clone()?)))
            .collect()
    }

    /// Everything there is to keep: for a store that has nothing yet.
    pub fn all_writes(&self) -> Vec<Write> {
        let mut filed = HashSet::new();
        let mut writes = Vec::new();
        for job in self.jobs() {
            writes.extend(records::files(job, &mut filed));
        }
        writes.extend([records::job(&self.job), records::book(&self.book)]);
        for (number, step) in (self.first..).zip(&self.steps) {
            writes.push(records::step(number, step));
        }
        writes.push(records::state(self.first, self.done, self.steps.len()));
        writes
    }

    /// The job, and those of every step.
    fn jobs(&self) -> impl Iterator<Item = &Job> {
        let changes = self.steps.iter().filter_map(|step| match &step.change {
            Change::Job(both) => Some([&both.0, &both.1]),
            Change::Book(_) => None,
        });
        std::iter::once(&self.job).chain(changes.flatten())
    }

    /// The step an edit of this field goes on with.
    fn open_step(&mut self, field: &str) -> Option<&mut Change> {
        let same = self.field.as_deref() == Some(field);
        let last = self.done.checked_sub(1)?;
        (same && self.done == self.steps.len()).then_some(())?;
        self.steps.get_mut(last).map(|step| &mut step.change)
    }

    fn push(&mut self, says: &str, change: Change) {
        while self.steps.len() > self.done {
            self.steps.pop_back();
            self.writes
                .push(records::no_step(self.number(self.steps.len())));
        }
        self.steps.push_back(Step {
            says: says.to_owned(),
            change,
        });
        if self.steps.len() > MOST_STEPS {
            self.steps.pop_front();
            self.writes.push(records::no_step(self.first));
            self.first += 1;
        }
        self.done = self.steps.len();
    }

    fn write_last(&mut self, job: bool) {
        if job {
            // First the text, then what points at it.
            self.writes
                .extend(records::files(&self.job, &mut self.filed));
        }
        if let Some(step) = self.steps.back() {
            let write = records::step(self.number(self.steps.len() - 1), step);
            self.writes.push(write);
        }
        self.write_state(job);
    }

    fn write_state(&mut self, job: bool) {
        let document = if job {
            records::job(&self.job)
        } else {
            records::book(&self.book)
        };
        let state = records::state(self.first, self.done, self.steps.len());
        self.writes.extend([document, state]);
    }

    fn number(&self, at: usize) -> u64 {
        self.first + u64::try_from(at).unwrap_or(u64::MAX)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use tubewright::job::{ArtworkFile, FontFile};

    fn named(document: &mut Document, name: &str) {
        document.edit_job("name", "Name", |job| name.clone_into(&mut job.name));
    }

    fn fresh() -> Document {
        Document::new(Job::default(), Book::default())
    }

    /// What a store holds after all writes so far.
    fn stored(kept: &mut Kept, document: &mut Document) {
        for write in document.take_writes() {
            match write.value {
                Some(value) => kept.insert(write.name, value),
                None => kept.remove(&write.name),
            };
        }
    }

    #[test]
    fn typing_in_one_field_is_one_step_until_it_is_left() {
        let mut document = fresh();
        named(&mut document, "N");
        named(&mut document, "NO");
        document.settle();
        named(&mut document, "NOVA");
        document.undo();
        assert_eq!(
            document.job().name,
            "NO",
            "the second visit is undone alone"
        );
        document.undo();
        assert_eq!(
            document.job().name,
            "New sign",
            "the first visit is one step"
        );
        assert_eq!(document.undoes(), None, "nothing is left to undo");
        document.redo();
        document.redo();
        assert_eq!(document.job().name, "NOVA", "both steps come back");
    }

    #[test]
    fn an_edit_after_undo_lets_the_undone_go() {
        let mut document = fresh();
        named(&mut document, "A");
        document.settle();
        named(&mut document, "B");
        document.undo();
        named(&mut document, "C");
        assert_eq!(document.redoes(), None, "B is gone");
        document.undo();
        assert_eq!(document.job().name, "A", "C stood on A");
    }

    #[test]
    fn an_edit_that_changes_nothing_is_no_step() {
        let mut document = fresh();
        named(&mut document, "New sign");
        assert_eq!(document.undoes(), None, "the name was that already");
        assert!(document.take_writes().is_empty(), "nothing to keep");
    }

    #[test]
    fn what_was_kept_comes_back_with_its_history() {
        let (mut kept, mut document) = (Kept::new(), fresh());
        for name in ["A", "B", "C"] {
            named(&mut document, name);
            document.settle();
            stored(&mut kept, &mut document);
        }
        document.edit_book("name", "Name of the book", |book| {
            "Bench".clone_into(&mut book.name);
        });
        document.undo();
        document.undo();
        stored(&mut kept, &mut document);
        let (mut back, trouble) = Document::restore(&kept, Job::default(), Book::default());
        assert_eq!(trouble, Vec::<String>::new(), "all of it can be read");
        assert_eq!(back.job().name, "B", "as it stood");
        back.undo();
        assert_eq!(back.job().name, "A", "undo reaches behind the reload");
        for _ in 0..3 {
            back.redo();
        }
        assert_eq!(
            (&*back.job().name, &*back.book().name),
            ("C", "Bench"),
            "and redo before it"
        );
    }

    #[test]
    fn old_steps_are_let_go_and_their_records_too() {
        let (mut kept, mut document) = (Kept::new(), fresh());
        for number in 0..MOST_STEPS + 25 {
            named(&mut document, &number.to_string());
            document.settle();
            stored(&mut kept, &mut document);
        }
        // The steps, the job and the state; the book never changed.
        assert_eq!(
            kept.len(),
            MOST_STEPS + 2,
            "one record for each step that is left"
        );
        let (mut back, _) = Document::restore(&kept, Job::default(), Book::default());
        while back.undoes().is_some() {
            back.undo();
        }
        assert_eq!(back.job().name, "24", "undo ends at the oldest step kept");
    }

    #[test]
    fn a_drawing_is_stored_once_however_many_steps_hold_it() {
        let (mut kept, mut document) = (Kept::new(), fresh());
        let drawing = format!("<svg>{}</svg>", " ".repeat(10_000));
        document.edit_job("open", "Open artwork", |job| {
            job.artwork.push(ArtworkFile {
                name: "a.svg".to_owned(),
                text: drawing.as_str().into(),
            });
        });
        document.settle();
        for name in ["A", "B", "C"] {
            named(&mut document, name);
            document.settle();
            stored(&mut kept, &mut document);
        }
        let bytes: usize = kept.values().map(String::len).sum();
        assert!(
            bytes < 20_000,
            "stored {bytes} bytes for a drawing of {}",
            drawing.len()
        );
        let (mut back, trouble) = Document::restore(&kept, Job::default(), Book::default());
        assert_eq!(trouble, Vec::<String>::new(), "all of it can be read");
        assert_eq!(
            &*back.job().artwork[0].text,
            drawing,
            "the drawing is whole"
        );
        back.undo();
        assert_eq!(&*back.job().artwork[0].text, drawing, "and in every step");

        // Without any step or job that holds it, its record goes at the next start.
        let mut bare = kept.clone();
        bare.retain(|name, _| !name.starts_with("step-") && name != "job" && name != "state");
        let (mut after, _) = Document::restore(&bare, Job::default(), Book::default());
        stored(&mut bare, &mut after);
        assert!(
            !bare.keys().any(|name| name.starts_with("file-")),
            "{:?}",
            bare.keys()
        );
    }

    #[test]
    fn a_font_is_stored_and_held_once_however_many_steps_hold_it() {
        let (mut kept, mut document) = (Kept::new(), fresh());
        let bytes: Vec<u8> = (0..=255).cycle().take(30_000).collect();
        document.edit_job("open", "Letters from a font file", |job| {
            job.fonts.push(FontFile::new("a.ttf", &bytes));
        });
        document.settle();
        for name in ["A", "B", "C"] {
            named(&mut document, name);
            document.settle();
            stored(&mut kept, &mut document);
        }
        let stored_bytes: usize = kept.values().map(String::len).sum();
        assert!(stored_bytes < 60_000, "stored {stored_bytes} bytes");
        let (mut back, trouble) = Document::restore(&kept, Job::default(), Book::default());
        assert_eq!(trouble, Vec::<String>::new(), "all of it can be read");
        let first = back.job().fonts[0].clone();
        assert_eq!(first.bytes(), Some(bytes), "byte by byte");
        back.undo();
        let earlier = &back.job().fonts[0];
        assert!(
            std::sync::Arc::ptr_eq(&earlier.data, &first.data),
            "the steps share one text"
        );
        for _ in 0..3 {
            back.undo();
        }
        assert_eq!(back.job().fonts.len(), 0, "before it was opened");
    }

    #[test]
    fn a_record_that_cannot_be_read_costs_only_itself() {
        let (mut kept, mut document) = (Kept::new(), fresh());
        named(&mut document, "A");
        document.settle();
        document.edit_book("name", "Name of the book", |book| {
            "Bench".clone_into(&mut book.name);
        });
        stored(&mut kept, &mut document);
        kept.insert("job".to_owned(), "{\"tubewright\":".to_owned());
        let (back, trouble) = Document::restore(&kept, Job::default(), Book::default());
        assert_eq!(back.book().name, "Bench", "the book is whole");
        assert_eq!(back.job().name, "A", "the job is taken from its last step");
        assert_eq!(trouble.len(), 1, "and it is said: {trouble:?}");
        let aside = vec![("unreadable-job".to_owned(), "{\"tubewright\":".to_owned())];
        assert_eq!(
            back.set_aside(),
            aside,
            "its text is still there to be saved"
        );
        let mut back = back;
        stored(&mut kept, &mut back);
        let (again, _) = Document::restore(&kept, Job::default(), Book::default());
        assert_eq!(again.set_aside(), aside, "and stays there");
    }
}
