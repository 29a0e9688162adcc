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

fn sample(tag: &str) -> String {
    format!("{}/../../sample-presses/presses/{tag}.ron", env!("CARGO_MANIFEST_DIR"))
}

fn json(line: &str) -> serde_json::Value {
    let outcome = run_line(&format!("{line} --json"));
    serde_json::from_str(&outcome.out).unwrap_or_else(|error| panic!("{line}: {error} {outcome:?}"))
}

/// Two stops of a two-stage brake by a fourth-order Runge-Kutta script with steps of 20 microseconds, written apart from this program.
#[test]
fn pressure_brakes_on_both_paths() {
    let drive =
        "--stroke-mm 250 --rod-mm 1150 --moving-kg 3400 --inertia-kgm2 95 --counterbalance-n 31000 --friction-nm 150";
    let brake = "--brake-pressure delay-ms=30,full-bar=60,clutch-bar=36,high-bar=12,low-bar=2,touch-bar=24,fast-ms=18,slow-ms=110,dump-ms=16,torque-nm=7800";
    for (path, expected) in [("normal", NORMAL_MS), ("emergency", EMERGENCY_MS)] {
        let found = json(&format!("predict {drive} {brake} --path {path} --speed 48 --angle 90"));
        let value = found["stop_time_ms"].as_f64().unwrap();
        assert!((value - expected).abs() < 2e-3, "{path}: {value} against {expected}");
    }
}

const NORMAL_MS: f64 = 182.6135;
const EMERGENCY_MS: f64 = 151.6242;

#[test]
fn a_press_gives_what_the_options_leave_open() {
    let press = sample("E-115");
    let of_press = json(&format!("predict {press} --die-kg 420 --path normal --speed 60 --angle 90"));
    let given = json(
        "predict --stroke-mm 140 --rod-mm 620 --moving-kg 1200 --inertia-kgm2 18 --counterbalance-n 9450 --friction-nm 45 \
         --brake-ramp 58,70,1900 --speed 60 --angle 90",
    );
    let time = |value: &serde_json::Value| value["stop_time_ms"].as_f64().unwrap();
    assert!((time(&of_press) - time(&given)).abs() < 1e-6);
    assert!(given["from_stop_tests"].is_null() && given["safeguards"].as_array().unwrap().is_empty());
    let interval = &of_press["from_stop_tests"]["interval_ms"];
    assert!(interval[0].as_f64().unwrap() < time(&of_press) && time(&of_press) < interval[1].as_f64().unwrap());
    assert_eq!(of_press["safeguards"].as_array().unwrap().len(), 2);
    for guard in of_press["safeguards"].as_array().unwrap() {
        assert_eq!(guard["answer"], "unproven");
    }
    let heavier = json(&format!("predict {press} --die-kg 900 --path normal --speed 60 --angle 90"));
    assert!(time(&of_press) < time(&heavier));
}

#[test]
fn a_map_of_a_press_covers_its_speeds() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("map.csv");
    let outcome = run_line(&format!("map {} --out {}", sample("E-116"), path.display()));
    assert_eq!(outcome.code, 0, "{outcome:?}");
    assert!(outcome.out.contains("Map of 21600 stops"), "{}", outcome.out);
    let text = std::fs::read_to_string(path).unwrap();
    assert!(text.lines().any(|line| line.starts_with("0,24,")) && text.lines().any(|line| line.starts_with("359,48,")));
}

#[test]
fn the_fit_of_a_press_gives_its_brake_back_or_says_what_lacks() {
    let found = json(&format!("fit {}", sample("E-116")));
    let (low, high) = (&found["delay_interval_ms"][0], &found["delay_interval_ms"][1]);
    assert!(low.as_f64().unwrap() < 31.5 && 28.5 < high.as_f64().unwrap(), "the stops were made with 30 ms: {found}");
    assert_eq!(found["conditions"].as_array().unwrap().len(), 12);
    let later = json(&format!("fit {}", sample("E-115")));
    assert_eq!(later["later_tests"].as_array().unwrap().len(), 2);
    let lacking = run_line(&format!("fit {}", sample("E-101")));
    assert!(lacking.code == 2 && lacking.err.contains("--moving-kg"), "{lacking:?}");
    assert_eq!(run_line(&format!("predict {} --speed 60 --angle 90", sample("E-106"))).code, 2);
}
