//! The plot of a circuit along its string, from lead A to lead B: volts to earth, the pieces, and the
//! mid-point's current for a fault at each place.

use leptos::html::Div;
use leptos::prelude::*;
use tubewright::circuit::{FaultMap, Profile, Unseen};
use tubewright::measure::{Volts, milliamps_shown, volts_shown};
use tubewright::rules::Limits;
use tubewright::workup::CircuitWork;
use web_sys::{KeyboardEvent, MouseEvent};

use super::plot::{Ground, Scale, TEXT_PX, beside, figure, labels, line, wide};
use super::scene::UNKNOWN;
use super::window::width_of;
use crate::desk::{Results, desk};

/// Figures beside the scales stand at least so far apart.
const TICKS_PX: f64 = 30.0;
/// Dots of joints, and smaller ones where they would touch.
const DOT_PX: f64 = 4.5;
const SMALL_DOT_PX: f64 = 3.0;
/// Room above the highest figure of a scale.
const ABOVE: f64 = 1.12;

/// The plot of a circuit; a tap or the arrow keys mark a joint.
#[component]
pub fn ProfilePlot(
    /// The circuit.
    number: usize,
    /// Of these.
    results: Results,
) -> impl IntoView {
    let desk = desk();
    let on = NodeRef::<Div>::new();
    let width = width_of(on);
    let circuit = results.circuits.get(number);
    let mapped = circuit.is_some_and(|circuit| circuit.protection.map.is_some());
    let shares: Vec<f64> = circuit.map_or_else(Vec::new, |circuit| {
        circuit
            .profile
            .joints
            .iter()
            .map(|joint| joint.share)
            .collect()
    });
    let says = circuit.map(|circuit| says(&results, circuit));
    let ground = Memo::new(move |_| Ground::of(width.get(), mapped));
    let tapped = {
        let shares = shares.clone();
        move |event: MouseEvent| {
            let Some(element) = on.get_untracked() else {
                return;
            };
            let x = f64::from(event.client_x()) - element.get_bounding_client_rect().left();
            let joint = ground.get_untracked().nearest(x, &shares);
            desk.joint.set(joint.map(|joint| (number, joint)));
        }
    };
    let last = shares.len().saturating_sub(1);
    let key = move |event: KeyboardEvent| {
        let marked = untrack(|| desk.joint_on(number));
        let joint = match event.key().as_str() {
            "ArrowLeft" => beside(marked, last, false),
            "ArrowRight" => beside(marked, last, true),
            "Home" => 0,
            "End" => last,
            _ => return,
        };
        event.prevent_default();
        desk.joint.set(Some((number, joint)));
    };
    let drawn = {
        let results = results.clone();
        move || {
            let circuit = results.circuits.get(number)?;
            Some(draw(&results, circuit, &ground.get()))
        }
    };
    let mark = move || {
        let circuit = results.circuits.get(number)?;
        let joint = circuit.profile.joints.get(desk.joint_on(number)?)?;
        let ground = ground.get();
        let scale = volts_scale(&ground, &circuit.profile, limit(&results));
        let (x, y) = (
            ground.x(joint.share),
            dot_y(&ground, &scale, &circuit.profile, joint.running),
        );
        let bottom = ground
            .current
            .map_or(ground.strip.1 + 6.0, |(_, bottom)| bottom);
        Some(view! {
            <path class="plot-marked" d=ground.upright([joint.share], ground.volts.0, bottom)></path>
            <circle class="plot-marked" cx=x.to_string() cy=y.to_string() r="9"></circle>
        })
    };
    view! {
        <div
            node_ref=on
            class="plot"
            tabindex="0"
            role="group"
            aria-label="Plot along the string. Left and right arrow keys go from joint to joint."
            on:click=tapped
            on:keydown=key
        >
            <svg
                viewBox=move || format!("0 0 {} {}", ground.get().width, ground.get().height)
                style:height=move || format!("{}px", ground.get().height)
                role="img"
                aria-label=says
                font-size=TEXT_PX.to_string()
            >
                <defs>
                    <pattern id="plot-hatch" width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
                        <path class="plot-hatch" d="M0 0V7"></path>
                    </pattern>
                    <pattern id="plot-hatch-wide" width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
                        <path class="plot-hatch light" d="M0 0V7"></path>
                    </pattern>
                </defs>
                {drawn}
                {mark}
            </svg>
        </div>
    }
}

