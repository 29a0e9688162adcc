//! `slidehalt check`: one line a safeguard.

use std::path::Path;

use calc::assess::assess;
use calc::plant_settings::PlantSettings;
use calc::press::Press;
use calc::sentence;
use calc::units::LengthUnit;
use calc::verdict::Answer;
use serde_json::{Value, json};

use super::args::CheckArgs;
use super::outcome::columns;
use super::{Outcome, json, today};

pub fn check(args: &CheckArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let mut rows = Vec::new();
    let mut values = Vec::new();
    for path in &args.paths {
        for (plant, press) in presses(path, &mut rows, &mut outcome) {
            check_press(args, &plant, &press, &mut rows, &mut values, &mut outcome);
        }
    }
    if args.json {
        outcome.line(serde_json::to_string_pretty(&Value::Array(values)).unwrap_or_default());
    } else {
        for line in columns(&rows) {
            outcome.line(line);
        }
    }
    outcome
}

/// The presses of a plant folder or a press file; what cannot be read is refused and the rest is still checked.
fn presses(path: &Path, rows: &mut Vec<Vec<String>>, outcome: &mut Outcome) -> Vec<(PlantSettings, Press)> {
    if path.is_dir() {
        return match plant::open(path) {
            Ok(plant) => {
                if plant.presses.is_empty() {
                    // Where no press is, nothing holds.
                    outcome.at_least(1);
                    let words = format!("No press is entered in {}.", path.display());
                    rows.push(vec![Answer::Unproven.word().into(), "(none)".into(), words]);
                }
                let mut presses = Vec::new();
                for stored in plant.presses {
                    match stored.content {
                        Ok(press) => presses.push((plant.settings.clone(), press)),
                        Err(refusal) => outcome.refuse(refusal.to_string()),
                    }
                }
                presses
            }
            Err(refusal) => {
                outcome.refuse(refusal.to_string());
                Vec::new()
            }
        };
    }
    match plant::open_press_file(path) {
        Ok(opened) => vec![opened],
        Err(refusal) => {
            outcome.refuse(refusal.to_string());
            Vec::new()
        }
    }
}

fn check_press(
    args: &CheckArgs,
    plant: &PlantSettings,
    press: &Press,
    rows: &mut Vec<Vec<String>>,
    values: &mut Vec<Value>,
    outcome: &mut Outcome,
) {
    let today = args.on.unwrap_or_else(today);
    if press.safeguards.is_empty() {
        outcome.at_least(1);
        rows.push(vec![Answer::Unproven.word().into(), press.tag.clone(), "No safeguard is entered.".into()]);
        values.push(json!({ "press": press.tag, "safeguard": null, "answer": Answer::Unproven.key() }));
    }
    for safeguard in &press.safeguards {
        let found = assess(press, safeguard, plant, args.rules.unwrap_or(plant.rules), today);
        if found.answer != Answer::Holds {
            outcome.at_least(1);
        }
        let words = sentence::headline(safeguard, &found, LengthUnit::Millimetre);
        rows.push(vec![found.answer.word().into(), press.tag.clone(), words]);
        values.push(json::assessment(&press.tag, safeguard, &found));
    }
}

#[cfg(test)]
mod tests;
