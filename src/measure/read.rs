//! Reading what a person typed: `450`, `450 mm`, `1.2 m`, `1' 6 1/2"`, `17 5/8 in`,
//! `3 x 180 + 2 x 95`.
//!
//! ```text
//! sum      = product { "+" product }
//! product  = factor { "x" factor }            at most one factor carries a unit
//! factor   = number [ unit ]
//!          | number feet [ "-" ] number [ inches ]
//! number   = digits [ "." digits ] | [ digits ( " " | "-" ) ] digits "/" digits
//! ```
//!
//! A product without any unit takes the unit the field is set to, on its last factor.
//!
//! Figures of a nameplate are one factor, sums of money a number without fractions; all numbers are
//! read by the one rule in [`Reader::plain`].

use core::fmt;
use core::ops::Range;

use num_rational::Ratio;
use num_traits::{CheckedAdd, CheckedMul, One, Zero};
use rust_decimal::Decimal;

use super::Length;

type Exact = Ratio<i128>;

/// More digits than any real length has; keeps the exact arithmetic far from overflow.
const MOST_DIGITS: usize = 12;
/// As many places after the point as a floating figure above a millionth is written out with, so that
/// every figure a list was written with is read again.
const MOST_DECIMALS: usize = 24;
/// More characters than any field needs. Spaces and letters are not counted: units written out by
/// [`with_units`] must not make a text too long to be read again.
const MOST_CHARACTERS: usize = 200;

/// A length exactly as typed, in millimetres as a fraction.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct ExactLength(Exact);

impl ExactLength {
    /// The fraction in millimetres, numerator and denominator.
    pub fn mm_fraction(self) -> (i128, i128) {
        (*self.0.numer(), *self.0.denom())
    }

    /// The nearest floating figure.
    pub fn length(self) -> Length {
        Length::from_mm(nearest(self.0))
    }
}

/// The unit a bare number takes.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum LengthUnit {
    /// Millimetres.
    #[default]
    Millimetres,
    /// Inches.
    Inches,
}

impl LengthUnit {
    const fn word(self) -> &'static str {
        match self {
            Self::Millimetres => "mm",
            Self::Inches => "in",
        }
    }
}

/// Why a text could not be read: what was expected, what stands there, and where.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct ReadError {
    text: String,
    at: usize,
    expected: String,
    hint: Option<String>,
}

impl ReadError {
    pub(super) fn new(text: &str, at: usize, expected: impl Into<String>) -> Self {
        Self {
            text: text.to_owned(),
            at,
            expected: expected.into(),
            hint: None,
        }
    }

    pub(super) fn hint(mut self, hint: impl Into<String>) -> Self {
        self.hint = Some(hint.into());
        self
    }

    /// Place of the trouble, in characters from the start of the text, starting at 0.
    pub fn at(&self) -> usize {
        self.at
    }
}

impl fmt::Display for ReadError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let rest: String = self.text.chars().skip(self.at).collect();
        write!(f, "expected {}", self.expected)?;
        if rest.is_empty() {
            write!(f, ", but the text ends")?;
        } else {
            write!(f, ", but found {}", quoted(&rest))?;
        }
        write!(f, " at character {} of {}", self.at + 1, quoted(&self.text))?;
        if let Some(hint) = &self.hint {
            write!(f, "; {hint}")?;
        }
        Ok(())
    }
}

impl core::error::Error for ReadError {}

/// Text from outside, safe to show in a sentence: quoted, control characters escaped, cut at 24.
pub fn quoted(text: &str) -> String {
    const MOST: usize = 24;
    let mut out = String::from("“");
    for (i, c) in text.chars().enumerate() {
        if i == MOST {
            out.push('…');
            break;
        }
        if c.is_control() {
            out.extend(c.escape_default());
        } else {
            out.push(c);
        }
    }
    out.push('”');
    out
}

