//! The loading window: where on the supply's curve a string should run.

use crate::book::{Loading, OutputEarthing, SupplyKind};
use crate::supply::Rating;

/// What shares of a window are shares of.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Basis {
    /// No-load volts.
    NoLoad,
    /// Rated load volts of an electronic supply.
    RatedLoad,
}

/// A loading window, in shares of its basis, from light to heavy.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Window {
    /// What the shares are of.
    pub basis: Basis,
    /// Below: look (underloaded).
    pub look_below: f64,
    /// Start of the target.
    pub target_from: f64,
    /// End of the target.
    pub target_to: f64,
    /// Above: look.
    pub look_above: f64,
    /// From here on: stop.
    pub stop_from: f64,
    /// Whether the plate gave it.
    pub from_plate: bool,
}

/// Part of a window.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Zone {
    /// Underloaded: look.
    Light,
    /// Inside, under the target.
    UnderTarget,
    /// In the target.
    Target,
    /// Inside, over the target.
    OverTarget,
    /// Heavily loaded: look.
    Heavy,
    /// Overloaded: stop.
    Over,
}

impl Zone {
    /// The zone in words.
    pub const fn words(self) -> &'static str {
        match self {
            Self::Light => "underloaded",
            Self::UnderTarget => "inside the window, under its target",
            Self::Target => "in the target",
            Self::OverTarget => "inside the window, over its target",
            Self::Heavy => "heavily loaded",
            Self::Over => "overloaded",
        }
    }
}

impl Window {
    /// The window of a rating for a string with or without neon.
    ///
    /// A mixed string takes the stricter figures, neon's. The plate's window replaces the default.
    pub fn of(rating: &Rating, neon: bool, loading: &Loading) -> Self {
        let stop_from = loading.stop_from;
        if let Some((least, most)) = rating.plate_window {
            let most = most.min(stop_from);
            return Self {
                basis: Basis::NoLoad,
                look_below: least,
                target_from: least,
                target_to: most,
                look_above: most,
                stop_from: stop_from.max(most),
                from_plate: true,
            };
        }
        if rating.kind == SupplyKind::Electronic {
            // The rated load is the supply's own limit; its open-circuit protection shuts it off
            // beyond. The lower ends are this program's, from no source.
            return Self {
                basis: Basis::RatedLoad,
                look_below: 0.40,
                target_from: 0.60,
                target_to: 0.95,
                look_above: 0.95,
                stop_from: 1.0,
                from_plate: false,
            };
        }
        let (target_to, look_above) = if neon {
            (loading.neon_target_to, loading.neon_look_above)
        } else {
            (loading.mercury_target_to, loading.mercury_look_above)
        };
        Self {
            basis: Basis::NoLoad,
            look_below: loading.look_below,
            target_from: loading.target_from,
            target_to,
            look_above,
            stop_from,
            from_plate: false,
        }
    }

    /// The zone of a share.
    pub fn zone(&self, share: f64) -> Zone {
        // NaN is over: nothing is known to fit.
        if share.is_nan() || share >= self.stop_from {
            Zone::Over
        } else if share > self.look_above {
            Zone::Heavy
        } else if share > self.target_to {
            Zone::OverTarget
        } else if share >= self.target_from {
            Zone::Target
        } else if share >= self.look_below {
            Zone::UnderTarget
        } else {
            Zone::Light
        }
    }

    /// What a percentage of this window is of, in words: "of no-load volts". With a mid-point return
    /// each string runs on half of the output, and its shares are of that half.
    pub const fn of_what(&self, rating: &Rating) -> &'static str {
        match (self.basis, rating.earthing) {
            (Basis::NoLoad, OutputEarthing::MidPointReturn) => "of half the no-load volts",
            (Basis::NoLoad, _) => "of no-load volts",
            (Basis::RatedLoad, OutputEarthing::MidPointReturn) => "of half the rated load volts",
            (Basis::RatedLoad, _) => "of the rated load volts",
        }
    }

    /// The middle of the target, which a balanced plan strives for.
    pub fn middle(&self) -> f64 {
        f64::midpoint(self.target_from, self.target_to)
    }
}
