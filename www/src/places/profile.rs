//! A circuit along its string: the plot, the marked joint in words, and all joints as a table.

use leptos::prelude::*;
use tubewright::circuit::{Half, Operating, Unseen, insulation_class};
use tubewright::measure::{Volts, milliamps_shown, volts_shown};
use tubewright::takeoff::Piece;
use tubewright::workup::CircuitWork;

use crate::desk::{Results, desk};
use crate::pictures::{ProfilePlot, beside};

/// The part of a circuit in full that goes along its string.
#[component]
pub(super) fn AlongString(
    /// The circuit.
    number: usize,
    /// Of these.
    results: Results,
) -> impl IntoView {
    let desk = desk();
    let last = results
        .circuits
        .get(number)
        .map_or(0, |circuit| circuit.pieces.len());
    let marked = Memo::new(move |_| desk.joint_on(number).filter(|&joint| joint <= last));
    let says = {
        let results = results.clone();
        move || {
            let circuit = results.circuits.get(number)?;
            let pieces = pieces(&results, circuit);
            circuit.profile.joint_says(
                marked.get()?,
                &pieces,
                circuit.protection.map.as_ref(),
                results.earth_word(),
            )
        }
    };
    let words = move || {
        says().unwrap_or_else(|| {
            "No joint is marked: tap one on the plot or at an electrode on the sign, or go from one to the next."
                .to_owned()
        })
    };
    let step = move |after: bool| {
        let joint = beside(marked.get_untracked(), last, after);
        desk.joint.set(Some((number, joint)));
    };
    let key = results.circuits.get(number).and_then(|circuit| {
        let earth = results.earth_word().word();
        let map = circuit.protection.map.as_ref()?;
        map.unseen.as_ref()?;
        let widest = if map.widest.is_some() {
            "; in the lighter hatching too, as mains and the volts of the tubes may be off"
        } else {
            ""
        };
        Some(view! { <p class="quiet">{format!("Hatched: a fault to {earth} there is not sensed{widest}.")}</p> })
    });
    let show = || {
        if let Ok(Some(picture)) = document().query_selector(".picture") {
            picture.scroll_into_view();
        }
    };
    view! {
        <section class="along" aria-label=format!("Circuit {} along its string", number + 1)>
            <h3>"Along the string"</h3>
            <ProfilePlot number=number results=results.clone()/>
            {key}
            <p class="joint-said" aria-live="polite">{words}</p>
            <div class="buttons" role="group" aria-label="Joints">
                <button aria-label="Previous joint" disabled=move || marked.get() == Some(0)
                    on:click=move |_| step(false)>"◂"</button>
                <button aria-label="Next joint" disabled=move || marked.get() == Some(last)
                    on:click=move |_| step(true)>"▸"</button>
                <button disabled=move || marked.get().is_none() on:click=move |_| show()>"Show on the sign"</button>
            </div>
            {results.circuits.get(number).map(|circuit| table(number, &results, circuit))}
        </section>
    }
}

fn pieces<'r>(results: &'r Results, circuit: &CircuitWork) -> Vec<&'r Piece> {
    let all = &results.takeoff.pieces;
    circuit
        .pieces
        .iter()
        .filter_map(|&at| all.get(at))
        .collect()
}

fn unseen(circuit: &CircuitWork) -> Option<&Unseen> {
    circuit.protection.map.as_ref()?.unseen.as_ref()
}

/// All joints with their figures.
fn table(number: usize, results: &Results, circuit: &CircuitWork) -> impl IntoView + use<> {
    let desk = desk();
    let earth = results.earth_word().word();
    let profile = &circuit.profile;
    let pieces = pieces(results, circuit);
    let map = circuit.protection.map.as_ref();
    let told = map.is_some_and(|map| map.trip.is_some());
    let no_load = volts_shown(profile.no_load);
    let class = insulation_class(profile.no_load)
        .map_or_else(|| "none".to_owned(), |kv| format!("{kv} kV"));
    let lines: Vec<_> = profile
        .joints
        .iter()
        .enumerate()
        .map(|(at, joint)| {
            let named = profile.joint_named(at, &pieces).unwrap_or_default();
            let running = if profile.held {
                volts_shown(Volts::from_volts(joint.running.volts().abs()))
            } else {
                "not held".to_owned()
            };
            let sensed = map
                .filter(|_| told)
                .map(|map| view! { <td>{map.sensed(joint.share).words()}</td> });
            view! {
                <tr class:marked=move || desk.joint_on(number) == Some(at)>
                    <th scope="row">{named}</th>
                    <td>{running}</td>
                    <td>{no_load.clone()}</td>
                    <td>{class.clone()}</td>
                    {sensed}
                </tr>
            }
        })
        .collect();
    let stretch = map.and_then(|map| map.unseen_says.clone()).map(|says| {
        view! { <p>{format!("A fault to {earth} is not sensed {says}.")}</p> }
    });
    let running = if profile.runs {
        format!("to {earth}, running")
    } else {
        format!("to {earth}, if it ran")
    };
    view! {
        <details class="layout">
            <summary><span>"As a table"</span></summary>
            {stretch}
            <div class="scroll">
                <table class="joints">
                    <thead>
                        <tr>
                            <th scope="col">"Joint"</th>
                            <th scope="col">{running}</th>
                            <th scope="col">{format!("to {earth}, no load")}</th>
                            <th scope="col">"Insulation"</th>
                            {told.then(|| view! { <th scope="col">"A fault there"</th> })}
                        </tr>
                    </thead>
                    <tbody>{lines}</tbody>
                </table>
            </div>
        </details>
    }
}

