//! Sweeps: whatever the shape, every pixel is drawn once, and nothing brings the painter down.

use crate::scene::*;
use egui::{Color32, Mesh, Pos2, Rect, pos2};

/// A fixed sequence of numbers from 0 to 1 (Knuth's 64-bit linear congruential generator).
struct Numbers(u64);

impl Numbers {
    fn next(&mut self) -> f32 {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 40) as f32 / (1_u64 << 24) as f32
    }
}

/// A step that shows how often a pixel was drawn: it adds 16 without covering what lies below.
const STEP: Color32 = Color32::from_rgba_premultiplied(16, 16, 16, 0);

const SIDE: u32 = 32;

/// Draws the mesh and returns how often each pixel was drawn.
fn counts(mesh: Mesh) -> Vec<u8> {
    let mut painter = painter();
    let image = painter.paint([SIDE, SIDE], 1.0, Color32::BLACK, &[unclipped(mesh)]);
    image.to_color_image().pixels.iter().map(|c| c.r() / 16).collect()
}

#[test]
fn a_fan_of_triangles_covers_a_square_exactly_once() {
    let mut numbers = Numbers(1);
    for round in 0..400 {
        // Corners on whole pixels, or anywhere; the hub anywhere inside, often on the grid.
        let fine = if round % 2 == 0 { 1.0 } else { 8.0 };
        let mut place = |low: f32, high: f32| (low + (high - low) * numbers.next()) * fine;
        let (left, right) = (place(1.0, 8.0).round() / fine, place(20.0, 30.0).round() / fine);
        let (top, bottom) = (place(1.0, 8.0).round() / fine, place(20.0, 30.0).round() / fine);
        let hub = pos2(place(9.0, 19.0) / fine, place(9.0, 19.0) / fine);
        let hub = if round % 3 == 0 { hub.round() } else { hub };
        let mut rim = vec![pos2(left, top)];
        for corner in [pos2(right, top), pos2(right, bottom), pos2(left, bottom), pos2(left, top)] {
            let from = rim[rim.len() - 1];
            let share = place(0.1, 0.9) / fine;
            // Points on an upright edge stay on it, so the outline stays the square.
            rim.push(from + (corner - from) * share);
            rim.push(corner);
        }
        let vertices: Vec<_> = std::iter::once(hub).chain(rim).map(|pos| (pos, Pos2::ZERO, STEP)).collect();
        let mut indices = Vec::new();
        for i in 1..vertices.len() as u32 - 1 {
            // Both directions of winding.
            indices.extend(if i % 2 == 0 { [0, i, i + 1] } else { [0, i + 1, i] });
        }
        let drawn = counts(mesh(ATLAS, &vertices, &indices));
        for y in 0..SIDE {
            for x in 0..SIDE {
                let (cx, cy) = (x as f32 + 0.5, y as f32 + 0.5);
                let inside = left <= cx && cx < right && top <= cy && cy < bottom;
                let count = drawn[(y * SIDE + x) as usize];
                assert_eq!(count, u8::from(inside), "round {round}, pixel ({x}, {y})");
            }
        }
    }
}

#[test]
fn two_triangles_never_share_a_pixel_of_their_common_edge() {
    let mut numbers = Numbers(2);
    for round in 0..2000 {
        let mut corner = |grid: f32| {
            let place = |n: f32| {
                if grid > 0.0 { (n * grid).round() * 32.0 / grid } else { n * 32.0 }
            };
            pos2(place(numbers.next()), place(numbers.next()))
        };
        let grid = [0.0, 32.0, 64.0, 8.0][round % 4];
        let (a, b) = (corner(grid), corner(grid));
        let (c, d) = (corner(grid), corner(grid));
        let side = |p: Pos2| (b - a).x * (p - a).y - (b - a).y * (p - a).x;
        if side(c) * side(d) >= 0.0 {
            continue;
        }
        let vertices = [a, b, c, d].map(|pos| (pos, Pos2::ZERO, STEP));
        let both = counts(mesh(ATLAS, &vertices, &[0, 1, 2, 0, 1, 3]));
        let one = counts(mesh(ATLAS, &vertices, &[0, 1, 2]));
        let other = counts(mesh(ATLAS, &vertices, &[0, 1, 3]));
        for i in 0..both.len() {
            assert!(both[i] <= 1, "round {round}: pixel {i} drawn {} times", both[i]);
            assert_eq!(both[i], one[i] + other[i], "round {round}: pixel {i}");
        }
    }
}

