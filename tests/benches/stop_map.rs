//! How many stops a second the map works out, and beside it the same cases by the public solver of SciPy.
//!
//! `cargo bench -p tests --bench stop_map`. The comparison runs if the environment variable SLIDEHALT_PYTHON names a Python with SciPy.
#![allow(missing_docs)]

use calc::motion::{
    Brake, Counterbalance, Drive, DriveData, Exhaust, GoOn, Kinematics, MapCell, MapRow, PressureBrake,
    PressureBrakeData, RampBrake, SliderCrank, StopMap, StopPath, Tolerance, rad_s_from_per_min,
};
use std::time::Instant;

fn main() {
    let drive = Drive::new(DriveData {
        kinematics: Kinematics::SliderCrank(SliderCrank::new(0.15, 0.6).expect("drive A")),
        reduced_inertia_kg_m2: 22.0,
        slide_mass_kg: 900.0,
        upper_die_mass_kg: 0.0,
        counterbalance: Counterbalance::Force { force_n: 8000.0 },
        friction_torque_nm: 60.0,
    })
    .expect("drive A");
    let ramp = Brake::Ramp(RampBrake::new(0.045, 0.06, 4200.0).expect("ramp brake R"));
    let pressure = Brake::Pressure(
        PressureBrake::new(PressureBrakeData {
            full_torque_nm: 4200.0,
            dead_time_s: 0.03,
            operating_pressure_pa: 60e5,
            clutch_release_pressure_pa: 36e5,
            touch_pressure_pa: 24e5,
            exhaust: Exhaust::TwoStage {
                fast_time_constant_s: 0.02,
                metered_time_constant_s: 0.06,
                metered_from_pa: 12e5,
                metered_to_pa: 3e5,
            },
            emergency_time_constant_s: 0.015,
        })
        .expect("pressure brake"),
    );
    let speeds: Vec<f64> = (1..=60).map(|i| rad_s_from_per_min(f64::from(2 * i))).collect();
    for (name, brake) in [("ramp brake", ramp), ("two-stage pressure brake", pressure)] {
        let map = StopMap::over_one_turn(
            drive.clone(),
            brake.torque_law(StopPath::Normal),
            360,
            speeds.clone(),
            Tolerance::STANDARD,
        )
        .expect("map");
        let one = best_of(20, || drop(map.map_rows(0..360, |_| GoOn::Yes)));
        let two = best_of(20, || {
            std::thread::scope(|scope| {
                let half = scope.spawn(|| map.map_rows(0..180, |_| GoOn::Yes));
                drop(map.map_rows(180..360, |_| GoOn::Yes));
                drop(half.join());
            });
        });
        let rows = map.map_rows(0..360, |_| GoOn::Yes).expect("map");
        let stops = rows.iter().map(|row| row.cells.len()).sum::<usize>() as f64;
        println!(
            "{name}: {stops} stops, 1e-9: one thread {:.1} ms ({:.2} us a stop, {:.0} stops/s), two threads {:.1} ms; {} refused",
            one * 1e3,
            one / stops * 1e6,
            stops / one,
            two * 1e3,
            refused(&rows),
        );
    }
    match std::env::var("SLIDEHALT_PYTHON") {
        Ok(python) => {
            let script = concat!(env!("CARGO_MANIFEST_DIR"), "/outside/motion/reference.py");
            let done = std::process::Command::new(&python).args([script, "--bench"]).status();
            match done {
                Ok(status) if status.success() => {}
                Ok(status) => println!("SciPy: {python} ended with {status}"),
                Err(error) => println!("SciPy: {python} could not be started: {error}"),
            }
        }
        Err(_) => println!("SciPy: not compared, SLIDEHALT_PYTHON names no Python"),
    }
}

fn best_of(runs: u32, mut work: impl FnMut()) -> f64 {
    (0..runs)
        .map(|_| {
            let start = Instant::now();
            work();
            start.elapsed().as_secs_f64()
        })
        .fold(f64::INFINITY, f64::min)
}

fn refused(rows: &[MapRow]) -> usize {
    rows.iter().flat_map(|row| &row.cells).filter(|cell| matches!(cell, MapCell::Refused(_))).count()
}
