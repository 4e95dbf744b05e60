//! Units of the columns: how they are written, and the exact factor to the unit a log holds.

use super::{PressureKind, Role};

/// A unit with its conversion: `(value - zero) * times / per` is in the unit of the role.
///
/// Numerator and denominator are kept apart so that an exact ratio is rounded once only.
#[derive(Debug, Clone, PartialEq)]
pub struct Unit {
    /// How the unit is written in messages.
    pub name: String,
    zero: f64,
    times: f64,
    per: f64,
    /// What the unit says about the origin of a pressure (`psia`: absolute, `psig`: gauge).
    pub pressure_kind: Option<PressureKind>,
}

impl Unit {
    /// `value` in the unit that [`Role::unit`] names.
    pub fn convert(&self, value: f64) -> f64 {
        (value - self.zero) * self.times / self.per
    }

    /// Every value in the unit that [`Role::unit`] names.
    pub fn convert_all(&self, values: &mut [f64]) {
        if self.zero != 0.0 || self.times != self.per {
            values.iter_mut().for_each(|value| *value = self.convert(*value));
        }
    }
}

/// One line of the table: name in messages, zero, times, per, spellings in their normal form.
type Row = (&'static str, f64, f64, f64, &'static [&'static str]);

/// To decibar. 1 bar = 100 000 Pa (NIST SP 811, 2008, table 8); 1 atm = 101 325 Pa (10th CGPM, 1954);
/// psi from the exact pound-force 4.448 221 615 260 5 N and the exact inch 0.0254 m (NIST SP 811, B.8).
const PRESSURE: &[Row] = &[
    ("dbar", 0.0, 1.0, 1.0, &["dbar", "dbars", "db", "decibar", "decibars"]),
    ("bar", 0.0, 10.0, 1.0, &["bar", "bars"]),
    ("mbar", 0.0, 1.0, 100.0, &["mbar", "mbars", "millibar", "millibars"]),
    ("hPa", 0.0, 1.0, 100.0, &["hpa", "hectopascal", "hectopascals"]),
    ("kPa", 0.0, 1.0, 10.0, &["kpa", "kilopascal", "kilopascals"]),
    ("MPa", 0.0, 100.0, 1.0, &["mpa", "megapascal", "megapascals"]),
    ("Pa", 0.0, 1.0, 10_000.0, &["pa", "pascal", "pascals"]),
    ("psi", 0.0, 4.448_221_615_260_5, 6.4516, &["psi", "lbf/in2", "lb/in2"]),
    ("atm", 0.0, 10.1325, 1.0, &["atm", "atmosphere", "atmospheres"]),
];

/// To millisiemens per centimetre; the mho is the older name of the siemens (NIST SP 811, 2008, B.8).
const CONDUCTIVITY: &[Row] = &[
    ("mS/cm", 0.0, 1.0, 1.0, &["ms/cm", "mscm-1", "mscm", "mmho/cm", "mmhos/cm", "mmhocm-1"]),
    (
        "S/m",
        0.0,
        10.0,
        1.0,
        &["s/m", "sm-1", "sm", "siemens/m", "siemens/metre", "siemens/meter", "mho/m", "mhos/m"],
    ),
    ("uS/cm", 0.0, 1.0, 1000.0, &["us/cm", "uscm-1", "uscm", "umho/cm", "umhos/cm"]),
    ("mS/m", 0.0, 1.0, 100.0, &["ms/m", "msm-1", "msm"]),
];

/// To degrees Celsius: 0 degC = 273.15 K; degF by NIST SP 811 (2008), B.8.
const TEMPERATURE: &[Row] = &[
    (
        "degC",
        0.0,
        1.0,
        1.0,
        &[
            "degc",
            "c",
            "celsius",
            "degcelsius",
            "degreec",
            "degreesc",
            "degreecelsius",
            "degreescelsius",
            "degsc",
        ],
    ),
    ("K", 273.15, 1.0, 1.0, &["k", "kelvin", "kelvins", "degk", "degreek", "degreesk"]),
    (
        "degF",
        32.0,
        1.0,
        1.8,
        &["degf", "f", "fahrenheit", "degfahrenheit", "degreef", "degreesf", "degreesfahrenheit"],
    ),
];

const SALINITY: &[Row] = &[(
    "1",
    0.0,
    1.0,
    1.0,
    &["1", "psu", "pss", "pss-78", "pss78", "ipss-78", "1e-3", "0.001", "dimensionless"],
)];

const TIME: &[Row] = &[
    ("s", 0.0, 1.0, 1.0, &["s", "sec", "secs", "second", "seconds"]),
    ("min", 0.0, 60.0, 1.0, &["min", "mins", "minute", "minutes"]),
    ("h", 0.0, 3600.0, 1.0, &["h", "hr", "hrs", "hour", "hours"]),
    ("day", 0.0, 86_400.0, 1.0, &["d", "day", "days"]),
    ("ms", 0.0, 1.0, 1000.0, &["ms", "msec", "msecs", "millisecond", "milliseconds"]),
];

const LENGTH: &[Row] = &[("m", 0.0, 1.0, 1.0, &["m", "metre", "metres", "meter", "meters"])];

const ANGLE: &[Row] = &[
    (
        "degree",
        0.0,
        1.0,
        1.0,
        &[
            "deg",
            "degs",
            "degree",
            "degrees",
            "degreen",
            "degreesn",
            "degreenorth",
            "degreesnorth",
            "degreee",
            "degreese",
            "degreeeast",
            "degreeseast",
            "degn",
            "dege",
            "decimaldegrees",
        ],
    ),
    ("rad", 0.0, 180.0, std::f64::consts::PI, &["rad", "rads", "radian", "radians"]),
];

/// T90 = T68 / 1.00024 (Saunders, WOCE Newsletter 10, 1990).
const IPTS68_PER_ITS90: f64 = 1.000_24;

fn table(role: Role) -> &'static [Row] {
    match role {
        Role::Pressure => PRESSURE,
        Role::Conductivity => CONDUCTIVITY,
        Role::Temperature => TEMPERATURE,
        Role::Salinity => SALINITY,
        Role::Time => TIME,
        Role::Altitude => LENGTH,
        Role::Pitch | Role::Roll | Role::Latitude | Role::Longitude => ANGLE,
        Role::Flag => &[],
    }
}

/// The units that a column of this role may have, as they are written in messages.
pub fn candidates(role: Role) -> Vec<&'static str> {
    let mut names: Vec<_> = table(role).iter().map(|row| row.0).collect();
    if role == Role::Temperature {
        names.insert(1, "IPTS-68");
    }
    names
}

