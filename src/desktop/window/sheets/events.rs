//! The events of a press: the log, the entry of a new one, and what each puts to Retime, in words.

use calc::assess::capitalised;
use calc::calendar::Moment;
use calc::in_force::{overtaken_by, tests_in_force};
use calc::press::{Event, EventKind, Press, Touch};
use calc::safeguard::Safeguard;
use egui::{Align, Grid, Label, Layout, RichText, vec2};
use figure::Role;

use super::form::{Form, ROW};
use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{Commit, FieldKind, caption, field_ui, heading};
use crate::window::wishes::Wishes;

/// An event that is being entered; nothing of it is filled in beforehand.
#[derive(Default)]
pub struct EventDraft {
    at: Option<Moment>,
    kind: Option<EventKind>,
    safeguard: Option<String>,
    note: String,
}

impl EventDraft {
    /// The event, or what is still to be stated.
    ///
    /// # Errors
    /// The names of what is missing.
    pub fn complete(&self) -> Result<Event, Vec<&'static str>> {
        let needs_safeguard = self.kind.is_some_and(|kind| kind.touch().is_of_one_safeguard());
        match (self.at, self.kind) {
            (Some(at), Some(kind)) if !needs_safeguard || self.safeguard.is_some() => {
                let safeguard = self.safeguard.clone().filter(|_| needs_safeguard);
                Ok(Event { at, kind, safeguard, note: self.note.clone() })
            }
            _ => Err([
                ("date", self.at.is_none()),
                ("what happened", self.kind.is_none()),
                ("safeguard", needs_safeguard && self.safeguard.is_none()),
            ]
            .into_iter()
            .filter_map(|(name, is_missing)| is_missing.then_some(name))
            .collect()),
        }
    }
}

/// Draws the entry of a new event and the log under it, latest first.
pub fn events_ui(
    ui: &mut egui::Ui,
    cx: &SheetContext,
    form: &mut Form<'_>,
    draft: &mut EventDraft,
    wishes: &mut Wishes,
) {
    heading(ui, "Events");
    entry_ui(ui, cx.press, form, draft, wishes);
    ui.add_space(6.0);
    log_ui(ui, cx, wishes);
}

fn entry_ui(ui: &mut egui::Ui, press: &Press, form: &mut Form<'_>, draft: &mut EventDraft, wishes: &mut Wishes) {
    ui.horizontal(|ui| {
        ui.set_min_height(ROW);
        let id = form.owner.with("event-at");
        let shown = draft.at.map_or_else(String::new, |at| at.to_string());
        let kind = FieldKind::words("Date, time").bare().wide(148.0).hint("year-month-day");
        match field_ui(ui, id, kind, &shown, form.drafts, |text| Moment::parse("Date of the event", text)) {
            Some(Commit::Set(at, _)) => draft.at = Some(at),
            Some(Commit::Cleared(_)) => draft.at = None,
            Some(Commit::Refused | Commit::Passed) | None => {}
        }
        if let Some(refusal) = form.drafts.refusal(id) {
            form.refused.push(refusal.to_string());
        }
        kind_ui(ui, form, draft);
        safeguard_ui(ui, press, form, draft);
        let id = form.owner.with("event-note");
        let width = (ui.available_width() - 110.0).clamp(120.0, 420.0);
        let kind = FieldKind::words("Note").bare().wide(width).hint("note");
        match field_ui(ui, id, kind, &draft.note, form.drafts, |text| Ok(text.trim().to_owned())) {
            Some(Commit::Set(note, _)) => draft.note = note,
            Some(Commit::Cleared(_)) => draft.note.clear(),
            Some(Commit::Refused | Commit::Passed) | None => {}
        }
        let complete = draft.complete();
        if ui.add_enabled(complete.is_ok(), egui::Button::new("Add event")).clicked()
            && let Ok(event) = complete
        {
            let label = format!("add event: {},", event.kind.words());
            wishes.edit_press(press, label, move |press| press.events.push(event));
            *draft = EventDraft::default();
            form.drafts.focus(form.owner.with("event-at"));
        }
    });
    let words = match (draft.kind, draft.complete()) {
        (Some(kind), Ok(_)) => consequence(press, kind, draft.safeguard.as_deref()),
        (_, Err(missing)) => format!("Still to be stated: {}.", missing.join(", ")),
        (None, Ok(_)) => String::new(),
    };
    caption(ui, words);
}

fn kind_ui(ui: &mut egui::Ui, form: &Form<'_>, draft: &mut EventDraft) {
    let shown = draft.kind.map_or("what happened", EventKind::words);
    let list = egui::ComboBox::from_id_salt(form.owner.with("event-kind")).width(190.0).height(400.0);
    let response = list.selected_text(shown).show_ui(ui, |ui| {
        let choose = |kind: &EventKind| ui.selectable_value(&mut draft.kind, Some(*kind), kind.words()).clicked();
        let is_chosen = EventKind::ALL.iter().map(choose).fold(false, |any, one| any | one);
        close_after_choice(ui, is_chosen)
    });
    name_list(ui, &response.response, "What happened", response.inner == Some(true));
}

