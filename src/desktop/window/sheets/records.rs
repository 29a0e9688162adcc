//! The sheet of records: what is missing before one may be signed, sign-off, print, and the very pages that print.

use std::path::{Path, PathBuf};
use std::sync::Arc;

use calc::press::Press;
use calc::units::LengthUnit;
use calc::verdict::Answer;
use egui::{Grid, Id, RichText, TextEdit, Ui};
use figure::Role;
use jiff::civil::Date;
use plant::{SealState, kept_records};
use record::{Paper, Record, RecordInput, SignOff, press_record};

use crate::document::Document;
use crate::window::app::Given;
use crate::window::commands::Command;
use crate::window::context::SheetContext;
use crate::window::drawing::{mark_ui, page_ui};
use crate::window::theme;
use crate::window::widgets::{caption, heading, segments_ui, shortcut_button};
use crate::window::wishes::{Wish, Wishes};

/// Who signs and where to; not part of the document, since a record is signed once.
#[derive(Default)]
pub struct RecordsDrafts {
    /// Prepared, checked, accepted.
    pub sign_off: [SignOff; 3],
    /// The paper.
    pub paper: Paper,
    /// Where to, when not into the plant folder.
    pub path: String,
    preview: Option<Preview>,
}

struct Preview {
    made_from: (Arc<Press>, calc::plant_settings::PlantSettings, Paper, LengthUnit, [SignOff; 3], Date),
    record: Record,
}

/// What stands against signing a record of this press, in words.
pub fn missing(press: &Press, reasons: impl Iterator<Item = String>) -> Vec<String> {
    let mut missing = Vec::new();
    for (what, text) in
        [("description", &press.description), ("serial number", &press.serial), ("location", &press.location)]
    {
        if text.trim().is_empty() {
            missing.push(format!("The {what} of the press is not stated."));
        }
    }
    if press.safeguards.is_empty() {
        missing.push("No safeguard is entered.".into());
    }
    for reason in reasons {
        if !missing.contains(&reason) {
            missing.push(reason);
        }
    }
    missing
}

/// Shows the sheet.
pub fn records_ui(ui: &mut Ui, cx: &SheetContext, drafts: &mut RecordsDrafts, wishes: &mut Wishes) {
    ui.horizontal_top(|ui| {
        ui.vertical(|ui| {
            ui.set_width(470.0);
            missing_ui(ui, cx);
            sign_off_ui(ui, cx, drafts);
            print_ui(ui, cx, drafts, wishes);
            kept_ui(ui, cx);
        });
        ui.add_space(18.0);
        ui.vertical(|ui| preview_ui(ui, cx, drafts));
    });
}

fn missing_ui(ui: &mut Ui, cx: &SheetContext) {
    heading(ui, "Before it is signed");
    let against = cx.result.assessments.iter().zip(&cx.press.safeguards).flat_map(|(assessment, safeguard)| {
        assessment
            .reasons
            .iter()
            .map(|reason| format!("{}: {}", calc::assess::capitalised(&safeguard.name), reason.words))
    });
    let missing = missing(cx.press, against);
    if missing.is_empty() {
        ui.horizontal(|ui| {
            mark_ui(ui, Answer::Holds, 11.0);
            ui.label("Nothing is missing.");
        });
    }
    for words in missing {
        ui.horizontal_top(|ui| {
            mark_ui(ui, Answer::Unproven, 10.0);
            ui.add(egui::Label::new(words).wrap());
        });
    }
}

fn sign_off_ui(ui: &mut Ui, cx: &SheetContext, drafts: &mut RecordsDrafts) {
    heading(ui, "Sign-off");
    caption(ui, "Names are printed beside the lines; what is left empty is written by hand.");
    Grid::new("sign-off").num_columns(4).spacing([8.0, 6.0]).show(ui, |ui| {
        for head in ["", "Name", "Role", "Date"] {
            caption(ui, head);
        }
        ui.end_row();
        for (signed, what) in drafts.sign_off.iter_mut().zip(["Prepared", "Checked", "Accepted"]) {
            ui.label(what);
            for (text, name, width) in
                [(&mut signed.name, "name", 140.0), (&mut signed.role, "role", 120.0), (&mut signed.date, "date", 90.0)]
            {
                let id = Id::unique(("sign-off", &cx.press.tag, what, name));
                let edit = TextEdit::singleline(text).id(id);
                let response = ui.add_sized([width, ui.spacing().interact_size.y], edit);
                response
                    .widget_info(|| egui::WidgetInfo::labeled(egui::Role::TextInput, true, format!("{what}, {name}")));
            }
            ui.end_row();
        }
    });
}

