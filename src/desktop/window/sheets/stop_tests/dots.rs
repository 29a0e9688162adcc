//! The dot plot: the stops of one test in the order of timing, with mean, longest stop, value taken forward and allowed time as labelled lines.

use calc::round::{Towards, time_text};
use calc::units::Time;
use egui::{Align2, Color32, FontId, Pos2, Shape, Stroke, pos2, vec2};

use super::ink::Ink;
use super::model::Figures;

/// A line across the plot.
#[derive(Clone, PartialEq, Debug)]
pub struct Mark {
    /// What stands on it.
    pub text: String,
    /// Where it lies.
    pub time: Time,
    /// Which of the lines it is.
    pub kind: MarkKind,
}

/// The lines of the plot.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum MarkKind {
    /// Arithmetic mean.
    Mean,
    /// Longest stop.
    Longest,
    /// Value taken forward.
    Taken,
    /// Allowed stopping time.
    Allowed,
}

/// The lines for one test, least time first.
pub fn marks(figures: &Figures, allowed: Option<Time>) -> Vec<Mark> {
    let mut marks = Vec::new();
    let mut put = |what: &str, time: Option<Time>, towards, kind| {
        if let Some(time) = time {
            marks.push(Mark { text: format!("{what} {}", time_text(time, towards)), time, kind });
        }
    };
    put("mean", figures.mean, Towards::Greater, MarkKind::Mean);
    put("longest", figures.longest, Towards::Greater, MarkKind::Longest);
    put("taken forward", figures.taken.map(|taken| taken.1), Towards::Greater, MarkKind::Taken);
    put("allowed", allowed, Towards::Smaller, MarkKind::Allowed);
    marks.sort_by_key(|mark| mark.time);
    marks
}

/// The span of times shown: the stops and their lines with a tenth more on either side, and the allowed time where it lies
/// near enough to leave the stops apart. `None` without stops.
pub fn span(stops: &[Time], marks: &[Mark]) -> Option<(f64, f64)> {
    let of_stops = marks.iter().filter(|mark| mark.kind != MarkKind::Allowed).map(|mark| mark.time);
    let times: Vec<f64> = stops.iter().copied().chain(of_stops).map(Time::to_f64).collect();
    if stops.is_empty() {
        return None;
    }
    let mut least = times.iter().copied().fold(f64::INFINITY, f64::min);
    let mut greatest = times.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    let reach = ((greatest - least) * 3.0).max(10.0);
    for allowed in marks.iter().filter(|mark| mark.kind == MarkKind::Allowed).map(|mark| mark.time.to_f64()) {
        if least - reach <= allowed && allowed <= greatest + reach {
            least = least.min(allowed);
            greatest = greatest.max(allowed);
        }
    }
    let margin = ((greatest - least) * 0.1).max(1.0);
    Some((least - margin, greatest + margin))
}

/// Moves labels of given middles apart until they stand at least `apart` from each other, all between `top` and `bottom`.
///
/// `middles` runs downwards; the order is kept.
pub fn spread(middles: &[f32], apart: f32, top: f32, bottom: f32) -> Vec<f32> {
    let mut placed = middles.to_vec();
    let mut least = top;
    for place in &mut placed {
        *place = place.max(least);
        least = *place + apart;
    }
    let mut most = bottom;
    for place in placed.iter_mut().rev() {
        *place = place.min(most);
        most = *place - apart;
    }
    placed
}

/// Draws the plot.
pub fn dots_ui(ui: &mut egui::Ui, size: egui::Vec2, stops: &[Time], marks: &[Mark], ink: &Ink) {
    let (rect, response) = ui.allocate_exact_size(size, egui::Sense::hover());
    let words = spoken(stops, marks);
    response.widget_info(|| egui::WidgetInfo::labeled(egui::Role::Image, true, words.clone()));
    let painter = ui.painter_at(rect);
    let font = FontId::proportional(12.0);
    let Some((least, greatest)) = span(stops, marks) else {
        painter.text(rect.center(), Align2::CENTER_CENTER, "No stops yet", font, ink.faint);
        return;
    };
    const LABELS: f32 = 152.0;
    const SCALE: f32 = 38.0;
    let plot = egui::Rect::from_min_max(rect.min + vec2(SCALE, 6.0), rect.max - vec2(LABELS, 22.0));
    let y = |ms: f64| plot.bottom() - ((ms - least) / (greatest - least)) as f32 * plot.height();
    draw_scale(&painter, plot, (least, greatest), &y, ink);
    let mut labels: Vec<&Mark> = marks.iter().collect();
    labels.reverse();
    let middles: Vec<f32> = labels.iter().map(|mark| y(mark.time.to_f64().clamp(least, greatest))).collect();
    for ((mark, from), to) in labels.iter().zip(&middles).zip(spread(&middles, 16.0, plot.top(), plot.bottom())) {
        let ms = mark.time.to_f64();
        if least <= ms && ms <= greatest {
            draw_mark(&painter, plot, mark, *from, to, ink);
        } else {
            draw_off_scale(&painter, plot, mark, to, greatest < ms, ink);
        }
    }
    let pitch = plot.width() / (stops.len() as f32 + 1.0);
    for (index, stop) in stops.iter().enumerate() {
        let at = pos2(plot.left() + pitch * (index as f32 + 1.0), y(stop.to_f64()));
        painter.circle(at, if pitch < 9.0 { 2.5 } else { 4.0 }, ink.accent, Stroke::new(1.0, ink.ground));
    }
    let under = plot.bottom() + 5.0;
    let every = (22.0 / pitch).ceil().max(1.0) as usize;
    for index in (0..stops.len()).filter(|index| index % every == 0) {
        let at = pos2(plot.left() + pitch * (index as f32 + 1.0), under);
        painter.text(at, Align2::CENTER_TOP, (index + 1).to_string(), FontId::proportional(11.0), ink.faint);
    }
    painter.text(pos2(plot.right() + 8.0, under), Align2::LEFT_TOP, "stop", FontId::proportional(11.0), ink.faint);
}

