//! The sample plant: that it opens, gives every answer, tells its stories, and is written as the program writes.

use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::{Path, PathBuf};

use calc::assess::{assess_press, gravest};
use calc::monthly::{Change, sentence, standing, suspect_sentence};
use calc::motion::Unknowns;
use calc::plant_settings::PlantSettings;
use calc::prediction::{compare_later_tests, fit_path};
use calc::press::{Clutch, ClutchMedium, DriveKind, EventKind, Frame, Press};
use calc::schedule::due_at;
use calc::stop_test::{BrakeState, StopPath, Valves};
use calc::units::Length;
use calc::verdict::Answer;
use jiff::civil::{Date, date};
use plant::{SAMPLES, copy_samples, open, v1};

/// The samples are told as of this day.
const TODAY: Date = date(2026, 12, 1);

fn samples_folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../sample-presses")
}

fn sample_plant() -> (PlantSettings, BTreeMap<String, Press>) {
    let plant = open(&samples_folder()).unwrap();
    let presses = plant.presses.into_iter().map(|stored| stored.content.unwrap());
    (plant.settings, presses.map(|press| (press.tag.clone(), press)).collect())
}

/// The text without the comment lines that say that the press is invented.
fn after_comment(text: &str) -> &str {
    let start = text.find("\n(").map_or(0, |at| at + 1);
    assert!(text[..start].lines().all(|line| line.starts_with("//")), "only comments stand before the press");
    &text[start..]
}

#[test]
fn the_list_in_the_program_is_the_folder() {
    let listed: BTreeSet<String> = SAMPLES.iter().map(|(name, _)| (*name).to_owned()).collect();
    let mut present = BTreeSet::from(["plant.ron".to_owned()]);
    for entry in fs::read_dir(samples_folder().join("presses")).unwrap() {
        present.insert(format!("presses/{}", entry.unwrap().file_name().into_string().unwrap()));
    }
    assert_eq!(listed, present);
    for (name, text) in SAMPLES {
        assert_eq!(*text, fs::read_to_string(samples_folder().join(name)).unwrap(), "{name}");
    }
}

#[test]
fn a_copy_of_the_samples_opens_as_the_samples_do() {
    let folder = tempfile::tempdir().unwrap();
    let copy = folder.path().join("try");
    copy_samples(&copy).unwrap();
    let plant = open(&copy).unwrap();
    let copied: Vec<Press> = plant.presses.into_iter().map(|stored| stored.content.unwrap()).collect();
    let (settings, presses) = sample_plant();
    assert_eq!(copied, presses.into_values().collect::<Vec<_>>());
    assert_eq!(plant.settings, settings);
}

#[test]
fn reading_and_writing_a_sample_gives_the_same_text() {
    for (name, text) in SAMPLES {
        assert!(text.starts_with("// An invented p"), "{name} says that it is invented");
        let body = after_comment(text);
        let path = Path::new(name);
        let written = if *name == "plant.ron" {
            v1::settings_to_text(&v1::settings_from_text(path, text).unwrap())
        } else {
            v1::press_to_text(&v1::press_from_text(path, text).unwrap())
        };
        assert!(written == body, "{name}:\n{written}");
    }
}

#[test]
fn every_press_gives_the_answer_it_was_made_for() {
    let (settings, presses) = sample_plant();
    let answers: BTreeMap<&str, Vec<Answer>> = presses
        .iter()
        .map(|(tag, press)| {
            let found = assess_press(press, &settings, TODAY);
            (tag.as_str(), found.iter().map(|found| found.answer).collect())
        })
        .collect();
    use Answer::{Holds, Retime, Short, Unproven};
    let intended = [
        ("E-101", vec![Holds, Holds]),
        ("E-102", vec![Holds, Holds]),
        ("E-103", vec![Short]),
        ("E-104", vec![Unproven, Unproven]),
        ("E-105", vec![Unproven, Holds]),
        ("E-106", vec![Holds, Holds]),
        ("E-107", vec![Retime, Retime]),
        ("E-108", vec![Retime]),
        ("E-109", vec![Holds]),
        ("E-110", vec![Holds]),
        ("E-111", vec![Holds, Holds]),
        ("E-112", vec![Holds]),
        ("E-113", vec![Unproven]),
        ("E-114", vec![Unproven, Holds]),
        ("E-115", vec![Holds, Holds]),
        ("E-116", vec![Holds, Holds]),
    ];
    assert_eq!(answers, BTreeMap::from(intended));
}

