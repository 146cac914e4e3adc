//! The primary side: what the supplies draw, the branch circuits they need, the volts their feed loses,
//! and what they take in a year.
//!
//! The feed carries volt-amperes, not watts: what a supply draws is what its plate says or what is worked
//! out of it, the larger of both. Sign loads are continuous loads, so a rule set counts them with a
//! margin. Watts are those of the tubes; what the supplies themselves lose is not known and comes on
//! top.

mod conductors;
mod finding;

use rust_decimal::Decimal;
use rust_decimal::prelude::FromPrimitive;

use crate::job::{Feed, Site};
use crate::measure::{self, length_within};
use crate::rules::{Finding, Limits, RuleSet, Source};
use crate::supply::Rating;

pub use conductors::{CONDUCTORS, COPPER_PER_KELVIN, Conductor, Table, conductor, warmer};

/// Share of the mains volts that a feed may lose before a person has to look, percent.
pub const DROP_LOOK_PERCENT: f64 = 3.0;
/// Sums of amperes that miss a rating by less than this share are that rating: floats round.
const ROUNDING: f64 = 1e-9;

/// A supply of the plan as the feed sees it.
#[derive(Debug, Clone, Copy)]
pub struct Drawing<'a> {
    /// The supply.
    pub rating: &'a Rating,
    /// Volt-amperes it is worked out to draw, where they can be.
    pub worked_va: Option<f64>,
    /// Watts in its tubes; None where they do not run.
    pub watts: Option<f64>,
}

/// Supplies of one type.
#[derive(Debug, Clone, PartialEq)]
pub struct SupplyLoad {
    /// Name in the book.
    pub name: String,
    /// How many.
    pub count: usize,
    /// Volt-amperes the most heavily loaded of them draws; None: not known.
    pub va: Option<f64>,
    /// Whether that is the plate's figure, and not one worked out.
    pub from_plate: bool,
    /// Amperes of that one.
    pub amps: Option<f64>,
    /// How many like it one branch circuit carries.
    pub per_circuit: Option<usize>,
}

/// Branch circuits of the rating given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Branches {
    /// How many are needed, no supply split between two.
    pub count: usize,
    /// Whether fewer are impossible; else a better packing may exist.
    pub least: bool,
    /// Amperes on the fullest of them, not counted with any margin.
    pub fullest_amps: f64,
}

/// What the feed loses.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct VoltDrop {
    /// The conductor.
    pub conductor: &'static Conductor,
    /// Length one way, metres.
    pub length_m: f64,
    /// Amperes it is worked out for.
    pub amps: f64,
    /// Volts lost, at the table's temperature.
    pub volts: f64,
    /// Percent of the mains volts; None: those are not known.
    pub percent: Option<f64>,
}

/// The feed worked out.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct FeedWork {
    /// Supplies by type, in the order of the circuits.
    pub supplies: Vec<SupplyLoad>,
    /// Mains volts: the site's, else those all supplies are made for.
    pub mains_volts: Option<f64>,
    /// Volt-amperes of all supplies; None: of some they are not known.
    pub total_va: Option<f64>,
    /// Amperes of all supplies.
    pub total_amps: Option<f64>,
    /// What the load is counted as, percent of itself.
    pub counted_percent: f64,
    /// The clause of that percentage; None: no rule set has one.
    pub counted_by: Option<Source>,
    /// Amperes counted so, the floor of a required outlet included.
    pub counted_amps: Option<f64>,
    /// The volt-amperes the floor of a required outlet raised the load to; None: it did not.
    pub raised_to_va: Option<f64>,
    /// The branch circuits; None: their rating is not given, a load not known, or a supply too large.
    pub branches: Option<Branches>,
    /// The feed's volts.
    pub drop: Option<VoltDrop>,
    /// Watts of all tubes, at least; None: not known.
    pub watts: Option<f64>,
    /// Kilowatt-hours in a year, at least.
    pub kwh_per_year: Option<f64>,
    /// Their cost in the book's currency, at least.
    pub cost_per_year: Option<Decimal>,
    /// Findings at the job.
    pub findings: Vec<Finding>,
}

/// Works out the feed of the supplies of a plan.
pub fn feed(feed: &Feed, site: &Site, rules: Option<&RuleSet>, drawing: &[Drawing]) -> FeedWork {
    let mut work = FeedWork {
        counted_percent: 100.0,
        ..FeedWork::default()
    };
    if drawing.is_empty() {
        return work;
    }
    work.mains_volts = mains(site, drawing);
    let loads: Vec<Load> = drawing
        .iter()
        .map(|drawing| Load::of(drawing, work.mains_volts))
        .collect();
    work.supplies = by_type(drawing, &loads);
    work.findings.extend(finding::loads_unknown(&work.supplies));
    work.total_va = loads.iter().map(|load| load.va).sum();
    work.total_amps = loads.iter().map(|load| load.amps).sum();
    count(&mut work, feed, rules);
    branch(&mut work, feed, rules, &loads);
    drop(&mut work, feed);
    year(&mut work, feed, drawing);
    work
}

