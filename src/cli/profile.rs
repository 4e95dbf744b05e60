//! The water of another cast, from its log.

use super::request::CallError;
use crate::cast::{Cast, CastSettings, TareChoice};
use crate::column::{Salt, Water, WaterNode, bin_means};
use crate::log::{self, LogError, PressureKind, ReadOptions};
use crate::seawater::Composition;
use crate::settings::{OtherCast, STANDARD_AIR_HPA};

/// The water of another cast, whose composition follows from the position of the dive. `who` asked for it, for messages.
pub(super) fn read_profile(source: &str, who: &str) -> Result<OtherCast, CallError> {
    let wrong = |e: LogError| CallError(format!("{who}: {e}"));
    let mut logs = log::read(source, &ReadOptions::default()).map_err(wrong)?;
    if logs.len() != 1 {
        let text = format!("{who} {source}: expected one cast, found {}", logs.len());
        return Err(CallError(text));
    }
    let log = logs.remove(0);
    let Some((salt, kind)) = log
        .conductivity
        .as_ref()
        .map(|c| (c, Salt::Conductivity))
        .or(log.salinity.as_ref().map(|s| (s, Salt::Practical)))
    else {
        return Err(wrong(LogError::new(source, "a profile needs salinity or conductivity")));
    };
    let Some(temperature) = &log.temperature else {
        return Err(wrong(LogError::new(source, "a profile needs temperature")));
    };
    let cast_settings = CastSettings {
        pressure_kind: log.pressure_kind.or(Some(PressureKind::Sea)),
        air_pressure_hpa: STANDARD_AIR_HPA,
        tare: TareChoice::Auto,
    };
    let cast = Cast::new(&log, &cast_settings).map_err(wrong)?;
    let levels = bin_means((0..cast.len()).filter(|&i| cast.water_usable(i)).map(|i| WaterNode {
        pressure_dbar: cast.pressure_dbar[i],
        temperature_degc: temperature.values[i],
        salt: salt.values[i],
    }));
    let water = Water::new(levels, kind, Composition::Reference, 0.0)
        .map_err(|e| wrong(LogError::new(source, e.to_string())))?;
    Ok(OtherCast { water, source: source.to_string() })
}
