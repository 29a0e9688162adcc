//! What is drawn: reach strip, dot plot and charts as lines, areas and text in millimetres.
//!
//! A [`Drawing`] is a value without a window or a page. The same drawing is shown on screen and printed: what is seen is what
//! is printed. Colours are roles that a [`Palette`] resolves; areas differ by hatching as well, so that a black-and-white copy
//! can be read.

mod chart;
mod dots;
mod drawing;
mod fonts;
mod heat;
mod labels;
mod marks;
mod palette;
mod reach_strip;
mod readings_chart;
mod scale;

pub use chart::{Chart, ChartLine, ChartPoint, Marker, chart};
pub use dots::{DotRow, Level, dot_plot};
pub use drawing::{Anchor, Drawing, Fill, Hatch, Mark, Point, Text, Weight};
pub use fonts::{Fonts, REGULAR, SEMI_BOLD};
pub use heat::heat;
pub use marks::{AnswerMark, draw_mark};
pub use palette::{Palette, Rgb, Role};
pub use reach_strip::{StripInput, StripPart, reach_strip};
pub use readings_chart::readings_chart;
pub use scale::{Scale, ticks};
