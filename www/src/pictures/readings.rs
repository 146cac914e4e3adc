//! Bench readings of a tube type: volts against length, a line for each current.

use leptos::prelude::*;
use tubewright::book::Reading;
use tubewright::measure::{Length, Units};
use tubewright::tube::Measured;

use super::plot::{Scale, figure};

/// Size of the picture in its own units.
const WIDE: f64 = 640.0;
const HIGH: f64 = 360.0;
/// The plot in it: left, top, right, bottom.
const LEFT: f64 = 66.0;
const TOP: f64 = 16.0;
const RIGHT: f64 = 566.0;
const BOTTOM: f64 = 312.0;
/// Labels nearer than this run into each other.
const LABELS_APART: f64 = 17.0;
/// Dashes that tell the lines of the currents apart; from the seventh current on they come again.
const DASHES: [&str; 6] = ["none", "9 5", "2 5", "14 4 2 4", "5 3", "1 3"];
/// Figures beside the axes stand at least so far apart.
const TICKS_APART: f64 = 46.0;
/// Room beyond the greatest figure.
const BEYOND: f64 = 1.06;

/// The readings as dots, odd ones ringed, with the fit where there is one.
#[component]
pub fn ReadingsPicture(
    /// The readings.
    readings: Vec<Reading>,
    /// What they say; None where they are not used.
    measured: Option<Measured>,
    /// What lengths are shown in.
    units: Units,
) -> impl IntoView {
    let plot = Plot::of(&readings, measured.as_ref(), units);
    let grid_x: Vec<_> = plot
        .x
        .ticks(TICKS_APART)
        .into_iter()
        .map(|length| {
            let at = across(&plot.x, length);
            view! {
                <line x1=at x2=at y1=TOP y2=BOTTOM class="bench-grid"/>
                <text x=at y=BOTTOM + 20.0 text-anchor="middle">{figure(length)}</text>
            }
        })
        .collect();
    let grid_y: Vec<_> = plot
        .y
        .ticks(TICKS_APART)
        .into_iter()
        .map(|volts| {
            let at = plot.y.y(volts);
            view! {
                <line x1=LEFT x2=RIGHT y1=at y2=at class="bench-grid"/>
                <text x=LEFT - 8.0 y=at + 5.0 text-anchor="end">{figure(volts)}</text>
            }
        })
        .collect();
    let lines: Vec<_> = plot
        .lines
        .iter()
        .zip(DASHES.iter().cycle())
        .map(|(line, dashes)| {
            view! {
                <line
                    class="bench-line"
                    stroke-dasharray=*dashes
                    x1=LEFT
                    x2=RIGHT
                    y1=line.from
                    y2=line.to
                />
                <text x=RIGHT + 8.0 y=line.label + 5.0>{line.words.clone()}</text>
            }
        })
        .collect();
    let dots: Vec<_> = plot
        .dots
        .iter()
        .map(|dot| {
            let ring = dot
                .odd
                .then(|| view! { <circle class="bench-odd" cx=dot.x cy=dot.y r="11"/> });
            view! {
                {ring}
                <circle class="bench-dot" cx=dot.x cy=dot.y r="4.5"/>
            }
        })
        .collect();
    view! {
        <svg
            class="bench-plot"
            viewBox=format!("0 0 {WIDE} {HIGH}")
            role="img"
            aria-labelledby="readings-title"
            aria-describedby="readings-desc"
        >
            <title id="readings-title">"Bench readings: volts against length"</title>
            <desc id="readings-desc">{says(&readings, measured.as_ref())}</desc>
            {grid_x}
            {grid_y}
            {lines}
            {dots}
            <text x=f64::midpoint(LEFT, RIGHT) y=HIGH - 8.0 text-anchor="middle">{plot.name}</text>
            <text x=LEFT - 50.0 y=TOP - 3.0>"V"</text>
        </svg>
    }
}

/// What the picture shows, for those who do not see it; the figures stand in the table.
fn says(readings: &[Reading], measured: Option<&Measured>) -> String {
    let count = readings.len();
    let Some(measured) = measured else {
        return format!("{count} readings as dots; no line, because they are not used.");
    };
    let currents: Vec<String> = measured
        .currents
        .iter()
        .map(|current| format!("{:.1} mA", current.ma))
        .collect();
    let odd = measured.points.iter().filter(|point| point.odd).count();
    let odd = match odd {
        0 => "none ringed as odd".to_owned(),
        odd => format!("{odd} ringed as odd"),
    };
    format!(
        "{count} readings as dots, {odd}; lines of the fit at {}, rising from {:.0} V at no length.",
        currents.join(", "),
        measured.pair_volts.value
    )
}

