//! The sheet of the press itself: what it is, how it is built, how it is used, what happened to it.

use calc::assess::capitalised;
use calc::decimal::Side;
use calc::limits::{self, Limit};
use calc::press::{BrakeMonitor, Clutch, ClutchMedium, Conformity, DriveKind, Frame, Press, check_tag};
use calc::refusal::Refusal;
use calc::round::{Towards, time_text};
use calc::units::{Length, Mass, Rate, Time};
use egui::{Id, RichText, vec2};
use figure::Role;

use super::events::{EventDraft, events_ui};
use super::form::{Form, ROW, fill_strip, keep_strip, label_ui};
use crate::document::{Document, Unreadable};
use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{Commit, Drafts, FieldKind, caption, heading, length_field};
use crate::window::wishes::Wishes;

/// What is being typed into the sheet of the press.
#[derive(Default)]
pub struct PressDrafts {
    /// Tag of the press that it is typed for.
    tag: String,
    /// The fields.
    fields: Drafts,
    /// Whether a full-revolution clutch was chosen whose engaging points are not typed yet.
    awaits_points: bool,
    /// The event that is being entered.
    event: EventDraft,
}

impl PressDrafts {
    /// What could not be taken, in words.
    pub fn refused(&self) -> Vec<String> {
        self.fields.refused()
    }

    fn follow(&mut self, press: &Press) {
        if self.tag != press.tag {
            *self = Self { tag: press.tag.clone(), ..Self::default() };
        }
    }
}

/// Least and greatest width of one group of fields.
const GROUP: [f32; 2] = [320.0, 420.0];
const BETWEEN: f32 = 32.0;
const LABEL: f32 = 128.0;

/// Draws the sheet.
pub fn press_ui(ui: &mut egui::Ui, cx: &SheetContext, drafts: &mut PressDrafts, wishes: &mut Wishes) {
    drafts.follow(cx.press);
    ui.push_id((cx.press.tag.as_str(), "press"), |ui| {
        egui::ScrollArea::vertical().id_salt("sheet").auto_shrink(false).show(ui, |ui| {
            let mut refused = Vec::new();
            let strip = keep_strip(ui, 1);
            let PressDrafts { fields, awaits_points, event, .. } = drafts;
            let owner = Id::unique((cx.press.tag.as_str(), "press-fields"));
            let group = ((ui.available_width() - 2.0 * BETWEEN) / 3.0).clamp(GROUP[0], GROUP[1]);
            let field = group - LABEL - 14.0;
            let mut form = Form { owner, drafts: fields, label: LABEL, field, refused: &mut refused };
            ui.horizontal_top(|ui| {
                ui.spacing_mut().item_spacing = vec2(BETWEEN, 0.0);
                group_ui(ui, group, |ui| identity_ui(ui, cx, &mut form, wishes));
                group_ui(ui, group, |ui| build_ui(ui, cx, &mut form, awaits_points, wishes));
                group_ui(ui, group, |ui| use_ui(ui, cx, &mut form, wishes));
            });
            ui.add_space(8.0);
            events_ui(ui, cx, &mut form, event, wishes);
            fill_strip(ui, strip, &refused);
        });
    });
}

fn group_ui(ui: &mut egui::Ui, width: f32, content: impl FnOnce(&mut egui::Ui)) {
    ui.vertical(|ui| {
        ui.set_width(width);
        ui.spacing_mut().item_spacing = vec2(8.0, 2.0);
        content(ui);
    });
}

