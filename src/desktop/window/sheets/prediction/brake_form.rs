//! The fields of the brake: by two times or by its pressures, and the torque from the brake's parts.

use calc::limits::{self, Limit};
use calc::motion::{BrakeParts, MeanRadius};
use calc::prediction::{BrakeData, PredictionData, PressureData, RampData};
use calc::press::Press;
use calc::stop_test::ClockStart;
use calc::units::{Pressure, Time, Torque};
use egui::CollapsingHeader;

use super::edit;
use crate::window::context::SheetContext;
use crate::window::sheets::form::Form;
use crate::window::widgets::{caption, heading};
use crate::window::wishes::Wishes;

/// The kinds of brake that a form offers.
#[derive(Clone, Copy, PartialEq)]
enum BrakeChoice {
    NotStated,
    Ramp,
    Single,
    TwoStage,
}

const fn brake_words(choice: BrakeChoice) -> &'static str {
    match choice {
        BrakeChoice::NotStated => "not stated",
        BrakeChoice::Ramp => "dead time and rise time",
        BrakeChoice::Single => "pressures, single stage",
        BrakeChoice::TwoStage => "pressures, two stages",
    }
}

/// The parts of a brake, as they are typed.
#[derive(Default)]
pub struct PartsDraft {
    faces: Option<i64>,
    coefficient: Option<i64>,
    force: Option<i64>,
    outer: Option<i64>,
    inner: Option<i64>,
    is_uniform_pressure: bool,
}

/// Draws the fields.
pub fn brake_ui(
    ui: &mut egui::Ui,
    cx: &SheetContext,
    form: &mut Form<'_>,
    parts: &mut PartsDraft,
    wishes: &mut Wishes,
) {
    let press = cx.press;
    let data = press.prediction.clone().unwrap_or_default();
    heading(ui, "Brake");
    let shown = match data.brake {
        BrakeData::NotStated => BrakeChoice::NotStated,
        BrakeData::Ramp(_) => BrakeChoice::Ramp,
        BrakeData::Pressure(PressureData { metered: None, .. }) => BrakeChoice::Single,
        BrakeData::Pressure(_) => BrakeChoice::TwoStage,
    };
    let all = [BrakeChoice::NotStated, BrakeChoice::Ramp, BrakeChoice::Single, BrakeChoice::TwoStage];
    if let Some(choice) = form.choice(ui, "brake", "Known by", (Some(shown), &all), brake_words) {
        edit(wishes, press, "change kind of brake", move |data| data.brake = brake_as(data.brake, choice));
    }
    let starts = (Some(data.clock_start), ClockStart::ALL);
    if let Some(start) = form.choice(ui, "clock-start", "Dead time counts from", starts, ClockStart::words) {
        edit(wishes, press, "change start of the dead time", move |data| data.clock_start = start);
    }
    match data.brake {
        BrakeData::NotStated => {
            caption(
                ui,
                "Choose how the brake is known: from the brake maker's sheet, or with only a rise time for a fit.",
            );
        }
        BrakeData::Ramp(ramp) => ramp_ui(ui, press, form, ramp, wishes),
        BrakeData::Pressure(pressure) => pressure_ui(ui, press, form, pressure, wishes),
    }
    if data.brake != BrakeData::NotStated {
        parts_ui(ui, press, form, parts, wishes);
    }
}

/// The same brake known in another way; what both ways know is kept.
fn brake_as(brake: BrakeData, choice: BrakeChoice) -> BrakeData {
    let (dead_time, torque) = match brake {
        BrakeData::NotStated => (None, None),
        BrakeData::Ramp(ramp) => (ramp.dead_time, ramp.torque),
        BrakeData::Pressure(pressure) => (pressure.dead_time, pressure.torque),
    };
    let pressure = match brake {
        BrakeData::Pressure(pressure) => pressure,
        _ => PressureData { dead_time, torque, ..PressureData::default() },
    };
    match choice {
        BrakeChoice::NotStated => BrakeData::NotStated,
        BrakeChoice::Ramp => BrakeData::Ramp(RampData { dead_time, rise_time: None, torque }),
        BrakeChoice::Single => BrakeData::Pressure(PressureData { metered: None, ..pressure }),
        BrakeChoice::TwoStage => {
            BrakeData::Pressure(PressureData { metered: Some(pressure.metered.unwrap_or_default()), ..pressure })
        }
    }
}

fn change_ramp(data: &mut PredictionData, change: impl FnOnce(&mut RampData)) {
    if let BrakeData::Ramp(ramp) = &mut data.brake {
        change(ramp);
    }
}

