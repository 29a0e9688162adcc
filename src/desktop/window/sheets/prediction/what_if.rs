//! What a change would do to the predicted stop: die, speed, pressures, wear and heat, the valve needle; and the distance that it would need.

use calc::limits::{self, Limit};
use calc::motion::{
    Brake, BrakeCondition, Change, Counterbalance, Exhaust, PressureBrakeData, Stop, StopSetup, Tolerance, WhatIf,
    rad_s_from_per_min, what_if,
};
use calc::prediction::Margin;
use egui::{Grid, Id, RichText, Ui, vec2};
use figure::Role;

use super::distances::{distances_ui, steps_ui};
use super::state::{Known, PredictedStop, Wanted, distances};
use super::unproven_ui;
use crate::window::context::SheetContext;
use crate::window::sheets::form::Form;
use crate::window::theme;
use crate::window::widgets::{caption, heading};

/// The changes as they are typed, in thousandths; `None` is no change.
#[derive(Default)]
pub struct WhatIfDraft {
    die: Option<i64>,
    speed: Option<i64>,
    operating: Option<i64>,
    counterbalance: Option<i64>,
    needle: Option<i64>,
    fade: Option<i64>,
    worn: Option<i64>,
    spring_force: Option<i64>,
    spring_rate: Option<i64>,
    extra_delay: Option<i64>,
}

/// Shows fields and outcome.
pub fn what_if_ui(
    ui: &mut Ui,
    cx: &SheetContext,
    form: &mut Form<'_>,
    stop: &PredictedStop,
    known: &Known,
    wanted: &Wanted,
    draft: &mut WhatIfDraft,
) {
    let setup = &stop.setup;
    ui.horizontal_top(|ui| {
        ui.spacing_mut().item_spacing = vec2(30.0, 0.0);
        ui.vertical(|ui| {
            ui.set_width(400.0);
            ui.spacing_mut().item_spacing = vec2(8.0, 1.0);
            fields_ui(ui, form, setup, draft);
        });
        ui.vertical(|ui| {
            ui.spacing_mut().item_spacing = vec2(8.0, 4.0);
            outcome_ui(ui, cx, stop, known, wanted, draft);
        });
    });
}

fn fields_ui(ui: &mut Ui, form: &mut Form<'_>, setup: &StopSetup, draft: &mut WhatIfDraft) {
    heading(ui, "Change to");
    let mut put = |ui: &mut Ui, name: &str, label: &str, limit: Limit, count: &mut Option<i64>| {
        if let Some(new) = form.number(ui, name, label, &limit, *count) {
            *count = new;
        }
    };
    put(ui, "if-die", "Upper die", limits::DIE_MASS, &mut draft.die);
    put(ui, "if-speed", "Speed", limits::SPEED, &mut draft.speed);
    if let Counterbalance::Cylinders { .. } = setup.drive.data().counterbalance {
        put(ui, "if-counterbalance", "Counterbalance pressure", limits::COUNTERBALANCE, &mut draft.counterbalance);
    } else {
        draft.counterbalance = None;
    }
    match &setup.brake {
        Brake::Pressure(brake) => {
            put(ui, "if-operating", "Operating pressure", limits::BRAKE_PRESSURE, &mut draft.operating);
            if let PressureBrakeData { exhaust: Exhaust::TwoStage { .. }, .. } = brake.data() {
                put(ui, "if-needle", "Needle: metered constant", limits::TIME_CONSTANT, &mut draft.needle);
            } else {
                draft.needle = None;
            }
        }
        Brake::Ramp(_) => (draft.operating, draft.needle) = (None, None),
    }
    put(ui, "if-fade", "Friction lost, heat or oil", limits::FADE, &mut draft.fade);
    put(ui, "if-worn", "Lining worn by", limits::WORN_DEPTH, &mut draft.worn);
    put(ui, "if-force", "Spring force, new lining", limits::SPRING_FORCE, &mut draft.spring_force);
    put(ui, "if-rate", "Spring rate", limits::SPRING_RATE, &mut draft.spring_rate);
    put(ui, "if-delay", "Extra delay by wear", limits::DEAD_TIME.named("Extra delay"), &mut draft.extra_delay);
    ui.add_space(4.0);
    if ui.button("Take all changes back").clicked() {
        *draft = WhatIfDraft::default();
    }
}

/// The changes as the stop model takes them.
fn changes(draft: &WhatIfDraft) -> Result<Vec<Change>, String> {
    let of = |count: i64| count as f64 / 1e3;
    let mut changes = Vec::new();
    if let Some(mass) = draft.die {
        changes.push(Change::UpperDieMass { mass_kg: of(mass) });
    }
    if let Some(speed) = draft.speed {
        changes.push(Change::Speed { speed_rad_s: rad_s_from_per_min(of(speed)) });
    }
    if let Some(pressure) = draft.operating {
        changes.push(Change::OperatingPressure { pressure_pa: of(pressure) * 1e5 });
    }
    if let Some(pressure) = draft.counterbalance {
        changes.push(Change::CounterbalancePressure { pressure_pa: of(pressure) * 1e5 });
    }
    if let Some(constant) = draft.needle {
        changes.push(Change::MeteredTimeConstant { time_constant_s: of(constant) / 1e3 });
    }
    let (fade, worn, delay) = (draft.fade.unwrap_or(0), draft.worn.unwrap_or(0), draft.extra_delay.unwrap_or(0));
    if (fade, worn, delay) != (0, 0, 0) {
        let (spring_force_n, spring_rate_n_m) = match (worn, draft.spring_force, draft.spring_rate) {
            // Without wear the springs keep their force, however great it is.
            (0, ..) => (1.0, 0.0),
            (_, Some(force), Some(rate)) => (of(force), of(rate) * 1e3),
            _ => return Err("A worn lining slackens the springs. Enter spring force and spring rate as well.".into()),
        };
        changes.push(Change::Condition(BrakeCondition {
            fade: of(fade) / 100.0,
            spring_force_n,
            spring_rate_n_m,
            worn_depth_m: of(worn) / 1e3,
            extra_delay_s: of(delay) / 1e3,
        }));
    }
    Ok(changes)
}

