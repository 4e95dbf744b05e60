//! What numbers may be: one definition for the options of a call and the keys of a sheet.

use std::fmt;

/// Lowest and highest number that makes sense, both included.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Range {
    /// Lowest.
    pub low: f64,
    /// Highest; infinite where there is no bound.
    pub high: f64,
    /// Unit, for messages.
    pub unit: &'static str,
}

impl Range {
    const fn new(low: f64, high: f64, unit: &'static str) -> Self {
        Self { low, high, unit }
    }

    /// Of a standard uncertainty in `unit`.
    pub const fn uncertainty(unit: &'static str) -> Self {
        Self::new(0.0, f64::INFINITY, unit)
    }

    /// Whether `value` makes sense.
    pub fn holds(&self, value: f64) -> bool {
        value.is_finite() && (self.low..=self.high).contains(&value)
    }
}

impl fmt::Display for Range {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match (self.high.is_finite(), self.unit) {
            (true, "") => write!(f, "{} to {}", self.low, self.high),
            (true, unit) => write!(f, "{} to {} {unit}", self.low, self.high),
            (false, "") => write!(f, "{} or more", self.low),
            (false, unit) => write!(f, "{} {unit} or more", self.low),
        }
    }
}

/// Geodetic latitude.
pub const LATITUDE: Range = Range::new(-90.0, 90.0, "degrees");
/// Longitude, in either convention.
pub const LONGITUDE: Range = Range::new(-180.0, 360.0, "degrees");
/// Air pressure at the sea surface: wider than any weather, narrower than a wrong unit.
pub const AIR_PRESSURE: Range = Range::new(500.0, 1100.0, "hPa");
/// Water level above the datum; lakes lie high above most datums.
pub const WATER_LEVEL: Range = Range::new(-1_000.0, 10_000.0, "m");
/// Reference point below the sensor.
pub const REFERENCE_BELOW: Range = Range::new(-1_000.0, 1_000.0, "m");
/// Gravity anomaly and gravity disturbance.
pub const SURFACE_GRAVITY: Range = Range::new(-1_000.0, 1_000.0, "mGal");
/// Gradient anomaly.
pub const GRADIENT: Range = Range::new(-3_000.0, 3_000.0, "E");
/// Geoid height; the geoid lies within about 110 m of the ellipsoid.
pub const GEOID_HEIGHT: Range = Range::new(-200.0, 200.0, "m");
/// Zero offset of the pressure sensor.
pub const TARE: Range = Range::new(-200.0, 200.0, "dbar");
/// Coverage probability.
pub const COVERAGE: Range = Range::new(0.5, 0.999_999, "");

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bounds_are_included_and_what_is_no_number_is_not() {
        assert!(LATITUDE.holds(90.0) && LATITUDE.holds(-90.0) && !LATITUDE.holds(90.000_1));
        assert!(!LATITUDE.holds(f64::NAN) && !Range::uncertainty("m").holds(f64::INFINITY));
        assert!(Range::uncertainty("m").holds(0.0) && !Range::uncertainty("m").holds(-0.1));
    }

    #[test]
    fn words_for_messages() {
        assert_eq!(AIR_PRESSURE.to_string(), "500 to 1100 hPa");
        assert_eq!(COVERAGE.to_string(), "0.5 to 0.999999");
        assert_eq!(Range::uncertainty("mGal").to_string(), "0 mGal or more");
        assert_eq!(Range::uncertainty("").to_string(), "0 or more");
    }
}
