//! Summary of repeated stops: number, mean, standard deviation, least, greatest, mean + 3 s.
//!
//! Which of these is taken forward into a safety distance is decided by the rule set, not here.
//! Source of the formulas: NIST/SEMATECH e-Handbook of Statistical Methods, sections 1.3.5.1 and 1.3.5.6.

use super::error::{StatisticsError, check_usable};
use super::sum::{mean_of, sum_of};

/// Figures that describe one list of values. All carry the unit of the values.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Summary {
    count: usize,
    mean: f64,
    standard_deviation: Option<f64>,
    least: f64,
    greatest: f64,
}

impl Summary {
    /// Summarises the values of one condition.
    ///
    /// mean = sum x / n;  s = sqrt( sum (x - mean)^2 / (n - 1) )
    ///
    /// # Refuses   an empty list, and any value that is not finite (or beyond [`super::MAGNITUDE_MAX`])
    /// # Source    NIST/SEMATECH e-Handbook, 1.3.5.6; two passes with a correction term after
    ///   T. F. Chan, G. H. Golub, R. J. LeVeque, The American Statistician 37 (1983) 242-247
    /// # Example
    /// NIST StRD set NumAcc1: certified mean 10000002, standard deviation 1.
    /// ```
    /// let summary = calc::statistics::Summary::of(&[10_000_001.0, 10_000_003.0, 10_000_002.0]).unwrap();
    /// assert_eq!(summary.mean(), 10_000_002.0);
    /// assert_eq!(summary.standard_deviation(), Some(1.0));
    /// ```
    pub fn of(values: &[f64]) -> Result<Self, StatisticsError> {
        if values.is_empty() {
            return Err(StatisticsError::TooFewValues { needed: 1, given: 0 });
        }
        check_usable("value", values)?;
        let mean = mean_of(values);
        let standard_deviation = match values.len() {
            1 => None,
            count => Some(libm::sqrt(squares_about(values, mean) / (count - 1) as f64)),
        };
        Ok(Self {
            count: values.len(),
            mean,
            standard_deviation,
            least: values.iter().copied().fold(f64::INFINITY, f64::min),
            greatest: values.iter().copied().fold(f64::NEG_INFINITY, f64::max),
        })
    }

    /// Number of values, n.
    pub fn count(&self) -> usize {
        self.count
    }

    /// Arithmetic mean.
    pub fn mean(&self) -> f64 {
        self.mean
    }

    /// Standard deviation s with divisor n - 1; none for a single value.
    pub fn standard_deviation(&self) -> Option<f64> {
        self.standard_deviation
    }

    /// Least value.
    pub fn least(&self) -> f64 {
        self.least
    }

    /// Greatest value.
    pub fn greatest(&self) -> f64 {
        self.greatest
    }

    /// Mean plus three standard deviations; none for a single value.
    pub fn mean_plus_3_s(&self) -> Option<f64> {
        self.standard_deviation.map(|s| self.mean + 3.0 * s)
    }

    /// Standard deviation of the mean, s / sqrt(n); none for a single value.
    pub fn standard_deviation_of_mean(&self) -> Option<f64> {
        self.standard_deviation.map(|s| s / libm::sqrt(self.count as f64))
    }
}

/// Sum of squared deviations from the mean, corrected for the rounding of the mean itself.
fn squares_about(values: &[f64], mean: f64) -> f64 {
    let squares = sum_of(values.iter().map(|x| (x - mean) * (x - mean)));
    let remainder = sum_of(values.iter().map(|x| x - mean));
    let corrected = squares - remainder * remainder / values.len() as f64;
    assert!(corrected >= 0.0, "a sum of squares fell below zero: {corrected}");
    corrected
}

#[cfg(test)]
mod tests {
    use super::*;

    fn check(values: &[f64], mean: f64, standard_deviation: Option<f64>) {
        let summary = Summary::of(values).unwrap();
        assert_eq!(summary.mean(), mean);
        assert_eq!(summary.standard_deviation(), standard_deviation);
    }

    #[test]
    fn small_lists() {
        check(&[4.5], 4.5, None);
        check(&[1.0, 3.0], 2.0, Some(libm::sqrt(2.0)));
        check(&[0.1, 0.1, 0.1], 0.1, Some(0.0));
        check(&[-1.0e100, 0.0, 1.0e100], 0.0, Some(1.0e100));
    }

    #[test]
    fn refusals() {
        assert_eq!(Summary::of(&[]), Err(StatisticsError::TooFewValues { needed: 1, given: 0 }));
        for wrong in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, 2.0e100] {
            let refused = Summary::of(&[1.0, wrong]);
            assert!(
                matches!(
                    refused,
                    Err(StatisticsError::NotUsable { index: 1, given, .. })
                        if given.to_bits() == wrong.to_bits()
                ),
                "{wrong}"
            );
        }
    }
}
