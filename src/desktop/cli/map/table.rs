//! A map as comma-separated values: one line a cell.

use calc::motion::MapCell;

use super::Done;

/// The table. A cell without a figure has empty fields and the reason behind them.
pub fn csv(done: &Done) -> String {
    let mut text = String::from("angle_deg,speed_per_min,stop_time_ms,stop_angle_deg,slide_travel_mm,refusal\n");
    for row in &done.rows {
        let angle = row.start_angle_rad.to_degrees();
        for (speed, cell) in done.speeds_per_min.iter().zip(&row.cells) {
            let line = match cell {
                MapCell::Stop { stop_time_s, stop_angle_rad, slide_travel_m } => format!(
                    "{angle},{speed},{},{},{},\n",
                    stop_time_s * 1e3,
                    stop_angle_rad.to_degrees(),
                    slide_travel_m * 1e3
                ),
                MapCell::Refused(refusal) => {
                    format!("{angle},{speed},,,,\"{}\"\n", refusal.to_string().replace('"', "\"\""))
                }
            };
            text.push_str(&line);
        }
    }
    text
}
