//! Cells of a line: what parts them, and what quotes do.

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
    pub const ALL: [Separator; 4] =
        [Separator::Tab, Separator::Semicolon, Separator::Comma, Separator::Blanks];

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

#[cfg(test)]
mod tests {
    use super::*;

    fn cells(line: &str, separator: Separator) -> Vec<String> {
        let (mut all, mut at) = (Vec::new(), Some(0));
        while let Some(from) = at {
            let cell = cell(line.as_bytes(), from, separator);
            all.push(String::from_utf8_lossy(cell.text).into_owned());
            at = cell.next;
        }
        all
    }

    #[test]
    fn a_line_is_parted_at_its_separators() {
        assert_eq!(cells("a, b ,,c", Separator::Comma), ["a", "b", "", "c"]);
        assert_eq!(cells("a;", Separator::Semicolon), ["a", ""]);
        assert_eq!(cells("a\t\tb", Separator::Tab), ["a", "", "b"]);
        assert_eq!(cells("  a \t b  ", Separator::Blanks), ["a", "b"]);
        assert_eq!(cells("", Separator::Comma), [""]);
    }

    #[test]
    fn quotes_hold_separators_and_close_in_their_line() {
        assert_eq!(cells("\"a,b\",c", Separator::Comma), ["a,b", "c"]);
        assert_eq!(cells("\"a\"\"b\",c", Separator::Comma), ["a\"\"b", "c"]);
        assert_eq!(cells("\"a\"x,c", Separator::Comma), ["\"a\"x", "c"]);
        assert_eq!(cells("5\",c", Separator::Comma), ["5\"", "c"]);
        assert!(cell(b"\"a,b", 0, Separator::Comma).open_quote);
        assert!(!cell(b"\"a\",b", 0, Separator::Comma).open_quote);
    }
}
