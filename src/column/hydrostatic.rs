//! The hydrostatic balance: `v dp = g dz` from the sea surface down.

use super::profile::{Profile, interval};
use crate::constants::{GRAVITATION_M3_KG_S2, PA_PER_DBAR};
use crate::gravity::Gravity;
use std::f64::consts::PI;

/// A column of water with depth and gravity at each node of its profile.
///
/// `Phi(p) = integral of v dp` from the surface is exact for specific volume linear between nodes.
/// `z` follows from `dPhi = g(z) dz`, where `g(z) = g_b(z) - 4 pi G M(z)`: gravity before the
/// water's pull ([`Gravity::before_water_m_s2`]) less the pull of the layer above, of mass per area
/// `M(z) = integral of dp / g`. A layer that is crossed pulls up by `2 pi G M` where before it pulled down by as much,
/// hence the 4. Between nodes gravity is linear in depth, which is true of it to 1e-12 over a metre.
#[derive(Debug, Clone, PartialEq)]
pub struct Column {
    pressure_dbar: Vec<f64>,
    specific_volume_m3_kg: Vec<f64>,
    depth_m: Vec<f64>,
    gravity_m_s2: Vec<f64>,
}

impl Column {
    /// Integrates `profile` from the sea surface, which is at the sea pressure `surface_dbar`
    /// (air pressure less the standard atmosphere), under `gravity`.
    pub fn integrate(profile: &Profile, surface_dbar: f64, gravity: &dyn Gravity) -> Self {
        let (pressure_dbar, specific_volume_m3_kg) = profile.starting_at(surface_dbar).into_parts();
        let (p, v) = (&pressure_dbar, &specific_volume_m3_kg);
        let pull = if gravity.water_pulls() { 4.0 * PI * GRAVITATION_M3_KG_S2 } else { 0.0 };
        let (mut z, mut g, mut mass) = (0.0, gravity.before_water_m_s2(0.0), 0.0);
        let mut depth_m = Vec::with_capacity(p.len());
        let mut gravity_m_s2 = Vec::with_capacity(p.len());
        depth_m.push(z);
        gravity_m_s2.push(g);
        for i in 1..p.len() {
            let dp_pa = (p[i] - p[i - 1]) * PA_PER_DBAR;
            let dphi = 0.5 * (v[i] + v[i - 1]) * dp_pa;
            let (mut next_z, mut next_g, mut next_mass) = (z, g, mass);
            // Each pass gains a factor of about 1e-7 per metre of the step: three are more than a kilometre needs.
            for _ in 0..3 {
                let mean_g = 0.5 * (g + next_g);
                next_z = z + dphi / mean_g;
                next_mass = mass + dp_pa / mean_g;
                next_g = gravity.before_water_m_s2(next_z) - pull * next_mass;
            }
            (z, g, mass) = (next_z, next_g, next_mass);
            depth_m.push(z);
            gravity_m_s2.push(g);
        }
        Self { pressure_dbar, specific_volume_m3_kg, depth_m, gravity_m_s2 }
    }

    /// Sea pressures of the nodes in dbar, the first at the surface.
    pub fn pressure_dbar(&self) -> &[f64] {
        &self.pressure_dbar
    }

    /// Depths of the nodes in m below the sea surface, the first 0.
    pub fn depths_m(&self) -> &[f64] {
        &self.depth_m
    }

    /// Depth in m below the sea surface at sea pressure `pressure_dbar`; negative above the surface, where
    /// the top of the column is continued.
    pub fn depth_m(&self, pressure_dbar: f64) -> f64 {
        self.point(pressure_dbar).0
    }

    /// Gravity in m/s2 at sea pressure `pressure_dbar`.
    pub fn gravity_m_s2(&self, pressure_dbar: f64) -> f64 {
        self.point(pressure_dbar).1
    }

    /// Specific volume in m3/kg of the column at sea pressure `pressure_dbar`.
    pub fn specific_volume_m3_kg(&self, pressure_dbar: f64) -> f64 {
        self.point(pressure_dbar).2
    }

    /// Depth in m below the sea surface, as [`Column::depth_m`], and its change with pressure in m/dbar, `v / g`.
    pub fn depth_and_slope(&self, pressure_dbar: f64) -> (f64, f64) {
        let (depth_m, gravity, volume) = self.point(pressure_dbar);
        (depth_m, volume * PA_PER_DBAR / gravity)
    }

    fn volume_line(&self, i: usize) -> (f64, f64) {
        let (p, v) = (&self.pressure_dbar, &self.specific_volume_m3_kg);
        (v[i], (v[i + 1] - v[i]) / (p[i + 1] - p[i]))
    }

