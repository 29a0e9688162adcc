//! Writing what has changed to the plant folder, and nothing else.

use std::path::Path;
use std::sync::Arc;

use calc::press::Press;
use plant::{Known, PlantRefusal};

use crate::document::{Document, History, Unreadable};

/// A plant that is open: its document with history, and its files as they were last read or written.
pub struct OpenPlant {
    /// The document with its earlier states.
    pub history: History,
    known: Known,
}

/// Opens a plant folder.
///
/// # Errors
/// See [`plant::open`].
pub fn open(folder: &Path) -> Result<OpenPlant, PlantRefusal> {
    let plant = plant::open(folder)?;
    let mut presses = Vec::new();
    let mut unreadable = Vec::new();
    for stored in plant.presses {
        match stored.content {
            Ok(press) => presses.push(Arc::new(press)),
            Err(refusal) => unreadable.push(Unreadable { path: stored.path, why: refusal.to_string() }),
        }
    }
    presses.sort_by(|one: &Arc<Press>, other| one.tag.cmp(&other.tag));
    let document =
        Document { folder: Some(plant.folder), settings: plant.settings, presses, unreadable, renamed: Vec::new() };
    Ok(OpenPlant { history: History::new(document), known: plant.known })
}

impl OpenPlant {
    /// Writes the presses and settings that have changed. Says what could not be done; what was written stays written.
    ///
    /// # Errors
    /// The refusals, one for each file that could not be written.
    pub fn save(&mut self) -> Result<(), Vec<PlantRefusal>> {
        let document = self.history.document().clone();
        let Some(folder) = document.folder.clone() else {
            return Err(vec![PlantRefusal::Folder("The plant has no folder yet. Choose one with New plant.".into())]);
        };
        let saved = self.history.saved().clone();
        let mut refusals = Vec::new();
        if document.settings != saved.settings
            && let Err(refusal) = plant::save_settings(&folder, &document.settings, &mut self.known)
        {
            refusals.push(refusal);
        }
        for press in &document.presses {
            let is_unchanged = saved.press(&press.tag).is_some_and(|old| Arc::ptr_eq(old, press) || old == press);
            if is_unchanged {
                continue;
            }
            let previous = document.saved_tag(&saved, press);
            if let Err(refusal) = plant::save_press(&folder, press, previous, &mut self.known) {
                refusals.push(refusal);
            }
        }
        if refusals.is_empty() {
            self.history.mark_saved(folder);
            Ok(())
        } else {
            Err(refusals)
        }
    }
}
