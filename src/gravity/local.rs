//! Gravity at one place: normal gravity and what is known to depart from it.

use super::Gravity;
use super::ellipsoid::NormalGravity;
use crate::constants::{M_S2_PER_MGAL, S2_PER_EOTVOS};

/// How gravity at the sea surface departs from normal gravity, in mGal.
///
/// The two differ by the change of normal gravity over the geoid height (about 0.31 mGal per metre), so a value
/// must be taken for what it is.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum SurfaceGravity {
    /// Gravity disturbance: against normal gravity at the same point, `g - gamma(N)`.
    Disturbance(f64),
    /// Free-air anomaly: against normal gravity on the ellipsoid, `g - gamma(0)`.
    FreeAirAnomaly(f64),
}

impl SurfaceGravity {
    /// The value in mGal, whichever it is.
    pub fn mgal(self) -> f64 {
        match self {
            SurfaceGravity::Disturbance(mgal) | SurfaceGravity::FreeAirAnomaly(mgal) => mgal,
        }
    }

    /// The same kind with `mgal` added.
    #[must_use]
    pub fn plus(self, mgal: f64) -> Self {
        match self {
            SurfaceGravity::Disturbance(d) => SurfaceGravity::Disturbance(d + mgal),
            SurfaceGravity::FreeAirAnomaly(a) => SurfaceGravity::FreeAirAnomaly(a + mgal),
        }
    }
}

/// Gravity along the vertical of one place, before the pull of the water above.
///
/// `g(z) = gamma(N - z) + disturbance + T_zz z`: normal gravity at the height of the point, the
/// gravity disturbance of the surface carried down, and a gradient anomaly (positive when gravity grows faster with
/// depth than normal).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LocalGravity {
    normal: NormalGravity,
    disturbance_m_s2: f64,
    gradient_s2: f64,
    geoid_height_m: f64,
}

impl LocalGravity {
    /// Gravity at geodetic `latitude_deg`, with the surface gravity, a gradient anomaly in eotvos (1e-9 s-2) and
    /// the height in m of the geoid (taken for the sea surface) above the ellipsoid.
    pub fn new(
        latitude_deg: f64,
        surface: SurfaceGravity,
        gradient_eotvos: f64,
        geoid_height_m: f64,
    ) -> Self {
        let normal = NormalGravity::new(latitude_deg);
        let disturbance_m_s2 = match surface {
            SurfaceGravity::Disturbance(mgal) => mgal * M_S2_PER_MGAL,
            SurfaceGravity::FreeAirAnomaly(mgal) => {
                normal.on_ellipsoid_m_s2() + mgal * M_S2_PER_MGAL - normal.at_height_m_s2(geoid_height_m)
            }
        };
        Self { normal, disturbance_m_s2, gradient_s2: gradient_eotvos * S2_PER_EOTVOS, geoid_height_m }
    }

    /// Normal gravity of the latitude and nothing else.
    pub fn normal(latitude_deg: f64) -> Self {
        Self::new(latitude_deg, SurfaceGravity::Disturbance(0.0), 0.0, 0.0)
    }
}

impl Gravity for LocalGravity {
    fn before_water_m_s2(&self, depth_m: f64) -> f64 {
        self.normal.at_height_m_s2(self.geoid_height_m - depth_m)
            + self.disturbance_m_s2
            + self.gradient_s2 * depth_m
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_anomaly_gives_the_observed_surface_gravity_whatever_the_geoid() {
        // g observed on the geoid = gamma(0) + free-air anomaly, by definition of the anomaly.
        for geoid in [-80.0, 0.0, 55.0] {
            let g = LocalGravity::new(-23.2, SurfaceGravity::FreeAirAnomaly(-182.0), 0.0, geoid);
            let observed = NormalGravity::new(-23.2).on_ellipsoid_m_s2() - 182.0e-5;
            assert!((g.before_water_m_s2(0.0) - observed).abs() < 1e-14);
        }
    }

    #[test]
    fn a_positive_gradient_anomaly_adds_with_depth() {
        let plain = LocalGravity::normal(0.0);
        let steep = LocalGravity::new(0.0, SurfaceGravity::Disturbance(0.0), 50.0, 0.0);
        let gain = steep.before_water_m_s2(10_000.0) - plain.before_water_m_s2(10_000.0);
        assert!((gain - 50.0e-9 * 10_000.0).abs() < 1e-14);
    }
}
