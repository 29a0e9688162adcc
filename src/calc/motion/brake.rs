//! How the brake sets: a ramp known by two times, or the falling pressure of a fluid-released brake.

use super::brake_condition::BrakeCondition;
use super::limits;
use super::refusal::MotionRefusal;
use super::torque_law::TorqueLaw;

/// Typical pressure of a hydraulic two-stage clutch-brake when engaged: common practice, no source. For hints, never a default.
pub const ENGAGED_PRESSURE_PA_TYPICAL: f64 = 60e5;

/// Typical pressure at brake contact of a hydraulic two-stage clutch-brake: common practice, no source. For hints, never a default.
pub const TOUCH_PRESSURE_PA_TYPICAL: f64 = 24e5;

/// Typical pressure at which the last, metered stage begins: common practice, no source. For hints, never a default.
pub const METERED_FROM_PRESSURE_PA_TYPICAL: f64 = 12e5;

/// Pressure at which the clutch lets go: a working assumption, not even common practice. For hints, never a default.
pub const CLUTCH_RELEASE_PRESSURE_PA_ASSUMED: f64 = 36e5;

/// Which way the brake is asked to stop.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum StopPath {
    /// Through the metered stage, if the unit has one.
    Normal,
    /// All valves open: one time constant from engaged to empty.
    Emergency,
}

/// A brake known by its dead time, rise time and full torque.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RampBrake {
    dead_time_s: f64,
    rise_time_s: f64,
    full_torque_nm: f64,
}

impl RampBrake {
    /// A brake whose torque is 0 until the dead time, then rises evenly to the full torque. The clutch lets go at the dead time.
    ///
    /// ```text
    /// T_b(t) = T_full clamp((t - t_d)/t_r, 0, 1)
    /// ```
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`]: a negative time, a torque that is not positive, anything not a number.
    pub fn new(dead_time_s: f64, rise_time_s: f64, full_torque_nm: f64) -> Result<Self, MotionRefusal> {
        Ok(Self {
            dead_time_s: limits::DEAD_TIME.check(dead_time_s)?,
            rise_time_s: limits::RISE_TIME.check(rise_time_s)?,
            full_torque_nm: limits::BRAKE_TORQUE.check(full_torque_nm)?,
        })
    }

    /// Time from the stop command to the first brake torque.
    #[must_use]
    pub fn dead_time_s(&self) -> f64 {
        self.dead_time_s
    }

    /// Time from the first to the full brake torque.
    #[must_use]
    pub fn rise_time_s(&self) -> f64 {
        self.rise_time_s
    }

    /// Torque of the fully set brake, at the crank.
    #[must_use]
    pub fn full_torque_nm(&self) -> f64 {
        self.full_torque_nm
    }

    fn with_condition(&self, condition: &BrakeCondition) -> Result<Self, MotionRefusal> {
        Self::new(
            self.dead_time_s + condition.extra_delay_s,
            self.rise_time_s,
            self.full_torque_nm * condition.torque_factor()?,
        )
    }
}

/// How the pressure leaves the brake on the normal stop path.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Exhaust {
    /// One time constant from engaged to empty.
    SingleStage {
        /// Time constant.
        time_constant_s: f64,
    },
    /// Fast, then metered, then fast again.
    TwoStage {
        /// Time constant before and after the metered stage, tau_fast.
        fast_time_constant_s: f64,
        /// Time constant of the metered stage, tau_slow: what the valve needle sets.
        metered_time_constant_s: f64,
        /// Pressure at which metering begins, p_hi.
        metered_from_pa: f64,
        /// Pressure at which metering ends, p_lo; 0 if it lasts to the end.
        metered_to_pa: f64,
    },
}

/// What is known of a fluid-released brake, not yet checked. Pressures are gauge. See [`PressureBrake::new`].
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PressureBrakeData {
    /// Torque of the fully set brake, at the crank: T_full.
    pub full_torque_nm: f64,
    /// Time from the stop command until the pressure begins to fall: t_d.
    pub dead_time_s: f64,
    /// Pressure with the clutch engaged: p_0.
    pub operating_pressure_pa: f64,
    /// Pressure below which the clutch lets go: p_clutch.
    pub clutch_release_pressure_pa: f64,
    /// Pressure below which the brake has contact: p_touch.
    pub touch_pressure_pa: f64,
    /// How the pressure falls on the normal path.
    pub exhaust: Exhaust,
    /// Time constant on the emergency path: tau_dump.
    pub emergency_time_constant_s: f64,
}

/// A brake set by springs and released by fluid pressure, whose figures have been checked.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PressureBrake {
    data: PressureBrakeData,
}

impl PressureBrake {
    /// A brake whose torque follows the falling pressure.
    ///
    /// ```text
    /// T_b = T_full clamp(1 - p/p_touch, 0, 1)
    /// ```
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for a figure out of range; [`MotionRefusal::PressureOrder`] unless the pressures at which the clutch lets
    /// go, the brake has contact and metering begins are all below the operating pressure, and metering ends below where it begins.
    ///
    /// Contact above the pressure at which the clutch lets go is permitted: the brake then drags against the clutch for a while.
    pub fn new(data: PressureBrakeData) -> Result<Self, MotionRefusal> {
        limits::BRAKE_TORQUE.check(data.full_torque_nm)?;
        limits::DEAD_TIME.check(data.dead_time_s)?;
        let operating = limits::OPERATING_PRESSURE.check(data.operating_pressure_pa)?;
        let below_operating = |limit: &'static limits::Limit, pressure_pa: f64| {
            limit.check(pressure_pa)?;
            in_order((limit.what, pressure_pa), (limits::OPERATING_PRESSURE.what, operating))
        };
        below_operating(&limits::CLUTCH_PRESSURE, data.clutch_release_pressure_pa)?;
        below_operating(&limits::TOUCH_PRESSURE, data.touch_pressure_pa)?;
        match data.exhaust {
            Exhaust::SingleStage { time_constant_s } => {
                limits::TIME_CONSTANT.check(time_constant_s)?;
            }
            Exhaust::TwoStage { fast_time_constant_s, metered_time_constant_s, metered_from_pa, metered_to_pa } => {
                limits::TIME_CONSTANT.check(fast_time_constant_s)?;
                limits::TIME_CONSTANT.check(metered_time_constant_s)?;
                below_operating(&limits::METERED_FROM, metered_from_pa)?;
                limits::METERED_TO.check(metered_to_pa)?;
                in_order((limits::METERED_TO.what, metered_to_pa), (limits::METERED_FROM.what, metered_from_pa))?;
            }
        }
        limits::TIME_CONSTANT.check(data.emergency_time_constant_s)?;
        Ok(Self { data })
    }

    /// The figures as given.
    #[must_use]
    pub fn data(&self) -> &PressureBrakeData {
        &self.data
    }

    /// The same brake at another operating pressure.
    ///
    /// # Refuses
    /// As [`PressureBrake::new`].
    pub fn with_operating_pressure(&self, pressure_pa: f64) -> Result<Self, MotionRefusal> {
        Self::new(PressureBrakeData { operating_pressure_pa: pressure_pa, ..self.data })
    }

    /// The same brake with the valve needle of the metered stage set to another time constant.
    ///
    /// # Refuses
    /// [`MotionRefusal::NoSuchPart`] on a single-stage unit; otherwise as [`PressureBrake::new`].
    pub fn with_metered_time_constant(&self, time_constant_s: f64) -> Result<Self, MotionRefusal> {
        match self.data.exhaust {
            Exhaust::SingleStage { .. } => Err(MotionRefusal::NoSuchPart {
                wanted: "another setting of the metered stage",
                present: "a single-stage brake",
            }),
            Exhaust::TwoStage { fast_time_constant_s, metered_from_pa, metered_to_pa, .. } => {
                Self::new(PressureBrakeData {
                    exhaust: Exhaust::TwoStage {
                        fast_time_constant_s,
                        metered_time_constant_s: time_constant_s,
                        metered_from_pa,
                        metered_to_pa,
                    },
                    ..self.data
                })
            }
        }
    }

    fn with_condition(&self, condition: &BrakeCondition) -> Result<Self, MotionRefusal> {
        Self::new(PressureBrakeData {
            full_torque_nm: self.data.full_torque_nm * condition.torque_factor()?,
            dead_time_s: self.data.dead_time_s + condition.extra_delay_s,
            ..self.data
        })
    }
}

