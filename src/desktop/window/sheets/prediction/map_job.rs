//! A map that is worked out in a thread beside the frames: progress, a way to stop it, and the picture when it is done.

use std::sync::Arc;
use std::sync::mpsc::{Receiver, TryRecvError, channel};

use calc::motion::{
    AngleRange, MapCell, MapRow, MotionRefusal, StopMap, StopSetup, Tolerance, WorstCell, rad_s_from_per_min,
};
use egui::{Color32, ColorImage, TextureHandle, TextureOptions};

use crate::stop_map::{MapWatch, all_rows};

/// Start angles: one for each degree.
pub const ANGLES: usize = 360;
/// Speeds.
pub const SPEEDS: usize = 60;

/// What a map is made from.
#[derive(Clone, PartialEq, Debug)]
pub struct MapOf {
    pub setup: StopSetup,
    /// Slowest and fastest speed, strokes a minute.
    pub speeds: (f64, f64),
}

impl MapOf {
    /// The speed of a row of cells.
    pub fn speed_per_min(&self, place: usize) -> f64 {
        self.speeds.0 + (self.speeds.1 - self.speeds.0) * place as f64 / (SPEEDS - 1) as f64
    }

    fn map(&self) -> Result<StopMap, MotionRefusal> {
        let speeds = (0..SPEEDS).map(|place| rad_s_from_per_min(self.speed_per_min(place))).collect();
        let law = self.setup.brake.torque_law(self.setup.path);
        StopMap::over_one_turn(self.setup.drive.clone(), law, ANGLES, speeds, Tolerance::STANDARD)
    }
}

/// A map with its picture.
pub struct MapDone {
    pub rows: Vec<MapRow>,
    pub worst: Result<WorstCell, MotionRefusal>,
    /// Least and greatest stop time, ms; `None` where no cell has a figure.
    pub range: Option<(f64, f64)>,
    texture: Option<TextureHandle>,
}

/// What the thread hands over: the rows and the worst cell of the closing half.
type Worked = Result<(Vec<MapRow>, Result<WorstCell, MotionRefusal>), MotionRefusal>;

struct Running {
    watch: Arc<MapWatch>,
    receiver: Receiver<Worked>,
}

/// The map of the sheet: none, being worked out, stopped, or done.
#[derive(Default)]
pub struct MapJob {
    of: Option<MapOf>,
    running: Option<Running>,
    found: Option<Result<MapDone, MotionRefusal>>,
    /// The cell that the keyboard stands on: angle and speed by place.
    pub cell: Option<(usize, usize)>,
    /// Slowest and fastest speed that were typed, in thousandths of a stroke a minute.
    pub speeds: Option<(i64, i64)>,
}

impl MapJob {
    /// Begins anew when what the map is made from has changed, and takes over what is done.
    pub fn follow(&mut self, context: &egui::Context, of: MapOf) {
        if self.of.as_ref() != Some(&of) {
            self.begin(context, of);
        }
        let Some(running) = &self.running else { return };
        let found = match running.receiver.try_recv() {
            Err(TryRecvError::Empty) => return,
            Err(TryRecvError::Disconnected) => Err(MotionRefusal::Stopped),
            Ok(found) => found,
        };
        self.running = None;
        self.found = Some(found.map(|(rows, worst)| {
            let range = range(&rows);
            MapDone { rows, worst, range, texture: None }
        }));
    }

    /// Begins to work a map out; an earlier one still being worked out is stopped.
    pub fn begin(&mut self, context: &egui::Context, of: MapOf) {
        self.stop();
        self.found = None;
        self.of = Some(of.clone());
        let map = match of.map() {
            Ok(map) => map,
            Err(refusal) => {
                self.found = Some(Err(refusal));
                return;
            }
        };
        let watch = Arc::new(MapWatch::default());
        let (sender, receiver) = channel();
        let (context, watched) = (context.clone(), watch.clone());
        let worker = std::thread::Builder::new().name("stop map".into()).spawn(move || {
            let found = all_rows(&map, &watched).map(|rows| {
                let worst = map.worst(&rows, AngleRange::ClosingHalf);
                (rows, worst)
            });
            // The sheet may show another press by now; then nobody wants the answer.
            let _ = sender.send(found);
            context.request_repaint();
        });
        match worker {
            Ok(_) => self.running = Some(Running { watch, receiver }),
            Err(_) => self.found = Some(Err(MotionRefusal::Stopped)),
        }
    }

    /// Stops it.
    pub fn stop(&mut self) {
        if let Some(running) = self.running.take() {
            running.watch.stop();
            self.found = Some(Err(MotionRefusal::Stopped));
        }
    }

    /// The share that is done, while it is being worked out.
    pub fn progress(&self) -> Option<f32> {
        let running = self.running.as_ref()?;
        Some(running.watch.rows_done() as f32 / ANGLES as f32)
    }

    /// The map, or why there is none.
    pub fn found(&mut self) -> Option<&mut Result<MapDone, MotionRefusal>> {
        self.found.as_mut()
    }
}

impl Drop for MapJob {
    fn drop(&mut self) {
        self.stop();
    }
}

fn range(rows: &[MapRow]) -> Option<(f64, f64)> {
    let times = rows.iter().flat_map(|row| &row.cells).filter_map(time_ms);
    let found = times.fold((f64::INFINITY, 0.0_f64), |range, ms| (range.0.min(ms), range.1.max(ms)));
    found.0.is_finite().then_some(found)
}

/// The stop time of a cell, ms.
pub fn time_ms(cell: &MapCell) -> Option<f64> {
    match cell {
        MapCell::Stop { stop_time_s, .. } => Some(stop_time_s * 1e3),
        MapCell::Refused(_) => None,
    }
}

/// The share of a time within a range.
pub fn share(ms: f64, (least, greatest): (f64, f64)) -> f32 {
    if least < greatest { ((ms - least) / (greatest - least)) as f32 } else { 0.0 }
}

impl MapDone {
    /// The picture: one pixel a cell, the fastest speed on top; cells without a figure in `no_figure`.
    pub fn texture(&mut self, context: &egui::Context, no_figure: Color32) -> &TextureHandle {
        let (rows, range) = (&self.rows, self.range);
        self.texture.get_or_insert_with(|| {
            let mut pixels = Vec::with_capacity(ANGLES * SPEEDS);
            for place in (0..SPEEDS).rev() {
                pixels.extend(rows.iter().map(|row| match (time_ms(&row.cells[place]), range) {
                    (Some(ms), Some(range)) => {
                        let [r, g, b] = figure::heat(share(ms, range));
                        Color32::from_rgb(r, g, b)
                    }
                    _ => no_figure,
                }));
            }
            let image = ColorImage::new([ANGLES, SPEEDS], pixels);
            context.load_texture("stop map", image, TextureOptions::NEAREST)
        })
    }
}
