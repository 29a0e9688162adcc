//! The colours of dial and dot plot.

use eframe::egui::{Color32, Visuals};

/// The colours of a drawing.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Ink {
    /// Figures and words.
    pub text: Color32,
    /// Scales and lesser words.
    pub faint: Color32,
    /// Rings and grid lines.
    pub line: Color32,
    /// What is chosen.
    pub accent: Color32,
    /// Bars that are not chosen.
    pub bar: Color32,
    /// The allowed time.
    pub limit: Color32,
    /// The ground.
    pub ground: Color32,
}

impl Ink {
    /// The colours of the theme.
    pub fn of(visuals: &Visuals) -> Self {
        Self {
            text: visuals.text_color(),
            faint: visuals.weak_text_color(),
            line: visuals.widgets.noninteractive.bg_stroke.color,
            accent: visuals.hyperlink_color,
            bar: visuals.weak_text_color(),
            limit: visuals.error_fg_color,
            ground: visuals.panel_fill,
        }
    }
}
