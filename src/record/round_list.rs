//! The round list: what is due across the plant, with empty boxes to write in.

use calc::schedule::Due;
use figure::Fonts;
use jiff::civil::Date;

use crate::Record;
use crate::flow::{Flow, Paper, words};
use crate::press_record::CAUTION;

/// What the list is made from.
#[derive(Clone, PartialEq, Debug)]
pub struct RoundListInput<'a> {
    /// Name of the plant.
    pub plant: &'a str,
    /// Tag and place of each press with what is due there.
    pub presses: &'a [(String, String, Vec<Due>)],
    /// Today.
    pub today: Date,
    /// Up to and including which day it lists.
    pub until: Date,
    /// The version of the program.
    pub version: &'a str,
    /// The paper.
    pub paper: Paper,
}

/// Makes the list.
pub fn round_list(input: &RoundListInput) -> Record {
    let fonts = Fonts::new();
    let mut flow = Flow::new(input.paper, &fonts);
    flow.title("Round list");
    flow.paragraph(&format!("Due until {}. Written on {}.", input.until, input.today));
    flow.space(2.0);
    let columns = [
        words("due", 13.0),
        words("press", 12.0),
        words("place", 20.0),
        words("what", 32.0),
        words("done on, by, result", 45.0),
    ];
    let mut rows: Vec<(Date, Vec<String>)> = Vec::new();
    for (tag, place, due) in input.presses {
        for due in due.iter().filter(|due| due.on <= input.until) {
            let overdue = if due.on < input.today { " (overdue)" } else { "" };
            // A second line of nothing leaves room to write by hand.
            let row =
                vec![format!("{}{overdue}\n ", due.on), tag.clone(), place.clone(), due.what.words(), String::new()];
            rows.push((due.on, row));
        }
    }
    rows.sort();
    if rows.is_empty() {
        flow.paragraph("Nothing is due.");
    } else {
        flow.table(&columns, &rows.into_iter().map(|(_, row)| row).collect::<Vec<_>>());
    }
    flow.boxed_note(28.0, "remarks");
    let foot = format!("Round list of {}   Slidehalt {}", input.today, input.version);
    Record {
        pages: flow.finish(input.plant, &foot, CAUTION),
        title: format!("Round list, {}", input.today),
        date: input.today,
        version: input.version.to_owned(),
    }
}
