//! Seawater: Practical Salinity, Absolute Salinity, the Gibbs function and the other equations of state.
//!
//! Pure functions of numbers, no input or output. Pressures are sea pressures in dbar,
//! temperatures in degC (ITS-90), Absolute Salinities in g/kg.

mod atlas;
mod coefficients;
mod composition;
mod eos80;
mod equation_of_state;
mod gibbs;
mod nested;
mod polynomial;
mod rows;
mod salinity;
mod temperature;

pub use atlas::{Atlas, AtlasColumn, Coverage};
pub use composition::Composition;
pub use eos80::{eos80_density_kg_m3, eos80_density_t68_kg_m3, eos80_specific_volume_m3_kg};
pub use equation_of_state::EquationOfState;
pub use gibbs::{VALID_TO_DBAR, density_kg_m3, entropy_j_kg_k, sound_speed_m_s, specific_volume_m3_kg};
pub use polynomial::polynomial_specific_volume_m3_kg;
pub use salinity::{conductivity_ms_cm, practical_salinity};
pub use temperature::{
    conservative_temperature_degc, in_situ_temperature_degc, potential_enthalpy_j_kg,
    potential_temperature_degc,
};
