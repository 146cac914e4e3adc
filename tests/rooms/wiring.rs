//! Leads and jumpers: capacitance and leakage against outside figures (`tests/reference/electrical`),
//! lengths, volts and limits by hand.

use insta::assert_snapshot;
use proptest::prelude::*;
use serde::Deserialize;
use tubewright::book::{Book, CableEntry, OutputEarthing, SupplyEntry, SupplyKind, TubeEntry};
use tubewright::job::{CircuitLeads, Job, LeadRun, Row, Shape, ShapeRow, StrokesRow, Wiring};
use tubewright::measure::Length;
use tubewright::rules::{Finding, Grade, Limits, Place, RuleSet, iec_en, nec};
use tubewright::wiring::capacitance::{
    coaxial, eccentric, in_metal_conduit, insulated_over_plane, layered, over_plane,
};
use tubewright::wiring::{Leads, LengthFrom, What, leakage_ma};
use tubewright::workup;

/// Source: `tests/reference/electrical/PROVENANCE.md`.
const ELECTRICAL: &str = include_str!("../reference/electrical/electrical_units.json");

#[derive(Deserialize)]
struct Reference {
    capacitance: Vec<Capacitance>,
    leakage: Vec<Leakage>,
}

#[derive(Deserialize)]
#[allow(non_snake_case, reason = "the names of the reference")]
struct Capacitance {
    case: String,
    pF_per_m: f64,
}

#[derive(Deserialize)]
#[allow(non_snake_case, reason = "the names of the reference")]
struct Leakage {
    pF_per_m: f64,
    m: f64,
    V: f64,
    Hz: f64,
    mA: f64,
}

fn near(found: f64, wanted: f64, share: f64, what: &str) {
    assert!(
        (found - wanted).abs() <= share * wanted.abs(),
        "{what}: {found}, not {wanted}"
    );
}

#[test]
fn capacitance_and_leakage_as_worked_out_elsewhere() {
    let reference: Reference = serde_json::from_str(ELECTRICAL).expect("the reference is whole");
    let worked = |case: &str| match case {
        "coax d 1.2 mm, D 6 mm, er 2.3" => coaxial(0.6, 3.0, 2.3),
        "coax d 1.024 mm, D 7.6 mm, er 2.9" => coaxial(0.512, 3.8, 2.9),
        "layered radii 0.6/3.8/8.0 mm, er 2.9 then air" => layered(0.6, &[(3.8, 2.9), (8.0, 1.0)]),
        "bare wire r 0.6 mm, axis 10 mm above plane, air" => over_plane(0.6, 10.0),
        "eccentric r 0.6 mm inside R 8 mm, offset 4 mm, air" => eccentric(0.6, 8.0, 4.0, 1.0),
        other => panic!("a case nobody knows: {other}"),
    };
    assert_eq!(reference.capacitance.len(), 5, "no row is missing");
    for row in &reference.capacitance {
        let found = worked(&row.case).expect("a figure");
        near(found, row.pF_per_m, 1e-9, &row.case);
    }
    assert_eq!(reference.leakage.len(), 3, "no row is missing");
    for row in &reference.leakage {
        let found = leakage_ma(row.pF_per_m * row.m, row.Hz, row.V);
        near(found, row.mA, 1e-9, "leakage");
    }
}

#[test]
fn sizes_that_are_no_cable_give_no_figure() {
    assert_eq!(coaxial(0.0, 3.0, 2.3), None);
    assert_eq!(coaxial(3.0, 3.0, 2.3), None);
    assert_eq!(coaxial(1.0, 3.0, 0.5), None, "less than nothing at all");
    assert_eq!(coaxial(f64::NAN, 3.0, 2.3), None);
    assert_eq!(over_plane(2.0, 2.0), None, "it touches");
    assert_eq!(eccentric(1.0, 8.0, 7.0, 1.0), None, "it touches");
    assert_eq!(
        in_metal_conduit(0.6, 8.0, 2.9, 8.0),
        None,
        "it does not go in"
    );
    assert_eq!(insulated_over_plane(0.6, 3.8, 2.9, 3.8), None);
}

