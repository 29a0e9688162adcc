//! A press, a plant and a curtain whose figures were worked out by hand, for the tests to vary.

use calc::calendar::Moment;
use calc::plant_settings::PlantSettings;
use calc::press::*;
use calc::rules::RuleSetId;
use calc::safeguard::*;
use calc::stop_test::*;
use calc::units::*;
use jiff::civil::date;

pub const TODAY: jiff::civil::Date = date(2026, 12, 1);

pub fn at(text: &str) -> Moment {
    Moment::parse("Date", text).unwrap()
}

pub fn stop_test(angle: i64, ms: &[i64]) -> StopTest {
    StopTest {
        at: at("2026-10-05 09:30"),
        by: "A. K.".into(),
        condition: Condition {
            angle: Angle::deg(angle),
            speed: Rate::per_min(60),
            upper_die: Mass::from_base(450_000),
            counterbalance: None,
            operating_pressure: None,
            brake: BrakeState::Warm,
            path: StopPath::Normal,
            valves: Valves::Both,
        },
        clock_start: ClockStart::DeviceOutput,
        instrument: Instrument {
            name: "stop timer".into(),
            serial: "ST-3".into(),
            calibrated: Some(date(2026, 3, 2)),
            calibration_due: Some(date(2027, 3, 2)),
        },
        stops: ms.iter().map(|ms| Time::ms(*ms)).collect(),
    }
}

/// Ten stops: mean 183.7, s 1.888562, mean + 3 s 189.366 ms, worked out by hand calculator.
pub const TEN: [i64; 10] = [182, 185, 181, 184, 186, 183, 182, 187, 184, 183];

pub fn curtain(installed_mm: i64) -> Safeguard {
    Safeguard {
        name: "front curtain".into(),
        kind: SafeguardKind::LightCurtain(LightCurtain {
            detection: Length::mm(14),
            lower_edge: None,
            over: WayOver::Closed,
            starts_stroke: false,
        }),
        stop_path: StopPath::Normal,
        device_response: Some(Time::ms(12)),
        interface_response: None,
        wear_allowance: Some(Time::ms(10)),
        supplement: None,
        installed: Some(Installed {
            distance: Length::mm(installed_mm),
            uncertainty: Length::mm(2),
            by: "A. K.".into(),
            at: at("2026-10-05"),
        }),
    }
}

pub fn press() -> Press {
    Press {
        tag: "P-01".into(),
        description: "test press".into(),
        serial: "1".into(),
        location: String::new(),
        force_n: None,
        frame: Frame::CFrame,
        clutch: Clutch::PartRevolution(ClutchMedium::Air),
        drive: DriveKind::Crank,
        stroke: None,
        rod: None,
        fastest_speed: Some(Rate::per_min(60)),
        slowest_speed: None,
        heaviest_die: Some(Mass::from_base(450_000)),
        conformity: Some(Conformity::CeMarked),
        control_response: None,
        monitor: None,
        safeguards: Vec::new(),
        stop_tests: vec![stop_test(90, &TEN)],
        reference: None,
        readings: Vec::new(),
        prediction: None,
        events: Vec::new(),
    }
}

pub fn plant() -> PlantSettings {
    PlantSettings {
        name: "plant".into(),
        rules: RuleSetId::Iso138552010,
        wish: None,
        test_interval_months: 12,
        reading_interval: None,
        warning_share_percent: 50,
    }
}
