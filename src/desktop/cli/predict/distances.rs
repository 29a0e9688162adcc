//! What the safeguards of a press would need if it stopped as predicted.

use calc::motion::{Drive, StopCommand, StopPrediction, Unknowns};
use calc::plant_settings::PlantSettings;
use calc::prediction::{Margin, Predicted, PredictedDistance, distance_from_prediction, fit_path};
use calc::press::Press;
use calc::stop_test::ClockStart;
use calc::units::LengthUnit;
use serde_json::{Value, json};

use super::super::args::DriveArgs;
use super::super::{Outcome, json};
use super::read::{is_all_of_press, known, path};

/// The distances, and the prediction of the press's own stop tests behind them where there is one.
#[derive(Default)]
pub struct Distances {
    fitted: Option<StopPrediction>,
    guards: Vec<(String, PredictedDistance)>,
}

impl Distances {
    /// Of every safeguard that calls for this stop. The upper end of the prediction interval counts where the press's stop tests
    /// speak of this very drive and brake, else the time of the stop model.
    pub fn of(
        args: &DriveArgs,
        (plant, press): &(PlantSettings, Press),
        drive: &Drive,
        command: StopCommand,
        stop_time_s: f64,
    ) -> Self {
        let fitted = is_all_of_press(args)
            .then(|| fit_path(press, path(args), Unknowns::DelayAndTorque).ok()?.fitted.predict(drive, command, 1).ok())
            .flatten();
        let predicted = Predicted {
            ms: 1e3 * fitted.map_or(stop_time_s, |fitted| fitted.stop_time_s.high),
            margin: if fitted.is_some() { Margin::Interval } else { Margin::None },
            clock_start: known(Some(press)).map_or(ClockStart::ValveCurrent, |data| data.clock_start),
        };
        let guards = press
            .safeguards
            .iter()
            .filter(|safeguard| safeguard.stop_path == path(args))
            .filter_map(|safeguard| {
                let found = distance_from_prediction(press, safeguard, plant.rules, predicted).ok()?;
                Some((safeguard.name.clone(), found))
            })
            .collect();
        Self { fitted, guards }
    }

    pub fn fitted_json(&self) -> Value {
        self.fitted.map_or(Value::Null, |fitted| {
            json!({
                "stop_time_ms": fitted.stop_time_s.value * 1e3,
                "interval_ms": [fitted.stop_time_s.low * 1e3, fitted.stop_time_s.high * 1e3],
                "stop_angle_deg": fitted.stop.stop_angle_rad.to_degrees(),
                "slide_travel_mm": fitted.stop.slide_travel_m * 1e3,
            })
        })
    }

    pub fn guards_json(&self) -> Vec<Value> {
        let unit = LengthUnit::Millimetre;
        self.guards
            .iter()
            .map(|(name, found)| {
                json!({
                    "safeguard": name,
                    "answer": found.answer().key(),
                    "stopping_us": found.stopping.base(),
                    "required_um": json::um(found.outcome.as_ref().ok().map(|demand| demand.required)),
                    "spare_um": json::um(found.spare()),
                    "words": found.words(unit),
                    "missing": found.missing,
                    "steps": json::steps(&found.steps, unit),
                })
            })
            .collect()
    }

    pub fn tell(&self, outcome: &mut Outcome) {
        if let Some(fitted) = self.fitted {
            let time = fitted.stop_time_s;
            outcome.line(format!(
                "From the stop tests: {:.3} ms, 95 % of stops between {:.3} and {:.3} ms.",
                time.value * 1e3,
                time.low * 1e3,
                time.high * 1e3
            ));
        }
        for (name, found) in &self.guards {
            outcome.line(format!("{name}: {}", found.words(LengthUnit::Millimetre)));
            for missing in &found.missing {
                outcome.line(format!("  {missing}"));
            }
        }
    }
}
