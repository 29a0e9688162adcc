//! The four answers and what stands behind one.

use crate::remedy::Remedy;
use crate::rules::{Demand, RuleSetId};
use crate::steps::WorkedSteps;
use crate::units::{Length, Time};
use crate::value_taken::ValueTaken;

/// The four answers, in rising order of gravity.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug, Hash)]
pub enum Answer {
    /// Measured, in date, complete, and the installed distance satisfies the rule.
    Holds,
    /// It would hold, but an event or the calendar has overtaken the test.
    Retime,
    /// Something is missing.
    Unproven,
    /// The installed distance does not satisfy the rule, even if the data are old or few.
    Short,
}

impl Answer {
    /// Every answer, gravest first.
    pub const ALL: [Self; 4] = [Self::Short, Self::Unproven, Self::Retime, Self::Holds];

    /// The word on screen and paper.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Holds => "Holds",
            Self::Retime => "Retime",
            Self::Unproven => "Unproven",
            Self::Short => "Short",
        }
    }

    /// The word in machine-readable output.
    pub const fn key(self) -> &'static str {
        match self {
            Self::Holds => "holds",
            Self::Retime => "retime",
            Self::Unproven => "unproven",
            Self::Short => "short",
        }
    }
}

/// One reason for an answer other than Holds, in words.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Reason {
    /// The answer that it forces.
    pub answer: Answer,
    /// A sentence.
    pub words: String,
}

impl Reason {
    /// A reason.
    pub fn new(answer: Answer, words: impl Into<String>) -> Self {
        Self { answer, words: words.into() }
    }
}

/// What is known about one safeguard under one rule set.
#[derive(Clone, PartialEq, Debug)]
pub struct Assessment {
    /// The rule set that was asked.
    pub rules: RuleSetId,
    /// The answer.
    pub answer: Answer,
    /// Why it is not Holds, gravest first; empty when it holds.
    pub reasons: Vec<Reason>,
    /// The stop that decides, for safeguards that stop the slide.
    pub governing: Option<Governing>,
    /// The addends of the response time, in the order in which they pass.
    pub parts: Vec<TimePart>,
    /// What the rule asks for.
    pub demand: Option<Demand>,
    /// The distance that can be relied on: the reading less the uncertainty of the tape.
    pub relied_on: Option<Length>,
    /// The derivation.
    pub steps: WorkedSteps,
    /// What the installed distance allows.
    pub allowed: Option<Allowed>,
    /// The single changes that would make it hold, when it is short.
    pub remedies: Vec<Remedy>,
}

impl Assessment {
    /// Installed less required, negative when short.
    pub fn spare(&self) -> Option<Length> {
        Some(self.relied_on? - self.demand.as_ref()?.required)
    }

    /// How much longer the stop may get before the installed distance is short; negative when it is short now.
    pub fn spare_time(&self) -> Option<Time> {
        Some(self.allowed.as_ref()?.stopping? - self.governing.as_ref()?.value)
    }

    /// Whether the distance itself is what makes it short.
    pub fn is_too_near(&self) -> bool {
        matches!((self.demand, self.relied_on), (Some(demand), Some(relied_on)) if !demand.is_met_by(relied_on))
    }

    /// The first sentence of what stands against it.
    pub fn first_reason(&self) -> Option<&str> {
        self.reasons.first().map(|reason| reason.words.as_str())
    }
}

/// The stop test whose value was taken forward.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Governing {
    /// Its place in the press's list.
    pub test: usize,
    /// The value taken forward.
    pub value: Time,
    /// How that value came about.
    pub taken: ValueTaken,
}

/// One addend of the response time.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct TimePart {
    /// Which addend.
    pub kind: TimePartKind,
    /// What is known of it.
    pub state: PartState,
}

/// The addends of the response time, in the order in which they pass.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum TimePartKind {
    /// Sensing device or actuator.
    Device,
    /// Relays or bus.
    Interface,
    /// Press control.
    Control,
    /// The measured stop.
    Stopping,
    /// Wear allowance.
    Allowance,
}

impl TimePartKind {
    /// The name on screen and paper.
    pub const fn words(self) -> &'static str {
        match self {
            Self::Device => "device",
            Self::Interface => "interface",
            Self::Control => "control",
            Self::Stopping => "stopping time",
            Self::Allowance => "wear allowance",
        }
    }

    /// The name within a sentence.
    pub const fn in_sentence(self) -> &'static str {
        match self {
            Self::Device => "response of the device",
            Self::Interface => "response of the interface",
            Self::Control => "response of the press control",
            Self::Stopping => "stopping time",
            Self::Allowance => "wear allowance",
        }
    }
}

/// What is known of an addend.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum PartState {
    /// It is inside the measured time, so it is not added again.
    SeenByClock,
    /// It is added.
    Added(Time),
    /// It is neither seen nor given.
    Missing,
}

impl PartState {
    /// What enters the sum.
    pub const fn counted(self) -> Time {
        match self {
            Self::Added(time) => time,
            Self::SeenByClock | Self::Missing => Time::ZERO,
        }
    }
}

/// What the installed distance allows, each the largest whole microsecond that still holds.
#[derive(Clone, PartialEq, Debug)]
pub struct Allowed {
    /// Stopping time, with every other part as it is; `None` when no time at all would hold.
    pub stopping: Option<Time>,
    /// Setting of a brake monitor that times the same stop on the same clock.
    pub monitor: Option<Time>,
    /// How they came about.
    pub steps: WorkedSteps,
}
