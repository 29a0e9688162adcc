//! The sample presses, carried inside the program, so that trying things out never changes the samples.

use std::fs;
use std::path::Path;

use crate::read::PlantRefusal;
use crate::write_whole;

macro_rules! samples {
    ($($name:literal),* $(,)?) => {
        /// Every file of the sample plant: its path within the folder and its text.
        pub const SAMPLES: &[(&str, &str)] = &[$(($name, include_str!(concat!("../../sample-presses/", $name)))),*];
    };
}

samples![
    "plant.ron",
    "presses/E-101.ron",
    "presses/E-102.ron",
    "presses/E-103.ron",
    "presses/E-104.ron",
    "presses/E-105.ron",
    "presses/E-106.ron",
    "presses/E-107.ron",
    "presses/E-108.ron",
    "presses/E-109.ron",
    "presses/E-110.ron",
    "presses/E-111.ron",
    "presses/E-112.ron",
    "presses/E-113.ron",
    "presses/E-114.ron",
    "presses/E-115.ron",
    "presses/E-116.ron",
];

/// Writes the sample plant into a folder.
///
/// # Errors
/// A folder that cannot be made or written.
pub fn copy_samples(folder: &Path) -> Result<(), PlantRefusal> {
    for (name, text) in SAMPLES {
        let path = folder.join(name);
        let parent = path.parent().unwrap_or(folder);
        fs::create_dir_all(parent).map_err(|error| {
            PlantRefusal::Folder(format!("The folder {} cannot be made: {error}.", parent.display()))
        })?;
        write_whole(&path, text.as_bytes())?;
    }
    Ok(())
}