fn identity_ui(ui: &mut egui::Ui, cx: &SheetContext, form: &mut Form<'_>, wishes: &mut Wishes) {
    let press = cx.press;
    heading(ui, "Identity");
    let kind = FieldKind::words("Tag").wide(form.field);
    let read = |text: &str| free_tag(cx.document, press, text.trim());
    if let Some(tag) = form.needed(ui, "tag", kind, &press.tag, read) {
        wishes.edit_press(press, "change tag", move |press| press.tag = tag);
    }
    if let Some(text) = form.words(ui, "description", "Description", &press.description) {
        wishes.edit_press(press, "change description", move |press| press.description = text);
    }
    if let Some(text) = form.words(ui, "serial", "Serial number", &press.serial) {
        wishes.edit_press(press, "change serial number", move |press| press.serial = text);
    }
    if let Some(text) = form.words(ui, "location", "Location", &press.location) {
        wishes.edit_press(press, "change location", move |press| press.location = text);
    }
    if let Some(force) = form.number(ui, "force", "Press force", &limits::FORCE, press.force_n) {
        wishes.edit_press(press, "change press force", move |press| press.force_n = force);
    }
    let frames = (Some(press.frame), &[Frame::CFrame, Frame::StraightSide][..]);
    if let Some(frame) = form.pick(ui, "frame", "Frame", frames, frame_words) {
        wishes.edit_press(press, "change frame", move |press| press.frame = frame);
    }
    let marks = [None, Some(Conformity::CeMarked), Some(Conformity::WithoutCe)];
    let chosen = (Some(press.conformity), &marks[..]);
    if let Some(conformity) = form.choice(ui, "ce-mark", "CE mark", chosen, conformity_words) {
        wishes.edit_press(press, "change CE mark", move |press| press.conformity = conformity);
    }
}

/// A tag that no other press bears, so that the refusal stands at the field and not after it.
fn free_tag(document: &Document, press: &Press, tag: &str) -> Result<String, Refusal> {
    check_tag(tag)?;
    let is_borne = |other: &str| other != press.tag && other.eq_ignore_ascii_case(tag);
    let is_file = |file: &Unreadable| file.path.file_stem().is_some_and(|stem| stem.eq_ignore_ascii_case(tag));
    if document.presses.iter().any(|other| is_borne(&other.tag)) || document.unreadable.iter().any(is_file) {
        let allowed = "one that no other press of the plant bears";
        return Err(Refusal::new("Press tag", tag, allowed, "Choose another tag."));
    }
    Ok(tag.to_owned())
}

/// The clutches that a form offers.
#[derive(Clone, Copy, PartialEq)]
enum ClutchChoice {
    Air,
    Hydraulic,
    FullRevolution,
}

fn build_ui(ui: &mut egui::Ui, cx: &SheetContext, form: &mut Form<'_>, awaits_points: &mut bool, wishes: &mut Wishes) {
    let press = cx.press;
    heading(ui, "Clutch and drive");
    clutch_ui(ui, press, form, awaits_points, wishes);
    let drives = (Some(press.drive), &[DriveKind::Crank, DriveKind::Link][..]);
    if let Some(drive) = form.pick(ui, "drive", "Drive", drives, drive_words) {
        wishes.edit_press(press, "change drive", move |press| press.drive = drive);
    }
    if let Some(stroke) = length_ui(ui, cx, form, ("stroke", "Stroke"), &limits::STROKE, press.stroke) {
        wishes.edit_press(press, "change stroke", move |press| press.stroke = stroke);
    }
    if let Some(rod) = length_ui(ui, cx, form, ("rod", "Connecting rod"), &limits::ROD, press.rod) {
        wishes.edit_press(press, "change connecting rod", move |press| press.rod = rod);
    }
}

