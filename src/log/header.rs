//! One cell of a header line: a name, and the unit that may stand with it.

use super::role::{self, Meaning, Recognised};
use super::{Role, unit};

/// What the values of a column look like.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Look {
    /// Numbers, or nothing seen yet.
    Number,
    /// Date and clock in one cell.
    Stamp,
    /// A date alone.
    Date,
    /// A time of day alone.
    Clock,
    /// None of these.
    Other,
}

/// A column or variable before it is known whether it will be used.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Field {
    /// The whole header cell, or the name of the variable.
    pub label: String,
    /// The name without its unit.
    pub name: String,
    /// The unit as written.
    pub unit: Option<String>,
    /// Where the unit stood, for people.
    pub unit_how: &'static str,
    /// What the name was taken for.
    pub recognised: Option<Recognised>,
    /// What the values look like.
    pub look: Look,
}

impl Field {
    /// A header cell, split into name and unit.
    pub fn from_cell(cell: &str) -> Self {
        let label = cell.trim().trim_matches('"').trim().replace("\"\"", "\"");
        let (name, unit, unit_how) = split(&label);
        let recognised = role::recognise(&name, unit.as_deref());
        Self { label, name, unit, unit_how, recognised, look: Look::Number }
    }

    /// Takes a unit from the line below the header, unless the header itself gave one.
    pub fn add_unit(&mut self, cell: &str) {
        let text = bare_unit(cell);
        if self.unit.is_none() && !text.is_empty() && text.chars().any(|c| c != '-' && c != '_') {
            self.unit = Some(text.to_string());
            self.unit_how = "unit on its own line";
            self.recognised = role::recognise(&self.name, self.unit.as_deref());
        }
    }

    /// Whether `cell` holds a unit that this column can have.
    pub fn takes_unit(&self, cell: &str) -> bool {
        match self.recognised.map(|r| r.meaning) {
            Some(Meaning::Role(role)) => unit::parse(role, bare_unit(cell)).is_some(),
            Some(_) => false,
            None => is_unit(cell),
        }
    }

    /// Whether the name means something to this program.
    pub fn is_known(&self) -> bool {
        self.recognised.is_some()
    }
}

/// A unit cell without blanks, quotes and brackets.
fn bare_unit(cell: &str) -> &str {
    let text = cell.trim().trim_matches('"').trim();
    for (open, close) in [('[', ']'), ('(', ')'), ('{', '}')] {
        if let Some(inner) = text.strip_prefix(open).and_then(|t| t.strip_suffix(close)) {
            return inner.trim();
        }
    }
    text
}

/// Whether a cell holds a unit of any role.
fn is_unit(cell: &str) -> bool {
    let text = bare_unit(cell);
    Role::ALL.iter().any(|&role| unit::parse(role, text).is_some()) || super::time::since(text).is_some()
}

/// The unit of `role` that ends `label` after an underscore, blank or other mark.
pub(super) fn unit_suffix(label: &str, role: Role) -> Option<(&str, &str)> {
    label
        .char_indices()
        .filter(|(at, c)| *at > 0 && is_joint(*c))
        .map(|(at, c)| (&label[..at], &label[at + c.len_utf8()..]))
        .find(|(_, text)| unit::parse(role, text).is_some())
}

fn is_joint(c: char) -> bool {
    matches!(c, '_' | ' ' | '-' | '.' | ',' | '/' | ':')
}

fn split(label: &str) -> (String, Option<String>, &'static str) {
    if let Some((name, text)) = brackets(label) {
        return (name, Some(text), "unit in brackets");
    }
    if let Some((name, text)) = label.split_once(',')
        && is_unit(text)
    {
        return (name.trim().to_string(), Some(text.trim().to_string()), "unit after a comma");
    }
    // `seconds` is a name and a unit at once.
    if let Some(unit) = unit::parse(Role::Time, label).filter(|_| label.len() > 2) {
        return (label.to_string(), Some(unit.name), "unit in the name");
    }
    if role::recognise(label, None).is_some() {
        return (label.to_string(), None, "");
    }
    for (at, c) in label.char_indices().filter(|(_, c)| is_joint(*c)) {
        let (name, text) = (&label[..at], label[at + c.len_utf8()..].trim());
        if let Some(Recognised { meaning: Meaning::Role(role), .. }) = role::recognise(name, Some(text))
            && unit::parse(role, text).is_some()
        {
            let how = match c {
                '_' => "unit after an underscore",
                '/' => "unit after a slash",
                _ => "unit after the name",
            };
            return (name.trim().to_string(), Some(text.to_string()), how);
        }
    }
    (label.to_string(), None, "")
}

/// Takes bracketed parts off the end: `temperature (ITS-90) [deg C]` gives the unit `ITS-90 deg C`.
fn brackets(label: &str) -> Option<(String, String)> {
    let mut name = label.trim();
    let mut parts = Vec::new();
    while let Some(close) = name.chars().last().filter(|c| matches!(c, ']' | ')' | '}')) {
        let open = match close {
            ']' => '[',
            ')' => '(',
            _ => '{',
        };
        let at = name.rfind(open).filter(|at| *at > 0)?;
        parts.push(name[at + 1..name.len() - 1].trim().to_string());
        name = name[..at].trim_end_matches(|c: char| c.is_whitespace() || matches!(c, '_' | ',' | ':'));
    }
    if parts.is_empty() || name.is_empty() {
        return None;
    }
    parts.reverse();
    Some((name.to_string(), parts.join(" ")))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_and_units_are_told_apart() {
        for (cell, name, unit) in [
            ("pressure [dbar]", "pressure", Some("dbar")),
            ("Pressure (dbar)", "Pressure", Some("dbar")),
            ("\"pressure, dbar\"", "pressure", Some("dbar")),
            ("pressure/dbar", "pressure", Some("dbar")),
            ("pressure_dbar", "pressure", Some("dbar")),
            ("pressure dbar", "pressure", Some("dbar")),
            ("conductivity_mS_cm", "conductivity", Some("mS_cm")),
            ("conductivity_mS/cm", "conductivity", Some("mS/cm")),
            ("conductivity/mS/cm", "conductivity", Some("mS/cm")),
            ("conductivity_S_m-1", "conductivity", Some("S_m-1")),
            ("temperature_degC", "temperature", Some("degC")),
            ("Temperature (ITS-90) [deg C]", "Temperature", Some("ITS-90 deg C")),
            ("Temperature [ITS-90, deg C]", "Temperature", Some("ITS-90, deg C")),
            ("sea_water_temperature_degree_C", "sea_water_temperature", Some("degree_C")),
            ("time_s", "time", Some("s")),
            ("elapsed_s", "elapsed", Some("s")),
            ("seconds", "seconds", Some("s")),
            ("time_utc", "time_utc", None),
            ("pressure", "pressure", None),
            ("pressure [counts]", "pressure", Some("counts")),
            ("oxygen_umol_kg", "oxygen_umol_kg", None),
            ("[dbar]", "[dbar]", None),
            ("", "", None),
        ] {
            let field = Field::from_cell(cell);
            assert_eq!((field.name.as_str(), field.unit.as_deref()), (name, unit), "{cell}");
        }
    }

    #[test]
    fn a_unit_ends_a_name_the_program_does_not_know() {
        assert_eq!(unit_suffix("prs2_dbar", Role::Pressure), Some(("prs2", "dbar")));
        assert_eq!(unit_suffix("cell_mS_cm", Role::Conductivity), Some(("cell", "mS_cm")));
        assert_eq!(unit_suffix("prs2", Role::Pressure), None);
    }
}
