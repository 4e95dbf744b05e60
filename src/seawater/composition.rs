//! From Practical to Absolute Salinity.

use super::atlas::{Atlas, AtlasColumn, Coverage, in_baltic};
use crate::constants::{BALTIC_RIVER_SALT_G_KG, REFERENCE_PER_PRACTICAL_G_KG};
use std::sync::Arc;

/// What the salt is made of: how Absolute Salinity follows from Practical Salinity.
///
/// `S_A = S_R (1 + R_delta)`, `S_R = (35.165 04 / 35) S_P` (TEOS-10 manual, appendix A.5,
/// eqs. A.5.1 and A.5.10; Millero et al. 2008). `R_delta` is the Absolute Salinity Anomaly Ratio.
///
/// Against the reference TEOS-10 library see [`Composition::at`]. Cheap to clone: the column of the atlas is shared.
#[derive(Debug, Clone, PartialEq, Default)]
pub enum Composition {
    /// Reference-composition seawater, `R_delta = 0`.
    #[default]
    Reference,
    /// One known anomaly ratio for the whole column.
    AnomalyRatio(f64),
    /// The anomaly ratio of the global atlas at one position, by pressure.
    Atlas(Arc<AtlasColumn>),
    /// Water of the Baltic Sea, whose rivers bring salt of another composition:
    /// `S_A = ((35.165 04 - 0.087) / 35) S_P + 0.087 g/kg` (Feistel et al. 2010, Ocean Science 6, 3-24; TEOS-10 manual,
    /// appendix A.5).
    Baltic,
}

impl Composition {
    /// The composition at a position, `latitude_deg` north positive, `longitude_deg` east positive in either
    /// convention: the formula of the Baltic Sea inside its outline, else the global atlas ([`Atlas::column`]), else
    /// the reference composition. [`Composition::coverage`] says which.
    ///
    /// Agrees with the reference TEOS-10 library to 2e-8 g/kg, the stored resolution, at its nodes and in 99.97 % of
    /// 100 000 random points in the ocean (test `atlas_reference`; the exceptions are told in the description of
    /// [`Atlas`]'s module). The atlas itself is uncertain by about 0.005 g/kg (recalled from McDougall et al. 2012).
    pub fn at(latitude_deg: f64, longitude_deg: f64) -> Self {
        if in_baltic(latitude_deg, longitude_deg) {
            return Composition::Baltic;
        }
        match Atlas::global().column(latitude_deg, longitude_deg) {
            Some(column) => Composition::Atlas(Arc::new(column)),
            None => Composition::Reference,
        }
    }

    /// Where the composition is known from. [`Coverage::None`] for the reference composition and for a ratio that was
    /// given.
    pub fn coverage(&self) -> Coverage {
        match self {
            Composition::Atlas(_) => Coverage::Atlas,
            Composition::Baltic => Coverage::Baltic,
            Composition::Reference | Composition::AnomalyRatio(_) => Coverage::None,
        }
    }

    /// Absolute Salinity in g/kg of water with this `practical_salinity` (PSS-78) at sea pressure `pressure_dbar`, on
    /// which the atlas depends.
    #[inline]
    pub fn absolute_salinity_g_kg(&self, practical_salinity: f64, pressure_dbar: f64) -> f64 {
        let reference = REFERENCE_PER_PRACTICAL_G_KG * practical_salinity;
        match self {
            Composition::Reference => reference,
            Composition::AnomalyRatio(ratio) => reference * (1.0 + ratio),
            Composition::Atlas(column) => reference * (1.0 + column.anomaly_ratio(pressure_dbar)),
            Composition::Baltic => reference + BALTIC_RIVER_SALT_G_KG * (1.0 - practical_salinity / 35.0),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn thirty_five_is_the_standard_ocean() {
        // Millero et al. (2008): S_P = 35 is S_R = 35.165 04 g/kg.
        assert_eq!(Composition::Reference.absolute_salinity_g_kg(35.0, 0.0), 35.165_04);
    }

    #[test]
    fn anomaly_ratio_scales() {
        let reference = Composition::Reference.absolute_salinity_g_kg(34.6, 900.0);
        let anomalous = Composition::AnomalyRatio(6e-4).absolute_salinity_g_kg(34.6, 900.0);
        assert!((anomalous / reference - 1.0 - 6e-4).abs() < 1e-15);
    }

    #[test]
    fn the_baltic_joins_the_standard_ocean_and_the_rivers() {
        // Feistel et al. (2010): river water with S_P = 0 has 0.087 g/kg, the ocean end is standard seawater.
        assert_eq!(Composition::Baltic.absolute_salinity_g_kg(0.0, 20.0), 0.087);
        assert!((Composition::Baltic.absolute_salinity_g_kg(35.0, 20.0) - 35.165_04).abs() < 1e-13);
    }

    #[test]
    fn the_atlas_scales_with_salinity() {
        let here = Composition::at(-31.5, -176.2);
        for pressure in [0.0, 812.0, 4_000.0, 10_900.0] {
            let single = here.absolute_salinity_g_kg(17.0, pressure);
            let double = here.absolute_salinity_g_kg(34.0, pressure);
            assert!((double - 2.0 * single).abs() < 1e-13);
            assert_eq!(here.absolute_salinity_g_kg(0.0, pressure), 0.0);
            assert!(double > Composition::Reference.absolute_salinity_g_kg(34.0, pressure));
        }
    }

    #[test]
    fn coverage_is_told() {
        assert_eq!(Composition::at(-31.5, -176.2).coverage(), Coverage::Atlas);
        assert_eq!(Composition::at(58.0, 20.0).coverage(), Coverage::Baltic);
        assert_eq!(Composition::at(58.0, 20.0 - 360.0), Composition::Baltic);
        assert_eq!(Composition::at(50.0, 90.0), Composition::Reference);
        assert_eq!(Composition::at(50.0, 90.0).coverage(), Coverage::None);
        assert_eq!(Composition::at(f64::NAN, 0.0).coverage(), Coverage::None);
    }
}
