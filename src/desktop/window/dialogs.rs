//! What is asked in the middle of the window: paths, tags, plant settings, unsaved changes.

use std::path::{Path, PathBuf};

use calc::limits;
use calc::plant_settings::PlantSettings;
use calc::press::check_tag;
use calc::refusal::Refusal;
use calc::rules::RuleSetId;
use calc::schedule::{Interval, PRESETS};
use calc::value_taken::ValueTaken;
use egui::{Context, Id, Key, Modal, RichText, TextEdit, Ui};
use figure::Role;

use super::app::empty_press;
use super::jobs::Jobs;
use super::sheets::label_ui;
use super::theme;
use super::widgets::{
    Commit, Drafts, FieldKind, Named, bare_choice_ui, caption, field_ui, heading, refusal_line, segments_ui, text_field,
};
use super::wishes::{Wish, Wishes};
use crate::document::{Act, Change, Document};

/// What is asked.
pub enum Dialog {
    /// Which folder to open.
    Open(PathDraft),
    /// Where a new plant shall live, and what it is called.
    NewPlant(PathDraft, String),
    /// The tag of a new press.
    NewPress(String, Option<Refusal>, bool),
    /// What to do with unsaved changes.
    Unsaved(Then),
    /// What holds for the whole plant.
    Plant(Box<PlantDraft>),
}

/// A path that is being typed.
#[derive(Default)]
pub struct PathDraft {
    text: String,
    is_fresh: bool,
    /// Why the path could not be taken.
    refusal: Option<String>,
}

/// The settings that are being edited.
pub struct PlantDraft {
    settings: PlantSettings,
    drafts: Drafts,
}

impl PathDraft {
    fn new(text: String) -> Self {
        Self { text, is_fresh: true, refusal: None }
    }
}

/// What is done once the unsaved changes are dealt with.
#[derive(Clone, PartialEq, Debug)]
pub enum Then {
    /// Close the window.
    Close,
    /// Open this plant.
    Open(PathBuf),
    /// Ask which plant to open.
    AskOpen,
    /// Ask for a new plant.
    AskNew,
    /// Make this plant.
    Create {
        /// Its folder.
        folder: PathBuf,
        /// What holds for it.
        settings: PlantSettings,
    },
}

/// What came of a dialog.
pub enum Outcome {
    /// It is still open.
    Stays,
    /// It is done with.
    Closes,
    /// Save, then go on.
    SaveThen(Then),
    /// Go on without saving.
    GoOn(Then),
}

impl Dialog {
    /// Asks which plant to open, beginning from the present one.
    pub fn open(folder: Option<PathBuf>) -> Self {
        let text = folder.map_or(String::new(), |folder| folder.display().to_string());
        Self::Open(PathDraft::new(text))
    }

    /// Asks for a new plant.
    pub fn new_plant() -> Self {
        Self::NewPlant(PathDraft::new(String::new()), String::new())
    }

    /// Asks for the tag of a new press.
    pub fn new_press() -> Self {
        Self::NewPress(String::new(), None, true)
    }

    /// Asks what holds for the plant.
    pub fn plant(settings: &PlantSettings) -> Self {
        let mut drafts = Drafts::default();
        drafts.focus(plant_id("name"));
        Self::Plant(Box::new(PlantDraft { settings: settings.clone(), drafts }))
    }

    /// Says why the path could not be taken, and gives the cursor back to it.
    pub fn refuse(&mut self, why: String) {
        if let Self::Open(path) | Self::NewPlant(path, _) = self {
            path.refusal = Some(why);
            path.is_fresh = true;
        }
    }

    /// Takes a path from the system's folder dialog.
    pub fn take_path(&mut self, folder: &Path) {
        if let Self::Open(path) | Self::NewPlant(path, _) = self {
            path.text = folder.display().to_string();
            path.refusal = None;
        }
    }
}

