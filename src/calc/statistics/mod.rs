//! Statistics of stops and readings: pure functions on lists of plain numbers.
//!
//! No dates and no units here: the caller hands over days, milliseconds or strokes per minute and gets the same unit back.
//! Nothing here decides whether a safeguard holds.

mod delay_friction;
mod error;
mod forecast;
mod normal;
mod regression;
mod step_change;
mod student_t;
mod sum;
mod summary;
mod tolerance;
mod trend;

pub use delay_friction::{
    Change, Changes, DatedStops, Growth, GrowthFound, NoSplit, SPLIT_CONFIDENCE, SPLIT_DATES_MIN, Split,
    compare_two_dates, follow_dates, split_delay_and_braking,
};
pub use error::{MAGNITUDE_MAX, StatisticsError};
pub use forecast::{
    FORECAST_HORIZON_DAYS, FORECAST_POINTS_MIN, FORECAST_PROBABILITY, FORECAST_SLOPE_CONFIDENCE, Forecast, NoForecast,
    Reached, forecast_limit,
};
pub use regression::{Interval, Line};
pub use step_change::{
    CUSUM_ALLOWANCE_IN_SIGMA, CUSUM_DECISION_IN_SIGMA_CALM, CUSUM_DECISION_IN_SIGMA_QUICK, Cusum, CusumSettings,
    CusumSignal, EWMA_LAMBDA_HIGH, EWMA_LAMBDA_LOW, EWMA_WIDTH_HIGH, EWMA_WIDTH_LOW, Ewma, EwmaPoint, EwmaSettings,
    cusum, ewma,
};
pub use student_t::student_t_two_sided;
pub(crate) use student_t::student_t_upper_quantile;
pub use summary::Summary;
pub use tolerance::{
    COUNT_MAX, SHARE_LEAST, SHARE_MAX, confidence_of_greatest, tolerance_factor_one_sided, upper_tolerance_bound,
};
pub use trend::{EXACT_COUNT_MAX, MannKendall, TREND_COUNT_MAX, TheilSen, TrendProbability, mann_kendall, theil_sen};
