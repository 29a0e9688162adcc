//! Kept records: written once, never over an older one, each with a sealed copy of the press it was printed from.

use std::fs;
use std::path::{Path, PathBuf};

use calc::press::Press;
use jiff::civil::Date;
use serde::{Deserialize, Serialize};
use sha2::{Digest, Sha256};

use crate::read::{PlantRefusal, options, parse, read_text};
use crate::{v1, write_whole};

/// A record in the plant folder.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct KeptRecord {
    /// The printed record.
    pub pdf: PathBuf,
    /// `2026-12-01-01`
    pub name: String,
    /// Whether it is still as it was sealed.
    pub state: SealState,
}

/// Whether a record is still as it was sealed.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum SealState {
    /// Unchanged since it was written.
    Intact,
    /// The printed record is not the one that was sealed.
    Altered,
    /// The printed record or its seal is missing or unreadable.
    Incomplete,
}

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct Seal {
    version: u32,
    pdf_sha256: String,
    press: String,
}

/// Keeps a printed record of `press` under the next free number of the day.
///
/// # Errors
/// A folder that cannot be made or written. A record is never written over.
pub fn keep_record(folder: &Path, press: &Press, on: Date, pdf: &[u8]) -> Result<PathBuf, PlantRefusal> {
    let records = records_folder(folder, &press.tag);
    fs::create_dir_all(&records)
        .map_err(|error| PlantRefusal::Folder(format!("The folder {} cannot be made: {error}.", records.display())))?;
    let free = (1..=999)
        .map(|number| records.join(format!("{on}-{number:02}")))
        .find(|stem| !with_ending(stem, "pdf").exists() && !with_ending(stem, "ron").exists());
    let stem =
        free.ok_or_else(|| PlantRefusal::Folder(format!("{} holds 999 records of {on} already.", records.display())))?;
    let seal = Seal { version: 1, pdf_sha256: hex(pdf), press: v1::press_to_text(press) };
    let text = options()
        .to_string_pretty(&seal, ron::ser::PrettyConfig::new().escape_strings(false))
        .map_err(|error| PlantRefusal::Folder(error.to_string()))?;
    let path = with_ending(&stem, "pdf");
    write_whole(&path, pdf)?;
    write_whole(&with_ending(&stem, "ron"), (text + "\n").as_bytes())?;
    Ok(path)
}

/// The records of a press, newest first.
pub fn kept_records(folder: &Path, tag: &str) -> Vec<KeptRecord> {
    let Ok(entries) = fs::read_dir(records_folder(folder, tag)) else { return Vec::new() };
    let mut records: Vec<KeptRecord> = entries
        .filter_map(|entry| Some(entry.ok()?.path()))
        .filter(|path| path.extension().is_some_and(|ending| ending == "pdf"))
        .map(|pdf| {
            let name = pdf.file_stem().map_or(String::new(), |stem| stem.to_string_lossy().into_owned());
            let state = seal_state(&pdf);
            KeptRecord { pdf, name, state }
        })
        .collect();
    records.sort_by(|one, other| other.name.cmp(&one.name));
    records
}

fn seal_state(pdf: &Path) -> SealState {
    let seal_path = pdf.with_extension("ron");
    let seal = read_text(&seal_path).and_then(|text| parse::<Seal>(&seal_path, &text));
    match (fs::read(pdf), seal) {
        (Ok(bytes), Ok(seal)) if seal.pdf_sha256 == hex(&bytes) => SealState::Intact,
        (Ok(_), Ok(_)) => SealState::Altered,
        _ => SealState::Incomplete,
    }
}

fn records_folder(folder: &Path, tag: &str) -> PathBuf {
    folder.join("records").join(tag)
}

/// `with_extension` would cut the number off a name such as `2026-12-01-01.x`; a plain ending is put behind it.
fn with_ending(stem: &Path, ending: &str) -> PathBuf {
    let mut name = stem.as_os_str().to_owned();
    name.push(".");
    name.push(ending);
    name.into()
}

fn hex(bytes: &[u8]) -> String {
    Sha256::digest(bytes).iter().map(|byte| format!("{byte:02x}")).collect()
}
