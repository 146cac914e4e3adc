//! SVG files as artwork: lengths against `tests/reference/paths`, what is left unread, what is
//! refused and in which words, and that no text makes the reader stop.

use kurbo::Rect;
use proptest::prelude::*;
use tubewright::drawing::{Artwork, svg};

/// Source: `tests/reference/paths/PROVENANCE.md`.
const LENGTHS: &str = include_str!("../reference/paths/path_lengths.csv");

/// A drawing with nothing around it: lines in black.
fn lines(inside: &str) -> Artwork {
    drawing(&format!(
        "<svg viewBox='0 0 200 100'><g fill='none' stroke='black'>{inside}</g></svg>"
    ))
}

fn drawing(text: &str) -> Artwork {
    svg::read(text).unwrap_or_else(|why| panic!("{text}: {why}"))
}

fn refused(text: &str) -> String {
    svg::read(text).expect_err(text)
}

/// What was not read, one sentence a thing.
fn unread(art: &Artwork) -> Vec<String> {
    let all = art.unread.iter();
    all.map(|unread| format!("{}: {}", unread.element, unread.why))
        .collect()
}

#[track_caller]
fn near(found: f64, wanted: f64) {
    assert!(
        (found / wanted - 1.0).abs() < 1e-9,
        "found {found}, wanted {wanted}"
    );
}

/// Names, path data and exact lengths of the table.
fn table() -> Vec<(String, String, f64)> {
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(LENGTHS.as_bytes());
    let headers = reader.headers().expect("a first line").clone();
    assert_eq!(&headers[2], "exact_20_digits");
    let rows = reader.records().map(|row| {
        let row = row.expect("a row of the table");
        let length = row[2].parse().expect("a length");
        (row[0].to_owned(), row[1].to_owned(), length)
    });
    rows.collect()
}

#[test]
fn lengths_are_those_of_the_table() {
    let table = table();
    assert_eq!(table.len(), 12, "the table is whole");
    for (name, d, wanted) in table {
        let art = lines(&format!("<path d='{d}'/>"));
        assert_eq!(unread(&art), [""; 0], "{name}");
        let found = art.length();
        assert!(
            (found / wanted - 1.0).abs() < 1e-9,
            "{name}: {found}, not {wanted}"
        );
    }
}

/// Perimeter of an ellipse by Gauss and Kummer; h falls so fast that 40 terms are exact.
fn perimeter(a: f64, b: f64) -> f64 {
    let h = ((a - b) / (a + b)).powi(2);
    let (mut sum, mut term) = (1.0, 1.0);
    for n in 1..200 {
        let n = f64::from(n);
        // Binomials of ½ over n, one from the last.
        term *= (1.5 - n) / n;
        sum += term * term * h.powf(n);
    }
    std::f64::consts::PI * (a + b) * sum
}

#[test]
fn shapes_have_the_lengths_of_their_formulas() {
    use std::f64::consts::PI;
    for (shape, wanted) in [
        ("<circle cx='7' cy='8' r='30'/>", 60.0 * PI),
        ("<ellipse rx='60' ry='25'/>", 278.479_746_855_423_7),
        ("<ellipse rx='60' ry='25'/>", perimeter(60.0, 25.0)),
        ("<ellipse rx='100' ry='20'/>", perimeter(100.0, 20.0)),
        ("<ellipse rx='5'/>", 10.0 * PI),
        ("<rect x='3' width='30' height='40'/>", 140.0),
        // Four straight sides and a whole circle of 5.
        (
            "<rect width='30' height='40' rx='5'/>",
            20.0 * 2.0 + 30.0 * 2.0 + 10.0 * PI,
        ),
        // Radii are cut at half the sides: what is left is a circle between two lines.
        (
            "<rect width='30' height='40' ry='99' rx='15'/>",
            perimeter(15.0, 20.0),
        ),
        (
            "<rect width='30' height='40' rx='5' ry='10'/>",
            20.0 * 2.0 + 20.0 * 2.0 + perimeter(5.0, 10.0),
        ),
        ("<line x1='1' y1='1' x2='4' y2='5'/>", 5.0),
        ("<polyline points='0,0 3,4 3,14'/>", 15.0),
        ("<polygon points='0 0-30 0-30-40'/>", 120.0),
        // Signs and points part numbers, and flags need no space.
        ("<path d='M.5.5l3-4'/>", 5.0),
        ("<path d='M0 0a5 5 0 0110 0'/>", 5.0 * PI),
        ("<path d='M0 0A0 5 0 0 1 3 4'/>", 5.0),
        ("<path d='M0 0 A-5 5 0 1 0 10 0'/>", 5.0 * PI),
        // Three quarters of a circle, and the rest of it.
        ("<path d='M0 -8 A8 8 0 1 1 -8 0'/>", 12.0 * PI),
        ("<path d='M0 -8 A8 8 0 0 1 -8 0'/>", 4.0 * PI),
        ("<path d='M0 -8 A8 8 0 0 0 -8 0'/>", 4.0 * PI),
        // Implicit lines behind a move, and a stroke that goes on from where the last one closed.
        ("<path d='m1 1 3 4 0 10'/>", 15.0),
        ("<path d='M0 0h10v10H0z l3 4'/>", 45.0),
    ] {
        let art = lines(shape);
        assert_eq!(unread(&art), [""; 0], "{shape}");
        let found = art.length();
        assert!(
            (found / wanted - 1.0).abs() < 1e-9,
            "{shape}: {found}, not {wanted}"
        );
    }
}

