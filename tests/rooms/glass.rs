//! What must hold of the glass whatever the artwork: as long when turned, mirrored, drawn the other
//! way round or in another order; growing with the size; pieces that sum to the strokes. All through
//! the SVG reader, as a person's file goes. How strokes are cut into pieces is not looked at here.

use proptest::prelude::*;
use tubewright::book::Allowances;
use tubewright::drawing::svg;
use tubewright::job::{ArtworkFile, ArtworkLines, ArtworkRow, Job, Row, StrokesRow};
use tubewright::takeoff::{Takeoff, takeoff};

/// The tube of each colour; the third is not tube.
const TUBES: [(&str, &str); 3] = [("#ff0000", "12 mm"), ("#0000ff", "10 mm"), ("#888888", "")];

/// A stroke: a colour by its number, whether it is made of cubics, and its points, three to each
/// cubic behind the first.
#[derive(Clone, Debug)]
struct Stroke {
    colour: usize,
    cubics: bool,
    points: Vec<(f64, f64)>,
}

impl Stroke {
    fn reversed(&self) -> Self {
        let points = self.points.iter().rev().copied().collect();
        Self {
            points,
            ..self.clone()
        }
    }

    fn path(&self) -> String {
        let at = |&(x, y): &(f64, f64)| format!("{x} {y}");
        let begin = at(&self.points[0]);
        let rest: Vec<String> = self.points[1..].iter().map(at).collect();
        let letter = if self.cubics { 'C' } else { 'L' };
        let (colour, _) = TUBES[self.colour];
        format!(
            "<path stroke='{colour}' d='M{begin} {letter}{}'/>",
            rest.join(" ")
        )
    }
}

/// A drawing of a few strokes, in millimetres, between 50 mm and 2 m wide.
fn drawing() -> impl Strategy<Value = Vec<Stroke>> {
    let point = || (0..200_000_u32, 0..200_000_u32).prop_map(|(x, y)| (hundredth(x), hundredth(y)));
    let stroke = (0..3_usize, any::<bool>(), 1..4_usize)
        .prop_flat_map(move |(colour, cubics, pieces)| {
            let points = if cubics { 3 * pieces } else { pieces } + 1;
            (
                Just(colour),
                Just(cubics),
                prop::collection::vec(point(), points),
            )
        })
        .prop_map(|(colour, cubics, points)| Stroke {
            colour,
            cubics,
            points,
        });
    prop::collection::vec(stroke, 1..8).prop_map(|mut all| {
        // Wide enough for a sign, in tube, whatever else is there.
        all.push(Stroke {
            colour: 0,
            cubics: false,
            points: vec![(0.0, 0.0), (60.0, 70.0)],
        });
        all
    })
}

fn hundredth(count: u32) -> f64 {
    f64::from(count) / 100.0
}

/// The drawing as a file whose unit is 1 mm, and the glass of it at a width; empty: as drawn.
fn glass(strokes: &[Stroke], transform: &str, width: &str) -> (String, Takeoff) {
    let paths: Vec<String> = strokes.iter().map(Stroke::path).collect();
    let text = format!(
        "<svg xmlns='http://www.w3.org/2000/svg' width='2000mm' viewBox='0 0 2000 2000'>\
         <g fill='none' transform='{transform}'>{}</g></svg>",
        paths.concat()
    );
    let lines = TUBES.iter().map(|(colour, tube)| ArtworkLines {
        colour: Some((*colour).to_owned()),
        layer: None,
        tube: (*tube).to_owned(),
        ..ArtworkLines::default()
    });
    let row = ArtworkRow {
        label: "Ornament".to_owned(),
        file: "ornament.svg".to_owned(),
        width: width.to_owned(),
        lines: lines.collect(),
        ..ArtworkRow::default()
    };
    let job = Job {
        rows: vec![Row::Artwork(row)],
        artwork: vec![ArtworkFile {
            name: "ornament.svg".to_owned(),
            text: text.as_str().into(),
        }],
        ..Job::default()
    };
    let off = takeoff(&job, &Allowances::default());
    (text, off)
}

/// Lit glass of a tube, mm.
fn lit(off: &Takeoff, tube: &str) -> f64 {
    let pieces = off.pieces.iter().filter(|piece| piece.tube == tube);
    pieces.fold(0.0, |sum, piece| sum + piece.lit.mm())
}

/// Painted-out glass, mm.
fn hidden(off: &Takeoff) -> f64 {
    let pieces = off.pieces.iter();
    pieces.fold(0.0, |sum, piece| sum + piece.hidden.mm())
}

fn near(found: f64, wanted: f64) -> bool {
    (found - wanted).abs() <= 1e-9 * wanted.max(1.0)
}

/// Lit glass of each tube and the painted-out glass alike; the number of pieces too.
fn alike(found: &Takeoff, wanted: &Takeoff, scale: f64) -> Result<(), TestCaseError> {
    for (_, tube) in TUBES {
        let (found, wanted) = (lit(found, tube), scale * lit(wanted, tube));
        prop_assert!(
            near(found, wanted),
            "{tube}: {found} mm lit, not {wanted} mm"
        );
    }
    // A piece of up to ten strokes is run through the shortest way, and drawings here have fewer.
    let (found_hidden, wanted_hidden) = (hidden(found), scale * hidden(wanted));
    prop_assert!(
        (found_hidden - wanted_hidden).abs() <= 1e-6 * wanted_hidden.max(1.0),
        "{found_hidden} mm painted out, not {wanted_hidden} mm"
    );
    prop_assert_eq!(found.pieces.len(), wanted.pieces.len());
    Ok(())
}

