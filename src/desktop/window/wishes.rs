//! What a view asks for. Views read the document and push wishes; the window carries them out after the views are drawn.

use std::path::PathBuf;

use calc::plant_settings::PlantSettings;
use calc::press::Press;
use calc::units::LengthUnit;

use super::sheets::Sheet;
use crate::document::{Act, Change};

/// One thing a view asks for.
pub enum Wish {
    /// Change the document.
    Change(Change),
    /// Take the last change back.
    Undo,
    /// Bring the last undone change back.
    Redo,
    /// Write what has changed to the plant folder.
    Save,
    /// Ask where a new plant shall live.
    NewPlant,
    /// Ask which plant to open.
    OpenPlant,
    /// Open the plant in this folder.
    OpenFolder(PathBuf),
    /// Add a press.
    NewPress,
    /// Show every press in one table.
    ShowOverview,
    /// Show this press.
    ShowPress(String),
    /// Show this safeguard of the shown press, by its place.
    ShowSafeguard(usize),
    /// Show this sheet.
    ShowSheet(Sheet),
    /// Print the record of the shown press to a file.
    PrintRecord,
    /// Print a list of what is due to a file.
    PrintRoundList(Box<record::Record>, PathBuf),
    /// Write a text to a file.
    WriteFile(PathBuf, String),
    /// List presses by tag, or gravest first.
    SortByTag(bool),
    /// Ask what holds for the plant.
    EditPlant,
    /// Say something at the foot of the window.
    Tell(String),
    /// Show lengths in this unit.
    ShowIn(LengthUnit),
    /// Change between light and dark.
    SetDark(bool),
}

/// The wishes of one frame, first in, first out.
#[derive(Default)]
pub struct Wishes(pub Vec<Wish>);

impl Wishes {
    /// Asks for something.
    pub fn push(&mut self, wish: Wish) {
        self.0.push(wish);
    }

    /// Asks for a change of one press. The label completes "Undo: ...".
    pub fn edit_press(&mut self, press: &Press, label: impl Into<String>, edit: impl FnOnce(&mut Press) + 'static) {
        let label = format!("{} of {}", label.into(), press.tag);
        self.push(Wish::Change(Change { label, act: Act::Press { tag: press.tag.clone(), edit: Box::new(edit) } }));
    }

    /// Asks for a change of the plant.
    pub fn edit_plant(&mut self, label: impl Into<String>, edit: impl FnOnce(&mut PlantSettings) + 'static) {
        self.push(Wish::Change(Change { label: label.into(), act: Act::Plant(Box::new(edit)) }));
    }
}
