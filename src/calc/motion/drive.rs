//! What moves: kinematics, inertia reduced to the crank, masses, counterbalance and running friction.

use super::limits;
use super::link_drive::LinkDrive;
use super::refusal::MotionRefusal;
use super::slider_crank::SliderCrank;
use core::f64::consts::{PI, TAU};

/// Standard acceleration of free fall, m/s^2 (3rd General Conference on Weights and Measures, 1901).
pub const STANDARD_GRAVITY_M_S2: f64 = 9.806_65;

/// Crank speed in rad/s from strokes per minute.
#[must_use]
pub fn rad_s_from_per_min(speed_per_min: f64) -> f64 {
    speed_per_min * (TAU / 60.0)
}

/// Angle in rad from degrees.
#[must_use]
pub fn rad_from_deg(angle_deg: f64) -> f64 {
    angle_deg * (PI / 180.0)
}

/// How the crank moves the slide.
#[derive(Clone, Debug, PartialEq)]
pub enum Kinematics {
    /// A plain crank.
    SliderCrank(SliderCrank),
    /// A drive given by a travel table.
    LinkDrive(LinkDrive),
}

impl Kinematics {
    /// Slide travel below top dead centre.
    #[must_use]
    pub fn travel_m(&self, angle_rad: f64) -> f64 {
        match self {
            Self::SliderCrank(crank) => crank.travel_m(angle_rad),
            Self::LinkDrive(link) => link.travel_m(angle_rad),
        }
    }

    /// First and second derivative of the travel with respect to the crank angle, m/rad and m/rad^2.
    #[must_use]
    pub fn slopes(&self, angle_rad: f64) -> (f64, f64) {
        match self {
            Self::SliderCrank(crank) => crank.slopes(angle_rad),
            Self::LinkDrive(link) => link.slopes(angle_rad),
        }
    }

    /// Crank angle of bottom dead centre: the closing half of the stroke runs from 0 to here.
    #[must_use]
    pub fn bottom_dead_centre_rad(&self) -> f64 {
        match self {
            Self::SliderCrank(_) => PI,
            Self::LinkDrive(link) => link.bottom_dead_centre_rad(),
        }
    }
}

/// What holds the slide up against its weight. The force is taken as constant over the stroke.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Counterbalance {
    /// No counterbalance.
    None,
    /// Given as an upward force.
    Force {
        /// Force of all cylinders or springs together.
        force_n: f64,
    },
    /// Given as the pressure in cylinders.
    Cylinders {
        /// Gauge pressure.
        pressure_pa: f64,
        /// Piston area of all cylinders together.
        area_m2: f64,
    },
}

impl Counterbalance {
    /// Upward force.
    #[must_use]
    pub fn force_n(&self) -> f64 {
        match *self {
            Self::None => 0.0,
            Self::Force { force_n } => force_n,
            Self::Cylinders { pressure_pa, area_m2 } => pressure_pa * area_m2,
        }
    }

    fn check(&self) -> Result<(), MotionRefusal> {
        match *self {
            Self::None => {}
            Self::Force { force_n } => {
                limits::COUNTERBALANCE_FORCE.check(force_n)?;
            }
            Self::Cylinders { pressure_pa, area_m2 } => {
                limits::COUNTERBALANCE_PRESSURE.check(pressure_pa)?;
                limits::COUNTERBALANCE_AREA.check(area_m2)?;
            }
        }
        Ok(())
    }
}

/// What is known of a drive, not yet checked. See [`Drive::new`].
#[derive(Clone, Debug, PartialEq)]
pub struct DriveData {
    /// How the crank moves the slide.
    pub kinematics: Kinematics,
    /// Crank, gears and driven clutch parts reduced to the crank.
    pub reduced_inertia_kg_m2: f64,
    /// Slide with its share of the rod, without upper die.
    pub slide_mass_kg: f64,
    /// Upper die.
    pub upper_die_mass_kg: f64,
    /// What holds the slide up.
    pub counterbalance: Counterbalance,
    /// Running friction, at the crank.
    pub friction_torque_nm: f64,
}

