//! ISO 13855:2010 (and EN 999 before it): every kind of approach but reaching over, which has a file of its own.

use calc::rules::RuleSetId::Iso138552010;
use calc::safeguard::{Gap, LightCurtain, SafeguardKind, WayOver};
use calc::steps::WorkedSteps;
use calc::units::Speed;

use crate::case::{
    beams, case, curtain, guard, level_field, mat, mm, on_full_revolution, round, slot, starting_curtain, tilted_field,
    trip, two_hand,
};
use crate::row::Expected::{self, Forbidden, Missing, NotCovered};
use crate::row::{self, Got, MEMORY, ON_MEMORY, ON_ONE_TEXT, ON_PUBLIC, PUBLIC, Row};

const FINE: &str = "ISO 13855:2010, 6.2.3.1";
const COARSE: &str = "ISO 13855:2010, 6.2.3.2";
const BEAMS: &str = "ISO 13855:2010, 6.2.4 and Annex E";
const PARALLEL: &str = "ISO 13855:2010, 6.3";
const ANGLED: &str = "ISO 13855:2010, 6.4";
const TWO_HAND: &str = "ISO 13855:2010, 8";
const GUARD: &str = "ISO 13855:2010, 9";
const MATS: &str = "ISO 13855:2010, 7";

pub fn rows() -> Vec<Row> {
    [across(), beams_and_fields(), tilted(), two_hands(), guards_and_refusals()].concat()
}

fn row(
    name: String,
    kind: SafeguardKind,
    t: &str,
    expected: Expected,
    source: &'static str,
    basis: &'static str,
) -> Row {
    Row::distance(name, Iso138552010, case(kind, t), expected, source, basis)
}

fn across() -> Vec<Row> {
    let mut rows = Vec::new();
    for (t, d, s) in [("0.09", "14", "180"), ("0.09", "30", "308")] {
        let source = "ISO 13855:2010 Annex A and EN 999, worked example";
        rows.push(row(format!("T {t} s, d {d} mm"), curtain(mm(d)), t, row::mm(s), source, MEMORY));
    }
    for (t, d, s) in [
        // The floor of 100 mm, from below, at, and above.
        ("0", "14", "100.000"),
        ("0.032", "14", "100.000"),
        ("0.049999", "14", "100.000"),
        ("0.05", "14", "100.000"),
        ("0.050001", "14", "100.002"),
        ("0.001", "26", "100.000"),
        ("0.002001", "26", "100.002"),
        // The change of speed at 500 mm, from below, at, and above, and the end of the level part.
        ("0.24", "14", "480.000"),
        ("0.249999", "14", "499.998"),
        ("0.25", "14", "500.000"),
        ("0.250001", "14", "500.000"),
        ("0.28", "14", "500.000"),
        ("0.3125", "14", "500.000"),
        ("0.312501", "14", "500.002"),
        ("0.35", "14", "560.000"),
        // 8 (d − 14), not under 0.
        ("0.1", "1", "200.000"),
        ("0.1", "13.999", "200.000"),
        ("0.1", "14", "200.000"),
        ("0.1", "14.001", "200.008"),
        ("0.1", "20", "248.000"),
        ("0.1", "30", "328.000"),
        ("0.1", "40", "408.000"),
        ("0.20", "40", "528.000"),
        ("0.146", "40", "500.000"),
        ("0.146001", "40", "500.000"),
        ("0.1825", "40", "500.000"),
        ("0.182501", "40", "500.002"),
        ("1", "14", "1600.000"),
    ] {
        rows.push(row(format!("T {t} s, d {d} mm"), curtain(mm(d)), t, row::mm(s), FINE, ON_PUBLIC));
    }
    rows.push(Row::step(
        "S1 at T 0.35 s, d 14",
        Iso138552010,
        case(curtain(mm("14")), "0.35"),
        "S1",
        row::mm("700"),
        FINE,
        ON_PUBLIC,
    ));
    rows.push(Row::step(
        "S1 at T 0.20 s, d 40",
        Iso138552010,
        case(curtain(mm("40")), "0.20"),
        "S1",
        row::mm("608"),
        FINE,
        ON_PUBLIC,
    ));
    for (t, d, s) in
        [("0.2", "40.001", "1170.000"), ("0.2", "55", "1170.000"), ("0.2", "70", "1170.000"), ("0", "70", "850.000")]
    {
        rows.push(row(format!("T {t} s, d {d} mm"), curtain(mm(d)), t, row::mm(s), COARSE, ON_PUBLIC));
    }
    rows.push(row("d just over 70 mm".into(), curtain(mm("70.001")), "0.2", NotCovered("70 mm"), COARSE, PUBLIC));
    // At S1 = 500 mm exactly it is still the fast hand that decides; the change is for more than 500 mm.
    for (t, fast) in [("0.249999", true), ("0.25", true), ("0.250001", false)] {
        let demand = Iso138552010.rules().distance(&case(curtain(mm("14")), t), &mut WorkedSteps::new());
        let speed = demand.ok().and_then(|demand| demand.make_up).map(|make_up| make_up.speed);
        let got = Got::Says(speed == Some(Speed::mm_per_s(2000)));
        rows.push(Row::new(format!("T {t} s, d 14: 2000 mm/s holds"), got, Expected::Says(fast), FINE, PUBLIC));
    }
    let with_lowest = |lowest: Option<&str>| {
        SafeguardKind::LightCurtain(LightCurtain {
            detection: mm("50"),
            lower_edge: lowest.map(mm),
            over: WayOver::Closed,
            starts_stroke: false,
        })
    };
    for (name, lowest, expected) in [
        ("lowest beam at 300 mm", Some("300"), row::mm("1170")),
        ("lowest beam just over 300 mm", Some("300.001"), NotCovered("300 mm")),
        ("lowest beam not known", None, Missing("lowest beam")),
    ] {
        rows.push(row(format!("d 50 mm, T 0.2 s, {name}"), with_lowest(lowest), "0.2", expected, COARSE, MEMORY));
    }
    rows
}

