//! The string as a load, and where it meets the supply's curve.

use super::chart::pair_as_length;
use super::curve::{Curve, iron};
use crate::book::Gas;
use crate::measure::{Length, Milliamps, Volts};
use crate::takeoff::Piece;
use crate::tube::TubeType;

/// What a string of pieces in series asks for: `U(I) = pairs + Σ k I^-n`, I in milliamperes.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Load {
    /// Volts of all electrode pairs.
    pub pair_volts: f64,
    /// Column constants by exponent: (n, k).
    pub columns: Vec<(f64, f64)>,
    /// Whether any of it is neon.
    pub neon: bool,
    /// Whether any of it is argon-mercury.
    pub mercury: bool,
    /// The least of its tubes' greatest currents, with the tube's name.
    pub most: Option<(Milliamps, String)>,
    /// The greatest of its tubes' least currents, with the tube's name.
    pub least: Option<(Milliamps, String)>,
    /// The least of its electrodes' rated currents, with the electrode's name.
    pub electrode: Option<(Milliamps, String)>,
    /// Its glass by tube type.
    pub glass: Vec<Glass>,
    /// Its tube types of which neither glass nor electrodes have a greatest current, by name.
    pub unbounded: Vec<String>,
}

/// Glass of one tube type in a string.
#[derive(Debug, Clone, PartialEq)]
pub struct Glass {
    /// Tube type, by its name in the book.
    pub tube: String,
    /// Gas column of all its pieces.
    pub column: Length,
    /// Pieces of it, and so pairs of electrodes.
    pub pairs: usize,
    /// The length of tube that takes as many volts as a pair.
    pub pair: Length,
}

impl Load {
    /// An empty string.
    pub fn new() -> Self {
        Self::default()
    }

    /// Adds a piece of a tube type.
    pub fn add(&mut self, piece: &Piece, tube: &TubeType, cold: bool) {
        self.pair_volts += tube.pair_volts;
        let column = tube.column(piece.column(), cold);
        match self.columns.iter_mut().find(|(n, _)| *n == tube.exponent) {
            Some((_, k)) => *k += column,
            None => self.columns.push((tube.exponent, column)),
        }
        match tube.gas {
            Gas::Neon => self.neon = true,
            Gas::ArgonMercury => self.mercury = true,
        }
        match self.glass.iter_mut().find(|glass| glass.tube == tube.name) {
            Some(glass) => {
                glass.column += piece.column();
                glass.pairs += 1;
            }
            None => self.glass.push(Glass {
                tube: tube.name.clone(),
                column: piece.column(),
                pairs: 1,
                pair: pair_as_length(tube),
            }),
        }
        let rated = tube.electrode.as_ref().and_then(|kind| kind.rated);
        if tube.most.or(rated).is_none() && !self.unbounded.contains(&tube.name) {
            self.unbounded.push(tube.name.clone());
        }
        if let Some(most) = tube.most
            && self.most.as_ref().is_none_or(|(known, _)| most < *known)
        {
            self.most = Some((most, tube.name.clone()));
        }
        if let Some(electrode) = &tube.electrode
            && let Some(rated) = electrode.rated
            && self
                .electrode
                .as_ref()
                .is_none_or(|(known, _)| rated < *known)
        {
            self.electrode = Some((rated, electrode.name.clone()));
        }
        if let Some(least) = tube.least
            && self.least.as_ref().is_none_or(|(known, _)| least > *known)
        {
            self.least = Some((least, tube.name.clone()));
        }
    }

    /// A string of pieces.
    pub fn of<'p>(pieces: impl IntoIterator<Item = (&'p Piece, &'p TubeType)>, cold: bool) -> Self {
        let mut load = Self::new();
        for (piece, tube) in pieces {
            load.add(piece, tube, cold);
        }
        load
    }

    /// Running volts at a current in milliamperes.
    pub fn volts(&self, current_ma: f64) -> f64 {
        self.pair_volts
            + self
                .columns
                .iter()
                .map(|(n, k)| k * current_ma.powf(-n))
                .sum::<f64>()
    }
}

/// Where a string runs on a supply.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Operating {
    /// It runs.
    Runs {
        /// String current.
        current: Milliamps,
        /// Running volts of the whole string.
        running: Volts,
        /// Power in the string, watts.
        watts: f64,
        /// Whether the current has gaps (flicker).
        gaps: bool,
    },
    /// No steady point: the string asks for more than the supply gives at any current.
    Overloaded {
        /// What it would take at the supply's edge current.
        wanted: Volts,
        /// What the supply gives there.
        given: Volts,
    },
}

