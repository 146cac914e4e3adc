//! The leads of the open circuit: each section, what all leak, and what is typed for this circuit.

use leptos::prelude::*;
use tubewright::job::CircuitLeads;
use tubewright::measure::{length_shown, milliamps_shown, volts_shown};
use tubewright::wiring::{Leads, LengthFrom, Section, What};

use super::fields::{Field, Figure};
use super::wiring_fields::units_written;
use crate::desk::{Desk, Results, desk};

/// The panel. It stays while its circuit is worked out anew, so that a field keeps what is typed in it.
#[component]
pub(super) fn CircuitLeadsPanel(open: Memo<usize>) -> impl IntoView {
    let desk = desk();
    let first = Memo::new(move |_| {
        desk.results.with(|results| {
            let piece = *results.circuits.get(open.get())?.pieces.first()?;
            Some(results.takeoff.pieces.get(piece)?.label.clone())
        })
    });
    let there = move || first.with(Option::is_some);
    let figures = move || {
        let results = desk.results.get();
        let circuit = results.circuits.get(open.get())?;
        let word = results.earth_word().word();
        Some(view! {
            <Sums leads=circuit.leads.clone() word=word/>
            <Sections leads=circuit.leads.clone() pieces=labels(&results, &circuit.pieces) word=word/>
            {circuit.leads.advice.iter().map(|says| view! { <p>{says.clone()}</p> }).collect::<Vec<_>>()}
        })
    };
    view! {
        <Show when=there>
            <section
                class="panel circuit-leads"
                style:order=move || open.get().to_string()
                aria-label=move || format!("Leads of circuit {}", open.get() + 1)
            >
                <h2>{move || format!("Leads of circuit {}", open.get() + 1)}</h2>
                {figures}
                <div class="form-fields">
                    {own_length(desk, first, "Lead A of this circuit", |own| &mut own.a)}
                    {own_length(desk, first, "Lead B of this circuit", |own| &mut own.b)}
                </div>
            </section>
        </Show>
    }
}

fn labels(results: &Results, pieces: &[usize]) -> Vec<String> {
    let piece = |&at: &usize| results.takeoff.pieces.get(at);
    pieces
        .iter()
        .filter_map(piece)
        .map(|piece| piece.label.clone())
        .collect()
}

/// What all sections leak together.
#[component]
fn Sums(leads: Leads, word: &'static str) -> impl IntoView {
    let ma = |ma: f64| format!("{ma:.2} mA");
    let sum = leads.sum_ma.map(|sum| {
        let share = leads.share.map_or_else(String::new, |share| {
            format!(", {:.1} % of the tubes' current", share * 100.0)
        });
        view! { <Figure figure=ma(sum) caption=format!("leaked to {word}{share}")/> }
    });
    let difference = leads.difference_ma.map(|difference| {
        let caption = leads.trip_margin_ma.map_or_else(
            || "more on one side than on the other".to_owned(),
            |margin| {
                format!(
                    "seen by protection with no fault; it trips at {:.2} mA more",
                    margin.max(0.0)
                )
            },
        );
        view! { <Figure figure=ma(difference) caption=caption/> }
    });
    let tube = (!leads.tube.is_empty()).then(|| {
        let strings: Vec<String> = leads.tube.iter().copied().map(milliamps_shown).collect();
        view! { <Figure figure=strings.join(" and ") caption="left for the tubes, about"/> }
    });
    if sum.is_none() && difference.is_none() {
        return view! { <p class="quiet">"What these leads leak is not known: it takes their cable, their lengths and the output frequency."</p> }.into_any();
    }
    view! {
        <div class="figures">
            {sum}
            {difference}
            {tube}
        </div>
    }
    .into_any()
}

/// Jumpers beyond this many are summed up in one line.
const MOST_LINES: usize = 12;

