//! Drives and brakes that several checks share.

use calc::motion::{
    Brake, Counterbalance, Drive, DriveData, Exhaust, Kinematics, PressureBrake, PressureBrakeData, RampBrake,
    SliderCrank, StopCommand, rad_from_deg, rad_s_from_per_min,
};

/// Drive A: r 75 mm, L 600 mm, m 900 kg, J_rot 22 kg m2, F_cb 8000 N, T_f 60 N m.
pub fn drive_a() -> Drive {
    Drive::new(drive_a_data()).unwrap()
}

pub fn drive_a_data() -> DriveData {
    DriveData {
        kinematics: Kinematics::SliderCrank(SliderCrank::new(0.15, 0.6).unwrap()),
        reduced_inertia_kg_m2: 22.0,
        slide_mass_kg: 900.0,
        upper_die_mass_kg: 0.0,
        counterbalance: Counterbalance::Force { force_n: 8000.0 },
        friction_torque_nm: 60.0,
    }
}

/// Rotating parts alone.
pub fn flywheel(inertia_kg_m2: f64) -> Drive {
    let any = Kinematics::SliderCrank(SliderCrank::new(0.1, 0.4).unwrap());
    Drive::without_slide(any, inertia_kg_m2, 0.0).unwrap()
}

pub fn ramp(dead_time_s: f64, rise_time_s: f64, full_torque_nm: f64) -> Brake {
    Brake::Ramp(RampBrake::new(dead_time_s, rise_time_s, full_torque_nm).unwrap())
}

/// Ramp brake R: t_d 45 ms, t_r 60 ms, T_full 4200 N m.
pub fn brake_r() -> Brake {
    ramp(0.045, 0.06, 4200.0)
}

pub fn two_stage_data() -> PressureBrakeData {
    PressureBrakeData {
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
    }
}

pub fn two_stage() -> Brake {
    Brake::Pressure(PressureBrake::new(two_stage_data()).unwrap())
}

pub fn command(start_deg: f64, speed_per_min: f64) -> StopCommand {
    StopCommand::new(rad_from_deg(start_deg), rad_s_from_per_min(speed_per_min)).unwrap()
}
