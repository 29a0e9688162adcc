//! The fields of one stop test: condition, timing and clock, instrument.

use calc::calendar::{Moment, parse_date};
use calc::limits;
use calc::stop_test::{BrakeState, ClockStart, StopPath, Valves};
use calc::units::{Angle, Mass, Pressure, Rate};
use eframe::egui::{self, Id, RichText};

use super::model::clock_words;
use super::partial::{Edit, PartialTest};
use crate::window::sheets::entry::{Entries, optional, shown};
use crate::window::sheets::form::{Form, heading_ui};

/// Width of one group of fields.
pub const GROUP: f32 = 336.0;

/// Draws the fields in as many columns as there is room for. Gives the change that was made.
pub fn test_fields_ui(ui: &mut egui::Ui, owner: Id, test: &PartialTest, entries: &mut Entries) -> Option<Edit> {
    let columns = if ui.available_width() >= 2.0 * GROUP + 28.0 { 2 } else { 1 };
    let mut edit = None;
    ui.horizontal_top(|ui| {
        ui.spacing_mut().item_spacing.x = 28.0;
        column_ui(ui, |ui| {
            let mut form = Form { owner, entries, label: 150.0, field: 176.0 };
            edit = condition_ui(ui, &mut form, test);
            if columns == 1 {
                ui.add_space(10.0);
                edit = edit.take().or(timing_ui(ui, &mut form, test));
            }
        });
        if columns == 2 {
            column_ui(ui, |ui| {
                let mut form = Form { owner, entries, label: 130.0, field: 196.0 };
                edit = edit.take().or(timing_ui(ui, &mut form, test));
            });
        }
    });
    edit
}

fn column_ui(ui: &mut egui::Ui, content: impl FnOnce(&mut egui::Ui)) {
    ui.vertical(|ui| {
        ui.set_width(GROUP);
        ui.spacing_mut().item_spacing = egui::vec2(8.0, 2.0);
        content(ui);
    });
}

fn condition_ui(ui: &mut egui::Ui, form: &mut Form<'_>, test: &PartialTest) -> Option<Edit> {
    let mut edit = None;
    let mut put = |found: Option<Edit>| edit = edit.take().or(found);
    heading_ui(ui, "Condition");
    let angle = shown(test.angle, Angle::digits);
    put(form
        .number(ui, ("angle", "Crank angle", "°"), &angle, |text| Angle::parse(text, &limits::ANGLE))
        .map(Edit::Angle));
    let speed = shown(test.speed, Rate::digits);
    put(form
        .number(ui, ("speed", "Speed", "strokes/min"), &speed, |text| Rate::parse(text, &limits::SPEED))
        .map(Edit::Speed));
    let die = shown(test.upper_die, Mass::digits);
    put(form
        .number(ui, ("die", "Upper die", "kg"), &die, |text| Mass::parse(text, &limits::DIE_MASS))
        .map(Edit::UpperDie));
    let pressure = shown(test.counterbalance, Pressure::digits);
    put(form
        .number(ui, ("counterbalance", "Counterbalance", "bar"), &pressure, |text| {
            optional(text, |text| Pressure::parse(text, &limits::COUNTERBALANCE))
        })
        .map(Edit::Counterbalance));
    let pressure = shown(test.operating_pressure, Pressure::digits);
    put(form
        .number(ui, ("operating-pressure", "Operating pressure", "bar"), &pressure, |text| {
            optional(text, |text| Pressure::parse(text, &limits::OPERATING_PRESSURE))
        })
        .map(Edit::OperatingPressure));
    put(form.pick(ui, "brake", "Brake", (test.brake, BrakeState::ALL), BrakeState::words).map(Edit::Brake));
    put(form.pick(ui, "path", "Stop path", (test.path, StopPath::ALL), StopPath::words).map(Edit::Path));
    put(form.choice(ui, "valves", "Valves", (test.valves, Valves::ALL), Valves::words).map(Edit::Valves));
    edit
}

fn timing_ui(ui: &mut egui::Ui, form: &mut Form<'_>, test: &PartialTest) -> Option<Edit> {
    let mut edit = None;
    let mut put = |found: Option<Edit>| edit = edit.take().or(found);
    heading_ui(ui, "Timing");
    let at = shown(test.at, |at| at.to_string());
    put(form.read(ui, "at", "Date, time", &at, |text| Moment::parse("Date", text)).map(Edit::At));
    put(form.words(ui, "by", "Timed by", &test.by).map(Edit::By));
    let starts = (test.clock_start, ClockStart::ALL);
    put(form.choice(ui, "clock-start", "Clock starts when", starts, ClockStart::words).map(Edit::ClockStart));
    let words = test.clock_start.map_or("Choose what started the clock; the rest of the response is added.", clock_words);
    ui.allocate_ui(egui::vec2(GROUP, 34.0), |ui| {
        ui.set_min_size(egui::vec2(GROUP, 34.0));
        ui.add(egui::Label::new(RichText::new(words).small().weak()).wrap());
    });
    heading_ui(ui, "Instrument");
    put(form.words(ui, "instrument", "Instrument", &test.instrument).map(Edit::Instrument));
    put(form.words(ui, "serial", "Serial number", &test.serial).map(Edit::Serial));
    let day = |date: jiff::civil::Date| date.to_string();
    put(form
        .read(ui, "calibrated", "Calibrated on", &shown(test.calibrated, day), |text| {
            optional(text, |text| parse_date("Calibration date", text))
        })
        .map(Edit::Calibrated));
    put(form
        .read(ui, "calibration-due", "Calibration due", &shown(test.calibration_due, day), |text| {
            optional(text, |text| parse_date("Calibration due date", text))
        })
        .map(Edit::CalibrationDue));
    edit
}
