//! Files that are far too much: as large as any that is read, or small ones that unfold into more
//! than any machine holds. Each is refused in a sentence, or read, in seconds and in little memory.
//!
//! A test binary of its own, with all in one test, because the most memory that was used is known of
//! the whole process only, and only on Linux.

#![allow(
    clippy::disallowed_methods,
    reason = "the ban is for the core, which reads no files and no clock; this test measures both"
)]

use std::time::{Duration, Instant};

use tubewright::book::Allowances;
use tubewright::drawing::outline::Font;
use tubewright::drawing::{Artwork, dxf, svg};
use tubewright::job::{ArtworkFile, ArtworkLines, ArtworkRow, Job, Row};
use tubewright::measure::{LengthUnit, length};
use tubewright::takeoff::takeoff;

/// Longest time for one file, unoptimised and on a busy machine.
const LONGEST: Duration = Duration::from_mins(1);
/// Most memory for one file, beside the file itself. A browser gives a page some thousand.
const MOST_MB: u64 = 400;
/// Nearly the largest file that is read; unoptimised, enough to go beyond every other limit.
const LARGE: usize = if cfg!(debug_assertions) {
    7_000_000
} else {
    49_000_000
};

/// A figure of `/proc/self/status` in MB; nothing elsewhere than on Linux.
fn memory_mb(name: &str) -> Option<u64> {
    let status = std::fs::read_to_string("/proc/self/status").ok()?;
    let line = status.lines().find(|line| line.starts_with(name))?;
    let kb: u64 = line.split_ascii_whitespace().nth(1)?.parse().ok()?;
    Some(kb / 1_000)
}

/// Runs something on a file and sees that it takes neither long nor much.
#[track_caller]
fn light<T>(what: &str, read: impl FnOnce() -> T) -> T {
    // What was used most is counted anew from here.
    let counted = std::fs::write("/proc/self/clear_refs", "5").is_ok();
    let before = memory_mb("VmRSS");
    let began = Instant::now();
    let out = read();
    let took = began.elapsed();
    if let (true, Some(before), Some(most)) = (counted, before, memory_mb("VmHWM")) {
        let used = most.saturating_sub(before);
        assert!(used < MOST_MB, "{what}: {used} MB");
    }
    assert!(took < LONGEST, "{what}: {took:?}");
    out
}

/// A file that is refused, and why: one of the reasons between bars, whichever is met first.
#[track_caller]
fn refused<T>(what: &str, read: impl FnOnce() -> Result<T, String>, wanted: &str) {
    match light(what, read) {
        Ok(_) => panic!("{what}: expected a refusal"),
        Err(why) => {
            assert!(why.len() < 400, "{what}: {why}");
            let any = wanted.split('|').any(|wanted| why.contains(wanted));
            assert!(any, "{what}: {why}");
        }
    }
}

/// `begin`, then `part` until the file is nearly as large as any that is read, then `end`.
fn filled(begin: &str, part: &str, end: &str) -> String {
    let room = LARGE - begin.len() - end.len();
    format!("{begin}{}{end}", part.repeat(room / part.len()))
}

/// A text for each number, one after the other.
fn each(numbers: impl IntoIterator<Item = usize>, text: impl Fn(usize) -> String) -> String {
    numbers.into_iter().map(text).collect::<Vec<_>>().concat()
}

/// A DXF file of group codes and values in turn.
fn pairs(words: &str) -> String {
    let words: Vec<&str> = words.split_ascii_whitespace().collect();
    let groups: Vec<String> = words.chunks(2).map(|two| two.join("\n") + "\n").collect();
    groups.concat()
}

fn entities(begin: &str) -> String {
    pairs(&format!("{begin} 0 SECTION 2 ENTITIES"))
}

const END: &str = "0\nENDSEC\n0\nEOF\n";

#[test]
fn files_that_are_far_too_much_are_refused_quickly_and_in_little_memory() {
    svg_files();
    dxf_files();
    fonts_and_lengths();
    glass();
}

