//! The sheets of a press.

mod events;
mod form;
pub mod press;
pub mod readings;
pub mod records;
pub mod safeguards;
pub mod stop_tests;

#[cfg(test)]
#[path = "../../tests/fixture/press.rs"]
mod sample;

use egui::Ui;

pub(super) use form::label_ui;

use super::context::SheetContext;
use super::wishes::Wishes;

/// The sheets, in the order of their tabs.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Sheet {
    /// Identity, clutch and brake, drive, events.
    Press,
    /// Conditions and timed stops.
    StopTests,
    /// One card a safeguard.
    Safeguards,
    /// Monthly readings: limits, drift, step, forecast.
    Readings,
    /// What is missing, sign-off, print.
    Records,
}

impl Sheet {
    /// Every sheet.
    pub const ALL: &[Self] = &[Self::Press, Self::StopTests, Self::Safeguards, Self::Readings, Self::Records];

    /// The name on its tab.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Press => "Press",
            Self::StopTests => "Stop tests",
            Self::Safeguards => "Safeguards",
            Self::Readings => "Readings",
            Self::Records => "Records",
        }
    }

    /// Shows it.
    pub fn ui(self, ui: &mut Ui, cx: &SheetContext, drafts: &mut SheetDrafts, wishes: &mut Wishes) {
        match self {
            Self::Press => press::press_ui(ui, cx, &mut drafts.press, wishes),
            Self::StopTests => stop_tests::stop_tests_ui(ui, cx, &mut drafts.stop_tests, wishes),
            Self::Safeguards => {
                scrolled(ui, self, cx, |ui| safeguards::safeguards_ui(ui, cx, &mut drafts.safeguards, wishes))
            }
            Self::Readings => scrolled(ui, self, cx, |ui| readings::readings_ui(ui, cx, &mut drafts.readings, wishes)),
            Self::Records => scrolled(ui, self, cx, |ui| records::records_ui(ui, cx, &mut drafts.records, wishes)),
        }
    }
}

/// A sheet that is longer than the window.
fn scrolled(ui: &mut Ui, sheet: Sheet, cx: &SheetContext, add: impl FnOnce(&mut Ui)) {
    egui::ScrollArea::vertical().auto_shrink(false).id_salt((sheet.name(), &cx.press.tag)).show(ui, add);
}

/// What is being typed on the sheets.
#[derive(Default)]
pub struct SheetDrafts {
    /// On the sheet of the press.
    pub press: press::PressDrafts,
    /// On the sheet of stop tests.
    pub stop_tests: stop_tests::StopTestsDrafts,
    /// On the sheet of safeguards.
    pub safeguards: safeguards::SafeguardsDrafts,
    /// On the sheet of readings.
    pub readings: readings::ReadingsDrafts,
    /// On the sheet of records.
    pub records: records::RecordsDrafts,
}

impl SheetDrafts {
    /// What could not be taken, in words, by sheet. While there is anything, no answer is given: what is typed and what would be
    /// reckoned from are not the same.
    pub fn refused(&self) -> Vec<(Sheet, Vec<String>)> {
        let words = [
            (Sheet::Press, self.press.refused()),
            (Sheet::StopTests, self.stop_tests.refused()),
            (Sheet::Safeguards, self.safeguards.refused()),
        ];
        words.into_iter().filter(|(_, words)| !words.is_empty()).collect()
    }
}
