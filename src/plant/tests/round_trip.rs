//! Whatever press can be entered, it reads back from its file as the same press, and its file is always the same bytes.

use std::path::Path;

use calc::calendar::Moment;
use calc::limits::{self, Limit};
use calc::plant_settings::PlantSettings;
use calc::prediction::{BrakeData, Lift, Metered, PredictionData, PressureData, RampData, TravelEntry};
use calc::press::*;
use calc::reading::{Reading, ReadingPlace, ReadingSetup};
use calc::rules::RuleSetId;
use calc::safeguard::*;
use calc::schedule::Interval;
use calc::stop_test::*;
use calc::units::{Angle, Area, Force, Inertia, Length, Mass, Pressure, Rate, Time, Torque};
use calc::value_taken::ValueTaken;
use jiff::civil::{Date, date, time};
use plant::v1::{press_from_text, press_to_text, settings_from_text, settings_to_text};
use proptest::collection::vec;
use proptest::option::of;
use proptest::prelude::*;
use proptest::sample::select;

/// Within a limit, its two ends often, whole numbers often.
fn within(limit: Limit) -> BoxedStrategy<i64> {
    let whole = ((limit.least + 999) / 1000..=limit.greatest / 1000).prop_map(|count| count * 1000);
    prop_oneof![Just(limit.least), Just(limit.greatest), whole, limit.least..=limit.greatest].boxed()
}

fn length(limit: Limit) -> impl Strategy<Value = Length> {
    within(limit).prop_map(Length::from_base)
}

fn duration(limit: Limit) -> impl Strategy<Value = Time> {
    within(limit).prop_map(Time::from_base)
}

/// Texts that could be taken for marks of the file itself.
const MARKS: &[&str] = &[
    "",
    "stops_ms: [",
    "],",
    "(",
    "//",
    "/* ",
    "\"",
    "\\",
    "\n",
    "\r\n",
    "r#\"",
    "Ä",
    "Żuław 3",
    "压力机",
    "\u{feff}",
    "\u{2028}",
    "\u{85}",
    "\0",
    "\t",
    "None",
    "Some(1)",
    "'",
];

/// Texts that people type; any other; and marks of the file.
fn words() -> impl Strategy<Value = String> {
    prop_oneof!["[A-Za-z .,-]{0,12}", any::<String>(), vec(select(MARKS), 0..4).prop_map(|marks| marks.concat())]
}

fn day() -> impl Strategy<Value = Date> {
    let first = date(1950, 1, 1);
    prop_oneof![Just(0), Just(91_310), 0..91_310_i64]
        .prop_map(move |days| first.checked_add(jiff::Span::new().days(days)).unwrap())
}

fn moment() -> impl Strategy<Value = Moment> {
    let clock = (0..24_i8, 0..60_i8).prop_map(|(hour, minute)| time(hour, minute, 0, 0));
    (day(), of(clock)).prop_map(|(date, time)| Moment { date, time })
}

fn opening() -> impl Strategy<Value = Opening> {
    let shape = prop_oneof![
        of(length(limits::SLOT_LENGTH)).prop_map(|length| OpeningShape::Slot { length }),
        Just(OpeningShape::Square),
        Just(OpeningShape::Round),
    ];
    (length(limits::OPENING), shape).prop_map(|(size, shape)| Opening { size, shape })
}

fn light_curtain() -> impl Strategy<Value = SafeguardKind> {
    let over = prop_oneof![
        Just(WayOver::NotStated),
        Just(WayOver::Closed),
        (length(limits::HEIGHT), length(limits::HEIGHT))
            .prop_map(|(hazard, upper_edge)| WayOver::Open { hazard, upper_edge }),
    ];
    (length(limits::DETECTION), of(length(limits::HEIGHT)), over, any::<bool>()).prop_map(
        |(detection, lower_edge, over, starts_stroke)| {
            SafeguardKind::LightCurtain(LightCurtain { detection, lower_edge, over, starts_stroke })
        },
    )
}

