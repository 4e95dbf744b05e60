//! Lines of a WHP-Exchange file, and what stands in them.

use crate::log::Place;
use crate::log::cell::{Separator, cell};
use crate::log::dialect::is_comment_row;
use crate::log::input::decode;

/// A line without blanks around it and without the commas that a spreadsheet adds behind it.
pub(super) fn bare(line: &[u8]) -> &[u8] {
    let line = line.trim_ascii();
    let end = line.iter().rposition(|&b| !matches!(b, b',' | b' ')).map_or(0, |last| last + 1);
    &line[..end]
}

/// One line of the file; `start` is where it begins.
#[derive(Debug, Clone, Copy)]
pub(super) struct Line<'a> {
    pub number: u64,
    pub start: usize,
    pub bytes: &'a [u8],
}

impl Line<'_> {
    pub fn place(&self) -> Place {
        Place::line(self.number, &decode(self.bytes))
    }

    pub fn span(&self, start: usize, length: usize) -> Place {
        Place::span(self.number, self.bytes, start, length)
    }

    fn is_passed_over(&self) -> bool {
        let line = self.bytes.trim_ascii();
        line.is_empty() || is_comment_row(line)
    }

    /// The cells with their places; an empty one behind the last comma is none.
    pub fn cells(&self) -> Vec<(String, usize, usize)> {
        let (mut cells, mut at) = (Vec::new(), Some(0));
        while let Some(from) = at {
            let cell = cell(self.bytes, from, Separator::Comma);
            cells.push((decode(cell.text).into_owned(), cell.start, cell.text.len()));
            at = cell.next;
        }
        cells
    }
}

/// Lines one after the other, comments and empty ones passed over.
pub(super) struct Lines<'a> {
    pub text: &'a [u8],
    pub at: usize,
    pub number: u64,
}

impl<'a> Lines<'a> {
    pub fn any(&mut self) -> Option<Line<'a>> {
        if self.at >= self.text.len() {
            return None;
        }
        let rest = &self.text[self.at..];
        let length = rest.iter().position(|&b| b == b'\n').unwrap_or(rest.len());
        self.number += 1;
        let line = Line { number: self.number, start: self.at, bytes: &rest[..length] };
        self.at += length + 1;
        Some(line)
    }
}

impl<'a> Iterator for Lines<'a> {
    type Item = Line<'a>;

    fn next(&mut self) -> Option<Line<'a>> {
        loop {
            let line = self.any()?;
            if !line.is_passed_over() {
                return Some(line);
            }
        }
    }
}

/// `KEY = value`, and where the value stands in its line.
pub(super) struct Item<'a> {
    pub line: Line<'a>,
    pub key: String,
    pub value: String,
    start: usize,
}

impl<'a> Item<'a> {
    pub fn new(line: Line<'a>) -> Option<Self> {
        let equals = line.bytes.iter().position(|&b| b == b'=')?;
        let key = line.bytes[..equals].trim_ascii();
        if key.is_empty() || key.contains(&b',') {
            return None;
        }
        let value = bare(&line.bytes[equals + 1..]);
        let blanks = line.bytes[equals + 1..].iter().take_while(|b| b.is_ascii_whitespace()).count();
        Some(Self {
            line,
            key: decode(key).to_ascii_uppercase(),
            value: decode(value).into_owned(),
            start: equals + 1 + blanks,
        })
    }

    pub fn place(&self) -> Place {
        self.line.span(self.start, self.line.bytes.len().saturating_sub(self.start))
    }
}
