//! The least-squares line.

use crate::compare::{close, near, number, rows};
use crate::stored_sets::{set, stored};
use calc::statistics::{Line, student_t_two_sided};

/// NIST StRD linear regression, set Norris: certified values, 36 points (data from the file in the PyPI wheel of scipy 1.17.1).
#[test]
fn norris_certified() {
    let norris = set("norris");
    assert_eq!(norris.x.len(), 36);
    let line = Line::fit(&norris.x, &norris.y).unwrap();
    let check = |what: &str, got: f64, certified: f64| close(what, got, certified, 5e-13);
    check("B0", line.intercept(), -0.262_323_073_774_029);
    check("B1", line.slope(), 1.002_116_818_020_45);
    check("sd of B0", line.intercept_standard_deviation().unwrap(), 0.232_818_234_301_152);
    check("sd of B1", line.slope_standard_deviation().unwrap(), 0.000_429_796_848_199_937);
    check("residual sd", line.residual_standard_deviation().unwrap(), 0.884_796_396_144_373);
    check("R2", line.r_squared().unwrap(), 0.999_993_745_883_712);
    check("residual squares", line.residual_squares(), 26.617_398_529_422_4);
    assert_eq!(line.degrees_of_freedom(), 34);
}

/// The same points moved by a million in x and y: the slope and its uncertainty keep ten digits.
#[test]
fn norris_moved_far_away() {
    let norris = set("norris");
    let x: Vec<f64> = norris.x.iter().map(|x| x + 1e6).collect();
    let y: Vec<f64> = norris.y.iter().map(|y| y + 1e6).collect();
    let line = Line::fit(&x, &y).unwrap();
    close("B1", line.slope(), 1.002_116_818_020_45, 1e-12);
    close("sd of B1", line.slope_standard_deviation().unwrap(), 0.000_429_796_848_199_937, 1e-10);
}

/// statsmodels: ordinary and weighted lines, their uncertainties, intervals and prediction bounds for every stored set.
#[test]
fn against_statsmodels() {
    let all = stored(&["ols_", "wls_"]);
    assert!(all.len() >= 600, "{}", all.len());
    for row in all {
        let points = set(row.set);
        let (kind, quantity) = row.quantity.split_once('_').unwrap();
        let line = match kind {
            "ols" => Line::fit(&points.x, &points.y),
            "wls" => Line::fit_weighted(&points.x, &points.y, &points.weights),
            other => panic!("{other}"),
        }
        .unwrap();
        let argument = || number(row.argument);
        let got = match quantity {
            "intercept" => line.intercept(),
            "slope" => line.slope(),
            "intercept_sd" => line.intercept_standard_deviation().unwrap(),
            "slope_sd" => line.slope_standard_deviation().unwrap(),
            "residual_sd" => line.residual_standard_deviation().unwrap(),
            "r_squared" => line.r_squared().unwrap(),
            "slope_probability" => line.slope_probability().unwrap(),
            "slope_low" => line.slope_interval(argument()).unwrap().low,
            "slope_high" => line.slope_interval(argument()).unwrap().high,
            "line_low" => line.value_interval_at(argument(), 0.95).unwrap().low,
            "line_high" => line.value_interval_at(argument(), 0.95).unwrap().high,
            "reading_low" => line.prediction_interval_at(argument(), 0.95).unwrap().low,
            "reading_high" => line.prediction_interval_at(argument(), 0.95).unwrap().high,
            "upper_bound_95" => line.upper_prediction_bound_at(argument(), 0.95).unwrap(),
            other => panic!("{other}"),
        };
        close(&row.label, got, row.value, 1e-9);
    }
}

/// mpmath at 34 digits (version in the file). The tail is one-sided there.
#[test]
fn student_t_against_34_digits() {
    let mut count = 0;
    for row in rows(include_str!("stored/student_t.csv")) {
        let degrees: usize = row[0].parse().unwrap();
        let tail = number(row[1]);
        let confidence = 1.0 - 2.0 * tail;
        if confidence > 0.999_99 {
            continue;
        }
        let t = student_t_two_sided(confidence, degrees).unwrap();
        close(&format!("{degrees} {tail}"), t, number(row[2]), 2e-13);
        count += 1;
    }
    assert_eq!(count, 36);
}

/// Residuals add to zero and are at right angles to x (the normal equations); the line passes through the mean point.
#[test]
fn normal_equations() {
    for name in ["norris", "monthly_12", "wild_15", "two_a_day_16"] {
        let points = set(name);
        let line = Line::fit(&points.x, &points.y).unwrap();
        let residuals = line.residuals();
        near(name, residuals.iter().sum(), 0.0, 1e-10);
        let moment: f64 = residuals.iter().zip(&points.x).map(|(r, x)| r * x).sum();
        near(name, moment, 0.0, 1e-7);
    }
}
