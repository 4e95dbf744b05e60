//! Seawater: Practical Salinity, Absolute Salinity and the Gibbs function.
//!
//! Pure functions of numbers, no input or output. Pressures are sea pressures in dbar,
//! temperatures in degC (ITS-90), Absolute Salinities in g/kg.

mod atlas;
mod coefficients;
mod composition;
mod dual;
mod gibbs;
mod salinity;

pub use atlas::{Atlas, AtlasColumn, Coverage};
pub use composition::Composition;
pub use gibbs::{
    VALID_TO_DBAR, density_kg_m3, entropy_j_kg_k, in_situ_temperature_degc, potential_temperature_degc,
    sound_speed_m_s, specific_volume_m3_kg,
};
pub use salinity::practical_salinity;
