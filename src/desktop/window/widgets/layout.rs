//! Headings, cards, badges and lines of words.

use calc::refusal::Refusal;
use calc::verdict::Answer;
use egui::{Button, Frame, KeyboardShortcut, Margin, Response, RichText, Stroke, Ui};
use figure::Role;

use crate::window::drawing::mark_ui;
use crate::window::theme;

/// The heading of a part of a sheet.
pub fn heading(ui: &mut Ui, text: &str) {
    ui.add_space(8.0);
    ui.label(RichText::new(text).font(theme::strong(15.0)));
    ui.add_space(1.0);
}

/// A line of lesser text.
pub fn caption(ui: &mut Ui, text: impl Into<String>) -> Response {
    ui.label(RichText::new(text).size(12.5).color(theme::colour(ui.ctx(), Role::Faint)))
}

/// An answer as mark and word in its colour.
pub fn answer_badge(ui: &mut Ui, answer: Answer) -> Response {
    ui.horizontal(|ui| {
        ui.spacing_mut().item_spacing.x = 5.0;
        mark_ui(ui, answer, 11.0);
        let role = figure::AnswerMark::from(answer).role();
        ui.label(RichText::new(answer.word()).font(theme::strong(14.0)).color(theme::colour(ui.ctx(), role)))
    })
    .inner
}

/// In place of an answer while an entry cannot be taken.
pub fn no_result_badge(ui: &mut Ui) -> Response {
    ui.horizontal(|ui| {
        ui.spacing_mut().item_spacing.x = 5.0;
        mark_ui(ui, Answer::Unproven, 11.0);
        let colour = theme::colour(ui.ctx(), Role::Unproven);
        ui.label(RichText::new("No result").font(theme::strong(14.0)).color(colour))
    })
    .inner
}

/// A framed part of a sheet.
pub fn card_ui<R>(ui: &mut Ui, add: impl FnOnce(&mut Ui) -> R) -> R {
    let visuals = &ui.style().visuals;
    Frame::new()
        .fill(visuals.faint_bg_color)
        .stroke(Stroke::new(1.0, visuals.window_stroke.color))
        .corner_radius(4.0)
        .inner_margin(Margin::same(12))
        .show(ui, add)
        .inner
}

/// Words in place of what is not there yet, saying what to do.
pub fn empty_state(ui: &mut Ui, title: &str, what_to_do: &str) {
    ui.add_space(24.0);
    ui.vertical_centered(|ui| {
        ui.label(RichText::new(title).font(theme::strong(16.0)));
        ui.label(RichText::new(what_to_do).color(theme::colour(ui.ctx(), Role::Faint)));
    });
    ui.add_space(24.0);
}

/// A line kept for the refusal of a field, empty or not, so that nothing jumps when one appears.
pub fn refusal_line(ui: &mut Ui, refusal: Option<&Refusal>) {
    let words = refusal.map_or(String::new(), Refusal::to_string);
    ui.label(RichText::new(words).size(12.5).color(theme::colour(ui.ctx(), Role::Short)));
}

/// A button with its shortcut beside its name.
pub fn shortcut_button(ui: &mut Ui, name: &str, shortcut: &KeyboardShortcut, is_possible: bool) -> Response {
    let keys = ui.ctx().format_shortcut(shortcut);
    ui.add_enabled(is_possible, Button::new(name).shortcut_text(keys))
}

/// Name and value side by side, the name faint.
pub fn pairs_row(ui: &mut Ui, name: &str, value: &str) {
    ui.label(RichText::new(name).color(theme::colour(ui.ctx(), Role::Faint)));
    ui.label(value);
    ui.end_row();
}
