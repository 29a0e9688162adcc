//! Time parts and installed distance of a safeguard.

use calc::calendar::Moment;
use calc::decimal::Side;
use calc::limits;
use calc::safeguard::Installed;
use calc::stop_test::StopPath;
use calc::units::{Length, Time};
use calc::verdict::{PartState, TimePartKind};
use egui::{Grid, RichText, Ui};
use figure::Role;

use super::Card;
use crate::window::theme;
use crate::window::widgets::{
    Commit, Drafts, FieldKind, caption, heading, length_field, moment_field, number_field, refusal_line, segments_ui,
    text_field,
};
use crate::window::wishes::Wishes;

/// The stop it calls for and every part of the response, with what the clock of the deciding test saw.
pub fn time_parts_ui(ui: &mut Ui, card: &Card, drafts: &mut Drafts, wishes: &mut Wishes) {
    let safeguard = card.safeguard();
    if !safeguard.kind.needs_stop() {
        return;
    }
    heading(ui, "Time parts");
    let paths = [(StopPath::Normal, StopPath::Normal.words()), (StopPath::Emergency, StopPath::Emergency.words())];
    if let Some(path) = segments_ui(ui, "Calls for the", safeguard.stop_path, &paths) {
        card.edit(wishes, "the stop", move |safeguard| safeguard.stop_path = path);
    }
    let governing = card.assessment().governing;
    match governing.and_then(|governing| card.cx.press.stop_tests.get(governing.test)) {
        Some(test) => {
            caption(ui, format!("The clock of the governing test started when: {}.", test.clock_start.words()))
        }
        None => caption(ui, "No stop test governs yet."),
    };
    let parts = &card.assessment().parts;
    let state = |kind| parts.iter().find(|part| part.kind == kind).map(|part| part.state);
    let response = limits::RESPONSE_TIME;
    let mut refused = None;
    Grid::new(card.id("parts")).num_columns(3).spacing([10.0, 5.0]).show(ui, |ui| {
        let mut row = |ui: &mut Ui, name: &str, kind, limit: &limits::Limit, current: Option<Time>| {
            ui.label(name);
            let id = card.id(name);
            let field = FieldKind::figure(name, "ms").bare();
            let commit = number_field(ui, id, field, limit, current.map(Time::base), drafts);
            state_ui(ui, state(kind));
            ui.end_row();
            refused = refused.take().or_else(|| drafts.refusal(id).cloned());
            commit
        };
        if let Some(time) = changed(row(ui, "device", TimePartKind::Device, &response, safeguard.device_response)) {
            card.edit(wishes, "the device response", move |safeguard| safeguard.device_response = time);
        }
        if let Some(time) =
            changed(row(ui, "interface", TimePartKind::Interface, &response, safeguard.interface_response))
        {
            card.edit(wishes, "the interface response", move |safeguard| safeguard.interface_response = time);
        }
        if let Some(time) =
            changed(row(ui, "control of the press", TimePartKind::Control, &response, card.cx.press.control_response))
        {
            wishes.edit_press(card.cx.press, "change the control response", move |press| press.control_response = time);
        }
        let wear = limits::WEAR_ALLOWANCE;
        if let Some(time) = changed(row(ui, "wear allowance", TimePartKind::Allowance, &wear, safeguard.wear_allowance))
        {
            card.edit(wishes, "the wear allowance", move |safeguard| safeguard.wear_allowance = time);
        }
    });
    refusal_line(ui, refused.as_ref());
}

/// A committed figure: `Some(Some(..))` was set, `Some(None)` was emptied.
fn changed(commit: Option<Commit<i64>>) -> Option<Option<Time>> {
    match commit {
        Some(Commit::Set(count, _)) => Some(Some(Time::from_base(count))),
        Some(Commit::Cleared(_)) => Some(None),
        _ => None,
    }
}

