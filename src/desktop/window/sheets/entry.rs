//! A field that holds text: what is typed stays as it was typed until it is taken, and drawing it changes nothing.
//!
//! Enter, Tab and leaving hand the text over; Escape brings the last taken text back. A refused text stays in the field, and
//! the refusal is kept until the text is changed, so that a sheet can say it in its fixed place.

use std::collections::BTreeMap;

use calc::refusal::Refusal;
use eframe::egui::text::CCursorRange;
use eframe::egui::{self, Align, Id, Key, Response, Stroke, TextEdit};

/// What is being typed into one field.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct Entry {
    /// The text, where it differs from what was last taken.
    pub text: Option<String>,
    /// Why it was not taken.
    pub refusal: Option<String>,
}

/// The fields of one sheet, by their stable names.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct Entries(BTreeMap<String, Entry>);

impl Entries {
    /// The field of this name.
    pub fn of(&mut self, name: &str) -> &mut Entry {
        self.0.entry(name.to_owned()).or_default()
    }

    /// Every refusal, in the order of names.
    pub fn refusals(&self) -> impl Iterator<Item = &str> {
        self.0.values().filter_map(|entry| entry.refusal.as_deref())
    }

    /// Forgets everything typed.
    pub fn clear(&mut self) {
        self.0.clear();
    }
}

impl Entry {
    /// Takes the outcome of reading the text: taken, it is forgotten here; refused, it stays.
    pub fn settle<T>(&mut self, read: Result<T, Refusal>) -> Option<T> {
        match read {
            Ok(value) => {
                *self = Self::default();
                Some(value)
            }
            Err(refusal) => {
                self.refusal = Some(refusal.to_string());
                None
            }
        }
    }
}

/// How a field looks.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Look {
    /// Its width.
    pub width: f32,
    /// To which side its text keeps.
    pub align: Align,
}

/// Draws a field that last took `taken`. Gives the text when it is handed over, and the response of the field.
pub fn entry_ui(ui: &mut egui::Ui, id: Id, entry: &mut Entry, taken: &str, look: Look) -> (Response, Option<String>) {
    let mut text = entry.text.clone().unwrap_or_else(|| taken.to_owned());
    let refusal = entry.refusal.clone();
    let output = ui
        .scope(|ui| {
            if refusal.is_some() {
                let stroke = Stroke::new(2.0, ui.visuals().error_fg_color);
                let widgets = &mut ui.visuals_mut().widgets;
                for state in [&mut widgets.inactive, &mut widgets.hovered, &mut widgets.active, &mut widgets.open] {
                    state.bg_stroke = stroke;
                }
                ui.visuals_mut().selection.stroke = stroke;
            }
            TextEdit::singleline(&mut text).id(id).desired_width(look.width).horizontal_align(look.align).show(ui)
        })
        .inner;
    let mut response = output.response.response;
    if response.gained_focus() {
        let mut state = output.state;
        state.cursor.set_char_range(Some(CCursorRange::select_all_str(&text)));
        state.store(ui.ctx(), id);
    }
    if response.changed() {
        *entry = Entry { text: Some(text), refusal: None };
    }
    if let Some(refusal) = refusal {
        response = response.on_hover_text(refusal);
    }
    let handed_over = response.lost_focus() || (response.changed() && !response.has_focus());
    if !handed_over {
        return (response, None);
    }
    if ui.input(|input| input.key_pressed(Key::Escape)) {
        *entry = Entry::default();
    }
    let given = entry.text.clone().filter(|_| entry.refusal.is_none());
    if given.as_ref().is_some_and(|given| given.trim() == taken) {
        *entry = Entry::default();
        return (response, None);
    }
    (response, given)
}

/// The number with a decimal point as a field shows it: every digit, nothing rounded.
pub fn shown<T>(value: Option<T>, digits: impl FnOnce(T) -> String) -> String {
    value.map_or_else(String::new, digits)
}

/// Reads a field that may be left empty.
///
/// # Errors
/// What `read` refuses.
pub fn optional<T>(text: &str, read: impl FnOnce(&str) -> Result<T, Refusal>) -> Result<Option<T>, Refusal> {
    if text.trim().is_empty() { Ok(None) } else { read(text).map(Some) }
}
