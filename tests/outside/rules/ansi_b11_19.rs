//! ANSI B11.19, whose text is not public: the formula from literature, most figures from memory.

use calc::rules::RuleSetId::AnsiB1119;
use calc::rules::Times;
use calc::safeguard::{Gap, LightCurtain, SafeguardKind, WayOver};
use calc::units::{Angle, Length, Time};

use crate::case::{
    beams, case, curtain, guard, inch, level_field, mat, mm, on_full_revolution, seconds, slot, starting_curtain,
    tilted_field, trip, two_hand,
};
use crate::row::Expected::{Forbidden, Missing, NotCovered};
use crate::row::{self, MEMORY, ON_MEMORY, ON_ONE_TEXT, Row};

const FORMULA: &str = "ANSI B11.19, safety distance formula";
const PENETRATION: &str = "ANSI B11.19, depth penetration factor";
const HORIZONTAL: &str = "ANSI B11.19, horizontal field";

fn coarse_curtain(detection: Length, lowest: &str, upper_edge: &str) -> SafeguardKind {
    let over = WayOver::Open { hazard: mm("1000"), upper_edge: inch(upper_edge) };
    SafeguardKind::LightCurtain(LightCurtain { detection, lower_edge: Some(inch(lowest)), over, starts_stroke: false })
}

