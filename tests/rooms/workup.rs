//! The whole flow on jobs and books nobody should type, and on such as a shop does.

use insta::assert_snapshot;
use proptest::prelude::*;
use proptest::sample::select;
use rust_decimal::Decimal;
use tubewright::book::{
    Allowances, Bending, Book, CableEntry, Dampness, Gas, Loading, OutputEarthing, Rates,
    SupplyEntry, SupplyKind, TubeEntry, starter,
};
use tubewright::job::{
    CircuitLeads, Feed, FontFile, Job, LeadRun, OutlineRow, Pieces, Row, ShapeRow, Site,
    StrokesRow, TextRow, Wiring, Wish,
};
use tubewright::rules::{Grade, Place};
use tubewright::{Workup, workup};

use super::shapes::any_shape;

const NEON: &str = "12 mm neon";
const MERCURY: &str = "15 mm argon-mercury";

/// The font of `tests/reference/outlines`.
const LETTERS: &[u8] = include_bytes!("../reference/outlines/letters.ttf");

fn letters(text: &str, height: &str) -> Row {
    Row::Text(TextRow {
        text: text.to_owned(),
        height: height.to_owned(),
        face: "sans".to_owned(),
        tube: NEON.to_owned(),
        count: 1,
        ..TextRow::default()
    })
}

/// In one however long: loads are given by one length here.
fn kept() -> Pieces {
    Pieces {
        keep_long: true,
        ..Pieces::default()
    }
}

fn strokes(strokes: &str) -> Row {
    Row::Strokes(StrokesRow {
        label: "bar".to_owned(),
        strokes: strokes.to_owned(),
        tube: MERCURY.to_owned(),
        count: 1,
        pieces: kept(),
        ..StrokesRow::default()
    })
}

fn job(rows: Vec<Row>) -> Job {
    Job {
        rows,
        rules: "NEC Article 600".to_owned(),
        ..Job::default()
    }
}

fn iron(name: &str, no_load_volts: f64, ma: f64, price: i64) -> SupplyEntry {
    SupplyEntry {
        name: name.to_owned(),
        kind: Some(SupplyKind::Iron),
        earthing: Some(OutputEarthing::MidPoint),
        no_load_volts: Some(no_load_volts),
        short_circuit_ma: Some(ma),
        earth_fault_protection: true,
        open_circuit_protection: true,
        price: Some(Decimal::from(price)),
        ..SupplyEntry::default()
    }
}

/// The starter book with a few supplies of invented figures.
fn book() -> Book {
    let supplies = vec![
        iron("S4", 4_000.0, 30.0, 90),
        iron("S6", 6_000.0, 30.0, 120),
        iron("S9", 9_000.0, 30.0, 150),
        iron("S15", 15_000.0, 30.0, 220),
    ];
    Book {
        supplies,
        ..starter()
    }
}

/// Every sentence, one a line, gravest first.
fn said(work: &Workup) -> String {
    let line = |finding: &tubewright::Finding| {
        format!(
            "{} {:?}: {}",
            finding.grade.word(),
            finding.place,
            finding.says
        )
    };
    work.findings
        .iter()
        .map(line)
        .collect::<Vec<_>>()
        .join("\n")
        .replace('\u{202f}', "_")
}

/// The stops and looks of a row.
fn of_row(work: &Workup, row: usize) -> String {
    work.findings
        .iter()
        .filter(|finding| finding.place == Place::Row(row) && finding.grade > Grade::Note)
        .map(|finding| format!("{}: {}", finding.grade.word(), finding.says))
        .collect::<Vec<_>>()
        .join("\n")
        .replace('\u{202f}', "_")
}

