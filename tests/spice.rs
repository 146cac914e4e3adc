//! The core against the circuit simulator ngspice: random strings on random supplies, and random faults
//! to earth on mid-point earthed outputs.
//!
//! The netlists are written here: a sine source behind an inductance, each tube a voltage
//! E tanh(i / i₀), which is a square wave but for the short time the current takes to turn round. So
//! the simulator integrates the circuit in time and knows nothing of the closed forms it is held
//! against. `cargo xtask test` installs ngspice and says where it is (NGSPICE); the cases are drawn
//! from a fixed seed, so a failure can be run again.

#![allow(
    clippy::disallowed_methods,
    reason = "the ban is for the core; this test hands netlists to another program"
)]

use std::path::PathBuf;
use std::process::Command;

use tubewright::book::{Allowances, Gas, OutputEarthing, SupplyEntry, SupplyKind, TubeEntry};
use tubewright::circuit::{Curve, Load, MidPoint, Operating, Strings, operate};
use tubewright::job::{Job, Pieces, Row, StrokesRow};
use tubewright::measure::Volts;
use tubewright::supply::Rating;
use tubewright::takeoff::takeoff;
use tubewright::tube::TubeType;

/// Cases of each kind.
const CASES: usize = 24;
/// Periods of the mains until the current is steady, and over which it is then taken.
const SETTLE: f64 = 60.0;
const TAKEN: f64 = 10.0;
/// The current at which a tube's volts have turned round, as a share of the short-circuit current.
const TURN: f64 = 1.0 / 3_000.0;
/// How far the simulator may be from the core, as a share of the figure. The share of the
/// short-circuit current beside it is for what the turning round and the windings' resistance make of
/// a figure near nothing.
const NEAR: f64 = 0.005;
const NEAR_NOTHING: f64 = 0.001;

/// Numbers that look random and are the same each time (the generator `splitmix64`, public domain).
struct Draw(u64);

impl Draw {
    fn next(&mut self) -> f64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        let bits = u32::try_from((z ^ (z >> 31)) >> 32).expect("32 bits");
        f64::from(bits) / f64::from(u32::MAX)
    }

    fn between(&mut self, least: f64, most: f64) -> f64 {
        least + (most - least) * self.next()
    }

    fn one_of<T: Copy>(&mut self, of: &[T]) -> T {
        let mut at = 0;
        let mut left = self.next();
        #[allow(clippy::cast_precision_loss, reason = "a handful")]
        let each = 1.0 / of.len() as f64;
        while left > each && at + 1 < of.len() {
            (left, at) = (left - each, at + 1);
        }
        of[at]
    }
}

fn ngspice() -> PathBuf {
    std::env::var_os("NGSPICE").map_or_else(|| PathBuf::from("ngspice"), PathBuf::from)
}

/// Runs a netlist; the measured figures by name.
fn simulate(name: &str, netlist: String) -> impl Fn(&str) -> f64 + use<> {
    let file = std::env::temp_dir().join(format!("tubewright-{}-{name}.cir", std::process::id()));
    std::fs::write(&file, &netlist).expect("the netlist can be written");
    let out = Command::new(ngspice())
        .arg("-b")
        .arg(&file)
        .output()
        .expect("ngspice runs: install it, or let `cargo xtask test` do so");
    let said = String::from_utf8_lossy(&out.stdout).into_owned();
    let erred = String::from_utf8_lossy(&out.stderr).into_owned();
    std::fs::remove_file(&file).expect("the netlist is taken away again");
    move |figure| {
        said.lines()
            .find_map(|line| {
                let (name, value) = line.split_once('=')?;
                (name.trim() == figure).then_some(value)
            })
            .and_then(|value| value.split_ascii_whitespace().next()?.parse().ok())
            .unwrap_or_else(|| panic!("ngspice gave no {figure}:\n{said}\n{erred}\n{netlist}"))
    }
}

/// A half winding or the whole: source, reactance and resistance between two nodes.
fn winding(from: &str, to: &str, no_load: f64, short_ma: f64, hertz: f64) -> String {
    let reactance = no_load / (short_ma / 1000.0);
    let inductance = reactance / (2.0 * std::f64::consts::PI * hertz);
    let peak = no_load * std::f64::consts::SQRT_2;
    let resistance = reactance * 5e-4;
    format!(
        "V{from} {from}x {from} SIN(0 {peak} {hertz} 0 0 90)\n\
         L{from} {from}x {from}y {inductance} IC=0\n\
         R{from} {from}y {to} {resistance}\n"
    )
}

fn tube(name: &str, from: &str, to: &str, volts: f64, turn: f64) -> String {
    format!(
        "Vs{name} {from} {name}s 0\nBt{name} {name}s {to} V={{{volts}}}*tanh(i(Vs{name})/{{{turn}}})\n"
    )
}

fn run_for(hertz: f64, measured: &str) -> String {
    let (from, to) = (SETTLE / hertz, (SETTLE + TAKEN) / hertz);
    let step = 1.0 / hertz / 2_000.0;
    format!(
        ".options reltol=1e-4 abstol=1e-9 vntol=1e-3 method=gear\n\
         .tran {step} {to} {from} {step} uic\n.control\nrun\n{}.endc\n.end\n",
        measured.replace("WINDOW", &format!("from={from} to={to}"))
    )
}

#[track_caller]
fn near(what: &str, core: f64, simulated: f64, whole: f64) {
    assert!(
        (core - simulated).abs() <= NEAR * core.abs() + NEAR_NOTHING * whole,
        "{what}: core {core}, ngspice {simulated}"
    );
}

