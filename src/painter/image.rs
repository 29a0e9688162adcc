//! A finished picture and the forms it is handed on in.

use egui::{Color32, ColorImage};

use crate::canvas::Canvas;
use crate::pixel;

/// A picture with sRGB bytes and premultiplied alpha.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Image {
    width: usize,
    height: usize,
    pixels: Vec<u32>,
}

impl Image {
    /// Width in pixels.
    #[must_use]
    pub fn width(&self) -> usize {
        self.width
    }

    /// Height in pixels.
    #[must_use]
    pub fn height(&self) -> usize {
        self.height
    }

    /// The colour of a pixel counted from the top left, or nothing outside the picture.
    #[must_use]
    pub fn pixel(&self, x: usize, y: usize) -> Option<Color32> {
        (x < self.width && y < self.height).then(|| pixel::unpack(self.pixels[y * self.width + x]))
    }

    /// The picture as bytes in the order red, green, blue, alpha, row by row, alpha not
    /// premultiplied: the form PNG files hold.
    #[must_use]
    pub fn to_rgba8(&self) -> Vec<u8> {
        self.pixels.iter().flat_map(|word| pixel::unpack(*word).to_srgba_unmultiplied()).collect()
    }

    /// The picture in egui's own form, as a screenshot is answered.
    #[must_use]
    pub fn to_color_image(&self) -> ColorImage {
        let pixels = self.pixels.iter().map(|word| pixel::unpack(*word)).collect();
        ColorImage::new([self.width, self.height], pixels)
    }

    pub(crate) fn resize(&mut self, size_px: [u32; 2]) {
        [self.width, self.height] = size_px.map(|side| side as usize);
        self.pixels.resize(self.width * self.height, 0);
    }

    pub(crate) fn canvas(&mut self) -> Canvas<'_> {
        Canvas::new(&mut self.pixels, self.width, self.height)
    }
}