/// What must hold of every work-up, whatever went in.
fn assert_sound(job: &Job, work: &Workup) {
    let count = work.takeoff.pieces.len();
    // Every piece of a known tube is on one circuit or left over, once.
    let mut placed: Vec<usize> = work
        .circuits
        .iter()
        .flat_map(|circuit| &circuit.pieces)
        .chain(work.left_over.iter().flat_map(|left| &left.pieces))
        .copied()
        .collect();
    placed.sort_unstable();
    let known: Vec<usize> = (0..count)
        .filter(|&piece| {
            let name = &work.takeoff.pieces[piece].tube;
            work.tubes
                .iter()
                .any(|total| total.name == *name && total.tube.is_some())
        })
        .collect();
    assert_eq!(placed, known);
    // Glass is counted once.
    let totals: usize = work.tubes.iter().map(|total| total.pieces).sum();
    assert_eq!(totals, count);
    let glass: f64 = work
        .takeoff
        .pieces
        .iter()
        .map(|piece| piece.glass().mm())
        .sum();
    assert!(
        (work.glass().mm() - glass).abs() <= 1e-6 * glass.max(1.0),
        "{:?}",
        work.glass()
    );
    assert!(glass.is_finite() && glass >= 0.0);
    // No circuit of a plan carries a stop of its own loading.
    for circuit in &work.circuits {
        assert!(
            circuit.assessment.grade() < Some(Grade::Stop),
            "{:?}",
            circuit.assessment.findings
        );
        assert!(0 < circuit.first_string && circuit.first_string <= circuit.pieces.len());
        assert!(circuit.column.mm() > 0.0);
    }
    // Every section of every circuit, and no figure that is none.
    for circuit in &work.circuits {
        let leads = &circuit.leads;
        assert!(leads.sections.len() > circuit.pieces.len());
        let figures = [leads.sum_ma, leads.difference_ma, leads.share];
        assert!(figures.into_iter().flatten().all(|figure| figure >= 0.0));
    }
    let feed = &work.feed;
    let amps = [feed.total_amps, feed.counted_amps, feed.kwh_per_year];
    assert!(
        amps.into_iter().flatten().all(|amps| amps >= 0.0),
        "{feed:?}"
    );
    // A piece left over is said.
    assert!(work.left_over.is_empty() || work.grade() == Some(Grade::Stop));
    // The sum adds up.
    let lines: Decimal = work.quote.lines.iter().filter_map(|line| line.amount).sum();
    assert_eq!(lines, work.quote.cost);
    assert_eq!(
        work.quote.cost + work.quote.markup + work.quote.tax,
        work.quote.total
    );
    // Gravest first, every one a sentence, at a place that exists.
    assert!(work.findings.is_sorted_by(|a, b| a.grade >= b.grade));
    for finding in &work.findings {
        assert!(!finding.says.trim().is_empty());
        assert!(finding.says.chars().count() < 2_000, "{}", finding.says);
        match finding.place {
            Place::Row(row) => assert!(row < job.rows.len()),
            Place::Piece(piece) => assert!(piece < count.max(1)),
            Place::Circuit(circuit) => assert!(circuit < work.circuits.len()),
            _ => {}
        }
    }
}

// ---- arbitrary jobs and books ----

fn awkward() -> impl Strategy<Value = String> {
    prop_oneof![
        4 => select(vec![
            "OPEN", "Café", "A", "é🍕", "", "   ", "x\u{0}y", "\u{202e}abc", "ab cd", "~|{}", "Ii1l",
            "<script>alert(1)</script>", "\n\t", "0",
        ]).prop_map(str::to_owned),
        1 => any::<String>(),
        1 => "[A-Z ]{0,40}",
    ]
}

fn length() -> impl Strategy<Value = String> {
    prop_oneof![
        6 => select(vec![
            "100", "450 mm", "1' 6 1/2\"", "10", "5000", "5001", "9.99", "2 km", "2000 m", "0", "-5",
            "NaN", "1e9", "", "3 x", "3 x 180 + 2 x 95", "999999999999 m", "1/3", "300; 400; x; 500",
            ";;;", "20 m; 10 mm", "abc;",
        ]).prop_map(str::to_owned),
        3 => (10..3_000_u32).prop_map(|mm| format!("{mm} mm")),
        1 => any::<String>(),
    ]
}

fn count() -> impl Strategy<Value = i64> {
    prop_oneof![6 => Just(1_i64), 2 => 0..6_i64, 1 => Just(200), 2 => any::<i64>()]
}

fn tube_name() -> impl Strategy<Value = String> {
    prop_oneof![
        6 => select(vec![NEON, MERCURY, "8 mm neon", "25 mm argon-mercury"]).prop_map(str::to_owned),
        2 => select(vec!["odd", "", "no such tube"]).prop_map(str::to_owned),
    ]
}

fn row() -> impl Strategy<Value = Row> {
    let face = select(vec!["sans", "sans", "script", "", "gothic"]).prop_map(str::to_owned);
    prop_oneof![
        (awkward(), length(), face, tube_name(), count()).prop_map(
            |(text, height, face, tube, count)| Row::Text(TextRow {
                text,
                height,
                face,
                tube,
                count,
                ..TextRow::default()
            })
        ),
        (awkward(), length(), tube_name(), count()).prop_map(|(label, strokes, tube, count)| {
            Row::Strokes(StrokesRow {
                label,
                strokes,
                tube,
                count,
                ..StrokesRow::default()
            })
        }),
        (awkward(), any_shape(), tube_name(), count()).prop_map(|(label, shape, tube, count)| {
            Row::Shape(ShapeRow {
                label,
                shape,
                tube,
                count,
                ..ShapeRow::default()
            })
        }),
        (awkward(), length(), length(), tube_name(), count()).prop_map(
            |(text, height, inset, tube, count)| Row::Outline(OutlineRow {
                // Mostly characters the font of the references has.
                text: text.replace(['E', 'e'], "g").replace(['N', 'n'], "O"),
                height,
                font: "letters.ttf".to_owned(),
                inset,
                tube,
                count,
                ..OutlineRow::default()
            })
        ),
    ]
}

fn odd_figure() -> impl Strategy<Value = f64> {
    prop_oneof![
        select(vec![
            0.0,
            -1.0,
            1e-300,
            1e300,
            f64::NAN,
            f64::INFINITY,
            f64::NEG_INFINITY,
            f64::MIN_POSITIVE,
            -0.0,
            0.5,
            1.0,
            100.0,
        ]),
        any::<f64>(),
    ]
}

