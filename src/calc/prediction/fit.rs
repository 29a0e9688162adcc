//! Delay and torque of the brake from the press's own stop tests, one stop path at a time.

use std::fmt;

use super::data::{BrakeData, PressureData};
use super::refusal::PredictionRefusal;
use super::setup::{At, drive_of, motion_path, pressures_of};
use crate::in_force::tests_in_force;
use crate::motion::{
    BuildUp, Estimate, FitCondition, FitRequest, FittedBrake, StopPrediction, StopSetup, Unknowns, fit_stops,
};
use crate::press::Press;
use crate::statistics::Summary;
use crate::stop_test::{BrakeState, ClockStart, StopPath, StopTest, Valves};
use crate::units::Mass;
use crate::value_taken::summary_ms;

/// A stop test that the fit does not use, and why.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct LeftOut {
    /// Its place in the press's list.
    pub test: usize,
    /// Why, as a clause: "only the first valve acted".
    pub why: String,
}

/// The brake that explains the stop tests of one path best.
#[derive(Clone, PartialEq, Debug)]
pub struct PathFit {
    /// The stop path.
    pub path: StopPath,
    /// The event from which its delay counts.
    pub clock_start: ClockStart,
    /// Delay, torque, residuals.
    pub fitted: FittedBrake,
    /// The stop tests that were used, in the order of [`FittedBrake::conditions`].
    pub used: Vec<usize>,
    /// The others of this path, and why.
    pub left_out: Vec<LeftOut>,
}

/// No fit, and why.
#[derive(Clone, PartialEq, Debug)]
pub struct FitDeclined {
    /// Why.
    pub why: PredictionRefusal,
    /// How many stop tests could be used.
    pub used: usize,
    /// The stop tests of this path that could not be used.
    pub left_out: Vec<LeftOut>,
}

impl fmt::Display for FitDeclined {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        self.why.fmt(f)?;
        if !self.left_out.is_empty() {
            let tests = if self.left_out.len() == 1 { "stop test was" } else { "stop tests were" };
            let first = &self.left_out[0];
            write!(f, " {} {tests} left out; test {}: {}.", self.left_out.len(), first.test + 1, first.why)?;
        }
        Ok(())
    }
}

/// Fits delay and torque, and if so asked the running friction, to the stop tests in force of one path.
///
/// A test counts with the mean of its stops and their scatter. Tests with one valve alone, with a cold brake, timed from another event
/// than the press's prediction data name, at another operating pressure than the brake's, or without scatter are left out.
///
/// # Refuses
/// Missing figures of drive or brake build-up, and whatever [`fit_stops`] refuses; above all data that cannot tell delay from friction.
pub fn fit_path(press: &Press, path: StopPath, unknowns: Unknowns) -> Result<PathFit, FitDeclined> {
    let candidates = tests_in_force(press, path);
    let clock_start = press.prediction.as_ref().map_or(ClockStart::ValveCurrent, |data| data.clock_start);
    let mut used = Vec::new();
    let mut left_out = Vec::new();
    let mut conditions = Vec::new();
    let declined = |why: PredictionRefusal, used: usize, left_out: &[LeftOut]| FitDeclined {
        why,
        used,
        left_out: left_out.to_vec(),
    };
    // What the press lacks is said even before it has a test.
    drive_of(press, Mass::ZERO, None).map_err(|why| declined(why, 0, &[]))?;
    let build_up = build_up_of(press, path).map_err(|why| declined(why, 0, &[]))?;
    for index in candidates {
        let test = &press.stop_tests[index];
        match usable(press, test, clock_start) {
            Ok(summary) => match condition(press, test, &summary) {
                Ok(condition) => {
                    used.push(index);
                    conditions.push(condition);
                }
                Err(why) => return Err(declined(why, used.len(), &left_out)),
            },
            Err(why) => left_out.push(LeftOut { test: index, why }),
        }
    }
    let request = FitRequest { conditions, build_up, unknowns };
    match fit_stops(&request) {
        Ok(fitted) => Ok(PathFit { path, clock_start, fitted, used, left_out }),
        Err(why) => Err(declined(why.into(), used.len(), &left_out)),
    }
}