fn change_pressure(data: &mut PredictionData, change: impl FnOnce(&mut PressureData)) {
    if let BrakeData::Pressure(pressure) = &mut data.brake {
        change(pressure);
    }
}

fn ramp_ui(ui: &mut egui::Ui, press: &Press, form: &mut Form<'_>, ramp: RampData, wishes: &mut Wishes) {
    let time = |time: Option<Time>| time.map(Time::base);
    if let Some(count) = form.number(ui, "dead", "Dead time", &limits::DEAD_TIME, time(ramp.dead_time)) {
        edit(wishes, press, "change dead time", move |data| {
            change_ramp(data, |ramp| ramp.dead_time = count.map(Time::from_base))
        });
    }
    if let Some(count) = form.number(ui, "rise", "Rise time", &limits::RISE_TIME, time(ramp.rise_time)) {
        edit(wishes, press, "change rise time", move |data| {
            change_ramp(data, |ramp| ramp.rise_time = count.map(Time::from_base))
        });
    }
    let torque = ramp.torque.map(Torque::base);
    if let Some(count) = form.number(ui, "torque", "Brake torque at the crank", &limits::BRAKE_TORQUE, torque) {
        edit(wishes, press, "change brake torque", move |data| {
            change_ramp(data, |ramp| ramp.torque = count.map(Torque::from_base))
        });
    }
    caption(ui, "For a fit the rise time is enough: it finds dead time and torque.");
}

/// One field of a pressure brake: name, label, limit, figure, and where the new figure goes.
type PressureField = (&'static str, &'static str, Limit, Option<i64>, fn(&mut PressureData, Option<i64>));

fn pressure_ui(ui: &mut egui::Ui, press: &Press, form: &mut Form<'_>, pressure: PressureData, wishes: &mut Wishes) {
    let bar = |pressure: Option<Pressure>| pressure.map(Pressure::base);
    let ms = |time: Option<Time>| time.map(Time::base);
    let named = limits::BRAKE_PRESSURE;
    let constant = limits::TIME_CONSTANT;
    let mut fields: Vec<PressureField> = vec![
        ("dead", "Dead time", limits::DEAD_TIME, ms(pressure.dead_time), |data, count| {
            data.dead_time = count.map(Time::from_base);
        }),
        (
            "torque",
            "Brake torque at the crank",
            limits::BRAKE_TORQUE,
            pressure.torque.map(Torque::base),
            |data, count| {
                data.torque = count.map(Torque::from_base);
            },
        ),
        ("engaged", "Pressure engaged", named.named("Pressure engaged"), bar(pressure.engaged), |data, count| {
            (data.engaged, data.is_typical) = (count.map(Pressure::from_base), false);
        }),
        (
            "release",
            "Clutch lets go below",
            named.named("Clutch release pressure"),
            bar(pressure.clutch_release),
            |data, count| {
                (data.clutch_release, data.is_typical) = (count.map(Pressure::from_base), false);
            },
        ),
        ("touch", "Brake contact below", named.named("Contact pressure"), bar(pressure.touch), |data, count| {
            (data.touch, data.is_typical) = (count.map(Pressure::from_base), false);
        }),
        ("fast", "Time constant, normal stop", constant, ms(pressure.fast), |data, count| {
            data.fast = count.map(Time::from_base);
        }),
    ];
    if let Some(metered) = pressure.metered {
        fields.push(("from", "Metered from", named.named("Metered from"), bar(metered.from), |data, count| {
            let metered = data.metered.get_or_insert_default();
            metered.from = count.map(Pressure::from_base);
            data.is_typical = false;
        }));
        fields.push(("to", "Metered to", limits::METERED_TO, bar(metered.to), |data, count| {
            data.metered.get_or_insert_default().to = count.map(Pressure::from_base);
        }));
        fields.push(("slow", "Time constant, metered", constant, ms(metered.slow), |data, count| {
            data.metered.get_or_insert_default().slow = count.map(Time::from_base);
        }));
    }
    fields.push(("dump", "Time constant, emergency", constant, ms(pressure.dump), |data, count| {
        data.dump = count.map(Time::from_base);
    }));
    for (name, label, limit, taken, put) in fields {
        if let Some(count) = form.number(ui, name, label, &limit, taken) {
            edit(wishes, press, "change brake", move |data| change_pressure(data, |pressure| put(pressure, count)));
        }
    }
    if pressure.metered.is_some() && ui.button("Enter typical pressures").clicked() {
        edit(wishes, press, "enter typical pressures", |data| {
            change_pressure(data, |pressure| *pressure = pressure.typical_pressures());
        });
    }
    caption(
        ui,
        if pressure.is_typical {
            "These pressures are common practice of two-stage hydraulic units, without a source; 36 bar for the clutch is a working assumption. \
             Replace them by those of the unit."
        } else {
            "Typical of two-stage hydraulic units, common practice without a source: 60 bar engaged, contact at 24, metered from 12; 36 for the \
             clutch is a working assumption."
        },
    );
}

