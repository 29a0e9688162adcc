//! When a drifting reading will reach its limit, by the least-squares line and by the upper prediction bound.
//!
//! Not here: what a reached limit means for the press; that is for the answer about the safeguard.
//! Source of the bound: N. R. Draper, H. Smith, Applied Regression Analysis, 3rd ed., Wiley 1998, section 1.4 and 3.1 (prediction of
//! a single new observation). The bound is one-sided: a single future reading lies below it with a probability of 95 %.

use super::error::{StatisticsError, check_one, check_points};
use super::regression::{Interval, Line};

/// Fewest points from which a date is forecast. Our own choice: with fewer, the slope has only one degree of freedom.
pub const FORECAST_POINTS_MIN: usize = 4;

/// Farthest look ahead from the latest point, in days: 10 years. Our own choice.
pub const FORECAST_HORIZON_DAYS: f64 = 3652.5;

/// Probability with which a single future reading lies below the upper bound (one-sided).
pub const FORECAST_PROBABILITY: f64 = 0.95;

/// Confidence of the two-sided slope interval that must exclude zero before a date is given.
pub const FORECAST_SLOPE_CONFIDENCE: f64 = 0.95;

/// When the limit is reached. Days on the scale of the points given.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Forecast {
    /// The limit is reached already.
    AlreadyReached(Reached),
    /// The limit lies ahead and the readings drift towards it.
    Ahead {
        /// Day on which the upper prediction bound reaches the limit: from then on a single reading reaches it with more than 5 %.
        bound_day: f64,
        /// Day on which the line itself reaches the limit, later than `bound_day`; none if that is beyond the horizon.
        line_day: Option<f64>,
        /// Growth per day.
        slope: f64,
        /// Interval for the growth per day, two-sided 95 %.
        slope_interval: Interval,
    },
    /// No date can be given.
    CannotTell(NoForecast),
}

/// What has reached the limit, the firmest evidence first.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Reached {
    /// A reading is at or above the limit; the latest such reading.
    Reading {
        /// Its day.
        day: f64,
        /// Its value.
        value: f64,
    },
    /// All readings are below, but on the latest day the line is at or above the limit.
    Line {
        /// Value of the line on the latest day.
        value: f64,
    },
    /// Readings and line are below, but on the latest day the upper prediction bound is at or above the limit.
    Bound {
        /// Value of the bound on the latest day.
        value: f64,
    },
}

/// Why no date can be given.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum NoForecast {
    /// Too few points.
    TooFewPoints {
        /// Fewest needed.
        needed: usize,
        /// Number given.
        given: usize,
    },
    /// All points are of one day.
    OneDay,
    /// The slope cannot be told from zero: its two-sided 95 % interval contains it.
    SlopeNotDistinguishable {
        /// That interval, per day.
        slope_interval: Interval,
    },
    /// The readings fall, away from the limit.
    Falling {
        /// Interval for the slope, two-sided 95 %, wholly below zero.
        slope_interval: Interval,
    },
    /// Even the upper bound stays below the limit to the end of the horizon.
    BeyondHorizon {
        /// Days looked ahead from the latest point.
        horizon_days: f64,
    },
}

/// Forecasts when readings reach a limit from below.
///
/// | symbol | input   | unit | permitted                          |
/// | ------ | ------- | ---- | ---------------------------------- |
/// | x      | `days`  | d    | finite, any order, equal days allowed |
/// | y      | `values`| ms   | finite, as many as days            |
/// | L      | `limit` | ms   | finite                             |
///
/// The bound b(x) = line(x) + t s sqrt( 1 + 1/n + (x - mean x)^2 / sum (x - mean x)^2 ) grows without end for a rising line, so that
/// b(x) = L has exactly one root after the latest point if b is below L there.
///
/// # Result    in the order of gravity: what is reached already, then what is ahead, then why nothing can be told
/// # Valid     for readings that drift evenly and scatter independently with equal spread, without a repair between them
/// # Refuses   lists of different length, no points at all, numbers that are not finite
/// # Source    see the head of this file
pub fn forecast_limit(days: &[f64], values: &[f64], limit: f64) -> Result<Forecast, StatisticsError> {
    check_points("day", days, "reading", values, 1)?;
    check_one("limit", limit)?;
    if let Some((day, value)) = latest_at_or_above(days, values, limit) {
        return Ok(Forecast::AlreadyReached(Reached::Reading { day, value }));
    }
    if days.len() < FORECAST_POINTS_MIN {
        return Ok(Forecast::CannotTell(NoForecast::TooFewPoints { needed: FORECAST_POINTS_MIN, given: days.len() }));
    }
    match Line::fit(days, values) {
        Ok(line) => by_line(&line, days, limit),
        Err(StatisticsError::SamePlace { .. }) => Ok(Forecast::CannotTell(NoForecast::OneDay)),
        Err(refusal) => Err(refusal),
    }
}

