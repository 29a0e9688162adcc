//! File version 1.

mod fields;
mod meaning;
mod prediction;
mod shape;

use std::path::Path;

use calc::plant_settings::PlantSettings;
use calc::press::Press;
use ron::extensions::Extensions;
use ron::ser::PrettyConfig;
use serde::Serialize;

use crate::read::{FileRefusal, options, parse, version_of};
use meaning::{VERSION, file_of_press, file_of_settings, press_of, settings_of};

/// Reads a press from the text of its file.
///
/// # Errors
/// A text of another version, of another shape, or with a number outside its limit; with line, column and field.
pub fn press_from_text(path: &Path, text: &str) -> Result<Press, FileRefusal> {
    check_version(path, text)?;
    press_of(parse(path, text)?).map_err(|faults| {
        let mut faults = faults.into_iter().map(|(field, why)| FileRefusal::of_field(path, field, why));
        let first = faults.next().expect("a press is refused for at least one fault");
        FileRefusal { further: faults.collect(), ..first }
    })
}

/// Writes a press as the text of its file: the same press, the same bytes.
pub fn press_to_text(press: &Press) -> String {
    to_text(&file_of_press(press))
}

/// Reads what holds for the plant from the text of its file.
///
/// # Errors
/// As [`press_from_text`].
pub fn settings_from_text(path: &Path, text: &str) -> Result<PlantSettings, FileRefusal> {
    check_version(path, text)?;
    parse(path, text).map(settings_of)
}

/// Writes what holds for the plant as the text of its file.
pub fn settings_to_text(settings: &PlantSettings) -> String {
    to_text(&file_of_settings(settings))
}

fn check_version(path: &Path, text: &str) -> Result<(), FileRefusal> {
    let version = version_of(path, text)?;
    if version == VERSION {
        return Ok(());
    }
    let why = if version > VERSION {
        format!(
            "The file has version {version}; this program reads version {VERSION}. It was written by a newer program: use that one."
        )
    } else {
        format!("The file has version {version}; the oldest that ever was is {VERSION}. Write version: {VERSION}.")
    };
    Err(FileRefusal::of_field(path, "version", why))
}

fn to_text(shape: &impl Serialize) -> String {
    let pretty =
        PrettyConfig::new().indentor("  ").new_line("\n").compact_arrays(false).extensions(Extensions::empty());
    let text =
        options().to_string_pretty(shape, pretty).expect("a stored shape of plain structs can always be written");
    stops_on_one_line(&text)
}

/// Ten stops stand on one line, as they do on paper: lists of plain numbers are drawn together.
fn stops_on_one_line(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 1);
    let mut lines = text.lines();
    while let Some(line) = lines.next() {
        out.push_str(line);
        if line.ends_with("_ms: [") || line.ends_with("_mm: [") {
            let numbers: Vec<&str> = lines
                .by_ref()
                .map(str::trim)
                .take_while(|line| *line != "],")
                .map(|line| line.trim_end_matches(','))
                .collect();
            out.push_str(&numbers.join(", "));
            out.push_str("],");
        }
        out.push('\n');
    }
    out
}
