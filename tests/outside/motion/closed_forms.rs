//! Rotating parts alone, where the stop has a closed form. Basis of every row: the formula named, worked out here from the inputs.

use super::drives::{command, flywheel, ramp};
use calc::motion::{Brake, Exhaust, PressureBrake, PressureBrakeData, StopPath, Tolerance, rad_s_from_per_min, stop};

fn near(found: f64, wanted: f64, relative: f64, what: &str) {
    assert!((found - wanted).abs() <= relative * wanted.abs(), "{what}: found {found}, wanted {wanted}");
}

/// t_stop = t_d + t_r/2 + J w0/T; angle = w0 t_d + w0 t_r - T t_r^2/(6 J) + (w0 - T t_r/(2 J))^2 J/(2 T).
#[test]
fn stop_after_the_ramp() {
    for (inertia, speed, dead, rise, torque) in [
        (20.0, 60.0, 0.05, 0.0, 800.0),
        (20.0, 60.0, 0.05, 0.06, 800.0),
        (20.0, 60.0, 0.0, 0.06, 800.0),
        (3.0, 120.0, 0.02, 0.01, 300.0),
        (900.0, 12.0, 0.3, 0.2, 5000.0),
        (0.5, 600.0, 0.0, 0.0, 100.0),
    ] {
        let w0 = rad_s_from_per_min(speed);
        let law = ramp(dead, rise, torque).torque_law(StopPath::Normal);
        let found = stop(&flywheel(inertia), &law, command(90.0, speed), Tolerance::STANDARD).unwrap();
        let time = dead + rise / 2.0 + inertia * w0 / torque;
        let after_ramp = w0 - torque * rise / (2.0 * inertia);
        assert!(0.0 < after_ramp, "the closed form needs a stop after the ramp");
        let angle = w0 * dead + w0 * rise - torque * rise * rise / (6.0 * inertia)
            + after_ramp * after_ramp * inertia / (2.0 * torque);
        near(found.stop_time_s, time, 1e-12, "time");
        near(found.stop_angle_rad, angle, 1e-12, "angle");
        near(found.energy.brake_work_j, 0.5 * inertia * w0 * w0, 1e-12, "brake work");
        near(found.mean_brake_power_w(0.1).unwrap(), 0.05 * inertia * w0 * w0, 1e-12, "power");
        near(found.spans.delay_s, dead, 1e-15, "delay");
        near(found.spans.build_up_s, rise, 1e-12, "build-up");
    }
}

/// Standstill before the brake is built up: J w0 = T (t - t_d)^2/(2 t_r), so t = t_d + sqrt(2 J w0 t_r/T).
#[test]
fn stop_within_the_ramp() {
    for (inertia, speed, dead, rise, torque) in [(5.0, 20.0, 0.05, 0.4, 900.0), (1.0, 5.0, 0.0, 1.0, 50.0)] {
        let w0 = rad_s_from_per_min(speed);
        let law = ramp(dead, rise, torque).torque_law(StopPath::Normal);
        let found = stop(&flywheel(inertia), &law, command(0.0, speed), Tolerance::STANDARD).unwrap();
        let braking = (2.0 * inertia * w0 * rise / torque).sqrt();
        assert!(braking < rise);
        near(found.stop_time_s, dead + braking, 1e-12, "time");
        // w = w0 (1 - (t/braking)^2), so the angle while braking is w0 braking 2/3.
        near(found.stop_angle_rad, w0 * dead + w0 * braking * 2.0 / 3.0, 1e-12, "angle");
        near(found.spans.build_up_s, braking, 1e-12, "build-up");
        assert!(found.spans.braking_s.abs() < 1e-15);
    }
}

