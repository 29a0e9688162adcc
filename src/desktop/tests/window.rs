//! The whole window, driven by keyboard and mouse on a plant folder: commands, drafts, undo, saving and what is asked.

mod fixture;

use std::sync::atomic::{AtomicI32, Ordering};

use calc::press::BrakeMonitor;
use calc::rules::RuleSetId;
use calc::units::Time;
use desktop::host::WindowApp;
use desktop::window::sheets::Sheet;
use egui::{Key, Modifiers};
use egui_kittest::kittest::Queryable;
use fixture::whole::{Whole, at_clock, on, on_samples};
use fixture::{TODAY, plant_settings, press};

const SIZE: [f32; 2] = [1280.0, 800.0];

/// A plant with three invented presses, of which P-07 is the gravest: its front curtain is too near.
fn three() -> Whole {
    on(SIZE, |folder| {
        let mut known = plant::create(folder, &plant_settings()).unwrap();
        for (tag, installed_mm) in [("P-07", 398), ("P-08", 600), ("P-11", 700)] {
            let mut press = press();
            press.tag = tag.into();
            press.monitor = None;
            press.safeguards[0] = fixture::curtain("front curtain", installed_mm);
            plant::save_press(folder, &press, None, &mut known).unwrap();
        }
    })
}

fn shown(window: &Whole) -> &str {
    window.harness.state().view().press.as_deref().unwrap()
}

fn is_dirty(window: &Whole) -> bool {
    window.harness.state().open_plant().unwrap().history.is_dirty()
}

#[test]
fn a_press_is_added_described_and_saved_by_keyboard_alone() {
    let mut window = three();
    window.ctrl(Key::N);
    window.type_in("P-20");
    window.key(Key::Enter);
    assert_eq!(shown(&window), "P-20");
    assert_eq!(window.harness.state().view().sheet, Sheet::Press);
    assert!(window.shows("This press has no safeguard yet"));
    window.tab_to("Description", 40);
    window.type_in("63 t C-frame");
    window.key(Key::Enter);
    assert!(window.shows("unsaved changes"));
    window.ctrl(Key::S);
    assert!(window.shows("saved 10:42"));
    let back = plant::open(&window.folder()).unwrap();
    let stored =
        back.presses.iter().filter_map(|stored| stored.content.as_ref().ok()).find(|press| press.tag == "P-20");
    assert_eq!(stored.map(|press| press.description.as_str()), Some("63 t C-frame"));
}

#[test]
fn a_tag_that_is_borne_or_no_file_name_is_refused_where_it_was_typed() {
    let mut window = three();
    for (tag, words) in [("P-08", "one that no other press of the plant bears"), ("P/9", "It must be 1 to 40 letters")]
    {
        window.ctrl(Key::N);
        window.type_in(tag);
        window.key(Key::Enter);
        assert!(window.shows(words), "{tag}");
        assert_eq!(window.text_of("Tag of the press, as the plant numbers it"), tag);
        window.key(Key::Escape);
        assert!(!window.shows("Tag of the press, as the plant numbers it"));
    }
    assert!(!is_dirty(&window));
}

#[test]
fn only_what_has_changed_is_written() {
    let mut window = three();
    let others = window.file("P-08");
    // Another text of the same meaning: it would become another one if it were written.
    let touched = format!("// kept by hand\n{others}");
    std::fs::write(window.folder().join("presses/P-08.ron"), &touched).unwrap();
    window.ctrl(Key::Num1);
    window.fill("Monitor setting", "200");
    window.key(Key::Enter);
    window.ctrl(Key::S);
    assert!(!is_dirty(&window));
    assert_eq!(window.file("P-08"), touched);
    assert!(window.file("P-07").contains("200"));
}

