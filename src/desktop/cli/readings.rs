//! `slidehalt readings`, `add-reading`, `import-readings`, `export-readings`: monthly readings without a window.

use calc::calendar::Moment;
use calc::limits;
use calc::monthly::{self, Change, date_of, standing};
use calc::press::Press;
use calc::reading::Reading;
use calc::round::{Towards, time_text};
use calc::statistics::{Forecast, Growth};
use calc::stop_test::Instrument;
use calc::units::{Rate, Time};
use serde_json::{Value, json};

use super::args::{AddReadingArgs, ExportReadingsArgs, ImportReadingsArgs, ReadingsArgs};
use super::figures::figures;
use super::outcome::columns;
use super::{Outcome, today};

/// How a press stands by its readings.
pub fn readings(args: &ReadingsArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let (plant, press) = match plant::open_press_file(&args.press) {
        Ok(opened) => opened,
        Err(refusal) => {
            outcome.refuse(refusal.to_string());
            return outcome;
        }
    };
    let today = args.on.unwrap_or_else(today);
    let Some(standing) = standing(&press, &plant, today) else {
        if args.json {
            outcome.line(json!({ "press": press.tag, "readings": 0, "sentence": "No reading yet." }).to_string());
        } else {
            outcome.line(format!("{}: No reading yet.", press.tag));
        }
        return outcome;
    };
    if args.json {
        outcome.line(serde_json::to_string_pretty(&to_json(&press, &standing)).unwrap_or_default());
        return outcome;
    }
    outcome.line(format!("{}: {}", press.tag, monthly::sentence(&standing)));
    if let Some(suspect) = &standing.suspect {
        outcome.line(monthly::suspect_sentence(suspect));
    }
    let points = &standing.series.points;
    let since = standing.series.since.map_or(String::new(), |since| format!(" since the brake was changed on {since}"));
    outcome.line(format!(
        "{} reading{}{since}; {}.",
        points.len(),
        if points.len() == 1 { "" } else { "s" },
        standing.series.setup.condition.words()
    ));
    let mut rows = vec![["limit", "mean of a reading", "when crossed"].map(str::to_owned).to_vec()];
    for (index, line) in standing.lines.iter().enumerate() {
        let binding = if Some(index) == standing.binding { " (binding)" } else { "" };
        rows.push(vec![
            format!("{}{binding}", line.name),
            time_text(line.value, Towards::Smaller),
            line.consequence.words().to_owned(),
        ]);
    }
    if rows.len() > 1 {
        outcome.line("");
        columns(&rows).iter().for_each(|line| outcome.line(line));
    }
    outcome
}

fn to_json(press: &Press, standing: &monthly::Standing) -> Value {
    let day = |day: f64| date_of(day).map(|date| date.to_string());
    let (kind, drift, step) = match &standing.change {
        Change::CannotTell { .. } => ("cannot-tell", None, None),
        Change::Steady(drift) => ("steady", Some(drift), None),
        Change::Drifting(drift) => ("drifting", Some(drift), None),
        Change::Stepped { step, drift } => ("stepped", Some(drift), Some(step)),
    };
    let forecast = standing.forecast.as_ref().map(|forecast| match forecast {
        Forecast::AlreadyReached(_) => json!({ "kind": "reached" }),
        Forecast::Ahead { bound_day, line_day, .. } => {
            json!({ "kind": "ahead", "bound_on": day(*bound_day), "line_on": line_day.and_then(day) })
        }
        Forecast::CannotTell(_) => json!({ "kind": "cannot-tell" }),
    });
    json!({
        "press": press.tag,
        "sentence": monthly::sentence(standing),
        "readings": standing.series.points.len(),
        "series_since": standing.series.since.map(|since| since.to_string()),
        "limits": standing.lines.iter().map(|line| json!({
            "name": line.name,
            "us": line.value.base(),
            "consequence": line.consequence.words(),
            "steps": super::json::steps(&line.steps, calc::units::LengthUnit::Millimetre),
        })).collect::<Vec<_>>(),
        "binding": standing.binding_line().map(|line| line.name),
        "crossed": standing.crossed().map(|line| line.name),
        "change": kind,
        "drift_per_month_ms": drift.map(|drift| drift.per_month_ms),
        "drift_interval_ms": drift.and_then(|drift| drift.interval_ms).map(|interval| [interval.low, interval.high]),
        "line_per_month_ms": drift.map(|drift| drift.line_per_month_ms),
        "chance": drift.map(|drift| drift.chance),
        "step": step.map(|step| json!({
            "began": step.began.to_string(),
            "before_ms": step.before_ms,
            "after_ms": step.after_ms,
            "event": step.event.as_ref().map(|event| event.kind.key()),
        })),
        "forecast": forecast,
        "grown": standing.suspect.as_ref().map(|suspect| match suspect.found.growth {
            Growth::DelayGrew => "delay",
            Growth::BrakingGrew => "braking",
            Growth::Both => "both",
            Growth::Neither => "neither",
            Growth::CannotTell { .. } => "cannot-tell",
        }),
        "grown_sentence": standing.suspect.as_ref().map(monthly::suspect_sentence),
        "points": standing.series.points.iter().map(|point| json!({
            "on": day(point.day),
            "by": press.readings[point.reading].by,
            "mean_ms": point.mean_ms,
            "greatest_ms": point.greatest_ms,
        })).collect::<Vec<_>>(),
    })
}

