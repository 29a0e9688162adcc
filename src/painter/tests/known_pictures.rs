//! Pictures whose pixels were worked out by hand.

use std::sync::Arc;

use egui::epaint::textures::TexturesDelta;
use egui::epaint::{ClippedPrimitive, ImageDelta, Primitive, Vertex};
use egui::{Color32, ColorImage, Mesh, Pos2, Rect, TextureId, TextureOptions, pos2, vec2};
use painter::{Image, Painter};

const FONT: TextureId = TextureId::Managed(0);
const WHITE_UV: Pos2 = pos2(0.125, 0.125);

/// A texture of 4 x 4 texels: white at the top left, then red, green, blue along the first row, half-transparent white below.
fn texture() -> TexturesDelta {
    let mut image = ColorImage::filled([4, 4], Color32::from_rgba_premultiplied(128, 128, 128, 128));
    image.pixels[..4].copy_from_slice(&[Color32::WHITE, Color32::RED, Color32::GREEN, Color32::BLUE]);
    let mut delta = TexturesDelta::default();
    delta.push(FONT, ImageDelta::full(Arc::new(image), TextureOptions::NEAREST));
    delta
}

fn paint(size: [usize; 2], meshes: Vec<(Rect, Mesh)>) -> Image {
    let mut painter = Painter::new();
    let delta = texture();
    painter.set_textures(&delta);
    painter.free_textures(delta);
    let primitives: Vec<ClippedPrimitive> = meshes
        .into_iter()
        .map(|(clip_rect, mesh)| ClippedPrimitive { clip_rect, primitive: Primitive::Mesh(mesh) })
        .collect();
    painter.paint(size, 1.0, Color32::BLACK, &primitives).clone()
}

fn everywhere() -> Rect {
    Rect::from_min_size(Pos2::ZERO, vec2(100.0, 100.0))
}

fn mesh(vertices: Vec<(Pos2, Color32, Pos2)>, indices: Vec<u32>) -> Mesh {
    let vertices = vertices.into_iter().map(|(pos, color, uv)| Vertex { pos, uv, color }).collect();
    Mesh { indices, vertices, texture_id: FONT }
}

fn rectangle(rect: Rect, colour: Color32) -> Mesh {
    let mut mesh = Mesh::with_texture(FONT);
    mesh.add_rect_with_uv(rect, Rect::from_min_max(WHITE_UV, WHITE_UV), colour);
    mesh
}

/// Which pixels are `colour`, as rows of `#` and `.`.
fn shape(image: &Image, colour: Color32) -> Vec<String> {
    let [width, height] = image.size();
    (0..height)
        .map(|y| (0..width).map(|x| if image.pixel(x, y) == Some(colour) { '#' } else { '.' }).collect())
        .collect()
}

#[test]
fn a_rectangle_covers_the_pixels_whose_centres_it_holds() {
    let rect = Rect::from_min_max(pos2(0.6, 1.0), pos2(3.5, 2.4));
    let image = paint([5, 4], vec![(everywhere(), rectangle(rect, Color32::RED))]);
    assert_eq!(shape(&image, Color32::RED), [".....", ".##..", ".....", "....."]);
}

#[test]
fn half_transparent_white_over_black_and_over_red() {
    let half = Color32::from_rgba_premultiplied(128, 128, 128, 128);
    let whole = Rect::from_min_max(pos2(0.0, 0.0), pos2(2.0, 1.0));
    let right = Rect::from_min_max(pos2(1.0, 0.0), pos2(2.0, 1.0));
    let image =
        paint([2, 1], vec![(everywhere(), rectangle(right, Color32::RED)), (everywhere(), rectangle(whole, half))]);
    assert_eq!(image.pixel(0, 0), Some(Color32::from_rgb(128, 128, 128)));
    // 128 + 255 x 127 / 255 = 255 red; 128 green and blue.
    assert_eq!(image.pixel(1, 0), Some(Color32::from_rgb(255, 128, 128)));
}

#[test]
fn the_clip_rectangle_is_kept() {
    let clip = Rect::from_min_max(pos2(1.0, 1.0), pos2(3.0, 2.0));
    let image = paint([4, 3], vec![(clip, rectangle(everywhere(), Color32::RED))]);
    assert_eq!(shape(&image, Color32::RED), ["....", ".##.", "...."]);
}

#[test]
fn a_triangle_covers_the_centres_within_and_its_top_left_edges() {
    // Legs of 4 along the top and the left; centres on the slanted side (x + y = 3.5 + 0.5) belong to the other triangle.
    let corner = |x: f32, y: f32| (pos2(x, y), Color32::RED, WHITE_UV);
    let one = mesh(vec![corner(0.0, 0.0), corner(4.0, 0.0), corner(0.0, 4.0)], vec![0, 1, 2]);
    let image = paint([4, 4], vec![(everywhere(), one)]);
    assert_eq!(shape(&image, Color32::RED), ["###.", "##..", "#...", "...."]);
}

#[test]
fn triangles_that_share_a_side_blend_every_pixel_once() {
    let half = Color32::from_rgba_premultiplied(100, 100, 100, 128);
    for turn in 0..64 {
        // A fan round an uneven middle; every pixel centre lies in exactly one of the triangles.
        let middle = pos2(8.0 + (turn as f32 * 0.37).sin() * 3.0, 8.0 + (turn as f32 * 0.61).cos() * 3.0);
        let corners = [pos2(-1.0, -1.0), pos2(17.0, -1.0), pos2(17.0, 17.0), pos2(-1.0, 17.0)];
        let mut vertices = vec![(middle, half, WHITE_UV)];
        vertices.extend(corners.map(|corner| (corner, half, WHITE_UV)));
        let fan = mesh(vertices, vec![0, 1, 2, 3, 0, 2, 0, 3, 4, 1, 0, 4]);
        let image = paint([16, 16], vec![(everywhere(), fan)]);
        assert!(image.pixels().iter().all(|pixel| pixel.r() == 100), "turn {turn}");
    }
}

