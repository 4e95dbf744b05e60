//! All that is known of a cast besides its log, resolved: what the call, the sheet and the log said, in this order.

use crate::cast::{CastSettings, TareChoice};
use crate::column::Water;
use crate::gravity::SurfaceGravity;
use crate::log::PressureKind;
use crate::seawater::{Composition, EquationOfState};
use crate::uncertainty::{Supplied, Term};
use std::collections::BTreeMap;

/// Air pressure in hPa that is assumed when none is given.
pub const STANDARD_AIR_HPA: f64 = 1013.25;

/// Which leg the water column is taken from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum LegChoice {
    /// The down leg, where the instrument meets water that it has not stirred.
    #[default]
    Down,
    /// The up leg.
    Up,
    /// The mean of both.
    Both,
}

/// A profile of water from another cast.
#[derive(Debug, Clone, PartialEq)]
pub struct OtherCast {
    /// The water.
    pub water: Water,
    /// Its log, as the user named it.
    pub source: String,
}

/// What is known of a cast besides its log. `None` where nobody said anything.
#[derive(Debug, Clone, PartialEq)]
pub struct Settings {
    /// Geodetic latitude in degrees; `None` takes the log's.
    pub latitude_deg: Option<f64>,
    /// Longitude in degrees, east positive; `None` takes the log's.
    pub longitude_deg: Option<f64>,
    /// From where the pressure counts.
    pub pressure_kind: Option<PressureKind>,
    /// Air pressure at the sea surface in hPa.
    pub air_pressure_hpa: Option<f64>,
    /// What to do about the zero offset.
    pub tare: TareChoice,
    /// Leg that the water is taken from.
    pub leg: LegChoice,
    /// Composition of the salt; `None` takes the atlas's at the position, where longitude is known too.
    pub composition: Option<Composition>,
    /// Formula of specific volume.
    pub equation_of_state: EquationOfState,
    /// Water of another cast, to be used in place of the log's.
    pub profile: Option<OtherCast>,
    /// Gravity at the surface against normal gravity.
    pub surface_gravity: Option<SurfaceGravity>,
    /// Gradient anomaly in eotvos.
    pub gradient_eotvos: Option<f64>,
    /// Geoid height in m.
    pub geoid_height_m: Option<f64>,
    /// Water level above the datum in m.
    pub water_level_m: Option<f64>,
    /// Name of the datum.
    pub datum: Option<String>,
    /// How far the reference point lies below the sensor, in m.
    pub reference_below_sensor_m: Option<f64>,
    /// Standard uncertainties that the user supplies.
    pub uncertainties: BTreeMap<Term, Supplied>,
    /// Probability that expanded uncertainties cover.
    pub coverage_probability: f64,
}

impl Default for Settings {
    fn default() -> Self {
        Self {
            latitude_deg: None,
            longitude_deg: None,
            pressure_kind: None,
            air_pressure_hpa: None,
            tare: TareChoice::Auto,
            leg: LegChoice::Down,
            composition: None,
            equation_of_state: EquationOfState::Gibbs,
            profile: None,
            surface_gravity: None,
            gradient_eotvos: None,
            geoid_height_m: None,
            water_level_m: None,
            datum: None,
            reference_below_sensor_m: None,
            uncertainties: BTreeMap::new(),
            coverage_probability: 0.95,
        }
    }
}

impl Settings {
    /// What [`crate::cast::Cast::new`] needs.
    pub fn cast(&self) -> CastSettings {
        CastSettings {
            pressure_kind: self.pressure_kind,
            air_pressure_hpa: self.air_pressure_hpa.unwrap_or(STANDARD_AIR_HPA),
            tare: self.tare,
        }
    }

    /// What depths are counted from.
    pub fn datum(&self) -> String {
        match (&self.datum, self.water_level_m) {
            (Some(name), _) => name.clone(),
            (None, Some(_)) => "datum of the water level".to_string(),
            (None, None) => "sea surface".to_string(),
        }
    }
}
