//! Stops timed later, held against what the earlier ones had predicted.

use super::fit::fit_path;
use super::setup::At;
use crate::motion::{Estimate, Unknowns};
use crate::press::Press;
use crate::stop_test::StopPath;
use crate::value_taken::summary_ms;

/// A stop test and the prediction of its mean from the tests of earlier days alone.
#[derive(Clone, PartialEq, Debug)]
pub struct LaterTest {
    /// Its place in the press's list.
    pub test: usize,
    /// How many earlier tests the prediction rests on.
    pub earlier: usize,
    /// The predicted mean of as many stops, ms, with its 95 % prediction interval.
    pub predicted_ms: Estimate,
    /// The measured mean, ms.
    pub measured_ms: f64,
}

impl LaterTest {
    /// Measured less predicted, ms.
    pub fn difference_ms(&self) -> f64 {
        self.measured_ms - self.predicted_ms.value
    }

    /// Whether the measured mean lies within the prediction interval.
    pub fn is_within(&self) -> bool {
        self.predicted_ms.low <= self.measured_ms && self.measured_ms <= self.predicted_ms.high
    }

    /// The comparison in words.
    pub fn words(&self) -> String {
        let verdict = if self.is_within() {
            "within the interval"
        } else if self.predicted_ms.high < self.measured_ms {
            "longer than predicted: rely on the measurement and look for what has changed"
        } else {
            "shorter than predicted: the figures of drive or brake miss something"
        };
        format!("{} ({:+.1} ms)", verdict, self.difference_ms())
    }
}

/// Every stop test of a path that earlier tests predict; tests of one day are not predicted from each other.
pub fn compare_later_tests(press: &Press, path: StopPath) -> Vec<LaterTest> {
    let mut found = Vec::new();
    for (index, test) in press.stop_tests.iter().enumerate() {
        if test.condition.path != path
            || press.prediction.as_ref().is_none_or(|data| data.clock_start != test.clock_start)
        {
            continue;
        }
        let mut before = press.clone();
        before.stop_tests.retain(|earlier| earlier.at.date < test.at.date);
        before.events.retain(|event| event.at.date < test.at.date);
        let Some(summary) = summary_ms(&test.stops) else { continue };
        let Ok(stops) = u32::try_from(summary.count()) else { continue };
        let Ok(fit) = fit_path(&before, path, Unknowns::DelayAndTorque) else { continue };
        let Ok(predicted) = fit.predict(press, &At::of(&test.condition), stops) else { continue };
        let Estimate { value, low, high } = predicted.stop_time_s;
        found.push(LaterTest {
            test: index,
            earlier: fit.used.len(),
            predicted_ms: Estimate { value: value * 1e3, low: low * 1e3, high: high * 1e3 },
            measured_ms: summary.mean(),
        });
    }
    found
}

#[cfg(test)]
mod tests {
    use super::super::fit::tests::{press_with_tests, test_at};
    use super::*;
    use crate::units::Time;

    #[test]
    fn a_later_test_is_held_against_the_earlier_ones() {
        let mut press = press_with_tests();
        press.stop_tests.push(test_at(90, 50, 700, "2026-05-04"));
        let mut slow = test_at(90, 60, 700, "2026-06-04");
        for stop in &mut slow.stops {
            *stop = *stop + Time::ms(30);
        }
        press.stop_tests.push(slow);
        let found = compare_later_tests(&press, StopPath::Normal);
        assert_eq!(found.iter().map(|later| (later.test, later.earlier)).collect::<Vec<_>>(), [(9, 9), (10, 10)]);
        assert!(found[0].is_within() && found[0].difference_ms().abs() < 1.0, "{:?}", found[0]);
        assert!(!found[1].is_within() && found[1].words().starts_with("longer"), "{:?}", found[1]);
    }
}