#[component]
fn Sections(leads: Leads, pieces: Vec<String>, word: &'static str) -> impl IntoView {
    let desk = desk();
    let jumper = |section: &&Section| matches!(section.what, What::Jumper(_));
    let jumpers = leads.sections.iter().filter(jumper).count();
    let shown = leads
        .sections
        .iter()
        .filter(|section| !(jumpers > MOST_LINES && jumper(section)));
    let lines: Vec<_> = shown
        .map(|section| {
            let what = match section.what {
                What::LeadA => "Lead A".to_owned(),
                What::LeadB => "Lead B".to_owned(),
                What::Return => "Mid-point return".to_owned(),
                What::Jumper(at) => format!(
                    "{} to {}",
                    pieces.get(at).map_or("", String::as_str),
                    pieces.get(at + 1).map_or("", String::as_str)
                ),
            };
            let from = match section.from {
                LengthFrom::Circuit => "typed for this circuit",
                LengthFrom::All => "typed for all",
                LengthFrom::Drawing => "from the drawing",
                LengthFrom::NotGiven => "",
            };
            let (length, pf) = (section.length, section.pf);
            let long = move || {
                length.map_or_else(
                    || "not given".to_owned(),
                    |length| length_shown(length, desk.units.get()),
                )
            };
            let ma = section
                .ma
                .map_or_else(|| "–".to_owned(), |ma| format!("{ma:.3}"));
            view! {
                <tr>
                    <th scope="row">{what}<small>{from}</small></th>
                    <td>{long}</td>
                    <td>{pf.map_or_else(|| "–".to_owned(), |pf| format!("{pf:.0}"))}</td>
                    <td>{volts_shown(section.to_earth)}</td>
                    <td>{ma}</td>
                </tr>
            }
        })
        .collect();
    let summed = (jumpers > MOST_LINES).then(|| {
        let all = || leads.sections.iter().filter(jumper);
        let length = all().map(|section| section.length).sum::<Option<_>>();
        let pf = all().map(|section| section.pf).sum::<Option<f64>>();
        let ma = all().map(|section| section.ma).sum::<Option<f64>>();
        let long = move || {
            length.map_or_else(
                || "not given".to_owned(),
                |length| length_shown(length, desk.units.get()),
            )
        };
        view! {
            <tr>
                <th scope="row">{format!("{jumpers} jumpers")}</th>
                <td>{long}</td>
                <td>{pf.map_or_else(|| "–".to_owned(), |pf| format!("{pf:.0}"))}</td>
                <td>"–"</td>
                <td>{ma.map_or_else(|| "–".to_owned(), |ma| format!("{ma:.3}"))}</td>
            </tr>
        }
    });
    view! {
        <div class="scroll">
            <table aria-label="Leads and jumpers">
                <thead>
                    <tr>
                        <th scope="col">"Lead or jumper"</th>
                        <th scope="col">"Length"</th>
                        <th scope="col">"pF"</th>
                        <th scope="col">{format!("To {word}, running")}</th>
                        <th scope="col">"Leaks, mA"</th>
                    </tr>
                </thead>
                <tbody>{lines}{summed}</tbody>
            </table>
        </div>
    }
}

/// The length of a lead of the circuit that begins with a piece; empty: as for all.
fn own_length(
    desk: Desk,
    first: Memo<Option<String>>,
    label: &'static str,
    of: fn(&mut CircuitLeads) -> &mut String,
) -> impl IntoView {
    let value = Signal::derive(move || {
        first
            .with(|first| {
                let first = first.as_deref()?;
                desk.job.with(|job| {
                    let mut circuits = job.wiring.circuits.iter();
                    let mut own = circuits.find(|own| own.first == first)?.clone();
                    Some(std::mem::take(of(&mut own)))
                })
            })
            .unwrap_or_default()
    });
    view! {
        <Field
            label=label
            example="as for all"
            value=value
            commit=move |typed: String| {
                let Some(first) = first.get_untracked() else { return Ok(()) };
                let typed = units_written(desk, &typed);
                desk.edit_job(&format!("{label} {first}"), label, |job| {
                    let circuits = &mut job.wiring.circuits;
                    if !circuits.iter().any(|own| own.first == first) {
                        circuits.push(CircuitLeads { first: first.clone(), ..CircuitLeads::default() });
                    }
                    if let Some(own) = circuits.iter_mut().find(|own| own.first == first) {
                        *of(own) = typed;
                    }
                    circuits.retain(|own| !(own.a.is_empty() && own.b.is_empty()));
                });
                Ok(())
            }
        />
    }
}
