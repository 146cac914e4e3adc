//! The joints of a string in words, and what their insulation must stand.

use super::profile::{Profile, insulation_class};
use super::protection::{FaultMap, Sensed};
use crate::measure::{Volts, quoted, volts_shown};
use crate::rules::EarthWord;
use crate::takeoff::Piece;

impl Profile {
    /// What a joint is called, by its pieces in order from lead A: `Joint 3, between “P” and “E”`.
    /// None where there is no such joint.
    pub fn joint_named(&self, at: usize, pieces: &[&Piece]) -> Option<String> {
        let joint = self.joints.get(at)?;
        let label = |at: usize| {
            pieces
                .get(at)
                .map_or_else(String::new, |piece| quoted(&piece.label))
        };
        Some(match (at, self.spans.len()) {
            (0, _) => format!("Lead A, at {}", label(0)),
            (at, last) if at == last => format!("Lead B, at {}", label(last - 1)),
            (at, _) => {
                let what = if joint.mid_point {
                    "Mid-point return".to_owned()
                } else {
                    format!("Joint {at}")
                };
                format!("{what}, between {} and {}", label(at - 1), label(at))
            }
        })
    }

    /// A joint with its volts to earth and the insulation it wants, as a sentence. None where there is
    /// no such joint.
    pub fn joint_says(
        &self,
        at: usize,
        pieces: &[&Piece],
        map: Option<&FaultMap>,
        word: EarthWord,
    ) -> Option<String> {
        let joint = self.joints.get(at)?;
        let named = self.joint_named(at, pieces)?;
        let earth = word.word();
        let no_load = volts_shown(self.no_load);
        let running = volts_shown(Volts::from_volts(joint.running.volts().abs()));
        let volts = match (self.held, self.runs) {
            (true, true) => {
                format!("{running} to {earth} running, {no_load} with a broken tube")
            }
            (true, false) => format!(
                "{running} to {earth} if it ran, which it does not; {no_load} with a broken tube"
            ),
            (false, _) => format!(
                "up to {no_load} to {earth} at any time, since nothing holds the output to {earth}"
            ),
        };
        let not_seen = match map.map(|map| map.sensed(joint.share)) {
            Some(sensed @ (Sensed::No | Sensed::MaybeNot)) => {
                let verb = if sensed == Sensed::No { "is " } else { "" };
                format!(" A fault to {earth} here {verb}{}.", sensed.words())
            }
            _ => String::new(),
        };
        Some(format!(
            "{named}: {volts}: {}.{not_seen}",
            class_words(self.no_load)
        ))
    }
}

/// The class of insulation in words.
fn class_words(no_load: Volts) -> String {
    insulation_class(no_load).map_or_else(
        || "above every class of cable that NEC 600.32(B) names".to_owned(),
        |kv| format!("insulation of the {kv} kV class at least"),
    )
}

/// What leads, sleeves and housings must stand, with its caption.
pub(super) fn insulation_says(no_load: Volts, word: EarthWord) -> (String, String) {
    (
        "Insulation".to_owned(),
        format!(
            "Leads, sleeves and housings must stand the no-load volts, {} to {}, at every joint, since a \
             broken tube lets the voltage rise to them: {}. NEC 600.32(B) names cable of 5, 10 and 15 kV \
             and does not say which goes with which supply; that is derived here from the no-load volts, \
             and the code and the makers of cable and sleeves decide.",
            volts_shown(no_load),
            word.word(),
            class_words(no_load)
        ),
    )
}

#[cfg(test)]
mod tests {
    use super::super::profile::{Joint, Span, Spot};
    use super::super::protection::Unseen;
    use super::*;
    use crate::job::{Job, Row, StrokesRow};
    use crate::measure::Milliamps;

