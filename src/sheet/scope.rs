//! What one table of a sheet says: the station's for every cast, or a `[[cast]]` for its own logs.

use crate::settings::Layer;
use crate::uncertainty::{Basis, Supplied, Term};

/// The keys of one scope, the pressure certificate still in its parts so that a cast may replace one of them.
#[derive(Debug, Clone, Default, PartialEq)]
pub(super) struct Scope {
    pub layer: Layer,
    pub u_constant_dbar: Option<f64>,
    pub u_relative: Option<f64>,
}

impl Scope {
    /// Supplies the standard uncertainty of a term.
    pub fn supply(&mut self, term: Term, u: f64) {
        self.layer.settings.uncertainties.insert(term, Supplied::new(u, Basis::Sheet));
    }

    /// This scope, and `below` where this one is silent.
    pub fn or(self, mut below: Scope) -> Scope {
        // The certificate and `pressure_calibration` say the same in two ways: the nearer scope's way holds.
        let calibration = Term::PressureCalibration;
        if self.layer.settings.uncertainties.contains_key(&calibration) {
            (below.u_constant_dbar, below.u_relative) = (None, None);
        }
        if self.u_constant_dbar.is_some() || self.u_relative.is_some() {
            below.layer.settings.uncertainties.remove(&calibration);
        }
        Scope {
            layer: self.layer.or(below.layer),
            u_constant_dbar: self.u_constant_dbar.or(below.u_constant_dbar),
            u_relative: self.u_relative.or(below.u_relative),
        }
    }

    /// What the scope comes to.
    pub fn into_layer(self) -> Layer {
        let mut layer = self.layer;
        if self.u_constant_dbar.is_some() || self.u_relative.is_some() {
            let supplied = Supplied {
                standard_uncertainty: self.u_constant_dbar.unwrap_or(0.0),
                relative: self.u_relative.unwrap_or(0.0),
                basis: Basis::Sheet,
            };
            layer.settings.uncertainties.insert(Term::PressureCalibration, supplied);
        }
        layer
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn calibration(scope: Scope) -> Option<(f64, f64)> {
        let layer = scope.into_layer();
        let supplied = layer.settings.uncertainties.get(&Term::PressureCalibration)?;
        Some((supplied.standard_uncertainty, supplied.relative))
    }

    #[test]
    fn a_cast_replaces_one_part_of_the_certificate() {
        let station = Scope { u_constant_dbar: Some(0.1), u_relative: Some(5e-5), ..Scope::default() };
        let cast = Scope { u_constant_dbar: Some(0.4), ..Scope::default() };
        assert_eq!(calibration(cast.or(station)), Some((0.4, 5e-5)));
        assert_eq!(calibration(Scope::default()), None);
    }

    #[test]
    fn the_nearer_way_of_saying_it_holds() {
        let parts = Scope { u_constant_dbar: Some(0.1), u_relative: Some(5e-5), ..Scope::default() };
        let mut whole = Scope::default();
        whole.supply(Term::PressureCalibration, 0.7);
        assert_eq!(calibration(whole.clone().or(parts.clone())), Some((0.7, 0.0)));
        assert_eq!(calibration(parts.or(whole)), Some((0.1, 5e-5)));
    }
}
