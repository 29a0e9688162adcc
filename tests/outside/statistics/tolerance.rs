//! One-sided normal tolerance factors.

use crate::compare::{close, number, printed, rows};
use calc::statistics::{Summary, confidence_of_greatest, tolerance_factor_one_sided, upper_tolerance_bound};

/// Coverage and confidence of the columns of [`TABLE`].
const COLUMNS: [(f64, f64); 5] = [(0.90, 0.95), (0.95, 0.95), (0.99, 0.95), (0.95, 0.99), (0.99, 0.99)];

/// ISO 16269-6, one-sided interval, standard deviation unknown (table values from memory, and recomputed with scipy 1.17.1 as
/// nct.ppf(c, n - 1, z_p sqrt n) / sqrt n; the two agree).
const TABLE: [(usize, [&str; 5]); 11] = [
    (5, ["3.4066", "4.2027", "5.7411", "6.5783", "8.9390"]),
    (6, ["3.0063", "3.7077", "5.0620", "5.4055", "7.3346"]),
    (7, ["2.7554", "3.3995", "4.6417", "4.7279", "6.4119"]),
    (8, ["2.5819", "3.1873", "4.3539", "4.2853", "5.8118"]),
    (9, ["2.4538", "3.0312", "4.1430", "3.9723", "5.3889"]),
    (10, ["2.3546", "2.9110", "3.9811", "3.7383", "5.0737"]),
    (12, ["2.2101", "2.7363", "3.7471", "3.4099", "4.6330"]),
    (15, ["2.0684", "2.5660", "3.5201", "3.1024", "4.2224"]),
    (20, ["1.9260", "2.3960", "3.2952", "2.8079", "3.8316"]),
    (25, ["1.8381", "2.2917", "3.1580", "2.6332", "3.6011"]),
    (30, ["1.7773", "2.2198", "3.0639", "2.5155", "3.4465"]),
];

#[test]
fn every_cell_of_the_table() {
    let mut cells = 0;
    for (count, row) in TABLE {
        for ((coverage, confidence), cell) in COLUMNS.into_iter().zip(row) {
            let k = tolerance_factor_one_sided(count, coverage, confidence).unwrap();
            printed(&format!("n {count} p {coverage} c {confidence}"), k, cell);
            cells += 1;
        }
    }
    assert_eq!(cells, 55);
}

/// NIST/SEMATECH e-Handbook 7.2.6.3: n 43, mean 97.07, s 0.0268 (the page once printed 2.68), 90 % covered, 99 % confidence:
/// exact k 1.8740, upper limit 97.1203 with the approximate k 1.8752. A public worksheet that cites the handbook was read.
#[test]
fn nist_handbook_example() {
    let k = tolerance_factor_one_sided(43, 0.90, 0.99).unwrap();
    printed("k", k, "1.8740");
    // The handbook's limit uses its approximate k; with the exact k the limit differs by less than one in the last place.
    assert!((97.07 + k * 0.0268 - 97.1203).abs() < 0.000_1);
    // The handbook's approximation, worked out here, must lie near the exact factor: a = 0.935573, b = 1.516516.
    let z: f64 = 1.281_551_565_544_600_5;
    let (a, b): (f64, f64) = (0.935_573, 1.516_516);
    let approximate = (z + (z * z - a * b).sqrt()) / a;
    printed("approximate k", approximate, "1.8752");
}

/// Ten stops 182 ... 183 ms: mean 183.7, s 1.888562, mean + 3 s 189.366, 95/95 189.198, 99/95 191.219, greatest 187.
/// Derived by hand from the formulas and the table above.
#[test]
fn ten_stops() {
    let stops = [182.0, 185.0, 181.0, 184.0, 186.0, 183.0, 182.0, 187.0, 184.0, 183.0];
    let summary = Summary::of(&stops).unwrap();
    printed("mean", summary.mean(), "183.7");
    printed("s", summary.standard_deviation().unwrap(), "1.888562");
    printed("mean + 3 s", summary.mean_plus_3_s().unwrap(), "189.366");
    printed("95/95", upper_tolerance_bound(&summary, 0.95, 0.95).unwrap(), "189.198");
    printed("99/95", upper_tolerance_bound(&summary, 0.99, 0.95).unwrap(), "191.219");
    assert_eq!(summary.greatest(), 187.0);
}

/// mpmath at 34 digits (version in the file), n from 2 to 1,000,000.
#[test]
fn against_34_digits() {
    let mut count = 0;
    for row in rows(include_str!("stored/tolerance_factors.csv")) {
        let (n, p, c) = (row[0].parse().unwrap(), number(row[1]), number(row[2]));
        let k = tolerance_factor_one_sided(n, p, c).unwrap();
        // 0.999999 has no exact binary form: 1 - c then carries a relative error of 3e-11, and k with it.
        let relative = if p.max(c) > 0.9999 { 1e-10 } else { 2e-13 };
        close(&format!("n {n} p {p} c {c}, mpmath"), k, number(row[3]), relative);
        count += 1;
    }
    assert_eq!(count, 117);
}

/// scipy.stats.nct (version in the file). The two agree to the rounding of 1 - c.
#[test]
fn against_scipy() {
    for row in rows(include_str!("stored/tolerance_factors.csv")) {
        let (n, p, c): (usize, f64, f64) = (row[0].parse().unwrap(), number(row[1]), number(row[2]));
        let k = tolerance_factor_one_sided(n, p, c).unwrap();
        close(&format!("n {n} p {p} c {c}, scipy"), k, number(row[4]), 1e-11);
    }
}

/// c = 1 - p^n: n 25 0.7226, n 59 0.9515 (95 %), n 299 0.9505 (99 %). Direct from the formula.
#[test]
fn the_greatest_of_n() {
    for (count, coverage, want) in [(25, 0.95, "0.7226"), (59, 0.95, "0.9515"), (299, 0.99, "0.9505")] {
        printed("confidence", confidence_of_greatest(count, coverage).unwrap(), want);
    }
    assert!((confidence_of_greatest(1, 0.95).unwrap() - 0.05).abs() < 1e-15);
}

/// k falls with n (for confidence above one half), grows with coverage and with confidence, and tends to z_p.
#[test]
fn monotony_over_the_permitted_range() {
    let shares = [0.5, 0.6, 0.75, 0.9, 0.95, 0.99, 0.999, 0.999_999];
    let counts = [2, 3, 4, 5, 6, 8, 10, 13, 20, 35, 60, 120, 500, 3_000, 10_000, 100_000, 1_000_000];
    let k = |n, p, c| tolerance_factor_one_sided(n, p, c).unwrap();
    for p in shares {
        for c in &shares[1..] {
            for pair in counts.windows(2) {
                assert!(k(pair[1], p, *c) < k(pair[0], p, *c), "{pair:?} {p} {c}");
            }
        }
    }
    for n in counts {
        for fixed in shares {
            for pair in shares.windows(2) {
                assert!(k(n, pair[1], fixed) > k(n, pair[0], fixed), "{n} p {pair:?} c {fixed}");
                assert!(k(n, fixed, pair[1]) > k(n, fixed, pair[0]), "{n} p {fixed} c {pair:?}");
            }
        }
    }
    assert!((k(1_000_000, 0.95, 0.5) - 1.644_853_626_951_472_2).abs() < 1e-5);
}