#[test]
fn undo_and_redo_go_back_and_forth_and_the_cursor_stays() {
    let mut window = three();
    window.ctrl(Key::Num1);
    window.fill("Monitor setting", "200");
    window.key(Key::Enter);
    assert_eq!(window.press().monitor, Some(BrakeMonitor { setting: Time::ms(200) }));
    window.ctrl(Key::Z);
    assert_eq!(window.press().monitor, None);
    assert_eq!(window.text_of("Monitor setting"), "");
    window.ctrl(Key::Y);
    assert_eq!(window.press().monitor, Some(BrakeMonitor { setting: Time::ms(200) }));
    window.ctrl(Key::Z);
    window.harness.key_press_modifiers(Modifiers::COMMAND | Modifiers::SHIFT, Key::Z);
    window.harness.run();
    assert_eq!(window.text_of("Monitor setting"), "200");
    // What is half typed goes first, and the cursor stays in its field.
    window.fill("Monitor setting", "21");
    window.ctrl(Key::Z);
    assert_eq!(window.press().monitor, Some(BrakeMonitor { setting: Time::ms(200) }));
    assert!(window.harness.get_by_role_and_label(egui::Role::TextInput, "Monitor setting").is_focused());
}

#[test]
fn half_typed_figures_are_saved_with_the_rest() {
    let mut window = three();
    window.ctrl(Key::Num1);
    window.fill("Monitor setting", "205");
    window.ctrl(Key::S);
    assert_eq!(window.press().monitor, Some(BrakeMonitor { setting: Time::ms(205) }));
    assert!(!is_dirty(&window));
    assert!(window.file("P-07").contains("205"));
}

#[test]
fn while_an_entry_cannot_be_taken_no_answer_is_given_and_no_record_printed() {
    let mut window = three();
    assert!(window.shows("Front curtain is short"));
    window.ctrl(Key::Num1);
    window.fill("Monitor setting", "99999");
    window.key(Key::Tab);
    let words = "An entry on the sheet Press cannot be taken.";
    assert!(window.shows(words) && window.shows("P-07 no result"));
    assert!(window.shows("Monitor setting is 99999 ms. It must be from 1 to 10000 ms."));
    window.ctrl(Key::Num3);
    assert!(window.shows(words) && !window.shows("What the installed distance allows"));
    assert!(!window.shows("Front curtain is short"));
    window.ctrl(Key::Num5);
    assert!(window.shows(words));
    window.ctrl(Key::P);
    assert!(window.shows("The record is not printed. An entry on the sheet Press cannot be taken."));
    assert!(!window.folder().join("records").exists());
    window.ctrl(Key::S);
    assert!(!is_dirty(&window));
    window.ctrl(Key::Num1);
    window.harness.get_by_role_and_label(egui::Role::TextInput, "Monitor setting").focus();
    window.harness.run();
    window.key(Key::Escape);
    assert!(!window.shows(words));
    assert!(window.shows("Front curtain is short") && window.shows("P-07 Short"));
}

#[test]
fn a_refused_entry_of_a_safeguard_that_is_removed_does_not_hold_up_the_rest() {
    let mut window = three();
    window.ctrl(Key::Num3);
    window.fill("installed distance", "3 m");
    window.key(Key::Tab);
    assert!(window.shows("An entry on the sheet Safeguards cannot be taken."));
    window.click("Remove");
    assert!(!window.shows("cannot be taken"));
    assert!(window.shows("Rear curtain holds"));
}

#[test]
fn what_is_typed_waits_at_its_press() {
    let mut window = three();
    window.ctrl(Key::Num1);
    window.fill("Monitor setting", "99999");
    window.key(Key::Tab);
    // Half-typed text that can be taken is taken when the press is left.
    window.fill("Description", "Blanking line");
    window.ctrl(Key::PageDown);
    assert_eq!(shown(&window), "P-08");
    assert_eq!(window.text_of("Monitor setting"), "");
    assert!(!window.shows("cannot be taken"));
    window.click("P-07 no result");
    assert_eq!(shown(&window), "P-07");
    assert_eq!(window.text_of("Monitor setting"), "99999");
    assert!(window.shows("An entry on the sheet Press cannot be taken."));
    assert_eq!(window.press().description, "Blanking line");
    // Leaving by the mouse takes it as well.
    window.fill("Description", "Blanking line 2");
    window.click("P-11 Holds");
    window.ctrl(Key::PageUp);
    window.ctrl(Key::PageUp);
    assert_eq!(window.press().description, "Blanking line 2");
}

