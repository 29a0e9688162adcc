//! East Asian press codes: D = 1.6 (Tl + Ts) and D = 1.6 Tm, in mm and ms, with an extra distance by shading width.

use super::iso_13855_2010::K_FAR;
use super::*;
use crate::basis::Basis;

const CODE: &str = "Japan, structure codes for power presses and safety devices";
const DISTANCE: Source = Source::new(CODE, "distance of quick-stop two-hand and light-type devices", Basis::FromMemory);
const TRIP: Source = Source::new(CODE, "distance of two-hand start devices", Basis::FromMemory);
const EXTRA: Source = Source::new(CODE, "extra distance by continuous shading width", Basis::FromMemory);
const COARSEST: Source = Source::new(CODE, "safety devices, art. 20", Basis::PublicText);
const LABEL: Source =
    Source::new(CODE, "safety devices, art. 26: no stop may last longer than the label allows", Basis::FromMemory);

/// Shading width up to and including which each extra distance holds.
pub const EXTRA_STEPS: [(Length, Length); 4] = [
    (Length::mm(30), Length::ZERO),
    (Length::mm(35), Length::mm(200)),
    (Length::mm(45), Length::mm(300)),
    (Length::mm(50), Length::mm(400)),
];

/// The rule set.
pub struct EastAsia;

impl RuleSet for EastAsia {
    fn id(&self) -> RuleSetId {
        RuleSetId::EastAsia
    }

    fn distance(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
        match &case.kind {
            SafeguardKind::LightCurtain(curtain) => {
                require_part_revolution(case, DISTANCE)?;
                require_no_start(curtain)?;
                note_way_over(curtain, DISTANCE, steps);
                let Some((_, extra)) = EXTRA_STEPS.iter().find(|(up_to, _)| curtain.detection <= *up_to) else {
                    return Err(NoDemand::forbidden("a smallest detectable rod over 50 mm", COARSEST));
                };
                let extra = steps.put("C", "extra by shading width", expr!["width", curtain.detection], *extra, EXTRA);
                Ok(quick_stop(case, extra, steps))
            }
            SafeguardKind::TwoHandControl { .. } => {
                require_part_revolution(case, DISTANCE)?;
                Ok(quick_stop(case, Length::ZERO, steps))
            }
            SafeguardKind::TwoHandTrip => trip_distance(case, "D", K_FAR, false, TRIP, steps),
            other => Err(NoDemand::not_covered(format!("{}; no distance for it is known here", other.words()))),
        }
    }

    fn value_taken(&self) -> (ValueTaken, Source) {
        (ValueTaken::Greatest, LABEL)
    }
}

fn quick_stop(case: &Case, extra: Length, steps: &mut WorkedSteps) -> Demand {
    let time = response_time(case, "Tl + Ts", 1, DISTANCE, steps);
    let required = reach("D", "required distance", K_FAR, time, extra, DISTANCE, steps);
    Demand {
        required,
        strict: false,
        make_up: Some(MakeUp { speed: K_FAR, time, addition: extra, allowance_times: 1 }),
    }
}
