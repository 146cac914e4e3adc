//! The one table of limits on what may be typed. The check, the sentence and the documentation all
//! read from here, so a limit is written once.

use core::fmt;

/// A range that a typed figure must lie in, with the words for the message.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limit {
    /// What is limited, as the sentence names it.
    pub name: &'static str,
    /// Least figure allowed.
    pub least: f64,
    /// Greatest figure allowed.
    pub most: f64,
    /// Unit, shown after each figure; empty for plain counts.
    pub unit: &'static str,
    /// Why the range ends where it does.
    pub why: &'static str,
}

impl Limit {
    /// Whether the figure lies inside; NaN never does.
    pub fn holds(&self, value: f64) -> bool {
        self.least <= value && value <= self.most
    }
}

impl fmt::Display for Limit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let unit = if self.unit.is_empty() {
            String::new()
        } else {
            format!(" {}", self.unit)
        };
        write!(
            f,
            "{} must be {} to {}{unit} ({})",
            self.name, self.least, self.most, self.why
        )
    }
}

/// Letter (cap) height of a text row.
pub const LETTER_HEIGHT_MM: Limit = Limit {
    name: "letter height",
    least: 10.0,
    most: 5_000.0,
    unit: "mm",
    why: "smaller cannot be bent in glass, larger is built from parts given as strokes",
};

/// Length of one piece of glass in a strokes row.
pub const PIECE_LENGTH_MM: Limit = Limit {
    name: "one piece of glass",
    least: 10.0,
    most: 20_000.0,
    unit: "mm",
    why: "no piece between two electrodes is shorter or longer than this; give it as more pieces",
};

/// How many times a row is made.
pub const COUNT: Limit = Limit {
    name: "count",
    least: 1.0,
    most: 200.0,
    unit: "",
    why: "a row is made at least once; more than 200 alike are given as rows",
};

/// How far inside an outline a tube lies.
pub const INSET_MM: Limit = Limit {
    name: "the inset",
    least: 0.0,
    most: 1_000.0,
    unit: "mm",
    why: "no letter that is made is so thick that more would leave anything of it",
};

/// Characters in one text row.
pub const TEXT_CHARACTERS: Limit = Limit {
    name: "text",
    least: 1.0,
    most: 400.0,
    unit: "characters",
    why: "a line of letters longer than this is given as several rows",
};

/// Width of letters.
pub const WIDTH_PERCENT: Limit = Limit {
    name: "letter width",
    least: 50.0,
    most: 200.0,
    unit: "%",
    why: "further from what the face draws it is another face",
};

/// Space added after each letter, as a share of the letter height.
pub const SPACING_PERCENT: Limit = Limit {
    name: "letter spacing",
    least: -20.0,
    most: 100.0,
    unit: "%",
    why: "of the letter height; nearer letters touch, further ones are no word",
};

/// Clear space between two lines of a text, as a share of the letter height.
pub const LINE_GAP_PERCENT: Limit = Limit {
    name: "line gap",
    least: 0.0,
    most: 300.0,
    unit: "%",
    why: "of the letter height; nearer lines run into each other, further ones are rows",
};

/// How far a text is turned.
pub const ROTATION_DEGREES: Limit = Limit {
    name: "rotation",
    least: -180.0,
    most: 180.0,
    unit: "degrees",
    why: "half a turn either way is every direction there is",
};

/// Radius of an arc letters stand on.
pub const ARC_RADIUS_MM: Limit = Limit {
    name: "arc radius",
    least: 10.0,
    most: 100_000.0,
    unit: "mm",
    why: "a larger one is a straight line",
};

/// How much higher the middle of an arc stands than its ends.
pub const ARC_RISE_MM: Limit = Limit {
    name: "arc rise",
    least: 1.0,
    most: 20_000.0,
    unit: "mm",
    why: "with less the line is straight",
};

/// Every size of a shape but its corner radius and the radius of an arc; sentences name the size.
pub const SHAPE_SIZE_MM: Limit = Limit {
    name: "size",
    least: 10.0,
    most: 20_000.0,
    unit: "mm",
    why: "smaller cannot be bent in glass, larger is built from several shapes",
};

/// Length of the line of a shape.
pub const SHAPE_LENGTH_MM: Limit = Limit {
    name: "the glass of one shape",
    least: 10.0,
    most: 100_000.0,
    unit: "mm",
    why: "shorter cannot be bent, longer is built from several shapes",
};

/// How much of a circle an arc is.
pub const ARC_SWEEP_DEGREES: Limit = Limit {
    name: "arc sweep",
    least: 1.0,
    most: 359.0,
    unit: "degrees",
    why: "with less it is a straight line, all of it is a circle",
};

