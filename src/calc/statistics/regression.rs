//! The least-squares straight line y = intercept + slope x, with its uncertainties.
//!
//! Not here: when a line reaches a limit (`forecast.rs`), and lines that withstand outliers (`trend.rs`).
//! Source of the formulas: N. R. Draper, H. Smith, Applied Regression Analysis, 3rd ed., Wiley 1998, chapters 1 to 3;
//! NIST/SEMATECH e-Handbook, 4.4.3.1 and 4.5.1.

use super::error::{StatisticsError, check_one, check_points, check_positive, check_range, is_usable};
use super::student_t::{student_t_two_sided_probability, student_t_upper_quantile};
use super::sum::sum_of;
use super::tolerance::{SHARE_LEAST, SHARE_MAX};

/// A two-sided interval, ends included.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Interval {
    /// Lower end.
    pub low: f64,
    /// Upper end.
    pub high: f64,
}

impl Interval {
    /// The interval from `middle` - `half_width` to `middle` + `half_width`.
    pub(crate) fn about(middle: f64, half_width: f64) -> Self {
        Self { low: middle - half_width, high: middle + half_width }
    }

    /// Whether the value lies within, ends included.
    pub fn contains(&self, value: f64) -> bool {
        self.low <= value && value <= self.high
    }
}

/// A fitted straight line.
///
/// Units: x and y as given; slope in y per x. Uncertainties need at least three points, since two always lie on a line.
#[derive(Clone, Debug, PartialEq)]
pub struct Line {
    count: usize,
    weight: f64,
    mean_x: f64,
    mean_y: f64,
    slope: f64,
    squares_x: f64,
    squares_y: f64,
    squares_residual: f64,
    residuals: Vec<f64>,
}

impl Line {
    /// Fits the line that makes the sum of squared residuals least.
    ///
    /// slope = sum (x - mean x)(y - mean y) / sum (x - mean x)^2;  intercept = mean y - slope mean x
    ///
    /// # Refuses   lists of different length, fewer than two points, values that are not finite, points that all have the same x
    /// # Example
    /// By hand: (0, 1), (1, 3), (2, 5) lie on y = 1 + 2 x.
    /// ```
    /// let line = calc::statistics::Line::fit(&[0.0, 1.0, 2.0], &[1.0, 3.0, 5.0]).unwrap();
    /// assert_eq!((line.intercept(), line.slope()), (1.0, 2.0));
    /// ```
    pub fn fit(x: &[f64], y: &[f64]) -> Result<Self, StatisticsError> {
        Self::fit_weighted(x, y, &vec![1.0; x.len()])
    }

    /// Fits with weights: a point of weight w counts as if its variance were s^2 / w, where s is the residual standard deviation.
    ///
    /// # Refuses   what [`Line::fit`] refuses; a weight that is not greater than 0; another number of weights than points
    pub fn fit_weighted(x: &[f64], y: &[f64], weights: &[f64]) -> Result<Self, StatisticsError> {
        check_points("x", x, "y", y, 2)?;
        if weights.len() != x.len() {
            return Err(StatisticsError::DifferentLengths { first: x.len(), second: weights.len() });
        }
        for &weight in weights {
            check_positive("weight", weight)?;
        }
        let weight = sum_of(weights.iter().copied());
        let mean_x = weighted_mean(x, weights, weight);
        let near_mean_y = weighted_mean(y, weights, weight);
        let squares_x = weighted_products(x, mean_x, x, mean_x, weights);
        // Also catches x so close together that the sum of their squares underflows.
        if !squares_x.is_normal() {
            return Err(StatisticsError::SamePlace { what: "x", at: x[0] });
        }
        let near_slope = weighted_products(x, mean_x, y, near_mean_y, weights) / squares_x;
        // A second fit to the residuals of the first takes out most of its rounding.
        let rest: Vec<f64> = residuals_of(x, y, mean_x, near_mean_y, near_slope);
        let mean_y = near_mean_y + weighted_mean(&rest, weights, weight);
        let slope = near_slope + weighted_products(x, mean_x, &rest, 0.0, weights) / squares_x;
        let residuals = residuals_of(x, y, mean_x, mean_y, slope);
        let squares_residual = weighted_products(&residuals, 0.0, &residuals, 0.0, weights);
        // A slope beyond all measure comes from places that differ by no more than rounding.
        if !slope.is_finite() || !squares_residual.is_finite() {
            return Err(StatisticsError::SamePlace { what: "x", at: x[0] });
        }
        Ok(Self {
            count: x.len(),
            weight,
            mean_x,
            mean_y,
            slope,
            squares_x,
            squares_y: weighted_products(y, mean_y, y, mean_y, weights),
            squares_residual,
            residuals,
        })
    }

    /// Number of points.
    pub fn count(&self) -> usize {
        self.count
    }

    /// Slope, y per x.
    pub fn slope(&self) -> f64 {
        self.slope
    }

