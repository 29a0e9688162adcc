//! What is due when: stop tests, readings and calibrations of a press, and the intervals that laws and guides give.

use jiff::civil::Date;

use crate::basis::{Basis, Source};
use crate::in_force::{next_test_due, tests_in_force};
use crate::plant_settings::PlantSettings;
use crate::press::Press;
use crate::stop_test::{Instrument, StopPath};

/// A time between two checks.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Interval {
    /// So many weeks.
    Weeks(u32),
    /// So many calendar months; a month that is too short gives its last day.
    Months(u32),
}

impl Interval {
    /// The day by which the next check is due after one on `date`.
    pub fn after(self, date: Date) -> Date {
        match self {
            Self::Weeks(weeks) => date.saturating_add(jiff::Span::new().weeks(i64::from(weeks.min(5000)))),
            Self::Months(months) => crate::calendar::months_after(date, months),
        }
    }

    /// "every week", "every 6 months".
    pub fn words(self) -> String {
        match self {
            Self::Weeks(1) => "every week".into(),
            Self::Weeks(weeks) => format!("every {weeks} weeks"),
            Self::Months(1) => "every month".into(),
            Self::Months(12) => "every year".into(),
            Self::Months(months) => format!("every {months} months"),
        }
    }
}

/// Intervals that a law or guide gives.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Preset {
    /// Where it holds and for what.
    pub name: &'static str,
    /// The interval.
    pub interval: Interval,
    /// Where it stands.
    pub source: Source,
    /// What else the text asks for, in a few words.
    pub remark: &'static str,
}

/// The presets, by jurisdiction.
pub const PRESETS: [Preset; 7] = [
    Preset {
        name: "United States, clutch and brake without control reliability and monitor",
        interval: Interval::Weeks(1),
        source: Source::new("29 CFR 1910.217", "(e)(1)(ii)", Basis::PublicText),
        remark: "not needed where (b)(13) and (b)(14) are met",
    },
    Preset {
        name: "United States, start by presence sensing",
        interval: Interval::Months(12),
        source: Source::new("29 CFR 1910.217", "(h)(11)(ii)", Basis::PublicText),
        remark: "recertification by the validation body",
    },
    Preset {
        name: "Michigan",
        interval: Interval::Months(6),
        source: Source::new("Michigan General Industry Part 24", "R 408.12412(1)", Basis::PublicText),
        remark: "and weekly inspection and test of clutch and brake unless monitored",
    },
    Preset {
        name: "United Kingdom, other than fixed guards only",
        interval: Interval::Months(6),
        source: Source::new("PUWER 1998", "reg. 32(4)", Basis::PublicText),
        remark: "and after each setting and within four hours of each shift, reg. 33",
    },
    Preset {
        name: "United Kingdom, fixed guards only",
        interval: Interval::Months(12),
        source: Source::new("PUWER 1998", "reg. 32(4)", Basis::PublicText),
        remark: "and after exceptional circumstances",
    },
    Preset {
        name: "Germany, hand-fed metal presses",
        interval: Interval::Months(12),
        source: Source::new("TRBS 1201 as in DGUV Information 209-030", "annex 4", Basis::PublicText),
        remark: "single shift; shorter with more shifts or near the limits",
    },
    Preset {
        name: "Monthly readings",
        interval: Interval::Months(1),
        source: Source::PRACTICE,
        remark: "a habit of maintenance",
    },
];

/// One thing that is due at a press.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Due {
    /// The day by which it is due.
    pub on: Date,
    /// What.
    pub what: DueKind,
}

/// What can be due.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum DueKind {
    /// A stop test of this path.
    StopTest(StopPath),
    /// The first stop test of this path: there is none yet.
    FirstStopTest(StopPath),
    /// A reading.
    Reading,
    /// The calibration of an instrument that the tests in force or the latest reading were timed with.
    Calibration {
        /// Name and serial number.
        instrument: String,
    },
}

