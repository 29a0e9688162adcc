//! The reach strip: S = K T + C to scale, hazard at the left, sensing plane at the right.
//!
//! A hand comes from the right. First it passes C, then every time part as the way K × t that it covers meanwhile, and it
//! arrives at the hazard when the slide stands still. What the installed distance has beyond that is spare; what it lacks is
//! drawn beyond the sensing plane.

use calc::round::{Towards, length_text, time_text};
use calc::rules::MakeUp;
use calc::units::{Length, LengthUnit, Speed, Time};
use calc::verdict::{Assessment, PartState, TimePartKind};

use crate::drawing::{Anchor, Drawing, Fill, Hatch, THIN, Weight, at};
use crate::fonts::Fonts;
use crate::labels::spread;
use crate::palette::Role;
use crate::scale::Scale;

/// What the strip shows.
#[derive(Clone, PartialEq, Debug)]
pub struct StripInput {
    /// The parts from the hazard outwards.
    pub parts: Vec<StripPart>,
    /// Required distance.
    pub required: Length,
    /// Installed distance that can be relied on.
    pub installed: Option<Length>,
    /// The unit of the labels.
    pub unit: LengthUnit,
}

/// One part of the strip.
#[derive(Clone, PartialEq, Debug)]
pub struct StripPart {
    /// Its name, with its time where it has one.
    pub label: String,
    /// The way it stands for.
    pub length: Length,
    /// How it is filled.
    pub fill: Fill,
}

impl StripInput {
    /// The strip of an assessment; `None` while there is no distance to draw.
    pub fn of(assessment: &Assessment, unit: LengthUnit) -> Option<Self> {
        let demand = assessment.demand?;
        let mut parts = Vec::new();
        if let Some(make_up) = demand.make_up {
            // The way of each part is the difference of two rounded-up reaches, so that the parts add up to the whole.
            let mut time = Time::ZERO;
            let mut reached = Length::ZERO;
            let mut add = |label: String, part: Time, fill: Fill, speed: Speed| {
                time = time + part;
                let length = speed.reach_in(time) - reached;
                reached = reached + length;
                parts.push(StripPart { label, length, fill });
            };
            if assessment.parts.is_empty() {
                add(
                    format!("time {}", time_text(make_up.time, Towards::Greater)),
                    make_up.time,
                    stop_fill(),
                    make_up.speed,
                );
            }
            for (kind, part, is_cut) in counted_parts(assessment, &make_up).into_iter().rev() {
                let cut = if is_cut { ", less the opening time" } else { "" };
                add(
                    format!("{}{cut} {}", kind.words(), time_text(part, Towards::Greater)),
                    part,
                    part_fill(kind),
                    make_up.speed,
                );
            }
            if make_up.addition != Length::ZERO {
                let fill = Fill { role: Role::PartAddition, hatch: Hatch::Upright(0.9) };
                let label = format!("C {}", length_text(make_up.addition, unit, Towards::Greater));
                parts.push(StripPart { label, length: make_up.addition, fill });
            }
        }
        let drawn: Length = parts.iter().map(|part| part.length).sum();
        if drawn < demand.required {
            // A floor or a level part of the rule asks for more than the way of the hand.
            let fill = Fill { role: Role::PartOther, hatch: Hatch::Plain };
            let label = if parts.is_empty() { "required" } else { "least distance of the rule" };
            parts.push(StripPart { label: label.into(), length: demand.required - drawn, fill });
        }
        Some(Self { parts, required: demand.required, installed: assessment.relied_on, unit })
    }
}

