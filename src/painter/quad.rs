//! Upright rectangles of one colour: grounds, lines and glyphs. They come as two triangles round four vertices.

use egui::epaint::Vertex;
use egui::{Color32, Mesh, Pos2};

use crate::Clip;
use crate::image::{Image, over, times};
use crate::texture::Texture;

/// An upright rectangle, in pixels, with the texture coordinates of its corners.
pub(crate) struct Quad {
    min: Pos2,
    max: Pos2,
    uv_min: Pos2,
    uv_max: Pos2,
    colour: Color32,
}

impl Quad {
    /// The rectangle that the first six indices make, if they make one.
    ///
    /// All four texture coordinates are looked at, for a turned text is an upright rectangle as well.
    pub fn from_indices(mesh: &Mesh, indices: &[u32], pixels_per_point: f32) -> Option<Self> {
        let [a, b, c, c2, b2, d] = *indices.first_chunk::<6>()?;
        if c2 != c || b2 != b {
            return None;
        }
        let vertex = |index: u32| mesh.vertices.get(index as usize);
        let (left_top, right_top, left_bottom, right_bottom) = (vertex(a)?, vertex(b)?, vertex(c)?, vertex(d)?);
        let is_upright = is_grid([left_top, right_top, left_bottom, right_bottom], |vertex| vertex.pos)
            && left_top.pos.x <= right_bottom.pos.x
            && left_top.pos.y <= right_bottom.pos.y
            && is_grid([left_top, right_top, left_bottom, right_bottom], |vertex| vertex.uv);
        let colour = left_top.color;
        let is_plain = [right_top, left_bottom, right_bottom].iter().all(|vertex| vertex.color == colour);
        (is_upright && is_plain).then(|| Self {
            min: left_top.pos * pixels_per_point,
            max: right_bottom.pos * pixels_per_point,
            uv_min: left_top.uv,
            uv_max: right_bottom.uv,
            colour,
        })
    }

    /// Paints it over what is there.
    pub fn paint(&self, image: &mut Image, texture: &Texture, clip: Clip) {
        let left = first_centre(self.min.x).max(clip.left);
        let right = first_centre(self.max.x).min(clip.right);
        let top = first_centre(self.min.y).max(clip.top);
        let bottom = first_centre(self.max.y).min(clip.bottom);
        if left >= right || top >= bottom || self.colour == Color32::TRANSPARENT {
            return;
        }
        let [width, height] = texture.size();
        let along = Mapping::new(self.min.x, self.max.x, self.uv_min.x * width, self.uv_max.x * width);
        let down = Mapping::new(self.min.y, self.max.y, self.uv_min.y * height, self.uv_max.y * height);
        if self.uv_min == self.uv_max {
            let colour = times(self.colour, texture.sample(self.uv_min.x * width, self.uv_min.y * height));
            for y in top..bottom {
                fill(image.row(y, left, right), colour);
            }
            return;
        }
        if let (Some(from_x), Some(from_y)) = (along.whole_texels(), down.whole_texels()) {
            for y in top..bottom {
                let Some(texels) = texture.row(i64::from(y) + from_y) else { continue };
                let first = i64::from(left) + from_x;
                let texels = usize::try_from(first).ok().and_then(|first| texels.get(first..));
                let Some(texels) = texels else { continue };
                for (pixel, texel) in image.row(y, left, right).iter_mut().zip(texels) {
                    if *texel != Color32::TRANSPARENT {
                        *pixel = over(times(self.colour, *texel), *pixel);
                    }
                }
            }
            return;
        }
        for y in top..bottom {
            let v = down.at(y);
            for (x, pixel) in (left..).zip(image.row(y, left, right)) {
                *pixel = over(times(self.colour, texture.sample(along.at(x), v)), *pixel);
            }
        }
    }
}

/// Whether four corners share two columns and two rows.
fn is_grid([a, b, c, d]: [&Vertex; 4], of: impl Fn(&Vertex) -> Pos2) -> bool {
    let (a, b, c, d) = (of(a), of(b), of(c), of(d));
    a.x == c.x && b.x == d.x && a.y == b.y && c.y == d.y
}

/// The first pixel whose centre lies at or beyond an edge.
pub(crate) fn first_centre(edge: f32) -> i32 {
    (edge - 0.5).ceil() as i32
}

pub(crate) fn fill(row: &mut [Color32], colour: Color32) {
    if colour.a() == 255 {
        row.fill(colour);
    } else if colour != Color32::TRANSPARENT {
        for pixel in row {
            *pixel = over(colour, *pixel);
        }
    }
}

/// From pixels to texels along one axis.
struct Mapping {
    start: f32,
    texel_start: f32,
    step: f32,
}

impl Mapping {
    fn new(from: f32, to: f32, texel_from: f32, texel_to: f32) -> Self {
        let step = if to > from { (texel_to - texel_from) / (to - from) } else { 0.0 };
        Self { start: from, texel_start: texel_from, step }
    }

    /// The place in texels of the centre of a pixel.
    fn at(&self, pixel: i32) -> f32 {
        self.texel_start + (pixel as f32 + 0.5 - self.start) * self.step
    }

    /// What to add to a pixel to get its texel, where both grids lie one on the other.
    fn whole_texels(&self) -> Option<i64> {
        let shift = self.texel_start - self.start;
        let whole = shift.round();
        ((self.step - 1.0).abs() < 1e-3 && (shift - whole).abs() < 2e-2).then_some(whole as i64)
    }
}
