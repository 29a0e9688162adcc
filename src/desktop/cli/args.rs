//! What can be said on the command line.

use std::path::PathBuf;

use calc::rules::RuleSetId;
use clap::{Args, Parser, Subcommand, ValueEnum};
use jiff::civil::Date;

use super::motion_args::{FitArgs, MapArgs, PredictArgs};
use crate::host::RendererChoice;

/// Stopping times of mechanical power presses to safety distances.
///
/// Without a command a window opens on PLANT-FOLDER, or on a copy of the sample presses.
#[derive(Parser, Debug)]
#[command(name = "slidehalt", version, args_conflicts_with_subcommands = true)]
pub struct Cli {
    /// What to do; a window opens when nothing is said.
    #[command(subcommand)]
    pub command: Option<Command>,

    /// The plant folder to open.
    pub plant_folder: Option<PathBuf>,

    /// What paints the window.
    #[arg(long, value_enum, default_value_t)]
    pub renderer: RendererChoice,
}

/// A command.
#[derive(Subcommand, Debug)]
pub enum Command {
    /// One line a safeguard: whether it holds. Exit 0 all hold, 1 some do not, 2 refused input.
    Check(CheckArgs),
    /// The record of a press as PDF, for signature.
    Record(RecordArgs),
    /// The distance that a rule set asks for, worked out step by step.
    Distance(Box<DistanceArgs>),
    /// Mean, spread and bounds of timed stops.
    Stops(StopsArgs),
    /// The stop that drive and brake predict: time, angle, travel. A prediction, no measurement.
    Predict(Box<PredictArgs>),
    /// Predicted stops over start angle and speed, as a table or a picture.
    Map(Box<MapArgs>),
    /// Delay and torque of the brake from the stop tests of a press.
    Fit(FitArgs),
}

/// What `check` takes.
#[derive(Args, Debug)]
pub struct CheckArgs {
    /// Plant folders and press files.
    #[arg(required = true, value_name = "PATH")]
    pub paths: Vec<PathBuf>,
    /// Another rule set than the plant's.
    #[arg(long, value_parser = rules)]
    pub rules: Option<RuleSetId>,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
    /// Take this day for today.
    #[arg(long, value_parser = date, value_name = "DATE")]
    pub on: Option<Date>,
}

/// What `record` takes.
#[derive(Args, Debug)]
pub struct RecordArgs {
    /// The press file, in the presses folder of its plant.
    #[arg(value_name = "PRESS-FILE")]
    pub press: PathBuf,
    /// Where to write the record.
    #[arg(long, value_name = "FILE.pdf")]
    pub out: PathBuf,
    /// Another rule set than the plant's.
    #[arg(long, value_parser = rules)]
    pub rules: Option<RuleSetId>,
    /// The paper.
    #[arg(long, value_enum, default_value = "a4")]
    pub paper: PaperArg,
    /// Write lengths in inches.
    #[arg(long = "in")]
    pub inches: bool,
    /// Take this day for today.
    #[arg(long, value_parser = date, value_name = "DATE")]
    pub on: Option<Date>,
}

/// The paper.
#[derive(Clone, Copy, PartialEq, Eq, Debug, ValueEnum)]
pub enum PaperArg {
    /// 210 × 297 mm.
    A4,
    /// 8.5 × 11 in.
    Letter,
}

/// What `stops` takes.
#[derive(Args, Debug)]
pub struct StopsArgs {
    /// Stopping times in ms.
    #[arg(required = true, allow_hyphen_values = true, value_name = "MS")]
    pub stops: Vec<String>,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
}

