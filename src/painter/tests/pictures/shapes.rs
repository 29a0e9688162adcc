//! Plain shapes against pictures worked out by hand from the rules in the crate's description:
//! pixel centres, the top-left rule, premultiplied blending of sRGB bytes.

use crate::scene::*;
use egui::{Color32, Pos2, pos2};
use painter::Painter;

const BLACK: Color32 = Color32::BLACK;

#[test]
fn a_rectangle_covers_the_pixels_whose_centres_it_holds() {
    let shape = rect(1.0, 1.0, 4.0, 3.0, Color32::RED);
    let mut painter = painter();
    let image = painter.paint([6, 4], 1.0, BLACK, &[unclipped(shape)]);
    assert_eq!(marks(image, BLACK), ["......", ".###..", ".###..", "......"]);
    assert_eq!(image.pixel(1, 1), Some(Color32::RED));
    assert_eq!(image.pixel(6, 0), None);
}

#[test]
fn an_edge_through_a_pixel_centre_takes_the_left_and_top_pixel_only() {
    // Left edge on the centre of column 1, right edge on the centre of column 3.
    let shape = rect(1.5, 0.5, 3.5, 2.5, Color32::RED);
    let mut painter = painter();
    let image = painter.paint([5, 4], 1.0, BLACK, &[unclipped(shape)]);
    assert_eq!(marks(image, BLACK), [".##..", ".##..", ".....", "....."]);
}

#[test]
fn points_become_pixels_by_the_scale() {
    // One point is 1.5 pixels: 2 to 4 points are 3 to 6 pixels.
    let shape = rect(2.0, 0.0, 4.0, 2.0, Color32::RED);
    let mut painter = painter();
    let image = painter.paint([8, 4], 1.5, BLACK, &[unclipped(shape)]);
    assert_eq!(marks(image, BLACK), ["...###..", "...###..", "...###..", "........"]);
}

#[test]
fn half_transparent_colours_are_blended_as_bytes() {
    // White at alpha 128 over (10, 20, 30): 128 + round(c * 127 / 255):
    // 10 * 127 / 255 = 4.98, 20 * 127 / 255 = 9.96, 30 * 127 / 255 = 14.94.
    let shape = rect(0.0, 0.0, 1.0, 1.0, rgba(128, 128, 128, 128));
    let mut painter = painter();
    let background = Color32::from_rgb(10, 20, 30);
    let image = painter.paint([2, 1], 1.0, background, &[unclipped(shape)]);
    assert_eq!(image.pixel(0, 0), Some(Color32::from_rgb(133, 138, 143)));
    assert_eq!(image.pixel(1, 0), Some(background));
}

#[test]
fn additive_colours_stop_at_white() {
    // Alpha 0 with colour adds: 250 + 20 is held at 255.
    let shape = rect(0.0, 0.0, 1.0, 1.0, rgba(20, 20, 20, 0));
    let mut painter = painter();
    let background = Color32::from_rgb(250, 100, 0);
    let image = painter.paint([1, 1], 1.0, background, &[unclipped(shape)]);
    assert_eq!(image.pixel(0, 0), Some(Color32::from_rgb(255, 120, 20)));
}

#[test]
fn transparent_pictures_keep_their_alpha() {
    // Alpha 128 over alpha 0 stays 128; PNG bytes are not premultiplied: 64 * 255 / 128 = 127.5.
    let shape = rect(0.0, 0.0, 1.0, 1.0, rgba(64, 0, 128, 128));
    let mut painter = painter();
    let image = painter.paint([1, 1], 1.0, Color32::TRANSPARENT, &[unclipped(shape)]);
    assert_eq!(image.pixel(0, 0), Some(rgba(64, 0, 128, 128)));
    let bytes = image.to_rgba8();
    assert!(bytes[0] == 127 || bytes[0] == 128, "{bytes:?}");
    assert_eq!(bytes[1..], [0, 255, 128]);
}

#[test]
fn clip_rectangles_are_rounded_to_pixels() {
    // 1.4 rounds to 1, 3.6 to 4, 0.5 to 1, 2.4 to 2.
    let shape = rect(0.0, 0.0, 6.0, 4.0, Color32::RED);
    let mut painter = painter();
    let primitive = clipped(area(1.4, 0.5, 3.6, 2.4), shape);
    let image = painter.paint([6, 4], 1.0, BLACK, &[primitive]);
    assert_eq!(marks(image, BLACK), ["......", ".###..", "......", "......"]);
}

#[test]
fn clip_rectangles_hold_for_triangles_and_outside_the_picture() {
    let shape = triangle([(0.0, 0.0), (8.0, 0.0), (0.0, 8.0)], Color32::RED);
    let mut painter = painter();
    let inside = clipped(area(1.0, 1.0, 3.0, 3.0), shape.clone());
    let image = painter.paint([4, 4], 1.0, BLACK, &[inside]);
    assert_eq!(marks(image, BLACK), ["....", ".##.", ".##.", "...."]);

    for (left, right) in [(-9.0, -1.0), (5.0, 9.0), (3.0, 1.0), (f32::NAN, f32::NAN)] {
        let outside = clipped(area(left, 0.0, right, 4.0), shape.clone());
        let image = painter.paint([4, 4], 1.0, BLACK, &[outside]);
        assert_eq!(marks(image, BLACK), ["...."; 4], "clip {left} to {right}");
    }
}

