//! Pieces of glass as a person chooses them, and the shop's limits on them, by hand.

use insta::assert_snapshot;
use proptest::prelude::*;
use tubewright::book::{Allowances, Bending, Book, TubeEntry};
use tubewright::job::{
    ArtworkFile, ArtworkLines, ArtworkRow, Cut, Each, Job, Outline, Pieces, Row, StrokesRow,
    TextRow,
};
use tubewright::takeoff::{Piece, Takeoff, against_shop, choose, takeoff};
use tubewright::workup;

/// Letters 210 mm high: a unit of the sans face is 10 mm.
fn text(text: &str, face: &str, pieces: Pieces) -> Job {
    let row = Row::Text(TextRow {
        text: text.to_owned(),
        height: "210 mm".to_owned(),
        face: face.to_owned(),
        tube: "12 mm".to_owned(),
        pieces,
        ..TextRow::default()
    });
    Job {
        rows: vec![row],
        ..Job::default()
    }
}

/// A drawing in millimetres, all of its lines in one tube.
fn art(lines: &str, pieces: Pieces) -> Job {
    let drawing = format!(
        r##"<svg xmlns="http://www.w3.org/2000/svg" width="400mm" height="400mm" viewBox="0 0 400 400">
        <g stroke="#f00" fill="none">{lines}</g></svg>"##
    );
    let row = Row::Artwork(ArtworkRow {
        label: "Art".to_owned(),
        file: "art.svg".to_owned(),
        lines: vec![ArtworkLines {
            colour: Some("#ff0000".to_owned()),
            layer: None,
            tube: "12 mm".to_owned(),
            inset: String::new(),
        }],
        pieces,
        ..ArtworkRow::default()
    });
    Job {
        rows: vec![row],
        artwork: vec![ArtworkFile {
            name: "art.svg".to_owned(),
            text: drawing.into(),
        }],
        ..Job::default()
    }
}

fn off(job: &Job) -> Takeoff {
    takeoff(job, &Allowances::default())
}

/// Label, lit and painted-out glass of each piece, whole millimetres.
fn pieces(off: &Takeoff) -> Vec<(&str, f64, f64)> {
    off.pieces
        .iter()
        .map(|piece| {
            (
                piece.label.as_str(),
                piece.lit.mm().round(),
                piece.hidden.mm().round(),
            )
        })
        .collect()
}

fn said(off: &Takeoff) -> String {
    let sentences = off
        .findings
        .iter()
        .map(|finding| format!("{:?}: {}", finding.grade, finding.says));
    sentences.collect::<Vec<String>>().join("\n")
}

fn names(pair: [&str; 2]) -> [String; 2] {
    pair.map(str::to_owned)
}

#[test]
fn letters_are_joined_over_the_shortest_way() {
    // L of the sans face: a stem of 21 and a foot of 12 in one stroke. Of two the tops, or the feet's
    // ends, are nearest: as far apart as the letters.
    let apart = off(&text("LL", "sans", Pieces::default()));
    assert_eq!(pieces(&apart), [("L", 330.0, 0.0), ("L", 330.0, 0.0)]);
    let joined = Pieces {
        joined: vec![names(["1 L 1", "2 L 2"])],
        ..Pieces::default()
    };
    let joined = off(&text("LL", "sans", joined));
    let [(label, lit, hidden)] = pieces(&joined)[..] else {
        panic!("one piece: {:?}", pieces(&joined));
    };
    assert_eq!((label, lit), ("LL", 660.0));
    let stem = |at: usize| apart.pieces[at].strokes[0].path.elements()[0].end_point();
    let pitch = stem(1).expect("a point").x - stem(0).expect("a point").x;
    assert_eq!(hidden, pitch, "from one L to the same place of the next");
    assert_eq!(joined.pieces[0].tails.mm(), 300.0, "one pair of electrodes");
}

