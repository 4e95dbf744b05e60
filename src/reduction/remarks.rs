//! What the user should know of a result: what was noticed, what was assumed.

use crate::cast::{Cast, Quantity, Reason, TareBasis, median};
use crate::depth::{Deepest, Model};
use crate::log::Log;
use crate::seawater::VALID_TO_DBAR;
use crate::settings::Settings;
use crate::warning::Warning;

/// Water with less salt than this in g/kg is fresh.
const FRESH_G_KG: f64 = 0.5;

/// A zero that wanders by more than this in dbar between the two ends of a dive is worth a word.
const DRIFT_DBAR: f64 = 0.5;
/// Trenches depart from normal gravity by more than the default allows; from this depth in m on that is worth a word.
const TRENCH_M: f64 = 6_000.0;
/// A hole in the levels of the water of this share of the cast, and of so many dbar, is worth a word.
const HOLE: (f64, f64) = (0.1, 20.0);
/// A gap in the log, in times the usual interval.
const GAP_INTERVALS: f64 = 10.0;

/// What the result shows that the user should know.
pub(super) fn noticed(
    log: &Log,
    cast: &Cast,
    model: &Model,
    deepest: &Deepest,
    settings: &Settings,
) -> Vec<Warning> {
    [
        extrapolated(deepest),
        averaged(cast),
        flagged_deeper(cast, deepest),
        drifting_zero(cast),
        gap_at_deepest(log, cast, deepest),
        several_descents(cast, deepest),
        salt_out_of_range(log, cast),
        fresh(model),
        hole_in_water(model, deepest),
        outside_validity(model),
        trench_gravity(model, deepest, settings),
    ]
    .into_iter()
    .flatten()
    .collect()
}

fn extrapolated(deepest: &Deepest) -> Option<Warning> {
    (deepest.pressure_dbar > VALID_TO_DBAR).then(|| {
        let cause = format!(
            "beyond {VALID_TO_DBAR:.0} dbar (100 MPa) the equation of state is extrapolated; its term is widened"
        );
        Warning::new("equation_of_state_extrapolated", cause, "")
    })
}

fn averaged(cast: &Cast) -> Option<Warning> {
    cast.noise.averaged_step_dbar.map(|step| {
        let step = (step * 1e4).round() / 1e4;
        let cause = format!(
            "the log is averaged in steps of {step} dbar: the deepest depth is that of its deepest step"
        );
        Warning::new("averaged_log", cause, "")
    })
}

fn flagged_deeper(cast: &Cast, deepest: &Deepest) -> Option<Warning> {
    let deeper = cast
        .suspects
        .iter()
        .filter(|s| (s.quantity, s.reason) == (Quantity::Pressure, Reason::Logged))
        .filter(|s| cast.pressure_dbar[s.sample] > deepest.raw_pressure_dbar)
        .count();
    (deeper > 0).then(|| {
        let cause = format!(
            "{deeper} samples that the log flags as not good are deeper than the deepest depth; they are left out of it"
        );
        Warning::new("flagged_deeper", cause, "see the flags of the log")
    })
}

fn drifting_zero(cast: &Cast) -> Option<Warning> {
    let (before, after) = (cast.tare.before_dbar?, cast.tare.after_dbar?);
    ((after - before).abs() > DRIFT_DBAR).then(|| {
        let cause = format!(
            "the zero of the pressure sensor went from {before:.2} dbar before to {after:.2} dbar after the cast; its mean is used"
        );
        Warning::new("zero_drift", cause, "if it went otherwise, give the offset at the deepest: --tare DBAR")
    })
}

/// Time, or pressures, missing where the vehicle may have been deeper.
fn gap_at_deepest(log: &Log, cast: &Cast, deepest: &Deepest) -> Option<Warning> {
    let time = &log.time.as_ref()?.elapsed_s;
    let seen: Vec<usize> =
        cast.legs.water().filter(|&i| cast.pressure_dbar[i].is_finite() && time[i].is_finite()).collect();
    let mut intervals: Vec<f64> = seen.windows(2).map(|w| time[w[1]] - time[w[0]]).collect();
    let mut speeds: Vec<f64> = seen
        .windows(2)
        .map(|w| ((cast.pressure_dbar[w[1]] - cast.pressure_dbar[w[0]]) / (time[w[1]] - time[w[0]])).abs())
        .filter(|v| v.is_finite() && *v > 0.0)
        .collect();
    let (usual, speed) = (median(&mut intervals)?, median(&mut speeds)?);
    let (seconds, after) = seen
        .windows(2)
        .map(|w| {
            let (seconds, ends) =
                (time[w[1]] - time[w[0]], cast.pressure_dbar[w[0]] + cast.pressure_dbar[w[1]]);
            (seconds, w[0], 0.5 * (ends + speed * seconds))
        })
        .filter(|(seconds, _, reach)| {
            *seconds > GAP_INTERVALS * usual && *reach > deepest.pressure_dbar + 1.0
        })
        .map(|(seconds, after, _)| (seconds, after))
        .max_by(|a, b| a.0.total_cmp(&b.0))?;
    let place = log.line_of(after).map_or(format!("sample {}", after + 1), |line| format!("line {line}"));
    let cause = format!(
        "{seconds:.0} s without a pressure after {place}: the vehicle may have been deeper in that time"
    );
    Some(Warning::new("gap_at_deepest", cause, "the deepest depth is that of the samples that are there"))
}

