//! The window drawn by the processor: egui's meshes go through the painter into the window's
//! pixels. Needs no graphics driver at all.

mod schedule;
mod window;

use std::time::Instant;

use eframe::UserEvent;
use egui::Context;
use egui_winit::accesskit_winit;
use winit::application::ApplicationHandler;
use winit::event::{StartCause, WindowEvent};
use winit::event_loop::{ActiveEventLoop, ControlFlow, EventLoop, EventLoopProxy};
use winit::platform::run_on_demand::EventLoopExtRunOnDemand as _;
use winit::window::WindowId;

use self::schedule::{Due, Schedule};
use self::window::{After, CpuWindow};
use super::error::explain_start;
use super::start::{self, Start};
use super::{HostError, Offer, Renderer, RendererReason, RendererReport, WindowOptions};

/// Opens the window and runs the offered app in it until it closes.
pub(super) fn run(
    event_loop: &mut EventLoop<UserEvent>,
    options: &WindowOptions,
    reason: RendererReason,
    offer: &Offer<'_>,
) -> Result<(), HostError> {
    let proxy = event_loop.create_proxy();
    let ended = start::attempt(|start| {
        let mut host = CpuHost {
            options,
            report: RendererReport { renderer: Renderer::Cpu, reason },
            offer,
            proxy,
            start,
            window: None,
            schedule: Schedule::default(),
            failure: None,
        };
        let ended = event_loop.run_app_on_demand(&mut host);
        (ended, host.failure)
    });
    match ended {
        Err(panic) => Err(explain_start(&panic)),
        Ok((_, Some(failure))) => Err(failure),
        Ok((Err(error), None)) => Err(HostError::Lost(error.to_string())),
        Ok((Ok(()), None)) => Ok(()),
    }
}

struct CpuHost<'a, 'r> {
    options: &'r WindowOptions,
    report: RendererReport,
    offer: &'r Offer<'a>,
    proxy: EventLoopProxy<UserEvent>,
    start: &'r Start,
    window: Option<CpuWindow<'a>>,
    schedule: Schedule,
    failure: Option<HostError>,
}

impl CpuHost<'_, '_> {
    fn open(&mut self, event_loop: &ActiveEventLoop) -> Result<(), HostError> {
        let ctx = Context::default();
        // As many passes as the OpenGL window allows for one frame, so both lay out the same.
        ctx.options_mut(|options| options.max_passes = std::num::NonZeroUsize::MIN.saturating_add(1));
        let proxy = self.proxy.clone();
        ctx.set_request_repaint_callback(move |request| {
            let event = UserEvent::RequestRepaint {
                viewport_id: request.viewport_id,
                when: Instant::now() + request.delay,
                cumulative_pass_nr: request.current_cumulative_pass_nr,
            };
            // The loop is gone only when the window is, and then nothing needs a repaint.
            _ = proxy.send_event(event);
        });
        let frame = window::Frame::open(&ctx, event_loop, self.options, self.proxy.clone())?;
        if let Some(make) = self.offer.take() {
            self.start.done();
            let app = make(&ctx, &self.report);
            self.window = Some(CpuWindow::new(frame, app));
        }
        Ok(())
    }

    fn paint(&mut self, event_loop: &ActiveEventLoop) {
        self.schedule.redraw_granted();
        if let Some(window) = &mut self.window {
            let after = window.paint(event_loop);
            self.go_on(event_loop, after);
        }
    }

    fn go_on(&mut self, event_loop: &ActiveEventLoop, after: Result<After, HostError>) {
        match after {
            Ok(After::GoOn) => {}
            Ok(After::Retry(when)) => self.schedule.repaint_at(when),
            Ok(After::Close) => event_loop.exit(),
            Err(failure) => {
                self.failure = Some(failure);
                event_loop.exit();
            }
        }
    }

    /// Does what is due, and says when to wake up next.
    fn serve(&mut self, event_loop: &ActiveEventLoop) {
        let now = Instant::now();
        while let Some(window) = &mut self.window
            && let Some(due) = self.schedule.take_due(now, || window.is_hidden())
        {
            match due {
                Due::Redraw => window.request_redraw(),
                Due::LogicOnly => {
                    let after = window.run_logic_only(event_loop);
                    self.go_on(event_loop, after);
                }
            }
        }
        event_loop.set_control_flow(match self.schedule.next() {
            Some(when) => ControlFlow::WaitUntil(when),
            None => ControlFlow::Wait,
        });
    }

    fn repaint_soon(&mut self) {
        self.schedule.repaint_at(Instant::now());
    }

    fn on_accesskit(&mut self, event_loop: &ActiveEventLoop, event: accesskit_winit::WindowEvent) {
        let Some(window) = &mut self.window else {
            return;
        };
        match event {
            // The screen reader waits with a stand-in until the first tree comes.
            accesskit_winit::WindowEvent::InitialTreeRequested => {
                window.context().enable_accesskit();
                self.paint(event_loop);
            }
            accesskit_winit::WindowEvent::ActionRequested(request) => {
                window.on_accesskit_action(request);
                self.repaint_soon();
            }
            accesskit_winit::WindowEvent::AccessibilityDeactivated => {
                window.context().disable_accesskit();
            }
        }
    }
}

impl ApplicationHandler<UserEvent> for CpuHost<'_, '_> {
    fn resumed(&mut self, event_loop: &ActiveEventLoop) {
        if self.window.is_none()
            && let Err(failure) = self.open(event_loop)
        {
            self.failure = Some(failure);
            event_loop.exit();
            return;
        }
        self.paint(event_loop);
        self.serve(event_loop);
    }

    fn new_events(&mut self, event_loop: &ActiveEventLoop, _: StartCause) {
        self.serve(event_loop);
    }

    fn user_event(&mut self, event_loop: &ActiveEventLoop, event: UserEvent) {
        match event {
            UserEvent::RequestRepaint { when, cumulative_pass_nr, viewport_id } => {
                if let Some(window) = &self.window {
                    // A pass that has run since has answered the request already.
                    let pass = window.context().cumulative_pass_nr_for(viewport_id);
                    if pass == cumulative_pass_nr || pass == cumulative_pass_nr + 1 {
                        self.schedule.repaint_at(when);
                        if window.is_hidden() {
                            self.schedule.hold_back(Instant::now());
                        }
                    }
                }
            }
            UserEvent::AccessKitActionRequest(event) => {
                self.on_accesskit(event_loop, event.window_event);
            }
        }
        self.serve(event_loop);
    }

    fn window_event(&mut self, event_loop: &ActiveEventLoop, id: WindowId, event: WindowEvent) {
        // The window of an attempt with OpenGL may still have its last events on the way.
        let Some(window) = self.window.as_mut().filter(|window| window.id() == id) else {
            return;
        };
        match &event {
            WindowEvent::RedrawRequested => self.paint(event_loop),
            // While the window is held here, only somebody else can have destroyed it.
            WindowEvent::Destroyed => {
                self.failure = Some(HostError::destroyed());
                self.window = None;
                event_loop.exit();
            }
            // Windows shows a resized window only when it is drawn before this returns.
            WindowEvent::Resized(size) if cfg!(target_os = "windows") && size.width > 0 && size.height > 0 => {
                window.on_event(&event);
                self.paint(event_loop);
            }
            _ => {
                if window.on_event(&event) {
                    self.repaint_soon();
                }
            }
        }
        self.serve(event_loop);
    }

    fn exiting(&mut self, _: &ActiveEventLoop) {
        // The window belongs to this connection and goes before it.
        self.window = None;
    }
}
