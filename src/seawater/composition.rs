//! From Practical to Absolute Salinity.

use crate::constants::REFERENCE_PER_PRACTICAL_G_KG;

/// What the salt is made of: how Absolute Salinity follows from Practical Salinity.
///
/// `S_A = S_R (1 + R_delta)`, `S_R = (35.165 04 / 35) S_P` (TEOS-10 manual, appendix A.5,
/// eqs. A.5.1 and A.5.10; Millero et al. 2008). `R_delta` is the Absolute Salinity Anomaly Ratio.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub enum Composition {
    /// Reference-composition seawater, `R_delta = 0`.
    #[default]
    Reference,
    /// One known anomaly ratio for the whole column.
    AnomalyRatio(f64),
}

impl Composition {
    /// Absolute Salinity in g/kg of water with this `practical_salinity` (PSS-78) at sea pressure `pressure_dbar`, on which
    /// an atlas of the composition depends.
    pub fn absolute_salinity_g_kg(&self, practical_salinity: f64, _pressure_dbar: f64) -> f64 {
        let reference = REFERENCE_PER_PRACTICAL_G_KG * practical_salinity;
        match *self {
            Composition::Reference => reference,
            Composition::AnomalyRatio(ratio) => reference * (1.0 + ratio),
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
}
