//! Published formulas that give a depth without the water: what others may have used.

/// Depth in m at sea pressure `pressure_dbar` and geodetic `latitude_deg` in the standard ocean of EOS-80.
///
/// `z = (9.726 59 p - 2.2512e-5 p^2 + 2.279e-10 p^3 - 1.82e-15 p^4) / (g(phi) + 1.092e-6 p)`,
/// `g = 9.780 318 (1 + 5.2788e-3 x + 2.36e-5 x^2)`, `x = sin2 phi` (UNESCO Technical Papers in Marine Science 44, 1983, p. 25-28,
/// after Saunders and Fofonoff 1976; check value 9712.653 m at 10 000 dbar, 30 deg).
pub fn unesco_44_depth_m(pressure_dbar: f64, latitude_deg: f64) -> f64 {
    let p = pressure_dbar;
    let x = latitude_deg.to_radians().sin().powi(2);
    let gravity = 9.780_318 * (1.0 + (5.278_8e-3 + 2.36e-5 * x) * x) + 1.092e-6 * p;
    (((-1.82e-15 * p + 2.279e-10) * p - 2.251_2e-5) * p + 9.726_59) * p / gravity
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn printed_check_value() {
        // UNESCO 44 (1983), p. 28, to three decimals.
        assert!((unesco_44_depth_m(10_000.0, 30.0) - 9_712.653).abs() < 0.000_5);
    }

    #[test]
    fn no_pressure_no_depth() {
        assert_eq!(unesco_44_depth_m(0.0, 45.0), 0.0);
    }
}
