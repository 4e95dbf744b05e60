//! A profile of specific volume against pressure.

/// Why numbers do not make a profile.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum ProfileError {
    /// Fewer than two nodes.
    #[error("a profile needs two pressures or more; {found} can be used")]
    TooFew {
        /// How many there are.
        found: usize,
    },
    /// The two lists differ in length.
    #[error("{pressures} pressures but {volumes} specific volumes")]
    Lengths {
        /// Number of pressures.
        pressures: usize,
        /// Number of specific volumes.
        volumes: usize,
    },
    /// Pressures do not increase.
    #[error("pressures must increase: {here} dbar follows {before} dbar")]
    NotIncreasing {
        /// The earlier pressure in dbar.
        before: f64,
        /// The later pressure in dbar.
        here: f64,
    },
    /// A specific volume that no water has.
    #[error("a specific volume of {volume} m3/kg at {pressure} dbar is not that of water")]
    NotWater {
        /// The specific volume in m3/kg.
        volume: f64,
        /// Its pressure in dbar.
        pressure: f64,
    },
}

/// Specific volume against sea pressure, linear between nodes, continued with the slope of the
/// first and the last interval beyond them.
#[derive(Debug, Clone, PartialEq)]
pub struct Profile {
    pressure_dbar: Vec<f64>,
    specific_volume_m3_kg: Vec<f64>,
}

impl Profile {
    /// A profile from sea pressures in dbar, strictly increasing, and specific volumes in m3/kg.
    ///
    /// # Errors
    /// [`ProfileError`] when there are fewer than two nodes, pressures do not increase, or a value is not that of
    /// water (5e-4 to 2e-3 m3/kg).
    pub fn new(pressure_dbar: Vec<f64>, specific_volume_m3_kg: Vec<f64>) -> Result<Self, ProfileError> {
        if pressure_dbar.len() != specific_volume_m3_kg.len() {
            return Err(ProfileError::Lengths {
                pressures: pressure_dbar.len(),
                volumes: specific_volume_m3_kg.len(),
            });
        }
        if pressure_dbar.len() < 2 {
            return Err(ProfileError::TooFew { found: pressure_dbar.len() });
        }
        if let Some(pair) = pressure_dbar.windows(2).find(|pair| !(pair[1] > pair[0] && pair[1].is_finite()))
        {
            return Err(ProfileError::NotIncreasing { before: pair[0], here: pair[1] });
        }
        if let Some(i) = specific_volume_m3_kg.iter().position(|v| !(5e-4..2e-3).contains(v)) {
            return Err(ProfileError::NotWater {
                volume: specific_volume_m3_kg[i],
                pressure: pressure_dbar[i],
            });
        }
        Ok(Self { pressure_dbar, specific_volume_m3_kg })
    }

    /// Sea pressures of the nodes in dbar.
    pub fn pressure_dbar(&self) -> &[f64] {
        &self.pressure_dbar
    }

    /// Specific volumes of the nodes in m3/kg.
    pub fn specific_volume_m3_kg(&self) -> &[f64] {
        &self.specific_volume_m3_kg
    }

    /// Pressures in dbar and specific volumes in m3/kg of the nodes.
    pub fn into_parts(self) -> (Vec<f64>, Vec<f64>) {
        (self.pressure_dbar, self.specific_volume_m3_kg)
    }

    /// Specific volume in m3/kg at `pressure_dbar`.
    pub fn at(&self, pressure_dbar: f64) -> f64 {
        let i = interval(&self.pressure_dbar, pressure_dbar);
        let (p, v) = (&self.pressure_dbar, &self.specific_volume_m3_kg);
        v[i] + (v[i + 1] - v[i]) * (pressure_dbar - p[i]) / (p[i + 1] - p[i])
    }

    /// The profile that starts at the pressure of the sea surface: nodes above it are cut, and what lies
    /// between it and the first node below is continued up to it.
    #[must_use]
    pub fn starting_at(&self, surface_dbar: f64) -> Self {
        let first = self.pressure_dbar.partition_point(|&p| p <= surface_dbar);
        let first = first.min(self.pressure_dbar.len() - 1);
        let mut pressure_dbar = vec![surface_dbar];
        let mut specific_volume_m3_kg = vec![self.at(surface_dbar)];
        pressure_dbar.extend_from_slice(&self.pressure_dbar[first..]);
        specific_volume_m3_kg.extend_from_slice(&self.specific_volume_m3_kg[first..]);
        Self { pressure_dbar, specific_volume_m3_kg }
    }
}

/// The interval `[i, i + 1]` of increasing `nodes` (two or more) that holds `x`; the first or the last when
/// `x` lies outside.
pub(super) fn interval(nodes: &[f64], x: f64) -> usize {
    nodes.partition_point(|&node| node <= x).clamp(1, nodes.len() - 1) - 1
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn refuses_what_is_no_profile() {
        assert_eq!(Profile::new(vec![1.0], vec![9.7e-4]), Err(ProfileError::TooFew { found: 1 }));
        assert!(matches!(
            Profile::new(vec![0.0, 5.0, 5.0], vec![9.7e-4; 3]),
            Err(ProfileError::NotIncreasing { before: 5.0, here: 5.0 })
        ));
        assert!(Profile::new(vec![0.0, f64::NAN], vec![9.7e-4; 2]).is_err());
        assert!(matches!(
            Profile::new(vec![0.0, 5.0], vec![9.7e-4, f64::NAN]),
            Err(ProfileError::NotWater { .. })
        ));
        assert!(matches!(Profile::new(vec![0.0, 5.0], vec![9.7e-4]), Err(ProfileError::Lengths { .. })));
    }

    #[test]
    fn starts_at_the_surface() {
        let profile = Profile::new(vec![-1.0, 1.0, 3.0], vec![9.8e-4, 9.7e-4, 9.6e-4]).unwrap();
        let cut = profile.starting_at(0.0);
        assert_eq!(cut.pressure_dbar(), &[0.0, 1.0, 3.0]);
        assert!((cut.specific_volume_m3_kg()[0] - 9.75e-4).abs() < 1e-18);
        let grown = profile.starting_at(-2.0);
        assert_eq!(grown.pressure_dbar(), &[-2.0, -1.0, 1.0, 3.0]);
        assert!((grown.specific_volume_m3_kg()[0] - 9.85e-4).abs() < 1e-18);
    }
}
