//! What is used: the window and the command line of the program `slidehalt`.

pub mod cli;
pub mod document;
pub mod host;
pub mod results;
pub mod saving;
pub mod stop_map;
pub mod window;