proptest! {
    /// On the wall of its conduit a cable has more than in its middle, more than a bare wire would have
    /// there, and no more than with a screen of its own.
    #[test]
    fn a_cable_on_the_wall_is_never_worked_out_too_small(
        wire in 0.2..3.0_f64,
        wall in 0.2..6.0_f64,
        air in 0.1..30.0_f64,
        permittivity in 1.0..8.0_f64,
    ) {
        let (insulation, bore) = (wire + wall, wire + wall + air);
        let taken = in_metal_conduit(wire, insulation, permittivity, bore).expect("a cable");
        let middle = layered(wire, &[(insulation, permittivity), (bore, 1.0)]).expect("a cable");
        let bare = eccentric(wire, bore, bore - insulation, 1.0).expect("a wire");
        let screened = coaxial(wire, insulation, permittivity).expect("a cable");
        prop_assert!(taken >= middle && taken >= bare && taken <= screened);
    }
}

// ---- circuits ----

/// A supply of 3 kV and 30 mA at 50 Hz.
pub(super) fn supply(earthing: OutputEarthing) -> SupplyEntry {
    SupplyEntry {
        name: "S".to_owned(),
        kind: Some(SupplyKind::Iron),
        earthing: Some(earthing),
        no_load_volts: Some(3_000.0),
        short_circuit_ma: Some(30.0),
        input_volts: Some(230.0),
        input_hertz: Some(50.0),
        earth_fault_protection: true,
        trip_ma: Some(15.0),
        open_circuit_protection: true,
        ..SupplyEntry::default()
    }
}

pub(super) fn cable() -> CableEntry {
    CableEntry {
        name: "C".to_owned(),
        rated_volts: Some(5_000.0),
        pf_per_m: Some(60.0),
        ..CableEntry::default()
    }
}

/// A shop with one supply, one cable, and one tube of 600 V/m and 200 V for its electrodes at any
/// current.
pub(super) fn shop(supply: SupplyEntry) -> Book {
    Book {
        supplies: vec![supply],
        cables: vec![cable()],
        tubes: vec![TubeEntry {
            name: "t".to_owned(),
            outer_mm: Some(12.0),
            volts_per_m: Some(600.0),
            exponent: Some(0.0),
            pair_volts: Some(200.0),
            ..TubeEntry::default()
        }],
        rule_sets: vec![nec(), iec_en()],
        ..Book::default()
    }
}

/// A sign of bars, held against the NEC.
pub(super) fn bars(strokes: &str, wiring: Wiring) -> Job {
    let row = Row::Strokes(StrokesRow {
        label: "bar".to_owned(),
        strokes: strokes.to_owned(),
        tube: "t".to_owned(),
        ..StrokesRow::default()
    });
    Job {
        rows: vec![row],
        rules: "NEC Article 600".to_owned(),
        wiring,
        ..Job::default()
    }
}

/// Leads of five and two metres, jumpers of one.
pub(super) fn typed() -> Wiring {
    Wiring {
        cable: "C".to_owned(),
        lead_a: "5 m".to_owned(),
        lead_b: "2 m".to_owned(),
        jumper: "1 m".to_owned(),
        ..Wiring::default()
    }
}

/// The leads of the only circuit.
fn leads(job: &Job, book: &Book) -> Leads {
    let work = workup(job, book);
    assert_eq!(work.circuits.len(), 1, "{:?}", work.findings);
    work.circuits[0].leads.clone()
}

/// What is said of a circuit's leads and of all of them, one a line.
fn said(job: &Job, book: &Book) -> String {
    let work = workup(job, book);
    let of_leads = |finding: &&Finding| {
        let (says, from) = (&finding.says, &finding.source.from);
        let of_others = says.starts_with("Sensing") || from == "as typed for the feed";
        !of_others
            && (says.to_lowercase().contains("lead")
                || from.contains("cable")
                || from.contains("leads"))
    };
    let all: Vec<String> = work
        .findings
        .iter()
        .filter(of_leads)
        .map(|finding| format!("{}: {}", finding.grade.word(), finding.says))
        .collect();
    all.join("\n").replace('\u{202f}', "_")
}

