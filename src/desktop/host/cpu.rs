//! The window that paints on the CPU: egui-winit for what comes in, our painter and softbuffer for what goes out.

use std::num::NonZeroU32;
use std::sync::Arc;
use std::time::Instant;

use eframe::UserEvent;
use egui::{ViewportCommand, ViewportEvent, ViewportId, ViewportInfo};
use painter::Painter;
use winit::application::ApplicationHandler;
use winit::event::{StartCause, WindowEvent};
use winit::event_loop::{ActiveEventLoop, ControlFlow, EventLoop, EventLoopProxy, OwnedDisplayHandle};
use winit::platform::run_on_demand::EventLoopExtRunOnDemand;
use winit::window::{Window, WindowId};

use super::{HostError, MakeApp, Renderer, WindowApp, listener, viewport};

/// Widest font atlas; the painter itself knows no limit.
const TEXTURE_SIDE: usize = 4096;

/// Runs the window on the CPU until it is closed.
pub(super) fn run<'a>(
    event_loop: &mut EventLoop<UserEvent>,
    title: &str,
    renderer: Renderer,
    make_app: MakeApp<'a>,
) -> Result<(), HostError> {
    listener::start();
    let mut window = CpuWindow {
        title: title.to_owned(),
        renderer,
        make_app: Some(make_app),
        proxy: event_loop.create_proxy(),
        shown: None,
        repaint_at: None,
        error: None,
    };
    event_loop.run_app_on_demand(&mut window).map_err(|error| HostError::from_words(&error.to_string()))?;
    window.error.map_or(Ok(()), Err)
}

struct CpuWindow<'a> {
    title: String,
    renderer: Renderer,
    make_app: Option<MakeApp<'a>>,
    proxy: EventLoopProxy<UserEvent>,
    shown: Option<Shown<'a>>,
    repaint_at: Option<Instant>,
    error: Option<HostError>,
}

struct Shown<'a> {
    window: Arc<Window>,
    surface: softbuffer::Surface<OwnedDisplayHandle, Arc<Window>>,
    context: egui::Context,
    input: egui_winit::State,
    info: ViewportInfo,
    painter: Painter,
    app: Box<dyn WindowApp + 'a>,
    is_first_frame: bool,
}

impl ApplicationHandler<UserEvent> for CpuWindow<'_> {
    fn resumed(&mut self, event_loop: &ActiveEventLoop) {
        if self.shown.is_some() {
            return;
        }
        match self.open(event_loop) {
            Ok(()) => {}
            Err(error) => {
                self.error = Some(error);
                event_loop.exit();
            }
        }
    }

    fn new_events(&mut self, _event_loop: &ActiveEventLoop, cause: StartCause) {
        if let StartCause::ResumeTimeReached { .. } = cause
            && let Some(shown) = &self.shown
        {
            self.repaint_at = None;
            shown.window.request_redraw();
        }
    }

    fn user_event(&mut self, _event_loop: &ActiveEventLoop, event: UserEvent) {
        let Some(shown) = &mut self.shown else { return };
        match event {
            UserEvent::RequestRepaint { when, .. } => {
                if when <= Instant::now() {
                    shown.window.request_redraw();
                } else {
                    self.repaint_at = Some(self.repaint_at.map_or(when, |known| known.min(when)));
                }
            }
            UserEvent::AccessKitActionRequest(event) => {
                use egui_winit::accesskit_winit::WindowEvent as Request;
                match event.window_event {
                    Request::InitialTreeRequested => shown.context.enable_accesskit(),
                    Request::ActionRequested(request) => shown.input.on_accesskit_action_request(request),
                    Request::AccessibilityDeactivated => shown.context.disable_accesskit(),
                }
                shown.window.request_redraw();
            }
        }
    }

    fn window_event(&mut self, event_loop: &ActiveEventLoop, _window: WindowId, event: WindowEvent) {
        let Some(shown) = &mut self.shown else { return };
        match &event {
            WindowEvent::RedrawRequested => {
                self.repaint_at = None;
                match shown.paint() {
                    Ok(true) => {}
                    Ok(false) => event_loop.exit(),
                    Err(error) => {
                        self.error = Some(HostError::Other(error));
                        event_loop.exit();
                    }
                }
                return;
            }
            WindowEvent::CloseRequested => {
                shown.info.events.push(ViewportEvent::Close);
                shown.window.request_redraw();
                return;
            }
            WindowEvent::Resized(_) | WindowEvent::ScaleFactorChanged { .. } => shown.window.request_redraw(),
            _ => {}
        }
        if shown.input.on_window_event(&shown.window, &event).repaint {
            shown.window.request_redraw();
        }
    }

    fn about_to_wait(&mut self, event_loop: &ActiveEventLoop) {
        event_loop.set_control_flow(self.repaint_at.map_or(ControlFlow::Wait, ControlFlow::WaitUntil));
    }

    fn exiting(&mut self, _event_loop: &ActiveEventLoop) {
        self.shown = None;
    }
}

