//! Glass: by tube type, and piece by piece, in the order they are wired in.

use leptos::prelude::*;
use tubewright::measure::{glass, length_shown};
use tubewright::takeoff::{Piece, choose};
use wasm_bindgen::JsCast;

use crate::desk::{Desk, Where, desk};

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
                            "{:.0} V/m at {} mA and {:.0} V for each electrode pair; {}",
                            tube.volts_per_m,
                            tube.at_ma,
                            tube.pair_volts,
                            tube.known_words()
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
    let dragged = RwSignal::new(None::<Drag>);
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
                    let over = move || dragged.get().is_some_and(|drag| drag.over == at);
                    view! {
                        <tr
                            data-piece=at.to_string()
                            class:marked=move || desk.piece.get() == Some(at)
                            class:over=over
                        >
                            <td><Handle at=at label=piece.label.clone() dragged=dragged/></td>
                            <th scope="row">
                                <button class="link" on:click=move |_| {
                                    desk.piece.set(Some(at));
                                    desk.place.set(Where::Sign);
                                }>{piece.label.clone()}</button>
                                <span class="quiet">{format!(" row {}", piece.row + 1)}</span>
                            </th>
                            <td>{length_shown(piece.lit, units)}</td>
                            <td>{length_shown(piece.hidden, units)}</td>
                            <td>{length_shown(piece.tails, units)}</td>
                            <td><b>{length_shown(piece.glass(), units)}</b></td>
                            <td>{piece.bends.len()}</td>
                            <td>{piece.jumps.len()}</td>
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
                "One piece for each letter, word of script or line of touching strokes, unless it was chosen otherwise on the picture. Glass is lit and painted-out length and two tails; crossovers are estimated by the shortest straight way between strokes. Bends of crossovers and tails are not among the bends. Drag a piece by its handle, or move it with the arrow keys, to wire the pieces of a row in another order."
            </p>
            <div class="scroll">
                <table>
                    <thead>
                        <tr>
                            <th scope="col">"No."</th>
                            <th scope="col">"Piece"</th>
                            <th scope="col">"Lit"</th>
                            <th scope="col">"Painted out"</th>
                            <th scope="col">"Tails"</th>
                            <th scope="col">"Glass"</th>
                            <th scope="col">"Bends"</th>
                            <th scope="col">"Crossovers"</th>
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

/// A piece that is dragged, and the one it is over.
#[derive(Debug, Clone, Copy)]
struct Drag {
    from: usize,
    over: usize,
}

/// What a piece is dragged by.
#[component]
fn Handle(at: usize, label: String, dragged: RwSignal<Option<Drag>>) -> impl IntoView {
    let desk = desk();
    view! {
        <button
            class="handle"
            aria-label=format!("Move piece {}, {label}", at + 1)
            on:pointerdown:target=move |event| {
                // Held, so that the way of the finger is told of wherever it goes.
                let _ = event.target().set_pointer_capture(event.pointer_id());
                dragged.set(Some(Drag { from: at, over: at }));
            }
            on:pointermove=move |event| {
                if let Some(drag) = dragged.get_untracked() {
                    let over = under(event.client_x(), event.client_y()).unwrap_or(drag.over);
                    if over != drag.over {
                        dragged.set(Some(Drag { over, ..drag }));
                    }
                }
            }
            on:pointerup=move |_| {
                if let Some(Drag { from, over }) = dragged.get_untracked() {
                    dragged.set(None);
                    shift(desk, from, over);
                }
            }
            on:pointercancel=move |_| dragged.set(None)
            on:keydown=move |event| {
                let to = match event.key().as_str() {
                    "ArrowUp" => at.checked_sub(1),
                    "ArrowDown" => Some(at + 1),
                    _ => None,
                };
                if let Some(to) = to {
                    event.prevent_default();
                    shift(desk, at, to);
                    follow(to);
                }
            }
        >{format!("⠿ {}", at + 1)}</button>
    }
}

/// The piece whose line is at a place of the window.
fn under(x: i32, y: i32) -> Option<usize> {
    #[allow(clippy::cast_precision_loss, reason = "pixels of a window")]
    let element = document().element_from_point(x as f32, y as f32)?;
    let line = element.closest("tr[data-piece]").ok()??;
    line.get_attribute("data-piece")?.parse().ok()
}

/// The keyboard stays with the piece that was moved.
fn follow(piece: usize) {
    request_animation_frame(move || {
        let handle = document().query_selector(&format!("tr[data-piece=\"{piece}\"] .handle"));
        if let Some(handle) = handle.ok().flatten()
            && let Some(handle) = handle.dyn_ref::<web_sys::HtmlElement>()
        {
            let _ = handle.focus();
        }
    });
}

/// Moves a piece to where another of its row and copy is.
fn shift(desk: Desk, from: usize, to: usize) {
    let results = desk.results.get_untracked();
    let pieces = &results.takeoff.pieces;
    let (Some(moved), Some(other)) = (pieces.get(from), pieces.get(to)) else {
        return;
    };
    if from == to {
        return;
    }
    if moved.row != other.row || moved.copy != other.copy {
        desk.trouble(vec![
            "A piece can be moved among those of its row. Move the whole row on the Sign place."
                .to_owned(),
        ]);
        return;
    }
    let alike = |piece: &&Piece| piece.row == moved.row && piece.copy == moved.copy;
    let among: Vec<&Piece> = pieces.iter().filter(alike).collect();
    let first = pieces.iter().position(|piece| alike(&piece)).unwrap_or(0);
    let row = moved.row;
    desk.settle();
    desk.edit_job(
        "order",
        &format!("Row {}: order of pieces", row + 1),
        |job| {
            if let Some(row) = job.rows.get_mut(row) {
                choose::reorder(row.pieces_mut(), &among, from - first, to - first);
            }
        },
    );
    desk.settle();
    desk.piece.set(None);
}
