//! What the safeguards would need for a predicted stop: always Unproven, and said so.

use calc::prediction::PredictedDistance;
use egui::{CollapsingHeader, Id, RichText, Ui};

use super::unproven_ui;
use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{caption, heading, step_table_ui};

/// Shows one line a safeguard, with its worked steps to be opened.
pub fn distances_ui(ui: &mut Ui, cx: &SheetContext, distances: &[(String, PredictedDistance)], name: &str) {
    heading(ui, "Distance that it would need");
    if distances.is_empty() {
        caption(ui, "No safeguard calls for this stop.");
    }
    for (index, (safeguard, found)) in distances.iter().enumerate() {
        ui.label(RichText::new(safeguard).font(theme::strong(14.0)));
        unproven_ui(ui, &found.words(cx.unit));
        for missing in &found.missing {
            caption(ui, missing.as_str());
        }
        CollapsingHeader::new("Worked steps").id_salt((name, index)).show(ui, |ui| {
            step_table_ui(ui, Id::unique((name, index, &cx.press.tag)), &found.steps, cx.unit);
        });
    }
}
