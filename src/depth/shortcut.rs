//! Published formulas that give a depth without the water: what others may have used.

use crate::constants::{FRESH_WATER_KG_M3, PA_PER_DBAR, STANDARD_GRAVITY_M_S2, UNIFORM_WATER_KG_M3};

const DBAR_PER_MPA: f64 = 100.0;

/// A way to a depth from pressure and latitude alone.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Shortcut {
    /// Water of 1025 kg/m3 under 9.806 65 m/s2 (common practice, no source).
    UniformWater,
    /// [`unesco_44_depth_m`].
    Unesco44,
    /// [`saunders_1981_depth_m`].
    Saunders1981,
    /// [`leroy_parthiot_1998_depth_m`], for the common oceans.
    LeroyParthiot1998,
    /// Water of 1000 kg/m3 under 9.806 65 m/s2 (common practice, no source).
    FreshWater,
}

impl Shortcut {
    /// All of them.
    pub const ALL: [Self; 5] =
        [Self::UniformWater, Self::Unesco44, Self::Saunders1981, Self::LeroyParthiot1998, Self::FreshWater];

    /// Its key in reports.
    pub fn key(self) -> &'static str {
        match self {
            Self::UniformWater => "uniform_water",
            Self::Unesco44 => "unesco_44",
            Self::Saunders1981 => "saunders_1981",
            Self::LeroyParthiot1998 => "leroy_parthiot_1998",
            Self::FreshWater => "fresh_water",
        }
    }

    /// Depth in m that it gives at sea pressure `pressure_dbar` and geodetic `latitude_deg`.
    pub fn depth_m(self, pressure_dbar: f64, latitude_deg: f64) -> f64 {
        let uniform = |kg_m3: f64| pressure_dbar * PA_PER_DBAR / (kg_m3 * STANDARD_GRAVITY_M_S2);
        match self {
            Self::UniformWater => uniform(UNIFORM_WATER_KG_M3),
            Self::Unesco44 => unesco_44_depth_m(pressure_dbar, latitude_deg),
            Self::Saunders1981 => saunders_1981_depth_m(pressure_dbar, latitude_deg),
            Self::LeroyParthiot1998 => leroy_parthiot_1998_depth_m(pressure_dbar, latitude_deg),
            Self::FreshWater => uniform(FRESH_WATER_KG_M3),
        }
    }
}

/// Depth in m at sea pressure `pressure_dbar` and geodetic `latitude_deg` in the standard ocean of EOS-80.
///
/// `z = (9.726 59 p - 2.2512e-5 p^2 + 2.279e-10 p^3 - 1.82e-15 p^4) / (g(phi) + 1.092e-6 p)`,
/// `g = 9.780 318 (1 + 5.2788e-3 x + 2.36e-5 x^2)`, `x = sin2 phi` (UNESCO Technical Papers in Marine Science 44, 1983, p. 25-28,
/// after Saunders and Fofonoff 1976; check value 9712.653 m at 10 000 dbar, 30 deg).
pub fn unesco_44_depth_m(pressure_dbar: f64, latitude_deg: f64) -> f64 {
    let p = pressure_dbar;
    let x = sin2(latitude_deg);
    let gravity = 9.780_318 * (1.0 + (5.278_8e-3 + 2.36e-5 * x) * x) + 1.092e-6 * p;
    (((-1.82e-15 * p + 2.279e-10) * p - 2.251_2e-5) * p + 9.726_59) * p / gravity
}

/// Depth in m at sea pressure `pressure_dbar` and geodetic `latitude_deg` in the standard ocean, the short form:
/// `z = (1 - c1) p - c2 p^2`, `c1 = (5.92 + 5.25 sin2 phi) 1e-3`, `c2 = 2.21e-6` (Saunders 1981, J. Phys. Oceanogr. 11,
/// 573-574).
///
/// Within 0.3 m of [`unesco_44_depth_m`] down to 5 000 dbar and 0.6 m to 6 000 dbar; 5.7 to 6.9 m short of it at 10 000 dbar.
pub fn saunders_1981_depth_m(pressure_dbar: f64, latitude_deg: f64) -> f64 {
    let c1 = (5.92 + 5.25 * sin2(latitude_deg)) * 1e-3;
    let c2 = 2.21e-6;
    ((1.0 - c1) - c2 * pressure_dbar) * pressure_dbar
}

