//! The fields of a row of outline letters: what they say, how high, in which font, how far inside.

use leptos::prelude::*;
use tubewright::job::{OutlineRow, Row};
use tubewright::measure::{INSET_MM, LETTER_HEIGHT_MM, Limit, length, with_units};

use super::fields::{Choice, Field, always};
use super::rows::edit;
use crate::desk::{Desk, desk};

/// All but the tube.
#[component]
pub(super) fn OutlineFields(
    /// Number of the row, from 0.
    at: usize,
) -> impl IntoView {
    let desk = desk();
    let read = move |get: fn(&OutlineRow) -> &String| {
        Signal::derive(move || {
            desk.job.with(|job| match job.rows.get(at) {
                Some(Row::Outline(row)) => get(row).clone(),
                _ => String::new(),
            })
        })
    };
    let set = move |field: &str, get: fn(&mut OutlineRow) -> &mut String, typed: String| {
        edit(desk, at, field, |row| {
            if let Row::Outline(row) = row {
                *get(row) = typed;
            }
        });
    };
    let fonts = Signal::derive(move || {
        desk.job.with(|job| {
            let names = job.fonts.iter().map(|file| file.name.clone());
            names.map(|name| (name.clone(), name)).collect::<Vec<_>>()
        })
    });
    view! {
        <Field
            label="What it says"
            class="wide"
            live=always()
            example="OPEN"
            value=read(|row| &row.text)
            commit=move |typed: String| {
                set("text", |row| &mut row.text, typed);
                Ok(())
            }
        />
        <Field
            label="Letter height"
            class="narrow"
            live=within(desk, &LETTER_HEIGHT_MM)
            example="200 mm"
            value=read(|row| &row.height)
            commit=move |typed: String| {
                let typed = with_units(typed.trim(), desk.bare());
                set("letter height", |row| &mut row.height, typed);
                Ok(())
            }
        />
        <Choice
            label="Font"
            class="narrow"
            home="this job"
            value=read(|row| &row.font)
            options=fonts
            commit=move |name: String| set("font", |row| &mut row.font, name)
        />
        <InsetField
            value=read(|row| &row.inset)
            commit=move |typed: String| set("inset", |row| &mut row.inset, typed)
        />
    }
}

/// How far inside an outline the tube runs; empty is on it.
#[component]
pub(super) fn InsetField(
    /// As typed.
    #[prop(into)]
    value: Signal<String>,
    /// Takes what is typed.
    #[prop(into)]
    commit: Callback<String>,
) -> impl IntoView {
    let desk = desk();
    view! {
        <Field
            label="Inset"
            class="inset"
            example="on the outline"
            live=within(desk, &INSET_MM)
            value=value
            commit=move |typed: String| {
                commit.run(with_units(typed.trim(), desk.bare()));
                Ok(())
            }
        />
    }
}

/// Whether what is typed so far is a length within a limit.
fn within(desk: Desk, limit: &'static Limit) -> Callback<String, bool> {
    Callback::new(move |typed: String| {
        length(&typed, desk.bare()).is_ok_and(|length| limit.holds(length.length().mm()))
    })
}
