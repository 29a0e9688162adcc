//! The window drawn with OpenGL.

mod watch;

use std::cell::{Cell, RefCell};
use std::rc::Rc;

use eframe::UserEvent;
use egui::{Context, Ui, Visuals};
use winit::event_loop::EventLoop;
use winit::platform::run_on_demand::EventLoopExtRunOnDemand as _;

use self::watch::Watch;

use super::renderer::is_software;
use super::start::{self, Start};
use super::{
    HostError, Offer, Renderer, RendererChoice, RendererReason, RendererReport, WindowApp, WindowOptions, journal,
    run_logic,
};

/// How the attempt ended.
pub(super) enum Outcome {
    /// The window was open and has been closed.
    Closed,
    /// OpenGL is not to be used, for this reason; the offer still stands.
    NotUsed(RendererReason),
}

/// The library through which OpenGL is started, as the journal knows it.
const LIBRARY: &str = "eframe";

/// Tries to open the window with OpenGL, and runs the app in it if that works.
pub(super) fn run(
    event_loop: &mut EventLoop<UserEvent>,
    options: &WindowOptions,
    choice: RendererChoice,
    offer: &Offer<'_>,
) -> Result<Outcome, HostError> {
    let not_used = RefCell::new(None);
    let running = Rc::new(Cell::new(false));
    let ended = start::attempt(|start| {
        let create = |cc: &eframe::CreationContext<'_>| {
            create(&cc.egui_ctx, choice, offer, start, &running).map_err(|reason| {
                let text = RendererReport { renderer: Renderer::Cpu, reason: reason.clone() }.to_string();
                *not_used.borrow_mut() = Some(reason);
                text.into()
            })
        };
        let native = native_options(options);
        let name = &options.app_id;
        let library = eframe::create_native(name, native, Box::new(create), event_loop);
        let mut watch = Watch::new(library, Rc::clone(&running));
        let ended = event_loop.run_app_on_demand(&mut watch);
        (ended, watch.destroyed())
    });
    let opened = offer.borrow().is_none();
    journal::errors_only();
    let cause = journal::take_error(LIBRARY);

    if opened {
        return match (ended, cause) {
            (Err(panic), _) => Err(HostError::NotOpened(panic)),
            (Ok((_, true)), _) => Err(HostError::destroyed()),
            (Ok((Err(error), _)), _) => Err(HostError::Lost(error.to_string())),
            (Ok((Ok(()), _)), Some(cause)) if cause.starts_with(FATAL) => Err(HostError::Lost(plain(&cause))),
            (Ok((Ok(()), _)), _) => Ok(Outcome::Closed),
        };
    }
    if let Some(reason) = not_used.take() {
        return Ok(Outcome::NotUsed(reason));
    }
    let cause = match ended {
        Err(panic) => Some(panic),
        Ok((Err(error), _)) => Some(error.to_string()),
        Ok((Ok(()), _)) => cause.map(|cause| plain(&cause)),
    };
    if choice == RendererChoice::Gl {
        return Err(HostError::NoOpenGl(cause));
    }
    Ok(Outcome::NotUsed(RendererReason::NoGl(cause)))
}

/// How the library begins the error that ends its run.
const FATAL: &str = "Exiting because of error: ";

/// The first line of the cause, without the library's own preface and without its list of what it
/// had looked for.
fn plain(cause: &str) -> String {
    let cause = cause.strip_prefix(FATAL).unwrap_or(cause);
    let cause = match cause.split_once(" matching the template:") {
        Some((start, _)) => start,
        None => cause,
    };
    let line = cause.lines().next().unwrap_or(cause);
    line.trim_end_matches('.').to_owned()
}

/// Called with OpenGL running: takes up the offer unless the processor would draw anyway.
fn create<'a>(
    ctx: &Context,
    choice: RendererChoice,
    offer: &Offer<'a>,
    start: &Start,
    running: &Rc<Cell<bool>>,
) -> Result<Box<dyn eframe::App + 'a>, RendererReason> {
    let driver = journal::opengl_driver();
    journal::errors_only();
    if choice == RendererChoice::Auto
        && let Some(name) = driver.as_deref().filter(|name| is_software(name))
    {
        return Err(RendererReason::SoftwareGl(name.to_owned()));
    }
    // The library creates one app per run, so the offer is always still there.
    let Some(make) = offer.take() else {
        return Err(RendererReason::NoGl(None));
    };
    start.done();
    let report = RendererReport {
        renderer: Renderer::Gl,
        reason: match choice {
            RendererChoice::Gl => RendererReason::AskedFor,
            RendererChoice::Auto | RendererChoice::Cpu => RendererReason::GraphicsCard(driver),
        },
    };
    let app = make(ctx, &report);
    running.set(true);
    Ok(Box::new(GlApp { app, running: Rc::clone(running) }))
}

fn native_options(options: &WindowOptions) -> eframe::NativeOptions {
    eframe::NativeOptions {
        viewport: options.viewport(),
        renderer: eframe::Renderer::Glow,
        // Text looks the same on every machine, with the fonts the program brings.
        system_font_fallback: false,
        // Flat colours stay flat, as the processor draws them.
        dithering: false,
        ..Default::default()
    }
}

/// The app as the OpenGL library takes it.
struct GlApp<'a> {
    app: Box<dyn WindowApp + 'a>,
    running: Rc<Cell<bool>>,
}

impl Drop for GlApp<'_> {
    fn drop(&mut self) {
        self.running.set(false);
    }
}

impl eframe::App for GlApp<'_> {
    fn logic(&mut self, ctx: &Context, _: &mut eframe::Frame) {
        run_logic(self.app.as_mut(), ctx);
    }

    fn ui(&mut self, ui: &mut Ui, _: &mut eframe::Frame) {
        self.app.ui(ui);
    }

    fn clear_color(&self, visuals: &Visuals) -> [f32; 4] {
        visuals.panel_fill.to_normalized_gamma_f32()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn causes_are_cut_to_what_a_user_can_read() {
        assert_eq!(plain("Exiting because of error: An error occurred.\nMore"), "An error occurred");
        assert_eq!(
            plain(
                "Exiting because of error: Found no glutin configs matching the template: \
                 ConfigTemplate { color_buffer_type: Rgb }. Error: provided native window is not \
                 supported"
            ),
            "Found no glutin configs"
        );
    }
}