/// A random string of one to six pieces, of one or two tube types.
fn string(draw: &mut Draw) -> Load {
    let mut load = Load::new();
    let kinds = if draw.next() < 0.4 { 2 } else { 1 };
    for _ in 0..kinds {
        let outer_mm = draw.one_of(&[10.0, 12.0, 15.0, 18.0]);
        let tube = TubeType::read(&TubeEntry {
            gas: draw.one_of(&[Gas::Neon, Gas::ArgonMercury]),
            outer_mm: Some(outer_mm),
            ..TubeEntry::default()
        })
        .expect("a whole entry");
        let lengths: Vec<String> = (0..draw.one_of(&[1, 2, 3]))
            .map(|_| format!("{:.0} mm", draw.between(300.0, 2_300.0)))
            .collect();
        let job = Job {
            rows: vec![Row::Strokes(StrokesRow {
                strokes: lengths.join("; "),
                pieces: Pieces {
                    keep_long: true,
                    ..Pieces::default()
                },
                ..StrokesRow::default()
            })],
            ..Job::default()
        };
        for piece in takeoff(&job, &Allowances::default()).pieces {
            load.add(&piece, &tube, false);
        }
    }
    load
}

/// A supply on which the string takes about `share` of the no-load volts at three quarters of the
/// short-circuit current.
fn supply(draw: &mut Draw, load: &Load, share: f64) -> Rating {
    let short_ma = draw.between(18.0, 60.0);
    let no_load = load.volts(0.75 * short_ma) / share;
    Rating::read(&SupplyEntry {
        name: "drawn".to_owned(),
        kind: Some(SupplyKind::Iron),
        earthing: Some(OutputEarthing::MidPoint),
        no_load_volts: Some(no_load),
        short_circuit_ma: Some(short_ma),
        ..SupplyEntry::default()
    })
    .expect("a whole plate")
}

#[test]
fn strings_run_where_the_simulator_has_them() {
    let mut draw = Draw(4);
    let (mut compared, mut with_gaps) = (0, 0);
    while compared < CASES {
        let load = string(&mut draw);
        let share = draw.between(0.25, 0.85);
        let rating = supply(&mut draw, &load, share);
        let hertz = draw.one_of(&[50.0, 60.0]);
        let (no_load, short_ma) = (rating.no_load.volts(), rating.short_circuit.ma());
        let Operating::Runs {
            current,
            running,
            watts,
            gaps,
        } = operate(&load, &Curve::of(&rating, 1.0, 1.0))
        else {
            continue;
        };
        let netlist = format!(
            "* a string of {} V on {no_load} V, {short_ma} mA\n{}{}{}",
            running.volts(),
            winding("0", "p", no_load, short_ma, hertz),
            tube("t", "p", "0", running.volts(), short_ma / 1000.0 * TURN),
            run_for(
                hertz,
                "let pt=v(p)*i(Vst)\nmeas tran irms RMS i(Vst) WINDOW\nmeas tran pw AVG pt WINDOW\n"
            )
        );
        let figure = simulate(&format!("string-{compared}"), netlist);
        let what = format!(
            "case {compared}, {:.3} of no-load",
            running.volts() / no_load
        );
        near(&what, current.ma(), figure("irms") * 1000.0, short_ma);
        near(&what, watts, figure("pw"), no_load * short_ma / 1000.0);
        compared += 1;
        with_gaps += usize::from(gaps);
    }
    assert!(with_gaps > 0, "some of them run with gaps");
}

#[test]
fn the_mid_point_carries_what_the_simulator_says() {
    let mut draw = Draw(7);
    let mut compared = 0;
    while compared < CASES {
        let load = string(&mut draw);
        let share = draw.between(0.25, 0.75);
        let rating = supply(&mut draw, &load, share);
        let hertz = draw.one_of(&[50.0, 60.0]);
        let place = draw.next();
        let (no_load, short_ma) = (rating.no_load.volts(), rating.short_circuit.ma());
        let Operating::Runs { running, .. } = operate(&load, &Curve::of(&rating, 1.0, 1.0)) else {
            continue;
        };
        let strings = Strings {
            first: running,
            second: None,
        };
        let mid_point = MidPoint::of(&rating, 1.0).expect("a mid-point");
        let core = strings.at(&mid_point, place).ma();
        let (a, b) = (running * place, running * (1.0 - place));
        let figure = simulate(
            &format!("fault-{compared}"),
            fault(a, b, no_load, short_ma, hertz),
        );
        near(
            &format!(
                "case {compared}, fault at {place:.3} of {:.3} of no-load",
                running.volts() / no_load
            ),
            core,
            figure("imid") * 1000.0,
            short_ma,
        );
        compared += 1;
    }
}

/// Two half windings, a fault to earth that parts the string in `a` and `b`.
fn fault(a: Volts, b: Volts, no_load: f64, short_ma: f64, hertz: f64) -> String {
    let half = no_load / 2.0;
    let turn = short_ma / 1000.0 * TURN;
    // Half B is wound on from the mid-point the other way, so that the halves add up lead to lead.
    format!(
        "* a fault to earth, {} V from lead A and {} V from lead B\nVmid m 0 0\n{}{}{}{}Rf q 0 1\n{}",
        a.volts(),
        b.volts(),
        winding("m", "p", half, short_ma, hertz),
        tube("a", "p", "q", a.volts(), turn),
        tube("b", "q", "r", b.volts(), turn),
        winding("r", "m", half, short_ma, hertz),
        run_for(hertz, "meas tran imid RMS i(Vmid) WINDOW\n")
    )
}