fn svg_files() {
    let over = "uses its own parts or style rules more often";
    let many = "A drawing must have at most 200000 lines and curves";
    let elements = "The file has more elements than any drawing|has more elements, or uses";
    for (what, text, wanted) in [
        (
            "more bytes than are read",
            " ".repeat(51_000_000),
            "at most 50 MB",
        ),
        (
            "nothing but white space",
            " ".repeat(LARGE),
            "the file is empty",
        ),
        (
            "groups in groups",
            filled("<svg>", "<g>", ""),
            "at most 200 deep",
        ),
        (
            "groups beside groups",
            filled("<svg>", "<g/>", "</svg>"),
            elements,
        ),
        (
            "paths",
            filled("<svg>", "<path d='M0 0h1'/>", "</svg>"),
            elements,
        ),
        (
            "one path",
            filled("<svg><path d='M0 0", "h1", "'/></svg>"),
            many,
        ),
        (
            "moves",
            filled("<svg><path d='", "M0 0h1", "'/></svg>"),
            many,
        ),
        (
            "points",
            filled("<svg><polygon points='", "1 2 3 4 ", "'/></svg>"),
            many,
        ),
        (
            "arcs",
            filled("<svg><path d='M0 0", "a1 1 0 0 1 2 2", "'/></svg>"),
            many,
        ),
        (
            "tags never closed",
            "<".repeat(LARGE),
            "expected an SVG drawing",
        ),
        (
            "a comment never closed",
            filled("<svg><!--", "-<", ""),
            "expected an SVG drawing",
        ),
        (
            "an attribute never closed",
            filled("<svg a='", "<", ""),
            "expected an SVG drawing",
        ),
        (
            "entities",
            filled("<svg>", "&a;", "</svg>"),
            "is not declared",
        ),
        (
            "elements that each use two of the one before",
            {
                let levels = each(1..60, |at| {
                    let before = at - 1;
                    format!("<g id='a{at}'><use href='#a{before}'/><use href='#a{before}'/></g>")
                });
                format!("<svg><g id='a0'/>{levels}</svg>")
            },
            over,
        ),
        (
            "symbols that each use two of the one before",
            {
                let levels = each(1..60, |at| {
                    let before = at - 1;
                    format!(
                        "<symbol id='a{at}' viewBox='0 0 1 1'><use href='#a{before}'/><use href='#a{before}'/></symbol>"
                    )
                });
                format!("<svg viewBox='0 0 9 9'><symbol id='a0'/>{levels}<use href='#a59'/></svg>")
            },
            over,
        ),
        (
            "rules against elements",
            {
                let rules = each(0..20_000, |at| format!(".a{at} .b{at}>c{{fill:red}}"));
                format!(
                    "<svg><style>{rules}</style>{}</svg>",
                    "<g class='a1 b2'/>".repeat(90_000)
                )
            },
            over,
        ),
        (
            "names",
            {
                let names = each(0..900_000, |at| format!("<g id='{at}'/>"));
                format!("<svg>{names}</svg>")
            },
            over,
        ),
        (
            "classes against rules",
            {
                let classes = "x ".repeat(10_000);
                let rules = each(0..5_000, |at| format!(".a{at}{{fill:red}}"));
                format!(
                    "<svg><style>{rules}</style>{}</svg>",
                    format!("<g class='{classes}'/>").repeat(20)
                )
            },
            over,
        ),
    ] {
        refused(&format!("SVG of {what}"), || svg::read(&text), wanted);
    }
    // Large and harmless: read, and little comes of it.
    for (what, text, strokes) in [
        ("text", filled("<svg><text>", "a", "</text></svg>"), 0),
        ("comments", filled("<svg>", "<!-- -->", "</svg>"), 0),
        (
            "an attribute",
            filled("<svg><path id='", "a", "' d='M0 0h1'/></svg>"),
            1,
        ),
        (
            "transforms",
            filled("<svg><path d='M0 0h1' transform='", "scale(1)", "'/></svg>"),
            1,
        ),
        (
            "dots",
            filled("<svg><path d='M0 0h1", "M0 0", "'/></svg>"),
            1,
        ),
        (
            "rules",
            filled(
                "<svg><style>",
                ".a{fill:red}",
                "</style><path d='M0 0h1'/></svg>",
            ),
            1,
        ),
        (
            "selectors",
            filled(
                "<svg><style>",
                "a,",
                "b{x:y}</style><path d='M0 0h1'/></svg>",
            ),
            1,
        ),
        (
            "properties",
            filled("<svg><path d='M0 0h1' style='", "a:b;", "'/></svg>"),
            1,
        ),
        (
            "things not read",
            filled(
                "<svg>",
                &format!("<text>{}</text>", "a".repeat(400)),
                "</svg>",
            ),
            0,
        ),
    ] {
        let art = light(&format!("SVG of {what}"), || svg::read(&text));
        let art = art.unwrap_or_else(|why| panic!("{what}: {why}"));
        assert_eq!(art.strokes.len(), strokes, "{what}");
        assert!(art.unread.len() < 1_100, "{what}: {}", art.unread.len());
    }
}

