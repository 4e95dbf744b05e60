//! From what was typed to what is meant.

use super::args::{
    CompositionArg, EosArg, ExtraArg, LegArg, PressureArg, ReadingArgs, SensorArgs, SharedArgs,
};
use crate::cast::TareChoice;
use crate::gravity::SurfaceGravity;
use crate::log::{ColumnChoice, PressureKind, ReadOptions};
use crate::report::Extra;
use crate::seawater::{Composition, EquationOfState};
use crate::settings::range::{self, Range};
use crate::settings::{Layer, LegChoice, Settings};
use crate::uncertainty::{Basis, Supplied, Term};
use crate::words::nearest;
use std::collections::BTreeMap;

/// A call that makes no sense, in words that say what would.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
#[error("{0}")]
pub struct CallError(pub String);

/// Reads the options about reading.
pub(super) fn read_options(args: &ReadingArgs) -> Result<ReadOptions, CallError> {
    let columns = args
        .column
        .iter()
        .map(|text| text.parse::<ColumnChoice>().map_err(|e| CallError(format!("--column {text}: {e}"))))
        .collect::<Result<_, _>>()?;
    Ok(ReadOptions { columns, missing: args.missing.clone() })
}

/// Refuses standard input named twice.
pub(super) fn standard_input_once(logs: &[String]) -> Result<(), CallError> {
    if logs.iter().filter(|log| *log == "-").count() > 1 {
        return Err(CallError("standard input ('-') can be read once only".to_string()));
    }
    Ok(())
}

/// All that the options say of casts.
pub(super) fn layer(args: &SharedArgs) -> Result<Layer, CallError> {
    Ok(Layer {
        reading: read_options(&args.reading)?,
        settings: settings(args)?,
        profile: args.profile.clone(),
    })
}

/// A number that was typed, when it lies in the range that makes sense.
fn within(option: &str, value: Option<f64>, range: Range) -> Result<Option<f64>, CallError> {
    match value {
        Some(v) if !range.holds(v) => Err(CallError(format!("{option} {v}: expected {range}"))),
        _ => Ok(value),
    }
}

/// What the options say of the sensor and the air above it.
pub(super) fn sensor_settings(args: &SensorArgs) -> Result<Settings, CallError> {
    Ok(Settings {
        pressure_kind: args.pressure.map(|kind| match kind {
            PressureArg::Absolute => PressureKind::Absolute,
            PressureArg::Sea => PressureKind::Sea,
            PressureArg::Gauge => PressureKind::Gauge,
        }),
        air_pressure_hpa: within("--air-pressure", args.air_pressure, range::AIR_PRESSURE)?,
        tare: args.tare.as_deref().map(tare).transpose()?,
        ..Settings::default()
    })
}

fn settings(args: &SharedArgs) -> Result<Settings, CallError> {
    let anomaly = within("--gravity-anomaly", args.gravity_anomaly, range::SURFACE_GRAVITY)?;
    let disturbance = within("--gravity-disturbance", args.gravity_disturbance, range::SURFACE_GRAVITY)?;
    Ok(Settings {
        latitude_deg: within("--lat", args.lat, range::LATITUDE)?,
        longitude_deg: within("--lon", args.lon, range::LONGITUDE)?,
        leg: args.leg.map(|leg| match leg {
            LegArg::Down => LegChoice::Down,
            LegArg::Up => LegChoice::Up,
            LegArg::Both => LegChoice::Both,
        }),
        composition: args.composition.and_then(|composition| match composition {
            CompositionArg::Atlas => None,
            CompositionArg::Reference => Some(Composition::Reference),
        }),
        equation_of_state: args.eos.map(|eos| match eos {
            EosArg::Gibbs => EquationOfState::Gibbs,
            EosArg::Polynomial => EquationOfState::Polynomial,
        }),
        surface_gravity: anomaly
            .map(SurfaceGravity::FreeAirAnomaly)
            .or(disturbance.map(SurfaceGravity::Disturbance)),
        gradient_eotvos: within("--gravity-gradient", args.gravity_gradient, range::GRADIENT)?,
        geoid_height_m: within("--geoid-height", args.geoid_height, range::GEOID_HEIGHT)?,
        water_level_m: within("--water-level", args.water_level, range::WATER_LEVEL)?,
        datum: args.datum.clone(),
        reference_below_sensor_m: within("--reference-below", args.reference_below, range::REFERENCE_BELOW)?,
        uncertainties: uncertainties(&args.uncertainty)?,
        coverage_probability: within("--coverage", args.coverage, range::COVERAGE)?,
        ..sensor_settings(&args.sensor)?
    })
}

/// Further columns, each once.
pub(super) fn extras(args: &[ExtraArg]) -> Vec<Extra> {
    let mut columns = Vec::new();
    for arg in args {
        let column = match arg {
            ExtraArg::PracticalSalinity => Extra::PracticalSalinity,
            ExtraArg::AbsoluteSalinity => Extra::AbsoluteSalinity,
            ExtraArg::ConservativeTemperature => Extra::ConservativeTemperature,
            ExtraArg::SoundSpeed => Extra::SoundSpeed,
            ExtraArg::MeanSoundSpeed => Extra::MeanSoundSpeed,
            ExtraArg::Gravity => Extra::Gravity,
            ExtraArg::SeafloorDepth => Extra::SeafloorDepth,
        };
        if !columns.contains(&column) {
            columns.push(column);
        }
    }
    columns
}

fn tare(text: &str) -> Result<TareChoice, CallError> {
    match text {
        "auto" => Ok(TareChoice::Auto),
        "none" => Ok(TareChoice::None),
        number => number
            .parse()
            .ok()
            .filter(|dbar| range::TARE.holds(*dbar))
            .map(TareChoice::Fixed)
            .ok_or_else(|| CallError(format!("--tare {text}: expected auto, none or a number of dbar"))),
    }
}

fn uncertainties(typed: &[String]) -> Result<BTreeMap<Term, Supplied>, CallError> {
    typed
        .iter()
        .map(|text| {
            let wrong = |expected: String| CallError(format!("--uncertainty {text}: {expected}"));
            let (key, number) = text
                .split_once('=')
                .ok_or_else(|| wrong("expected TERM=U, such as surface_gravity=8".to_string()))?;
            let term = Term::from_key(key).ok_or_else(|| {
                let keys = Term::ALL.map(Term::key).join(", ");
                let near = nearest(key, &Term::ALL.map(Term::key));
                wrong(format!("no term is called '{key}'; the nearest is '{near}'. The terms: {keys}"))
            })?;
            let u = number.parse().ok().filter(|u| Range::uncertainty(term.unit()).holds(*u)).ok_or_else(
                || wrong(format!("expected a standard uncertainty in {}, zero or more", term.unit())),
            )?;
            Ok((term, Supplied::new(u, Basis::Option)))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn tare_words() {
        assert_eq!(tare("auto"), Ok(TareChoice::Auto));
        assert_eq!(tare("-0.25"), Ok(TareChoice::Fixed(-0.25)));
        assert!(tare("nan").is_err() && tare("deck").is_err());
    }

    #[test]
    fn an_unknown_term_gets_a_proposal() {
        let error = uncertainties(&["tar=0.1".to_string()]).unwrap_err();
        assert!(error.0.contains("nearest is 'tare'"), "{error}");
        assert!(uncertainties(&["tare=-1".to_string()]).is_err());
        assert!(uncertainties(&["tare=nan".to_string()]).is_err());
    }
}
