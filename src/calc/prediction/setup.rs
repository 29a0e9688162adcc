//! From the entered figures of a press to the checked types of the stop model.

use super::data::{BrakeData, Lift, PredictionData, PressureData};
use super::refusal::PredictionRefusal;
use crate::motion::{
    AngleRange, Brake, Counterbalance, Drive, DriveData, Exhaust, Kinematics, LinkDrive, PressureBrake,
    PressureBrakeData, RampBrake, SliderCrank, Stop, StopCommand, StopMap, StopPath, StopSetup, Tolerance, TravelRow,
    WorstCell, rad_from_deg, rad_s_from_per_min,
};
use crate::press::{Clutch, DriveKind, Press};
use crate::stop_test;
use crate::units::{Angle, Inertia, Length, Mass, Pressure, Rate, Time, Torque};

/// Where and how a predicted stop begins.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct At {
    /// Crank angle at the stop command.
    pub angle: Angle,
    /// Crank speed.
    pub speed: Rate,
    /// Upper die.
    pub upper_die: Mass,
    /// Counterbalance pressure, where it is another than the entered one.
    pub counterbalance: Option<Pressure>,
    /// Which stop is called for.
    pub path: stop_test::StopPath,
}

impl At {
    /// The condition of a stop test.
    pub fn of(condition: &stop_test::Condition) -> Self {
        Self {
            angle: condition.angle,
            speed: condition.speed,
            upper_die: condition.upper_die,
            counterbalance: condition.counterbalance,
            path: condition.path,
        }
    }

    /// The condition in one line.
    pub fn words(&self) -> String {
        format!("{}°, {}, {} die, {}", self.angle.digits(), self.speed, self.upper_die, self.path.words())
    }

    /// Angle and speed as the stop model takes them.
    ///
    /// # Refuses
    /// An angle or a speed out of range.
    pub fn command(&self) -> Result<StopCommand, PredictionRefusal> {
        Ok(StopCommand::new(rad_from_deg(self.angle.to_f64()), rad_s_from_per_min(self.speed.to_f64()))?)
    }
}

/// The stop path as the stop model calls it.
pub const fn motion_path(path: stop_test::StopPath) -> StopPath {
    match path {
        stop_test::StopPath::Normal => StopPath::Normal,
        stop_test::StopPath::Emergency => StopPath::Emergency,
    }
}

/// Gathers the names of what is missing, so that all are said at once.
#[derive(Default)]
struct Asked {
    missing: Vec<&'static str>,
}

impl Asked {
    fn or_missing<T>(&mut self, name: &'static str, value: Option<T>, si: impl FnOnce(T) -> f64) -> f64 {
        match value {
            Some(value) => si(value),
            None => {
                self.missing.push(name);
                0.0
            }
        }
    }

    fn done(self) -> Result<(), PredictionRefusal> {
        if self.missing.is_empty() { Ok(()) } else { Err(PredictionRefusal::Missing(self.missing)) }
    }
}

fn metres(length: Length) -> f64 {
    length.base() as f64 * 1e-6
}

fn seconds(time: Time) -> f64 {
    time.base() as f64 * 1e-6
}

fn pascals(pressure: Pressure) -> f64 {
    pressure.base() as f64 * 100.0
}

fn newton_metres(torque: Torque) -> f64 {
    torque.to_f64()
}

/// How the crank of the press moves the slide.
///
/// # Refuses
/// A stroke, rod or travel table that is missing or makes no drive.
pub fn kinematics_of(press: &Press) -> Result<Kinematics, PredictionRefusal> {
    match press.drive {
        DriveKind::Crank => {
            let mut asked = Asked::default();
            let stroke_m = asked.or_missing("stroke", press.stroke, metres);
            let rod_m = asked.or_missing("connecting rod", press.rod, metres);
            asked.done()?;
            Ok(Kinematics::SliderCrank(SliderCrank::new(stroke_m, rod_m)?))
        }
        DriveKind::Link => {
            let entered = press.prediction.as_ref().map_or(&[][..], |data| &data.travel);
            if entered.is_empty() {
                return Err(PredictionRefusal::Missing(vec!["travel table of the link drive"]));
            }
            let rows: Vec<TravelRow> = entered
                .iter()
                .map(|row| TravelRow { angle_rad: rad_from_deg(row.angle.to_f64()), travel_m: metres(row.travel) })
                .collect();
            Ok(Kinematics::LinkDrive(LinkDrive::new(&rows)?))
        }
    }
}

