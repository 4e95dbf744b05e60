//! One cell of a text log as a number, or as the mark of a missing value.

use super::ReadOptions;

/// What a cell turned out to be.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Cell {
    /// A finite number.
    Value(f64),
    /// A mark that means "no value".
    Missing,
    /// Infinity, or a number beyond the range of a double.
    Infinite,
    /// Not a number.
    Other,
}

/// Marks of missing values: the usual ones and those the user named.
#[derive(Debug, Clone, Default)]
pub(super) struct Marks {
    numbers: Vec<f64>,
    texts: Vec<String>,
}

impl Marks {
    pub fn new(options: &ReadOptions) -> Self {
        let mut marks = Self::default();
        for mark in &options.missing {
            let text = mark.trim();
            match fast_float2::parse::<f64, _>(text) {
                Ok(number) if number.is_finite() => marks.numbers.push(number),
                _ => marks.texts.push(text.to_string()),
            }
        }
        marks
    }

    /// Whether a number stands for "missing".
    pub fn number(&self, value: f64) -> bool {
        is_usual(value) || self.numbers.contains(&value)
    }

    /// Whether a number may stand for "missing", or one of the marks is a text that might look like
    /// a number with a decimal comma.
    pub fn is_marked(&self, value: f64) -> bool {
        !self.texts.is_empty() || self.number(value)
    }

    fn text(&self, cell: &[u8]) -> bool {
        let usual = [&b"nan"[..], b"na", b"n/a", b"null"];
        cell.is_empty()
            || usual.iter().any(|mark| cell.eq_ignore_ascii_case(mark))
            || self.texts.iter().any(|mark| cell == mark.as_bytes())
    }
}

/// -999, -9999, 1e35 and the default fill value of NetCDF, 9.969 21e36, of either sign. The large
/// ones are met at single precision and rounded, so they are compared with a tolerance.
pub(super) fn is_usual(value: f64) -> bool {
    let size = value.abs();
    value == -999.0 || value == -9999.0 || (size > 9.9e34 && (near(size, 1e35) || near(size, 9.969_21e36)))
}

fn near(size: f64, mark: f64) -> bool {
    (size / mark - 1.0).abs() < 1e-3
}

/// The cell, without blanks around it.
pub(super) fn parse(cell: &[u8], decimal_comma: bool, marks: &Marks) -> Cell {
    let parsed = if decimal_comma { with_comma(cell) } else { fast_float2::parse::<f64, _>(cell).ok() };
    match parsed {
        // The common case first.
        Some(value) if value.is_finite() && !marks.is_marked(value) => {
            return Cell::Value(value);
        }
        _ if marks.text(cell) => return Cell::Missing,
        _ => {}
    }
    match parsed {
        // In a log with decimal commas a point may be a thousands mark: only a mark of missing
        // values may carry one.
        None if decimal_comma => match fast_float2::parse::<f64, _>(cell) {
            Ok(value) if marks.number(value) => Cell::Missing,
            Ok(value) if !value.is_finite() => Cell::Infinite,
            _ => Cell::Other,
        },
        None => Cell::Other,
        Some(value) if !value.is_finite() => Cell::Infinite,
        Some(value) if marks.number(value) => Cell::Missing,
        Some(value) => Cell::Value(value),
    }
}

/// Characters of the longest number with a decimal comma.
pub(super) const LONGEST: usize = 64;

/// A number whose decimal mark is a comma with digits on both sides, or that has no mark at all.
pub(super) fn with_comma(cell: &[u8]) -> Option<f64> {
    let mut buffer = [0_u8; LONGEST];
    if cell.len() > buffer.len() || cell.contains(&b'.') {
        return None;
    }
    let text = &mut buffer[..cell.len()];
    text.copy_from_slice(cell);
    if let Some(at) = text.iter().position(|&b| b == b',') {
        let digit = |i: Option<usize>| i.and_then(|i| cell.get(i)).is_some_and(u8::is_ascii_digit);
        if !digit(at.checked_sub(1)) || !digit(at.checked_add(1)) {
            return None;
        }
        text[at] = b'.';
    }
    fast_float2::parse::<f64, _>(&*text).ok()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn missing_marks_are_no_values() {
        let marks =
            Marks::new(&ReadOptions { missing: vec!["-99".into(), "gap".into()], ..Default::default() });
        for cell in [
            "",
            "NaN",
            "nan",
            "NA",
            "-999",
            "-999.0",
            "-9999",
            "-9.999e3",
            "1e35",
            "-1.0E+35",
            "9.96921e36",
            "-99.00",
            "gap",
            "9.9692099683868690e+36",
        ] {
            assert_eq!(parse(cell.as_bytes(), false, &marks), Cell::Missing, "{cell}");
        }
        assert_eq!(parse(b"-99", false, &Marks::default()), Cell::Value(-99.0));
        assert_eq!(parse(b"gap", false, &Marks::default()), Cell::Other);
        assert_eq!(parse(b"-999.0", true, &Marks::default()), Cell::Missing);
    }

    #[test]
    fn infinity_and_overflow_are_not_values() {
        for cell in ["inf", "-Infinity", "1e400"] {
            assert_eq!(parse(cell.as_bytes(), false, &Marks::default()), Cell::Infinite, "{cell}");
        }
    }

    #[test]
    fn numbers_with_point_or_comma() {
        let read = |cell: &str, comma| parse(cell.as_bytes(), comma, &Marks::default());
        assert_eq!(read("-12.5e1", false), Cell::Value(-125.0));
        assert_eq!(read("+3.25", false), Cell::Value(3.25));
        assert_eq!(read("12,5", true), Cell::Value(12.5));
        assert_eq!(read("-0,25", true), Cell::Value(-0.25));
        assert_eq!(read("12,5e1", true), Cell::Value(125.0));
        assert_eq!(read("7", true), Cell::Value(7.0));
        for (cell, comma) in
            [("12,5", false), ("1.234", true), ("12,", true), (",5", true), ("1,2,3", true), ("--5", false)]
        {
            assert_eq!(read(cell, comma), Cell::Other, "{cell}");
        }
    }
}
