//! From typed text to exact thousandths, the same for the window, the command line and pasted tables.

use std::fmt;

use crate::round::{divide_down, divide_up};
use crate::units::{Length, LengthUnit};

/// Why a text is no number that can be taken.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Unreadable {
    /// Nothing was typed.
    Empty,
    /// Something other than digits and one decimal mark.
    NotANumber,
    /// More than one point or comma: grouping is not read, because `1,234.5` and `1.234,5` mean different things in different places.
    TwoMarks,
    /// More than three decimals: finer than the program keeps.
    TooFine,
    /// More digits than any quantity here can have.
    TooLong,
}

impl fmt::Display for Unreadable {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Empty => "Type a number.",
            Self::NotANumber => "Type digits with at most one decimal point or comma, without a unit.",
            Self::TwoMarks => "Type one decimal point or comma and no grouping of thousands.",
            Self::TooFine => "Type at most three decimals.",
            Self::TooLong => "Type fewer digits.",
        })
    }
}

/// Reads a decimal number with at most three decimals as a count of thousandths. Point and comma are both decimal marks.
pub fn thousandths(text: &str) -> Result<i64, Unreadable> {
    let text = text.trim();
    let (negative, digits) = match text.strip_prefix('-').or_else(|| text.strip_prefix('\u{2212}')) {
        Some(rest) => (true, rest),
        None => (false, text.strip_prefix('+').unwrap_or(text)),
    };
    if digits.is_empty() {
        return Err(if text.is_empty() { Unreadable::Empty } else { Unreadable::NotANumber });
    }
    if !digits.chars().all(|c| c.is_ascii_digit() || c == '.' || c == ',') {
        return Err(Unreadable::NotANumber);
    }
    if digits.matches(['.', ',']).count() > 1 {
        return Err(Unreadable::TwoMarks);
    }
    let (whole, decimals) = digits.split_once(['.', ',']).unwrap_or((digits, ""));
    if whole.is_empty() && decimals.is_empty() {
        return Err(Unreadable::NotANumber);
    }
    let decimals = decimals.trim_end_matches('0');
    if decimals.len() > 3 {
        return Err(Unreadable::TooFine);
    }
    if whole.len() > 12 {
        return Err(Unreadable::TooLong);
    }
    let count: i64 = format!("0{whole}{decimals:0<3}").parse().map_err(|_| Unreadable::TooLong)?;
    Ok(if negative { -count } else { count })
}

/// To which side a length typed in inches falls when it lies between two whole micrometres.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Side {
    /// The longer one is the cautious reading, as for a detection capability.
    Longer,
    /// The shorter one is the cautious reading, as for an installed distance.
    Shorter,
}

/// Reads a length typed in `unit`; a thousandth of an inch is 25.4 µm, so the last micrometre falls to the cautious side.
pub fn length(text: &str, unit: LengthUnit, side: Side) -> Result<Length, Unreadable> {
    let count = i128::from(thousandths(text)?);
    Ok(Length::from_base(match (unit, side) {
        (LengthUnit::Millimetre, _) => divide_down(count, 1),
        (LengthUnit::Inch, Side::Longer) => divide_up(count * 254, 10),
        (LengthUnit::Inch, Side::Shorter) => divide_down(count * 254, 10),
    }))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn reads_what_people_type_and_refuses_the_rest() {
        for (text, expected) in [
            ("182", Ok(182_000)),
            ("182.5", Ok(182_500)),
            ("182,5", Ok(182_500)),
            (" 0.125 ", Ok(125)),
            (".5", Ok(500)),
            ("5.", Ok(5_000)),
            ("1.0000", Ok(1_000)),
            ("-3", Ok(-3_000)),
            ("", Err(Unreadable::Empty)),
            ("12x", Err(Unreadable::NotANumber)),
            ("1.2.3", Err(Unreadable::TwoMarks)),
            ("1,234.5", Err(Unreadable::TwoMarks)),
            ("NaN", Err(Unreadable::NotANumber)),
            ("inf", Err(Unreadable::NotANumber)),
            ("1e3", Err(Unreadable::NotANumber)),
            (".", Err(Unreadable::NotANumber)),
            ("-", Err(Unreadable::NotANumber)),
            ("1.2345", Err(Unreadable::TooFine)),
            ("9999999999999", Err(Unreadable::TooLong)),
            ("١٢", Err(Unreadable::NotANumber)),
        ] {
            assert_eq!(thousandths(text), expected, "{text:?}");
        }
    }

    #[test]
    fn inches_are_25_4_mm_and_fall_to_the_cautious_side() {
        assert_eq!(length("31.5", LengthUnit::Inch, Side::Shorter), Ok(Length::from_base(800_100)));
        assert_eq!(length("0.001", LengthUnit::Inch, Side::Shorter), Ok(Length::from_base(25)));
        assert_eq!(length("0.001", LengthUnit::Inch, Side::Longer), Ok(Length::from_base(26)));
    }
}
