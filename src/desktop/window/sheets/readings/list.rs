//! The list of readings, newest first, and their way in and out as CSV.

use std::path::PathBuf;

use calc::reading::Reading;
use egui::{CollapsingHeader, Grid, Id, RichText, TextEdit, Ui};
use figure::Role;
use plant::{RowRefusal, export_readings, import_readings};

use super::entry::stops_words;
use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{caption, heading};
use crate::window::wishes::{Wish, Wishes};

/// Paths that are being typed, and what a file would bring.
#[derive(Default)]
pub struct ListDraft {
    import: String,
    export: String,
    preview: Option<Result<Vec<Reading>, Vec<String>>>,
}

/// Shows the list.
pub fn list_ui(ui: &mut Ui, cx: &SheetContext, draft: &mut ListDraft, wishes: &mut Wishes) {
    heading(ui, "Readings");
    let faint = theme::colour(ui.ctx(), Role::Faint);
    Grid::new(Id::unique(("reading list", &cx.press.tag))).num_columns(6).spacing([18.0, 4.0]).striped(true).show(
        ui,
        |ui| {
            for head in ["date", "by", "stops ms", "mean ms", "condition", ""] {
                ui.label(RichText::new(head).size(12.5).color(faint));
            }
            ui.end_row();
            for (index, reading) in cx.press.readings.iter().enumerate().rev() {
                ui.label(reading.at.to_string());
                ui.label(&reading.by);
                ui.label(stops_words(reading));
                ui.label(reading.mean_ms().map_or(String::new(), |mean| format!("{mean:.2}")));
                let is_reference = Some(&reading.setup) == cx.press.reference.as_ref();
                let words = if is_reference { "reference".to_owned() } else { reading.setup.condition.words() };
                ui.label(RichText::new(words).size(12.5).color(faint));
                if ui.small_button("Remove").clicked() {
                    let label = format!("remove the reading of {}", reading.at);
                    wishes.edit_press(cx.press, label, move |press| {
                        press.readings.remove(index);
                    });
                }
                ui.end_row();
            }
        },
    );
    CollapsingHeader::new("Import and export").id_salt(("csv", &cx.press.tag)).show(ui, |ui| {
        import_ui(ui, cx, draft, wishes);
        export_ui(ui, cx, draft, wishes);
    });
}

fn import_ui(ui: &mut Ui, cx: &SheetContext, draft: &mut ListDraft, wishes: &mut Wishes) {
    caption(
        ui,
        "One row a stop. The columns date and stop_ms must be there; what is left out of the condition is the reference.",
    );
    ui.horizontal(|ui| {
        let label = ui.label("CSV file");
        let edit = ui
            .add(TextEdit::singleline(&mut draft.import).id(Id::unique("import path")).desired_width(380.0))
            .labelled_by(label.id);
        if edit.changed() {
            draft.preview = None;
        }
        if ui.button("Look into it").clicked() {
            draft.preview = Some(look(cx, draft.import.trim()));
        }
    });
    match &draft.preview {
        None => {}
        Some(Err(refusals)) => {
            caption(ui, "Nothing can be taken over until every row can be read:");
            for refusal in refusals {
                ui.label(RichText::new(refusal).color(theme::colour(ui.ctx(), Role::Short)));
            }
        }
        Some(Ok(readings)) => {
            for reading in readings.iter().take(12) {
                ui.label(format!("{}  {}  {}", reading.at, reading.by, stops_words(reading)));
            }
            if readings.len() > 12 {
                caption(ui, format!("and {} more", readings.len() - 12));
            }
            if ui.button(format!("Take over {} readings", readings.len())).clicked() {
                let readings = readings.clone();
                wishes.edit_press(cx.press, format!("import {} readings", readings.len()), move |press| {
                    press.readings.extend(readings)
                });
                draft.preview = None;
                draft.import.clear();
            }
        }
    }
}

fn look(cx: &SheetContext, path: &str) -> Result<Vec<Reading>, Vec<String>> {
    let text = std::fs::read_to_string(path).map_err(|error| vec![format!("{path} cannot be read: {error}.")])?;
    import_readings(cx.press, &text).map_err(|rows| rows.iter().map(RowRefusal::to_string).collect())
}

fn export_ui(ui: &mut Ui, cx: &SheetContext, draft: &mut ListDraft, wishes: &mut Wishes) {
    ui.horizontal(|ui| {
        let label = ui.label("Write to");
        ui.add(TextEdit::singleline(&mut draft.export).id(Id::unique("export path")).desired_width(380.0))
            .labelled_by(label.id);
        let is_ready = !draft.export.trim().is_empty();
        if ui.add_enabled(is_ready, egui::Button::new("Export")).clicked() {
            wishes.push(Wish::WriteFile(PathBuf::from(draft.export.trim()), export_readings(cx.press)));
        }
    });
}
