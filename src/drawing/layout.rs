//! Laying out a text: lines under each other, wider or narrower letters, on an arc, turned.
//!
//! Letters are set, never bent: on an arc each is turned as a whole, so that its glass is as long as on
//! a straight line. All lengths are in the unit of the cap height.

use core::f64::consts::PI;

use kurbo::{Affine, BezPath, Rect, Shape};

use super::face::{Face, Glyph, Letter, Shaped};

/// How a text is laid out.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Layout {
    /// Height of a capital.
    pub cap: f64,
    /// How many times as wide as drawn the letters are.
    pub width: f64,
    /// Added to the space after each character.
    pub spacing: f64,
    /// From one baseline to the next.
    pub pitch: f64,
    /// How several lines stand to each other.
    pub align: Align,
    /// The arc the first line stands on; the others are on arcs around the same centre.
    pub bend: Option<Bend>,
    /// How far the whole is turned, in degrees; above zero it rises to the right.
    pub turned: f64,
}

/// How the lines of a text stand to each other: under each other on straight lines, on the same ray
/// from the centre on an arc.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Align {
    /// By where they begin.
    Left,
    /// By their middles.
    Centre,
    /// By where they end.
    Right,
}

/// An arc for letters to stand on.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bend {
    /// How far it is bent.
    pub by: BendBy,
    /// The middle hangs down and the ends stand up, instead of the other way round.
    pub hangs: bool,
}

/// How far an arc is bent.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum BendBy {
    /// By its radius.
    Radius(f64),
    /// By the height of its middle over its ends, as far as the letters of the first line reach.
    Rise(f64),
}

/// Why letters cannot stand on an arc.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum NoArc {
    /// The radius is too small: a line would go round more than once, or be less than a letter away
    /// from the centre.
    Radius {
        /// The least that will do.
        least: f64,
    },
    /// So short a line does not rise so high, on whatever arc; or it does only on one that is too
    /// small for a line of the text.
    Rise {
        /// The most that will do.
        most: f64,
    },
}

/// Half the angle an arc is seen under from its centre when its rise is the greatest for its length:
/// the rise of an arc of length 1 is sin²(φ/2)/φ, greatest where tan(φ/2) = φ.
const HIGHEST: f64 = 2.331_122_370_414_423;

impl Layout {
    /// The usual one: one line or several centred ones, straight, as the face draws them.
    pub fn plain(cap: f64) -> Self {
        Self {
            cap,
            width: 1.0,
            spacing: 0.0,
            pitch: 1.6 * cap,
            align: Align::Centre,
            bend: None,
            turned: 0.0,
        }
    }
}

/// A line of letters, each `x` from the line's own origin.
#[derive(Default)]
struct Line {
    letters: Vec<(f64, Letter)>,
    /// Where its strokes begin and end.
    reach: Option<(f64, f64)>,
}

impl Line {
    fn width(&self) -> f64 {
        self.reach.map_or(0.0, |(from, to)| to - from)
    }
}

/// Lays out a text. `NoArc` where it cannot stand on the arc that is asked for.
pub(super) fn layout(face: &Face, text: &str, how: &Layout) -> Result<Shaped, NoArc> {
    let (mut lines, missing) = lines(face, text, how);
    match how.bend {
        None => straight(&mut lines, how),
        Some(bend) => {
            let radius = radius(&lines, how, bend)?;
            on_arc(&mut lines, how, radius, bend.hangs);
        }
    }
    let turn = Affine::rotate(-how.turned.to_radians());
    let mut letters: Vec<Letter> = Vec::new();
    for (_, mut letter) in lines.into_iter().flat_map(|line| line.letters) {
        if how.turned != 0.0 {
            letter.place = turn * letter.place;
        }
        letters.push(letter);
    }
    let boxes = letters.iter().flat_map(Letter::strokes);
    let bounds = boxes
        .map(|stroke| stroke.bounding_box())
        .reduce(|all, one| all.union(one))
        .unwrap_or(Rect::ZERO);
    Ok(Shaped {
        letters,
        missing,
        bounds,
    })
}

/// The lines as the pen would write them, and what the face has no shape for.
fn lines(face: &Face, text: &str, how: &Layout) -> (Vec<Line>, Vec<(usize, char)>) {
    let scale = how.cap / face.cap_units;
    let size = Affine::scale_non_uniform(scale * how.width, scale);
    let (mut lines, mut missing) = (vec![Line::default()], Vec::new());
    let (mut pen, mut word) = (0.0, 0);
    for (at, character) in text.chars().enumerate() {
        if character == '\n' {
            lines.push(Line::default());
            (pen, word) = (0.0, word + 1);
            continue;
        }
        let Some(glyph) = face.glyph(character) else {
            missing.push((at, character));
            continue;
        };
        let Glyph { bearings, strokes } = glyph;
        if strokes.is_empty() {
            word += 1;
        } else if let Some(line) = lines.last_mut() {
            let own = size * Affine::translate((-bearings.0, -face.baseline));
            let strokes: Vec<BezPath> = strokes.iter().map(|stroke| own * stroke).collect();
            for stroke in &strokes {
                let reach = stroke.bounding_box();
                let (from, to) = (pen + reach.x0, pen + reach.x1);
                line.reach = Some(
                    line.reach
                        .map_or((from, to), |(least, most)| (from.min(least), to.max(most))),
                );
            }
            line.letters.push((
                pen,
                Letter {
                    character,
                    word,
                    place: Affine::IDENTITY,
                    own: strokes,
                },
            ));
        }
        pen += (bearings.1 - bearings.0) * scale * how.width + how.spacing;
    }
    (lines, missing)
}

