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
//! The published lists of coefficients are rearranged by the compiler into one array per derivative,
//! with the factors of differentiation already in place, so that an evaluation is nested
//! multiplication and nothing else.

use super::coefficients::{SALT, WATER};
use super::dual::{Dual, Real};
use crate::constants::{CELSIUS_ZERO_K, PA_PER_DBAR, STANDARD_ABSOLUTE_SALINITY_G_KG};

/// Largest sea pressure in dbar for which IAPWS-08 and IAPWS-09 are stated (100 MPa).
pub const VALID_TO_DBAR: f64 = 1.0e4;

const SALINITY_SCALE_G_KG: f64 = STANDARD_ABSOLUTE_SALINITY_G_KG * 40.0 / 35.0;
const TEMPERATURE_SCALE_DEGC: f64 = 40.0;
const PRESSURE_SCALE_DBAR: f64 = 1.0e4;
const PRESSURE_SCALE_PA: f64 = PRESSURE_SCALE_DBAR * PA_PER_DBAR;

/// `k g_jk` at `[k - 1][j]`: the water part of `dg/dpi`.
const VOLUME_WATER: [[f64; 8]; 6] = {
    let mut table = [[0.0; 8]; 6];
    let mut n = 0;
    while n < WATER.len() {
        let (j, k, g) = WATER[n];
        if k > 0 {
            table[k - 1][j] = k as f64 * g;
        }
        n += 1;
    }
    table
};

/// `k g_ijk` at `[k - 1][j][i - 2]`: the salt part of `dg/dpi`, over `x^2`.
const VOLUME_SALT: [[[f64; 4]; 5]; 5] = {
    let mut table = [[[0.0; 4]; 5]; 5];
    let mut n = 0;
    while n < SALT.len() {
        let (i, j, k, g) = SALT[n];
        if k > 0 {
            table[k - 1][j][i - 2] = k as f64 * g;
        }
        n += 1;
    }
    table
};

/// `j g_jk` at `[k][j - 1]`: the water part of `dg/dtau`.
const ENTROPY_WATER: [[f64; 7]; 7] = {
    let mut table = [[0.0; 7]; 7];
    let mut n = 0;
    while n < WATER.len() {
        let (j, k, g) = WATER[n];
        if j > 0 {
            table[k][j - 1] = j as f64 * g;
        }
        n += 1;
    }
    table
};

/// `j g_ijk` at `[k][j - 1][i - 2]`: the salt part of `dg/dtau` over `x^2`, but for `i = 1`.
const ENTROPY_SALT: [[[f64; 6]; 6]; 6] = {
    let mut table = [[[0.0; 6]; 6]; 6];
    let mut n = 0;
    while n < SALT.len() {
        let (i, j, k, g) = SALT[n];
        if j > 0 && i > 1 {
            table[k][j - 1][i - 2] = j as f64 * g;
        }
        n += 1;
    }
    table
};

/// `g_110`, which stands before `x^2 ln x tau`.
const ENTROPY_LOG: f64 = {
    let mut n = 0;
    loop {
        let (i, j, k, g) = SALT[n];
        if i == 1 && j == 1 && k == 0 {
            break g;
        }
        n += 1;
    }
};

#[inline(always)]
fn nested<T: Real, const N: usize>(x: T, coefficients: &[f64; N]) -> T {
    let mut sum = T::constant(coefficients[N - 1]);
    for n in (0..N - 1).rev() {
        sum = sum * x + T::constant(coefficients[n]);
    }
    sum
}

/// `dg/dpi` in J/kg, from `x`, `tau` and `pi`.
#[inline(always)]
fn volume<T: Real>(x: f64, tau: T, pi: T) -> T {
    let mut sum = nested(tau, &VOLUME_WATER[5]);
    for k in (0..5).rev() {
        // x does not depend on t or p: the powers of x are summed as plain numbers.
        let mut salt = [0.0; 5];
        for j in 0..5 {
            salt[j] = x * x * nested(x, &VOLUME_SALT[k][j]);
        }
        sum = sum * pi + nested(tau, &VOLUME_WATER[k]) + nested(tau, &salt);
    }
    sum
}

/// `-dg/dtau` in J/kg, from `x`, `tau` and `pi`.
#[inline(always)]
fn entropy<T: Real>(x: f64, tau: T, pi: T) -> T {
    let mut sum = nested(tau, &ENTROPY_WATER[6]);
    for k in (0..6).rev() {
        let mut salt = [0.0; 6];
        for j in 0..6 {
            salt[j] = x * x * nested(x, &ENTROPY_SALT[k][j]);
        }
        if k == 0 && x > 0.0 {
            salt[0] += x * x * x.ln() * ENTROPY_LOG;
        }
        sum = sum * pi + nested(tau, &ENTROPY_WATER[k]) + nested(tau, &salt);
    }
    sum * T::constant(-1.0)
}

