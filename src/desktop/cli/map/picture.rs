//! A map as a picture: start angle to the right, speed upwards, longer stops darker, cells without a figure struck out.

use std::fmt::Write as _;
use std::io::Cursor;

use calc::motion::MapCell;
use image::{ImageFormat, Rgb, RgbImage};

use super::Done;

/// The ground of cells without a figure.
const NO_FIGURE: [u8; 3] = [0x8B, 0x93, 0x98];

/// Least and greatest stop time, ms; refused where no cell has a figure.
fn range(done: &Done) -> Result<(f64, f64), String> {
    let times = done.rows.iter().flat_map(|row| &row.cells).filter_map(|cell| match cell {
        MapCell::Stop { stop_time_s, .. } => Some(stop_time_s * 1e3),
        MapCell::Refused(_) => None,
    });
    let (least, greatest) =
        times.fold((f64::INFINITY, 0.0_f64), |(least, greatest), ms| (least.min(ms), greatest.max(ms)));
    if least.is_finite() {
        return Ok((least, greatest));
    }
    let why = done.rows.first().and_then(|row| row.cells.first()).and_then(|cell| match cell {
        MapCell::Refused(refusal) => Some(refusal.to_string()),
        MapCell::Stop { .. } => None,
    });
    Err(format!("No cell of the map has a figure. {}", why.unwrap_or_default()))
}

fn colour(cell: &MapCell, (least, greatest): (f64, f64)) -> [u8; 3] {
    match cell {
        MapCell::Stop { stop_time_s, .. } => {
            let span = (greatest - least).max(f64::MIN_POSITIVE);
            figure::heat(((stop_time_s * 1e3 - least) / span) as f32)
        }
        MapCell::Refused(_) => NO_FIGURE,
    }
}

/// One block of pixels a cell, at least 720 by 360 in all.
pub fn png(done: &Done) -> Result<Vec<u8>, String> {
    let range = range(done)?;
    let (angles, speeds) = (done.rows.len(), done.speeds_per_min.len());
    let (wide, high) = (720_usize.div_ceil(angles), 360_usize.div_ceil(speeds));
    let size = |pixels: usize| u32::try_from(pixels).map_err(|_| "The map is too large for a picture.".to_owned());
    let picture = RgbImage::from_fn(size(angles * wide)?, size(speeds * high)?, |x, y| {
        let row = &done.rows[x as usize / wide];
        Rgb(colour(&row.cells[speeds - 1 - y as usize / high], range))
    });
    let mut bytes = Cursor::new(Vec::new());
    picture
        .write_to(&mut bytes, ImageFormat::Png)
        .map_err(|error| format!("The picture cannot be written: {error}."))?;
    Ok(bytes.into_inner())
}

/// With axes, scale of colours and the worst cell.
pub fn svg(done: &Done) -> Result<String, String> {
    let (least, greatest) = range(done)?;
    let (left, top, wide, high) = (70.0, 60.0, 720.0, 360.0);
    let (angles, speeds) = (done.rows.len(), done.speeds_per_min.len());
    let (cell_wide, cell_high) = (wide / angles as f64, high / speeds as f64);
    let mut out = String::new();
    let mut put = |text: String| out.push_str(&text);
    put("<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"900\" height=\"500\" viewBox=\"0 0 900 500\" font-family=\"IBM Plex Sans, sans-serif\" font-size=\"13\" fill=\"#1F2A33\">\n<rect width=\"900\" height=\"500\" fill=\"#FFFFFF\"/>\n".into());
    put(format!(
        "<text x=\"{left}\" y=\"24\" font-size=\"16\" font-weight=\"600\">Predicted stopping time, ms</text>\n"
    ));
    put(format!("<text x=\"{left}\" y=\"44\">{}</text>\n", escaped(&super::worst_words(done))));
    put("<g shape-rendering=\"crispEdges\">\n".into());
    for (column, row) in done.rows.iter().enumerate() {
        let x = left + column as f64 * cell_wide;
        for (place, cell) in row.cells.iter().enumerate() {
            let [r, g, b] = colour(cell, (least, greatest));
            let y = top + high - (place + 1) as f64 * cell_high;
            put(format!(
                "<rect x=\"{x:.3}\" y=\"{y:.3}\" width=\"{cell_wide:.3}\" height=\"{cell_high:.3}\" fill=\"#{r:02X}{g:02X}{b:02X}\"/>\n"
            ));
        }
    }
    put("</g>\n".into());
    for degrees in (0..=360).step_by(45) {
        let x = left + wide * f64::from(degrees) / 360.0;
        put(format!("<text x=\"{x}\" y=\"{}\" text-anchor=\"middle\">{degrees}</text>\n", top + high + 18.0));
    }
    put(format!(
        "<text x=\"{}\" y=\"{}\" text-anchor=\"middle\">crank angle at the stop command, °</text>\n",
        left + wide / 2.0,
        top + high + 38.0
    ));
    for (place, speed) in done.speeds_per_min.iter().enumerate() {
        let every = speeds.div_ceil(9);
        if place % every == 0 {
            let y = top + high - (place as f64 + 0.5) * cell_high + 4.0;
            put(format!("<text x=\"{}\" y=\"{y:.1}\" text-anchor=\"end\">{}</text>\n", left - 6.0, digits(*speed)));
        }
    }
    put(format!(
        "<text x=\"18\" y=\"{}\" transform=\"rotate(-90 18 {})\" text-anchor=\"middle\">strokes/min</text>\n",
        top + high / 2.0,
        top + high / 2.0
    ));
    for step in 0..60 {
        let [r, g, b] = figure::heat(f32::from(step as u8) / 59.0);
        let y = top + high - f64::from(step + 1) * high / 60.0;
        put(format!("<rect x=\"810\" y=\"{y}\" width=\"22\" height=\"6.2\" fill=\"#{r:02X}{g:02X}{b:02X}\"/>\n"));
    }
    put(format!(
        "<text x=\"838\" y=\"{}\">{greatest:.1}</text>\n<text x=\"838\" y=\"{}\">{least:.1}</text>\n",
        top + 10.0,
        top + high
    ));
    put(format!("<text x=\"{left}\" y=\"488\">{}</text>\n</svg>\n", escaped(super::CAUTION)));
    Ok(out)
}

fn digits(value: f64) -> String {
    let mut text = String::new();
    let _ = write!(text, "{value:.2}");
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

fn escaped(text: &str) -> String {
    text.replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;")
}
