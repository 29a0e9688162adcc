//! The sample plant put to `check`.

use std::fs;
use std::path::Path;

use serde_json::{Value, json};

use crate::cli::{Outcome, run_line};

fn samples() -> tempfile::TempDir {
    let folder = tempfile::tempdir().unwrap();
    plant::copy_samples(folder.path()).unwrap();
    folder
}

/// The samples are told as of this day.
fn check(path: &Path, more: &str) -> Outcome {
    run_line(&format!("check {} --on 2026-12-01 {more}", path.display()))
}

#[test]
fn one_line_a_safeguard_with_answer_tag_and_figures() {
    let folder = samples();
    let outcome = check(folder.path(), "");
    assert_eq!((outcome.code, outcome.err.as_str()), (1, ""));
    let found: Vec<(&str, &str)> = outcome
        .out
        .lines()
        .map(|line| {
            let mut words = line.split_whitespace();
            (words.next().unwrap(), words.next().unwrap())
        })
        .collect();
    // What each sample press was made to show.
    let meant = [
        ("Holds", "E-101"),
        ("Holds", "E-101"),
        ("Holds", "E-102"),
        ("Holds", "E-102"),
        ("Short", "E-103"),
        ("Unproven", "E-104"),
        ("Unproven", "E-104"),
        ("Unproven", "E-105"),
        ("Holds", "E-105"),
        ("Holds", "E-106"),
        ("Holds", "E-106"),
        ("Retime", "E-107"),
        ("Retime", "E-107"),
        ("Retime", "E-108"),
        ("Holds", "E-109"),
        ("Holds", "E-110"),
        ("Holds", "E-111"),
        ("Holds", "E-111"),
        ("Holds", "E-112"),
        ("Unproven", "E-113"),
        ("Unproven", "E-114"),
        ("Holds", "E-114"),
        ("Holds", "E-115"),
        ("Holds", "E-115"),
        ("Holds", "E-116"),
        ("Holds", "E-116"),
    ];
    assert_eq!(found, meant);
}

/// Press E-103 worked by hand. The longest test in force is 90°, 55 strokes/min, warm: mean 175.11, s 3.416122, mean + 3 s =
/// 185.358366 ms, up to 185.359 ms. Its clock started at the input of the control, so 22 ms device and 10 ms interface are
/// added, and 6 ms for wear: T = 223.359 ms. ISO 13855:2010 6.2.3 with d = 30 mm: C = 128 mm, S1 = 574.7 mm is over 500 mm,
/// S2 = 485.4 mm is under it, so S = 500 mm. The tape says 488 mm and may be 2 mm out: 486 mm, 14 mm too little. At 486 mm
/// 2000 mm/s count: (486 - 128) / 2000 = 179 ms, less the 38 ms of the other parts: 141 ms.
#[test]
fn a_short_curtain_by_hand() {
    let folder = samples();
    let press = folder.path().join("presses/E-103.ron");
    let outcome = check(&press, "");
    assert_eq!(outcome.code, 1);
    assert_eq!(
        outcome.out,
        "Short  E-103  Front curtain is short: 486 mm installed, 500 mm required, 14 mm (44.4 ms) too little.\n"
    );
    let outcome = check(&press, "--json");
    assert_eq!(outcome.code, 1);
    let value: Value = serde_json::from_str(&outcome.out).unwrap();
    let one = &value[0];
    for (key, expected) in [
        ("press", json!("E-103")),
        ("safeguard", json!("Front curtain")),
        ("kind", json!("light-curtain")),
        ("rules", json!("iso-13855-2010")),
        ("answer", json!("short")),
        ("required_um", json!(500_000)),
        ("strict", json!(false)),
        ("installed_um", json!(486_000)),
        ("spare_um", json!(-14_000)),
        ("stopping_us", json!(185_359)),
        ("value_taken", json!("mean-plus-3s")),
        ("allowed_stopping_us", json!(141_000)),
        ("allowed_monitor_us", json!(147_000)),
        ("spare_us", json!(141_000 - 185_359)),
    ] {
        assert_eq!(one[key], expected, "{key}");
    }
    let part = |part: &str, state: &str, us: Value| json!({ "part": part, "state": state, "us": us });
    assert_eq!(
        one["parts"],
        json!([
            part("device", "added", json!(22_000)),
            part("interface", "added", json!(10_000)),
            part("control", "seen", Value::Null),
            part("stopping time", "added", json!(185_359)),
            part("wear allowance", "added", json!(6_000)),
        ])
    );
    assert_eq!(one["reasons"][0]["words"], "The installed distance does not satisfy the rule.");
    assert!(one["remedies"].as_array().unwrap().iter().all(Value::is_string));
    assert_eq!(value.as_array().unwrap().len(), 1);
}

