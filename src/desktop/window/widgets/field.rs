//! The entry field: text stays as it was typed until it is valid, and nothing ever changes by being drawn.
//!
//! Enter, Tab and leaving commit; Escape brings the committed value back. What cannot be taken stays, marked in words. There
//! is no dragging, no wheel and no stepping.

use std::collections::HashMap;

use calc::calendar::{Moment, parse_date};
use calc::decimal::{self, Side};
use calc::limits::Limit;
use calc::refusal::Refusal;
use calc::round::{Towards, length_digits_full, thousandths_text};
use calc::units::{Length, LengthUnit};
use egui::{Id, Key, Margin, Response, TextEdit, Ui, WidgetText};
use figure::Role;
use jiff::civil::Date;

use crate::window::theme;

/// Texts that people are typing, by field. One for each sheet; losing it loses only what was not committed.
#[derive(Default)]
pub struct Drafts {
    texts: HashMap<Id, Draft>,
    focus: Option<Id>,
    /// The latest pass in which a field of the sheet was drawn.
    drawn: u64,
}

struct Draft {
    text: String,
    /// The committed text that the draft began from; when it changes underneath, by undo or a paste, the draft is stale.
    began_from: String,
    refusal: Option<Refusal>,
    /// The latest pass in which its field was drawn.
    drawn: u64,
}

impl Drafts {
    /// Forgets every draft.
    pub fn clear(&mut self) {
        *self = Self::default();
    }

    /// What could not be taken, in words, as the sheet was last drawn. A field that is no longer there, such as one of a safeguard
    /// that was removed, does not count.
    pub fn refused(&self) -> Vec<String> {
        let drawn = self.texts.values().filter(|draft| draft.drawn == self.drawn);
        let mut words: Vec<String> = drawn.filter_map(|draft| Some(draft.refusal.as_ref()?.to_string())).collect();
        words.sort_unstable();
        words
    }

    /// Puts the cursor into a field as soon as it is drawn.
    pub fn focus(&mut self, id: Id) {
        self.focus = Some(id);
    }

    /// The refusal that stands at a field.
    pub fn refusal(&self, id: Id) -> Option<&Refusal> {
        self.texts.get(&id)?.refusal.as_ref()
    }

    /// Keeps text that could not be taken at a field, with the reason.
    pub fn keep_refused(&mut self, id: Id, text: String, refusal: Refusal) {
        let began_from = self.texts.get(&id).map_or(String::new(), |draft| draft.began_from.clone());
        self.texts.insert(id, Draft { text, began_from, refusal: Some(refusal), drawn: self.drawn });
    }

    fn keep(&mut self, id: Id, text: String, began_from: &str, refusal: Option<Refusal>) {
        self.texts.insert(id, Draft { text, began_from: began_from.to_owned(), refusal, drawn: self.drawn });
    }

    /// Takes note that a field is drawn in this pass.
    fn draw(&mut self, id: Id, pass: u64) {
        self.drawn = pass;
        if let Some(draft) = self.texts.get_mut(&id) {
            draft.drawn = pass;
        }
    }
}

/// How the cursor left a field.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Moved {
    /// By Enter.
    Enter,
    /// By Tab, or to another place.
    Away,
}

/// What came of a field in this frame.
#[derive(Clone, PartialEq, Debug)]
pub enum Commit<T> {
    /// A value to take over; the way the cursor left comes with it.
    Set(T, Moved),
    /// The field was emptied.
    Cleared(Moved),
    /// Text that cannot be taken; it stays in the field with the reason.
    Refused,
    /// Left by Enter without a change.
    Passed,
}

/// How a field is shown.
#[derive(Clone, Copy, Debug)]
pub struct FieldKind<'a> {
    /// Its name, also for screen readers.
    pub label: &'a str,
    /// The unit behind it.
    pub unit: &'a str,
    /// Its width in points.
    pub width: f32,
    /// Whether its text ends at the right, as figures do.
    pub is_figure: bool,
    /// Whether its name stands before it, or is for screen readers only.
    pub shows_label: bool,
    /// What it holds when empty, shown faintly.
    pub hint: &'a str,
}

impl<'a> FieldKind<'a> {
    /// A field for a figure, with its name before it.
    pub const fn figure(label: &'a str, unit: &'a str) -> Self {
        Self { label, unit, width: 78.0, is_figure: true, shows_label: true, hint: "" }
    }

    /// A field for words, with its name before it.
    pub const fn words(label: &'a str) -> Self {
        Self { label, unit: "", width: 220.0, is_figure: false, shows_label: true, hint: "" }
    }

