//! Published and handbook cases put to the command line, and what it refuses.

use clap::Parser;

use crate::cli::{Cli, Outcome, run};

fn slidehalt(line: &str) -> Outcome {
    let cli = Cli::try_parse_from(std::iter::once("slidehalt").chain(line.split_whitespace()))
        .unwrap_or_else(|error| panic!("{line}: {error}"));
    run(cli.command.expect("a command"))
}

fn required_mm(line: &str) -> f64 {
    let outcome = slidehalt(&format!("distance {line} --json"));
    let value: serde_json::Value =
        serde_json::from_str(&outcome.out).unwrap_or_else(|error| panic!("{line}: {error} {outcome:?}"));
    value["required_um"].as_f64().unwrap_or_else(|| panic!("{line}: {outcome:?}")) / 1000.0
}

#[test]
fn published_and_handbook_cases() {
    // Line, expected mm, tolerance in mm: half a unit of the last digit printed in the source. Inches times 25.4.
    for (line, expected, tolerance) in [
        // WAC 296-806-45516 and -45524, printed examples: 63 x 0.5 s = 31.5 in.
        ("--rules us-1910-217 --safeguard light-curtain --stopping-ms 500", 31.5 * 25.4, 0.01),
        ("--rules us-1910-217 --safeguard two-hand-control --stopping-ms 500", 31.5 * 25.4, 0.01),
        // 29 CFR 1910.217(c)(3)(viii)(c): Tm = (1/2 + 1/N) 60/spm.
        (
            "--rules us-1910-217 --safeguard two-hand-trip --strokes-per-minute 60 --engaging-points 1",
            94.5 * 25.4,
            0.01,
        ),
        (
            "--rules us-1910-217 --safeguard two-hand-trip --strokes-per-minute 120 --engaging-points 14",
            18.0 * 25.4,
            0.01,
        ),
        (
            "--rules us-1910-217 --safeguard two-hand-trip --strokes-per-minute 200 --engaging-points 4",
            14.175 * 25.4,
            0.01,
        ),
        ("--rules east-asia --safeguard two-hand-trip --strokes-per-minute 200 --engaging-points 4", 360.0, 0.01),
        // 29 CFR 1910.217(h)(9)(v): 63 x (0.200 + 0.020 + 0.015 + 2 x 0.019) = 17.199 in.
        (
            "--rules us-1910-217-h --safeguard light-curtain --stopping-ms 200 --device-ms 20 --control-ms 15 --wear-ms 19 --detection-mm 6.985",
            17.199 * 25.4,
            0.01,
        ),
        // Table O-10 and ISO 13857 Table 4.
        ("--rules us-1910-217 --safeguard guard-opening --opening-mm 15.875 --opening-shape slot", 88.9, 0.01),
        ("--rules iso-13855-2010 --safeguard guard-opening --opening-mm 10 --opening-shape slot", 80.0, 0.01),
        ("--rules iso-13855-2010 --safeguard guard-opening --opening-mm 10 --opening-shape square", 25.0, 0.01),
        ("--rules iso-13855-2010 --safeguard guard-opening --opening-mm 10 --opening-shape round", 20.0, 0.01),
        (
            "--rules iso-13855-2010 --safeguard guard-opening --opening-mm 22 --opening-shape slot --slot-length-mm 60",
            200.0,
            0.01,
        ),
        (
            "--rules iso-13855-2010 --safeguard guard-opening --opening-mm 22 --opening-shape slot --slot-length-mm 70",
            850.0,
            0.01,
        ),
        // EN 999 / ISO 13855 Annex A, from memory: T 0.09 s, d 14 mm: 180 mm; d 30 mm: 308 mm.
        ("--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 90 --detection-mm 14", 180.0, 0.5),
        ("--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 90 --detection-mm 30", 308.0, 0.5),
        // ISO 13855:2010 6.2.3.1 by hand.
        ("--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 250 --detection-mm 14", 500.0, 0.001),
        ("--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 350 --detection-mm 14", 560.0, 0.001),
        ("--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 32 --detection-mm 14", 100.0, 0.001),
        ("--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 240 --detection-mm 14", 480.0, 0.001),
        ("--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 200 --detection-mm 40", 528.0, 0.001),
        (
            "--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 200 --detection-mm 50 --height-mm 300",
            1170.0,
            0.001,
        ),
        ("--rules iso-13855-2010 --safeguard two-hand-control --stopping-ms 200", 570.0, 0.001),
        ("--rules iso-13855-2010 --safeguard two-hand-control --stopping-ms 200 --shrouded", 320.0, 0.001),
        ("--rules iso-13855-2010 --safeguard two-hand-control --stopping-ms 40 --shrouded", 100.0, 0.001),
        ("--rules iso-13855-2010 --safeguard mat --stopping-ms 200 --height-mm 0", 1520.0, 0.001),
        (
            "--rules iso-13855-2010 --safeguard separate-beams --stopping-ms 200 --beam-heights-mm 900,400",
            1170.0,
            0.001,
        ),
        (
            "--rules iso-13855-2010 --safeguard interlocked-guard --stopping-ms 300 --opening-mm 10 --opening-shape slot",
            560.0,
            0.001,
        ),
        // ISO 13855:2024, parallel approach, two public texts: 1600 T + 1200 whatever the height.
        (
            "--rules iso-13855-2024 --safeguard horizontal-field --stopping-ms 200 --detection-mm 50 --height-mm 300",
            1520.0,
            0.001,
        ),
        // DGUV Information 209-030, Table 12 and table of C.
        ("--rules eu-press --safeguard light-curtain --stopping-ms 140 --detection-mm 14", 280.0, 0.001),
        ("--rules eu-press --safeguard light-curtain --stopping-ms 140 --detection-mm 20", 360.0, 0.001),
        ("--rules eu-press --safeguard light-curtain --stopping-ms 140 --detection-mm 30", 410.0, 0.001),
        ("--rules eu-press --safeguard light-curtain --stopping-ms 200 --detection-mm 30 --before-ce", 450.0, 0.001),
        // Japanese structure code, from memory: D = 1.6 (50 + 150) mm.
        (
            "--rules east-asia --safeguard light-curtain --stopping-ms 150 --control-ms 50 --detection-mm 30",
            320.0,
            0.001,
        ),
        // ANSI B11.19, from memory: 63 x 0.2 s + 3.4 (1.25 - 0.276) in.
        (
            "--rules ansi-b11-19 --safeguard light-curtain --stopping-ms 200 --detection-mm 31.75",
            12.6 * 25.4 + 3.312 * 25.4,
            0.013,
        ),
    ] {
        let found = required_mm(line);
        assert!((found - expected).abs() <= tolerance, "{line}: {found} against {expected}");
    }
}

