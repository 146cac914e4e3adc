//! Bench readings of a tube type: the table they are typed into, what they say, and their picture.

use leptos::prelude::*;
use tubewright::book::{Reading, TubeEntry};
use tubewright::measure::{Length, length, length_exact, length_shown, quoted};
use tubewright::rules::Finding;
use tubewright::tube::{Interval, Measured, measured};

use super::entries::{at_place, edit, lines, read};
use super::fields::{Field, Figure, always, optional_figure, typed};
use crate::desk::{Desk, desk};
use crate::pictures::ReadingsPicture;

/// The part of a tube type's form.
#[component]
pub(super) fn BenchReadings(
    /// Place of the tube type in the book.
    at: usize,
) -> impl IntoView {
    let desk = desk();
    let entry = Memo::new(move |_| at_place::<TubeEntry>(desk, at).unwrap_or_default());
    let fit = Memo::new(move |_| entry.with(measured));
    let count = Memo::new(move |_| entry.with(|entry| entry.readings.len()));
    let any = Memo::new(move |_| count.get() > 0);
    let add = move |_| {
        desk.settle();
        edit::<TubeEntry>(desk, at, "add a reading", |entry| {
            // Readings are taken current by current.
            let ma = entry.readings.last().map_or(0.0, |last| last.ma);
            entry.readings.push(Reading {
                ma,
                ..Reading::default()
            });
        });
        desk.settle();
        desk.turn();
        request_animation_frame(|| {
            let last = document().query_selector(".readings tbody tr:last-child input");
            if let Ok(Some(last)) = last
                && let Ok(last) = wasm_bindgen::JsCast::dyn_into::<web_sys::HtmlElement>(last)
            {
                let _ = last.focus();
            }
        });
    };
    let table = move || {
        any.get().then(|| {
            view! {
                <div class="scroll">
                    <table class="readings">
                        <thead>
                            <tr>
                                <th scope="col">"No."</th>
                                <th scope="col">"Length"</th>
                                <th scope="col">"mA"</th>
                                <th scope="col">"V"</th>
                                <th scope="col">"By the fit"</th>
                                <th scope="col">"Off by"</th>
                                <th scope="col"><span class="unseen">"Remove"</span></th>
                            </tr>
                        </thead>
                        <tbody>
                            <For each=move || 0..count.get() key=|nth| *nth let:nth>
                                <ReadingRow at=at nth=nth fit=fit/>
                            </For>
                        </tbody>
                    </table>
                </div>
            }
        })
    };
    let picture = move || {
        any.get().then(|| {
            let fit = fit.get().and_then(Result::ok);
            let readings = entry.with(|entry| entry.readings.clone());
            view! { <ReadingsPicture readings=readings measured=fit units=desk.units.get()/> }
        })
    };
    view! {
        <section class="bench" aria-label="Bench readings">
            <header class="panel-head">
                <h3>"Bench readings"</h3>
                <button on:click=add>"Add a reading"</button>
            </header>
            <p class="quiet">
                "Tubes of this type at your own bench: the length between the electrode shells, the current, the volts across the whole tube. Three or more readings of two or more lengths at one current are fitted; a second current well apart tells how the volts fall. While readings can be used, they go before figures typed in above."
            </p>
            {table}
            {move || any.get().then(|| view! {
                <Field
                    label="Measured on"
                    class="narrow"
                    example="2026-05-03"
                    live=always()
                    value=read(desk, at, |tube: &TubeEntry| tube.measured_on.clone())
                    commit=move |text: String| {
                        edit::<TubeEntry>(desk, at, "measured on", |entry| text.trim().clone_into(&mut entry.measured_on));
                        Ok(())
                    }
                />
            })}
            {move || fit.get().map(|fit| outcome(desk, fit))}
            {picture}
        </section>
    }
}

/// What the readings say, or why they are not used.
fn outcome(desk: Desk, fit: Result<Measured, Vec<Finding>>) -> AnyView {
    let fit = match fit {
        Ok(fit) => fit,
        Err(why) => return view! { <div class="bench-said">{lines(&why)}</div> }.into_any(),
    };
    let exponent = match fit.exponent_fit {
        Some(fitted) => (
            within(fitted, 3),
            "exponent of the fall with current".to_owned(),
        ),
        None => (
            format!("{}", fit.exponent),
            "exponent of the fall with current, not from the readings".to_owned(),
        ),
    };
    let typical = length_shown(fit.typical, desk.units.get());
    let alone = fit.currents.iter().map(at_current).collect::<Vec<_>>();
    view! {
        <div class="bench-said">
            {lines(&fit.findings)}
            <div class="figures">
                <Figure
                    figure=format!("{} V/m", within(fit.volts_per_m, 0))
                    caption=format!("running volts at {} mA", fit.at_ma)
                />
                <Figure
                    figure=format!("{} V", within(fit.pair_volts, 0))
                    caption="electrode pair"
                />
                <Figure figure=exponent.0 caption=exponent.1/>
                <Figure
                    figure=format!("±{} %", fit.percent)
                    caption=format!("volts of a piece of {typical}")
                />
            </div>
            <p class="quiet">
                {format!(
                    "± holds 95 times in 100. A reading scatters by {:.1} V about the fit, with {} degrees of freedom; less than 1 % is never claimed, because a meter's own error does not show in its readings.",
                    fit.residual_volts,
                    fit.freedom
                )}
            </p>
            <ul class="quiet">{alone}</ul>
        </div>
    }
    .into_any()
}

