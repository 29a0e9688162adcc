//! Every press of the plant in one table, with a trend line each; what is due, as a list to take along.

use std::path::PathBuf;
use std::sync::Arc;

use calc::monthly::{Change, Standing, date_of, standing};
use calc::press::Press;
use calc::round::{Towards, length_text};
use calc::schedule::{Due, due_at, end_of_month, end_of_week};
use calc::statistics::Forecast;
use calc::units::LengthUnit;
use egui::{Grid, Id, RichText, Sense, Stroke, TextEdit, Ui, pos2, vec2};
use figure::Role;
use jiff::civil::Date;
use record::{Paper, RoundListInput, round_list};

use super::theme;
use super::widgets::{answer_badge, caption, heading};
use super::wishes::{Wish, Wishes};
use crate::document::Document;
use crate::results::{PressResult, Results};

/// How the table is sorted, what is typed, and the standings it shows.
#[derive(Default)]
pub struct OverviewDraft {
    sorted_by: Column,
    is_descending: bool,
    csv: String,
    list: String,
    known: Vec<(Arc<Press>, Option<Standing>)>,
    made_for: Option<(calc::plant_settings::PlantSettings, Date)>,
}

#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
enum Column {
    #[default]
    Answer,
    Tag,
    Spare,
    Drift,
    Limit,
    Due,
}

const COLUMNS: [(Column, &str); 6] = [
    (Column::Tag, "press"),
    (Column::Answer, "answer"),
    (Column::Spare, "spare"),
    (Column::Drift, "drift a month"),
    (Column::Limit, "limit reached"),
    (Column::Due, "next due"),
];

struct Row<'a> {
    result: &'a PressResult,
    standing: Option<&'a Standing>,
    drift_ms: Option<f64>,
    limit: Option<String>,
    due: Option<Due>,
}

/// Shows the overview.
pub fn overview_ui(
    ui: &mut Ui,
    document: &Document,
    results: &Results,
    draft: &mut OverviewDraft,
    (unit, today): (LengthUnit, Date),
    wishes: &mut Wishes,
) {
    draft.follow(document, today);
    egui::ScrollArea::vertical().id_salt("overview").auto_shrink(false).show(ui, |ui| {
        let rows = draft.rows(document, results, today);
        let clicked = table_ui(ui, &rows, draft.sorted_by, unit, today, wishes);
        let csv = csv(&rows, unit);
        if let Some(column) = clicked {
            draft.is_descending = draft.sorted_by == column && !draft.is_descending;
            draft.sorted_by = column;
        }
        ui.add_space(8.0);
        ui.horizontal(|ui| {
            let label = ui.label("Table as CSV to");
            ui.add(TextEdit::singleline(&mut draft.csv).id(Id::unique("overview csv")).desired_width(320.0))
                .labelled_by(label.id);
            if ui.add_enabled(!draft.csv.trim().is_empty(), egui::Button::new("Export")).clicked() {
                wishes.push(Wish::WriteFile(PathBuf::from(draft.csv.trim()), csv));
            }
        });
        due_ui(ui, document, draft, today, wishes);
    });
}

impl OverviewDraft {
    fn follow(&mut self, document: &Document, today: Date) {
        let ground = (document.settings.clone(), today);
        let is_same = self.made_for.as_ref() == Some(&ground);
        let known = std::mem::take(&mut self.known);
        self.known = document
            .presses
            .iter()
            .map(|press| {
                let found = known.iter().find(|(other, _)| is_same && Arc::ptr_eq(other, press)).cloned();
                found.unwrap_or_else(|| (press.clone(), standing(press, &document.settings, today)))
            })
            .collect();
        self.made_for = Some(ground);
    }