/// `(x, tau, pi)`; a salinity below zero (noise in fresh water or air) counts as none.
#[inline(always)]
fn scaled(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> (f64, f64, f64) {
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
pub fn specific_volume_m3_kg(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    let (x, tau, pi) = scaled(absolute_salinity_g_kg, temperature_degc, pressure_dbar);
    volume(x, tau, pi) / PRESSURE_SCALE_PA
}

/// Density in kg/m3: `rho = 1 / v` (TEOS-10 manual, eq. 2.8.1). Ranges as [`specific_volume_m3_kg`].
pub fn density_kg_m3(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    specific_volume_m3_kg(absolute_salinity_g_kg, temperature_degc, pressure_dbar).recip()
}

/// Specific entropy in J/(kg K): `eta = -dg/dt` (TEOS-10 manual, eq. 2.10.1).
pub fn entropy_j_kg_k(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    let (x, tau, pi) = scaled(absolute_salinity_g_kg, temperature_degc, pressure_dbar);
    entropy(x, tau, pi) / TEMPERATURE_SCALE_DEGC
}

/// Speed of sound in m/s: `c = v sqrt(g_tt / (g_tp^2 - g_tt g_pp)) ` (TEOS-10 manual, eq. 2.17.1).
pub fn sound_speed_m_s(absolute_salinity_g_kg: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    let (x, tau, pi) = scaled(absolute_salinity_g_kg, temperature_degc, pressure_dbar);
    let along_p = volume(x, Dual::constant(tau), Dual::variable(pi, PRESSURE_SCALE_PA.recip()));
    let along_t = volume(x, Dual::variable(tau, TEMPERATURE_SCALE_DEGC.recip()), Dual::constant(pi));
    let eta = entropy(x, Dual::variable(tau, TEMPERATURE_SCALE_DEGC.recip()), Dual::constant(pi));
    let g_p = along_p.value / PRESSURE_SCALE_PA;
    let g_pp = along_p.slope / PRESSURE_SCALE_PA;
    let g_tp = along_t.slope / PRESSURE_SCALE_PA;
    let g_tt = -eta.slope / TEMPERATURE_SCALE_DEGC;
    g_p * (g_tt / (g_tp * g_tp - g_tt * g_pp)).sqrt()
}

/// In-situ temperature in degC at `pressure_dbar` of water that has `potential_temperature_degc` at zero
/// sea pressure: the temperature of equal entropy (TEOS-10 manual, section 3.1).
pub fn in_situ_temperature_degc(
    absolute_salinity_g_kg: f64,
    potential_temperature_degc: f64,
    pressure_dbar: f64,
) -> f64 {
    moved_temperature_degc(absolute_salinity_g_kg, potential_temperature_degc, 0.0, pressure_dbar)
}

/// Potential temperature in degC at zero sea pressure of water with `temperature_degc` at
/// `pressure_dbar` (TEOS-10 manual, eq. 3.1.3).
pub fn potential_temperature_degc(
    absolute_salinity_g_kg: f64,
    temperature_degc: f64,
    pressure_dbar: f64,
) -> f64 {
    moved_temperature_degc(absolute_salinity_g_kg, temperature_degc, pressure_dbar, 0.0)
}

/// Temperature after moving water from one pressure to another without exchange of heat or salt.
fn moved_temperature_degc(absolute_salinity_g_kg: f64, from_degc: f64, from_dbar: f64, to_dbar: f64) -> f64 {
    let target = entropy_j_kg_k(absolute_salinity_g_kg, from_degc, from_dbar);
    let mut degc = from_degc;
    // Newton on a nearly straight function of t: three steps reach the last digits from anywhere in
    // the range of validity (test `potential_temperature_returns`).
    for _ in 0..4 {
        let (x, tau, pi) = scaled(absolute_salinity_g_kg, degc, to_dbar);
        let eta = entropy(x, Dual::variable(tau, TEMPERATURE_SCALE_DEGC.recip()), Dual::constant(pi));
        degc -= (eta.value / TEMPERATURE_SCALE_DEGC - target) / (eta.slope / TEMPERATURE_SCALE_DEGC);
    }
    degc.max(-CELSIUS_ZERO_K)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn potential_temperature_returns() {
        for &s in &[0.0, 5.0, 35.0, 42.0] {
            for &t in &[-2.0, 0.0, 10.0, 40.0] {
                for &p in &[0.0, 500.0, 5_000.0, 11_500.0] {
                    let theta = potential_temperature_degc(s, t, p);
                    assert!((in_situ_temperature_degc(s, theta, p) - t).abs() < 1e-10, "{s} {t} {p}");
                }
            }
        }
    }

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