#[test]
fn ten_stops_are_taken_forward_as_the_rule_says() {
    // Mean 183.7, s 1.888562, mean + 3 s = 189.366 ms by hand; longest 187 ms.
    let stops = "--stops-ms 182,185,181,184,186,183,182,187,184,183";
    let by_iso = required_mm(&format!("--rules iso-13855-2010 --safeguard light-curtain --detection-mm 14 {stops}"));
    assert!((by_iso - 2.0 * 189.366).abs() < 0.003, "{by_iso}");
    let by_law = required_mm(&format!("--rules us-1910-217 --safeguard light-curtain {stops}"));
    assert!((by_law - 1.6002 * 187.0).abs() < 0.001, "{by_law}");
}

fn answer(line: &str) -> (Option<String>, u8) {
    let outcome = slidehalt(&format!("distance {line} --json"));
    let value: serde_json::Value = serde_json::from_str(&outcome.out).unwrap_or_default();
    (value["answer"].as_str().map(str::to_owned), outcome.code)
}

#[test]
fn the_answer_and_the_exit_code_follow_the_installed_distance() {
    let iso = "--rules iso-13855-2010 --safeguard light-curtain --detection-mm 14";
    for (line, word, code) in [
        (format!("{iso} --stopping-ms 250"), None, 0),
        (format!("{iso} --stopping-ms 250 --installed-mm 500"), Some("holds"), 0),
        (format!("{iso} --stopping-ms 250 --installed-mm 499.999"), Some("short"), 1),
        // 29 CFR 1910.217(c): strictly greater than 31.5 in = 800.1 mm.
        (
            "--rules us-1910-217 --safeguard light-curtain --stopping-ms 500 --installed-mm 800.1".into(),
            Some("short"),
            1,
        ),
        (
            "--rules us-1910-217 --safeguard light-curtain --stopping-ms 500 --installed-mm 800.101".into(),
            Some("holds"),
            0,
        ),
        (format!("{iso} --stops-ms 180,181,182 --installed-mm 600"), Some("unproven"), 1),
        (
            "--rules us-1910-217 --safeguard light-curtain --stopping-ms 200 --engaging-points 4 --installed-mm 900"
                .into(),
            Some("short"),
            1,
        ),
        (
            "--rules iso-13855-2010 --safeguard light-curtain --stopping-ms 200 --detection-mm 200".into(),
            Some("unproven"),
            2,
        ),
        (
            "--rules iso-13855-2024 --safeguard two-hand-control --stopping-ms 200 --shrouded".into(),
            Some("unproven"),
            2,
        ),
    ] {
        assert_eq!(answer(&line), (word.map(str::to_owned), code), "{line}");
    }
}