fn in_order(
    (lower, lower_pa): (&'static str, f64),
    (higher, higher_pa): (&'static str, f64),
) -> Result<(), MotionRefusal> {
    if lower_pa < higher_pa { Ok(()) } else { Err(MotionRefusal::PressureOrder { lower, lower_pa, higher, higher_pa }) }
}

/// A brake of either kind.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Brake {
    /// Known by its times. Its figures belong to the stop path on which they were found.
    Ramp(RampBrake),
    /// Known by its pressures.
    Pressure(PressureBrake),
}

impl Brake {
    /// The brake torque over time after the stop command, on one stop path. A ramp brake has one and the same law for both.
    #[must_use]
    pub fn torque_law(&self, path: StopPath) -> TorqueLaw {
        match self {
            Self::Ramp(brake) => TorqueLaw::of_ramp(brake),
            Self::Pressure(brake) => TorqueLaw::of_pressure(brake.data(), path),
        }
    }

    /// The same brake in another condition. The figures of `self` are those of the new, cold brake.
    ///
    /// The pressures at brake contact and at clutch release stay as given. If they are known to change with the wear, build the worn brake
    /// from its own figures.
    ///
    /// # Refuses
    /// As [`BrakeCondition::torque_factor`]; also if the resulting brake is out of range.
    pub fn with_condition(&self, condition: &BrakeCondition) -> Result<Self, MotionRefusal> {
        Ok(match self {
            Self::Ramp(brake) => Self::Ramp(brake.with_condition(condition)?),
            Self::Pressure(brake) => Self::Pressure(brake.with_condition(condition)?),
        })
    }
}
