//! Monthly readings put through the whole standing: limits, drift, step, forecast, delay or braking, due dates.

mod support;

use calc::assess::assess;
use calc::monthly::{Change, Consequence, sentence, standing, suspect_sentence};
use calc::press::{Event, EventKind, Press};
use calc::reading::{Reading, ReadingPlace, ReadingSetup};
use calc::rules::RuleSetId;
use calc::schedule::{DueKind, Interval, due_at};
use calc::statistics::{Forecast, Growth};
use calc::units::{Rate, Time};
use calc::verdict::Answer;
use jiff::civil::date;
use support::*;

fn setup(press: &Press) -> ReadingSetup {
    let test = &press.stop_tests[0];
    ReadingSetup { condition: test.condition.clone(), clock_start: test.clock_start, place: ReadingPlace::StrokeTest }
}

fn reading(press: &Press, when: &str, stops_us: &[i64]) -> Reading {
    Reading {
        at: at(when),
        by: "M. T.".into(),
        setup: setup(press),
        instrument: press.stop_tests[0].instrument.clone(),
        stops: stops_us.iter().map(|us| Time::from_base(*us)).collect(),
    }
}

/// A press with a curtain and one reading a month from January 2026, each of three stops round the given mean.
fn with_readings(means_us: &[i64]) -> Press {
    let mut press = press();
    press.safeguards.push(curtain(450));
    press.reference = Some(setup(&press));
    for (month, mean) in means_us.iter().enumerate() {
        let when = format!("{}-{:02}-05", 2025 + month / 12, month % 12 + 1);
        let stops = [mean - 500, *mean, mean + 500];
        press.readings.push(reading(&press, &when, &stops));
    }
    press
}

#[test]
fn limits_are_the_baseline_plus_what_the_distance_admits() {
    // Baseline: mean of the ten stops, 183.7 ms. Allowed: 448 / 2000 - 0.022 = 202 ms; value taken 189.366; spare 12.634 ms.
    let standing = standing(&with_readings(&[183_700]), &plant(), TODAY).unwrap();
    let lines: Vec<(&str, i64, Consequence)> =
        standing.lines.iter().map(|line| (line.name, line.value.base(), line.consequence)).collect();
    assert_eq!(
        lines,
        [
            ("warning level", 183_700 + 6_317, Consequence::Warn),
            ("wear allowance used up", 193_700, Consequence::Retime),
            ("allowed stopping time", 183_700 + 12_634, Consequence::Retime),
            ("distance used up", 183_700 + 22_634, Consequence::StopUsing),
        ]
    );
    assert_eq!(standing.binding_line().unwrap().name, "wear allowance used up");
}

#[test]
fn few_readings_cannot_tell() {
    let standing = standing(&with_readings(&[183_700, 184_000, 183_500]), &plant(), TODAY).unwrap();
    assert_eq!(standing.change, Change::CannotTell { given: 3, needed: 4 });
    assert!(sentence(&standing).starts_with("Cannot tell yet: 3 readings"), "{}", sentence(&standing));
}

#[test]
fn a_sound_brake_is_steady() {
    let means =
        [183_700, 183_900, 183_400, 183_800, 183_500, 183_700, 183_600, 183_900, 183_500, 183_700, 183_800, 183_600];
    let standing = standing(&with_readings(&means), &plant(), TODAY).unwrap();
    assert!(matches!(standing.change, Change::Steady(_)), "{:?}", standing.change);
}

#[test]
fn a_drift_is_told_with_its_size_and_the_month_of_the_limit() {
    // 0.5 ms a month, with a fixed scatter of a tenth of that; 10 ms of wear allowance would be gone after 20 months.
    let means: Vec<i64> =
        (0..12).map(|month| 183_700 + 500 * month + [0, 60, -50, 30, -40, 20][month as usize % 6]).collect();
    let standing = standing(&with_readings(&means), &plant(), TODAY).unwrap();
    let Change::Drifting(drift) = &standing.change else { panic!("{:?}", standing.change) };
    assert!((drift.per_month_ms - 0.5).abs() < 0.02, "{drift:?}");
    let Some(Forecast::Ahead { bound_day, line_day: Some(line_day), .. }) = standing.forecast else { panic!() };
    assert!(bound_day < line_day);
    let words = sentence(&standing);
    assert!(words.starts_with("Drifting: +0.5 ms a month."), "{words}");
    assert!(words.contains("the line itself about September 2026"), "{words}");
}

