//! Findings as they are listed everywhere.

use leptos::prelude::*;
use tubewright::rules::{Finding, Grade, Place};

use crate::desk::{BookPart, Desk, Where, desk};

/// A grade as a word on its colour; without one, it fits.
pub(super) fn chip(grade: Option<Grade>) -> impl IntoView {
    let (class, word) = match grade {
        Some(Grade::Stop) => ("stop", "stop"),
        Some(Grade::Look) => ("look", "look"),
        Some(Grade::Note) | None => ("fits", "fits"),
    };
    view! { <span class=format!("chip {class}")>{word}</span> }
}

/// The word for one or for many.
pub(super) const fn many(count: usize, one: &'static str, many: &'static str) -> &'static str {
    if count == 1 { one } else { many }
}

/// One finding: its grade as a word, the sentence, where the limit comes from.
pub(super) fn line(finding: &Finding) -> impl IntoView + use<> {
    let grade = finding.grade.word();
    let source = if finding.source.standing == finding.source.from
        || finding.source.standing.starts_with(&finding.source.from)
    {
        finding.source.standing.to_owned()
    } else {
        format!("{} ({})", finding.source.words(), finding.source.standing)
    };
    view! {
        <p class=format!("finding {grade}")>
            <b class="grade">{grade}</b>
            <span>{finding.says.clone()}</span>
            <span class="source">{source}</span>
        </p>
    }
}

/// Goes to where a finding belongs, and brings it into sight.
pub(super) fn go(desk: Desk, place: &Place) {
    let seek = match place {
        Place::Job => {
            desk.place.set(Where::Sign);
            ".job".to_owned()
        }
        Place::Row(row) => {
            desk.place.set(Where::Sign);
            format!("[data-row='{row}']")
        }
        Place::Piece(piece) => {
            desk.piece.set(Some(*piece));
            desk.place.set(Where::Sign);
            ".picture".to_owned()
        }
        Place::Circuit(number) => {
            desk.circuit.set(*number);
            desk.place.set(Where::Circuits);
            ".card.open".to_owned()
        }
        Place::Supply(name) => {
            desk.book_part.set(BookPart::Supplies);
            desk.entry.set(Some(name.clone()));
            desk.place.set(Where::ShopBook);
            ".entries .open".to_owned()
        }
        Place::Tube(name) => {
            desk.book_part.set(BookPart::Tubes);
            desk.entry.set(Some(name.clone()));
            desk.place.set(Where::ShopBook);
            ".entries .open".to_owned()
        }
        Place::Electrode(name) => {
            desk.book_part.set(BookPart::Electrodes);
            desk.entry.set(Some(name.clone()));
            desk.place.set(Where::ShopBook);
            ".entries .open".to_owned()
        }
        Place::Rules(_) => {
            desk.book_part.set(BookPart::Rules);
            desk.place.set(Where::ShopBook);
            ".rule-sets".to_owned()
        }
        Place::Price => {
            desk.place.set(Where::Price);
            ".price".to_owned()
        }
    };
    desk.findings_open.set(false);
    // Two frames on, the place has been drawn and scrolled to its top.
    request_animation_frame(move || {
        request_animation_frame(move || {
            if let Ok(Some(found)) = document().query_selector(&seek) {
                found.scroll_into_view();
            }
        });
    });
}

/// Where a finding belongs, in words.
fn belongs(desk: Desk, place: &Place) -> String {
    match place {
        Place::Job => "the job".to_owned(),
        Place::Row(row) => format!("row {}", row + 1),
        Place::Piece(piece) => desk.results.with_untracked(|results| {
            results.takeoff.pieces.get(*piece).map_or_else(
                || "a piece".to_owned(),
                |found| format!("piece “{}”", found.label),
            )
        }),
        Place::Circuit(number) => format!("circuit {}", number + 1),
        Place::Supply(name) | Place::Tube(name) | Place::Electrode(name) | Place::Rules(name) => {
            name.clone()
        }
        Place::Price => "the price".to_owned(),
    }
}

/// Every finding of the job, gravest first; each leads to its place.
#[component]
pub fn FindingsList() -> impl IntoView {
    let desk = desk();
    let list = move || {
        let results = desk.results.get();
        if results.findings.is_empty() {
            return view! { <p class="quiet">"Nothing to say: no stop, no look, no note."</p> }
                .into_any();
        }
        results
            .findings
            .iter()
            .map(|finding| {
                let place = finding.place.clone();
                let to = format!("Go to {}", belongs(desk, &place));
                view! {
                    <li>
                        {line(finding)}
                        <button class="link" on:click=move |_| go(desk, &place)>{to}</button>
                    </li>
                }
            })
            .collect::<Vec<_>>()
            .into_any()
    };
    view! { <ul class="findings">{list}</ul> }
}