fn beams_and_fields() -> Vec<Row> {
    let mut rows = Vec::new();
    for (heights, expected) in [
        (&["750"][..], row::mm("1520")),
        (&["400", "900"], row::mm("1170")),
        (&["900", "400"], row::mm("1170")),
        (&["300", "700", "1100"], row::mm("1170")),
        (&["1100", "300", "700"], row::mm("1170")),
        (&["300", "600", "900", "1200"], row::mm("1170")),
        (&["400", "901"], NotCovered("400, 900")),
        (&["400", "400", "900"], NotCovered("400, 900")),
        (&["300", "600", "900"], NotCovered("300, 700, 1100")),
        (&[], Missing("heights")),
    ] {
        let name = format!("T 0.2 s, beams at {}", heights.join(", "));
        rows.push(row(name, beams(heights), "0.2", expected, BEAMS, MEMORY));
    }
    for (d, h, expected, basis) in [
        ("50", "0", row::mm("1520"), ON_ONE_TEXT),
        ("50", "300", row::mm("1400"), ON_ONE_TEXT),
        ("70", "300", row::mm("1400"), ON_ONE_TEXT),
        ("14", "0.001", row::mm("1520.000"), ON_ONE_TEXT),
        ("14", "500", row::mm("1320"), ON_ONE_TEXT),
        ("14", "875", row::mm("1170.000"), ON_MEMORY),
        ("14", "874.997", row::mm("1170.002"), ON_MEMORY),
        ("14", "1000", row::mm("1170.000"), ON_MEMORY),
        ("50.001", "0", NotCovered("H/15"), ON_ONE_TEXT),
        ("70.001", "300", NotCovered("H/15"), ON_ONE_TEXT),
        ("70", "299.999", NotCovered("H/15"), ON_ONE_TEXT),
        ("14", "1000.001", NotCovered("1000 mm"), MEMORY),
    ] {
        let name = format!("T 0.2 s, level field, d {d}, H {h} mm");
        rows.push(row(name, level_field(d, h), "0.2", expected, PARALLEL, basis));
    }
    for (h, expected) in [
        ("0", row::mm("1520")),
        ("100", row::mm("1480")),
        ("1000", row::mm("1170")),
        ("1000.001", NotCovered("1000 mm")),
    ] {
        rows.push(row(format!("T 0.2 s, mat at {h} mm"), mat(h), "0.2", expected, MATS, MEMORY));
    }
    rows
}

