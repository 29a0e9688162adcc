//! Handbook and textbook figures. Each row names its source and basis.

use super::drives::{brake_r, command, drive_a, flywheel, ramp};
use calc::motion::{
    BrakeParts, Counterbalance, Drive, DriveData, Kinematics, MeanRadius, SliderCrank, StopPath, Tolerance,
    mean_radius_m, rad_from_deg, rad_s_from_per_min, spring_force_n, stop,
};

fn within(found: f64, wanted: f64, half_unit: f64, what: &str) {
    assert!((found - wanted).abs() <= half_unit, "{what}: found {found}, wanted {wanted}");
}

/// Exact slider-crank formula worked by hand: r = 50 mm, l = 400 mm, 60 rev/min; x in mm, v in mm/s, as many digits as given.
#[test]
fn slide_position_and_speed() {
    let crank = SliderCrank::new(0.1, 0.4).unwrap();
    let w = rad_s_from_per_min(60.0);
    for (deg, x, v) in [
        (30.0, 7.4807, 174.1173),
        (45.0, 16.2102, 241.8563),
        (60.0, 27.3507, 289.1748),
        (90.0, 53.1373, 314.1593),
        (120.0, 77.3507, 254.9650),
        (135.0, 86.9209, 202.4320),
        (180.0, 100.0, 0.0),
    ] {
        let angle = rad_from_deg(deg);
        within(crank.travel_m(angle) * 1e3, x, 0.5e-4, "x");
        within(crank.slopes(angle).0 * w * 1e3, v, 0.5e-4, "v");
    }
}

/// Textbook example (two public teaching texts): r = 300 mm, l = 1 m, 200 rev/min. The texts' short form, w r (sin + sin(2 theta)/(2n)), gives
/// 6.54 m/s at 75 deg; exact kinematics give 6.5617 m/s at 74.53 deg. This program uses the exact form.
#[test]
fn greatest_slide_speed() {
    let crank = SliderCrank::new(0.6, 1.0).unwrap();
    let w = rad_s_from_per_min(200.0);
    let (mut best, mut at) = (0.0, 0.0);
    for hundredth in 0..18_000 {
        let deg = f64::from(hundredth) / 100.0;
        let speed = crank.slopes(rad_from_deg(deg)).0 * w;
        if best < speed {
            (best, at) = (speed, deg);
        }
    }
    within(best, 6.5617, 0.5e-4, "greatest speed");
    within(at, 74.53, 0.0101, "its angle");
    let theta = rad_from_deg(75.0);
    let short = w * 0.3 * (theta.sin() + (2.0 * theta).sin() * 0.3 / 2.0);
    within(short, 6.54, 0.5e-2, "short form");
    assert!(0.005 < (best - short).abs());
}

/// Added inertia and weight torque worked by hand: r = 50, l = 400 mm, m = 500 kg, no counterbalance. The weight torques were worked
/// with g = 9.81 m/s^2; this program takes 9.80665 m/s^2, so they are compared after that ratio.
#[test]
fn added_inertia_and_weight_torque() {
    let drive = Drive::new(DriveData {
        kinematics: Kinematics::SliderCrank(SliderCrank::new(0.1, 0.4).unwrap()),
        reduced_inertia_kg_m2: 10.0,
        slide_mass_kg: 300.0,
        upper_die_mass_kg: 200.0,
        counterbalance: Counterbalance::None,
        friction_torque_nm: 0.0,
    })
    .unwrap();
    for (deg, inertia, torque) in [(45.0, 0.7408, 188.8), (60.0, 1.0591, 225.7), (90.0, 1.25, 245.3)] {
        let angle = rad_from_deg(deg);
        within(drive.inertia_kg_m2(angle) - 10.0, inertia, 0.5e-4, "added inertia");
        within(drive.load_torque_nm(angle) * 9.81 / 9.806_65, torque, 0.05, "weight torque");
    }
}

/// Published exam solution: 4 pairs, ri 75, ro 125 mm, p 0.127 N/mm2, mu 0.3, 500 rev/min gives F 2990 N, T 358.8 N m, 18.8 kW with its
/// intermediate rounding; recomputed without it 2992 N, 359.1 N m, 18.80 kW.
#[test]
fn disc_brake_exam_solution() {
    let force = spring_force_n(0.127e6, 0.125, 0.075).unwrap();
    within(force, 2992.0, 0.5, "force");
    within(force, 2990.0, 3.0, "force as printed");
    let torque = BrakeParts {
        friction_faces: 4,
        friction_coefficient: 0.3,
        axial_force_n: force,
        outer_radius_m: 0.125,
        inner_radius_m: 0.075,
        mean_radius: MeanRadius::UniformWear,
    }
    .full_torque_nm()
    .unwrap();
    within(torque, 359.1, 0.05, "torque");
    within(torque, 358.8, 0.4, "torque as printed");
    within(torque * rad_s_from_per_min(500.0) / 1e3, 18.80, 0.005, "power");
}

