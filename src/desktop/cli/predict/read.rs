//! From the options of `predict` and `map` to drive, brake and stop path; every refusal at once. Figures keep every digit.

use calc::motion::{
    Brake, Counterbalance, Drive, DriveData, Exhaust, Kinematics, PressureBrake, PressureBrakeData, RampBrake,
    SliderCrank, StopPath,
};
use calc::plant_settings::PlantSettings;
use calc::prediction::{PredictionRefusal, brake_of, kinematics_of};
use calc::press::{Clutch, Press};
use calc::refusal::Refusal;
use calc::units::{Inertia, Mass, Torque};

use super::super::motion_args::{MotionArgs, PathArg};

/// What moves, what stops it, and the press that it was read from.
pub struct Motion {
    pub drive: Drive,
    pub brake: Brake,
    pub path: StopPath,
    pub press: Option<(PlantSettings, Press)>,
    /// Whether the press gave everything, so that its own stop tests speak of this drive and brake.
    pub is_all_of_press: bool,
}

/// A number with all its digits; point and comma are both decimal marks.
pub fn number(name: &str, text: &str) -> Result<f64, String> {
    let plain = text.trim().replace('\u{2212}', "-").replace(',', ".");
    match plain.parse::<f64>() {
        Ok(value) if value.is_finite() => Ok(value),
        _ => Err(Refusal::new(name, text, "a number", "Write digits with a decimal point.").to_string()),
    }
}

struct Reader {
    refusals: Vec<String>,
}

impl Reader {
    fn number(&mut self, name: &str, text: Option<&String>) -> Option<f64> {
        number(name, text?).map_err(|refusal| self.refusals.push(refusal)).ok()
    }

    fn take<T, E: std::fmt::Display>(&mut self, found: Result<T, E>) -> Option<T> {
        found.map_err(|refusal| self.refusals.push(refusal.to_string())).ok()
    }

    fn missing(&mut self, name: &str, option: &str) {
        self.refusals.push(format!("{name} is not given. Add {option}, or a press file that has it."));
    }
}

/// Reads the options.
pub fn read(args: &MotionArgs) -> Result<Motion, Vec<String>> {
    let mut reader = Reader { refusals: Vec::new() };
    let press = args.press.as_ref().and_then(|path| reader.take(plant::open_press_file(path)));
    if args.press.is_some() && press.is_none() {
        return Err(reader.refusals);
    }
    let of_press = press.as_ref().map(|opened| &opened.1);
    let drive = drive(args, of_press, &mut reader);
    let path = match args.path {
        Some(PathArg::Normal) => Some(StopPath::Normal),
        Some(PathArg::Emergency) => Some(StopPath::Emergency),
        None => None,
    };
    let brake = brake(args, path, of_press, &mut reader);
    if let (Some(Brake::Pressure(_)), None) = (&brake, path) {
        reader
            .refusals
            .push("The stop path is not given. A brake known by its pressures needs it. Add --path normal or --path emergency.".into());
    }
    let is_all_of_press = press.is_some()
        && [&args.stroke_mm, &args.rod_mm, &args.moving_kg, &args.inertia_kgm2, &args.counterbalance_n]
            .into_iter()
            .chain([&args.friction_nm, &args.brake_ramp, &args.brake_pressure])
            .all(Option::is_none);
    match (drive, brake) {
        (Some(drive), Some(brake)) if reader.refusals.is_empty() => {
            Ok(Motion { drive, brake, path: path.unwrap_or(StopPath::Normal), press, is_all_of_press })
        }
        _ => Err(reader.refusals),
    }
}