/// d 30 mm, farthest beam at 500, lowest at 300 mm: along the approach 320 + 1000 = 1320, across it 400 + 128 = 528 and so 500 mm.
fn tilted() -> Vec<Row> {
    let mut rows = Vec::new();
    for (tilt, expected) in [
        ("0", row::mm("1320")),
        ("24.999", row::mm("1320")),
        ("25", row::mm("1320")),
        ("30", row::mm("1320")),
        ("35", row::mm("1320")),
        ("35.001", row::mm("500")),
        ("90", row::mm("500")),
    ] {
        let name = format!("T 0.2 s, d 30, field at {tilt}°");
        rows.push(row(name, tilted_field("30", "500", "300", tilt), "0.2", expected, ANGLED, MEMORY));
    }
    // Fine at 300 mm only as far as 70 mm; what decides along the approach is the lowest beam.
    for (name, d, height, lowest, tilt, expected) in [
        ("too coarse for the lowest beam", "60", "500", "100", "20", NotCovered("H/15")),
        ("too coarse for the lowest beam in the band", "60", "500", "100", "30", NotCovered("H/15")),
        ("coarser than 40 mm across, lowest beam at 500 mm", "50", "900", "500", "60", NotCovered("300 mm")),
        ("lowest beam above the farthest one", "50", "200", "400", "10", NotCovered("lowest beam")),
    ] {
        rows.push(row(name.into(), tilted_field(d, height, lowest, tilt), "0.2", expected, ANGLED, MEMORY));
    }
    rows
}

fn two_hands() -> Vec<Row> {
    let mut rows = Vec::new();
    for (t, shrouded, s) in [
        ("0.2", false, "570.000"),
        ("0.2", true, "320.000"),
        ("0.04", true, "100.000"),
        ("0.0625", true, "100.000"),
        ("0.062501", true, "100.002"),
        ("0", true, "100.000"),
        ("0", false, "250.000"),
        // There is no level part at 500 mm: 1600 mm/s holds throughout.
        ("0.35", true, "560.000"),
        ("0.25", true, "400.000"),
    ] {
        let what = if shrouded { "shrouded" } else { "not shrouded" };
        rows.push(row(format!("T {t} s, {what}"), two_hand(shrouded), t, row::mm(s), TWO_HAND, ON_PUBLIC));
    }
    rows
}

fn guards_and_refusals() -> Vec<Row> {
    let ten = Gap::Open(slot("10", None));
    let mut rows = Vec::new();
    for (name, gap, opens, expected) in [
        ("slot of 10 mm", ten, None, row::mm("560")),
        ("round gap of 10 mm", Gap::Open(round("10")), None, row::mm("500")),
        ("no gap", Gap::None, None, row::mm("480")),
        ("slot of 10 mm, opens in 0.1 s", ten, Some("0.1"), row::mm("400")),
        ("slot of 10 mm, opens in 0.3 s", ten, Some("0.3"), row::mm("80")),
        ("slot of 10 mm, opens in 0.4 s", ten, Some("0.4"), row::mm("80")),
        ("gap not stated", Gap::NotStated, None, Missing("gap")),
        ("gap over 120 mm", Gap::Open(round("120.001")), None, NotCovered("120 mm")),
    ] {
        rows.push(row(format!("guard, T 0.3 s, {name}"), guard(gap, opens), "0.3", expected, GUARD, ON_MEMORY));
    }
    let stops = "ISO 13855:2010, 1 and 4";
    for (name, kind) in [
        ("curtain", curtain(mm("14"))),
        ("beams", beams(&["400", "900"])),
        ("field", level_field("50", "500")),
        ("mat", mat("0")),
        ("two-hand control", two_hand(true)),
        ("guard", guard(Gap::None, None)),
    ] {
        let case = on_full_revolution(case(kind, "0.2"), 3);
        let name = format!("full revolution: {name}");
        rows.push(Row::distance(name, Iso138552010, case, Forbidden("ISO 13855:2010"), stops, MEMORY));
    }
    rows.push(Row::distance("two-hand trip", Iso138552010, trip(3, 60), NotCovered("closing time"), stops, MEMORY));
    rows.push(row(
        "curtain that starts the stroke".into(),
        starting_curtain(mm("14")),
        "0.2",
        NotCovered("start"),
        FINE,
        MEMORY,
    ));
    rows
}
