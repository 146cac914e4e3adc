//! The panel of files: open, save, demo, fresh starts.

use leptos::prelude::*;
use tubewright::{Job, book};

use crate::desk::{Desk, desk};
use crate::files::{self, Opened, Saved, demo};

fn save(desk: Desk, file: &Saved) {
    match files::save(file) {
        Ok(()) => desk.tell(format!("Saved as {}.", file.name)),
        Err(why) => desk.trouble(vec![why]),
    }
}

/// The panel.
#[component]
pub(super) fn FilesPanel(
    /// Whether it is open.
    open: RwSignal<bool>,
) -> impl IntoView {
    let desk = desk();
    let put = move |opened: Opened| {
        files::put(desk, opened);
        open.set(false);
    };
    let saves = move |words: &'static str, file: fn(Desk) -> Saved| {
        view! { <button on:click=move |_| save(desk, &file(desk))>{words}</button> }
    };
    let demos: Vec<_> = demo::jobs()
        .into_iter()
        .map(|job| {
            let name = job.name.clone();
            view! {
                <button on:click=move |_| {
                    // A demo job is planned with the demo book; one's own book is not touched.
                    let own = desk.book.with_untracked(|book| *book != demo::book());
                    put(Opened::Job(Box::new(job.clone())));
                    if own {
                        desk.tell(
                            "Opened an invented job. Its tubes and supplies are in the demo book: \
                             open that too if this book does not have them.",
                        );
                    }
                }>
                    {name}
                </button>
            }
        })
        .collect();
    let aside = move || {
        desk.set_aside()
            .into_iter()
            .map(|(name, text)| {
                let words = format!("Save “{name}”, which could not be read");
                view! {
                    <button on:click=move |_| save(desk, &Saved::as_kept(&name, text.clone()))>{words}</button>
                }
            })
            .collect::<Vec<_>>()
    };
    view! {
        <section class="panel files" aria-label="Files">
            <header class="panel-head">
                <h2>"Files"</h2>
                <button on:click=move |_| open.set(false)>"Close"</button>
            </header>
            <p class="quiet">
                "Everything stays on this device. Opening never loses what is open: Undo brings it back."
            </p>
            <h3>"Open"</h3>
            <div class="buttons">
                <label class="button act">
                    "Open a file…"
                    <input
                        class="unseen"
                        type="file"
                        accept=".json,.csv,.txt,.svg,.dxf,.ttf,.otf,.ttc,application/json,text/csv,image/svg+xml"
                        on:change=move |event| {
                            files::choose(desk, &event);
                            open.set(false);
                        }
                    />
                </label>
                <button on:click=move |_| {
                    put(Opened::Job(Box::new(Job {
                        rules: desk.job.with_untracked(|job| job.rules.clone()),
                        site: desk.job.with_untracked(|job| job.site.clone()),
                        ..Job::default()
                    })));
                    desk.tell("A new, empty sign. Undo brings the one before back.");
                }>"New sign"</button>
            </div>
            <p class="quiet">
                "A job or shop book (JSON), a list of supplies or tube types (CSV), artwork (SVG, DXF), or a font (TTF, OTF). Or drop a file anywhere on the page."
            </p>
            <h3>"Save"</h3>
            <div class="buttons">
                {saves("Save job", |desk| desk.job.with_untracked(Saved::job))}
                {saves("Save shop book", |desk| desk.book.with_untracked(Saved::book))}
                {saves("Save supplies (CSV)", |desk| desk.book.with_untracked(Saved::supplies))}
                {saves("Save tube types (CSV)", |desk| desk.book.with_untracked(Saved::tubes))}
                {aside}
            </div>
            <h3>"Invented jobs to try"</h3>
            <div class="buttons">{demos}</div>
            <h3>"Shop book"</h3>
            <div class="buttons">
                <button on:click=move |_| {
                    put(Opened::Book(Box::new(book::starter())));
                    desk.tell(
                        "A fresh shop book with tube types on the default model and no supplies. \
                         Type your own in from their nameplates.",
                    );
                }>"Start my own book"</button>
                <button on:click=move |_| put(Opened::Book(Box::new(demo::book())))>
                    "Open the invented demo book"
                </button>
            </div>
        </section>
    }
}