#[test]
fn each_answer_that_is_no_holds_has_the_one_reason_meant() {
    let (settings, presses) = sample_plant();
    for (tag, meant) in [
        ("E-103", "The installed distance does not satisfy the rule."),
        ("E-104", "Only 5 of at least 10 stops at 90°, 38 strokes/min"),
        ("E-105", "Not covered: the closing time of a full-revolution clutch."),
        ("E-107", "Valve or needle turned on 2026-11-10 14:20"),
        ("E-108", "The stop test was due on 2026-09-18."),
        ("E-113", "The instrument of the test at 90°"),
        ("E-114", "It is not said whether an arm can pass over the curtain."),
    ] {
        let found = assess_press(&presses[tag], &settings, TODAY);
        let worst = &found[gravest(&found).unwrap()];
        for reason in &worst.reasons {
            assert!(reason.words.starts_with(meant), "{tag}: {}", reason.words);
        }
        assert!(!worst.reasons.is_empty(), "{tag}");
    }
}

#[test]
fn the_short_press_is_14_mm_short_and_several_changes_would_mend_it() {
    let (settings, presses) = sample_plant();
    let found = &assess_press(&presses["E-103"], &settings, TODAY)[0];
    let spare = found.spare().unwrap();
    assert!(Length::mm(-15) < spare && spare < Length::mm(-13), "{spare:?}");
    assert!(found.remedies.len() >= 3, "{:?}", found.remedies);
}

#[test]
fn nothing_is_overdue_at_a_press_that_holds() {
    let (settings, presses) = sample_plant();
    for press in presses.values() {
        let holds = assess_press(press, &settings, TODAY).iter().all(|found| found.answer == Answer::Holds);
        for due in due_at(press, &settings, TODAY) {
            assert!(!holds || due.on >= TODAY, "{}: {due:?}", press.tag);
        }
    }
}

#[test]
fn every_kind_of_press_safeguard_and_stop_occurs() {
    let (_, presses) = sample_plant();
    let every = |is_so: &dyn Fn(&Press) -> bool| presses.values().any(is_so);
    let kinds: BTreeSet<&str> =
        presses.values().flat_map(|press| &press.safeguards).map(|safeguard| safeguard.kind.key()).collect();
    assert_eq!(
        kinds,
        BTreeSet::from([
            "light-curtain",
            "two-hand-control",
            "two-hand-trip",
            "interlocked-guard",
            "separate-beams",
            "horizontal-field",
            "mat",
            "guard-opening",
        ])
    );
    assert!(every(&|press| press.clutch == Clutch::PartRevolution(ClutchMedium::Air)));
    assert!(every(&|press| press.clutch == Clutch::PartRevolution(ClutchMedium::Hydraulic)));
    assert!(every(&|press| matches!(press.clutch, Clutch::FullRevolution { engaging_points } if engaging_points > 1)));
    assert!(every(&|press| press.frame == Frame::CFrame) && every(&|press| press.frame == Frame::StraightSide));
    assert!(every(&|press| press.drive == DriveKind::Link));
    let stopped = |is_so: &dyn Fn(&calc::stop_test::Condition) -> bool| {
        presses.values().flat_map(|press| &press.stop_tests).any(|test| is_so(&test.condition))
    };
    assert!(stopped(&|condition| condition.brake == BrakeState::Cold));
    assert!(stopped(&|condition| condition.path == StopPath::Emergency));
    assert!(stopped(&|condition| condition.valves == Valves::FirstAlone));
    assert!(stopped(&|condition| condition.valves == Valves::SecondAlone));
}

#[test]
fn the_stops_are_such_as_presses_make() {
    let (_, presses) = sample_plant();
    for test in presses.values().flat_map(|press| &press.stop_tests) {
        for stop in &test.stops {
            assert!(100.0 <= stop.to_f64() && stop.to_f64() <= 400.0, "{} {stop:?}", test.condition.words());
        }
    }
}