/// First-order build-up: T (t - tau (1 - e^(-t/tau))) = J w0, solved here by halving. A single-stage unit whose clutch lets go at brake contact.
#[test]
fn stop_with_first_order_build_up() {
    let (inertia, torque, tau) = (20.0, 800.0, 0.03);
    let w0 = rad_s_from_per_min(60.0);
    let brake = |dead_time_s: f64, clutch_pa: f64| {
        Brake::Pressure(
            PressureBrake::new(PressureBrakeData {
                full_torque_nm: torque,
                dead_time_s,
                operating_pressure_pa: 60e5,
                clutch_release_pressure_pa: clutch_pa,
                touch_pressure_pa: 24e5,
                exhaust: Exhaust::SingleStage { time_constant_s: tau },
                emergency_time_constant_s: tau,
            })
            .unwrap(),
        )
    };
    let (mut low, mut high) = (0.0, 1.0);
    for _ in 0..100 {
        let t: f64 = 0.5 * (low + high);
        if torque * (t - tau * (1.0 - (-t / tau).exp())) < inertia * w0 {
            low = t;
        } else {
            high = t;
        }
    }
    // The same case worked by hand elsewhere: 0.187021 s.
    assert!((low - 0.187_021).abs() < 0.5e-6);
    let contact = 0.01 + tau * (60.0_f64 / 24.0).ln();
    for path in [StopPath::Normal, StopPath::Emergency] {
        let law = brake(0.01, 24e5).torque_law(path);
        let found = stop(&flywheel(inertia), &law, command(45.0, 60.0), Tolerance::STANDARD).unwrap();
        near(found.stop_time_s, contact + low, 1e-11, "time");
        near(found.spans.clutch_release_s, contact - 0.01, 1e-12, "clutch release");
        near(found.spans.build_up_s, tau * 20.0_f64.ln(), 1e-11, "build-up to 95 %");
    }
    // Letting go earlier changes nothing for a rotor without friction; the brake sets at the same moment.
    let early = brake(0.01, 36e5).torque_law(StopPath::Normal);
    let found = stop(&flywheel(inertia), &early, command(45.0, 60.0), Tolerance::STANDARD).unwrap();
    near(found.stop_time_s, contact + low, 1e-11, "time");
    // Letting go after contact: the brake drags against the clutch from 24 bar to 12 bar, w0 T integral of (1 - p/24).
    let late = brake(0.01, 12e5).torque_law(StopPath::Normal);
    let found = stop(&flywheel(inertia), &late, command(45.0, 60.0), Tolerance::STANDARD).unwrap();
    let drag_s = tau * 2.0_f64.ln();
    let drag_j = w0 * torque * (drag_s - tau * 0.5);
    near(found.brake_heat_j, 0.5 * inertia * w0 * w0 + drag_j, 1e-9, "brake heat");
}

/// The pressure of a two-stage unit at the corners and between them, from its exponentials; torque follows.
#[test]
fn pressure_of_a_two_stage_unit() {
    let law = super::drives::two_stage().torque_law(StopPath::Normal);
    let first = 0.03 + 0.02 * 5.0_f64.ln();
    let second = first + 0.06 * 4.0_f64.ln();
    for (time, pressure) in [
        (0.0, 60e5),
        (0.03, 60e5),
        (0.03 + 0.02 * 2.0_f64.ln(), 30e5),
        (first, 12e5),
        (first + 0.06 * 2.0_f64.ln(), 6e5),
        (second, 3e5),
        (second + 0.02 * 10.0_f64.ln(), 3e4),
    ] {
        near(law.pressure_pa(time).unwrap(), pressure, 1e-12, "pressure");
        let torque = 4200.0 * (1.0 - pressure / 24e5_f64).max(0.0);
        assert!((law.torque_nm(time) - torque).abs() < 1e-9, "{time}");
    }
    near(law.clutch_release_s(), 0.03 + 0.02 * (60.0_f64 / 36.0).ln(), 1e-13, "clutch release");
    let dump = super::drives::two_stage().torque_law(StopPath::Emergency);
    near(dump.pressure_pa(0.03 + 0.015 * 4.0_f64.ln()).unwrap(), 15e5, 1e-12, "emergency pressure");
}
