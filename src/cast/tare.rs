//! The zero of the pressure sensor, from the time on deck.

use super::blocks::{median, robust_deviation};
use super::deck::AIR_DBAR;
use super::{CastSettings, Deck};
use crate::constants::{HPA_PER_DBAR, STANDARD_ATMOSPHERE_DBAR};
use crate::log::{Log, LogError, PressureKind};

/// Standard uncertainty in dbar of a zero that nothing on deck confirms.
pub const ASSUMED_U_DBAR: f64 = 0.1;

/// A zero offset larger than this is not believed without the user's word.
const LARGEST_DBAR: f64 = 3.0;

/// A deviation from the median of distances is worth 37 % of as many squares (Rousseeuw and Croux 1993).
const MEDIAN_EFFICIENCY: f64 = 0.37;

/// What to do about the zero offset.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum TareChoice {
    /// Take it from the samples on deck, when there are any.
    Auto,
    /// Leave the readings as they are.
    None,
    /// Subtract this many dbar from each reading.
    Fixed(f64),
}

/// Where a zero offset comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum TareBasis {
    /// Samples on deck.
    Deck,
    /// The user gave it.
    Given,
    /// Nothing tells: zero is assumed.
    Assumed,
}

/// The zero offset that is subtracted from each reading.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tare {
    /// Offset in dbar: what the sensor reads too much.
    pub value_dbar: f64,
    /// Its standard uncertainty in dbar.
    pub standard_uncertainty_dbar: f64,
    /// Degrees of freedom of that uncertainty; `None` for infinite.
    pub degrees_of_freedom: Option<f64>,
    /// Where it comes from.
    pub basis: TareBasis,
    /// Offset before the cast in dbar.
    pub before_dbar: Option<f64>,
    /// Offset after the cast in dbar.
    pub after_dbar: Option<f64>,
}

impl Tare {
    /// Whether an error of the air pressure moves the zero with it: the deck is set to the air's pressure.
    pub fn follows_air(&self) -> bool {
        self.basis == TareBasis::Deck
    }
}

/// What a sensor without offset reads in air, in dbar.
pub(super) fn expected_on_deck_dbar(kind: PressureKind, air_pressure_hpa: f64) -> f64 {
    match kind {
        PressureKind::Absolute => air_pressure_hpa / HPA_PER_DBAR,
        PressureKind::Sea => air_pressure_hpa / HPA_PER_DBAR - STANDARD_ATMOSPHERE_DBAR,
        PressureKind::Gauge => 0.0,
    }
}

/// The zero offset by the user's choice and the samples on deck.
pub(super) fn settle(
    log: &Log,
    settings: &CastSettings,
    kind: PressureKind,
    kind_known: bool,
    deck: Option<&Deck>,
    resolution_dbar: f64,
) -> Result<Tare, LogError> {
    let expected = expected_on_deck_dbar(kind, settings.air_pressure_hpa);
    let readings = deck.map(|deck| Readings::new(log, deck, resolution_dbar));
    let before_dbar = readings.as_ref().and_then(|r| r.before).map(|p| p - expected);
    let after_dbar = readings.as_ref().and_then(|r| r.after).map(|p| p - expected);
    let plain = |value_dbar, basis| Tare {
        value_dbar,
        standard_uncertainty_dbar: ASSUMED_U_DBAR,
        degrees_of_freedom: None,
        basis,
        before_dbar,
        after_dbar,
    };
    if let TareChoice::Fixed(value_dbar) = settings.tare {
        return Ok(plain(value_dbar, TareBasis::Given));
    }
    let offset = match (before_dbar, after_dbar) {
        (Some(a), Some(b)) => 0.5 * (a + b),
        (Some(a), None) | (None, Some(a)) => a,
        (None, None) => return Ok(plain(0.0, TareBasis::Assumed)),
    };
    if offset.abs() > LARGEST_DBAR {
        return Err(unbelievable(log, offset + expected, kind, kind_known));
    }
    if settings.tare == TareChoice::None {
        return Ok(plain(0.0, TareBasis::Assumed));
    }
    // The zero wanders between the two ends of the cast: anywhere between them at the deepest, a rectangular
    // distribution of half width half their difference (JCGM 100:2008, 4.3.7).
    let wander = match (before_dbar, after_dbar) {
        (Some(a), Some(b)) => 0.5 * (a - b).abs() / 3f64.sqrt(),
        _ => 0.0,
    };
    let (scatter, rounding, count) = readings.map_or((0.0, 0.0, 1.0), |r| (r.scatter, r.rounding, r.count));
    let u = wander.hypot(scatter).hypot(rounding);
    Ok(Tare {
        value_dbar: offset,
        standard_uncertainty_dbar: u,
        // Welch-Satterthwaite (JCGM 100:2008, G.2b): only the scatter has a finite number.
        degrees_of_freedom: (scatter > 0.0 && count > 1.0)
            .then(|| (u / scatter).powi(4) * MEDIAN_EFFICIENCY * (count - 1.0)),
        basis: TareBasis::Deck,
        before_dbar,
        after_dbar,
    })
}