/// The limit of the rule set on volts to earth, where it has one that is known.
fn limit(results: &Results) -> Option<f64> {
    results.rules.as_ref()?.rule(Limits::VoltsToEarth)?.value
}

fn volts_scale(ground: &Ground, profile: &Profile, limit: Option<f64>) -> Scale {
    let high = profile
        .joints
        .iter()
        .map(|joint| joint.running.volts().abs())
        .fold(profile.no_load.volts().max(limit.unwrap_or(0.0)), f64::max)
        * ABOVE;
    // One end earthed: all of the string lies on one side of earth.
    let one_side = profile.held
        && profile
            .joints
            .iter()
            .all(|joint| joint.running.volts() > -0.5);
    Scale {
        low: if one_side { 0.0 } else { -high },
        high,
        top: ground.volts.0,
        bottom: ground.volts.1,
    }
}

/// How high the dot of a joint lies: among the pieces where nobody knows its volts.
fn dot_y(ground: &Ground, scale: &Scale, profile: &Profile, running: Volts) -> f64 {
    if profile.held {
        scale.y(running.volts())
    } else {
        f64::midpoint(ground.strip.0, ground.strip.1)
    }
}

fn draw(results: &Results, circuit: &CircuitWork, ground: &Ground) -> impl IntoView + use<> {
    let map = circuit.protection.map.as_ref();
    view! {
        {no_load(results, circuit, ground)}
        {map.map(|map| bands(map, ground))}
        {strip(results, circuit, ground)}
        {volts(results, circuit, ground)}
        {map.zip(ground.current).map(|(map, edges)| current(map, ground, edges))}
    }
}

/// The stretch that is not seen, through all parts of the plot.
fn bands(map: &FaultMap, ground: &Ground) -> impl IntoView + use<> {
    let (top, bottom) = (
        ground.volts.0,
        ground.current.map_or(ground.strip.1, |(_, bottom)| bottom),
    );
    let x = |share: f64| ground.x(share);
    let band = |class: &'static str, fill: &'static str, unseen: &Unseen| {
        let (from, to) = (x(unseen.from), x(unseen.to));
        view! {
            <rect class=class fill=fill x=from.to_string() y=top.to_string()
                width=(to - from).to_string() height=(bottom - top).to_string()></rect>
        }
    };
    view! {
        {map.widest.as_ref().map(|widest| band("plot-widest", "url(#plot-hatch-wide)", widest))}
        {map.unseen.as_ref().map(|unseen| band("plot-unseen", "url(#plot-hatch)", unseen))}
    }
}

/// A scale with its lines and figures.
fn scale_drawn(scale: &Scale, ground: &Ground) -> impl IntoView + use<> {
    let left = ground.left;
    let ticks = scale.ticks(TICKS_PX);
    let lines = ground.across(ticks.iter().map(|&tick| scale.y(tick)));
    let figures: Vec<_> = ticks
        .into_iter()
        .map(|tick| {
            view! {
                <text class="plot-figure" text-anchor="end" x=(left - 6.0).to_string()
                    y=(scale.y(tick) + 4.0).to_string()>{figure(tick)}</text>
            }
        })
        .collect();
    view! {
        <path class="plot-grid" d=lines></path>
        {figures}
    }
}

/// The volts that may stand anywhere on the string when a tube breaks.
fn no_load(results: &Results, circuit: &CircuitWork, ground: &Ground) -> impl IntoView + use<> {
    let profile = &circuit.profile;
    let scale = volts_scale(ground, profile, limit(results));
    let (left, right) = (ground.left, ground.right);
    let no_load = profile.no_load.volts();
    let (upper, lower) = (scale.y(no_load), scale.y((-no_load).max(scale.low)));
    let edges = ground.across(
        [upper]
            .into_iter()
            .chain((scale.low < 0.0).then_some(lower)),
    );
    view! {
        <rect class="plot-no-load" class:adrift=!profile.held x=left.to_string() y=upper.to_string()
            width=(right - left).to_string() height=(lower - upper).to_string()></rect>
        <path class="plot-no-load-edge" d=edges></path>
    }
}

