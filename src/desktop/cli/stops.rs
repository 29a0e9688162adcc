//! `slidehalt stops`: mean, spread and bounds of timed stops.

use calc::limits::STOPPING_TIME;
use calc::statistics::{tolerance_factor_one_sided, upper_tolerance_bound};
use calc::units::Time;
use calc::value_taken::summary_ms;
use serde_json::json;

use super::Outcome;
use super::args::StopsArgs;
use super::outcome::columns;

pub fn stops(args: &StopsArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let mut stops = Vec::new();
    for text in &args.stops {
        match Time::parse(text, &STOPPING_TIME) {
            Ok(time) => stops.push(time),
            Err(refusal) => outcome.refuse(refusal.to_string()),
        }
    }
    let (0, Some(summary)) = (outcome.code, summary_ms(&stops)) else { return outcome };
    let bound = |coverage: f64| {
        let factor = tolerance_factor_one_sided(stops.len(), coverage, 0.95).ok()?;
        Some((factor, upper_tolerance_bound(&summary, coverage, 0.95).ok()?))
    };
    let (ninety_five, ninety_nine) = (bound(0.95), bound(0.99));
    if args.json {
        let value = json!({
            "n": stops.len(),
            "mean_ms": summary.mean(),
            "s_ms": summary.standard_deviation(),
            "greatest_ms": summary.greatest(),
            "mean_plus_3_s_ms": summary.mean_plus_3_s(),
            "tolerance_95_95_ms": ninety_five.map(|bound| bound.1),
            "k_95_95": ninety_five.map(|bound| bound.0),
            "tolerance_99_95_ms": ninety_nine.map(|bound| bound.1),
            "k_99_95": ninety_nine.map(|bound| bound.0),
        });
        outcome.line(serde_json::to_string_pretty(&value).unwrap_or_default());
        return outcome;
    }
    let figure = |value: Option<f64>| value.map_or("needs two stops".to_owned(), |value| format!("{value:.3} ms"));
    let with_factor = |bound: Option<(f64, f64)>| match bound {
        Some((factor, bound)) => format!("{bound:.3} ms   k = {factor:.4}"),
        None => "needs two stops".to_owned(),
    };
    let rows = [
        vec!["stops".to_owned(), stops.len().to_string()],
        vec!["mean".into(), figure(Some(summary.mean()))],
        vec!["s".into(), summary.standard_deviation().map_or("needs two stops".into(), |s| format!("{s:.6} ms"))],
        vec!["longest".into(), figure(Some(summary.greatest()))],
        vec!["mean + 3 s".into(), figure(summary.mean_plus_3_s())],
        vec!["95 % of stops, 95 % confidence".into(), with_factor(ninety_five)],
        vec!["99 % of stops, 95 % confidence".into(), with_factor(ninety_nine)],
    ];
    for line in columns(&rows) {
        outcome.line(line);
    }
    outcome
}