fn figure(sane: std::ops::Range<f64>) -> impl Strategy<Value = Option<f64>> {
    prop_oneof![
        6 => sane.prop_map(Some),
        1 => odd_figure().prop_map(Some),
        2 => Just(None),
    ]
}

fn money() -> impl Strategy<Value = Decimal> {
    prop_oneof![
        4 => (0..100_000_i64).prop_map(|cents| Decimal::new(cents, 2)),
        1 => select(vec![
            Decimal::MAX, Decimal::MIN, Decimal::NEGATIVE_ONE, Decimal::ZERO,
            Decimal::new(1, 28), Decimal::new(-1, 28), Decimal::new(i64::MAX, 0),
        ]),
    ]
}

fn supply() -> impl Strategy<Value = SupplyEntry> {
    use OutputEarthing::{Isolated, MidPoint, MidPointReturn, OneEnd};
    (
        (
            select(vec!["a", "b", "c", "", "🍕"]).prop_map(str::to_owned),
            select(vec![SupplyKind::Iron, SupplyKind::Electronic]),
            select(vec![MidPoint, MidPointReturn, OneEnd, Isolated]),
            select(vec![Dampness::Dry, Dampness::Wet]),
        ),
        (
            figure(1_000.0..15_000.0),
            figure(20.0..60.0),
            figure(10.0..60.0),
            figure(500.0..9_000.0),
            figure(10.0..80.0),
            figure(10.0..100.0),
        ),
        (figure(1.0..30.0), figure(100.0..250.0), figure(50.0..900.0)),
        (
            any::<bool>(),
            any::<bool>(),
            prop::option::of(money()),
            any::<Option<u32>>(),
        ),
    )
        .prop_map(
            |(
                (name, kind, earthing, place),
                (no_load_volts, short_circuit_ma, rated_ma, rated_load_volts, least, most),
                (trip_ma, input_volts, input_va),
                (earth_fault_protection, open_circuit_protection, price, stock),
            )| SupplyEntry {
                name,
                kind: Some(kind),
                earthing: Some(earthing),
                place,
                no_load_volts,
                short_circuit_ma,
                rated_ma,
                rated_load_volts,
                // Both ends or none, mostly: one alone only ever refuses the supply.
                least_load_percent: least,
                most_load_percent: least.and(most),
                trip_ma: trip_ma.filter(|_| earth_fault_protection),
                input_volts: input_volts.filter(|_| open_circuit_protection),
                input_va,
                // As good as any other figure.
                output_hertz: input_va,
                earth_fault_protection,
                open_circuit_protection,
                price,
                stock,
                ..SupplyEntry::default()
            },
        )
}

fn odd_tube() -> impl Strategy<Value = TubeEntry> {
    (
        prop::collection::vec(figure(5.0..30.0), 4),
        figure(100.0..2_000.0),
        figure(0.0..0.45),
        figure(1.0..400.0),
        figure(1.0..2.0),
        prop::option::of(money()),
    )
        .prop_map(
            |(figures, volts_per_m, exponent, pair_volts, cold_factor, price_per_m)| TubeEntry {
                name: "odd".to_owned(),
                gas: Gas::ArgonMercury,
                outer_mm: figures[0],
                wall_mm: figures[1].map(|wall| wall / 10.0),
                least_ma: figures[2],
                most_ma: figures[3],
                volts_per_m,
                exponent,
                pair_volts,
                cold_factor,
                price_per_m,
                ..TubeEntry::default()
            },
        )
}

fn rates() -> impl Strategy<Value = Rates> {
    prop::collection::vec(money(), 7).prop_map(|money| Rates {
        currency: "¤".to_owned(),
        electrode: money[0],
        labour_hour: money[1],
        minutes_per_piece: money[2],
        minutes_per_m: money[3],
        minutes_per_circuit: money[4],
        markup_percent: money[5],
        tax_percent: money[6],
    })
}

fn any_book() -> impl Strategy<Value = Book> {
    let allowances = prop::array::uniform4(odd_figure()).prop_map(
        |[tail_mm, waste_percent, longest_piece_mm, crossover_mm]| Allowances {
            tail_mm,
            waste_percent,
            longest_piece_mm,
            crossover_mm,
        },
    );
    let bending = prop::array::uniform4(prop::option::of(odd_figure())).prop_map(
        |[
            least_radius_diameters,
            least_letter_diameters,
            least_spacing_diameters,
            least_electrode_spacing_mm,
        ]| Bending {
            least_radius_diameters,
            least_letter_diameters,
            least_spacing_diameters,
            least_electrode_spacing_mm,
        },
    );
    let loading = prop::collection::vec(odd_figure(), 8).prop_map(|shares| Loading {
        look_below: shares[0],
        target_from: shares[1],
        neon_target_to: shares[2],
        neon_look_above: shares[3],
        mercury_target_to: shares[4],
        mercury_look_above: shares[5],
        stop_from: shares[6],
        strike_factor: shares[7],
    });
    (
        prop::collection::vec(supply(), 0..6),
        prop::collection::vec(odd_tube(), 0..2),
        prop_oneof![Just(Rates::default()), rates()],
        prop_oneof![3 => Just(Allowances::default()), 1 => allowances],
        prop_oneof![3 => Just(Loading::default()), 1 => loading],
        prop_oneof![3 => Just(Bending::default()), 1 => bending],
        prop::collection::vec(any_cable(), 0..3),
    )
        .prop_map(
            |(supplies, odd, rates, allowances, loading, bending, cables)| {
                let mut book = Book {
                    cables,
                    bending,
                    supplies,
                    rates,
                    allowances,
                    loading,
                    ..starter()
                };
                book.tubes.extend(odd);
                book
            },
        )
}

