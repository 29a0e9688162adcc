//! One mesh: its vertices placed on the pixel grid, then quads and triangles in order.

use egui::Mesh;

use crate::canvas::{Canvas, Clip};
use crate::texture::Texture;
use crate::{pixel, quad, triangle};

/// Positions are whole numbers of 1/256 pixel. On a fixed grid the edge tests are exact, so shared
/// edges are watertight; graphics cards do the same.
pub(crate) const GRID: i64 = 256;

/// Positions inside this many pixels from the origin keep all edge arithmetic within 64 bits.
/// Triangles that reach further are cut first.
pub(crate) const REACH_PX: f64 = (1_u32 << 20) as f64;

/// A vertex ready for painting.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Corner {
    /// Position in pixels, before it is placed on the grid.
    pub(crate) place: [f64; 2],
    /// Position in 1/256 pixel. Only meaningful within [`REACH_PX`].
    pub(crate) grid: [i64; 2],
    pub(crate) uv: [f32; 2],
    /// The vertex colour, packed.
    pub(crate) color: u32,
}

impl Corner {
    fn within_reach(&self) -> bool {
        self.place.iter().all(|side| side.abs() <= REACH_PX)
    }
}

/// Rounds a position in pixels to the grid.
pub(crate) fn to_grid(place: [f64; 2]) -> [i64; 2] {
    place.map(|side| (side * GRID as f64).round() as i64)
}

/// Paints a mesh. `corners` is scratch memory.
pub(crate) fn paint(
    canvas: &mut Canvas<'_>,
    clip: Clip,
    mesh: &Mesh,
    texture: &Texture,
    pixels_per_point: f32,
    corners: &mut Vec<Corner>,
) {
    if texture.is_empty() {
        return;
    }
    corners.clear();
    corners.extend(mesh.vertices.iter().map(|vertex| {
        // The product is taken in 32 bits, as egui takes it when it aligns text to pixels.
        let place = [vertex.pos.x, vertex.pos.y].map(|side| f64::from(side * pixels_per_point));
        Corner { place, grid: to_grid(place), uv: vertex.uv.into(), color: pixel::pack(vertex.color) }
    }));

    let mut rest = mesh.indices.as_slice();
    while let [a, b, c, after @ ..] = rest {
        // Rectangles, among them every letter, come as two triangles a-b-c and c-b-d.
        if let [c2, b2, d, after_quad @ ..] = after
            && (c2, b2) == (c, b)
            && let Some(four) = pick(corners, [*a, *b, *c, *d])
            && four.iter().all(Corner::within_reach)
            && quad::paint(canvas, clip, &four, texture)
        {
            rest = after_quad;
            continue;
        }
        if let Some(three) = pick(corners, [*a, *b, *c]) {
            if three.iter().all(Corner::within_reach) {
                triangle::paint(canvas, clip, &three, texture);
            } else {
                triangle::paint_cut(canvas, clip, &three, texture);
            }
        }
        rest = after;
    }
}

/// The corners of these indices, or nothing when an index points outside the mesh.
fn pick<const N: usize>(corners: &[Corner], indices: [u32; N]) -> Option<[Corner; N]> {
    let last = *indices.iter().max()?;
    ((last as usize) < corners.len()).then(|| indices.map(|i| corners[i as usize]))
}
