//! Attributes of the variables of a depth series, by the CF conventions 1.11 and their table of standard names.

use super::extra::Extra;
use super::netcdf_classic::Attributes;
use super::provenance::PROGRAM;
use crate::cast::Leg;
use crate::log::{Flag, Log};
use crate::reduction::Reduction;
use jiff::Timestamp;

/// The legs in the order of their numbers.
const LEGS: [Leg; 4] = [Leg::Deck, Leg::Down, Leg::Bottom, Leg::Up];
/// The flags in the order of their numbers, and their words.
const FLAGS: [(Flag, &str); 5] = [
    (Flag::Good, "good"),
    (Flag::NotEvaluated, "not_evaluated"),
    (Flag::Questionable, "questionable"),
    (Flag::Bad, "bad"),
    (Flag::Missing, "missing"),
];

/// Elapsed seconds: a time by CF when they count from a known one.
pub(super) fn of_time(start: Option<Timestamp>) -> Attributes {
    match start {
        Some(start) => Attributes::default()
            .with("standard_name", "time")
            .with("units", format!("seconds since {start}"))
            .with("calendar", "standard")
            // Whether the clock of the instrument knew of leap seconds, no log tells.
            .with("units_metadata", "leap_seconds: unknown"),
        None => Attributes::default().with("units", "s"),
    }
}

/// The vertical coordinate, with the datum it counts from.
pub(super) fn of_depth(r: &Reduction) -> Attributes {
    let point = match r.model.place.reference_below_sensor_m {
        0.0 => "of the pressure sensor".to_string(),
        below => format!("of the reference point ({below} m below the pressure sensor)"),
    };
    Attributes::default()
        .with("standard_name", "depth")
        .with("long_name", format!("depth {point} below the {}", r.datum))
        .with("units", "m")
        .with("positive", "down")
        .with("axis", "Z")
        .with("datum", r.datum.as_str())
        .with("ancillary_variables", "u_depth flag")
}

/// A further variable. Gravity and the mean of sound speed have no standard name.
pub(super) fn of_extra(extra: Extra) -> Attributes {
    let (standard_name, long_name, units) = match extra {
        Extra::PracticalSalinity => ("sea_water_practical_salinity", "Practical Salinity", "1"),
        Extra::AbsoluteSalinity => ("sea_water_absolute_salinity", "Absolute Salinity", "g kg-1"),
        Extra::ConservativeTemperature => {
            ("sea_water_conservative_temperature", "Conservative Temperature", "degree_C")
        }
        Extra::SoundSpeed => ("speed_of_sound_in_sea_water", "sound speed", "m s-1"),
        Extra::MeanSoundSpeed => {
            ("", "travel-time mean of sound speed from the sea surface to the sample", "m s-1")
        }
        Extra::Gravity => ("", "gravity", "m s-2"),
        Extra::SeafloorDepth => ("", "depth of the seafloor, the altitude as logged added to depth", "m"),
    };
    Attributes::default()
        .with("standard_name", standard_name)
        .with("long_name", long_name)
        .with("units", units)
}

/// Standard uncertainty of depth in m.
pub(super) fn of_u_depth() -> Attributes {
    Attributes::default()
        .with("standard_name", "depth standard_error")
        .with("long_name", "standard uncertainty of depth, all terms of the budget combined")
        .with("units", "m")
}

/// Sea pressure in dbar.
pub(super) fn of_pressure() -> Attributes {
    Attributes::default()
        .with("standard_name", "sea_water_pressure_due_to_sea_water")
        .with("long_name", "sea pressure after calibration and tare")
        .with("units", "dbar")
        .with("ancillary_variables", "flag")
}

/// Density in kg/m3.
pub(super) fn of_density() -> Attributes {
    Attributes::default()
        .with("standard_name", "sea_water_density")
        .with("long_name", "in-situ density by TEOS-10")
        .with("units", "kg m-3")
        .with("ancillary_variables", "flag")
}

/// Parts of the cast, by [`leg_number`].
pub(super) fn of_leg() -> Attributes {
    let numbers: Vec<i8> = LEGS.map(leg_number).to_vec();
    Attributes::default()
        .with("long_name", "part of the cast")
        .with("flag_values", numbers.as_slice())
        .with("flag_meanings", LEGS.map(Leg::name).join(" "))
}

/// Flags by the IOC scheme.
pub(super) fn of_flag() -> Attributes {
    let numbers: Vec<i8> = FLAGS.iter().map(|(flag, _)| flag.code() as i8).collect();
    Attributes::default()
        .with("standard_name", "quality_flag")
        .with("long_name", "quality flag of the sample")
        .with("flag_values", numbers.as_slice())
        .with("flag_meanings", FLAGS.map(|(_, word)| word).join(" "))
        .with("conventions", "IOC Manuals and Guides 54, volume 3 (54:V3), primary level")
}

/// The number that stands for a leg.
pub(super) fn leg_number(leg: Leg) -> i8 {
    match leg {
        Leg::Deck => 0,
        Leg::Down => 1,
        Leg::Bottom => 2,
        Leg::Up => 3,
    }
}

/// How the data came about: what was measured, and what made depths of it.
pub(super) fn source(log: &Log) -> String {
    let measured = [
        ("pressure", true),
        ("conductivity", log.conductivity.is_some()),
        ("salinity", log.salinity.is_some()),
        ("temperature", log.temperature.is_some()),
    ];
    let measured: Vec<&str> = measured.iter().filter(|(_, there)| *there).map(|(name, _)| *name).collect();
    format!("log of {} ({}), reduced by {PROGRAM}", measured.join(", "), log.format)
}
