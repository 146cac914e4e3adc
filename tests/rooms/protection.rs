//! The mid-point's current for a fault to earth against ngspice and an exact solution
//! (`tests/reference/midpoint_fault`); the stretch that is unseen; what is said of each output.

use insta::assert_snapshot;
use proptest::prelude::*;
use tubewright::Book;
use tubewright::book::{Loading, OutputEarthing, SupplyEntry, SupplyKind, TubeEntry};
use tubewright::circuit::{
    CONTINUOUS_TO, Curve, Load, MidPoint, Operating, Strings, assess, difference, iron, operate,
};
use tubewright::job::{Job, Pieces, Row, StrokesRow};
use tubewright::measure::{Milliamps, Volts};
use tubewright::rules::Grade;
use tubewright::supply::Rating;
use tubewright::workup::{CircuitWork, workup};

/// Source: `tests/reference/midpoint_fault/PROVENANCE.md`.
const FAULTS: &str = include_str!("../reference/midpoint_fault/midpoint_fault.csv");

const NO_LOAD: f64 = 9_000.0;
const SHORT_MA: f64 = 30.0;

fn iron_entry(no_load: f64, earthing: OutputEarthing, trip_ma: Option<f64>) -> SupplyEntry {
    SupplyEntry {
        name: "T".to_owned(),
        kind: Some(SupplyKind::Iron),
        earthing: Some(earthing),
        no_load_volts: Some(no_load),
        short_circuit_ma: Some(SHORT_MA),
        earth_fault_protection: trip_ma.is_some(),
        trip_ma,
        ..SupplyEntry::default()
    }
}

fn rating(entry: &SupplyEntry) -> Rating {
    Rating::read(entry).expect("a whole plate")
}

fn mid_point(entry: &SupplyEntry) -> MidPoint {
    MidPoint::of(&rating(entry), 1.0).expect("an earthed mid-point")
}

fn reference() -> MidPoint {
    mid_point(&iron_entry(NO_LOAD, OutputEarthing::MidPoint, Some(15.0)))
}

const fn string(volts: f64) -> Strings {
    Strings {
        first: Volts::from_volts(volts),
        second: None,
    }
}

fn halves(first: f64, second: f64) -> Strings {
    Strings {
        first: Volts::from_volts(first),
        second: Some(Volts::from_volts(second)),
    }
}

const fn ma(value: f64) -> Milliamps {
    Milliamps::from_ma(value)
}

fn unseen_share(strings: Strings, mid_point: &MidPoint, trip: f64) -> f64 {
    strings
        .unseen(mid_point, ma(trip))
        .map_or(0.0, |(from, to)| to - from)
}

#[test]
fn the_mid_point_against_the_simulator_and_the_exact_solution() {
    let mut compared = 0;
    for line in FAULTS.lines().filter(|line| line.starts_with("0.")) {
        let cells: Vec<f64> = line
            .split(',')
            .map(|cell| cell.parse().expect("a number"))
            .collect();
        let [load, x, simulated, a, b, exact, exact_a, exact_b] = cells[..] else {
            panic!("eight columns: {line}");
        };
        let ours = string(load * NO_LOAD).at(&reference(), x).ma();
        // The exact columns are good to about 1e-9 of the short-circuit current.
        assert!(
            (ours - exact).abs() <= 1e-8 * exact + 1e-9 * SHORT_MA,
            "{load}, {x}: {ours}, exact {exact}"
        );
        assert!(
            (ours - simulated).abs() <= 0.005 * simulated + 1e-9,
            "{load}, {x}: {ours}, ngspice {simulated}"
        );
        for (share, exact, simulated) in [(x, exact_a, a), (1.0 - x, exact_b, b)] {
            let half = iron(2.0 * share * load).rms * SHORT_MA;
            assert!(
                (half - exact).abs() <= 1e-8 * SHORT_MA,
                "half {load}, {x}: {half}, exact {exact}"
            );
            // What the tail of the simulator's tube carries where the exact one carries nothing.
            assert!(
                (half - simulated).abs() <= 0.005 * half + 0.04,
                "half {load}, {x}: {half}, ngspice {simulated}"
            );
        }
        compared += 1;
    }
    assert_eq!(compared, 28, "the table is whole");
}

