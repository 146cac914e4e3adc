//! A small mutator: damages files as discs, editors and ill will do. Everything follows from a
//! number, so that a case can be made again.

#![allow(
    unreachable_pub,
    reason = "also a private module of the tests of the core"
)]

/// No case grows beyond this, in bytes.
const LARGEST: usize = 60_000;

/// Random numbers that are the same each time (`SplitMix64`).
struct Random(u64);

impl Random {
    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    /// Less than `below`; 0 where that is 0.
    fn below(&mut self, below: usize) -> usize {
        let below = below.max(1) as u64;
        usize::try_from(self.next() % below).unwrap_or(0)
    }
}

/// Figures that readers stumble over, as text.
const FIGURES: [&str; 24] = [
    "0",
    "-0",
    "1",
    "-1",
    "0.5",
    "1e9",
    "-1e9",
    "1e308",
    "1e309",
    "-1e999",
    "1e-308",
    "1e-320",
    "NaN",
    "inf",
    "2147483647",
    "-2147483648",
    "4294967296",
    "9223372036854775807",
    "9223372036854775808",
    "65535",
    "1e20",
    ".",
    "-",
    "1.7976931348623157e308",
];

/// Words of each kind of file.
fn words(kind: &str) -> &'static [&'static str] {
    match kind {
        "svg" => &[
            "<g>",
            "</g>",
            "<g id='a'>",
            "<use href='#a'/>",
            "<use href='#b' x='1e9'/>",
            "<svg viewBox='0 0 1 1'>",
            "</svg>",
            "<symbol id='b'>",
            "</symbol>",
            "<path d='M0 0h5z'/>",
            "<style>",
            "</style>",
            "*{stroke:red}",
            ".a>.b+.c~.d{fill:none!important}",
            "<!--",
            "-->",
            "<![CDATA[",
            "]]>",
            "<?x",
            "?>",
            "<!DOCTYPE svg [",
            "]>",
            "&amp;",
            "&#0;",
            "&a;",
            " transform='matrix(1 2 3 4 5 6)'",
            "rotate(1e9)",
            "scale(0)",
            "scale(1e-300)",
            "skewX(90)",
            " d='M",
            "A1 1 0 1 0 ",
            "c",
            "z",
            "m",
            "t",
            "S",
            "Q",
            " style='",
            ";stroke:",
            "url(#a)",
            "currentColor",
            "hsl(9e9,1%,1%)",
            "#fff",
            "50%",
            "1e9in",
            "em",
            " viewBox='",
            " preserveAspectRatio='none'",
            " display='none'",
            "xmlns='urn:x'",
            "'",
            "\"",
            ">",
            "/>",
            "<polyline points='",
            "<circle r='",
            "<rect rx='",
            "é",
            "\u{feff}",
            "\u{0}",
            "rgba(0,0,0,0)",
            "/*",
            "*/",
            "{",
            "}",
            "@media",
        ],
        "dxf" => &[
            "  0\n",
            "SECTION\n",
            "ENDSEC\n",
            "EOF\n",
            "HEADER\n",
            "$INSUNITS\n",
            " 70\n",
            "TABLES\n",
            "BLOCKS\n",
            "ENTITIES\n",
            "LINE\n",
            "ARC\n",
            "CIRCLE\n",
            "ELLIPSE\n",
            "LWPOLYLINE\n",
            "POLYLINE\n",
            "VERTEX\n",
            "SEQEND\n",
            "SPLINE\n",
            "INSERT\n",
            "BLOCK\n",
            "ENDBLK\n",
            "LAYER\n",
            "TEXT\n",
            " 10\n",
            " 20\n",
            " 30\n",
            " 11\n",
            " 21\n",
            " 40\n",
            " 41\n",
            " 42\n",
            " 50\n",
            " 51\n",
            " 71\n",
            " 72\n",
            " 73\n",
            " 44\n",
            " 45\n",
            " 62\n",
            "420\n",
            "  8\n",
            "  2\n",
            "210\n",
            "230\n",
            "-1.0\n",
            "  0\nINSERT\n  2\nA\n 10\n0\n 20\n0\n",
            "  0\nLINE\n 10\n0\n 20\n0\n 11\n5\n 21\n0\n",
            "999\n",
            "\r",
            "\n",
            "\u{0}",
            "é",
        ],
        "length" => &[
            "mm",
            "cm",
            "m",
            "in",
            "ft",
            "\"",
            "'",
            "''",
            "″",
            "′",
            "/",
            "1/0",
            "5/8",
            " ",
            "x",
            "×",
            "*",
            "+",
            "-",
            ";",
            ",",
            ".",
            "(",
            ")",
            "3 x ",
            "1' 6 1/2\"",
            "½",
            "¾",
            "0.1",
            "٣",
            "\u{a0}",
            "\u{202f}",
            "kV",
            "mA",
            "%",
            "VA",
            "e9",
            "\n",
            "\u{0}",
            "'1",
        ],
        _ => &[
            "\u{0}\u{0}",
            "\u{7f}\u{7f}",
            "glyf",
            "loca",
            "CFF ",
            "CFF2",
            "cmap",
            "head",
            "hmtx",
            "kern",
            "GPOS",
            "OTTO",
            "ttcf",
            "\u{0}\u{1}\u{0}\u{0}",
            "fvar",
        ],
    }
}

