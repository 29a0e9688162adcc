//! The stop dial: the crank circle with one bar for each test that counts, at the crank angle of its stop command.
//!
//! Where the crank came to rest is not recorded, so no arc of travel is drawn. A bar's length is time: it runs outwards from
//! the hub as long as the value taken forward, over rings of equal time. The dots on it are the single stops.

use calc::round::{Towards, time_text};
use calc::units::{Angle, Time};
use egui::{Align2, FontId, Pos2, Shape, Stroke, Vec2, vec2};

use super::ink::Ink;

/// One test on the dial.
#[derive(Clone, PartialEq, Debug)]
pub struct Bar {
    /// Crank angle of the stop command.
    pub angle: Angle,
    /// The value taken forward.
    pub value: Time,
    /// The single stops.
    pub stops: Vec<Time>,
    /// Whether its value decides.
    pub governs: bool,
    /// Whether it is the chosen test.
    pub chosen: bool,
}

/// The direction from the hub for a crank angle: 0° points up, the crank runs clockwise.
pub fn direction(angle: Angle) -> Vec2 {
    let turn = (angle.to_f64() as f32).to_radians();
    vec2(turn.sin(), -turn.cos())
}

/// The time from one ring to the next, so that three to six rings reach past `longest`.
pub fn ring_step(longest: Time) -> Time {
    let steps = [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000].map(Time::ms);
    steps.into_iter().find(|step| step.base() * 5 > longest.base()).unwrap_or(Time::ms(5000))
}

/// How far each bar is moved sideways, in bar widths, so that tests of one angle stand side by side.
pub fn side_steps(bars: &[Bar]) -> Vec<f32> {
    bars.iter()
        .enumerate()
        .map(|(index, bar)| {
            let same = |other: &&Bar| other.angle == bar.angle;
            let before = bars[..index].iter().filter(same).count() as f32;
            let all = bars.iter().filter(same).count() as f32;
            before - (all - 1.0) / 2.0
        })
        .collect()
}

const HUB: f32 = 22.0;
const BAR: f32 = 7.0;

/// Draws the dial into a square of `size`.
pub fn dial_ui(ui: &mut egui::Ui, size: f32, bars: &[Bar], allowed: Option<Time>, ink: &Ink) {
    let (rect, response) = ui.allocate_exact_size(vec2(size, size), egui::Sense::hover());
    let words = spoken(bars, allowed);
    response.widget_info(|| egui::WidgetInfo::labeled(egui::Role::Image, true, words.clone()));
    let painter = ui.painter_at(rect);
    let (centre, outer) = (rect.center(), size / 2.0 - 36.0);
    let longest = bars.iter().map(|bar| bar.value).chain(allowed).max().unwrap_or(Time::ms(100));
    let step = ring_step(longest);
    let rings = longest.base() / step.base() + 1;
    let radius = |time: Time| HUB + (outer - HUB) * time.base() as f32 / (rings * step.base()) as f32;
    for ring in 0..=rings {
        painter.circle_stroke(centre, radius(Time::from_base(ring * step.base())), Stroke::new(1.0, ink.line));
    }
    draw_angles(&painter, centre, outer, ink);
    for (bar, side) in bars.iter().zip(side_steps(bars)) {
        draw_bar(&painter, centre, bar, side, &radius, ink);
    }
    if let Some(allowed) = allowed {
        draw_allowed(&painter, centre, radius(allowed), ink);
    }
    let scale = FontId::proportional(11.0);
    let towards = free_direction(bars);
    for ring in 1..=rings {
        let time = Time::from_base(ring * step.base());
        let text = if ring == rings { time_text(time, Towards::Nearest) } else { time.digits() };
        label(
            &painter,
            centre + direction(towards) * radius(time),
            Align2::CENTER_CENTER,
            &text,
            &scale,
            ink.faint,
            ink,
        );
    }
}

/// The direction along which the ring labels stand: the one, of eight between the quarters, that is farthest from any bar.
fn free_direction(bars: &[Bar]) -> Angle {
    let gap = |angle: &i64| {
        let apart = |bar: &Bar| {
            let apart = (bar.angle.base() - angle).rem_euclid(360_000);
            apart.min(360_000 - apart)
        };
        bars.iter().map(apart).min().unwrap_or(0)
    };
    let between = [315_000, 225_000, 45_000, 135_000, 292_500, 247_500, 337_500, 202_500];
    let mut best = between[0];
    for angle in between {
        if gap(&angle) > gap(&best) {
            best = angle;
        }
    }
    Angle::from_base(best)
}

fn draw_angles(painter: &egui::Painter, centre: Pos2, outer: f32, ink: &Ink) {
    for ten in 0..36 {
        let way = direction(Angle::deg(ten * 10));
        let long = if ten % 9 == 0 { 7.0 } else { 3.0 };
        painter.line_segment([centre + way * outer, centre + way * (outer + long)], Stroke::new(1.0, ink.faint));
    }
    let font = FontId::proportional(12.0);
    for (angle, anchor) in
        [(0, Align2::CENTER_BOTTOM), (90, Align2::LEFT_CENTER), (180, Align2::CENTER_TOP), (270, Align2::RIGHT_CENTER)]
    {
        let at = centre + direction(Angle::deg(angle)) * (outer + 9.0);
        painter.text(at, anchor, format!("{angle}°"), font.clone(), ink.text);
    }
    draw_running_direction(painter, centre, ink);
}

