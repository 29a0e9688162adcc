//! Trends that a single wild reading cannot tilt: the Theil-Sen line and the Mann-Kendall test.
//!
//! Both take points at any spacing. Points at the same x say nothing about a slope and are left out pair by pair.
//! Sources: H. Theil, Proc. Kon. Ned. Akad. v. Wetensch. A 53 (1950) 386-392; P. K. Sen, J. Amer. Statist. Assoc. 63 (1968) 1379-1389;
//! H. B. Mann, Econometrica 13 (1945) 245-259; M. G. Kendall, Rank Correlation Methods, 4th ed., Griffin 1975, chapters 3 to 5;
//! R. O. Gilbert, Statistical Methods for Environmental Pollution Monitoring, Wiley 1987, chapter 16.

use super::error::{StatisticsError, check_points, check_range, is_usable};
use super::normal::{normal_above, normal_upper_quantile};
use super::regression::Interval;
use super::tolerance::{SHARE_LEAST, SHARE_MAX};

/// Greatest number of points; 2,000 points make 1,999,000 pairs.
pub const TREND_COUNT_MAX: usize = 2_000;

/// Greatest number of points for which the Mann-Kendall probability is counted out exactly (20! just fits into 64 bits).
pub const EXACT_COUNT_MAX: usize = 20;

/// The Theil-Sen line.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TheilSen {
    /// Median of the slopes of all pairs, y per x.
    pub slope: f64,
    /// Median of y - slope x over all points.
    pub intercept: f64,
    /// Interval for the slope at the confidence asked for; none where the points are too few for it at that confidence.
    pub slope_interval: Option<Interval>,
}

/// Fits the Theil-Sen line and the interval for its slope.
///
/// slope = median over i < j, x_i != x_j, of (y_j - y_i) / (x_j - x_i)
///
/// The interval takes, of the N slopes in order, number (N - z sqrt(Var S)) / 2 from below and the same number from above (Sen 1968;
/// Gilbert 1987, section 16.5), with the ranks rounded to the wider side. Var S is Kendall's, corrected for ties.
///
/// | input        | unit | permitted                        |
/// | ------------ | ---- | -------------------------------- |
/// | `x`, `y`     | own  | finite, 2 to 2,000 points, not all at one x |
/// | `confidence` | 1    | 0.5 to 0.999999                  |
///
/// # Refuses   what lies outside the table
/// # Example
/// Textbook data with slope -0.05625 by ten pair slopes.
/// ```
/// let x = [1.0, 2.0, 3.0, 4.0, 5.0];
/// let y = [1.26, 1.27, 1.12, 1.16, 1.03];
/// let line = calc::statistics::theil_sen(&x, &y, 0.95).unwrap();
/// assert!((line.slope + 0.05625).abs() < 1e-12);
/// ```
pub fn theil_sen(x: &[f64], y: &[f64], confidence: f64) -> Result<TheilSen, StatisticsError> {
    check_trend_points(x, y)?;
    check_range("confidence", confidence, SHARE_LEAST, SHARE_MAX)?;
    let mut slopes = pair_slopes(x, y);
    // A slope beyond all measure comes from places that differ by no more than rounding.
    if slopes.is_empty() || slopes.iter().any(|&slope| !is_usable(slope)) {
        return Err(StatisticsError::SamePlace { what: "x", at: x[0] });
    }
    let slope = median(&mut slopes);
    let mut rest: Vec<f64> = x.iter().zip(y).map(|(x, y)| y - slope * x).collect();
    let z = normal_upper_quantile(0.5 * (1.0 - confidence));
    let spread = z * libm::sqrt(kendall_variance(x, y));
    let outside = libm::floor(0.5 * (slopes.len() as f64 - spread));
    // The slope of rank `outside` counted from 1; below rank 1 the data cannot bound the slope at this confidence.
    let slope_interval = (1.0 <= outside).then(|| {
        let rank = outside as usize - 1;
        Interval {
            low: of_rank(&mut slopes, rank),
            high: {
                let last = slopes.len() - 1;
                of_rank(&mut slopes, last - rank)
            },
        }
    });
    Ok(TheilSen { slope, intercept: median(&mut rest), slope_interval })
}

/// Probabilities of a Mann-Kendall sum under the assumption that there is no trend.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TrendProbability {
    /// Of a sum S at least as great as the one found (evidence for rising when small).
    pub rising: f64,
    /// Of a sum S at least as far from zero as the one found, on either side.
    pub two_sided: f64,
}

