//! One press: what it is, what it carries, what happened to it.

use crate::calendar::Moment;
use crate::prediction::PredictionData;
use crate::reading::{Reading, ReadingSetup};
use crate::refusal::Refusal;
use crate::safeguard::Safeguard;
use crate::stop_test::StopTest;
use crate::units::{Length, Mass, Rate, Time};

/// How flywheel and crank are joined, which decides whether the slide can be stopped within a stroke at all.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Clutch {
    /// Friction clutch and brake: the slide can be stopped at any point of the stroke.
    PartRevolution(ClutchMedium),
    /// Positive clutch: once engaged it runs the stroke out.
    FullRevolution {
        /// Places in one revolution where the clutch can engage.
        engaging_points: u32,
    },
}

/// What holds a friction clutch engaged and its brake off.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum ClutchMedium {
    /// Compressed air.
    Air,
    /// Hydraulic fluid.
    Hydraulic,
}

/// The build of the frame.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Frame {
    /// Open on three sides.
    CFrame,
    /// Two or four uprights.
    StraightSide,
}

/// How the crank moves the slide.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum DriveKind {
    /// Crank and connecting rod.
    Crank,
    /// Link drive, with a slower working part of the stroke.
    Link,
}

/// Whether the press carries the CE mark, on which the European press practice makes the hand speed depend.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Conformity {
    /// Carries the CE mark.
    CeMarked,
    /// Older than the CE mark, or from elsewhere.
    WithoutCe,
}

/// The device that watches the stop and blocks the next stroke when it gets too long.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct BrakeMonitor {
    /// The stop time at which it blocks.
    pub setting: Time,
}

/// One press of the plant.
#[derive(Clone, PartialEq, Debug)]
pub struct Press {
    /// The plant's own number of it; also the name of its file.
    pub tag: String,
    /// What it is, in a few words.
    pub description: String,
    /// Serial number on the plate.
    pub serial: String,
    /// Where it stands.
    pub location: String,
    /// Press force in newtons.
    pub force_n: Option<i64>,
    /// Build of the frame.
    pub frame: Frame,
    /// Clutch and brake.
    pub clutch: Clutch,
    /// Drive of the slide.
    pub drive: DriveKind,
    /// Stroke of the slide.
    pub stroke: Option<Length>,
    /// Length of the connecting rod.
    pub rod: Option<Length>,
    /// The fastest speed in use.
    pub fastest_speed: Option<Rate>,
    /// The slowest speed in use, which a two-hand trip takes longest to close the die at.
    pub slowest_speed: Option<Rate>,
    /// The heaviest upper die in use.
    pub heaviest_die: Option<Mass>,
    /// CE mark.
    pub conformity: Option<Conformity>,
    /// Response of the press control, from its input to the valve losing current.
    pub control_response: Option<Time>,
    /// Brake monitor, if there is one.
    pub monitor: Option<BrakeMonitor>,
    /// Its safeguards.
    pub safeguards: Vec<Safeguard>,
    /// Its stop tests, in the order of entry.
    pub stop_tests: Vec<StopTest>,
    /// How its monthly readings are taken, where that is set.
    pub reference: Option<ReadingSetup>,
    /// Its monthly readings, in the order of entry.
    pub readings: Vec<Reading>,
    /// What a stop can be predicted from, where anything of it is known.
    pub prediction: Option<PredictionData>,
    /// What happened to it, in the order of entry.
    pub events: Vec<Event>,
}

/// Checks that a tag can name a press and its file on every system.
///
/// # Errors
/// A tag that is empty, longer than 40 characters, begins with a point, or holds anything but letters A to Z, digits, `-`, `_` and `.`.
pub fn check_tag(tag: &str) -> Result<(), Refusal> {
    let is_plain = |c: char| c.is_ascii_alphanumeric() || matches!(c, '-' | '_' | '.');
    if !tag.is_empty() && tag.len() <= 40 && !tag.starts_with('.') && tag.chars().all(is_plain) {
        return Ok(());
    }
    let allowed = "1 to 40 letters A to Z, digits, '-', '_' or '.', not beginning with a point";
    Err(Refusal::new("Press tag", tag, allowed, "Choose a tag that can also be a file name."))
}

