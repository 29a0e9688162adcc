//! The one event loop of the process.

use eframe::UserEvent;
use winit::event_loop::EventLoop;

use super::HostError;

/// Builds the event loop. Where a Wayland display is named but nobody answers there, X11 is taken.
pub(super) fn build() -> Result<EventLoop<UserEvent>, HostError> {
    let mut builder = EventLoop::<UserEvent>::with_user_event();
    #[cfg(target_os = "linux")]
    if std::env::var_os("DISPLAY").is_some() && !wayland_answers() {
        use winit::platform::x11::EventLoopBuilderExtX11;
        builder.with_x11();
    }
    builder.build().map_err(|error| HostError::from_words(&format!("{error} {error:?}")))
}

#[cfg(target_os = "linux")]
fn wayland_answers() -> bool {
    use std::os::unix::net::UnixStream;
    use std::path::PathBuf;
    if std::env::var_os("WAYLAND_SOCKET").is_some() {
        return true;
    }
    let Some(name) = std::env::var_os("WAYLAND_DISPLAY") else { return false };
    let folder = std::env::var_os("XDG_RUNTIME_DIR").map(PathBuf::from).unwrap_or_default();
    UnixStream::connect(folder.join(name)).is_ok()
}
