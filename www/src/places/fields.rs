//! Fields: a caption, a control, and a sentence where what was typed cannot be taken.

use leptos::prelude::*;
use tubewright::measure;

use crate::desk::desk;

/// Whether the field takes what was typed, or why not.
pub(super) type Taken = Result<(), String>;

/// A line of text. What is typed stays in sight even where it cannot be taken.
#[component]
pub(super) fn Field(
    /// What it is.
    #[prop(into)]
    label: String,
    /// What is there now.
    #[prop(into)]
    value: Signal<String>,
    /// Takes what was typed.
    #[prop(into)]
    commit: Callback<String, Taken>,
    /// Whether what is typed so far is worth taking at once; else it is taken when the field is
    /// left or Enter is pressed.
    #[prop(optional, into)]
    live: Option<Callback<String, bool>>,
    /// An example, shown while the field is empty.
    #[prop(optional, into)]
    example: String,
    /// Whether a number pad is the better keyboard.
    #[prop(optional)]
    number: bool,
    /// A further class of the field.
    #[prop(optional, into)]
    class: String,
    /// Whether it may hold several lines.
    #[prop(optional)]
    lines: bool,
) -> impl IntoView {
    let desk = desk();
    let wrong = RwSignal::new(None::<String>);
    // What is in the field and not, or not so, in the document: half typed, or refused. It stays
    // in sight until the field is left well or what it stands for is changed from elsewhere.
    let typed = RwSignal::new(None::<String>);
    let shown = move || typed.get().unwrap_or_else(|| value.get());
    Effect::new(move |before: Option<()>| {
        desk.turned.track();
        // The first run is not a turn: a person may have begun to type before it.
        if before.is_some() {
            wrong.set(None);
            typed.set(None);
        }
    });
    // A field that is taken off the page while it is being typed in is told of it by the browser
    // when all of this is gone: hence the `try_` everywhere.
    let take = move |text: String| {
        let (why, left) = match commit.try_run(text.clone()) {
            Some(Err(why)) => (Some(why), Some(text)),
            Some(Ok(())) | None => (None, None),
        };
        wrong.try_set(why);
        typed.try_set(left);
    };
    let so_far = move |text: String| {
        typed.try_set(Some(text.clone()));
        let worth = live.and_then(|live| live.try_run(text.clone()));
        if worth == Some(true) && matches!(commit.try_run(text), Some(Ok(()))) {
            wrong.try_set(None);
        }
    };
    let invalid = move || wrong.get().is_some().to_string();
    let control = if lines {
        view! {
            <textarea
                autocomplete="off"
                spellcheck="false"
                placeholder=example
                rows=move || shown().split('\n').count().to_string()
                prop:value=shown
                aria-invalid=invalid
                on:input:target=move |event| so_far(event.target().value())
                on:change:target=move |event| take(event.target().value())
                on:blur=move |_| desk.settle()
            ></textarea>
        }
        .into_any()
    } else {
        view! {
            <input
                type="text"
                inputmode=if number { "decimal" } else { "text" }
                autocomplete="off"
                spellcheck="false"
                placeholder=example
                prop:value=shown
                aria-invalid=invalid
                on:input:target=move |event| so_far(event.target().value())
                on:change:target=move |event| take(event.target().value())
                on:blur=move |_| desk.settle()
            />
        }
        .into_any()
    };
    view! {
        <label class=format!("field {class}") class:bad=move || wrong.get().is_some()>
            <span class="caption">{label}</span>
            {control}
            {move || wrong.get().map(|why| view! { <span class="wrong" role="alert">{why}</span> })}
        </label>
    }
}

/// For fields whose every key counts.
pub(super) fn always() -> Callback<String, bool> {
    Callback::new(|_: String| true)
}

/// A choice from a list.
#[component]
pub(super) fn Choice(
    /// What it is.
    #[prop(into)]
    label: String,
    /// What is chosen now.
    #[prop(into)]
    value: Signal<String>,
    /// What can be chosen: value and words.
    #[prop(into)]
    options: Signal<Vec<(String, String)>>,
    /// Takes a choice.
    #[prop(into)]
    commit: Callback<String>,
    /// Where what can be chosen is kept.
    #[prop(default = "the shop book")]
    home: &'static str,
    /// A further class of the field.
    #[prop(optional, into)]
    class: String,
) -> impl IntoView {
    let desk = desk();
    let listed = Memo::new(move |_| {
        let (mut list, now) = (options.get(), value.get());
        // A name that is not there stays as it is until another is chosen.
        if !list.iter().any(|(known, _)| *known == now) {
            let words = if now.is_empty() {
                "choose…".to_owned()
            } else {
                format!("{now} (not in {home})")
            };
            list.insert(0, (now, words));
        }
        list
    });
    let items = move || {
        listed
            .get()
            .into_iter()
            .map(|(name, words)| {
                let chosen = name.clone();
                view! {
                    <option value=name prop:selected=move || value.get() == chosen>
                        {words}
                    </option>
                }
            })
            .collect::<Vec<_>>()
    };
    view! {
        <label class=format!("field {class}")>
            <span class="caption">{label}</span>
            <select
                on:change:target=move |event| {
                    commit.try_run(event.target().value());
                    desk.settle();
                }
            >
                {items}
            </select>
        </label>
    }
}

