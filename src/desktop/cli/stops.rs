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

#[cfg(test)]
mod tests {
    use crate::cli::run_line;

    #[test]
    fn stops_gives_the_handbook_figures() {
        // k (10, 0.95, 0.95) = 2.911 and k (10, 0.99, 0.95) = 3.981, tables of ISO 16269-6.
        let outcome = run_line("stops 182 185 181 184 186 183 182 187 184 183 --json");
        let value: serde_json::Value = serde_json::from_str(&outcome.out).unwrap();
        for (key, expected, tolerance) in [
            ("mean_ms", 183.7, 1e-9),
            ("s_ms", 1.888_562, 1e-6),
            ("greatest_ms", 187.0, 0.0),
            ("mean_plus_3_s_ms", 189.366, 5e-4),
            ("tolerance_95_95_ms", 189.198, 5e-4),
            ("tolerance_99_95_ms", 191.219, 5e-4),
            ("k_95_95", 2.911, 5e-4),
            ("k_99_95", 3.981, 5e-4),
        ] {
            let found = value[key].as_f64().unwrap();
            assert!((found - expected).abs() <= tolerance, "{key}: {found}");
        }
        assert_eq!(run_line("stops 182 x").code, 2);
        assert_eq!(run_line("stops 182").code, 0);
    }

    #[test]
    fn factors_of_other_numbers_of_stops() {
        // k (25, 0.99, 0.95) = 3.158, tables of ISO 16269-6.
        let stops: Vec<String> = (0..25).map(|index| (180 + index % 7).to_string()).collect();
        let outcome = run_line(&format!("stops {} --json", stops.join(" ")));
        let value: serde_json::Value = serde_json::from_str(&outcome.out).unwrap();
        assert!((value["k_99_95"].as_f64().unwrap() - 3.158).abs() <= 5e-4);
        assert_eq!(value["n"], 25);
    }

    #[test]
    fn the_text_for_people() {
        let outcome = run_line("stops 182 185 181 184 186 183 182 187 184 183");
        let expected = "\
stops                          10
mean                           183.700 ms
s                              1.888562 ms
longest                        187.000 ms
mean + 3 s                     189.366 ms
95 % of stops, 95 % confidence  189.198 ms   k = 2.9110
99 % of stops, 95 % confidence  191.219 ms   k = 3.9811
";
        let plain = |text: &str| text.split_whitespace().collect::<Vec<_>>().join(" ");
        assert_eq!(plain(&outcome.out), plain(expected));
        assert_eq!((outcome.code, outcome.err.as_str()), (0, ""));
    }

    #[test]
    fn bad_stops_are_all_refused() {
        for (line, count) in [("stops 0 20000 -5 12x 1.2.3 1,234.5 NaN", 7), ("stops 182,5 x", 1)] {
            let outcome = run_line(line);
            assert_eq!((outcome.code, outcome.out.as_str()), (2, ""), "{line}");
            assert_eq!(outcome.err.lines().count(), count, "{line}: {}", outcome.err);
        }
        let comma = run_line("stops 182,5 183.5 --json");
        assert_eq!(serde_json::from_str::<serde_json::Value>(&comma.out).unwrap()["mean_ms"], 183.0);
    }
}