impl DueKind {
    /// What to do, in words.
    pub fn words(&self) -> String {
        match self {
            Self::StopTest(path) => format!("stop test, {}", path.words()),
            Self::FirstStopTest(path) => format!("first stop test, {}", path.words()),
            Self::Reading => "reading".into(),
            Self::Calibration { instrument } => format!("calibration of {instrument}"),
        }
    }
}

/// Everything that is due at a press, earliest first. What was never done is due `today`.
pub fn due_at(press: &Press, plant: &PlantSettings, today: Date) -> Vec<Due> {
    let mut due = Vec::new();
    let mut instruments: Vec<&Instrument> = Vec::new();
    for path in StopPath::ALL {
        if !press.safeguards.iter().any(|safeguard| safeguard.kind.needs_stop() && safeguard.stop_path == *path) {
            continue;
        }
        let tests = tests_in_force(press, *path);
        instruments.extend(tests.iter().map(|index| &press.stop_tests[*index].instrument));
        due.push(match next_test_due(press, &tests, plant.test_interval_months) {
            Some(on) => Due { on, what: DueKind::StopTest(*path) },
            None => Due { on: today, what: DueKind::FirstStopTest(*path) },
        });
    }
    let is_timed = press.safeguards.iter().any(|safeguard| safeguard.kind.needs_stop());
    let latest = press.readings.iter().max_by_key(|reading| reading.at.date);
    if let (true, Some(interval)) = (is_timed, plant.reading_interval) {
        due.push(Due { on: latest.map_or(today, |reading| interval.after(reading.at.date)), what: DueKind::Reading });
    }
    instruments.extend(latest.map(|reading| &reading.instrument));
    for instrument in instruments {
        if let Some(on) = latest_calibration_due(press, instrument) {
            let what =
                DueKind::Calibration { instrument: format!("{} {}", instrument.name, instrument.serial).trim().into() };
            let calibration = Due { on, what };
            if !due.contains(&calibration) {
                due.push(calibration);
            }
        }
    }
    due.sort_by_key(|due| due.on);
    due
}

/// The latest due date that any test or reading knows for the same instrument.
fn latest_calibration_due(press: &Press, instrument: &Instrument) -> Option<Date> {
    let tests = press.stop_tests.iter().map(|test| &test.instrument);
    let readings = press.readings.iter().map(|reading| &reading.instrument);
    tests
        .chain(readings)
        .filter(|other| other.name == instrument.name && other.serial == instrument.serial)
        .filter_map(|other| other.calibration_due)
        .max()
}

/// The last day of the week of `today`, weeks ending on Sunday.
pub fn end_of_week(today: Date) -> Date {
    let days = 7 - i64::from(today.weekday().to_monday_one_offset());
    today.saturating_add(jiff::Span::new().days(days))
}

/// The last day of the month of `today`.
pub fn end_of_month(today: Date) -> Date {
    today.last_of_month()
}

#[cfg(test)]
mod tests {
    use super::*;
    use jiff::civil::date;

    #[test]
    fn month_ends_and_leap_days() {
        for (from, interval, on) in [
            (date(2026, 1, 31), Interval::Months(1), date(2026, 2, 28)),
            (date(2028, 1, 31), Interval::Months(1), date(2028, 2, 29)),
            (date(2028, 2, 29), Interval::Months(12), date(2029, 2, 28)),
            (date(2026, 12, 28), Interval::Weeks(1), date(2027, 1, 4)),
            (date(2026, 3, 1), Interval::Months(6), date(2026, 9, 1)),
        ] {
            assert_eq!(interval.after(from), on);
        }
        assert_eq!(end_of_week(date(2026, 12, 1)), date(2026, 12, 6));
        assert_eq!(end_of_week(date(2026, 12, 6)), date(2026, 12, 6));
        assert_eq!(end_of_month(date(2028, 2, 3)), date(2028, 2, 29));
    }
}
