//! The rows of a delimited text log: from bytes to columns of numbers.
//!
//! The common cell, a plain number, is parsed where it stands; anything else takes the slow way,
//! which also knows quotes, decimal commas and missing marks, and can say what is wrong and where.

use super::axis::MISSING;
use super::cell::{self, Separator};
use super::dialect::{self, Dialect};
use super::flags::Scheme;
use super::mistake::Problem;
use super::number::{self, Cell, Marks};
use super::time::{self, Nanos, StampParser};
use super::{Flag, LogError, RowLines};
use crate::warning::Warning;

/// What is done with the cells of a column.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Action {
    /// Nothing.
    Skip,
    /// A number for this slot.
    Number(usize),
    /// Date and clock.
    Stamp,
    /// Date and clock, of which only the first is wanted.
    StartStamp,
    /// Date of a time in two columns.
    Date,
    /// Time of day.
    Clock,
    /// A flag of the IOC scheme for this slot.
    Flag(usize),
    /// A flag of the WOCE scheme for this slot.
    WoceFlag(usize),
}

/// The columns of a log, as far as they are used.
#[derive(Debug)]
pub(super) struct Rows {
    /// Number of samples.
    pub count: usize,
    /// One vector per slot of [`Action::Number`]; missing values are NaN.
    pub numbers: Vec<Vec<f64>>,
    /// Absolute times, or times of day.
    pub stamps: Vec<Nanos>,
    /// First stamp of an [`Action::StartStamp`] column, with its sample.
    pub start: Option<(usize, Nanos)>,
    /// One vector per slot of [`Action::Flag`].
    pub flags: Vec<Vec<Flag>>,
    /// A stamp without an offset from UTC was met.
    pub stamps_without_offset: bool,
    /// Where the samples stand.
    pub lines: RowLines,
    /// What was noticed.
    pub warnings: Vec<Warning>,
}

struct Reader<'a> {
    text: &'a [u8],
    dialect: &'a Dialect,
    actions: &'a [Action],
    marks: &'a Marks,
    stamps: StampParser,
    rows: Rows,
}

impl Rows {
    /// Reads every row from where the dialect says they begin.
    pub fn read(
        file: &str,
        text: &[u8],
        dialect: &Dialect,
        actions: &[Action],
        marks: &Marks,
    ) -> Result<Self, LogError> {
        let slots = |wanted: fn(&Action) -> bool| actions.iter().filter(|a| wanted(a)).count();
        let row_bytes = text[dialect.first_byte..].iter().position(|&b| b == b'\n').unwrap_or(32).max(8);
        let expected = (text.len() - dialect.first_byte) / row_bytes + 1;
        let rows = Rows {
            count: 0,
            numbers: vec![Vec::with_capacity(expected); slots(|a| matches!(a, Action::Number(_)))],
            stamps: Vec::new(),
            start: None,
            flags: vec![Vec::new(); slots(|a| matches!(a, Action::Flag(_) | Action::WoceFlag(_)))],
            stamps_without_offset: false,
            lines: RowLines::None,
            warnings: Vec::new(),
        };
        let mut reader = Reader { text, dialect, actions, marks, stamps: StampParser::default(), rows };
        reader.all(file)?;
        Ok(reader.rows)
    }
}

