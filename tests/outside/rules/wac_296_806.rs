//! Washington State, WAC 296-806: the two examples printed in the rule itself.

use calc::rules::RuleSetId::Us1910217;

use crate::case::{case, curtain, mm, trip, two_hand};
use crate::row::{MEMORY, PUBLIC, Row, more_than_inch};

pub fn rows() -> Vec<Row> {
    vec![
        Row::distance(
            "presence sensing, 63 in/s × 0.5 s",
            Us1910217,
            case(curtain(mm("14")), "0.5"),
            more_than_inch("31.5"),
            "WAC 296-806-45516",
            PUBLIC,
        ),
        // The rule prints T = 0.5 s and no way to get at it; 2 engaging points at 120 strokes a minute close in that time.
        Row::distance(
            "two-hand trip, 63 in/s × 0.5 s to die closure",
            Us1910217,
            trip(2, 120),
            more_than_inch("31.5"),
            "WAC 296-806-45524",
            PUBLIC,
        ),
        Row::distance(
            "two-hand control, 63 in/s × 0.5 s",
            Us1910217,
            case(two_hand(false), "0.5"),
            more_than_inch("31.5"),
            "WAC 296-806, two-hand control",
            MEMORY,
        ),
    ]
}
