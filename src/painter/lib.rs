//! How it shows: egui's tessellated meshes to pixels on the CPU, for machines with no GPU and for pictures in tests.
//!
//! The result is that of egui's own shaders on a frame buffer without sRGB conversion: vertex colour times texel, both
//! premultiplied and in gamma space, blended over what is there. A pixel belongs to a shape when its centre does; a centre on
//! a shared edge belongs to one side only (top-left rule), so that no pixel is blended twice and none is left out.
//! Paint callbacks are GPU code and are passed over.

mod image;
mod quad;
mod texture;
mod triangle;

use std::collections::HashMap;

use egui::epaint::{ClippedPrimitive, Primitive, textures::TexturesDelta};
use egui::{Color32, Mesh, Rect, TextureId};

pub use image::Image;
use texture::Texture;

/// Paints frames of egui into an image, keeping the textures between frames.
#[derive(Default)]
pub struct Painter {
    textures: HashMap<TextureId, Texture>,
    image: Image,
}

/// The pixels that a mesh may touch: left, top, right, bottom, the last two left out.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Clip {
    pub left: i32,
    pub top: i32,
    pub right: i32,
    pub bottom: i32,
}

impl Painter {
    /// A painter without textures.
    pub fn new() -> Self {
        Self::default()
    }

    /// Takes over new and changed textures. Call before [`Self::paint`], and [`Self::free_textures`] after it.
    pub fn set_textures(&mut self, delta: &TexturesDelta) {
        for (id, change) in delta.set.iter().flat_map(|(id, changes)| changes.iter().map(move |change| (id, change))) {
            match change.pos {
                None => {
                    self.textures.insert(*id, Texture::new(change));
                }
                Some(at) => {
                    if let Some(texture) = self.textures.get_mut(id) {
                        texture.update(at, change);
                    }
                }
            }
        }
    }

    /// Forgets textures that are no longer needed, and empties the list of changes, which are all carried out by now.
    pub fn free_textures(&mut self, mut delta: TexturesDelta) {
        for id in &delta.free {
            self.textures.remove(id);
        }
        delta.clear();
    }

    /// Paints one frame of `size` pixels on a ground of `clear`.
    pub fn paint(
        &mut self,
        size: [usize; 2],
        pixels_per_point: f32,
        clear: Color32,
        primitives: &[ClippedPrimitive],
    ) -> &Image {
        self.image.reset(size, clear);
        for ClippedPrimitive { clip_rect, primitive } in primitives {
            let Primitive::Mesh(mesh) = primitive else { continue };
            let Some(texture) = self.textures.get(&mesh.texture_id) else { continue };
            let clip = clip_of(*clip_rect, pixels_per_point, size);
            if clip.left < clip.right && clip.top < clip.bottom {
                paint_mesh(&mut self.image, mesh, texture, pixels_per_point, clip);
            }
        }
        &self.image
    }
}

/// Clip rectangles fall on whole pixels, rounded as egui's OpenGL backend rounds its scissors.
fn clip_of(rect: Rect, pixels_per_point: f32, size: [usize; 2]) -> Clip {
    let pixel = |points: f32, most: usize| (points * pixels_per_point).round().clamp(0.0, most as f32) as i32;
    Clip {
        left: pixel(rect.min.x, size[0]),
        top: pixel(rect.min.y, size[1]),
        right: pixel(rect.max.x, size[0]),
        bottom: pixel(rect.max.y, size[1]),
    }
}

fn paint_mesh(image: &mut Image, mesh: &Mesh, texture: &Texture, pixels_per_point: f32, clip: Clip) {
    let mut indices = mesh.indices.as_slice();
    while indices.len() >= 3 {
        // Rectangles and glyphs come as two triangles round four vertices; they fill most of a window.
        if let Some(quad) = quad::Quad::from_indices(mesh, indices, pixels_per_point) {
            quad.paint(image, texture, clip);
            indices = &indices[6..];
            continue;
        }
        let corner = |at: usize| mesh.vertices.get(indices[at] as usize);
        if let (Some(a), Some(b), Some(c)) = (corner(0), corner(1), corner(2)) {
            triangle::paint(image, texture, [a, b, c], pixels_per_point, clip);
        }
        indices = &indices[3..];
    }
}
