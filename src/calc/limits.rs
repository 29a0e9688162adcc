//! The one table of permitted inputs. It feeds refusals, form hints and the record, so that all three say the same.

use crate::decimal::{self, Unreadable};
use crate::refusal::Refusal;
use crate::round::thousandths_text;
use crate::units::{Angle, Area, Force, Inertia, Length, Mass, Pressure, Rate, Time, Torque};

/// What a number may be: from `least` to `greatest`, both included, in thousandths of `unit`.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Limit {
    /// Its name on forms and in refusals.
    pub name: &'static str,
    /// The unit it is typed in.
    pub unit: &'static str,
    /// The least permitted value, in thousandths.
    pub least: i64,
    /// The greatest permitted value, in thousandths.
    pub greatest: i64,
    /// Why these ends.
    pub why: &'static str,
}

macro_rules! limits {
    ($($(#[$doc:meta])* $id:ident: $name:literal, $unit:literal, $least:expr, $greatest:expr, $why:literal;)*) => {
        $($(#[$doc])* pub const $id: Limit = Limit { name: $name, unit: $unit, least: $least, greatest: $greatest, why: $why };)*
        /// Every limit, in the order of the table.
        pub const ALL: &[Limit] = &[$($id),*];
    };
}

limits! {
    /// One timed stop.
    STOPPING_TIME: "Stopping time", "ms", 1_000, 10_000_000, "A press that takes over 10 s to stop has no working brake; under 1 ms nothing was timed.";
    /// Response of a sensing device, interface or control.
    RESPONSE_TIME: "Response time", "ms", 0, 5_000_000, "A response over 5 s is a slip of the unit.";
    /// Added stop time that is held back for brake wear or allowed by the brake monitor.
    WEAR_ALLOWANCE: "Wear allowance", "ms", 0, 1_000_000, "An allowance over 1 s would hide a failed brake.";
    /// Time an interlocked guard needs to open wide enough for access.
    OPENING_TIME: "Opening time", "ms", 0, 5_000_000, "Longer than 5 s is no mere opening of a guard.";
    /// Distance measured with the tape.
    INSTALLED: "Installed distance", "mm", 1_000, 20_000_000, "A safeguard at 0 mm is in the tool; beyond 20 m it is not at the press.";
    /// Uncertainty of that tape.
    TAPE_UNCERTAINTY: "Tape uncertainty", "mm", 0, 100_000, "A tape that is out by more than 100 mm measures nothing.";
    /// Diameter of the smallest test rod that is always detected.
    DETECTION: "Detection capability", "mm", 1_000, 600_000, "600 mm is the widest spacing that any rule set here knows.";
    /// Height over the floor or reference plane.
    HEIGHT: "Height", "mm", 0, 5_000_000, "Taller than any press bed or field.";
    /// Width of an opening in a guard.
    OPENING: "Opening", "mm", 100, 500_000, "Wider than 500 mm is a doorway, not an opening.";
    /// Length of a slot.
    SLOT_LENGTH: "Slot length", "mm", 100, 5_000_000, "Longer than 5 m is no slot in a press guard.";
    /// Distance added for what the formula does not cover.
    SUPPLEMENT: "Supplemental distance", "mm", 0, 5_000_000, "More than 5 m is a slip of the unit.";
    /// Crank angle at the stop command.
    ANGLE: "Crank angle", "°", 0, 359_999, "0° is top dead centre; a full turn is 0° again.";
    /// Angle between a sensing field and the direction of approach.
    FIELD_ANGLE: "Angle of the field to the approach", "°", 0, 90_000, "0° lies along the approach, 90° stands across it.";
    /// Rate of the crank.
    SPEED: "Speed", "strokes/min", 1_000, 2_000_000, "Crank presses run between 1 and 2000 strokes a minute.";
    /// Mass of the upper die.
    DIE_MASS: "Upper die mass", "kg", 0, 200_000_000, "200 t is heavier than any upper die; 0 kg is a stop without a die.";
    /// Counterbalance pressure.
    COUNTERBALANCE: "Counterbalance pressure", "bar", 0, 400_000, "0 bar is a press without counterbalance or with it let down.";
    /// Operating pressure of clutch and brake.
    OPERATING_PRESSURE: "Operating pressure", "bar", 100, 400_000, "Air units run near 5 bar, hydraulic ones below 400 bar.";
    /// Stroke of the slide.
    STROKE: "Stroke", "mm", 1_000, 3_000_000, "3 m is longer than any crank stroke.";
    /// Length of the connecting rod.
    ROD: "Connecting rod", "mm", 1_000, 10_000_000, "10 m is longer than any connecting rod.";
    /// Press force.
    FORCE: "Press force", "kN", 1_000, 200_000_000, "200 MN is above any mechanical press.";
    /// Number of engaging points of a full-revolution clutch.
    ENGAGING_POINTS: "Engaging points", "points", 1_000, 100_000, "A positive clutch engages at 1 to 100 places a revolution.";
    /// Setting of the brake monitor.
    MONITOR_SETTING: "Monitor setting", "ms", 1_000, 10_000_000, "The same range as a stopping time.";
    /// Share of the spare from which a reading is a warning.
    WARNING_SHARE: "Warning level", "% of the spare", 0, 100_000, "At 100 % the warning comes with the limit itself.";
    /// Crank, gears and driven clutch parts reduced to the crank.
    INERTIA: "Inertia at the crank", "kg m²", 1, 10_000_000_000, "Crank, gears and driven clutch parts together; ask the press maker.";
    /// Slide with its share of the rod, without upper die.
    SLIDE_MASS: "Slide mass", "kg", 10, 1_000_000_000, "The slide with its share of the rod, without the upper die.";
    /// Upward force of the counterbalance.
    COUNTERBALANCE_FORCE: "Counterbalance force", "N", 0, 100_000_000_000, "All cylinders or springs together; 0 N is none.";
    /// Piston area of the counterbalance.
    PISTON_AREA: "Counterbalance piston area", "cm²", 10, 1_000_000_000, "The pistons of all cylinders together.";
    /// Running friction at the crank.
    FRICTION_TORQUE: "Running friction", "N m", 0, 10_000_000_000, "0 N m is the cautious side where it is not known.";
    /// Torque of the fully set brake at the crank.
    BRAKE_TORQUE: "Brake torque", "N m", 1, 1_000_000_000_000, "The torque of the fully set brake, at the crank.";
    /// Time from the stop command until the brake acts.
    DEAD_TIME: "Dead time", "ms", 0, 10_000_000, "A brake that does nothing for 10 s is no brake.";
    /// Time from the first to the full brake torque.
    RISE_TIME: "Rise time", "ms", 0, 10_000_000, "A brake that takes 10 s to set is no brake.";
    /// Time in which a pressure falls to 37 %.
    TIME_CONSTANT: "Time constant", "ms", 10, 100_000_000, "The time in which the pressure falls to 37 %.";
    /// A pressure of the clutch-brake.
    BRAKE_PRESSURE: "Brake pressure", "bar", 10, 400_000, "Air units run near 5 bar, hydraulic ones below 400 bar.";
    /// The pressure at which metering ends.
    METERED_TO: "Metered to", "bar", 0, 400_000, "0 bar is a metered stage that lasts to the end.";
    /// Travel of the slide from top dead centre.
    TRAVEL: "Slide travel", "mm", 0, 3_000_000, "Counted downwards from top dead centre; 3 m is longer than any stroke.";
    /// Share of the friction lost.
    FADE: "Friction lost", "%", 0, 95_000, "By heat or oil; 0 % is a cold, clean lining.";
    /// Wear of a lining.
    WORN_DEPTH: "Worn depth", "mm", 0, 100_000, "New thickness less present thickness.";
    /// Force of the brake springs with a new lining.
    SPRING_FORCE: "Spring force", "N", 10, 1_000_000_000_000, "With a new lining, all springs together.";
    /// Rate of the brake springs.
    SPRING_RATE: "Spring rate", "N/mm", 0, 1_000_000_000_000, "All springs together.";
    /// Months between tests.
    INTERVAL_MONTHS: "Test interval", "months", 1_000, 120_000, "Once in ten years at the least.";
}

impl Limit {
    /// The range in words, with unit: "from 1 to 10000 ms".
    pub fn range(&self) -> String {
        format!("from {} to {} {}", thousandths_text(self.least), thousandths_text(self.greatest), self.unit)
    }

    /// Takes a count of thousandths that lies within the limit.
    pub fn take(&self, count: i64) -> Result<i64, Refusal> {
        if self.least <= count && count <= self.greatest {
            return Ok(count);
        }
        Err(self.refuse(format!("{} {}", thousandths_text(count), self.unit), "Correct the entry, or measure again."))
    }

    /// Takes a floating-point number of the unit, as files hold it. Finer than a thousandth, infinite or no number is refused.
    pub fn take_f64(&self, value: f64) -> Result<i64, Refusal> {
        let scaled = value * 1000.0;
        let count = libm::round(scaled);
        if !value.is_finite() || scaled.abs() > 1e15 {
            return Err(self.refuse(format!("{value}"), "Write a number."));
        }
        if (scaled - count).abs() > 1e-6 * scaled.abs().max(1.0) {
            return Err(self.refuse(format!("{value} {}", self.unit), "Write at most three decimals."));
        }
        self.take(count as i64)
    }

    /// Takes typed text in the limit's own unit.
    pub fn take_text(&self, text: &str) -> Result<i64, Refusal> {
        decimal::thousandths(text).map_err(|why| self.unreadable(text, why)).and_then(|count| self.take(count))
    }

    /// The refusal of a text that is no number.
    pub fn unreadable(&self, text: &str, why: Unreadable) -> Refusal {
        self.refuse(text.trim().to_owned(), why.to_string())
    }

    fn refuse(&self, given: impl Into<String>, remedy: impl Into<String>) -> Refusal {
        Refusal::new(self.name, given, self.range(), remedy)
    }

    /// The same limit under the name that a particular form gives it.
    pub const fn named(self, name: &'static str) -> Self {
        Self { name, ..self }
    }
}

macro_rules! checked {
    ($($name:ident),*) => {$(
        impl $name {
            /// Takes text within `limit`.
            pub fn parse(text: &str, limit: &Limit) -> Result<Self, Refusal> {
                limit.take_text(text).map(Self::from_base)
            }
            /// Takes a stored number within `limit`.
            pub fn from_file(value: f64, limit: &Limit) -> Result<Self, Refusal> {
                limit.take_f64(value).map(Self::from_base)
            }
        }
    )*};
}
checked!(Time, Length, Angle, Mass, Pressure, Rate, Inertia, Force, Torque, Area);

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_ends_are_in_and_just_outside_is_out() {
        for limit in ALL {
            assert_eq!(limit.take(limit.least), Ok(limit.least), "{}", limit.name);
            assert_eq!(limit.take(limit.greatest), Ok(limit.greatest), "{}", limit.name);
            assert!(limit.take(limit.least - 1).is_err() && limit.take(limit.greatest + 1).is_err(), "{}", limit.name);
        }
    }

    #[test]
    fn a_refusal_says_what_was_given_what_is_allowed_and_what_to_do() {
        let refusal = Time::parse("20000", &STOPPING_TIME).unwrap_err();
        assert_eq!(
            refusal.to_string(),
            "Stopping time is 20000 ms. It must be from 1 to 10000 ms. Correct the entry, or measure again."
        );
        assert!(Time::parse("", &STOPPING_TIME).unwrap_err().to_string().starts_with("Stopping time is empty."));
    }

    #[test]
    fn files_hold_no_infinity_and_nothing_finer_than_is_kept() {
        assert_eq!(Time::from_file(182.5, &STOPPING_TIME), Ok(Time::from_base(182_500)));
        for value in [f64::NAN, f64::INFINITY, 182.50049, -1.0, 0.0] {
            assert!(Time::from_file(value, &STOPPING_TIME).is_err(), "{value}");
        }
    }
}
