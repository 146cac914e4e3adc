//! Drawings that general programs wrote (`tests/reference/drawn`), through the readers and the
//! takeoff: as long as another reader finds them and as they were meant, and what is not read is named.

use std::collections::BTreeMap;

use tubewright::book::Allowances;
use tubewright::drawing::{Artwork, dxf, svg};
use tubewright::job::{ArtworkFile, ArtworkLines, ArtworkRow, Job, Row};
use tubewright::takeoff::{Takeoff, artwork, takeoff};

macro_rules! drawings {
    ($($name:literal),* $(,)?) => {
        [$(($name, include_str!(concat!("../reference/drawn/", $name)))),*]
    };
}

/// Source of all: `tests/reference/drawn/PROVENANCE.md`.
const DRAWINGS: [(&str, &str); 13] = drawings![
    "ezdxf_2018.dxf",
    "ezdxf_r12.dxf",
    "gnuplot.dxf",
    "gnuplot.svg",
    "graphviz.svg",
    "inkscape.svg",
    "inkscape_r14.dxf",
    "makerjs.dxf",
    "makerjs.svg",
    "matplotlib.svg",
    "paper.svg",
    "potrace.dxf",
    "potrace.svg",
];

/// Lengths another reader finds, by layer (DXF only) and colour.
const LENGTHS: &str = include_str!("../reference/drawn/drawn_lengths.csv");

/// Lengths as they were meant, and how near the file comes to them.
const MEANT: &str = include_str!("../reference/drawn/drawn_meant.csv");

fn text(name: &str) -> &'static str {
    let known = DRAWINGS.iter().find(|(known, _)| *known == name);
    known.expect("a drawing of the folder").1
}

fn is_dxf(name: &str) -> bool {
    name.rsplit_once('.').is_some_and(|(_, end)| end == "dxf")
}

fn read(name: &str) -> Artwork {
    let read = if is_dxf(name) {
        dxf::read(text(name).as_bytes())
    } else {
        svg::read(text(name))
    };
    read.unwrap_or_else(|why| panic!("{name}: {why}"))
}

fn rows(table: &str) -> Vec<Vec<String>> {
    let mut reader = csv::Reader::from_reader(table.as_bytes());
    let rows = reader.records().map(|row| {
        let row = row.expect("a row of the table");
        row.iter().map(str::to_owned).collect()
    });
    rows.collect()
}

/// Lines, closed ones and length by layer and colour; the layer of a DXF only.
fn found(name: &str, art: &Artwork) -> BTreeMap<(String, String), (usize, usize, f64)> {
    let mut all = BTreeMap::new();
    for group in art.groups() {
        let layer = group.layer.filter(|_| is_dxf(name));
        let key = (layer.unwrap_or_default(), group.colour.unwrap_or_default());
        let one = all.entry(key).or_insert((0, 0, 0.0));
        one.0 += group.strokes;
        one.1 += group.closed;
        one.2 += group.length;
    }
    all
}

#[test]
fn lines_are_as_many_and_as_long_as_another_reader_finds() {
    let mut wanted = BTreeMap::<String, BTreeMap<_, (usize, usize, f64)>>::new();
    for row in rows(LENGTHS) {
        let [file, layer, colour, lines, closed, length] = &row[..] else {
            panic!("six columns: {row:?}")
        };
        wanted.entry(file.clone()).or_default().insert(
            (layer.clone(), colour.clone()),
            (
                lines.parse().expect("a count"),
                closed.parse().expect("a count"),
                length.parse().expect("a length"),
            ),
        );
    }
    assert_eq!(wanted.len(), DRAWINGS.len(), "each drawing is measured");
    for (name, wanted) in wanted {
        let found = found(&name, &read(&name));
        let names = |all: &BTreeMap<(String, String), _>| all.keys().cloned().collect::<Vec<_>>();
        assert_eq!(names(&found), names(&wanted), "{name}");
        for (key, wanted) in wanted {
            let found = found[&key];
            assert_eq!((found.0, found.1), (wanted.0, wanted.1), "{name} {key:?}");
            // Twelve digits are written down, arcs are right to a part in 10¹⁰.
            assert!(
                (found.2 / wanted.2 - 1.0).abs() < 1e-9,
                "{name} {key:?}: {}, not {}",
                found.2,
                wanted.2
            );
        }
    }
}

