//! Every section and key of a sheet: one definition for the reader, its messages and the sheet to fill in.

use super::{Key, Kind, Section, UNCERTAINTY};
use crate::gravity::SurfaceGravity;
use crate::log::PressureKind;
use crate::settings::LegChoice;
use crate::settings::range::{self, Range};
use crate::sheet::scope::Scope;
use crate::uncertainty::Term;
use std::borrow::Cow;

/// All sections, in the order of the sheet to fill in.
pub(in crate::sheet) fn sections() -> Vec<Section> {
    let section = |name, about, keys| Section { name, about, keys: Cow::Borrowed(keys) };
    vec![
        section("station", "Where the casts were taken.", STATION),
        section("log", "How the logs are to be read.", LOG),
        section(
            "pressure_sensor",
            "What the certificate of the pressure sensor says, and its zero.",
            PRESSURE_SENSOR,
        ),
        section("surface", "The sea surface at the time, and what depths count from.", SURFACE),
        section("gravity", "Gravity at the place against normal gravity of the ellipsoid.", GRAVITY),
        section("vehicle", "Where on the vehicle the depth is wanted.", VEHICLE),
        section("water", "The water that the pressure is turned into depth with.", WATER),
        Section {
            name: UNCERTAINTY,
            about: "Standard uncertainty of any term of the budget, by its key. What a key above (u_...) says already is not said here again.",
            keys: Term::ALL.map(of_term).to_vec().into(),
        },
    ]
}

const fn number(
    name: &'static str,
    range: Range,
    put: fn(&mut Scope, f64),
    meaning: &'static str,
    otherwise: &'static str,
    example: &'static str,
) -> Key {
    Key { name, kind: Kind::Number(range, put), meaning, otherwise, example }
}

const fn uncertainty(
    name: &'static str,
    term: Term,
    meaning: &'static str,
    otherwise: &'static str,
    example: &'static str,
) -> Key {
    Key { name, kind: Kind::Uncertainty(term), meaning, otherwise, example }
}

fn of_term(term: Term) -> Key {
    let (otherwise, example) = match term {
        Term::PressureCalibration => ("0.0001 of the reading", "0.5"),
        Term::PressureNoise => ("from the log", "0.01"),
        Term::Tare => ("from the samples on deck, else 0.1", "0.02"),
        Term::AirPressure => ("1 when the air pressure is given, else 10", "0.5"),
        Term::TemperatureCalibration => ("0.002", "0.001"),
        Term::ConductivityCalibration | Term::SalinityCalibration => ("0.003", "0.002"),
        Term::SalinityComposition => ("0.005 by the atlas, else 0.015", "0.002"),
        Term::EquationOfState => ("10 to 100 MPa, 20 beyond", "5.0"),
        Term::ProfileRepresentativeness => {
            ("from down leg against up leg, else a share of what density in situ does to depth", "0.1")
        }
        Term::SurfaceGap => ("from the log", "0.5"),
        Term::SurfaceGravity => ("35", "8.0"),
        Term::GravityGradient => ("50", "20.0"),
        Term::GeoidHeight => ("30", "1.0"),
        Term::Position => ("0.01", "0.005"),
        Term::WaterLevel => ("0.3", "0.1"),
        Term::ReferenceOffset => ("0.02", "0.01"),
        Term::PeakEstimate => ("from the log", "0.01"),
        Term::Integration => ("from halving the step", "0.001"),
    };
    uncertainty(term.key(), term, term.meaning(), otherwise, example)
}

const STATION: &[Key] = &[
    Key {
        name: "name",
        kind: Kind::Text(|s, text| s.layer.settings.station = Some(text)),
        meaning: "name or number of the station",
        otherwise: "the log's",
        example: "\"K07\"",
    },
    number(
        "latitude",
        range::LATITUDE,
        |s, v| s.layer.settings.latitude_deg = Some(v),
        "latitude in degrees, north positive",
        "the log's; without any, depth is not computed",
        "-31.52",
    ),
    number(
        "longitude",
        range::LONGITUDE,
        |s, v| s.layer.settings.longitude_deg = Some(v),
        "longitude in degrees, east positive",
        "the log's",
        "-176.18",
    ),
    uncertainty(
        "u_latitude_deg",
        Term::Position,
        "standard uncertainty of the latitude in degrees",
        "0.01",
        "0.005",
    ),
];

const LOG: &[Key] = &[
    Key {
        name: "pressure",
        kind: Kind::Words(&[
            ("absolute", |s| s.layer.settings.pressure_kind = Some(PressureKind::Absolute)),
            ("sea", |s| s.layer.settings.pressure_kind = Some(PressureKind::Sea)),
            ("gauge", |s| s.layer.settings.pressure_kind = Some(PressureKind::Gauge)),
        ]),
        meaning: "from where the pressure counts: absolute from vacuum, sea from 101 325 Pa, gauge from the air of the day",
        otherwise: "what the log says, else sea",
        example: "\"absolute\"",
    },
    Key {
        name: "columns",
        kind: Kind::Columns,
        meaning: "what a column is, by role (time, pressure, conductivity, temperature, salinity, altitude, pitch, roll, latitude, \
longitude, flag): its name or number, and its unit after a colon",
        otherwise: "as the header of the log says",
        example: "{ pressure = \"prs:MPa\" }",
    },
    Key {
        name: "missing",
        kind: Kind::Missing,
        meaning: "marks for missing values, besides the usual ones (empty, NaN, -999, -9999, 1e35)",
        otherwise: "none besides",
        example: "[\"-99\"]",
    },
    Key {
        name: "start_time",
        kind: Kind::Start,
        meaning: "time of the first sample",
        otherwise: "the log's",
        example: "2026-03-01T10:20:30Z",
    },
];

