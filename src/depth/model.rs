//! The whole way from a sea pressure to a depth, with a place for an error at every step.

use crate::column::{Column, Profile, ProfileError, Water, WaterShift};
use crate::gravity::{LocalGravity, SurfaceGravity};

/// What is known of the place and the day.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Place {
    /// Geodetic latitude in degrees.
    pub latitude_deg: f64,
    /// Sea pressure of the sea surface in dbar.
    pub surface_dbar: f64,
    /// Departure of gravity from normal at the surface.
    pub surface_gravity: SurfaceGravity,
    /// Gradient anomaly in eotvos.
    pub gradient_eotvos: f64,
    /// Geoid height in m.
    pub geoid_height_m: f64,
    /// Water level above the datum in m.
    pub water_level_m: f64,
    /// How far the reference point lies below the sensor, in m.
    pub reference_below_sensor_m: f64,
}

/// Errors to put on a [`Model`], all zero for none.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Shift {
    /// Errors of the observed water. Those of pressure act on the samples, and on the levels where the same sensor measured
    /// them ([`Model::same_sensor`]).
    pub water: WaterShift,
    /// Added to the pressure of the air, in dbar.
    pub surface_dbar: f64,
    /// Added to the latitude in degrees.
    pub latitude_deg: f64,
    /// Added to gravity at the surface in mGal.
    pub surface_gravity_mgal: f64,
    /// Added to the gradient anomaly in eotvos.
    pub gradient_eotvos: f64,
    /// Added to the geoid height in m.
    pub geoid_height_m: f64,
    /// Added to the water level in m.
    pub water_level_m: f64,
    /// Added to the lever arm in m.
    pub reference_below_sensor_m: f64,
}

/// Water, place and day: all that a depth depends on besides the pressure.
#[derive(Debug, Clone, PartialEq)]
pub struct Model {
    /// The observed water.
    pub water: Water,
    /// The place and the day.
    pub place: Place,
    /// Whether the levels of the water were measured by the sensor of the samples, and share its errors.
    pub same_sensor: bool,
}

impl Place {
    /// Gravity along the vertical.
    pub fn gravity(&self) -> LocalGravity {
        LocalGravity::new(self.latitude_deg, self.surface_gravity, self.gradient_eotvos, self.geoid_height_m)
    }

    /// The depth below the datum, at the reference point, that belongs to a depth of the sensor below the
    /// surface, in m.
    pub fn below_datum_m(&self, below_surface_m: f64) -> f64 {
        below_surface_m - self.water_level_m + self.reference_below_sensor_m
    }

    fn shifted(&self, shift: &Shift) -> Self {
        Self {
            // A latitude error must not climb over a pole.
            latitude_deg: (self.latitude_deg + shift.latitude_deg).clamp(-90.0, 90.0),
            surface_dbar: self.surface_dbar + shift.surface_dbar,
            surface_gravity: self.surface_gravity.plus(shift.surface_gravity_mgal),
            gradient_eotvos: self.gradient_eotvos + shift.gradient_eotvos,
            geoid_height_m: self.geoid_height_m + shift.geoid_height_m,
            water_level_m: self.water_level_m + shift.water_level_m,
            reference_below_sensor_m: self.reference_below_sensor_m + shift.reference_below_sensor_m,
        }
    }
}

impl Model {
    /// The profile of specific volume down from the surface.
    ///
    /// # Errors
    /// [`ProfileError`] when a level of the water is not that of water.
    pub fn profile(&self) -> Result<Profile, ProfileError> {
        self.water.profile(self.place.surface_dbar, &WaterShift::default())
    }

    /// The column of water with depth at each node, in m below the sea surface.
    ///
    /// # Errors
    /// [`ProfileError`] when a level of the water is not that of water.
    pub fn column(&self) -> Result<Column, ProfileError> {
        Ok(Column::integrate(&self.profile()?, self.place.surface_dbar, &self.place.gravity()))
    }

    /// Depths in m, below the datum and at the reference point, of sensor readings `at_dbar` (sea pressures) when
    /// everything is wrong by `shift`.
    ///
    /// # Errors
    /// [`ProfileError`] when a level of the water is then not that of water.
    pub fn depths_m(&self, at_dbar: &[f64], shift: &Shift) -> Result<Vec<f64>, ProfileError> {
        let place = self.place.shifted(shift);
        let mut of_levels = shift.water;
        if !self.same_sensor {
            (of_levels.pressure_dbar, of_levels.pressure_relative) = (0.0, 0.0);
        }
        let profile = self.water.profile(place.surface_dbar, &of_levels)?;
        let column = Column::integrate(&profile, place.surface_dbar, &place.gravity());
        Ok(at_dbar.iter().map(|&p| place.below_datum_m(column.depth_m(shift.water.pressure(p)))).collect())
    }

    /// The same model on a coarser set of levels.
    #[must_use]
    pub fn thinned(&self, every: usize) -> Self {
        Self { water: self.water.thinned(every), ..self.clone() }
    }
}
