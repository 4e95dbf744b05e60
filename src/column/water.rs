//! Water as it was observed, and the profile of specific volume that follows from it.

use super::profile::{Profile, ProfileError};
use crate::constants::STANDARD_ABSOLUTE_SALINITY_G_KG;
use crate::seawater::{
    Composition, EquationOfState, VALID_TO_DBAR, in_situ_temperature_degc, potential_temperature_degc,
    practical_salinity,
};

/// Nodes farther apart than this are filled in between, so that the curvature of specific volume with
/// pressure costs less than 0.1 mm of depth.
const WIDEST_STEP_DBAR: f64 = 25.0;

/// How the salt of a [`WaterNode`] is given.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Salt {
    /// Conductivity in mS/cm.
    Conductivity,
    /// Practical Salinity.
    Practical,
    /// Absolute Salinity in g/kg.
    Absolute,
}

/// One level of observed water.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct WaterNode {
    /// Sea pressure in dbar.
    pub pressure_dbar: f64,
    /// In-situ temperature in degC (ITS-90).
    pub temperature_degc: f64,
    /// Salt, in the unit of the [`Water`]'s [`Salt`].
    pub salt: f64,
}

/// Errors to put on the observed water, all zero for none. They act before salinity is computed, so that an error of
/// temperature reaches density by both of its ways.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct WaterShift {
    /// Added to every pressure, in dbar.
    pub pressure_dbar: f64,
    /// Added to every pressure, as a fraction of it.
    pub pressure_relative: f64,
    /// Added to every temperature, in degC.
    pub temperature_degc: f64,
    /// Added to every conductivity in mS/cm or Practical Salinity, whichever was measured.
    pub salt: f64,
    /// Added to every Absolute Salinity, in g/kg.
    pub absolute_salinity_g_kg: f64,
    /// Relative error of specific volume in parts per million, down to 100 MPa.
    pub volume_ppm: f64,
    /// The same beyond 100 MPa, where the equation of state is extrapolated.
    pub volume_ppm_beyond: f64,
    /// Added to the mean density of the unsampled water above the first level, in kg/m3.
    pub gap_density_kg_m3: f64,
}

/// A column of observed water, levels in increasing pressure.
#[derive(Debug, Clone, PartialEq)]
pub struct Water {
    nodes: Vec<WaterNode>,
    salt: Salt,
    composition: Composition,
    continued_to_dbar: f64,
    equation_of_state: EquationOfState,
}

/// Water at one level of the column as it is integrated, errors and composition included.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct WaterLevel {
    /// Sea pressure in dbar.
    pub pressure_dbar: f64,
    /// Absolute Salinity in g/kg.
    pub absolute_salinity_g_kg: f64,
    /// In-situ temperature in degC (ITS-90).
    pub temperature_degc: f64,
}

impl Water {
    /// Water from its levels. Below the last level it is continued to `continued_to_dbar` with the salinity and the
    /// potential temperature of that level; above the first, with its salinity and temperature.
    ///
    /// # Errors
    /// [`ProfileError`] when fewer than two levels are left or pressures do not increase.
    pub fn new(
        nodes: Vec<WaterNode>,
        salt: Salt,
        composition: Composition,
        continued_to_dbar: f64,
    ) -> Result<Self, ProfileError> {
        if nodes.len() < 2 {
            return Err(ProfileError::TooFew { found: nodes.len() });
        }
        if let Some(pair) = nodes.windows(2).find(|pair| pair[1].pressure_dbar <= pair[0].pressure_dbar) {
            return Err(ProfileError::NotIncreasing {
                before: pair[0].pressure_dbar,
                here: pair[1].pressure_dbar,
            });
        }
        Ok(Self {
            nodes,
            salt,
            composition,
            continued_to_dbar,
            equation_of_state: EquationOfState::default(),
        })
    }

    /// The standard ocean down to `to_dbar`: 35.165 04 g/kg and a Conservative Temperature, here the same as the
    /// potential temperature, of 0 degC (TEOS-10 manual, section 3.32: the reference of dynamic height).
    pub fn standard_ocean(to_dbar: f64) -> Self {
        let to_dbar = to_dbar.max(1.0);
        let count = (to_dbar / WIDEST_STEP_DBAR).ceil();
        let level = |i: f64| {
            let pressure_dbar = to_dbar * i / count;
            let salt = STANDARD_ABSOLUTE_SALINITY_G_KG;
            WaterNode {
                pressure_dbar,
                temperature_degc: in_situ_temperature_degc(salt, 0.0, pressure_dbar),
                salt,
            }
        };
        Self {
            nodes: (0..=count as usize).map(|i| level(i as f64)).collect(),
            salt: Salt::Absolute,
            composition: Composition::Reference,
            continued_to_dbar: 0.0,
            equation_of_state: EquationOfState::default(),
        }
    }

    /// The same water with specific volume by another route.
    #[must_use]
    pub fn with_equation_of_state(self, equation_of_state: EquationOfState) -> Self {
        Self { equation_of_state, ..self }
    }

