//! 29 CFR 1910.217(c): presence sensing, two-hand control, two-hand trip, and what is not permitted.

use calc::inverse;
use calc::rules::RuleSetId::Us1910217;
use calc::safeguard::{Gap, SafeguardKind};

use crate::case::{
    beams, case, curtain, guard, inch, level_field, mat, mm, on_full_revolution, starting_curtain, trip, two_hand,
};
use crate::row::Expected::{AtMostSeconds, Forbidden, Missing, NotCovered, Seconds};
use crate::row::{Got, MEMORY, ON_PUBLIC, PUBLIC, Row, more_than_inch};

const PRESENCE: &str = "29 CFR 1910.217(c)(3)(iii)(e)";
const TRIP: &str = "29 CFR 1910.217(c)(3)(viii)(c)";

/// Strokes a minute at the head of the table of Dm.
const PER_MIN: [i64; 6] = [60, 90, 100, 120, 150, 200];
/// Dm in inches, 63 (1/2 + 1/N) (60/spm), worked out by hand from the formula of the law, three decimals.
const DM: [(u32, [&str; 6]); 6] = [
    (1, ["94.500", "63.000", "56.700", "47.250", "37.800", "28.350"]),
    (2, ["63.000", "42.000", "37.800", "31.500", "25.200", "18.900"]),
    (3, ["52.500", "35.000", "31.500", "26.250", "21.000", "15.750"]),
    (4, ["47.250", "31.500", "28.350", "23.625", "18.900", "14.175"]),
    (8, ["39.375", "26.250", "23.625", "19.688", "15.750", "11.813"]),
    (14, ["36.000", "24.000", "21.600", "18.000", "14.400", "10.800"]),
];

pub fn rows() -> Vec<Row> {
    [trips(), stops(), refusals()].concat()
}

fn trips() -> Vec<Row> {
    let mut rows = Vec::new();
    for (points, line) in DM {
        for (per_min, dm) in PER_MIN.into_iter().zip(line) {
            let name = format!("Dm, {points} engaging points, {per_min} strokes/min");
            rows.push(Row::distance(name, Us1910217, trip(points, per_min), more_than_inch(dm), TRIP, ON_PUBLIC));
        }
    }
    for (points, per_min, tm) in [(1, 60, "1.5"), (14, 120, "0.285714"), (4, 200, "0.225")] {
        let name = format!("Tm, {points} engaging points, {per_min} strokes/min");
        // Written rounded up to a whole microsecond, so one unit of the last digit more than the cut figure can be right.
        let expected = if tm.len() == 8 { Seconds("0.28571".into()) } else { Seconds(tm.into()) };
        rows.push(Row::step(name, Us1910217, trip(points, per_min), "Tm", expected, TRIP, ON_PUBLIC));
    }
    rows
}

fn stops() -> Vec<Row> {
    let mut rows = Vec::new();
    for (ts, ds) in [("0", "0"), ("0.1", "6.3"), ("0.2", "12.6"), ("0.25", "15.75"), ("1", "63")] {
        for (what, kind) in [
            ("presence sensing", curtain(mm("30"))),
            ("separate beams", beams(&["400", "900"])),
            ("level field", level_field("50", "500")),
            ("two-hand control", two_hand(true)),
        ] {
            let name = format!("{what}, {ts} s");
            rows.push(Row::distance(name, Us1910217, case(kind, ts), more_than_inch(ds), PRESENCE, ON_PUBLIC));
        }
    }
    let allowed = inverse::allowed(Us1910217.rules(), &case(curtain(mm("14")), "0"), inch("18"));
    rows.push(Row::new(
        "18 in installed, no allowance: stop within less than 18/63 s",
        Got::Time(allowed.and_then(|allowed| allowed.stopping)),
        // 285 714 µs need 457.1995 mm of the 457.2 mm; rounded up to a whole micrometre they are no longer exceeded.
        AtMostSeconds("0.285714".into(), 1),
        "29 CFR 1910.217(b)(14)(i), (c)(3)(iii)(e)",
        ON_PUBLIC,
    ));
    rows
}

fn refusals() -> Vec<Row> {
    let full = |kind| on_full_revolution(case(kind, "0.2"), 4);
    let mut without_clutch = trip(4, 60);
    without_clutch.clutch = None;
    let mut without_speed = trip(4, 60);
    without_speed.trip_speed = None;
    let row = |name: &str, case, expected, source, basis| Row::distance(name, Us1910217, case, expected, source, basis);
    let no_full = "29 CFR 1910.217(c)(3)(iii)(a)";
    vec![
        row("full revolution: curtain", full(curtain(mm("14"))), Forbidden("(c)(3)(iii)(a)"), no_full, PUBLIC),
        row("full revolution: beams", full(beams(&["400", "900"])), Forbidden("(c)(3)(iii)(a)"), no_full, PUBLIC),
        row("full revolution: field", full(level_field("50", "500")), Forbidden("(c)(3)(iii)(a)"), no_full, PUBLIC),
        row(
            "full revolution: two-hand control",
            full(two_hand(false)),
            Forbidden("(c)(3)(vii)(a)"),
            "29 CFR 1910.217(c)(3)(vii)(a)",
            MEMORY,
        ),
        row(
            "curtain that starts the stroke",
            case(starting_curtain(mm("14")), "0.2"),
            Forbidden("(c)(3)(iii)(b)"),
            "29 CFR 1910.217(c)(3)(iii)(b)",
            PUBLIC,
        ),
        row(
            "two-hand trip on a part-revolution clutch",
            case(SafeguardKind::TwoHandTrip, "0.2"),
            NotCovered("two-hand control"),
            TRIP,
            PUBLIC,
        ),
        row("two-hand trip, clutch not known", without_clutch, Missing("engaging points"), TRIP, PUBLIC),
        row("two-hand trip, speed not known", without_speed, Missing("strokes a minute"), TRIP, PUBLIC),
        row("two-hand trip, no engaging point", trip(0, 60), Missing("engaging points"), TRIP, PUBLIC),
        row("two-hand trip, no speed", trip(4, 0), Missing("strokes a minute"), TRIP, PUBLIC),
        row("interlocked guard", case(guard(Gap::None, None), "0.2"), NotCovered("no formula"), PRESENCE, MEMORY),
        row("mat", case(mat("0"), "0.2"), NotCovered("mats"), PRESENCE, MEMORY),
    ]
}
