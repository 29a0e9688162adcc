//! ANSI B11.19: Ds = K (Ts + Tc + Tr + Tbm) + Dpf. The standard is not public; most of this is from memory.
//!
//! The inch form of its constants is used throughout, as in the hand speed of 63 in/s. The millimetre form rounds them
//! differently: 3.4 (S - 7 mm) lies up to 0.036 mm above 3.4 (S - 0.276 in).

use super::us_1910_217::HAND_SPEED;
use super::*;
use crate::basis::Basis;
use crate::safeguard::{HorizontalField, LightCurtain, WayOver};

const DOCUMENT: &str = "ANSI B11.19";
const FORMULA: Source = Source::new(DOCUMENT, "safety distance formula", Basis::SingleText);
const PENETRATION: Source = Source::new(DOCUMENT, "depth penetration factor", Basis::FromMemory);
const HORIZONTAL: Source = Source::new(DOCUMENT, "horizontal field", Basis::FromMemory);
const TESTS: Source = Source::new(DOCUMENT, "stop-time measurement", Basis::FromMemory);
const STOPPING: Source = Source::new(DOCUMENT, "presence sensing must be able to stop the slide", Basis::FromMemory);

/// A tenth of 0.276 in is 701.04 µm: the offset is kept in hundredths of a micrometre.
const OFFSET_HUNDREDTHS_UM: i128 = 701_040;
/// Finest fields: S up to 2.5 in.
const FINE_UP_TO: Length = Length::from_base(63_500);
/// Coarsest fields: 23.6 in.
const COARSE_UP_TO: Length = Length::from_base(599_440);
const REACH_THROUGH: Length = Length::from_base(36 * 25_400);
const REACH_OVER: Length = Length::from_base(48 * 25_400);
/// For reaching through: lowest beam at most 12 in, highest at least 48 in.
const LOWEST_AT_MOST: Length = Length::from_base(12 * 25_400);
const HIGHEST_AT_LEAST: Length = Length::from_base(48 * 25_400);
/// For reaching over: highest beam at least 36 in.
const HIGHEST_AT_LEAST_OVER: Length = Length::from_base(36 * 25_400);
/// No figure of the standard is known here; over this height ISO 13855 knows no field along the approach.
const HIGHEST_FIELD: Length = Length::mm(1000);
/// A field at this angle or more to the approach counts as vertical.
const VERTICAL_FROM: Angle = Angle::deg(30);

/// The rule set.
pub struct AnsiB1119;

impl RuleSet for AnsiB1119 {
    fn id(&self) -> RuleSetId {
        RuleSetId::AnsiB1119
    }

    fn distance(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
        if case.kind.needs_stop() {
            require_part_revolution(case, STOPPING)?;
        }
        let dpf = match &case.kind {
            SafeguardKind::LightCurtain(curtain) => {
                require_no_start(curtain)?;
                Some(curtain_factor(curtain, steps)?)
            }
            SafeguardKind::SeparateBeams { heights } => {
                let (Some(lowest), Some(highest)) = (heights.iter().min(), heights.iter().max()) else {
                    return Err(NoDemand::missing("the heights of the beams"));
                };
                Some(coarse_factor(*lowest, *highest, steps)?)
            }
            SafeguardKind::HorizontalField(field) if field.tilt >= VERTICAL_FROM => {
                Some(fine_factor(field.detection, steps)?)
            }
            SafeguardKind::HorizontalField(field) => Some(horizontal_factor(field, steps)?),
            SafeguardKind::TwoHandControl { .. } => None,
            SafeguardKind::TwoHandTrip => {
                return Err(NoDemand::not_covered(
                    "the closing time of a full-revolution clutch, for which no clause is known here",
                ));
            }
            SafeguardKind::InterlockedGuard { .. } | SafeguardKind::Mat { .. } | SafeguardKind::GuardOpening(_) => {
                return Err(NoDemand::not_covered(format!("{}; its clause is not known here", case.kind.words())));
            }
        };
        let time = response_time(case, "T", 1, FORMULA, steps);
        let addition = dpf.unwrap_or(Length::ZERO);
        let required = reach("Ds", "required distance", HAND_SPEED, time, addition, FORMULA, steps);
        Ok(Demand {
            required,
            strict: false,
            make_up: Some(MakeUp { speed: HAND_SPEED, time, addition, allowance_times: 1 }),
        })
    }

