//! Rows of a form: label, field, unit, in columns that line up. Refusals are gathered and said in the sheet's one fixed place.

use calc::limits::Limit;
use calc::refusal::Refusal;
use calc::round::thousandths_text;
use egui::{Align, Id, Layout, Rect, Response, Sense, UiBuilder, vec2};
use figure::Role;

use crate::window::theme;
use crate::window::widgets::{Commit, Drafts, FieldKind, field_ui};

/// Where the rows of a form stand, what their ids begin with, and what was refused in them.
pub struct Form<'a> {
    /// The identity of what is edited, such as the tag of the press.
    pub owner: Id,
    /// What is being typed.
    pub drafts: &'a mut Drafts,
    /// Width of the labels.
    pub label: f32,
    /// Width of fields for words and of lists.
    pub field: f32,
    /// What was refused so far, in the order of the fields.
    pub refused: &'a mut Vec<String>,
}

/// Height of a row.
pub const ROW: f32 = 30.0;

impl Form<'_> {
    /// A field for words. Gives the text when it is handed over; an emptied field gives an empty text.
    pub fn words(&mut self, ui: &mut egui::Ui, name: &str, label: &str, taken: &str) -> Option<String> {
        let kind = FieldKind::words(label).wide(self.field);
        match self.row(ui, name, kind, taken, |text| Ok(text.trim().to_owned()))? {
            Commit::Set(text, _) => Some(text),
            Commit::Cleared(_) => Some(String::new()),
            Commit::Refused | Commit::Passed => None,
        }
    }

    /// A number that may be left empty, in thousandths of the unit of `limit`. Gives the new number, or `None` in it when emptied.
    pub fn number(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        label: &str,
        limit: &Limit,
        taken: Option<i64>,
    ) -> Option<Option<i64>> {
        let kind = FieldKind::figure(label, limit.unit);
        let taken = taken.map_or_else(String::new, thousandths_text);
        self.optional(ui, name, kind, &taken, |text| limit.take_text(text))
    }

    /// A number that must be there: emptying the field is refused.
    pub fn needed_number(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        label: &str,
        limit: &Limit,
        taken: Option<i64>,
    ) -> Option<i64> {
        let kind = FieldKind::figure(label, limit.unit);
        let taken = taken.map_or_else(String::new, thousandths_text);
        self.needed(ui, name, kind, &taken, |text| limit.take_text(text))
    }

    /// A field that may be left empty.
    pub fn optional<T>(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        kind: FieldKind,
        taken: &str,
        read: impl FnOnce(&str) -> Result<T, Refusal>,
    ) -> Option<Option<T>> {
        match self.row(ui, name, kind, taken, read)? {
            Commit::Set(value, _) => Some(Some(value)),
            Commit::Cleared(_) => Some(None),
            Commit::Refused | Commit::Passed => None,
        }
    }

    /// A field that must be filled in: emptying it is refused.
    pub fn needed<T>(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        kind: FieldKind,
        taken: &str,
        read: impl Fn(&str) -> Result<T, Refusal>,
    ) -> Option<T> {
        match self.row(ui, name, kind, taken, &read)? {
            Commit::Set(value, _) => Some(value),
            Commit::Cleared(_) => {
                if let Err(refusal) = read("") {
                    let id = self.owner.with(name);
                    self.drafts.keep_refused(id, String::new(), refusal);
                }
                None
            }
            Commit::Refused | Commit::Passed => None,
        }
    }

    fn row<T>(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        kind: FieldKind,
        taken: &str,
        read: impl FnOnce(&str) -> Result<T, Refusal>,
    ) -> Option<Commit<T>> {
        let (id, width) = (self.owner.with(name), self.label);
        let commit = ui
            .horizontal(|ui| {
                ui.set_min_height(ROW);
                label_ui(ui, width, kind.label);
                field_ui(ui, id, kind.bare(), taken, self.drafts, read)
            })
            .inner;
        if let Some(refusal) = self.drafts.refusal(id) {
            self.refused.push(refusal_words(refusal, taken, kind.unit));
        }
        commit
    }

    /// A list of choices, of which none may be chosen yet. Gives a new choice.
    pub fn choice<T: Copy + PartialEq>(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        label: &str,
        (chosen, all): (Option<T>, &[T]),
        words: impl Fn(T) -> &'static str,
    ) -> Option<T> {
        let (id, width) = (self.owner.with(name), self.label);
        ui.horizontal(|ui| {
            ui.set_min_height(ROW);
            let label = label_ui(ui, width, label);
            let mut wished = None;
            let shown = chosen.map_or("not stated", &words);
            let list = egui::ComboBox::from_id_salt(id).width(self.field).truncate().selected_text(shown);
            let response = list.show_ui(ui, |ui| {
                for one in all {
                    if ui.selectable_label(chosen == Some(*one), words(*one)).clicked() && chosen != Some(*one) {
                        wished = Some(*one);
                        // A click closes the list by itself, the keyboard does not.
                        ui.close();
                    }
                }
            });
            if wished.is_some() {
                // The list is gone with the choice in it; the keyboard goes back to where it was opened.
                response.response.request_focus();
            }
            response.response.labelled_by(label.id);
            wished
        })
        .inner
    }

    /// Two or three choices side by side. Gives a new choice.
    pub fn pick<T: Copy + PartialEq>(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        label: &str,
        (chosen, all): (Option<T>, &[T]),
        words: impl Fn(T) -> &'static str,
    ) -> Option<T> {
        let width = self.label;
        let picked = ui.push_id(self.owner.with(name), |ui| {
            ui.horizontal(|ui| {
                ui.set_min_height(ROW);
                label_ui(ui, width, label);
                ui.spacing_mut().item_spacing.x = 3.0;
                let mut wished = None;
                for one in all {
                    let button = egui::Button::selectable(chosen == Some(*one), words(*one)).frame_when_inactive(true);
                    if ui.add(button).clicked() && chosen != Some(*one) {
                        wished = Some(*one);
                    }
                }
                wished
            })
        });
        picked.inner.inner
    }
}

