//! The chart of readings: hover reads date, value and who; the wheel zooms; limits are labelled on the line.

use calc::monthly::{Consequence, Standing, date_of, day_of};
use calc::round::{Towards, time_text};
use egui::{Align2, RichText, Ui};
use egui_plot::{HLine, HoverPosition, Line, LineStyle, Plot, PlotPoint, PlotPoints, Points, Text, VLine};
use figure::{Role, readings_chart};

use crate::window::context::SheetContext;
use crate::window::theme;

/// The name of the series of readings within the plot.
const READINGS: &str = "readings";

/// Shows the chart: the same series that the record prints.
pub fn plot_ui(ui: &mut Ui, cx: &SheetContext, standing: &Standing) {
    let chart = readings_chart(cx.press, standing, cx.today);
    if chart.points.is_empty() {
        return;
    }
    let context = ui.ctx().clone();
    let colour = |role| theme::colour(&context, role);
    let ground = ui.visuals().extreme_bg_color;
    let readings = &cx.press.readings;
    let points = standing.series.points.clone();
    let words_of = move |index: usize| -> Option<String> {
        let point = points.get(index)?;
        let reading = &readings[point.reading];
        let by = if reading.by.is_empty() { String::new() } else { format!(", {}", reading.by) };
        Some(format!("{}{by}\nmean {:.2} ms, longest {:.2} ms", reading.at, point.mean_ms, point.greatest_ms))
    };
    Plot::new(("readings plot", &cx.press.tag))
        .height(250.0)
        .show_grid([false, true])
        .allow_scroll(false)
        .x_axis_formatter(|mark, _| {
            date_of(mark.value).map_or(String::new(), |on| format!("{}-{:02}", on.year(), on.month()))
        })
        .y_axis_formatter(|mark, _| {
            format!("{} ms", calc::round::thousandths_text((mark.value * 1000.0).round() as i64))
        })
        .label_formatter(move |hover| match hover {
            HoverPosition::NearDataPoint { plot_name: READINGS, index, .. } => words_of(*index),
            _ => None,
        })
        .include_x(chart.range.0)
        .include_x(chart.range.1)
        .show(ui, |plot| {
            for marker in &chart.markers {
                plot.vline(
                    VLine::new(marker.label.clone(), marker.x)
                        .color(colour(Role::Retime))
                        .style(LineStyle::dashed_loose()),
                );
            }
            let mut below: Option<(f64, bool)> = None;
            let bounds = plot.plot_bounds();
            let close = (bounds.max()[1] - bounds.min()[1]) * 0.09;
            for line in &standing.lines {
                let role = match line.consequence {
                    Consequence::Warn => Role::Unproven,
                    Consequence::Retime => Role::Retime,
                    Consequence::StopUsing => Role::Short,
                };
                let value = line.value.to_f64();
                plot.hline(HLine::new(line.name, value).color(colour(role)).width(1.2));
                let words = format!("{} {}", line.name, time_text(line.value, Towards::Smaller));
                let label = RichText::new(words).size(12.0).color(colour(role)).background_color(ground);
                // Labels of limits that lie close stand at opposite ends.
                let is_left = below.is_none_or(|(other, was_left)| value - other > close || !was_left);
                below = Some((value, is_left));
                let (x, anchor) =
                    if is_left { (chart.range.0, Align2::LEFT_BOTTOM) } else { (chart.range.1, Align2::RIGHT_BOTTOM) };
                plot.text(Text::new(line.name, PlotPoint::new(x, value), label).anchor(anchor));
            }
            for line in &chart.lines {
                let series: PlotPoints = line.points.iter().map(|(x, y)| [*x, *y]).collect();
                let style = if line.is_dashed { LineStyle::dashed_dense() } else { LineStyle::Solid };
                plot.line(Line::new("trend", series).color(colour(line.role)).style(style).width(1.2));
            }
            let dots: PlotPoints = chart.points.iter().map(|point| [point.x, point.y]).collect();
            plot.points(Points::new(READINGS, dots).radius(3.2).color(colour(Role::Accent)));
            for marker in &chart.markers {
                let label = RichText::new(&marker.label).size(12.0).color(colour(Role::Retime));
                let top = plot.plot_bounds().max()[1];
                plot.text(Text::new("event", PlotPoint::new(marker.x, top), label).anchor(Align2::LEFT_TOP));
            }
            let today = day_of(cx.today);
            plot.vline(VLine::new("today", today).color(colour(Role::Rule)));
        });
}
