//! Why a statistic cannot be worked out: what was given, what is allowed, what to do.

use std::fmt;

/// Greatest magnitude of a single value that the statistics accept, in the value's own unit.
///
/// Squares of larger numbers could overflow. No time, speed or day count of a press comes near it.
pub const MAGNITUDE_MAX: f64 = 1.0e100;

/// Reason for a refusal. The sentence shown to the person is its `Display` text.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub enum StatisticsError {
    /// Fewer values than the statistic needs.
    TooFewValues {
        /// Least number that the statistic needs.
        needed: usize,
        /// Number that was given.
        given: usize,
    },
    /// A value is not a number, is infinite, or is so great that its square would overflow.
    NotUsable {
        /// What the value stands for, such as "value" or "speed".
        what: &'static str,
        /// Place in the list, counted from 0.
        index: usize,
        /// The value as given.
        given: f64,
    },
    /// A setting lies outside its permitted range (both ends permitted).
    OutOfRange {
        /// What the setting stands for.
        what: &'static str,
        /// The setting as given.
        given: f64,
        /// Least permitted.
        least: f64,
        /// Greatest permitted.
        greatest: f64,
    },
    /// A setting or weight that must be more than zero is not.
    NotPositive {
        /// What it stands for.
        what: &'static str,
        /// The number as given.
        given: f64,
    },
    /// Two lists that belong together differ in length.
    DifferentLengths {
        /// Length of the first list.
        first: usize,
        /// Length of the second list.
        second: usize,
    },
    /// All points stand at the same place, so no slope can be told from them.
    SamePlace {
        /// What is the same for all of them, such as "speed" or "day".
        what: &'static str,
        /// The common value.
        at: f64,
    },
}

impl fmt::Display for StatisticsError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::TooFewValues { needed, given } => {
                write!(f, "There are {given} values. At least {needed} are needed. Add more values.")
            }
            Self::NotUsable { what, index, given } => write!(
                f,
                "Number {} of the list ({what}) is {given}. It must be a finite number of ordinary size. Correct the entry.",
                index + 1
            ),
            Self::OutOfRange { what, given, least, greatest } => {
                write!(f, "The {what} is {given}. It must be from {least} to {greatest}. Choose another value.")
            }
            Self::NotPositive { what, given } => {
                write!(f, "The {what} is {given}. It must be a finite number greater than 0. Correct the entry.")
            }
            Self::DifferentLengths { first, second } => write!(
                f,
                "One list has {first} values and the other {second}. Both must have the same number. Complete the shorter one."
            ),
            Self::SamePlace { what, at } => write!(
                f,
                "All points have the same {what} ({at}). At least two different ones are needed. Add a point at another {what}."
            ),
        }
    }
}

impl std::error::Error for StatisticsError {}

/// Refuses the first value that is not finite or whose square could overflow.
pub(crate) fn check_usable(what: &'static str, values: &[f64]) -> Result<(), StatisticsError> {
    for (index, &given) in values.iter().enumerate() {
        if !is_usable(given) {
            return Err(StatisticsError::NotUsable { what, index, given });
        }
    }
    Ok(())
}

/// Refuses a setting that is not a number from `least` to `greatest`.
pub(crate) fn check_range(what: &'static str, given: f64, least: f64, greatest: f64) -> Result<(), StatisticsError> {
    if least <= given && given <= greatest {
        Ok(())
    } else {
        Err(StatisticsError::OutOfRange { what, given, least, greatest })
    }
}

/// Refuses a setting that is not usable or not greater than zero.
pub(crate) fn check_positive(what: &'static str, given: f64) -> Result<(), StatisticsError> {
    if is_usable(given) && 0.0 < given { Ok(()) } else { Err(StatisticsError::NotPositive { what, given }) }
}

/// Refuses points whose coordinates are not equally many and all usable, or that are fewer than `needed`.
pub(crate) fn check_points(
    x_name: &'static str,
    x: &[f64],
    y_name: &'static str,
    y: &[f64],
    needed: usize,
) -> Result<(), StatisticsError> {
    if x.len() != y.len() {
        return Err(StatisticsError::DifferentLengths { first: x.len(), second: y.len() });
    }
    if x.len() < needed {
        return Err(StatisticsError::TooFewValues { needed, given: x.len() });
    }
    check_usable(x_name, x)?;
    check_usable(y_name, y)
}

/// Refuses a single number that is not usable.
pub(crate) fn check_one(what: &'static str, given: f64) -> Result<(), StatisticsError> {
    check_range(what, given, -MAGNITUDE_MAX, MAGNITUDE_MAX)
}

/// Whether a single number is finite and of ordinary size.
pub(crate) fn is_usable(value: f64) -> bool {
    // The comparison is false for NaN, which is what is wanted.
    value.abs() <= MAGNITUDE_MAX
}