/// Something that happened to a press.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Event {
    /// When.
    pub at: Moment,
    /// What.
    pub kind: EventKind,
    /// The safeguard it happened to, for kinds that touch a single one; by name.
    pub safeguard: Option<String>,
    /// Anything worth knowing later.
    pub note: String,
}

macro_rules! event_kinds {
    ($($(#[$doc:meta])* $id:ident, $key:literal, $words:literal, $touch:ident;)*) => {
        /// What can happen to a press; the kind decides which safeguards must be timed again.
        #[derive(Clone, Copy, PartialEq, Eq, Debug)]
        pub enum EventKind { $($(#[$doc])* $id),* }

        impl EventKind {
            /// Every kind, in the order in which a form offers them.
            pub const ALL: &[Self] = &[$(Self::$id),*];

            /// The name in files.
            pub const fn key(self) -> &'static str { match self { $(Self::$id => $key),* } }

            /// The name on screen and paper.
            pub const fn words(self) -> &'static str { match self { $(Self::$id => $words),* } }

            /// What it puts in doubt.
            pub const fn touch(self) -> Touch { match self { $(Self::$id => Touch::$touch),* } }
        }
    };
}

event_kinds! {
    /// New brake or clutch lining.
    LiningReplaced, "lining-replaced", "lining replaced", Stop;
    /// Brake springs renewed or reset.
    SpringsReplaced, "springs-replaced", "springs replaced", Stop;
    /// Press safety valve renewed.
    ValveReplaced, "valve-replaced", "valve replaced", Stop;
    /// A needle valve or throttle was turned.
    NeedleTurned, "needle-turned", "valve or needle turned", Stop;
    /// Operating pressure changed.
    PressureChanged, "pressure-changed", "pressure changed", Stop;
    /// A heavier upper die than any tested.
    HeavierDie, "heavier-die", "die heavier than tested", Stop;
    /// A higher speed than any tested.
    HigherSpeed, "higher-speed", "speed above tested", Stop;
    /// The safeguard was moved.
    SafeguardMoved, "safeguard-moved", "safeguard moved", Distance;
    /// A sensing device, interface or control unit was replaced.
    DeviceReplaced, "device-replaced", "device replaced", Device;
    /// The press itself was moved.
    PressMoved, "press-moved", "press moved", Everything;
    /// Somebody was hurt, or nearly.
    Accident, "accident", "accident or near miss", Everything;
    /// Anything else worth a line; it puts nothing in doubt.
    Remark, "remark", "remark", Nothing;
}

/// What an event puts in doubt.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Touch {
    /// Every stopping time of the press.
    Stop,
    /// The distance of one safeguard.
    Distance,
    /// The response of one safeguard: its stop must be timed again.
    Device,
    /// Every stopping time and every distance.
    Everything,
    /// Nothing.
    Nothing,
}

impl Touch {
    /// Whether stopping times must be measured again.
    pub const fn needs_stop_test(self) -> bool {
        matches!(self, Self::Stop | Self::Device | Self::Everything)
    }

    /// Whether distances must be measured again.
    pub const fn needs_tape(self) -> bool {
        matches!(self, Self::Distance | Self::Everything)
    }

    /// Whether it concerns a single safeguard only.
    pub const fn is_of_one_safeguard(self) -> bool {
        matches!(self, Self::Distance | Self::Device)
    }
}

impl EventKind {
    /// Whether the brake behind it is another one than before, so that older readings say nothing about it.
    pub const fn resets_brake(self) -> bool {
        matches!(
            self,
            Self::LiningReplaced
                | Self::SpringsReplaced
                | Self::ValveReplaced
                | Self::NeedleTurned
                | Self::PressureChanged
        )
    }
}
