//! Leads against limits: those of the rule set and the plate, and this program's own on what they leak.

use super::setup::Setup;
use super::{LEAK_LOOK, LEAK_STOP, Leads, LengthFrom, Strung, TRIP_LOOK, What, finding};
use crate::book::SupplyKind;
use crate::job::LeadRun;
use crate::measure::{Length, Milliamps, told_from};
use crate::rules::{EarthWord, Finding, Grade, Limits, Rule, RuleSet};
use crate::supply::Rating;

/// Up to this output frequency the lesser distance of plastic conduit counts, hertz.
const LESSER_DISTANCE_TO: f64 = 100.0;

/// What a circuit leaks, held against the current of its tubes and against the trip current.
pub(super) fn leakage(leads: &mut Leads, rating: &Rating, word: EarthWord) {
    let mut much = false;
    if let Some(share) = leads.share {
        let over = match share {
            share if share > LEAK_STOP => Some((Grade::Stop, LEAK_STOP)),
            share if share > LEAK_LOOK => Some((Grade::Look, LEAK_LOOK)),
            _ => None,
        };
        if let Some((grade, limit)) = over {
            much = true;
            let sum = leads.sum_ma.unwrap_or_default();
            leads
                .findings
                .push(finding::lost(grade, sum, share, limit, word));
        }
    }
    let mut unequal = false;
    if rating.earth_fault_protection
        && let Some(difference) = leads.difference_ma
    {
        match rating.trip.map(Milliamps::ma) {
            Some(trip) if difference >= trip => {
                unequal = true;
                leads
                    .findings
                    .push(finding::trips(Grade::Stop, difference, trip, trip, word));
            }
            Some(trip) if difference > trip * TRIP_LOOK => {
                unequal = true;
                let limit = trip * TRIP_LOOK;
                leads
                    .findings
                    .push(finding::trips(Grade::Look, difference, trip, limit, word));
            }
            None if difference > 0.0 => {
                leads.findings.push(finding::trip_unknown(difference, word));
            }
            Some(_) | None => {}
        }
    }
    leads.advice = advice(leads, rating, much, unequal);
}

/// What would help against losing much, or against tripping.
fn advice(leads: &Leads, rating: &Rating, much: bool, unequal: bool) -> Vec<String> {
    if !(much || unequal) {
        return Vec::new();
    }
    let mut says = Vec::new();
    let of = |what| leads.section(what);
    let ma = |what| of(what).and_then(|section| section.ma).unwrap_or_default();
    let lead_a = of(What::LeadA).and_then(|section| section.length);
    let lead_b = of(What::LeadB).and_then(|section| section.length);
    if let (Some(a), Some(b)) = (lead_a, lead_b)
        && finding::balances(rating.earthing)
        && told_from(a.mm(), b.mm(), 0) != told_from(b.mm(), b.mm(), 0)
    {
        says.push(finding::equal_leads(a, b));
    }
    if ma(What::LeadA) + ma(What::LeadB) > 0.0 {
        says.push(finding::shorter());
    }
    let drawn = [What::LeadA, What::LeadB]
        .into_iter()
        .filter_map(of)
        .any(|section| section.from == LengthFrom::Drawing);
    if drawn {
        says.push(finding::nearer_supply());
    }
    if leads.pf_per_m.is_some() {
        says.push(finding::less_capacitance());
    }
    says
}

/// One circuit against the rule set, the plate and its cable.
pub(super) fn circuit(
    leads: &mut Leads,
    setup: &Setup,
    rating: &Rating,
    rules: Option<&RuleSet>,
    word: EarthWord,
) {
    for (what, called) in [(What::LeadA, "Lead A"), (What::LeadB, "Lead B")] {
        let Some(length) = leads.section(what).and_then(|section| section.length) else {
            continue;
        };
        for (set, rule) in lead_rules(rules, setup.wiring.run) {
            if let Some(limit) = rule.value
                && length.mm() > limit
            {
                let source = set.source(rule);
                leads.findings.push(finding::too_long(
                    called,
                    length,
                    limit,
                    setup.wiring.run,
                    source,
                ));
            }
        }
        if let Some(longest) = rating.longest_lead
            && length > longest
        {
            leads
                .findings
                .push(finding::longer_than_plate(called, length, longest));
        }
    }
    let no_load = rating.no_load_to_earth();
    if let Some(rated) = setup.cable.and_then(|cable| cable.rated_volts)
        && rated < no_load.volts()
    {
        leads.findings.push(finding::cable_volts(
            &setup.wiring.cable,
            rated,
            no_load,
            word,
        ));
    }
    if let Some(distance) = setup.from_earthed
        && let Some((set, rule)) = distance_rule(rules, setup.wiring.run, rating)
        && let Some(limit) = rule.value
    {
        if setup
            .cable
            .is_some_and(|cable| cable.insulation_mm.is_none())
        {
            leads.findings.push(finding::no_width(set.source(rule)));
        }
        let clear = distance.mm() - half_width(setup).mm();
        if clear < limit {
            let plastic = setup.wiring.run == LeadRun::PlasticConduit;
            let source = set.source(rule);
            leads
                .findings
                .push(finding::too_near(plastic, clear, limit, word, source));
        }
    }
}