#[test]
fn each_subpath_is_a_stroke_that_knows_whether_it_is_closed() {
    let art = lines("<path d='M0 0h10v10z M50 50h10 M90 9h5v5h-5v-5 M1 1'/>");
    let closed: Vec<bool> = art.strokes.iter().map(|stroke| stroke.closed).collect();
    assert_eq!(
        closed,
        [true, false, true],
        "by its word, open, back at its start"
    );
    assert_eq!(art.strokes[1].path.to_svg(), "M50,50 L60,50");
    let art = drawing("<svg>\n<path id='a' d='M0 0h9'/></svg>");
    assert!(
        art.strokes[0].area.is_some(),
        "without a line it is an area"
    );
    assert_eq!(art.strokes[0].colour.as_deref(), Some("#000000"));
    assert_eq!(art.strokes[0].element, "path “a” at line 2");
    assert_eq!(art.bounds, Rect::new(0.0, 0.0, 9.0, 0.0));
}

/// The path that transforms are tried on, and its bounds after each.
#[test]
fn transforms_move_turn_and_scale() {
    for (transform, wanted) in [
        ("translate(10)", [10.0, 0.0, 40.0, 40.0]),
        ("translate(10-5)", [10.0, -5.0, 40.0, 35.0]),
        ("scale(2)", [0.0, 0.0, 60.0, 80.0]),
        ("scale(-1,2)", [-30.0, 0.0, 0.0, 80.0]),
        ("rotate(90)", [-40.0, 0.0, 0.0, 30.0]),
        ("rotate(180, 10 10)", [-10.0, -20.0, 20.0, 20.0]),
        ("skewX(45)", [0.0, 0.0, 70.0, 40.0]),
        ("skewY(45)", [0.0, 0.0, 30.0, 70.0]),
        ("matrix(0 1 1 0 5 6)", [5.0, 6.0, 45.0, 36.0]),
        // The right one comes first.
        (" translate(1,2) , scale(1e1) ", [1.0, 2.0, 301.0, 402.0]),
        ("", [0.0, 0.0, 30.0, 40.0]),
    ] {
        let art = lines(&format!("<path transform='{transform}' d='M0 0L30 40'/>"));
        assert_eq!(unread(&art), [""; 0], "{transform}");
        let [x0, y0, x1, y1] = wanted;
        for (found, wanted) in [
            (art.bounds.x0, x0),
            (art.bounds.y0, y0),
            (art.bounds.x1, x1),
            (art.bounds.y1, y1),
        ] {
            assert!(
                (found - wanted).abs() < 1e-9,
                "{transform}: {:?}",
                art.bounds
            );
        }
    }
    // As a style: with units, in parts of the page (200 by 100), about a point.
    for (style, wanted) in [
        ("transform:translate(1in,10%)", (96.0, 10.0)),
        ("transform:translateX(50%) translateY(2px)", (100.0, 2.0)),
        (
            "transform:rotate(.5turn);transform-origin:center",
            (170.0, 60.0),
        ),
        (
            "transform:rotate(180deg);transform-origin:bottom left",
            (-30.0, 160.0),
        ),
        ("transform:scale(200%)", (0.0, 0.0)),
    ] {
        let art = lines(&format!("<path style='{style}' d='M0 0L30 40'/>"));
        assert_eq!(unread(&art), [""; 0], "{style}");
        let corner = (art.bounds.x0, art.bounds.y0.max(0.0));
        let off = (corner.0 - wanted.0).abs() + (corner.1 - wanted.1).abs();
        assert!(off < 1e-9, "{style}: {:?}", art.bounds);
    }
    for transform in [
        "warp(3)",
        "scale(1",
        "rotate(1,2)",
        "scale(1e999)",
        "matrix(1 2 3)",
        "x",
    ] {
        let art = lines(&format!("<path transform='{transform}' d='M0 0L30 40'/>"));
        assert!(art.strokes.is_empty(), "{transform}");
        assert_eq!(
            unread(&art),
            [format!(
                "path at line 1: its transform “{transform}” cannot be followed"
            )]
        );
    }
}

