//! What is kept: a plant folder on disk.
//!
//! ```text
//! plant.ron                          what holds for the whole plant
//! presses/<tag>.ron                  one press a file
//! records/<tag>/<date>-<nn>.pdf      what was printed, with a sealed copy of the press beside it as .ron
//! ```
//!
//! Files are RON text with a version read first. The stored shape is apart from the meaning: structs of a file version refuse
//! unknown fields and every number outside its limit, all of them with line, column and field, and are turned by hand into the checked
//! types of `calc`. An unreadable file never becomes an empty press; it is listed with its error and left untouched. Saves are
//! whole or not at all, and never unasked over somebody else's change.

mod comma;
mod folder;
mod read;
mod readings_csv;
mod records;
mod samples;
pub mod v1;
mod wording;
mod write;

pub use folder::{
    Known, Plant, StoredPress, create, edit_press_file, open, open_press_file, save_press, save_press_over,
    save_settings,
};
pub use read::{FileRefusal, PlantRefusal};
pub use readings_csv::{RowRefusal, export_readings, import_readings};
pub use records::{KeptRecord, SealState, keep_record, kept_records};
pub use samples::{SAMPLES, copy_samples};
pub use write::write_whole;