/// Volts to earth as it runs, and the limit.
fn volts(results: &Results, circuit: &CircuitWork, ground: &Ground) -> impl IntoView + use<> {
    let profile = &circuit.profile;
    let earth = results.earth_word().word();
    let limit = limit(results);
    let scale = volts_scale(ground, profile, limit);
    let right = ground.right;
    let title = if profile.held && !profile.runs {
        format!("Volts to {earth} if it ran: it does not run")
    } else {
        format!("Volts to {earth}, V rms")
    };
    let no_load_says = if profile.held {
        format!("no load {}", volts_shown(profile.no_load))
    } else {
        format!("anywhere up to {}", volts_shown(profile.no_load))
    };
    let limit = limit.map(|limit| {
        let y = scale.y(limit);
        let below = (scale.low < 0.0).then(|| scale.y(-limit));
        let lines = ground.across([y].into_iter().chain(below));
        view! {
            <path class="plot-limit" d=lines></path>
            <text text-anchor="end" x=(right - 4.0).to_string() y=(y - 4.0).to_string()>
                {format!("limit {}", volts_shown(Volts::from_volts(limit)))}
            </text>
        }
    });
    let places: Vec<(f64, f64)> = profile
        .joints
        .iter()
        .map(|joint| {
            (
                ground.x(joint.share),
                dot_y(ground, &scale, profile, joint.running),
            )
        })
        .collect();
    let line = profile.held.then(|| {
        let line = line(places.iter().copied());
        view! { <path class="plot-running" class:if-it-ran=!profile.runs d=line></path> }
    });
    let closest = places
        .windows(2)
        .map(|pair| pair[1].0 - pair[0].0)
        .fold(f64::INFINITY, f64::min);
    let radius = if closest < 3.0 * DOT_PX {
        SMALL_DOT_PX
    } else {
        DOT_PX
    };
    let dots: Vec<_> = places
        .into_iter()
        .map(|(x, y)| {
            view! {
                <circle class="plot-joint" cx=x.to_string() cy=y.to_string() r=radius.to_string()></circle>
            }
        })
        .collect();
    view! {
        {scale_drawn(&scale, ground)}
        <path class="plot-zero" d=ground.across([scale.y(0.0)])></path>
        {limit}
        {line}
        {dots}
        <text text-anchor="end" x=(right - 4.0).to_string() y=(scale.y(profile.no_load.volts()) + TEXT_PX + 2.0).to_string()>{no_load_says}</text>
        <text class="plot-title" x="2" y="14">{title}</text>
    }
}

/// The pieces in the colours of their tubes, gas columns between electrodes, with their names.
fn strip(results: &Results, circuit: &CircuitWork, ground: &Ground) -> impl IntoView + use<> {
    let profile = &circuit.profile;
    let (top, bottom) = ground.strip;
    let middle = f64::midpoint(top, bottom);
    let mut named = Vec::new();
    let mut glass = Vec::new();
    let shares = profile.joints.iter().map(|joint| joint.share);
    let joints = ground.upright(shares, top - 3.0, bottom + 3.0);
    let pieces = circuit
        .pieces
        .iter()
        .zip(&profile.spans)
        .zip(profile.joints.windows(2));
    for ((&at, span), ends) in pieces {
        let Some(piece) = results.takeoff.pieces.get(at) else {
            continue;
        };
        let (from, to) = (ends[0].share, ends[1].share);
        named.push((ground.x(from), ground.x(to), piece.label.as_str()));
        let end = if profile.total.volts() > 0.0 {
            span.pair / profile.total / 2.0
        } else {
            0.0
        };
        let (from, to) = (ground.x(from + end), ground.x(to - end));
        let tube = results.tubes.iter().find(|total| total.name == piece.tube);
        let colour = tube
            .and_then(|total| total.tube.as_ref())
            .map_or(UNKNOWN, |tube| tube.colour.as_str())
            .to_owned();
        glass.push(view! {
            <rect class="plot-glass" fill=colour x=from.to_string() y=top.to_string()
                width=(to - from).max(0.0).to_string() height=(bottom - top).to_string()></rect>
        });
    }
    let names: Vec<_> = labels(&named, ground.left, ground.right)
        .into_iter()
        .map(|label| {
            view! {
                <text text-anchor="middle" x=label.x.to_string() y=(bottom + 15.0).to_string()>{label.text}</text>
            }
        })
        .collect();
    let leads = (bottom + 31.0).to_string();
    view! {
        <path class="plot-zero" d=ground.across([middle])></path>
        {glass}
        <path class="plot-joints" d=joints></path>
        {names}
        <text class="plot-figure" x=ground.left.to_string() y=leads.clone()>"lead A"</text>
        <text class="plot-figure" text-anchor="end" x=ground.right.to_string() y=leads>"lead B"</text>
    }
}