#[test]
fn a_letter_is_parted_between_its_strokes() {
    // The H: two stems of 21 and a bar of 14, over jumps of 10.
    let usual = off(&text("H", "sans", Pieces::default()));
    assert_eq!(pieces(&usual), [("H", 560.0, 200.0)]);
    let run: Vec<&str> = usual.pieces[0]
        .strokes
        .iter()
        .map(|stroke| stroke.name.as_str())
        .collect();
    assert_eq!(run, ["1 H 1", "1 H 3", "1 H 2"], "the bar runs in between");
    let parted = Pieces {
        parted: vec![names(["1 H 3", "1 H 1"])],
        ..Pieces::default()
    };
    let parted = off(&text("H", "sans", parted));
    assert_eq!(
        pieces(&parted),
        [("H, part 1", 210.0, 0.0), ("H, part 2", 350.0, 100.0)],
        "the jump that is parted is not made"
    );
}

#[test]
fn only_strokes_that_touch() {
    let each = |each| Pieces {
        each,
        ..Pieces::default()
    };
    // The bar of the H meets both stems with its ends: one run, though no ends of strokes meet.
    assert_eq!(
        off(&text("Hi", "sans", each(Each::Touching)))
            .pieces
            .iter()
            .map(|piece| piece.label.as_str())
            .collect::<Vec<_>>(),
        ["H", "i 1", "i 2"],
        "the dot of the i is a piece of its own"
    );
    let whole = off(&text("AB CD", "sans", each(Each::Whole)));
    let labels: Vec<&str> = whole.pieces.iter().map(|p| p.label.as_str()).collect();
    assert_eq!(labels, ["AB", "CD"], "a word is a piece");
}

#[test]
fn lines_of_a_drawing_that_touch_are_one_piece() {
    // A T: the stem's end lies on the bar. Beside it a line that crosses the stem without an end on it
    // stays alone.
    let t = r#"<path d="M0 0H100"/><path d="M50 0V100"/><path d="M20 60H80"/>"#;
    assert_eq!(
        pieces(&off(&art(t, Pieces::default()))),
        [("Art 1", 200.0, 50.0), ("Art 2", 60.0, 0.0)],
        "back along half the bar"
    );
    let whole = Pieces {
        each: Each::Whole,
        ..Pieces::default()
    };
    assert_eq!(off(&art(t, whole)).pieces.len(), 1);
}

#[test]
fn pieces_of_a_drawing_are_in_reading_order() {
    let lines = r#"<path d="M300 200V250"/><path d="M10 205V240"/><path d="M350 10V50"/>
        <path d="M40 5V60"/><rect x="0" y="0" width="390" height="390"/>"#;
    let off = off(&art(lines, Pieces::default()));
    let x: Vec<f64> = off
        .pieces
        .iter()
        .map(|piece| (piece.electrodes[0].x - off.bounds.x0).round())
        .collect();
    assert_eq!(
        x,
        [0.0, 40.0, 350.0, 10.0, 300.0],
        "border, then line by line"
    );
}

#[test]
fn a_cut_is_where_it_is_wanted_and_no_glass_is_lost() {
    let line = r#"<path d="M0 0H300"/>"#;
    let cut = |share| Cut {
        stroke: "1".to_owned(),
        share,
    };
    let cuts = Pieces {
        cuts: vec![cut(0.75), cut(0.2)],
        ..Pieces::default()
    };
    assert_eq!(
        pieces(&off(&art(line, cuts.clone()))),
        [
            ("Art 1, part 1", 60.0, 0.0),
            ("Art 1, part 2", 165.0, 0.0),
            ("Art 1, part 3", 75.0, 0.0)
        ]
    );
    let names: Vec<String> = off(&art(line, cuts))
        .pieces
        .iter()
        .map(|piece| piece.name.clone())
        .collect();
    assert_eq!(names, ["1 from 0.0000", "1 from 0.2000", "1 from 0.7500"]);
}

#[test]
fn the_wanted_order_is_kept_and_what_is_new_follows_its_neighbour() {
    let order = |order: &[&str]| Pieces {
        order: order.iter().map(|&name| name.to_owned()).collect(),
        ..Pieces::default()
    };
    let labels = |text: Job| -> String {
        let off = off(&text);
        off.pieces
            .iter()
            .map(|piece| piece.label.as_str())
            .collect()
    };
    let names: Vec<String> = off(&text("LIFT", "sans", Pieces::default()))
        .pieces
        .iter()
        .map(|piece| piece.name.clone())
        .collect();
    let names: Vec<&str> = names.iter().map(String::as_str).collect();
    let turned: Vec<&str> = names.iter().rev().copied().collect();
    assert_eq!(labels(text("LIFT", "sans", order(&turned))), "TFIL");
    // The I is not named: it follows the L.
    let without = [names[3], names[0], names[2]];
    assert_eq!(labels(text("LIFT", "sans", order(&without))), "TLIF");
}

