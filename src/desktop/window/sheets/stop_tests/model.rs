//! What the grid of stop tests shows: figures of each test, whether it still counts and why not. Knows nothing of the window.

use calc::in_force::tests_in_force;
use calc::plant_settings::PlantSettings;
use calc::press::Press;
use calc::round::{Towards, time_text};
use calc::stop_test::{ClockStart, Condition, StopPath, StopTest, Valves};
use calc::units::Time;
use calc::value_taken::{ValueTaken, summary_ms};
use calc::verdict::Assessment;

/// The most stops that one test may hold; more than anybody times under one condition.
pub const MOST_STOPS: usize = 200;

/// One row of the grid.
#[derive(Clone, PartialEq, Debug)]
pub struct Row {
    /// What is set at the press: "90°, 60 strokes/min".
    pub title: String,
    /// The rest of the condition.
    pub detail: String,
    /// The day.
    pub day: String,
    /// Whether it counts.
    pub standing: Standing,
    /// The figures of its stops.
    pub figures: Figures,
}

/// Whether a test counts for the shown safeguard.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum Standing {
    /// Its value decides.
    Governs,
    /// It counts, and another decides.
    Counts,
    /// It is of the stop that the shown safeguard does not call for.
    OtherPath,
    /// A later test or event has taken its place; in words.
    Superseded(String),
}

/// The figures of one list of stops, each `None` where the stops are too few for it.
#[derive(Clone, Copy, PartialEq, Debug, Default)]
pub struct Figures {
    /// Number of stops.
    pub count: usize,
    /// Arithmetic mean, rounded up to a whole microsecond.
    pub mean: Option<Time>,
    /// Standard deviation, rounded up to a whole microsecond.
    pub deviation: Option<Time>,
    /// The longest stop.
    pub longest: Option<Time>,
    /// Mean plus three standard deviations.
    pub mean_plus_3_s: Option<Time>,
    /// Tolerance bound: 95 % of stops with 95 % confidence, never less than the longest stop.
    pub tolerance: Option<Time>,
    /// What the plant's rule set takes forward, and in which way.
    pub taken: Option<(ValueTaken, Time)>,
}

impl Figures {
    /// The figures of `stops` under the plant's rules and wishes.
    pub fn of(stops: &[Time], settings: &PlantSettings) -> Self {
        let summary = summary_ms(stops);
        let up = |ms: Option<f64>| ms.and_then(Time::from_ms_up);
        Self {
            count: stops.len(),
            mean: ValueTaken::Mean.of(stops),
            deviation: up(summary.and_then(|summary| summary.standard_deviation())),
            longest: ValueTaken::Greatest.of(stops),
            mean_plus_3_s: up(summary.and_then(|summary| summary.mean_plus_3_s())),
            tolerance: ValueTaken::Tolerance95.of(stops),
            taken: value_taken(stops, settings),
        }
    }
}

/// The value that the rules take forward from `stops`, or the plant's wish where that is more cautious.
fn value_taken(stops: &[Time], settings: &PlantSettings) -> Option<(ValueTaken, Time)> {
    let of = |way: ValueTaken| way.of(stops).map(|value| (way, value));
    let (rule, _) = settings.rules.rules().value_taken();
    let by_rule = of(rule).or_else(|| of(ValueTaken::Greatest))?;
    Some(settings.wish.and_then(of).filter(|wish| wish.1 > by_rule.1).unwrap_or(by_rule))
}

/// The rows of the grid, in the order of entry.
pub fn rows(press: &Press, settings: &PlantSettings, shown: Option<(StopPath, &Assessment)>) -> Vec<Row> {
    let governing = shown.and_then(|(_, assessment)| assessment.governing);
    let standings = standings(press, shown.map(|(path, _)| path), governing.map(|governing| governing.test));
    press
        .stop_tests
        .iter()
        .zip(standings)
        .enumerate()
        .map(|(index, (test, standing))| {
            let mut figures = Figures::of(&test.stops, settings);
            if let Some(governing) = governing.filter(|governing| governing.test == index) {
                figures.taken = Some((governing.taken, governing.value));
            }
            let day = test.at.date.to_string();
            Row { title: title(&test.condition), detail: detail(&test.condition), day, standing, figures }
        })
        .collect()
}

