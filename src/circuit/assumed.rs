//! What a circuit's figures lean on that nobody gave: every default, said where the figures are shown.

use std::collections::BTreeSet;

use super::assess::{Assessment, MAINS_SPREAD};
use super::fault::MidPoint;
use super::window::Basis;
use crate::book::{ChartLength, Gas, Loading, SupplyKind};
use crate::supply::Rating;
use crate::tube::{Known, TubeType};

/// The defaults behind a circuit, a sentence each.
pub fn assumed(
    tubes: &[&TubeType],
    assessment: &Assessment,
    rating: &Rating,
    loading: &Loading,
    cold: bool,
) -> Vec<String> {
    let usual = Loading::default();
    let mut says = Vec::new();
    let window = &assessment.window;
    if !window.from_plate {
        says.push(match window.basis {
            Basis::RatedLoad => format!(
                "Loading window, {:.0} to {:.0} % of the rated load volts: our own choice, no source; the \
                 plate gives none.",
                window.target_from * 100.0,
                window.target_to * 100.0
            ),
            Basis::NoLoad => format!(
                "Loading window, target {:.0} to {:.0} % of the no-load volts: {}; the plate gives none.",
                window.target_from * 100.0,
                window.target_to * 100.0,
                if loading == &usual {
                    "the default, from the model of the supply and how the gases strike again each half \
                     cycle"
                } else {
                    "as set in the shop book"
                }
            ),
        });
    }
    says.push(if loading.strike_factor == usual.strike_factor {
        format!(
            "Striking: {} times the running volts, the default, from a weak source.",
            loading.strike_factor
        )
    } else {
        format!(
            "Striking: {} times the running volts, as set in the shop book.",
            loading.strike_factor
        )
    });
    says.push(match rating.kind {
        SupplyKind::Iron => format!(
            "Mains: {:.0} % low and high, a common tolerance; the output is taken to follow them.",
            MAINS_SPREAD * 100.0
        ),
        SupplyKind::Electronic => {
            "Mains: the output is taken not to follow them; the plate knows better.".to_owned()
        }
    });
    if rating.earth_fault_protection && MidPoint::of(rating, 1.0).is_some() {
        says.push(
            "Faults: without resistance, the tubes at the volts they ran at, both halves of the winding \
             leaking magnetically each for itself."
                .to_owned(),
        );
    }
    if rating.kind == SupplyKind::Electronic && rating.short_circuit == rating.rated {
        says.push(
            "Short-circuit current: none above the rated one is known, so the supply is taken to hold \
             it."
                .to_owned(),
        );
    }
    let mercury = tubes.iter().filter(|tube| tube.gas == Gas::ArgonMercury);
    if cold {
        let factors: BTreeSet<String> = mercury
            .filter(|tube| tube.cold_by_default)
            .map(|tube| format!("{:.0}", (tube.cold_factor - 1.0) * 100.0))
            .collect();
        for percent in factors {
            says.push(format!(
                "Cold: below 0 °C mercury tubes are taken to need {percent} % more for each metre, the \
                 default, with little confidence (from memory)."
            ));
        }
    } else if mercury.count() > 0 {
        says.push(
            "Warm: mercury tubes are worked out at room temperature. Outdoors in frost they need more: say \
             so at the site."
                .to_owned(),
        );
    }
    let modelled: BTreeSet<String> = tubes
        .iter()
        .filter(|tube| matches!(tube.known, Known::Model { .. }))
        .map(|tube| format!("Volts of {}: {}.", tube.name, tube.known_words()))
        .collect();
    says.extend(modelled);
    let filled: BTreeSet<String> = tubes
        .iter()
        .filter(|tube| !tube.filled_in.is_empty())
        .map(|tube| {
            format!(
                "Of {} not given, so taken from the default: {}.",
                tube.name,
                tube.filled_in.join(", ")
            )
        })
        .collect();
    says.extend(filled);
    let unpaired = |line: &&ChartLength| {
        line.pair_mm.is_none() && tubes.iter().any(|tube| tube.name == line.tube)
    };
    if rating.chart.iter().any(|line| unpaired(&line)) {
        says.push(
            "Length chart: a pair of electrodes counts as the length of its tube that takes as many \
             volts; the plate gives none."
                .to_owned(),
        );
    }
    says
}
