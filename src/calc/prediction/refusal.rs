//! Why no stop is predicted.

use std::fmt;

use crate::motion::MotionRefusal;

/// Why no stop is predicted. Its `Display` text is the sentence that is shown.
#[derive(Clone, PartialEq, Debug)]
pub enum PredictionRefusal {
    /// Figures are not entered yet, by name.
    Missing(Vec<&'static str>),
    /// The clutch of the press runs the stroke out once engaged.
    FullRevolution,
    /// The distance of the safeguard does not depend on a stop.
    NoStopNeeded,
    /// The predicted time is no time between 0 and a day.
    NoTime,
    /// The stop model refuses the figures.
    Motion(MotionRefusal),
}

impl From<MotionRefusal> for PredictionRefusal {
    fn from(refusal: MotionRefusal) -> Self {
        Self::Motion(refusal)
    }
}

impl fmt::Display for PredictionRefusal {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Missing(names) => write!(f, "Not entered yet: {}.", names.join(", ")),
            Self::FullRevolution => f.write_str(
                "The clutch is a full-revolution clutch: once engaged it runs the stroke out, and there is no stop to predict.",
            ),
            Self::NoStopNeeded => f.write_str("The distance of this safeguard does not depend on how the press stops."),
            Self::NoTime => f.write_str("The predicted time is no time between 0 and a day. Check the figures of the drive."),
            Self::Motion(refusal) => refusal.fmt(f),
        }
    }
}

impl std::error::Error for PredictionRefusal {}
