//! The chart of a press's monthly readings, from its standing: what the record prints and the window shows.

use calc::monthly::{Consequence, Standing, date_of, day_of};
use calc::press::{EventKind, Press};
use calc::round::{Towards, time_text};
use calc::statistics::{FORECAST_PROBABILITY, Line};
use jiff::civil::Date;

use crate::chart::{Chart, ChartLine, ChartPoint, Marker};
use crate::palette::Role;

/// The chart of the readings as of `today`.
pub fn readings_chart(press: &Press, standing: &Standing, today: Date) -> Chart {
    let points: Vec<ChartPoint> = standing
        .series
        .points
        .iter()
        .map(|point| ChartPoint { x: point.day, y: point.mean_ms, greatest: point.greatest_ms })
        .collect();
    let first = points.first().map_or(day_of(today) - 30.0, |point| point.x);
    let last = points.last().map_or(day_of(today), |point| point.x).max(day_of(today));
    let span = (last - first).max(60.0);
    let range = (first - span * 0.03, last + span * 0.22);
    let limits = standing
        .lines
        .iter()
        .map(|line| {
            let role = match line.consequence {
                Consequence::Warn => Role::Unproven,
                Consequence::Retime => Role::Retime,
                Consequence::StopUsing => Role::Short,
            };
            (line.value.to_f64(), format!("{} {}", line.name, time_text(line.value, Towards::Smaller)), role)
        })
        .collect();
    Chart {
        lines: trend_lines(&points, range),
        points,
        limits,
        markers: press
            .events
            .iter()
            .filter(|event| event.kind != EventKind::Remark || !event.note.is_empty())
            .map(|event| Marker { x: day_of(event.at.date), label: event.kind.words().into() })
            .collect(),
        days: month_ticks(range),
        title: "stopping time, ms".into(),
        range,
    }
}

/// The line through the readings and its upper 95 % prediction bound, to the end of the chart.
fn trend_lines(points: &[ChartPoint], range: (f64, f64)) -> Vec<ChartLine> {
    let days: Vec<f64> = points.iter().map(|point| point.x).collect();
    let means: Vec<f64> = points.iter().map(|point| point.y).collect();
    if points.len() < calc::statistics::FORECAST_POINTS_MIN {
        return Vec::new();
    }
    let Ok(line) = Line::fit(&days, &means) else { return Vec::new() };
    let from = points.first().map_or(range.0, |point| point.x);
    let steps: Vec<f64> = (0..=30).map(|step| from + (range.1 - from) * f64::from(step) / 30.0).collect();
    let bound = steps
        .iter()
        .filter_map(|day| Some((*day, line.upper_prediction_bound_at(*day, FORECAST_PROBABILITY).ok()?)))
        .collect();
    vec![
        ChartLine {
            points: vec![(from, line.value_at(from)), (range.1, line.value_at(range.1))],
            role: Role::Accent,
            is_dashed: false,
        },
        ChartLine { points: bound, role: Role::Accent, is_dashed: true },
    ]
}

/// The first days of months within the range, labelled by month and year; every third, sixth or twelfth where many.
fn month_ticks(range: (f64, f64)) -> Vec<(f64, String)> {
    let months = (range.1 - range.0) / 30.4;
    let step = if months <= 9.0 {
        1
    } else if months <= 24.0 {
        3
    } else if months <= 60.0 {
        6
    } else {
        12
    };
    let (Some(from), Some(to)) = (date_of(range.0), date_of(range.1)) else { return Vec::new() };
    let mut ticks = Vec::new();
    let mut day = from.first_of_month();
    while day <= to {
        if (day.month() - 1) % step == 0 {
            ticks.push((day_of(day), format!("{}-{:02}", day.year(), day.month())));
        }
        let Ok(next) = day.checked_add(jiff::Span::new().months(1)) else { break };
        day = next;
    }
    ticks
}
