//! The sheet of stop tests.

pub mod dial;
pub mod dots;
pub mod ink;
pub mod model;
pub mod paste;
