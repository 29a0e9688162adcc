//! The inverse: the largest time that an installed distance allows, against the exact formula and a search around it.

use calc::inverse::{self, is_met, with_stopping};
use calc::limits::STOPPING_TIME;
use calc::press::Conformity;
use calc::round::{Towards, time_text};
use calc::rules::{Case, RuleSetId};
use calc::units::{Length, Time};
use proptest::prelude::*;
use proptest::sample::select;
use proptest::test_runner::TestRunner;

use super::cases::{case, rule_set};
use super::config;
use super::formula::{distance, mm};
use crate::case::{case as question, curtain, mm as printed_mm, on_press};
use crate::row::Decimal;

fn installed() -> impl Strategy<Value = Length> {
    let near = (select(vec![100, 500, 850, 1170, 1200]), -1_i64..=1)
        .prop_map(|(mm, beside)| Length::mm(mm) + Length::from_base(beside));
    prop_oneof![
        near,
        (1_000..=2_000_000_i64).prop_map(Length::from_base),
        (1_000..=20_000_000_i64).prop_map(Length::from_base)
    ]
}

/// Whether the exact formula is satisfied, with nothing rounded.
fn holds_exactly(id: RuleSetId, case: &Case, installed: Length) -> bool {
    distance(id, case)
        .is_some_and(|(exact, strict)| if strict { mm(installed) > exact } else { mm(installed) >= exact })
}

#[test]
fn the_allowed_time_is_the_largest_that_holds_and_never_over_the_exact_one() {
    TestRunner::new(config(1_500))
        .run(&(rule_set(), case(), installed()), |(id, case, installed)| {
            let rules = id.rules();
            let Some(allowed) = inverse::allowed(rules, &case, installed) else { return Ok(()) };
            if !case.kind.needs_stop() {
                return Ok(());
            }
            let at = |us: i64| with_stopping(&case, Time::from_base(us));
            let Some(time) = allowed.stopping else {
                prop_assert!(!is_met(rules, &at(1), installed), "{:?}: 1 µs would hold", id);
                // The three micrometres of rounding are two microseconds of the slower hand.
                prop_assert!(!holds_exactly(id, &at(4), installed), "{:?}: 4 µs would hold exactly", id);
                return Ok(());
            };
            let us = time.base();
            prop_assert!(holds_exactly(id, &at(us), installed), "{:?}: {} is over the exact time", id, time);
            for beside in -20..=20 {
                let around = us + beside;
                if 0 <= around && around <= STOPPING_TIME.greatest {
                    prop_assert_eq!(
                        is_met(rules, &at(around), installed),
                        around <= us,
                        "{:?} {} {}",
                        id,
                        time,
                        beside
                    );
                }
            }
            if us + 3 <= STOPPING_TIME.greatest {
                prop_assert!(!holds_exactly(id, &at(us + 3), installed), "{:?}: {} gives time away", id, time);
            }
            let text = time_text(time, Towards::Smaller);
            let shown = Decimal::of(text.trim_end_matches(" ms")).times(1_000).whole();
            prop_assert!(shown <= us && us < shown + 100, "{} shown as {}", time, text);
            Ok(())
        })
        .unwrap();
}

#[test]
fn the_monitor_setting_is_the_largest_that_holds_without_a_further_allowance() {
    TestRunner::new(config(800))
        .run(&(rule_set(), case(), installed()), |(id, case, installed)| {
            let rules = id.rules();
            let Some(allowed) = inverse::allowed(rules, &case, installed) else { return Ok(()) };
            let at = |us: i64| {
                let mut case = with_stopping(&case, Time::from_base(us));
                case.times.allowance = Time::ZERO;
                case
            };
            match allowed.monitor {
                None => prop_assert!(!is_met(rules, &at(1), installed)),
                Some(setting) => {
                    prop_assert!(is_met(rules, &at(setting.base()), installed));
                    prop_assert!(
                        setting.base() == STOPPING_TIME.greatest || !is_met(rules, &at(setting.base() + 1), installed)
                    );
                }
            }
            Ok(())
        })
        .unwrap();
}

/// At exactly 500 mm the level part of the rule gives its far end: (500 mm − C) / 1600 mm/s, cut to a whole microsecond.
#[test]
fn at_500_mm_the_far_end_of_the_level_part_is_allowed() {
    let ce = |d: &str| on_press(question(curtain(printed_mm(d)), "0"), Conformity::CeMarked);
    for (id, d, c) in [
        (RuleSetId::Iso138552010, "14", 0),
        (RuleSetId::Iso138552010, "20", 48),
        (RuleSetId::Iso138552010, "30", 128),
        (RuleSetId::Iso138552010, "40", 208),
        (RuleSetId::Iso138552024, "14", 0),
        (RuleSetId::Iso138552024, "40", 208),
        (RuleSetId::EuPress, "14", 0),
        (RuleSetId::EuPress, "20", 80),
        (RuleSetId::EuPress, "30", 130),
        (RuleSetId::EuPress, "40", 240),
    ] {
        let allowed = inverse::allowed(id.rules(), &ce(d), Length::mm(500)).and_then(|allowed| allowed.stopping);
        assert_eq!(allowed, Some(Time::from_base((500 - c) * 1_000_000 / 1_600)), "{id:?}, d {d} mm");
        // A micrometre less and the fast hand decides: (499.999 mm − C) / 2000 mm/s.
        let short = Length::mm(500) - Length::from_base(1);
        let allowed = inverse::allowed(id.rules(), &ce(d), short).and_then(|allowed| allowed.stopping);
        assert_eq!(allowed, Some(Time::from_base((499_999 - 1_000 * c) / 2)), "{id:?}, d {d} mm, 499.999 mm");
    }
}
