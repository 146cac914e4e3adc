//! The loading bar: where a string runs in the window of its supply.

use leptos::prelude::*;
use tubewright::circuit::{Assessment, Basis, Window};

/// The bar ends a little beyond the stop, so that the stop is seen.
const BEYOND_STOP: f64 = 1.12;

/// The bar with a mark for each string.
#[component]
pub fn LoadingBar(
    /// The circuit.
    assessment: Assessment,
) -> impl IntoView {
    let window = assessment.window;
    let shares: Vec<f64> = assessment.halves.iter().map(|half| half.share).collect();
    let zones: Vec<_> = zones(&window)
        .into_iter()
        .map(|(class, from, to)| {
            view! {
                <span
                    class=format!("bar-zone {class}")
                    style:left=percent(from)
                    style:width=percent(to - from)
                ></span>
            }
        })
        .collect();
    let marks: Vec<_> = shares
        .iter()
        .map(|&share| view! { <span class="bar-mark" style:left=percent(place(&window, share))></span> })
        .collect();
    let ticks: Vec<_> = ticks(&window)
        .into_iter()
        .map(|(at, text)| view! { <span class="bar-tick" style:left=percent(at)>{text}</span> })
        .collect();
    view! {
        <div class="bar" role="img" aria-label=says(&window, &shares)>
            <div class="bar-track">{zones}{marks}</div>
            <div class="bar-ticks">{ticks}</div>
        </div>
    }
}

fn percent(share: f64) -> String {
    format!("{:.2}%", share * 100.0)
}

/// Place of a share along the bar, 0 to 1.
fn place(window: &Window, share: f64) -> f64 {
    let at = share / (window.stop_from * BEYOND_STOP);
    // Nothing known to run stands at the far end.
    if at.is_finite() {
        at.clamp(0.0, 1.0)
    } else {
        1.0
    }
}

fn zones(window: &Window) -> Vec<(&'static str, f64, f64)> {
    let ends = [
        ("light", 0.0, window.look_below),
        ("plain", window.look_below, window.target_from),
        ("fits", window.target_from, window.target_to),
        ("plain", window.target_to, window.look_above),
        ("look", window.look_above, window.stop_from),
        ("stop", window.stop_from, window.stop_from * BEYOND_STOP),
    ];
    ends.into_iter()
        .map(|(class, from, to)| (class, place(window, from), place(window, to)))
        .filter(|(_, from, to)| to > from)
        .collect()
}

fn ticks(window: &Window) -> Vec<(f64, String)> {
    let shown = |share: f64| (place(window, share), format!("{:.0} %", share * 100.0));
    vec![
        shown(window.target_from),
        shown(window.target_to),
        (place(window, window.stop_from), "stop".to_owned()),
    ]
}

fn says(window: &Window, shares: &[f64]) -> String {
    let runs: Vec<String> = shares
        .iter()
        .map(|share| format!("{:.0} %", share * 100.0))
        .collect();
    let of = match window.basis {
        Basis::NoLoad => "no-load volts",
        Basis::RatedLoad => "the rated load volts",
    };
    format!(
        "Runs at {} of {of}; target {:.0} to {:.0} %, stop from {:.0} %.",
        runs.join(" and "),
        window.target_from * 100.0,
        window.target_to * 100.0,
        window.stop_from * 100.0
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::files::demo;
    use tubewright::workup;

    #[test]
    fn zones_cover_the_bar_without_gap_and_every_mark_is_on_it() {
        for job in demo::jobs() {
            for circuit in workup(&job, &demo::book()).circuits {
                let window = circuit.assessment.window;
                let zones = zones(&window);
                assert_eq!(zones[0].1, 0.0, "starts at nothing");
                assert!(
                    (zones[zones.len() - 1].2 - 1.0).abs() < 1e-12,
                    "ends at the end"
                );
                for pair in zones.windows(2) {
                    assert_eq!(pair[0].2, pair[1].1, "{} then {}", pair[0].0, pair[1].0);
                }
            }
        }
    }

    #[test]
    fn a_share_nobody_knows_stands_at_the_far_end() {
        let job = demo::jobs().remove(0);
        let window = workup(&job, &demo::book()).circuits[0].assessment.window;
        assert_eq!(place(&window, f64::NAN), 1.0, "not a number");
        assert_eq!(place(&window, 9.0), 1.0, "far overloaded");
    }
}