fn drive(args: &MotionArgs, press: Option<&Press>, reader: &mut Reader) -> Option<Drive> {
    let die = reader.number("Upper die mass", args.die_kg.as_ref());
    let moving = reader.number("Moving mass", args.moving_kg.as_ref());
    let inertia = reader.number("Inertia", args.inertia_kgm2.as_ref());
    let counterbalance = reader.number("Counterbalance force", args.counterbalance_n.as_ref());
    let friction = reader.number("Running friction", args.friction_nm.as_ref());
    let kinematics = kinematics(args, press, reader);
    if press.is_some_and(|press| matches!(press.clutch, Clutch::FullRevolution { .. })) {
        reader.refusals.push(PredictionRefusal::FullRevolution.to_string());
    }
    let stored = press.and_then(|press| press.prediction.as_ref());
    let mut pick = |name, option, text: &Option<String>, given: Option<f64>, stored: Option<f64>| {
        if text.is_none() && stored.is_none() {
            reader.missing(name, option);
        }
        given.or(stored)
    };
    let slide = stored.and_then(|data| data.slide_mass).map(Mass::to_f64);
    let slide_mass_kg = pick("The moving mass", "--moving-kg", &args.moving_kg, moving, slide);
    let stored_inertia = stored.and_then(|data| data.inertia).map(Inertia::to_f64);
    let inertia = pick("The inertia", "--inertia-kgm2", &args.inertia_kgm2, inertia, stored_inertia);
    let stored_friction = stored.and_then(|data| data.friction).map(Torque::to_f64);
    let option = "--friction-nm (0 is the cautious side)";
    let friction = pick("The running friction", option, &args.friction_nm, friction, stored_friction);
    let lift = counterbalance
        .map(|force_n| Counterbalance::Force { force_n })
        .or_else(|| stored.and_then(|data| data.counterbalance.as_motion()));
    if args.counterbalance_n.is_none() && lift.is_none() {
        reader.missing("The counterbalance force", "--counterbalance-n (0 for none)");
    }
    let heaviest = press.and_then(|press| press.heaviest_die).map(Mass::to_f64);
    let die = match (moving, die.or(heaviest)) {
        (Some(_), _) => 0.0,
        (None, Some(die)) => die,
        (None, None) if slide_mass_kg.is_some() && args.die_kg.is_none() => {
            reader
                .refusals
                .push("The upper die is not given, and the press names no heaviest one. Add --die-kg.".into());
            0.0
        }
        (None, None) => 0.0,
    };
    if !reader.refusals.is_empty() {
        return None;
    }
    let data = DriveData {
        kinematics: kinematics?,
        reduced_inertia_kg_m2: inertia?,
        slide_mass_kg: slide_mass_kg?,
        upper_die_mass_kg: die,
        counterbalance: lift?,
        friction_torque_nm: friction?,
    };
    reader.take(Drive::new(data))
}

fn kinematics(args: &MotionArgs, press: Option<&Press>, reader: &mut Reader) -> Option<Kinematics> {
    let stroke = reader.number("Stroke", args.stroke_mm.as_ref());
    let rod = reader.number("Connecting rod", args.rod_mm.as_ref());
    if args.stroke_mm.is_none() && args.rod_mm.is_none() && press.is_some() {
        return match kinematics_of(press?) {
            Ok(found) => Some(found),
            Err(PredictionRefusal::Missing(names)) => {
                reader.refusals.push(format!("The press file lacks: {}.", names.join(", ")));
                None
            }
            Err(refusal) => {
                reader.refusals.push(refusal.to_string());
                None
            }
        };
    }
    let stored = |length: Option<calc::units::Length>| length.map(calc::units::Length::to_f64);
    let stroke_mm = stroke.or_else(|| stored(press?.stroke));
    let rod_mm = rod.or_else(|| stored(press?.rod));
    if stroke_mm.is_none() && args.stroke_mm.is_none() {
        reader.missing("The stroke", "--stroke-mm");
    }
    if rod_mm.is_none() && args.rod_mm.is_none() {
        reader.missing("The connecting rod", "--rod-mm");
    }
    let crank = reader.take(SliderCrank::new(stroke_mm? / 1e3, rod_mm? / 1e3))?;
    Some(Kinematics::SliderCrank(crank))
}

fn brake(args: &MotionArgs, path: Option<StopPath>, press: Option<&Press>, reader: &mut Reader) -> Option<Brake> {
    match (&args.brake_ramp, &args.brake_pressure, press) {
        (Some(ramp), ..) => ramp_brake(ramp, reader),
        (None, Some(pressure), _) => pressure_brake(pressure, path, reader),
        (None, None, Some(press)) => reader.take(brake_of(press)),
        (None, None, None) => {
            reader.missing("The brake", "--brake-ramp or --brake-pressure");
            None
        }
    }
}

