//! The primary side: amperes, branch circuits, volts of the feed and a year, by hand.

use insta::assert_snapshot;
use proptest::prelude::*;
use rust_decimal::Decimal;
use serde::Deserialize;
use tubewright::book::{OutputEarthing, SupplyEntry, SupplyKind};
use tubewright::feed::{CONDUCTORS, Drawing, FeedWork, SupplyLoad, Table, conductor, feed, warmer};
use tubewright::job::{Feed, Site};
use tubewright::rules::{RuleSet, nec};
use tubewright::supply::Rating;

/// Source: `tests/reference/electrical/PROVENANCE.md`.
const ELECTRICAL: &str = include_str!("../reference/electrical/electrical_units.json");

fn rating(name: &str, input_va: Option<f64>, input_volts: Option<f64>) -> Rating {
    Rating::read(&SupplyEntry {
        name: name.to_owned(),
        kind: Some(SupplyKind::Iron),
        earthing: Some(OutputEarthing::MidPoint),
        no_load_volts: Some(9_000.0),
        short_circuit_ma: Some(30.0),
        input_va,
        input_volts,
        ..SupplyEntry::default()
    })
    .expect("a whole plate")
}

/// Supplies at 120 V mains that draw these volt-amperes by their plates.
pub(super) fn fed(plates: &[f64], typed: &Feed, rules: Option<&RuleSet>) -> FeedWork {
    let ratings: Vec<Rating> = plates
        .iter()
        .map(|&va| rating(&format!("{va} VA"), Some(va), Some(120.0)))
        .collect();
    let drawing: Vec<Drawing> = ratings
        .iter()
        .map(|rating| Drawing {
            rating,
            worked_va: None,
            watts: Some(50.0),
        })
        .collect();
    feed(typed, &Site::default(), rules, &drawing)
}

/// Every sentence, one a line.
pub(super) fn said(work: &FeedWork) -> String {
    work.findings
        .iter()
        .map(|finding| format!("{}: {}", finding.grade.word(), finding.says))
        .collect::<Vec<_>>()
        .join("\n")
        .replace('\u{202f}', "_")
}

fn circuit(amps: f64) -> Feed {
    Feed {
        circuit_amps: Some(amps),
        ..Feed::default()
    }
}

#[test]
fn the_conductors_are_those_of_the_tables() {
    // IEC 60228 at 20 °C and NEC Chapter 9 Table 8 at 75 °C, as quoted in the room.
    for (name, table, ohm_per_km) in [
        ("1.5 mm²", Table::Iec60228, 12.1),
        ("2.5 mm² flexible", Table::Iec60228, 7.98),
        ("6 mm²", Table::Iec60228, 3.08),
        ("14 AWG solid", Table::NecTable8, 10.1),
        ("12 AWG stranded", Table::NecTable8, 6.50),
        ("10 AWG stranded", Table::NecTable8, 4.070),
    ] {
        let found = conductor(name).unwrap_or_else(|| panic!("{name}"));
        assert_eq!(
            (found.table, found.ohm_per_km),
            (table, ohm_per_km),
            "{name}"
        );
    }
    let mut names: Vec<_> = CONDUCTORS.iter().map(|conductor| conductor.name).collect();
    names.sort_unstable();
    names.dedup();
    assert_eq!(names.len(), CONDUCTORS.len(), "each once");
    assert_eq!(conductor("3 mm²"), None);
    // 20 °C to 70 °C by IEC 60287: 1 + 0.00393 x 50.
    assert!((warmer(70.0) - 1.1965).abs() < 1e-12);
}

#[derive(Deserialize)]
struct Reference {
    #[serde(rename = "awg_copper_20C_rho_1.7241e-8")]
    wire: Vec<Wire>,
}

#[derive(Deserialize)]
struct Wire {
    awg: u32,
    ohm_per_km: f64,
}

/// The table's 75 °C figures brought to 20 °C by its own note 2 (0.00323 a kelvin from 75 °C) are those
/// of round copper of that gauge, within the table's rounding.
#[test]
fn solid_conductors_are_round_copper_of_their_gauge() {
    let reference: Reference = serde_json::from_str(ELECTRICAL).expect("the reference is whole");
    assert_eq!(reference.wire.len(), 5, "no gauge is missing");
    for wire in reference.wire {
        let found = conductor(&format!("{} AWG solid", wire.awg)).expect("in the table");
        let cold = found.ohm_per_km * (1.0 - 0.00323 * 55.0);
        let off = (cold / wire.ohm_per_km - 1.0).abs();
        assert!(
            off < 0.005,
            "{} AWG: {cold} at 20 °C, not {}",
            wire.awg,
            wire.ohm_per_km
        );
    }
}