#[test]
fn the_readings_tell_the_stories_they_were_made_for() {
    let (settings, presses) = sample_plant();
    let stories = [
        ("E-101", "Steady: "),
        ("E-103", "The latest reading is at or over \"distance used up\""),
        ("E-109", "Drifting: +0."),
        ("E-110", "Stepped from "),
        ("E-111", "Steady: "),
        ("E-112", "Drifting: +0."),
        ("E-113", "Cannot tell yet: 3 readings"),
    ];
    for (tag, press) in &presses {
        if press.readings.is_empty() {
            continue;
        }
        let meant = stories.iter().find(|story| story.0 == tag).expect("a story for each press with readings").1;
        let told = sentence(&standing(press, &settings, TODAY).unwrap());
        assert!(told.starts_with(meant), "{tag}: {told}");
    }
}

#[test]
fn the_drift_and_the_step_are_those_that_were_put_in() {
    // The readings of E-109 were drawn about a line that rises by 0.65 ms a month; those of E-110 about a level that rises by
    // 7.5 ms before the reading of April 2026, each of three stops with a standard deviation of about 1 ms.
    let (settings, presses) = sample_plant();
    let change = |tag: &str| standing(&presses[tag], &settings, TODAY).unwrap().change;
    let Change::Drifting(drift) = change("E-109") else { panic!("{:?}", change("E-109")) };
    let interval = drift.interval_ms.unwrap();
    assert!(interval.low < 0.65 && 0.65 < interval.high, "{drift:?}");
    let Change::Stepped { step, .. } = change("E-110") else { panic!("{:?}", change("E-110")) };
    assert!((step.after_ms - step.before_ms - 7.5).abs() < 2.0, "{step:?}");
    assert_eq!((step.began.year(), step.began.month()), (2026, 4));
    assert_eq!(step.event.unwrap().kind, EventKind::Remark);
}

#[test]
fn a_repair_begins_a_new_series_and_a_growing_delay_is_told_from_braking() {
    let (settings, presses) = sample_plant();
    let repaired = standing(&presses["E-111"], &settings, TODAY).unwrap();
    assert_eq!(repaired.series.since.map(|since| since.date), Some(date(2025, 10, 31)));
    assert!(repaired.series.points.len() < presses["E-111"].readings.len());
    let delayed = standing(&presses["E-112"], &settings, TODAY).unwrap();
    let suspect = delayed.suspect.unwrap();
    assert!(suspect_sentence(&suspect).starts_with("The delay has grown (+"), "{}", suspect_sentence(&suspect));
    // It was drawn to grow by 0.7 ms a month; the interval is in ms a day.
    let a_day = 0.7 / 30.4375;
    let interval = suspect.found.changes.unwrap().delay.interval;
    assert!(interval.low < a_day && a_day < interval.high, "{interval:?}");
}

/// The stops of E-115 and E-116 were drawn about the stop times that a Runge-Kutta script of its own gives for these brakes.
#[test]
fn the_fit_finds_the_brakes_that_made_the_stops() {
    let (_, presses) = sample_plant();
    let mut tests = Vec::new();
    for (tag, path, delay_ms, torque_nm) in [
        ("E-115", StopPath::Normal, 58.0, 1900.0),
        ("E-116", StopPath::Normal, 30.0, 7800.0),
        ("E-116", StopPath::Emergency, 30.0, 7800.0),
    ] {
        let fit = fit_path(&presses[tag], path, Unknowns::DelayAndTorque).unwrap();
        let (delay, torque) = (fit.delay_ms(), fit.fitted.full_torque_nm);
        // Twice the half-width of a 95 % interval about the estimate: missed once in ten thousand draws.
        assert!((delay.value - delay_ms).abs() < delay.high - delay.low, "{tag} {path:?}: {delay:?}");
        assert!((torque.value - torque_nm).abs() < torque.high - torque.low, "{tag} {path:?}: {torque:?}");
        assert!(delay.high - delay.low < 0.2 * delay_ms && torque.high - torque.low < 0.1 * torque_nm);
        assert!(!fit.fitted.lack_of_fit && fit.left_out.is_empty());
        tests.push(fit.used.len());
    }
    assert_eq!(tests, [14, 12, 6]);
    let later = compare_later_tests(&presses["E-115"], StopPath::Normal);
    assert_eq!(later.iter().map(|later| (later.test, later.earlier)).collect::<Vec<_>>(), [(12, 12), (13, 12)]);
    assert!(later.iter().all(|later| later.is_within()), "{later:?}");
}
