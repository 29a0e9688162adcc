//! `slidehalt due`: what is due across a plant, and the round list to write on.

use calc::schedule::{Due, due_at, end_of_month, end_of_week};
use record::{Paper, RoundListInput, round_list};
use serde_json::json;

use super::args::{DueArgs, WithinArg};
use super::outcome::columns;
use super::{Outcome, pdf_file, today};

pub fn due(args: &DueArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let plant = match plant::open(&args.plant) {
        Ok(plant) => plant,
        Err(refusal) => {
            outcome.refuse(refusal.to_string());
            return outcome;
        }
    };
    let today = args.on.unwrap_or_else(today);
    let until = match args.within {
        WithinArg::Week => end_of_week(today),
        WithinArg::Month => end_of_month(today),
        WithinArg::Year => calc::calendar::months_after(today, 12),
    };
    let mut presses: Vec<(String, String, Vec<Due>)> = Vec::new();
    for stored in plant.presses {
        match stored.content {
            Ok(press) => {
                presses.push((press.tag.clone(), press.location.clone(), due_at(&press, &plant.settings, today)))
            }
            Err(refusal) => outcome.refuse(refusal.to_string()),
        }
    }
    let mut listed: Vec<(&str, &str, &Due)> = presses
        .iter()
        .flat_map(|(tag, place, due)| due.iter().map(move |due| (tag.as_str(), place.as_str(), due)))
        .filter(|(_, _, due)| due.on <= until)
        .collect();
    listed.sort_by_key(|(tag, _, due)| (due.on, *tag));
    if let Some(path) = &args.out {
        let input = RoundListInput {
            plant: &plant.settings.name,
            presses: &presses,
            today,
            until,
            version: env!("CARGO_PKG_VERSION"),
            paper: Paper::A4,
        };
        let written = round_list(&input)
            .to_pdf()
            .map_err(|refusal| refusal.to_string())
            .and_then(|pdf| pdf_file::write(path, &pdf));
        if let Err(refusal) = written {
            outcome.refuse(refusal);
        }
    }
    if args.json {
        let rows: Vec<_> = listed
            .iter()
            .map(|(tag, place, due)| {
                json!({ "press": tag, "place": place, "due": due.on.to_string(), "overdue": due.on < today, "what": due.what.words() })
            })
            .collect();
        outcome.line(serde_json::to_string_pretty(&rows).unwrap_or_default());
        return outcome;
    }
    if listed.is_empty() {
        outcome.line(format!("Nothing is due until {until}."));
    }
    let rows: Vec<Vec<String>> = listed
        .iter()
        .map(|(tag, place, due)| {
            let state = if due.on < today { "overdue" } else { "" };
            vec![due.on.to_string(), (*tag).to_owned(), due.what.words(), (*place).to_owned(), state.to_owned()]
        })
        .collect();
    columns(&rows).iter().for_each(|line| outcome.line(line));
    outcome
}
