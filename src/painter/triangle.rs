//! Triangles: the exact pixels they cover, and the colour in between their corners.

use egui::TextureFilter;

use crate::canvas::{Canvas, Clip};
use crate::mesh::{Corner, GRID, REACH_PX, to_grid};
use crate::pixel::{self, Channels};
use crate::texture::Texture;

/// Paints a triangle whose corners are all within reach.
pub(crate) fn paint(canvas: &mut Canvas<'_>, clip: Clip, corners: &[Corner; 3], texture: &Texture) {
    let [a, mut b, mut c] = *corners;
    let doubled_area = side_of(a.grid, b.grid, c.grid);
    if doubled_area == 0 {
        return;
    }
    // egui winds its triangles both ways; the edge tests want one.
    if doubled_area < 0 {
        std::mem::swap(&mut b, &mut c);
    }
    let rows = Rows::new([a.grid, b.grid, c.grid], clip);
    let one_color = a.color == b.color && a.color == c.color;
    let one_spot = a.uv == b.uv && a.uv == c.uv;

    if one_spot && one_color {
        let source = pixel::modulate(texture.spot(a.uv), a.color);
        rows.for_each(|y, left, right| pixel::fill_over(canvas.run(y, left, right), source));
    } else if one_spot {
        let spot = pixel::channels(texture.spot(a.uv));
        let shade = |color| product(pixel::channels(color), spot);
        let plane = Plane::new([&a, &b, &c], |corner| shade(corner.color));
        rows.for_each(|y, left, right| {
            let (first, step) = plane.row(left, y);
            for (k, pixel) in canvas.run(y, left, right).iter_mut().enumerate() {
                *pixel = pixel::over(pixel::from_channels(along(first, step, k)), *pixel);
            }
        });
    } else {
        let color = Plane::new([&a, &b, &c], |corner| pixel::channels(corner.color));
        let uv = Plane::new([&a, &b, &c], |corner| corner.uv);
        let filter = filter_for(&uv, texture);
        rows.for_each(|y, left, right| {
            let (first, step) = color.row(left, y);
            let (first_uv, step_uv) = uv.row(left, y);
            for (k, pixel) in canvas.run(y, left, right).iter_mut().enumerate() {
                let texel = texture.sample(along(first_uv, step_uv, k), filter);
                let source = product(along(first, step, k), texel);
                *pixel = pixel::over(pixel::from_channels(source), *pixel);
            }
        });
    }
}

/// Paints a triangle with corners out of reach: what lies within reach is cut out and painted.
/// A triangle with a corner that is no number is left out.
pub(crate) fn paint_cut(canvas: &mut Canvas<'_>, clip: Clip, corners: &[Corner; 3], texture: &Texture) {
    let finite = |corner: &Corner| corner.place.iter().all(|side| side.is_finite());
    if !corners.iter().all(finite) {
        return;
    }
    let mut outline = corners.to_vec();
    for axis in [0, 1] {
        for sign in [1.0, -1.0] {
            outline = cut(&outline, |corner| REACH_PX - sign * corner.place[axis]);
        }
    }
    if let [first, rest @ ..] = outline.as_slice() {
        for pair in rest.windows(2) {
            paint(canvas, clip, &[*first, pair[0], pair[1]], texture);
        }
    }
}

/// The part of an outline where `inside` is not negative; new corners are put on the border.
fn cut(outline: &[Corner], inside: impl Fn(&Corner) -> f64) -> Vec<Corner> {
    let mut kept = Vec::with_capacity(outline.len() + 1);
    for (i, here) in outline.iter().enumerate() {
        let next = &outline[(i + 1) % outline.len()];
        let (d_here, d_next) = (inside(here), inside(next));
        if d_here >= 0.0 {
            kept.push(*here);
        }
        if (d_here < 0.0) != (d_next < 0.0) {
            kept.push(between(here, next, d_here / (d_here - d_next)));
        }
    }
    kept
}

fn between(a: &Corner, b: &Corner, t: f64) -> Corner {
    let place: [f64; 2] = std::array::from_fn(|axis| a.place[axis] + (b.place[axis] - a.place[axis]) * t);
    let [ca, cb] = [a.color, b.color].map(pixel::channels);
    let t = t as f32;
    Corner {
        place,
        grid: to_grid(place),
        uv: std::array::from_fn(|i| a.uv[i] + (b.uv[i] - a.uv[i]) * t),
        color: pixel::from_channels(std::array::from_fn(|i| ca[i] + (cb[i] - ca[i]) * t)),
    }
}

/// Twice the signed area of a-b-p: positive when p lies to the right of a-b as seen on the screen.
fn side_of(a: [i64; 2], b: [i64; 2], p: [i64; 2]) -> i64 {
    (b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0])
}

/// An edge as a test on whole pixels: pixel (x, y) is inside when a x + b y + c >= 0.
#[derive(Clone, Copy)]
struct Edge {
    a: i64,
    b: i64,
    c: i64,
}

