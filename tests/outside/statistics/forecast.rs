//! When the limit is reached.

use crate::compare::near;
use crate::stored_sets::{set, stored};
use calc::statistics::{Forecast, Line, NoForecast, Reached, forecast_limit};

/// statsmodels for the bound, scipy's root finder for the day (versions in the file).
#[test]
fn against_statsmodels() {
    let all = stored(&["forecast_"]);
    assert!(all.len() >= 25, "{}", all.len());
    for row in all {
        let points = set(row.set);
        let forecast = forecast_limit(&points.x, &points.y, row.argument.parse().unwrap()).unwrap();
        match (row.quantity, forecast) {
            ("forecast_bound", Forecast::Ahead { bound_day, .. }) => {
                near(&row.label, bound_day, row.value, 1e-6);
            }
            ("forecast_line", Forecast::Ahead { line_day, .. }) => {
                near(&row.label, line_day.unwrap(), row.value, 1e-6);
            }
            ("forecast_none", got) => assert!(
                matches!(got, Forecast::CannotTell(NoForecast::SlopeNotDistinguishable { .. })),
                "{}: {got:?}",
                row.label
            ),
            ("forecast_beyond", got) => {
                assert!(matches!(got, Forecast::CannotTell(NoForecast::BeyondHorizon { .. })), "{}: {got:?}", row.label)
            }
            (_, got) => panic!("{}: {got:?}", row.label),
        }
    }
}

/// The crossing is the root of the bound's own equation, written as a quadratic and solved by the school formula.
#[test]
fn against_the_closed_form() {
    let points = set("monthly_12");
    let line = Line::fit(&points.x, &points.y).unwrap();
    for limit in [192.0, 200.0, 220.0] {
        let Forecast::Ahead { bound_day, .. } = forecast_limit(&points.x, &points.y, limit).unwrap() else { panic!() };
        let (n, mean) = (12.0, line.mean_x());
        let squares: f64 = points.x.iter().map(|x| (x - mean) * (x - mean)).sum();
        let s = line.residual_standard_deviation().unwrap();
        // Student t, 10 degrees of freedom, 5 % above: 1.8124611228 (any table: 1.812).
        let ts = 1.812_461_122_811_676 * s;
        let rest = limit - line.value_at(mean);
        let b = line.slope();
        let a2 = b * b - ts * ts / squares;
        let a1 = -2.0 * b * rest;
        let a0 = rest * rest - ts * ts * (1.0 + 1.0 / n);
        // The smaller root: there the line is still below the limit.
        let root = (-a1 - (a1 * a1 - 4.0 * a2 * a0).sqrt()) / (2.0 * a2);
        near("bound day", bound_day, mean + root, 1e-7);
        let bound = line.upper_prediction_bound_at(bound_day, 0.95).unwrap();
        near("bound on that day", bound, limit, 1e-9);
    }
}

fn rising(days: &[f64]) -> Vec<f64> {
    // A small fixed zigzag about 100 + 0.1 per day.
    let zigzag = [0.4, -0.3, 0.1, -0.4, 0.3, -0.1];
    days.iter().enumerate().map(|(i, d)| 100.0 + 0.1 * d + zigzag[i % 6]).collect()
}

#[test]
fn already_reached() {
    let days: Vec<f64> = (0..8).map(|i| f64::from(i) * 30.0).collect();
    let values = rising(&days);
    let latest = values[7];
    let forecast = |limit| forecast_limit(&days, &values, limit).unwrap();
    // At the limit counts as reached, and so does a single earlier reading above it.
    assert_eq!(forecast(latest), Forecast::AlreadyReached(Reached::Reading { day: 210.0, value: latest }));
    let mut peaked = values.clone();
    peaked[3] = 130.0;
    assert_eq!(
        forecast_limit(&days, &peaked, 125.0).unwrap(),
        Forecast::AlreadyReached(Reached::Reading { day: 90.0, value: 130.0 })
    );
    // One reading is enough to say that the limit is reached, though too few for anything else.
    assert!(matches!(
        forecast_limit(&[1.0], &[130.0], 125.0).unwrap(),
        Forecast::AlreadyReached(Reached::Reading { .. })
    ));
    let line = Line::fit(&days, &values).unwrap();
    let bound = line.upper_prediction_bound_at(210.0, 0.95).unwrap();
    assert!(matches!(
        forecast(0.5 * (bound + latest.max(line.value_at(210.0)))),
        Forecast::AlreadyReached(Reached::Bound { .. })
    ));
    assert!(matches!(forecast(bound + 0.1), Forecast::Ahead { .. }));
    let low_last = [&values[..7], &[line.value_at(210.0) - 2.0]].concat();
    let low_line = Line::fit(&days, &low_last).unwrap().value_at(210.0);
    let highest = low_last.iter().copied().fold(f64::MIN, f64::max);
    if highest < low_line {
        assert!(matches!(
            forecast_limit(&days, &low_last, 0.5 * (highest + low_line)).unwrap(),
            Forecast::AlreadyReached(Reached::Line { .. })
        ));
    } else {
        panic!("the case was to have its line above its readings: {highest} {low_line}");
    }
}

#[test]
fn why_nothing_can_be_told() {
    let days: Vec<f64> = (0..8).map(|i| f64::from(i) * 30.0).collect();
    let falling: Vec<f64> = rising(&days).iter().map(|y| 300.0 - y).collect();
    assert!(matches!(
        forecast_limit(&days, &falling, 500.0).unwrap(),
        Forecast::CannotTell(NoForecast::Falling { .. })
    ));
    assert!(matches!(
        forecast_limit(&days, &[100.0; 8], 500.0).unwrap(),
        Forecast::CannotTell(NoForecast::SlopeNotDistinguishable { .. })
    ));
    assert_eq!(forecast_limit(&[5.0; 8], &rising(&days), 500.0).unwrap(), Forecast::CannotTell(NoForecast::OneDay));
    assert_eq!(
        forecast_limit(&days, &rising(&days), 1000.0).unwrap(),
        Forecast::CannotTell(NoForecast::BeyondHorizon { horizon_days: 3652.5 })
    );
    for wrong in [f64::NAN, f64::INFINITY] {
        let mut values = rising(&days);
        assert!(forecast_limit(&days, &values, wrong).is_err());
        values[2] = wrong;
        assert!(forecast_limit(&days, &values, 500.0).is_err());
        assert!(forecast_limit(&values, &days, 500.0).is_err());
    }
    assert!(forecast_limit(&days, &days[1..], 500.0).is_err());
}

/// The bound comes before the line; a higher limit comes later; moving all days moves the forecast by as much.
#[test]
fn order_and_shift() {
    let days: Vec<f64> = (0..8).map(|i| f64::from(i) * 30.0).collect();
    let values = rising(&days);
    let mut before = 0.0;
    for limit in [124.0, 130.0, 150.0, 200.0, 300.0] {
        let Forecast::Ahead { bound_day, line_day: Some(line_day), .. } =
            forecast_limit(&days, &values, limit).unwrap()
        else {
            panic!("{limit}")
        };
        assert!(before < bound_day && bound_day < line_day);
        before = bound_day;
        let moved: Vec<f64> = days.iter().map(|d| d + 20_000.0).collect();
        let Forecast::Ahead { bound_day: moved, .. } = forecast_limit(&moved, &values, limit).unwrap() else {
            panic!("{limit}")
        };
        near("moved", moved - 20_000.0, bound_day, 1e-8);
    }
}
