//! What is printed: the record of one press as pages, from a finished value. Same input, same bytes.
//!
//! Pages are [`figure::Drawing`]s, so that the window can show the very page that prints. Date and version are given by the
//! caller; nothing here reads a clock.

mod flow;
mod pdf;
mod prediction;
mod press_record;
mod round_list;
mod sections;
mod text;

pub use flow::Paper;
pub use pdf::RecordRefusal;
pub use press_record::{RecordInput, SignOff, press_record};
pub use round_list::{RoundListInput, round_list};

use figure::Drawing;

/// A record: its pages and what the file says of itself.
#[derive(Clone, PartialEq, Debug)]
pub struct Record {
    /// The pages.
    pub pages: Vec<Drawing>,
    /// Title of the file.
    pub title: String,
    /// The day printed on it.
    pub date: jiff::civil::Date,
    /// The version of the program printed on it.
    pub version: String,
}

impl Record {
    /// The record as a PDF file with both fonts embedded.
    ///
    /// # Errors
    /// A character that no font of the program has, named with the line it stands in.
    pub fn to_pdf(&self) -> Result<Vec<u8>, RecordRefusal> {
        pdf::to_pdf(self)
    }

    /// The record as plain text, line by line.
    pub fn to_text(&self) -> String {
        text::to_text(&self.pages)
    }
}
