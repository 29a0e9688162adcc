//! ISO 13857 Table 4: reaching through regular openings with the upper limbs, persons of 14 and over.
//!
//! Read in one public engineering summary; that the editions of 2008 and 2019 carry the same figures is known from memory.

use super::{Demand, NoDemand};
use crate::basis::{Basis, Source};
use crate::expr;
use crate::safeguard::{Opening, OpeningShape};
use crate::steps::WorkedSteps;
use crate::units::Length;

const TABLE: Source = Source::new("ISO 13857:2019", "Table 4", Basis::SingleText);

/// One row: openings up to and including this size, and the distance for each shape.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Row {
    /// Size up to and including which the row holds.
    pub up_to: Length,
    /// Distance for a slot.
    pub slot: Length,
    /// Distance for a square.
    pub square: Length,
    /// Distance for a round hole.
    pub round: Length,
}

const fn row(up_to: i64, slot: i64, square: i64, round: i64) -> Row {
    Row { up_to: Length::mm(up_to), slot: Length::mm(slot), square: Length::mm(square), round: Length::mm(round) }
}

/// The table, finest first.
pub const ROWS: [Row; 9] = [
    row(4, 2, 2, 2),
    row(6, 10, 5, 5),
    row(8, 20, 15, 5),
    row(10, 80, 25, 20),
    row(12, 100, 80, 80),
    row(20, 120, 120, 120),
    row(30, 850, 120, 120),
    row(40, 850, 200, 120),
    row(120, 850, 850, 850),
];

/// A slot of 20 to 30 mm no longer than this stops at the thumb.
const THUMB_SLOT: Length = Length::mm(65);
const THUMB_DISTANCE: Length = Length::mm(200);
const THUMB_ROW: (Length, Length) = (Length::mm(20), Length::mm(30));

/// How far a hand or arm reaches through the opening.
///
/// # Errors
/// [`NoDemand::NotCovered`] over 120 mm.
pub fn reach_through(opening: &Opening, steps: &mut WorkedSteps) -> Result<Length, NoDemand> {
    let Some(row) = ROWS.iter().find(|row| opening.size <= row.up_to) else {
        return Err(NoDemand::not_covered("an opening over 120 mm, where reaching over or whole-body access decides"));
    };
    let (shape, distance) = match opening.shape {
        OpeningShape::Slot { length: Some(length) }
            if length <= THUMB_SLOT && THUMB_ROW.0 < opening.size && opening.size <= THUMB_ROW.1 =>
        {
            ("slot no longer than 65 mm", THUMB_DISTANCE)
        }
        OpeningShape::Slot { .. } => ("slot", row.slot),
        OpeningShape::Square => ("square", row.square),
        OpeningShape::Round => ("round hole", row.round),
    };
    Ok(steps.put("s_r", format!("reach through a {shape}"), expr!["opening", opening.size], distance, TABLE))
}

/// The distance of an opening in a fixed guard.
pub(super) fn distance(opening: &Opening, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
    let reach = reach_through(opening, steps)?;
    Ok(Demand { required: reach, strict: false, make_up: None })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rows_grow_and_a_slot_is_never_safer_than_a_hole() {
        assert!(ROWS.windows(2).all(|pair| pair[0].up_to < pair[1].up_to));
        assert!(ROWS.iter().all(|row| row.slot >= row.square && row.square >= row.round));
    }
}