#[test]
fn colours_run_evenly_across() {
    let corner = |x: f32, y: f32, grey: u8| (pos2(x, y), Color32::from_gray(grey), WHITE_UV);
    let strip = mesh(
        vec![corner(0.0, 0.0, 0), corner(10.0, 0.0, 200), corner(0.0, 1.0, 0), corner(10.0, 1.0, 200)],
        vec![0, 1, 2, 2, 1, 3],
    );
    let image = paint([10, 1], vec![(everywhere(), strip)]);
    let greys: Vec<u8> = image.pixels().iter().map(|pixel| pixel.r()).collect();
    assert_eq!(greys, [10, 30, 50, 70, 90, 110, 130, 150, 170, 190]);
}

#[test]
fn a_texture_is_shown_texel_by_texel_and_magnified() {
    let mut upright = Mesh::with_texture(FONT);
    upright.add_rect_with_uv(
        Rect::from_min_size(pos2(1.0, 0.0), vec2(4.0, 1.0)),
        Rect::from_min_max(pos2(0.0, 0.0), pos2(1.0, 0.25)),
        Color32::WHITE,
    );
    let image = paint([5, 1], vec![(everywhere(), upright)]);
    let colours = [Color32::BLACK, Color32::WHITE, Color32::RED, Color32::GREEN, Color32::BLUE];
    assert_eq!(image.pixels(), colours);
    let mut doubled = Mesh::with_texture(FONT);
    doubled.add_rect_with_uv(
        Rect::from_min_size(pos2(0.0, 0.0), vec2(8.0, 1.0)),
        Rect::from_min_max(pos2(0.0, 0.0), pos2(1.0, 0.25)),
        Color32::WHITE,
    );
    let image = paint([8, 1], vec![(everywhere(), doubled)]);
    assert_eq!(shape(&image, Color32::RED), ["..##...."]);
}

#[test]
fn a_turned_texture_is_turned() {
    // The first row of texels, shown downwards: an upright rectangle whose texture coordinates are not upright.
    let turned = mesh(
        vec![
            (pos2(0.0, 0.0), Color32::WHITE, pos2(0.0, 0.25)),
            (pos2(1.0, 0.0), Color32::WHITE, pos2(0.0, 0.0)),
            (pos2(0.0, 4.0), Color32::WHITE, pos2(1.0, 0.25)),
            (pos2(1.0, 4.0), Color32::WHITE, pos2(1.0, 0.0)),
        ],
        vec![0, 1, 2, 2, 1, 3],
    );
    let image = paint([1, 4], vec![(everywhere(), turned)]);
    assert_eq!(image.pixels(), [Color32::WHITE, Color32::RED, Color32::GREEN, Color32::BLUE]);
}

#[test]
fn a_part_of_a_texture_can_be_replaced_and_a_texture_freed() {
    let mut painter = Painter::new();
    let mut delta = texture();
    let patch = ColorImage::filled([2, 1], Color32::YELLOW);
    delta.push(FONT, ImageDelta::partial([1, 0], Arc::new(patch), TextureOptions::NEAREST));
    painter.set_textures(&delta);
    painter.free_textures(delta);
    let mut row = Mesh::with_texture(FONT);
    row.add_rect_with_uv(
        Rect::from_min_size(Pos2::ZERO, vec2(4.0, 1.0)),
        Rect::from_min_max(pos2(0.0, 0.0), pos2(1.0, 0.25)),
        Color32::WHITE,
    );
    let primitives = [ClippedPrimitive { clip_rect: everywhere(), primitive: Primitive::Mesh(row) }];
    let image = painter.paint([4, 1], 1.0, Color32::BLACK, &primitives);
    assert_eq!(image.pixels(), [Color32::WHITE, Color32::YELLOW, Color32::YELLOW, Color32::BLUE]);
    let mut freed = TexturesDelta::default();
    freed.free(FONT);
    painter.free_textures(freed);
    let image = painter.paint([4, 1], 1.0, Color32::BLACK, &primitives);
    assert!(image.pixels().iter().all(|pixel| *pixel == Color32::BLACK));
}

#[test]
fn any_size_and_any_place_is_painted_without_harm() {
    for size in [[0, 0], [1, 1], [0, 5], [3, 0]] {
        for far in [-1.0e9, -10.0, 0.0, 10.0, 1.0e9, f32::NAN] {
            let corner = |x: f32, y: f32| (pos2(x, y), Color32::RED, WHITE_UV);
            let stray = mesh(vec![corner(far, 0.0), corner(4.0, far), corner(0.0, 4.0)], vec![0, 1, 2, 0, 1, 9]);
            let wide = rectangle(Rect::from_min_max(pos2(far, far), pos2(20.0, 20.0)), Color32::RED);
            assert_eq!(paint(size, vec![(everywhere(), stray), (everywhere(), wide)]).size(), size);
        }
    }
}

#[test]
fn the_words_for_a_window_hold_red_green_blue() {
    let image = paint([1, 1], vec![(everywhere(), rectangle(everywhere(), Color32::from_rgb(1, 2, 3)))]);
    let mut words = [0; 1];
    image.write_rgb_words(&mut words);
    assert_eq!(words, [0x0001_0203]);
    assert_eq!(image.to_rgba_bytes(), [1, 2, 3, 255]);
}
