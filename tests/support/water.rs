//! Columns of water that several tests use.

use seaplumb::column::{Salt, Water, WaterNode};
use seaplumb::seawater::{Composition, in_situ_temperature_degc};

pub fn hadal_salinity(p: f64) -> f64 {
    34.69 - 0.35 * (-p / 400.0).exp() + 0.8 * (-((p - 150.0) / 100.0).powi(2)).exp()
        - 0.25 * (-((p - 450.0) / 250.0).powi(2)).exp()
}

pub fn hadal_theta(p: f64) -> f64 {
    1.03 + 27.0 * (-p / 330.0).exp() + (-p / 1500.0).exp()
}

/// A column to `to_dbar` from its Practical Salinity and potential temperature.
pub fn column_of(
    to_dbar: f64,
    step_dbar: f64,
    salinity: impl Fn(f64) -> f64,
    theta: impl Fn(f64) -> f64,
) -> Water {
    let level = |i: u32| {
        let pressure_dbar = f64::from(i) * step_dbar;
        let salt = salinity(pressure_dbar);
        let absolute = Composition::Reference.absolute_salinity_g_kg(salt, pressure_dbar);
        WaterNode {
            pressure_dbar,
            temperature_degc: in_situ_temperature_degc(absolute, theta(pressure_dbar), pressure_dbar),
            salt,
        }
    };
    let count = (to_dbar / step_dbar).round() as u32;
    Water::new((0..=count).map(level).collect(), Salt::Practical, Composition::Reference, 0.0).expect("water")
}
