//! European press practice: EN 692 and ISO 16092-2, with the distances of the German accident insurers' guide to press
//! inspection, DGUV Information 209-030. Part-revolution clutches only.

use super::iso_13855_2010::{FLOOR, K_FAR, K_NEAR, SWITCH, single_speed, two_hand_addition, two_speeds, with_way_over};
use super::*;
use crate::basis::Basis;
use crate::safeguard::LightCurtain;

const DOCUMENT: &str = "EN 692 / ISO 16092-2 as in DGUV Information 209-030";
const fn place(clause: &'static str, basis: Basis) -> Source {
    Source::new(DOCUMENT, clause, basis)
}

const ADDITIONS: Source = place("annex on distances, table of C", Basis::PublicText);
const SPEEDS: Source = place("Table 12", Basis::PublicText);
const TWO_HAND: Source = place("Table 14", Basis::PublicText);
const STARTING: Source = place("start of the stroke by light curtain", Basis::PublicText);
const START_LIMITS: Source = place("EN 692, start of the stroke by light curtain", Basis::FromMemory);
const SCOPE: Source = place("EN 692, scope: part-revolution clutches", Basis::PublicText);
const TESTS: Source = place("stop-time measurement; EN ISO 13855 Annex D", Basis::FromMemory);

/// Detection capability up to and including which each addition holds.
pub const ADDITION_STEPS: [(Length, Length); 5] = [
    (Length::mm(14), Length::ZERO),
    (Length::mm(20), Length::mm(80)),
    (Length::mm(30), Length::mm(130)),
    (Length::mm(40), Length::mm(240)),
    (COARSEST, Length::mm(850)),
];
/// The guide prints no upper end for its last step; over 70 mm EN ISO 13855 counts a field as separate beams.
const COARSEST: Length = Length::mm(70);
/// A curtain may start the stroke up to this detection capability.
const STARTS_UP_TO: Length = Length::mm(30);

/// The rule set.
pub struct EuPress;

impl RuleSet for EuPress {
    fn id(&self) -> RuleSetId {
        RuleSetId::EuPress
    }

    fn distance(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
        if let SafeguardKind::GuardOpening(opening) = &case.kind {
            return iso_13857::distance(opening, steps);
        }
        if let SafeguardKind::TwoHandTrip = case.kind {
            return Err(NoDemand::not_covered("full-revolution clutches, which EN 692 and ISO 16092-2 leave out"));
        }
        require_part_revolution(case, SCOPE)?;
        match &case.kind {
            SafeguardKind::LightCurtain(curtain) => curtain_distance(case, curtain, steps),
            SafeguardKind::TwoHandControl { shrouded } => {
                let time = response_time(case, "T", 1, SPEEDS, steps);
                let c = two_hand_addition(*shrouded, TWO_HAND, steps);
                Ok(single_speed(time, c, FLOOR, SPEEDS, steps))
            }
            other => Err(NoDemand::not_covered(format!("{}; take EN ISO 13855 for it", other.words()))),
        }
    }

    fn value_taken(&self) -> (ValueTaken, Source) {
        (ValueTaken::GreatestOrMeanPlus3s, TESTS)
    }

    fn least_stops(&self) -> (usize, Source) {
        (10, TESTS)
    }

    fn looks_at_way_over(&self) -> bool {
        true
    }
}

fn curtain_distance(case: &Case, curtain: &LightCurtain, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
    let d = curtain.detection;
    if curtain.starts_stroke && d > STARTS_UP_TO {
        return Err(NoDemand::forbidden(
            format!("a curtain of {d} may not start the stroke; 30 mm is the most"),
            STARTING,
        ));
    }
    let Some((_, addition)) = ADDITION_STEPS.iter().find(|(up_to, _)| d <= *up_to) else {
        return Err(NoDemand::not_covered("a detection capability over 70 mm"));
    };
    let Some(conformity) = case.conformity else {
        return Err(NoDemand::missing("whether the press carries the CE mark, on which the hand speed depends"));
    };
    let time = response_time(case, "T", 1, SPEEDS, steps);
    let c = steps.put("C", "by detection capability", expr!["d =", d], *addition, ADDITIONS);
    if curtain.starts_stroke {
        steps.note(
            "",
            "the curtain starts the stroke",
            "bolster at least 750 mm high and at most 1000 mm deep, stroke at most 600 mm, start within a preset time: not checked here",
            START_LIMITS,
        );
    }
    let through = match conformity {
        Conformity::CeMarked => two_speeds(time, c, SPEEDS, steps),
        Conformity::WithoutCe => {
            steps.note("v", "press without CE mark", format!("{K_FAR}, not {K_NEAR} up to {SWITCH}"), SPEEDS);
            single_speed(time, c, FLOOR, SPEEDS, steps)
        }
    };
    // The guide speaks of reaching through alone; a stated way over is counted as EN ISO 13855 does.
    with_way_over(curtain, time, through, steps)
}
