//! The rows of the sign, edited in place.

use leptos::prelude::*;
use tubewright::Job;
use tubewright::drawing::faces;
use tubewright::job::{ArtworkLines, ArtworkRow, Row, ShapeRow, StrokesRow, TextRow};
use tubewright::measure::{
    LETTER_HEIGHT_MM, Length, LengthUnit, PIECE_LENGTH_MM, Units, glass, length, length_shown,
    quoted, with_units,
};
use tubewright::rules::Place;
use tubewright::takeoff::artwork;

use super::fields::{Choice, Field, always};
use super::findings::{line, many};
use super::layout::Layout;
use super::outline_fields::{InsetField, OutlineFields};
use super::piece_fields::PieceFields;
use super::shape_fields::{self, ShapeFields};
use wasm_bindgen::JsCast;

use crate::desk::{Desk, desk};
use crate::files;

/// All rows, and the buttons that add one.
#[component]
pub fn Rows() -> impl IntoView {
    let desk = desk();
    let count = Memo::new(move |_| desk.job.with(|job| job.rows.len()));
    view! {
        <section class="panel rows" aria-label="Rows">
            <ol>
                <For each=move || 0..count.get() key=|at| *at let:at>
                    <RowCard at=at/>
                </For>
            </ol>
            <Show when=move || count.get() == 0>
                <p class="quiet">"Start with a word: what does the sign say?"</p>
            </Show>
            <div class="buttons">
                <button class="act" on:click=move |_| add(desk, word(desk))>"+ Word"</button>
                <button class="act" on:click=move |_| add(desk, strokes(desk))>"+ Strokes"</button>
                <button class="act" on:click=move |_| add(desk, shape(desk))>"+ Shape"</button>
                <label class="button act">
                    "+ Artwork file"
                    <input
                        class="unseen"
                        type="file"
                        accept=".svg,.dxf,image/svg+xml"
                        on:change=move |event| files::choose(desk, &event)
                    />
                </label>
                <label class="button act">
                    "+ Letters of a font file"
                    <input
                        class="unseen"
                        type="file"
                        accept=".ttf,.otf,.ttc,font/ttf,font/otf"
                        on:change=move |event| files::choose(desk, &event)
                    />
                </label>
            </div>
        </section>
    }
}

/// A row of letters takes height and face of the last one.
fn word(desk: Desk) -> Row {
    let last = desk.job.with_untracked(|job| {
        job.rows.iter().rev().find_map(|row| match row {
            Row::Text(row) => Some(row.clone()),
            Row::Strokes(_) | Row::Artwork(_) | Row::Shape(_) | Row::Outline(_) => None,
        })
    });
    Row::Text(TextRow {
        height: usual_height(desk),
        face: last.map_or_else(|| "sans".to_owned(), |row| row.face),
        tube: usual_tube(desk),
        ..TextRow::default()
    })
}

fn strokes(desk: Desk) -> Row {
    Row::Strokes(StrokesRow {
        label: "Border".to_owned(),
        tube: usual_tube(desk),
        ..StrokesRow::default()
    })
}

fn shape(desk: Desk) -> Row {
    Row::Shape(ShapeRow {
        shape: shape_fields::start("rectangle", desk.units.get_untracked()),
        tube: usual_tube(desk),
        ..ShapeRow::default()
    })
}

fn add(desk: Desk, row: Row) {
    desk.settle();
    desk.edit_job("add", "Add a row", |job| job.rows.push(row));
    desk.settle();
    enter_last_row(desk);
}

/// Goes into the first field of the last row, once it is there.
pub(crate) fn enter_last_row(desk: Desk) {
    let last = desk
        .job
        .with_untracked(|job| job.rows.len().saturating_sub(1));
    request_animation_frame(move || {
        let field = document().query_selector(&format!("[data-row='{last}'] :is(input, textarea)"));
        if let Ok(Some(field)) = field
            && let Ok(field) = field.dyn_into::<web_sys::HtmlElement>()
        {
            // A field that cannot be entered is still there to be tapped.
            let _ = field.focus();
        }
    });
}

/// The letter height a new row begins with: that of the last letters.
pub(crate) fn usual_height(desk: Desk) -> String {
    let last = desk.job.with_untracked(|job| {
        job.rows.iter().rev().find_map(|row| match row {
            Row::Text(row) => Some(row.height.clone()),
            Row::Outline(row) => Some(row.height.clone()),
            Row::Strokes(_) | Row::Artwork(_) | Row::Shape(_) => None,
        })
    });
    let usual = match desk.units.get_untracked() {
        Units::FeetInches => "8 in",
        Units::Metric => "200 mm",
    };
    last.unwrap_or_else(|| usual.to_owned())
}

