//! Moments on the plant's calendar: a date, and the time of day where somebody noted it.

use std::fmt;

use jiff::civil::{Date, Time};

use crate::refusal::Refusal;

/// When something happened at the press.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Hash)]
pub struct Moment {
    /// The day.
    pub date: Date,
    /// The time of day, where noted.
    pub time: Option<Time>,
}

impl Moment {
    /// A day without a time.
    pub const fn on(date: Date) -> Self {
        Self { date, time: None }
    }

    /// Reads `2026-11-03` or `2026-11-03 14:30`.
    pub fn parse(what: &str, text: &str) -> Result<Self, Refusal> {
        let text = text.trim();
        let refuse = || {
            Refusal::new(
                what,
                text,
                "a day such as 2026-11-03, with or without a time such as 14:30",
                "Write year, month, day.",
            )
        };
        let (day, time) = text.split_once([' ', 'T']).map_or((text, None), |(day, time)| (day, Some(time.trim())));
        let date = parse_date(what, day).map_err(|_| refuse())?;
        let time = match time {
            None => None,
            Some(time) => Some(parse_time(time).ok_or_else(refuse)?),
        };
        Ok(Self { date, time })
    }

    /// Whether it is certain that this came after `other`. On the same day both must carry a time of day to tell.
    pub fn is_surely_after(self, other: Self) -> bool {
        self.date > other.date
            || (self.date == other.date
                && matches!((self.time, other.time), (Some(mine), Some(theirs)) if mine > theirs))
    }
}

impl fmt::Display for Moment {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.time {
            None => write!(f, "{}", self.date),
            Some(time) => write!(f, "{} {:02}:{:02}", self.date, time.hour(), time.minute()),
        }
    }
}

/// Reads a day written year-month-day, between 1950 and 2200.
pub fn parse_date(what: &str, text: &str) -> Result<Date, Refusal> {
    let text = text.trim();
    let refuse = || {
        Refusal::new(what, text, "a day between 1950-01-01 and 2199-12-31, such as 2026-11-03", "Write year-month-day.")
    };
    let parts: Vec<&str> = text.split('-').collect();
    let [year, month, day] = parts[..] else { return Err(refuse()) };
    let is_written_so = year.len() == 4 && month.len() == 2 && day.len() == 2;
    if !is_written_so || !text.chars().all(|c| c.is_ascii_digit() || c == '-') {
        return Err(refuse());
    }
    let number = |part: &str| part.parse::<i16>().map_err(|_| refuse());
    let (year, month, day) = (number(year)?, number(month)?, number(day)?);
    if !(1950..2200).contains(&year) {
        return Err(refuse());
    }
    Date::new(year, month as i8, day as i8).map_err(|_| refuse())
}

fn parse_time(text: &str) -> Option<Time> {
    let (hour, minute) = text.split_once(':')?;
    if hour.len() != 2 || minute.len() != 2 || !text.chars().all(|c| c.is_ascii_digit() || c == ':') {
        return None;
    }
    Time::new(hour.parse().ok()?, minute.parse().ok()?, 0, 0).ok()
}

/// The day `months` calendar months after `date`; a month that is too short gives its last day.
pub fn months_after(date: Date, months: u32) -> Date {
    date.saturating_add(jiff::Span::new().months(i64::from(months.min(2400))))
}

#[cfg(test)]
mod tests {
    use super::*;
    use jiff::civil::date;

    #[test]
    fn reads_days_and_times_and_refuses_the_rest() {
        assert_eq!(Moment::parse("Date", "2026-11-03"), Ok(Moment::on(date(2026, 11, 3))));
        assert_eq!(Moment::parse("Date", "2026-11-03 14:30").unwrap().to_string(), "2026-11-03 14:30");
        for text in [
            "",
            "3.11.2026",
            "2026-02-30",
            "2026-13-01",
            "26-11-03",
            "2026-11-03 25:00",
            "2026-11-03 1:2",
            "9999-01-01",
        ] {
            assert!(Moment::parse("Date", text).is_err(), "{text:?}");
        }
    }

    #[test]
    fn on_one_day_only_times_tell_the_order() {
        let at = |text: &str| Moment::parse("Date", text).unwrap();
        assert!(at("2026-11-04").is_surely_after(at("2026-11-03 23:00")));
        assert!(!at("2026-11-03").is_surely_after(at("2026-11-03 08:00")));
        assert!(at("2026-11-03 14:00").is_surely_after(at("2026-11-03 08:00")));
        assert!(!at("2026-11-03 08:00").is_surely_after(at("2026-11-03 08:00")));
    }

    #[test]
    fn month_ends_and_leap_days() {
        assert_eq!(months_after(date(2026, 8, 31), 6), date(2027, 2, 28));
        assert_eq!(months_after(date(2028, 2, 29), 12), date(2029, 2, 28));
        assert_eq!(months_after(date(2027, 8, 31), 6), date(2028, 2, 29));
    }
}
