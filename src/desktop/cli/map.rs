//! `slidehalt map`: predicted stops over start angle and speed, as a table or a picture.

mod picture;
mod table;

use calc::motion::{AngleRange, MapRow, StopMap, Tolerance, WorstCell, rad_s_from_per_min};
use calc::refusal::Refusal;
use calc::units::Rate;

use super::Outcome;
use super::motion_args::MapArgs;
use super::predict::CAUTION;
use super::predict::read::{self, Motion};
use crate::stop_map::{MapWatch, all_rows};

/// A map that is worked out.
struct Done {
    map: StopMap,
    speeds_per_min: Vec<f64>,
    rows: Vec<MapRow>,
}

pub fn map(args: &MapArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let write: fn(&Done) -> Result<Vec<u8>, String> = match args.out.extension().and_then(|end| end.to_str()) {
        Some("csv") => |done| Ok(table::csv(done).into_bytes()),
        Some("svg") => |done| picture::svg(done).map(String::into_bytes),
        Some("png") => picture::png,
        _ => {
            let given = args.out.display().to_string();
            let refusal = Refusal::new(
                "The file of the map",
                given,
                "a name that ends in .csv, .png or .svg",
                "Correct the name.",
            );
            outcome.refuse(refusal.to_string());
            return outcome;
        }
    };
    let found = read::read(&args.motion).and_then(|motion| done(args, &motion).map_err(|refusal| vec![refusal]));
    let done = match found {
        Ok(done) => done,
        Err(refusals) => {
            for refusal in refusals {
                outcome.refuse(refusal);
            }
            return outcome;
        }
    };
    let written =
        write(&done).and_then(|bytes| plant::write_whole(&args.out, &bytes).map_err(|refusal| refusal.to_string()));
    match written {
        Ok(()) => {
            let cells = done.rows.len() * done.speeds_per_min.len();
            outcome.line(format!("{cells} predicted stops written to {}.", args.out.display()));
            outcome.line(worst_words(&done));
            outcome.line(CAUTION);
        }
        Err(refusal) => outcome.refuse(refusal),
    }
    outcome
}

fn done(args: &MapArgs, motion: &Motion) -> Result<Done, String> {
    let speeds_per_min = speeds(args, motion)?;
    let speeds = speeds_per_min.iter().map(|speed| rad_s_from_per_min(*speed)).collect();
    let law = motion.brake.torque_law(motion.path);
    let words = |refusal: calc::motion::MotionRefusal| refusal.to_string();
    let map =
        StopMap::over_one_turn(motion.drive.clone(), law, args.angles, speeds, Tolerance::STANDARD).map_err(words)?;
    let rows = all_rows(&map, &MapWatch::default()).map_err(words)?;
    Ok(Done { map, speeds_per_min, rows })
}

fn speeds(args: &MapArgs, motion: &Motion) -> Result<Vec<f64>, String> {
    let Some(text) = &args.speeds else {
        let in_use = motion.press.as_ref().map(|opened| (opened.1.slowest_speed, opened.1.fastest_speed));
        let Some((Some(slowest), Some(fastest))) = in_use else {
            return Err("The speeds are not given. Add --speeds FROM,TO,STEP in strokes per minute.".into());
        };
        let (slowest, fastest) = (Rate::to_f64(slowest), Rate::to_f64(fastest));
        return Ok((0..60).map(|step| slowest + (fastest - slowest) * f64::from(step) / 59.0).collect());
    };
    let refuse = |allowed: &str| Refusal::new("Speeds", text, allowed, "Write such as 20,60,5.").to_string();
    let [from, to, step] = read::parts(text)[..] else {
        return Err(refuse("three figures: from, to, step in strokes per minute"));
    };
    let (from, to) = (read::number("First speed", from)?, read::number("Last speed", to)?);
    let step = read::number("Step of the speeds", step)?;
    if step <= 0.0 || to < from {
        return Err(refuse("from the slower to the faster speed by a step above 0"));
    }
    // A step that divides the range but for its last digits still reaches the end.
    let count = ((to - from) / step + 1e-9).floor() + 1.0;
    if 10_000.0 < count {
        return Err(refuse("no more than 10000 speeds"));
    }
    Ok((0..count as usize).map(|index| from + step * index as f64).collect())
}

fn worst_words(done: &Done) -> String {
    let per_min = |speed: f64| speed * 60.0 / std::f64::consts::TAU;
    match done.map.worst(&done.rows, AngleRange::ClosingHalf) {
        Ok(WorstCell::Longest(worst)) => format!(
            "Longest in the closing half: {:.3} ms from {:.2}° at {:.3} strokes/min, {:.2}° and {:.2} mm to standstill.",
            worst.stop_time_s * 1e3,
            worst.start_angle_rad.to_degrees(),
            per_min(worst.speed_rad_s),
            worst.stop_angle_rad.to_degrees(),
            worst.slide_travel_m * 1e3
        ),
        Ok(WorstCell::Refused { start_angle_rad, speed_rad_s, refusal }) => format!(
            "No figure in the closing half from {:.2}° at {:.3} strokes/min: {refusal}",
            start_angle_rad.to_degrees(),
            per_min(speed_rad_s)
        ),
        Err(refusal) => refusal.to_string(),
    }
}
