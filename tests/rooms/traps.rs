//! What is easily got wrong in the codes: each a test, with the clause it is about.
//!
//! Source: NFPA 70 (NEC) 2017 and 2020, Articles 90, 100, 220, 410 and 600, read in unofficial
//! transcriptions; IEC 61050 clause 8.1.

use insta::assert_snapshot;
use tubewright::book::{OutputEarthing, SupplyEntry, SupplyKind};
use tubewright::job::{Feed, LeadRun, Wiring};
use tubewright::rules::{Grade, Limits, Standing, iec_en, nec, shop};
use tubewright::workup;

use super::feed::fed;
use super::rules::{entry, stops};
use super::wiring;

/// Trap 1: an isolated output is at its full volts to ground, for the limit of 600.23(C) as for the
/// exemption of 600.23(B) (Article 100).
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

/// Trap 2: 15 000 V pass with a grounded mid-point, 7 501 V fail with a grounded end (600.23(C)).
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

/// Trap 3: the exemption of 600.23(B) names transformers.
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

/// Trap 4: 600.23(B) exempts up to 7 500 V, Canada up to 6 000 V (rule 34-300, reported), and both call
/// themselves the electrical code.
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

/// The sentences of the first circuit that stop it, of a job of one bar of half a metre.
fn stops_leads(supply: SupplyEntry, wiring: Wiring) -> String {
    let work = workup(&wiring::bars("500 mm", wiring), &wiring::shop(supply));
    let found = &work.circuits[0].leads.findings;
    let stops = found.iter().filter(|found| found.grade == Grade::Stop);
    stops
        .map(|found| format!("{} [{}]", found.says, found.source.clause))
        .collect::<Vec<_>>()
        .join("\n")
        .replace('\u{202f}', "_")
}

/// Trap 5: plastic conduit is 38 mm from grounded parts at 100 Hz itself, 1-3/4 in (44.45 mm, or 45 mm)
/// above, and so for every electronic supply (600.32(A)(4)).
#[test]
fn plastic_conduit_keeps_the_greater_distance_above_100_hertz() {
    use SupplyKind::{Electronic, Iron};
    let at = |distance: &str, kind, output_hertz| {
        let supply = SupplyEntry {
            kind: Some(kind),
            rated_ma: Some(30.0),
            rated_load_volts: Some(1_500.0),
            output_hertz,
            ..wiring::supply(OutputEarthing::MidPoint)
        };
        let wiring = Wiring {
            run: LeadRun::PlasticConduit,
            from_earthed: distance.to_owned(),
            ..wiring::typed()
        };
        stops_leads(supply, wiring)
    };
    assert_eq!(at("38 mm", Iron, Some(100.0)), "");
    assert_snapshot!(at("37.9 mm", Iron, Some(100.0)), @"The conduit of the leads can be at most 37.9 mm from grounded parts, by the distance typed less half the cable; the limit is at least 38 mm. [600.32(A)(4), 1-1/2 in or 38 mm]");
    assert_snapshot!(at("44.4 mm", Iron, Some(100.1)), @"The conduit of the leads can be at most 44.4 mm from grounded parts, by the distance typed less half the cable; the limit is at least 44.45 mm. [600.32(A)(4), 1-3/4 in or 45 mm]");
    assert_eq!(at("1 3/4 in", Iron, Some(100.1)), "");
    assert!(at("44 mm", Electronic, Some(20_000.0)).contains("44.45"));
    assert!(at("44 mm", Electronic, None).contains("44.45"), "not known");
    assert_eq!(at("45 mm", Electronic, None), "");
}

/// Trap 6: 20 ft in metal and 50 ft in plastic conduit are for each lead to its first electrode, not for
/// both together; jumpers have no figure (600.32(J)(1) and (2)).
#[test]
fn each_lead_has_its_own_limit_and_jumpers_have_none() {
    let of = |run, a: &str, b: &str, jumper: &str| Wiring {
        run,
        from_earthed: "100 mm".to_owned(),
        lead_a: a.to_owned(),
        lead_b: b.to_owned(),
        jumper: jumper.to_owned(),
        ..wiring::typed()
    };
    let supply = || wiring::supply(OutputEarthing::MidPoint);
    assert_eq!(
        stops_leads(supply(), of(LeadRun::MetalConduit, "20 ft", "20 ft", "")),
        ""
    );
    assert_snapshot!(stops_leads(supply(), of(LeadRun::MetalConduit, "20 ft", "20 ft 1/16 in", "")), @"Lead B is 6_098 mm long in metal conduit; the limit is 6_096 mm from the supply to the first electrode. [600.32(J)(1), 20 ft or 6 m]");
    assert_eq!(
        stops_leads(supply(), of(LeadRun::PlasticConduit, "50 ft", "50 ft", "")),
        ""
    );
    assert!(
        stops_leads(supply(), of(LeadRun::PlasticConduit, "15.3 m", "1 m", ""))
            .contains("15_240 mm")
    );
    let wired = of(LeadRun::MetalConduit, "1 m", "1 m", "30 m");
    let work = workup(
        &wiring::bars("500 mm; 500 mm", wired),
        &wiring::shop(supply()),
    );
    let leads = &work.circuits[0].leads.findings;
    let long = leads.iter().filter(|found| found.unit == "mm");
    assert_eq!(long.count(), 0, "a jumper of 30 m");
}