impl CpuWindow<'_> {
    fn open(&mut self, event_loop: &ActiveEventLoop) -> Result<(), HostError> {
        let other = |error: String| HostError::from_words(&error);
        let context = egui::Context::default();
        context.set_embed_viewports(true);
        let proxy = self.proxy.clone();
        context.set_request_repaint_callback(move |request| {
            let when = Instant::now().checked_add(request.delay);
            if let Some(when) = when {
                let cumulative_pass_nr = request.current_cumulative_pass_nr;
                let event = UserEvent::RequestRepaint { viewport_id: request.viewport_id, when, cumulative_pass_nr };
                // The loop is gone only when the window is, and then there is nothing to repaint.
                let _ = proxy.send_event(event);
            }
        });
        // Screen readers want to be told of a window before it is seen.
        let builder = viewport(&self.title).with_visible(false);
        let window =
            egui_winit::create_window(&context, event_loop, &builder).map_err(|error| other(error.to_string()))?;
        let window = Arc::new(window);
        let display =
            softbuffer::Context::new(event_loop.owned_display_handle()).map_err(|error| other(error.to_string()))?;
        let surface = softbuffer::Surface::new(&display, window.clone()).map_err(|error| other(error.to_string()))?;
        let scale = window.scale_factor() as f32;
        let mut input = egui_winit::State::new(
            context.clone(),
            ViewportId::ROOT,
            event_loop,
            Some(scale),
            window.theme(),
            Some(TEXTURE_SIDE),
        );
        input.init_accesskit(event_loop, &window, self.proxy.clone());
        let mut info = ViewportInfo::default();
        egui_winit::update_viewport_info(&mut info, &context, &window, true);
        let make_app = self.make_app.take().ok_or_else(|| HostError::Other("the app was made already".into()))?;
        let app = make_app(&context, &self.renderer);
        window.request_redraw();
        self.shown =
            Some(Shown { window, surface, context, input, info, painter: Painter::new(), app, is_first_frame: true });
        Ok(())
    }
}

impl Shown<'_> {
    /// Runs and shows one frame; `false` when the window is to close.
    fn paint(&mut self) -> Result<bool, String> {
        egui_winit::update_viewport_info(&mut self.info, &self.context, &self.window, false);
        let mut raw_input = self.input.take_egui_input(&self.window);
        raw_input.viewports.insert(ViewportId::ROOT, self.info.clone());
        let is_closing = self.info.events.contains(&ViewportEvent::Close);
        self.info.events.clear();
        let app = &mut self.app;
        let mut output = self.context.run_ui(raw_input, |ui| {
            app.logic(ui.ctx());
            app.ui(ui);
        });
        self.input.handle_platform_output(&self.window, std::mem::take(&mut output.platform_output));
        let textures = std::mem::take(&mut output.textures_delta);
        self.painter.set_textures(&textures);
        let primitives = self.context.tessellate(std::mem::take(&mut output.shapes), output.pixels_per_point);
        let size = self.window.inner_size();
        if let (Some(width), Some(height)) = (NonZeroU32::new(size.width), NonZeroU32::new(size.height)) {
            let ground = self.context.global_style().visuals.panel_fill;
            let image = self.painter.paint(
                [size.width as usize, size.height as usize],
                output.pixels_per_point,
                ground,
                &primitives,
            );
            self.surface.resize(width, height).map_err(|error| error.to_string())?;
            let mut buffer = self.surface.buffer_mut().map_err(|error| error.to_string())?;
            image.write_rgb_words(&mut buffer);
            self.window.pre_present_notify();
            buffer.present().map_err(|error| error.to_string())?;
        }
        self.painter.free_textures(textures);
        if std::mem::take(&mut self.is_first_frame) {
            self.window.set_visible(true);
            self.window.request_redraw();
        }
        let commands =
            output.viewport_output.remove(&ViewportId::ROOT).map_or_else(Vec::new, |viewport| viewport.commands);
        let stays_open = commands.contains(&ViewportCommand::CancelClose);
        let mut asked = Vec::new();
        egui_winit::process_viewport_commands(&self.context, &mut self.info, commands, &self.window, &mut asked);
        for action in asked {
            use egui_winit::ActionRequested;
            match action {
                ActionRequested::Cut => self.input.egui_input_mut().events.push(egui::Event::Cut),
                ActionRequested::Copy => self.input.egui_input_mut().events.push(egui::Event::Copy),
                ActionRequested::Paste => {
                    if let Some(text) = self.input.clipboard_text().filter(|text| !text.is_empty()) {
                        self.input.egui_input_mut().events.push(egui::Event::Paste(text.replace("\r\n", "\n")));
                    }
                }
                ActionRequested::Screenshot(_) | ActionRequested::PaintWhileHidden => {}
            }
        }
        if self.info.events.contains(&ViewportEvent::Close) {
            // The app itself asked to close; it is asked back in the next frame, as a user's request is.
            self.window.request_redraw();
        }
        Ok(!is_closing || stays_open)
    }
}
