//! What the safeguards would need for a predicted stop: always Unproven, and said so.

use calc::prediction::PredictedDistance;
use egui::{CollapsingHeader, Id, RichText, Ui};

use super::unproven_ui;
use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{caption, step_table_ui};

/// One line a safeguard.
pub fn distances_ui(ui: &mut Ui, cx: &SheetContext, distances: &[(String, PredictedDistance)]) {
    if distances.is_empty() {
        caption(ui, "No safeguard calls for this stop.");
    }
    for (safeguard, found) in distances {
        ui.horizontal_wrapped(|ui| {
            ui.label(RichText::new(safeguard).font(theme::strong(14.0)));
            unproven_ui(ui, &found.words(cx.unit));
        });
        for missing in &found.missing {
            caption(ui, missing.as_str());
        }
    }
}

/// The worked steps, to be opened.
pub fn steps_ui(ui: &mut Ui, cx: &SheetContext, distances: &[(String, PredictedDistance)], name: &str) {
    for (index, (safeguard, found)) in distances.iter().enumerate() {
        let title = format!("Worked steps of {safeguard}, predicted");
        CollapsingHeader::new(title).id_salt((name, index)).show(ui, |ui| {
            step_table_ui(ui, Id::unique((name, index, &cx.press.tag)), &found.steps, cx.unit);
        });
    }
}
