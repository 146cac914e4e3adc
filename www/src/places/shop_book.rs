//! Shop book: supplies, tube types, rules, rates. A first cut of editing: every field in place.

use leptos::prelude::*;
use rust_decimal::Decimal;
use tubewright::Book;
use tubewright::book::{Bending, Gas, OutputEarthing, Rates, SupplyEntry, SupplyKind, TubeEntry};
use tubewright::rules::Finding;
use tubewright::supply::Rating;
use tubewright::tube::TubeType;

use super::chart_fields::ChartFields;
use super::fields::{Choice, Field, Tick, always, figure, money, optional_figure, typed};
use super::findings::line;
use super::sign::{damp, damp_options, damp_word};
use crate::desk::{BookPart, Desk, desk};

/// The place.
#[component]
pub fn ShopBook() -> impl IntoView {
    let desk = desk();
    let part = desk.book_part;
    let tab = move |this: BookPart, words: &'static str| {
        view! {
            <button
                class:on=move || part.get() == this
                aria-pressed=move || (part.get() == this).to_string()
                on:click=move |_| part.set(this)
            >
                {words}
            </button>
        }
    };
    view! {
        <section class="panel" aria-label="Shop book">
            <h2>{move || desk.book.with(|book| book.name.clone())}</h2>
            <p class="quiet">{move || desk.book.with(|book| book.note.clone())}</p>
            <div class="pair tabs" role="group" aria-label="Part of the book">
                {tab(BookPart::Supplies, "Supplies")}
                {tab(BookPart::Tubes, "Tube types")}
                {tab(BookPart::Rules, "Rules")}
                {tab(BookPart::Rates, "Rates")}
            </div>
        </section>
        {move || match part.get() {
            BookPart::Supplies => view! { <Supplies/> }.into_any(),
            BookPart::Tubes => view! { <Tubes/> }.into_any(),
            BookPart::Rules => view! { <RuleSets/> }.into_any(),
            BookPart::Rates => view! { <RatesForm/> }.into_any(),
        }}
    }
}

/// A name no entry of a list has yet.
fn free_name(wanted: &str, taken: &[&str]) -> String {
    let mut name = wanted.to_owned();
    let mut number = 2;
    while taken.contains(&name.as_str()) {
        name = format!("{wanted} ({number})");
        number += 1;
    }
    name
}

/// The entry that is open, by its place in a list of names. By name, so that undo or a removal
/// elsewhere never puts another entry under one's hands.
fn opened(desk: Desk, names: fn(&Book) -> Vec<&str>) -> Memo<Option<usize>> {
    Memo::new(move |_| {
        let name = desk.entry.get()?;
        desk.book
            .with(|book| names(book).into_iter().position(|known| known == name))
    })
}

fn supply_names(book: &Book) -> Vec<&str> {
    book.supplies
        .iter()
        .map(|supply| supply.name.as_str())
        .collect()
}

fn tube_names(book: &Book) -> Vec<&str> {
    book.tubes.iter().map(|tube| tube.name.as_str()).collect()
}

/// A list of entries; the open one has its form right under it.
#[component]
fn Entries(
    /// Lines of the list: name, what stands beside it, colour if it has one, whether it is usable.
    #[prop(into)]
    lines: Signal<Vec<EntryLine>>,
    /// Place of the open entry.
    open: Memo<Option<usize>>,
    /// The form of an entry.
    form: Callback<usize, AnyView>,
) -> impl IntoView {
    let desk = desk();
    let count = Memo::new(move |_| lines.with(Vec::len));
    let line = move |at: usize| {
        Memo::new(move |_| lines.with(|lines| lines.get(at).cloned().unwrap_or_default()))
    };
    view! {
        <ul class="entries">
            <For each=move || 0..count.get() key=|at| *at let:at>
                {
                    let line = line(at);
                    view! {
                        <li class:open=move || open.get() == Some(at)>
                            <button
                                class="entry"
                                aria-expanded=move || (open.get() == Some(at)).to_string()
                                on:click=move |_| {
                                    let name = line.get_untracked().name;
                                    desk.settle();
                                    desk.entry.update(|now| {
                                        *now = if now.as_ref() == Some(&name) { None } else { Some(name) };
                                    });
                                }
                            >
                                <b>
                                    {move || line.get().colour.map(|colour| view! { <span class="dot" style:background=colour></span> })}
                                    {move || line.get().name}
                                </b>
                                <span>{move || line.get().beside}</span>
                                {move || line.get().wrong.then(|| view! { <span class="chip stop">"cannot be used"</span> })}
                            </button>
                            {move || (open.get() == Some(at)).then(|| form.run(at))}
                        </li>
                    }
                }
            </For>
        </ul>
    }
}