/// What the hatching on the sign means, while there is any.
#[component]
pub(super) fn UnseenKey() -> impl IntoView {
    let desk = desk();
    let says = move || {
        let open = desk.open_circuit()?;
        desk.results.with(|results| {
            let circuit = results.circuits.get(open)?;
            let unseen = unseen(circuit)?;
            Some(format!(
                "Hatched: a fault to {} here is not sensed, where the pieces are joined as the \
                 dotted lines run; {:.0} % of the string of circuit {}.",
                results.earth_word().word(),
                unseen.share() * 100.0,
                open + 1
            ))
        })
    };
    move || {
        says().map(|says| {
            view! {
                <p class="picture-key">
                    <span class="hatched" aria-hidden="true"></span>
                    {says}
                </p>
            }
        })
    }
}

/// A string's current with its shares of the rated and of the short-circuit current.
pub(super) fn shares_of(operating: &Operating, circuit: &CircuitWork) -> String {
    let Operating::Runs { current, .. } = *operating else {
        return "it does not run".to_owned();
    };
    let rating = &circuit.supply;
    let percent = |of| format!("{:.0} %", current / of * 100.0);
    if rating.rated == rating.short_circuit {
        format!("{} of short circuit", percent(rating.short_circuit))
    } else {
        format!(
            "{} of rated, {} of short circuit",
            percent(rating.rated),
            percent(rating.short_circuit)
        )
    }
}

/// A circuit's current with where it runs if its tubes take less or more than their volts are known
/// to; None where nobody said how well they are known.
pub(super) fn bands(results: &Results, circuit: &CircuitWork) -> Option<String> {
    let percents = || {
        let pieces = pieces(results, circuit).into_iter();
        pieces.filter_map(|piece| {
            let total = results
                .tubes
                .iter()
                .find(|total| total.name == piece.tube)?;
            total.tube.as_ref()?.uncertainty_percent()
        })
    };
    let least = percents().fold(f64::INFINITY, f64::min);
    let most = percents().fold(0.0, f64::max);
    let by = if least < most {
        format!("±{least} to {most} %")
    } else {
        format!("±{most} %")
    };
    let says: Vec<String> = circuit
        .assessment
        .halves
        .iter()
        .filter_map(|half| band(half, &by))
        .collect();
    (!says.is_empty()).then(|| says.join(". Second string ") + ".")
}

fn band(half: &Half, by: &str) -> Option<String> {
    let current = |operating: &Operating| match *operating {
        Operating::Runs { current, .. } => Some(current),
        Operating::Overloaded { .. } => None,
    };
    let (less, more) = half.band?;
    let now = milliamps_shown(current(&half.operating)?);
    // Tubes that take fewer volts carry more current.
    let ends = match (current(&more), current(&less)) {
        (Some(low), Some(high)) => format!("{:.1} to {}", low.ma(), milliamps_shown(high)),
        (None, Some(high)) => format!("none to {}", milliamps_shown(high)),
        (_, None) => "none".to_owned(),
    };
    Some(format!("{now} ({ends} with the tubes' volts {by})"))
}

#[cfg(test)]
mod tests {
    use tubewright::measure::Milliamps;
    use tubewright::workup;

    use super::*;
    use crate::files::demo;

    #[test]
    fn a_band_of_currents_has_its_smaller_end_where_tubes_take_more_volts() {
        let worked = workup(&demo::jobs().remove(0), &demo::book());
        let runs = |ma: f64| Operating::Runs {
            current: Milliamps::from_ma(ma),
            running: Volts::from_volts(3_000.0),
            watts: 50.0,
            gaps: false,
        };
        let dead = Operating::Overloaded {
            wanted: Volts::from_volts(9_000.0),
            given: Volts::from_volts(8_000.0),
        };
        let said = |now, ends: Option<(Operating, Operating)>| {
            let half = Half {
                operating: now,
                band: ends,
                ..worked.circuits[0].assessment.halves[0].clone()
            };
            band(&half, "±15 %")
        };
        assert_eq!(
            said(runs(23.1), Some((runs(23.9), runs(22.4)))).as_deref(),
            Some("23.1 mA (22.4 to 23.9 mA with the tubes' volts ±15 %)")
        );
        assert_eq!(
            said(runs(23.1), Some((runs(23.9), dead))).as_deref(),
            Some("23.1 mA (none to 23.9 mA with the tubes' volts ±15 %)")
        );
        assert_eq!(said(runs(23.1), None), None, "nobody said");
        assert_eq!(said(dead, Some((runs(9.0), dead))), None, "it does not run");
    }
}