impl PathFit {
    /// Predicts the mean of `stops` stops in a condition, with its 95 % prediction interval.
    ///
    /// # Refuses
    /// As [`drive_of`] and [`FittedBrake::predict`].
    pub fn predict(&self, press: &Press, at: &At, stops: u32) -> Result<StopPrediction, PredictionRefusal> {
        let drive = drive_of(press, at.upper_die, at.counterbalance)?;
        Ok(self.fitted.predict(&drive, at.command()?, stops)?)
    }

    /// Everything a stop predicted by the fitted brake depends on.
    ///
    /// # Refuses
    /// As [`drive_of`]; an angle or a speed out of range.
    pub fn setup(&self, press: &Press, at: &At) -> Result<StopSetup, PredictionRefusal> {
        let drive = drive_of(press, at.upper_die, at.counterbalance)?;
        Ok(StopSetup { drive, brake: self.fitted.brake(), path: motion_path(at.path), command: at.command()? })
    }

    /// The delay in milliseconds, with its 95 % interval.
    pub fn delay_ms(&self) -> Estimate {
        let Estimate { value, low, high } = self.fitted.dead_time_s;
        Estimate { value: value * 1e3, low: low * 1e3, high: high * 1e3 }
    }
}

/// How the torque builds up, which is entered and not fitted.
fn build_up_of(press: &Press, path: StopPath) -> Result<BuildUp, PredictionRefusal> {
    match press.prediction.as_ref().map_or(BrakeData::NotStated, |data| data.brake) {
        BrakeData::NotStated => Err(PredictionRefusal::Missing(vec!["kind of brake"])),
        BrakeData::Ramp(ramp) => match ramp.rise_time {
            Some(rise) => Ok(BuildUp::Ramp { rise_time_s: rise.base() as f64 * 1e-6 }),
            None => Err(PredictionRefusal::Missing(vec!["rise time"])),
        },
        BrakeData::Pressure(pressure) => {
            Ok(BuildUp::Pressure { data: pressures_of(&pressure)?, path: motion_path(path) })
        }
    }
}

/// The figures of a test, or why it cannot be used.
fn usable(press: &Press, test: &StopTest, clock_start: ClockStart) -> Result<Summary, String> {
    let condition = &test.condition;
    if test.clock_start != clock_start {
        return Err(format!(
            "its clock started when \u{201c}{}\u{201d}, the delay counts from \u{201c}{}\u{201d}",
            test.clock_start.words(),
            clock_start.words()
        ));
    }
    if condition.valves != Valves::Both {
        return Err(format!("only one valve acted ({})", condition.valves.words()));
    }
    if condition.brake == BrakeState::Cold {
        return Err("the brake was cold".into());
    }
    let entered = match press.prediction.as_ref().map(|data| data.brake) {
        Some(BrakeData::Pressure(PressureData { engaged, .. })) => engaged,
        _ => None,
    };
    if let (Some(entered), Some(tested)) = (entered, condition.operating_pressure)
        && 100 * (entered.base() - tested.base()).abs() > entered.base()
    {
        return Err(format!("it was timed at {tested}, the brake is entered with {entered}"));
    }
    let summary = summary_ms(&test.stops).filter(|summary| 2 <= summary.count());
    let summary = summary.ok_or_else(|| "it has fewer than two stops".to_owned())?;
    match summary.standard_deviation() {
        Some(deviation) if 0.0 < deviation => Ok(summary),
        _ => Err("all its stops read the same, so their scatter is not known".into()),
    }
}

fn condition(press: &Press, test: &StopTest, summary: &Summary) -> Result<FitCondition, PredictionRefusal> {
    let at = At::of(&test.condition);
    Ok(FitCondition {
        drive: drive_of(press, at.upper_die, at.counterbalance)?,
        command: at.command()?,
        mean_stop_time_s: summary.mean() * 1e-3,
        standard_deviation_s: summary.standard_deviation().unwrap_or(0.0) * 1e-3,
        stops: u32::try_from(summary.count()).unwrap_or(u32::MAX),
    })
}