#[derive(Debug, Clone, Default, PartialEq)]
struct EntryLine {
    name: String,
    beside: String,
    colour: Option<String>,
    wrong: bool,
}

/// A new or copied entry is opened and brought into sight.
fn open_new(desk: Desk, name: String) {
    desk.entry.set(Some(name));
    desk.turn();
    request_animation_frame(|| {
        if let Ok(Some(found)) = document().query_selector(".entries .open") {
            found.scroll_into_view();
        }
    });
}

#[component]
fn Supplies() -> impl IntoView {
    let desk = desk();
    let lines = Signal::derive(move || {
        desk.book.with(|book| {
            book.supplies
                .iter()
                .map(|supply| {
                    let figures = [
                        supply.no_load_volts.map(|volts| {
                            tubewright::measure::volts_shown(
                                tubewright::measure::Volts::from_volts(volts),
                            )
                        }),
                        supply
                            .short_circuit_ma
                            .or(supply.rated_ma)
                            .map(|ma| format!("{ma} mA")),
                        supply.earthing.map(|earthing| {
                            tubewright::supply::earthing_words(
                                earthing,
                                desk.results.with(|work| work.earth_word()),
                            )
                            .to_owned()
                        }),
                        supply.input_volts.map(|volts| format!("for {volts} V")),
                        supply.price.map(super::price::amount),
                    ];
                    EntryLine {
                        name: supply.name.clone(),
                        beside: figures.into_iter().flatten().collect::<Vec<_>>().join(", "),
                        colour: None,
                        wrong: Rating::read(supply).is_err(),
                    }
                })
                .collect()
        })
    });
    view! {
        <section class="panel" aria-label="Supplies">
            <header class="panel-head">
                <h2>"Supplies"</h2>
                <button on:click=move |_| {
                    desk.settle();
                    let name = desk.book.with_untracked(|book| free_name("New supply", &supply_names(book)));
                    desk.edit_book("add supply", "Add a supply", |book| {
                        book.supplies.insert(0, SupplyEntry { name: name.clone(), ..SupplyEntry::default() });
                    });
                    desk.settle();
                    open_new(desk, name);
                }>"Add"</button>
            </header>
            <p class="quiet">"As their nameplates say. A figure that is not on the plate is left empty; nothing is invented for it."</p>
            <Entries
                lines=lines
                open=opened(desk, supply_names)
                form=Callback::new(|at| view! { <SupplyForm at=at/> }.into_any())
            />
        </section>
    }
}

fn supply_edit(desk: Desk, at: usize, field: &str, edit: impl FnOnce(&mut SupplyEntry)) {
    desk.edit_book(
        &format!("supply {at} {field}"),
        &format!("Supply: {field}"),
        |book| {
            if let Some(entry) = book.supplies.get_mut(at) {
                edit(entry);
            }
        },
    );
}

/// A figure of an entry: caption, unit, how it is read and written.
type Figure<T> = (
    &'static str,
    &'static str,
    fn(&T) -> Option<f64>,
    fn(&mut T, Option<f64>),
);

