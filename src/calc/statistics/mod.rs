//! Statistics of stops and readings: pure functions on lists of plain numbers.
//!
//! No dates and no units here: the caller hands over days, milliseconds or strokes per minute and gets the same unit back.
//! Nothing here decides whether a safeguard holds.

mod error;
mod normal;
mod student_t;
mod sum;
mod summary;
mod tolerance;

pub use error::{MAGNITUDE_MAX, StatisticsError};
pub use summary::Summary;
pub use tolerance::{
    COUNT_MAX, SHARE_LEAST, SHARE_MAX, confidence_of_greatest, tolerance_factor_one_sided, upper_tolerance_bound,
};
