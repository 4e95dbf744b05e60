//! Noise of the pressure, from the pressure itself.

use super::blocks::{median, robust_deviation};
use super::legs::{Leg, Legs};

/// What the log tells of the noise of its pressure.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Noise {
    /// Standard deviation of one reading in dbar; `None` when the log cannot tell (averaged or too short).
    pub deviation_dbar: Option<f64>,
    /// The last decimal of the readings, in dbar; 0 when it cannot be told.
    pub resolution_dbar: f64,
    /// Step in dbar of a log that was averaged in equal steps of pressure.
    pub averaged_step_dbar: Option<f64>,
}

/// Fewer samples than this tell nothing of noise.
const FEWEST: usize = 30;

/// The noise on the bottom, or in the water where the bottom is too short.
///
/// Third differences take out everything up to a parabola in time; of independent noise of variance `s2` they leave `20
/// s2` (sum of the squared binomial coefficients 1, 3, 3, 1). Their median size gives `s` whatever a few spikes do.
pub(super) fn of_pressure(pressure: &[f64], legs: &Legs, resolution_dbar: f64) -> Noise {
    let averaged_step_dbar = equal_step(&pressure[legs.water()]);
    if averaged_step_dbar.is_some() {
        return Noise { deviation_dbar: None, resolution_dbar, averaged_step_dbar };
    }
    let bottom = legs.range(Leg::Bottom);
    let range = if bottom.len() >= FEWEST { bottom } else { legs.water() };
    let deviation_dbar = (range.len() >= FEWEST)
        .then(|| {
            let present: Vec<f64> = pressure[range].iter().copied().filter(|p| p.is_finite()).collect();
            let third = present.windows(4).map(|w| w[3] - 3.0 * w[2] + 3.0 * w[1] - w[0]).collect();
            robust_deviation(third).map(|d| d / 20f64.sqrt())
        })
        .flatten()
        // Readings rounded more coarsely than their noise: the rounding is all there is to see.
        .map(|d| d.max(resolution_dbar / 12f64.sqrt()));
    Noise { deviation_dbar, resolution_dbar, averaged_step_dbar }
}

/// The step of a log whose pressures rise or fall by one and the same amount.
fn equal_step(pressure: &[f64]) -> Option<f64> {
    // A log at rest whose readings flicker by their last decimal has steps of zero between.
    let steps: Vec<f64> =
        pressure.windows(2).map(|w| (w[1] - w[0]).abs()).filter(|d| d.is_finite()).collect();
    if steps.len() < 3 {
        return None;
    }
    let mut sorted = steps.clone();
    let usual = median(&mut sorted)?;
    let equal = steps.iter().filter(|d| (**d - usual).abs() < 1e-6 * usual + 1e-9).count();
    (usual >= 0.1 && equal * 10 >= steps.len() * 9).then_some(usual)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::cast::blocks::Blocks;

    fn noise(pressure: &[f64]) -> Noise {
        of_pressure(
            pressure,
            &super::super::legs::find(&Blocks::new(pressure, None), None, pressure.len(), None).unwrap(),
            crate::cast::blocks::resolution(pressure),
        )
    }

    #[test]
    fn finds_the_noise_that_was_put_in() {
        // A sum of twelve uniform numbers is normal to a percent; a plain congruential generator feeds it.
        let mut state = 12345_u64;
        let mut uniform = || {
            state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
            (state >> 11) as f64 / (1u64 << 53) as f64
        };
        let mut normal = || (0..12).map(|_| uniform()).sum::<f64>() - 6.0;
        let p: Vec<f64> = (0..20_000)
            .map(|i| {
                let i = f64::from(i);
                (i * 0.7).min(5_000.0) + 0.5 * (i / 900.0).sin() + 0.05 * normal()
            })
            .collect();
        let found = noise(&p).deviation_dbar.unwrap();
        assert!((found / 0.05 - 1.0).abs() < 0.05, "{found}");
    }

    #[test]
    fn a_coarse_log_at_rest_is_not_averaged() {
        let p: Vec<f64> =
            (0..500).chain(std::iter::repeat_n(500, 900)).chain((0..500).rev()).map(f64::from).collect();
        let found = noise(&p);
        assert_eq!((found.averaged_step_dbar, found.resolution_dbar), (None, 1.0));
    }

    #[test]
    fn a_log_in_equal_steps_is_averaged() {
        let p: Vec<f64> = (0..300).map(|i| 4.0 + 2.0 * f64::from(i)).collect();
        assert_eq!(noise(&p).averaged_step_dbar, Some(2.0));
    }
}
