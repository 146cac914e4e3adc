//! How long the core takes where a person waits for it: after every key stroke.

use std::fmt::Write;
use std::hint::black_box;

use criterion::{Criterion, criterion_group, criterion_main};
use rust_decimal::Decimal;
use tubewright::book::{
    Allowances, Book, Loading, OutputEarthing, SupplyEntry, SupplyKind, starter,
};
use tubewright::circuit::{Curve, Load, Operating, assess, operate, profile, protect};
use tubewright::drawing::svg;
use tubewright::job::{Job, Row, StrokesRow, TextRow, Wish};
use tubewright::measure::{Length, LengthUnit, Milliamps, length};
use tubewright::plan::{Candidate, Task, plan};
use tubewright::rules::EarthWord;
use tubewright::supply::Rating;
use tubewright::takeoff::{Piece, takeoff};
use tubewright::tube::TubeType;
use tubewright::workup;

const NEON: &str = "12 mm neon";

/// Invented supplies of all sorts, 2 to 15 kV, 18 to 60 mA.
fn supplies(count: u32) -> Vec<SupplyEntry> {
    use OutputEarthing::{MidPoint, MidPointReturn, OneEnd};
    (0..count)
        .map(|at| {
            let no_load = f64::from(2_000 + 13_000 * at / count);
            let short_ma = [18.0, 30.0, 30.0, 60.0][at as usize % 4];
            let electronic = at % 5 == 4;
            SupplyEntry {
                name: format!("supply {at}"),
                kind: Some(if electronic {
                    SupplyKind::Electronic
                } else {
                    SupplyKind::Iron
                }),
                no_load_volts: Some(no_load),
                short_circuit_ma: Some(short_ma),
                rated_ma: electronic.then_some(0.9 * short_ma),
                rated_load_volts: electronic.then_some(0.7 * no_load),
                earthing: Some([MidPoint, MidPoint, MidPointReturn, OneEnd][at as usize % 4]),
                earth_fault_protection: true,
                open_circuit_protection: true,
                price: Some(Decimal::from(50 + at * 7 % 200)),
                ..SupplyEntry::default()
            }
        })
        .collect()
}

/// A sign of 200 letters: ten rows of twenty.
fn sign() -> Job {
    let row = |height: u32| {
        Row::Text(TextRow {
            text: "OPEN ALL NIGHT EVERY DAY".to_owned(),
            height: format!("{height} mm"),
            face: "sans".to_owned(),
            tube: NEON.to_owned(),
            count: 1,
            ..TextRow::default()
        })
    };
    let rows = (0..10).map(|at| row(150 + 20 * at)).collect();
    Job {
        rows,
        rules: "Shop rules".to_owned(),
        ..Job::default()
    }
}

/// 2 000 pieces of 200 mm to 1.8 m, no two neighbours alike.
fn pieces() -> Vec<Piece> {
    let lengths: Vec<String> = (0..2_000_u32)
        .map(|at| format!("{} mm", 200 + at * 617 % 1_600))
        .collect();
    let row = Row::Strokes(StrokesRow {
        label: "bar".to_owned(),
        strokes: lengths.join("; "),
        tube: NEON.to_owned(),
        count: 1,
        ..StrokesRow::default()
    });
    let off = takeoff(
        &Job {
            rows: vec![row],
            ..Job::default()
        },
        &Allowances::default(),
    );
    assert_eq!(off.pieces.len(), 2_000, "every length was read");
    off.pieces
}

fn work_up(c: &mut Criterion) {
    let (job, book) = (
        sign(),
        Book {
            supplies: supplies(40),
            ..starter()
        },
    );
    let work = workup(&job, &book);
    assert_eq!(work.takeoff.pieces.len(), 200, "as named");
    assert!(
        work.left_over.is_empty() && work.circuits.len() > 5,
        "a plan was made"
    );
    c.bench_function("workup, 200 letters, 40 supplies", |b| {
        b.iter(|| workup(black_box(&job), black_box(&book)));
    });
}

fn planning(c: &mut Criterion) {
    let entries = starter().tubes;
    let entry = entries
        .iter()
        .find(|tube| tube.name == NEON)
        .expect("a tube of the starter book");
    let tube = TubeType::read(entry).expect("a whole tube");
    let glass = pieces();
    let pieces: Vec<(&Piece, &TubeType)> = glass.iter().map(|piece| (piece, &tube)).collect();
    let candidates: Vec<Candidate> = supplies(60)
        .iter()
        .enumerate()
        .map(|(entry, supply)| Candidate {
            entry,
            rating: Rating::read(supply).expect("a whole nameplate"),
            look: false,
        })
        .collect();
    let loading = Loading::default();
    for (wish, name) in [
        (Wish::FewestSupplies, "fewest"),
        (Wish::LowestPrice, "cheapest"),
    ] {
        let task = Task {
            pieces: &pieces,
            candidates: &candidates,
            loading: &loading,
            wish,
            cold: false,
            rules: None,
        };
        assert!(plan(&task).circuits.len() > 50, "a plan was made");
        c.bench_function(&format!("plan, 2000 pieces, 60 supplies, {name}"), |b| {
            b.iter(|| plan(black_box(&task)));
        });
    }
}

