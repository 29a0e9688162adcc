//! What is true: rules, statistics, motion and answers.
//!
//! Pure: no file, clock, random number, log, window or thread. Safety arithmetic is whole-number arithmetic on exact
//! [`units`]; statistics and motion use floating point and enter it through [`units::Time::from_ms_up`] alone. Every result is
//! a derivation ([`steps::WorkedSteps`]) whose lines carry their source and [`basis::Basis`].

pub mod assess;
pub mod basis;
pub mod calendar;
pub mod decimal;
pub mod in_force;
pub mod inverse;
pub mod limits;
pub mod monthly;
pub mod motion;
pub mod plant_settings;
pub mod prediction;
pub mod press;
pub mod reading;
pub mod refusal;
pub mod remedy;
pub mod round;
pub mod rules;
pub mod safeguard;
pub mod schedule;
pub mod sentence;
pub mod statistics;
pub mod steps;
pub mod stop_test;
pub mod time_parts;
pub mod units;
pub mod value_taken;
pub mod verdict;