/// Half the width of the cable, which lies between its middle and what is near it.
fn half_width(setup: &Setup) -> Length {
    let insulation = setup.cable.and_then(|cable| cable.insulation_mm);
    Length::from_mm(insulation.unwrap_or_default() / 2.0)
}

/// The rules on the length of a lead as it is run.
fn lead_rules(rules: Option<&RuleSet>, run: LeadRun) -> impl Iterator<Item = (&RuleSet, &Rule)> {
    let of_run = match run {
        LeadRun::MetalConduit => Some(Limits::LeadInMetal),
        LeadRun::PlasticConduit => Some(Limits::LeadInPlastic),
        LeadRun::FreeAir => None,
    };
    [Some(Limits::Lead), of_run]
        .into_iter()
        .flatten()
        .filter_map(move |limits| {
            let set = rules?;
            Some((set, set.rule(limits)?))
        })
}

/// The rule on the distance of a lead from earthed parts as it is run. A supply whose output frequency
/// is not known is held to the greater distance where it is electronic; iron runs at that of the mains.
fn distance_rule<'r>(
    rules: Option<&'r RuleSet>,
    run: LeadRun,
    rating: &Rating,
) -> Option<(&'r RuleSet, &'r Rule)> {
    let set = rules?;
    let limits = match run {
        LeadRun::MetalConduit => return None,
        LeadRun::FreeAir => Limits::ConductorsApart,
        LeadRun::PlasticConduit => {
            let above = match rating.output_hertz {
                Some(hertz) => hertz > LESSER_DISTANCE_TO,
                None => rating.kind == SupplyKind::Electronic,
            };
            if above {
                Limits::PlasticFromEarthedAbove100Hz
            } else {
                Limits::PlasticFromEarthed
            }
        }
    };
    Some((set, set.rule(limits)?))
}

/// What is to be said once of all circuits.
pub(super) fn all(
    setup: &Setup,
    leads: &[Leads],
    circuits: &[Strung],
    rules: Option<&RuleSet>,
    findings: &mut Vec<Finding>,
) {
    let word = rules.map_or_else(EarthWord::default, |rules| rules.earth_word);
    let run = setup.wiring.run;
    let not_given = |leads: &&Leads| {
        [What::LeadA, What::LeadB]
            .into_iter()
            .filter_map(|what| leads.section(what))
            .any(|section| section.length.is_none())
    };
    let without = leads.iter().filter(not_given).count();
    if without > 0 {
        let limits: Vec<String> = lead_rules(rules, run)
            .filter_map(|(_, rule)| finding::limit_words(rule))
            .collect();
        findings.push(finding::leads_not_given(without, circuits.len(), &limits));
    }
    let jumper_unknown = leads.iter().any(|leads| {
        leads.sections.iter().any(|section| {
            matches!(section.what, What::Jumper(_)) && section.from == LengthFrom::NotGiven
        })
    });
    if jumper_unknown {
        findings.push(finding::jumpers_not_given());
    }
    let drawn = |leads: &Leads| {
        let mut sections = leads.sections.iter();
        sections.any(|section| section.from == LengthFrom::Drawing)
    };
    if setup
        .drawn
        .is_some_and(|drawn| drawn.slack == 0.0 && drawn.ends_mm == 0.0)
        && leads.iter().any(drawn)
    {
        findings.push(finding::no_slack());
    }
    if run == LeadRun::FreeAir && rules.is_some_and(only_in_conduit) {
        findings.push(finding::free_air_not_limited());
    }
    if run != LeadRun::MetalConduit {
        let mut wanted: Vec<(&RuleSet, &Rule)> = circuits
            .iter()
            .filter_map(|circuit| distance_rule(rules, run, circuit.rating))
            .filter(|(_, rule)| rule.value.is_some())
            .collect();
        wanted.sort_by(|(_, one), (_, other)| {
            other
                .value
                .partial_cmp(&one.value)
                .unwrap_or(core::cmp::Ordering::Equal)
        });
        if let Some((set, rule)) = wanted.first() {
            let limit = rule.value.unwrap_or_default();
            let source = set.source(rule);
            if setup.from_earthed.is_none() {
                findings.push(finding::distance_not_given(limit, word, source));
            } else if run == LeadRun::PlasticConduit {
                findings.push(finding::from_conduit_wall(limit, word, source));
            }
        }
    }
    if setup.pf_per_m.is_some() {
        let mut silent: Vec<&str> = circuits
            .iter()
            .filter(|circuit| circuit.rating.output_hertz.is_none())
            .map(|circuit| circuit.rating.name.as_str())
            .collect();
        silent.sort_unstable();
        silent.dedup();
        findings.extend(silent.into_iter().map(finding::frequency_unknown));
        let iron = circuits.iter().zip(leads).any(|(circuit, leads)| {
            circuit.rating.kind == SupplyKind::Iron && leads.share.is_some()
        });
        if iron {
            findings.push(finding::harmonics());
        }
    }
}

/// Whether a set limits leads in conduit and no other.
fn only_in_conduit(set: &RuleSet) -> bool {
    let has = |limits| set.rule(limits).is_some();
    !has(Limits::Lead) && (has(Limits::LeadInMetal) || has(Limits::LeadInPlastic))
}