/// A short arrow round the hub, clockwise.
fn draw_running_direction(painter: &egui::Painter, centre: Pos2, ink: &Ink) {
    let radius = HUB - 9.0;
    let points: Vec<Pos2> = (-12..=12).map(|step| centre + direction(Angle::deg(step * 10)) * radius).collect();
    let tip = centre + direction(Angle::deg(140)) * radius;
    let end = points[points.len() - 1];
    let along = (tip - end).normalized();
    painter.add(Shape::line(points, Stroke::new(1.5, ink.faint)));
    painter.add(Shape::convex_polygon(
        vec![end + along * 6.0, end + along.rot90() * 3.5, end - along.rot90() * 3.5],
        ink.faint,
        Stroke::NONE,
    ));
}

fn draw_bar(painter: &egui::Painter, centre: Pos2, bar: &Bar, side: f32, radius: &impl Fn(Time) -> f32, ink: &Ink) {
    let way = direction(bar.angle);
    let aside = way.rot90() * side * (BAR + 2.0);
    let at = |time: Time| centre + aside + way * radius(time);
    let colour = if bar.governs || bar.chosen { ink.accent } else { ink.bar };
    let (from, to) = (at(Time::ZERO), at(bar.value));
    painter.line_segment([from, to], Stroke::new(BAR, if bar.chosen { colour } else { colour.gamma_multiply(0.55) }));
    if bar.governs {
        let across = way.rot90() * (BAR / 2.0 + 4.0);
        painter.line_segment([to - across, to + across], Stroke::new(2.5, ink.text));
    }
    for stop in &bar.stops {
        painter.circle_filled(at(*stop), 1.6, ink.ground);
    }
}

fn draw_allowed(painter: &egui::Painter, centre: Pos2, radius: f32, ink: &Ink) {
    let points: Vec<Pos2> = (0..=180).map(|step| centre + direction(Angle::deg(step * 2)) * radius).collect();
    painter.extend(Shape::dashed_line(&points, Stroke::new(1.5, ink.limit), 6.0, 4.0));
}

/// Text on a patch of the ground, so that a line under it does not run through the letters.
fn label(
    painter: &egui::Painter,
    at: Pos2,
    anchor: Align2,
    text: &str,
    font: &FontId,
    colour: egui::Color32,
    ink: &Ink,
) {
    let galley = painter.layout_no_wrap(text.to_owned(), font.clone(), colour);
    let rect = anchor.anchor_size(at, galley.size());
    painter.rect_filled(rect.expand2(vec2(2.0, 0.0)), 0.0, ink.ground);
    painter.galley(rect.min, galley, colour);
}

/// The dial in words, for those who do not see it.
fn spoken(bars: &[Bar], allowed: Option<Time>) -> String {
    let mut words = String::from("Stop dial.");
    for bar in bars {
        let governs = if bar.governs { ", governs" } else { "" };
        words.push_str(&format!(" {}°: {}{governs}.", bar.angle.digits(), time_text(bar.value, Towards::Greater)));
    }
    if let Some(allowed) = allowed {
        words.push_str(&format!(" Allowed: {}.", time_text(allowed, Towards::Smaller)));
    }
    words
}

#[cfg(test)]
mod tests {
    use super::*;

    fn bar(angle: i64) -> Bar {
        Bar { angle: Angle::deg(angle), value: Time::ms(180), stops: Vec::new(), governs: false, chosen: false }
    }

    #[test]
    fn zero_is_on_top_and_the_crank_runs_clockwise() {
        for (angle, expected) in
            [(0, vec2(0.0, -1.0)), (90, vec2(1.0, 0.0)), (180, vec2(0.0, 1.0)), (270, vec2(-1.0, 0.0))]
        {
            assert!((direction(Angle::deg(angle)) - expected).length() < 1e-6, "{angle}");
        }
    }

    #[test]
    fn three_to_six_rings_reach_past_the_longest_stop() {
        for ms in [1, 3, 9, 40, 99, 100, 101, 187, 203, 249, 250, 499, 999, 2600, 10_000] {
            let step = ring_step(Time::ms(ms));
            let rings = ms * 1000 / step.base() + 1;
            assert!(rings * step.base() > ms * 1000 && rings <= 6, "{ms} ms in {rings} rings of {step}");
        }
    }

    #[test]
    fn tests_of_one_angle_stand_side_by_side() {
        assert_eq!(side_steps(&[bar(90), bar(120), bar(90)]), [-0.5, 0.0, 0.5]);
    }

    #[test]
    fn ring_labels_keep_away_from_the_bars() {
        let bars = [bar(300), bar(240), bar(40)];
        assert_eq!(free_direction(&bars), Angle::deg(135));
    }
}
