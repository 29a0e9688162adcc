//! A stop drawn over time: crank speed, slide speed, travel, brake torque and pressure.

use super::dormand_prince::Step;
use super::drive::Drive;
use super::limits;
use super::refusal::MotionRefusal;
use super::solver::run_to_standstill;
use super::stop::{Stop, StopCommand, Tolerance, stop_from};
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
/// Between the steps of the solver the curves are interpolated to fourth order: exact enough to draw, while the figures of the stop come
/// from the steps themselves.
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
    let mut steps: Vec<(f64, Step)> = Vec::new();
    let found = run_to_standstill(
        drive,
        law,
        command.start_angle_rad(),
        command.speed_rad_s(),
        tolerance.relative(),
        |start_s, step| steps.push((start_s, *step)),
    )?;
    let stop = stop_from(drive, law, command, &found)?;
    let points = (0..=intervals)
        .map(|index| {
            if index == intervals {
                return point(drive, law, found.time_s, found.angle_rad, 0.0);
            }
            let time_s = found.time_s * index as f64 / intervals as f64;
            if time_s <= law.clutch_release_s() {
                let speed = command.speed_rad_s();
                let angle = command.start_angle_rad() + speed * time_s;
                return point(drive, law, time_s, angle, speed);
            }
            let after = steps.partition_point(|(start_s, _)| *start_s <= time_s);
            let (start_s, step) = &steps[after.max(1) - 1];
            let share = (time_s - start_s) / step.length_s;
            point(
                drive,
                law,
                time_s,
                step.angle_rad(share),
                step.speed_rad_s(share),
            )
        })
        .collect();
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