#[test]
fn the_size_of_a_unit_is_what_the_page_says() {
    for (page, wanted) in [
        ("width='200mm' viewBox='0 0 100 50'", Some(2.0)),
        ("height='10cm' viewBox='0 0 100 50'", Some(2.0)),
        (
            "width='4in' height='2in' viewBox='5 5 101.6 50.8'",
            Some(1.0),
        ),
        ("width='72pt' viewBox='0 0 25.4 1'", Some(1.0)),
        ("width='6pc' viewBox='0 0 25.4 1'", Some(1.0)),
        ("width='40Q' viewBox='0 0 10 1'", Some(1.0)),
        ("width='96px' viewBox='0 0 25.4 1'", Some(1.0)),
        ("width='96' viewBox='0 0 25.4 1'", None),
        ("width='100%' height='100%' viewBox='0 0 25.4 1'", None),
        ("viewBox='0 0 25.4 1'", None),
        ("width='200mm'", Some(25.4 / 96.0)),
        ("", None),
        // The smaller of both sides, or the larger.
        (
            "width='200mm' height='10mm' viewBox='0 0 100 50'",
            Some(0.2),
        ),
        (
            "width='200mm' height='10mm' viewBox='0 0 100 50' preserveAspectRatio='xMidYMid slice'",
            Some(2.0),
        ),
    ] {
        let art = drawing(&format!(
            "<svg {page}><path stroke='#000' d='M0 0L30 40'/></svg>"
        ));
        assert_eq!(art.length(), 50.0, "{page}");
        match (art.mm_per_unit, wanted) {
            (Some(found), Some(wanted)) => near(found, wanted),
            (found, wanted) => assert_eq!(found, wanted, "{page}"),
        }
    }
    // Pulled in one direction: a unit is that of the width, and the lines are pulled instead.
    let art = drawing(
        "<svg width='100mm' height='100mm' viewBox='0 0 100 50' preserveAspectRatio='none'>
         <path stroke='#000' d='M0 0L30 20'/></svg>",
    );
    near(art.mm_per_unit.expect("a size"), 1.0);
    near(art.length(), 50.0);
    // Lengths with units within the drawing are px, whatever the page makes of a px.
    near(lines("<line x2='1in'/>").length(), 96.0);
    near(lines("<line x2='25.4mm'/>").length(), 96.0);
    // Percent: of the width 200, of the height 100, of the diagonal over the root of two.
    near(lines("<line x2='10%' y2='15%'/>").length(), 25.0);
    near(
        lines("<circle r='10%'/>").length(),
        0.2 * std::f64::consts::PI * 25_000_f64.sqrt(),
    );
}

#[test]
fn frames_within_the_drawing_have_units_of_their_own() {
    // 100 by 50 at (10, 20), a viewBox of 10 by 10 into it: five to one, in the middle.
    let art = lines(
        "<svg x='10' y='20' width='100' height='50' viewBox='0 0 10 10'><path d='M0 0h10v10'/></svg>",
    );
    assert_eq!(art.bounds, Rect::new(35.0, 20.0, 85.0, 70.0));
    let art = lines(
        "<svg width='100' height='50' viewBox='0 0 10 10' preserveAspectRatio='xMaxYMax slice'>
         <path d='M0 0h10v10'/></svg>",
    );
    assert_eq!(art.bounds, Rect::new(0.0, -50.0, 100.0, 50.0));
    let art = lines(
        "<svg width='50%' height='50' viewBox='0 0 10 10' preserveAspectRatio='none'>
         <path d='M0 0h10v10'/></svg>",
    );
    assert_eq!(art.bounds, Rect::new(0.0, 0.0, 100.0, 50.0));
}

#[test]
fn parts_are_drawn_where_they_are_used() {
    let art = drawing(
        "<svg xmlns='http://www.w3.org/2000/svg' xmlns:xlink='http://www.w3.org/1999/xlink'>
         <defs><path id='a' d='M0 0L30 40'/><g id='two'><use href='#a'/><use xlink:href='#a' x='9'/></g></defs>
         <symbol id='s' viewBox='0 0 10 10'><path d='M0 0L3 4'/></symbol>
         <use href='#two' stroke='red' transform='scale(2)' x='1'/>
         <use href='#s' width='100' height='100' stroke='#00F'/>
         <use href='#s' style='stroke:blue'/></svg>",
    );
    let found: Vec<_> = art
        .strokes
        .iter()
        .map(|stroke| {
            let start = stroke.path.bounding_box_corner();
            (stroke.colour.as_deref(), start, stroke.length())
        })
        .collect();
    assert_eq!(
        found[..3],
        [
            (Some("#ff0000"), (2.0, 0.0), 100.0),
            (Some("#ff0000"), (20.0, 0.0), 100.0),
            (Some("#0000ff"), (0.0, 0.0), 50.0),
        ]
    );
    assert_eq!(
        art.strokes[0].element,
        "path “a” at line 2 (used at line 4)"
    );
    assert_eq!(
        unread(&art),
        ["symbol “s” at line 3 (used at line 6): its size is not known"],
        "without a page there is no size to take"
    );
}

/// The upper left corner of a path, for short tables.
trait Corner {
    fn bounding_box_corner(&self) -> (f64, f64);
}

impl Corner for kurbo::BezPath {
    fn bounding_box_corner(&self) -> (f64, f64) {
        let bounds = kurbo::Shape::bounding_box(self);
        (bounds.x0, bounds.y0)
    }
}

