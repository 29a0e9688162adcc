//! `slidehalt record`: the record of a press as PDF.

use calc::units::LengthUnit;
use record::{Paper, RecordInput, SignOff, press_record};

use super::args::{PaperArg, RecordArgs};
use super::{Outcome, today};

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
    let written = record
        .to_pdf()
        .map_err(|refusal| refusal.to_string())
        .and_then(|pdf| plant::write_whole(&args.out, &pdf).map_err(|refusal| refusal.to_string()));
    match written {
        Ok(()) => outcome.line(format!("Record of press {} written to {}.", press.tag, args.out.display())),
        Err(refusal) => outcome.refuse(refusal),
    }
    outcome
}
