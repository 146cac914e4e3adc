//! The sentences of this room. The place is set by whoever works the circuit up.

use super::assess::{Assessment, Half, STRIKE_LOOK};
use super::chart::ChartUse;
use super::load::Operating;
use super::profile::Spot;
use super::protection::{FaultMap, Unseen};
use super::window::{Window, Zone};
use crate::book::{OutputEarthing, SupplyKind};
use crate::measure::{
    Milliamps, Volts, large_first, milliamps_shown, quoted, small_first, told_from, volts_shown,
};
use crate::rules::{EarthWord, Finding, Grade, Place, Source};
use crate::supply::Rating;
use crate::takeoff::Piece;
use crate::tube::TubeType;

fn found(grade: Grade, says: String, source: Source) -> Finding {
    Finding::new(grade, Place::Job, says, source)
}

fn source(window: &Window) -> Source {
    if window.from_plate {
        Source::entry("the supply's entry")
    } else {
        Source::model()
    }
}

/// One string of two, or the only one.
fn half_of(rating: &Rating) -> bool {
    rating.earthing == OutputEarthing::MidPointReturn
}

/// The loading in its window.
pub(super) fn zone(half: &Half, window: &Window, rating: &Rating) -> Option<Finding> {
    let percent = half.share * 100.0;
    let of_what = window.of_what(rating);
    let shown = |limit: f64| told_from(percent, limit * 100.0, 0);
    let finding = |grade, says: String, limit: f64| {
        Some(found(grade, says, source(window)).with(percent, limit * 100.0, "%"))
    };
    match half.zone {
        Zone::UnderTarget | Zone::Target | Zone::OverTarget => None,
        Zone::Light => finding(
            Grade::Look,
            format!(
                "Underloaded: running volts are {} % {of_what}, under {:.0} %; the tubes and \
                 electrodes carry nearly the short-circuit current.",
                shown(window.look_below),
                window.look_below * 100.0
            ),
            window.look_below,
        ),
        Zone::Heavy => finding(
            Grade::Look,
            format!(
                "Heavily loaded: running volts are {} % {of_what}, over {:.0} %; it may flicker or \
                 fail to strike when cold or on low mains.",
                shown(window.look_above),
                window.look_above * 100.0
            ),
            window.look_above,
        ),
        Zone::Over => match half.operating {
            Operating::Overloaded { wanted, given } => Some(
                found(
                    Grade::Stop,
                    format!(
                        "{OVERLOADED}the string wants {} where the supply gives {} {}; there is no \
                         current at which it runs.",
                        volts_shown(wanted),
                        if half_of(rating) {
                            "each of its two strings at most"
                        } else {
                            "at most"
                        },
                        volts_shown(given)
                    ),
                    source(window),
                )
                .with(wanted.volts(), given.volts(), "V"),
            ),
            Operating::Runs { gaps, .. } => finding(
                Grade::Stop,
                format!(
                    "{OVERLOADED}running volts are {percent:.0} % {of_what}, at or over {:.0} %{}.",
                    window.stop_from * 100.0,
                    if gaps {
                        "; the current has gaps and the tube flickers"
                    } else {
                        ""
                    }
                ),
                window.stop_from,
            ),
        },
    }
}

pub(super) fn overdriven(
    current: Milliamps,
    most: Milliamps,
    tube: &str,
    entry: &'static str,
) -> Finding {
    found(
        Grade::Stop,
        format!(
            "{} mA is above the {} mA that {tube} stands: more glass on it, or a supply of less current.",
            told_from(current.ma(), most.ma(), 1),
            most.ma()
        ),
        Source::entry(entry),
    )
    .with(current.ma(), most.ma(), "mA")
}

pub(super) fn overdriven_at_high_mains(current: Milliamps, most: Milliamps, tube: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "At 110 % of the input volts the current is {} mA, above the {} mA that {tube} stands.",
            told_from(current.ma(), most.ma(), 1),
            most.ma()
        ),
        Source::model(),
    )
    .with(current.ma(), most.ma(), "mA")
}

