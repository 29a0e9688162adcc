//! The entry field: what is typed stays until it is valid, and nothing ever changes by being drawn.

use calc::decimal::Side;
use calc::limits::{INSTALLED, STOPPING_TIME};
use calc::units::{Length, LengthUnit};
use desktop::window::theme;
use desktop::window::widgets::{
    Commit, Drafts, FieldKind, Moved, length_field, moment_field, number_field, refusal_line, text_field,
};
use egui::{Id, Key, Modifiers, Role, Ui};
use egui_kittest::kittest::Queryable;
use egui_kittest::{Harness, Node};

/// Two figures, a length, a day and a name, as a sheet holds them, with the commits as they came.
#[derive(Default)]
struct Form {
    first: Option<i64>,
    second: Option<i64>,
    distance: Option<Length>,
    on: Option<calc::calendar::Moment>,
    name: String,
    unit: LengthUnit,
    drafts: Drafts,
    commits: Vec<String>,
    refused: usize,
    /// Whether a row with a button stands above the fields.
    has_message: bool,
}

fn id(name: &str) -> Id {
    Id::unique(("form", name))
}

fn form_ui(ui: &mut Ui, form: &mut Form) {
    let Form { drafts, commits, .. } = form;
    if form.has_message {
        let _ = ui.button("Copy the message");
    }
    let mut note = |name: &str, commit: String| commits.push(format!("{name} {commit}"));
    for (name, value) in [("First", &mut form.first), ("Second", &mut form.second)] {
        let commit = number_field(ui, id(name), FieldKind::figure(name, "ms"), &STOPPING_TIME, *value, drafts);
        match &commit {
            Some(Commit::Set(count, _)) => *value = Some(*count),
            Some(Commit::Cleared(_)) => *value = None,
            Some(Commit::Refused | Commit::Passed) | None => {}
        }
        if let Some(commit) = commit {
            note(name, format!("{commit:?}"));
        }
        refusal_line(ui, drafts.refusal(id(name)));
    }
    let kind = FieldKind::figure("Distance", "");
    let commit = length_field(ui, id("Distance"), kind, &INSTALLED, form.unit, Side::Shorter, form.distance, drafts);
    if let Some(Commit::Set(distance, _)) = commit {
        form.distance = Some(distance);
    }
    if let Some(Commit::Set(on, _)) = moment_field(ui, id("On"), FieldKind::words("On"), form.on, drafts) {
        form.on = Some(on);
    }
    if let Some(Commit::Set(name, _)) = text_field(ui, id("Name"), FieldKind::words("Name"), &form.name, drafts) {
        form.name = name;
    }
    form.refused = drafts.refused().len();
}

fn harness(form: Form) -> Harness<'static, Form> {
    let mut harness =
        Harness::builder().with_size([600.0, 400.0]).with_context_setup(theme::install).build_ui_state(form_ui, form);
    harness.run();
    harness
}

fn field<'h>(harness: &'h Harness<'_, Form>, name: &'h str) -> Node<'h> {
    harness.get_by_role_and_label(Role::TextInput, name)
}

fn focus(harness: &mut Harness<'_, Form>, name: &str) {
    field(harness, name).focus();
    harness.run();
}

/// Types over what is selected.
fn type_in(harness: &mut Harness<'_, Form>, text: &str) {
    harness.event(egui::Event::Text(text.to_owned()));
    harness.run();
}

fn key(harness: &mut Harness<'_, Form>, key: Key) {
    harness.key_press(key);
    harness.run();
}

fn of_first(first: Option<i64>) -> Form {
    Form { first, ..Form::default() }
}

