//! The colours of dial and dot plot.

use egui::{Color32, Context};
use figure::Role;

use crate::window::theme;

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
    /// The colours of the theme that is shown.
    pub fn of(context: &Context) -> Self {
        let colour = |role| theme::colour(context, role);
        Self {
            text: colour(Role::Ink),
            faint: colour(Role::Faint),
            line: colour(Role::Rule),
            accent: colour(Role::Accent),
            bar: colour(Role::Hatching),
            limit: colour(Role::Short),
            ground: colour(Role::Ground),
        }
    }
}