#[test]
fn choices_that_have_lost_their_strokes_are_told_of() {
    let choices = Pieces {
        joined: vec![names(["1 O 1", "2 P 1"])],
        parted: vec![names(["1 H 1", "1 H 2"]), names(["1 H 1", "9 Z 1"])],
        cuts: vec![
            Cut {
                stroke: "1 H 1".to_owned(),
                share: f64::NAN,
            },
            Cut {
                stroke: "1 H 1".to_owned(),
                share: 0.001,
            },
        ],
        ..Pieces::default()
    };
    let off = off(&text("H", "sans", choices));
    assert_eq!(pieces(&off), [("H", 560.0, 200.0)], "as usual");
    assert_snapshot!(said(&off), @r"
    Look: Choices of how strokes become pieces (5) have no effect: the strokes joined, parted or cut are not in this row any more, or not beside each other. Look at the pieces and choose again.
    Note: Painted-out glass between the strokes of a piece is estimated by the shortest straight jumps; a bender's double-backs may take more.
    ");
}

#[test]
fn pieces_of_two_tubes_are_not_joined() {
    let mut job = art(
        r##"<path d="M0 0H100"/><path stroke="#00f" d="M0 50H100"/>"##,
        Pieces {
            joined: vec![names(["1", "2"])],
            ..Pieces::default()
        },
    );
    if let Row::Artwork(row) = &mut job.rows[0] {
        row.lines.push(ArtworkLines {
            colour: Some("#0000ff".to_owned()),
            layer: None,
            tube: "10 mm".to_owned(),
            inset: String::new(),
        });
    }
    let off = off(&job);
    assert_eq!(off.pieces.len(), 2);
    assert_snapshot!(said(&off), @"Look: “Art 1” and “Art 2” are of different tubes and stay two pieces.");
}

#[test]
fn each_crossover_takes_the_glass_the_shop_says() {
    let allowances = Allowances {
        crossover_mm: 40.0,
        ..Allowances::default()
    };
    let off = takeoff(&text("H", "sans", Pieces::default()), &allowances);
    assert_eq!(pieces(&off), [("H", 560.0, 280.0)]);
    let bad = Allowances {
        crossover_mm: f64::NAN,
        ..Allowances::default()
    };
    let off = takeoff(&text("H", "sans", Pieces::default()), &bad);
    assert_eq!(pieces(&off), [("H", 560.0, 200.0)]);
    assert!(
        said(&off).contains("crossover must be 0 to 2000 mm"),
        "{}",
        said(&off)
    );
}

/// What a person does to the first row's pieces.
fn chosen(
    mut job: Job,
    what: impl FnOnce(&mut Pieces, &[Piece]) -> Result<(), String>,
) -> (Job, Result<(), String>) {
    let pieces = off(&job).pieces;
    let done = what(job.rows[0].pieces_mut(), &pieces);
    (job, done)
}

#[test]
fn joining_takes_back_what_was_parted_or_cut() {
    let usual = text("H", "sans", Pieces::default());
    let (parted, done) = chosen(usual.clone(), |row, pieces| {
        choose::part(row, &pieces[0], 0)
    });
    assert_eq!((done, off(&parted).pieces.len()), (Ok(()), 2));
    // 50 mm up the left stem of the first part.
    let (cut, done) = chosen(parted, |row, pieces| {
        let stem = &pieces[0].strokes[0].path.elements()[0];
        let foot = stem.end_point().expect("a point");
        choose::cut(row, &pieces[0], foot + kurbo::Vec2::new(5.0, 50.0))
    });
    assert_eq!(done, Ok(()));
    assert_eq!(
        pieces(&off(&cut)),
        [
            ("H, part 1", 160.0, 0.0),
            ("H, part 2", 50.0, 0.0),
            ("H, part 3", 350.0, 100.0)
        ]
    );
    let (joined, done) = chosen(cut, |row, pieces| choose::join(row, &pieces[1], &pieces[0]));
    assert_eq!((done, off(&joined).pieces.len()), (Ok(()), 2));
    let (joined, done) = chosen(joined, |row, pieces| {
        choose::join(row, &pieces[0], &pieces[1])
    });
    assert_eq!(done, Ok(()));
    assert_eq!(joined, usual, "nothing is left of it");
}

#[test]
fn two_letters_are_joined_and_parted_again() {
    let (joined, done) = chosen(text("LI", "sans", Pieces::default()), |row, pieces| {
        choose::join(row, &pieces[0], &pieces[1])
    });
    assert_eq!(done, Ok(()));
    assert_eq!(off(&joined).pieces.len(), 1);
    let (parted, done) = chosen(joined, |row, pieces| {
        choose::part(row, &pieces[0], pieces[0].jumps[0].after)
    });
    assert_eq!(done, Ok(()));
    assert_eq!(off(&parted).pieces.len(), 2);
    assert_eq!(said(&off(&parted)), "");
}

#[test]
fn a_cut_near_a_corner_is_at_the_corner() {
    let angle = art(r#"<path d="M0 0H100V100"/>"#, Pieces::default());
    let (cut, done) = chosen(angle, |row, pieces| {
        let [start, _] = pieces[0].electrodes;
        choose::cut(row, &pieces[0], start + kurbo::Vec2::new(95.0, 3.0))
    });
    assert_eq!(done, Ok(()));
    assert_eq!(
        pieces(&off(&cut)),
        [("Art 1, part 1", 100.0, 0.0), ("Art 1, part 2", 100.0, 0.0)]
    );
}

#[test]
fn what_cannot_be_done_to_a_piece_says_why() {
    let mut two = text("LIL", "sans", Pieces::default());
    two.rows.push(two.rows[0].clone());
    let mut copies = text("I", "sans", Pieces::default());
    if let Row::Text(row) = &mut copies.rows[0] {
        row.count = 2;
    }
    let long = Row::Strokes(StrokesRow {
        label: "Bar".to_owned(),
        strokes: "5 m".to_owned(),
        ..StrokesRow::default()
    });
    let long = Job {
        rows: vec![long],
        ..Job::default()
    };
    let refused = |job: Job, what: fn(&mut Pieces, &[Piece]) -> Result<(), String>| {
        let (after, done) = chosen(job.clone(), what);
        assert_eq!(after, job, "nothing was chosen");
        done.expect_err("it is refused")
    };
    let said = [
        refused(two.clone(), |row, pieces| {
            choose::join(row, &pieces[0], &pieces[3])
        }),
        refused(copies, |row, pieces| {
            choose::join(row, &pieces[0], &pieces[1])
        }),
        refused(long, |row, pieces| {
            choose::join(row, &pieces[0], &pieces[1])
        }),
        refused(two.clone(), |row, pieces| choose::part(row, &pieces[1], 0)),
        refused(two, |row, pieces| {
            let [top, _] = pieces[1].electrodes;
            choose::cut(row, &pieces[1], top)
        }),
    ];
    assert_snapshot!(said.join("\n"), @r"
    “L” and “L” are of two rows. Only pieces of one row can be joined.
    “I (1 of 2)” and “I (2 of 2)” are the same piece of two copies. Choose two pieces of one copy.
    “Bar, part 1” and “Bar, part 2” are parts of a piece that is longer than the shop bends in one. To have it in one, choose so for the row.
    “I” has no stroke to be parted from there.
    That is the end of a stroke of “I”. Cut it at least 5 mm from its end, or part it at a crossover.
    ");
}

#[test]
fn pieces_are_moved_among_those_of_their_row() {
    let (moved, _) = chosen(text("LIFT", "sans", Pieces::default()), |row, pieces| {
        let pieces: Vec<&Piece> = pieces.iter().collect();
        choose::reorder(row, &pieces, 3, 1);
        Ok(())
    });
    let labels: String = off(&moved)
        .pieces
        .iter()
        .map(|p| p.label.as_str())
        .collect();
    assert_eq!(labels, "LTIF");
}

#[test]
fn groups_are_on_circuits_of_their_own() {
    let (job, book) = (
        tubewright::job::read(include_str!("../../catalog-demo/window-word.json")),
        tubewright::book::read(include_str!("../../catalog-demo/book.json")),
    );
    let (mut job, book) = (job.expect("the demo job"), book.expect("the demo book"));
    let rows_of = |job: &Job| -> Vec<Vec<usize>> {
        let worked = workup(job, &book);
        let rows = |pieces: &[usize]| {
            let mut rows: Vec<usize> = pieces
                .iter()
                .map(|&at| worked.takeoff.pieces[at].row)
                .collect();
            rows.dedup();
            rows
        };
        worked
            .circuits
            .iter()
            .map(|circuit| rows(&circuit.pieces))
            .collect()
    };
    // The word in two rows.
    let Row::Text(word) = job.rows[0].clone() else {
        panic!("the first row is a word");
    };
    let letters: Vec<char> = word.text.chars().collect();
    let half = |letters: &[char]| {
        Row::Text(TextRow {
            text: letters.iter().collect(),
            face: "sans".to_owned(),
            ..word.clone()
        })
    };
    let (first, second) = letters.split_at(letters.len() / 2);
    job.rows.splice(0..1, [half(first), half(second)]);
    let together = rows_of(&job);
    assert!(
        together.iter().any(|rows| rows.len() > 1),
        "rows share a circuit: {together:?}"
    );
    let last = job.rows.len() - 1;
    *job.rows[last].group_mut() = "border".to_owned();
    let apart = rows_of(&job);
    assert!(
        apart
            .iter()
            .all(|rows| !rows.contains(&last) || rows == &[last]),
        "the group is alone: {apart:?}"
    );
}

fn shop(bending: Bending) -> Book {
    let tube = |name: &str, outer_mm| TubeEntry {
        name: name.to_owned(),
        outer_mm: Some(outer_mm),
        ..TubeEntry::default()
    };
    Book {
        tubes: vec![tube("12 mm", 12.0), tube("8 mm", 8.0)],
        bending,
        ..Book::default()
    }
}

fn against(job: &Job, bending: Bending) -> String {
    let found = against_shop(&off(job), job, &shop(bending));
    let sentences = found.iter().map(|finding| {
        format!(
            "{:?} at {:?}: {} [{}]",
            finding.grade, finding.place, finding.says, finding.source.standing
        )
    });
    sentences.collect::<Vec<String>>().join("\n")
}

#[test]
fn bends_letters_and_spacing_are_held_against_the_shop() {
    // A hairpin 20 wide, and a line 15 under it; a circle of radius 17.9 and one of 18.1.
    let drawing = r#"<path d="M0 0H100V20H0"/><path d="M0 35H100"/>
        <circle cx="200" cy="100" r="17.9"/><circle cx="300" cy="100" r="18.1"/>"#;
    assert_snapshot!(against(&art(drawing, Pieces::default()), Bending::default()), @r"
    Look at Piece(0): 2 pieces of this row have bends tighter than the shop's tightest (18 mm, 1.5 diameters of 12 mm tube); the tightest, of “Art 1”, has room for a radius of 10 mm. Make them larger, in thinner tube, or of more pieces. [common practice, no source]
    Look at Piece(0): “Art 1” and “Art 2” come within 15 mm of each other, centre to centre; the shop's least is 24 mm, 2 diameters. [common practice, no source]
    ");
    let own = Bending {
        least_radius_diameters: Some(3.0),
        least_spacing_diameters: None,
        ..Bending::default()
    };
    assert_snapshot!(against(&art(drawing, Pieces::default()), own), @"Look at Piece(0): 3 pieces of this row have bends tighter than the shop's tightest (36 mm, 3 diameters of 12 mm tube); the tightest, of “Art 1”, has room for a radius of 10 mm. Make them larger, in thinner tube, or of more pieces. [shop setting]");
    let none = Bending {
        least_radius_diameters: None,
        least_letter_diameters: None,
        least_spacing_diameters: None,
        least_electrode_spacing_mm: None,
    };
    assert_eq!(against(&art(drawing, Pieces::default()), none.clone()), "");
    let small = |height: &str, bending: Bending| {
        let mut job = text("I", "sans", Pieces::default());
        if let Row::Text(row) = &mut job.rows[0] {
            row.height = height.to_owned();
        }
        against(&job, bending)
    };
    assert_snapshot!(small("95 mm", Bending::default()), @"Look at Row(0): Letters 95 mm high are small for their tube: the shop's least is 96 mm, 8 diameters of 12 mm tube. [common practice, no source]");
    assert_eq!(small("96 mm", Bending::default()), "", "at its limit");
    assert_eq!(small("95 mm", none), "");
}

#[test]
fn a_stroke_that_turns_back_on_itself_is_a_fold() {
    // A needle 6 mm wide at its open end and 100 long: it turns by 176.6 degrees at its tip.
    let needle = r#"<path d="M0 0L100 3L0 6"/>"#;
    let job = art(needle, Pieces::default());
    assert_eq!(off(&job).pieces[0].bends.len(), 1);
    assert_snapshot!(against(&job, Bending::default()), @"Note at Piece(0): “Art 1” turns back sharply at 1 place: too far to be bent in the plane of the sign, so the glass is folded there and runs back behind itself. [common practice, no source]");
}

#[test]
fn a_limit_that_cannot_be_meant_is_told_of_and_not_checked() {
    let drawing =
        r#"<path d="M0 0H100V20H0"/><path d="M0 35H100"/><rect x="200" width="90" height="9"/>"#;
    let odd = Bending {
        least_radius_diameters: Some(-1.5),
        least_letter_diameters: Some(f64::INFINITY),
        least_spacing_diameters: Some(6e-208),
        least_electrode_spacing_mm: Some(f64::NAN),
    };
    assert_snapshot!(against(&art(drawing, Pieces::default()), odd), @r"
    Look at Job: The tightest radius must be 0.5 to 20 diameters (tighter the glass would run into itself, wider hardly anything could be bent), but is -1.5 diameters: not checked. [shop setting]
    Look at Job: The least letter height must be 1 to 200 diameters (lower no letter is made, higher hardly any sign), but is inf diameters: not checked. [shop setting]
    Look at Job: The least spacing of tubes must be 1 to 10 diameters (nearer the tubes touch, further apart they are no letters), but is 0 diameters: not checked. [shop setting]
    Look at Job: The least distance of electrodes must be 1 to 1000 mm (nearer they touch, further apart few signs have them), but is NaN mm: not checked. [shop setting]
    ");
}

#[test]
fn electrodes_and_crossing_tubes_are_held_against_the_shop() {
    // Ends 30 apart; two lines that cross.
    let drawing =
        r#"<path d="M0 0H100"/><path d="M130 0H200"/><path d="M0 300L100 400M0 400L100 300"/>"#;
    let bending = Bending {
        least_electrode_spacing_mm: Some(40.0),
        ..Bending::default()
    };
    assert_snapshot!(against(&art(drawing, Pieces::default()), bending), @r"
    Look at Piece(2): “Art 3” and “Art 4” touch or cross; the shop's least is 24 mm, 2 diameters. [common practice, no source]
    Look at Piece(0): Electrodes of “Art 1” and “Art 2” are 30 mm apart; the shop's least is 40 mm. [shop setting]
    ");
}

#[test]
fn parts_of_one_stroke_are_not_too_near_to_each_other() {
    let cut = Pieces {
        cuts: vec![Cut {
            stroke: "1".to_owned(),
            share: 0.5,
        }],
        ..Pieces::default()
    };
    assert_eq!(
        against(&art(r#"<path d="M0 0H300"/>"#, cut), Bending::default()),
        ""
    );
}

#[test]
fn a_sign_larger_than_its_outline_says_so() {
    let mut job = art(r#"<rect width="388" height="100"/>"#, Pieces::default());
    let outline = |width: &str, height: &str| {
        Some(Outline {
            width: width.to_owned(),
            height: height.to_owned(),
        })
    };
    // 388 and 100 between centres, half a tube of 12 on either side.
    job.outline = outline("400 mm", "112 mm");
    assert_eq!(against(&job, Bending::default()), "");
    job.outline = outline("399 mm", "");
    assert_snapshot!(against(&job, Bending::default()), @"Look at Job: With its tubes, rows one under the other as drawn, the sign has a width of 400 mm: more than its outline has (399 mm). [the job's outline]");
    job.outline = outline("wide", "11 cm");
    assert_snapshot!(against(&job, Bending::default()), @r"
    Stop at Job: The outline's width: expected a number such as 450, but found “wide” at character 1 of “wide”. [the job's outline]
    Look at Job: With its tubes, rows one under the other as drawn, the sign has a height of 112 mm: more than its outline has (110 mm). [the job's outline]
    ");
}

proptest! {
    /// However a row is cut, no glass is lost or won: lit glass stays, what is painted out only goes
    /// away with a jump, and no piece is longer than the shop bends.
    #[test]
    fn cutting_loses_no_glass(
        said in "[A-Z]{1,6}",
        face in prop::sample::select(vec!["sans", "script", "accents"]),
        longest in 120.0..2_000.0_f64,
        shares in prop::collection::vec(0.05..0.95_f64, 0..4),
        each in prop::sample::select(vec![Each::Usual, Each::Touching, Each::Whole]),
    ) {
        let whole = off(&text(&said, face, Pieces { keep_long: true, ..Pieces::default() }));
        let stroke = whole.pieces[0].strokes[0].name.clone();
        let pieces = Pieces {
            each,
            cuts: shares.iter().map(|&share| Cut { stroke: stroke.clone(), share }).collect(),
            ..Pieces::default()
        };
        let allowances = Allowances { longest_piece_mm: longest, ..Allowances::default() };
        let cut = takeoff(&text(&said, face, pieces), &allowances);
        let lit = |off: &Takeoff| off.pieces.iter().map(|piece| piece.lit.mm()).sum::<f64>();
        prop_assert!((lit(&whole) - lit(&cut)).abs() < 1e-6 * lit(&whole), "{} {}", lit(&whole), lit(&cut));
        for piece in &cut.pieces {
            prop_assert!(piece.column().mm() <= longest + 1e-5, "{} is {}", piece.label, piece.column().mm());
            let strokes: f64 = piece.strokes.iter().map(|stroke| kurbo::Shape::perimeter(&stroke.path, 1e-9)).sum();
            prop_assert!((strokes - piece.lit.mm()).abs() < 1e-5, "{} {}", strokes, piece.lit.mm());
        }
    }

    /// Choices made for another text or by hand in a file do not stop anything.
    #[test]
    fn any_choices_are_taken(
        said in "[A-Za-z]{1,4}",
        names in prop::collection::vec("[1-4] [A-Za-z] [1-3]", 8),
        share in prop::num::f64::ANY,
    ) {
        let pair = |at: usize| [names[at].clone(), names[at + 1].clone()];
        let pieces = Pieces {
            joined: vec![pair(0), pair(2)],
            parted: vec![pair(4), pair(1)],
            cuts: vec![Cut { stroke: names[6].clone(), share }],
            order: names.clone(),
            ..Pieces::default()
        };
        let job = text(&said, "sans", pieces);
        let found = off(&job);
        let usual = off(&text(&said, "sans", Pieces::default()));
        let lit = |off: &Takeoff| off.pieces.iter().map(|piece| piece.lit.mm()).sum::<f64>();
        prop_assert!((lit(&found) - lit(&usual)).abs() < 1e-6 * lit(&usual));
    }
}

#[test]
fn strokes_given_by_length_are_cut_too() {
    let row = Row::Strokes(StrokesRow {
        label: "Border".to_owned(),
        strokes: "5 m".to_owned(),
        tube: "12 mm".to_owned(),
        ..StrokesRow::default()
    });
    let job = Job {
        rows: vec![row],
        ..Job::default()
    };
    let lit: Vec<f64> = off(&job).pieces.iter().map(|p| p.lit.mm()).collect();
    assert_eq!(lit.len(), 3);
    assert!(
        lit.iter().all(|mm| (mm - 5000.0 / 3.0).abs() < 1e-6),
        "{lit:?}"
    );
}