fn state_ui(ui: &mut Ui, state: Option<PartState>) {
    let (words, role) = match state {
        None => ("", Role::Faint),
        Some(PartState::SeenByClock) => ("seen by the clock, not added", Role::Faint),
        Some(PartState::Added(_)) => ("added", Role::Ink),
        Some(PartState::Missing) => ("missing", Role::Unproven),
    };
    ui.label(RichText::new(words).color(theme::colour(ui.ctx(), role)));
}

/// What the tape says, by whom and when. All four are needed before there is a distance.
pub fn installed_ui(ui: &mut Ui, card: &Card, drafts: &mut Drafts, wishes: &mut Wishes) {
    heading(ui, "Installed distance");
    caption(ui, "From the sensing plane, actuator or opening to the nearest hazard, along the way a hand takes.");
    let cx = card.cx;
    let present = card.safeguard().installed.clone();
    let today = Moment::on(cx.today);
    let base = move |safeguard: &mut calc::safeguard::Safeguard, distance: Option<Length>| {
        // The first figure of a measurement brings the rest with it: no uncertainty, nobody named, today.
        safeguard.installed.get_or_insert_with(|| Installed {
            distance: distance.unwrap_or(Length::from_base(limits::INSTALLED.least)),
            uncertainty: Length::ZERO,
            by: String::new(),
            at: today,
        });
    };
    let mut refused = None;
    Grid::new(card.id("installed")).num_columns(2).spacing([10.0, 5.0]).show(ui, |ui| {
        ui.label("distance");
        let id = card.id("distance");
        let field = FieldKind::figure("installed distance", "").bare();
        let current = present.as_ref().map(|installed| installed.distance);
        let commit = length_field(ui, id, field, &limits::INSTALLED, cx.unit, Side::Shorter, current, drafts);
        refused = drafts.refusal(id).cloned();
        ui.end_row();
        match commit {
            Some(Commit::Set(distance, _)) => card.edit(wishes, "the installed distance", move |safeguard| {
                base(safeguard, Some(distance));
                if let Some(installed) = &mut safeguard.installed {
                    installed.distance = distance;
                }
            }),
            Some(Commit::Cleared(_)) => {
                card.edit(wishes, "the installed distance", |safeguard| safeguard.installed = None)
            }
            _ => {}
        }
        let Some(installed) = &present else { return };
        ui.label("tape uncertainty ±");
        let id = card.id("uncertainty");
        let field = FieldKind::figure("tape uncertainty", "").bare();
        let commit = length_field(
            ui,
            id,
            field,
            &limits::TAPE_UNCERTAINTY,
            cx.unit,
            Side::Longer,
            Some(installed.uncertainty),
            drafts,
        );
        refused = refused.take().or_else(|| drafts.refusal(id).cloned());
        ui.end_row();
        if let Some(Commit::Set(uncertainty, _)) = commit {
            card.edit(wishes, "the tape uncertainty", move |safeguard| {
                if let Some(installed) = &mut safeguard.installed {
                    installed.uncertainty = uncertainty;
                }
            });
        }
        ui.label("measured by");
        let commit =
            text_field(ui, card.id("by"), FieldKind::words("measured by").bare().wide(170.0), &installed.by, drafts);
        ui.end_row();
        if let Some(Commit::Set(by, _)) = commit {
            card.edit(wishes, "who measured the distance", move |safeguard| {
                if let Some(installed) = &mut safeguard.installed {
                    installed.by = by;
                }
            });
        }
        ui.label("on");
        let id = card.id("on");
        let commit =
            moment_field(ui, id, FieldKind::words("measured on").bare().wide(140.0), Some(installed.at), drafts);
        refused = refused.take().or_else(|| drafts.refusal(id).cloned());
        ui.end_row();
        if let Some(Commit::Set(at, _)) = commit {
            card.edit(wishes, "when the distance was measured", move |safeguard| {
                if let Some(installed) = &mut safeguard.installed {
                    installed.at = at;
                }
            });
        }
    });
    refusal_line(ui, refused.as_ref());
}
