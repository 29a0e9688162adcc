//! Listens to what the libraries log, for two things they tell nowhere else: which renderer serves OpenGL, and that no file
//! dialog could be opened.

use std::sync::atomic::{AtomicBool, Ordering};
use std::sync::{Mutex, Once, PoisonError};

struct Listener;

static LISTENER: Listener = Listener;
static STARTED: Once = Once::new();
static GL_RENDERER: Mutex<Option<String>> = Mutex::new(None);
static DIALOG_FAILED: AtomicBool = AtomicBool::new(false);

/// Begins to listen; later calls do nothing.
pub(super) fn start() {
    STARTED.call_once(|| {
        // Somebody else may listen already, as in tests; then the two things stay unknown.
        if log::set_logger(&LISTENER).is_ok() {
            log::set_max_level(log::LevelFilter::Debug);
        }
    });
}

/// The renderer that serves OpenGL, where it has been told.
pub(super) fn gl_renderer() -> Option<String> {
    GL_RENDERER.lock().unwrap_or_else(PoisonError::into_inner).clone()
}

/// Whether a file dialog could not be opened since the last call.
pub fn dialog_failed() -> bool {
    DIALOG_FAILED.swap(false, Ordering::Relaxed)
}

impl log::Log for Listener {
    fn enabled(&self, metadata: &log::Metadata) -> bool {
        metadata.target().starts_with("egui_glow") || metadata.target().starts_with("rfd")
    }

    fn log(&self, record: &log::Record) {
        if record.target().starts_with("egui_glow") {
            let text = record.args().to_string();
            if let Some(name) = text.lines().find_map(|line| line.strip_prefix("opengl renderer: ")) {
                *GL_RENDERER.lock().unwrap_or_else(PoisonError::into_inner) = Some(name.to_owned());
            }
        } else if record.target().starts_with("rfd") && record.level() == log::Level::Error {
            DIALOG_FAILED.store(true, Ordering::Relaxed);
        }
    }

    fn flush(&self) {}
}
