//! The application: what is open, how it is shown, what is being typed; and the three steps of a frame: logic, views, commands.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use calc::press::Press;
use calc::units::LengthUnit;
use egui::{CentralPanel, Context, Frame, Margin, Panel, Ui, ViewportCommand};
use figure::Role;
use jiff::civil::{Date, DateTime};

use super::commands::Command;
use super::context::SheetContext;
use super::dialogs::{self, Dialog, Then};
use super::header::NoResult;
use super::jobs::Jobs;
use super::overview::{OverviewDraft, overview_ui};
use super::sheets::{Sheet, SheetDrafts};
use super::wishes::{Wish, Wishes};
use super::{bar, header, press_list, status, theme};
use crate::document::Act;
use crate::host::WindowApp;
use crate::results::Results;
use crate::saving::{self, OpenPlant};

/// What the caller gives: nothing here reads a clock or the environment by itself.
#[derive(Clone, Debug)]
pub struct Given {
    /// Today. The window may stay open over midnight; before each frame it follows the clock.
    pub today: Date,
    /// The clock on the wall.
    pub clock: fn() -> DateTime,
    /// The version of the program.
    pub version: &'static str,
    /// What is said once about the renderer.
    pub renderer: String,
    /// Whether the plant is a copy of the samples.
    pub is_sample: bool,
}

/// How the document is shown. Losing it costs nothing.
pub struct ViewState {
    /// Tag of the shown press.
    pub press: Option<String>,
    /// The safeguard of the reach strip, by place; the gravest where none was chosen.
    pub safeguard: Option<usize>,
    /// Whether every press is shown in one table in place of one press.
    pub is_overview: bool,
    /// The shown sheet.
    pub sheet: Sheet,
    /// The unit of lengths.
    pub unit: LengthUnit,
    /// Whether the list runs by tag, not by gravity.
    pub is_by_tag: bool,
    /// What is typed into the find box.
    pub find: String,
    /// Whether the find box is to get the cursor.
    pub focus_find: bool,
    /// Whether the entry of the shown press is to get the cursor.
    pub focus_entry: bool,
}

/// The application.
pub struct App {
    given: Given,
    open: Option<OpenPlant>,
    results: Results,
    view: ViewState,
    /// What is being typed for the shown press.
    drafts: SheetDrafts,
    /// What is being typed for the others, by tag: it waits there.
    shelved: BTreeMap<String, SheetDrafts>,
    overview: OverviewDraft,
    dialog: Option<Dialog>,
    jobs: Jobs,
    messages: status::Messages,
}

impl App {
    /// The application with a plant folder opened, or with the reason why it cannot be.
    pub fn new(given: Given, folder: Option<&Path>) -> Self {
        let mut app = Self {
            messages: status::Messages::new(&given.renderer),
            given,
            open: None,
            results: Results::default(),
            view: ViewState {
                press: None,
                safeguard: None,
                is_overview: false,
                sheet: Sheet::StopTests,
                unit: LengthUnit::Millimetre,
                is_by_tag: false,
                find: String::new(),
                focus_find: false,
                focus_entry: false,
            },
            drafts: SheetDrafts::default(),
            shelved: BTreeMap::new(),
            overview: OverviewDraft::default(),
            dialog: None,
            jobs: Jobs::default(),
        };
        if let Some(Err(why)) = folder.map(|folder| app.open_folder(folder)) {
            app.messages.refuse(why);
        }
        app
    }

    /// The plant that is open.
    pub fn open_plant(&self) -> Option<&OpenPlant> {
        self.open.as_ref()
    }

    /// How it is shown.
    pub fn view(&self) -> &ViewState {
        &self.view
    }

