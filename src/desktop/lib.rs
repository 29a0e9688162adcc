//! What is used: the window and the command line of the program `slidehalt`.

pub mod document;
pub mod results;
pub mod window;