fn field_in(detection: &str, height: &str) -> SafeguardKind {
    SafeguardKind::HorizontalField(calc::safeguard::HorizontalField {
        detection: inch(detection),
        height: inch(height),
        lowest: inch(height),
        tilt: Angle::ZERO,
    })
}

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    let mut all_parts = case(two_hand(false), "0");
    all_parts.times = Times {
        stopping: seconds("0.150"),
        device: seconds("0.020"),
        interface: seconds("0.005"),
        control: seconds("0.010"),
        allowance: seconds("0.015"),
    };
    rows.push(Row::distance(
        "Ts 0.150, Tr 0.020 + 0.005, Tc 0.010, Tbm 0.015 s, two-hand",
        AnsiB1119,
        all_parts.clone(),
        row::inch("12.6"),
        FORMULA,
        ON_ONE_TEXT,
    ));
    rows.push(Row::distance(
        "the same, curtain of 1 1/4 in",
        AnsiB1119,
        calc::rules::Case { kind: curtain(inch("1.25")), ..all_parts },
        row::inch("15.912"),
        FORMULA,
        ON_MEMORY,
    ));
    for (s, dpf) in [
        ("0.1", "0.000"),
        ("0.276", "0.000"),
        ("0.5", "0.762"),
        ("0.75", "1.612"),
        ("1", "2.462"),
        ("1.25", "3.312"),
        ("2", "5.862"),
        ("2.5", "7.562"),
    ] {
        // 0.276 in is 7.0104 mm: not a whole micrometre, so the nearest one below stands for it.
        let detection = if s == "0.276" { mm("7.010") } else { inch(s) };
        let case = case(curtain(detection), "0");
        rows.push(Row::step(format!("S {s} in"), AnsiB1119, case, "Dpf", row::inch(dpf), PENETRATION, ON_MEMORY));
    }
    for (s, dpf) in [("14", "23.8"), ("20", "44.2"), ("25", "61.2"), ("30", "78.2"), ("40", "112.2"), ("50", "146.2")] {
        let case = case(curtain(mm(s)), "0");
        rows.push(Row::step(format!("S {s} mm"), AnsiB1119, case, "Dpf", row::mm(dpf), PENETRATION, ON_MEMORY));
    }
    let mut row = |name: &str, case, expected, source, basis| {
        rows.push(Row::distance(name, AnsiB1119, case, expected, source, basis));
    };
    let over_fine = inch("2.5") + Length::from_base(1);
    for (name, kind, expected) in [
        ("just over 2.5 in, beams from 12 to 48 in: through", coarse_curtain(over_fine, "12", "48"), row::inch("48.6")),
        ("23.6 in, beams from 12 to 48 in: through", coarse_curtain(inch("23.6"), "12", "48"), row::inch("48.6")),
        ("3 in, upper edge just under 48 in: over", coarse_curtain(inch("3"), "12", "47.99"), row::inch("60.6")),
        ("3 in, upper edge 36 in: over", coarse_curtain(inch("3"), "12", "36"), row::inch("60.6")),
        ("3 in, upper edge under 36 in", coarse_curtain(inch("3"), "12", "35.99"), NotCovered("under 36 in")),
        ("3 in, lowest beam over 12 in", coarse_curtain(inch("3"), "12.01", "48"), NotCovered("above 12 in")),
        ("over 23.6 in", coarse_curtain(inch("23.6") + Length::from_base(1), "12", "48"), NotCovered("over 23.6 in")),
        ("3 in, heights not known", curtain(inch("3")), Missing("heights")),
        ("beams from 300 to 1300 mm: through", beams(&["300", "700", "1300"]), row::inch("48.6")),
        ("the same beams in another order", beams(&["1300", "300", "700"]), row::inch("48.6")),
        ("beams from 300 to 1100 mm: over", beams(&["300", "700", "1100"]), row::inch("60.6")),
        ("no beams", beams(&[]), Missing("heights")),
    ] {
        row(&format!("{name}, 0.2 s"), case(kind, "0.2"), expected, PENETRATION, ON_MEMORY);
    }
    for (name, kind, expected) in [
        ("H 0, S 2 in", field_in("2", "0"), row::inch("60.6")),
        ("H 15 in, S 3 in", field_in("3", "15"), row::inch("54.6")),
        ("H 30 in: floor of 36 in reached", field_in("2", "30"), row::inch("48.6")),
        ("H 39 in: floor of 36 in kept", field_in("2", "39"), row::inch("48.6")),
        ("H 15 in, S just over H/15 + 2 in", level_field("76.201", "381"), NotCovered("H/15")),
        ("H over 1000 mm", level_field("50", "1000.001"), NotCovered("1000 mm")),
        ("lowest beam above the farthest", tilted_field("50", "200", "400", "10"), NotCovered("lowest beam")),
        ("tilt 29.999°, H 0, S 30 mm: horizontal", tilted_field("30", "0", "0", "29.999"), row::inch("60.6")),
        ("tilt 30°, S 1 1/4 in: vertical", tilted_field("31.75", "0", "0", "30"), row::inch("15.912")),
        ("tilt 30°, S over 2.5 in", tilted_field("63.501", "300", "300", "30"), NotCovered("2.5 in")),
    ] {
        row(&format!("field: {name}, 0.2 s"), case(kind, "0.2"), expected, HORIZONTAL, ON_MEMORY);
    }
    let stops = "ANSI B11.19, the safeguard must be able to stop the slide";
    let full = |kind| on_full_revolution(case(kind, "0.2"), 2);
    row("full revolution: curtain", full(curtain(mm("14"))), Forbidden("stop the slide"), stops, MEMORY);
    row("full revolution: two-hand control", full(two_hand(false)), Forbidden("stop the slide"), stops, MEMORY);
    row("two-hand trip", trip(2, 60), NotCovered("closing time"), FORMULA, MEMORY);
    row("interlocked guard", case(guard(Gap::None, None), "0.2"), NotCovered("guard"), FORMULA, MEMORY);
    row("mat", case(mat("0"), "0.2"), NotCovered("mat"), FORMULA, MEMORY);
    row("opening", crate::case::opening(slot("10", None)), NotCovered("opening"), FORMULA, MEMORY);
    row(
        "curtain that starts the stroke",
        case(starting_curtain(mm("14")), "0.2"),
        NotCovered("start"),
        FORMULA,
        MEMORY,
    );
    let mut no_time = case(two_hand(false), "0");
    no_time.times.stopping = Time::ZERO;
    row("every time 0, two-hand", no_time, row::inch("0.000"), FORMULA, ON_ONE_TEXT);
    rows
}
