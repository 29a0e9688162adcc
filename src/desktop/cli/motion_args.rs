//! What `predict`, `map` and `fit` take.

use std::path::PathBuf;

use clap::{Args, ValueEnum};

/// Drive, brake and stop path; what is not given comes from the press.
#[derive(Args, Debug, Default)]
#[command(allow_negative_numbers = true)]
pub struct MotionArgs {
    /// A press file that gives what the options leave open.
    #[arg(value_name = "PRESS-FILE")]
    pub press: Option<PathBuf>,
    /// Stroke of a crank drive, mm.
    #[arg(long, value_name = "X")]
    pub stroke_mm: Option<String>,
    /// Connecting rod between its bearing centres, mm.
    #[arg(long, value_name = "X")]
    pub rod_mm: Option<String>,
    /// Everything that moves with the slide: slide, share of the rod, upper die, kg.
    #[arg(long, value_name = "X")]
    pub moving_kg: Option<String>,
    /// Another upper die than the heaviest of the press, kg.
    #[arg(long, value_name = "X", conflicts_with = "moving_kg", requires = "press")]
    pub die_kg: Option<String>,
    /// Crank, gears and driven clutch parts reduced to the crank, kg m².
    #[arg(long, value_name = "X")]
    pub inertia_kgm2: Option<String>,
    /// Upward force of the counterbalance, N; 0 for none.
    #[arg(long, value_name = "X")]
    pub counterbalance_n: Option<String>,
    /// Running friction at the crank, N m; 0 is the cautious side.
    #[arg(long, value_name = "X")]
    pub friction_nm: Option<String>,
    /// A brake known by two times.
    #[arg(long, value_name = "DELAY_MS,RISE_MS,TORQUE_NM", conflicts_with = "brake_pressure")]
    pub brake_ramp: Option<String>,
    /// A fluid-released brake: delay-ms, full-bar, clutch-bar, high-bar, low-bar, touch-bar, fast-ms, slow-ms, dump-ms, torque-nm.
    ///
    /// Without high-bar, low-bar and slow-ms, or with high-bar equal to low-bar, it has a single stage. dump-ms is the time constant of
    /// the emergency stop, the others are those of the normal stop.
    #[arg(long, value_name = "KEY=VALUE,...")]
    pub brake_pressure: Option<String>,
    /// Which stop is called for; a brake known by two times makes no difference.
    #[arg(long, value_enum)]
    pub path: Option<PathArg>,
}

/// The stop path.
#[derive(Clone, Copy, PartialEq, Eq, Debug, ValueEnum)]
pub enum PathArg {
    /// The stop of every stroke.
    Normal,
    /// The emergency stop.
    Emergency,
}

/// What `predict` takes.
#[derive(Args, Debug, Default)]
#[command(allow_negative_numbers = true)]
pub struct PredictArgs {
    /// Drive and brake.
    #[command(flatten)]
    pub motion: MotionArgs,
    /// Strokes per minute.
    #[arg(long, value_name = "X", required = true)]
    pub speed: Option<String>,
    /// Crank angle at the stop command, degrees from top dead centre.
    #[arg(long, value_name = "X", required = true)]
    pub angle: Option<String>,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
}

/// What `map` takes.
#[derive(Args, Debug, Default)]
#[command(allow_negative_numbers = true)]
pub struct MapArgs {
    /// Drive and brake.
    #[command(flatten)]
    pub motion: MotionArgs,
    /// Strokes per minute from the first to the last by a step; the press's slowest to fastest in 60 steps where it gives both.
    #[arg(long, value_name = "FROM,TO,STEP")]
    pub speeds: Option<String>,
    /// Start angles in one turn; 360 is one for each degree.
    #[arg(long, value_name = "N", default_value_t = 360)]
    pub angles: usize,
    /// Where to write it: a table (.csv) or a picture (.png, .svg).
    #[arg(long, value_name = "FILE.csv|.png|.svg")]
    pub out: PathBuf,
}

/// What `fit` takes.
#[derive(Args, Debug)]
pub struct FitArgs {
    /// The press file, with drive, brake build-up and stop tests.
    #[arg(value_name = "PRESS-FILE")]
    pub press: PathBuf,
    /// Which stop path's tests.
    #[arg(long, value_enum, default_value = "normal")]
    pub path: PathArg,
    /// Look for the running friction as well.
    #[arg(long)]
    pub friction: bool,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
}
