//! The map of the stop time over start angle and speed, with the measured stops drawn on it; pointer or arrow keys read a cell.

use calc::limits;
use calc::motion::{MapCell, WorstCell};
use calc::prediction::At;
use calc::units::Rate;
use calc::value_taken::summary_ms;
use egui::{Align2, Color32, EventFilter, FontId, Key, Rect, RichText, Sense, Stroke, Ui, pos2, vec2};
use figure::Role;

use super::map_job::{ANGLES, MapDone, MapJob, MapOf, SPEEDS, share, time_ms};
use super::state::{PredictedStop, Wanted};
use super::{height_left, unproven_ui};
use crate::window::context::SheetContext;
use crate::window::sheets::form::{Form, ROW};
use crate::window::theme;
use crate::window::widgets::caption;

/// Shows the map.
pub fn map_ui(
    ui: &mut Ui,
    cx: &SheetContext,
    form: &mut Form<'_>,
    stop: &PredictedStop,
    wanted: &Wanted,
    job: &mut MapJob,
) {
    let speeds = speeds_ui(ui, cx, form, wanted, job);
    let Some((slowest, fastest)) = speeds.filter(|speeds| speeds.0 < speeds.1) else {
        unproven_ui(ui, "The map needs a slowest and a faster fastest speed.");
        return;
    };
    let mut setup = stop.setup.clone();
    // The condition's own angle and speed do not matter to a map; without them it is not begun anew for each.
    if let Ok(command) = calc::motion::StopCommand::new(0.0, 1.0) {
        setup.command = command;
    }
    let of = MapOf { setup, speeds: (slowest as f64 / 1e3, fastest as f64 / 1e3) };
    job.follow(ui.ctx(), of.clone());
    if let Some(done) = job.progress() {
        ui.horizontal(|ui| {
            ui.add(egui::ProgressBar::new(done).desired_width(300.0).text(format!("{:.0} %", done * 100.0)));
            if ui.button("Stop").clicked() {
                job.stop();
            }
        });
        ui.ctx().request_repaint_after(std::time::Duration::from_millis(40));
        return;
    }
    let mut cell = job.cell;
    let mut begin = false;
    match job.found() {
        Some(Ok(done)) => {
            worst_ui(ui, done);
            picture_ui(ui, cx, &of, done, wanted, &mut cell);
        }
        Some(Err(refusal)) => {
            unproven_ui(ui, &format!("No map. {refusal}"));
            begin = ui.button("Work it out again").clicked();
        }
        None => {}
    }
    job.cell = cell;
    if begin {
        job.begin(ui.ctx(), of);
    }
}

/// The range of speeds: typed, or from the press.
fn speeds_ui(
    ui: &mut Ui,
    cx: &SheetContext,
    form: &mut Form<'_>,
    wanted: &Wanted,
    job: &mut MapJob,
) -> Option<(i64, i64)> {
    let fastest = cx.press.fastest_speed.or(wanted.speed).map(Rate::base);
    let slowest = cx.press.slowest_speed.map(Rate::base).filter(|slowest| Some(*slowest) < fastest);
    // A press that names no slowest speed is shown from half its fastest.
    let of_press = fastest.map(|fastest| (slowest.unwrap_or(fastest / 2).max(limits::SPEED.least), fastest));
    let (mut from, mut to) = job.speeds.or(of_press)?;
    let label = std::mem::replace(&mut form.label, 84.0);
    ui.horizontal(|ui| {
        ui.set_min_height(ROW);
        if let Some(count) = form.needed_number(ui, "map-from", "Speeds from", &limits::SPEED, Some(from)) {
            from = count;
            job.speeds = Some((from, to));
        }
        form.label = 24.0;
        if let Some(count) = form.needed_number(ui, "map-to", "to", &limits::SPEED, Some(to)) {
            to = count;
            job.speeds = Some((from, to));
        }
        caption(ui, "360 angles by 60 speeds");
    });
    form.label = label;
    Some((from, to))
}

fn worst_ui(ui: &mut Ui, done: &MapDone) {
    let per_min = |speed: f64| speed * 60.0 / std::f64::consts::TAU;
    match &done.worst {
        Ok(WorstCell::Longest(worst)) => {
            let words = format!(
                "Longest of the closing half: {:.1} ms from {:.0}° at {:.1} strokes/min; {:.1}° and {:.1} mm to standstill.",
                worst.stop_time_s * 1e3,
                worst.start_angle_rad.to_degrees(),
                per_min(worst.speed_rad_s),
                worst.stop_angle_rad.to_degrees(),
                worst.slide_travel_m * 1e3
            );
            ui.label(RichText::new(words).font(theme::strong(14.0)));
        }
        Ok(WorstCell::Refused { start_angle_rad, speed_rad_s, refusal }) => {
            let (angle, speed) = (start_angle_rad.to_degrees(), per_min(*speed_rad_s));
            unproven_ui(ui, &format!("No figure from {angle:.0}° at {speed:.1} strokes/min: {refusal}"));
        }
        Err(refusal) => unproven_ui(ui, &refusal.to_string()),
    }
}