const SUPPLY_FIGURES: [Figure<SupplyEntry>; 14] = [
    (
        "No-load volts, V",
        "V",
        |s| s.no_load_volts,
        |s, v| s.no_load_volts = v,
    ),
    (
        "Short-circuit current, mA",
        "mA",
        |s| s.short_circuit_ma,
        |s, v| s.short_circuit_ma = v,
    ),
    (
        "Rated current, mA",
        "mA",
        |s| s.rated_ma,
        |s, v| s.rated_ma = v,
    ),
    (
        "Volts at rated current (electronic), V",
        "V",
        |s| s.rated_load_volts,
        |s, v| s.rated_load_volts = v,
    ),
    ("Input, V", "V", |s| s.input_volts, |s, v| s.input_volts = v),
    (
        "Input, Hz",
        "Hz",
        |s| s.input_hertz,
        |s, v| s.input_hertz = v,
    ),
    ("Input, VA", "VA", |s| s.input_va, |s, v| s.input_va = v),
    (
        "Trip current, mA",
        "mA",
        |s| s.trip_ma,
        |s, v| s.trip_ma = v,
    ),
    (
        "Trip time, s",
        "s",
        |s| s.trip_seconds,
        |s, v| s.trip_seconds = v,
    ),
    (
        "Output, Hz",
        "Hz",
        |s| s.output_hertz,
        |s, v| s.output_hertz = v,
    ),
    (
        "Plate's least load, % of no-load volts",
        "%",
        |s| s.least_load_percent,
        |s, v| s.least_load_percent = v,
    ),
    (
        "Plate's most load, % of no-load volts",
        "%",
        |s| s.most_load_percent,
        |s, v| s.most_load_percent = v,
    ),
    (
        "Plate's longest lead, mm",
        "mm",
        |s| s.longest_lead_mm,
        |s, v| s.longest_lead_mm = v,
    ),
    (
        "On the shelf",
        "",
        |s| s.stock.map(f64::from),
        #[allow(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "clamped to what u32 holds"
        )]
        |s, v| s.stock = v.map(|v| v.clamp(0.0, 1e6) as u32),
    ),
];

