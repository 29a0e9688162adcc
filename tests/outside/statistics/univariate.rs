//! Mean and standard deviation against the certified NIST Statistical Reference Datasets, univariate summary statistics.

use crate::compare::close;
use calc::statistics::{StatisticsError, Summary};

#[track_caller]
fn check(set: &str, values: &[f64], mean: f64, s: f64, mean_relative: f64, s_relative: f64) {
    let summary = Summary::of(values).unwrap();
    assert_eq!(summary.count(), values.len());
    close(&format!("{set} mean"), summary.mean(), mean, mean_relative);
    let got = summary.standard_deviation().unwrap();
    close(&format!("{set} s"), got, s, s_relative);
}

/// `middle`, then `low` and `high` in turn, 1001 values in all.
fn alternating(middle: f64, low: f64, high: f64) -> Vec<f64> {
    let mut values = vec![middle];
    for _ in 0..500 {
        values.push(low);
        values.push(high);
    }
    values
}

#[test]
fn num_acc_1() {
    let values = [10_000_001.0, 10_000_003.0, 10_000_002.0];
    check("NumAcc1", &values, 10_000_002.0, 1.0, 0.0, 0.0);
}

#[test]
fn num_acc_2() {
    check("NumAcc2", &alternating(1.2, 1.1, 1.3), 1.2, 0.1, 4e-16, 1e-14);
}

/// The decimals 1000000.1, .2, .3 are not exact in binary: s of the stored numbers departs from 0.1 by 5e-10 of itself. No double
/// precision program can do better than about 9.5 digits here.
#[test]
fn num_acc_3() {
    let values = alternating(1_000_000.2, 1_000_000.1, 1_000_000.3);
    check("NumAcc3", &values, 1_000_000.2, 0.1, 4e-16, 1e-9);
    // What remains is the decimals' own error: the same set in exact tenths, moved by -1000000, has s of exactly 0.1.
    let tenths = alternating(10_000_002.0, 10_000_001.0, 10_000_003.0);
    check("NumAcc3 in tenths", &tenths, 10_000_002.0, 1.0, 0.0, 1e-15);
}

/// NumAcc4 (10000000.2, .1, .3): certified mean 10000000.2, s 0.1 (from memory; of the same form as NumAcc3).
#[test]
fn num_acc_4() {
    let values = alternating(10_000_000.2, 10_000_000.1, 10_000_000.3);
    check("NumAcc4", &values, 10_000_000.2, 0.1, 4e-16, 1e-8);
}

#[test]
fn mavro() {
    let last_digits = [
        18, 17, 18, 19, 18, 17, 15, 14, 15, 15, 17, 18, 18, 19, 19, 21, 20, 16, 14, 13, 13, 15, 15, 16, 15, 14, 13, 14,
        15, 14, 15, 16, 15, 16, 19, 20, 20, 21, 22, 23, 24, 25, 27, 26, 26, 26, 27, 26, 25, 24,
    ];
    let values: Vec<f64> = last_digits.map(|d| f64::from(20_000 + d) / 10_000.0).to_vec();
    check("Mavro", &values, 2.001_856, 0.000_429_123_454_003_053, 4e-16, 1e-12);
}

/// Beam deflections (Lew). Typed from memory of the NIST file; the certified mean and standard deviation, and the certified lag-1
/// autocorrelation (which depends on the order), show that the typing is right.
#[test]
fn lew() {
    let values = include_str!("stored/lew.csv");
    let values: Vec<f64> = values
        .lines()
        .filter(|line| !line.starts_with('#'))
        .flat_map(|line| line.split_whitespace())
        .map(|word| word.parse().unwrap())
        .collect();
    assert_eq!(values.len(), 200);
    check("Lew", &values, -177.435, 277.332_168_044_316, 1e-15, 2e-15);
}

/// SiRstv (NIST ANOVA, 5 instruments x 5): the pooled within-group standard deviation, certified 0.104076068334656.
#[test]
fn si_rstv_within_groups() {
    let groups = [
        [196.3052, 196.1240, 196.1890, 196.2569, 196.3403],
        [196.3042, 196.3825, 196.1669, 196.3257, 196.0422],
        [196.1303, 196.2005, 196.2889, 196.0343, 196.1811],
        [196.2795, 196.1748, 196.1494, 196.1485, 195.9885],
        [196.2119, 196.1051, 196.1850, 196.0052, 196.2090],
    ];
    let mut squares = 0.0;
    for group in groups {
        let s = Summary::of(&group).unwrap().standard_deviation().unwrap();
        squares += 4.0 * s * s;
    }
    close("SiRstv", (squares / 20.0).sqrt(), 0.104_076_068_334_656, 1e-12);
}

/// One wild value: computed with exact fractions by hand. 100 x 5 and once 1105: mean 15.891..., s = 1100 / sqrt 101.
#[test]
fn one_wild_value() {
    let mut values = vec![5.0; 100];
    values.push(1105.0);
    let s = 1100.0 / 101f64.sqrt();
    check("one wild value", &values, 5.0 + 1100.0 / 101.0, s, 1e-15, 1e-15);
    assert_eq!(Summary::of(&values).unwrap().greatest(), 1105.0);
    assert_eq!(Summary::of(&values).unwrap().least(), 5.0);
}

/// Equal values have no spread at all, however awkward the number.
#[test]
fn equal_values() {
    for value in [0.1, 1.0 / 3.0, 1e-7, 123_456.789, -2.2, 1e99, 0.0] {
        for count in [2, 3, 7, 10, 101] {
            let summary = Summary::of(&vec![value; count]).unwrap();
            assert_eq!(summary.mean(), value);
            assert_eq!(summary.standard_deviation(), Some(0.0));
            assert_eq!(summary.mean_plus_3_s(), Some(value));
        }
    }
}

/// Turning the list round, changing sign, shifting and scaling change the figures as they must.
#[test]
fn symmetry() {
    let values = [182.0, 185.5, 181.25, 184.0, 199.75, 183.0];
    let plain = Summary::of(&values).unwrap();
    let reversed = Summary::of(&values.iter().rev().copied().collect::<Vec<_>>()).unwrap();
    assert_eq!(plain, reversed);
    let negated = Summary::of(&values.map(|x| -x)).unwrap();
    assert_eq!(negated.mean(), -plain.mean());
    assert_eq!(negated.standard_deviation(), plain.standard_deviation());
    assert_eq!(negated.greatest(), -plain.least());
    let scaled = Summary::of(&values.map(|x| 4.0 * x)).unwrap();
    assert_eq!(scaled.mean(), 4.0 * plain.mean());
    assert_eq!(scaled.standard_deviation().unwrap(), 4.0 * plain.standard_deviation().unwrap());
    let moved = Summary::of(&values.map(|x| x + 1_048_576.0)).unwrap();
    close("moved s", moved.standard_deviation().unwrap(), plain.standard_deviation().unwrap(), 1e-15);
}

#[test]
fn tiny_samples() {
    assert_eq!(Summary::of(&[]), Err(StatisticsError::TooFewValues { needed: 1, given: 0 }));
    let one = Summary::of(&[7.0]).unwrap();
    assert_eq!((one.mean(), one.least(), one.greatest()), (7.0, 7.0, 7.0));
    assert_eq!(one.standard_deviation(), None);
    assert_eq!(one.mean_plus_3_s(), None);
    let two = Summary::of(&[7.0, 9.0]).unwrap();
    close("two", two.standard_deviation().unwrap(), 2f64.sqrt(), 1e-15);
}