fn any_cable() -> impl Strategy<Value = CableEntry> {
    (
        (
            figure(1_000.0..15_000.0),
            figure(20.0..200.0),
            any::<bool>(),
        ),
        (figure(0.5..3.0), figure(3.0..12.0), figure(1.0..5.0)),
    )
        .prop_map(
            |((rated_volts, pf_per_m, screened), (conductor_mm, insulation_mm, permittivity))| {
                CableEntry {
                    name: "cable".to_owned(),
                    rated_volts,
                    pf_per_m,
                    conductor_mm,
                    insulation_mm,
                    permittivity,
                    screened,
                    ..CableEntry::default()
                }
            },
        )
}

fn any_wiring() -> impl Strategy<Value = Wiring> {
    (
        select(vec!["cable", "cable", "", "no such"]).prop_map(str::to_owned),
        select(vec![
            LeadRun::MetalConduit,
            LeadRun::PlasticConduit,
            LeadRun::FreeAir,
        ]),
        prop::array::uniform8(length()),
        prop_oneof![3 => 0.0..50.0_f64, 1 => odd_figure()],
        prop::collection::vec((awkward(), length(), length()), 0..3),
    )
        .prop_map(|(cable, run, lengths, slack_percent, circuits)| {
            let [
                conduit_bore,
                from_earthed,
                supply_right,
                supply_up,
                ends,
                lead_a,
                lead_b,
                jumper,
            ] = lengths;
            Wiring {
                cable,
                run,
                conduit_bore,
                from_earthed,
                supply_right,
                supply_up,
                slack_percent,
                ends,
                lead_a,
                lead_b,
                jumper,
                circuits: circuits
                    .into_iter()
                    .map(|(first, a, b)| CircuitLeads { first, a, b })
                    .collect(),
            }
        })
}

fn any_feed() -> impl Strategy<Value = Feed> {
    (
        (figure(6.0..40.0), any::<bool>(), any::<bool>()),
        select(vec!["2.5 mm²", "12 AWG solid", "", "none"]).prop_map(str::to_owned),
        length(),
        (figure(0.0..8_784.0), prop::option::of(money())),
    )
        .prop_map(
            |(
                (circuit_amps, other_loads, required_outlet),
                conductor,
                length,
                (hours_per_year, price_per_kwh),
            )| Feed {
                circuit_amps,
                other_loads,
                required_outlet,
                conductor,
                length,
                hours_per_year,
                price_per_kwh,
            },
        )
}

fn any_job() -> impl Strategy<Value = Job> {
    let rules = select(vec![
        "NEC Article 600",
        "IEC/EN 1 to 10 kV",
        "Shop rules",
        "",
        "none such",
    ]);
    let mains = prop::option::of(prop_oneof![100.0..250.0_f64, odd_figure()]);
    (
        prop::collection::vec(row(), 0..5),
        rules.prop_map(str::to_owned),
        select(vec![Wish::FewestSupplies, Wish::LowestPrice]),
        (
            mains,
            select(vec![Dampness::Dry, Dampness::Damp, Dampness::Wet]),
            any::<bool>(),
        ),
        (
            prop_oneof![Just(Wiring::default()), any_wiring()],
            prop_oneof![Just(Feed::default()), any_feed()],
        ),
    )
        .prop_map(
            |(rows, rules, wish, (mains_volts, place, cold), (wiring, feed))| Job {
                wiring,
                feed,
                rows,
                fonts: vec![FontFile::new("letters.ttf", LETTERS)],
                rules,
                wish,
                site: Site {
                    mains_volts,
                    place,
                    cold,
                },
                ..Job::default()
            },
        )
}

proptest! {
    #![proptest_config(ProptestConfig {
        // A job of thousands of pieces is slow to make smaller.
        max_shrink_time: 10_000,
        ..ProptestConfig::with_cases(300)
    })]

    #[test]
    fn no_job_and_no_book_brings_it_down(job in any_job(), book in any_book()) {
        assert_sound(&job, &workup(&job, &book));
    }

    /// Trouble in one row leaves the figures of the others as they were.
    #[test]
    fn trouble_stays_in_its_row(bad in row(), at in 0..3_usize) {
        let good = [letters("OPEN", "300 mm"), strokes("1200 mm; 800 mm")];
        let mut rows = good.to_vec();
        rows.insert(at.min(2), bad);
        let (alone, together) = (workup(&job(good.to_vec()), &book()), workup(&job(rows), &book()));
        // A row that fills the job up to its 4 000 pieces does crowd the others out, and the job
        // says so; `more_rows_and_pieces_than_a_job_may_have` holds that.
        prop_assume!(together.takeoff.pieces.len() < 3_990);
        let others = together.takeoff.rows.iter().enumerate().filter(|&(row, _)| row != at.min(2));
        for (before, (_, after)) in alone.takeoff.rows.iter().zip(others) {
            prop_assert_eq!(before.lit, after.lit);
            prop_assert_eq!(before.glass, after.glass);
            prop_assert_eq!(before.pieces.len(), after.pieces.len());
        }
    }
}

