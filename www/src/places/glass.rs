//! Glass: by tube type, and piece by piece.

use leptos::prelude::*;
use tubewright::measure::{glass, length_shown};

use crate::desk::desk;

/// More lines than this are not drawn: the totals hold them all.
const MOST_LINES: usize = 400;

/// The place.
#[component]
pub fn Glass() -> impl IntoView {
    let desk = desk();
    let by_tube = move || {
        desk.results.with(|results| {
            let units = desk.units.get();
            results
                .tubes
                .iter()
                .map(|total| {
                    let colour = total
                        .tube
                        .as_ref()
                        .map(|tube| tube.colour.clone())
                        .unwrap_or_default();
                    let volts = total.tube.as_ref().map(|tube| {
                        format!(
                            "{:.0} V/m at {} mA and {:.0} V for each electrode pair{}",
                            tube.volts_per_m,
                            tube.at_ma,
                            tube.pair_volts,
                            tube.model_uncertainty_percent
                                .map_or_else(String::new, |percent| format!(
                                    ", ±{percent} % (model)"
                                ))
                        )
                    });
                    view! {
                        <tr>
                            <th scope="row">
                                <span class="dot" style:background=colour></span>
                                {total.name.clone()}
                                <small>{volts}</small>
                            </th>
                            <td>{total.pieces}</td>
                            <td>{glass(total.lit, units)}</td>
                            <td>{glass(total.hidden, units)}</td>
                            <td><b>{glass(total.glass, units)}</b></td>
                        </tr>
                    }
                })
                .collect::<Vec<_>>()
        })
    };
    let pieces = move || {
        desk.results.with(|results| {
            let units = desk.units.get();
            let mut circuit_of = vec![None; results.takeoff.pieces.len()];
            for (number, circuit) in results.circuits.iter().enumerate() {
                for &piece in &circuit.pieces {
                    if let Some(slot) = circuit_of.get_mut(piece) {
                        *slot = Some(number + 1);
                    }
                }
            }
            results
                .takeoff
                .pieces
                .iter()
                .zip(circuit_of)
                .enumerate()
                .take(MOST_LINES)
                .map(|(at, (piece, circuit))| {
                    view! {
                        <tr class:marked=move || desk.piece.get() == Some(at)>
                            <td>{at + 1}</td>
                            <th scope="row">{piece.label.clone()}</th>
                            <td>{piece.row + 1}</td>
                            <td>{length_shown(piece.lit, units)}</td>
                            <td>{length_shown(piece.hidden, units)}</td>
                            <td>{length_shown(piece.tails, units)}</td>
                            <td><b>{length_shown(piece.glass(), units)}</b></td>
                            <td>{circuit.map_or_else(|| "none".to_owned(), |number: usize| number.to_string())}</td>
                        </tr>
                    }
                })
                .collect::<Vec<_>>()
        })
    };
    let more = move || {
        desk.results.with(|results| {
            let more = results.takeoff.pieces.len().saturating_sub(MOST_LINES);
            (more > 0).then(|| format!("And {more} more pieces; the totals above hold them all."))
        })
    };
    view! {
        <section class="panel by-tube" aria-label="Glass by tube type">
            <h2>"Glass by tube type"</h2>
            <div class="scroll">
                <table>
                    <thead>
                        <tr>
                            <th scope="col">"Tube"</th>
                            <th scope="col">"Pieces"</th>
                            <th scope="col">"Lit"</th>
                            <th scope="col">"Painted out"</th>
                            <th scope="col">"Glass to bend"</th>
                        </tr>
                    </thead>
                    <tbody>{by_tube}</tbody>
                </table>
            </div>
        </section>
        <section class="panel pieces" aria-label="Pieces">
            <h2>"Pieces of glass, in reading order"</h2>
            <p class="quiet">
                "One piece for each letter, or for each word of script. Glass is lit and painted-out length and two tails; crossovers are estimated by the shortest straight way between strokes."
            </p>
            <div class="scroll">
                <table>
                    <thead>
                        <tr>
                            <th scope="col">"No."</th>
                            <th scope="col">"Piece"</th>
                            <th scope="col">"Row"</th>
                            <th scope="col">"Lit"</th>
                            <th scope="col">"Painted out"</th>
                            <th scope="col">"Tails"</th>
                            <th scope="col">"Glass"</th>
                            <th scope="col">"Circuit"</th>
                        </tr>
                    </thead>
                    <tbody>{pieces}</tbody>
                </table>
            </div>
            <p class="quiet">{more}</p>
        </section>
    }
}
