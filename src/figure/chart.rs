//! A chart over time: readings, limits labelled on the line, trend and forecast band, events as upright lines.

use crate::drawing::{Anchor, Drawing, THIN, Weight, at};
use crate::fonts::Fonts;
use crate::labels::spread;
use crate::palette::Role;
use crate::scale::{Scale, ticks};

/// What a chart shows. Places along x are days on any scale.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct Chart {
    /// The readings.
    pub points: Vec<ChartPoint>,
    /// Limits: value and label, lowest first.
    pub limits: Vec<(f64, String, Role)>,
    /// Lines through the readings and ahead of them.
    pub lines: Vec<ChartLine>,
    /// Events: day and label.
    pub markers: Vec<Marker>,
    /// Days with their labels, along the bottom.
    pub days: Vec<(f64, String)>,
    /// What the upright axis counts, with unit.
    pub title: String,
    /// Where the chart begins and ends along x.
    pub range: (f64, f64),
}

/// One reading.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct ChartPoint {
    /// Its day.
    pub x: f64,
    /// Its mean.
    pub y: f64,
    /// Its longest stop.
    pub greatest: f64,
}

/// A line of the chart.
#[derive(Clone, PartialEq, Debug)]
pub struct ChartLine {
    /// Its corners.
    pub points: Vec<(f64, f64)>,
    /// Its colour.
    pub role: Role,
    /// Whether it is dashed.
    pub is_dashed: bool,
}

/// An event.
#[derive(Clone, PartialEq, Debug)]
pub struct Marker {
    /// Its day.
    pub x: f64,
    /// What happened.
    pub label: String,
}

const TEXT: f32 = 2.6;

/// Draws the chart.
pub fn chart(chart: &Chart, width: f32, height: f32, fonts: &Fonts) -> Drawing {
    let mut drawing = Drawing::new(width, height);
    let values =
        chart.points.iter().flat_map(|point| [point.y, point.greatest]).chain(chart.limits.iter().map(|limit| limit.0));
    let (least, most) =
        values.fold((f64::INFINITY, f64::NEG_INFINITY), |(least, most), value| (least.min(value), most.max(value)));
    if !least.is_finite() || chart.range.0 >= chart.range.1 {
        return drawing;
    }
    let margin = ((most - least) * 0.12).max(0.5);
    let (left, right) = (11.0, width - 2.0);
    let (top, bottom) = (6.0, height - 6.0);
    let across = Scale::new((chart.range.0, left), (chart.range.1, right));
    let up = Scale::new((least - margin, bottom), (most + margin, top));
    for tick in ticks(least - margin, most + margin, 5) {
        let y = up.place(tick);
        drawing.line(&[at(left, y), at(right, y)], Role::Rule, THIN);
        drawing.text(at(left - 1.5, y + 0.9), short(tick), TEXT, Anchor::End, Role::Faint);
    }
    drawing.text(at(0.0, 3.0), &chart.title, TEXT, Anchor::Start, Role::Faint);
    draw_days(&mut drawing, chart, across, bottom, fonts);
    for marker in chart.markers.iter().filter(|marker| chart.range.0 <= marker.x && marker.x <= chart.range.1) {
        let x = across.place(marker.x);
        drawing.dashed(&[at(x, top - 1.0), at(x, bottom)], Role::Retime, 0.25);
        let text_width = fonts.width(&marker.label, TEXT, Weight::Regular);
        let is_late = x + text_width + 1.0 > right;
        drawing.text(
            at(if is_late { x - 1.0 } else { x + 1.0 }, top),
            &marker.label,
            TEXT,
            if is_late { Anchor::End } else { Anchor::Start },
            Role::Retime,
        );
    }
    draw_limits(&mut drawing, chart, up, (left, right), (top, bottom));
    for line in &chart.lines {
        let points: Vec<_> = cut(&line.points, chart.range, (least - margin, most + margin))
            .iter()
            .map(|(x, y)| at(across.place(*x), up.place(*y)))
            .collect();
        if points.len() > 1 {
            if line.is_dashed { drawing.dashed(&points, line.role, 0.3) } else { drawing.line(&points, line.role, 0.3) }
        }
    }
    for point in &chart.points {
        let x = across.place(point.x);
        drawing.line(&[at(x, up.place(point.y)), at(x, up.place(point.greatest))], Role::Faint, THIN);
        drawing.disc(at(x, up.place(point.y)), 0.75, Role::Accent);
    }
    drawing.line(&[at(left, top), at(left, bottom), at(right, bottom)], Role::Ink, THIN);
    drawing
}

fn short(value: f64) -> String {
    format!("{value:.3}").trim_end_matches('0').trim_end_matches('.').to_owned()
}

fn draw_days(drawing: &mut Drawing, chart: &Chart, across: Scale, bottom: f32, fonts: &Fonts) {
    let mut free_from = f32::NEG_INFINITY;
    for (day, label) in chart.days.iter().filter(|(day, _)| chart.range.0 <= *day && *day <= chart.range.1) {
        let x = across.place(*day);
        let half = fonts.width(label, TEXT, Weight::Regular) / 2.0;
        drawing.line(&[at(x, bottom), at(x, bottom + 1.0)], Role::Ink, THIN);
        if x - half > free_from {
            drawing.text(at(x, bottom + 4.0), label, TEXT, Anchor::Middle, Role::Faint);
            free_from = x + half + 2.0;
        }
    }
}

/// Limits with their labels on the line, moved apart where they lie close.
fn draw_limits(drawing: &mut Drawing, chart: &Chart, up: Scale, (left, right): (f32, f32), (top, bottom): (f32, f32)) {
    let places: Vec<f32> = chart.limits.iter().map(|limit| up.place(limit.0)).collect();
    let sizes = vec![3.4; places.len()];
    let middles: Vec<f32> = places.iter().map(|y| y - 1.7).collect();
    for (((_, label, role), y), middle) in chart.limits.iter().zip(&places).zip(spread(&middles, &sizes, top, bottom)) {
        drawing.line(&[at(left, *y), at(right, *y)], *role, 0.35);
        drawing.text(at(left + 1.5, middle + 1.0), label, TEXT, Anchor::Start, *role);
    }
}

/// The part of a line that lies within the chart.
fn cut(points: &[(f64, f64)], x: (f64, f64), y: (f64, f64)) -> Vec<(f64, f64)> {
    let is_within = |point: &(f64, f64)| x.0 <= point.0 && point.0 <= x.1 && y.0 <= point.1 && point.1 <= y.1;
    let mut kept: Vec<(f64, f64)> = Vec::new();
    for pair in points.windows(2) {
        // Straight parts are short enough for a chart when cut into pieces; the ends are then off by less than a line's width.
        for step in 0..=40 {
            let share = f64::from(step) / 40.0;
            let point = (pair[0].0 + share * (pair[1].0 - pair[0].0), pair[0].1 + share * (pair[1].1 - pair[0].1));
            if is_within(&point) && kept.last() != Some(&point) {
                kept.push(point);
            }
        }
    }
    kept
}
