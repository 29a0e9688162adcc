//! A stop drawn over time: crank speed, slide speed, travel, brake torque and pressure.

use super::drive::Drive;
use super::limits;
use super::refusal::MotionRefusal;
use super::solver::run_to_standstill;
use super::stop::{Stop, StopCommand, Tolerance, stop};
use super::torque_law::TorqueLaw;

/// One moment of a stop.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CurvePoint {
    /// Since the stop command.
    pub time_s: f64,
    /// Crank angle from top dead centre; grows past one turn.
    pub angle_rad: f64,
    /// Crank speed.
    pub crank_speed_rad_s: f64,
    /// Slide travel below top dead centre.
    pub travel_m: f64,
    /// Slide speed, downwards positive.
    pub slide_speed_m_s: f64,
    /// Brake torque.
    pub brake_torque_nm: f64,
    /// Brake pressure, if the brake is known by its pressures.
    pub pressure_pa: Option<f64>,
}

/// A stop with its curves.
#[derive(Clone, Debug, PartialEq)]
pub struct StopCurves {
    /// The figures of the stop, the same as from [`super::stop()`].
    pub stop: Stop,
    /// Evenly spaced moments from the stop command to standstill, both included.
    pub points: Vec<CurvePoint>,
}

/// Predicts one stop and samples it at `intervals + 1` evenly spaced moments from the stop command to standstill.
///
/// Every point is as exact as the stop itself: it comes from a shortened step of the solver, not from an interpolation.
///
/// # Refuses
/// As [`super::stop()`]; [`MotionRefusal::MapSize`] for no or more than 100,000 intervals.
pub fn stop_curves(
    drive: &Drive,
    law: &TorqueLaw,
    command: StopCommand,
    tolerance: Tolerance,
    intervals: usize,
) -> Result<StopCurves, MotionRefusal> {
    if intervals == 0 || limits::INTERVALS_MAX < intervals {
        return Err(MotionRefusal::MapSize {
            what: "intervals of a curve",
            given: intervals,
            greatest: limits::INTERVALS_MAX,
        });
    }
    let stop = stop(drive, law, command, tolerance)?;
    let moment_s = |index: usize| stop.stop_time_s * index as f64 / intervals as f64;
    let speed = command.speed_rad_s();
    let mut points = Vec::with_capacity(intervals + 1);
    while points.len() < intervals && moment_s(points.len()) <= law.clutch_release_s() {
        let time_s = moment_s(points.len());
        let angle = command.start_angle_rad() + speed * time_s;
        points.push(point(drive, law, time_s, angle, speed));
    }
    let found = run_to_standstill(
        drive,
        law,
        command.start_angle_rad(),
        speed,
        tolerance.relative(),
        |start_s, length_s, state_after| {
            while points.len() < intervals && moment_s(points.len()) <= start_s + length_s {
                let time_s = moment_s(points.len());
                let state = state_after(time_s - start_s);
                points.push(point(drive, law, time_s, state.angle_rad, state.speed_rad_s));
            }
        },
    )?;
    points.push(point(drive, law, found.time_s, found.angle_rad, 0.0));
    Ok(StopCurves { stop, points })
}

fn point(drive: &Drive, law: &TorqueLaw, time_s: f64, angle_rad: f64, speed: f64) -> CurvePoint {
    let kinematics = drive.kinematics();
    CurvePoint {
        time_s,
        angle_rad,
        crank_speed_rad_s: speed,
        travel_m: kinematics.travel_m(angle_rad),
        slide_speed_m_s: speed * kinematics.slopes(angle_rad).0,
        brake_torque_nm: law.torque_nm(time_s),
        pressure_pa: law.pressure_pa(time_s),
    }
}