fn safeguard_ui(ui: &mut egui::Ui, press: &Press, form: &Form<'_>, draft: &mut EventDraft) {
    let is_of_one = draft.kind.is_some_and(|kind| kind.touch().is_of_one_safeguard());
    let list = egui::ComboBox::from_id_salt(form.owner.with("event-safeguard")).width(160.0).truncate();
    let shown = match (&draft.safeguard, is_of_one) {
        (Some(name), true) => name.clone(),
        (None, true) => "which safeguard".into(),
        (_, false) => "whole press".into(),
    };
    ui.add_enabled_ui(is_of_one, |ui| {
        let response = list.selected_text(shown).show_ui(ui, |ui| {
            let choose = |safeguard: &Safeguard| {
                let name = &safeguard.name;
                ui.selectable_value(&mut draft.safeguard, Some(name.clone()), name).clicked()
            };
            let is_chosen = press.safeguards.iter().map(choose).fold(false, |any, one| any | one);
            close_after_choice(ui, is_chosen)
        });
        name_list(ui, &response.response, "Safeguard it happened to", response.inner == Some(true));
    });
}

/// Closes the list that is being drawn when something was chosen: a click does that by itself, the keyboard does not.
fn close_after_choice(ui: &mut egui::Ui, is_chosen: bool) -> bool {
    if is_chosen {
        ui.close();
    }
    is_chosen
}

/// Gives a list without a label before it a name for screen readers, and the keyboard back after a choice.
fn name_list(ui: &egui::Ui, response: &egui::Response, name: &str, is_chosen: bool) {
    if is_chosen {
        response.request_focus();
    }
    ui.ctx().accesskit_node_builder(response.id, |node| node.set_label(name));
}

fn log_ui(ui: &mut egui::Ui, cx: &SheetContext, wishes: &mut Wishes) {
    let press = cx.press;
    if press.events.is_empty() {
        caption(ui, "Nothing is on record yet. Write down every change of brake, valve, pressure, die or safeguard.");
        return;
    }
    let mut order: Vec<usize> = (0..press.events.len()).collect();
    order.sort_by_key(|index| {
        let at = press.events[*index].at;
        std::cmp::Reverse((at.date, at.time, *index))
    });
    let faint = theme::colour(ui.ctx(), Role::Faint);
    let note_width = (ui.available_width() - 760.0).clamp(180.0, 520.0);
    Grid::new("events").num_columns(6).spacing([24.0, 6.0]).min_row_height(26.0).show(ui, |ui| {
        for head in ["Date", "Event", "Safeguard", "Note", "Now", ""] {
            ui.label(RichText::new(head).size(12.5).color(faint));
        }
        ui.end_row();
        for index in order {
            event_row_ui(ui, press, index, note_width, wishes);
            ui.end_row();
        }
    });
}

fn event_row_ui(ui: &mut egui::Ui, press: &Press, index: usize, note_width: f32, wishes: &mut Wishes) {
    let event = &press.events[index];
    ui.label(event.at.to_string());
    ui.label(capitalised(event.kind.words()));
    ui.label(event.safeguard.as_deref().unwrap_or("whole press"));
    ui.allocate_ui_with_layout(vec2(note_width, 26.0), Layout::left_to_right(Align::Center), |ui| {
        ui.set_min_width(note_width);
        ui.add(Label::new(&event.note).truncate());
    });
    let is_open = still_open(press, event).is_some();
    let role = if is_open { Role::Retime } else { Role::Faint };
    ui.label(RichText::new(standing(press, event)).color(theme::colour(ui.ctx(), role)));
    ui.push_id((press.tag.as_str(), "event", index), |ui| {
        let remove = ui.button("Remove");
        let name = format!("Remove {} of {}", event.kind.words(), event.at);
        ui.ctx().accesskit_node_builder(remove.id, |node| node.set_label(name));
        if remove.clicked() {
            let label = format!("remove event: {},", event.kind.words());
            let removed = event.clone();
            wishes.edit_press(press, label, move |press| {
                if press.events.get(index) == Some(&removed) {
                    press.events.remove(index);
                }
            });
        }
    });
}

