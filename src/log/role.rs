//! What a column holds, recognised from its name.

use std::collections::HashMap;
use std::sync::LazyLock;

use super::{PressureKind, Role, unit};

/// What a name was taken for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Meaning {
    /// A quantity.
    Role(Role),
    /// The date half of a time that stands in two columns.
    Date,
    /// Quality flags of one quantity.
    FlagOf(Role),
}

/// A recognised name.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Recognised {
    pub meaning: Meaning,
    /// What the name says about the origin of a pressure.
    pub pressure_kind: Option<PressureKind>,
    /// For people.
    pub how: &'static str,
}

const PLAIN: &str = "plain name";
const CF: &str = "CF standard name";
const CODE: &str = "BODC/OceanSITES code";
const WOCE: &str = "WOCE name";

/// Names are compared without case, blanks and punctuation.
const NAMES: &[(Role, &str, &[&str])] = &[
    (
        Role::Time,
        PLAIN,
        &[
            "time",
            "elapsed",
            "elapsed time",
            "time elapsed",
            "timestamp",
            "datetime",
            "utc",
            "time utc",
            "utc time",
            "datetime utc",
            "sample time",
            "seconds",
            "sec",
            "minutes",
            "hours",
            "mission time",
            "dive time",
        ],
    ),
    (
        Role::Pressure,
        PLAIN,
        &[
            "pressure",
            "press",
            "prs",
            "p",
            "water pressure",
            "sea pressure",
            "pressure sea",
            "absolute pressure",
            "pressure absolute",
            "abs pressure",
            "pressure abs",
            "gauge pressure",
            "pressure gauge",
        ],
    ),
    (Role::Pressure, CODE, &["pres"]),
    (Role::Pressure, CF, &["sea_water_pressure", "sea_water_pressure_due_to_sea_water"]),
    (Role::Pressure, WOCE, &["ctdprs"]),
    (
        Role::Conductivity,
        PLAIN,
        &["conductivity", "cond", "c", "electrical conductivity", "water conductivity"],
    ),
    (Role::Conductivity, CODE, &["cndc"]),
    (Role::Conductivity, CF, &["sea_water_electrical_conductivity"]),
    (Role::Conductivity, WOCE, &["ctdcnd", "ctdcond"]),
    (
        Role::Temperature,
        PLAIN,
        &[
            "temperature",
            "tmp",
            "water temperature",
            "water temp",
            "in situ temperature",
            "sea temperature",
            "sea water temp",
            "insitu temp",
        ],
    ),
    (Role::Temperature, CODE, &["temp"]),
    (Role::Temperature, CF, &["sea_water_temperature"]),
    (Role::Temperature, WOCE, &["ctdtmp"]),
    (Role::Salinity, PLAIN, &["salinity", "sal", "practical salinity", "sp"]),
    (Role::Salinity, CODE, &["psal"]),
    (Role::Salinity, CF, &["sea_water_practical_salinity", "sea_water_salinity"]),
    (Role::Salinity, WOCE, &["ctdsal"]),
    (
        Role::Altitude,
        PLAIN,
        &["altitude", "alt", "altimeter", "altimeter range", "height above bottom", "bottom distance"],
    ),
    (Role::Altitude, CF, &["height_above_sea_floor"]),
    (Role::Pitch, PLAIN, &["pitch", "pitch angle"]),
    (Role::Pitch, CF, &["platform_pitch", "platform_pitch_angle", "platform_pitch_fore_up"]),
    (Role::Roll, PLAIN, &["roll", "roll angle"]),
    (Role::Roll, CF, &["platform_roll", "platform_roll_angle", "platform_roll_starboard_down"]),
    (Role::Latitude, PLAIN, &["latitude", "lat"]),
    (Role::Longitude, PLAIN, &["longitude", "lon", "long", "lng"]),
    (Role::Flag, PLAIN, &["flag", "flags", "qc", "quality", "quality flag", "qc flag"]),
];

/// One-letter names that mean a quantity only with a unit that says which.
const SHORT: &[(&str, &[Role])] = &[("t", &[Role::Temperature, Role::Time]), ("s", &[Role::Salinity])];

/// Letters and digits in lower case: the form in which names are compared.
pub(super) fn compact(name: &str) -> String {
    name.chars().filter(|c| c.is_alphanumeric()).flat_map(char::to_lowercase).collect()
}

