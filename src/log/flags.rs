//! Schemes of quality flags, and their way to the IOC scheme.

use super::Flag;

/// What the numbers of a flag column mean.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Scheme {
    /// IOC Manuals and Guides 54, volume 3 (2013), primary level.
    Ioc,
    /// OceanSITES and Argo reference table 2: 2 is "probably good".
    OceanSites,
    /// WOCE flags of CTD values (WHPO 90-1, 1994, table 3.8).
    Woce,
    /// Numbers explained by the file itself (`flag_values` and `flag_meanings` of CF).
    Explained(Vec<(i64, Flag)>),
}

impl Scheme {
    /// The flag of `code`; none when the scheme has no such number.
    pub fn flag(&self, code: i64) -> Option<Flag> {
        if let Scheme::Explained(values) = self {
            return values.iter().find(|(value, _)| *value == code).map(|(_, flag)| *flag);
        }
        Some(match (self, code) {
            (Scheme::Woce, 2 | 7) => Flag::Good,
            (Scheme::Woce, 5 | 9) => Flag::Missing,
            (Scheme::Woce, 1 | 6 | 8) => Flag::NotEvaluated,
            (Scheme::Woce, 0) => return None,
            (Scheme::OceanSites, 2) | (_, 1) => Flag::Good,
            (_, 3) => Flag::Questionable,
            (_, 4) => Flag::Bad,
            (_, 9) => Flag::Missing,
            (_, 0 | 2 | 5..=8) => Flag::NotEvaluated,
            _ => return None,
        })
    }

    /// The scheme of a flag variable, from its words: `flag_meanings` word by word, else what units,
    /// conventions and the like say. None when nothing tells.
    pub fn from_words(values: &[i64], meanings: &str, other: &str) -> Option<Self> {
        let other = other.to_ascii_lowercase();
        let says = |wanted: &str| other.split(|c: char| !c.is_alphanumeric()).any(|word| word == wanted);
        if says("woce") {
            return Some(Scheme::Woce);
        }
        let words: Vec<_> = meanings.split_ascii_whitespace().collect();
        if !values.is_empty() && values.len() == words.len() {
            return Some(Scheme::Explained(
                values.iter().zip(words).map(|(&v, word)| (v, of_word(word))).collect(),
            ));
        }
        let meanings = meanings.to_ascii_lowercase();
        if says("oceansites") || says("argo") || meanings.contains("probably_good") {
            Some(Scheme::OceanSites)
        } else if says("ioc") || says("qartod") || other.contains("54:v3") {
            Some(Scheme::Ioc)
        } else {
            None
        }
    }
}

/// The flag that one word of `flag_meanings` stands for. The order matters: "probably_bad" holds "bad".
fn of_word(word: &str) -> Flag {
    let word = word.to_ascii_lowercase();
    let has = |parts: &[&str]| parts.iter().any(|part| word.contains(part));
    if has(&["missing", "not_sampled", "no_data", "nodata", "not_reported"]) {
        Flag::Missing
    } else if has(&["not_", "no_", "unknown", "unevaluated"]) {
        Flag::NotEvaluated
    } else if has(&["probably_bad", "suspect", "questionable", "doubtful", "correctable"]) {
        Flag::Questionable
    } else if has(&["bad", "fail"]) {
        Flag::Bad
    } else if has(&["good", "pass", "acceptable", "correct"]) {
        Flag::Good
    } else {
        Flag::NotEvaluated
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use Flag::*;

    #[test]
    fn every_number_of_every_scheme() {
        let all = |scheme: Scheme| (0..=9).map(|code| scheme.flag(code)).collect::<Vec<_>>();
        let some = |flags: [Flag; 10]| flags.map(Some).to_vec();
        let n = NotEvaluated;
        assert_eq!(all(Scheme::Ioc), some([n, Good, n, Questionable, Bad, n, n, n, n, Missing]));
        assert_eq!(all(Scheme::OceanSites), some([n, Good, Good, Questionable, Bad, n, n, n, n, Missing]));
        let woce = all(Scheme::Woce);
        assert_eq!(woce[0], None);
        assert_eq!(woce[1..], some([n, n, Good, Questionable, Bad, Missing, n, Good, n, Missing])[1..]);
        assert_eq!(Scheme::Ioc.flag(10), None);
        assert_eq!(Scheme::Woce.flag(-1), None);
    }

    #[test]
    fn the_words_of_a_file_tell_the_scheme() {
        assert_eq!(Scheme::from_words(&[], "", "woce_flags"), Some(Scheme::Woce));
        assert_eq!(Scheme::from_words(&[], "", "Argo reference table 2"), Some(Scheme::OceanSites));
        assert_eq!(Scheme::from_words(&[], "", "OceanSITES QC Flags"), Some(Scheme::OceanSites));
        assert_eq!(Scheme::from_words(&[], "", "IOC 54:V3"), Some(Scheme::Ioc));
        assert_eq!(Scheme::from_words(&[], "", "quality"), None);
        let words = "no_qc_performed good_data probably_good_data bad_data_that_are_potentially_correctable bad_data \
                     value_changed interpolated_value missing_value";
        let scheme = Scheme::from_words(&[0, 1, 2, 3, 4, 5, 8, 9], words, "").unwrap();
        let flags: Vec<_> = [0, 1, 2, 3, 4, 5, 8, 9].iter().map(|&code| scheme.flag(code)).collect();
        let expected = [NotEvaluated, Good, Good, Questionable, Bad, NotEvaluated, NotEvaluated, Missing];
        assert_eq!(flags, expected.map(Some));
        assert_eq!(scheme.flag(7), None);
        let scheme =
            Scheme::from_words(&[1, 2, 3, 4, 9], "pass not_evaluated suspect fail missing", "").unwrap();
        let flags: Vec<_> = [1, 2, 3, 4, 9].iter().map(|&code| scheme.flag(code)).collect();
        assert_eq!(flags, [Good, NotEvaluated, Questionable, Bad, Missing].map(Some));
    }
}