#[test]
fn what_is_out_of_range_stays_and_is_told_in_words() {
    for (text, words) in [
        ("99999", "Stopping time is 99999 ms. It must be from 1 to 10000 ms."),
        ("0", "Stopping time is 0 ms. It must be from 1 to 10000 ms."),
        ("12x", "Stopping time is 12x. It must be from 1 to 10000 ms."),
        ("1,234.5", "Type one decimal point or comma and no grouping of thousands."),
    ] {
        let mut harness = harness(of_first(Some(182_000)));
        focus(&mut harness, "First");
        type_in(&mut harness, text);
        key(&mut harness, Key::Enter);
        assert_eq!(field(&harness, "First").value().as_deref(), Some(text));
        harness.get_by_label_contains(words);
        let form = harness.state();
        assert_eq!((form.first, form.refused), (Some(182_000), 1), "{text}");
        assert!(form.commits.iter().all(|commit| commit == "First Refused"), "{text} {:?}", form.commits);
    }
}

#[test]
fn comma_and_point_are_both_decimal_marks() {
    for (text, count) in [("12,5", 12_500), ("12.5", 12_500), (" 182 ", 182_000)] {
        let mut harness = harness(of_first(None));
        focus(&mut harness, "First");
        type_in(&mut harness, text);
        key(&mut harness, Key::Enter);
        assert_eq!(harness.state().first, Some(count), "{text:?}");
        assert_eq!(harness.state().commits, [format!("First {:?}", Commit::Set(count, Moved::Enter))]);
    }
}

#[test]
fn tab_commits_and_moves_on_and_shift_tab_moves_back() {
    let mut harness = harness(Form::default());
    focus(&mut harness, "First");
    type_in(&mut harness, "182");
    key(&mut harness, Key::Tab);
    assert_eq!(harness.state().first, Some(182_000));
    assert!(field(&harness, "Second").is_focused());
    type_in(&mut harness, "185");
    harness.key_press_modifiers(Modifiers::SHIFT, Key::Tab);
    harness.run();
    assert_eq!(harness.state().second, Some(185_000));
    assert!(field(&harness, "First").is_focused());
    // All is selected when the cursor comes in, so that typing replaces it.
    type_in(&mut harness, "9");
    key(&mut harness, Key::Tab);
    assert_eq!(harness.state().first, Some(9_000));
}

#[test]
fn escape_brings_back_what_was_committed() {
    let mut harness = harness(of_first(Some(182_000)));
    focus(&mut harness, "First");
    type_in(&mut harness, "7");
    key(&mut harness, Key::Escape);
    assert_eq!(field(&harness, "First").value().as_deref(), Some("182"));
    // Also out of a refusal.
    focus(&mut harness, "First");
    type_in(&mut harness, "77777");
    key(&mut harness, Key::Tab);
    assert_eq!(harness.state().refused, 1);
    focus(&mut harness, "First");
    key(&mut harness, Key::Escape);
    assert_eq!(field(&harness, "First").value().as_deref(), Some("182"));
    let form = harness.state();
    assert_eq!((form.first, form.refused), (Some(182_000), 0));
}

#[test]
fn drawing_and_passing_through_change_nothing() {
    // The first is out of range, as from a file of another day; the second has every digit that is kept.
    let mut harness = harness(Form { first: Some(99_999_000), second: Some(1_988), ..Form::default() });
    focus(&mut harness, "First");
    for _ in 0..8 {
        key(&mut harness, Key::Tab);
    }
    let form = harness.state();
    assert_eq!((form.first, form.second), (Some(99_999_000), Some(1_988)));
    assert!(form.commits.is_empty());
    assert_eq!(field(&harness, "Second").value().as_deref(), Some("1.988"));
}

#[test]
fn an_emptied_field_says_so_and_nothing_is_reckoned_from_half_typed_text() {
    let mut harness = harness(of_first(Some(182_000)));
    focus(&mut harness, "First");
    key(&mut harness, Key::Backspace);
    assert_eq!(harness.state().first, Some(182_000));
    type_in(&mut harness, "1");
    type_in(&mut harness, "9");
    assert!(harness.state().commits.is_empty());
    key(&mut harness, Key::Backspace);
    key(&mut harness, Key::Backspace);
    key(&mut harness, Key::Enter);
    assert_eq!(harness.state().first, None);
    assert_eq!(harness.state().commits, ["First Cleared(Enter)"]);
}

