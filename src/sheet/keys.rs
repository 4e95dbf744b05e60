//! What a section and a key of a sheet are; the table holds them all.

mod table;

pub(super) use table::sections;

use super::scope::Scope;
use crate::settings::range::{self, Range};
use crate::uncertainty::Term;
use std::borrow::Cow;

/// A word that a key may hold, and what it does.
type Word = (&'static str, fn(&mut Scope));

/// What a key holds, and where it goes.
#[derive(Clone, Copy)]
pub(super) enum Kind {
    /// A number within a range.
    Number(Range, fn(&mut Scope, f64)),
    /// The standard uncertainty of a term.
    Uncertainty(Term),
    /// Any text.
    Text(fn(&mut Scope, String)),
    /// One of a few words.
    Words(&'static [Word]),
    /// `auto`, `none` or dbar.
    Tare,
    /// Metres; a file of a series is told apart.
    WaterLevel,
    /// A file beside the sheet.
    Profile,
    /// A table of roles and columns.
    Columns,
    /// A list of texts.
    Missing,
    /// An instant.
    Start,
}

/// A key.
#[derive(Clone, Copy)]
pub(super) struct Key {
    pub name: &'static str,
    pub kind: Kind,
    /// What it is, in plain words with its unit.
    pub meaning: &'static str,
    /// What holds where nobody says anything.
    pub otherwise: &'static str,
    /// A value as it may stand in a sheet.
    pub example: &'static str,
}

impl Key {
    /// What the key may hold, for messages and the sheet to fill in.
    pub fn expected(&self) -> String {
        match self.kind {
            Kind::Number(range, _) => format!("a number, {range}"),
            Kind::Uncertainty(term) => {
                let unit = if term.unit() == "1" { "" } else { term.unit() };
                format!("a number, {}", Range::uncertainty(unit))
            }
            Kind::Text(_) => "a text in quotes".to_string(),
            Kind::Words(words) => {
                let words: Vec<String> = words.iter().map(|(word, _)| format!("\"{word}\"")).collect();
                match words.split_last() {
                    Some((last, rest)) => format!("{} or {last}", rest.join(", ")),
                    None => String::new(),
                }
            }
            Kind::Tare => format!("\"auto\", \"none\" or a number, {}", range::TARE),
            Kind::WaterLevel => format!("a number, {}", range::WATER_LEVEL),
            Kind::Profile => "the name of a file in quotes".to_string(),
            Kind::Columns => "a table such as { pressure = \"prs:MPa\" }".to_string(),
            Kind::Missing => "a list of texts such as [\"-99\", \"x\"]".to_string(),
            Kind::Start => {
                "a time by ISO 8601 with its offset from UTC, such as 2026-03-01T10:20:30Z".to_string()
            }
        }
    }
}

/// A section.
pub(super) struct Section {
    pub name: &'static str,
    /// What it is about.
    pub about: &'static str,
    pub keys: Cow<'static, [Key]>,
}

impl Section {
    /// The key of a name.
    pub fn key(&self, name: &str) -> Option<Key> {
        self.keys.iter().copied().find(|key| key.name == name)
    }
}

/// Name of the section of terms.
pub(super) const UNCERTAINTY: &str = "uncertainty";
/// Sections whose keys stand directly in a `[[cast]]`: its own `log` is the file.
pub(super) const DIRECT: [&str; 2] = ["station", "log"];
/// Name of the key of a `[[cast]]` that says which logs it is about.
pub(super) const CAST_LOG: &str = "log";
/// Name of the array of casts.
pub(super) const CAST: &str = "cast";

/// Keys that settle one and the same thing, and what it is. Those of one word of a group may stand together.
pub(super) fn settles(section: &str, key: &Key) -> Option<(String, &'static str)> {
    match (section, key.name) {
        ("gravity", "anomaly_mgal" | "u_anomaly_mgal") => Some(("surface gravity".to_string(), "anomaly")),
        ("gravity", "disturbance_mgal" | "u_disturbance_mgal") => {
            Some(("surface gravity".to_string(), "disturbance"))
        }
        ("pressure_sensor", "u_constant_dbar" | "u_relative") => {
            Some((of_budget(Term::PressureCalibration), "certificate"))
        }
        _ => None,
    }
}

/// The term whose uncertainty a key supplies, in words.
pub(super) fn of_budget(term: Term) -> String {
    format!("the uncertainty '{}'", term.key())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_section_has_a_key_twice_and_direct_keys_never_collide() {
        let mut direct = vec![CAST_LOG];
        for section in sections() {
            let mut names: Vec<_> = section.keys.iter().map(|key| key.name).collect();
            if DIRECT.contains(&section.name) {
                direct.extend(&names);
            }
            let count = names.len();
            names.sort_unstable();
            names.dedup();
            assert_eq!(names.len(), count, "[{}]", section.name);
        }
        let count = direct.len();
        direct.sort_unstable();
        direct.dedup();
        assert_eq!(direct.len(), count, "[[cast]]");
    }

    #[test]
    fn the_defaults_are_those_of_the_terms() {
        let section = sections().pop().expect("the terms");
        for term in Term::ALL {
            let otherwise = section.key(term.key()).expect("a key").otherwise;
            if let Some(assumed) = term.assumed() {
                assert_eq!(otherwise, assumed.to_string(), "{}", term.key());
            }
        }
        for key in sections().iter().flat_map(|s| s.keys.to_vec()) {
            if let Kind::Uncertainty(term) = key.kind
                && let Some(assumed) = term.assumed()
            {
                assert_eq!(key.otherwise, assumed.to_string(), "{}", key.name);
            }
        }
    }

    #[test]
    fn what_is_expected_in_words() {
        let sections = sections();
        let expected = |section: &str, key: &str| {
            sections.iter().find(|s| s.name == section).unwrap().key(key).unwrap().expected()
        };
        assert_eq!(expected("station", "latitude"), "a number, -90 to 90 degrees");
        assert_eq!(expected("water", "leg"), "\"down\", \"up\" or \"both\"");
        assert_eq!(expected("uncertainty", "surface_gravity"), "a number, 0 mGal or more");
    }
}