/// The mid-point's current for a fault at each place, and from where it trips.
fn current(map: &FaultMap, ground: &Ground, (top, bottom): (f64, f64)) -> impl IntoView + use<> {
    let threshold = map.trip.map(|trip| (trip + map.taken_off).ma());
    let high = map
        .points
        .iter()
        .map(|(_, current)| current.ma())
        .fold(threshold.unwrap_or(0.0), f64::max)
        * ABOVE;
    let scale = Scale {
        low: 0.0,
        high,
        top,
        bottom,
    };
    let line = line(
        map.points
            .iter()
            .map(|(share, current)| (ground.x(*share), scale.y(current.ma()))),
    );
    // Words stand in the middle of the stretch, where the curve is low, and on the plot.
    let middle = |text: &str| {
        let at = map
            .unseen
            .as_ref()
            .map_or(0.5, |unseen| f64::midpoint(unseen.from, unseen.to));
        let half = wide(text) / 2.0;
        let (from, to) = (ground.left + half, ground.right - half);
        if from < to {
            ground.x(at).clamp(from, to)
        } else {
            from
        }
        .to_string()
    };
    let unseen = map.unseen.as_ref().map(|unseen| {
        let text = format!("not sensed: {:.0} %", unseen.share() * 100.0);
        view! {
            <text class="plot-says" text-anchor="middle" x=middle(&text) y=(top + 14.0).to_string()>{text.clone()}</text>
        }
    });
    let trips = map.trip.zip(threshold).map(|(trip, threshold)| {
        let y = scale.y(threshold);
        let text = if map.taken_off.ma() > 0.0 {
            format!(
                "trips from {} mA + {} of leakage",
                trip.ma(),
                milliamps_shown(map.taken_off)
            )
        } else {
            format!("trips from {} mA", trip.ma())
        };
        // Under its line where the words above it are in the way.
        let at = if y < top + 34.0 { y + 15.0 } else { y - 5.0 };
        view! {
            <path class="plot-limit" d=ground.across([y])></path>
            <text text-anchor="middle" x=middle(&text) y=at.to_string()>{text.clone()}</text>
        }
    });
    let title = if map.estimate {
        "Estimated mid-point mA for a fault there"
    } else {
        "Mid-point current for a fault there, mA"
    };
    view! {
        {scale_drawn(&scale, ground)}
        <path class="plot-running" d=line></path>
        {trips}
        {unseen}
        <text class="plot-title" x="2" y=(top - 8.0).to_string()>{title}</text>
    }
}

/// The plot in words.
fn says(results: &Results, circuit: &CircuitWork) -> String {
    let profile = &circuit.profile;
    let earth = results.earth_word().word();
    let mut says = vec![format!(
        "Along the string from lead A to lead B, {} pieces: {} to {earth} with no load",
        profile.spans.len(),
        volts_shown(profile.no_load)
    )];
    let shown = |joint: Option<&tubewright::circuit::Joint>| {
        joint.map_or_else(String::new, |joint| {
            volts_shown(Volts::from_volts(joint.running.volts().abs()))
        })
    };
    if profile.held {
        says.push(format!(
            "{} at lead A and {} at lead B {}",
            shown(profile.joints.first()),
            shown(profile.joints.last()),
            if profile.runs {
                "running"
            } else {
                "if it ran, which it does not"
            }
        ));
    }
    if let Some(limit) = limit(results) {
        says.push(format!(
            "the limit is {}",
            volts_shown(Volts::from_volts(limit))
        ));
    }
    let map = circuit.protection.map.as_ref();
    if let Some(unseen) = map.and_then(|map| map.unseen_says.as_ref()) {
        says.push(format!("a fault {unseen} is not sensed"));
    }
    says.join("; ") + "."
}
