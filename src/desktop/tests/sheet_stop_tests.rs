//! The sheet of stop tests, by keyboard alone.

mod fixture;

use calc::press::Press;
use calc::stop_test::{BrakeState, ClockStart, StopPath, Valves};
use calc::units::{Angle, Mass, Pressure, Rate, Time};
use desktop::window::sheets::stop_tests::{StopTestsDrafts, stop_tests_ui};
use egui::{Event, Key};
use egui_kittest::Harness;
use egui_kittest::kittest::Queryable;
use fixture::bench::{Bench, bench, enter, field, press_key, tab_to, type_in};
use fixture::{TEN, ms, pictures, press, stop_test};

const GOVERNING: &str = "90°, 60 strokes/min, 450 kg die, warm, normal stop, 2026-10-05, governs";

type Sheet = Harness<'static, Bench<StopTestsDrafts>>;

fn sheet(press: Press) -> Sheet {
    let mut harness = bench(press, [1280.0, 800.0], false, stop_tests_ui);
    harness.run();
    harness
}

/// A press whose only test has no stops yet.
fn untimed() -> Press {
    Press { stop_tests: vec![stop_test("2026-12-01 09:30", 90, &[])], ..press() }
}

fn stops(harness: &Sheet) -> &[Time] {
    &harness.state().press().stop_tests[0].stops
}

#[test]
fn ten_numbers_and_ten_enters_give_ten_stops_and_a_moving_answer() {
    let mut harness = sheet(untimed());
    tab_to(&mut harness, "Stop 1", 20);
    let mut seen = Vec::new();
    for stop in TEN {
        enter(&mut harness, &stop.to_string());
        harness.run();
        seen.push(harness.state().results.presses()[0].assessments[0].governing.map(|governing| governing.value));
    }
    assert_eq!(stops(&harness), ms(&TEN));
    assert!(field(&harness, "Stop 11").is_focused(), "a new empty cell is ready");
    assert_eq!(seen[0], Some(Time::ms(182)), "the first stop already counts as the longest");
    // mean + 3 s of the ten stops, worked out by hand calculator.
    assert_eq!(seen[9], Some(Time::from_base(189_366)));
    assert_eq!(harness.state().history.undo_label(), Some("enter stop 10 of P-07"));
}

#[test]
fn a_refused_stop_stays_in_its_cell_and_is_told_in_words() {
    let mut harness = sheet(untimed());
    tab_to(&mut harness, "Stop 1", 20);
    enter(&mut harness, "20000");
    assert!(stops(&harness).is_empty());
    assert_eq!(field(&harness, "Stop 1").value().as_deref(), Some("20000"));
    assert!(field(&harness, "Stop 1").is_focused(), "the cursor stays where the mistake is");
    harness.get_by_label_contains("Stop 1. Stopping time is 20000 ms. It must be from 1 to 10000 ms.");
    let place = field(&harness, "Crank angle").rect();
    press_key(&mut harness, Key::Escape);
    assert!(harness.query_by_label_contains("20000").is_none());
    assert_eq!(field(&harness, "Crank angle").rect(), place, "nothing moves when a refusal goes");
}

#[test]
fn a_refused_change_says_what_stands_until_then() {
    let mut harness = sheet(press());
    tab_to(&mut harness, "Stop 3", 20);
    enter(&mut harness, "18x");
    harness.get_by_label_contains("Until then, 181 ms stands.");
    assert_eq!(stops(&harness), ms(&TEN));
    enter(&mut harness, "180,5");
    assert_eq!(stops(&harness)[2], Time::from_base(180_500), "what was typed replaced the refused text");
    assert!(field(&harness, "Stop 4").is_focused());
}

#[test]
fn an_emptied_cell_takes_its_stop_away_and_undo_brings_it_back() {
    let mut harness = sheet(press());
    tab_to(&mut harness, "Stop 2", 20);
    press_key(&mut harness, Key::Delete);
    press_key(&mut harness, Key::Enter);
    assert_eq!(stops(&harness), ms(&[182, 181, 184, 186, 183, 182, 187, 184, 183]));
    harness.state_mut().history.undo();
    harness.run();
    assert_eq!(stops(&harness), ms(&TEN));
}

