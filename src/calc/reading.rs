//! Readings: the monthly check of a brake, a few stops under the press's reference condition.

use crate::calendar::Moment;
use crate::stop_test::{ClockStart, Condition, Instrument};
use crate::units::Time;

/// One monthly check.
#[derive(Clone, PartialEq, Debug)]
pub struct Reading {
    /// When it was taken.
    pub at: Moment,
    /// Who took it.
    pub by: String,
    /// How and where it was taken.
    pub setup: ReadingSetup,
    /// With what it was timed.
    pub instrument: Instrument,
    /// The timed stops, in the order of timing.
    pub stops: Vec<Time>,
}

/// How and where readings are taken; only readings of one setup are compared with each other.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct ReadingSetup {
    /// Condition of the press.
    pub condition: Condition,
    /// Which event started the timing.
    pub clock_start: ClockStart,
    /// Where the figure comes from.
    pub place: ReadingPlace,
}

/// Where the figure of a reading comes from.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum ReadingPlace {
    /// Timed in a stop within the stroke.
    StrokeTest,
    /// Shown by the brake monitor for the stop at the top of the stroke.
    MonitorDisplay,
}

impl ReadingPlace {
    /// Every choice, in the order in which a form offers them.
    pub const ALL: &[Self] = &[Self::StrokeTest, Self::MonitorDisplay];

    /// The name in files.
    pub const fn key(self) -> &'static str {
        match self {
            Self::StrokeTest => "stroke-test",
            Self::MonitorDisplay => "monitor-display",
        }
    }

    /// The name on screen and paper.
    pub const fn words(self) -> &'static str {
        match self {
            Self::StrokeTest => "timed within the stroke",
            Self::MonitorDisplay => "top stop, shown by the brake monitor",
        }
    }
}

impl Reading {
    /// Mean of its stops in milliseconds; `None` without stops.
    pub fn mean_ms(&self) -> Option<f64> {
        crate::value_taken::summary_ms(&self.stops).map(|summary| summary.mean())
    }
}
