//! Lists of the shop book: a line for each entry, the open one with its form under it; adding,
//! copying, naming and removing are the same for all of them.

use leptos::prelude::*;
use tubewright::Book;
use tubewright::book::{CableEntry, ElectrodeEntry, SupplyEntry, TubeEntry};
use tubewright::rules::Finding;

use super::fields::{Field, optional_figure, typed};
use super::findings::line;
use crate::desk::{Desk, desk};

/// An entry of a list of the book.
pub(super) trait Entry: Clone + Default + Send + Sync + 'static {
    /// What it is, as a heading: "Supply".
    const TITLE: &'static str;
    /// The same after a verb: "a supply".
    const ONE: &'static str;
    /// What a new one is called.
    const NEW: &'static str;

    /// The list it is in.
    fn list(book: &Book) -> &[Self];
    /// The list it is in, to change.
    fn list_mut(book: &mut Book) -> &mut Vec<Self>;
    /// Its name.
    fn name(&self) -> &str;
    /// Its name, to change.
    fn name_mut(&mut self) -> &mut String;
}

macro_rules! entry {
    ($entry:ident, $list:ident, $title:literal, $one:literal, $new:literal) => {
        impl Entry for $entry {
            const TITLE: &'static str = $title;
            const ONE: &'static str = $one;
            const NEW: &'static str = $new;

            fn list(book: &Book) -> &[Self] {
                &book.$list
            }

            fn list_mut(book: &mut Book) -> &mut Vec<Self> {
                &mut book.$list
            }

            fn name(&self) -> &str {
                &self.name
            }

            fn name_mut(&mut self) -> &mut String {
                &mut self.name
            }
        }
    };
}

entry!(SupplyEntry, supplies, "Supply", "a supply", "New supply");
entry!(
    TubeEntry,
    tubes,
    "Tube type",
    "a tube type",
    "New tube type"
);
entry!(
    ElectrodeEntry,
    electrodes,
    "Electrode",
    "an electrode",
    "New electrode"
);
entry!(CableEntry, cables, "Cable", "a cable", "New cable");

/// A figure of an entry: caption, unit, how it is read and written.
pub(super) type Figure<T> = (
    &'static str,
    &'static str,
    fn(&T) -> Option<f64>,
    fn(&mut T, Option<f64>),
);

/// A line of a list.
#[derive(Debug, Clone, Default, PartialEq)]
pub(super) struct EntryLine {
    /// Its name.
    pub name: String,
    /// What stands beside it.
    pub beside: String,
    /// Its colour, if it has one.
    pub colour: Option<String>,
    /// Whether it cannot be used.
    pub wrong: bool,
}

/// A name no entry of a list has yet.
fn free_name(wanted: &str, taken: &[&str]) -> String {
    let mut name = wanted.to_owned();
    let mut number = 2;
    while taken.contains(&name.as_str()) {
        name = format!("{wanted} ({number})");
        number += 1;
    }
    name
}

fn names<T: Entry>(book: &Book) -> Vec<&str> {
    T::list(book).iter().map(T::name).collect()
}

/// The entry at a place, as it is now.
pub(super) fn at_place<T: Entry>(desk: Desk, at: usize) -> Option<T> {
    desk.book.with(|book| T::list(book).get(at).cloned())
}

/// Something of an entry, as text.
pub(super) fn read<T: Entry>(desk: Desk, at: usize, get: fn(&T) -> String) -> Signal<String> {
    Signal::derive(move || {
        desk.book
            .with(|book| T::list(book).get(at).map(get).unwrap_or_default())
    })
}

/// Changes an entry: a step of its own for each field.
pub(super) fn edit<T: Entry>(desk: Desk, at: usize, field: &str, edit: impl FnOnce(&mut T)) {
    desk.edit_book(
        &format!("{} {at} {field}", T::TITLE),
        &format!("{}: {field}", T::TITLE),
        |book| {
            if let Some(entry) = T::list_mut(book).get_mut(at) {
                edit(entry);
            }
        },
    );
}