    /// By which route its specific volume is computed.
    pub fn equation_of_state(&self) -> EquationOfState {
        self.equation_of_state
    }

    /// The observed levels.
    pub fn nodes(&self) -> &[WaterNode] {
        &self.nodes
    }

    /// How salt was measured.
    pub fn salt(&self) -> Salt {
        self.salt
    }

    /// What its salt is made of.
    pub fn composition(&self) -> &Composition {
        &self.composition
    }

    /// The same water with salt of another composition.
    #[must_use]
    pub fn with_composition(&self, composition: Composition) -> Self {
        Self { composition, ..self.clone() }
    }

    /// The same water, continued at least to `to_dbar`.
    #[must_use]
    pub fn continued_to(&self, to_dbar: f64) -> Self {
        Self { continued_to_dbar: self.continued_to_dbar.max(to_dbar), ..self.clone() }
    }

    /// Pressure in dbar to which the water is known or continued.
    pub fn deepest_dbar(&self) -> f64 {
        self.nodes[self.nodes.len() - 1].pressure_dbar.max(self.continued_to_dbar)
    }

    /// Every `every`-th level, with the first and the last.
    #[must_use]
    pub fn thinned(&self, every: usize) -> Self {
        let last = self.nodes.len() - 1;
        let every = every.clamp(1, last);
        let nodes = (0..last).step_by(every).chain([last]).map(|i| self.nodes[i]).collect();
        Self { nodes, ..self.clone() }
    }

    /// Absolute Salinity in g/kg of a level.
    pub fn salinity_of_level_g_kg(&self, node: &WaterNode) -> f64 {
        self.absolute_salinity_g_kg(node, &WaterShift::default())
    }

    /// Absolute Salinity in g/kg of a level, with the errors of `shift`.
    fn absolute_salinity_g_kg(&self, node: &WaterNode, shift: &WaterShift) -> f64 {
        let salt = match self.salt {
            Salt::Absolute => node.salt,
            Salt::Practical => {
                self.composition.absolute_salinity_g_kg(node.salt + shift.salt, node.pressure_dbar)
            }
            Salt::Conductivity => self.composition.absolute_salinity_g_kg(
                practical_salinity(
                    node.salt + shift.salt,
                    node.temperature_degc + shift.temperature_degc,
                    shift.pressure(node.pressure_dbar),
                ),
                node.pressure_dbar,
            ),
        };
        salt + shift.absolute_salinity_g_kg
    }

    /// Specific volume against sea pressure from the surface at `surface_dbar` down, with the errors of
    /// `shift`.
    ///
    /// # Errors
    /// [`ProfileError`] when a level is not that of water (see [`Profile::new`]).
    pub fn profile(&self, surface_dbar: f64, shift: &WaterShift) -> Result<Profile, ProfileError> {
        let levels = self.levels(surface_dbar, shift);
        let volume = |level: &WaterLevel| {
            let beyond = level.pressure_dbar > VALID_TO_DBAR;
            let ppm = if beyond { shift.volume_ppm_beyond } else { shift.volume_ppm };
            let (s, t) = (level.absolute_salinity_g_kg, level.temperature_degc);
            self.equation_of_state.specific_volume_m3_kg(s, t, level.pressure_dbar) * (1.0 + ppm * 1e-6)
        };
        let mut specific_volume_m3_kg: Vec<f64> = levels.iter().map(volume).collect();
        // Above the first observed level nothing is known. The error fades from the surface to that level, which is
        // known: twice the error of the mean at the top.
        let first_dbar = shift.pressure(self.nodes[0].pressure_dbar);
        for (v, level) in specific_volume_m3_kg.iter_mut().zip(&levels) {
            if level.pressure_dbar >= first_dbar {
                break;
            }
            let share = (first_dbar - level.pressure_dbar) / (first_dbar - surface_dbar);
            *v -= 2.0 * share * shift.gap_density_kg_m3 * *v * *v;
        }
        Profile::new(levels.iter().map(|l| l.pressure_dbar).collect(), specific_volume_m3_kg)
    }

    /// The water of that profile: the observed levels, with a level at the surface, levels between those that stand far apart and
    /// the continuation below.
    pub fn levels(&self, surface_dbar: f64, shift: &WaterShift) -> Vec<WaterLevel> {
        let level = |node: &WaterNode| WaterLevel {
            pressure_dbar: shift.pressure(node.pressure_dbar),
            absolute_salinity_g_kg: self.absolute_salinity_g_kg(node, shift),
            temperature_degc: node.temperature_degc + shift.temperature_degc,
        };
        let mut levels = Vec::with_capacity(self.nodes.len() + 2);
        let mut above = level(&self.nodes[0]);
        if surface_dbar < above.pressure_dbar {
            // The unsampled water is as salty and as warm as the first level.
            let surface = WaterLevel { pressure_dbar: surface_dbar, ..above };
            levels.push(surface);
            bridge(&mut levels, &surface, &above);
        }
        levels.push(above);
        for node in &self.nodes[1..] {
            let here = level(node);
            bridge(&mut levels, &above, &here);
            levels.push(here);
            above = here;
        }
        continue_adiabatically(&mut levels, &above, shift.pressure(self.continued_to_dbar));
        levels
    }
}

