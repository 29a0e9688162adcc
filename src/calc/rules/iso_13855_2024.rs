//! ISO 13855:2024: S = K T + D_DS + Z, as far as public texts tell. What they do not tell is refused by name, never filled in.

use super::iso_13855_2010::{FLOOR, K_FAR, K_NEAR, SWITCH};
use super::*;
use crate::basis::Basis;
use crate::safeguard::{HorizontalField, LightCurtain, WayOver};
use crate::stop_test::BrakeState;

const DOCUMENT: &str = "ISO 13855:2024";
const fn part(words: &'static str, basis: Basis) -> Source {
    Source::new(DOCUMENT, words, basis)
}

const EQUATION: Source = part("general equation", Basis::PublicText);
const ORTHOGONAL: Source = part("orthogonal approach, d_e up to 40 mm", Basis::FromMemory);
const PARALLEL: Source = part("parallel approach", Basis::PublicText);
const FIELD_HEIGHT: Source = part("parallel approach, height of the field", Basis::SingleText);
const TWO_HAND: Source = part("two-hand control", Basis::SingleText);
const SUPPLEMENT: Source = part("supplemental distance Z", Basis::FromMemory);
const TESTS: Source = part("at least 10 measurements per condition", Basis::SingleText);
const VALUE: Source = part("evaluation of the measurements", Basis::FromMemory);
const STOPPING: Source = part("the safeguard must be able to stop the movement", Basis::FromMemory);

const FINE_UP_TO: Length = Length::mm(40);
const PARALLEL_REACH: Length = Length::mm(1200);
const TWO_HAND_REACH: Length = Length::mm(550);
const HIGHEST_FIELD: Length = Length::mm(1000);
const UNSEEN_FROM: Length = Length::mm(200);

/// The rule set.
pub struct Iso138552024;

impl RuleSet for Iso138552024 {
    fn id(&self) -> RuleSetId {
        RuleSetId::Iso138552024
    }

    fn distance(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
        if case.kind.needs_stop() {
            require_part_revolution(case, STOPPING)?;
        }
        match &case.kind {
            SafeguardKind::LightCurtain(curtain) => curtain_distance(case, curtain, steps),
            SafeguardKind::HorizontalField(field) => field_distance(case, field, steps),
            SafeguardKind::TwoHandControl { shrouded: false } => {
                let reach = steps.put(
                    "D_DS",
                    "reaching distance of two-hand control",
                    expr!["not shrouded"],
                    TWO_HAND_REACH,
                    TWO_HAND,
                );
                Ok(one_speed(case, reach, TWO_HAND, steps))
            }
            SafeguardKind::TwoHandControl { shrouded: true } => Err(NoDemand::not_covered(
                "the reaching distance of a shrouded two-hand control in the edition of 2024",
            )),
            SafeguardKind::GuardOpening(opening) => iso_13857::distance(opening, steps),
            SafeguardKind::TwoHandTrip => Err(NoDemand::not_covered("the closing time of a full-revolution clutch")),
            SafeguardKind::InterlockedGuard { .. }
            | SafeguardKind::SeparateBeams { .. }
            | SafeguardKind::Mat { .. } => Err(NoDemand::not_covered(format!(
                "{} in the edition of 2024, whose figures are not known here",
                case.kind.words()
            ))),
        }
    }

    fn value_taken(&self) -> (ValueTaken, Source) {
        (ValueTaken::GreatestOrMeanPlus3s, VALUE)
    }

    fn least_stops(&self) -> (usize, Source) {
        (10, TESTS)
    }

    fn judge_tests(&self, tests: &[&StopTest]) -> Vec<TestFinding> {
        BrakeState::ALL
            .iter()
            .filter(|state| !tests.iter().any(|test| test.condition.brake == **state))
            .map(|state| {
                TestFinding::Missing(format!(
                    "a stop test with the brake {}; this edition wants cold and warm",
                    state.words()
                ))
            })
            .collect()
    }

    fn looks_at_way_over(&self) -> bool {
        true
    }

    fn needs_supplement(&self) -> bool {
        true
    }
}

fn curtain_distance(case: &Case, curtain: &LightCurtain, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
    require_no_start(curtain)?;
    if curtain.detection > FINE_UP_TO {
        let what = "an effective detection capability over 40 mm, for which the edition of 2024 has a new formula that is not known here";
        return Err(NoDemand::not_covered(what));
    }
    if let WayOver::Open { .. } = curtain.over {
        return Err(NoDemand::not_covered("the distances for reaching over in the edition of 2024"));
    }
    let time = response_time(case, "T", 1, EQUATION, steps);
    let beyond = (curtain.detection - Length::mm(14)).greatest(Length::ZERO);
    let d_ds = Length::from_base(8 * beyond.base());
    steps.put(
        "D_DS",
        "reaching distance through the field, not under 0",
        expr!["8 × (", curtain.detection, "− 14 mm )"],
        d_ds,
        ORTHOGONAL,
    );
    let near = reach("S1", "with 2000 mm/s", K_NEAR, time, d_ds, ORTHOGONAL, steps);
    let (base, speed) = if near <= SWITCH {
        (near.greatest(FLOOR), K_NEAR)
    } else {
        let far = reach("S2", "over 500 mm: with 1600 mm/s, at least 500 mm", K_FAR, time, d_ds, ORTHOGONAL, steps);
        (far.greatest(SWITCH), K_FAR)
    };
    Ok(with_supplement(case, base, MakeUp { speed, time, addition: d_ds, allowance_times: 1 }, steps))
}

fn field_distance(case: &Case, field: &HorizontalField, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
    if field.tilt > Angle::ZERO {
        return Err(NoDemand::not_covered("fields tilted to the approach in the edition of 2024"));
    }
    require_lowest_beam_below(field)?;
    if field.height > HIGHEST_FIELD {
        return Err(NoDemand::not_covered("a field along the approach higher than 1000 mm"));
    }
    // H at least 15 (d_e - 50 mm).
    if field.lowest.base() < 15 * (field.detection.base() - 50_000) {
        return Err(NoDemand::not_covered(format!(
            "an effective detection capability of {} at a height of {}; the height must be at least 15 (d_e − 50 mm)",
            field.detection, field.lowest
        )));
    }
    if field.lowest > UNSEEN_FROM {
        steps.note(
            "",
            "field higher than 200 mm",
            "getting under it unseen must be prevented by other means",
            FIELD_HEIGHT,
        );
    }
    let reach = steps.put(
        "D_DS",
        "reaching distance along the approach",
        expr!["whatever the height"],
        PARALLEL_REACH,
        PARALLEL,
    );
    Ok(one_speed(case, reach, PARALLEL, steps))
}

fn one_speed(case: &Case, addition: Length, source: Source, steps: &mut WorkedSteps) -> Demand {
    let time = response_time(case, "T", 1, EQUATION, steps);
    let base = reach("K T + D_DS", "with 1600 mm/s", K_FAR, time, addition, source, steps);
    with_supplement(case, base, MakeUp { speed: K_FAR, time, addition, allowance_times: 1 }, steps)
}

fn with_supplement(case: &Case, base: Length, make_up: MakeUp, steps: &mut WorkedSteps) -> Demand {
    let z = steps.put("Z", "supplemental distance, entered", expr![case.supplement], case.supplement, SUPPLEMENT);
    let required = steps.put("S", "required separation distance", expr![base, "+", z], base + z, EQUATION);
    Demand { required, strict: false, make_up: Some(MakeUp { addition: make_up.addition + z, ..make_up }) }
}
