//! Opens a window on any machine: with OpenGL where a graphics processor serves it, else with our own painter, on one event loop.
//!
//! A process may build one event loop only. So it is built here, OpenGL is tried on it, and where that fails or turns out to
//! be a program that imitates a graphics processor, the same loop runs the window that paints on the CPU, which is several
//! times lighter.

mod cpu;
mod error;
mod event_loop;
mod gl;
mod listener;

use std::cell::RefCell;
use std::rc::Rc;

pub use error::HostError;

/// Which renderer the user asked for.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default, clap::ValueEnum)]
pub enum RendererChoice {
    /// OpenGL where a graphics processor serves it, else the CPU.
    #[default]
    Auto,
    /// OpenGL, whoever serves it.
    Gl,
    /// The CPU.
    Cpu,
}

/// Which renderer paints, and why.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum Renderer {
    /// OpenGL, with the name of what serves it.
    Gl(String),
    /// The CPU, with the reason in words.
    Cpu(String),
}

impl Renderer {
    /// What the status line says, once.
    pub fn words(&self) -> String {
        match self {
            Self::Gl(name) => format!("Painting with OpenGL ({name})."),
            Self::Cpu(why) => format!("Painting on the processor: {why}."),
        }
    }
}

/// What the host runs in its window.
pub trait WindowApp {
    /// Work that draws nothing, before every frame.
    fn logic(&mut self, context: &egui::Context);

    /// Draws one frame. A close request stands in `context.input(|input| input.viewport().close_requested())`; the window
    /// closes unless the app answers with `ViewportCommand::CancelClose`.
    fn ui(&mut self, ui: &mut egui::Ui);
}

/// Makes the app once its window is there.
pub type MakeApp<'a> = Box<dyn FnOnce(&egui::Context, &Renderer) -> Box<dyn WindowApp + 'a> + 'a>;

/// Opens the window and runs it until it is closed.
///
/// # Errors
/// No display, a missing library, or OpenGL asked for and not to be had; in words for the user.
pub fn run<'a>(choice: RendererChoice, title: &str, make_app: MakeApp<'a>) -> Result<(), HostError> {
    error::without_panic(move || run_guarded(choice, title, make_app))
}

fn run_guarded<'a>(choice: RendererChoice, title: &str, make_app: MakeApp<'a>) -> Result<(), HostError> {
    let mut event_loop = event_loop::build()?;
    let make_app = Rc::new(RefCell::new(Some(make_app)));
    let why_cpu = if choice == RendererChoice::Cpu {
        "as asked for".to_owned()
    } else {
        match gl::run(&mut event_loop, title, choice, make_app.clone()) {
            Ok(()) => return Ok(()),
            Err(why) if choice == RendererChoice::Gl => return Err(HostError::NoGl(why)),
            Err(why) => why,
        }
    };
    let make_app = make_app.borrow_mut().take();
    match make_app {
        Some(make_app) => cpu::run(&mut event_loop, title, Renderer::Cpu(why_cpu), make_app),
        // OpenGL had begun and broke off later; the app and what was typed into it are gone.
        None => Err(HostError::Other(why_cpu)),
    }
}

/// How the window begins.
fn viewport(title: &str) -> egui::ViewportBuilder {
    egui::ViewportBuilder::default()
        .with_title(title)
        .with_app_id("slidehalt")
        .with_inner_size([1280.0, 800.0])
        .with_min_inner_size([900.0, 600.0])
}
