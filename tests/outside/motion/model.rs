//! Physical sense: what must make a stop longer does, what must not matter does not, and the changes of a what-if arrive.

use super::drives::{brake_r, command, drive_a, drive_a_data, ramp, two_stage, two_stage_data};
use calc::motion::{
    Brake, BrakeCondition, Change, Counterbalance, Drive, Exhaust, MotionRefusal, PressureBrake, PressureBrakeData,
    StopPath, StopSetup, Tolerance, rad_s_from_per_min, stop, what_if,
};

fn setup(brake: Brake, path: StopPath) -> StopSetup {
    StopSetup { drive: drive_a(), brake, path, command: command(90.0, 40.0) }
}

fn time(setup: &StopSetup) -> f64 {
    setup.stop(Tolerance::STANDARD).unwrap().stop_time_s
}

/// Once the torque is constant, energy alone gives the way to standstill: J w^2/2 = (T_b + T_f) dtheta - (m g - F_cb) ds. A brake without dead
/// time and rise time brakes with constant torque from the first moment.
#[test]
fn angle_of_a_constant_torque_follows_from_energy() {
    let drive = drive_a();
    for torque in [900.0, 4200.0, 20_000.0] {
        let law = ramp(0.0, 0.0, torque).torque_law(StopPath::Normal);
        for start in (0..360).step_by(15) {
            for speed in [10.0, 60.0] {
                let command = command(f64::from(start), speed);
                let found = stop(&drive, &law, command, Tolerance::STANDARD).unwrap();
                let from = command.start_angle_rad();
                let travel = |angle: f64| drive.kinematics().travel_m(angle);
                let left = |turned: f64| {
                    0.5 * drive.inertia_kg_m2(from) * rad_s_from_per_min(speed).powi(2)
                        + drive.net_weight_n() * (travel(from + turned) - travel(from))
                        - (torque + 60.0) * turned
                };
                let (mut low, mut high) = (0.0, 12.0);
                for _ in 0..100 {
                    let middle = 0.5 * (low + high);
                    if 0.0 < left(middle) { low = middle } else { high = middle }
                }
                assert!((found.stop_angle_rad - low).abs() < 3e-9 * low, "{torque} {start} {speed}");
            }
        }
    }
}

#[test]
fn what_makes_a_stop_longer() {
    let base = setup(two_stage(), StopPath::Normal);
    let longer = |change: Change| {
        let found = what_if(&base, &[change], Tolerance::STANDARD).unwrap();
        assert!((found.before.stop_time_s - time(&base)).abs() < 1e-15);
        assert!(found.before.stop_time_s < found.after.stop_time_s, "{change:?}");
        found.after
    };
    longer(Change::UpperDieMass { mass_kg: 400.0 });
    longer(Change::Speed { speed_rad_s: rad_s_from_per_min(50.0) });
    longer(Change::OperatingPressure { pressure_pa: 66e5 });
    longer(Change::MeteredTimeConstant { time_constant_s: 0.09 });
    let condition = BrakeCondition {
        fade: 0.2,
        spring_force_n: 50_000.0,
        spring_rate_n_m: 2.5e6,
        worn_depth_m: 0.002,
        extra_delay_s: 0.004,
    };
    // 80 % of the friction and 45/50 of the spring force are left: 72 % of 4200 N m, and 4 ms more dead time.
    assert!((condition.torque_factor().unwrap() - 0.72).abs() < 1e-15);
    let worn = longer(Change::Condition(condition));
    let same = Brake::Pressure(
        PressureBrake::new(PressureBrakeData { full_torque_nm: 0.72 * 4200.0, dead_time_s: 0.034, ..two_stage_data() })
            .unwrap(),
    );
    assert!((time(&setup(same, StopPath::Normal)) - worn.stop_time_s).abs() < 1e-12);
    // The hard path is the shorter one.
    assert!(time(&setup(two_stage(), StopPath::Emergency)) < time(&base));
}

/// p_0 appears in the fast stage only: 66 instead of 60 bar lengthens everything after it by tau_fast ln(66/60).
#[test]
fn higher_pressure_lengthens_the_delay() {
    let law = |p0: f64| {
        Brake::Pressure(
            PressureBrake::new(PressureBrakeData { operating_pressure_pa: p0, ..two_stage_data() }).unwrap(),
        )
        .torque_law(StopPath::Normal)
    };
    let longer = law(66e5).clutch_release_s() - law(60e5).clutch_release_s();
    assert!((longer - 0.02 * 1.1_f64.ln()).abs() < 1e-14);
}

/// A two-stage unit whose stages have one time constant is a single-stage unit.
#[test]
fn equal_stages_are_one_stage() {
    let with = |exhaust| {
        let data = PressureBrakeData { exhaust, ..two_stage_data() };
        time(&setup(Brake::Pressure(PressureBrake::new(data).unwrap()), StopPath::Normal))
    };
    let two = with(Exhaust::TwoStage {
        fast_time_constant_s: 0.025,
        metered_time_constant_s: 0.025,
        metered_from_pa: 12e5,
        metered_to_pa: 3e5,
    });
    let single = with(Exhaust::SingleStage { time_constant_s: 0.025 });
    assert!((two - single).abs() < 1e-10, "{two} {single}");
}