#[test]
fn a_triangle_covers_the_centres_inside_it() {
    // Right angle at the top left, legs of 4 pixels. Centre (x + 0.5, y + 0.5) lies inside when
    // x + y + 1 < 4; centres with x + y + 1 = 4 lie on the slanted edge, a right edge, so outside.
    for points in [[(0.0, 0.0), (4.0, 0.0), (0.0, 4.0)], [(0.0, 0.0), (0.0, 4.0), (4.0, 0.0)]] {
        let mut painter = painter();
        let shape = triangle(points, Color32::RED);
        let image = painter.paint([5, 5], 1.0, BLACK, &[unclipped(shape)]);
        assert_eq!(marks(image, BLACK), ["###..", "##...", "#....", ".....", "....."]);
    }
    // The other half of the square has the same edge as its left edge, so those centres are in.
    let mut painter = painter();
    let shape = triangle([(4.0, 0.0), (4.0, 4.0), (0.0, 4.0)], Color32::RED);
    let image = painter.paint([5, 5], 1.0, BLACK, &[unclipped(shape)]);
    assert_eq!(marks(image, BLACK), ["...#.", "..##.", ".###.", "####.", "....."]);
}

#[test]
fn colours_change_evenly_between_corners() {
    // Black to white over 4 pixels: centres at 1/8, 3/8, 5/8, 7/8 of 255
    // are 31.875, 95.625, 159.375, 223.125.
    let vertices = [
        (pos2(0.0, 0.0), Pos2::ZERO, Color32::BLACK),
        (pos2(4.0, 0.0), Pos2::ZERO, Color32::WHITE),
        (pos2(0.0, 2.0), Pos2::ZERO, Color32::BLACK),
        (pos2(4.0, 2.0), Pos2::ZERO, Color32::WHITE),
    ];
    let shape = mesh(ATLAS, &vertices, &[0, 1, 2, 2, 1, 3]);
    let mut painter = painter();
    let image = painter.paint([4, 2], 1.0, Color32::RED, &[unclipped(shape)]);
    let want = [32, 96, 159, 223].map(Color32::from_gray);
    assert_eq!(colors(image), [want, want]);
}

#[test]
fn a_colour_in_the_middle_of_a_triangle_is_the_mean_of_its_corners() {
    // The centre of pixel (1, 1) is the centroid of these corners; the mean of pure red, green
    // and blue is 85 in each channel.
    let vertices = [
        (pos2(0.0, 0.0), Pos2::ZERO, Color32::from_rgb(255, 0, 0)),
        (pos2(4.5, 0.0), Pos2::ZERO, Color32::from_rgb(0, 255, 0)),
        (pos2(0.0, 4.5), Pos2::ZERO, Color32::from_rgb(0, 0, 255)),
    ];
    let shape = mesh(ATLAS, &vertices, &[0, 1, 2]);
    let mut painter = painter();
    let image = painter.paint([4, 4], 1.0, BLACK, &[unclipped(shape)]);
    assert_eq!(image.pixel(1, 1), Some(Color32::from_gray(85)));
}

#[test]
fn later_meshes_lie_on_top() {
    let under = rect(0.0, 0.0, 2.0, 1.0, Color32::RED);
    let over = rect(1.0, 0.0, 2.0, 1.0, Color32::GREEN);
    let mut painter = painter();
    let image = painter.paint([2, 1], 1.0, BLACK, &[unclipped(under), unclipped(over)]);
    assert_eq!(colors(image), [[Color32::RED, Color32::GREEN]]);
}

#[test]
fn window_words_hold_red_green_blue_and_no_alpha() {
    let shape = rect(1.0, 0.0, 2.0, 1.0, rgba(128, 0, 0, 128));
    let mut painter = painter();
    let mut words = [0xdead_beef_u32; 2];
    let background = Color32::from_rgb(1, 2, 3);
    let done = painter.paint_into(&mut words, [2, 1], 1.0, background, &[unclipped(shape)]);
    assert_eq!(done, Ok(()));
    // (1, 2, 3) * 127 / 255 = 0.498, 0.996, 1.494: 0, 1, 1.
    assert_eq!(words, [0x0001_0203, 0x0080_0101]);
}

#[test]
fn a_buffer_of_the_wrong_length_is_refused_untouched() {
    let mut words = [7_u32; 3];
    let refused = Painter::new().paint_into(&mut words, [2, 2], 1.0, BLACK, &[]);
    let error = refused.expect_err("3 words are no 2 by 2 picture");
    assert_eq!((error.needed, error.given), (4, 3));
    assert_eq!(error.to_string(), "the pixel buffer holds 3 words, the picture needs 4");
    assert_eq!(words, [7; 3]);
}

#[test]
fn empty_sizes_give_empty_pictures() {
    let shape = rect(0.0, 0.0, 9.0, 9.0, Color32::RED);
    let scene = [unclipped(shape)];
    let mut painter = painter();
    for size in [[0, 0], [0, 5], [5, 0]] {
        let image = painter.paint(size, 1.0, BLACK, &scene);
        assert_eq!([image.width(), image.height()], size.map(|n| n as usize));
        assert!(image.to_rgba8().is_empty());
        assert_eq!(painter.paint_into(&mut [], size, 1.0, BLACK, &scene), Ok(()));
    }
    let image = painter.paint([1, 1], 1.0, BLACK, &scene);
    assert_eq!(colors(image), [[Color32::RED]]);
}
