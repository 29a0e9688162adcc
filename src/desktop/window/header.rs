//! What stays in view on every sheet: which press, which rule set, the reach strip and its sentence.

use calc::rules::RuleSetId;
use calc::sentence;
use calc::units::LengthUnit;
use egui::{Align, Layout, RichText, Ui};
use figure::{Role, StripInput, reach_strip};

use super::app::{ViewState, answer_role};
use super::commands::Command;
use super::context::SheetContext;
use super::drawing::{drawing_ui, mark_ui, width_mm};
use super::sheets::Sheet;
use super::theme;
use super::widgets::{bare_choice_ui, empty_state, segments_ui};
use super::wishes::{Wish, Wishes};
use crate::document::History;

/// Shows the head of the window.
pub fn header_ui(ui: &mut Ui, cx: &SheetContext, view: &ViewState, history: &History, wishes: &mut Wishes) {
    title_row_ui(ui, cx, view, history, wishes);
    ui.add_space(2.0);
    match cx.assessment() {
        Some(assessment) => {
            safeguards_row_ui(ui, cx, wishes);
            match StripInput::of(assessment, cx.unit) {
                Some(input) => {
                    drawing_ui(ui, &reach_strip(&input, width_mm(ui), &theme::drawing_fonts()));
                }
                // The strip's place is kept, so that the sheet below does not jump when the first stop is typed.
                None => {
                    ui.allocate_ui(egui::vec2(ui.available_width(), 27.0 * super::drawing::POINTS_PER_MM), |ui| {
                        ui.set_min_height(27.0 * super::drawing::POINTS_PER_MM);
                        ui.centered_and_justified(|ui| {
                            ui.label(
                                RichText::new("No distance to draw yet.").color(theme::colour(ui.ctx(), Role::Faint)),
                            );
                        });
                    });
                }
            }
            sentence_ui(ui, cx);
        }
        None => empty_state(
            ui,
            "This press has no safeguard yet",
            "Add one on the sheet Safeguards: Ctrl+3, then Add safeguard.",
        ),
    }
    ui.add_space(2.0);
    ui.horizontal(|ui| {
        for (index, sheet) in Sheet::ALL.iter().enumerate() {
            let keys = ui.ctx().format_shortcut(&Command::ShowSheet(index).shortcut());
            let text = RichText::new(sheet.name()).font(theme::strong(14.5));
            if ui.selectable_label(view.sheet == *sheet, text).on_hover_text(keys).clicked() {
                wishes.push(Wish::ShowSheet(*sheet));
            }
        }
    });
}

fn title_row_ui(ui: &mut Ui, cx: &SheetContext, view: &ViewState, history: &History, wishes: &mut Wishes) {
    ui.horizontal(|ui| {
        ui.label(RichText::new(&cx.press.tag).font(theme::strong(20.0)));
        let place = [&cx.press.description, &cx.press.location].into_iter().filter(|text| !text.is_empty());
        let words = place.cloned().collect::<Vec<_>>().join(", ");
        ui.with_layout(Layout::right_to_left(Align::Center), |ui| {
            if let Some(is_dark) = segments_ui(ui, "", view.is_dark, &[(true, "dark"), (false, "light")]) {
                wishes.push(Wish::SetDark(is_dark));
            }
            ui.separator();
            if let Some(unit) =
                segments_ui(ui, "", cx.unit, &[(LengthUnit::Inch, "in"), (LengthUnit::Millimetre, "mm")])
            {
                wishes.push(Wish::ShowIn(unit));
            }
            ui.separator();
            if let Some(rules) =
                bare_choice_ui::<RuleSetId>(ui, egui::Id::unique("rule set"), "Rule set", 190.0, cx.document.settings.rules)
            {
                wishes.edit_plant("change the rule set", move |plant| plant.rules = rules);
            }
            ui.separator();
            let button = |ui: &mut Ui, command: Command, hint: Option<&str>| {
                let keys = ui.ctx().format_shortcut(&command.shortcut());
                let response = ui.add_enabled(hint.is_some(), egui::Button::new(command.name()));
                response.on_hover_text(format!("{} ({keys})", hint.unwrap_or_default())).clicked()
            };
            if button(ui, Command::Redo, history.redo_label()) {
                wishes.push(Wish::Redo);
            }
            if button(ui, Command::Undo, history.undo_label()) {
                wishes.push(Wish::Undo);
            }
            if button(ui, Command::Save, history.is_dirty().then_some("write what has changed")) {
                wishes.push(Wish::Save);
            }
            ui.with_layout(Layout::left_to_right(Align::Center), |ui| {
                ui.add(egui::Label::new(RichText::new(words).size(15.0)).truncate());
            });
        });
    });
}

fn safeguards_row_ui(ui: &mut Ui, cx: &SheetContext, wishes: &mut Wishes) {
    ui.horizontal(|ui| {
        ui.spacing_mut().item_spacing.x = 3.0;
        for (index, (safeguard, assessment)) in cx.press.safeguards.iter().zip(&cx.result.assessments).enumerate() {
            mark_ui(ui, assessment.answer, 10.0);
            let name = calc::assess::capitalised(&safeguard.name);
            if ui.selectable_label(index == cx.safeguard, name).clicked() {
                wishes.push(Wish::ShowSafeguard(index));
            }
            ui.add_space(8.0);
        }
    });
}

fn sentence_ui(ui: &mut Ui, cx: &SheetContext) {
    let (Some(assessment), Some(safeguard)) = (cx.assessment(), cx.press.safeguards.get(cx.safeguard)) else { return };
    let height = ui.text_style_height(&egui::TextStyle::Body) * 2.0 + 10.0;
    ui.allocate_ui(egui::vec2(ui.available_width(), height), |ui| {
        ui.set_min_height(height);
        ui.vertical(|ui| {
            ui.horizontal_wrapped(|ui| {
                ui.spacing_mut().item_spacing.x = 6.0;
                mark_ui(ui, assessment.answer, 13.0);
                let colour = theme::colour(ui.ctx(), answer_role(assessment.answer));
                ui.label(RichText::new(assessment.answer.word()).font(theme::strong(15.0)).color(colour));
                let words = sentence::headline(safeguard, assessment, cx.unit);
                ui.label(RichText::new(words).font(theme::strong(15.0)));
            });
            if let Some(remedies) = sentence::remedies(assessment, cx.unit) {
                ui.add(egui::Label::new(remedies).wrap());
            }
        });
    });
}

/// Shows what to do when there is no press to show.
pub fn nothing_shown_ui(ui: &mut Ui, history: Option<&History>, wishes: &mut Wishes) {
    let (title, what) = match history {
        None => ("No plant is open", "Open a plant folder, or make a new one."),
        Some(history) if history.document().presses.is_empty() => {
            ("This plant has no press yet", "Add the first one with New press.")
        }
        Some(_) => ("No press is chosen", "Choose one from the list."),
    };
    empty_state(ui, title, what);
    ui.vertical_centered(|ui| {
        if history.is_some() {
            if ui.button(Command::NewPress.name()).clicked() {
                wishes.push(Wish::NewPress);
            }
        } else if ui.button(Command::OpenPlant.name()).clicked() {
            wishes.push(Wish::OpenPlant);
        }
    });
}
