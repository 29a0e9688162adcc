//! The window: document, drafts, view state and jobs; views read and wish, commands change.

pub mod context;
pub mod drawing;
pub mod theme;
pub mod widgets;
pub mod wishes;