#[component]
fn SupplyForm(at: usize) -> impl IntoView {
    let desk = desk();
    let read = move |get: fn(&SupplyEntry) -> String| {
        Signal::derive(move || {
            desk.book
                .with(|book| book.supplies.get(at).map(get).unwrap_or_default())
        })
    };
    let figures: Vec<_> = SUPPLY_FIGURES
        .into_iter()
        .map(|(label, unit, get, set)| {
            view! {
                <Field
                    label=label
                    number=true
                    value=Signal::derive(move || {
                        typed(desk.book.with(|book| book.supplies.get(at).and_then(get)))
                    })
                    commit=move |text: String| {
                        let figure = optional_figure(&text, unit)?;
                        supply_edit(desk, at, label, |entry| set(entry, figure));
                        Ok(())
                    }
                />
            }
        })
        .collect();
    let said = move || {
        desk.book
            .with(|book| match book.supplies.get(at).map(Rating::read) {
                Some(Err(wrong)) => Some(lines(&wrong)),
                _ => None,
            })
    };
    view! {
        <section class="form" aria-label="Supply">
            <header class="panel-head">
                <h2>{read(|s| s.name.clone())}</h2>
                <button on:click=move |_| {
                    desk.settle();
                    let name = desk.book.with_untracked(|book| {
                        let names = supply_names(book);
                        names.get(at).map(|name| free_name(name, &names))
                    });
                    if let Some(name) = name {
                        desk.edit_book("copy supply", "Copy a supply", |book| {
                            if let Some(mut entry) = book.supplies.get(at).cloned() {
                                entry.name.clone_from(&name);
                                book.supplies.insert(at + 1, entry);
                            }
                        });
                        desk.settle();
                        open_new(desk, name);
                    }
                }>"Copy"</button>
                <button on:click=move |_| {
                    desk.entry.set(None);
                    desk.settle();
                    desk.edit_book("remove supply", "Remove a supply", |book| {
                        if at < book.supplies.len() {
                            book.supplies.remove(at);
                        }
                    });
                    desk.settle();
                    desk.turn();
                }>"Remove"</button>
            </header>
            {said}
            <div class="form-fields">
                <Field
                    label="Name"
                    class="wide"
                    value=read(|s| s.name.clone())
                    commit=move |text: String| {
                        let name = text.trim().to_owned();
                        let taken = desk.book.with_untracked(|book| {
                            book.supplies.iter().enumerate().any(|(other, s)| other != at && s.name == name)
                        });
                        if name.is_empty() || taken {
                            return Err("Each supply needs a name of its own.".to_owned());
                        }
                        supply_edit(desk, at, "name", |entry| entry.name.clone_from(&name));
                        desk.entry.set(Some(name));
                        Ok(())
                    }
                />
                <Choice
                    label="Kind"
                    value=read(|s| match s.kind { None => "", Some(SupplyKind::Iron) => "iron", Some(SupplyKind::Electronic) => "electronic" }.to_owned())
                    options=Signal::stored(pairs(&[("iron", "iron transformer"), ("electronic", "electronic")]))
                    commit=move |word: String| supply_edit(desk, at, "kind", |entry| {
                        entry.kind = match word.as_str() { "iron" => Some(SupplyKind::Iron), "electronic" => Some(SupplyKind::Electronic), _ => None };
                    })
                />
                <Choice
                    label="Output"
                    value=read(|s| s.earthing.map_or("", earthing_key).to_owned())
                    options=Signal::derive(move || {
                        let word = desk.results.with(|work| work.earth_word());
                        EARTHINGS.iter().map(|&earthing| {
                            (earthing_key(earthing).to_owned(), tubewright::supply::earthing_words(earthing, word).to_owned())
                        }).collect::<Vec<_>>()
                    })
                    commit=move |word: String| supply_edit(desk, at, "output", |entry| {
                        entry.earthing = EARTHINGS.iter().copied().find(|&e| earthing_key(e) == word);
                    })
                />
                <Choice
                    label="Made for"
                    value=read(|s| damp_word(s.place).to_owned())
                    options=Signal::stored(damp_options())
                    commit=move |word: String| supply_edit(desk, at, "place", |entry| entry.place = damp(&word))
                />
                <Tick
                    label="Earth-fault protection"
                    value=Signal::derive(move || desk.book.with(|book| book.supplies.get(at).is_some_and(|s| s.earth_fault_protection)))
                    commit=move |yes: bool| supply_edit(desk, at, "earth-fault protection", |entry| entry.earth_fault_protection = yes)
                />
                <Tick
                    label="Open-circuit protection"
                    value=Signal::derive(move || desk.book.with(|book| book.supplies.get(at).is_some_and(|s| s.open_circuit_protection)))
                    commit=move |yes: bool| supply_edit(desk, at, "open-circuit protection", |entry| entry.open_circuit_protection = yes)
                />
                {figures}
                <Field
                    label="Price"
                    number=true
                    value=read(|s| s.price.map_or_else(String::new, |price| price.to_string()))
                    commit=move |text: String| {
                        let price = optional_money(&text)?;
                        supply_edit(desk, at, "price", |entry| entry.price = price);
                        Ok(())
                    }
                />
                <Field
                    label="Note"
                    class="wide"
                    live=always()
                    value=read(|s| s.note.clone())
                    commit=move |text: String| {
                        supply_edit(desk, at, "note", |entry| entry.note = text);
                        Ok(())
                    }
                />
            </div>
            <ChartFields at=at/>
        </section>
    }
}

const EARTHINGS: [OutputEarthing; 4] = [
    OutputEarthing::MidPoint,
    OutputEarthing::MidPointReturn,
    OutputEarthing::OneEnd,
    OutputEarthing::Isolated,
];

const fn earthing_key(earthing: OutputEarthing) -> &'static str {
    match earthing {
        OutputEarthing::MidPoint => "mid-point",
        OutputEarthing::MidPointReturn => "mid-point-return",
        OutputEarthing::OneEnd => "one-end",
        OutputEarthing::Isolated => "isolated",
    }
}

fn pairs(words: &[(&str, &str)]) -> Vec<(String, String)> {
    words
        .iter()
        .map(|&(value, words)| (value.to_owned(), words.to_owned()))
        .collect()
}

