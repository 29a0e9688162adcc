//! The small parts that every sheet is made of.

mod choice;
mod field;
mod layout;
mod step_table;

pub use choice::{Named, bare_choice_ui, choice_ui, segments_ui, switch_ui};
pub use field::{
    Commit, Drafts, FieldKind, Moved, date_field, field_ui, has_own_undo, length_field, moment_field, number_field,
    text_field,
};
pub use layout::{
    answer_badge, caption, card_ui, empty_state, heading, no_result_badge, pairs_row, refusal_line, shortcut_button,
};
pub use step_table::step_table_ui;
