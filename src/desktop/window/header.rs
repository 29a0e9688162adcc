//! What stays in view on every sheet of a press: the reach strip, its sentence and the tabs.

use calc::sentence;
use egui::{RichText, Ui};
use figure::{AnswerMark, Role, StripInput, reach_strip};

use super::app::answer_role;
use super::commands::Command;
use super::context::SheetContext;
use super::drawing::{POINTS_PER_MM, drawing_ui, mark_ui, width_mm};
use super::sheets::Sheet;
use super::theme;
use super::widgets::{empty_state, shortcut_button};
use super::wishes::{Wish, Wishes};
use crate::document::History;

/// Height of the strip, kept where there is none, so that the sheet below does not jump when the first stop is typed.
const STRIP_MM: f32 = 22.5;

/// Shows the head of a press. While an entry cannot be taken, `no_result` says so in place of the answer.
pub fn header_ui(ui: &mut Ui, cx: &SheetContext, sheet: Sheet, no_result: Option<&NoResult>, wishes: &mut Wishes) {
    match cx.assessment() {
        Some(assessment) => {
            safeguards_row_ui(ui, cx, wishes);
            let strip = StripInput::of(assessment, cx.unit).filter(|_| no_result.is_none());
            match (strip, no_result) {
                (Some(input), _) => {
                    drawing_ui(ui, &reach_strip(&input, width_mm(ui), &theme::drawing_fonts()));
                }
                (None, Some(_)) => no_strip_ui(ui, "No distance is drawn while an entry cannot be taken."),
                (None, None) => no_strip_ui(ui, "No distance to draw yet."),
            }
            match no_result {
                Some(no_result) => no_result_ui(ui, no_result),
                None => sentence_ui(ui, cx),
            }
        }
        None => {
            let keys = ui.ctx().format_shortcut(&Command::ShowSheet(2).shortcut());
            let what = format!("Add one on the sheet Safeguards ({keys}).");
            empty_state(ui, "This press has no safeguard yet", &what);
            if let Some(no_result) = no_result {
                no_result_ui(ui, no_result);
            }
        }
    }
    ui.add_space(2.0);
    tabs_ui(ui, sheet, wishes);
    ui.add_space(4.0);
}

/// Why no answer is given.
pub struct NoResult {
    /// "An entry on the sheet Press cannot be taken."
    pub sentence: String,
    /// The first refusal, and what to do.
    pub what_to_do: String,
}

impl NoResult {
    /// `None` when every entry could be taken.
    pub fn of(refused: &[(Sheet, Vec<String>)]) -> Option<Self> {
        let first = refused.first()?.1.first()?;
        let places: Vec<String> = refused
            .iter()
            .map(|(sheet, words)| match words.len() {
                1 => format!("an entry on the sheet {} cannot be taken", sheet.name()),
                count => format!("{count} entries on the sheet {} cannot be taken", sheet.name()),
            })
            .collect();
        Some(Self {
            sentence: format!("{}.", calc::assess::capitalised(&places.join(", and "))),
            what_to_do: format!("{first} Escape in the field brings back what stood there."),
        })
    }
}

fn no_strip_ui(ui: &mut Ui, words: &str) {
    let size = egui::vec2(ui.available_width(), STRIP_MM * POINTS_PER_MM);
    ui.allocate_ui(size, |ui| {
        ui.set_min_height(size.y);
        ui.centered_and_justified(|ui| {
            ui.label(RichText::new(words).color(theme::colour(ui.ctx(), Role::Faint)));
        });
    });
}

fn tabs_ui(ui: &mut Ui, shown: Sheet, wishes: &mut Wishes) {
    ui.horizontal(|ui| {
        ui.spacing_mut().item_spacing.x = 4.0;
        for (index, sheet) in Sheet::ALL.iter().enumerate() {
            let keys = ui.ctx().format_shortcut(&Command::ShowSheet(index).shortcut());
            let text = RichText::new(sheet.name()).font(theme::strong(14.5));
            if ui.selectable_label(shown == *sheet, text).on_hover_text(keys).clicked() {
                wishes.push(Wish::ShowSheet(*sheet));
            }
        }
    });
}

