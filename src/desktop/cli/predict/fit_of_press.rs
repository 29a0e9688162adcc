//! The fit of a press that knows its own drive and brake: delay and torque, residuals, and later tests beside what was predicted.

use calc::motion::{Estimate, Unknowns};
use calc::prediction::{LaterTest, LeftOut, PathFit, compare_later_tests, fit_path};
use calc::press::Press;
use calc::value_taken::summary_ms;
use serde_json::{Value, json};

use super::super::Outcome;
use super::super::args::FitArgs;
use super::super::outcome::columns;
use super::CAUTION;
use super::read::path;

pub fn fit_of_press(press: &Press, args: &FitArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let unknowns = if args.friction { Unknowns::DelayTorqueAndFriction } else { Unknowns::DelayAndTorque };
    match fit_path(press, path(&args.drive), unknowns) {
        Ok(found) if args.json => {
            let value = as_json(press, &found);
            outcome.line(serde_json::to_string_pretty(&value).unwrap_or_default());
        }
        Ok(found) => tell(press, &found, &mut outcome),
        Err(declined) => outcome.refuse(declined.to_string()),
    }
    outcome
}

fn left_out(left_out: &[LeftOut]) -> Vec<Value> {
    left_out.iter().map(|left| json!({ "test": left.test + 1, "why": left.why })).collect()
}

fn as_json(press: &Press, fit: &PathFit) -> Value {
    let fitted = &fit.fitted;
    let tests: Vec<Value> = fit
        .used
        .iter()
        .zip(&fitted.conditions)
        .map(|(index, condition)| {
            let test = &press.stop_tests[*index];
            json!({
                "test": index + 1,
                "condition": test.condition.words(),
                "measured_ms": summary_ms(&test.stops).map(|summary| summary.mean()),
                "fitted_ms": condition.fitted_stop_time_s * 1e3,
                "residual_ms": condition.residual_s * 1e3,
                "residual_in_deviations": condition.residual_in_deviations,
            })
        })
        .collect();
    let later: Vec<Value> = compare_later_tests(press, fit.path)
        .iter()
        .map(|later| {
            json!({
                "test": later.test + 1,
                "earlier_tests": later.earlier,
                "predicted_ms": later.predicted_ms.value,
                "predicted_interval_ms": [later.predicted_ms.low, later.predicted_ms.high],
                "measured_ms": later.measured_ms,
                "within": later.is_within(),
            })
        })
        .collect();
    json!({
        "press": press.tag,
        "path": fit.path.key(),
        "clock_start": fit.clock_start.key(),
        "delay_ms": fitted.dead_time_s.value * 1e3,
        "delay_interval_ms": [fitted.dead_time_s.low * 1e3, fitted.dead_time_s.high * 1e3],
        "torque_nm": fitted.full_torque_nm.value,
        "torque_interval_nm": [fitted.full_torque_nm.low, fitted.full_torque_nm.high],
        "friction_nm": fitted.friction_torque_nm.map(|friction| friction.value),
        "chi_squared": fitted.chi_squared,
        "lack_of_fit": fitted.lack_of_fit,
        "conditions": tests,
        "left_out": left_out(&fit.left_out),
        "later_tests": later,
    })
}

fn tell(press: &Press, fit: &PathFit, outcome: &mut Outcome) {
    let fitted = &fit.fitted;
    let interval = |of: Estimate, unit: &str, digits: usize| {
        format!("{:.digits$} {unit}, 95 % interval {:.digits$} to {:.digits$} {unit}", of.value, of.low, of.high)
    };
    let mut rows = vec![
        vec!["press".to_owned(), format!("{}, {}", press.tag, fit.path.words())],
        vec!["delay".into(), interval(fit.delay_ms(), "ms", 2)],
        vec!["counted from".into(), fit.clock_start.words().to_owned()],
        vec!["brake torque".into(), interval(fitted.full_torque_nm, "N m", 0)],
    ];
    if let Some(friction) = fitted.friction_torque_nm {
        rows.push(vec!["running friction".into(), interval(friction, "N m", 0)]);
    }
    for line in columns(&rows) {
        outcome.line(line);
    }
    outcome.line("");
    let head = ["test", "condition", "measured", "fitted", "residual"];
    let mut rows = vec![head.map(str::to_owned).to_vec()];
    for (index, condition) in fit.used.iter().zip(&fitted.conditions) {
        let test = &press.stop_tests[*index];
        let fitted_ms = condition.fitted_stop_time_s * 1e3;
        rows.push(vec![
            (index + 1).to_string(),
            test.condition.words(),
            format!("{:.2} ms", fitted_ms + condition.residual_s * 1e3),
            format!("{fitted_ms:.2} ms"),
            format!("{:+.2} ms ({:+.1} s)", condition.residual_s * 1e3, condition.residual_in_deviations),
        ]);
    }
    for line in columns(&rows) {
        outcome.line(line);
    }
    if fitted.lack_of_fit {
        outcome.line("The residuals are greater than the scatter of the stops: the model misses something. The intervals are widened.");
    }
    for left in &fit.left_out {
        outcome.line(format!("Left out: test {}, {}.", left.test + 1, left.why));
    }
    for later in compare_later_tests(press, fit.path) {
        outcome.line(later_words(&later));
    }
    outcome.line(CAUTION);
}

fn later_words(later: &LaterTest) -> String {
    format!(
        "Test {}: predicted {:.1} ms ({:.1} to {:.1} ms) from {} earlier tests, measured {:.1} ms: {}.",
        later.test + 1,
        later.predicted_ms.value,
        later.predicted_ms.low,
        later.predicted_ms.high,
        later.earlier,
        later.measured_ms,
        later.words()
    )
}
