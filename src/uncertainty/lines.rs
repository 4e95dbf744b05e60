//! Each term as a line: its standard uncertainty and its effect on depth along the profile.

use super::budget::{Basis, Distribution};
use super::evaluate::{Evidence, WaterOrigin};
use super::term::Term;
use crate::cast::TareBasis;
use crate::column::{Column, ProfileError, Salt, Water, WaterNode, WaterShift};
use crate::constants::{HPA_PER_DBAR, STANDARD_ATMOSPHERE_DBAR};
use crate::depth::{Model, Shift};
use crate::seawater::{Composition, density_kg_m3};

/// Relative standard uncertainty of pressure when no certificate is at hand.
const ASSUMED_PRESSURE_RELATIVE: f64 = 1.0e-4;
/// Standard uncertainty of the air pressure in hPa when the user gives it, and when the standard atmosphere is assumed.
const GIVEN_AIR_HPA: f64 = 1.0;
const ASSUMED_AIR_HPA: f64 = 10.0;
/// Standard uncertainty of Absolute Salinity in g/kg by the atlas of composition (recalled from McDougall et al. 2012).
const ATLAS_G_KG: f64 = 0.005;
/// The same where the reference composition stands in for that of the place: in the open ocean the two differ by 0 to 0.027
/// g/kg (TEOS-10 manual, appendix A.5), a rectangular distribution.
const REFERENCE_COMPOSITION_G_KG: f64 = 0.015;
/// Standard uncertainty of the equation of state in ppm of specific volume, to 100 MPa and beyond (from memory: no table
/// of the releases at hand).
const ASSUMED_EOS_PPM: (f64, f64) = (10.0, 20.0);
/// Share of the in-situ density effect by which one leg may misrepresent the water (common practice, no source).
const ONE_LEG_SHARE: f64 = 5.0e-4;
/// The same for a profile from another cast (common practice, no source).
const OTHER_CAST_SHARE: f64 = 5.0e-2;
/// Representativeness is never better than this in m.
const LEAST_REPRESENTATIVENESS_M: f64 = 1.0e-4;
/// The standard ocean in place of the real one: metres that the warm upper water may be worth, with the pressure over which
/// they build up, and the relative error of the rest (common practice, no source; the steric height of the open ocean spans
/// some 2 m, and full depths come out 6 to 8 m short).
const STANDARD_OCEAN: (f64, f64, f64) = (1.3, 500.0, 3.0e-4);
/// Density difference in kg/m3 between surface and deep water of an unsampled gap, and the pressure in dbar over which it
/// develops (common practice, no source).
const GAP: (f64, f64) = (5.0, 300.0);
/// One error that moves the whole profile, as depth at each level.
pub(super) struct Line {
    pub term: Term,
    pub value: f64,
    /// Standard uncertainty at each level, in the unit of the term.
    pub u: Vec<f64>,
    /// Effect of one standard uncertainty on depth at each level, in m, signed.
    pub effect_m: Vec<f64>,
    pub distribution: Distribution,
    pub degrees_of_freedom: Option<f64>,
    pub basis: Basis,
}

/// Evaluates the terms of one model.
pub(super) struct Evaluator<'a> {
    pub coarse: &'a Model,
    pub model: &'a Model,
    pub column: &'a Column,
    pub levels_dbar: &'a [f64],
    pub evidence: &'a Evidence<'a>,
}

