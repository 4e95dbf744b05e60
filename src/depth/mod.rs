//! From the water column to depths: of a pressure, of the deepest point, below a datum, at a reference point.

mod deepest;
mod ladder;
mod model;
mod shortcut;

pub use deepest::{ASSUMED_NOISE_DBAR, Deepest, LONGEST_WINDOW_S};
pub use ladder::{Rung, ladder};
pub use model::{Model, Place, Shift};
pub use shortcut::{
    Shortcut, leroy_parthiot_1998_depth_m, leroy_parthiot_standard_ocean_depth_m, saunders_1981_depth_m,
    unesco_44_depth_m,
};