    /// Opens a plant folder; where that fails, the plant that was open stays.
    fn open_folder(&mut self, folder: &Path) -> Result<(), String> {
        let plant = saving::open(folder).map_err(|refusal| refusal.to_string())?;
        self.open = Some(plant);
        self.view.press = None;
        self.view.safeguard = None;
        self.view.find.clear();
        self.drafts = SheetDrafts::default();
        self.shelved.clear();
        self.dialog = None;
        self.messages.other_plant();
        self.follow();
        self.view.press = press_list::order(&self.results, &self.view).first().map(|tag| (*tag).to_owned());
        Ok(())
    }

    fn follow(&mut self) {
        if let Some(open) = &self.open {
            self.results.follow(open.history.document(), self.given.today);
        }
    }

    fn show_press(&mut self, tag: String) {
        self.view.is_overview = false;
        self.turn_to(Some(tag));
    }

    /// Shows a press, or none. What is typed for the press that was shown is laid aside until it is shown again; only who signs
    /// and onto what paper goes along.
    fn turn_to(&mut self, tag: Option<String>) {
        if self.view.press == tag {
            return;
        }
        let mut drafts = tag.as_ref().and_then(|tag| self.shelved.remove(tag)).unwrap_or_default();
        std::mem::swap(&mut drafts.records, &mut self.drafts.records);
        let drafts = std::mem::replace(&mut self.drafts, drafts);
        if let Some(was) = std::mem::replace(&mut self.view.press, tag) {
            self.shelved.insert(was, drafts);
        }
        self.view.safeguard = None;
    }

    fn step_press(&mut self, step: isize) {
        let tags: Vec<String> = press_list::order(&self.results, &self.view).into_iter().map(str::to_owned).collect();
        let present = tags.iter().position(|tag| Some(tag.as_str()) == self.view.press.as_deref());
        let next = present.map_or(0, |index| index.saturating_add_signed(step).min(tags.len().saturating_sub(1)));
        if let Some(tag) = tags.into_iter().nth(next) {
            self.show_press(tag);
        }
    }

    fn is_dirty(&self) -> bool {
        self.open.as_ref().is_some_and(|open| open.history.is_dirty())
    }

    fn save(&mut self) -> bool {
        let Some(open) = &mut self.open else { return false };
        match open.save() {
            Ok(()) => {
                self.messages.clear();
                let folder = open.history.document().folder.as_deref().unwrap_or(Path::new("")).display();
                let is_whole =
                    self.drafts.refused().is_empty() && self.shelved.values().all(|one| one.refused().is_empty());
                let rest = if is_whole { "" } else { " Entries that cannot be taken are not part of it." };
                self.messages.saved((self.given.clock)(), format!("Saved to {folder}.{rest}"));
                true
            }
            Err(refusals) => {
                self.messages.clear();
                for refusal in refusals {
                    self.messages.refuse(refusal.to_string());
                }
                false
            }
        }
    }

    /// Goes on with what was asked, or first asks what to do with unsaved changes.
    fn after_saving(&mut self, then: Then) {
        if self.is_dirty() {
            self.dialog = Some(Dialog::Unsaved(then));
        } else {
            self.go_on(then);
        }
    }

    /// Does what was asked; where it cannot be done, the reason comes back.
    fn attempt(&mut self, then: Then) -> Result<(), String> {
        match then {
            Then::Close => self.jobs.is_closing = true,
            Then::Open(folder) => self.open_folder(&folder)?,
            Then::AskOpen => self.dialog = Some(Dialog::open(self.folder())),
            Then::AskNew => self.dialog = Some(Dialog::new_plant()),
            Then::Create { folder, settings } => {
                plant::create(&folder, &settings).map_err(|refusal| refusal.to_string())?;
                self.open_folder(&folder)?;
            }
        }
        Ok(())
    }

    fn go_on(&mut self, then: Then) {
        if let Err(why) = self.attempt(then) {
            self.messages.clear();
            self.messages.refuse(why);
        }
    }

    fn folder(&self) -> Option<PathBuf> {
        self.open.as_ref()?.history.document().folder.clone()
    }

