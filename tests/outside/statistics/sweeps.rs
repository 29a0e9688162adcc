//! Sweeps: symmetry, order, units, and lists that are tiny, equal, wild or not numbers.

use crate::compare::near;
use crate::draws::Draws;
use calc::statistics::{
    CusumSettings, EwmaSettings, Line, Summary, cusum, ewma, forecast_limit, mann_kendall, split_delay_and_braking,
    theil_sen,
};

fn random_points(draws: &mut Draws) -> (Vec<f64>, Vec<f64>) {
    let count = draws.whole(3, 30);
    let x: Vec<f64> = (0..count).map(|_| draws.between(0.0, 1000.0)).collect();
    let y = x.iter().map(|x| 150.0 + 0.01 * x + draws.normal()).collect();
    (x, y)
}

/// Changing the sign of y mirrors every result; changing the order of the points changes nothing; other units scale it.
#[test]
fn mirror_order_and_units() {
    let mut draws = Draws::with_seed(11);
    for _ in 0..300 {
        let (x, y) = random_points(&mut draws);
        let mirrored: Vec<f64> = y.iter().map(|y| -y).collect();
        let reversed_x: Vec<f64> = x.iter().rev().copied().collect();
        let reversed_y: Vec<f64> = y.iter().rev().copied().collect();
        let weeks: Vec<f64> = x.iter().map(|x| x / 7.0).collect();

        let line = Line::fit(&x, &y).unwrap();
        let slope = line.slope();
        near("mirror", Line::fit(&x, &mirrored).unwrap().slope(), -slope, 0.0);
        near("order", Line::fit(&reversed_x, &reversed_y).unwrap().slope(), slope, 1e-13);
        near("weeks", Line::fit(&weeks, &y).unwrap().slope() / 7.0, slope, 1e-13);
        let upper = line.prediction_interval_at(1100.0, 0.9).unwrap().high;
        let one_sided = line.upper_prediction_bound_at(1100.0, 0.95).unwrap();
        near("90 % two-sided is 95 % one-sided", upper, one_sided, 1e-9);

        let test = mann_kendall(&x, &y).unwrap();
        let opposite = mann_kendall(&x, &mirrored).unwrap();
        assert_eq!(opposite.sum, -test.sum);
        assert_eq!(opposite.probability().two_sided, test.probability().two_sided);
        assert_eq!(mann_kendall(&reversed_x, &reversed_y), Ok(test));

        let robust = theil_sen(&x, &y, 0.95).unwrap();
        let opposite = theil_sen(&x, &mirrored, 0.95).unwrap();
        assert_eq!(opposite.slope, -robust.slope);
        if let (Some(one), Some(other)) = (robust.slope_interval, opposite.slope_interval) {
            assert_eq!((one.low, one.high), (-other.high, -other.low));
            assert!(one.contains(robust.slope));
        }
        assert_eq!(theil_sen(&reversed_x, &reversed_y, 0.95).unwrap().slope, robust.slope);
    }
}

/// Upper and lower sums change places when the readings are mirrored at the target.
#[test]
fn charts_mirror() {
    let mut draws = Draws::with_seed(12);
    for _ in 0..300 {
        let readings: Vec<f64> = (0..40).map(|_| draws.between(-3.0, 4.0)).collect();
        let mirrored: Vec<f64> = readings.iter().map(|r| -r).collect();
        let settings = CusumSettings::for_sigma(0.0, 1.0, 5.0);
        let (one, other) = (cusum(&readings, settings).unwrap(), cusum(&mirrored, settings).unwrap());
        assert_eq!(one.upper, other.lower);
        assert_eq!(one.rise.map(|s| (s.at, s.began_at, s.level)), other.fall.map(|s| (s.at, s.began_at, -s.level)));
        let settings = EwmaSettings { target: 0.0, sigma: 1.0, lambda: 0.25, width: 2.7 };
        let (one, other) = (ewma(&readings, settings).unwrap(), ewma(&mirrored, settings).unwrap());
        assert_eq!(one.first_signal, other.first_signal);
        // The exact limits are never wider than the asymptotic ones, so they never signal later.
        if let Some(late) = one.first_signal_asymptotic {
            assert!(one.first_signal.unwrap() <= late);
        }
        for signal in [cusum(&readings, CusumSettings::for_sigma(0.0, 1.0, 4.0)).unwrap().rise].into_iter().flatten() {
            assert!(signal.began_at <= signal.at && signal.level > 0.5);
        }
    }
}

