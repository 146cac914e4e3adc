//! Nameplates that are not whole or contradict themselves: one clear sentence for each trouble.

use insta::assert_snapshot;
use tubewright::book::{Dampness, OutputEarthing, SupplyEntry, SupplyKind};
use tubewright::job::Site;
use tubewright::rules::{EarthWord, Finding, Grade, Place};
use tubewright::supply::Rating;

fn iron() -> SupplyEntry {
    SupplyEntry {
        name: "T".to_owned(),
        kind: Some(SupplyKind::Iron),
        earthing: Some(OutputEarthing::MidPoint),
        no_load_volts: Some(9_000.0),
        short_circuit_ma: Some(30.0),
        ..SupplyEntry::default()
    }
}

fn electronic() -> SupplyEntry {
    SupplyEntry {
        name: "E".to_owned(),
        kind: Some(SupplyKind::Electronic),
        earthing: Some(OutputEarthing::MidPoint),
        no_load_volts: Some(8_000.0),
        rated_ma: Some(28.0),
        rated_load_volts: Some(6_000.0),
        ..SupplyEntry::default()
    }
}

/// The sentences of findings, one a line.
fn said(findings: &[Finding]) -> String {
    let says: Vec<&str> = findings
        .iter()
        .map(|finding| finding.says.as_str())
        .collect();
    says.join("\n").replace('\u{202f}', "_")
}

fn refused(entry: &SupplyEntry) -> String {
    let wrong = Rating::read(entry).expect_err("the nameplate is not usable");
    for finding in &wrong {
        assert_eq!(finding.grade, Grade::Stop, "{}", finding.says);
        assert_eq!(
            finding.place,
            Place::Supply(entry.name.clone()),
            "{}",
            finding.says
        );
    }
    said(&wrong)
}

#[test]
fn whole_nameplates_are_read() {
    let rating = Rating::read(&iron()).expect("whole");
    assert_eq!(
        (rating.rated.ma(), rating.rated_va),
        (30.0, 270.0),
        "9 kV x 30 mA"
    );
    let rating = Rating::read(&electronic()).expect("whole");
    assert_eq!(rating.short_circuit.ma(), 28.0, "taken to hold its current");
}

