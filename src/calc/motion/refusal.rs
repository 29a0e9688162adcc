//! Why the stop model gives no figure: what was given, what is allowed, what to do.

use super::limits::Limit;
use core::fmt;

/// Reason for a refusal. The sentence shown to the person is its `Display` text; the data are SI.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub enum MotionRefusal {
    /// A figure lies outside its permitted range, or is not a number.
    OutOfRange {
        /// The range.
        limit: &'static Limit,
        /// The figure as given, SI.
        given: f64,
    },
    /// The connecting rod is not longer than the crank.
    RodTooShort {
        /// Rod as given.
        rod_m: f64,
        /// Half the stroke.
        crank_radius_m: f64,
    },
    /// Too few or too many rows in the travel table of a link drive.
    TableRows {
        /// Number of rows given.
        given: usize,
        /// Least number.
        least: usize,
        /// Greatest number.
        greatest: usize,
    },
    /// The table of a link drive does not begin at top dead centre with no travel.
    TableStart {
        /// Angle of the first row.
        angle_rad: f64,
        /// Travel of the first row.
        travel_m: f64,
    },
    /// Angles of the table do not grow from row to row within one turn.
    TableOrder {
        /// Row, counted from 1, whose angle does not exceed the one before.
        row: usize,
        /// Its angle.
        angle_rad: f64,
    },
    /// Two neighbouring rows are too far apart for the spline to be trusted.
    TableGap {
        /// Angle at which the gap begins.
        angle_rad: f64,
        /// Its width.
        width_rad: f64,
        /// Greatest width allowed.
        width_rad_max: f64,
    },
    /// The travel of the table turns back between the dead centres.
    TableTurnsBack {
        /// Where the travel turns back.
        angle_rad: f64,
        /// By how much.
        back_m: f64,
        /// How much is put down to the rounding of the table.
        allowed_m: f64,
    },
    /// Two pressures of the brake stand in the wrong order.
    PressureOrder {
        /// Name of the pressure that must be lower.
        lower: &'static str,
        /// Its value.
        lower_pa: f64,
        /// Name of the pressure that must be higher.
        higher: &'static str,
        /// Its value.
        higher_pa: f64,
    },
    /// A change asks for the metered stage of a unit that has none, or for pressures of a brake given by two times.
    NoSuchPart {
        /// What the change asks for.
        wanted: &'static str,
        /// What the setup has.
        present: &'static str,
    },
    /// Wear has used up the spring force.
    SpringForceGone {
        /// Force with a new lining.
        new_n: f64,
        /// Force lost.
        lost_n: f64,
    },
    /// The inner radius is not smaller than the outer.
    RadiusOrder {
        /// Inner radius.
        inner_m: f64,
        /// Outer radius.
        outer_m: f64,
    },
    /// The brake torque at standstill is less than the torque of the slide's weight.
    CannotHold {
        /// Crank angle of the standstill.
        angle_rad: f64,
        /// Brake torque at that moment.
        brake_torque_nm: f64,
        /// Torque that the weight less the counterbalance puts on the crank.
        load_torque_nm: f64,
        /// Brake torque when fully set.
        full_torque_nm: f64,
    },
    /// No standstill within the time limit.
    NoStandstillInTime {
        /// The limit.
        limit_s: f64,
    },
    /// No standstill within the angle limit.
    NoStandstillInAngle {
        /// The limit.
        limit_rad: f64,
    },
    /// The calculation needed more steps than allowed.
    StepLimit {
        /// The limit.
        steps: usize,
    },
    /// The calculation's own energy check failed.
    EnergyNotBalanced {
        /// Energy unaccounted for as a share of the energy turned over.
        share: f64,
        /// Greatest share allowed.
        share_max: f64,
    },
    /// The caller asked to stop.
    Stopped,
    /// Map: a list of angles or speeds is empty or too long, or the rows asked for do not exist.
    MapSize {
        /// What was counted.
        what: &'static str,
        /// How many.
        given: usize,
        /// How many at most.
        greatest: usize,
    },
    /// Map: no cell lies in the marked range of angles.
    NothingInRange,
    /// Fit: fewer conditions than unknowns.
    TooFewConditions {
        /// Conditions given.
        given: usize,
        /// Conditions needed.
        needed: usize,
    },
    /// Fit: all stops were timed at one speed.
    OneSpeedOnly {
        /// That speed.
        speed_rad_s: f64,
        /// A second speed that would tell.
        suggested_rad_s: f64,
    },
    /// Fit: the stops are explained equally well by several pairs of figures.
    CannotSeparate {
        /// First figure.
        one: &'static str,
        /// Second figure.
        other: &'static str,
        /// A speed that would tell.
        suggested_rad_s: f64,
    },
    /// Fit: the search ended without an answer.
    NoFit {
        /// Why.
        reason: &'static str,
        /// What to do.
        remedy: &'static str,
    },
}