fn draw_scale(painter: &egui::Painter, plot: egui::Rect, span: (f64, f64), y: &impl Fn(f64) -> f32, ink: &Ink) {
    let step = [1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0, 200.0, 500.0, 1000.0, 2000.0, 5000.0]
        .into_iter()
        .find(|step| (span.1 - span.0) / step <= 6.0)
        .unwrap_or(5000.0);
    let font = FontId::proportional(11.0);
    let first = (span.0 / step).ceil() as i64;
    let last = (span.1 / step).floor() as i64;
    for count in first..=last {
        let ms = count as f64 * step;
        painter.hline(plot.x_range(), y(ms), Stroke::new(1.0, ink.line));
        let text = (count * step as i64).to_string();
        painter.text(pos2(plot.left() - 6.0, y(ms)), Align2::RIGHT_CENTER, text, font.clone(), ink.faint);
    }
    painter.text(pos2(plot.left() - 6.0, plot.bottom() + 5.0), Align2::RIGHT_TOP, "ms", font, ink.faint);
}

/// A line over the plot that bends to its label beside it.
fn draw_mark(painter: &egui::Painter, plot: egui::Rect, mark: &Mark, from: f32, to: f32, ink: &Ink) {
    let (colour, width): (Color32, f32) = match mark.kind {
        MarkKind::Mean => (ink.faint, 1.0),
        MarkKind::Longest => (ink.text, 1.0),
        MarkKind::Taken => (ink.accent, 2.0),
        MarkKind::Allowed => (ink.limit, 1.5),
    };
    let stroke = Stroke::new(width, colour);
    let right = plot.right();
    let line: Vec<Pos2> =
        vec![pos2(plot.left(), from), pos2(right, from), pos2(right + 12.0, to), pos2(right + 18.0, to)];
    match mark.kind {
        MarkKind::Allowed => painter.extend(Shape::dashed_line(&line, stroke, 6.0, 4.0)),
        MarkKind::Mean => painter.extend(Shape::dashed_line(&line, stroke, 2.0, 3.0)),
        _ => {
            painter.add(Shape::line(line, stroke));
        }
    }
    let ink_of_text = if mark.kind == MarkKind::Mean { ink.text } else { colour };
    painter.text(pos2(right + 22.0, to), Align2::LEFT_CENTER, &mark.text, FontId::proportional(12.0), ink_of_text);
}

/// The label of a line that lies beyond the scale, with a triangle that points to where it lies.
fn draw_off_scale(painter: &egui::Painter, plot: egui::Rect, mark: &Mark, at: f32, is_above: bool, ink: &Ink) {
    let up = if is_above { -1.0 } else { 1.0 };
    let middle = pos2(plot.right() + 14.0, at);
    let corners = vec![middle + vec2(0.0, 4.0 * up), middle + vec2(4.0, -3.0 * up), middle + vec2(-4.0, -3.0 * up)];
    painter.add(Shape::convex_polygon(corners, ink.limit, Stroke::NONE));
    painter.text(pos2(plot.right() + 22.0, at), Align2::LEFT_CENTER, &mark.text, FontId::proportional(12.0), ink.limit);
}

/// The plot in words, for those who do not see it.
fn spoken(stops: &[Time], marks: &[Mark]) -> String {
    let mut words = format!("Dot plot of {} stops.", stops.len());
    for mark in marks {
        words.push_str(&format!(" {}.", calc::assess::capitalised(&mark.text)));
    }
    words
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::window::sheets::sample::{TEN, ms, plant_settings};

    #[test]
    fn every_known_line_is_there_least_first() {
        let figures = Figures::of(&ms(&TEN), &plant_settings());
        let texts: Vec<String> = marks(&figures, Some(Time::ms(192))).into_iter().map(|mark| mark.text).collect();
        assert_eq!(texts, ["mean 183.7 ms", "longest 187 ms", "taken forward 189.4 ms", "allowed 192 ms"]);
        assert!(marks(&Figures::default(), None).is_empty());
    }

    #[test]
    fn everything_lies_inside_the_span() {
        let stops = ms(&TEN);
        let with = |allowed| marks(&Figures::of(&stops, &plant_settings()), Some(Time::ms(allowed)));
        let (least, greatest) = span(&stops, &with(200)).unwrap();
        assert!(least < 181.0 && 200.0 < greatest);
        let (_, greatest) = span(&stops, &with(400)).unwrap();
        assert!(189.4 < greatest && greatest < 200.0, "a limit far away does not press the stops together");
        assert_eq!(span(&[], &[]), None);
        let (least, greatest) = span(&ms(&[180, 180]), &[]).unwrap();
        assert!(least < 180.0 && 180.0 < greatest);
    }

    #[test]
    fn labels_keep_their_distance_order_and_place_on_the_plot() {
        assert_eq!(spread(&[10.0, 50.0, 90.0], 16.0, 0.0, 100.0), [10.0, 50.0, 90.0]);
        assert_eq!(spread(&[10.0, 12.0, 13.0], 16.0, 0.0, 100.0), [10.0, 26.0, 42.0]);
        assert_eq!(spread(&[97.0, 98.0, 99.0], 16.0, 0.0, 100.0), [68.0, 84.0, 100.0]);
    }
}
