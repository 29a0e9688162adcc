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
        for press in in_free_order(&document, &saved) {
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

/// The presses that have changed, in an order in which each finds its file free: where tags were passed on from press to press,
/// the one that moves to a new tag goes first.
fn in_free_order<'a>(document: &'a Document, saved: &Document) -> Vec<&'a Arc<Press>> {
    let is_unchanged =
        |press: &Arc<Press>| saved.press(&press.tag).is_some_and(|old| Arc::ptr_eq(old, press) || old == press);
    let mut pending: Vec<&Arc<Press>> = document.presses.iter().filter(|press| !is_unchanged(press)).collect();
    let mut taken: Vec<&str> = saved.presses.iter().map(|press| press.tag.as_str()).collect();
    let mut ordered = Vec::new();
    while !pending.is_empty() {
        let is_ready = |press: &&Arc<Press>| {
            let own = document.saved_tag(saved, press).unwrap_or(&press.tag);
            own == press.tag || !taken.contains(&press.tag.as_str())
        };
        // A ring of tags has no free end; the save of the first then says what stands in its way.
        let next = pending.iter().position(is_ready).unwrap_or(0);
        let press = pending.remove(next);
        taken.retain(|tag| Some(*tag) != document.saved_tag(saved, press));
        ordered.push(press);
    }
    ordered
}
