//! How sure the fitted figures are: covariance, degrees of freedom, lack of fit.
//!
//! The weights n/s^2 come from the scatter of a few stops, so they are uncertain themselves. Three published corrections account for it:
//! the covariance is widened (R. N. Kackar, D. A. Harville, J. Amer. Statist. Assoc. 79 (1984) 853-862; for a weighted mean it is
//! P. Meier's formula, Biometrics 9 (1953) 59-73), the degrees of freedom follow from the scatters that matter (F. E. Satterthwaite,
//! Biometrics Bulletin 2 (1946) 110-114), and the limit of the lack-of-fit test is raised (G. S. James, Biometrika 38 (1951) 324-329).

use super::least_squares::{Square, Unknown, curvature, inverted};
use crate::statistics::student_t_upper_quantile;

/// Upper 1 % point of the standard normal distribution.
const NORMAL_99: f64 = 2.326_347_874_040_841;

/// The t that lies outside (-t, t) with probability 5 %; the degrees of freedom need not be whole.
fn two_sided_95(degrees_of_freedom: f64) -> f64 {
    student_t_upper_quantile(0.025, degrees_of_freedom)
}

/// A fitted figure with its 95 % interval.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Estimate {
    /// Best figure.
    pub value: f64,
    /// Lower end of the 95 % interval.
    pub low: f64,
    /// Upper end of the 95 % interval.
    pub high: f64,
}

impl Estimate {
    pub(super) fn around(value: f64, half_width: f64) -> Self {
        Self { value, low: value - half_width, high: value + half_width }
    }
}

/// What the data say about the uncertainty of a fit.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Inference {
    unknowns: usize,
    covariance: Square,
    /// Inverse of J^T W J, before any correction.
    plain: Square,
    jacobian: Vec<Unknown>,
    /// n/s^2.
    weights: Vec<f64>,
    /// n - 1.
    degrees: Vec<f64>,
    pub(super) lack_of_fit: bool,
}

impl Inference {
    /// None if the Jacobian is singular to working accuracy.
    pub(super) fn new(
        unknowns: usize,
        jacobian: Vec<Unknown>,
        weights: Vec<f64>,
        degrees: Vec<f64>,
        chi_squared: f64,
    ) -> Option<Self> {
        let plain = inverted(unknowns, &curvature(unknowns, &jacobian, &weights))?;
        let leverage: Vec<f64> =
            jacobian.iter().zip(&weights).map(|(row, weight)| weight * quadratic(unknowns, &plain, row)).collect();
        // Kackar and Harville: V + 2 V [sum (2/nu) w (1 - h) x x^T] V.
        let widening: Vec<f64> =
            (0..weights.len()).map(|k| 2.0 / degrees[k] * weights[k] * (1.0 - leverage[k]).max(0.0)).collect();
        let middle = curvature(unknowns, &jacobian, &widening);
        let mut covariance = plain;
        for (i, row) in covariance.iter_mut().enumerate().take(unknowns) {
            for (j, element) in row.iter_mut().enumerate().take(unknowns) {
                for a in 0..unknowns {
                    for b in 0..unknowns {
                        *element += 2.0 * plain[i][a] * middle[a][b] * plain[b][j];
                    }
                }
            }
        }
        let spare = weights.len() - unknowns;
        let lack_of_fit = 0 < spare && {
            let q = spare as f64;
            // Wilson and Hilferty's approximation to the upper 1 % point of chi squared.
            let root = 1.0 - 2.0 / (9.0 * q) + NORMAL_99 * (2.0 / (9.0 * q)).sqrt();
            let point = q * root * root * root;
            let uncertain: f64 = leverage.iter().zip(&degrees).map(|(h, nu)| (1.0 - h) * (1.0 - h) / nu).sum();
            point * (1.0 + (3.0 * point + q + 2.0) / (2.0 * q * (q + 2.0)) * uncertain) < chi_squared
        };
        if lack_of_fit {
            // The scatter of the stops no longer explains the residuals: they themselves are the better yardstick.
            let factor = chi_squared / spare as f64;
            for element in covariance.iter_mut().flatten() {
                *element *= factor;
            }
        }
        Some(Self { unknowns, covariance, plain, jacobian, weights, degrees, lack_of_fit })
    }

    /// Variance of the combination g . unknowns, and its degrees of freedom.
    pub(super) fn variance(&self, gradient: &Unknown) -> (f64, f64) {
        let variance = quadratic(self.unknowns, &self.covariance, gradient);
        if self.lack_of_fit {
            return (variance, (self.weights.len() - self.unknowns).max(1) as f64);
        }
        // Satterthwaite: each condition's share of the variance, with the degrees of freedom of its scatter.
        let (mut total, mut squares) = (0.0, 0.0);
        for ((row, weight), degrees) in self.jacobian.iter().zip(&self.weights).zip(&self.degrees) {
            let pull = bilinear(self.unknowns, gradient, &self.plain, row);
            let share = pull * pull * weight;
            total += share;
            squares += share * share / degrees;
        }
        let degrees = if squares > 0.0 { total * total / squares } else { self.degrees.iter().sum() };
        (variance, degrees.max(1.0))
    }

    /// Half width of the 95 % interval of one unknown.
    pub(super) fn half_width(&self, unknown: usize) -> f64 {
        let mut gradient = [0.0; 3];
        gradient[unknown] = 1.0;
        let (variance, degrees) = self.variance(&gradient);
        two_sided_95(degrees) * variance.sqrt()
    }

    /// Half width of the 95 % prediction interval: the uncertainty of the fit and the scatter of what is predicted.
    pub(super) fn prediction_half_width(&self, gradient: &Unknown, (scatter, scatter_degrees): (f64, f64)) -> f64 {
        let (fit, fit_degrees) = self.variance(gradient);
        let total = fit + scatter;
        let degrees = total * total / (fit * fit / fit_degrees + scatter * scatter / scatter_degrees);
        two_sided_95(degrees.max(1.0)) * total.sqrt()
    }

    /// Correlation of two unknowns.
    pub(super) fn correlation(&self, one: usize, other: usize) -> f64 {
        self.plain[one][other] / (self.plain[one][one] * self.plain[other][other]).sqrt()
    }
}

/// g^T M g.
fn quadratic(n: usize, matrix: &Square, g: &Unknown) -> f64 {
    bilinear(n, g, matrix, g)
}

/// a^T M b.
fn bilinear(n: usize, a: &Unknown, matrix: &Square, b: &Unknown) -> f64 {
    let mut sum = 0.0;
    for i in 0..n {
        for j in 0..n {
            sum += a[i] * matrix[i][j] * b[j];
        }
    }
    sum
}

#[cfg(test)]
mod tests {
    use super::two_sided_95;

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
