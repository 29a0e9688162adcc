//! The limits that a reading is compared with, each worked out from the tightest safeguard of the press.
//!
//! A reading is taken under one reference condition with few stops; the distance rests on the worst condition and on the
//! value that the rule takes forward. So a limit on the reading is its baseline, the mean of the stop test under the same
//! condition, plus the growth that the distance still admits. Without such a stop test the limit is the allowed time itself,
//! and that is said.

use jiff::civil::Date;

use super::series::Series;
use crate::assess::assess;
use crate::basis::Source;
use crate::expr;
use crate::in_force::tests_in_force;
use crate::plant_settings::PlantSettings;
use crate::press::Press;
use crate::reading::ReadingPlace;
use crate::round::divide_down;
use crate::steps::WorkedSteps;
use crate::units::Time;
use crate::value_taken::ValueTaken;

/// A limit on the mean of a reading.
#[derive(Clone, PartialEq, Debug)]
pub struct LimitLine {
    /// Its name on the chart.
    pub name: &'static str,
    /// The limit.
    pub value: Time,
    /// What crossing it means.
    pub consequence: Consequence,
    /// The safeguard that it comes from, by place; `None` for the setting of the monitor.
    pub safeguard: Option<usize>,
    /// How it came about.
    pub steps: WorkedSteps,
}

/// What crossing a limit means, in rising order of gravity.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug)]
pub enum Consequence {
    /// Look into it.
    Warn,
    /// Time all conditions again: what the distance has counted for wear is used up.
    Retime,
    /// Stop using the safeguard: the distance is short.
    StopUsing,
}

impl Consequence {
    /// What to do, as a clause.
    pub const fn words(self) -> &'static str {
        match self {
            Self::Warn => "look into it",
            Self::Retime => "time all conditions again",
            Self::StopUsing => "stop using the safeguard",
        }
    }
}

/// The limits of a press for the readings of `series`, lowest first.
pub fn limit_lines(press: &Press, plant: &PlantSettings, today: Date, series: &Series) -> Vec<LimitLine> {
    let Some(tightest) = tightest(press, plant, today) else { return Vec::new() };
    let mut lines = Vec::new();
    let baseline = baseline(press, series);
    let mut steps = WorkedSteps::new();
    let start = match baseline {
        Some(mean) => steps.put(
            "baseline",
            "mean of the stop test under the same condition",
            expr!["measured"],
            mean,
            Source::GIVEN,
        ),
        None => steps.put(
            "baseline",
            "no stop test under the condition of the readings: the value taken forward in its place",
            expr!["measured"],
            tightest.value,
            Source::GIVEN,
        ),
    };
    let mut line = |name, meaning: &str, growth: Time, consequence| {
        let mut steps = steps.clone();
        let value = steps.put(
            "limit",
            meaning,
            if growth < Time::ZERO { expr![start, "−", -growth] } else { expr![start, "+", growth] },
            start + growth,
            Source::ARITHMETIC,
        );
        lines.push(LimitLine { name, value, consequence, safeguard: Some(tightest.safeguard), steps });
    };
    if tightest.spare > Time::ZERO {
        let share = Time::from_base(divide_down(
            i128::from(tightest.spare.base()) * i128::from(plant.warning_share_percent),
            100,
        ));
        line("warning level", "plus the plant's share of the spare", share, Consequence::Warn);
    }
    line("allowed stopping time", "plus the spare, the wear allowance kept", tightest.spare, Consequence::Retime);
    if tightest.wear > Time::ZERO {
        line(
            "wear allowance used up",
            "plus the wear allowance counted in the distance",
            tightest.wear,
            Consequence::Retime,
        );
    }
    line("distance used up", "plus spare and wear allowance", tightest.spare + tightest.wear, Consequence::StopUsing);
    if let (Some(monitor), ReadingPlace::MonitorDisplay) = (&press.monitor, series.setup.place) {
        let mut steps = WorkedSteps::new();
        steps.put("setting", "setting of the brake monitor", expr!["entered"], monitor.setting, Source::GIVEN);
        lines.push(LimitLine {
            name: "monitor setting",
            value: monitor.setting,
            consequence: Consequence::StopUsing,
            safeguard: None,
            steps,
        });
    }
    lines.sort_by_key(|line| (line.value, line.consequence));
    lines
}

struct Tightest {
    safeguard: usize,
    value: Time,
    spare: Time,
    wear: Time,
}

/// The safeguard whose distance admits the least growth of the stop.
fn tightest(press: &Press, plant: &PlantSettings, today: Date) -> Option<Tightest> {
    (0..press.safeguards.len())
        .filter_map(|index| {
            let found = assess(press, &press.safeguards[index], plant, plant.rules, today);
            let value = found.governing?.value;
            let allowed = found.allowed?;
            let spare = allowed.stopping.unwrap_or(Time::ZERO) - value;
            // What the distance admits in all, as the rule itself counts it, less what it admits with the allowance kept.
            let wear = press.safeguards[index].wear_allowance.unwrap_or(Time::ZERO);
            Some(Tightest { safeguard: index, value, spare, wear })
        })
        .min_by_key(|tightest| tightest.spare + tightest.wear)
}

/// The mean of the latest stop test under the condition and clock of the readings; none for figures of a brake monitor, which
/// times another stop.
fn baseline(press: &Press, series: &Series) -> Option<Time> {
    if series.setup.place == ReadingPlace::MonitorDisplay {
        return None;
    }
    tests_in_force(press, series.setup.condition.path)
        .into_iter()
        .map(|index| &press.stop_tests[index])
        .filter(|test| test.condition == series.setup.condition && test.clock_start == series.setup.clock_start)
        .find_map(|test| ValueTaken::Mean.of(&test.stops))
}
