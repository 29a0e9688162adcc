//! The program `slidehalt`: a window on a plant, or the same job on the command line.

use std::process::ExitCode;

fn main() -> ExitCode {
    desktop::cli::main()
}
