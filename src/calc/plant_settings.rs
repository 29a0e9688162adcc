//! What holds for the whole plant: rules, wishes for more caution, intervals.

use crate::rules::RuleSetId;
use crate::schedule::Interval;
use crate::value_taken::ValueTaken;

/// What holds for the whole plant.
#[derive(Clone, PartialEq, Debug)]
pub struct PlantSettings {
    /// Name of the plant.
    pub name: String,
    /// The rule set that decides.
    pub rules: RuleSetId,
    /// A more cautious value than the rules take, if wished.
    pub wish: Option<ValueTaken>,
    /// Months between two stop tests of a press.
    pub test_interval_months: u32,
    /// Time between two readings of a press; `None` where the plant takes none.
    pub reading_interval: Option<Interval>,
    /// Share of the spare, in per cent, from which a reading is a warning.
    pub warning_share_percent: u32,
}
