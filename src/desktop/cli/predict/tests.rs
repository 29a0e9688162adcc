//! Stops of an independent solver put to the command line, and what it refuses.

use std::path::{Path, PathBuf};

use clap::Parser;

use crate::cli::{Cli, Outcome, run};

fn slidehalt(line: &str) -> Outcome {
    let cli = Cli::try_parse_from(std::iter::once("slidehalt").chain(line.split_whitespace()))
        .unwrap_or_else(|error| panic!("{line}: {error}"));
    run(cli.command.expect("a command"))
}

fn json(line: &str) -> serde_json::Value {
    let outcome = slidehalt(&format!("{line} --json"));
    serde_json::from_str(&outcome.out).unwrap_or_else(|error| panic!("{line}: {error} {outcome:?}"))
}

const DRIVE: &str =
    "--stroke-mm 150 --rod-mm 600 --moving-kg 900 --inertia-kgm2 22 --counterbalance-n 8000 --friction-nm 60";
const RAMP: &str = "--brake-ramp 45,60,4200 --path normal";

fn sample(tag: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("../../sample-presses/presses/{tag}.ron"))
}

/// Eighth-order Runge-Kutta (DOP853) of a public library at a relative tolerance of 1e-11.
#[test]
fn the_two_drive_a_cases() {
    for (speed, angle, ms, deg, mm) in [(40, 90, 101.2124, 19.8453, 24.9169), (60, 60, 115.5129, 32.9590, 42.5390)] {
        let found = json(&format!("predict {DRIVE} {RAMP} --speed {speed} --angle {angle}"));
        for (key, expected) in [("stop_time_ms", ms), ("stop_angle_deg", deg), ("slide_travel_mm", mm)] {
            let value = found[key].as_f64().unwrap();
            assert!((value - expected).abs() <= 5e-5, "{key}: {value} against {expected}");
        }
        assert_eq!(found["answer"], "unproven");
    }
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
    let single = "--brake-pressure delay-ms=30,full-bar=60,clutch-bar=36,touch-bar=24,dump-ms=16,torque-nm=7800";
    let found = json(&format!("predict {drive} {single} --path emergency --speed 48 --angle 90"));
    assert!((found["stop_time_ms"].as_f64().unwrap() - EMERGENCY_MS).abs() < 2e-3);
}

const NORMAL_MS: f64 = 182.6135;
const EMERGENCY_MS: f64 = 151.6242;

#[test]
fn a_press_gives_what_the_options_leave_open() {
    let press = sample("E-115").display().to_string();
    let of_press = json(&format!("predict {press} --die-kg 420 --path normal --speed 60 --angle 90"));
    let given = json(
        "predict --stroke-mm 140 --rod-mm 620 --moving-kg 1200 --inertia-kgm2 18 --counterbalance-n 9450 --friction-nm 45 \
         --brake-ramp 58,70,1900 --speed 60 --angle 90",
    );
    let time = |value: &serde_json::Value| value["stop_time_ms"].as_f64().unwrap();
    assert!((time(&of_press) - time(&given)).abs() < 1e-6);
    assert!(given["fitted"].is_null() && given["safeguards"].as_array().unwrap().is_empty());
    let (low, high) = (&of_press["fitted"]["low_ms"], &of_press["fitted"]["high_ms"]);
    assert!(low.as_f64().unwrap() < time(&of_press) && time(&of_press) < high.as_f64().unwrap());
    for guard in of_press["safeguards"].as_array().unwrap() {
        assert_eq!(guard["answer"], "unproven");
    }
    let heavier = json(&format!("predict {press} --die-kg 900 --path normal --speed 60 --angle 90"));
    assert!(time(&of_press) < time(&heavier));
}