    /// Two pieces of 1 kV each on an output with its mid-point earthed.
    fn two() -> (Vec<Piece>, Profile) {
        let job = Job {
            rows: vec![Row::Strokes(StrokesRow {
                label: "a".to_owned(),
                strokes: "1 m".to_owned(),
                count: 2,
                tube: "t".to_owned(),
                ..StrokesRow::default()
            })],
            ..Job::default()
        };
        let pieces = crate::takeoff::takeoff(&job, &crate::book::Allowances::default()).pieces;
        let joint = |share: f64| Joint {
            share,
            running: Volts::from_volts(1_000.0 - 2_000.0 * share),
            mid_point: false,
        };
        let span = Span {
            volts: Volts::from_volts(1_000.0),
            pair: Volts::from_volts(200.0),
        };
        let profile = Profile {
            joints: vec![joint(0.0), joint(0.5), joint(1.0)],
            spans: vec![span; 2],
            total: Volts::from_volts(2_000.0),
            runs: true,
            no_load: Volts::from_volts(5_001.0),
            held: true,
        };
        (pieces, profile)
    }

    fn says(profile: &Profile, pieces: &[Piece], at: usize, map: Option<&FaultMap>) -> String {
        let pieces: Vec<&Piece> = pieces.iter().collect();
        let says = profile.joint_says(at, &pieces, map, EarthWord::Ground);
        says.unwrap_or_default().replace('\u{202f}', " ")
    }

    #[test]
    fn a_joint_says_its_volts_and_its_insulation() {
        let (pieces, profile) = two();
        assert_eq!(
            says(&profile, &pieces, 0, None),
            "Lead A, at “a (1 of 2)”: 1 000 V to ground running, 5 001 V with a broken tube: insulation of the \
             10 kV class at least."
        );
        let spot = Spot {
            piece: 0,
            along: 0.5,
        };
        let stretch = |from: f64, to: f64| {
            Some(Unseen {
                from,
                to,
                from_spot: spot,
                to_spot: spot,
            })
        };
        let mut map = FaultMap {
            points: Vec::new(),
            trip: Some(Milliamps::from_ma(15.0)),
            taken_off: Milliamps::ZERO,
            leads_known: true,
            standing: Milliamps::ZERO,
            unseen: stretch(0.4, 0.6),
            unseen_says: None,
            widest: None,
            share_if_lighter: 0.3,
            share_if_half_trip: 0.1,
            share_if_even_leads: 0.2,
            estimate: false,
        };
        assert_eq!(
            says(&profile, &pieces, 1, Some(&map)),
            "Joint 1, between “a (1 of 2)” and “a (2 of 2)”: 0 V to ground running, 5 001 V with a broken tube: \
             insulation of the 10 kV class at least. A fault to ground here is not sensed."
        );
        assert!(
            !says(&profile, &pieces, 2, Some(&map)).contains("not sensed"),
            "lead B lies outside"
        );
        assert_eq!(map.sensed(1.0), Sensed::Yes);
        map.widest = stretch(0.0, 1.0);
        assert!(
            says(&profile, &pieces, 2, Some(&map))
                .ends_with("A fault to ground here may not be sensed.")
        );
        map.leads_known = false;
        map.widest = None;
        assert_eq!(map.sensed(1.0), Sensed::YesWithoutLeads);
        map.trip = None;
        assert_eq!(map.sensed(0.5), Sensed::NotKnown);
        assert_eq!(says(&profile, &pieces, 3, None), "", "no such joint");
    }

    #[test]
    fn a_joint_does_not_say_volts_nobody_knows() {
        let (pieces, profile) = two();
        let dead = Profile {
            runs: false,
            ..profile.clone()
        };
        assert!(says(&dead, &pieces, 0, None).contains(
            "1 000 V to ground if it ran, which it does not; 5 001 V with a broken tube"
        ));
        let adrift = Profile {
            held: false,
            no_load: Volts::from_volts(15_001.0),
            ..profile
        };
        assert_eq!(
            says(&adrift, &pieces, 2, None),
            "Lead B, at “a (2 of 2)”: up to 15 001 V to ground at any time, since nothing holds the output to \
             ground: above every class of cable that NEC 600.32(B) names."
        );
    }

    #[test]
    fn the_class_is_never_below_the_volts() {
        for (volts, class) in [
            (0.0, Some(5)),
            (5_000.0, Some(5)),
            (5_000.1, Some(10)),
            (10_000.0, Some(10)),
            (15_000.0, Some(15)),
            (15_000.1, None),
            (f64::NAN, None),
        ] {
            assert_eq!(
                insulation_class(Volts::from_volts(volts)),
                class,
                "{volts} V"
            );
        }
    }
}
