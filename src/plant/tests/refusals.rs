//! What the text of a file may not hold, and how the refusal says so: line, column, field, and what to do.

use std::path::Path;

use calc::press::Press;
use plant::{FileRefusal, SAMPLES, v1};

/// A sample with safeguards, stop tests, readings and events.
fn sample() -> &'static str {
    SAMPLES.iter().find(|(name, _)| name.ends_with("E-110.ron")).unwrap().1
}

fn read(text: &str) -> Result<Press, FileRefusal> {
    v1::press_from_text(Path::new("E-110.ron"), text)
}

/// The sample with the first `old` turned into `new`, and the place of `old`.
fn with(old: &str, new: &str) -> (String, usize) {
    let at = sample().find(old).unwrap_or_else(|| panic!("{old:?} stands in the sample"));
    (sample().replacen(old, new, 1), at)
}

/// Line and column of a place in a text, both from 1, counted in characters.
fn line_and_column(text: &str, at: usize) -> (usize, usize) {
    let before = &text[..at];
    (before.matches('\n').count() + 1, before.chars().rev().take_while(|c| *c != '\n').count() + 1)
}

/// Asserts that `new` in place of `old` is refused on the line where it stands, in a column within it, at `field`, in words that
/// hold `words`.
fn refuses(old: &str, new: &str, field: Option<&str>, words: &str) {
    let (text, at) = with(old, new);
    let refusal = read(&text).expect_err(new);
    assert_eq!(refusal.field.as_deref(), field, "{new:?}: {refusal}");
    assert!(refusal.why.contains(words), "{new:?}: {refusal}");
    let place = refusal.place.unwrap_or_else(|| panic!("{new:?} has no place: {refusal}"));
    let (from, to) = (line_and_column(&text, at), line_and_column(&text, at + new.len()));
    assert!(from <= place && place <= to, "{new:?}: {refusal}; it stands at {from:?} to {to:?}");
    let told = refusal.to_string();
    assert!(
        told.starts_with(&format!("Line {}, column {}", place.0, place.1)) && told.ends_with("(E-110.ron)"),
        "{told}"
    );
}

#[test]
fn unknown_fields() {
    refuses(
        "location: \"",
        "loction: \"",
        Some("loction"),
        "There is no field loction here. The fields are version, tag",
    );
    refuses("force_kn: 2000,", "force_kn: 2000, colour: 3,", Some("colour"), "There is no field colour here.");
    let inside = Some("safeguards[0].kind.light_curtain.colour");
    refuses("detection_mm: 20,", "detection_mm: 20, colour: 3,", inside, "The fields are detection_mm, lower_edge_mm");
}

#[test]
fn a_missing_field_is_named_with_the_place_where_it_should_have_been() {
    let refusal = read(&with("  location: \"Hall 2, bay 2\",\n", "").0).unwrap_err();
    assert!(refusal.why.starts_with("The field location is missing"), "{refusal}");
    let last_line = sample().lines().count() - 1;
    assert_eq!(refusal.place.unwrap().0, last_line, "where the press ends");
    let (text, _) = with("        brake: \"cold\",\n", "");
    let refusal = read(&text).unwrap_err();
    assert!(refusal.why.starts_with("The field brake is missing"), "{refusal}");
    assert_eq!(refusal.field.as_deref(), Some("stop_tests[0].condition"), "{refusal}");
}

#[test]
fn a_field_given_twice() {
    let refusal = read(&with("drive: crank", "drive: crank, drive: link").0).unwrap_err();
    assert!(refusal.why.starts_with("The field drive stands here twice."), "{refusal}");
}

#[test]
fn wrong_types() {
    refuses("force_kn: 2000", "force_kn: \"2000\"", Some("force_kn"), "A number is needed here");
    refuses("ce_marked: true", "ce_marked: 1", Some("ce_marked"), "true or false");
    refuses("serial: \"NW 200-0133\"", "serial: 2000133", Some("serial"), "quotation marks");
    refuses("heaviest_die_kg: 700", "heaviest_die_kg: [700]", Some("heaviest_die_kg"), "A number is needed here");
    refuses("stops_ms: [", "stops_ms: 5, x: [", Some("stop_tests[0].stops_ms"), "square brackets");
}

#[test]
fn numbers_outside_their_limits() {
    let first_stop = Some("stop_tests[0].stops_ms[0]");
    refuses("stops_ms: [", "stops_ms: [10000.001, ", first_stop, "It must be from 1 to 10000 ms.");
    refuses("stops_ms: [", "stops_ms: [0.999, ", first_stop, "Stopping time is 0.999 ms.");
    refuses("stops_ms: [", "stops_ms: [-180, ", first_stop, "Stopping time is \u{2212}180 ms.");
    refuses("stops_ms: [", "stops_ms: [180.0005, ", first_stop, "at most three decimals");
    refuses("force_kn: 2000", "force_kn: 0.5", Some("force_kn"), "It must be from 1 to 200000 kN.");
    refuses("uncertainty_mm: 2", "uncertainty_mm: 100.5", Some("safeguards[0].installed.uncertainty_mm"), "100 mm");
    let points = Some("clutch.full_revolution.engaging_points");
    refuses(
        "part_revolution(air)",
        "full_revolution(engaging_points: 101)",
        points,
        "It must be from 1 to 100 points.",
    );
}

