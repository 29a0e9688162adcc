//! 29 CFR 1910.217(h): start of the stroke by presence sensing.

use calc::calendar::Moment;
use calc::rules::RuleSetId::Us1910217H;
use calc::rules::us_1910_217_h::monitor_limit;
use calc::rules::{Case, Times};
use calc::stop_test::{BrakeState, ClockStart, Condition, Instrument, StopPath, StopTest, Valves};
use calc::units::{Angle, Mass, Rate, Time};

use crate::case::{beams, case, curtain, inch, mm, on_full_revolution, seconds, starting_curtain, two_hand};
use crate::row::Expected::{Forbidden, Ms, NotCovered, Says};
use crate::row::{self, Got, MEMORY, ON_MEMORY, ON_PUBLIC, PUBLIC, Row};

const FORMULA: &str = "29 CFR 1910.217(h)(9)(v)";
const FIGURE: &str = "29 CFR 1910.217, Figure H-1";
const SHARE: &str = "29 CFR 1910.217(h)(2)(ii)";
const MONITOR: &str = "29 CFR 1910.217(h)(5)(iii)";

pub fn rows() -> Vec<Row> {
    [distances(), shares(), monitors()].concat()
}

/// Ts, Tp, Tr and Tm in seconds, and the sensitivity.
fn start(sensitivity: &str, times: [&str; 4]) -> Case {
    let [stopping, device, control, allowance] = times.map(seconds);
    let mut case = case(starting_curtain(inch(sensitivity)), "0");
    case.times = Times { stopping, device, interface: Time::ZERO, control, allowance };
    case
}

fn distances() -> Vec<Row> {
    let zero = ["0"; 4];
    let mut rows = vec![
        Row::distance(
            "Ts 0.200, Tp 0.020, Tr 0.015, Tm 0.019 s, Dp 0",
            Us1910217H,
            start("0.275", ["0.200", "0.020", "0.015", "0.019"]),
            row::inch("17.199"),
            FORMULA,
            ON_MEMORY,
        ),
        Row::distance("every time 0, Dp 0", Us1910217H, start("0.275", zero), row::inch("0.000"), FORMULA, ON_MEMORY),
        Row::distance(
            "Ts 0.2 s, S 1 1/4 in",
            Us1910217H,
            start("1.25", ["0.2", "0", "0", "0"]),
            row::inch("15.915"),
            FORMULA,
            ON_MEMORY,
        ),
        Row::distance(
            "Tm 0.1 s alone enters twice",
            Us1910217H,
            start("0.275", ["0", "0", "0", "0.1"]),
            row::inch("12.600"),
            FORMULA,
            ON_PUBLIC,
        ),
    ];
    for (s, dp) in [("0.1", "0.000"), ("0.275", "0.000"), ("0.5", "0.765"), ("1", "2.465"), ("1.25", "3.315")] {
        rows.push(Row::step(format!("S {s} in"), Us1910217H, start(s, zero), "Dp", row::inch(dp), FIGURE, ON_MEMORY));
    }
    let row =
        |name: &str, case, expected, source, basis| Row::distance(name, Us1910217H, case, expected, source, basis);
    rows.push(row(
        "sensitivity just over 1 1/4 in",
        case(starting_curtain(mm("31.751")), "0.2"),
        Forbidden("(h)(9)(iii)-(iv)"),
        "29 CFR 1910.217(h)(9)(iii)-(iv)",
        PUBLIC,
    ));
    rows.push(row(
        "full revolution",
        on_full_revolution(case(starting_curtain(mm("14")), "0.2"), 1),
        Forbidden("Appendix D"),
        "29 CFR 1910.217, Appendix D",
        PUBLIC,
    ));
    for (what, kind) in [("two-hand control", two_hand(false)), ("separate beams", beams(&["750"]))] {
        rows.push(row(what, case(kind, "0.2"), NotCovered("presence sensing"), FORMULA, MEMORY));
    }
    rows
}

