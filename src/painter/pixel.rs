//! One pixel: `0xAARRGGBB`, sRGB bytes with premultiplied alpha.
//!
//! Two channels are worked on at once in the 16-bit lanes of a word, which is exact: every product
//! of two bytes is rounded to the nearest 1/255.

use egui::Color32;

const LANES: u32 = 0x00ff_00ff;

/// Colour channels as numbers from 0 to 255, in the order red, green, blue, alpha.
pub(crate) type Channels = [f32; 4];

pub(crate) fn pack(color: Color32) -> u32 {
    let [r, g, b, a] = color.to_array();
    u32::from_be_bytes([a, r, g, b])
}

pub(crate) fn unpack(pixel: u32) -> Color32 {
    let [a, r, g, b] = pixel.to_be_bytes();
    Color32::from_rgba_premultiplied(r, g, b, a)
}

pub(crate) fn channels(pixel: u32) -> Channels {
    let [a, r, g, b] = pixel.to_be_bytes();
    [r, g, b, a].map(f32::from)
}

/// Rounds channels to bytes. Values out of range by a rounding error are brought back.
#[inline]
pub(crate) fn from_channels(channels: Channels) -> u32 {
    // The cast saturates below 0 and above 255.
    let [r, g, b, a] = channels.map(|value| (value + 0.5) as u8);
    u32::from_be_bytes([a, r, g, b])
}

pub(crate) fn alpha(pixel: u32) -> u32 {
    pixel >> 24
}

/// Both lanes of `pair` times `factor` / 255, rounded to nearest.
#[inline]
fn scale_pair(pair: u32, factor: u32) -> u32 {
    // round(n / 255) = (t + t / 256) / 256 with t = n + 128, exact for n up to 255 * 255.
    let t = pair * factor + 0x0080_0080;
    ((t + ((t >> 8) & LANES)) >> 8) & LANES
}

/// Sum of both lanes, each held at 255.
#[inline]
fn add_pair(a: u32, b: u32) -> u32 {
    let sum = a + b;
    let carry = sum & 0x0100_0100;
    (sum | (carry - (carry >> 8))) & LANES
}

/// `source` drawn over `below`: source + below * (1 - source alpha).
///
/// A source may be brighter than its alpha allows (egui's additive colours); channels then stop
/// at 255.
#[inline]
pub(crate) fn over(source: u32, below: u32) -> u32 {
    let rest = 255 - alpha(source);
    let red_blue = add_pair(source & LANES, scale_pair(below & LANES, rest));
    let alpha_green = add_pair((source >> 8) & LANES, scale_pair((below >> 8) & LANES, rest));
    red_blue | (alpha_green << 8)
}

/// The product of two colours, channel by channel, with 255 as one.
#[inline]
pub(crate) fn modulate(a: u32, b: u32) -> u32 {
    if b == u32::MAX {
        return a;
    }
    let [a0, a1, a2, a3] = a.to_be_bytes().map(u32::from);
    let [b0, b1, b2, b3] = b.to_be_bytes().map(u32::from);
    let product = |x: u32, y: u32| {
        let t = x * y + 128;
        ((t + (t >> 8)) >> 8) as u8
    };
    u32::from_be_bytes([product(a0, b0), product(a1, b1), product(a2, b2), product(a3, b3)])
}

/// Draws one colour over a run of pixels.
#[inline]
pub(crate) fn fill_over(run: &mut [u32], source: u32) {
    if source == 0 {
        return;
    }
    if alpha(source) == 255 {
        run.fill(source);
        return;
    }
    for pixel in run {
        *pixel = over(source, *pixel);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The definition of the blend, in whole numbers: 510 times the exact value, rounded to the
    /// nearest whole channel.
    fn rounded_product(x: u32, y: u32) -> u32 {
        (2 * x * y + 255) / 510
    }

    #[test]
    fn every_product_of_two_bytes_is_rounded_to_nearest() {
        for x in 0..=255 {
            for y in 0..=255 {
                let pair = x << 16 | x;
                let want = rounded_product(x, y);
                assert_eq!(scale_pair(pair, y), want << 16 | want, "{x} * {y} / 255");
                let [p, ..] = modulate(x << 24, y << 24).to_be_bytes();
                assert_eq!(u32::from(p), want, "{x} * {y} / 255");
            }
        }
    }

    #[test]
    fn sums_stop_at_the_brightest_value() {
        for (a, b, want) in [(200, 55, 255), (200, 56, 255), (255, 255, 255), (0, 0, 0)] {
            assert_eq!(add_pair(a << 16 | a, b << 16 | b), want << 16 | want);
        }
        assert_eq!(add_pair(0x0001_00ff, 0x0001_00ff), 0x0002_00ff);
    }

    #[test]
    fn packing_and_unpacking_keep_a_colour() {
        let color = Color32::from_rgba_premultiplied(1, 2, 3, 4);
        assert_eq!(pack(color), 0x0401_0203);
        assert_eq!(unpack(pack(color)), color);
        assert_eq!(channels(pack(color)), [1.0, 2.0, 3.0, 4.0]);
        assert_eq!(from_channels([1.0, 2.0, 3.0, 4.0]), pack(color));
    }
}
