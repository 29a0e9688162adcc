//! What the sheet works out from a press and a condition, kept while neither has changed.

use std::sync::Arc;

use calc::motion::{Estimate, MotionRefusal, StopCurves, StopPrediction, StopSetup, Tolerance, Unknowns, stop_curves};
use calc::plant_settings::PlantSettings;
use calc::prediction::{
    At, FitDeclined, LaterTest, Margin, PathFit, Predicted, PredictedDistance, PredictionRefusal, compare_later_tests,
    distance_from_prediction, fit_path, setup_of, worst_of_closing_half,
};
use calc::press::Press;
use calc::stop_test::{ClockStart, StopPath};
use calc::units::{Angle, Mass, Rate};

/// The condition on the sheet; what is `None` has not been stated.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Wanted {
    pub angle: Option<Angle>,
    pub speed: Option<Rate>,
    pub upper_die: Option<Mass>,
    pub path: StopPath,
    /// Whether the brake of the fit is used where there is a fit.
    pub by_fit: bool,
}

impl Wanted {
    /// At 90°, as fast and as heavy as the press is used, on the path that its first safeguard calls for.
    pub fn of(press: &Press) -> Self {
        Self {
            angle: Some(Angle::deg(90)),
            speed: press.fastest_speed,
            upper_die: press.heaviest_die,
            path: press.safeguards.first().map_or(StopPath::Normal, |safeguard| safeguard.stop_path),
            by_fit: true,
        }
    }

    /// The condition when everything is stated.
    pub fn at(&self) -> Result<At, String> {
        let missing: Vec<&str> = [
            ("the crank angle", self.angle.is_none()),
            ("the speed", self.speed.is_none()),
            ("the upper die (0 is an answer)", self.upper_die.is_none()),
        ]
        .into_iter()
        .filter_map(|(name, is_missing)| is_missing.then_some(name))
        .collect();
        match (self.angle, self.speed, self.upper_die) {
            (Some(angle), Some(speed), Some(upper_die)) => {
                Ok(At { angle, speed, upper_die, counterbalance: None, path: self.path })
            }
            _ => Err(format!("Still to be stated: {}.", missing.join(", "))),
        }
    }
}

/// A predicted stop with everything shown about it.
pub struct PredictedStop {
    pub setup: StopSetup,
    pub curves: StopCurves,
    /// From the fit, where its brake is used.
    pub interval: Option<StopPrediction>,
    /// The start angle of the closing half with the longest stop at this speed, in degrees, and its stop time in ms.
    pub worst: Result<(f64, f64), PredictionRefusal>,
    /// One for each safeguard of this stop path.
    pub distances: Vec<(String, PredictedDistance)>,
}

impl PredictedStop {
    /// The time taken forward into a distance, ms.
    pub fn forward_ms(&self) -> f64 {
        1e3 * self.interval.map_or(self.curves.stop.stop_time_s, |found| found.stop_time_s.high)
    }
}

/// Everything that is worked out.
pub struct Known {
    made_from: (Arc<Press>, PlantSettings, Wanted),
    pub fit: Result<PathFit, FitDeclined>,
    pub later: Vec<LaterTest>,
    pub stop: Result<PredictedStop, String>,
}

impl Known {
    /// Works everything out, or keeps what is known.
    pub fn follow(known: &mut Option<Self>, press: &Arc<Press>, settings: &PlantSettings, wanted: &Wanted) {
        let same_press = |made: &Self| Arc::ptr_eq(&made.made_from.0, press) && made.made_from.1 == *settings;
        match known {
            Some(made) if same_press(made) && made.made_from.2 == *wanted => {}
            Some(made) if same_press(made) && made.made_from.2.path == wanted.path => {
                made.made_from.2 = wanted.clone();
                made.stop = predicted(press, settings, wanted, made.fit.as_ref().ok());
            }
            _ => {
                let fit = fit_path(press, wanted.path, Unknowns::DelayAndTorque);
                let stop = predicted(press, settings, wanted, fit.as_ref().ok());
                let later = compare_later_tests(press, wanted.path);
                *known = Some(Self { made_from: (press.clone(), settings.clone(), wanted.clone()), fit, later, stop });
            }
        }
    }
}

