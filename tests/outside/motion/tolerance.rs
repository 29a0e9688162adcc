//! The solver keeps what it states: halving the tolerance moves the stop time by less than the stated error, finer tolerances converge, the
//! energy balances, and the figures of a step across bottom dead centre, near standstill or at an extreme speed are no exception.

use super::drives::{brake_r, command, drive_a, ramp, two_stage};
use calc::motion::{Stop, StopPath, Tolerance, TorqueLaw, stop, stop_curves};

fn laws() -> Vec<TorqueLaw> {
    vec![
        brake_r().torque_law(StopPath::Normal),
        ramp(0.0, 0.0, 3000.0).torque_law(StopPath::Normal),
        ramp(0.02, 0.5, 9000.0).torque_law(StopPath::Normal),
        two_stage().torque_law(StopPath::Normal),
        two_stage().torque_law(StopPath::Emergency),
    ]
}

fn for_each_case(mut check: impl FnMut(&dyn Fn(f64) -> Option<Stop>)) {
    for law in laws() {
        for die_kg in [0.0, 600.0] {
            let drive = drive_a().with_upper_die_mass(die_kg).unwrap();
            for speed in [2.0, 15.0, 60.0, 150.0] {
                for start in (0..360).step_by(20) {
                    check(&|tolerance| {
                        let tolerance = Tolerance::new(tolerance).unwrap();
                        // A brake with a long rise may not hold on the way up; that is not at stake here.
                        stop(&drive, &law, command(f64::from(start), speed), tolerance).ok()
                    });
                }
            }
        }
    }
}

#[test]
fn halved_tolerance_moves_the_stop_time_by_less_than_the_stated_error() {
    let mut compared = 0;
    for_each_case(|solve| {
        for tolerance in [1e-5, 1e-7, 1e-9, 1e-11] {
            if let (Some(one), Some(other)) = (solve(tolerance), solve(0.5 * tolerance)) {
                let moved = (one.stop_time_s - other.stop_time_s).abs();
                assert!(
                    moved <= one.stop_time_error_s,
                    "{tolerance}: moved by {moved}, stated {}",
                    one.stop_time_error_s
                );
                compared += 1;
            }
        }
    });
    assert!(2000 < compared, "{compared}");
}

#[test]
fn stated_error_covers_the_error() {
    let mut greatest_share = 0.0_f64;
    let mut greatest_stated = 0.0_f64;
    for_each_case(|solve| {
        if let Some(truth) = solve(1e-13) {
            for tolerance in [1e-5, 1e-7, 1e-9] {
                let found = solve(tolerance).unwrap();
                let error = (found.stop_time_s - truth.stop_time_s).abs();
                greatest_share = greatest_share.max(error / (found.stop_time_error_s + truth.stop_time_error_s));
                greatest_stated = greatest_stated.max(found.stop_time_error_s / (tolerance * found.stop_time_s));
            }
        }
    });
    println!(
        "greatest error {greatest_share:.3} of the stated one; greatest stated error {greatest_stated:.3} x tolerance x stop time"
    );
    assert!(greatest_share <= 1.0, "{greatest_share}");
    // A stated error is worth something only if it is small.
    assert!(greatest_stated < 2e3, "{greatest_stated}");
}

#[test]
fn energy_balances() {
    for_each_case(|solve| {
        for tolerance in [1e-6, 1e-9, 1e-12] {
            if let Some(found) = solve(tolerance) {
                assert!(found.energy.missing_share().abs() <= 100.0 * tolerance + 1e-13);
                let spans = found.spans;
                let parts = [spans.delay_s, spans.clutch_release_s, spans.build_up_s, spans.braking_s];
                assert!(parts.iter().all(|part| 0.0 <= *part), "{parts:?}");
                assert!((parts.iter().sum::<f64>() - found.stop_time_s).abs() < 1e-14);
            }
        }
    });
}

/// The curves belong to the stop: speed is the slope of the angle, the slide's of the travel, both ends are right.
#[test]
fn curves_belong_to_the_stop() {
    for law in laws() {
        let drive = drive_a();
        let curves = stop_curves(&drive, &law, command(70.0, 45.0), Tolerance::STANDARD, 4000).unwrap();
        let alone = stop(&drive, &law, command(70.0, 45.0), Tolerance::STANDARD).unwrap();
        assert_eq!(curves.stop, alone);
        let (first, last) = (curves.points[0], curves.points[4000]);
        assert!(first.time_s.abs() < 1e-15 && last.crank_speed_rad_s.abs() < 1e-15);
        assert!((last.angle_rad - first.angle_rad - alone.stop_angle_rad).abs() < 1e-12);
        assert!((last.travel_m - first.travel_m - alone.slide_travel_m).abs() < 1e-12);
        for pair in curves.points.windows(3) {
            let step = pair[2].time_s - pair[0].time_s;
            let slope = (pair[2].angle_rad - pair[0].angle_rad) / step;
            // A jump of the torque bends the speed within one interval; the slope is then off by half its change.
            let bend = (pair[2].crank_speed_rad_s - pair[0].crank_speed_rad_s).abs();
            assert!((slope - pair[1].crank_speed_rad_s).abs() <= 0.3 * bend + 1e-6);
            let slope = (pair[2].travel_m - pair[0].travel_m) / step;
            assert!((slope - pair[1].slide_speed_m_s).abs() <= 0.02 * bend + 1e-5);
        }
    }
}