/// What the electrodes carry where a fault shorts the rest of the string.
pub(super) fn short_circuit_over_electrode(
    rating: &Rating,
    rated: Milliamps,
    electrode: &str,
) -> Finding {
    found(
        Grade::Note,
        format!(
            "A fault that shorts most of the string drives up to {} mA through the rest, above the {} \
             mA that {electrode} is rated for.",
            rating.short_circuit.ma(),
            rated.ma()
        ),
        Source::entry("the electrode's entry"),
    )
    .with(rating.short_circuit.ma(), rated.ma(), "mA")
}

/// More glass than the plate's length chart carries.
pub(super) fn chart_full(used: &ChartUse) -> Finding {
    found(
        Grade::Stop,
        format!(
            "{OVERLOADED}by the length chart of its plate the string uses up {} % of the supply, \
             electrodes counted in.",
            told_from(used.share * 100.0, 100.0, 0)
        ),
        Source::entry("the supply's entry"),
    )
    .with(used.share * 100.0, 100.0, "%")
}

/// Tube types the plate's length chart says nothing of.
pub(super) fn not_in_chart(used: &ChartUse) -> Option<Finding> {
    let names: Vec<String> = used.not_in_chart.iter().map(|name| quoted(name)).collect();
    (!names.is_empty()).then(|| {
        let rest = if used.share > 0.0 {
            format!(
                "; without it the string uses up {:.0} % of the supply",
                used.share * 100.0
            )
        } else {
            String::new()
        };
        found(
            Grade::Look,
            format!(
                "The length chart of the plate has no length for {}: of that only the volts are \
                 checked{rest}.",
                names.join(", ")
            ),
            Source::entry("the supply's entry"),
        )
    })
}

/// Tubes whose greatest current nobody gave.
pub(super) fn no_greatest_current(names: &[String]) -> Option<Finding> {
    let names: Vec<String> = names.iter().map(|name| quoted(name)).collect();
    (!names.is_empty()).then(|| {
        found(
            Grade::Note,
            format!(
                "What current {} and its electrodes stand is not in the shop book, so it is not \
                 checked.",
                names.join(", ")
            ),
            Source::entry("the tube's entry"),
        )
    })
}

/// A current that the readings of a tube do not reach, where its volts are carried on beyond them.
pub(crate) fn beyond_readings(current: Milliamps, from_ma: f64, to_ma: f64, tube: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "It runs at {}; the bench readings of {tube} reach from {from_ma} to {to_ma} mA, and say \
             little of its volts there.",
            milliamps_shown(current)
        ),
        Source::own_choice(),
    )
}

pub(super) fn too_little_current(current: Milliamps, least: Milliamps, tube: &str) -> Finding {
    found(
        Grade::Look,
        format!(
            "{} mA is under the {} mA at which {tube} runs steadily.",
            told_from(current.ma(), least.ma(), 1),
            least.ma()
        ),
        Source::entry("the tube's entry"),
    )
    .with(current.ma(), least.ma(), "mA")
}

/// The peak a string strikes from, in words.
fn peak_words(rating: &Rating) -> &'static str {
    if half_of(rating) {
        "no-load peak of one half"
    } else {
        "no-load peak"
    }
}

pub(super) fn strike(needed: Volts, peak: Volts, rating: &Rating) -> Option<Finding> {
    let grade = if needed > peak {
        Grade::Stop
    } else if needed > peak * STRIKE_LOOK {
        Grade::Look
    } else {
        return None;
    };
    Some(
        found(
            grade,
            format!(
                "Striking needs about {}; the {} is {}.",
                volts_shown(needed),
                peak_words(rating),
                volts_shown(peak)
            ),
            Source::model(),
        )
        .with(needed.volts(), peak.volts(), "V"),
    )
}

pub(super) fn low_mains(share: f64, window: &Window, rating: &Rating) -> Finding {
    found(
        Grade::Look,
        format!(
            "At 90 % of the input volts it is overloaded ({:.0} % {} it has then): it may go out \
             when the mains sag.",
            share * 100.0,
            window
                .of_what(rating)
                .replacen("of no-load", "of the no-load", 1)
        ),
        Source::model(),
    )
    .with(share * 100.0, window.stop_from * 100.0, "%")
}

pub(super) fn no_strike_at_low_mains(needed: Volts, peak: Volts, rating: &Rating) -> Finding {
    found(
        Grade::Look,
        format!(
            "At 90 % of the input volts it may not strike: that needs about {}, and the {} is then \
             {}.",
            volts_shown(needed),
            peak_words(rating),
            volts_shown(peak)
        ),
        Source::model(),
    )
    .with(needed.volts(), peak.volts(), "V")
}