/// Where everything lies.
struct Plot {
    name: &'static str,
    x: Scale,
    y: Scale,
    lines: Vec<PlotLine>,
    dots: Vec<Dot>,
}

struct PlotLine {
    from: f64,
    to: f64,
    label: f64,
    words: String,
}

struct Dot {
    x: f64,
    y: f64,
    odd: bool,
}

/// An axis from nothing to a little beyond the greatest figure.
fn axis(most: f64, top: f64, bottom: f64) -> Scale {
    Scale {
        low: 0.0,
        high: most * BEYOND,
        top,
        bottom,
    }
}

/// Where a figure lies from left to right, on a scale laid from right to left.
fn across(scale: &Scale, figure: f64) -> f64 {
    LEFT + RIGHT - scale.y(figure)
}

impl Plot {
    fn of(readings: &[Reading], measured: Option<&Measured>, units: Units) -> Self {
        let (name, unit_mm) = match units {
            Units::Metric => ("Length between electrode shells, mm", 1.0),
            Units::FeetInches => ("Length between electrode shells, ft", 304.8),
        };
        let longest = readings.iter().map(|r| r.length_mm).fold(0.0, f64::max);
        let x = axis(longest / unit_mm, LEFT, RIGHT);
        let end = Length::from_mm(x.high * unit_mm);
        let currents = measured.map_or(&[][..], |measured| &measured.currents);
        let ends = |at: Length| {
            currents
                .iter()
                .map(move |current| measured.map_or(0.0, |fit| fit.volts(at, current.ma)))
        };
        let most = readings.iter().map(|r| r.volts).chain(ends(end));
        let y = axis(most.fold(0.0, f64::max), TOP, BOTTOM);
        let mut lines: Vec<PlotLine> = currents
            .iter()
            .zip(ends(Length::ZERO).zip(ends(end)))
            .map(|(current, (from, to))| PlotLine {
                from: y.y(from),
                to: y.y(to),
                label: y.y(to),
                words: format!("{:.1} mA", current.ma),
            })
            .collect();
        // Least current first: highest on the picture first.
        let mut above = f64::NEG_INFINITY;
        for line in &mut lines {
            line.label = line.label.max(above + LABELS_APART);
            above = line.label;
        }
        let dots = readings
            .iter()
            .enumerate()
            .map(|(at, reading)| Dot {
                x: across(&x, reading.length_mm / unit_mm),
                y: y.y(reading.volts),
                odd: measured.is_some_and(|fit| fit.points.get(at).is_some_and(|p| p.odd)),
            })
            .collect();
        Self {
            name,
            x,
            y,
            lines,
            dots,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::files::demo;
    use tubewright::tube::measured;

    #[test]
    fn lengths_rise_to_the_right_and_volts_upwards() {
        let readings = [(500.0, 500.0), (1_000.0, 800.0), (f64::NAN, f64::INFINITY)];
        let readings = readings.map(|(length_mm, volts)| Reading {
            length_mm,
            ma: 25.0,
            volts,
        });
        let plot = Plot::of(&readings[..2], None, Units::Metric);
        let [one, other] = &plot.dots[..] else {
            panic!("a dot for each reading");
        };
        assert!(LEFT < one.x && one.x < other.x && other.x < RIGHT);
        assert!(TOP < other.y && other.y < one.y && one.y < BOTTOM);
        assert!((4..=12).contains(&plot.x.ticks(TICKS_APART).len()));
        for dot in Plot::of(&readings, None, Units::FeetInches).dots {
            assert!(
                dot.x.is_finite() && dot.y.is_finite(),
                "no figure breaks it"
            );
        }
        let none = Plot::of(&[Reading::default()], None, Units::Metric);
        assert!(none.x.ticks(TICKS_APART).is_empty(), "nothing typed yet");
    }

    #[test]
    fn everything_lies_in_the_plot_and_labels_stand_apart() {
        let book = demo::book();
        let mut seen = 0;
        for entry in book.tubes.iter().filter(|tube| !tube.readings.is_empty()) {
            let fit = measured(entry).and_then(Result::ok);
            for units in [Units::Metric, Units::FeetInches] {
                let plot = Plot::of(&entry.readings, fit.as_ref(), units);
                assert_eq!(plot.dots.len(), entry.readings.len());
                for dot in &plot.dots {
                    assert!((LEFT..=RIGHT).contains(&dot.x) && (TOP..=BOTTOM).contains(&dot.y));
                }
                for pair in plot.lines.windows(2) {
                    assert!(pair[1].label - pair[0].label >= LABELS_APART - 1e-9);
                }
                seen += plot.lines.len();
            }
        }
        assert_eq!(seen, 8, "three currents and one, in two units");
    }
}