/// Depth in m at sea pressure `pressure_dbar` and geodetic `latitude_deg` in the standard ocean, after Leroy and Parthiot:
/// with `P` in MPa
///
/// `z = (9.726 59e2 P - 2.2512e-1 P^2 + 2.279e-4 P^3 - 1.82e-7 P^4) / (g(phi) + 1.092e-4 P)`,
/// `g = 9.780 318 (1 + 5.2788e-3 x + 2.36e-5 x^2)`, `x = sin2 phi` (Leroy and Parthiot 1998, J. Acoust. Soc. Am. 103,
/// 1346-1352; erratum 2007, J. Acoust. Soc. Am. 121, 2447; recalled from memory).
///
/// This is [`unesco_44_depth_m`] in other units; what the paper adds are corrections for the water of named seas
/// ([`leroy_parthiot_1998_depth_m`]) and a formula for the way back.
pub fn leroy_parthiot_standard_ocean_depth_m(pressure_dbar: f64, latitude_deg: f64) -> f64 {
    let p = pressure_dbar / DBAR_PER_MPA;
    let x = sin2(latitude_deg);
    let gravity = 9.780_318 * (1.0 + (5.278_8e-3 + 2.36e-5 * x) * x);
    (((-1.82e-7 * p + 2.279e-4) * p - 2.251_2e-1) * p + 9.726_59e2) * p / (gravity + 1.092e-4 * p)
}

/// Depth in m of the common oceans (60 degN to 40 degS, the enclosed seas left out): the standard ocean with the correction of
/// the same paper, `P / (P + 1) + 5.7e-2 P` m, `P` in MPa (recalled from memory).
///
/// The corrections of other seas are not here: no source of them is at hand.
pub fn leroy_parthiot_1998_depth_m(pressure_dbar: f64, latitude_deg: f64) -> f64 {
    let p = pressure_dbar.max(0.0) / DBAR_PER_MPA;
    leroy_parthiot_standard_ocean_depth_m(pressure_dbar, latitude_deg) + p / (p + 1.0) + 5.7e-2 * p
}

fn sin2(latitude_deg: f64) -> f64 {
    latitude_deg.to_radians().sin().powi(2)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn unesco_44_printed_check_value() {
        // UNESCO 44 (1983), p. 28, to three decimals.
        assert!((unesco_44_depth_m(10_000.0, 30.0) - 9_712.653).abs() < 0.000_5);
    }

    #[test]
    fn saunders_check_value() {
        // 7500.004 dbar for 7321.45 m at 30 deg, recalled from memory: the check value that goes round with the
        // inverse of this formula. Computed with seven digits, it is good to 5 mm.
        assert!((saunders_1981_depth_m(7_500.004, 30.0) - 7_321.45).abs() < 0.005);
    }

    #[test]
    fn saunders_and_unesco_44_are_the_same_ocean() {
        for latitude in [0.0, 30.0, 60.0, 90.0] {
            for p in [100.0, 1_000.0, 3_000.0, 5_000.0, 6_000.0] {
                let difference = saunders_1981_depth_m(p, latitude) - unesco_44_depth_m(p, latitude);
                assert!(difference.abs() < 0.6, "{p} {latitude}: {difference}");
            }
        }
    }

    /// Pressure in dbar at a depth, the other formula of Leroy and Parthiot (1998), recalled from memory: with its own
    /// coefficients and its own gravity, so that a wrong digit on either side shows.
    fn leroy_parthiot_pressure_dbar(depth_m: f64, latitude_deg: f64, correction_mpa: f64) -> f64 {
        let z = depth_m;
        let at_45 = (((2.8e-19 * z - 1.25e-13) * z + 2.465e-8) * z + 1.008_18e-2) * z;
        let gravity = 9.780_3 * (1.0 + 5.3e-3 * sin2(latitude_deg));
        let latitude_factor = (gravity - 2e-5 * z) / (9.806_12 - 2e-5 * z);
        (at_45 * latitude_factor - correction_mpa) * DBAR_PER_MPA
    }

    #[test]
    fn leroy_and_parthiot_return() {
        for latitude in [0.0, 30.0, 45.0, 60.0] {
            for z in [10.0, 100.0, 1_000.0, 4_000.0, 8_000.0, 11_000.0] {
                // The paper states 0.1 m and, with the corrections of seas, some tenths.
                let p = leroy_parthiot_pressure_dbar(z, latitude, 0.0);
                let miss = leroy_parthiot_standard_ocean_depth_m(p, latitude) - z;
                assert!(miss.abs() < 0.1, "standard ocean, {z} {latitude}: {miss}");
                let p = leroy_parthiot_pressure_dbar(z, latitude, 1e-2 * z / (z + 100.0) + 6.2e-6 * z);
                let miss = leroy_parthiot_1998_depth_m(p, latitude) - z;
                assert!(miss.abs() < 0.2, "common oceans, {z} {latitude}: {miss}");
            }
        }
    }

    #[test]
    fn no_pressure_no_depth() {
        for shortcut in Shortcut::ALL {
            assert_eq!(shortcut.depth_m(0.0, 45.0), 0.0, "{}", shortcut.key());
        }
    }

    #[test]
    fn water_of_one_density_is_p_over_rho_g() {
        // 1e8 Pa / (1025 x 9.806 65) and / (1000 x 9.806 65), by hand.
        assert!((Shortcut::UniformWater.depth_m(10_000.0, 0.0) - 9_948.45).abs() < 0.01);
        assert!((Shortcut::FreshWater.depth_m(10_000.0, 0.0) - 10_197.16).abs() < 0.01);
    }
}
