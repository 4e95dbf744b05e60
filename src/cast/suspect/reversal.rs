//! Going back through water that the instrument has stirred.

use crate::cast::legs::{Leg, Legs};
use crate::cast::noise::Noise;
use crate::log::Flag;
use std::ops::Range;

/// A way back shorter than this, in dbar, is not worth a flag.
const LEAST_DBAR: f64 = 0.25;
/// Times the noise that a way back must be.
const TIMES_NOISE: f64 = 6.0;
/// Down to this pressure in dbar an instrument may be brought back to the surface before the descent begins.
const SOAK_TO_DBAR: f64 = 30.0;

/// Samples of the down leg that lie above where the instrument has been before, those of a soak that lie below where the
/// descent then begins, and samples of the up leg that lie below where it has been.
pub(super) fn find(pressure: &[f64], flag: &[Flag], legs: &Legs, noise: &Noise) -> Vec<usize> {
    let tolerance = LEAST_DBAR.max(TIMES_NOISE * noise.deviation_dbar.unwrap_or(0.0));
    let usable = |i: usize| flag[i].usable() && pressure[i].is_finite();
    let down = legs.range(Leg::Down);
    let begin = descent_begins(pressure, down.clone(), &usable);
    let mut found = Vec::new();
    // The soak: what it saw is seen again on the descent, by a flushed instrument.
    if begin > down.start {
        let from = pressure[begin] + tolerance;
        found.extend((down.start..begin).filter(|&i| usable(i) && pressure[i] > from));
    }
    let mut deepest = f64::NEG_INFINITY;
    for i in (begin..down.end).filter(|&i| usable(i)) {
        if pressure[i] < deepest - tolerance {
            found.push(i);
        }
        deepest = deepest.max(pressure[i]);
    }
    let mut shallowest = f64::INFINITY;
    for i in legs.range(Leg::Up).filter(|&i| usable(i)) {
        if pressure[i] > shallowest + tolerance {
            found.push(i);
        }
        shallowest = shallowest.min(pressure[i]);
    }
    found
}

/// The sample nearest the surface before the instrument leaves the uppermost water for good, when it has been deeper before.
fn descent_begins(pressure: &[f64], down: Range<usize>, usable: &dyn Fn(usize) -> bool) -> usize {
    let below = down.clone().filter(|&i| usable(i)).map(|i| pressure[i]).fold(0.0, f64::max);
    let limit = SOAK_TO_DBAR.min(0.5 * below);
    let leaves = down.clone().rev().find(|&i| usable(i) && pressure[i] <= limit).unwrap_or(down.start);
    (down.start..=leaves)
        .filter(|&i| i < down.end && usable(i))
        .min_by(|&a, &b| pressure[a].total_cmp(&pressure[b]).then(b.cmp(&a)))
        .unwrap_or(down.start)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::cast::blocks::Blocks;

    fn reversals(pressure: &[f64]) -> Vec<usize> {
        let legs = crate::cast::legs::find(&Blocks::new(pressure, None), None, pressure.len(), None).unwrap();
        let noise = Noise { deviation_dbar: None, resolution_dbar: 0.0, averaged_step_dbar: None };
        find(pressure, &vec![Flag::Good; pressure.len()], &legs, &noise)
    }

    #[test]
    fn a_steady_cast_has_none() {
        let p: Vec<f64> = (0..300).map(f64::from).chain((0..300).rev().map(f64::from)).collect();
        assert!(reversals(&p).is_empty());
    }

    #[test]
    fn a_way_back_is_found_on_either_leg() {
        let mut p: Vec<f64> = (0..300).map(f64::from).chain((0..300).rev().map(f64::from)).collect();
        p[150] = 148.0;
        p[400] = 203.0;
        assert_eq!(reversals(&p), vec![150, 400]);
    }

    #[test]
    fn a_soak_is_left_out_and_the_descent_kept() {
        // Down to 10 dbar, a minute there, back up to 1 dbar, then the cast.
        let soak =
            (1..10).map(f64::from).chain(std::iter::repeat_n(10.0, 60)).chain((2..10).rev().map(f64::from));
        let p: Vec<f64> = soak.chain((1..300).map(f64::from)).collect();
        let found = reversals(&p);
        assert_eq!(found, (1..77).collect::<Vec<_>>());
    }
}