    fn carry_out(&mut self, wish: Wish, context: &Context) {
        match wish {
            Wish::Change(change) => {
                let new_tag = match &change.act {
                    Act::AddPress(press) => Some(press.tag.clone()),
                    _ => None,
                };
                let before: Vec<String> = self.tags();
                let Some(open) = &mut self.open else { return };
                match open.history.apply(change) {
                    Ok(()) => {
                        self.messages.clear();
                        let after = self.tags();
                        if let Some(tag) = new_tag {
                            self.show_press(tag);
                            self.view.sheet = Sheet::Press;
                        } else if let Some(shown) = self.view.press.clone().filter(|tag| !after.contains(tag)) {
                            // The shown press got another tag: go with it, and keep what is being typed for it.
                            let renamed = after.into_iter().find(|tag| !before.contains(tag));
                            self.view.press = renamed.or(Some(shown));
                        }
                    }
                    Err(refusal) => {
                        self.messages.clear();
                        self.messages.refuse(refusal.to_string());
                    }
                }
            }
            Wish::Undo => self.travel(|open| open.history.undo()),
            Wish::Redo => self.travel(|open| open.history.redo()),
            Wish::Save => {
                self.save();
            }
            Wish::NewPlant => self.after_saving(Then::AskNew),
            Wish::OpenPlant => self.after_saving(Then::AskOpen),
            Wish::OpenFolder(folder) => self.after_saving(Then::Open(folder)),
            Wish::NewPress => {
                if self.open.is_some() {
                    self.dialog = Some(Dialog::new_press());
                }
            }
            Wish::ShowPress(tag) => self.show_press(tag),
            Wish::ShowOverview => self.view.is_overview = true,
            Wish::ShowSafeguard(place) => self.view.safeguard = Some(place),
            Wish::ShowSheet(sheet) => {
                self.view.is_overview = false;
                self.view.sheet = sheet;
            }
            Wish::PrintRecord => self.print_record(),
            Wish::PrintRoundList(record, path) => {
                self.messages.clear();
                match super::sheets::records::write_record(&record, &path) {
                    Ok(()) => self.messages.tell(format!("Printed to {}.", path.display())),
                    Err(why) => self.messages.refuse(why),
                }
            }
            Wish::WriteFile(path, text) => {
                self.messages.clear();
                match plant::write_whole(&path, text.as_bytes()) {
                    Ok(()) => self.messages.tell(format!("Written to {}.", path.display())),
                    Err(refusal) => self.messages.refuse(refusal.to_string()),
                }
            }
            Wish::ShowIn(unit) => self.view.unit = unit,
            Wish::SetDark(is_dark) => {
                theme::set_dark(context, is_dark);
            }
            Wish::SortByTag(is_by_tag) => self.view.is_by_tag = is_by_tag,
            Wish::EditPlant => {
                if let Some(open) = &self.open {
                    self.dialog = Some(Dialog::plant(&open.history.document().settings));
                }
            }
            Wish::Tell(words) => {
                self.messages.clear();
                self.messages.tell(words);
            }
        }
    }

    fn tags(&self) -> Vec<String> {
        self.open.as_ref().map_or_else(Vec::new, |open| {
            open.history.document().presses.iter().map(|press| press.tag.clone()).collect()
        })
    }

    fn travel(&mut self, step: impl FnOnce(&mut OpenPlant)) {
        let before = self.tags();
        let Some(open) = &mut self.open else { return };
        step(open);
        self.messages.clear();
        let after = self.tags();
        if self.view.press.as_ref().is_none_or(|tag| !after.contains(tag)) {
            let other = after.iter().find(|tag| !before.contains(tag)).or(after.first());
            self.turn_to(other.cloned());
        }
    }

    fn print_record(&mut self) {
        let Some(open) = &self.open else { return };
        let document = open.history.document();
        let Some(press) = self.view.press.as_ref().and_then(|tag| document.press(tag)) else { return };
        self.messages.clear();
        if let Some(why) = NoResult::of(&self.drafts.refused()) {
            self.messages.refuse(format!("The record is not printed. {} {}", why.sentence, why.what_to_do));
            return;
        }
        match super::sheets::records::print(document, press, &self.drafts.records, &self.given, self.view.unit) {
            Ok(path) => self.messages.tell(format!("Record printed to {}.", path.display())),
            Err(why) => self.messages.refuse(why),
        }
    }

