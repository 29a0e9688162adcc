//! The sheet of safeguards: one card each, and what the same case asks for under every rule set.

mod add;
mod compare;
mod kind_fields;
mod measures;

use calc::round::{Towards, time_text};
use calc::safeguard::Safeguard;
use calc::sentence;
use calc::verdict::Assessment;
use egui::{Align, CollapsingHeader, Id, Layout, RichText, Ui};
use figure::Role;

use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{
    Commit, Drafts, FieldKind, answer_badge, caption, card_ui, heading, no_result_badge, step_table_ui, text_field,
};
use crate::window::wishes::{Wish, Wishes};

/// What is being typed on this sheet.
#[derive(Default)]
pub struct SafeguardsDrafts {
    fields: Drafts,
    add: add::AddDraft,
    compared: compare::Compared,
}

impl SafeguardsDrafts {
    /// What could not be taken, in words.
    pub fn refused(&self) -> Vec<String> {
        self.fields.refused()
    }
}

/// The card that is being edited: which press, which place on it.
struct Card<'a> {
    cx: &'a SheetContext<'a>,
    index: usize,
}

impl Card<'_> {
    fn safeguard(&self) -> &Safeguard {
        &self.cx.press.safeguards[self.index]
    }

    fn assessment(&self) -> &Assessment {
        &self.cx.result.assessments[self.index]
    }

    fn id(&self, field: &str) -> Id {
        field_id(self.cx, self.index, field)
    }

    /// Asks for a change of this safeguard.
    fn edit(&self, wishes: &mut Wishes, what: &str, edit: impl FnOnce(&mut Safeguard) + 'static) {
        let index = self.index;
        wishes.edit_press(self.cx.press, format!("change {what} of {}", self.safeguard().name), move |press| {
            if let Some(safeguard) = press.safeguards.get_mut(index) {
                edit(safeguard);
            }
        });
    }
}

/// Shows the sheet.
pub fn safeguards_ui(ui: &mut Ui, cx: &SheetContext, drafts: &mut SafeguardsDrafts, wishes: &mut Wishes) {
    for index in 0..cx.press.safeguards.len() {
        let card = Card { cx, index };
        card_ui(ui, |ui| {
            ui.set_width(ui.available_width());
            head_ui(ui, &card, drafts, wishes);
            if index == cx.safeguard {
                body_ui(ui, &card, drafts, wishes);
            }
        });
        ui.add_space(6.0);
    }
    if add::add_ui(ui, cx, &mut drafts.add, wishes) {
        // What is measured next is the distance of the new one.
        drafts.fields.focus(field_id(cx, cx.press.safeguards.len(), "distance"));
    }
}

/// The identity of a field: the press, the safeguard and the field, wherever they stand.
fn field_id(cx: &SheetContext, index: usize, field: &str) -> Id {
    Id::unique(("safeguard", &cx.press.tag, index, field))
}

fn head_ui(ui: &mut Ui, card: &Card, drafts: &mut SafeguardsDrafts, wishes: &mut Wishes) {
    let (safeguard, assessment) = (card.safeguard(), card.assessment());
    ui.horizontal(|ui| {
        if card.cx.is_without_result {
            no_result_badge(ui);
        } else {
            answer_badge(ui, assessment.answer);
        }
        ui.add_space(6.0);
        if card.index == card.cx.safeguard {
            let kind = FieldKind::words("Name").bare().wide(200.0);
            if let Some(Commit::Set(name, _)) =
                text_field(ui, card.id("name"), kind, &safeguard.name, &mut drafts.fields)
            {
                let is_taken = card.cx.press.safeguards.iter().any(|other| other.name == name);
                if is_taken {
                    wishes.push(Wish::Tell(format!(
                        "Another safeguard of this press is called {name}. Choose another name."
                    )));
                } else {
                    card.edit(wishes, "the name", move |safeguard| safeguard.name = name);
                }
            }
        } else {
            ui.label(RichText::new(calc::assess::capitalised(&safeguard.name)).font(theme::strong(15.0)));
        }
        caption(ui, safeguard.kind.words());
        if card.index != card.cx.safeguard {
            let figures = sentence::figures(assessment, card.cx.unit).filter(|_| !card.cx.is_without_result);
            if let Some(figures) = figures {
                ui.label(figures);
            }
            if ui.button("Show").clicked() {
                wishes.push(Wish::ShowSafeguard(card.index));
            }
        } else if ui.button("Remove").clicked() {
            let index = card.index;
            wishes.edit_press(card.cx.press, format!("remove {}", safeguard.name), move |press| {
                press.safeguards.remove(index);
            });
        }
    });
}