#[test]
fn colours_follow_the_cascade() {
    let sheet = "<style>/* a { } */ path { stroke: green } .b, .c { stroke: #00F; } \
                 #d { stroke: rgb(255, 0, 0) } .e { stroke: red !important; fill: none }
                 g.f > path { stroke: hsl(120, 100%, 50%) } .x .y { stroke: Navy }
                 @font-face { font-family: x; src: url(data:a;b) }</style>";
    for (inside, wanted) in [
        ("<path d='M0 0h9' stroke='red'/>", "#008000"),
        ("<path d='M0 0h9' class='b'/>", "#0000ff"),
        ("<path d='M0 0h9' class='a\tc'/>", "#0000ff"),
        ("<path d='M0 0h9' class='b' id='d'/>", "#ff0000"),
        ("<path d='M0 0h9' id='d' style='stroke: #abc'/>", "#aabbcc"),
        (
            "<path d='M0 0h9' class='e' style='stroke:#abc'/>",
            "#ff0000",
        ),
        (
            "<path d='M0 0h9' style='a:b;-x-y: z(;);STROKE:#ABC;'/>",
            "#aabbcc",
        ),
        ("<g class='f'><path d='M0 0h9'/></g>", "#00ff00"),
        (
            "<g class='x'><a><path class='y' d='M0 0h9'/></a></g>",
            "#000080",
        ),
        (
            "<g color='#123456'><line x2='9' stroke='currentColor'/></g>",
            "#123456",
        ),
        (
            "<g stroke='currentColor'><line x2='9' color='#123456'/></g>",
            "#123456",
        ),
        ("<g stroke='#123456'><line x2='9'/></g>", "#123456"),
        (
            "<g stroke='#123456'><line x2='9' style='stroke:inherit'/></g>",
            "#123456",
        ),
        ("<rect width='9' height='9' fill='lime'/>", "#00ff00"),
        (
            "<rect width='9' height='9' fill='lime' stroke='none'/>",
            "#00ff00",
        ),
        (
            "<rect width='9' height='9' fill='lime' stroke='red'/>",
            "#ff0000",
        ),
        (
            "<rect width='9' height='9' fill='lime' stroke='red' stroke-opacity='0'/>",
            "#00ff00",
        ),
        (
            "<rect width='9' height='9' fill='lime' stroke='transparent'/>",
            "#00ff00",
        ),
    ] {
        let art = drawing(&format!("<svg>{sheet}{inside}</svg>"));
        assert_eq!(unread(&art), [""; 0], "{inside}");
        let colours: Vec<_> = art
            .strokes
            .iter()
            .map(|one| one.colour.as_deref())
            .collect();
        assert_eq!(colours, [Some(wanted)], "{inside}");
        assert_eq!(
            art.strokes[0].area.is_some(),
            inside.contains("lime") && !inside.contains("stroke='red'/"),
            "{inside}"
        );
    }
    let art = drawing(
        "<svg><style>a:not(.b){} > p {stroke:red} @media print { p {} } p:hover{}</style></svg>",
    );
    assert_eq!(
        unread(&art),
        [
            "style: “a:not(.b)” is not followed",
            "style: “> p” is not followed",
            "style: “@media print” is not followed",
        ]
    );
}

#[test]
fn layers_are_named_groups() {
    let art = drawing(
        "<svg xmlns='http://www.w3.org/2000/svg' xmlns:i='urn:i'><g fill='none' stroke='red'>
         <line x2='1'/>
         <g id='glass'><g id='g12'><line x2='2'/></g></g>
         <g i:groupmode='layer' i:label='  Letters ' id='l1'><g id='x'><line x2='3'/>
         <g i:groupmode='layer' i:label='Inner'><line x2='4'/></g></g></g>
         <g data-name='Border 1' id='Border_1'><line x2='5'/></g></g></svg>",
    );
    let layers: Vec<_> = art
        .groups()
        .into_iter()
        .map(|group| (group.layer, group.length))
        .collect();
    let layer = |name: &str| Some(name.to_owned());
    assert_eq!(
        layers,
        [
            (None, 1.0),
            (layer("glass"), 2.0),
            (layer("Letters"), 3.0),
            (layer("Inner"), 4.0),
            (layer("Border 1"), 5.0),
        ]
    );
}

#[test]
fn what_the_file_does_not_show_goes_without_a_word() {
    let art = lines(
        "<g display='none'><path d='M0 0h9'/><text>x</text></g>
         <path style='display:none' d='M0 0h9'/>
         <g visibility='hidden'><path d='M0 0h9'/><path d='M0 0h7' visibility='visible'/><text>x</text></g>
         <defs><path d='M0 0h9'/><text>x</text></defs><symbol><path d='M0 0h9'/></symbol>
         <clipPath><path d='M0 0h9'/></clipPath>
         <script>alert(1)</script><path onclick='alert(1)' d='M0 0h2'/>
         <x:y xmlns:x='urn:x'><path d='M0 0h9'/></x:y><title>t</title><path d=''/><path/>",
    );
    assert_eq!(unread(&art), [""; 0]);
    assert_eq!(
        art.length(),
        9.0,
        "the visible one and the one that asks to be clicked"
    );
}