/// A refusal as the strip says it: with what stands until it is put right.
pub fn refusal_words(refusal: &Refusal, taken: &str, unit: &str) -> String {
    match (taken.is_empty(), unit) {
        (true, _) => refusal.to_string(),
        (false, "") => format!("{refusal} Until then, {taken} stands."),
        (false, unit) => format!("{refusal} Until then, {taken} {unit} stands."),
    }
}

/// A label of fixed width.
pub fn label_ui(ui: &mut egui::Ui, width: f32, text: &str) -> Response {
    let size = vec2(width, ui.spacing().interact_size.y);
    ui.allocate_ui_with_layout(size, Layout::left_to_right(Align::Center), |ui| {
        ui.set_min_width(width);
        ui.add(egui::Label::new(text).truncate())
    })
    .inner
}

/// Keeps the one place of a sheet where refusals stand, always as high, so that nothing moves when one comes or goes.
pub fn keep_strip(ui: &mut egui::Ui, lines: u8) -> Rect {
    let size = vec2(ui.available_width(), 10.0 + 18.0 * f32::from(lines));
    ui.allocate_exact_size(size, Sense::hover()).0
}

/// Fills the place with what was refused.
pub fn fill_strip(ui: &mut egui::Ui, rect: Rect, refused: &[String]) {
    if refused.is_empty() {
        return;
    }
    let colour = theme::colour(ui.ctx(), Role::Short);
    ui.painter().rect_filled(rect, 3.0, theme::colour(ui.ctx(), Role::PartShort).gamma_multiply(0.5));
    ui.painter().rect_filled(Rect::from_min_size(rect.min, vec2(4.0, rect.height())), 0.0, colour);
    let inner = Rect::from_min_max(rect.min + vec2(14.0, 4.0), rect.max - vec2(6.0, 4.0));
    ui.scope_builder(UiBuilder::new().max_rect(inner).layout(Layout::top_down(Align::Min)), |ui| {
        let area = egui::ScrollArea::vertical().id_salt("refused").auto_shrink(false);
        area.min_scrolled_height(0.0).max_height(inner.height()).show(ui, |ui| {
            ui.spacing_mut().item_spacing.y = 1.0;
            for words in refused {
                ui.label(words);
            }
        });
    });
}
