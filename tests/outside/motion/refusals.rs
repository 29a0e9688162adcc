//! Bad figures and stops that do not end are refused with a sentence, never answered with a number.

use super::drives::{brake_r, command, drive_a, drive_a_data, flywheel, ramp, two_stage_data};
use calc::motion::{
    BrakeCondition, BrakeParts, Change, Counterbalance, Drive, DriveData, Exhaust, MeanRadius, MotionRefusal,
    PressureBrake, PressureBrakeData, RampBrake, SliderCrank, StopCommand, StopPath, StopSetup, Tolerance, stop,
    stop_curves,
};

const NO_NUMBERS: [f64; 3] = [f64::NAN, f64::INFINITY, f64::NEG_INFINITY];

/// A refusal says what was given, what is allowed, and what to do: at least three sentences, and nothing of the inside.
fn check_sentence(refusal: MotionRefusal) {
    let text = refusal.to_string();
    assert!(3 <= text.matches(". ").count() + 1, "{text}");
    assert!(text.ends_with('.') && !text.contains("  "), "{text}");
    assert!(
        text.contains("must")
            || text.contains("most")
            || text.contains("cannot")
            || text.contains("nly ")
            || text.contains("No "),
        "{text}"
    );
    for inside in ["NaN", "OutOfRange", "_", "None"] {
        assert!(!text.contains(inside), "{text}");
    }
}

#[test]
fn drives() {
    let refused = |change: &dyn Fn(&mut DriveData)| {
        let mut data = drive_a_data();
        change(&mut data);
        check_sentence(Drive::new(data).unwrap_err());
    };
    for bad in NO_NUMBERS.into_iter().chain([0.0, -1.0]) {
        refused(&|data| data.reduced_inertia_kg_m2 = bad);
        refused(&|data| data.slide_mass_kg = bad);
    }
    for bad in NO_NUMBERS.into_iter().chain([-1.0]) {
        refused(&|data| data.upper_die_mass_kg = bad);
        refused(&|data| data.friction_torque_nm = bad);
        refused(&|data| data.counterbalance = Counterbalance::Force { force_n: bad });
        refused(&|data| {
            data.counterbalance = Counterbalance::Cylinders { pressure_pa: bad, area_m2: 0.01 };
        });
    }
    check_sentence(SliderCrank::new(0.15, 0.06).unwrap_err());
    assert_eq!(
        SliderCrank::new(0.15, 0.06).unwrap_err().to_string(),
        "The connecting rod is 60 mm and the crank radius, half the stroke, 75 mm. The rod must be longer than the crank radius. Measure the \
         rod between its bearing centres and check the stroke."
    );
}

#[test]
fn commands_and_tolerances() {
    for bad in NO_NUMBERS.into_iter().chain([0.0, -5.0, 1e9]) {
        check_sentence(StopCommand::new(1.0, bad).unwrap_err());
        check_sentence(Tolerance::new(bad).unwrap_err());
    }
    for bad in NO_NUMBERS.into_iter().chain([-0.1, 6.3]) {
        check_sentence(StopCommand::new(bad, 5.0).unwrap_err());
    }
    assert_eq!(
        StopCommand::new(1.0, 0.0).unwrap_err().to_string(),
        "The crank speed is 0 1/min. It must be at least 0.0095493 and at most 4774.65 1/min. Enter the strokes per minute at the moment of the \
         stop command."
    );
}

#[test]
fn brakes() {
    for bad in NO_NUMBERS.into_iter().chain([-0.001]) {
        check_sentence(RampBrake::new(bad, 0.06, 4200.0).unwrap_err());
        check_sentence(RampBrake::new(0.045, bad, 4200.0).unwrap_err());
        check_sentence(RampBrake::new(0.045, 0.06, bad).unwrap_err());
    }
    check_sentence(RampBrake::new(0.045, 0.06, 0.0).unwrap_err());
    let refused = |change: &dyn Fn(&mut PressureBrakeData)| {
        let mut data = two_stage_data();
        change(&mut data);
        let refusal = PressureBrake::new(data).unwrap_err();
        check_sentence(refusal);
        refusal
    };
    for bad in NO_NUMBERS.into_iter().chain([-1.0, 0.0]) {
        refused(&|data| data.operating_pressure_pa = bad);
        refused(&|data| data.touch_pressure_pa = bad);
        refused(&|data| data.clutch_release_pressure_pa = bad);
        refused(&|data| data.emergency_time_constant_s = bad);
        refused(&|data| {
            data.exhaust = Exhaust::SingleStage { time_constant_s: bad };
        });
    }
    for order in [
        refused(&|data| data.touch_pressure_pa = 60e5),
        refused(&|data| data.clutch_release_pressure_pa = 61e5),
        refused(&|data| data.operating_pressure_pa = 20e5),
        refused(&|data| {
            data.exhaust = Exhaust::TwoStage {
                fast_time_constant_s: 0.02,
                metered_time_constant_s: 0.06,
                metered_from_pa: 3e5,
                metered_to_pa: 3e5,
            };
        }),
    ] {
        assert!(matches!(order, MotionRefusal::PressureOrder { .. }), "{order}");
    }
}