#[cfg(test)]
pub(super) mod tests {
    use super::super::setup::setup_of;
    use super::super::setup::tests::{at, press_a};
    use super::*;
    use crate::calendar::Moment;
    use crate::motion::{MotionRefusal, Tolerance};
    use crate::stop_test::{Condition, Instrument};
    use crate::units::Time;

    /// Five stops about the time of the model, a little apart from each other.
    pub fn test_at(angle: i64, speed: i64, die_kg: i64, day: &str) -> StopTest {
        let stop = setup_of(&press_a(), &at(angle, speed, die_kg)).unwrap().stop(Tolerance::STANDARD).unwrap();
        let about = (stop.stop_time_s * 1e6).round() as i64;
        StopTest {
            at: Moment::parse("Date", day).unwrap(),
            by: "A. K.".into(),
            condition: Condition {
                angle: at(angle, speed, die_kg).angle,
                speed: at(angle, speed, die_kg).speed,
                upper_die: Mass::from_base(die_kg * 1000),
                counterbalance: None,
                operating_pressure: None,
                brake: BrakeState::Warm,
                path: StopPath::Normal,
                valves: Valves::Both,
            },
            clock_start: ClockStart::ValveCurrent,
            instrument: Instrument {
                name: "timer".into(),
                serial: "1".into(),
                calibrated: None,
                calibration_due: None,
            },
            stops: [-1000, -500, 0, 500, 1000].map(|off| Time::from_base(about + off)).to_vec(),
        }
    }

    pub fn press_with_tests() -> Press {
        let mut press = press_a();
        for speed in [20, 40, 60] {
            for angle in [45, 90, 120] {
                press.stop_tests.push(test_at(angle, speed, 300, "2026-03-02"));
            }
        }
        press
    }

    #[test]
    fn the_figures_that_made_the_stops_come_back() {
        let press = press_with_tests();
        let fit = fit_path(&press, StopPath::Normal, Unknowns::DelayAndTorque).unwrap();
        assert_eq!(fit.used.len(), 9);
        assert!((fit.delay_ms().value - 45.0).abs() < 0.01, "{:?}", fit.delay_ms());
        assert!((fit.fitted.full_torque_nm.value - 4200.0).abs() < 1.0);
        let predicted = fit.predict(&press, &at(90, 60, 600), 1).unwrap();
        let stop = setup_of(&press, &at(90, 60, 600)).unwrap().stop(Tolerance::STANDARD).unwrap();
        assert!(predicted.stop_time_s.low < stop.stop_time_s && stop.stop_time_s < predicted.stop_time_s.high);
    }

    #[test]
    fn what_cannot_be_used_is_left_out_and_said() {
        let mut press = press_with_tests();
        press.stop_tests[0].condition.brake = BrakeState::Cold;
        press.stop_tests[1].condition.valves = Valves::FirstAlone;
        press.stop_tests[2].clock_start = ClockStart::ControlInput;
        let alike = vec![press.stop_tests[3].stops[0]; 5];
        press.stop_tests[3].stops = alike;
        let fit = fit_path(&press, StopPath::Normal, Unknowns::DelayAndTorque).unwrap();
        assert_eq!(fit.used, [4, 5, 6, 7, 8]);
        assert_eq!(fit.left_out.iter().map(|left| left.test).collect::<Vec<_>>(), [0, 1, 2, 3]);
    }

    #[test]
    fn one_speed_cannot_tell_delay_from_friction() {
        let mut press = press_with_tests();
        press.stop_tests.retain(|test| test.condition.speed == at(90, 40, 0).speed);
        let declined = fit_path(&press, StopPath::Normal, Unknowns::DelayAndTorque).unwrap_err();
        assert!(matches!(declined.why, PredictionRefusal::Motion(MotionRefusal::OneSpeedOnly { .. })), "{declined}");
        let none = fit_path(&press, StopPath::Emergency, Unknowns::DelayAndTorque).unwrap_err();
        assert_eq!(none.used, 0);
    }
}
