//! The foot: what was done or refused, the state of the file, and the cautions, always.

use egui::{Align, Label, Layout, RichText, Ui};
use figure::Role;
use jiff::civil::DateTime;

use super::app::Given;
use super::theme;
use crate::document::History;

/// What is said at the foot of the window.
pub struct Messages {
    lines: Vec<(String, bool)>,
    /// Said until the first other message, about the renderer.
    once: Option<String>,
    saved: Option<DateTime>,
}

impl Messages {
    /// Nothing but what is said once about the renderer.
    pub fn new(once: &str) -> Self {
        Self { lines: Vec::new(), once: (!once.is_empty()).then(|| once.to_owned()), saved: None }
    }

    /// Takes back what was said.
    pub fn clear(&mut self) {
        self.lines.clear();
        self.once = None;
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

    /// Says that all was saved, and when.
    pub fn saved(&mut self, at: DateTime, words: String) {
        self.saved = Some(at);
        self.tell(words);
    }

    /// Forgets when the plant was saved: another one is open.
    pub fn other_plant(&mut self) {
        self.saved = None;
        self.lines.clear();
    }
}

const CAUTION: &str = "This program does not replace the standard, the local code, the press maker's instructions or a competent person's judgement. \
    Distances also depend on access over, under, round and behind the safeguard. A stop timed today says nothing about a brake adjusted tomorrow. \
    Never defeat a safeguard to take a measurement. Lock out before reaching in.";

/// Shows the foot of the window. One line is kept for messages, so that the sheet above does not move when one comes or goes.
pub fn status_ui(ui: &mut Ui, messages: &Messages, history: Option<&History>, given: &Given) {
    ui.spacing_mut().item_spacing.y = 3.0;
    let faint = theme::colour(ui.ctx(), Role::Faint);
    ui.horizontal_top(|ui| {
        ui.set_min_height(22.0);
        ui.spacing_mut().interact_size.y = 20.0;
        ui.with_layout(Layout::right_to_left(Align::Min), |ui| {
            let state = state_words(messages, history, given);
            ui.label(RichText::new(state).size(13.0).color(theme::colour(ui.ctx(), Role::Ink)));
            ui.add_space(24.0);
            ui.with_layout(Layout::top_down(Align::Min), |ui| {
                if let Some(once) = &messages.once {
                    ui.add(Label::new(RichText::new(once).size(13.0).color(faint)).truncate());
                }
                for (words, is_refusal) in &messages.lines {
                    line_ui(ui, words, *is_refusal);
                }
            });
        });
    });
    ui.add(Label::new(RichText::new(CAUTION).size(11.5).color(faint)).wrap());
}

fn line_ui(ui: &mut Ui, words: &str, is_refusal: bool) {
    let role = if is_refusal { Role::Short } else { Role::Accent };
    let text = RichText::new(words).size(13.0).color(theme::colour(ui.ctx(), role));
    ui.horizontal_wrapped(|ui| {
        ui.label(text);
        if is_refusal && ui.small_button("Copy").clicked() {
            ui.ctx().copy_text(words.to_owned());
        }
    });
}

fn state_words(messages: &Messages, history: Option<&History>, given: &Given) -> String {
    match (history, messages.saved) {
        (None, _) => "no plant open".into(),
        (Some(history), _) if history.is_dirty() => "unsaved changes".into(),
        (Some(_), Some(at)) if at.date() == given.today => format!("saved {:02}:{:02}", at.hour(), at.minute()),
        (Some(_), Some(at)) => format!("saved {}", at.date()),
        (Some(_), None) if given.is_sample => "a copy of the invented samples".into(),
        (Some(_), None) => "no changes".into(),
    }
}