/// The list with its heading; the open entry has its form right under its line.
pub(super) fn list<T: Entry>(
    title: &'static str,
    about: &'static str,
    lines: impl Fn(&Book) -> Vec<EntryLine> + Send + Sync + 'static,
    form: fn(usize) -> AnyView,
) -> impl IntoView {
    let desk = desk();
    let lines = Memo::new(move |_| desk.book.with(&lines));
    // By name, so that undo or a removal elsewhere never puts another entry under one's hands.
    let open = Memo::new(move |_| {
        let name = desk.entry.get()?;
        desk.book
            .with(|book| names::<T>(book).into_iter().position(|known| known == name))
    });
    let add = move |_| add::<T>(desk);
    let count = Memo::new(move |_| lines.with(Vec::len));
    let line = move |at: usize| {
        Memo::new(move |_| lines.with(|lines| lines.get(at).cloned().unwrap_or_default()))
    };
    view! {
        <section class="panel" aria-label=title>
            <header class="panel-head">
                <h2>{title}</h2>
                <button on:click=add>"Add"</button>
            </header>
            <p class="quiet">{about}</p>
            <ul class="entries">
                <For each=move || 0..count.get() key=|at| *at let:at>
                    {
                        let line = line(at);
                        view! {
                            <li class:open=move || open.get() == Some(at)>
                                <button
                                    class="entry"
                                    aria-expanded=move || (open.get() == Some(at)).to_string()
                                    on:click=move |_| {
                                        let name = line.get_untracked().name;
                                        desk.settle();
                                        desk.entry.update(|now| {
                                            *now = if now.as_ref() == Some(&name) { None } else { Some(name) };
                                        });
                                    }
                                >
                                    <b>
                                        {move || line.get().colour.map(|colour| view! { <span class="dot" style:background=colour></span> })}
                                        {move || line.get().name}
                                    </b>
                                    <span>{move || line.get().beside}</span>
                                    {move || line.get().wrong.then(|| view! { <span class="chip stop">"cannot be used"</span> })}
                                </button>
                                {move || (open.get() == Some(at)).then(|| form(at))}
                            </li>
                        }
                    }
                </For>
            </ul>
        </section>
    }
}

fn add<T: Entry>(desk: Desk) {
    desk.settle();
    let name = desk
        .book
        .with_untracked(|book| free_name(T::NEW, &names::<T>(book)));
    let verb = format!("Add {}", T::ONE);
    desk.edit_book(&verb, &verb, |book| {
        let mut entry = T::default();
        entry.name_mut().clone_from(&name);
        T::list_mut(book).insert(0, entry);
    });
    desk.settle();
    open_new(desk, name);
}

/// A new or copied entry is opened and brought into sight.
fn open_new(desk: Desk, name: String) {
    desk.entry.set(Some(name));
    desk.turn();
    request_animation_frame(|| {
        if let Ok(Some(found)) = document().query_selector(".entries .open") {
            found.scroll_into_view();
        }
    });
}

/// The head of a form: the name, and what is done with the whole entry.
pub(super) fn head<T: Entry>(desk: Desk, at: usize) -> impl IntoView {
    let copy = move |_| {
        desk.settle();
        let name = desk.book.with_untracked(|book| {
            let names = names::<T>(book);
            names.get(at).map(|name| free_name(name, &names))
        });
        let Some(name) = name else { return };
        let verb = format!("Copy {}", T::ONE);
        desk.edit_book(&verb, &verb, |book| {
            if let Some(mut entry) = T::list(book).get(at).cloned() {
                entry.name_mut().clone_from(&name);
                T::list_mut(book).insert(at + 1, entry);
            }
        });
        desk.settle();
        open_new(desk, name);
    };
    let remove = move |_| {
        desk.entry.set(None);
        desk.settle();
        let verb = format!("Remove {}", T::ONE);
        desk.edit_book(&verb, &verb, |book| {
            let list = T::list_mut(book);
            if at < list.len() {
                list.remove(at);
            }
        });
        desk.settle();
        desk.turn();
    };
    view! {
        <header class="panel-head">
            <h2>{read::<T>(desk, at, |entry| entry.name().to_owned())}</h2>
            <button on:click=copy>"Copy"</button>
            <button on:click=remove>"Remove"</button>
        </header>
    }
}

/// The field of the name, which is an entry's own in its list.
pub(super) fn name_field<T: Entry>(desk: Desk, at: usize) -> impl IntoView {
    view! {
        <Field
            label="Name"
            class="wide"
            value=read(desk, at, |entry: &T| entry.name().to_owned())
            commit=move |text: String| {
                let name = text.trim().to_owned();
                let taken = desk.book.with_untracked(|book| {
                    names::<T>(book).into_iter().enumerate().any(|(other, known)| other != at && known == name)
                });
                if name.is_empty() || taken {
                    return Err(format!("Each {} needs a name of its own.", T::TITLE.to_lowercase()));
                }
                edit::<T>(desk, at, "name", |entry| entry.name_mut().clone_from(&name));
                desk.entry.set(Some(name));
                Ok(())
            }
        />
    }
}

/// Fields of figures; one left empty is not given.
pub(super) fn figures<T: Entry>(
    desk: Desk,
    at: usize,
    list: &'static [Figure<T>],
) -> Vec<impl IntoView> {
    list.iter()
        .map(|&(label, unit, get, set)| {
            view! {
                <Field
                    label=label
                    number=true
                    value=Signal::derive(move || {
                        typed(desk.book.with(|book| T::list(book).get(at).and_then(get)))
                    })
                    commit=move |text: String| {
                        let figure = optional_figure(&text, unit)?;
                        edit::<T>(desk, at, label, |entry| set(entry, figure));
                        Ok(())
                    }
                />
            }
        })
        .collect()
}

/// Findings, one under the other.
pub(super) fn lines(findings: &[Finding]) -> Vec<impl IntoView + use<>> {
    findings.iter().map(line).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_new_entry_gets_a_name_of_its_own() {
        assert_eq!(free_name("A", &["B"]), "A");
        assert_eq!(free_name("A", &["A", "A (2)"]), "A (3)");
    }
}
