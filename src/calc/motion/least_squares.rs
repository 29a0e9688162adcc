//! Weighted nonlinear least squares by the method of Levenberg and Marquardt, for two or three unknowns.
//!
//! Source: D. W. Marquardt, "An algorithm for least-squares estimation of nonlinear parameters", J. SIAM 11 (1963) 431-441. The damping
//! scales with the diagonal, so the units of the unknowns do not matter.

use super::refusal::MotionRefusal;

/// Trials, accepted or not, before the search is given up. A usual fit takes five to ten.
const TRIALS_MAX: usize = 200;

/// A row of the Jacobian or a vector of unknowns; fits have at most three.
pub(super) type Unknown = [f64; 3];

/// A symmetric matrix of the unknowns.
pub(super) type Square = [[f64; 3]; 3];

/// What is fitted: the model at every condition, and its derivatives.
pub(super) trait Model {
    /// Number of unknowns in use: the first ones of an [`Unknown`].
    fn unknowns(&self) -> usize;
    /// Model at every condition; refused where these unknowns make no brake or no stop.
    fn values(&self, at: &Unknown) -> Result<Vec<f64>, MotionRefusal>;
    /// Derivatives at every condition.
    fn jacobian(&self, at: &Unknown) -> Result<Vec<Unknown>, MotionRefusal>;
}

/// The point found.
pub(super) struct Minimum {
    pub(super) at: Unknown,
    pub(super) values: Vec<f64>,
    pub(super) jacobian: Vec<Unknown>,
    /// Weighted sum of squared residuals.
    pub(super) chi_squared: f64,
}

/// Finds the unknowns with the least weighted sum of squared residuals.
///
/// # Refuses
/// What the model refuses at the start; [`MotionRefusal::NoFit`] if the search does not settle.
pub(super) fn minimise(
    model: &impl Model,
    measured: &[f64],
    weights: &[f64],
    start: Unknown,
) -> Result<Minimum, MotionRefusal> {
    let n = model.unknowns();
    let mut at = start;
    let mut values = model.values(&at)?;
    let mut chi_squared = chi_squared_of(&values, measured, weights);
    let mut damping = 1e-3;
    let mut jacobian = model.jacobian(&at)?;
    for _ in 0..TRIALS_MAX {
        let (curvature, slope) = normal_equations(n, &jacobian, &values, measured, weights);
        let mut damped = curvature;
        for (i, row) in damped.iter_mut().enumerate().take(n) {
            row[i] *= 1.0 + damping;
        }
        let Some(inverse) = inverted(n, &damped) else {
            damping = (10.0 * damping).max(1e-6);
            continue;
        };
        let mut next = at;
        let mut gain = 0.0;
        let mut moved: f64 = 0.0;
        for i in 0..n {
            let step: f64 = (0..n).map(|j| inverse[i][j] * slope[j]).sum();
            next[i] += step;
            gain += step * slope[i];
            moved = moved.max(step.abs() / (at[i].abs() + 1e-6));
        }
        // The gain foreseen is below what the values can resolve, or the step is: the minimum is reached.
        let settled = gain <= 1e-13 * (1.0 + chi_squared) || moved <= 1e-11;
        let trial = model.values(&next).ok().map(|values| {
            let chi_squared = chi_squared_of(&values, measured, weights);
            (values, chi_squared)
        });
        match trial {
            Some((next_values, next_chi_squared)) if next_chi_squared <= chi_squared || (settled && damping < 1.0) => {
                at = next;
                values = next_values;
                chi_squared = next_chi_squared;
                jacobian = model.jacobian(&at)?;
                damping = (0.1 * damping).max(1e-12);
                if settled && damping < 1.0 {
                    return Ok(Minimum { at, values, jacobian, chi_squared });
                }
            }
            _ if 1e12 < damping => break,
            _ => damping *= 10.0,
        }
    }
    Err(MotionRefusal::NoFit {
        reason: "the search for the best figures does not settle",
        remedy: "Check the rise time, the drive and the measured times, or time stops at speeds further apart.",
    })
}

fn chi_squared_of(values: &[f64], measured: &[f64], weights: &[f64]) -> f64 {
    values
        .iter()
        .zip(measured)
        .zip(weights)
        .map(|((value, measured), weight)| weight * (measured - value) * (measured - value))
        .sum()
}

/// J^T W J and J^T W (measured - model).
fn normal_equations(
    n: usize,
    jacobian: &[Unknown],
    values: &[f64],
    measured: &[f64],
    weights: &[f64],
) -> (Square, Unknown) {
    let mut slope = [0.0; 3];
    for (k, row) in jacobian.iter().enumerate() {
        for i in 0..n {
            slope[i] += weights[k] * row[i] * (measured[k] - values[k]);
        }
    }
    (curvature(n, jacobian, weights), slope)
}

/// J^T W J.
pub(super) fn curvature(n: usize, jacobian: &[Unknown], weights: &[f64]) -> Square {
    let mut sum = [[0.0; 3]; 3];
    for (row, weight) in jacobian.iter().zip(weights) {
        for i in 0..n {
            for j in 0..n {
                sum[i][j] += weight * row[i] * row[j];
            }
        }
    }
    sum
}

/// Inverse of the leading n x n part, scaled to unit diagonal first; none if it is singular to working accuracy.
pub(super) fn inverted(n: usize, matrix: &Square) -> Option<Square> {
    let mut scale = [1.0; 3];
    for i in 0..n {
        if matrix[i][i] <= 0.0 || !matrix[i][i].is_finite() {
            return None;
        }
        scale[i] = 1.0 / matrix[i][i].sqrt();
    }
    // Gauss-Jordan elimination; the pivots of a positive definite matrix need no exchange.
    let mut left = [[0.0; 3]; 3];
    let mut right = [[0.0; 3]; 3];
    for i in 0..n {
        right[i][i] = 1.0;
        for j in 0..n {
            left[i][j] = matrix[i][j] * scale[i] * scale[j];
        }
    }
    for pivot in 0..n {
        let value = left[pivot][pivot];
        if value.is_nan() || value <= 1e-13 {
            return None;
        }
        for j in 0..n {
            left[pivot][j] /= value;
            right[pivot][j] /= value;
        }
        for i in (0..n).filter(|i| *i != pivot) {
            let factor = left[i][pivot];
            for j in 0..n {
                left[i][j] -= factor * left[pivot][j];
                right[i][j] -= factor * right[pivot][j];
            }
        }
    }
    for i in 0..n {
        for j in 0..n {
            right[i][j] *= scale[i] * scale[j];
        }
    }
    Some(right)
}
