//! What a command prints and how it ends.

use std::fmt::Write as _;
use std::io::Write as _;
use std::process::ExitCode;

/// What a command prints and how it ends.
#[derive(Clone, PartialEq, Eq, Debug, Default)]
pub struct Outcome {
    /// For standard output.
    pub out: String,
    /// For standard error.
    pub err: String,
    /// The exit code: 0 all hold or done, 1 some do not hold, 2 refused.
    pub code: u8,
}

impl Outcome {
    /// Adds a line to standard output.
    pub fn line(&mut self, text: impl AsRef<str>) {
        let _ = writeln!(self.out, "{}", text.as_ref());
    }

    /// Adds a refusal to standard error; the command then ends with 2.
    pub fn refuse(&mut self, text: impl AsRef<str>) {
        let _ = writeln!(self.err, "{}", text.as_ref());
        self.code = 2;
    }

    /// Raises the exit code.
    pub fn at_least(&mut self, code: u8) {
        self.code = self.code.max(code);
    }

    /// Prints it. A reader that has gone away is no fault of the command.
    pub fn print(self) -> ExitCode {
        let _ = std::io::stdout().write_all(self.out.as_bytes());
        let _ = std::io::stderr().write_all(self.err.as_bytes());
        ExitCode::from(self.code)
    }
}

/// Cells in columns, two spaces apart; the last column is left as it is.
pub fn columns(rows: &[Vec<String>]) -> Vec<String> {
    let count = rows.iter().map(Vec::len).max().unwrap_or(0);
    let widths: Vec<usize> = (0..count)
        .map(|column| rows.iter().filter_map(|row| row.get(column)).map(|cell| cell.chars().count()).max().unwrap_or(0))
        .collect();
    rows.iter()
        .map(|row| {
            let mut line = String::new();
            for (index, cell) in row.iter().enumerate() {
                line.push_str(cell);
                if index + 1 < row.len() {
                    let pad = widths[index] - cell.chars().count() + 2;
                    line.extend(std::iter::repeat_n(' ', pad));
                }
            }
            line.trim_end().to_owned()
        })
        .collect()
}
