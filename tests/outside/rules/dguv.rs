//! European press practice after DGUV Information 209-030: hand speeds by CE mark and safeguard, additions in steps.

use calc::press::Conformity::{self, CeMarked, WithoutCe};
use calc::rules::RuleSetId::EuPress;
use calc::safeguard::Gap;

use crate::case::{
    beams, case, curtain, curtain_under, guard, level_field, mat, mm, on_full_revolution, on_press, starting_curtain,
    trip, two_hand,
};
use crate::row::Expected::{Forbidden, Missing, NotCovered};
use crate::row::{self, MEMORY, ON_MEMORY, ON_PUBLIC, PUBLIC, Row};

const ADDITIONS: &str = "DGUV Information 209-030, table of C";
const SPEEDS: &str = "DGUV Information 209-030, Table 12";
const TWO_HAND: &str = "DGUV Information 209-030, Table 14";
const STARTING: &str = "DGUV Information 209-030, start of the stroke by curtain";

fn words(conformity: Conformity) -> &'static str {
    match conformity {
        CeMarked => "CE press",
        WithoutCe => "old press",
    }
}

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    for (d, c) in [
        ("1", "0"),
        ("13.999", "0"),
        ("14", "0"),
        ("14.001", "80"),
        ("20", "80"),
        ("20.001", "130"),
        ("30", "130"),
        ("30.001", "240"),
        ("40", "240"),
        ("40.001", "850"),
        ("70", "850"),
    ] {
        for conformity in [CeMarked, WithoutCe] {
            let case = on_press(case(curtain(mm(d)), "0.1"), conformity);
            let name = format!("C, {}, d {d} mm", words(conformity));
            rows.push(Row::step(name, EuPress, case, "C", row::mm(c), ADDITIONS, PUBLIC));
        }
    }
    let mut row = |name: String, case, expected, source, basis| {
        rows.push(Row::distance(name, EuPress, case, expected, source, basis));
    };
    for (conformity, t, d, s) in [
        (CeMarked, "0.14", "14", "280.000"),
        (CeMarked, "0.14", "20", "360.000"),
        (CeMarked, "0.14", "30", "410.000"),
        (CeMarked, "0", "14", "100.000"),
        (CeMarked, "0.049999", "14", "100.000"),
        (CeMarked, "0.050001", "14", "100.002"),
        (CeMarked, "0.249999", "14", "499.998"),
        (CeMarked, "0.25", "14", "500.000"),
        (CeMarked, "0.250001", "14", "500.000"),
        (CeMarked, "0.3125", "14", "500.000"),
        (CeMarked, "0.312501", "14", "500.002"),
        (CeMarked, "0.13", "40", "500.000"),
        (CeMarked, "0.2", "40", "560.000"),
        (CeMarked, "0.2", "50", "1170.000"),
        (WithoutCe, "0.20", "30", "450.000"),
        (WithoutCe, "0", "14", "100.000"),
        (WithoutCe, "0.0625", "14", "100.000"),
        (WithoutCe, "0.062501", "14", "100.002"),
        (WithoutCe, "0.14", "14", "224.000"),
        // No level part at 500 mm on an old press.
        (WithoutCe, "0.3", "14", "480.000"),
        (WithoutCe, "0.35", "14", "560.000"),
    ] {
        let name = format!("{}, T {t} s, d {d} mm", words(conformity));
        row(name, on_press(case(curtain(mm(d)), t), conformity), row::mm(s), SPEEDS, ON_PUBLIC);
    }
    for (t, shrouded, s) in [
        ("0.2", false, "570.000"),
        ("0.2", true, "320.000"),
        ("0.04", true, "100.000"),
        ("0.35", true, "560.000"),
        ("0", false, "250.000"),
    ] {
        for conformity in [CeMarked, WithoutCe] {
            let shroud = if shrouded { "shrouded" } else { "not shrouded" };
            let name = format!("two-hand {shroud}, {}, T {t} s", words(conformity));
            row(name, on_press(case(two_hand(shrouded), t), conformity), row::mm(s), TWO_HAND, ON_PUBLIC);
        }
    }
    for (conformity, hazard, edge, s) in [
        (CeMarked, "1000", "1000", "1470.000"),
        (WithoutCe, "1000", "1000", "1470.000"),
        // Nothing to add over a high edge, but the hand then moves at 2000 mm/s.
        (WithoutCe, "1000", "1600", "400.000"),
        (CeMarked, "1000", "1600", "400.000"),
    ] {
        let case = on_press(case(curtain_under(mm("14"), hazard, edge), "0.2"), conformity);
        let name = format!("{}, T 0.2 s, hazard {hazard}, upper edge {edge} mm", words(conformity));
        row(name, case, row::mm(s), "EN ISO 13855:2010, 6.5, applied to presses", ON_MEMORY);
    }
    let start = |d: &str| on_press(case(starting_curtain(mm(d)), "0.2"), WithoutCe);
    row("curtain of 30 mm may start the stroke".into(), start("30"), row::mm("450"), STARTING, PUBLIC);
    row("curtain just over 30 mm may not".into(), start("30.001"), Forbidden("start of the stroke"), STARTING, PUBLIC);
    row("curtain of 50 mm may not".into(), start("50"), Forbidden("start of the stroke"), STARTING, PUBLIC);
    row("CE mark not known".into(), case(curtain(mm("14")), "0.2"), Missing("CE mark"), SPEEDS, PUBLIC);
    let coarse = on_press(case(curtain(mm("70.001")), "0.2"), CeMarked);
    row("d just over 70 mm".into(), coarse, NotCovered("70 mm"), ADDITIONS, MEMORY);
    let scope = "EN 692, scope";
    for (name, kind) in [("curtain", curtain(mm("14"))), ("two-hand control", two_hand(true))] {
        let case = on_press(on_full_revolution(case(kind, "0.2"), 2), WithoutCe);
        row(format!("full revolution: {name}"), case, Forbidden("part-revolution"), scope, PUBLIC);
    }
    row("two-hand trip".into(), trip(2, 60), NotCovered("full-revolution"), scope, PUBLIC);
    for (name, kind) in [
        ("separate beams", beams(&["400", "900"])),
        ("level field", level_field("50", "300")),
        ("mat", mat("0")),
        ("interlocked guard", guard(Gap::None, None)),
    ] {
        row(name.into(), on_press(case(kind, "0.2"), CeMarked), NotCovered("ISO 13855"), SPEEDS, MEMORY);
    }
    rows
}