/// Width of one column of a card.
const COLUMN: f32 = 430.0;

fn body_ui(ui: &mut Ui, card: &Card, drafts: &mut SafeguardsDrafts, wishes: &mut Wishes) {
    let (cx, assessment) = (card.cx, card.assessment());
    // Two columns where they fit, else one below the other.
    let is_wide = ui.available_width() >= 2.0 * COLUMN + 16.0;
    let layout = if is_wide { Layout::left_to_right(Align::Min) } else { Layout::top_down(Align::Min) };
    ui.with_layout(layout, |ui| {
        ui.vertical(|ui| {
            ui.set_width(COLUMN);
            kind_fields::kind_fields_ui(ui, card, &mut drafts.fields, wishes);
            measures::installed_ui(ui, card, &mut drafts.fields, wishes);
        });
        ui.add_space(16.0);
        ui.vertical(|ui| {
            ui.set_width(COLUMN);
            measures::time_parts_ui(ui, card, &mut drafts.fields, wishes);
            if !cx.is_without_result {
                allowed_ui(ui, assessment);
            }
        });
    });
    if cx.is_without_result {
        caption(ui, "Worked steps and the other rule sets are shown again once every entry can be taken.");
        return;
    }
    for reason in &assessment.reasons {
        let colour = theme::colour(ui.ctx(), crate::window::app::answer_role(reason.answer));
        ui.horizontal_wrapped(|ui| {
            ui.label(RichText::new(reason.answer.word()).font(theme::strong(13.5)).color(colour));
            ui.label(&reason.words);
        });
    }
    if let Some(remedies) = sentence::remedies(assessment, cx.unit) {
        ui.label(remedies);
    }
    if !assessment.steps.is_empty() {
        CollapsingHeader::new("Worked steps").id_salt(card.id("steps")).default_open(true).show(ui, |ui| {
            step_table_ui(ui, card.id("step table"), &assessment.steps, cx.unit);
        });
    }
    if let Some(allowed) = assessment.allowed.as_ref().filter(|allowed| !allowed.steps.is_empty()) {
        CollapsingHeader::new("How the allowed times come about").id_salt(card.id("allowed")).show(ui, |ui| {
            step_table_ui(ui, card.id("allowed table"), &allowed.steps, cx.unit);
        });
    }
    CollapsingHeader::new("The same case under every rule set").id_salt(card.id("compare")).default_open(true).show(
        ui,
        |ui| {
            compare::compare_ui(ui, card, &mut drafts.compared);
        },
    );
}

fn allowed_ui(ui: &mut Ui, assessment: &Assessment) {
    let Some(allowed) = &assessment.allowed else { return };
    heading(ui, "What the installed distance allows");
    let faint = theme::colour(ui.ctx(), Role::Faint);
    for (what, time) in [("stopping time", allowed.stopping), ("brake monitor setting, same clock", allowed.monitor)] {
        ui.horizontal(|ui| {
            ui.label(RichText::new(what).color(faint));
            let words = time.map_or("none".to_owned(), |time| time_text(time, Towards::Smaller));
            ui.label(RichText::new(words).font(theme::strong(14.0)));
        });
    }
}
