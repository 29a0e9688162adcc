//! The sheet of predictions: drive and brake, the stop they predict, its map, the fit to the stop tests, and what a change would do.

mod brake_form;
mod curves;
mod distances;
mod drive_form;
mod fit_view;
mod map_job;
mod map_view;
mod state;
mod what_if;

use calc::limits;
use calc::prediction::PredictionData;
use calc::press::Press;
use calc::stop_test::StopPath;
use calc::units::{Angle, Mass, Rate};
use egui::{Id, RichText, Ui, vec2};
use figure::Role;

use super::form::{Form, ROW, fill_strip, keep_strip};
use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{Drafts, caption, segments_ui};
use crate::window::wishes::Wishes;
use state::{Known, Wanted};

/// What is shown of the prediction.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum Part {
    Data,
    Stop,
    Map,
    Fit,
    WhatIf,
}

const PARTS: &[(Part, &str)] = &[
    (Part::Data, "Drive and brake"),
    (Part::Stop, "Predicted stop"),
    (Part::Map, "Map"),
    (Part::Fit, "Fit to stop tests"),
    (Part::WhatIf, "What if"),
];

/// What is being typed and looked at on this sheet.
#[derive(Default)]
pub struct PredictionDrafts {
    tag: String,
    fields: Drafts,
    part: Option<Part>,
    wanted: Option<Wanted>,
    known: Option<Known>,
    curve: curves::Curve,
    map: map_job::MapJob,
    parts: brake_form::PartsDraft,
    what_if: what_if::WhatIfDraft,
}

impl PredictionDrafts {
    fn follow(&mut self, press: &Press) {
        if self.tag != press.tag {
            *self = Self { tag: press.tag.clone(), part: self.part, curve: self.curve, ..Self::default() };
        }
    }
}

/// Width of one group of fields.
const GROUP: f32 = 430.0;
const LABEL: f32 = 190.0;
const FIELD: f32 = 220.0;

/// Shows the sheet.
pub fn prediction_ui(ui: &mut Ui, cx: &SheetContext, drafts: &mut PredictionDrafts, wishes: &mut Wishes) {
    drafts.follow(cx.press);
    let PredictionDrafts { fields, part, wanted, known, curve, map, parts, what_if, .. } = drafts;
    let wanted = wanted.get_or_insert_with(|| Wanted::of(cx.press));
    Known::follow(known, cx.press, &cx.document.settings, wanted);
    let Some(known) = known.as_ref() else { return };
    let first = if known.stop.is_ok() { Part::Stop } else { Part::Data };
    let mut shown = part.unwrap_or(first);
    ui.push_id((cx.press.tag.as_str(), "prediction"), |ui| {
        ui.horizontal_wrapped(|ui| {
            if let Some(other) = segments_ui(ui, "", shown, PARTS) {
                shown = other;
                *part = Some(other);
            }
            if shown != Part::Data {
                ui.separator();
                path_ui(ui, wanted);
            }
            if shown != Part::Data && shown != Part::Fit && known.fit.is_ok() {
                ui.separator();
                let choices = [(true, "fitted"), (false, "as entered")];
                if let Some(by_fit) = segments_ui(ui, "Brake", wanted.by_fit, &choices) {
                    wanted.by_fit = by_fit;
                }
            }
        });
        let owner = Id::unique((cx.press.tag.as_str(), "prediction-fields"));
        let mut refused = Vec::new();
        let mut form = Form { owner, drafts: fields, label: LABEL, field: FIELD, refused: &mut refused };
        if shown == Part::Data {
            let strip = keep_strip(ui, 2);
            ui.horizontal_top(|ui| {
                ui.spacing_mut().item_spacing = vec2(36.0, 0.0);
                group_ui(ui, |ui| drive_form::drive_ui(ui, cx, &mut form, wishes));
                group_ui(ui, |ui| brake_form::brake_ui(ui, cx, &mut form, parts, wishes));
            });
            if let Err(why) = &known.stop {
                refused.push(why.clone());
            }
            fill_strip(ui, strip, &refused);
            return;
        }
        if shown != Part::Fit {
            condition_ui(ui, &mut form, wanted, known);
        }
        match (shown, &known.stop) {
            (Part::Fit, _) => fit_view::fit_ui(ui, cx, known, wishes),
            (_, Err(why)) => {
                ui.add_space(6.0);
                unproven_ui(ui, &format!("No stop is predicted. {why}"));
            }
            (Part::Map, Ok(stop)) => map_view::map_ui(ui, cx, &mut form, stop, wanted, map),
            (Part::WhatIf, Ok(stop)) => what_if::what_if_ui(ui, cx, &mut form, stop, known, wanted, what_if),
            (_, Ok(stop)) => {
                headline_ui(ui, stop, wanted);
                distances::distances_ui(ui, cx, &stop.distances);
                curves::curves_ui(ui, &cx.press.tag, stop, curve);
                distances::steps_ui(ui, cx, &stop.distances, "predicted stop");
            }
        }
        for words in &refused {
            ui.label(RichText::new(words).size(12.5).color(theme::colour(ui.ctx(), Role::Short)));
        }
    });
}