fn reading(c: &mut Criterion) {
    for typed in ["450", "17 5/8 in", "1' 6 1/2\"", "3 x 180 + 2 x 95"] {
        c.bench_function(&format!("length, {typed}"), |b| {
            b.iter(|| length(black_box(typed), LengthUnit::Millimetres));
        });
    }
}

/// An SVG file of 10,000 curves, about 1 MB.
fn drawing(c: &mut Criterion) {
    let mut text = String::from(
        r#"<svg xmlns="http://www.w3.org/2000/svg" width="2000mm" viewBox="0 0 2000 1000">"#,
    );
    for line in 0..100_u32 {
        let y = 5.0 + 9.9 * f64::from(line);
        let _ = write!(text, r##"<path stroke="#ff0000" fill="none" d="M0 {y:.7}"##);
        for at in 0..100_u32 {
            let x = 19.9 * f64::from(at);
            let high = y + 4.0 * f64::from((line * 7 + at * 13) % 11) / 11.0;
            let (near, far) = (x + 6.123_456_7, x + 13.765_432_1);
            let low = 2.0 * y - high;
            let end = x + 19.9;
            let _ = write!(
                text,
                " C{near:.9} {high:.9} {far:.9} {low:.9} {end:.9} {y:.9}"
            );
        }
        text.push_str("\"/>");
    }
    text.push_str("</svg>");
    let name = format!("SVG file of 10000 curves, {} kB", text.len() / 1000);
    c.bench_function(&name, |b| {
        b.iter(|| svg::read(black_box(&text)).expect("a drawing").length());
    });
}

/// One operating point, and all that is drawn of a circuit of 60 pieces.
fn circuit(c: &mut Criterion) {
    let kinds = starter().tubes;
    let tubes: Vec<TubeType> = ["12 mm neon", "15 mm argon-mercury"]
        .iter()
        .map(|name| {
            let entry = kinds.iter().find(|tube| tube.name == *name);
            TubeType::read(entry.expect("a tube of the starter book")).expect("a whole tube")
        })
        .collect();
    let glass: Vec<Piece> = pieces().into_iter().take(60).collect();
    let rating = Rating::read(&SupplyEntry {
        name: "of the bench".to_owned(),
        kind: Some(SupplyKind::Iron),
        no_load_volts: Some(30_000.0),
        short_circuit_ma: Some(60.0),
        earthing: Some(OutputEarthing::MidPoint),
        earth_fault_protection: true,
        trip_ma: Some(15.0),
        ..SupplyEntry::default()
    })
    .expect("a whole nameplate");
    let curve = Curve::of(&rating, 1.0, 1.0);
    for (name, kinds) in [("one gas", 1), ("mixed", 2)] {
        let string: Vec<(&Piece, &TubeType)> = glass
            .iter()
            .take(16)
            .enumerate()
            .map(|(at, piece)| (piece, &tubes[at % kinds]))
            .collect();
        let load = Load::of(string, false);
        assert!(
            matches!(operate(&load, &curve), Operating::Runs { gaps: false, .. }),
            "it runs steadily"
        );
        c.bench_function(&format!("operating point, {name}"), |b| {
            b.iter(|| operate(black_box(&load), black_box(&curve)));
        });
    }
    // Strings too long for it: with gaps, and so long that they do not run at all.
    for (name, metres, gaps) in [("gaps", 35.0, true), ("overloaded", 60.0, false)] {
        let load = Load {
            columns: vec![(
                tubes[0].exponent,
                tubes[0].column(Length::from_mm(1000.0 * metres), false),
            )],
            ..Load::new()
        };
        let found = operate(&load, &curve);
        assert_eq!(
            matches!(found, Operating::Runs { gaps: true, .. }),
            gaps,
            "{found:?}"
        );
        c.bench_function(&format!("operating point, {name}"), |b| {
            b.iter(|| operate(black_box(&load), black_box(&curve)));
        });
    }
    // Short pairs, so that 60 of them run on one supply.
    let short = TubeType {
        pair_volts: 60.0,
        volts_per_m: 200.0,
        ..tubes[0].clone()
    };
    let string: Vec<(&Piece, &TubeType)> = glass.iter().map(|piece| (piece, &short)).collect();
    let load = Load::of(string.iter().copied(), false);
    let worked = assess(&[&load], &rating, &Loading::default());
    assert!(
        matches!(
            worked.halves[0].operating,
            Operating::Runs { gaps: false, .. }
        ),
        "it runs steadily"
    );
    c.bench_function("profile and fault map, 60 pieces", |b| {
        b.iter(|| {
            let (string, worked) = (black_box(&string), black_box(&worked));
            let profile = profile(string, string.len(), worked, &rating, false);
            let even = Some(Milliamps::ZERO);
            let seen = protect(string, worked, &profile, &rating, even, EarthWord::Earth);
            assert!(seen.map.is_some());
            (profile, seen)
        });
    });
}

criterion_group!(benches, work_up, planning, circuit, reading, drawing);
criterion_main!(benches);