    /// Depth, gravity and specific volume at a pressure.
    fn point(&self, pressure_dbar: f64) -> (f64, f64, f64) {
        let i = interval(&self.pressure_dbar, pressure_dbar);
        let dp = pressure_dbar - self.pressure_dbar[i];
        let (v, slope) = self.volume_line(i);
        let dphi = (v + 0.5 * slope * dp) * dp * PA_PER_DBAR;
        let (z, g) = (self.depth_m[i], self.gravity_m_s2[i]);
        let growth = (self.gravity_m_s2[i + 1] - g) / (self.depth_m[i + 1] - z);
        // dphi = g dz + growth dz^2 / 2, solved in the form that loses no digits when growth is small.
        let root = (g * g + 2.0 * growth * dphi).sqrt();
        (z + 2.0 * dphi / (g + root), root, v + slope * dp)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::gravity::{ConstantGravity, LinearGravity, LocalGravity};

    fn compressible() -> Profile {
        let p: Vec<f64> = (0..=110).map(|i| f64::from(i) * 100.0).collect();
        let v = p.iter().map(|p| 9.73e-4 - 4.0e-9 * p + 1.1e-14 * p * p).collect();
        Profile::new(p, v).unwrap()
    }

    #[test]
    fn uniform_water_under_constant_gravity_is_p_over_rho_g() {
        let profile = Profile::new(vec![0.0, 11_000.0], vec![1.0 / 1028.0; 2]).unwrap();
        let column = Column::integrate(&profile, 0.0, &ConstantGravity { gravity_m_s2: 9.81 });
        for p in [0.0, 1.0, 77.7, 11_000.0, 11_200.0] {
            assert!((column.depth_m(p) - p * 1e4 / (1028.0 * 9.81)).abs() < 1e-9);
        }
    }

    #[test]
    fn linear_gravity_has_a_closed_form() {
        // Phi = g0 z + gradient z^2 / 2 for gravity linear in depth.
        let (g0, gradient): (f64, f64) = (9.79, 2.2e-6);
        let column = Column::integrate(
            &compressible(),
            0.0,
            &LinearGravity { surface_m_s2: g0, gradient_s2: gradient },
        );
        for p in [0.3_f64, 50.0, 1234.5, 10_999.0] {
            // The trapezoid sum of the profile, written out here on its own.
            let profile = compressible();
            let mut phi = 0.0;
            let mut below: f64 = 0.0;
            while below < p {
                let next = (below + 100.0).min(p);
                phi += 0.5 * (profile.at(below) + profile.at(next)) * (next - below) * 1e4;
                below = next;
            }
            let z = column.depth_m(p);
            assert!((g0 * z + 0.5 * gradient * z * z - phi).abs() < 1e-6, "{p}");
        }
    }

    #[test]
    fn coarse_steps_and_fine_steps_agree_in_gravity() {
        // The same water, nodes 1 dbar and 100 dbar apart with the same linear pieces: only the march differs.
        let coarse = compressible();
        let p: Vec<f64> = (0..=11_000).map(f64::from).collect();
        let v = p.iter().map(|&p| coarse.at(p)).collect();
        let fine = Profile::new(p, v).unwrap();
        let g = LocalGravity::normal(-23.2);
        let (a, b) = (Column::integrate(&coarse, 0.0, &g), Column::integrate(&fine, 0.0, &g));
        // Gravity curves by 6 gamma / a2 = 1.4e-12 and, water growing denser downward by 4.5 g/m4, by
        // 4 pi G x 4.5e-3 = 3.8e-12 m-1 s-2. Taking it for straight over 110 steps of 100 m costs
        // 110 x 100^3 x 5.2e-12 / 12 / 9.8 = 5e-6 m.
        for p in [10.0, 150.0, 5_000.0, 11_000.0] {
            assert!((a.depth_m(p) - b.depth_m(p)).abs() < 5e-6, "{p}: {}", a.depth_m(p) - b.depth_m(p));
        }
    }

    #[test]
    fn the_surface_is_at_zero_and_depth_rises() {
        let column = Column::integrate(&compressible(), -0.05, &LocalGravity::normal(60.0));
        assert_eq!(column.depth_m(-0.05), 0.0);
        assert!(column.depth_m(-0.10) < 0.0);
        let mut before = -1.0;
        for i in 0..2_200 {
            let z = column.depth_m(f64::from(i) * 5.0);
            assert!(z > before);
            before = z;
        }
    }

    #[test]
    fn gravity_in_the_sea_grows_by_the_free_air_gradient_less_the_water() {
        // 0.3086 mGal/m less 4 pi G rho = 0.0864 mGal/m for 1030 kg/m3 (textbook Poincare-Prey reduction).
        let column = Column::integrate(&compressible(), 0.0, &LocalGravity::normal(45.0));
        let p = 1000.0;
        let gradient = (column.gravity_m_s2(p) - column.gravity_m_s2(0.0)) / column.depth_m(p);
        assert!((gradient - (0.3086e-5 - 0.0864e-5)).abs() < 0.002e-5, "{gradient}");
    }
}
