//! `slidehalt predict`: the stop that drive and brake predict, and with a press what its safeguards would then need.

pub mod read;

use calc::motion::{Stop, StopCommand, StopPrediction, Tolerance, Unknowns, rad_from_deg, rad_s_from_per_min, stop};
use calc::prediction::{Predicted, PredictedDistance, distance_from_prediction, fit_path};
use calc::stop_test::{self, ClockStart};
use calc::units::LengthUnit;
use serde_json::{Value, json};

use super::motion_args::PredictArgs;
use super::outcome::columns;
use super::{Outcome, json};
use read::Motion;

/// What is said under every predicted figure.
pub const CAUTION: &str = "A prediction, not a measurement: every safeguard stays Unproven until the stops are timed.";

pub fn predict(args: &PredictArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let motion = match read::read(&args.motion) {
        Ok(motion) => motion,
        Err(refusals) => {
            for refusal in refusals {
                outcome.refuse(refusal);
            }
            return outcome;
        }
    };
    let found = command(args).and_then(|command| {
        let law = motion.brake.torque_law(motion.path);
        let stop = stop(&motion.drive, &law, command, Tolerance::STANDARD).map_err(|refusal| refusal.to_string())?;
        Ok((command, stop))
    });
    match found {
        Ok((command, stop)) => {
            let fitted = from_fit(&motion, command);
            let guards = safeguards(&motion, &stop, fitted.as_ref());
            if args.json {
                tell_json(&motion, &stop, fitted.as_ref(), &guards, &mut outcome);
            } else {
                tell(&stop, fitted.as_ref(), &guards, &mut outcome);
            }
        }
        Err(refusal) => outcome.refuse(refusal),
    }
    outcome
}

fn command(args: &PredictArgs) -> Result<StopCommand, String> {
    let given = |text: &Option<String>| text.clone().unwrap_or_default();
    let speed = read::number("Speed", &given(&args.speed))?;
    let angle = read::number("Crank angle", &given(&args.angle))?;
    StopCommand::new(rad_from_deg(angle), rad_s_from_per_min(speed)).map_err(|refusal| refusal.to_string())
}

/// The prediction of the press's own stop tests, where they speak of this very drive and brake.
fn from_fit(motion: &Motion, command: StopCommand) -> Option<StopPrediction> {
    let (_, press) = motion.press.as_ref().filter(|_| motion.is_all_of_press)?;
    let fit = fit_path(press, entered_path(motion), Unknowns::DelayAndTorque).ok()?;
    fit.fitted.predict(&motion.drive, command, 1).ok()
}

fn entered_path(motion: &Motion) -> stop_test::StopPath {
    match motion.path {
        calc::motion::StopPath::Normal => stop_test::StopPath::Normal,
        calc::motion::StopPath::Emergency => stop_test::StopPath::Emergency,
    }
}

/// What each safeguard of the press that calls for this stop would need.
fn safeguards(motion: &Motion, stop: &Stop, fitted: Option<&StopPrediction>) -> Vec<(String, PredictedDistance)> {
    let Some((plant, press)) = &motion.press else { return Vec::new() };
    let predicted = Predicted {
        ms: 1e3 * fitted.map_or(stop.stop_time_s, |fitted| fitted.stop_time_s.high),
        is_upper_end: fitted.is_some(),
        clock_start: press.prediction.as_ref().map_or(ClockStart::ValveCurrent, |data| data.clock_start),
    };
    press
        .safeguards
        .iter()
        .filter(|safeguard| safeguard.stop_path == entered_path(motion))
        .filter_map(|safeguard| {
            let found = distance_from_prediction(press, safeguard, plant.rules, predicted).ok()?;
            Some((safeguard.name.clone(), found))
        })
        .collect()
}