/// Trap 7: either unit complies (90.9(D)), and the pairs are no exact conversions: 6.05 m is under 20 ft,
/// 38 mm under 1-1/2 in.
#[test]
fn of_two_units_the_laxer_figure_is_the_limit() {
    let supply = || wiring::supply(OutputEarthing::MidPoint);
    let lead = Wiring {
        lead_a: "6.05 m".to_owned(),
        ..wiring::typed()
    };
    assert_eq!(stops_leads(supply(), lead), "");
    let apart = |distance: &str| Wiring {
        run: LeadRun::FreeAir,
        from_earthed: distance.to_owned(),
        ..wiring::typed()
    };
    assert_eq!(stops_leads(supply(), apart("38 mm")), "");
    assert_snapshot!(stops_leads(supply(), apart("37 mm")), @"The leads can be at most 37 mm from other parts, by the distance typed less half the cable; the limit is at least 38 mm. [600.32(E), 1-1/2 in or 38 mm]");
}

/// What stops a feed of one supply of 240 VA at 120 V.
fn stops_feed(typed: &Feed) -> String {
    let work = fed(&[240.0], typed, Some(&nec()));
    let stops = work
        .findings
        .iter()
        .filter(|found| found.grade == Grade::Stop);
    stops
        .map(|found| format!("{} [{}]", found.says, found.source.clause))
        .collect::<Vec<_>>()
        .join("\n")
}

/// Trap 8: 30 A are for luminous tubes only; with other sign loads it is 20 A (600.5(B) of 2017, 600.5(C)
/// of 2020; that a mixed circuit is another one is derived).
#[test]
fn a_circuit_of_tubes_and_other_loads_is_not_one_of_tubes() {
    let of = |amps, other_loads| Feed {
        circuit_amps: Some(amps),
        other_loads,
        ..Feed::default()
    };
    assert_eq!(stops_feed(&of(30.0, false)), "");
    assert_snapshot!(stops_feed(&of(32.0, false)), @"A branch circuit of luminous tubes is rated for at most 30 A, but this one for 32 A. [600.5(B)(1) of 2017, 600.5(C)(1) of 2020]");
    assert_eq!(stops_feed(&of(20.0, true)), "");
    assert_snapshot!(stops_feed(&of(30.0, true)), @"A branch circuit that other sign loads hang on too is rated for at most 20 A, but this one for 30 A. [600.5(B)(2) of 2017, 600.5(C)(2) of 2020]");
    // A required outlet is on a circuit of 20 A at least (600.5(A)).
    let outlet = |amps| Feed {
        required_outlet: true,
        ..of(amps, false)
    };
    assert_eq!(stops_feed(&outlet(20.0)), "");
    assert_snapshot!(stops_feed(&outlet(15.0)), @"The branch circuit of a required outlet is rated for at least 20 A, but this one for 15 A. [600.5(A)]");
}

/// Trap 9: 1200 VA are a floor of the required outlet: a sign that draws less is counted with it, one
/// that draws more with its own, then 125 % (220.14(F), 600.5, 210.20(A)).
#[test]
fn a_required_outlet_has_a_floor_and_no_cap() {
    let counted = |plate, required_outlet| {
        let typed = Feed {
            required_outlet,
            ..Feed::default()
        };
        let work = fed(&[plate], &typed, Some(&nec()));
        (work.counted_amps.expect("known") * 120.0, work.raised_to_va)
    };
    assert_eq!(
        counted(600.0, false),
        (750.0, None),
        "only where it is required"
    );
    assert_eq!(counted(600.0, true), (1_500.0, Some(1_200.0)));
    assert_eq!(counted(1_200.0, true), (1_500.0, None));
    assert_eq!(counted(1_440.0, true), (1_800.0, None));
}

/// Trap 10: no figure of EN 50107 on trip current, volts to earth or length of leads was confirmed.
#[test]
fn what_was_not_confirmed_is_blank_and_never_a_default() {
    for (limits, clause) in [
        (Limits::VoltsToEarth, "EN 50107-1"),
        (Limits::TripCurrent, "EN 50107-2"),
        (Limits::Lead, "EN 50107-1"),
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

/// Trap 11: 2500 VA are no-load volts times rated current (IEC 61050 clause 8.1).
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

/// Trap 12: the 300 mA of signs are the rating (600.23(D)); those of Article 410, which is not in the set,
/// are the short-circuit current.
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
