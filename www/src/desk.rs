//! The desk: what is open, and everything the places read. One for the page, found in the context.

use std::sync::Arc;

use leptos::prelude::*;
use tubewright::measure::{LengthUnit, Units};
use tubewright::{Book, Job, Workup, workup};

use crate::document::{Document, Write};
use crate::keep::{Keeper, Standing};

/// Name of the record of the units, and its word for feet and inches.
const UNITS: &str = "units";
const FEET_INCHES: &str = "ft in";

/// The places of the page, in the order of work.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Where {
    /// Rows and picture.
    Sign,
    /// Pieces of glass.
    Glass,
    /// Strings and supplies.
    Circuits,
    /// The sum.
    Price,
    /// Supplies, tubes, rules, rates.
    ShopBook,
}

impl Where {
    /// All of them.
    pub const ALL: [Self; 5] = [
        Self::Sign,
        Self::Glass,
        Self::Circuits,
        Self::Price,
        Self::ShopBook,
    ];

    /// Its name on the page.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Sign => "Sign",
            Self::Glass => "Glass",
            Self::Circuits => "Circuits",
            Self::Price => "Price",
            Self::ShopBook => "Shop book",
        }
    }

    /// Its part of the address, with the mark before it.
    pub const fn address(self) -> &'static str {
        match self {
            Self::Sign => "#sign",
            Self::Glass => "#glass",
            Self::Circuits => "#circuits",
            Self::Price => "#price",
            Self::ShopBook => "#shop-book",
        }
    }

    /// The place of an address; the sign for any other.
    pub fn of(address: &str) -> Self {
        Self::ALL
            .into_iter()
            .find(|place| place.address() == address)
            .unwrap_or(Self::Sign)
    }
}

/// The parts of the shop book.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum BookPart {
    /// Supplies.
    Supplies,
    /// Tube types.
    Tubes,
    /// Electrodes.
    Electrodes,
    /// High-voltage cables.
    Cables,
    /// Rule sets.
    Rules,
    /// Rates and allowances.
    Rates,
}

/// What the next tap on a picture does to the piece that is marked.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Task {
    /// Makes it one with the piece that is tapped.
    Join,
    /// Cuts it where it is tapped.
    Cut,
}

/// Something to tell the person at the page, until they put it away.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Message {
    /// Whether something did not work.
    pub trouble: bool,
    /// Sentences, most important first.
    pub says: Vec<String>,
}

/// The results shared between the places.
#[derive(Debug, Clone)]
pub struct Results(Arc<Workup>);

impl core::ops::Deref for Results {
    type Target = Workup;
    fn deref(&self) -> &Workup {
        &self.0
    }
}

impl PartialEq for Results {
    /// Each work-up is new: whatever reads it compares its own part.
    fn eq(&self, other: &Self) -> bool {
        Arc::ptr_eq(&self.0, &other.0)
    }
}

/// What is open and what is known of it.
#[derive(Debug, Clone, Copy)]
pub struct Desk {
    document: RwSignal<Document>,
    keeper: StoredValue<Option<Keeper>, LocalStorage>,
    /// The open job.
    pub job: Memo<Job>,
    /// The open book.
    pub book: Memo<Book>,
    /// Everything worked out of both.
    pub results: Memo<Results>,
    /// What lengths are shown in, and what a bare number means.
    pub units: RwSignal<Units>,
    /// The place in sight.
    pub place: RwSignal<Where>,
    /// The piece marked on the picture.
    pub piece: RwSignal<Option<usize>>,
    /// What the next tap does to it.
    pub task: RwSignal<Option<Task>>,
    /// The row marked on the picture.
    pub row: RwSignal<Option<usize>>,
    /// Whether pictures show the sign from the back, mirrored.
    pub back: RwSignal<bool>,
    /// Whether pictures show tubes as plain lines on light, and do not glow.
    pub plain: RwSignal<bool>,
    /// The circuit opened on its place.
    pub circuit: RwSignal<usize>,
    /// The joint marked, with the circuit it is on.
    pub joint: RwSignal<Option<(usize, usize)>>,
    /// The part of the shop book in sight.
    pub book_part: RwSignal<BookPart>,
    /// The supply, tube type, electrode or cable opened there, by name.
    pub entry: RwSignal<Option<String>>,
    /// Whether all findings are listed.
    pub findings_open: RwSignal<bool>,
    /// Counts every change that did not come from the field being typed in: undo, a file, a row
    /// moved. Fields then show what is there, not what was typed into them before.
    pub turned: RwSignal<u32>,
    /// What undo or redo did last, until the next edit.
    pub done: RwSignal<Option<String>>,
    /// How keeping stands.
    pub standing: RwSignal<Standing>,
    /// What to tell.
    pub message: RwSignal<Option<Message>>,
}

impl Desk {
    /// A desk with a job and a book on it.
    pub fn new(document: Document) -> Self {
        let document = RwSignal::new(document);
        let job = Memo::new(move |_| document.with(|document| document.job().clone()));
        let book = Memo::new(move |_| document.with(|document| document.book().clone()));
        let results = Memo::new(move |_| {
            job.with(|job| book.with(|book| Results(Arc::new(workup(job, book)))))
        });
        Self {
            document,
            keeper: StoredValue::new_local(None),
            job,
            book,
            results,
            units: RwSignal::new(Units::Metric),
            place: RwSignal::new(Where::Sign),
            piece: RwSignal::new(None),
            task: RwSignal::new(None),
            row: RwSignal::new(None),
            back: RwSignal::new(false),
            plain: RwSignal::new(false),
            circuit: RwSignal::new(0),
            joint: RwSignal::new(None),
            book_part: RwSignal::new(BookPart::Supplies),
            entry: RwSignal::new(None),
            findings_open: RwSignal::new(false),
            turned: RwSignal::new(0),
            done: RwSignal::new(None),
            standing: RwSignal::new(Standing::Starting),
            message: RwSignal::new(None),
        }
    }

