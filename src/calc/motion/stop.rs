//! One stop: what it takes from the stop command to standstill, and whether the brake then holds.

use super::drive::Drive;
use super::limits;
use super::refusal::MotionRefusal;
use super::solver::{Standstill, run_to_standstill};
use super::torque_law::TorqueLaw;

/// Where and how fast the crank is when the stop command comes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StopCommand {
    start_angle_rad: f64,
    speed_rad_s: f64,
}

impl StopCommand {
    /// A stop command at a crank angle (0 to one turn, from top dead centre in the running direction) and speed.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`]: an angle outside the turn, a speed of zero, below zero or beyond 500 rad/s, anything not a number.
    pub fn new(start_angle_rad: f64, speed_rad_s: f64) -> Result<Self, MotionRefusal> {
        Ok(Self {
            start_angle_rad: limits::START_ANGLE.check(start_angle_rad)?,
            speed_rad_s: limits::SPEED.check(speed_rad_s)?,
        })
    }

    /// Crank angle at the stop command.
    #[must_use]
    pub fn start_angle_rad(&self) -> f64 {
        self.start_angle_rad
    }

    /// Drive speed of the crank.
    #[must_use]
    pub fn speed_rad_s(&self) -> f64 {
        self.speed_rad_s
    }
}

/// Relative tolerance of a calculation: the local error of the speed as a share of the drive speed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tolerance(f64);

impl Tolerance {
    /// The tolerance of every figure shown: 1e-9.
    pub const STANDARD: Self = Self(1e-9);

    /// The tolerance inside the fit, whose differences need more digits: 1e-12.
    pub(super) const FINE: Self = Self(1e-12);

    /// Another tolerance.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] outside 1e-13 to 1e-3.
    pub fn new(relative: f64) -> Result<Self, MotionRefusal> {
        limits::TOLERANCE.check(relative).map(Self)
    }

    /// The tolerance as a share.
    #[must_use]
    pub fn relative(&self) -> f64 {
        self.0
    }
}

/// How the stop time divides. The four add up to the stop time; a part the stop did not reach is 0.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StopSpans {
    /// Stop command until anything happens at the brake.
    pub delay_s: f64,
    /// Then until the clutch lets go; 0 for a ramp brake.
    pub clutch_release_s: f64,
    /// Then until the brake has built up (ramp: full torque; pressure: 95 % of it).
    pub build_up_s: f64,
    /// Then until standstill.
    pub braking_s: f64,
}

/// Where the energy went between clutch release and standstill:
/// kinetic energy + work of weight less counterbalance = brake work + friction work, checked on every stop.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EnergyBalance {
    /// Kinetic energy at clutch release.
    pub kinetic_energy_j: f64,
    /// Work of the weight less the counterbalance; negative if the slide was lifted against it.
    pub gravity_work_j: f64,
    /// Work turned to heat in the brake.
    pub brake_work_j: f64,
    /// Work of the running friction.
    pub friction_work_j: f64,
}

impl EnergyBalance {
    /// Energy unaccounted for, as a share of the energy turned over.
    #[must_use]
    pub fn missing_share(&self) -> f64 {
        let turned_over = self.kinetic_energy_j + self.gravity_work_j.abs() + self.friction_work_j;
        (self.kinetic_energy_j + self.gravity_work_j - self.brake_work_j - self.friction_work_j) / turned_over
    }
}

/// A stop, calculated. A prediction: no measurement.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Stop {
    /// From the stop command to standstill.
    pub stop_time_s: f64,
    /// How far the crank turned since the stop command.
    pub stop_angle_rad: f64,
    /// How far the slide is from where it was at the stop command: positive is downwards, negative upwards. A stop across bottom dead
    /// centre gives the difference, not the way there and back.
    pub slide_travel_m: f64,
    /// Stated error of the stop time: the sum of the solver's local error estimates, with a margin. Says nothing of the data's errors.
    pub stop_time_error_s: f64,
    /// How the time divides.
    pub spans: StopSpans,
    /// Where the energy went.
    pub energy: EnergyBalance,
    /// Heat in the brake per stop, including what it took while dragging against a clutch still engaged.
    pub brake_heat_j: f64,
    /// Brake torque at the moment of standstill.
    pub holding_torque_nm: f64,
    /// Torque that weight less counterbalance puts on the crank there; the brake holds because it gives at least as much.
    pub load_torque_nm: f64,
}

impl Stop {
    /// Mean heating power of the brake when the press is stopped this often.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for a negative rate or one that is not a number.
    pub fn mean_brake_power_w(&self, stops_per_s: f64) -> Result<f64, MotionRefusal> {
        Ok(self.brake_heat_j * limits::STOP_RATE.check(stops_per_s)?)
    }
}

/// Predicts one stop.
///
/// Until the clutch lets go the crank runs at drive speed. From then on the equation of motion is solved to standstill; afterwards the brake
/// must hold: T_b >= |(m g - F_cb) s'| at the moment of standstill.
///
/// # Refuses
/// [`MotionRefusal::CannotHold`]; no standstill within 10 s or two turns; more than 20,000 steps; energy not balanced to 100 times the
/// tolerance.
///
/// # Source
/// Handbook mechanics: slider-crank kinematics, inertia reduced to the crank, Coulomb friction.
pub fn stop(drive: &Drive, law: &TorqueLaw, command: StopCommand, tolerance: Tolerance) -> Result<Stop, MotionRefusal> {
    let found = run_to_standstill(drive, law, command.start_angle_rad, command.speed_rad_s, tolerance.0, |_, _, _| {})?;
    stop_from(drive, law, command, &found)
}

/// Completes a standstill to a stop, if the brake holds there.
pub(super) fn stop_from(
    drive: &Drive,
    law: &TorqueLaw,
    command: StopCommand,
    found: &Standstill,
) -> Result<Stop, MotionRefusal> {
    let load_torque_nm = drive.load_torque_nm(found.angle_rad);
    if found.brake_torque_nm < load_torque_nm.abs() {
        return Err(MotionRefusal::CannotHold {
            angle_rad: found.angle_rad % core::f64::consts::TAU,
            brake_torque_nm: found.brake_torque_nm,
            load_torque_nm: load_torque_nm.abs(),
            full_torque_nm: law.full_torque_nm(),
        });
    }
    let kinematics = drive.kinematics();
    let end_s = found.time_s;
    let delay_end_s = law.dead_time_s();
    let release_end_s = law.clutch_release_s();
    // A brake may be built up before the clutch lets go, and standstill may come before it is built up.
    let build_up_end_s = law.built_up_s().max(release_end_s).min(end_s);
    Ok(Stop {
        stop_time_s: end_s,
        stop_angle_rad: found.angle_rad - command.start_angle_rad,
        slide_travel_m: kinematics.travel_m(found.angle_rad) - kinematics.travel_m(command.start_angle_rad),
        stop_time_error_s: found.time_error_s,
        spans: StopSpans {
            delay_s: delay_end_s,
            clutch_release_s: release_end_s - delay_end_s,
            build_up_s: build_up_end_s - release_end_s,
            braking_s: end_s - build_up_end_s,
        },
        energy: EnergyBalance {
            kinetic_energy_j: found.kinetic_energy_j,
            gravity_work_j: found.gravity_work_j,
            brake_work_j: found.brake_work_j,
            friction_work_j: found.friction_work_j,
        },
        brake_heat_j: found.brake_work_j + law.impulse_before_release_nm_s() * command.speed_rad_s,
        holding_torque_nm: found.brake_torque_nm,
        load_torque_nm,
    })
}