fn test(degrees: i64, brake: BrakeState, stops_ms: &[&str]) -> StopTest {
    StopTest {
        at: Moment::parse("Date", "2026-10-05").unwrap(),
        by: "A. K.".into(),
        condition: Condition {
            angle: Angle::deg(degrees),
            speed: Rate::per_min(60),
            upper_die: Mass::from_base(450_000),
            counterbalance: None,
            operating_pressure: None,
            brake,
            path: StopPath::Normal,
            valves: Valves::Both,
        },
        clock_start: ClockStart::ControlInput,
        instrument: Instrument { name: "timer".into(), serial: "1".into(), calibrated: None, calibration_due: None },
        // Milliseconds and millimetres are both counted in thousandths.
        stops: stops_ms.iter().map(|ms| Time::from_base(mm(ms).base())).collect(),
    }
}

fn passes(tests: &[StopTest]) -> Got {
    Got::Says(Us1910217H.rules().judge_tests(&tests.iter().collect::<Vec<_>>()).is_empty())
}

fn shares() -> Vec<Row> {
    let warm = |degrees, stops: &[&str]| test(degrees, BrakeState::Warm, stops);
    let with_90 =
        |at_90: &[&str]| passes(&[warm(0, &["160"]), warm(45, &["185"]), warm(60, &["195"]), warm(90, at_90)]);
    let row = |name: &str, got, expected| Row::new(name, got, Says(expected), SHARE, ON_PUBLIC);
    vec![
        row("averages 160 at the top, 185, 195, 200 ms", with_90(&["200"]), true),
        row("averages 160 at the top, 185, 195, 205 ms", with_90(&["205"]), false),
        row("averages 160 at the top, 185, 195, 200.001 ms", with_90(&["200.001"]), false),
        row("the average decides, not the longest stop", with_90(&["195", "205"]), true),
        row("45° too long", passes(&[warm(0, &["160"]), warm(45, &["201"])]), false),
        row("60° too long", passes(&[warm(0, &["160"]), warm(60, &["201"])]), false),
        row("about the top from the other side, 357°", passes(&[warm(357, &["160"]), warm(90, &["201"])]), false),
        // 125 % of the average 160.0005 ms is 200.000625 ms.
        row(
            "averages are not rounded before they are compared",
            passes(&[warm(0, &["160", "160.001"]), warm(90, &["200.001"])]),
            false,
        ),
        // Cold 160 and 200 would do; warm 170 and 215 do not, whatever the cold brake shows.
        row(
            "each condition is compared with its own top",
            passes(&[
                test(0, BrakeState::Cold, &["180"]),
                test(90, BrakeState::Cold, &["200"]),
                warm(0, &["170"]),
                warm(90, &["215"]),
            ]),
            false,
        ),
        row(
            "with no top of its own condition, the shortest top decides",
            passes(&[test(0, BrakeState::Cold, &["180"]), test(0, BrakeState::Cold, &["160"]), warm(90, &["205"])]),
            false,
        ),
    ]
}

fn monitors() -> Vec<Row> {
    let cases = [("190", "19"), ("80", "10"), ("100", "10"), ("101", "10.1"), ("0", "10")];
    let mut rows: Vec<Row> = cases
        .map(|(longest, most)| {
            let got = Got::Time(Some(monitor_limit(Time::from_base(mm(longest).base()))));
            Row::new(format!("longest stop at the top {longest} ms"), got, Ms(most.into()), MONITOR, ON_PUBLIC)
        })
        .into();
    let tests = [
        test(0, BrakeState::Warm, &["170", "190"]),
        test(0, BrakeState::Cold, &["185"]),
        test(90, BrakeState::Warm, &["230"]),
    ];
    let limit = Us1910217H.rules().monitor_limit(&tests.iter().collect::<Vec<_>>());
    rows.push(Row::new(
        "the longest of all stops at the top counts, not those of the downstroke",
        Got::Time(limit.map(|limit| limit.most_increase)),
        Ms("19".into()),
        MONITOR,
        ON_PUBLIC,
    ));
    let none = Us1910217H.rules().monitor_limit(&[&test(90, BrakeState::Warm, &["230"])]);
    rows.push(Row::new("no stop at the top, no limit", Got::Says(none.is_some()), Says(false), MONITOR, ON_PUBLIC));
    // A curtain that does not start the stroke has the same distance here; what it must not do is in (c).
    rows.push(Row::distance(
        "curtain that does not start the stroke",
        Us1910217H,
        case(curtain(inch("0.275")), "0.1"),
        row::inch("6.300"),
        FORMULA,
        ON_MEMORY,
    ));
    rows
}
