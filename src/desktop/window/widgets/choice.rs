//! Choices among a few: segments where all can be seen, a list where they are many.

use egui::{ComboBox, Id, Response, Role, Ui, WidgetInfo};

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
    ui.horizontal(|ui| {
        let label = ui.label(label);
        let (chosen, list) = list_ui(ui, id, width, current);
        list.labelled_by(label.id);
        chosen
    })
    .inner
}

/// A list to choose from whose name is for screen readers only, because what it shows says what it is.
pub fn bare_choice_ui<T: Named>(ui: &mut Ui, id: Id, label: &str, width: f32, current: T) -> Option<T> {
    let (chosen, list) = list_ui(ui, id, width, current);
    list.widget_info(|| {
        let mut info = WidgetInfo::labeled(Role::ComboBox, true, label);
        info.current_text_value = Some(current.name().to_owned());
        info
    });
    chosen
}

fn list_ui<T: Named>(ui: &mut Ui, id: Id, width: f32, current: T) -> (Option<T>, Response) {
    let mut chosen = current;
    let list = ComboBox::from_id_salt(id).width(width).truncate().selected_text(current.name());
    let response = list
        .show_ui(ui, |ui| {
            for choice in T::every() {
                if ui.selectable_value(&mut chosen, *choice, choice.name()).clicked() {
                    // A click closes the list by itself, the keyboard does not.
                    ui.close();
                }
            }
        })
        .response;
    let is_new = chosen != current;
    if is_new {
        // The list is gone with the choice in it; the keyboard goes back to where it was opened.
        response.request_focus();
    }
    (is_new.then_some(chosen), response)
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