/// The tube a new row begins with: that of the last row, else the first of the book.
pub(crate) fn usual_tube(desk: Desk) -> String {
    let last = desk.job.with_untracked(|job| {
        let tubes = job.rows.iter().rev().flat_map(Row::tubes);
        tubes.map(str::to_owned).next()
    });
    last.unwrap_or_else(|| {
        desk.book.with_untracked(|book| {
            book.tubes
                .first()
                .map(|tube| tube.name.clone())
                .unwrap_or_default()
        })
    })
}

/// What a field of a row reads and writes.
pub(super) fn part<T: Default>(job: &Job, at: usize, get: impl Fn(&Row) -> T) -> T {
    job.rows.get(at).map(get).unwrap_or_default()
}

/// Changes a row; `field` is what of it.
pub(super) fn edit(desk: Desk, at: usize, field: &str, edit: impl FnOnce(&mut Row)) {
    let says = format!("Row {}: {field}", at + 1);
    desk.edit_job(&format!("row {at} {field}"), &says, |job| {
        if let Some(row) = job.rows.get_mut(at) {
            edit(row);
        }
    });
}

/// Reads a count; `now` is the one that stands where it cannot be read.
pub(super) fn whole(typed: &str, now: i64) -> Result<i64, String> {
    typed.trim().parse().map_err(|_| {
        format!(
            "Expected a whole number such as 2, but found {}; {now} still counts.",
            quoted(typed)
        )
    })
}

#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Kind {
    Text,
    Strokes,
    Artwork,
    Shape,
    Outline,
}

