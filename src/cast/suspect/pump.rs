//! Conductivity while no water passes the cell.

use crate::cast::blocks::median;
use crate::log::Flag;
use std::ops::Range;

/// Steps of salinity smaller than this are the sea's.
const LEAST_STEP: f64 = 0.5;
/// Times the usual change from sample to sample that a step must be.
const TIMES: f64 = 20.0;
/// Samples within which a step is taken.
const WITHIN: usize = 3;
/// Pressure in dbar between neighbouring samples beyond which a step cannot be told from a gradient.
const COARSEST_DBAR: f64 = 5.0;
/// Above this pressure in dbar rivers, rain and bubbles make steps of their own.
const BELOW_DBAR: f64 = 10.0;
/// Samples looked at, in times the samples of the leg.
const PATIENCE: usize = 20;
/// How much of the step may be left when the salinity has come back.
const LEFT_SHARE: f64 = 0.35;

/// Samples of a leg between a sudden step of salinity and the equally sudden step back.
///
/// A stratified sea makes a step in one direction; an instrument whose pump stops makes one away and, when it runs again, one
/// back to where the water had been.
pub(super) fn find(salinity: &[f64], pressure: &[f64], flag: &[Flag], leg: Range<usize>) -> Vec<usize> {
    let usable: Vec<usize> =
        leg.filter(|&i| flag[i].usable() && salinity[i].is_finite() && pressure[i] > BELOW_DBAR).collect();
    if usable.len() < 4 * WITHIN {
        return Vec::new();
    }
    let mut strides: Vec<f64> = usable.windows(2).map(|w| (pressure[w[1]] - pressure[w[0]]).abs()).collect();
    if median(&mut strides).is_none_or(|stride| stride > COARSEST_DBAR) {
        return Vec::new();
    }
    let s: Vec<f64> = usable.iter().map(|&i| salinity[i]).collect();
    let mut changes: Vec<f64> = s.windows(2).map(|w| (w[1] - w[0]).abs()).collect();
    let least = LEAST_STEP.max(TIMES * median(&mut changes).unwrap_or(0.0));

    let mut found = Vec::new();
    // A log of steps that never come back would be searched to its end from each of them.
    let mut patience = PATIENCE * s.len();
    let mut i = 0;
    while i + WITHIN < s.len() {
        let step = s[i + WITHIN] - s[i];
        if step.abs() < least {
            i += 1;
            continue;
        }
        // The step may begin later than i: it starts at the largest single change.
        let away = (i + 1..=i + WITHIN)
            .max_by(|&a, &b| (s[a] - s[a - 1]).abs().total_cmp(&(s[b] - s[b - 1]).abs()))
            .unwrap_or(i + 1);
        let before = s[away - 1];
        let reach = (away + 1 + patience).min(s.len());
        let back = (away + 1..reach).find(|&j| {
            let from = j.saturating_sub(WITHIN).max(away);
            (s[j] - before).abs() < LEFT_SHARE * step.abs() && (s[j] - s[from]).abs() > 0.5 * step.abs()
        });
        patience -= back.unwrap_or(reach) - (away + 1).min(reach);
        match back {
            Some(back) => {
                found.extend_from_slice(&usable[away..back]);
                i = back;
            }
            None => i = away,
        }
    }
    found
}

#[cfg(test)]
mod tests {
    use super::*;

    fn stretch(salinity: &[f64]) -> Vec<usize> {
        let p: Vec<f64> = (0..salinity.len()).map(|i| 20.0 + i as f64).collect();
        find(salinity, &p, &vec![Flag::Good; p.len()], 0..p.len())
    }

    fn sea(n: u32) -> Vec<f64> {
        (0..n).map(|i| 34.6 + 0.5 * (-f64::from(i) / 200.0).exp() + 0.001 * f64::from(i % 3)).collect()
    }

    #[test]
    fn a_stretch_of_low_conductivity_is_found() {
        let mut s = sea(800);
        for (k, i) in (300..480).enumerate() {
            s[i] -= 3.0 - 0.004 * k as f64;
        }
        assert_eq!(stretch(&s), (300..480).collect::<Vec<_>>());
    }

    #[test]
    fn a_halocline_is_none() {
        let s: Vec<f64> = (0..400).map(|i| if i < 100 { 7.0 } else { 12.0 }).collect();
        assert!(stretch(&s).is_empty());
        assert!(stretch(&sea(800)).is_empty());
    }

    #[test]
    fn a_lens_with_soft_edges_is_none() {
        let s: Vec<f64> =
            (0..600).map(|i| 35.0 + 1.2 * (-((f64::from(i) - 300.0) / 60.0).powi(2)).exp()).collect();
        assert!(stretch(&s).is_empty());
    }
}
