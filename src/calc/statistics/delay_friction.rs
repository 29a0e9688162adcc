//! Splits stopping time over speed into delay and braking, and tells which of the two has grown.
//!
//! Stopped by a constant brake torque at constant inertia, a press takes t = t_d + t_r / 2 + J w / T: a delay that does not depend on
//! speed, plus a braking time in proportion to speed. A line through stop times at several speeds therefore has the delay as its
//! intercept and the braking time per unit of speed as its slope. A growing delay points to valve, hose, exhaust or air; growing
//! braking to lining, oil or springs.
//! Source of the mechanics: momentum balance of a rotor under constant torque (any textbook of machine dynamics); of the comparison of
//! two lines: N. R. Draper, H. Smith, Applied Regression Analysis, 3rd ed., Wiley 1998, chapter 14 (dummy variables).

use super::error::{StatisticsError, check_one, check_points};
use super::regression::{Interval, Line};
use super::student_t::student_t_upper_quantile;
use super::sum::mean_of;

/// Confidence of every interval here (two-sided).
pub const SPLIT_CONFIDENCE: f64 = 0.95;

/// Fewest dates from which a growth over time is told. With fewer there is no scatter about the line over time.
pub const SPLIT_DATES_MIN: usize = 3;

/// Stops of one date: speed in strokes per minute and stopping time in ms, one of each per stop.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DatedStops<'a> {
    /// Day, on any scale common to all dates.
    pub day: f64,
    /// Speeds, strokes per minute.
    pub speeds: &'a [f64],
    /// Stopping times, ms.
    pub times: &'a [f64],
}

/// Delay and braking of one date.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Split {
    /// Delay, ms: stopping time that is left at speed zero.
    pub delay: f64,
    /// Standard error of the delay, ms; none for two stops.
    pub delay_error: Option<f64>,
    /// Braking time per speed, ms per stroke per minute.
    pub braking: f64,
    /// Standard error of the braking time per speed; none for two stops.
    pub braking_error: Option<f64>,
    /// Standard deviation of the stops about the line, ms; none for two stops.
    pub scatter: Option<f64>,
}

/// Splits the stops of one date.
///
/// # Refuses   fewer than two stops, stops all at one speed, lists of different length, numbers that are not finite
/// # Valid     where the inertia seen by the brake hardly changes during the stop; as a comparison of like with like also elsewhere
/// # Example
/// By hand: 70 ms at 20 and 110 ms at 40 strokes per minute lie on 30 ms + 2 ms per stroke per minute.
/// ```
/// let split = calc::statistics::split_delay_and_braking(&[20.0, 40.0], &[70.0, 110.0]).unwrap();
/// assert_eq!((split.delay, split.braking), (30.0, 2.0));
/// ```
pub fn split_delay_and_braking(speeds: &[f64], times: &[f64]) -> Result<Split, StatisticsError> {
    let line = line_over_speed(speeds, times)?;
    Ok(Split {
        delay: line.intercept(),
        delay_error: line.intercept_standard_deviation(),
        braking: line.slope(),
        braking_error: line.slope_standard_deviation(),
        scatter: line.residual_standard_deviation(),
    })
}

/// Which of the two has grown.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Growth {
    /// The delay has grown; growth of the braking time is not shown.
    DelayGrew,
    /// The braking time has grown; growth of the delay is not shown.
    BrakingGrew,
    /// Both have grown.
    Both,
    /// Neither is shown to have grown, nor has the stopping time as a whole.
    Neither,
    /// It cannot be told.
    CannotTell {
        /// The reason.
        why: NoSplit,
    },
}

/// Why delay and braking cannot be told apart.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum NoSplit {
    /// All stops of a date are at one speed (or it has fewer than two stops). A test at a second speed would tell.
    OneSpeed {
        /// The first such day.
        day: f64,
    },
    /// Each of two dates has only two stops, so their scatter is not known. One more stop would do.
    NoScatterKnown,
    /// Too few different dates.
    TooFewDates {
        /// Fewest needed.
        needed: usize,
        /// Number given.
        given: usize,
    },
    /// The stopping time has grown, but the stops do not show which of the two has. Speeds further apart or more stops would tell.
    NotSeparable,
}

/// A change and the interval that holds it with 95 % confidence.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Change {
    /// Best estimate.
    pub estimate: f64,
    /// Two-sided 95 % interval.
    pub interval: Interval,
}

impl Change {
    /// Whether growth is shown: the whole interval lies above zero.
    pub fn has_grown(&self) -> bool {
        0.0 < self.interval.low
    }
}

