//! `slidehalt distance`: the distance that a rule set asks for, worked out step by step from figures on the command line.

mod read;
mod unsaid;

use calc::inverse;
use calc::round::{Towards, length_text, time_text};
use calc::rules::{Demand, NoDemand};
use calc::steps::WorkedSteps;
use calc::units::{LengthUnit, Time};
use calc::verdict::{Allowed, Answer};
use serde_json::json;

use super::args::DistanceArgs;
use super::outcome::columns;
use super::{Outcome, json};
use read::Asked;

pub fn distance(args: &DistanceArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let asked = match read::read(args) {
        Ok(asked) => asked,
        Err(refusals) => {
            for refusal in refusals {
                outcome.refuse(refusal);
            }
            return outcome;
        }
    };
    let rules = asked.rules.rules();
    let mut steps = asked.steps.clone();
    match rules.demand(&asked.case, &mut steps) {
        Ok(demand) => {
            let allowed = asked.installed.and_then(|installed| inverse::allowed(rules, &asked.case, installed));
            tell(args, &asked, &demand, allowed.as_ref(), &steps, &mut outcome);
        }
        Err(none) => tell_none(args, &asked, &none, &steps, &mut outcome),
    }
    outcome
}

/// Holds or Short by arithmetic; Unproven where it would hold by fewer stops than the rule set wants.
fn answer(asked: &Asked, demand: &Demand) -> Option<Answer> {
    let installed = asked.installed?;
    Some(match (demand.is_met_by(installed), asked.too_few_stops()) {
        (false, _) => Answer::Short,
        (true, Some(_)) => Answer::Unproven,
        (true, None) => Answer::Holds,
    })
}

fn tell(
    args: &DistanceArgs,
    asked: &Asked,
    demand: &Demand,
    allowed: Option<&Allowed>,
    steps: &WorkedSteps,
    outcome: &mut Outcome,
) {
    let unit = unit(args);
    let answer = answer(asked, demand);
    outcome.at_least(u8::from(answer.is_some_and(|answer| answer != Answer::Holds)));
    if args.json {
        let value = json!({
            "rules": asked.rules.key(),
            "edition": asked.rules.edition(),
            "safeguard": asked.case.kind.key(),
            "required_um": demand.required.base(),
            "strict": demand.strict,
            "installed_um": json::um(asked.installed),
            "spare_um": json::um(asked.installed.map(|installed| installed - demand.required)),
            "stopping_us": asked.case.kind.needs_stop().then(|| asked.case.times.stopping.base()),
            "allowed_stopping_us": json::us(allowed.and_then(|allowed| allowed.stopping)),
            "allowed_monitor_us": json::us(allowed.and_then(|allowed| allowed.monitor)),
            "answer": answer.map(Answer::key),
            "steps": json::steps(steps, unit),
            "remarks": asked.remarks,
        });
        outcome.line(serde_json::to_string_pretty(&value).unwrap_or_default());
        return;
    }
    let (title, edition) = (asked.rules.title(), asked.rules.edition());
    // The title of an ISO standard already names its edition.
    let rules = if edition.starts_with(title) { edition.to_owned() } else { format!("{title}, {edition}") };
    outcome.line(format!("{rules}: {}", asked.case.kind.words()));
    outcome.line("");
    steps_table(steps, unit, outcome);
    outcome.line("");
    let more = if demand.strict { "more than " } else { "" };
    outcome.line(format!("Required: {more}{}", length_text(demand.required, unit, Towards::Greater)));
    if let (Some(installed), Some(answer)) = (asked.installed, answer) {
        let spare = length_text(installed - demand.required, unit, Towards::Smaller);
        outcome.line(format!("Installed: {}, spare {spare}", length_text(installed, unit, Towards::Smaller)));
        let time = |time: Option<Time>| time.map_or("none".to_owned(), |time| time_text(time, Towards::Smaller));
        if let Some(allowed) = allowed {
            outcome.line(format!(
                "Allowed stopping time: {}; brake monitor on the same clock: {}",
                time(allowed.stopping),
                time(allowed.monitor)
            ));
        }
        outcome.line(format!("Answer: {}", answer.word()));
    }
    for remark in &asked.remarks {
        outcome.line(remark);
    }
    let to_check = steps.to_check();
    if !to_check.is_empty() {
        outcome.line("Compare with your own copy:");
        for source in to_check {
            let place = source.place();
            outcome.line(format!(
                "  {} ({})",
                if place.is_empty() { "habit of the trade" } else { &place },
                source.basis.words()
            ));
        }
    }
}

fn tell_none(args: &DistanceArgs, asked: &Asked, none: &NoDemand, steps: &WorkedSteps, outcome: &mut Outcome) {
    let answer = if matches!(none, NoDemand::Forbidden { .. }) { Answer::Short } else { Answer::Unproven };
    if args.json {
        let value = json!({
            "rules": asked.rules.key(),
            "edition": asked.rules.edition(),
            "safeguard": asked.case.kind.key(),
            "required_um": null,
            "strict": null,
            "installed_um": json::um(asked.installed),
            "spare_um": null,
            "stopping_us": asked.case.kind.needs_stop().then(|| asked.case.times.stopping.base()),
            "allowed_stopping_us": null,
            "allowed_monitor_us": null,
            "answer": answer.key(),
            "reason": none.words(),
            "steps": json::steps(steps, unit(args)),
            "remarks": asked.remarks,
        });
        outcome.line(serde_json::to_string_pretty(&value).unwrap_or_default());
    }
    match answer {
        Answer::Short => {
            if !args.json {
                outcome.line(format!("{}: {}", Answer::Short.word(), none.words()));
            }
            outcome.at_least(1);
        }
        _ => outcome.refuse(none.words()),
    }
}

fn steps_table(steps: &WorkedSteps, unit: LengthUnit, outcome: &mut Outcome) {
    let mut rows = vec![["symbol", "what", "worked", "value", "clause and basis"].map(str::to_owned).to_vec()];
    for step in steps.iter() {
        let place = step.source.place();
        let basis = step.source.basis.words();
        rows.push(vec![
            step.symbol.to_owned(),
            step.meaning.clone(),
            step.expression.text(unit),
            step.value.text(unit),
            if place.is_empty() { basis.to_owned() } else { format!("{place} ({basis})") },
        ]);
    }
    for line in columns(&rows) {
        outcome.line(line);
    }
}

fn unit(args: &DistanceArgs) -> LengthUnit {
    if args.inches { LengthUnit::Inch } else { LengthUnit::Millimetre }
}

#[cfg(test)]
mod tests;