fn clutch_ui(ui: &mut egui::Ui, press: &Press, form: &mut Form<'_>, awaits_points: &mut bool, wishes: &mut Wishes) {
    let (held, points) = match press.clutch {
        Clutch::PartRevolution(ClutchMedium::Air) => (ClutchChoice::Air, None),
        Clutch::PartRevolution(ClutchMedium::Hydraulic) => (ClutchChoice::Hydraulic, None),
        Clutch::FullRevolution { engaging_points } => (ClutchChoice::FullRevolution, Some(engaging_points)),
    };
    let shown = if *awaits_points { ClutchChoice::FullRevolution } else { held };
    let all = [ClutchChoice::Air, ClutchChoice::Hydraulic, ClutchChoice::FullRevolution];
    let medium = match form.choice(ui, "clutch", "Clutch", (Some(shown), &all), clutch_words) {
        Some(ClutchChoice::Air) => Some(ClutchMedium::Air),
        Some(ClutchChoice::Hydraulic) => Some(ClutchMedium::Hydraulic),
        Some(ClutchChoice::FullRevolution) => {
            // There is no such clutch without a number of engaging points, so the change waits for it.
            *awaits_points = points.is_none();
            form.drafts.focus(form.owner.with("engaging-points"));
            None
        }
        None => None,
    };
    if let Some(medium) = medium {
        *awaits_points = false;
        wishes.edit_press(press, "change clutch", move |press| press.clutch = Clutch::PartRevolution(medium));
    }
    if shown != ClutchChoice::FullRevolution {
        ui.horizontal(|ui| {
            ui.set_min_height(ROW);
            label_ui(ui, LABEL, "Engaging points");
            caption(ui, "of a full-revolution clutch only");
        });
        return;
    }
    let limit = &limits::ENGAGING_POINTS;
    let read = |text: &str| {
        let count = limit.take_text(text)?;
        if count % 1000 != 0 {
            let allowed = format!("a whole number {}", limit.range());
            return Err(Refusal::new(limit.name, text.trim(), allowed, "Count the places where the clutch engages."));
        }
        Ok((count / 1000) as u32)
    };
    let taken = points.map_or_else(String::new, |points| points.to_string());
    if let Some(engaging_points) =
        form.needed(ui, "engaging-points", FieldKind::figure("Engaging points", ""), &taken, read)
    {
        *awaits_points = false;
        wishes
            .edit_press(press, "change clutch", move |press| press.clutch = Clutch::FullRevolution { engaging_points });
    }
}

fn use_ui(ui: &mut egui::Ui, cx: &SheetContext, form: &mut Form<'_>, wishes: &mut Wishes) {
    let press = cx.press;
    heading(ui, "In use");
    let rate = |rate: Option<Rate>| rate.map(Rate::base);
    let speed = &limits::SPEED;
    if let Some(count) =
        form.number(ui, "fastest", "Fastest speed", &speed.named("Fastest speed"), rate(press.fastest_speed))
    {
        wishes.edit_press(press, "change fastest speed", move |press| press.fastest_speed = count.map(Rate::from_base));
    }
    if let Some(count) =
        form.number(ui, "slowest", "Slowest speed", &speed.named("Slowest speed"), rate(press.slowest_speed))
    {
        wishes.edit_press(press, "change slowest speed", move |press| press.slowest_speed = count.map(Rate::from_base));
    }
    let die = press.heaviest_die.map(Mass::base);
    if let Some(count) = form.number(ui, "die", "Heaviest upper die", &limits::DIE_MASS, die) {
        wishes.edit_press(press, "change heaviest upper die", move |press| {
            press.heaviest_die = count.map(Mass::from_base)
        });
    }
    heading(ui, "Control and brake monitor");
    let response = press.control_response.map(Time::base);
    let limit = limits::RESPONSE_TIME.named("Control response");
    if let Some(count) = form.number(ui, "control", "Control response", &limit, response) {
        wishes.edit_press(press, "change control response", move |press| {
            press.control_response = count.map(Time::from_base)
        });
    }
    let setting = press.monitor.as_ref().map(|monitor| monitor.setting.base());
    if let Some(count) = form.number(ui, "monitor", "Monitor setting", &limits::MONITOR_SETTING, setting) {
        wishes.edit_press(press, "change monitor setting", move |press| {
            press.monitor = count.map(|count| BrakeMonitor { setting: Time::from_base(count) })
        });
    }
    let (words, role) = monitor_words(cx);
    let size = vec2(ui.available_width(), 38.0);
    ui.allocate_ui(size, |ui| {
        ui.set_min_size(size);
        ui.label(RichText::new(words).size(12.5).color(theme::colour(ui.ctx(), role)));
    });
}

