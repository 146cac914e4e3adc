//! Shop book: supplies, tube types, rules, rates. A first cut of editing: every field in place.

use leptos::prelude::*;
use rust_decimal::Decimal;
use tubewright::Book;
use tubewright::book::{Bending, Gas, OutputEarthing, Rates, SupplyEntry, SupplyKind, TubeEntry};
use tubewright::rules::RuleSet;
use tubewright::rules::Source;
use tubewright::supply::Rating;
use tubewright::tube::TubeType;

use super::cable_form::Cables;
use super::chart_fields::ChartFields;
use super::electrode_form::Electrodes;
use super::entries::{EntryLine, Figure, edit, figures, head, lines, list, name_field, read};
use super::fields::{Choice, Field, Tick, always, figure, money, optional_figure, typed};
use super::measured::BenchReadings;
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
                {tab(BookPart::Electrodes, "Electrodes")}
                {tab(BookPart::Cables, "Cables")}
                {tab(BookPart::Rules, "Rules")}
                {tab(BookPart::Rates, "Rates")}
            </div>
        </section>
        {move || match part.get() {
            BookPart::Supplies => view! { <Supplies/> }.into_any(),
            BookPart::Tubes => view! { <Tubes/> }.into_any(),
            BookPart::Electrodes => view! { <Electrodes/> }.into_any(),
            BookPart::Cables => view! { <Cables/> }.into_any(),
            BookPart::Rules => view! { <RuleSets/> }.into_any(),
            BookPart::Rates => view! { <RatesForm/> }.into_any(),
        }}
    }
}

