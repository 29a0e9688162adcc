//! Triangles of any shape, with colour and texture running evenly across them.

use egui::Color32;
use egui::epaint::Vertex;

use crate::Clip;
use crate::image::{Image, over, times};
use crate::quad::fill;
use crate::texture::Texture;

/// Positions are kept in 256ths of a pixel, so that which pixels a triangle covers is decided by whole numbers.
const SUB: i64 = 256;
/// Farther out than this nothing is seen, and whole numbers would grow too large.
const FAR: f32 = 1.0e6;

/// Paints one triangle over what is there.
pub(crate) fn paint(image: &mut Image, texture: &Texture, corners: [&Vertex; 3], pixels_per_point: f32, clip: Clip) {
    let place = |vertex: &Vertex| {
        let position = vertex.pos * pixels_per_point;
        let is_near = position.x.abs() < FAR && position.y.abs() < FAR;
        is_near.then(|| [(position.x * SUB as f32).round() as i64, (position.y * SUB as f32).round() as i64])
    };
    let [Some(a), Some(b), Some(c)] = corners.map(place) else { return };
    let area = cross(a, b, c);
    if area == 0 || corners.iter().all(|corner| corner.color == Color32::TRANSPARENT) {
        return;
    }
    // One sense of turning serves all; the other is the same triangle with two corners changed over.
    let (corners, places) =
        if area > 0 { (corners, [a, b, c]) } else { ([corners[0], corners[2], corners[1]], [a, c, b]) };
    let edges = [Edge::new(places[1], places[2]), Edge::new(places[2], places[0]), Edge::new(places[0], places[1])];
    let lowest = places.iter().map(|place| place[1]).min().unwrap_or(0);
    let highest = places.iter().map(|place| place[1]).max().unwrap_or(0);
    let top = i64::from(clip.top).max(lowest.div_euclid(SUB));
    let bottom = i64::from(clip.bottom).min(highest.div_euclid(SUB) + 1);
    let shade = Shade::new(corners, places, texture);
    for y in top..bottom {
        let (mut left, mut right) = (i64::from(clip.left), i64::from(clip.right));
        for edge in &edges {
            edge.narrow(y, &mut left, &mut right);
        }
        if left < right {
            shade.paint_row(image.row(y as i32, left as i32, right as i32), texture, left, y);
        }
    }
}

fn cross(a: [i64; 2], b: [i64; 2], c: [i64; 2]) -> i64 {
    (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])
}

/// One side of a triangle: `at(x, y) = start + x * along + y * down` is positive within, in pixel centres.
struct Edge {
    start: i64,
    along: i64,
    down: i64,
    least: i64,
}

impl Edge {
    fn new(from: [i64; 2], to: [i64; 2]) -> Self {
        let (dx, dy) = (to[0] - from[0], to[1] - from[1]);
        let centre = [SUB / 2 - from[0], SUB / 2 - from[1]];
        // A centre on the side itself belongs to the triangle whose top or left side this is.
        let is_top_or_left = dy < 0 || (dy == 0 && dx > 0);
        Self {
            start: dx * centre[1] - dy * centre[0],
            along: -dy * SUB,
            down: dx * SUB,
            least: i64::from(!is_top_or_left),
        }
    }

    /// Narrows a stretch of row `y` to what lies within this side.
    fn narrow(&self, y: i64, left: &mut i64, right: &mut i64) {
        let needed = self.least - (self.start + y * self.down);
        if self.along > 0 {
            *left = (*left).max(-(-needed).div_euclid(self.along));
        } else if self.along < 0 {
            *right = (*right).min((-needed).div_euclid(-self.along) + 1);
        } else if needed > 0 {
            *right = *left;
        }
    }
}

/// A value that runs evenly across the triangle.
#[derive(Clone, Copy)]
struct Plane {
    start: f32,
    along: f32,
    down: f32,
}

impl Plane {
    fn new(values: [f32; 3], places: [[i64; 2]; 3]) -> Self {
        let point = |index: usize| places[index].map(|part| part as f64 / SUB as f64);
        let ([ax, ay], [bx, by], [cx, cy]) = (point(0), point(1), point(2));
        let [va, vb, vc] = values.map(f64::from);
        let area = (bx - ax) * (cy - ay) - (by - ay) * (cx - ax);
        let along = ((vb - va) * (cy - ay) - (vc - va) * (by - ay)) / area;
        let down = ((vc - va) * (bx - ax) - (vb - va) * (cx - ax)) / area;
        let start = va + (0.5 - ax) * along + (0.5 - ay) * down;
        Self { start: start as f32, along: along as f32, down: down as f32 }
    }

    fn at(&self, x: i64, y: i64) -> f32 {
        self.start + x as f32 * self.along + y as f32 * self.down
    }
}

/// How a triangle is coloured.
enum Shade {
    /// One colour.
    Plain(Color32),
    /// Colour running across one texel.
    Colours([Plane; 4], Color32),
    /// Colour and texture running across.
    Textured([Plane; 4], [Plane; 2]),
}

impl Shade {
    fn new(corners: [&Vertex; 3], places: [[i64; 2]; 3], texture: &Texture) -> Self {
        let [width, height] = texture.size();
        let is_one_texel = corners.iter().all(|corner| corner.uv == corners[0].uv);
        let is_one_colour = corners.iter().all(|corner| corner.color == corners[0].color);
        let texel = || texture.sample(corners[0].uv.x * width, corners[0].uv.y * height);
        if is_one_texel && is_one_colour {
            return Self::Plain(times(corners[0].color, texel()));
        }
        let channel =
            |index: usize| Plane::new(corners.map(|corner| f32::from(corner.color.to_array()[index])), places);
        let colours = [channel(0), channel(1), channel(2), channel(3)];
        if is_one_texel {
            return Self::Colours(colours, texel());
        }
        let across = Plane::new(corners.map(|corner| corner.uv.x * width), places);
        let down = Plane::new(corners.map(|corner| corner.uv.y * height), places);
        Self::Textured(colours, [across, down])
    }

    fn paint_row(&self, row: &mut [Color32], texture: &Texture, left: i64, y: i64) {
        match self {
            Self::Plain(colour) => fill(row, *colour),
            Self::Colours(planes, texel) => {
                for (x, pixel) in (left..).zip(row) {
                    *pixel = over(times(colour_at(planes, x, y), *texel), *pixel);
                }
            }
            Self::Textured(planes, [across, down]) => {
                for (x, pixel) in (left..).zip(row) {
                    let texel = texture.sample(across.at(x, y), down.at(x, y));
                    *pixel = over(times(colour_at(planes, x, y), texel), *pixel);
                }
            }
        }
    }
}

fn colour_at(planes: &[Plane; 4], x: i64, y: i64) -> Color32 {
    let [r, g, b, a] = [0, 1, 2, 3].map(|index| (planes[index].at(x, y) + 0.5).clamp(0.0, 255.0) as u8);
    Color32::from_rgba_premultiplied(r, g, b, a)
}
