//! ISO 13855:2010 Table 1: the distance to add when an arm can pass over the upper edge of a vertical field.
//!
//! The whole table is from memory: compare cell by cell with your copy before relying on it. There is no interpolation.

use super::NoDemand;
use crate::basis::{Basis, Source};
use crate::expr;
use crate::steps::WorkedSteps;
use crate::units::Length;

const TABLE: Source = Source::new("ISO 13855:2010", "6.5, Table 1", Basis::FromMemory);

/// Heights of the upper edge of the field, in mm: the columns.
pub const UPPER_EDGES: [i64; 12] = [900, 1000, 1100, 1200, 1300, 1400, 1600, 1800, 2000, 2200, 2400, 2600];

/// Heights of the hazard in mm, each with its row of distances in mm.
pub const ROWS: [(i64, [i64; 12]); 15] = [
    (2600, [0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0]),
    (2500, [400, 400, 350, 300, 300, 300, 300, 300, 250, 150, 100, 0]),
    (2400, [550, 550, 550, 500, 450, 450, 400, 400, 300, 250, 100, 0]),
    (2200, [800, 750, 750, 700, 650, 650, 600, 550, 400, 250, 0, 0]),
    (2000, [950, 950, 850, 850, 800, 750, 700, 550, 400, 0, 0, 0]),
    (1800, [1100, 1100, 950, 950, 850, 800, 750, 550, 0, 0, 0, 0]),
    (1600, [1150, 1150, 1100, 1000, 900, 850, 750, 450, 0, 0, 0, 0]),
    (1400, [1200, 1200, 1100, 1000, 900, 850, 650, 0, 0, 0, 0, 0]),
    (1200, [1200, 1200, 1100, 1000, 850, 800, 0, 0, 0, 0, 0, 0]),
    (1000, [1200, 1150, 1050, 950, 750, 700, 0, 0, 0, 0, 0, 0]),
    (800, [1150, 1050, 950, 800, 500, 450, 0, 0, 0, 0, 0, 0]),
    (600, [1050, 950, 750, 550, 0, 0, 0, 0, 0, 0, 0, 0]),
    (400, [900, 700, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0]),
    (200, [600, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0]),
    (0, [0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0]),
];

/// The distance C_RO. An edge between two columns counts as the lower one, a hazard between two rows as the row with the
/// larger distance.
///
/// # Errors
/// [`NoDemand::NotCovered`] for an upper edge under 900 mm or a hazard above 2600 mm.
pub fn reach_over(hazard: Length, upper_edge: Length, steps: &mut WorkedSteps) -> Result<Length, NoDemand> {
    let Some(column) = UPPER_EDGES.iter().rposition(|edge| Length::mm(*edge) <= upper_edge) else {
        return Err(NoDemand::not_covered("an upper edge of the field under 900 mm"));
    };
    let at_or_above = ROWS.iter().rfind(|(height, _)| hazard <= Length::mm(*height));
    let at_or_below = ROWS.iter().find(|(height, _)| Length::mm(*height) <= hazard);
    let (Some((_, above)), Some((_, below))) = (at_or_above, at_or_below) else {
        return Err(NoDemand::not_covered("a hazard higher than 2600 mm"));
    };
    let distance = Length::mm(above[column].max(below[column]));
    let edge = Length::mm(UPPER_EDGES[column]);
    Ok(steps.put(
        "C_RO",
        "reaching over",
        expr!["hazard at", hazard, ", upper edge at", upper_edge, "taken as", edge],
        distance,
        TABLE,
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_higher_edge_never_asks_for_more() {
        for (height, row) in ROWS {
            assert!(row.windows(2).all(|pair| pair[0] >= pair[1]), "row {height}");
        }
    }

    #[test]
    fn between_rows_and_columns_the_larger_distance_holds() {
        let over = |hazard, edge| reach_over(Length::mm(hazard), Length::mm(edge), &mut WorkedSteps::new());
        assert_eq!(over(1000, 1150), Ok(Length::mm(1050)));
        assert_eq!(over(1900, 1000), Ok(Length::mm(1100)));
        assert_eq!(over(1000, 3000), Ok(Length::ZERO));
        assert!(over(1000, 899).is_err() && over(2601, 1000).is_err());
    }
}