impl Evaluator<'_> {
    /// All lines, in no order that matters.
    pub fn lines(&self) -> Result<Vec<Line>, ProfileError> {
        let mut lines = vec![self.pressure_calibration()?, self.tare()?, self.air_pressure()?];
        if self.evidence.origin != WaterOrigin::StandardOcean {
            let water = |water| Shift { water, ..Shift::default() };
            lines.push(self.plain(Term::TemperatureCalibration, 0.0, |u| {
                water(WaterShift { temperature_degc: u, ..WaterShift::default() })
            })?);
            let term = match self.model.water.salt() {
                Salt::Conductivity => Term::ConductivityCalibration,
                Salt::Practical | Salt::Absolute => Term::SalinityCalibration,
            };
            lines.push(self.plain(term, 0.0, |u| water(WaterShift { salt: u, ..WaterShift::default() }))?);
            lines.push(self.composition()?);
        }
        lines.push(self.equation_of_state()?);
        lines.push(self.representativeness()?);
        if self.evidence.origin != WaterOrigin::StandardOcean {
            lines.push(self.surface_gap()?);
        }
        let place = &self.model.place;
        lines.push(self.plain(Term::SurfaceGravity, place.surface_gravity.mgal(), |u| Shift {
            surface_gravity_mgal: u,
            ..Shift::default()
        })?);
        lines.push(self.plain(Term::GravityGradient, place.gradient_eotvos, |u| Shift {
            gradient_eotvos: u,
            ..Shift::default()
        })?);
        lines.push(self.plain(Term::GeoidHeight, place.geoid_height_m, |u| Shift {
            geoid_height_m: u,
            ..Shift::default()
        })?);
        lines.push(self.position()?);
        lines.push(self.plain(Term::WaterLevel, place.water_level_m, |u| Shift {
            water_level_m: u,
            ..Shift::default()
        })?);
        lines.push(self.plain(Term::ReferenceOffset, place.reference_below_sensor_m, |u| Shift {
            reference_below_sensor_m: u,
            ..Shift::default()
        })?);
        lines.push(self.integration()?);
        Ok(lines)
    }

    /// The user's word on a term, else its default.
    fn settled(&self, term: Term, otherwise: f64) -> (f64, Basis) {
        self.evidence
            .supplied
            .get(&term)
            .map_or((otherwise, Basis::Assumed), |s| (s.standard_uncertainty, s.basis))
    }

    /// Half the difference of the depths with the error put on with either sign.
    fn effect(&self, shift: impl Fn(f64) -> Shift) -> Result<Vec<f64>, ProfileError> {
        let plus = self.coarse.depths_m(self.levels_dbar, &shift(1.0))?;
        let minus = self.coarse.depths_m(self.levels_dbar, &shift(-1.0))?;
        Ok(plus.iter().zip(&minus).map(|(a, b)| 0.5 * (a - b)).collect())
    }

    /// A term with one and the same standard uncertainty all along the profile.
    fn plain(&self, term: Term, value: f64, shift: impl Fn(f64) -> Shift) -> Result<Line, ProfileError> {
        let (u, basis) = self.settled(term, term.assumed().unwrap_or(0.0));
        self.line(term, value, u, basis, shift)
    }

    fn line(
        &self,
        term: Term,
        value: f64,
        u: f64,
        basis: Basis,
        shift: impl Fn(f64) -> Shift,
    ) -> Result<Line, ProfileError> {
        Ok(Line {
            term,
            value,
            u: vec![u; self.levels_dbar.len()],
            effect_m: self.effect(|sign| shift(sign * u))?,
            distribution: Distribution::Normal,
            degrees_of_freedom: None,
            basis,
        })
    }

    /// `u = sqrt(u_constant^2 + (u_relative p)^2)`: an offset and an error of the slope, each one error along the whole profile,
    /// independent of each other.
    fn pressure_calibration(&self) -> Result<Line, ProfileError> {
        let (constant, relative, basis) = match self.evidence.supplied.get(&Term::PressureCalibration) {
            Some(s) => (s.standard_uncertainty, s.relative, s.basis),
            None => (0.0, ASSUMED_PRESSURE_RELATIVE, Basis::Assumed),
        };
        let water = |water| Shift { water, ..Shift::default() };
        let of_offset = self
            .effect(|sign| water(WaterShift { pressure_dbar: sign * constant, ..WaterShift::default() }))?;
        let of_slope = self.effect(|sign| {
            water(WaterShift { pressure_relative: sign * relative, ..WaterShift::default() })
        })?;
        Ok(Line {
            term: Term::PressureCalibration,
            value: 0.0,
            u: self.levels_dbar.iter().map(|p| constant.hypot(relative * p)).collect(),
            effect_m: of_offset.iter().zip(&of_slope).map(|(a, b)| a.hypot(*b).copysign(a + b)).collect(),
            distribution: Distribution::Normal,
            degrees_of_freedom: None,
            basis,
        })
    }

    fn tare(&self) -> Result<Line, ProfileError> {
        let tare = self.evidence.tare;
        let (u, basis) = match (self.evidence.supplied.get(&Term::Tare), tare.basis) {
            (Some(s), _) => (s.standard_uncertainty, s.basis),
            (None, TareBasis::Deck) => (tare.standard_uncertainty_dbar, Basis::Data),
            (None, _) => (tare.standard_uncertainty_dbar, Basis::Assumed),
        };
        let line = self.line(Term::Tare, tare.value_dbar, u, basis, |u| Shift {
            // What the zero reads too much is taken off every pressure.
            water: WaterShift { pressure_dbar: -u, ..WaterShift::default() },
            ..Shift::default()
        })?;
        let degrees_of_freedom = if basis == Basis::Data { tare.degrees_of_freedom } else { None };
        Ok(Line { degrees_of_freedom, ..line })
    }

    fn air_pressure(&self) -> Result<Line, ProfileError> {
        let otherwise = if self.evidence.air_pressure_given { GIVEN_AIR_HPA } else { ASSUMED_AIR_HPA };
        let (u, basis) = self.settled(Term::AirPressure, otherwise);
        let follows = self.evidence.pressure_follows_air;
        let value = (self.model.place.surface_dbar + STANDARD_ATMOSPHERE_DBAR) * HPA_PER_DBAR;
        self.line(Term::AirPressure, value, u, basis, |u| {
            let dbar = u / HPA_PER_DBAR;
            Shift {
                surface_dbar: dbar,
                water: WaterShift {
                    pressure_dbar: if follows { dbar } else { 0.0 },
                    ..WaterShift::default()
                },
                ..Shift::default()
            }
        })
    }

    /// Gravity is flat at the equator and the poles, where the central difference vanishes: the larger of both sides counts.
    fn position(&self) -> Result<Line, ProfileError> {
        let latitude = self.model.place.latitude_deg;
        let line = self.plain(Term::Position, latitude, |u| Shift { latitude_deg: u, ..Shift::default() })?;
        let u = line.u[0];
        let plain = self.coarse.depths_m(self.levels_dbar, &Shift::default())?;
        let side = |degrees: f64| -> Result<Vec<f64>, ProfileError> {
            let shift = Shift { latitude_deg: degrees, ..Shift::default() };
            let depths = self.coarse.depths_m(self.levels_dbar, &shift)?;
            Ok(depths.iter().zip(&plain).map(|(moved, z)| moved - z).collect())
        };
        let effect_m = side(u)?
            .into_iter()
            .zip(side(-u)?)
            .map(|(north, south)| if north.abs() >= south.abs() { north } else { -south })
            .collect();
        Ok(Line { effect_m, ..line })
    }

    /// Value: how far the deepest water is from the reference composition.
    fn composition(&self) -> Result<Line, ProfileError> {
        let otherwise = if self.evidence.composition_known { ATLAS_G_KG } else { REFERENCE_COMPOSITION_G_KG };
        let (u, basis) = self.settled(Term::SalinityComposition, otherwise);
        let water = &self.model.water;
        let deepest = &water.nodes()[water.nodes().len() - 1];
        let anomaly_g_kg = water.salinity_of_level_g_kg(deepest)
            - water.with_composition(Composition::Reference).salinity_of_level_g_kg(deepest);
        self.line(Term::SalinityComposition, anomaly_g_kg, u, basis, |u| Shift {
            water: WaterShift { absolute_salinity_g_kg: u, ..WaterShift::default() },
            ..Shift::default()
        })
    }

    fn equation_of_state(&self) -> Result<Line, ProfileError> {
        let term = Term::EquationOfState;
        let (within, beyond, basis) = match self.evidence.supplied.get(&term) {
            Some(s) => (s.standard_uncertainty, s.standard_uncertainty, s.basis),
            None => (ASSUMED_EOS_PPM.0, ASSUMED_EOS_PPM.1, Basis::Assumed),
        };
        let shift = |within: f64, beyond: f64| Shift {
            water: WaterShift { volume_ppm: within, volume_ppm_beyond: beyond, ..WaterShift::default() },
            ..Shift::default()
        };
        let effect_m = self.effect(|sign| shift(sign * within, sign * beyond))?;
        let per_ppm = self.effect(|sign| shift(sign, sign))?;
        // Of a column that reaches beyond 100 MPa, the error of the mean.
        let u = effect_m
            .iter()
            .zip(&per_ppm)
            .map(|(effect, one)| if one.abs() > 1e-12 { effect / one } else { within })
            .collect();
        Ok(Line {
            term,
            value: 0.0,
            u,
            effect_m,
            distribution: Distribution::Normal,
            degrees_of_freedom: None,
            basis,
        })
    }

    /// Down leg against up leg where both are there: the truth lies between or near them, with bounds and no more known. Else
    /// a share of what in-situ density does to depth.
    fn representativeness(&self) -> Result<Line, ProfileError> {
        let term = Term::ProfileRepresentativeness;
        let n = self.levels_dbar.len();
        let (u, basis, distribution) = if let Some(s) = self.evidence.supplied.get(&term) {
            // The uncertainty of a whole column: it grows from nothing at the surface.
            let deepest = self.levels_dbar[n - 1];
            let u = self
                .levels_dbar
                .iter()
                .map(|p| s.standard_uncertainty * (p / deepest).clamp(0.0, 1.0))
                .collect();
            (u, s.basis, Distribution::Normal)
        } else if let (WaterOrigin::Log, Some(other)) = (self.evidence.origin, self.evidence.other_leg) {
            let other = Model { water: other.clone(), ..self.model.clone() };
            let theirs = other.depths_m(self.levels_dbar, &Shift::default())?;
            let u = theirs.iter().enumerate().map(|(i, z)| (z - self.depth_m(i)).abs() / 3f64.sqrt());
            (u.collect(), Basis::Data, Distribution::Rectangular)
        } else {
            (self.assumed_representativeness()?, Basis::Assumed, Distribution::Rectangular)
        };
        let u: Vec<f64> = if basis == Basis::Option || basis == Basis::Sheet {
            u
        } else {
            u.into_iter()
                .zip(self.levels_dbar)
                .map(|(u, p)| u.max(LEAST_REPRESENTATIVENESS_M * (p / 10.0).clamp(0.0, 1.0)))
                .collect()
        };
        Ok(Line { term, value: 0.0, effect_m: u.clone(), u, distribution, degrees_of_freedom: None, basis })
    }

    fn assumed_representativeness(&self) -> Result<Vec<f64>, ProfileError> {
        if self.evidence.origin == WaterOrigin::StandardOcean {
            let (upper_m, scale_dbar, relative) = STANDARD_OCEAN;
            return Ok((0..self.levels_dbar.len())
                .map(|i| {
                    let p = self.levels_dbar[i].max(0.0);
                    upper_m * (1.0 - (-p / scale_dbar).exp()) + relative * self.depth_m(i).abs()
                })
                .collect());
        }
        let share = match self.evidence.origin {
            WaterOrigin::Log => ONE_LEG_SHARE,
            _ => OTHER_CAST_SHARE,
        };
        let deepest = self.levels_dbar[self.levels_dbar.len() - 1];
        let standard = Model { water: Water::standard_ocean(deepest), ..self.model.clone() };
        let theirs = standard.depths_m(self.levels_dbar, &Shift::default())?;
        Ok(theirs.iter().enumerate().map(|(i, z)| share * (z - self.depth_m(i)).abs()).collect())
    }

    /// The water above the first level may be lighter: by half of what density changes over as much water below it, or by what
    /// an ocean may hide in so thick a layer.
    fn surface_gap(&self) -> Result<Line, ProfileError> {
        let nodes = self.model.water.nodes();
        let first = nodes[0].pressure_dbar;
        let gap = (first - self.model.place.surface_dbar).max(0.0);
        let below = nodes[nodes.partition_point(|n| n.pressure_dbar < first + gap).min(nodes.len() - 1)];
        let at_surface = |node: &WaterNode| {
            let salinity = self.model.water.salinity_of_level_g_kg(node);
            density_kg_m3(salinity, node.temperature_degc, 0.0)
        };
        let surface_density = at_surface(&nodes[0]);
        let seen = 0.5 * (at_surface(&below) - surface_density).abs() / 3f64.sqrt();
        let hidden = GAP.0 * (1.0 - (-gap / GAP.1).exp()) / 12f64.sqrt();
        let (u, basis) = match self.evidence.supplied.get(&Term::SurfaceGap) {
            Some(s) => (s.standard_uncertainty, s.basis),
            None if seen >= hidden => (seen, Basis::Data),
            None => (hidden, Basis::Assumed),
        };
        let line = self.line(Term::SurfaceGap, surface_density, u, basis, |u| Shift {
            water: WaterShift { gap_density_kg_m3: u, ..WaterShift::default() },
            ..Shift::default()
        })?;
        Ok(Line { distribution: Distribution::Rectangular, ..line })
    }

    /// The column on every second level against all of them; the trapezoid rule loses a quarter of its error when the step is
    /// halved, so that a third of the difference is left in the finer one.
    fn integration(&self) -> Result<Line, ProfileError> {
        let term = Term::Integration;
        let halved = self.model.thinned(2).depths_m(self.levels_dbar, &Shift::default())?;
        let (u, basis) = match self.evidence.supplied.get(&term) {
            Some(s) => (vec![s.standard_uncertainty; halved.len()], s.basis),
            None => {
                let u = halved.iter().enumerate().map(|(i, z)| (z - self.depth_m(i)).abs() / 3.0);
                (u.collect(), Basis::Data)
            }
        };
        Ok(Line {
            term,
            value: 0.0,
            effect_m: u.clone(),
            u,
            distribution: Distribution::Rectangular,
            degrees_of_freedom: None,
            basis,
        })
    }

    /// Depth of level `i` in m, as reported.
    fn depth_m(&self, i: usize) -> f64 {
        self.model.place.below_datum_m(self.column.depth_m(self.levels_dbar[i]))
    }
}
