//! Stop tests: one condition, several timed stops, and what the clock saw.

use jiff::civil::Date;

use crate::calendar::Moment;
use crate::units::{Angle, Mass, Pressure, Rate, Time};

/// One condition, several timed stops.
#[derive(Clone, PartialEq, Debug)]
pub struct StopTest {
    /// When it was measured.
    pub at: Moment,
    /// Who measured.
    pub by: String,
    /// Under which condition.
    pub condition: Condition,
    /// Which event started the timing.
    pub clock_start: ClockStart,
    /// With what it was timed.
    pub instrument: Instrument,
    /// The timed stops, in the order of timing.
    pub stops: Vec<Time>,
}

/// The condition under which a press was stopped.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Condition {
    /// Crank angle at the stop command.
    pub angle: Angle,
    /// Speed of the crank.
    pub speed: Rate,
    /// Mass of the upper die.
    pub upper_die: Mass,
    /// Counterbalance pressure, where the press has a counterbalance.
    pub counterbalance: Option<Pressure>,
    /// Pressure of the fluid that engages the clutch.
    pub operating_pressure: Option<Pressure>,
    /// Whether the brake was at working temperature.
    pub brake: BrakeState,
    /// Which stop was called for.
    pub path: StopPath,
    /// Which of the two valves of the press safety valve acted.
    pub valves: Valves,
}

/// Temperature of the brake.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum BrakeState {
    /// Before work.
    Cold,
    /// At working temperature.
    Warm,
}

/// Which stop is called for: two-stage units stop softly on the normal path and hard on the emergency path.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum StopPath {
    /// The stop of every stroke.
    Normal,
    /// The emergency stop.
    Emergency,
}

/// Which of the two valves acted.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Valves {
    /// Both, as in normal running.
    Both,
    /// The first alone, the second held open.
    FirstAlone,
    /// The second alone, the first held open.
    SecondAlone,
}

/// Which event started the timing; everything after it is in the measured time, everything before it must be added.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum ClockStart {
    /// A hand or test rod enters the field, or lets go of the actuator.
    FieldEntered,
    /// The output of the sensing device opens.
    DeviceOutput,
    /// The stop command reaches the press control.
    ControlInput,
    /// The valve loses its current.
    ValveCurrent,
}

/// The instrument that timed the stops.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Instrument {
    /// What it is.
    pub name: String,
    /// Its serial or inventory number.
    pub serial: String,
    /// When it was last calibrated.
    pub calibrated: Option<Date>,
    /// Until when that calibration holds.
    pub calibration_due: Option<Date>,
}

macro_rules! choices {
    ($($name:ident { $($id:ident $key:literal $words:literal),* })*) => {$(
        impl $name {
            /// Every choice, in the order in which a form offers them.
            pub const ALL: &[Self] = &[$(Self::$id),*];
            /// The name in files.
            pub const fn key(self) -> &'static str { match self { $(Self::$id => $key),* } }
            /// The name on screen and paper.
            pub const fn words(self) -> &'static str { match self { $(Self::$id => $words),* } }
        }
    )*};
}

choices! {
    BrakeState { Cold "cold" "cold", Warm "warm" "warm" }
    StopPath { Normal "normal" "normal stop", Emergency "emergency" "emergency stop" }
    Valves { Both "both" "both valves", FirstAlone "first-alone" "first valve alone", SecondAlone "second-alone" "second valve alone" }
    ClockStart {
        FieldEntered "field-entered" "hand enters the field or lets go",
        DeviceOutput "device-output" "device output opens",
        ControlInput "control-input" "stop command reaches the control",
        ValveCurrent "valve-current" "valve loses its current"
    }
}

impl ClockStart {
    /// Whether the clock already saw the response of the sensing device.
    pub const fn saw_device(self) -> bool {
        matches!(self, Self::FieldEntered)
    }

    /// Whether the clock already saw the interface between device and control.
    pub const fn saw_interface(self) -> bool {
        matches!(self, Self::FieldEntered | Self::DeviceOutput)
    }

    /// Whether the clock already saw the response of the press control.
    pub const fn saw_control(self) -> bool {
        !matches!(self, Self::ValveCurrent)
    }
}

impl Condition {
    /// The condition in one line: `90°, 60 strokes/min, 450 kg, warm, normal stop, both valves`.
    pub fn words(&self) -> String {
        let mut words = format!(
            "{}°, {}, {} die, {} brake, {}",
            self.angle.digits(),
            self.speed,
            self.upper_die,
            self.brake.words(),
            self.path.words(),
        );
        if self.valves != Valves::Both {
            words.push_str(", ");
            words.push_str(self.valves.words());
        }
        words
    }
}