/// What `distance` takes. Parts of the response that are not given are taken as inside the stopping time.
#[derive(Args, Debug, Default)]
#[command(allow_negative_numbers = true)]
pub struct DistanceArgs {
    /// The rule set: us-1910-217, us-1910-217-h, ansi-b11-19, iso-13855-2010, iso-13855-2024, eu-press, east-asia.
    #[arg(long, value_parser = rules, required = true)]
    pub rules: Option<RuleSetId>,
    /// The safeguard: light-curtain, two-hand-control, two-hand-trip, interlocked-guard, separate-beams, horizontal-field, mat, guard-opening.
    #[arg(long, value_name = "KIND")]
    pub safeguard: String,
    /// One stopping time, ms.
    #[arg(long, value_name = "X", conflicts_with = "stops_ms")]
    pub stopping_ms: Option<String>,
    /// Several timed stops, ms, parted by commas (or by ; where the comma is the decimal mark).
    #[arg(long, value_name = "A,B,...")]
    pub stops_ms: Option<String>,
    /// Response of the sensing device, ms.
    #[arg(long, value_name = "X")]
    pub device_ms: Option<String>,
    /// Response of the interface, ms.
    #[arg(long, value_name = "X")]
    pub interface_ms: Option<String>,
    /// Response of the press control, ms.
    #[arg(long, value_name = "X")]
    pub control_ms: Option<String>,
    /// Wear allowance, or increase that the brake monitor allows, ms.
    #[arg(long, value_name = "X")]
    pub wear_ms: Option<String>,
    /// Detection capability, mm.
    #[arg(long, value_name = "X")]
    pub detection_mm: Option<String>,
    /// Height of a horizontal field, mat or single beam; of a curtain its lowest beam, mm.
    #[arg(long, value_name = "X")]
    pub height_mm: Option<String>,
    /// Height of the hazard, mm; with the upper edge it opens the way over a curtain.
    #[arg(long, value_name = "X")]
    pub hazard_height_mm: Option<String>,
    /// Height of the upper edge of a curtain, mm.
    #[arg(long, value_name = "X")]
    pub edge_height_mm: Option<String>,
    /// Heights of separate beams, mm, parted by commas.
    #[arg(long, value_name = "A,B,...")]
    pub beam_heights_mm: Option<String>,
    /// Angle of a field to the approach, degrees; 0 lies along it.
    #[arg(long, value_name = "X")]
    pub field_angle_deg: Option<String>,
    /// Opening in a guard, mm.
    #[arg(long, value_name = "X")]
    pub opening_mm: Option<String>,
    /// Its shape.
    #[arg(long, value_enum)]
    pub opening_shape: Option<ShapeArg>,
    /// Length of a slot, mm.
    #[arg(long, value_name = "X")]
    pub slot_length_mm: Option<String>,
    /// Time an interlocked guard needs to open, ms.
    #[arg(long, value_name = "X")]
    pub opening_time_ms: Option<String>,
    /// The actuators of two-hand control are shrouded.
    #[arg(long)]
    pub shrouded: bool,
    /// Slowest speed of a two-hand trip.
    #[arg(long, value_name = "X")]
    pub strokes_per_minute: Option<String>,
    /// Engaging points of a full-revolution clutch.
    #[arg(long, value_name = "N")]
    pub engaging_points: Option<String>,
    /// The curtain also starts the stroke.
    #[arg(long)]
    pub starts_stroke: bool,
    /// The press is older than the CE mark.
    #[arg(long)]
    pub before_ce: bool,
    /// Distance added for what the formula does not cover, mm.
    #[arg(long, value_name = "X")]
    pub supplement_mm: Option<String>,
    /// The installed distance, mm, to compare with.
    #[arg(long, value_name = "X")]
    pub installed_mm: Option<String>,
    /// Write lengths in inches.
    #[arg(long = "in")]
    pub inches: bool,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
}

/// The shape of an opening.
#[derive(Clone, Copy, PartialEq, Eq, Debug, ValueEnum)]
pub enum ShapeArg {
    /// Longer than wide.
    Slot,
    /// Square.
    Square,
    /// Round.
    Round,
}

fn rules(text: &str) -> Result<RuleSetId, String> {
    RuleSetId::from_key(text).ok_or_else(|| {
        let keys: Vec<&str> = RuleSetId::ALL.iter().map(|id| id.key()).collect();
        format!("the rule sets are {}", keys.join(", "))
    })
}

fn date(text: &str) -> Result<Date, String> {
    calc::calendar::parse_date("Date", text).map_err(|refusal| refusal.to_string())
}