/// A shuffle by the numbers in `by`.
fn shuffled(strokes: &[Stroke], by: &[prop::sample::Index]) -> Vec<Stroke> {
    let mut rest = strokes.to_vec();
    let mut out = Vec::new();
    let mut by = by.iter().cycle();
    while let (false, Some(next)) = (rest.is_empty(), by.next()) {
        out.push(rest.remove(next.index(rest.len())));
    }
    out
}

proptest! {
    #[test]
    fn turned_and_mirrored_glass_is_as_long(
        strokes in drawing(),
        degrees in -360.0..360.0_f64,
        x in -1e4..1e4_f64,
        y in -1e4..1e4_f64,
    ) {
        let (_, plain) = glass(&strokes, "", "");
        for transform in [
            "scale(-1,1)".to_owned(),
            "scale(1,-1)".to_owned(),
            format!("rotate({degrees})"),
            format!("translate({x} {y}) rotate({degrees} {y} {x}) scale(-1 1)"),
        ] {
            alike(&glass(&strokes, &transform, "").1, &plain, 1.0)?;
        }
    }

    #[test]
    fn the_way_and_the_order_it_was_drawn_in_do_not_matter(
        strokes in drawing(),
        reverse in prop::collection::vec(any::<bool>(), 9),
        order in prop::collection::vec(any::<prop::sample::Index>(), 9),
    ) {
        let (_, plain) = glass(&strokes, "", "");
        let backwards: Vec<Stroke> = strokes
            .iter()
            .zip(reverse.iter().cycle())
            .map(|(stroke, &reverse)| if reverse { stroke.reversed() } else { stroke.clone() })
            .collect();
        alike(&glass(&backwards, "", "").1, &plain, 1.0)?;
        alike(&glass(&shuffled(&backwards, &order), "", "").1, &plain, 1.0)?;
    }

    #[test]
    fn glass_grows_with_the_drawing_and_with_its_width(
        strokes in drawing(),
        scale in 0.2..10.0_f64,
        width in 20..20_000_u32,
    ) {
        let (text, plain) = glass(&strokes, "", "");
        let drawn = svg::read(&text).expect("a drawing").bounds;
        // What becomes higher than 50 m is refused.
        let width = f64::from(width).min(50_000.0 / drawn.height() * drawn.width()).floor();
        prop_assume!(width >= 10.0);
        let (_, scaled) = glass(&strokes, &format!("scale({scale})"), "");
        let (_, typed) = glass(&strokes, "", &format!("{width} mm"));
        for (_, tube) in TUBES {
            let wanted = scale * lit(&plain, tube);
            let found = lit(&scaled, tube);
            prop_assert!(near(found, wanted), "{tube}: {found}, not {wanted}");
            // The width is that of all that is drawn, tube or not.
            let wanted = width / drawn.width() * lit(&plain, tube);
            let found = lit(&typed, tube);
            prop_assert!(near(found, wanted), "{tube}: {found}, not {wanted} at {width} mm");
        }
    }

    #[test]
    fn pieces_sum_to_the_strokes_and_what_is_said_to_be_added(strokes in drawing()) {
        let (text, off) = glass(&strokes, "", "");
        let art = svg::read(&text).expect("a drawing");
        for (colour, tube) in TUBES.iter().filter(|(_, tube)| !tube.is_empty()) {
            let drawn = art.strokes.iter().filter(|stroke| stroke.colour.as_deref() == Some(colour));
            let drawn = drawn.fold(0.0, |sum, stroke| sum + stroke.length());
            let found = lit(&off, tube);
            prop_assert!(near(found, drawn), "{tube}: {found} mm lit, lines of {drawn} mm");
        }
        prop_assert!(off.pieces.iter().all(|piece| !piece.tube.is_empty()), "grey is no tube");
        let tails = 2.0 * Allowances::default().tail_mm;
        let mut glass_mm = 0.0;
        for piece in &off.pieces {
            prop_assert_eq!(piece.tails.mm(), tails);
            let jumps = piece.jumps.iter().fold(0.0, |sum, jump| sum + kurbo::Shape::perimeter(&jump.path, 1e-9));
            prop_assert!(near(piece.hidden.mm(), jumps), "{} {jumps}", piece.hidden.mm());
            prop_assert!(near(piece.column().mm(), piece.lit.mm() + piece.hidden.mm()));
            prop_assert!(near(piece.glass().mm(), piece.column().mm() + tails));
            glass_mm += piece.glass().mm();
        }
        prop_assert!(near(off.rows[0].lit.mm(), lit(&off, "12 mm") + lit(&off, "10 mm")));
        prop_assert!(near(off.rows[0].glass.mm(), glass_mm));
    }

    #[test]
    fn strokes_that_are_typed_may_stand_in_any_order(
        lengths in prop::collection::vec(50..2_000_u32, 1..6),
        order in prop::collection::vec(any::<prop::sample::Index>(), 6),
    ) {
        let typed = |lengths: &[u32]| {
            let all: Vec<String> = lengths.iter().map(|mm| format!("{mm} mm")).collect();
            let row = StrokesRow {
                label: "bar".to_owned(),
                strokes: all.join(" + "),
                tube: "t".to_owned(),
                ..StrokesRow::default()
            };
            let job = Job { rows: vec![Row::Strokes(row)], ..Job::default() };
            takeoff(&job, &Allowances::default())
        };
        let mut rest = lengths.clone();
        let mut other = Vec::new();
        for index in order.iter().cycle().take(lengths.len()) {
            other.push(rest.remove(index.index(rest.len())));
        }
        let (one, other) = (typed(&lengths), typed(&other));
        let sum: u32 = lengths.iter().sum();
        prop_assert!(near(lit(&one, "t"), f64::from(sum)), "{}", lit(&one, "t"));
        prop_assert!(near(lit(&other, "t"), f64::from(sum)), "{}", lit(&other, "t"));
    }
}
