//! Lengths, volts and milliamperes: the types, reading what a person typed, and showing it again.
//! Other typed figures and sums of money are read here too.
//!
//! Typed lengths are read as exact rationals (`17 5/8 in` is 17 5/8 x 25.4 mm, no rounding) and
//! become floating millimetres only when a figure is worked out from them.

mod limits;
mod point;
mod quantity;
mod read;
mod show;
mod within;

pub use limits::{
    ARC_RADIUS_MM, ARC_RISE_MM, ARC_SWEEP_DEGREES, CIRCUIT_AMPS, CONDUIT_BORE_MM, COUNT,
    ELECTRODE_SPACING_MM, FEED_MM, FROM_EARTHED_MM, HOURS_PER_YEAR, INSET_MM, LEAD_ENDS_MM,
    LEAD_MM, LETTER_DIAMETERS, LETTER_HEIGHT_MM, LINE_GAP_PERCENT, Limit, PIECE_LENGTH_MM, PIECES,
    POINT_MM, POLYGON_SIDES, POLYLINE_POINTS, RADIUS_DIAMETERS, ROTATION_DEGREES, ROWS,
    SHAPE_LENGTH_MM, SHAPE_SIZE_MM, SLACK_PERCENT, SPACING_DIAMETERS, SPACING_PERCENT, STAR_POINTS,
    SUPPLY_PLACE_MM, TEXT_CHARACTERS, WIDTH_PERCENT,
};
pub use point::{point, points_with_units};
pub use quantity::{Length, Milliamps, Volts};
pub use read::{
    ExactLength, LengthUnit, ReadError, figure, length, money, quoted, repeated, with_units,
};
pub use show::{
    Units, glass, grouped, length_exact, length_shown, milliamps_shown, told_from, volts_shown,
};
pub(crate) use show::{large_first, small_first};
pub use within::length_within;
