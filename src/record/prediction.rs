//! The prediction of a press that has drive and brake data, marked as a prediction on every line that could be taken for a measurement.

use calc::motion::{Estimate, Tolerance, Unknowns};
use calc::prediction::{
    At, BrakeData, Lift, Margin, PathFit, Predicted, PredictionData, compare_later_tests, distance_from_prediction,
    fit_path, setup_of, worst_of_closing_half,
};
use calc::press::Press;
use calc::stop_test::{ClockStart, StopPath};
use calc::units::{Angle, Pressure, Time};
use calc::verdict::Answer;

use crate::flow::{Flow, number, words};
use crate::press_record::RecordInput;

/// Drive, brake, fit, the longest predicted stop of each path in use, and later tests; nothing for a press without such data.
pub fn prediction(flow: &mut Flow, input: &RecordInput) {
    let Some(data) = &input.press.prediction else { return };
    flow.heading("Prediction, not measured");
    flow.paragraph(
        "What follows is calculated, not timed. It makes no safeguard hold: every distance below stays Unproven until the stops are timed.",
    );
    flow.pairs(&figures(data));
    if let BrakeData::Pressure(pressure) = data.brake
        && pressure.is_typical
    {
        flow.small(
            "The pressures are common practice of two-stage hydraulic units, without a source; that of the clutch is a working assumption.",
        );
    }
    for path in StopPath::ALL {
        let is_called =
            |safeguard: &calc::safeguard::Safeguard| safeguard.stop_path == *path && safeguard.kind.needs_stop();
        if input.press.safeguards.iter().any(is_called) {
            of_path(flow, input, *path);
        }
    }
}

fn figures(data: &PredictionData) -> Vec<(&'static str, String)> {
    fn stated<T: ToString>(value: Option<T>) -> String {
        value.map_or("not stated".into(), |value| value.to_string())
    }
    let time = |time: Option<Time>| stated(time);
    let bar = |pressure: Option<Pressure>| stated(pressure);
    let mut pairs = vec![
        ("slide mass, no die", stated(data.slide_mass)),
        ("inertia at the crank", stated(data.inertia)),
        ("running friction", stated(data.friction)),
        (
            "counterbalance",
            match data.counterbalance {
                Lift::NotStated => "not stated".into(),
                Lift::None => "none".into(),
                Lift::Force(force) => stated(force),
                Lift::Cylinders { pressure, area } => format!("{} on {}", stated(pressure), stated(area)),
            },
        ),
        ("delay counts from", data.clock_start.words().into()),
    ];
    match data.brake {
        BrakeData::NotStated => pairs.push(("brake", "not stated".into())),
        BrakeData::Ramp(ramp) => pairs.extend([
            ("dead time", time(ramp.dead_time)),
            ("rise time", time(ramp.rise_time)),
            ("brake torque", stated(ramp.torque)),
        ]),
        BrakeData::Pressure(pressure) => {
            pairs.extend([
                ("dead time", time(pressure.dead_time)),
                ("brake torque", stated(pressure.torque)),
                ("pressure engaged", bar(pressure.engaged)),
                ("clutch release", bar(pressure.clutch_release)),
                ("brake contact", bar(pressure.touch)),
                ("constant, normal", time(pressure.fast)),
                ("constant, emergency", time(pressure.dump)),
            ]);
            if let Some(metered) = pressure.metered {
                pairs.extend([
                    ("metered", format!("{} to {}", bar(metered.from), bar(metered.to))),
                    ("constant, metered", time(metered.slow)),
                ]);
            }
        }
    }
    pairs
}

fn of_path(flow: &mut Flow, input: &RecordInput, path: StopPath) {
    let press = input.press;
    flow.subheading(&format!("Predicted {}", path.words()));
    let fit = fit_path(press, path, Unknowns::DelayAndTorque);
    match &fit {
        Ok(fit) => flow.paragraph(&fit_words(fit)),
        Err(declined) => flow.paragraph(&format!("Not fitted to stop tests. {declined}")),
    }
    match longest(press, path, fit.as_ref().ok()) {
        Ok((at, stop_words, predicted)) => {
            flow.paragraph(&format!("Longest stop of the closing half at {}: {stop_words}", at.words()));
            for safeguard in press.safeguards.iter().filter(|safeguard| safeguard.stop_path == path) {
                let Ok(found) = distance_from_prediction(press, safeguard, input.rules, predicted) else { continue };
                flow.answer(Answer::Unproven.into(), &format!("{}   {}", safeguard.name, found.words(input.unit)));
                for missing in &found.missing {
                    flow.small(missing);
                }
            }
        }
        Err(why) => flow.paragraph(&format!("No stop is predicted. {why}")),
    }
    later(flow, press, path);
}

