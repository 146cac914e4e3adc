//! How the letters of a text row are laid out: a part of the row that opens, and says while it is
//! closed what of it is not as usual.

use leptos::prelude::*;
use tubewright::job::{Align, Curve, Row, TextRow};
use tubewright::measure::{
    ARC_RADIUS_MM, ARC_RISE_MM, LINE_GAP_PERCENT, LengthUnit, Limit, ROTATION_DEGREES,
    SPACING_PERCENT, WIDTH_PERCENT, length, with_units,
};

use super::fields::{Choice, Field, signed};
use super::rows::{edit, part};
use crate::desk::desk;

/// A figure of the layout as a field has it.
#[derive(Clone, Copy)]
struct Figure {
    label: &'static str,
    /// What it is called in the list of steps.
    says: &'static str,
    unit: &'static str,
    limit: &'static Limit,
    get: fn(&TextRow) -> f64,
    set: fn(&mut TextRow, f64),
}

const WIDTH: Figure = Figure {
    label: "Letter width, %",
    says: "letter width",
    unit: "%",
    limit: &WIDTH_PERCENT,
    get: |row| row.width_percent,
    set: |row, figure| row.width_percent = figure,
};
const SPACING: Figure = Figure {
    label: "Spacing, %",
    says: "spacing",
    unit: "%",
    limit: &SPACING_PERCENT,
    get: |row| row.spacing_percent,
    set: |row, figure| row.spacing_percent = figure,
};
const LINE_GAP: Figure = Figure {
    label: "Line gap, %",
    says: "line gap",
    unit: "%",
    limit: &LINE_GAP_PERCENT,
    get: |row| row.line_gap_percent,
    set: |row, figure| row.line_gap_percent = figure,
};
const TURN: Figure = Figure {
    label: "Turned, degrees",
    says: "rotation",
    unit: "°",
    limit: &ROTATION_DEGREES,
    get: |row| row.rotation_degrees,
    set: |row, figure| row.rotation_degrees = figure,
};

/// The part of a text row that says how its letters stand.
#[component]
pub(super) fn Layout(
    /// The row.
    at: usize,
) -> impl IntoView {
    let desk = desk();
    let row = Memo::new(move |_| {
        desk.job.with(|job| {
            part(job, at, |row| match row {
                Row::Text(row) => row.clone(),
                _ => TextRow::default(),
            })
        })
    });
    let unusual = Memo::new(move |_| row.with(unusual));
    let open = RwSignal::new(unusual.with_untracked(|unusual| !unusual.is_empty()));
    // Another job, or a step taken back, may bring a layout that must not stay out of sight.
    Effect::new(move |_| {
        desk.turned.track();
        if unusual.with_untracked(|unusual| !unusual.is_empty()) {
            open.set(true);
        }
    });
    let lines = Memo::new(move |_| {
        row.with(|row| {
            let usual = TextRow::default();
            row.text.contains('\n')
                || row.align != usual.align
                || row.line_gap_percent != usual.line_gap_percent
        })
    });
    let shown = move || unusual.with(|unusual| unusual.join(", "));
    view! {
        <details class="layout" prop:open=open on:toggle:target=move |event| open.set(event.target().open())>
            <summary><span>"Layout"</span><small>{shown}</small></summary>
            <Show when=move || open.get()>
                <div class="row-fields">
                    {figure(at, row, WIDTH)}
                    {figure(at, row, SPACING)}
                    <Show when=move || lines.get()>
                        {alignment(at, row)}
                        {figure(at, row, LINE_GAP)}
                    </Show>
                    {arc(at, row)}
                    {figure(at, row, TURN)}
                </div>
                <p class="quiet">
                    "Spacing, which is added after each letter, and line gap are in percent of the letter height. Above zero, a turned row rises to the right; a minus before an arc's length lets its middle hang down."
                    <Show when=move || !lines.get()>" Enter begins another line in the text."</Show>
                </p>
            </Show>
        </details>
    }
}