    /// The unit a bare number takes in a length field.
    pub fn bare(&self) -> LengthUnit {
        match self.units.get_untracked() {
            Units::Metric => LengthUnit::Millimetres,
            Units::FeetInches => LengthUnit::Inches,
        }
    }

    /// The circuit in sight on its place, as long as there is any.
    pub fn open_circuit(&self) -> Option<usize> {
        let last = self
            .results
            .with(|results| results.circuits.len())
            .checked_sub(1)?;
        Some(self.circuit.get().min(last))
    }

    /// The joint marked on a circuit.
    pub fn joint_on(&self, circuit: usize) -> Option<usize> {
        let (on, joint) = self.joint.get()?;
        (on == circuit).then_some(joint)
    }

    /// Shows lengths in other units, and keeps the choice.
    pub fn set_units(&self, units: Units) {
        self.units.set(units);
        let word = match units {
            Units::Metric => "mm",
            Units::FeetInches => FEET_INCHES,
        };
        self.send(vec![Write {
            name: UNITS.to_owned(),
            value: Some(word.to_owned()),
        }]);
    }

    /// Changes the job; see [`Document::edit_job`].
    pub fn edit_job(&self, field: &str, says: &str, edit: impl FnOnce(&mut Job)) {
        self.edited();
        self.change(|document| document.edit_job(field, says, edit));
    }

    /// Changes the book; see [`Document::edit_book`].
    pub fn edit_book(&self, field: &str, says: &str, edit: impl FnOnce(&mut Book)) {
        self.edited();
        self.change(|document| document.edit_book(field, says, edit));
    }

    /// Fields are to show what is there now.
    pub fn turn(&self) {
        self.turned.update(|count| *count += 1);
    }

    /// What was told of the step before is not true of the next.
    fn edited(&self) {
        if self.done.with_untracked(Option::is_some) {
            self.done.set(None);
        }
        let told = |message: &Option<Message>| message.as_ref().is_some_and(|told| !told.trouble);
        if self.message.with_untracked(told) {
            self.message.set(None);
        }
    }

    /// The field was left.
    pub fn settle(&self) {
        self.document.update_untracked(Document::settle);
    }

    /// Takes the last step back.
    pub fn undo(&self) {
        let says = untrack(|| self.undoes());
        self.edited();
        self.change(Document::undo);
        self.done.set(says.map(|says| format!("undone: {says}")));
        self.turn();
    }

    /// Does an undone step again.
    pub fn redo(&self) {
        let says = untrack(|| self.redoes());
        self.edited();
        self.change(Document::redo);
        self.done
            .set(says.map(|says| format!("done again: {says}")));
        self.turn();
    }

    /// What undo would take back.
    pub fn undoes(&self) -> Option<String> {
        self.document
            .with(|document| document.undoes().map(str::to_owned))
    }

    /// What redo would do again.
    pub fn redoes(&self) -> Option<String> {
        self.document
            .with(|document| document.redoes().map(str::to_owned))
    }

    /// Texts that were kept and cannot be read.
    pub fn set_aside(&self) -> Vec<(String, String)> {
        self.document.with(Document::set_aside)
    }

    /// Tells something that went well.
    pub fn tell(&self, says: impl Into<String>) {
        self.message.set(Some(Message {
            trouble: false,
            says: vec![says.into()],
        }));
    }

    /// Tells of trouble.
    pub fn trouble(&self, says: Vec<String>) {
        self.message.set(Some(Message {
            trouble: true,
            says,
        }));
    }

    /// Puts what was kept on the desk and keeps every edit from now on; called once, at the start.
    /// Until the store has answered, [`Standing::Starting`], the page shows nothing to edit: an
    /// edit made before could only be lost or write over what was kept.
    pub fn start_keeping(self) {
        leptos::task::spawn_local(async move {
            match Keeper::open().await {
                Ok((keeper, kept)) => {
                    let now = self.document.with_untracked(Clone::clone);
                    let fresh = !kept.contains_key("job");
                    let (document, trouble) =
                        Document::restore(&kept, now.job().clone(), now.book().clone());
                    self.keeper.set_value(Some(keeper));
                    if kept.get(UNITS).is_some_and(|word| word == FEET_INCHES) {
                        self.units.set(Units::FeetInches);
                    }
                    self.standing.set(Standing::Kept);
                    self.document.set(document);
                    if fresh {
                        self.send(now.all_writes());
                    } else {
                        self.change(|_| ());
                    }
                    if !trouble.is_empty() {
                        self.trouble(trouble);
                    }
                    crate::keep::ask_to_stay();
                }
                Err(why) => self.standing.set(Standing::NotKept(why)),
            }
        });
    }

    fn change(&self, change: impl FnOnce(&mut Document)) {
        let mut writes = Vec::new();
        self.document.update(|document| {
            change(document);
            writes = document.take_writes();
        });
        self.send(writes);
    }

    fn send(&self, writes: Vec<Write>) {
        if writes.is_empty() {
            return;
        }
        let standing = self.standing;
        self.keeper.with_value(|keeper| {
            if let Some(keeper) = keeper {
                keeper.store(writes, move |now| standing.set(now));
            }
        });
    }
}

/// The desk of the page.
pub fn desk() -> Desk {
    expect_context::<Desk>()
}