#[test]
fn lines_are_as_long_as_they_were_meant() {
    let table = rows(MEANT);
    for (name, _) in DRAWINGS {
        assert!(table.iter().any(|row| row[0] == name), "{name} has a row");
    }
    for row in table {
        let art = read(&row[0]);
        let groups = art.groups();
        let here = groups
            .iter()
            .filter(|group| group.colour.as_ref() == Some(&row[1]));
        let length: f64 = here.map(|group| group.length).sum();
        let meant: f64 = row[2].parse().expect("a length");
        let within: f64 = row[3].parse().expect("a tolerance");
        assert!(
            (length / meant - 1.0).abs() < within,
            "{} {}: {length}, not {meant} ({})",
            row[0],
            row[1],
            row[4]
        );
    }
}

#[test]
fn sizes_are_those_the_files_say() {
    // A unit is 1 mm, a point of 1/72 in, or nothing the file says.
    for (name, wanted) in [
        ("ezdxf_2018.dxf", Some(1.0)),
        ("ezdxf_r12.dxf", None),
        ("gnuplot.dxf", None),
        ("gnuplot.svg", None),
        ("graphviz.svg", Some(25.4 / 72.0)),
        ("inkscape.svg", Some(1.0)),
        ("inkscape_r14.dxf", Some(1.0)),
        ("makerjs.dxf", Some(1.0)),
        ("makerjs.svg", Some(1.0)),
        ("matplotlib.svg", Some(25.4 / 72.0)),
        ("paper.svg", None),
        ("potrace.dxf", None),
        ("potrace.svg", Some(25.4 / 72.0)),
    ] {
        let found = read(name).mm_per_unit;
        let near = match (found, wanted) {
            (Some(found), Some(wanted)) => (found / wanted - 1.0_f64).abs() < 1e-12,
            (found, wanted) => found == wanted,
        };
        assert!(near, "{name}: {found:?}, not {wanted:?}");
    }
}

#[test]
fn layers_are_those_of_the_program() {
    let layers = |name: &str| {
        let groups = read(name).groups();
        let mut layers: Vec<_> = groups.into_iter().map(|group| group.layer).collect();
        layers.dedup();
        layers.into_iter().flatten().collect::<Vec<_>>()
    };
    assert_eq!(layers("inkscape.svg"), ["Letters", "Night sky"]);
    assert_eq!(layers("inkscape_r14.dxf"), ["Letters", "Night_sky"]);
    assert_eq!(layers("makerjs.dxf"), ["rose", "star", "border"]);
    assert_eq!(layers("paper.svg"), ["bubbles"]);
}

