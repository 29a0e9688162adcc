//! The reference condition of a press: how its readings are taken, so that they can be compared with each other.

use calc::reading::{ReadingPlace, ReadingSetup};
use egui::{CollapsingHeader, Ui};

use crate::window::context::SheetContext;
use crate::window::widgets::{caption, card_ui, heading, segments_ui};
use crate::window::wishes::Wishes;

/// Offers the conditions of the stop tests as reference.
pub fn choose_ui(ui: &mut Ui, cx: &SheetContext, wishes: &mut Wishes) {
    card_ui(ui, |ui| {
        ui.set_width(ui.available_width());
        heading(ui, "How are readings of this press taken?");
        if cx.press.stop_tests.is_empty() {
            caption(ui, "Enter a stop test first: the reference condition is one of the conditions that were tested.");
            return;
        }
        caption(ui, "Choose the condition of a stop test. Readings under it are then compared month by month.");
        let mut offered: Vec<ReadingSetup> = Vec::new();
        for test in &cx.press.stop_tests {
            let setup = ReadingSetup {
                condition: test.condition.clone(),
                clock_start: test.clock_start,
                place: ReadingPlace::StrokeTest,
            };
            if offered.contains(&setup) {
                continue;
            }
            if ui.button(setup.condition.words()).clicked() {
                let setup = setup.clone();
                wishes.edit_press(cx.press, "set the reference condition", move |press| press.reference = Some(setup));
            }
            offered.push(setup);
        }
    });
}

/// Shows the reference and lets it be changed.
pub fn reference_ui(ui: &mut Ui, cx: &SheetContext, wishes: &mut Wishes) {
    let Some(reference) = &cx.press.reference else { return };
    CollapsingHeader::new("Reference condition").id_salt(("reference", &cx.press.tag)).show(ui, |ui| {
        ui.label(reference.condition.words());
        caption(ui, format!("Clock started when: {}.", reference.clock_start.words()));
        let places: Vec<(ReadingPlace, &str)> = ReadingPlace::ALL.iter().map(|place| (*place, place.words())).collect();
        if let Some(place) = segments_ui(ui, "Taken", reference.place, &places) {
            wishes.edit_press(cx.press, "change where readings are taken", move |press| {
                if let Some(reference) = &mut press.reference {
                    reference.place = place;
                }
            });
        }
        if ui.button("Choose another condition").clicked() {
            wishes.edit_press(cx.press, "take back the reference condition", |press| press.reference = None);
        }
    });
}
