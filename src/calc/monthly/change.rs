//! Whether the readings drift or have stepped, since when, and whether the delay or the braking has grown.

use jiff::civil::Date;

use super::series::{Series, date_of, day_of};
use crate::press::{Event, Press};
use crate::reading::ReadingSetup;
use crate::statistics::{
    CUSUM_DECISION_IN_SIGMA_CALM, CusumSettings, DatedStops, EWMA_LAMBDA_LOW, EWMA_WIDTH_LOW, EwmaSettings,
    GrowthFound, Interval, Line, compare_two_dates, cusum, ewma, follow_dates, mann_kendall, theil_sen,
};

/// Days in a mean month: 365.25 / 12.
pub const DAYS_PER_MONTH: f64 = 30.4375;
/// Fewest readings before anything is said about a drift.
pub const FEWEST_FOR_DRIFT: usize = 4;
/// Readings at the start of a series that tell how a sound brake of this press scatters.
pub const BASELINE_READINGS: usize = 6;
/// Fewest readings after the baseline before a step is looked for.
const FEWEST_AFTER_BASELINE: usize = 2;
/// Probability below which a trend is not put down to chance.
const CHANCE_MOST: f64 = 0.05;
/// An event within so many days of a step is named beside it.
const NEAR_DAYS: f64 = 45.0;
/// A step must stand out from the scatter about its two levels by so much, as Student's t of their difference. The split is sought
/// where it is most visible, so that the usual 2 would be reached by chance in every second series; a simulation in the tests
/// holds that with this value fewer than 2 % of sound brakes are told to have stepped.
const STEP_T_LEAST: f64 = 5.0;
/// Finest scatter that a timer shows, ms: below it a step would be found in the last digit.
const SCATTER_LEAST_MS: f64 = 0.1;

/// What the readings of a series do.
#[derive(Clone, PartialEq, Debug)]
pub enum Change {
    /// Too few readings.
    CannotTell {
        /// How many there are.
        given: usize,
        /// How many are needed.
        needed: usize,
    },
    /// No drift can be told from chance, and no step.
    Steady(Drift),
    /// They drift.
    Drifting(Drift),
    /// They stepped from one level to another.
    Stepped {
        /// The step.
        step: Step,
        /// The drift over the whole series, for comparison.
        drift: Drift,
    },
}

/// A drift, per month.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Drift {
    /// Theil-Sen slope, ms a month.
    pub per_month_ms: f64,
    /// Its two-sided 95 % interval; none for few readings.
    pub interval_ms: Option<Interval>,
    /// Slope of the least-squares line, ms a month, for comparison.
    pub line_per_month_ms: f64,
    /// Probability of such a trend by chance, two-sided (Mann-Kendall).
    pub chance: f64,
}

/// A step from one level to another.
#[derive(Clone, PartialEq, Debug)]
pub struct Step {
    /// The day of the first reading on the new level.
    pub began: Date,
    /// Mean before it, ms.
    pub before_ms: f64,
    /// Mean from it on, ms.
    pub after_ms: f64,
    /// The event of the press that lies nearest, where one is near.
    pub event: Option<Event>,
    /// Whether the moving average saw it too.
    pub seen_by_average: bool,
}

pub(super) fn change(press: &Press, series: &Series) -> Change {
    let given = series.points.len();
    let too_few = Change::CannotTell { given, needed: FEWEST_FOR_DRIFT };
    if given < FEWEST_FOR_DRIFT {
        return too_few;
    }
    let days: Vec<f64> = series.points.iter().map(|point| point.day).collect();
    let means: Vec<f64> = series.points.iter().map(|point| point.mean_ms).collect();
    let Some(drift) = drift(&days, &means) else { return too_few };
    if let Some(step) = step(press, &days, &means) {
        return Change::Stepped { step, drift };
    }
    if drift.chance < CHANCE_MOST { Change::Drifting(drift) } else { Change::Steady(drift) }
}

fn drift(days: &[f64], means: &[f64]) -> Option<Drift> {
    let slope = theil_sen(days, means, 0.95).ok()?;
    let line = Line::fit(days, means).ok()?;
    let month =
        |interval: Interval| Interval { low: interval.low * DAYS_PER_MONTH, high: interval.high * DAYS_PER_MONTH };
    Some(Drift {
        per_month_ms: slope.slope * DAYS_PER_MONTH,
        interval_ms: slope.slope_interval.map(month),
        line_per_month_ms: line.slope() * DAYS_PER_MONTH,
        chance: mann_kendall(days, means).ok()?.probability().two_sided,
    })
}