fn tell_json(
    motion: &Motion,
    stop: &Stop,
    fitted: Option<&StopPrediction>,
    guards: &[(String, PredictedDistance)],
    outcome: &mut Outcome,
) {
    let guards: Vec<Value> = guards
        .iter()
        .map(|(name, found)| {
            json!({
                "safeguard": name,
                "answer": found.answer().key(),
                "required_um": json::um(found.outcome.as_ref().ok().map(|demand| demand.required)),
                "spare_um": json::um(found.spare()),
                "words": found.words(LengthUnit::Millimetre),
                "missing": found.missing,
                "steps": json::steps(&found.steps, LengthUnit::Millimetre),
            })
        })
        .collect();
    let value = json!({
        "stop_time_ms": stop.stop_time_s * 1e3,
        "stop_angle_deg": stop.stop_angle_rad.to_degrees(),
        "slide_travel_mm": stop.slide_travel_m * 1e3,
        "stop_time_error_ms": stop.stop_time_error_s * 1e3,
        "delay_ms": stop.spans.delay_s * 1e3,
        "clutch_release_ms": stop.spans.clutch_release_s * 1e3,
        "build_up_ms": stop.spans.build_up_s * 1e3,
        "braking_ms": stop.spans.braking_s * 1e3,
        "brake_heat_j": stop.brake_heat_j,
        "holding_torque_nm": stop.holding_torque_nm,
        "load_torque_nm": stop.load_torque_nm,
        "answer": "unproven",
        "press": motion.press.as_ref().map(|opened| opened.1.tag.clone()),
        "fitted": fitted.map(|fitted| json!({
            "stop_time_ms": fitted.stop_time_s.value * 1e3,
            "low_ms": fitted.stop_time_s.low * 1e3,
            "high_ms": fitted.stop_time_s.high * 1e3,
            "stop_angle_deg": fitted.stop.stop_angle_rad.to_degrees(),
            "slide_travel_mm": fitted.stop.slide_travel_m * 1e3,
        })),
        "safeguards": guards,
        "caution": CAUTION,
    });
    outcome.line(serde_json::to_string_pretty(&value).unwrap_or_default());
}

fn tell(stop: &Stop, fitted: Option<&StopPrediction>, guards: &[(String, PredictedDistance)], outcome: &mut Outcome) {
    let ms = |time_s: f64| format!("{:.3} ms", time_s * 1e3);
    let spans = stop.spans;
    let mut rows = vec![
        vec!["stopping time".to_owned(), format!("{:.4} ms", stop.stop_time_s * 1e3)],
        vec!["stopping angle".into(), format!("{:.4}°", stop.stop_angle_rad.to_degrees())],
        vec!["slide travel".into(), format!("{:.4} mm", stop.slide_travel_m * 1e3)],
        vec!["delay".into(), ms(spans.delay_s)],
        vec!["clutch release".into(), ms(spans.clutch_release_s)],
        vec!["build-up".into(), ms(spans.build_up_s)],
        vec!["braking".into(), ms(spans.braking_s)],
        vec!["heat in the brake".into(), format!("{:.1} J a stop", stop.brake_heat_j)],
        vec![
            "at standstill".into(),
            format!("brake {:.0} N m, weight {:.0} N m: it holds", stop.holding_torque_nm, stop.load_torque_nm.abs()),
        ],
    ];
    if let Some(fitted) = fitted {
        let time = fitted.stop_time_s;
        rows.push(vec![
            "from the stop tests".into(),
            format!(
                "{:.3} ms, 95 % of stops from {:.3} to {:.3} ms",
                time.value * 1e3,
                time.low * 1e3,
                time.high * 1e3
            ),
        ]);
    }
    for line in columns(&rows) {
        outcome.line(line);
    }
    for (name, found) in guards {
        outcome.line(format!("{name}: {}", found.words(LengthUnit::Millimetre)));
        for missing in &found.missing {
            outcome.line(format!("  {missing}"));
        }
    }
    outcome.line(CAUTION);
}

#[cfg(test)]
mod tests;
