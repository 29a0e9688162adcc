//! `slidehalt fit`: delay and brake torque that explain the measured stops of a press.

use calc::in_force::tests_in_force;
use calc::motion::{
    BuildUp, FitCondition, FitRequest, StopCommand, Unknowns, fit_stops, rad_from_deg, rad_s_from_per_min,
};
use calc::stop_test::{StopPath, Valves};
use calc::value_taken::summary_ms;
use serde_json::json;

use super::super::Outcome;
use super::super::args::{FitArgs, PathArg};
use super::super::outcome::columns;
use super::CAUTION;
use super::fit_of_press;
use super::read::{Reader, drive_with, is_all_of_press, known, press};

pub fn fit(args: &FitArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let mut reader = Reader::default();
    let press = press(&args.drive, &mut reader).map(|opened| opened.1);
    if let Some(press) = press
        .as_ref()
        .filter(|press| is_all_of_press(&args.drive) && args.rise_ms.is_none() && known(Some(press)).is_some())
    {
        return fit_of_press::fit_of_press(press, args);
    }
    let slide = reader.needed(args.drive.moving_kg.as_ref(), "Mass of the slide without die", "--moving-kg");
    let rise = reader.needed(args.rise_ms.as_ref(), "Rise of the brake torque", "--rise-ms");
    let mut conditions = Vec::new();
    let mut names = Vec::new();
    if let Some(press) = &press {
        let path = match args.drive.path {
            PathArg::Normal => StopPath::Normal,
            PathArg::Emergency => StopPath::Emergency,
        };
        for test in tests_in_force(press, path).into_iter().map(|index| &press.stop_tests[index]) {
            let condition = &test.condition;
            let Some((summary, deviation)) =
                summary_ms(&test.stops).and_then(|summary| Some((summary, summary.standard_deviation()?)))
            else {
                continue;
            };
            if condition.valves != Valves::Both {
                continue;
            }
            let die = Some(condition.upper_die.to_f64());
            let drive = drive_with(&args.drive, Some(press), (slide, die), &mut reader);
            let angle = rad_from_deg(condition.angle.to_f64());
            let command = reader.take(StopCommand::new(angle, rad_s_from_per_min(condition.speed.to_f64())));
            let (Some(drive), Some(command)) = (drive, command) else { break };
            names.push(condition.words());
            conditions.push(FitCondition {
                drive,
                command,
                mean_stop_time_s: summary.mean() * 1e-3,
                standard_deviation_s: deviation * 1e-3,
                stops: u32::try_from(test.stops.len()).unwrap_or(u32::MAX),
            });
        }
    } else if args.drive.press.is_none() {
        reader.refusals.push("No press file is given, whose stops the fit is to explain.".into());
    }
    let fitted = match rise {
        Some(rise) if reader.refusals.is_empty() => {
            let unknowns = if args.friction { Unknowns::DelayTorqueAndFriction } else { Unknowns::DelayAndTorque };
            reader.take(fit_stops(&FitRequest {
                conditions,
                build_up: BuildUp::Ramp { rise_time_s: rise * 1e-3 },
                unknowns,
            }))
        }
        _ => None,
    };
    let Some(fitted) = fitted else {
        reader.refusals.iter().for_each(|refusal| outcome.refuse(refusal));
        return outcome;
    };
    let delay = fitted.dead_time_s;
    let torque = fitted.full_torque_nm;
    if args.json {
        let value = json!({
            "delay_ms": delay.value * 1e3,
            "delay_interval_ms": [delay.low * 1e3, delay.high * 1e3],
            "torque_nm": torque.value,
            "torque_interval_nm": [torque.low, torque.high],
            "friction_nm": fitted.friction_torque_nm.map(|friction| friction.value),
            "chi_squared": fitted.chi_squared,
            "lack_of_fit": fitted.lack_of_fit,
            "conditions": names.iter().zip(&fitted.conditions).map(|(name, condition)| json!({
                "condition": name,
                "fitted_ms": condition.fitted_stop_time_s * 1e3,
                "residual_ms": condition.residual_s * 1e3,
            })).collect::<Vec<_>>(),
        });
        outcome.line(serde_json::to_string_pretty(&value).unwrap_or_default());
        return outcome;
    }
    outcome.line(format!(
        "Delay {:.2} ms, 95 % between {:.2} and {:.2} ms",
        delay.value * 1e3,
        delay.low * 1e3,
        delay.high * 1e3
    ));
    outcome.line(format!(
        "Brake torque {:.0} N m, 95 % between {:.0} and {:.0} N m",
        torque.value, torque.low, torque.high
    ));
    if let Some(friction) = fitted.friction_torque_nm {
        outcome.line(format!(
            "Running friction {:.0} N m, 95 % between {:.0} and {:.0} N m",
            friction.value, friction.low, friction.high
        ));
    }
    if fitted.lack_of_fit {
        outcome
            .line("The residuals are greater than the scatter of the stops explains: the model misses something here.");
    }
    let mut rows = vec![["condition", "fitted ms", "measured less fitted ms"].map(str::to_owned).to_vec()];
    for (name, condition) in names.iter().zip(&fitted.conditions) {
        rows.push(vec![
            name.clone(),
            format!("{:.2}", condition.fitted_stop_time_s * 1e3),
            format!("{:+.2}", condition.residual_s * 1e3),
        ]);
    }
    columns(&rows).iter().for_each(|line| outcome.line(line));
    outcome.line(CAUTION);
    outcome
}
