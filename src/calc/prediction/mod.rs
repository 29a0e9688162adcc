//! What a press's stop will take before it is timed: its drive and brake as people enter them, the stop they predict, the fit to its
//! stop tests, and the distance that a rule set would then ask for.
//!
//! Everything here is a prediction, and every safeguard judged by it is *Unproven*: only stops timed at the press prove a distance.
//!
//! The path: [`PredictionData`] of a press, checked by [`drive_of`] and [`brake_of`] into the types of [`crate::motion`]; [`setup_of`] joins
//! them with a condition; [`fit_path`] finds delay and torque from the stop tests of one stop path; [`distance_from_prediction`] asks a
//! rule set; [`compare_later_tests`] holds stops timed later against what the earlier ones had predicted.

mod compare;
mod data;
mod distance;
mod fit;
mod refusal;
mod setup;

pub use compare::{LaterTest, compare_later_tests};
pub use data::{BrakeData, Lift, Metered, PredictionData, PressureData, RampData, TravelEntry};
pub use distance::{Margin, Predicted, PredictedDistance, distance_from_prediction};
pub use fit::{FitDeclined, LeftOut, PathFit, fit_path};
pub use refusal::PredictionRefusal;
pub use setup::{At, brake_of, drive_of, kinematics_of, motion_path, setup_of, worst_of_closing_half};