#[component]
fn RowCard(at: usize) -> impl IntoView {
    let desk = desk();
    let kind = Memo::new(move |_| {
        desk.job.with(|job| match job.rows.get(at) {
            Some(Row::Text(_)) => Kind::Text,
            Some(Row::Artwork(_)) => Kind::Artwork,
            Some(Row::Shape(_)) => Kind::Shape,
            Some(Row::Outline(_)) => Kind::Outline,
            _ => Kind::Strokes,
        })
    });
    let read = move |get: fn(&Row) -> String| {
        Signal::derive(move || desk.job.with(|job| part(job, at, get)))
    };
    let tubes = Signal::derive(move || {
        desk.book.with(|book| {
            book.tubes
                .iter()
                .map(|tube| (tube.name.clone(), tube.name.clone()))
                .collect::<Vec<_>>()
        })
    });
    let colour = Memo::new(move |_| {
        desk.results.with(|results| {
            let name = desk.job.with(|job| part(job, at, first_tube));
            results
                .tubes
                .iter()
                .find(|total| total.name == name)
                .and_then(|total| total.tube.as_ref())
                .map(|tube| tube.colour.clone())
        })
    });
    let tube = move || {
        view! {
            <div class="row-tube">
                <span class="dot" style:background=move || colour.get().unwrap_or_default()></span>
                <Choice
                    label="Tube"
                    value=read(first_tube)
                    options=tubes
                    commit=move |name: String| edit(desk, at, "tube", |row| match row {
                        Row::Text(row) => row.tube = name,
                        Row::Strokes(row) => row.tube = name,
                        Row::Shape(row) => row.tube = name,
                        Row::Outline(row) => row.tube = name,
                        Row::Artwork(_) => {}
                    })
                />
            </div>
        }
    };
    let times = move || {
        view! {
            <Field
                label="Times"
                class="tiny"
                number=true
                value=read(|row| row.count().to_string())
                commit=move |typed: String| {
                    let now = desk.job.with_untracked(|job| part(job, at, Row::count));
                    let count = whole(&typed, now)?;
                    edit(desk, at, "times", |row| match row {
                        Row::Text(row) => row.count = count,
                        Row::Strokes(row) => row.count = count,
                        Row::Artwork(row) => row.count = count,
                        Row::Shape(row) => row.count = count,
                        Row::Outline(row) => row.count = count,
                    });
                    Ok(())
                }
            />
        }
    };
    let text_fields = move || {
        view! {
            <Field
                label="What it says"
                class="wide"
                lines=true
                live=always()
                example="OPEN"
                value=read(|row| row.label().to_owned())
                commit=move |typed: String| {
                    edit(desk, at, "text", |row| if let Row::Text(row) = row { row.text = typed });
                    Ok(())
                }
            />
            <Field
                label="Letter height"
                class="narrow"
                live=move |typed: String| {
                    length(&typed, desk.bare())
                        .is_ok_and(|height| LETTER_HEIGHT_MM.holds(height.length().mm()))
                }
                example="200 mm"
                value=read(|row| match row {
                    Row::Text(row) => row.height.clone(),
                    _ => String::new(),
                })
                commit=move |typed: String| {
                    let typed = with_units(typed.trim(), desk.bare());
                    edit(desk, at, "letter height", |row| if let Row::Text(row) = row { row.height = typed });
                    Ok(())
                }
            />
            <Choice
                label="Face"
                class="narrow"
                value=read(|row| match row {
                    Row::Text(row) => row.face.clone(),
                    _ => String::new(),
                })
                options=Signal::derive(|| {
                    faces().iter().map(|face| (face.name.to_owned(), face.name.to_owned())).collect()
                })
                commit=move |name: String| {
                    edit(desk, at, "face", |row| if let Row::Text(row) = row { row.face = name });
                }
            />
        }
    };
    let stroke_fields = move || {
        view! {
            <Field
                label="What it is"
                class="narrow"
                live=always()
                value=read(|row| row.label().to_owned())
                commit=move |typed: String| {
                    edit(desk, at, "label", |row| if let Row::Strokes(row) = row { row.label = typed });
                    Ok(())
                }
            />
            <Field
                label="Lengths, a piece of glass each; part them by ;"
                class="wide"
                live=move |typed: String| {
                    typed.split(';').all(|part| {
                        length(part, desk.bare())
                            .is_ok_and(|piece| PIECE_LENGTH_MM.holds(piece.length().mm()))
                    })
                }
                example="1200 mm; 2 x 300 mm + 95 mm"
                value=read(|row| match row {
                    Row::Strokes(row) => row.strokes.clone(),
                    _ => String::new(),
                })
                commit=move |typed: String| {
                    let typed = with_units(typed.trim(), desk.bare());
                    edit(desk, at, "lengths", |row| if let Row::Strokes(row) = row { row.strokes = typed });
                    Ok(())
                }
            />
        }
    };
    let sums = move || {
        desk.results.with(|results| {
            let row = results.takeoff.rows.get(at)?;
            let units = desk.units.get();
            let pieces = row.pieces.len();
            Some(view! {
                <b>{glass(row.lit, units)}</b>" lit, "
                <b>{glass(row.glass, units)}</b>" glass, "
                <b>{pieces}</b>{many(pieces, " piece", " pieces")}
            })
        })
    };
    let size = move || {
        desk.results.with(|results| {
            let bounds = results.takeoff.rows.get(at)?.bounds;
            (bounds.width() > 0.0).then(|| {
                let shown = |mm: f64| {
                    tubewright::measure::length_shown(
                        tubewright::measure::Length::from_mm(mm),
                        desk.units.get(),
                    )
                };
                format!(
                    "{} wide, {} high",
                    shown(bounds.width()),
                    shown(bounds.height())
                )
            })
        })
    };
    let marked = Memo::new(move |_| desk.row.get() == Some(at));
    let said = move || {
        desk.results.with(|results| {
            results
                .findings
                .iter()
                .filter(|finding| finding.place == Place::Row(at))
                .map(line)
                .collect::<Vec<_>>()
        })
    };
    view! {
        <li class="row" class:marked=move || marked.get() data-row=at.to_string()>
            <div class="row-fields">
                {move || match kind.get() {
                    Kind::Text => view! { {text_fields()} {tube()} }.into_any(),
                    Kind::Strokes => view! { {stroke_fields()} {tube()} }.into_any(),
                    Kind::Artwork => view! { <ArtworkFields at=at/> }.into_any(),
                    Kind::Shape => view! { <ShapeFields at=at/> {tube()} }.into_any(),
                    Kind::Outline => view! { <OutlineFields at=at/> {tube()} }.into_any(),
                }}
                {times()}
            </div>
            <Show when=move || kind.get() == Kind::Text>
                <Layout at=at/>
            </Show>
            <PieceFields at=at/>
            <div class="row-foot">
                <span class="row-sums">{sums}<small>{size}</small></span>
                <span class="row-tools">
                    <button
                        aria-label=format!("Move row {} up", at + 1)
                        disabled=at == 0
                        on:click=move |_| shift(desk, at, at.saturating_sub(1))
                    >"↑"</button>
                    <button
                        aria-label=format!("Move row {} down", at + 1)
                        disabled=move || desk.job.with(|job| at + 1 >= job.rows.len())
                        on:click=move |_| shift(desk, at, at + 1)
                    >"↓"</button>
                    <button
                        class:on=move || marked.get()
                        aria-label=format!("Mark row {} on the picture", at + 1)
                        aria-pressed=move || marked.get().to_string()
                        on:click=move |_| mark(desk, at)
                    >"Mark"</button>
                    <button on:click=move |_| copy(desk, at)>"Copy"</button>
                    <button
                        aria-label=format!("Remove row {}", at + 1)
                        on:click=move |_| remove(desk, at)
                    >"Remove"</button>
                </span>
            </div>
            {said}
        </li>
    }
}

