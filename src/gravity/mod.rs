//! Gravity: the ellipsoid's, its change with height, and what is known of the place.

mod ellipsoid;
mod local;

pub use ellipsoid::NormalGravity;
pub use local::{LocalGravity, SurfaceGravity};

/// Gravity along a plumb line into the sea.
pub trait Gravity {
    /// Gravity in m/s2 at `depth_m` below the sea surface, as if the water above were not there
    /// when [`Gravity::water_pulls`] is true.
    fn before_water_m_s2(&self, depth_m: f64) -> f64;

    /// Whether the upward pull of the water above, `4 pi G` times its mass per area, is still to be taken off.
    fn water_pulls(&self) -> bool {
        true
    }
}

/// The same gravity at every depth.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ConstantGravity {
    /// Gravity in m/s2.
    pub gravity_m_s2: f64,
}

impl Gravity for ConstantGravity {
    fn before_water_m_s2(&self, _depth_m: f64) -> f64 {
        self.gravity_m_s2
    }

    fn water_pulls(&self) -> bool {
        false
    }
}

/// Gravity that grows in proportion to depth, water included: the model of EOS-80 depth formulas.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LinearGravity {
    /// Gravity at the surface in m/s2.
    pub surface_m_s2: f64,
    /// Growth with depth in s-2.
    pub gradient_s2: f64,
}

impl Gravity for LinearGravity {
    fn before_water_m_s2(&self, depth_m: f64) -> f64 {
        self.surface_m_s2 + self.gradient_s2 * depth_m
    }

    fn water_pulls(&self) -> bool {
        false
    }
}
