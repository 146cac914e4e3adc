//! Transforms, as the attribute writes them and as a style does.
//!
//! Both are read here, because a style may have units where the attribute has bare numbers.

use super::units::{Along, Length};
use kurbo::{Affine, Size};
use svgtypes::{Angle, Number};

/// A list of transforms; none where it cannot be followed.
pub(super) fn read(text: &str, page: Option<Size>) -> Option<Affine> {
    let mut rest = text.trim();
    let mut all = Affine::IDENTITY;
    if rest.eq_ignore_ascii_case("none") {
        return Some(all);
    }
    while !rest.is_empty() {
        let (name, after) = rest.split_once('(')?;
        let (inside, after) = after.split_once(')')?;
        let inside: Vec<&str> = inside
            .split(|c: char| c == ',' || c.is_ascii_whitespace())
            .filter(|word| !word.is_empty())
            .collect();
        // A sign may stand for the comma: `translate(10-5)`.
        let inside: Vec<&str> = inside.into_iter().flat_map(signed).collect();
        all *= one(name.trim(), &inside, page)?;
        rest = after.trim_start_matches(|c: char| c == ',' || c.is_ascii_whitespace());
    }
    all.as_coeffs()
        .iter()
        .all(|number| number.is_finite())
        .then_some(all)
}

/// A word cut where a sign begins a new number.
fn signed(word: &str) -> Vec<&str> {
    let bytes = word.as_bytes();
    let cut = |at: &usize| {
        matches!(bytes[*at], b'+' | b'-') && !matches!(bytes[at - 1], b'e' | b'E' | b'+' | b'-')
    };
    let mut from = 0;
    let mut parts = Vec::new();
    for at in (1..bytes.len()).filter(cut) {
        parts.push(&word[from..at]);
        from = at;
    }
    parts.push(&word[from..]);
    parts
}

fn one(name: &str, inside: &[&str], page: Option<Size>) -> Option<Affine> {
    let number = |text: &&str| -> Option<f64> {
        let (plain, part) = match text.strip_suffix('%') {
            Some(plain) => (plain, 100.0),
            None => (*text, 1.0),
        };
        let Number(number) = plain.parse().ok()?;
        Some(number / part)
    };
    let length = |text: &&str, along| Length::read(text).ok()?.units(along, page).ok();
    let across = |text| length(text, Along::Width);
    let down = |text| length(text, Along::Height);
    let angle = |text: &&str| {
        let angle: Angle = text.parse().ok()?;
        Some(angle.to_degrees().to_radians())
    };
    Some(match (name.to_ascii_lowercase().as_str(), inside) {
        ("matrix", [xx, xy, yx, yy, x, y]) => Affine::new([
            number(xx)?,
            number(xy)?,
            number(yx)?,
            number(yy)?,
            across(x)?,
            down(y)?,
        ]),
        ("translate" | "translatex", [x]) => Affine::translate((across(x)?, 0.0)),
        ("translatey", [y]) => Affine::translate((0.0, down(y)?)),
        ("translate", [x, y]) => Affine::translate((across(x)?, down(y)?)),
        ("scale", [both]) => Affine::scale(number(both)?),
        ("scale", [x, y]) => Affine::scale_non_uniform(number(x)?, number(y)?),
        ("scalex", [x]) => Affine::scale_non_uniform(number(x)?, 1.0),
        ("scaley", [y]) => Affine::scale_non_uniform(1.0, number(y)?),
        ("rotate", [by]) => Affine::rotate(angle(by)?),
        ("rotate", [by, x, y]) => Affine::rotate_about(angle(by)?, (across(x)?, down(y)?)),
        ("skewx" | "skew", [by]) => Affine::skew(angle(by)?.tan(), 0.0),
        ("skewy", [by]) => Affine::skew(0.0, angle(by)?.tan()),
        ("skew", [x, y]) => Affine::skew(angle(x)?.tan(), angle(y)?.tan()),
        _ => return None,
    })
}

/// The point that a style turns and scales about; none where it cannot be followed.
pub(super) fn origin(text: &str, page: Option<Size>) -> Option<(f64, f64)> {
    let words: Vec<&str> = text.split_ascii_whitespace().collect();
    let (x, y) = match words[..] {
        [y @ ("top" | "bottom")] => ("center", y),
        [x] => (x, "center"),
        // The two may be named in either order.
        [first, second] => {
            if matches!(first, "top" | "bottom") || matches!(second, "left" | "right") {
                (second, first)
            } else {
                (first, second)
            }
        }
        _ => return None,
    };
    let place = |word: &str, along| {
        let word = match word {
            "left" | "top" => "0",
            "center" => "50%",
            "right" | "bottom" => "100%",
            other => other,
        };
        Length::read(word).ok()?.units(along, page).ok()
    };
    Some((place(x, Along::Width)?, place(y, Along::Height)?))
}