/// What of a layout is not as usual, in words.
fn unusual(row: &TextRow) -> Vec<String> {
    let usual = TextRow::default();
    let differs = |figure: Figure| (figure.get)(row) != (figure.get)(&usual);
    let mut says = Vec::new();
    if differs(WIDTH) {
        says.push(format!("width {} %", row.width_percent));
    }
    if differs(SPACING) {
        says.push(format!("spacing {} %", row.spacing_percent));
    }
    match row.align {
        Align::Left => says.push("lines at the left".to_owned()),
        Align::Right => says.push("lines at the right".to_owned()),
        Align::Centre => {}
    }
    if differs(LINE_GAP) {
        says.push(format!("line gap {} %", row.line_gap_percent));
    }
    match row.arc.as_ref().map(|arc| arc.parts().0) {
        Some(true) => says.push("on an arc that hangs".to_owned()),
        Some(false) => says.push("on an arc".to_owned()),
        None => {}
    }
    if differs(TURN) {
        says.push(format!("turned {}°", row.rotation_degrees));
    }
    says
}

fn change(at: usize, field: &str, change: impl FnOnce(&mut TextRow)) {
    edit(desk(), at, field, |row| {
        if let Row::Text(row) = row {
            change(row);
        }
    });
}

/// A figure of the layout. Left empty it is as usual.
fn figure(at: usize, row: Memo<TextRow>, figure: Figure) -> impl IntoView {
    let read = move |typed: &str| {
        if typed.trim().is_empty() {
            return Ok((figure.get)(&TextRow::default()));
        }
        signed(typed, figure.unit)
    };
    let desk = desk();
    view! {
        <Field
            label=figure.label
            class="narrow"
            number=true
            live=move |typed: String| {
                !typed.trim().is_empty() && read(&typed).is_ok_and(|figure_typed| figure.limit.holds(figure_typed))
            }
            value=Signal::derive(move || row.with(|row| (figure.get)(row).to_string()))
            commit=move |typed: String| {
                let typed = read(&typed)?;
                edit(desk, at, figure.says, |row| if let Row::Text(row) = row { (figure.set)(row, typed) });
                Ok(())
            }
        />
    }
}

const ALIGNED: [(&str, &str, Align); 3] = [
    ("centre", "centred", Align::Centre),
    ("left", "at the left", Align::Left),
    ("right", "at the right", Align::Right),
];

fn alignment(at: usize, row: Memo<TextRow>) -> impl IntoView {
    let words = move || {
        let align = row.with(|row| row.align);
        let found = ALIGNED.into_iter().find(|&(.., known)| known == align);
        found.map_or("", |(word, ..)| word).to_owned()
    };
    view! {
        <Choice
            label="Lines"
            class="narrow"
            value=Signal::derive(words)
            options=Signal::stored(ALIGNED.map(|(word, words, _)| (word.to_owned(), words.to_owned())).to_vec())
            commit=move |word: String| {
                let found = ALIGNED.into_iter().find(|&(known, ..)| known == word);
                if let Some((.., align)) = found {
                    change(at, "lines", |row| row.align = align);
                }
            }
        />
    }
}

/// By what an arc is given.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum By {
    Radius,
    Rise,
}

impl By {
    fn of(curve: &Curve) -> Self {
        match curve {
            Curve::Radius(_) => Self::Radius,
            Curve::Rise(_) => Self::Rise,
        }
    }

    const fn word(self) -> &'static str {
        match self {
            Self::Radius => "radius",
            Self::Rise => "rise",
        }
    }

    const fn label(self) -> &'static str {
        match self {
            Self::Radius => "Radius of the arc",
            Self::Rise => "Rise of the arc",
        }
    }

    const fn limit(self) -> &'static Limit {
        match self {
            Self::Radius => &ARC_RADIUS_MM,
            Self::Rise => &ARC_RISE_MM,
        }
    }

    fn curve(self, typed: String) -> Curve {
        match self {
            Self::Radius => Curve::Radius(typed),
            Self::Rise => Curve::Rise(typed),
        }
    }

    /// A length to begin with, for a row so wide: a gentle bend that is plainly seen.
    fn first(self, wide_mm: f64, bare: LengthUnit) -> String {
        let (unit, unit_mm) = match bare {
            LengthUnit::Millimetres => ("mm", 10.0),
            LengthUnit::Inches => ("in", 25.4),
        };
        let wide_mm = if wide_mm > 0.0 { wide_mm } else { 600.0 };
        let mm = match self {
            Self::Radius => wide_mm,
            Self::Rise => wide_mm / 8.0,
        };
        let units = (mm / unit_mm).round().max(1.0);
        let figure = match bare {
            LengthUnit::Millimetres => units * unit_mm,
            LengthUnit::Inches => units,
        };
        format!("{figure} {unit}")
    }
}