fn predicted(
    press: &Press,
    settings: &PlantSettings,
    wanted: &Wanted,
    fit: Option<&PathFit>,
) -> Result<PredictedStop, String> {
    let fit = fit.filter(|_| wanted.by_fit);
    let at = wanted.at()?;
    let words = |refusal: PredictionRefusal| refusal.to_string();
    let of_motion = |refusal: MotionRefusal| refusal.to_string();
    let setup = fit.map_or_else(|| setup_of(press, &at), |fit| fit.setup(press, &at)).map_err(words)?;
    let law = setup.brake.torque_law(setup.path);
    let curves = stop_curves(&setup.drive, &law, setup.command, Tolerance::STANDARD, 240).map_err(of_motion)?;
    let interval = match fit {
        Some(fit) => Some(fit.predict(press, &at, 1).map_err(words)?),
        None => None,
    };
    let worst = worst_of_closing_half(&setup)
        .map(|(found, stop)| (found.command.start_angle_rad().to_degrees(), stop.stop_time_s * 1e3));
    let margin = if interval.is_some() { Margin::Interval } else { Margin::None };
    let mut stop = PredictedStop { setup, curves, interval, worst, distances: Vec::new() };
    stop.distances = distances(press, settings, wanted.path, stop.forward_ms(), margin);
    Ok(stop)
}

/// What each safeguard of a stop path would need for a predicted time.
pub fn distances(
    press: &Press,
    settings: &PlantSettings,
    path: StopPath,
    ms: f64,
    margin: Margin,
) -> Vec<(String, PredictedDistance)> {
    let clock_start = press.prediction.as_ref().map_or(ClockStart::ValveCurrent, |data| data.clock_start);
    let predicted = Predicted { ms, margin, clock_start };
    press
        .safeguards
        .iter()
        .filter(|safeguard| safeguard.stop_path == path)
        .filter_map(|safeguard| {
            let found = distance_from_prediction(press, safeguard, settings.rules, predicted).ok()?;
            Some((safeguard.name.clone(), found))
        })
        .collect()
}

/// A fitted figure with its interval: "58.2 (57.1 to 59.3) ms".
pub fn estimate_words(estimate: Estimate, scale: f64, unit: &str, digits: usize) -> String {
    let Estimate { value, low, high } = estimate;
    format!("{:.digits$} {unit} ({:.digits$} to {:.digits$})", value * scale, low * scale, high * scale)
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::path::Path;

    fn sample(tag: &str) -> (Arc<Press>, PlantSettings) {
        let path = format!("{}/../../sample-presses/presses/{tag}.ron", env!("CARGO_MANIFEST_DIR"));
        let (settings, press) = plant::open_press_file(Path::new(&path)).unwrap();
        (Arc::new(press), settings)
    }

    #[test]
    fn a_sample_press_is_predicted_by_its_fit_and_stays_unproven() {
        let (press, settings) = sample("E-115");
        let mut known = None;
        let mut wanted = Wanted::of(&press);
        Known::follow(&mut known, &press, &settings, &wanted);
        let by_fit = known.as_ref().unwrap().stop.as_ref().unwrap();
        let interval = by_fit.interval.unwrap().stop_time_s;
        assert!(interval.low < interval.value && interval.value < interval.high);
        assert_eq!(by_fit.distances.len(), 2);
        assert!(by_fit.forward_ms() > 1e3 * by_fit.curves.stop.stop_time_s);
        let before = by_fit.distances[0].1.outcome.clone().unwrap().required;
        wanted.upper_die = Some(Mass::from_base(1_500_000));
        Known::follow(&mut known, &press, &settings, &wanted);
        let heavier = known.as_ref().unwrap().stop.as_ref().unwrap();
        assert!(before < heavier.distances[0].1.outcome.clone().unwrap().required, "a heavier die needs more distance");
        assert_eq!(heavier.distances[0].1.answer(), calc::verdict::Answer::Unproven);
    }

    #[test]
    fn what_is_not_stated_is_said() {
        let (press, settings) = sample("E-101");
        let mut known = None;
        let wanted = Wanted { speed: None, ..Wanted::of(&press) };
        Known::follow(&mut known, &press, &settings, &wanted);
        let found = known.as_ref().unwrap();
        assert_eq!(found.stop.as_ref().err().unwrap(), "Still to be stated: the speed.");
        assert!(found.fit.as_ref().unwrap_err().to_string().contains("slide mass"));
    }
}