fn kind() -> impl Strategy<Value = SafeguardKind> {
    let gap = prop_oneof![Just(Gap::NotStated), Just(Gap::None), opening().prop_map(Gap::Open)];
    let tilt = within(limits::FIELD_ANGLE).prop_map(Angle::from_base);
    prop_oneof![
        light_curtain(),
        any::<bool>().prop_map(|shrouded| SafeguardKind::TwoHandControl { shrouded }),
        Just(SafeguardKind::TwoHandTrip),
        (gap, of(duration(limits::OPENING_TIME)))
            .prop_map(|(gap, opening_time)| SafeguardKind::InterlockedGuard { gap, opening_time }),
        vec(length(limits::HEIGHT), 0..5).prop_map(|heights| SafeguardKind::SeparateBeams { heights }),
        (length(limits::DETECTION), length(limits::HEIGHT), length(limits::HEIGHT), tilt).prop_map(
            |(detection, height, lowest, tilt)| {
                SafeguardKind::HorizontalField(HorizontalField { detection, height, lowest, tilt })
            }
        ),
        length(limits::HEIGHT).prop_map(|height| SafeguardKind::Mat { height }),
        opening().prop_map(SafeguardKind::GuardOpening),
    ]
}

fn safeguard() -> BoxedStrategy<Safeguard> {
    let installed = (length(limits::INSTALLED), length(limits::TAPE_UNCERTAINTY), words(), moment())
        .prop_map(|(distance, uncertainty, by, at)| Installed { distance, uncertainty, by, at });
    (
        words(),
        kind(),
        select(StopPath::ALL),
        of(duration(limits::RESPONSE_TIME)),
        of(duration(limits::RESPONSE_TIME)),
        of(duration(limits::WEAR_ALLOWANCE)),
        of(length(limits::SUPPLEMENT)),
        of(installed),
    )
        .prop_map(
            |(name, kind, stop_path, device_response, interface_response, wear_allowance, supplement, installed)| {
                Safeguard {
                    name,
                    kind,
                    stop_path,
                    device_response,
                    interface_response,
                    wear_allowance,
                    supplement,
                    installed,
                }
            },
        )
        .boxed()
}

fn condition() -> impl Strategy<Value = Condition> {
    (
        within(limits::ANGLE),
        within(limits::SPEED),
        within(limits::DIE_MASS),
        of(within(limits::COUNTERBALANCE)),
        of(within(limits::OPERATING_PRESSURE)),
        select(BrakeState::ALL),
        select(StopPath::ALL),
        select(Valves::ALL),
    )
        .prop_map(|(angle, speed, die, counterbalance, operating, brake, path, valves)| Condition {
            angle: Angle::from_base(angle),
            speed: Rate::from_base(speed),
            upper_die: Mass::from_base(die),
            counterbalance: counterbalance.map(Pressure::from_base),
            operating_pressure: operating.map(Pressure::from_base),
            brake,
            path,
            valves,
        })
}

fn instrument() -> impl Strategy<Value = Instrument> {
    (words(), words(), of(day()), of(day())).prop_map(|(name, serial, calibrated, calibration_due)| Instrument {
        name,
        serial,
        calibrated,
        calibration_due,
    })
}

fn stops() -> impl Strategy<Value = Vec<Time>> {
    vec(duration(limits::STOPPING_TIME), 0..12)
}

fn stop_test() -> BoxedStrategy<StopTest> {
    (moment(), words(), condition(), select(ClockStart::ALL), instrument(), stops())
        .prop_map(|(at, by, condition, clock_start, instrument, stops)| StopTest {
            at,
            by,
            condition,
            clock_start,
            instrument,
            stops,
        })
        .boxed()
}

fn setup() -> impl Strategy<Value = ReadingSetup> {
    (condition(), select(ClockStart::ALL), select(ReadingPlace::ALL))
        .prop_map(|(condition, clock_start, place)| ReadingSetup { condition, clock_start, place })
}

