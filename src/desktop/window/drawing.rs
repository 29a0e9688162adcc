//! Shows a drawing of the `figure` crate: the same marks that are printed.

use egui::{Align2, Color32, FontId, Pos2, Rect, Response, Sense, Shape, Stroke, Ui, pos2, vec2};
use figure::{Anchor, AnswerMark, Drawing, Mark, Palette, Weight, draw_mark};

use super::theme;

/// Points on screen for a millimetre of a drawing: with it, text of 2.9 mm is as large as body text.
pub const POINTS_PER_MM: f32 = 4.6;

/// Shows a drawing in its own size and says where the pointer is.
pub fn drawing_ui(ui: &mut Ui, drawing: &Drawing) -> Response {
    let size = vec2(drawing.width, drawing.height) * POINTS_PER_MM;
    let (rect, response) = ui.allocate_exact_size(size, Sense::hover());
    if ui.is_rect_visible(rect) {
        paint(ui.painter(), rect.min, POINTS_PER_MM, theme::palette(ui.ctx()), drawing);
    }
    response
}

/// Shows a page as it prints, in a width of `points`.
pub fn page_ui(ui: &mut Ui, page: &Drawing, points: f32) {
    let scale = points / page.width;
    let (rect, _) = ui.allocate_exact_size(vec2(page.width, page.height) * scale, Sense::hover());
    if ui.is_rect_visible(rect) {
        ui.painter().rect_filled(rect, 0.0, Color32::WHITE);
        ui.painter().rect_stroke(rect, 0.0, Stroke::new(1.0, Color32::from_gray(150)), egui::StrokeKind::Outside);
        paint(&ui.painter().with_clip_rect(rect.intersect(ui.clip_rect())), rect.min, scale, Palette::Print, page);
    }
}

/// The width in millimetres of a drawing that fills what is left of a row.
pub fn width_mm(ui: &Ui) -> f32 {
    ui.available_width() / POINTS_PER_MM
}

/// The mark of an answer, `height` points high, with the answer as its name for screen readers.
pub fn mark_ui(ui: &mut Ui, mark: impl Into<AnswerMark>, height: f32) -> Response {
    let (rect, response) = ui.allocate_exact_size(vec2(height * 1.2, height), Sense::hover());
    paint_mark(ui, mark.into(), rect.center(), height);
    response
}

/// Paints the mark of an answer about a centre.
pub fn paint_mark(ui: &Ui, mark: AnswerMark, centre: Pos2, height: f32) {
    let mut drawing = Drawing::new(0.0, 0.0);
    draw_mark(&mut drawing, mark, figure::Point { x: 0.0, y: 0.0 }, height);
    paint(ui.painter(), centre, 1.0, theme::palette(ui.ctx()), &drawing);
}

fn paint(painter: &egui::Painter, origin: Pos2, scale: f32, palette: Palette, drawing: &Drawing) {
    let place = |point: &figure::Point| pos2(origin.x + point.x * scale, origin.y + point.y * scale);
    for mark in &drawing.marks {
        match mark {
            Mark::Line { points, role, width, is_dashed } => {
                let stroke = Stroke::new((width * scale).max(0.75), theme::of(palette, *role));
                let points: Vec<Pos2> = points.iter().map(place).collect();
                if *is_dashed {
                    painter.extend(Shape::dashed_line(&points, stroke, scale, scale * 0.7));
                } else {
                    painter.add(Shape::line(points, stroke));
                }
            }
            Mark::Area { points, role } => {
                let colour = theme::of(palette, *role);
                let points: Vec<Pos2> = points.iter().map(place).collect();
                match upright(&points) {
                    Some(rect) => painter.add(Shape::rect_filled(rect, 0.0, colour)),
                    None => painter.add(Shape::convex_polygon(points, colour, Stroke::NONE)),
                };
            }
            Mark::Text(text) => {
                let size = text.size * scale;
                let font = match text.weight {
                    Weight::Regular => FontId::proportional(size),
                    Weight::SemiBold => theme::strong(size),
                };
                let colour = theme::of(palette, text.role);
                let galley = painter.layout_no_wrap(text.text.clone(), font, colour);
                // A drawing gives the base line; egui places the top of the row.
                let ascent =
                    galley.rows.first().and_then(|row| row.glyphs.first()).map_or(size, |glyph| glyph.font_ascent);
                let align = match text.anchor {
                    Anchor::Start => Align2::LEFT_TOP,
                    Anchor::Middle => Align2::CENTER_TOP,
                    Anchor::End => Align2::RIGHT_TOP,
                };
                let at = place(&text.at) - vec2(0.0, ascent);
                let rect = align.anchor_size(at, galley.size());
                painter.galley(rect.min, galley, colour);
            }
        }
    }
}

/// The rectangle that four corners make, if they make an upright one: those have sharp edges on screen.
fn upright(points: &[Pos2]) -> Option<Rect> {
    let [a, b, c, d] = *points else { return None };
    (a.y == b.y && b.x == c.x && c.y == d.y && d.x == a.x).then(|| Rect::from_two_pos(a, c))
}
