//! The polynomial for specific volume in Conservative Temperature.

use super::coefficients::POLYNOMIAL;
use super::nested::{nested, nested_in};
use crate::constants::STANDARD_ABSOLUTE_SALINITY_G_KG;

/// Added to Absolute Salinity, in g/kg, so that the square root has no edge at fresh water.
const SALINITY_OFFSET_G_KG: f64 = 24.0;
const SALINITY_SCALE_G_KG: f64 = STANDARD_ABSOLUTE_SALINITY_G_KG * 40.0 / 35.0;
const TEMPERATURE_SCALE_DEGC: f64 = 40.0;
const PRESSURE_SCALE_DBAR: f64 = 1.0e4;

/// The coefficients of `s^0, s^1, ...` before `y^j z^k`. Fails to compile when there are not `N` of them.
const fn row<const N: usize>(j: usize, k: usize) -> [f64; N] {
    let mut row = [0.0; N];
    let mut n = 0;
    while n < POLYNOMIAL.len() {
        let (i, term_j, term_k, v) = POLYNOMIAL[n];
        if term_j == j && term_k == k {
            assert!(i < N, "a coefficient lies beyond the end of its row");
            row[i] = v;
        }
        n += 1;
    }
    assert!(row[N - 1] != 0.0, "the row is longer than its coefficients");
    row
}

/// `level!(s, y, k: j: n, ...)`: what stands before `z^k`, with `n` powers of `s` before each `y^j`.
macro_rules! level {
    ($s:ident, $y:ident, $k:literal: $($j:literal: $n:literal),+) => {
        nested_in($y, [$(nested($s, &const { row::<$n>($j, $k) })),+])
    };
}

/// Specific volume in m3/kg from Absolute Salinity, Conservative Temperature in degC and sea pressure:
/// `v = sum v_ijk s^i y^j z^k`, `s = sqrt((S_A + 24 g/kg) / S_u)`, `y = CT / 40 degC`, `z = p / 1e4 dbar`,
/// `S_u = 40/35 x 35.165 04 g/kg` (Roquet et al. 2015, Ocean Modelling 90, 29-43; TEOS-10 manual, appendix K).
///
/// Made for the water that oceans have, 0 to 42 g/kg and down to 8 000 dbar; agrees with the reference TEOS-10 library to
/// 1e-15 relative up to 11 500 dbar (test `equation_of_state`).
pub fn polynomial_specific_volume_m3_kg(
    absolute_salinity_g_kg: f64,
    conservative_temperature_degc: f64,
    pressure_dbar: f64,
) -> f64 {
    let s = ((absolute_salinity_g_kg.max(0.0) + SALINITY_OFFSET_G_KG) / SALINITY_SCALE_G_KG).sqrt();
    let y = conservative_temperature_degc / TEMPERATURE_SCALE_DEGC;
    let z = pressure_dbar / PRESSURE_SCALE_DBAR;
    nested_in(
        z,
        [
            level!(s, y, 0: 0: 7, 1: 6, 2: 5, 3: 4, 4: 3, 5: 2, 6: 1),
            level!(s, y, 1: 0: 6, 1: 5, 2: 4, 3: 3, 4: 2, 5: 1),
            level!(s, y, 2: 0: 5, 1: 4, 2: 3, 3: 2, 4: 1),
            level!(s, y, 3: 0: 3, 1: 2, 2: 1),
            level!(s, y, 4: 0: 2, 1: 1),
            level!(s, y, 5: 0: 1),
            level!(s, y, 6: 0: 1),
        ],
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The list is the one that was recovered, digit for digit.
    #[test]
    fn coefficients_are_those_recovered() {
        let table = include_str!("../../tests/reference/polynomial_coefficients.csv");
        let mut rows = table.lines().filter(|l| l.starts_with(|c: char| c.is_ascii_digit()));
        for (i, j, k, v) in POLYNOMIAL {
            let row = rows.next().unwrap();
            assert!(row.starts_with(&format!("{i},{j},{k},")), "{row}");
            assert_eq!(row.split(',').nth(3).unwrap().parse::<f64>().unwrap(), v, "{row}");
        }
        assert_eq!(rows.next(), None);
    }
}
