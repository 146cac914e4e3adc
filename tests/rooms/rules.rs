//! The shipped rule sets where a figure sits right at its limit or a word changes the outcome.
//!
//! Source of every limit: NFPA 70 (NEC) 2017 and 2020, Articles 100 and 600, read in unofficial
//! transcriptions; IEC 61050 clauses 1.1 and 8.1. The clauses stand beside each test.

use insta::assert_snapshot;
use tubewright::book::{OutputEarthing, SupplyEntry, SupplyKind};
use tubewright::rules::{EarthWord, Finding, Grade, Limits, RuleSet, iec_en, nec, shop};
use tubewright::supply::Rating;
use tubewright::{Book, Job, workup};

/// An iron supply with earth-fault protection and open-circuit protection.
pub(super) fn entry(no_load_volts: f64, ma: f64, earthing: OutputEarthing) -> SupplyEntry {
    SupplyEntry {
        name: "T".to_owned(),
        no_load_volts: Some(no_load_volts),
        short_circuit_ma: Some(ma),
        kind: Some(SupplyKind::Iron),
        earthing: Some(earthing),
        earth_fault_protection: true,
        open_circuit_protection: true,
        ..SupplyEntry::default()
    }
}

pub(super) fn against(entry: &SupplyEntry, set: &RuleSet) -> Vec<Finding> {
    Rating::read(entry)
        .expect("the rating is complete")
        .against_rules(set)
}

/// The stops, one a line, with the clause.
pub(super) fn stops(entry: &SupplyEntry, set: &RuleSet) -> String {
    let stops: Vec<String> = against(entry, set)
        .into_iter()
        .filter(|finding| finding.grade == Grade::Stop)
        .map(|finding| format!("{} [{}]", finding.says, finding.source.clause))
        .collect();
    stops.join("\n").replace('\u{202f}', "_")
}

#[test]
fn the_exemption_is_named_when_it_is_used() {
    let exempt = SupplyEntry {
        earth_fault_protection: false,
        ..entry(7_500.0, 30.0, OutputEarthing::Isolated)
    };
    let notes: Vec<Finding> = against(&exempt, &nec());
    assert_eq!(Finding::gravest(&notes), Some(Grade::Note));
    assert_snapshot!(notes[0].says.replace('\u{202f}', "_"), @"No ground-fault protection: exempt as an isolated transformer of at most 7_500 V.");
    assert_eq!(notes[0].source.clause, "600.23(B)");
}

#[test]
fn protection_is_required_of_an_earthed_output() {
    let bare = SupplyEntry {
        earth_fault_protection: false,
        ..entry(9_000.0, 30.0, OutputEarthing::MidPoint)
    };
    assert_snapshot!(stops(&bare, &nec()), @"Ground-fault protection is required and this supply has none. [600.23(B)]");
    // The IEC set has no confirmed figure on it: a look, not a stop, and never silence.
    let found = against(&bare, &iec_en());
    assert_eq!(Finding::gravest(&found), Some(Grade::Look));
    assert_snapshot!(found[0].says, @"No earth-fault protection. The rule set does not ask for it here; local code may, and nothing switches off when glass, cable or sleeve fails to earth.");
}

#[test]
fn the_scope_and_the_top_of_the_iec_set() {
    // IEC 61050 clause 1.1: above 1000 V and up to 10 000 V.
    let at = |volts| against(&entry(volts, 30.0, OutputEarthing::MidPoint), &iec_en());
    assert_eq!(at(1_001.0), []);
    assert_eq!(at(10_000.0), []);
    assert_eq!(Finding::gravest(&at(1_000.0)), Some(Grade::Look));
    assert_snapshot!(at(1_000.0)[0].says.replace('\u{202f}', "_"), @"The set is for no-load volts above 1_000 V; this supply has 1_000 V, so other rules hold for it.");
    assert_eq!(Finding::gravest(&at(10_001.0)), Some(Grade::Stop));
}