impl Reader<'_> {
    fn all(&mut self, file: &str) -> Result<(), LogError> {
        let text = self.text;
        let (mut at, mut line) = (self.dialect.first_byte, self.dialect.first_line);
        let mut lines = Lines::default();
        while at < text.len() {
            let mut begin = at;
            while begin < text.len() && matches!(text[begin], b' ' | b'\r' | b'\x0c') {
                begin += 1;
            }
            let skipped = match text.get(begin) {
                None | Some(b'\n') => true,
                Some(b'#' | b'%' | b'/' | 0x1a) => {
                    dialect::is_comment_row(&text[begin..line_end(text, begin)])
                }
                Some(_) => false,
            };
            if skipped {
                at = line_end(text, begin) + 1;
                line += 1;
                continue;
            }
            match self.row(at) {
                Ok(next) => {
                    let cut = next > text.len() && self.ends_in_separator(at);
                    self.rows.count += 1;
                    lines.push(line);
                    if cut {
                        self.leave_out_last(line);
                        lines.pop();
                    }
                    at = next;
                }
                Err(problem) => {
                    let end = line_end(text, at);
                    let cut = matches!(
                        problem,
                        Problem::TooFew { .. } | Problem::OpenQuote { .. } | Problem::Cell { last: true, .. }
                    );
                    if end < text.len() || !cut || self.rows.count == 0 {
                        return Err(problem.error(file, self.dialect, line, &text[at..end]));
                    }
                    self.rows.count += 1;
                    self.leave_out_last(line);
                    at = end + 1;
                }
            }
            line += 1;
        }
        self.rows.lines = lines.finish();
        Ok(())
    }

    /// Whether the last line, which has no line end, stops behind a separator where the line above
    /// it has a value: the value was cut off.
    fn ends_in_separator(&self, at: usize) -> bool {
        let separator = self.dialect.separator;
        let ends = |line: &[u8]| line.trim_ascii_end().last().is_some_and(|&b| separator.ends(b));
        let tabs = |line: &[u8]| separator == Separator::Tab && line.last() == Some(&b'\t');
        let line = &self.text[at..];
        let above = &self.text[..at.saturating_sub(1)];
        let above = &above[above.iter().rposition(|&b| b == b'\n').map_or(0, |i| i + 1)..];
        let above = above.strip_suffix(b"\r").unwrap_or(above);
        separator != Separator::Blanks && (ends(line) || tabs(line)) && !(ends(above) || tabs(above))
    }

    /// Takes back the row that was just counted.
    fn leave_out_last(&mut self, line: u64) {
        self.rows.count -= 1;
        let count = self.rows.count;
        self.rows.numbers.iter_mut().for_each(|values| values.truncate(count));
        self.rows.flags.iter_mut().for_each(|flags| flags.truncate(count));
        self.rows.stamps.truncate(count);
        self.rows.warnings.push(Warning::new(
            "last_row_incomplete",
            format!("the last line ({line}) is cut off and was left out"),
            "check that the log was copied completely",
        ));
    }

    /// Reads the row that begins at `start`; gives where the next line begins.
    fn row(&mut self, start: usize) -> Result<usize, Problem> {
        let (text, separator) = (self.text, self.dialect.separator);
        let columns = self.actions.len();
        let (mut date, mut clock, mut stamp) = (None, None, None);
        let mut at = start;
        for (column, &action) in self.actions.iter().enumerate() {
            while at < text.len() && separator.pads(text[at]) {
                at += 1;
            }
            let mut end = None;
            match action {
                Action::Number(slot) => {
                    let comma = self.dialect.decimal_comma;
                    let plain = if comma { self.comma_number(at) } else { self.plain_number(at) };
                    if let Some((value, after)) = plain {
                        self.rows.numbers[slot].push(value);
                        end = Some(after);
                    }
                }
                Action::Skip if text.get(at) != Some(&b'"') => {
                    let mut after = at;
                    while after < text.len() && text[after] != b'\n' && !separator.ends(text[after]) {
                        after += 1;
                    }
                    end = Some(after);
                }
                _ => {}
            }
            let mut end = match end {
                Some(end) => end,
                None => {
                    let line = &text[start..line_end(text, at)];
                    let cell = cell::cell(line, at - start, separator);
                    if cell.open_quote {
                        return Err(Problem::OpenQuote { at: cell.start });
                    }
                    let wrong = |expected| Problem::Cell {
                        column,
                        start: cell.start,
                        length: cell.text.len(),
                        last: cell.next.is_none(),
                        expected,
                    };
                    match action {
                        Action::Skip => {}
                        Action::Number(slot) => {
                            let value = match number::parse(cell.text, self.dialect.decimal_comma, self.marks)
                            {
                                Cell::Value(value) => value,
                                Cell::Missing => f64::NAN,
                                Cell::Infinite => return Err(wrong("a finite number")),
                                Cell::Other => return Err(wrong("a number")),
                            };
                            self.rows.numbers[slot].push(value);
                        }
                        Action::Flag(slot) => {
                            let flag = self.flag(cell.text, &Scheme::Ioc);
                            self.rows.flags[slot].push(flag.ok_or_else(|| wrong("a flag from 0 to 9"))?);
                        }
                        Action::WoceFlag(slot) => {
                            let flag = self.flag(cell.text, &Scheme::Woce);
                            self.rows.flags[slot].push(flag.ok_or_else(|| wrong("a WOCE flag from 1 to 9"))?);
                        }
                        Action::Stamp | Action::StartStamp | Action::Date | Action::Clock => {
                            let (value, expected) = self.time(action, cell.text);
                            let value = value.ok_or_else(|| wrong(expected))?;
                            match action {
                                Action::Date => date = Some(value),
                                Action::Clock => clock = Some(value),
                                Action::Stamp => stamp = Some(value),
                                _ if value != MISSING && self.rows.start.is_none() => {
                                    self.rows.start = Some((self.rows.count, value));
                                }
                                _ => {}
                            }
                        }
                    }
                    // `next` of the last cell of a line is none; its separator stands just before it.
                    cell.next.map_or(start + line.len(), |next| start + next - 1)
                }
            };
            // Behind the cell: a separator, or the end of the line.
            let cell_end = end;
            while end < text.len() && separator.pads(text[end]) {
                end += 1;
            }
            let ended = end >= text.len() || text[end] == b'\n';
            if column + 1 < columns {
                if ended {
                    return Err(Problem::TooFew { found: column + 1 });
                }
                at = if separator == Separator::Blanks { end } else { end + 1 };
            } else if ended {
                at = end;
            } else {
                // One empty cell more is a separator at the end of the line.
                let rest = if separator == Separator::Blanks { end } else { end + 1 };
                let stop = line_end(text, cell_end);
                if !text[rest.min(stop)..stop].trim_ascii().is_empty() {
                    return Err(Problem::TooMany { at: rest - start });
                }
                at = stop;
            }
        }
        if let Some(clock) = clock {
            stamp = Some(match date {
                None => clock,
                Some(date) if date == MISSING || clock == MISSING => MISSING,
                Some(date) => date.saturating_add(clock),
            });
        }
        if let Some(stamp) = stamp {
            self.rows.stamps.push(stamp);
        }
        Ok(at + 1)
    }

    /// A number that stands plainly between separators, and where it ends.
    #[inline]
    fn plain_number(&self, at: usize) -> Option<(f64, usize)> {
        let text = self.text;
        let (value, used) = fast_float2::parse_partial::<f64, _>(text.get(at..)?).ok()?;
        let end = at + used;
        let clean = match text.get(end) {
            None | Some(b'\n' | b'\r' | b' ') => true,
            Some(&byte) => self.dialect.separator.ends(byte),
        };
        // A blank inside a cell of a comma file: only what follows it tells.
        let clean = clean && (self.dialect.separator == Separator::Blanks || self.only_padding(end));
        (clean && value.is_finite() && !self.marks.number(value)).then_some((value, end))
    }

    /// The same with a decimal comma.
    fn comma_number(&self, at: usize) -> Option<(f64, usize)> {
        let separator = self.dialect.separator;
        if separator == Separator::Comma {
            return None;
        }
        let ends = |&byte: &u8| matches!(byte, b'\n' | b'\r' | b' ') || separator.ends(byte);
        let rest = self.text.get(at..)?;
        let end = at + rest.iter().take(number::LONGEST).position(ends)?;
        let value = number::with_comma(&self.text[at..end])?;
        let clean = separator == Separator::Blanks || self.only_padding(end);
        (clean && value.is_finite() && !self.marks.is_marked(value)).then_some((value, end))
    }

    #[inline]
    fn only_padding(&self, mut at: usize) -> bool {
        while let Some(&byte) = self.text.get(at) {
            if byte == b'\n' || self.dialect.separator.ends(byte) {
                return true;
            }
            if !self.dialect.separator.pads(byte) {
                return false;
            }
            at += 1;
        }
        true
    }

    fn flag(&self, cell: &[u8], scheme: &Scheme) -> Option<Flag> {
        match number::parse(cell, self.dialect.decimal_comma, self.marks) {
            Cell::Missing => Some(Flag::NotEvaluated),
            Cell::Value(value) if value.fract() == 0.0 => scheme.flag(value as i64),
            _ => None,
        }
    }

    fn time(&mut self, action: Action, cell: &[u8]) -> (Option<Nanos>, &'static str) {
        if number::parse(cell, false, self.marks) == Cell::Missing {
            return (Some(MISSING), "");
        }
        match action {
            Action::Date => (self.stamps.date(cell), "a date such as 2026-03-01"),
            Action::Clock => {
                self.rows.stamps_without_offset |= !cell.ends_with(b"Z");
                (time::clock(cell), "a time of day such as 10:20:30")
            }
            _ => {
                let stamp = self.stamps.stamp(cell);
                self.rows.stamps_without_offset |= stamp.is_some_and(|stamp| !stamp.offset_told);
                (stamp.map(|stamp| stamp.nanos), "a time such as 2026-03-01T10:20:30Z (ISO 8601)")
            }
        }
    }
}

fn line_end(text: &[u8], from: usize) -> usize {
    let from = from.min(text.len());
    text[from..].iter().position(|&b| b == b'\n').map_or(text.len(), |i| from + i)
}

/// Collects line numbers; as long as they have no gap, the first one is enough.
#[derive(Default)]
struct Lines {
    first: u64,
    count: u64,
    each: Option<Vec<u64>>,
}

impl Lines {
    fn push(&mut self, line: u64) {
        if self.count == 0 {
            self.first = line;
        }
        if self.each.is_none() && line != self.first + self.count {
            self.each = Some((self.first..self.first + self.count).collect());
        }
        if let Some(each) = &mut self.each {
            each.push(line);
        }
        self.count += 1;
    }

    fn pop(&mut self) {
        self.count -= 1;
        if let Some(each) = &mut self.each {
            each.pop();
        }
    }

    fn finish(self) -> RowLines {
        match self.each {
            Some(lines) => RowLines::Each(lines),
            None => RowLines::Contiguous { first: self.first },
        }
    }
}