#[test]
fn the_width_of_what_is_unseen_against_the_exact_solution() {
    // Source: `tests/reference/midpoint_fault/PROVENANCE.md`, table of widths.
    const TRIPS: [f64; 5] = [1.0, 2.0, 5.0, 10.0, 15.0];
    const WIDTHS: [(f64, [f64; 5]); 4] = [
        (0.3, [0.057, 0.114, 0.288, 0.586, 0.908]),
        (0.5, [0.030, 0.059, 0.150, 0.304, 0.466]),
        (0.7, [0.016, 0.031, 0.078, 0.162, 0.260]),
        (0.8, [0.012, 0.025, 0.062, 0.132, 0.216]),
    ];
    for (load, widths) in WIDTHS {
        for (trip, width) in TRIPS.into_iter().zip(widths) {
            let ours = unseen_share(string(load * NO_LOAD), &reference(), trip);
            assert!(
                (ours - width).abs() <= 0.0011,
                "load {load}, trip {trip} mA: {ours}, exact {width}"
            );
        }
    }
}

// Common practice of the trade, no source: a fault at either end is seen, one near the middle may not
// be.
#[test]
fn the_ends_are_seen_and_the_middle_is_not() {
    for load in [0.4, 0.5, 0.6, 0.7] {
        let string = string(load * NO_LOAD);
        for end in [0.0, 1.0] {
            assert!(string.at(&reference(), end).ma() > 18.0, "{load} at {end}");
        }
        assert!(string.at(&reference(), 0.5).ma() < 1e-9, "{load}");
    }
}

// Common practice of the trade, no source: a balanced load leaves no current in the mid-point
// conductor.
#[test]
fn balanced_strings_leave_the_mid_point_without_current() {
    let entry = iron_entry(8_000.0, OutputEarthing::MidPointReturn, Some(15.0));
    let with =
        |a: f64, b: f64| mid_point(&entry).current(Volts::from_volts(a), Volts::from_volts(b));
    assert!(with(2_300.0, 2_300.0).ma() < 1e-9);
    assert!(with(2_300.0, 1_700.0).ma() > 1.0, "unequal strings do not");
}

// Common practice of the trade, no source: a tube of about 1 kV on a 4-0-4 kV electronic supply takes
// a little more than plate current, near the short-circuit current; a full load the plate current.
#[test]
fn a_short_tube_on_an_electronic_supply_takes_a_little_more_than_the_plate_says() {
    let supply = rating(&SupplyEntry {
        kind: Some(SupplyKind::Electronic),
        no_load_volts: Some(8_000.0),
        rated_load_volts: Some(6_000.0),
        rated_ma: Some(30.0),
        short_circuit_ma: Some(34.0),
        earthing: Some(OutputEarthing::MidPoint),
        ..SupplyEntry::default()
    });
    let curve = Curve::of(&supply, 1.0, 1.0);
    let at = |volts: f64| {
        let load = Load {
            pair_volts: volts,
            ..Load::new()
        };
        match operate(&load, &curve) {
            Operating::Runs { current, .. } => Some(current.ma()),
            Operating::Overloaded { .. } => None,
        }
    };
    let short = at(1_000.0).expect("it runs");
    assert!(short > 33.0 && short < 34.0, "{short}");
    let full = at(6_000.0).expect("it runs");
    assert!((full - 30.0).abs() < 1e-6, "{full}");
    // Beyond its rated load it is shut off.
    assert_eq!(at(6_010.0), None);
    assert!(supply.no_load > supply.rated_load.expect("given"));
}

// Common practice of the trade, no source: an open string drops an iron supply's input to its own
// losses. Here the supply is ideal, so to nothing: the longer the string, the less it draws, until
// nothing flows and it counts as overloaded.
#[test]
fn the_nearer_a_string_is_to_open_the_less_it_draws() {
    let supply = rating(&iron_entry(6_000.0, OutputEarthing::MidPoint, None));
    let drawn = |volts: f64| {
        let load = Load {
            pair_volts: volts,
            ..Load::new()
        };
        assess(&[&load], &supply, &Loading::default()).input_va
    };
    let steps = [3_000.0, 4_000.0, 5_000.0, 6_000.0, 7_000.0, 8_000.0];
    let drawn_va: Vec<f64> = steps.into_iter().filter_map(drawn).collect();
    assert_eq!(drawn_va.len(), steps.len(), "it runs, at last with gaps");
    assert!(drawn_va.is_sorted_by(|a, b| a > b), "{drawn_va:?}");
    assert!(drawn_va[5] < 0.02 * drawn_va[0], "{drawn_va:?}");
    // √2 x 6000 V is the peak of the no-load volts.
    assert_eq!(drawn(8_486.0), None);
}

