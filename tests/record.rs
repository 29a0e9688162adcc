//! The record of the sample presses: complete, the same every time, and refused where it cannot be printed.

use std::path::Path;

use calc::plant_settings::PlantSettings;
use calc::press::Press;
use calc::rules::RuleSetId;
use calc::units::LengthUnit;
use figure::Mark;
use jiff::civil::date;
use record::{Paper, Record, RecordInput, RecordRefusal, SignOff, press_record};

fn samples() -> (PlantSettings, Vec<Press>) {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../sample-presses");
    let plant = plant::open(&folder).unwrap();
    (plant.settings, plant.presses.into_iter().map(|stored| stored.content.unwrap()).collect())
}

fn record(plant: &PlantSettings, press: &Press, rules: RuleSetId, paper: Paper, unit: LengthUnit) -> Record {
    let sign_off = [("J. Doe", "engineer"), ("", ""), ("", "")].map(|(name, role)| SignOff {
        name: name.into(),
        role: role.into(),
        date: String::new(),
    });
    press_record(&RecordInput { plant, press, rules, date: date(2026, 12, 1), version: "0.1.0", unit, paper, sign_off })
}

#[test]
fn every_stop_every_step_and_the_cautions_stand_on_it() {
    let (plant, presses) = samples();
    for press in &presses {
        let found = record(&plant, press, plant.rules, Paper::A4, LengthUnit::Millimetre);
        let text = found.to_text();
        let words: String = text.split_whitespace().collect::<Vec<_>>().join(" ");
        for test in &press.stop_tests {
            let stops: Vec<String> = test.stops.iter().map(|stop| stop.digits()).collect();
            for stop in &stops {
                assert!(words.contains(stop.as_str()), "{}: stop {stop}", press.tag);
            }
        }
        for assessment in calc::assess::assess_press(press, &plant, date(2026, 12, 1)) {
            for step in assessment.steps.iter() {
                let value = step.value.text(LengthUnit::Millimetre);
                for word in value.split_whitespace() {
                    assert!(words.contains(word), "{}: {} = {value}", press.tag, step.symbol);
                }
            }
            assert!(words.contains(assessment.answer.word()));
        }
        let pages = found.pages.len();
        for page in 1..=pages {
            assert!(words.contains(&format!("page {page} of {pages}")), "{}", press.tag);
        }
        assert_eq!(words.matches("does not replace the standard").count(), pages, "{}", press.tag);
        assert_eq!(words.matches("lock out before reaching in").count(), pages, "{}", press.tag);
        for sign in ["Prepared", "Checked", "Accepted", "J. Doe", "signature"] {
            assert!(words.contains(sign), "{}: {sign}", press.tag);
        }
    }
}

#[test]
fn the_same_input_gives_the_same_bytes() {
    let (plant, presses) = samples();
    let make = || record(&plant, &presses[0], plant.rules, Paper::A4, LengthUnit::Millimetre).to_pdf().unwrap();
    let first = make();
    assert!(first.starts_with(b"%PDF-"));
    assert_eq!(first, make());
}

#[test]
fn nothing_is_drawn_outside_the_paper() {
    let (plant, presses) = samples();
    for (paper, unit) in [(Paper::A4, LengthUnit::Millimetre), (Paper::Letter, LengthUnit::Inch)] {
        let (width, height) = paper.size();
        for rules in [plant.rules, RuleSetId::Us1910217H, RuleSetId::AnsiB1119] {
            for press in &presses {
                for page in record(&plant, press, rules, paper, unit).pages {
                    assert_eq!((page.width, page.height), (width, height));
                    let points = page.marks.iter().flat_map(|mark| match mark {
                        Mark::Line { points, .. } | Mark::Area { points, .. } => points.clone(),
                        Mark::Text(text) => vec![text.at],
                    });
                    for point in points {
                        assert!(0.0 <= point.x && point.x <= width, "{} {rules:?} {point:?}", press.tag);
                        assert!(0.0 <= point.y && point.y <= height, "{} {point:?}", press.tag);
                    }
                }
            }
        }
    }
}

#[test]
fn no_line_of_text_runs_over_the_edge() {
    let (plant, presses) = samples();
    let fonts = figure::Fonts::new();
    for press in &presses {
        for page in record(&plant, press, plant.rules, Paper::A4, LengthUnit::Millimetre).pages {
            for text in page.texts() {
                let width = fonts.width(&text.text, text.size, text.weight);
                let left = match text.anchor {
                    figure::Anchor::Start => text.at.x,
                    figure::Anchor::Middle => text.at.x - width / 2.0,
                    figure::Anchor::End => text.at.x - width,
                };
                assert!(left >= 10.0 && left + width <= 202.0, "{}: {:?}", press.tag, text.text);
            }
        }
    }
}

#[test]
fn a_character_without_glyph_is_refused_by_name() {
    let (plant, presses) = samples();
    let mut press = presses[0].clone();
    press.description = "press 中".into();
    let refusal = record(&plant, &press, plant.rules, Paper::A4, LengthUnit::Millimetre).to_pdf().unwrap_err();
    assert!(matches!(refusal, RecordRefusal::NoGlyph { character: '中', page: 1, .. }), "{refusal}");
    assert!(refusal.to_string().contains("U+4E2D"));
}

#[test]
fn what_is_known_from_memory_is_listed_to_be_compared() {
    let (plant, presses) = samples();
    let press = presses.iter().find(|press| press.tag == "E-103").unwrap();
    let text = record(&plant, press, RuleSetId::AnsiB1119, Paper::A4, LengthUnit::Millimetre).to_text();
    assert!(text.contains("Compare with your own copy"));
    assert!(text.contains("ANSI B11.19, depth penetration factor"));
    assert!(text.contains("from memory"));
}
