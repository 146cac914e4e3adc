//! A string on a rating, worked up: everything a circuit card shows.

use super::chart::{CHART_FULL, ChartUse, chart_use};
use super::curve::Curve;
use super::finding;
use super::load::{Load, Operating, operate};
use super::window::{Basis, Window, Zone};
use crate::book::{Loading, OutputEarthing, SupplyKind};
use crate::measure::{Milliamps, Volts};
use crate::rules::{Finding, Grade};
use crate::supply::Rating;

/// Mains may sag and rise by this share.
pub(crate) const MAINS_SPREAD: f64 = 0.10;
/// Share of the no-load peak from which striking needs a look.
pub(crate) const STRIKE_LOOK: f64 = 0.90;

/// One string between two output points of the supply.
#[derive(Debug, Clone, PartialEq)]
pub struct Half {
    /// Where it runs at the plate's input volts.
    pub operating: Operating,
    /// Running volts over the window's basis.
    pub share: f64,
    /// The zone of that share.
    pub zone: Zone,
    /// Volts needed to strike it.
    pub strike: Volts,
    /// No-load peak it has to strike from.
    pub strike_from: Volts,
    /// At 90 % of the input volts.
    pub at_low_mains: Operating,
    /// At 110 % of the input volts.
    pub at_high_mains: Operating,
    /// Where it runs if its tubes take less, and if they take more, by as much as their volts may be
    /// off; None where they were entered without saying how well they are known.
    pub band: Option<(Operating, Operating)>,
    /// What it uses up of the supply by the plate's length chart, where there is one.
    pub chart: Option<ChartUse>,
}

/// A circuit worked up.
#[derive(Debug, Clone, PartialEq)]
pub struct Assessment {
    /// The window the strings are held against.
    pub window: Window,
    /// One string, or two with a mid-point return.
    pub halves: Vec<Half>,
    /// Greatest running volts to earth.
    pub to_earth_running: Volts,
    /// Greatest volts to earth with no load: what insulation, leads and sleeves must stand.
    pub to_earth_no_load: Volts,
    /// Volt-amperes drawn, ideal supply; None where the string does not run.
    pub input_va: Option<f64>,
    /// Power over volt-amperes; None where the string does not run.
    pub power_factor: Option<f64>,
    /// What was found, without a place yet.
    pub findings: Vec<Finding>,
}

impl Assessment {
    /// The gravest finding.
    pub fn grade(&self) -> Option<Grade> {
        Finding::gravest(&self.findings)
    }

    /// The half that carries more of its share.
    pub fn heavier(&self) -> &Half {
        self.halves
            .iter()
            .max_by(|a, b| a.share.total_cmp(&b.share))
            .unwrap_or(&self.halves[0])
    }

    /// Power in all its strings, watts; None where one does not run.
    pub fn watts(&self) -> Option<f64> {
        self.halves
            .iter()
            .map(|half| match half.operating {
                Operating::Runs { watts, .. } => Some(watts),
                Operating::Overloaded { .. } => None,
            })
            .sum()
    }
}