/// The drive of the press with an upper die.
///
/// # Refuses
/// A full-revolution clutch; figures that are missing, all of them by name; figures that make no drive.
pub fn drive_of(press: &Press, upper_die: Mass, counterbalance: Option<Pressure>) -> Result<Drive, PredictionRefusal> {
    if matches!(press.clutch, Clutch::FullRevolution { .. }) {
        return Err(PredictionRefusal::FullRevolution);
    }
    let nothing = PredictionData::default();
    let data = press.prediction.as_ref().unwrap_or(&nothing);
    let kinematics = kinematics_of(press);
    let mut asked = Asked::default();
    if let Err(PredictionRefusal::Missing(names)) = &kinematics {
        asked.missing.extend(names);
    }
    let slide_mass_kg = asked.or_missing("slide mass", data.slide_mass, Mass::to_f64);
    let reduced_inertia_kg_m2 = asked.or_missing("inertia at the crank", data.inertia, Inertia::to_f64);
    let entered = match data.counterbalance {
        Lift::Cylinders { pressure, area } => Lift::Cylinders { pressure: counterbalance.or(pressure), area },
        other => other,
    };
    let lift = entered.as_motion().unwrap_or_else(|| {
        asked.missing.push(match entered {
            Lift::NotStated | Lift::None => "counterbalance (none is an answer)",
            Lift::Force(_) => "counterbalance force",
            Lift::Cylinders { .. } => "counterbalance pressure and piston area",
        });
        Counterbalance::None
    });
    let friction_torque_nm = asked.or_missing("running friction (0 is cautious)", data.friction, newton_metres);
    asked.done()?;
    Ok(Drive::new(DriveData {
        kinematics: kinematics?,
        reduced_inertia_kg_m2,
        slide_mass_kg,
        upper_die_mass_kg: upper_die.to_f64(),
        counterbalance: lift,
        friction_torque_nm,
    })?)
}

/// The brake of the press.
///
/// # Refuses
/// Figures that are missing, all of them by name; figures that make no brake.
pub fn brake_of(press: &Press) -> Result<Brake, PredictionRefusal> {
    match press.prediction.as_ref().map_or(BrakeData::NotStated, |data| data.brake) {
        BrakeData::NotStated => Err(PredictionRefusal::Missing(vec!["kind of brake"])),
        BrakeData::Ramp(ramp) => {
            let mut asked = Asked::default();
            let dead_time_s = asked.or_missing("dead time", ramp.dead_time, seconds);
            let rise_time_s = asked.or_missing("rise time", ramp.rise_time, seconds);
            let torque_nm = asked.or_missing("brake torque", ramp.torque, newton_metres);
            asked.done()?;
            Ok(Brake::Ramp(RampBrake::new(dead_time_s, rise_time_s, torque_nm)?))
        }
        BrakeData::Pressure(pressure) => {
            let mut asked = Asked::default();
            let dead_time_s = asked.or_missing("dead time", pressure.dead_time, seconds);
            let torque_nm = asked.or_missing("brake torque", pressure.torque, newton_metres);
            let shape = shape_of(&pressure, dead_time_s, torque_nm, &mut asked);
            asked.done()?;
            Ok(Brake::Pressure(PressureBrake::new(shape)?))
        }
    }
}

/// The pressures and time constants of a brake whose dead time and torque a fit looks for.
///
/// # Refuses
/// Figures that are missing, all of them by name.
pub(super) fn pressures_of(pressure: &PressureData) -> Result<PressureBrakeData, PredictionRefusal> {
    let mut asked = Asked::default();
    let shape = shape_of(pressure, 0.0, 1.0, &mut asked);
    asked.done()?;
    Ok(shape)
}

fn shape_of(pressure: &PressureData, dead_time_s: f64, torque_nm: f64, asked: &mut Asked) -> PressureBrakeData {
    let fast = asked.or_missing("time constant of the normal stop", pressure.fast, seconds);
    let exhaust = match pressure.metered {
        None => Exhaust::SingleStage { time_constant_s: fast },
        Some(metered) => Exhaust::TwoStage {
            fast_time_constant_s: fast,
            metered_time_constant_s: asked.or_missing("time constant of the metered stage", metered.slow, seconds),
            metered_from_pa: asked.or_missing("pressure at which metering begins", metered.from, pascals),
            metered_to_pa: asked.or_missing("pressure at which metering ends", metered.to, pascals),
        },
    };
    PressureBrakeData {
        full_torque_nm: torque_nm,
        dead_time_s,
        operating_pressure_pa: asked.or_missing("operating pressure of the brake", pressure.engaged, pascals),
        clutch_release_pressure_pa: asked.or_missing("clutch release pressure", pressure.clutch_release, pascals),
        touch_pressure_pa: asked.or_missing("pressure at brake contact", pressure.touch, pascals),
        exhaust,
        emergency_time_constant_s: asked.or_missing("time constant of the emergency stop", pressure.dump, seconds),
    }
}

/// Everything a predicted stop depends on.
///
/// # Refuses
/// As [`drive_of`] and [`brake_of`]; what both miss is said together.
pub fn setup_of(press: &Press, at: &At) -> Result<StopSetup, PredictionRefusal> {
    let (drive, brake) = (drive_of(press, at.upper_die, at.counterbalance), brake_of(press));
    if let (Err(PredictionRefusal::Missing(of_drive)), Err(PredictionRefusal::Missing(of_brake))) = (&drive, &brake) {
        return Err(PredictionRefusal::Missing(of_drive.iter().chain(of_brake).copied().collect()));
    }
    Ok(StopSetup { drive: drive?, brake: brake?, path: motion_path(at.path), command: at.command()? })
}

