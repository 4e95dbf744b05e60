//! From what was typed to what is meant.

use super::args::{CompositionArg, LegArg, LogArgs, PressureArg, SharedArgs};
use crate::cast::TareChoice;
use crate::gravity::SurfaceGravity;
use crate::log::{ColumnChoice, PressureKind, ReadOptions};
use crate::seawater::Composition;
use crate::settings::{LegChoice, Settings};
use crate::uncertainty::{Basis, Supplied, Term};
use std::collections::BTreeMap;

/// A call that makes no sense, in words that say what would.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
#[error("{0}")]
pub struct CallError(pub String);

/// Reads the options about reading.
pub(super) fn read_options(args: &LogArgs) -> Result<ReadOptions, CallError> {
    let columns = args
        .column
        .iter()
        .map(|text| text.parse::<ColumnChoice>().map_err(|e| CallError(format!("--column {text}: {e}"))))
        .collect::<Result<_, _>>()?;
    Ok(ReadOptions { columns, missing: args.missing.clone() })
}

/// A number that was typed, when it lies in the range that makes sense.
fn within(
    option: &str,
    value: Option<f64>,
    low: f64,
    high: f64,
    unit: &str,
) -> Result<Option<f64>, CallError> {
    match value {
        Some(v) if !(low..=high).contains(&v) => {
            Err(CallError(format!("{option} {v}: expected {low} to {high} {unit}")))
        }
        _ => Ok(value),
    }
}

/// Reads the options about the sensor and the air above it.
pub(super) fn log_settings(args: &LogArgs) -> Result<Settings, CallError> {
    Ok(Settings {
        pressure_kind: args.pressure.map(|kind| match kind {
            PressureArg::Absolute => PressureKind::Absolute,
            PressureArg::Sea => PressureKind::Sea,
            PressureArg::Gauge => PressureKind::Gauge,
        }),
        air_pressure_hpa: within("--air-pressure", args.air_pressure, 500.0, 1100.0, "hPa")?,
        tare: tare(&args.tare)?,
        ..Settings::default()
    })
}

/// Refuses standard input named twice.
pub(super) fn check_logs(args: &LogArgs) -> Result<(), CallError> {
    if args.logs.iter().filter(|log| *log == "-").count() > 1 {
        return Err(CallError("standard input ('-') can be read once only".to_string()));
    }
    Ok(())
}

/// Reads all other options, but for the profile, which is a file.
pub(super) fn settings(args: &SharedArgs) -> Result<Settings, CallError> {
    let latitude_deg = within("--lat", args.lat, -90.0, 90.0, "degrees")?;
    let longitude_deg = within("--lon", args.lon, -180.0, 360.0, "degrees")?;
    let water_level_m = within("--water-level", args.water_level, -1_000.0, 10_000.0, "m")?;
    let reference_below_sensor_m = within("--reference-below", args.reference_below, -1_000.0, 1_000.0, "m")?;
    let anomaly = within("--gravity-anomaly", args.gravity_anomaly, -1_000.0, 1_000.0, "mGal")?;
    let disturbance = within("--gravity-disturbance", args.gravity_disturbance, -1_000.0, 1_000.0, "mGal")?;
    let gradient_eotvos = within("--gravity-gradient", args.gravity_gradient, -3_000.0, 3_000.0, "E")?;
    let geoid_height_m = within("--geoid-height", args.geoid_height, -200.0, 200.0, "m")?;
    let coverage = within("--coverage", Some(args.coverage), 0.5, 0.999_999, "")?;
    Ok(Settings {
        latitude_deg,
        longitude_deg,
        leg: match args.leg {
            LegArg::Down => LegChoice::Down,
            LegArg::Up => LegChoice::Up,
            LegArg::Both => LegChoice::Both,
        },
        composition: match args.composition {
            CompositionArg::Reference => Composition::Reference,
        },
        surface_gravity: anomaly
            .map(SurfaceGravity::FreeAirAnomaly)
            .or(disturbance.map(SurfaceGravity::Disturbance)),
        gradient_eotvos,
        geoid_height_m,
        water_level_m,
        datum: args.datum.clone(),
        reference_below_sensor_m,
        uncertainties: uncertainties(&args.uncertainty)?,
        coverage_probability: coverage.unwrap_or(0.95),
        ..log_settings(&args.log)?
    })
}

fn tare(text: &str) -> Result<TareChoice, CallError> {
    match text {
        "auto" => Ok(TareChoice::Auto),
        "none" => Ok(TareChoice::None),
        number => number
            .parse()
            .ok()
            .filter(|dbar: &f64| dbar.abs() <= 200.0)
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
            let u = number.parse().ok().filter(|u: &f64| u.is_finite() && *u >= 0.0).ok_or_else(|| {
                wrong(format!("expected a standard uncertainty in {}, zero or more", term.unit()))
            })?;
            Ok((term, Supplied { standard_uncertainty: u, basis: Basis::Option }))
        })
        .collect()
}

/// The word of `known` with the fewest edits (insert, drop, change) from `word`.
pub(super) fn nearest<'a>(word: &str, known: &[&'a str]) -> &'a str {
    known.iter().copied().min_by_key(|k| edits(word, k)).unwrap_or("")
}

fn edits(a: &str, b: &str) -> usize {
    let b: Vec<char> = b.chars().collect();
    let mut row: Vec<usize> = (0..=b.len()).collect();
    for (i, x) in a.chars().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, y) in b.iter().enumerate() {
            let changed = diagonal + usize::from(x != *y);
            diagonal = row[j + 1];
            row[j + 1] = changed.min(row[j] + 1).min(diagonal + 1);
        }
    }
    row[b.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nearest_word() {
        assert_eq!(nearest("surface_gravty", &Term::ALL.map(Term::key)), "surface_gravity");
        assert_eq!(edits("kitten", "sitting"), 3);
        assert_eq!(edits("", "abc"), 3);
    }

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
