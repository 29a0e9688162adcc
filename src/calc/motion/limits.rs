//! What the stop model accepts: the least and greatest of every input, with the unit a person reads.
//!
//! The ranges are wide on purpose: they catch a slipped decimal point or a wrong unit, not an unusual press. They are common sense, taken
//! from no standard.

use super::refusal::MotionRefusal;

/// One input's permitted range, both ends permitted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limit {
    /// What the figure is, as the sentence begins: "stroke".
    pub what: &'static str,
    /// Least permitted, SI.
    pub least: f64,
    /// Greatest permitted, SI.
    pub greatest: f64,
    /// Unit that a person reads.
    pub shown_unit: &'static str,
    /// Shown figure = SI figure x this.
    pub shown_per_si: f64,
    /// What to do when the figure lies outside.
    pub remedy: &'static str,
}

impl Limit {
    const fn new(
        what: &'static str,
        (least, greatest): (f64, f64),
        (shown_unit, shown_per_si): (&'static str, f64),
        remedy: &'static str,
    ) -> Self {
        Self { what, least, greatest, shown_unit, shown_per_si, remedy }
    }

    /// The figure itself if it is permitted.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`], also for NaN and infinity.
    pub(super) fn check(&'static self, given: f64) -> Result<f64, MotionRefusal> {
        // NaN fails both comparisons and is refused with the rest.
        if self.least <= given && given <= self.greatest {
            Ok(given)
        } else {
            Err(MotionRefusal::OutOfRange { limit: self, given })
        }
    }
}

const MM: (&str, f64) = ("mm", 1e3);
const MS: (&str, f64) = ("ms", 1e3);
const BAR: (&str, f64) = ("bar", 1e-5);
const KG: (&str, f64) = ("kg", 1.0);
const N: (&str, f64) = ("N", 1.0);
const NM: (&str, f64) = ("N m", 1.0);
const PER_MIN: (&str, f64) = ("1/min", 60.0 / core::f64::consts::TAU);
const DEG: (&str, f64) = ("deg", 360.0 / core::f64::consts::TAU);
const ONE: (&str, f64) = ("", 1.0);

macro_rules! limits {
    ($($(#[$doc:meta])* $name:ident = $what:literal, $least:expr, $greatest:expr, $shown:expr, $remedy:literal;)*) => {
        $($(#[$doc])* pub(super) static $name: Limit = Limit::new($what, ($least, $greatest), $shown, $remedy);)*
    };
}

limits! {
    STROKE = "stroke", 1e-3, 3.0, MM, "Read the stroke from the press's plate.";
    ROD = "connecting rod", 1e-3, 30.0, MM, "Measure the rod between its bearing centres.";
    INERTIA = "inertia reduced to the crank", 1e-6, 1e7, ("kg m2", 1.0), "Take the crank, the gears and the driven clutch parts together; ask the press maker for the figure.";
    SLIDE_MASS = "slide mass", 1e-2, 1e6, KG, "Enter the mass of the slide with its share of the rod; ask the press maker for the figure.";
    UPPER_DIE_MASS = "upper die mass", 0.0, 1e6, KG, "Weigh the upper die or take its mass from the die sheet; enter 0 if none is mounted.";
    COUNTERBALANCE_FORCE = "counterbalance force", 0.0, 1e8, N, "Enter the upward force of all cylinders together; enter none if there is no counterbalance.";
    COUNTERBALANCE_PRESSURE = "counterbalance pressure", 0.0, 5e7, BAR, "Read the gauge of the counterbalance.";
    COUNTERBALANCE_AREA = "counterbalance piston area", 1e-6, 100.0, ("cm2", 1e4), "Add the piston areas of all cylinders.";
    FRICTION_TORQUE = "running friction torque", 0.0, 1e7, NM, "Enter 0 if it is not known: that is the cautious side.";
    SPEED = "crank speed", 1e-3, 500.0, PER_MIN, "Enter the strokes per minute at the moment of the stop command.";
    START_ANGLE = "crank angle at the stop command", 0.0, core::f64::consts::TAU, DEG, "Count the angle from top dead centre in the running direction.";
    DEAD_TIME = "dead time of the brake", 0.0, 10.0, MS, "Enter the time from the stop command until the valve acts on the brake.";
    RISE_TIME = "rise time of the brake torque", 0.0, 10.0, MS, "Enter the time from the first to the full brake torque.";
    BRAKE_TORQUE = "full brake torque", 1e-3, 1e9, NM, "Take the torque at the crank from the brake maker's sheet, or fit it to measured stops.";
    TIME_CONSTANT = "time constant of the pressure", 1e-5, 100.0, MS, "Enter the time in which the pressure falls to 37 %.";
    OPERATING_PRESSURE = "operating pressure", 1e3, 5e7, BAR, "Read the gauge with the clutch engaged.";
    TOUCH_PRESSURE = "pressure at brake contact", 1e2, 5e7, BAR, "Take it from the brake maker's sheet.";
    CLUTCH_PRESSURE = "pressure at which the clutch lets go", 1e2, 5e7, BAR, "Take it from the clutch maker's sheet.";
    METERED_FROM = "pressure at which metering begins", 1e2, 5e7, BAR, "Take it from the brake maker's sheet.";
    METERED_TO = "pressure at which metering ends", 0.0, 5e7, BAR, "Enter 0 if the metered stage lasts to the end.";
    FADE = "loss of friction by heat or oil", 0.0, 0.95, ONE, "Enter the share lost, 0 for a cold, clean lining.";
    WORN_DEPTH = "worn depth of the lining", 0.0, 0.1, MM, "Measure the lining and subtract from its new thickness.";
    SPRING_FORCE = "spring force of the brake", 1e-2, 1e9, N, "Take the force with a new lining from the brake maker's sheet.";
    SPRING_RATE = "spring rate of the brake", 0.0, 1e12, ("N/mm", 1e-3), "Take the rate of all springs together from the brake maker's sheet.";
    EXTRA_DELAY = "extra delay by wear", 0.0, 10.0, MS, "Enter the extra time that the larger fluid volume takes; 0 with a new lining.";
    FRICTION_FACES = "number of friction faces", 1.0, 1000.0, ONE, "Count two faces for every disc that is clamped from both sides.";
    FRICTION_COEFFICIENT = "coefficient of friction", 1e-3, 2.0, ONE, "Take it from the lining maker's sheet.";
    OUTER_RADIUS = "outer radius of the lining", 1e-3, 10.0, MM, "Measure the lining.";
    INNER_RADIUS = "inner radius of the lining", 1e-4, 10.0, MM, "Measure the lining; the inner radius is the smaller one.";
    LINING_PRESSURE = "pressure on the lining", 1.0, 1e9, ("N/mm2", 1e-6), "Take it from the brake maker's sheet.";
    TOLERANCE = "relative tolerance", 1e-13, 1e-3, ONE, "Choose 1e-9 unless there is a reason for another.";
    TABLE_ANGLE = "angle of a row of the travel table", 0.0, core::f64::consts::TAU, DEG, "Count the angle from top dead centre in the running direction.";
    TABLE_TRAVEL = "travel of a row of the travel table", 0.0, 3.0, MM, "Count the travel downwards from top dead centre.";
    MEASURED_TIME = "measured stop time", 1e-3, 10.0, MS, "Check the unit of the timer.";
    MEASURED_SCATTER = "standard deviation of the measured stop times", 1e-7, 1.0, MS, "If all stops read the same, enter the timer's resolution divided by 3.46.";
    MEASURED_STOPS = "number of timed stops in a condition", 2.0, 1e6, ONE, "Time at least two stops in every condition, so that their scatter is known.";
    PREDICTED_STOPS = "number of stops whose mean is predicted", 1.0, 1e6, ONE, "Enter 1 for a single stop.";
    STOP_RATE = "stops per second", 0.0, 100.0, ("1/min", 60.0), "Enter how often the press is stopped, not its strokes.";
}

/// Most intervals of a sampled curve.
pub(super) const INTERVALS_MAX: usize = 100_000;

/// Most start angles of a map: every hundredth of a degree.
pub(super) const MAP_ANGLES_MAX: usize = 36_000;

/// Most speeds of a map.
pub(super) const MAP_SPEEDS_MAX: usize = 10_000;
