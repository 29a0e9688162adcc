//! The command line: the same results as the window, for scripts, for machines without a display, and for paper.

mod args;
mod check;
mod distance;
mod fit;
mod json;
mod map;
mod motion_args;
mod outcome;
mod predict;
mod record;
mod stops;
mod window;

use std::process::ExitCode;

use clap::Parser;

pub use args::{Cli, Command};
pub use outcome::Outcome;

/// Reads the command line and does what it says.
pub fn main() -> ExitCode {
    let cli = Cli::parse();
    match cli.command {
        None => window::open(cli.plant_folder.as_deref(), cli.renderer),
        Some(command) => run(command).print(),
    }
}

/// Carries out a command; what it would print and its exit code.
pub fn run(command: Command) -> Outcome {
    match command {
        Command::Check(args) => check::check(&args),
        Command::Record(args) => record::record(&args),
        Command::Distance(args) => distance::distance(&args),
        Command::Stops(args) => stops::stops(&args),
        Command::Predict(args) => predict::predict(&args),
        Command::Map(args) => map::map(&args),
        Command::Fit(args) => fit::fit(&args),
    }
}

/// Today, by the computer's clock: read here and in the window's start, and nowhere else.
pub(crate) fn today() -> jiff::civil::Date {
    jiff::ZonedDateTime::now().date()
}