/// The first half of a condition: what is set at the press.
pub fn title(condition: &Condition) -> String {
    let valves =
        if condition.valves == Valves::Both { String::new() } else { format!(", {}", condition.valves.words()) };
    format!("{}°, {}{valves}", condition.angle.digits(), condition.speed)
}

fn detail(condition: &Condition) -> String {
    format!("{} die, {}, {}", condition.upper_die, condition.brake.words(), condition.path.words())
}

fn standings(press: &Press, path: Option<StopPath>, governing: Option<usize>) -> Vec<Standing> {
    let in_force: Vec<usize> =
        [StopPath::Normal, StopPath::Emergency].into_iter().flat_map(|path| tests_in_force(press, path)).collect();
    (0..press.stop_tests.len())
        .map(|index| {
            if !in_force.contains(&index) {
                Standing::Superseded(why_superseded(press, index, &in_force))
            } else if governing == Some(index) {
                Standing::Governs
            } else if path.is_some_and(|path| path != press.stop_tests[index].condition.path) {
                Standing::OtherPath
            } else {
                Standing::Counts
            }
        })
        .collect()
}

/// Why a test no longer counts: a later one of the same condition, or an event after which others were timed.
fn why_superseded(press: &Press, index: usize, in_force: &[usize]) -> String {
    let test = &press.stop_tests[index];
    let same = in_force.iter().map(|other| &press.stop_tests[*other]).find(|other| other.condition == test.condition);
    if let Some(later) = same {
        return format!("replaced {}", later.at.date);
    }
    let resets = press.events.iter().filter(|event| event.kind.resets_brake() && !test.at.is_surely_after(event.at));
    match resets.reduce(|one, other| if one.at.is_surely_after(other.at) { one } else { other }) {
        Some(event) => format!("before {} on {}", event.kind.words(), event.at.date),
        None => "no longer in force".into(),
    }
}

/// A new test under the condition, clock and instrument of `present`, without stops. Who times it is taken over on the same day only.
pub fn next_test(present: &StopTest, today: jiff::civil::Date) -> StopTest {
    StopTest {
        at: calc::calendar::Moment::on(today),
        by: if present.at.date == today { present.by.clone() } else { String::new() },
        condition: present.condition.clone(),
        clock_start: present.clock_start,
        instrument: present.instrument.clone(),
        stops: Vec::new(),
    }
}

/// What the clock saw and what is added to its time, in one sentence.
pub fn clock_words(clock_start: ClockStart) -> &'static str {
    match clock_start {
        ClockStart::FieldEntered => "The clock saw device, interface, control and brake. Nothing is added but wear.",
        ClockStart::DeviceOutput => "The clock saw interface, control and brake. The response of the device is added.",
        ClockStart::ControlInput => "The clock saw control and brake. Device and interface are added.",
        ClockStart::ValveCurrent => "The clock saw the brake alone. Device, interface and control are added.",
    }
}

/// A time for a column of figures: one decimal always, without the unit.
pub fn column_figure(time: Time, towards: Towards) -> String {
    let text = time_text(time, towards);
    let digits = text.trim_end_matches(" ms");
    if digits.contains('.') { digits.to_owned() } else { format!("{digits}.0") }
}

#[cfg(test)]
mod tests {
    use super::*;
    use calc::assess::assess_press;
    use calc::calendar::Moment;
    use calc::press::{Event, EventKind};
    use calc::rules::RuleSetId;
    use jiff::civil::date;

    use crate::window::sheets::sample::{ms, plant_settings, press, stop_test};

