//! Control charts that notice a lasting small shift: the two-sided tabular CUSUM and the EWMA.
//!
//! Sources: D. C. Montgomery, Introduction to Statistical Quality Control, 7th ed., Wiley 2013, chapter 9 (edition and sections from
//! memory); NIST/SEMATECH e-Handbook, 6.3.2.3 (CUSUM) and 6.3.2.4 (EWMA).

use super::error::{StatisticsError, check_one, check_positive, check_range, check_usable};

/// Allowance k in standard deviations: half of a shift of one standard deviation, the shift to be found.
/// Source: NIST/SEMATECH e-Handbook 6.3.2.3; Montgomery, section 9.1.3.
pub const CUSUM_ALLOWANCE_IN_SIGMA: f64 = 0.5;

/// Decision interval h in standard deviations for a quicker alarm (about one false alarm in 168 readings).
/// Source: NIST/SEMATECH e-Handbook 6.3.2.3; Montgomery, section 9.1.3.
pub const CUSUM_DECISION_IN_SIGMA_QUICK: f64 = 4.0;

/// Decision interval h in standard deviations for fewer false alarms (about one in 465 readings).
/// Source: NIST/SEMATECH e-Handbook 6.3.2.3; Montgomery, section 9.1.3.
pub const CUSUM_DECISION_IN_SIGMA_CALM: f64 = 5.0;

/// Lower end of the usual range of the EWMA weight lambda. Source: NIST/SEMATECH e-Handbook 6.3.2.4.
pub const EWMA_LAMBDA_LOW: f64 = 0.2;

/// Upper end of the usual range of the EWMA weight lambda. Source: NIST/SEMATECH e-Handbook 6.3.2.4.
pub const EWMA_LAMBDA_HIGH: f64 = 0.3;

/// Width of the EWMA limits in standard deviations that goes with a small lambda (0.1 or less). Source: Montgomery, section 9.2.2.
pub const EWMA_WIDTH_LOW: f64 = 2.7;

/// Width of the EWMA limits in standard deviations that goes with a lambda of 0.2 to 0.3. Source: NIST/SEMATECH e-Handbook 6.3.2.4.
pub const EWMA_WIDTH_HIGH: f64 = 3.0;

/// Settings of a CUSUM, all in the unit of the readings.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CusumSettings {
    /// Level that the readings should keep.
    pub target: f64,
    /// Allowance k, half of the shift to be found; more than 0.
    pub allowance: f64,
    /// Decision interval h; a sum above it is a signal; more than 0.
    pub decision: f64,
}

impl CusumSettings {
    /// Settings for a known standard deviation: k = 0.5 sigma and h = `decision_in_sigma` times sigma.
    pub fn for_sigma(target: f64, sigma: f64, decision_in_sigma: f64) -> Self {
        Self { target, allowance: CUSUM_ALLOWANCE_IN_SIGMA * sigma, decision: decision_in_sigma * sigma }
    }
}

/// First signal of one of the two sums.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CusumSignal {
    /// Place of the reading at which the sum first exceeds h, counted from 0.
    pub at: usize,
    /// Place of the first reading after the sum was last zero: estimate of where the shift began, counted from 0.
    pub began_at: usize,
    /// Estimate of the level after the shift: target + k + sum / number of readings since, or target - k - sum / number.
    pub level: f64,
}

/// Both sums for every reading, and their first signals.
#[derive(Clone, Debug, PartialEq)]
pub struct Cusum {
    /// Upper sums, which grow when the readings lie above target + k.
    pub upper: Vec<f64>,
    /// Lower sums, which grow when the readings lie below target - k; not negative.
    pub lower: Vec<f64>,
    /// First signal of the upper sum.
    pub rise: Option<CusumSignal>,
    /// First signal of the lower sum.
    pub fall: Option<CusumSignal>,
}

/// Two-sided tabular CUSUM.
///
/// C+(i) = max(0, x(i) - (target + k) + C+(i-1));  C-(i) = max(0, (target - k) - x(i) + C-(i-1));  both start from 0
///
/// # Refuses   readings or a target that are not finite; an allowance or decision interval that is not greater than 0
/// # Source    Montgomery, section 9.1.2; NIST/SEMATECH e-Handbook 6.3.2.3
/// # Example
/// NIST 6.3.2.3 gives twenty means, target 325, k 0.3175, h 4.1959: first signal at the 14th. See the outside checks.
pub fn cusum(readings: &[f64], settings: CusumSettings) -> Result<Cusum, StatisticsError> {
    check_usable("reading", readings)?;
    check_one("target", settings.target)?;
    check_positive("allowance", settings.allowance)?;
    check_positive("decision interval", settings.decision)?;
    let excess = |reading: &f64| (reading - settings.target) - settings.allowance;
    let shortfall = |reading: &f64| (settings.target - reading) - settings.allowance;
    let (upper, upper_began) = one_sided_sums(readings.iter().map(excess));
    let (lower, lower_began) = one_sided_sums(readings.iter().map(shortfall));
    let signal = |sums: &[f64], began: &[usize], sense: f64| {
        let at = sums.iter().position(|&sum| sum > settings.decision)?;
        let began_at = began[at];
        let since = (at - began_at + 1) as f64;
        Some(CusumSignal { at, began_at, level: settings.target + sense * (settings.allowance + sums[at] / since) })
    };
    Ok(Cusum { rise: signal(&upper, &upper_began, 1.0), fall: signal(&lower, &lower_began, -1.0), upper, lower })
}

