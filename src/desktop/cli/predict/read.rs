//! From arguments to a checked drive and brake; every refusal at once.

use std::fmt::Display;
use std::path::Path;

use calc::motion::{
    Brake, Counterbalance, Drive, DriveData, Exhaust, Kinematics, LinkDrive, PressureBrake, PressureBrakeData,
    RampBrake, SliderCrank, TorqueLaw, TravelRow, rad_from_deg,
};
use calc::plant_settings::PlantSettings;
use calc::prediction::{BrakeData, PredictionData, PredictionRefusal, brake_of, kinematics_of, motion_path};
use calc::press::{Clutch, DriveKind, Press};
use calc::stop_test;
use calc::units::Mass;

use super::super::args::{DriveArgs, PathArg};

const BAR: f64 = 1.0e5;

/// Gathers refusals.
#[derive(Default)]
pub struct Reader {
    pub refusals: Vec<String>,
}

impl Reader {
    /// A plain decimal number; point and comma are both decimal marks. Its range is judged by the stop model.
    pub fn number(&mut self, text: &str, name: &str) -> Option<f64> {
        let plain = text.trim().replace(',', ".");
        let is_plain =
            plain.chars().enumerate().all(|(index, c)| c.is_ascii_digit() || c == '.' || (c == '-' && index == 0));
        let value = plain.parse::<f64>().ok().filter(|value| is_plain && value.is_finite());
        if value.is_none() {
            self.refusals.push(format!(
                "{name} is {text}. It must be a number. Type digits with at most one decimal point or comma."
            ));
        }
        value
    }

    pub fn optional(&mut self, text: Option<&String>, name: &str, otherwise: f64) -> Option<f64> {
        text.map_or(Some(otherwise), |text| self.number(text, name))
    }

    pub fn needed(&mut self, text: Option<&String>, name: &str, option: &str) -> Option<f64> {
        if text.is_none() {
            self.refusals.push(format!("{name} is not given. Add {option}."));
        }
        text.and_then(|text| self.number(text, name))
    }

    /// Takes over a result, or notes why there is none.
    pub fn take<T, E: Display>(&mut self, result: Result<T, E>) -> Option<T> {
        result.map_err(|refusal| self.refusals.push(refusal.to_string())).ok()
    }
}

/// The press file that was named, if one was.
pub fn press(args: &DriveArgs, reader: &mut Reader) -> Option<(PlantSettings, Press)> {
    let path = args.press.as_ref()?;
    reader.take(plant::open_press_file(path))
}

/// Whether the press gives the whole drive and brake, so that its own stop tests speak of them.
pub fn is_all_of_press(args: &DriveArgs) -> bool {
    args.press.is_some()
        && args.link_table.is_none()
        && [&args.stroke_mm, &args.rod_mm, &args.moving_kg, &args.inertia_kgm2, &args.counterbalance_n]
            .into_iter()
            .chain([&args.friction_nm, &args.brake_ramp, &args.brake_pressure])
            .all(Option::is_none)
}

/// What the press file knows of its drive and brake.
pub fn known(press: Option<&Press>) -> Option<&PredictionData> {
    press.and_then(|press| press.prediction.as_ref())
}

/// The drive. What is not given comes from the press; with its slide comes its heaviest upper die, or the one that is given.
pub fn drive(args: &DriveArgs, press: Option<&Press>, reader: &mut Reader) -> Option<Drive> {
    let of_press = known(press).and_then(|data| data.slide_mass).map(Mass::to_f64);
    let slide = match (&args.moving_kg, of_press) {
        (None, Some(slide)) => Some(slide),
        (text, _) => reader.needed(text.as_ref(), "Moving mass", "--moving-kg"),
    };
    let heaviest = press.and_then(|press| press.heaviest_die).map(Mass::to_f64);
    let upper_die = match (&args.moving_kg, &args.die_kg, heaviest) {
        (Some(_), _, _) => Some(0.0),
        (None, None, Some(heaviest)) => Some(heaviest),
        (None, None, None) if slide.is_none() => None,
        (None, text, _) => reader.needed(text.as_ref(), "Upper die mass", "--die-kg"),
    };
    if press.is_some_and(|press| matches!(press.clutch, Clutch::FullRevolution { .. })) {
        reader.refusals.push(PredictionRefusal::FullRevolution.to_string());
    }
    drive_with(args, press, (slide, upper_die), reader)
}

