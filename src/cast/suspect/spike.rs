//! Single values far off their neighbours.

use crate::cast::blocks::median;
use std::ops::Range;

/// Pressures in dbar nearer than this to their neighbours are no spikes.
pub(super) const LEAST_PRESSURE_DBAR: f64 = 1.5;
/// The same for temperature in degC.
pub(super) const LEAST_TEMPERATURE_DEGC: f64 = 0.3;
/// The same for conductivity in mS/cm and for salinity.
pub(super) const LEAST_SALT: f64 = 0.3;

/// Times the usual distance that a spike must be away.
const TIMES: f64 = 12.0;
/// Samples on either side that tell what is usual.
const AROUND: usize = 15;

/// Samples of `range` whose distance from the median of their five neighbours (themselves included) is `least` or more and
/// many times what is usual around them.
///
/// A median of five leaves every rise, fall and step as it is, so that a sharp thermocline is no spike; one or two wild values
/// in a row are.
pub(super) fn find(values: &[f64], range: Range<usize>, least: f64) -> Vec<usize> {
    let v = values.get(range.clone()).unwrap_or(&[]);
    if v.len() < 5 {
        return Vec::new();
    }
    (0..v.len())
        .filter(|&i| v[i].is_finite())
        .filter(|&i| {
            // Three of five values within `least` of the middle one keep the median there: almost all samples are settled so.
            let near = |j: usize| (v[i] - v[j]).abs() < least;
            if i > 0 && i + 1 < v.len() && near(i - 1) && near(i + 1) {
                return false;
            }
            let off = distance(v, i);
            off >= least && off > TIMES * usual(v, i)
        })
        .map(|i| range.start + i)
        .collect()
}

/// Distance of value `i` from the median of itself and two neighbours on either side. Where one side has fewer (the ends, next
/// to missing values) a steady rise looks like a distance; there the straight line through the two nearest neighbours has a say
/// too.
fn distance(v: &[f64], i: usize) -> f64 {
    let before = || v[..i].iter().rev().copied().filter(|x| x.is_finite()).take(2);
    let after = || v[i + 1..].iter().copied().filter(|x| x.is_finite()).take(2);
    let mut window = [v[i]; 5];
    let mut count = 1;
    for x in before().chain(after()) {
        window[count] = x;
        count += 1;
    }
    let off = median(&mut window[..count]).map_or(0.0, |m| (v[i] - m).abs());
    if before().count() == after().count() {
        return off;
    }
    let off_line = |side: Vec<f64>| match side[..] {
        [near, far] => (v[i] - (2.0 * near - far)).abs(),
        _ => f64::INFINITY,
    };
    off.min(off_line(before().collect())).min(off_line(after().collect()))
}

fn usual(v: &[f64], i: usize) -> f64 {
    let (lo, hi) = (i.saturating_sub(AROUND), (i + AROUND + 1).min(v.len()));
    let mut distances: Vec<f64> = (lo..hi).filter(|&j| v[j].is_finite()).map(|j| distance(v, j)).collect();
    median(&mut distances).unwrap_or(0.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_single_wild_value_is_found() {
        let mut t: Vec<f64> =
            (0..200).map(|i| 20.0 - f64::from(i) * 0.05 + 0.002 * f64::from(i % 3)).collect();
        t[77] += 4.0;
        assert_eq!(find(&t, 0..200, LEAST_TEMPERATURE_DEGC), vec![77]);
        t[78] -= 6.0;
        assert_eq!(find(&t, 0..200, LEAST_TEMPERATURE_DEGC), vec![77, 78]);
    }

    #[test]
    fn a_sharp_thermocline_is_none() {
        let t: Vec<f64> = (0..200).map(|i| if i < 100 { 22.0 } else { 12.0 }).collect();
        assert_eq!(find(&t, 0..200, LEAST_TEMPERATURE_DEGC), Vec::<usize>::new());
    }

    #[test]
    fn the_ends_of_a_steady_rise_are_none_but_a_wild_end_is() {
        let mut p: Vec<f64> = (0..100).map(|i| f64::from(i) * 2.0).collect();
        p[50] = f64::NAN;
        assert_eq!(find(&p, 0..100, LEAST_PRESSURE_DBAR), Vec::<usize>::new());
        p[99] = 250.0;
        assert_eq!(find(&p, 0..100, LEAST_PRESSURE_DBAR), vec![99]);
    }

    #[test]
    fn swell_is_none() {
        let p: Vec<f64> = (0..600).map(|i| 6.0 + 1.5 * (f64::from(i) * 0.8).sin()).collect();
        assert_eq!(find(&p, 0..600, LEAST_PRESSURE_DBAR), Vec::<usize>::new());
    }
}
