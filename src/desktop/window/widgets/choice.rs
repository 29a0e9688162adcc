//! Choices among a few: segments where all can be seen, a list where they are many.

use egui::{ComboBox, Id, Ui};

/// A choice that can be named on screen.
pub trait Named: Copy + PartialEq + 'static {
    /// Every choice, in the order in which it is offered.
    fn every() -> &'static [Self];
    /// Its name.
    fn name(self) -> &'static str;
}

macro_rules! named {
    ($($kind:ty: $words:ident),*) => {$(
        impl Named for $kind {
            fn every() -> &'static [Self] { Self::ALL }
            fn name(self) -> &'static str { self.$words() }
        }
    )*};
}
named!(
    calc::stop_test::BrakeState: words,
    calc::stop_test::StopPath: words,
    calc::stop_test::Valves: words,
    calc::stop_test::ClockStart: words,
    calc::reading::ReadingPlace: words,
    calc::press::EventKind: words,
    calc::rules::RuleSetId: title,
    calc::value_taken::ValueTaken: words
);

/// A list to choose from; the new choice when another one was made.
pub fn choice_ui<T: Named>(ui: &mut Ui, id: Id, label: &str, width: f32, current: T) -> Option<T> {
    let options: Vec<(T, &str)> = T::every().iter().map(|choice| (*choice, choice.name())).collect();
    segments_or_list(ui, id, label, width, current, &options)
}

fn segments_or_list<T: Copy + PartialEq>(
    ui: &mut Ui,
    id: Id,
    label: &str,
    width: f32,
    current: T,
    options: &[(T, &str)],
) -> Option<T> {
    let shown = options.iter().find(|option| option.0 == current).map_or("", |option| option.1);
    let mut chosen = current;
    ui.horizontal(|ui| {
        if !label.is_empty() {
            ui.label(label);
        }
        ComboBox::from_id_salt(id).width(width).selected_text(shown).show_ui(ui, |ui| {
            for (choice, name) in options {
                // The list does not close by itself after a choice by keyboard.
                if ui.selectable_value(&mut chosen, *choice, *name).clicked() {
                    ui.close();
                }
            }
        });
    });
    (chosen != current).then_some(chosen)
}

/// A few choices side by side; the new choice when another one was made. Arrow keys are not used: each is reached by Tab.
pub fn segments_ui<T: Copy + PartialEq>(ui: &mut Ui, label: &str, current: T, options: &[(T, &str)]) -> Option<T> {
    let mut chosen = current;
    ui.horizontal(|ui| {
        if !label.is_empty() {
            ui.label(label);
        }
        ui.spacing_mut().item_spacing.x = 2.0;
        for (choice, name) in options {
            ui.selectable_value(&mut chosen, *choice, *name);
        }
    });
    (chosen != current).then_some(chosen)
}

/// A yes or no; the new state when it was changed.
pub fn switch_ui(ui: &mut Ui, label: &str, current: bool) -> Option<bool> {
    let mut on = current;
    ui.checkbox(&mut on, label);
    (on != current).then_some(on)
}
