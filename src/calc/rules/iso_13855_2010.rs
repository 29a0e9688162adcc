//! ISO 13855:2010: S = K × T + C for every kind of approach. Withdrawn by most bodies in 2024-25, still widely cited.

use super::reaching_over::reach_over;
use super::*;
use crate::basis::Basis;
use crate::safeguard::{Gap, HorizontalField, LightCurtain, WayOver};

const DOCUMENT: &str = "ISO 13855:2010";
const fn clause(clause: &'static str, basis: Basis) -> Source {
    Source::new(DOCUMENT, clause, basis)
}

/// Hand speed of the upper limbs at short range.
pub(super) const K_NEAR: Speed = Speed::mm_per_s(2000);
/// Walking speed, and hand speed beyond 500 mm.
pub(super) const K_FAR: Speed = Speed::mm_per_s(1600);
/// Beyond this the slower speed may be used, but never for less than this.
pub(super) const SWITCH: Length = Length::mm(500);
/// No distance across the approach is ever less.
pub(super) const FLOOR: Length = Length::mm(100);

const ORTHOGONAL: Source = clause("6.2.3.1", Basis::PublicText);
const COARSE: Source = clause("6.2.3.2", Basis::PublicText);
const LOW_BEAM: Source = clause("6.2.3.2", Basis::FromMemory);
const BEAMS: Source = clause("6.2.4, Annex E", Basis::FromMemory);
const PARALLEL: Source = clause("6.3", Basis::SingleText);
const ANGLED: Source = clause("6.4", Basis::FromMemory);
const OVER: Source = clause("6.5", Basis::PublicText);
const MATS: Source = clause("7", Basis::FromMemory);
const TWO_HAND: Source = clause("8", Basis::PublicText);
const GUARD: Source = clause("9", Basis::FromMemory);
const TESTS: Source = clause("Annex D", Basis::FromMemory);
const STOPPING: Source = clause("1, 4: the safeguard must be able to stop the movement", Basis::FromMemory);

const FINE_UP_TO: Length = Length::mm(40);
const COARSE_UP_TO: Length = Length::mm(70);
/// Over 40 mm the lowest beam lies at most this high.
const LOWEST_BEAM: Length = Length::mm(300);
const BODY: Length = Length::mm(850);
const ONE_BEAM: Length = Length::mm(1200);
const TWO_HAND_ADDITION: Length = Length::mm(250);
const PARALLEL_ADDITION: Length = Length::mm(1200);
const HIGHEST_FIELD: Length = Length::mm(1000);
/// From this angle to the approach a field counts as across it; ±5° the larger of both readings is taken.
const ACROSS_FROM: i64 = 30_000;
const ANGLE_TOLERANCE: i64 = 5_000;
/// Heights of separate beams over the reference plane, in mm.
const BEAM_HEIGHTS: [&[i64]; 4] = [&[750], &[400, 900], &[300, 700, 1100], &[300, 600, 900, 1200]];

/// The rule set.
pub struct Iso138552010;

impl RuleSet for Iso138552010 {
    fn id(&self) -> RuleSetId {
        RuleSetId::Iso138552010
    }

