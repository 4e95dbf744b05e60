//! The published lists of coefficients of the Gibbs function, rearranged by the compiler into rows.
//!
//! A row holds, for one power of `x` and one power of `pi`, the coefficients of `tau^0, tau^1, ...` of one derivative, with the
//! factors of differentiation already in place. Rows end with their last coefficient: the lists are far from
//! rectangular, and half of a rectangle would be multiplication by zero.

use super::coefficients::{SALT, WATER};
use super::nested::{Real, nested, nested_in};
use crate::constants::CELSIUS_ZERO_K;

pub(super) const TEMPERATURE_SCALE_DEGC: f64 = 40.0;

/// What is made of `g_ijk x^i tau^j pi^k`.
#[derive(Clone, Copy)]
enum By {
    /// Itself.
    Nothing,
    /// `d/dpi`.
    Pressure,
    /// `-d/dtau`.
    Temperature,
    /// `-d2/dtau2`.
    TemperatureTwice,
}

/// The row of `x^i pi^k`, where `k` counts after differentiation; `i = 0` is the water.
///
/// Fails to compile when the row has coefficients beyond `N` or none at its end.
const fn row<const N: usize>(by: By, i: usize, k: usize) -> [f64; N] {
    let mut row = [0.0; N];
    let mut n = 0;
    let count = if i == 0 { WATER.len() } else { SALT.len() };
    while n < count {
        let (term_i, j, term_k, g) = if i == 0 {
            let (j, k, g) = WATER[n];
            (0, j, k, g)
        } else {
            SALT[n]
        };
        let (lost_j, lost_k, factor) = match by {
            By::Nothing => (0, 0, 1.0),
            By::Pressure => (0, 1, term_k as f64),
            By::Temperature => (1, 0, -(j as f64)),
            By::TemperatureTwice => (2, 0, -((j * j) as f64 - j as f64)),
        };
        if term_i == i && term_k == k + lost_k && j >= lost_j {
            assert!(j - lost_j < N, "a coefficient lies beyond the end of its row");
            row[j - lost_j] = factor * g;
        }
        n += 1;
    }
    assert!(row[N - 1] != 0.0, "the row is longer than its coefficients");
    row
}

/// The row of `x^i` of enthalpy at zero sea pressure, `h = g - (T_0 + t) dg/dt`:
/// `h_j = (1 - j) g_j - (j + 1) (T_0 / 40 degC) g_(j+1)`.
const fn enthalpy_row<const N: usize>(i: usize) -> [f64; N] {
    let g = row::<N>(By::Nothing, i, 0);
    let mut h = [0.0; N];
    let mut j = 0;
    while j < N {
        let next = if j + 1 < N { g[j + 1] } else { 0.0 };
        h[j] = (1.0 - j as f64) * g[j] - (j as f64 + 1.0) * (CELSIUS_ZERO_K / TEMPERATURE_SCALE_DEGC) * next;
        j += 1;
    }
    h
}

/// `level!(x, tau, by, k: 0: n, 2: n, ...)`: all that stands before `pi^k`, with `n` powers of `tau` before each `x^i`;
/// `i` runs from 2 without a gap, `i = 0` is the water.
macro_rules! level {
    ($x:ident, $tau:ident, $by:ident, $k:literal: 0: $water:literal) => {
        nested($tau, &const { row::<$water>(By::$by, 0, $k) })
    };
    ($x:ident, $tau:ident, $by:ident, $k:literal: 0: $water:literal, $($i:literal: $n:literal),+) => {
        nested($tau, &const { row::<$water>(By::$by, 0, $k) })
            + nested_in($x, [$(nested($tau, &const { row::<$n>(By::$by, $i, $k) })),+]) * ($x * $x)
    };
}

/// Coefficients of `pi^0, pi^1, ...` of `dg/dpi` in J/kg, from `x` and `tau`.
#[inline(always)]
pub(super) fn by_pressure<T: Real>(x: f64, tau: T) -> [T; 6] {
    [
        level!(x, tau, Pressure, 0: 0: 8, 2: 5, 3: 5, 4: 2, 5: 1),
        level!(x, tau, Pressure, 1: 0: 7, 2: 5, 3: 3, 4: 1),
        level!(x, tau, Pressure, 2: 0: 7, 2: 5, 3: 3, 4: 1),
        level!(x, tau, Pressure, 3: 0: 6, 2: 4, 3: 1),
        level!(x, tau, Pressure, 4: 0: 4, 2: 3),
        level!(x, tau, Pressure, 5: 0: 1),
    ]
}