const LEFT: f32 = 46.0;
const RIGHT: f32 = 96.0;
const UNDER: f32 = 40.0;

fn picture_ui(
    ui: &mut Ui,
    cx: &SheetContext,
    of: &MapOf,
    done: &mut MapDone,
    wanted: &Wanted,
    cell: &mut Option<(usize, usize)>,
) {
    let size = vec2(ui.available_width().min(1100.0), height_left(ui, 52.0, 230.0, 460.0));
    let (rect, response) = ui.allocate_exact_size(size, Sense::click());
    let plot = Rect::from_min_max(rect.min + vec2(LEFT, 8.0), rect.max - vec2(RIGHT, UNDER));
    keys(ui, &response, cell);
    let at = |pointer: egui::Pos2| {
        let angle = (pointer.x - plot.left()) / plot.width() * ANGLES as f32;
        let speed = (plot.bottom() - pointer.y) / plot.height() * SPEEDS as f32;
        (angle.clamp(0.0, (ANGLES - 1) as f32) as usize, speed.clamp(0.0, (SPEEDS - 1) as f32) as usize)
    };
    if response.clicked()
        && let Some(pointer) = response.interact_pointer_pos().filter(|pointer| plot.contains(*pointer))
    {
        *cell = Some(at(pointer));
    }
    let hovered = response.hover_pos().filter(|pointer| plot.contains(*pointer)).map(at);
    let range = done.range;
    let colour = |role| theme::colour(ui.ctx(), role);
    let painter = ui.painter_at(rect);
    let no_figure = colour(Role::Hatching);
    let texture = done.texture(ui.ctx(), no_figure).id();
    let whole = Rect::from_min_max(pos2(0.0, 0.0), pos2(1.0, 1.0));
    painter.image(texture, plot, whole, Color32::WHITE);
    let frame = if response.has_focus() {
        Stroke::new(2.0, colour(Role::Accent))
    } else {
        Stroke::new(1.0, colour(Role::Rule))
    };
    painter.rect_stroke(plot, 0.0, frame, egui::StrokeKind::Outside);
    axes(&painter, plot, of, colour(Role::Faint));
    scale(&painter, plot, range, colour(Role::Faint));
    let place = |angle_deg: f64, speed: f64| {
        let share = (speed - of.speeds.0) / (of.speeds.1 - of.speeds.0);
        let cell_high = plot.height() / SPEEDS as f32;
        pos2(
            plot.left() + plot.width() * (angle_deg / 360.0) as f32 + plot.width() * 0.5 / ANGLES as f32,
            plot.bottom() - cell_high * 0.5 - (plot.height() - cell_high) * share as f32,
        )
    };
    if let Ok(WorstCell::Longest(worst)) = &done.worst {
        let middle = place(worst.start_angle_rad.to_degrees(), worst.speed_rad_s * 60.0 / std::f64::consts::TAU);
        for (width, ink) in [(4.0, Color32::WHITE), (1.8, Color32::BLACK)] {
            painter.rect_stroke(
                Rect::from_center_size(middle, vec2(11.0, 11.0)),
                0.0,
                Stroke::new(width, ink),
                egui::StrokeKind::Middle,
            );
        }
    }
    let mut near: Option<(f32, String)> = None;
    for (index, test) in cx.press.stop_tests.iter().enumerate() {
        let condition = &test.condition;
        let Some(summary) = summary_ms(&test.stops).filter(|_| condition.path == wanted.path) else { continue };
        if Some(condition.upper_die) != wanted.upper_die {
            continue;
        }
        let (angle, speed) = (condition.angle.to_f64(), condition.speed.to_f64());
        if speed < of.speeds.0 - 1e-9 || of.speeds.1 + 1e-9 < speed {
            continue;
        }
        let middle = place(angle, speed);
        let fill = range.map_or(no_figure, |range| {
            let [r, g, b] = figure::heat(share(summary.mean(), range));
            Color32::from_rgb(r, g, b)
        });
        painter.circle(middle, 6.5, fill, Stroke::new(1.5, Color32::BLACK));
        painter.circle_stroke(middle, 7.9, Stroke::new(1.3, Color32::WHITE));
        if let Some(pointer) = response.hover_pos() {
            let away = pointer.distance(middle);
            if away < 9.0 && near.as_ref().is_none_or(|near| away < near.0) {
                let words = format!(
                    "Test {}: measured mean {:.1} ms at {}",
                    index + 1,
                    summary.mean(),
                    At::of(condition).words()
                );
                near = Some((away, words));
            }
        }
    }
    if let Some((angle, speed)) = *cell {
        let middle = place(angle as f64, of.speed_per_min(speed));
        for (width, ink) in [(3.0, Color32::WHITE), (1.2, Color32::BLACK)] {
            painter.hline(plot.x_range(), middle.y, Stroke::new(width * 0.5, ink.gamma_multiply(0.7)));
            painter.vline(middle.x, plot.y_range(), Stroke::new(width * 0.5, ink.gamma_multiply(0.7)));
        }
    }
    let read = hovered.or(*cell);
    let words = match (near, read) {
        (Some((_, words)), _) => words,
        (None, Some((angle, speed))) => cell_words(of, done, angle, speed),
        (None, None) => "Point at a cell to read it, or press Tab to the map and use the arrow keys.".to_owned(),
    };
    response.widget_info(|| egui::WidgetInfo::labeled(egui::Role::Image, true, format!("Map of stop times. {words}")));
    ui.label(words);
    caption(
        ui,
        "Square: longest of the closing half. Discs: measured means with this die on this stop path, in the colour of their time.",
    );
}