/// The parts that are drawn, in the order in which they pass, and whether one was cut. While an interlocked guard is being opened
/// nobody can reach in: its opening time is taken off the parts that pass first.
fn counted_parts(assessment: &Assessment, make_up: &MakeUp) -> Vec<(TimePartKind, Time, bool)> {
    let mut parts: Vec<(TimePartKind, Time, bool)> = assessment
        .parts
        .iter()
        .filter_map(|part| match part.state {
            PartState::Added(time) if part.kind == TimePartKind::Allowance => {
                Some((part.kind, Time::from_base(time.base() * make_up.allowance_times), false))
            }
            PartState::Added(time) => Some((part.kind, time, false)),
            PartState::SeenByClock | PartState::Missing => None,
        })
        .collect();
    let total: Time = parts.iter().map(|part| part.1).sum();
    let mut opening = (total - make_up.time).max(Time::ZERO);
    for part in &mut parts {
        let cut = opening.min(part.1);
        opening = opening - cut;
        *part = (part.0, part.1 - cut, cut > Time::ZERO);
    }
    parts.retain(|part| part.1 > Time::ZERO);
    parts
}

fn stop_fill() -> Fill {
    Fill { role: Role::PartStop, hatch: Hatch::Plain }
}

fn part_fill(kind: TimePartKind) -> Fill {
    match kind {
        TimePartKind::Stopping => stop_fill(),
        TimePartKind::Allowance => Fill { role: Role::PartOther, hatch: Hatch::Crossed(1.4) },
        TimePartKind::Control => Fill { role: Role::PartOther, hatch: Hatch::Falling(1.4) },
        TimePartKind::Interface => Fill { role: Role::PartOther, hatch: Hatch::Plain },
        TimePartKind::Device => Fill { role: Role::PartOther, hatch: Hatch::Rising(1.4) },
    }
}

const BAND: f32 = 8.0;
const TEXT: f32 = 2.9;

/// Draws the strip, `width` millimetres wide.
pub fn reach_strip(input: &StripInput, width: f32, fonts: &Fonts) -> Drawing {
    let widest = input.installed.unwrap_or(input.required).greatest(input.required);
    let (left, right) = (2.0, width - 2.0);
    let scale = Scale::new((0.0, left), (widest.to_f64().max(1.0), right));
    let top = 6.5;
    let bottom = top + BAND;
    let mut drawing = Drawing::new(width, bottom + 8.0);
    drawing.text(at(left, 4.0), "hazard", TEXT, Anchor::Start, Role::Faint);

    let mut from = Length::ZERO;
    let mut labels = Vec::new();
    for part in &input.parts {
        let (start, end) = (scale.place(from.to_f64()), scale.place((from + part.length).to_f64()));
        drawing.rectangle(at(start, top), end - start, BAND, part.fill);
        drawing.line(&[at(end, top), at(end, bottom)], Role::Ink, THIN);
        let text_width = fonts.width(&part.label, TEXT, Weight::Regular);
        if text_width + 2.0 <= end - start {
            let middle = (start + end) / 2.0;
            drawing.rectangle(
                at(middle - text_width / 2.0 - 0.8, top + 2.0),
                text_width + 1.6,
                BAND - 4.0,
                Fill { hatch: Hatch::Plain, ..part.fill },
            );
            drawing.text(at(middle, top + BAND / 2.0 + 1.0), &part.label, TEXT, Anchor::Middle, Role::Ink);
        } else {
            labels.push(((start + end) / 2.0, text_width, part.label.clone()));
        }
        from = from + part.length;
    }
    let rows = draw_outer_labels(&mut drawing, &labels, left, right, bottom);
    drawing.height += 4.2 * (rows as f32 - 1.0);
    let required_at = scale.place(input.required.to_f64());
    if let Some(installed) = input.installed {
        let installed_at = scale.place(installed.to_f64());
        let (role, hatch) = if installed >= input.required {
            (Role::PartSpare, Hatch::Plain)
        } else {
            (Role::PartShort, Hatch::Rising(0.8))
        };
        let (start, end) = (installed_at.min(required_at), installed_at.max(required_at));
        if installed >= input.required {
            drawing.rectangle(at(start, top), end - start, BAND, Fill { role, hatch });
        } else {
            drawing.rectangle(at(start, top + BAND * 0.72), end - start, BAND * 0.28, Fill { role, hatch });
        }
        drawing.line(&[at(installed_at, top - 1.6), at(installed_at, bottom + 1.6)], Role::Accent, 0.5);
        draw_ends(&mut drawing, input, installed, (required_at, installed_at), (left, right), fonts);
    } else {
        let text = format!("required {}", length_text(input.required, input.unit, Towards::Greater));
        drawing.strong(at(required_at, 4.0), text, TEXT, Anchor::End, Role::Ink);
    }
    drawing.outline(at(left, top), required_at - left, BAND, Role::Ink, 0.25);
    drawing.line(&[at(left, top - 1.6), at(left, bottom + 1.6)], Role::Ink, 0.6);
    drawing
}

