//! Student's t and the noncentral t distribution: upper tail and its quantile.
//!
//! With Z standard normal and U = sqrt(chi-squared / nu), the noncentral t is (Z + delta) / U, so
//!
//! P(T > t) = integral over u of  Phi(delta - t u)  times the density of U at u.
//!
//! The density of U is proportional to u^(nu-1) exp(-nu u^2 / 2). With u = e^x both factors are smooth and die away at both ends, and
//! then the trapezoidal rule is good to rounding already at a moderate step (L. N. Trefethen, J. A. C. Weideman, "The exponentially
//! convergent trapezoidal rule", SIAM Review 56 (2014) 385-458). All terms are positive, so no digits cancel, and the density is
//! normalised by its own sum over the same places, so no gamma function is needed and large nu costs nothing.
//!
//! Definition of the noncentral t: N. L. Johnson, S. Kotz, N. Balakrishnan, Continuous Univariate Distributions, vol. 2, 2nd ed.,
//! Wiley 1995, chapter 31.

use super::error::{StatisticsError, check_range};
use super::normal::{normal_above, normal_density, normal_upper_quantile};
use super::tolerance::{COUNT_MAX, SHARE_LEAST, SHARE_MAX};

/// Widest step of x. Limits the error where the density of U is broad (few degrees of freedom).
const STEP_MAX: f64 = 0.1;

/// Terms below e^-52 of the largest are left out (the probabilities wanted are at least about 1e-6).
const LOG_WEIGHT_LEAST: f64 = -52.0;

/// The distribution of (Z + delta) / U for one number of degrees of freedom and one delta, prepared for repeated evaluation.
pub(crate) struct NoncentralT {
    degrees_of_freedom: f64,
    delta: f64,
    /// Places u and their weights; the weights add to 1.
    nodes: Vec<(f64, f64)>,
}

impl NoncentralT {
    /// `degrees_of_freedom` at least 1, `delta` at least 0.
    pub(crate) fn new(degrees_of_freedom: f64, delta: f64) -> Self {
        Self::with_step_share(degrees_of_freedom, delta, 0.5)
    }

    /// `step_share` is the step as a share of the narrowest feature of the integrand.
    fn with_step_share(degrees_of_freedom: f64, delta: f64, step_share: f64) -> Self {
        assert!(1.0 <= degrees_of_freedom && degrees_of_freedom.is_finite());
        assert!(0.0 <= delta && delta.is_finite());
        // Along x the density has the width 1/sqrt(2 nu), and Phi(delta - t e^x) passes from 1 to 0 within the width 1/delta.
        let narrowest = 1.0 / libm::sqrt(2.0 * degrees_of_freedom + delta * delta);
        let step = (step_share * narrowest).min(2.0 * step_share * STEP_MAX);
        // ln of density times u, up to a constant: 0 at x = 0, falling to both sides.
        let log_weight = |x: f64| degrees_of_freedom * (x - 0.5 * libm::expm1(2.0 * x));
        let mut nodes = vec![(1.0, 1.0)];
        for direction in [-1.0, 1.0] {
            for count in 1.. {
                let x = direction * step * f64::from(count);
                let log_weight = log_weight(x);
                if log_weight < LOG_WEIGHT_LEAST {
                    break;
                }
                nodes.push((libm::exp(x), libm::exp(log_weight)));
            }
        }
        // Small terms first, so that the sums keep their digits.
        nodes.sort_by(|a, b| a.1.total_cmp(&b.1));
        let total: f64 = nodes.iter().map(|node| node.1).sum();
        for node in &mut nodes {
            node.1 /= total;
        }
        Self { degrees_of_freedom, delta, nodes }
    }

    /// P(T > t), for t >= 0.
    pub(crate) fn above(&self, t: f64) -> f64 {
        self.nodes.iter().map(|&(u, weight)| weight * normal_above(t * u - self.delta)).sum()
    }

    /// Density at t, for t >= 0.
    fn density(&self, t: f64) -> f64 {
        self.nodes.iter().map(|&(u, weight)| weight * u * normal_density(t * u - self.delta)).sum()
    }

