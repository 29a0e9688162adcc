//! The assessments of the open plant, kept as long as nothing they depend on has changed. Derived, never stored.

use std::sync::Arc;

use calc::assess::{assess_press, compare, gravest};
use calc::plant_settings::PlantSettings;
use calc::press::Press;
use calc::units::Length;
use calc::verdict::{Answer, Assessment};
use jiff::civil::Date;

use crate::document::Document;

/// The assessments of every press.
#[derive(Default)]
pub struct Results {
    presses: Vec<PressResult>,
    settings: Option<PlantSettings>,
    today: Option<Date>,
}

/// The assessments of one press under the plant's rule set.
#[derive(Clone)]
pub struct PressResult {
    /// The press as it was assessed.
    pub press: Arc<Press>,
    /// One assessment a safeguard.
    pub assessments: Vec<Assessment>,
    /// The index of the gravest.
    pub gravest: Option<usize>,
}

impl PressResult {
    fn of(press: &Arc<Press>, settings: &PlantSettings, today: Date) -> Self {
        let assessments = assess_press(press, settings, today);
        let gravest = gravest(&assessments);
        Self { press: press.clone(), assessments, gravest }
    }

    /// The answer of the press: its gravest safeguard's, or Unproven when it has none.
    pub fn answer(&self) -> Answer {
        self.gravest.map_or(Answer::Unproven, |index| self.assessments[index].answer)
    }

    /// The spare of the gravest safeguard.
    pub fn spare(&self) -> Option<Length> {
        self.assessments[self.gravest?].spare()
    }

    /// One safeguard under every rule set.
    pub fn under_every_rule_set(&self, safeguard: usize, settings: &PlantSettings, today: Date) -> Vec<Assessment> {
        compare(&self.press, &self.press.safeguards[safeguard], settings, today)
    }
}

impl Results {
    /// Assesses what has changed since the last call, and only that.
    pub fn follow(&mut self, document: &Document, today: Date) {
        let same_ground = self.settings.as_ref() == Some(&document.settings) && self.today == Some(today);
        let known = std::mem::take(&mut self.presses);
        self.presses = document
            .presses
            .iter()
            .map(|press| {
                known
                    .iter()
                    .find(|result| same_ground && Arc::ptr_eq(&result.press, press))
                    .cloned()
                    .unwrap_or_else(|| PressResult::of(press, &document.settings, today))
            })
            .collect();
        self.settings = Some(document.settings.clone());
        self.today = Some(today);
    }

    /// The results in the order of the document's presses.
    pub fn presses(&self) -> &[PressResult] {
        &self.presses
    }

    /// The result of one press.
    pub fn press(&self, tag: &str) -> Option<&PressResult> {
        self.presses.iter().find(|result| result.press.tag == tag)
    }
}