/// What a column called `name` holds; `unit` helps where the name alone is ambiguous.
pub(super) fn recognise(name: &str, unit_text: Option<&str>) -> Option<Recognised> {
    let key = compact(name);
    if let Some((role, how)) = plain_role(&key) {
        return Some(Recognised { meaning: Meaning::Role(role), pressure_kind: pressure_kind(&key), how });
    }
    if key == "date" {
        return Some(Recognised { meaning: Meaning::Date, pressure_kind: None, how: PLAIN });
    }
    if let Some((_, roles)) = SHORT.iter().find(|(short, _)| *short == key) {
        let text = unit_text?;
        let role = *roles.iter().find(|role| unit::parse(**role, text).is_some())?;
        return Some(Recognised {
            meaning: Meaning::Role(role),
            pressure_kind: None,
            how: "letter and unit",
        });
    }
    let stem = ["flagw", "flag", "qc", "qf"].iter().find_map(|suffix| key.strip_suffix(suffix))?;
    let (role, how) = plain_role(stem).filter(|(role, _)| *role != Role::Flag)?;
    Some(Recognised { meaning: Meaning::FlagOf(role), pressure_kind: None, how })
}

/// Role and kind of name of a key in compact form.
fn plain_role(key: &str) -> Option<(Role, &'static str)> {
    // Long preambles are searched for the header, so that this is asked often.
    static BY_KEY: LazyLock<HashMap<String, (Role, &'static str)>> = LazyLock::new(|| {
        let keys = |&(role, how, names): &(Role, &'static str, &'static [&'static str])| {
            names.iter().map(move |name| (compact(name), (role, how)))
        };
        NAMES.iter().flat_map(keys).collect()
    });
    BY_KEY.get(key).copied()
}

/// The origin of a pressure, where its name tells. WOCE defines CTDPRS as sea pressure (WOCE
/// Operations Manual, WHPO 90-1, 1994); the CF name "due to sea water" excludes the air.
fn pressure_kind(key: &str) -> Option<PressureKind> {
    match key {
        "seapressure" | "pressuresea" | "ctdprs" | "seawaterpressureduetoseawater" => Some(PressureKind::Sea),
        "absolutepressure" | "pressureabsolute" | "abspressure" | "pressureabs" => {
            Some(PressureKind::Absolute)
        }
        "gaugepressure" | "pressuregauge" => Some(PressureKind::Gauge),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn role(name: &str) -> Option<Role> {
        match recognise(name, None)?.meaning {
            Meaning::Role(role) => Some(role),
            _ => None,
        }
    }

    #[test]
    fn names_of_the_interface_are_recognised() {
        for (name, expected) in [
            ("PRES", Role::Pressure),
            ("TEMP", Role::Temperature),
            ("CNDC", Role::Conductivity),
            ("PSAL", Role::Salinity),
            ("TIME", Role::Time),
            ("CTDPRS", Role::Pressure),
            ("CTDTMP", Role::Temperature),
            ("CTDSAL", Role::Salinity),
            ("sea_water_electrical_conductivity", Role::Conductivity),
            ("Elapsed Time", Role::Time),
            ("WaterTemp", Role::Temperature),
            ("height above seafloor", Role::Altitude),
            ("QC flag", Role::Flag),
        ] {
            assert_eq!(role(name), Some(expected), "{name}");
        }
    }

    #[test]
    fn no_name_stands_for_two_roles() {
        let mut keys: Vec<String> =
            NAMES.iter().flat_map(|row| row.2.iter().map(|name| compact(name))).collect();
        let count = keys.len();
        keys.sort();
        keys.dedup();
        assert_eq!(keys.len(), count);
    }

    #[test]
    fn names_of_other_quantities_are_not_taken() {
        for name in [
            "air_pressure",
            "potential temperature",
            "conservative_temperature",
            "absolute salinity",
            "depth",
            "oxygen",
            "specific conductance",
            "sound speed",
            "t",
            "s",
            "pressure2",
            "",
        ] {
            assert_eq!(recognise(name, None), None, "{name}");
        }
    }

    #[test]
    fn the_origin_of_a_pressure_is_taken_from_its_name() {
        let kind = |name| recognise(name, None).and_then(|r| r.pressure_kind);
        assert_eq!(kind("sea_water_pressure_due_to_sea_water"), Some(PressureKind::Sea));
        assert_eq!(kind("sea_water_pressure"), None);
        assert_eq!(kind("absolute_pressure"), Some(PressureKind::Absolute));
        assert_eq!(kind("gauge pressure"), Some(PressureKind::Gauge));
        assert_eq!(kind("pressure"), None);
    }

    #[test]
    fn a_letter_needs_its_unit() {
        let meaning = |name, unit| recognise(name, Some(unit)).map(|r| r.meaning);
        assert_eq!(meaning("T", "degC"), Some(Meaning::Role(Role::Temperature)));
        assert_eq!(meaning("t", "s"), Some(Meaning::Role(Role::Time)));
        assert_eq!(meaning("S", "psu"), Some(Meaning::Role(Role::Salinity)));
    }

    #[test]
    fn flag_columns_of_one_quantity() {
        let meaning = |name| recognise(name, None).map(|r| r.meaning);
        assert_eq!(meaning("CTDPRS_FLAG_W"), Some(Meaning::FlagOf(Role::Pressure)));
        assert_eq!(meaning("temperature_qc"), Some(Meaning::FlagOf(Role::Temperature)));
        assert_eq!(meaning("oxygen_qc"), None);
    }
}