/// The setting of the brake monitor against the least of what the safeguards allow.
fn monitor_words(cx: &SheetContext) -> (String, Role) {
    let allowed =
        cx.press.safeguards.iter().zip(&cx.result.assessments).filter_map(|(safeguard, assessment)| {
            Some((assessment.allowed.as_ref()?.monitor?, safeguard.name.as_str()))
        });
    let Some((allowed, name)) = allowed.min() else {
        return ("No safeguard tells yet what setting it allows.".into(), Role::Faint);
    };
    let most = time_text(allowed, Towards::Smaller);
    let most = format!("{} allows at most {most}", capitalised(name));
    match &cx.press.monitor {
        None => (format!("{most},\nif the monitor times the same stop on the same clock."), Role::Faint),
        Some(monitor) if monitor.setting <= allowed => {
            let spare = time_text(allowed - monitor.setting, Towards::Smaller);
            (format!("{most},\n{spare} more than set, on the same clock."), Role::Faint)
        }
        Some(monitor) => {
            let over = time_text(monitor.setting - allowed, Towards::Greater);
            (format!("Set too long. {most},\n{over} less than set, on the same clock."), Role::Short)
        }
    }
}

/// A length in the shown unit. Gives the new length, or `None` in it when emptied.
fn length_ui(
    ui: &mut egui::Ui,
    cx: &SheetContext,
    form: &mut Form<'_>,
    (name, label): (&str, &str),
    limit: &Limit,
    taken: Option<Length>,
) -> Option<Option<Length>> {
    let id = form.owner.with(name);
    let commit = ui
        .horizontal(|ui| {
            ui.set_min_height(ROW);
            label_ui(ui, form.label, label);
            let kind = FieldKind::figure(label, "").bare();
            length_field(ui, id, kind, limit, cx.unit, Side::Shorter, taken, form.drafts)
        })
        .inner;
    if let Some(refusal) = form.drafts.refusal(id) {
        form.refused.push(refusal.to_string());
    }
    match commit? {
        Commit::Set(length, _) => Some(Some(length)),
        Commit::Cleared(_) => Some(None),
        Commit::Refused | Commit::Passed => None,
    }
}

const fn frame_words(frame: Frame) -> &'static str {
    match frame {
        Frame::CFrame => "C-frame",
        Frame::StraightSide => "straight-side",
    }
}

const fn drive_words(drive: DriveKind) -> &'static str {
    match drive {
        DriveKind::Crank => "crank",
        DriveKind::Link => "link",
    }
}

const fn clutch_words(clutch: ClutchChoice) -> &'static str {
    match clutch {
        ClutchChoice::Air => "part-revolution, air",
        ClutchChoice::Hydraulic => "part-revolution, hydraulic",
        ClutchChoice::FullRevolution => "full-revolution",
    }
}

const fn conformity_words(conformity: Option<Conformity>) -> &'static str {
    match conformity {
        None => "not stated",
        Some(Conformity::CeMarked) => "yes",
        Some(Conformity::WithoutCe) => "no",
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::window::sheets::sample::{plant_settings, press};
    use std::sync::Arc;

    #[test]
    fn a_tag_of_another_press_or_of_an_unreadable_file_is_refused() {
        let mut other = press();
        other.tag = "P-08".into();
        let document = Document {
            folder: None,
            settings: plant_settings(),
            presses: vec![Arc::new(press()), Arc::new(other)],
            unreadable: vec![Unreadable { path: "presses/P-09.ron".into(), why: "cut short".into() }],
            renamed: Vec::new(),
        };
        for (tag, is_free) in [("P-10", true), ("P-07", true), ("p-08", false), ("P-09", false), ("P 10", false)] {
            assert_eq!(free_tag(&document, &press(), tag).is_ok(), is_free, "{tag}");
        }
    }
}
