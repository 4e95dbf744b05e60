//! All that is known of a cast besides its log: what the call and the sheet said, in this order. What neither said is left
//! to the log, and then to the defaults.

mod layer;
pub mod range;

pub use layer::Layer;

use crate::cast::{CastSettings, TareChoice};
use crate::column::Water;
use crate::gravity::SurfaceGravity;
use crate::log::{Log, PressureKind};
use crate::seawater::{Composition, EquationOfState};
use crate::uncertainty::{Supplied, Term};
use std::collections::BTreeMap;

/// Air pressure in hPa that is assumed when none is given.
pub const STANDARD_AIR_HPA: f64 = 1013.25;

/// Probability that expanded uncertainties cover when none is given.
pub const COVERAGE_PROBABILITY: f64 = 0.95;

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
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Settings {
    /// Name of the station; `None` takes the log's.
    pub station: Option<String>,
    /// Time of the first sample that has a time; `None` takes the log's.
    pub start: Option<jiff::Timestamp>,
    /// Geodetic latitude in degrees; `None` takes the log's.
    pub latitude_deg: Option<f64>,
    /// Longitude in degrees, east positive; `None` takes the log's.
    pub longitude_deg: Option<f64>,
    /// From where the pressure counts.
    pub pressure_kind: Option<PressureKind>,
    /// Air pressure at the sea surface in hPa.
    pub air_pressure_hpa: Option<f64>,
    /// What to do about the zero offset; see [`Settings::tare`].
    pub tare: Option<TareChoice>,
    /// Leg that the water is taken from; see [`Settings::leg`].
    pub leg: Option<LegChoice>,
    /// Composition of the salt; `None` takes the atlas's at the position, where longitude is known too.
    pub composition: Option<Composition>,
    /// Formula of specific volume; see [`Settings::equation_of_state`].
    pub equation_of_state: Option<EquationOfState>,
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
    /// Probability that expanded uncertainties cover; see [`Settings::coverage_probability`].
    pub coverage_probability: Option<f64>,
}

impl Settings {
    /// These settings, and those of `below` where these are silent; uncertainties term by term.
    #[must_use]
    pub fn or(self, below: Self) -> Self {
        let mut uncertainties = below.uncertainties;
        uncertainties.extend(self.uncertainties);
        Self {
            station: self.station.or(below.station),
            start: self.start.or(below.start),
            latitude_deg: self.latitude_deg.or(below.latitude_deg),
            longitude_deg: self.longitude_deg.or(below.longitude_deg),
            pressure_kind: self.pressure_kind.or(below.pressure_kind),
            air_pressure_hpa: self.air_pressure_hpa.or(below.air_pressure_hpa),
            tare: self.tare.or(below.tare),
            leg: self.leg.or(below.leg),
            composition: self.composition.or(below.composition),
            equation_of_state: self.equation_of_state.or(below.equation_of_state),
            profile: self.profile.or(below.profile),
            surface_gravity: self.surface_gravity.or(below.surface_gravity),
            gradient_eotvos: self.gradient_eotvos.or(below.gradient_eotvos),
            geoid_height_m: self.geoid_height_m.or(below.geoid_height_m),
            water_level_m: self.water_level_m.or(below.water_level_m),
            datum: self.datum.or(below.datum),
            reference_below_sensor_m: self.reference_below_sensor_m.or(below.reference_below_sensor_m),
            uncertainties,
            coverage_probability: self.coverage_probability.or(below.coverage_probability),
        }
    }

    /// What to do about the zero offset: by default, take it from the deck.
    pub fn tare(&self) -> TareChoice {
        self.tare.unwrap_or(TareChoice::Auto)
    }

    /// Leg that the water is taken from: by default, the down leg.
    pub fn leg(&self) -> LegChoice {
        self.leg.unwrap_or_default()
    }

    /// Formula of specific volume: by default, the Gibbs function.
    pub fn equation_of_state(&self) -> EquationOfState {
        self.equation_of_state.unwrap_or_default()
    }

    /// Probability that expanded uncertainties cover: by default, 0.95.
    pub fn coverage_probability(&self) -> f64 {
        self.coverage_probability.unwrap_or(COVERAGE_PROBABILITY)
    }

    /// Puts what is known of the log's station and start into the log; a start moves its absolute times along.
    pub(crate) fn correct(&self, log: &mut Log) {
        if let Some(station) = &self.station {
            log.station = Some(station.clone());
        }
        if let Some(start) = self.start {
            log.start = Some(start);
            if let Some(time) = &mut log.time {
                time.start = Some(start);
            }
        }
    }

    /// What [`crate::cast::Cast::new`] needs.
    pub fn cast(&self) -> CastSettings {
        CastSettings {
            pressure_kind: self.pressure_kind,
            air_pressure_hpa: self.air_pressure_hpa.unwrap_or(STANDARD_AIR_HPA),
            tare: self.tare(),
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
