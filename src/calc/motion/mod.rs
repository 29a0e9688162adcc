//! Motion of the slide: what a stop will take, from drive data or from a fit to measured stops.
//!
//! Published mechanics only: slider-crank kinematics, inertia reduced to the crank, Coulomb friction brake. All figures are SI with the
//! unit at the end of the field name; angles count from top dead centre in the running direction, times from the stop command.
//! A prediction is never a measurement: nothing here can make a safeguard hold.
//!
//! The path of a calculation: a [`Drive`] (kinematics, inertia, masses), a [`Brake`] turned into a [`TorqueLaw`] for one [`StopPath`], a
//! [`StopCommand`] (angle and speed), then [`stop`] or [`stop_curves`]. [`StopMap`] repeats it over angles and speeds, [`fit_stops`] finds
//! brake figures from measured stops, [`what_if`] compares a setup with a changed one.
//!
//! Not covered: elastic shafts, backlash, slip in the clutch before it lets go, eccentric presses with more than one crank out of phase.

mod brake;
mod brake_by_parts;
mod brake_condition;
mod curves;
mod drive;
mod fit;
mod fit_inference;
mod least_squares;
mod limits;
mod link_drive;
mod map;
mod refusal;
mod runge_kutta;
mod slider_crank;
mod solver;
mod stop;
mod torque_law;
mod what_if;

pub use brake::{
    Brake, CLUTCH_RELEASE_PRESSURE_PA_ASSUMED, ENGAGED_PRESSURE_PA_TYPICAL, Exhaust, METERED_FROM_PRESSURE_PA_TYPICAL,
    PressureBrake, PressureBrakeData, RampBrake, StopPath, TOUCH_PRESSURE_PA_TYPICAL,
};
pub use brake_by_parts::{BrakeParts, MeanRadius, mean_radius_m, spring_force_n};
pub use brake_condition::BrakeCondition;
pub use curves::{CurvePoint, StopCurves, stop_curves};
pub use drive::{
    Counterbalance, Drive, DriveData, Kinematics, STANDARD_GRAVITY_M_S2, rad_from_deg, rad_s_from_per_min,
};
pub use fit::{BuildUp, FitCondition, FitRequest, FittedBrake, FittedCondition, StopPrediction, Unknowns, fit_stops};
pub use fit_inference::Estimate;
pub use limits::Limit;
pub use link_drive::{LinkDrive, ROWS_LEAST, ROWS_MOST, TravelRow};
pub use map::{AngleRange, GoOn, MapCell, MapRow, StopMap, WorstCell, WorstStop};
pub use refusal::MotionRefusal;
pub use slider_crank::SliderCrank;
pub use stop::{EnergyBalance, Stop, StopCommand, StopSpans, Tolerance, stop};
pub use torque_law::TorqueLaw;
pub use what_if::{Change, StopSetup, WhatIf, what_if};
