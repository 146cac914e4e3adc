//! High-voltage cables of the shop book.

use leptos::prelude::*;
use tubewright::Book;
use tubewright::book::CableEntry;
use tubewright::measure::{Volts, volts_shown};
use tubewright::wiring::cable_contradictions;

use super::entries::{EntryLine, Figure, at_place, edit, figures, head, list, name_field, read};
use super::fields::{Field, Tick, always};
use crate::desk::desk;

/// The list of cables.
#[component]
pub(super) fn Cables() -> impl IntoView {
    list::<CableEntry>(
        "Cables",
        "High-voltage cables of the leads. What they lose to their capacitance is worked out from the figure of their data, or from their sizes.",
        |book: &Book| book.cables.iter().map(line).collect(),
        |at| view! { <CableForm at=at/> }.into_any(),
    )
}

fn line(entry: &CableEntry) -> EntryLine {
    let figures = [
        entry
            .rated_volts
            .map(|volts| volts_shown(Volts::from_volts(volts))),
        entry.pf_per_m.map(|farads| format!("{farads} pF/m")),
        entry
            .insulation_mm
            .map(|outer| format!("{outer} mm over the insulation")),
        entry.screened.then(|| "screened".to_owned()),
    ];
    EntryLine {
        name: entry.name.clone(),
        beside: figures.into_iter().flatten().collect::<Vec<_>>().join(", "),
        colour: None,
        wrong: !cable_contradictions(entry).is_empty(),
    }
}

const FIGURES: &[Figure<CableEntry>] = &[
    (
        "Rated volts of the insulation, V",
        "V",
        |c| c.rated_volts,
        |c, v| c.rated_volts = v,
    ),
    (
        "Capacitance as it is run, pF/m",
        "",
        |c| c.pf_per_m,
        |c, v| c.pf_per_m = v,
    ),
    (
        "Conductor, mm across",
        "mm",
        |c| c.conductor_mm,
        |c, v| c.conductor_mm = v,
    ),
    (
        "Over the insulation, mm across",
        "mm",
        |c| c.insulation_mm,
        |c, v| c.insulation_mm = v,
    ),
    (
        "Permittivity of the insulation",
        "",
        |c| c.permittivity,
        |c, v| c.permittivity = v,
    ),
];

#[component]
fn CableForm(at: usize) -> impl IntoView {
    let desk = desk();
    let said = move || {
        let wrong = cable_contradictions(&at_place::<CableEntry>(desk, at)?);
        (!wrong.is_empty()).then(|| {
            view! { <p class="danger">{format!("This cable cannot be used: {}.", wrong.join("; "))}</p> }
        })
    };
    view! {
        <section class="form" aria-label="Cable">
            {head::<CableEntry>(desk, at)}
            {said}
            <div class="form-fields">
                {name_field::<CableEntry>(desk, at)}
                {figures::<CableEntry>(desk, at, FIGURES)}
                <Tick
                    label="Earthed screen on the insulation"
                    value=Signal::derive(move || { at_place::<CableEntry>(desk, at).is_some_and(|c| c.screened) })
                    commit=move |yes: bool| { edit::<CableEntry>(desk, at, "screen", |entry| entry.screened = yes) }
                />
                <Field
                    label="Where the figures came from"
                    class="wide"
                    live=always()
                    value=read(desk, at, |c: &CableEntry| c.source.clone())
                    commit=move |text: String| {
                        edit::<CableEntry>(desk, at, "source", |entry| entry.source = text);
                        Ok(())
                    }
                />
            </div>
            <p class="quiet">"A capacitance given in the cable's data goes before what its sizes give. Permittivity is a plain number, as many times that of air: silicone rubber has about 3."</p>
        </section>
    }
}
