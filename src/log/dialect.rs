//! How a text log is written: separator, decimal mark, where the header stands, where the rows begin.

use super::columns::is_named;
use super::header::Field;
use super::input::decode;
use super::number::{self, Cell, Marks};
use super::{ReadOptions, time};

/// What stands between two cells.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Separator {
    Comma,
    Semicolon,
    Tab,
    /// One or more blanks or tabs.
    Blanks,
}

impl Separator {
    /// In the order of preference where two fit equally well.
    const ALL: [Separator; 4] = [Separator::Tab, Separator::Semicolon, Separator::Comma, Separator::Blanks];

    pub fn name(self) -> &'static str {
        match self {
            Separator::Comma => "comma",
            Separator::Semicolon => "semicolon",
            Separator::Tab => "tab",
            Separator::Blanks => "blanks",
        }
    }

    /// Whether a byte ends a cell.
    #[inline]
    pub fn ends(self, byte: u8) -> bool {
        match self {
            Separator::Comma => byte == b',',
            Separator::Semicolon => byte == b';',
            Separator::Tab => byte == b'\t',
            Separator::Blanks => byte == b' ' || byte == b'\t',
        }
    }

    /// Whether a byte is padding around a cell.
    #[inline]
    pub fn pads(self, byte: u8) -> bool {
        byte == b' ' || byte == b'\r' || (byte == b'\t' && self != Separator::Tab)
    }
}

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
        .filter(|(separator, comma)| !(*separator == Separator::Comma && *comma))
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
    // From the end of the window upwards, as long as there are rows without a break.
    let last = rows.iter().rposition(|line| is_row(line))?;
    let top = rows[..=last].iter().rposition(|line| !is_row(line)).map_or(0, |i| i + 1);
    let top = lines.iter().position(|line| line.number == rows[top].number)?;

    let header = find_header(&lines[..top], separator, width, decimal_comma, options, marks);
    let Some((at, mut fields)) = header else {
        let fields = (1..=width).map(|i| Field::from_cell(&i.to_string())).collect();
        let (first_line, first_byte) = (lines[top].number, lines[top].start);
        return Some(Dialect { separator, decimal_comma, fields, has_header: false, first_line, first_byte });
    };
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
    Some(Dialect {
        separator,
        decimal_comma,
        fields,
        has_header: true,
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

/// Marks that begin a comment line in the logs of the trade; none can begin a number or a date.
pub(super) fn is_comment(trimmed: &[u8]) -> bool {
    matches!(trimmed.first(), Some(b'#' | b'%' | b'!' | b'*'))
        || trimmed.starts_with(b"//")
        || trimmed == b"\x1a"
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

/// The header above the rows: the line with the most names that are known, the lowest such line
/// first; else the line directly above the rows when it has one name per column.
fn find_header(
    above: &[Line<'_>],
    separator: Separator,
    width: usize,
    decimal_comma: bool,
    options: &ReadOptions,
    marks: &Marks,
) -> Option<(usize, Vec<Field>)> {
    let mut best: Option<(usize, usize, Vec<Field>)> = None;
    for (i, line) in above.iter().enumerate().rev() {
        let bytes = strip_comment(line.bytes);
        if look(bytes, separator, decimal_comma, marks).numbers * 2 > width {
            continue;
        }
        let fields: Vec<Field> =
            header_cells(bytes, separator, width).iter().map(|cell| Field::from_cell(cell)).collect();
        let known = fields.iter().filter(|field| field.is_known() || is_named(field, options)).count();
        // Rows may end with a separator that the header lacks.
        let exact = fields.len() == width || fields.len() + 1 == width;
        // A line of prose may hold one of the words; a header holds as many names as there are columns.
        let plausible = known > 0 && (exact || (known >= 2 && known * 2 >= fields.len()));
        let score = known * 2 + usize::from(exact);
        if plausible && best.as_ref().is_none_or(|b| score > b.1) {
            best = Some((i, score, fields));
        }
    }
    if let Some((i, _, fields)) = best {
        return Some((i, fields));
    }
    let (i, line) = above.iter().enumerate().next_back().filter(|(_, line)| !line.comment)?;
    let found = look(line.bytes, separator, decimal_comma, marks);
    let cells = header_cells(line.bytes, separator, width);
    (found.numbers == 0 && cells.len() == width && !cells.iter().all(|cell| cell.is_empty()))
        .then(|| (i, cells.iter().map(|cell| Field::from_cell(cell)).collect()))
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

/// One cell of a line.
pub(super) struct CellAt<'a> {
    /// The cell without blanks and quotes around it.
    pub text: &'a [u8],
    /// Where it stands in the line.
    pub start: usize,
    /// Where the next cell begins; none at the end of the line.
    pub next: Option<usize>,
    /// A quote that is not closed in this line.
    pub open_quote: bool,
}

/// The cell that begins at `from`. A quote counts only at the beginning of a cell and must close in
/// its own line: a stray one cannot swallow the rows below it.
pub(super) fn cell(line: &[u8], from: usize, separator: Separator) -> CellAt<'_> {
    let mut start = from;
    while start < line.len() && separator.pads(line[start]) {
        start += 1;
    }
    let mut end = start;
    let mut quoted = None;
    let mut open_quote = false;
    if line.get(start) == Some(&b'"') {
        match closing_quote(line, start + 1) {
            Some(close) => {
                quoted = Some(&line[start + 1..close]);
                end = close + 1;
            }
            None => open_quote = true,
        }
    }
    while end < line.len() && !separator.ends(line[end]) {
        end += 1;
    }
    let text = match quoted {
        // Whatever stands between the closing quote and the separator belongs to a broken cell.
        Some(inner) if line[start + inner.len() + 2..end].trim_ascii().is_empty() => inner.trim_ascii(),
        _ => line[start..end].trim_ascii(),
    };
    let mut next = end;
    if separator == Separator::Blanks {
        while next < line.len() && separator.pads(line[next]) {
            next += 1;
        }
        return CellAt { text, start, next: (next < line.len()).then_some(next), open_quote };
    }
    CellAt { text, start, next: (end < line.len()).then_some(end + 1), open_quote }
}

fn closing_quote(line: &[u8], mut at: usize) -> Option<usize> {
    loop {
        at += line.get(at..)?.iter().position(|&b| b == b'"')?;
        if line.get(at + 1) != Some(&b'"') {
            return Some(at);
        }
        at += 2;
    }
}
