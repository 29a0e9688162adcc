//! ISO 13855:2024 as far as public texts about it tell, and what must be refused because they do not.

use calc::rules::RuleSetId::Iso138552024;
use calc::safeguard::Gap;

use crate::case::{
    beams, case, curtain, curtain_under, guard, level_field, mat, mm, on_full_revolution, starting_curtain,
    tilted_field, trip, two_hand, with_supplement,
};
use crate::row::Expected::{Forbidden, NotCovered};
use crate::row::{self, MEMORY, ON_MEMORY, ON_ONE_TEXT, ON_PUBLIC, ONE_TEXT, Row};

const PARALLEL: &str = "ISO 13855:2024, parallel approach";
const HEIGHT: &str = "ISO 13855:2024, height of the field";
const TWO_HAND: &str = "ISO 13855:2024, two-hand control";
const ORTHOGONAL: &str = "ISO 13855:2024, orthogonal approach";
const SCOPE: &str = "ISO 13855:2024";

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    let mut row = |name: String, case, expected, source, basis| {
        rows.push(Row::distance(name, Iso138552024, case, expected, source, basis));
    };
    for h in ["0", "300", "875", "1000"] {
        let case = case(level_field("50", h), "0.2");
        row(format!("level field, T 0.2 s, H {h} mm"), case, row::mm("1520"), PARALLEL, ON_PUBLIC);
    }
    let with_z = with_supplement(case(level_field("50", "300"), "0.2"), "35");
    row("level field, T 0.2 s, Z 35 mm".into(), with_z, row::mm("1555"), PARALLEL, ON_PUBLIC);
    for (d, h, expected) in [
        ("50", "0", row::mm("1520")),
        ("50.001", "0", NotCovered("d_e")),
        ("70", "300", row::mm("1520")),
        ("70", "299.999", NotCovered("d_e")),
        ("70.001", "300", NotCovered("d_e")),
        ("14", "1000.001", NotCovered("1000 mm")),
    ] {
        let case = case(level_field(d, h), "0.2");
        row(format!("level field, T 0.2 s, d_e {d}, H {h} mm"), case, expected, HEIGHT, ONE_TEXT);
    }
    for (t, s) in [("0", "550"), ("0.2", "870"), ("0.35", "1110")] {
        row(format!("two-hand, T {t} s"), case(two_hand(false), t), row::mm(s), TWO_HAND, ON_ONE_TEXT);
    }
    let with_z = with_supplement(case(two_hand(false), "0.2"), "10");
    row("two-hand, T 0.2 s, Z 10 mm".into(), with_z, row::mm("880"), TWO_HAND, ON_ONE_TEXT);
    for (t, d, z, s) in [
        ("0", "14", "0", "100.000"),
        ("0.049999", "14", "0", "100.000"),
        ("0.050001", "14", "0", "100.002"),
        ("0.1", "14", "0", "200.000"),
        ("0.1", "30", "0", "328.000"),
        ("0.1", "40", "0", "408.000"),
        ("0.1", "40", "25", "433.000"),
        ("0.249999", "14", "0", "499.998"),
        ("0.25", "14", "0", "500.000"),
        ("0.250001", "14", "0", "500.000"),
        ("0.3125", "14", "0", "500.000"),
        ("0.312501", "14", "0", "500.002"),
        ("0.35", "14", "0", "560.000"),
        ("0.35", "14", "40", "600.000"),
    ] {
        let case = with_supplement(case(curtain(mm(d)), t), z);
        row(format!("curtain, T {t} s, d_e {d}, Z {z} mm"), case, row::mm(s), ORTHOGONAL, ON_MEMORY);
    }
    for (name, kind, words, basis) in [
        ("d_e just over 40 mm, formula not known", curtain(mm("40.001")), "40 mm", ONE_TEXT),
        ("d_e 55 mm", curtain(mm("55")), "40 mm", ONE_TEXT),
        ("reaching over", curtain_under(mm("14"), "1000", "1400"), "reaching over", MEMORY),
        ("curtain that starts the stroke", starting_curtain(mm("14")), "start", MEMORY),
        ("tilted field", tilted_field("50", "300", "300", "0.001"), "tilted", MEMORY),
        ("lowest beam above the farthest", tilted_field("50", "200", "400", "0"), "lowest beam", MEMORY),
        ("shrouded two-hand control", two_hand(true), "shrouded", ONE_TEXT),
        ("separate beams", beams(&["400", "900"]), "beams", MEMORY),
        ("mat", mat("0"), "mat", MEMORY),
        ("interlocked guard", guard(Gap::None, None), "guard", MEMORY),
    ] {
        row(name.into(), case(kind, "0.2"), NotCovered(words), SCOPE, basis);
    }
    row("two-hand trip".into(), trip(3, 60), NotCovered("closing time"), SCOPE, MEMORY);
    for (name, kind) in
        [("curtain", curtain(mm("14"))), ("two-hand control", two_hand(false)), ("field", level_field("50", "300"))]
    {
        let case = on_full_revolution(case(kind, "0.2"), 1);
        row(format!("full revolution: {name}"), case, Forbidden("stop the movement"), SCOPE, MEMORY);
    }
    let tests = Iso138552024.rules().least_stops().0;
    rows.push(Row::new(
        "at least 10 measurements for every condition",
        row::Got::Says(tests == 10),
        row::Expected::Says(true),
        SCOPE,
        ONE_TEXT,
    ));
    rows
}
