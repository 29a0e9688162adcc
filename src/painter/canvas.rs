//! The pixels being drawn on, and the part of them a primitive may touch.

use egui::Rect;

/// Borrowed pixels, row by row from the top left.
pub(crate) struct Canvas<'a> {
    pixels: &'a mut [u32],
    width: usize,
    height: usize,
}

impl<'a> Canvas<'a> {
    /// `pixels` holds `width * height` words; the callers see to that.
    pub(crate) fn new(pixels: &'a mut [u32], width: usize, height: usize) -> Self {
        debug_assert_eq!(pixels.len(), width * height);
        Self { pixels, width, height }
    }

    pub(crate) fn clear(&mut self, pixel: u32) {
        self.pixels.fill(pixel);
    }

    /// The pixels of row `y` from `left` up to, not including, `right`.
    #[inline]
    pub(crate) fn run(&mut self, y: i64, left: i64, right: i64) -> &mut [u32] {
        let start = y as usize * self.width;
        &mut self.pixels[start + left as usize..start + right as usize]
    }
}

/// A rectangle of whole pixels inside the canvas; right and bottom are not included.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Clip {
    pub(crate) left: i64,
    pub(crate) top: i64,
    pub(crate) right: i64,
    pub(crate) bottom: i64,
}

impl Clip {
    /// A clip rectangle in points, rounded to pixels and cut to the canvas.
    pub(crate) fn from_points(rect: Rect, pixels_per_point: f32, canvas: &Canvas<'_>) -> Self {
        // The cast turns infinities into the ends of the range and NaN into 0.
        let pixel = |points: f32| (points * pixels_per_point).round() as i64;
        let (width, height) = (canvas.width as i64, canvas.height as i64);
        let left = pixel(rect.min.x).clamp(0, width);
        let top = pixel(rect.min.y).clamp(0, height);
        Self { left, top, right: pixel(rect.max.x).clamp(left, width), bottom: pixel(rect.max.y).clamp(top, height) }
    }

    pub(crate) fn is_empty(&self) -> bool {
        self.left >= self.right || self.top >= self.bottom
    }

    /// The part of both rectangles.
    pub(crate) fn meet(&self, left: i64, top: i64, right: i64, bottom: i64) -> Self {
        Self {
            left: self.left.max(left),
            top: self.top.max(top),
            right: self.right.min(right),
            bottom: self.bottom.min(bottom),
        }
    }
}
