//! The list of presses: gravest first or by tag, with mark and spare.

use calc::round::{Towards, length_text};
use calc::schedule::{due_at, end_of_month};
use calc::units::{Length, LengthUnit};
use calc::verdict::Answer;
use egui::{Align2, Key, RichText, ScrollArea, Sense, Ui, vec2};
use figure::Role;
use jiff::civil::Date;

use super::app::{ViewState, answer_role};
use super::commands::Command;
use super::drawing::paint_mark;
use super::theme;
use super::widgets::{caption, shortcut_button};
use super::wishes::{Wish, Wishes};
use crate::document::History;
use crate::results::{PressResult, Results};

/// The tags in the order in which they are listed, those that match the find box.
pub fn order<'a>(results: &'a Results, view: &ViewState) -> Vec<&'a str> {
    let wanted = view.find.trim().to_lowercase();
    let matches = |result: &&PressResult| {
        let press = &result.press;
        wanted.is_empty()
            || [&press.tag, &press.description, &press.location]
                .iter()
                .any(|text| text.to_lowercase().contains(&wanted))
    };
    let mut listed: Vec<&PressResult> = results.presses().iter().filter(matches).collect();
    if !view.is_by_tag {
        let spare = |result: &PressResult| result.spare().unwrap_or(Length::mm(i64::from(i32::MAX)));
        listed.sort_by_key(|result| (std::cmp::Reverse(result.answer()), spare(result)));
    }
    listed.into_iter().map(|result| result.press.tag.as_str()).collect()
}

/// Shows the list.
pub fn press_list_ui(
    ui: &mut Ui,
    history: Option<&History>,
    results: &Results,
    view: &mut ViewState,
    today: Date,
    wishes: &mut Wishes,
) {
    ui.spacing_mut().item_spacing.y = 5.0;
    let name = history.map_or("No plant", |history| history.document().settings.name.as_str());
    ui.add(egui::Label::new(RichText::new(name).font(theme::strong(16.0))).wrap());
    ui.horizontal(|ui| {
        for command in [Command::OpenPlant, Command::NewPlant] {
            let response = ui.button(command.name()).on_hover_text(ui.ctx().format_shortcut(&command.shortcut()));
            if response.clicked() {
                wishes.push(if command == Command::OpenPlant { Wish::OpenPlant } else { Wish::NewPlant });
            }
        }
    });
    let Some(history) = history else { return };
    ui.horizontal(|ui| {
        if ui.button("Plant settings…").clicked() {
            wishes.push(Wish::EditPlant);
        }
        if ui.selectable_label(view.is_overview, "All presses").clicked() {
            wishes.push(Wish::ShowOverview);
        }
    });
    ui.separator();
    let find = ui.add(
        egui::TextEdit::singleline(&mut view.find)
            .id_salt("find")
            .hint_text("find a press")
            .desired_width(f32::INFINITY),
    );
    find.widget_info(|| egui::WidgetInfo::labeled(egui::Role::TextInput, true, "Find a press"));
    if std::mem::take(&mut view.focus_find) {
        find.request_focus();
    }
    let tags = order(results, view);
    if find.has_focus() {
        let step =
            ui.input(|input| i32::from(input.key_pressed(Key::ArrowDown)) - i32::from(input.key_pressed(Key::ArrowUp)));
        let present = tags.iter().position(|tag| Some(*tag) == view.press.as_deref());
        let next =
            present.map_or(0, |index| index.saturating_add_signed(step as isize).min(tags.len().saturating_sub(1)));
        if let Some(tag) = tags.get(next).filter(|_| step != 0 || (present.is_none() && !view.find.is_empty())) {
            wishes.push(Wish::ShowPress((*tag).to_owned()));
        }
    }
    ui.horizontal(|ui| {
        ui.spacing_mut().item_spacing.x = 2.0;
        for (is_by_tag, name) in [(false, "gravest first"), (true, "by tag")] {
            if ui.selectable_label(view.is_by_tag == is_by_tag, name).clicked() {
                wishes.push(Wish::SortByTag(is_by_tag));
            }
        }
    });
    let foot = 74.0;
    let height = (ui.available_height() - foot).max(60.0);
    ScrollArea::vertical().id_salt("presses").max_height(height).auto_shrink([false, false]).show(ui, |ui| {
        ui.spacing_mut().item_spacing.y = 1.0;
        for tag in &tags {
            if let Some(result) = results.press(tag) {
                let is_shown = !view.is_overview && view.press.as_deref() == Some(tag);
                if entry_ui(ui, result, is_shown, view.unit, &history.document().settings, today) {
                    wishes.push(Wish::ShowPress((*tag).to_owned()));
                }
            }
        }
        if tags.is_empty() && !view.find.is_empty() {
            caption(ui, "No press matches.");
        }
        for file in &history.document().unreadable {
            ui.add_space(4.0);
            let name = file.path.file_name().map_or(String::new(), |name| name.to_string_lossy().into_owned());
            ui.label(RichText::new(format!("{name} cannot be read")).color(theme::colour(ui.ctx(), Role::Short)));
            ui.add(
                egui::Label::new(RichText::new(&file.why).size(12.0).color(theme::colour(ui.ctx(), Role::Faint)))
                    .wrap(),
            );
        }
    });
    ui.separator();
    let until = end_of_month(today);
    let count: usize = history
        .document()
        .presses
        .iter()
        .map(|press| due_at(press, &history.document().settings, today).iter().filter(|due| due.on <= until).count())
        .sum();
    caption(ui, format!("{count} due this month"));
    if shortcut_button(ui, Command::NewPress.name(), &Command::NewPress.shortcut(), true).clicked() {
        wishes.push(Wish::NewPress);
    }
}

