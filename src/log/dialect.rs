//! How a text log is written: separator, decimal mark, where the header stands, where the rows begin.

use super::cell::{Separator, cell};
use super::columns::is_named;
use super::header::Field;
use super::input::decode;
use super::number::{self, Cell, Marks};
use super::{ReadOptions, time};

/// How a text log is written.
#[derive(Debug)]
pub(super) struct Dialect {
    pub separator: Separator,
    pub decimal_comma: bool,
    /// The columns; named by their numbers when there is no header.
    pub fields: Vec<Field>,
    pub has_header: bool,
    /// Line of the first row, from 1, and where it begins.
    pub first_line: u64,
    pub first_byte: usize,
    /// Lines above the header that look like rows of the same log.
    pub rows_above: usize,
}

/// As much of a log as is looked at to find out how it is written.
const WINDOW: usize = 128 * 1024;
/// Rows that are looked at to choose the separator.
const SAMPLE: usize = 60;

/// One line of the window.
struct Line<'a> {
    number: u64,
    start: usize,
    bytes: &'a [u8],
    comment: bool,
}

/// Finds out how a log is written. `None` when nothing in it looks like a row of numbers.
pub(super) fn detect(text: &[u8], options: &ReadOptions, marks: &Marks) -> Option<Dialect> {
    let lines = lines(text);
    let rows: Vec<&Line<'_>> = lines.iter().filter(|line| !line.comment).collect();
    // The end of the window: whatever stands above the rows is behind by then.
    let sample = &rows[rows.len().saturating_sub(SAMPLE)..];
    let (separator, decimal_comma, width) = Separator::ALL
        .into_iter()
        .flat_map(|separator| [false, true].map(|comma| (separator, comma)))
        .filter_map(|(separator, comma)| {
            score(sample, separator, comma, marks).map(|score| (score, separator, comma))
        })
        .fold(None, |best: Option<(Score, Separator, bool)>, next| match best {
            Some(best) if !next.0.beats(&best.0) => Some(best),
            _ => Some(next),
        })
        .map(|(score, separator, comma)| (separator, comma, score.width))?;

    let is_row = |line: &Line<'_>| {
        let found = look(line.bytes, separator, decimal_comma, marks);
        found.cells == width && found.numbers > 0 && found.fits()
    };
    let top = lines.iter().position(|line| !line.comment && is_row(line))?;
    let full = |line: &Line<'_>| {
        !line.comment && is_row(line) && {
            let found = look(line.bytes, separator, decimal_comma, marks);
            found.numbers + found.empty == width
        }
    };
    let header = find_header(&lines, top, separator, width, options, (&is_row, &full));
    let Some((at, mut fields)) = header else {
        let fields = (1..=width).map(|i| Field::from_cell(&i.to_string())).collect();
        let (first_line, first_byte) = (lines[top].number, lines[top].start);
        let has_header = false;
        return Some(Dialect {
            separator,
            decimal_comma,
            fields,
            has_header,
            first_line,
            first_byte,
            rows_above: 0,
        });
    };
    let rows_above = lines[..at].iter().filter(|line| full(line)).count();
    let mut next = at + 1;
    if let Some(units) = lines.get(next) {
        let cells = header_cells(strip_comment(units.bytes), separator, fields.len());
        // Units of other quantities need not be known; what a row of numbers could hold may not stand here.
        let number =
            |cell: &String| cell != "1" && look(cell.as_bytes(), separator, decimal_comma, marks).numbers > 0;
        let is_units = cells.len() == fields.len()
            && !cells.iter().any(number)
            && cells.iter().zip(&fields).any(|(cell, field)| cell != "1" && field.takes_unit(cell));
        if is_units {
            fields.iter_mut().zip(&cells).for_each(|(field, cell)| field.add_unit(cell));
            next += 1;
        }
    }
    let next = lines.get(next)?;
    if separator == Separator::Blanks && fields.len() + 1 == width {
        part_stamps(&mut fields, lines[top..].iter().find(|line| line.start >= next.start)?.bytes);
    }
    Some(Dialect {
        separator,
        decimal_comma,
        fields,
        has_header: true,
        rows_above,
        first_line: next.number,
        first_byte: next.start,
    })
}