#[test]
fn a_block_from_a_spreadsheet_fills_the_cells_from_the_cursor_on() {
    let mut harness = sheet(untimed());
    tab_to(&mut harness, "Stop 1", 20);
    enter(&mut harness, "182");
    harness.event(Event::Paste("185\t181\r\n184,5\t186".into()));
    harness.run();
    let expected = [182_000, 185_000, 181_000, 184_500, 186_000].map(Time::from_base);
    assert_eq!(stops(&harness), expected);
    assert!(field(&harness, "Stop 6").is_focused());
    assert_eq!(harness.state().history.undo_label(), Some("paste stops 2 to 5 of P-07"));
    // Pasted over stops that are there, a block takes their places.
    press_key(&mut harness, Key::Tab);
    tab_to(&mut harness, "Stop 1", 40);
    harness.event(Event::Paste("190; 191".into()));
    harness.run();
    assert_eq!(stops(&harness)[..3], [190_000, 191_000, 181_000].map(Time::from_base));
}

#[test]
fn a_bad_block_changes_nothing_and_lists_every_bad_entry() {
    let mut harness = sheet(press());
    let before = harness.state().press().clone();
    tab_to(&mut harness, "Stop 11", 30);
    harness.event(Event::Paste("182\tstop\t20000\t183".into()));
    harness.run();
    assert_eq!(harness.state().press(), &before);
    assert_eq!(harness.state().history.revision(), 0);
    harness.get_by_label("Nothing was pasted, 2 refusals.");
    harness.get_by_label_contains("Entry 2. It is stop.");
    harness.get_by_label_contains("Entry 3. It is 20000 ms. It must be from 1 to 10000 ms.");
    assert_eq!(field(&harness, "Stop 11").value().as_deref().unwrap_or(""), "");
}

#[test]
fn the_first_test_of_a_press_is_stated_in_full_before_there_is_one() {
    let mut harness = sheet(Press { stop_tests: Vec::new(), ..press() });
    harness.get_by_label(
        "Still to be stated: date, crank angle, speed, upper die, brake, stop path, valves, clock start.",
    );
    tab_to(&mut harness, "Crank angle", 5);
    for text in ["90", "60", "450", "", "5.5"] {
        if !text.is_empty() {
            type_in(&mut harness, text);
        }
        press_key(&mut harness, Key::Tab);
    }
    tab_to(&mut harness, "warm", 3);
    press_key(&mut harness, Key::Space);
    tab_to(&mut harness, "normal stop", 3);
    press_key(&mut harness, Key::Space);
    choose(&mut harness, "Valves", "both valves");
    tab_to(&mut harness, "Date, time", 3);
    type_in(&mut harness, "2026-12-01 09:30");
    press_key(&mut harness, Key::Tab);
    type_in(&mut harness, "A. K.");
    choose(&mut harness, "Clock starts when", "device output opens");
    harness.get_by_label_contains("The response of the device is added.");
    tab_to(&mut harness, "Instrument", 3);
    for text in ["Stop timer", "ST-3", "2026-03-02", "2027-03-02"] {
        type_in(&mut harness, text);
        press_key(&mut harness, Key::Tab);
    }
    tab_to(&mut harness, "Add stop test", 3);
    press_key(&mut harness, Key::Space);
    let test = harness.state().press().stop_tests[0].clone();
    assert_eq!(test, stop_test("2026-12-01 09:30", 90, &[]));
    assert_eq!((test.condition.brake, test.condition.path), (BrakeState::Warm, StopPath::Normal));
    assert_eq!((test.condition.valves, test.clock_start), (Valves::Both, ClockStart::DeviceOutput));
    assert_eq!((test.condition.angle, test.condition.speed), (Angle::deg(90), Rate::per_min(60)));
    assert_eq!(test.condition.upper_die, Mass::from_base(450_000));
    assert_eq!(test.condition.operating_pressure, Some(Pressure::from_base(5_500)));
    assert!(field(&harness, "Stop 1").is_focused(), "the first stop can be typed at once");
}

/// Opens a list by keyboard and takes one of its choices.
fn choose(harness: &mut Sheet, list: &str, choice: &str) {
    tab_to(harness, list, 6);
    press_key(harness, Key::Space);
    tab_to(harness, choice, 6);
    press_key(harness, Key::Space);
}

