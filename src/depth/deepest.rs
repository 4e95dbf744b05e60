//! The deepest point of a cast, as a running median that noise does not deepen.

use crate::cast::Cast;
use crate::cast::Leg;
use crate::cast::median;

/// The median runs over this many seconds at most.
pub const LONGEST_WINDOW_S: f64 = 600.0;
/// The median runs over this many samples at most; more would gain nothing.
const LONGEST_WINDOW: usize = 1_001;
/// Times the noise within which a reading belongs to the deepest plateau.
const PLATEAU_NOISE: f64 = 6.0;
/// Standard uncertainty in dbar of a single pressure whose noise the log cannot tell (common practice, no source).
pub const ASSUMED_NOISE_DBAR: f64 = 0.01;
/// Standard error of the median of many over that of the mean, for normal noise: sqrt(pi / 2).
const MEDIAN_OVER_MEAN: f64 = 1.253_314_137_315_500_3;

/// The deepest point in terms of pressure.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Deepest {
    /// Its sea pressure in dbar: the largest running median.
    pub pressure_dbar: f64,
    /// The sample in the middle of that median.
    pub sample: usize,
    /// Samples in the running median (1: the plateau is too short for any).
    pub window: usize,
    /// Largest single pressure in dbar that is not suspect.
    pub raw_pressure_dbar: f64,
    /// Its sample.
    pub raw_sample: usize,
    /// Standard uncertainty of the pressure through noise, in dbar.
    pub u_noise_dbar: f64,
    /// What the running median leaves of the noise of one reading, 0 to 1.
    pub noise_share: f64,
    /// Standard uncertainty in dbar through picking the largest of many, and through what the sampling missed.
    pub u_peak_dbar: f64,
}

impl Deepest {
    /// Finds the deepest point among the samples whose pressure is not suspect; `None` when there is none.
    ///
    /// The largest of many noisy readings is too deep. The deepest point is therefore the largest median of a window that
    /// runs along the samples: as wide as half the plateau around the largest reading, at most [`LONGEST_WINDOW_S`], and a
    /// single sample where there is no plateau. Of the medians the largest is picked again; how much that may deepen the
    /// result (the expected largest of as many independent medians as the plateau holds) is the uncertainty of the peak.
    pub fn find(cast: &Cast, elapsed_s: Option<&[f64]>) -> Option<Self> {
        let usable: Vec<usize> = cast
            .legs
            .water()
            .filter(|&i| cast.pressure_flag[i].usable() && cast.pressure_dbar[i].is_finite())
            .collect();
        let p: Vec<f64> = usable.iter().map(|&i| cast.pressure_dbar[i]).collect();
        let raw = (0..p.len()).max_by(|&a, &b| p[a].total_cmp(&p[b]).then(b.cmp(&a)))?;
        let noise = cast.noise.deviation_dbar;
        let plateau = plateau(&p, raw, PLATEAU_NOISE * noise.unwrap_or(0.0));
        let window = window(plateau.len(), elapsed_s.and_then(|t| interval_s(t, &usable)));

        let half = window / 2;
        let search = plateau.start.saturating_sub(half)..(plateau.end + half).min(p.len());
        let (offset, pressure_dbar) = largest_median(&p[search.clone()], window)?;
        let middle = search.start + offset;

        let deviation = noise.unwrap_or(ASSUMED_NOISE_DBAR);
        let of_median =
            if window > 1 { deviation * MEDIAN_OVER_MEAN / (window as f64).sqrt() } else { deviation };
        let windows = (plateau.len() as f64 / window as f64).max(1.0);
        let picked = of_median * expected_largest(windows);
        // Between two samples the vehicle may have been deeper than at either.
        let around =
            p[middle.saturating_sub(3)..(middle + 4).min(p.len())].windows(2).map(|w| (w[1] - w[0]).abs());
        let mut steps: Vec<f64> = around.collect();
        let step = median(&mut steps).unwrap_or(0.0);
        let missed = if window == 1 && step > 3.0 * deviation { step / 12f64.sqrt() } else { 0.0 };
        Some(Self {
            pressure_dbar,
            sample: usable[middle],
            window,
            raw_pressure_dbar: p[raw],
            raw_sample: usable[raw],
            // No median takes out what rounding put into every reading alike. The steps of an averaged log are no
            // rounding: the peak counts them.
            u_noise_dbar: match cast.noise.averaged_step_dbar {
                Some(_) => of_median,
                None => of_median.hypot(cast.noise.resolution_dbar / 12f64.sqrt()),
            },
            noise_share: of_median / deviation,
            u_peak_dbar: picked.hypot(missed),
        })
    }