/// What 60 pF/m leak over metres at volts and 50 Hz, milliamperes.
fn leak(metres: f64, volts: f64) -> f64 {
    core::f64::consts::TAU * 50.0 * 60e-12 * metres * volts * 1e3
}

fn volts(leads: &Leads) -> Vec<f64> {
    let rounded = |volts: f64| (volts * 1e6).round() / 1e6;
    let sections = leads.sections.iter();
    sections
        .map(|section| rounded(section.to_earth.volts()))
        .collect()
}

#[test]
fn volts_to_earth_fall_from_lead_to_lead() {
    // Two bars of half a metre, 500 V each: 1 000 V in all.
    let at = |earthing| leads(&bars("500 mm; 500 mm", typed()), &shop(supply(earthing)));
    let mid_point = at(OutputEarthing::MidPoint);
    assert_eq!(
        volts(&mid_point),
        [500.0, 0.0, 500.0],
        "lead A, jumper, lead B"
    );
    near(
        mid_point.sum_ma.expect("known"),
        leak(7.0, 500.0),
        1e-9,
        "the sum is lost",
    );
    near(
        mid_point.difference_ma.expect("known"),
        leak(3.0, 500.0),
        1e-9,
        "the mid-point sees five metres less two",
    );
    let one_end = at(OutputEarthing::OneEnd);
    assert_eq!(volts(&one_end), [1_000.0, 500.0, 0.0]);
    let all = leak(5.0, 1_000.0) + leak(1.0, 500.0);
    near(one_end.sum_ma.expect("known"), all, 1e-9, "sum");
    near(
        one_end.difference_ma.expect("known"),
        all,
        1e-9,
        "nothing goes against it",
    );
    let isolated = at(OutputEarthing::Isolated);
    assert_eq!(volts(&isolated), [3_000.0; 3], "it may stand at all of it");
    near(
        isolated.sum_ma.expect("known"),
        leak(8.0, 3_000.0),
        1e-9,
        "sum",
    );
    assert_eq!(isolated.difference_ma, None, "nothing is earthed");
    // With a mid-point return the jumper between the strings stands at earth, and so does the return.
    let returned = at(OutputEarthing::MidPointReturn);
    assert_eq!(volts(&returned), [500.0, 0.0, 500.0, 0.0]);
    assert_eq!(returned.sections[3].what, What::Return);
    assert_eq!(returned.sections[3].ma, Some(0.0), "however long it is");
    assert_eq!(returned.tube.len(), 2, "a current for each string");
}

#[test]
fn what_leads_leak_is_lost_from_the_tubes() {
    let (job, book) = (
        bars("500 mm; 500 mm", typed()),
        shop(supply(OutputEarthing::MidPoint)),
    );
    let work = workup(&job, &book);
    let circuit = &work.circuits[0];
    let tubewright::circuit::Operating::Runs { current, .. } =
        circuit.assessment.halves[0].operating
    else {
        panic!("it runs");
    };
    let lost = leak(7.0, 500.0);
    near(
        circuit.leads.tube[0].ma(),
        current.ma() - lost,
        1e-12,
        "the current with leads",
    );
    near(
        circuit.leads.share.expect("known"),
        lost / current.ma(),
        1e-12,
        "its share",
    );
    near(
        circuit.leads.trip_margin_ma.expect("known"),
        15.0 - leak(3.0, 500.0),
        1e-12,
        "the margin to the trip",
    );
    assert_eq!(circuit.leads.advice, [""; 0], "nothing has to be bettered");
}

