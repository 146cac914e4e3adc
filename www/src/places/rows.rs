//! The rows of the sign, edited in place.

use leptos::prelude::*;
use tubewright::Job;
use tubewright::drawing::faces;
use tubewright::job::{Row, StrokesRow, TextRow};
use tubewright::measure::{
    LETTER_HEIGHT_MM, PIECE_LENGTH_MM, Units, glass, length, quoted, with_units,
};
use tubewright::rules::Place;

use super::fields::{Choice, Field, always};
use super::findings::{line, many};
use wasm_bindgen::JsCast;

use crate::desk::{Desk, desk};

/// All rows, and the buttons that add one.
#[component]
pub fn Rows() -> impl IntoView {
    let desk = desk();
    let count = Memo::new(move |_| desk.job.with(|job| job.rows.len()));
    view! {
        <section class="panel rows" aria-label="Rows">
            <ol>
                <For each=move || 0..count.get() key=|at| *at let:at>
                    <RowCard at=at/>
                </For>
            </ol>
            <Show when=move || count.get() == 0>
                <p class="quiet">"Start with a word: what does the sign say?"</p>
            </Show>
            <div class="buttons">
                <button class="act" on:click=move |_| add(desk, true)>"+ Word"</button>
                <button class="act" on:click=move |_| add(desk, false)>"+ Strokes"</button>
            </div>
        </section>
    }
}

/// A new row takes height, face and tube of the last of its kind.
fn add(desk: Desk, text: bool) {
    let tube = desk
        .job
        .with_untracked(|job| job.rows.last().map(|row| row.tube().to_owned()));
    let tube = tube.unwrap_or_else(|| {
        desk.book.with_untracked(|book| {
            book.tubes
                .first()
                .map(|tube| tube.name.clone())
                .unwrap_or_default()
        })
    });
    let last = desk.job.with_untracked(|job| {
        job.rows.iter().rev().find_map(|row| match row {
            Row::Text(row) => Some(row.clone()),
            Row::Strokes(_) => None,
        })
    });
    let inches = desk.units.get_untracked() == Units::FeetInches;
    let row = if text {
        Row::Text(TextRow {
            text: String::new(),
            height: last.as_ref().map_or_else(
                || if inches { "8 in" } else { "200 mm" }.to_owned(),
                |row| row.height.clone(),
            ),
            face: last.map_or_else(|| "sans".to_owned(), |row| row.face),
            tube,
            count: 1,
        })
    } else {
        Row::Strokes(StrokesRow {
            label: "Border".to_owned(),
            strokes: String::new(),
            tube,
            count: 1,
        })
    };
    desk.settle();
    desk.edit_job("add", "Add a row", |job| job.rows.push(row));
    desk.settle();
    let last = desk
        .job
        .with_untracked(|job| job.rows.len().saturating_sub(1));
    request_animation_frame(move || {
        let field = document().query_selector(&format!("[data-row='{last}'] input"));
        if let Ok(Some(field)) = field
            && let Ok(field) = field.dyn_into::<web_sys::HtmlElement>()
        {
            // A field that cannot be entered is still there to be tapped.
            let _ = field.focus();
        }
    });
}

/// What a field of a row reads and writes.
fn part<T: Default>(job: &Job, at: usize, get: impl Fn(&Row) -> T) -> T {
    job.rows.get(at).map(get).unwrap_or_default()
}

fn edit(desk: Desk, at: usize, field: &str, edit: impl FnOnce(&mut Row)) {
    let says = format!("Row {}: {field}", at + 1);
    desk.edit_job(&format!("row {at} {field}"), &says, |job| {
        if let Some(row) = job.rows.get_mut(at) {
            edit(row);
        }
    });
}