    /// Value of the line at x = 0.
    pub fn intercept(&self) -> f64 {
        self.value_at(0.0)
    }

    /// Weighted mean of x, where the line is known best.
    pub fn mean_x(&self) -> f64 {
        self.mean_x
    }

    /// Value of the line at x.
    pub fn value_at(&self, x: f64) -> f64 {
        self.mean_y + self.slope * (x - self.mean_x)
    }

    /// Residuals y - line, in the order of the points.
    pub fn residuals(&self) -> &[f64] {
        &self.residuals
    }

    /// Degrees of freedom, number of points - 2.
    pub fn degrees_of_freedom(&self) -> usize {
        self.count - 2
    }

    /// Sum of squared (weighted) residuals.
    pub fn residual_squares(&self) -> f64 {
        self.squares_residual
    }

    /// Residual standard deviation, sqrt( sum of squared residuals / (n - 2) ); none for two points.
    pub fn residual_standard_deviation(&self) -> Option<f64> {
        match self.degrees_of_freedom() {
            0 => None,
            degrees => Some(libm::sqrt(self.squares_residual / degrees as f64)),
        }
    }

    /// Share of the scatter of y that the line accounts for; none if all y are equal.
    pub fn r_squared(&self) -> Option<f64> {
        (self.squares_y > 0.0).then(|| 1.0 - self.squares_residual / self.squares_y)
    }

    /// Standard deviation of the slope; none for two points.
    pub fn slope_standard_deviation(&self) -> Option<f64> {
        self.residual_standard_deviation().map(|s| s / libm::sqrt(self.squares_x))
    }

    /// Standard deviation of the intercept; none for two points.
    pub fn intercept_standard_deviation(&self) -> Option<f64> {
        self.residual_standard_deviation().map(|s| s * self.spread_of_value_at(0.0))
    }

    /// Interval that holds the true slope with the stated confidence (two-sided).
    ///
    /// # Refuses   fewer than three points; a confidence outside 0.5 to 0.999999
    pub fn slope_interval(&self, confidence: f64) -> Result<Interval, StatisticsError> {
        let half_width = self.two_sided_t(confidence)? / libm::sqrt(self.squares_x);
        Ok(Interval::about(self.slope, half_width))
    }

    /// Interval that holds the true intercept with the stated confidence (two-sided).
    ///
    /// # Refuses   as [`Line::slope_interval`]
    pub fn intercept_interval(&self, confidence: f64) -> Result<Interval, StatisticsError> {
        self.value_interval_at(0.0, confidence)
    }

    /// Interval that holds the true line at x with the stated confidence (two-sided).
    ///
    /// line(x) +- t s sqrt( 1/n + (x - mean x)^2 / sum (x - mean x)^2 )
    ///
    /// # Refuses   as [`Line::slope_interval`]; an x that is not finite
    pub fn value_interval_at(&self, x: f64, confidence: f64) -> Result<Interval, StatisticsError> {
        check_one("x", x)?;
        let half_width = self.two_sided_t(confidence)? * self.spread_of_value_at(x);
        Ok(Interval::about(self.value_at(x), half_width))
    }

    /// Interval that holds one further reading at x with the stated probability (two-sided). With weights: a reading of weight 1.
    ///
    /// line(x) +- t s sqrt( 1 + 1/n + (x - mean x)^2 / sum (x - mean x)^2 )
    ///
    /// # Refuses   as [`Line::value_interval_at`]
    pub fn prediction_interval_at(&self, x: f64, probability: f64) -> Result<Interval, StatisticsError> {
        check_one("x", x)?;
        let half_width = self.two_sided_t(probability)? * self.spread_of_reading_at(x);
        Ok(Interval::about(self.value_at(x), half_width))
    }

    /// Bound below which one further reading at x lies with the stated probability (one-sided). With weights: a reading of weight 1.
    ///
    /// line(x) + t s sqrt( 1 + 1/n + (x - mean x)^2 / sum (x - mean x)^2 ),  t the one-sided quantile with n - 2 degrees of freedom
    ///
    /// # Refuses   as [`Line::value_interval_at`]
    pub fn upper_prediction_bound_at(&self, x: f64, probability: f64) -> Result<f64, StatisticsError> {
        check_one("x", x)?;
        let width = self.one_sided_t(probability)?;
        Ok(self.upper_bound_at(x, width))
    }

    /// Probability of a slope at least so far from zero, on either side, if the true slope were zero.
    ///
    /// # Refuses   fewer than three points
    pub fn slope_probability(&self) -> Result<f64, StatisticsError> {
        let deviation = self.slope_standard_deviation().ok_or_else(|| self.too_few())?;
        if self.slope == 0.0 {
            return Ok(1.0);
        }
        let t = self.slope / deviation;
        // Points that lie on a line without any scatter leave no doubt about its slope.
        Ok(if is_usable(t) { student_t_two_sided_probability(t, self.degrees_of_freedom() as f64) } else { 0.0 })
    }

