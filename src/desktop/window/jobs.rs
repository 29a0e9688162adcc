//! What goes on beside the frames: file dialogs in a thread of their own, and commands that wait for a field to be left.

use std::path::PathBuf;
use std::sync::mpsc::{Receiver, TryRecvError, channel};
use std::time::{Duration, Instant};

use super::commands::Command;

/// A dialog that ends sooner than a person can act was not opened at all.
const TOO_QUICK: Duration = Duration::from_millis(200);

/// What goes on beside the frames.
#[derive(Default)]
pub struct Jobs {
    picking: Option<(Receiver<Option<PathBuf>>, Instant)>,
    has_failed: bool,
    /// Commands that wait until the field with the cursor has committed, each with that field.
    pub later: Vec<(Command, egui::Id)>,
    waited: bool,
    /// Whether the window is closing for good.
    pub is_closing: bool,
    has_asked_to_close: bool,
}

impl Jobs {
    /// Opens the system's folder dialog in a thread; the window goes on meanwhile.
    pub fn pick_folder(&mut self, context: &egui::Context) {
        if self.picking.is_some() {
            return;
        }
        let (sender, receiver) = channel();
        let context = context.clone();
        let picker = std::thread::Builder::new().name("folder dialog".into()).spawn(move || {
            let folder = rfd::FileDialog::new().pick_folder();
            // The window may be gone by now; then nobody wants the answer.
            let _ = sender.send(folder);
            context.request_repaint();
        });
        match picker {
            Ok(_) => self.picking = Some((receiver, Instant::now())),
            Err(_) => self.has_failed = true,
        }
    }

    /// The folder that was picked since the last call.
    pub fn picked_folder(&mut self) -> Option<PathBuf> {
        let (receiver, began) = self.picking.as_ref()?;
        let answer = match receiver.try_recv() {
            Err(TryRecvError::Empty) => return None,
            Err(TryRecvError::Disconnected) => None,
            Ok(answer) => answer,
        };
        if answer.is_none() && (crate::host::journal::take_error("rfd").is_some() || began.elapsed() < TOO_QUICK) {
            self.has_failed = true;
        }
        self.picking = None;
        answer
    }

    /// Whether a dialog could not be opened since the last call.
    pub fn dialog_failed(&mut self) -> bool {
        std::mem::take(&mut self.has_failed)
    }

    /// Whether the host is to be asked to close the window; once is enough.
    pub fn asks_to_close(&mut self) -> bool {
        self.is_closing && !std::mem::replace(&mut self.has_asked_to_close, true)
    }

    /// Whether commands were put off in this very frame, in which the field has not been drawn yet.
    pub fn has_new_later(&mut self) -> bool {
        let is_new = !self.later.is_empty() && !self.waited;
        self.waited = is_new;
        is_new
    }
}
