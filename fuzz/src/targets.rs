//! What must hold of anything that is read: a drawing or a sentence, no panic, nothing endless, no
//! figure that is none, and output that is bounded whatever comes in. Each panics where it does not.

#![allow(
    unreachable_pub,
    reason = "also a private module of the tests of the core"
)]
#![allow(
    clippy::redundant_closure_for_method_calls,
    reason = "the type of the method is of a crate that is not needed here otherwise"
)]

use tubewright::book::Allowances;
use tubewright::drawing::outline::{Font, Join, inset};
use tubewright::drawing::{Artwork, dxf as dxf_file, svg as svg_file};
use tubewright::job::{ArtworkFile, ArtworkLines, ArtworkRow, Job, Row};
use tubewright::measure::{self, LengthUnit};
use tubewright::takeoff::takeoff;

/// Most lines and curves of a drawing, by both readers of artwork.
const MOST_SEGMENTS: usize = 200_000;
/// Most things not read that are named, and a few words on the rest.
const MOST_UNREAD: usize = 1_100;
/// Longest sentence, in bytes; what is quoted in it is cut short.
const LONGEST: usize = 600;
/// Drawings of more strokes are read but not taken off: that has its own limits and takes its time.
const MOST_TAKEN_OFF: usize = 2_000;

/// Drawings of more strokes are not inset.
const MOST_INSET: usize = 200;