impl Edge {
    fn new(from: [i64; 2], to: [i64; 2]) -> Self {
        let (dx, dy) = (to[0] - from[0], to[1] - from[1]);
        // A centre exactly on an edge belongs to the triangle below a top edge or right of a left
        // edge, and to no other: that makes it belong to exactly one of two neighbours.
        let top_or_left = dy < 0 || (dy == 0 && dx > 0);
        let centre = GRID / 2;
        Self {
            a: -dy * GRID,
            b: dx * GRID,
            c: dx * (centre - from[1]) - dy * (centre - from[0]) - i64::from(!top_or_left),
        }
    }

    /// Narrows the run of pixels of row `y` to those inside.
    #[inline]
    fn narrow(&self, y: i64, left: &mut i64, right: &mut i64) {
        let k = self.b * y + self.c;
        if self.a > 0 {
            *left = (*left).max(-k.div_euclid(self.a));
        } else if self.a < 0 {
            *right = (*right).min(k.div_euclid(-self.a) + 1);
        } else if k < 0 {
            *right = *left;
        }
    }
}

/// The covered pixels of a triangle, row by row.
struct Rows {
    edges: [Edge; 3],
    bounds: Clip,
}

impl Rows {
    /// The corners go clockwise on the screen.
    fn new([a, b, c]: [[i64; 2]; 3], clip: Clip) -> Self {
        let ends = |axis: usize| {
            let (p, q, r) = (a[axis], b[axis], c[axis]);
            let low = p.min(q).min(r).div_euclid(GRID);
            let high = p.max(q).max(r).div_euclid(GRID) + 1;
            (low, high)
        };
        let ((left, right), (top, bottom)) = (ends(0), ends(1));
        Self { edges: [Edge::new(a, b), Edge::new(b, c), Edge::new(c, a)], bounds: clip.meet(left, top, right, bottom) }
    }

    /// Calls `paint_run(y, left, right)` for every row with covered pixels.
    #[inline]
    fn for_each(&self, mut paint_run: impl FnMut(i64, i64, i64)) {
        for y in self.bounds.top..self.bounds.bottom {
            let (mut left, mut right) = (self.bounds.left, self.bounds.right);
            for edge in &self.edges {
                edge.narrow(y, &mut left, &mut right);
            }
            if left < right {
                paint_run(y, left, right);
            }
        }
    }
}

/// `N` values that change evenly over a triangle.
struct Plane<const N: usize> {
    origin: [f64; 2],
    at_origin: [f64; N],
    per_x: [f64; N],
    per_y: [f64; N],
}

impl<const N: usize> Plane<N> {
    fn new(corners: [&Corner; 3], value: impl Fn(&Corner) -> [f32; N]) -> Self {
        let [a, b, c] = corners.map(|corner| corner.grid.map(|side| side as f64 / GRID as f64));
        let [va, vb, vc] = corners.map(|corner| value(corner).map(f64::from));
        let (bx, by) = (b[0] - a[0], b[1] - a[1]);
        let (cx, cy) = (c[0] - a[0], c[1] - a[1]);
        let area = bx * cy - by * cx;
        let slope = |i: usize, p: f64, q: f64| ((vb[i] - va[i]) * p - (vc[i] - va[i]) * q) / area;
        Self {
            origin: a,
            at_origin: va,
            per_x: std::array::from_fn(|i| slope(i, cy, by)),
            per_y: std::array::from_fn(|i| -slope(i, cx, bx)),
        }
    }

    /// The values at the centre of pixel (`left`, `y`), and their change to the next pixel.
    #[inline]
    fn row(&self, left: i64, y: i64) -> ([f32; N], [f32; N]) {
        let dx = left as f64 + 0.5 - self.origin[0];
        let dy = y as f64 + 0.5 - self.origin[1];
        let first = std::array::from_fn(|i| (self.at_origin[i] + self.per_x[i] * dx + self.per_y[i] * dy) as f32);
        (first, self.per_x.map(|step| step as f32))
    }
}

#[inline]
fn along<const N: usize>(first: [f32; N], step: [f32; N], k: usize) -> [f32; N] {
    std::array::from_fn(|i| first[i] + step[i] * k as f32)
}

#[inline]
fn product(a: Channels, b: Channels) -> Channels {
    std::array::from_fn(|i| a[i] * b[i] / 255.0)
}

/// Enlarged and reduced textures have a filter each; which one counts depends on how far the
/// texture moves from one pixel to the next, in the direction where it moves most.
fn filter_for(uv: &Plane<2>, texture: &Texture) -> TextureFilter {
    let [width, height] = texture.size().map(|side| side as f64);
    let texels = |step: [f64; 2]| (step[0] * width).hypot(step[1] * height);
    texture.filter(texels(uv.per_x).max(texels(uv.per_y)))
}