fn outcome_ui(
    ui: &mut Ui,
    cx: &SheetContext,
    stop: &PredictedStop,
    known: &Known,
    wanted: &Wanted,
    draft: &WhatIfDraft,
) {
    heading(ui, "What it would do");
    let found = changes(draft)
        .and_then(|changes| what_if(&stop.setup, &changes, Tolerance::STANDARD).map_err(|refusal| refusal.to_string()));
    let found = match found {
        Ok(found) => found,
        Err(why) => {
            unproven_ui(ui, &format!("No stop is predicted. {why}"));
            return;
        }
    };
    table_ui(ui, cx, &found);
    let (ms, margin) = forward_ms(cx, stop, known, wanted, draft, &found);
    caption(ui, format!("Taken forward: {ms:.1} ms, {}.", margin.words()));
    let after = distances(cx.press, &cx.document.settings, wanted.path, ms, margin);
    distances_ui(ui, cx, &after);
    steps_ui(ui, cx, &after, "what if");
}

/// The time taken forward: from the fit where it was fitted; the margin of the fit is carried over to a changed brake.
fn forward_ms(
    cx: &SheetContext,
    stop: &PredictedStop,
    known: &Known,
    wanted: &Wanted,
    draft: &WhatIfDraft,
    found: &WhatIf,
) -> (f64, Margin) {
    let after_ms = found.after.stop_time_s * 1e3;
    let (Some(_), Ok(fit), Ok(mut at)) = (stop.interval, &known.fit, wanted.at()) else {
        return (after_ms, Margin::None);
    };
    at.upper_die = draft.die.map_or(at.upper_die, calc::units::Mass::from_base);
    at.speed = draft.speed.map_or(at.speed, calc::units::Rate::from_base);
    at.counterbalance = draft.counterbalance.map(calc::units::Pressure::from_base);
    match fit.predict(cx.press, &at, 1) {
        Ok(predicted) => {
            let margin = predicted.stop_time_s.high - predicted.stop_time_s.value;
            let of_brake = [draft.operating, draft.needle, draft.fade, draft.worn, draft.extra_delay];
            let is_changed = of_brake.iter().any(Option::is_some);
            (after_ms + margin * 1e3, if is_changed { Margin::CarriedOver } else { Margin::Interval })
        }
        Err(_) => (after_ms, Margin::None),
    }
}

fn table_ui(ui: &mut Ui, cx: &SheetContext, found: &WhatIf) {
    let faint = theme::colour(ui.ctx(), Role::Faint);
    type Figure = (&'static str, &'static str, fn(&Stop) -> f64);
    let figures: [Figure; 6] = [
        ("stopping time", "ms", |stop| stop.stop_time_s * 1e3),
        ("of it before the brake acts", "ms", |stop| (stop.spans.delay_s + stop.spans.clutch_release_s) * 1e3),
        ("stopping angle", "°", |stop| stop.stop_angle_rad.to_degrees()),
        ("slide travel", "mm", |stop| stop.slide_travel_m * 1e3),
        ("heat in the brake", "J", |stop| stop.brake_heat_j),
        ("holding torque spare", "N m", |stop| stop.holding_torque_nm - stop.load_torque_nm.abs()),
    ];
    Grid::new(Id::unique(("what if", &cx.press.tag))).num_columns(4).spacing([22.0, 3.0]).striped(true).show(
        ui,
        |ui| {
            for head in ["", "now", "then", "change"] {
                ui.label(RichText::new(head).size(12.5).color(faint));
            }
            ui.end_row();
            for (name, unit, of) in figures {
                let (before, after) = (of(&found.before), of(&found.after));
                let text = |value: f64| format!("{value:.1} {unit}").replace('-', "\u{2212}");
                ui.label(name);
                ui.label(text(before));
                ui.label(RichText::new(text(after)).font(theme::strong(14.0)));
                ui.label(format!("{:+.1} {unit}", after - before).replace('-', "\u{2212}"));
                ui.end_row();
            }
        },
    );
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn wear_needs_the_springs_and_no_change_is_none() {
        assert_eq!(changes(&WhatIfDraft::default()), Ok(Vec::new()));
        let worn = WhatIfDraft { worn: Some(2_000), ..WhatIfDraft::default() };
        assert!(changes(&worn).unwrap_err().contains("spring force"));
        let whole = WhatIfDraft { spring_force: Some(20_000_000), spring_rate: Some(500_000), ..worn };
        let found = changes(&whole).unwrap();
        let Change::Condition(condition) = found[0] else { panic!("{found:?}") };
        // F = 20000 N - 500 N/mm x 2 mm = 19000 N: 95 % of the torque is left.
        assert!((condition.torque_factor().unwrap() - 0.95).abs() < 1e-12);
    }
}
