//! Electrodes of the shop book.

use leptos::prelude::*;
use tubewright::Book;
use tubewright::book::ElectrodeEntry;
use tubewright::tube::Electrode;

use super::entries::{EntryLine, Figure, edit, figures, head, lines, list, name_field, read};
use super::fields::{Field, always};
use crate::desk::desk;

/// The list of electrodes.
#[component]
pub(super) fn Electrodes() -> impl IntoView {
    list::<ElectrodeEntry>(
        "Electrodes",
        "What a tube type names as its electrodes is held against its glass and its current. A figure that is not known is left empty and not compared.",
        |book: &Book| book.electrodes.iter().map(line).collect(),
        |at| view! { <ElectrodeForm at=at/> }.into_any(),
    )
}

fn line(entry: &ElectrodeEntry) -> EntryLine {
    let fits = match (entry.least_outer_mm, entry.most_outer_mm) {
        (Some(least), Some(most)) => Some(format!("for glass of {least} to {most} mm")),
        (Some(least), None) => Some(format!("for glass from {least} mm")),
        (None, Some(most)) => Some(format!("for glass up to {most} mm")),
        (None, None) => None,
    };
    let figures = [entry.rated_ma.map(|ma| format!("{ma} mA")), fits];
    EntryLine {
        name: entry.name.clone(),
        beside: figures.into_iter().flatten().collect::<Vec<_>>().join(", "),
        colour: None,
        wrong: Electrode::read(entry).is_err(),
    }
}

const FIGURES: &[Figure<ElectrodeEntry>] = &[
    (
        "Greatest steady current, mA",
        "mA",
        |e| e.rated_ma,
        |e, v| e.rated_ma = v,
    ),
    (
        "Fits glass from, mm outer",
        "mm",
        |e| e.least_outer_mm,
        |e, v| e.least_outer_mm = v,
    ),
    (
        "Fits glass up to, mm outer",
        "mm",
        |e| e.most_outer_mm,
        |e, v| e.most_outer_mm = v,
    ),
];

#[component]
fn ElectrodeForm(at: usize) -> impl IntoView {
    let desk = desk();
    let said = move || {
        desk.book
            .with(|book| match book.electrodes.get(at).map(Electrode::read) {
                Some(Err(wrong)) => Some(lines(&wrong)),
                _ => None,
            })
    };
    view! {
        <section class="form" aria-label="Electrode">
            {head::<ElectrodeEntry>(desk, at)}
            {said}
            <div class="form-fields">
                {name_field::<ElectrodeEntry>(desk, at)}
                {figures::<ElectrodeEntry>(desk, at, FIGURES)}
                <Field
                    label="Where the figures came from"
                    class="wide"
                    live=always()
                    value=read(desk, at, |e: &ElectrodeEntry| e.source.clone())
                    commit=move |text: String| {
                        edit::<ElectrodeEntry>(desk, at, "source", |entry| entry.source = text);
                        Ok(())
                    }
                />
            </div>
            <p class="quiet">"The current is what its maker rates it for, running all the time. Glass is measured outside, where the electrode is sealed on."</p>
        </section>
    }
}