    /// The same field in another width.
    pub const fn wide(self, width: f32) -> Self {
        Self { width, ..self }
    }

    /// The same field without its name before it, as in a table.
    pub const fn bare(self) -> Self {
        Self { shows_label: false, ..self }
    }

    /// The same field with a hint.
    pub const fn hint(self, hint: &'a str) -> Self {
        Self { hint, ..self }
    }
}

/// A field narrower than this keeps its room for digits.
const NARROW: f32 = 60.0;

/// An entry field. `committed` is the text of the stored value; `read` takes the typed text or refuses it.
///
/// The identity must come from the data (tag of the press and name of the field), never from the position on the sheet.
pub fn field_ui<T>(
    ui: &mut Ui,
    id: Id,
    kind: FieldKind,
    committed: &str,
    drafts: &mut Drafts,
    read: impl FnOnce(&str) -> Result<T, Refusal>,
) -> Option<Commit<T>> {
    if drafts.texts.get(&id).is_some_and(|draft| draft.began_from != committed) {
        drafts.texts.remove(&id);
    }
    drafts.draw(id, ui.ctx().cumulative_pass_nr());
    let mut text = drafts.texts.get(&id).map_or_else(|| committed.to_owned(), |draft| draft.text.clone());
    let is_refused = drafts.refusal(id).is_some();
    let response = ui
        .horizontal(|ui| {
            let label = if kind.shows_label { Some(ui.label(kind.label)) } else { None };
            let mut edit = TextEdit::singleline(&mut text)
                .id(id)
                .desired_width(kind.width)
                .hint_text(WidgetText::from(kind.hint).color(theme::colour(ui.ctx(), Role::Faint)));
            if kind.width < NARROW {
                edit = edit.margin(egui::Margin::symmetric(3, 4));
            }
            if kind.is_figure {
                edit = edit.align(egui::Align2::RIGHT_CENTER).margin(figure_margin(kind.width));
            }
            if is_refused {
                edit = edit.text_color(theme::colour(ui.ctx(), Role::Short));
            }
            let response = ui.add(edit);
            match label {
                Some(label) => {
                    response.clone().labelled_by(label.id);
                }
                None => response.widget_info(|| {
                    let mut info = egui::WidgetInfo::labeled(egui::Role::TextInput, true, kind.label);
                    info.current_text_value = Some(text.clone());
                    info
                }),
            }
            if !kind.unit.is_empty() {
                ui.label(egui::RichText::new(kind.unit).color(theme::colour(ui.ctx(), Role::Faint)));
            }
            if is_refused {
                let painter = ui.painter();
                painter.rect_stroke(
                    response.rect,
                    3.0,
                    egui::Stroke::new(1.5, theme::colour(ui.ctx(), Role::Short)),
                    egui::StrokeKind::Inside,
                );
            }
            response
        })
        .inner;
    if drafts.focus == Some(id) {
        drafts.focus = None;
        response.request_focus();
    }
    if response.has_focus() {
        ui.data_mut(|data| data.insert_temp(entry_mark(), id));
    }
    if response.gained_focus() {
        select_all(ui, &response, text.chars().count());
    }
    if let Some(refusal) = drafts.refusal(id) {
        response.clone().on_hover_text(refusal.to_string());
    }
    settle(ui, id, &response, text, committed, drafts, |text| {
        check_characters(kind.label, text)?;
        read(text)
    })
}

/// Refuses characters that the program's own fonts lack, by name: what cannot be printed must not be found out when the record is.
fn check_characters(label: &str, text: &str) -> Result<(), Refusal> {
    let missing = theme::drawing_fonts().missing(text.trim(), figure::Weight::Regular);
    if missing.is_empty() {
        return Ok(());
    }
    let named: Vec<String> = missing.iter().map(|one| format!("{one} (U+{:04X})", u32::from(*one))).collect();
    let remedy = format!("Leave out {}.", named.join(", "));
    Err(Refusal::new(label, text.trim(), "of characters that can be shown and printed", remedy))
}

/// Room beside the digits; a narrow cell needs it all for them.
fn figure_margin(width: f32) -> Margin {
    Margin::symmetric(if width < 60.0 { 3 } else { 7 }, 2)
}