/// Published problem: 4 + 3 discs make 6 pairs, 240/160 mm diameter, mu 0.25, 20 kW at 1200 rev/min. Inputs as published; force and pressure
/// worked by hand: 159.15 N m, 1061 N, 0.0528 N/mm2.
#[test]
fn disc_brake_published_problem() {
    within(20e3 / rad_s_from_per_min(1200.0), 159.15, 0.005, "torque");
    let torque = BrakeParts {
        friction_faces: 6,
        friction_coefficient: 0.25,
        axial_force_n: 1061.0,
        outer_radius_m: 0.12,
        inner_radius_m: 0.08,
        mean_radius: MeanRadius::UniformWear,
    }
    .full_torque_nm()
    .unwrap();
    within(torque, 159.15, 0.05, "torque");
    within(
        spring_force_n(0.0528e6, 0.12, 0.08).unwrap(),
        1061.0,
        // Half a unit of the last digit of 0.0528 N/mm2 is 0.1 %.
        1.1,
        "force",
    );
}

/// Mean radius by uniform pressure, (2/3)(ro^3 - ri^3)/(ro^2 - ri^2): 125/75 mm give (2/3)(1.953125 - 0.421875)/(15.625 - 5.625) m = 102.0833 mm.
/// A narrow ring approaches the mean of its radii.
#[test]
fn mean_radius_by_uniform_pressure() {
    let radius = |outer, inner| mean_radius_m(outer, inner, MeanRadius::UniformPressure).unwrap();
    within(radius(0.125, 0.075) * 1e3, 102.0833, 0.5e-4, "mean radius");
    within(radius(0.1 + 1e-9, 0.1) * 1e3, 100.0, 1e-5, "narrow ring");
    assert!(mean_radius_m(0.125, 0.075, MeanRadius::UniformWear).unwrap() < radius(0.125, 0.075));
}

/// Flywheels under constant torque, closed form worked by hand from published problems: inertia, speed 1/min, torque, delay, rise; time, angle deg.
#[test]
fn flywheels() {
    // I = 120 kg m2, 25 rad/s, stopped in 20 s by 150 N m: scaled a thousandfold in torque, since a stop here may take 10 s at most.
    let w = 25.0 * 30.0 / std::f64::consts::PI;
    for (inertia, speed, torque, dead, rise, time, time_half, turned_deg, deg_half) in [
        (120.0, w, 150_000.0, 0.0, 0.0, 0.02, 1e-12, 0.25_f64.to_degrees(), 1e-9),
        (20.0, 60.0, 800.0, 0.05, 0.0, 0.207_080, 0.5e-6, 46.2743, 0.5e-4),
        (20.0, 60.0, 800.0, 0.0, 0.06, 0.187_080, 0.5e-6, 38.7306, 0.5e-4),
        // m = 400 kg, k = 0.45 m (J = 81), 225 N m, 300 rev/min: 11.310 s, 28.274 turns; with 100 times the torque a hundredth of both.
        (81.0, 300.0, 22_500.0, 0.0, 0.0, 0.113_10, 0.5e-5, 0.282_74 * 360.0, 0.002),
    ] {
        let law = ramp(dead, rise, torque).torque_law(StopPath::Normal);
        let found = stop(&flywheel(inertia), &law, command(0.0, speed), Tolerance::STANDARD).unwrap();
        within(found.stop_time_s, time, time_half, "time");
        within(found.stop_angle_rad.to_degrees(), turned_deg, deg_half, "angle");
    }
}

/// Drive A with ramp brake R, by an independent public solver (eighth-order Runge-Kutta, rtol 1e-11): ms, deg, mm as printed.
#[test]
fn drive_a_with_ramp_brake_r() {
    let law = brake_r().torque_law(StopPath::Normal);
    for (speed, start, time, angle, travel) in
        [(40.0, 90.0, 101.2124, 19.8453, 24.9169), (60.0, 60.0, 115.5129, 32.9590, 42.5390)]
    {
        let found = stop(&drive_a(), &law, command(start, speed), Tolerance::STANDARD).unwrap();
        within(found.stop_time_s * 1e3, time, 0.5e-4, "time");
        within(found.stop_angle_rad.to_degrees(), angle, 0.5e-4, "angle");
        within(found.slide_travel_m * 1e3, travel, 0.5e-4, "travel");
    }
    // Of 45, 60, 90, 120, 150 deg at 60/min the longest is at 60.
    let time = |deg: f64| stop(&drive_a(), &law, command(deg, 60.0), Tolerance::STANDARD).unwrap().stop_time_s;
    for deg in [45.0, 90.0, 120.0, 150.0] {
        assert!(time(deg) < time(60.0), "{deg}");
    }
}