/// Labels of parts too narrow to hold them, below the band with leaders, on as many rows as they need. Gives the rows.
fn draw_outer_labels(
    drawing: &mut Drawing,
    labels: &[(f32, f32, String)],
    left: f32,
    right: f32,
    bottom: f32,
) -> usize {
    let fits = |rows: usize| {
        (0..rows)
            .all(|row| labels.iter().skip(row).step_by(rows).map(|label| label.1 + 3.0).sum::<f32>() <= right - left)
    };
    let rows = (1..=labels.len().max(1)).find(|rows| fits(*rows)).unwrap_or(labels.len().max(1));
    for row in 0..rows {
        let here: Vec<_> = labels.iter().skip(row).step_by(rows).collect();
        let middles: Vec<f32> = here.iter().map(|label| label.0).collect();
        let sizes: Vec<f32> = here.iter().map(|label| label.1 + 3.0).collect();
        let y = bottom + 5.6 + row as f32 * 4.2;
        for (label, x) in here.iter().zip(spread(&middles, &sizes, left - 1.5, right + 1.5)) {
            drawing.line(&[at(label.0, bottom), at(label.0, bottom + 1.2), at(x, y - 2.7)], Role::Faint, THIN);
            drawing.text(at(x, y), &label.2, TEXT, Anchor::Middle, Role::Ink);
        }
    }
    rows
}

/// The two distances above the band, moved apart where they would run into each other or out of the sheet.
fn draw_ends(
    drawing: &mut Drawing,
    input: &StripInput,
    installed: Length,
    (required_at, installed_at): (f32, f32),
    (left, right): (f32, f32),
    fonts: &Fonts,
) {
    let texts = [
        format!("required {}", length_text(input.required, input.unit, Towards::Greater)),
        format!("installed {}", length_text(installed, input.unit, Towards::Smaller)),
    ];
    let sizes = texts.each_ref().map(|text| fonts.width(text, TEXT, Weight::SemiBold) + 4.0);
    let from = left + fonts.width("hazard", TEXT, Weight::Regular) + 2.0;
    let placed = spread(&[required_at, installed_at], &sizes, from, right + 2.0);
    for ((text, x), role) in texts.iter().zip(placed).zip([Role::Ink, Role::Accent]) {
        drawing.strong(at(x, 4.0), text, TEXT, Anchor::Middle, role);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_strip_is_to_scale_and_stays_on_its_sheet() {
        let part = |label: &str, mm: i64| StripPart { label: label.into(), length: Length::mm(mm), fill: stop_fill() };
        let input = StripInput {
            parts: vec![
                part("wear allowance 5 ms", 10),
                part("stopping time 150 ms", 300),
                part("device 2 ms", 4),
                part("C 86 mm", 86),
            ],
            required: Length::mm(400),
            installed: Some(Length::mm(500)),
            unit: LengthUnit::Millimetre,
        };
        let fonts = Fonts::new();
        for width in [70.0, 174.0, 400.0] {
            let drawing = reach_strip(&input, width, &fonts);
            let areas: Vec<(f32, f32)> = drawing
                .marks
                .iter()
                .filter_map(|mark| match mark {
                    crate::Mark::Area { points, .. } => Some((points[0].x, points[1].x)),
                    _ => None,
                })
                .collect();
            // The stopping time takes 300 of 500 mm.
            let per_mm = (width - 4.0) / 500.0;
            assert!(areas.iter().any(|(from, to)| (to - from - 300.0 * per_mm).abs() < 0.01), "{width}: {areas:?}");
            assert!(areas.iter().all(|(from, to)| 0.0 <= *from && *to <= width), "{width}: {areas:?}");
        }
    }
}
