//! A string of pieces on a supply: operating point, loading window, strike, volts to earth.
//!
//! Iron: no-load volts behind a reactance, the tube a square-wave voltage. Electronic: a straight
//! droop from short-circuit current to rated current at the rated load volts. Running volts and
//! current are where the string's falling volts meet the supply's curve.
//!
//! First cut: no winding resistance, no stray capacitance, no reignition peak (see
//! DEVELOPERS.md, "Why not").

mod assess;
mod curve;
mod finding;
mod load;
mod window;

pub use assess::{Assessment, Half, assess};
pub(crate) use assess::{MAINS_SPREAD, STRIKE_LOOK};
pub use curve::{CONTINUOUS_TO, Curve, Waveform, iron};
pub(crate) use finding::model_off;
pub use load::{Load, Operating, operate};
pub use window::{Basis, Window, Zone};
