//! Times of a text log: ISO 8601 stamps, a date and a clock in two columns, reference times of units.

use jiff::Timestamp;
use jiff::civil::Date;

/// Nanoseconds since 1970-01-01T00:00:00Z; covers the years 1678 to 2261.
pub(super) type Nanos = i64;

const SECOND: i64 = 1_000_000_000;
const DAY: i64 = 86_400 * SECOND;

/// A stamp, and whether it said its offset from UTC.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Stamp {
    pub nanos: Nanos,
    pub offset_told: bool,
}

/// Parses stamps; remembers the last date, since neighbouring samples share it.
#[derive(Debug, Default)]
pub(super) struct StampParser {
    last: Option<((i16, i8, i8), Nanos)>,
}

impl StampParser {
    /// `2026-03-01T10:20:30.5Z`, with a blank for the `T`, an offset for the `Z` or neither, with
    /// seconds or without; also the basic form `20260301T102030Z`.
    pub fn stamp(&mut self, cell: &[u8]) -> Option<Stamp> {
        let (day, rest) = self.date_prefix(cell)?;
        let rest = match rest {
            [b'T' | b't', rest @ ..] => rest,
            [b' ', rest @ ..] => rest.trim_ascii_start(),
            _ => return None,
        };
        let (clock, rest) = clock_prefix(rest)?;
        let offset = offset(rest.trim_ascii())?;
        let nanos = day.checked_add(clock)?.checked_sub(offset.unwrap_or(0))?;
        Some(Stamp { nanos, offset_told: offset.is_some() })
    }

    /// A date alone: `2026-03-01`, `2026/03/01` or `20260301`; midnight UTC of that day.
    pub fn date(&mut self, cell: &[u8]) -> Option<Nanos> {
        match self.date_prefix(cell)? {
            (day, []) => Some(day),
            _ => None,
        }
    }

    fn date_prefix<'a>(&mut self, cell: &'a [u8]) -> Option<(Nanos, &'a [u8])> {
        let year = digits(cell.get(..4)?)? as i16;
        let mark = *cell.get(4)?;
        let (month, day, end) = if matches!(mark, b'-' | b'/') {
            if *cell.get(7)? != mark {
                return None;
            }
            (digits(&cell[5..7])?, digits(cell.get(8..10)?)?, 10)
        } else {
            (digits(cell.get(4..6)?)?, digits(cell.get(6..8)?)?, 8)
        };
        let key = (year, month as i8, day as i8);
        let nanos = match self.last {
            Some((last, nanos)) if last == key => nanos,
            _ => {
                let nanos = day_nanos(key.0, key.1, key.2)?;
                self.last = Some((key, nanos));
                nanos
            }
        };
        Some((nanos, &cell[end..]))
    }
}

/// A time of day: `10:20`, `10:20:30.25`, `1020` or `102030`, with a `Z` behind it or not.
pub(super) fn clock(cell: &[u8]) -> Option<Nanos> {
    let (nanos, rest) = clock_prefix(cell)?;
    matches!(rest, [] | [b'Z']).then_some(nanos)
}

fn clock_prefix(cell: &[u8]) -> Option<(Nanos, &[u8])> {
    let hour = digits(cell.get(..2)?)?;
    let colon = cell.get(2) == Some(&b':');
    let step = usize::from(colon);
    let minute = digits(cell.get(2 + step..4 + step)?)?;
    let mut rest = &cell[4 + step..];
    let mut nanos = (hour * 60 + minute) * 60 * SECOND;
    let second = if colon {
        rest.strip_prefix(b":")
    } else {
        rest.first().is_some_and(u8::is_ascii_digit).then_some(rest)
    };
    if let Some(after) = second {
        // Second 60 is a leap second and lands on the following second, as UTC clocks count.
        let whole = digits(after.get(..2)?).filter(|&s| s <= 60)?;
        nanos += whole * SECOND;
        rest = &after[2..];
        if let [b'.' | b',', fraction @ ..] = rest {
            let count = fraction.iter().take_while(|b| b.is_ascii_digit()).count();
            if count == 0 {
                return None;
            }
            // Digits beyond the nanosecond are left out.
            let mut scale = SECOND / 10;
            for &digit in fraction[..count].iter().take(9) {
                nanos += i64::from(digit - b'0') * scale;
                scale /= 10;
            }
            rest = &fraction[count..];
        }
    }
    (hour < 24 && minute < 60).then_some((nanos, rest))
}

