//! Numbers as text.

/// Appends `x` with `decimals` (at most 9) decimals; nothing when it is not finite, and never a negative zero.
pub(super) fn push_fixed(out: &mut Vec<u8>, x: f64, decimals: u32) {
    let scale = 10f64.powi(decimals as i32);
    let scaled = (x * scale).round_ties_even();
    if !scaled.is_finite() || scaled.abs() >= 9.0e15 {
        return;
    }
    let mut digits = scaled.abs() as u64;
    let mut buffer = [b'0'; 24];
    let mut at = buffer.len();
    let mut written = 0;
    while digits > 0 || written <= decimals {
        if written == decimals && decimals > 0 {
            at -= 1;
            buffer[at] = b'.';
        }
        at -= 1;
        buffer[at] = b'0' + (digits % 10) as u8;
        digits /= 10;
        written += 1;
    }
    if scaled < 0.0 {
        at -= 1;
        buffer[at] = b'-';
    }
    out.extend_from_slice(&buffer[at..]);
}

/// Appends `x` with at most `decimals` decimals, no zeros at the end.
pub(super) fn push_trimmed(out: &mut Vec<u8>, x: f64, decimals: u32) {
    let start = out.len();
    push_fixed(out, x, decimals);
    if out[start..].contains(&b'.') {
        while out.ends_with(b"0") {
            out.pop();
        }
        if out.ends_with(b".") {
            out.pop();
        }
    }
}

/// `x` rounded to `decimals`, for JSON; not finite stays not finite (null there).
pub(super) fn rounded(x: f64, decimals: i32) -> f64 {
    let scale = 10f64.powi(decimals);
    let value = (x * scale).round() / scale;
    if value == 0.0 { 0.0 } else { value }
}

/// `x` rounded to `digits` significant digits.
pub(super) fn significant(x: f64, digits: i32) -> f64 {
    if x == 0.0 || !x.is_finite() {
        return if x == 0.0 { 0.0 } else { x };
    }
    let decimals = digits - 1 - x.abs().log10().floor() as i32;
    if decimals > 300 { 0.0 } else { format!("{:.*e}", (digits - 1) as usize, x).parse().unwrap_or(x) }
}

/// For people: thousands apart by a thin gap (a plain blank), `decimals` decimals.
pub(super) fn grouped(x: f64, decimals: u32) -> String {
    if !x.is_finite() {
        return "-".to_string();
    }
    let mut bytes = Vec::new();
    push_fixed(&mut bytes, x, decimals);
    let text = String::from_utf8_lossy(&bytes).into_owned();
    let (sign, text) = text.strip_prefix('-').map_or(("", text.as_str()), |rest| ("-", rest));
    let (whole, fraction) = text.split_once('.').unwrap_or((text, ""));
    let mut spaced = String::new();
    for (i, digit) in whole.chars().enumerate() {
        // Four digits read well without a gap.
        if i > 0 && (whole.len() - i).is_multiple_of(3) && whole.len() > 4 {
            spaced.push(' ');
        }
        spaced.push(digit);
    }
    if fraction.is_empty() { format!("{sign}{spaced}") } else { format!("{sign}{spaced}.{fraction}") }
}

/// For people: three significant digits, plain where that stays short.
pub(super) fn short(x: f64) -> String {
    if !x.is_finite() {
        return "-".to_string();
    }
    if x == 0.0 {
        return "0".to_string();
    }
    let size = x.abs().log10().floor() as i32;
    if (-4..6).contains(&size) {
        let decimals = (2 - size).max(0) as usize;
        let text = format!("{x:.decimals$}");
        if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.').to_string() } else { text }
    } else {
        format!("{x:.2e}")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fixed(x: f64, decimals: u32) -> String {
        let mut out = Vec::new();
        push_fixed(&mut out, x, decimals);
        String::from_utf8(out).unwrap()
    }

    #[test]
    fn fixed_decimals_are_those_of_the_standard_formatter() {
        for x in [0.0, 1.0, -1.0, 0.049, 12.345_6, -10_871.360_4, 99.9996, 1e9, 0.5] {
            for decimals in 0..7 {
                assert_eq!(fixed(x, decimals), format!("{x:.*}", decimals as usize), "{x} {decimals}");
            }
        }
    }

    #[test]
    fn no_negative_zero_and_nothing_for_nothing() {
        assert_eq!(fixed(-0.0001, 3), "0.000");
        assert_eq!(fixed(f64::NAN, 3), "");
        assert_eq!(fixed(f64::INFINITY, 3), "");
    }

    #[test]
    fn trimmed() {
        let text = |x| {
            let mut out = Vec::new();
            push_trimmed(&mut out, x, 4);
            String::from_utf8(out).unwrap()
        };
        assert_eq!((text(0.0).as_str(), text(0.25).as_str(), text(100.0).as_str()), ("0", "0.25", "100"));
    }

    #[test]
    fn for_people() {
        assert_eq!(grouped(10_871.355, 2), "10 871.36");
        assert_eq!(grouped(9712.65, 2), "9712.65");
        assert_eq!(grouped(-1_234_567.0, 0), "-1 234 567");
        assert_eq!(short(0.012_345), "0.0123");
        assert_eq!(short(0.5), "0.5");
        assert_eq!(short(11_204.0), "11204");
        assert_eq!(significant(0.012_345_678, 4), 0.012_35);
        assert_eq!(rounded(-0.000_04, 3).to_string(), "0");
    }
}