/// Adds one reading to a press file.
pub fn add(args: &AddReadingArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let at = Moment::parse("Date", &args.date).map_err(|refusal| outcome.refuse(refusal.to_string())).ok();
    let stops: Vec<Time> = figures(&args.stops_ms, &limits::STOPPING_TIME)
        .unwrap_or_else(|refusals| {
            refusals.iter().for_each(|refusal| outcome.refuse(refusal.to_string()));
            Vec::new()
        })
        .into_iter()
        .map(Time::from_base)
        .collect();
    let speed = args.speed.as_ref().map(|text| Rate::parse(text, &limits::SPEED));
    let speed = speed.transpose().map_err(|refusal| outcome.refuse(refusal.to_string())).ok().flatten();
    let (Some(at), 0) = (at, outcome.code) else { return outcome };
    let count = stops.len();
    let edited = plant::edit_press_file(&args.press, |press| {
        let mut setup = press.reference.clone().or_else(|| press.readings.last().map(|reading| reading.setup.clone())).ok_or(
            "The press has no reference condition and no reading to take the condition from. Set the reference on the sheet Readings.",
        )?;
        if let Some(speed) = speed {
            setup.condition.speed = speed;
        }
        let last = press.readings.last().map(|reading| &reading.instrument);
        let instrument = match &args.instrument {
            Some(name) => Instrument {
                name: name.clone(),
                serial: args.serial.clone().unwrap_or_default(),
                calibrated: None,
                calibration_due: None,
            },
            None => last.cloned().ok_or("No instrument is known from an earlier reading. Add --instrument.")?,
        };
        press.readings.push(Reading { at, by: args.by.clone().unwrap_or_default(), setup, instrument, stops });
        Ok(())
    });
    match edited {
        Ok(press) => outcome.line(format!(
            "Reading of {at} with {count} stop{} added to press {}.",
            if count == 1 { "" } else { "s" },
            press.tag
        )),
        Err(refusal) => outcome.refuse(refusal.to_string()),
    }
    outcome
}

/// Adds the readings of a CSV file to a press file, all or none.
pub fn import(args: &ImportReadingsArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let text = match std::fs::read_to_string(&args.csv) {
        Ok(text) => text,
        Err(error) => {
            outcome.refuse(format!("{} cannot be read: {error}.", args.csv.display()));
            return outcome;
        }
    };
    let mut refusals = Vec::new();
    let mut count = 0;
    let edited = plant::edit_press_file(&args.press, |press| match plant::import_readings(press, &text) {
        Ok(readings) => {
            count = readings.len();
            press.readings.extend(readings);
            Ok(())
        }
        Err(rows) => {
            refusals = rows;
            Err("Nothing was taken over.".into())
        }
    });
    for refusal in &refusals {
        outcome.refuse(refusal.to_string());
    }
    match edited {
        Ok(press) => {
            outcome.line(format!("{count} reading{} added to press {}.", if count == 1 { "" } else { "s" }, press.tag))
        }
        Err(refusal) => outcome.refuse(refusal.to_string()),
    }
    outcome
}

/// Writes the readings of a press as CSV.
pub fn export(args: &ExportReadingsArgs) -> Outcome {
    let mut outcome = Outcome::default();
    match plant::open_press_file(&args.press) {
        Ok((_, press)) => outcome.out = plant::export_readings(&press),
        Err(refusal) => outcome.refuse(refusal.to_string()),
    }
    outcome
}
