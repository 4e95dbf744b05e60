//! The time on deck, before launch and after recovery.

use super::blocks::{Blocks, median};
use std::ops::Range;

/// Samples in air.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Deck {
    /// Samples on deck before the cast (may be empty).
    pub before: Range<usize>,
    /// Samples on deck after the cast (may be empty).
    pub after: Range<usize>,
}

/// Salt below this share of what the water has is air.
pub(super) const AIR_SHARE: f64 = 0.1;
/// Only water saltier than this (mS/cm or Practical Salinity) tells itself from air by salt.
pub(super) const TELLING_SALT: f64 = 5.0;
/// How far in dbar readings on deck may be from each other where salt tells of air.
const WANDER_WITH_SALT_DBAR: f64 = 1.0;
/// How far in dbar the deck may read from the smallest reading where salt tells of air: a zero may drift over a dive.
const DRIFT_WITH_SALT_DBAR: f64 = 5.0;
/// The same where pressure alone must tell: an instrument hanging in the sea feels the swell.
const WANDER_ALONE_DBAR: f64 = 0.15;
/// How far the deck may read from what air should read, where pressure alone must tell.
const OFFSET_ALONE_DBAR: f64 = 1.0;
/// Absolute pressure of the air in dbar, from a hurricane to the strongest high, with room for the zero of the sensor: what a deck
/// may read when nobody said that the sensor is absolute.
pub(crate) const AIR_DBAR: std::ops::Range<f64> = 8.5..11.2;
/// Fewer samples than this are no time on deck.
const FEWEST: usize = 5;

/// Finds the samples on deck: the first and the last stretch of the log at steady low pressure, and with hardly any salt
/// where the log tells salt. `expected_dbar` is what the sensor should read in air.
pub(super) fn find(
    blocks: &Blocks,
    pressure: &[f64],
    salt: Option<&[f64]>,
    expected_dbar: f64,
) -> Option<Deck> {
    let (low, high) = blocks.range();
    if high - low < 1.0 {
        return None;
    }
    let in_water = water_salt(blocks, low, high);
    let is_air = |block: usize, start_dbar: f64| {
        let p = blocks.pressure[block];
        let salt = blocks.salt.as_ref().map_or(f64::NAN, |s| s[block]);
        match in_water {
            Some(water) if salt.is_finite() => {
                salt < AIR_SHARE * water && (p - start_dbar).abs() < WANDER_WITH_SALT_DBAR
            }
            _ => {
                let air =
                    (start_dbar - expected_dbar).abs() < OFFSET_ALONE_DBAR || AIR_DBAR.contains(&start_dbar);
                air && (p - start_dbar).abs() < WANDER_ALONE_DBAR
            }
        }
    };
    let stretch = |first_block: usize, order: &mut dyn Iterator<Item = usize>| -> usize {
        // Blocks without a pressure say nothing.
        let order: Vec<usize> = order.filter(|&b| blocks.pressure[b].is_finite()).collect();
        let mut first: Vec<f64> = order.iter().map(|&b| blocks.pressure[b]).take(5).collect();
        let Some(start_dbar) = median(&mut first) else { return 0 };
        let farthest = if in_water.is_some() { DRIFT_WITH_SALT_DBAR } else { WANDER_WITH_SALT_DBAR };
        if start_dbar > low + farthest {
            return 0;
        }
        // One odd block (a spike) does not end the time on deck; three in a row do.
        let air: Vec<bool> = order.iter().map(|&b| is_air(b, start_dbar)).collect();
        match (0..air.len()).find(|&n| air[n..].iter().take(3).all(|a| !a)) {
            Some(0) => 0,
            // Up to the last block in air, in blocks from this end of the log.
            Some(n) => order[n - 1].abs_diff(first_block) + 1,
            None => blocks.len(),
        }
    };
    let before = stretch(0, &mut (0..blocks.len())) * blocks.size;
    let after = stretch(blocks.len() - 1, &mut (0..blocks.len()).rev());
    let after = blocks.len().saturating_sub(after) * blocks.size;
    // Blocks settle it to within a block; where salt tells air from water, samples settle the rest.
    let in_air = |i: usize| match (in_water, salt) {
        (Some(water), Some(salt)) => salt[i] < AIR_SHARE * water,
        _ => false,
    };
    let mut before = before.min(pressure.len());
    while before > 0 && before < pressure.len() && in_air(before) {
        before += 1;
    }
    let mut after = after.min(pressure.len()).max(before);
    while after > before && after < pressure.len() && in_air(after - 1) {
        after -= 1;
    }
    let deck = Deck {
        before: if before >= FEWEST { 0..before } else { 0..0 },
        after: if after + FEWEST <= pressure.len() {
            after..pressure.len()
        } else {
            pressure.len()..pressure.len()
        },
    };
    (!deck.before.is_empty() || !deck.after.is_empty()).then_some(deck)
}

/// Salt of the water below the uppermost fifth, when it is salty enough to tell water from air.
fn water_salt(blocks: &Blocks, low: f64, high: f64) -> Option<f64> {
    let salt = blocks.salt.as_ref()?;
    let below = low + 0.2 * (high - low);
    let mut deep: Vec<f64> = salt
        .iter()
        .zip(&blocks.pressure)
        .filter(|(s, p)| s.is_finite() && **p > below)
        .map(|(s, _)| *s)
        .collect();
    median(&mut deep).filter(|&s| s > TELLING_SALT)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn found(pressure: &[f64], salt: Option<&[f64]>) -> Option<Deck> {
        find(&Blocks::new(pressure, salt), pressure, salt, 0.0)
    }

    fn dive() -> (Vec<f64>, Vec<f64>) {
        let down = (0..200).map(|i| f64::from(i) * 0.5);
        let p: Vec<f64> = std::iter::repeat_n(0.3, 40)
            .chain(down.clone())
            .chain(down.rev())
            .chain(std::iter::repeat_n(0.32, 30))
            .collect();
        let c = (0..p.len()).map(|i| if (40..440).contains(&i) { 45.0 } else { 0.01 }).collect();
        (p, c)
    }

    #[test]
    fn salt_tells_deck_from_water() {
        let (p, c) = dive();
        assert_eq!(found(&p, Some(&c)), Some(Deck { before: 0..40, after: 440..470 }));
    }

    #[test]
    fn pressure_alone_tells_a_steady_deck() {
        let (p, _) = dive();
        let deck = found(&p, None).unwrap();
        // The first sample in the water is still at the surface: pressure cannot tell it from air.
        assert!((40..=41).contains(&deck.before.end) && (439..=440).contains(&deck.after.start), "{deck:?}");
    }

    #[test]
    fn a_cast_that_starts_in_the_water_has_no_deck() {
        let p: Vec<f64> = (0..300).map(|i| 3.0 + f64::from(i)).collect();
        assert_eq!(found(&p, None), None);
        assert_eq!(found(&p, Some(&vec![40.0; 300])), None);
    }

    #[test]
    fn a_spike_on_deck_does_not_end_it() {
        let (mut p, c) = dive();
        p[10] = 500.0;
        assert_eq!(found(&p, Some(&c)).unwrap().before, 0..40);
    }

    #[test]
    fn hanging_in_the_sea_without_conductivity_is_not_deck() {
        let p: Vec<f64> =
            (0..60).map(|i| 6.0 + (f64::from(i)).sin()).chain((0..300).map(|i| 6.0 + f64::from(i))).collect();
        assert_eq!(found(&p, None), None);
    }
}