pub(super) fn needs_two_strings() -> Finding {
    found(
        Grade::Stop,
        "A supply with a mid-point return carries two strings; one piece makes only one."
            .to_owned(),
        Source::model(),
    )
}

pub(super) fn electronic_shape() -> Finding {
    found(
        Grade::Note,
        "Electronic: current is taken to fall in a straight line to the rated load, and the output \
         to hold at 90 to 110 % of the input volts. The plate and a measurement know better."
            .to_owned(),
        Source::model(),
    )
}

pub(super) fn mixed() -> Finding {
    found(
        Grade::Note,
        "Neon and argon-mercury in one string share one current; the stricter window is used, and \
         the brightness of each should be judged by eye."
            .to_owned(),
        Source::practice(),
    )
}

/// What stops a circuit whose tubes take so much `off` (as in "15 % more than the default model
/// says"), as a look at the circuit that is fine without it; `settled` by what.
pub(crate) fn volts_off(worked: &Assessment, off: &str, settled: &str) -> Option<Finding> {
    let stop = worked
        .findings
        .iter()
        .find(|finding| finding.grade == Grade::Stop)?;
    let says = stop.says.trim_end_matches('.');
    let what = match (says.strip_prefix(OVERLOADED), stop.unit) {
        (Some(how), _) => format!("it is overloaded: {how}"),
        (None, "mA") => format!("it is overdriven: {says}"),
        (None, _) => format!("it will not strike: {}", small_first(says)),
    };
    Some(Finding {
        grade: Grade::Look,
        says: format!("If its tubes take {off}, {what}; {settled} settle it."),
        source: Source::model(),
        ..stop.clone()
    })
}

const OVERLOADED: &str = "Overloaded: ";

/// A place on a string in words, as seen from lead A: `30 % into “P” (piece 2)`.
fn spot_words(spot: Spot, pieces: &[(&Piece, &TubeType)]) -> String {
    let label = pieces
        .get(spot.piece)
        .map_or_else(String::new, |(piece, _)| quoted(&piece.label));
    let number = spot.piece + 1;
    match spot.along {
        along if along < 0.005 => format!("the start of {label} (piece {number})"),
        along if along > 0.995 => format!("the end of {label} (piece {number})"),
        along => format!("{:.0} % into {label} (piece {number})", along * 100.0),
    }
}

/// A stretch of a string in words, from lead A.
pub(super) fn stretch_words(unseen: &Unseen, pieces: &[(&Piece, &TubeType)]) -> String {
    format!(
        "from {} to {}, counted from lead A",
        spot_words(unseen.from_spot, pieces),
        spot_words(unseen.to_spot, pieces)
    )
}

/// From this share of the string on, what is unseen needs a person's decision. Our own choice, no
/// source.
const UNSEEN_LOOK: f64 = 0.5;

pub(super) fn unseen(
    map: &FaultMap,
    pieces: &[(&Piece, &TubeType)],
    word: EarthWord,
) -> Option<Finding> {
    let unseen = map.unseen.as_ref()?;
    let percent = unseen.share() * 100.0;
    let at_most = map.share_at_most();
    // A verdict that may flip within what is known is a look.
    let grade = if at_most >= UNSEEN_LOOK {
        Grade::Look
    } else {
        Grade::Note
    };
    let up_to = if map.widest.is_some() {
        format!(", up to {:.0} % within what is known", at_most * 100.0)
    } else {
        String::new()
    };
    Some(
        found(
            grade,
            format!(
                "{} a fault to {} {} ({percent:.0} % of the string{up_to}): insulate and inspect there.",
                if map.estimate {
                    "By a careful estimate sensing may not see"
                } else {
                    "Sensing cannot see"
                },
                word.word(),
                stretch_words(unseen, pieces)
            ),
            Source::own_choice(),
        )
        .with(at_most * 100.0, UNSEEN_LOOK * 100.0, "%"),
    )
}

