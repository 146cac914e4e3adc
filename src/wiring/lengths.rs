//! How long each section is: typed for its circuit, typed for all, or taken from the drawing.

use std::collections::{BTreeMap, BTreeSet};

use super::path::{Counts, Straight, shortest};
use super::setup::{Setup, Typed};
use super::{LengthFrom, Strung, finding};
use crate::book::OutputEarthing;
use crate::job::{CircuitLeads, Job, Row, Wiring};
use crate::measure::{self, Length};
use crate::rules::{Finding, Place};
use crate::takeoff::Piece;

/// A length and where it is from.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Measured {
    pub(super) length: Option<Length>,
    pub(super) from: LengthFrom,
}

impl Measured {
    pub(super) const NOT_GIVEN: Self = Self {
        length: None,
        from: LengthFrom::NotGiven,
    };

    /// Lead A, jumpers, lead B and the return of a circuit of which nothing is given.
    pub(super) fn nothing(circuit: &Strung) -> Vec<Self> {
        let sections = circuit.pieces.len() + 1 + usize::from(second_from(circuit).is_some());
        vec![Self::NOT_GIVEN; sections]
    }
}

/// The first piece of the second string, with a mid-point return.
fn second_from(circuit: &Strung) -> Option<usize> {
    let inside = (1..circuit.pieces.len()).contains(&circuit.first_string);
    let with_return = circuit.rating.earthing == OutputEarthing::MidPointReturn;
    (with_return && inside).then_some(circuit.first_string)
}

/// Lead A, the jumpers, lead B and, with a mid-point return, the return; and of each piece whether its
/// drawn end is the one nearer lead A.
pub(super) fn measured(
    setup: &Setup,
    job: &Job,
    circuit: &Strung,
    number: usize,
    findings: &mut Vec<Finding>,
) -> (Vec<Measured>, Vec<bool>) {
    let label = first_label(circuit);
    let own = typed_for(setup.wiring)
        .iter()
        .find(|own| own.first == label);
    let mut own = |of: fn(&CircuitLeads) -> &str, called: &str| {
        let text = own.map_or("", of);
        let place = Place::Circuit(number);
        Typed::read(text, &measure::LEAD_MM, called, &place, findings)
    };
    let own_a = own(|own| own.a.as_str(), "Lead A of this circuit");
    let own_b = own(|own| own.b.as_str(), "Lead B of this circuit");
    let typed = |own: Typed, all: Typed| match (own, all) {
        (Typed::Length(length), _) => Some(Measured {
            length: Some(length),
            from: LengthFrom::Circuit,
        }),
        (Typed::Nothing, Typed::Length(length)) => Some(Measured {
            length: Some(length),
            from: LengthFrom::All,
        }),
        (Typed::Bad, _) | (Typed::Nothing, Typed::Bad) => Some(Measured::NOT_GIVEN),
        (Typed::Nothing, Typed::Nothing) => None,
    };
    let a = typed(own_a, setup.lead_a);
    let b = typed(own_b, setup.lead_b);
    let jumper = typed(Typed::Nothing, setup.jumper);
    let counts = Counts {
        a: a.is_none(),
        b: b.is_none(),
        jumpers: jumper.is_none(),
    };
    let places: Vec<_> = circuit
        .pieces
        .iter()
        .map(|(piece, _)| has_place(job, piece).then_some(piece.electrodes))
        .collect();
    let way = setup.drawn.map_or_else(Straight::default, |drawn| {
        shortest(&places, drawn.supply, second_from(circuit), counts)
    });
    let drawn = |straight: Option<f64>| {
        straight
            .zip(setup.drawn)
            .map_or(Measured::NOT_GIVEN, |(mm, drawn)| Measured {
                length: Some(Length::from_mm(mm * (1.0 + drawn.slack) + drawn.ends_mm)),
                from: LengthFrom::Drawing,
            })
    };
    let jumpers = (1..circuit.pieces.len())
        .map(|at| jumper.unwrap_or_else(|| drawn(way.jumpers.get(at - 1).copied().flatten())));
    let mut sections = vec![a.unwrap_or_else(|| drawn(way.a))];
    sections.extend(jumpers);
    sections.push(b.unwrap_or_else(|| drawn(way.b)));
    if second_from(circuit).is_some() {
        sections.push(drawn(way.back));
    }
    (sections, way.turned)
}

/// Whether a piece lies on the drawing where it will hang. Pieces given by the lengths of their strokes
/// are drawn as bars one under the other, wherever they hang.
pub(super) fn has_place(job: &Job, piece: &Piece) -> bool {
    !matches!(job.rows.get(piece.row), Some(Row::Strokes(_)))
}

/// The label of a circuit's first piece.
fn first_label<'a>(circuit: &Strung<'a>) -> &'a str {
    circuit
        .pieces
        .first()
        .map_or("", |(piece, _)| piece.label.as_str())
}

/// What is typed for single circuits: no more of it than a job may have pieces.
fn typed_for(wiring: &Wiring) -> &[CircuitLeads] {
    #[allow(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        reason = "a whole number of the table of limits"
    )]
    let most = measure::PIECES.most as usize;
    &wiring.circuits[..wiring.circuits.len().min(most)]
}

/// What is typed for circuits there are not, for several alike, or twice.
pub(super) fn unmatched(wiring: &Wiring, circuits: &[Strung], findings: &mut Vec<Finding>) {
    let mut beginning: BTreeMap<&str, usize> = BTreeMap::new();
    for circuit in circuits {
        *beginning.entry(first_label(circuit)).or_default() += 1;
    }
    let (mut gone, mut twice, mut several) = (Vec::new(), Vec::new(), Vec::new());
    let mut seen = BTreeSet::new();
    for own in typed_for(wiring) {
        if own.a.trim().is_empty() && own.b.trim().is_empty() {
            continue;
        }
        let first = own.first.as_str();
        match (seen.insert(first), beginning.get(first)) {
            (false, _) => twice.push(first),
            (true, None) => gone.push(first),
            (true, Some(1)) => {}
            (true, Some(_)) => several.push(first),
        }
    }
    findings.extend(finding::no_such_circuits(&gone));
    findings.extend(finding::typed_twice(&twice));
    findings.extend(finding::several_circuits(&several));
}
