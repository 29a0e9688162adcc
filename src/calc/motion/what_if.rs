//! What a change would do to a stop: another die, speed, pressure, wear, or valve needle.

use super::brake::{Brake, StopPath};
use super::brake_condition::BrakeCondition;
use super::drive::{Counterbalance, Drive};
use super::refusal::MotionRefusal;
use super::stop::{Stop, StopCommand, Tolerance, stop};

/// Everything that one stop depends on.
#[derive(Clone, Debug, PartialEq)]
pub struct StopSetup {
    /// What moves.
    pub drive: Drive,
    /// What stops it.
    pub brake: Brake,
    /// Which way the brake is asked to stop.
    pub path: StopPath,
    /// Angle and speed at the stop command.
    pub command: StopCommand,
}

/// One thing changed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Change {
    /// Another upper die.
    UpperDieMass {
        /// Its mass.
        mass_kg: f64,
    },
    /// Another speed.
    Speed {
        /// Crank speed.
        speed_rad_s: f64,
    },
    /// Another operating pressure of the clutch-brake.
    OperatingPressure {
        /// Gauge pressure.
        pressure_pa: f64,
    },
    /// Another pressure in the counterbalance cylinders.
    CounterbalancePressure {
        /// Gauge pressure.
        pressure_pa: f64,
    },
    /// Wear and heat. The setup's brake is taken as new and cold.
    Condition(BrakeCondition),
    /// Another setting of the valve needle of the metered stage.
    MeteredTimeConstant {
        /// Time constant of the metered stage.
        time_constant_s: f64,
    },
}

/// A stop before and after.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WhatIf {
    /// As set up.
    pub before: Stop,
    /// With all changes made.
    pub after: Stop,
}

impl StopSetup {
    /// The same setup with one thing changed.
    ///
    /// # Refuses
    /// A figure out of range, and [`MotionRefusal::NoSuchPart`] if the press has no such part.
    pub fn with(&self, change: &Change) -> Result<Self, MotionRefusal> {
        let mut changed = self.clone();
        match *change {
            Change::UpperDieMass { mass_kg } => {
                changed.drive = self.drive.with_upper_die_mass(mass_kg)?;
            }
            Change::Speed { speed_rad_s } => {
                changed.command = StopCommand::new(self.command.start_angle_rad(), speed_rad_s)?;
            }
            Change::CounterbalancePressure { pressure_pa } => {
                let Counterbalance::Cylinders { area_m2, .. } = self.drive.data().counterbalance else {
                    return Err(MotionRefusal::NoSuchPart {
                        wanted: "another counterbalance pressure",
                        present: "no counterbalance given by pressure and piston area",
                    });
                };
                changed.drive = self.drive.with_counterbalance(Counterbalance::Cylinders { pressure_pa, area_m2 })?;
            }
            Change::Condition(condition) => {
                changed.brake = self.brake.with_condition(&condition)?;
            }
            Change::OperatingPressure { pressure_pa } => {
                changed.brake = self.change_pressure_brake("another operating pressure", |brake| {
                    brake.with_operating_pressure(pressure_pa)
                })?;
            }
            Change::MeteredTimeConstant { time_constant_s } => {
                changed.brake = self.change_pressure_brake("another setting of the metered stage", |brake| {
                    brake.with_metered_time_constant(time_constant_s)
                })?;
            }
        }
        Ok(changed)
    }

    fn change_pressure_brake(
        &self,
        wanted: &'static str,
        change: impl FnOnce(&super::brake::PressureBrake) -> Result<super::brake::PressureBrake, MotionRefusal>,
    ) -> Result<Brake, MotionRefusal> {
        match &self.brake {
            Brake::Pressure(brake) => change(brake).map(Brake::Pressure),
            Brake::Ramp(_) => {
                Err(MotionRefusal::NoSuchPart { wanted, present: "a brake known by its times, not by its pressures" })
            }
        }
    }

    /// Predicts the stop of this setup.
    ///
    /// # Refuses
    /// As [`super::stop()`].
    pub fn stop(&self, tolerance: Tolerance) -> Result<Stop, MotionRefusal> {
        stop(&self.drive, &self.brake.torque_law(self.path), self.command, tolerance)
    }
}

/// Compares a setup with itself after all changes, made in order.
///
/// # Refuses
/// If the setup or the changed setup is refused.
pub fn what_if(setup: &StopSetup, changes: &[Change], tolerance: Tolerance) -> Result<WhatIf, MotionRefusal> {
    let mut changed = setup.clone();
    for change in changes {
        changed = changed.with(change)?;
    }
    Ok(WhatIf { before: setup.stop(tolerance)?, after: changed.stop(tolerance)? })
}
