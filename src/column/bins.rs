//! Averages of samples in bins of pressure, in which noise, heave and reversals cancel.

use super::water::WaterNode;

/// Width of a bin in dbar.
pub const BIN_DBAR: f64 = 1.0;

/// Levels of water from samples in any order: one per bin that holds a sample, with the mean pressure, temperature
/// and salt of its samples, in increasing pressure. Bin `n` reaches from `n - 1/2` to `n + 1/2` dbar, so that a log
/// that is averaged by whole decibars comes through unchanged.
///
/// Samples with a value that is not finite are passed over.
pub fn bin_means(samples: impl Iterator<Item = WaterNode>) -> Vec<WaterNode> {
    // Twelve thousand bins reach deeper than any sea; what lies outside goes nowhere.
    const BINS: usize = 12_100;
    const ABOVE: f64 = 100.0;
    let mut sums = vec![([0.0_f64; 3], 0_u32); BINS];
    for s in samples {
        let bin = (s.pressure_dbar / BIN_DBAR).round() + ABOVE;
        let finite = (s.pressure_dbar + s.temperature_degc + s.salt).is_finite();
        if finite && bin >= 0.0 && bin < BINS as f64 {
            let (sum, count) = &mut sums[bin as usize];
            sum[0] += s.pressure_dbar;
            sum[1] += s.temperature_degc;
            sum[2] += s.salt;
            *count += 1;
        }
    }
    sums.into_iter()
        .filter(|(_, count)| *count > 0)
        .map(|(sum, count)| {
            let n = f64::from(count);
            WaterNode { pressure_dbar: sum[0] / n, temperature_degc: sum[1] / n, salt: sum[2] / n }
        })
        .collect()
}

/// The mean of two sets of levels where both have the same bin, each of them where it stands alone.
pub fn mean_of_legs(one: &[WaterNode], other: &[WaterNode]) -> Vec<WaterNode> {
    bin_means(one.iter().chain(other).copied())
}

#[cfg(test)]
mod tests {
    use super::*;

    fn node(pressure_dbar: f64, temperature_degc: f64) -> WaterNode {
        WaterNode { pressure_dbar, temperature_degc, salt: 35.0 }
    }

    #[test]
    fn whole_decibars_come_through_unchanged() {
        let levels: Vec<_> = (3..50).map(|p| node(f64::from(p), 20.0 - f64::from(p) * 0.1)).collect();
        assert_eq!(bin_means(levels.iter().copied()), levels);
    }

    #[test]
    fn order_of_samples_and_bad_values_do_not_matter() {
        let samples =
            [node(5.2, 3.0), node(4.9, 5.0), node(f64::NAN, 1.0), node(5.0, f64::INFINITY), node(9.0, 1.0)];
        let levels = bin_means(samples.into_iter());
        assert_eq!(levels.len(), 2);
        assert!((levels[0].pressure_dbar - 5.05).abs() < 1e-12);
        assert!((levels[0].temperature_degc - 4.0).abs() < 1e-12);
    }

    #[test]
    fn legs_weigh_the_same_however_many_samples_they_have() {
        let down = bin_means([node(5.0, 10.0)].into_iter());
        let up = bin_means((0..50).map(|_| node(5.0, 20.0)));
        assert_eq!(mean_of_legs(&down, &up)[0].temperature_degc, 15.0);
    }
}