/// Points of a polyline.
pub const POLYLINE_POINTS: Limit = Limit {
    name: "points",
    least: 2.0,
    most: 200.0,
    unit: "",
    why: "a line goes from one to another; a drawing of more is artwork",
};

/// How far a point of a polyline is across and how far up; sentences name which.
pub const POINT_MM: Limit = Limit {
    name: "a point",
    least: 0.0,
    most: 20_000.0,
    unit: "mm",
    why: "from the lower left; larger is built from several shapes",
};

/// Sides of a polygon.
pub const POLYGON_SIDES: Limit = Limit {
    name: "sides",
    least: 3.0,
    most: 60.0,
    unit: "",
    why: "with fewer nothing is enclosed, with more it looks like a circle",
};

/// Points of a star.
pub const STAR_POINTS: Limit = Limit {
    name: "points of a star",
    least: 3.0,
    most: 60.0,
    unit: "",
    why: "with fewer it is no star, more cannot be told apart",
};

/// The shop's tightest radius.
pub const RADIUS_DIAMETERS: Limit = Limit {
    name: "the tightest radius",
    least: 0.5,
    most: 20.0,
    unit: "diameters",
    why: "tighter the glass would run into itself, wider hardly anything could be bent",
};

/// The shop's least letter height.
pub const LETTER_DIAMETERS: Limit = Limit {
    name: "the least letter height",
    least: 1.0,
    most: 200.0,
    unit: "diameters",
    why: "lower no letter is made, higher hardly any sign",
};

/// The shop's least spacing of tubes.
pub const SPACING_DIAMETERS: Limit = Limit {
    name: "the least spacing of tubes",
    least: 1.0,
    most: 10.0,
    unit: "diameters",
    why: "nearer the tubes touch, further apart they are no letters",
};

/// The shop's least distance of electrodes.
pub const ELECTRODE_SPACING_MM: Limit = Limit {
    name: "the least distance of electrodes",
    least: 1.0,
    most: 1_000.0,
    unit: "mm",
    why: "nearer they touch, further apart few signs have them",
};

/// Length of a high-voltage lead or jumper; sentences name which.
pub const LEAD_MM: Limit = Limit {
    name: "a lead",
    least: 0.0,
    most: 100_000.0,
    unit: "mm",
    why: "a supply further from its tubes than this stands in another building",
};

/// Bore of the conduit of a lead.
pub const CONDUIT_BORE_MM: Limit = Limit {
    name: "the bore of the conduit",
    least: 3.0,
    most: 300.0,
    unit: "mm",
    why: "no cable goes through less, and more is a room and no conduit",
};

/// Distance of a cable from earthed parts.
pub const FROM_EARTHED_MM: Limit = Limit {
    name: "the distance from earthed parts",
    least: 1.0,
    most: 10_000.0,
    unit: "mm",
    why: "nearer the cable touches, and some earthed part is nearer than further",
};

/// How far right of the sign's left edge or above its bottom edge the supplies stand; sentences name
/// which.
pub const SUPPLY_PLACE_MM: Limit = Limit {
    name: "the place of the supplies",
    least: -100_000.0,
    most: 100_000.0,
    unit: "mm",
    why: "further away they stand in another building",
};

/// What is added to a length taken from the drawing, as a share of it.
pub const SLACK_PERCENT: Limit = Limit {
    name: "slack",
    least: 0.0,
    most: 300.0,
    unit: "%",
    why: "with more the drawing says nothing of the length: type it",
};

/// What is added to a length taken from the drawing for its two ends.
pub const LEAD_ENDS_MM: Limit = Limit {
    name: "what the ends take",
    least: 0.0,
    most: 5_000.0,
    unit: "mm",
    why: "with more the drawing says nothing of the length: type it",
};

/// Rated current of a branch circuit.
pub const CIRCUIT_AMPS: Limit = Limit {
    name: "the branch circuit",
    least: 1.0,
    most: 200.0,
    unit: "A",
    why: "signs hang on circuits of ordinary size",
};

/// Length of the feed one way.
pub const FEED_MM: Limit = Limit {
    name: "the feed",
    least: 0.0,
    most: 2_000_000.0,
    unit: "mm",
    why: "a longer one is not fed at mains volts",
};

/// Hours a sign is lit in a year.
pub const HOURS_PER_YEAR: Limit = Limit {
    name: "hours lit in a year",
    least: 0.0,
    most: 8_784.0,
    unit: "h",
    why: "a leap year has no more",
};

/// Rows in a job.
pub const ROWS: Limit = Limit {
    name: "rows",
    least: 0.0,
    most: 200.0,
    unit: "",
    why: "a larger sign is planned as several jobs",
};

/// Pieces of glass in a job.
pub const PIECES: Limit = Limit {
    name: "pieces of glass",
    least: 0.0,
    most: 4_000.0,
    unit: "",
    why: "a larger sign is planned as several jobs",
};
