//! The sheet of stop tests: the grid of all tests, the fields of the chosen one, stop dial and dot plot.

pub mod dial;
pub mod dots;
mod fields;
pub mod grid;
pub mod ink;
pub mod model;
pub mod partial;
pub mod paste;

use calc::press::Press;
use calc::safeguard::Safeguard;
use calc::units::Time;
use calc::verdict::Assessment;
use egui::{Id, vec2};

use self::grid::{GridDrafts, LEAST_WIDTH, grid_ui};
use self::ink::Ink;
use self::model::{Row, Standing, next_test, rows};
use self::partial::{Edit, PartialTest};
use super::form::{Form, fill_strip, keep_strip};
use crate::window::context::SheetContext;
use crate::window::widgets::{Drafts, caption, heading};
use crate::window::wishes::Wishes;

/// What is being typed into the sheet of stop tests.
#[derive(Default)]
pub struct StopTestsDrafts {
    /// Tag of the press that it is typed for.
    tag: String,
    /// How many tests there were when it was typed.
    tests: usize,
    /// The grid.
    grid: GridDrafts,
    /// The fields of the chosen test.
    fields: Drafts,
    /// The first test of a press, as far as it is filled in.
    first: PartialTest,
}

impl StopTestsDrafts {
    /// What could not be taken, in words.
    pub fn refused(&self) -> Vec<String> {
        self.grid.refused_cells().into_iter().chain(self.fields.refused()).collect()
    }

    /// What was typed for another press, or before tests came or went, belongs to no field of this one.
    fn follow(&mut self, press: &Press, governing: Option<usize>) {
        let tests = press.stop_tests.len();
        if self.tag != press.tag {
            *self = Self { tag: press.tag.clone(), tests, ..Self::default() };
            self.grid.chosen = governing.unwrap_or(tests.saturating_sub(1));
            if tests == 0 {
                // On a press without tests this is what one comes for: the cursor stands in the first field.
                self.fields.focus(first_test_id(press).with("angle"));
            }
        }
        if self.tests != tests {
            if tests < self.tests {
                self.grid.clear();
            }
            self.fields.clear();
            self.tests = tests;
        }
        self.grid.follow(tests);
    }
}

/// Width of the drawings beside the grid.
const SIDE: f32 = 420.0;
const GAP: f32 = 32.0;
const LABEL: f32 = 138.0;
const FIELD: f32 = 216.0;

/// Draws the sheet.
pub fn stop_tests_ui(ui: &mut egui::Ui, cx: &SheetContext, drafts: &mut StopTestsDrafts, wishes: &mut Wishes) {
    let governing = cx.assessment().and_then(|assessment| assessment.governing);
    drafts.follow(cx.press, governing.map(|governing| governing.test));
    ui.push_id((cx.press.tag.as_str(), "stop-tests"), |ui| {
        egui::ScrollArea::vertical().id_salt("sheet").auto_shrink(false).show(ui, |ui| {
            if cx.press.stop_tests.is_empty() {
                first_test_ui(ui, cx, drafts, wishes);
            } else {
                tests_ui(ui, cx, drafts, wishes);
            }
        });
    });
}

fn tests_ui(ui: &mut egui::Ui, cx: &SheetContext, drafts: &mut StopTestsDrafts, wishes: &mut Wishes) {
    let shown = shown_safeguard(cx);
    let path_and_assessment = shown.map(|(safeguard, assessment)| (safeguard.stop_path, assessment));
    let rows = rows(cx.press, &cx.document.settings, path_and_assessment);
    let is_wide = ui.available_width() >= LEAST_WIDTH + GAP + SIDE;
    let left = if is_wide { ui.available_width() - GAP - SIDE } else { ui.available_width() };
    ui.horizontal_top(|ui| {
        ui.spacing_mut().item_spacing.x = GAP;
        ui.vertical(|ui| {
            ui.set_width(left);
            ui.spacing_mut().item_spacing.x = 8.0;
            actions_ui(ui, cx, shown.map(|shown| shown.0), drafts, wishes);
            grid_ui(ui, cx.press, &rows, &mut drafts.grid, wishes);
            let mut refused = drafts.grid.refused(cx.press);
            ui.add_space(4.0);
            let strip = keep_strip(ui, 1);
            let fields_width = if is_wide { left } else { left - GAP - SIDE };
            ui.horizontal_top(|ui| {
                ui.spacing_mut().item_spacing.x = GAP;
                ui.vertical(|ui| {
                    ui.set_width(fields_width);
                    ui.spacing_mut().item_spacing.x = 8.0;
                    chosen_fields_ui(ui, cx, drafts, &mut refused, wishes);
                });
                if !is_wide {
                    drawings_ui(ui, cx, &rows, drafts.grid.chosen, shown);
                }
            });
            fill_strip(ui, strip, &refused);
        });
        if is_wide {
            drawings_ui(ui, cx, &rows, drafts.grid.chosen, shown);
        }
    });
}