/// A signed length with its unit written out.
fn with_unit(by: By, typed: &str, bare: LengthUnit) -> String {
    let curve = by.curve(typed.to_owned());
    let (hangs, typed) = curve.parts();
    let typed = with_units(typed.trim(), bare);
    if hangs { format!("-{typed}") } else { typed }
}

fn arc(at: usize, row: Memo<TextRow>) -> impl IntoView {
    let desk = desk();
    let by = Memo::new(move |_| row.with(|row| row.arc.as_ref().map(By::of)));
    let options = [
        ("none", "none"),
        (By::Radius.word(), "by radius"),
        (By::Rise.word(), "by rise"),
    ];
    let options = options.map(|(word, words)| (word.to_owned(), words.to_owned()));
    let choose = move |word: String| {
        let chosen = [By::Radius, By::Rise]
            .into_iter()
            .find(|by| by.word() == word);
        let wide_mm = desk.results.with_untracked(|results| {
            let row = results.takeoff.rows.get(at);
            row.map_or(0.0, |row| row.bounds.width())
        });
        edit(desk, at, "arc", |row| {
            if let Row::Text(row) = row
                && chosen != row.arc.as_ref().map(By::of)
            {
                row.arc = chosen.map(|by| by.curve(by.first(wide_mm, desk.bare())));
            }
        });
    };
    let length_field = move |by: By| {
        view! {
            <Field
                label=by.label()
                class="narrow"
                live=move |typed: String| {
                    let curve = by.curve(typed);
                    let (_, typed) = curve.parts();
                    length(typed, desk.bare()).is_ok_and(|length| by.limit().holds(length.length().mm()))
                }
                value=Signal::derive(move || row.with(|row| match &row.arc {
                    Some(Curve::Radius(typed) | Curve::Rise(typed)) => typed.clone(),
                    None => String::new(),
                }))
                commit=move |typed: String| {
                    let typed = with_unit(by, &typed, desk.bare());
                    edit(desk, at, by.label(), |row| if let Row::Text(row) = row {
                        row.arc = Some(by.curve(typed));
                    });
                    Ok(())
                }
            />
        }
    };
    view! {
        <Choice
            label="Arc"
            class="narrow"
            value=Signal::derive(move || by.get().map_or("none", By::word).to_owned())
            options=Signal::stored(options.to_vec())
            commit=choose
        />
        {move || by.get().map(length_field)}
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_not_as_usual_is_said_and_nothing_else() {
        assert_eq!(unusual(&TextRow::default()), Vec::<String>::new());
        let row = TextRow {
            text: "TWO\nLINES".to_owned(),
            width_percent: 120.0,
            spacing_percent: -2.5,
            align: Align::Left,
            line_gap_percent: 80.0,
            arc: Some(Curve::Rise(" \u{2212} 90 mm".to_owned())),
            rotation_degrees: -15.0,
            ..TextRow::default()
        };
        assert_eq!(
            unusual(&row).join(", "),
            "width 120 %, spacing -2.5 %, lines at the left, line gap 80 %, on an arc that hangs, \
             turned -15°"
        );
    }

    #[test]
    fn a_bare_length_takes_its_unit_behind_its_minus() {
        for (typed, becomes) in [
            ("900", "900 mm"),
            ("- 900", "-900 mm"),
            ("\u{2212}2 x 300 mm", "-2 x 300 mm"),
            ("1' 6", "1' 6"),
            ("-", "-"),
            ("twelve", "twelve"),
        ] {
            assert_eq!(with_unit(By::Rise, typed, LengthUnit::Millimetres), becomes);
        }
    }

    #[test]
    fn an_arc_begins_with_a_length_that_is_taken() {
        for by in [By::Radius, By::Rise] {
            for bare in [LengthUnit::Millimetres, LengthUnit::Inches] {
                for wide_mm in [0.0, 8.0, 1234.5, 60_000.0] {
                    let typed = by.first(wide_mm, bare);
                    let mm = length(&typed, LengthUnit::Millimetres)
                        .expect("a length")
                        .length()
                        .mm();
                    assert!(by.limit().holds(mm), "{typed} for {wide_mm} mm");
                }
            }
        }
        assert_eq!(By::Radius.first(1234.5, LengthUnit::Millimetres), "1230 mm");
        assert_eq!(By::Rise.first(1219.2, LengthUnit::Inches), "6 in");
    }
}
