//! A result is a derivation: line by line the symbol, the expression with its figures, the value, and where it stands.

use crate::basis::Source;
use crate::round::{self, Towards};
use crate::units::{Angle, Length, LengthUnit, Rate, Speed, Time};

/// One piece of an expression; quantities stay quantities, so that the same line can be shown in millimetres or inches.
#[derive(Clone, PartialEq, Debug)]
pub enum Term {
    /// Signs and words.
    Word(String),
    /// A time.
    Time(Time),
    /// A length.
    Length(Length),
    /// A hand speed.
    Speed(Speed),
    /// An angle.
    Angle(Angle),
    /// A rate of strokes.
    Rate(Rate),
}

macro_rules! terms {
    ($($kind:ident),*) => {$(
        impl From<$kind> for Term { fn from(value: $kind) -> Self { Self::$kind(value) } }
    )*};
}
terms!(Time, Length, Speed, Angle, Rate);
impl From<&str> for Term {
    fn from(word: &str) -> Self {
        Self::Word(word.to_owned())
    }
}
impl From<String> for Term {
    fn from(word: String) -> Self {
        Self::Word(word)
    }
}

impl Term {
    /// The piece as text, with its unit.
    pub fn text(&self, unit: LengthUnit) -> String {
        match self {
            Self::Word(word) => word.clone(),
            Self::Time(time) => time.to_string(),
            Self::Length(length) => {
                format!("{} {}", round::length_digits_full(*length, unit, Towards::Nearest), unit.sign())
            }
            Self::Speed(speed) => match unit {
                LengthUnit::Millimetre => speed.to_string(),
                LengthUnit::Inch => {
                    let per_s = Length::from_base(speed.base());
                    format!("{} in/s", round::length_digits(per_s, unit, Towards::Nearest))
                }
            },
            Self::Angle(angle) => format!("{}°", angle.digits()),
            Self::Rate(rate) => rate.to_string(),
        }
    }
}

/// Several pieces in a row, such as `1600 mm/s × 200 ms + 48 mm`.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct Expression(pub Vec<Term>);

impl Expression {
    /// The expression as one line of text.
    pub fn text(&self, unit: LengthUnit) -> String {
        self.0.iter().map(|term| term.text(unit)).collect::<Vec<_>>().join(" ")
    }
}

/// Writes an expression piece by piece: `expr![speed, "×", time]`.
#[macro_export]
macro_rules! expr {
    ($($term:expr),* $(,)?) => { $crate::steps::Expression(vec![$($crate::steps::Term::from($term)),*]) };
}

/// One line of a derivation.
#[derive(Clone, PartialEq, Debug)]
pub struct Step {
    /// The symbol of the law or standard, or ours where it has none.
    pub symbol: &'static str,
    /// What it is, in words.
    pub meaning: String,
    /// How it came about, with the figures in it.
    pub expression: Expression,
    /// The value.
    pub value: Term,
    /// Where it stands.
    pub source: Source,
}

/// The derivation of a result, in the order in which a person would write it.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct WorkedSteps {
    steps: Vec<Step>,
}

impl WorkedSteps {
    /// No steps yet.
    pub fn new() -> Self {
        Self::default()
    }

    /// Adds a line and gives its value back, so that what is computed on is what was written down.
    pub fn put<T: Copy + Into<Term>>(
        &mut self,
        symbol: &'static str,
        meaning: impl Into<String>,
        expression: Expression,
        value: T,
        source: Source,
    ) -> T {
        self.steps.push(Step { symbol, meaning: meaning.into(), expression, value: value.into(), source });
        value
    }

    /// Adds a line whose value is a remark.
    pub fn note(&mut self, symbol: &'static str, meaning: impl Into<String>, value: impl Into<String>, source: Source) {
        self.steps.push(Step {
            symbol,
            meaning: meaning.into(),
            expression: Expression::default(),
            value: Term::Word(value.into()),
            source,
        });
    }

    /// Adds all lines of another derivation.
    pub fn append(&mut self, other: Self) {
        self.steps.extend(other.steps);
    }

    /// The lines.
    pub fn iter(&self) -> std::slice::Iter<'_, Step> {
        self.steps.iter()
    }

    /// Whether there are none.
    pub fn is_empty(&self) -> bool {
        self.steps.is_empty()
    }

    /// Every source that the reader should compare with an own copy, each once, in the order of use.
    pub fn to_check(&self) -> Vec<Source> {
        let mut seen = Vec::new();
        for step in &self.steps {
            if step.source.basis.needs_checking() && !seen.contains(&step.source) {
                seen.push(step.source);
            }
        }
        seen
    }
}
