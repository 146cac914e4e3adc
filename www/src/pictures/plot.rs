//! Where things lie on the plot of a circuit: plain arithmetic in pixels.

use core::fmt::Write;

use tubewright::measure::grouped;

/// Size of all text on the plot; a letter is at most so wide on average.
pub(super) const TEXT_PX: f64 = 12.0;
const LETTER_PX: f64 = 7.4;
/// Labels are kept this far apart.
const APART_PX: f64 = 6.0;
/// Names are never shown by less than this, or the cut name would say nothing.
const LEAST_LETTERS: usize = 3;
/// Room for the figures of the scales on the left, and for half a dot on the right.
const LEFT_PX: f64 = 52.0;
const RIGHT_PX: f64 = 12.0;
/// Heights from the top down.
const TITLE_PX: f64 = 22.0;
const VOLTS_PX: f64 = 190.0;
const STRIP_PX: f64 = 14.0;
const UNDER_STRIP_PX: f64 = 40.0;
const CURRENT_PX: f64 = 116.0;
const BELOW_PX: f64 = 10.0;
const BETWEEN_PX: f64 = 10.0;

/// The parts of the plot, each from its upper to its lower edge.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Ground {
    pub(super) width: f64,
    pub(super) height: f64,
    /// Where lead A and lead B lie.
    pub(super) left: f64,
    pub(super) right: f64,
    /// The volts.
    pub(super) volts: (f64, f64),
    /// The pieces.
    pub(super) strip: (f64, f64),
    /// The mid-point's current, where there is a map of it.
    pub(super) current: Option<(f64, f64)>,
}

impl Ground {
    /// Lays the parts out in a width.
    pub(super) fn of(width: f64, current: bool) -> Self {
        let width = width.max(LEFT_PX + RIGHT_PX + 40.0);
        let volts = (TITLE_PX, TITLE_PX + VOLTS_PX);
        let strip = (volts.1 + BETWEEN_PX, volts.1 + BETWEEN_PX + STRIP_PX);
        let under = strip.1 + UNDER_STRIP_PX;
        let current = current.then_some((under + TITLE_PX, under + TITLE_PX + CURRENT_PX));
        Self {
            width,
            height: current.map_or(under, |(_, bottom)| bottom + BELOW_PX),
            left: LEFT_PX,
            right: width - RIGHT_PX,
            volts,
            strip,
            current,
        }
    }

    /// Where a share of the string's volts from lead A lies.
    pub(super) fn x(&self, share: f64) -> f64 {
        self.left + share.clamp(0.0, 1.0) * (self.right - self.left)
    }

    /// Lines from lead A to lead B at some heights, as path data.
    pub(super) fn across(&self, heights: impl IntoIterator<Item = f64>) -> String {
        let mut path = String::new();
        for y in heights {
            let _ = write!(path, "M{:.1} {y:.1}H{:.1}", self.left, self.right);
        }
        path
    }

    /// Lines from `top` to `bottom` at some shares, as path data.
    pub(super) fn upright(
        &self,
        shares: impl IntoIterator<Item = f64>,
        top: f64,
        bottom: f64,
    ) -> String {
        let mut path = String::new();
        for share in shares {
            let _ = write!(path, "M{:.1} {top:.1}V{bottom:.1}", self.x(share));
        }
        path
    }

    /// The joint nearest to a place.
    pub(super) fn nearest(&self, x: f64, shares: &[f64]) -> Option<usize> {
        let off = |share: f64| (self.x(share) - x).abs();
        (0..shares.len()).min_by(|&a, &b| off(shares[a]).total_cmp(&off(shares[b])))
    }
}

/// The joint before or after the marked one; with none marked, the first or the last.
pub fn beside(marked: Option<usize>, last: usize, after: bool) -> usize {
    match (marked, after) {
        (Some(joint), true) => joint.saturating_add(1).min(last),
        (Some(joint), false) => joint.saturating_sub(1).min(last),
        (None, true) => 0,
        (None, false) => last,
    }
}

