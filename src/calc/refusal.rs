//! What is said when an input cannot be taken: what was given, what is allowed, what to do.

use std::fmt;

/// One input that was refused. Nothing is guessed, clamped or defaulted in its place.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Refusal {
    /// Which input, in the words of the form: "Stopping time".
    pub input: String,
    /// What was given, as it was given.
    pub given: String,
    /// What is allowed, with unit.
    pub allowed: String,
    /// What to do now.
    pub remedy: String,
}

impl Refusal {
    /// A refusal of `input`, of which `given` was typed or read.
    pub fn new(
        input: impl Into<String>,
        given: impl Into<String>,
        allowed: impl Into<String>,
        remedy: impl Into<String>,
    ) -> Self {
        Self { input: input.into(), given: given.into(), allowed: allowed.into(), remedy: remedy.into() }
    }
}

impl fmt::Display for Refusal {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let given = if self.given.trim().is_empty() { "empty".to_owned() } else { shortened(&self.given) };
        write!(f, "{} is {given}. It must be {}. {}", self.input, self.allowed, self.remedy)
    }
}

impl std::error::Error for Refusal {}

/// A very long entry would push the rest of the sentence out of sight.
fn shortened(given: &str) -> String {
    const MOST: usize = 40;
    if given.chars().count() <= MOST {
        return given.to_owned();
    }
    given.chars().take(MOST).chain("\u{2026}".chars()).collect()
}
