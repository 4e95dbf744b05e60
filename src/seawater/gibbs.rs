//! The Gibbs function of seawater: IAPWS-09 for the water, IAPWS-08 for the salt.
//!
//! `g(S_A, t, p) = g_w(t, p) + g_s(S_A, t, p)` with, in J/kg,
//!
//! `g_w = sum g_jk tau^j pi^k`,
//! `g_s = sum (g_1jk x^2 ln x + sum_{i>1} g_ijk x^i) tau^j pi^k`,
//!
//! `x = sqrt(S_A / S_u)`, `tau = t / 40 degC`, `pi = p / 1e4 dbar`, `S_u = 40/35 x 35.165 04 g/kg`
//! (IAPWS SR7-09, eq. 1; IAPWS R13-08, eq. 4; TEOS-10 manual, appendices G and H).
//!
//! Valid for `0 <= S_A <= 42 g/kg`, `-6 <= t <= 40 degC`, `0 <= p <= 10 000 dbar`; the trenches below
//! are reached by extrapolation (see [`VALID_TO_DBAR`]).
//!
//! Each derivative is nested multiplication over rows that the compiler arranges from the published lists (`rows.rs`).

use super::coefficients::SALT;
use super::nested::{Dual, nested_in, nested_slope};
use super::rows::{TEMPERATURE_SCALE_DEGC, by_pressure, by_temperature, by_temperature_twice};
use crate::constants::{PA_PER_DBAR, STANDARD_ABSOLUTE_SALINITY_G_KG};

/// Largest sea pressure in dbar for which IAPWS-08 and IAPWS-09 are stated (100 MPa).
pub const VALID_TO_DBAR: f64 = 1.0e4;

const SALINITY_SCALE_G_KG: f64 = STANDARD_ABSOLUTE_SALINITY_G_KG * 40.0 / 35.0;
const PRESSURE_SCALE_DBAR: f64 = 1.0e4;
const PRESSURE_SCALE_PA: f64 = PRESSURE_SCALE_DBAR * PA_PER_DBAR;

/// `-g_110`, which stands before `x^2 ln x` in entropy.
const ENTROPY_LOG: f64 = {
    let mut n = 0;
    loop {
        let (i, j, k, g) = SALT[n];
        if i == 1 && j == 1 && k == 0 {
            break -g;
        }
        n += 1;
    }
};

/// `(x, tau, pi)`; a salinity below zero (noise in fresh water or air) counts as none.
#[inline(always)]
pub(super) fn scaled(
    absolute_salinity_g_kg: f64,
    temperature_degc: f64,
    pressure_dbar: f64,
) -> (f64, f64, f64) {
    (
        (absolute_salinity_g_kg.max(0.0) / SALINITY_SCALE_G_KG).sqrt(),
        temperature_degc / TEMPERATURE_SCALE_DEGC,
        pressure_dbar / PRESSURE_SCALE_DBAR,
    )
}

/// Specific volume in m3/kg: `v = dg/dp` (TEOS-10 manual, eq. 2.7.1).
///
/// `absolute_salinity_g_kg` 0 to 42, `temperature_degc` -6 to 40, `pressure_dbar` 0 to
/// [`VALID_TO_DBAR`]; agrees with the reference TEOS-10 library to 1e-6 kg/m3 in density up to
/// 11 500 dbar (test `seawater_reference`).
#[inline]
pub fn specific_volume_m3_kg(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    let (x, tau, pi) = scaled(absolute_salinity_g_kg, temperature_degc, pressure_dbar);
    nested_in(pi, by_pressure(x, tau)) / PRESSURE_SCALE_PA
}

/// Density in kg/m3: `rho = 1 / v` (TEOS-10 manual, eq. 2.8.1). Ranges as [`specific_volume_m3_kg`].
pub fn density_kg_m3(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    specific_volume_m3_kg(absolute_salinity_g_kg, temperature_degc, pressure_dbar).recip()
}

/// Specific entropy in J/(kg K): `eta = -dg/dt` (TEOS-10 manual, eq. 2.10.1).
pub fn entropy_j_kg_k(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    let (x, tau, pi) = scaled(absolute_salinity_g_kg, temperature_degc, pressure_dbar);
    let logarithm = if x > 0.0 { x * x * x.ln() * ENTROPY_LOG } else { 0.0 };
    (nested_in(pi, by_temperature(x, tau)) + logarithm) / TEMPERATURE_SCALE_DEGC
}

/// Speed of sound in m/s: `c = v sqrt(g_tt / (g_tp^2 - g_tt g_pp))` (TEOS-10 manual, eq. 2.17.1). Ranges as
/// [`specific_volume_m3_kg`]; agrees with the reference TEOS-10 library to 1e-8 m/s (test `seawater_reference`).
#[inline]
pub fn sound_speed_m_s(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    let (x, tau, pi) = scaled(absolute_salinity_g_kg, temperature_degc, pressure_dbar);
    let rows = by_pressure(x, Dual::variable(tau));
    let of_pressure = rows.map(|row| row.value);
    // Derivatives with respect to tau and pi; all scales cancel.
    let g_p = nested_in(pi, of_pressure);
    let g_pp = nested_slope(pi, of_pressure);
    let g_tp = nested_in(pi, rows.map(|row| row.slope));
    let g_tt = -nested_in(pi, by_temperature_twice(x, tau));
    g_p * (g_tt / (g_tp * g_tp - g_tt * g_pp)).sqrt()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn derivatives_are_those_of_one_function() {
        // Maxwell's relation: d(eta)/dp = -dv/dt, both routes being written separately.
        for &(s, t, p) in &[(0.0, 3.0, 20.0), (35.0, 2.0, 8_000.0), (20.0, 25.0, 300.0), (0.3, -1.0, 4_000.0)]
        {
            let h = 5.0;
            let deta_dp =
                (entropy_j_kg_k(s, t, p + h) - entropy_j_kg_k(s, t, p - h)) / (2.0 * h * PA_PER_DBAR);
            let e = 0.01;
            let dv_dt = (specific_volume_m3_kg(s, t + e, p) - specific_volume_m3_kg(s, t - e, p)) / (2.0 * e);
            assert!((deta_dp + dv_dt).abs() < 2e-6 * dv_dt.abs() + 1e-13, "{s} {t} {p}: {deta_dp} {dv_dt}");
        }
    }
}
