//! What a sheet may see.

use std::sync::Arc;

use calc::press::Press;
use calc::units::LengthUnit;
use calc::verdict::Assessment;
use jiff::civil::Date;

use crate::document::Document;
use crate::results::PressResult;

/// What a sheet may see of the window: the document and how it is shown, for reading only.
#[derive(Clone, Copy)]
pub struct SheetContext<'a> {
    /// The plant.
    pub document: &'a Document,
    /// The press that is shown.
    pub press: &'a Arc<Press>,
    /// Its assessments.
    pub result: &'a PressResult,
    /// The safeguard that the reach strip shows, by place.
    pub safeguard: usize,
    /// The unit of lengths.
    pub unit: LengthUnit,
    /// Today.
    pub today: Date,
    /// Whether an entry cannot be taken, so that no answer is shown: the assessments are those of what stood there before.
    pub is_without_result: bool,
}

impl<'a> SheetContext<'a> {
    /// The assessment that the reach strip shows; `None` for a press without safeguards.
    pub fn assessment(&self) -> Option<&'a Assessment> {
        self.result.assessments.get(self.safeguard)
    }
}
