//! `--column ROLE=NAME[:UNIT]` as text, and the names of the roles.

use std::str::FromStr;

use super::{ColumnChoice, Role};

impl Role {
    /// Every role, in the order in which messages list them.
    pub const ALL: [Role; 11] = [
        Role::Time,
        Role::Pressure,
        Role::Conductivity,
        Role::Temperature,
        Role::Salinity,
        Role::Altitude,
        Role::Pitch,
        Role::Roll,
        Role::Latitude,
        Role::Longitude,
        Role::Flag,
    ];

    /// The word for the role in options and messages.
    pub fn name(self) -> &'static str {
        match self {
            Role::Time => "time",
            Role::Pressure => "pressure",
            Role::Conductivity => "conductivity",
            Role::Temperature => "temperature",
            Role::Salinity => "salinity",
            Role::Altitude => "altitude",
            Role::Pitch => "pitch",
            Role::Roll => "roll",
            Role::Latitude => "latitude",
            Role::Longitude => "longitude",
            Role::Flag => "flag",
        }
    }
}

impl FromStr for Role {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        let known = || Role::ALL.map(Role::name).join(", ");
        Role::ALL
            .into_iter()
            .find(|role| role.name().eq_ignore_ascii_case(text.trim()))
            .ok_or_else(|| format!("'{}' is no role of a column; known are {}", text.trim(), known()))
    }
}

impl FromStr for ColumnChoice {
    type Err = String;

    /// Splits at the first `=` and at the first `:` after it. A column whose own name holds a colon
    /// is still found: the reader also tries `NAME:UNIT` as a name.
    fn from_str(text: &str) -> Result<Self, String> {
        let (role, rest) = text
            .split_once('=')
            .ok_or_else(|| format!("'{text}' is not ROLE=NAME[:UNIT]; an example is pressure=prs:dbar"))?;
        let role = role.parse()?;
        let (name, unit) = match rest.split_once(':') {
            Some((name, unit)) => (name.trim(), Some(unit.trim()).filter(|unit| !unit.is_empty())),
            None => (rest.trim(), None),
        };
        if name.is_empty() {
            return Err(format!("'{text}' names no column; an example is pressure=prs:dbar"));
        }
        Ok(Self { role, name: name.to_string(), unit: unit.map(str::to_string) })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn choice(role: Role, name: &str, unit: Option<&str>) -> Result<ColumnChoice, String> {
        Ok(ColumnChoice { role, name: name.into(), unit: unit.map(Into::into) })
    }

    #[test]
    fn an_option_is_split_into_its_parts() {
        for (text, expected) in [
            ("pressure=prs:dbar", choice(Role::Pressure, "prs", Some("dbar"))),
            ("Pressure = 2 : MPa", choice(Role::Pressure, "2", Some("MPa"))),
            ("temperature=T90", choice(Role::Temperature, "T90", None)),
            (
                "time=t:seconds since 1970-01-01 00:00:00",
                choice(Role::Time, "t", Some("seconds since 1970-01-01 00:00:00")),
            ),
            ("flag=a=b", choice(Role::Flag, "a=b", None)),
            ("salinity=sal:", choice(Role::Salinity, "sal", None)),
        ] {
            assert_eq!(text.parse(), expected, "{text}");
        }
    }

    #[test]
    fn a_wrong_option_says_what_is_right() {
        let error = |text: &str| text.parse::<ColumnChoice>().unwrap_err();
        assert!(error("pressure").contains("ROLE=NAME[:UNIT]"));
        assert!(error("pressure=:dbar").contains("names no column"));
        let unknown = error("depth=d:m");
        assert!(
            unknown.contains("'depth'") && Role::ALL.iter().all(|role| unknown.contains(role.name())),
            "{unknown}"
        );
    }
}