    fn value_taken(&self) -> (ValueTaken, Source) {
        (ValueTaken::GreatestOrMeanPlus3s, TESTS)
    }

    fn least_stops(&self) -> (usize, Source) {
        (10, TESTS)
    }

    fn needed_angles(&self) -> &'static [NeededAngle] {
        const NEEDED: [NeededAngle; 1] = [NeededAngle { angle: Angle::deg(90), within: Angle::deg(5), source: TESTS }];
        &NEEDED
    }
}

fn curtain_factor(curtain: &LightCurtain, steps: &mut WorkedSteps) -> Result<Length, NoDemand> {
    if curtain.detection <= FINE_UP_TO {
        note_way_over(curtain, PENETRATION, steps);
        return fine_factor(curtain.detection, steps);
    }
    if curtain.detection > COARSE_UP_TO {
        return Err(NoDemand::not_covered("a detection capability over 23.6 in (599.44 mm)"));
    }
    let (Some(lowest), WayOver::Open { upper_edge, .. }) = (curtain.lower_edge, curtain.over) else {
        return Err(NoDemand::missing(
            "the heights of lowest beam and upper edge, on which reaching through or over a field coarser than 2.5 in depends",
        ));
    };
    coarse_factor(lowest, upper_edge, steps)
}

fn fine_factor(detection: Length, steps: &mut WorkedSteps) -> Result<Length, NoDemand> {
    if detection > FINE_UP_TO {
        return Err(NoDemand::not_covered("a tilted field coarser than 2.5 in (63.5 mm)"));
    }
    let beyond = (i128::from(detection.base()) * 100 - OFFSET_HUNDREDTHS_UM).max(0);
    let factor = Length::from_base(divide_up(beyond * 34, 1000));
    Ok(steps.put("Dpf", "penetration, not under 0", expr!["3.4 × (", detection, "− 0.276 in)"], factor, PENETRATION))
}

fn coarse_factor(lowest: Length, highest: Length, steps: &mut WorkedSteps) -> Result<Length, NoDemand> {
    let heights = expr!["lowest beam at", lowest, ", highest at", highest];
    if lowest > LOWEST_AT_MOST {
        return Err(NoDemand::not_covered("a lowest beam above 12 in (304.8 mm)"));
    }
    if highest >= HIGHEST_AT_LEAST {
        return Ok(steps.put("Dpf", "reaching through", heights, REACH_THROUGH, PENETRATION));
    }
    if highest >= HIGHEST_AT_LEAST_OVER {
        return Ok(steps.put("Dpf", "reaching over", heights, REACH_OVER, PENETRATION));
    }
    Err(NoDemand::not_covered("an upper edge under 36 in (914.4 mm)"))
}

fn horizontal_factor(field: &HorizontalField, steps: &mut WorkedSteps) -> Result<Length, NoDemand> {
    require_lowest_beam_below(field)?;
    if field.height > HIGHEST_FIELD {
        return Err(NoDemand::not_covered(
            "a field along the approach higher than 1000 mm, under which a person can pass",
        ));
    }
    // S at most H/15 + 2 in, kept whole by multiplying with 15.
    if field.detection.base() * 15 > field.lowest.base() + 15 * 50_800 {
        return Err(NoDemand::not_covered("a field coarser than H/15 + 2 in, which a foot or ankle can pass"));
    }
    let factor =
        (REACH_OVER - Length::from_base(divide_down(i128::from(field.height.base()) * 2, 5))).greatest(REACH_THROUGH);
    Ok(steps.put("Dpf", "horizontal field, not under 36 in", expr!["48 in − 0.4 ×", field.height], factor, HORIZONTAL))
}
