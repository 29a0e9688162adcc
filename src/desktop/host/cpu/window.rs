//! One window on the screen: runs egui passes and puts their pictures into the window's pixels.

use std::num::NonZeroU32;
use std::sync::Arc;
use std::time::{Duration, Instant};

use eframe::UserEvent;
use egui::{
    Context, Event, FullOutput, RawInput, Vec2, ViewportCommand, ViewportEvent, ViewportId, ViewportInfo, vec2,
};
use egui_winit::ActionRequested;
use painter::Painter;
use winit::event::WindowEvent;
use winit::event_loop::{ActiveEventLoop, EventLoopProxy, OwnedDisplayHandle};
use winit::window::{Window, WindowId};

use crate::host::{HostError, WindowApp, WindowOptions, run_logic};

/// Textures may be this large, in texels per side: they lie in ordinary memory.
const MAX_TEXTURE_SIDE: usize = 16_384;

/// A window system that takes no picture is asked again after this time ...
const RETRY: Duration = Duration::from_millis(100);

/// ... this many times in a row, before the window counts as lost.
const MAX_RETRIES: u32 = 50;

/// What comes after a frame.
pub(super) enum After {
    GoOn,
    /// The picture could not be shown; try again then.
    Retry(Instant),
    Close,
}

/// The native window and its pixels.
pub(super) struct Frame {
    ctx: Context,
    window: Arc<Window>,
    surface: softbuffer::Surface<OwnedDisplayHandle, Arc<Window>>,
    state: egui_winit::State,
}

impl Frame {
    /// Opens the window, still hidden.
    pub(super) fn open(
        ctx: &Context,
        event_loop: &ActiveEventLoop,
        options: &WindowOptions,
        proxy: EventLoopProxy<UserEvent>,
    ) -> Result<Self, HostError> {
        // Hidden until there is something to see; AccessKit has to be attached before as well.
        let mut builder = options.viewport().with_visible(false);
        if let Some(screen) = largest_screen(event_loop) {
            builder = builder.with_inner_size(options.initial_size.min(screen));
        }
        let window = egui_winit::create_window(ctx, event_loop, &builder)
            .map_err(|error| HostError::NotOpened(error.to_string()))?;
        let window = Arc::new(window);
        let mut state = egui_winit::State::new(
            ctx.clone(),
            ViewportId::ROOT,
            event_loop,
            Some(window.scale_factor() as f32),
            window.theme(),
            Some(MAX_TEXTURE_SIDE),
        );
        state.init_accesskit(event_loop, &window, proxy);
        let surface = softbuffer::Context::new(event_loop.owned_display_handle())
            .and_then(|display| softbuffer::Surface::new(&display, Arc::clone(&window)))
            .map_err(|error| HostError::NotOpened(error.to_string()))?;
        Ok(Self { ctx: ctx.clone(), window, surface, state })
    }
}

/// Size of the largest screen in points, each side for itself; none if no screen tells its size.
fn largest_screen(event_loop: &ActiveEventLoop) -> Option<Vec2> {
    event_loop
        .available_monitors()
        .map(|monitor| {
            let size = monitor.size().to_logical::<f32>(monitor.scale_factor());
            vec2(size.width, size.height)
        })
        .filter(|size| size.x > 0.0 && size.y > 0.0)
        .reduce(Vec2::max)
}

pub(super) struct CpuWindow<'a> {
    frame: Frame,
    app: Box<dyn WindowApp + 'a>,
    painter: Painter,
    info: ViewportInfo,
    requested: Vec<ActionRequested>,
    shown: bool,
    failures: u32,
}

impl<'a> CpuWindow<'a> {
    pub(super) fn new(frame: Frame, app: Box<dyn WindowApp + 'a>) -> Self {
        let mut info = ViewportInfo::default();
        egui_winit::update_viewport_info(&mut info, &frame.ctx, &frame.window, true);
        Self { frame, app, painter: Painter::new(), info, requested: Vec::new(), shown: false, failures: 0 }
    }

    pub(super) fn context(&self) -> &Context {
        &self.frame.ctx
    }

    pub(super) fn id(&self) -> WindowId {
        self.frame.window.id()
    }

    pub(super) fn request_redraw(&self) {
        self.frame.window.request_redraw();
    }

    /// Whether the window cannot be seen, as far as the window system says.
    pub(super) fn is_hidden(&self) -> bool {
        let window = &self.frame.window;
        self.shown
            && (window.is_visible() == Some(false)
                || window.is_minimized() == Some(true)
                || self.info.occluded == Some(true))
    }

    /// Takes an event in. Returns whether the window is to be drawn anew.
    pub(super) fn on_event(&mut self, event: &WindowEvent) -> bool {
        match event {
            WindowEvent::CloseRequested => self.info.events.push(ViewportEvent::Close),
            WindowEvent::Occluded(occluded) => self.info.occluded = Some(*occluded),
            _ => {}
        }
        self.frame.state.on_window_event(&self.frame.window, event).repaint
    }

    pub(super) fn on_accesskit_action(&mut self, request: egui::accesskit::ActionRequest) {
        self.frame.state.on_accesskit_action_request(request);
    }

