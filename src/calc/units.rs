//! Exact quantities: whole thousandths of the unit the trade speaks in.
//!
//! A [`Time`] counts whole microseconds, a [`Length`] whole micrometres, a [`Speed`] whole micrometres per second, so that
//! 500.000 mm is 500 mm and no floating-point error ever decides which branch of a rule applies. Conditions of a test
//! (angle, mass, pressure, rate) are kept the same way. There is no conversion from a bare number: every constructor names
//! its unit, and only the physically meaningful operators exist.

use std::fmt;
use std::ops::{Add, Neg, Sub};

use crate::round;

macro_rules! quantity {
    ($(#[$doc:meta])* $name:ident, $base:literal, $trade:literal) => {
        $(#[$doc])*
        #[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub struct $name(i64);

        impl $name {
            /// The unit it is written in.
            pub const UNIT: &'static str = $trade;
            /// Nothing at all.
            pub const ZERO: Self = Self(0);

            #[doc = concat!("From whole ", $base, ", the exact base unit.")]
            pub const fn from_base(count: i64) -> Self {
                Self(count)
            }

            #[doc = concat!("The exact count of ", $base, ".")]
            pub const fn base(self) -> i64 {
                self.0
            }

            #[doc = concat!("As a floating-point number of ", $trade, ", for statistics and drawing only.")]
            pub fn to_f64(self) -> f64 {
                self.0 as f64 / 1000.0
            }

            #[doc = concat!("Every digit, in ", $trade, ", without trailing zeros and without the unit.")]
            pub fn digits(self) -> String {
                round::thousandths_text(self.0)
            }
        }

        impl fmt::Display for $name {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                write!(f, "{} {}", self.digits(), Self::UNIT)
            }
        }

        impl fmt::Debug for $name {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                fmt::Display::fmt(self, f)
            }
        }
    };
}

quantity!(
    /// A duration in whole microseconds, written in milliseconds.
    Time, "microseconds", "ms"
);
quantity!(
    /// A length or a difference of lengths in whole micrometres, written in millimetres.
    Length, "micrometres", "mm"
);
quantity!(
    /// A hand speed in whole micrometres per second, written in millimetres per second.
    Speed, "micrometres per second", "mm/s"
);
quantity!(
    /// A crank angle in whole thousandths of a degree; 0° is top dead centre, counted in the running direction.
    Angle, "thousandths of a degree", "°"
);
quantity!(
    /// A mass in whole grams, written in kilograms.
    Mass, "grams", "kg"
);
quantity!(
    /// A gauge pressure in whole millibars, written in bar.
    Pressure, "millibars", "bar"
);
quantity!(
    /// A rate in whole thousandths of a stroke per minute.
    Rate, "thousandths of a stroke per minute", "strokes/min"
);

quantity!(
    /// A moment of inertia in whole thousandths of a kilogram metre squared.
    Inertia, "thousandths of a kg m²", "kg m²"
);
quantity!(
    /// A force in whole millinewtons, written in newtons.
    Force, "millinewtons", "N"
);
quantity!(
    /// A torque in whole millinewton metres, written in newton metres.
    Torque, "millinewton metres", "N m"
);
quantity!(
    /// An area in whole thousandths of a square centimetre.
    Area, "thousandths of a cm²", "cm²"
);

impl Time {
    /// From whole milliseconds.
    pub const fn ms(count: i64) -> Self {
        Self(count * 1000)
    }

    /// The door through which statistics enter the safety arithmetic: milliseconds, rounded up to a whole microsecond.
    ///
    /// `None` for anything that is not a finite number of milliseconds between 0 and a day.
    pub fn from_ms_up(ms: f64) -> Option<Self> {
        let us = libm::ceil(ms * 1000.0);
        (ms.is_finite() && 0.0 <= us && us <= 8.64e10).then_some(Self(us as i64))
    }
}

impl Length {
    /// From whole millimetres.
    pub const fn mm(count: i64) -> Self {
        Self(count * 1000)
    }

    /// The smaller of the two.
    pub fn least(self, other: Self) -> Self {
        Self(self.0.min(other.0))
    }

    /// The larger of the two.
    pub fn greatest(self, other: Self) -> Self {
        Self(self.0.max(other.0))
    }
}

impl Speed {
    /// From whole millimetres per second.
    pub const fn mm_per_s(count: i64) -> Self {
        Self(count * 1000)
    }

    /// How far a hand gets in `time`, rounded up to a whole micrometre: the cautious side for a required distance.
    pub fn reach_in(self, time: Time) -> Length {
        Length(round::divide_up(i128::from(self.0) * i128::from(time.0), 1_000_000))
    }

    /// How long a hand takes over `distance`, rounded down to a whole microsecond: the cautious side for an allowed time.
    pub fn time_over(self, distance: Length) -> Time {
        Time(round::divide_down(i128::from(distance.0) * 1_000_000, i128::from(self.0)))
    }
}

impl Angle {
    /// From whole degrees.
    pub const fn deg(count: i64) -> Self {
        Self(count * 1000)
    }
}

impl Rate {
    /// From whole strokes per minute.
    pub const fn per_min(count: i64) -> Self {
        Self(count * 1000)
    }
}

macro_rules! additive {
    ($($name:ident),*) => {$(
        impl Add for $name {
            type Output = Self;
            fn add(self, other: Self) -> Self { Self(self.0 + other.0) }
        }
        impl Sub for $name {
            type Output = Self;
            fn sub(self, other: Self) -> Self { Self(self.0 - other.0) }
        }
        impl Neg for $name {
            type Output = Self;
            fn neg(self) -> Self { Self(-self.0) }
        }
        impl std::iter::Sum for $name {
            fn sum<I: Iterator<Item = Self>>(parts: I) -> Self { parts.fold(Self::ZERO, Add::add) }
        }
    )*};
}
additive!(Time, Length);

/// The unit in which lengths are shown and typed; it never changes what is stored.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Hash, Default)]
pub enum LengthUnit {
    /// Millimetres.
    #[default]
    Millimetre,
    /// Inches of exactly 25.4 mm.
    Inch,
}

impl LengthUnit {
    /// The sign behind the number.
    pub const fn sign(self) -> &'static str {
        match self {
            Self::Millimetre => "mm",
            Self::Inch => "in",
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_hand_at_63_inches_per_second_covers_the_statutory_example() {
        // 63 in/s x 0.5 s = 31.5 in, the example printed in WAC 296-806-45516.
        let speed = Speed::from_base(1_600_200);
        assert_eq!(speed.reach_in(Time::ms(500)), Length::from_base(800_100));
        assert_eq!(speed.time_over(Length::from_base(800_100)), Time::ms(500));
    }

    #[test]
    fn statistics_enter_rounded_up_or_not_at_all() {
        assert_eq!(Time::from_ms_up(189.3656), Some(Time::from_base(189_366)));
        assert_eq!(Time::from_ms_up(f64::NAN), None);
        assert_eq!(Time::from_ms_up(-1.0), None);
    }
}
