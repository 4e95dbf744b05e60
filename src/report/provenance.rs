//! Where a result comes from, for outputs that outlive the call that made them.

/// The program and its version.
pub const PROGRAM: &str = concat!("seaplumb ", env!("CARGO_PKG_VERSION"));

/// The call that makes a result.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Provenance {
    /// The call as a shell would take it, program and options; empty when there is none.
    pub call: String,
    /// When it was made; `None` leaves the time out, so that the same input gives the same bytes.
    pub time: Option<jiff::Timestamp>,
}

impl Provenance {
    /// One line: time, program and version, call.
    pub fn history(&self) -> String {
        let time = self.time.map_or(String::new(), |t| format!("{t} "));
        let call = if self.call.is_empty() { String::new() } else { format!(": {}", self.call) };
        format!("{time}{PROGRAM}{call}")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn history_says_what_is_known() {
        assert_eq!(Provenance::default().history(), PROGRAM);
        let time = jiff::Timestamp::from_second(86_400).ok();
        let full = Provenance { call: "seaplumb reduce a.csv".to_string(), time };
        assert_eq!(full.history(), format!("1970-01-02T00:00:00Z {PROGRAM}: seaplumb reduce a.csv"));
    }
}