/// Lines of the window that hold something, without a line that the window cuts.
fn lines(text: &[u8]) -> Vec<Line<'_>> {
    let end = if text.len() <= WINDOW {
        text.len()
    } else {
        text[..WINDOW].iter().rposition(|&b| b == b'\n').map_or(WINDOW, |at| at + 1)
    };
    let mut start = 0;
    let mut lines = Vec::new();
    for (i, bytes) in text[..end].split(|&b| b == b'\n').enumerate() {
        let trimmed = bytes.trim_ascii();
        if !trimmed.is_empty() {
            lines.push(Line {
                number: i as u64 + 1,
                start,
                bytes: trimmed_end(bytes),
                comment: is_comment(trimmed),
            });
        }
        start += bytes.len() + 1;
    }
    lines
}

fn trimmed_end(line: &[u8]) -> &[u8] {
    line.strip_suffix(b"\r").unwrap_or(line)
}

/// Marks that begin a comment line above the rows; none can begin a number or a date.
fn is_comment(trimmed: &[u8]) -> bool {
    matches!(trimmed.first(), Some(b'!' | b'*')) || is_comment_row(trimmed)
}

/// Marks that begin a comment line among the rows. Others may mark a row as doubtful, and a row is
/// never left out silently.
pub(super) fn is_comment_row(trimmed: &[u8]) -> bool {
    matches!(trimmed.first(), Some(b'#' | b'%')) || trimmed.starts_with(b"//") || trimmed == b"\x1a"
}

fn strip_comment(line: &[u8]) -> &[u8] {
    let trimmed = line.trim_ascii_start();
    if !is_comment(trimmed) {
        return line;
    }
    let marks = trimmed.iter().take_while(|b| matches!(b, b'#' | b'%' | b'!' | b'*' | b'/')).count();
    trimmed[marks..].trim_ascii_start()
}

/// What the cells of one line look like.
#[derive(Default)]
struct Look {
    cells: usize,
    numbers: usize,
    empty: usize,
}

impl Look {
    /// At least half of the cells may belong to a row of numbers.
    fn fits(&self) -> bool {
        2 * (self.numbers + self.empty) >= self.cells
    }
}

fn look(line: &[u8], separator: Separator, decimal_comma: bool, marks: &Marks) -> Look {
    let mut look = Look::default();
    let mut stamps = time::StampParser::default();
    let mut at = Some(0);
    while let Some(from) = at {
        let cell = cell(line, from, separator);
        at = cell.next;
        look.cells += 1;
        let text = cell.text;
        if text.is_empty() {
            look.empty += 1;
        } else if number::parse(text, decimal_comma, marks) != Cell::Other
            || stamps.stamp(text).is_some()
            || stamps.date(text).is_some()
            || time::clock(text).is_some()
        {
            look.numbers += 1;
        }
    }
    look
}

struct Score {
    /// Lines with the most frequent number of cells.
    lines: usize,
    /// Share of their cells that are numbers or times.
    share: f64,
    width: usize,
}

impl Score {
    fn beats(&self, other: &Score) -> bool {
        let key = |s: &Score| (s.lines, s.share, usize::from(s.width > 1));
        key(self) > key(other)
    }
}

