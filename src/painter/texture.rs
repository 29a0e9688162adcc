//! Textures: whole and partial changes, filters and wrap modes.

use egui::epaint::{ImageData, ImageDelta};
use egui::{TextureFilter, TextureOptions, TextureWrapMode};

use crate::pixel::{self, Channels};

/// A texture in memory. Its texels are pixels as in [`crate::pixel`].
#[derive(Default)]
pub(crate) struct Texture {
    width: usize,
    height: usize,
    texels: Vec<u32>,
    options: TextureOptions,
}

impl Texture {
    /// Replaces the texture, or the part of it that the change names.
    pub(crate) fn apply(&mut self, change: &ImageDelta) {
        let ImageData::Color(image) = &change.image;
        let [width, height] = image.size;
        // An image whose size does not match its texels has no defined picture.
        if image.pixels.len() != width * height {
            return;
        }
        self.options = change.options;
        let Some([left, top]) = change.pos else {
            self.width = width;
            self.height = height;
            self.texels.clear();
            self.texels.extend(image.pixels.iter().map(|color| pixel::pack(*color)));
            return;
        };
        let columns = width.min(self.width.saturating_sub(left));
        let rows = height.min(self.height.saturating_sub(top));
        if columns == 0 {
            return;
        }
        for (row, source) in image.pixels.chunks_exact(width).take(rows).enumerate() {
            let start = (top + row) * self.width + left;
            let target = &mut self.texels[start..start + columns];
            for (texel, color) in target.iter_mut().zip(source) {
                *texel = pixel::pack(*color);
            }
        }
    }

    pub(crate) fn size(&self) -> [usize; 2] {
        [self.width, self.height]
    }

    pub(crate) fn is_empty(&self) -> bool {
        self.texels.is_empty()
    }

    /// A run of texels in row `y`; all of it must lie inside.
    pub(crate) fn run(&self, y: usize, left: usize, right: usize) -> &[u32] {
        &self.texels[y * self.width + left..y * self.width + right]
    }

    /// The colour where the whole of a triangle shows one spot of the texture.
    pub(crate) fn spot(&self, uv: [f32; 2]) -> u32 {
        // Untextured shapes point at the corner; there is nothing to filter.
        if uv == [0.0; 2] && self.options.wrap_mode == TextureWrapMode::ClampToEdge {
            return self.texels[0];
        }
        pixel::from_channels(self.sample(uv, self.options.magnification))
    }

    /// The filter for a triangle whose neighbouring pixels lie `texels_per_pixel` texels apart.
    pub(crate) fn filter(&self, texels_per_pixel: f64) -> TextureFilter {
        if texels_per_pixel <= 1.0 { self.options.magnification } else { self.options.minification }
    }

    /// The colour at texture coordinates, (0, 0) to (1, 1) being the whole texture.
    pub(crate) fn sample(&self, uv: [f32; 2], filter: TextureFilter) -> Channels {
        // The limit keeps the whole numbers below in range; a texture this far away is noise.
        let place = |u: f32, side: usize| (u * side as f32).clamp(-1e9, 1e9);
        let (x, y) = (place(uv[0], self.width), place(uv[1], self.height));
        match filter {
            TextureFilter::Nearest => self.texel(x.floor() as i64, y.floor() as i64),
            TextureFilter::Linear => {
                let (x, y) = (x - 0.5, y - 0.5);
                let (left, top) = (x.floor(), y.floor());
                let (fx, fy) = (x - left, y - top);
                let (left, top) = (left as i64, top as i64);
                let upper = mix(self.texel(left, top), self.texel(left + 1, top), fx);
                let lower = mix(self.texel(left, top + 1), self.texel(left + 1, top + 1), fx);
                mix(upper, lower, fy)
            }
        }
    }

    fn texel(&self, x: i64, y: i64) -> Channels {
        let x = wrap(x, self.width, self.options.wrap_mode);
        let y = wrap(y, self.height, self.options.wrap_mode);
        pixel::channels(self.texels[y * self.width + x])
    }
}

fn mix(a: Channels, b: Channels, t: f32) -> Channels {
    std::array::from_fn(|i| a[i] + (b[i] - a[i]) * t)
}

fn wrap(i: i64, side: usize, mode: TextureWrapMode) -> usize {
    let side = side as i64;
    let wrapped = match mode {
        TextureWrapMode::ClampToEdge => i.clamp(0, side - 1),
        TextureWrapMode::Repeat => i.rem_euclid(side),
        TextureWrapMode::MirroredRepeat => {
            let place = i.rem_euclid(2 * side);
            place.min(2 * side - 1 - place)
        }
    };
    wrapped as usize
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn wrap_modes_follow_their_definition() {
        let places: Vec<i64> = (-4..7).collect();
        let wrapped = |mode| -> Vec<usize> { places.iter().map(|i| wrap(*i, 3, mode)).collect() };
        assert_eq!(wrapped(TextureWrapMode::ClampToEdge), [0, 0, 0, 0, 0, 1, 2, 2, 2, 2, 2]);
        assert_eq!(wrapped(TextureWrapMode::Repeat), [2, 0, 1, 2, 0, 1, 2, 0, 1, 2, 0]);
        assert_eq!(wrapped(TextureWrapMode::MirroredRepeat), [2, 2, 1, 0, 0, 1, 2, 2, 1, 0, 0]);
    }
}
