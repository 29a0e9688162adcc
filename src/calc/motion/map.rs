//! The stop over start angle and speed, and the worst cell where it matters.
//!
//! Rows can be worked out in any order and on any thread by whoever calls: a map shares nothing between its rows.

use super::drive::Drive;
use super::limits;
use super::refusal::MotionRefusal;
use super::stop::{StopCommand, Tolerance, stop};
use super::torque_law::TorqueLaw;
use core::f64::consts::TAU;
use core::ops::Range;

/// Answer to a progress report.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum GoOn {
    /// Go on.
    Yes,
    /// Stop; the rows done so far are dropped.
    Stop,
}

/// One cell: the stop from one angle at one speed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum MapCell {
    /// The stop succeeds.
    Stop {
        /// From the stop command to standstill.
        stop_time_s: f64,
        /// How far the crank turns.
        stop_angle_rad: f64,
        /// How far the slide is from where it was at the stop command, downwards positive.
        slide_travel_m: f64,
    },
    /// There is no figure, and why.
    Refused(MotionRefusal),
}

/// All cells of one start angle, in the order of the speeds.
#[derive(Clone, Debug, PartialEq)]
pub struct MapRow {
    /// Crank angle at the stop command.
    pub start_angle_rad: f64,
    /// One cell for each speed.
    pub cells: Vec<MapCell>,
}

/// Where the worst cell is looked for, by the crank angle at the stop command.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum AngleRange {
    /// From top to bottom dead centre.
    ClosingHalf,
    /// Marked by the user, in the running direction; may lead across top dead centre.
    Marked {
        /// First angle.
        from_rad: f64,
        /// Last angle.
        to_rad: f64,
    },
}

/// The longest stop of a range.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WorstStop {
    /// Crank angle at the stop command.
    pub start_angle_rad: f64,
    /// Crank speed.
    pub speed_rad_s: f64,
    /// From the stop command to standstill.
    pub stop_time_s: f64,
    /// How far the crank turns.
    pub stop_angle_rad: f64,
    /// How far the slide is from where it was at the stop command, downwards positive.
    pub slide_travel_m: f64,
}

/// The worst cell of a range. A cell without a figure is worse than every figure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum WorstCell {
    /// Every cell has a figure; this is the longest stop time.
    Longest(WorstStop),
    /// A cell has no figure.
    Refused {
        /// Crank angle at the stop command.
        start_angle_rad: f64,
        /// Crank speed.
        speed_rad_s: f64,
        /// Why.
        refusal: MotionRefusal,
    },
}

/// A map to be worked out: start angles by speeds, one die, one stop path.
#[derive(Clone, Debug, PartialEq)]
pub struct StopMap {
    drive: Drive,
    law: TorqueLaw,
    start_angles_rad: Vec<f64>,
    speeds_rad_s: Vec<f64>,
    tolerance: Tolerance,
}

