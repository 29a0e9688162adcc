//! The list of presses: gravest first or by tag, with mark and spare.

use calc::plant_settings::PlantSettings;
use calc::round::{Towards, length_text};
use calc::schedule::{due_at, end_of_month};
use calc::units::{Length, LengthUnit};
use calc::verdict::Answer;
use egui::{Id, Key, Response, RichText, ScrollArea, Sense, Ui, vec2};
use figure::{AnswerMark, Role};
use jiff::civil::Date;

use super::app::ViewState;
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
    (today, without_result): (Date, &[&str]),
    wishes: &mut Wishes,
) {
    ui.spacing_mut().item_spacing.y = 5.0;
    ui.spacing_mut().button_padding.x = 7.0;
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
    find_ui(ui, results, view, wishes);
    let tags = order(results, view);
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
        entries_ui(ui, &tags, results, view, (&history.document().settings, today, without_result), wishes);
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

/// The find box. Arrow keys walk the list from it, Enter goes to the entry, Escape empties it.
fn find_ui(ui: &mut Ui, results: &Results, view: &mut ViewState, wishes: &mut Wishes) {
    let find = ui.add(
        egui::TextEdit::singleline(&mut view.find)
            .id_salt("find")
            .hint_text("find a press")
            .desired_width(f32::INFINITY),
    );
    find.widget_info(|| {
        let mut info = egui::WidgetInfo::labeled(egui::Role::TextInput, true, "Find a press");
        info.current_text_value = Some(view.find.clone());
        info
    });
    if std::mem::take(&mut view.focus_find) {
        find.request_focus();
        // What is typed next goes behind what stands there.
        let mut state = egui::TextEdit::load_state(ui.ctx(), find.id).unwrap_or_default();
        let end = egui::text::CCursor::new(view.find.chars().count());
        state.cursor.set_char_range(Some(egui::text::CCursorRange::one(end)));
        state.store(ui.ctx(), find.id);
    }
    if find.lost_focus() && ui.input(|input| input.key_pressed(Key::Escape)) {
        view.find.clear();
    }
    let tags = order(results, view);
    let present = tags.iter().position(|tag| Some(*tag) == view.press.as_deref());
    if find.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter)) && !tags.is_empty() {
        view.focus_entry = true;
        wishes.push(Wish::ShowPress(tags[present.unwrap_or(0)].to_owned()));
    }
    if find.has_focus() {
        let step = arrow_step(ui);
        let next = match present {
            Some(index) => index.saturating_add_signed(step),
            // The shown press does not match what is typed: the first that does is shown.
            None => 0,
        };
        let is_asked = step != 0 || (present.is_none() && !view.find.is_empty());
        if let Some(tag) = tags.get(next).filter(|_| is_asked) {
            wishes.push(Wish::ShowPress((*tag).to_owned()));
        }
    }
}

/// How a press is listed.
struct Entry<'a> {
    result: &'a PressResult,
    is_shown: bool,
    /// Whether an entry of it cannot be taken, so that no answer is given.
    is_without_result: bool,
    unit: LengthUnit,
}

