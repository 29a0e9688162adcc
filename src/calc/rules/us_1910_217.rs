//! 29 CFR 1910.217(c): presence sensing, two-hand control, two-hand trip and guard openings of mechanical power presses.
//!
//! Ds > 63 in/s × Ts, strictly greater, with Ts the stopping time at about 90° of crank rotation. The law prints no term
//! for the response of the device or for wear; a part that the clock did not see is counted all the same, because the hand
//! does not wait for it. Start of the stroke by presence sensing is paragraph (h), a rule set of its own.

use super::*;
use crate::basis::Basis;

const DOCUMENT: &str = "29 CFR 1910.217";
/// Hand speed constant: 63 in/s = 1600.2 mm/s exactly.
pub(super) const HAND_SPEED: Speed = Speed::from_base(1_600_200);

const PRESENCE: Source = Source::new(DOCUMENT, "(c)(3)(iii)(e)", Basis::PublicText);
const NOT_ON_FULL_REVOLUTION: Source = Source::new(DOCUMENT, "(c)(3)(iii)(a)", Basis::PublicText);
const NO_TRIPPING: Source = Source::new(DOCUMENT, "(c)(3)(iii)(b)", Basis::PublicText);
const OTHER_WAYS: Source = Source::new(DOCUMENT, "(c)(3)(iii)(f)", Basis::FromMemory);
const TWO_HAND_CONTROL: Source = Source::new(DOCUMENT, "(c)(3)(vii)(c)", Basis::PublicText);
const LETTING_GO_STOPS: Source = Source::new(DOCUMENT, "(c)(3)(vii)(a)", Basis::FromMemory);
const TWO_HAND_TRIP: Source = Source::new(DOCUMENT, "(c)(3)(viii)(c)", Basis::PublicText);

/// The law says "at about 90°"; how far about reaches is nobody's rule.
const NEEDED: [NeededAngle; 1] = [NeededAngle { angle: Angle::deg(90), within: Angle::deg(5), source: PRESENCE }];

/// The rule set.
pub struct Us1910217;

impl RuleSet for Us1910217 {
    fn id(&self) -> RuleSetId {
        RuleSetId::Us1910217
    }

    fn distance(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
        match &case.kind {
            SafeguardKind::LightCurtain(curtain) => {
                require_part_revolution(case, NOT_ON_FULL_REVOLUTION)?;
                if curtain.starts_stroke {
                    let why = "presence sensing must not start the stroke, except under all of paragraph (h)";
                    return Err(NoDemand::forbidden(why, NO_TRIPPING));
                }
                note_way_over(curtain, OTHER_WAYS, steps);
                Ok(stop_distance(case, PRESENCE, steps))
            }
            SafeguardKind::SeparateBeams { .. } | SafeguardKind::HorizontalField(_) => {
                require_part_revolution(case, NOT_ON_FULL_REVOLUTION)?;
                Ok(stop_distance(case, PRESENCE, steps))
            }
            SafeguardKind::TwoHandControl { .. } => {
                require_part_revolution(case, LETTING_GO_STOPS)?;
                Ok(stop_distance(case, TWO_HAND_CONTROL, steps))
            }
            SafeguardKind::TwoHandTrip => trip_distance(case, "Dm", HAND_SPEED, true, TWO_HAND_TRIP, steps),
            SafeguardKind::GuardOpening(opening) => us_table_o10::distance(opening, case, steps),
            SafeguardKind::InterlockedGuard { .. } => {
                Err(NoDemand::not_covered("the distance of an interlocked guard, for which the law prints no formula"))
            }
            SafeguardKind::Mat { .. } => {
                Err(NoDemand::not_covered("pressure-sensitive mats as point-of-operation safeguard"))
            }
        }
    }

    fn value_taken(&self) -> (ValueTaken, Source) {
        (ValueTaken::Greatest, Source::PRACTICE)
    }

    fn needed_angles(&self) -> &'static [NeededAngle] {
        &NEEDED
    }
}

fn stop_distance(case: &Case, source: Source, steps: &mut WorkedSteps) -> Demand {
    let time = response_time(case, "Ts", 1, source, steps);
    let required = reach("Ds", "distance that must be exceeded", HAND_SPEED, time, Length::ZERO, source, steps);
    let make_up = MakeUp { speed: HAND_SPEED, time, addition: Length::ZERO, allowance_times: 1 };
    Demand { required, strict: true, make_up: Some(make_up) }
}
