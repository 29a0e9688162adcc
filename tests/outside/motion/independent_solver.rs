//! Stops against SciPy's DOP853, checked there against Radau or LSODA. The table and the script that wrote it stand beside this file.

use calc::motion::{
    Brake, Counterbalance, Drive, DriveData, Exhaust, Kinematics, LinkDrive, MotionRefusal, PressureBrake,
    PressureBrakeData, RampBrake, SliderCrank, StopCommand, StopPath, Tolerance, TravelRow, rad_from_deg,
    rad_s_from_per_min, stop,
};
use std::collections::BTreeMap;
use std::f64::consts::TAU;

const TABLE: &str = include_str!("reference-stops.txt");

/// The same rule as in the script: a crank turning unevenly, 36 rows rounded to 1 nm.
fn link_drive(stroke_m: f64, rod_m: f64) -> LinkDrive {
    let (r, l) = (0.5 * stroke_m, rod_m);
    let rows: Vec<TravelRow> = (0..36)
        .map(|i| {
            let angle_rad = TAU * f64::from(i) / 36.0;
            let uneven = angle_rad - 0.125 * (1.0 - angle_rad.cos()) * angle_rad.sin();
            let across = r / l * uneven.sin();
            let travel = r * (1.0 - uneven.cos()) + l * (1.0 - (1.0 - across * across).sqrt());
            TravelRow { angle_rad, travel_m: (travel * 1e9).round() / 1e9 }
        })
        .collect();
    LinkDrive::new(&rows).unwrap()
}

#[test]
fn stops_agree_with_scipy() {
    let mut lines = TABLE.lines().filter(|line| !line.starts_with('#'));
    let head: Vec<&str> = lines.next().unwrap().split('\t').collect();
    let mut seen: BTreeMap<String, u32> = BTreeMap::new();
    let (mut worst_time, mut stops, mut refused) = (0.0_f64, 0, 0);
    for (number, line) in lines.enumerate() {
        let row: BTreeMap<&str, &str> = head.iter().copied().zip(line.split('\t')).collect();
        let figure = |name: &str| row[name].parse::<f64>().unwrap();
        let kinematics = match row["kinematics"] {
            "crank" => Kinematics::SliderCrank(SliderCrank::new(figure("stroke_m"), figure("rod_m")).unwrap()),
            "table" => Kinematics::LinkDrive(link_drive(figure("stroke_m"), figure("rod_m"))),
            other => panic!("unknown drive {other}"),
        };
        let drive = Drive::new(DriveData {
            kinematics,
            reduced_inertia_kg_m2: figure("j_rot"),
            slide_mass_kg: figure("slide_kg"),
            upper_die_mass_kg: figure("die_kg"),
            counterbalance: Counterbalance::Force { force_n: figure("f_cb") },
            friction_torque_nm: figure("t_f"),
        })
        .unwrap();
        let pressure_brake = |exhaust| {
            Brake::Pressure(
                PressureBrake::new(PressureBrakeData {
                    full_torque_nm: figure("t_full"),
                    dead_time_s: figure("t_d"),
                    operating_pressure_pa: figure("p0"),
                    clutch_release_pressure_pa: figure("p_clutch"),
                    touch_pressure_pa: figure("p_touch"),
                    exhaust,
                    emergency_time_constant_s: figure("tau_dump"),
                })
                .unwrap(),
            )
        };
        let brake = match row["brake"] {
            "ramp" => Brake::Ramp(RampBrake::new(figure("t_d"), figure("t_r"), figure("t_full")).unwrap()),
            "single" => pressure_brake(Exhaust::SingleStage { time_constant_s: figure("tau_fast") }),
            "two" => pressure_brake(Exhaust::TwoStage {
                fast_time_constant_s: figure("tau_fast"),
                metered_time_constant_s: figure("tau_slow"),
                metered_from_pa: figure("p_hi"),
                metered_to_pa: figure("p_lo"),
            }),
            other => panic!("unknown brake {other}"),
        };
        let path = match row["path"] {
            "normal" => StopPath::Normal,
            "emergency" => StopPath::Emergency,
            other => panic!("unknown path {other}"),
        };
        let kind = format!("{} {} {}", row["kinematics"], row["brake"], row["path"]);
        *seen.entry(kind).or_default() += 1;
        let command =
            StopCommand::new(rad_from_deg(figure("start_deg")), rad_s_from_per_min(figure("speed_per_min"))).unwrap();
        let found = stop(&drive, &brake.torque_law(path), command, Tolerance::STANDARD);
        if row["stop_s"] == "refused" {
            assert!(matches!(found, Err(MotionRefusal::CannotHold { .. })), "case {number}: {found:?}");
            refused += 1;
            continue;
        }
        let found = found.unwrap_or_else(|refusal| panic!("case {number}: {refusal}"));
        let time_gap = (found.stop_time_s - figure("stop_s")).abs();
        assert!(time_gap <= 1e-6 + 1e-6 * figure("stop_s"), "case {number}: {time_gap} s apart");
        // Much closer than asked: no further than the stated error, and the reference's own.
        assert!(
            time_gap <= found.stop_time_error_s + 2e-10,
            "case {number}: {time_gap} s apart, stated {}",
            found.stop_time_error_s
        );
        let angle_gap = (found.stop_angle_rad - figure("stop_angle_rad")).abs();
        assert!(angle_gap <= 1e-6 * figure("stop_angle_rad"), "case {number}: {angle_gap} rad apart");
        let travel_gap = (found.slide_travel_m - figure("travel_m")).abs();
        assert!(travel_gap <= 1e-6 * figure("stroke_m"), "case {number}: {travel_gap} m apart");
        worst_time = worst_time.max(time_gap);
        stops += 1;
    }
    println!("{stops} stops, {refused} refused, greatest difference {worst_time:.2e} s: {seen:?}");
    // What is not in the table is not checked: 12 kinds of drive, brake and path.
    assert_eq!(seen.len(), 12, "{seen:?}");
    assert!(200 <= stops, "{stops}");
    assert!(2 <= refused, "{refused}");
}