fn first_tube(row: &Row) -> String {
    row.tubes().first().copied().unwrap_or_default().to_owned()
}

/// The words of the choice that lines are not tube; no tube type has an empty name.
const NO_TUBE: &str = "not tube";

/// An artwork: how wide it is made, and what each kind of its lines is.
#[component]
fn ArtworkFields(at: usize) -> impl IntoView {
    let desk = desk();
    let row = Memo::new(move |_| {
        desk.job.with(|job| match job.rows.get(at) {
            Some(Row::Artwork(row)) => Some(row.clone()),
            _ => None,
        })
    });
    let read = Memo::new(move |_| {
        let name = row.get()?.file;
        desk.job.with(|job| {
            let file = job.artwork.iter().find(|file| file.name == name)?;
            let art = artwork(file);
            let art = art.as_ref().as_ref().ok()?;
            Some((art.groups(), art.mm_per_unit, art.bounds.width()))
        })
    });
    let mm_per_unit = move || {
        let (_, own, wide) = read.get()?;
        let typed = row.get()?.width;
        match length(&typed, LengthUnit::Millimetres) {
            Ok(width) if wide > 0.0 => Some(width.length().mm() / wide),
            _ => own,
        }
    };
    let own_width = move || {
        read.get()
            .and_then(|(_, mm, wide)| Some(Length::from_mm(mm? * wide)))
            .map_or_else(
                || "the file does not say".to_owned(),
                |wide| format!("as in the file, {}", length_shown(wide, desk.units.get())),
            )
    };
    let change = move |field: &str, change: &dyn Fn(&mut ArtworkRow)| {
        edit(desk, at, field, |row| {
            if let Row::Artwork(row) = row {
                change(row);
            }
        });
    };
    let options = Signal::derive(move || {
        let mut options = vec![(NO_TUBE.to_owned(), NO_TUBE.to_owned())];
        desk.book.with(|book| {
            options.extend(
                book.tubes
                    .iter()
                    .map(|tube| (tube.name.clone(), tube.name.clone())),
            );
        });
        options
    });
    let groups = move || {
        let (groups, ..) = read.get()?;
        let lines: Vec<_> = groups
            .into_iter()
            .map(|group| {
                let (colour, layer) = (group.colour.clone(), group.layer.clone());
                let same = {
                    let (colour, layer) = (colour.clone(), layer.clone());
                    move |lines: &ArtworkLines| lines.colour == colour && lines.layer == layer
                };
                let mine = {
                    let same = same.clone();
                    Signal::derive(move || row.get()?.lines.into_iter().find(|lines| same(lines)))
                };
                let tube = Memo::new(move |_| match mine.get() {
                    Some(lines) if lines.tube.is_empty() => NO_TUBE.to_owned(),
                    Some(lines) => lines.tube,
                    None => String::new(),
                });
                let inset = {
                    let same = same.clone();
                    Callback::new(move |typed: String| {
                        change("inset", &|row| {
                            if let Some(lines) = row.lines.iter_mut().find(|lines| same(lines)) {
                                lines.inset.clone_from(&typed);
                            }
                        });
                    })
                };
                // Only what is tube and the edge of an area can run inside of it.
                let can_inset = move || {
                    group.filled > 0 && tube.with(|tube| !tube.is_empty() && tube != NO_TUBE)
                };
                let commit = move |name: String| {
                    let tube = if name == NO_TUBE { String::new() } else { name };
                    change("lines", &|row| match row.lines.iter_mut().find(|lines| same(lines)) {
                        Some(lines) => lines.tube.clone_from(&tube),
                        None => row.lines.push(ArtworkLines {
                            colour: colour.clone(),
                            layer: layer.clone(),
                            tube: tube.clone(),
                            ..ArtworkLines::default()
                        }),
                    });
                };
                let called = [
                    group.layer.clone().map(|layer| format!("Layer {layer}")),
                    group.colour.clone(),
                ];
                let called: Vec<String> = called.into_iter().flatten().collect();
                let called = if called.is_empty() { "Lines".to_owned() } else { called.join(", ") };
                let long = move || {
                    mm_per_unit().map_or_else(String::new, |mm| {
                        format!(", {}", glass(Length::from_mm(group.length * mm), desk.units.get()))
                    })
                };
                let count = format!("{}{}", group.strokes, many(group.strokes, " line", " lines"));
                view! {
                    <li>
                        <span class="dot" style:background=group.colour.clone().unwrap_or_default()></span>
                        <Choice
                            label=called
                            value=tube
                            options=options
                            commit=commit
                        />
                        <Show when=can_inset>
                            <InsetField
                                value=Signal::derive(move || {
                                    mine.get().map(|lines| lines.inset).unwrap_or_default()
                                })
                                commit=inset
                            />
                        </Show>
                        <span class="quiet">{count}{long}</span>
                    </li>
                }
            })
            .collect();
        Some(lines)
    };
    view! {
        <Field
            label="What it is"
            class="narrow"
            live=always()
            value=Signal::derive(move || row.get().map(|row| row.label).unwrap_or_default())
            commit=move |typed: String| {
                change("label", &|row| row.label.clone_from(&typed));
                Ok(())
            }
        />
        <label class="field narrow">
            <span class="caption">"File"</span>
            <input type="text" readonly=true prop:value=move || row.get().map(|row| row.file).unwrap_or_default()/>
        </label>
        <Field
            label="Make it this wide"
            class="narrow"
            value=Signal::derive(move || row.get().map(|row| row.width).unwrap_or_default())
            commit=move |typed: String| {
                let typed = with_units(typed.trim(), desk.bare());
                change("width", &|row| row.width.clone_from(&typed));
                Ok(())
            }
        />
        <p class="quiet artwork-size">"Left empty: "{own_width}"."</p>
        <ul class="artwork-lines">{groups}</ul>
    }
}

