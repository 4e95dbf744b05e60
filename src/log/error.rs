//! What went wrong with a log, where, what was expected there and what to type.

use std::fmt;

/// Where in a log something was found. Lines and columns count from 1; a column counts characters.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Place {
    /// Line of the file.
    pub line: u64,
    /// Character of the line, when a single cell is meant.
    pub column: Option<usize>,
    /// The line as it stands in the file (shortened when long), for the caret picture.
    pub text: Option<String>,
    /// Characters that the caret underlines.
    pub width: usize,
}

/// A log that cannot be read or understood.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct LogError {
    /// The log, as the user named it.
    pub file: String,
    /// Where in it, when a line is to blame.
    pub place: Option<Place>,
    /// What was found and what was expected.
    pub problem: String,
    /// What settles it: an option to type, a thing to check.
    pub remedy: Option<String>,
}

impl LogError {
    /// An error about the whole of `file`.
    pub fn new(file: impl Into<String>, problem: impl Into<String>) -> Self {
        Self { file: file.into(), place: None, problem: problem.into(), remedy: None }
    }

    /// The same error, with what settles it.
    #[must_use]
    pub fn remedy(mut self, remedy: impl Into<String>) -> Self {
        self.remedy = Some(remedy.into());
        self
    }

    /// The same error, at a place.
    #[must_use]
    pub fn at(mut self, place: Place) -> Self {
        self.place = Some(place);
        self
    }
}

impl fmt::Display for LogError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}", self.file)?;
        if let Some(place) = &self.place {
            write!(f, ":{}", place.line)?;
            if let Some(column) = place.column {
                write!(f, ":{column}")?;
            }
        }
        write!(f, ": {}", self.problem)?;
        if let Some(Place { text: Some(text), column, width, .. }) = &self.place {
            write!(f, "\n  | {}", text.replace('\t', " "))?;
            if let Some(column) = column {
                write!(f, "\n  | {}{}", " ".repeat(column - 1), "^".repeat((*width).max(1)))?;
            }
        }
        if let Some(remedy) = &self.remedy {
            write!(f, "\n  {remedy}")?;
        }
        Ok(())
    }
}

impl std::error::Error for LogError {}