#[test]
fn nonsense_is_refused_in_words() {
    let drive = |change: &str, to: &str| {
        let mut words: Vec<String> = DRIVE.split_whitespace().map(str::to_owned).collect();
        let place = words.iter().position(|word| word == change).expect("an option of the drive");
        words[place + 1] = to.to_owned();
        words.join(" ")
    };
    let at = "--speed 40 --angle 90";
    let pressure = "--brake-pressure delay-ms=30,full-bar=60,clutch-bar=36,touch-bar=24,fast-ms=18,torque-nm=7800";
    for (line, words) in [
        (format!("{} {RAMP} {at}", drive("--rod-mm", "70")), "connecting rod"),
        (format!("{} {RAMP} {at}", drive("--moving-kg", "-900")), "slide mass"),
        (format!("{} {RAMP} {at}", drive("--inertia-kgm2", "0")), "inertia"),
        (format!("{} {RAMP} {at}", drive("--stroke-mm", "NaN")), "Stroke is NaN."),
        (format!("{} {RAMP} {at}", drive("--stroke-mm", "x")), "Stroke is x."),
        (format!("{DRIVE} --brake-ramp 45,60,40 {at}"), "brake"),
        (format!("{DRIVE} --brake-ramp 45,60 {at}"), "three figures"),
        (format!("{DRIVE} {RAMP} --speed 0 --angle 90"), "crank speed"),
        (format!("{DRIVE} {RAMP} --speed 40 --angle 400"), "crank angle"),
        (format!("{DRIVE} {at}"), "The brake is not given."),
        (format!("{RAMP} {at}"), "The stroke is not given."),
        (format!("{DRIVE} {pressure} {at}"), "The stop path is not given."),
        (format!("{DRIVE} {pressure},high-bar=12 --path normal {at}"), "lacks low-bar, slow-ms."),
        (format!("{DRIVE} {pressure},cold-bar=12 --path normal {at}"), "A key of the pressure brake is cold-bar."),
        (format!("{DRIVE} --path emergency {pressure} {at}"), "lacks dump-ms."),
    ] {
        let outcome = slidehalt(&format!("predict {line}"));
        assert_eq!(outcome.code, 2, "{line}: {outcome:?}");
        assert!(outcome.err.contains(words), "{line}: {}", outcome.err);
        assert!(outcome.out.is_empty(), "{line}");
    }
    assert_eq!(slidehalt(&format!("predict {} {at}", sample("E-106").display())).code, 2);
}

#[test]
fn a_map_is_written_as_table_and_as_pictures() {
    let folder = tempfile::tempdir().unwrap();
    let write = |name: &str| {
        let path = folder.path().join(name);
        let outcome = slidehalt(&format!("map {DRIVE} {RAMP} --speeds 40,60,20 --angles 36 --out {}", path.display()));
        assert_eq!(outcome.code, 0, "{outcome:?}");
        assert!(
            outcome.out.contains("72 predicted stops") && outcome.out.contains("from 60.00° at 60.000"),
            "{outcome:?}"
        );
        std::fs::read(path).unwrap()
    };
    let table = String::from_utf8(write("map.csv")).unwrap();
    assert_eq!(table.lines().count(), 73);
    let cell =
        table.lines().find(|line| line.starts_with("90,40,") || line.starts_with("90.00000000000001,40,")).unwrap();
    let time: f64 = cell.split(',').nth(2).unwrap().parse().unwrap();
    assert!((time - 101.2124).abs() < 6e-5, "{cell}");
    let picture = image::load_from_memory(&write("map.png")).unwrap();
    assert_eq!((picture.width(), picture.height()), (720, 360));
    let drawing = String::from_utf8(write("map.svg")).unwrap();
    assert!(drawing.starts_with("<svg") && drawing.ends_with("</svg>\n") && drawing.contains("strokes/min"));
    assert_eq!(slidehalt(&format!("map {DRIVE} {RAMP} --speeds 40,60,20 --out x.txt")).code, 2);
    assert_eq!(
        slidehalt(&format!("map {DRIVE} {RAMP} --speeds 60,40,5 --out {}/y.csv", folder.path().display())).code,
        2
    );
}

#[test]
fn a_fit_gives_the_brake_back_or_says_why_not() {
    let found = json(&format!("fit {}", sample("E-116").display()));
    let (low, high) = (&found["delay_ms"]["low"], &found["delay_ms"]["high"]);
    assert!(low.as_f64().unwrap() < 31.5 && 28.5 < high.as_f64().unwrap(), "the stops were made with 30 ms: {found}");
    assert_eq!(found["tests"].as_array().unwrap().len(), 12);
    assert_eq!(slidehalt(&format!("fit {}", sample("E-116").display())).code, 0);
    let declined = slidehalt(&format!("fit {}", sample("E-101").display()));
    assert_eq!(declined.code, 2);
    assert!(declined.err.contains("Not entered yet"), "{}", declined.err);
}
