//! What is typed of the leads of all circuits, read once.

use kurbo::{Point, Rect};

use super::{cable, finding};
use crate::book::{Book, CableEntry};
use crate::job::{Job, LeadRun, Wiring};
use crate::measure::{self, Length, Limit, length_within};
use crate::rules::{Finding, Place};

/// A length that may be typed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Typed {
    /// Nothing is.
    Nothing,
    /// What is cannot be used; a finding tells why.
    Bad,
    /// This.
    Length(Length),
}

impl Typed {
    /// Reads it; what is wrong is told at a place.
    pub(super) fn read(
        text: &str,
        limit: &Limit,
        called: &str,
        place: &Place,
        findings: &mut Vec<Finding>,
    ) -> Self {
        match length_within(text, limit) {
            Ok(None) => Self::Nothing,
            Ok(Some(length)) => Self::Length(length),
            Err(why) => {
                findings.push(finding::unreadable(called, &why).at(place.clone()));
                Self::Bad
            }
        }
    }

    const fn length(self) -> Option<Length> {
        match self {
            Self::Length(length) => Some(length),
            Self::Nothing | Self::Bad => None,
        }
    }
}

/// Lengths taken from the drawing.
#[derive(Debug, Clone, Copy)]
pub(super) struct Drawn {
    /// Where the supplies stand on the sign's plane.
    pub(super) supply: Option<Point>,
    /// What is added, as a share of the length.
    pub(super) slack: f64,
    /// What is added at the ends, millimetres.
    pub(super) ends_mm: f64,
}

/// The wiring of a job, read.
#[derive(Debug, Clone)]
pub(super) struct Setup<'a> {
    pub(super) wiring: &'a Wiring,
    /// Its cable; None: not chosen, not in the book, or its entry contradicts itself.
    pub(super) cable: Option<&'a CableEntry>,
    /// Capacitance of a metre of it as it is run.
    pub(super) pf_per_m: Option<f64>,
    /// From the middle of the cable to the nearest earthed part, outside metal conduit.
    pub(super) from_earthed: Option<Length>,
    /// None: slack or ends cannot be used, so nothing is taken from the drawing.
    pub(super) drawn: Option<Drawn>,
    pub(super) lead_a: Typed,
    pub(super) lead_b: Typed,
    pub(super) jumper: Typed,
}

impl<'a> Setup<'a> {
    pub(super) fn read(
        job: &'a Job,
        book: &'a Book,
        bounds: Rect,
        findings: &mut Vec<Finding>,
    ) -> Self {
        let wiring = &job.wiring;
        let mut read = |text: &str, limit: &Limit, called: &str| {
            Typed::read(text, limit, called, &Place::Job, findings)
        };
        // Only what the run asks for is read: a bore typed before another run was chosen is no matter.
        let conduit = wiring.run == LeadRun::MetalConduit;
        let only = |wanted: bool, text: &'a str| if wanted { text } else { "" };
        let bore = read(
            only(conduit, &wiring.conduit_bore),
            &measure::CONDUIT_BORE_MM,
            "The bore of the conduit",
        );
        let from_earthed = read(
            only(!conduit, &wiring.from_earthed),
            &measure::FROM_EARTHED_MM,
            "The distance from earthed parts",
        );
        let at = &measure::SUPPLY_PLACE_MM;
        let right = read(
            &wiring.supply_right,
            at,
            "The place of the supplies to the right",
        );
        let up = read(&wiring.supply_up, at, "The place of the supplies upwards");
        let ends = read(&wiring.ends, &measure::LEAD_ENDS_MM, "What the ends take");
        let lead = &measure::LEAD_MM;
        let lead_a = read(&wiring.lead_a, lead, "Lead A");
        let lead_b = read(&wiring.lead_b, lead, "Lead B");
        let jumper = read(&wiring.jumper, lead, "The length of jumpers");
        let supply = match (right, up) {
            (Typed::Length(right), Typed::Length(up)) => {
                Some(Point::new(bounds.x0 + right.mm(), bounds.y1 - up.mm()))
            }
            (Typed::Length(_), Typed::Nothing) | (Typed::Nothing, Typed::Length(_)) => {
                findings.push(finding::half_a_place());
                None
            }
            _ => None,
        };
        let slack_fits = measure::SLACK_PERCENT.holds(wiring.slack_percent);
        if !slack_fits {
            findings.push(finding::slack(wiring.slack_percent));
        }
        let drawn = (slack_fits && ends != Typed::Bad).then(|| Drawn {
            supply,
            slack: wiring.slack_percent / 100.0,
            ends_mm: ends.length().map_or(0.0, Length::mm),
        });
        let cable = chosen(wiring, book, findings);
        let pf_per_m = cable.and_then(|cable| {
            let worked = cable::pf_per_m(cable, wiring.run, bore.length(), from_earthed.length());
            worked
                .map_err(|why| findings.push(finding::no_capacitance(&cable.name, why)))
                .ok()
        });
        Self {
            wiring,
            cable,
            pf_per_m,
            from_earthed: from_earthed.length(),
            drawn,
            lead_a,
            lead_b,
            jumper,
        }
    }
}

/// The cable chosen, where it can be worked with.
fn chosen<'b>(
    wiring: &Wiring,
    book: &'b Book,
    findings: &mut Vec<Finding>,
) -> Option<&'b CableEntry> {
    if wiring.cable.is_empty() {
        findings.push(finding::no_cable());
        return None;
    }
    let mut named = book
        .cables
        .iter()
        .filter(|cable| cable.name == wiring.cable);
    let Some(cable) = named.next() else {
        findings.push(finding::cable_gone(&wiring.cable));
        return None;
    };
    if named.next().is_some() {
        findings.push(finding::two_cables(&cable.name));
    }
    let wrong = cable::contradictions(cable);
    if !wrong.is_empty() {
        findings.push(finding::cable_contradicts(&cable.name, &wrong));
        return None;
    }
    if cable.rated_volts.is_none() {
        findings.push(finding::rated_volts_unknown(&cable.name));
    }
    Some(cable)
}
