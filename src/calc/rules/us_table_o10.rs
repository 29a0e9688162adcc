//! Table O-10 of 29 CFR 1910.217: widest opening in a guard by its distance from the hazard.
//!
//! The figures were read as Table 1 of Michigan R 408.12461, one text; that the federal table is the same is known from memory. The
//! ranges share their end points and the law does not say which row holds there: the smaller width is taken.

use super::{Case, Demand, NoDemand};
use crate::basis::{Basis, Source};
use crate::expr;
use crate::safeguard::Opening;
use crate::steps::WorkedSteps;
use crate::units::Length;

const TABLE: Source = Source::new("29 CFR 1910.217", "Table O-10 (as Michigan R 408.12461 Table 1)", Basis::SingleText);

/// One row: from this distance on, an opening of at most this width.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Row {
    /// Where the row begins.
    pub from: Length,
    /// The widest opening.
    pub width: Length,
}

/// Eighths of an inch: 3.175 mm, a whole number of micrometres.
const fn eighths(count: i64) -> Length {
    Length::from_base(count * 3_175)
}

const fn row(from_eighths: i64, width_eighths: i64) -> Row {
    Row { from: eighths(from_eighths), width: eighths(width_eighths) }
}

/// The table, nearest first.
pub const ROWS: [Row; 10] = [
    row(4, 2),
    row(12, 3),
    row(20, 4),
    row(28, 5),
    row(44, 6),
    row(52, 7),
    row(60, 10),
    row(100, 12),
    row(124, 15),
    row(140, 17),
];

/// The least distance of an opening from the hazard.
pub(super) fn distance(opening: &Opening, _case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
    if opening.size < ROWS[0].width {
        return Err(NoDemand::not_covered("an opening under 1/4 in (6.35 mm), to which Table O-10 does not apply"));
    }
    let Some(index) = ROWS.iter().position(|row| opening.size <= row.width) else {
        return Err(NoDemand::not_covered("an opening wider than 2 1/8 in (53.975 mm)"));
    };
    let row = ROWS[index];
    steps.put("w", "widest opening of the row that admits this one", expr!["opening", opening.size], row.width, TABLE);
    let required = steps.put("D", "distance at which the row begins", expr!["row for", row.width], row.from, TABLE);
    // At the shared end point the nearer row, with the smaller width, holds; the first row has no nearer one.
    Ok(Demand { required, strict: index > 0, make_up: None })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_columns_only_grow() {
        assert!(ROWS.windows(2).all(|pair| pair[0].from < pair[1].from && pair[0].width < pair[1].width));
    }
}
