//! Drive and brake of a press as people enter them: checked number by number, in the units of the trade, and as incomplete as a form.

use crate::motion::Counterbalance;
use crate::stop_test::ClockStart;
use crate::units::{Angle, Area, Force, Inertia, Length, Mass, Pressure, Time, Torque};

/// What a stop can be predicted from. What is not known yet is `None`; nothing stands in for it.
#[derive(Clone, PartialEq, Debug)]
pub struct PredictionData {
    /// Slide with its share of the rod, without upper die.
    pub slide_mass: Option<Mass>,
    /// Crank, gears and driven clutch parts reduced to the crank.
    pub inertia: Option<Inertia>,
    /// What holds the slide up.
    pub counterbalance: Lift,
    /// Running friction at the crank.
    pub friction: Option<Torque>,
    /// Travel of a link drive over the crank angle; empty for a plain crank.
    pub travel: Vec<TravelEntry>,
    /// How the brake sets.
    pub brake: BrakeData,
    /// The event from which the dead time of the brake counts, and the clock start of the stops it is fitted to.
    pub clock_start: ClockStart,
}

impl Default for PredictionData {
    /// Nothing is known. A brake maker's dead time counts from the loss of current, so the control is added: the cautious side.
    fn default() -> Self {
        Self {
            slide_mass: None,
            inertia: None,
            counterbalance: Lift::NotStated,
            friction: None,
            travel: Vec::new(),
            brake: BrakeData::NotStated,
            clock_start: ClockStart::ValveCurrent,
        }
    }
}

/// What holds the slide up against its weight.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Lift {
    /// Nobody has said.
    NotStated,
    /// There is no counterbalance.
    None,
    /// Known as a force, the same in every condition.
    Force(Option<Force>),
    /// Known as cylinders; a stop test that states its counterbalance pressure uses that one.
    Cylinders {
        /// Gauge pressure.
        pressure: Option<Pressure>,
        /// Piston area of all cylinders together.
        area: Option<Area>,
    },
}

impl Lift {
    /// As the stop model takes it, where everything of it is known.
    pub fn as_motion(self) -> Option<Counterbalance> {
        match self {
            Self::NotStated => None,
            Self::None => Some(Counterbalance::None),
            Self::Force(force) => Some(Counterbalance::Force { force_n: force?.to_f64() }),
            Self::Cylinders { pressure, area } => Some(Counterbalance::Cylinders {
                pressure_pa: pressure?.base() as f64 * 100.0,
                area_m2: area?.to_f64() * 1e-4,
            }),
        }
    }
}

/// One row of the travel table of a link drive.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct TravelEntry {
    /// Crank angle from top dead centre.
    pub angle: Angle,
    /// Slide travel below top dead centre.
    pub travel: Length,
}

/// How the brake sets.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum BrakeData {
    /// Nobody has said.
    NotStated,
    /// Known by two times.
    Ramp(RampData),
    /// Known by its pressures.
    Pressure(PressureData),
}

/// A brake known by two times.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub struct RampData {
    /// From the clock start until the clutch lets go and the brake begins to set.
    pub dead_time: Option<Time>,
    /// From the first to the full torque.
    pub rise_time: Option<Time>,
    /// Full torque at the crank.
    pub torque: Option<Torque>,
}

/// A fluid-released brake.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub struct PressureData {
    /// From the clock start until the pressure begins to fall.
    pub dead_time: Option<Time>,
    /// Full torque at the crank.
    pub torque: Option<Torque>,
    /// Pressure with the clutch engaged.
    pub engaged: Option<Pressure>,
    /// Pressure below which the clutch lets go.
    pub clutch_release: Option<Pressure>,
    /// Pressure at which the brake begins to set.
    pub touch: Option<Pressure>,
    /// Time constant of the normal stop, of a two-stage unit outside its metered stage.
    pub fast: Option<Time>,
    /// The metered stage of a two-stage unit.
    pub metered: Option<Metered>,
    /// Time constant of the emergency stop.
    pub dump: Option<Time>,
    /// Whether the pressures are only the typical ones of common practice, not those of this unit.
    pub is_typical: bool,
}

/// The metered stage of a two-stage unit.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub struct Metered {
    /// Pressure at which metering begins.
    pub from: Option<Pressure>,
    /// Pressure at which metering ends.
    pub to: Option<Pressure>,
    /// Time constant of the metered stage, set by the valve needle.
    pub slow: Option<Time>,
}

impl PressureData {
    /// The pressures typical of a two-stage hydraulic unit: common practice without a source, and so marked; the clutch release is only a
    /// working assumption. Times and torque stay open.
    pub fn typical_pressures(self) -> Self {
        let bar = |count: i64| Some(Pressure::from_base(count * 1000));
        let metered = self.metered.unwrap_or_default();
        Self {
            engaged: bar(60),
            clutch_release: bar(36),
            touch: bar(24),
            metered: Some(Metered { from: bar(12), ..metered }),
            is_typical: true,
            ..self
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::motion;

    #[test]
    fn the_typical_pressures_are_those_of_the_stop_model() {
        let data = PressureData::default().typical_pressures();
        let pa = |pressure: Option<Pressure>| pressure.unwrap().base() as f64 * 100.0;
        assert_eq!(pa(data.engaged), motion::ENGAGED_PRESSURE_PA_TYPICAL);
        assert_eq!(pa(data.clutch_release), motion::CLUTCH_RELEASE_PRESSURE_PA_ASSUMED);
        assert_eq!(pa(data.touch), motion::TOUCH_PRESSURE_PA_TYPICAL);
        assert_eq!(pa(data.metered.unwrap().from), motion::METERED_FROM_PRESSURE_PA_TYPICAL);
        assert!(data.is_typical && data.torque.is_none() && data.fast.is_none());
    }
}
