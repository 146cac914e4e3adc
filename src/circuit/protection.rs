//! What the protection of a supply sees of a string, and what it cannot.

use super::assess::{Assessment, MAINS_SPREAD};
use super::fault::{MidPoint, Strings};
use super::finding;
use super::joint::insulation_says;
use super::profile::{Profile, Spot};
use crate::book::OutputEarthing;
use crate::measure::{Milliamps, Volts};
use crate::rules::{EarthWord, Finding};
use crate::supply::Rating;
use crate::takeoff::Piece;
use crate::tube::TubeType;

/// Places along the string at which the mid-point's current is worked out for the plot.
const POINTS: u32 = 120;
/// The lighter load that is worked out beside, as a share of the running volts.
const LIGHTER: f64 = 0.8;

/// What protection sees of a circuit.
#[derive(Debug, Clone, PartialEq)]
pub struct Protection {
    /// The mid-point's current against the place of a fault; None where no mid-point is sensed.
    pub map: Option<FaultMap>,
    /// Sentences, each with a caption.
    pub says: Vec<(String, String)>,
    /// What was found, without a place yet.
    pub findings: Vec<Finding>,
}

/// The current in the earthed mid-point for a fault to earth at each place of the string.
#[derive(Debug, Clone, PartialEq)]
pub struct FaultMap {
    /// Share of all running volts from lead A, and the current there.
    pub points: Vec<(f64, Milliamps)>,
    /// Trip current of the plate.
    pub trip: Option<Milliamps>,
    /// Leakage of the leads that may work against the fault's current, and is taken off it.
    pub taken_off: Milliamps,
    /// Whether that leakage is known; where it is not, nothing is taken off and the stretch may be
    /// wider.
    pub leads_known: bool,
    /// The mid-point's current with no fault, of two unequal strings.
    pub standing: Milliamps,
    /// The stretch in which a fault gives less than the trip current; None where there is none, or
    /// the trip current is not known.
    pub unseen: Option<Unseen>,
    /// That stretch in words: from where to where.
    pub unseen_says: Option<String>,
    /// The widest it gets at 90 and 110 % of the input volts and at either end of what the volts of
    /// the tubes are known to; None where that is no wider.
    pub widest: Option<Unseen>,
    /// The share unseen if the string took 80 % of the volts.
    pub share_if_lighter: f64,
    /// The share unseen with half the trip current.
    pub share_if_half_trip: f64,
    /// The share unseen with leads that leak alike.
    pub share_if_even_leads: f64,
    /// Whether the figures are an estimate only.
    pub estimate: bool,
}

/// Whether a fault to earth at some place is sensed.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Sensed {
    /// The trip current is not known.
    NotKnown,
    /// It is not.
    No,
    /// Within what is known of mains and tubes it may not be.
    MaybeNot,
    /// It is, as far as the model goes; what the leads leak is not counted.
    YesWithoutLeads,
    /// It is, as far as the model goes.
    Yes,
}

impl Sensed {
    /// The same in words.
    pub const fn words(self) -> &'static str {
        match self {
            Self::NotKnown => "not known",
            Self::No => "not sensed",
            Self::MaybeNot => "may not be sensed",
            Self::YesWithoutLeads => "sensed, leads not counted",
            Self::Yes => "sensed",
        }
    }
}

/// A stretch of the string.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unseen {
    /// Where it begins, as a share of all running volts from lead A.
    pub from: f64,
    /// Where it ends.
    pub to: f64,
    /// The same as places on pieces.
    pub from_spot: Spot,
    /// The same as places on pieces.
    pub to_spot: Spot,
}

impl Unseen {
    /// How much of the string it is, as a share of its volts.
    pub fn share(&self) -> f64 {
        self.to - self.from
    }

    /// Whether a place, as a share of all running volts from lead A, lies in it.
    pub fn holds(&self, share: f64) -> bool {
        (self.from..=self.to).contains(&share)
    }
}

impl FaultMap {
    /// Whether a fault at a place, a share of all running volts from lead A, is sensed.
    pub fn sensed(&self, share: f64) -> Sensed {
        let in_it = |stretch: Option<Unseen>| stretch.is_some_and(|stretch| stretch.holds(share));
        if self.trip.is_none() {
            Sensed::NotKnown
        } else if in_it(self.unseen) {
            Sensed::No
        } else if in_it(self.widest) {
            Sensed::MaybeNot
        } else if self.leads_known {
            Sensed::Yes
        } else {
            Sensed::YesWithoutLeads
        }
    }