fn lines(findings: &[Finding]) -> Vec<impl IntoView + use<>> {
    findings.iter().map(line).collect()
}

fn optional_money(text: &str) -> Result<Option<Decimal>, String> {
    if text.trim().is_empty() {
        Ok(None)
    } else {
        money(text).map(Some)
    }
}

#[component]
fn Tubes() -> impl IntoView {
    let desk = desk();
    let lines = Signal::derive(move || {
        desk.book.with(|book| {
            book.tubes
                .iter()
                .map(|entry| match TubeType::read(entry) {
                    Ok(tube) => EntryLine {
                        name: tube.name.clone(),
                        beside: format!(
                            "{:.0} V/m at {} mA, {}",
                            tube.volts_per_m,
                            tube.at_ma,
                            tube.known_words()
                        ),
                        colour: Some(tube.colour),
                        wrong: false,
                    },
                    Err(_) => EntryLine {
                        name: entry.name.clone(),
                        wrong: true,
                        ..EntryLine::default()
                    },
                })
                .collect()
        })
    });
    view! {
        <section class="panel" aria-label="Tube types">
            <header class="panel-head">
                <h2>"Tube types"</h2>
                <button on:click=move |_| {
                    desk.settle();
                    let name = desk.book.with_untracked(|book| free_name("New tube type", &tube_names(book)));
                    desk.edit_book("add tube", "Add a tube type", |book| {
                        book.tubes.insert(0, TubeEntry { name: name.clone(), ..TubeEntry::default() });
                    });
                    desk.settle();
                    open_new(desk, name);
                }>"Add"</button>
            </header>
            <p class="quiet">"Electrical figures left empty come from the default model, ±15 to ±25 %, and say so wherever they are used."</p>
            <Entries
                lines=lines
                open=opened(desk, tube_names)
                form=Callback::new(|at| view! { <TubeForm at=at/> }.into_any())
            />
        </section>
    }
}

fn tube_edit(desk: Desk, at: usize, field: &str, edit: impl FnOnce(&mut TubeEntry)) {
    desk.edit_book(
        &format!("tube {at} {field}"),
        &format!("Tube type: {field}"),
        |book| {
            if let Some(entry) = book.tubes.get_mut(at) {
                edit(entry);
            }
        },
    );
}

const TUBE_FIGURES: [Figure<TubeEntry>; 9] = [
    (
        "Outer diameter, mm",
        "mm",
        |t| t.outer_mm,
        |t, v| t.outer_mm = v,
    ),
    (
        "Wall, mm (1 when empty)",
        "mm",
        |t| t.wall_mm,
        |t, v| t.wall_mm = v,
    ),
    (
        "Least current, mA",
        "mA",
        |t| t.least_ma,
        |t, v| t.least_ma = v,
    ),
    (
        "Greatest current, mA",
        "mA",
        |t| t.most_ma,
        |t, v| t.most_ma = v,
    ),
    (
        "Running volts, V/m",
        "V/m",
        |t| t.volts_per_m,
        |t, v| t.volts_per_m = v,
    ),
    (
        "… at, mA (25 when empty)",
        "mA",
        |t| t.at_ma,
        |t, v| t.at_ma = v,
    ),
    (
        "Exponent of the fall with current",
        "",
        |t| t.exponent,
        |t, v| t.exponent = v,
    ),
    (
        "Electrode pair, V",
        "V",
        |t| t.pair_volts,
        |t, v| t.pair_volts = v,
    ),
    (
        "Cold factor below 0 °C",
        "",
        |t| t.cold_factor,
        |t, v| t.cold_factor = v,
    ),
];