/// Shows a dialog.
pub fn dialog_ui(
    context: &Context,
    dialog: &mut Dialog,
    document: Option<&Document>,
    jobs: &mut Jobs,
    wishes: &mut Wishes,
) -> Outcome {
    let mut outcome = Outcome::Stays;
    let frame = egui::Frame::popup(&context.global_style()).inner_margin(20.0);
    let response = Modal::new(Id::unique("dialog")).frame(frame).show(context, |ui| {
        ui.set_width(560.0);
        ui.spacing_mut().item_spacing.y = 8.0;
        outcome = match dialog {
            Dialog::Open(path) => open_ui(ui, path, jobs),
            Dialog::NewPlant(path, name) => new_plant_ui(ui, path, name, jobs),
            Dialog::NewPress(tag, refusal, is_fresh) => new_press_ui(ui, document, tag, refusal, is_fresh, wishes),
            Dialog::Unsaved(then) => unsaved_ui(ui, then),
            Dialog::Plant(draft) => plant_ui(ui, draft, wishes),
        };
    });
    let is_left = response.should_close() || context.input(|input| input.key_pressed(Key::Escape));
    if is_left && matches!(outcome, Outcome::Stays) { Outcome::Closes } else { outcome }
}

fn title(ui: &mut Ui, text: &str) {
    ui.label(RichText::new(text).font(theme::strong(17.0)));
}

fn path_ui(ui: &mut Ui, path: &mut PathDraft, jobs: &mut Jobs) -> bool {
    let label = ui.label("Folder");
    let response = ui
        .horizontal(|ui| {
            let edit =
                ui.add(TextEdit::singleline(&mut path.text).id_salt("path").desired_width(400.0)).labelled_by(label.id);
            if ui.button("Choose…").clicked() {
                jobs.pick_folder(ui.ctx());
            }
            edit
        })
        .inner;
    if std::mem::take(&mut path.is_fresh) {
        response.request_focus();
    }
    if response.changed() {
        path.refusal = None;
    }
    response.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter))
}

/// What a path must be, or why this one could not be taken, in the same place.
fn path_words_ui(ui: &mut Ui, path: &PathDraft, what: &str) {
    match &path.refusal {
        Some(why) => {
            ui.add(egui::Label::new(RichText::new(why).color(theme::colour(ui.ctx(), Role::Short))).wrap());
        }
        None => {
            caption(ui, what);
        }
    }
}

fn open_ui(ui: &mut Ui, path: &mut PathDraft, jobs: &mut Jobs) -> Outcome {
    title(ui, "Open a plant");
    let is_entered = path_ui(ui, path, jobs);
    path_words_ui(ui, path, "The folder that holds plant.ron. Type its path, or choose it.");
    let mut outcome = Outcome::Stays;
    ui.horizontal(|ui| {
        let is_ready = !path.text.trim().is_empty();
        if (ui.add_enabled(is_ready, egui::Button::new("Open")).clicked() || is_entered) && is_ready {
            outcome = Outcome::GoOn(Then::Open(PathBuf::from(path.text.trim())));
        }
        if ui.button("Cancel").clicked() {
            outcome = Outcome::Closes;
        }
    });
    outcome
}

fn new_plant_ui(ui: &mut Ui, path: &mut PathDraft, name: &mut String, jobs: &mut Jobs) -> Outcome {
    title(ui, "New plant");
    path_ui(ui, path, jobs);
    path_words_ui(ui, path, "An empty folder, or one that does not exist yet.");
    let label = ui.label("Name of the plant");
    let named = ui.add(TextEdit::singleline(name).id_salt("plant name").desired_width(400.0)).labelled_by(label.id);
    let is_entered = named.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter));
    let mut outcome = Outcome::Stays;
    ui.horizontal(|ui| {
        let is_ready = !path.text.trim().is_empty() && !name.trim().is_empty();
        if (ui.add_enabled(is_ready, egui::Button::new("Make it")).clicked() || is_entered) && is_ready {
            let settings = PlantSettings {
                name: name.trim().to_owned(),
                rules: RuleSetId::Iso138552010,
                wish: None,
                test_interval_months: 12,
                reading_interval: Some(Interval::Months(1)),
                warning_share_percent: 50,
            };
            outcome = Outcome::GoOn(Then::Create { folder: PathBuf::from(path.text.trim()), settings });
        }
        if ui.button("Cancel").clicked() {
            outcome = Outcome::Closes;
        }
    });
    caption(
        ui,
        "It begins with ISO 13855:2010, a stop test every year and a reading every month. Change them in Plant settings.",
    );
    outcome
}