    /// The share of the string unseen at its widest.
    pub fn share_at_most(&self) -> f64 {
        let share = |stretch: Option<Unseen>| stretch.map_or(0.0, |stretch| stretch.share());
        share(self.unseen).max(share(self.widest))
    }
}

/// Works out what protection sees. `uneven` is the difference of what the leads of the two sides leak;
/// None where that is not known.
pub fn protect(
    pieces: &[(&Piece, &TubeType)],
    assessment: &Assessment,
    profile: &Profile,
    rating: &Rating,
    uneven: Option<Milliamps>,
    word: EarthWord,
) -> Protection {
    let map = rating
        .earth_fault_protection
        .then(|| fault_map(pieces, assessment, profile, rating, uneven))
        .flatten();
    let mut findings = Vec::new();
    if let Some(map) = &map {
        findings.extend(finding::unseen(map, pieces, word));
        findings.extend(finding::standing(map, word));
        if map.trip.is_none() {
            findings.push(finding::no_trip(word));
        }
    }
    let mut says = vec![
        finding::earth_fault_says(rating, map.as_ref(), pieces, word),
        finding::open_tube_says(rating, word),
    ];
    says.extend(finding::bench_test_says(rating, word));
    says.push(insulation_says(profile.no_load, word));
    Protection {
        map,
        says,
        findings,
    }
}

fn fault_map(
    pieces: &[(&Piece, &TubeType)],
    assessment: &Assessment,
    profile: &Profile,
    rating: &Rating,
    uneven: Option<Milliamps>,
) -> Option<FaultMap> {
    let mid_point = MidPoint::of(rating, 1.0)?;
    let returned = rating.earthing == OutputEarthing::MidPointReturn;
    let strings = |first: Volts, second: Option<Volts>| Strings {
        first,
        second: second.filter(|_| returned),
    };
    let each =
        |of: &dyn Fn(usize) -> Volts| strings(of(0), (assessment.halves.len() > 1).then(|| of(1)));
    let now = each(&|half| assessment.halves[half].operating.volts());
    let taken_off = Milliamps::from_ma(uneven.map_or(0.0, |uneven| uneven.ma().abs()));
    let threshold = |trip: Milliamps| trip + taken_off;
    let unseen = |strings: Strings, mid_point: &MidPoint, trip: Milliamps| {
        let (from, to) = strings.unseen(mid_point, trip)?;
        Some(Unseen {
            from,
            to,
            from_spot: profile.spot(from)?,
            to_spot: profile.spot(to)?,
        })
    };
    let share = |strings: Strings, trip: Milliamps| {
        unseen(strings, &mid_point, trip).map_or(0.0, |unseen| unseen.share())
    };
    let trip = rating.trip;
    let here = trip.and_then(|trip| unseen(now, &mid_point, threshold(trip)));
    let widest = trip.and_then(|trip| {
        let low = MidPoint::of(rating, 1.0 - MAINS_SPREAD)?;
        let high = MidPoint::of(rating, 1.0 + MAINS_SPREAD)?;
        let mut others = vec![
            (
                each(&|half| assessment.halves[half].at_low_mains.volts()),
                low,
            ),
            (
                each(&|half| assessment.halves[half].at_high_mains.volts()),
                high,
            ),
        ];
        if assessment.halves.iter().all(|half| half.band.is_some()) {
            let end = |less: bool| {
                each(&|half| {
                    let half = &assessment.halves[half];
                    half.band
                        .map_or(half.operating, |(low, high)| if less { low } else { high })
                        .volts()
                })
            };
            others.extend([(end(true), mid_point), (end(false), mid_point)]);
        }
        others
            .into_iter()
            .filter_map(|(strings, mid_point)| unseen(strings, &mid_point, threshold(trip)))
            .max_by(|a, b| a.share().total_cmp(&b.share()))
            .filter(|other| other.share() > here.map_or(0.0, |here| here.share()) + 0.005)
    });
    let lighter = strings(
        now.first * LIGHTER,
        now.second.map(|second| second * LIGHTER),
    );
    Some(FaultMap {
        points: now.along(&mid_point, POINTS),
        trip,
        taken_off,
        leads_known: uneven.is_some(),
        standing: now.second.map_or(Milliamps::ZERO, |second| {
            mid_point.current(now.first, second)
        }),
        unseen: here,
        unseen_says: here.map(|here| finding::stretch_words(&here, pieces)),
        widest,
        share_if_lighter: trip.map_or(0.0, |trip| share(lighter, threshold(trip))),
        share_if_half_trip: trip.map_or(0.0, |trip| share(now, threshold(trip * 0.5))),
        share_if_even_leads: trip.map_or(0.0, |trip| share(now, trip)),
        estimate: mid_point.estimate(),
    })
}