/// One press of the list; whether it was chosen.
fn entry_ui(
    ui: &mut Ui,
    result: &PressResult,
    is_shown: bool,
    unit: LengthUnit,
    settings: &calc::plant_settings::PlantSettings,
    today: Date,
) -> bool {
    let answer = result.answer();
    let words = match (answer, result.spare()) {
        (Answer::Short | Answer::Holds, Some(spare)) => {
            let sign = if spare > Length::ZERO { "+" } else { "" };
            format!("{sign}{}", length_text(spare, unit, Towards::Smaller))
        }
        _ => answer.word().to_lowercase(),
    };
    let (rect, response) = ui.allocate_exact_size(vec2(ui.available_width(), 28.0), Sense::click());
    response.widget_info(|| {
        egui::WidgetInfo::selected(
            egui::Role::Button,
            true,
            is_shown,
            format!("{} {}", result.press.tag, answer.word()),
        )
    });
    let visuals = ui.style().visuals.clone();
    let fill = if is_shown {
        visuals.selection.bg_fill
    } else if response.hovered() {
        visuals.widgets.hovered.weak_bg_fill
    } else {
        egui::Color32::TRANSPARENT
    };
    ui.painter().rect_filled(rect, 3.0, fill);
    if response.has_focus() {
        ui.painter().rect_stroke(rect, 3.0, visuals.selection.stroke, egui::StrokeKind::Inside);
    }
    paint_mark(ui, answer.into(), rect.left_center() + vec2(13.0, 0.0), 11.0);
    let ink = theme::colour(ui.ctx(), Role::Ink);
    ui.painter().text(
        rect.left_center() + vec2(28.0, 0.0),
        Align2::LEFT_CENTER,
        &result.press.tag,
        theme::strong(14.0),
        ink,
    );
    let colour = theme::colour(ui.ctx(), answer_role(answer));
    ui.painter().text(
        rect.right_center() - vec2(8.0, 0.0),
        Align2::RIGHT_CENTER,
        words,
        egui::FontId::proportional(13.5),
        colour,
    );
    let response = response.on_hover_ui(|ui| {
        ui.label(&result.press.description);
        match due_at(&result.press, settings, today).first() {
            Some(due) => ui.label(format!("next due {}: {}", due.on, due.what.words())),
            None => ui.label("nothing due"),
        };
    });
    response.clicked()
}
