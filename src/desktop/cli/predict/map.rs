//! `slidehalt map`: stop time over start angle and speed, as CSV, SVG or PNG.

use std::fmt::Write as _;

use calc::motion::{AngleRange, MapCell, MapRow, StopMap, Tolerance, WorstCell, rad_s_from_per_min};
use calc::press::Press;

use super::super::Outcome;
use super::super::args::MapArgs;
use super::CAUTION;
use super::read::{Reader, drive, law, press};
use crate::stop_map::{MapWatch, all_rows};

const ANGLES: usize = 360;

pub fn map(args: &MapArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let mut reader = Reader::default();
    let opened = press(&args.drive, &mut reader);
    let of_press = opened.as_ref().map(|opened| &opened.1);
    let drive = drive(&args.drive, of_press, &mut reader);
    let law = law(&args.drive, of_press, &mut reader);
    let speeds = speeds(args, of_press, &mut reader);
    let in_rad_s = speeds.iter().map(|speed| rad_s_from_per_min(*speed)).collect();
    let map = match (drive, law) {
        (Some(drive), Some(law)) if reader.refusals.is_empty() => {
            reader.take(StopMap::over_one_turn(drive, law, ANGLES, in_rad_s, Tolerance::STANDARD))
        }
        _ => None,
    };
    let rows = map.as_ref().and_then(|map| reader.take(all_rows(map, &MapWatch::default())));
    let (Some(map), Some(rows)) = (map, rows) else {
        reader.refusals.iter().for_each(|refusal| outcome.refuse(refusal));
        return outcome;
    };
    let bytes = match args.out.extension().and_then(|ending| ending.to_str()) {
        Some("csv") => Ok(csv(&rows, &speeds).into_bytes()),
        Some("svg") => Ok(svg(&rows, &speeds).into_bytes()),
        Some("png") => png(&rows, &speeds),
        _ => Err(format!("{} has no known ending. It must end in .csv, .svg or .png.", args.out.display())),
    };
    let written = bytes.and_then(|bytes| plant::write_whole(&args.out, &bytes).map_err(|refusal| refusal.to_string()));
    match written {
        Ok(()) => {
            outcome.line(format!("Map of {} stops written to {}.", rows.len() * speeds.len(), args.out.display()));
            if let Ok(worst) = map.worst(&rows, AngleRange::ClosingHalf) {
                outcome.line(worst_words(&worst));
            }
            outcome.line(CAUTION);
        }
        Err(why) => outcome.refuse(why),
    }
    outcome
}

/// The speeds as given, or 60 over the speeds in use.
fn speeds(args: &MapArgs, press: Option<&Press>, reader: &mut Reader) -> Vec<f64> {
    if let Some(text) = &args.speeds {
        return text.split([',', ';']).filter_map(|text| reader.number(text, "Speed")).collect();
    }
    match press.and_then(|press| Some((press.slowest_speed?.to_f64(), press.fastest_speed?.to_f64()))) {
        Some((slowest, fastest)) => {
            (0..60).map(|step| slowest + (fastest - slowest) * f64::from(step) / 59.0).collect()
        }
        None => {
            reader.refusals.push("No speeds are given. Add --speeds A,B,... in strokes a minute.".into());
            Vec::new()
        }
    }
}

fn worst_words(worst: &WorstCell) -> String {
    let place = |angle_rad: f64, speed_rad_s: f64| {
        let speed = (speed_rad_s * 60.0 / std::f64::consts::TAU * 1e6).round() / 1e6;
        format!("begun at {:.0}° and {speed} strokes/min", angle_rad.to_degrees())
    };
    match worst {
        WorstCell::Longest(stop) => format!(
            "Longest stop of the closing half: {:.1} ms, {}.",
            stop.stop_time_s * 1e3,
            place(stop.start_angle_rad, stop.speed_rad_s)
        ),
        WorstCell::Refused { start_angle_rad, speed_rad_s, refusal } => {
            format!("No figure in the closing half, {}: {refusal}", place(*start_angle_rad, *speed_rad_s))
        }
    }
}

