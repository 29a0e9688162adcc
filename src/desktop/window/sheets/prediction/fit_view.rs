//! The fit to the stop tests: delay and torque with intervals, residuals, what was left out, and later tests beside their prediction.

use calc::prediction::{BrakeData, FitDeclined, LeftOut, PathFit};
use calc::units::{Time, Torque};
use egui::{Grid, Id, RichText, Ui};
use figure::Role;

use super::state::{Known, estimate_words};
use super::{edit, unproven_ui};
use crate::window::context::SheetContext;
use crate::window::theme;
use crate::window::widgets::{caption, heading};
use crate::window::wishes::Wishes;

/// Shows the fit, or why there is none.
pub fn fit_ui(ui: &mut Ui, cx: &SheetContext, known: &Known, wishes: &mut Wishes) {
    match &known.fit {
        Ok(fit) => found_ui(ui, cx, fit, known, wishes),
        Err(declined) => declined_ui(ui, declined),
    }
}

fn declined_ui(ui: &mut Ui, declined: &FitDeclined) {
    ui.add_space(6.0);
    unproven_ui(ui, &format!("No fit. {}", declined.why));
    caption(ui, format!("Stop tests that could be used: {}.", declined.used));
    left_out_ui(ui, &declined.left_out);
}

fn found_ui(ui: &mut Ui, cx: &SheetContext, fit: &PathFit, known: &Known, wishes: &mut Wishes) {
    let fitted = &fit.fitted;
    heading(ui, "Brake that explains the stop tests");
    let mut words = format!(
        "Delay {}, brake torque {}",
        estimate_words(fitted.dead_time_s, 1e3, "ms", 1),
        estimate_words(fitted.full_torque_nm, 1.0, "N m", 0)
    );
    if let Some(friction) = fitted.friction_torque_nm {
        words.push_str(&format!(", running friction {}", estimate_words(friction, 1.0, "N m", 0)));
    }
    ui.label(RichText::new(words + ".").font(theme::strong(14.0)));
    caption(
        ui,
        format!(
            "95 % intervals in brackets. {} stop tests; the delay counts from \u{201c}{}\u{201d}; the build-up of the torque is as entered.",
            fit.used.len(),
            fit.clock_start.words()
        ),
    );
    if fitted.lack_of_fit {
        unproven_ui(
            ui,
            "The residuals are greater than the scatter of the stops: the model misses something. The intervals are widened.",
        );
    }
    if ui.button("Take delay and torque as entered").clicked() {
        let dead_time = Time::from_ms_up(fitted.dead_time_s.value * 1e3);
        let torque = Some(Torque::from_base((fitted.full_torque_nm.value * 1e3).round() as i64));
        edit(wishes, cx.press, "take fitted brake", move |data| match &mut data.brake {
            BrakeData::Ramp(ramp) => (ramp.dead_time, ramp.torque) = (dead_time, torque),
            BrakeData::Pressure(pressure) => (pressure.dead_time, pressure.torque) = (dead_time, torque),
            BrakeData::NotStated => {}
        });
    }
    heading(ui, "Residuals");
    residuals_ui(ui, cx, fit);
    left_out_ui(ui, &fit.left_out);
    later_ui(ui, cx, known);
}

fn residuals_ui(ui: &mut Ui, cx: &SheetContext, fit: &PathFit) {
    let faint = theme::colour(ui.ctx(), Role::Faint);
    Grid::new(Id::unique(("residuals", &cx.press.tag))).num_columns(6).spacing([22.0, 3.0]).striped(true).show(
        ui,
        |ui| {
            for head in ["test", "condition", "measured mean", "fitted", "residual", ""] {
                ui.label(RichText::new(head).size(12.5).color(faint));
            }
            ui.end_row();
            for (index, condition) in fit.used.iter().zip(&fit.fitted.conditions) {
                let test = &cx.press.stop_tests[*index];
                let fitted_ms = condition.fitted_stop_time_s * 1e3;
                let residual_ms = condition.residual_s * 1e3;
                ui.label((index + 1).to_string());
                ui.label(format!(
                    "{}°, {}, {}",
                    test.condition.angle.digits(),
                    test.condition.speed,
                    test.condition.upper_die
                ));
                ui.label(format!("{:.2} ms", fitted_ms + residual_ms));
                ui.label(format!("{fitted_ms:.2} ms"));
                ui.label(signed(residual_ms));
                bar_ui(ui, condition.residual_in_deviations);
                ui.end_row();
            }
        },
    );
    caption(ui, "Bars: residual in standard deviations of the measured mean; the marks stand at 2 of them.");
}

/// A number with its sign, minus as a minus.
fn signed(ms: f64) -> String {
    format!("{ms:+.2} ms").replace('-', "\u{2212}")
}

fn bar_ui(ui: &mut Ui, deviations: f64) {
    let (rect, response) = ui.allocate_exact_size(egui::vec2(120.0, 14.0), egui::Sense::hover());
    let words = format!("{deviations:+.1} standard deviations").replace('-', "\u{2212}");
    response.widget_info(|| egui::WidgetInfo::labeled(egui::Role::Image, true, &words));
    let painter = ui.painter_at(rect);
    let colour = |role| theme::colour(ui.ctx(), role);
    let x = |value: f64| rect.center().x + (value.clamp(-4.0, 4.0) / 4.0) as f32 * rect.width() * 0.5;
    for mark in [-2.0, 0.0, 2.0] {
        painter.vline(x(mark), rect.y_range(), egui::Stroke::new(1.0, colour(Role::Rule)));
    }
    let role = if deviations.abs() <= 2.0 { Role::Accent } else { Role::Unproven };
    let bar = egui::Rect::from_x_y_ranges(
        x(deviations.min(0.0))..=x(deviations.max(0.0)),
        rect.center().y - 3.5..=rect.center().y + 3.5,
    );
    painter.rect_filled(bar, 0.0, colour(role));
}

fn left_out_ui(ui: &mut Ui, left_out: &[LeftOut]) {
    for left in left_out {
        caption(ui, format!("Left out: test {}, {}.", left.test + 1, left.why));
    }
}

fn later_ui(ui: &mut Ui, cx: &SheetContext, known: &Known) {
    heading(ui, "Later tests beside what was predicted");
    if known.later.is_empty() {
        caption(ui, "None yet: a test of a later day is compared here with what the earlier ones predict for it.");
        return;
    }
    let faint = theme::colour(ui.ctx(), Role::Faint);
    Grid::new(Id::unique(("later tests", &cx.press.tag))).num_columns(5).spacing([22.0, 3.0]).striped(true).show(
        ui,
        |ui| {
            for head in ["test", "condition", "predicted mean (95 %)", "measured mean", ""] {
                ui.label(RichText::new(head).size(12.5).color(faint));
            }
            ui.end_row();
            for later in &known.later {
                let test = &cx.press.stop_tests[later.test];
                ui.label((later.test + 1).to_string());
                ui.label(format!(
                    "{}: {}°, {}, {}",
                    test.at.date,
                    test.condition.angle.digits(),
                    test.condition.speed,
                    test.condition.upper_die
                ));
                ui.label(estimate_words(later.predicted_ms, 1.0, "ms", 1));
                ui.label(format!("{:.1} ms", later.measured_ms));
                let role = if later.is_within() { Role::Ink } else { Role::Unproven };
                ui.label(RichText::new(later.words().replace('-', "\u{2212}")).color(theme::colour(ui.ctx(), role)));
                ui.end_row();
            }
        },
    );
}
