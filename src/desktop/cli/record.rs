//! `slidehalt record`: the record of a press as PDF.

use calc::units::LengthUnit;
use record::{Paper, RecordInput, SignOff, press_record};

use super::args::{PaperArg, RecordArgs};
use super::{Outcome, pdf_file, today};

pub fn record(args: &RecordArgs) -> Outcome {
    let mut outcome = Outcome::default();
    let (plant, press) = match plant::open_press_file(&args.press) {
        Ok(opened) => opened,
        Err(refusal) => {
            outcome.refuse(refusal.to_string());
            return outcome;
        }
    };
    let record = press_record(&RecordInput {
        plant: &plant,
        press: &press,
        rules: args.rules.unwrap_or(plant.rules),
        date: args.on.unwrap_or_else(today),
        version: env!("CARGO_PKG_VERSION"),
        unit: if args.inches { LengthUnit::Inch } else { LengthUnit::Millimetre },
        paper: match args.paper {
            PaperArg::A4 => Paper::A4,
            PaperArg::Letter => Paper::Letter,
        },
        sign_off: <[SignOff; 3]>::default(),
    });
    let written =
        record.to_pdf().map_err(|refusal| refusal.to_string()).and_then(|pdf| pdf_file::write(&args.out, &pdf));
    match written {
        Ok(()) => outcome.line(format!("Record of press {} written to {}.", press.tag, args.out.display())),
        Err(refusal) => outcome.refuse(refusal),
    }
    outcome
}

#[cfg(test)]
mod tests {
    use crate::cli::run_line;

    #[test]
    fn a_record_is_written_and_a_slip_of_the_name_changes_nothing() {
        let folder = tempfile::tempdir().unwrap();
        plant::copy_samples(folder.path()).unwrap();
        let press = folder.path().join("presses/E-103.ron");
        let before = std::fs::read(&press).unwrap();
        let out = folder.path().join("E-103.pdf");
        let record = |press: &std::path::Path, out: &std::path::Path, more: &str| {
            let (press, out) = (press.to_str().unwrap(), out.to_str().unwrap());
            run_line(&format!("record {press} --out {out} --on 2026-12-01 {more}"))
        };
        let done = record(&press, &out, "");
        assert_eq!((done.code, done.err.as_str()), (0, ""));
        assert_eq!(done.out, format!("Record of press E-103 written to {}.\n", out.display()));
        let a4 = std::fs::read(&out).unwrap();
        assert!(a4.starts_with(b"%PDF-"));
        assert_eq!(record(&press, &out, "--paper letter --rules us-1910-217 --in").code, 0);
        assert_ne!(std::fs::read(&out).unwrap(), a4, "another rule set and paper make another record");

        let over_itself = record(&press, &press, "");
        assert_eq!((over_itself.code, over_itself.out.as_str()), (2, ""));
        assert!(over_itself.err.contains("is no PDF file"), "{}", over_itself.err);
        assert_eq!(std::fs::read(&press).unwrap(), before);
        assert_eq!(record(&folder.path().join("presses/none.ron"), &out, "").code, 2);
        assert_eq!(record(&press, &folder.path().join("none/E-103.pdf"), "").code, 2);
    }
}
