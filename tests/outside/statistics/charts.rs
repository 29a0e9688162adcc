//! CUSUM and EWMA charts.

use crate::compare::{close, near, printed};
use crate::stored_sets::{set, stored};
use calc::statistics::{CusumSettings, EwmaSettings, cusum, ewma};

/// NIST/SEMATECH e-Handbook 6.3.2.3: target 325, k 0.3175, h 4.1959, twenty means (data from memory, arithmetic redone by hand).
#[test]
fn nist_cusum() {
    let means = [
        324.925, 324.675, 324.725, 324.350, 325.350, 325.225, 324.125, 324.525, 325.225, 324.600, 324.625, 325.150,
        328.325, 327.250, 327.825, 328.500, 326.675, 327.775, 326.875, 328.350,
    ];
    let settings = CusumSettings { target: 325.0, allowance: 0.3175, decision: 4.1959 };
    let chart = cusum(&means, settings).unwrap();
    let upper = ["3.01", "4.94", "7.45", "10.63", "11.99", "14.44", "16.00", "19.04"];
    for (index, want) in upper.into_iter().enumerate() {
        // The handbook's sums are printed from readings with more digits, so one unit of the last place is allowed.
        let want: f64 = want.parse().unwrap();
        near(&format!("upper {}", index + 13), chart.upper[index + 12], want, 0.01);
    }
    let rise = chart.rise.unwrap();
    assert_eq!(rise.at + 1, 14);
    assert_eq!(rise.began_at + 1, 13);
    // Level after the shift by hand: 325 + 0.3175 + 4.94 / 2.
    near("level", rise.level, 327.7875, 1e-9);
    assert_eq!(chart.fall, None);
    let greatest = chart.lower.iter().copied().fold(0.0, f64::max);
    near("lower peak", greatest, 0.72, 0.005);
    assert_eq!(chart.lower.iter().position(|&sum| sum == greatest), Some(7));
}

/// NIST/SEMATECH e-Handbook 6.3.2.4: lambda 0.3, target 50, s 2.0539, width 3 (parameters seen in a public mirror of the page; data
/// from memory, arithmetic redone): limits 52.5884 and 47.4115, averages as listed, all inside.
#[test]
fn nist_ewma() {
    let readings = [
        52.0, 47.0, 53.0, 49.3, 50.1, 47.0, 51.0, 50.1, 51.2, 50.5, 49.6, 47.6, 49.9, 51.3, 47.8, 51.2, 52.6, 52.4,
        53.6, 52.1,
    ];
    let settings = EwmaSettings { target: 50.0, sigma: 2.0539, lambda: 0.3, width: 3.0 };
    let chart = ewma(&readings, settings).unwrap();
    // The handbook works with the rounded factor 0.4201, so its limits differ in the fourth decimal.
    near("upper", chart.upper_asymptotic, 52.5884, 1e-3);
    near("lower", chart.lower_asymptotic, 47.4115, 1e-3);
    let averages = [
        "50.60", "49.52", "50.56", "50.18", "50.16", "49.21", "49.75", "49.85", "50.26", "50.33", "50.11", "49.36",
        "49.52", "50.05", "49.38", "49.92", "50.73", "51.23", "51.94", "51.99",
    ];
    for (index, want) in averages.into_iter().enumerate() {
        printed(&format!("average {}", index + 1), chart.points[index].average, want);
    }
    assert_eq!(chart.first_signal_asymptotic, None);
}

/// The exact limits start at L sigma lambda (one reading alone) and widen to the asymptotic ones; for lambda 1 they are those of a
/// Shewhart chart from the start.
#[test]
fn ewma_limits() {
    let settings = EwmaSettings { target: 10.0, sigma: 2.0, lambda: 0.25, width: 3.0 };
    let chart = ewma(&[10.0; 200], settings).unwrap();
    close("first", chart.points[0].upper, 10.0 + 3.0 * 2.0 * 0.25, 1e-15);
    // Second step by hand: variance lambda^2 (1 + (1 - lambda)^2) sigma^2.
    let second = 10.0 + 3.0 * 2.0 * 0.25 * (1.0f64 + 0.75 * 0.75).sqrt();
    close("second", chart.points[1].upper, second, 1e-15);
    close("last", chart.points[199].upper, chart.upper_asymptotic, 1e-15);
    for pair in chart.points.windows(2) {
        assert!(pair[0].upper <= pair[1].upper && pair[1].lower <= pair[0].lower);
    }
    let shewhart = ewma(&[16.1, 3.9, 12.0], EwmaSettings { lambda: 1.0, ..settings }).unwrap();
    assert_eq!(shewhart.points[0].upper, 16.0);
    assert_eq!(shewhart.first_signal, Some(0));
    assert_eq!(shewhart.points[1].average, 3.9);
}

/// pandas (EWMA) and detecta (CUSUM, on the running total of the differences from the target), versions in the file.
#[test]
fn against_libraries() {
    let all = stored(&["ewma_", "cusum_"]);
    assert!(all.len() >= 60, "{}", all.len());
    for row in all {
        let y = set(row.set).y;
        let arguments: Vec<f64> = row.argument.split(' ').map(|a| a.parse().unwrap()).collect();
        let (target, sigma) = (arguments[0], arguments[1]);
        if row.quantity.starts_with("ewma_") {
            let settings = EwmaSettings { target, sigma, lambda: arguments[2], width: 3.0 };
            let points = ewma(&y, settings).unwrap().points;
            let got = match row.quantity {
                "ewma_last" => points.last().unwrap().average,
                _ => points.iter().map(|p| p.average).fold(f64::MIN, f64::max),
            };
            close(&row.label, got, row.value, 1e-12);
            continue;
        }
        let chart = cusum(&y, CusumSettings::for_sigma(target, sigma, 4.0)).unwrap();
        let first = [chart.rise, chart.fall].into_iter().flatten().min_by_key(|signal| signal.at);
        let got = match row.quantity {
            "cusum_first" => first.map_or(-1.0, |signal| signal.at as f64),
            "cusum_began" => first.unwrap().began_at as f64,
            other => panic!("{other}"),
        };
        near(&row.label, got, row.value, 0.0);
    }
}
