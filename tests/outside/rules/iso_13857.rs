//! ISO 13857 Table 4, upper limbs through regular openings, age 14 and over: every cell, at both edges of its row.

use calc::rules::RuleSetId::{EuPress, Iso138552010, Iso138552024};

use crate::case::{opening, round, slot, square};
use crate::row::{self, Expected::NotCovered, ONE_TEXT, Row};

const SOURCE: &str = "ISO 13857:2019, Table 4";

/// Size just over the row before, size up to which the row holds, and the distances for slot, square and round hole.
pub const TABLE: [(&str, &str, &str, &str, &str); 9] = [
    ("0.1", "4", "2", "2", "2"),
    ("4.001", "6", "10", "5", "5"),
    ("6.001", "8", "20", "15", "5"),
    ("8.001", "10", "80", "25", "20"),
    ("10.001", "12", "100", "80", "80"),
    ("12.001", "20", "120", "120", "120"),
    ("20.001", "30", "850", "120", "120"),
    ("30.001", "40", "850", "200", "120"),
    ("40.001", "120", "850", "850", "850"),
];

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    let mut row = |name: String, rules, shape, expected| {
        rows.push(Row::distance(name, rules, opening(shape), expected, SOURCE, ONE_TEXT));
    };
    for rules in [Iso138552010, Iso138552024, EuPress] {
        let under = rules.key();
        for (first, last, of_slot, of_square, of_round) in TABLE {
            for e in [first, last] {
                row(format!("{under}: slot {e} mm"), rules, slot(e, None), row::mm(of_slot));
                row(format!("{under}: square {e} mm"), rules, square(e), row::mm(of_square));
                row(format!("{under}: round {e} mm"), rules, round(e), row::mm(of_round));
            }
        }
        // Between 20 and 30 mm a slot of at most 65 mm stops at the thumb; nowhere else.
        for (e, length, s) in [
            ("22", "60", "200"),
            ("22", "65", "200"),
            ("22", "65.001", "850"),
            ("22", "70", "850"),
            ("20", "60", "120"),
            ("20.001", "60", "200"),
            ("30", "60", "200"),
            ("30.001", "60", "850"),
            ("10", "60", "80"),
        ] {
            row(format!("{under}: slot {e} mm, {length} long"), rules, slot(e, Some(length)), row::mm(s));
        }
        for (what, shape) in [("slot", slot("120.001", None)), ("square", square("121")), ("round", round("200"))] {
            row(format!("{under}: {what} over 120 mm"), rules, shape, NotCovered("120 mm"));
        }
    }
    rows
}