#[allow(clippy::cast_precision_loss, reason = "a handful of lines")]
fn straight(lines: &mut [Line], how: &Layout) {
    let alone = lines.len() == 1;
    for (number, line) in lines.iter_mut().enumerate() {
        let (from, to) = line.reach.unwrap_or_default();
        // A line alone stays where the pen begins, on whole numbers as far as the face is.
        let shift = match how.align {
            _ if alone => 0.0,
            Align::Left => -from,
            Align::Centre => -f64::midpoint(from, to),
            Align::Right => -to,
        };
        for (x, letter) in &mut line.letters {
            letter.place = Affine::translate((*x + shift, number as f64 * how.pitch));
        }
    }
}

/// By how much more the baselines' radii are than the first one's.
#[allow(clippy::cast_precision_loss, reason = "a handful of lines")]
fn more(how: &Layout, hangs: bool, number: usize) -> f64 {
    let down = number as f64 * how.pitch;
    if hangs { down } else { -down }
}

/// The radius of the first baseline.
fn radius(lines: &[Line], how: &Layout, bend: Bend) -> Result<f64, NoArc> {
    let reaching = || {
        let numbered = lines.iter().enumerate();
        numbered.filter(|(_, line)| line.reach.is_some())
    };
    // No line goes round more than once, and none is nearer to the centre than a letter is high.
    let least = reaching()
        .map(|(at, line)| (line.width() / (2.0 * PI)).max(how.cap) - more(how, bend.hangs, at))
        .fold(0.0, f64::max);
    match bend.by {
        BendBy::Radius(radius) if radius >= least => Ok(radius),
        BendBy::Radius(_) => Err(NoArc::Radius { least }),
        BendBy::Rise(rise) => {
            let Some((at, first)) = reaching().next() else {
                return Ok(how.cap);
            };
            let (width, more) = (first.width(), more(how, bend.hangs, at));
            // The tightest arc that will do, seen under half this angle.
            let tightest = (width / (2.0 * (least + more))).min(HIGHEST);
            let rise_of = |half: f64| width * (half / 2.0).sin().powi(2) / half;
            if width <= 0.0 || !(rise > 0.0 && rise <= rise_of(tightest)) {
                let most = if width > 0.0 { rise_of(tightest) } else { 0.0 };
                return Err(NoArc::Rise { most });
            }
            // The rise grows with the angle up to HIGHEST.
            let (mut low, mut high) = (0.0, tightest);
            for _ in 0..100 {
                let half = f64::midpoint(low, high);
                if rise_of(half) < rise {
                    low = half;
                } else {
                    high = half;
                }
            }
            Ok(width / (2.0 * high) - more)
        }
    }
}

/// Each letter upright on the arc over the middle of its strokes.
fn on_arc(lines: &mut [Line], how: &Layout, radius: f64, hangs: bool) {
    let radii: Vec<f64> = (0..lines.len())
        .map(|number| radius + more(how, hangs, number))
        .collect();
    let half = |line: &Line, radius: f64| line.width() / (2.0 * radius);
    let widest = lines
        .iter()
        .zip(&radii)
        .filter(|(line, _)| line.reach.is_some())
        .map(|(line, &radius)| half(line, radius))
        .fold(0.0, f64::max);
    for (line, &here) in lines.iter_mut().zip(&radii) {
        let (from, to) = line.reach.unwrap_or_default();
        let middle = f64::midpoint(from, to);
        let shift = match how.align {
            Align::Left => half(line, here) - widest,
            Align::Centre => 0.0,
            Align::Right => widest - half(line, here),
        };
        for (x, letter) in &mut line.letters {
            let reach = letter.own.iter().map(Shape::bounding_box);
            let own_middle = reach
                .reduce(|all, one| all.union(one))
                .map_or(0.0, |all| all.center().x);
            let angle = (*x + own_middle - middle) / here + shift;
            // How far down the place is from the middle of its arc, without the cancelling of 1 - cos.
            let down = 2.0 * here * (angle / 2.0).sin().powi(2);
            let (angle_down, y) = if hangs {
                (-angle, here - radius - down)
            } else {
                (angle, radius - here + down)
            };
            letter.place = Affine::translate((here * angle.sin(), y))
                * Affine::rotate(angle_down)
                * Affine::translate((-own_middle, 0.0));
        }
    }
}