#[test]
fn the_larger_of_plate_and_worked_volt_amperes_counts() {
    let of = |plate, worked_va, input_volts, mains_volts| {
        let rating = rating("S", plate, input_volts);
        let drawing = Drawing {
            rating: &rating,
            worked_va,
            watts: None,
        };
        let site = Site {
            mains_volts,
            ..Site::default()
        };
        feed(&Feed::default(), &site, Some(&nec()), &[drawing, drawing])
    };
    let type_of = |work: &FeedWork| -> SupplyLoad { work.supplies[0].clone() };
    // 240 VA at 120 V are 2 A.
    let plate = of(Some(240.0), Some(200.0), Some(120.0), None);
    let load = type_of(&plate);
    assert_eq!(
        (load.count, load.va, load.amps),
        (2, Some(240.0), Some(2.0))
    );
    assert!(load.from_plate);
    assert_eq!((plate.total_va, plate.total_amps), (Some(480.0), Some(4.0)));
    assert_eq!(plate.counted_amps, Some(5.0), "125 %");
    let worked = of(Some(240.0), Some(300.0), Some(120.0), None);
    assert_eq!(type_of(&worked).va, Some(300.0));
    assert!(!type_of(&worked).from_plate);
    // Volts: the plate's, else the site's.
    assert_eq!(
        type_of(&of(Some(240.0), None, None, Some(240.0))).amps,
        Some(1.0)
    );
    let unknown = of(Some(240.0), None, None, None);
    assert_eq!((unknown.total_va, unknown.total_amps), (Some(480.0), None));
    assert_snapshot!(said(&unknown), @r"
    note: The amperes of the feed were not worked out: neither the input volts of “S” nor the mains volts are given.
    note: The rating of the branch circuit is not given: whether it may be so large, and how many are needed, was not checked. Give it under Leads and feed, on the Circuits place.
    ");
    let silent = of(None, None, Some(230.0), Some(230.0));
    assert_eq!(silent.counted_amps, None, "no figure is made up");
    assert_snapshot!(said(&silent), @r"
    note: The amperes of the feed were not worked out: the volt-amperes of “S” are not in the shop book.
    note: The rating of the branch circuit is not given: whether it may be so large, and how many are needed, was not checked. Give it under Leads and feed, on the Circuits place.
    ");
    let none = feed(&Feed::default(), &Site::default(), None, &[]);
    assert_eq!(said(&none), "", "nothing to feed");
}

#[test]
fn a_load_is_counted_as_it_is_where_no_rule_says_more() {
    let work = fed(&[240.0], &circuit(16.0), None);
    assert_eq!(
        (work.counted_percent, work.counted_amps),
        (100.0, Some(2.0))
    );
    assert_snapshot!(said(&work), @"note: No rule in use says what a continuous load is counted as: the feed's load is counted as 100 % of itself.");
}

#[test]
fn branch_circuits_by_hand() {
    // 960 VA at 120 V are 8 A, counted as 10 A: two on a circuit of 20 A, to the last ampere.
    let two = fed(&[960.0; 2], &circuit(20.0), Some(&nec()));
    assert_eq!(two.supplies[0].per_circuit, Some(2));
    let branches = two.branches.expect("known");
    assert_eq!((branches.count, branches.least), (1, true));
    assert!(
        (branches.fullest_amps - 16.0).abs() < 1e-9,
        "as they are, not as counted"
    );
    let three = fed(&[960.0; 3], &circuit(20.0), Some(&nec()))
        .branches
        .expect("known");
    assert_eq!((three.count, three.least), (2, true));
    // Counted as 10 A each on 18 A: one a circuit, though the sum would fill less than three.
    let alone = fed(&[960.0; 4], &circuit(18.0), Some(&nec()))
        .branches
        .expect("known");
    assert_eq!((alone.count, alone.least), (4, true), "no two go together");
    // 6, 5, 5, 4, 4, 4 A on 14 A: the largest first gives 6 + 5, 5 + 4 + 4, 4; 28 A would fill two, and
    // 6 + 4 + 4 with 5 + 5 + 4 does.
    let loads = [6.0, 5.0, 5.0, 4.0, 4.0, 4.0].map(|amps| amps * 120.0);
    let packed = fed(&loads, &circuit(14.0), None).branches.expect("known");
    assert_eq!(
        (packed.count, packed.least),
        (3, false),
        "not said to be least"
    );
    // One that is too large alone.
    let large = fed(&[960.0, 2_040.0], &circuit(20.0), Some(&nec()));
    assert_eq!(large.branches, None);
    assert_snapshot!(said(&large), @"stop: One “2040 VA” alone is counted with 21.2 A, more than the 20 A of the branch circuit.");
}

proptest! {
    /// Against every way to pack a few loads.
    #[test]
    fn a_number_of_circuits_said_to_be_least_is(
        loads in prop::collection::vec(1..20_u32, 1..7),
    ) {
        let room = 20.0;
        let amps: Vec<f64> = loads.iter().map(|&amps| f64::from(amps)).collect();
        let plates: Vec<f64> = amps.iter().map(|amps| amps * 120.0).collect();
        let found = fed(&plates, &circuit(room), None).branches.expect("each fits");
        let best = fewest(&amps, &mut Vec::new(), room);
        prop_assert!(found.count >= best);
        prop_assert!(!found.least || found.count == best, "{} of {}", best, found.count);
        prop_assert!(found.fullest_amps <= room + 1e-6);
    }
}

/// The fewest circuits, by trying each load on each.
fn fewest(loads: &[f64], circuits: &mut Vec<f64>, room: f64) -> usize {
    let Some((&load, rest)) = loads.split_first() else {
        return circuits.len();
    };
    let mut best = usize::MAX;
    for at in 0..circuits.len() {
        if circuits[at] + load <= room {
            circuits[at] += load;
            best = best.min(fewest(rest, circuits, room));
            circuits[at] -= load;
        }
    }
    circuits.push(load);
    best = best.min(fewest(rest, circuits, room));
    circuits.pop();
    best
}

#[test]
fn volts_of_the_feed_by_hand() {
    let with = |conductor: &str, length: &str| {
        let typed = Feed {
            conductor: conductor.to_owned(),
            length: length.to_owned(),
            ..Feed::default()
        };
        fed(&[960.0], &typed, Some(&nec()))
    };
    // 2 x 20 m x 7.41 ohm/km x 8 A = 2.3712 V, 1.976 % of 120 V.
    let drop = with("2.5 mm²", "20 m").drop.expect("known");
    assert!((drop.volts - 2.3712).abs() < 1e-9, "{drop:?}");
    assert!((drop.percent.expect("known") - 1.976).abs() < 1e-9);
    // 2 x 30.48 m x 6.34 ohm/km x 8 A = 3.0919 V at 75 °C.
    let drop = with("12 AWG solid", "100 ft").drop.expect("known");
    assert!((drop.volts - 3.091_891_2).abs() < 1e-6, "{drop:?}");
    assert_snapshot!(said(&with("2.5 mm²", "40 m")), @r"
    note: The rating of the branch circuit is not given: whether it may be so large, and how many are needed, was not checked. Give it under Leads and feed, on the Circuits place.
    look: The feed loses 4.7 V, 4.0 % of the mains volts, more than 3 %: a wider conductor or a shorter way.
    note: The volts of the feed are for a conductor at 20 °C; a warmer one loses more, at 70 °C 1.1965 times as much (copper, 0.00393 for each kelvin).
    ");
    assert_eq!(with("2.5 mm²", "").drop, None, "no length");
    assert_eq!(with("", "20 m").drop, None, "no conductor");
    assert_snapshot!(said(&with("3 mm²", "20 furlongs")), @r"
    note: The rating of the branch circuit is not given: whether it may be so large, and how many are needed, was not checked. Give it under Leads and feed, on the Circuits place.
    look: The length of the feed counts as not given: expected “+”, “x” or the end, but found “furlongs” at character 4 of “20 furlongs”; units are mm, cm, m, in or ft.
    look: There is no conductor “3 mm²” in the table of conductors: the volts of the feed were not worked out.
    ");
    // Two branch circuits of 8 A each have a feed each.
    let typed = Feed {
        conductor: "2.5 mm²".to_owned(),
        length: "20 m".to_owned(),
        ..circuit(10.0)
    };
    let drop = fed(&[960.0; 2], &typed, Some(&nec())).drop.expect("known");
    assert_eq!(drop.amps, 8.0);
}

#[test]
fn a_year_by_hand() {
    let typed = Feed {
        hours_per_year: Some(4_000.0),
        price_per_kwh: Some(Decimal::new(30, 2)),
        ..Feed::default()
    };
    // Three times 50 W for 4 000 h are 600 kWh, at 0.30 each 180.00.
    let work = fed(&[960.0; 3], &typed, Some(&nec()));
    assert_eq!((work.watts, work.kwh_per_year), (Some(150.0), Some(600.0)));
    assert_eq!(work.cost_per_year, Some(Decimal::from(180)));
    assert_snapshot!(said(&work), @r"
    note: The rating of the branch circuit is not given: whether it may be so large, and how many are needed, was not checked. Give it under Leads and feed, on the Circuits place.
    note: The year is worked out from the watts of the tubes, so it is at least what is said: what the supplies themselves lose comes on top. The feed is worked out from volt-amperes, which are more than watts.
    ");
    let never = Feed {
        hours_per_year: Some(9_000.0),
        ..typed
    };
    let work = fed(&[960.0], &never, Some(&nec()));
    assert_eq!((work.kwh_per_year, work.cost_per_year), (None, None));
    assert_snapshot!(said(&work), @r"
    note: The rating of the branch circuit is not given: whether it may be so large, and how many are needed, was not checked. Give it under Leads and feed, on the Circuits place.
    look: What is taken in a year was not worked out: hours lit in a year must be 0 to 8784 h (a leap year has no more), but is 9000.
    ");
}
