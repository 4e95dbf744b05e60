//! From the shortcut to the full answer, one correction at a time.

use super::model::Model;
use crate::column::{Column, ProfileError, Water, WaterShift};
use crate::constants::{PA_PER_DBAR, STANDARD_GRAVITY_M_S2, UNIFORM_WATER_KG_M3};
use crate::gravity::{ConstantGravity, Gravity, LocalGravity, NormalGravity};
use serde::Serialize;

/// One step of the ladder.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct Rung {
    /// Key of the step.
    pub step: &'static str,
    /// Depth in m when all corrections up to this one are made.
    pub depth_m: f64,
}

/// The depths in m that sea pressure `pressure_dbar` stands for, from uniform water to the depth below the
/// datum at the reference point.
///
/// # Errors
/// [`ProfileError`] when a level of the water is not that of water.
pub fn ladder(model: &Model, pressure_dbar: f64) -> Result<Vec<Rung>, ProfileError> {
    let place = &model.place;
    let surface = place.surface_dbar;
    let standard = Water::standard_ocean(pressure_dbar)
        .with_equation_of_state(model.water.equation_of_state())
        .profile(surface, &WaterShift::default())?;
    let insitu = model.profile()?;
    let depth =
        |profile, gravity: &dyn Gravity| Column::integrate(profile, surface, gravity).depth_m(pressure_dbar);
    let standard_gravity = ConstantGravity { gravity_m_s2: STANDARD_GRAVITY_M_S2 };
    let of_latitude =
        ConstantGravity { gravity_m_s2: NormalGravity::new(place.latitude_deg).on_ellipsoid_m_s2() };
    let full = depth(&insitu, &place.gravity());
    let uniform = (pressure_dbar - surface) * PA_PER_DBAR / (UNIFORM_WATER_KG_M3 * STANDARD_GRAVITY_M_S2);
    Ok([
        ("uniform_water", uniform),
        ("standard_ocean", depth(&standard, &standard_gravity)),
        ("insitu_density", depth(&insitu, &standard_gravity)),
        ("latitude_gravity", depth(&insitu, &of_latitude)),
        ("gravity_with_depth", depth(&insitu, &LocalGravity::normal(place.latitude_deg))),
        ("local_gravity", full),
        ("datum", full - place.water_level_m),
        ("reference_point", place.below_datum_m(full)),
    ]
    .map(|(step, depth_m)| Rung { step, depth_m })
    .to_vec())
}