/// Back to the surface and down again: two casts in one log.
fn several_descents(cast: &Cast, deepest: &Deepest) -> Option<Warning> {
    let (shallow, deep) = (0.05 * deepest.pressure_dbar, 0.5 * deepest.pressure_dbar);
    let mut descents = 0;
    let mut armed = true;
    for i in cast.legs.water().filter(|&i| cast.pressure_flag[i].usable()) {
        let p = cast.pressure_dbar[i];
        if armed && p > deep {
            descents += 1;
            armed = false;
        } else if p < shallow {
            armed = true;
        }
    }
    (descents > 1).then(|| {
        let cause = format!(
            "the log holds {descents} descents; legs are told for the deepest, and the others count as going back"
        );
        Warning::new("several_descents", cause, "cut the log into one file per descent")
    })
}

/// A unit that is wrong by a factor makes salinities that no sea has.
fn salt_out_of_range(log: &Log, cast: &Cast) -> Option<Warning> {
    let water = cast.legs.water().len();
    let out =
        cast.suspects.iter().filter(|s| (s.quantity, s.reason) == (Quantity::Salt, Reason::Range)).count();
    let salt = log.conductivity.as_ref().or(log.salinity.as_ref())?;
    (out > 0 && out * 2 >= water).then(|| {
        let mut values: Vec<f64> = salt.values.iter().copied().filter(|v| v.is_finite()).collect();
        let usual = median(&mut values).unwrap_or(f64::NAN);
        let (what, unit, role) = if log.conductivity.is_some() {
            ("conductivity", " mS/cm", "conductivity")
        } else {
            ("salinity", "", "salinity")
        };
        let cause = format!(
            "a {what} of {usual:.3}{unit} (column '{}', read as {}) gives salinities that no sea has",
            salt.name, salt.unit
        );
        let action = format!("check its unit: --column {role}={}:UNIT", salt.name);
        Warning::new("salt_out_of_range", cause, action)
    })
}

fn fresh(model: &Model) -> Option<Warning> {
    let mut salts: Vec<f64> =
        model.water.nodes().iter().map(|n| model.water.salinity_of_level_g_kg(n)).collect();
    let usual = median(&mut salts).filter(|s| *s < FRESH_G_KG)?;
    let cause = format!(
        "the water is fresh ({usual:.2} g/kg): right in a lake; in the sea the conductivity was not measured, or its unit is wrong"
    );
    Some(Warning::new(
        "fresh_water",
        cause,
        "--column conductivity=NAME:UNIT, or the water of a nearby cast: --profile FILE",
    ))
}

fn hole_in_water(model: &Model, deepest: &Deepest) -> Option<Warning> {
    let hole = model
        .water
        .nodes()
        .windows(2)
        .map(|w| (w[0].pressure_dbar, w[1].pressure_dbar))
        .max_by(|a, b| (a.1 - a.0).total_cmp(&(b.1 - b.0)))?;
    let wide = (HOLE.0 * deepest.pressure_dbar).max(HOLE.1);
    (hole.1 - hole.0 > wide).then(|| {
        let cause = format!(
            "no water is known from {:.0} to {:.0} dbar; salinity and temperature run straight across",
            hole.0, hole.1
        );
        Warning::new("hole_in_water", cause, "the other leg may have it: --leg both")
    })
}

fn outside_validity(model: &Model) -> Option<Warning> {
    let water = model.water.nodes();
    let outside = water
        .iter()
        .filter(|n| {
            let salt = model.water.salinity_of_level_g_kg(n);
            !(0.0..=42.0).contains(&salt) || !(-6.0..=40.0).contains(&n.temperature_degc)
        })
        .count();
    (outside > 0).then(|| {
        let cause = format!(
            "{outside} levels of the water lie outside what the equation of state is stated for (0 to 42 g/kg, -6 to 40 degC)"
        );
        Warning::new("outside_validity", cause, "check units and columns")
    })
}

fn trench_gravity(model: &Model, deepest: &Deepest, settings: &Settings) -> Option<Warning> {
    // A metre of sea water is a decibar, near enough.
    let deep = deepest.pressure_dbar - model.place.surface_dbar > TRENCH_M;
    (deep && settings.surface_gravity.is_none()).then(|| {
        Warning::new(
            "gravity_not_given",
            "gravity over trenches departs from normal by -100 to -300 mGal and more, beyond what its default allows; 100 mGal are 1 m at 10 km",
            "give it: --gravity-anomaly MGAL",
        )
    })
}

/// What was assumed about how the log is to be read (the budget tells what was assumed of its terms).
pub(super) fn assumed(cast: &Cast, settings: &Settings) -> Vec<String> {
    let mut sentences = Vec::new();
    if !cast.pressure_kind_known {
        sentences.push("pressure counts as sea pressure (absolute less 101 325 Pa): --pressure".to_string());
    }
    if settings.air_pressure_hpa.is_none() {
        sentences.push("air pressure 1013.25 hPa: --air-pressure HPA".to_string());
    }
    if cast.tare.basis == TareBasis::Assumed {
        let why = if cast.deck.is_some() { "as asked" } else { "no samples on deck" };
        sentences.push(format!("zero offset of the pressure sensor 0 dbar ({why}): --tare DBAR"));
    }
    if settings.surface_gravity.is_none() {
        sentences.push("normal gravity at the surface: --gravity-anomaly MGAL".to_string());
    }
    if settings.gradient_eotvos.is_none() {
        sentences.push("gravity gradient anomaly 0 E: --gravity-gradient EOTVOS".to_string());
    }
    if settings.geoid_height_m.is_none() {
        sentences.push("geoid height 0 m: --geoid-height M".to_string());
    }
    if settings.water_level_m.is_none() {
        sentences.push("water level 0 m above the datum: --water-level M".to_string());
    }
    if settings.reference_below_sensor_m.is_none() {
        sentences.push("the reference point is the pressure sensor: --reference-below M".to_string());
    }
    sentences
}