    #[test]
    fn the_figures_of_ten_stops_worked_by_hand() {
        // Sum 1837, so mean 183.7; squares about it 32.1, so s = sqrt(32.1 / 9) = 1.888562; mean + 3 s = 189.3657.
        // k(10; 95/95) = 2.911 (ISO 16269-6, one-sided): 183.7 + 2.911 x 1.888562 = 189.198.
        let figures = Figures::of(&ms(&[182, 185, 181, 184, 186, 183, 182, 187, 184, 183]), &plant_settings());
        let digits = |time: Option<Time>| column_figure(time.unwrap(), Towards::Greater);
        assert_eq!(
            (figures.count, digits(figures.mean), digits(figures.longest)),
            (10, "183.7".into(), "187.0".into())
        );
        assert_eq!(figures.deviation, Some(Time::from_base(1_889)));
        assert_eq!((digits(figures.mean_plus_3_s), digits(figures.tolerance)), ("189.4".into(), "189.2".into()));
        assert_eq!(figures.taken, Some((ValueTaken::GreatestOrMeanPlus3s, Time::from_base(189_366))));
    }

    #[test]
    fn too_few_stops_leave_figures_empty() {
        assert_eq!(Figures::of(&[], &plant_settings()), Figures::default());
        let one = Figures::of(&ms(&[182]), &plant_settings());
        assert_eq!((one.mean, one.longest), (Some(Time::ms(182)), Some(Time::ms(182))));
        assert_eq!((one.deviation, one.mean_plus_3_s, one.tolerance), (None, None, None));
        assert_eq!(one.taken, Some((ValueTaken::Greatest, Time::ms(182))));
    }

    #[test]
    fn under_every_rule_set_the_governing_row_takes_forward_what_the_assessment_does() {
        let press = press();
        for rules in RuleSetId::ALL {
            for wish in std::iter::once(None).chain(ValueTaken::ALL.iter().copied().map(Some)) {
                let settings = PlantSettings { rules: *rules, wish, ..plant_settings() };
                for assessment in assess_press(&press, &settings, date(2026, 12, 1)) {
                    let Some(governing) = assessment.governing else { continue };
                    let figures = Figures::of(&press.stop_tests[governing.test].stops, &settings);
                    assert_eq!(figures.taken, Some((governing.taken, governing.value)), "{rules:?} {wish:?}");
                }
            }
        }
    }

    #[test]
    fn superseded_tests_say_why() {
        let mut press = press();
        press.stop_tests.truncate(1);
        press.stop_tests.push(stop_test("2026-11-20", 90, &[170; 10]));
        press.stop_tests.push(stop_test("2026-11-20", 120, &[150; 10]));
        let found = |press: &Press| standings(press, Some(StopPath::Normal), Some(1));
        assert_eq!(
            found(&press),
            [Standing::Superseded("replaced 2026-11-20".into()), Standing::Governs, Standing::Counts]
        );
        press.stop_tests.push(stop_test("2026-11-25", 180, &[150; 10]));
        press.events.push(Event {
            at: Moment::on(date(2026, 11, 22)),
            kind: EventKind::LiningReplaced,
            safeguard: None,
            note: String::new(),
        });
        let before = || Standing::Superseded("before lining replaced on 2026-11-22".into());
        assert_eq!(found(&press)[1..], [before(), before(), Standing::Counts]);
    }

    #[test]
    fn a_new_test_takes_over_condition_and_instrument_and_no_stops() {
        let present = stop_test("2026-10-05 09:30", 90, &[182]);
        let next = next_test(&present, date(2026, 12, 1));
        assert_eq!((&next.condition, &next.instrument), (&present.condition, &present.instrument));
        assert!(next.stops.is_empty() && next.by.is_empty());
        assert_eq!(next_test(&present, date(2026, 10, 5)).by, "A. K.");
    }
}