#[test]
fn rectangles_cover_what_their_two_triangles_cover() {
    let mut numbers = Numbers(3);
    for round in 0..500 {
        let mut place = || (numbers.next() * 36.0 - 2.0) * 64.0;
        let [x, y, w, h] = [place(), place(), place(), place()].map(|n| n.round() / 64.0);
        let corners = Rect::from_two_pos(pos2(x, y), pos2(w, h));
        let quick = rect(corners.left(), corners.top(), corners.right(), corners.bottom(), STEP);
        let mut slow = quick.clone();
        // The same two triangles in an order that is not recognised as a rectangle.
        slow.indices = vec![1, 2, 0, 3, 2, 1];
        assert_eq!(counts(quick), counts(slow), "round {round}: {corners:?}");
    }
}

#[test]
fn a_picture_drawn_quickly_equals_the_picture_drawn_by_triangles() {
    let mut numbers = Numbers(4);
    let texels: Vec<Color32> = (0..64)
        .map(|_| {
            let a = (numbers.next() * 255.0) as u8;
            let part = |share: f32| (share * f32::from(a)) as u8;
            rgba(part(numbers.next()), part(numbers.next()), part(numbers.next()), a)
        })
        .collect();
    let rows: Vec<&[Color32]> = texels.chunks(8).collect();
    for tint in [Color32::WHITE, rgba(100, 50, 25, 200), rgba(9, 9, 9, 0)] {
        let mut painter = painter();
        set_with(&mut painter, ATLAS, None, &rows, egui::TextureOptions::LINEAR);
        let uv = area(0.25, 0.125, 0.75, 0.875);
        let quick = picture(ATLAS, area(2.0, 1.0, 6.0, 7.0), uv, tint);
        let mut slow = quick.clone();
        slow.indices = vec![1, 2, 0, 3, 2, 1];
        let background = Color32::from_rgb(30, 60, 90);
        let quick = painter.paint([8, 8], 1.0, background, &[unclipped(quick)]).clone();
        let slow = painter.paint([8, 8], 1.0, background, &[unclipped(slow)]);
        for (x, y) in (0..8).flat_map(|y| (0..8).map(move |x| (x, y))) {
            let bytes = |image: &painter::Image| image.pixel(x, y).map(|color| color.to_array().map(i16::from));
            let (Some(a), Some(b)) = (bytes(&quick), bytes(slow)) else {
                panic!("pixel ({x}, {y}) is missing");
            };
            // The triangles interpolate in single precision, which may round the other way.
            let close = a.iter().zip(&b).all(|(a, b)| (a - b).abs() <= 1);
            assert!(close, "pixel ({x}, {y}): {a:?} and {b:?}");
        }
    }
}

#[test]
fn shapes_that_reach_far_outside_are_cut_without_changing_inside() {
    // The half plane below the diagonal, with corners further and further away.
    let near = counts(triangle([(-64.0, -64.0), (96.0, 96.0), (-64.0, 96.0)], STEP));
    for reach in [1e4_f32, 1e6, 2e6, 1e9, 1e12] {
        let far = triangle([(-reach, -reach), (reach, reach), (-reach, reach)], STEP);
        let drawn = counts(far);
        for (i, (near, far)) in near.iter().zip(&drawn).enumerate() {
            let (x, y) = (i as u32 % SIDE, i as u32 / SIDE);
            // Centres on the diagonal itself may fall either way once it has been cut.
            if x != y {
                assert_eq!(near, far, "reach {reach}, pixel ({x}, {y})");
            }
        }
    }
}

#[test]
fn nothing_brings_the_painter_down() {
    let odd = [0.0, -0.0, 0.5, 1e-30, -1e9, 1e9, 1e30, f32::MAX, f32::MIN, f32::INFINITY, f32::NEG_INFINITY, f32::NAN];
    let mut numbers = Numbers(5);
    let mut any = || odd[(numbers.next() * odd.len() as f32) as usize % odd.len()];
    let mut painter = painter();
    for _ in 0..3000 {
        let vertices: Vec<_> =
            (0..4).map(|i| (pos2(any(), any()), pos2(any(), any()), Color32::from_gray(i * 60))).collect();
        let clip = area(any(), any(), any(), any());
        let scene = [
            clipped(clip, mesh(ATLAS, &vertices, &[0, 1, 2, 2, 1, 3, 0, 1, 9, u32::MAX, 0])),
            unclipped(mesh(ATLAS, &vertices, &[0, 1, 2, 2, 1, 3])),
        ];
        let scale = any();
        let image = painter.paint([7, 5], scale, Color32::BLACK, &scene);
        assert_eq!(image.to_rgba8().len(), 7 * 5 * 4);
    }
}
