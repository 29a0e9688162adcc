//! A stop test as far as it is filled in: what the form edits, for a test that exists and for the first one of a press.

use calc::calendar::Moment;
use calc::stop_test::{BrakeState, ClockStart, Condition, Instrument, StopPath, StopTest, Valves};
use calc::units::{Angle, Mass, Pressure, Rate, Time};
use jiff::civil::Date;

/// A stop test of which some figures may still be missing.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct PartialTest {
    /// When.
    pub at: Option<Moment>,
    /// Who measured.
    pub by: String,
    /// Crank angle at the stop command.
    pub angle: Option<Angle>,
    /// Speed of the crank.
    pub speed: Option<Rate>,
    /// Mass of the upper die.
    pub upper_die: Option<Mass>,
    /// Counterbalance pressure.
    pub counterbalance: Option<Pressure>,
    /// Operating pressure.
    pub operating_pressure: Option<Pressure>,
    /// Temperature of the brake.
    pub brake: Option<BrakeState>,
    /// Which stop.
    pub path: Option<StopPath>,
    /// Which valves.
    pub valves: Option<Valves>,
    /// What started the clock.
    pub clock_start: Option<ClockStart>,
    /// Name of the instrument.
    pub instrument: String,
    /// Its number.
    pub serial: String,
    /// When it was calibrated.
    pub calibrated: Option<Date>,
    /// Until when that holds.
    pub calibration_due: Option<Date>,
    /// The stops.
    pub stops: Vec<Time>,
}

/// One change of a stop test.
#[derive(Clone, PartialEq, Debug)]
#[allow(missing_docs)] // Each variant is the field of the same name.
pub enum Edit {
    At(Moment),
    By(String),
    Angle(Angle),
    Speed(Rate),
    UpperDie(Mass),
    Counterbalance(Option<Pressure>),
    OperatingPressure(Option<Pressure>),
    Brake(BrakeState),
    Path(StopPath),
    Valves(Valves),
    ClockStart(ClockStart),
    Instrument(String),
    Serial(String),
    Calibrated(Option<Date>),
    CalibrationDue(Option<Date>),
}

impl Edit {
    /// What is changed, as undo names it.
    pub fn label(&self) -> &'static str {
        match self {
            Self::At(_) => "change date of a stop test",
            Self::By(_) => "change who timed a stop test",
            Self::Angle(_) => "change crank angle of a stop test",
            Self::Speed(_) => "change speed of a stop test",
            Self::UpperDie(_) => "change upper die of a stop test",
            Self::Counterbalance(_) => "change counterbalance pressure of a stop test",
            Self::OperatingPressure(_) => "change operating pressure of a stop test",
            Self::Brake(_) => "change brake temperature of a stop test",
            Self::Path(_) => "change stop path of a stop test",
            Self::Valves(_) => "change valves of a stop test",
            Self::ClockStart(_) => "change clock start of a stop test",
            Self::Instrument(_) | Self::Serial(_) => "change instrument of a stop test",
            Self::Calibrated(_) | Self::CalibrationDue(_) => "change calibration of a stop test",
        }
    }
}

impl PartialTest {
    /// Everything that an existing test holds.
    pub fn of(test: &StopTest) -> Self {
        Self {
            at: Some(test.at),
            by: test.by.clone(),
            angle: Some(test.condition.angle),
            speed: Some(test.condition.speed),
            upper_die: Some(test.condition.upper_die),
            counterbalance: test.condition.counterbalance,
            operating_pressure: test.condition.operating_pressure,
            brake: Some(test.condition.brake),
            path: Some(test.condition.path),
            valves: Some(test.condition.valves),
            clock_start: Some(test.clock_start),
            instrument: test.instrument.name.clone(),
            serial: test.instrument.serial.clone(),
            calibrated: test.instrument.calibrated,
            calibration_due: test.instrument.calibration_due,
            stops: test.stops.clone(),
        }
    }

    /// Carries out one change.
    pub fn apply(&mut self, edit: Edit) {
        match edit {
            Edit::At(at) => self.at = Some(at),
            Edit::By(by) => self.by = by,
            Edit::Angle(angle) => self.angle = Some(angle),
            Edit::Speed(speed) => self.speed = Some(speed),
            Edit::UpperDie(mass) => self.upper_die = Some(mass),
            Edit::Counterbalance(pressure) => self.counterbalance = pressure,
            Edit::OperatingPressure(pressure) => self.operating_pressure = pressure,
            Edit::Brake(brake) => self.brake = Some(brake),
            Edit::Path(path) => self.path = Some(path),
            Edit::Valves(valves) => self.valves = Some(valves),
            Edit::ClockStart(clock_start) => self.clock_start = Some(clock_start),
            Edit::Instrument(name) => self.instrument = name,
            Edit::Serial(serial) => self.serial = serial,
            Edit::Calibrated(date) => self.calibrated = date,
            Edit::CalibrationDue(date) => self.calibration_due = date,
        }
    }

    /// The test, or the names of what is missing.
    ///
    /// # Errors
    /// What must be stated before there is a test.
    pub fn complete(&self) -> Result<StopTest, Vec<&'static str>> {
        let missing: Vec<&'static str> = [
            ("date", self.at.is_none()),
            ("crank angle", self.angle.is_none()),
            ("speed", self.speed.is_none()),
            ("upper die", self.upper_die.is_none()),
            ("brake", self.brake.is_none()),
            ("stop path", self.path.is_none()),
            ("valves", self.valves.is_none()),
            ("clock start", self.clock_start.is_none()),
        ]
        .into_iter()
        .filter_map(|(name, is_missing)| is_missing.then_some(name))
        .collect();
        let condition = || {
            Some(Condition {
                angle: self.angle?,
                speed: self.speed?,
                upper_die: self.upper_die?,
                counterbalance: self.counterbalance,
                operating_pressure: self.operating_pressure,
                brake: self.brake?,
                path: self.path?,
                valves: self.valves?,
            })
        };
        let instrument = Instrument {
            name: self.instrument.clone(),
            serial: self.serial.clone(),
            calibrated: self.calibrated,
            calibration_due: self.calibration_due,
        };
        match (self.at, condition(), self.clock_start) {
            (Some(at), Some(condition), Some(clock_start)) => {
                Ok(StopTest { at, by: self.by.clone(), condition, clock_start, instrument, stops: self.stops.clone() })
            }
            _ => Err(missing),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::window::sheets::sample::{TEN, stop_test};

    #[test]
    fn a_complete_test_survives_the_way_there_and_back() {
        let test = stop_test("2026-10-05 09:30", 90, &TEN);
        assert_eq!(PartialTest::of(&test).complete(), Ok(test));
    }

    #[test]
    fn an_empty_one_names_all_that_is_missing_and_nothing_is_filled_in() {
        let missing = PartialTest::default().complete().unwrap_err();
        assert_eq!(
            missing,
            ["date", "crank angle", "speed", "upper die", "brake", "stop path", "valves", "clock start"]
        );
    }
}
