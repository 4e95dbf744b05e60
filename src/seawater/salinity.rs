//! Practical Salinity from conductivity.
//!
//! The Practical Salinity Scale 1978 (UNESCO Technical Papers in Marine Science 44, 1983, section 1),
//! and below `S_P = 2` the extension of Hill, Dauphinee and Woods (1986, IEEE J. Oceanic Eng. 11,
//! 109-112), scaled so that it joins the scale of 1978 at `S_P = 2` without a step.

use crate::constants::{CONDUCTIVITY_35_15_0_MS_CM, T68_PER_T90};

// Symbols and equation numbers of UNESCO 44, p. 6-9.
const A: [f64; 6] = [0.0080, -0.1692, 25.3851, 14.0941, -7.0261, 2.7081];
const B: [f64; 6] = [0.0005, -0.0056, -0.0066, -0.0375, 0.0636, -0.0144];
const K: f64 = 0.0162;
const C: [f64; 5] = [0.676_609_7, 2.005_64e-2, 1.104_259e-4, -6.969_8e-7, 1.003_1e-9];
const D: [f64; 4] = [3.426e-2, 4.464e-4, 4.215e-1, -3.107e-3];
const E: [f64; 3] = [2.070e-5, -6.370e-10, 3.989e-15];

/// `R_t` beyond which no conductivity is looked for: brine is saturated near 5.
const LARGEST_RATIO: f64 = 100.0;

/// Practical Salinity where the extension of Hill et al. takes over.
const HILL_BELOW: f64 = 2.0;

/// Practical Salinity from conductivity in mS/cm, temperature in degC (ITS-90) and sea pressure in
/// dbar.
///
/// `S_P = sum (a_i + f(t68) b_i) R_t^(i/2)`, `R_t = R / (R_p r_t)`, `R = C / 42.9140 mS/cm`,
/// `f = (t68 - 15) / (1 + k (t68 - 15))` (UNESCO 44, eqs. 1 to 5).
///
/// Valid for `2 <= S_P <= 42`, `-2 <= t <= 35 degC`, `0 <= p <= 10 000 dbar`, and down to `S_P = 0` by
/// the extension. A conductivity of zero or below gives 0. Agrees with the reference TEOS-10 library to
/// 1e-12 (test `seawater_reference`).
pub fn practical_salinity(conductivity_ms_cm: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    let t68 = temperature_degc * T68_PER_T90;
    let ratio = conductivity_ms_cm / CONDUCTIVITY_35_15_0_MS_CM;
    let p = pressure_dbar;
    let pressure_ratio = 1.0
        + p * (E[0] + p * (E[1] + p * E[2]))
            / (1.0 + t68 * (D[0] + t68 * D[1]) + (D[2] + t68 * D[3]) * ratio);
    let r_t = ratio / (pressure_ratio * temperature_ratio(t68));
    salinity_of_ratio(r_t, t68)
}

/// Practical Salinity from `R_t`, by the scale or its extension.
fn salinity_of_ratio(r_t: f64, t68: f64) -> f64 {
    if r_t.is_nan() {
        return f64::NAN;
    }
    if r_t <= 0.0 {
        return 0.0;
    }
    let salinity = scale_1978(r_t, t68);
    if salinity < HILL_BELOW { below_two(salinity, r_t, t68) } else { salinity }
}

/// Conductivity in mS/cm of water of a Practical Salinity, the inverse of [`practical_salinity`] over its whole range.
///
/// `R_t` is found by search (Practical Salinity rises with it); `R` follows from `R_t` in closed form, since `R_p` is a ratio
/// of two straight lines in `R` (UNESCO 44, eq. 4). Returns to the Practical Salinity within 1e-13 (test
/// `seawater_properties`); 0 for a salinity of zero or below, NaN for what is not
/// finite or has no answer.
pub fn conductivity_ms_cm(practical_salinity: f64, temperature_degc: f64, pressure_dbar: f64) -> f64 {
    if !(practical_salinity + temperature_degc + pressure_dbar).is_finite() {
        return f64::NAN;
    }
    if practical_salinity <= 0.0 {
        return 0.0;
    }
    let (t68, p) = (temperature_degc * T68_PER_T90, pressure_dbar);
    let at_surface = ratio_of_salinity(practical_salinity, t68) * temperature_ratio(t68);
    // R = q (1 + a / (b + d R)) with q = R_t r_t, solved for R without loss of digits.
    let a = p * (E[0] + p * (E[1] + p * E[2]));
    let b = 1.0 + t68 * (D[0] + t68 * D[1]);
    let d = D[2] + t68 * D[3];
    let half = 0.5 * (b - d * at_surface);
    let root = (half * half + d * at_surface * (a + b)).sqrt();
    let ratio = if half > 0.0 { at_surface * (a + b) / (half + root) } else { (root - half) / d };
    // A temperature that no sea has can turn the polynomials negative.
    if ratio > 0.0 { ratio * CONDUCTIVITY_35_15_0_MS_CM } else { f64::NAN }
}

