//! Why a window cannot be opened, in words that help.

use std::any::Any;
use std::fmt;
use std::panic::{AssertUnwindSafe, catch_unwind, set_hook, take_hook};

/// Why a window cannot be opened.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum HostError {
    /// There is no screen to open it on.
    NoDisplay(String),
    /// A library of the window system is missing.
    MissingLibrary {
        /// Its file.
        file: String,
        /// The Debian package that brings it.
        package: &'static str,
    },
    /// OpenGL was asked for and cannot be had.
    NoGl(String),
    /// Anything else.
    Other(String),
}

impl fmt::Display for HostError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NoDisplay(why) => write!(f, "There is no display to open a window on ({why})."),
            Self::MissingLibrary { file, package } => {
                write!(
                    f,
                    "The library {file} is missing, which the window needs. Install it; on Debian: apt-get install {package}."
                )
            }
            Self::NoGl(why) => write!(f, "OpenGL was asked for and is not to be had: {why}. Try --renderer cpu."),
            Self::Other(why) => write!(f, "The window cannot be opened: {why}."),
        }
    }
}

impl std::error::Error for HostError {}

/// The libraries that the window system is loaded from at run time, longest names first, with their Debian packages.
const LIBRARIES: [(&str, &str); 9] = [
    ("libX11-xcb", "libx11-xcb1"),
    ("libxkbcommon-x11", "libxkbcommon-x11-0"),
    ("libxkbcommon", "libxkbcommon0"),
    ("libXcursor", "libxcursor1"),
    ("libXrender", "libxrender1"),
    ("libX11", "libx11-6"),
    ("libXext", "libxext6"),
    ("libXi", "libxi6"),
    ("libxcb", "libxcb1"),
];

impl HostError {
    /// Reads the error of the window library, whose kinds are fewer than its causes.
    pub(super) fn from_words(words: &str) -> Self {
        if let Some((name, package)) = LIBRARIES.iter().find(|(name, _)| words.contains(&format!("{name}.so"))) {
            return Self::MissingLibrary { file: format!("{name}.so"), package };
        }
        let says_no_display =
            ["neither WAYLAND_DISPLAY", "XOpenDisplayFailed", "NoCompositor", "could not find wayland compositor"];
        if says_no_display.iter().any(|sign| words.contains(sign))
            || words.contains("display") && words.contains("open")
        {
            return Self::NoDisplay(first_line(words));
        }
        Self::Other(first_line(words))
    }
}

fn first_line(words: &str) -> String {
    words.lines().next().unwrap_or_default().trim_end_matches('.').to_owned()
}

/// Runs `start`; a panic of the window library (it panics where one library is missing) becomes an error in words.
///
/// A panic of our own while the window runs is passed on with its message.
pub(super) fn without_panic<T>(start: impl FnOnce() -> Result<T, HostError>) -> Result<T, HostError> {
    let usual = take_hook();
    set_hook(Box::new(move |panic| {
        if !names_a_library(&text_of(panic.payload())) {
            usual(panic);
        }
    }));
    let outcome = catch_unwind(AssertUnwindSafe(start));
    let _ = take_hook();
    outcome.unwrap_or_else(|payload| {
        let words = text_of(payload.as_ref());
        if names_a_library(&words) { Err(HostError::from_words(&words)) } else { std::panic::resume_unwind(payload) }
    })
}

fn names_a_library(words: &str) -> bool {
    LIBRARIES.iter().any(|(name, _)| words.contains(&format!("{name}.so")))
}

fn text_of(payload: &dyn Any) -> String {
    payload
        .downcast_ref::<&str>()
        .map(|text| (*text).to_owned())
        .or_else(|| payload.downcast_ref::<String>().cloned())
        .unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_words_of_the_window_library_become_help() {
        let words = "XNotSupported(LibraryOpenError(OpenError { kind: Library, detail: \"libXi.so.6: cannot open shared object file\" }))";
        let missing = HostError::from_words(words);
        assert!(missing.to_string().contains("apt-get install libxi6"), "{missing}");
        let none = "neither WAYLAND_DISPLAY nor WAYLAND_SOCKET nor DISPLAY is set.";
        assert!(matches!(HostError::from_words(none), HostError::NoDisplay(_)));
    }

    #[test]
    fn a_panic_about_a_library_is_an_error_and_nothing_is_printed() {
        let panics = || -> Result<(), HostError> { panic!("Library libxkbcommon-x11.so could not be loaded.") };
        let error = without_panic(panics).unwrap_err();
        assert!(error.to_string().contains("libxkbcommon-x11-0"), "{error}");
    }
}
