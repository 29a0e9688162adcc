//! The bar at the top: what is shown, and what holds for the whole window.

use calc::press::Press;
use calc::rules::RuleSetId;
use calc::units::LengthUnit;
use egui::{Align, Layout, RichText, Ui};

use super::app::ViewState;
use super::commands::Command;
use super::theme;
use super::widgets::{bare_choice_ui, segments_ui};
use super::wishes::{Wish, Wishes};
use crate::document::History;

/// Shows the bar.
pub fn bar_ui(ui: &mut Ui, press: Option<&Press>, view: &ViewState, history: Option<&History>, wishes: &mut Wishes) {
    // A narrow window gives the title its room from the list of rule sets.
    let list_width = (ui.available_width() - 540.0).clamp(118.0, 190.0);
    ui.horizontal(|ui| {
        ui.set_min_height(30.0);
        ui.with_layout(Layout::right_to_left(Align::Center), |ui| {
            looks_ui(ui, view, wishes);
            if let Some(history) = history {
                ui.separator();
                let rules = history.document().settings.rules;
                let id = egui::Id::unique("rule set");
                if let Some(rules) = bare_choice_ui::<RuleSetId>(ui, id, "Rule set", list_width, rules) {
                    wishes.edit_plant("change the rule set", move |plant| plant.rules = rules);
                }
                ui.separator();
                changes_ui(ui, history, wishes);
            }
            ui.with_layout(Layout::left_to_right(Align::Center), |ui| title_ui(ui, press, view, history));
        });
    });
}

/// What is shown. Too long a description is cut short, and stands whole in the hover text.
fn title_ui(ui: &mut Ui, press: Option<&Press>, view: &ViewState, history: Option<&History>) {
    let (name, words) = match (press, history) {
        (Some(press), _) => {
            let about = [&press.description, &press.location].into_iter().filter(|text| !text.is_empty());
            (press.tag.as_str(), about.cloned().collect::<Vec<_>>().join(", "))
        }
        (None, Some(_)) if view.is_overview => ("All presses", String::new()),
        (None, Some(history)) => (history.document().settings.name.as_str(), String::new()),
        (None, None) => ("Slidehalt", String::new()),
    };
    let room = ui.available_width();
    let is_narrow = room < 200.0 || words.is_empty();
    ui.scope(|ui| {
        ui.set_max_width(if is_narrow { room } else { room * 0.6 });
        ui.add(egui::Label::new(RichText::new(name).font(theme::strong(20.0))).truncate());
    });
    if !is_narrow {
        ui.add(egui::Label::new(RichText::new(words).size(15.0)).truncate());
    }
}

/// Light or dark, mm or inches; from the right.
fn looks_ui(ui: &mut Ui, view: &ViewState, wishes: &mut Wishes) {
    let is_dark = ui.visuals().dark_mode;
    if let Some(is_dark) = segments_ui(ui, "", is_dark, &[(true, "dark"), (false, "light")]) {
        wishes.push(Wish::SetDark(is_dark));
    }
    ui.separator();
    let units = [(LengthUnit::Inch, "in"), (LengthUnit::Millimetre, "mm")];
    if let Some(unit) = segments_ui(ui, "", view.unit, &units) {
        wishes.push(Wish::ShowIn(unit));
    }
}

/// Save, undo and redo, each saying what it would do; from the right.
fn changes_ui(ui: &mut Ui, history: &History, wishes: &mut Wishes) {
    let button = |ui: &mut Ui, command: Command, what: Option<&str>| {
        let keys = ui.ctx().format_shortcut(&command.shortcut());
        let response = ui.add_enabled(what.is_some(), egui::Button::new(command.name()));
        let idle = format!("Nothing to do ({keys})");
        let hint = what.map_or(idle, |what| format!("{}: {what} ({keys})", command.name()));
        response.on_hover_text(&hint).on_disabled_hover_text(&hint).clicked()
    };
    if button(ui, Command::Redo, history.redo_label()) {
        wishes.push(Wish::Redo);
    }
    if button(ui, Command::Undo, history.undo_label()) {
        wishes.push(Wish::Undo);
    }
    if button(ui, Command::Save, history.is_dirty().then_some("write what has changed")) {
        wishes.push(Wish::Save);
    }
}
