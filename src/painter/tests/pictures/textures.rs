//! Textures: one on one, enlarged, turned, wrapped, changed in part, released. The expected
//! pixels follow from the definition of the filters.

use crate::scene::*;
use egui::{Color32, Pos2, TextureId, TextureOptions, TexturesDelta, pos2};

const R: Color32 = Color32::from_rgb(200, 0, 0);
const G: Color32 = Color32::from_rgb(0, 200, 0);
const B: Color32 = Color32::from_rgb(0, 0, 200);
const W: Color32 = Color32::from_rgb(200, 200, 200);
const K: Color32 = Color32::BLACK;
const PHOTO: TextureId = TextureId::User(3);

#[test]
fn a_picture_is_copied_one_on_one() {
    for options in [TextureOptions::NEAREST, TextureOptions::LINEAR] {
        let mut painter = painter();
        set_with(&mut painter, PHOTO, None, &[&[R, G], &[B, W]], options);
        let shape = picture(PHOTO, area(1.0, 1.0, 3.0, 3.0), area(0.0, 0.0, 1.0, 1.0), Color32::WHITE);
        let image = painter.paint([4, 3], 1.0, K, &[unclipped(shape)]);
        assert_eq!(colors(image), [[K, K, K, K], [K, R, G, K], [K, B, W, K]]);
    }
}

#[test]
fn a_letter_takes_its_colour_from_the_text_and_its_shape_from_the_texture() {
    // A letter with coverage 255 and 51 = 255 / 5, in the colour (250, 100, 5), on (100, 100, 100).
    // Coverage 51 gives (50, 20, 1) with alpha 51, over 100 * 204 / 255 = 80.
    let mut painter = painter();
    let half = rgba(51, 51, 51, 51);
    set(&mut painter, ATLAS, None, &[&[Color32::WHITE, K], &[Color32::WHITE, half]]);
    let ink = Color32::from_rgb(250, 100, 5);
    let shape = picture(ATLAS, area(0.0, 0.0, 2.0, 1.0), area(0.0, 0.5, 1.0, 1.0), ink);
    let paper = Color32::from_gray(100);
    let image = painter.paint([2, 1], 1.0, paper, &[unclipped(shape)]);
    assert_eq!(colors(image), [[ink, Color32::from_rgb(130, 100, 81)]]);
}

#[test]
fn a_clipped_letter_keeps_its_place() {
    let mut painter = painter();
    set(&mut painter, PHOTO, None, &[&[R, G, B], &[W, R, G], &[B, W, R]]);
    let shape = picture(PHOTO, area(-1.0, -1.0, 2.0, 2.0), area(0.0, 0.0, 1.0, 1.0), Color32::WHITE);
    let image = painter.paint([3, 3], 1.0, K, &[unclipped(shape.clone())]);
    assert_eq!(colors(image), [[R, G, K], [W, R, K], [K, K, K]]);
    let image = painter.paint([3, 3], 1.0, K, &[clipped(area(1.0, 0.0, 3.0, 1.0), shape)]);
    assert_eq!(colors(image), [[K, G, K], [K, K, K], [K, K, K]]);
}

#[test]
fn enlarging_repeats_texels_or_mixes_them() {
    // Two texels over four pixels. Pixel centres fall on 0.25, 0.75, 1.25, 1.75 texels.
    // Linear: texel centres are at 0.5 and 1.5, so the shares of the second are 0, 1/4, 3/4, 1.
    let two: &[&[Color32]] = &[&[K, W]];
    let shape = picture(PHOTO, area(0.0, 0.0, 4.0, 1.0), area(0.0, 0.0, 1.0, 1.0), Color32::WHITE);
    let mut painter = painter();
    set_with(&mut painter, PHOTO, None, two, TextureOptions::NEAREST);
    let image = painter.paint([4, 1], 1.0, R, &[unclipped(shape.clone())]);
    assert_eq!(colors(image), [[K, K, W, W]]);
    set_with(&mut painter, PHOTO, None, two, TextureOptions::LINEAR);
    let image = painter.paint([4, 1], 1.0, R, &[unclipped(shape)]);
    let want = [0, 50, 150, 200].map(Color32::from_gray);
    assert_eq!(colors(image), [want]);
}

#[test]
fn the_filter_for_reducing_is_its_own() {
    // Four texels on two pixels; centres fall on texels 1.0 and 3.0. Nearest takes texels 1 and 3;
    // linear mixes texels 0 and 1, 2 and 3 in equal parts.
    let four: &[&[Color32]] = &[&[K, W, K, K]];
    let shape = picture(PHOTO, area(0.0, 0.0, 2.0, 1.0), area(0.0, 0.0, 1.0, 1.0), Color32::WHITE);
    let mut painter = painter();
    let mut options = TextureOptions::LINEAR;
    options.minification = egui::TextureFilter::Nearest;
    set_with(&mut painter, PHOTO, None, four, options);
    let image = painter.paint([2, 1], 1.0, R, &[unclipped(shape.clone())]);
    assert_eq!(colors(image), [[W, K]]);
    let mut options = TextureOptions::NEAREST;
    options.minification = egui::TextureFilter::Linear;
    set_with(&mut painter, PHOTO, None, four, options);
    let image = painter.paint([2, 1], 1.0, R, &[unclipped(shape)]);
    assert_eq!(colors(image), [[Color32::from_gray(100), K]]);
}