fn shown_safeguard<'a>(cx: &'a SheetContext) -> Option<(&'a Safeguard, &'a Assessment)> {
    cx.press.safeguards.get(cx.safeguard).zip(cx.result.assessments.get(cx.safeguard))
}

/// New, duplicate, remove, and for which safeguard the grid tells what governs.
fn actions_ui(
    ui: &mut egui::Ui,
    cx: &SheetContext,
    shown: Option<&Safeguard>,
    drafts: &mut StopTestsDrafts,
    wishes: &mut Wishes,
) {
    let press = cx.press;
    let chosen = drafts.grid.chosen;
    ui.horizontal(|ui| {
        let new = ui.button("New test").on_hover_text("Takes over condition, clock start and instrument; no stops");
        if new.clicked() {
            let test = next_test(&press.stop_tests[chosen], cx.today);
            drafts.grid.begin(press, press.stop_tests.len(), 0);
            wishes.edit_press(press, "add stop test", move |press| press.stop_tests.push(test));
        }
        if ui.button("Duplicate").on_hover_text("Takes over everything, with the stops").clicked() {
            let test = press.stop_tests[chosen].clone();
            drafts.grid.begin(press, press.stop_tests.len(), test.stops.len());
            wishes.edit_press(press, "duplicate stop test", move |press| press.stop_tests.push(test));
        }
        if ui.button("Remove").on_hover_text("Undo brings it back").clicked() {
            wishes.edit_press(press, "remove stop test", move |press| {
                if chosen < press.stop_tests.len() {
                    press.stop_tests.remove(chosen);
                }
            });
        }
        ui.add_space(12.0);
        let words = match shown {
            Some(safeguard) => {
                format!("Seen from the {}, which calls for the {}.", safeguard.name, safeguard.stop_path.words())
            }
            None => "The press has no safeguard yet, so no test governs.".into(),
        };
        caption(ui, words);
    });
    ui.add_space(4.0);
}

fn chosen_fields_ui(
    ui: &mut egui::Ui,
    cx: &SheetContext,
    drafts: &mut StopTestsDrafts,
    refused: &mut Vec<String>,
    wishes: &mut Wishes,
) {
    let chosen = drafts.grid.chosen;
    let test = PartialTest::of(&cx.press.stop_tests[chosen]);
    let owner = Id::unique((cx.press.tag.as_str(), "stop-test-fields", chosen));
    let mut form = Form { owner, drafts: &mut drafts.fields, label: LABEL, field: FIELD, refused };
    if let Some(edit) = fields::test_fields_ui(ui, &mut form, &test) {
        edit_test(cx.press, chosen, edit, wishes);
    }
}

fn edit_test(press: &Press, chosen: usize, edit: Edit, wishes: &mut Wishes) {
    wishes.edit_press(press, edit.label(), move |press| {
        let Some(test) = press.stop_tests.get_mut(chosen) else { return };
        let mut partial = PartialTest::of(test);
        partial.apply(edit);
        if let Ok(edited) = partial.complete() {
            *test = edited;
        }
    });
}

/// The form of the first test of a press: every field is empty until somebody fills it in.
/// What the ids of the fields of a press's first test begin with.
fn first_test_id(press: &Press) -> Id {
    Id::unique((press.tag.as_str(), "first-stop-test"))
}