fn score(sample: &[&Line<'_>], separator: Separator, decimal_comma: bool, marks: &Marks) -> Option<Score> {
    let looks: Vec<Look> = sample
        .iter()
        .map(|line| look(line.bytes, separator, decimal_comma, marks))
        .filter(|look| look.numbers > 0 && look.fits())
        .collect();
    let count = |width: usize| looks.iter().filter(|look| look.cells == width).count();
    let width = looks.iter().map(|look| look.cells).max_by_key(|&width| (count(width), width))?;
    let (numbers, cells) = looks
        .iter()
        .filter(|look| look.cells == width)
        .fold((0, 0), |sum, look| (sum.0 + look.numbers, sum.1 + look.cells - look.empty));
    Some(Score { lines: count(width), share: numbers as f64 / cells.max(1) as f64, width })
}

/// Between blanks, a stamp `2026-03-01 10:20:30` stands in two cells under one name: the date gets
/// a column of its own.
fn part_stamps(fields: &mut Vec<Field>, row: &[u8]) {
    let text = decode(row);
    let cells: Vec<&[u8]> = text.split_ascii_whitespace().map(str::as_bytes).collect();
    let mut stamps = time::StampParser::default();
    let parted = |i: usize, stamps: &mut time::StampParser| {
        let (date, clock) = (cells.get(i), cells.get(i + 1));
        date.is_some_and(|cell| stamps.date(cell).is_some())
            && clock.is_some_and(|cell| cell.contains(&b':') && time::clock(cell).is_some())
    };
    if let Some(at) = (0..fields.len()).find(|&i| fields[i].is_known() && parted(i, &mut stamps)) {
        fields.insert(at, Field::from_cell("date"));
    }
}

/// A question about a line.
type Test<'a> = &'a dyn Fn(&Line<'_>) -> bool;

/// Finds the header among all lines; `top` is the first that looks like a row.
///
/// It is the line with the most names that are known, the lowest of equals. The search ends where
/// rows follow such a line: a second header further down is a mistake in the rows, not the header.
/// Without a known name, the line directly above the rows is the header when it has one name per
/// column.
fn find_header(
    lines: &[Line<'_>],
    top: usize,
    separator: Separator,
    width: usize,
    options: &ReadOptions,
    (is_row, is_full): (Test<'_>, Test<'_>),
) -> Option<(usize, Vec<Field>)> {
    // A line of the preamble may look like a row; three of them, or one of numbers only, are rows.
    const ROWS: usize = 3;
    let (mut best, mut rows): (Option<(usize, usize, Vec<Field>)>, usize) = (None, 0);
    for (i, line) in lines.iter().enumerate() {
        if !line.comment && is_row(line) {
            if best.is_some() {
                rows += if is_full(line) { ROWS } else { 1 };
            }
            if rows >= ROWS {
                break;
            }
            continue;
        }
        let cells = header_cells(strip_comment(line.bytes), separator, width);
        // Rows may end with a separator that the header lacks.
        let exact = cells.len() == width || cells.len() + 1 == width;
        let fields: Vec<Field> = cells.iter().map(|cell| Field::from_cell(cell)).collect();
        let known = fields.iter().filter(|field| field.is_known() || is_named(field, options)).count();
        // A line of prose may hold one of the words; a header holds as many names as there are columns.
        let plausible = known > 0 && (exact || (known >= 2 && known * 2 >= fields.len()));
        let score = known * 2 + usize::from(exact);
        if plausible && best.as_ref().is_none_or(|b| score >= b.1) {
            (best, rows) = (Some((i, score, fields)), 0);
        }
    }
    if let Some((i, _, fields)) = best {
        return Some((i, fields));
    }
    let above = top.checked_sub(1)?;
    let line = lines.get(above).filter(|line| !line.comment)?;
    let cells = header_cells(line.bytes, separator, width);
    let named = cells.len() == width && cells.iter().all(|cell| cell.parse::<f64>().is_err());
    (named && !cells.iter().all(String::is_empty))
        .then(|| (above, cells.iter().map(|cell| Field::from_cell(cell)).collect()))
}

/// Cells of a header or unit line, as text. Between blanks, a bracketed unit stays with its name,
/// and where that does not give `width` cells, two blanks or more part the names.
fn header_cells(line: &[u8], separator: Separator, width: usize) -> Vec<String> {
    let text = decode(line);
    if separator != Separator::Blanks {
        let bytes = text.as_bytes();
        let (mut cells, mut at) = (Vec::new(), Some(0));
        while let Some(from) = at {
            let cell = cell(bytes, from, separator);
            at = cell.next;
            cells.push(decode(cell.text).into_owned());
        }
        // A separator behind the last name.
        if cells.len() == width + 1 && cells.last().is_some_and(String::is_empty) {
            cells.pop();
        }
        return cells;
    }
    let mut cells: Vec<String> = Vec::new();
    let opens = |s: &str| s.matches(['[', '(']).count();
    let closes = |s: &str| s.matches([']', ')']).count();
    for word in text.split_whitespace() {
        match cells.last_mut() {
            Some(last) if opens(last) > closes(last) => {
                last.push(' ');
                last.push_str(word);
            }
            Some(last) if word.starts_with(['[', '(']) && !last.starts_with(['[', '(']) => {
                last.push(' ');
                last.push_str(word);
            }
            _ => cells.push(word.to_string()),
        }
    }
    if cells.len() != width {
        let wide: Vec<String> = text
            .replace('\t', "  ")
            .split("  ")
            .map(|part| part.trim().to_string())
            .filter(|part| !part.is_empty())
            .collect();
        if wide.len() == width {
            return wide;
        }
    }
    cells
}