fn dxf_files() {
    let often = "placed in each other so often";
    let begin = entities("");
    let line = pairs("0 LINE 10 0 20 0 11 5 21 0");
    // Blocks that each place two of the one before.
    let doubling = |innermost: &str| {
        let blocks: String = each(1..32, |at| {
            let before = at - 1;
            format!(
                "0 BLOCK 2 N{at} 10 0 20 0 0 INSERT 2 N{before} 10 0 20 0 \
                 0 INSERT 2 N{before} 10 1 20 1 0 ENDBLK "
            )
        });
        entities(&format!(
            "0 SECTION 2 BLOCKS 0 BLOCK 2 N0 10 0 20 0 {innermost} 0 ENDBLK {blocks} 0 ENDSEC"
        )) + &pairs("0 INSERT 2 N31 10 0 20 0")
            + END
    };
    let grid = entities(
        "0 SECTION 2 BLOCKS 0 BLOCK 2 A 10 0 20 0 0 LINE 10 0 20 0 11 5 21 0 0 ENDBLK 0 ENDSEC",
    ) + &pairs("0 INSERT 2 A 10 0 20 0 70 2147483647 71 2147483647 44 1 45 1")
        + END;
    for (what, text, wanted) in [
        (
            "more bytes than are read",
            " ".repeat(51_000_000),
            "up to 50 MB",
        ),
        (
            "nothing but white space",
            "\n".repeat(LARGE),
            "no section ENTITIES",
        ),
        ("one line", "0".repeat(LARGE), "no section ENTITIES"),
        ("lines", filled(&begin, &line, END), "segments"),
        (
            "texts",
            filled(&begin, &pairs("0 TEXT"), END),
            "more than 500",
        ),
        (
            "points of one polyline",
            filled(
                &(begin.clone() + "0\nLWPOLYLINE\n"),
                "10\n1\n20\n2\n10\n2\n20\n1\n",
                END,
            ),
            "values|segments",
        ),
        (
            "vertices",
            filled(
                &(begin.clone() + &pairs("0 POLYLINE 70 1")),
                &pairs("0 VERTEX 10 1 20 2 0 VERTEX 10 2 20 1"),
                END,
            ),
            "segments",
        ),
        (
            "blocks that each place two of the one before",
            doubling("0 LINE 10 0 20 0 11 5 21 0"),
            "segments",
        ),
        (
            "blocks of nothing that is read",
            doubling("0 TEXT 1 a"),
            often,
        ),
        ("rows and columns", grid, "segments"),
    ] {
        refused(
            &format!("DXF of {what}"),
            || dxf::read(text.as_bytes()),
            wanted,
        );
    }
    for (what, text, strokes) in [
        ("remarks", filled(&begin, "999\nremark\n", END), 0),
        (
            "a header",
            filled(
                &pairs("0 SECTION 2 HEADER"),
                "9\n$X\n70\n1\n",
                &(pairs("0 ENDSEC") + &begin + END),
            ),
            0,
        ),
        (
            "layers",
            filled(
                &pairs("0 SECTION 2 TABLES"),
                &pairs("0 LAYER 2 Same"),
                &(pairs("0 ENDSEC") + &begin + &line + END),
            ),
            1,
        ),
        (
            "a text",
            filled(
                &(begin.clone() + "0\nTEXT\n1\n"),
                "a",
                &("\n".to_owned() + END),
            ),
            0,
        ),
    ] {
        let art = light(&format!("DXF of {what}"), || dxf::read(text.as_bytes()));
        match art {
            Ok(art) => assert_eq!(art.strokes.len(), strokes, "{what}"),
            Err(why) => assert!(why.len() < 400 && why.contains("values"), "{what}: {why}"),
        }
    }
}