fn safeguards_row_ui(ui: &mut Ui, cx: &SheetContext, wishes: &mut Wishes) {
    ui.horizontal_wrapped(|ui| {
        ui.spacing_mut().item_spacing.x = 3.0;
        for (index, (safeguard, assessment)) in cx.press.safeguards.iter().zip(&cx.result.assessments).enumerate() {
            let mark = if cx.is_without_result { AnswerMark::Unproven } else { assessment.answer.into() };
            mark_ui(ui, mark, 10.0);
            let name = calc::assess::capitalised(&safeguard.name);
            if ui.selectable_label(index == cx.safeguard, name).clicked() {
                wishes.push(Wish::ShowSafeguard(index));
            }
            ui.add_space(8.0);
        }
    });
}

/// Room for a sentence and its remedies, kept whether both are there or not.
fn two_lines_ui(ui: &mut Ui, add: impl FnOnce(&mut Ui)) {
    let height = ui.text_style_height(&egui::TextStyle::Body) * 2.0 + 16.0;
    ui.allocate_ui(egui::vec2(ui.available_width(), height), |ui| {
        ui.set_min_height(height);
        ui.vertical(add);
    });
}

fn answer_ui(ui: &mut Ui, mark: AnswerMark, role: Role, word: &str, sentence: &str) {
    ui.horizontal_wrapped(|ui| {
        ui.spacing_mut().item_spacing.x = 6.0;
        mark_ui(ui, mark, 13.0);
        let colour = theme::colour(ui.ctx(), role);
        ui.label(RichText::new(word).font(theme::strong(15.0)).color(colour));
        ui.label(RichText::new(sentence).font(theme::strong(15.0)));
    });
}

fn no_result_ui(ui: &mut Ui, no_result: &NoResult) {
    two_lines_ui(ui, |ui| {
        answer_ui(ui, AnswerMark::Unproven, Role::Unproven, "No result", &no_result.sentence);
        ui.add(egui::Label::new(&no_result.what_to_do).wrap());
    });
}

fn sentence_ui(ui: &mut Ui, cx: &SheetContext) {
    let (Some(assessment), Some(safeguard)) = (cx.assessment(), cx.press.safeguards.get(cx.safeguard)) else { return };
    two_lines_ui(ui, |ui| {
        let words = sentence::headline(safeguard, assessment, cx.unit);
        let role = answer_role(assessment.answer);
        answer_ui(ui, assessment.answer.into(), role, assessment.answer.word(), &words);
        if let Some(remedies) = sentence::remedies(assessment, cx.unit) {
            ui.add(egui::Label::new(remedies).wrap());
        }
    });
}

/// Shows what to do when there is no press to show.
pub fn nothing_shown_ui(ui: &mut Ui, history: Option<&History>, wishes: &mut Wishes) {
    let (title, what) = match history {
        None => ("No plant is open", "Open the folder of a plant, or make a new one."),
        Some(history) if history.document().presses.is_empty() => {
            ("This plant has no press yet", "Add the first one; its tag is all that it needs to begin with.")
        }
        Some(_) => ("No press is chosen", "Choose one from the list."),
    };
    ui.add_space((ui.available_height() * 0.25).max(0.0));
    empty_state(ui, title, what);
    let commands: &[Command] = match history {
        None => &[Command::OpenPlant, Command::NewPlant],
        Some(_) => &[Command::NewPress],
    };
    for command in commands {
        ui.vertical_centered(|ui| {
            if shortcut_button(ui, command.name(), &command.shortcut(), true).clicked() {
                wishes.push(match command {
                    Command::OpenPlant => Wish::OpenPlant,
                    Command::NewPlant => Wish::NewPlant,
                    _ => Wish::NewPress,
                });
            }
        });
    }
}
