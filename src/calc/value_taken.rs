//! Which value of several timed stops is taken forward into the distance.

use crate::statistics::{Summary, upper_tolerance_bound};
use crate::units::Time;

/// A way of taking one value forward from several stops.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum ValueTaken {
    /// The arithmetic mean.
    Mean,
    /// The longest stop measured.
    Greatest,
    /// The longest stop, or mean + 3 s where that is more.
    GreatestOrMeanPlus3s,
    /// Upper one-sided tolerance bound: 95 % of stops with 95 % confidence, never less than the longest stop.
    Tolerance95,
    /// Upper one-sided tolerance bound: 99 % of stops with 95 % confidence, never less than the longest stop.
    Tolerance99,
}

impl ValueTaken {
    /// Every choice, in the order in which a form offers them.
    pub const ALL: &[Self] =
        &[Self::Mean, Self::Greatest, Self::GreatestOrMeanPlus3s, Self::Tolerance95, Self::Tolerance99];

    /// The name in files.
    pub const fn key(self) -> &'static str {
        match self {
            Self::Mean => "mean",
            Self::Greatest => "greatest",
            Self::GreatestOrMeanPlus3s => "mean-plus-3s",
            Self::Tolerance95 => "tolerance-95-95",
            Self::Tolerance99 => "tolerance-99-95",
        }
    }

    /// The name on screen and paper.
    pub const fn words(self) -> &'static str {
        match self {
            Self::Mean => "mean",
            Self::Greatest => "longest stop",
            Self::GreatestOrMeanPlus3s => "longest stop or mean + 3 s",
            Self::Tolerance95 => "tolerance bound 95/95",
            Self::Tolerance99 => "tolerance bound 99/95",
        }
    }

    /// The value of `stops`, rounded up to a whole microsecond.
    ///
    /// `None` when the stops are too few for it: one for mean and longest stop, two for the rest.
    pub fn of(self, stops: &[Time]) -> Option<Time> {
        let greatest = *stops.iter().max()?;
        match self {
            Self::Mean => {
                let sum: i128 = stops.iter().map(|stop| i128::from(stop.base())).sum();
                Some(Time::from_base(crate::round::divide_up(sum, stops.len() as i128)))
            }
            Self::Greatest => Some(greatest),
            Self::GreatestOrMeanPlus3s => {
                let summary = summary_ms(stops)?;
                Some(greatest.max(Time::from_ms_up(summary.mean_plus_3_s()?)?))
            }
            Self::Tolerance95 => bound(stops, 0.95, greatest),
            Self::Tolerance99 => bound(stops, 0.99, greatest),
        }
    }
}

/// Summary of stops in milliseconds; `None` without stops.
pub fn summary_ms(stops: &[Time]) -> Option<Summary> {
    let ms: Vec<f64> = stops.iter().map(|stop| stop.to_f64()).collect();
    Summary::of(&ms).ok()
}

fn bound(stops: &[Time], coverage: f64, greatest: Time) -> Option<Time> {
    let bound = upper_tolerance_bound(&summary_ms(stops)?, coverage, 0.95).ok()?;
    Some(greatest.max(Time::from_ms_up(bound)?))
}
