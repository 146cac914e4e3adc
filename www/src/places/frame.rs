//! The frame: header, rail of places, the place in sight, and the strip with the totals.

use leptos::prelude::*;
use tubewright::measure::{Units, glass};
use tubewright::rules::Grade;

use super::files::FilesPanel;
use super::findings::many;
use super::{Circuits, FindingsList, Glass, Price, ShopBook, Sign};
use wasm_bindgen::JsCast;

use crate::desk::{Desk, Where, desk};
use crate::files;
use crate::keep::Standing;

/// The whole page.
#[component]
pub fn Frame() -> impl IntoView {
    let desk = desk();
    let files_open = RwSignal::new(false);
    let findings_open = desk.findings_open;
    follow_address();
    keys(desk, files_open);
    crate::keep::watch_for_others(move || {
        desk.trouble(vec![
            "This page is open in another window or tab as well. Use one of them: what is edited in \
             one is written over by the other."
                .to_owned(),
        ]);
    });
    let place = move || match desk.place.get() {
        Where::Sign => view! { <Sign/> }.into_any(),
        Where::Glass => view! { <Glass/> }.into_any(),
        Where::Circuits => view! { <Circuits/> }.into_any(),
        Where::Price => view! { <Price/> }.into_any(),
        Where::ShopBook => view! { <ShopBook/> }.into_any(),
    };
    let started = Memo::new(move |_| desk.standing.with(|now| *now != Standing::Starting));
    view! {
        <div
            class="page"
            on:dragover=|event| event.prevent_default()
            on:drop=move |event| files::dropped(desk, &event)
        >
            <Header files_open=files_open/>
            <main id="place" tabindex="-1">
                <Told/>
                <Show when=move || files_open.get()>
                    <FilesPanel open=files_open/>
                </Show>
                <Show when=move || findings_open.get()>
                    <section class="panel" aria-label="Findings">
                        <header class="panel-head">
                            <h2>"Findings"</h2>
                            <button on:click=move |_| findings_open.set(false)>"Close"</button>
                        </header>
                        <FindingsList/>
                    </section>
                </Show>
                <Show when=move || started.get() fallback=|| view! { <p class="quiet">"Opening what was kept…"</p> }>
                    {place}
                </Show>
            </main>
            <div class="foot">
                <Rail/>
                <Strip/>
            </div>
        </div>
    }
}

/// The place follows the address and the address the place, so that Back and a reload work.
fn follow_address() {
    let desk = desk();
    let address = || window().location().hash().unwrap_or_default();
    desk.place.set(Where::of(&address()));
    let handle = window_event_listener(leptos::ev::hashchange, move |_| {
        let place = Where::of(&address());
        if desk.place.get_untracked() != place {
            desk.place.set(place);
        }
    });
    on_cleanup(move || handle.remove());
    Effect::new(move |before: Option<Where>| {
        let place = desk.place.get();
        if Where::of(&address()) != place {
            // A browser that refuses to change the address leaves it as it is.
            let _ = window().location().set_hash(place.address());
        }
        if before.is_some_and(|before| before != place) {
            window().scroll_to_with_x_and_y(0.0, 0.0);
        }
        place
    });
}

/// Undo and redo by keyboard outside fields, which have their own; Escape puts panels away.
fn keys(desk: Desk, files_open: RwSignal<bool>) {
    let handle = window_event_listener(leptos::ev::keydown, move |event| {
        let in_field = event
            .target()
            .and_then(|to| to.dyn_into::<web_sys::Element>().ok())
            .is_some_and(|element| {
                matches!(element.tag_name().as_str(), "INPUT" | "SELECT" | "TEXTAREA")
            });
        let control = event.ctrl_key() || event.meta_key();
        match event.key().as_str() {
            "Escape" => {
                files_open.set(false);
                desk.findings_open.set(false);
            }
            "z" if control && !in_field => {
                event.prevent_default();
                desk.undo();
            }
            "Z" | "y" if control && !in_field => {
                event.prevent_default();
                desk.redo();
            }
            _ => {}
        }
    });
    on_cleanup(move || handle.remove());
}

#[component]
fn Header(files_open: RwSignal<bool>) -> impl IntoView {
    let desk = desk();
    let kept = move || match desk.standing.get() {
        Standing::Starting => "opening…".to_owned(),
        Standing::Kept => match desk.done.get() {
            Some(done) => format!("kept on this device · {done}"),
            None => "kept on this device".to_owned(),
        },
        Standing::Keeping => "keeping…".to_owned(),
        Standing::NotKept(why) => {
            format!("NOT kept: {why}. Save the job as a file before you close the page.")
        }
    };
    let not_kept = move || matches!(desk.standing.get(), Standing::NotKept(_));
    let unit = move |units: Units, words: &'static str| {
        view! {
            <button
                class:on=move || desk.units.get() == units
                aria-pressed=move || (desk.units.get() == units).to_string()
                on:click=move |_| desk.set_units(units)
            >
                {words}
            </button>
        }
    };
    let can_undo = Memo::new(move |_| desk.undoes());
    let can_redo = Memo::new(move |_| desk.redoes());
    let named = |verb: &str, step: Option<String>| {
        step.map_or_else(
            || format!("Nothing to {verb}"),
            |step| format!("{verb}: {step}"),
        )
    };
    view! {
        <header class="head">
            <h1>{move || desk.job.with(|job| job.name.clone())}</h1>
            <span class="kept" class:wrong=not_kept role="status">{kept}</span>
            <div class="tools">
                <div class="pair" role="group" aria-label="Lengths in">
                    {unit(Units::Metric, "mm")}
                    {unit(Units::FeetInches, "ft in")}
                </div>
                <button
                    disabled=move || can_undo.get().is_none()
                    title=move || named("undo", can_undo.get())
                    on:click=move |_| desk.undo()
                >
                    "Undo"
                </button>
                <button
                    disabled=move || can_redo.get().is_none()
                    title=move || named("redo", can_redo.get())
                    on:click=move |_| desk.redo()
                >
                    "Redo"
                </button>
                <button
                    aria-expanded=move || files_open.get().to_string()
                    on:click=move |_| files_open.update(|open| *open = !*open)
                >
                    "Files"
                </button>
            </div>
        </header>
    }
}

