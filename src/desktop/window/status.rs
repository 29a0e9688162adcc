//! The line at the foot: cautions always, messages and the state of the file.

use egui::{RichText, Ui};
use figure::Role;

use super::app::Given;
use super::theme;
use crate::document::History;

/// What is said at the foot of the window.
pub struct Messages {
    lines: Vec<(String, bool)>,
    /// Said until the first other message.
    once: Option<String>,
}

impl Messages {
    /// Nothing but what is said once about the renderer.
    pub fn new(once: &str) -> Self {
        Self { lines: Vec::new(), once: (!once.is_empty()).then(|| once.to_owned()) }
    }

    /// Takes back what was said.
    pub fn clear(&mut self) {
        self.lines.clear();
    }

    /// Says that something was done.
    pub fn tell(&mut self, words: String) {
        self.once = None;
        self.lines.push((words, false));
    }

    /// Says why something was not done; it stays until something is done.
    pub fn refuse(&mut self, words: String) {
        self.once = None;
        self.lines.push((words, true));
    }
}

const CAUTION: &str = "This program does not replace the standard, the local code, the press maker's instructions or a competent person's judgement. \
    Distances also depend on access over, under, round and behind the safeguard. A stop timed today says nothing about a brake adjusted tomorrow. \
    Never defeat a safeguard to take a measurement. Lock out before reaching in.";

/// Shows the foot of the window.
pub fn status_ui(ui: &mut Ui, messages: &Messages, history: Option<&History>, given: &Given) {
    let faint = theme::colour(ui.ctx(), Role::Faint);
    for (words, is_refusal) in &messages.lines {
        let role = if *is_refusal { Role::Short } else { Role::Accent };
        ui.horizontal_wrapped(|ui| {
            ui.label(RichText::new(words).color(theme::colour(ui.ctx(), role)));
            if *is_refusal && ui.small_button("Copy").clicked() {
                ui.ctx().copy_text(words.clone());
            }
        });
    }
    let state = match history {
        None => "no plant open",
        Some(history) if history.is_dirty() => "unsaved changes",
        Some(_) if given.is_sample => "a copy of the invented samples",
        Some(_) => "saved",
    };
    let words = match &messages.once {
        Some(once) => format!("{CAUTION} {once}"),
        None => CAUTION.to_owned(),
    };
    const STATE_WIDTH: f32 = 190.0;
    ui.horizontal_top(|ui| {
        ui.allocate_ui(egui::vec2(ui.available_width() - STATE_WIDTH, 0.0), |ui| {
            ui.set_width(ui.available_width());
            ui.add(egui::Label::new(RichText::new(words).size(11.5).color(faint)).wrap());
        });
        ui.with_layout(egui::Layout::right_to_left(egui::Align::Min), |ui| {
            ui.label(RichText::new(state).size(12.5).color(theme::colour(ui.ctx(), Role::Ink)));
        });
    });
}
