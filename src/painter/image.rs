//! The picture that is painted into.

use egui::Color32;

/// A picture of premultiplied colours in gamma space, row by row from the top.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Image {
    size: [usize; 2],
    pixels: Vec<Color32>,
}

impl Image {
    pub(crate) fn reset(&mut self, size: [usize; 2], clear: Color32) {
        self.size = size;
        self.pixels.clear();
        self.pixels.resize(size[0] * size[1], clear);
    }

    /// Width and height in pixels.
    pub fn size(&self) -> [usize; 2] {
        self.size
    }

    /// The colour of a pixel; `None` outside the picture.
    pub fn pixel(&self, x: usize, y: usize) -> Option<Color32> {
        (x < self.size[0]).then(|| self.pixels.get(y * self.size[0] + x).copied()).flatten()
    }

    /// The pixels, row by row from the top.
    pub fn pixels(&self) -> &[Color32] {
        &self.pixels
    }

    /// Writes the picture as `0x00RRGGBB` words, as window systems take them; as many as both hold.
    pub fn write_rgb_words(&self, words: &mut [u32]) {
        for (word, colour) in words.iter_mut().zip(&self.pixels) {
            let [r, g, b, _] = colour.to_array();
            *word = u32::from_be_bytes([0, r, g, b]);
        }
    }

    /// The picture as bytes red, green, blue, alpha, for picture files; alpha undone where the ground shows through.
    pub fn to_rgba_bytes(&self) -> Vec<u8> {
        self.pixels.iter().flat_map(|colour| colour.to_srgba_unmultiplied()).collect()
    }

    /// A stretch of one row.
    pub(crate) fn row(&mut self, y: i32, left: i32, right: i32) -> &mut [Color32] {
        let start = y as usize * self.size[0];
        &mut self.pixels[start + left as usize..start + right as usize]
    }
}

/// `source` over `below`, both premultiplied.
#[inline]
pub(crate) fn over(source: Color32, below: Color32) -> Color32 {
    let through = 255 - u32::from(source.a());
    if through == 0 {
        return source;
    }
    let blend = |s: u8, b: u8| (u32::from(s) + rounded_255th(u32::from(b) * through)).min(255) as u8;
    Color32::from_rgba_premultiplied(
        blend(source.r(), below.r()),
        blend(source.g(), below.g()),
        blend(source.b(), below.b()),
        blend(source.a(), below.a()),
    )
}

/// Colour times colour, channel by channel, as vertex colour times texel.
#[inline]
pub(crate) fn times(one: Color32, other: Color32) -> Color32 {
    if one == Color32::WHITE {
        return other;
    }
    if other == Color32::WHITE {
        return one;
    }
    let multiply = |a: u8, b: u8| rounded_255th(u32::from(a) * u32::from(b)) as u8;
    Color32::from_rgba_premultiplied(
        multiply(one.r(), other.r()),
        multiply(one.g(), other.g()),
        multiply(one.b(), other.b()),
        multiply(one.a(), other.a()),
    )
}

/// `value / 255`, rounded to the nearest; exact for products of two bytes.
#[inline]
fn rounded_255th(value: u32) -> u32 {
    let value = value + 128;
    (value + (value >> 8)) >> 8
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn division_by_255_is_exact_for_every_product_of_two_bytes() {
        for a in 0..=255_u32 {
            for b in 0..=255 {
                assert_eq!(rounded_255th(a * b), (f64::from(a * b) / 255.0).round() as u32);
            }
        }
    }
}
