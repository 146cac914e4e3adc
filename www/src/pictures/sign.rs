//! The sign as it will glow, to scale.

use leptos::prelude::*;
use tubewright::measure::Units;

use super::scale::{bar, framed};
use super::scene::{Badge, Layer, scene};
use crate::desk::desk;

/// The thinnest a tube is drawn, so that a large sign is still seen.
const LEAST_PX: f64 = 2.4;

/// The picture of the sign: tap a piece to mark it.
#[component]
pub fn SignPicture(
    /// Whether circuits are shown: jumpers and numbers.
    #[prop(into)]
    circuits: Signal<bool>,
    /// A circuit to look at; the others are set back.
    #[prop(into)]
    focus: Signal<Option<usize>>,
    /// Share of the window's height it may take.
    #[prop(default = 0.42)]
    most: f64,
) -> impl IntoView {
    let desk = desk();
    let window_px = window_size();
    let arranged = Memo::new(move |_| desk.results.with(|results| scene(results, focus.get())));
    let view = move || {
        let (width_px, height_px) = window_px.get();
        let frame = arranged
            .with(|scene| framed(scene.bounds, room(width_px), (height_px * most).max(200.0)));
        let px = frame.mm_per_px;
        let view = frame.view;
        let scene = arranged.get();
        if scene.pieces.is_empty() {
            return view! { <p class="picture-empty">"Nothing to draw yet: give a row a text and a letter height."</p> }
                .into_any();
        }
        let box_of = format!("{} {} {} {}", view.x0, view.y0, view.width(), view.height());
        let (long, caption) = bar(view.width() * 0.3, desk.units.get());
        let bar_x = view.x0 + 22.0 * px;
        let bar_y = view.y1 - 26.0 * px;
        let bar_path = format!(
            "M{0} {1}v{2}M{0} {3}h{4}M{5} {1}v{2}",
            bar_x,
            bar_y - 5.0 * px,
            10.0 * px,
            bar_y,
            long.mm(),
            bar_x + long.mm()
        );
        // Electrodes are drawn larger than they are, but never so large that letters drown in them.
        let electrode = (1.2 * scene.layers.first().map_or(10.0, |layer| layer.width_mm))
            .clamp(4.0 * px, 9.0 * px);
        let says = says(
            &scene.layers,
            scene.pieces.len(),
            desk.units.get(),
            &caption,
        );
        let hits: Vec<_> = scene
            .pieces
            .iter()
            .enumerate()
            .map(|(at, path)| {
                view! {
                    <path
                        class="picture-piece"
                        class:marked=move || desk.piece.get() == Some(at)
                        data-piece=at.to_string()
                        d=path.clone()
                        stroke-width=(26.0 * px).to_string()
                        on:click=move |_| {
                            desk.piece.update(|now| *now = if *now == Some(at) { None } else { Some(at) });
                        }
                    ></path>
                }
            })
            .collect();
        let tubes: Vec<_> = scene.layers.iter().map(|layer| tube(layer, px)).collect();
        let badges = scene.badges.clone();
        view! {
            <svg
                class="picture-sign"
                viewBox=box_of
                role="img"
                aria-label=says
                style:height=format!("{}px", frame.height_px)
            >
                {tubes}
                <path class="picture-hidden" d=scene.hidden.clone() stroke-width=(1.4 * px).to_string()
                    stroke-dasharray=format!("{} {}", 4.0 * px, 4.0 * px)></path>
                <Show when=move || circuits.get()>
                    <path class="picture-jumpers"
                        d=move || arranged.with(|scene| scene.jumpers.clone())
                        stroke-width=(1.4 * px).to_string()
                        stroke-dasharray=format!("{} {}", 2.0 * px, 5.0 * px)></path>
                </Show>
                <path class="picture-electrode-ring" d=scene.electrodes.clone() stroke-width=electrode.to_string()></path>
                <path class="picture-electrode" d=scene.electrodes.clone() stroke-width=(0.6 * electrode).to_string()></path>
                {hits}
                {move || circuits.get().then(|| badges.iter().map(|badge| number(badge, px)).collect::<Vec<_>>())}
                <path class="picture-bar" d=bar_path stroke-width=(1.2 * px).to_string()></path>
                <text
                    class="picture-caption"
                    x=(bar_x + long.mm() + 10.0 * px).to_string()
                    y=(bar_y + 5.0 * px).to_string()
                    font-size=(14.0 * px).to_string()
                >
                    {caption}
                </text>
            </svg>
        }
        .into_any()
    };
    view! { <div class="picture">{view}</div> }
}

fn tube(layer: &Layer, px: f64) -> impl IntoView + use<> {
    let width = layer.width_mm.max(LEAST_PX * px);
    // A small picture glows less, or neighbouring letters would drown each other.
    let glow = (1.1 * layer.width_mm).clamp(2.0 * px, 14.0 * px);
    let part = |class: &'static str, width: f64| {
        view! { <path class=class d=layer.path.clone() stroke-width=width.to_string()></path> }
    };
    // Three strokes glow like a blur and cost a tablet far less.
    view! {
        <g class="picture-tube" class:dim=layer.dim stroke=layer.colour.clone()>
            {part("glow wide", width + glow)}
            {part("glow", width + 0.4 * glow)}
            {part("glass", width)}
            {part("core", width * 0.34)}
        </g>
    }
}

fn number(badge: &Badge, px: f64) -> impl IntoView + use<> {
    let (x, y) = (badge.at.x - 4.0 * px, badge.at.y - 4.0 * px);
    let (number, dim) = (badge.number, badge.dim);
    view! {
        <g class="picture-number" class:dim=dim>
            <circle cx=x.to_string() cy=y.to_string() r=(11.0 * px).to_string()></circle>
            <text x=x.to_string() y=(y + 4.6 * px).to_string() font-size=(13.0 * px).to_string()>
                {number}
            </text>
        </g>
    }
}

fn says(layers: &[Layer], pieces: usize, units: Units, bar: &str) -> String {
    let colours = layers
        .iter()
        .map(|layer| &layer.colour)
        .collect::<std::collections::HashSet<_>>();
    let system = match units {
        Units::Metric => "metric",
        Units::FeetInches => "feet and inches",
    };
    format!(
        "The sign to scale: {pieces} pieces of glass in {} colours. Scale bar {bar}, {system}.",
        colours.len()
    )
}

/// Width of the picture in a window: the rail stands beside it where there is room, as in style.css.
fn room(window_px: f64) -> f64 {
    let rail = if window_px >= 1000.0 { 84.0 } else { 0.0 };
    (window_px - rail - 28.0).clamp(200.0, 1600.0)
}

fn window_size() -> RwSignal<(f64, f64)> {
    fn now() -> (f64, f64) {
        let figure = |value: Result<wasm_bindgen::JsValue, wasm_bindgen::JsValue>, or: f64| {
            value.ok().and_then(|value| value.as_f64()).unwrap_or(or)
        };
        let window = window();
        (
            figure(window.inner_width(), 820.0),
            figure(window.inner_height(), 1180.0),
        )
    }
    let size = RwSignal::new(now());
    let handle = window_event_listener(leptos::ev::resize, move |_| size.set(now()));
    on_cleanup(move || handle.remove());
    size
}
