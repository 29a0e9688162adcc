//! `slidehalt [PLANT-FOLDER]`: opens the window, or says what does the same job on paper.

use std::path::{Path, PathBuf};
use std::process::ExitCode;

use super::{now, today};
use crate::host::{self, HostError, RendererChoice, RendererReport, WindowApp, WindowOptions};
use crate::window::app::{App, Given};
use crate::window::theme;

/// Opens the window on a plant folder, or on a copy of the sample presses.
pub fn open(folder: Option<&Path>, choice: RendererChoice) -> ExitCode {
    let (folder, is_sample) = match folder {
        Some(folder) => (folder.to_owned(), false),
        None => match sample_copy() {
            Ok(folder) => (folder, true),
            Err(why) => {
                eprintln!("{why}");
                return ExitCode::from(2);
            }
        },
    };
    let shown = folder.clone();
    let options = WindowOptions {
        title: "Slidehalt".into(),
        app_id: "slidehalt".into(),
        initial_size: egui::vec2(1280.0, 800.0),
        minimum_size: egui::vec2(900.0, 600.0),
        icon: None,
    };
    let make = move |_: &egui::Context, renderer: &RendererReport| -> Box<dyn WindowApp> {
        let given = Given {
            today: today(),
            clock: now,
            version: env!("CARGO_PKG_VERSION"),
            renderer: format!("{renderer}."),
            is_sample,
        };
        Box::new(App::new(given, Some(&shown)))
    };
    match host::run(choice, &options, theme::install, make) {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("{error}");
            if matches!(error, HostError::NoDisplay(_) | HostError::MissingLibrary { .. }) {
                eprintln!("The same job without a window:");
                eprintln!("  slidehalt check {}", folder.display());
                eprintln!("  slidehalt record {}/presses/TAG.ron --out TAG.pdf", folder.display());
            }
            ExitCode::from(2)
        }
    }
}

/// A copy of the sample presses in a new folder, so that trying things out never changes the samples.
fn sample_copy() -> Result<PathBuf, String> {
    let folder = tempfile::Builder::new()
        .prefix("slidehalt-samples-")
        .tempdir()
        .map_err(|error| format!("A copy of the sample presses cannot be made: {error}."))?
        .keep();
    plant::copy_samples(&folder).map_err(|refusal| refusal.to_string())?;
    Ok(folder)
}