/// The drive with a slide and an upper die of their own.
pub fn drive_with(
    args: &DriveArgs,
    press: Option<&Press>,
    (slide, upper_die): (Option<f64>, Option<f64>),
    reader: &mut Reader,
) -> Option<Drive> {
    let kinematics = kinematics(args, press, reader);
    let of_press = known(press);
    let inertia = match (&args.inertia_kgm2, of_press.and_then(|data| data.inertia)) {
        (None, Some(inertia)) => Some(inertia.to_f64()),
        (text, _) => reader.needed(text.as_ref(), "Inertia", "--inertia-kgm2"),
    };
    let of_press_friction = of_press.and_then(|data| data.friction).map_or(0.0, |torque| torque.to_f64());
    let friction = reader.optional(args.friction_nm.as_ref(), "Running friction", of_press_friction);
    let counterbalance = match (&args.counterbalance_n, of_press.and_then(|data| data.counterbalance.as_motion())) {
        (None, Some(lift)) => Some(lift),
        (text, _) => reader
            .optional(text.as_ref(), "Counterbalance force", 0.0)
            .map(|force_n| if force_n == 0.0 { Counterbalance::None } else { Counterbalance::Force { force_n } }),
    };
    reader.take(Drive::new(DriveData {
        kinematics: kinematics?,
        reduced_inertia_kg_m2: inertia?,
        slide_mass_kg: slide?,
        upper_die_mass_kg: upper_die?,
        counterbalance: counterbalance?,
        friction_torque_nm: friction?,
    }))
}

fn kinematics(args: &DriveArgs, press: Option<&Press>, reader: &mut Reader) -> Option<Kinematics> {
    if let Some(path) = &args.link_table {
        return link_table(path, reader).map(Kinematics::LinkDrive);
    }
    if let Some(press) = press
        && press.drive == DriveKind::Link
        && known(Some(press)).is_some_and(|data| !data.travel.is_empty())
        && args.stroke_mm.is_none()
        && args.rod_mm.is_none()
    {
        return reader.take(kinematics_of(press));
    }
    let of_press = |length: Option<calc::units::Length>| length.map(|length| length.to_f64());
    let stroke = match (&args.stroke_mm, press.and_then(|press| of_press(press.stroke))) {
        (None, Some(stroke)) => Some(stroke),
        (text, _) => reader.needed(text.as_ref(), "Stroke", "--stroke-mm"),
    };
    let rod = match (&args.rod_mm, press.and_then(|press| of_press(press.rod))) {
        (None, Some(rod)) => Some(rod),
        (text, _) => reader.needed(text.as_ref(), "Connecting rod", "--rod-mm"),
    };
    reader.take(SliderCrank::new(stroke? * 1e-3, rod? * 1e-3)).map(Kinematics::SliderCrank)
}

/// Rows `angle_deg,travel_mm` of a drive that is no plain crank; a head is passed over.
fn link_table(path: &Path, reader: &mut Reader) -> Option<LinkDrive> {
    let text = reader
        .take(std::fs::read_to_string(path).map_err(|error| format!("{} cannot be read: {error}.", path.display())))?;
    let mut rows = Vec::new();
    for (index, line) in text.lines().enumerate().filter(|(_, line)| !line.trim().is_empty()) {
        let cells: Vec<&str> = line.split([',', ';', '\t']).collect();
        if index == 0 && cells.iter().any(|cell| cell.chars().any(char::is_alphabetic)) {
            continue;
        }
        let [angle, travel] = cells[..] else {
            reader.refusals.push(format!(
                "Line {} of the link table has {} figures. It must have two: angle in degrees and travel in mm.",
                index + 1,
                cells.len()
            ));
            return None;
        };
        let angle = reader.number(angle, &format!("The angle in line {}", index + 1))?;
        let travel = reader.number(travel, &format!("The travel in line {}", index + 1))?;
        rows.push(TravelRow { angle_rad: rad_from_deg(angle), travel_m: travel * 1e-3 });
    }
    reader.take(LinkDrive::new(&rows))
}