#[component]
fn TubeForm(at: usize) -> impl IntoView {
    let desk = desk();
    let read = move |get: fn(&TubeEntry) -> String| {
        Signal::derive(move || {
            desk.book
                .with(|book| book.tubes.get(at).map(get).unwrap_or_default())
        })
    };
    let figures: Vec<_> = TUBE_FIGURES
        .into_iter()
        .map(|(label, unit, get, set)| {
            view! {
                <Field
                    label=label
                    number=true
                    value=Signal::derive(move || {
                        typed(desk.book.with(|book| book.tubes.get(at).and_then(get)))
                    })
                    commit=move |text: String| {
                        let figure = optional_figure(&text, unit)?;
                        tube_edit(desk, at, label, |entry| set(entry, figure));
                        Ok(())
                    }
                />
            }
        })
        .collect();
    let said = move || {
        desk.book
            .with(|book| match book.tubes.get(at).map(TubeType::read) {
                Some(Err(wrong)) => Some(lines(&wrong)),
                _ => None,
            })
    };
    view! {
        <section class="form" aria-label="Tube type">
            <header class="panel-head">
                <h2>{read(|t| t.name.clone())}</h2>
                <button on:click=move |_| {
                    desk.settle();
                    let name = desk.book.with_untracked(|book| {
                        let names = tube_names(book);
                        names.get(at).map(|name| free_name(name, &names))
                    });
                    if let Some(name) = name {
                        desk.edit_book("copy tube", "Copy a tube type", |book| {
                            if let Some(mut entry) = book.tubes.get(at).cloned() {
                                entry.name.clone_from(&name);
                                book.tubes.insert(at + 1, entry);
                            }
                        });
                        desk.settle();
                        open_new(desk, name);
                    }
                }>"Copy"</button>
                <button on:click=move |_| {
                    desk.entry.set(None);
                    desk.settle();
                    desk.edit_book("remove tube", "Remove a tube type", |book| {
                        if at < book.tubes.len() {
                            book.tubes.remove(at);
                        }
                    });
                    desk.settle();
                    desk.turn();
                }>"Remove"</button>
            </header>
            {said}
            <div class="form-fields">
                <Field
                    label="Name"
                    class="wide"
                    value=read(|t| t.name.clone())
                    commit=move |text: String| {
                        let name = text.trim().to_owned();
                        let taken = desk.book.with_untracked(|book| {
                            book.tubes.iter().enumerate().any(|(other, t)| other != at && t.name == name)
                        });
                        if name.is_empty() || taken {
                            return Err("Each tube type needs a name of its own.".to_owned());
                        }
                        tube_edit(desk, at, "name", |entry| entry.name.clone_from(&name));
                        desk.entry.set(Some(name));
                        Ok(())
                    }
                />
                <Choice
                    label="Gas"
                    value=read(|t| match t.gas { Gas::Neon => "neon", Gas::ArgonMercury => "argon-mercury" }.to_owned())
                    options=Signal::stored(pairs(&[("neon", "neon"), ("argon-mercury", "argon-mercury")]))
                    commit=move |word: String| tube_edit(desk, at, "gas", |entry| {
                        entry.gas = if word == "neon" { Gas::Neon } else { Gas::ArgonMercury };
                    })
                />
                <label class="field">
                    <span class="caption">"Colour on the picture"</span>
                    <input
                        type="color"
                        prop:value=move || desk.book.with(|book| {
                            book.tubes.get(at).and_then(|t| TubeType::read(t).ok()).map_or_else(|| "#ff5a3c".to_owned(), |t| t.colour)
                        })
                        on:change:target=move |event| {
                            let colour = event.target().value();
                            tube_edit(desk, at, "colour", |entry| entry.colour = colour);
                            desk.settle();
                        }
                    />
                </label>
                {figures}
                <Field
                    label="Price of a metre"
                    number=true
                    value=read(|t| t.price_per_m.map_or_else(String::new, |price| price.to_string()))
                    commit=move |text: String| {
                        let price = optional_money(&text)?;
                        tube_edit(desk, at, "price", |entry| entry.price_per_m = price);
                        Ok(())
                    }
                />
                <Field
                    label="Where the figures came from"
                    class="wide"
                    live=always()
                    value=read(|t| t.source.clone())
                    commit=move |text: String| {
                        tube_edit(desk, at, "source", |entry| entry.source = text);
                        Ok(())
                    }
                />
            </div>
        </section>
    }
}

