//! What holds for the whole plant: rules, wishes for more caution, intervals.

use crate::rules::RuleSetId;
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
}