#[test]
fn parts_wear_and_changes() {
    let parts = BrakeParts {
        friction_faces: 4,
        friction_coefficient: 0.3,
        axial_force_n: 3000.0,
        outer_radius_m: 0.075,
        inner_radius_m: 0.075,
        mean_radius: MeanRadius::UniformWear,
    };
    check_sentence(parts.full_torque_nm().unwrap_err());
    let no_faces = BrakeParts { friction_faces: 0, inner_radius_m: 0.05, ..parts };
    check_sentence(no_faces.full_torque_nm().unwrap_err());
    let worn = BrakeCondition {
        fade: 0.0,
        spring_force_n: 10_000.0,
        spring_rate_n_m: 2e6,
        worn_depth_m: 0.005,
        extra_delay_s: 0.0,
    };
    let refusal = worn.torque_factor().unwrap_err();
    assert!(matches!(refusal, MotionRefusal::SpringForceGone { .. }));
    check_sentence(refusal);
    for bad in NO_NUMBERS.into_iter().chain([-0.1, 1.0]) {
        check_sentence(BrakeCondition { fade: bad, worn_depth_m: 0.0, ..worn }.torque_factor().unwrap_err());
    }
    let setup = StopSetup { drive: drive_a(), brake: brake_r(), path: StopPath::Normal, command: command(90.0, 40.0) };
    for change in [
        Change::OperatingPressure { pressure_pa: 5e6 },
        Change::MeteredTimeConstant { time_constant_s: 0.1 },
        Change::CounterbalancePressure { pressure_pa: 5e5 },
    ] {
        let refusal = setup.with(&change).unwrap_err();
        assert!(matches!(refusal, MotionRefusal::NoSuchPart { .. }));
        check_sentence(refusal);
    }
}

fn refusal_of(drive: &Drive, brake: &calc::motion::Brake, start: f64, speed: f64) -> MotionRefusal {
    let law = brake.torque_law(StopPath::Normal);
    let refusal = stop(drive, &law, command(start, speed), Tolerance::STANDARD).unwrap_err();
    check_sentence(refusal);
    refusal
}

#[test]
fn stops_that_do_not_end_or_hold() {
    let mut data = drive_a_data();
    data.counterbalance = Counterbalance::None;
    data.friction_torque_nm = 0.0;
    let unbalanced = Drive::new(data).unwrap();
    // Fully set, 400 N m against up to 680 N m of weight. A slow upstroke stops by its weight and would run back.
    let refusal = refusal_of(&unbalanced, &ramp(0.0, 0.0, 400.0), 250.0, 20.0);
    assert!(matches!(refusal, MotionRefusal::CannotHold { .. }), "{refusal}");
    assert!(refusal.to_string().starts_with("The brake cannot hold the slide here"));
    // A strong brake that sets too late: the slide stands still by its weight before that.
    let refusal = refusal_of(&unbalanced, &ramp(0.0, 2.0, 4000.0), 250.0, 20.0);
    assert!(matches!(refusal, MotionRefusal::CannotHold { .. }), "{refusal}");
    assert!(refusal.to_string().contains("would run back"), "{refusal}");
    // In the dead time alone the crank turns too far; or the brake takes for ever.
    let refusal = refusal_of(&flywheel(20.0), &ramp(5.0, 0.0, 800.0), 0.0, 60.0);
    assert!(matches!(refusal, MotionRefusal::NoStandstillInAngle { .. }), "{refusal}");
    let refusal = refusal_of(&flywheel(20.0), &ramp(0.0, 0.0, 1.0), 0.0, 60.0);
    assert!(matches!(refusal, MotionRefusal::NoStandstillInAngle { .. }), "{refusal}");
    let refusal = refusal_of(&flywheel(20.0), &ramp(0.0, 0.0, 0.2), 0.0, 1.0);
    assert!(matches!(refusal, MotionRefusal::NoStandstillInTime { .. }), "{refusal}");
    let law = brake_r().torque_law(StopPath::Normal);
    for bad in [0, 200_000] {
        check_sentence(stop_curves(&drive_a(), &law, command(0.0, 30.0), Tolerance::STANDARD, bad).unwrap_err());
    }
}

/// The whole permitted range, and absurd mixtures of it, gives a stop or a refusal: never a panic, never a figure that is not finite.
#[test]
fn extremes_give_a_stop_or_a_refusal() {
    let mut answered = 0;
    for stroke in [1e-3, 0.15, 3.0] {
        for ratio in [0.500_001, 0.6, 20.0] {
            let Ok(crank) = SliderCrank::new(stroke, stroke * ratio) else {
                continue;
            };
            for inertia in [1e-6, 22.0, 1e7] {
                for mass in [0.01, 900.0, 1e6] {
                    let drive = Drive::new(DriveData {
                        kinematics: calc::motion::Kinematics::SliderCrank(crank),
                        reduced_inertia_kg_m2: inertia,
                        slide_mass_kg: mass,
                        upper_die_mass_kg: 0.0,
                        counterbalance: Counterbalance::None,
                        friction_torque_nm: 0.0,
                    })
                    .unwrap();
                    for torque in [1.0, 4200.0, 1e9] {
                        for (dead, rise) in [(0.0, 0.0), (0.05, 1e-6), (0.0, 3.0)] {
                            for speed in [0.1, 60.0, 3000.0] {
                                let law = ramp(dead, rise, torque).torque_law(StopPath::Normal);
                                for start in [0.0, 100.0, 180.0, 275.0] {
                                    match stop(&drive, &law, command(start, speed), Tolerance::STANDARD) {
                                        Ok(found) => {
                                            assert!(found.stop_time_s.is_finite() && 0.0 < found.stop_time_s);
                                            assert!(found.stop_angle_rad.is_finite() && 0.0 <= found.stop_angle_rad);
                                            assert!(found.stop_time_error_s.is_finite());
                                            answered += 1;
                                        }
                                        Err(refusal) => check_sentence(refusal),
                                    }
                                }
                            }
                        }
                    }
                }
            }
        }
    }
    println!("{answered} stops");
    assert!(1500 < answered, "{answered}");
}