#[test]
fn what_is_typed_for_a_circuit_goes_before_what_is_typed_for_all() {
    let first = workup(
        &bars("500 mm; 500 mm", typed()),
        &shop(supply(OutputEarthing::MidPoint)),
    );
    let label = first.takeoff.pieces[0].label.clone();
    let own = |first: &str, a: &str, b: &str| Wiring {
        circuits: vec![CircuitLeads {
            first: first.to_owned(),
            a: a.to_owned(),
            b: b.to_owned(),
        }],
        ..typed()
    };
    let book = shop(supply(OutputEarthing::MidPoint));
    let found = leads(&bars("500 mm; 500 mm", own(&label, "3 m", "")), &book);
    let lengths: Vec<_> = found
        .sections
        .iter()
        .map(|section| (section.length.map(Length::mm), section.from))
        .collect();
    assert_eq!(
        lengths,
        [
            (Some(3_000.0), LengthFrom::Circuit),
            (Some(1_000.0), LengthFrom::All),
            (Some(2_000.0), LengthFrom::All),
        ]
    );
    // What cannot be read counts as not given, and is not made up for by the others'.
    let bad = bars("500 mm; 500 mm", own(&label, "3 parsecs", "-1"));
    let found = leads(&bad, &book);
    assert_eq!(found.sections[0].length, None);
    assert_eq!(found.sections[0].from, LengthFrom::NotGiven);
    assert_eq!(
        (found.sum_ma, found.difference_ma, found.share),
        (None, None, None)
    );
    assert!(
        found
            .findings
            .iter()
            .all(|finding| finding.grade == Grade::Look),
        "{:?}",
        found.findings
    );
    assert_snapshot!(said(&bad, &book), @r"
    look: Lead A of this circuit counts as not given: expected “+”, “x” or the end, but found “parsecs” at character 3 of “3 parsecs”; units are mm, cm, m, in or ft.
    look: Lead B of this circuit counts as not given: expected a figure from 0 on, but found “-1” at character 1 of “-1”; nothing here is ever negative.
    note: Lead lengths are not given: the limits on lead lengths (at most 6_096 mm, 600.32(J)(1), 20 ft or 6 m) were not checked for them. Type the lengths, or where the supplies stand.
    ");
    let gone = bars("500 mm; 500 mm", own("no such", "3 m", ""));
    assert_snapshot!(said(&gone, &book), @r"
    note: Leads are typed for a circuit that begins with “no such”, and none does now: they are not used.
    note: What leads leak is worked out for a sine. The volts of tubes on an iron transformer are nearer to a square wave, whose steep sides drive spikes through a capacitance: more leaks than is shown.
    ");
}

#[test]
fn what_is_typed_twice_or_for_several_circuits_is_told_of() {
    // 1 400 V each, too much together for 3 000 V no-load: a circuit each, of bars called alike.
    let lead = |first: &str, a: &str| CircuitLeads {
        first: first.to_owned(),
        a: a.to_owned(),
        b: String::new(),
    };
    let wiring = Wiring {
        circuits: vec![
            lead("bar", "3 m"),
            lead("bar", "4 m"),
            lead("x", "1 m"),
            lead("", ""),
        ],
        ..typed()
    };
    let mut job = bars("2 m", wiring);
    job.rows.push(job.rows[0].clone());
    let book = shop(supply(OutputEarthing::MidPoint));
    let work = workup(&job, &book);
    assert_eq!(work.circuits.len(), 2, "{:?}", work.findings);
    for circuit in &work.circuits {
        let lead = circuit.leads.section(What::LeadA).expect("there");
        assert_eq!(
            lead.length.map(Length::mm),
            Some(3_000.0),
            "the first of both"
        );
    }
    let says = said(&job, &book);
    for wanted in [
        "look: Leads are typed twice for the circuit that begins with “bar”",
        "note: Several circuits begin with a piece called “bar”",
        "note: Leads are typed for a circuit that begins with “x”, and none does now",
    ] {
        assert!(says.contains(wanted), "{says}");
    }
}

/// A polyline of an electrode at the lower left and one 1500 mm right of it and 500 mm up.
fn corner(wiring: Wiring) -> Job {
    let row = Row::Shape(ShapeRow {
        label: "corner".to_owned(),
        shape: Shape::Polyline {
            points: "0, 0; 1500 mm, 0; 1500 mm, 500 mm".to_owned(),
        },
        tube: "t".to_owned(),
        ..ShapeRow::default()
    });
    Job {
        rows: vec![row],
        wiring,
        ..Job::default()
    }
}

#[test]
fn lengths_from_the_drawing_are_straight_with_slack_and_ends() {
    let at = |right: &str, up: &str| Wiring {
        cable: "C".to_owned(),
        supply_right: right.to_owned(),
        supply_up: up.to_owned(),
        slack_percent: 10.0,
        ends: "200 mm".to_owned(),
        ..Wiring::default()
    };
    let book = shop(supply(OutputEarthing::MidPoint));
    // From 300 mm under the lower left: 300 mm straight up, and 1500 mm across with 800 mm up, which
    // is 1700 mm.
    let found = leads(&corner(at("0", "-300 mm")), &book);
    let mm = |what| {
        let section = found.section(what).expect("there");
        assert_eq!(section.from, LengthFrom::Drawing);
        section.length.expect("known").mm()
    };
    near(mm(What::LeadA), 300.0 * 1.1 + 200.0, 1e-9, "lead A");
    near(mm(What::LeadB), 1_700.0 * 1.1 + 200.0, 1e-9, "lead B");
    // Half a place is none.
    let half = corner(at("0", ""));
    assert_eq!(
        leads(&half, &book)
            .section(What::LeadA)
            .and_then(|lead| lead.length),
        None
    );
    assert_snapshot!(said(&half, &book), @r"
    note: The place of the supplies needs both how far right and how far up: no lead is measured on the drawing.
    note: Lead lengths are not given: the limits on lead lengths were not checked for them. Type the lengths, or where the supplies stand.
    ");
    // Bars given by their lengths have no place on the drawing.
    let bars = Job {
        rules: String::new(),
        ..bars("500 mm; 500 mm", at("0", "0"))
    };
    assert_eq!(leads(&bars, &book).cable(), None);
    assert_snapshot!(said(&bars, &book), @r"
    note: Lead lengths are not given: the limits on lead lengths were not checked for them. Type the lengths, or where the supplies stand.
    note: Lengths of some jumpers are not known, nor what they leak: pieces given by the lengths of their strokes have no place on the drawing. Type a length for jumpers.
    ");
}

#[test]
fn leads_nobody_described_are_said_to_be_unchecked() {
    let job = bars("500 mm", Wiring::default());
    let book = shop(supply(OutputEarthing::MidPoint));
    let found = leads(&job, &book);
    assert_eq!(
        (found.sum_ma, found.pf_per_m, found.cable()),
        (None, None, None)
    );
    assert_snapshot!(said(&job, &book), @"note: Leads are not described: their lengths, their cable, what they leak and the limits on them were not checked. Describe them under Leads and feed, on the Circuits place.");
    let no_cable = bars(
        "500 mm",
        Wiring {
            cable: String::new(),
            ..typed()
        },
    );
    assert_snapshot!(said(&no_cable, &book), @"note: No cable is chosen: what leads leak, and whether their insulation is made for the volts, was not checked.");
    let gone = bars(
        "500 mm",
        Wiring {
            cable: "X".to_owned(),
            ..typed()
        },
    );
    assert_snapshot!(said(&gone, &book), @"look: The cable “X” is not in the shop book: what leads leak, and whether their insulation is made for the volts, was not checked.");
}

#[test]
fn a_cable_is_held_against_the_no_load_volts() {
    let with = |rated_volts, earthing| {
        let mut book = shop(supply(earthing));
        book.cables[0].rated_volts = rated_volts;
        said(&bars("500 mm", typed()), &book)
    };
    // Half of 3 000 V with an earthed mid-point, all of it with an earthed end.
    assert!(!with(Some(1_500.0), OutputEarthing::MidPoint).contains("stop"));
    assert_snapshot!(with(Some(1_499.0), OutputEarthing::MidPoint), @r"
    stop: The cable “C” is rated for 1_499 V; with no load its leads stand at 1_500 V to ground.
    note: What leads leak is worked out for a sine. The volts of tubes on an iron transformer are nearer to a square wave, whose steep sides drive spikes through a capacitance: more leaks than is shown.
    ");
    assert!(with(Some(2_999.0), OutputEarthing::OneEnd).contains("stop"));
    assert!(!with(Some(3_000.0), OutputEarthing::OneEnd).contains("stop"));
    assert_snapshot!(with(None, OutputEarthing::MidPoint), @r"
    look: The volts that “C” is rated for are not in the shop book: whether its insulation is made for the no-load volts was not checked.
    note: What leads leak is worked out for a sine. The volts of tubes on an iron transformer are nearer to a square wave, whose steep sides drive spikes through a capacitance: more leaks than is shown.
    ");
}

#[test]
fn capacitance_is_worked_out_as_the_cable_is_run_or_not_at_all() {
    let sizes = CableEntry {
        pf_per_m: None,
        conductor_mm: Some(1.2),
        insulation_mm: Some(7.6),
        permittivity: Some(2.9),
        ..cable()
    };
    let with = |entry: &CableEntry, wiring: Wiring| {
        let mut book = shop(supply(OutputEarthing::MidPoint));
        book.cables[0] = entry.clone();
        let job = bars("500 mm", wiring);
        (leads(&job, &book).pf_per_m, said(&job, &book))
    };
    let conduit = |bore: &str| Wiring {
        conduit_bore: bore.to_owned(),
        ..typed()
    };
    assert_eq!(
        with(&sizes, conduit("16 mm")).0,
        in_metal_conduit(0.6, 3.8, 2.9, 8.0)
    );
    let air = |from: &str, run| Wiring {
        run,
        from_earthed: from.to_owned(),
        ..typed()
    };
    for run in [LeadRun::FreeAir, LeadRun::PlasticConduit] {
        let found = with(&sizes, air("50 mm", run)).0;
        assert_eq!(found, insulated_over_plane(0.6, 3.8, 2.9, 50.0), "{run:?}");
        assert_eq!(with(&sizes, air("", run)).0, None);
    }
    let screened = CableEntry {
        screened: true,
        ..sizes.clone()
    };
    assert_eq!(
        with(&screened, typed()).0,
        coaxial(0.6, 3.8, 2.9),
        "however it is run"
    );
    assert_snapshot!(with(&sizes, typed()).1, @"note: What leads of “C” leak was not worked out: the bore of its conduit is not given.");
    assert_snapshot!(with(&sizes, conduit("7 mm")).1, @"note: What leads of “C” leak was not worked out: the conduit is too narrow for it.");
    let bare = CableEntry {
        permittivity: None,
        ..sizes.clone()
    };
    assert_snapshot!(with(&bare, typed()).1, @"note: What leads of “C” leak was not worked out: the shop book gives neither its capacitance nor its conductor, insulation and permittivity.");
    let odd = CableEntry {
        conductor_mm: Some(9.0),
        permittivity: Some(0.5),
        ..sizes
    };
    assert_snapshot!(with(&odd, typed()).1, @"look: The cable “C” cannot be worked with, so leads are not checked against it: its permittivity must be 1 to 20, but is 0.5; its insulation, 7.6 mm, is no wider than its conductor, 9 mm.");
}

/// The NEC and the IEC/EN set, the latter with a longest lead filled in.
fn filled_in(longest: f64) -> RuleSet {
    let mut set = iec_en();
    for rule in &mut set.rules {
        if rule.limits == Limits::Lead {
            rule.value = Some(longest);
        }
    }
    set
}

#[test]
fn a_lead_is_held_against_the_plate_and_the_rules_of_its_run() {
    let of = |run, a: &str| Wiring {
        run,
        lead_a: a.to_owned(),
        from_earthed: "100 mm".to_owned(),
        ..typed()
    };
    let stops = |job: &Job, book: &Book| -> String {
        let work = workup(job, book);
        let leads = &work.circuits[0].leads;
        let stops = leads
            .findings
            .iter()
            .filter(|found| found.grade == Grade::Stop);
        stops
            .map(|found| format!("{} [{}]", found.says, found.source.words()))
            .collect::<Vec<_>>()
            .join("\n")
            .replace('\u{202f}', "_")
    };
    let mut book = shop(supply(OutputEarthing::MidPoint));
    assert_eq!(
        stops(&bars("500 mm", of(LeadRun::PlasticConduit, "6.1 m")), &book),
        ""
    );
    assert_eq!(
        stops(&bars("500 mm", of(LeadRun::FreeAir, "50 m")), &book),
        "",
        "not limited"
    );
    assert_snapshot!(stops(&bars("500 mm", of(LeadRun::MetalConduit, "6096.1 mm")), &book), @"Lead A is 6096.1 mm long in metal conduit; the limit is 6_096 mm from the supply to the first electrode. [NEC Article 600 (2017 and 2020), 600.32(J)(1), 20 ft or 6 m]");
    book.supplies[0].longest_lead_mm = Some(2_000.0);
    assert_snapshot!(stops(&bars("500 mm", typed()), &book), @"Lead A is 5_000 mm long; the supply's plate allows 2_000 mm. [the supply's entry]");
    book.supplies[0].longest_lead_mm = None;
    book.rule_sets = vec![filled_in(3_000.0)];
    let iec = |run| Job {
        rules: "IEC/EN 1 to 10 kV".to_owned(),
        ..bars("500 mm", of(run, "3.5 m"))
    };
    for run in [
        LeadRun::MetalConduit,
        LeadRun::PlasticConduit,
        LeadRun::FreeAir,
    ] {
        assert!(
            stops(&iec(run), &book).contains("the limit is 3_000 mm"),
            "{run:?}"
        );
    }
    book.rule_sets = vec![iec_en()];
    assert_eq!(
        stops(&iec(LeadRun::MetalConduit), &book),
        "",
        "not filled in"
    );
}

#[test]
fn leads_that_take_much_of_the_current_or_trip_the_supply_are_found() {
    // 20 kHz: 400 times what 50 Hz leak.
    let electronic = |trip_ma| SupplyEntry {
        kind: Some(SupplyKind::Electronic),
        rated_ma: Some(30.0),
        rated_load_volts: Some(2_400.0),
        output_hertz: Some(20_000.0),
        trip_ma,
        ..supply(OutputEarthing::MidPoint)
    };
    let with = |a: &str, b: &str, trip_ma| {
        let wiring = Wiring {
            lead_a: a.to_owned(),
            lead_b: b.to_owned(),
            ..typed()
        };
        let (job, book) = (bars("1000 mm; 1000 mm", wiring), shop(electronic(trip_ma)));
        let leads = leads(&job, &book);
        let says: Vec<String> = leads
            .findings
            .iter()
            .map(|found| found.says.clone())
            .collect();
        (leads, says.join("\n").replace('\u{202f}', "_"))
    };
    // 800 V at either lead, 6.03 mA a metre.
    let (even, says) = with("0.4 m", "0.4 m", Some(5.0));
    near(
        even.sum_ma.expect("known"),
        400.0 * leak(0.8, 800.0),
        1e-9,
        "sum",
    );
    assert!(even.difference_ma.expect("known") < 1e-9, "they cancel");
    assert_snapshot!(says, @"Leads and jumpers leak 4.83 mA to ground in all, at worst 16.1 % of the current of a string, above 15 %: what is worked out of this circuit does not hold.");
    assert_snapshot!(even.advice.join("\n"), @r"
    Make the leads shorter: what they leak goes with their length.
    Run them with more air around: wider conduit, conduit that is not metal, or further from earthed parts, as far as the rules allow.
    ");
    let (uneven, says) = with("0.6 m", "0.1 m", Some(5.0));
    assert_snapshot!(says, @r"
    Leads and jumpers leak 4.22 mA to ground in all, at worst 14.1 % of the current of a string, above 5 %: measure the current of the tubes.
    With no fault, leads and jumpers drive 3.02 mA through the ground-fault protection, which trips at 5 mA: it may switch off with no fault.
    ");
    assert_snapshot!(uneven.advice.join("\n").replace('\u{202f}', "_"), @r"
    Make both leads equally long (A is 600 mm, B is 100 mm): what they leak then cancels at the mid-point.
    Make the leads shorter: what they leak goes with their length.
    Run them with more air around: wider conduit, conduit that is not metal, or further from earthed parts, as far as the rules allow.
    ");
    let (_, says) = with("1.5 m", "0.1 m", Some(5.0));
    assert_snapshot!(says, @r"
    Leads and jumpers leak 9.65 mA to ground in all, at worst 32.2 % of the current of a string, above 15 %: what is worked out of this circuit does not hold.
    With no fault, leads and jumpers drive 8.44 mA through the ground-fault protection, which trips at 5 mA: it would switch off with no fault.
    ");
    let (_, says) = with("0.2 m", "0.1 m", None);
    assert_snapshot!(says, @r"
    Leads and jumpers leak 1.81 mA to ground in all, at worst 6.0 % of the current of a string, above 5 %: measure the current of the tubes.
    With no fault, leads and jumpers drive 0.60 mA through the ground-fault protection; its trip current is not in the shop book, so it was not held against it.
    ");
}

#[test]
fn what_is_worked_out_for_a_sine_says_so_once() {
    let job = bars("500 mm; 500 mm", typed());
    let work = workup(&job, &shop(supply(OutputEarthing::MidPoint)));
    let sine = |found: &&Finding| found.says.contains("for a sine");
    assert_eq!(work.findings.iter().filter(sine).count(), 1);
    let electronic = SupplyEntry {
        kind: Some(SupplyKind::Electronic),
        rated_ma: Some(30.0),
        rated_load_volts: Some(1_500.0),
        ..supply(OutputEarthing::MidPoint)
    };
    let work = workup(&job, &shop(electronic));
    assert_eq!(work.findings.iter().filter(sine).count(), 0);
    let unknown = |found: &&Finding| found.says.contains("output frequency");
    let found: Vec<_> = work.findings.iter().filter(unknown).collect();
    assert_eq!(found.len(), 1);
    assert_eq!(found[0].place, Place::Supply("S".to_owned()));
    assert_eq!(work.circuits[0].leads.sum_ma, None, "no figure is made up");
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(64))]

    /// Longer leads never give the tubes more current, and what protection sees is never more than what
    /// is lost.
    #[test]
    fn a_longer_lead_never_raises_the_current(
        a in 0..20_000_u32,
        b in 0..20_000_u32,
        more in 0..20_000_u32,
        earthing in prop::sample::select(vec![
            OutputEarthing::MidPoint,
            OutputEarthing::MidPointReturn,
            OutputEarthing::OneEnd,
            OutputEarthing::Isolated,
        ]),
    ) {
        let with = |a: u32, b: u32| {
            let wiring = Wiring {
                lead_a: format!("{a} mm"),
                lead_b: format!("{b} mm"),
                ..typed()
            };
            leads(&bars("500 mm; 700 mm", wiring), &shop(supply(earthing)))
        };
        let (short, long) = (with(a, b), with(a + more, b));
        for (short, long) in short.tube.iter().zip(&long.tube) {
            prop_assert!(long <= short);
        }
        prop_assert_eq!(short.tube.len(), if earthing == OutputEarthing::MidPointReturn { 2 } else { 1 });
        for leads in [short, long] {
            let sum = leads.sum_ma.expect("known");
            prop_assert!(leads.difference_ma.is_none_or(|difference| difference <= sum + 1e-12));
        }
    }
}
