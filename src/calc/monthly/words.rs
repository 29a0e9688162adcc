//! The standing in the words of maintenance.

use jiff::civil::Date;

use super::change::{Change, Drift, Suspect};
use super::series::date_of;
use super::{LimitLine, Standing};
use crate::round::{Towards, time_text};
use crate::statistics::{Forecast, Growth, NoForecast, NoSplit, Reached};

const MONTHS: [&str; 12] = [
    "January",
    "February",
    "March",
    "April",
    "May",
    "June",
    "July",
    "August",
    "September",
    "October",
    "November",
    "December",
];

/// "March 2028"
fn month(date: Date) -> String {
    format!("{} {}", MONTHS[(date.month() - 1) as usize], date.year())
}

/// The plain sentence that stands first: what the readings do and when the limit is reached.
pub fn sentence(standing: &Standing) -> String {
    if standing.series.points.is_empty() {
        return "No reading under the reference condition since the brake was last changed.".into();
    }
    let crossed = standing.crossed().map(|line| {
        format!(
            "The latest reading is at or over \"{}\" ({}): {}.",
            line.name,
            time_text(line.value, Towards::Smaller),
            line.consequence.words()
        )
    });
    let forecast = match (&crossed, &standing.forecast, standing.binding_line()) {
        (None, Some(forecast), Some(line)) => forecast_sentence(forecast, line),
        _ => None,
    };
    let parts = [crossed, Some(change_sentence(&standing.change)), forecast];
    parts.into_iter().flatten().collect::<Vec<_>>().join(" ")
}

/// What the readings do.
pub fn change_sentence(change: &Change) -> String {
    match change {
        Change::CannotTell { given, needed } => {
            format!(
                "Cannot tell yet: {given} reading{} since the brake was last changed, at least {needed} are needed.",
                if *given == 1 { "" } else { "s" }
            )
        }
        Change::Steady(drift) => format!("Steady: {}, which may be chance.", per_month(drift)),
        Change::Drifting(drift) => format!("Drifting: {}.", per_month(drift)),
        Change::Stepped { step, .. } => {
            let near = step
                .event
                .as_ref()
                .map_or(String::new(), |event| format!(", near \"{}\" on {}", event.kind.words(), event.at));
            format!(
                "Stepped from {:.1} to {:.1} ms ({}) in {}{near}.",
                step.before_ms,
                step.after_ms,
                signed(step.after_ms - step.before_ms, "ms"),
                month(step.began)
            )
        }
    }
}

fn per_month(drift: &Drift) -> String {
    format!("{} a month", signed(drift.per_month_ms, "ms"))
}

/// A change with its sign, to a tenth, or to two digits where it is smaller than that.
fn signed(value: f64, unit: &str) -> String {
    let digits = if value.abs() < 0.095 { format!("{:.2}", value.abs()) } else { format!("{:.1}", value.abs()) };
    let is_zero = digits.chars().all(|c| c == '0' || c == '.');
    let sign = if is_zero {
        ""
    } else if value < 0.0 {
        "\u{2212}"
    } else {
        "+"
    };
    format!("{sign}{digits} {unit}")
}

/// When the limit is reached; `None` where the change already says all there is to say.
pub fn forecast_sentence(forecast: &Forecast, line: &LimitLine) -> Option<String> {
    let name = format!("\"{}\" ({})", line.name, time_text(line.value, Towards::Smaller));
    Some(match forecast {
        Forecast::AlreadyReached(Reached::Reading { day, .. }) => {
            format!("A reading of {} reached {name}.", date_of(*day)?)
        }
        Forecast::AlreadyReached(Reached::Line { .. }) => {
            format!("The line through the readings has reached {name}.")
        }
        Forecast::AlreadyReached(Reached::Bound { .. }) => {
            format!("The next reading may already reach {name} (upper 95 % bound).")
        }
        Forecast::Ahead { bound_day, line_day, .. } => {
            let by_line =
                line_day.and_then(date_of).map_or(String::new(), |on| format!(", the line itself about {}", month(on)));
            format!(
                "A reading may reach {name} from about {} (upper 95 % bound){by_line}.",
                month(date_of(*bound_day)?)
            )
        }
        Forecast::CannotTell(NoForecast::TooFewPoints { .. } | NoForecast::OneDay) => return None,
        Forecast::CannotTell(NoForecast::SlopeNotDistinguishable { .. }) => {
            format!("No date can be given for {name}.")
        }
        Forecast::CannotTell(NoForecast::Falling { .. }) => format!("The readings fall away from {name}."),
        Forecast::CannotTell(NoForecast::BeyondHorizon { .. }) => format!("{name} is more than ten years away."),
    })
}

/// What has grown.
pub fn suspect_sentence(suspect: &Suspect) -> String {
    let per = if suspect.is_per_day { " a month" } else { "" };
    let scale = if suspect.is_per_day { super::change::DAYS_PER_MONTH } else { 1.0 };
    let delay = || {
        suspect.found.changes.map_or(String::new(), |changes| {
            let interval = changes.delay.interval;
            format!(
                "{}{per}, 95 % between {:.2} and {:.2}",
                signed(changes.delay.estimate * scale, "ms"),
                interval.low * scale,
                interval.high * scale
            )
        })
    };
    let braking = || {
        suspect.found.changes.map_or(String::new(), |changes| {
            let at = scale * changes.speed;
            let interval = changes.braking.interval;
            format!(
                "{}{per} at {:.0} strokes/min, 95 % between {:.2} and {:.2}",
                signed(changes.braking.estimate * at, "ms"),
                changes.speed,
                interval.low * at,
                interval.high * at
            )
        })
    };
    match suspect.found.growth {
        Growth::DelayGrew => format!(
            "The delay has grown ({}), not the braking: look at valve, exhaust, hose, seals and pressure.",
            delay()
        ),
        Growth::BrakingGrew => format!(
            "The braking has grown ({}), not the delay: look at lining, springs and oil on the lining.",
            braking()
        ),
        Growth::Both => format!("Delay ({}) and braking ({}) have both grown.", delay(), braking()),
        Growth::Neither => "Neither delay nor braking is shown to have grown.".into(),
        Growth::CannotTell { why } => match why {
            NoSplit::OneSpeed { .. } => {
                "Delay and braking cannot be told apart: take readings at a second speed.".into()
            }
            NoSplit::NoScatterKnown => {
                "Delay and braking cannot be told apart yet: take one more stop at each speed.".into()
            }
            NoSplit::TooFewDates { needed, given } => {
                format!(
                    "Delay and braking cannot be told apart yet: {given} of {needed} days have readings at two speeds."
                )
            }
            NoSplit::NotSeparable => {
                "The stop has grown, but delay and braking cannot be told apart: take readings at speeds further apart."
                    .into()
            }
        },
    }
}
