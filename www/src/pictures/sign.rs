//! The sign to scale: glowing or plain, from the front or the back, from as near as one likes.

use kurbo::{Affine, Point, Rect};
use leptos::html::Div;
use leptos::prelude::*;
use tubewright::measure::Units;

use super::eye::Room;
use super::hands::Hands;
use super::joint::{JointMark, StretchMark, TOUCH_PX, joint_at};
use super::paint::{MARK_PX, Pen, TAP_PX, electrodes, number, tube};
use super::scale::{bar, framed};
use super::scene::{Scene, scene};
use super::tap::{PartMarks, part_marked, tap};
use super::window::{width_of, window_height};
use crate::desk::desk;

/// The scale bar takes at most this share of the picture's width.
const BAR: f64 = 0.3;

/// The picture of the sign: drag and pinch it, tap a piece to mark it.
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
    /// Further buttons beside its own.
    #[prop(optional)]
    children: Option<Children>,
) -> impl IntoView {
    let desk = desk();
    let (plain, back) = (desk.plain, desk.back);
    let on = NodeRef::<Div>::new();
    let (width_px, height_px) = (width_of(on), window_height());
    let arranged = Memo::new(move |_| desk.results.with(|results| scene(results, focus.get())));
    let bounds = Memo::new(move |_| arranged.with(|scene| scene.bounds));
    let frame = Memo::new(move |_| {
        let most_px = (height_px.get() * most).max(200.0);
        framed(bounds.get(), width_px.get(), most_px)
    });
    let room = Memo::new(move |_| Room::of(&frame.get(), bounds.get()));
    let hands = Hands::new(on, room);
    let pen = Pen {
        px: Memo::new(move |_| frame.get().mm_per_px / hands.rest.get()),
        plain,
    };
    // From the back, what is at x is as far on the other side of the sign's middle.
    let across = move |x: f64| {
        if back.get() {
            2.0 * bounds.get().center().x - x
        } else {
            x
        }
    };
    // Where on the sign a pixel of the picture lies.
    let there = move |at: Point| {
        let (corner, times) = hands.placed();
        let frame = frame.get_untracked();
        let from = (at - corner) / times * frame.mm_per_px;
        let on = frame.view.origin() + from;
        Point::new(across(on.x), on.y)
    };
    let side = move || {
        back.get().then(|| {
            let twice = 2.0 * bounds.get().center().x;
            format!("matrix(-1 0 0 1 {twice} 0)")
        })
    };
    Effect::new(move |_| {
        let Some(row) = desk.row.get() else { return };
        let part = desk
            .results
            .with_untracked(|results| results.takeoff.rows.get(row).map(|row| row.bounds));
        if let Some(part) = part {
            let frame = frame.get_untracked();
            let x = [part.x0, part.x1].map(|x| untrack(|| across(x)));
            let part = Rect::new(x[0], part.y0, x[1], part.y1).abs();
            let place = Affine::scale(1.0 / frame.mm_per_px)
                * Affine::translate(-frame.view.origin().to_vec2());
            hands.bring(place.transform_rect_bbox(part));
        }
    });
    let empty = Memo::new(move |_| arranged.with(|scene| scene.pieces.is_empty()));
    let drawn = move || {
        let scene = arranged.get();
        let hits: Vec<_> = scene
            .pieces
            .iter()
            .enumerate()
            .map(|(at, path)| {
                view! { <path class="picture-piece" data-piece=at.to_string() d=path.clone()></path> }
            })
            .collect();
        let tubes: Vec<_> = scene.layers.iter().map(|layer| tube(layer, pen)).collect();
        let width_mm = scene.layers.first().map_or(10.0, |layer| layer.width_mm);
        let Scene {
            hidden,
            jumpers,
            electrodes: points,
            badges,
            ..
        } = scene;
        view! {
            <g transform=side>
                <g class="picture-marks" stroke-width=move || pen.px(MARK_PX)>
                    <path d=move || desk.row.get().map(|row| arranged.with(|scene| scene.row(row)))></path>
                    <path d=move || desk.piece.get().map(|at| arranged.with(|scene| scene.piece(at).to_owned()))></path>
                </g>
                <Show when=move || circuits.get()>
                    <StretchMark width_mm=width_mm pen=pen/>
                </Show>
                {tubes}
                <path class="picture-hidden" d=hidden
                    stroke-width=move || pen.px(1.4) stroke-dasharray=move || pen.dashes(5.0, 4.0)></path>
                <Show when=move || circuits.get()>
                    <path class="picture-jumpers" d=jumpers.clone()
                        stroke-width=move || pen.px(1.8) stroke-dasharray=move || pen.dashes(0.0, 5.0)></path>
                </Show>
                {electrodes(points, width_mm, pen)}
                <Show when=move || circuits.get()>
                    <JointMark pen=pen/>
                </Show>
                <g stroke-width=move || pen.px(TAP_PX)>{hits}</g>
            </g>
            <PartMarks across=Callback::new(across) pen=pen/>
            {move || circuits.get().then(|| badges.iter().map(|badge| number(badge, across, pen)).collect::<Vec<_>>())}
        }
    };
    let view_box = move || {
        let view = frame.get().view;
        format!("{} {} {} {}", view.x0, view.y0, view.width(), view.height())
    };
    let placed = move || {
        let (corner, times) = hands.placed();
        // In depth, so that the browser keeps the picture at hand and moves it without drawing it.
        format!(
            "translate3d({}px, {}px, 0) scale({times})",
            corner.x, corner.y
        )
    };
    let says =
        move || arranged.with(|scene| says(scene, desk.units.get(), plain.get(), back.get()));
    let picture = move || {
        if empty.get() {
            return view! { <p class="picture-empty">"Nothing to draw yet: give a row a text and a letter height."</p> }
                .into_any();
        }
        view! {
            <svg
                class="picture-sign"
                class:sizing=move || hands.sizing.get()
                viewBox=view_box
                role="img"
                aria-label=says
                style:height=move || format!("{}px", frame.get().height_px)
                style:transform=placed
            >
                {drawn}
            </svg>
            <ScaleBar
                mm_per_px=Signal::derive(move || frame.get().mm_per_px / hands.seen.get().times())
                most_px=Signal::derive(move || BAR * width_px.get())
            />
            <Show when=move || back.get()>
                <p class="picture-says">"Back view: mirrored, as the bender works at it"</p>
            </Show>
        }
        .into_any()
    };
    view! {
        <div class="picture" class:plain=move || plain.get()>
            <div
                node_ref=on
                class="picture-view"
                class:near=move || hands.seen.get().is_near()
                class:dragging=move || hands.dragging.get()
                tabindex="0"
                role="group"
                aria-label="Picture of the sign. Arrow keys move it, plus and minus change its size, 0 shows the whole."
                on:pointerdown=move |event| hands.down(&event)
                on:pointermove=move |event| hands.moved(&event)
                on:pointerup=move |event| hands.lifted(&event)
                on:pointercancel=move |event| hands.lifted(&event)
                on:wheel=move |event| hands.turned(&event)
                on:keydown=move |event| hands.key(&event)
                on:click=move |event| {
                    let joint = if circuits.get_untracked() && hands.is_tap() {
                        let within = TOUCH_PX * pen.px.get_untracked();
                        joint_at(desk, there(hands.place(&event)), within)
                    } else {
                        None
                    };
                    if joint.is_some() {
                        desk.joint.set(joint);
                    } else if let Some(after) = hands.tapped(&event, "data-part") {
                        part_marked(desk, after);
                    } else if let Some(piece) = hands.tapped(&event, "data-piece") {
                        tap(desk, piece, there(hands.place(&event)));
                    }
                }
            >
                {picture}
            </div>
            <div class="picture-tools" hidden=move || empty.get()>
                <button aria-label="Smaller" disabled=move || !hands.seen.get().is_near()
                    on:click=move |_| hands.further()>"−"</button>
                <button aria-label="Larger" disabled=move || !hands.can_near()
                    on:click=move |_| hands.nearer()>"+"</button>
                <button aria-label="Whole sign" disabled=move || !hands.seen.get().is_near()
                    on:click=move |_| hands.whole()>"Fit"</button>
                <button
                    aria-pressed=move || back.get().to_string()
                    class:on=move || back.get()
                    on:click=move |_| {
                        hands.turn_over();
                        back.update(|back| *back = !*back);
                    }
                >"Back view"</button>
                <button
                    aria-pressed=move || plain.get().to_string()
                    class:on=move || plain.get()
                    on:click=move |_| plain.update(|plain| *plain = !*plain)
                >"Plain lines"</button>
                {children.map(|children| children())}
            </div>
        </div>
    }
}

/// A bar of a round length of the sign, as long as that is on the screen.
#[component]
fn ScaleBar(mm_per_px: Signal<f64>, most_px: Signal<f64>) -> impl IntoView {
    let desk = desk();
    let found = Memo::new(move |_| bar(most_px.get() * mm_per_px.get(), desk.units.get()));
    view! {
        <div class="picture-scale" role="img" aria-label=move || format!("Scale bar of {}", found.get().1)>
            <span class="picture-bar" style:width=move || format!("{}px", found.get().0.mm() / mm_per_px.get())></span>
            <span class="picture-caption">{move || found.get().1}</span>
        </div>
    }
}

fn says(scene: &Scene, units: Units, plain: bool, back: bool) -> String {
    let colours = scene
        .layers
        .iter()
        .map(|layer| &layer.colour)
        .collect::<std::collections::HashSet<_>>();
    let system = match units {
        Units::Metric => "metric",
        Units::FeetInches => "feet and inches",
    };
    format!(
        "The sign to scale{}{}: {} pieces of glass in {} colours, {system}.",
        if plain { ", in plain lines" } else { "" },
        if back { ", seen from the back" } else { "" },
        scene.pieces.len(),
        colours.len()
    )
}
