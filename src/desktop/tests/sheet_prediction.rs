//! The sheet of predictions, by keyboard alone: data of drive and brake, the predicted stop, map, fit and what-if.

mod fixture;

use std::path::Path;

use calc::prediction::{BrakeData, Lift, PredictionData, RampData};
use calc::press::Press;
use calc::units::*;
use desktop::window::sheets::prediction::{PredictionDrafts, prediction_ui};
use egui::Key;
use egui_kittest::Harness;
use egui_kittest::kittest::Queryable;
use fixture::bench::{Bench, bench, press_key, tab_to, type_in};
use fixture::press;

type Sheet = Harness<'static, Bench<PredictionDrafts>>;

fn sheet(press: Press) -> Sheet {
    let mut harness = bench(press, [1040.0, 1000.0], false, prediction_ui);
    harness.run();
    harness
}

fn sample(tag: &str) -> Press {
    let path = format!("{}/../../sample-presses/presses/{tag}.ron", env!("CARGO_MANIFEST_DIR"));
    plant::open_press_file(Path::new(&path)).unwrap().1
}

fn choose(harness: &mut Sheet, list: &str, choice: &str) {
    tab_to(harness, list, 60);
    press_key(harness, Key::Space);
    tab_to(harness, choice, 14);
    press_key(harness, Key::Space);
}

fn fill(harness: &mut Sheet, field: &str, text: &str) {
    tab_to(harness, field, 80);
    type_in(harness, text);
    press_key(harness, Key::Tab);
}

fn open(harness: &mut Sheet, part: &str) {
    tab_to(harness, part, 80);
    press_key(harness, Key::Space);
}

/// Drive A and brake R, of which an independent eighth-order solver says 101.2 ms, 19.8° and 24.9 mm from 90° at 40 strokes/min.
#[test]
fn a_stop_is_predicted_from_what_is_typed() {
    let mut harness = sheet(Press {
        stroke: Some(Length::mm(150)),
        rod: Some(Length::mm(600)),
        fastest_speed: Some(Rate::per_min(40)),
        heaviest_die: Some(Mass::from_base(300_000)),
        ..press()
    });
    harness.get_by_label_contains("Not entered yet: slide mass");
    for (field, text) in
        [("Slide mass, without die", "600"), ("Inertia at the crank", "22"), ("Running friction", "60")]
    {
        fill(&mut harness, field, text);
    }
    choose(&mut harness, "Kind", "known as a force");
    fill(&mut harness, "Upward force", "8000");
    choose(&mut harness, "Known by", "dead time and rise time");
    for (field, text) in [("Dead time", "45"), ("Rise time", "60"), ("Brake torque at the crank", "4200")] {
        fill(&mut harness, field, text);
    }
    let expected = PredictionData {
        slide_mass: Some(Mass::from_base(600_000)),
        inertia: Some(Inertia::from_base(22_000)),
        counterbalance: Lift::Force(Some(Force::from_base(8_000_000))),
        friction: Some(Torque::from_base(60_000)),
        brake: BrakeData::Ramp(RampData {
            dead_time: Some(Time::ms(45)),
            rise_time: Some(Time::ms(60)),
            torque: Some(Torque::from_base(4_200_000)),
        }),
        ..PredictionData::default()
    };
    assert_eq!(harness.state().press().prediction, Some(expected));
    open(&mut harness, "Predicted stop");
    harness.get_by_label_contains("101.2 ms predicted, by the entered figures, without interval; 19.8° and 24.9 mm");
    assert!(harness.query_all_by_label_contains("Unproven, a prediction only").count() > 0);
}

#[test]
fn a_heavier_die_needs_more_distance_and_stays_unproven() {
    let mut harness = sheet(sample("E-115"));
    harness.get_by_label_contains("95 % of stops between");
    open(&mut harness, "What if");
    let required = |harness: &Sheet| {
        let node = harness.get_all_by_label_contains("Unproven, a prediction only").next().unwrap();
        let words = node.value().unwrap();
        words.split(' ').find_map(|word| word.parse::<f64>().ok()).unwrap()
    };
    let before = required(&harness);
    // The first field of that name belongs to the condition, the second to the change.
    tab_to(&mut harness, "Worst angle: 49°", 80);
    fill(&mut harness, "Upper die", "1500");
    assert!(before < required(&harness));
    fill(&mut harness, "Lining worn by", "2");
    harness.get_by_label_contains("Enter spring force and spring rate as well.");
}

#[test]
fn the_map_is_worked_out_and_read_by_arrow_keys() {
    let mut harness = sheet(sample("E-116"));
    open(&mut harness, "Map");
    let is_done = |harness: &Sheet| harness.query_by_label_contains("Longest of the closing half:").is_some();
    for _ in 0..2000 {
        if is_done(&harness) {
            break;
        }
        std::thread::yield_now();
        harness.step();
    }
    assert!(is_done(&harness));
    let map =
        |harness: &Sheet| harness.query_by_label_contains("Map of stop times.").is_some_and(|node| node.is_focused());
    for _ in 0..60 {
        if map(&harness) {
            break;
        }
        press_key(&mut harness, Key::Tab);
    }
    assert!(map(&harness));
    press_key(&mut harness, Key::ArrowRight);
    harness.get_all_by_label_contains("From 91° at 48.0 strokes/min:").next().unwrap();
    press_key(&mut harness, Key::ArrowDown);
    harness.get_all_by_label_contains("From 91° at 47.6 strokes/min:").next().unwrap();
}

#[test]
fn the_fit_is_shown_with_its_intervals_and_can_be_taken_over() {
    let mut harness = sheet(sample("E-115"));
    open(&mut harness, "Fit to stop tests");
    // The stops were drawn about those of a brake with a delay of 58 ms.
    let words = harness.get_by_label_contains("Delay ").value().unwrap();
    let figures: Vec<f64> = words.split([' ', '(', ')']).filter_map(|word| word.parse().ok()).take(3).collect();
    assert!(figures[1] < 58.0 && 58.0 < figures[2], "{words}");
    harness.get_all_by_label_contains("within the interval").next().unwrap();
    open(&mut harness, "Take delay and torque as entered");
    let Some(BrakeData::Ramp(ramp)) = harness.state().press().prediction.as_ref().map(|data| data.brake) else {
        panic!()
    };
    let delay = ramp.dead_time.unwrap();
    assert!((delay.to_f64() - figures[0]).abs() <= 0.051, "{delay} {words}");
    open(&mut harness, "emergency stop");
    harness.get_by_label_contains("No fit.");
}