fn group_ui(ui: &mut Ui, content: impl FnOnce(&mut Ui)) {
    ui.vertical(|ui| {
        ui.set_width(GROUP);
        ui.spacing_mut().item_spacing = vec2(8.0, 2.0);
        content(ui);
    });
}

/// How high a picture may be that shall be seen whole, with `under` points left below it.
fn height_left(ui: &Ui, under: f32, least: f32, most: f32) -> f32 {
    (ui.clip_rect().bottom() - ui.cursor().top() - under).clamp(least, most)
}

/// A sentence in the colour of Unproven, with its hollow square.
fn unproven_ui(ui: &mut Ui, words: &str) {
    ui.horizontal_wrapped(|ui| {
        crate::window::drawing::mark_ui(ui, calc::verdict::Answer::Unproven, 12.0);
        ui.label(RichText::new(words).color(theme::colour(ui.ctx(), Role::Unproven)));
    });
}

/// Changes drive or brake of a press; what was not there begins as unknown.
fn edit(wishes: &mut Wishes, press: &Press, label: &'static str, change: impl FnOnce(&mut PredictionData) + 'static) {
    wishes.edit_press(press, label, move |press| change(press.prediction.get_or_insert_default()));
}

fn path_ui(ui: &mut Ui, wanted: &mut Wanted) {
    let paths = StopPath::ALL.iter().map(|path| (*path, path.words())).collect::<Vec<_>>();
    if let Some(path) = segments_ui(ui, "", wanted.path, &paths) {
        wanted.path = path;
    }
}

/// The condition in one row.
fn condition_ui(ui: &mut Ui, form: &mut Form<'_>, wanted: &mut Wanted, known: &Known) {
    let label = std::mem::replace(&mut form.label, 84.0);
    ui.horizontal(|ui| {
        ui.set_min_height(ROW);
        let angle = wanted.angle.map(Angle::base);
        if let Some(angle) = form.number(ui, "angle", "Crank angle", &limits::ANGLE, angle) {
            wanted.angle = angle.map(Angle::from_base);
        }
        let speed = wanted.speed.map(Rate::base);
        form.label = 50.0;
        if let Some(speed) = form.number(ui, "speed", "Speed", &limits::SPEED, speed) {
            wanted.speed = speed.map(Rate::from_base);
        }
        let die = wanted.upper_die.map(Mass::base);
        form.label = 70.0;
        if let Some(die) = form.number(ui, "die", "Upper die", &limits::DIE_MASS, die) {
            wanted.upper_die = die.map(Mass::from_base);
        }
        if let Ok(stop) = &known.stop
            && let Ok((angle, _)) = &stop.worst
        {
            let worst = Angle::deg(angle.round() as i64);
            let is_other = wanted.angle != Some(worst);
            let words = format!("Worst angle: {}°", worst.digits());
            if ui.add_enabled(is_other, egui::Button::new(words)).clicked() {
                wanted.angle = Some(worst);
            }
        }
    });
    form.label = label;
}

fn headline_ui(ui: &mut Ui, stop: &state::PredictedStop, wanted: &Wanted) {
    let found = &stop.curves.stop;
    let time = match stop.interval {
        Some(interval) => {
            let of = interval.stop_time_s;
            format!(
                "{:.1} ms predicted; 95 % of stops between {:.1} and {:.1} ms",
                of.value * 1e3,
                of.low * 1e3,
                of.high * 1e3
            )
        }
        None => format!("{:.1} ms predicted, by the entered figures, without interval", found.stop_time_s * 1e3),
    };
    ui.label(
        RichText::new(format!(
            "{time}; {:.1}° and {:.1} mm to standstill.",
            found.stop_angle_rad.to_degrees(),
            found.slide_travel_m * 1e3
        ))
        .font(theme::strong(15.0)),
    );
    let spans = found.spans;
    caption(
        ui,
        format!(
            "Delay {:.1} ms, clutch release {:.1} ms, build-up {:.1} ms, braking {:.1} ms. {:.0} J in the brake a stop, {:.0} W at ten \
             stops a minute. At standstill it holds: {:.0} N m against {:.0} N m.",
            spans.delay_s * 1e3,
            spans.clutch_release_s * 1e3,
            spans.build_up_s * 1e3,
            spans.braking_s * 1e3,
            found.brake_heat_j,
            found.brake_heat_j * 10.0 / 60.0,
            found.holding_torque_nm,
            found.load_torque_nm.abs(),
        ),
    );
    match &stop.worst {
        Ok((angle, ms)) => {
            let speed = wanted.speed.map_or(String::new(), |speed| speed.to_string());
            caption(ui, format!("Longest of the closing half at {speed}: {ms:.1} ms from {angle:.0}°."));
        }
        Err(why) => unproven_ui(ui, &format!("No longest stop of the closing half: {why}")),
    }
}