#[test]
fn a_figure_the_user_fills_in_is_checked() {
    let mut set = iec_en();
    for rule in &mut set.rules {
        if rule.limits == Limits::TripCurrent {
            rule.value = Some(25.0);
        }
    }
    let trip = |ma| SupplyEntry {
        trip_ma: Some(ma),
        ..entry(8_000.0, 30.0, OutputEarthing::MidPoint)
    };
    assert_eq!(stops(&trip(25.0), &set), "");
    assert_snapshot!(stops(&trip(26.0), &set), @"The trip current 26 mA is above 25 mA. [EN 50107-2]");
    // A plate that does not say is not taken to be inside the limit.
    let unknown = entry(8_000.0, 30.0, OutputEarthing::MidPoint);
    let found = against(&unknown, &set);
    assert_eq!(Finding::gravest(&found), Some(Grade::Look));
    assert_snapshot!(found[0].says, @"Not checked: the trip current is not in the shop book; the limit is 25 mA.");
    assert_eq!(against(&unknown, &iec_en()), [], "no figure, no limit");
}

#[test]
fn sentences_use_the_word_of_the_set() {
    let one_end = entry(9_000.0, 30.0, OutputEarthing::OneEnd);
    assert_snapshot!(stops(&one_end, &nec()), @"Volts to ground reach 9_000 V on an output that is one end grounded; the limit is 7_500 V. [600.23(C), Article 100]");
    let mut set = iec_en();
    for rule in &mut set.rules {
        if rule.limits == Limits::VoltsToEarth {
            rule.value = Some(5_000.0);
        }
    }
    assert_snapshot!(stops(&one_end, &set), @"Volts to earth reach 9_000 V on an output that is one end earthed; the limit is 5_000 V. [EN 50107-1]");
    for (limits, earth, ground) in [
        (Limits::VoltsToEarth, "volts to earth", "volts to ground"),
        (Limits::EarthFaultProtection, "earth-fault", "ground-fault"),
        (Limits::TripCurrent, "earth-fault", "ground-fault"),
    ] {
        let caption = limits.caption(EarthWord::Earth);
        assert!(caption.contains(earth), "{caption}");
        assert_eq!(
            limits.caption(EarthWord::Ground),
            caption.replace(earth, ground)
        );
    }
}

#[test]
fn an_empty_shop_set_stops_nothing() {
    assert_eq!(
        stops(&entry(20_000.0, 500.0, OutputEarthing::Isolated), &shop()),
        ""
    );
}

#[test]
fn a_set_kept_from_an_older_book_is_told_what_it_lacks() {
    // As books of version 1 and 2 had it: nothing of leads and feeds.
    let mut old = nec();
    old.rules.truncate(5);
    let lacks: Vec<Limits> = old.lacks().iter().map(|rule| rule.limits).collect();
    assert!(lacks.contains(&Limits::LeadInMetal) && lacks.contains(&Limits::ContinuousLoad));
    assert_eq!(lacks.len() + 5, nec().rules.len());
    let book = Book {
        rule_sets: vec![old.clone()],
        ..Book::default()
    };
    let job = Job {
        rules: old.name.clone(),
        ..Job::default()
    };
    let told = |book: &Book| {
        let found = workup(&job, book).findings;
        found
            .into_iter()
            .find(|found| found.says.contains("limits that this set has by now"))
    };
    assert_eq!(told(&book).map(|found| found.grade), Some(Grade::Look));
    // Added, nothing is missing, and what the shop changed stays as it is.
    let mut whole = book;
    whole.rule_sets[0].rules[0].value = Some(9_000.0);
    let missing = whole.rule_sets[0].lacks();
    whole.rule_sets[0].rules.extend(missing);
    assert_eq!(told(&whole), None);
    assert_eq!(whole.rule_sets[0].rules[0].value, Some(9_000.0));
    for shipped in [nec(), iec_en(), shop()] {
        assert_eq!(shipped.lacks(), []);
    }
    // A set of a name of its own is the shop's to fill.
    old.name = "Ours".to_owned();
    assert_eq!(old.lacks(), []);
}