#[component]
fn RuleSets() -> impl IntoView {
    let desk = desk();
    let sets = move || {
        desk.book.with(|book| {
            book.rule_sets
                .iter()
                .enumerate()
                .map(|(at, set)| {
                    let heading = if set.edition.is_empty() {
                        set.jurisdiction.clone()
                    } else {
                        format!("{} · {}", set.jurisdiction, set.edition)
                    };
                    let rules: Vec<_> = set
                        .rules
                        .iter()
                        .enumerate()
                        .map(|(row, rule)| {
                            let unit = rule.limits.unit();
                            let label = format!("{}{}{}", rule.limits.caption(set.earth_word), if unit.is_empty() { "" } else { ", " }, unit);
                            let field = format!("rule {at} {row}");
                            let field = (!unit.is_empty()).then(|| view! {
                                <Field
                                    label=label.clone()
                                    number=true
                                    example="to be filled in"
                                    value=Signal::derive(move || typed(desk.book.with(|book| {
                                        book.rule_sets.get(at).and_then(|set| set.rules.get(row)).and_then(|rule| rule.value)
                                    })))
                                    commit=move |text: String| {
                                        let figure = optional_figure(&text, unit)?;
                                        desk.edit_book(&field, "A rule's figure", |book| {
                                            if let Some(rule) = book.rule_sets.get_mut(at).and_then(|set| set.rules.get_mut(row)) {
                                                // A figure typed here is the shop's, whoever's clause it stands under.
                                                rule.standing = tubewright::rules::Standing::ShopSetting;
                                                rule.value = figure;
                                            }
                                        });
                                        Ok(())
                                    }
                                />
                            });
                            view! {
                                <li>
                                    {match field {
                                        Some(field) => field.into_any(),
                                        None => view! { <span>{label}</span> }.into_any(),
                                    }}
                                    <small>{[rule.clause.as_str(), rule.standing.words()].into_iter().filter(|text| !text.is_empty()).collect::<Vec<_>>().join(", ")}</small>
                                </li>
                            }
                        })
                        .collect();
                    view! {
                        <section class="panel" aria-label=set.name.clone()>
                            <h2>{set.name.clone()}</h2>
                            <p><b>{heading}</b></p>
                            <p class="quiet">{set.note.clone()}</p>
                            <ul class="rules">{rules}</ul>
                        </section>
                    }
                })
                .collect::<Vec<_>>()
        })
    };
    view! {
        <p class="danger">"The official text of the code and the local authority govern, not these figures. A blank is not known here: fill it in from the official text."</p>
        <div class="rule-sets">{sets}</div>
    }
}

