//! Worked steps as a table: symbol, meaning, expression, value, clause and basis.

use calc::steps::WorkedSteps;
use calc::units::LengthUnit;
use egui::{Grid, Id, Label, RichText, Ui};
use figure::Role;

use crate::window::theme;

/// Shows worked steps. Those that the reader should compare with an own copy carry their basis in the colour of a caution.
pub fn step_table_ui(ui: &mut Ui, id: Id, steps: &WorkedSteps, unit: LengthUnit) {
    let faint = theme::colour(ui.ctx(), Role::Faint);
    let caution = theme::colour(ui.ctx(), Role::Unproven);
    let width = ui.available_width();
    Grid::new(id).num_columns(5).spacing([14.0, 5.0]).striped(true).show(ui, |ui| {
        for head in ["symbol", "what", "worked", "value", "clause and basis"] {
            ui.label(RichText::new(head).size(12.5).color(faint));
        }
        ui.end_row();
        for step in steps.iter() {
            ui.label(RichText::new(step.symbol).font(theme::strong(14.0)));
            let wrapped = |ui: &mut Ui, text: RichText, share: f32| {
                ui.allocate_ui(egui::vec2(width * share, 0.0), |ui| {
                    ui.set_max_width(width * share);
                    ui.add(Label::new(text).wrap());
                });
            };
            wrapped(ui, RichText::new(&step.meaning), 0.25);
            wrapped(ui, RichText::new(step.expression.text(unit)), 0.27);
            ui.label(RichText::new(step.value.text(unit)).font(theme::strong(14.0)));
            let place = step.source.place();
            let colour = if step.source.basis.needs_checking() { caution } else { faint };
            let words = if place.is_empty() {
                step.source.basis.words().to_owned()
            } else {
                format!("{place}; {}", step.source.basis.words())
            };
            wrapped(ui, RichText::new(words).size(12.5).color(colour), 0.24);
            ui.end_row();
        }
    });
}