/// Works one string (`loads.len() == 1`) or two strings to the mid-point (`2`) up on a rating.
///
/// # Panics
/// Never; an empty `loads` is worked up as one empty string.
pub fn assess(loads: &[&Load], rating: &Rating, loading: &Loading) -> Assessment {
    let empty = Load::new();
    let loads = if loads.is_empty() {
        &[&empty][..]
    } else {
        loads
    };
    let part = if rating.earthing == OutputEarthing::MidPointReturn {
        0.5
    } else {
        1.0
    };
    let neon = loads.iter().any(|load| load.neon);
    let window = Window::of(rating, neon, loading);
    let curve = |mains: f64| Curve::of(rating, part, mains);
    let nominal = curve(1.0);
    let basis = match (window.basis, nominal) {
        (Basis::RatedLoad, Curve::Electronic { rated_volts, .. }) => rated_volts,
        _ => nominal.no_load().volts(),
    };
    let mut findings = Vec::new();
    let halves: Vec<Half> = loads
        .iter()
        .map(|load| {
            let operating = operate(load, &nominal);
            let share = operating.volts().volts() / basis;
            let zone = match operating {
                Operating::Runs { gaps: false, .. } => window.zone(share),
                Operating::Runs { .. } | Operating::Overloaded { .. } => Zone::Over,
            };
            let half = Half {
                operating,
                share,
                zone,
                strike: operating.volts() * loading.strike_factor,
                strike_from: nominal.no_load() * std::f64::consts::SQRT_2,
                at_low_mains: operate(load, &curve(1.0 - MAINS_SPREAD)),
                at_high_mains: operate(load, &curve(1.0 + MAINS_SPREAD)),
                band: None,
                chart: chart_use(load, rating),
            };
            let low = curve(1.0 - MAINS_SPREAD);
            half_findings(&half, load, &window, &low, loading, rating, &mut findings);
            half
        })
        .collect();
    if part < 1.0 && loads.len() < 2 {
        findings.push(finding::needs_two_strings());
    }
    if loads.iter().any(|load| load.neon && load.mercury) || (neon && mercury_elsewhere(loads)) {
        findings.push(finding::mixed());
    }
    if rating.kind == SupplyKind::Electronic {
        findings.push(finding::electronic_shape());
    }
    let heaviest_volts = halves
        .iter()
        .map(|half| half.operating.volts().volts())
        .fold(0.0, f64::max);
    let to_earth_running = match rating.earthing {
        OutputEarthing::MidPoint => heaviest_volts / 2.0,
        OutputEarthing::MidPointReturn | OutputEarthing::OneEnd => heaviest_volts,
        // Nothing holds it to earth: the whole no-load voltage may stand at either end.
        OutputEarthing::Isolated => rating.no_load.volts(),
    };
    let current = halves
        .iter()
        .map(|half| match half.operating {
            Operating::Runs { current, .. } => Some(current),
            Operating::Overloaded { .. } => None,
        })
        .sum::<Option<Milliamps>>();
    let watts: Option<f64> = halves
        .iter()
        .map(|half| match half.operating {
            Operating::Runs { watts, .. } => Some(watts),
            Operating::Overloaded { .. } => None,
        })
        .sum();
    let input_va = match rating.kind {
        SupplyKind::Iron => {
            current.map(|current| nominal.no_load().volts() * current.ma() / 1000.0)
        }
        // What an electronic supply draws is its plate's, not the output's, to say.
        SupplyKind::Electronic => None,
    };
    Assessment {
        window,
        to_earth_running: Volts::from_volts(to_earth_running),
        to_earth_no_load: rating.no_load_to_earth(),
        input_va,
        power_factor: input_va.zip(watts).map(|(va, watts)| watts / va),
        halves,
        findings,
    }
}

fn mercury_elsewhere(loads: &[&Load]) -> bool {
    loads.iter().any(|load| load.mercury)
}

fn half_findings(
    half: &Half,
    load: &Load,
    window: &Window,
    low: &Curve,
    loading: &Loading,
    rating: &Rating,
    findings: &mut Vec<Finding>,
) {
    findings.extend(finding::zone(half, window, rating));
    if let Some(used) = &half.chart {
        if used.share > CHART_FULL {
            findings.push(finding::chart_full(used));
        }
        findings.extend(finding::not_in_chart(used));
    }
    let current = match half.operating {
        Operating::Runs { current, .. } => Some(current),
        Operating::Overloaded { .. } => None,
    };
    if let Some(current) = current {
        let stands = load
            .most
            .iter()
            .map(|(most, tube)| (*most, tube, "the tube's entry"));
        let rated = load.electrode.iter();
        let rated = rated.map(|(rated, name)| (*rated, name, "the electrode's entry"));
        for (most, name, entry) in stands.chain(rated) {
            if current > most {
                findings.push(finding::overdriven(current, most, name, entry));
            } else if let Operating::Runs {
                current: at_high, ..
            } = half.at_high_mains
                && at_high > most
            {
                findings.push(finding::overdriven_at_high_mains(at_high, most, name));
            }
        }
        findings.extend(finding::no_greatest_current(&load.unbounded));
        if let Some((rated, name)) = &load.electrode
            && current <= *rated
            && rating.short_circuit > *rated
        {
            findings.push(finding::short_circuit_over_electrode(rating, *rated, name));
        }
        if let Some((least, tube)) = &load.least
            && current < *least
        {
            findings.push(finding::too_little_current(current, *least, tube));
        }
        findings.extend(finding::strike(half.strike, half.strike_from, rating));
    }
    if half.zone != Zone::Over {
        let low_basis = match (window.basis, *low) {
            (Basis::RatedLoad, Curve::Electronic { rated_volts, .. }) => rated_volts,
            _ => low.no_load().volts(),
        };
        let low_peak = low.no_load() * std::f64::consts::SQRT_2;
        let low_strike = half.at_low_mains.volts() * loading.strike_factor;
        let overloaded = match half.at_low_mains {
            Operating::Runs {
                running,
                gaps: false,
                ..
            } => window.zone(running.volts() / low_basis) == Zone::Over,
            Operating::Runs { .. } | Operating::Overloaded { .. } => true,
        };
        // An electronic supply is taken to hold its output.
        if rating.kind != SupplyKind::Iron {
        } else if overloaded {
            findings.push(finding::low_mains(
                half.at_low_mains.volts().volts() / low_basis,
                window,
                rating,
            ));
        } else if low_strike > low_peak {
            findings.push(finding::no_strike_at_low_mains(
                low_strike, low_peak, rating,
            ));
        }
    }
}