/// Reads a length; a bare number takes `bare`.
///
/// # Errors
/// A [`ReadError`] with the place in the text. The figure may be zero: limits are the caller's.
pub fn length(text: &str, bare: LengthUnit) -> Result<ExactLength, ReadError> {
    let (total, _) = Reader::new(text)?.sum(&LENGTH_WORDS, bare.word())?;
    Ok(ExactLength(total))
}

/// The count and the length of a text that is a whole number of times one length and nothing more, as
/// `4 x 1200 mm` is; `1200 mm` and `2 x 180 + 95` are not.
pub fn repeated(text: &str, bare: LengthUnit) -> Option<(i128, ExactLength)> {
    let mut reader = Reader::new(text).ok()?;
    let first = reader.factor(&LENGTH_WORDS).ok()?;
    reader.skip_spaces();
    if !reader.takes_times() {
        return None;
    }
    let second = reader.factor(&LENGTH_WORDS).ok()?;
    reader.end("the end", &LENGTH_WORDS).ok()?;
    let (count, each) = if first.unit {
        (second, first)
    } else {
        (first, second)
    };
    let size = if each.unit {
        Exact::from_integer(1)
    } else {
        LENGTH_WORDS.size(bare.word())
    };
    let whole = !count.unit && count.value.is_integer() && *count.value.numer() > 1;
    let length = each.value.checked_mul(&size).filter(|_| whole)?;
    Some((*count.value.numer(), ExactLength(length)))
}

/// The text with `bare` written out wherever a number had no unit, so that it reads the same
/// wherever it is opened: `3 x 180` in millimetres becomes `3 x 180 mm`. A text that cannot be read
/// comes back as it was.
pub fn with_units(text: &str, bare: LengthUnit) -> String {
    let mut out = String::new();
    for (i, part) in text.split(';').enumerate() {
        if i > 0 {
            out.push(';');
        }
        let bare_ends = Reader::new(part).and_then(|reader| reader.sum(&LENGTH_WORDS, bare.word()));
        let mut ends = bare_ends
            .map(|(_, ends)| ends)
            .unwrap_or_default()
            .into_iter()
            .peekable();
        let count = part.chars().count();
        for (at, c) in part.chars().enumerate() {
            if ends.next_if_eq(&at).is_some() {
                out.push(' ');
                out.push_str(bare.word());
            }
            out.push(c);
        }
        if ends.next_if_eq(&count).is_some() {
            out.push(' ');
            out.push_str(bare.word());
        }
    }
    out
}

/// Reads a figure in `unit`: a decimal point or comma, and behind it nothing or a unit of the same
/// kind. `V` takes V and kV, `mA` takes mA and A, `mm` any unit of length, `Hz` also kHz, `VA` also
/// kVA, `s` also ms, `%` and `V/m` only themselves; any other text, such as an empty one, takes bare
/// figures only.
///
/// # Errors
/// A [`ReadError`] with the place in the text. The figure may be zero: limits are the caller's.
pub fn figure(text: &str, unit: &str) -> Result<f64, ReadError> {
    let words = Words::of(unit);
    let mut reader = Reader::new(text)?;
    let factor = reader.factor(words)?;
    reader.end("the end", words)?;
    // A floating figure written out comes back to the last bit only by way of the float reader.
    Ok(Some(&factor)
        .filter(|factor| !factor.unit)
        .and_then(|factor| reader.written(factor.start..factor.end).parse().ok())
        .unwrap_or_else(|| nearest(factor.value)))
}

/// Reads a sum of money, from 0 on, with a decimal point or comma and as many decimals as typed.
pub fn money(text: &str) -> Result<Decimal, ReadError> {
    let mut reader = Reader::new(text)?;
    reader.skip_spaces();
    reader.not_negative()?;
    let start = reader.at;
    if !reader.peek().is_some_and(|c| c.is_ascii_digit()) {
        return Err(ReadError::new(text, start, "an amount such as 12.50"));
    }
    reader.plain()?;
    let written = reader.written(start..reader.at);
    reader.end("the end", &NO_WORDS)?;
    Decimal::from_str_exact(&written)
        .map_err(|_| ReadError::new(text, start, "a figure with fewer digits"))
}