impl Operating {
    /// Running volts, or the volts wanted when overloaded.
    pub const fn volts(&self) -> Volts {
        match self {
            Self::Runs { running, .. } => *running,
            Self::Overloaded { wanted, .. } => *wanted,
        }
    }
}

/// The largest stable operating point of a string on a curve.
pub fn operate(load: &Load, curve: &Curve) -> Operating {
    let (edge_volts, edge_current) = curve.edge();
    let wanted = load.volts(edge_current.ma());
    if wanted <= edge_volts.volts() {
        // On the steady branch every crossing is stable, so there is one, and it lies between the
        // edge current and the short-circuit current.
        let short_ma = match *curve {
            Curve::Iron { short_ma, .. } | Curve::Electronic { short_ma, .. } => short_ma,
        };
        let current = crossing(
            |current| curve.current(load.volts(current)) - current,
            edge_current.ma(),
            short_ma,
        );
        return runs(load, curve, current, false);
    }
    if let Curve::Iron { no_load, short_ma } = *curve
        && let Some(current) = with_gaps(load, no_load, short_ma, edge_current.ma())
    {
        return runs(load, curve, current, true);
    }
    Operating::Overloaded {
        wanted: Volts::from_volts(wanted),
        given: edge_volts,
    }
}

/// The largest current below the edge's at which a string runs with gaps; None where there is none.
///
/// What the supply gives at the string's volts at some current only falls as that current does, so from
/// above the largest crossing, giving what was given the step before leads down to it and never past
/// it. A guess from the last two steps goes ahead; once it has the crossing behind it, both bracket it.
fn with_gaps(load: &Load, no_load: f64, short_ma: f64, edge_ma: f64) -> Option<f64> {
    let given = |current: f64| iron(load.volts(current) / no_load).rms * short_ma;
    let excess = |current: f64| given(current) - current;
    let nothing = 1e-9 * short_ma;
    let mut from = edge_ma;
    for _ in 0..500 {
        let next = given(from);
        if next <= nothing {
            return None;
        }
        if from - next <= 1e-13 * short_ma {
            return Some(next);
        }
        let after = given(next);
        let slope = (next - after) / (from - next);
        let guess = next - 1.05 * (next - after) / (1.0 - slope);
        if slope < 1.0 && guess > nothing && excess(guess) >= 0.0 {
            return Some(crossing(excess, guess, next));
        }
        from = after;
    }
    // So slow only where string and supply all but touch: it is taken not to run.
    None
}

/// Where `excess` passes from not below zero at `low` to below zero at `high`: false position with the
/// halving of the end that stays (Illinois), which takes some eight steps where bisection takes sixty.
fn crossing(excess: impl Fn(f64) -> f64, low: f64, high: f64) -> f64 {
    let (mut low, mut high) = (low, high);
    let (mut above, mut below) = (excess(low), excess(high));
    let near = 1e-13 * high;
    let mut stayed = 0_i8;
    for _ in 0..100 {
        // Both ends on the crossing: a supply that holds its current, or a string of no volts.
        if above.abs() <= near {
            return low;
        }
        if below.abs() <= near || high - low <= near {
            return high;
        }
        let mut at = low + (high - low) * above / (above - below);
        if !(low < at && at < high) {
            at = f64::midpoint(low, high);
        }
        let here = excess(at);
        if here >= 0.0 {
            (low, above) = (at, here);
            if stayed == 1 {
                below /= 2.0;
            }
            stayed = 1;
        } else {
            (high, below) = (at, here);
            if stayed == -1 {
                above /= 2.0;
            }
            stayed = -1;
        }
    }
    f64::midpoint(low, high)
}

fn runs(load: &Load, curve: &Curve, current: f64, gaps: bool) -> Operating {
    let volts = load.volts(current);
    let mean_ma = match *curve {
        Curve::Iron { no_load, short_ma } => iron(volts / no_load).mean * short_ma,
        // A high-frequency current is taken as square like the voltage: mean = rms.
        Curve::Electronic { .. } => current,
    };
    Operating::Runs {
        current: Milliamps::from_ma(current),
        running: Volts::from_volts(volts),
        watts: volts * mean_ma / 1000.0,
        gaps,
    }
}