#[test]
fn missing_figures() {
    assert_snapshot!(refused(&SupplyEntry { no_load_volts: None, ..iron() }), @"No-load volts are missing: copy them from the nameplate.");
    assert_snapshot!(refused(&SupplyEntry { short_circuit_ma: None, ..iron() }), @"Short-circuit current is missing: copy it from the nameplate.");
    assert_snapshot!(refused(&SupplyEntry { rated_ma: None, ..electronic() }), @"Rated current is missing: an electronic supply is worked out from its rated current and the volts at it.");
    assert_snapshot!(refused(&SupplyEntry { rated_load_volts: None, ..electronic() }), @"Rated load volts are missing: an electronic supply is worked out from the volts at its rated current.");
    assert_snapshot!(refused(&SupplyEntry { earthing: None, ..iron() }), @"The earthing of the output is not given: mid-point, one end, isolated, or mid-point with return. Volts to earth depend on it.");
    assert_snapshot!(refused(&SupplyEntry { kind: None, ..iron() }), @"The kind of the supply is not given: iron transformer or electronic. How it holds its current depends on it.");
    assert_snapshot!(refused(&SupplyEntry::default()), @r"
    No-load volts are missing: copy them from the nameplate.
    The kind of the supply is not given: iron transformer or electronic. How it holds its current depends on it.
    The earthing of the output is not given: mid-point, one end, isolated, or mid-point with return. Volts to earth depend on it.
    ");
    assert_snapshot!(refused(&SupplyEntry { least_load_percent: Some(50.0), ..iron() }), @"The plate's loading window needs both its ends, least and greatest.");
}

#[test]
fn figures_that_contradict_each_other() {
    assert_snapshot!(refused(&SupplyEntry { rated_ma: Some(31.0), ..iron() }), @"The rated current, 31 mA, is above the short-circuit current, 30 mA.");
    assert_snapshot!(refused(&SupplyEntry { trip_ma: Some(31.0), ..iron() }), @"The trip current, 31 mA, is above the short-circuit current, 30 mA: it could never trip.");
    assert_snapshot!(refused(&SupplyEntry { rated_load_volts: Some(8_001.0), ..electronic() }), @"The rated load volts, 8001 V, are above the no-load volts, 8000 V.");
    assert_snapshot!(refused(&SupplyEntry { short_circuit_ma: Some(100.0), ..electronic() }), @"The short-circuit current, 100 mA, is more than 3 times the rated current, 28 mA: an electronic supply holds its current closer.");
    assert_snapshot!(
        refused(&SupplyEntry {
            least_load_percent: Some(80.0),
            most_load_percent: Some(50.0),
            ..iron()
        }),
        @"The loading window is upside down: least 80 %, greatest 50 %."
    );
}

#[test]
fn figures_that_no_nameplate_has() {
    for value in [0.0, -9_000.0, f64::NAN, f64::INFINITY, 30_001.0] {
        let sentence = refused(&SupplyEntry {
            no_load_volts: Some(value),
            ..iron()
        });
        assert_eq!(
            sentence,
            format!("No-load volts must be above 0 and at most 30000 V, but is {value}.")
        );
    }
    assert_snapshot!(refused(&SupplyEntry { short_circuit_ma: Some(-30.0), ..iron() }), @"Short-circuit current must be above 0 and at most 2000 mA, but is -30.");
    assert_snapshot!(refused(&SupplyEntry { input_volts: Some(f64::NAN), ..iron() }), @"Input volts must be above 0 and at most 1000 V, but is NaN.");
    assert_snapshot!(
        refused(&SupplyEntry { least_load_percent: Some(50.0), most_load_percent: Some(150.0), ..iron() }),
        @"Greatest load must be above 0 and at most 100 %, but is 150."
    );
}

#[test]
fn every_trouble_is_said_at_once() {
    let entry = SupplyEntry {
        no_load_volts: None,
        trip_ma: Some(-1.0),
        rated_ma: Some(40.0),
        ..iron()
    };
    assert_snapshot!(refused(&entry), @r"
    Trip current must be above 0 and at most 2000 mA, but is -1.
    No-load volts are missing: copy them from the nameplate.
    The rated current, 40 mA, is above the short-circuit current, 30 mA.
    ");
}

#[test]
fn against_the_site() {
    let site = |mains_volts, place| Site {
        mains_volts,
        place,
        cold: false,
    };
    let at = |entry: &SupplyEntry, site: &Site| {
        said(&Rating::read(entry).expect("whole").against_site(site))
    };
    let made_for_230 = SupplyEntry {
        input_volts: Some(230.0),
        ..iron()
    };
    // 10 % either way: 207 to 253 V.
    for mains in [None, Some(207.0), Some(230.0), Some(253.0)] {
        assert_eq!(
            at(&made_for_230, &site(mains, Dampness::Dry)),
            "",
            "{mains:?}"
        );
    }
    assert_snapshot!(at(&made_for_230, &site(Some(120.0), Dampness::Dry)), @"Made for 230 V mains; the site has 120 V.");
    assert_snapshot!(at(&made_for_230, &site(Some(f64::NAN), Dampness::Dry)), @"Made for 230 V mains; the site has NaN V.");
    assert_snapshot!(at(&made_for_230, &site(None, Dampness::Wet)), @"Made for a dry place; the sign's is wet.");
    let wet = SupplyEntry {
        place: Dampness::Wet,
        ..iron()
    };
    assert_eq!(at(&wet, &site(None, Dampness::Wet)), "");
    assert_snapshot!(at(&wet, &site(Some(120.0), Dampness::Wet)), @"The supply's input volts are not in the shop book, so it was not checked that it suits the site's 120 V.");
}

#[test]
fn a_rating_in_words() {
    let words = |earthing, word| {
        let entry = SupplyEntry {
            earthing: Some(earthing),
            ..iron()
        };
        Rating::read(&entry).expect("whole").words(word)
    };
    assert_snapshot!(words(OutputEarthing::MidPointReturn, EarthWord::Earth).replace('\u{202f}', "_"), @"9_000 V, 30 mA, mid-point earthed with return");
    assert_snapshot!(words(OutputEarthing::OneEnd, EarthWord::Ground).replace('\u{202f}', "_"), @"9_000 V, 30 mA, one end grounded");
}