fn new_press_ui(
    ui: &mut Ui,
    document: Option<&Document>,
    tag: &mut String,
    refusal: &mut Option<Refusal>,
    is_fresh: &mut bool,
    wishes: &mut Wishes,
) -> Outcome {
    title(ui, "New press");
    let label = ui.label("Tag of the press, as the plant numbers it");
    let response =
        ui.add(TextEdit::singleline(tag).id_salt("tag").desired_width(200.0).hint_text("P-12")).labelled_by(label.id);
    if std::mem::take(is_fresh) {
        response.request_focus();
    }
    let is_entered = response.lost_focus() && ui.input(|input| input.key_pressed(Key::Enter));
    refusal_line(ui, refusal.as_ref());
    let mut outcome = Outcome::Stays;
    ui.horizontal(|ui| {
        if ui.button("Add it").clicked() || is_entered {
            match document.map_or_else(|| check_tag(tag.trim()), |document| document.check_tag(tag.trim())) {
                Ok(()) => {
                    let press = Box::new(empty_press(tag.trim().to_owned()));
                    let label = format!("add press {}", press.tag);
                    wishes.push(Wish::Change(Change { label, act: Act::AddPress(press) }));
                    outcome = Outcome::Closes;
                }
                Err(refused) => {
                    *refusal = Some(refused);
                    response.request_focus();
                }
            }
        }
        if ui.button("Cancel").clicked() {
            outcome = Outcome::Closes;
        }
    });
    outcome
}

fn unsaved_ui(ui: &mut Ui, then: &Then) -> Outcome {
    title(ui, "There are unsaved changes");
    ui.label("Save them before going on?");
    let mut outcome = Outcome::Stays;
    ui.horizontal(|ui| {
        let save = ui.button("Save");
        if ui.memory(|memory| memory.focused().is_none()) {
            save.request_focus();
        }
        if save.clicked() {
            outcome = Outcome::SaveThen(then.clone());
        }
        if ui.button("Go on without saving").clicked() {
            outcome = Outcome::GoOn(then.clone());
        }
        if ui.button("Stay").clicked() {
            outcome = Outcome::Closes;
        }
    });
    outcome
}

/// A field for a whole number; one with decimals is refused.
fn count_field(
    ui: &mut Ui,
    id: Id,
    kind: FieldKind,
    limit: &limits::Limit,
    current: u32,
    drafts: &mut Drafts,
) -> Option<u32> {
    let commit = field_ui(ui, id, kind, &current.to_string(), drafts, |text| {
        let count = limit.take_text(text)?;
        let whole = u32::try_from(count / 1000).ok().filter(|_| count % 1000 == 0);
        whole.ok_or_else(|| Refusal::new(limit.name, text, "a whole number", "Type it without decimals."))
    });
    match commit {
        Some(Commit::Set(count, _)) => Some(count),
        _ => None,
    }
}

/// No wish, or one of the ways of taking a value.
#[derive(Clone, Copy, PartialEq)]
struct Wished(Option<ValueTaken>);

impl Named for Wished {
    fn every() -> &'static [Self] {
        const EVERY: &[Wished] = &[
            Wished(None),
            Wished(Some(ValueTaken::Greatest)),
            Wished(Some(ValueTaken::GreatestOrMeanPlus3s)),
            Wished(Some(ValueTaken::Tolerance95)),
            Wished(Some(ValueTaken::Tolerance99)),
        ];
        EVERY
    }

    fn name(self) -> &'static str {
        self.0.map_or("what the rule set takes", ValueTaken::words)
    }
}