/// A figure with six significant digits and no trailing zeros.
struct Shown(f64);

impl fmt::Display for Shown {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if !self.0.is_finite() {
            return f.write_str(if self.0.is_nan() { "not a number" } else { "infinite" });
        }
        let rounded: f64 = format!("{:.5e}", self.0).parse().map_err(|_| fmt::Error)?;
        if rounded == 0.0 || (1e-4 <= rounded.abs() && rounded.abs() < 1e9) {
            write!(f, "{rounded}")
        } else {
            write!(f, "{rounded:e}")
        }
    }
}

fn mm(length_m: f64) -> Shown {
    Shown(length_m * 1e3)
}

fn deg(angle_rad: f64) -> Shown {
    Shown(angle_rad * (180.0 / core::f64::consts::PI))
}

fn bar(pressure_pa: f64) -> Shown {
    Shown(pressure_pa * 1e-5)
}

fn per_min(speed_rad_s: f64) -> Shown {
    Shown(speed_rad_s * (30.0 / core::f64::consts::PI))
}

impl fmt::Display for MotionRefusal {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Self::OutOfRange { limit, given } => {
                let gap = if limit.shown_unit.is_empty() { "" } else { " " };
                let unit = limit.shown_unit;
                let shown = |si: f64| Shown(si * limit.shown_per_si);
                if given.is_finite() {
                    write!(f, "The {} is {}{gap}{unit}.", limit.what, shown(given))?;
                } else {
                    write!(f, "The {} is {}.", limit.what, Shown(given))?;
                }
                write!(
                    f,
                    " It must be at least {} and at most {}{gap}{unit}. {}",
                    shown(limit.least),
                    shown(limit.greatest),
                    limit.remedy
                )
            }
            Self::RodTooShort {
                rod_m,
                crank_radius_m,
            } => write!(
                f,
                "The connecting rod is {} mm and the crank radius, half the stroke, {} mm. The rod must be longer than the crank radius. \
                 Measure the rod between its bearing centres and check the stroke.",
                mm(rod_m),
                mm(crank_radius_m)
            ),
            Self::TableRows {
                given,
                least,
                greatest,
            } => write!(
                f,
                "The travel table has {given} rows. It must have at least {least} and at most {greatest}. Give the travel at equal steps over \
                 one whole turn."
            ),
            Self::TableStart {
                angle_rad,
                travel_m,
            } => write!(
                f,
                "The travel table begins at {} deg with {} mm. It must begin at top dead centre: 0 deg with 0 mm. Add that row.",
                deg(angle_rad),
                mm(travel_m)
            ),
            Self::TableOrder { row, angle_rad } => write!(
                f,
                "Row {row} of the travel table stands at {} deg. Angles must grow from row to row and stay below 360 deg, which is the first \
                 row again. Sort the rows and remove doubles.",
                deg(angle_rad)
            ),
            Self::TableGap {
                angle_rad,
                width_rad,
                width_rad_max,
            } => write!(
                f,
                "The travel table has a gap of {} deg after {} deg. Rows may be at most {} deg apart. Add rows there.",
                deg(width_rad),
                deg(angle_rad),
                deg(width_rad_max)
            ),
            Self::TableTurnsBack {
                angle_rad,
                back_m,
                allowed_m,
            } => write!(
                f,
                "The slide of the travel table turns back by {} mm near {} deg. Between the dead centres it may turn back by at most {} mm, \
                 the rounding of a table. Check the rows there.",
                mm(back_m),
                deg(angle_rad),
                mm(allowed_m)
            ),
            Self::PressureOrder {
                lower,
                lower_pa,
                higher,
                higher_pa,
            } => write!(
                f,
                "The {lower} is {} bar and the {higher} {} bar. The first must be lower than the second. Check both figures.",
                bar(lower_pa),
                bar(higher_pa)
            ),
            Self::NoSuchPart { wanted, present } => write!(
                f,
                "The change asks for {wanted}, but this press has {present}. Only a part that is there can be changed. Choose another change."
            ),
            Self::SpringForceGone { new_n, lost_n } => write!(
                f,
                "Wear takes {} N of a spring force of {} N. Some force must remain. Check worn depth and spring rate; if they are right, \
                 replace the lining before the press runs.",
                Shown(lost_n),
                Shown(new_n)
            ),
            Self::RadiusOrder { inner_m, outer_m } => write!(
                f,
                "The inner radius of the lining is {} mm and the outer {} mm. The inner must be smaller. Check both figures.",
                mm(inner_m),
                mm(outer_m)
            ),
            Self::CannotHold {
                angle_rad,
                brake_torque_nm,
                load_torque_nm,
                full_torque_nm,
            } => {
                write!(
                    f,
                    "The brake cannot hold the slide here: at {} deg the slide puts {} N m on the crank and the brake gives {} N m. The brake \
                     must give at least as much as the slide.",
                    deg(angle_rad),
                    Shown(load_torque_nm),
                    Shown(brake_torque_nm)
                )?;
                if full_torque_nm < load_torque_nm {
                    f.write_str(" Check brake torque, masses and counterbalance; if they are right, the press must not run.")
                } else {
                    f.write_str(
                        " Fully set it would hold, but the slide stands still before that and would run back. Check the delay of the brake and \
                         the counterbalance.",
                    )
                }
            }
            Self::NoStandstillInTime { limit_s } => write!(
                f,
                "The crank does not stand still within {} s. No longer stop is calculated. Check brake torque, masses and counterbalance.",
                Shown(limit_s)
            ),
            Self::NoStandstillInAngle { limit_rad } => write!(
                f,
                "The crank does not stand still within {} deg. No longer stop is calculated. Check speed, delay, brake torque, masses and \
                 counterbalance.",
                deg(limit_rad)
            ),
            Self::StepLimit { steps } => write!(
                f,
                "The calculation took {steps} steps without reaching standstill. No more are made. Check the figures of the drive for a slipped \
                 decimal point."
            ),
            Self::EnergyNotBalanced { share, share_max } => write!(
                f,
                "The calculation left {} of the energy unaccounted for. At most {} is allowed. No figure is given; check the figures of the \
                 drive for a slipped decimal point.",
                Shown(share),
                Shown(share_max)
            ),
            Self::Stopped => {
                f.write_str("The calculation was stopped. There is no result. Start it again.")
            }
            Self::MapSize {
                what,
                given,
                greatest,
            } => write!(
                f,
                "The map was asked for {given} {what}. It must be at least 1 and at most {greatest}. Choose another step."
            ),
            Self::NothingInRange => f.write_str(
                "No angle of the map lies in the marked range. At least one must. Widen the range or choose a smaller step.",
            ),
            Self::TooFewConditions { given, needed } => write!(
                f,
                "Stops were timed in {given} conditions. At least {needed} are needed to find {needed} figures. Time stops at another speed."
            ),
            Self::OneSpeedOnly {
                speed_rad_s,
                suggested_rad_s,
            } => write!(
                f,
                "All stops were timed at one speed, {} 1/min. One speed cannot tell delay from friction: a longer delay and a weaker brake \
                 look the same. Time at least five stops at another speed, for example {} 1/min, at the same angle with the same die.",
                per_min(speed_rad_s),
                per_min(suggested_rad_s)
            ),
            Self::CannotSeparate {
                one,
                other,
                suggested_rad_s,
            } => write!(
                f,
                "These stops cannot tell the {one} from the {other}: many pairs of figures explain them equally well. The speeds must differ by \
                 more than the scatter hides. Time more stops, at least five of them at {} 1/min, at the same angle with the same die.",
                per_min(suggested_rad_s)
            ),
            Self::NoFit { reason, remedy } => write!(
                f,
                "No brake figures explain these stops: {reason}. The model needs a delay of at least 0 ms and a brake that stops the press. \
                 {remedy}"
            ),
        }
    }
}

impl core::error::Error for MotionRefusal {}

#[cfg(test)]
mod tests {
    use super::Shown;

    #[test]
    fn figures_are_shown_with_six_digits() {
        for (figure, text) in [
            (0.045 * 1e3, "45"),
            (0.0, "0"),
            (-12.345678, "-12.3457"),
            (1e-9, "1e-9"),
            (123456.7, "123457"),
            (f64::NAN, "not a number"),
            (f64::NEG_INFINITY, "infinite"),
        ] {
            assert_eq!(Shown(figure).to_string(), text);
        }
    }
}