/// The stop path as the press's stop tests name it.
pub fn path(args: &DriveArgs) -> stop_test::StopPath {
    match args.path {
        PathArg::Normal => stop_test::StopPath::Normal,
        PathArg::Emergency => stop_test::StopPath::Emergency,
    }
}

/// The torque law of the brake on the stop path; the brake comes from the press where none is given.
pub fn law(args: &DriveArgs, press: Option<&Press>, reader: &mut Reader) -> Option<TorqueLaw> {
    let path = motion_path(path(args));
    let of_press = press.filter(|press| known(Some(press)).is_some_and(|data| data.brake != BrakeData::NotStated));
    let brake = match (&args.brake_ramp, &args.brake_pressure) {
        (None, None) if of_press.is_some() => of_press.and_then(|press| reader.take(brake_of(press))),
        (Some(text), None) => ramp(text, reader).map(Brake::Ramp),
        (None, Some(text)) => pressure(text, reader).map(Brake::Pressure),
        _ => {
            reader
                .refusals
                .push("No brake is given. Add --brake-ramp DELAY_MS,RISE_MS,TORQUE_NM or --brake-pressure.".into());
            None
        }
    };
    brake.map(|brake| brake.torque_law(path))
}

fn ramp(text: &str, reader: &mut Reader) -> Option<RampBrake> {
    let parts: Vec<&str> = if text.contains(';') { text.split(';').collect() } else { text.split(',').collect() };
    let [delay, rise, torque] = parts[..] else {
        reader.refusals.push(format!(
            "The ramp brake has {} figures. It must have three: delay in ms, rise in ms, torque in N m.",
            parts.len()
        ));
        return None;
    };
    let delay = reader.number(delay, "Delay of the brake");
    let rise = reader.number(rise, "Rise of the brake torque");
    let torque = reader.number(torque, "Brake torque");
    reader.take(RampBrake::new(delay? * 1e-3, rise? * 1e-3, torque?))
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

fn pressure(text: &str, reader: &mut Reader) -> Option<PressureBrake> {
    let mut values = [None; KEYS.len()];
    for part in text.split([',', ';']).map(str::trim).filter(|part| !part.is_empty()) {
        let Some((key, value)) = part.split_once('=') else {
            reader.refusals.push(format!("{part} is no KEY=VALUE. The keys are {}.", KEYS.join(", ")));
            continue;
        };
        match KEYS.iter().position(|known| *known == key.trim()) {
            None => reader.refusals.push(format!("{key} is not known. The keys are {}.", KEYS.join(", "))),
            Some(index) if values[index].is_some() => {
                reader.refusals.push(format!("{key} is given twice. Give it once."))
            }
            Some(index) => values[index] = reader.number(value, KEYS[index]),
        }
    }
    for (key, value) in KEYS.iter().zip(&values) {
        if value.is_none() && !reader.refusals.iter().any(|refusal| refusal.starts_with(key)) {
            reader.refusals.push(format!("{key} of the pressure brake is not given. Add it to --brake-pressure."));
        }
    }
    let [delay, full, clutch, high, low, touch, fast, slow, dump, torque] = values;
    let (high, low) = (high? * BAR, low? * BAR);
    let exhaust = if high == low {
        Exhaust::SingleStage { time_constant_s: fast? * 1e-3 }
    } else {
        Exhaust::TwoStage {
            fast_time_constant_s: fast? * 1e-3,
            metered_time_constant_s: slow? * 1e-3,
            metered_from_pa: high,
            metered_to_pa: low,
        }
    };
    reader.take(PressureBrake::new(PressureBrakeData {
        full_torque_nm: torque?,
        dead_time_s: delay? * 1e-3,
        operating_pressure_pa: full? * BAR,
        clutch_release_pressure_pa: clutch? * BAR,
        touch_pressure_pa: touch? * BAR,
        exhaust,
        emergency_time_constant_s: dump? * 1e-3,
    }))
}
