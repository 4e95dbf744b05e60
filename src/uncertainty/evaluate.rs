//! The terms of a cast: their standard uncertainties, and the sensitivities that the column itself gives.

use super::budget::{Basis, Budget, BudgetTerm, combine};
use super::lines::{Evaluator, Line};
use super::term::Term;
use crate::cast::{Noise, Tare};
use crate::column::{Column, ProfileError, Water};
use crate::depth::{Deepest, Model, Place};
use std::collections::BTreeMap;

/// Sensitivities are computed on about so many levels.
const LEVELS: usize = 500;

/// A standard uncertainty that the user supplies, in the unit of its term.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Supplied {
    /// Standard uncertainty that is the same at all depths.
    pub standard_uncertainty: f64,
    /// Standard uncertainty as a fraction of the reading, besides and independent of the other; of
    /// [`Term::PressureCalibration`] only.
    pub relative: f64,
    /// Whether it came from a sheet or an option.
    pub basis: Basis,
}

impl Supplied {
    /// A standard uncertainty that is the same at all depths.
    pub fn new(standard_uncertainty: f64, basis: Basis) -> Self {
        Self { standard_uncertainty, relative: 0.0, basis }
    }
}

/// From where the water of the model comes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum WaterOrigin {
    /// The log itself.
    Log,
    /// A profile from another cast.
    OtherCast,
    /// The standard ocean.
    StandardOcean,
}

/// What a cast tells of its own uncertainty.
#[derive(Debug, Clone, Copy)]
pub struct Evidence<'a> {
    /// The zero of its pressure sensor.
    pub tare: &'a Tare,
    /// The noise of its pressure.
    pub noise: &'a Noise,
    /// From where the water comes.
    pub origin: WaterOrigin,
    /// The water of the other leg, where there is one.
    pub other_leg: Option<&'a Water>,
    /// Whether an error of the air pressure moves the pressures of the log with it.
    pub pressure_follows_air: bool,
    /// Whether the user gave the air pressure, whose default is tighter then.
    pub air_pressure_given: bool,
    /// Whether the composition of the salt is that of the place.
    pub composition_known: bool,
    /// Standard uncertainties by the user's word.
    pub supplied: &'a BTreeMap<Term, Supplied>,
}

/// The uncertainty of depth at every pressure of a cast.
pub struct DepthUncertainty {
    levels_dbar: Vec<f64>,
    lines: Vec<Line>,
    variance_m2: Vec<f64>,
    noise_dbar: f64,
    noise_basis: Basis,
    supplied_peak: Option<Supplied>,
}

impl DepthUncertainty {
    /// Evaluates every term of `model` down to `deepest_dbar`.
    ///
    /// A sensitivity is the change of depth when the input moves by plus and minus its standard uncertainty and the column
    /// is integrated anew (JCGM 100:2008, 5.1.3, note 2), so that each error reaches depth by all of its ways.
    ///
    /// # Errors
    /// [`ProfileError`] when the observed water, or the water with an error put on it, is not that of water.
    pub fn evaluate(
        model: &Model,
        column: &Column,
        deepest_dbar: f64,
        evidence: &Evidence,
    ) -> Result<Self, ProfileError> {
        let coarse = model.thinned(model.water.nodes().len() / LEVELS);
        let levels_dbar = levels(&model.place, deepest_dbar);
        let evaluator = Evaluator { coarse: &coarse, model, column, levels_dbar: &levels_dbar, evidence };
        let lines = evaluator.lines()?;
        let variance_m2 =
            (0..levels_dbar.len()).map(|i| lines.iter().map(|line| line.effect_m[i].powi(2)).sum()).collect();
        let supplied_noise = evidence.supplied.get(&Term::PressureNoise).copied();
        let (noise_dbar, noise_basis) = match (supplied_noise, evidence.noise.deviation_dbar) {
            (Some(s), _) => (s.standard_uncertainty, s.basis),
            (None, Some(deviation)) => (deviation, Basis::Data),
            (None, None) => (crate::depth::ASSUMED_NOISE_DBAR, Basis::Assumed),
        };
        let supplied_peak = evidence.supplied.get(&Term::PeakEstimate).copied();
        Ok(Self { levels_dbar, lines, variance_m2, noise_dbar, noise_basis, supplied_peak })
    }

    /// Standard uncertainty in m of the depth of one sample at sea pressure `pressure_dbar`, where depth changes by
    /// `slope_m_dbar`: the errors of the whole profile and the noise of this one reading.
    pub fn of_sample_m(&self, pressure_dbar: f64, slope_m_dbar: f64) -> f64 {
        let systematic = interpolate(&self.levels_dbar, &self.variance_m2, pressure_dbar).max(0.0);
        (systematic + (self.noise_dbar * slope_m_dbar).powi(2)).sqrt()
    }

    /// The budget of the deepest point, where depth changes by `slope_m_dbar`.
    pub fn budget(&self, deepest: &Deepest, slope_m_dbar: f64, coverage_probability: f64) -> Budget {
        let mut terms: Vec<BudgetTerm> = self
            .lines
            .iter()
            .map(|line| {
                let u = interpolate(&self.levels_dbar, &line.u, deepest.pressure_dbar);
                let effect = interpolate(&self.levels_dbar, &line.effect_m, deepest.pressure_dbar);
                let sensitivity = if u > 0.0 { effect / u } else { 0.0 };
                BudgetTerm::new(line.term, line.value, u, sensitivity, line.basis)
                    .distribution(line.distribution)
                    .degrees_of_freedom(line.degrees_of_freedom)
            })
            .collect();
        let u_noise = match self.noise_basis {
            Basis::Data | Basis::Assumed => deepest.u_noise_dbar,
            Basis::Sheet | Basis::Option => self.noise_dbar * deepest.noise_share,
        };
        terms.push(BudgetTerm::new(Term::PressureNoise, 0.0, u_noise, slope_m_dbar, self.noise_basis));
        let (u_peak, basis) = self
            .supplied_peak
            .map_or((deepest.u_peak_dbar, Basis::Data), |s| (s.standard_uncertainty, s.basis));
        terms.push(BudgetTerm::new(Term::PeakEstimate, 0.0, u_peak, slope_m_dbar, basis));
        terms.sort_by_key(|t| Term::ALL.iter().position(|term| term.key() == t.term));
        combine(terms, &[], coverage_probability)
    }
}

/// Levels at which uncertainty is evaluated: close together near the surface, where it changes most, and the deepest.
fn levels(place: &Place, deepest_dbar: f64) -> Vec<f64> {
    let surface = place.surface_dbar;
    let reach = (deepest_dbar - surface).max(0.1);
    let steps = 120;
    (0..=steps).map(|i| surface + reach * (f64::from(i) / f64::from(steps)).powi(2)).collect()
}

/// Linear between levels, the end value beyond them.
fn interpolate(levels: &[f64], values: &[f64], at: f64) -> f64 {
    let upper = levels.partition_point(|&l| l < at);
    if upper == 0 {
        return values[0];
    }
    if upper == levels.len() {
        return values[upper - 1];
    }
    let (a, b) = (levels[upper - 1], levels[upper]);
    values[upper - 1] + (values[upper] - values[upper - 1]) * (at - a) / (b - a)
}
