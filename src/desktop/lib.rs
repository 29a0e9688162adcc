//! What is used: the window and the command line of the program `slidehalt`.

pub mod document;
pub mod host;
pub mod results;
pub mod window;