#[test]
fn what_cannot_be_read_is_named_with_its_reason() {
    for (inside, wanted) in [
        (
            "<text id='t'>Bar</text>",
            "text “t” at line 1: text must be turned into outlines",
        ),
        (
            "<image href='a.png'/>",
            "image at line 1: a picture holds no lines",
        ),
        (
            "<foreignObject/>",
            "foreignObject at line 1: it holds a document of another kind",
        ),
        (
            "<blink/>",
            "blink at line 1: it is no element that draws lines",
        ),
        ("<é/>", "“é” at line 1: it is no element that draws lines"),
        ("<animate/>", "animate at line 1: movement is not followed"),
        (
            "<path d='M0 0 L5 x'/>",
            "path at line 1: its path data cannot be read at character 9",
        ),
        (
            "<path d='L5 5'/>",
            "path at line 1: its path data cannot be read at character 1",
        ),
        (
            "<path d='M0 0 L1e999 0'/>",
            "path at line 1: its path data cannot be read at character 7",
        ),
        (
            "<path d='M0 0 L5'/>",
            "path at line 1: its path data break off before their end",
        ),
        (
            "<path d='M0 0 L2e9 0'/>",
            "path at line 1: it reaches farther out than 1000000000 units",
        ),
        (
            "<path d='M5 5z'/>",
            "path at line 1: it has a point that is no line",
        ),
        (
            "<path transform='scale(0)' d='M0 0h5'/>",
            "path at line 1: it has no length",
        ),
        (
            "<path style='d:path(\"M0 0h5\")'/>",
            "path at line 1: its path data stand in a style, which is not followed",
        ),
        (
            "<path style='rotate:5deg' d='M0 0h5'/>",
            "path at line 1: its style has rotate, which is not followed",
        ),
        (
            "<polyline points='0 0 5'/>",
            "polyline at line 1: its points break off before their end",
        ),
        (
            "<polyline points='0 0 5 nan'/>",
            "polyline at line 1: its points cannot be read at character 7",
        ),
        ("<rect width='5'/>", "rect at line 1: it has no size"),
        (
            "<rect width='5' height='5' rx='-1'/>",
            "rect at line 1: its rx is negative",
        ),
        (
            "<circle r='inf'/>",
            "circle at line 1: its r “inf” is not a length",
        ),
        (
            "<circle r='2em'/>",
            "circle at line 1: its r “2em” is measured by a font",
        ),
        (
            "<circle r='2 3'/>",
            "circle at line 1: its r “2 3” is not a length",
        ),
        ("<circle/>", "circle at line 1: it has no size"),
        (
            "<line x2='9' stroke='none'/>",
            "line at line 1: it has neither a line nor a filling",
        ),
        (
            "<g opacity='0'><path d='M0 0h5'/></g>",
            "g at line 1: it is fully transparent",
        ),
        ("<use/>", "use at line 1: it does not say what it uses"),
        (
            "<use href='#gone'/>",
            "use at line 1: it uses “gone”, which is not there",
        ),
        (
            "<use href='a.svg#b'/>",
            "use at line 1: it uses “a.svg#b”, which is another file",
        ),
        (
            "<g id='a'><use href='#a'/></g>",
            "use at line 1: it uses itself",
        ),
        (
            "<clipPath id='c'><path d='M0 0h5'/></clipPath><use href='#c'/>",
            "use at line 1: what it uses cannot be drawn",
        ),
        ("<svg width='0'/>", "svg at line 1: its frame has no size"),
        (
            "<svg viewBox='0 0 0 5'/>",
            "svg at line 1: its viewBox “0 0 0 5” cannot be read",
        ),
    ] {
        let art = lines(inside);
        assert_eq!(unread(&art), [wanted], "{inside}");
        assert!(art.strokes.is_empty(), "{inside}");
    }
    // What is read all the same, but not as the file has it.
    for (inside, wanted) in [
        (
            "<g clip-path='url(#c)'><path d='M0 0h5'/></g>",
            "g at line 1: it is cut by a clip-path, and is read whole",
        ),
        (
            "<path style='mask:url(#m)' d='M0 0h5'/>",
            "path at line 1: it is cut by a mask, and is read whole",
        ),
        (
            "<path filter='url(#m)' d='M0 0h5'/>",
            "path at line 1: it has a filter, and is read without",
        ),
        (
            "<path marker-end='url(#m)' d='M0 0h5'/>",
            "path at line 1: it has markers, and is read without",
        ),
        (
            "<path stroke-dasharray='1 2' d='M0 0h5'/>",
            "path at line 1: it is dashed, and is read as one line",
        ),
        (
            "<linearGradient id='l'/><path stroke='url(#l)' d='M0 0h5'/>",
            "path at line 1: its colour is a gradient; the line is read without a colour",
        ),
        (
            "<pattern id='l'/><path stroke='url(#l) red' d='M0 0h5'/>",
            "path at line 1: its colour is a pattern; the line is read without a colour",
        ),
        (
            "<path stroke='url(#l)' d='M0 0h5'/>",
            "path at line 1: its colour is “l”, which is not there",
        ),
        (
            "<path stroke='burnt' d='M0 0h5'/>",
            "path at line 1: its colour “burnt” is not known",
        ),
    ] {
        let art = lines(inside);
        assert_eq!(unread(&art), [wanted], "{inside}");
        assert_eq!(art.length(), 5.0, "{inside}");
    }
    let many = lines(&"<text/>".repeat(1_234));
    assert_eq!(many.unread.len(), 1_001);
    assert_eq!(
        unread(&many)[1_000],
        "234 more: only the first of what was not read are named"
    );
    assert_eq!(
        unread(&many)[0],
        "text at line 1, column 58: text must be turned into outlines",
        "a line alone does not lead there"
    );
}

