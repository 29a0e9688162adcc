//! The whole window in both themes and two sizes: it is drawn without a fault, and every part keeps to its place.

mod fixture;

use egui::Key;
use fixture::{pictures, whole};

const SIZES: [[f32; 2]; 2] = [[1280.0, 800.0], [1920.0, 1080.0]];
const SHEETS: [Key; 5] = [Key::Num1, Key::Num2, Key::Num3, Key::Num4, Key::Num5];

#[test]
fn every_sheet_is_drawn_in_both_themes_and_sizes() {
    for size in SIZES {
        let mut window = whole::on_samples(size);
        for theme in ["light", "dark"] {
            window.click(theme);
            for (number, key) in (1..).zip(SHEETS) {
                window.ctrl(key);
                let picture = window.harness.render().unwrap();
                assert_eq!(picture.dimensions(), (size[0] as u32, size[1] as u32));
                pictures::keep(&format!("window-{}-{theme}-{number}", size[0]), &picture);
            }
            window.click("All presses");
            pictures::keep(&format!("window-{}-{theme}-all", size[0]), &window.harness.render().unwrap());
        }
    }
}

#[test]
fn empty_states_say_what_to_do() {
    let size = SIZES[0];
    let mut window = whole::on(size, |_| {});
    assert!(window.shows("No plant is open"));
    pictures::keep("window-empty-plant", &window.harness.render().unwrap());
    for (name, key) in [("open", Key::O), ("new-plant", Key::N)] {
        let mut window = whole::on_samples(size);
        window.harness.key_press_modifiers(
            if key == Key::N { egui::Modifiers::COMMAND | egui::Modifiers::SHIFT } else { egui::Modifiers::COMMAND },
            key,
        );
        window.harness.run();
        pictures::keep(&format!("window-dialog-{name}"), &window.harness.render().unwrap());
    }
    let mut window = whole::on_samples(size);
    window.click("Plant settings…");
    pictures::keep("window-dialog-settings", &window.harness.render().unwrap());
}
