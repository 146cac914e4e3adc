//! How a row becomes pieces of glass: a part of the row that opens, and says while it is closed what
//! of it is not as usual.

use leptos::prelude::*;
use tubewright::job::{Each, Pieces, Row};

use super::fields::{Choice, Field, Tick, always};
use super::findings::many;
use super::rows::{edit, part};
use crate::desk::desk;

/// The part of a row that says what is one piece, and what it lights with.
#[component]
pub(super) fn PieceFields(
    /// The row.
    at: usize,
) -> impl IntoView {
    let desk = desk();
    let pieces = Memo::new(move |_| {
        desk.job
            .with(|job| part(job, at, |row| row.pieces().clone()))
    });
    let group = Memo::new(move |_| {
        desk.job
            .with(|job| part(job, at, |row| row.group().to_owned()))
    });
    let drawn = move || {
        desk.job.with(|job| {
            part(job, at, |row| {
                !matches!(row, Row::Text(_) | Row::Outline(_)) && !matches!(row, Row::Strokes(_))
            })
        })
    };
    let shown = move || {
        let mut says = pieces.with(unusual);
        group.with(|group| {
            if !group.is_empty() {
                says.push(format!("lights with “{group}”"));
            }
        });
        says.join(", ")
    };
    let change = move |field: &str, change: &dyn Fn(&mut Pieces)| {
        edit(desk, at, field, |row| change(row.pieces_mut()));
        desk.piece.set(None);
    };
    let open = RwSignal::new(false);
    view! {
        <details class="layout" prop:open=open on:toggle:target=move |event| open.set(event.target().open())>
            <summary><span>"Pieces"</span><small>{shown}</small></summary>
            <Show when=move || open.get()>
                <div class="row-fields">
                    <Choice
                        label="One piece is"
                        value=Signal::derive(move || word(pieces.with(|pieces| pieces.each)).to_owned())
                        options=Signal::derive(move || {
                            let whole = if drawn() {
                                "all lines of one tube, over crossovers"
                            } else {
                                "a word, over crossovers"
                            };
                            vec![
                                ("usual".to_owned(), "as usual".to_owned()),
                                ("touching".to_owned(), "strokes that touch".to_owned()),
                                ("whole".to_owned(), whole.to_owned()),
                            ]
                        })
                        commit=move |word: String| {
                            change("what is one piece", &|pieces| pieces.each = each(&word));
                        }
                    />
                    <Field
                        label="Lights with"
                        class="narrow"
                        live=always()
                        example="all the rest"
                        value=group
                        commit=move |typed: String| {
                            edit(desk, at, "group", |row| typed.trim().clone_into(row.group_mut()));
                            Ok(())
                        }
                    />
                    <Tick
                        label="Keep long pieces in one"
                        value=Signal::derive(move || pieces.with(|pieces| pieces.keep_long))
                        commit=move |keep: bool| {
                            change("long pieces", &|pieces| pieces.keep_long = keep);
                        }
                    />
                    <Show when=move || pieces.with(|pieces| !pieces.is_usual())>
                        <button on:click=move |_| {
                            desk.settle();
                            change("pieces as usual", &|pieces| *pieces = Pieces::default());
                            desk.settle();
                        }>"All as usual again"</button>
                    </Show>
                </div>
                <p class="quiet">
                    "Tap a piece on the picture to join it with another, to part it at a crossover or to cut it. Rows of one name under “Lights with” share circuits with each other and with no other row, so that they can flash. A sign with two faces is its rows made twice, by their Times."
                </p>
            </Show>
        </details>
    }
}

fn word(each: Each) -> &'static str {
    match each {
        Each::Usual => "usual",
        Each::Touching => "touching",
        Each::Whole => "whole",
    }
}

fn each(word: &str) -> Each {
    match word {
        "touching" => Each::Touching,
        "whole" => Each::Whole,
        _ => Each::Usual,
    }
}

/// What of the choices is not as usual, in words.
fn unusual(pieces: &Pieces) -> Vec<String> {
    let mut says = Vec::new();
    match pieces.each {
        Each::Usual => {}
        Each::Touching => says.push("only strokes that touch".to_owned()),
        Each::Whole => says.push("whole words or drawings".to_owned()),
    }
    for (count, one, more) in [
        (pieces.joined.len(), " joined", " joined"),
        (pieces.parted.len(), " parted", " parted"),
        (pieces.cuts.len(), " cut", " cuts"),
    ] {
        if count > 0 {
            says.push(format!("{count}{}", many(count, one, more)));
        }
    }
    if pieces.keep_long {
        says.push("long ones kept in one".to_owned());
    }
    if !pieces.order.is_empty() {
        says.push("in an order of their own".to_owned());
    }
    says
}

#[cfg(test)]
mod tests {
    use super::*;
    use tubewright::job::Cut;

    #[test]
    fn what_is_not_as_usual_is_said() {
        assert_eq!(unusual(&Pieces::default()), Vec::<String>::new());
        let pieces = Pieces {
            each: Each::Touching,
            cuts: vec![Cut {
                stroke: "1".to_owned(),
                share: 0.5,
            }],
            keep_long: true,
            order: vec!["1".to_owned()],
            ..Pieces::default()
        };
        assert_eq!(
            unusual(&pieces).join(", "),
            "only strokes that touch, 1 cut, long ones kept in one, in an order of their own"
        );
    }

    #[test]
    fn every_word_is_read_back() {
        for each_of in [Each::Usual, Each::Touching, Each::Whole] {
            assert_eq!(each(word(each_of)), each_of);
        }
    }
}
