//! What the supplies draw from the mains, in figures.

use leptos::prelude::*;
use tubewright::feed::FeedWork;
use tubewright::measure::grouped;

use super::fields::Figure;
use super::findings::{line, many};
use super::price::amount;
use crate::desk::desk;

/// The figures and findings of the feed; nothing where there is no supply.
#[component]
pub(super) fn FeedFigures() -> impl IntoView {
    let desk = desk();
    move || {
        desk.results.with(|results| {
            let feed = &results.feed;
            if feed.supplies.is_empty() {
                return None;
            }
            let currency = desk.book.with(|book| book.rates.currency.clone());
            Some(view! {
                <div class="figures">{figures(feed, &currency)}</div>
                <p class="quiet">{counted(feed)}</p>
                <div class="scroll">
                    <table aria-label="Supplies on the feed">
                        <thead>
                            <tr>
                                <th scope="col">"Supply"</th>
                                <th scope="col">"Number"</th>
                                <th scope="col">"Each, VA"</th>
                                <th scope="col">"Each, A"</th>
                                <th scope="col">"On one circuit"</th>
                            </tr>
                        </thead>
                        <tbody>{supplies(feed)}</tbody>
                    </table>
                </div>
                {feed.findings.iter().map(line).collect::<Vec<_>>()}
            })
        })
    }
}

fn figures(feed: &FeedWork, currency: &str) -> impl IntoView + use<> {
    let unknown = || "not known".to_owned();
    let amps = |amps: Option<f64>| amps.map_or_else(unknown, |amps| format!("{amps:.1} A"));
    let volts = feed
        .mains_volts
        .map_or_else(String::new, |volts| format!(" at {volts} V"));
    let drawn = format!(
        "drawn{volts}, {}",
        feed.total_va
            .map_or_else(unknown, |va| format!("{} VA", grouped(va)))
    );
    let counted = format!("counted, {} %", feed.counted_percent);
    let branches = feed.branches.map(|branches| {
        let count = branches.count;
        let says = if branches.least {
            many(count, "branch circuit needed", "branch circuits needed")
        } else {
            "branch circuits needed at most"
        };
        view! { <Figure figure=count.to_string() caption=says/> }
    });
    let drop = feed.drop.map(|drop| {
        let figure = format!("{:.1} V", drop.volts);
        let percent = drop.percent.map_or_else(String::new, |percent| {
            format!(", {percent:.1} % of the mains")
        });
        let caption = format!(
            "lost over {:.1} m at {:.1} A{percent}; {}",
            drop.length_m,
            drop.amps,
            drop.conductor.table.words()
        );
        view! { <Figure figure=figure caption=caption/> }
    });
    let year = feed.kwh_per_year.map(|kwh| {
        view! { <Figure figure=format!("{} kWh", grouped(kwh)) caption="in a year, at least"/> }
    });
    let cost = feed.cost_per_year.map(|cost| {
        let cost = format!("{currency} {}", amount(cost));
        view! { <Figure figure=cost caption="in a year, at least"/> }
    });
    view! {
        <Figure figure=amps(feed.total_amps) caption=drawn/>
        <Figure figure=amps(feed.counted_amps) caption=counted/>
        {branches}
        {drop}
        {year}
        {cost}
    }
}

/// By which clause the load is counted so.
fn counted(feed: &FeedWork) -> String {
    let by = feed.counted_by.as_ref().map_or_else(
        || "No rule in use says what continuous loads are counted as.".to_owned(),
        |source| {
            format!(
                "Sign loads are continuous: counted as {} % of themselves ({}).",
                feed.counted_percent,
                source.words()
            )
        },
    );
    format!(
        "{by} The feed carries volt-amperes, more than the watts of the tubes: the plate's or those \
         worked out, the larger of both."
    )
}

fn supplies(feed: &FeedWork) -> Vec<impl IntoView + use<>> {
    feed.supplies
        .iter()
        .map(|supply| {
            let va = supply.va.map_or_else(
                || "not known".to_owned(),
                |va| {
                    let from = if supply.from_plate {
                        "plate"
                    } else {
                        "worked out"
                    };
                    format!("{}, {from}", grouped(va))
                },
            );
            let amps = supply
                .amps
                .map_or_else(|| "–".to_owned(), |amps| format!("{amps:.2}"));
            let each = supply
                .per_circuit
                .map_or_else(|| "–".to_owned(), |count| count.to_string());
            view! {
                <tr>
                    <th scope="row">{supply.name.clone()}</th>
                    <td>{supply.count}</td>
                    <td>{va}</td>
                    <td>{amps}</td>
                    <td>{each}</td>
                </tr>
            }
        })
        .collect()
}
