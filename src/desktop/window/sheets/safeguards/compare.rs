//! One safeguard under every rule set, in one table; the most demanding is marked.

use std::sync::Arc;

use calc::assess::{capitalised, most_demanding};
use calc::press::Press;
use calc::round::{Towards, length_digits, time_text};
use calc::verdict::{Answer, Assessment};
use egui::{Grid, Label, RichText, Ui};
use figure::Role;

use super::Card;
use crate::window::theme;
use crate::window::widgets::{answer_badge, caption};

/// The assessments of the shown safeguard under every rule set, kept while nothing changes.
#[derive(Default)]
pub struct Compared {
    made_from: Option<(Arc<Press>, usize, calc::plant_settings::PlantSettings)>,
    assessments: Vec<Assessment>,
}

pub fn compare_ui(ui: &mut Ui, card: &Card, compared: &mut Compared) {
    let cx = card.cx;
    let is_known = compared.made_from.as_ref().is_some_and(|(press, index, settings)| {
        Arc::ptr_eq(press, cx.press) && *index == card.index && *settings == cx.document.settings
    });
    if !is_known {
        compared.assessments = cx.result.under_every_rule_set(card.index, &cx.document.settings, cx.today);
        compared.made_from = Some((cx.press.clone(), card.index, cx.document.settings.clone()));
    }
    let most = most_demanding(&compared.assessments);
    let faint = theme::colour(ui.ctx(), Role::Faint);
    Grid::new(card.id("compare table")).num_columns(6).spacing([18.0, 6.0]).striped(true).show(ui, |ui| {
        let sign = cx.unit.sign();
        for head in ["rule set", "answer", &format!("required {sign}"), &format!("spare {sign}"), "allowed stop", ""] {
            ui.label(RichText::new(head).size(12.5).color(faint));
        }
        ui.end_row();
        for (index, assessment) in compared.assessments.iter().enumerate() {
            let title = RichText::new(assessment.rules.title());
            let is_own = assessment.rules == cx.document.settings.rules;
            ui.label(if is_own { title.font(theme::strong(14.0)) } else { title });
            answer_badge(ui, assessment.answer);
            let figure = |ui: &mut Ui, words: String| {
                ui.with_layout(egui::Layout::right_to_left(egui::Align::Center), |ui| ui.label(words));
            };
            match assessment.demand {
                Some(demand) => {
                    let more = if demand.strict { "> " } else { "" };
                    figure(ui, format!("{more}{}", length_digits(demand.required, cx.unit, Towards::Greater)));
                }
                None => figure(ui, String::new()),
            }
            figure(
                ui,
                assessment.spare().map_or(String::new(), |spare| length_digits(spare, cx.unit, Towards::Smaller)),
            );
            let allowed = assessment.allowed.as_ref().and_then(|allowed| allowed.stopping);
            figure(ui, allowed.map_or(String::new(), |time| time_text(time, Towards::Smaller)));
            let words = if Some(index) == most {
                "asks for the most".to_owned()
            } else if assessment.answer == Answer::Holds {
                String::new()
            } else {
                assessment.first_reason().map(capitalised).unwrap_or_default()
            };
            ui.add(Label::new(RichText::new(words).size(12.5).color(faint)).truncate());
            ui.end_row();
        }
    });
    caption(ui, "The plant's own rule set decides the answer above; the others are for comparison.");
}
