//! Circuits: each string with its supply, and why.

use leptos::prelude::*;
use tubewright::circuit::{Half, Operating};
use tubewright::job::Wish;
use tubewright::measure::{glass, milliamps_shown, volts_shown};
use tubewright::rules::Limits;
use tubewright::workup::CircuitWork;

use super::fields::Figure;
use super::findings::{chip, line, many};
use super::leads::CircuitLeadsPanel;
use super::profile::{AlongString, UnseenKey, bands, shares_of};
use super::wiring_fields::LeadsAndFeed;
use crate::desk::{Results, desk};
use crate::pictures::{LoadingBar, SignPicture};

/// The place.
#[component]
pub fn Circuits() -> impl IntoView {
    let desk = desk();
    let count = Memo::new(move |_| desk.results.with(|results| results.circuits.len()));
    let open = Memo::new(move |_| desk.circuit.get().min(count.get().saturating_sub(1)));
    let focus = Signal::derive(move || (count.get() > 1).then(|| open.get()));
    let rules = move || {
        desk.results.with(|results| match &results.rules {
            Some(set) if set.edition.is_empty() => format!("Rules in use: {}.", set.name),
            Some(set) => format!("Rules in use: {} ({}).", set.name, set.edition),
            None => "No rule set is in use.".to_owned(),
        })
    };
    let aim = move || {
        let wish = match desk.job.with(|job| job.wish) {
            Wish::FewestSupplies => "the fewest supplies, then the smallest, then the cheapest",
            Wish::LowestPrice => "the lowest price of supplies",
        };
        format!(
            "Best of all splits in reading order: every piece on a supply, then the fewest circuits \
             that need a look, then {wish}."
        )
    };
    let cards = move || {
        let results = desk.results.get();
        (0..results.circuits.len())
            .map(|number| view! { <Card number=number results=results.clone()/> })
            .collect::<Vec<_>>()
    };
    let left_over = move || {
        let results = desk.results.get();
        results
            .left_over
            .iter()
            .map(|left| {
                let names: Vec<String> = left
                    .pieces
                    .iter()
                    .filter_map(|&at| results.takeoff.pieces.get(at))
                    .map(|piece| piece.label.clone())
                    .collect();
                view! {
                    <section class="panel card-none" style:order="-1" aria-label="Pieces without a supply">
                        <header class="card-head">
                            <b>{short(&names)}</b>
                            {chip(Some(tubewright::rules::Grade::Stop))}
                        </header>
                        <p>"No supply in the shop book runs this."</p>
                        <dl class="why">
                            {left.nearest.clone().map(|(name, stop)| view! {
                                <dt>"Nearest"</dt>
                                <dd><b>{name}</b>": "{stop}</dd>
                            })}
                            <dt>"Would fit"</dt>
                            <dd>{left.would_fit.clone()}</dd>
                        </dl>
                    </section>
                }
            })
            .collect::<Vec<_>>()
    };
    let detail = move || {
        let results = desk.results.get();
        (open.get() < results.circuits.len())
            .then(|| view! { <Detail number=open.get() results=results/> })
    };
    let refused = move || {
        let results = desk.results.get();
        (!results.refused.is_empty()).then(|| {
            let list: Vec<_> = results
                .refused
                .iter()
                .map(|refused| {
                    view! {
                        <li>
                            <b>{refused.supply.clone()}</b>
                            {refused.findings.iter().map(line).collect::<Vec<_>>()}
                        </li>
                    }
                })
                .collect();
            let summary = match list.len() {
                1 => "1 supply of the book was not considered for this job".to_owned(),
                many => format!("{many} supplies of the book were not considered for this job"),
            };
            view! {
                <details class="panel refused">
                    <summary>{summary}</summary>
                    <ul>{list}</ul>
                </details>
            }
        })
    };
    view! {
        <p class="danger">
            <b>"High voltage kills."</b>
            " This is a plan, not a permit: local code and a licensed electrician decide. Switch off, lock off and prove dead before touching leads or tubes. "
            {rules}
        </p>
        <SignPicture circuits=Signal::stored(true) focus=focus most=0.26/>
        <UnseenKey/>
        <p class="quiet">
            {aim}
            " Worked with an ideal supply: no winding resistance, no stray capacitance of tubes, no reignition peak; what leads leak stands beside it. Measure the current before the sign goes up."
        </p>
        <Show when=move || desk.results.with(|results| results.circuits.is_empty() && results.left_over.is_empty())>
            <p class="quiet">"No circuits yet: the sign has no glass, or its tube types are not in the shop book."</p>
        </Show>
        <div class="circuit-columns">
            // Equal order keeps the order of writing: left over first, a card, then its detail.
            <div class="circuit-cards">{left_over}{cards}</div>
            <div class="circuit-detail">
                {detail}
                <CircuitLeadsPanel open=open/>
            </div>
        </div>
        <LeadsAndFeed/>
        {refused}
    }
}

