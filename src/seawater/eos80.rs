//! The equation of state before TEOS-10: the International Equation of State of Seawater 1980.

use super::nested::nested;
use crate::constants::T68_PER_T90;

// Symbols of UNESCO 44 (1983), p. 17-19. Units: kg/m3, bar, degC (IPTS-68), Practical Salinity.
const RHO_W: [f64; 6] = [999.842_594, 6.793_952e-2, -9.095_290e-3, 1.001_685e-4, -1.120_083e-6, 6.536_332e-9];
const RHO_S: [f64; 5] = [8.244_93e-1, -4.089_9e-3, 7.643_8e-5, -8.246_7e-7, 5.387_5e-9];
const RHO_S32: [f64; 3] = [-5.724_66e-3, 1.022_7e-4, -1.654_6e-6];
const RHO_S2: f64 = 4.831_4e-4;
const K_W: [f64; 5] = [19_652.21, 148.420_6, -2.327_105, 1.360_477e-2, -5.155_288e-5];
const K_S: [f64; 4] = [54.674_6, -0.603_459, 1.099_87e-2, -6.167_0e-5];
const K_S32: [f64; 3] = [7.944e-2, 1.648_3e-2, -5.300_9e-4];
const A_W: [f64; 4] = [3.239_908, 1.437_13e-3, 1.160_92e-4, -5.779_05e-7];
const A_S: [f64; 3] = [2.283_8e-3, -1.098_1e-5, -1.607_8e-6];
const A_S32: f64 = 1.910_75e-4;
const B_W: [f64; 3] = [8.509_35e-5, -6.122_93e-6, 5.278_7e-8];
const B_S: [f64; 3] = [-9.934_8e-7, 2.081_6e-8, 9.169_7e-10];

const BAR_PER_DBAR: f64 = 0.1;

/// Density in kg/m3 from Practical Salinity, temperature in degC of the scale IPTS-68 (1.000 24 times ITS-90) and
/// sea pressure in dbar.
///
/// `rho = rho(S, t, 0) / (1 - p / K(S, t, p))`, `K = K(S, t, 0) + A p + B p^2` with `p` in bar
/// (UNESCO Technical Papers in Marine Science 44, 1983, p. 15-20; Millero et al. 1980).
///
/// Valid for `0 <= S <= 42`, `-2 <= t <= 40 degC`, `0 <= p <= 10 000 dbar`. Agrees with the `seawater` library, which is that
/// report's code, to 1e-11 kg/m3 (test `equation_of_state`).
pub fn eos80_density_t68_kg_m3(
    practical_salinity: f64,
    temperature_t68_degc: f64,
    pressure_dbar: f64,
) -> f64 {
    let (t, p) = (temperature_t68_degc, pressure_dbar * BAR_PER_DBAR);
    let s = practical_salinity.max(0.0);
    let s32 = s * s.sqrt();
    let at_surface = nested(t, &RHO_W) + nested(t, &RHO_S) * s + nested(t, &RHO_S32) * s32 + RHO_S2 * s * s;
    let a = nested(t, &A_W) + nested(t, &A_S) * s + A_S32 * s32;
    let b = nested(t, &B_W) + nested(t, &B_S) * s;
    let k = nested(t, &K_W) + nested(t, &K_S) * s + nested(t, &K_S32) * s32 + (a + b * p) * p;
    at_surface / (1.0 - p / k)
}

/// The same from temperature in degC of the scale ITS-90.
pub fn eos80_density_kg_m3(practical_salinity: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    eos80_density_t68_kg_m3(practical_salinity, temperature_degc * T68_PER_T90, pressure_dbar)
}

/// Specific volume in m3/kg after EOS-80, from temperature in degC of the scale ITS-90; ranges as
/// [`eos80_density_t68_kg_m3`].
pub fn eos80_specific_volume_m3_kg(
    practical_salinity: f64,
    temperature_degc: f64,
    pressure_dbar: f64,
) -> f64 {
    eos80_density_kg_m3(practical_salinity, temperature_degc, pressure_dbar).recip()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// UNESCO 44 (1983), p. 19: density printed to five decimals (S, t68, p in bar, rho). Recalled from memory; the
    /// `seawater` library gives the same digits (`tests/reference/eos80.csv`).
    #[test]
    fn printed_check_values() {
        for (s, t68, bar, printed) in [
            (0.0, 5.0, 0.0, 999.966_75),
            (0.0, 5.0, 1000.0, 1_044.128_02),
            (0.0, 25.0, 0.0, 997.047_96),
            (0.0, 25.0, 1000.0, 1_037.902_04),
            (35.0, 5.0, 0.0, 1_027.675_47),
            (35.0, 5.0, 1000.0, 1_069.489_14),
            (35.0, 25.0, 0.0, 1_023.343_06),
            (35.0, 25.0, 1000.0, 1_062.538_17),
        ] {
            let rho = eos80_density_t68_kg_m3(s, t68, bar / BAR_PER_DBAR);
            assert!((rho - printed).abs() < 5.1e-6, "{s} {t68} {bar}: {rho} against {printed}");
        }
    }

    #[test]
    fn temperature_scales_differ() {
        let t90 = 20.0 / T68_PER_T90;
        assert_eq!(
            eos80_density_kg_m3(35.0, t90, 0.0),
            eos80_density_t68_kg_m3(35.0, t90 * T68_PER_T90, 0.0)
        );
    }
}