fn csv(rows: &[MapRow], speeds: &[f64]) -> String {
    let mut text = String::from("angle_deg,speed_per_min,stop_time_ms,stop_angle_deg,slide_travel_mm,refusal\n");
    for row in rows {
        for (cell, speed) in row.cells.iter().zip(speeds) {
            let angle = (row.start_angle_rad.to_degrees() * 1e6).round() / 1e6;
            let _ = match cell {
                MapCell::Stop { stop_time_s, stop_angle_rad, slide_travel_m } => writeln!(
                    text,
                    "{angle},{speed},{},{},{},",
                    stop_time_s * 1e3,
                    stop_angle_rad.to_degrees(),
                    slide_travel_m * 1e3
                ),
                MapCell::Refused(refusal) => {
                    writeln!(text, "{angle},{speed},,,,\"{}\"", refusal.to_string().replace('"', "'"))
                }
            };
        }
    }
    text
}

fn time_of(cell: &MapCell) -> Option<f64> {
    match cell {
        MapCell::Stop { stop_time_s, .. } => Some(*stop_time_s),
        MapCell::Refused(_) => None,
    }
}

/// From pale for the shortest stop to ink blue for the longest; what has no figure is red. Lightness alone tells the order.
fn colour(time: Option<f64>, least: f64, most: f64) -> [u8; 3] {
    const PALE: [f64; 3] = [242.0, 239.0, 230.0];
    const DEEP: [f64; 3] = [31.0, 61.0, 92.0];
    let Some(time) = time else { return [179, 38, 30] };
    let share = if most > least { (time - least) / (most - least) } else { 0.0 };
    let mut mixed = [0; 3];
    for (channel, (pale, deep)) in mixed.iter_mut().zip(PALE.iter().zip(DEEP)) {
        *channel = (pale + (deep - pale) * share).round() as u8;
    }
    mixed
}

fn range(rows: &[MapRow]) -> (f64, f64) {
    let times = rows.iter().flat_map(|row| row.cells.iter().filter_map(time_of));
    times.fold((f64::INFINITY, f64::NEG_INFINITY), |(least, most), time| (least.min(time), most.max(time)))
}

fn svg(rows: &[MapRow], speeds: &[f64]) -> String {
    let (least, most) = range(rows);
    let (width, cell) = (2, 8);
    let (left, top) = (70, 34);
    let height = speeds.len() * cell;
    let mut text = format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"{}\" height=\"{}\" font-family=\"sans-serif\" font-size=\"11\">\n\
         <text x=\"{left}\" y=\"16\">Predicted stopping time, {:.1} ms (pale) to {:.1} ms (dark); red: no figure</text>\n",
        left + ANGLES * width + 20,
        top + height + 34,
        least * 1e3,
        most * 1e3
    );
    for (column, row) in rows.iter().enumerate() {
        for (index, map_cell) in row.cells.iter().enumerate() {
            let [r, g, b] = colour(time_of(map_cell), least, most);
            let y = top + (speeds.len() - 1 - index) * cell;
            let x = left + column * width;
            let _ = writeln!(
                text,
                "<rect x=\"{x}\" y=\"{y}\" width=\"{width}\" height=\"{cell}\" fill=\"rgb({r},{g},{b})\"/>"
            );
        }
    }
    for degrees in [0, 90, 180, 270] {
        let _ = writeln!(text, "<text x=\"{}\" y=\"{}\">{degrees}°</text>", left + degrees * width, top + height + 16);
    }
    if let (Some(first), Some(last)) = (speeds.first(), speeds.last()) {
        let _ = writeln!(text, "<text x=\"4\" y=\"{}\">{first}/min</text>", top + height);
        let _ = writeln!(text, "<text x=\"4\" y=\"{}\">{last}/min</text>", top + 10);
    }
    text.push_str("</svg>\n");
    text
}

fn png(rows: &[MapRow], speeds: &[f64]) -> Result<Vec<u8>, String> {
    let (least, most) = range(rows);
    let cell = 8;
    let size = (ANGLES as u32 * 2, (speeds.len() * cell) as u32);
    let picture = image::RgbImage::from_fn(size.0, size.1, |x, y| {
        let index = speeds.len() - 1 - y as usize / cell;
        image::Rgb(colour(time_of(&rows[x as usize / 2].cells[index]), least, most))
    });
    let mut bytes = std::io::Cursor::new(Vec::new());
    picture
        .write_to(&mut bytes, image::ImageFormat::Png)
        .map_err(|error| format!("The picture cannot be made: {error}."))?;
    Ok(bytes.into_inner())
}
