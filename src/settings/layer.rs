//! One voice among several: what the call says of a cast, or what the sheet says.

use super::Settings;
use crate::log::ReadOptions;

/// What one voice says: how the log is to be read, what is known of the cast, whose water to take.
///
/// An option beats the sheet, the sheet beats what the log says: `call.or(sheet)`, and whatever is `None` after that is
/// left to the log.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Layer {
    /// How the log is to be read.
    pub reading: ReadOptions,
    /// What is known of the cast.
    pub settings: Settings,
    /// File with the water of another cast; [`Settings::profile`] holds it once it is read.
    pub profile: Option<String>,
}

impl Layer {
    /// This voice, and `below` where this one is silent.
    #[must_use]
    pub fn or(self, below: Self) -> Self {
        Self {
            reading: reading(self.reading, below.reading),
            settings: self.settings.or(below.settings),
            profile: self.profile.or(below.profile),
        }
    }
}

/// A column of `below` holds where the voice above is silent on its role. Marks for missing values add up: one more mark
/// never contradicts another.
fn reading(above: ReadOptions, below: ReadOptions) -> ReadOptions {
    let ReadOptions { mut columns, mut missing } = above;
    let said: Vec<_> = columns.iter().map(|choice| choice.role).collect();
    columns.extend(below.columns.into_iter().filter(|choice| !said.contains(&choice.role)));
    for mark in below.missing {
        if !missing.contains(&mark) {
            missing.push(mark);
        }
    }
    ReadOptions { columns, missing }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::cast::TareChoice;
    use crate::uncertainty::{Basis, Supplied, Term};

    fn options(columns: &[&str], missing: &[&str]) -> ReadOptions {
        ReadOptions {
            columns: columns.iter().map(|c| c.parse().unwrap()).collect(),
            missing: missing.iter().map(|m| m.to_string()).collect(),
        }
    }

    #[test]
    fn a_column_of_the_voice_above_hides_the_one_below() {
        let merged = reading(
            options(&["pressure=p:bar"], &["-99"]),
            options(&["pressure=prs:MPa", "temperature=t"], &["-99", "x"]),
        );
        assert_eq!(merged, options(&["pressure=p:bar", "temperature=t"], &["-99", "x"]));
    }

    #[test]
    fn the_voice_above_is_heard_and_its_silence_filled() {
        let supplied = |u, basis| Supplied::new(u, basis);
        let above = Layer {
            settings: Settings {
                latitude_deg: Some(1.0),
                tare: Some(TareChoice::None),
                uncertainties: [(Term::Tare, supplied(0.1, Basis::Option))].into(),
                ..Settings::default()
            },
            ..Layer::default()
        };
        let below = Layer {
            settings: Settings {
                latitude_deg: Some(2.0),
                longitude_deg: Some(3.0),
                uncertainties: [
                    (Term::Tare, supplied(0.2, Basis::Sheet)),
                    (Term::Position, supplied(0.3, Basis::Sheet)),
                ]
                .into(),
                ..Settings::default()
            },
            profile: Some("near.csv".to_string()),
            ..Layer::default()
        };
        let merged = above.or(below);
        assert_eq!(merged.settings.latitude_deg, Some(1.0));
        assert_eq!(merged.settings.longitude_deg, Some(3.0));
        assert_eq!(merged.settings.tare(), TareChoice::None);
        assert_eq!(merged.settings.uncertainties[&Term::Tare], supplied(0.1, Basis::Option));
        assert_eq!(merged.settings.uncertainties[&Term::Position], supplied(0.3, Basis::Sheet));
        assert_eq!(merged.profile.as_deref(), Some("near.csv"));
    }
}