    fn rows<'a>(&'a self, document: &Document, results: &'a Results, today: Date) -> Vec<Row<'a>> {
        let mut rows: Vec<Row> = self
            .known
            .iter()
            .filter_map(|(press, standing)| {
                let result = results.press(&press.tag)?;
                let standing = standing.as_ref();
                let drift_ms = standing.and_then(|standing| match &standing.change {
                    Change::CannotTell { .. } => None,
                    Change::Steady(drift) | Change::Drifting(drift) | Change::Stepped { drift, .. } => {
                        Some(drift.per_month_ms)
                    }
                });
                let limit = standing.and_then(|standing| match standing.forecast.as_ref()? {
                    Forecast::AlreadyReached(_) => Some("reached".to_owned()),
                    Forecast::Ahead { bound_day, .. } => {
                        date_of(*bound_day).map(|on| format!("{}-{:02}", on.year(), on.month()))
                    }
                    Forecast::CannotTell(_) => None,
                });
                let due = due_at(press, &document.settings, today).into_iter().next();
                Some(Row { result, standing, drift_ms, limit, due })
            })
            .collect();
        rows.sort_by(|one, other| {
            let order = match self.sorted_by {
                Column::Tag => one.result.press.tag.cmp(&other.result.press.tag),
                Column::Answer => {
                    (other.result.answer(), one.result.spare()).cmp(&(one.result.answer(), other.result.spare()))
                }
                Column::Spare => one.result.spare().cmp(&other.result.spare()),
                Column::Drift => other.drift_ms.unwrap_or(f64::MIN).total_cmp(&one.drift_ms.unwrap_or(f64::MIN)),
                Column::Limit => (one.limit.is_none(), &one.limit).cmp(&(other.limit.is_none(), &other.limit)),
                Column::Due => one.due.as_ref().map(|due| due.on).cmp(&other.due.as_ref().map(|due| due.on)),
            };
            if self.is_descending { order.reverse() } else { order }
        });
        rows
    }
}

fn table_ui(
    ui: &mut Ui,
    rows: &[Row],
    sorted_by: Column,
    unit: LengthUnit,
    today: Date,
    wishes: &mut Wishes,
) -> Option<Column> {
    let mut clicked = None;
    let right = ui.max_rect().right();
    Grid::new("overview").num_columns(7).spacing([20.0, 6.0]).striped(true).show(ui, |ui| {
        for (column, name) in COLUMNS {
            if column == Column::Due {
                caption(ui, "readings");
            }
            let text = RichText::new(name).size(12.5);
            if ui.selectable_label(sorted_by == column, text).clicked() {
                clicked = Some(column);
            }
        }
        ui.end_row();
        for row in rows {
            let press = &row.result.press;
            if ui.link(RichText::new(&press.tag).font(theme::strong(14.0))).clicked() {
                wishes.push(Wish::ShowPress(press.tag.clone()));
            }
            answer_badge(ui, row.result.answer());
            ui.label(row.result.spare().map_or(String::new(), |spare| length_text(spare, unit, Towards::Smaller)));
            ui.label(row.drift_ms.map_or(String::new(), drift_words));
            ui.label(row.limit.clone().unwrap_or_default());
            trend_ui(ui, row.standing);
            match &row.due {
                Some(due) => {
                    let role = if due.on < today { Role::Retime } else { Role::Ink };
                    let text = RichText::new(format!("{}  {}", due.on, due.what.words()));
                    let room = vec2((right - ui.cursor().left()).max(80.0), ui.spacing().interact_size.y);
                    ui.allocate_ui(room, |ui| {
                        ui.add(egui::Label::new(text.color(theme::colour(ui.ctx(), role))).truncate());
                    });
                }
                None => {
                    ui.label("");
                }
            }
            ui.end_row();
        }
    });
    clicked
}

fn drift_words(drift_ms: f64) -> String {
    let sign = if drift_ms < 0.0 { "\u{2212}" } else { "+" };
    format!("{sign}{:.2} ms", drift_ms.abs())
}

