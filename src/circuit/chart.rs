//! The length chart of a plate: how much of a supply a string uses up, by length and not by volts.
//!
//! A supply's plate or leaflet may say how long a string of a tube type it carries at most. A piece
//! uses up its length, and a length for its pair of electrodes, of that; the supply is full at 1.
//! Where the chart gives no length for a pair, the pair's volts are taken as the length of tube that
//! takes as many: the custom of counting a pair as one foot of tube (from memory, no source) is right
//! for 15 mm neon and too little for mercury and for wide tubes.

use super::load::Load;
use crate::book::OutputEarthing;
use crate::measure::Length;
use crate::supply::Rating;
use crate::tube::TubeType;

/// Rounding that may carry a full string over 1.
pub(crate) const CHART_FULL: f64 = 1.0 + 1e-9;

/// What a string uses up of a supply by its plate's chart.
#[derive(Debug, Clone, PartialEq)]
pub struct ChartUse {
    /// Share of the supply used up; full at 1.
    pub share: f64,
    /// Tube types of the string that the chart has no length for; they are not counted in.
    pub not_in_chart: Vec<String>,
}

/// The share of a supply that some column of a tube type and its pairs use up. With a mid-point return
/// each string has half of the supply. None: the chart has no length for the tube type.
pub(crate) fn chart_share(
    rating: &Rating,
    tube: &str,
    column: Length,
    pairs: usize,
    pair: Length,
) -> Option<f64> {
    let line = rating.chart.iter().find(|line| line.tube == tube)?;
    let part = if rating.earthing == OutputEarthing::MidPointReturn {
        0.5
    } else {
        1.0
    };
    #[allow(clippy::cast_precision_loss, reason = "pieces of one string")]
    let pairs_mm = pairs as f64 * line.pair_mm.unwrap_or(pair.mm());
    Some((column.mm() + pairs_mm) / (line.longest_mm * part))
}

/// The length of a tube type whose column takes as many volts as its pair of electrodes, at the
/// reference current.
pub(crate) fn pair_as_length(tube: &TubeType) -> Length {
    Length::from_mm(1000.0 * tube.pair_volts / tube.volts_per_m)
}

/// What a string uses up by the chart of a rating; None where the plate has none.
pub(super) fn chart_use(load: &Load, rating: &Rating) -> Option<ChartUse> {
    if rating.chart.is_empty() {
        return None;
    }
    let mut used = ChartUse {
        share: 0.0,
        not_in_chart: Vec::new(),
    };
    for glass in &load.glass {
        match chart_share(rating, &glass.tube, glass.column, glass.pairs, glass.pair) {
            Some(share) => used.share += share,
            None => used.not_in_chart.push(glass.tube.clone()),
        }
    }
    Some(used)
}