/// Arrow keys move the cell by one degree or one speed, with Shift by ten.
fn keys(ui: &Ui, response: &egui::Response, cell: &mut Option<(usize, usize)>) {
    if !response.has_focus() {
        return;
    }
    let filter = EventFilter { horizontal_arrows: true, vertical_arrows: true, ..EventFilter::default() };
    ui.memory_mut(|memory| memory.set_focus_lock_filter(response.id, filter));
    let (angle, speed) = cell.unwrap_or((90, SPEEDS - 1));
    let step = if ui.input(|input| input.modifiers.shift) { 10 } else { 1 };
    let pressed = |key: Key| ui.input(|input| input.num_presses(key)) * step;
    let angle = (angle + pressed(Key::ArrowRight)).min(ANGLES - 1).saturating_sub(pressed(Key::ArrowLeft));
    let speed = (speed + pressed(Key::ArrowUp)).min(SPEEDS - 1).saturating_sub(pressed(Key::ArrowDown));
    *cell = Some((angle, speed));
}

fn cell_words(of: &MapOf, done: &MapDone, angle: usize, speed: usize) -> String {
    let at = format!("{angle}° at {:.1} strokes/min", of.speed_per_min(speed));
    match &done.rows[angle].cells[speed] {
        MapCell::Stop { stop_angle_rad, slide_travel_m, .. } => {
            let ms = time_ms(&done.rows[angle].cells[speed]).unwrap_or_default();
            let travel = format!("{:.1} mm", slide_travel_m * 1e3).replace('-', "\u{2212}");
            format!("From {at}: {ms:.1} ms, {:.1}° and {travel} to standstill.", stop_angle_rad.to_degrees())
        }
        MapCell::Refused(refusal) => format!("From {at}: no figure. {refusal}"),
    }
}

fn axes(painter: &egui::Painter, plot: Rect, of: &MapOf, ink: Color32) {
    let font = FontId::proportional(11.5);
    for degrees in (0..=360).step_by(30) {
        let x = plot.left() + plot.width() * degrees as f32 / 360.0;
        painter.vline(x, plot.bottom()..=plot.bottom() + 4.0, Stroke::new(1.0, ink));
        painter.text(pos2(x, plot.bottom() + 6.0), Align2::CENTER_TOP, format!("{degrees}°"), font.clone(), ink);
    }
    painter.text(
        pos2(plot.center().x, plot.bottom() + 22.0),
        Align2::CENTER_TOP,
        "crank angle at the stop command",
        font.clone(),
        ink,
    );
    for step in 0..=4 {
        let speed = of.speeds.0 + (of.speeds.1 - of.speeds.0) * f64::from(step) / 4.0;
        let y = plot.bottom() - plot.height() * step as f32 / 4.0;
        painter.hline(plot.left() - 4.0..=plot.left(), y, Stroke::new(1.0, ink));
        painter.text(pos2(plot.left() - 7.0, y), Align2::RIGHT_CENTER, short(speed), font.clone(), ink);
    }
    painter.text(pos2(plot.left() - 7.0, plot.bottom() + 22.0), Align2::CENTER_TOP, "strokes/min", font, ink);
}

fn short(value: f64) -> String {
    let text = format!("{value:.1}");
    text.strip_suffix(".0").map_or(text.clone(), str::to_owned)
}

fn scale(painter: &egui::Painter, plot: Rect, range: Option<(f64, f64)>, ink: Color32) {
    let Some((least, greatest)) = range else { return };
    let strip = Rect::from_x_y_ranges(plot.right() + 16.0..=plot.right() + 32.0, plot.y_range());
    let steps = 64;
    for step in 0..steps {
        let from = strip.bottom() - strip.height() * step as f32 / steps as f32;
        let to = strip.bottom() - strip.height() * (step + 1) as f32 / steps as f32;
        let [r, g, b] = figure::heat(step as f32 / (steps - 1) as f32);
        painter.rect_filled(Rect::from_x_y_ranges(strip.x_range(), to..=from), 0.0, Color32::from_rgb(r, g, b));
    }
    for part in 0..=4 {
        let y = strip.bottom() - strip.height() * part as f32 / 4.0;
        let ms = least + (greatest - least) * f64::from(part) / 4.0;
        let text = format!("{ms:.0} ms");
        painter.text(pos2(strip.right() + 6.0, y), Align2::LEFT_CENTER, text, FontId::proportional(11.5), ink);
    }
}