/// The readings of a press as a small line, with the binding limit where it lies near.
fn trend_ui(ui: &mut Ui, standing: Option<&Standing>) {
    let (rect, _) = ui.allocate_exact_size(vec2(170.0, 26.0), Sense::hover());
    let Some(points) = standing.map(|standing| &standing.series.points).filter(|points| points.len() > 1) else {
        return;
    };
    let limit = standing.and_then(Standing::binding_line).map(|line| line.value.to_f64());
    let (mut least, mut most) = points.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |(least, most), point| {
        (least.min(point.mean_ms), most.max(point.mean_ms))
    });
    let span = (most - least).max(2.0);
    if let Some(limit) = limit.filter(|limit| *limit < most + 3.0 * span && *limit > least - span) {
        least = least.min(limit);
        most = most.max(limit);
    }
    let margin = ((most - least) * 0.1).max(0.5);
    let (first, last) = (points[0].day, points[points.len() - 1].day.max(points[0].day + 1.0));
    let place = |day: f64, ms: f64| {
        let x = egui::remap(day, first..=last, f64::from(rect.left())..=f64::from(rect.right()));
        let y = egui::remap(ms, least - margin..=most + margin, f64::from(rect.bottom())..=f64::from(rect.top()));
        pos2(x as f32, y as f32)
    };
    if let Some(limit) = limit.filter(|limit| least <= *limit && *limit <= most) {
        let y = place(first, limit).y;
        ui.painter().hline(rect.x_range(), y, Stroke::new(1.0, theme::colour(ui.ctx(), Role::Retime)));
    }
    let line = points.iter().map(|point| place(point.day, point.mean_ms)).collect();
    ui.painter().add(egui::Shape::line(line, Stroke::new(1.3, theme::colour(ui.ctx(), Role::Accent))));
}

fn csv(rows: &[Row], unit: LengthUnit) -> String {
    let mut text =
        format!("press,description,answer,spare_{},drift_ms_per_month,limit_reached,next_due,what\n", unit.sign());
    for row in rows {
        let press = &row.result.press;
        let quoted = |text: &str| format!("\"{}\"", text.replace('"', "\"\""));
        let spare = row.result.spare().map_or(String::new(), |spare| {
            calc::round::length_digits(spare, unit, Towards::Smaller).replace('\u{2212}', "-")
        });
        let cells = [
            press.tag.clone(),
            quoted(&press.description),
            row.result.answer().word().to_owned(),
            spare,
            row.drift_ms.map_or(String::new(), |drift| format!("{drift:.3}")),
            row.limit.clone().unwrap_or_default(),
            row.due.as_ref().map_or(String::new(), |due| due.on.to_string()),
            row.due.as_ref().map_or(String::new(), |due| quoted(&due.what.words())),
        ];
        text.push_str(&cells.join(","));
        text.push('\n');
    }
    text
}

fn due_ui(ui: &mut Ui, document: &Document, draft: &mut OverviewDraft, today: Date, wishes: &mut Wishes) {
    heading(ui, "Due");
    let due: Vec<(String, String, Vec<Due>)> = document
        .presses
        .iter()
        .map(|press| (press.tag.clone(), press.location.clone(), due_at(press, &document.settings, today)))
        .collect();
    let count = |until: Date| due.iter().flat_map(|(_, _, due)| due).filter(|due| due.on <= until).count();
    let (week, month) = (end_of_week(today), end_of_month(today));
    ui.label(format!(
        "{} until {week}, the end of this week; {} until {month}, the end of this month.",
        count(week),
        count(month)
    ));
    ui.horizontal(|ui| {
        let label = ui.label("Round list as PDF to");
        ui.add(TextEdit::singleline(&mut draft.list).id(Id::unique("round list")).desired_width(320.0))
            .labelled_by(label.id);
        for (until, name) in [(week, "Print this week"), (month, "Print this month")] {
            if ui.add_enabled(!draft.list.trim().is_empty(), egui::Button::new(name)).clicked() {
                let record = round_list(&RoundListInput {
                    plant: &document.settings.name,
                    presses: &due,
                    today,
                    until,
                    version: env!("CARGO_PKG_VERSION"),
                    paper: Paper::A4,
                });
                wishes.push(Wish::PrintRoundList(Box::new(record), PathBuf::from(draft.list.trim())));
            }
        }
    });
    caption(ui, "One line a task, with room to write what was done, by whom and the result.");
}
