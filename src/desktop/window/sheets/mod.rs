//! The sheets of a press.

pub mod records;
pub mod safeguards;

use egui::Ui;

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
    /// What is missing, sign-off, print.
    Records,
}

impl Sheet {
    /// Every sheet.
    pub const ALL: &[Self] = &[Self::Press, Self::StopTests, Self::Safeguards, Self::Records];

    /// The name on its tab.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Press => "Press",
            Self::StopTests => "Stop tests",
            Self::Safeguards => "Safeguards",
            Self::Records => "Records",
        }
    }

    /// Shows it.
    pub fn ui(self, ui: &mut Ui, cx: &SheetContext, drafts: &mut SheetDrafts, wishes: &mut Wishes) {
        match self {
            Self::Press => {}
            Self::StopTests => {}
            Self::Safeguards => safeguards::safeguards_ui(ui, cx, &mut drafts.safeguards, wishes),
            Self::Records => records::records_ui(ui, cx, &mut drafts.records, wishes),
        }
    }
}

/// What is being typed on the sheets.
#[derive(Default)]
pub struct SheetDrafts {
    /// On the sheet of safeguards.
    pub safeguards: safeguards::SafeguardsDrafts,
    /// On the sheet of records.
    pub records: records::RecordsDrafts,
}
