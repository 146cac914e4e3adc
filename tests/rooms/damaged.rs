//! Damaged files: every seed of the corpus and some thousand broken copies of them, through the
//! promises of `fuzz/src/targets.rs`. The same cases each time; `fuzz/README.md` says how to run more.

#![allow(
    clippy::disallowed_methods,
    reason = "the ban is for the core, which reads no files and no clock; this test reads its seeds \
              and sees that nothing hangs"
)]

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::Path;
use std::time::{Duration, Instant};

use tubewright::book::Allowances;
use tubewright::job::{ArtworkFile, ArtworkLines, ArtworkRow, Job, Row};
use tubewright::takeoff::takeoff;

#[path = "../../fuzz/src/mutate.rs"]
mod mutate;
#[path = "../../fuzz/src/targets.rs"]
mod targets;

/// No case may take longer, unoptimised and on a busy machine; most take milliseconds.
const HANGS: Duration = Duration::from_secs(30);

/// The seeds of a kind, in the order of their names.
fn seeds(kind: &str) -> Vec<Vec<u8>> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut files = Vec::new();
    for folder in mutate::folders(kind) {
        for file in std::fs::read_dir(root.join(&folder)).expect(&folder) {
            files.push(file.expect(&folder).path());
        }
    }
    files.retain(|file| mutate::is_seed(kind, &file.to_string_lossy()));
    files.sort();
    let bytes = files
        .iter()
        .map(|file| std::fs::read(file).expect("a seed"));
    bytes
        .flat_map(|bytes| mutate::seeds_in(kind, bytes))
        .collect()
}

/// Runs a kind's target on its seeds and on `cases` damaged copies.
fn damaged(kind: &str, cases: u64) {
    let all = targets::TARGETS;
    let (_, target) = all.iter().find(|(name, _)| *name == kind).expect("a kind");
    let seeds = seeds(kind);
    assert!(seeds.len() > 1, "{kind}: the corpus is there");
    for seed in &seeds {
        target(seed);
    }
    for number in 0..cases {
        let bytes = mutate::case(kind, &seeds, number);
        let began = Instant::now();
        if let Err(stopped) = catch_unwind(AssertUnwindSafe(|| target(&bytes))) {
            let why = stopped
                .downcast_ref::<String>()
                .map(String::as_str)
                .or_else(|| stopped.downcast_ref::<&str>().copied());
            panic!(
                "{kind}, case {number}: {}\n{}",
                why.unwrap_or("it stopped"),
                bytes[..bytes.len().min(2_000)].escape_ascii()
            );
        }
        let took = began.elapsed();
        assert!(took < HANGS, "{kind}, case {number} took {took:?}");
    }
}

#[test]
fn svg_files() {
    damaged("svg", 500);
}

#[test]
fn dxf_files() {
    damaged("dxf", 700);
}

#[test]
fn font_files() {
    damaged("font", 600);
}

#[test]
fn typed_lengths() {
    damaged("length", 4_000);
}

#[test]
fn an_artwork_that_becomes_too_high_or_has_too_many_lines_gets_a_sentence() {
    let said = |d: &str| {
        let row = ArtworkRow {
            file: "file".to_owned(),
            width: "1 m".to_owned(),
            lines: vec![ArtworkLines {
                colour: Some("#ff0000".to_owned()),
                tube: "t".to_owned(),
                ..ArtworkLines::default()
            }],
            ..ArtworkRow::default()
        };
        let text = format!("<svg><path fill='none' stroke='red' d='{d}'/></svg>");
        let job = Job {
            rows: vec![Row::Artwork(row)],
            artwork: vec![ArtworkFile {
                name: "file".to_owned(),
                text: text.into(),
            }],
            ..Job::default()
        };
        let off = takeoff(&job, &Allowances::default());
        assert!(off.pieces.is_empty(), "nothing is made");
        off.findings[0].says.clone()
    };
    // 1 m wide it is 1 km high.
    assert_eq!(
        said("M0 0L1 1000"),
        "The artwork's height at this width must be 0 to 50000 mm (smaller cannot be bent in glass, \
         larger is planned as several jobs), but is 1000000 mm."
    );
    assert_eq!(
        said("M0 0L1e-305 1000"),
        "The artwork is one upright line and has no width to be scaled by: leave the width empty, or \
         give the line as strokes."
    );
    assert_eq!(
        said(&"M0 0h9".repeat(20_001)),
        "A row of artwork must have at most 20000 lines that are tube, but this one has 20001: leave \
         only the lines of the tubes, or join in the drawing what was cut into bits."
    );
}