    /// Runs the app's logic and shows nothing. Input waits for the next picture.
    pub(super) fn run_logic_only(&mut self, event_loop: &ActiveEventLoop) -> Result<After, HostError> {
        self.update_info();
        let close_requested = self.info.close_requested();
        let input = RawInput {
            viewport_id: ViewportId::ROOT,
            viewports: std::iter::once((ViewportId::ROOT, self.info.clone())).collect(),
            focused: self.frame.state.egui_input().focused,
            ..RawInput::default()
        };
        let app = self.app.as_mut();
        let output = self.frame.ctx.run_logic(&input, |ctx| run_logic(app, ctx));
        self.info.events.clear();
        self.frame.state.handle_platform_output_with_event_loop(&self.frame.window, event_loop, output.platform_output);
        let mut commands = output.viewport_commands;
        let commands = commands.remove(&ViewportId::ROOT).unwrap_or_default();
        Ok(self.obey(commands, close_requested))
    }

    /// Runs a pass of the app and shows its picture.
    pub(super) fn paint(&mut self, event_loop: &ActiveEventLoop) -> Result<After, HostError> {
        if self.is_hidden() && !self.requested.iter().any(ActionRequested::wants_paint) {
            return self.run_logic_only(event_loop);
        }
        self.update_info();
        let close_requested = self.info.close_requested();
        let mut input = self.frame.state.take_egui_input(&self.frame.window);
        input.viewports = std::iter::once((ViewportId::ROOT, self.info.clone())).collect();
        let app = self.app.as_mut();
        let FullOutput { platform_output, mut textures_delta, shapes, pixels_per_point, mut viewport_output } =
            self.frame.ctx.run_ui(input, |ui| {
                run_logic(app, ui.ctx());
                app.ui(ui);
            });
        self.info.events.clear();
        self.frame.state.handle_platform_output_with_event_loop(&self.frame.window, event_loop, platform_output);
        self.painter.update_textures(&textures_delta);
        textures_delta.clear();

        let primitives = self.frame.ctx.tessellate(shapes, pixels_per_point);
        let shown = self.show(&primitives, pixels_per_point);
        self.answer_requests(&primitives, pixels_per_point);

        let commands = viewport_output.remove(&ViewportId::ROOT).map(|output| output.commands).unwrap_or_default();
        let after = self.obey(commands, close_requested);
        match (after, shown) {
            (After::Close, _) => Ok(After::Close),
            (after, Ok(())) => {
                self.failures = 0;
                Ok(after)
            }
            (_, Err(error)) => {
                self.failures += 1;
                if self.failures > MAX_RETRIES {
                    return Err(HostError::Lost(error));
                }
                Ok(After::Retry(Instant::now() + RETRY))
            }
        }
    }

    fn update_info(&mut self) {
        let Frame { ctx, window, .. } = &self.frame;
        egui_winit::update_viewport_info(&mut self.info, ctx, window, false);
    }

    /// Puts a picture into the window's pixels.
    fn show(&mut self, primitives: &[egui::ClippedPrimitive], pixels_per_point: f32) -> Result<(), String> {
        let size = self.frame.window.inner_size();
        // A minimised window may have no pixels at all.
        if let (Some(width), Some(height)) = (NonZeroU32::new(size.width), NonZeroU32::new(size.height)) {
            let text = |error: softbuffer::SoftBufferError| error.to_string();
            let background = self.background();
            let surface = &mut self.frame.surface;
            surface.resize(width, height).map_err(text)?;
            let mut buffer = surface.buffer_mut().map_err(text)?;
            let size = [size.width, size.height];
            self.painter
                .paint_into(&mut buffer, size, pixels_per_point, background, primitives)
                .map_err(|error| error.to_string())?;
            self.frame.window.pre_present_notify();
            buffer.present().map_err(text)?;
        }
        if !self.shown {
            self.shown = true;
            self.frame.window.set_visible(true);
            // What was put into a window that was still hidden may be lost.
            self.frame.window.request_redraw();
        }
        Ok(())
    }

    fn background(&self) -> egui::Color32 {
        self.frame.ctx.global_style().visuals.panel_fill
    }

    /// Answers what the app asked for with commands in the pass before.
    fn answer_requests(&mut self, primitives: &[egui::ClippedPrimitive], pixels_per_point: f32) {
        let mut screenshots = Vec::new();
        for request in std::mem::take(&mut self.requested) {
            let state = &mut self.frame.state;
            match request {
                ActionRequested::Screenshot(callback) => screenshots.push(callback),
                ActionRequested::Cut => state.egui_input_mut().events.push(Event::Cut),
                ActionRequested::Copy => state.egui_input_mut().events.push(Event::Copy),
                ActionRequested::Paste => {
                    let text = state.clipboard_text().unwrap_or_default();
                    if !text.is_empty() {
                        let event = Event::Paste(text.replace("\r\n", "\n"));
                        state.egui_input_mut().events.push(event);
                    }
                }
                // Painting this frame was all it asked for.
                ActionRequested::PaintWhileHidden => {}
            }
        }
        if screenshots.is_empty() {
            return;
        }
        let size = self.frame.window.inner_size();
        let background = self.background();
        let size = [size.width, size.height];
        let image = self.painter.paint(size, pixels_per_point, background, primitives);
        let image = Arc::new(image.to_color_image());
        for callback in screenshots {
            callback.complete(Arc::clone(&image));
        }
    }

    /// Carries out the app's commands and settles whether the window closes.
    fn obey(&mut self, commands: Vec<ViewportCommand>, close_requested: bool) -> After {
        let canceled = commands.contains(&ViewportCommand::CancelClose);
        egui_winit::process_viewport_commands(
            &self.frame.ctx,
            &mut self.info,
            commands,
            &self.frame.window,
            &mut self.requested,
        );
        if close_requested && !canceled { After::Close } else { After::GoOn }
    }
}
