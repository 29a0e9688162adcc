//! What single change would make a short safeguard hold. Each is tried under the rule itself before it is named; one that
//! would not be enough is not named.

use crate::assess::{Chosen, Question};
use crate::inverse::{is_met, longest, with_stopping};
use crate::limits;
use crate::round::divide_up;
use crate::rules::{Case, Demand};
use crate::safeguard::{SafeguardKind, WayOver};
use crate::stop_test::StopPath;
use crate::units::{Length, Rate, Time};
use crate::verdict::{Answer, Reason};

/// One change that would make a short safeguard satisfy its rule.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Remedy {
    /// Move it so that the tape reads at least this.
    MoveTo(Length),
    /// Stop within this time, as the same clock would show it.
    StopWithin(Time),
    /// A field with at most this detection capability.
    FinerField(Length),
    /// A device that responds within this time.
    FasterDevice(Time),
    /// Run no faster than this; the tests at that speed and below carry it.
    SlowerSpeed(Rate),
    /// Let it call for the other stop; the tests of that stop carry it.
    UsePath(StopPath),
    /// Shroud the actuators.
    Shroud,
    /// Close the way over the upper edge.
    CloseWayOver,
}

/// A response faster than this is no device on the market; naming it would be no help.
const FASTEST_DEVICE: Time = Time::ms(1);

pub(crate) fn remedies(
    question: &Question,
    case: &Case,
    chosen: Option<&Chosen>,
    demand: Option<Demand>,
    reasons: &[Reason],
) -> Vec<Remedy> {
    let Some(installed) = &question.safeguard.installed else { return Vec::new() };
    let relied_on = installed.relied_on();
    // A press that fails the rule as such is not mended by a change of the safeguard; a ban may be, and is tried below.
    let failings = reasons.iter().filter(|reason| reason.answer == Answer::Short).count();
    if failings != 1 {
        return Vec::new();
    }
    let is_banned_or_too_near = demand.is_none_or(|demand| !demand.is_met_by(relied_on));
    if !is_banned_or_too_near {
        return Vec::new();
    }
    let holds = |case: &Case| is_met(question.rules, case, relied_on);
    let mut found = Vec::new();
    if let Some(demand) = demand {
        let tape = demand.least_distance() + installed.uncertainty;
        found.push(Remedy::MoveTo(Length::mm(divide_up(i128::from(tape.base()), 1000))));
        if demand.make_up.is_some() && question.safeguard.kind.needs_stop() {
            let least = Time::from_base(limits::STOPPING_TIME.least);
            found.extend(
                longest(|time| holds(&with_stopping(case, time))).filter(|time| *time >= least).map(Remedy::StopWithin),
            );
        }
    }
    found.extend(finer_field(case, &holds));
    if case.times.device > Time::ZERO && demand.is_some() {
        let with_device = |time: Time| {
            let mut case = case.clone();
            case.times.device = time;
            case
        };
        found.extend(
            longest(|time| holds(&with_device(time))).filter(|time| *time >= FASTEST_DEVICE).map(Remedy::FasterDevice),
        );
    }
    if let Some(chosen) = chosen {
        found.extend(slower_speed(question, chosen, &holds));
        found.extend(other_path(question, &holds));
    }
    if let SafeguardKind::TwoHandControl { shrouded: false } = case.kind {
        let shrouded = Case { kind: SafeguardKind::TwoHandControl { shrouded: true }, ..case.clone() };
        found.extend(holds(&shrouded).then_some(Remedy::Shroud));
    }
    if let SafeguardKind::LightCurtain(curtain) = &case.kind
        && let WayOver::Open { .. } = curtain.over
    {
        let mut curtain = curtain.clone();
        curtain.over = WayOver::Closed;
        let closed = Case { kind: SafeguardKind::LightCurtain(curtain), ..case.clone() };
        found.extend(holds(&closed).then_some(Remedy::CloseWayOver));
    }
    found
}

/// The coarsest field, in whole millimetres, that is finer than the present one and holds.
fn finer_field(case: &Case, holds: &impl Fn(&Case) -> bool) -> Option<Remedy> {
    let present = match &case.kind {
        SafeguardKind::LightCurtain(curtain) => curtain.detection,
        SafeguardKind::HorizontalField(field) => field.detection,
        _ => return None,
    };
    let with_detection = |detection: Length| {
        let mut case = case.clone();
        match &mut case.kind {
            SafeguardKind::LightCurtain(curtain) => curtain.detection = detection,
            SafeguardKind::HorizontalField(field) => field.detection = detection,
            _ => {}
        }
        case
    };
    // Fields finer than 10 mm are not made for presses.
    let coarsest = (present.base() - 1) / 1000;
    (10..=coarsest).rev().map(Length::mm).find(|detection| holds(&with_detection(*detection))).map(Remedy::FinerField)
}

fn slower_speed(question: &Question, chosen: &Chosen, holds: &impl Fn(&Case) -> bool) -> Option<Remedy> {
    let tests = question.tests(question.safeguard.stop_path);
    let speed = |index: &usize| question.press.stop_tests[*index].condition.speed;
    let present = question.press.stop_tests[chosen.governing.test].condition.speed;
    let mut slower: Vec<Rate> = tests.iter().map(speed).filter(|speed| *speed < present).collect();
    slower.sort_unstable();
    slower.dedup();
    slower
        .into_iter()
        .rev()
        .find(|fastest| is_carried(question, &tests, Some(*fastest), holds))
        .map(Remedy::SlowerSpeed)
}

fn other_path(question: &Question, holds: &impl Fn(&Case) -> bool) -> Option<Remedy> {
    let other = match question.safeguard.stop_path {
        StopPath::Normal => StopPath::Emergency,
        StopPath::Emergency => StopPath::Normal,
    };
    is_carried(question, &question.tests(other), None, holds).then_some(Remedy::UsePath(other))
}

/// Whether tests up to a speed are enough in number and hold.
fn is_carried(question: &Question, tests: &[usize], fastest: Option<Rate>, holds: &impl Fn(&Case) -> bool) -> bool {
    let (least, _) = question.rules.least_stops();
    let enough = |index: &usize| {
        let test = &question.press.stop_tests[*index];
        fastest.is_none_or(|fastest| test.condition.speed <= fastest) && test.stops.len() >= least
    };
    tests.iter().any(enough)
        && question.choose(tests, fastest).is_some_and(|chosen| holds(&question.case(Some(&chosen))))
}
