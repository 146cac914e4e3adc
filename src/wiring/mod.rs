//! High-voltage leads and jumpers: how long, what they leak to earth, and what limits say of them.
//!
//! Lead A goes from the supply to the first electrode of its circuit, lead B from the last one back;
//! jumpers go from piece to piece. With a mid-point return a third lead joins the mid-point to the joint
//! between both strings. A length is taken from what is typed for the circuit, else from what is typed
//! for all, else straight from the drawing with slack and ends, where the place of the supplies is given.
//! What is not known stays unknown and is told of.
//!
//! Each lead and jumper leaks `I = 2 π f C' l V` with its running volts to earth: a mid-point that is
//! earthed has them fall from half the string's volts at either lead to nothing in the middle; of one
//! earthed end lead A is the live one; an isolated output may stand at all its no-load volts. What leaks
//! on either side of an earthed mid-point goes round opposite ways there, so that protection sees the
//! difference, while the tubes lose the sum. That all of it is taken from the current of the tubes is
//! careful: it runs ahead of that current, and no place of the string loses both sides.

mod cable;
pub mod capacitance;
mod finding;
mod lengths;
mod limits;
mod path;
mod setup;

use kurbo::Rect;

use crate::book::{Book, OutputEarthing};
use crate::circuit::{Assessment, Operating, Profile};
use crate::job::Job;
use crate::measure::{Length, Milliamps, Volts};
use crate::rules::{EarthWord, Finding, RuleSet};
use crate::supply::Rating;
use crate::takeoff::Piece;
use crate::tube::TubeType;

pub use cable::contradictions as cable_contradictions;
use lengths::Measured;
use setup::Setup;

/// Share of the tube's current that its leads may take before a person has to look.
pub const LEAK_LOOK: f64 = 0.05;
/// Share from which on the worked current says nothing of the sign.
pub const LEAK_STOP: f64 = 0.15;
/// Share of the trip current that leads may drive through the protection before a person has to look.
pub const TRIP_LOOK: f64 = 0.50;

/// A circuit whose leads are worked out.
#[derive(Debug, Clone, Copy)]
pub struct Strung<'a> {
    /// Its pieces with their tube types, in order.
    pub pieces: &'a [(&'a Piece, &'a TubeType)],
    /// How many of them are in the first string; all but with a mid-point return.
    pub first_string: usize,
    /// Its supply.
    pub rating: &'a Rating,
    /// Worked up, without leads.
    pub assessment: &'a Assessment,
    /// Its volts to earth.
    pub profile: &'a Profile,
}

/// The leads of all circuits.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Wired {
    /// One for each circuit, in order.
    pub circuits: Vec<Leads>,
    /// What is true of all of them, at the job.
    pub findings: Vec<Finding>,
}

/// The leads and jumpers of one circuit.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Leads {
    /// Lead A, the jumpers in the order of the pieces, lead B, and the return where there is one.
    pub sections: Vec<Section>,
    /// Of each piece, whether its second electrode is the one nearer lead A, as the shortest jumpers
    /// have it; empty where nothing was taken from the drawing, and pieces are wired as drawn.
    pub turned: Vec<bool>,
    /// Capacitance of a metre of its cable as it is run, picofarads; None: not known.
    pub pf_per_m: Option<f64>,
    /// Output frequency of its supply.
    pub hertz: Option<f64>,
    /// What all sections leak, milliamperes rms: lost from the tubes. None: of some it is not known.
    pub sum_ma: Option<f64>,
    /// How much more one side of the earthed point leaks than the other: what protection sees with no
    /// fault. None: not known, or nothing of the output is earthed.
    pub difference_ma: Option<f64>,
    /// The greatest share of the current of a string that its sections take.
    pub share: Option<f64>,
    /// The current of each string less all that its sections leak.
    pub tube: Vec<Milliamps>,
    /// What is left of the trip current beside the difference, milliamperes; below 0 it trips.
    pub trip_margin_ma: Option<f64>,
    /// What would help, in sentences; empty where nothing has to.
    pub advice: Vec<String>,
    /// Findings at this circuit.
    pub findings: Vec<Finding>,
}