/// The changes from which the verdict follows.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Changes {
    /// Change of the delay: ms between two dates, or ms per day over a series.
    pub delay: Change,
    /// Change of the braking time per speed: ms per stroke per minute, between two dates or per day over a series.
    pub braking: Change,
    /// Change of the stopping time at `speed`: ms between two dates, or ms per day over a series.
    pub stopping: Change,
    /// Mean speed of all stops, strokes per minute.
    pub speed: f64,
}

/// Verdict, with the changes behind it where they could be worked out.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct GrowthFound {
    /// Which has grown.
    pub growth: Growth,
    /// The changes; none when the data do not allow them.
    pub changes: Option<Changes>,
}

impl GrowthFound {
    fn of(changes: Changes) -> Self {
        let growth = match (changes.delay.has_grown(), changes.braking.has_grown()) {
            (true, true) => Growth::Both,
            (true, false) => Growth::DelayGrew,
            (false, true) => Growth::BrakingGrew,
            (false, false) if changes.stopping.has_grown() => Growth::CannotTell { why: NoSplit::NotSeparable },
            (false, false) => Growth::Neither,
        };
        Self { growth, changes: Some(changes) }
    }

    fn cannot_tell(why: NoSplit) -> Self {
        Self { growth: Growth::CannotTell { why }, changes: None }
    }
}

/// Compares two dates: what has changed from the first to the second.
///
/// Two lines with a common residual variance: s^2 = (R1 + R2) / (n1 + n2 - 4), R the sums of squared residuals; each change has the
/// variance s^2 (g1 + g2), g the variance of the quantity on its line as a multiple of s^2, and Student t with n1 + n2 - 4 degrees of freedom.
///
/// # Refuses   lists of different length within a date, numbers that are not finite, a first day that is not before the second
pub fn compare_two_dates(before: DatedStops<'_>, after: DatedStops<'_>) -> Result<GrowthFound, StatisticsError> {
    let lines = match lines_over_speed(&[before, after])? {
        Ok(lines) => lines,
        Err(why) => return Ok(GrowthFound::cannot_tell(why)),
    };
    if before.day >= after.day {
        return Err(StatisticsError::OutOfRange {
            what: "second day",
            given: after.day,
            least: before.day,
            greatest: super::MAGNITUDE_MAX,
        });
    }
    let (first, second) = (&lines[0], &lines[1]);
    let degrees = first.degrees_of_freedom() + second.degrees_of_freedom();
    if degrees == 0 {
        return Ok(GrowthFound::cannot_tell(NoSplit::NoScatterKnown));
    }
    let variance = (first.residual_squares() + second.residual_squares()) / degrees as f64;
    let t = student_t_upper_quantile(0.5 * (1.0 - SPLIT_CONFIDENCE), degrees as f64);
    let change = |estimate: f64, share: f64| Change {
        estimate,
        interval: Interval::about(estimate, t * libm::sqrt(variance * share)),
    };
    let change_at = |speed: f64| {
        change(
            second.value_at(speed) - first.value_at(speed),
            first.variance_share_at(speed) + second.variance_share_at(speed),
        )
    };
    let speed = mean_speed(&[before, after]);
    Ok(GrowthFound::of(Changes {
        delay: change_at(0.0),
        braking: change(second.slope() - first.slope(), first.slope_variance_share() + second.slope_variance_share()),
        stopping: change_at(speed),
        speed,
    }))
}