#[test]
fn numbers_that_are_none() {
    let first_stop = Some("stop_tests[0].stops_ms[0]");
    for none in ["NaN", "-NaN", "inf", "-inf", "1e999", "1e17"] {
        refuses("stops_ms: [", &format!("stops_ms: [{none}, "), first_stop, "It must be from 1 to 10000 ms.");
    }
    refuses("stops_ms: [", "stops_ms: [none, ", first_stop, "A number is needed here");
}

#[test]
fn a_decimal_comma_is_no_second_number() {
    // In a list it would read as a stop of 195 ms and one of 5 ms.
    refuses("stops_ms: [", "stops_ms: [195,5, ", None, "A comma stands between two digits.");
    refuses("uncertainty_mm: 2,", "uncertainty_mm: 2,5,", None, "Write a point for decimals");
    assert!(read(&with("bay 2\"", "bay 2,5\"").0).is_ok(), "a comma within a text");
}

#[test]
fn unknown_choices() {
    refuses(
        "brake: \"cold\"",
        "brake: \"tepid\"",
        Some("stop_tests[0].condition.brake"),
        "it must be one of cold, warm",
    );
    refuses("frame: straight_side", "frame: gantry", Some("frame"), "it must be one of c_frame, straight_side");
    let medium = Some("clutch.part_revolution");
    refuses("part_revolution(air)", "part_revolution(steam)", medium, "it must be one of air, hydraulic");
    refuses("kind: \"remark\"", "kind: \"rumour\"", Some("events[0].kind"), "it must be one of lining-replaced");
}

#[test]
fn days_that_do_not_exist() {
    for none in ["2026-02-30", "27.10.2026", "2026-10-27 25:00", "1949-12-31", "2200-01-01", ""] {
        let at = Some("safeguards[0].installed.at");
        refuses("at: \"2026-10-27\"", &format!("at: \"{none}\""), at, "It must be a day such as 2026-11-03");
    }
}

#[test]
fn bad_tags() {
    for bad in ["", ".hidden", "E/110", "..\\\\up", "E 110", "É-110", &"E".repeat(41)] {
        refuses("tag: \"E-110\"", &format!("tag: \"{bad}\""), Some("tag"), "1 to 40 letters A to Z");
    }
}

#[test]
fn two_safeguards_of_one_name() {
    let sample = SAMPLES.iter().find(|(name, _)| name.ends_with("E-101.ron")).unwrap().1;
    let refusal = read(&sample.replace("name: \"Two-hand control\"", "name: \"Front curtain\"")).unwrap_err();
    assert!(refusal.why.starts_with("Two safeguards are called \"Front curtain\"."), "{refusal}");
    assert_eq!(refusal.field.as_deref(), Some("safeguards[1].name"));
}

#[test]
fn a_reading_without_any_setup() {
    let at = sample().find("  reference: (").unwrap();
    let end = at + sample()[at..].find("\n  ),\n").unwrap() + "\n  ),\n".len();
    let refusal = read(&format!("{}{}", &sample()[..at], &sample()[end..])).unwrap_err();
    assert!(refusal.to_string().starts_with("readings[0]: The reading has no setup and the press no reference."));
    let readings = read(sample()).unwrap().readings.len();
    assert_eq!(refusal.further.len(), readings - 1, "every reading is told");
}

#[test]
fn other_versions() {
    for (given, words) in [
        ("version: 2", "The file has version 2; this program reads version 1. It was written by a newer program"),
        ("version: 0", "The file has version 0; the oldest that ever was is 1."),
        ("version: -1", "or it is negative"),
        ("version: 4294967296", "too large"),
        ("version: \"1\"", "A whole number is needed here"),
        ("version: 1.5", "a whole number has no point"),
    ] {
        let refusal = read(&with("version: 1", given).0).expect_err(given);
        assert!(refusal.why.contains(words), "{given}: {refusal}");
    }
    let refusal = read(&with("  version: 1,\n", "").0).unwrap_err();
    assert!(refusal.why.starts_with("The field version is missing"), "{refusal}");
    // A later version may hold fields that are not known here; it is still the version that is refused.
    let (later, _) = with("version: 1,", "version: 2, made_by: \"a later program\", more: [(1, {\"a\": 2})],");
    assert!(read(&later).unwrap_err().why.starts_with("The file has version 2"));
}

#[test]
fn nothing_may_stand_behind_the_end_but_a_comment() {
    for after in ["(", "x", ")", ",", "(version: 1)"] {
        let refusal = read(&format!("{}{after}", sample())).expect_err(after);
        assert_eq!(refusal.place, Some((sample().lines().count(), 2)), "{refusal}");
    }
    assert!(read(&format!("{}// checked\n", sample())).is_ok());
}