const FACES: Limit = Limit {
    name: "Friction faces",
    unit: "",
    least: 1_000,
    greatest: 1_000_000,
    why: "Two for every disc that is clamped from both sides.",
};
const COEFFICIENT: Limit = Limit {
    name: "Coefficient of friction",
    unit: "",
    least: 1,
    greatest: 2_000,
    why: "From the lining maker's sheet.",
};
const RADIUS: Limit = Limit { name: "Radius", unit: "mm", least: 1_000, greatest: 10_000_000, why: "Of the lining." };

/// The torque from the parts of the brake: T = n µ F R.
fn parts_ui(ui: &mut egui::Ui, press: &Press, form: &mut Form<'_>, parts: &mut PartsDraft, wishes: &mut Wishes) {
    CollapsingHeader::new("Brake torque from its parts").id_salt("brake parts").show(ui, |ui| {
        for (name, label, limit, count) in [
            ("faces", "Friction faces", FACES, &mut parts.faces),
            ("coefficient", "Coefficient of friction", COEFFICIENT, &mut parts.coefficient),
            ("axial", "Axial spring force", limits::SPRING_FORCE, &mut parts.force),
            ("outer", "Outer radius of the lining", RADIUS.named("Outer radius"), &mut parts.outer),
            ("inner", "Inner radius of the lining", RADIUS.named("Inner radius"), &mut parts.inner),
        ] {
            if let Some(new) = form.number(ui, name, label, &limit, *count) {
                *count = new;
            }
        }
        let picks = (Some(parts.is_uniform_pressure), &[false, true][..]);
        let words = |is_pressure| if is_pressure { "uniform pressure" } else { "uniform wear" };
        if let Some(is_pressure) = form.pick(ui, "spread", "Mean radius by", picks, words) {
            parts.is_uniform_pressure = is_pressure;
        }
        let Some(given) = given(parts) else {
            caption(ui, "Enter all five; the torque is then n µ F R.");
            return;
        };
        match given.full_torque_nm() {
            Err(refusal) => {
                caption(ui, refusal.to_string());
            }
            Ok(torque_nm) => {
                let words = format!("Take {torque_nm:.1} N m as brake torque");
                if ui.button(words).clicked() {
                    let torque = Some(Torque::from_base((torque_nm * 1e3).round() as i64));
                    edit(wishes, press, "take brake torque from parts", move |data| match &mut data.brake {
                        BrakeData::Ramp(ramp) => ramp.torque = torque,
                        BrakeData::Pressure(pressure) => pressure.torque = torque,
                        BrakeData::NotStated => {}
                    });
                }
            }
        }
    });
}

fn given(parts: &PartsDraft) -> Option<BrakeParts> {
    let of = |count: Option<i64>| count.map(|count| count as f64 / 1e3);
    let faces = parts.faces.filter(|count| count % 1000 == 0)?;
    Some(BrakeParts {
        friction_faces: u32::try_from(faces / 1000).ok()?,
        friction_coefficient: of(parts.coefficient)?,
        axial_force_n: of(parts.force)?,
        outer_radius_m: of(parts.outer)? / 1e3,
        inner_radius_m: of(parts.inner)? / 1e3,
        mean_radius: if parts.is_uniform_pressure { MeanRadius::UniformPressure } else { MeanRadius::UniformWear },
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use calc::prediction::Metered;

    #[test]
    fn another_way_to_know_the_brake_keeps_what_both_ways_know() {
        let dead_time = Some(Time::ms(30));
        let torque = Some(Torque::from_base(7_800_000));
        let ramp = BrakeData::Ramp(RampData { dead_time, rise_time: Some(Time::ms(50)), torque });
        let two = brake_as(ramp, BrakeChoice::TwoStage);
        let BrakeData::Pressure(pressure) = two else { panic!("{two:?}") };
        assert_eq!(
            (pressure.dead_time, pressure.torque, pressure.metered),
            (dead_time, torque, Some(Metered::default()))
        );
        let BrakeData::Ramp(back) = brake_as(two, BrakeChoice::Ramp) else { panic!() };
        assert_eq!((back.dead_time, back.rise_time, back.torque), (dead_time, None, torque));
    }
}