/// The float beside a fraction: at most one rounding of each part and one of the quotient.
#[allow(
    clippy::cast_precision_loss,
    reason = "the one place where exact becomes floating"
)]
fn nearest(value: Exact) -> f64 {
    *value.numer() as f64 / *value.denom() as f64
}

/// The unit words of a quantity, each with its size as a fraction of the base unit.
struct Words {
    /// Longest words first, so that `mm` is not read as `m`.
    sizes: &'static [(&'static str, i128, i128)],
    examples: &'static str,
}

// 1 in = 25.4 mm and 1 ft = 304.8 mm exactly (international yard and pound agreement, 1959;
// NIST SP 811, appendix B.8).
const LENGTH_WORDS: Words = Words {
    sizes: &[
        ("inches", 127, 5),
        ("inch", 127, 5),
        ("feet", 1524, 5),
        ("foot", 1524, 5),
        ("mm", 1, 1),
        ("cm", 10, 1),
        ("in", 127, 5),
        ("ft", 1524, 5),
        ("''", 127, 5),
        ("m", 1000, 1),
        ("\"", 127, 5),
        ("″", 127, 5),
        ("”", 127, 5),
        ("'", 1524, 5),
        ("′", 1524, 5),
        ("’", 1524, 5),
    ],
    examples: "mm, cm, m, in or ft",
};
const FOOT: (i128, i128) = (1524, 5);
const INCH: (i128, i128) = (127, 5);
const NO_WORDS: Words = Words {
    sizes: &[],
    examples: "",
};
/// The units of figures that are no lengths, by the unit a bare figure takes.
const FIGURE_WORDS: [(&str, Words); 7] = [
    (
        "V",
        Words {
            sizes: &[("kv", 1000, 1), ("v", 1, 1)],
            examples: "V or kV",
        },
    ),
    (
        "mA",
        Words {
            sizes: &[("ma", 1, 1), ("a", 1000, 1)],
            examples: "mA or A",
        },
    ),
    (
        "VA",
        Words {
            sizes: &[("kva", 1000, 1), ("va", 1, 1)],
            examples: "VA or kVA",
        },
    ),
    (
        "Hz",
        Words {
            sizes: &[("khz", 1000, 1), ("hz", 1, 1)],
            examples: "Hz or kHz",
        },
    ),
    (
        "s",
        Words {
            sizes: &[("ms", 1, 1000), ("s", 1, 1)],
            examples: "s or ms",
        },
    ),
    (
        "%",
        Words {
            sizes: &[("%", 1, 1)],
            examples: "%",
        },
    ),
    (
        "V/m",
        Words {
            sizes: &[("v/m", 1, 1)],
            examples: "V/m",
        },
    ),
];

impl Words {
    fn of(unit: &str) -> &'static Self {
        match FIGURE_WORDS.iter().find(|(bare, _)| *bare == unit) {
            Some((_, words)) => words,
            None if unit == LengthUnit::Millimetres.word() => &LENGTH_WORDS,
            None => &NO_WORDS,
        }
    }

    /// The size of a unit by its word.
    fn size(&self, unit: &str) -> Exact {
        let mut sizes = self.sizes.iter();
        sizes
            .find(|(word, ..)| word.eq_ignore_ascii_case(unit))
            .map_or_else(One::one, |&(_, numer, denom)| Exact::new(numer, denom))
    }
}

/// A factor: its figure, already multiplied by its unit if it had one.
struct Factor {
    value: Exact,
    unit: bool,
    start: usize,
    end: usize,
}

struct Reader<'t> {
    text: &'t str,
    chars: Vec<char>,
    at: usize,
}

