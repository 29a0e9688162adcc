//! ISO 13855:2010 Table 1, reaching over a vertical field.
//!
//! The table is from memory and was typed here a second time; what is checked is that both typings agree in every cell, and
//! the rule of clause 6.5 that nothing is interpolated and the larger distance holds between rows and columns.

use calc::rules::RuleSetId::Iso138552010;

use crate::case::{case, curtain_under, mm};
use crate::row::Expected::NotCovered;
use crate::row::{self, MEMORY, ON_MEMORY, ON_PUBLIC, PUBLIC, Row};

const TABLE: &str = "ISO 13855:2010, Table 1";
const CLAUSE: &str = "ISO 13855:2010, 6.5";

pub const EDGES: [u32; 12] = [900, 1000, 1100, 1200, 1300, 1400, 1600, 1800, 2000, 2200, 2400, 2600];

#[rustfmt::skip]
pub const CELLS: [(u32, [u32; 12]); 15] = [
    //        900  1000  1100  1200  1300  1400  1600  1800  2000  2200  2400  2600
    (   0, [    0,    0,    0,    0,    0,    0,    0,    0,    0,    0,    0,    0]),
    ( 200, [  600,    0,    0,    0,    0,    0,    0,    0,    0,    0,    0,    0]),
    ( 400, [  900,  700,    0,    0,    0,    0,    0,    0,    0,    0,    0,    0]),
    ( 600, [ 1050,  950,  750,  550,    0,    0,    0,    0,    0,    0,    0,    0]),
    ( 800, [ 1150, 1050,  950,  800,  500,  450,    0,    0,    0,    0,    0,    0]),
    (1000, [ 1200, 1150, 1050,  950,  750,  700,    0,    0,    0,    0,    0,    0]),
    (1200, [ 1200, 1200, 1100, 1000,  850,  800,    0,    0,    0,    0,    0,    0]),
    (1400, [ 1200, 1200, 1100, 1000,  900,  850,  650,    0,    0,    0,    0,    0]),
    (1600, [ 1150, 1150, 1100, 1000,  900,  850,  750,  450,    0,    0,    0,    0]),
    (1800, [ 1100, 1100,  950,  950,  850,  800,  750,  550,    0,    0,    0,    0]),
    (2000, [  950,  950,  850,  850,  800,  750,  700,  550,  400,    0,    0,    0]),
    (2200, [  800,  750,  750,  700,  650,  650,  600,  550,  400,  250,    0,    0]),
    (2400, [  550,  550,  550,  500,  450,  450,  400,  400,  300,  250,  100,    0]),
    (2500, [  400,  400,  350,  300,  300,  300,  300,  300,  250,  150,  100,    0]),
    (2600, [    0,    0,    0,    0,    0,    0,    0,    0,    0,    0,    0,    0]),
];

fn addition(hazard: &str, edge: &str, expected: u32, basis: &'static str) -> Row {
    let case = case(curtain_under(mm("14"), hazard, edge), "0.2");
    let name = format!("hazard {hazard}, upper edge {edge} mm");
    let source = if basis == MEMORY { TABLE } else { CLAUSE };
    Row::step(name, Iso138552010, case, "C_RO", row::mm(&format!("{expected}.000")), source, basis)
}

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    for (index, (hazard, line)) in CELLS.iter().enumerate() {
        for (column, expected) in line.iter().enumerate() {
            let edge = EDGES[column];
            rows.push(addition(&hazard.to_string(), &edge.to_string(), *expected, MEMORY));
            // Between this column and the next the lower edge counts, and past the last column the last.
            let just_short = EDGES.get(column + 1).map_or("5000".into(), |next| format!("{}.999", next - 1));
            rows.push(addition(&hazard.to_string(), &just_short, *expected, ON_MEMORY));
            if let Some((next, above)) = CELLS.get(index + 1) {
                let larger = (*expected).max(above[column]);
                rows.push(addition(&format!("{hazard}.001"), &edge.to_string(), larger, ON_MEMORY));
                rows.push(addition(&format!("{}.999", next - 1), &edge.to_string(), larger, ON_MEMORY));
            }
        }
    }
    let mut row = |name: &str, kind, t: &str, expected, basis| {
        rows.push(Row::distance(name, Iso138552010, case(kind, t), expected, CLAUSE, basis));
    };
    let fine = || mm("14");
    // The larger of both ways wins, each with the change of speed at 500 mm and the floor of 100 mm.
    row(
        "over 1600 × 0.2 + 1150 beats through 400",
        curtain_under(fine(), "1000", "1000"),
        "0.2",
        row::mm("1470"),
        ON_MEMORY,
    );
    row(
        "over 2000 × 0.05 + 100 beats through 100",
        curtain_under(fine(), "2400", "2400"),
        "0.05",
        row::mm("200"),
        ON_MEMORY,
    );
    row("over 2000 × 0.2 + 100 = 500 stays", curtain_under(fine(), "2400", "2400"), "0.2", row::mm("500"), ON_MEMORY);
    row(
        "over 2000 × 0.21 + 100 = 520, so 500",
        curtain_under(fine(), "2400", "2400"),
        "0.21",
        row::mm("500"),
        ON_MEMORY,
    );
    row(
        "through 208 + 200 beats over 0 + 200",
        curtain_under(mm("40"), "1000", "1600"),
        "0.1",
        row::mm("408"),
        ON_PUBLIC,
    );
    row("both under 100 mm", curtain_under(fine(), "1000", "1600"), "0.01", row::mm("100"), ON_PUBLIC);
    row(
        "d 50: through 850 + 320 beats over 700 + 320",
        curtain_under(mm("50"), "1000", "1400"),
        "0.2",
        row::mm("1170"),
        ON_MEMORY,
    );
    row(
        "d 50: over 1200 + 320 beats through",
        curtain_under(mm("50"), "1000", "900"),
        "0.2",
        row::mm("1520"),
        ON_MEMORY,
    );
    row("upper edge exactly 900 mm", curtain_under(fine(), "1000", "900"), "0.2", row::mm("1520"), ON_MEMORY);
    row("upper edge just under 900 mm", curtain_under(fine(), "1000", "899.999"), "0.2", NotCovered("900 mm"), MEMORY);
    row("hazard just over 2600 mm", curtain_under(fine(), "2600.001", "1000"), "0.2", NotCovered("2600 mm"), MEMORY);
    row("hazard at 0 mm", curtain_under(fine(), "0", "1000"), "0.2", row::mm("400"), PUBLIC);
    rows
}
