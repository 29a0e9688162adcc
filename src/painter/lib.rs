//! How it shows: egui's meshes to pixels on the CPU.
//!
//! egui hands every frame over as a list of clipped triangle meshes and a list of texture changes.
//! [`Painter`] turns them into pixels with nothing but the processor, so a window opens on a
//! machine without any graphics driver, and a test sees the same picture on every machine.
//!
//! The result follows egui's rendering rules as its OpenGL painter does:
//!
//! * positions are in points; one point is `pixels_per_point` pixels, and a pixel is drawn when
//!   its centre lies inside the triangle, edges settled by the top-left rule, so two triangles
//!   that share an edge neither leave a gap nor draw a pixel twice;
//! * colours are sRGB bytes with premultiplied alpha; they are interpolated, multiplied with the
//!   texture and blended as they are, without conversion to linear light;
//! * clip rectangles are rounded to whole pixels.
//!
//! Two things are left out, because they need a graphics card: paint callbacks are skipped, and
//! textures that ask for mipmaps are minified from their full size. A mesh whose texture was never
//! set is skipped as well.

mod canvas;
mod image;
mod mesh;
mod pixel;
mod quad;
mod texture;
mod triangle;

use std::collections::BTreeMap;
use std::fmt;

use egui::epaint::Primitive;
use egui::{ClippedPrimitive, Color32, TextureId, TexturesDelta};

use crate::canvas::{Canvas, Clip};
use crate::texture::Texture;

pub use crate::image::Image;

/// Paints egui's tessellated output; owns the textures and the last picture.
#[derive(Default)]
pub struct Painter {
    textures: BTreeMap<TextureId, Texture>,
    /// Textures that egui released with the last update. They may still be drawn in the frame that
    /// came with the release, so they go with the next update.
    released: Vec<TextureId>,
    corners: Vec<mesh::Corner>,
    image: Image,
}

impl Painter {
    /// A painter without textures and with an empty picture.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// Takes over the texture changes of one egui pass. Call it for every pass, before painting.
    ///
    /// The delta is left as it was; clear it before it is dropped, because egui asserts that in
    /// debug builds. A released texture stays until the next call, since the frame that released
    /// it may still show it.
    pub fn update_textures(&mut self, delta: &TexturesDelta) {
        for id in self.released.drain(..) {
            self.textures.remove(&id);
        }
        // Changes of different textures do not touch each other, so the order of the map is free.
        for (id, changes) in &delta.set {
            for change in changes {
                self.textures.entry(*id).or_default().apply(change);
            }
        }
        self.released.extend(&delta.free);
    }

    /// Paints one frame into the painter's own picture and returns it.
    ///
    /// `size_px` is width and height in pixels; either may be 0, which gives an empty picture.
    /// `clear_color` is what shows where nothing is drawn.
    pub fn paint(
        &mut self,
        size_px: [u32; 2],
        pixels_per_point: f32,
        clear_color: Color32,
        primitives: &[ClippedPrimitive],
    ) -> &Image {
        let mut image = std::mem::take(&mut self.image);
        image.resize(size_px);
        self.draw(image.canvas(), pixels_per_point, pixel::pack(clear_color), primitives);
        self.image = image;
        &self.image
    }

    /// Paints one frame into `buffer`: one `0x00RRGGBB` word per pixel, row by row from the top
    /// left, as window surfaces take it. `clear_color` is taken as opaque.
    ///
    /// # Errors
    /// Fails, and leaves the buffer alone, when it does not hold exactly width × height words.
    pub fn paint_into(
        &mut self,
        buffer: &mut [u32],
        size_px: [u32; 2],
        pixels_per_point: f32,
        clear_color: Color32,
        primitives: &[ClippedPrimitive],
    ) -> Result<(), WrongBufferLength> {
        let [width, height] = size_px.map(|side| side as usize);
        let needed = width.saturating_mul(height);
        if buffer.len() != needed {
            return Err(WrongBufferLength { needed, given: buffer.len() });
        }
        let canvas = Canvas::new(buffer, width, height);
        let clear = pixel::pack(clear_color.to_opaque());
        self.draw(canvas, pixels_per_point, clear, primitives);
        for word in buffer {
            *word &= 0x00ff_ffff;
        }
        Ok(())
    }

    fn draw(&mut self, mut canvas: Canvas<'_>, pixels_per_point: f32, clear: u32, primitives: &[ClippedPrimitive]) {
        canvas.clear(clear);
        for primitive in primitives {
            let clip = Clip::from_points(primitive.clip_rect, pixels_per_point, &canvas);
            if clip.is_empty() {
                continue;
            }
            if let Primitive::Mesh(mesh) = &primitive.primitive
                && let Some(texture) = self.textures.get(&mesh.texture_id)
            {
                mesh::paint(&mut canvas, clip, mesh, texture, pixels_per_point, &mut self.corners);
            }
        }
    }
}

/// The buffer given to [`Painter::paint_into`] does not fit the size of the picture.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct WrongBufferLength {
    /// Width × height of the picture, in words.
    pub needed: usize,
    /// Length of the buffer, in words.
    pub given: usize,
}

impl fmt::Display for WrongBufferLength {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "the pixel buffer holds {} words, the picture needs {}", self.given, self.needed)
    }
}

impl std::error::Error for WrongBufferLength {}
