//! Pictures of the program's screens without a window, the same on every machine.

use egui::{Color32, Context, FullOutput, TexturesDelta};
use egui_kittest::TestRenderer;
use image::RgbaImage;
use painter::Painter;

/// Draws a test harness with the program's own painter:
/// `Harness::builder().renderer(CpuRenderer::default())`.
#[derive(Default)]
pub struct CpuRenderer {
    painter: Painter,
}

impl TestRenderer for CpuRenderer {
    fn handle_delta(&mut self, delta: &mut TexturesDelta) {
        self.painter.update_textures(delta);
        delta.clear();
    }

    fn render(&mut self, ctx: &Context, output: &FullOutput) -> Result<RgbaImage, String> {
        let scale = ctx.pixels_per_point();
        let size = ctx.content_rect().size() * scale;
        let size = [size.x.round() as u32, size.y.round() as u32];
        let primitives = ctx.tessellate(output.shapes.clone(), scale);
        let image = self.painter.paint(size, scale, Color32::TRANSPARENT, &primitives);
        RgbaImage::from_raw(size[0], size[1], image.to_rgba8())
            .ok_or_else(|| format!("no picture of {} by {} pixels", size[0], size[1]))
    }
}