#[test]
fn the_halves_of_an_electronic_supply_follow_its_droop_line() {
    let supply = mid_point(&SupplyEntry {
        kind: Some(SupplyKind::Electronic),
        no_load_volts: Some(8_000.0),
        rated_load_volts: Some(6_000.0),
        rated_ma: Some(30.0),
        short_circuit_ma: Some(33.0),
        earthing: Some(OutputEarthing::MidPoint),
        ..SupplyEntry::default()
    });
    // Worked by hand: each half loses 3 mA over its 3000 V, so at the end of a string of 5400 V the
    // mid-point carries 5.4 mA, a quarter in half of that, in the middle nothing.
    let full = string(5_400.0);
    for (at, ma) in [(0.0, 5.4), (0.25, 2.7), (0.5, 0.0), (1.0, 5.4)] {
        let here = full.at(&supply, at).ma();
        assert!((here - ma).abs() < 1e-9, "at {at}: {here}");
    }
    // 4 mA are reached at (1 - 4 / 5.4) / 2 from either end.
    let share = unseen_share(full, &supply, 4.0);
    assert!((share - 4.0 / 5.4).abs() < 1e-9, "{share}");
    assert_eq!(
        unseen_share(full, &supply, 15.0),
        1.0,
        "not certain anywhere"
    );
    assert!(supply.estimate());
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(300))]

    #[test]
    fn the_difference_is_that_of_the_waves(a in 0.0..1.45_f64, b in 0.0..1.45_f64) {
        // The rms of a difference lies between the difference and the sum of the rms.
        let (alone_a, alone_b) = (iron(a).rms, iron(b).rms);
        let between = difference(a, b);
        prop_assert!(between >= (alone_a - alone_b).abs() - 1e-9, "{between}");
        prop_assert!(between <= alone_a + alone_b + 1e-9, "{between}");
        prop_assert!((between - difference(b, a)).abs() < 1e-12);
        // With nothing in one half it is the other.
        prop_assert!((difference(a, 2.0) - alone_a).abs() < 1e-9);
        prop_assert!(difference(a, a) < 1e-12);
    }

    #[test]
    fn what_is_unseen_shrinks_as_the_load_grows(
        light in 0.1..0.75_f64,
        more in 0.005..0.3_f64,
        trip in 0.5..25.0_f64,
    ) {
        let heavy = (light + more).min(CONTINUOUS_TO);
        let (wide, narrow) = (
            unseen_share(string(light * NO_LOAD), &reference(), trip),
            unseen_share(string(heavy * NO_LOAD), &reference(), trip),
        );
        prop_assert!(narrow <= wide + 1e-9, "{narrow} against {wide}");
    }

    #[test]
    fn a_larger_trip_current_never_narrows_it(
        load in 0.1..1.0_f64, trip in 0.5..25.0_f64, more in 0.0..10.0_f64,
    ) {
        let string = string(load * NO_LOAD);
        prop_assert!(
            unseen_share(string, &reference(), trip)
                <= unseen_share(string, &reference(), trip + more) + 1e-9
        );
    }

    #[test]
    fn inside_the_stretch_it_is_less_than_the_trip_current_and_outside_not(
        first in 200.0..3_400.0_f64, second in 200.0..3_400.0_f64, one in any::<bool>(),
        trip in 0.5..25.0_f64, place in 0.0..1.0_f64,
    ) {
        let entry = iron_entry(NO_LOAD, OutputEarthing::MidPointReturn, Some(trip));
        let strings = if one { string(first + second) } else { halves(first, second) };
        let mid_point = mid_point(&entry);
        let here = strings.at(&mid_point, place).ma();
        match strings.unseen(&mid_point, ma(trip)) {
            Some((from, to)) if from + 1e-6 < place && place < to - 1e-6 => prop_assert!(here < trip),
            Some((from, to)) if place < from - 1e-6 || place > to + 1e-6 => prop_assert!(here >= trip - 1e-6, "{here} at {place}, unseen {from} to {to}"),
            Some(_) => {}
            None => prop_assert!(here >= trip - 1e-6),
        }
    }
}

