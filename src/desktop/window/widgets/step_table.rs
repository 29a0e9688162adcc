//! Worked steps as a table: symbol, meaning, expression, value, clause and basis.

use calc::steps::{Step, WorkedSteps};
use calc::units::LengthUnit;
use egui::{Frame, Id, Label, Margin, RichText, Ui, UiBuilder, vec2};
use figure::Role;

use crate::window::theme;

const HEADS: [&str; 5] = ["symbol", "what", "worked", "value", "clause and basis"];
const GAP: f32 = 14.0;

/// The widths of the columns: symbol and value need what they need, the rest is shared.
fn widths(ui: &Ui) -> [f32; 5] {
    let (symbol, value) = (58.0, 100.0);
    let rest = (ui.available_width().min(1240.0) - symbol - value - 4.0 * GAP).max(360.0);
    [symbol, rest * 0.34, rest * 0.36, value, rest * 0.30]
}

/// Shows worked steps. Those that the reader should compare with an own copy carry their basis in the colour of a caution.
pub fn step_table_ui(ui: &mut Ui, id: Id, steps: &WorkedSteps, unit: LengthUnit) {
    let widths = widths(ui);
    let faint = theme::colour(ui.ctx(), Role::Faint);
    ui.push_id(id, |ui| {
        ui.spacing_mut().item_spacing = vec2(GAP, 0.0);
        let heads = HEADS.map(|head| RichText::new(head).size(12.5).color(faint));
        row_ui(ui, widths, heads, false);
        for (place, step) in steps.iter().enumerate() {
            row_ui(ui, widths, cells(ui, step, unit), place % 2 == 0);
        }
    });
}

fn cells(ui: &Ui, step: &Step, unit: LengthUnit) -> [RichText; 5] {
    let basis = step.source.basis;
    let place = step.source.place();
    let words = if place.is_empty() { basis.words().to_owned() } else { format!("{place}; {}", basis.words()) };
    let role = if basis.needs_checking() { Role::Unproven } else { Role::Faint };
    [
        RichText::new(step.symbol).font(theme::strong(14.0)),
        RichText::new(&step.meaning),
        RichText::new(step.expression.text(unit)),
        RichText::new(step.value.text(unit)).font(theme::strong(14.0)),
        RichText::new(words).size(12.5).color(theme::colour(ui.ctx(), role)),
    ]
}

/// A row whose cells all begin at the same height; the longest text decides how high it is.
fn row_ui(ui: &mut Ui, widths: [f32; 5], cells: [RichText; 5], is_shaded: bool) {
    let fill = if is_shaded { ui.visuals().faint_bg_color } else { egui::Color32::TRANSPARENT };
    Frame::new().fill(fill).inner_margin(Margin::symmetric(0, 3)).show(ui, |ui| {
        let (corner, mut bottom) = (ui.cursor().min, 0.0_f32);
        let mut left = corner.x;
        for (width, text) in widths.into_iter().zip(cells) {
            let room = egui::Rect::from_min_size(egui::pos2(left, corner.y), vec2(width, f32::INFINITY));
            let mut cell =
                ui.new_child(UiBuilder::new().max_rect(room).layout(egui::Layout::top_down(egui::Align::Min)));
            cell.add(Label::new(text).wrap());
            bottom = bottom.max(cell.min_rect().bottom());
            left += width + GAP;
        }
        ui.advance_cursor_after_rect(egui::Rect::from_min_max(corner, egui::pos2(left - GAP, bottom)));
    });
}
