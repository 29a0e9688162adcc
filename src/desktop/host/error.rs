//! Why a window could not be opened or kept, in a sentence the user can act on.

use std::fmt;

/// Why there is no window.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum HostError {
    /// There is no display to open a window on, for this reason.
    NoDisplay(String),
    /// A library of the window system is not installed.
    MissingLibrary {
        /// Its file name, such as `libX11.so.6`.
        file: String,
        /// The Debian package that holds it.
        package: &'static str,
    },
    /// OpenGL was asked for and could not be started, for this reason, if one is known.
    NoOpenGl(Option<String>),
    /// The window could not be opened, for this reason.
    NotOpened(String),
    /// The window was open and its connection to screen or graphics card failed.
    Lost(String),
}

impl fmt::Display for HostError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NoDisplay(reason) => write!(f, "There is no display: {reason}."),
            Self::MissingLibrary { file, package } => write!(
                f,
                "The window needs the library {file}, which is not installed. \
                 On Debian and Ubuntu it is in the package {package}."
            ),
            Self::NoOpenGl(reason) => {
                f.write_str("OpenGL could not be started")?;
                if let Some(reason) = reason {
                    write!(f, " ({reason})")?;
                }
                f.write_str(". With --renderer cpu the window is drawn without it.")
            }
            Self::NotOpened(reason) => write!(f, "The window could not be opened: {reason}."),
            Self::Lost(reason) => write!(f, "The window was lost: {reason}."),
        }
    }
}

impl std::error::Error for HostError {}

impl HostError {
    /// The window went without having been closed.
    pub(super) fn destroyed() -> Self {
        Self::Lost("another program destroyed it".to_owned())
    }
}

/// Libraries the window system is loaded from at run time, and the Debian packages they are in.
/// A name that begins like another one stands before it.
const LIBRARIES: [(&str, &str); 9] = [
    ("libX11-xcb.so", "libx11-xcb1"),
    ("libX11.so", "libx11-6"),
    ("libXcursor.so", "libxcursor1"),
    ("libXi.so", "libxi6"),
    ("libxkbcommon-x11.so", "libxkbcommon-x11-0"),
    ("libxkbcommon.so", "libxkbcommon0"),
    ("libwayland-client.so", "libwayland-client0"),
    ("libwayland-cursor.so", "libwayland-cursor0"),
    ("libwayland-egl.so", "libwayland-egl1"),
];

/// Makes a sentence out of what the window library reports when it cannot start.
///
/// Its errors carry the cause only in their debug text, and one missing library shows up as a
/// panic, so the text is searched.
pub(super) fn explain_start(report: &str) -> HostError {
    let missing = LIBRARIES.iter().find_map(|(stem, package)| Some((report.find(stem)?, *package)));
    if let Some((start, package)) = missing {
        let file: String =
            report[start..].chars().take_while(|c| c.is_ascii_alphanumeric() || "-._".contains(*c)).collect();
        return HostError::MissingLibrary { file: file.trim_end_matches('.').to_owned(), package };
    }
    if report.contains("XOpenDisplayFailed") {
        return HostError::NoDisplay("the X server that DISPLAY names does not answer".to_owned());
    }
    if report.contains("NoCompositor") {
        let reason = "the Wayland compositor that WAYLAND_DISPLAY names does not answer";
        return HostError::NoDisplay(reason.to_owned());
    }
    HostError::NotOpened(report.trim_end_matches('.').to_owned())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_missing_library_is_named_with_its_package() {
        // Texts as x11-dl, xkbcommon-dl and winit give them.
        let cases = [
            (
                "Os(OsError { line: 786, error: XNotSupported(LibraryOpenError(OpenError { kind: \
                 Library, detail: \"opening library failed (libX11.so.6: cannot open shared \
                 object file: No such file or directory)\" })) })",
                "libX11.so.6",
                "libx11-6",
            ),
            (
                "opening library failed (libX11-xcb.so.1: cannot open shared object file)",
                "libX11-xcb.so.1",
                "libx11-xcb1",
            ),
            ("Library libxkbcommon-x11.so could not be loaded.", "libxkbcommon-x11.so", "libxkbcommon-x11-0"),
            ("opening library failed (libXi.so: cannot open shared object file)", "libXi.so", "libxi6"),
        ];
        for (report, file, package) in cases {
            let want = HostError::MissingLibrary { file: file.to_owned(), package };
            assert_eq!(explain_start(report), want);
        }
    }

    #[test]
    fn a_dead_display_is_no_display() {
        let error = explain_start("Os(OsError { error: XNotSupported(XOpenDisplayFailed) })");
        assert_eq!(error.to_string(), "There is no display: the X server that DISPLAY names does not answer.");
        let error = explain_start("Os(OsError { error: WaylandError(Connection(NoCompositor)) })");
        assert!(matches!(error, HostError::NoDisplay(_)), "{error}");
    }

    #[test]
    fn other_reports_are_passed_on() {
        assert_eq!(explain_start("the moon is full.").to_string(), "The window could not be opened: the moon is full.");
    }
}
