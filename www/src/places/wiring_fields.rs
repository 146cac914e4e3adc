//! Leads and feed: what is typed of them for the whole job.

use leptos::prelude::*;
use tubewright::Job;
use tubewright::feed::CONDUCTORS;
use tubewright::job::{LeadRun, Wiring};
use tubewright::measure::with_units;

use super::feed::FeedFigures;
use super::fields::{Choice, Field, Tick, figure, money, optional_figure, typed};
use super::findings::line;
use crate::desk::{Desk, desk};

/// The panel.
#[component]
pub(super) fn LeadsAndFeed() -> impl IntoView {
    view! {
        <section class="panel form leads-and-feed" aria-label="Leads and feed">
            <h2>"Leads and feed"</h2>
            <LeadFields/>
            <FeedFields/>
            <FeedFigures/>
        </section>
    }
}

#[component]
fn LeadFields() -> impl IntoView {
    let desk = desk();
    let cables = Signal::derive(move || {
        desk.book.with(|book| {
            let mut cables = vec![(String::new(), "not chosen".to_owned())];
            cables.extend(
                book.cables
                    .iter()
                    .map(|cable| (cable.name.clone(), cable.name.clone())),
            );
            cables
        })
    });
    let conduit = Memo::new(move |_| desk.job.with(|job| job.wiring.run == LeadRun::MetalConduit));
    let distance = move || {
        if conduit.get() {
            wiring_length(desk, "Bore of the conduit", "not known", |w| {
                &mut w.conduit_bore
            })
            .into_any()
        } else {
            let label = "From the middle of the cable to the nearest earthed part";
            wiring_length(desk, label, "not known", |w| &mut w.from_earthed).into_any()
        }
    };
    let said = move || {
        desk.results
            .with(|results| results.wiring.iter().map(line).collect::<Vec<_>>())
    };
    view! {
        <h3>"High-voltage leads of all circuits"</h3>
        <p class="quiet">
            "Lead A goes from the supply to the first electrode of its circuit, lead B from the last one back, jumpers from piece to piece. A length that is not typed is taken straight from the drawing, where the supplies' place is given. A lead has a limit of its own; jumpers are to be as short as practicable, no code gives a figure."
        </p>
        <div class="form-fields">
            <Choice
                label="Cable"
                value=Signal::derive(move || desk.job.with(|job| job.wiring.cable.clone()))
                options=cables
                commit=move |name: String| desk.edit_job("cable", "Cable", |job| job.wiring.cable = name)
            />
            <Choice
                label="Leads run in"
                value=Signal::derive(move || run_word(desk.job.with(|job| job.wiring.run)).to_owned())
                options=Signal::stored(run_options())
                commit=move |word: String| desk.edit_job("lead run", "What leads run in", |job| {
                    job.wiring.run = run(&word);
                })
            />
            {distance}
            {wiring_length(desk, "Supplies, right of the sign's left edge", "not given; a minus: left of it", |w| &mut w.supply_right)}
            {wiring_length(desk, "Supplies, above the sign's bottom edge", "not given; a minus: below it", |w| &mut w.supply_up)}
            <Field
                label="Added to lengths from the drawing, %"
                number=true
                example="0, the default"
                value=Signal::derive(move || {
                    typed(Some(desk.job.with(|job| job.wiring.slack_percent)).filter(|slack| *slack != 0.0))
                })
                commit=move |text: String| {
                    let slack = if text.trim().is_empty() { 0.0 } else { figure(&text, "%")? };
                    desk.edit_job("slack", "Slack of leads", |job| job.wiring.slack_percent = slack);
                    Ok(())
                }
            />
            {wiring_length(desk, "Added to each for its ends", "nothing, the default", |w| &mut w.ends)}
            {wiring_length(desk, "Every lead A", "from the drawing", |w| &mut w.lead_a)}
            {wiring_length(desk, "Every lead B", "from the drawing", |w| &mut w.lead_b)}
            {wiring_length(desk, "Every jumper", "from the drawing", |w| &mut w.jumper)}
        </div>
        {said}
    }
}

