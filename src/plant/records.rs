//! Kept records: written once, never over an older one, each with a sealed copy of the press it was printed from.

use std::collections::BTreeSet;
use std::fs;
use std::io::ErrorKind;
use std::path::{Path, PathBuf};

use calc::press::{Press, check_tag};
use jiff::civil::Date;
use serde::{Deserialize, Serialize};
use sha2::{Digest, Sha256};

use crate::read::{PlantRefusal, options, parse, read_text};
use crate::{v1, write_whole};

/// A record in the plant folder.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct KeptRecord {
    /// The printed record; where it is gone, the place where it was.
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
    /// The printed record, or the copy of the press beside it, is not the one that was sealed.
    Altered,
    /// The printed record or its seal is missing, unreadable or of an unknown version.
    Incomplete,
}

/// The version of a seal that is written and read.
const SEAL_VERSION: u32 = 1;

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct Seal {
    version: u32,
    pdf_sha256: String,
    press_sha256: String,
    press: String,
}

/// Keeps a printed record of `press` under the next free number of the day.
///
/// # Errors
/// A folder that cannot be made or written. A record is never written over, and a failure leaves no part of one behind.
pub fn keep_record(folder: &Path, press: &Press, on: Date, pdf: &[u8]) -> Result<PathBuf, PlantRefusal> {
    check_tag(&press.tag).map_err(|refusal| PlantRefusal::Folder(refusal.to_string()))?;
    let records = records_folder(folder, &press.tag);
    fs::create_dir_all(&records)
        .map_err(|error| PlantRefusal::Folder(format!("The folder {} cannot be made: {error}.", records.display())))?;
    let press = v1::press_to_text(press);
    let seal = Seal { version: SEAL_VERSION, pdf_sha256: hex(pdf), press_sha256: hex(press.as_bytes()), press };
    let text = options()
        .to_string_pretty(&seal, ron::ser::PrettyConfig::new().new_line("\n").escape_strings(false))
        .map_err(|error| PlantRefusal::Folder(error.to_string()))?;
    let stem = reserve(&records, on)?;
    let (path, seal_path) = (with_ending(&stem, "pdf"), with_ending(&stem, "ron"));
    let written = write_whole(&path, pdf).and_then(|()| write_whole(&seal_path, (text + "\n").as_bytes()));
    if let Err(refusal) = written {
        // Half a record would count as an incomplete one for ever; the reserved name is ours to give back.
        let _ = fs::remove_file(&path);
        return Err(refusal);
    }
    Ok(path)
}

/// Takes the next free number of the day by making its file, so that two programs on one share never take the same.
fn reserve(records: &Path, on: Date) -> Result<PathBuf, PlantRefusal> {
    for number in 1..=999 {
        let stem = records.join(format!("{on}-{number:02}"));
        if with_ending(&stem, "ron").exists() {
            continue;
        }
        match fs::OpenOptions::new().write(true).create_new(true).open(with_ending(&stem, "pdf")) {
            Ok(_) => return Ok(stem),
            Err(error) if error.kind() == ErrorKind::AlreadyExists => {}
            Err(error) => {
                let why = format!("Nothing can be written to {}: {error}.", records.display());
                return Err(PlantRefusal::Folder(why));
            }
        }
    }
    Err(PlantRefusal::Folder(format!("{} holds 999 records of {on} already.", records.display())))
}

/// The records of a press, newest first. One whose print or whose seal is gone is listed too.
pub fn kept_records(folder: &Path, tag: &str) -> Vec<KeptRecord> {
    let records = records_folder(folder, tag);
    let Ok(entries) = fs::read_dir(&records) else { return Vec::new() };
    let names: BTreeSet<String> = entries
        .filter_map(|entry| Some(entry.ok()?.path()))
        .filter(|path| path.extension().is_some_and(|ending| ending == "pdf" || ending == "ron"))
        .filter_map(|path| Some(path.file_stem()?.to_str()?.to_owned()))
        .filter(|name| !name.starts_with('.'))
        .collect();
    let mut records: Vec<KeptRecord> = names
        .into_iter()
        .map(|name| {
            let pdf = with_ending(&records.join(&name), "pdf");
            let state = seal_state(&pdf);
            KeptRecord { pdf, name, state }
        })
        .collect();
    records.sort_by(|one, other| by_day_and_number(&other.name).cmp(&by_day_and_number(&one.name)));
    records
}

/// The hundredth record of a day is later than its ninety-ninth, though its name sorts before.
fn by_day_and_number(name: &str) -> (&str, usize, &str) {
    let (day, number) = name.rsplit_once('-').unwrap_or((name, ""));
    (day, number.len(), number)
}

fn seal_state(pdf: &Path) -> SealState {
    let seal_path = pdf.with_extension("ron");
    let seal = read_text(&seal_path).and_then(|text| parse::<Seal>(&seal_path, &text));
    match (fs::read(pdf), seal) {
        (Ok(bytes), Ok(seal)) if seal.version == SEAL_VERSION => {
            let is_whole = seal.pdf_sha256 == hex(&bytes) && seal.press_sha256 == hex(seal.press.as_bytes());
            if is_whole { SealState::Intact } else { SealState::Altered }
        }
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
