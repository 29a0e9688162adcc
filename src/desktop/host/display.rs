//! The connection to the window system.
//!
//! On Linux there are two, Wayland and X11. The window library takes Wayland whenever
//! `WAYLAND_DISPLAY` is set and gives up if nobody answers there, although an X server may be
//! waiting. It also allows one attempt in a process. So the choice is made beforehand, by asking.

use eframe::UserEvent;
use winit::event_loop::EventLoop;

use super::error::{HostError, explain_start};
use super::start;

/// Connects to the window system.
pub(super) fn connect() -> Result<EventLoop<UserEvent>, HostError> {
    let mut builder = EventLoop::<UserEvent>::with_user_event();
    #[cfg(target_os = "linux")]
    linux::settle(&mut builder)?;
    let built = start::attempt(|_| builder.build());
    match built {
        Ok(Ok(event_loop)) => Ok(event_loop),
        Ok(Err(error)) => Err(explain_start(&format!("{error:?}"))),
        Err(panic) => Err(explain_start(&panic)),
    }
}

#[cfg(target_os = "linux")]
mod linux {
    use std::env;
    use std::ffi::OsString;
    use std::os::unix::net::UnixStream;
    use std::path::{Path, PathBuf};

    use eframe::UserEvent;
    use winit::event_loop::EventLoopBuilder;
    use winit::platform::wayland::EventLoopBuilderExtWayland as _;
    use winit::platform::x11::EventLoopBuilderExtX11 as _;

    use super::HostError;

    #[derive(Clone, Copy, Debug, PartialEq, Eq)]
    pub(super) enum WindowSystem {
        Wayland,
        X11,
    }

    pub(super) fn settle(builder: &mut EventLoopBuilder<UserEvent>) -> Result<(), HostError> {
        let answers = |socket: &Path| UnixStream::connect(socket).is_ok();
        match choose(|name| env::var_os(name), answers)? {
            WindowSystem::Wayland => builder.with_wayland(),
            WindowSystem::X11 => builder.with_x11(),
        };
        Ok(())
    }

    /// Chooses by the variables of the environment and by whether anybody answers at the socket of
    /// the Wayland compositor. Empty variables count as not set.
    pub(super) fn choose(
        variable: impl Fn(&str) -> Option<OsString>,
        answers: impl Fn(&Path) -> bool,
    ) -> Result<WindowSystem, HostError> {
        let set = |name| variable(name).filter(|value| !value.is_empty());
        // A compositor that starts the program itself hands over an open connection.
        if set("WAYLAND_SOCKET").is_some() {
            return Ok(WindowSystem::Wayland);
        }
        let x11 = set("DISPLAY").is_some();
        let Some(name) = set("WAYLAND_DISPLAY") else {
            return if x11 {
                Ok(WindowSystem::X11)
            } else {
                Err(HostError::NoDisplay("neither WAYLAND_DISPLAY nor DISPLAY is set".to_owned()))
            };
        };
        // A relative name lies in the runtime folder of the user (wl_display_connect(3)).
        let folder = set("XDG_RUNTIME_DIR").map(PathBuf::from);
        let socket = match folder {
            Some(folder) => Some(folder.join(&name)),
            None => Some(PathBuf::from(&name)).filter(|path| path.is_absolute()),
        };
        if socket.is_some_and(|socket| answers(&socket)) {
            Ok(WindowSystem::Wayland)
        } else if x11 {
            Ok(WindowSystem::X11)
        } else {
            Err(HostError::NoDisplay(format!(
                "nobody answers at WAYLAND_DISPLAY={}, and DISPLAY is not set",
                name.display()
            )))
        }
    }

    #[cfg(test)]
    mod tests {
        use super::*;

        fn chosen(variables: &[(&str, &str)], alive: Option<&str>) -> Result<WindowSystem, HostError> {
            let variable = |name: &str| {
                let found = variables.iter().find(|(key, _)| *key == name);
                found.map(|(_, value)| OsString::from(value))
            };
            choose(variable, |socket| Some(socket) == alive.map(Path::new))
        }

        #[test]
        fn wayland_is_taken_when_somebody_answers() {
            let runtime = ("XDG_RUNTIME_DIR", "/run/user/7");
            let wayland = ("WAYLAND_DISPLAY", "wayland-1");
            let socket = Some("/run/user/7/wayland-1");
            let x = ("DISPLAY", ":0");
            assert_eq!(chosen(&[runtime, wayland, x], socket), Ok(WindowSystem::Wayland));
            assert_eq!(chosen(&[runtime, wayland], socket), Ok(WindowSystem::Wayland));
            let absolute = ("WAYLAND_DISPLAY", "/tmp/w");
            assert_eq!(chosen(&[absolute], Some("/tmp/w")), Ok(WindowSystem::Wayland));
            assert_eq!(chosen(&[runtime, absolute], Some("/tmp/w")), Ok(WindowSystem::Wayland));
            assert_eq!(chosen(&[("WAYLAND_SOCKET", "4")], None), Ok(WindowSystem::Wayland));
        }

        #[test]
        fn x11_is_taken_when_wayland_is_dead_or_not_set() {
            let runtime = ("XDG_RUNTIME_DIR", "/run/user/7");
            let dead = ("WAYLAND_DISPLAY", "wayland-1");
            let x = ("DISPLAY", ":0");
            assert_eq!(chosen(&[runtime, dead, x], None), Ok(WindowSystem::X11));
            assert_eq!(chosen(&[dead, x], Some("wayland-1")), Ok(WindowSystem::X11));
            assert_eq!(chosen(&[x], None), Ok(WindowSystem::X11));
            assert_eq!(chosen(&[("WAYLAND_DISPLAY", ""), x], None), Ok(WindowSystem::X11));
        }

        #[test]
        fn without_a_display_the_reason_is_named() {
            let text = |variables: &[_]| chosen(variables, None).map_err(|error| error.to_string());
            let unset = "There is no display: neither WAYLAND_DISPLAY nor DISPLAY is set.";
            assert_eq!(text(&[]), Err(unset.to_owned()));
            assert_eq!(text(&[("DISPLAY", "")]), Err(unset.to_owned()));
            let dead = "There is no display: nobody answers at WAYLAND_DISPLAY=wayland-1, \
                        and DISPLAY is not set.";
            let variables = [("WAYLAND_DISPLAY", "wayland-1"), ("XDG_RUNTIME_DIR", "/run")];
            assert_eq!(text(&variables), Err(dead.to_owned()));
        }
    }
}