/// `R_t` that gives a Practical Salinity above zero: the false position inside a bracket, an end that stays for the
/// second time being halved (the Illinois rule), which takes about eight steps.
fn ratio_of_salinity(practical_salinity: f64, t68: f64) -> f64 {
    let miss = |r_t: f64| salinity_of_ratio(r_t, t68) - practical_salinity;
    let (mut low, mut miss_low) = (0.0, -practical_salinity);
    let mut high = practical_salinity / 35.0 + 0.01;
    let mut miss_high = miss(high);
    while miss_high < 0.0 {
        if high > LARGEST_RATIO {
            return f64::NAN;
        }
        (low, miss_low) = (high, miss_high);
        high *= 2.0;
        miss_high = miss(high);
    }
    let (mut r_t, mut before, mut rose) = (high, f64::INFINITY, None);
    // The last digit is reached long before the count runs out.
    for _ in 0..100 {
        if (r_t - before).abs() <= f64::EPSILON * r_t {
            break;
        }
        before = r_t;
        r_t = (low * miss_high - high * miss_low) / (miss_high - miss_low);
        let here = miss(r_t);
        if here < 0.0 {
            (low, miss_low) = (r_t, here);
            if rose.replace(true) == Some(true) {
                miss_high *= 0.5;
            }
        } else if here > 0.0 {
            (high, miss_high) = (r_t, here);
            if rose.replace(false) == Some(false) {
                miss_low *= 0.5;
            }
        } else {
            break;
        }
    }
    r_t
}

/// `r_t = C(35, t, 0) / C(35, 15, 0)` (eq. 3).
fn temperature_ratio(t68: f64) -> f64 {
    C[0] + t68 * (C[1] + t68 * (C[2] + t68 * (C[3] + t68 * C[4])))
}

/// `f(t68)`, the temperature factor of eq. 5.
fn temperature_factor(t68: f64) -> f64 {
    (t68 - 15.0) / (1.0 + K * (t68 - 15.0))
}

/// The scale of 1978 (eqs. 1 and 5).
fn scale_1978(r_t: f64, t68: f64) -> f64 {
    let root = r_t.sqrt();
    let f = temperature_factor(t68);
    let mut sum = A[5] + f * B[5];
    for i in (0..5).rev() {
        sum = sum * root + (A[i] + f * B[i]);
    }
    sum
}

/// What Hill et al. (1986, eq. 2) take off the scale of 1978: `a_0 / (1 + 1.5 x + x^2) +
/// b_0 f / (1 + y^(1/2) + y + y^(3/2))` with `x = 400 R_t`, `y = 100 R_t`.
fn hill_reduction(r_t: f64, t68: f64) -> f64 {
    let x = 400.0 * r_t;
    let root_y = 10.0 * r_t.sqrt();
    A[0] / (1.0 + x * (1.5 + x))
        + B[0] * temperature_factor(t68) / (1.0 + root_y * (1.0 + root_y * (1.0 + root_y)))
}

/// The extension below 2. As published it misses the scale of 1978 at 2 by up to 1e-3; the factor that closes
/// the step depends on temperature alone.
fn below_two(salinity: f64, r_t: f64, t68: f64) -> f64 {
    let join = ratio_at_two(t68);
    let factor = HILL_BELOW / (HILL_BELOW - hill_reduction(join, t68));
    (factor * (salinity - hill_reduction(r_t, t68))).max(0.0)
}

/// `R_t` for which the scale of 1978 gives 2 at `t68`: Newton from the value at 15 degC, where the scale
/// is smooth and nearly straight.
fn ratio_at_two(t68: f64) -> f64 {
    let mut r_t = 0.07;
    for _ in 0..5 {
        let h = 1e-6;
        let slope = (scale_1978(r_t + h, t68) - scale_1978(r_t - h, t68)) / (2.0 * h);
        r_t -= (scale_1978(r_t, t68) - HILL_BELOW) / slope;
    }
    r_t
}

#[cfg(test)]
mod tests {
    use super::*;

    /// UNESCO 44 (1983), p. 9: check values printed for the scale of 1978 (R, t68, p, S).
    #[test]
    fn unesco_44_check_values() {
        for (ratio, t68, p, printed) in
            [(1.0, 15.0, 0.0, 35.000_000), (1.2, 20.0, 2_000.0, 37.245_628), (0.65, 5.0, 1_500.0, 27.995_347)]
        {
            let s = practical_salinity(ratio * CONDUCTIVITY_35_15_0_MS_CM, t68 / T68_PER_T90, p);
            // The coefficients sum to 35 only to 1e-7; the table prints six decimals.
            assert!((s - printed).abs() < 5.5e-7, "{ratio} {t68} {p}: {s} against {printed}");
        }
    }

    #[test]
    fn joins_at_two() {
        for t68 in [-2.0, 0.0, 15.0, 25.0, 35.0] {
            let r = ratio_at_two(t68);
            assert!((scale_1978(r, t68) - 2.0).abs() < 1e-12);
            assert!((below_two(2.0, r, t68) - 2.0).abs() < 1e-12);
        }
    }

    #[test]
    fn nothing_conducts_nothing() {
        assert_eq!(practical_salinity(0.0, 15.0, 0.0), 0.0);
        assert_eq!(practical_salinity(-0.1, 15.0, 0.0), 0.0);
        assert!(practical_salinity(f64::NAN, 15.0, 0.0).is_nan());
    }
}
