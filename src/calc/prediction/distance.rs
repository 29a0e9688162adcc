//! The distance that a rule set would ask for if the press stopped as predicted. Never a proof.

use super::refusal::PredictionRefusal;
use crate::assess::case_for;
use crate::basis::{Basis, Source};
use crate::expr;
use crate::press::Press;
use crate::round::{Towards, length_text};
use crate::rules::{Demand, RuleSetId};
use crate::safeguard::Safeguard;
use crate::steps::WorkedSteps;
use crate::stop_test::ClockStart;
use crate::time_parts::{parts_for, times_of};
use crate::units::{Length, LengthUnit, Time};
use crate::verdict::{Answer, PartState, TimePart};

/// What a predicted time holds beside the figure of the stop model.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Margin {
    /// Nothing: entered figures have no interval.
    None,
    /// It is the upper end of the 95 % prediction interval of a fit.
    Interval,
    /// The brake is changed from the fitted one; the margin of the fit is carried over to it.
    CarriedOver,
}

impl Margin {
    /// How the time came about.
    pub const fn words(self) -> &'static str {
        match self {
            Self::None => "stop model with the entered figures, without interval",
            Self::Interval => "upper end of the 95 % prediction interval of the fit",
            Self::CarriedOver => "stop model of the changed brake, with the margin of the fit carried over",
        }
    }
}

/// A predicted stopping time that is taken forward.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Predicted {
    /// The time, ms: the upper end of the prediction interval where there is one.
    pub ms: f64,
    /// What it holds beside the figure of the stop model.
    pub margin: Margin,
    /// The event from which it counts.
    pub clock_start: ClockStart,
}

/// What a rule set would ask for.
#[derive(Clone, PartialEq, Debug)]
pub struct PredictedDistance {
    /// The stopping time taken forward, rounded up.
    pub stopping: Time,
    /// The addends of the response time.
    pub parts: Vec<TimePart>,
    /// The distance, or in words why there is none.
    pub outcome: Result<Demand, String>,
    /// The installed distance that can be relied on.
    pub relied_on: Option<Length>,
    /// The derivation.
    pub steps: WorkedSteps,
    /// What is missing beside a measurement, as sentences.
    pub missing: Vec<String>,
}

impl PredictedDistance {
    /// Always Unproven: a prediction is no measurement, on whichever side the installed distance lies.
    pub const fn answer(&self) -> Answer {
        Answer::Unproven
    }

    /// Installed less required.
    pub fn spare(&self) -> Option<Length> {
        Some(self.relied_on? - self.outcome.as_ref().ok()?.required)
    }

    /// The result in one or two sentences that say that nothing is proven.
    pub fn words(&self, unit: LengthUnit) -> String {
        match &self.outcome {
            Err(why) => format!("Unproven: no distance is predicted. {why}"),
            Ok(demand) => {
                let more = if demand.strict { "more than " } else { "" };
                let required = length_text(demand.required, unit, Towards::Greater);
                let installed = match self.relied_on {
                    None => "the installed distance is not entered".to_owned(),
                    Some(relied_on) => {
                        let installed = length_text(relied_on, unit, Towards::Smaller);
                        let spare = relied_on - demand.required;
                        let compared = if demand.is_met_by(relied_on) {
                            format!("{} to spare", length_text(spare, unit, Towards::Smaller))
                        } else {
                            format!("{} too little", length_text(-spare, unit, Towards::Greater))
                        };
                        format!("{installed} installed, {compared}")
                    }
                };
                format!("Unproven, a prediction only: {more}{required} would be required, {installed}.")
            }
        }
    }
}

