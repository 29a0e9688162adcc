//! Delay and braking, and which of the two has grown.

use crate::compare::{close, near, number, rows};
use crate::stored_sets::stored;
use calc::statistics::{Change, DatedStops, Growth, compare_two_dates, follow_dates, split_delay_and_braking};

struct Day {
    day: f64,
    speeds: Vec<f64>,
    times: Vec<f64>,
}

impl Day {
    fn stops(&self) -> DatedStops<'_> {
        DatedStops { day: self.day, speeds: &self.speeds, times: &self.times }
    }
}

fn days(case: &str) -> Vec<Day> {
    let mut days: Vec<Day> = Vec::new();
    for row in rows(include_str!("stored/splits.csv")).filter(|row| row[0] == case) {
        let day = number(row[1]);
        if days.last().is_none_or(|last| last.day != day) {
            days.push(Day { day, speeds: Vec::new(), times: Vec::new() });
        }
        let last = days.last_mut().unwrap();
        last.speeds.push(number(row[2]));
        last.times.push(number(row[3]));
    }
    assert_eq!(days.len(), 5, "{case}");
    days
}

/// statsmodels: each date by itself, two dates by one model with dummy variables, a series by a line over time.
#[test]
fn against_statsmodels() {
    let all = stored(&["split_", "two_", "series_"]);
    assert!(all.len() >= 150, "{}", all.len());
    for row in all {
        let days = days(row.set);
        let dates: Vec<DatedStops<'_>> = days.iter().map(Day::stops).collect();
        let (kind, quantity) = row.quantity.split_once('_').unwrap();
        let got = match kind {
            "split" => {
                let day = days.iter().find(|day| day.day == number(row.argument)).unwrap();
                let split = split_delay_and_braking(&day.speeds, &day.times).unwrap();
                match quantity {
                    "delay" => split.delay,
                    "braking" => split.braking,
                    "delay_error" => split.delay_error.unwrap(),
                    "braking_error" => split.braking_error.unwrap(),
                    "scatter" => split.scatter.unwrap(),
                    other => panic!("{other}"),
                }
            }
            _ => {
                let found = match kind {
                    "two" => compare_two_dates(dates[0], dates[4]),
                    "series" => follow_dates(&dates),
                    other => panic!("{other}"),
                };
                let changes = found.unwrap().changes.unwrap();
                let (word, end) = quantity.split_once('_').unwrap_or((quantity, ""));
                let change: Change = match word {
                    "delay" => changes.delay,
                    "braking" => changes.braking,
                    "stopping" => changes.stopping,
                    other => panic!("{other}"),
                };
                match end {
                    "" => change.estimate,
                    "low" => change.interval.low,
                    "high" => change.interval.high,
                    other => panic!("{other}"),
                }
            }
        };
        near(&row.label, got, row.value, 1e-9 * row.value.abs() + 1e-11);
    }
}

/// The stored cases were drawn with a growing delay, growing braking, both or neither, far beyond their scatter.
#[test]
fn what_was_drawn_is_found() {
    for (case, want) in [
        ("steady", Growth::Neither),
        ("delay", Growth::DelayGrew),
        ("braking", Growth::BrakingGrew),
        ("both", Growth::Both),
    ] {
        let days = days(case);
        let dates: Vec<DatedStops<'_>> = days.iter().map(Day::stops).collect();
        assert_eq!(compare_two_dates(dates[0], dates[4]).unwrap().growth, want, "{case}");
        assert_eq!(follow_dates(&dates).unwrap().growth, want, "{case}");
    }
}

/// Closed form: constant inertia, ramp brake; t = t_d + t_r / 2 + J w / T. With J 20 kg m2, T 800 N m, delay 50 ms without ramp, 60
/// strokes per minute: 207.080 ms (momentum balance, by hand). The split gives the delay and 1000 (2 pi / 60) J / T back.
#[test]
fn closed_form_of_the_mechanics() {
    let (inertia, torque, delay_ms) = (20.0, 800.0, 50.0);
    let per_speed = 1000.0 * std::f64::consts::TAU / 60.0 * inertia / torque;
    let speeds = [15.0, 30.0, 45.0, 60.0];
    let times = speeds.map(|speed| delay_ms + per_speed * speed);
    near("60 per minute", times[3], 207.080, 0.0005);
    let split = split_delay_and_braking(&speeds, &times).unwrap();
    close("delay", split.delay, delay_ms, 1e-13);
    close("braking", split.braking, per_speed, 1e-13);
    near("scatter", split.scatter.unwrap(), 0.0, 1e-12);
}