#[test]
fn files_that_are_no_drawing_are_refused_in_a_sentence() {
    let long = "a".repeat(60);
    for (text, wanted) in [
        ("", "expected an SVG drawing, but the file is empty"),
        (" \n", "expected an SVG drawing, but the file is empty"),
        (
            "hello",
            "expected an SVG drawing, but it is not whole XML (at line 1, character 1)",
        ),
        (
            "<html/>",
            "expected an SVG drawing, but the file begins with “<html>”",
        ),
        (
            "<svg xmlns='urn:x'/>",
            "expected an SVG drawing, but the file begins with “<svg>”",
        ),
        (
            "<svg>",
            "expected an SVG drawing, but it breaks off before its end",
        ),
        (
            "<svg>\n<g></svg>",
            "expected an SVG drawing, but “<g>” ends with “</svg>” (at line 2, character 4)",
        ),
        (
            "<svg a='1' a='2'/>",
            "expected an SVG drawing, but “a” is given twice (at line 1, character 12)",
        ),
        (
            "<svg x:a='1'/>",
            "expected an SVG drawing, but “x” is not declared (at line 1, character 6)",
        ),
        (
            "<svg>&nbsp;</svg>",
            "expected an SVG drawing, but “&nbsp;” is not declared (at line 1, character 6)",
        ),
        (
            "<!DOCTYPE svg [ <!ENTITY a 'b'> ]>\n<svg>&a;</svg>",
            "The file declares entities of its own at line 1, and those are not followed; save it as plain SVG.",
        ),
        (
            &format!("<{long}/>"),
            "expected an SVG drawing, but the file begins with “<aaaaaaaaaaaaaaaaaaaaaaa…”",
        ),
    ] {
        assert_eq!(refused(text), wanted);
    }
    let plain = "\u{feff}<?xml version='1.0' encoding='UTF-8'?><!-- <g> -->\n<!DOCTYPE svg PUBLIC \"-//W3C//DTD SVG 1.1//EN\" \"http://www.w3.org/Graphics/SVG/1.1/DTD/svg11.dtd\"><svg/>";
    assert_eq!(drawing(plain), Artwork::new(Vec::new(), None, Vec::new()));
}

#[test]
fn what_is_larger_than_any_drawing_is_refused_in_a_sentence() {
    let big = format!("<svg>{}</svg>", " ".repeat(50_000_000));
    assert_eq!(
        refused(&big),
        "An SVG file must have at most 50 MB, but this one has 50.0 MB."
    );
    let deep = "<g>".repeat(100_000);
    assert_eq!(
        refused(&format!("<svg>\n{deep}")),
        "Elements must be at most 200 deep within each other, but at line 2 they are deeper; ungroup the drawing."
    );
    let nested = |depth: usize| {
        let (open, close) = ("<g>".repeat(depth), "</g>".repeat(depth));
        format!("<svg>{open}<path stroke='red' d='M0 0h5'/>{close}</svg>")
    };
    assert_eq!(
        drawing(&nested(198)).length(),
        5.0,
        "the deepest that is read"
    );
    assert!(refused(&nested(200)).starts_with("Elements must be at most 200 deep"));
    let lots = format!("<svg><path d='M0 0{}'/></svg>", "h1".repeat(200_001));
    let too_many = "A drawing must have at most 200000 lines and curves, but this one has more; \
                    leave only the lines of the tubes in it, or simplify them.";
    assert_eq!(refused(&lots), too_many);
    let enough = format!("<svg><path d='M0 0{}'/></svg>", "h1".repeat(200_000));
    near(drawing(&enough).length(), 200_000.0);
    let shapes = format!("<svg>{}</svg>", "<circle r='5'/>".repeat(4_200));
    assert_eq!(refused(&shapes), too_many, "48 curves each");
    let attributes = each(0..1_001, |at| format!(" a{at}='='"));
    assert_eq!(
        refused(&format!("<svg{attributes}/>")),
        "The element at line 1 has more than 1000 attributes or 100 namespaces, and no drawing needs as many."
    );
    let spaces = each(0..101, |at| format!("<g xmlns:a{at}='b{at}'>"));
    assert!(refused(&format!("<svg>{spaces}")).starts_with("The element at line 1 has more than"));
}

/// A text for each number, one after the other.
fn each(numbers: impl IntoIterator<Item = usize>, text: impl Fn(usize) -> String) -> String {
    let texts: Vec<String> = numbers.into_iter().map(text).collect();
    texts.concat()
}

