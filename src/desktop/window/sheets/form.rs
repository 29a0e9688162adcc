//! Rows of a form: label, field, unit, in columns that line up. Refusals are said in the sheet's one fixed place.

use calc::decimal::{self, Side};
use calc::limits::Limit;
use calc::refusal::Refusal;
use calc::round::{Towards, length_digits_full};
use calc::units::{Length, LengthUnit};
use eframe::egui::{self, Align, Align2, Id, Layout, Response, RichText, UiBuilder, vec2};

use super::entry::{Entries, Look, entry_ui};

/// Where the rows of a form stand and what their ids begin with.
pub struct Form<'a> {
    /// The identity of what is edited, such as the tag of the press.
    pub owner: Id,
    /// What is being typed.
    pub entries: &'a mut Entries,
    /// Width of the labels.
    pub label: f32,
    /// Width of the fields.
    pub field: f32,
}

/// Height of a row.
pub const ROW: f32 = 30.0;

impl Form<'_> {
    /// A field for words. Gives the text when it is handed over.
    pub fn words(&mut self, ui: &mut egui::Ui, name: &str, label: &str, taken: &str) -> Option<String> {
        let look = Look { width: self.field, align: Align::Min };
        self.row(ui, name, label, "", taken, look).map(|text| {
            *self.entries.of(name) = Default::default();
            text.trim().to_owned()
        })
    }

    /// A field whose text is read by `read`. Gives the value when it is taken.
    pub fn read<T>(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        label: &str,
        taken: &str,
        read: impl FnOnce(&str) -> Result<T, Refusal>,
    ) -> Option<T> {
        let look = Look { width: 130.0, align: Align::Min };
        let text = self.row(ui, name, label, "", taken, look)?;
        self.entries.of(name).settle(read(&text))
    }

    /// A number field with its unit. Gives the value when it is taken.
    pub fn number<T>(
        &mut self,
        ui: &mut egui::Ui,
        (name, label, unit): (&str, &str, &str),
        taken: &str,
        read: impl FnOnce(&str) -> Result<T, Refusal>,
    ) -> Option<T> {
        let look = Look { width: 84.0, align: Align::Max };
        let text = self.row(ui, name, label, unit, taken, look)?;
        self.entries.of(name).settle(read(&text))
    }

    fn row(
        &mut self,
        ui: &mut egui::Ui,
        name: &str,
        label: &str,
        unit: &str,
        taken: &str,
        look: Look,
    ) -> Option<String> {
        let (id, width) = (self.owner.with(name), self.label);
        let entry = self.entries.of(name);
        ui.horizontal(|ui| {
            ui.set_min_height(ROW);
            let label = label_ui(ui, width, label);
            let (response, given) = entry_ui(ui, id, entry, taken, look);
            response.labelled_by(label.id);
            if !unit.is_empty() {
                ui.label(RichText::new(unit).weak());
            }
            given
        })
        .inner
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
                    }
                }
            });
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
        ui.push_id(self.owner.with(name), |ui| {
            ui.horizontal(|ui| {
                ui.set_min_height(ROW);
                ui.spacing_mut().item_spacing.x = 4.0;
                label_ui(ui, width + 4.0, label);
                let mut wished = None;
                for one in all {
                    let button = egui::Button::selectable(chosen == Some(*one), words(*one));
                    if ui.add(button).clicked() && chosen != Some(*one) {
                        wished = Some(*one);
                    }
                }
                wished
            })
            .inner
        })
        .inner
    }
}

/// A label of fixed width.
fn label_ui(ui: &mut egui::Ui, width: f32, text: &str) -> Response {
    let size = vec2(width, ui.available_height().max(ui.spacing().interact_size.y));
    ui.allocate_ui_with_layout(size, Layout::left_to_right(Align::Center), |ui| {
        ui.set_min_width(width);
        ui.add(egui::Label::new(text).truncate())
    })
    .inner
}

/// The heading over a group of rows.
pub fn heading_ui(ui: &mut egui::Ui, text: &str) {
    ui.add_space(2.0);
    ui.label(RichText::new(text).strong());
    ui.add_space(2.0);
}

/// The digits of a length in the shown unit, every one of them.
pub fn length_shown(length: Option<Length>, unit: LengthUnit) -> String {
    length.map_or_else(String::new, |length| length_digits_full(length, unit, Towards::Nearest))
}

/// Reads a length typed in the shown unit within a limit that is stated in millimetres.
///
/// # Errors
/// A text that is no number, and a length outside the limit.
pub fn read_length(text: &str, unit: LengthUnit, side: Side, limit: &Limit) -> Result<Length, Refusal> {
    let length = decimal::length(text, unit, side).map_err(|why| limit.unreadable(text, why))?;
    limit.take(length.base()).map(Length::from_base)
}

/// The one place of a sheet where refusals stand, of fixed height, so that nothing moves when one comes or goes.
pub fn refusals_ui<'a>(ui: &mut egui::Ui, height: f32, refusals: impl Iterator<Item = &'a str>) {
    let size = vec2(ui.available_width(), height);
    let (rect, _) = ui.allocate_exact_size(size, egui::Sense::hover());
    let refusals: Vec<&str> = refusals.collect();
    if refusals.is_empty() {
        return;
    }
    let painter = ui.painter();
    let colour = ui.visuals().error_fg_color;
    painter.rect_filled(rect, 3.0, colour.gamma_multiply(0.08));
    painter.rect_filled(egui::Rect::from_min_size(rect.min, vec2(3.0, height)), 0.0, colour);
    let inner = Align2::LEFT_TOP.align_size_within_rect(size - vec2(20.0, 8.0), rect.shrink2(vec2(12.0, 4.0)));
    ui.scope_builder(UiBuilder::new().max_rect(inner).layout(Layout::top_down(Align::Min)), |ui| {
        egui::ScrollArea::vertical().id_salt("refusals").auto_shrink(false).show(ui, |ui| {
            ui.spacing_mut().item_spacing.y = 2.0;
            for refusal in refusals {
                ui.label(refusal);
            }
        });
    });
}
