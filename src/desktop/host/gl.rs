//! The window with OpenGL, run by eframe.

use std::cell::{Cell, RefCell};
use std::rc::Rc;

use eframe::UserEvent;
use winit::event_loop::EventLoop;
use winit::platform::run_on_demand::EventLoopExtRunOnDemand;

use super::{MakeApp, Renderer, RendererChoice, WindowApp, listener, viewport};

/// Programs that imitate a graphics processor; our own painter is lighter than any of them.
const IMITATIONS: [&str; 5] = ["llvmpipe", "softpipe", "swrast", "SwiftShader", "GDI Generic"];

/// Runs the window with OpenGL until it is closed. An error says in words why OpenGL does not serve; the app is then unmade.
pub(super) fn run<'a>(
    event_loop: &mut EventLoop<UserEvent>,
    title: &str,
    choice: RendererChoice,
    make_app: Rc<RefCell<Option<MakeApp<'a>>>>,
) -> Result<(), String> {
    listener::start();
    let refused: Rc<RefCell<Option<String>>> = Rc::default();
    let has_begun = Rc::new(Cell::new(false));
    let options = eframe::NativeOptions {
        viewport: viewport(title),
        renderer: eframe::Renderer::Glow,
        system_font_fallback: false,
        ..Default::default()
    };
    let creator = {
        let (refused, has_begun) = (refused.clone(), has_begun.clone());
        move |creation: &eframe::CreationContext<'_>| -> Result<Box<dyn eframe::App + 'a>, Box<dyn std::error::Error + Send + Sync>> {
            let name = listener::gl_renderer().unwrap_or_else(|| "renderer unknown".into());
            if choice == RendererChoice::Auto && IMITATIONS.iter().any(|imitation| name.contains(imitation)) {
                let why = format!("OpenGL here is imitated by {}", name.split(['(', ',']).next().unwrap_or(&name).trim());
                *refused.borrow_mut() = Some(why.clone());
                return Err(why.into());
            }
            let make_app = make_app.borrow_mut().take().ok_or("the app was made already")?;
            has_begun.set(true);
            Ok(Box::new(Adapter(make_app(&creation.egui_ctx, &Renderer::Gl(name)))))
        }
    };
    let mut app = eframe::create_native(title, options, Box::new(creator), event_loop);
    let outcome = event_loop.run_app_on_demand(&mut app);
    drop(app);
    match (refused.borrow_mut().take(), outcome) {
        (Some(why), _) => Err(why),
        (None, Err(error)) => Err(error.to_string()),
        (None, Ok(())) if has_begun.get() => Ok(()),
        (None, Ok(())) => Err("OpenGL cannot be started here".into()),
    }
}

struct Adapter<'a>(Box<dyn WindowApp + 'a>);

impl eframe::App for Adapter<'_> {
    fn logic(&mut self, context: &egui::Context, _frame: &mut eframe::Frame) {
        self.0.logic(context);
    }

    fn ui(&mut self, ui: &mut egui::Ui, _frame: &mut eframe::Frame) {
        self.0.ui(ui);
    }
}