/// What an event of this kind puts to Retime, before it is entered.
pub fn consequence(press: &Press, kind: EventKind, safeguard: Option<&str>) -> String {
    let stopping = names(press.safeguards.iter().filter(|one| one.kind.needs_stop()));
    let all = names(press.safeguards.iter());
    match (kind.touch(), safeguard) {
        (Touch::Nothing, _) => "Puts nothing to Retime; it is kept as a remark.".into(),
        (Touch::Stop, _) => match stopping {
            None => "Every stop must be timed again; no safeguard of this press stops the slide yet.".into(),
            Some(names) => format!("Puts to Retime until the stops are timed again: {names}."),
        },
        (Touch::Everything, _) => match all {
            None => "Every stop must be timed and every distance measured again; there is no safeguard yet.".into(),
            Some(names) => format!("Puts to Retime until stops and distances are measured again: {names}."),
        },
        (Touch::Distance, Some(name)) => format!("Puts to Retime until the distance is measured again: {name}."),
        (Touch::Device, Some(name)) => format!("Puts to Retime until the stops are timed again: {name}."),
        (Touch::Distance | Touch::Device, None) => "Choose the safeguard that it happened to.".into(),
    }
}

/// What still stands open because of an event of the log; `None` when later measurements have answered it.
pub fn still_open(press: &Press, event: &Event) -> Option<String> {
    let open = press.safeguards.iter().filter(|safeguard| {
        let tests = tests_in_force(press, safeguard.stop_path);
        overtaken_by(press, safeguard, &tests).iter().any(|(overtaking, _)| std::ptr::eq(*overtaking, event))
    });
    names(open)
}

/// What the log says of an event.
pub fn standing(press: &Press, event: &Event) -> String {
    match (event.kind.touch(), still_open(press, event)) {
        (Touch::Nothing, _) => "puts nothing to Retime".into(),
        (_, Some(names)) => format!("Retime: {names}"),
        (_, None) => answered(press, event).into(),
    }
}

/// Why nothing stands open: measured later, or never measured at all.
fn answered(press: &Press, event: &Event) -> &'static str {
    let touch = event.kind.touch();
    let is_touched = |safeguard: &&Safeguard| {
        !touch.is_of_one_safeguard() || event.safeguard.as_ref().is_none_or(|name| *name == safeguard.name)
    };
    let lacks = |safeguard: &Safeguard| {
        let lacks_stops = touch.needs_stop_test()
            && safeguard.kind.needs_stop()
            && tests_in_force(press, safeguard.stop_path).is_empty();
        lacks_stops || (touch.needs_tape() && safeguard.installed.is_none())
    };
    if press.safeguards.iter().filter(is_touched).any(lacks) {
        "not measured yet"
    } else if press.safeguards.is_empty() {
        "no safeguard yet"
    } else {
        "measured since"
    }
}

fn names<'a>(safeguards: impl Iterator<Item = &'a Safeguard>) -> Option<String> {
    let names: Vec<&str> = safeguards.map(|safeguard| safeguard.name.as_str()).collect();
    (!names.is_empty()).then(|| names.join(", "))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::window::sheets::sample::{at, press};
    use calc::safeguard::SafeguardKind;

    fn event(on: &str, kind: EventKind, safeguard: Option<&str>) -> Event {
        Event { at: at(on), kind, safeguard: safeguard.map(str::to_owned), note: String::new() }
    }

    #[test]
    fn each_kind_says_whom_it_touches() {
        let mut press = press();
        press.safeguards[1].kind = SafeguardKind::TwoHandTrip;
        let says = |kind, safeguard| consequence(&press, kind, safeguard);
        assert_eq!(
            says(EventKind::LiningReplaced, None),
            "Puts to Retime until the stops are timed again: front curtain."
        );
        assert_eq!(
            says(EventKind::PressMoved, None),
            "Puts to Retime until stops and distances are measured again: front curtain, rear curtain."
        );
        assert_eq!(
            says(EventKind::SafeguardMoved, Some("rear curtain")),
            "Puts to Retime until the distance is measured again: rear curtain."
        );
        assert_eq!(says(EventKind::DeviceReplaced, None), "Choose the safeguard that it happened to.");
        assert_eq!(says(EventKind::Remark, None), "Puts nothing to Retime; it is kept as a remark.");
    }

    #[test]
    fn an_event_is_open_until_a_later_measurement() {
        let mut press = press();
        press.events = vec![
            event("2026-09-14", EventKind::LiningReplaced, None),
            event("2026-11-14", EventKind::HeavierDie, None),
        ];
        let says: Vec<String> = press.events.iter().map(|event| standing(&press, event)).collect();
        assert_eq!(says, ["measured since", "Retime: front curtain, rear curtain"]);
        press.events = vec![event("2026-11-14", EventKind::SafeguardMoved, Some("rear curtain"))];
        assert_eq!(still_open(&press, &press.events[0]), Some("rear curtain".into()));
        press.events = vec![event("2026-11-14", EventKind::NeedleTurned, None)];
        press.stop_tests.clear();
        assert_eq!(standing(&press, &press.events[0]), "not measured yet");
    }
}