    fn run_command(&mut self, command: Command, wishes: &mut Wishes) {
        match command {
            Command::NewPlant => wishes.push(Wish::NewPlant),
            Command::OpenPlant => wishes.push(Wish::OpenPlant),
            Command::NewPress => wishes.push(Wish::NewPress),
            Command::Save => wishes.push(Wish::Save),
            Command::Undo => wishes.push(Wish::Undo),
            Command::Redo => wishes.push(Wish::Redo),
            Command::PrintRecord => wishes.push(Wish::PrintRecord),
            Command::NextPress => self.step_press(1),
            Command::PreviousPress => self.step_press(-1),
            Command::Find => self.view.focus_find = true,
            Command::ShowSheet(place) => {
                if let Some(sheet) = Sheet::ALL.get(place) {
                    self.view.is_overview = false;
                    self.view.sheet = *sheet;
                }
            }
        }
    }

    fn views(&mut self, ui: &mut Ui, wishes: &mut Wishes) {
        let Self { given, open, results, view, drafts, shelved, overview, messages, .. } = self;
        let history = open.as_ref().map(|open| &open.history);
        let shown = history.filter(|_| !view.is_overview).and_then(|history| {
            let press = history.document().press(view.press.as_deref()?)?;
            Some((history, press, results.press(&press.tag)?))
        });
        let no_result = NoResult::of(&drafts.refused());
        Panel::bottom("status").show_separator_line(true).frame(panel_frame(10, 6)).show(ui, |ui| {
            status::status_ui(ui, messages, history, given);
        });
        Panel::left("presses").resizable(false).exact_size(218.0).frame(panel_frame(10, 10)).show(ui, |ui| {
            let shown = view.press.clone().filter(|_| no_result.is_some());
            let waiting = shelved.iter().filter(|(_, drafts)| !drafts.refused().is_empty());
            let without_result: Vec<&str> = waiting.map(|(tag, _)| tag.as_str()).chain(shown.as_deref()).collect();
            press_list::press_list_ui(ui, history, results, view, (given.today, &without_result), wishes);
        });
        Panel::top("bar").show_separator_line(false).frame(panel_frame(12, 8)).show(ui, |ui| {
            bar::bar_ui(ui, shown.map(|(_, press, _)| &**press), view, history, wishes);
        });
        if let Some(history) = history.filter(|_| view.is_overview) {
            CentralPanel::default().frame(panel_frame(14, 4)).show(ui, |ui| {
                overview_ui(ui, history.document(), results, overview, (view.unit, given.today), wishes);
            });
            return;
        }
        let Some((history, press, result)) = shown else {
            CentralPanel::default()
                .frame(panel_frame(20, 20))
                .show(ui, |ui| header::nothing_shown_ui(ui, history, wishes));
            return;
        };
        let safeguard = view.safeguard.filter(|place| *place < press.safeguards.len()).or(result.gravest).unwrap_or(0);
        let cx = SheetContext {
            document: history.document(),
            press,
            result,
            safeguard,
            unit: view.unit,
            today: given.today,
            is_without_result: no_result.is_some(),
        };
        Panel::top("header").show_separator_line(true).frame(panel_frame(12, 0)).show(ui, |ui| {
            header::header_ui(ui, &cx, view.sheet, no_result.as_ref(), wishes);
        });
        CentralPanel::default().frame(panel_frame(12, 10)).show(ui, |ui| {
            view.sheet.ui(ui, &cx, drafts, wishes);
        });
    }

