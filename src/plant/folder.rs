//! The plant folder: opening all of it, opening one press, saving what has changed.

use std::collections::BTreeMap;
use std::fs;
use std::io::ErrorKind;
use std::path::{Path, PathBuf};

use calc::plant_settings::PlantSettings;
use calc::press::{Press, check_tag};

use crate::read::{FileRefusal, LARGEST_FILE, PlantRefusal, read_text};
use crate::v1;
use crate::write::{write_new, write_whole};

const SETTINGS: &str = "plant.ron";
const PRESSES: &str = "presses";
/// From so many presses on they are read on several threads.
const FEW: usize = 8;

/// A plant as it was read.
#[derive(Clone, Debug)]
pub struct Plant {
    /// Its folder.
    pub folder: PathBuf,
    /// What holds for the whole plant.
    pub settings: PlantSettings,
    /// Its press files, by name.
    pub presses: Vec<StoredPress>,
    /// The texts as they were read, by which a change by somebody else is noticed.
    pub known: Known,
}

/// One press file.
#[derive(Clone, Debug)]
pub struct StoredPress {
    /// The file.
    pub path: PathBuf,
    /// The press, or why it could not be read.
    pub content: Result<Press, FileRefusal>,
}

/// The texts of a plant as this program last read or wrote them.
#[derive(Clone, PartialEq, Eq, Debug, Default)]
pub struct Known {
    settings: Option<String>,
    presses: BTreeMap<String, String>,
}

/// Opens a plant folder. A press file that cannot be read is listed with its error; the rest is opened.
///
/// # Errors
/// A folder that is none, cannot be read, or has no readable `plant.ron`.
pub fn open(folder: &Path) -> Result<Plant, PlantRefusal> {
    let refuse = |why: String| PlantRefusal::Folder(why);
    let kind = fs::metadata(folder)
        .map_err(|error| refuse(format!("The folder {} cannot be opened: {error}.", folder.display())))?;
    if !kind.is_dir() {
        return Err(refuse(format!(
            "{} is a file. Give the plant folder, the one that holds {SETTINGS}.",
            folder.display()
        )));
    }
    let (settings, settings_text) = open_settings(folder)?;
    let paths = press_paths(folder)?;
    let mut known = Known { settings: Some(settings_text), presses: BTreeMap::new() };
    let mut presses = Vec::new();
    for (path, read) in paths.iter().zip(read_all(&paths)) {
        let content = read.map(|(press, text)| {
            known.presses.insert(press.tag.clone(), text);
            press
        });
        presses.push(StoredPress { path: path.clone(), content });
    }
    Ok(Plant { folder: folder.into(), settings, presses, known })
}

/// Opens one press file together with the plant it belongs to.
///
/// # Errors
/// A press file outside the `presses` folder of a plant, or one of the two files unreadable.
pub fn open_press_file(path: &Path) -> Result<(PlantSettings, Press), PlantRefusal> {
    let (press, _) = read_press(path)?;
    Ok((open_settings(&plant_of(path)?)?.0, press))
}

/// The plant folder that a press file belongs to.
fn plant_of(path: &Path) -> Result<PathBuf, PlantRefusal> {
    let absolute = std::path::absolute(path).unwrap_or_else(|_| path.into());
    let folder = absolute.parent().and_then(Path::parent).filter(|folder| folder.join(SETTINGS).is_file());
    folder.map(Path::to_owned).ok_or_else(|| {
        PlantRefusal::Folder(format!(
            "{} belongs to no plant: there is no {SETTINGS} in the folder above its own. Keep press files in PLANT/{PRESSES}/.",
            path.display()
        ))
    })
}

/// Changes one press file on disk: reads it, lets `edit` change the press, and saves it whole or not at all.
///
/// # Errors
/// As [`open_press_file`] and [`save_press`], or what `edit` refuses; the file is then as it was.
pub fn edit_press_file(
    path: &Path,
    edit: impl FnOnce(&mut Press) -> Result<(), String>,
) -> Result<Press, PlantRefusal> {
    // Press and text come from one reading: a change by somebody else after it is noticed when the press is saved.
    let (mut press, text) = read_press(path)?;
    let folder = plant_of(path)?;
    open_settings(&folder)?;
    let tag = press.tag.clone();
    edit(&mut press).map_err(PlantRefusal::Folder)?;
    let mut known = Known { settings: None, presses: BTreeMap::from([(tag.clone(), text)]) };
    save_press(&folder, &press, Some(&tag), &mut known)?;
    Ok(press)
}

