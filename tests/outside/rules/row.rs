//! One row of an outside check: what was asked, what came, what the source prints.

use calc::rules::{Case, Demand, NoDemand, RuleSetId};
use calc::steps::{Term, WorkedSteps};
use calc::units::{Length, Time};

pub const PUBLIC: &str = "public text";
pub const ONE_TEXT: &str = "one public text";
pub const MEMORY: &str = "from memory";
pub const ON_PUBLIC: &str = "arithmetic on public text";
pub const ON_ONE_TEXT: &str = "arithmetic on one public text";
pub const ON_MEMORY: &str = "arithmetic on what is known from memory";
pub const BASES: [&str; 6] = [PUBLIC, ONE_TEXT, MEMORY, ON_PUBLIC, ON_ONE_TEXT, ON_MEMORY];

/// What the program gave.
#[derive(Clone, Debug)]
pub enum Got {
    Demand(Result<Demand, NoDemand>),
    Step(Option<Term>),
    Length(Option<Length>),
    Time(Option<Time>),
    Says(bool),
}

/// What the source prints.
#[derive(Clone, Debug)]
pub enum Expected {
    /// A distance that may be equal, in mm.
    Mm(String),
    /// A distance that may be equal, in inches.
    Inch(String),
    /// A distance that must be exceeded, in inches.
    MoreThanInch(String),
    /// A distance that must be exceeded, in inches, within this much.
    MoreThanInchWithin(String, String),
    /// A time in seconds.
    Seconds(String),
    /// A time in milliseconds.
    Ms(String),
    /// A greatest time in seconds: at most as printed, and no more than this many microseconds less.
    AtMostSeconds(String, i64),
    /// Forbidden, under this clause.
    Forbidden(&'static str),
    /// Not covered, with these words in the reason.
    NotCovered(&'static str),
    /// A figure is missing, with these words in the reason.
    Missing(&'static str),
    /// Yes or no.
    Says(bool),
}

pub fn mm(printed: &str) -> Expected {
    Expected::Mm(printed.into())
}

pub fn inch(printed: &str) -> Expected {
    Expected::Inch(printed.into())
}

pub fn more_than_inch(printed: &str) -> Expected {
    Expected::MoreThanInch(printed.into())
}

#[derive(Clone, Debug)]
pub struct Row {
    pub name: String,
    pub got: Got,
    pub expected: Expected,
    pub source: &'static str,
    pub basis: &'static str,
}

impl Row {
    pub fn new(
        name: impl Into<String>,
        got: Got,
        expected: Expected,
        source: &'static str,
        basis: &'static str,
    ) -> Self {
        Self { name: name.into(), got, expected, source, basis }
    }

    /// The distance that a rule set asks for.
    pub fn distance(
        name: impl Into<String>,
        rules: RuleSetId,
        case: Case,
        expected: Expected,
        source: &'static str,
        basis: &'static str,
    ) -> Self {
        let demand = rules.rules().distance(&case, &mut WorkedSteps::new());
        Self::new(name, Got::Demand(demand), expected, source, basis)
    }

    /// The value of one line of the derivation.
    pub fn step(
        name: impl Into<String>,
        rules: RuleSetId,
        case: Case,
        symbol: &str,
        expected: Expected,
        source: &'static str,
        basis: &'static str,
    ) -> Self {
        let mut steps = WorkedSteps::new();
        let _ = rules.rules().distance(&case, &mut steps);
        let value = steps.iter().rfind(|step| step.symbol == symbol).map(|step| step.value.clone());
        Self::new(name, Got::Step(value), expected, source, basis)
    }

    /// What disagrees, if anything.
    pub fn disagreement(&self) -> Option<String> {
        let agrees = match (&self.got, &self.expected) {
            (Got::Demand(Ok(demand)), Expected::Mm(printed)) => !demand.strict && is_mm(demand.required, printed),
            (Got::Demand(Ok(demand)), Expected::Inch(printed)) => !demand.strict && is_inch(demand.required, printed),
            (Got::Demand(Ok(demand)), Expected::MoreThanInch(printed)) => {
                demand.strict && is_inch(demand.required, printed)
            }
            (Got::Demand(Ok(demand)), Expected::MoreThanInchWithin(printed, tolerance)) => {
                let apart = Decimal::of(printed).times(25_400).apart_from(demand.required.base());
                demand.strict && apart.is_at_most(&Decimal::of(tolerance).times(25_400))
            }
            (Got::Demand(Err(NoDemand::Forbidden { source, .. })), Expected::Forbidden(clause)) => {
                source.place().contains(clause)
            }
            (Got::Demand(Err(NoDemand::NotCovered { what })), Expected::NotCovered(words)) => what.contains(words),
            (Got::Demand(Err(NoDemand::Missing { what })), Expected::Missing(words)) => what.contains(words),
            (Got::Step(Some(Term::Length(length))) | Got::Length(Some(length)), Expected::Mm(printed)) => {
                is_mm(*length, printed)
            }
            (Got::Step(Some(Term::Length(length))) | Got::Length(Some(length)), Expected::Inch(printed)) => {
                is_inch(*length, printed)
            }
            (Got::Step(Some(Term::Time(time))) | Got::Time(Some(time)), Expected::Seconds(printed)) => {
                is_printed(time.base(), printed, 1_000_000)
            }
            (Got::Step(Some(Term::Time(time))) | Got::Time(Some(time)), Expected::Ms(printed)) => {
                is_printed(time.base(), printed, 1_000)
            }
            (Got::Time(Some(time)), Expected::AtMostSeconds(printed, less)) => {
                let most = Decimal::of(printed).times(1_000_000).whole();
                most - less <= time.base() && time.base() <= most
            }
            (Got::Says(got), Expected::Says(expected)) => got == expected,
            _ => false,
        };
        (!agrees).then(|| {
            format!("{}: got {:?}, expected {:?} ({}, {})", self.name, self.got, self.expected, self.source, self.basis)
        })
    }
}

fn is_mm(length: Length, printed: &str) -> bool {
    is_printed(length.base(), printed, 1_000)
}

fn is_inch(length: Length, printed: &str) -> bool {
    is_printed(length.base(), printed, 25_400)
}

/// Whether `count`, of which `per_unit` make the printed unit, lies within half a unit of the last printed digit.
fn is_printed(count: i64, printed: &str, per_unit: i128) -> bool {
    let printed = Decimal::of(printed);
    let half = Decimal { digits: 5, decimals: printed.decimals + 1 };
    printed.times(per_unit).apart_from(count).is_at_most(&half.times(per_unit))
}

/// A printed number, exactly: digits over a power of ten.
#[derive(Clone, Copy, Debug)]
pub struct Decimal {
    digits: i128,
    decimals: u32,
}

impl Decimal {
    pub fn of(printed: &str) -> Self {
        let (whole, decimals) = printed.split_once('.').unwrap_or((printed, ""));
        let digits = format!("{whole}{decimals}").parse().unwrap_or_else(|_| panic!("no number: {printed}"));
        Self { digits, decimals: decimals.len() as u32 }
    }

    pub fn times(self, factor: i128) -> Self {
        Self { digits: self.digits * factor, ..self }
    }

    /// The whole number that it is.
    pub fn whole(self) -> i64 {
        let divisor = 10_i128.pow(self.decimals);
        assert_eq!(self.digits % divisor, 0, "{self:?} is no whole number");
        i64::try_from(self.digits / divisor).unwrap()
    }

    fn apart_from(self, count: i64) -> Self {
        Self { digits: (self.digits - i128::from(count) * 10_i128.pow(self.decimals)).abs(), ..self }
    }

    fn is_at_most(&self, other: &Self) -> bool {
        self.digits * 10_i128.pow(other.decimals) <= other.digits * 10_i128.pow(self.decimals)
    }
}

#[test]
fn half_a_unit_of_the_last_printed_digit_is_in_and_more_is_out() {
    assert!(is_printed(17_199, "17.2", 1_000) && is_printed(17_250, "17.2", 1_000));
    assert!(!is_printed(17_251, "17.2", 1_000) && !is_printed(17_149, "17.2", 1_000));
    assert!(is_printed(800_100, "31.5", 25_400) && !is_printed(801_371, "31.5", 25_400));
}
