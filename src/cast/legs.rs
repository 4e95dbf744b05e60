//! Deck, down, bottom and up: the four parts of a cast.

use super::blocks::{Blocks, median};
use super::deck::Deck;
use std::ops::Range;

/// A part of a cast.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Leg {
    /// In air, before or after.
    Deck,
    /// From the surface to the bottom part.
    Down,
    /// Where the descent has ended and the ascent not begun.
    Bottom,
    /// Back to the surface.
    Up,
}

impl Leg {
    /// Its name in results.
    pub fn name(self) -> &'static str {
        match self {
            Leg::Deck => "deck",
            Leg::Down => "down",
            Leg::Bottom => "bottom",
            Leg::Up => "up",
        }
    }
}

/// The samples at which one part ends and the next begins.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Legs {
    down: usize,
    bottom: usize,
    up: usize,
    deck: usize,
    samples: usize,
}

impl Legs {
    /// The part that sample `i` belongs to.
    pub fn of(&self, i: usize) -> Leg {
        if i < self.down || i >= self.deck {
            Leg::Deck
        } else if i < self.bottom {
            Leg::Down
        } else if i < self.up {
            Leg::Bottom
        } else {
            Leg::Up
        }
    }

    /// Samples of a part; for [`Leg::Deck`] those before the cast.
    pub fn range(&self, leg: Leg) -> Range<usize> {
        match leg {
            Leg::Deck => 0..self.down,
            Leg::Down => self.down..self.bottom,
            Leg::Bottom => self.bottom..self.up,
            Leg::Up => self.up..self.deck,
        }
    }

    /// Samples in the water.
    pub fn water(&self) -> Range<usize> {
        self.down..self.deck
    }

    /// Number of samples of the cast.
    pub fn samples(&self) -> usize {
        self.samples
    }
}

/// Within this many dbar of the deepest block a sample belongs to the bottom.
const AT_DEEPEST_DBAR: f64 = 0.5;
/// The bottom part lies in the deepest fifth of the cast ...
const DEEPEST_SHARE: f64 = 0.8;
/// ... and begins where the vehicle keeps to less than this share of its usual vertical speed ...
const SLOW_SHARE: f64 = 0.2;
/// ... for the time in which it usually covers this share of the cast.
const AHEAD_SHARE: f64 = 0.02;

/// Finds the parts of a cast. `None` when no sample is in the water.
///
/// The descent ends in the deepest fifth of the cast, where the vehicle goes on at less than a fifth of its usual speed, or
/// at the deepest point; the ascent begins where the same holds backwards in time. A lander at rest, a vehicle that works
/// its way along the floor and a wire cast that turns at once are all told by this.
pub(super) fn find(
    blocks: &Blocks,
    deck: Option<&Deck>,
    samples: usize,
    elapsed_s: Option<&[f64]>,
) -> Option<Legs> {
    let down = deck.map_or(0, |d| d.before.end);
    let deck_after = deck.map_or(samples, |d| d.after.start);
    if down >= deck_after {
        return None;
    }
    let time = |block: usize| {
        let sample = block * blocks.size;
        elapsed_s.map_or(sample as f64, |t| t[sample])
    };
    let points: Vec<(f64, f64, usize)> = (down.div_ceil(blocks.size)..blocks.len())
        .take_while(|b| b * blocks.size < deck_after)
        .map(|b| (time(b), blocks.pressure[b], b * blocks.size))
        .filter(|(t, p, _)| t.is_finite() && p.is_finite())
        .collect();
    if points.is_empty() {
        return Some(Legs { down, bottom: down, up: deck_after, deck: deck_after, samples });
    }
    let deepest = (0..points.len()).max_by(|&a, &b| points[a].1.total_cmp(&points[b].1))?;
    let surface = points.iter().map(|p| p.1).fold(f64::INFINITY, f64::min);

    let descent: Vec<_> = points[..=deepest].to_vec();
    // Backwards in time the ascent is a descent.
    let ascent: Vec<_> = points[deepest..].iter().rev().map(|&(t, p, s)| (-t, p, s)).collect();
    let bottom = descent[arrival(&descent, surface)].2.max(down);
    let up = ascent[arrival(&ascent, surface)].2;
    let up = if deepest + 1 == points.len() { deck_after } else { (up + blocks.size).min(deck_after) };
    Some(Legs {
        down,
        bottom: if deepest == 0 { down } else { bottom },
        up: up.max(bottom),
        deck: deck_after,
        samples,
    })
}