#[test]
fn turned_text_is_not_mistaken_for_upright_text() {
    // A picture turned a quarter to the left: its top row R G stands upright on the left,
    // G above R. The rectangle is as upright as before; only the texture corners tell.
    let corners = [
        (pos2(0.0, 0.0), pos2(1.0, 0.0)),
        (pos2(2.0, 0.0), pos2(1.0, 1.0)),
        (pos2(0.0, 2.0), pos2(0.0, 0.0)),
        (pos2(2.0, 2.0), pos2(0.0, 1.0)),
    ];
    let vertices = corners.map(|(pos, uv)| (pos, uv, Color32::WHITE));
    let mut painter = painter();
    set(&mut painter, PHOTO, None, &[&[R, G], &[B, W]]);
    let shape = mesh(PHOTO, &vertices, &[0, 1, 2, 2, 1, 3]);
    let image = painter.paint([2, 2], 1.0, K, &[unclipped(shape)]);
    assert_eq!(colors(image), [[G, W], [R, B]]);
}

#[test]
fn mirrored_pictures_are_mirrored() {
    let mut painter = painter();
    set(&mut painter, PHOTO, None, &[&[R, G], &[B, W]]);
    let shape = picture(PHOTO, area(0.0, 0.0, 2.0, 2.0), area(1.0, 0.0, 0.0, 1.0), Color32::WHITE);
    let image = painter.paint([2, 2], 1.0, K, &[unclipped(shape)]);
    assert_eq!(colors(image), [[G, R], [W, B]]);
}

#[test]
fn coordinates_beyond_the_texture_follow_the_wrap_mode() {
    // Two texels over six pixels from one texture width before to one after.
    let place = area(0.0, 0.0, 6.0, 1.0);
    let shape = picture(PHOTO, place, area(-1.0, 0.0, 2.0, 1.0), Color32::WHITE);
    let cases = [
        (TextureOptions::NEAREST, [R, R, R, G, G, G]),
        (TextureOptions::NEAREST_REPEAT, [R, G, R, G, R, G]),
        (TextureOptions::NEAREST_MIRRORED_REPEAT, [G, R, R, G, G, R]),
    ];
    for (options, want) in cases {
        let mut painter = painter();
        set_with(&mut painter, PHOTO, None, &[&[R, G]], options);
        let image = painter.paint([6, 1], 1.0, K, &[unclipped(shape.clone())]);
        assert_eq!(colors(image), [want], "{:?}", options.wrap_mode);
    }
}

#[test]
fn a_partial_change_replaces_only_its_part() {
    let whole = picture(PHOTO, area(0.0, 0.0, 3.0, 2.0), area(0.0, 0.0, 1.0, 1.0), Color32::WHITE);
    let mut painter = painter();
    set(&mut painter, PHOTO, None, &[&[R, R, R], &[R, R, R]]);
    set(&mut painter, PHOTO, Some([1, 1]), &[&[G, B]]);
    let image = painter.paint([3, 2], 1.0, K, &[unclipped(whole.clone())]);
    assert_eq!(colors(image), [[R, R, R], [R, G, B]]);

    // A part that hangs over the edge is cut off; one that lies outside changes nothing.
    set(&mut painter, PHOTO, Some([2, 0]), &[&[W, K], &[W, K], &[W, K]]);
    set(&mut painter, PHOTO, Some([5, 5]), &[&[K]]);
    let image = painter.paint([3, 2], 1.0, K, &[unclipped(whole)]);
    assert_eq!(colors(image), [[R, R, W], [R, G, W]]);
}

#[test]
fn a_released_texture_serves_the_frame_that_releases_it_and_then_goes() {
    let shape = picture(PHOTO, area(0.0, 0.0, 1.0, 1.0), area(0.0, 0.0, 1.0, 1.0), Color32::WHITE);
    let scene = [unclipped(shape)];
    let mut painter = painter();
    set(&mut painter, PHOTO, None, &[&[R]]);
    let mut delta = TexturesDelta::default();
    delta.free(PHOTO);
    painter.update_textures(&delta);
    delta.clear();
    assert_eq!(colors(painter.paint([1, 1], 1.0, K, &scene)), [[R]]);
    painter.update_textures(&delta);
    assert_eq!(colors(painter.paint([1, 1], 1.0, K, &scene)), [[K]]);
}

#[test]
fn unknown_and_empty_textures_draw_nothing() {
    let unknown = mesh(
        TextureId::User(9),
        &[(0.0, 0.0), (4.0, 0.0), (0.0, 4.0)].map(|(x, y)| (pos2(x, y), Pos2::ZERO, W)),
        &[0, 1, 2],
    );
    let mut empty = unknown.clone();
    empty.texture_id = PHOTO;
    let mut painter = painter();
    set(&mut painter, PHOTO, None, &[]);
    let image = painter.paint([2, 1], 1.0, K, &[unclipped(unknown), unclipped(empty)]);
    assert_eq!(colors(image), [[K, K]]);
}
