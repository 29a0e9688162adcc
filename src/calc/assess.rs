//! From a press, a safeguard and a rule set to an answer with every figure behind it.

use jiff::civil::Date;

use crate::in_force::{Overtaken, next_test_due, overtaken_by, tests_in_force};
use crate::inverse;
use crate::plant_settings::PlantSettings;
use crate::press::Press;
use crate::remedy;
use crate::rules::{Case, NoDemand, RuleSet, RuleSetId, TestFinding, Times};
use crate::safeguard::{Safeguard, SafeguardKind, WayOver};
use crate::steps::WorkedSteps;
use crate::stop_test::{StopPath, StopTest};
use crate::time_parts::{parts_for, times_of};
use crate::units::{Length, Rate, Time};
use crate::value_taken::ValueTaken;
use crate::verdict::{Answer, Assessment, Governing, PartState, Reason, TimePart};

/// Assesses one safeguard of a press under one rule set, as of `today`.
pub fn assess(
    press: &Press,
    safeguard: &Safeguard,
    plant: &PlantSettings,
    rules: RuleSetId,
    today: Date,
) -> Assessment {
    let question = Question { press, safeguard, plant, rules: rules.rules(), today };
    let tests = question.tests(safeguard.stop_path);
    let mut reasons = Vec::new();
    let mut steps = WorkedSteps::new();
    let chosen = if safeguard.kind.needs_stop() { question.choose(&tests, None) } else { None };
    let parts = chosen.as_ref().map_or_else(Vec::new, |chosen| chosen.parts.clone());
    let case = question.case(chosen.as_ref());
    let is_timed = !safeguard.kind.needs_stop() || chosen.is_some();
    let outcome = if is_timed {
        if let Some(chosen) = &chosen {
            question.write_value(chosen, &mut steps);
        }
        Some(question.rules.demand(&case, &mut steps))
    } else {
        // Without a stop the rule can still forbid the safeguard or not cover it; a distance would be that of an instant stop.
        question.rules.demand(&case, &mut WorkedSteps::new()).err().map(Err)
    };
    let demand = match outcome {
        Some(Ok(demand)) => Some(demand),
        Some(Err(none)) => {
            let answer = if matches!(none, NoDemand::Forbidden { .. }) { Answer::Short } else { Answer::Unproven };
            reasons.push(Reason::new(answer, none.words()));
            None
        }
        None => None,
    };
    let relied_on = safeguard.installed.as_ref().map(|installed| installed.relied_on());
    if let (Some(demand), Some(relied_on)) = (&demand, relied_on)
        && !demand.is_met_by(relied_on)
    {
        reasons.push(Reason::new(Answer::Short, "The installed distance does not satisfy the rule."));
    }
    if safeguard.kind.needs_stop() {
        question.judge_tests(&tests, &mut reasons);
    }
    question.judge_figures(&parts, &mut reasons);
    question.judge_age(&tests, &mut reasons);
    reasons.sort_by_key(|reason| std::cmp::Reverse(reason.answer));
    let answer = reasons.iter().map(|reason| reason.answer).max().unwrap_or(Answer::Holds);
    let mut allowed = match (&demand, relied_on) {
        (Some(_), Some(relied_on)) if safeguard.kind.needs_stop() => inverse::allowed(question.rules, &case, relied_on),
        _ => None,
    };
    if let (Some(allowed), Some(relied_on)) = (&mut allowed, relied_on) {
        let tests: Vec<&StopTest> = tests.iter().map(|index| &press.stop_tests[*index]).collect();
        if let Some(limit) = question.rules.monitor_limit(&tests) {
            allowed.monitor =
                inverse::allowed_top_monitor(question.rules, &case, relied_on, limit.longest_top, limit.most_increase);
        }
    }
    let remedies = if answer == Answer::Short {
        remedy::remedies(&question, &case, chosen.as_ref(), demand, &reasons)
    } else {
        Vec::new()
    };
    Assessment {
        rules,
        answer,
        reasons,
        governing: chosen.map(|chosen| chosen.governing),
        parts,
        demand,
        relied_on,
        steps,
        allowed,
        remedies,
    }
}

/// Assesses every safeguard of a press under the plant's own rule set.
pub fn assess_press(press: &Press, plant: &PlantSettings, today: Date) -> Vec<Assessment> {
    press.safeguards.iter().map(|safeguard| assess(press, safeguard, plant, plant.rules, today)).collect()
}

/// Assesses one safeguard under every rule set, in their listed order.
pub fn compare(press: &Press, safeguard: &Safeguard, plant: &PlantSettings, today: Date) -> Vec<Assessment> {
    RuleSetId::ALL.iter().map(|rules| assess(press, safeguard, plant, *rules, today)).collect()
}

/// The index of the assessment that asks for the most distance, among those that ask for one.
pub fn most_demanding(assessments: &[Assessment]) -> Option<usize> {
    let least = |assessment: &Assessment| assessment.demand.map(|demand| demand.least_distance());
    (0..assessments.len())
        .filter(|index| assessments[*index].demand.is_some())
        .max_by_key(|index| (least(&assessments[*index]), std::cmp::Reverse(*index)))
}