#[test]
fn unequal_strings_move_the_stretch() {
    let entry = iron_entry(NO_LOAD, OutputEarthing::MidPointReturn, Some(10.0));
    let middle = |strings: Strings| {
        let (from, to) = strings.unseen(&mid_point(&entry), ma(10.0)).expect("one");
        f64::midpoint(from, to)
    };
    assert!((middle(halves(2_500.0, 2_500.0)) - 0.5).abs() < 1e-6);
    assert!(middle(halves(3_000.0, 2_000.0)) < 0.45, "towards lead A");
    assert!(middle(halves(2_000.0, 3_000.0)) > 0.55, "towards lead B");
}

// --- Whole circuits ---------------------------------------------------------------------------------

/// Bars of a tube type of 550 V/m and 200 V a pair, on one supply.
fn circuit(strokes: &str, supply: SupplyEntry) -> CircuitWork {
    let job = Job {
        rows: vec![Row::Strokes(StrokesRow {
            label: "bar".to_owned(),
            strokes: strokes.to_owned(),
            tube: "t".to_owned(),
            pieces: Pieces {
                keep_long: true,
                ..Pieces::default()
            },
            ..StrokesRow::default()
        })],
        ..Job::default()
    };
    let book = Book {
        supplies: vec![supply],
        tubes: vec![TubeEntry {
            name: "t".to_owned(),
            outer_mm: Some(12.0),
            volts_per_m: Some(550.0),
            pair_volts: Some(200.0),
            ..TubeEntry::default()
        }],
        ..Book::default()
    };
    let mut work = workup(&job, &book);
    assert_eq!(work.circuits.len(), 1, "{:?}", work.findings);
    work.circuits.remove(0)
}

/// The words of a circuit's protection but for those on insulation, and what was found of it.
fn words(circuit: &CircuitWork) -> String {
    let mut lines: Vec<String> = circuit
        .protection
        .says
        .iter()
        .filter(|(caption, _)| caption != "Insulation")
        .map(|(caption, says)| format!("{caption}: {says}"))
        .collect();
    for finding in &circuit.protection.findings {
        lines.push(format!("{}: {}", finding.grade.word(), finding.says));
    }
    lines.join("\n").replace('\u{202f}', " ")
}

// Common practice of the trade, no source: an 8 kV mid-point earthed output puts at most 4 kV on any
// point to earth.
#[test]
fn an_8_kv_mid_point_output_puts_at_most_4_kv_on_any_joint() {
    let worked = circuit(
        "1.5 m; 1.5 m; 1.5 m; 1.5 m",
        iron_entry(8_000.0, OutputEarthing::MidPoint, Some(15.0)),
    );
    assert_eq!(worked.profile.no_load.volts(), 4_000.0);
    for joint in &worked.profile.joints {
        assert!(joint.running.volts().abs() <= 4_000.0, "{joint:?}");
    }
}

#[test]
fn the_profile_of_each_output() {
    let bars = "1.5 m; 1 m; 2 m; 1.5 m";
    let of = |earthing| circuit(bars, iron_entry(7_000.0, earthing, None));
    let ends = |circuit: &CircuitWork| {
        let joints = &circuit.profile.joints;
        [joints[0], joints[joints.len() - 1]].map(|joint| joint.running.volts())
    };
    let total = |circuit: &CircuitWork| circuit.profile.total.volts();
    let close = |a: f64, b: f64| assert!((a - b).abs() < 1e-6, "{a} against {b}");

    let mid = of(OutputEarthing::MidPoint);
    let [a, b] = ends(&mid);
    close(a, total(&mid) / 2.0);
    close(b, -total(&mid) / 2.0);
    assert_eq!(mid.profile.no_load.volts(), 3_500.0);
    // The profile's volts are those of the operating point.
    close(
        total(&mid),
        mid.assessment.halves[0].operating.volts().volts(),
    );

    let end = of(OutputEarthing::OneEnd);
    let [a, b] = ends(&end);
    close(a, total(&end));
    close(b, 0.0);
    assert_eq!(end.profile.no_load.volts(), 7_000.0);

    let isolated = of(OutputEarthing::Isolated);
    assert!(!isolated.profile.held);
    for joint in &isolated.profile.joints {
        assert_eq!(joint.running.volts(), 7_000.0, "nothing holds it to earth");
    }

    let returned = of(OutputEarthing::MidPointReturn);
    let joint = &returned.profile.joints[returned.first_string];
    assert!(joint.mid_point);
    close(joint.running.volts(), 0.0);
    let [a, b] = ends(&returned);
    close(a, returned.assessment.halves[0].operating.volts().volts());
    close(-b, returned.assessment.halves[1].operating.volts().volts());
}

