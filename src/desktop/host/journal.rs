//! What libraries say only in their log.
//!
//! The OpenGL driver's name, the reason why OpenGL did not start, and the reason why a file dialog
//! did not open reach the program in no other way without `unsafe`. The journal keeps the last
//! error of each library and the driver's name, and nothing else; it prints nothing.

use std::collections::BTreeMap;
use std::sync::{Mutex, MutexGuard, PoisonError};

use log::{Level, LevelFilter, Log, Metadata, Record};

/// What has been heard so far.
struct Heard {
    opengl_driver: Option<String>,
    errors: BTreeMap<String, String>,
}

struct Journal {
    heard: Mutex<Heard>,
}

static JOURNAL: Journal = Journal { heard: Mutex::new(Heard { opengl_driver: None, errors: BTreeMap::new() }) };

/// The library that reports the driver's name, at level debug.
const OPENGL_LIBRARY: &str = "egui_glow";

/// Starts listening. [`super::run`] does this; calling it earlier or again does no harm. Where
/// another logger is already in place, nothing will be heard.
pub fn listen() {
    if log::set_logger(&JOURNAL).is_ok() {
        log::set_max_level(LevelFilter::Debug);
    }
}

/// Stops listening to anything but errors, when OpenGL has had its say.
pub(super) fn errors_only() {
    log::set_max_level(LevelFilter::Error);
}

/// Takes the last error a library reported, if it reported one since the last call. `library` is
/// the name of its crate, such as `rfd`.
pub fn take_error(library: &str) -> Option<String> {
    JOURNAL.heard().errors.remove(library)
}

/// The name the OpenGL driver gives itself.
pub(super) fn opengl_driver() -> Option<String> {
    JOURNAL.heard().opengl_driver.clone()
}

impl Journal {
    fn heard(&self) -> MutexGuard<'_, Heard> {
        // Every change is a single assignment, so a panic elsewhere leaves nothing half done.
        self.heard.lock().unwrap_or_else(PoisonError::into_inner)
    }
}

impl Log for Journal {
    fn enabled(&self, metadata: &Metadata<'_>) -> bool {
        metadata.level() == Level::Error || library(metadata.target()) == OPENGL_LIBRARY
    }

    fn log(&self, record: &Record<'_>) {
        if !self.enabled(record.metadata()) {
            return;
        }
        let text = record.args().to_string();
        if record.level() == Level::Error {
            let library = library(record.target()).to_owned();
            self.heard().errors.insert(library, text);
        } else if let Some(driver) = driver_name(&text) {
            self.heard().opengl_driver = Some(driver.to_owned());
        }
    }

    fn flush(&self) {}
}

fn library(target: &str) -> &str {
    target.split("::").next().unwrap_or(target)
}

/// Finds the driver's name in the lines the OpenGL library writes about it.
fn driver_name(text: &str) -> Option<&str> {
    let name = |line: &'_ str| -> Option<usize> { line.find("opengl renderer: ") };
    let line = text.lines().find(|line| name(line) == Some(0))?;
    let name = line["opengl renderer: ".len()..].trim();
    (!name.is_empty()).then_some(name)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_driver_is_found_in_the_report_of_the_library() {
        // The form in which egui_glow 0.37.0 writes it.
        let report = "\nopengl version: 4.5 (Compatibility Profile) Mesa 22.3.6\n\
                      opengl renderer: llvmpipe (LLVM 15.0.6, 256 bits)\nopengl vendor: Mesa";
        assert_eq!(driver_name(report), Some("llvmpipe (LLVM 15.0.6, 256 bits)"));
        assert_eq!(driver_name("SRGB framebuffer Support: true"), None);
    }

    #[test]
    fn the_last_error_of_each_library_is_kept_until_taken() {
        let say = |level, target, text: &str| {
            let args = format_args!("{text}");
            let record = Record::builder().level(level).target(target).args(args).build();
            JOURNAL.log(&record);
        };
        say(Level::Error, "crate_a::part", "first");
        say(Level::Error, "crate_a", "second");
        say(Level::Error, "crate_b", "third");
        say(Level::Warn, "crate_c", "not kept");
        assert_eq!(take_error("crate_a").as_deref(), Some("second"));
        assert_eq!(take_error("crate_a"), None);
        assert_eq!(take_error("crate_b").as_deref(), Some("third"));
        assert_eq!(take_error("crate_c"), None);
    }
}
