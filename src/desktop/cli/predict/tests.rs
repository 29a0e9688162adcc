//! Predicted stops against an independent public solver, and nonsense refused in words.

use crate::cli::run_line;

const DRIVE_A: &str =
    "--stroke-mm 150 --rod-mm 600 --moving-kg 900 --inertia-kgm2 22 --counterbalance-n 8000 --friction-nm 60";

#[test]
fn two_stops_agree_with_an_independent_solver() {
    // Eighth-order Runge-Kutta of SciPy at a relative tolerance of 1e-11, to the digits that were written down.
    for (speed, angle, time_ms, angle_deg, travel_mm) in
        [(40, 90, 101.2124, 19.8453, 24.9169), (60, 60, 115.5129, 32.9590, 42.5390)]
    {
        let line =
            format!("predict {DRIVE_A} --brake-ramp 45,60,4200 --path normal --speed {speed} --angle {angle} --json");
        let outcome = run_line(&line);
        let value: serde_json::Value =
            serde_json::from_str(&outcome.out).unwrap_or_else(|error| panic!("{error}: {outcome:?}"));
        for (key, expected) in
            [("stop_time_ms", time_ms), ("stop_angle_deg", angle_deg), ("slide_travel_mm", travel_mm)]
        {
            let found = value[key].as_f64().unwrap();
            assert!((found - expected).abs() <= 0.000_06, "{key}: {found} against {expected}");
        }
    }
}

#[test]
fn a_pressure_brake_is_read_by_its_keys_and_stops_harder_on_the_emergency_path() {
    let brake = "delay-ms=30,full-bar=60,clutch-bar=36,high-bar=12,low-bar=3,touch-bar=24,fast-ms=20,slow-ms=60,dump-ms=15,torque-nm=4200";
    let time = |path: &str| {
        let line = format!("predict {DRIVE_A} --brake-pressure {brake} --path {path} --speed 40 --angle 90 --json");
        let value: serde_json::Value = serde_json::from_str(&run_line(&line).out).unwrap();
        value["stop_time_ms"].as_f64().unwrap()
    };
    assert!(time("emergency") < time("normal"));
}

#[test]
fn nonsense_is_refused_in_words() {
    let ramp = "--brake-ramp 45,60,4200 --path normal --speed 40 --angle 90";
    for (line, words) in [
        (format!("predict --stroke-mm 150 --rod-mm 60 --moving-kg 900 --inertia-kgm2 22 {ramp}"), "rod"),
        (format!("predict --stroke-mm 150 --rod-mm 600 --moving-kg -900 --inertia-kgm2 22 {ramp}"), "mass"),
        (format!("predict {DRIVE_A} --brake-ramp 45,60,4200 --path normal --speed 0 --angle 90"), "speed"),
        (
            "predict --stroke-mm 150 --rod-mm 600 --moving-kg 9000 --inertia-kgm2 22 --brake-ramp 45,60,300 --path normal --speed 40 --angle 60".to_owned(),
            "brake",
        ),
        (format!("predict {DRIVE_A} --brake-ramp 45,60 --path normal --speed 40 --angle 90"), "three"),
        (
            format!("predict {DRIVE_A} --brake-pressure colour=3 --path normal --speed 40 --angle 90"),
            "colour is not known",
        ),
        (format!("predict {DRIVE_A} --path normal --speed 40 --angle 90"), "No brake is given"),
        (format!("predict {DRIVE_A} {}", ramp.replace("40", "NaN")), "Speed is NaN"),
    ] {
        let outcome = run_line(&line);
        assert_eq!(outcome.code, 2, "{line}");
        assert!(outcome.err.to_lowercase().contains(&words.to_lowercase()), "{line}: {}", outcome.err);
        assert!(outcome.out.is_empty());
    }
}