impl StopMap {
    /// A map over one turn in equal steps from top dead centre (360 of them give one for each degree) and a list of speeds.
    ///
    /// # Refuses
    /// [`MotionRefusal::MapSize`] for no angles or speeds, more than 36,000 angles or 10,000 speeds; [`MotionRefusal::OutOfRange`] for a
    /// speed out of range.
    pub fn over_one_turn(
        drive: Drive,
        law: TorqueLaw,
        angle_count: usize,
        speeds_rad_s: Vec<f64>,
        tolerance: Tolerance,
    ) -> Result<Self, MotionRefusal> {
        let size = |what: &'static str, given: usize, greatest: usize| {
            if 1 <= given && given <= greatest { Ok(()) } else { Err(MotionRefusal::MapSize { what, given, greatest }) }
        };
        size("start angles", angle_count, limits::MAP_ANGLES_MAX)?;
        size("speeds", speeds_rad_s.len(), limits::MAP_SPEEDS_MAX)?;
        for speed_rad_s in &speeds_rad_s {
            limits::SPEED.check(*speed_rad_s)?;
        }
        let start_angles_rad = (0..angle_count).map(|index| TAU * index as f64 / angle_count as f64).collect();
        Ok(Self { drive, law, start_angles_rad, speeds_rad_s, tolerance })
    }

    /// Number of rows: one for each start angle.
    #[must_use]
    pub fn row_count(&self) -> usize {
        self.start_angles_rad.len()
    }

    /// Speeds, in the order of the cells of a row.
    #[must_use]
    pub fn speeds_rad_s(&self) -> &[f64] {
        &self.speeds_rad_s
    }

    /// Works out some of the rows. After each row `progress` is told how many of them are done and says whether to go on.
    ///
    /// # Refuses
    /// [`MotionRefusal::MapSize`] for rows that do not exist; [`MotionRefusal::Stopped`] if `progress` says so.
    pub fn map_rows(
        &self,
        rows: Range<usize>,
        mut progress: impl FnMut(usize) -> GoOn,
    ) -> Result<Vec<MapRow>, MotionRefusal> {
        let angles = self.start_angles_rad.get(rows.clone()).ok_or(MotionRefusal::MapSize {
            what: "rows",
            given: rows.end,
            greatest: self.row_count(),
        })?;
        let mut done = Vec::with_capacity(angles.len());
        for &start_angle_rad in angles {
            let cells = self.speeds_rad_s.iter().map(|&speed_rad_s| self.cell(start_angle_rad, speed_rad_s)).collect();
            done.push(MapRow { start_angle_rad, cells });
            if progress(done.len()) == GoOn::Stop {
                return Err(MotionRefusal::Stopped);
            }
        }
        Ok(done)
    }

    fn cell(&self, start_angle_rad: f64, speed_rad_s: f64) -> MapCell {
        let found = StopCommand::new(start_angle_rad, speed_rad_s)
            .and_then(|command| stop(&self.drive, &self.law, command, self.tolerance));
        match found {
            Ok(found) => MapCell::Stop {
                stop_time_s: found.stop_time_s,
                stop_angle_rad: found.stop_angle_rad,
                slide_travel_m: found.slide_travel_m,
            },
            Err(refusal) => MapCell::Refused(refusal),
        }
    }

    /// The worst cell of a range: the first cell without a figure, else the longest stop time (the first of equals).
    ///
    /// # Refuses
    /// [`MotionRefusal::NothingInRange`] if no row lies in the range; [`MotionRefusal::OutOfRange`] for a marked angle outside the turn.
    pub fn worst(&self, rows: &[MapRow], range: AngleRange) -> Result<WorstCell, MotionRefusal> {
        let (from_rad, to_rad) = match range {
            AngleRange::ClosingHalf => (0.0, self.drive.kinematics().bottom_dead_centre_rad()),
            AngleRange::Marked { from_rad, to_rad } => {
                (limits::START_ANGLE.check(from_rad)?, limits::START_ANGLE.check(to_rad)?)
            }
        };
        // An angle of a degree step, worked out twice, may differ in its last digits.
        let slack = 1e-12;
        let is_inside = |angle: f64| {
            let after_start = from_rad - slack <= angle;
            let before_end = angle <= to_rad + slack;
            if from_rad <= to_rad { after_start && before_end } else { after_start || before_end }
        };
        let mut longest: Option<WorstStop> = None;
        for row in rows.iter().filter(|row| is_inside(row.start_angle_rad)) {
            let start_angle_rad = row.start_angle_rad;
            for (&speed_rad_s, cell) in self.speeds_rad_s.iter().zip(&row.cells) {
                match *cell {
                    MapCell::Refused(refusal) => {
                        return Ok(WorstCell::Refused { start_angle_rad, speed_rad_s, refusal });
                    }
                    MapCell::Stop { stop_time_s, stop_angle_rad, slide_travel_m } => {
                        if longest.is_none_or(|worst| worst.stop_time_s < stop_time_s) {
                            longest = Some(WorstStop {
                                start_angle_rad,
                                speed_rad_s,
                                stop_time_s,
                                stop_angle_rad,
                                slide_travel_m,
                            });
                        }
                    }
                }
            }
        }
        longest.map(WorstCell::Longest).ok_or(MotionRefusal::NothingInRange)
    }
}
