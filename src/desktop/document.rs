//! What is open: one plant with its presses. It is saved, printed and undone, and knows nothing of the window.

use std::path::PathBuf;
use std::sync::Arc;

use calc::plant_settings::PlantSettings;
use calc::press::{Press, check_tag};
use calc::refusal::Refusal;

/// One plant with its presses. Presses are shared between a document and its earlier states, so that a state is cheap to keep.
#[derive(Clone, PartialEq, Debug)]
pub struct Document {
    /// The plant folder; `None` until the plant has one.
    pub folder: Option<PathBuf>,
    /// What holds for the whole plant.
    pub settings: PlantSettings,
    /// The presses that could be read, by tag.
    pub presses: Vec<Arc<Press>>,
    /// The press files that could not be read; they are listed and left untouched.
    pub unreadable: Vec<Unreadable>,
    /// Tags that were changed since the last save: as saved, and as they are now.
    pub renamed: Vec<(String, String)>,
}

/// A press file that could not be read.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Unreadable {
    /// The file.
    pub path: PathBuf,
    /// Why, in words, with line, column and field.
    pub why: String,
}

/// A change of the document. The label is what the menu offers to undo.
pub struct Change {
    /// "change stroke of P-07"
    pub label: String,
    /// What is done.
    pub act: Act,
}

/// What a change does.
pub enum Act {
    /// Changes one press.
    Press {
        /// Its tag before the change.
        tag: String,
        /// The change.
        edit: Box<dyn FnOnce(&mut Press)>,
    },
    /// Adds a press.
    AddPress(Box<Press>),
    /// Changes what holds for the whole plant.
    Plant(Box<dyn FnOnce(&mut PlantSettings)>),
}

impl Document {
    /// The press of this tag.
    pub fn press(&self, tag: &str) -> Option<&Arc<Press>> {
        self.presses.iter().find(|press| press.tag == tag)
    }

    /// The tag under which a press stands in the folder, where it bears another one now.
    pub fn saved_tag<'a>(&'a self, saved: &'a Self, press: &Press) -> Option<&'a str> {
        let was_saved = |tag: &&str| saved.press(tag).is_some();
        let is_free = |tag: &&str| was_saved(tag) && self.press(tag).is_none();
        let renamed = self.renamed.iter().find(|(_, now)| *now == press.tag).map(|(was, _)| was.as_str());
        // Undoing a change of tag after a save leaves no note of it; the press is then the same but for its tag.
        let same_but_for_tag = || {
            saved
                .presses
                .iter()
                .find(|old| Press { tag: press.tag.clone(), ..Press::clone(old) } == *press)
                .map(|old| old.tag.as_str())
        };
        renamed.filter(was_saved).or_else(|| same_but_for_tag().filter(is_free))
    }

    /// Carries out a change, whole or not at all.
    ///
    /// # Errors
    /// A tag that another press or an unreadable file bears, or that can be no file name.
    fn apply(&mut self, act: Act) -> Result<(), Refusal> {
        match act {
            Act::Press { tag, edit } => {
                let index = self.presses.iter().position(|press| press.tag == tag).ok_or_else(|| {
                    Refusal::new("Press", tag.as_str(), "one of the plant's presses", "Choose a press from the list.")
                })?;
                let mut press = Press::clone(&self.presses[index]);
                edit(&mut press);
                if press.tag != tag {
                    self.check_tag(&press.tag)?;
                    match self.renamed.iter_mut().find(|(_, now)| *now == tag) {
                        Some((_, now)) => now.clone_from(&press.tag),
                        None => self.renamed.push((tag, press.tag.clone())),
                    }
                }
                self.presses[index] = Arc::new(press);
            }
            Act::AddPress(press) => {
                self.check_tag(&press.tag)?;
                self.presses.push(Arc::new(*press));
            }
            Act::Plant(edit) => edit(&mut self.settings),
        }
        self.presses.sort_by(|one, other| one.tag.cmp(&other.tag));
        Ok(())
    }

    /// Checks that a new press can bear this tag.
    ///
    /// # Errors
    /// A tag that another press or an unreadable file bears, or that can be no file name.
    pub fn check_tag(&self, tag: &str) -> Result<(), Refusal> {
        check_tag(tag)?;
        let is_taken = self.presses.iter().any(|press| press.tag.eq_ignore_ascii_case(tag))
            || self
                .unreadable
                .iter()
                .any(|file| file.path.file_stem().is_some_and(|stem| stem.eq_ignore_ascii_case(tag)));
        if is_taken {
            return Err(Refusal::new(
                "Press tag",
                tag,
                "one that no other press of the plant bears",
                "Choose another tag.",
            ));
        }
        Ok(())
    }
}

/// A document with its earlier and undone states.
pub struct History {
    document: Document,
    revision: u64,
    saved: Document,
    undo: Vec<(String, Document)>,
    redo: Vec<(String, Document)>,
}

/// How many changes can be undone.
const MOST_UNDO: usize = 100;

impl History {
    /// A document as it was read.
    pub fn new(document: Document) -> Self {
        Self { saved: document.clone(), document, revision: 0, undo: Vec::new(), redo: Vec::new() }
    }

    /// The document as it is now.
    pub fn document(&self) -> &Document {
        &self.document
    }

    /// A number that grows with every change, undo and redo.
    pub fn revision(&self) -> u64 {
        self.revision
    }

    /// Whether there is anything to save.
    pub fn is_dirty(&self) -> bool {
        self.document != self.saved
    }

    /// The state that the folder holds.
    pub fn saved(&self) -> &Document {
        &self.saved
    }

    /// Takes note that the folder now holds the present state.
    pub fn mark_saved(&mut self, folder: PathBuf) {
        self.document.folder = Some(folder);
        self.document.renamed.clear();
        self.saved = self.document.clone();
        self.revision += 1;
    }

    /// Carries out a change, whole or not at all. A change that changes nothing leaves no trace.
    ///
    /// # Errors
    /// See [`Document`]; the document is as before.
    pub fn apply(&mut self, change: Change) -> Result<(), Refusal> {
        let mut next = self.document.clone();
        next.apply(change.act)?;
        if next == self.document {
            return Ok(());
        }
        let before = std::mem::replace(&mut self.document, next);
        self.undo.push((change.label, before));
        if self.undo.len() > MOST_UNDO {
            self.undo.remove(0);
        }
        self.redo.clear();
        self.revision += 1;
        Ok(())
    }

    /// What undo would take back.
    pub fn undo_label(&self) -> Option<&str> {
        self.undo.last().map(|(label, _)| label.as_str())
    }

    /// What redo would bring back.
    pub fn redo_label(&self) -> Option<&str> {
        self.redo.last().map(|(label, _)| label.as_str())
    }

    /// Takes the last change back.
    pub fn undo(&mut self) {
        if let Some((label, before)) = self.undo.pop() {
            let after = self.travel_to(before);
            self.redo.push((label, after));
        }
    }

    /// Brings the last undone change back.
    pub fn redo(&mut self) {
        if let Some((label, after)) = self.redo.pop() {
            let before = self.travel_to(after);
            self.undo.push((label, before));
        }
    }

    fn travel_to(&mut self, mut state: Document) -> Document {
        // The folder is where the plant lives, not part of what is undone.
        state.folder.clone_from(&self.document.folder);
        self.revision += 1;
        std::mem::replace(&mut self.document, state)
    }
}