/// Where the seeds of a kind lie, from the root of the repository.
pub fn folders(kind: &str) -> Vec<String> {
    let own = format!("tests/corpus/{kind}");
    let more: &[&str] = match kind {
        "svg" => &["tests/reference/drawn"],
        "dxf" => &["tests/reference/drawn", "tests/reference/dxf"],
        "font" => &["tests/reference/outlines"],
        _ => &[],
    };
    let more = more.iter().map(|folder| (*folder).to_owned());
    std::iter::once(own).chain(more).collect()
}

/// Whether a file of those folders is of the kind, by its name.
pub fn is_seed(kind: &str, name: &str) -> bool {
    let endings: &[&str] = match kind {
        "svg" => &["svg"],
        "dxf" => &["dxf"],
        "font" => &["ttf", "otf"],
        _ => &["txt"],
    };
    let ending = name.rsplit_once('.').map_or("", |(_, ending)| ending);
    endings.contains(&ending)
}

/// The seeds in a file: itself, or one on each line where a kind has no files of its own.
pub fn seeds_in(kind: &str, bytes: Vec<u8>) -> Vec<Vec<u8>> {
    match kind {
        "length" => bytes
            .split(|&byte| byte == b'\n')
            .map(<[u8]>::to_vec)
            .collect(),
        _ => vec![bytes],
    }
}

/// Case `number` of a kind of file: one of the seeds with some damage. The same each time.
pub fn case(kind: &str, seeds: &[Vec<u8>], number: u64) -> Vec<u8> {
    let mut random = Random(number.wrapping_mul(0xD134_2543_DE82_EF95) ^ kind.len() as u64);
    let mut bytes = pick(&mut random, seeds);
    // Mostly little damage, which gets far into a reader; seldom a lot.
    let edits = 1 + random.below(3) * random.below(5);
    for _ in 0..edits {
        edit(&mut random, kind, seeds, &mut bytes);
        bytes.truncate(LARGEST);
    }
    bytes
}

fn pick(random: &mut Random, seeds: &[Vec<u8>]) -> Vec<u8> {
    seeds
        .get(random.below(seeds.len()))
        .cloned()
        .unwrap_or_default()
}

/// A stretch of some bytes, mostly short.
fn stretch(random: &mut Random, len: usize) -> std::ops::Range<usize> {
    let from = random.below(len + 1);
    let most = [4, 16, 64, 1_000, len][random.below(5)];
    from..(from + random.below(most + 1)).min(len)
}

fn edit(random: &mut Random, kind: &str, seeds: &[Vec<u8>], bytes: &mut Vec<u8>) {
    let at = random.below(bytes.len() + 1);
    match random.below(11) {
        0 => {
            if let Some(byte) = bytes.get_mut(at) {
                *byte ^= 1 << random.below(8);
            }
        }
        1 => {
            let put = [0, 0xFF, 0x7F, 0x80, b'\n', b' '][random.below(6)];
            if let Some(byte) = bytes.get_mut(at) {
                *byte = put;
            }
        }
        2 => {
            let gone = stretch(random, bytes.len());
            bytes.drain(gone);
        }
        3 => {
            // Said again, some times over.
            let from = stretch(random, bytes.len());
            let times = 1 + random.below(4) * random.below(40);
            let copied = bytes[from].to_vec();
            if copied.len() * times < LARGEST {
                bytes.splice(at..at, copied.repeat(times));
            }
        }
        4 | 5 => {
            let all = words(kind);
            let word = all[random.below(all.len())];
            bytes.splice(at..at, word.bytes());
        }
        6 => {
            // A part of another file.
            let other = pick(random, seeds);
            let from = stretch(random, other.len());
            let to = stretch(random, bytes.len());
            bytes.splice(to, other[from].iter().copied());
        }
        7 | 8 => figure(random, at, bytes),
        9 => {
            // Two stretches change places.
            let (one, other) = (stretch(random, bytes.len()), stretch(random, bytes.len()));
            if one.end <= other.start {
                let mut new = bytes[..one.start].to_vec();
                new.extend_from_slice(&bytes[other.clone()]);
                new.extend_from_slice(&bytes[one.end..other.start]);
                new.extend_from_slice(&bytes[one]);
                new.extend_from_slice(&bytes[other.end..]);
                *bytes = new;
            }
        }
        _ => {
            // Cut short, but not always by much.
            if random.below(3) == 0 {
                bytes.truncate(at);
            } else {
                bytes.truncate(bytes.len() - random.below(bytes.len().min(200)));
            }
        }
    }
}

/// The next figure behind a place becomes another; in fonts, two or four bytes do.
fn figure(random: &mut Random, at: usize, bytes: &mut Vec<u8>) {
    let digit = |byte: &u8| byte.is_ascii_digit() || matches!(byte, b'.' | b'-');
    let Some(from) = bytes[at..].iter().position(digit).map(|found| at + found) else {
        return;
    };
    let count = bytes[from..].iter().take_while(|byte| digit(byte)).count();
    let new = match random.below(3) {
        0 => random.below(100_000).to_string(),
        _ => FIGURES[random.below(FIGURES.len())].to_owned(),
    };
    bytes.splice(from..from + count, new.bytes());
}