    fn dialog(&mut self, context: &Context, wishes: &mut Wishes) {
        let Some(mut dialog) = self.dialog.take() else { return };
        let document = self.open.as_ref().map(|open| open.history.document());
        match dialogs::dialog_ui(context, &mut dialog, document, &mut self.jobs, wishes) {
            dialogs::Outcome::Stays => self.dialog = Some(dialog),
            dialogs::Outcome::Closes => {}
            dialogs::Outcome::SaveThen(then) => {
                if self.save() {
                    self.go_on(then);
                }
            }
            dialogs::Outcome::GoOn(then) => {
                if let Err(why) = self.attempt(then) {
                    dialog.refuse(why);
                    self.dialog = Some(dialog);
                }
            }
        }
    }

    /// The commands of this frame's keys. While a field has the cursor, what is half typed in it is committed first: the field
    /// loses the cursor and tells so when it is drawn, and the command waits for the next frame.
    fn commands(&mut self, context: &Context, wishes: &mut Wishes) {
        let focused = context.memory(|memory| memory.focused());
        for command in Command::pressed(context) {
            match focused {
                Some(id) => {
                    context.memory_mut(|memory| memory.surrender_focus(id));
                    self.jobs.later.push((command, id));
                    context.request_repaint();
                }
                None => self.run_command(command, wishes),
            }
        }
        if self.jobs.has_new_later() {
            return;
        }
        for (command, id) in std::mem::take(&mut self.jobs.later) {
            self.run_command(command, wishes);
            if command.returns_to_field() {
                context.memory_mut(|memory| memory.request_focus(id));
            }
        }
    }
}

fn panel_frame(sides: i8, ends: i8) -> Frame {
    Frame::new().inner_margin(Margin::symmetric(sides, ends))
}

impl WindowApp for App {
    fn close_requested(&mut self, _context: &Context) -> bool {
        if self.jobs.is_closing || !self.is_dirty() {
            return true;
        }
        self.dialog = Some(Dialog::Unsaved(Then::Close));
        false
    }

    fn logic(&mut self, _context: &Context) {
        if let Some(folder) = self.jobs.picked_folder() {
            match &mut self.dialog {
                Some(dialog) => dialog.take_path(&folder),
                None => self.after_saving(Then::Open(folder)),
            }
        }
        if self.jobs.dialog_failed() {
            self.messages.tell("No file dialog can be opened here. Type the path instead.".into());
        }
        self.given.today = (self.given.clock)().date();
        self.follow();
    }

    fn ui(&mut self, ui: &mut Ui) {
        let context = ui.ctx().clone();
        let mut wishes = Wishes::default();
        if self.dialog.is_none() {
            self.commands(&context, &mut wishes);
        }
        self.views(ui, &mut wishes);
        self.dialog(&context, &mut wishes);
        let is_asking = !wishes.0.is_empty();
        for wish in wishes.0 {
            self.carry_out(wish, &context);
        }
        if is_asking {
            // What was changed is shown in the next frame, which must come without waiting for the mouse.
            self.follow();
            context.request_repaint();
        }
        if self.jobs.asks_to_close() {
            context.send_viewport_cmd(ViewportCommand::Close);
        }
    }
}

/// The colour of an answer's text.
pub fn answer_role(answer: calc::verdict::Answer) -> Role {
    figure::AnswerMark::from(answer).role()
}

/// A press with nothing but its tag.
pub fn empty_press(tag: String) -> Press {
    use calc::press::{Clutch, ClutchMedium, DriveKind, Frame};
    Press {
        tag,
        description: String::new(),
        serial: String::new(),
        location: String::new(),
        force_n: None,
        frame: Frame::StraightSide,
        clutch: Clutch::PartRevolution(ClutchMedium::Air),
        drive: DriveKind::Crank,
        stroke: None,
        rod: None,
        fastest_speed: None,
        slowest_speed: None,
        heaviest_die: None,
        conformity: None,
        control_response: None,
        monitor: None,
        safeguards: Vec::new(),
        stop_tests: Vec::new(),
        reference: None,
        readings: Vec::new(),
        events: Vec::new(),
    }
}
