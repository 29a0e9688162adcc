//! 29 CFR 1910.217(h): start of the stroke by presence sensing.
//!
//! Ds >= Hs × (Ts + Tp + Tr + 2 Tm) + Dp, with Ts the longest of the three average stopping times at 45°, 60° and 90°, and
//! Tm the increase that the brake monitor allows at the top of the stroke, counted twice because stops in the downstroke
//! worsen more. Validation and yearly recertification of the installation are the user's; see SAFETY.md.

use super::us_1910_217::HAND_SPEED;
use super::*;
use crate::basis::Basis;
use crate::stop_test::Condition;

const DOCUMENT: &str = "29 CFR 1910.217";
const FORMULA: Source = Source::new(DOCUMENT, "(h)(9)(v)", Basis::FromMemory);
const AVERAGES: Source = Source::new(DOCUMENT, "(h)(9)(v), (h)(2)(ii)", Basis::PublicText);
const SENSITIVITY: Source = Source::new(DOCUMENT, "(h)(9)(iii)-(iv)", Basis::PublicText);
const PENETRATION: Source = Source::new(DOCUMENT, "(h), Figure H-1", Basis::FromMemory);
const PART_REVOLUTION: Source = Source::new(DOCUMENT, "(h), Appendix D; (c)(3)(iii)(a)", Basis::PublicText);
const SUPPLEMENTAL: Source = Source::new(DOCUMENT, "(h)(10)(ii): supplemental safeguards", Basis::PublicText);
const MONITOR: Source = Source::new(DOCUMENT, "(h)(5)(iii)", Basis::PublicText);

/// Least object sensitivity at most 1 1/4 in.
const COARSEST: Length = Length::from_base(31_750);
/// Figure H-1, a straight line: Dp = 3.4 × (S - 0.275 in); 0.275 in is 6985 µm.
const PENETRATION_OFFSET: Length = Length::from_base(6_985);
/// At most this share of the average stopping time at the top, in per cent.
const MOST_PER_CENT_OF_TOP: i128 = 125;
/// The monitor may allow 10 % of the longest stopping time at the top, or 10 ms, whichever is longer.
const LEAST_MONITOR_LIMIT: Time = Time::ms(10);

const NEEDED: [NeededAngle; 4] = [needed(0), needed(45), needed(60), needed(90)];

const fn needed(degrees: i64) -> NeededAngle {
    NeededAngle { angle: Angle::deg(degrees), within: Angle::deg(5), source: AVERAGES }
}

/// The rule set.
pub struct Us1910217H;

impl RuleSet for Us1910217H {
    fn id(&self) -> RuleSetId {
        RuleSetId::Us1910217H
    }

    fn distance(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
        let SafeguardKind::LightCurtain(curtain) = &case.kind else {
            return Err(NoDemand::not_covered(format!(
                "{}; paragraph (h) is about presence sensing that starts the stroke",
                case.kind.words()
            )));
        };
        require_part_revolution(case, PART_REVOLUTION)?;
        if curtain.detection > COARSEST {
            return Err(NoDemand::forbidden("object sensitivity coarser than 1 1/4 in (31.75 mm)", SENSITIVITY));
        }
        note_way_over(curtain, SUPPLEMENTAL, steps);
        let time = response_time(case, "T", 2, FORMULA, steps);
        let beyond = (curtain.detection - PENETRATION_OFFSET).greatest(Length::ZERO);
        let dp = steps.put(
            "Dp",
            "penetration, not under 0",
            expr!["3.4 × (", curtain.detection, "−", PENETRATION_OFFSET, ")"],
            Length::from_base(divide_up(i128::from(beyond.base()) * 34, 10)),
            PENETRATION,
        );
        let required = reach("Ds", "required distance", HAND_SPEED, time, dp, FORMULA, steps);
        let make_up = MakeUp { speed: HAND_SPEED, time, addition: dp, allowance_times: 2 };
        Ok(Demand { required, strict: false, make_up: Some(make_up) })
    }

    fn value_taken(&self) -> (ValueTaken, Source) {
        (ValueTaken::Mean, AVERAGES)
    }

    fn needed_angles(&self) -> &'static [NeededAngle] {
        &NEEDED
    }

    fn governing_angles(&self) -> &'static [NeededAngle] {
        &NEEDED[1..]
    }

    fn judge_tests(&self, tests: &[&StopTest]) -> Vec<TestFinding> {
        let about = |needed: &NeededAngle| {
            let is_about = |test: &&StopTest| needed.is_met_by(test.condition.angle) && !test.stops.is_empty();
            tests.iter().copied().filter(is_about).collect::<Vec<_>>()
        };
        let tops = about(&NEEDED[0]);
        let mut findings = Vec::new();
        for needed in &NEEDED[1..] {
            let too_long = about(needed).into_iter().find_map(|test| {
                let top = top_of(test, &tops)?;
                is_over_share(&test.stops, &top.stops).then_some((test, top))
            });
            if let Some((test, top)) = too_long {
                findings.push(TestFinding::Fails(format!(
                    "the average stopping time at {}° is {}, more than 125 % of the {} at the top ({})",
                    needed.angle.digits(),
                    mean_words(&test.stops),
                    mean_words(&top.stops),
                    AVERAGES.place()
                )));
            }
        }
        findings
    }

    fn monitor_limit(&self, tests: &[&StopTest]) -> Option<MonitorLimit> {
        let longest_top = *tests
            .iter()
            .filter(|test| NEEDED[0].is_met_by(test.condition.angle))
            .flat_map(|test| &test.stops)
            .max()?;
        Some(MonitorLimit { longest_top, most_increase: monitor_limit(longest_top), source: MONITOR })
    }
}

/// The stops at the top that a test is compared with: those of its own condition, or of any where there are none; among
/// several the shortest average, which admits least.
fn top_of<'a>(test: &StopTest, tops: &[&'a StopTest]) -> Option<&'a StopTest> {
    let shortest = |of: &dyn Fn(&StopTest) -> bool| {
        tops.iter().copied().filter(|top| of(top)).reduce(|one, other| {
            let (of_one, of_other) = (crosswise(&one.stops, &other.stops), crosswise(&other.stops, &one.stops));
            if of_other < of_one { other } else { one }
        })
    };
    let condition_at = |top: &StopTest| Condition { angle: top.condition.angle, ..test.condition.clone() };
    shortest(&|top| top.condition == condition_at(top)).or_else(|| shortest(&|_| true))
}

/// The sum of `stops` times the number of `others`: averages are compared crosswise, with nothing rounded.
fn crosswise(stops: &[Time], others: &[Time]) -> i128 {
    stops.iter().map(|stop| i128::from(stop.base())).sum::<i128>() * others.len() as i128
}

fn is_over_share(stops: &[Time], top: &[Time]) -> bool {
    crosswise(stops, top) * 100 > crosswise(top, stops) * MOST_PER_CENT_OF_TOP
}

fn mean_words(stops: &[Time]) -> String {
    ValueTaken::Mean.of(stops).map_or_else(String::new, |mean| mean.to_string())
}

/// The greatest increase that the brake monitor may allow: 10 % of the longest stopping time at the top of the stroke, rounded
/// down, or 10 ms, whichever is longer.
pub fn monitor_limit(longest_top_stop: Time) -> Time {
    Time::from_base(longest_top_stop.base() / 10).max(LEAST_MONITOR_LIMIT)
}