/// One run of cable.
#[derive(Debug, Clone, PartialEq)]
pub struct Section {
    /// Which.
    pub what: What,
    /// How long; None: not given.
    pub length: Option<Length>,
    /// Where the length is from.
    pub from: LengthFrom,
    /// Running volts to earth.
    pub to_earth: Volts,
    /// Its capacitance to earth, picofarads.
    pub pf: Option<f64>,
    /// What it leaks, milliamperes rms.
    pub ma: Option<f64>,
}

/// Which run of cable.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum What {
    /// From the supply to the first electrode.
    LeadA,
    /// From a piece, counted among the circuit's, to the next.
    Jumper(usize),
    /// From the last electrode back.
    LeadB,
    /// From the mid-point to the joint between both strings.
    Return,
}

/// Where a length is from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LengthFrom {
    /// Typed for this circuit.
    Circuit,
    /// Typed for all circuits.
    All,
    /// Straight from the drawing, with slack and ends.
    Drawing,
    /// Not given, or not so that it can be read.
    NotGiven,
}

impl Leads {
    /// Whether a piece, counted along the string, has its second electrode nearer lead A.
    pub fn is_turned(&self, piece: usize) -> bool {
        self.turned.get(piece).copied().unwrap_or_default()
    }

    /// One of its sections.
    pub fn section(&self, what: What) -> Option<&Section> {
        self.sections.iter().find(|section| section.what == what)
    }

    /// Length of all its cable; None where some of it is not known.
    pub fn cable(&self) -> Option<Length> {
        self.sections.iter().map(|section| section.length).sum()
    }
}

/// Works out the leads of the circuits of a plan. `bounds` is the sign's box, which the place of the
/// supplies is measured from.
pub fn wire(
    job: &Job,
    book: &Book,
    rules: Option<&RuleSet>,
    bounds: Rect,
    circuits: &[Strung],
) -> Wired {
    if circuits.is_empty() {
        return Wired::default();
    }
    if job.wiring.is_usual() {
        return Wired {
            circuits: circuits
                .iter()
                .map(|circuit| {
                    let measured = Measured::nothing(circuit);
                    leaks(circuit, &measured, None)
                })
                .collect(),
            findings: vec![finding::not_described()],
        };
    }
    let word = rules.map_or_else(EarthWord::default, |rules| rules.earth_word);
    let mut wired = Wired::default();
    let setup = Setup::read(job, book, bounds, &mut wired.findings);
    for (number, circuit) in circuits.iter().enumerate() {
        let mut findings = Vec::new();
        let (measured, turned) = lengths::measured(&setup, job, circuit, number, &mut findings);
        let mut leads = leaks(circuit, &measured, setup.pf_per_m);
        leads.turned = turned;
        leads.findings = findings;
        limits::leakage(&mut leads, circuit.rating, word);
        limits::circuit(&mut leads, &setup, circuit.rating, rules, word);
        wired.circuits.push(leads);
    }
    lengths::unmatched(&job.wiring, circuits, &mut wired.findings);
    limits::all(
        &setup,
        &wired.circuits,
        circuits,
        rules,
        &mut wired.findings,
    );
    wired
}