/// Sums that never fall below zero, and for each the place of the first term since the sum was last zero.
fn one_sided_sums(terms: impl Iterator<Item = f64>) -> (Vec<f64>, Vec<usize>) {
    let mut sums = Vec::new();
    let mut begins = Vec::new();
    let (mut sum, mut began) = (0.0, 0);
    for (index, term) in terms.enumerate() {
        if sum <= 0.0 {
            began = index;
        }
        sum = f64::max(0.0, sum + term);
        sums.push(sum);
        begins.push(began);
    }
    (sums, begins)
}

/// Settings of an EWMA.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EwmaSettings {
    /// Level that the readings should keep, and start of the average; unit of the readings.
    pub target: f64,
    /// Standard deviation of a single reading; unit of the readings; more than 0.
    pub sigma: f64,
    /// Weight lambda of the newest reading; more than 0, at most 1.
    pub lambda: f64,
    /// Width L of the limits in standard deviations; more than 0.
    pub width: f64,
}

/// One step of an EWMA.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EwmaPoint {
    /// The average after this reading.
    pub average: f64,
    /// Lower limit that is exact for this step (narrower at the start).
    pub lower: f64,
    /// Upper limit that is exact for this step.
    pub upper: f64,
}

/// The averages, their limits, and the first signals.
#[derive(Clone, Debug, PartialEq)]
pub struct Ewma {
    /// One point for every reading.
    pub points: Vec<EwmaPoint>,
    /// Lower limit after many readings.
    pub lower_asymptotic: f64,
    /// Upper limit after many readings.
    pub upper_asymptotic: f64,
    /// First place, counted from 0, whose average lies outside the limits exact for that step.
    pub first_signal: Option<usize>,
    /// First place, counted from 0, whose average lies outside the asymptotic limits.
    pub first_signal_asymptotic: Option<usize>,
}

/// Exponentially weighted moving average with its limits.
///
/// z(i) = lambda x(i) + (1 - lambda) z(i-1),  z(0) = target
///
/// limits: target +- L sigma sqrt( lambda / (2 - lambda) [1 - (1 - lambda)^(2 i)] ); asymptotic: without the bracket
///
/// # Refuses   readings or settings that are not finite; sigma or width not greater than 0; lambda not within 0 (left out) to 1
/// # Source    NIST/SEMATECH e-Handbook 6.3.2.4; Montgomery, section 9.2.1
/// # Example
/// NIST 6.3.2.4: lambda 0.3, target 50, sigma 2.0539, L 3: limits 52.5884 and 47.4115. See the outside checks.
pub fn ewma(readings: &[f64], settings: EwmaSettings) -> Result<Ewma, StatisticsError> {
    check_usable("reading", readings)?;
    check_one("target", settings.target)?;
    check_positive("standard deviation", settings.sigma)?;
    check_positive("width of the limits", settings.width)?;
    check_positive("weight lambda", settings.lambda)?;
    check_range("weight lambda", settings.lambda, 0.0, 1.0)?;
    let keep = 1.0 - settings.lambda;
    let reach = settings.width * settings.sigma * libm::sqrt(settings.lambda / (2.0 - settings.lambda));
    let mut average = settings.target;
    let mut kept_squared = 1.0;
    let mut points = Vec::with_capacity(readings.len());
    for reading in readings {
        average = settings.lambda * reading + keep * average;
        kept_squared *= keep * keep;
        let reach_now = reach * libm::sqrt(1.0 - kept_squared);
        points.push(EwmaPoint { average, lower: settings.target - reach_now, upper: settings.target + reach_now });
    }
    let lower_asymptotic = settings.target - reach;
    let upper_asymptotic = settings.target + reach;
    Ok(Ewma {
        first_signal: points.iter().position(|p| p.average < p.lower || p.upper < p.average),
        first_signal_asymptotic: points
            .iter()
            .position(|p| p.average < lower_asymptotic || upper_asymptotic < p.average),
        points,
        lower_asymptotic,
        upper_asymptotic,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_step_is_dated_to_its_first_reading() {
        let readings = [10.0, 10.2, 9.8, 10.1, 13.0, 13.2, 12.9];
        let settings = CusumSettings::for_sigma(10.0, 1.0, CUSUM_DECISION_IN_SIGMA_QUICK);
        let chart = cusum(&readings, settings).unwrap();
        let rise = chart.rise.unwrap();
        // By hand: 2.5, 5.2 (signal), 7.6; level 10 + 0.5 + 5.2 / 2 = 13.1.
        assert_eq!((rise.at, rise.began_at), (5, 4));
        assert!((rise.level - 13.1).abs() < 1e-12);
        assert_eq!(chart.fall, None);
    }

    #[test]
    fn refusals() {
        let settings = CusumSettings { target: 0.0, allowance: 0.5, decision: 4.0 };
        assert!(cusum(&[f64::NAN], settings).is_err());
        for wrong in [0.0, -1.0, f64::NAN, f64::INFINITY] {
            let allowance = CusumSettings { allowance: wrong, ..settings };
            let decision = CusumSettings { decision: wrong, ..settings };
            assert!(cusum(&[1.0], allowance).is_err());
            assert!(cusum(&[1.0], decision).is_err());
        }
        let settings = EwmaSettings { target: 0.0, sigma: 1.0, lambda: 0.2, width: 3.0 };
        for lambda in [0.0, 1.01, -0.2, f64::NAN] {
            assert!(ewma(&[1.0], EwmaSettings { lambda, ..settings }).is_err());
        }
        for sigma in [0.0, -1.0, f64::NAN] {
            assert!(ewma(&[1.0], EwmaSettings { sigma, ..settings }).is_err());
        }
        assert!(ewma(&[], settings).unwrap().points.is_empty());
    }
}