/// Two unequal strings: what the mid-point carries with no fault, against the trip current.
pub(super) fn standing(map: &FaultMap, word: EarthWord) -> Option<Finding> {
    let trip = map.trip?;
    let standing = map.standing + map.taken_off;
    // Where the leads make more of it than the strings, the leads are spoken of elsewhere.
    if map.standing <= map.taken_off || standing < trip * 0.5 {
        return None;
    }
    let leads = if map.taken_off.ma() > 0.0 {
        ", the leads' leakage counted in,"
    } else {
        ""
    };
    let may = if standing >= trip {
        "A supply that senses there switches a sound sign off"
    } else {
        "A supply that senses there may switch a sound sign off"
    };
    Some(
        found(
            Grade::Look,
            format!(
                "The two strings are unequal: with no fault the mid-point of the winding carries {} \
                 mA{leads} of the {} mA at which {}-fault sensing trips. {may}; balance the strings.",
                told_from(standing.ma(), trip.ma(), 1),
                trip.ma(),
                word.word()
            ),
            Source::own_choice(),
        )
        .with(standing.ma(), trip.ma(), "mA"),
    )
}

pub(super) fn no_trip(word: EarthWord) -> Finding {
    found(
        Grade::Note,
        format!(
            "The trip current of the {}-fault protection is not in the shop book: where it cannot see \
             a fault is not worked out.",
            word.word()
        ),
        Source::entry("the supply's entry"),
    )
}

/// What a fault to earth does on this output, with its caption.
pub(super) fn earth_fault_says(
    rating: &Rating,
    map: Option<&FaultMap>,
    pieces: &[(&Piece, &TubeType)],
    word: EarthWord,
) -> (String, String) {
    let earth = word.word();
    let caption = match word {
        EarthWord::Earth => "Earth fault",
        EarthWord::Ground => "Ground fault",
    };
    let short = milliamps_shown(rating.short_circuit);
    let trips = match (rating.earth_fault_protection, rating.trip) {
        (true, _) if rating.earthing == OutputEarthing::Isolated => format!(
            "Its plate says that it has {earth}-fault protection; how that senses a fault of an output \
             that nothing holds to {earth} is for the plate to say."
        ),
        (true, Some(trip)) => {
            let time = rating
                .trip_seconds
                .map_or_else(String::new, |seconds| format!(" within {seconds} s"));
            format!(
                "Switches off on a fault to {earth} from {} mA{time}.",
                trip.ma()
            )
        }
        (true, None) => {
            format!("Switches off on a fault to {earth}; its trip current is not in the shop book.")
        }
        (false, _) => format!("No {earth}-fault protection: nothing switches off."),
    };
    let what = match rating.earthing {
        OutputEarthing::MidPoint | OutputEarthing::MidPointReturn => match map {
            Some(map) => mid_point_says(rating, map, pieces, word),
            None if rating.earthing == OutputEarthing::MidPointReturn => format!(
                "A fault to {earth} shorts the tubes between it and the return; those between its \
                 lead and the fault go on burning with up to {short}."
            ),
            None => format!(
                "A fault to {earth} at a lead drives up to the short-circuit current, {short}, \
                 through it; one in the middle of the string next to nothing."
            ),
        },
        OutputEarthing::OneEnd => format!(
            "A fault to {earth} shorts the tubes between it and the {} end; those between the live \
             lead and the fault go on burning with up to {short}. Near the {} end it carries hardly \
             more than the tubes did, and there are hardly any volts for it: whether the protection \
             tells it from the running current is for its plate to say.",
            word.joined(),
            word.joined(),
        ),
        OutputEarthing::Isolated => format!(
            "A first fault to {earth} drives only the leakage of leads and winding: the sign burns on, \
             nothing in a mid-point can see it, and the far lead then stands at up to {} to {earth}. \
             A second one shorts the tubes between the two.",
            volts_shown(rating.no_load)
        ),
    };
    (caption.to_owned(), format!("{trips} {what}"))
}