const PRESSURE_SENSOR: &[Key] = &[
    number(
        "u_constant_dbar",
        Range::uncertainty("dbar"),
        |s, v| s.u_constant_dbar = Some(v),
        "standard uncertainty of the pressure p in dbar: its part that is the same at all depths. \
Together with u_relative: sqrt(u_constant_dbar^2 + (u_relative p)^2)",
        "0 when u_relative is given",
        "0.1",
    ),
    number(
        "u_relative",
        Range::uncertainty(""),
        |s, v| s.u_relative = Some(v),
        "its part that grows with pressure, as a fraction of the reading",
        "0 when u_constant_dbar is given; 0.0001 when neither is",
        "5e-5",
    ),
    Key {
        name: "tare",
        kind: Kind::Tare,
        meaning: "zero offset: auto takes it from the samples on deck, none leaves the readings as they are, a number of dbar is subtracted",
        otherwise: "auto",
        example: "\"auto\"",
    },
    uncertainty(
        "u_tare_dbar",
        Term::Tare,
        "standard uncertainty of the zero offset in dbar",
        "from the samples on deck, else 0.1",
        "0.02",
    ),
];

const SURFACE: &[Key] = &[
    number(
        "air_pressure_hpa",
        range::AIR_PRESSURE,
        |s, v| s.layer.settings.air_pressure_hpa = Some(v),
        "air pressure at the sea surface in hPa",
        "1013.25",
        "1009.3",
    ),
    uncertainty(
        "u_air_pressure_hpa",
        Term::AirPressure,
        "standard uncertainty of the air pressure in hPa",
        "1 when the air pressure is given, else 10",
        "0.5",
    ),
    Key {
        name: "water_level_m",
        kind: Kind::WaterLevel,
        meaning: "height of the water above the datum in m (tide and surge)",
        otherwise: "0",
        example: "0.42",
    },
    uncertainty(
        "u_water_level_m",
        Term::WaterLevel,
        "standard uncertainty of the water level in m",
        "0.3",
        "0.1",
    ),
    Key {
        name: "datum",
        kind: Kind::Text(|s, text| s.layer.settings.datum = Some(text)),
        meaning: "name of the datum that the water level counts from",
        otherwise: "depths count from the sea surface",
        example: "\"mean sea level\"",
    },
    number(
        "geoid_height_m",
        range::GEOID_HEIGHT,
        |s, v| s.layer.settings.geoid_height_m = Some(v),
        "height of the geoid above the WGS 84 ellipsoid in m",
        "0",
        "41.0",
    ),
    uncertainty(
        "u_geoid_height_m",
        Term::GeoidHeight,
        "standard uncertainty of the geoid height in m",
        "30",
        "1.0",
    ),
];

const GRAVITY: &[Key] = &[
    number(
        "anomaly_mgal",
        range::SURFACE_GRAVITY,
        |s, v| s.layer.settings.surface_gravity = Some(SurfaceGravity::FreeAirAnomaly(v)),
        "free-air gravity anomaly at the sea surface in mGal (this or the disturbance)",
        "0",
        "-182.0",
    ),
    uncertainty(
        "u_anomaly_mgal",
        Term::SurfaceGravity,
        "standard uncertainty of the anomaly in mGal",
        "35",
        "8.0",
    ),
    number(
        "disturbance_mgal",
        range::SURFACE_GRAVITY,
        |s, v| s.layer.settings.surface_gravity = Some(SurfaceGravity::Disturbance(v)),
        "gravity disturbance at the sea surface in mGal (this or the anomaly)",
        "0",
        "-176.0",
    ),
    uncertainty(
        "u_disturbance_mgal",
        Term::SurfaceGravity,
        "standard uncertainty of the disturbance in mGal",
        "35",
        "8.0",
    ),
    number(
        "gradient_eotvos",
        range::GRADIENT,
        |s, v| s.layer.settings.gradient_eotvos = Some(v),
        "gradient anomaly in eotvos (E), positive where gravity grows faster with depth than normal",
        "0",
        "-40.0",
    ),
    uncertainty(
        "u_gradient_eotvos",
        Term::GravityGradient,
        "standard uncertainty of the gradient anomaly in eotvos (E)",
        "50",
        "20.0",
    ),
];

const VEHICLE: &[Key] = &[
    number(
        "reference_below_sensor_m",
        range::REFERENCE_BELOW,
        |s, v| s.layer.settings.reference_below_sensor_m = Some(v),
        "how far the reference point (keel, landing skid) lies below the pressure sensor in m",
        "0",
        "0.85",
    ),
    uncertainty(
        "u_reference_below_sensor_m",
        Term::ReferenceOffset,
        "standard uncertainty of that distance in m",
        "0.02",
        "0.01",
    ),
];

const WATER: &[Key] = &[
    Key {
        name: "leg",
        kind: Kind::Words(&[
            ("down", |s| s.layer.settings.leg = Some(LegChoice::Down)),
            ("up", |s| s.layer.settings.leg = Some(LegChoice::Up)),
            ("both", |s| s.layer.settings.leg = Some(LegChoice::Both)),
        ]),
        meaning: "leg that the water column is taken from",
        otherwise: "down",
        example: "\"down\"",
    },
    Key {
        name: "profile",
        kind: Kind::Profile,
        meaning: "log of a nearby cast whose water (pressure, temperature, salinity or conductivity) is taken in place of the log's; \
counted from the folder of this sheet",
        otherwise: "the log's own water",
        example: "\"nearby.csv\"",
    },
];