    /// The t that is exceeded with probability `tail`, for 0 < tail <= 0.5.
    ///
    /// Since delta >= 0 and tail <= 0.5, this t is not below 0.
    pub(crate) fn upper_quantile(&self, tail: f64) -> f64 {
        assert!(0.0 < tail && tail <= 0.5, "the tail is {tail}, outside 0 to 0.5");
        let mut low = 0.0;
        let mut high = self.delta + normal_upper_quantile(tail) + 1.0;
        while self.above(high) > tail {
            low = high;
            high *= 2.0;
        }
        // Newton's method on ln P(T > t), which is nearly straight in t or in ln t; halving whenever a step leaves the bracket.
        let mut t = if low > 0.0 { low } else { 0.5 * high };
        for _ in 0..200 {
            let above = self.above(t);
            if above > tail {
                low = t;
            } else {
                high = t;
            }
            let newton = t + above * libm::log(above / tail) / self.density(t);
            let next = if low <= newton && newton <= high { newton } else { 0.5 * (low + high) };
            let moved = (next - t).abs();
            t = next;
            // The thousandth lets a quantile of zero end as well.
            if moved <= 4.0 * f64::EPSILON * (t + 1.0e-3) {
                break;
            }
        }
        assert!(
            (self.above(t) / tail - 1.0).abs() < 1.0e-9,
            "no quantile found for {} degrees of freedom, delta {}, tail {tail}",
            self.degrees_of_freedom,
            self.delta
        );
        t
    }
}

/// The t for which Student's t lies from -t to t with the stated confidence.
///
/// | input                | unit | permitted        |
/// | -------------------- | ---- | ---------------- |
/// | `confidence`         | 1    | 0.5 to 0.999999  |
/// | `degrees_of_freedom` | 1    | 1 to 1,000,000   |
///
/// # Result    relative error below 2e-13, by comparison with 34-digit values from mpmath
/// # Refuses   what lies outside the table
/// # Source    definition; any table of Student's t
/// # Example
/// Nine degrees of freedom, 95 %: 2.262 in every printed table.
/// ```
/// let t = calc::statistics::student_t_two_sided(0.95, 9).unwrap();
/// assert!((t - 2.262).abs() < 0.0005);
/// ```
pub fn student_t_two_sided(confidence: f64, degrees_of_freedom: usize) -> Result<f64, StatisticsError> {
    check_range("confidence", confidence, SHARE_LEAST, SHARE_MAX)?;
    let degrees = degrees_of_freedom as f64;
    check_range("degrees of freedom", degrees, 1.0, COUNT_MAX as f64)?;
    Ok(student_t_upper_quantile(0.5 * (1.0 - confidence), degrees))
}

/// The value of Student's t that is exceeded with probability `tail`, for 0 < tail <= 0.5 and at least one degree of freedom.
pub(crate) fn student_t_upper_quantile(tail: f64, degrees_of_freedom: f64) -> f64 {
    NoncentralT::new(degrees_of_freedom, 0.0).upper_quantile(tail)
}

/// Probability that Student's t lies further from 0 than `t`, on either side.
pub(crate) fn student_t_two_sided_probability(t: f64, degrees_of_freedom: f64) -> f64 {
    2.0 * NoncentralT::new(degrees_of_freedom, 0.0).above(t.abs())
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Cauchy distribution (one degree of freedom): P(T > t) = 1/2 - atan(t)/pi = atan(1/t)/pi. Two degrees: closed form as well.
    #[test]
    fn closed_forms() {
        for t in [0.01, 0.3, 1.0, 3.0, 31.82, 3183.0] {
            let cauchy = libm::atan(1.0 / t) / std::f64::consts::PI;
            let got = NoncentralT::new(1.0, 0.0).above(t);
            assert!((got / cauchy - 1.0).abs() < 1e-13, "1: {t}: {got} {cauchy}");
            // 1/2 (1 - t / sqrt(2 + t^2)), written without cancellation.
            let root = libm::sqrt(2.0 + t * t);
            let two = 1.0 / (root * (root + t));
            let got = NoncentralT::new(2.0, 0.0).above(t);
            assert!((got / two - 1.0).abs() < 1e-13, "2: {t}: {got} {two}");
        }
    }

    /// At t = 0 the upper tail is Phi(delta), whatever the degrees of freedom.
    #[test]
    fn at_zero() {
        for nu in [1.0, 4.0, 100.0, 10_000.0] {
            for delta in [0.0, 0.5, 3.0, 400.0] {
                let got = NoncentralT::new(nu, delta).above(0.0);
                let want = normal_above(-delta);
                assert!((got - want).abs() < 1e-15 * 4.0, "{nu} {delta}: {got} {want}");
            }
        }
    }

    #[test]
    fn half_the_step_changes_nothing_but_rounding() {
        for nu in [1.0, 2.0, 5.0, 30.0, 1_000.0, 1_000_000.0] {
            for z in [0.0, 0.1, 1.6, 4.75] {
                let delta = z * libm::sqrt(nu + 1.0);
                let coarse = NoncentralT::new(nu, delta);
                let fine = NoncentralT::with_step_share(nu, delta, 0.25);
                for tail in [0.5, 0.05, 1e-6] {
                    let one = coarse.upper_quantile(tail);
                    let other = fine.upper_quantile(tail);
                    assert!((one - other).abs() <= 1e-11 * (1.0 + one), "{nu} {z} {tail}: {one} {other}");
                }
            }
        }
    }
}