#[test]
fn under_another_rule_set_another_value_and_another_answer() {
    // 29 CFR 1910.217(c): the longest stop of the tests in force is 179.2 ms; 1600.2 mm/s x 217.2 ms = 347.56344 mm.
    let folder = samples();
    let outcome = check(&folder.path().join("presses/E-103.ron"), "--rules us-1910-217 --json");
    assert_eq!(outcome.code, 0, "{}", outcome.out);
    let value: Value = serde_json::from_str(&outcome.out).unwrap();
    let of = |key: &str| value[0][key].clone();
    assert_eq!((of("stopping_us"), of("value_taken")), (json!(179_200), json!("greatest")));
    assert_eq!((of("required_um"), of("strict"), of("answer")), (json!(347_564), json!(true), json!("holds")));
}

#[test]
fn today_decides_whether_a_test_is_still_in_date() {
    // The plant takes a reading once a month, the latest on 2026-11-06, and tests once in 12 months, the latest on 2026-10-20.
    let folder = samples();
    let press = folder.path().join("presses/E-103.ron");
    let on = |date: &str| run_line(&format!("check {} --rules us-1910-217 --on {date}", press.display()));
    assert_eq!(on("2026-12-06").code, 0);
    for (date, words) in
        [("2026-12-07", "The reading was due on 2026-12-06."), ("2027-10-21", "The stop test was due on 2027-10-20.")]
    {
        let late = on(date);
        assert_eq!(late.code, 1);
        assert!(late.out.starts_with("Retime  E-103  ") && late.out.contains(words), "{}", late.out);
    }
}

#[test]
fn what_cannot_be_read_is_named_and_the_rest_is_checked() {
    let folder = samples();
    let press = folder.path().join("presses/E-101.ron");
    fs::write(&press, "(version: 1, tag: ").unwrap();
    let outcome = check(folder.path(), "");
    assert_eq!(outcome.code, 2);
    assert!(outcome.err.contains("E-101.ron"), "{}", outcome.err);
    assert_eq!(outcome.out.lines().count(), 24);
    let json = check(folder.path(), "--json");
    assert_eq!(json.code, 2);
    assert_eq!(serde_json::from_str::<Value>(&json.out).unwrap().as_array().unwrap().len(), 24);
    let none = check(&folder.path().join("none"), "");
    assert_eq!((none.code, none.out.as_str()), (2, ""));
    assert!(!none.err.is_empty());
    let two = run_line(&format!(
        "check {} {} --on 2026-12-01",
        folder.path().join("none").display(),
        folder.path().join("presses/E-102.ron").display()
    ));
    assert_eq!((two.code, two.out.lines().count()), (2, 2));
}

#[test]
fn where_no_safeguard_or_no_press_is_nothing_holds() {
    let folder = samples();
    let press = folder.path().join("presses/E-103.ron");
    let text = fs::read_to_string(&press).unwrap();
    let (before, rest) = text.split_once("  safeguards: [\n").unwrap();
    let (_, after) = rest.split_once("\n  ],\n").unwrap();
    fs::write(&press, format!("{before}  safeguards: [],\n{after}")).unwrap();
    let outcome = check(&press, "");
    assert_eq!((outcome.code, outcome.err.as_str()), (1, ""));
    assert_eq!(outcome.out, "Unproven  E-103  No safeguard is entered.\n");

    for (name, _) in plant::SAMPLES.iter().filter(|(name, _)| name.starts_with("presses/")) {
        fs::remove_file(folder.path().join(name)).unwrap();
    }
    let outcome = check(folder.path(), "");
    assert_eq!(outcome.code, 1);
    assert!(outcome.out.starts_with("Unproven  (none)  No press is entered in "), "{}", outcome.out);
    assert_eq!(check(folder.path(), "--json").out, "[]\n");
}
