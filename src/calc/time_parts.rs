//! Which part of the response the clock saw, and which is added. Counting one twice or not at all is the commonest mistake.

use crate::press::Press;
use crate::rules::Times;
use crate::safeguard::Safeguard;
use crate::stop_test::ClockStart;
use crate::units::Time;
use crate::verdict::{PartState, TimePart, TimePartKind};

/// The addends of the response time for a stop of `stopping` that was timed from `clock_start`, in the order in which they pass.
///
/// The wear allowance lies in the future, so no clock ever saw it.
pub fn parts_for(press: &Press, safeguard: &Safeguard, clock_start: ClockStart, stopping: Time) -> Vec<TimePart> {
    let state = |seen: bool, given: Option<Time>| match (seen, given) {
        (true, _) => PartState::SeenByClock,
        (false, Some(time)) => PartState::Added(time),
        (false, None) => PartState::Missing,
    };
    let part = |kind, state| TimePart { kind, state };
    vec![
        part(TimePartKind::Device, state(clock_start.saw_device(), safeguard.device_response)),
        part(TimePartKind::Interface, state(clock_start.saw_interface(), safeguard.interface_response)),
        part(TimePartKind::Control, state(clock_start.saw_control(), press.control_response)),
        part(TimePartKind::Stopping, PartState::Added(stopping)),
        part(TimePartKind::Allowance, state(false, safeguard.wear_allowance)),
    ]
}

/// The addends as a rule set takes them.
pub fn times_of(parts: &[TimePart]) -> Times {
    let of = |kind| parts.iter().find(|part| part.kind == kind).map_or(Time::ZERO, |part| part.state.counted());
    Times {
        stopping: of(TimePartKind::Stopping),
        device: of(TimePartKind::Device),
        interface: of(TimePartKind::Interface),
        control: of(TimePartKind::Control),
        allowance: of(TimePartKind::Allowance),
    }
}