/// Result of the Mann-Kendall test.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MannKendall {
    /// S: number of pairs that rise with x minus number of pairs that fall.
    pub sum: i64,
    /// S divided by the number of all pairs, n (n - 1) / 2.
    pub tau: f64,
    /// Variance of S without trend, corrected for ties.
    pub variance: f64,
    /// (S - sign S) / sqrt(variance): standard normal score with continuity correction.
    pub z: f64,
    /// By the normal approximation with continuity correction.
    pub normal: TrendProbability,
    /// Counted out exactly: for at most [`EXACT_COUNT_MAX`] points and no ties in x or y, otherwise none.
    pub exact: Option<TrendProbability>,
}

impl MannKendall {
    /// The exact probability where there is one, otherwise the normal approximation.
    pub fn probability(&self) -> TrendProbability {
        self.exact.unwrap_or(self.normal)
    }
}

/// Tests whether y rises or falls with x, whatever the form of the trend and the distribution of the readings.
///
/// S = sum over i < j of sign(x_j - x_i) sign(y_j - y_i)
///
/// Var S = [ n(n-1)(2n+5) - sum t(t-1)(2t+5) - sum u(u-1)(2u+5) ] / 18
///   + sum t(t-1)(t-2) sum u(u-1)(u-2) / [ 9 n(n-1)(n-2) ] + sum t(t-1) sum u(u-1) / [ 2 n(n-1) ]
///
/// with t and u the sizes of the groups of equal y and of equal x (Kendall 1975, section 4; without equal x it is the usual
/// Mann-Kendall variance).
///
/// # Refuses   lists of different length, fewer than 2 or more than 2,000 points, values that are not finite
/// # Example
/// Textbook data (10, 15, 14, 20): S = 4, exact probability of so much rising 0.167.
/// ```
/// let test = calc::statistics::mann_kendall(&[1.0, 2.0, 3.0, 4.0], &[10.0, 15.0, 14.0, 20.0]).unwrap();
/// assert_eq!(test.sum, 4);
/// assert!((test.exact.unwrap().rising - 0.167).abs() < 0.0005);
/// ```
pub fn mann_kendall(x: &[f64], y: &[f64]) -> Result<MannKendall, StatisticsError> {
    check_trend_points(x, y)?;
    let count = x.len();
    let mut sum = 0;
    let mut tied = false;
    for later in 1..count {
        for earlier in 0..later {
            let sign = sign(x[later] - x[earlier]) * sign(y[later] - y[earlier]);
            tied |= sign == 0;
            sum += sign;
        }
    }
    let variance = kendall_variance(x, y);
    let z = if sum == 0 || variance <= 0.0 { 0.0 } else { (sum - sum.signum()) as f64 / libm::sqrt(variance) };
    Ok(MannKendall {
        sum,
        tau: sum as f64 / (count * (count - 1) / 2) as f64,
        variance,
        z,
        normal: TrendProbability { rising: normal_above(z), two_sided: 2.0 * normal_above(z.abs()) },
        exact: (!tied && count <= EXACT_COUNT_MAX).then(|| exact_probability(count, sum)),
    })
}

fn check_trend_points(x: &[f64], y: &[f64]) -> Result<(), StatisticsError> {
    check_points("x", x, "y", y, 2)?;
    check_range("number of points", x.len() as f64, 2.0, TREND_COUNT_MAX as f64)
}

fn pair_slopes(x: &[f64], y: &[f64]) -> Vec<f64> {
    let mut slopes = Vec::with_capacity(x.len() * (x.len() - 1) / 2);
    for later in 1..x.len() {
        for earlier in 0..later {
            let run = x[later] - x[earlier];
            if run != 0.0 {
                slopes.push((y[later] - y[earlier]) / run);
            }
        }
    }
    slopes
}

/// The value that would stand at place `rank`, counted from 0, if the list were in order.
fn of_rank(values: &mut [f64], rank: usize) -> f64 {
    *values.select_nth_unstable_by(rank, f64::total_cmp).1
}

/// Median; the mean of the middle two for an even number.
fn median(values: &mut [f64]) -> f64 {
    let half = values.len() / 2;
    let is_even = values.len().is_multiple_of(2);
    let (below, &mut upper, _) = values.select_nth_unstable_by(half, f64::total_cmp);
    if is_even {
        let lower = below.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        // Half of each, because the sum of two great numbers could overflow.
        0.5 * lower + 0.5 * upper
    } else {
        upper
    }
}