// ---- jobs a shop has ----

#[test]
fn a_plain_sign_is_planned_without_a_stop() {
    let job = job(vec![
        letters("OPEN", "300 mm"),
        strokes("1500 mm; 1500 mm; 1500 mm"),
    ]);
    let work = workup(&job, &book());
    assert_sound(&job, &work);
    assert!(
        !work.circuits.is_empty() && work.left_over.is_empty(),
        "{}",
        said(&work)
    );
    assert!(work.grade() < Some(Grade::Stop), "{}", said(&work));
    // By hand from the published lengths: O 2.8501, P 2.6488, E 2.6190, N 3.2019 cap heights.
    let lit = work.takeoff.rows[0].lit.mm() / 300.0;
    assert!(
        (lit - (2.8501 + 2.6488 + 2.6190 + 3.2019)).abs() < 2e-4,
        "{lit}"
    );
    assert_eq!(work.takeoff.rows[1].lit.mm(), 4_500.0);
}

#[test]
fn the_same_in_gives_the_same_out() {
    let job = job(vec![letters("OPEN", "300 mm"), strokes("1500 mm; 1500 mm")]);
    assert_eq!(
        format!("{:?}", workup(&job, &book())),
        format!("{:?}", workup(&job, &book()))
    );
}

#[test]
fn an_empty_job_has_no_glass_and_no_price() {
    let work = workup(&Job::default(), &Book::default());
    assert_sound(&Job::default(), &work);
    assert_eq!(
        (work.glass().mm(), work.circuits.len(), work.quote.total),
        (0.0, 0, Decimal::ZERO)
    );
    insta::assert_snapshot!(said(&work), @"look Job: No rule set is chosen: no limit of any code is checked.");
}

