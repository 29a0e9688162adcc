//! Table O-10, typed from Table 1 of Michigan R 408.12461, read in both directions.

use calc::rules::RuleSetId::Us1910217;
use calc::safeguard::{Opening, OpeningShape};
use calc::steps::WorkedSteps;
use calc::units::Length;

use crate::case::{self, inch, opening};
use crate::row::{Expected, Got, ON_PUBLIC, PUBLIC, Row, more_than_inch};

const SOURCE: &str = "29 CFR 1910.217 Table O-10 as Michigan R 408.12461 Table 1";

/// From, to, and widest opening, in inches.
pub const TABLE: [(&str, &str, &str); 10] = [
    ("0.5", "1.5", "0.25"),
    ("1.5", "2.5", "0.375"),
    ("2.5", "3.5", "0.5"),
    ("3.5", "5.5", "0.625"),
    ("5.5", "6.5", "0.75"),
    ("6.5", "7.5", "0.875"),
    ("7.5", "12.5", "1.25"),
    ("12.5", "15.5", "1.5"),
    ("15.5", "17.5", "1.875"),
    ("17.5", "31.5", "2.125"),
];

/// The same table in mm, as worked out beside it.
const IN_MM: [(&str, &str); 10] = [
    ("12.70", "6.350"),
    ("38.10", "9.525"),
    ("63.50", "12.700"),
    ("88.90", "15.875"),
    ("139.70", "19.050"),
    ("165.10", "22.225"),
    ("190.50", "31.750"),
    ("317.50", "38.100"),
    ("393.70", "47.625"),
    ("444.50", "53.975"),
];

fn slot(size: Length) -> calc::rules::Case {
    opening(Opening { size, shape: OpeningShape::Slot { length: None } })
}

fn is_met(size: Length, distance: Length) -> bool {
    let demand = Us1910217.rules().distance(&slot(size), &mut WorkedSteps::new());
    demand.is_ok_and(|demand| demand.is_met_by(distance))
}

/// The widest opening, by thousandths of an inch up to 2.2 in, that may stand at a distance.
fn widest(distance: Length) -> Option<Length> {
    (200..=2_200).rev().map(|thou| Length::from_base(thou * 254 / 10)).find(|size| is_met(*size, distance))
}

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    let least = |from: &str, index: usize| if index == 0 { crate::row::inch(from) } else { more_than_inch(from) };
    for (index, (from, to, width)) in TABLE.into_iter().enumerate() {
        let name = format!("opening {width} in: least distance");
        rows.push(Row::distance(name, Us1910217, slot(inch(width)), least(from, index), SOURCE, PUBLIC));
        if let Some((_, _, narrower)) = index.checked_sub(1).map(|before| TABLE[before]) {
            let name = format!("opening just over {narrower} in: least distance");
            let size = inch(narrower) + Length::from_base(1);
            rows.push(Row::distance(name, Us1910217, slot(size), least(from, index), SOURCE, PUBLIC));
        }
        let middle = Length::from_base((inch(from).base() + inch(to).base()) / 2);
        for (where_, distance) in [("inside", middle), ("at the far end of", inch(to))] {
            let name = format!("distance {where_} {from} to {to} in: widest opening");
            let basis = if where_ == "inside" { PUBLIC } else { ON_PUBLIC };
            rows.push(Row::new(name, Got::Length(widest(distance)), crate::row::inch(width), SOURCE, basis));
        }
        let (from_mm, width_mm) = IN_MM[index];
        let exactly = case::mm(from_mm) == inch(from) && case::mm(width_mm) == inch(width);
        rows.push(Row::new(
            format!("{from} in is {from_mm} mm and {width} in is {width_mm} mm"),
            Got::Says(exactly),
            Expected::Says(true),
            SOURCE,
            ON_PUBLIC,
        ));
    }
    let says = |name: &str, got, expected| Row::new(name, Got::Says(got), Expected::Says(expected), SOURCE, ON_PUBLIC);
    rows.push(says("1/4 in may stand at exactly 1/2 in", is_met(inch("0.25"), inch("0.5")), true));
    rows.push(says("1/2 in may not stand at exactly 2 1/2 in", is_met(inch("0.5"), inch("2.5")), false));
    rows.push(says("3/8 in may stand at exactly 2 1/2 in", is_met(inch("0.375"), inch("2.5")), true));
    rows.push(says("1/4 in may not stand nearer than 1/2 in", is_met(inch("0.25"), case::mm("12.699")), false));
    let none = |name: &str, size: Length, words| {
        Row::distance(name, Us1910217, slot(size), Expected::NotCovered(words), SOURCE, PUBLIC)
    };
    rows.push(none("opening of 0.2 in", inch("0.2"), "1/4 in"));
    rows.push(none("opening just under 1/4 in", case::mm("6.349"), "1/4 in"));
    rows.push(none("opening just over 2 1/8 in", case::mm("53.976"), "2 1/8 in"));
    rows.push(none("opening of 2 1/4 in", inch("2.25"), "2 1/8 in"));
    rows
}
