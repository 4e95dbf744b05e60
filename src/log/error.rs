//! What went wrong with a log, where, what was expected there and what to type.

use std::fmt;

use super::input::decode;

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

impl Place {
    /// Characters of a line that are shown at least.
    const SHOWN: usize = 100;

    /// A whole line.
    pub fn line(line: u64, text: &str) -> Self {
        Self { line, column: None, text: Some(shown(text, Self::SHOWN)), width: 0 }
    }

    /// A cell of a line: `start` and `length` count bytes of `bytes`.
    pub(crate) fn span(line: u64, bytes: &[u8], start: usize, length: usize) -> Self {
        let start = start.min(bytes.len());
        let end = (start + length).min(bytes.len());
        let before = decode(&bytes[..start]).chars().count();
        let width = decode(&bytes[start..end]).trim_end().chars().count().max(1);
        let text = shown(&decode(bytes), Self::SHOWN.max(before + width + 10));
        Self { line, column: Some(before + 1), text: Some(text), width }
    }
}

/// The first `limit` characters, without control characters that would upset a terminal.
fn shown(text: &str, limit: usize) -> String {
    let text = text.trim_end_matches(['\r', '\n']);
    let clean = text.chars().take(limit).map(|c| if c.is_control() && c != '\t' { '\u{fffd}' } else { c });
    let mut shown: String = clean.collect();
    if text.chars().nth(limit).is_some() {
        shown.push('…');
    }
    shown
}

/// A log that cannot be read or understood.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct LogError {
    /// The log, as the user named it.
    pub file: String,
    /// Where in it, when a line is to blame.
    pub place: Option<Box<Place>>,
    /// What was found and what was expected.
    pub problem: String,
    /// What settles it: an option to type, a thing to check.
    pub remedy: Option<String>,
    /// Whether the file is no log at all (a text without numbers, a picture), so that nobody misses it among logs.
    pub(super) foreign: bool,
}

impl LogError {
    /// An error about the whole of `file`.
    pub fn new(file: impl Into<String>, problem: impl Into<String>) -> Self {
        Self { file: file.into(), place: None, problem: problem.into(), remedy: None, foreign: false }
    }

    /// The same error, with what settles it.
    #[must_use]
    pub fn remedy(mut self, remedy: impl Into<String>) -> Self {
        self.remedy = Some(remedy.into());
        self
    }

    /// The same error, about a file that is no log at all.
    #[must_use]
    pub(super) fn foreign(mut self) -> Self {
        self.foreign = true;
        self
    }

    /// The same error, at a place.
    #[must_use]
    pub fn at(mut self, place: Place) -> Self {
        self.place = Some(Box::new(place));
        self
    }
}

impl fmt::Display for LogError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        picture(f, &self.file, self.place.as_deref(), &self.problem, self.remedy.as_deref())
    }
}

/// An error as people see it: file, line and column, what is wrong, the line with a caret, what settles it.
pub(crate) fn picture(
    f: &mut fmt::Formatter<'_>,
    file: &str,
    place: Option<&Place>,
    problem: &str,
    remedy: Option<&str>,
) -> fmt::Result {
    write!(f, "{file}")?;
    if let Some(place) = place {
        write!(f, ":{}", place.line)?;
        if let Some(column) = place.column {
            write!(f, ":{column}")?;
        }
    }
    write!(f, ": {problem}")?;
    if let Some(Place { text: Some(text), column, width, .. }) = place {
        write!(f, "\n  | {}", text.replace('\t', " "))?;
        if let Some(column) = column {
            write!(f, "\n  | {}{}", " ".repeat(column.saturating_sub(1)), "^".repeat((*width).max(1)))?;
        }
    }
    if let Some(remedy) = remedy {
        write!(f, "\n  {remedy}")?;
    }
    Ok(())
}

impl std::error::Error for LogError {}
