//! Theil-Sen line and Mann-Kendall test.

use crate::compare::{close, near, printed};
use crate::stored_sets::{set, stored};
use calc::statistics::{mann_kendall, theil_sen};

fn in_order(count: usize) -> Vec<f64> {
    (1..=count).map(|i| i as f64).collect()
}

/// Textbook example (Gilbert 1987, chapter 16; data from memory): 10, 15, 14, 20. S 4, exact one-sided probability 0.167.
/// Normal approximation as recomputed with pymannkendall: variance 8.6667, z 1.0190, two-sided 0.30818; slope 2.91667.
#[test]
fn four_readings() {
    let y = [10.0, 15.0, 14.0, 20.0];
    let test = mann_kendall(&in_order(4), &y).unwrap();
    assert_eq!(test.sum, 4);
    printed("tau", test.tau, "0.6667");
    printed("variance", test.variance, "8.6667");
    printed("z", test.z, "1.0190");
    printed("normal", test.normal.two_sided, "0.30818");
    printed("exact", test.exact.unwrap().rising, "0.167");
    let line = theil_sen(&in_order(4), &y, 0.95).unwrap();
    printed("slope", line.slope, "2.91667");
    // Four points have six slopes and 1.96 sqrt(8.667) = 5.77: no slope of the six bounds the trend at 95 %.
    assert_eq!(line.slope_interval, None);
}

/// Theil's method on x 1..5; y 1.26 1.27 1.12 1.16 1.03: the ten slopes, by hand, have the median -0.05625; tau -0.6.
#[test]
fn five_readings() {
    let y = [1.26, 1.27, 1.12, 1.16, 1.03];
    close("slope", theil_sen(&in_order(5), &y, 0.95).unwrap().slope, -0.05625, 1e-12);
    close("tau", mann_kendall(&in_order(5), &y).unwrap().tau, -0.6, 1e-15);
}

/// Exact probabilities of S as in Kendall's table (Gilbert 1987, table A18; values from memory): n 4, S 6: 0.042; n 5, S 8: 0.042,
/// S 10: 0.0083; n 8, S 16: 0.031; n 9, S 18: 0.038; n 10, S 21: 0.036, S 23: 0.023.
#[test]
fn table_of_exact_probabilities() {
    let check = |count: usize, sum: i64, want: &str| {
        let y = order_with_sum(count, sum);
        let test = mann_kendall(&in_order(count), &y).unwrap();
        assert_eq!(test.sum, sum);
        printed(&format!("n {count} S {sum}"), test.exact.unwrap().rising, want);
    };
    check(4, 0, "0.625");
    check(4, 2, "0.375");
    check(4, 4, "0.167");
    check(4, 6, "0.042");
    check(5, 8, "0.042");
    check(5, 10, "0.0083");
    check(8, 16, "0.031");
    check(9, 18, "0.038");
    check(10, 21, "0.036");
    check(10, 23, "0.023");
}

/// A rising list in which values are moved down until it has the falling pairs that S asks for.
fn order_with_sum(count: usize, sum: i64) -> Vec<f64> {
    let pairs = (count * (count - 1) / 2) as i64;
    let mut falling = ((pairs - sum) / 2) as usize;
    let mut order = Vec::new();
    for value in 1..=count {
        let moved = falling.min(order.len());
        order.insert(order.len() - moved, value as f64);
        falling -= moved;
    }
    assert_eq!(falling, 0);
    order
}

/// All orders of 6 values counted one by one give the same distribution.
#[test]
fn exact_against_counting_all_orders() {
    let mut sums = Vec::new();
    let mut order: Vec<f64> = in_order(6);
    permute(&mut order, 6, &mut |y| sums.push(mann_kendall(&in_order(6), y).unwrap()));
    assert_eq!(sums.len(), 720);
    for test in &sums {
        let rising = sums.iter().filter(|other| other.sum >= test.sum).count();
        let either = sums.iter().filter(|other| other.sum.abs() >= test.sum.abs()).count();
        let exact = test.exact.unwrap();
        near("rising", exact.rising, rising as f64 / 720.0, 1e-15);
        near("two-sided", exact.two_sided, either as f64 / 720.0, 1e-15);
    }
    // And the variance of S over all orders is the formula's, n (n - 1) (2 n + 5) / 18.
    let squares: i64 = sums.iter().map(|test| test.sum * test.sum).sum();
    close("variance", squares as f64 / 720.0, sums[0].variance, 1e-14);
}

