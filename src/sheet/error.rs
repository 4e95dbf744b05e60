//! A sheet that cannot be read, in words that say where and what would be right.

use crate::log::{Place, picture};
use std::fmt;
use std::ops::Range;

/// One thing that is wrong with a sheet.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Fault {
    /// The sheet, as the user named it.
    pub file: String,
    /// Where in it, when a line is to blame.
    pub place: Option<Box<Place>>,
    /// What was found and what was expected.
    pub problem: String,
    /// What settles it.
    pub remedy: Option<String>,
}

impl Fault {
    pub(super) fn new(file: &str, place: Option<Box<Place>>, problem: impl Into<String>) -> Self {
        Self { file: file.to_string(), place, problem: problem.into(), remedy: None }
    }

    pub(super) fn remedy(mut self, remedy: impl Into<String>) -> Self {
        self.remedy = Some(remedy.into());
        self
    }
}

impl fmt::Display for Fault {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        picture(f, &self.file, self.place.as_deref(), &self.problem, self.remedy.as_deref())
    }
}

/// A sheet that cannot be used: all that is wrong with it, in the order of its lines.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SheetError {
    /// What is wrong, one at least.
    pub faults: Vec<Fault>,
}

impl From<Fault> for SheetError {
    fn from(fault: Fault) -> Self {
        Self { faults: vec![fault] }
    }
}

impl fmt::Display for SheetError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, fault) in self.faults.iter().enumerate() {
            if i > 0 {
                writeln!(f)?;
            }
            write!(f, "{fault}")?;
        }
        Ok(())
    }
}

impl std::error::Error for SheetError {}

/// Line of the byte `at` of `text`, from 1.
pub(super) fn line_of(text: &str, at: usize) -> u64 {
    let before = &text.as_bytes()[..at.min(text.len())];
    1 + before.iter().filter(|b| **b == b'\n').count() as u64
}

/// The place of a span of bytes; of one that goes on over several lines, its part on the first.
pub(super) fn place(text: &str, span: Range<usize>) -> Box<Place> {
    let bytes = text.as_bytes();
    let start = span.start.min(bytes.len());
    let from = bytes[..start].iter().rposition(|b| *b == b'\n').map_or(0, |at| at + 1);
    let to = bytes[start..].iter().position(|b| *b == b'\n').map_or(bytes.len(), |at| start + at);
    let line = bytes[from..to].strip_suffix(b"\r").unwrap_or(&bytes[from..to]);
    Box::new(Place::span(
        line_of(text, start),
        line,
        start - from,
        span.end.saturating_sub(start).min(to - start),
    ))
}