impl Entry<'_> {
    fn mark(&self) -> AnswerMark {
        if self.is_without_result { AnswerMark::Unproven } else { self.result.answer().into() }
    }

    /// The spare where there is one to speak of, else the answer.
    fn words(&self) -> String {
        let answer = self.result.answer();
        match (answer, self.result.spare()) {
            _ if self.is_without_result => "no result".into(),
            (Answer::Short | Answer::Holds, Some(spare)) => {
                let sign = if spare > Length::ZERO { "+" } else { "" };
                format!("{sign}{}", length_text(spare, self.unit, Towards::Smaller))
            }
            _ => answer.word().to_lowercase(),
        }
    }

    fn ui(&self, ui: &mut Ui, settings: &PlantSettings, today: Date) -> Response {
        let press = &self.result.press;
        let (rect, response) = ui.allocate_exact_size(vec2(ui.available_width(), 28.0), Sense::click());
        response.widget_info(|| {
            let answer = if self.is_without_result { "no result" } else { self.result.answer().word() };
            egui::WidgetInfo::selected(egui::Role::Button, true, self.is_shown, format!("{} {answer}", press.tag))
        });
        let visuals = ui.style().visuals.clone();
        let fill = if self.is_shown {
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
        paint_mark(ui, self.mark(), rect.left_center() + vec2(13.0, 0.0), 11.0);
        let colour = theme::colour(ui.ctx(), self.mark().role());
        let words = ui.painter().layout_no_wrap(self.words(), egui::FontId::proportional(13.5), colour);
        let at = rect.right_center() - vec2(8.0 + words.size().x, words.size().y / 2.0);
        let room = at.x - rect.left() - 36.0;
        ui.painter().galley(at, words, colour);
        // A long tag is cut short; the hover text has it whole.
        let ink = theme::colour(ui.ctx(), Role::Ink);
        let mut job = egui::text::LayoutJob::simple_singleline(press.tag.clone(), theme::strong(14.0), ink);
        job.wrap = egui::text::TextWrapping::truncate_at_width(room);
        let tag = ui.painter().layout_job(job);
        ui.painter().galley(rect.left_center() + vec2(28.0, -tag.size().y / 2.0), tag, ink);
        response.on_hover_ui(|ui| {
            ui.label(RichText::new(&press.tag).font(theme::strong(14.0)));
            ui.label(&press.description);
            match due_at(press, settings, today).first() {
                Some(due) => ui.label(format!("next due {}: {}", due.on, due.what.words())),
                None => ui.label("nothing due"),
            };
        })
    }
}

/// The entries, walked by arrow keys; what is typed on one goes to the find box.
fn entries_ui(
    ui: &mut Ui,
    tags: &[&str],
    results: &Results,
    view: &mut ViewState,
    (settings, today, without_result): (&PlantSettings, Date, &[&str]),
    wishes: &mut Wishes,
) {
    let id = |tag: &str| Id::unique(("press", tag));
    for (place, tag) in tags.iter().enumerate() {
        let Some(result) = results.press(tag) else { continue };
        let is_shown = !view.is_overview && view.press.as_deref() == Some(tag);
        let is_without_result = without_result.contains(tag);
        let entry = Entry { result, is_shown, is_without_result, unit: view.unit };
        let response = ui.push_id(id(tag), |ui| entry.ui(ui, settings, today)).inner;
        if response.clicked() {
            response.request_focus();
            wishes.push(Wish::ShowPress((*tag).to_owned()));
        }
        if is_shown && std::mem::take(&mut view.focus_entry) {
            response.request_focus();
            response.scroll_to_me(None);
        }
        if response.has_focus() {
            let arrows = egui::EventFilter { vertical_arrows: true, ..Default::default() };
            ui.memory_mut(|memory| memory.set_focus_lock_filter(response.id, arrows));
            if let Some(next) = tags.get(place.saturating_add_signed(arrow_step(ui))).filter(|next| *next != tag) {
                view.focus_entry = true;
                wishes.push(Wish::ShowPress((*next).to_owned()));
            }
            let typed = typed(ui);
            if !typed.is_empty() {
                view.find.push_str(&typed);
                view.focus_find = true;
            }
        }
    }
}

fn arrow_step(ui: &Ui) -> isize {
    ui.input(|input| isize::from(input.key_pressed(Key::ArrowDown)) - isize::from(input.key_pressed(Key::ArrowUp)))
}

/// What was typed in this frame; a blank chooses the entry and is no text.
fn typed(ui: &Ui) -> String {
    ui.input(|input| {
        let texts = input.events.iter().filter_map(|event| match event {
            egui::Event::Text(text) if !text.trim().is_empty() => Some(text.as_str()),
            _ => None,
        });
        texts.collect()
    })
}