/// Coefficients of `pi^0, pi^1, ...` of `-dg/dtau` in J/kg but for the term `x^2 ln x`, which depends on `x` alone.
#[inline(always)]
pub(super) fn by_temperature<T: Real>(x: f64, tau: T) -> [T; 6] {
    [
        by_temperature_at_surface(x, tau),
        level!(x, tau, Temperature, 1: 0: 7, 2: 4, 3: 4, 4: 1),
        level!(x, tau, Temperature, 2: 0: 6, 2: 4, 3: 2),
        level!(x, tau, Temperature, 3: 0: 6, 2: 4, 3: 2),
        level!(x, tau, Temperature, 4: 0: 5, 2: 3),
        level!(x, tau, Temperature, 5: 0: 3, 2: 2),
    ]
}

/// The first of the coefficients of [`by_temperature`]: all that is left at zero sea pressure.
#[inline(always)]
pub(super) fn by_temperature_at_surface<T: Real>(x: f64, tau: T) -> T {
    level!(x, tau, Temperature, 0: 0: 7, 2: 6, 3: 4, 4: 5, 5: 1, 6: 1)
}

/// Coefficients of `pi^0, pi^1, ...` of `-d2g/dtau2` in J/kg.
#[inline(always)]
pub(super) fn by_temperature_twice(x: f64, tau: f64) -> [f64; 6] {
    [
        level!(x, tau, TemperatureTwice, 0: 0: 6, 2: 5, 3: 3, 4: 4),
        level!(x, tau, TemperatureTwice, 1: 0: 6, 2: 3, 3: 3),
        level!(x, tau, TemperatureTwice, 2: 0: 5, 2: 3, 3: 1),
        level!(x, tau, TemperatureTwice, 3: 0: 5, 2: 3, 3: 1),
        level!(x, tau, TemperatureTwice, 4: 0: 4, 2: 2),
        level!(x, tau, TemperatureTwice, 5: 0: 2, 2: 1),
    ]
}

/// Enthalpy at zero sea pressure in J/kg. The coefficient of `x^2 ln x`, `g_100 - (T_0 / 40 degC) g_110`, is
/// zero (to 2e-12 J/kg): dilution at zero pressure takes no heat in the limit of no salt.
#[inline(always)]
pub(super) fn enthalpy_at_surface<T: Real>(x: f64, tau: T) -> T {
    nested(tau, &const { enthalpy_row::<8>(0) })
        + nested_in(
            x,
            [
                nested(tau, &const { enthalpy_row::<7>(2) }),
                nested(tau, &const { enthalpy_row::<5>(3) }),
                nested(tau, &const { enthalpy_row::<6>(4) }),
                nested(tau, &const { enthalpy_row::<2>(5) }),
                nested(tau, &const { enthalpy_row::<2>(6) }),
                nested(tau, &const { enthalpy_row::<1>(7) }),
            ],
        ) * (x * x)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// No coefficient is left out and none is taken twice: each sum, straight from the published lists.
    #[test]
    fn rows_hold_every_coefficient() {
        let (x, tau, pi): (f64, f64, f64) = (0.9, -0.3, 0.7);
        let (mut v, mut eta, mut heat, mut h) = (0.0, 0.0, 0.0, 0.0);
        let water = WATER.iter().map(|&(j, k, g)| (0, j, k, g));
        for (i, j, k, g) in water.chain(SALT.iter().copied().filter(|s| s.0 > 1)) {
            let (i, j, k) = (i as i32, j as i32, k as i32);
            let term = |j: i32, k: i32| g * x.powi(i) * tau.powi(j) * pi.powi(k);
            v += f64::from(k) * term(j, k - 1);
            eta -= f64::from(j) * term(j - 1, k);
            heat -= f64::from(j * (j - 1)) * term(j - 2, k);
            if k == 0 {
                let kelvin = CELSIUS_ZERO_K / TEMPERATURE_SCALE_DEGC + tau;
                h += term(j, 0) - kelvin * f64::from(j) * term(j - 1, 0);
            }
        }
        for (rows, sum) in [
            (nested_in(pi, by_pressure(x, tau)), v),
            (nested_in(pi, by_temperature(x, tau)), eta),
            (nested_in(pi, by_temperature_twice(x, tau)), heat),
            (enthalpy_at_surface(x, tau), h),
        ] {
            assert!((rows / sum - 1.0).abs() < 1e-13, "{rows} against {sum}");
        }
    }

    #[test]
    fn enthalpy_has_no_logarithm() {
        let log = |j: usize| SALT.iter().find(|s| (s.0, s.1, s.2) == (1, j, 0)).map_or(f64::NAN, |s| s.3);
        assert!((log(0) - CELSIUS_ZERO_K / TEMPERATURE_SCALE_DEGC * log(1)).abs() < 2e-12);
    }
}