/// Marks a row on the picture and brings the picture into sight, or unmarks it.
fn mark(desk: Desk, at: usize) {
    let marked = (desk.row.get_untracked() != Some(at)).then_some(at);
    desk.row.set(marked);
    let picture = document().query_selector(".picture").ok().flatten();
    if let Some(picture) = picture.filter(|_| marked.is_some()) {
        let top = picture.get_bounding_client_rect().top();
        if top < 0.0 {
            picture.scroll_into_view();
        }
    }
}

fn shift(desk: Desk, from: usize, to: usize) {
    desk.settle();
    desk.edit_job("move", &format!("Move row {}", from + 1), |job| {
        if from < job.rows.len() && to < job.rows.len() {
            job.rows.swap(from, to);
        }
    });
    desk.turn();
    desk.row.set(None);
    desk.settle();
}

fn copy(desk: Desk, at: usize) {
    desk.settle();
    desk.edit_job("copy", &format!("Copy row {}", at + 1), |job| {
        if let Some(row) = job.rows.get(at).cloned() {
            job.rows.insert(at + 1, row);
        }
    });
    desk.turn();
    desk.row.set(None);
    desk.settle();
}

fn remove(desk: Desk, at: usize) {
    desk.settle();
    desk.edit_job("remove", &format!("Remove row {}", at + 1), |job| {
        if at < job.rows.len() {
            job.rows.remove(at);
            // A file no row takes anything from any more is let go; undo brings it back.
            let rows = &job.rows;
            job.artwork.retain(|file| {
                rows.iter()
                    .any(|row| matches!(row, Row::Artwork(row) if row.file == file.name))
            });
            job.fonts.retain(|file| {
                rows.iter()
                    .any(|row| matches!(row, Row::Outline(row) if row.font == file.name))
            });
        }
    });
    desk.turn();
    desk.row.set(None);
    desk.piece.set(None);
    desk.settle();
}
