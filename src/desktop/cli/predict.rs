//! `slidehalt predict`, `map` and `fit`: stops predicted from drive data. A prediction is never a measurement.

mod distances;
mod fit;
mod fit_of_press;
mod map;
mod read;

use calc::motion::{StopCommand, Tolerance, rad_from_deg, rad_s_from_per_min, stop};
use serde_json::json;

pub use fit::fit;
pub use map::map;

use super::Outcome;
use super::args::PredictArgs;
use super::outcome::columns;
use distances::Distances;
use read::{Reader, drive, law, press};

/// What is said below every figure here.
pub(super) const CAUTION: &str =
    "A prediction, not a measurement: whatever rests on it is Unproven until the stop has been timed.";

/// One stop.
pub fn predict(args: &PredictArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let mut reader = Reader::default();
    let opened = press(&args.drive, &mut reader);
    let of_press = opened.as_ref().map(|opened| &opened.1);
    let drive = drive(&args.drive, of_press, &mut reader);
    let law = law(&args.drive, of_press, &mut reader);
    let speed = reader.needed(args.speed.as_ref(), "Speed", "--speed");
    let angle = reader.needed(args.angle.as_ref(), "Crank angle", "--angle");
    let command = match (speed, angle) {
        (Some(speed), Some(angle)) => reader.take(StopCommand::new(rad_from_deg(angle), rad_s_from_per_min(speed))),
        _ => None,
    };
    let found = match (&drive, law, command) {
        (Some(drive), Some(law), Some(command)) => reader.take(stop(drive, &law, command, Tolerance::STANDARD)),
        _ => None,
    };
    let Some(found) = found.filter(|_| reader.refusals.is_empty()) else {
        reader.refusals.iter().for_each(|refusal| outcome.refuse(refusal));
        return outcome;
    };
    let distances = match (&opened, &drive, command) {
        (Some(opened), Some(drive), Some(command)) => {
            Distances::of(&args.drive, opened, drive, command, found.stop_time_s)
        }
        _ => Distances::default(),
    };
    let (time_ms, angle_deg, travel_mm) =
        (found.stop_time_s * 1e3, found.stop_angle_rad.to_degrees(), found.slide_travel_m * 1e3);
    if args.json {
        let value = json!({
            "stop_time_ms": time_ms,
            "stop_angle_deg": angle_deg,
            "slide_travel_mm": travel_mm,
            "stop_time_error_ms": found.stop_time_error_s * 1e3,
            "delay_ms": found.spans.delay_s * 1e3,
            "clutch_release_ms": found.spans.clutch_release_s * 1e3,
            "build_up_ms": found.spans.build_up_s * 1e3,
            "braking_ms": found.spans.braking_s * 1e3,
            "brake_heat_j": found.brake_heat_j,
            "holding_torque_nm": found.holding_torque_nm,
            "load_torque_nm": found.load_torque_nm,
            "answer": "unproven",
            "from_stop_tests": distances.fitted_json(),
            "safeguards": distances.guards_json(),
        });
        outcome.line(serde_json::to_string_pretty(&value).unwrap_or_default());
        return outcome;
    }
    let ms = |seconds: f64| format!("{:.3} ms", seconds * 1e3);
    let rows = [
        ["stopping time".to_owned(), ms(found.stop_time_s)],
        ["of it delay".into(), ms(found.spans.delay_s)],
        ["of it until the clutch lets go".into(), ms(found.spans.clutch_release_s)],
        ["of it until the brake has built up".into(), ms(found.spans.build_up_s)],
        ["of it braking".into(), ms(found.spans.braking_s)],
        ["stopping angle".into(), format!("{angle_deg:.3}°")],
        ["slide travel".into(), format!("{travel_mm:.3} mm")],
        ["heat in the brake".into(), format!("{:.1} J", found.brake_heat_j)],
        [
            "holds at standstill".into(),
            format!("{:.0} N m against {:.0} N m", found.holding_torque_nm, found.load_torque_nm),
        ],
    ];
    for line in columns(&rows.map(|row| row.to_vec())) {
        outcome.line(line);
    }
    distances.tell(&mut outcome);
    outcome.line(CAUTION);
    outcome
}

#[cfg(test)]
mod tests;