#[test]
fn the_level_at_500_mm_allows_the_far_end() {
    // Over 500 mm 1600 mm/s counts, but at least 500 mm: 500 / 1600 = 312.5 ms.
    let line = "distance --rules iso-13855-2010 --safeguard light-curtain --detection-mm 14 --stopping-ms 200 --installed-mm 500 --json";
    let value: serde_json::Value = serde_json::from_str(&slidehalt(line).out).unwrap();
    assert_eq!(value["allowed_stopping_us"], 312_500);
}

#[test]
fn bad_input_is_refused_in_words_and_all_of_it_at_once() {
    let iso = "distance --rules iso-13855-2010 --safeguard light-curtain";
    for (line, words) in [
        (format!("{iso} --detection-mm 14 --stopping-ms -5"), "Stopping time is \u{2212}5 ms."),
        (format!("{iso} --detection-mm 14 --stopping-ms 0"), "Stopping time is 0 ms."),
        (format!("{iso} --detection-mm 14 --stopping-ms 20000"), "It must be from 1 to 10000 ms."),
        (format!("{iso} --detection-mm 14 --stopping-ms 200 --installed-mm 0"), "Installed distance is 0 mm."),
        (format!("{iso} --detection-mm 14 --stopping-ms 12x"), "Stopping time is 12x."),
        (format!("{iso} --detection-mm 14 --stopping-ms 1.2.3"), "no grouping of thousands"),
        (format!("{iso} --detection-mm 14 --stopping-ms 1,234.5"), "no grouping of thousands"),
        (format!("{iso} --detection-mm 14 --stopping-ms NaN"), "Stopping time is NaN."),
        (format!("{iso} --detection-mm 14"), "No stopping time is given."),
        (format!("{iso} --stopping-ms 200"), "Detection capability is not given."),
        (
            "distance --rules us-1910-217 --safeguard two-hand-trip --strokes-per-minute 60".into(),
            "Add --engaging-points.",
        ),
        ("distance --rules us-1910-217 --safeguard spring".into(), "Safeguard is spring."),
    ] {
        let outcome = slidehalt(&line);
        assert_eq!(outcome.code, 2, "{line}");
        assert!(outcome.err.contains(words), "{line}: {}", outcome.err);
        assert!(outcome.out.is_empty(), "{line}");
    }
    let both = slidehalt(&format!("{iso} --detection-mm x --stopping-ms y"));
    assert_eq!(both.err.lines().count(), 2, "{}", both.err);
}

#[test]
fn a_comma_is_a_decimal_mark_where_nothing_else_is_meant() {
    let iso = "--rules iso-13855-2010 --safeguard light-curtain --detection-mm 14";
    assert_eq!(required_mm(&format!("{iso} --stopping-ms 182,5")), 365.0);
    let semicolons = required_mm(&format!("{iso} --stops-ms 182,5;183,5"));
    let points = required_mm(&format!("{iso} --stops-ms 182.5,183.5"));
    assert_eq!(semicolons, points);
}

#[test]
fn stops_gives_the_handbook_figures() {
    // k (10, 0.95, 0.95) = 2.911 and k (10, 0.99, 0.95) = 3.981, tables of ISO 16269-6.
    let outcome = slidehalt("stops 182 185 181 184 186 183 182 187 184 183 --json");
    let value: serde_json::Value = serde_json::from_str(&outcome.out).unwrap();
    for (key, expected, tolerance) in [
        ("mean_ms", 183.7, 1e-9),
        ("s_ms", 1.888_562, 1e-6),
        ("greatest_ms", 187.0, 0.0),
        ("mean_plus_3_s_ms", 189.366, 5e-4),
        ("tolerance_95_95_ms", 189.198, 5e-4),
        ("tolerance_99_95_ms", 191.219, 5e-4),
        ("k_95_95", 2.911, 5e-4),
        ("k_99_95", 3.981, 5e-4),
    ] {
        let found = value[key].as_f64().unwrap();
        assert!((found - expected).abs() <= tolerance, "{key}: {found}");
    }
    assert_eq!(slidehalt("stops 182 x").code, 2);
    assert_eq!(slidehalt("stops 182").code, 0);
}
