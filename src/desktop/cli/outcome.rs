//! What a command prints and how it ends.

use std::fmt::Write as _;
use std::io::ErrorKind;
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

    /// Prints it.
    pub fn print(self) -> ExitCode {
        let code = self.write(&mut std::io::stdout().lock(), &mut std::io::stderr().lock());
        ExitCode::from(code)
    }

    /// Writes it and gives the exit code. A reader that has gone away is no fault of the command; an output that takes no more,
    /// such as a full disk, is.
    fn write(mut self, out: &mut dyn std::io::Write, err: &mut dyn std::io::Write) -> u8 {
        if let Err(error) = out.write_all(self.out.as_bytes()).and_then(|()| out.flush())
            && error.kind() != ErrorKind::BrokenPipe
        {
            self.refuse(format!("The output cannot be written: {error}."));
        }
        // Where even the messages cannot be written, the exit code is all that is left to tell.
        let _ = err.write_all(self.err.as_bytes());
        self.code
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

#[cfg(test)]
mod tests {
    use super::*;

    struct Failing(ErrorKind);

    impl std::io::Write for Failing {
        fn write(&mut self, _: &[u8]) -> std::io::Result<usize> {
            Err(self.0.into())
        }

        fn flush(&mut self) -> std::io::Result<()> {
            Ok(())
        }
    }

    #[test]
    fn a_reader_gone_away_is_no_fault_and_a_full_disk_is() {
        let mut outcome = Outcome::default();
        outcome.line("Holds");
        for (kind, code) in [(ErrorKind::BrokenPipe, 0), (ErrorKind::StorageFull, 2)] {
            let mut err = Vec::new();
            assert_eq!(outcome.clone().write(&mut Failing(kind), &mut err), code, "{kind}");
            assert_eq!(err.is_empty(), code == 0);
        }
        assert_eq!(outcome.write(&mut Vec::new(), &mut Failing(ErrorKind::BrokenPipe)), 0);
    }

    #[test]
    fn columns_stand_two_spaces_apart_and_lines_end_with_their_text() {
        let rows = [["a", "bcd", "e"], ["fgh", "", ""], ["Ω", "–", "x y"]].map(|row| row.map(str::to_owned).to_vec());
        assert_eq!(columns(&rows), ["a    bcd  e", "fgh", "Ω    –    x y"]);
    }
}
