//! The sheets of the window, one for each thing that is known about a press.

pub mod events;
pub mod form;
pub mod press;
pub mod stop_tests;

#[cfg(test)]
#[path = "../../tests/fixture/press.rs"]
mod sample;
