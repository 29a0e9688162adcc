//! Do the bounds keep what they promise? Counted over simulated presses with a fixed seed.

use crate::draws::Draws;
use calc::statistics::{
    CusumSettings, DatedStops, EwmaSettings, Forecast, Growth, Line, NoForecast, Summary, compare_two_dates, cusum,
    ewma, follow_dates, forecast_limit, mann_kendall, theil_sen, upper_tolerance_bound,
};

const PRESSES: usize = 2_000;

#[track_caller]
fn check_share(what: &str, count: usize, low: f64, high: f64) {
    let share = count as f64 / PRESSES as f64;
    assert!(low <= share && share <= high, "{what}: {share}");
}

struct Press {
    days: Vec<f64>,
    values: Vec<f64>,
    level: f64,
    slope: f64,
    scatter: f64,
}

/// Readings about a month apart, 4 to 24 of them, drifting by up to `slope_max` ms a day.
fn press(draws: &mut Draws, slope_min: f64, slope_max: f64) -> Press {
    let level = draws.between(120.0, 300.0);
    let slope = draws.between(slope_min, slope_max);
    let scatter = draws.between(0.3, 3.0);
    let mut day = draws.between(0.0, 20_000.0);
    let start = day;
    let mut press = Press { days: Vec::new(), values: Vec::new(), level: level - slope * start, slope, scatter };
    for _ in 0..draws.whole(4, 24) {
        day += draws.between(20.0, 40.0);
        let value = reading(draws, &press, day);
        press.days.push(day);
        press.values.push(value);
    }
    press
}

fn reading(draws: &mut Draws, press: &Press, day: f64) -> f64 {
    press.level + press.slope * day + press.scatter * draws.normal()
}

/// The upper 95 % prediction bound lies above a single future reading in 93 to 97 of 100 presses; the two-sided interval holds it
/// as often; the 95 % interval of the slope holds the true slope as often.
#[test]
fn prediction_bound_and_slope_interval() {
    let mut draws = Draws::with_seed(1);
    let (mut below, mut within, mut slope_held) = (0, 0, 0);
    for _ in 0..PRESSES {
        let press = press(&mut draws, -0.02, 0.05);
        let day = press.days.last().unwrap() + draws.between(1.0, 400.0);
        let future = reading(&mut draws, &press, day);
        let line = Line::fit(&press.days, &press.values).unwrap();
        below += usize::from(future <= line.upper_prediction_bound_at(day, 0.95).unwrap());
        within += usize::from(line.prediction_interval_at(day, 0.95).unwrap().contains(future));
        slope_held += usize::from(line.slope_interval(0.95).unwrap().contains(press.slope));
    }
    check_share("upper bound", below, 0.93, 0.97);
    check_share("two-sided interval", within, 0.93, 0.97);
    check_share("slope", slope_held, 0.93, 0.97);
}

/// The forecast as a whole. Take as limit the very reading that a press will show on a future day: the bound must have reached it by
/// that day in 93 to 97 of 100 presses. The drift is strong, so that a date is always given.
#[test]
fn forecast_bound() {
    let mut draws = Draws::with_seed(2);
    let (mut in_time, mut told) = (0, 0);
    for _ in 0..PRESSES {
        let press = press(&mut draws, 0.6, 1.0);
        let day = press.days.last().unwrap() + draws.between(1.0, 400.0);
        let limit = reading(&mut draws, &press, day);
        match forecast_limit(&press.days, &press.values, limit).unwrap() {
            Forecast::AlreadyReached(_) => in_time += 1,
            Forecast::Ahead { bound_day, .. } => in_time += usize::from(bound_day <= day),
            Forecast::CannotTell(NoForecast::SlopeNotDistinguishable { .. }) => continue,
            other => panic!("{other:?}"),
        }
        told += 1;
    }
    assert!(told >= PRESSES - 5, "{told}");
    check_share("bound day", in_time, 0.93, 0.97);
}

/// The 95/95 tolerance bound lies above the true 95 % quantile in 93 to 97 of 100 tests; mean + 3 s of ten stops in about 95 too.
#[test]
fn tolerance_bound() {
    let mut draws = Draws::with_seed(3);
    let (mut bound, mut three_s) = (0, 0);
    for _ in 0..PRESSES {
        let count = draws.whole(5, 30);
        let stops: Vec<f64> = (0..count).map(|_| 150.0 + 2.0 * draws.normal()).collect();
        let summary = Summary::of(&stops).unwrap();
        // 1.644854 is the 95 % quantile of the standard normal distribution (any table).
        let quantile = 150.0 + 2.0 * 1.644_854;
        bound += usize::from(upper_tolerance_bound(&summary, 0.95, 0.95).unwrap() >= quantile);
        let ten: Vec<f64> = (0..10).map(|_| draws.normal()).collect();
        three_s += usize::from(Summary::of(&ten).unwrap().mean_plus_3_s().unwrap() >= 1.644_854);
    }
    check_share("95/95", bound, 0.93, 0.97);
    // k(10, 0.95, 0.95) is 2.911, so 3 s gives a confidence a little above 95 %.
    check_share("mean + 3 s of ten", three_s, 0.935, 0.975);
}