#[test]
fn what_is_not_read_is_named() {
    let said = DRAWINGS.iter().flat_map(|(name, _)| {
        let unread = read(name).unread.into_iter();
        unread.map(move |unread| format!("{name}: {}: {}", unread.element, unread.why))
    });
    let said = said.collect::<Vec<_>>().join("\n");
    // By the files: each text, the dashed lines, a hatch, lines that begin and end at one point, a
    // clip around a whole drawing, paths that have neither line nor filling.
    insta::assert_snapshot!(said, @r"
    ezdxf_2018.dxf: TEXT 3F at line 2352: text must be turned into outlines
    ezdxf_2018.dxf: HATCH 44 at line 2572: fillings are not read; draw the outline as a polyline
    ezdxf_2018.dxf: layer “Off”: it is switched off; 1 element on it
    ezdxf_r12.dxf: TEXT 41 at line 1248: text must be turned into outlines
    ezdxf_r12.dxf: layer “Off”: it is switched off; 1 element on it
    gnuplot.dxf: TEXT at line 3234: text must be turned into outlines
    gnuplot.dxf: TEXT at line 4802: text must be turned into outlines
    gnuplot.svg: text at line 77: text must be turned into outlines
    gnuplot.svg: text at line 118: text must be turned into outlines
    graphviz.svg: polygon at line 11: it has neither a line nor a filling
    graphviz.svg: text at line 61: text must be turned into outlines
    graphviz.svg: path at line 66: it is dashed, and is read as one line
    inkscape_r14.dxf: LINE 115 at line 1420: it has no length
    inkscape_r14.dxf: LINE 11e at line 1940: it has no length
    inkscape_r14.dxf: LINE 127 at line 2460: it has no length
    inkscape_r14.dxf: LINE 130 at line 2980: it has no length
    inkscape_r14.dxf: LINE 143 at line 3740: it has no length
    inkscape_r14.dxf: LINE 147 at line 3912: it has no length
    inkscape_r14.dxf: LINE 14d at line 4208: it has no length
    inkscape_r14.dxf: LINE 150 at line 4356: it has no length
    inkscape_r14.dxf: LINE 15a at line 4938: it has no length
    matplotlib.svg: path at line 32: it is cut by a clip-path, and is read whole
    matplotlib.svg: path at line 39: it is cut by a clip-path, and is read whole
    matplotlib.svg: path at line 47: it is cut by a clip-path, and is read whole
    matplotlib.svg: path at line 61: it is cut by a clip-path, and is read whole
    matplotlib.svg: path at line 120: it is cut by a clip-path, and is read whole
    matplotlib.svg: g at line 192: it is cut by a clip-path, and is read whole
    matplotlib.svg: path at line 208: it is cut by a clip-path, and is read whole
    matplotlib.svg: path at line 208: it is dashed, and is read as one line
    paper.svg: rect at line 1, column 2162: it is dashed, and is read as one line
    paper.svg: path at line 1, column 2320: it has neither a line nor a filling
    paper.svg: path at line 1, column 2558: it has neither a line nor a filling
    paper.svg: text at line 1, column 3195: text must be turned into outlines
    ");
}

/// A row of a drawing, all of its lines in one tube.
fn taken(name: &str, width: &str) -> (Artwork, Takeoff) {
    let file = ArtworkFile {
        name: name.to_owned(),
        text: text(name).into(),
    };
    let art = artwork(&file)
        .as_ref()
        .clone()
        .unwrap_or_else(|why| panic!("{name}: {why}"));
    let lines = art
        .groups()
        .into_iter()
        .map(|group| ArtworkLines {
            colour: group.colour,
            layer: group.layer,
            tube: "t".to_owned(),
            ..ArtworkLines::default()
        })
        .collect();
    let job = Job {
        rows: vec![Row::Artwork(ArtworkRow {
            label: "Ornament".to_owned(),
            file: name.to_owned(),
            width: width.to_owned(),
            lines,
            ..ArtworkRow::default()
        })],
        artwork: vec![file],
        ..Job::default()
    };
    // Nothing is too long here, so that every line stays whole.
    let allowances = Allowances {
        longest_piece_mm: 100_000.0,
        ..Allowances::default()
    };
    (art, takeoff(&job, &allowances))
}

#[test]
fn the_glass_is_as_long_as_the_lines_at_the_wanted_width() {
    for (name, _) in DRAWINGS {
        let (art, off) = taken(name, "2 m");
        let scale = 2_000.0 / art.bounds.width();
        let lit: f64 = off.pieces.iter().map(|piece| piece.lit.mm()).sum();
        let wanted = art.length() * scale;
        assert!(
            (lit / wanted - 1.0).abs() < 1e-9,
            "{name}: {lit} mm of glass, lines of {wanted} mm"
        );
        assert!(
            (off.bounds.width() - 2_000.0).abs() < 1e-6,
            "{name}: {} mm wide",
            off.bounds.width()
        );
        let strokes: usize = off.pieces.iter().map(|piece| piece.strokes.len()).sum();
        assert_eq!(strokes, art.strokes.len(), "{name}: every line once");
    }
}

#[test]
fn what_is_not_read_is_said_once_for_each_reason() {
    let (_, off) = taken("inkscape_r14.dxf", "");
    insta::assert_snapshot!(said(&off), @"Look: Not read as drawn: LINE 115 at line 1420 and 8 more: it has no length.");
    let (_, off) = taken("ezdxf_2018.dxf", "");
    insta::assert_snapshot!(said(&off), @r"
    Look: Not read as drawn: TEXT 3F at line 2352: text must be turned into outlines.
    Look: Not read as drawn: HATCH 44 at line 2572: fillings are not read; draw the outline as a polyline.
    Look: Not read as drawn: layer “Off”: it is switched off; 1 element on it.
    Note: Painted-out glass between the strokes of a piece is estimated by the shortest straight jumps; a bender's double-backs may take more.
    ");
}

fn said(off: &Takeoff) -> String {
    let all = off.findings.iter();
    let all: Vec<String> = all
        .map(|finding| format!("{:?}: {}", finding.grade, finding.says))
        .collect();
    all.join("\n")
}

#[test]
fn lines_that_touch_are_one_piece_of_glass() {
    // How many runs of lines that touch at their ends each drawing has, by looking at it.
    for (name, width, wanted) in [
        // Each letter outline (M and N one, O two each), the moon, wind, cloud, ring and two stars.
        ("inkscape.svg", "", 12),
        // The same without the stars, every outline in bits.
        ("inkscape_r14.dxf", "", 10),
        // The ring has two outlines, the bar one.
        ("potrace.dxf", "1 m", 3),
    ] {
        let (_, off) = taken(name, width);
        assert_eq!(off.pieces.len(), wanted, "{name}");
    }
}
