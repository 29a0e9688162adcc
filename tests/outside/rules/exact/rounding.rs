//! The named roundings: what is shown of a required distance is never less, of an allowed time never more.

use calc::decimal::{self, Side};
use calc::round::{Towards, divide_down, divide_up, length_text, thousandths_text, time_text};
use calc::units::{Length, LengthUnit, Speed, Time};
use num_bigint::BigInt;
use num_rational::BigRational;
use proptest::prelude::*;
use proptest::sample::select;
use proptest::test_runner::TestRunner;

use super::config;
use super::formula::{mm, over, whole};

/// The number in front of the unit, exactly.
fn read(text: &str) -> BigRational {
    let number = text.split(' ').next().unwrap().replace('\u{2212}', "-");
    let (before, after) = number.split_once('.').unwrap_or((&number, ""));
    let digits: i64 = format!("{before}{after}").parse().unwrap();
    over(digits, 10_i64.pow(after.len() as u32))
}

fn check_side(
    shown: BigRational,
    exact: BigRational,
    unit: BigRational,
    towards: Towards,
) -> Result<(), TestCaseError> {
    let more = shown.clone() - exact.clone();
    let is_right = match towards {
        Towards::Greater => whole(0) <= more && more < unit,
        Towards::Smaller => -unit.clone() < more && more <= whole(0),
        Towards::Nearest => whole(-1) * unit.clone() <= more.clone() * whole(2) && more * whole(2) <= unit,
    };
    prop_assert!(is_right, "{} shown as {} towards {:?}", exact, shown, towards);
    Ok(())
}

fn towards() -> impl Strategy<Value = Towards> {
    select(vec![Towards::Greater, Towards::Smaller, Towards::Nearest])
}

fn counts() -> impl Strategy<Value = i64> {
    prop_oneof![-300..=300_i64, -40_000_000..=40_000_000_i64]
}

#[test]
fn shown_lengths_and_times_lean_to_the_side_that_was_asked_for() {
    TestRunner::new(config(4_000))
        .run(&(counts(), towards()), |(count, towards)| {
            let length = Length::from_base(count);
            let text = length_text(length, LengthUnit::Millimetre, towards);
            prop_assert!(text.ends_with(" mm"));
            check_side(read(&text), mm(length), over(1, 10), towards)?;
            let text = length_text(length, LengthUnit::Inch, towards);
            prop_assert!(text.ends_with(" in"));
            check_side(read(&text), mm(length) / over(254, 10), over(1, 1_000), towards)?;
            let text = time_text(Time::from_base(count), towards);
            prop_assert!(text.ends_with(" ms"));
            check_side(read(&text), over(count, 1_000), over(1, 10), towards)?;
            prop_assert_eq!(read(&thousandths_text(count)), over(count, 1_000));
            Ok(())
        })
        .unwrap();
}

#[test]
fn division_goes_up_or_down_and_never_the_other_way() {
    TestRunner::new(config(2_000))
        .run(
            &(any::<i32>(), -9_000_000_000_000_i64..=9_000_000_000_000, 1..=2_000_000_i64),
            |(small, large, divisor)| {
                for dividend in [i64::from(small), large] {
                    let exact = BigRational::new(BigInt::from(dividend), BigInt::from(divisor));
                    let (up, down) =
                        (divide_up(dividend.into(), divisor.into()), divide_down(dividend.into(), divisor.into()));
                    prop_assert_eq!(whole(up), exact.ceil());
                    prop_assert_eq!(whole(down), exact.floor());
                }
                Ok(())
            },
        )
        .unwrap();
}

#[test]
fn a_hand_is_never_taken_slower_than_it_is() {
    let speeds = select(vec![1_600_200_i64, 1_600_000, 2_000_000]);
    TestRunner::new(config(2_000))
        .run(&(speeds, 0..=20_000_000_i64), |(speed, count)| {
            let mm_per_s = over(speed, 1_000);
            let speed = Speed::from_base(speed);
            let reach = mm_per_s.clone() * over(count, 1_000_000);
            let got = mm(speed.reach_in(Time::from_base(count)));
            prop_assert!(reach <= got && got < reach + over(1, 1_000));
            let time = over(count, 1_000) / mm_per_s;
            let got = over(speed.time_over(Length::from_base(count)).base(), 1_000_000);
            prop_assert!(got <= time && time < got + over(1, 1_000_000));
            Ok(())
        })
        .unwrap();
}

/// Statistics enter in floating point; the exact product of that float is not passed by more than its own last digits.
#[test]
fn statistics_enter_at_or_above_their_value() {
    TestRunner::new(config(4_000))
        .run(&(0.0..10_000.0_f64), |ms| {
            let exact = BigRational::from_float(ms).unwrap() * whole(1_000);
            let got = whole(Time::from_ms_up(ms).unwrap().base());
            prop_assert!(got.clone() + over(1, 100_000_000) >= exact, "{} ms gave {} µs", ms, got);
            prop_assert!(got < exact + over(100_000_001, 100_000_000), "{} ms", ms);
            Ok(())
        })
        .unwrap();
}

#[test]
fn inches_are_read_to_the_cautious_micrometre() {
    TestRunner::new(config(2_000))
        .run(&(0..=800_000_i64), |thousandths| {
            let text = thousandths_text(thousandths);
            let exact = over(thousandths, 1_000) * over(254, 10);
            let longer = mm(decimal::length(&text, LengthUnit::Inch, Side::Longer).unwrap());
            let shorter = mm(decimal::length(&text, LengthUnit::Inch, Side::Shorter).unwrap());
            prop_assert!(shorter <= exact && exact <= longer);
            prop_assert!(longer - shorter <= over(1, 1_000));
            Ok(())
        })
        .unwrap();
}