/// A step is told where the CUSUM against the baseline signals and two levels fit the readings better than one slope.
fn step(press: &Press, days: &[f64], means: &[f64]) -> Option<Step> {
    if means.len() < BASELINE_READINGS + FEWEST_AFTER_BASELINE {
        return None;
    }
    let base = crate::statistics::Summary::of(&means[..BASELINE_READINGS]).ok()?;
    let sigma = base.standard_deviation()?.max(SCATTER_LEAST_MS);
    let found = cusum(means, CusumSettings::for_sigma(base.mean(), sigma, CUSUM_DECISION_IN_SIGMA_CALM)).ok()?;
    let signal = [found.rise, found.fall].into_iter().flatten().min_by_key(|signal| signal.at)?;
    // Where the sum began is a first guess; the split that leaves the least scatter near it is the step.
    let from = signal.began_at.saturating_sub(3).max(2);
    // One reading alone is no level: at least two stand on either side.
    let to = (signal.at + 3).min(means.len() - 2);
    let at =
        (from..=to).min_by(|one, other| scatter_of_split(means, *one).total_cmp(&scatter_of_split(means, *other)))?;
    let line = Line::fit(days, means).ok()?;
    let scatter = scatter_of_split(means, at);
    if scatter >= line.residual_squares() || step_t(means, at, scatter) < STEP_T_LEAST {
        return None;
    }
    let average =
        ewma(means, EwmaSettings { target: base.mean(), sigma, width: EWMA_WIDTH_LOW, lambda: EWMA_LAMBDA_LOW })
            .ok()?;
    let event = press
        .events
        .iter()
        .map(|event| (event, (day_of(event.at.date) - days[at]).abs()))
        .filter(|(_, apart)| *apart <= NEAR_DAYS)
        .min_by(|one, other| one.1.total_cmp(&other.1))
        .map(|(event, _)| event.clone());
    Some(Step {
        began: date_of(days[at])?,
        before_ms: mean(&means[..at]),
        after_ms: mean(&means[at..]),
        event,
        seen_by_average: average.first_signal.is_some(),
    })
}

/// Student's t of the difference of two levels.
fn step_t(means: &[f64], at: usize, scatter: f64) -> f64 {
    let (before, after) = (at as f64, (means.len() - at) as f64);
    let variance = (scatter / (before + after - 2.0)).max(SCATTER_LEAST_MS * SCATTER_LEAST_MS);
    let difference = mean(&means[at..]) - mean(&means[..at]);
    difference.abs() / libm::sqrt(variance * (1.0 / before + 1.0 / after))
}

fn scatter_of_split(means: &[f64], at: usize) -> f64 {
    let squares = |part: &[f64]| {
        let level = mean(part);
        part.iter().map(|value| (value - level) * (value - level)).sum::<f64>()
    };
    squares(&means[..at]) + squares(&means[at..])
}

fn mean(values: &[f64]) -> f64 {
    values.iter().sum::<f64>() / values.len() as f64
}

/// What has grown, where readings exist at two or more speeds on the same days.
#[derive(Clone, PartialEq, Debug)]
pub struct Suspect {
    /// How many days have readings at two or more speeds.
    pub days: usize,
    /// What was found.
    pub found: GrowthFound,
    /// Whether `found` compares two days (ms), or follows several (ms a day).
    pub is_per_day: bool,
    /// Delay of each day in ms, with the braking part at the reference speed.
    pub splits: Vec<DaySplit>,
}

/// The two parts of the stop on one day.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct DaySplit {
    /// The day, from 1970-01-01.
    pub day: f64,
    /// Delay, ms.
    pub delay_ms: f64,
    /// Braking at the reference speed, ms.
    pub braking_ms: f64,
}

/// Splits delay from braking day by day; `None` where no day has readings at two speeds.
///
/// Readings of one setup but for the speed belong together. Readings since the same brake event as the series count.
pub fn suspect(press: &Press, series: &Series) -> Option<Suspect> {
    struct Day {
        day: f64,
        speeds: Vec<f64>,
        times: Vec<f64>,
    }
    let mut days: Vec<Day> = Vec::new();
    for reading in &press.readings {
        if !differs_in_speed_only(&reading.setup, &series.setup)
            || series.since.is_some_and(|since| !reading.at.is_surely_after(since))
        {
            continue;
        }
        let day = day_of(reading.at.date);
        let index = days.iter().position(|known| known.day == day).unwrap_or_else(|| {
            days.push(Day { day, speeds: Vec::new(), times: Vec::new() });
            days.len() - 1
        });
        for stop in &reading.stops {
            days[index].speeds.push(reading.setup.condition.speed.to_f64());
            days[index].times.push(stop.to_f64());
        }
    }
    days.retain(|day| day.speeds.iter().any(|speed| *speed != day.speeds[0]));
    days.sort_by(|one, other| one.day.total_cmp(&other.day));
    let dated: Vec<DatedStops> =
        days.iter().map(|day| DatedStops { day: day.day, speeds: &day.speeds, times: &day.times }).collect();
    let speed = series.setup.condition.speed.to_f64();
    let splits = dated
        .iter()
        .filter_map(|day| {
            let split = crate::statistics::split_delay_and_braking(day.speeds, day.times).ok()?;
            Some(DaySplit { day: day.day, delay_ms: split.delay, braking_ms: split.braking * speed })
        })
        .collect();
    let (found, is_per_day) = match dated[..] {
        [] | [_] => return None,
        [before, after] => (compare_two_dates(before, after).ok()?, false),
        _ => (follow_dates(&dated).ok()?, true),
    };
    Some(Suspect { days: dated.len(), found, is_per_day, splits })
}

fn differs_in_speed_only(one: &ReadingSetup, other: &ReadingSetup) -> bool {
    let mut same = one.clone();
    same.condition.speed = other.condition.speed;
    same == *other
}
