//! A string of pieces on a supply: operating point, loading window, strike, volts to earth.
//!
//! Iron: no-load volts behind a reactance, the tube a square-wave voltage. Electronic: a straight
//! droop from short-circuit current to rated current at the rated load volts. Running volts and
//! current are where the string's falling volts meet the supply's curve.
//!
//! Beside it: volts to earth joint by joint, where a fault to earth goes unseen, what a plate's length
//! chart allows, and every default that the figures lean on. Left out: winding resistance, stray
//! capacitance of tubes, reignition peak (see DEVELOPERS.md, "Why not"); leads are
//! [`crate::wiring`]'s.

mod assess;
mod assumed;
mod chart;
mod curve;
mod fault;
mod finding;
mod joint;
mod load;
mod profile;
mod protection;
mod window;

pub use assess::{Assessment, Half, assess};
pub(crate) use assess::{MAINS_SPREAD, STRIKE_LOOK};
pub use assumed::assumed;
pub use chart::ChartUse;
pub(crate) use chart::{CHART_FULL, chart_share, pair_as_length};
pub use curve::{CONTINUOUS_TO, Curve, Waveform, iron};
pub use fault::{MidPoint, Strings, difference};
pub(crate) use finding::beyond_readings;
pub(crate) use finding::volts_off;
pub use load::{Glass, Load, Operating, operate};
pub use profile::{Joint, Profile, Span, Spot, insulation_class, profile};
pub use protection::{FaultMap, Protection, Sensed, Unseen, protect};
pub use window::{Basis, Window, Zone};
