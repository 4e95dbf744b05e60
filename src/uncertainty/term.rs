//! The terms of the budget: what they are, in which unit, and what is assumed when nothing is known.

/// A source of uncertainty of a depth.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Term {
    /// Calibration and drift of the pressure sensor.
    PressureCalibration,
    /// Noise of the deepest pressure.
    PressureNoise,
    /// Zero offset of the pressure sensor.
    Tare,
    /// Air pressure at the sea surface.
    AirPressure,
    /// Calibration of the thermometer.
    TemperatureCalibration,
    /// Calibration of the conductivity cell.
    ConductivityCalibration,
    /// Calibration of salinity, where the log carries salinity.
    SalinityCalibration,
    /// Composition of the salt: the Absolute Salinity Anomaly Ratio.
    SalinityComposition,
    /// The equation of state, relative, of specific volume.
    EquationOfState,
    /// How well the profile stands for the water the pressure was made by.
    ProfileRepresentativeness,
    /// Unsampled water above the first level.
    SurfaceGap,
    /// Gravity at the surface against normal gravity.
    SurfaceGravity,
    /// Its change with depth against normal.
    GravityGradient,
    /// Height of the geoid above the ellipsoid.
    GeoidHeight,
    /// Latitude.
    Position,
    /// Tide and surge against the datum.
    WaterLevel,
    /// Lever arm from the sensor to the reference point.
    ReferenceOffset,
    /// Picking the largest of many noisy samples.
    PeakEstimate,
    /// Numerical error of the integral.
    Integration,
}

impl Term {
    /// All terms, in the order of the budget.
    pub const ALL: [Term; 19] = [
        Term::PressureCalibration,
        Term::PressureNoise,
        Term::Tare,
        Term::AirPressure,
        Term::TemperatureCalibration,
        Term::ConductivityCalibration,
        Term::SalinityCalibration,
        Term::SalinityComposition,
        Term::EquationOfState,
        Term::ProfileRepresentativeness,
        Term::SurfaceGap,
        Term::SurfaceGravity,
        Term::GravityGradient,
        Term::GeoidHeight,
        Term::Position,
        Term::WaterLevel,
        Term::ReferenceOffset,
        Term::PeakEstimate,
        Term::Integration,
    ];

    /// Its key in sheets, options and results.
    pub fn key(self) -> &'static str {
        match self {
            Term::PressureCalibration => "pressure_calibration",
            Term::PressureNoise => "pressure_noise",
            Term::Tare => "tare",
            Term::AirPressure => "air_pressure",
            Term::TemperatureCalibration => "temperature_calibration",
            Term::ConductivityCalibration => "conductivity_calibration",
            Term::SalinityCalibration => "salinity_calibration",
            Term::SalinityComposition => "salinity_composition",
            Term::EquationOfState => "equation_of_state",
            Term::ProfileRepresentativeness => "profile_representativeness",
            Term::SurfaceGap => "surface_gap",
            Term::SurfaceGravity => "surface_gravity",
            Term::GravityGradient => "gravity_gradient",
            Term::GeoidHeight => "geoid_height",
            Term::Position => "position",
            Term::WaterLevel => "water_level",
            Term::ReferenceOffset => "reference_offset",
            Term::PeakEstimate => "peak_estimate",
            Term::Integration => "integration",
        }
    }

    /// The term of a key.
    pub fn from_key(key: &str) -> Option<Term> {
        Term::ALL.into_iter().find(|term| term.key() == key)
    }

    /// What it is the uncertainty of, in plain words.
    pub fn meaning(self) -> &'static str {
        match self {
            Term::PressureCalibration => "calibration and drift of the pressure sensor",
            Term::PressureNoise => "noise of the deepest pressure",
            Term::Tare => "zero offset of the pressure sensor",
            Term::AirPressure => "air pressure at the sea surface",
            Term::TemperatureCalibration => "calibration of the thermometer",
            Term::ConductivityCalibration => "calibration of the conductivity cell",
            Term::SalinityCalibration => "calibration of salinity, where the log carries salinity",
            Term::SalinityComposition => "composition of the salt, as Absolute Salinity",
            Term::EquationOfState => "equation of state, relative, of specific volume",
            Term::ProfileRepresentativeness => "how well the profile stands for the water, as depth",
            Term::SurfaceGap => "density of the unsampled water above the first level",
            Term::SurfaceGravity => "gravity at the surface against normal gravity",
            Term::GravityGradient => "gradient anomaly of gravity",
            Term::GeoidHeight => "height of the geoid above the ellipsoid",
            Term::Position => "latitude",
            Term::WaterLevel => "tide and surge against the datum",
            Term::ReferenceOffset => "distance from the sensor to the reference point",
            Term::PeakEstimate => "picking the largest of many noisy samples",
            Term::Integration => "numerical error of the integral, as depth",
        }
    }

    /// Unit of its value and its standard uncertainty.
    pub fn unit(self) -> &'static str {
        match self {
            Term::PressureCalibration | Term::PressureNoise | Term::Tare | Term::PeakEstimate => "dbar",
            Term::AirPressure => "hPa",
            Term::TemperatureCalibration => "degC",
            Term::ConductivityCalibration => "mS/cm",
            Term::SalinityCalibration => "1",
            Term::SalinityComposition => "g/kg",
            Term::EquationOfState => "ppm",
            Term::SurfaceGap => "kg/m3",
            Term::SurfaceGravity => "mGal",
            Term::GravityGradient => "E",
            Term::Position => "degree",
            Term::ProfileRepresentativeness
            | Term::GeoidHeight
            | Term::WaterLevel
            | Term::ReferenceOffset
            | Term::Integration => "m",
        }
    }

    /// Standard uncertainty in [`Term::unit`] that is assumed when nothing better is known; `None` where it comes from
    /// the data, depends on depth or on what else is known.
    pub fn assumed(self) -> Option<f64> {
        match self {
            Term::TemperatureCalibration => Some(0.002),
            Term::ConductivityCalibration | Term::SalinityCalibration => Some(0.003),
            Term::SurfaceGravity => Some(35.0),
            Term::GravityGradient => Some(50.0),
            Term::GeoidHeight => Some(30.0),
            Term::Position => Some(0.01),
            Term::WaterLevel => Some(0.3),
            Term::ReferenceOffset => Some(0.02),
            Term::PressureCalibration
            | Term::PressureNoise
            | Term::Tare
            | Term::AirPressure
            | Term::SalinityComposition
            | Term::EquationOfState
            | Term::ProfileRepresentativeness
            | Term::SurfaceGap
            | Term::PeakEstimate
            | Term::Integration => None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn keys_are_told_apart_and_return() {
        for term in Term::ALL {
            assert_eq!(Term::from_key(term.key()), Some(term));
        }
        assert_eq!(Term::from_key("pressure"), None);
    }
}