/// Labels run together: letters as a word, longer ones with commas; not more than a line.
fn short(labels: &[String]) -> String {
    const MOST: usize = 28;
    let letters = labels.iter().all(|label| label.chars().count() == 1);
    let text = labels.join(if letters { "" } else { ", " });
    if text.chars().count() <= MOST {
        return text;
    }
    let cut: String = text.chars().take(MOST - 1).collect();
    format!("{cut}…")
}

/// The group a circuit lights with, where its rows have one.
fn group(results: &Results, circuit: &CircuitWork) -> Option<String> {
    let first = results.takeoff.pieces.get(*circuit.pieces.first()?)?;
    Some(first.group.clone()).filter(|group| !group.is_empty())
}

fn labels(results: &Results, circuit: &CircuitWork) -> Vec<String> {
    circuit
        .pieces
        .iter()
        .filter_map(|&at| results.takeoff.pieces.get(at))
        .map(|piece| piece.label.clone())
        .collect()
}

fn current_and_volts(operating: &Operating) -> (String, String) {
    match *operating {
        Operating::Runs {
            current, running, ..
        } => (milliamps_shown(current), volts_shown(running)),
        Operating::Overloaded { wanted, .. } => {
            ("none".to_owned(), format!("over {}", volts_shown(wanted)))
        }
    }
}

fn earth_word(results: &Results) -> &'static str {
    results.earth_word().word()
}

#[component]
fn Card(number: usize, results: Results) -> impl IntoView {
    let desk = desk();
    results.circuits.get(number).map(|circuit| {
        let (current, volts) = current_and_volts(&circuit.assessment.heavier().operating);
        let to_earth = volts_shown(circuit.assessment.to_earth_no_load);
        let caption = format!("to {}, no load", earth_word(&results));
        view! {
            <section
                class="panel card"
                style:order=number.to_string()
                class:open=move || desk.circuit.get() == number
                on:click=move |_| desk.circuit.set(number)
                aria-label=format!("Circuit {}", number + 1)
            >
                <header class="card-head">
                    <button
                        class="card-open"
                        aria-pressed=move || (desk.circuit.get() == number).to_string()
                        on:click=move |_| desk.circuit.set(number)
                    >
                        <b>{format!("{}  {}", number + 1, short(&labels(&results, circuit)))}</b>
                    </button>
                    {chip(circuit.grade())}
                </header>
                <p class="supply">{circuit.supply.name.clone()}</p>
                {group(&results, circuit).map(|group| view! { <p class="quiet">"lights with “"{group}"”"</p> })}
                <LoadingBar assessment=circuit.assessment.clone()/>
                <div class="figures">
                    <Figure figure=current caption="current"/>
                    <Figure figure=volts caption="running"/>
                    <Figure figure=to_earth caption=caption/>
                </div>
            </section>
        }
    })
}

