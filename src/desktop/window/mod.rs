//! The window: document, drafts, view state and jobs; views read and wish, commands change.

pub mod app;
mod bar;
pub mod commands;
pub mod context;
pub mod dialogs;
pub mod drawing;
mod header;
mod jobs;
mod overview;
mod press_list;
pub mod sheets;
mod status;
pub mod theme;
pub mod widgets;
pub mod wishes;