/// A scale from bottom to top.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Scale {
    pub(super) low: f64,
    pub(super) high: f64,
    pub(super) top: f64,
    pub(super) bottom: f64,
}

impl Scale {
    /// Where a figure lies; what is beyond the scale lies at its end.
    pub(super) fn y(&self, figure: f64) -> f64 {
        let share = (figure - self.low) / (self.high - self.low);
        let share = if share.is_finite() {
            share.clamp(0.0, 1.0)
        } else {
            0.0
        };
        self.bottom - share * (self.bottom - self.top)
    }

    /// Round figures on it, at least `apart` pixels from each other.
    pub(super) fn ticks(&self, apart: f64) -> Vec<f64> {
        let range = self.high - self.low;
        if !(range > 0.0 && range.is_finite()) {
            return Vec::new();
        }
        let least = range * apart / (self.bottom - self.top);
        let ten = 10.0_f64.powf(least.log10().floor());
        let step = [1.0, 2.0, 5.0, 10.0]
            .map(|times| times * ten)
            .into_iter()
            .find(|step| *step >= least)
            .unwrap_or(10.0 * ten);
        let mut at = (self.low / step).ceil();
        let mut found = Vec::new();
        while at * step <= self.high {
            // Not minus nothing.
            found.push(at * step + 0.0);
            at += 1.0;
        }
        found
    }
}

/// A line through some points, as path data.
pub(super) fn line(points: impl IntoIterator<Item = (f64, f64)>) -> String {
    let mut path = String::new();
    for (x, y) in points {
        let to = if path.is_empty() { 'M' } else { 'L' };
        let _ = write!(path, "{to}{x:.1} {y:.1}");
    }
    path
}

/// A figure beside a scale: without a sign, since either side of earth can be meant.
pub(super) fn figure(value: f64) -> String {
    let value = value.abs();
    if value > 0.0 && value < 2.0 {
        format!("{value:.1}")
    } else {
        grouped(value)
    }
}

/// A word as it stands on the plot, with its middle.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Label {
    pub(super) x: f64,
    pub(super) text: String,
}

/// About how wide a text is.
pub(super) fn wide(text: &str) -> f64 {
    #[allow(clippy::cast_precision_loss, reason = "a count of letters")]
    let letters = text.chars().count() as f64;
    letters * LETTER_PX
}

/// Names of pieces under their places (`from`, `to` in pixels), in order: those that fit, never one
/// over another and none outside `left` to `right`. A name that is longer than its piece is cut short.
pub(super) fn labels(pieces: &[(f64, f64, &str)], left: f64, right: f64) -> Vec<Label> {
    let mut free_from = left;
    let mut found = Vec::new();
    for &(from, to, name) in pieces {
        let text = shortened(name, (to - from).max(2.0 * TEXT_PX));
        if text.is_empty() {
            continue;
        }
        let half = wide(&text) / 2.0;
        let x = f64::midpoint(from, to).clamp(left + half, (right - half).max(left + half));
        if x - half >= free_from && x + half <= right + 0.5 {
            free_from = x + half + APART_PX;
            found.push(Label { x, text });
        }
    }
    found
}

