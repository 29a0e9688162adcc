//! How long trend, forecast and step of one press with 120 monthly readings take, and beside it the same by general-purpose
//! statistics libraries on the same readings in the same run.
//!
//! `cargo bench -p tests --bench trend`. The comparison runs if the environment variable SLIDEHALT_PYTHON names a Python with
//! numpy, scipy, pandas and pymannkendall.
#![allow(missing_docs)]

use std::hint::black_box;
use std::io::Write;
use std::process::{Command, Stdio};
use std::time::Instant;

use calc::statistics::{
    CusumSettings, EwmaSettings, Forecast, Line, Summary, cusum, ewma, forecast_limit, mann_kendall, theil_sen,
};

const READINGS: usize = 120;
const LIMIT_MS: f64 = 230.0;
const RUNS: usize = 300;

fn main() {
    let (days, means) = readings();
    let best = (0..RUNS)
        .map(|_| {
            let began = Instant::now();
            black_box(work(black_box(&days), black_box(&means)));
            began.elapsed().as_secs_f64()
        })
        .fold(f64::INFINITY, f64::min);
    let (slope, bound_day) = work(&days, &means);
    println!("ours: {:.1} us for {READINGS} readings; slope {slope:.9} ms/day, bound day {bound_day:.6}", best * 1e6);
    match std::env::var("SLIDEHALT_PYTHON") {
        Ok(python) => match reference(&python, &days, &means) {
            Ok((seconds, their_slope, their_day)) => {
                println!("libraries: {:.1} us; slope {their_slope:.9} ms/day, bound day {their_day:.6}", seconds * 1e6);
                println!("ratio {:.0}", seconds / best);
                assert!(
                    (slope - their_slope).abs() < 1e-9 && (bound_day - their_day).abs() < 1e-3,
                    "not the same work"
                );
            }
            Err(why) => println!("libraries: not compared, {why}"),
        },
        Err(_) => println!("libraries: not compared, SLIDEHALT_PYTHON names no Python"),
    }
}

/// Theil-Sen slope with interval, Mann-Kendall, least-squares line, forecast of the upper bound, CUSUM and EWMA.
fn work(days: &[f64], means: &[f64]) -> (f64, f64) {
    let slope = theil_sen(days, means, 0.95).expect("slope").slope;
    black_box(mann_kendall(days, means).expect("trend"));
    black_box(Line::fit(days, means).expect("line"));
    let base = Summary::of(&means[..6]).expect("baseline");
    let sigma = base.standard_deviation().expect("scatter");
    black_box(cusum(means, CusumSettings::for_sigma(base.mean(), sigma, 5.0)).expect("cusum"));
    black_box(ewma(means, EwmaSettings { target: base.mean(), sigma, width: 2.7, lambda: 0.2 }).expect("ewma"));
    match forecast_limit(days, means, LIMIT_MS).expect("forecast") {
        Forecast::Ahead { bound_day, .. } => (slope, bound_day),
        other => panic!("{other:?}"),
    }
}

/// Ten years of monthly readings of an invented press: 0.15 ms a month and an even scatter from a fixed seed.
fn readings() -> (Vec<f64>, Vec<f64>) {
    let mut state = 20_261_201_u64;
    let mut even = || {
        state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (state >> 11) as f64 / (1_u64 << 53) as f64 - 0.5
    };
    (0..READINGS).map(|month| (month as f64 * 30.0, 183.0 + 0.15 * month as f64 + 4.0 * even())).unzip()
}

fn reference(python: &str, days: &[f64], means: &[f64]) -> Result<(f64, f64, f64), String> {
    let script = concat!(env!("CARGO_MANIFEST_DIR"), "/benches/trend_reference.py");
    let mut child = Command::new(python)
        .args([script, &LIMIT_MS.to_string()])
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .spawn()
        .map_err(|error| format!("{python} could not be started: {error}"))?;
    let lines: String = days.iter().zip(means).map(|(day, mean)| format!("{day:?} {mean:?}\n")).collect();
    let mut input = child.stdin.take().ok_or("no standard input")?;
    input.write_all(lines.as_bytes()).map_err(|error| error.to_string())?;
    drop(input);
    let done = child.wait_with_output().map_err(|error| error.to_string())?;
    let text = String::from_utf8_lossy(&done.stdout).into_owned();
    let figures: Vec<f64> = text.split_whitespace().filter_map(|word| word.parse().ok()).collect();
    match figures[..] {
        [seconds, slope, day] if done.status.success() => Ok((seconds, slope, day)),
        _ => Err(format!("{python} ended with {} and said {text:?}", done.status)),
    }
}