/// What one supply draws.
#[derive(Debug, Clone, Copy)]
struct Load {
    va: Option<f64>,
    from_plate: bool,
    amps: Option<f64>,
}

impl Load {
    fn of(drawing: &Drawing, mains: Option<f64>) -> Self {
        let (plate, worked) = (drawing.rating.input_va, drawing.worked_va);
        let from_plate = match (plate, worked) {
            (Some(plate), Some(worked)) => plate >= worked,
            (plate, _) => plate.is_some(),
        };
        let va = if from_plate { plate } else { worked };
        let volts = drawing.rating.input_volts.or(mains);
        Self {
            va,
            from_plate,
            amps: va.zip(volts).map(|(va, volts)| va / volts),
        }
    }
}

/// The site's mains volts, else those that all supplies are made for.
fn mains(site: &Site, drawing: &[Drawing]) -> Option<f64> {
    if let Some(volts) = site.mains_volts {
        return (volts > 0.0 && volts.is_finite()).then_some(volts);
    }
    let first = drawing.first()?.rating.input_volts?;
    let all = drawing
        .iter()
        .all(|drawing| drawing.rating.input_volts == Some(first));
    all.then_some(first)
}

fn by_type(drawing: &[Drawing], loads: &[Load]) -> Vec<SupplyLoad> {
    let mut supplies: Vec<SupplyLoad> = Vec::new();
    for (drawing, load) in drawing.iter().zip(loads) {
        let name = &drawing.rating.name;
        match supplies.iter_mut().find(|supply| supply.name == *name) {
            Some(supply) => {
                supply.count += 1;
                if load.va > supply.va {
                    supply.va = load.va;
                    supply.from_plate = load.from_plate;
                    supply.amps = load.amps;
                }
            }
            None => supplies.push(SupplyLoad {
                name: name.clone(),
                count: 1,
                va: load.va,
                from_plate: load.from_plate,
                amps: load.amps,
                per_circuit: None,
            }),
        }
    }
    supplies
}

/// The load as a code counts it.
fn count(work: &mut FeedWork, feed: &Feed, rules: Option<&RuleSet>) {
    let rule = |limits| {
        let set = rules?;
        let rule = set.rule(limits)?;
        Some((rule.value?, set.source(rule)))
    };
    match rule(Limits::ContinuousLoad) {
        // Less than itself no load is counted.
        Some((percent, source)) if percent >= 100.0 => {
            work.counted_percent = percent;
            work.counted_by = Some(source);
        }
        Some((percent, source)) => work.findings.push(finding::odd_percent(percent, source)),
        None => work.findings.push(finding::counted_as_it_is()),
    }
    let mut amps = work.total_amps;
    if feed.required_outlet
        && let Some((floor, source)) = rule(Limits::OutletLoad)
        && let Some(va) = work.total_va
        && va < floor
    {
        work.raised_to_va = Some(floor);
        amps = work.mains_volts.map(|volts| floor / volts);
        work.findings.push(finding::outlet_floor(va, floor, source));
    }
    work.counted_amps = amps.map(|amps| amps * work.counted_percent / 100.0);
}

/// The branch circuit against its limits, and how many of it are needed.
fn branch(work: &mut FeedWork, feed: &Feed, rules: Option<&RuleSet>, loads: &[Load]) {
    let Some(amps) = feed.circuit_amps else {
        work.findings.push(finding::circuit_not_given());
        return;
    };
    if !measure::CIRCUIT_AMPS.holds(amps) {
        work.findings.push(finding::circuit_amps(amps));
        return;
    }
    let limits = if feed.other_loads {
        Limits::OtherCircuit
    } else {
        Limits::TubeCircuit
    };
    let rule = |limits| {
        let set = rules?;
        let rule = set.rule(limits)?;
        Some((rule.value?, set.source(rule)))
    };
    if let Some((most, source)) = rule(limits)
        && amps > most
    {
        work.findings.push(finding::circuit_too_large(
            amps,
            most,
            feed.other_loads,
            source,
        ));
    }
    if feed.required_outlet
        && feed.other_loads
        && let Some((_, source)) = rule(Limits::OutletCircuit)
    {
        work.findings.push(finding::outlet_shared(source));
    }
    if feed.required_outlet
        && let Some((least, source)) = rule(Limits::OutletCircuit)
        && amps < least
    {
        work.findings
            .push(finding::outlet_circuit(amps, least, source));
    }
    let counted = work.counted_percent / 100.0;
    for supply in &mut work.supplies {
        supply.per_circuit = supply.amps.map(|each| fits(amps, each * counted));
        if supply.per_circuit == Some(0) {
            let each = supply.amps.unwrap_or_default();
            work.findings
                .push(finding::one_too_large(&supply.name, each * counted, amps));
        }
    }
    let each: Option<Vec<f64>> = loads.iter().map(|load| load.amps).collect();
    let Some(each) = each else { return };
    if each.iter().any(|each| fits(amps, each * counted) == 0) {
        return;
    }
    // A required outlet that is counted with its floor fills its circuit by that.
    let floor = work.counted_amps.filter(|_| work.raised_to_va.is_some());
    if let Some(floor) = floor
        && fits(amps, floor) == 0
    {
        work.findings.push(finding::floor_too_large(floor, amps));
        return;
    }
    work.branches = Some(packed(&each, amps / counted));
}

