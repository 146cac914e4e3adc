//! Sign: the picture, the rows, and what is true of the whole job.

use leptos::prelude::*;
use tubewright::Job;
use tubewright::book::Dampness;
use tubewright::job::{Outline, Wish};
use tubewright::measure::{length_shown, milliamps_shown, with_units};
use tubewright::rules::Place;

use super::Rows;
use super::fields::{Choice, Field, Figure, Tick, always, optional_figure, typed};
use super::findings::{line, many};
use crate::desk::{Desk, Task, Where, desk};
use crate::pictures::{SignPicture, part_marked};

/// The place.
#[component]
pub fn Sign() -> impl IntoView {
    let circuits = RwSignal::new(false);
    view! {
        <div class="sign-place">
            <SignPicture circuits=circuits focus=Signal::stored(None)>
                <button
                    aria-pressed=move || circuits.get().to_string()
                    class:on=move || circuits.get()
                    on:click=move |_| circuits.update(|on| *on = !*on)
                >
                    "Circuits"
                </button>
            </SignPicture>
            <div class="sign-columns">
                <Rows/>
                <div class="sign-side">
                    <Marked/>
                    <JobPanel/>
                </div>
            </div>
        </div>
    }
}

/// The piece that was tapped.
#[component]
fn Marked() -> impl IntoView {
    let desk = desk();
    move || {
        let at = desk.piece.get()?;
        let results = desk.results.get();
        let piece = results.takeoff.pieces.get(at)?;
        let units = desk.units.get();
        let circuit = results.circuit_of(at);
        let on = circuit
            .and_then(|number| results.circuits.get(number))
            .map(|circuit| {
                let current = match circuit.assessment.heavier().operating {
                    tubewright::circuit::Operating::Runs { current, .. } => {
                        milliamps_shown(current)
                    }
                    tubewright::circuit::Operating::Overloaded { .. } => "no current".to_owned(),
                };
                format!("{}, {current}", circuit.supply.name)
            });
        let button = circuit.map(|number| {
            view! {
                <button class="link" on:click=move |_| {
                    desk.circuit.set(number);
                    desk.place.set(Where::Circuits);
                }>{format!("Circuit {}", number + 1)}</button>
            }
        });
        Some(view! {
            <section class="panel" aria-label="Marked piece">
                <header class="panel-head">
                    <h2>{piece.label.clone()}<small>{format!(" piece {}, row {}", at + 1, piece.row + 1)}</small></h2>
                    <button on:click=move |_| {
                        desk.task.set(None);
                        desk.piece.set(None);
                    }>"Close"</button>
                </header>
                <div class="figures">
                    <Figure figure=length_shown(piece.lit, units) caption="lit glass"/>
                    <Figure figure=length_shown(piece.hidden, units) caption="painted out"/>
                    <Figure figure=length_shown(piece.tails, units) caption="tails"/>
                    <Figure figure=length_shown(piece.glass(), units) caption="glass to bend"/>
                    <Figure figure=piece.bends.len().to_string() caption=many(piece.bends.len(), "bend", "bends")/>
                </div>
                <PieceTools at=at/>
                <p>{piece.tube.clone()}</p>
                <p>{on.unwrap_or_else(|| "on no circuit".to_owned())}" "{button}</p>
            </section>
        })
    }
}

/// Up to so many crossovers get a button each; all have a mark on the picture.
const MOST_PARTS: usize = 12;

/// What can be done to the marked piece.
#[component]
fn PieceTools(at: usize) -> impl IntoView {
    let desk = desk();
    let task = move |task: Task, label: &'static str| {
        let on = move || desk.task.get() == Some(task);
        view! {
            <button
                aria-pressed=move || on().to_string()
                class:on=on
                on:click=move |_| desk.task.update(|now| {
                    *now = if *now == Some(task) { None } else { Some(task) };
                })
            >{label}</button>
        }
    };
    let parts = move || {
        desk.results.with(|results| {
            let piece = results.takeoff.pieces.get(at)?;
            let parts: Vec<_> = piece
                .jumps
                .iter()
                .take(MOST_PARTS)
                .enumerate()
                .map(|(number, jump)| {
                    let after = jump.after;
                    view! {
                        <button on:click=move |_| part_marked(desk, after)>
                            {format!("Part at {}", number + 1)}
                        </button>
                    }
                })
                .collect();
            Some(parts)
        })
    };
    let says = move || match desk.task.get() {
        Some(Task::Join) => {
            "Tap the piece to join it with: both become one, over a crossover that is painted out."
        }
        Some(Task::Cut) => {
            "Tap the place on this piece to cut it: from there on it is a piece of its own."
        }
        None => {
            "Numbers on the picture are its crossovers. Parted there, the painted-out glass is not made."
        }
    };
    let any = move || {
        desk.task.get().is_some()
            || desk.results.with(|results| {
                let piece = results.takeoff.pieces.get(at);
                piece.is_some_and(|piece| !piece.jumps.is_empty())
            })
    };
    view! {
        <div class="piece-tools" role="group" aria-label="Change this piece">
            {task(Task::Join, "Join with…")}
            {task(Task::Cut, "Cut…")}
            {parts}
        </div>
        <Show when=any>
            <p class="quiet" aria-live="polite">{says}</p>
        </Show>
    }
}

