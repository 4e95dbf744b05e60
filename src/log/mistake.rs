//! Mistakes in the rows of a text log, as messages.

use super::dialect::Dialect;
use super::input::decode;
use super::{LogError, Place};

/// Why a row could not be read; positions count bytes from the beginning of its line.
#[derive(Debug)]
pub(super) enum Problem {
    TooFew { found: usize },
    TooMany { at: usize },
    OpenQuote { at: usize },
    Cell { column: usize, start: usize, length: usize, last: bool, expected: &'static str },
}

impl Problem {
    /// The error for people; `bytes` is the line with the number `line`.
    pub fn error(&self, file: &str, dialect: &Dialect, line: u64, bytes: &[u8]) -> LogError {
        let columns = dialect.fields.len();
        let named = if dialect.has_header { "the header names" } else { "the other rows have" };
        let (error, span) = match self {
            Problem::TooFew { found } => (
                LogError::new(file, format!("this row has {found} of the {columns} cells that {named}"))
                    .remedy("complete the row, or take it out"),
                None,
            ),
            Problem::TooMany { at } => (
                LogError::new(file, format!("this row has more than the {columns} cells that {named}"))
                    .remedy(format!(
                        "take the surplus out; a cell that holds a {} must stand in quotes",
                        dialect.separator.name()
                    )),
                Some((*at, bytes.len() - at)),
            ),
            Problem::OpenQuote { at } => (
                LogError::new(file, "this quote is not closed in its line")
                    .remedy("close it, or take it out"),
                Some((*at, 1)),
            ),
            Problem::Cell { column, start, length, expected, .. } => {
                let field = &dialect.fields[*column];
                let found = decode(&bytes[*start..(*start + *length).min(bytes.len())]).into_owned();
                let quoted = if found.contains(' ') { format!("'{found}'") } else { found.clone() };
                (
                    LogError::new(
                        file,
                        format!("'{found}' in the column '{}' is not {expected}", field.label),
                    )
                    .remedy(format!("correct it; if it marks a missing value, type --missing {quoted}")),
                    Some((*start, *length)),
                )
            }
        };
        error.at(match span {
            Some((start, length)) => Place::span(line, bytes, start, length),
            None => Place::line(line, &decode(bytes)),
        })
    }
}
