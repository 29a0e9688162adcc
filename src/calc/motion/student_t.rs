//! The two-sided 95 % point of Student's t, also for fractional degrees of freedom.

use core::f64::consts::PI;

/// The t that lies outside (-t, t) with probability 5 %, for at least one degree of freedom.
///
/// P(|T| > t) = I_x(nu/2, 1/2) with x = nu/(nu + t^2), the regularised incomplete beta function; solved by halving in t.
///
/// # Source
/// M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions, 26.5.27 and 26.5.8.
pub(super) fn two_sided_95(degrees_of_freedom: f64) -> f64 {
    // One degree of freedom gives 12.706, the greatest value; infinitely many give 1.95996.
    let (mut low, mut high) = (1.9, 12.8);
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if 0.05 < outside(middle, degrees_of_freedom) {
            low = middle;
        } else {
            high = middle;
        }
    }
    0.5 * (low + high)
}

/// Probability that Student's t lies further from 0 than `t`.
fn outside(t: f64, nu: f64) -> f64 {
    let x = nu / (nu + t * t);
    let (a, b) = (0.5 * nu, 0.5);
    let log_beta = libm::lgamma(a) + 0.5 * libm::log(PI) - libm::lgamma(a + b);
    // 1 - x is t^2/(nu + t^2), written without subtraction.
    let front = libm::exp(a * libm::log(x) + b * libm::log(t * t / (nu + t * t)) - log_beta);
    if x < (a + 1.0) / (a + b + 2.0) {
        front / a * beta_fraction(a, b, x)
    } else {
        1.0 - front / b * beta_fraction(b, a, t * t / (nu + t * t))
    }
}

/// The continued fraction of the incomplete beta function, by the method of Lentz.
fn beta_fraction(a: f64, b: f64, x: f64) -> f64 {
    let tiny = 1e-300;
    let away_from_zero = |v: f64| if v.abs() < tiny { tiny } else { v };
    let mut c = 1.0;
    let mut d = 1.0 / away_from_zero(1.0 - (a + b) * x / (a + 1.0));
    let mut value = d;
    for m in 1..10_000 {
        let m = f64::from(m);
        let even = m * (b - m) * x / ((a + 2.0 * m - 1.0) * (a + 2.0 * m));
        d = 1.0 / away_from_zero(1.0 + even * d);
        c = away_from_zero(1.0 + even / c);
        value *= d * c;
        let odd = -(a + m) * (a + b + m) * x / ((a + 2.0 * m) * (a + 2.0 * m + 1.0));
        d = 1.0 / away_from_zero(1.0 + odd * d);
        c = away_from_zero(1.0 + odd / c);
        let factor = d * c;
        value *= factor;
        if (factor - 1.0).abs() < 1e-15 {
            break;
        }
    }
    value
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Printed table values (three decimals) and the closed forms for one and two degrees of freedom.
    #[test]
    fn table_of_student_t() {
        for (nu, t) in [
            (3.0, 3.182),
            (4.0, 2.776),
            (5.0, 2.571),
            (9.0, 2.262),
            (10.0, 2.228),
            (20.0, 2.086),
            (30.0, 2.042),
            (60.0, 2.000),
            (120.0, 1.980),
            (1e6, 1.960),
        ] {
            assert!((two_sided_95(nu) - t).abs() <= 0.000_51, "{nu}");
        }
        let one = libm::tan(0.475 * PI);
        assert!((two_sided_95(1.0) - one).abs() < 1e-9);
        let two = 0.95 * libm::sqrt(2.0 / (1.0 - 0.95 * 0.95));
        assert!((two_sided_95(2.0) - two).abs() < 1e-12);
    }

    /// Fractional degrees of freedom, by SciPy 1.17.1, `scipy.stats.t.ppf(0.975, nu)`.
    #[test]
    fn fractional_degrees_of_freedom() {
        for (nu, t) in [
            (1.3, 7.500529325562029),
            (2.5, 3.5746548420036817),
            (4.7, 2.62072607535317),
            (11.25, 2.195032427275849),
            (87.6, 1.9874163472665294),
            (5000.5, 1.9604385042432446),
        ] {
            let found = two_sided_95(nu);
            assert!((found / t - 1.0).abs() < 1e-9, "{nu}: {found}");
        }
    }
}