fn sign(difference: f64) -> i64 {
    i64::from(difference > 0.0) - i64::from(difference < 0.0)
}

/// Variance of Kendall's S without trend, for ties in x and y.
fn kendall_variance(x: &[f64], y: &[f64]) -> f64 {
    let n = x.len() as f64;
    let in_x = TieSums::of(x);
    let in_y = TieSums::of(y);
    let mut variance = (n * (n - 1.0) * (2.0 * n + 5.0) - in_x.fives - in_y.fives) / 18.0;
    if n > 2.0 {
        variance += in_x.triples * in_y.triples / (9.0 * n * (n - 1.0) * (n - 2.0));
    }
    variance + in_x.pairs * in_y.pairs / (2.0 * n * (n - 1.0))
}

/// Sums over the groups of t equal values.
struct TieSums {
    /// sum t (t - 1)
    pairs: f64,
    /// sum t (t - 1) (t - 2)
    triples: f64,
    /// sum t (t - 1) (2 t + 5)
    fives: f64,
}

impl TieSums {
    fn of(values: &[f64]) -> Self {
        let mut ordered = values.to_vec();
        // Adding zero turns -0 into +0, so that the two count as equal.
        ordered.iter_mut().for_each(|value| *value += 0.0);
        ordered.sort_by(f64::total_cmp);
        let mut sums = Self { pairs: 0.0, triples: 0.0, fives: 0.0 };
        for group in ordered.chunk_by(|a, b| a.total_cmp(b).is_eq()) {
            let t = group.len() as f64;
            sums.pairs += t * (t - 1.0);
            sums.triples += t * (t - 1.0) * (t - 2.0);
            sums.fives += t * (t - 1.0) * (2.0 * t + 5.0);
        }
        sums
    }
}

/// Counts the orders of n different values by their number of falling pairs, and from it the probabilities of S.
///
/// An order with f falling pairs has S = n (n - 1) / 2 - 2 f. Putting the value number m into an order of m - 1 values adds 0 to
/// m - 1 falling pairs, each in one way, which gives the counts step by step (Kendall 1975, section 5).
fn exact_probability(count: usize, sum: i64) -> TrendProbability {
    let mut orders: Vec<u64> = vec![1];
    for placed in 2..=count {
        let mut next = vec![0; orders.len() + placed - 1];
        for (falling, &number) in orders.iter().enumerate() {
            for added in 0..placed {
                next[falling + added] += number;
            }
        }
        orders = next;
    }
    let pairs = (count * (count - 1) / 2) as i64;
    let share = |counted: &dyn Fn(i64) -> bool| {
        let numbers = orders.iter().enumerate();
        let favourable: u64 =
            numbers.filter(|&(falling, _)| counted(pairs - 2 * falling as i64)).map(|(_, &number)| number).sum();
        favourable as f64 / orders.iter().sum::<u64>() as f64
    };
    TrendProbability { rising: share(&|s| s >= sum), two_sided: share(&|s| s.abs() >= sum.abs()) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn medians() {
        let check = |values: &[f64], want: f64| assert_eq!(median(&mut values.to_vec()), want);
        check(&[4.0], 4.0);
        check(&[4.0, 1.0], 2.5);
        check(&[9.0, 1.0, 4.0], 4.0);
        check(&[9.0, 1.0, 4.0, 5.0], 4.5);
        check(&[2.0, 2.0, 2.0, 2.0, 7.0, -3.0], 2.0);
    }

    #[test]
    fn refusals() {
        assert!(theil_sen(&[1.0], &[1.0], 0.95).is_err());
        assert!(theil_sen(&[1.0, 1.0], &[1.0, 2.0], 0.95).is_err());
        assert!(theil_sen(&[1.0, 2.0], &[1.0, f64::NAN], 0.95).is_err());
        assert!(theil_sen(&[1.0, 2.0], &[1.0, 2.0], 1.0).is_err());
        assert!(mann_kendall(&[], &[]).is_err());
        assert!(mann_kendall(&[1.0, 2.0], &[1.0]).is_err());
        let many = vec![0.0; TREND_COUNT_MAX + 1];
        assert!(mann_kendall(&many, &many).is_err());
    }
}
