//! The command line: the same results as the window, for scripts, for machines without a display, and for paper.

mod args;
mod check;
mod distance;
mod due;
mod figures;
mod json;
mod outcome;
mod pdf_file;
mod predict;
mod readings;
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
        Command::Readings(args) => readings::readings(&args),
        Command::AddReading(args) => readings::add(&args),
        Command::ImportReadings(args) => readings::import(&args),
        Command::ExportReadings(args) => readings::export(&args),
        Command::Due(args) => due::due(&args),
        Command::Predict(args) => predict::predict(&args),
        Command::Map(args) => predict::map(&args),
        Command::Fit(args) => predict::fit(&args),
    }
}

/// What a command line does, given as one would type it; words are parted by white space.
#[cfg(test)]
fn run_line(line: &str) -> Outcome {
    let cli = Cli::try_parse_from(std::iter::once("slidehalt").chain(line.split_whitespace()))
        .unwrap_or_else(|error| panic!("{line}: {error}"));
    run(cli.command.expect("a command"))
}

/// Today, by the computer's clock: read here and in the window's start, and nowhere else.
pub(crate) fn today() -> jiff::civil::Date {
    now().date()
}

/// Now, by the computer's clock.
fn now() -> jiff::civil::DateTime {
    jiff::ZonedDateTime::now().datetime()
}

#[cfg(test)]
mod tests {
    use clap::CommandFactory;

    use super::*;

    #[test]
    fn the_command_line_is_sound_and_unknown_words_end_with_2() {
        Cli::command().debug_assert();
        let parse = |line: &str| Cli::try_parse_from(std::iter::once("slidehalt").chain(line.split_whitespace()));
        for line in [
            "check",
            "check a --rules none",
            "check a --on 2026-13-01",
            "record a.ron",
            "record a.ron --out a.pdf --paper a5",
            "distance --rules eu-press",
            "distance --rules eu-press --safeguard mat --what 5",
            "distance --rules eu-press --safeguard mat --stopping-ms 5 --stops-ms 5,6",
            "stops",
            "--renderer none",
        ] {
            assert_eq!(parse(line).map(|_| ()).map_err(|error| error.exit_code()), Err(2), "{line}");
        }
        let bare = parse("").unwrap();
        assert!(bare.command.is_none() && bare.plant_folder.is_none());
        let folder = parse("some/plant --renderer cpu").unwrap();
        assert_eq!(folder.plant_folder, Some("some/plant".into()));
    }
}
