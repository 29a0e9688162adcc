//! Watches the OpenGL library's window, for what the library does not expect.

use std::cell::Cell;
use std::rc::Rc;

use eframe::{EframeWinitApplication, UserEvent};
use winit::application::ApplicationHandler;
use winit::event::{DeviceEvent, DeviceId, StartCause, WindowEvent};
use winit::event_loop::ActiveEventLoop;
use winit::window::WindowId;

/// The library, with its events passing through.
///
/// When another program destroys the window the library would go on to ask about it, and panic.
pub(super) struct Watch<'a> {
    library: EframeWinitApplication<'a>,
    /// Whether the app is alive. It is dropped when the window is closed the usual way.
    running: Rc<Cell<bool>>,
    destroyed: bool,
}

impl<'a> Watch<'a> {
    pub(super) fn new(library: EframeWinitApplication<'a>, running: Rc<Cell<bool>>) -> Self {
        Self { library, running, destroyed: false }
    }

    /// Whether the window was destroyed under the running app.
    pub(super) fn destroyed(&self) -> bool {
        self.destroyed
    }
}

impl ApplicationHandler<UserEvent> for Watch<'_> {
    fn resumed(&mut self, event_loop: &ActiveEventLoop) {
        self.library.resumed(event_loop);
    }

    fn window_event(&mut self, event_loop: &ActiveEventLoop, id: WindowId, event: WindowEvent) {
        if self.running.get() && matches!(event, WindowEvent::Destroyed) {
            self.destroyed = true;
            event_loop.exit();
        }
        if !self.destroyed {
            self.library.window_event(event_loop, id, event);
        }
    }

    fn new_events(&mut self, event_loop: &ActiveEventLoop, cause: StartCause) {
        if !self.destroyed {
            self.library.new_events(event_loop, cause);
        }
    }

    fn user_event(&mut self, event_loop: &ActiveEventLoop, event: UserEvent) {
        if !self.destroyed {
            self.library.user_event(event_loop, event);
        }
    }

    fn device_event(&mut self, event_loop: &ActiveEventLoop, id: DeviceId, event: DeviceEvent) {
        if !self.destroyed {
            self.library.device_event(event_loop, id, event);
        }
    }

    fn about_to_wait(&mut self, event_loop: &ActiveEventLoop) {
        self.library.about_to_wait(event_loop);
    }

    fn suspended(&mut self, event_loop: &ActiveEventLoop) {
        self.library.suspended(event_loop);
    }

    fn exiting(&mut self, event_loop: &ActiveEventLoop) {
        self.library.exiting(event_loop);
    }

    fn memory_warning(&mut self, event_loop: &ActiveEventLoop) {
        self.library.memory_warning(event_loop);
    }
}
