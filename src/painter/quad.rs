//! Upright rectangles in one colour: plain areas and unscaled pictures, above all letters.
//!
//! They are most of what a window draws, and need no edge arithmetic. The pixels covered are those
//! the two triangles would cover.

use crate::canvas::{Canvas, Clip};
use crate::mesh::{Corner, GRID};
use crate::pixel;
use crate::texture::Texture;

/// How far a texture edge may lie from a whole texel and still count as on it, in texels. Texture
/// coordinates are single precision fractions of up to some thousand texels.
const TEXEL_TOLERANCE: f32 = 1.0 / 64.0;

/// Paints the corners left-top, right-top, left-bottom, right-bottom, if they form an upright
/// rectangle that can be filled or copied. Returns false, with nothing drawn, if not.
pub(crate) fn paint(canvas: &mut Canvas<'_>, clip: Clip, corners: &[Corner; 4], texture: &Texture) -> bool {
    let [lt, rt, lb, rb] = corners;
    let [left, top] = lt.grid;
    let [right, bottom] = rb.grid;
    let upright = rt.grid == [right, top] && lb.grid == [left, bottom];
    let one_color = [rt, lb, rb].iter().all(|corner| corner.color == lt.color);
    if !upright || !one_color || left > right || top > bottom {
        return false;
    }
    // A pixel is covered when its centre is; a centre on the left or top edge counts as inside.
    let first_centre = |edge: i64| (edge + GRID / 2 - 1).div_euclid(GRID);
    let (x, y) = (first_centre(left), first_centre(top));
    let visible = clip.meet(x, y, first_centre(right), first_centre(bottom));

    if [rt, lb, rb].iter().all(|corner| corner.uv == lt.uv) {
        let source = pixel::modulate(texture.spot(lt.uv), lt.color);
        for row in visible.top..visible.bottom.max(visible.top) {
            if visible.left < visible.right {
                pixel::fill_over(canvas.run(row, visible.left, visible.right), source);
            }
        }
        return true;
    }

    let Some([texel_x, texel_y]) = unscaled(corners, texture) else {
        return false;
    };
    if visible.is_empty() {
        return true;
    }
    let from = texel_x + (visible.left - x) as usize;
    let to = texel_x + (visible.right - x) as usize;
    for row in visible.top..visible.bottom {
        let texels = texture.run(texel_y + (row - y) as usize, from, to);
        let pixels = canvas.run(row, visible.left, visible.right);
        for (pixel, texel) in pixels.iter_mut().zip(texels) {
            // Most of a letter's rectangle is empty.
            if *texel != 0 {
                *pixel = pixel::over(pixel::modulate(*texel, lt.color), *pixel);
            }
        }
    }
    true
}

/// The left-top texel, when the rectangle shows whole texels on whole pixels, one on one.
///
/// All four texture corners are looked at: rotated text gives an upright rectangle as well, whose
/// texture lies turned in it.
fn unscaled(corners: &[Corner; 4], texture: &Texture) -> Option<[usize; 2]> {
    let [lt, rt, lb, rb] = corners;
    let not_turned = lt.uv[0] == lb.uv[0] && rt.uv[0] == rb.uv[0] && lt.uv[1] == rt.uv[1] && lb.uv[1] == rb.uv[1];
    if !not_turned {
        return None;
    }
    let [width, height] = texture.size();
    let [left, right] = whole_texels([lt.uv[0], rb.uv[0]], width)?;
    let [top, bottom] = whole_texels([lt.uv[1], rb.uv[1]], height)?;
    let on_pixels = lt.grid.iter().chain(&rb.grid).all(|side| side % GRID == 0);
    let one_on_one = rb.grid[0] - lt.grid[0] == (right - left) as i64 * GRID
        && rb.grid[1] - lt.grid[1] == (bottom - top) as i64 * GRID;
    (on_pixels && one_on_one).then_some([left, top])
}

/// Both ends in texels, if they are whole, in order and inside the texture.
fn whole_texels(ends: [f32; 2], side: usize) -> Option<[usize; 2]> {
    let texels = ends.map(|end| end * side as f32);
    let whole = texels.map(f32::round);
    let close = texels.iter().zip(&whole).all(|(texel, whole)| (texel - whole).abs() <= TEXEL_TOLERANCE);
    (close && whole[0] >= 0.0 && whole[0] <= whole[1] && whole[1] <= side as f32).then(|| whole.map(|end| end as usize))
}