#[test]
fn splitting_a_piece_adds_exactly_one_pair_drop() {
    let whole = circuit(
        "2 m; 2 m; 2 m",
        iron_entry(8_000.0, OutputEarthing::MidPoint, None),
    );
    let split = circuit(
        "2 m; 1 m; 1 m; 2 m",
        iron_entry(8_000.0, OutputEarthing::MidPoint, None),
    );
    let at_20_ma = |circuit: &CircuitWork| {
        // Each piece's column at its own current, taken to 20 mA by its exponent.
        let Operating::Runs { current, .. } = circuit.assessment.halves[0].operating else {
            panic!("it runs");
        };
        circuit
            .profile
            .spans
            .iter()
            .map(|span| {
                let column = span.volts - span.pair;
                span.pair.volts() + column.volts() * (current.ma() / 20.0).powf(0.25)
            })
            .sum::<f64>()
    };
    assert!((at_20_ma(&split) - at_20_ma(&whole) - 200.0).abs() < 1e-6);
}

#[test]
fn a_spot_is_found_on_its_piece() {
    let worked = circuit(
        "1 m; 3 m",
        iron_entry(5_000.0, OutputEarthing::MidPoint, Some(15.0)),
    );
    let profile = &worked.profile;
    let half_way = profile.spot(0.5).expect("pieces");
    // The long piece begins at (pair + 1 column) of (2 pairs + 4 columns).
    assert_eq!(half_way.piece, 1);
    let column = (profile.spans[1].volts - profile.spans[1].pair).volts();
    let before = profile.spans[0].volts.volts() + 100.0;
    let along = (profile.total.volts() / 2.0 - before) / column;
    assert!((half_way.along - along).abs() < 1e-9);
    let [first, last] = [0.0, 1.0].map(|share| profile.spot(share).expect("pieces"));
    assert_eq!((first.piece, first.along), (0, 0.0));
    assert_eq!((last.piece, last.along), (1, 1.0));
}

