//! From a [`Log`] to a cast: sea pressure, legs, and a verdict on each sample.
//!
//! Nothing is dropped. A sample that is suspect keeps its place and gets a flag; later stages pass it over.

mod blocks;

mod deck;
mod legs;
mod noise;
mod suspect;
mod tare;

pub(crate) use blocks::median;
pub(crate) use deck::AIR_DBAR;
pub use deck::Deck;
pub use legs::{Leg, Legs};
pub use noise::Noise;
pub use suspect::{Quantity, Reason, Suspect};
pub use tare::{Tare, TareBasis, TareChoice};

use crate::constants::{HPA_PER_DBAR, STANDARD_ATMOSPHERE_DBAR};
use crate::log::{Flag, Log, LogError, PressureKind};
use crate::seawater::practical_salinity;
use crate::warning::Warning;

/// What must be known of a cast before its log can be read as pressures in the sea.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CastSettings {
    /// From where the pressure counts, when the user says so; else the log's word; else sea pressure.
    pub pressure_kind: Option<PressureKind>,
    /// Pressure of the air at the sea surface in hPa.
    pub air_pressure_hpa: f64,
    /// What to do about the zero of the pressure sensor.
    pub tare: TareChoice,
}

impl CastSettings {
    /// Sea pressure of the sea surface in dbar.
    pub fn surface_dbar(&self) -> f64 {
        self.air_pressure_hpa / HPA_PER_DBAR - STANDARD_ATMOSPHERE_DBAR
    }
}

/// A cast, sample by sample in the order of its log.
#[derive(Debug, Clone, PartialEq)]
pub struct Cast {
    /// Sea pressure in dbar after tare; NaN where missing.
    pub pressure_dbar: Vec<f64>,
    /// Practical Salinity, from conductivity where the log has it; empty when the log has neither.
    pub practical_salinity: Vec<f64>,
    /// Flags of the pressures.
    pub pressure_flag: Vec<Flag>,
    /// Flags of temperature and salt together.
    pub water_flag: Vec<Flag>,
    /// Deck and legs.
    pub legs: Legs,
    /// Time on deck, when the log has it.
    pub deck: Option<Deck>,
    /// Zero of the pressure sensor.
    pub tare: Tare,
    /// From where the pressure of the log counts.
    pub pressure_kind: PressureKind,
    /// Whether user or log said so (else it is assumed).
    pub pressure_kind_known: bool,
    /// Noise of the pressure.
    pub noise: Noise,
    /// Suspect samples, by sample.
    pub suspects: Vec<Suspect>,
    /// What was noticed.
    pub warnings: Vec<Warning>,
}

impl Cast {
    /// Reads a log as a cast.
    ///
    /// # Errors
    /// [`LogError`] when no pressure can be used, the log never leaves the deck, or the deck shows that the pressure is
    /// of another kind than told.
    pub fn new(log: &Log, settings: &CastSettings) -> Result<Self, LogError> {
        let mut warnings = log.warnings.clone();
        let known = settings.pressure_kind.or(log.pressure_kind);
        let kind = known.unwrap_or(PressureKind::Sea);
        if log.pressure.values.iter().filter(|p| p.is_finite()).count() < 2 {
            return Err(LogError::new(&log.source, "fewer than two pressures to work with"));
        }

        let salt = log.conductivity.as_ref().or(log.salinity.as_ref());
        let salt = salt.map(|c| c.values.as_slice());
        let blocks = blocks::Blocks::new(&log.pressure.values, salt);
        let expected_dbar = tare::expected_on_deck_dbar(kind, settings.air_pressure_hpa);
        let deck = deck::find(&blocks, &log.pressure.values, salt, expected_dbar);
        let resolution_dbar = blocks::resolution(&log.pressure.values);
        let tare = tare::settle(log, settings, kind, known.is_some(), deck.as_ref(), resolution_dbar)?;

        let to_sea_dbar = match kind {
            PressureKind::Absolute => -STANDARD_ATMOSPHERE_DBAR,
            PressureKind::Sea => 0.0,
            PressureKind::Gauge => settings.surface_dbar(),
        } - tare.value_dbar;
        let pressure_dbar: Vec<f64> = log.pressure.values.iter().map(|p| p + to_sea_dbar).collect();

        let elapsed_s = log.time.as_ref().map(|t| t.elapsed_s.as_slice());
        let legs = legs::find(&blocks, deck.as_ref(), pressure_dbar.len(), elapsed_s).ok_or_else(|| {
            LogError::new(&log.source, "the log never leaves the deck: no sample is in the water")
                .remedy("if it does, say where its pressure counts from: --pressure absolute, sea or gauge")
        })?;
        let noise = noise::of_pressure(&pressure_dbar, &legs, resolution_dbar);
        let practical_salinity = salinity_of(log, &pressure_dbar);

        let mut judge = suspect::Judge::new(
            log,
            &pressure_dbar,
            &practical_salinity,
            &legs,
            &noise,
            settings.surface_dbar(),
        );
        judge.run();
        let (pressure_flag, water_flag, suspects) = judge.verdict();
        warnings.extend(time_warning(log));
        Ok(Self {
            pressure_dbar,
            practical_salinity,
            pressure_flag,
            water_flag,
            legs,
            deck,
            tare,
            pressure_kind: kind,
            pressure_kind_known: known.is_some(),
            noise,
            suspects,
            warnings,
        })
    }

    /// Number of samples.
    pub fn len(&self) -> usize {
        self.pressure_dbar.len()
    }

    /// Whether there is no sample.
    pub fn is_empty(&self) -> bool {
        self.pressure_dbar.is_empty()
    }

    /// The flag of sample `i` as a whole: the worst of its parts, missing before bad before questionable.
    pub fn flag(&self, i: usize) -> Flag {
        self.pressure_flag[i].max(self.water_flag[i])
    }

    /// Whether the water of sample `i` may stand in the profile.
    pub fn water_usable(&self, i: usize) -> bool {
        self.pressure_flag[i].usable() && self.water_flag[i].usable() && self.legs.of(i) != Leg::Deck
    }
}

/// Practical Salinity of each sample, as logged or from conductivity; empty without both.
fn salinity_of(log: &Log, pressure_dbar: &[f64]) -> Vec<f64> {
    match (&log.conductivity, &log.temperature, &log.salinity) {
        (Some(c), Some(t), _) => c
            .values
            .iter()
            .zip(&t.values)
            .zip(pressure_dbar)
            .map(|((&c, &t), &p)| practical_salinity(c, t, p))
            .collect(),
        (_, _, Some(s)) => s.values.clone(),
        _ => Vec::new(),
    }
}

/// A clock that runs backwards does not touch depth, which is looked up by pressure, but legs may be wrong.
fn time_warning(log: &Log) -> Option<Warning> {
    let elapsed = &log.time.as_ref()?.elapsed_s;
    let back = elapsed.windows(2).position(|w| w[1] < w[0])? + 1;
    let place = log.line_of(back).map_or(format!("sample {}", back + 1), |line| format!("line {line}"));
    Some(Warning::new(
        "time_goes_back",
        format!("time goes back at {place}"),
        "depth does not depend on time, but legs and rates may be wrong there",
    ))
}
