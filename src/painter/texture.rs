//! Textures: the font atlas and pictures, with their filter and what lies beyond their edge.

use egui::epaint::ImageDelta;
use egui::epaint::image::ImageData;
use egui::{Color32, TextureFilter, TextureOptions, TextureWrapMode};

/// A texture of premultiplied colours.
pub(crate) struct Texture {
    size: [i64; 2],
    texels: Vec<Color32>,
    options: TextureOptions,
}

impl Texture {
    pub fn new(delta: &ImageDelta) -> Self {
        let ImageData::Color(image) = &delta.image;
        Self {
            size: [image.size[0] as i64, image.size[1] as i64],
            texels: image.pixels.clone(),
            options: delta.options,
        }
    }

    /// Replaces a part; what would lie outside is passed over.
    pub fn update(&mut self, at: [usize; 2], delta: &ImageDelta) {
        let ImageData::Color(image) = &delta.image;
        let (width, height) = (self.size[0] as usize, self.size[1] as usize);
        let columns = image.size[0].min(width.saturating_sub(at[0]));
        for (row, texels) in image.pixels.chunks_exact(image.size[0].max(1)).enumerate() {
            let y = at[1] + row;
            if y < height {
                let start = y * width + at[0];
                self.texels[start..start + columns].copy_from_slice(&texels[..columns]);
            }
        }
        self.options = delta.options;
    }

    /// Width and height in texels.
    pub fn size(&self) -> [f32; 2] {
        [self.size[0] as f32, self.size[1] as f32]
    }

    /// A row of texels; `None` beyond the edge.
    pub fn row(&self, y: i64) -> Option<&[Color32]> {
        let y = usize::try_from(y).ok().filter(|y| *y < self.size[1] as usize)?;
        let width = self.size[0] as usize;
        Some(&self.texels[y * width..(y + 1) * width])
    }

    /// The colour at a place given in texels, by the texture's own filter. Mip maps are not made; the finest level serves all.
    pub fn sample(&self, x: f32, y: f32) -> Color32 {
        match self.options.magnification {
            TextureFilter::Nearest => self.texel(x.floor() as i64, y.floor() as i64),
            TextureFilter::Linear => self.between(x - 0.5, y - 0.5),
        }
    }

    fn between(&self, x: f32, y: f32) -> Color32 {
        let (left, top) = (x.floor(), y.floor());
        let (along, down) = (x - left, y - top);
        let (left, top) = (left as i64, top as i64);
        if along == 0.0 && down == 0.0 {
            return self.texel(left, top);
        }
        let corners = [
            (self.texel(left, top), (1.0 - along) * (1.0 - down)),
            (self.texel(left + 1, top), along * (1.0 - down)),
            (self.texel(left, top + 1), (1.0 - along) * down),
            (self.texel(left + 1, top + 1), along * down),
        ];
        let mut sum = [0.0_f32; 4];
        for (colour, weight) in corners {
            for (total, channel) in sum.iter_mut().zip(colour.to_array()) {
                *total += weight * f32::from(channel);
            }
        }
        let [r, g, b, a] = sum.map(|total| total.round() as u8);
        Color32::from_rgba_premultiplied(r, g, b, a)
    }

    fn texel(&self, x: i64, y: i64) -> Color32 {
        if self.texels.is_empty() {
            return Color32::TRANSPARENT;
        }
        let x = self.wrapped(x, self.size[0]);
        let y = self.wrapped(y, self.size[1]);
        self.texels[(y * self.size[0] + x) as usize]
    }

    fn wrapped(&self, at: i64, size: i64) -> i64 {
        match self.options.wrap_mode {
            TextureWrapMode::ClampToEdge => at.clamp(0, size - 1),
            TextureWrapMode::Repeat => at.rem_euclid(size),
            TextureWrapMode::MirroredRepeat => {
                let at = at.rem_euclid(2 * size);
                if at < size { at } else { 2 * size - 1 - at }
            }
        }
    }
}
