//! The map: the same figures as single stops, rows in any split, progress and stopping, the worst cell.

use super::drives::{brake_r, command, drive_a, ramp};
use calc::motion::{
    AngleRange, GoOn, MapCell, MotionRefusal, StopMap, StopPath, Tolerance, WorstCell, rad_s_from_per_min, stop,
};

fn map(angles: usize, speeds_per_min: &[f64]) -> StopMap {
    StopMap::over_one_turn(
        drive_a(),
        brake_r().torque_law(StopPath::Normal),
        angles,
        speeds_per_min.iter().map(|n| rad_s_from_per_min(*n)).collect(),
        Tolerance::STANDARD,
    )
    .unwrap()
}

#[test]
fn a_map_is_made_of_stops() {
    let map = map(360, &[20.0, 40.0, 60.0]);
    let whole = map.map_rows(0..360, |_| GoOn::Yes).unwrap();
    let mut parts = map.map_rows(0..111, |_| GoOn::Yes).unwrap();
    parts.extend(map.map_rows(111..360, |_| GoOn::Yes).unwrap());
    assert_eq!(whole, parts);
    let law = brake_r().torque_law(StopPath::Normal);
    for (deg, speed, column) in [(0_u16, 20.0, 0), (90, 40.0, 1), (60, 60.0, 2), (359, 60.0, 2)] {
        let alone = stop(&drive_a(), &law, command(f64::from(deg), speed), Tolerance::STANDARD).unwrap();
        let MapCell::Stop { stop_time_s, .. } = whole[usize::from(deg)].cells[column] else {
            panic!("no stop at {deg} deg");
        };
        assert!((stop_time_s - alone.stop_time_s).abs() < 1e-12);
    }
    // The worst of the closing half, found here by looking at every cell.
    let WorstCell::Longest(worst) = map.worst(&whole, AngleRange::ClosingHalf).unwrap() else {
        panic!("every cell has a figure");
    };
    let longest = whole[0..=180]
        .iter()
        .flat_map(|row| &row.cells)
        .map(|cell| match cell {
            MapCell::Stop { stop_time_s, .. } => *stop_time_s,
            MapCell::Refused(refusal) => panic!("{refusal}"),
        })
        .fold(0.0, f64::max);
    assert!((worst.stop_time_s - longest).abs() < 1e-15);
    assert!((worst.speed_rad_s - rad_s_from_per_min(60.0)).abs() < 1e-12);
    // A marked range across top dead centre holds only angles of that range.
    let marked = AngleRange::Marked { from_rad: 350.0_f64.to_radians(), to_rad: 10.0_f64.to_radians() };
    let WorstCell::Longest(worst) = map.worst(&whole, marked).unwrap() else {
        panic!("every cell has a figure");
    };
    let deg = worst.start_angle_rad.to_degrees();
    assert!(deg <= 10.001 || 349.999 <= deg, "{deg}");
}

#[test]
fn a_map_can_be_stopped() {
    let map = map(36, &[30.0]);
    let mut reports = Vec::new();
    let found = map.map_rows(6..36, |done| {
        reports.push(done);
        if done == 4 { GoOn::Stop } else { GoOn::Yes }
    });
    assert_eq!(found, Err(MotionRefusal::Stopped));
    assert_eq!(reports, [1, 2, 3, 4]);
}

#[test]
fn a_cell_without_a_figure_is_the_worst() {
    // Against the net weight of 826 N at 90 deg (61.9 N m) a brake of 50 N m does not hold; friction alone stops the crank.
    let map = StopMap::over_one_turn(
        drive_a(),
        ramp(0.02, 0.01, 50.0).torque_law(StopPath::Normal),
        72,
        vec![rad_s_from_per_min(3.0)],
        Tolerance::STANDARD,
    )
    .unwrap();
    let rows = map.map_rows(0..72, |_| GoOn::Yes).unwrap();
    let worst = map.worst(&rows, AngleRange::ClosingHalf).unwrap();
    assert!(matches!(worst, WorstCell::Refused { .. }), "{worst:?}");
}

#[test]
fn bad_maps_are_refused() {
    let law = || brake_r().torque_law(StopPath::Normal);
    let make = |angles, speeds| StopMap::over_one_turn(drive_a(), law(), angles, speeds, Tolerance::STANDARD);
    assert!(make(0, vec![1.0]).is_err());
    assert!(make(36_001, vec![1.0]).is_err());
    assert!(make(36, vec![]).is_err());
    assert!(make(36, vec![0.0]).is_err());
    let map = make(36, vec![3.0]).unwrap();
    assert!(map.map_rows(30..37, |_| GoOn::Yes).is_err());
    let rows = map.map_rows(0..36, |_| GoOn::Yes).unwrap();
    let between = AngleRange::Marked { from_rad: 0.01, to_rad: 0.02 };
    assert_eq!(map.worst(&rows, between), Err(MotionRefusal::NothingInRange));
}
