//! The painter under egui: real widgets, text and input, without a window.

mod support;

use egui::accesskit::Role;
use egui::{Color32, Modifiers, Rect, pos2, vec2};
use egui_kittest::Harness;
use egui_kittest::kittest::Queryable as _;
use support::CpuRenderer;

#[test]
fn a_painted_rectangle_has_the_pixels_asked_for() -> Result<(), String> {
    // One point is two pixels: the square from 10 to 20 points covers pixels 20 to 39.
    let blue = Color32::from_rgb(10, 20, 200);
    let mut harness = Harness::builder()
        .with_size(vec2(40.0, 30.0))
        .with_pixels_per_point(2.0)
        .renderer(CpuRenderer::default())
        .build_ui(|ui| {
            let square = Rect::from_min_max(pos2(10.0, 10.0), pos2(20.0, 20.0));
            // Painted over everything, without the harness's margin.
            let painter = ui.ctx().debug_painter();
            painter.rect_filled(square, 0.0, blue);
        });
    harness.run();
    let picture = harness.render()?;
    assert_eq!(picture.dimensions(), (80, 60));
    let blue = [10, 20, 200, 255];
    for (x, y) in [(21, 21), (38, 21), (21, 38), (38, 38), (30, 30)] {
        assert_eq!(picture.get_pixel(x, y).0, blue, "pixel ({x}, {y})");
    }
    for (x, y) in [(18, 30), (41, 30), (30, 18), (30, 41)] {
        assert_ne!(picture.get_pixel(x, y).0, blue, "pixel ({x}, {y})");
    }
    Ok(())
}

#[test]
fn typed_text_appears_in_the_picture() -> Result<(), String> {
    let ink = Color32::from_rgb(200, 0, 0);
    let dark_pixels = |picture: &image::RgbaImage| {
        let like_ink = |pixel: &&image::Rgba<u8>| pixel[0] > 100 && pixel[1] < 80 && pixel[3] > 100;
        picture.pixels().filter(like_ink).count()
    };
    let mut harness = Harness::builder().with_size(vec2(200.0, 60.0)).renderer(CpuRenderer::default()).build_ui_state(
        |ui, text: &mut String| {
            let label = ui.label("Text");
            ui.visuals_mut().override_text_color = Some(ink);
            ui.text_edit_singleline(text).labelled_by(label.id);
        },
        String::new(),
    );
    harness.run();
    let before = dark_pixels(&harness.render()?);
    harness.get_by_role(Role::TextInput).focus();
    harness.run();
    harness.get_by_role(Role::TextInput).type_text("MMMM");
    harness.run();
    harness.key_press_modifiers(Modifiers::NONE, egui::Key::End);
    harness.run();
    assert_eq!(harness.state(), "MMMM");
    let after = dark_pixels(&harness.render()?);
    assert_eq!(before, 0);
    // Four capital letters of some ten pixels' height cannot be drawn with fewer pixels.
    assert!(after > 40, "{after} pixels in the colour of the text");
    Ok(())
}