impl<'t> Reader<'t> {
    fn new(text: &'t str) -> Result<Self, ReadError> {
        let chars: Vec<char> = text.chars().collect();
        let counted = |(_, c): &(usize, &char)| !c.is_alphabetic() && !c.is_whitespace();
        if let Some((at, _)) = chars
            .iter()
            .enumerate()
            .filter(counted)
            .nth(MOST_CHARACTERS)
        {
            let expected = format!("at most {MOST_CHARACTERS} characters besides spaces and units");
            return Err(ReadError::new(text, at, expected));
        }
        Ok(Self { text, chars, at: 0 })
    }

    /// The total, and the places (in characters) after each number that took the bare unit.
    fn sum(mut self, words: &Words, bare: &str) -> Result<(Exact, Vec<usize>), ReadError> {
        let mut bare_ends = Vec::new();
        let mut total = Exact::zero();
        loop {
            let start = self.at;
            let product = self.product(words, bare, &mut bare_ends)?;
            total = total
                .checked_add(&product)
                .ok_or_else(|| ReadError::new(self.text, start, "a smaller figure"))?;
            self.skip_spaces();
            if !self.take('+') {
                break;
            }
        }
        self.end("“+”, “x” or the end", words)?;
        Ok((total, bare_ends))
    }

    /// Nothing may follow.
    fn end(&mut self, expected: &str, words: &Words) -> Result<(), ReadError> {
        self.skip_spaces();
        let Some(next) = self.peek() else {
            return Ok(());
        };
        let error = ReadError::new(self.text, self.at, expected);
        Err(
            if next.is_ascii_digit() && core::ptr::eq(words, &LENGTH_WORDS) {
                error.hint("write feet and inches as 1' 6 1/2\", thousands without a space")
            } else if next.is_ascii_digit() {
                error.hint("thousands are written without a space")
            } else if next.is_alphabetic() && words.examples.is_empty() {
                error.hint("this figure takes no unit")
            } else if next.is_alphabetic() {
                error.hint(format!("units are {}", words.examples))
            } else {
                error
            },
        )
    }

    fn product(
        &mut self,
        words: &Words,
        bare: &str,
        bare_ends: &mut Vec<usize>,
    ) -> Result<Exact, ReadError> {
        let mut factors = vec![self.factor(words)?];
        loop {
            self.skip_spaces();
            if self.takes_times() {
                factors.push(self.factor(words)?);
            } else {
                break;
            }
        }
        let mut with_unit = factors.iter().filter(|factor| factor.unit);
        if let (Some(_), Some(second)) = (with_unit.next(), with_unit.next()) {
            return Err(ReadError::new(self.text, second.start, "a plain number")
                .hint("only one figure of a product carries a unit, as in 3 x 180 mm"));
        }
        let mut size = Exact::from_integer(1);
        if factors.iter().all(|factor| !factor.unit) {
            size = words.size(bare);
            bare_ends.extend(factors.last().map(|factor| factor.end));
        }
        let start = factors.first().map_or(0, |factor| factor.start);
        factors
            .iter()
            .try_fold(size, |product, factor| product.checked_mul(&factor.value))
            .filter(|product| product.numer().abs() < 1_i128 << 90)
            .ok_or_else(|| ReadError::new(self.text, start, "a smaller figure"))
    }

