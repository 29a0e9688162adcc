//! How a press stands by its monthly readings: against its limits, in its drift, in steps, and in what has grown.

mod change;
mod limit_lines;
mod series;
mod words;

pub use change::{Change, Drift, Step, Suspect, suspect};
pub use limit_lines::{Consequence, LimitLine, limit_lines};
pub use series::{Point, Series, date_of, day_of, series};
pub use words::{change_sentence, forecast_sentence, sentence, suspect_sentence};

use jiff::civil::Date;

use crate::plant_settings::PlantSettings;
use crate::press::Press;
use crate::statistics::{Forecast, forecast_limit};

/// How a press stands by its readings.
#[derive(Clone, PartialEq, Debug)]
pub struct Standing {
    /// The readings of the reference setup since the brake last became another one.
    pub series: Series,
    /// The limits, lowest first.
    pub lines: Vec<LimitLine>,
    /// The limit that is reached first: the lowest of those whose crossing means more than a warning.
    pub binding: Option<usize>,
    /// Drift and step.
    pub change: Change,
    /// When the binding limit is reached; `None` without such a limit or without readings.
    pub forecast: Option<Forecast>,
    /// What has grown where readings exist at several speeds: delay or braking.
    pub suspect: Option<Suspect>,
}

impl Standing {
    /// The limit that is reached first.
    pub fn binding_line(&self) -> Option<&LimitLine> {
        Some(&self.lines[self.binding?])
    }

    /// The gravest limit that the latest reading is at or above.
    pub fn crossed(&self) -> Option<&LimitLine> {
        let latest = self.series.points.last()?;
        self.lines.iter().rfind(|line| line.value.to_f64() <= latest.mean_ms)
    }
}

/// How a press stands on `today`, or `None` while it has no reading and no reference setup.
pub fn standing(press: &Press, plant: &PlantSettings, today: Date) -> Option<Standing> {
    let series = series(press)?;
    let lines = limit_lines(press, plant, today, &series);
    let binding = lines.iter().position(|line| line.consequence != Consequence::Warn);
    let days: Vec<f64> = series.points.iter().map(|point| point.day).collect();
    let means: Vec<f64> = series.points.iter().map(|point| point.mean_ms).collect();
    let change = change::change(press, &series);
    // A line through a step tells nothing of what comes; the readings of the new level do.
    let from = match &change {
        Change::Stepped { step, .. } => days.iter().position(|day| *day >= day_of(step.began)).unwrap_or(0),
        _ => 0,
    };
    let forecast =
        binding.and_then(|index| forecast_limit(&days[from..], &means[from..], lines[index].value.to_f64()).ok());
    Some(Standing { lines, binding, change, forecast, suspect: suspect(press, &series), series })
}