/// Offset from UTC: `Z`, `UTC`, `+02:00`, `-0930`, `+02`; nothing at all is `Some(None)`.
fn offset(text: &[u8]) -> Option<Option<Nanos>> {
    let (sign, rest) = match text {
        [] => return Some(None),
        b"Z" | b"z" | b"UTC" | b"GMT" => return Some(Some(0)),
        [b'+', rest @ ..] => (1, rest),
        [b'-', rest @ ..] => (-1, rest),
        _ => return None,
    };
    let hours = digits(rest.get(..2)?)?;
    let minutes = match &rest[2..] {
        [] => 0,
        [b':', minutes @ ..] if minutes.len() == 2 => digits(minutes)?,
        minutes if minutes.len() == 2 => digits(minutes)?,
        _ => return None,
    };
    (hours < 24 && minutes < 60).then_some(Some(sign * (hours * 60 + minutes) * 60 * SECOND))
}

fn digits(text: &[u8]) -> Option<i64> {
    text.iter().try_fold(0_i64, |sum, b| b.is_ascii_digit().then(|| sum * 10 + i64::from(b - b'0')))
}

fn day_nanos(year: i16, month: i8, day: i8) -> Option<Nanos> {
    let date = Date::new(year, month, day).ok()?;
    let seconds = date.at(0, 0, 0, 0).duration_since(Date::constant(1970, 1, 1).at(0, 0, 0, 0)).as_secs();
    seconds.checked_mul(SECOND)
}

/// The absolute time, as the rest of the program keeps it.
pub(super) fn timestamp(nanos: Nanos) -> Option<Timestamp> {
    Timestamp::from_nanosecond(i128::from(nanos)).ok()
}

/// `seconds since 1970-01-01 00:00:00`: the unit in front and the reference time (UTC unless it says
/// otherwise), as CF and COARDS write it; month, day and clock may lack their leading zeros.
pub(super) fn since(text: &str) -> Option<(&str, Nanos)> {
    let lower = text.to_ascii_lowercase();
    let at = lower.find(" since ")?;
    Some((text[..at].trim(), reference(text[at + 7..].trim())?))
}

fn reference(text: &str) -> Option<Nanos> {
    let (date, rest) = text.split_once(['T', 't', ' ']).unwrap_or((text, ""));
    let mut parts = date.split('-');
    let year = parts.next()?.parse::<i16>().ok()?;
    let month = parts.next()?.parse::<i8>().ok()?;
    let day = parts.next()?.parse::<i8>().ok()?;
    if parts.next().is_some() {
        return None;
    }
    let day = day_nanos(year, month, day)?;
    let rest = rest.trim();
    if rest.is_empty() {
        return Some(day);
    }
    let end = rest.find(|c: char| !(c.is_ascii_digit() || matches!(c, ':' | '.'))).unwrap_or(rest.len());
    let mut clock = [0.0_f64; 3];
    for (i, part) in rest[..end].split(':').enumerate() {
        *clock.get_mut(i)? = part.parse().ok()?;
    }
    if clock[0] >= 25.0 || clock[1] >= 60.0 || clock[2] >= 61.0 {
        return None;
    }
    let nanos = ((clock[0] * 60.0 + clock[1]) * 60.0 * 1e9 + clock[2] * 1e9).round() as i64;
    let offset = offset(rest[end..].trim().as_bytes())?.unwrap_or(0);
    day.checked_add(nanos)?.checked_sub(offset)
}

/// `start` and `value` units of `seconds` each after it; `None` beyond the range of the type.
pub(super) fn after(start: Nanos, value: f64, seconds: f64) -> Option<Nanos> {
    // Whole days first: a day count since 1950 times 86 400e9 does not fit the 53 bits of a double.
    let (whole, part) = (value.trunc(), value.fract());
    let unit = seconds * 1e9;
    if !(whole * unit).is_finite() || (whole * unit).abs() > 9e18 {
        return None;
    }
    let nanos = (whole as i64).checked_mul(unit.round() as i64)?.checked_add((part * unit).round() as i64)?;
    start.checked_add(nanos)
}

/// Seconds from `start` to `end`.
pub(super) fn seconds_between(start: Nanos, end: Nanos) -> f64 {
    match end.checked_sub(start) {
        // Whole seconds and the rest apart, so that 0.1 s steps stay 0.1 s steps.
        Some(nanos) => (nanos / SECOND) as f64 + (nanos % SECOND) as f64 / 1e9,
        None => end as f64 / 1e9 - start as f64 / 1e9,
    }
}