/// How many loads of so many amperes a circuit carries.
#[allow(
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss,
    reason = "kept between 0 and a million just before"
)]
fn fits(circuit: f64, each: f64) -> usize {
    (circuit * (1.0 + ROUNDING) / each).floor().clamp(0.0, 1e6) as usize
}

/// Loads put on circuits, the largest first, each on the first that has room. No circuit carries more
/// than `room`, and no load is larger.
fn packed(loads: &[f64], room: f64) -> Branches {
    let room = room * (1.0 + ROUNDING);
    let mut sorted = loads.to_vec();
    sorted.sort_by(|a, b| b.total_cmp(a));
    let mut circuits: Vec<f64> = Vec::new();
    for load in sorted {
        match circuits.iter_mut().find(|filled| **filled + load <= room) {
            Some(filled) => *filled += load,
            None => circuits.push(load),
        }
    }
    Branches {
        count: circuits.len(),
        least: circuits.len() <= at_least(loads, room),
        fullest_amps: circuits.iter().copied().fold(0.0, f64::max),
    }
}

/// No packing takes fewer circuits than the sum fills, nor than there are loads of which no two fit
/// together.
#[allow(
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss,
    reason = "as many circuits as there are loads, at most"
)]
fn at_least(loads: &[f64], room: f64) -> usize {
    let sum: f64 = loads.iter().sum();
    let filled = (sum / room).ceil().clamp(0.0, 1e6) as usize;
    let alone = loads.iter().filter(|&&load| load * 2.0 > room).count();
    filled.max(alone)
}

/// Volts the feed loses.
fn drop(work: &mut FeedWork, feed: &Feed) {
    let length = match length_within(&feed.length, &measure::FEED_MM) {
        Ok(length) => length,
        Err(why) => {
            work.findings.push(finding::unreadable(&why));
            None
        }
    };
    if feed.conductor.is_empty() {
        return;
    }
    let Some(conductor) = conductor(&feed.conductor) else {
        work.findings
            .push(finding::no_such_conductor(&feed.conductor));
        return;
    };
    // Each branch circuit has a feed of its own; with none given, one carries everything.
    let amps = work
        .branches
        .map(|branches| branches.fullest_amps)
        .or(work.total_amps);
    let (Some(length), Some(amps)) = (length, amps) else {
        return;
    };
    let volts = conductor.drop_volts(length.m(), amps);
    let percent = work.mains_volts.map(|mains| volts / mains * 100.0);
    if let Some(percent) = percent
        && percent > DROP_LOOK_PERCENT
    {
        work.findings.push(finding::drops(volts, percent));
    }
    if conductor.table == Table::Iec60228 {
        work.findings.push(finding::warmer_wire());
    }
    work.drop = Some(VoltDrop {
        conductor,
        length_m: length.m(),
        amps,
        volts,
        percent,
    });
}

/// What is taken in a year.
fn year(work: &mut FeedWork, feed: &Feed, drawing: &[Drawing]) {
    work.watts = drawing.iter().map(|drawing| drawing.watts).sum();
    let Some(hours) = feed.hours_per_year else {
        return;
    };
    if !measure::HOURS_PER_YEAR.holds(hours) {
        work.findings.push(finding::hours(hours));
        return;
    }
    work.kwh_per_year = work.watts.map(|watts| watts * hours / 1000.0);
    let Some(kwh) = work.kwh_per_year else { return };
    work.findings.push(finding::watts_and_volt_amperes());
    // Rounded as quantities of the quote are, so that it can be checked by hand.
    work.cost_per_year = Decimal::from_f64(kwh)
        .map(|kwh| kwh.round_dp(2))
        .zip(feed.price_per_kwh)
        .and_then(|(kwh, price)| kwh.checked_mul(price))
        .map(|cost| cost.round_dp(2));
}
