//! OSHA's own chart of stopping time and distance, from the machine-guarding eTool page on press safety distance.
//!
//! The chart is D / 63 with the time cut, and in one place raised, to a whole millisecond, in which a hand goes 0.063 in: that
//! is the tolerance. At 0.072 s the chart prints 4.5 in where the formula of the law gives 4.536 in, so it is not always on
//! the safe side; the program follows the formula.

use calc::rules::RuleSetId::Us1910217;
use calc::steps::WorkedSteps;

use crate::case::{case, curtain, inch, mm};
use crate::row::{Expected, Got, ON_PUBLIC, PUBLIC, Row, more_than_inch};

const SOURCE: &str = "OSHA machine-guarding eTool, press safety distance chart";

const CHART: [(&str, &str); 28] = [
    ("0.055", "3.5"),
    ("0.063", "4"),
    ("0.072", "4.5"),
    ("0.079", "5"),
    ("0.087", "5.5"),
    ("0.095", "6"),
    ("0.103", "6.5"),
    ("0.111", "7"),
    ("0.119", "7.5"),
    ("0.126", "8"),
    ("0.134", "8.5"),
    ("0.142", "9"),
    ("0.150", "9.5"),
    ("0.158", "10"),
    ("0.317", "20"),
    ("0.325", "20.5"),
    ("0.333", "21"),
    ("0.341", "21.5"),
    ("0.349", "22"),
    ("0.357", "22.5"),
    ("0.365", "23"),
    ("0.373", "23.5"),
    ("0.380", "24"),
    ("0.388", "24.5"),
    ("0.396", "25"),
    ("0.404", "25.5"),
    ("0.412", "26"),
    ("0.420", "26.5"),
];

pub fn rows() -> Vec<Row> {
    let chart = CHART.iter().map(|(ts, ds)| {
        let expected = Expected::MoreThanInchWithin((*ds).into(), "0.063".into());
        Row::distance(format!("chart: {ts} s"), Us1910217, case(curtain(mm("14")), ts), expected, SOURCE, PUBLIC)
    });
    let formula = [("0.126", "7.938"), ("0.317", "19.971"), ("0.072", "4.536")].map(|(ts, ds)| {
        let name = format!("formula beside the chart: {ts} s");
        Row::distance(name, Us1910217, case(curtain(mm("14")), ts), more_than_inch(ds), SOURCE, ON_PUBLIC)
    });
    let demand = Us1910217.rules().distance(&case(curtain(mm("14")), "0.072"), &mut WorkedSteps::new());
    let trap = Row::new(
        "trap: the 4.5 in charted for 0.072 s do not satisfy the law",
        Got::Says(demand.is_ok_and(|demand| demand.is_met_by(inch("4.5")))),
        Expected::Says(false),
        SOURCE,
        ON_PUBLIC,
    );
    chart.chain(formula).chain([trap]).collect()
}