#[component]
fn JobPanel() -> impl IntoView {
    let desk = desk();
    let text = move |get: fn(&Job) -> &String| {
        Signal::derive(move || desk.job.with(|job| get(job).clone()))
    };
    let set = move |field: &'static str, set: fn(&mut Job, String)| {
        Callback::new(move |typed: String| {
            desk.edit_job(field, field, |job| set(job, typed));
            Ok(())
        })
    };
    let rule_sets = Signal::derive(move || {
        desk.book.with(|book| {
            let mut sets = vec![(String::new(), "none".to_owned())];
            sets.extend(
                book.rule_sets
                    .iter()
                    .map(|set| (set.name.clone(), set.name.clone())),
            );
            sets
        })
    });
    let said = move || {
        desk.results.with(|results| {
            results
                .findings
                .iter()
                .filter(|finding| {
                    matches!(finding.place, Place::Job | Place::Rules(_) | Place::Tube(_))
                })
                .map(line)
                .collect::<Vec<_>>()
        })
    };
    view! {
        <section class="panel job" aria-label="This job">
            <h2>"This job"</h2>
            <Field label="Name" live=always() value=text(|job| &job.name) commit=set("Name", |job, typed| job.name = typed)/>
            <Field label="Customer" live=always() value=text(|job| &job.customer) commit=set("Customer", |job, typed| job.customer = typed)/>
            <Field label="Note" live=always() value=text(|job| &job.note) commit=set("Note", |job, typed| job.note = typed)/>
            <Choice
                label="Rules it is held against"
                value=text(|job| &job.rules)
                options=rule_sets
                commit=move |name: String| desk.edit_job("rules", "Rules", |job| job.rules = name)
            />
            <Choice
                label="The plan strives for"
                value=Signal::derive(move || match desk.job.with(|job| job.wish) {
                    Wish::FewestSupplies => "fewest".to_owned(),
                    Wish::LowestPrice => "price".to_owned(),
                })
                options=Signal::stored(vec![
                    ("fewest".to_owned(), "fewest supplies, then the smallest".to_owned()),
                    ("price".to_owned(), "lowest price of supplies".to_owned()),
                ])
                commit=move |wish: String| desk.edit_job("wish", "What the plan strives for", |job| {
                    job.wish = if wish == "price" { Wish::LowestPrice } else { Wish::FewestSupplies };
                })
            />
            <Field
                label="Mains volts at the sign"
                number=true
                example="not checked"
                value=Signal::derive(move || typed(desk.job.with(|job| job.site.mains_volts)))
                commit=move |typed: String| {
                    let volts = optional_figure(&typed, "V")?;
                    desk.edit_job("mains", "Mains volts", |job| job.site.mains_volts = volts);
                    Ok(())
                }
            />
            <Choice
                label="Where the supplies stand"
                value=Signal::derive(move || damp_word(desk.job.with(|job| job.site.place)).to_owned())
                options=Signal::stored(damp_options())
                commit=move |word: String| desk.edit_job("place", "Where the supplies stand", |job| {
                    job.site.place = damp(&word);
                })
            />
            {outline(desk, "The sign is at most this wide", |outline| &mut outline.width)}
            {outline(desk, "The sign is at most this high", |outline| &mut outline.height)}
            <Tick
                label="Outdoors below 0 °C at times"
                value=Signal::derive(move || desk.job.with(|job| job.site.cold))
                commit=move |cold: bool| desk.edit_job("cold", "Cold", |job| job.site.cold = cold)
            />
            {said}
        </section>
    }
}

/// A side of the sign's outer size; empty: not limited.
fn outline(desk: Desk, label: &'static str, of: fn(&mut Outline) -> &mut String) -> impl IntoView {
    let value = Signal::derive(move || {
        let outline = desk.job.with(|job| job.outline.clone());
        std::mem::take(of(&mut outline.unwrap_or_default()))
    });
    view! {
        <Field
            label=label
            example="not limited"
            value=value
            commit=move |typed: String| {
                let typed = with_units(typed.trim(), desk.bare());
                desk.edit_job(label, label, |job| {
                    let mut outline = job.outline.take().unwrap_or_default();
                    *of(&mut outline) = typed;
                    job.outline = Some(outline).filter(|outline| *outline != Outline::default());
                });
                Ok(())
            }
        />
    }
}

/// The word of a dampness.
pub(super) const fn damp_word(place: Dampness) -> &'static str {
    match place {
        Dampness::Dry => "dry",
        Dampness::Damp => "damp",
        Dampness::Wet => "wet",
    }
}

/// The dampness of a word; dry for any other.
pub(super) fn damp(word: &str) -> Dampness {
    match word {
        "wet" => Dampness::Wet,
        "damp" => Dampness::Damp,
        _ => Dampness::Dry,
    }
}

/// All of them, to choose from.
pub(super) fn damp_options() -> Vec<(String, String)> {
    [
        ("dry", "dry, indoors"),
        ("damp", "damp, sheltered"),
        ("wet", "wet, in the rain"),
    ]
    .into_iter()
    .map(|(value, words)| (value.to_owned(), words.to_owned()))
    .collect()
}
