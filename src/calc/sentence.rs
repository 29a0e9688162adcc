//! The answer in words: one sentence for the headline, one for each change that would help.

use crate::assess::capitalised;
use crate::remedy::Remedy;
use crate::round::{Towards, length_text, time_text};
use crate::safeguard::Safeguard;
use crate::units::LengthUnit;
use crate::verdict::{Answer, Assessment};

/// The headline: "Front curtain is short: 398 mm installed, 412 mm required, 14 mm (7 ms) too little."
pub fn headline(safeguard: &Safeguard, assessment: &Assessment, unit: LengthUnit) -> String {
    let verb = match assessment.answer {
        Answer::Holds => "holds",
        Answer::Short => "is short",
        Answer::Unproven => "is unproven",
        Answer::Retime => "must be timed again",
    };
    let reason = match assessment.answer {
        Answer::Holds => None,
        Answer::Short if assessment.is_too_near() => None,
        _ => assessment.first_reason(),
    };
    let parts: Vec<String> = [figures(assessment, unit), reason.map(str::to_owned)].into_iter().flatten().collect();
    let name = capitalised(&safeguard.name);
    match (assessment.answer, &parts[..]) {
        (_, []) => format!("{name} {verb}."),
        (Answer::Holds | Answer::Short, [figures]) if reason.is_none() => format!("{name} {verb}: {figures}"),
        (_, [only]) => format!("{name} {verb}. {only}"),
        (_, [figures, reason, ..]) => format!("{name} {verb}. {reason} {}", capitalised(figures)),
    }
}

/// Installed, required and spare in one clause, as far as they are known.
pub fn figures(assessment: &Assessment, unit: LengthUnit) -> Option<String> {
    let demand = assessment.demand?;
    let required = length_text(demand.required, unit, Towards::Greater);
    let required =
        if demand.strict { format!("more than {required} required") } else { format!("{required} required") };
    let Some(relied_on) = assessment.relied_on else { return Some(format!("{required}.")) };
    let installed = length_text(relied_on, unit, Towards::Smaller);
    let spare = assessment.spare()?;
    let time = assessment.spare_time();
    let spare = if demand.is_met_by(relied_on) {
        let time = time.map_or(String::new(), |time| format!(" ({})", time_text(time, Towards::Smaller)));
        format!("{}{time} to spare", length_text(spare, unit, Towards::Smaller))
    } else {
        let time = time.map_or(String::new(), |time| format!(" ({})", time_text(-time, Towards::Greater)));
        format!("{}{time} too little", length_text(-spare, unit, Towards::Greater))
    };
    Some(format!("{installed} installed, {required}, {spare}."))
}

/// A change that would make it hold, as a clause: "move it to at least 414 mm".
pub fn remedy(remedy: &Remedy, unit: LengthUnit) -> String {
    match remedy {
        Remedy::MoveTo(distance) => format!("move it to at least {}", length_text(*distance, unit, Towards::Greater)),
        Remedy::StopWithin(time) => format!("stop within {}", time_text(*time, Towards::Smaller)),
        Remedy::FinerField(detection) => {
            format!("a field of {} or finer", length_text(*detection, unit, Towards::Smaller))
        }
        Remedy::FasterDevice(time) => format!("a device that responds within {}", time_text(*time, Towards::Smaller)),
        Remedy::SlowerSpeed(speed) => format!("run no faster than {speed}"),
        Remedy::UsePath(path) => format!("let it call for the {}, as tested", path.words()),
        Remedy::Shroud => "shroud the actuators".into(),
        Remedy::CloseWayOver => "close the way over the upper edge".into(),
    }
}

/// All changes in one sentence; `None` when there are none.
pub fn remedies(assessment: &Assessment, unit: LengthUnit) -> Option<String> {
    let clauses: Vec<String> = assessment.remedies.iter().map(|one| remedy(one, unit)).collect();
    (!clauses.is_empty()).then(|| format!("Any one of these would make it hold: {}.", clauses.join("; ")))
}