/// The start angle of the closing half, in whole degrees, from which the stop of a setup takes longest, and that stop.
///
/// # Refuses
/// If the stop from any of these angles is refused: a cell without a figure is worse than every figure.
pub fn worst_of_closing_half(setup: &StopSetup) -> Result<(StopSetup, Stop), PredictionRefusal> {
    let speed_rad_s = setup.command.speed_rad_s();
    let law = setup.brake.torque_law(setup.path);
    let map = StopMap::over_one_turn(setup.drive.clone(), law, 360, vec![speed_rad_s], Tolerance::STANDARD)?;
    let last =
        libm::floor(setup.drive.kinematics().bottom_dead_centre_rad() * (180.0 / core::f64::consts::PI)) as usize;
    let rows = map.map_rows(0..(last + 1).min(360), |_| crate::motion::GoOn::Yes)?;
    match map.worst(&rows, AngleRange::ClosingHalf)? {
        WorstCell::Longest(worst) => {
            let command = StopCommand::new(worst.start_angle_rad, speed_rad_s)?;
            let found = StopSetup { command, ..setup.clone() };
            let stop = found.stop(Tolerance::STANDARD)?;
            Ok((found, stop))
        }
        WorstCell::Refused { refusal, .. } => Err(refusal.into()),
    }
}

#[cfg(test)]
pub(super) mod tests {
    use super::*;
    use crate::prediction::RampData;
    use crate::press::{Clutch, ClutchMedium, Frame};
    use crate::units::Force;

    /// A press without anything but a part-revolution clutch.
    pub fn bare_press() -> Press {
        Press {
            tag: "P-01".into(),
            description: String::new(),
            serial: String::new(),
            location: String::new(),
            force_n: None,
            frame: Frame::CFrame,
            clutch: Clutch::PartRevolution(ClutchMedium::Air),
            drive: DriveKind::Crank,
            stroke: None,
            rod: None,
            fastest_speed: None,
            slowest_speed: None,
            heaviest_die: None,
            conformity: None,
            control_response: None,
            monitor: None,
            safeguards: Vec::new(),
            stop_tests: Vec::new(),
            reference: None,
            readings: Vec::new(),
            prediction: None,
            events: Vec::new(),
        }
    }

    /// Drive A with ramp brake R, whose stops an independent eighth-order solver gives.
    pub fn press_a() -> Press {
        Press {
            stroke: Some(Length::mm(150)),
            rod: Some(Length::mm(600)),
            prediction: Some(PredictionData {
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
            }),
            ..bare_press()
        }
    }

    pub fn at(angle: i64, speed: i64, die_kg: i64) -> At {
        At {
            angle: Angle::deg(angle),
            speed: Rate::per_min(speed),
            upper_die: Mass::from_base(die_kg * 1000),
            counterbalance: None,
            path: stop_test::StopPath::Normal,
        }
    }

    /// Scipy's DOP853 at rtol 1e-11 gives these stops of drive A with brake R.
    #[test]
    fn entered_figures_give_the_stops_of_an_independent_solver() {
        for (angle, speed, ms, deg, mm) in [(90, 40, 101.2124, 19.8453, 24.9169), (60, 60, 115.5129, 32.9590, 42.5390)]
        {
            let stop = setup_of(&press_a(), &at(angle, speed, 300)).unwrap().stop(Tolerance::STANDARD).unwrap();
            assert!((stop.stop_time_s * 1e3 - ms).abs() < 6e-5);
            assert!((stop.stop_angle_rad.to_degrees() - deg).abs() < 6e-5);
            assert!((stop.slide_travel_m * 1e3 - mm).abs() < 6e-5);
        }
    }

    #[test]
    fn everything_missing_is_said_at_once() {
        let words = setup_of(&bare_press(), &at(90, 40, 0)).unwrap_err().to_string();
        for name in ["stroke", "connecting rod", "slide mass", "inertia", "counterbalance", "friction", "kind of brake"]
        {
            assert!(words.contains(name), "{words}");
        }
        let full = Press { clutch: Clutch::FullRevolution { engaging_points: 4 }, ..press_a() };
        assert_eq!(setup_of(&full, &at(90, 40, 0)).unwrap_err(), PredictionRefusal::FullRevolution);
    }

    #[test]
    fn the_worst_angle_is_no_better_than_any_other_of_the_closing_half() {
        let setup = setup_of(&press_a(), &at(90, 60, 300)).unwrap();
        let (_, worst) = worst_of_closing_half(&setup).unwrap();
        for angle in [45, 60, 90, 120, 150] {
            let stop = setup_of(&press_a(), &at(angle, 60, 300)).unwrap().stop(Tolerance::STANDARD).unwrap();
            assert!(stop.stop_time_s <= worst.stop_time_s);
        }
    }
}