/// Figures in a row; a comma parts them, unless a semicolon does and the comma is the decimal mark.
pub fn parts(text: &str) -> Vec<&str> {
    let mark = if text.contains(';') { ';' } else { ',' };
    text.split(mark).map(str::trim).collect()
}

fn ramp_brake(text: &str, reader: &mut Reader) -> Option<Brake> {
    let [delay, rise, torque] = parts(text)[..] else {
        reader.refusals.push(
            Refusal::new(
                "Ramp brake",
                text,
                "three figures: delay in ms, rise in ms, torque in N m",
                "Write them parted by commas, such as 45,60,4200.",
            )
            .to_string(),
        );
        return None;
    };
    let delay = reader.take(number("Delay of the ramp brake", delay));
    let rise = reader.take(number("Rise of the ramp brake", rise));
    let torque = reader.take(number("Torque of the ramp brake", torque));
    let brake = RampBrake::new(delay? / 1e3, rise? / 1e3, torque?);
    reader.take(brake).map(Brake::Ramp)
}

const KEYS: [&str; 10] = [
    "delay-ms",
    "full-bar",
    "clutch-bar",
    "high-bar",
    "low-bar",
    "touch-bar",
    "fast-ms",
    "slow-ms",
    "dump-ms",
    "torque-nm",
];

fn pressure_brake(text: &str, path: Option<StopPath>, reader: &mut Reader) -> Option<Brake> {
    let before = reader.refusals.len();
    let mut given: [Option<f64>; KEYS.len()] = [None; KEYS.len()];
    for part in parts(text) {
        let Some((key, value)) = part.split_once('=') else {
            reader
                .refusals
                .push(Refusal::new("Pressure brake", part, "KEY=VALUE", "Write such as full-bar=60.").to_string());
            continue;
        };
        let Some(place) = KEYS.iter().position(|known| *known == key.trim()) else {
            let known = KEYS.join(", ");
            reader.refusals.push(
                Refusal::new("A key of the pressure brake", key, format!("one of {known}"), "Correct the key.")
                    .to_string(),
            );
            continue;
        };
        if given[place].is_some() {
            reader.refusals.push(format!("{key} of the pressure brake is given twice. Keep one of them."));
        }
        given[place] = reader.take(number(KEYS[place], value));
    }
    let [delay, full, clutch, high, low, touch, fast, slow, dump, torque] = given;
    let mut needed = vec![("delay-ms", delay), ("full-bar", full), ("clutch-bar", clutch), ("touch-bar", touch)];
    needed.push(("torque-nm", torque));
    needed.push(if path == Some(StopPath::Emergency) { ("dump-ms", dump) } else { ("fast-ms", fast) });
    if [high, low, slow].iter().any(Option::is_some) {
        needed.extend([("high-bar", high), ("low-bar", low), ("slow-ms", slow), ("fast-ms", fast)]);
    }
    let mut absent: Vec<&str> = needed.iter().filter(|part| part.1.is_none()).map(|part| part.0).collect();
    absent.dedup();
    if reader.refusals.len() == before && !absent.is_empty() {
        reader.refusals.push(format!("The pressure brake lacks {}. Add them as KEY=VALUE.", absent.join(", ")));
    }
    if reader.refusals.len() != before {
        return None;
    }
    // The time constant of the other stop path is not used on this one; it need not be known.
    let fast_s = fast.or(dump)? / 1e3;
    let exhaust = match (high, low, slow) {
        (Some(high), Some(low), Some(slow)) if high != low => Exhaust::TwoStage {
            fast_time_constant_s: fast_s,
            metered_time_constant_s: slow / 1e3,
            metered_from_pa: high * 1e5,
            metered_to_pa: low * 1e5,
        },
        _ => Exhaust::SingleStage { time_constant_s: fast_s },
    };
    let brake = PressureBrake::new(PressureBrakeData {
        full_torque_nm: torque?,
        dead_time_s: delay? / 1e3,
        operating_pressure_pa: full? * 1e5,
        clutch_release_pressure_pa: clutch? * 1e5,
        touch_pressure_pa: touch? * 1e5,
        exhaust,
        emergency_time_constant_s: dump.or(fast)? / 1e3,
    });
    reader.take(brake).map(Brake::Pressure)
}