/// Theil-Sen's interval holds the true slope in at least 93 of 100 presses (its ranks are rounded to the wider side), and Mann-Kendall
/// calls a trend where there is none in at most 7 of 100.
#[test]
fn theil_sen_and_mann_kendall() {
    let mut draws = Draws::with_seed(4);
    let (mut held, mut false_alarms) = (0, 0);
    for _ in 0..PRESSES {
        let trending = press(&mut draws, -0.02, 0.05);
        let line = theil_sen(&trending.days, &trending.values, 0.95).unwrap();
        held += usize::from(line.slope_interval.is_none_or(|i| i.contains(trending.slope)));
        let level = press(&mut draws, 0.0, 0.0);
        let test = mann_kendall(&level.days, &level.values).unwrap();
        false_alarms += usize::from(test.probability().two_sided <= 0.05);
    }
    check_share("Theil-Sen", held, 0.93, 1.0);
    check_share("Mann-Kendall", false_alarms, 0.01, 0.07);
}

/// Nothing has grown: each of delay and braking is said to have grown in at most 2.5 % of the cases, so neither is in at least 93 %.
#[test]
fn splits_raise_few_false_alarms() {
    let mut draws = Draws::with_seed(5);
    let speeds = [20.0, 20.0, 20.0, 40.0, 40.0, 40.0];
    let (mut two, mut series) = (0, 0);
    for _ in 0..PRESSES {
        let days: Vec<[f64; 6]> = (0..6).map(|_| speeds.map(|speed| 40.0 + 1.5 * speed + draws.normal())).collect();
        let dates: Vec<DatedStops<'_>> = days
            .iter()
            .enumerate()
            .map(|(index, times)| DatedStops { day: 30.0 * index as f64, speeds: &speeds, times })
            .collect();
        let is_neither = |growth| usize::from(growth == Growth::Neither);
        two += is_neither(compare_two_dates(dates[0], dates[1]).unwrap().growth);
        series += is_neither(follow_dates(&dates).unwrap().growth);
    }
    check_share("two dates", two, 0.92, 0.97);
    check_share("series", series, 0.92, 0.97);
}

/// Mean number of readings up to the first signal, over 2,000 runs; `first_signal` looks at ever longer stretches of one run.
fn run_length(draws: &mut Draws, shift: f64, first_signal: impl Fn(&[f64]) -> Option<usize>) -> f64 {
    let mut total = 0;
    for _ in 0..PRESSES {
        let mut readings = Vec::new();
        let first = loop {
            let more = readings.len().max(40);
            readings.extend((0..more).map(|_| shift + draws.normal()));
            if let Some(first) = first_signal(&readings) {
                break first;
            }
        };
        total += first + 1;
    }
    total as f64 / PRESSES as f64
}

/// Mean run lengths of the two-sided CUSUM with k 0.5 (Montgomery, table 9.3; NIST/SEMATECH e-Handbook 6.3.2.3; values from memory):
/// h 4: 168 without a shift and 8.38 for one standard deviation; h 5: 465 and 10.4.
#[test]
fn cusum_run_lengths() {
    let mut draws = Draws::with_seed(6);
    for (decision, shift, want) in [(4.0, 0.0, 168.0), (4.0, 1.0, 8.38), (5.0, 0.0, 465.0), (5.0, 1.0, 10.4)] {
        let settings = CusumSettings::for_sigma(0.0, 1.0, decision);
        let got = run_length(&mut draws, shift, |readings| {
            let chart = cusum(readings, settings).unwrap();
            [chart.rise, chart.fall].into_iter().flatten().map(|signal| signal.at).min()
        });
        assert!((got / want - 1.0).abs() < 0.08, "h {decision} shift {shift}: {got}, table {want}");
    }
}

/// Mean run lengths of the EWMA with asymptotic limits (J. M. Lucas, M. S. Saccucci, Technometrics 32 (1990) 1-12; values from memory):
/// lambda 0.2, L 2.962 and lambda 0.25, L 2.998: 500 without a shift, 10.5 and 11 for one standard deviation.
#[test]
fn ewma_run_lengths() {
    let mut draws = Draws::with_seed(7);
    for (lambda, width, shift, want) in
        [(0.2, 2.962, 0.0, 500.0), (0.2, 2.962, 1.0, 10.5), (0.25, 2.998, 0.0, 500.0), (0.25, 2.998, 1.0, 11.0)]
    {
        let settings = EwmaSettings { target: 0.0, sigma: 1.0, lambda, width };
        let got = run_length(&mut draws, shift, |readings| ewma(readings, settings).unwrap().first_signal_asymptotic);
        assert!((got / want - 1.0).abs() < 0.08, "lambda {lambda} shift {shift}: {got}, table {want}");
    }
}
