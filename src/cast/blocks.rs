//! Medians of short stretches of a log: what legs and deck are told from.

/// Blocks at most, whatever the length of the log.
const MOST: usize = 4_000;

/// Medians over consecutive blocks of `size` samples; NaN where a block has no value.
pub(super) struct Blocks {
    pub size: usize,
    pub pressure: Vec<f64>,
    /// Conductivity or salinity, when the log has one.
    pub salt: Option<Vec<f64>>,
}

impl Blocks {
    pub fn new(pressure: &[f64], salt: Option<&[f64]>) -> Self {
        let size = pressure.len().div_ceil(MOST).max(1);
        Self { size, pressure: medians(pressure, size), salt: salt.map(|s| medians(s, size)) }
    }

    pub fn len(&self) -> usize {
        self.pressure.len()
    }

    /// Smallest and largest block pressure.
    pub fn range(&self) -> (f64, f64) {
        let finite = || self.pressure.iter().copied().filter(|p| p.is_finite());
        (finite().fold(f64::INFINITY, f64::min), finite().fold(f64::NEG_INFINITY, f64::max))
    }
}

fn medians(values: &[f64], size: usize) -> Vec<f64> {
    let mut scratch = Vec::with_capacity(size);
    values
        .chunks(size)
        .map(|chunk| {
            scratch.clear();
            scratch.extend(chunk.iter().copied().filter(|v| v.is_finite()));
            median(&mut scratch).unwrap_or(f64::NAN)
        })
        .collect()
}

/// The median of finite `values`, which it puts in another order; `None` when there are none.
pub(crate) fn median(values: &mut [f64]) -> Option<f64> {
    if values.is_empty() {
        return None;
    }
    let (middle, odd) = (values.len() / 2, values.len() % 2 == 1);
    let (below, &mut upper, _) = values.select_nth_unstable_by(middle, f64::total_cmp);
    if odd {
        return Some(upper);
    }
    let lower = below.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    Some(0.5 * (lower + upper))
}

/// A standard deviation that a few wild values do not move: 1.4826 times the median of distances from zero (the factor
/// makes it that of normal noise).
pub(super) fn robust_deviation(mut distances: Vec<f64>) -> Option<f64> {
    distances.retain(|d| d.is_finite());
    distances.iter_mut().for_each(|d| *d = d.abs());
    median(&mut distances).map(|m| 1.4826 * m)
}

/// The decimal place to which values were rounded, as a step in their unit; 0 when none of the first eight fits them all
/// (converted units, full precision).
pub(super) fn resolution(values: &[f64]) -> f64 {
    // From the whole log: at rest, or on deck, a reading may be round for long.
    let stride = (values.len() / 4_001).max(1);
    let sample: Vec<f64> = values.iter().step_by(stride).copied().filter(|v| v.is_finite()).collect();
    (0..8)
        .map(|places| 10f64.powi(places))
        .find(|scale| sample.iter().all(|v| (v * scale - (v * scale).round()).abs() < 1e-3))
        .filter(|_| !sample.is_empty())
        .map_or(0.0, f64::recip)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn medians_of_odd_and_even() {
        assert_eq!(median(&mut [3.0, 1.0, 2.0]), Some(2.0));
        assert_eq!(median(&mut [4.0, 1.0, 2.0, 3.0]), Some(2.5));
        assert_eq!(median(&mut []), None);
    }

    #[test]
    fn resolution_is_the_last_decimal() {
        assert_eq!(resolution(&[1.25, 3.5, 7.0, f64::NAN]), 0.01);
        assert_eq!(resolution(&[4.0, 5.0, 6.0]), 1.0);
        assert_eq!(resolution(&[std::f64::consts::PI, 1.0 / 3.0]), 0.0);
        assert_eq!(resolution(&[]), 0.0);
    }

    #[test]
    fn blocks_pass_over_missing_values() {
        let p: Vec<f64> = (0..9_000).map(|i| if i % 2 == 0 { f64::NAN } else { f64::from(i) }).collect();
        let blocks = Blocks::new(&p, None);
        assert_eq!(blocks.size, 3);
        assert_eq!(blocks.pressure[0], 1.0);
        assert_eq!(blocks.range().0, 1.0);
    }
}
