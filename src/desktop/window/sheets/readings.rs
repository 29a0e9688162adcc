//! The sheet of readings: the plain sentence, quick entry, chart, limits, and the list with import and export.

mod entry;
mod list;
mod plot;
mod reference;

use calc::monthly::{self, Standing, standing};
use calc::press::Press;
use calc::round::{Towards, time_text};
use egui::{CollapsingHeader, Grid, Id, RichText, Ui};
use figure::Role;
use std::sync::Arc;

use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{caption, heading, step_table_ui};
use crate::window::wishes::Wishes;

/// What is being typed on this sheet, and the standing it shows.
#[derive(Default)]
pub struct ReadingsDrafts {
    entry: entry::EntryDraft,
    list: list::ListDraft,
    known: Option<Known>,
}

/// The standing, kept while nothing it depends on has changed.
struct Known {
    made_from: (Arc<Press>, calc::plant_settings::PlantSettings, jiff::civil::Date),
    standing: Option<Standing>,
}

impl ReadingsDrafts {
    fn follow(&mut self, cx: &SheetContext) {
        let is_known = self.known.as_ref().is_some_and(|known| {
            Arc::ptr_eq(&known.made_from.0, cx.press)
                && known.made_from.1 == cx.document.settings
                && known.made_from.2 == cx.today
        });
        if !is_known {
            let standing = standing(cx.press, &cx.document.settings, cx.today);
            self.known =
                Some(Known { made_from: (cx.press.clone(), cx.document.settings.clone(), cx.today), standing });
        }
    }
}

/// Shows the sheet.
pub fn readings_ui(ui: &mut Ui, cx: &SheetContext, drafts: &mut ReadingsDrafts, wishes: &mut Wishes) {
    drafts.follow(cx);
    let ReadingsDrafts { entry, list, known } = drafts;
    let standing = known.as_ref().and_then(|known| known.standing.as_ref());
    if cx.press.reference.is_none() {
        reference::choose_ui(ui, cx, wishes);
        if cx.press.readings.is_empty() {
            return;
        }
    }
    entry::entry_ui(ui, cx, entry, wishes);
    ui.add_space(4.0);
    if let Some(standing) = standing {
        sentence_ui(ui, standing);
        plot::plot_ui(ui, cx, standing);
        limits_ui(ui, cx, standing);
    }
    reference::reference_ui(ui, cx, wishes);
    list::list_ui(ui, cx, list, wishes);
}

fn sentence_ui(ui: &mut Ui, standing: &Standing) {
    let role = match standing.crossed().map(|line| line.consequence) {
        Some(monthly::Consequence::StopUsing) => Role::Short,
        Some(monthly::Consequence::Retime) => Role::Retime,
        Some(monthly::Consequence::Warn) => Role::Unproven,
        None => Role::Ink,
    };
    let colour = theme::colour(ui.ctx(), role);
    ui.label(RichText::new(monthly::sentence(standing)).font(theme::strong(15.0)).color(colour));
    if let Some(suspect) = &standing.suspect {
        ui.label(monthly::suspect_sentence(suspect));
    }
}

fn limits_ui(ui: &mut Ui, cx: &SheetContext, standing: &Standing) {
    if standing.lines.is_empty() {
        caption(ui, "No limit yet: enter a safeguard with its installed distance and a stop test.");
        return;
    }
    heading(ui, "Limits");
    let faint = theme::colour(ui.ctx(), Role::Faint);
    Grid::new(Id::unique(("limits", &cx.press.tag))).num_columns(4).spacing([22.0, 5.0]).show(ui, |ui| {
        for head in ["limit", "mean of a reading", "when crossed", ""] {
            ui.label(RichText::new(head).size(12.5).color(faint));
        }
        ui.end_row();
        for (index, line) in standing.lines.iter().enumerate() {
            ui.label(line.name);
            ui.label(RichText::new(time_text(line.value, Towards::Smaller)).font(theme::strong(14.0)));
            ui.label(line.consequence.words());
            let is_binding = Some(index) == standing.binding;
            ui.label(
                RichText::new(if is_binding { "binding" } else { "" }).color(theme::colour(ui.ctx(), Role::Accent)),
            );
            ui.end_row();
        }
    });
    CollapsingHeader::new("How the limits come about").id_salt(("limit steps", &cx.press.tag)).show(ui, |ui| {
        for line in &standing.lines {
            ui.label(RichText::new(line.name).font(theme::strong(14.0)));
            step_table_ui(ui, Id::unique(("limit steps", &cx.press.tag, line.name)), &line.steps, cx.unit);
        }
    });
}