fn event() -> impl Strategy<Value = Event> {
    (moment(), select(EventKind::ALL), of(words()), words()).prop_map(|(at, kind, safeguard, note)| Event {
        at,
        kind,
        safeguard,
        note,
    })
}

fn pressure(limit: Limit) -> impl Strategy<Value = Pressure> {
    within(limit).prop_map(Pressure::from_base)
}

fn brake() -> BoxedStrategy<BrakeData> {
    let dead = || of(duration(limits::DEAD_TIME));
    let torque = || of(within(limits::BRAKE_TORQUE).prop_map(Torque::from_base));
    let constant = || of(duration(limits::TIME_CONSTANT));
    let bar = || of(pressure(limits::BRAKE_PRESSURE));
    let metered =
        (bar(), of(pressure(limits::METERED_TO)), constant()).prop_map(|(from, to, slow)| Metered { from, to, slow });
    prop_oneof![
        Just(BrakeData::NotStated),
        (dead(), of(duration(limits::RISE_TIME)), torque())
            .prop_map(|(dead_time, rise_time, torque)| BrakeData::Ramp(RampData { dead_time, rise_time, torque })),
        (dead(), torque(), bar(), bar(), bar(), constant(), of(metered), constant(), any::<bool>()).prop_map(
            |(dead_time, torque, engaged, clutch_release, touch, fast, metered, dump, is_typical)| {
                BrakeData::Pressure(PressureData {
                    dead_time,
                    torque,
                    engaged,
                    clutch_release,
                    touch,
                    fast,
                    metered,
                    dump,
                    is_typical,
                })
            }
        ),
    ]
    .boxed()
}

/// Boxed, as the strategies of a press by value no longer fit on the stack of a test.
fn prediction() -> BoxedStrategy<Option<PredictionData>> {
    let lift = prop_oneof![
        Just(Lift::NotStated),
        Just(Lift::None),
        of(within(limits::COUNTERBALANCE_FORCE).prop_map(Force::from_base)).prop_map(Lift::Force),
        (of(pressure(limits::COUNTERBALANCE)), of(within(limits::PISTON_AREA).prop_map(Area::from_base)))
            .prop_map(|(pressure, area)| Lift::Cylinders { pressure, area }),
    ];
    let row = (within(limits::ANGLE), length(limits::TRAVEL))
        .prop_map(|(angle, travel)| TravelEntry { angle: Angle::from_base(angle), travel });
    let data = (
        of(within(limits::SLIDE_MASS)),
        of(within(limits::INERTIA)),
        lift,
        of(within(limits::FRICTION_TORQUE)),
        vec(row, 0..4),
        brake(),
        select(ClockStart::ALL),
    )
        .prop_map(|(mass, inertia, counterbalance, friction, travel, brake, clock_start)| PredictionData {
            slide_mass: mass.map(Mass::from_base),
            inertia: inertia.map(Inertia::from_base),
            counterbalance,
            friction: friction.map(Torque::from_base),
            travel,
            brake,
            clock_start,
        });
    of(data).boxed()
}

/// Readings, some of them under the reference, some under a setup of their own.
fn readings(reference: Option<ReadingSetup>) -> impl Strategy<Value = Vec<Reading>> {
    let reading = (moment(), words(), setup(), any::<bool>(), instrument(), stops());
    vec(reading, 0..4).prop_map(move |readings| {
        readings
            .into_iter()
            .map(|(at, by, own, is_usual, instrument, stops)| {
                let setup = reference.clone().filter(|_| is_usual).unwrap_or(own);
                Reading { at, by, setup, instrument, stops }
            })
            .collect()
    })
}