/// The unit of `role` written as `text`, if it is one.
pub fn parse(role: Role, text: &str) -> Option<Unit> {
    // Millipascal differs from megapascal by its first letter only; nobody logs millipascal, so
    // this spelling is left to the user to settle. All capitals or no capitals mean megapascal.
    if role == Role::Pressure && text.trim() == "mPa" {
        return None;
    }
    let mut normal = normal_form(text);
    let (mut kind, mut ipts68) = (None, false);
    match role {
        Role::Pressure => {
            for (spelling, base, what) in [
                ("psia", "psi", PressureKind::Absolute),
                ("psig", "psi", PressureKind::Gauge),
                ("bara", "bar", PressureKind::Absolute),
                ("barg", "bar", PressureKind::Gauge),
            ] {
                if normal == spelling {
                    (normal, kind) = (base.to_string(), Some(what));
                }
            }
        }
        Role::Temperature => (normal, ipts68) = temperature_scale(&normal),
        _ => {}
    }
    let &(name, zero, times, per, _) = table(role).iter().find(|row| row.4.contains(&normal.as_str()))?;
    let mut unit = Unit { name: name.to_string(), zero, times, per, pressure_kind: kind };
    if ipts68 {
        unit.name = format!("{name} (IPTS-68)");
        unit.per *= IPTS68_PER_ITS90;
    }
    Some(unit)
}

/// Takes the name of a temperature scale out of a unit; the scale alone means degrees Celsius.
fn temperature_scale(normal: &str) -> (String, bool) {
    for (mark, ipts68) in [
        ("ipts-68", true),
        ("ipts68", true),
        ("its-68", true),
        ("its68", true),
        ("t68", true),
        ("its-90", false),
        ("its90", false),
        ("t90", false),
    ] {
        if normal.contains(mark) {
            let rest = normal.replacen(mark, "", 1);
            let rest = rest.replace(['(', ')', ',', ';', ':', '/', '-'], "");
            return (if rest.is_empty() { "degc".to_string() } else { rest }, ipts68);
        }
    }
    (normal.to_string(), false)
}

