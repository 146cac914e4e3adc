//! The shipped rule sets where a figure sits right at its limit or a word changes the outcome.
//!
//! Source of every limit: NFPA 70 (NEC) 2017 and 2020, Articles 100 and 600, read in unofficial
//! transcriptions; IEC 61050 clauses 1.1 and 8.1. The clauses stand beside each test.

use insta::assert_snapshot;
use tubewright::book::{OutputEarthing, SupplyEntry, SupplyKind};
use tubewright::rules::{EarthWord, Finding, Grade, Limits, RuleSet, Standing, iec_en, nec, shop};
use tubewright::supply::Rating;

/// An iron supply with earth-fault protection and open-circuit protection.
fn entry(no_load_volts: f64, ma: f64, earthing: OutputEarthing) -> SupplyEntry {
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

fn against(entry: &SupplyEntry, set: &RuleSet) -> Vec<Finding> {
    Rating::read(entry)
        .expect("the rating is complete")
        .against_rules(set)
}

/// The stops, one a line, with the clause.
fn stops(entry: &SupplyEntry, set: &RuleSet) -> String {
    let stops: Vec<String> = against(entry, set)
        .into_iter()
        .filter(|finding| finding.grade == Grade::Stop)
        .map(|finding| format!("{} [{}]", finding.says, finding.source.clause))
        .collect();
    stops.join("\n").replace('\u{202f}', "_")
}

#[test]
fn an_isolated_output_is_held_to_its_full_volts() {
    // Article 100: of an ungrounded circuit, voltage to ground is the greatest voltage to any other
    // conductor. 600.23(C): 7500 V to ground. 600.23(B): the exemption from protection, isolated
    // transformers of at most 7500 V.
    let isolated = |volts, earth_fault_protection| SupplyEntry {
        earth_fault_protection,
        ..entry(volts, 30.0, OutputEarthing::Isolated)
    };
    assert_eq!(stops(&isolated(7_500.0, true), &nec()), "");
    assert_eq!(stops(&isolated(7_500.0, false), &nec()), "");
    assert_snapshot!(stops(&isolated(7_501.0, true), &nec()), @"Volts to ground reach 7_501 V on an output that is isolated; the limit is 7_500 V. [600.23(C), Article 100]");
    assert_snapshot!(stops(&isolated(7_501.0, false), &nec()), @r"
    Volts to ground reach 7_501 V on an output that is isolated; the limit is 7_500 V. [600.23(C), Article 100]
    Ground-fault protection is required and this supply has none; isolated transformers are exempt up to 7_500 V only. [600.23(B)]
    ");
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
fn a_mid_point_halves_the_volts_to_ground_and_an_earthed_end_does_not() {
    // 600.23(C).
    use OutputEarthing::{MidPoint, MidPointReturn, OneEnd};
    for (volts, earthing) in [
        (15_000.0, MidPoint),
        (15_000.0, MidPointReturn),
        (7_500.0, OneEnd),
    ] {
        assert_eq!(
            stops(&entry(volts, 30.0, earthing), &nec()),
            "",
            "{volts} {earthing:?}"
        );
    }
    assert_snapshot!(stops(&entry(15_001.0, 30.0, MidPoint), &nec()), @r"
    No-load volts 15_001 V are above 15_000 V. [600.23(C)]
    Volts to ground reach 7_501 V on an output that is mid-point grounded; the limit is 7_500 V. [600.23(C), Article 100]
    ");
    assert_snapshot!(stops(&entry(7_501.0, 30.0, OneEnd), &nec()), @"Volts to ground reach 7_501 V on an output that is one end grounded; the limit is 7_500 V. [600.23(C), Article 100]");
}

#[test]
fn an_electronic_supply_is_never_exempt_from_protection() {
    // 600.23(B) exempts transformers; an isolated electronic supply of 6 kV still needs it.
    let electronic = |earth_fault_protection| SupplyEntry {
        kind: Some(SupplyKind::Electronic),
        rated_ma: Some(30.0),
        rated_load_volts: Some(4_500.0),
        earth_fault_protection,
        ..entry(6_000.0, 30.0, OutputEarthing::Isolated)
    };
    assert_eq!(stops(&electronic(true), &nec()), "");
    assert_snapshot!(stops(&electronic(false), &nec()), @"Ground-fault protection is required and this supply has none; the exemption names transformers, not electronic supplies. [600.23(B)]");
    // The same figures in iron are exempt.
    let iron = SupplyEntry {
        earth_fault_protection: false,
        ..entry(6_000.0, 30.0, OutputEarthing::Isolated)
    };
    assert_eq!(stops(&iron, &nec()), "");
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
fn the_american_set_says_that_canada_differs() {
    let set = nec();
    assert_eq!(set.jurisdiction, "United States");
    assert!(
        set.note.contains("Canada's code differs (6000 V"),
        "{}",
        set.note
    );
    assert_eq!(set.earth_word.word(), "ground");
}

#[test]
fn volt_amperes_are_no_load_volts_times_rated_current() {
    // IEC 61050 clause 8.1: 2500 VA a transformer. The NEC has no such limit.
    let va = |ma| entry(10_000.0, ma, OutputEarthing::MidPoint);
    assert_eq!(stops(&va(250.0), &iec_en()), "");
    assert_snapshot!(stops(&va(251.0), &iec_en()), @"No-load volts x rated current is 2510 VA, above 2_500 VA. [IEC 61050 clause 8.1]");
    assert_eq!(stops(&va(251.0), &nec()), "");
    // It is the rated current that counts where the plate gives both.
    let rated = SupplyEntry {
        rated_ma: Some(250.0),
        ..va(300.0)
    };
    assert_eq!(stops(&rated, &iec_en()), "");
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
fn the_rated_current_of_the_american_set() {
    // 600.23(D): 300 mA is the rating, not the short-circuit current.
    let at = |rated_ma, short_ma| SupplyEntry {
        rated_ma: Some(rated_ma),
        ..entry(2_000.0, short_ma, OutputEarthing::MidPoint)
    };
    assert_eq!(stops(&at(300.0, 400.0), &nec()), "");
    assert_snapshot!(stops(&at(301.0, 400.0), &nec()), @"The rated current 301 mA is above 300 mA. [600.23(D)]");
}

#[test]
fn what_was_not_confirmed_is_blank_and_never_a_default() {
    for (limits, clause) in [
        (Limits::VoltsToEarth, "EN 50107-1"),
        (Limits::TripCurrent, "EN 50107-2"),
    ] {
        let set = iec_en();
        let rule = set.rule(limits).expect("the rule is there to be filled in");
        assert_eq!((rule.value, rule.standing), (None, Standing::ToBeFilledIn));
        assert_eq!(rule.clause, clause);
    }
    for set in [nec(), iec_en(), shop()] {
        for rule in &set.rules {
            let blank = rule.limits.needs_value() && rule.value.is_none();
            let open = matches!(
                rule.standing,
                Standing::ToBeFilledIn | Standing::ShopSetting
            );
            assert!(
                !blank || open,
                "{}: {:?} is blank without saying so",
                set.name,
                rule.limits
            );
            assert!(
                rule.value.is_none() || !rule.clause.is_empty(),
                "{}: {:?} has a figure from nowhere",
                set.name,
                rule.limits
            );
        }
    }
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
