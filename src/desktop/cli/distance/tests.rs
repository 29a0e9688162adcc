//! Published and handbook cases put to the command line, and what it refuses.

use crate::cli::run_line as slidehalt;

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
        // OSHA eTool on machine guarding, chart of stopping times: 0.126 s 7.938 in, 0.317 s 19.971 in, 0.072 s 4.536 in by the
        // formula (the chart prints 8, 20 and, too short, 4.5 in).
        ("--rules us-1910-217 --safeguard light-curtain --stopping-ms 126", 7.938 * 25.4, 0.013),
        ("--rules us-1910-217 --safeguard light-curtain --stopping-ms 317", 19.971 * 25.4, 0.013),
        ("--rules us-1910-217 --safeguard light-curtain --stopping-ms 72", 4.536 * 25.4, 0.013),
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
        // 0.276 in = 7.0104 mm and finer: no penetration.
        ("--rules ansi-b11-19 --safeguard light-curtain --stopping-ms 200 --detection-mm 7.01", 12.6 * 25.4, 0.001),
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
fn an_open_inequality_allows_less_than_the_quotient() {
    // 29 CFR 1910.217(c)(3)(iii)(e): 18 in must be more than 63 in/s x Ts, so Ts < 18/63 s = 0.285714... s.
    let line = "distance --rules us-1910-217 --safeguard light-curtain --stopping-ms 200 --installed-mm 457.2 --json";
    let value: serde_json::Value = serde_json::from_str(&slidehalt(line).out).unwrap();
    let allowed = value["allowed_stopping_us"].as_i64().unwrap();
    assert!(285_713 <= allowed && allowed < 285_715, "{allowed}");
}

#[test]
fn table_o_10_ends_and_shared_ends() {
    let law = "--rules us-1910-217 --safeguard guard-opening --opening-shape slot";
    for (figures, word, code) in [
        // 29 CFR 1910.217, Table O-10: nothing under 1/4 in, nothing over 2 1/8 in.
        ("--opening-mm 5.08", Some("unproven"), 2),
        ("--opening-mm 57.15", Some("unproven"), 2),
        // The rows of 3/8 in and 1/2 in share the end 2 1/2 in: the smaller width is the cautious reading.
        ("--opening-mm 9.525 --installed-mm 63.5", Some("holds"), 0),
        ("--opening-mm 12.7 --installed-mm 63.5", Some("short"), 1),
        ("--opening-mm 12.7 --installed-mm 63.501", Some("holds"), 0),
    ] {
        assert_eq!(answer(&format!("{law} {figures}")), (word.map(str::to_owned), code), "{figures}");
    }
}

#[test]
fn a_field_along_the_approach_is_as_fine_as_its_height_asks() {
    // ISO 13855:2010 6.3: d at most H/15 + 50 mm: 70 mm at 300 mm, 50 mm at the floor.
    let field = "--rules iso-13855-2010 --safeguard horizontal-field --stopping-ms 200";
    for (figures, word, code) in [
        ("--detection-mm 70 --height-mm 300", None, 0),
        ("--detection-mm 70.001 --height-mm 300", Some("unproven"), 2),
        ("--detection-mm 50 --height-mm 0", None, 0),
        ("--detection-mm 50.001 --height-mm 0", Some("unproven"), 2),
    ] {
        assert_eq!(answer(&format!("{field} {figures}")), (word.map(str::to_owned), code), "{figures}");
    }
}

#[test]
fn what_is_not_covered_is_told_on_both_outputs() {
    let line = "distance --rules east-asia --safeguard mat --stopping-ms 200 --height-mm 0";
    let plain = slidehalt(line);
    assert_eq!((plain.code, plain.out.as_str()), (2, ""));
    assert!(plain.err.starts_with("Not covered: mat"), "{}", plain.err);
    let json = slidehalt(&format!("{line} --json"));
    let value: serde_json::Value = serde_json::from_str(&json.out).unwrap();
    assert_eq!((json.code, &json.err), (2, &plain.err));
    assert_eq!((value["answer"].as_str(), value["required_um"].is_null()), (Some("unproven"), true));
    assert_eq!(value["reason"].as_str(), Some(plain.err.trim_end()));
}

#[test]
fn what_is_taken_for_granted_and_what_is_not_used_is_told() {
    let iso = "distance --rules iso-13855-2010 --safeguard";
    for (line, words) in [
        (
            format!("{iso} light-curtain --detection-mm 14 --stopping-ms 200"),
            "nothing else is said: a part-revolution clutch, no way over the curtain.",
        ),
        (
            format!("{iso} light-curtain --detection-mm 14 --stopping-ms 200 --device-ms 5 --wear-ms 5"),
            "taken as inside the stopping time: interface, control.",
        ),
        (
            format!("{iso} interlocked-guard --stopping-ms 200"),
            "a part-revolution clutch, no gap before the stop is signalled.",
        ),
        (
            "distance --rules iso-13855-2024 --safeguard two-hand-control --stopping-ms 200".into(),
            "a supplemental distance Z of 0.",
        ),
        (
            "distance --rules eu-press --safeguard light-curtain --detection-mm 14 --stopping-ms 200".into(),
            "a press with the CE mark.",
        ),
        (
            format!("{iso} two-hand-control --stopping-ms 200 --detection-mm 14 --beam-heights-mm 400,900"),
            "Given and not used here: --detection-mm, --beam-heights-mm.",
        ),
        (
            format!("{iso} guard-opening --opening-mm 10 --opening-shape square --slot-length-mm 60 --stops-ms 90,91"),
            "Given and not used here: --slot-length-mm, --stops-ms.",
        ),
        (
            format!("{iso} light-curtain --detection-mm 14 --stopping-ms 200 --shrouded --before-ce"),
            "Given and not used here: --shrouded, --before-ce.",
        ),
    ] {
        let outcome = slidehalt(&line);
        assert_eq!((outcome.code, outcome.err.as_str()), (0, ""), "{line}");
        assert!(outcome.out.contains(words), "{line}: {}", outcome.out);
    }
}