    fn factor(&mut self, words: &Words) -> Result<Factor, ReadError> {
        self.skip_spaces();
        let start = self.at;
        self.not_negative()?;
        let number = self.number()?;
        let end = self.at;
        let Some((numer, denom)) = self.unit(words) else {
            return Ok(Factor {
                value: number,
                unit: false,
                start,
                end,
            });
        };
        let mut value = self.times(number, numer, denom, start)?;
        if (numer, denom) == FOOT {
            // Inches may follow feet, with or without a hyphen, with or without their mark.
            let before = self.at;
            self.skip_spaces();
            if self.take('-') {
                self.skip_spaces();
            }
            if self
                .peek()
                .is_some_and(|c| c.is_ascii_digit() || vulgar(c).is_some())
            {
                let inches_start = self.at;
                let inches = self.number()?;
                let unit_start = self.at;
                match self.unit(words) {
                    None | Some(INCH) => {}
                    Some(_) => {
                        return Err(ReadError::new(self.text, unit_start, "inches after feet"));
                    }
                }
                let inches = self.times(inches, INCH.0, INCH.1, inches_start)?;
                value = value
                    .checked_add(&inches)
                    .ok_or_else(|| ReadError::new(self.text, start, "a smaller figure"))?;
            } else {
                self.at = before;
            }
        }
        Ok(Factor {
            value,
            unit: true,
            start,
            end: self.at,
        })
    }

    fn times(&self, value: Exact, numer: i128, denom: i128, at: usize) -> Result<Exact, ReadError> {
        value
            .checked_mul(&Exact::new(numer, denom))
            .ok_or_else(|| ReadError::new(self.text, at, "a smaller figure"))
    }

    fn number(&mut self) -> Result<Exact, ReadError> {
        let start = self.at;
        if let Some(fraction) = self.peek().and_then(vulgar) {
            self.at += 1;
            return Ok(fraction);
        }
        let (whole, decimals) = self.plain()?;
        if let Some(value) = decimals {
            return Ok(value);
        }
        if self.peek() == Some('/') {
            return self.fraction(whole, start);
        }
        if let Some(fraction) = self.peek().and_then(vulgar) {
            self.at += 1;
            return Ok(Exact::from_integer(whole) + fraction);
        }
        // `6 1/2` and `6-1/2`: a fraction after the whole number, or nothing of this number.
        let before = self.at;
        if !self.take('-') {
            self.skip_spaces();
        }
        if self.at > before {
            if let Some(fraction) = self.peek().and_then(vulgar) {
                self.at += 1;
                return Ok(Exact::from_integer(whole) + fraction);
            }
            let fraction_start = self.at;
            if self.peek().is_some_and(|c| c.is_ascii_digit())
                && let Ok((over, _)) = self.digits(MOST_DIGITS)
                && self.peek() == Some('/')
            {
                let fraction = self.fraction(over, fraction_start)?;
                return Ok(Exact::from_integer(whole) + fraction);
            }
        }
        self.at = before;
        Ok(Exact::from_integer(whole))
    }

    fn not_negative(&self) -> Result<(), ReadError> {
        if matches!(self.peek(), Some('-' | '−')) {
            return Err(ReadError::new(self.text, self.at, "a figure from 0 on")
                .hint("nothing here is ever negative"));
        }
        Ok(())
    }

    /// A number without a fraction: its whole part, and the whole figure where it has decimals.
    ///
    /// A comma may stand for the decimal point or between thousands; where both are possible, with
    /// one to three digits before it and three after, the figure is not guessed at. A point is always
    /// the decimal point.
    fn plain(&mut self) -> Result<(i128, Option<Exact>), ReadError> {
        let start = self.at;
        let (whole, before) = self.digits(MOST_DIGITS)?;
        let point_at = self.at;
        let comma = self.peek() == Some(',');
        if !comma && self.peek() != Some('.') {
            return Ok((whole, None));
        }
        self.at += 1;
        let (decimals, count) = self.digits(MOST_DECIMALS)?;
        if comma && count == 3 && before <= 3 && self.chars[start] != '0' {
            let typed: String = self.chars[start..self.at].iter().collect();
            return Err(
                ReadError::new(self.text, point_at, "a point or no comma").hint(format!(
                    "{typed} could be {} or {}",
                    typed.replace(',', "."),
                    typed.replace(',', "")
                )),
            );
        }
        if matches!(self.peek(), Some('.' | ',')) {
            return Err(ReadError::new(self.text, self.at, "one decimal point only"));
        }
        let scale = (0..count).fold(1_i128, |scale, _| scale * 10);
        Ok((whole, Some(Exact::new(whole * scale + decimals, scale))))
    }

