//! Plain shapes as a job holds them: a kind, and its sizes as typed.

use serde::{Deserialize, Serialize};

use super::{Pieces, is_zero, one};

/// A plain shape in one tube.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ShapeRow {
    /// What it is; where nothing is typed it is called by its kind.
    #[serde(default)]
    pub label: String,
    /// The shape.
    pub shape: Shape,
    /// How far it is turned; above zero it rises to the right.
    #[serde(default, skip_serializing_if = "is_zero")]
    pub rotation_degrees: f64,
    /// Tube type, by its name in the book.
    pub tube: String,
    /// How many times this row is made.
    #[serde(default = "one")]
    pub count: i64,
    /// Rows of one group light together; rows of another group are never on one circuit with them.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub group: String,
    /// How its strokes become pieces of glass, where that is not as usual.
    #[serde(default, skip_serializing_if = "Pieces::is_usual")]
    pub pieces: Pieces,
}

impl Default for ShapeRow {
    fn default() -> Self {
        Self {
            label: String::new(),
            shape: Shape::default(),
            rotation_degrees: 0.0,
            tube: String::new(),
            count: one(),
            group: String::new(),
            pieces: Pieces::default(),
        }
    }
}

/// A plain shape; lengths as typed, with their unit.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case", deny_unknown_fields)]
pub enum Shape {
    /// A straight line.
    Line {
        /// From end to end.
        length: String,
    },
    /// Straight lines from point to point.
    Polyline {
        /// Points parted by semicolons, each so far across and so far up from the lower left, with a
        /// comma between: `"0, 0; 600 mm, 0; 600 mm, 300 mm"`. It is closed where the last point is
        /// the first.
        points: String,
    },
    /// A rectangle.
    Rectangle {
        /// Across.
        width: String,
        /// Up.
        height: String,
        /// The radius its corners are bent to; empty: they are sharp.
        #[serde(default, skip_serializing_if = "String::is_empty")]
        corner: String,
    },
    /// A circle.
    Circle {
        /// Across.
        diameter: String,
    },
    /// An ellipse.
    Ellipse {
        /// Across.
        width: String,
        /// Up.
        height: String,
    },
    /// A part of a circle, its middle at the top.
    Arc {
        /// Of the circle.
        radius: String,
        /// How much of the circle it is.
        #[serde(default = "half_turn", skip_serializing_if = "is_no_number")]
        sweep_degrees: f64,
    },
    /// A polygon of equal sides, one of them at the bottom.
    Polygon {
        /// How many.
        sides: i64,
        /// The diameter of the circle through its corners.
        across_corners: String,
    },
    /// A star, one point straight up.
    Star {
        /// How many.
        points: i64,
        /// The diameter of the circle through its points.
        outer_diameter: String,
        /// The diameter of the circle through its notches.
        inner_diameter: String,
    },
    /// The outline of an arrow pointing to the right.
    Arrow {
        /// From the tail to the tip.
        length: String,
        /// Of that, the head.
        head_length: String,
        /// The head where it is widest.
        head_width: String,
        /// The shaft.
        shaft_width: String,
    },
}

impl Default for Shape {
    /// A line of no length yet.
    fn default() -> Self {
        Self::Line {
            length: String::new(),
        }
    }
}

impl Shape {
    /// Its lengths as typed, each with the name sentences and fields give it. The points of a polyline
    /// are no such length.
    pub fn lengths_mut(&mut self) -> Vec<(&'static str, &mut String)> {
        match self {
            Self::Line { length } => vec![("Length", length)],
            Self::Polyline { .. } => Vec::new(),
            Self::Rectangle {
                width,
                height,
                corner,
            } => vec![
                ("Width", width),
                ("Height", height),
                ("Corner radius", corner),
            ],
            Self::Circle { diameter } => vec![("Diameter", diameter)],
            Self::Ellipse { width, height } => vec![("Width", width), ("Height", height)],
            Self::Arc { radius, .. } => vec![("Radius", radius)],
            Self::Polygon { across_corners, .. } => vec![("Across the corners", across_corners)],
            Self::Star {
                outer_diameter,
                inner_diameter,
                ..
            } => vec![
                ("Outer diameter", outer_diameter),
                ("Inner diameter", inner_diameter),
            ],
            Self::Arrow {
                length,
                head_length,
                head_width,
                shaft_width,
            } => vec![
                ("Length", length),
                ("Head length", head_length),
                ("Head width", head_width),
                ("Shaft width", shaft_width),
            ],
        }
    }

    /// What kind it is, in a word.
    pub const fn kind(&self) -> &'static str {
        match self {
            Self::Line { .. } => "line",
            Self::Polyline { .. } => "polyline",
            Self::Rectangle { .. } => "rectangle",
            Self::Circle { .. } => "circle",
            Self::Ellipse { .. } => "ellipse",
            Self::Arc { .. } => "arc",
            Self::Polygon { .. } => "polygon",
            Self::Star { .. } => "star",
            Self::Arrow { .. } => "arrow",
        }
    }
}

const fn half_turn() -> f64 {
    180.0
}

#[allow(clippy::trivially_copy_pass_by_ref, reason = "asked so by serde")]
fn is_no_number(value: &f64) -> bool {
    !value.is_finite()
}