/// Follows delay and braking over a series of dates: growth per day of each.
///
/// Every date is split by itself; a line over time through the delays, and another through the braking times, give the growth per day
/// with its Student t interval. The scatter from date to date, which is more than the scatter of the stops of one date, is thereby
/// counted in full. Every date counts alike.
///
/// # Refuses   lists of different length within a date, numbers that are not finite
pub fn follow_dates(dates: &[DatedStops<'_>]) -> Result<GrowthFound, StatisticsError> {
    let lines = match lines_over_speed(dates)? {
        Ok(lines) => lines,
        Err(why) => return Ok(GrowthFound::cannot_tell(why)),
    };
    let days: Vec<f64> = dates.iter().map(|date| date.day).collect();
    let different = count_different(&days);
    if different < SPLIT_DATES_MIN {
        return Ok(GrowthFound::cannot_tell(NoSplit::TooFewDates { needed: SPLIT_DATES_MIN, given: different }));
    }
    let per_day = |quantity: &dyn Fn(&Line) -> f64| {
        let quantities: Vec<f64> = lines.iter().map(quantity).collect();
        let over_time = Line::fit(&days, &quantities)?;
        Ok(Change { estimate: over_time.slope(), interval: over_time.slope_interval(SPLIT_CONFIDENCE)? })
    };
    let speed = mean_speed(dates);
    Ok(GrowthFound::of(Changes {
        delay: per_day(&Line::intercept)?,
        braking: per_day(&Line::slope)?,
        stopping: per_day(&|line| line.value_at(speed))?,
        speed,
    }))
}

fn line_over_speed(speeds: &[f64], times: &[f64]) -> Result<Line, StatisticsError> {
    check_points("speed", speeds, "stopping time", times, 2)?;
    Line::fit(speeds, times).map_err(|refusal| match refusal {
        StatisticsError::SamePlace { at, .. } => StatisticsError::SamePlace { what: "speed", at },
        other => other,
    })
}

/// One line per date; the outer result refuses wrong numbers, the inner says which date cannot be split.
fn lines_over_speed(dates: &[DatedStops<'_>]) -> Result<Result<Vec<Line>, NoSplit>, StatisticsError> {
    let mut lines = Vec::with_capacity(dates.len());
    let mut one_speed = None;
    for date in dates {
        check_one("day", date.day)?;
        match line_over_speed(date.speeds, date.times) {
            Ok(line) => lines.push(line),
            Err(StatisticsError::SamePlace { .. } | StatisticsError::TooFewValues { .. }) => {
                one_speed = one_speed.or(Some(NoSplit::OneSpeed { day: date.day }));
            }
            Err(refusal) => return Err(refusal),
        }
    }
    Ok(one_speed.map_or(Ok(lines), Err))
}

fn mean_speed(dates: &[DatedStops<'_>]) -> f64 {
    let all: Vec<f64> = dates.iter().flat_map(|date| date.speeds).copied().collect();
    mean_of(&all)
}

fn count_different(days: &[f64]) -> usize {
    let mut ordered = days.to_vec();
    ordered.sort_by(f64::total_cmp);
    ordered.chunk_by(|a, b| a >= b).count()
}

#[cfg(test)]
mod tests {
    use super::*;

    const SPEEDS: [f64; 4] = [20.0, 20.0, 40.0, 40.0];

    fn stops(day: f64, times: &[f64]) -> DatedStops<'_> {
        DatedStops { day, speeds: &SPEEDS, times }
    }

    #[test]
    fn two_dates() {
        let check = |after: [f64; 4], want: Growth| {
            let before = stops(0.0, &[69.0, 71.0, 109.0, 111.0]);
            let found = compare_two_dates(before, stops(30.0, &after)).unwrap();
            assert_eq!(found.growth, want);
        };
        check([69.0, 71.0, 109.0, 111.0], Growth::Neither);
        check([89.0, 91.0, 129.0, 131.0], Growth::DelayGrew);
        check([89.0, 91.0, 149.0, 151.0], Growth::BrakingGrew);
        check([119.0, 121.0, 189.0, 191.0], Growth::Both);
        check([59.0, 61.0, 99.0, 101.0], Growth::Neither);
        let why = NoSplit::NotSeparable;
        check([73.0, 75.0, 113.0, 115.0], Growth::CannotTell { why });
    }

    #[test]
    fn what_cannot_be_told() {
        let one_speed = DatedStops { day: 30.0, speeds: &[20.0, 20.0], times: &[69.0, 70.0] };
        let found = compare_two_dates(stops(0.0, &[69.0, 71.0, 109.0, 111.0]), one_speed).unwrap();
        let why = NoSplit::OneSpeed { day: 30.0 };
        assert_eq!(found.growth, Growth::CannotTell { why });
        assert_eq!(found.changes, None);
        let two = |day| DatedStops { day, speeds: &[20.0, 40.0], times: &[69.0, 110.0] };
        let why = NoSplit::NoScatterKnown;
        let found = compare_two_dates(two(0.0), two(1.0)).unwrap();
        assert_eq!(found.growth, Growth::CannotTell { why });
        assert!(compare_two_dates(two(1.0), two(1.0)).is_err());
        let found = follow_dates(&[two(0.0), two(1.0), two(1.0)]).unwrap();
        let why = NoSplit::TooFewDates { needed: 3, given: 2 };
        assert_eq!(found.growth, Growth::CannotTell { why });
        let found = follow_dates(&[]).unwrap();
        assert!(matches!(found.growth, Growth::CannotTell { why: NoSplit::TooFewDates { given: 0, .. } }));
    }
}