    fn distance(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
        if case.kind.needs_stop() {
            require_part_revolution(case, STOPPING)?;
        }
        match &case.kind {
            SafeguardKind::LightCurtain(curtain) => curtain_distance(case, curtain, steps),
            SafeguardKind::SeparateBeams { heights } => {
                let (addition, words) = beams_addition(heights)?;
                let time = response_time(case, "T", 1, BEAMS, steps);
                let c = steps.put("C", "reaching past the beams", expr![words], addition, BEAMS);
                Ok(single_speed(time, c, Length::ZERO, BEAMS, steps))
            }
            SafeguardKind::HorizontalField(field) => field_distance(case, field, steps),
            SafeguardKind::Mat { height } => {
                if *height > HIGHEST_FIELD {
                    return Err(NoDemand::not_covered("a mat higher than 1000 mm"));
                }
                let time = response_time(case, "T", 1, MATS, steps);
                let c = parallel_addition(*height, MATS, steps);
                Ok(single_speed(time, c, Length::ZERO, MATS, steps))
            }
            SafeguardKind::TwoHandControl { shrouded } => {
                let time = response_time(case, "T", 1, TWO_HAND, steps);
                let c = two_hand_addition(*shrouded, TWO_HAND, steps);
                Ok(single_speed(time, c, FLOOR, TWO_HAND, steps))
            }
            SafeguardKind::TwoHandTrip => Err(NoDemand::not_covered("the closing time of a full-revolution clutch")),
            SafeguardKind::InterlockedGuard { gap, opening_time } => {
                let full = response_time(case, "T", 1, GUARD, steps);
                let time = match opening_time {
                    Some(t3) => {
                        let less = (full - *t3).max(Time::ZERO);
                        steps.put(
                            "T − t3",
                            "less the time the guard needs to open, not under 0",
                            expr![full, "−", *t3],
                            less,
                            GUARD,
                        )
                    }
                    None => full,
                };
                let c = match gap {
                    Gap::NotStated => {
                        return Err(NoDemand::missing(
                            "whether a part of the body can get through the gap before the stop is signalled",
                        ));
                    }
                    Gap::None => Length::ZERO,
                    Gap::Open(opening) => iso_13857::reach_through(opening, steps)?,
                };
                Ok(single_speed(time, c, Length::ZERO, GUARD, steps))
            }
            SafeguardKind::GuardOpening(opening) => iso_13857::distance(opening, steps),
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
    require_no_start(curtain)?;
    let d = curtain.detection;
    if d > COARSE_UP_TO {
        return Err(NoDemand::not_covered(format!(
            "a detection capability of {d}; over 70 mm a field counts as separate beams"
        )));
    }
    if d > FINE_UP_TO {
        require_low_beam(curtain.lower_edge)?;
    }
    let source = if d <= FINE_UP_TO { ORTHOGONAL } else { COARSE };
    let time = response_time(case, "T", 1, source, steps);
    let through = if d <= FINE_UP_TO {
        let c = fine_addition(d, source, steps);
        two_speeds(time, c, source, steps)
    } else {
        let c = steps.put("C", "arm through a field of 40 to 70 mm", expr!["d =", d], BODY, COARSE);
        steps.note("", "lowest beam", format!("not over {LOWEST_BEAM}"), LOW_BEAM);
        single_speed(time, c, FLOOR, COARSE, steps)
    };
    with_way_over(curtain, time, through, steps)
}

/// A field that a leg or arm can pass must begin low enough that nobody creeps under it.
fn require_low_beam(lowest: Option<Length>) -> Result<(), NoDemand> {
    match lowest {
        None => Err(NoDemand::missing(
            "the height of the lowest beam, at most 300 mm for a detection capability over 40 mm",
        )),
        Some(lowest) if lowest > LOWEST_BEAM => Err(NoDemand::not_covered(format!(
            "a field coarser than 40 mm whose lowest beam is at {lowest}; 300 mm is the most"
        ))),
        Some(_) => Ok(()),
    }
}

/// The larger of the distance through the field and, where the way is open, that over its upper edge.
pub(super) fn with_way_over(
    curtain: &LightCurtain,
    time: Time,
    through: Demand,
    steps: &mut WorkedSteps,
) -> Result<Demand, NoDemand> {
    let WayOver::Open { hazard, upper_edge } = curtain.over else { return Ok(through) };
    let c_over = reach_over(hazard, upper_edge, steps)?;
    let over = two_speeds(time, c_over, OVER, steps);
    Ok(larger(through, over, "larger of reaching through and reaching over", OVER, steps))
}

/// C = 8 (d − 14 mm), not under 0, for fields of up to 40 mm.
pub(super) fn fine_addition(d: Length, source: Source, steps: &mut WorkedSteps) -> Length {
    let fourteen = Length::mm(14);
    let beyond = (d - fourteen).greatest(Length::ZERO);
    steps.put(
        "C",
        "finger or hand through the field, not under 0",
        expr!["8 × (", d, "−", fourteen, ")"],
        Length::from_base(8 * beyond.base()),
        source,
    )
}

/// The distance across the approach: 2000 mm/s; over 500 mm 1600 mm/s, but then at least 500 mm; never under 100 mm.
pub(super) fn two_speeds(time: Time, c: Length, source: Source, steps: &mut WorkedSteps) -> Demand {
    let near = reach("S1", "with 2000 mm/s", K_NEAR, time, c, source, steps);
    if near < FLOOR {
        let required = steps.put("S", "required distance, never under 100 mm", expr![near, "<", FLOOR], FLOOR, source);
        return demand(required, K_NEAR, time, c);
    }
    if near <= SWITCH {
        let required = steps.put("S", "required distance", expr![near, "≤", SWITCH], near, source);
        return demand(required, K_NEAR, time, c);
    }
    let far = reach("S2", "over 500 mm: with 1600 mm/s", K_FAR, time, c, source, steps);
    let required = steps.put(
        "S",
        "required distance, at least 500 mm",
        expr!["larger of", far, "and", SWITCH],
        far.greatest(SWITCH),
        source,
    );
    demand(required, K_FAR, time, c)
}

/// S = 1600 mm/s × T + C, not under `floor`.
pub(super) fn single_speed(time: Time, c: Length, floor: Length, source: Source, steps: &mut WorkedSteps) -> Demand {
    let mut required = reach("S", "required distance", K_FAR, time, c, source, steps);
    if required < floor {
        required = steps.put("S", "required distance, never under 100 mm", expr![required, "<", floor], floor, source);
    }
    demand(required, K_FAR, time, c)
}

fn demand(required: Length, speed: Speed, time: Time, addition: Length) -> Demand {
    Demand { required, strict: false, make_up: Some(MakeUp { speed, time, addition, allowance_times: 1 }) }
}

fn larger(one: Demand, other: Demand, meaning: &str, source: Source, steps: &mut WorkedSteps) -> Demand {
    let chosen = if other.required > one.required { other } else { one };
    steps.put("S", meaning, expr![one.required, "and", other.required], chosen.required, source);
    chosen
}

/// C = 250 mm, or nothing where shrouding keeps a hand from reaching in.
pub(super) fn two_hand_addition(shrouded: bool, source: Source, steps: &mut WorkedSteps) -> Length {
    let (words, c) =
        if shrouded { ("actuators shrouded", Length::ZERO) } else { ("actuators not shrouded", TWO_HAND_ADDITION) };
    steps.put("C", "reach while an actuator is still held", expr![words], c, source)
}

fn parallel_addition(height: Length, source: Source, steps: &mut WorkedSteps) -> Length {
    let less = Length::from_base(divide_down(i128::from(height.base()) * 2, 5));
    let c = (PARALLEL_ADDITION - less).greatest(BODY);
    steps.put(
        "C",
        "reach over a field along the approach, not under 850 mm",
        expr![PARALLEL_ADDITION, "− 0.4 ×", height],
        c,
        source,
    )
}

fn field_distance(case: &Case, field: &HorizontalField, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
    let tilt = field.tilt.base();
    let across = |steps: &mut WorkedSteps| {
        let curtain = LightCurtain {
            detection: field.detection,
            lower_edge: Some(field.lowest),
            over: WayOver::Closed,
            starts_stroke: false,
        };
        curtain_distance(case, &curtain, steps)
    };
    if tilt > ACROSS_FROM + ANGLE_TOLERANCE {
        steps.note("", format!("field at {}° to the approach", field.tilt.digits()), "counts as across it", ANGLED);
        return across(steps);
    }
    if tilt > 0 {
        steps.note("", format!("field at {}° to the approach", field.tilt.digits()), "counts as along it", ANGLED);
    }
    let along = along_distance(case, field, steps)?;
    if tilt < ACROSS_FROM - ANGLE_TOLERANCE {
        return Ok(along);
    }
    let across = across(steps)?;
    Ok(larger(along, across, "30° ± 5° to the approach: larger of both readings", ANGLED, steps))
}

fn along_distance(case: &Case, field: &HorizontalField, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
    require_lowest_beam_below(field)?;
    if field.height > HIGHEST_FIELD {
        return Err(NoDemand::not_covered("a field along the approach higher than 1000 mm"));
    }
    // d at most H/15 + 50 mm, kept whole by multiplying with 15.
    if field.detection.base() * 15 > field.lowest.base() + 15 * 50_000 {
        return Err(NoDemand::not_covered(format!(
            "a detection capability of {} at a height of {}; it may be at most H/15 + 50 mm",
            field.detection, field.lowest
        )));
    }
    let time = response_time(case, "T", 1, PARALLEL, steps);
    let c = parallel_addition(field.height, PARALLEL, steps);
    if field.lowest > Length::mm(300) {
        steps.note(
            "",
            "field higher than 300 mm",
            "crawling under it unseen must be prevented by other means",
            PARALLEL,
        );
    }
    Ok(single_speed(time, c, Length::ZERO, PARALLEL, steps))
}

fn beams_addition(heights: &[Length]) -> Result<(Length, String), NoDemand> {
    if heights.is_empty() {
        return Err(NoDemand::missing("the heights of the beams"));
    }
    let mut upwards = heights.to_vec();
    upwards.sort_unstable();
    let known = BEAM_HEIGHTS.iter().any(|known| known.iter().map(|mm| Length::mm(*mm)).eq(upwards.iter().copied()));
    if !known {
        let given = heights.iter().map(|height| height.digits()).collect::<Vec<_>>().join(", ");
        return Err(NoDemand::not_covered(format!(
            "beams at {given} mm; the standard knows 750; 400, 900; 300, 700, 1100; and 300, 600, 900, 1200 mm"
        )));
    }
    let words = format!("{} beam{}", heights.len(), if heights.len() == 1 { "" } else { "s" });
    Ok((if heights.len() == 1 { ONE_BEAM } else { BODY }, words))
}