#[test]
fn text_that_is_too_long_or_has_no_shapes() {
    let rows = vec![
        letters(&"A".repeat(10_000), "100 mm"),
        letters("🍕É", "100 mm"),
        letters("A", "2 km"),
        letters("A", "2000 m"),
        letters("A", "wide"),
        letters("", "100 mm"),
        letters("A🍕B", "100 mm"),
    ];
    let count = rows.len();
    let job = job(rows);
    let work = workup(&job, &book());
    assert_sound(&job, &work);
    let sentences: Vec<String> = (0..count).map(|row| of_row(&work, row)).collect();
    insta::assert_snapshot!(sentences.join("\n"), @r"
    stop: Text must be 1 to 400 characters (a line of letters longer than this is given as several rows), but is 10000 characters.
    stop: The face sans has no shape for “🍕” (character 1), “É” (character 2): glass and price are without it. Give it as strokes.
    stop: Letter height: expected “+”, “x” or the end, but found “km” at character 3 of “2 km”; units are mm, cm, m, in or ft.
    stop: Letter height must be 10 to 5000 mm (smaller cannot be bent in glass, larger is built from parts given as strokes), but is 2000000 mm.
    stop: Letter height: expected a number such as 450, but found “wide” at character 1 of “wide”.
    look: Nothing to make: the row has no letters.
    stop: The face sans has no shape for “🍕” (character 2): glass and price are without it. Give it as strokes.
    ");
    assert_eq!(work.takeoff.pieces.len(), 2, "A and B of the last row");
}

#[test]
fn strokes_that_cannot_be_read() {
    let rows = vec![
        strokes("1200 mm; abc; 5 mm; 30 m"),
        strokes(";"),
        strokes("NaN"),
    ];
    let work = workup(&job(rows), &book());
    let sentences: Vec<String> = (0..3).map(|row| of_row(&work, row)).collect();
    insta::assert_snapshot!(sentences.join("\n"), @r"
    stop: Stroke 2: expected a number such as 450, but found “abc” at character 2 of “ abc”.
    stop: Stroke 3: one piece of glass must be 10 to 20000 mm (no piece between two electrodes is shorter or longer than this; give it as more pieces), but is 5 mm.
    stop: Stroke 4: one piece of glass must be 10 to 20000 mm (no piece between two electrodes is shorter or longer than this; give it as more pieces), but is 30000 mm.
    look: Nothing to make: the row has no stroke lengths.
    stop: Stroke 1: expected a number such as 450, but found “NaN” at character 1 of “NaN”.
    ");
    assert_eq!(work.takeoff.pieces.len(), 1);
}

#[test]
fn counts_nobody_makes() {
    for count in [0, -1, 201, i64::MAX, i64::MIN] {
        let mut row = strokes("1200 mm");
        if let Row::Strokes(row) = &mut row {
            row.count = count;
        }
        let work = workup(&job(vec![row]), &book());
        assert_eq!(work.takeoff.pieces.len(), 0, "{count}");
        assert!(
            of_row(&work, 0).starts_with("stop: Count must be 1 to 200"),
            "{}",
            of_row(&work, 0)
        );
    }
}

#[test]
fn more_rows_and_pieces_than_a_job_may_have() {
    let rows = job(vec![strokes("1200 mm"); 205]);
    let work = workup(&rows, &book());
    assert_sound(&rows, &work);
    assert_eq!(work.takeoff.rows.len(), 200);
    assert!(
        said(&work).contains("Rows must be 0 to 200"),
        "{}",
        said(&work)
    );
    let mut row = strokes(&vec!["1200 mm"; 30].join(";"));
    if let Row::Strokes(row) = &mut row {
        row.count = 200;
    }
    let pieces = job(vec![row]);
    let work = workup(
        &pieces,
        &Book {
            supplies: vec![],
            ..book()
        },
    );
    assert!(work.takeoff.pieces.len() <= 4_000);
    assert!(
        said(&work).contains("Pieces of glass must be 0 to 4000"),
        "{}",
        work.findings[0].says
    );
}

#[test]
fn names_that_are_twice_in_the_book() {
    let mut book = book();
    book.supplies.push(iron("S9", 100.0, 1.0, 1));
    let neon = book
        .tubes
        .iter()
        .find(|tube| tube.name == NEON)
        .expect("a tube")
        .clone();
    book.tubes.push(TubeEntry {
        outer_mm: Some(50.0),
        ..neon
    });
    let work = workup(&job(vec![letters("OPEN", "300 mm")]), &book);
    let all = said(&work);
    assert!(
        all.contains("Two supplies are called “S9”: the first is used."),
        "{all}"
    );
    assert!(
        all.contains("Two tube types are called “12 mm neon”: the first is used."),
        "{all}"
    );
    assert_eq!(
        work.tubes[0].tube.as_ref().map(|tube| tube.outer.mm()),
        Some(12.0)
    );
}

#[test]
fn a_supply_the_rules_stop_is_refused_and_never_planned() {
    let mut book = book();
    for supply in &mut book.supplies {
        supply.earth_fault_protection = false;
    }
    let work = workup(&job(vec![letters("OPEN", "300 mm")]), &book);
    assert_eq!((work.circuits.len(), work.refused.len()), (0, 4));
    assert_eq!(work.left_over.len(), 1);
    assert_eq!(work.grade(), Some(Grade::Stop));
    // With the shop's own empty set the same supplies run it, and it is said that nothing trips.
    let mut job = job(vec![letters("OPEN", "300 mm")]);
    job.rules = "Shop rules".to_owned();
    let work = workup(&job, &book);
    assert!(
        !work.circuits.is_empty() && work.grade() == Some(Grade::Look),
        "{}",
        said(&work)
    );
}

#[test]
fn a_mistyped_pair_voltage_makes_no_endless_search() {
    // 0.01 V for an electrode pair, and glass that takes next to nothing: every supply could run
    // thousands of pieces.
    let nothing = TubeEntry {
        name: "odd".to_owned(),
        outer_mm: Some(12.0),
        pair_volts: Some(0.01),
        volts_per_m: Some(0.01),
        ..TubeEntry::default()
    };
    let mut book = book();
    book.tubes.push(nothing);
    book.supplies[0].earthing = Some(OutputEarthing::MidPointReturn);
    let row = Row::Strokes(StrokesRow {
        label: "bar".to_owned(),
        strokes: vec!["10 mm"; 1_000].join(";"),
        tube: "odd".to_owned(),
        count: 1,
        ..StrokesRow::default()
    });
    let job = job(vec![row]);
    let work = workup(&job, &book);
    assert_sound(&job, &work);
    assert!(
        work.circuits
            .iter()
            .all(|circuit| circuit.pieces.len() <= 250),
        "a bound holds"
    );
}

#[test]
fn a_rule_without_a_figure_is_never_taken_as_met() {
    let unchecked = |job: &Job, book: &Book| {
        let all = said(&workup(job, book));
        let lines: Vec<&str> = all
            .lines()
            .filter(|line| line.contains("Not checked"))
            .collect();
        lines.join("\n")
    };
    let mut job = job(vec![letters("OPEN", "300 mm")]);
    assert_eq!(unchecked(&job, &book()), "");
    // A figure of the code that the user cleared.
    let mut cleared = book();
    let nec = cleared
        .rule_sets
        .iter_mut()
        .find(|set| set.name == job.rules)
        .expect("the set");
    nec.rules[0].value = None;
    assert_snapshot!(unchecked(&job, &cleared), @r#"look Rules("NEC Article 600"): Not checked: no-load volts. The shop book has no figure for it any more: take it from the official text and fill it in there."#);
    // The shop's own rules, before anything is filled in.
    job.rules = "Shop rules".to_owned();
    assert_snapshot!(unchecked(&job, &book()), @r#"
    look Rules("Shop rules"): Not checked: no-load volts. The shop book has no figure for it: fill it in there.
    look Rules("Shop rules"): Not checked: volts to earth at any terminal. The shop book has no figure for it: fill it in there.
    look Rules("Shop rules"): Not checked: rated current. The shop book has no figure for it: fill it in there.
    "#);
    job.rules = "IEC/EN 1 to 10 kV".to_owned();
    assert_snapshot!(unchecked(&job, &book()), @r#"
    look Rules("IEC/EN 1 to 10 kV"): Not checked: volts to earth at any terminal. No confirmed figure is known here: take it from the official text and fill it in, in the shop book.
    look Rules("IEC/EN 1 to 10 kV"): Not checked: trip current of the earth-fault protection. No confirmed figure is known here: take it from the official text and fill it in, in the shop book.
    look Rules("IEC/EN 1 to 10 kV"): Not checked: each high-voltage lead, supply to first electrode. No confirmed figure is known here: take it from the official text and fill it in, in the shop book.
    "#);
}

#[test]
fn supplies_that_no_mains_suit_are_not_put_together_silently() {
    let mut book = book();
    let mut job = job(vec![strokes("3 m; 3 m"), strokes("9 m; 9 m")]);
    let mut at_job = |first: Option<f64>, other: Option<f64>, mains: Option<f64>| {
        for supply in &mut book.supplies {
            supply.input_volts = if supply.name == "S6" { first } else { other };
        }
        job.site.mains_volts = mains;
        let work = workup(&job, &book);
        let mut taken: Vec<&str> = work
            .circuits
            .iter()
            .map(|circuit| circuit.supply.name.as_str())
            .collect();
        taken.sort_unstable();
        taken.dedup();
        let told = said(&work);
        let lines: Vec<&str> = told.lines().filter(|line| line.contains("suit")).collect();
        format!("{}\n{}", taken.join(", "), lines.join("\n"))
    };
    assert_snapshot!(at_job(Some(120.0), Some(230.0), None), @r"
    S15, S6
    stop Job: The plan takes supplies for 120 V and for 230 V: no mains suit both. Give the mains volts, and only supplies for them are taken.
    look Job: Mains volts are not given, so it was not checked that the supplies suit them.
    ");
    assert_snapshot!(at_job(Some(220.0), Some(240.0), None), @r"
    S15, S6
    look Job: Mains volts are not given, so it was not checked that the supplies suit them.
    ");
    assert_snapshot!(at_job(None, None, None), @r"
    S15, S6
    look Job: Mains volts are not given, so it was not checked that the supplies suit them.
    ");
    assert_snapshot!(at_job(Some(230.0), None, Some(230.0)), @"S6");
    assert_snapshot!(at_job(Some(230.0), Some(220.0), Some(230.0)), @"S15, S6");
    assert_snapshot!(at_job(None, None, Some(230.0)), @r"
    S15
    look Circuit(0): The supply's input volts are not in the shop book, so it was not checked that it suits the site's 230 V.
    ");
}

#[test]
fn a_source_says_which_entry_it_is() {
    let mut book = book();
    book.supplies[0].no_load_volts = None;
    let mut job = job(vec![letters("OPEN", "5 mm")]);
    job.rules = String::new();
    let work = workup(&job, &book);
    let row = work
        .findings
        .iter()
        .find(|finding| finding.place == Place::Row(0))
        .expect("letters too small");
    assert_eq!(row.source.words(), "as typed in the row");
    let rules = work
        .findings
        .iter()
        .find(|finding| finding.says.starts_with("No rule set"))
        .expect("no rules");
    assert_eq!(rules.source.words(), "the job's choice of rules");
    assert_eq!(
        work.refused[0].findings[0].source.words(),
        "the supply's entry"
    );
}

#[test]
fn a_circuit_that_draws_more_than_the_plate_says_is_looked_at() {
    let job = job(vec![letters("OPEN", "300 mm")]);
    let drawn = workup(&job, &book()).circuits[0]
        .assessment
        .input_va
        .expect("it runs");
    let told = |plate_va: f64| {
        let mut book = book();
        for supply in &mut book.supplies {
            supply.input_va = Some(plate_va);
        }
        let work = workup(&job, &book);
        let mut looks = work.circuits[0]
            .findings
            .iter()
            .filter(|finding| finding.grade == Grade::Look);
        looks
            .next()
            .map_or_else(String::new, |finding| finding.says.clone())
    };
    assert_eq!(told(drawn / 1.09), "");
    assert_eq!(
        told((drawn / 1.11).floor()),
        format!(
            "It is worked out to draw {drawn:.0} VA from the mains, more than the {} VA of its \
             plate: one of the plate's figures may be wrong, and the feed must carry it.",
            (drawn / 1.11).floor()
        )
    );
}

#[test]
fn a_circuit_that_the_model_is_not_sure_of_is_looked_at() {
    let told = |length: &str, edit: fn(&mut Book)| {
        let mut book = Book {
            supplies: vec![iron("S4", 4_000.0, 30.0, 90)],
            ..book()
        };
        book.tubes.retain(|tube| tube.name == NEON);
        edit(&mut book);
        let row = Row::Strokes(StrokesRow {
            label: "bar".to_owned(),
            strokes: length.to_owned(),
            tube: NEON.to_owned(),
            count: 1,
            pieces: kept(),
            ..StrokesRow::default()
        });
        let work = workup(&job(vec![row]), &book);
        assert_eq!(work.circuits.len(), 1, "{}", said(&work));
        let says: Vec<String> = work.circuits[0]
            .findings
            .iter()
            .filter(|finding| finding.says.contains("than the default model says"))
            .map(|finding| format!("{}: {}", finding.grade.word(), finding.says))
            .collect();
        says.join("\n").replace('\u{202f}', "_")
    };
    // 2.5 m take about half of the no-load volts, 3.3 m about two thirds.
    assert_eq!(told("2500 mm", |_| ()), "");
    assert_snapshot!(told("3300 mm", |_| ()), @"look: If its tubes take 15 % more than the default model says, it is overloaded: running volts are 85 % of no-load volts, at or over 76 %; the current has gaps and the tube flickers; bench readings of your own glass settle it.");
    // The shop's own reading is believed.
    assert_eq!(
        told("3300 mm", |book| book.tubes[0].volts_per_m = Some(720.0)),
        ""
    );
    assert_snapshot!(told("2500 mm", |book| book.tubes[0].most_ma = Some(26.0)), @"look: If its tubes take 15 % less than the default model says, it is overdriven: 26.7 mA is above the 26 mA that 12 mm neon stands: more glass on it, or a supply of less current; bench readings of your own glass settle it.");
    assert_snapshot!(told("2900 mm", |book| book.loading.strike_factor = 2.2), @"look: If its tubes take 15 % more than the default model says, it will not strike: striking needs about 5_957 V; the no-load peak is 5_657 V; bench readings of your own glass settle it.");
}

#[test]
fn a_sum_says_what_it_is_without() {
    let told = |rows: Vec<Row>, book: &Book| {
        let work = workup(&job(rows), book);
        let says: Vec<String> = work
            .quote
            .findings
            .iter()
            .filter(|finding| finding.says.ends_with("in this sum."))
            .map(|finding| {
                assert_eq!(
                    (finding.grade, &finding.place),
                    (Grade::Stop, &Place::Price)
                );
                assert!(work.findings.contains(finding), "among all findings too");
                finding.says.clone()
            })
            .collect();
        says.join("\n")
    };
    let small = || letters("OPEN", "5 mm");
    let good = || letters("OPEN", "300 mm");
    assert_eq!(told(vec![good()], &book()), "");
    assert_snapshot!(told(vec![small()], &book()), @"Row 1 is not in this sum.");
    assert_snapshot!(told(vec![small(), good(), small()], &book()), @"Rows 1 and 3 are not in this sum.");
    assert_snapshot!(told(vec![small(); 9], &book()), @"Rows 1, 2, 3, 4, 5 and 4 more are not in this sum.");
    // One stroke of two that can be read.
    assert_snapshot!(told(vec![strokes("1 m; 1 parsec")], &book()), @"Row 1 is not wholly in this sum.");
    // No supply runs the long one.
    assert_snapshot!(told(vec![good(), strokes("19 m")], &Book { supplies: vec![iron("S4", 4_000.0, 30.0, 90)], ..book() }), @"The supply for 1 piece is not in this sum.");
    assert_snapshot!(told(vec![good()], &Book { supplies: vec![], ..book() }), @"The supply for 4 pieces is not in this sum.");
    // A tube type that is not in the book, and one that contradicts itself.
    let unknown = |tube: &str| {
        Row::Strokes(StrokesRow {
            label: "bar".to_owned(),
            strokes: "1 m".to_owned(),
            tube: tube.to_owned(),
            count: 1,
            ..StrokesRow::default()
        })
    };
    assert_snapshot!(told(vec![unknown("none such")], &book()), @r"
    Row 1 is not wholly in this sum.
    The supply for 1 piece is not in this sum.
    ");
    let mut odd = book();
    odd.tubes[0].wall_mm = Some(9.0);
    let name = odd.tubes[0].name.clone();
    assert_snapshot!(told(vec![unknown(&name)], &odd), @"The supply for 1 piece is not in this sum.");
    // Cut off at what a job may have.
    assert_snapshot!(told(vec![strokes("1 m"); 203], &book()), @r"
    Rows 201, 202 and 203 are not in this sum.
    What the stops of the job leave out is not in this sum.
    ");
}

#[test]
fn a_product_of_a_length_is_said_to_be_one_piece() {
    let notes = |typed: &str| {
        let work = workup(&job(vec![strokes(typed)]), &book());
        let says: Vec<String> = work
            .takeoff
            .findings
            .iter()
            .filter(|finding| finding.says.contains("one piece of"))
            .map(|finding| format!("{}: {}", finding.grade.word(), finding.says))
            .collect();
        (
            work.takeoff.pieces.len(),
            says.join("\n").replace('\u{202f}', "_"),
        )
    };
    let (pieces, says) = notes("4 x 1200 mm; 2 x 300 mm");
    assert_eq!(pieces, 2);
    assert_snapshot!(says, @"note: “4 x 1200 mm” is one piece of 4_800 mm. For 4 pieces of 1_200 mm write the length 4 times, with semicolons between.");
    assert_eq!(notes("1200 mm; 2 x 300 mm + 95 mm"), (2, String::new()));
}
