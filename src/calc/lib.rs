//! What is true: rules, statistics, motion and answers. Pure: no file, clock, random number, log, window or thread.
pub mod motion;
pub mod statistics;
