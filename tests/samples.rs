//! The sample presses opened, computed under every rule set, and compared as text with what they gave before.
//!
//! `pinned-samples.txt` is the program's own output: no truth, but an alarm that rings when any figure of any sample changes.
//! The truths are in `outside`. To accept a change that is meant, run this with `PIN=1` and say in the commit why.

use std::fmt::Write as _;
use std::path::Path;

use calc::assess::compare;
use calc::monthly::{sentence, standing};
use calc::sentence::headline;
use calc::units::LengthUnit;
use jiff::civil::date;

#[test]
fn the_samples_give_what_they_gave() {
    let here = Path::new(env!("CARGO_MANIFEST_DIR"));
    let plant = plant::open(&here.join("../sample-presses")).unwrap();
    let today = date(2026, 12, 1);
    let mut text = String::new();
    for stored in plant.presses {
        let press = stored.content.unwrap();
        for safeguard in &press.safeguards {
            for found in compare(&press, safeguard, &plant.settings, today) {
                let words = headline(safeguard, &found, LengthUnit::Millimetre);
                let required = found.demand.map_or("no distance".into(), |demand| demand.required.to_string());
                writeln!(text, "{} | {} | {required} | {words}", press.tag, found.rules.key()).unwrap();
            }
        }
        if let Some(standing) = standing(&press, &plant.settings, today) {
            writeln!(text, "{} | readings | {}", press.tag, sentence(&standing)).unwrap();
        }
    }
    let path = here.join("pinned-samples.txt");
    if std::env::var_os("PIN").is_some() {
        std::fs::write(&path, &text).unwrap();
    }
    let pinned = std::fs::read_to_string(&path).unwrap();
    for (line, (now, then)) in text.lines().zip(pinned.lines()).enumerate() {
        assert_eq!(now, then, "line {}", line + 1);
    }
    assert_eq!(text.lines().count(), pinned.lines().count());
}