#[test]
fn a_new_test_takes_over_the_condition_and_waits_for_its_first_stop() {
    let mut harness = sheet(press());
    tab_to(&mut harness, "New test", 5);
    press_key(&mut harness, Key::Space);
    let tests = &harness.state().press().stop_tests;
    assert_eq!(tests.len(), 4);
    assert_eq!((&tests[3].condition, &tests[3].instrument), (&tests[0].condition, &tests[0].instrument));
    assert!(tests[3].stops.is_empty());
    assert!(field(&harness, "Stop 1").is_focused());
    enter(&mut harness, "182");
    assert_eq!(harness.state().press().stop_tests[3].stops, ms(&[182]));
}

#[test]
fn removing_a_test_leaves_the_others() {
    let mut harness = sheet(press());
    let others = harness.state().press().stop_tests[1..].to_vec();
    tab_to(&mut harness, "Remove", 5);
    press_key(&mut harness, Key::Space);
    assert_eq!(harness.state().press().stop_tests, others);
    assert_eq!(harness.state().history.undo_label(), Some("remove stop test of P-07"));
}

#[test]
fn another_row_is_chosen_by_keyboard_and_its_condition_can_be_changed() {
    let mut harness = sheet(press());
    let row = "120°, 60 strokes/min, 450 kg die, warm, normal stop, 2026-10-05, counts";
    tab_to(&mut harness, row, 30);
    press_key(&mut harness, Key::Space);
    assert!(field(&harness, "Stop 11").is_focused());
    tab_to(&mut harness, "Crank angle", 10);
    type_in(&mut harness, "135");
    press_key(&mut harness, Key::Tab);
    assert_eq!(harness.state().press().stop_tests[1].condition.angle, Angle::deg(135));
}

#[test]
fn every_theme_and_size_shows_the_sheet() {
    for (width, height) in [(1040.0, 540.0), (1680.0, 820.0)] {
        for (is_dark, theme) in [(false, "light"), (true, "dark")] {
            let mut many = press();
            many.stop_tests.insert(0, stop_test("2026-09-30", 90, &[171, 170, 172]));
            many.stop_tests[1].condition.speed = Rate::per_min(60);
            let mut harness = bench(many, [width, height], is_dark, stop_tests_ui);
            harness.run();
            harness.get_by_role_and_label(egui::Role::RadioButton, GOVERNING).focus();
            harness.run();
            press_key(&mut harness, Key::Space);
            let picture = harness.render().unwrap();
            assert_eq!(picture.dimensions(), (width as u32, height as u32));
            pictures::keep(&format!("stop-tests-{width}-{theme}"), &picture);
            let mut first = bench(Press { stop_tests: Vec::new(), ..press() }, [width, height], is_dark, stop_tests_ui);
            first.run();
            pictures::keep(&format!("first-test-{width}-{theme}"), &first.render().unwrap());
        }
    }
}

#[test]
fn many_stops_stand_in_lines_of_ten_and_a_short_safeguard_is_drawn() {
    let mut many = press();
    let stops: Vec<i64> = (0..23).map(|count| 205 + count * 7 % 11).collect();
    many.stop_tests[0] = stop_test("2026-10-05 09:30", 300, &stops);
    many.events.push(calc::press::Event {
        at: fixture::at("2026-10-05 09:40"),
        kind: calc::press::EventKind::NeedleTurned,
        safeguard: None,
        note: String::new(),
    });
    let mut harness = bench(many, [1680.0, 820.0], false, stop_tests_ui);
    harness.run();
    let row =
        "300°, 60 strokes/min, 450 kg die, warm, normal stop, 2026-10-05, before valve or needle turned on 2026-10-05";
    harness.get_by_label(row).click();
    harness.run();
    tab_to(&mut harness, "Stop 24", 60);
    harness.event(Event::Paste("182\tstop\t20000\t183".into()));
    harness.run();
    let (tenth, eleventh) = (field(&harness, "Stop 10").rect(), field(&harness, "Stop 11").rect());
    assert_eq!(eleventh.left(), field(&harness, "Stop 1").rect().left());
    assert!(tenth.bottom() <= eleventh.top() && field(&harness, "Stop 21").rect().top() > eleventh.bottom());
    pictures::keep("stop-tests-many", &harness.render().unwrap());
}