fn fonts_and_lengths() {
    let font = |bytes: Vec<u8>| Font::read(&bytes);
    refused(
        "font of more bytes than are read",
        || font(vec![0; 21_000_000]),
        "at most 20 MB",
    );
    refused(
        "font of nothing",
        || font(vec![0; 19_000_000]),
        "not a font",
    );
    // Glyphs that each hold two of the one before, 40 deep; one of a thousand parts; one of itself.
    for (what, bytes, missing) in [
        ("nested", &include_bytes!("corpus/font/nested.ttf")[..], "A"),
        ("wide", &include_bytes!("corpus/font/wide.ttf")[..], "AV"),
    ] {
        let font = Font::read(bytes).expect("a font");
        let shaped = light(what, || font.shape("AVH", 100.0));
        let found: String = shaped.missing.iter().map(|&(_, letter)| letter).collect();
        assert!(found.starts_with(missing), "{what}: {found}");
    }
    for text in [
        "9".repeat(1_000_000),
        "1+".repeat(500_000) + "1",
        "1 x ".repeat(200_000),
        "½".repeat(1_000_000),
        format!("0.{}1", "0".repeat(1_000_000)),
    ] {
        let read = light("a long length", || length(&text, LengthUnit::Millimetres));
        if let Err(error) = read {
            assert!(error.to_string().len() < 400, "{error}");
        }
    }
}

/// More separate lines than any sign has.
const LINES: usize = 2_000;

/// Many separate lines taken off as small as may be and with all ends in one place.
fn glass() {
    let lines = |line: &dyn Fn(usize) -> String| {
        let all = each(0..LINES, line);
        format!(
            "<svg width='1000mm' viewBox='0 0 1000 1000'><path fill='none' stroke='red' d='{all}'/></svg>"
        )
    };
    for (what, text) in [
        (
            "rays from one place",
            lines(&|at| format!("M0 0L{} {}", 1 + at % 100, 1 + at / 20)),
        ),
        (
            "lines one beside the other",
            lines(&|at| format!("M{} {}h.5", at % 100, at / 20)),
        ),
        (
            "lines on each other",
            lines(&|at| format!("M{} 0h{}", at % 3, 5 + at % 7)),
        ),
    ] {
        let art = svg::read(&text).unwrap_or_else(|why| panic!("{what}: {why}"));
        for width in ["10 mm", "1 m"] {
            let what = format!("{what}, {width} wide");
            let lit = light(&what, || lit_mm(&art, &text, width));
            let wanted =
                art.length() / art.bounds.width() * if width == "1 m" { 1_000.0 } else { 10.0 };
            assert!(
                (lit / wanted - 1.0).abs() < 1e-6,
                "{what}: {lit}, not {wanted}"
            );
        }
    }
}

fn lit_mm(art: &Artwork, text: &str, width: &str) -> f64 {
    let lines = art.groups().into_iter().map(|group| ArtworkLines {
        colour: group.colour,
        layer: group.layer,
        tube: "t".to_owned(),
        ..ArtworkLines::default()
    });
    let row = ArtworkRow {
        file: "file".to_owned(),
        width: width.to_owned(),
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
    off.pieces
        .iter()
        .fold(0.0, |sum, piece| sum + piece.lit.mm())
}
