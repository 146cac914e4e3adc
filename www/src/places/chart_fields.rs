//! The length chart of a supply's plate: how long a string of each tube type it carries at most.

use leptos::prelude::*;
use tubewright::book::{ChartLength, SupplyEntry};

use super::fields::{Choice, Field, optional_figure, typed};
use crate::desk::{Desk, desk};

/// Changes the chart of a supply, as one step.
fn edit(desk: Desk, at: usize, field: &str, change: impl FnOnce(&mut Vec<ChartLength>)) {
    desk.edit_book(
        &format!("supply {at} chart {field}"),
        &format!("Supply: length chart, {field}"),
        |book| {
            if let Some(entry) = book.supplies.get_mut(at) {
                change(&mut entry.chart);
            }
        },
    );
}

/// The chart of the supply at a place in the book's list.
#[component]
pub(super) fn ChartFields(at: usize) -> impl IntoView {
    let desk = desk();
    let of = move |read: &dyn Fn(&SupplyEntry) -> usize| {
        desk.book
            .with(|book| book.supplies.get(at).map(read).unwrap_or_default())
    };
    let count = Memo::new(move |_| of(&|entry| entry.chart.len()));
    let add = move |_| {
        desk.settle();
        edit(desk, at, "a line added", |chart| {
            chart.push(ChartLength {
                longest_mm: 1_000.0,
                ..ChartLength::default()
            });
        });
        desk.settle();
    };
    view! {
        <section class="chart-fields" aria-label="Length chart of the plate">
            <header class="panel-head">
                <h3>"Length chart of the plate"</h3>
                <button on:click=add>"Add a line"</button>
            </header>
            <p class="quiet">
                "Only what this supply's own plate or leaflet says. Beside the volts, a string then uses up its length of the longest, electrodes counted in; the stricter of both rules."
            </p>
            <For each=move || 0..count.get() key=|line| *line let:line>
                <ChartLine at=at line=line/>
            </For>
        </section>
    }
}

#[component]
fn ChartLine(at: usize, line: usize) -> impl IntoView {
    let desk = desk();
    let now = move || {
        desk.book.with(|book| {
            let entry = book.supplies.get(at);
            entry.and_then(|entry| entry.chart.get(line)).cloned()
        })
    };
    let tubes = Signal::derive(move || {
        let mut names: Vec<String> = desk
            .book
            .with(|book| book.tubes.iter().map(|tube| tube.name.clone()).collect());
        // A type the book has no more stays to be seen.
        let here = now().unwrap_or_default().tube;
        if !names.contains(&here) {
            names.insert(0, here);
        }
        names
            .into_iter()
            .map(|name| {
                let words = if name.is_empty() {
                    "choose".to_owned()
                } else {
                    name.clone()
                };
                (name, words)
            })
            .collect::<Vec<_>>()
    });
    let change = move |field: &str, change: &dyn Fn(&mut ChartLength)| {
        edit(
            desk,
            at,
            &format!("{field} of line {}", line + 1),
            |chart| {
                if let Some(line) = chart.get_mut(line) {
                    change(line);
                }
            },
        );
    };
    view! {
        <div class="form-fields">
            <Choice
                label="Tube type"
                value=Signal::derive(move || now().unwrap_or_default().tube)
                options=tubes
                commit=move |tube: String| change("tube type", &|line| line.tube.clone_from(&tube))
            />
            <Field
                label="Longest, all pieces, mm"
                number=true
                value=Signal::derive(move || typed(now().map(|line| line.longest_mm)))
                commit=move |text: String| {
                    let longest = optional_figure(&text, "mm")?
                        .filter(|&mm| mm > 0.0)
                        .ok_or("The longest length must be above 0: take the line away if the plate gives none.")?;
                    change("longest length", &|line| line.longest_mm = longest);
                    Ok(())
                }
            />
            <Field
                label="A pair of electrodes counts as, mm"
                number=true
                value=Signal::derive(move || typed(now().and_then(|line| line.pair_mm)))
                commit=move |text: String| {
                    let pair = optional_figure(&text, "mm")?;
                    change("length of a pair", &|line| line.pair_mm = pair);
                    Ok(())
                }
            />
            <button on:click=move |_| {
                desk.settle();
                edit(desk, at, "a line removed", |chart| {
                    if line < chart.len() {
                        chart.remove(line);
                    }
                });
                desk.settle();
            }>{format!("Remove line {}", line + 1)}</button>
        </div>
    }
}