#[test]
fn what_is_said_of_a_mid_point_output() {
    let worked = circuit(
        "1.5 m; 1.5 m; 1.5 m; 1.5 m",
        iron_entry(8_000.0, OutputEarthing::MidPoint, Some(15.0)),
    );
    assert_snapshot!(words(&worked), @r"
    Earth fault: Switches off on a fault to earth from 15 mA. A fault from 1 % into “bar 2” (piece 2) to 99 % into “bar 3” (piece 3), counted from lead A gives the mid-point too little: 45 % of the string is unseen. With mains 10 % low or high, or tubes at the ends of what is known of their volts, it is up to 49 %. A lighter string widens it (62 % at four fifths of these volts), a lower trip current narrows it (22 % at half). What the leads leak is not known and not taken off: the stretch may be wider.
    Open tube: No open-circuit protection: an open or broken tube leaves a dark sign with up to 8 000 V between the leads and 4 000 V to earth on either side of it. The input falls to the transformer's own losses, so no fuse tells.
    Bench test: The test of the supply alone (a fault to earth on lead A and on lead B) shows that its sensing and its switching-off work on both sides (common practice, no source). It cannot show that a fault on the string is seen: at the leads it is at its largest, in the unseen stretch it stays unseen on a sound supply.
    note: Sensing cannot see a fault to earth from 1 % into “bar 2” (piece 2) to 99 % into “bar 3” (piece 3), counted from lead A (45 % of the string, up to 49 % within what is known): insulate and inspect there.
    ");
    let unprotected = circuit(
        "1.5 m; 1.5 m; 1.5 m; 1.5 m",
        iron_entry(8_000.0, OutputEarthing::MidPoint, None),
    );
    assert_snapshot!(words(&unprotected), @r"
    Earth fault: No earth-fault protection: nothing switches off. A fault to earth at a lead drives up to the short-circuit current, 30.0 mA, through it; one in the middle of the string next to nothing.
    Open tube: No open-circuit protection: an open or broken tube leaves a dark sign with up to 8 000 V between the leads and 4 000 V to earth on either side of it. The input falls to the transformer's own losses, so no fuse tells.
    ");
}

#[test]
fn what_is_said_of_a_lightly_loaded_output() {
    let worked = circuit(
        "1.5 m; 1.2 m",
        iron_entry(5_000.0, OutputEarthing::MidPoint, Some(15.0)),
    );
    assert_eq!(
        worked.protection.findings.first().map(|found| found.grade),
        Some(Grade::Look)
    );
    assert_snapshot!(words(&worked), @r"
    Earth fault: Switches off on a fault to earth from 15 mA. A fault from 21 % into “bar 1” (piece 1) to 73 % into “bar 2” (piece 2), counted from lead A gives the mid-point too little: 71 % of the string is unseen. With mains 10 % low or high, or tubes at the ends of what is known of their volts, it is up to 73 %. A lighter string widens it (92 % at four fifths of these volts), a lower trip current narrows it (34 % at half). What the leads leak is not known and not taken off: the stretch may be wider.
    Open tube: No open-circuit protection: an open or broken tube leaves a dark sign with up to 5 000 V between the leads and 2 500 V to earth on either side of it. The input falls to the transformer's own losses, so no fuse tells.
    Bench test: The test of the supply alone (a fault to earth on lead A and on lead B) shows that its sensing and its switching-off work on both sides (common practice, no source). It cannot show that a fault on the string is seen: at the leads it is at its largest, in the unseen stretch it stays unseen on a sound supply.
    look: Sensing cannot see a fault to earth from 21 % into “bar 1” (piece 1) to 73 % into “bar 2” (piece 2), counted from lead A (71 % of the string, up to 73 % within what is known): insulate and inspect there.
    ");
}

#[test]
fn what_is_said_of_unequal_strings_with_a_return() {
    let worked = circuit(
        "3 m; 2.2 m",
        SupplyEntry {
            open_circuit_protection: true,
            trip_seconds: Some(0.5),
            ..iron_entry(7_000.0, OutputEarthing::MidPointReturn, Some(5.0))
        },
    );
    assert_snapshot!(words(&worked), @r"
    Earth fault: Switches off on a fault to earth from 5 mA within 0.5 s. A fault from 41 % into “bar 1” (piece 1) to the start of “bar 2” (piece 2), counted from lead A gives the mid-point too little: 35 % of the string is unseen. With mains 10 % low or high, or tubes at the ends of what is known of their volts, it is up to 38 %. A lighter string widens it (47 % at four fifths of these volts), a lower trip current narrows it (17 % at half), the string of more volts draws it to its side. Taken as sensed in the mid-point of the winding. A supply that senses what flows to its case apart from the return sees more; its plate must say so. What the leads leak is not known and not taken off: the stretch may be wider.
    Open tube: Switches off when a tube is open or broken. Until it does, and where it fails, its string is dark with up to 3 500 V across the break and to earth, while the other burns on.
    Bench test: The test of the supply alone (a fault to earth and an open string, each on lead A and on lead B) shows that its sensing and its switching-off work on both sides (common practice, no source). It cannot show that a fault on the string is seen: at the leads it is at its largest, in the unseen stretch it stays unseen on a sound supply.
    note: Sensing cannot see a fault to earth from 41 % into “bar 1” (piece 1) to the start of “bar 2” (piece 2), counted from lead A (35 % of the string, up to 38 % within what is known): insulate and inspect there.
    look: The two strings are unequal: with no fault the mid-point of the winding carries 4.4 mA of the 5 mA at which earth-fault sensing trips. A supply that senses there may switch a sound sign off; balance the strings.
    ");
}

#[test]
fn what_is_said_of_an_electronic_output() {
    let worked = circuit(
        "1.5 m; 1.5 m; 1.5 m; 1.5 m",
        SupplyEntry {
            kind: Some(SupplyKind::Electronic),
            rated_ma: Some(30.0),
            short_circuit_ma: Some(33.0),
            rated_load_volts: Some(5_000.0),
            ..iron_entry(8_000.0, OutputEarthing::MidPoint, Some(15.0))
        },
    );
    assert_snapshot!(words(&worked), @r"
    Earth fault: Switches off on a fault to earth from 15 mA. A fault from the start of “bar 1” (piece 1) to the end of “bar 4” (piece 4), counted from lead A gives the mid-point too little: 100 % of the string is unseen. What the leads leak is not known and not taken off: the stretch may be wider. An estimate, on the careful side: both halves of an electronic supply are taken to follow its droop line, in phase. Common practice (no source) has it that a fault to earth at either end of a loaded string is seen and one near the middle may not be.
    Open tube: No open-circuit protection: with an open or broken tube the output may rise above its plate volts; count on at least 8 000 V between the leads and 4 000 V to earth on either side of it.
    Bench test: The test of the supply alone (a fault to earth on lead A and on lead B) shows that its sensing and its switching-off work on both sides (common practice, no source). It cannot show that a fault on the string is seen: at the leads it is at its largest, in the unseen stretch it stays unseen on a sound supply.
    look: By a careful estimate sensing may not see a fault to earth from the start of “bar 1” (piece 1) to the end of “bar 4” (piece 4), counted from lead A (100 % of the string): insulate and inspect there.
    ");
}

#[test]
fn what_is_said_of_a_return_and_of_an_isolated_output_that_claims_protection() {
    let returned = circuit(
        "3 m; 2.8 m",
        iron_entry(7_000.0, OutputEarthing::MidPointReturn, None),
    );
    assert_snapshot!(words(&returned), @r"
    Earth fault: No earth-fault protection: nothing switches off. A fault to earth shorts the tubes between it and the return; those between its lead and the fault go on burning with up to 30.0 mA.
    Open tube: No open-circuit protection: the string of an open or broken tube is dark with up to 3 500 V across the break and to earth, while the other burns on.
    ");
    let isolated = circuit(
        "1.5 m; 1.5 m; 1.5 m",
        iron_entry(6_000.0, OutputEarthing::Isolated, Some(15.0)),
    );
    assert_snapshot!(words(&isolated), @r"
    Earth fault: Its plate says that it has earth-fault protection; how that senses a fault of an output that nothing holds to earth is for the plate to say. A first fault to earth drives only the leakage of leads and winding: the sign burns on, nothing in a mid-point can see it, and the far lead then stands at up to 6 000 V to earth. A second one shorts the tubes between the two.
    Open tube: No open-circuit protection: an open or broken tube leaves a dark sign with up to 6 000 V between the leads and 6 000 V to earth from either side. The input falls to the transformer's own losses, so no fuse tells.
    Bench test: A fault to earth at one lead of an isolated output drives no current to sense: how its protection is tested is for the plate to say.
    ");
}

#[test]
fn what_is_said_of_end_earthed_and_isolated_outputs() {
    let end = circuit(
        "1.5 m; 1.5 m; 1.5 m",
        iron_entry(6_000.0, OutputEarthing::OneEnd, Some(15.0)),
    );
    assert_snapshot!(words(&end), @r"
    Earth fault: Switches off on a fault to earth from 15 mA. A fault to earth shorts the tubes between it and the earthed end; those between the live lead and the fault go on burning with up to 30.0 mA. Near the earthed end it carries hardly more than the tubes did, and there are hardly any volts for it: whether the protection tells it from the running current is for its plate to say.
    Open tube: No open-circuit protection: an open or broken tube leaves a dark sign with up to 6 000 V between the leads and 6 000 V to earth on the side of the live lead. The input falls to the transformer's own losses, so no fuse tells.
    Bench test: The test of the supply alone (a fault to earth on the live lead) shows that its sensing and its switching-off work there (common practice, no source). It cannot show what a fault on the string itself would do.
    ");
    let isolated = circuit(
        "1.5 m; 1.5 m; 1.5 m",
        iron_entry(6_000.0, OutputEarthing::Isolated, None),
    );
    assert_snapshot!(words(&isolated), @r"
    Earth fault: No earth-fault protection: nothing switches off. A first fault to earth drives only the leakage of leads and winding: the sign burns on, nothing in a mid-point can see it, and the far lead then stands at up to 6 000 V to earth. A second one shorts the tubes between the two.
    Open tube: No open-circuit protection: an open or broken tube leaves a dark sign with up to 6 000 V between the leads and 6 000 V to earth from either side. The input falls to the transformer's own losses, so no fuse tells.
    ");
}

#[test]
fn what_is_said_where_the_trip_current_is_not_known() {
    let mut entry = iron_entry(6_000.0, OutputEarthing::MidPoint, Some(15.0));
    entry.trip_ma = None;
    let worked = circuit("1.5 m; 1.5 m; 1.5 m", entry);
    assert_snapshot!(words(&worked), @r"
    Earth fault: Switches off on a fault to earth; its trip current is not in the shop book. One near the middle of the string gives the mid-point next to nothing: no trip current sees it there.
    Open tube: No open-circuit protection: an open or broken tube leaves a dark sign with up to 6 000 V between the leads and 3 000 V to earth on either side of it. The input falls to the transformer's own losses, so no fuse tells.
    Bench test: The test of the supply alone (a fault to earth on lead A and on lead B) shows that its sensing and its switching-off work on both sides (common practice, no source). It cannot show that a fault on the string is seen: at the leads it is at its largest, in the unseen stretch it stays unseen on a sound supply.
    note: The trip current of the earth-fault protection is not in the shop book: where it cannot see a fault is not worked out.
    ");
}

#[test]
fn what_nobody_gave_is_said_to_be_taken_by_default() {
    let iron = circuit(
        "1.5 m; 1.5 m; 1.5 m; 1.5 m",
        iron_entry(8_000.0, OutputEarthing::MidPoint, Some(15.0)),
    );
    assert_snapshot!(iron.assumed.join("\n"), @r"
    Loading window, target 50 to 65 % of the no-load volts: the default, from the model of the supply and how the gases strike again each half cycle; the plate gives none.
    Striking: 1.5 times the running volts, the default, from a weak source.
    Mains: 10 % low and high, a common tolerance; the output is taken to follow them.
    Faults: without resistance, the tubes at the volts they ran at, both halves of the winding leaking magnetically each for itself.
    Of t not given, so taken from the default: volts that go as the current to the power of -0.25, 25 mA as the current of its volts per metre.
    ");
    let plate = circuit(
        "1.5 m; 1.5 m; 1.5 m; 1.5 m",
        SupplyEntry {
            least_load_percent: Some(40.0),
            most_load_percent: Some(70.0),
            ..iron_entry(8_000.0, OutputEarthing::MidPoint, Some(15.0))
        },
    );
    assert!(
        !plate.assumed.iter().any(|says| says.contains("window")),
        "the plate gave it"
    );
    let electronic = circuit(
        "1.5 m; 1.5 m; 1.5 m; 1.5 m",
        SupplyEntry {
            kind: Some(SupplyKind::Electronic),
            rated_ma: Some(25.0),
            short_circuit_ma: None,
            rated_load_volts: Some(5_000.0),
            ..iron_entry(8_000.0, OutputEarthing::MidPoint, Some(15.0))
        },
    );
    assert_snapshot!(electronic.assumed.join("\n"), @r"
    Loading window, 60 to 95 % of the rated load volts: our own choice, no source; the plate gives none.
    Striking: 1.5 times the running volts, the default, from a weak source.
    Mains: the output is taken not to follow them; the plate knows better.
    Faults: without resistance, the tubes at the volts they ran at, both halves of the winding leaking magnetically each for itself.
    Short-circuit current: none above the rated one is known, so the supply is taken to hold it.
    Of t not given, so taken from the default: volts that go as the current to the power of -0.25, 25 mA as the current of its volts per metre.
    ");
    // Mercury in frost, volts from the model.
    let mut job = Job {
        rows: vec![Row::Strokes(StrokesRow {
            strokes: "2 m; 2 m; 2 m".to_owned(),
            tube: "blue".to_owned(),
            ..StrokesRow::default()
        })],
        ..Job::default()
    };
    let book = Book {
        supplies: vec![iron_entry(6_000.0, OutputEarthing::MidPoint, None)],
        tubes: vec![TubeEntry {
            name: "blue".to_owned(),
            gas: tubewright::book::Gas::ArgonMercury,
            outer_mm: Some(15.0),
            ..TubeEntry::default()
        }],
        ..Book::default()
    };
    let last = |job: &Job| {
        let mut work = workup(job, &book);
        let said = work.circuits.remove(0).assumed;
        said[said.len() - 2..].join("\n")
    };
    assert_snapshot!(last(&job), @r"
    Volts of blue: model, ±15 %.
    Of blue not given, so taken from the default: 210 V for a pair of electrodes, volts that go as the current to the power of -0.3, a wall of 1 mm.
    ");
    job.site.cold = true;
    assert_snapshot!(last(&job), @r"
    Volts of blue: model, ±15 %.
    Of blue not given, so taken from the default: 210 V for a pair of electrodes, volts that go as the current to the power of -0.3, a wall of 1 mm.
    ");
}