    /// Seconds that the samples spent within `metres` of the deepest depth, by the function that gives a depth to a sea
    /// pressure; `None` without times.
    pub fn time_within_s(
        &self,
        cast: &Cast,
        elapsed_s: Option<&[f64]>,
        metres: f64,
        depth_m: impl Fn(f64) -> f64,
    ) -> Option<f64> {
        let elapsed_s = elapsed_s?;
        let deepest = depth_m(self.pressure_dbar);
        let near =
            |i: usize| cast.pressure_flag[i].usable() && deepest - depth_m(cast.pressure_dbar[i]) <= metres;
        let water = cast.legs.water();
        let seconds = water
            .clone()
            .skip(1)
            .filter(|&i| near(i) && near(i - 1) && cast.legs.of(i) != Leg::Deck)
            .map(|i| elapsed_s[i] - elapsed_s[i - 1])
            .filter(|dt| dt.is_finite() && *dt > 0.0)
            .sum();
        Some(seconds)
    }
}

/// The samples around `peak` that stay within `noise` of it, give or take single stragglers.
fn plateau(p: &[f64], peak: usize, noise: f64) -> std::ops::Range<usize> {
    let low = p[peak] - noise;
    let inside = |i: usize| p[i] >= low;
    let (mut start, mut end) = (peak, peak + 1);
    while start > 0 && (inside(start - 1) || (start > 1 && inside(start - 2))) {
        start -= 1;
    }
    while end < p.len() && (inside(end) || (end + 1 < p.len() && inside(end + 1))) {
        end += 1;
    }
    start..end
}

/// Width of the running median in samples, odd.
fn window(plateau: usize, interval_s: Option<f64>) -> usize {
    let longest = interval_s.map_or(LONGEST_WINDOW, |dt| (LONGEST_WINDOW_S / dt) as usize);
    let width = (plateau / 2).min(longest).min(LONGEST_WINDOW);
    if width < 3 { 1 } else { width - (1 - width % 2) }
}

/// Usual time between samples.
fn interval_s(elapsed_s: &[f64], usable: &[usize]) -> Option<f64> {
    let mut steps: Vec<f64> = usable
        .windows(2)
        .take(10_000)
        .map(|w| (elapsed_s[w[1]] - elapsed_s[w[0]]) / (w[1] - w[0]) as f64)
        .filter(|dt| dt.is_finite() && *dt > 0.0)
        .collect();
    median(&mut steps)
}

/// The largest median of `width` (odd) neighbouring values, with the index of its middle.
fn largest_median(p: &[f64], width: usize) -> Option<(usize, f64)> {
    if p.len() < width || width == 0 {
        return None;
    }
    // The window is kept sorted: one value leaves and one enters by binary search.
    let mut sorted = p[..width].to_vec();
    sorted.sort_by(f64::total_cmp);
    let mut best = (width / 2, sorted[width / 2]);
    let mut last = best.0;
    for leaving in 0..p.len() - width {
        let out = sorted.partition_point(|v| v.total_cmp(&p[leaving]).is_lt());
        sorted.remove(out);
        let entering = p[leaving + width];
        let at = sorted.partition_point(|v| v.total_cmp(&entering).is_lt());
        sorted.insert(at, entering);
        let here = leaving + 1 + width / 2;
        if sorted[width / 2] > best.1 {
            best = (here, sorted[width / 2]);
            last = here;
        } else if sorted[width / 2] == best.1 && here == last + 1 {
            last = here;
        }
    }
    // Where the largest median holds for a while (coarse readings at rest), the middle of that while.
    Some(((best.0 + last) / 2, best.1))
}

/// Expected largest of `n` normal values of unit deviation: `Phi^-1((n - 3/8) / (n + 1/4))` (Blom 1958), 0 for one.
fn expected_largest(n: f64) -> f64 {
    if n <= 1.0 { 0.0 } else { crate::statistics::normal_quantile((n - 0.375) / (n + 0.25)) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn largest_median_is_that_of_brute_force() {
        let p: Vec<f64> =
            (0..400_u32).map(|i| f64::from(i.wrapping_mul(2_654_435_761) % 1_000) / 7.0).collect();
        for width in [1, 3, 7, 51] {
            let brute = p
                .windows(width)
                .map(|w| {
                    let mut w = w.to_vec();
                    w.sort_by(f64::total_cmp);
                    w[width / 2]
                })
                .fold(f64::NEG_INFINITY, f64::max);
            let (middle, found) = largest_median(&p, width).unwrap();
            assert_eq!(found, brute);
            let mut around = p[middle - width / 2..=middle + width / 2].to_vec();
            around.sort_by(f64::total_cmp);
            assert_eq!(around[width / 2], brute);
        }
    }

    #[test]
    fn windows_fit_the_plateau() {
        assert_eq!(window(1, None), 1);
        assert_eq!(window(5, None), 1);
        assert_eq!(window(12, None), 5);
        assert_eq!(window(100_000, Some(1.0)), 599);
        assert_eq!(window(100_000, Some(0.1)), 1_001);
    }

    #[test]
    fn expected_largest_of_few() {
        // Exact: 1/sqrt(pi) for two, 1.162 96 for five, 1.538 75 for ten (Teichroew 1956, as recalled: from memory);
        // Blom's approximation is stated good to 2 %.
        for (n, exact) in [(2.0, 0.564_19), (5.0, 1.162_96), (10.0, 1.538_75)] {
            assert!((expected_largest(n) / exact - 1.0_f64).abs() < 0.05, "{n}");
        }
        assert_eq!(expected_largest(1.0), 0.0);
    }
}