#[test]
fn no_digit_is_lost_when_a_message_appears_above_the_field() {
    let mut harness = harness(of_first(None));
    focus(&mut harness, "First");
    type_in(&mut harness, "1");
    type_in(&mut harness, "8");
    harness.state_mut().has_message = true;
    harness.run();
    type_in(&mut harness, "2");
    harness.state_mut().has_message = false;
    type_in(&mut harness, "4");
    key(&mut harness, Key::Enter);
    assert_eq!(harness.state().first, Some(1_824_000));
}

#[test]
fn neither_wheel_nor_arrows_nor_dragging_change_a_figure() {
    let mut harness = harness(of_first(Some(182_000)));
    focus(&mut harness, "First");
    key(&mut harness, Key::ArrowUp);
    key(&mut harness, Key::ArrowDown);
    let rect = field(&harness, "First").rect();
    harness.drag_at(rect.left_center() + egui::vec2(4.0, 0.0));
    harness.run();
    harness.drop_at(rect.right_center() + egui::vec2(60.0, 0.0));
    harness.run();
    harness.event(egui::Event::MouseWheel {
        unit: egui::MouseWheelUnit::Line,
        delta: egui::vec2(0.0, 3.0),
        phase: egui::TouchPhase::Move,
        source: egui::MouseWheelSource::Wheel,
        modifiers: Modifiers::NONE,
    });
    harness.run();
    key(&mut harness, Key::Tab);
    assert_eq!(harness.state().first, Some(182_000));
    assert!(harness.state().commits.is_empty());
}

#[test]
fn inches_fall_to_the_cautious_side_and_are_shown_again_as_typed() {
    let mut harness = harness(Form { unit: LengthUnit::Inch, ..Form::default() });
    focus(&mut harness, "Distance");
    type_in(&mut harness, "16,001");
    key(&mut harness, Key::Enter);
    // 16.001 in x 25.4 mm/in = 406.4254 mm; an installed distance falls to the shorter micrometre.
    assert_eq!(harness.state().distance, Some(Length::from_base(406_425)));
    assert_eq!(field(&harness, "Distance").value().as_deref(), Some("16.001"));
    // Shown in millimetres and passed through, it is still the same.
    harness.state_mut().unit = LengthUnit::Millimetre;
    harness.run();
    focus(&mut harness, "Distance");
    key(&mut harness, Key::Tab);
    assert_eq!(harness.state().distance, Some(Length::from_base(406_425)));
    assert_eq!(field(&harness, "Distance").value().as_deref(), Some("406.425"));
}

#[test]
fn days_and_words_are_taken_the_same_way() {
    let mut harness = harness(Form::default());
    focus(&mut harness, "On");
    type_in(&mut harness, "3.11.2026");
    key(&mut harness, Key::Tab);
    assert_eq!((harness.state().on, harness.state().refused), (None, 1));
    assert_eq!(field(&harness, "On").value().as_deref(), Some("3.11.2026"));
    focus(&mut harness, "On");
    type_in(&mut harness, "2026-11-03 14:30");
    key(&mut harness, Key::Tab);
    assert_eq!(harness.state().on.map(|on| on.to_string()).as_deref(), Some("2026-11-03 14:30"));
    type_in(&mut harness, "  A. K. ");
    key(&mut harness, Key::Enter);
    assert_eq!((harness.state().name.as_str(), harness.state().refused), ("A. K.", 0));
}

#[test]
fn a_change_underneath_replaces_what_was_typed() {
    let mut harness = harness(of_first(Some(182_000)));
    focus(&mut harness, "First");
    type_in(&mut harness, "99999");
    key(&mut harness, Key::Tab);
    harness.state_mut().first = Some(190_000);
    harness.run();
    assert_eq!(field(&harness, "First").value().as_deref(), Some("190"));
    assert_eq!(harness.state().refused, 0);
}