/// A row of a dialog: its name in a column of its own.
fn row_ui(ui: &mut Ui, name: &str, add: impl FnOnce(&mut Ui)) {
    ui.horizontal(|ui| {
        label_ui(ui, 140.0, name);
        add(ui);
    });
}

fn plant_id(field: &str) -> Id {
    Id::unique(("plant settings", field))
}

fn plant_ui(ui: &mut Ui, draft: &mut PlantDraft, wishes: &mut Wishes) -> Outcome {
    title(ui, "Plant settings");
    let PlantDraft { settings, drafts } = draft;
    let id = plant_id;
    let mut refused = None;
    row_ui(ui, "Name", |ui| {
        let kind = FieldKind::words("Name").bare().wide(320.0);
        if let Some(Commit::Set(name, _)) = text_field(ui, id("name"), kind, &settings.name, drafts) {
            settings.name = name;
        }
    });
    row_ui(ui, "Rule set", |ui| {
        if let Some(rules) =
            bare_choice_ui::<RuleSetId>(ui, id("rules"), "Rule set of the plant", 320.0, settings.rules)
        {
            settings.rules = rules;
        }
    });
    if settings.rules.edition() != settings.rules.title() {
        row_ui(ui, "", |ui| {
            caption(ui, settings.rules.edition());
        });
    }
    row_ui(ui, "Value taken forward", |ui| {
        let wish = bare_choice_ui(ui, id("wish"), "Value taken forward", 320.0, Wished(settings.wish));
        if let Some(wish) = wish {
            settings.wish = wish.0;
        }
    });
    row_ui(ui, "", |ui| {
        caption(ui, "A wish can only make a result more cautious than the rule set.");
    });
    heading(ui, "Intervals");
    row_ui(ui, "Stop test every", |ui| {
        let kind = FieldKind::figure("Stop test every", "months").bare();
        let months = id("months");
        if let Some(count) =
            count_field(ui, months, kind, &limits::INTERVAL_MONTHS, settings.test_interval_months, drafts)
        {
            settings.test_interval_months = count;
        }
        refused = drafts.refusal(months).cloned();
    });
    row_ui(ui, "Reading", |ui| {
        let interval = [
            (None, "none"),
            (Some(Interval::Weeks(1)), "every week"),
            (Some(Interval::Months(1)), "every month"),
            (Some(Interval::Months(3)), "every 3 months"),
        ];
        if let Some(interval) = segments_ui(ui, "", settings.reading_interval, &interval) {
            settings.reading_interval = interval;
        }
    });
    row_ui(ui, "Warning from", |ui| {
        let kind = FieldKind::figure("Warning from", "% of the spare on").bare();
        let share = id("share");
        if let Some(count) =
            count_field(ui, share, kind, &limits::WARNING_SHARE, settings.warning_share_percent, drafts)
        {
            settings.warning_share_percent = count;
        }
        refused = refused.take().or_else(|| drafts.refusal(share).cloned());
    });
    refusal_line(ui, refused.as_ref());
    ui.collapsing("What laws and guides ask for", |ui| {
        for preset in PRESETS {
            ui.label(format!("{}: {}", preset.name, preset.interval.words()));
            caption(ui, format!("{}; {}; {}", preset.source.place(), preset.source.basis.words(), preset.remark));
        }
    });
    let mut outcome = Outcome::Stays;
    let is_sound = drafts.refused().is_empty();
    ui.horizontal(|ui| {
        if ui.add_enabled(is_sound, egui::Button::new("Take over")).clicked() {
            let settings = settings.clone();
            wishes.edit_plant("change the plant settings", move |plant| *plant = settings);
            outcome = Outcome::Closes;
        }
        if ui.button("Cancel").clicked() {
            outcome = Outcome::Closes;
        }
    });
    outcome
}