type Rate = (&'static str, fn(&Rates) -> Decimal, fn(&mut Rates, Decimal));

const RATES: [Rate; 7] = [
    ("One electrode", |r| r.electrode, |r, v| r.electrode = v),
    (
        "An hour of labour",
        |r| r.labour_hour,
        |r, v| r.labour_hour = v,
    ),
    (
        "Minutes for each piece",
        |r| r.minutes_per_piece,
        |r, v| r.minutes_per_piece = v,
    ),
    (
        "Minutes for each metre of glass",
        |r| r.minutes_per_m,
        |r, v| r.minutes_per_m = v,
    ),
    (
        "Minutes for each circuit",
        |r| r.minutes_per_circuit,
        |r, v| r.minutes_per_circuit = v,
    ),
    (
        "Markup, %",
        |r| r.markup_percent,
        |r, v| r.markup_percent = v,
    ),
    ("Tax, %", |r| r.tax_percent, |r, v| r.tax_percent = v),
];

#[component]
fn RatesForm() -> impl IntoView {
    let desk = desk();
    let rates: Vec<_> = RATES
        .into_iter()
        .map(|(label, get, set)| {
            view! {
                <Field
                    label=label
                    number=true
                    value=Signal::derive(move || desk.book.with(|book| get(&book.rates).to_string()))
                    commit=move |text: String| {
                        let figure = money(&text)?;
                        desk.edit_book(label, label, |book| set(&mut book.rates, figure));
                        Ok(())
                    }
                />
            }
        })
        .collect();
    view! {
        <section class="panel form" aria-label="Rates">
            <h2>"Rates and allowances"</h2>
            <div class="form-fields">
                <Field
                    label="Currency"
                    value=Signal::derive(move || desk.book.with(|book| book.rates.currency.clone()))
                    commit=move |text: String| {
                        desk.edit_book("currency", "Currency", |book| text.trim().clone_into(&mut book.rates.currency));
                        Ok(())
                    }
                />
                {rates}
                <Field
                    label="Tail at each electrode, mm"
                    number=true
                    value=Signal::derive(move || desk.book.with(|book| book.allowances.tail_mm.to_string()))
                    commit=move |text: String| {
                        let figure = figure(&text, "mm")?;
                        desk.edit_book("tail", "Tail", |book| book.allowances.tail_mm = figure);
                        Ok(())
                    }
                />
                <Field
                    label="Waste of glass, %"
                    number=true
                    value=Signal::derive(move || desk.book.with(|book| book.allowances.waste_percent.to_string()))
                    commit=move |text: String| {
                        let figure = figure(&text, "%")?;
                        desk.edit_book("waste", "Waste", |book| book.allowances.waste_percent = figure);
                        Ok(())
                    }
                />
                <Field
                    label="Longest piece bent in one, mm"
                    number=true
                    value=Signal::derive(move || desk.book.with(|book| book.allowances.longest_piece_mm.to_string()))
                    commit=move |text: String| {
                        let figure = figure(&text, "mm")?;
                        desk.edit_book("longest", "Longest piece", |book| book.allowances.longest_piece_mm = figure);
                        Ok(())
                    }
                />
                <Field
                    label="Added to each crossover, mm"
                    number=true
                    value=Signal::derive(move || desk.book.with(|book| book.allowances.crossover_mm.to_string()))
                    commit=move |text: String| {
                        let figure = figure(&text, "mm")?;
                        desk.edit_book("crossover", "Crossover", |book| book.allowances.crossover_mm = figure);
                        Ok(())
                    }
                />
            </div>
            <p class="quiet">"Tails, waste, the longest piece and minutes are common practice, no source: set your own. What a crossover takes beyond the straight way, for stepping back and forward again, is not counted until it is given."</p>
            <h2>"What the shop bends"</h2>
            <div class="form-fields">
                {bending(desk, "Tightest radius, tube diameters", |bending| &mut bending.least_radius_diameters)}
                {bending(desk, "Least letter height, tube diameters", |bending| &mut bending.least_letter_diameters)}
                {bending(desk, "Least spacing of tubes, tube diameters", |bending| &mut bending.least_spacing_diameters)}
                {bending(desk, "Least distance of electrodes, mm", |bending| &mut bending.least_electrode_spacing_mm)}
            </div>
            <p class="quiet">"Radius and spacing are to the middle of the tube. Left empty, a limit is not checked. The radius of 1.5 and the letter height of 8 diameters are common practice, no source; the spacing of 2 diameters, one diameter clear, is how a trade column on pattern-making sets parallel tubes. For electrodes no figure with a source was found."</p>
        </section>
    }
}

/// A limit of bending; empty: not checked.
fn bending(
    desk: Desk,
    label: &'static str,
    of: fn(&mut Bending) -> &mut Option<f64>,
) -> impl IntoView {
    let value = Signal::derive(move || {
        let mut bending = desk.book.with(|book| book.bending.clone());
        typed(*of(&mut bending))
    });
    view! {
        <Field
            label=label
            number=true
            example="not checked"
            value=value
            commit=move |text: String| {
                let limit = if text.trim().is_empty() {
                    None
                } else {
                    Some(figure(&text, "")?).filter(|limit| *limit > 0.0)
                };
                desk.edit_book(label, label, |book| *of(&mut book.bending) = limit);
                Ok(())
            }
        />
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_new_entry_gets_a_name_of_its_own() {
        assert_eq!(free_name("A", &["B"]), "A");
        assert_eq!(free_name("A", &["A", "A (2)"]), "A (3)");
    }
}