prop_compose! {
    fn press()(reference in of(setup()))(
        tag in "[A-Za-z0-9_-][A-Za-z0-9_.-]{0,39}",
        (description, serial, location) in (words(), words(), words()),
        force_n in of(within(limits::FORCE)),
        frame in select(&[Frame::CFrame, Frame::StraightSide][..]),
        clutch in prop_oneof![
            Just(Clutch::PartRevolution(ClutchMedium::Air)),
            Just(Clutch::PartRevolution(ClutchMedium::Hydraulic)),
            (1..=100_u32).prop_map(|engaging_points| Clutch::FullRevolution { engaging_points }),
        ],
        drive in select(&[DriveKind::Crank, DriveKind::Link][..]),
        (stroke, rod) in (of(length(limits::STROKE)), of(length(limits::ROD))),
        (fastest, slowest) in (of(within(limits::SPEED)), of(within(limits::SPEED))),
        (die, conformity) in (
            of(within(limits::DIE_MASS)),
            of(select(&[Conformity::CeMarked, Conformity::WithoutCe][..])),
        ),
        (control_response, monitor) in (of(duration(limits::RESPONSE_TIME)), of(duration(limits::MONITOR_SETTING))),
        mut safeguards in vec(safeguard(), 0..4),
        stop_tests in vec(stop_test(), 0..4),
        readings in readings(reference.clone()),
        (prediction, events) in (prediction(), vec(event(), 0..4)),
        reference in Just(reference),
    ) -> Press {
        let mut names = std::collections::BTreeSet::new();
        safeguards.retain(|safeguard| names.insert(safeguard.name.clone()));
        Press {
            tag, description, serial, location, force_n, frame, clutch, drive, stroke, rod,
            fastest_speed: fastest.map(Rate::from_base),
            slowest_speed: slowest.map(Rate::from_base),
            heaviest_die: die.map(Mass::from_base),
            conformity, control_response,
            monitor: monitor.map(|setting| BrakeMonitor { setting }),
            safeguards, stop_tests, reference, readings, prediction, events,
        }
    }
}

prop_compose! {
    fn settings()(
        name in words(),
        rules in select(RuleSetId::ALL),
        wish in of(select(ValueTaken::ALL)),
        test_interval_months in 1..=120_u32,
        reading_interval in of(prop_oneof![
            (1..=120_u32).prop_map(Interval::Weeks),
            (1..=120_u32).prop_map(Interval::Months),
        ]),
        warning_share_percent in 0..=100_u32,
    ) -> PlantSettings {
        PlantSettings { name, rules, wish, test_interval_months, reading_interval, warning_share_percent }
    }
}

proptest! {
    #[test]
    fn a_press_reads_back_as_itself(press in press()) {
        let text = press_to_text(&press);
        let back = press_from_text(Path::new("x.ron"), &text);
        prop_assert_eq!(back.as_ref(), Ok(&press), "{}", text);
        prop_assert_eq!(press_to_text(&back.unwrap()), text);
    }

    #[test]
    fn the_same_press_reads_back_from_windows_line_ends(press in press()) {
        let text = press_to_text(&press).replace('\n', "\r\n");
        prop_assert_eq!(press_from_text(Path::new("x.ron"), &text), Ok(press));
    }

    #[test]
    fn settings_read_back_as_themselves(settings in settings()) {
        let text = settings_to_text(&settings);
        prop_assert_eq!(settings_from_text(Path::new("plant.ron"), &text), Ok(settings));
    }

    #[test]
    fn no_text_makes_the_reader_panic(text in any::<String>(), cut in 0..2000_usize, put in words()) {
        let _ = press_from_text(Path::new("x.ron"), &text);
        let sample = plant::SAMPLES[2].1;
        let cut = sample.floor_char_boundary(cut);
        let changed = format!("{}{put}{}", &sample[..cut], &sample[cut..]);
        if let Ok(press) = press_from_text(Path::new("x.ron"), &changed) {
            prop_assert_eq!(press_from_text(Path::new("x.ron"), &press_to_text(&press)), Ok(press));
        }
    }
}

#[test]
fn letters_of_any_script_stay_legible_in_the_file() {
    let sample = plant::SAMPLES[1].1;
    let mut press = press_from_text(Path::new("x.ron"), sample).unwrap();
    press.location = "Halle Süd, Żuław, 压力机".into();
    let text = press_to_text(&press);
    assert!(text.contains("location: \"Halle Süd, Żuław, 压力机\","), "{text}");
}
