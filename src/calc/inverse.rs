//! The rule read backwards: the longest time that a given distance allows.
//!
//! Every rule here asks for no less distance when the stop takes longer, so the largest whole microsecond that still holds is
//! found by halving, with the rule itself as the only judge. On the level part of a rule (ISO 13855 at 500 mm) that gives the
//! far end of the level.

use crate::basis::Source;
use crate::expr;
use crate::limits;
use crate::rules::{Case, Demand, RuleSet};
use crate::steps::WorkedSteps;
use crate::units::{Length, Time};
use crate::verdict::Allowed;

/// What `relied_on` allows under `rules`, with every figure of `case` but the stopping time as it is.
///
/// `None` where the rule gives no distance or counts no movement of a hand.
pub fn allowed(rules: &dyn RuleSet, case: &Case, relied_on: Length) -> Option<Allowed> {
    demand(rules, case)?.make_up?;
    let mut steps = WorkedSteps::new();
    let stopping = longest(|time| is_met(rules, &with_stopping(case, time), relied_on));
    if let Some(stopping) = stopping {
        write_steps(rules, &with_stopping(case, stopping), relied_on, &mut steps);
    }
    let without_allowance = |time| {
        let mut case = with_stopping(case, time);
        case.times.allowance = Time::ZERO;
        case
    };
    let monitor = longest(|time| is_met(rules, &without_allowance(time), relied_on));
    if let Some(monitor) = monitor {
        steps.put(
            "monitor",
            "longest stop that a brake monitor on the same clock may let pass: the allowed time with no further allowance",
            expr!["largest time whose distance is within", relied_on],
            monitor,
            Source::ARITHMETIC,
        );
    }
    Some(Allowed { stopping, monitor, steps })
}

/// The largest whole microsecond up to the longest permitted stopping time that `holds`; `None` when not even 1 µs does.
///
/// `holds` must not come back once it is lost.
pub fn longest(holds: impl Fn(Time) -> bool) -> Option<Time> {
    let mut held = 0;
    let mut lost = limits::STOPPING_TIME.greatest + 1;
    while lost - held > 1 {
        let middle = held + (lost - held) / 2;
        if holds(Time::from_base(middle)) { held = middle } else { lost = middle }
    }
    (held > 0).then(|| Time::from_base(held))
}

/// Whether the rule gives a distance for the case and `relied_on` satisfies it.
pub fn is_met(rules: &dyn RuleSet, case: &Case, relied_on: Length) -> bool {
    demand(rules, case).is_some_and(|demand| demand.is_met_by(relied_on))
}

fn demand(rules: &dyn RuleSet, case: &Case) -> Option<Demand> {
    rules.demand(case, &mut WorkedSteps::new()).ok()
}

/// The case with another stopping time.
pub fn with_stopping(case: &Case, stopping: Time) -> Case {
    let mut case = case.clone();
    case.times.stopping = stopping;
    case
}

fn write_steps(rules: &dyn RuleSet, at_limit: &Case, relied_on: Length, steps: &mut WorkedSteps) -> Option<()> {
    let demand_at_limit = demand(rules, at_limit)?;
    let make_up = demand_at_limit.make_up?;
    let way = relied_on - make_up.addition;
    let by_hand = make_up.speed.time_over(way);
    // Only where the straight line decides; on a level part or a floor the line of the rule is not the way back.
    let is_on_line = Time::ZERO <= by_hand && (by_hand - make_up.time).base().abs() <= 1;
    if is_on_line {
        steps.put(
            "T max",
            "longest response time: installed less C, over the hand speed",
            expr!["(", relied_on, "−", make_up.addition, ") /", make_up.speed],
            make_up.time,
            Source::ARITHMETIC,
        );
    } else {
        steps.put(
            "T max",
            "longest response time, at the far end of the level part of the rule",
            expr!["required stays", demand_at_limit.required, "within", relied_on],
            make_up.time,
            Source::ARITHMETIC,
        );
    }
    let others = make_up.time - at_limit.times.stopping;
    // The opening time of a guard is taken off the response time, so that "less the others" can be a gain.
    let (meaning, expression) = if others < Time::ZERO {
        ("longest stopping time: plus the opening time, less the other parts", expr![make_up.time, "+", -others])
    } else {
        ("longest stopping time: less the other parts", expr![make_up.time, "−", others])
    };
    steps.put("t allowed", meaning, expression, at_limit.times.stopping, Source::ARITHMETIC);
    let later = with_stopping(at_limit, at_limit.times.stopping + Time::from_base(1));
    if let Some(beyond) = demand(rules, &later) {
        steps.put(
            "check",
            "required distance at that time, and 0.001 ms later",
            expr![demand_at_limit.required, "then", beyond.required, "against", relied_on],
            demand_at_limit.required,
            Source::ARITHMETIC,
        );
    }
    Some(())
}

/// The greatest setting of a brake monitor that watches the top of the stroke under a rule which counts its allowance in the
/// distance: the longest stop there plus the largest increase that both the distance and the rule's own limit admit.
pub fn allowed_top_monitor(
    rules: &dyn RuleSet,
    case: &Case,
    relied_on: Length,
    longest_top: Time,
    limit: Time,
) -> Option<Time> {
    let holds = |increase: Time| {
        let mut case = case.clone();
        case.times.allowance = increase;
        is_met(rules, &case, relied_on)
    };
    let by_distance = longest(holds).or_else(|| holds(Time::ZERO).then_some(Time::ZERO))?;
    Some(longest_top + by_distance.min(limit))
}
