//! What can be said on the command line.

use std::path::PathBuf;

use calc::rules::RuleSetId;
use clap::{Args, Parser, Subcommand, ValueEnum};
use jiff::civil::Date;

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
    /// How a press stands by its monthly readings: limits, drift, step, forecast.
    Readings(ReadingsArgs),
    /// Add one monthly reading to a press file.
    AddReading(AddReadingArgs),
    /// Add the readings of a CSV file to a press file, all or none.
    ImportReadings(ImportReadingsArgs),
    /// Write the readings of a press as CSV.
    ExportReadings(ExportReadingsArgs),
    /// What is due across a plant.
    Due(DueArgs),
    /// Predict one stop from drive data. A prediction is never a measurement.
    Predict(Box<PredictArgs>),
    /// Predict the stopping time over start angle and speed.
    Map(Box<MapArgs>),
    /// Find the delay and brake torque that explain the measured stops of a press.
    Fit(Box<FitArgs>),
}

/// What `check` takes.
#[derive(Args, Debug)]
pub struct CheckArgs {
    /// Plant folders and press files.
    #[arg(required = true, value_name = "PATH")]
    pub paths: Vec<PathBuf>,
    /// Another rule set than the plant's: us-1910-217, us-1910-217-h, ansi-b11-19, iso-13855-2010, iso-13855-2024, eu-press, east-asia.
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
    /// Where to write the record. An older PDF of that name is replaced, unless it is a kept record.
    #[arg(long, value_name = "FILE.pdf")]
    pub out: PathBuf,
    /// Another rule set than the plant's: us-1910-217, us-1910-217-h, ansi-b11-19, iso-13855-2010, iso-13855-2024, eu-press, east-asia.
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
#[command(allow_negative_numbers = true)]
pub struct StopsArgs {
    /// Stopping times in ms, parted by blanks.
    #[arg(required = true, value_name = "MS")]
    pub stops: Vec<String>,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
}

/// What `readings` takes.
#[derive(Args, Debug)]
pub struct ReadingsArgs {
    /// The press file, in the presses folder of its plant.
    #[arg(value_name = "PRESS-FILE")]
    pub press: PathBuf,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
    /// Take this day for today.
    #[arg(long, value_parser = date, value_name = "DATE")]
    pub on: Option<Date>,
}

/// What `add-reading` takes.
#[derive(Args, Debug)]
pub struct AddReadingArgs {
    /// The press file, in the presses folder of its plant.
    #[arg(value_name = "PRESS-FILE")]
    pub press: PathBuf,
    /// The day, with or without a time of day: 2026-12-01, "2026-12-01 14:30".
    #[arg(long)]
    pub date: String,
    /// The timed stops, ms, parted by commas, or by ; or blanks where the comma is the decimal mark. 187,5 alone is two stops.
    #[arg(long, value_name = "A,B,C", allow_hyphen_values = true)]
    pub stops_ms: String,
    /// Another speed than the reference condition's, strokes a minute.
    #[arg(long, value_name = "X")]
    pub speed: Option<String>,
    /// Who took it.
    #[arg(long)]
    pub by: Option<String>,
    /// Another instrument than the latest reading's.
    #[arg(long)]
    pub instrument: Option<String>,
    /// Its serial number.
    #[arg(long, requires = "instrument")]
    pub serial: Option<String>,
}

/// What `import-readings` takes.
#[derive(Args, Debug)]
pub struct ImportReadingsArgs {
    /// The press file, in the presses folder of its plant.
    #[arg(value_name = "PRESS-FILE")]
    pub press: PathBuf,
    /// One row a stop; the columns date and stop_ms must be there.
    #[arg(value_name = "FILE.csv")]
    pub csv: PathBuf,
}

/// What `export-readings` takes.
#[derive(Args, Debug)]
pub struct ExportReadingsArgs {
    /// The press file, in the presses folder of its plant.
    #[arg(value_name = "PRESS-FILE")]
    pub press: PathBuf,
}

/// What `due` takes.
#[derive(Args, Debug)]
pub struct DueArgs {
    /// The plant folder.
    #[arg(value_name = "PLANT-FOLDER")]
    pub plant: PathBuf,
    /// Take this day for today.
    #[arg(long, value_parser = date, value_name = "DATE")]
    pub on: Option<Date>,
    /// How far to look ahead.
    #[arg(long, value_enum, default_value = "month")]
    pub within: WithinArg,
    /// Write the round list, with empty boxes to write in, as PDF.
    #[arg(long, value_name = "FILE.pdf")]
    pub out: Option<PathBuf>,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
}

/// How far to look ahead.
#[derive(Clone, Copy, PartialEq, Eq, Debug, ValueEnum)]
pub enum WithinArg {
    /// To the end of this week.
    Week,
    /// To the end of this month.
    Month,
    /// Twelve months.
    Year,
}

/// What the drive of a predicted stop is made of.
#[derive(Args, Debug)]
#[command(allow_negative_numbers = true)]
pub struct DriveArgs {
    /// A press file, from which drive and brake are taken where they are not given.
    #[arg(value_name = "PRESS-FILE")]
    pub press: Option<PathBuf>,
    /// Stroke of the slide, mm.
    #[arg(long, value_name = "X")]
    pub stroke_mm: Option<String>,
    /// Connecting rod, mm.
    #[arg(long, value_name = "X")]
    pub rod_mm: Option<String>,
    /// Slide travel over angle of a drive that is no plain crank: rows of angle in degrees and travel in mm, at least 24.
    #[arg(long, value_name = "FILE.csv", conflicts_with_all = ["stroke_mm", "rod_mm"])]
    pub link_table: Option<PathBuf>,
    /// Slide with its share of the rod and the upper die (for fit: without the die), kg.
    #[arg(long, value_name = "X")]
    pub moving_kg: Option<String>,
    /// Another upper die than the heaviest of the press, kg.
    #[arg(long, value_name = "X", requires = "press", conflicts_with = "moving_kg")]
    pub die_kg: Option<String>,
    /// Crank, gears and driven clutch parts reduced to the crank, kg m².
    #[arg(long, value_name = "X")]
    pub inertia_kgm2: Option<String>,
    /// Upward force of the counterbalance, N.
    #[arg(long, value_name = "X")]
    pub counterbalance_n: Option<String>,
    /// Running friction at the crank, N m.
    #[arg(long, value_name = "X")]
    pub friction_nm: Option<String>,
    /// A brake of dead time, rise time and full torque.
    #[arg(long, value_name = "DELAY_MS,RISE_MS,TORQUE_NM", conflicts_with = "brake_pressure")]
    pub brake_ramp: Option<String>,
    /// A brake released by fluid: delay-ms, full-bar, clutch-bar, high-bar, low-bar, touch-bar, fast-ms, slow-ms, dump-ms, torque-nm.
    #[arg(long, value_name = "KEY=VALUE,...")]
    pub brake_pressure: Option<String>,
    /// Which stop is called for.
    #[arg(long, value_enum, default_value = "normal")]
    pub path: PathArg,
}

/// Which stop is called for.
#[derive(Clone, Copy, PartialEq, Eq, Debug, ValueEnum)]
pub enum PathArg {
    /// The stop of every stroke.
    Normal,
    /// The emergency stop.
    Emergency,
}

/// What `predict` takes.
#[derive(Args, Debug)]
#[command(allow_negative_numbers = true)]
pub struct PredictArgs {
    /// The drive and its brake.
    #[command(flatten)]
    pub drive: DriveArgs,
    /// Speed at the stop command, strokes a minute.
    #[arg(long, value_name = "X")]
    pub speed: Option<String>,
    /// Crank angle at the stop command, degrees.
    #[arg(long, value_name = "X")]
    pub angle: Option<String>,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
}

/// What `map` takes.
#[derive(Args, Debug)]
#[command(allow_negative_numbers = true)]
pub struct MapArgs {
    /// The drive and its brake.
    #[command(flatten)]
    pub drive: DriveArgs,
    /// Speeds, strokes a minute, parted by commas; 60 from the slowest to the fastest of the press where none are given.
    #[arg(long, value_name = "A,B,...")]
    pub speeds: Option<String>,
    /// Where to write the map: the ending decides.
    #[arg(long, value_name = "FILE.csv|.svg|.png")]
    pub out: PathBuf,
}

/// What `fit` takes.
#[derive(Args, Debug)]
#[command(allow_negative_numbers = true)]
pub struct FitArgs {
    /// The drive; its upper die is that of each stop test.
    #[command(flatten)]
    pub drive: DriveArgs,
    /// Rise time of the brake torque, ms, which is not fitted; the press gives it where it knows its brake.
    #[arg(long, value_name = "X")]
    pub rise_ms: Option<String>,
    /// Look for the running friction as well.
    #[arg(long)]
    pub friction: bool,
    /// Write JSON.
    #[arg(long)]
    pub json: bool,
}

/// What `distance` takes. Parts of the response that are not given are taken as inside the stopping time.
#[derive(Args, Debug, Default)]
#[command(allow_negative_numbers = true)]
pub struct DistanceArgs {
    /// The rule set: us-1910-217, us-1910-217-h, ansi-b11-19, iso-13855-2010, iso-13855-2024, eu-press, east-asia.
    #[arg(long, value_name = "NAME")]
    pub rules: String,
    /// The safeguard: light-curtain, two-hand-control, two-hand-trip, interlocked-guard, separate-beams, horizontal-field, mat, guard-opening.
    #[arg(long, value_name = "KIND")]
    pub safeguard: String,
    /// One stopping time, ms.
    #[arg(long, value_name = "X", conflicts_with = "stops_ms")]
    pub stopping_ms: Option<String>,
    /// Several timed stops, ms, parted by commas, or by ; or blanks where the comma is the decimal mark. 187,5 alone is two stops.
    #[arg(long, value_name = "A,B,...", allow_hyphen_values = true)]
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
    /// Heights of separate beams, mm, parted by commas (or by ; or spaces where the comma is the decimal mark).
    #[arg(long, value_name = "A,B,...", allow_hyphen_values = true)]
    pub beam_heights_mm: Option<String>,
    /// Angle of a field to the approach, degrees; 0 lies along it.
    #[arg(long, value_name = "X")]
    pub field_angle_deg: Option<String>,
    /// Opening in a fixed guard, or gap of an interlocked one before the stop is signalled, mm.
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
    /// Slowest speed of a press with two-hand trip, strokes a minute.
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