    /// What stands there, as programs write numbers.
    fn written(&self, range: Range<usize>) -> String {
        let typed = self.chars[range].iter();
        typed
            .filter(|c| !is_group_space(**c))
            .map(|&c| if c == ',' { '.' } else { c })
            .collect()
    }

    fn fraction(&mut self, over: i128, start: usize) -> Result<Exact, ReadError> {
        self.at += 1;
        let under_at = self.at;
        let (under, _) = self.digits(MOST_DIGITS)?;
        if under == 0 {
            return Err(ReadError::new(
                self.text,
                under_at,
                "a figure above zero under the bar",
            ));
        }
        if matches!(self.peek(), Some('.' | ',' | '/')) {
            return Err(ReadError::new(
                self.text,
                start,
                "a plain fraction such as 5/8",
            ));
        }
        Ok(Exact::new(over, under))
    }

    /// A run of digits, its value and how many there were. Thin spaces may group them, as in the
    /// figures this program shows.
    fn digits(&mut self, most: usize) -> Result<(i128, usize), ReadError> {
        let start = self.at;
        let mut value = 0_i128;
        let mut count = 0;
        while let Some(c) = self.peek() {
            if let Some(digit) = c.to_digit(10) {
                count += 1;
                if count > most {
                    let expected = format!("at most {most} digits");
                    return Err(ReadError::new(self.text, start, expected));
                }
                value = value * 10 + i128::from(digit);
            } else if !(count > 0
                && is_group_space(c)
                && self
                    .chars
                    .get(self.at + 1)
                    .is_some_and(char::is_ascii_digit))
            {
                break;
            }
            self.at += 1;
        }
        if count == 0 {
            return Err(ReadError::new(self.text, start, "a number such as 450"));
        }
        Ok((value, count))
    }

    fn unit(&mut self, words: &Words) -> Option<(i128, i128)> {
        let before = self.at;
        self.skip_spaces();
        for &(word, numer, denom) in words.sizes {
            let end = self.at + word.chars().count();
            let Some(found) = self.chars.get(self.at..end) else {
                continue;
            };
            let same = found
                .iter()
                .zip(word.chars())
                .all(|(a, b)| a.eq_ignore_ascii_case(&b));
            // A word ends where its letters end: `min` is not `m`.
            let ends = !word.chars().all(char::is_alphabetic)
                || !self
                    .chars
                    .get(end)
                    .is_some_and(|c| c.is_alphabetic() && !is_times(*c));
            if same && ends {
                self.at = end;
                return Some((numer, denom));
            }
        }
        self.at = before;
        None
    }

    fn peek(&self) -> Option<char> {
        self.chars.get(self.at).copied()
    }

    fn take(&mut self, wanted: char) -> bool {
        let found = self.peek() == Some(wanted);
        self.at += usize::from(found);
        found
    }

    fn takes_times(&mut self) -> bool {
        ['x', 'X', '×', '*'].iter().any(|&sign| self.take(sign))
    }

    fn skip_spaces(&mut self) {
        while self.peek().is_some_and(char::is_whitespace) {
            self.at += 1;
        }
    }
}

/// The thin spaces this program puts between thousands.
const fn is_group_space(c: char) -> bool {
    matches!(c, '\u{2009}' | '\u{202f}')
}

const fn is_times(c: char) -> bool {
    matches!(c, 'x' | 'X')
}

/// The single-character fractions a tablet keyboard offers.
fn vulgar(c: char) -> Option<Exact> {
    let (over, under) = match c {
        '½' => (1, 2),
        '¼' => (1, 4),
        '¾' => (3, 4),
        '⅛' => (1, 8),
        '⅜' => (3, 8),
        '⅝' => (5, 8),
        '⅞' => (7, 8),
        _ => return None,
    };
    Some(Exact::new(over, under))
}