/// Medians of the readings on deck.
struct Readings {
    before: Option<f64>,
    after: Option<f64>,
    /// Standard uncertainty of the medians in dbar, from the scatter of the readings.
    scatter: f64,
    /// The same from their last decimal.
    rounding: f64,
    /// Number of readings.
    count: f64,
}

impl Readings {
    fn new(log: &Log, deck: &Deck, resolution_dbar: f64) -> Self {
        // The tenth of the time next to the water may hold the splash.
        let before = deck.before.start..deck.before.end - deck.before.len() / 10;
        let after = deck.after.start + deck.after.len() / 10..deck.after.end;
        let collect = |range: std::ops::Range<usize>| -> Vec<f64> {
            let good = |i: &usize| {
                let of_pressure = log.pressure.flags.as_ref().is_none_or(|f| f[*i].usable());
                of_pressure && log.flags.as_ref().is_none_or(|f| f[*i].usable())
            };
            range.filter(good).map(|i| log.pressure.values[i]).filter(|p| p.is_finite()).collect()
        };
        let (mut a, mut b) = (collect(before), collect(after));
        let (before, after) = (median(&mut a), median(&mut b));
        let residuals: Vec<f64> = a
            .iter()
            .map(|p| p - before.unwrap_or(0.0))
            .chain(b.iter().map(|p| p - after.unwrap_or(0.0)))
            .collect();
        let count = residuals.len().max(1) as f64;
        // The mean of two medians has half the root of both variances summed; one median has its own.
        let weight: f64 = match (a.len() as f64, b.len() as f64) {
            (0.0, n) | (n, 0.0) => n.max(1.0).recip(),
            (before, after) => 0.25 * (before.recip() + after.recip()),
        };
        let deviation = robust_deviation(residuals).unwrap_or(0.0);
        Self {
            before,
            after,
            // Standard error of a median of normal noise: sqrt(pi/2) times that of the mean.
            scatter: deviation * (std::f64::consts::FRAC_PI_2 * weight).sqrt(),
            rounding: resolution_dbar / 12f64.sqrt(),
            count,
        }
    }
}

fn unbelievable(log: &Log, reading: f64, kind: PressureKind, kind_known: bool) -> LogError {
    let said = match (kind, kind_known) {
        (PressureKind::Absolute, _) => "for an absolute sensor",
        (PressureKind::Gauge, _) => "for a gauge sensor",
        (PressureKind::Sea, true) => "for sea pressure",
        (PressureKind::Sea, false) => "for sea pressure, which is assumed when nothing is said",
    };
    let error = LogError::new(
        &log.source,
        format!("on deck the pressure reads {reading:.2} dbar, too far from zero {said}"),
    );
    if AIR_DBAR.contains(&reading) && kind != PressureKind::Absolute {
        error.remedy(
            "that is the pressure of the air: --pressure absolute (if the log begins in the water: --tare 0)",
        )
    } else {
        error.remedy(format!(
            "check the unit (--column pressure={}:UNIT) and the kind (--pressure absolute, sea or gauge), or give the offset: --tare DBAR",
            log.pressure.name
        ))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::log::{ReadOptions, read_bytes};

    fn settled(before: &[&str], after: &[&str]) -> Tare {
        let rows = before.iter().chain(after).fold(String::new(), |text, p| text + p + "\n");
        let mut logs =
            read_bytes("t.csv", format!("pressure_dbar\n{rows}").into_bytes(), &ReadOptions::default())
                .unwrap();
        let settings =
            CastSettings { pressure_kind: None, air_pressure_hpa: 1013.25, tare: TareChoice::Auto };
        let n = before.len();
        let deck = Deck { before: 0..n, after: n..n + after.len() };
        settle(&logs.remove(0), &settings, PressureKind::Gauge, true, Some(&deck), 0.01).unwrap()
    }

    #[test]
    fn the_mean_of_both_ends_with_their_difference_as_bounds() {
        let tare = settled(&["0.10"; 20], &["0.22"; 20]);
        assert!((tare.value_dbar - 0.16).abs() < 1e-12);
        // Rectangular, half width 0.06 dbar, and a last decimal of 0.01 dbar, by hand: 0.034 64 and 0.002 887.
        assert!((tare.standard_uncertainty_dbar - 0.034_64_f64.hypot(0.002_887)).abs() < 1e-5);
        assert_eq!(tare.degrees_of_freedom, None);
    }

    #[test]
    fn scatter_counts_for_what_it_is_worth() {
        // Readings +-0.03 dbar about 0.50: median distance 0.03, deviation 0.0445, of nine readings (one is left
        // out at the water) 0.0445 sqrt(pi/2 / 9) = 0.0186.
        let tare =
            settled(&["0.47", "0.53", "0.47", "0.53", "0.50", "0.53", "0.47", "0.53", "0.47", "0.50"], &[]);
        assert!((tare.value_dbar - 0.50).abs() < 1e-12);
        assert!((tare.standard_uncertainty_dbar - 0.0186_f64.hypot(0.002_887)).abs() < 2e-4);
        assert!(tare.degrees_of_freedom.unwrap() > 0.37 * 8.0);
    }
}