/// Makes a new plant folder.
///
/// # Errors
/// A folder that already holds a plant or anything else, or cannot be written.
pub fn create(folder: &Path, settings: &PlantSettings) -> Result<Known, PlantRefusal> {
    let refuse = |why: String| PlantRefusal::Folder(why);
    if is_there(folder)? && !folder.is_dir() {
        return Err(refuse(format!("{} is no folder. Choose an empty folder or a new name.", folder.display())));
    }
    if is_there(&folder.join(SETTINGS))? {
        return Err(refuse(format!("{} already holds a plant. Open it instead.", folder.display())));
    }
    if is_there(folder)? {
        let mut entries = fs::read_dir(folder)
            .map_err(|error| refuse(format!("The folder {} cannot be read: {error}.", folder.display())))?;
        if entries.next().is_some() {
            return Err(refuse(format!("{} is not empty. Choose an empty folder or a new name.", folder.display())));
        }
    }
    fs::create_dir_all(folder.join(PRESSES))
        .map_err(|error| refuse(format!("The folder {} cannot be made: {error}.", folder.display())))?;
    let mut known = Known::default();
    save_settings(folder, settings, &mut known)?;
    Ok(known)
}

/// Saves what holds for the whole plant.
///
/// # Errors
/// A file that somebody else changed since it was read, or that cannot be written. The old file is then as it was.
pub fn save_settings(folder: &Path, settings: &PlantSettings, known: &mut Known) -> Result<(), PlantRefusal> {
    let path = folder.join(SETTINGS);
    let text = head_comment(known.settings.as_deref()) + &v1::settings_to_text(settings);
    if v1::settings_from_text(&path, &text)? != *settings {
        let why = "What holds for the plant cannot be saved without loss. Nothing was changed.";
        return Err(PlantRefusal::Folder(why.into()));
    }
    check_unchanged(&path, known.settings.as_deref())?;
    let write = if known.settings.is_some() { write_whole } else { write_new };
    write(&path, text.as_bytes())?;
    known.settings = Some(text);
    Ok(())
}

/// Saves one press under its tag. Where it bore another tag before, the old file goes once the new one is in place.
///
/// # Errors
/// A file that somebody else changed since it was read, a new tag whose file is there already, or a file that cannot be written.
/// The old file is then as it was.
pub fn save_press(
    folder: &Path,
    press: &Press,
    previous_tag: Option<&str>,
    known: &mut Known,
) -> Result<(), PlantRefusal> {
    check_tag(&press.tag).map_err(|refusal| PlantRefusal::Folder(refusal.to_string()))?;
    let presses = folder.join(PRESSES);
    fs::create_dir_all(&presses)
        .map_err(|error| PlantRefusal::Folder(format!("The folder {} cannot be made: {error}.", presses.display())))?;
    let path = press_path(folder, &press.tag);
    let known_text = previous_tag.and_then(|tag| known.presses.get(tag)).or_else(|| known.presses.get(&press.tag));
    let text = head_comment(known_text.map(String::as_str)) + &v1::press_to_text(press);
    if text.len() as u64 > LARGEST_FILE {
        return Err(PlantRefusal::Folder(format!(
            "The file of press {} would be {} bytes long; at most {LARGEST_FILE} are read again. Nothing was changed.",
            press.tag,
            text.len()
        )));
    }
    // What is written must mean what is on the screen; if it does not, the fault is ours and the old file stays.
    match v1::press_from_text(&path, &text) {
        Ok(back) if back == *press => {}
        Ok(_) => {
            return Err(PlantRefusal::Folder(format!(
                "Press {} cannot be saved without loss. Nothing was changed.",
                press.tag
            )));
        }
        Err(refusal) => return Err(refusal.into()),
    }
    check_unchanged(&path, known.presses.get(&press.tag).map(String::as_str))?;
    // A tag that is no longer known was moved away by an earlier save.
    let moved_from = previous_tag.filter(|tag| *tag != press.tag && known.presses.contains_key(*tag));
    if let Some(tag) = moved_from {
        if is_there(&path)? {
            return Err(PlantRefusal::Folder(format!(
                "Press {tag} cannot be saved as {}: {} is the file of another press. Nothing was changed; choose another tag, or save again once that press has left it.",
                press.tag,
                path.display()
            )));
        }
        check_unchanged(&press_path(folder, tag), known.presses.get(tag).map(String::as_str))?;
    }
    let write = if known.presses.contains_key(&press.tag) { write_whole } else { write_new };
    write(&path, text.as_bytes())?;
    known.presses.insert(press.tag.clone(), text);
    if let Some(tag) = moved_from {
        known.presses.remove(tag);
        let old = press_path(folder, tag);
        fs::remove_file(&old).map_err(|error| {
            PlantRefusal::Folder(format!(
                "Press {} is saved, but its old file {} cannot be removed: {error}. Remove it by hand, or it is listed as a press of its own.",
                press.tag,
                old.display()
            ))
        })?;
    }
    Ok(())
}

