//! The window: opens on any machine with a display, with or without a graphics card.
//!
//! [`run`] opens one window and runs a [`WindowApp`] in it until the window closes. The window is
//! drawn with OpenGL where a graphics card provides it, and by the processor where OpenGL is
//! missing or is itself computed by the processor, which is several times slower than the painter
//! of this program. The app is the same in both cases, and is told which it is.

mod cpu;
mod display;
mod error;
mod gl;
pub mod journal;
mod renderer;
mod start;

use std::cell::RefCell;

use egui::{Context, IconData, Ui, Vec2, ViewportBuilder, ViewportCommand};

pub use error::HostError;
pub use renderer::{Renderer, RendererChoice, RendererReason, RendererReport};

/// What a window shows and how it answers.
pub trait WindowApp {
    /// Runs before every [`Self::ui`], and alone while the window is hidden and a repaint was
    /// requested. Nothing may be shown from here.
    fn logic(&mut self, ctx: &Context) {
        _ = ctx;
    }

    /// Shows the contents. The `Ui` fills the window and has no margin and no background. egui may
    /// run it twice for one frame.
    fn ui(&mut self, ui: &mut Ui);

    /// Whether the window may close now. Asked when the user closes the window and when the app
    /// itself sends [`ViewportCommand::Close`].
    ///
    /// An app with unsaved work answers `false`, shows its question in [`Self::ui`], and later
    /// sends `ViewportCommand::Close` and answers `true`. The question may be put several times
    /// before the next frame is shown. A hidden window is brought back when the answer is no.
    fn close_requested(&mut self, ctx: &Context) -> bool {
        _ = ctx;
        true
    }
}

/// How the window looks before the app shows anything in it.
#[derive(Clone, Debug)]
pub struct WindowOptions {
    /// Text of the title bar. The app may change it with [`ViewportCommand::Title`].
    pub title: String,
    /// Name by which the desktop knows the program: the base name of its `.desktop` file.
    pub app_id: String,
    /// Size of the contents when the window opens, in points.
    pub initial_size: Vec2,
    /// The smallest size the user can give the contents, in points.
    pub minimum_size: Vec2,
    /// Picture for title bar and task list; none leaves it to the desktop.
    pub icon: Option<IconData>,
}

impl WindowOptions {
    fn viewport(&self) -> ViewportBuilder {
        ViewportBuilder::default()
            .with_title(&self.title)
            .with_app_id(&self.app_id)
            .with_inner_size(self.initial_size)
            .with_min_inner_size(self.minimum_size)
            // An empty icon keeps the library from showing its own.
            .with_icon(self.icon.clone().unwrap_or_default())
    }
}

/// Makes the app, once the renderer is settled.
type MakeApp<'a> = Box<dyn FnOnce(&Context, &RendererReport) -> Box<dyn WindowApp + 'a> + 'a>;

/// The one [`MakeApp`] of a run: offered to OpenGL first and, if unused, to the processor.
type Offer<'a> = RefCell<Option<MakeApp<'a>>>;

/// Opens the window, runs the app in it, and returns when the window has closed.
///
/// `setup` sets fonts and style; it runs once, before the first frame and before `make_app`, which
/// is given the context (to request repaints from other threads) and the renderer in use. Call
/// this from the main thread and at most once in a process: window systems allow no second
/// connection.
///
/// # Errors
/// Fails when no window can be opened, and when the window or the graphics card is lost. The error
/// is a sentence for the user. When an X server ends while the window is open, its library ends
/// the process by itself, with status 1.
pub fn run<'a>(
    choice: RendererChoice,
    options: &WindowOptions,
    setup: impl FnOnce(&Context) + 'a,
    make_app: impl FnOnce(&Context, &RendererReport) -> Box<dyn WindowApp + 'a> + 'a,
) -> Result<(), HostError> {
    journal::listen();
    let mut event_loop = display::connect()?;
    let make: MakeApp<'a> = Box::new(|ctx, report| {
        // One native window: what egui would open beside it goes inside it.
        ctx.set_embed_viewports(true);
        setup(ctx);
        make_app(ctx, report)
    });
    let offer = RefCell::new(Some(make));
    let reason = match choice {
        RendererChoice::Cpu => RendererReason::AskedFor,
        RendererChoice::Auto | RendererChoice::Gl => match gl::run(&mut event_loop, options, choice, &offer)? {
            gl::Outcome::Closed => return Ok(()),
            gl::Outcome::NotUsed(reason) => reason,
        },
    };
    journal::errors_only();
    cpu::run(&mut event_loop, options, reason, &offer)
}

/// The part of a frame that runs even while the window is hidden, the same for both renderers.
fn run_logic(app: &mut dyn WindowApp, ctx: &Context) {
    let (close_requested, minimized) = ctx.input(|input| {
        let window = input.viewport();
        (window.close_requested(), window.minimized == Some(true))
    });
    if close_requested && !app.close_requested(ctx) {
        ctx.send_viewport_cmd(ViewportCommand::CancelClose);
        if minimized {
            // The app has something to ask; an invisible question helps nobody.
            ctx.send_viewport_cmd(ViewportCommand::Minimized(false));
            ctx.send_viewport_cmd(ViewportCommand::Focus);
        }
    }
    app.logic(ctx);
}
