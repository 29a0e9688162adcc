//! What is used: the window and the command line.

pub mod host;