/// Groups that each use the one before ten times, ten to the power of `depth` of what is innermost.
fn bomb(innermost: &str, depth: usize) -> String {
    let levels = each(1..=depth, |level| {
        let uses = format!("<use href='#a{}'/>", level - 1).repeat(10);
        format!("<g id='a{level}'>{uses}</g>")
    });
    format!("<svg><defs><g id='a0'>{innermost}</g>{levels}</defs><use href='#a{depth}'/></svg>")
}

#[test]
fn parts_that_use_each_other_without_end_are_refused() {
    let art = drawing(&bomb("<path stroke='red' d='M0 0h5'/>", 3));
    assert_eq!(art.length(), 5_000.0);
    let over = "The drawing has more elements, or uses its own parts or style rules more often, \
                than any drawing needs; expand the parts and keep the lines only.";
    assert_eq!(refused(&bomb("", 20)), over, "even of nothing");
    assert!(
        refused(&bomb("<circle r='5'/>", 20)).starts_with("A drawing must have at most"),
        "lines are counted"
    );
    assert_eq!(
        refused(&bomb(&format!("<path d='{}'/>", "M0 0".repeat(50_000)), 9)),
        over,
        "work on what draws nothing is counted too"
    );
    // One after the other: as deep as so many groups.
    let chain = each(0..300, |at| {
        format!("<g id='a{at}'><use href='#a{}'/></g>", at + 1)
    });
    assert!(refused(&format!("<svg>{chain}</svg>")).starts_with("Elements must be at most 200"));
    // In a ring.
    let art = drawing("<svg><g id='a'><use href='#b'/></g><g id='b'><use href='#a'/></g></svg>");
    assert_eq!(art.unread.len(), 2, "{:?}", art.unread);
    // Rules against elements, and rules that look back at every step.
    let rules = each(0..5_000, |at| format!(".a{at}{{fill:red}}"));
    let elements = "<g/>".repeat(50_000);
    assert_eq!(
        refused(&format!("<svg><style>{rules}</style>{elements}</svg>")),
        over
    );
    let (open, close) = ("<g>".repeat(150), "</g>".repeat(150));
    let rule = "g ".repeat(40) + "x";
    let all = format!("<svg><style>y {rule} {{fill:red}}</style>{open}<x/>{close}</svg>");
    assert_eq!(refused(&all), over);
}

/// Path data of moves, lines, curves and arcs, within ±1000.
fn path_data() -> impl Strategy<Value = String> {
    let number = || (-1_000.0..1_000.0_f64).prop_map(|number| format!("{number:.3}"));
    let numbers = move |count| proptest::collection::vec(number(), count);
    let radius = || (1.0..300.0_f64).prop_map(|number| format!("{number:.3}"));
    let piece = prop_oneof![
        numbers(2).prop_map(|all| format!("L{}", all.join(" "))),
        numbers(2).prop_map(|all| format!("t{}", all.join(","))),
        numbers(4).prop_map(|all| format!("q{}", all.join(" "))),
        numbers(4).prop_map(|all| format!("S{}", all.join(" "))),
        numbers(6).prop_map(|all| format!("C{}", all.join(" "))),
        (radius(), radius(), numbers(3), any::<bool>(), any::<bool>()).prop_map(
            |(rx, ry, all, large, sweep)| format!(
                "A{rx} {ry} {} {} {} {} {}",
                all[0],
                u8::from(large),
                u8::from(sweep),
                all[1],
                all[2]
            )
        ),
        Just("z".to_owned()),
    ];
    proptest::collection::vec(piece, 1..8).prop_map(|all| format!("M1 2{}", all.concat()))
}

/// A drawing that has some of everything, to be broken.
const SAMPLE: &str = "<?xml version='1.0'?><!DOCTYPE svg><svg xmlns='http://www.w3.org/2000/svg' \
    xmlns:l='http://www.w3.org/1999/xlink' width='20cm' viewBox='0 0 200 100'><style>.a,#b>c{stroke:red!important}\
    @media x{}</style><!-- c --><defs><symbol id='s' viewBox='0 0 1 1'><path d='M0 0.5e1-3A1 2 3 0 1 4 5z'/></symbol>\
    </defs><g transform='rotate(30 1,2) scale(.5)' stroke='rgb(1,2,3)' class='a'><rect rx='1' width='50%' height='2mm'/>\
    <polygon points='1 2,3 4 5-6'/><use l:href='#s' x='3' width='9' height='8'/><ellipse rx='4' ry='5'/></g>\
    <![CDATA[x]]><text>é&amp;</text></svg>";

