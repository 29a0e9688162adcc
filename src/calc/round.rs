//! The named roundings, the only ones: each says which side is the cautious one.

use crate::units::{Length, LengthUnit, Time};

/// Quotient of whole numbers rounded towards plus infinity; `divisor` must be positive.
pub fn divide_up(dividend: i128, divisor: i128) -> i64 {
    narrow(-(-dividend).div_euclid(divisor))
}

/// Quotient of whole numbers rounded towards minus infinity; `divisor` must be positive.
pub fn divide_down(dividend: i128, divisor: i128) -> i64 {
    narrow(dividend.div_euclid(divisor))
}

/// Every permitted input keeps results some nine orders of magnitude below the limit of 64 bits; a result beyond it is a fault of ours.
fn narrow(value: i128) -> i64 {
    i64::try_from(value).expect("a quantity built from permitted inputs fits 64 bits")
}

/// Which way a figure is rounded when it is shown with fewer digits than it has.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Towards {
    /// Up: for required distances and times taken forward.
    Greater,
    /// Down: for installed distances, allowed times and spare.
    Smaller,
    /// To the nearest: for a figure that decides nothing, such as one read back from what the user typed.
    Nearest,
}

fn divide(dividend: i128, divisor: i128, towards: Towards) -> i64 {
    match towards {
        Towards::Greater => divide_up(dividend, divisor),
        Towards::Smaller => divide_down(dividend, divisor),
        Towards::Nearest => divide_down(2 * dividend + divisor, 2 * divisor),
    }
}

/// A length in the unit asked for, with one decimal in mm or three in inches, and the unit.
pub fn length_text(length: Length, unit: LengthUnit, towards: Towards) -> String {
    format!("{} {}", length_digits(length, unit, towards), unit.sign())
}

/// A length as [`length_text`] writes it, without the unit.
pub fn length_digits(length: Length, unit: LengthUnit, towards: Towards) -> String {
    let um = i128::from(length.base());
    match unit {
        LengthUnit::Millimetre => thousandths_text(divide(um, 100, towards) * 100),
        LengthUnit::Inch => thousandths_text(divide(um * 10, 254, towards)),
    }
}

/// A length with every digit in mm, or to the thousandth in inches: for worked steps and entry fields.
pub fn length_digits_full(length: Length, unit: LengthUnit, towards: Towards) -> String {
    match unit {
        LengthUnit::Millimetre => length.digits(),
        LengthUnit::Inch => length_digits(length, unit, towards),
    }
}

/// A time in milliseconds with one decimal, and the unit.
pub fn time_text(time: Time, towards: Towards) -> String {
    format!("{} ms", thousandths_text(divide(i128::from(time.base()), 100, towards) * 100))
}

/// A count of thousandths as decimal text: `12500` is `12.5`.
pub fn thousandths_text(count: i64) -> String {
    let sign = if count < 0 { "\u{2212}" } else { "" };
    let (whole, rest) = (count.unsigned_abs() / 1000, count.unsigned_abs() % 1000);
    if rest == 0 {
        return format!("{sign}{whole}");
    }
    let digits = format!("{rest:03}");
    format!("{sign}{whole}.{}", digits.trim_end_matches('0'))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_direction_is_kept_on_both_sides_of_zero() {
        for (value, up, down) in [(7, 4, 3), (-7, -3, -4), (8, 4, 4), (0, 0, 0)] {
            assert_eq!((divide_up(value, 2), divide_down(value, 2)), (up, down));
        }
    }

    #[test]
    fn shown_figures_lean_to_the_cautious_side() {
        let length = Length::from_base(412_010);
        assert_eq!(length_text(length, LengthUnit::Millimetre, Towards::Greater), "412.1 mm");
        assert_eq!(length_text(length, LengthUnit::Millimetre, Towards::Smaller), "412 mm");
        assert_eq!(length_text(-length, LengthUnit::Millimetre, Towards::Smaller), "\u{2212}412.1 mm");
        assert_eq!(length_text(Length::from_base(800_100), LengthUnit::Inch, Towards::Greater), "31.5 in");
        assert_eq!(length_text(Length::from_base(115_214), LengthUnit::Inch, Towards::Nearest), "4.536 in");
        assert_eq!(time_text(Time::from_base(6_951), Towards::Smaller), "6.9 ms");
    }
}