fn print_ui(ui: &mut Ui, cx: &SheetContext, drafts: &mut RecordsDrafts, wishes: &mut Wishes) {
    heading(ui, "Print");
    if let Some(paper) = segments_ui(ui, "Paper", drafts.paper, &[(Paper::A4, "A4"), (Paper::Letter, "Letter")]) {
        drafts.paper = paper;
    }
    ui.horizontal(|ui| {
        let label = ui.label("To");
        let hint = "into the plant folder, sealed";
        ui.add(
            TextEdit::singleline(&mut drafts.path).id(Id::unique("record path")).desired_width(330.0).hint_text(hint),
        )
        .labelled_by(label.id);
    });
    caption(
        ui,
        format!("Left empty, it is kept as records/{}/{}-nn.pdf and never written over.", cx.press.tag, cx.today),
    );
    if shortcut_button(ui, Command::PrintRecord.name(), &Command::PrintRecord.shortcut(), true).clicked() {
        wishes.push(Wish::PrintRecord);
    }
}

fn kept_ui(ui: &mut Ui, cx: &SheetContext) {
    let Some(folder) = &cx.document.folder else { return };
    // A look at a handful of files; it is done when the sheet is shown, since others may print as well.
    let kept = kept_records(folder, &cx.press.tag);
    heading(ui, "Kept records");
    if kept.is_empty() {
        caption(ui, "None yet.");
    }
    for record in kept {
        let (words, role) = match record.state {
            SealState::Intact => ("unchanged since it was sealed", Role::Holds),
            SealState::Altered => ("altered since it was sealed", Role::Short),
            SealState::Incomplete => ("seal or file missing", Role::Unproven),
        };
        ui.horizontal(|ui| {
            ui.label(&record.name);
            ui.label(RichText::new(words).color(theme::colour(ui.ctx(), role)));
        });
    }
}

fn preview_ui(ui: &mut Ui, cx: &SheetContext, drafts: &mut RecordsDrafts) {
    let settings = cx.document.settings.clone();
    let made_from = (cx.press.clone(), settings, drafts.paper, cx.unit, drafts.sign_off.clone(), cx.today);
    if drafts.preview.as_ref().is_none_or(|preview| preview.made_from != made_from) {
        let record = make(cx.document, cx.press, drafts, (cx.today, env!("CARGO_PKG_VERSION")), cx.unit);
        drafts.preview = Some(Preview { made_from, record });
    }
    let width = ui.available_width().clamp(380.0, 760.0);
    if let Some(preview) = &drafts.preview {
        for page in &preview.record.pages {
            page_ui(ui, page, width);
            ui.add_space(10.0);
        }
    }
}

fn make(
    document: &Document,
    press: &Press,
    drafts: &RecordsDrafts,
    (date, version): (Date, &'static str),
    unit: LengthUnit,
) -> Record {
    press_record(&RecordInput {
        plant: &document.settings,
        press,
        rules: document.settings.rules,
        date,
        version,
        unit,
        paper: drafts.paper,
        sign_off: drafts.sign_off.clone(),
    })
}

/// Prints the record of a press, into the plant folder or to the path that was typed.
pub fn print(
    document: &Document,
    press: &Press,
    drafts: &RecordsDrafts,
    given: &Given,
    unit: LengthUnit,
) -> Result<PathBuf, String> {
    let pdf = make(document, press, drafts, (given.today, given.version), unit)
        .to_pdf()
        .map_err(|refusal| refusal.to_string())?;
    if drafts.path.trim().is_empty() {
        let folder =
            document.folder.as_deref().ok_or("The plant has no folder yet. Type where the record shall go.")?;
        return keep(folder, press, given.today, &pdf);
    }
    let path = PathBuf::from(drafts.path.trim());
    plant::write_whole(&path, &pdf).map_err(|refusal| refusal.to_string())?;
    Ok(path)
}

fn keep(folder: &Path, press: &Press, on: Date, pdf: &[u8]) -> Result<PathBuf, String> {
    plant::keep_record(folder, press, on, pdf).map_err(|refusal| refusal.to_string())
}

/// Writes a printed list to a path.
pub fn write_record(record: &Record, path: &Path) -> Result<(), String> {
    let pdf = record.to_pdf().map_err(|refusal| refusal.to_string())?;
    plant::write_whole(path, &pdf).map_err(|refusal| refusal.to_string())
}