/// A name and what is run.
pub type Target = (&'static str, fn(&[u8]));

/// What a target is called, and the target.
pub const TARGETS: [Target; 4] = [
    ("svg", svg),
    ("dxf", dxf),
    ("font", font),
    ("length", length),
];

/// An SVG file.
pub fn svg(bytes: &[u8]) {
    let text = String::from_utf8_lossy(bytes);
    match svg_file::read(&text) {
        Ok(art) => {
            drawing(&art);
            glass(&art, &text);
        }
        Err(why) => sentence(&why),
    }
}

/// A DXF file.
pub fn dxf(bytes: &[u8]) {
    match dxf_file::read(bytes) {
        Ok(art) => {
            drawing(&art);
            // Rows hold text. What begins like SVG is read as such there.
            let text = std::str::from_utf8(bytes).ok();
            let text = text.filter(|text| {
                let text = text.trim_start_matches('\u{feff}').trim_start();
                !text.starts_with('<')
            });
            if let Some(text) = text {
                glass(&art, text);
            }
        }
        Err(why) => sentence(&why),
    }
}

/// A font file.
pub fn font(bytes: &[u8]) {
    let font = match Font::read(bytes) {
        Ok(font) => font,
        Err(why) => return sentence(&why),
    };
    font.notes().iter().for_each(|note| sentence(note));
    assert!(font.name().chars().count() <= 80);
    let text = "HAVO é8&\u{301}g";
    let shaped = font.shape(text, 100.0);
    assert!(shaped.bounds.is_finite(), "{:?}", shaped.bounds);
    assert!(shaped.letters.len() + shaped.missing.len() <= text.chars().count());
    for letter in &shaped.letters {
        assert!(letter.contours.iter().all(|path| path.is_finite()));
    }
    // The first letter alone: an inset takes the time of its crossings.
    if let Some(letter) = shaped.letters.first() {
        for join in [Join::Mitre, Join::Round] {
            let found = inset(&letter.contours, 3.0, join);
            assert!(found.paths.iter().all(|path| path.is_finite()));
        }
    }
}

/// What a person types as a length, and every other typed figure.
pub fn length(bytes: &[u8]) {
    let text = String::from_utf8_lossy(bytes);
    let characters = text.chars().count();
    let failed = |error: &measure::ReadError| {
        sentence(&error.to_string());
        assert!(error.at() <= characters, "{} of {characters}", error.at());
    };
    for bare in [LengthUnit::Millimetres, LengthUnit::Inches] {
        let read = measure::length(&text, bare);
        match &read {
            Ok(length) => {
                let mm = length.length().mm();
                assert!(mm.is_finite() && mm >= 0.0, "{mm}");
            }
            Err(error) => failed(error),
        }
        // Written out with its units it is the same wherever it is opened.
        let written = measure::with_units(&text, bare);
        assert_eq!(measure::with_units(&written, bare), written);
        for other in [LengthUnit::Millimetres, LengthUnit::Inches] {
            if let Ok(length) = &read {
                assert_eq!(
                    measure::length(&written, other).as_ref(),
                    Ok(length),
                    "{written}"
                );
            }
        }
        if let Some((count, each)) = measure::repeated(&text, bare) {
            assert!(count > 1);
            assert!(each.length().mm().is_finite());
        }
    }
    for unit in ["V", "mA", "VA", "Hz", "s", "%", "V/m", "mm", ""] {
        match measure::figure(&text, unit) {
            Ok(figure) => assert!(figure.is_finite() && figure >= 0.0, "{figure}"),
            Err(error) => failed(&error),
        }
    }
    match measure::money(&text) {
        Ok(sum) => assert!(!sum.is_sign_negative() || sum.is_zero(), "{sum}"),
        Err(error) => failed(&error),
    }
}

/// One sentence, short and without control characters.
fn sentence(says: &str) {
    assert!(!says.is_empty() && says.len() <= LONGEST, "{says}");
    assert!(!says.contains(char::is_control), "{says:?}");
}

/// A drawing whose figures are figures, no larger than may be.
fn drawing(art: &Artwork) {
    assert!(art.length().is_finite(), "{}", art.length());
    assert!(art.bounds.is_finite(), "{:?}", art.bounds);
    assert!(art.mm_per_unit.is_none_or(|mm| mm.is_finite() && mm > 0.0));
    let segments: usize = art
        .strokes
        .iter()
        .map(|stroke| stroke.path.segments().count())
        .sum();
    // The closing line of a closed stroke is not counted by the readers.
    assert!(segments <= 2 * MOST_SEGMENTS, "{segments}");
    assert!(art.unread.len() <= MOST_UNREAD, "{}", art.unread.len());
    for unread in &art.unread {
        sentence(&unread.element);
        sentence(&unread.why);
    }
    for stroke in &art.strokes {
        assert!(stroke.length() > 0.0, "{}", stroke.element);
        sentence(&stroke.element);
    }
}

/// The glass of a drawing is as long as its lines, and no figure of it is none; so too where the tube
/// lies inside the areas.
fn glass(art: &Artwork, text: &str) {
    if art.strokes.len() > MOST_TAKEN_OFF {
        return;
    }
    let lit = taken_off(art, text, "");
    if let Some(lit) = lit {
        let wanted = art.length() * 1_000.0 / art.bounds.width();
        assert!(
            (lit / wanted - 1.0).abs() < 1e-6,
            "{lit} mm of glass, lines of {wanted} mm"
        );
    }
    // An inset takes the time of the crossings of all areas.
    if art.strokes.len() <= MOST_INSET && art.strokes.iter().any(|stroke| stroke.area.is_some()) {
        taken_off(art, text, "3 mm");
    }
}

/// Lit glass of a drawing 1 m wide, all of it tube, mm; none where no piece is made.
fn taken_off(art: &Artwork, text: &str, inset: &str) -> Option<f64> {
    let lines = art.groups().into_iter().map(|group| ArtworkLines {
        colour: group.colour,
        layer: group.layer,
        tube: "t".to_owned(),
        inset: inset.to_owned(),
    });
    let row = ArtworkRow {
        label: "Ornament".to_owned(),
        file: "file".to_owned(),
        width: "1 m".to_owned(),
        lines: lines.collect(),
        ..ArtworkRow::default()
    };
    let job = Job {
        rows: vec![Row::Artwork(row)],
        artwork: vec![ArtworkFile {
            name: "file".to_owned(),
            text: text.into(),
        }],
        ..Job::default()
    };
    let off = takeoff(&job, &Allowances::default());
    off.findings
        .iter()
        .for_each(|finding| sentence(&finding.says));
    assert!(off.bounds.is_finite(), "{:?}", off.bounds);
    let mut lit = 0.0;
    for piece in &off.pieces {
        assert!(piece.glass().mm().is_finite() && piece.hidden.mm() >= 0.0);
        lit += piece.lit.mm();
    }
    (!off.pieces.is_empty()).then_some(lit)
}
