//! The fields of one stop test: condition, timing and clock, instrument.

use calc::calendar::{Moment, parse_date};
use calc::limits;
use calc::stop_test::{BrakeState, ClockStart, StopPath, Valves};
use calc::units::{Angle, Mass, Pressure, Rate};
use egui::vec2;

use super::model::clock_words;
use super::partial::{Edit, PartialTest};
use crate::window::sheets::form::Form;
use crate::window::widgets::{FieldKind, caption, heading};

/// Width of one group of fields.
pub const GROUP: f32 = 372.0;

/// Width between two groups.
pub const BETWEEN: f32 = 32.0;

/// Draws the fields in as many columns as there is room for. Gives the change that was made.
pub fn test_fields_ui(ui: &mut egui::Ui, form: &mut Form<'_>, test: &PartialTest) -> Option<Edit> {
    if ui.available_width() < 2.0 * GROUP + BETWEEN {
        let edit = group_ui(ui, |ui| condition_ui(ui, form, test));
        return edit.or(group_ui(ui, |ui| timing_ui(ui, form, test)));
    }
    ui.horizontal_top(|ui| {
        ui.spacing_mut().item_spacing.x = BETWEEN;
        let edit = group_ui(ui, |ui| condition_ui(ui, form, test));
        edit.or(group_ui(ui, |ui| timing_ui(ui, form, test)))
    })
    .inner
}

fn group_ui(ui: &mut egui::Ui, content: impl FnOnce(&mut egui::Ui) -> Option<Edit>) -> Option<Edit> {
    ui.vertical(|ui| {
        ui.set_width(GROUP);
        ui.spacing_mut().item_spacing = vec2(8.0, 2.0);
        content(ui)
    })
    .inner
}

fn condition_ui(ui: &mut egui::Ui, form: &mut Form<'_>, test: &PartialTest) -> Option<Edit> {
    let mut edit = None;
    let mut put = |found: Option<Edit>| edit = edit.take().or(found);
    heading(ui, "Condition");
    let angle = test.angle.map(Angle::base);
    put(form
        .needed_number(ui, "angle", "Crank angle", &limits::ANGLE, angle)
        .map(|it| Edit::Angle(Angle::from_base(it))));
    let speed = test.speed.map(Rate::base);
    put(form.needed_number(ui, "speed", "Speed", &limits::SPEED, speed).map(|it| Edit::Speed(Rate::from_base(it))));
    let die = test.upper_die.map(Mass::base);
    put(form
        .needed_number(ui, "die", "Upper die", &limits::DIE_MASS, die)
        .map(|it| Edit::UpperDie(Mass::from_base(it))));
    let pressure = test.counterbalance.map(Pressure::base);
    put(form
        .number(ui, "counterbalance", "Counterbalance", &limits::COUNTERBALANCE, pressure)
        .map(|it| Edit::Counterbalance(it.map(Pressure::from_base))));
    let pressure = test.operating_pressure.map(Pressure::base);
    put(form
        .number(ui, "operating-pressure", "Operating pressure", &limits::OPERATING_PRESSURE, pressure)
        .map(|it| Edit::OperatingPressure(it.map(Pressure::from_base))));
    put(form.pick(ui, "brake", "Brake", (test.brake, BrakeState::ALL), BrakeState::words).map(Edit::Brake));
    put(form.pick(ui, "path", "Stop path", (test.path, StopPath::ALL), StopPath::words).map(Edit::Path));
    put(form.choice(ui, "valves", "Valves", (test.valves, Valves::ALL), Valves::words).map(Edit::Valves));
    edit
}

fn timing_ui(ui: &mut egui::Ui, form: &mut Form<'_>, test: &PartialTest) -> Option<Edit> {
    let mut edit = None;
    let mut put = |found: Option<Edit>| edit = edit.take().or(found);
    heading(ui, "Timing");
    let at = test.at.map_or_else(String::new, |at| at.to_string());
    let kind = FieldKind::words("Date, time").wide(148.0).hint("year-month-day");
    put(form.needed(ui, "at", kind, &at, |text| Moment::parse("Date", text)).map(Edit::At));
    put(form.words(ui, "by", "Timed by", &test.by).map(Edit::By));
    let starts = (test.clock_start, ClockStart::ALL);
    put(form.choice(ui, "clock-start", "Clock starts when", starts, ClockStart::words).map(Edit::ClockStart));
    let words = test.clock_start.map_or("What the clock did not see is added to its time.", clock_words);
    ui.allocate_ui(vec2(GROUP, 38.0), |ui| {
        ui.set_min_size(vec2(GROUP, 38.0));
        caption(ui, words);
    });
    heading(ui, "Instrument");
    put(form.words(ui, "instrument", "Instrument", &test.instrument).map(Edit::Instrument));
    put(form.words(ui, "serial", "Serial number", &test.serial).map(Edit::Serial));
    let day = |date: Option<jiff::civil::Date>| date.map_or_else(String::new, |date| date.to_string());
    let kind = |label| FieldKind::words(label).wide(148.0).hint("year-month-day");
    put(form
        .optional(ui, "calibrated", kind("Calibrated on"), &day(test.calibrated), |text| {
            parse_date("Calibrated on", text)
        })
        .map(Edit::Calibrated));
    put(form
        .optional(ui, "calibration-due", kind("Calibration due"), &day(test.calibration_due), |text| {
            parse_date("Calibration due", text)
        })
        .map(Edit::CalibrationDue));
    edit
}
