//! Small hand-made scenes, and the picture they give.

use std::sync::Arc;

use egui::epaint::{ImageDelta, Primitive, Vertex};
use egui::{ClippedPrimitive, Color32, ColorImage, Mesh, Pos2, Rect, TextureId, TextureOptions, TexturesDelta, pos2};
use painter::{Image, Painter};

/// The texture of shapes and letters.
pub const ATLAS: TextureId = TextureId::Managed(0);

pub fn rgba(r: u8, g: u8, b: u8, a: u8) -> Color32 {
    Color32::from_rgba_premultiplied(r, g, b, a)
}

/// A painter whose atlas is one white texel.
pub fn painter() -> Painter {
    let mut painter = Painter::new();
    set(&mut painter, ATLAS, None, &[&[Color32::WHITE]]);
    painter
}

/// Sets a texture, or a part of it, from rows of texels, with the filter "nearest".
pub fn set(painter: &mut Painter, id: TextureId, pos: Option<[usize; 2]>, rows: &[&[Color32]]) {
    set_with(painter, id, pos, rows, TextureOptions::NEAREST);
}

pub fn set_with(
    painter: &mut Painter,
    id: TextureId,
    pos: Option<[usize; 2]>,
    rows: &[&[Color32]],
    options: TextureOptions,
) {
    let size = [rows.first().map_or(0, |row| row.len()), rows.len()];
    let image = Arc::new(ColorImage::new(size, rows.concat()));
    let change = match pos {
        Some(pos) => ImageDelta::partial(pos, image, options),
        None => ImageDelta::full(image, options),
    };
    let mut delta = TexturesDelta::default();
    delta.push(id, change);
    painter.update_textures(&delta);
    delta.clear();
}

pub fn mesh(texture: TextureId, vertices: &[(Pos2, Pos2, Color32)], indices: &[u32]) -> Mesh {
    let vertex = |(pos, uv, color): &(Pos2, Pos2, Color32)| Vertex { pos: *pos, uv: *uv, color: *color };
    Mesh { indices: indices.to_vec(), vertices: vertices.iter().map(vertex).collect(), texture_id: texture }
}

/// A triangle in one colour.
pub fn triangle(points: [(f32, f32); 3], color: Color32) -> Mesh {
    let vertices = points.map(|(x, y)| (pos2(x, y), Pos2::ZERO, color));
    mesh(ATLAS, &vertices, &[0, 1, 2])
}

/// A rectangle the way egui makes one.
pub fn rect(left: f32, top: f32, right: f32, bottom: f32, color: Color32) -> Mesh {
    let mut mesh = Mesh::default();
    let corners = [pos2(left, top), pos2(right, bottom)];
    mesh.add_colored_rect(Rect::from_min_max(corners[0], corners[1]), color);
    mesh
}

/// A rectangle that shows part of a texture, the way egui makes a letter.
pub fn picture(texture: TextureId, place: Rect, uv: Rect, tint: Color32) -> Mesh {
    let mut mesh = Mesh::with_texture(texture);
    mesh.add_rect_with_uv(place, uv, tint);
    mesh
}

pub fn unclipped(mesh: Mesh) -> ClippedPrimitive {
    clipped(Rect::EVERYTHING, mesh)
}

pub fn clipped(clip_rect: Rect, mesh: Mesh) -> ClippedPrimitive {
    ClippedPrimitive { clip_rect, primitive: Primitive::Mesh(mesh) }
}

/// Whole pixels as a rectangle.
pub fn area(left: f32, top: f32, right: f32, bottom: f32) -> Rect {
    Rect::from_min_max(pos2(left, top), pos2(right, bottom))
}

pub fn colors(image: &Image) -> Vec<Vec<Color32>> {
    image.to_color_image().pixels.chunks(image.width().max(1)).map(<[Color32]>::to_vec).collect()
}

/// The picture as text: `.` where the background shows, `#` elsewhere.
pub fn marks(image: &Image, background: Color32) -> Vec<String> {
    let mark = |color: &Color32| if *color == background { '.' } else { '#' };
    colors(image).iter().map(|row| row.iter().map(mark).collect()).collect()
}