/// The line of one current alone.
fn at_current(current: &tubewright::tube::AtCurrent) -> impl IntoView + use<> {
    let count = match current.readings.len() {
        1 => "1 reading".to_owned(),
        count => format!("{count} readings"),
    };
    let says = match &current.line {
        None => "one length only, no line of its own".to_owned(),
        Some(line) => match (line.slope_interval(), line.at_zero_interval()) {
            (Some(slope), Some(pair)) => format!(
                "{} V/m and {} V for the pair",
                within(slope, 0),
                within(pair, 0)
            ),
            _ => format!(
                "{:.0} V/m and {:.0} V for the pair; two readings tell no ±",
                line.slope, line.at_zero
            ),
        },
    };
    view! { <li>{format!("{:.1} mA alone, {count}: {says}", current.ma)}</li> }
}

fn within(figure: Interval, decimals: usize) -> String {
    format!("{:.decimals$} ± {:.decimals$}", figure.value, figure.half).replace('-', "\u{2212}")
}

/// Volts off the fit, with their sign; nothing has none.
fn off(volts: f64) -> String {
    let whole = volts.round();
    if whole == 0.0 {
        return "0 V".to_owned();
    }
    format!("{whole:+.0} V").replace('-', "\u{2212}")
}

/// One reading: its three fields and how it lies.
#[component]
fn ReadingRow(
    at: usize,
    nth: usize,
    fit: Memo<Option<Result<Measured, Vec<Finding>>>>,
) -> impl IntoView {
    let desk = desk();
    let reading = Memo::new(move |_| {
        desk.book.with(|book| {
            let tube = book.tubes.get(at);
            let reading = tube.and_then(|tube| tube.readings.get(nth));
            reading.copied().unwrap_or_default()
        })
    });
    let change = move |what: &str, set: &dyn Fn(&mut Reading)| {
        edit::<TubeEntry>(
            desk,
            at,
            &format!("{what} of reading {}", nth + 1),
            |tube| {
                if let Some(reading) = tube.readings.get_mut(nth) {
                    set(reading);
                }
            },
        );
    };
    let remove = move |_| {
        desk.settle();
        edit::<TubeEntry>(desk, at, "remove a reading", |tube| {
            if nth < tube.readings.len() {
                tube.readings.remove(nth);
            }
        });
        desk.settle();
        desk.turn();
    };
    // Nothing read yet is an empty field, not a nought.
    let given = |figure: f64| Some(figure).filter(|figure| *figure != 0.0);
    let lies = Memo::new(move |_| {
        fit.with(|fit| {
            let fit = fit.as_ref()?.as_ref().ok()?;
            fit.points.get(nth).copied()
        })
    });
    let number = nth + 1;
    view! {
        <tr class:odd=move || lies.get().is_some_and(|point| point.odd)>
            <th scope="row">{number}</th>
            <td>
                <Field
                    label=format!("Length of reading {number}")
                    class="cell"
                    value=Signal::derive(move || given(reading.get().length_mm).map_or_else(String::new, |mm| {
                        length_exact(Length::from_mm(mm), desk.units.get())
                    }))
                    commit=move |text: String| {
                        let read = length(&text, desk.bare()).map_err(|_| format!("Expected a length such as 1200 mm or 4 ft, but found {}.", quoted(text.trim())))?;
                        change("length", &|reading| reading.length_mm = read.length().mm());
                        Ok(())
                    }
                />
            </td>
            <td>
                <Field
                    label=format!("Milliamperes of reading {number}")
                    class="cell"
                    number=true
                    value=Signal::derive(move || typed(given(reading.get().ma)))
                    commit=move |text: String| {
                        let figure = optional_figure(&text, "mA")?.unwrap_or(0.0);
                        change("current", &|reading| reading.ma = figure);
                        Ok(())
                    }
                />
            </td>
            <td>
                <Field
                    label=format!("Volts of reading {number}")
                    class="cell"
                    number=true
                    value=Signal::derive(move || typed(given(reading.get().volts)))
                    commit=move |text: String| {
                        let figure = optional_figure(&text, "V")?.unwrap_or(0.0);
                        change("volts", &|reading| reading.volts = figure);
                        Ok(())
                    }
                />
            </td>
            <td>{move || lies.get().map(|point| format!("{:.0} V", point.fitted))}</td>
            <td>
                {move || lies.get().map(|point| off(point.residual))}
                {move || lies.get().is_some_and(|point| point.odd).then(|| view! { <span class="chip look">"odd"</span> })}
            </td>
            <td>
                <button aria-label=format!("Remove reading {number}") on:click=remove>"×"</button>
            </td>
        </tr>
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn volts_off_have_a_sign_unless_there_are_none() {
        assert_eq!(off(3.6), "+4 V");
        assert_eq!(off(-12.4), "\u{2212}12 V");
        assert_eq!((off(-0.4), off(0.4)), ("0 V".to_owned(), "0 V".to_owned()));
    }
}