/// Yes or no.
#[component]
pub(super) fn Tick(
    /// What it is.
    #[prop(into)]
    label: String,
    /// Whether it is so.
    #[prop(into)]
    value: Signal<bool>,
    /// Takes a change.
    #[prop(into)]
    commit: Callback<bool>,
) -> impl IntoView {
    let desk = desk();
    view! {
        <label class="tick">
            <input
                type="checkbox"
                prop:checked=value
                on:change:target=move |event| {
                    commit.try_run(event.target().checked());
                    desk.settle();
                }
            />
            <span>{label}</span>
        </label>
    }
}

/// A large figure with its caption.
#[component]
pub(super) fn Figure(
    /// The figure with its unit.
    #[prop(into)]
    figure: String,
    /// What it is.
    #[prop(into)]
    caption: String,
) -> impl IntoView {
    view! {
        <div class="figure">
            <b>{figure}</b>
            <span class="caption">{caption}</span>
        </div>
    }
}

/// Reads an optional figure in a unit, as a nameplate gives it; empty is "not given".
pub(super) fn optional_figure(text: &str, unit: &str) -> Result<Option<f64>, String> {
    if text.trim().is_empty() {
        return Ok(None);
    }
    measure::figure(text, unit)
        .map(Some)
        .map_err(|error| sentence(&error))
}

/// Reads a figure that must be there, from 0 on.
pub(super) fn figure(text: &str, unit: &str) -> Result<f64, String> {
    match optional_figure(text, unit)? {
        Some(figure) if figure >= 0.0 => Ok(figure),
        Some(figure) => Err(format!("Expected 0 or more, but found {figure}.")),
        None => Err("Expected a number such as 12.5, but the field is empty.".to_owned()),
    }
}

/// Reads a figure that must be there, with a minus before it where it is below 0. Degrees are bare
/// figures with or without their mark.
pub(super) fn signed(text: &str, unit: &str) -> Result<f64, String> {
    let typed = text.trim();
    let (below, typed) = match typed.strip_prefix(['-', '\u{2212}']) {
        Some(typed) => (true, typed),
        None => (false, typed),
    };
    let figure = match unit {
        "°" => figure(typed.trim_end_matches('°'), ""),
        unit => figure(typed, unit),
    }?;
    // From zero, so that a minus before nothing is nothing.
    Ok(if below { 0.0 - figure } else { figure })
}

/// Reads an amount of money, from 0 on.
pub(super) fn money(text: &str) -> Result<rust_decimal::Decimal, String> {
    measure::money(text).map_err(|error| sentence(&error))
}

fn sentence(error: &measure::ReadError) -> String {
    let says = error.to_string();
    let mut letters = says.chars();
    let first: String = letters
        .next()
        .map(char::to_uppercase)
        .into_iter()
        .flatten()
        .collect();
    format!("{first}{}.", letters.as_str())
}

/// A figure as it is put into a field.
pub(super) fn typed(figure: Option<f64>) -> String {
    figure.map_or_else(String::new, |figure| figure.to_string())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn figures_are_read_as_a_nameplate_gives_them_or_explained() {
        assert_eq!(optional_figure("  ", "V"), Ok(None), "empty is not given");
        assert_eq!(
            optional_figure("7,5 kV", "V"),
            Ok(Some(7_500.0)),
            "decimal comma, kilovolts"
        );
        let thousands = optional_figure("9,000", "V").expect_err("nobody knows which");
        assert!(thousands.contains("9000"), "{thousands}");
        assert!(optional_figure("NaN", "V").is_err(), "not a number");
        assert!(optional_figure("30 mA", "V").is_err(), "another unit");
        assert!(
            figure("", "mm").is_err_and(|why| why.contains("empty")),
            "must be there"
        );
        assert_eq!(signed("-7,5 %", "%"), Ok(-7.5), "a minus");
        assert_eq!(signed("\u{2212} 15°", "°"), Ok(-15.0), "as set in print");
        assert_eq!(signed("12", "%"), Ok(12.0), "none");
        assert!(
            signed("-0", "%").is_ok_and(f64::is_sign_positive),
            "minus nothing is nothing"
        );
        for wrong in ["--5", "5-", "-", "five", "NaN", "3 mm"] {
            assert!(signed(wrong, "%").is_err(), "{wrong} is no share");
        }
        assert!(money("12.345.6").is_err(), "two points");
        assert_eq!(
            money("12,50").map(|m| m.to_string()),
            Ok("12.50".to_owned()),
            "kept exact"
        );
    }
}