/// Index of the point at which a descent that ends in its last point has arrived.
fn arrival(descent: &[(f64, f64, usize)], surface: f64) -> usize {
    let last = descent.len() - 1;
    let end = descent[last].1;
    let deep = surface + DEEPEST_SHARE * (end - surface);
    let mut speeds: Vec<f64> = descent
        .windows(2)
        .filter(|w| w[1].1 < deep)
        .map(|w| (w[1].1 - w[0].1) / (w[1].0 - w[0].0))
        .filter(|v| v.is_finite() && *v > 0.0)
        .collect();
    let usual = median(&mut speeds).unwrap_or(0.0);
    let ahead = AHEAD_SHARE * (end - surface) / usual;
    let mut next = 0;
    let slow = descent
        .iter()
        .enumerate()
        .position(|(i, &(t, p, _))| {
            next = next.max((i + 3).min(last));
            while next < last && descent[next].0 < t + ahead {
                next += 1;
            }
            let (later_t, later_p, _) = descent[next];
            end - p <= AT_DEEPEST_DBAR || (p >= deep && (later_p - p) / (later_t - t) < SLOW_SHARE * usual)
        })
        .unwrap_or(last);
    // Slow over the time ahead, most of it at rest: the descent goes on to where it comes to rest.
    let rest = descent[next.max(slow)].1 - AT_DEEPEST_DBAR;
    (slow..=last).find(|&i| descent[i].1 >= rest).unwrap_or(slow)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn legs(pressure: &[f64]) -> Legs {
        find(&Blocks::new(pressure, None), None, pressure.len(), None).unwrap()
    }

    #[test]
    fn a_lander_rests_on_the_bottom() {
        let p: Vec<f64> = (0..1000)
            .map(f64::from)
            .chain((0..600).map(|i| 1000.0 + 0.05 * f64::from(i % 7)))
            .chain((0..1000).rev().map(f64::from))
            .collect();
        let legs = legs(&p);
        assert!((999..=1000).contains(&legs.range(Leg::Bottom).start), "{legs:?}");
        assert!((1600..=1601).contains(&legs.range(Leg::Up).start), "{legs:?}");
    }

    #[test]
    fn a_vehicle_that_wanders_along_the_floor_is_on_the_bottom() {
        let floor = (0..4000).map(|i| 2000.0 + 40.0 * (f64::from(i) / 300.0).sin());
        let p: Vec<f64> =
            (0..2000).map(f64::from).chain(floor).chain((0..2000).rev().map(f64::from)).collect();
        let legs = legs(&p);
        let (bottom, up) = (legs.range(Leg::Bottom).start, legs.range(Leg::Up).start);
        assert!((1990..2160).contains(&bottom), "{bottom}");
        assert!((5840..=6010).contains(&up), "{up}");
    }

    #[test]
    fn a_wire_cast_turns_at_once() {
        let p: Vec<f64> = (0..=500).map(f64::from).chain((0..500).rev().map(f64::from)).collect();
        let legs = legs(&p);
        assert_eq!(legs.range(Leg::Bottom), 500..501);
    }

    #[test]
    fn a_down_leg_alone_ends_at_its_deepest() {
        let p: Vec<f64> = (0..=500).map(|i| 4.0 + f64::from(i)).collect();
        let legs = legs(&p);
        assert_eq!(legs.range(Leg::Down), 0..500);
        assert_eq!(legs.range(Leg::Up), 501..501);
    }

    #[test]
    fn an_up_leg_alone_starts_at_its_deepest() {
        let p: Vec<f64> = (0..=500).rev().map(|i| 4.0 + f64::from(i)).collect();
        let legs = legs(&p);
        assert_eq!(legs.range(Leg::Down), 0..0);
        assert_eq!(legs.range(Leg::Bottom), 0..1);
        assert_eq!(legs.range(Leg::Up), 1..501);
    }
}
