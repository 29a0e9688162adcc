//! One-sided tolerance bounds: a value below which, with a stated confidence, at least a stated share of all stops lies.
//!
//! Exact for a normal distribution and any number of values; no table is used.

use super::error::{StatisticsError, check_range};
use super::normal::normal_upper_quantile;
use super::student_t::NoncentralT;
use super::summary::Summary;

/// Least coverage and least confidence that are accepted.
pub const SHARE_LEAST: f64 = 0.5;

/// Greatest coverage and greatest confidence that are accepted.
pub const SHARE_MAX: f64 = 0.999_999;

/// Greatest number of values for which a tolerance factor is worked out; the accuracy was checked up to here.
pub const COUNT_MAX: usize = 1_000_000;

/// Factor k such that mean + k s of n values lies above at least the share `coverage` of a normal population, with `confidence`.
///
/// k = t(c; nu = n - 1, delta = z_p sqrt(n)) / sqrt(n)
///
/// | symbol | input        | unit | permitted            |
/// | ------ | ------------ | ---- | -------------------- |
/// | n      | `count`      | 1    | 2 to 1,000,000       |
/// | p      | `coverage`   | 1    | 0.5 <= p <= 0.999999 |
/// | c      | `confidence` | 1    | 0.5 <= c <= 0.999999 |
///
/// t(c; nu, delta) is the quantile of the noncentral t distribution, z_p the normal quantile.
///
/// # Result    k, without unit. Relative error below 2e-13 for shares up to 0.9999 and below 1e-10 above (1 - c then has few digits left),
///   by comparison with 34-digit values from mpmath for n = 2 to 1,000,000
/// # Valid     for values from a normal distribution, each independent of the others
/// # Refuses   fewer than 2 values or more than [`COUNT_MAX`]; a coverage or confidence outside its range
/// # Source    ISO 16269-6 (one-sided interval, standard deviation unknown); NIST/SEMATECH e-Handbook, 7.2.6.3
/// # Example
/// NIST 7.2.6.3: n = 43, 90 % covered, 99 % confidence: exact k 1.8740.
/// ```
/// let k = calc::statistics::tolerance_factor_one_sided(43, 0.90, 0.99).unwrap();
/// assert!((k - 1.8740).abs() < 0.00005);
/// ```
pub fn tolerance_factor_one_sided(count: usize, coverage: f64, confidence: f64) -> Result<f64, StatisticsError> {
    if count < 2 {
        return Err(StatisticsError::TooFewValues { needed: 2, given: count });
    }
    check_range("number of values", count as f64, 2.0, COUNT_MAX as f64)?;
    check_range("coverage", coverage, SHARE_LEAST, SHARE_MAX)?;
    check_range("confidence", confidence, SHARE_LEAST, SHARE_MAX)?;
    let root_n = libm::sqrt(count as f64);
    // The quantile at one half is 0, but rounding may put it a hair below.
    let delta = normal_upper_quantile(1.0 - coverage).max(0.0) * root_n;
    let t = NoncentralT::new((count - 1) as f64, delta).upper_quantile(1.0 - confidence);
    Ok(t / root_n)
}

/// Upper tolerance bound mean + k s, in the unit of the values.
///
/// # Refuses   a single value, and what [`tolerance_factor_one_sided`] refuses
/// # Source    as there
pub fn upper_tolerance_bound(summary: &Summary, coverage: f64, confidence: f64) -> Result<f64, StatisticsError> {
    let k = tolerance_factor_one_sided(summary.count(), coverage, confidence)?;
    match summary.standard_deviation() {
        Some(s) => Ok(summary.mean() + k * s),
        None => Err(StatisticsError::TooFewValues { needed: 2, given: summary.count() }),
    }
}

/// Confidence with which the greatest of n values lies above at least the share `coverage` of the population, whatever its distribution.
///
/// c = 1 - p^n
///
/// # Refuses   no values at all; a coverage outside 0.5 to 0.999999
/// # Source    ISO 16269-6, distribution-free one-sided interval; follows from the definition of independent values
/// # Example
/// The greatest of 59 values covers 95 % with a confidence of 0.9515.
/// ```
/// let confidence = calc::statistics::confidence_of_greatest(59, 0.95).unwrap();
/// assert!((confidence - 0.9515).abs() < 0.00005);
/// ```
pub fn confidence_of_greatest(count: usize, coverage: f64) -> Result<f64, StatisticsError> {
    if count < 1 {
        return Err(StatisticsError::TooFewValues { needed: 1, given: count });
    }
    check_range("coverage", coverage, SHARE_LEAST, SHARE_MAX)?;
    Ok(-libm::expm1(count as f64 * libm::log(coverage)))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn refusals() {
        for count in [0, 1] {
            assert_eq!(
                tolerance_factor_one_sided(count, 0.95, 0.95),
                Err(StatisticsError::TooFewValues { needed: 2, given: count })
            );
        }
        for wrong in [0.0, 0.499, 0.999_999_1, 1.0, 95.0, -0.95, f64::NAN] {
            assert!(tolerance_factor_one_sided(10, wrong, 0.95).is_err());
            assert!(tolerance_factor_one_sided(10, 0.95, wrong).is_err());
            assert!(confidence_of_greatest(10, wrong).is_err());
        }
        let single = Summary::of(&[5.0]).unwrap();
        assert!(upper_tolerance_bound(&single, 0.95, 0.95).is_err());
    }

    #[test]
    fn half_covered_at_half_confidence_is_the_mean() {
        let k = tolerance_factor_one_sided(10, 0.5, 0.5).unwrap();
        assert!(k.abs() < 1e-12, "{k}");
    }
}