fn by_line(line: &Line, days: &[f64], limit: f64) -> Result<Forecast, StatisticsError> {
    let latest = days.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    let value = line.value_at(latest);
    if limit <= value {
        return Ok(Forecast::AlreadyReached(Reached::Line { value }));
    }
    let width = line.one_sided_t(FORECAST_PROBABILITY)?;
    let value = line.upper_bound_at(latest, width);
    if limit <= value {
        return Ok(Forecast::AlreadyReached(Reached::Bound { value }));
    }
    let slope_interval = line.slope_interval(FORECAST_SLOPE_CONFIDENCE)?;
    if slope_interval.contains(0.0) {
        return Ok(Forecast::CannotTell(NoForecast::SlopeNotDistinguishable { slope_interval }));
    }
    if line.slope() < 0.0 {
        return Ok(Forecast::CannotTell(NoForecast::Falling { slope_interval }));
    }
    let end = latest + FORECAST_HORIZON_DAYS;
    if line.upper_bound_at(end, width) < limit {
        return Ok(Forecast::CannotTell(NoForecast::BeyondHorizon { horizon_days: FORECAST_HORIZON_DAYS }));
    }
    let bound_day = crossing(|x| line.upper_bound_at(x, width) < limit, latest, end);
    let line_day = (limit <= line.value_at(end)).then(|| crossing(|x| line.value_at(x) < limit, latest, end));
    Ok(Forecast::Ahead { bound_day, line_day, slope: line.slope(), slope_interval })
}

fn latest_at_or_above(days: &[f64], values: &[f64], limit: f64) -> Option<(f64, f64)> {
    days.iter()
        .copied()
        .zip(values.iter().copied())
        .filter(|&(_, value)| limit <= value)
        .max_by(|a, b| a.0.total_cmp(&b.0))
}

/// The last place at which a rising curve is still below, between one that is below and one that is not.
///
/// Halving ends when no number lies between the two; the curve rises all the way, so there is one crossing only.
fn crossing(is_below: impl Fn(f64) -> bool, below: f64, not_below: f64) -> f64 {
    let (mut low, mut high) = (below, not_below);
    loop {
        let middle = 0.5 * (low + high);
        if middle <= low || high <= middle {
            return low;
        }
        if is_below(middle) {
            low = middle;
        } else {
            high = middle;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_line_without_scatter_is_followed_exactly() {
        let days = [0.0, 100.0, 200.0, 300.0];
        let values = [100.0, 110.0, 120.0, 130.0];
        let forecast = forecast_limit(&days, &values, 150.0).unwrap();
        let Forecast::Ahead { bound_day, line_day, .. } = forecast else { panic!("{forecast:?}") };
        assert!((bound_day - 500.0).abs() < 1e-9);
        assert!((line_day.unwrap() - 500.0).abs() < 1e-9);
    }

    #[test]
    fn few_points() {
        let forecast = |n: usize| {
            let days: Vec<f64> = (0..n).map(|i| i as f64).collect();
            forecast_limit(&days, &days, 1000.0)
        };
        assert!(forecast(0).is_err());
        for given in 1..4 {
            assert_eq!(forecast(given), Ok(Forecast::CannotTell(NoForecast::TooFewPoints { needed: 4, given })));
        }
    }
}