/// Lower case without blanks, dots, underscores and raising marks; degree and micro signs spelt out.
fn normal_form(text: &str) -> String {
    let text = text.trim().trim_matches(['[', ']', '{', '}', '"']);
    let text = text.strip_prefix('(').and_then(|t| t.strip_suffix(')')).unwrap_or(text);
    let mut normal = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            ' ' | '_' | '^' | '*' | '·' | '\u{a0}' => {}
            // A dot multiplies in `mS.cm-1` and is part of the number in `0.001`.
            '.' if !normal.ends_with(|c: char| c.is_ascii_digit()) => {}
            '°' | 'º' | '˚' => normal.push_str("deg"),
            '℃' => normal.push_str("degc"),
            '℉' => normal.push_str("degf"),
            // U+00B5 and the Greek letter.
            'µ' | 'μ' => normal.push('u'),
            '−' | '–' => normal.push('-'),
            '²' => normal.push('2'),
            '⁻' => normal.push('-'),
            '¹' => normal.push('1'),
            c => normal.extend(c.to_lowercase()),
        }
    }
    // A degree sign that went through the wrong encoding on its way.
    for broken in ["?", "\u{fffd}"] {
        if let Some(rest) = normal.strip_prefix(broken)
            && (rest.starts_with('c') || rest.starts_with('f'))
        {
            return format!("deg{rest}");
        }
    }
    normal
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Role, spelling, value in that unit, the same in the unit of the role, source of the figure.
    const TABLE: &[(Role, &str, f64, f64, &str)] = &[
        (Role::Pressure, "dbar", 7.0, 7.0, "identity"),
        (Role::Pressure, "decibars", 7.0, 7.0, "identity"),
        (Role::Pressure, "bar", 1.0, 10.0, "SI brochure: deci"),
        (Role::Pressure, "bara", 1.0, 10.0, "SI brochure: deci"),
        (Role::Pressure, "mbar", 1013.25, 10.1325, "1 atm = 1013.25 mbar"),
        (Role::Pressure, "hPa", 1013.25, 10.1325, "1 atm = 1013.25 hPa"),
        (Role::Pressure, "kPa", 101.325, 10.1325, "1 atm = 101.325 kPa"),
        (Role::Pressure, "MPa", 100.0, 10_000.0, "1 MPa = 100 dbar"),
        (Role::Pressure, "MPA", 1.0, 100.0, "1 MPa = 100 dbar"),
        (Role::Pressure, "Pa", 101_325.0, 10.1325, "1 atm = 101 325 Pa"),
        (Role::Pressure, "psi", 1.0, 0.689_475_729_316_8, "NIST SP 811: 6894.757 293 168 Pa"),
        (Role::Pressure, "psia", 14.695_948_775_513_4, 10.1325, "1 atm = 14.695 948 775 5 psi"),
        (Role::Pressure, "atm", 1.0, 10.1325, "10th CGPM, 1954"),
        (Role::Conductivity, "mS/cm", 42.914, 42.914, "identity"),
        (Role::Conductivity, "mS cm-1", 42.914, 42.914, "identity"),
        (Role::Conductivity, "mS_cm", 42.914, 42.914, "identity"),
        (Role::Conductivity, "mmho/cm", 42.914, 42.914, "1 mho = 1 S"),
        (Role::Conductivity, "S/m", 4.2914, 42.914, "C(35,15,0), UNESCO 44"),
        (Role::Conductivity, "S m^-1", 4.2914, 42.914, "C(35,15,0), UNESCO 44"),
        (Role::Conductivity, "uS/cm", 42_914.0, 42.914, "micro is 1/1000 milli"),
        (Role::Conductivity, "µS/cm", 42_914.0, 42.914, "micro is 1/1000 milli"),
        (Role::Conductivity, "umho/cm", 42_914.0, 42.914, "1 mho = 1 S"),
        (Role::Conductivity, "mS/m", 4291.4, 42.914, "1 cm = 0.01 m"),
        (Role::Temperature, "degC", 12.5, 12.5, "identity"),
        (Role::Temperature, "deg C", 12.5, 12.5, "identity"),
        (Role::Temperature, "°C", 12.5, 12.5, "identity"),
        (Role::Temperature, "?C (ITS-90)", 12.5, 12.5, "identity, broken degree sign"),
        (Role::Temperature, "\u{fffd}C (ITS-90)", 12.5, 12.5, "identity, broken degree sign"),
        (Role::Temperature, "ITS-90", 12.5, 12.5, "identity"),
        (Role::Temperature, "ITS-90, deg C", 12.5, 12.5, "identity"),
        (Role::Temperature, "degC (IPTS-68)", 10.0024, 10.0, "Saunders 1990"),
        (Role::Temperature, "IPTS-68", 10.0024, 10.0, "Saunders 1990"),
        (Role::Temperature, "K", 273.15, 0.0, "SI brochure"),
        (Role::Temperature, "K", 283.15, 10.0, "SI brochure"),
        (Role::Temperature, "degF", 212.0, 100.0, "NIST SP 811 B.8"),
        (Role::Temperature, "degF", 32.0, 0.0, "NIST SP 811 B.8"),
        (Role::Salinity, "PSS-78", 35.0, 35.0, "identity"),
        (Role::Salinity, "psu", 35.0, 35.0, "identity"),
        (Role::Time, "s", 3.0, 3.0, "identity"),
        (Role::Time, "ms", 3000.0, 3.0, "SI brochure"),
        (Role::Time, "min", 2.0, 120.0, "SI brochure, table 8"),
        (Role::Time, "h", 2.0, 7200.0, "SI brochure, table 8"),
        (Role::Time, "days", 1.0, 86_400.0, "SI brochure, table 8"),
        (Role::Altitude, "m", 3.0, 3.0, "identity"),
        (Role::Pitch, "deg", 5.0, 5.0, "identity"),
        (Role::Roll, "rad", std::f64::consts::PI, 180.0, "SI brochure, table 8"),
        (Role::Latitude, "degrees_north", 5.0, 5.0, "identity"),
        (Role::Longitude, "degrees_E", 5.0, 5.0, "identity"),
    ];

    /// Relative. NIST prints 13 digits for psi; in kelvin, some digits cancel; the rest is exact to
    /// the last digit of a double.
    const ROUNDING: f64 = 1e-13;

    #[test]
    fn every_unit_converts_by_its_published_factor() {
        for &(role, text, given, expected, source) in TABLE {
            let unit = parse(role, text).unwrap_or_else(|| panic!("{text} not understood"));
            let got = unit.convert(given);
            assert!(
                (got - expected).abs() <= ROUNDING * expected.abs(),
                "{text}: {got} is not {expected} ({source})"
            );
        }
    }

    #[test]
    fn every_unit_offered_in_a_message_is_understood_and_tested() {
        use Role::*;
        for role in
            [Time, Pressure, Conductivity, Temperature, Salinity, Altitude, Pitch, Roll, Latitude, Longitude]
        {
            for name in candidates(role) {
                let unit = parse(role, name).unwrap_or_else(|| panic!("{name} not understood"));
                let tested = TABLE.iter().any(|row| parse(row.0, row.1).is_some_and(|u| u.name == unit.name));
                assert!(tested, "{name} has no line in the table");
            }
        }
    }

    #[test]
    fn the_origin_of_a_pressure_is_taken_from_its_unit() {
        assert_eq!(parse(Role::Pressure, "psia").and_then(|u| u.pressure_kind), Some(PressureKind::Absolute));
        assert_eq!(parse(Role::Pressure, "barg").and_then(|u| u.pressure_kind), Some(PressureKind::Gauge));
        assert_eq!(parse(Role::Pressure, "psi").and_then(|u| u.pressure_kind), None);
    }

    #[test]
    fn what_is_no_unit_of_the_role_is_refused() {
        for (role, text) in [
            (Role::Pressure, "mPa"),
            (Role::Pressure, "m"),
            (Role::Pressure, ""),
            (Role::Temperature, "V"),
            (Role::Temperature, "?"),
            (Role::Conductivity, "Hz"),
            (Role::Salinity, "g/kg"),
            (Role::Time, "fortnight"),
        ] {
            assert_eq!(parse(role, text), None, "{text}");
        }
    }
}