#[component]
fn FeedFields() -> impl IntoView {
    let desk = desk();
    let conductors: Vec<(String, String)> =
        core::iter::once((String::new(), "not chosen".to_owned()))
            .chain(CONDUCTORS.iter().map(|conductor| {
                let name = conductor.name.to_owned();
                (
                    name,
                    format!("{}, at {} °C", conductor.name, conductor.table.celsius()),
                )
            }))
            .collect();
    let text = move |get: fn(&Job) -> Option<String>| {
        Signal::derive(move || desk.job.with(get).unwrap_or_default())
    };
    view! {
        <h3>"Feed from the mains"</h3>
        <div class="form-fields">
            <Field
                label="Branch circuit, A"
                number=true
                example="not given"
                value=text(|job| job.feed.circuit_amps.map(|amps| amps.to_string()))
                commit=move |text: String| {
                    let amps = optional_figure(&text, "A")?;
                    desk.edit_job("branch circuit", "Branch circuit", |job| job.feed.circuit_amps = amps);
                    Ok(())
                }
            />
            <Choice
                label="Conductor"
                home="the table"
                value=text(|job| Some(job.feed.conductor.clone()))
                options=Signal::stored(conductors)
                commit=move |name: String| desk.edit_job("conductor", "Conductor of the feed", |job| {
                    job.feed.conductor = name;
                })
            />
            <Field
                label="Length of the feed, one way"
                example="not given"
                value=text(|job| Some(job.feed.length.clone()))
                commit=move |text: String| {
                    let text = with_units(text.trim(), desk.bare());
                    desk.edit_job("feed length", "Length of the feed", |job| job.feed.length = text);
                    Ok(())
                }
            />
            <Field
                label="Hours lit in a year"
                number=true
                example="not given"
                value=text(|job| job.feed.hours_per_year.map(|hours| hours.to_string()))
                commit=move |text: String| {
                    let hours = optional_figure(&text, "")?;
                    desk.edit_job("hours", "Hours lit in a year", |job| job.feed.hours_per_year = hours);
                    Ok(())
                }
            />
            <Field
                label="Price of a kilowatt-hour"
                number=true
                example="not given"
                value=text(|job| job.feed.price_per_kwh.map(|price| price.to_string()))
                commit=move |text: String| {
                    let price = if text.trim().is_empty() { None } else { Some(money(&text)?) };
                    desk.edit_job("kwh", "Price of a kilowatt-hour", |job| job.feed.price_per_kwh = price);
                    Ok(())
                }
            />
            <Tick
                label="Other sign loads hang on the circuit too"
                value=Signal::derive(move || desk.job.with(|job| job.feed.other_loads))
                commit=move |yes: bool| desk.edit_job("other loads", "Other sign loads", |job| {
                    job.feed.other_loads = yes;
                })
            />
            <Tick
                label="It is the circuit of an outlet the code asks for"
                value=Signal::derive(move || desk.job.with(|job| job.feed.required_outlet))
                commit=move |yes: bool| desk.edit_job("outlet", "Required outlet", |job| {
                    job.feed.required_outlet = yes;
                })
            />
        </div>
    }
}

/// A length of the wiring; empty: what the example says.
fn wiring_length(
    desk: Desk,
    label: &'static str,
    example: &'static str,
    of: fn(&mut Wiring) -> &mut String,
) -> impl IntoView {
    let value = Signal::derive(move || {
        let mut wiring = desk.job.with(|job| job.wiring.clone());
        std::mem::take(of(&mut wiring))
    });
    view! {
        <Field
            label=label
            example=example
            value=value
            commit=move |typed: String| {
                let typed = units_written(desk, &typed);
                desk.edit_job(label, label, |job| *of(&mut job.wiring) = typed);
                Ok(())
            }
        />
    }
}

/// A typed length with its unit written out, a minus before it kept.
pub(super) fn units_written(desk: Desk, typed: &str) -> String {
    let typed = typed.trim();
    match typed.strip_prefix(['-', '\u{2212}']) {
        Some(below) => format!("-{}", with_units(below.trim(), desk.bare())),
        None => with_units(typed, desk.bare()),
    }
}

const fn run_word(run: LeadRun) -> &'static str {
    match run {
        LeadRun::MetalConduit => "metal",
        LeadRun::PlasticConduit => "plastic",
        LeadRun::FreeAir => "air",
    }
}

fn run(word: &str) -> LeadRun {
    match word {
        "plastic" => LeadRun::PlasticConduit,
        "air" => LeadRun::FreeAir,
        _ => LeadRun::MetalConduit,
    }
}

fn run_options() -> Vec<(String, String)> {
    [
        ("metal", "metal conduit (default)"),
        ("plastic", "plastic conduit"),
        ("air", "free air"),
    ]
    .into_iter()
    .map(|(value, words)| (value.to_owned(), words.to_owned()))
    .collect()
}
