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
fn the_least_window_holds_everything_that_must_stay_in_view() {
    let mut window = whole::on_samples([900.0, 600.0]);
    for (number, key) in (1..).zip(SHEETS) {
        window.ctrl(key);
        for words in ["Front curtain is short", "Lock out before reaching in", "Records"] {
            assert!(window.shows(words), "{words}");
        }
        pictures::keep(&format!("window-least-{number}"), &window.harness.render().unwrap());
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
    let mut window = whole::on_samples(size);
    window.ctrl(Key::N);
    window.type_in("E-101");
    window.key(Key::Enter);
    pictures::keep("window-dialog-new-press", &window.harness.render().unwrap());
    window.key(Key::Escape);
    window.ctrl(Key::Num3);
    window.fill("installed distance", "99999");
    window.key(Key::Tab);
    assert!(window.shows("An entry on the sheet Safeguards cannot be taken."));
    pictures::keep("window-no-result", &window.harness.render().unwrap());
    window.ctrl(Key::P);
    window.ctrl(Key::PageDown);
    pictures::keep("window-unproven", &window.harness.render().unwrap());
    let mut window = whole::on(size, |folder| {
        let mut known = plant::create(folder, &fixture::plant_settings()).unwrap();
        let mut press = fixture::press();
        press.safeguards.push(fixture::curtain("a curtain at the left with a very long name for its place", 700));
        press.safeguards.push(fixture::curtain("right curtain", 300));
        press.description = "A description that goes on for longer than any bar at the top of a window can hold".into();
        plant::save_press(folder, &press, None, &mut known).unwrap();
        let mut bare = fixture::press();
        bare.tag = "P-0000000000000000000000000000000000012".into();
        bare.safeguards.clear();
        plant::save_press(folder, &bare, None, &mut known).unwrap();
        std::fs::write(folder.join("presses/P-09.ron"), "(version: 1, press: (tag: 7").unwrap();
    });
    window.click("in");
    pictures::keep("window-crowded", &window.harness.render().unwrap());
    window.ctrl(Key::PageDown);
    window.ctrl(Key::Num3);
    pictures::keep("window-no-safeguard", &window.harness.render().unwrap());
}