/// Nanoseconds of a day.
pub(super) const DAY_NANOS: Nanos = DAY;

#[cfg(test)]
mod tests {
    use super::*;

    /// Seconds since 1970 of 2026-03-01T00:00:00Z, by `date -u -d 2026-03-01 +%s`.
    const MARCH_1: i64 = 1_772_323_200;

    fn stamp(text: &str) -> Option<Stamp> {
        StampParser::default().stamp(text.as_bytes())
    }

    #[test]
    fn stamps_in_all_their_forms() {
        let at = |seconds: i64, nanos: i64| (MARCH_1 + seconds) * SECOND + nanos;
        for (text, nanos, told) in [
            ("2026-03-01T10:20:30Z", at(37_230, 0), true),
            ("2026-03-01 10:20:30", at(37_230, 0), false),
            ("2026-03-01T10:20", at(37_200, 0), false),
            ("2026-03-01T10:20:30.25+02:00", at(30_030, 250_000_000), true),
            ("2026-03-01T10:20:30-0930", at(71_430, 0), true),
            ("2026-03-01 10:20:30 UTC", at(37_230, 0), true),
            ("2026/03/01 10:20:30,5", at(37_230, 500_000_000), false),
            ("20260301T102030Z", at(37_230, 0), true),
            ("2026-03-01T10:20:30.123456789123Z", at(37_230, 123_456_789), true),
            ("2026-02-28T23:59:60Z", at(0, 0), true),
        ] {
            assert_eq!(stamp(text), Some(Stamp { nanos, offset_told: told }), "{text}");
        }
    }

    #[test]
    fn what_is_no_time_is_refused() {
        for text in [
            "2026-02-30T10:00:00Z",
            "2026-13-01T10:00:00",
            "01/03/2026 10:00:00",
            "2026-03-01",
            "2026-03-01T25:00:00Z",
            "2026-03-01T10:60:00Z",
            "2026-03-01T10:00:61Z",
            "2026-03-01T10:00:00.",
            "2026-03-01T10:00:00X",
            "2026-03-01T10:00:00+2",
            "12.5",
            "",
            "é026-03-01T10:00:00",
        ] {
            assert_eq!(stamp(text), None, "{text}");
        }
    }

    #[test]
    fn dates_and_clocks_apart() {
        let mut parser = StampParser::default();
        for text in ["2026-03-01", "2026/03/01", "20260301"] {
            assert_eq!(parser.date(text.as_bytes()), Some(MARCH_1 * SECOND), "{text}");
        }
        assert_eq!(parser.date(b"2026-03-01T00"), None);
        for (text, seconds) in
            [("10:20", 37_200), ("1020", 37_200), ("102030", 37_230), ("10:20:30Z", 37_230)]
        {
            assert_eq!(clock(text.as_bytes()), Some(seconds * SECOND), "{text}");
        }
        for text in ["24:00", "10:61", "1020x", "102", "10:2", ""] {
            assert_eq!(clock(text.as_bytes()), None, "{text}");
        }
    }

    #[test]
    fn reference_times_of_units() {
        assert_eq!(since("seconds since 1970-01-01 00:00:00"), Some(("seconds", 0)));
        assert_eq!(since("days since 1970-1-2"), Some(("days", DAY)));
        assert_eq!(since("Hours since 1970-01-01T01:30:00Z"), Some(("Hours", 5400 * SECOND)));
        assert_eq!(since("minutes since 1970-01-01 02:00:00 +02:00"), Some(("minutes", 0)));
        // 1950-01-01 is 7305 days before 1970-01-01.
        assert_eq!(since("days since 1950-01-01 00:00:00 UTC"), Some(("days", -7305 * DAY)));
        for text in [
            "seconds",
            "seconds since",
            "seconds since yesterday",
            "days since 1950-02-30",
            "s since 1970-01-01 99:00",
        ] {
            assert_eq!(since(text), None, "{text}");
        }
    }

    #[test]
    fn counting_from_a_reference() {
        assert_eq!(after(0, 1.5, 86_400.0), Some(DAY + DAY / 2));
        assert_eq!(after(-DAY, 60.0, 60.0), Some(-DAY + 3600 * SECOND));
        assert_eq!(after(0, 1e300, 1.0), None);
        assert_eq!(after(0, f64::NAN, 1.0), None);
        assert_eq!(seconds_between(0, 1_100_000_000), 1.1);
    }
}
