//! A straight line through points by least squares, and how well it is known.

use statrs::distribution::{ContinuousCDF, StudentsT};

/// A figure and how far it may be off either way, 95 times in 100.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Interval {
    /// The figure.
    pub value: f64,
    /// Half the width of its 95 % confidence interval.
    pub half: f64,
}

impl Interval {
    /// A figure with its standard deviation, of a fit with so many degrees of freedom.
    pub(super) fn of(value: f64, deviation: f64, freedom: usize) -> Self {
        Self {
            value,
            half: student_t(0.975, freedom) * deviation,
        }
    }

    /// Its least.
    pub fn least(&self) -> f64 {
        self.value - self.half
    }

    /// Its greatest.
    pub fn most(&self) -> f64 {
        self.value + self.half
    }
}

/// The value that Student's t with so many degrees of freedom stays below with this probability; not
/// a number with no degrees of freedom.
pub fn student_t(probability: f64, freedom: usize) -> f64 {
    #[allow(clippy::cast_precision_loss, reason = "a count of readings")]
    let freedom = freedom as f64;
    StudentsT::new(0.0, 1.0, freedom).map_or(f64::NAN, |t| t.inverse_cdf(probability))
}

/// y = `at_zero` + `slope` x, by ordinary least squares: every point counts alike, and only y is
/// taken to scatter. Sums are taken about the means, so that figures far from zero lose no digits.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// y at x = 0.
    pub at_zero: f64,
    /// Rise of y with x.
    pub slope: f64,
    /// Points less the two figures drawn from them.
    pub freedom: usize,
    /// Sum of the squares of y off the line.
    pub scatter: f64,
    /// Share of the scatter of y that the line explains; not a number where y is all alike.
    pub r_squared: f64,
    /// How many points.
    pub count: usize,
    /// Mean of x.
    pub mean_x: f64,
    /// Sum of the squares of x about its mean.
    pub spread_x: f64,
}

impl Line {
    /// The line through some points (x, y). None with fewer than two, with x all alike, or where a
    /// figure is no number.
    pub fn fit(points: &[(f64, f64)]) -> Option<Self> {
        #[allow(clippy::cast_precision_loss, reason = "a count of readings")]
        let count = points.len() as f64;
        let freedom = points.len().checked_sub(2)?;
        let mean_x = points.iter().map(|&(x, _)| x).sum::<f64>() / count;
        let mean_y = points.iter().map(|&(_, y)| y).sum::<f64>() / count;
        let about = || points.iter().map(|&(x, y)| (x - mean_x, y - mean_y));
        let spread_x: f64 = about().map(|(x, _)| x * x).sum();
        let slope = about().map(|(x, y)| x * y).sum::<f64>() / spread_x;
        if spread_x <= 0.0 || !slope.is_finite() {
            return None;
        }
        let scatter = about().map(|(x, y)| (y - slope * x).powi(2)).sum::<f64>();
        let whole: f64 = about().map(|(_, y)| y * y).sum();
        Some(Self {
            at_zero: mean_y - slope * mean_x,
            slope,
            freedom,
            scatter,
            r_squared: 1.0 - scatter / whole,
            count: points.len(),
            mean_x,
            spread_x,
        })
    }

    /// y on the line.
    pub fn at(&self, x: f64) -> f64 {
        self.at_zero + self.slope * x
    }

    /// Standard deviation of y about the line; not a number for two points, which any line meets.
    pub fn residual_deviation(&self) -> f64 {
        #[allow(clippy::cast_precision_loss, reason = "a count of readings")]
        let freedom = self.freedom as f64;
        (self.scatter / freedom).sqrt()
    }

    /// Standard deviation of the slope; not a number for two points.
    pub fn slope_deviation(&self) -> f64 {
        self.residual_deviation() / self.spread_x.sqrt()
    }

    /// Standard deviation of y at x = 0; not a number for two points.
    pub fn at_zero_deviation(&self) -> f64 {
        self.residual_deviation() * self.share(0.0).sqrt()
    }

    /// The slope with its interval; None for two points.
    pub fn slope_interval(&self) -> Option<Interval> {
        (self.freedom > 0).then(|| Interval::of(self.slope, self.slope_deviation(), self.freedom))
    }

    /// y at x = 0 with its interval; None for two points.
    pub fn at_zero_interval(&self) -> Option<Interval> {
        (self.freedom > 0)
            .then(|| Interval::of(self.at_zero, self.at_zero_deviation(), self.freedom))
    }

    /// y of one more point at x, with the interval it will lie in; None for two points.
    pub fn next(&self, x: f64) -> Option<Interval> {
        let deviation = self.residual_deviation() * (1.0 + self.share(x)).sqrt();
        (self.freedom > 0).then(|| Interval::of(self.at(x), deviation, self.freedom))
    }

    /// Variance of the line at x, as a share of that of a point.
    pub(super) fn share(&self, x: f64) -> f64 {
        #[allow(clippy::cast_precision_loss, reason = "a count of readings")]
        let count = self.count as f64;
        1.0 / count + (x - self.mean_x).powi(2) / self.spread_x
    }
}
