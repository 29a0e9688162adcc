//! The predicted stop over time: one curve at a time, with the spans of the stop marked.

use calc::motion::CurvePoint;
use egui::{Align2, RichText, Ui};
use egui_plot::{HoverPosition, Line, LineStyle, Plot, PlotPoint, PlotPoints, Text, VLine};
use figure::Role;

use super::height_left;
use super::state::PredictedStop;
use crate::window::theme;
use crate::window::widgets::segments_ui;

/// Which curve.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub enum Curve {
    #[default]
    CrankSpeed,
    SlideSpeed,
    Travel,
    Torque,
    Pressure,
}

impl Curve {
    const fn unit(self) -> &'static str {
        match self {
            Self::CrankSpeed => "1/min",
            Self::SlideSpeed => "mm/s",
            Self::Travel => "mm",
            Self::Torque => "N m",
            Self::Pressure => "bar",
        }
    }

    fn of(self, point: &CurvePoint, first: &CurvePoint) -> Option<f64> {
        Some(match self {
            Self::CrankSpeed => point.crank_speed_rad_s * 60.0 / std::f64::consts::TAU,
            Self::SlideSpeed => point.slide_speed_m_s * 1e3,
            Self::Travel => (point.travel_m - first.travel_m) * 1e3,
            Self::Torque => point.brake_torque_nm,
            Self::Pressure => point.pressure_pa? * 1e-5,
        })
    }
}

const TIMED: [(Curve, &str); 4] = [
    (Curve::CrankSpeed, "Crank speed"),
    (Curve::SlideSpeed, "Slide speed"),
    (Curve::Travel, "Slide travel"),
    (Curve::Torque, "Brake torque"),
];

/// Shows the curves.
pub fn curves_ui(ui: &mut Ui, tag: &str, stop: &PredictedStop, curve: &mut Curve) {
    let points = &stop.curves.points;
    let Some(first) = points.first() else { return };
    let mut choices = TIMED.to_vec();
    if first.pressure_pa.is_some() {
        choices.push((Curve::Pressure, "Pressure"));
    } else if *curve == Curve::Pressure {
        *curve = Curve::CrankSpeed;
    }
    if let Some(other) = segments_ui(ui, "Over time:", *curve, &choices) {
        *curve = other;
    }
    let shown = *curve;
    let name = choices.iter().find(|choice| choice.0 == shown).map_or("", |choice| choice.1);
    let series: PlotPoints =
        points.iter().filter_map(|point| Some([point.time_s * 1e3, shown.of(point, first)?])).collect();
    let context = ui.ctx().clone();
    let colour = |role| theme::colour(&context, role);
    let spans = stop.curves.stop.spans;
    let ends = [
        ("delay over", spans.delay_s),
        ("clutch lets go", spans.delay_s + spans.clutch_release_s),
        ("brake built up", spans.delay_s + spans.clutch_release_s + spans.build_up_s),
    ];
    Plot::new(("stop curve", tag, shown.unit()))
        .height(height_left(ui, 8.0, 160.0, 300.0))
        .allow_scroll(false)
        .allow_drag(false)
        .allow_zoom(false)
        .show_grid([false, true])
        .x_grid_spacer(egui_plot::uniform_grid_spacer(|input| {
            // About one labelled step for every eighth of the width.
            let wide = input.bounds.1 - input.bounds.0;
            let step = [5.0, 10.0, 20.0, 50.0, 100.0, 200.0, 500.0]
                .into_iter()
                .find(|step| wide / step <= 12.0)
                .unwrap_or(1000.0);
            [step, step * 5.0, step * 10.0]
        }))
        .grid_spacing(egui::Rangef::new(4.0, 60.0))
        .x_axis_formatter(|mark, _| format!("{} ms", mark.value))
        .y_axis_formatter(move |mark, _| {
            // Nothing is negative here but slide speed and travel; a label below 0 would read as if it could be.
            let is_shown = 0.0 <= mark.value || matches!(shown, Curve::SlideSpeed | Curve::Travel);
            if is_shown { format!("{} {}", mark.value, shown.unit()).replace('-', "\u{2212}") } else { String::new() }
        })
        .label_formatter(move |hover| match hover {
            HoverPosition::NearDataPoint { position, .. } => {
                Some(format!("{:.1} ms\n{:.1} {}", position.x, position.y, shown.unit()))
            }
            HoverPosition::Elsewhere { .. } => None,
        })
        .include_y(0.0)
        .show(ui, |plot| {
            let mut before = f64::NEG_INFINITY;
            for (what, at_s) in ends {
                // Ends that fall together are drawn once.
                if before + 1e-6 < at_s && at_s + 1e-6 < stop.curves.stop.stop_time_s {
                    let line =
                        VLine::new(what, at_s * 1e3).color(colour(Role::Hatching)).style(LineStyle::dashed_dense());
                    plot.vline(line);
                    let label = RichText::new(what).size(11.5).color(colour(Role::Faint));
                    let at = PlotPoint::new(at_s * 1e3, plot.plot_bounds().min()[1]);
                    plot.text(Text::new(what, at, label).anchor(Align2::LEFT_BOTTOM));
                    before = at_s;
                }
            }
            plot.line(Line::new(name, series).color(colour(Role::Accent)).width(2.0));
        });
}