fn permute(values: &mut Vec<f64>, count: usize, visit: &mut dyn FnMut(&[f64])) {
    if count <= 1 {
        visit(values);
        return;
    }
    for last in 0..count {
        values.swap(last, count - 1);
        permute(values, count - 1, visit);
        values.swap(last, count - 1);
    }
}

/// With ties in x and y: the variance of S over all orders of y equals Kendall's formula.
#[test]
fn variance_with_ties_against_counting_all_orders() {
    let x = [1.0, 1.0, 2.0, 3.0, 3.0, 3.0, 4.0];
    let mut y = vec![5.0, 5.0, 5.0, 6.0, 7.0, 7.0, 9.0];
    let (mut squares, mut count, mut variance) = (0, 0, 0.0);
    permute(&mut y, 7, &mut |y| {
        let test = mann_kendall(&x, y).unwrap();
        squares += test.sum * test.sum;
        count += 1;
        variance = test.variance;
        assert_eq!(test.exact, None);
    });
    assert_eq!(count, 5040);
    close("variance", squares as f64 / 5040.0, variance, 1e-14);
}

/// pymannkendall and scipy (versions in the file).
#[test]
fn against_libraries() {
    let all = stored(&["mk_", "kendall_", "ts_"]);
    assert!(all.len() >= 100, "{}", all.len());
    for row in all {
        let points = set(row.set);
        let test = mann_kendall(&points.x, &points.y).unwrap();
        let line = theil_sen(&points.x, &points.y, 0.95).unwrap();
        let got = match row.quantity {
            "mk_sum" => test.sum as f64,
            "mk_tau" => test.tau,
            "mk_variance" => test.variance,
            "mk_z" => test.z,
            "mk_normal_two_sided" => test.normal.two_sided,
            "mk_exact_two_sided" => test.exact.unwrap().two_sided,
            "mk_exact_rising" => test.exact.unwrap().rising,
            "kendall_uncorrected_z" => test.sum.abs() as f64 / test.variance.sqrt(),
            "ts_slope" => line.slope,
            "ts_intercept" => line.intercept,
            "ts_low" | "ts_high" => {
                interval_end(&row.label, row.quantity, row.value, &points.x, &points.y);
                continue;
            }
            other => panic!("{other}"),
        };
        near(&row.label, got, row.value, 1e-9 * row.value.abs() + 1e-15);
    }
}

/// scipy rounds the rank of the interval's ends to the nearest, here it is rounded to the wider side: the end is the same slope as
/// scipy's or the next one outwards, or there is none where scipy takes the outermost slope instead.
fn interval_end(label: &str, quantity: &str, by_scipy: f64, x: &[f64], y: &[f64]) {
    let Some(interval) = theil_sen(x, y, 0.95).unwrap().slope_interval else {
        assert!(x.len() <= 5, "{label}");
        return;
    };
    let mut slopes = Vec::new();
    for later in 1..x.len() {
        for earlier in 0..later {
            if x[later] != x[earlier] {
                slopes.push((y[later] - y[earlier]) / (x[later] - x[earlier]));
            }
        }
    }
    let hair = 1e-12 * by_scipy.abs();
    let (inner, outer) = match quantity {
        "ts_low" => (by_scipy, interval.low),
        _ => (-by_scipy, -interval.high),
    };
    assert!(outer <= inner + hair, "{label}: {outer} {inner}");
    let sign = if quantity == "ts_low" { 1.0 } else { -1.0 };
    let between = slopes.iter().filter(|&&slope| outer + hair < sign * slope && sign * slope < inner - hair).count();
    assert_eq!(between, 0, "{label}: {outer} {inner}");
}
