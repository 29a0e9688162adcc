//! The sheet of the press, by keyboard alone.

mod fixture;

use calc::press::*;
use calc::safeguard::SafeguardKind;
use calc::units::*;
use desktop::window::sheets::press::{PressDrafts, press_ui};
use egui::Key;
use egui_kittest::Harness;
use egui_kittest::kittest::Queryable;
use fixture::bench::{Bench, bench, field, press_key, tab_to, type_in};
use fixture::{at, pictures, press};

type Sheet = Harness<'static, Bench<PressDrafts>>;

fn sheet(press: Press) -> Sheet {
    let mut harness = bench(press, [1280.0, 800.0], false, press_ui);
    harness.run();
    harness
}

/// A press of which nothing is known but its tag.
fn unknown() -> Press {
    Press {
        description: String::new(),
        serial: String::new(),
        location: String::new(),
        force_n: None,
        frame: Frame::CFrame,
        stroke: None,
        rod: None,
        fastest_speed: None,
        slowest_speed: None,
        heaviest_die: None,
        conformity: None,
        control_response: None,
        monitor: None,
        events: Vec::new(),
        ..press()
    }
}

fn choose(harness: &mut Sheet, list: &str, choice: &str) {
    tab_to(harness, list, 60);
    press_key(harness, Key::Space);
    tab_to(harness, choice, 14);
    press_key(harness, Key::Space);
}

fn fill(harness: &mut Sheet, field: &str, text: &str) {
    tab_to(harness, field, 60);
    type_in(harness, text);
    press_key(harness, Key::Tab);
}

#[test]
fn a_press_is_described_by_keyboard_alone() {
    let mut harness = sheet(unknown());
    for (field, text) in [
        ("Tag", "P-12"),
        ("Description", "180 t straight-side, blanking"),
        ("Serial number", "7731"),
        ("Location", "Bay 2"),
        ("Press force", "1800"),
    ] {
        fill(&mut harness, field, text);
    }
    tab_to(&mut harness, "straight-side", 3);
    press_key(&mut harness, Key::Space);
    choose(&mut harness, "CE mark", "yes");
    tab_to(&mut harness, "Clutch", 6);
    for (field, text) in [
        ("Stroke", "160"),
        ("Connecting rod", "700"),
        ("Fastest speed", "60"),
        ("Slowest speed", "30"),
        ("Heaviest upper die", "450"),
        ("Control response", "18"),
        ("Monitor setting", "200"),
    ] {
        fill(&mut harness, field, text);
    }
    let expected = Press { tag: "P-12".into(), events: Vec::new(), ..press() };
    assert_eq!(harness.state().press().as_ref(), &expected);
    assert!(harness.state().refused.is_empty());
}

#[test]
fn a_refused_figure_stays_and_is_told_and_nothing_moves() {
    let mut harness = sheet(press());
    let place = field(&harness, "Description").rect();
    fill(&mut harness, "Monitor setting", "20000");
    tab_to(&mut harness, "Tag", 60);
    harness.get_by_label_contains("Monitor setting is 20000 ms. It must be from 1 to 10000 ms.");
    harness.get_by_label_contains("Until then, 200 ms stands.");
    assert_eq!(field(&harness, "Monitor setting").value().as_deref(), Some("20000"));
    assert_eq!(field(&harness, "Description").rect(), place);
    assert_eq!(harness.state().press().monitor, Some(BrakeMonitor { setting: Time::ms(200) }));
}

#[test]
fn a_full_revolution_clutch_waits_for_its_engaging_points() {
    let mut harness = sheet(press());
    choose(&mut harness, "Clutch", "full-revolution");
    assert_eq!(harness.state().press().clutch, Clutch::PartRevolution(ClutchMedium::Air));
    assert!(field(&harness, "Engaging points").is_focused());
    type_in(&mut harness, "2.5");
    press_key(&mut harness, Key::Tab);
    assert_eq!(harness.state().press().clutch, Clutch::PartRevolution(ClutchMedium::Air));
    harness.get_by_label_contains("Engaging points is 2.5.");
    field(&harness, "Engaging points").focus();
    harness.run();
    type_in(&mut harness, "14");
    press_key(&mut harness, Key::Enter);
    assert_eq!(harness.state().press().clutch, Clutch::FullRevolution { engaging_points: 14 });
}

#[test]
fn lengths_are_typed_in_the_shown_unit() {
    let mut harness = sheet(press());
    harness.state_mut().unit = LengthUnit::Inch;
    harness.run();
    fill(&mut harness, "Stroke", "6.5");
    // 6.5 in x 25.4 mm/in = 165.1 mm.
    assert_eq!(harness.state().press().stroke, Some(Length::from_base(165_100)));
}

#[test]
fn an_event_is_written_down_by_keyboard_and_says_what_it_puts_to_retime() {
    let mut harness = sheet(unknown());
    tab_to(&mut harness, "Date, time", 40);
    type_in(&mut harness, "2026-11-20");
    press_key(&mut harness, Key::Tab);
    choose(&mut harness, "What happened", "safeguard moved");
    harness.get_by_label("Still to be stated: safeguard.");
    choose(&mut harness, "Safeguard it happened to", "rear curtain");
    harness.get_by_label("Puts to Retime until the distance is measured again: rear curtain.");
    fill(&mut harness, "Note", "30 mm nearer, for the new feed");
    tab_to(&mut harness, "Add event", 3);
    press_key(&mut harness, Key::Space);
    let expected = Event {
        at: at("2026-11-20"),
        kind: EventKind::SafeguardMoved,
        safeguard: Some("rear curtain".into()),
        note: "30 mm nearer, for the new feed".into(),
    };
    assert_eq!(harness.state().press().events, [expected]);
    harness.get_by_label("Retime: rear curtain");
    assert_eq!(harness.state().history.undo_label(), Some("add event: safeguard moved, of P-07"));
    tab_to(&mut harness, "Remove safeguard moved of 2026-11-20", 8);
    press_key(&mut harness, Key::Space);
    assert!(harness.state().press().events.is_empty());
}

#[test]
fn the_monitor_is_compared_with_what_the_safeguards_allow() {
    // 428 mm / 2000 mm/s - 12 ms of the device = 202 ms.
    let mut harness = sheet(press());
    harness.get_by_label_contains("Front curtain allows at most 202 ms,\n2 ms more than set");
    fill(&mut harness, "Monitor setting", "210");
    harness.get_by_label_contains("Set too long. Front curtain allows at most 202 ms,\n8 ms less than set");
}

#[test]
fn every_theme_and_size_shows_the_sheet() {
    for (width, height) in [(1040.0, 540.0), (1680.0, 820.0)] {
        for (is_dark, theme) in [(false, "light"), (true, "dark")] {
            let mut press = press();
            press.safeguards[1].kind = SafeguardKind::TwoHandControl { shrouded: false };
            press.events.push(Event {
                at: at("2026-11-20 14:10"),
                kind: EventKind::DeviceReplaced,
                safeguard: Some("rear curtain".into()),
                note: "New receiver".into(),
            });
            press.monitor = Some(BrakeMonitor { setting: Time::ms(210) });
            let mut harness = bench(press, [width, height], is_dark, press_ui);
            harness.run();
            fill(&mut harness, "Press force", "18 kN");
            let picture = harness.render().unwrap();
            assert_eq!(picture.dimensions(), (width as u32, height as u32));
            pictures::keep(&format!("press-{width}-{theme}"), &picture);
        }
    }
}