/// A drive whose figures have been checked.
#[derive(Clone, Debug, PartialEq)]
pub struct Drive {
    data: DriveData,
    moved_mass_kg: f64,
}

impl Drive {
    /// A drive from its data.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`]: inertia or slide mass zero or negative, die mass, counterbalance or friction negative, anything not a
    /// number.
    pub fn new(data: DriveData) -> Result<Self, MotionRefusal> {
        limits::SLIDE_MASS.check(data.slide_mass_kg)?;
        Self::checked(data)
    }

    /// Rotating parts alone, as on a brake test stand: no slide, no die, no counterbalance.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`]: inertia zero or negative, friction negative, anything not a number.
    pub fn without_slide(
        kinematics: Kinematics,
        reduced_inertia_kg_m2: f64,
        friction_torque_nm: f64,
    ) -> Result<Self, MotionRefusal> {
        Self::checked(DriveData {
            kinematics,
            reduced_inertia_kg_m2,
            slide_mass_kg: 0.0,
            upper_die_mass_kg: 0.0,
            counterbalance: Counterbalance::None,
            friction_torque_nm,
        })
    }

    fn checked(data: DriveData) -> Result<Self, MotionRefusal> {
        limits::INERTIA.check(data.reduced_inertia_kg_m2)?;
        limits::UPPER_DIE_MASS.check(data.upper_die_mass_kg)?;
        data.counterbalance.check()?;
        limits::FRICTION_TORQUE.check(data.friction_torque_nm)?;
        let moved_mass_kg = data.slide_mass_kg + data.upper_die_mass_kg;
        Ok(Self { data, moved_mass_kg })
    }

    /// The same drive with another upper die.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for a negative mass or one that is not a number.
    pub fn with_upper_die_mass(&self, upper_die_mass_kg: f64) -> Result<Self, MotionRefusal> {
        Self::checked(DriveData { upper_die_mass_kg, ..self.data.clone() })
    }

    /// The same drive with another running friction.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for a negative torque or one that is not a number.
    pub fn with_friction_torque(&self, friction_torque_nm: f64) -> Result<Self, MotionRefusal> {
        Self::checked(DriveData { friction_torque_nm, ..self.data.clone() })
    }

    /// The same drive with another counterbalance.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for a negative figure or one that is not a number.
    pub fn with_counterbalance(&self, counterbalance: Counterbalance) -> Result<Self, MotionRefusal> {
        Self::checked(DriveData { counterbalance, ..self.data.clone() })
    }

    /// The figures as given.
    #[must_use]
    pub fn data(&self) -> &DriveData {
        &self.data
    }

    /// How the crank moves the slide.
    #[must_use]
    pub fn kinematics(&self) -> &Kinematics {
        &self.data.kinematics
    }

    /// Slide, its share of the rod, and upper die.
    #[must_use]
    pub fn moved_mass_kg(&self) -> f64 {
        self.moved_mass_kg
    }

    /// Weight of the moved mass less the counterbalance: positive pulls the slide down.
    #[must_use]
    pub fn net_weight_n(&self) -> f64 {
        self.moved_mass_kg * STANDARD_GRAVITY_M_S2 - self.data.counterbalance.force_n()
    }

    /// Inertia seen by the crank: J = J_rot + m s'^2.
    #[must_use]
    pub fn inertia_kg_m2(&self, angle_rad: f64) -> f64 {
        let (first, _) = self.data.kinematics.slopes(angle_rad);
        self.data.reduced_inertia_kg_m2 + self.moved_mass_kg * first * first
    }

    /// Torque that the net weight puts on the crank: (m g - F_cb) s'. Positive drives the crank on.
    #[must_use]
    pub fn load_torque_nm(&self, angle_rad: f64) -> f64 {
        self.net_weight_n() * self.data.kinematics.slopes(angle_rad).0
    }
}
