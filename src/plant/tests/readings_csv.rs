//! Readings to CSV and back: nothing lost, and a bad row changes nothing.

use std::path::Path;

use calc::press::Press;
use plant::{export_readings, import_readings, open};

fn sample(tag: &str) -> Press {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../sample-presses");
    let plant = open(&folder).unwrap();
    let stored = plant.presses.into_iter().filter_map(|stored| stored.content.ok());
    stored.into_iter().find(|press| press.tag == tag).unwrap()
}

fn every_sample() -> Vec<Press> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../sample-presses");
    open(&folder).unwrap().presses.into_iter().filter_map(|stored| stored.content.ok()).collect()
}

#[test]
fn a_round_trip_loses_nothing() {
    let presses = every_sample();
    assert!(presses.iter().any(|press| press.readings.len() > 12));
    for press in presses.iter().filter(|press| !press.readings.is_empty()) {
        assert_eq!(import_readings(press, &export_readings(press)), Ok(press.readings.clone()), "{}", press.tag);
    }
}

#[test]
fn semicolons_make_the_comma_a_decimal_mark() {
    let press = every_sample().into_iter().find(|press| press.reference.is_some()).unwrap();
    let readings =
        import_readings(&press, "date;stop_ms;by\n2026-12-01;182,5;M.\n2026-12-01;183;M.\n2026-12-02;184;M.\n")
            .unwrap();
    let stops: Vec<Vec<i64>> =
        readings.iter().map(|reading| reading.stops.iter().map(|stop| stop.base()).collect()).collect();
    assert_eq!(stops, [vec![182_500, 183_000], vec![184_000]]);
    assert_eq!(Some(&readings[0].setup), press.reference.as_ref());
}

#[test]
fn every_bad_row_is_named_by_its_line_and_none_is_taken() {
    let press = every_sample().into_iter().find(|press| press.reference.is_some()).unwrap();
    let text = "date,stop_ms,brake\n2026-12-01,182,warm\n2026-13-01,182,warm\n2026-12-01,20000,hot\n2026-12-01,\n";
    let refusals = import_readings(&press, text).unwrap_err();
    let lines: Vec<u64> = refusals.iter().map(|refusal| refusal.line).collect();
    assert_eq!(lines, [3, 4, 4, 5]);
    assert!(
        refusals[1].to_string().starts_with("Line 4: stop_ms is 20000 ms. It must be from 1 to 10000 ms."),
        "{}",
        refusals[1]
    );
}

#[test]
fn unknown_twice_given_and_missing_columns_are_refused() {
    let press = sample("E-101");
    for (text, words) in [
        ("date,stop_ms,colour\n", "\"colour\" is not known"),
        ("date,stop_ms,date\n", "stands twice"),
        ("date,by\n2026-12-01,M.\n", "\"stop_ms\" is missing"),
        ("", "is missing"),
        ("date,stop_ms\n", "no row"),
    ] {
        let refusals = import_readings(&press, text).unwrap_err();
        assert!(refusals[0].why.contains(words), "{text:?}: {}", refusals[0]);
    }
}
