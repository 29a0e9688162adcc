//! What a sheet may see.

use std::sync::Arc;

use calc::press::Press;
use calc::units::LengthUnit;
use jiff::civil::Date;

use crate::document::Document;
use crate::results::PressResult;

/// What a sheet may see of the window: all of it read-only.
pub struct SheetContext<'a> {
    /// The open plant.
    pub document: &'a Document,
    /// The shown press.
    pub press: &'a Arc<Press>,
    /// Its assessments.
    pub result: &'a PressResult,
    /// The place of the shown safeguard.
    pub safeguard: usize,
    /// The unit in which lengths are shown and typed.
    pub unit: LengthUnit,
    /// Today.
    pub today: Date,
    /// Whether the dark theme is on.
    pub dark: bool,
}
