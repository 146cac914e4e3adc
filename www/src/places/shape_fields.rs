//! The fields of a row that is a plain shape: its kind, and what that kind asks for.

use leptos::prelude::*;
use tubewright::job::{Row, Shape, ShapeRow};
use tubewright::measure::{
    LengthUnit, SHAPE_SIZE_MM, Units, length, point, points_with_units, with_units,
};

use super::fields::{Choice, Field, always, figure};
use super::rows::{edit, whole};
use crate::desk::desk;

/// The kinds, as files and as people call them.
const KINDS: [(&str, &str); 9] = [
    ("line", "line"),
    ("polyline", "bent line"),
    ("rectangle", "rectangle"),
    ("circle", "circle"),
    ("ellipse", "ellipse"),
    ("arc", "arc"),
    ("polygon", "polygon"),
    ("star", "star"),
    ("arrow", "arrow"),
];

/// The sizes a shape of a kind begins with; a rectangle for a kind that is not known.
pub(super) fn start(kind: &str, units: Units) -> Shape {
    let size = |mm: &str, inches: &str| match units {
        Units::Metric => format!("{mm} mm"),
        Units::FeetInches => format!("{inches} in"),
    };
    match kind {
        "line" => Shape::Line {
            length: size("600", "24"),
        },
        "polyline" => {
            let (across, up, none) = (size("600", "24"), size("300", "12"), size("0", "0"));
            Shape::Polyline {
                points: format!("{none}, {none}; {across}, {none}; {across}, {up}"),
            }
        }
        "circle" => Shape::Circle {
            diameter: size("500", "20"),
        },
        "ellipse" => Shape::Ellipse {
            width: size("600", "24"),
            height: size("300", "12"),
        },
        "arc" => Shape::Arc {
            radius: size("400", "16"),
            sweep_degrees: 180.0,
        },
        "polygon" => Shape::Polygon {
            sides: 6,
            across_corners: size("400", "16"),
        },
        "star" => Shape::Star {
            points: 5,
            outer_diameter: size("500", "20"),
            inner_diameter: size("200", "8"),
        },
        "arrow" => Shape::Arrow {
            length: size("600", "24"),
            head_length: size("200", "8"),
            head_width: size("300", "12"),
            shaft_width: size("120", "5"),
        },
        _ => Shape::Rectangle {
            width: size("600", "24"),
            height: size("300", "12"),
            corner: size("40", "1 1/2"),
        },
    }
}

/// Reads an angle; a minus before it turns the other way.
fn degrees(typed: &str) -> Result<f64, String> {
    let typed = typed.trim().trim_end_matches('°').trim_end();
    let turned = typed.strip_prefix(['-', '\u{2212}']);
    let size = figure(turned.unwrap_or(typed).trim_start(), "")?;
    Ok(if turned.is_some() { -size } else { size })
}