#[test]
fn an_opening_has_no_stopping_time_and_needs_no_stops() {
    let line = "distance --rules iso-13855-2010 --safeguard guard-opening --opening-mm 10 --opening-shape slot --stops-ms 90,91 --installed-mm 80 --json";
    let outcome = slidehalt(line);
    let value: serde_json::Value = serde_json::from_str(&outcome.out).unwrap();
    assert_eq!((outcome.code, value["answer"].as_str()), (0, Some("holds")));
    assert!(value["stopping_us"].is_null() && value["allowed_stopping_us"].is_null());
}

/// Two-hand control by ISO 13855:2010 clause 8, by hand: T = 200 + 12 = 212 ms, S = 1600 x 0.212 + 250 = 589.2 mm. 600 mm
/// allow 350 mm / 1600 mm/s = 218.75 ms less 12 ms: 206.75 ms, of which whole tenths are shown, rounded down.
#[test]
fn the_text_for_people() {
    let line = "distance --rules iso-13855-2010 --safeguard two-hand-control --stopping-ms 200 --device-ms 12 --installed-mm 600";
    let expected = "\
ISO 13855:2010: two-hand control

symbol  what                                                           worked                       value     clause and basis
T       response time: stop and every part that the clock did not see  200 ms + 12 ms               212 ms    ISO 13855:2010, 8 (public text)
C       reach while an actuator is still held                          actuators not shrouded       250 mm    ISO 13855:2010, 8 (public text)
S       required distance                                              1600 mm/s × 212 ms + 250 mm  589.2 mm  ISO 13855:2010, 8 (public text)

Required: 589.2 mm
Installed: 600 mm, spare 10.8 mm
Allowed stopping time: 206.7 ms; brake monitor on the same clock: 206.7 ms
Answer: Holds
For the figure given: nothing here tells that it was measured, when, or on which press.
Not given, and so taken as inside the stopping time: interface, control, wear allowance.
Taken for granted, since nothing else is said: a part-revolution clutch.
";
    let outcome = slidehalt(line);
    assert_eq!((outcome.code, outcome.err.as_str()), (0, ""));
    assert_eq!(outcome.out, expected);
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
        ("distance --rules us-1910 --safeguard mat".into(), "Rule set is us-1910. It must be one of us-1910-217,"),
        (
            "distance --rules iso-13855-2010 --safeguard interlocked-guard --stopping-ms 200 --opening-shape slot"
                .into(),
            "A shape is given and the size of the opening is not. Add --opening-mm.",
        ),
        (
            "distance --rules iso-13855-2010 --safeguard guard-opening --opening-mm 10".into(),
            "Add --opening-shape slot, square or round.",
        ),
        (format!("{iso} --detection-mm 14 --stops-ms 200"), "Number of stops is 1. It must be two or more"),
        (format!("{iso} --detection-mm 14 --stops-ms -5,200"), "Stopping time is \u{2212}5 ms."),
        (format!("{iso} --detection-mm 14 --stops-ms 200,,201"), "Stopping time is empty."),
        (format!("{iso} --detection-mm 14 --stopping-ms 200 --opening-mm NaN"), "Opening is NaN."),
    ] {
        let outcome = slidehalt(&line);
        assert_eq!(outcome.code, 2, "{line}");
        assert!(outcome.err.contains(words), "{line}: {}", outcome.err);
        assert!(outcome.out.is_empty(), "{line}");
    }
    let both = slidehalt(&format!("{iso} --detection-mm x --stopping-ms y"));
    assert_eq!(both.err.lines().count(), 2, "{}", both.err);
    let all = "distance --rules none --safeguard separate-beams --stops-ms x --beam-heights-mm , --device-ms 9999 \
               --installed-mm 0 --supplement-mm 1.2.3 --wear-ms -1 --edge-height-mm y";
    let all = slidehalt(all);
    assert_eq!((all.code, all.err.lines().count()), (2, 9), "{}", all.err);
}

#[test]
fn a_comma_is_a_decimal_mark_where_nothing_else_is_meant() {
    let iso = "--rules iso-13855-2010 --safeguard light-curtain --detection-mm 14";
    assert_eq!(required_mm(&format!("{iso} --stopping-ms 182,5")), 365.0);
    let semicolons = required_mm(&format!("{iso} --stops-ms 182,5;183,5"));
    let points = required_mm(&format!("{iso} --stops-ms 182.5,183.5"));
    assert_eq!(semicolons, points);
}