impl WaterShift {
    /// A sea pressure in dbar with the errors of this shift.
    pub fn pressure(&self, pressure_dbar: f64) -> f64 {
        pressure_dbar * (1.0 + self.pressure_relative) + self.pressure_dbar
    }
}

impl WaterLevel {
    /// The level at `share` of the way in pressure from this one to `below`, salinity and temperature linear between them.
    #[must_use]
    pub fn towards(&self, below: &Self, share: f64) -> Self {
        let between = |a: f64, b: f64| a + (b - a) * share;
        Self {
            pressure_dbar: between(self.pressure_dbar, below.pressure_dbar),
            absolute_salinity_g_kg: between(self.absolute_salinity_g_kg, below.absolute_salinity_g_kg),
            temperature_degc: between(self.temperature_degc, below.temperature_degc),
        }
    }
}

/// Levels between two that stand far apart.
fn bridge(levels: &mut Vec<WaterLevel>, above: &WaterLevel, below: &WaterLevel) {
    let pieces = ((below.pressure_dbar - above.pressure_dbar) / WIDEST_STEP_DBAR - 1e-9).ceil();
    levels.extend((1..pieces as usize).map(|piece| above.towards(below, piece as f64 / pieces)));
}

/// Water below the last level: its salinity, its entropy.
fn continue_adiabatically(levels: &mut Vec<WaterLevel>, last: &WaterLevel, to_dbar: f64) {
    let gap = to_dbar - last.pressure_dbar;
    if gap <= 0.0 {
        return;
    }
    let salinity = last.absolute_salinity_g_kg;
    let theta = potential_temperature_degc(salinity, last.temperature_degc, last.pressure_dbar);
    let pieces = (gap / WIDEST_STEP_DBAR).ceil();
    levels.extend((1..=pieces as usize).map(|piece| {
        let pressure_dbar = last.pressure_dbar + gap * piece as f64 / pieces;
        let temperature_degc = in_situ_temperature_degc(salinity, theta, pressure_dbar);
        WaterLevel { pressure_dbar, temperature_degc, ..*last }
    }));
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::seawater::specific_volume_m3_kg;

    fn two_levels() -> Water {
        let nodes = vec![
            WaterNode { pressure_dbar: 4.0, temperature_degc: 20.0, salt: 35.0 },
            WaterNode { pressure_dbar: 104.0, temperature_degc: 10.0, salt: 34.0 },
        ];
        Water::new(nodes, Salt::Practical, Composition::Reference, 300.0).unwrap()
    }

    #[test]
    fn reaches_from_the_surface_to_the_end_without_wide_steps() {
        let profile = two_levels().profile(-0.1, &WaterShift::default()).unwrap();
        let p = profile.pressure_dbar();
        assert_eq!((p[0], p[p.len() - 1]), (-0.1, 300.0));
        assert!(p.windows(2).all(|w| w[1] - w[0] <= WIDEST_STEP_DBAR + 1e-9));
    }

    #[test]
    fn the_gap_above_holds_the_water_of_the_first_level() {
        let profile = two_levels().profile(0.0, &WaterShift::default()).unwrap();
        let salinity = Composition::Reference.absolute_salinity_g_kg(35.0, 4.0);
        assert_eq!(profile.specific_volume_m3_kg()[0], specific_volume_m3_kg(salinity, 20.0, 0.0));
    }

    #[test]
    fn an_error_of_the_gap_shifts_its_mean_density() {
        let plain = two_levels().profile(0.0, &WaterShift::default()).unwrap();
        let shift = WaterShift { gap_density_kg_m3: 0.5, ..WaterShift::default() };
        let shifted = two_levels().profile(0.0, &shift).unwrap();
        let mean = |p: &Profile| 0.5 * (p.at(0.0).recip() + p.at(4.0).recip());
        assert!((mean(&shifted) - mean(&plain) - 0.5).abs() < 1e-3);
    }

    #[test]
    fn the_continuation_has_no_stratification() {
        // Potential density of the continued water is that of the last level.
        let water = two_levels();
        let profile = water.profile(0.0, &WaterShift::default()).unwrap();
        let salinity = Composition::Reference.absolute_salinity_g_kg(34.0, 104.0);
        let theta = potential_temperature_degc(salinity, 10.0, 104.0);
        let t = in_situ_temperature_degc(salinity, theta, 300.0);
        assert_eq!(profile.at(300.0), specific_volume_m3_kg(salinity, t, 300.0));
    }

    #[test]
    fn thinning_keeps_both_ends() {
        let water = Water::standard_ocean(11_000.0);
        let thin = water.thinned(7);
        assert_eq!(thin.nodes()[0], water.nodes()[0]);
        assert_eq!(thin.nodes().last(), water.nodes().last());
        assert!(thin.nodes().len() < water.nodes().len() / 6);
    }
}
