//! What a rule set asks for is never less than the exact fraction, and less than three micrometres more.

use std::cell::RefCell;
use std::collections::BTreeMap;

use calc::rules::{Case, Demand, RuleSetId};
use calc::safeguard::SafeguardKind;
use calc::steps::{Term, WorkedSteps};
use calc::units::Time;
use proptest::prelude::*;
use proptest::test_runner::TestRunner;

use super::cases::{case, detection, rule_set};
use super::config;
use super::formula::{distance, mm, over};

fn demand(id: RuleSetId, case: &Case) -> Option<Demand> {
    id.rules().demand(case, &mut WorkedSteps::new()).ok()
}

#[test]
fn every_distance_is_the_exact_one_rounded_up_and_every_refusal_is_meant() {
    let covered = RefCell::new(BTreeMap::new());
    let run = TestRunner::new(config(12_000)).run(&(rule_set(), case()), |(id, case)| {
        let got = demand(id, &case);
        let exact = distance(id, &case);
        prop_assert_eq!(got.is_some(), exact.is_some(), "{:?} gave {:?}, exact {:?}", id, got, exact);
        if let (Some(got), Some((exact, strict))) = (got, exact) {
            prop_assert_eq!(got.strict, strict);
            prop_assert!(mm(got.required) >= exact, "{:?}: {:?} is under {}", id, got, exact);
            prop_assert!(mm(got.required) < exact.clone() + over(3, 1_000), "{:?}: {:?} is over {}", id, got, exact);
            *covered.borrow_mut().entry((id, case.kind.key())).or_insert(0) += 1;
        }
        Ok(())
    });
    run.unwrap();
    // A sweep that never met a pair proves nothing about it: this is what the seven rule sets cover.
    let pairs: Vec<String> = covered.into_inner().keys().map(|(id, kind)| format!("{} {kind}", id.key())).collect();
    assert_eq!(pairs.len(), 28, "{pairs:#?}");
}

/// The last line with a length is the distance itself, or a part of its make-up that nothing follows.
#[test]
fn the_derivation_ends_with_the_distance() {
    TestRunner::new(config(2_000))
        .run(&(rule_set(), case()), |(id, case)| {
            let mut steps = WorkedSteps::new();
            if let Ok(demand) = id.rules().demand(&case, &mut steps) {
                let last = steps.iter().rev().find_map(|step| match step.value {
                    Term::Length(length) => Some(length),
                    _ => None,
                });
                prop_assert_eq!(last, Some(demand.required));
            }
            Ok(())
        })
        .unwrap();
}

#[test]
fn no_distance_shrinks_when_any_time_grows() {
    let parts: [fn(&mut Case) -> &mut Time; 5] = [
        |case| &mut case.times.stopping,
        |case| &mut case.times.device,
        |case| &mut case.times.interface,
        |case| &mut case.times.control,
        |case| &mut case.times.allowance,
    ];
    let more = prop_oneof![1..=3_i64, 1..=2_000_000_i64];
    TestRunner::new(config(5_000))
        .run(&(rule_set(), case(), 0..parts.len(), more), |(id, case, part, more)| {
            let mut longer = case.clone();
            let time = parts[part](&mut longer);
            *time = *time + Time::from_base(more);
            let (before, after) = (demand(id, &case), demand(id, &longer));
            prop_assert_eq!(before.is_some(), after.is_some());
            if let (Some(before), Some(after)) = (before, after) {
                prop_assert!(before.required <= after.required, "{:?}: {:?} then {:?}", id, before, after);
            }
            Ok(())
        })
        .unwrap();
}

#[test]
fn no_distance_shrinks_when_a_field_gets_coarser() {
    TestRunner::new(config(5_000))
        .run(&(rule_set(), case(), detection()), |(id, case, other)| {
            let mut changed = case.clone();
            let one = match &mut changed.kind {
                SafeguardKind::LightCurtain(curtain) => std::mem::replace(&mut curtain.detection, other),
                SafeguardKind::HorizontalField(field) => std::mem::replace(&mut field.detection, other),
                _ => return Ok(()),
            };
            let (finer, coarser) = if one <= other { (&case, &changed) } else { (&changed, &case) };
            if let Some(of_coarser) = demand(id, coarser) {
                let of_finer = demand(id, finer);
                prop_assert!(of_finer.is_some(), "{:?} covers the coarser field only", id);
                prop_assert!(of_finer.is_some_and(|of_finer| of_finer.required <= of_coarser.required));
            }
            Ok(())
        })
        .unwrap();
}

/// Beams of any order are the same beams.
#[test]
fn the_order_of_beams_does_not_matter() {
    TestRunner::new(config(2_000))
        .run(&(rule_set(), case()), |(id, case)| {
            let mut turned = case.clone();
            if let SafeguardKind::SeparateBeams { heights } = &mut turned.kind {
                heights.reverse();
                prop_assert_eq!(demand(id, &case), demand(id, &turned));
            }
            Ok(())
        })
        .unwrap();
}