/// Saves one press over what stands in its file by now, for somebody who was told by [`save_press`] that it has changed and wants
/// it so. Gives back the text that went, `None` where the file had gone.
///
/// # Errors
/// As [`save_press`], except for a change by somebody else. A file that cannot be read is not replaced, nor is one of another press.
pub fn save_press_over(
    folder: &Path,
    press: &Press,
    previous_tag: Option<&str>,
    known: &mut Known,
) -> Result<Option<String>, PlantRefusal> {
    let tag = previous_tag.filter(|tag| known.presses.contains_key(*tag)).unwrap_or(&press.tag);
    if !known.presses.contains_key(tag) {
        // What was never read is another press, whatever its file is called.
        return save_press(folder, press, previous_tag, known).map(|()| None);
    }
    let path = press_path(folder, tag);
    let theirs = if is_there(&path)? { Some(read_press(&path)?.1) } else { None };
    let mut as_it_is = known.clone();
    let previous_tag = match &theirs {
        Some(text) => {
            as_it_is.presses.insert(tag.to_owned(), text.clone());
            previous_tag
        }
        None => {
            as_it_is.presses.remove(tag);
            None
        }
    };
    let before = as_it_is.clone();
    let saved = save_press(folder, press, previous_tag, &mut as_it_is);
    // Where the new file stands and only the old one could not be removed, that much is known even so.
    if saved.is_ok() || as_it_is != before {
        *known = as_it_is;
    }
    saved.map(|()| theirs)
}

/// The comment lines that somebody wrote at the head of a file; they stay when the file is written again.
fn head_comment(text: Option<&str>) -> String {
    let lines = text.unwrap_or_default().lines();
    lines.take_while(|line| line.starts_with("//")).map(|line| format!("{line}\n")).collect()
}

fn press_path(folder: &Path, tag: &str) -> PathBuf {
    folder.join(PRESSES).join(format!("{tag}.ron"))
}

/// Whether anything stands at a path, be it a link to nowhere. What cannot be looked at is not taken for absent: a share that
/// is away must not pass for an empty plant.
fn is_there(path: &Path) -> Result<bool, PlantRefusal> {
    match fs::symlink_metadata(path) {
        Ok(_) => Ok(true),
        Err(error) if error.kind() == ErrorKind::NotFound => Ok(false),
        Err(error) => Err(PlantRefusal::Folder(format!("{} cannot be looked at: {error}.", path.display()))),
    }
}

fn check_unchanged(path: &Path, known: Option<&str>) -> Result<(), PlantRefusal> {
    let now = if is_there(path)? { Some(read_text(path)?) } else { None };
    if now.as_deref() == known {
        return Ok(());
    }
    Err(PlantRefusal::Folder(match (&now, known) {
        (Some(_), None) => {
            format!("{} already exists and was not read by this program. Nothing was changed.", path.display())
        }
        (None, _) => format!(
            "{} has been removed by somebody else since it was read. Nothing was changed; save the plant to another folder.",
            path.display()
        ),
        _ => format!(
            "{} has been changed by somebody else since it was read. Nothing was changed; open the plant again.",
            path.display()
        ),
    }))
}

fn open_settings(folder: &Path) -> Result<(PlantSettings, String), PlantRefusal> {
    let path = folder.join(SETTINGS);
    if !is_there(&path)? {
        return Err(PlantRefusal::Folder(format!("{} is no plant folder: it holds no {SETTINGS}.", folder.display())));
    }
    let text = read_text(&path)?;
    Ok((v1::settings_from_text(&path, &text)?, text))
}

fn press_paths(folder: &Path) -> Result<Vec<PathBuf>, PlantRefusal> {
    let presses = folder.join(PRESSES);
    if !is_there(&presses)? {
        return Ok(Vec::new());
    }
    let refuse = |error: std::io::Error| {
        PlantRefusal::Folder(format!("The folder {} cannot be read: {error}.", presses.display()))
    };
    let mut paths = Vec::new();
    for entry in fs::read_dir(&presses).map_err(refuse)? {
        let path = entry.map_err(refuse)?.path();
        let is_hidden = path.file_name().is_some_and(|name| name.to_string_lossy().starts_with('.'));
        if !is_hidden && path.extension().is_some_and(|extension| extension == "ron") {
            paths.push(path);
        }
    }
    paths.sort();
    Ok(paths)
}

fn read_press(path: &Path) -> Result<(Press, String), FileRefusal> {
    let text = read_text(path)?;
    let press = v1::press_from_text(path, &text)?;
    if path.file_stem().is_none_or(|stem| stem != press.tag.as_str()) {
        let why = format!("The file holds the press {:?}; a press file bears the tag of its press.", press.tag);
        return Err(FileRefusal::of_field(path, "tag", why));
    }
    Ok((press, text))
}

/// Reads press files, in the order given; many of them on as many threads as the machine has processors.
fn read_all(paths: &[PathBuf]) -> Vec<Result<(Press, String), FileRefusal>> {
    let threads = std::thread::available_parallelism().map_or(1, usize::from);
    if paths.len() < FEW || threads < 2 {
        return paths.iter().map(|path| read_press(path)).collect();
    }
    let share = paths.len().div_ceil(threads);
    std::thread::scope(|scope| {
        let readers: Vec<_> = paths
            .chunks(share)
            .map(|paths| scope.spawn(move || paths.iter().map(|path| read_press(path)).collect::<Vec<_>>()))
            .collect();
        readers.into_iter().flat_map(|reader| reader.join().expect("reading a press file does not panic")).collect()
    })
}
