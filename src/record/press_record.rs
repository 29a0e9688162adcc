//! The record of one press: everything that an auditor needs to work every figure out again by hand.

use calc::assess::assess;
use calc::plant_settings::PlantSettings;
use calc::press::Press;
use calc::rules::RuleSetId;
use calc::units::LengthUnit;
use figure::Fonts;
use jiff::civil::Date;

use crate::flow::{Flow, Paper};
use crate::{Record, prediction, sections};

/// What the record is made from.
#[derive(Clone, PartialEq, Debug)]
pub struct RecordInput<'a> {
    /// The plant.
    pub plant: &'a PlantSettings,
    /// The press.
    pub press: &'a Press,
    /// The rule set that decides.
    pub rules: RuleSetId,
    /// The day of the record.
    pub date: Date,
    /// The version of the program.
    pub version: &'a str,
    /// The unit of lengths.
    pub unit: LengthUnit,
    /// The paper.
    pub paper: Paper,
    /// Who prepared, checked and accepted it, as far as known.
    pub sign_off: [SignOff; 3],
}

/// One line of the sign-off. Empty entries are printed as empty lines to write on.
#[derive(Clone, PartialEq, Eq, Debug, Default)]
pub struct SignOff {
    /// Who signs.
    pub name: String,
    /// In which role.
    pub role: String,
    /// When.
    pub date: String,
}

/// The cautions on every page.
pub(crate) const CAUTION: &str = "This record does not replace the standard, the local code, the press maker's instructions or a competent \
     person's judgement. Distances also depend on access over, under, round and behind the safeguard. A stop timed today says nothing about \
     a brake adjusted tomorrow. Never defeat a safeguard to take a measurement; lock out before reaching in.";

/// Makes the record of a press.
pub fn press_record(input: &RecordInput) -> Record {
    let fonts = Fonts::new();
    let mut flow = Flow::new(input.paper, &fonts);
    let press = input.press;
    let assessments: Vec<_> = press
        .safeguards
        .iter()
        .map(|safeguard| assess(press, safeguard, input.plant, input.rules, input.date))
        .collect();
    sections::identification(&mut flow, input, &assessments);
    sections::stop_tests(&mut flow, input, &assessments);
    for (index, assessment) in assessments.iter().enumerate() {
        sections::safeguard(&mut flow, input, index, assessment);
    }
    sections::readings(&mut flow, input);
    prediction::prediction(&mut flow, input);
    sections::events(&mut flow, press);
    sections::to_check(&mut flow, &assessments);
    sections::sign_off(&mut flow, input);
    let head = format!("{}   Press {}   {}", input.plant.name, press.tag, press.description);
    let foot = format!("Record of {}   {}   Slidehalt {}", input.date, input.rules.title(), input.version);
    Record {
        pages: flow.finish(&head, &foot, CAUTION),
        title: format!("Safety record, press {}, {}", press.tag, input.date),
        date: input.date,
        version: input.version.to_owned(),
    }
}
