//! Results as JSON: whole numbers stay whole.

use calc::safeguard::Safeguard;
use calc::sentence;
use calc::steps::{Term, WorkedSteps};
use calc::units::{Length, LengthUnit, Time};
use calc::verdict::{Assessment, PartState};
use serde_json::{Value, json};

/// Worked steps.
pub fn steps(steps: &WorkedSteps, unit: LengthUnit) -> Value {
    steps
        .iter()
        .map(|step| {
            json!({
                "symbol": step.symbol,
                "meaning": step.meaning,
                "expression": step.expression.text(unit),
                "value": step.value.text(unit),
                "value_base": base(&step.value),
                "document": step.source.document,
                "clause": step.source.clause,
                "basis": step.source.basis.words(),
            })
        })
        .collect()
}

/// The exact count in the base unit: µs, µm, µm/s and so on.
fn base(term: &Term) -> Option<i64> {
    match term {
        Term::Word(_) => None,
        Term::Time(time) => Some(time.base()),
        Term::Length(length) => Some(length.base()),
        Term::Speed(speed) => Some(speed.base()),
        Term::Angle(angle) => Some(angle.base()),
        Term::Rate(rate) => Some(rate.base()),
    }
}

/// A time in microseconds, or null.
pub fn us(time: Option<Time>) -> Value {
    time.map_or(Value::Null, |time| time.base().into())
}

/// A length in micrometres, or null.
pub fn um(length: Option<Length>) -> Value {
    length.map_or(Value::Null, |length| length.base().into())
}

/// One safeguard of a press.
pub fn assessment(tag: &str, safeguard: &Safeguard, found: &Assessment) -> Value {
    let unit = LengthUnit::Millimetre;
    let parts: Vec<Value> = found
        .parts
        .iter()
        .map(|part| {
            let (state, added) = match part.state {
                PartState::SeenByClock => ("seen", None),
                PartState::Added(time) => ("added", Some(time)),
                PartState::Missing => ("missing", None),
            };
            json!({ "part": part.kind.words(), "state": state, "us": us(added) })
        })
        .collect();
    json!({
        "press": tag,
        "safeguard": safeguard.name,
        "kind": safeguard.kind.key(),
        "rules": found.rules.key(),
        "answer": found.answer.key(),
        "reasons": found.reasons.iter().map(|reason| json!({ "answer": reason.answer.key(), "words": reason.words })).collect::<Vec<_>>(),
        "required_um": um(found.demand.map(|demand| demand.required)),
        "strict": found.demand.map(|demand| demand.strict),
        "installed_um": um(found.relied_on),
        "spare_um": um(found.spare()),
        "spare_us": us(found.spare_time()),
        "stopping_us": us(found.governing.map(|governing| governing.value)),
        "value_taken": found.governing.map(|governing| governing.taken.key()),
        "governing_test": found.governing.map(|governing| governing.test + 1),
        "allowed_stopping_us": us(found.allowed.as_ref().and_then(|allowed| allowed.stopping)),
        "allowed_monitor_us": us(found.allowed.as_ref().and_then(|allowed| allowed.monitor)),
        "parts": parts,
        "remedies": found.remedies.iter().map(|remedy| sentence::remedy(remedy, unit)).collect::<Vec<_>>(),
        "steps": steps(&found.steps, unit),
    })
}