#[test]
fn plain_letters_never_act_while_a_field_has_the_cursor() {
    let mut window = three();
    window.ctrl(Key::Num1);
    window.fill("Description", "new open save undo print find 1234");
    for key in [Key::N, Key::O, Key::S, Key::Z, Key::Y, Key::P, Key::F, Key::Num3] {
        window.key(key);
    }
    assert_eq!(shown(&window), "P-07");
    assert_eq!(window.harness.state().view().sheet, Sheet::Press);
    assert_eq!(window.text_of("Description"), "new open save undo print find 1234");
}

#[test]
fn the_list_is_walked_by_arrows_and_searched_by_typing() {
    let mut window = three();
    window.ctrl(Key::F);
    window.key(Key::ArrowDown);
    assert_eq!(shown(&window), "P-08");
    window.key(Key::Enter);
    window.key(Key::ArrowDown);
    assert_eq!(shown(&window), "P-11");
    assert!(window.harness.get_by_label("P-11 Holds").is_focused());
    window.key(Key::ArrowUp);
    window.key(Key::ArrowUp);
    assert_eq!(shown(&window), "P-07");
    window.type_in("1");
    window.type_in("1");
    assert_eq!(window.text_of("Find a press"), "11");
    assert_eq!(shown(&window), "P-11");
    assert!(!window.shows("P-08 Holds"));
    window.key(Key::Escape);
    assert!(window.shows("P-08 Holds"));
}

#[test]
fn the_rule_set_is_changed_from_the_bar_and_back_by_undo() {
    let mut window = three();
    let rules = |window: &Whole| window.harness.state().open_plant().unwrap().history.document().settings.rules;
    let list = |window: &mut Whole| {
        window.harness.get_by_role_and_label(egui::Role::ComboBox, "Rule set").click();
        window.harness.run();
    };
    list(&mut window);
    window.click(RuleSetId::Us1910217.title());
    assert_eq!(rules(&window), RuleSetId::Us1910217);
    window.ctrl(Key::Z);
    assert_eq!(rules(&window), plant_settings().rules);
}

#[test]
fn closing_with_unsaved_changes_asks() {
    let change = |window: &mut Whole| {
        window.ctrl(Key::Num1);
        window.fill("Monitor setting", "200");
        window.key(Key::Enter);
        let context = window.harness.ctx.clone();
        assert!(!window.harness.state_mut().close_requested(&context));
        window.harness.run();
        assert!(window.shows("There are unsaved changes"));
    };
    let mut window = three();
    let context = window.harness.ctx.clone();
    assert!(window.harness.state_mut().close_requested(&context));
    change(&mut window);
    window.click("Stay");
    assert!(!window.shows("There are unsaved changes"));
    assert!(!window.harness.state_mut().close_requested(&context));
    window.harness.run();
    window.click("Go on without saving");
    assert!(window.harness.state_mut().close_requested(&context));
    assert!(!window.file("P-07").contains("200"));

    let mut window = three();
    change(&mut window);
    // Save has the cursor.
    window.key(Key::Enter);
    let context = window.harness.ctx.clone();
    assert!(window.harness.state_mut().close_requested(&context));
    assert!(window.file("P-07").contains("200"));
}

#[test]
fn a_plant_is_opened_by_a_typed_path_and_a_wrong_one_stays() {
    let mut window = three();
    let other = window.other_folder("other");
    plant::copy_samples(&other).unwrap();
    let wrong = window.other_folder("nowhere");
    window.ctrl(Key::O);
    window.fill("Folder", &wrong.display().to_string());
    window.ctrl(Key::A);
    window.type_in(&wrong.display().to_string());
    window.key(Key::Enter);
    assert!(window.shows("cannot be opened"));
    assert_eq!(window.text_of("Folder"), wrong.display().to_string());
    assert_eq!(shown(&window), "P-07");
    window.ctrl(Key::A);
    window.type_in(&other.display().to_string());
    window.key(Key::Enter);
    assert!(!window.shows("Open a plant"));
    assert_eq!(shown(&window), "E-103");
}