#[component]
fn RowCard(at: usize) -> impl IntoView {
    let desk = desk();
    let is_text = Memo::new(move |_| {
        desk.job
            .with(|job| matches!(job.rows.get(at), Some(Row::Text(_))))
    });
    let read = move |get: fn(&Row) -> String| {
        Signal::derive(move || desk.job.with(|job| part(job, at, get)))
    };
    let tubes = Signal::derive(move || {
        desk.book.with(|book| {
            book.tubes
                .iter()
                .map(|tube| (tube.name.clone(), tube.name.clone()))
                .collect::<Vec<_>>()
        })
    });
    let colour = Memo::new(move |_| {
        desk.results.with(|results| {
            let name = desk
                .job
                .with(|job| part(job, at, |row| row.tube().to_owned()));
            results
                .tubes
                .iter()
                .find(|total| total.name == name)
                .and_then(|total| total.tube.as_ref())
                .map(|tube| tube.colour.clone())
        })
    });
    let tube = move || {
        view! {
            <div class="row-tube">
                <span class="dot" style:background=move || colour.get().unwrap_or_default()></span>
                <Choice
                    label="Tube"
                    value=read(|row| row.tube().to_owned())
                    options=tubes
                    commit=move |name: String| edit(desk, at, "tube", |row| match row {
                        Row::Text(row) => row.tube = name,
                        Row::Strokes(row) => row.tube = name,
                    })
                />
            </div>
        }
    };
    let times = move || {
        view! {
            <Field
                label="Times"
                class="tiny"
                number=true
                value=read(|row| row.count().to_string())
                commit=move |typed: String| {
                    let count = typed.trim().parse::<i64>().map_err(|_| {
                        format!(
                            "Expected a whole number such as 2, but found {}; {} still counts.",
                            quoted(&typed),
                            desk.job.with_untracked(|job| part(job, at, Row::count))
                        )
                    })?;
                    edit(desk, at, "times", |row| match row {
                        Row::Text(row) => row.count = count,
                        Row::Strokes(row) => row.count = count,
                    });
                    Ok(())
                }
            />
        }
    };
    let text_fields = move || {
        view! {
            <Field
                label="What it says"
                class="wide"
                live=always()
                example="OPEN"
                value=read(|row| row.label().to_owned())
                commit=move |typed: String| {
                    edit(desk, at, "text", |row| if let Row::Text(row) = row { row.text = typed });
                    Ok(())
                }
            />
            <Field
                label="Letter height"
                class="narrow"
                live=move |typed: String| {
                    length(&typed, desk.bare())
                        .is_ok_and(|height| LETTER_HEIGHT_MM.holds(height.length().mm()))
                }
                example="200 mm"
                value=read(|row| match row {
                    Row::Text(row) => row.height.clone(),
                    Row::Strokes(_) => String::new(),
                })
                commit=move |typed: String| {
                    let typed = with_units(typed.trim(), desk.bare());
                    edit(desk, at, "letter height", |row| if let Row::Text(row) = row { row.height = typed });
                    Ok(())
                }
            />
            <Choice
                label="Face"
                class="narrow"
                value=read(|row| match row {
                    Row::Text(row) => row.face.clone(),
                    Row::Strokes(_) => String::new(),
                })
                options=Signal::derive(|| {
                    faces().iter().map(|face| (face.name.to_owned(), face.name.to_owned())).collect()
                })
                commit=move |name: String| {
                    edit(desk, at, "face", |row| if let Row::Text(row) = row { row.face = name });
                }
            />
        }
    };
    let stroke_fields = move || {
        view! {
            <Field
                label="What it is"
                class="narrow"
                live=always()
                value=read(|row| row.label().to_owned())
                commit=move |typed: String| {
                    edit(desk, at, "label", |row| if let Row::Strokes(row) = row { row.label = typed });
                    Ok(())
                }
            />
            <Field
                label="Lengths, a piece of glass each; part them by ;"
                class="wide"
                live=move |typed: String| {
                    typed.split(';').all(|part| {
                        length(part, desk.bare())
                            .is_ok_and(|piece| PIECE_LENGTH_MM.holds(piece.length().mm()))
                    })
                }
                example="1200 mm; 2 x 300 mm + 95 mm"
                value=read(|row| match row {
                    Row::Strokes(row) => row.strokes.clone(),
                    Row::Text(_) => String::new(),
                })
                commit=move |typed: String| {
                    let typed = with_units(typed.trim(), desk.bare());
                    edit(desk, at, "lengths", |row| if let Row::Strokes(row) = row { row.strokes = typed });
                    Ok(())
                }
            />
        }
    };
    let sums = move || {
        desk.results.with(|results| {
            let row = results.takeoff.rows.get(at)?;
            let units = desk.units.get();
            let pieces = row.pieces.len();
            Some(view! {
                <b>{glass(row.lit, units)}</b>" lit, "
                <b>{glass(row.glass, units)}</b>" glass, "
                <b>{pieces}</b>{many(pieces, " piece", " pieces")}
            })
        })
    };
    let size = move || {
        desk.results.with(|results| {
            let bounds = results.takeoff.rows.get(at)?.bounds;
            (bounds.width() > 0.0).then(|| {
                let shown = |mm: f64| {
                    tubewright::measure::length_shown(
                        tubewright::measure::Length::from_mm(mm),
                        desk.units.get(),
                    )
                };
                format!(
                    "{} wide, {} high",
                    shown(bounds.width()),
                    shown(bounds.height())
                )
            })
        })
    };
    let said = move || {
        desk.results.with(|results| {
            results
                .findings
                .iter()
                .filter(|finding| finding.place == Place::Row(at))
                .map(line)
                .collect::<Vec<_>>()
        })
    };
    view! {
        <li class="row" data-row=at.to_string()>
            <div class="row-fields">
                {move || if is_text.get() { text_fields().into_any() } else { stroke_fields().into_any() }}
                {tube()}
                {times()}
            </div>
            <div class="row-foot">
                <span class="row-sums">{sums}<small>{size}</small></span>
                <span class="row-tools">
                    <button
                        aria-label=format!("Move row {} up", at + 1)
                        disabled=at == 0
                        on:click=move |_| shift(desk, at, at.saturating_sub(1))
                    >"↑"</button>
                    <button
                        aria-label=format!("Move row {} down", at + 1)
                        disabled=move || desk.job.with(|job| at + 1 >= job.rows.len())
                        on:click=move |_| shift(desk, at, at + 1)
                    >"↓"</button>
                    <button on:click=move |_| copy(desk, at)>"Copy"</button>
                    <button
                        aria-label=format!("Remove row {}", at + 1)
                        on:click=move |_| remove(desk, at)
                    >"Remove"</button>
                </span>
            </div>
            {said}
        </li>
    }
}

fn shift(desk: Desk, from: usize, to: usize) {
    desk.settle();
    desk.edit_job("move", &format!("Move row {}", from + 1), |job| {
        if from < job.rows.len() && to < job.rows.len() {
            job.rows.swap(from, to);
        }
    });
    desk.turn();
    desk.settle();
}

fn copy(desk: Desk, at: usize) {
    desk.settle();
    desk.edit_job("copy", &format!("Copy row {}", at + 1), |job| {
        if let Some(row) = job.rows.get(at).cloned() {
            job.rows.insert(at + 1, row);
        }
    });
    desk.turn();
    desk.settle();
}

fn remove(desk: Desk, at: usize) {
    desk.settle();
    desk.edit_job("remove", &format!("Remove row {}", at + 1), |job| {
        if at < job.rows.len() {
            job.rows.remove(at);
        }
    });
    desk.turn();
    desk.piece.set(None);
    desk.settle();
}