/// A counterbalance is its force, however given; one that carries the weight exactly takes gravity out.
#[test]
fn counterbalance_is_its_force() {
    let with = |counterbalance| {
        let mut setup = setup(brake_r(), StopPath::Normal);
        let mut data = drive_a_data();
        data.counterbalance = counterbalance;
        setup.drive = Drive::new(data).unwrap();
        setup
    };
    let force = with(Counterbalance::Force { force_n: 8000.0 });
    let cylinders = with(Counterbalance::Cylinders { pressure_pa: 5e5, area_m2: 0.016 });
    assert!((time(&force) - time(&cylinders)).abs() < 1e-13);
    assert!(time(&force) < time(&with(Counterbalance::None)));
    let balanced = with(Counterbalance::Force { force_n: 900.0 * 9.80665 });
    let found = balanced.stop(Tolerance::STANDARD).unwrap();
    assert!(found.energy.gravity_work_j.abs() < 1e-9 && found.load_torque_nm.abs() < 1e-9);
    let softer = cylinders.with(&Change::CounterbalancePressure { pressure_pa: 4e5 }).unwrap();
    assert!(time(&cylinders) < time(&softer));
    assert!(matches!(
        force.with(&Change::CounterbalancePressure { pressure_pa: 4e5 }),
        Err(MotionRefusal::NoSuchPart { .. })
    ));
}

/// Without a clutch and with a heavy die the slide falls: after clutch release the crank may run faster than the drive did.
#[test]
fn a_falling_slide_may_speed_up() {
    let drive = Drive::new({
        let mut data = drive_a_data();
        data.counterbalance = Counterbalance::None;
        data.upper_die_mass_kg = 2000.0;
        data.friction_torque_nm = 0.0;
        data
    })
    .unwrap();
    let law = ramp(0.01, 0.3, 12_000.0).torque_law(StopPath::Normal);
    let curves = calc::motion::stop_curves(&drive, &law, command(60.0, 20.0), Tolerance::STANDARD, 500).unwrap();
    let fastest = curves.points.iter().map(|point| point.crank_speed_rad_s).fold(0.0, f64::max);
    assert!(1.01 * rad_s_from_per_min(20.0) < fastest);
}

/// A slide that all but comes to rest on its way up and then either does or is carried over top dead centre: the first root of the energy says
/// which. The speed dips towards zero within a step or two, the place where a solver may look over a standstill.
#[test]
fn standstill_just_before_top_dead_centre_is_not_missed() {
    let drive = Drive::new({
        let mut data = drive_a_data();
        data.counterbalance = Counterbalance::None;
        data.friction_torque_nm = 0.0;
        data
    })
    .unwrap();
    let torque = 40.0;
    let law = ramp(0.0, 0.0, torque).torque_law(StopPath::Normal);
    let (mut before, mut carried_over) = (0, 0);
    for hundredth in (4000..9000).step_by(2) {
        let speed = f64::from(hundredth) / 100.0;
        let command = command(250.0, speed);
        let from = command.start_angle_rad();
        let left = |turned: f64| {
            0.5 * drive.inertia_kg_m2(from) * rad_s_from_per_min(speed).powi(2)
                + drive.net_weight_n()
                    * (drive.kinematics().travel_m(from + turned) - drive.kinematics().travel_m(from))
                - torque * turned
        };
        let step = 1e-3;
        let first = (1..3000).find(|i| left(f64::from(*i) * step) < 0.0);
        let found = stop(&drive, &law, command, Tolerance::STANDARD);
        if let Some(after) = first {
            let (mut low, mut high) = (f64::from(after - 1) * step, f64::from(after) * step);
            for _ in 0..60 {
                let middle = 0.5 * (low + high);
                if 0.0 < left(middle) {
                    low = middle;
                } else {
                    high = middle;
                }
            }
            before += 1;
            match found {
                Ok(found) => {
                    assert!(torque >= drive.load_torque_nm(from + low).abs() - 0.1);
                    assert!((found.stop_angle_rad - low).abs() < 1e-5, "{speed}: {} {low}", found.stop_angle_rad);
                }
                Err(MotionRefusal::CannotHold { angle_rad, .. }) => {
                    assert!((angle_rad - from - low).abs() < 1e-5, "{speed}");
                }
                Err(other) => panic!("{speed}: {other}"),
            }
        } else {
            carried_over += 1;
            // Over the top the weight drives on; 40 N m cannot stop it within three radians.
            if let Ok(found) = found {
                assert!(3.0 < found.stop_angle_rad, "{speed}");
            }
        }
    }
    assert!(200 < before && 200 < carried_over, "{before} {carried_over}");
}