fn mid_point_says(
    rating: &Rating,
    map: &FaultMap,
    pieces: &[(&Piece, &TubeType)],
    word: EarthWord,
) -> String {
    let earth = word.word();
    let mut says = Vec::new();
    match (&map.unseen, map.trip) {
        (Some(unseen), _) => {
            says.push(format!(
                "A fault {} gives the mid-point too little: {:.0} % of the string is unseen.",
                stretch_words(unseen, pieces),
                unseen.share() * 100.0
            ));
            if let Some(widest) = &map.widest {
                says.push(format!(
                    "With mains 10 % low or high, or tubes at the ends of what is known of their \
                     volts, it is up to {:.0} %.",
                    widest.share() * 100.0
                ));
            }
            let moved = |share: f64| (share - unseen.share()).abs() >= 0.005;
            let mut moves = Vec::new();
            if moved(map.share_if_lighter) {
                moves.push(format!(
                    "a lighter string widens it ({:.0} % at four fifths of these volts)",
                    map.share_if_lighter * 100.0
                ));
            }
            if moved(map.share_if_half_trip) {
                moves.push(format!(
                    "a lower trip current narrows it ({:.0} % at half)",
                    map.share_if_half_trip * 100.0
                ));
            }
            if rating.earthing == OutputEarthing::MidPointReturn {
                moves.push("the string of more volts draws it to its side".to_owned());
            }
            if !moves.is_empty() {
                says.push(large_first(&format!("{}.", moves.join(", "))));
            }
            if map.taken_off.ma() > 0.0 {
                says.push(format!(
                    "The leads leak {} unlike each other, which may work against the fault's \
                     current and is taken off it; with equal leads it is {:.0} %.",
                    milliamps_shown(map.taken_off),
                    map.share_if_even_leads * 100.0
                ));
            }
        }
        (None, _) => says.push(
            "One near the middle of the string gives the mid-point next to nothing: no trip current \
             sees it there."
                .to_owned(),
        ),
    }
    if rating.earthing == OutputEarthing::MidPointReturn {
        says.push(
            "Taken as sensed in the mid-point of the winding. A supply that senses what flows to its \
             case apart from the return sees more; its plate must say so."
                .to_owned(),
        );
    }
    if !map.leads_known && map.trip.is_some() {
        says.push(
            "What the leads leak is not known and not taken off: the stretch may be wider."
                .to_owned(),
        );
    }
    if map.estimate {
        says.push(format!(
            "An estimate, on the careful side: both halves of an electronic supply are taken to follow \
             its droop line, in phase. Common practice (no source) has it that a fault to {earth} at \
             either end of a loaded string is seen and one near the middle may not be."
        ));
    }
    says.join(" ")
}

/// What an open tube does, with its caption.
pub(super) fn open_tube_says(rating: &Rating, word: EarthWord) -> (String, String) {
    let between = volts_shown(rating.no_load);
    let to_earth = volts_shown(rating.no_load_to_earth());
    let earth = word.word();
    let where_from = match rating.earthing {
        OutputEarthing::MidPoint | OutputEarthing::MidPointReturn => "on either side of it",
        OutputEarthing::OneEnd => "on the side of the live lead",
        OutputEarthing::Isolated => "from either side",
    };
    if rating.earthing == OutputEarthing::MidPointReturn {
        // Each string has a half of the output to itself.
        let says = if rating.open_circuit_protection {
            format!(
                "Switches off when a tube is open or broken. Until it does, and where it fails, its \
                 string is dark with up to {to_earth} across the break and to {earth}, while the other \
                 burns on."
            )
        } else {
            format!(
                "No open-circuit protection: the string of an open or broken tube is dark with up to \
                 {to_earth} across the break and to {earth}, while the other burns on."
            )
        };
        return ("Open tube".to_owned(), says);
    }
    let volts = format!("{between} between the leads and {to_earth} to {earth} {where_from}");
    let says = match (rating.open_circuit_protection, rating.kind) {
        (true, _) => format!(
            "Switches off when a tube is open or broken. Until it does, and where it fails, up to \
             {volts}."
        ),
        (false, SupplyKind::Iron) => format!(
            "No open-circuit protection: an open or broken tube leaves a dark sign with up to {volts}. \
             The input falls to the transformer's own losses, so no fuse tells."
        ),
        (false, SupplyKind::Electronic) => format!(
            "No open-circuit protection: with an open or broken tube the output may rise above its \
             plate volts; count on at least {volts}."
        ),
    };
    ("Open tube".to_owned(), says)
}