/// A name in so many pixels.
fn shortened(name: &str, room: f64) -> String {
    if wide(name) <= room || name.chars().count() <= LEAST_LETTERS {
        return name.to_owned();
    }
    #[allow(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        reason = "a few dozen letters"
    )]
    let letters = ((room / LETTER_PX) as usize).max(LEAST_LETTERS);
    let cut: String = name.chars().take(letters - 1).collect();
    format!("{}…", cut.trim_end())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_parts_stand_under_each_other_on_every_screen() {
        for width in [0.0, 300.0, 336.0, 720.0, 1_500.0] {
            for current in [false, true] {
                let ground = Ground::of(width, current);
                assert!(ground.left + 30.0 < ground.right, "{ground:?}");
                assert!(ground.volts.1 < ground.strip.0, "{ground:?}");
                assert!(ground.strip.1 < ground.height, "{ground:?}");
                assert_eq!(ground.current.is_some(), current);
                if let Some((top, bottom)) = ground.current {
                    assert!(
                        ground.strip.1 < top && bottom <= ground.height,
                        "{ground:?}"
                    );
                }
                assert_eq!(ground.x(0.0), ground.left);
                assert_eq!(ground.x(7.0), ground.right, "never beyond lead B");
            }
        }
    }

    #[test]
    fn a_tap_finds_the_nearest_joint() {
        let ground = Ground::of(464.0, true);
        let shares = [0.0, 0.25, 0.3, 1.0];
        // 400 px from A to B: joints at 52, 152, 172 and 452.
        for (x, joint) in [
            (0.0, 0),
            (101.0, 0),
            (103.0, 1),
            (163.0, 2),
            (311.0, 2),
            (463.0, 3),
        ] {
            assert_eq!(ground.nearest(x, &shares), Some(joint), "at {x}");
        }
        assert_eq!(ground.nearest(5.0, &[]), None, "nothing to tap");
    }

    #[test]
    fn figures_lie_between_the_ends_of_their_scale() {
        let scale = Scale {
            low: -5_000.0,
            high: 5_000.0,
            top: 20.0,
            bottom: 220.0,
        };
        assert_eq!(scale.y(0.0), 120.0);
        assert_eq!(scale.y(5_000.0), 20.0);
        assert_eq!(scale.y(9_000.0), 20.0, "beyond");
        assert_eq!(scale.y(f64::NAN), 220.0, "nobody knows");
        assert_eq!(
            scale.ticks(30.0),
            [-4_000.0, -2_000.0, 0.0, 2_000.0, 4_000.0]
        );
        for (low, high) in [(0.0, 0.0), (0.0, f64::NAN), (0.0, f64::INFINITY)] {
            let none = Scale { low, high, ..scale };
            assert_eq!(none.ticks(30.0), [0.0; 0], "{low} to {high}");
        }
        assert_eq!(figure(-2_000.0), "2\u{202f}000");
        assert_eq!(figure(0.5), "0.5");
        assert_eq!(figure(0.0), "0");
    }

    #[test]
    fn names_are_thinned_out_and_never_lie_over_each_other() {
        let names: Vec<String> = (1..=40).map(|number| format!("piece {number}")).collect();
        for (count, long) in [(1, 270.0), (8, 270.0), (40, 270.0), (40, 1_000.0)] {
            let each = long / f64::from(count);
            let pieces: Vec<(f64, f64, &str)> = (0..count)
                .zip(&names)
                .map(|(at, name)| {
                    let from = 52.0 + f64::from(at) * each;
                    (from, from + each, name.as_str())
                })
                .collect();
            let found = labels(&pieces, 52.0, 52.0 + long);
            assert!(!found.is_empty(), "{count} in {long}");
            for pair in found.windows(2) {
                let gap = (pair[1].x - wide(&pair[1].text) / 2.0)
                    - (pair[0].x + wide(&pair[0].text) / 2.0);
                assert!(gap >= APART_PX - 1e-9, "{count} in {long}: {pair:?}");
            }
            for label in &found {
                assert!(
                    label.x - wide(&label.text) / 2.0 >= 52.0 - 1e-9,
                    "{label:?}"
                );
                assert!(
                    label.x + wide(&label.text) / 2.0 <= 52.5 + long,
                    "{label:?}"
                );
            }
        }
        assert_eq!(
            labels(&[(0.0, 200.0, "border")], 0.0, 200.0)[0].text,
            "border",
            "whole where there is room"
        );
        assert_eq!(
            labels(&[(0.0, 40.0, "kettles")], 0.0, 40.0)[0].text,
            "kett…"
        );
    }
}
