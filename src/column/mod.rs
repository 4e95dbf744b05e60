//! The water column: observed water, its profile of specific volume, and the depth that belongs to a pressure.

mod bins;
mod hydrostatic;
mod profile;
mod sound;
mod water;

pub use bins::{BIN_DBAR, bin_means, mean_of_legs};
pub use hydrostatic::Column;
pub use profile::{Profile, ProfileError};
pub use sound::SoundColumn;
pub use water::{Salt, Water, WaterLevel, WaterNode, WaterShift};