/// What the test of the supply alone shows, with its caption. None where it has no protection to test.
pub(super) fn bench_test_says(rating: &Rating, word: EarthWord) -> Option<(String, String)> {
    let earth = word.word();
    let (leads, sides) = match rating.earthing {
        OutputEarthing::Isolated if rating.earth_fault_protection => {
            return Some((
                "Bench test".to_owned(),
                format!(
                    "A fault to {earth} at one lead of an isolated output drives no current to sense: \
                     how its protection is tested is for the plate to say."
                ),
            ));
        }
        OutputEarthing::OneEnd => ("on the live lead", "there"),
        _ => ("on lead A and on lead B", "on both sides"),
    };
    let tested = match (
        rating.earth_fault_protection,
        rating.open_circuit_protection,
    ) {
        (true, true) => format!("a fault to {earth} and an open string, each {leads}"),
        (true, false) => format!("a fault to {earth} {leads}"),
        (false, true) => format!("an open string {leads}"),
        (false, false) => return None,
    };
    let cannot = match rating.earthing {
        OutputEarthing::MidPoint | OutputEarthing::MidPointReturn
            if rating.earth_fault_protection =>
        {
            " It cannot show that a fault on the string is seen: at the leads it is at its largest, in \
             the unseen stretch it stays unseen on a sound supply."
        }
        _ => " It cannot show what a fault on the string itself would do.",
    };
    Some((
        "Bench test".to_owned(),
        format!(
            "The test of the supply alone ({tested}) shows that its sensing and its switching-off work \
             {sides} (common practice, no source).{cannot}"
        ),
    ))
}

#[cfg(test)]
mod tests {
    use super::super::{Load, assess};
    use super::*;
    use crate::book::{Loading, SupplyEntry};

    fn rating(earthing: OutputEarthing) -> Rating {
        Rating::read(&SupplyEntry {
            name: "T".to_owned(),
            no_load_volts: Some(8_000.0),
            short_circuit_ma: Some(30.0),
            kind: Some(SupplyKind::Iron),
            earthing: Some(earthing),
            ..SupplyEntry::default()
        })
        .expect("a whole plate")
    }

    /// A string that takes so many volts at any current.
    fn steady(volts: f64) -> Load {
        Load {
            pair_volts: volts,
            ..Load::new()
        }
    }

    fn says(volts: f64, earthing: OutputEarthing, loading: &Loading) -> Vec<String> {
        let load = steady(volts);
        let two = [&load, &load];
        let strings = if earthing == OutputEarthing::MidPointReturn {
            &two[..]
        } else {
            &two[..1]
        };
        let mut says: Vec<String> = assess(strings, &rating(earthing), loading)
            .findings
            .into_iter()
            .map(|finding| finding.says)
            .collect();
        says.dedup();
        says
    }

    #[test]
    fn shares_say_what_they_are_of() {
        let loading = Loading::default();
        // 3 280 V are 82 % of the 4 000 V of a half.
        let halves = says(3_280.0, OutputEarthing::MidPointReturn, &loading);
        assert!(
            halves[0]
                .starts_with("Overloaded: running volts are 82 % of half the no-load volts, at"),
            "{halves:?}"
        );
        // 5 720 V are 71.5 % of 8 000 V, and 79 % of 7 200 V.
        let whole = says(5_720.0, OutputEarthing::MidPoint, &loading);
        let low = "At 90 % of the input volts it is overloaded (79 % of the no-load volts it has \
                   then): it may go out when the mains sag.";
        assert!(whole.iter().any(|says| says == low), "{whole:?}");
        let halves = says(2_860.0, OutputEarthing::MidPointReturn, &loading);
        assert!(
            halves
                .iter()
                .any(|says| says.contains("(79 % of half the no-load volts it has then)")),
            "{halves:?}"
        );
    }

    #[test]
    fn striking_on_low_mains_is_not_called_overloading() {
        // 55 % of no-load volts: striking at 2.5 times that takes 11 000 V. The peak is 11 314 V,
        // and 10 182 V at 90 % of the input volts.
        let loading = Loading {
            strike_factor: 2.5,
            ..Loading::default()
        };
        let found = says(4_400.0, OutputEarthing::MidPoint, &loading);
        assert_eq!(
            found,
            [
                "Striking needs about 11\u{202f}000 V; the no-load peak is 11\u{202f}314 V.",
                "At 90 % of the input volts it may not strike: that needs about 11\u{202f}000 V, and \
                 the no-load peak is then 10\u{202f}182 V.",
            ]
        );
    }
}