/// What typing, Enter, Tab, Escape and leaving make of the field.
fn settle<T>(
    ui: &Ui,
    id: Id,
    response: &Response,
    text: String,
    committed: &str,
    drafts: &mut Drafts,
    read: impl FnOnce(&str) -> Result<T, Refusal>,
) -> Option<Commit<T>> {
    if !response.lost_focus() {
        if response.changed() {
            drafts.keep(id, text, committed, None);
        }
        return None;
    }
    let (enter, escape) = ui.input(|input| (input.key_pressed(Key::Enter), input.key_pressed(Key::Escape)));
    if escape {
        drafts.texts.remove(&id);
        return None;
    }
    let moved = if enter { Moved::Enter } else { Moved::Away };
    if text.trim() == committed.trim() {
        drafts.texts.remove(&id);
        return enter.then_some(Commit::Passed);
    }
    if text.trim().is_empty() {
        drafts.texts.remove(&id);
        return Some(Commit::Cleared(moved));
    }
    match read(&text) {
        Ok(value) => {
            drafts.texts.remove(&id);
            Some(Commit::Set(value, moved))
        }
        Err(refusal) => {
            drafts.keep(id, text, committed, Some(refusal));
            Some(Commit::Refused)
        }
    }
}

/// Under which the entry field that has the cursor is noted.
fn entry_mark() -> Id {
    Id::unique("entry field with the cursor")
}

/// Whether the cursor stands in a text that is typed straight away, such as a path or the find box, and not in an entry field,
/// whose text becomes part of the plant.
pub fn has_own_undo(context: &egui::Context) -> bool {
    let Some(focused) = context.memory(|memory| memory.focused()) else { return false };
    let is_entry = context.data(|data| data.get_temp::<Id>(entry_mark())) == Some(focused);
    !is_entry && TextEdit::load_state(context, focused).is_some()
}

fn select_all(ui: &Ui, response: &Response, length: usize) {
    use egui::text::{CCursor, CCursorRange};
    if let Some(mut state) = TextEdit::load_state(ui.ctx(), response.id) {
        state.cursor.set_char_range(Some(CCursorRange::two(CCursor::new(0), CCursor::new(length))));
        state.store(ui.ctx(), response.id);
    }
}

/// A field for a figure within a limit, in thousandths of the limit's unit.
pub fn number_field(
    ui: &mut Ui,
    id: Id,
    kind: FieldKind,
    limit: &Limit,
    current: Option<i64>,
    drafts: &mut Drafts,
) -> Option<Commit<i64>> {
    let committed = current.map_or(String::new(), thousandths_text);
    field_ui(ui, id, kind, &committed, drafts, |text| limit.take_text(text))
}

/// A field for a length in the shown unit; the last micrometre of inches falls to the cautious side.
#[allow(clippy::too_many_arguments)]
pub fn length_field(
    ui: &mut Ui,
    id: Id,
    kind: FieldKind,
    limit: &Limit,
    unit: LengthUnit,
    side: Side,
    current: Option<Length>,
    drafts: &mut Drafts,
) -> Option<Commit<Length>> {
    let committed = current.map_or(String::new(), |length| length_digits_full(length, unit, Towards::Nearest));
    let kind = FieldKind { unit: unit.sign(), ..kind };
    field_ui(ui, id, kind, &committed, drafts, |text| {
        let length = decimal::length(text, unit, side).map_err(|why| limit.unreadable(text, why))?;
        limit.take(length.base()).map(Length::from_base)
    })
}

/// A field for words. An emptied one gives [`Commit::Cleared`].
pub fn text_field(ui: &mut Ui, id: Id, kind: FieldKind, current: &str, drafts: &mut Drafts) -> Option<Commit<String>> {
    field_ui(ui, id, kind, current, drafts, |text| Ok(text.trim().to_owned()))
}

/// A field for a day.
pub fn date_field(
    ui: &mut Ui,
    id: Id,
    kind: FieldKind,
    current: Option<Date>,
    drafts: &mut Drafts,
) -> Option<Commit<Date>> {
    let committed = current.map_or(String::new(), |date| date.to_string());
    field_ui(ui, id, kind.hint("year-month-day"), &committed, drafts, |text| parse_date(kind.label, text))
}

/// A field for a day with or without a time of day.
pub fn moment_field(
    ui: &mut Ui,
    id: Id,
    kind: FieldKind,
    current: Option<Moment>,
    drafts: &mut Drafts,
) -> Option<Commit<Moment>> {
    let committed = current.map_or(String::new(), |moment| moment.to_string());
    field_ui(ui, id, kind.hint("year-month-day"), &committed, drafts, |text| Moment::parse(kind.label, text))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_character_that_cannot_be_printed_is_refused_by_name() {
        assert_eq!(check_characters("Description", "180 t ≥ 90° ½ µ ß é Ł → ₉₀"), Ok(()));
        let refusal = check_characters("Description", "Press \u{2714}").unwrap_err();
        assert!(refusal.to_string().contains("Leave out \u{2714} (U+2714)."), "{refusal}");
    }
}
