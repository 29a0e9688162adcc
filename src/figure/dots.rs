//! The dot plot of timed stops: one row a condition, one dot a stop, levels as labelled lines.

use crate::drawing::{Anchor, Drawing, THIN, Weight, at};
use crate::fonts::Fonts;
use crate::labels::spread;
use crate::palette::Role;
use crate::scale::{Scale, ticks};

/// One condition.
#[derive(Clone, PartialEq, Debug)]
pub struct DotRow {
    /// Its name.
    pub label: String,
    /// The stops, ms.
    pub stops_ms: Vec<f64>,
    /// Whether it decides.
    pub is_governing: bool,
}

/// A level across all rows.
#[derive(Clone, PartialEq, Debug)]
pub struct Level {
    /// What it is, with its value.
    pub label: String,
    /// Where it lies, ms.
    pub ms: f64,
    /// Its colour.
    pub role: Role,
}

const TEXT: f32 = 2.7;
const ROW: f32 = 5.0;

/// Draws the plot, `width` millimetres wide.
pub fn dot_plot(rows: &[DotRow], levels: &[Level], width: f32, fonts: &Fonts) -> Drawing {
    let values = || rows.iter().flat_map(|row| row.stops_ms.iter().copied()).chain(levels.iter().map(|level| level.ms));
    let (least, most) =
        values().fold((f64::INFINITY, f64::NEG_INFINITY), |(least, most), value| (least.min(value), most.max(value)));
    if !least.is_finite() {
        return Drawing::new(width, 0.0);
    }
    let margin = ((most - least) * 0.08).max(0.5);
    let label_width = rows.iter().map(|row| fonts.width(&row.label, TEXT, Weight::SemiBold)).fold(0.0, f32::max);
    let left = (label_width + 4.0).min(width * 0.45);
    let right = width - 3.0;
    let top = if levels.is_empty() { 2.0 } else { 5.5 };
    let bottom = top + ROW * rows.len() as f32;
    let scale = Scale::new((least - margin, left), (most + margin, right));
    let mut drawing = Drawing::new(width, bottom + 5.5);
    for tick in ticks(least - margin, most + margin, 6) {
        let x = scale.place(tick);
        drawing.line(&[at(x, top), at(x, bottom)], Role::Rule, THIN);
        drawing.text(
            at(x, bottom + 4.0),
            format!("{tick:.4}").trim_end_matches('0').trim_end_matches('.').to_owned() + " ms",
            TEXT,
            Anchor::Middle,
            Role::Faint,
        );
    }
    drawing.line(&[at(left, bottom), at(right, bottom)], Role::Ink, THIN);
    let sizes: Vec<f32> = levels.iter().map(|level| fonts.width(&level.label, TEXT, Weight::Regular) + 3.0).collect();
    let middles: Vec<f32> = levels.iter().map(|level| scale.place(level.ms)).collect();
    for ((level, x), label_x) in levels.iter().zip(&middles).zip(spread(&middles, &sizes, 0.0, width)) {
        drawing.line(&[at(label_x, 3.6), at(*x, top - 0.4), at(*x, bottom)], level.role, 0.3);
        drawing.text(at(label_x, 3.0), &level.label, TEXT, Anchor::Middle, level.role);
    }
    for (index, row) in rows.iter().enumerate() {
        let y = top + ROW * (index as f32 + 0.5);
        let role = if row.is_governing { Role::Accent } else { Role::Faint };
        if row.is_governing {
            drawing.strong(at(0.0, y + 1.0), &row.label, TEXT, Anchor::Start, Role::Ink);
        } else {
            drawing.text(at(0.0, y + 1.0), &row.label, TEXT, Anchor::Start, Role::Ink);
        }
        // Equal stops stand beside each other, so that none hides another.
        let mut seen: Vec<f64> = Vec::new();
        for stop in &row.stops_ms {
            let twins = seen.iter().filter(|other| (scale.place(**other) - scale.place(*stop)).abs() < 0.9).count();
            let lift = [0.0, -1.1, 1.1, -2.0, 2.0][twins % 5];
            drawing.disc(at(scale.place(*stop), y + lift), 0.5, role);
            seen.push(*stop);
        }
    }
    drawing
}