#[component]
fn Rail() -> impl IntoView {
    let desk = desk();
    let links: Vec<_> = Where::ALL
        .into_iter()
        .map(|place| {
            view! {
                <a
                    href=place.address()
                    class:here=move || desk.place.get() == place
                    aria-current=move || (desk.place.get() == place).then_some("page")
                >
                    <svg viewBox="0 0 24 24" aria-hidden="true">
                        <path d=icon(place)></path>
                    </svg>
                    <span>{place.name()}</span>
                </a>
            }
        })
        .collect();
    view! { <nav class="rail" aria-label="Places">{links}</nav> }
}

/// Line drawings, 24 x 24: a bent tube, sticks, joined pieces, a tag, a book.
const fn icon(place: Where) -> &'static str {
    match place {
        Where::Sign => "M4 19V6l8 12V5M16 5v14M20 5v9",
        Where::Glass => "M4 7h13a3 3 0 0 1 0 6H8M4 17h11M4 13h1",
        Where::Circuits => {
            "M5 8a2 2 0 1 0 0-4 2 2 0 0 0 0 4M19 20a2 2 0 1 0 0-4 2 2 0 0 0 0 4M7 6h7a4 4 0 0 1 0 \
             8h-4a2 2 0 0 0 0 4h7"
        }
        Where::Price => "M4 4h9l7 7-9 9-7-7zM8.5 8.5h.01",
        Where::ShopBook => "M6 4h12v16H8a2 2 0 0 1-2-2zM6 18a2 2 0 0 1 2-2h10",
    }
}

/// What was told last, until it is put away.
#[component]
fn Told() -> impl IntoView {
    let desk = desk();
    move || {
        desk.message.get().map(|message| {
            const MOST: usize = 6;
            let more = message.says.len().saturating_sub(MOST);
            let role = if message.trouble { "alert" } else { "status" };
            view! {
                <section class="told" class:trouble=message.trouble role=role>
                    <div>
                        {message
                            .says
                            .into_iter()
                            .take(MOST)
                            .map(|says| view! { <p>{says}</p> })
                            .collect::<Vec<_>>()}
                        {(more > 0).then(|| view! { <p>{format!("And {more} more of the same kind.")}</p> })}
                    </div>
                    <button on:click=move |_| desk.message.set(None)>"Close"</button>
                </section>
            }
        })
    }
}

#[component]
fn Strip() -> impl IntoView {
    let desk = desk();
    let findings_open = desk.findings_open;
    let totals = move || {
        desk.results.with(|results| {
            let units = desk.units.get();
            let unplaced: usize = results.left_over.iter().map(|left| left.pieces.len()).sum();
            let circuits = results.circuits.len();
            let pieces = results.takeoff.pieces.len();
            view! {
                <span><b>{glass(results.lit(), units)}</b>" lit"</span>
                <span><b>{glass(results.glass(), units)}</b>" glass"</span>
                <span><b>{pieces}</b>{many(pieces, " piece", " pieces")}</span>
                <span>
                    <b>{circuits}</b>
                    {many(circuits, " circuit", " circuits")}
                    {(unplaced > 0).then(|| format!(", {unplaced}{} on no supply", many(unplaced, " piece", " pieces")))}
                </span>
                <span class="strip-price">
                    <b>{format!("{} {}", results.quote.currency, super::price::amount(results.quote.total))}</b>
                </span>
            }
        })
    };
    let gravest = move || {
        desk.results.with(|results| match results.findings.first() {
            Some(finding) if finding.grade > Grade::Note => (
                finding.grade.word(),
                format!("{}: {}", finding.grade.word(), finding.says),
            ),
            _ if results.takeoff.pieces.is_empty() => ("note", "nothing to build yet".to_owned()),
            Some(_) => ("fits", "fits: no stop, no look; read the notes".to_owned()),
            None => ("fits", "fits: nothing found".to_owned()),
        })
    };
    view! {
        <footer class="strip">
            <div class="totals" role="status" aria-label="Totals">{totals}</div>
            <button
                class=move || format!("gravest {}", gravest().0)
                aria-expanded=move || findings_open.get().to_string()
                title="All findings"
                on:click=move |_| {
                    findings_open.update(|open| *open = !*open);
                    window().scroll_to_with_x_and_y(0.0, 0.0);
                }
            >
                {move || gravest().1}
            </button>
        </footer>
    }
}