fn first_test_ui(ui: &mut egui::Ui, cx: &SheetContext, drafts: &mut StopTestsDrafts, wishes: &mut Wishes) {
    ui.label("No stop was timed on this press yet. State how the first test is made; its stops are typed afterwards.");
    let owner = first_test_id(cx.press);
    let strip = keep_strip(ui, 1);
    let mut refused = Vec::new();
    let mut form = Form { owner, drafts: &mut drafts.fields, label: LABEL, field: FIELD, refused: &mut refused };
    if let Some(edit) = fields::test_fields_ui(ui, &mut form, &drafts.first) {
        drafts.first.apply(edit);
    }
    fill_strip(ui, strip, &refused);
    ui.add_space(10.0);
    let complete = drafts.first.complete();
    ui.horizontal(|ui| {
        let is_complete = complete.is_ok();
        if ui.add_enabled(is_complete, egui::Button::new("Add stop test")).clicked()
            && let Ok(test) = &complete
        {
            let test = test.clone();
            drafts.first = PartialTest::default();
            drafts.grid.begin(cx.press, 0, 0);
            wishes.edit_press(cx.press, "add stop test", move |press| press.stop_tests.push(test));
        }
        if let Err(missing) = &complete {
            caption(ui, format!("Still to be stated: {}.", missing.join(", ")));
        }
    });
}

/// Stop dial and dot plot.
fn drawings_ui(
    ui: &mut egui::Ui,
    cx: &SheetContext,
    rows: &[Row],
    chosen: usize,
    shown: Option<(&Safeguard, &Assessment)>,
) {
    let ink = Ink::of(ui.ctx());
    let allowed = allowed_for(cx.press, shown, chosen);
    ui.vertical(|ui| {
        ui.set_width(SIDE);
        ui.spacing_mut().item_spacing = vec2(8.0, 4.0);
        heading(ui, &format!("Stops at {}", rows[chosen].title));
        let stops = &cx.press.stop_tests[chosen].stops;
        let marks = dots::marks(&rows[chosen].figures, allowed);
        dots::dots_ui(ui, vec2(SIDE, 190.0), stops, &marks, &ink);
        ui.add_space(10.0);
        heading(ui, "Stop dial");
        ui.vertical_centered(|ui| dial::dial_ui(ui, 330.0, &bars(cx.press, rows, chosen), allowed, &ink));
        caption(ui, dial_words(cx.press, shown, chosen));
    });
}

/// The bars of the dial: the chosen test, and every test that still stands, has stops and was timed from the same clock start,
/// since lengths of another clock are not to be compared.
fn bars(press: &Press, rows: &[Row], chosen: usize) -> Vec<dial::Bar> {
    (0..rows.len())
        .filter(|index| is_drawn(press, rows, chosen, *index))
        .filter_map(|index| {
            Some(dial::Bar {
                angle: press.stop_tests[index].condition.angle,
                value: rows[index].figures.taken?.1,
                stops: press.stop_tests[index].stops.clone(),
                governs: rows[index].standing == Standing::Governs,
                chosen: index == chosen,
            })
        })
        .collect()
}

fn is_drawn(press: &Press, rows: &[Row], chosen: usize, index: usize) -> bool {
    let stands = !matches!(rows[index].standing, Standing::Superseded(_));
    index == chosen || (stands && press.stop_tests[index].clock_start == press.stop_tests[chosen].clock_start)
}

/// The allowed stopping time, where the chosen test was timed by the same clock start and stop path as the one that governs.
///
/// Another clock sees other parts of the response, so the same limit would not be its own.
fn allowed_for(press: &Press, shown: Option<(&Safeguard, &Assessment)>, chosen: usize) -> Option<Time> {
    let (_, assessment) = shown?;
    let governing = &press.stop_tests[assessment.governing?.test];
    let test = &press.stop_tests[chosen];
    let is_alike = governing.clock_start == test.clock_start && governing.condition.path == test.condition.path;
    assessment.allowed.as_ref()?.stopping.filter(|_| is_alike)
}

fn dial_words(press: &Press, shown: Option<(&Safeguard, &Assessment)>, chosen: usize) -> String {
    let mut words = String::from(
        "Each bar starts at the crank angle of the stop command, 0° at top dead centre, running clockwise. Its length is the \
         stopping time taken forward, in ms; its dots are the stops. The bar with a cross-stroke governs.",
    );
    if let Some((safeguard, _)) = shown {
        words.push_str(&if allowed_for(press, shown, chosen).is_some() {
            format!(" Dashed ring: allowed for the {}, {}.", safeguard.name, safeguard.stop_path.words())
        } else {
            " No allowed time is known for this clock start and stop path.".to_owned()
        });
    }
    let start = press.stop_tests[chosen].clock_start;
    if press.stop_tests.iter().any(|test| test.clock_start != start) {
        words.push_str(" Tests timed from another clock start are left out.");
    }
    words
}