/// What the sections of a circuit leak. `measured` are lead A, the jumpers, lead B and, with a mid-point
/// return, the return.
fn leaks(circuit: &Strung, measured: &[Measured], pf_per_m: Option<f64>) -> Leads {
    let hertz = circuit.rating.output_hertz;
    let ends = ends(circuit);
    let jumpers = (0..circuit.pieces.len().saturating_sub(1)).map(What::Jumper);
    let what = core::iter::once(What::LeadA)
        .chain(jumpers)
        .chain([What::LeadB, What::Return]);
    let sections: Vec<Section> = what
        .zip(measured)
        .map(|(what, measured)| {
            let to_earth = match what {
                What::LeadA => ends.first().copied().unwrap_or_default(),
                What::Jumper(piece) => ends.get(piece + 1).copied().unwrap_or_default(),
                What::LeadB => ends.last().copied().unwrap_or_default(),
                What::Return => End::default(),
            };
            let pf = pf_per_m
                .zip(measured.length)
                .map(|(pf, long)| pf * long.m());
            // At no volts nothing leaks, however long it is.
            let ma = if to_earth.volts == 0.0 {
                Some(0.0)
            } else {
                pf.zip(hertz)
                    .map(|(pf, hertz)| leakage_ma(pf, hertz, to_earth.volts))
            };
            Section {
                what,
                length: measured.length,
                from: measured.from,
                to_earth: Volts::from_volts(to_earth.volts),
                pf,
                ma,
            }
        })
        .collect();
    // The return leaks nothing, so there is an end for every section that does.
    let leak: Vec<(End, Option<f64>)> = ends
        .into_iter()
        .zip(sections.iter().map(|section| section.ma))
        .collect();
    let of_side = |wanted: &dyn Fn(&End) -> bool| -> Option<f64> {
        let side = leak.iter().filter(|(end, _)| wanted(end));
        side.map(|&(_, ma)| ma).sum()
    };
    let sum_ma = of_side(&|_| true);
    let difference_ma = match circuit.rating.earthing {
        OutputEarthing::Isolated => None,
        OutputEarthing::MidPoint | OutputEarthing::MidPointReturn | OutputEarthing::OneEnd => {
            let (one, other) = (of_side(&|end| !end.beyond), of_side(&|end| end.beyond));
            one.zip(other).map(|(one, other)| (one - other).abs())
        }
    };
    let mut leads = Leads {
        sections,
        pf_per_m,
        hertz,
        sum_ma,
        difference_ma,
        trip_margin_ma: circuit
            .rating
            .trip
            .filter(|_| circuit.rating.earth_fault_protection)
            .zip(difference_ma)
            .map(|(trip, difference)| trip.ma() - difference),
        ..Leads::default()
    };
    let strings = circuit.assessment.halves.iter().enumerate();
    for (string, half) in strings {
        let Operating::Runs { current, .. } = half.operating else {
            continue;
        };
        let Some(lost) = of_side(&|end| end.string == string) else {
            continue;
        };
        let share = lost / current.ma();
        leads.share = Some(leads.share.map_or(share, |known: f64| known.max(share)));
        let left = (current.ma() - lost).max(0.0);
        leads.tube.push(Milliamps::from_ma(left));
    }
    leads
}

/// Milliamperes rms through a capacitance in picofarads at a frequency in hertz and volts rms, of a
/// sine: `2 π f C V`.
pub fn leakage_ma(pf: f64, hertz: f64, volts: f64) -> f64 {
    core::f64::consts::TAU * hertz * pf * volts * 1e-9
}

/// Where a section hangs on its string.
#[derive(Debug, Clone, Copy, Default)]
struct End {
    /// Running volts to earth.
    volts: f64,
    /// Whether it is on the side of lead B, beyond the earthed point.
    beyond: bool,
    /// Which string loses what leaks there.
    string: usize,
}

/// The ends of lead A, the jumpers in order, and lead B.
fn ends(circuit: &Strung) -> Vec<End> {
    let joints = &circuit.profile.joints;
    let returned = joints.iter().position(|joint| joint.mid_point);
    joints
        .iter()
        .enumerate()
        .map(|(at, joint)| {
            let volts = joint.running.volts();
            // Where the string is at earth, floats leave a trace of a volt.
            let at_earth = joint.mid_point || volts.abs() < 1e-6;
            End {
                volts: if at_earth { 0.0 } else { volts.abs() },
                beyond: volts < 0.0,
                string: usize::from(returned.is_some_and(|returned| at > returned)),
            }
        })
        .collect()
}