#[test]
fn texts_that_are_no_press_at_all() {
    for text in ["", " ", "nonsense", "()", "[]", "{}", "\"press\"", "1", "(version: 1)", "\0", "version: 1"] {
        assert!(read(text).is_err(), "{text:?}");
    }
}

#[test]
fn bottomless_nesting_is_refused() {
    for open in ["(", "[", "{", "Some(", "(version: 1, x: ", "/*", "#![", "r#", "'", "\""] {
        assert!(read(&open.repeat(200_000)).is_err(), "{open:?}");
    }
    assert!(read(&format!("(version: 1, more: {}", "[".repeat(500_000))).is_err());
}

#[test]
fn whole_numbers_read_with_and_without_a_point() {
    let press = read(sample()).unwrap();
    for same in ["2000.0", "2e3", "2000.", "+2000", "2_000"] {
        match read(&with("force_kn: 2000", &format!("force_kn: {same}")).0) {
            Ok(read) => assert_eq!(read, press, "{same}"),
            Err(refusal) => assert_eq!(refusal.place.unwrap().0, 8, "{refusal}"),
        }
    }
    let (pointed, _) = with("force_kn: 2000", "force_kn: 2000.0");
    assert_eq!(read(&pointed).unwrap(), press);
    assert!(v1::press_to_text(&press).contains("force_kn: 2000,\n"));
}

#[test]
fn a_file_cut_anywhere_is_refused_or_still_whole() {
    for (name, text) in SAMPLES.iter().filter(|(name, _)| ["E-113", "E-106"].iter().any(|tag| name.contains(tag))) {
        let whole = read(text).unwrap();
        for cut in (0..text.len()).filter(|cut| text.is_char_boundary(*cut)) {
            match read(&text[..cut]) {
                Ok(press) => assert_eq!(press, whole, "{name} cut at {cut}"),
                Err(refusal) => assert!(refusal.place.is_some(), "{name} cut at {cut}: {refusal}"),
            }
        }
    }
}

#[test]
fn every_fault_of_a_file_is_told_with_its_place() {
    let text = sample()
        .replace("force_kn: 2000", "force_kn: 0.5")
        .replace("heaviest_die_kg: 700", "heaviest_die_kg: -1")
        .replacen("brake: \"cold\"", "brake: \"tepid\"", 1)
        .replacen("stops_ms: [", "stops_ms: [0, 20000, ", 1)
        .replace("kind: \"remark\"", "kind: \"rumour\"");
    let refusal = read(&text).unwrap_err();
    let told: Vec<_> = std::iter::once(&refusal).chain(&refusal.further).collect();
    let fields: Vec<&str> = told.iter().map(|fault| fault.field.as_deref().unwrap()).collect();
    let meant = [
        "force_kn",
        "heaviest_die_kg",
        "stop_tests[0].condition.brake",
        "stop_tests[0].stops_ms[0]",
        "stop_tests[0].stops_ms[1]",
        "events[0].kind",
    ];
    assert_eq!(fields, meant);
    let stands = ["0.5", ": -1,", "\"tepid\"", "[0,", "20000,", "\"rumour\""];
    for (fault, stands) in told.iter().zip(stands) {
        let line = line_and_column(&text, text.find(stands).unwrap()).0;
        assert_eq!(fault.place.unwrap().0, line, "{fault}");
    }
    let lines = refusal.to_string();
    assert_eq!(lines.lines().count(), 6);
    assert!(lines.lines().all(|line| line.starts_with("Line ") && line.ends_with("(E-110.ron)")), "{lines}");
    // The search leaves nothing behind: what is out of its limit is refused in the next file too, and a sound one is read.
    assert_eq!(read(&with("force_kn: 2000", "force_kn: 0.5").0).unwrap_err().further, []);
    assert!(read(sample()).is_ok());
}

#[test]
fn behind_a_fault_of_the_form_nothing_more_is_looked_for() {
    let text =
        sample().replace("force_kn: 2000", "force_kn: 0.5").replace("frame: straight_side", "fram: straight_side");
    let refusal = read(&text).unwrap_err();
    assert_eq!(refusal.field.as_deref(), Some("force_kn"));
    assert_eq!(refusal.further.len(), 1);
    assert!(refusal.further[0].why.starts_with("There is no field fram here."), "{refusal}");
    assert_eq!(read(&text.replace("force_kn: 0.5", "force_kn: 2000")).unwrap_err().further, []);
}

#[test]
fn endless_faults_are_told_up_to_twenty() {
    let faults = "0, ".repeat(100_000);
    let refusal = read(&with("stops_ms: [", &format!("stops_ms: [{faults}")).0).unwrap_err();
    assert_eq!(refusal.further.len(), 20);
    assert_eq!(refusal.further[18].field.as_deref(), Some("stop_tests[0].stops_ms[19]"));
    assert_eq!(refusal.further[19].why, "There is more; correct these first.");
    let twenty = "0, ".repeat(20);
    let refusal = read(&with("stops_ms: [", &format!("stops_ms: [{twenty}")).0).unwrap_err();
    assert_eq!(refusal.further.len(), 19);
    assert_eq!(refusal.further[18].field.as_deref(), Some("stop_tests[0].stops_ms[19]"));
}
