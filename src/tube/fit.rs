//! All readings of a tube type at once: volts of an electrode pair, volts per metre and their fall
//! with current.

use super::line::{Interval, Line};

/// A reading as the fit sees it.
#[derive(Debug, Clone, Copy)]
pub(super) struct Point {
    /// Length, metres.
    pub metres: f64,
    /// The reference current over the reading's own.
    pub ratio: f64,
    /// Volts read.
    pub volts: f64,
}

/// How the exponent was come by.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Freedom {
    /// Fitted with the rest.
    Fitted,
    /// Known before.
    Given,
}

/// `U = U_pair + E L ratio^n` through some readings by least squares of the volts.
///
/// For a given n this is a straight line: U against the length carried to the reference current, `x
/// = L ratio^n`. A fitted n is the one whose line leaves the least scatter, sought by steps along
/// `z = dU/dn` as far as a line in x does not already follow it (variable projection). To first
/// order that is the line of ln E against ln I over the currents, each current weighted by how well
/// its readings tell its E, with one `U_pair` for all; but each reading counts at its own current,
/// and one with no second length at its current still tells something.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Fit {
    /// U against x.
    pub line: Line,
    /// n.
    pub exponent: f64,
    /// Readings less figures drawn from them.
    pub freedom: usize,
    /// z against x, and the sum of squares it leaves; None where the exponent is given.
    bend: Option<(Line, f64)>,
}

impl Fit {
    /// With a given exponent. None where the lengths are all alike.
    pub(super) fn given(points: &[Point], exponent: f64) -> Option<Self> {
        Self::at(points, exponent, Freedom::Given)
    }

    /// With the exponent fitted too, sought from a first guess. None where the readings cannot tell
    /// it.
    pub(super) fn whole(points: &[Point], guess: f64) -> Option<Self> {
        const MOST_STEPS: usize = 60;
        let mut now = Self::at(points, guess, Freedom::Fitted)?;
        for _ in 0..MOST_STEPS {
            let (_, left) = now.bend.as_ref()?;
            let pull: f64 = points
                .iter()
                .map(|point| now.beyond(point.metres, point.ratio) * now.residual(point))
                .sum();
            let mut step = pull / left;
            // Halved until it does not lose; far from the best n the steps may be too long.
            let next = loop {
                if !step.is_finite() || step.abs() < 1e-13 {
                    return Some(now);
                }
                let tried = Self::at(points, now.exponent + step, Freedom::Fitted);
                if let Some(tried) = tried
                    && tried.line.scatter <= now.line.scatter
                {
                    break tried;
                }
                step /= 2.0;
            };
            now = next;
        }
        Some(now)
    }

    /// With the exponent held where it is not best, as if fitted: what it may be off by still counts.
    pub(super) fn held(points: &[Point], exponent: f64) -> Option<Self> {
        Self::at(points, exponent, Freedom::Fitted)
    }

    fn at(points: &[Point], exponent: f64, how: Freedom) -> Option<Self> {
        let carried = |point: &Point| point.metres * point.ratio.powf(exponent);
        let xy: Vec<(f64, f64)> = points.iter().map(|p| (carried(p), p.volts)).collect();
        let line = Line::fit(&xy)?;
        let bend = match how {
            Freedom::Given => None,
            Freedom::Fitted => {
                let slope = |point: &Point| line.slope * carried(point) * point.ratio.ln();
                let xz: Vec<(f64, f64)> = points.iter().map(|p| (carried(p), slope(p))).collect();
                let bend = Line::fit(&xz)?;
                let left = bend.scatter;
                if left <= 0.0 {
                    return None;
                }
                Some((bend, left))
            }
        };
        Some(Self {
            freedom: line.freedom.checked_sub(usize::from(bend.is_some()))?,
            line,
            exponent,
            bend,
        })
    }

    /// Volts of a piece.
    pub(super) fn volts(&self, metres: f64, ratio: f64) -> f64 {
        self.line.at(metres * ratio.powf(self.exponent))
    }

    /// Volts read over volts fitted.
    pub(super) fn residual(&self, point: &Point) -> f64 {
        point.volts - self.volts(point.metres, point.ratio)
    }

    /// Standard deviation of a reading; not a number with no freedom.
    pub(super) fn residual_deviation(&self) -> f64 {
        #[allow(clippy::cast_precision_loss, reason = "a count of readings")]
        let freedom = self.freedom as f64;
        (self.line.scatter / freedom).sqrt()
    }

    /// dU/dn as far as a line in x does not follow it.
    fn beyond(&self, metres: f64, ratio: f64) -> f64 {
        let x = metres * ratio.powf(self.exponent);
        self.bend.as_ref().map_or(0.0, |(bend, _)| {
            self.line.slope * x * ratio.ln() - bend.at(x)
        })
    }

    /// Variance of the fitted volts of a piece, as a share of that of a reading. At a reading, this is
    /// how much the fit leans on it: its leverage.
    pub(super) fn share(&self, metres: f64, ratio: f64) -> f64 {
        let bent = self
            .bend
            .as_ref()
            .map_or(0.0, |(_, left)| self.beyond(metres, ratio).powi(2) / left);
        self.line.share(metres * ratio.powf(self.exponent)) + bent
    }

    /// Volts of an electrode pair.
    pub(super) fn pair(&self) -> Interval {
        let bent = self.bent(|bend| bend.at_zero);
        self.interval(self.line.at_zero, self.line.share(0.0) + bent)
    }

    /// Volts per metre at the reference current.
    pub(super) fn per_metre(&self) -> Interval {
        let bent = self.bent(|bend| bend.slope);
        self.interval(self.line.slope, 1.0 / self.line.spread_x + bent)
    }

    /// The exponent, where it was fitted.
    pub(super) fn exponent(&self) -> Option<Interval> {
        let (_, left) = self.bend.as_ref()?;
        Some(self.interval(self.exponent, 1.0 / left))
    }

    /// Volts of one more reading.
    pub(super) fn next(&self, metres: f64, ratio: f64) -> Interval {
        self.interval(self.volts(metres, ratio), 1.0 + self.share(metres, ratio))
    }

    /// What a figure of the line is less sure by because the exponent is not sure either.
    fn bent(&self, of: fn(&Line) -> f64) -> f64 {
        self.bend
            .as_ref()
            .map_or(0.0, |(bend, left)| of(bend).powi(2) / left)
    }

    fn interval(&self, value: f64, share: f64) -> Interval {
        let deviation = self.residual_deviation() * share.sqrt();
        Interval::of(value, deviation, self.freedom)
    }
}
