//! Safeguards: their kinds, and what each kind needs to be known about it.

use crate::calendar::Moment;
use crate::stop_test::StopPath;
use crate::units::{Angle, Length, Time};

/// One safeguard on one press.
#[derive(Clone, PartialEq, Debug)]
pub struct Safeguard {
    /// Its name at the press: "Front curtain".
    pub name: String,
    /// Its kind, with the figures that the kind needs.
    pub kind: SafeguardKind,
    /// The stop that it calls for.
    pub stop_path: StopPath,
    /// Response of the sensing device or actuator.
    pub device_response: Option<Time>,
    /// Response of relays or bus between device and press control.
    pub interface_response: Option<Time>,
    /// Stop time held back for brake wear, or allowed by the brake monitor.
    pub wear_allowance: Option<Time>,
    /// Distance added for what the formula does not cover.
    pub supplement: Option<Length>,
    /// Where it stands, measured with the tape.
    pub installed: Option<Installed>,
}

/// A distance measured with a tape.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Installed {
    /// From the sensing plane, actuator or opening to the nearest hazard.
    pub distance: Length,
    /// How far the tape may be out; counted against the safeguard.
    pub uncertainty: Length,
    /// Who measured it.
    pub by: String,
    /// When.
    pub at: Moment,
}

impl Installed {
    /// What can be relied on: the reading less the uncertainty of the tape.
    pub fn relied_on(&self) -> Length {
        self.distance - self.uncertainty
    }
}

/// The kinds of safeguard, each with what it needs.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum SafeguardKind {
    /// Light curtain across the approach.
    LightCurtain(LightCurtain),
    /// Two-hand control: letting go stops the slide.
    TwoHandControl {
        /// Whether shrouding keeps a hand from reaching in while an actuator is held.
        shrouded: bool,
    },
    /// Two-hand trip: starts a stroke that then runs out.
    TwoHandTrip,
    /// Guard whose opening stops the slide, without locking.
    InterlockedGuard {
        /// The widest gap before the stop is signalled.
        gap: Gap,
        /// Time the guard needs to open wide enough for access.
        opening_time: Option<Time>,
    },
    /// Separate beams at given heights over the reference plane, lowest first.
    SeparateBeams {
        /// Heights of the beams.
        heights: Vec<Length>,
    },
    /// Sensing field along the approach, or tilted to it.
    HorizontalField(HorizontalField),
    /// Pressure-sensitive mat or floor.
    Mat {
        /// Height of the mat over the reference plane.
        height: Length,
    },
    /// Opening in a fixed guard.
    GuardOpening(Opening),
}

/// A light curtain across the approach.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct LightCurtain {
    /// Diameter of the smallest test rod that is always detected.
    pub detection: Length,
    /// Height of the lowest beam, where known.
    pub lower_edge: Option<Length>,
    /// Whether an arm can pass over it.
    pub over: WayOver,
    /// Whether it also starts the stroke.
    pub starts_stroke: bool,
}

/// The way over the upper edge of a curtain.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum WayOver {
    /// Nobody has said.
    NotStated,
    /// A guard or the frame closes it.
    Closed,
    /// An arm can pass.
    Open {
        /// Height of the hazard over the reference plane.
        hazard: Length,
        /// Height of the upper edge of the field.
        upper_edge: Length,
    },
}

/// A sensing field along the approach, or tilted to it.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct HorizontalField {
    /// Diameter of the smallest test rod that is always detected.
    pub detection: Length,
    /// Height over the reference plane of the beam farthest from the hazard.
    pub height: Length,
    /// Height of the lowest beam where the field is tilted; the same for a level one.
    pub lowest: Length,
    /// Angle to the direction of approach: 0° lies along it.
    pub tilt: Angle,
}

/// The gap of an interlocked guard before the stop is signalled.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Gap {
    /// Nobody has said.
    NotStated,
    /// No part of the body can get through.
    None,
    /// This opening.
    Open(Opening),
}

/// An opening in a guard.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Opening {
    /// Width of a slot, side of a square, diameter of a round hole.
    pub size: Length,
    /// Its shape.
    pub shape: OpeningShape,
}

/// The shape of an opening.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum OpeningShape {
    /// Longer than wide.
    Slot {
        /// Its length, where known.
        length: Option<Length>,
    },
    /// Square.
    Square,
    /// Round.
    Round,
}

impl SafeguardKind {
    /// The name on the command line and in files.
    pub const fn key(&self) -> &'static str {
        match self {
            Self::LightCurtain(_) => "light-curtain",
            Self::TwoHandControl { .. } => "two-hand-control",
            Self::TwoHandTrip => "two-hand-trip",
            Self::InterlockedGuard { .. } => "interlocked-guard",
            Self::SeparateBeams { .. } => "separate-beams",
            Self::HorizontalField(_) => "horizontal-field",
            Self::Mat { .. } => "mat",
            Self::GuardOpening(_) => "guard-opening",
        }
    }

    /// The name in sentences.
    pub const fn words(&self) -> &'static str {
        match self {
            Self::LightCurtain(_) => "light curtain",
            Self::TwoHandControl { .. } => "two-hand control",
            Self::TwoHandTrip => "two-hand trip",
            Self::InterlockedGuard { .. } => "interlocked guard",
            Self::SeparateBeams { .. } => "separate beams",
            Self::HorizontalField(_) => "horizontal field",
            Self::Mat { .. } => "mat",
            Self::GuardOpening(_) => "guard opening",
        }
    }

    /// Whether its distance depends on how fast the slide can be stopped.
    pub const fn needs_stop(&self) -> bool {
        !matches!(self, Self::TwoHandTrip | Self::GuardOpening(_))
    }
}
