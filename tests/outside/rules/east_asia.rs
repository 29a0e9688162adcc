//! Japanese and Taiwanese press codes: D = 1.6 (Tl + Ts) and D = 1.6 Tm in mm and ms.

use calc::rules::RuleSetId::EastAsia;
use calc::rules::Times;
use calc::safeguard::{Gap, SafeguardKind};
use calc::units::Time;

use crate::case::{
    beams, case, curtain, guard, level_field, mat, mm, on_full_revolution, opening, seconds, slot, starting_curtain,
    trip, two_hand,
};
use crate::row::Expected::{Forbidden, NotCovered};
use crate::row::{self, MEMORY, ON_MEMORY, PUBLIC, Row};

const DISTANCE: &str = "Japan, structure code for press safety devices, distance";
const EXTRA: &str = "Japan, structure code for press safety devices, extra distance";
const TRIP: &str = "Japan and Taiwan, two-hand start devices, distance";

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    let mut row = |name: String, case, expected, source, basis| {
        rows.push(Row::distance(name, EastAsia, case, expected, source, basis));
    };
    for (what, kind) in
        [("two-hand", two_hand(false)), ("two-hand shrouded", two_hand(true)), ("light", curtain(mm("30")))]
    {
        let mut case = case(kind, "0");
        case.times = Times {
            stopping: seconds("0.150"),
            device: seconds("0.050"),
            interface: Time::ZERO,
            control: Time::ZERO,
            allowance: Time::ZERO,
        };
        row(format!("{what}, Tl 50 ms, Ts 150 ms"), case, row::mm("320.000"), DISTANCE, ON_MEMORY);
    }
    row("two-hand, no time".into(), case(two_hand(false), "0"), row::mm("0.000"), DISTANCE, ON_MEMORY);
    for (width, s) in [
        ("14", "320.000"),
        ("30", "320.000"),
        ("30.001", "520.000"),
        ("35", "520.000"),
        ("35.001", "620.000"),
        ("45", "620.000"),
        ("45.001", "720.000"),
        ("50", "720.000"),
    ] {
        let name = format!("light, 200 ms, shading width {width} mm");
        row(name, case(curtain(mm(width)), "0.2"), row::mm(s), EXTRA, ON_MEMORY);
    }
    row(
        "light, shading width just over 50 mm".into(),
        case(curtain(mm("50.001")), "0.2"),
        Forbidden("art. 20"),
        "Japan, structure code for press safety devices, article 20",
        PUBLIC,
    );
    for (points, per_min, s) in [(4, 200, "360"), (1, 60, "2400"), (14, 120, "457.143"), (2, 90, "1066.667")] {
        let name = format!("two-hand start, {points} engaging points, {per_min} strokes/min");
        row(name, trip(points, per_min), row::mm(s), TRIP, ON_MEMORY);
    }
    for (what, kind) in [("light", curtain(mm("14"))), ("two-hand", two_hand(false))] {
        let case = on_full_revolution(case(kind, "0.2"), 1);
        row(format!("full revolution: {what}"), case, Forbidden("Japan"), DISTANCE, MEMORY);
    }
    row(
        "light-type device that starts the stroke".into(),
        case(starting_curtain(mm("14")), "0.2"),
        NotCovered("start"),
        "Japan, structure code for press safety devices, article 22",
        PUBLIC,
    );
    let part = case(SafeguardKind::TwoHandTrip, "0.2");
    row("two-hand start on a part-revolution clutch".into(), part, NotCovered("two-hand control"), TRIP, MEMORY);
    for (what, case) in [
        ("separate beams", case(beams(&["400", "900"]), "0.2")),
        ("level field", case(level_field("50", "300"), "0.2")),
        ("mat", case(mat("0"), "0.2")),
        ("interlocked guard", case(guard(Gap::None, None), "0.2")),
        ("opening", opening(slot("10", None))),
    ] {
        row(what.into(), case, NotCovered("known here"), DISTANCE, MEMORY);
    }
    rows
}