/// Asks a rule set what distance the safeguard would need if the press stopped in the predicted time.
///
/// The parts of the response that the clock of the prediction does not see are added as for a measured stop.
///
/// # Refuses
/// A safeguard whose distance does not depend on a stop; a time that is no time.
pub fn distance_from_prediction(
    press: &Press,
    safeguard: &Safeguard,
    rules: RuleSetId,
    predicted: Predicted,
) -> Result<PredictedDistance, PredictionRefusal> {
    if !safeguard.kind.needs_stop() {
        return Err(PredictionRefusal::NoStopNeeded);
    }
    let stopping = Time::from_ms_up(predicted.ms).ok_or(PredictionRefusal::NoTime)?;
    let mut steps = WorkedSteps::new();
    let source = Source::new("prediction, not measured", "", Basis::Arithmetic);
    steps.put("t", "predicted stopping time", expr![predicted.margin.words()], stopping, source);
    let parts = parts_for(press, safeguard, predicted.clock_start, stopping);
    let missing = parts
        .iter()
        .filter(|part| part.state == PartState::Missing)
        .map(|part| format!("The {} is neither in the predicted time nor given.", part.kind.in_sentence()))
        .collect();
    let case = case_for(press, safeguard, times_of(&parts));
    let outcome = rules.rules().demand(&case, &mut steps).map_err(|none| none.words());
    let relied_on = safeguard.installed.as_ref().map(|installed| installed.relied_on());
    Ok(PredictedDistance { stopping, parts, outcome, relied_on, steps, missing })
}

#[cfg(test)]
mod tests {
    use super::super::setup::tests::press_a;
    use super::*;
    use crate::calendar::Moment;
    use crate::safeguard::{Installed, LightCurtain, SafeguardKind, WayOver};
    use crate::stop_test::StopPath;

    fn curtain(installed_mm: i64) -> Safeguard {
        Safeguard {
            name: "front curtain".into(),
            kind: SafeguardKind::LightCurtain(LightCurtain {
                detection: Length::mm(14),
                lower_edge: None,
                over: WayOver::Closed,
                starts_stroke: false,
            }),
            stop_path: StopPath::Normal,
            device_response: Some(Time::ms(12)),
            interface_response: Some(Time::ms(8)),
            wear_allowance: Some(Time::ms(0)),
            supplement: None,
            installed: Some(Installed {
                distance: Length::mm(installed_mm),
                uncertainty: Length::ZERO,
                by: "A. K.".into(),
                at: Moment::parse("Date", "2026-10-05").unwrap(),
            }),
        }
    }

    /// ISO 13855:2010 6.2.3.1 by hand: 2000 mm/s x (150 + 12 + 8 + 10) ms + 8 (14 - 14) mm = 360 mm.
    #[test]
    fn the_distance_is_that_of_a_measured_stop_but_never_proven() {
        let mut press = press_a();
        press.control_response = Some(Time::ms(10));
        for installed in [200, 360, 2000] {
            let predicted = Predicted { ms: 150.0, margin: Margin::Interval, clock_start: ClockStart::ValveCurrent };
            let found =
                distance_from_prediction(&press, &curtain(installed), RuleSetId::Iso138552010, predicted).unwrap();
            assert_eq!(found.outcome.as_ref().unwrap().required, Length::mm(360));
            assert_eq!(found.answer(), Answer::Unproven);
            assert_eq!(found.spare(), Some(Length::mm(installed - 360)));
            assert!(found.words(LengthUnit::Millimetre).starts_with("Unproven"), "{found:?}");
        }
        let seen = Predicted { ms: 150.0, margin: Margin::None, clock_start: ClockStart::FieldEntered };
        let found = distance_from_prediction(&press, &curtain(400), RuleSetId::Iso138552010, seen).unwrap();
        assert_eq!(found.outcome.unwrap().required, Length::mm(300), "nothing the clock saw is added again");
    }

    #[test]
    fn a_time_is_rounded_up_and_no_time_is_refused() {
        let predict = |ms| {
            let predicted = Predicted { ms, margin: Margin::Interval, clock_start: ClockStart::ValveCurrent };
            distance_from_prediction(&press_a(), &curtain(400), RuleSetId::Iso138552010, predicted)
        };
        assert_eq!(predict(150.000_1).unwrap().stopping, Time::from_base(150_001));
        assert!(predict(150.0).unwrap().missing[0].contains("press control"), "the control is not given");
        assert_eq!(predict(f64::NAN).unwrap_err(), PredictionRefusal::NoTime);
    }
}