    /// Upper bound for a reading at x, for a width t s already worked out by [`Line::one_sided_t`].
    pub(crate) fn upper_bound_at(&self, x: f64, width: f64) -> f64 {
        self.value_at(x) + width * self.spread_of_reading_at(x)
    }

    /// t s with t exceeded on one side with probability 1 - `probability`.
    pub(crate) fn one_sided_t(&self, probability: f64) -> Result<f64, StatisticsError> {
        check_range("probability", probability, SHARE_LEAST, SHARE_MAX)?;
        self.t_times_s(1.0 - probability)
    }

    /// Squared standard deviation of the line at x, as a multiple of s^2.
    pub(crate) fn variance_share_at(&self, x: f64) -> f64 {
        let away = x - self.mean_x;
        1.0 / self.weight + away * away / self.squares_x
    }

    /// Squared standard deviation of the slope, as a multiple of s^2.
    pub(crate) fn slope_variance_share(&self) -> f64 {
        1.0 / self.squares_x
    }

    fn spread_of_value_at(&self, x: f64) -> f64 {
        libm::sqrt(self.variance_share_at(x))
    }

    fn spread_of_reading_at(&self, x: f64) -> f64 {
        libm::sqrt(1.0 + self.variance_share_at(x))
    }

    fn two_sided_t(&self, confidence: f64) -> Result<f64, StatisticsError> {
        check_range("confidence", confidence, SHARE_LEAST, SHARE_MAX)?;
        self.t_times_s(0.5 * (1.0 - confidence))
    }

    fn t_times_s(&self, tail: f64) -> Result<f64, StatisticsError> {
        let s = self.residual_standard_deviation().ok_or_else(|| self.too_few())?;
        Ok(s * student_t_upper_quantile(tail, self.degrees_of_freedom() as f64))
    }

    fn too_few(&self) -> StatisticsError {
        StatisticsError::TooFewValues { needed: 3, given: self.count }
    }
}

/// Weighted mean, by differences from the first value so that equal values give exactly that value.
fn weighted_mean(values: &[f64], weights: &[f64], weight: f64) -> f64 {
    let mean_from = |origin: f64| {
        let terms = values.iter().zip(weights).map(|(v, w)| w * (v - origin));
        origin + sum_of(terms) / weight
    };
    mean_from(mean_from(values[0]))
}

/// sum w (a - centre a)(b - centre b)
fn weighted_products(a: &[f64], centre_a: f64, b: &[f64], centre_b: f64, weights: &[f64]) -> f64 {
    sum_of(a.iter().zip(b).zip(weights).map(|((a, b), w)| w * ((a - centre_a) * (b - centre_b))))
}

fn residuals_of(x: &[f64], y: &[f64], mean_x: f64, mean_y: f64, slope: f64) -> Vec<f64> {
    x.iter().zip(y).map(|(x, y)| (y - mean_y) - slope * (x - mean_x)).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn two_points_have_no_uncertainty_to_state() {
        let line = Line::fit(&[1.0, 3.0], &[2.0, 6.0]).unwrap();
        assert_eq!((line.slope(), line.intercept()), (2.0, 0.0));
        assert_eq!(line.residual_standard_deviation(), None);
        assert_eq!(line.slope_standard_deviation(), None);
        let few = StatisticsError::TooFewValues { needed: 3, given: 2 };
        assert_eq!(line.slope_interval(0.95), Err(few.clone()));
        assert_eq!(line.prediction_interval_at(2.0, 0.95), Err(few.clone()));
        assert_eq!(line.slope_probability(), Err(few));
    }

    #[test]
    fn refusals() {
        let refused = |x: &[f64], y: &[f64]| Line::fit(x, y).unwrap_err();
        assert!(matches!(refused(&[1.0], &[1.0, 2.0]), StatisticsError::DifferentLengths { first: 1, second: 2 }));
        assert!(matches!(refused(&[1.0], &[1.0]), StatisticsError::TooFewValues { needed: 2, given: 1 }));
        assert!(matches!(
            refused(&[1.0, f64::NAN], &[1.0, 2.0]),
            StatisticsError::NotUsable { what: "x", index: 1, .. }
        ));
        assert!(matches!(refused(&[5.0, 5.0, 5.0], &[1.0, 2.0, 3.0]), StatisticsError::SamePlace { .. }));
        assert!(matches!(
            Line::fit_weighted(&[1.0, 2.0], &[1.0, 2.0], &[1.0, 0.0]),
            Err(StatisticsError::NotPositive { .. })
        ));
    }

    #[test]
    fn a_level_line_without_scatter() {
        let line = Line::fit(&[1.0, 2.0, 4.0], &[0.3, 0.3, 0.3]).unwrap();
        assert_eq!(line.slope(), 0.0);
        assert_eq!(line.r_squared(), None);
        assert_eq!(line.slope_probability(), Ok(1.0));
        assert_eq!(line.residual_standard_deviation(), Some(0.0));
    }
}