#[component]
fn Supplies() -> impl IntoView {
    let desk = desk();
    let lines = move |book: &Book| {
        book.supplies
            .iter()
            .map(|supply| {
                let figures = [
                    supply.no_load_volts.map(|volts| {
                        tubewright::measure::volts_shown(tubewright::measure::Volts::from_volts(
                            volts,
                        ))
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
    };
    list::<SupplyEntry>(
        "Supplies",
        "As their nameplates say. A figure that is not on the plate is left empty; nothing is invented for it.",
        lines,
        |at| view! { <SupplyForm at=at/> }.into_any(),
    )
}

const SUPPLY_FIGURES: &[Figure<SupplyEntry>] = &[
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
    let figures = figures::<SupplyEntry>(desk, at, SUPPLY_FIGURES);
    let said = move || {
        desk.book
            .with(|book| match book.supplies.get(at).map(Rating::read) {
                Some(Err(wrong)) => Some(lines(&wrong)),
                _ => None,
            })
    };
    view! {
        <section class="form" aria-label="Supply">
            {head::<SupplyEntry>(desk, at)}
            {said}
            <div class="form-fields">
                {name_field::<SupplyEntry>(desk, at)}
                <Choice
                    label="Kind"
                    value=read(desk, at, |s: &SupplyEntry| match s.kind { None => "", Some(SupplyKind::Iron) => "iron", Some(SupplyKind::Electronic) => "electronic" }.to_owned())
                    options=Signal::stored(pairs(&[("iron", "iron transformer"), ("electronic", "electronic")]))
                    commit=move |word: String| { edit::<SupplyEntry>(desk, at, "kind", |entry| {
                        entry.kind = match word.as_str() { "iron" => Some(SupplyKind::Iron), "electronic" => Some(SupplyKind::Electronic), _ => None };
                    }); }
                />
                <Choice
                    label="Output"
                    value=read(desk, at, |s: &SupplyEntry| s.earthing.map_or("", earthing_key).to_owned())
                    options=Signal::derive(move || {
                        let word = desk.results.with(|work| work.earth_word());
                        EARTHINGS.iter().map(|&earthing| {
                            (earthing_key(earthing).to_owned(), tubewright::supply::earthing_words(earthing, word).to_owned())
                        }).collect::<Vec<_>>()
                    })
                    commit=move |word: String| { edit::<SupplyEntry>(desk, at, "output", |entry| {
                        entry.earthing = EARTHINGS.iter().copied().find(|&e| earthing_key(e) == word);
                    }); }
                />
                <Choice
                    label="Made for"
                    value=read(desk, at, |s: &SupplyEntry| damp_word(s.place).to_owned())
                    options=Signal::stored(damp_options())
                    commit=move |word: String| { edit::<SupplyEntry>(desk, at, "place", |entry| entry.place = damp(&word)) }
                />
                <Tick
                    label="Earth-fault protection"
                    value=Signal::derive(move || desk.book.with(|book| book.supplies.get(at).is_some_and(|s| s.earth_fault_protection)))
                    commit=move |yes: bool| { edit::<SupplyEntry>(desk, at, "earth-fault protection", |entry| entry.earth_fault_protection = yes) }
                />
                <Tick
                    label="Open-circuit protection"
                    value=Signal::derive(move || desk.book.with(|book| book.supplies.get(at).is_some_and(|s| s.open_circuit_protection)))
                    commit=move |yes: bool| { edit::<SupplyEntry>(desk, at, "open-circuit protection", |entry| entry.open_circuit_protection = yes) }
                />
                {figures}
                <Field
                    label="Price"
                    number=true
                    value=read(desk, at, |s: &SupplyEntry| s.price.map_or_else(String::new, |price| price.to_string()))
                    commit=move |text: String| {
                        let price = optional_money(&text)?;
                        edit::<SupplyEntry>(desk, at, "price", |entry| entry.price = price);
                        Ok(())
                    }
                />
                <Field
                    label="Note"
                    class="wide"
                    live=always()
                    value=read(desk, at, |s: &SupplyEntry| s.note.clone())
                    commit=move |text: String| {
                        edit::<SupplyEntry>(desk, at, "note", |entry| entry.note = text);
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

fn optional_money(text: &str) -> Result<Option<Decimal>, String> {
    if text.trim().is_empty() {
        Ok(None)
    } else {
        money(text).map(Some)
    }
}

#[component]
fn Tubes() -> impl IntoView {
    let lines = |book: &Book| {
        book.tubes
            .iter()
            .map(|entry| match TubeType::of_book(entry, &book.electrodes) {
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
    };
    list::<TubeEntry>(
        "Tube types",
        "Electrical figures left empty come from the default model, ±15 to ±25 %, and say so wherever they are used. Bench readings of your own tubes are better.",
        lines,
        |at| view! { <TubeForm at=at/> }.into_any(),
    )
}

const TUBE_FIGURES: &[Figure<TubeEntry>] = &[
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
    let figures = figures::<TubeEntry>(desk, at, TUBE_FIGURES);
    let said = move || {
        desk.book.with(
            |book| match TubeType::of_book(book.tubes.get(at)?, &book.electrodes) {
                Err(wrong) => Some(lines(&wrong)),
                // What is said of bench readings stands beside them.
                Ok(mut tube) => {
                    tube.findings
                        .retain(|finding| finding.source != Source::bench());
                    Some(lines(&tube.findings))
                }
            },
        )
    };
    view! {
        <section class="form" aria-label="Tube type">
            {head::<TubeEntry>(desk, at)}
            {said}
            <div class="form-fields">
                {name_field::<TubeEntry>(desk, at)}
                <Choice
                    label="Gas"
                    value=read(desk, at, |t: &TubeEntry| match t.gas { Gas::Neon => "neon", Gas::ArgonMercury => "argon-mercury" }.to_owned())
                    options=Signal::stored(pairs(&[("neon", "neon"), ("argon-mercury", "argon-mercury")]))
                    commit=move |word: String| { edit::<TubeEntry>(desk, at, "gas", |entry| {
                        entry.gas = if word == "neon" { Gas::Neon } else { Gas::ArgonMercury };
                    }); }
                />
                <Choice
                    label="Electrodes"
                    value=read(desk, at, |t: &TubeEntry| t.electrode.clone())
                    options=Signal::derive(move || {
                        let none = (String::new(), "not given".to_owned());
                        desk.book.with(|book| {
                            let names = book.electrodes.iter().map(|e| (e.name.clone(), e.name.clone()));
                            std::iter::once(none).chain(names).collect::<Vec<_>>()
                        })
                    })
                    commit=move |name: String| { edit::<TubeEntry>(desk, at, "electrodes", |entry| entry.electrode = name) }
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
                            edit::<TubeEntry>(desk, at, "colour", |entry| entry.colour = colour);
                            desk.settle();
                        }
                    />
                </label>
                {figures}
                <Field
                    label="Price of a metre"
                    number=true
                    value=read(desk, at, |t: &TubeEntry| t.price_per_m.map_or_else(String::new, |price| price.to_string()))
                    commit=move |text: String| {
                        let price = optional_money(&text)?;
                        edit::<TubeEntry>(desk, at, "price", |entry| entry.price_per_m = price);
                        Ok(())
                    }
                />
                <Field
                    label="Where the figures came from"
                    class="wide"
                    live=always()
                    value=read(desk, at, |t: &TubeEntry| t.source.clone())
                    commit=move |text: String| {
                        edit::<TubeEntry>(desk, at, "source", |entry| entry.source = text);
                        Ok(())
                    }
                />
            </div>
            <BenchReadings at=at/>
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
                            {lacking(desk, at, set)}
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

/// What a set kept from an older book lacks, and how it comes in.
fn lacking(desk: Desk, at: usize, set: &RuleSet) -> Option<impl IntoView + use<>> {
    let lacks = set.lacks();
    let words = match lacks.len() {
        0 => return None,
        1 => "Add the limit that is missing".to_owned(),
        count => format!("Add the {count} limits that are missing"),
    };
    Some(view! {
        <p>"This set was kept before the program knew all of its limits; those missing are not checked."</p>
        <button on:click=move |_| {
            desk.settle();
            desk.edit_book("missing rules", "Add missing limits to a rule set", |book| {
                if let Some(set) = book.rule_sets.get_mut(at) {
                    let lacks = set.lacks();
                    set.rules.extend(lacks);
                }
            });
            desk.settle();
        }>{words}</button>
    })
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