/// The index of the gravest assessment; among equals the one with the least spare.
pub fn gravest(assessments: &[Assessment]) -> Option<usize> {
    let spare = |index: &usize| assessments[*index].spare().unwrap_or(Length::mm(i64::from(i32::MAX)));
    (0..assessments.len()).min_by_key(|index| (std::cmp::Reverse(assessments[*index].answer), spare(index)))
}

/// What is asked: one safeguard of one press under one rule set on one day.
pub(crate) struct Question<'a> {
    pub press: &'a Press,
    pub safeguard: &'a Safeguard,
    pub plant: &'a PlantSettings,
    pub rules: &'static dyn RuleSet,
    pub today: Date,
}

/// The stop test that decides, with its value and time parts.
#[derive(Clone, PartialEq, Debug)]
pub(crate) struct Chosen {
    pub governing: Governing,
    pub parts: Vec<TimePart>,
    pub total: Time,
}

impl Question<'_> {
    /// The tests in force for a stop path.
    pub fn tests(&self, path: StopPath) -> Vec<usize> {
        tests_in_force(self.press, path)
    }

    /// Among `tests`, at most as fast as `fastest`, the one whose response time is longest.
    pub fn choose(&self, tests: &[usize], fastest: Option<Rate>) -> Option<Chosen> {
        let angles = self.rules.governing_angles();
        let counts = |test: &StopTest| {
            (angles.is_empty() || angles.iter().any(|about| about.is_met_by(test.condition.angle)))
                && fastest.is_none_or(|fastest| test.condition.speed <= fastest)
        };
        tests
            .iter()
            .filter(|index| counts(&self.press.stop_tests[**index]))
            .filter_map(|index| {
                let test = &self.press.stop_tests[*index];
                let (taken, value) = self.value(test)?;
                let parts = parts_for(self.press, self.safeguard, test.clock_start, value);
                let total = parts.iter().map(|part| part.state.counted()).sum();
                Some(Chosen { governing: Governing { test: *index, value, taken }, parts, total })
            })
            .max_by_key(|chosen| chosen.total)
    }

    /// The value of a test that is taken forward: the rule's, or the wish where that is more.
    fn value(&self, test: &StopTest) -> Option<(ValueTaken, Time)> {
        let (rule, _) = self.rules.value_taken();
        // Fewer stops than a spread needs still show that a distance is short.
        let by_rule = rule
            .of(&test.stops)
            .map(|value| (rule, value))
            .or_else(|| ValueTaken::Greatest.of(&test.stops).map(|value| (ValueTaken::Greatest, value)))?;
        let by_wish = self.plant.wish.and_then(|wish| Some((wish, wish.of(&test.stops)?)));
        Some(by_wish.filter(|wish| wish.1 > by_rule.1).unwrap_or(by_rule))
    }

    fn write_value(&self, chosen: &Chosen, steps: &mut WorkedSteps) {
        let test = &self.press.stop_tests[chosen.governing.test];
        let (rule, source) = self.rules.value_taken();
        let source = if chosen.governing.taken == rule { source } else { crate::basis::Source::GIVEN };
        let symbol = "t";
        steps.put(
            symbol,
            format!("stopping time taken forward: {} of {} stops", chosen.governing.taken.words(), test.stops.len()),
            crate::expr![test.condition.words()],
            chosen.governing.value,
            source,
        );
    }

    /// The case as the rule set sees it.
    pub fn case(&self, chosen: Option<&Chosen>) -> Case {
        case_for(self.press, self.safeguard, chosen.map_or(NO_TIME, |chosen| times_of(&chosen.parts)))
    }

    /// What stands against the stop tests.
    fn judge_tests(&self, tests: &[usize], reasons: &mut Vec<Reason>) {
        let mut missing = |words: String| reasons.push(Reason::new(Answer::Unproven, words));
        let path = self.safeguard.stop_path.words();
        if tests.is_empty() {
            missing(format!("There is no stop test of the {path}."));
            return;
        }
        let (least, _) = self.rules.least_stops();
        for test in tests.iter().map(|index| &self.press.stop_tests[*index]) {
            let at = format!("{} ({})", test.condition.words(), test.at);
            if test.stops.len() < least {
                missing(format!("Only {} of at least {least} stops at {at}.", test.stops.len()));
            }
            if test.at.date > self.today {
                missing(format!("The test at {at} is dated in the future."));
            }
            if test.by.trim().is_empty() {
                missing(format!("It is not said who timed the stops at {at}."));
            }
            match (test.instrument.calibrated, test.instrument.calibration_due) {
                (None, _) => missing(format!("The instrument of the test at {at} has no calibration date.")),
                (Some(on), _) if on > test.at.date => {
                    missing(format!("The instrument of the test at {at} was calibrated only on {on}."))
                }
                (_, Some(due)) if due < test.at.date => {
                    missing(format!("The calibration of the instrument had run out on {due}, before the test at {at}."))
                }
                _ => {}
            }
        }
        let tests: Vec<&StopTest> = tests.iter().map(|index| &self.press.stop_tests[*index]).collect();
        for needed in self.rules.needed_angles() {
            if !tests.iter().any(|test| needed.is_met_by(test.condition.angle)) {
                missing(format!("No stop was begun at about {}° ({}).", needed.angle.digits(), needed.source.place()));
            }
        }
        for finding in self.rules.judge_tests(&tests) {
            reasons.push(match finding {
                TestFinding::Fails(words) => Reason::new(Answer::Short, format!("The press fails the rule: {words}.")),
                TestFinding::Missing(words) => Reason::new(Answer::Unproven, format!("Missing: {words}.")),
            });
        }
        if let (Some(limit), Some(allowance)) = (self.rules.monitor_limit(&tests), self.safeguard.wear_allowance)
            && allowance > limit.most_increase
        {
            let words = format!(
                "The brake monitor may allow an increase of at most {} ({}); {allowance} is entered.",
                limit.most_increase,
                limit.source.place()
            );
            reasons.push(Reason::new(Answer::Short, words));
        }
    }

    /// What is missing among the figures of the safeguard itself.
    fn judge_figures(&self, parts: &[TimePart], reasons: &mut Vec<Reason>) {
        let mut missing = |words: String| reasons.push(Reason::new(Answer::Unproven, words));
        match &self.safeguard.installed {
            None => missing("The installed distance has not been measured.".into()),
            Some(installed) if installed.by.trim().is_empty() => {
                missing("It is not said who measured the installed distance.".into())
            }
            Some(installed) if installed.at.date > self.today => {
                missing("The installed distance is dated in the future.".into())
            }
            Some(_) => {}
        }
        for part in parts.iter().filter(|part| part.state == PartState::Missing) {
            missing(format!("The {} is neither seen by the clock nor given.", part.kind.in_sentence()));
        }
        if let SafeguardKind::LightCurtain(curtain) = &self.safeguard.kind
            && curtain.over == WayOver::NotStated
            && self.rules.looks_at_way_over()
        {
            missing("It is not said whether an arm can pass over the curtain.".into());
        }
        if self.rules.needs_supplement() && self.safeguard.kind.needs_stop() && self.safeguard.supplement.is_none() {
            missing("The supplemental distance Z is not stated; 0 is an answer.".into());
        }
    }

    /// What events, the calendar and the use of the press have overtaken.
    fn judge_age(&self, tests: &[usize], reasons: &mut Vec<Reason>) {
        let mut again = |words: String| reasons.push(Reason::new(Answer::Retime, words));
        for (event, overtaken) in overtaken_by(self.press, self.safeguard, tests) {
            let (what, verb) = match overtaken {
                Overtaken::StopTest => ("stop test", "time the stops again"),
                Overtaken::Tape => ("tape measurement", "measure the distance again"),
            };
            again(format!(
                "{} on {}, and no {what} is surely later: {verb}.",
                capitalised(event.kind.words()),
                event.at
            ));
        }
        if !self.safeguard.kind.needs_stop() {
            return;
        }
        if let Some(due) = next_test_due(self.press, tests, self.plant.test_interval_months)
            && due < self.today
        {
            again(format!("The stop test was due on {due}."));
        }
        if let (Some(interval), Some(latest)) =
            (self.plant.reading_interval, self.press.readings.iter().map(|reading| reading.at.date).max())
            && interval.after(latest) < self.today
        {
            again(format!("The reading was due on {}.", interval.after(latest)));
        }
        let tested = |of: fn(&StopTest) -> i64| tests.iter().map(|index| of(&self.press.stop_tests[*index])).max();
        if let (Some(die), Some(most)) = (self.press.heaviest_die, tested(|test| test.condition.upper_die.base()))
            && die.base() > most
        {
            again(format!("The heaviest upper die in use, {die}, is heavier than any tested."));
        }
        if let (Some(speed), Some(most)) = (self.press.fastest_speed, tested(|test| test.condition.speed.base()))
            && speed.base() > most
        {
            again(format!("The fastest speed in use, {speed}, is faster than any tested."));
        }
    }
}

/// A safeguard of a press as a rule set sees it.
pub(crate) fn case_for(press: &Press, safeguard: &Safeguard, times: Times) -> Case {
    Case {
        kind: safeguard.kind.clone(),
        clutch: Some(press.clutch),
        conformity: press.conformity,
        trip_speed: press.slowest_speed,
        times,
        supplement: safeguard.supplement.unwrap_or(Length::ZERO),
    }
}

const NO_TIME: Times = Times {
    stopping: Time::ZERO,
    device: Time::ZERO,
    interface: Time::ZERO,
    control: Time::ZERO,
    allowance: Time::ZERO,
};

/// The sentence with its first letter in upper case.
pub fn capitalised(words: &str) -> String {
    let mut letters = words.chars();
    letters.next().map_or_else(String::new, |first| first.to_uppercase().chain(letters).collect())
}