proptest! {
    #[test]
    fn lengths_do_not_change_by_turning_or_mirroring_and_scale_with_the_scale(
        d in path_data(),
        turn in -360.0..360.0_f64,
        x in -500.0..500.0_f64,
        scale in 0.01..100.0_f64,
    ) {
        let plain = lines(&format!("<path d='{d}'/>")).length();
        for (transform, factor) in [
            (format!("rotate({turn})"), 1.0),
            (format!("rotate({turn} {x} 7) translate({x})"), 1.0),
            ("scale(-1 1)".to_owned(), 1.0),
            ("matrix(0 1 1 0 3 4)".to_owned(), 1.0),
            (format!("scale({scale})"), scale),
            (format!("translate(3,{x}) scale({scale}) rotate({turn}) scale(1,-1)"), scale),
        ] {
            let art = lines(&format!("<g transform='{transform}'><path d='{d}'/></g>"));
            let (found, wanted) = (art.length(), plain * factor);
            prop_assert!((found - wanted).abs() <= 1e-9 * wanted, "{transform} {d}: {found} {wanted}");
        }
    }

    #[test]
    fn arcs_are_as_long_as_fine_steps_along_their_ellipse(
        a in 1.0..100.0_f64,
        part in 0.05..1.0_f64,
        from in -3.0..3.0_f64,
        by in 0.2..6.2_f64,
        tilt in -180.0..180.0_f64,
        sweep: bool,
    ) {
        let b = a * part;
        let by = if sweep { by } else { -by };
        // Straight from the parameter of the ellipse: Simpson over its speed.
        let speed = |t: f64| (a * t.sin()).hypot(b * t.cos());
        let steps = 4_000;
        let step = by.abs() / f64::from(steps);
        let sum: f64 = (0..=steps)
            .map(|at| {
                let weight = match at {
                    0 => 1.0,
                    _ if at == steps => 1.0,
                    _ if at % 2 == 1 => 4.0,
                    _ => 2.0,
                };
                weight * speed(from + by.signum() * step * f64::from(at))
            })
            .sum();
        let wanted = sum * step / 3.0;
        let (sin, cos) = tilt.to_radians().sin_cos();
        let on = |t: f64| {
            let (x, y) = (a * t.cos(), b * t.sin());
            format!("{} {}", x * cos - y * sin, x * sin + y * cos)
        };
        let large = u8::from(by.abs() > std::f64::consts::PI);
        let d = format!("M{} A{a} {b} {tilt} {large} {} {}", on(from), u8::from(sweep), on(from + by));
        let found = lines(&format!("<path d='{d}'/>")).length();
        // A file gives an arc by its two ends. How far apart the ends of a short arc at the flat side of
        // a thin ellipse lie hardly says where its centre is, so that the last digit they are written
        // with moves its length: the size of the ellipse is the measure, not the arc's.
        let off = (found - wanted).abs();
        prop_assert!(off < 1e-9 * wanted.max(a), "{d}: {found}, not {wanted}");
    }

    #[test]
    fn no_bytes_stop_the_reader(bytes in proptest::collection::vec(any::<u8>(), 0..400)) {
        let text = String::from_utf8_lossy(&bytes);
        let why = svg::read(&text).expect_err("noise is no drawing");
        prop_assert!(why.len() < 300, "{why}");
    }

    #[test]
    fn no_damage_to_a_drawing_stops_the_reader(
        cuts in proptest::collection::vec((any::<prop::sample::Index>(), any::<prop::sample::Index>(), 0..12_usize, "\\PC{0,6}"), 1..6),
    ) {
        let mut chars: Vec<char> = SAMPLE.chars().collect();
        for (at, from, count, put) in cuts {
            // Some of the drawing is replaced by another part of it and by anything.
            let at = at.index(chars.len());
            let from = from.index(chars.len());
            let copied: Vec<char> = chars.iter().skip(from).take(count).copied().collect();
            let end = (at + count).min(chars.len());
            chars.splice(at..end, copied.into_iter().chain(put.chars()));
        }
        let text: String = chars.into_iter().collect();
        check(&text)?;
    }

    #[test]
    fn no_style_stops_the_reader(
        css in "[a-c.#*>+:,{};()\"'@/\\[\\]=~|! \\-é\\\\]{0,60}",
        path in "[MmLlAaCcQqTtSsZzHhVv0-9.,eE+\\- é]{0,40}",
        number in "[0-9.eE+\\-%a-z(),é ]{0,12}",
    ) {
        let css = css.replace([']', '<'], "");
        check(&format!(
            "<svg width=\"{number}\" viewBox=\"{number} 5\"><style><![CDATA[{css}]]></style>\
             <g class='a b' transform=\"{number}\"><path id='c' style=\"{}\" d='{path}'/>\
             <rect width='{number}' rx='{number}' height='9' fill='{number}'/></g>\
             <polyline points='{number}' style='transform:rotate({number});transform-origin:{number}'/></svg>",
            css.replace(['"', '&'], ""),
        ))?;
    }
}

/// Whatever is read is finite, and whatever is refused is a short sentence.
fn check(text: &str) -> Result<(), TestCaseError> {
    match svg::read(text) {
        Ok(art) => {
            prop_assert!(art.length().is_finite());
            prop_assert!(art.bounds.is_finite());
            prop_assert!(
                art.mm_per_unit
                    .is_none_or(|size| size.is_finite() && size > 0.0)
            );
            for unread in &art.unread {
                prop_assert!(unread.element.len() + unread.why.len() < 300, "{unread:?}");
            }
        }
        Err(why) => prop_assert!(why.len() < 300, "{why}"),
    }
    Ok(())
}