#[test]
fn a_step_is_told_with_its_month_and_the_event_near_it() {
    let mut means = vec![183_700, 183_900, 183_400, 183_800, 183_500, 183_700, 183_600, 183_900];
    means.extend([189_700, 189_900, 189_500, 189_800]);
    let mut press = with_readings(&means);
    press.events.push(Event {
        at: at("2025-08-20"),
        kind: EventKind::Remark,
        safeguard: None,
        note: "oil changed".into(),
    });
    let standing = standing(&press, &plant(), TODAY).unwrap();
    let Change::Stepped { step, .. } = &standing.change else { panic!("{:?}", standing.change) };
    assert_eq!(step.began, date(2025, 9, 5));
    assert!(step.seen_by_average);
    assert_eq!(step.event.as_ref().unwrap().note, "oil changed");
    assert!(sentence(&standing).contains("in September 2025"), "{}", sentence(&standing));
}

/// Normal scatter from a fixed seed: the sum of twelve even numbers less six.
struct Scatter(u64);

impl Scatter {
    fn next(&mut self) -> f64 {
        let mut even = || {
            self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
            (self.0 >> 11) as f64 / (1_u64 << 53) as f64
        };
        (0..12).map(|_| even()).sum::<f64>() - 6.0
    }
}

#[test]
fn a_sound_brake_is_hardly_ever_told_to_have_stepped_and_a_real_step_is_found() {
    let mut scatter = Scatter(20_261_201);
    let mut count = |readings: usize, step_us: f64, runs: usize| {
        let mut stepped = 0;
        for _ in 0..runs {
            let means: Vec<i64> = (0..readings)
                .map(|month| {
                    let level = if month >= readings / 2 { 183_700.0 + step_us } else { 183_700.0 };
                    (level + 1_500.0 * scatter.next()) as i64
                })
                .collect();
            let found = standing(&with_readings(&means), &plant(), TODAY).unwrap();
            stepped += usize::from(matches!(found.change, Change::Stepped { .. }));
        }
        stepped as f64 / runs as f64
    };
    for readings in [12, 24, 60] {
        assert!(count(readings, 0.0, 400) < 0.02, "{readings} readings");
    }
    assert!(count(24, 6_000.0, 100) > 0.95);
}

#[test]
fn an_event_that_changes_the_brake_begins_a_new_series() {
    let mut press = with_readings(&[190_000, 191_000, 192_000, 193_000, 194_000]);
    press.events.push(Event {
        at: at("2025-05-20"),
        kind: EventKind::LiningReplaced,
        safeguard: None,
        note: String::new(),
    });
    assert_eq!(
        sentence(&standing(&press, &plant(), TODAY).unwrap()),
        "No reading under the reference condition since the brake was last changed."
    );
    let again = reading(&press, "2025-06-05", &[180_000, 180_500, 181_000]);
    press.readings.push(again);
    assert_eq!(standing(&press, &plant(), TODAY).unwrap().series.points.len(), 1);
}

#[test]
fn two_speeds_tell_a_growing_delay_from_tired_friction() {
    // Stop = delay + 2 ms per stroke a minute; the delay grows by 1 ms a month, then instead the braking by 1/60 a month.
    for (delay_growth, braking_growth, expected) in [(1_000, 0, Growth::DelayGrew), (0, 17, Growth::BrakingGrew)] {
        let mut press = with_readings(&[]);
        for month in 1..=8_i64 {
            for speed in [30_i64, 60] {
                let stop = 60_000 + delay_growth * month + (2_000 + braking_growth * month) * speed;
                let scatter = [20, -20, 0][month as usize % 3];
                let mut one = reading(
                    &press,
                    &format!("2026-{month:02}-05"),
                    &[stop - 300 + scatter, stop, stop + 300 - scatter],
                );
                one.setup.condition.speed = Rate::per_min(speed);
                press.readings.push(one);
            }
        }
        let suspect = standing(&press, &plant(), TODAY).unwrap().suspect.unwrap();
        assert_eq!((suspect.days, suspect.found.growth), (8, expected), "{}", suspect_sentence(&suspect));
    }
}

#[test]
fn an_overdue_reading_asks_for_a_new_time_and_is_listed_as_due() {
    let mut plant = plant();
    plant.reading_interval = Some(Interval::Months(1));
    let mut press = with_readings(&[183_700]);
    let first = assess(&press, &press.safeguards[0], &plant, RuleSetId::Iso138552010, date(2025, 2, 5));
    assert!(first.reasons.iter().all(|reason| !reason.words.contains("reading")));
    let late = assess(&press, &press.safeguards[0], &plant, RuleSetId::Iso138552010, TODAY);
    assert_eq!(late.answer, Answer::Retime);
    press.readings[0].at = at("2026-10-31");
    let due: Vec<_> = due_at(&press, &plant, TODAY).into_iter().map(|due| (due.on, due.what)).collect();
    assert_eq!(due[0], (date(2026, 11, 30), DueKind::Reading));
    assert_eq!(due[1].0, date(2027, 3, 2));
    assert!(matches!(due[1].1, DueKind::Calibration { .. }));
    assert_eq!(due[2].0, date(2027, 10, 5));
}
