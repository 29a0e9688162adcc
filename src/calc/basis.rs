//! How well founded a constant is, and where it stands. Every constant, table cell and worked step carries one.

/// How the figure came to be known.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug, Hash)]
pub enum Basis {
    /// Read in a public text of the law or standard, or found alike in two independent public texts.
    PublicText,
    /// Found in one public text about a standard, not in the standard itself.
    SingleText,
    /// Field knowledge only: compare with your copy of the standard.
    FromMemory,
    /// A habit of the trade that no text prescribes.
    CommonPractice,
    /// Measured or entered by the user.
    Given,
    /// Arithmetic on the lines above.
    Arithmetic,
}

impl Basis {
    /// How it is called on screen and on paper.
    pub const fn words(self) -> &'static str {
        match self {
            Self::PublicText => "public text",
            Self::SingleText => "one text only",
            Self::FromMemory => "from memory",
            Self::CommonPractice => "common practice, no source",
            Self::Given => "entered",
            Self::Arithmetic => "arithmetic",
        }
    }

    /// Whether the record must list it under what to compare with the reader's own copy.
    pub const fn needs_checking(self) -> bool {
        matches!(self, Self::SingleText | Self::FromMemory | Self::CommonPractice)
    }
}

/// Where a figure stands and how well that is known.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Hash)]
pub struct Source {
    /// Law or standard with its edition.
    pub document: &'static str,
    /// Paragraph, clause or table within it; empty where none applies.
    pub clause: &'static str,
    /// How it is known.
    pub basis: Basis,
}

impl Source {
    /// A place in a document.
    pub const fn new(document: &'static str, clause: &'static str, basis: Basis) -> Self {
        Self { document, clause, basis }
    }

    /// Entered by the user or measured at the press.
    pub const GIVEN: Self = Self::new("", "", Basis::Given);
    /// Plain arithmetic on earlier steps.
    pub const ARITHMETIC: Self = Self::new("", "", Basis::Arithmetic);
    /// A habit of the trade.
    pub const PRACTICE: Self = Self::new("", "", Basis::CommonPractice);

    /// Document and clause in one phrase; empty when there is neither.
    pub fn place(&self) -> String {
        [self.document, self.clause].into_iter().filter(|part| !part.is_empty()).collect::<Vec<_>>().join(", ")
    }
}