#[component]
fn Detail(number: usize, results: Results) -> impl IntoView {
    let desk = desk();
    results.circuits.get(number).map(|circuit| {
        let count = circuit.pieces.len();
        let pieces = format!(" {count}{}, ", many(count, " piece", " pieces"));
        let column = circuit.column;
        let long = move || glass(column, desk.units.get());
        let worked = &circuit.assessment;
        let rating = &circuit.supply;
        let word = earth_word(&results);
        let strings: Vec<_> = worked
            .halves
            .iter()
            .enumerate()
            .map(|(string, half)| {
                let (current, volts) = current_and_volts(&half.operating);
                let share = format!("{:.0} %, {}", half.share * 100.0, half.zone.words());
                let name = (worked.halves.len() > 1).then(|| {
                    let lead = if string == 0 { "Lead A to mid-point" } else { "Mid-point to lead B" };
                    view! { <h3>{lead}</h3> }
                });
                view! {
                    {name}
                    <div class="figures">
                        <Figure figure=current caption=shares_of(&half.operating, circuit)/>
                        <Figure figure=volts caption=share/>
                        <Figure
                            figure=volts_shown(half.strike)
                            caption=format!("to strike, of {} peak", volts_shown(half.strike_from))
                        />
                        {half.chart.as_ref().map(|used| view! {
                            <Figure
                                figure=format!("{:.0} %", used.share * 100.0)
                                caption="used up by the plate's length chart"
                            />
                        })}
                    </div>
                }
            })
            .collect();
        let watts = worked.watts().map(|watts| format!("{watts:.1} W"));
        let va = worked.input_va.map(|va| format!("{va:.0} VA"));
        let factor = worked.power_factor.map(|factor| format!("{factor:.2}"));
        let limit = results
            .rules
            .as_ref()
            .and_then(|rules| rules.rule(Limits::VoltsToEarth).map(|rule| (rules, rule)));
        let limit_says = match limit {
            Some((rules, rule)) => match rule.value {
                Some(limit) => format!(
                    "At most {} at any terminal ({}).",
                    volts_shown(tubewright::measure::Volts::from_volts(limit)),
                    rules.source(rule).words()
                ),
                None => format!("Not filled in, so not checked ({}).", rules.source(rule).words()),
            },
            None => "None in the rules in use, so not checked.".to_owned(),
        };
        let protection: Vec<_> = circuit
            .protection
            .says
            .iter()
            .map(|(caption, says)| view! { <dt>{caption.clone()}</dt><dd>{says.clone()}</dd> })
            .collect();
        let band = bands(&results, circuit).map(|says| view! { <dt>"Current"</dt><dd>{says}</dd> });
        let said: Vec<_> = circuit.findings.iter().map(line).collect();
        let other = |caption: &'static str, other: &Option<(String, String)>| {
            other.clone().map(|(name, says)| {
                view! {
                    <dt>{caption}</dt>
                    <dd><b>{name}</b>": "{says}</dd>
                }
            })
        };
        let in_order = labels(&results, circuit).join(" · ");
        view! {
            <section class="panel detail" style:order=number.to_string() aria-label=format!("Circuit {} in full", number + 1)>
                <header class="card-head">
                    <h2>{format!("Circuit {}", number + 1)}<small>{pieces}{long}" of gas column in series"</small></h2>
                    {chip(circuit.grade())}
                </header>
                <p class="supply"><b>{rating.name.clone()}</b>{format!(" {}", rating.words(results.earth_word()))}</p>
                <LoadingBar assessment=worked.clone()/>
                {strings}
                <div class="figures">
                    <Figure figure=volts_shown(worked.to_earth_running) caption=format!("to {word}, running")/>
                    <Figure figure=volts_shown(worked.to_earth_no_load) caption=format!("to {word}, no load")/>
                    {watts.map(|watts| view! { <Figure figure=watts caption="in the tubes"/> })}
                    {va.map(|va| view! { <Figure figure=va caption=format!("drawn, of {:.0} VA rated", rating.rated_va)/> })}
                    {factor.map(|factor| view! { <Figure figure=factor caption="power factor, without correction"/> })}
                </div>
                <AlongString number=number results=results.clone()/>
                <dl class="why">
                    <dt>"Pieces"</dt>
                    <dd>{in_order}</dd>
                    {other("Next smaller", &circuit.smaller)}
                    {other("Next larger", &circuit.larger)}
                    <dt>{format!("Limit to {word}")}</dt>
                    <dd>{limit_says}</dd>
                    {band}
                    <dt>"Mains ±10 %"</dt>
                    <dd>{mains(&circuit.assessment.halves)}</dd>
                    {protection}
                </dl>
                <details class="layout assumed">
                    <summary><span>"What is taken by default"</span></summary>
                    <ul>{circuit.assumed.iter().map(|says| view! { <li>{says.clone()}</li> }).collect::<Vec<_>>()}</ul>
                </details>
                {said}
            </section>
        }
    })
}

/// Where each string runs at 90 and 110 % of the input volts.
fn mains(halves: &[Half]) -> String {
    let at = |operating: &Operating| match *operating {
        Operating::Runs {
            current, running, ..
        } => {
            format!("{}, {}", milliamps_shown(current), volts_shown(running))
        }
        Operating::Overloaded { .. } => "it does not run".to_owned(),
    };
    let strings: Vec<String> = halves
        .iter()
        .map(|half| {
            format!(
                "at 90 %: {}; at 110 %: {}",
                at(&half.at_low_mains),
                at(&half.at_high_mains)
            )
        })
        .collect();
    strings.join(". Second string ") + "."
}
