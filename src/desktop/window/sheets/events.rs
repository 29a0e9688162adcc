//! What the events of a press put to Retime, in words. Knows nothing of the window.

use calc::in_force::{overtaken_by, tests_in_force};
use calc::press::{Event, EventKind, Press, Touch};
use calc::safeguard::Safeguard;

/// What an event of this kind puts to Retime, before it is entered.
pub fn consequence(press: &Press, kind: EventKind, safeguard: Option<&str>) -> String {
    let stopping = names(press.safeguards.iter().filter(|one| one.kind.needs_stop()));
    let all = names(press.safeguards.iter());
    match (kind.touch(), safeguard) {
        (Touch::Nothing, _) => "Puts nothing to Retime; it is kept as a remark.".into(),
        (Touch::Stop, _) => match stopping {
            None => "Every stop must be timed again; no safeguard of this press stops the slide yet.".into(),
            Some(names) => format!("Puts to Retime until the stops are timed again: {names}."),
        },
        (Touch::Everything, _) => match all {
            None => "Every stop must be timed and every distance measured again; there is no safeguard yet.".into(),
            Some(names) => format!("Puts to Retime until stops and distances are measured again: {names}."),
        },
        (Touch::Distance, Some(name)) => format!("Puts to Retime until the distance is measured again: {name}."),
        (Touch::Device, Some(name)) => format!("Puts to Retime until the stops are timed again: {name}."),
        (Touch::Distance | Touch::Device, None) => "Choose the safeguard that it happened to.".into(),
    }
}

/// What still stands open because of an event of the log; `None` when later measurements have answered it.
pub fn still_open(press: &Press, event: &Event) -> Option<String> {
    let open = press.safeguards.iter().filter(|safeguard| {
        let tests = tests_in_force(press, safeguard.stop_path);
        overtaken_by(press, safeguard, &tests).iter().any(|(overtaking, _)| std::ptr::eq(*overtaking, event))
    });
    names(open)
}

/// What the log says of an event.
pub fn standing(press: &Press, event: &Event) -> String {
    match (event.kind.touch(), still_open(press, event)) {
        (Touch::Nothing, _) => "puts nothing to Retime".into(),
        (_, Some(names)) => format!("Retime: {names}"),
        (_, None) => answered(press, event).into(),
    }
}

/// Why nothing stands open: measured later, or never measured at all.
fn answered(press: &Press, event: &Event) -> &'static str {
    let touch = event.kind.touch();
    let is_touched = |safeguard: &&Safeguard| {
        !touch.is_of_one_safeguard() || event.safeguard.as_ref().is_none_or(|name| *name == safeguard.name)
    };
    let lacks = |safeguard: &Safeguard| {
        let lacks_stops = touch.needs_stop_test()
            && safeguard.kind.needs_stop()
            && tests_in_force(press, safeguard.stop_path).is_empty();
        lacks_stops || (touch.needs_tape() && safeguard.installed.is_none())
    };
    if press.safeguards.iter().filter(is_touched).any(lacks) {
        "not measured yet"
    } else if press.safeguards.is_empty() {
        "no safeguard yet"
    } else {
        "measured since"
    }
}

fn names<'a>(safeguards: impl Iterator<Item = &'a Safeguard>) -> Option<String> {
    let names: Vec<&str> = safeguards.map(|safeguard| safeguard.name.as_str()).collect();
    (!names.is_empty()).then(|| names.join(", "))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::window::sheets::sample::{at, press};
    use calc::safeguard::SafeguardKind;

    fn event(on: &str, kind: EventKind, safeguard: Option<&str>) -> Event {
        Event { at: at(on), kind, safeguard: safeguard.map(str::to_owned), note: String::new() }
    }

    #[test]
    fn each_kind_says_whom_it_touches() {
        let mut press = press();
        press.safeguards[1].kind = SafeguardKind::TwoHandTrip;
        let says = |kind, safeguard| consequence(&press, kind, safeguard);
        assert_eq!(
            says(EventKind::LiningReplaced, None),
            "Puts to Retime until the stops are timed again: front curtain."
        );
        assert_eq!(
            says(EventKind::PressMoved, None),
            "Puts to Retime until stops and distances are measured again: front curtain, rear curtain."
        );
        assert_eq!(
            says(EventKind::SafeguardMoved, Some("rear curtain")),
            "Puts to Retime until the distance is measured again: rear curtain."
        );
        assert_eq!(says(EventKind::DeviceReplaced, None), "Choose the safeguard that it happened to.");
        assert_eq!(says(EventKind::Remark, None), "Puts nothing to Retime; it is kept as a remark.");
    }

    #[test]
    fn an_event_is_open_until_a_later_measurement() {
        let mut press = press();
        press.events =
            vec![event("2026-09-14", EventKind::LiningReplaced, None), event("2026-11-14", EventKind::HeavierDie, None)];
        let says: Vec<String> = press.events.iter().map(|event| standing(&press, event)).collect();
        assert_eq!(says, ["measured since", "Retime: front curtain, rear curtain"]);
        press.events = vec![event("2026-11-14", EventKind::SafeguardMoved, Some("rear curtain"))];
        assert_eq!(still_open(&press, &press.events[0]), Some("rear curtain".into()));
        press.events = vec![event("2026-11-14", EventKind::NeedleTurned, None)];
        press.stop_tests.clear();
        assert_eq!(standing(&press, &press.events[0]), "not measured yet");
    }
}