/// Intervals grow with confidence and away from the middle of the points.
#[test]
fn intervals_grow() {
    let mut draws = Draws::with_seed(13);
    for _ in 0..100 {
        let (x, y) = random_points(&mut draws);
        let line = Line::fit(&x, &y).unwrap();
        let width = |away: f64, confidence: f64| {
            let interval = line.prediction_interval_at(line.mean_x() + away, confidence).unwrap();
            interval.high - interval.low
        };
        for pair in [0.0, 10.0, 300.0, 5000.0].windows(2) {
            assert!(width(pair[0], 0.95) < width(pair[1], 0.95));
            near("symmetric", width(-pair[1], 0.95), width(pair[1], 0.95), 1e-8);
        }
        for pair in [0.5, 0.8, 0.95, 0.99, 0.999_999].windows(2) {
            assert!(width(100.0, pair[0]) < width(100.0, pair[1]));
        }
        let inner = line.value_interval_at(500.0, 0.95).unwrap();
        let outer = line.prediction_interval_at(500.0, 0.95).unwrap();
        assert!(outer.low < inner.low && inner.high < outer.high);
    }
}

/// One wild reading moves the least-squares slope far and the Theil-Sen slope hardly.
#[test]
fn one_wild_value() {
    let x: Vec<f64> = (0..15).map(f64::from).collect();
    let mut y: Vec<f64> = x.iter().map(|x| 100.0 + 2.0 * x).collect();
    y[14] = 1e6;
    assert!(Line::fit(&x, &y).unwrap().slope() > 1000.0);
    near("Theil-Sen", theil_sen(&x, &y, 0.95).unwrap().slope, 2.0, 1e-12);
    let chart = cusum(&y, CusumSettings::for_sigma(114.0, 10.0, 5.0)).unwrap();
    assert_eq!(chart.rise.unwrap().at, 14);
}

/// Equal readings: no trend, no scatter, no signal, and no division by zero.
#[test]
fn equal_values() {
    let x: Vec<f64> = (0..10).map(f64::from).collect();
    for value in [0.1, 187.0, 1.0 / 3.0] {
        let y = vec![value; 10];
        let test = mann_kendall(&x, &y).unwrap();
        assert_eq!((test.sum, test.z, test.variance), (0, 0.0, 0.0));
        assert_eq!(test.normal.two_sided, 1.0);
        let line = theil_sen(&x, &y, 0.95).unwrap();
        assert_eq!((line.slope, line.intercept), (0.0, value));
        assert_eq!(Line::fit(&x, &y).unwrap().slope(), 0.0);
        let settings = CusumSettings::for_sigma(value, 1.0, 4.0);
        assert_eq!(cusum(&y, settings).unwrap().rise, None);
        assert!(theil_sen(&y, &x, 0.95).is_err());
        assert!(Line::fit(&y, &x).is_err());
    }
}

/// Whatever is handed over, the answer is a value or a refusal, never a panic, and never a number that is not one.
#[test]
fn strange_input_is_answered() {
    let strange = [
        0.0,
        -0.0,
        1.0,
        -1.0,
        5e-324,
        1e-300,
        1e-160,
        1e-9,
        1e9,
        1e99,
        -1e99,
        1e100,
        1e101,
        f64::MAX,
        f64::NAN,
        f64::INFINITY,
        f64::NEG_INFINITY,
    ];
    let mut draws = Draws::with_seed(14);
    for _ in 0..5_000 {
        // Mostly from the usable part of the list, so that the sums are reached as well.
        let last = if draws.whole(0, 3) == 0 { strange.len() - 1 } else { 11 };
        let count = draws.whole(0, 6);
        let mut list = || -> Vec<f64> { (0..count).map(|_| strange[draws.whole(0, last)]).collect() };
        let (x, y) = (list(), list());
        let (one, limit) = (list().first().copied().unwrap_or(1.0), list().first().copied().unwrap_or(2.0));
        if let Ok(summary) = Summary::of(&y) {
            assert!(summary.mean().is_finite());
            assert!(summary.least() <= summary.greatest());
            assert!(summary.standard_deviation().is_none_or(|s| s.is_finite() && s >= 0.0));
        }
        if let Ok(line) = Line::fit(&x, &y) {
            assert!(line.slope().is_finite());
            assert!(line.residual_standard_deviation().is_none_or(|s| s.is_finite()));
            let _ = (line.slope_interval(0.95), line.slope_probability(), line.prediction_interval_at(one, 0.95));
        }
        if let Ok(line) = theil_sen(&x, &y, 0.95) {
            assert!(line.slope.is_finite());
        }
        if let Ok(test) = mann_kendall(&x, &y) {
            let p = test.probability();
            assert!((0.0..=1.0).contains(&p.rising) && (0.0..=1.0).contains(&p.two_sided));
        }
        let _ = forecast_limit(&x, &y, limit);
        let _ = split_delay_and_braking(&x, &y);
        let _ = cusum(&y, CusumSettings { target: one, allowance: limit, decision: one });
        let _ = ewma(&y, EwmaSettings { target: one, sigma: limit, lambda: 0.2, width: 3.0 });
    }
}