fn interval(of: Estimate, scale: f64, unit: &str, digits: usize) -> String {
    format!(
        "{:.digits$} {unit} (95 % interval {:.digits$} to {:.digits$})",
        of.value * scale,
        of.low * scale,
        of.high * scale
    )
}

fn fit_words(fit: &PathFit) -> String {
    let tests: Vec<String> = fit.used.iter().map(|index| (index + 1).to_string()).collect();
    let lack = if fit.fitted.lack_of_fit {
        " The residuals are greater than the scatter of the stops: the model misses something."
    } else {
        ""
    };
    format!(
        "Fitted to the stop tests {}: delay {}, brake torque {}.{lack}",
        tests.join(", "),
        interval(fit.fitted.dead_time_s, 1e3, "ms", 1),
        interval(fit.fitted.full_torque_nm, 1.0, "N m", 0)
    )
}

/// The longest stop of the closing half at the fastest speed with the heaviest die in use.
fn longest(press: &Press, path: StopPath, fit: Option<&PathFit>) -> Result<(At, String, Predicted), String> {
    let (Some(speed), Some(upper_die)) = (press.fastest_speed, press.heaviest_die) else {
        return Err("The fastest speed and the heaviest upper die must be stated.".into());
    };
    let at = At { angle: Angle::deg(90), speed, upper_die, counterbalance: None, path };
    let words = |refusal: calc::prediction::PredictionRefusal| refusal.to_string();
    let setup = fit.map_or_else(|| setup_of(press, &at), |fit| fit.setup(press, &at)).map_err(words)?;
    let (worst, _) = worst_of_closing_half(&setup).map_err(words)?;
    let degrees = worst.command.start_angle_rad().to_degrees().round() as i64;
    let at = At { angle: Angle::deg(degrees), ..at };
    let stop = worst.stop(Tolerance::STANDARD).map_err(|refusal| refusal.to_string())?;
    let way =
        format!("{:.1}° and {:.1} mm to standstill.", stop.stop_angle_rad.to_degrees(), stop.slide_travel_m * 1e3);
    let clock_start = press.prediction.as_ref().map_or(ClockStart::ValveCurrent, |data| data.clock_start);
    match fit {
        Some(fit) => {
            let time = fit.predict(press, &at, 1).map_err(words)?.stop_time_s;
            let predicted = Predicted { ms: time.high * 1e3, margin: Margin::Interval, clock_start };
            Ok((at, format!("{}; {way}", interval(time, 1e3, "ms", 1)), predicted))
        }
        None => {
            let ms = stop.stop_time_s * 1e3;
            let predicted = Predicted { ms, margin: Margin::None, clock_start };
            Ok((at, format!("{ms:.1} ms by the entered figures, without interval; {way}"), predicted))
        }
    }
}

fn later(flow: &mut Flow, press: &Press, path: StopPath) {
    let rows: Vec<Vec<String>> = compare_later_tests(press, path)
        .iter()
        .map(|later| {
            let test = &press.stop_tests[later.test];
            vec![
                format!("{}, {}", later.test + 1, test.at.date),
                At::of(&test.condition).words(),
                interval(later.predicted_ms, 1.0, "ms", 1),
                format!("{:.1}", later.measured_ms),
                later.words().replace('-', "\u{2212}"),
            ]
        })
        .collect();
    if rows.is_empty() {
        return;
    }
    flow.small("Tests of later days beside what the earlier ones had predicted for their mean:");
    flow.table(
        &[
            words("test", 16.0),
            words("condition", 32.0),
            words("predicted", 32.0),
            number("measured ms", 12.0),
            words("", 24.0),
        ],
        &rows,
    );
}