/// The fields, but for tube and times.
#[component]
pub(super) fn ShapeFields(at: usize) -> impl IntoView {
    let desk = desk();
    let row = Memo::new(move |_| {
        desk.job.with(|job| match job.rows.get(at) {
            Some(Row::Shape(row)) => Some(row.clone()),
            _ => None,
        })
    });
    let kind = Memo::new(move |_| {
        row.with(|row| row.as_ref().map(|row| row.shape.kind()).unwrap_or_default())
    });
    let read = move |get: fn(&ShapeRow) -> String| {
        Signal::derive(move || row.with(|row| row.as_ref().map(get).unwrap_or_default()))
    };
    let change = move |field: &str, change: &dyn Fn(&mut ShapeRow)| {
        edit(desk, at, field, |row| {
            if let Row::Shape(row) = row {
                change(row);
            }
        });
    };
    let lengths = move || {
        let mut shape = row.get_untracked().unwrap_or_default().shape;
        let names = shape.lengths_mut().into_iter().map(|(name, _)| name);
        let names: Vec<&str> = names.collect();
        let field = |(number, name): (usize, &'static str)| {
            let value = Signal::derive(move || {
                let mut shape = row.get().unwrap_or_default().shape;
                let length = shape.lengths_mut().into_iter().nth(number);
                length.map(|(_, typed)| typed.clone()).unwrap_or_default()
            });
            let commit = move |typed: String| {
                let typed = with_units(typed.trim(), desk.bare());
                change(name, &|row| {
                    if let Some((_, length)) = row.shape.lengths_mut().into_iter().nth(number) {
                        length.clone_from(&typed);
                    }
                });
                Ok(())
            };
            let live = move |typed: String| {
                length(&typed, desk.bare())
                    .is_ok_and(|size| SHAPE_SIZE_MM.holds(size.length().mm()))
            };
            let example = if name == "Corner radius" { "sharp" } else { "" };
            view! {
                <Field label=name class="narrow" live=live example=example value=value commit=commit/>
            }
        };
        names.into_iter().enumerate().map(field).collect::<Vec<_>>()
    };
    let count = |row: &ShapeRow| match row.shape {
        Shape::Polygon { sides, .. } => sides,
        Shape::Star { points, .. } => points,
        _ => 0,
    };
    let counted = move || {
        let label = match kind.get() {
            "polygon" => "Sides",
            "star" => "Points",
            _ => return None,
        };
        let now = move || row.get().as_ref().map(count).unwrap_or_default();
        let commit = move |typed: String| {
            let count = whole(&typed, untrack(now))?;
            change(label, &|row| match &mut row.shape {
                Shape::Polygon { sides, .. } => *sides = count,
                Shape::Star { points, .. } => *points = count,
                _ => {}
            });
            Ok(())
        };
        let value = Signal::derive(move || now().to_string());
        Some(view! { <Field label=label class="tiny" number=true value=value commit=commit/> })
    };
    let points = move || {
        let value = read(|row| match &row.shape {
            Shape::Polyline { points } => points.clone(),
            _ => String::new(),
        });
        let commit = move |typed: String| {
            let typed = points_with_units(typed.trim(), desk.bare());
            change("points", &|row| {
                if let Shape::Polyline { points } = &mut row.shape {
                    points.clone_from(&typed);
                }
            });
            Ok(())
        };
        let live = |typed: String| {
            let mut points = typed.split(';');
            points.all(|text| point(text, LengthUnit::Millimetres).is_ok())
        };
        let label = "Points, each across, up from the lower left; part them by ;";
        (kind.get() == "polyline").then(|| {
            view! { <Field label=label class="wide" live=live value=value commit=commit/> }
        })
    };
    let sweep = move || {
        let value = read(|row| match row.shape {
            Shape::Arc { sweep_degrees, .. } => sweep_degrees.to_string(),
            _ => String::new(),
        });
        let commit = move |typed: String| {
            let sweep = degrees(&typed)?;
            change("sweep", &|row| {
                if let Shape::Arc { sweep_degrees, .. } = &mut row.shape {
                    *sweep_degrees = sweep;
                }
            });
            Ok(())
        };
        (kind.get() == "arc").then(|| {
            view! { <Field label="Sweep, °" class="narrow" number=true value=value commit=commit/> }
        })
    };
    view! {
        <Choice
            label="Shape"
            class="kind"
            value=Signal::derive(move || kind.get().to_owned())
            options=Signal::stored(
                KINDS.map(|(kind, words)| (kind.to_owned(), words.to_owned())).to_vec()
            )
            commit=move |chosen: String| {
                if chosen != kind.get_untracked() {
                    let shape = start(&chosen, desk.units.get_untracked());
                    change("shape", &|row| row.shape = shape.clone());
                }
            }
        />
        <Field
            label="What it is"
            class="narrow"
            live=always()
            value=read(|row| row.label.clone())
            commit=move |typed: String| {
                change("label", &|row| row.label.clone_from(&typed));
                Ok(())
            }
        />
        {counted}
        {move || {
            // Another kind, other fields.
            kind.track();
            lengths()
        }}
        {points}
        {sweep}
        <Field
            label="Turned, °"
            class="narrow"
            value=read(|row| row.rotation_degrees.to_string())
            commit=move |typed: String| {
                let turned = degrees(&typed)?;
                change("turned", &|row| row.rotation_degrees = turned);
                Ok(())
            }
        />
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use tubewright::book::Allowances;
    use tubewright::job::Job;
    use tubewright::takeoff::takeoff;

    #[test]
    fn every_kind_begins_with_sizes_that_can_be_made() {
        for (kind, _) in KINDS {
            for units in [Units::Metric, Units::FeetInches] {
                let shape = start(kind, units);
                assert_eq!(shape.kind(), kind);
                let job = Job {
                    rows: vec![Row::Shape(ShapeRow {
                        shape,
                        ..ShapeRow::default()
                    })],
                    ..Job::default()
                };
                let off = takeoff(&job, &Allowances::default());
                assert_eq!(off.findings, [], "{kind}");
                assert_eq!(off.pieces.len(), 1, "{kind}");
            }
        }
    }

    #[test]
    fn angles_are_read_with_a_sign_or_explained() {
        for (typed, found) in [("90", 90.0), (" -7,5° ", -7.5), ("\u{2212} 30", -30.0)] {
            assert_eq!(degrees(typed), Ok(found), "{typed}");
        }
        for typed in ["", "--3", "a lot", "3 mm"] {
            assert!(degrees(typed).is_err(), "{typed}");
        }
    }
}