#[test]
fn a_plant_is_made_by_keyboard_alone() {
    let mut window = on(SIZE, |_| {});
    assert!(window.shows("No plant is open") && window.shows("no plant open"));
    window.harness.key_press_modifiers(Modifiers::COMMAND | Modifiers::SHIFT, Key::N);
    window.harness.run();
    let folder = window.other_folder("made");
    window.type_in(&folder.display().to_string());
    window.tab_to("Name of the plant", 3);
    window.type_in("Works two");
    window.key(Key::Enter);
    assert!(window.shows("This plant has no press yet"));
    assert_eq!(plant::open(&folder).unwrap().settings.name, "Works two");
}

#[test]
fn a_file_that_cannot_be_read_is_listed_with_its_reason_and_left_alone() {
    let broken = "(version: 1, press: (tag: \"P-09\", stroke_mm: \"long\"";
    let window = on(SIZE, |folder| {
        let mut known = plant::create(folder, &plant_settings()).unwrap();
        plant::save_press(folder, &press(), None, &mut known).unwrap();
        std::fs::write(folder.join("presses/P-09.ron"), broken).unwrap();
    });
    assert!(window.shows("P-09.ron cannot be read"));
    assert_eq!(shown(&window), "P-07");
    assert_eq!(window.file("P-09"), broken);
}

#[test]
fn the_caution_is_always_in_view_and_the_renderer_is_told_once() {
    let mut window = three();
    let has_caution = |window: &Whole| {
        ["This program does not replace the standard", "Never defeat a safeguard to take a measurement"]
            .iter()
            .all(|words| window.shows(words))
    };
    assert!(has_caution(&window) && window.shows("Drawn by the processor, as asked for."));
    window.ctrl(Key::S);
    for key in [Key::Num1, Key::Num2, Key::Num3, Key::Num4, Key::Num5] {
        window.ctrl(key);
        assert!(has_caution(&window));
    }
    assert!(!window.shows("Drawn by the processor"));
}

#[test]
fn an_answer_follows_the_calendar_while_the_window_stays_open() {
    static MONTHS: AtomicI32 = AtomicI32::new(0);
    let clock = || TODAY.saturating_add(jiff::Span::new().months(MONTHS.load(Ordering::Relaxed))).at(8, 0, 0, 0);
    let mut window = at_clock(SIZE, clock, |folder| {
        let mut known = plant::create(folder, &plant_settings()).unwrap();
        let mut press = press();
        press.safeguards = vec![fixture::curtain("front curtain", 700)];
        plant::save_press(folder, &press, None, &mut known).unwrap();
    });
    assert!(window.shows("Front curtain holds"));
    // The stops were timed on 2026-10-05; with a year between tests they are overdue in December 2027.
    MONTHS.store(12, Ordering::Relaxed);
    window.harness.run();
    assert!(window.shows("Front curtain must be timed again"));
}

#[test]
fn a_message_moves_nothing_on_the_sheet() {
    let mut window = on_samples(SIZE);
    window.ctrl(Key::Num1);
    let place = window.harness.get_by_role_and_label(egui::Role::TextInput, "Serial number").rect();
    window.fill("Monitor setting", "200");
    window.key(Key::Enter);
    window.ctrl(Key::S);
    assert!(window.shows("Saved to"));
    assert_eq!(window.harness.get_by_role_and_label(egui::Role::TextInput, "Serial number").rect(), place);
}

#[test]
fn text_that_is_no_part_of_the_plant_has_an_undo_of_its_own() {
    let mut window = three();
    window.ctrl(Key::Num1);
    window.fill("Monitor setting", "200");
    window.key(Key::Enter);
    window.ctrl(Key::F);
    window.type_in("P-1");
    window.ctrl(Key::Z);
    assert!(is_dirty(&window));
    window.ctrl(Key::Num1);
    window.ctrl(Key::Z);
    assert!(!is_dirty(&window));
}
