//! Which readings belong together: one setup, since the last event that made the brake another one.

use jiff::civil::{Date, date};

use crate::calendar::Moment;
use crate::press::Press;
use crate::reading::ReadingSetup;

/// Readings that can be compared with each other, oldest first.
#[derive(Clone, PartialEq, Debug)]
pub struct Series {
    /// How they were taken.
    pub setup: ReadingSetup,
    /// The event at which the series begins, where there is one.
    pub since: Option<Moment>,
    /// One point a reading.
    pub points: Vec<Point>,
}

/// One reading of a series.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Point {
    /// Its place in the press's list.
    pub reading: usize,
    /// Its day, counted from 1970-01-01.
    pub day: f64,
    /// Mean of its stops, ms.
    pub mean_ms: f64,
    /// Its longest stop, ms.
    pub greatest_ms: f64,
}

/// The readings of the reference setup; where none is set, those of the latest reading's setup. `None` without either.
///
/// A reading of the day of a brake event counts as later only where both carry a time of day and it is later.
pub fn series(press: &Press) -> Option<Series> {
    let latest = press.readings.iter().max_by_key(|reading| reading.at.date);
    let setup = press.reference.clone().or_else(|| latest.map(|reading| reading.setup.clone()))?;
    let since = press
        .events
        .iter()
        .filter(|event| event.kind.resets_brake())
        .map(|event| event.at)
        .reduce(|one, other| if one.is_surely_after(other) { one } else { other });
    let mut points: Vec<Point> = press
        .readings
        .iter()
        .enumerate()
        .filter(|(_, reading)| reading.setup == setup && since.is_none_or(|since| reading.at.is_surely_after(since)))
        .filter_map(|(index, reading)| {
            let mean_ms = reading.mean_ms()?;
            let greatest_ms = reading.stops.iter().max()?.to_f64();
            Some(Point { reading: index, day: day_of(reading.at.date), mean_ms, greatest_ms })
        })
        .collect();
    points.sort_by(|one, other| one.day.total_cmp(&other.day).then(one.reading.cmp(&other.reading)));
    Some(Series { setup, since, points })
}

/// The number of days from 1970-01-01, the scale on which trends are worked out.
pub fn day_of(on: Date) -> f64 {
    f64::from((on - date(1970, 1, 1)).get_days())
}

/// The date of a day on that scale; a fraction of a day is cut off. `None` beyond the calendar.
pub fn date_of(day: f64) -> Option<Date> {
    if !(day.is_finite() && day.abs() < 3_000_000.0) {
        return None;
    }
    date(1970, 1, 1).checked_add(jiff::Span::new().days(libm::floor(day) as i64)).ok()
}
