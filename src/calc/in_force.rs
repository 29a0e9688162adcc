//! Which stop tests still speak for the press: the latest of each condition, after the last event that made the brake another one.

use jiff::civil::Date;

use crate::calendar::{Moment, months_after};
use crate::press::{Event, Press};
use crate::safeguard::Safeguard;
use crate::stop_test::StopPath;

/// Indices of the tests in force for a stop path, in the order of entry.
///
/// Where no test came surely after the last event that changed the brake, the older ones stay in force, since a distance
/// that is short by them is short; that they are overtaken is told by [`overtaken_by`].
pub fn tests_in_force(press: &Press, path: StopPath) -> Vec<usize> {
    let on_path = || (0..press.stop_tests.len()).filter(|index| press.stop_tests[*index].condition.path == path);
    let last_reset = latest(press.events.iter().filter(|event| event.kind.resets_brake()).map(|event| event.at));
    let since: Vec<usize> = on_path()
        .filter(|index| last_reset.is_none_or(|reset| press.stop_tests[*index].at.is_surely_after(reset)))
        .collect();
    let series = if since.is_empty() { on_path().collect() } else { since };
    let is_superseded = |index: usize| {
        let test = &press.stop_tests[index];
        series.iter().any(|other| {
            let later = &press.stop_tests[*other];
            later.condition == test.condition
                && (later.at.is_surely_after(test.at) || (!test.at.is_surely_after(later.at) && *other > index))
        })
    };
    series.iter().copied().filter(|index| !is_superseded(*index)).collect()
}

/// The events after which a safeguard must be timed or measured again and has not been.
pub fn overtaken_by<'a>(press: &'a Press, safeguard: &Safeguard, tests: &[usize]) -> Vec<(&'a Event, Overtaken)> {
    let latest_test = latest(tests.iter().map(|index| press.stop_tests[*index].at));
    let mut overtaken = Vec::new();
    for event in &press.events {
        let touch = event.kind.touch();
        if touch.is_of_one_safeguard() && event.safeguard.as_ref().is_some_and(|name| *name != safeguard.name) {
            continue;
        }
        let is_after = |moment: Moment| moment.is_surely_after(event.at);
        if touch.needs_stop_test() && safeguard.kind.needs_stop() && latest_test.is_some_and(|at| !is_after(at)) {
            overtaken.push((event, Overtaken::StopTest));
        }
        let tape = safeguard.installed.as_ref().map(|installed| installed.at);
        if touch.needs_tape() && tape.is_some_and(|at| !is_after(at)) {
            overtaken.push((event, Overtaken::Tape));
        }
    }
    overtaken
}

/// What an event has overtaken.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Overtaken {
    /// The stopping times.
    StopTest,
    /// The measured distance.
    Tape,
}

/// The day by which the tests in force must be repeated: the oldest of them decides. `None` without tests.
pub fn next_test_due(press: &Press, tests: &[usize], interval_months: u32) -> Option<Date> {
    let oldest = tests.iter().map(|index| press.stop_tests[*index].at.date).min()?;
    Some(months_after(oldest, interval_months))
}

fn latest(moments: impl Iterator<Item = Moment>) -> Option<Moment> {
    moments.reduce(|one, other| if one.is_surely_after(other) { one } else { other })
}
