//! Values that repeat while the instrument moves.

use crate::cast::blocks::{median, resolution};
use std::ops::Range;

/// When a repeated value is stuck and not merely rounded.
pub(super) struct Limits {
    /// Pressure in dbar that must go by.
    travel_dbar: f64,
    /// Least change with pressure, per dbar, that water shows through compression alone.
    change_per_dbar: f64,
}

/// In-situ temperature of mixed deep water rises by about 1e-4 degC per dbar (TEOS-10 adiabatic lapse rate: 3.5e-5 at the
/// surface to 1.5e-4 in the trenches).
pub(super) const TEMPERATURE: Limits = Limits { travel_dbar: 50.0, change_per_dbar: 1.0e-4 };
/// Conductivity of seawater rises with pressure by 4e-4 mS/cm per dbar or more (PSS-78).
pub(super) const CONDUCTIVITY: Limits = Limits { travel_dbar: 30.0, change_per_dbar: 4.0e-4 };

/// Repeats of one value, fewer of which are chance.
const FEWEST: usize = 8;
/// Times the resolution that water must have changed by, where the value did not.
const STEPS: f64 = 10.0;

/// Samples of runs of one repeated value during which more pressure went by than rounding explains.
pub(super) fn find(values: &[f64], pressure: &[f64], range: Range<usize>, limits: &Limits) -> Vec<usize> {
    let rounding = STEPS * resolution(&values[range.clone()]) / limits.change_per_dbar;
    let samples = range.len();
    runs(values, range)
        .filter(|run| {
            // One value through most of the cast tells nothing of its last decimal, and is stuck whatever that is.
            let most = 2 * run.len() > samples;
            let travel = if most { limits.travel_dbar } else { limits.travel_dbar.max(rounding) };
            let finite = || pressure[run.clone()].iter().copied().filter(|p| p.is_finite());
            let low = finite().fold(f64::INFINITY, f64::min);
            let high = finite().fold(f64::NEG_INFINITY, f64::max);
            high - low > travel
        })
        .flatten()
        .collect()
}

/// Samples of runs of one pressure after which it jumps, as it would when it had been standing still on the way.
pub(super) fn find_pressure(pressure: &[f64], range: Range<usize>) -> Vec<usize> {
    let mut steps: Vec<f64> = pressure[range.clone()]
        .windows(2)
        .map(|w| (w[1] - w[0]).abs())
        .filter(|d| d.is_finite() && *d > 0.0)
        .collect();
    let Some(usual) = median(&mut steps) else { return Vec::new() };
    runs(pressure, range.clone())
        .filter(|run| {
            let next = pressure.get(run.end).copied().filter(|_| run.end < range.end);
            let jump = next.map_or(0.0, |next| (next - pressure[run.start]).abs());
            jump > 1.0 && jump > 0.5 * usual * run.len() as f64
        })
        // The first of them was read while the sensor still moved.
        .flat_map(|run| run.skip(1))
        .collect()
}

fn runs(values: &[f64], range: Range<usize>) -> impl Iterator<Item = Range<usize>> {
    let mut start = range.start;
    std::iter::from_fn(move || {
        while start < range.end {
            let from = start;
            let mut end = from + 1;
            while end < range.end && values[end] == values[from] {
                end += 1;
            }
            start = end;
            if end - from >= FEWEST {
                return Some(from..end);
            }
        }
        None
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn temperature_that_stands_still_is_found() {
        let p: Vec<f64> = (0..2000).map(f64::from).collect();
        let mut t: Vec<f64> = p.iter().map(|p| ((20.0 - p * 0.005_17) * 1e4).round() / 1e4).collect();
        assert!(find(&t, &p, 0..2000, &TEMPERATURE).is_empty());
        let value = t[700];
        t[700..800].fill(value);
        assert_eq!(find(&t, &p, 0..2000, &TEMPERATURE), (700..800).collect::<Vec<_>>());
    }

    #[test]
    fn a_round_value_all_along_is_stuck() {
        let p: Vec<f64> = (0..900).map(f64::from).collect();
        assert_eq!(find(&[40.0; 900], &p, 0..900, &CONDUCTIVITY).len(), 900);
    }

    #[test]
    fn a_coarse_thermometer_in_deep_water_is_not_stuck() {
        let p: Vec<f64> = (0..4000).map(f64::from).collect();
        let t: Vec<f64> = p.iter().map(|p| ((1.5 + p * 1.2e-4) * 1e2).round() / 1e2).collect();
        assert!(find(&t, &p, 0..4000, &TEMPERATURE).is_empty());
    }

    #[test]
    fn pressure_that_freezes_and_jumps_is_found() {
        let mut p: Vec<f64> = (0..500).map(|i| f64::from(i) * 0.9).collect();
        let value = p[200];
        p[200..240].fill(value);
        assert_eq!(find_pressure(&p, 0..500), (201..240).collect::<Vec<_>>());
    }

    #[test]
    fn pressure_at_rest_is_not_stuck() {
        let mut p: Vec<f64> = (0..500).map(|i| f64::from(i) * 0.9).collect();
        p.extend(std::iter::repeat_n(450.0, 300));
        p.extend((0..500).rev().map(|i| f64::from(i) * 0.9));
        assert!(find_pressure(&p, 0..1300).is_empty());
    }
}
