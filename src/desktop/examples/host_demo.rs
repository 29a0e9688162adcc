//! A small window to try the host by hand: `host_demo [auto|gl|cpu] [--spin] [--frames N]`.
//!
//! Prints the renderer in use, the time to the first frame, and on closing the number of frames.

use std::time::Instant;

use desktop::host::{self, RendererChoice, RendererReport, WindowApp, WindowOptions};
use egui::{Context, Ui, ViewportCommand};

struct Demo {
    begun: Instant,
    report: RendererReport,
    text: String,
    frames: usize,
    limit: Option<usize>,
    spin: bool,
    unsaved: bool,
    asking: bool,
    ticks: std::sync::mpsc::Receiver<u32>,
    last_tick: u32,
}

impl WindowApp for Demo {
    fn logic(&mut self, _: &Context) {
        self.last_tick = self.ticks.try_iter().last().unwrap_or(self.last_tick);
    }

    fn ui(&mut self, ui: &mut Ui) {
        self.frames += 1;
        if self.frames == 1 {
            println!(
                "{} | first frame after {:?}",
                self.report,
                self.begun.elapsed()
            );
        }
        egui::Panel::bottom("status").show(ui, |ui| ui.label(self.report.to_string()));
        egui::Panel::left("left")
            .default_size(220.0)
            .show(ui, |ui| {
                ui.heading("Demo");
                let label = ui.label("Text");
                if ui
                    .text_edit_singleline(&mut self.text)
                    .labelled_by(label.id)
                    .changed()
                {
                    self.unsaved = true;
                    ui.ctx()
                        .send_viewport_cmd(ViewportCommand::Title(format!("Demo: {}", self.text)));
                }
                ui.checkbox(&mut self.spin, "Repaint for ever");
                ui.label(format!("Frames {}, ticks {}", self.frames, self.last_tick));
                if ui.button("Close").clicked() {
                    ui.ctx().send_viewport_cmd(ViewportCommand::Close);
                }
            });
        egui::CentralPanel::default().show(ui, |ui| {
            let lines = (0..4).map(|k| {
                let points: egui_plot::PlotPoints<'_> = (0..1000)
                    .map(|i| {
                        let x = f64::from(i) * 0.01;
                        [x, (x + f64::from(k)).sin() * (1.0 + f64::from(k))]
                    })
                    .collect();
                egui_plot::Line::new(format!("line {k}"), points)
            });
            egui_plot::Plot::new("plot")
                .height(300.0)
                .x_axis_label("time (s)")
                .y_axis_label("speed (m/s)")
                .legend(egui_plot::Legend::default())
                .show(ui, |plot| lines.for_each(|line| plot.line(line)));
            egui::ScrollArea::vertical().show(ui, |ui| {
                for row in 0..40 {
                    ui.horizontal(|ui| {
                        for column in 0..8 {
                            ui.label(format!("{:.3}", f64::from(row * 8 + column) * 1.37));
                        }
                    });
                }
            });
        });
        if self.asking {
            egui::Window::new("Unsaved text").show(ui.ctx(), |ui| {
                if ui.button("Discard").clicked() {
                    self.unsaved = false;
                    ui.ctx().send_viewport_cmd(ViewportCommand::Close);
                }
                if ui.button("Keep").clicked() {
                    self.asking = false;
                }
            });
        }
        if self.limit.is_some_and(|limit| self.frames >= limit) {
            self.unsaved = false;
            ui.ctx().send_viewport_cmd(ViewportCommand::Close);
        } else if self.spin {
            ui.ctx().request_repaint();
        }
    }

    fn close_requested(&mut self, _: &Context) -> bool {
        self.asking = self.unsaved;
        !self.unsaved
    }
}

impl Drop for Demo {
    fn drop(&mut self) {
        println!(
            "{} frames in {:?}, text {:?}",
            self.frames,
            self.begun.elapsed(),
            self.text
        );
    }
}

fn main() -> std::process::ExitCode {
    let begun = Instant::now();
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    let choice = match arguments.first().map(String::as_str) {
        Some("gl") => RendererChoice::Gl,
        Some("cpu") => RendererChoice::Cpu,
        _ => RendererChoice::Auto,
    };
    let limit = arguments
        .iter()
        .position(|argument| argument == "--frames")
        .and_then(|at| arguments.get(at + 1)?.parse().ok());
    let options = WindowOptions {
        title: "Demo".to_owned(),
        app_id: "host_demo".to_owned(),
        initial_size: egui::vec2(1280.0, 800.0),
        minimum_size: egui::vec2(400.0, 300.0),
        icon: None,
    };
    let setup = |ctx: &Context| ctx.set_theme(egui::Theme::Light);
    let done = host::run(choice, &options, setup, |ctx, report| {
        let (send, ticks) = std::sync::mpsc::channel();
        let ctx = ctx.clone();
        std::thread::spawn(move || {
            for tick in 1.. {
                std::thread::sleep(std::time::Duration::from_secs(2));
                if send.send(tick).is_err() {
                    break;
                }
                ctx.request_repaint();
            }
        });
        Box::new(Demo {
            begun,
            report: report.clone(),
            text: String::new(),
            frames: 0,
            limit,
            spin: arguments.iter().any(|argument| argument == "--spin"),
            unsaved: false,
            asking: false,
            ticks,
            last_tick: 0,
        })
    });
    match done {
        Ok(()) => std::process::ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("{error}");
            std::process::ExitCode::from(3)
        }
    }
}
