//! Whose water: that of the chosen leg, of another cast, or the standard ocean.

use crate::cast::{Cast, Leg};
use crate::column::{ProfileError, Salt, Water, WaterNode, bin_means, mean_of_legs};
use crate::log::Log;
use crate::seawater::Composition;
use crate::settings::{LegChoice, Settings};
use crate::uncertainty::WaterOrigin;
use crate::warning::Warning;

/// A leg must span this share of the cast to speak for its water.
const SPAN_SHARE: f64 = 0.5;
/// The other leg must span this share to be held against the chosen one.
const COMPARE_SHARE: f64 = 0.9;

pub(super) struct ChosenWater {
    pub water: Water,
    pub other_leg: Option<Water>,
    pub origin: WaterOrigin,
    pub words: String,
}

/// The water by the user's word: another cast's profile, else the chosen leg, else the standard ocean.
pub(super) fn choose_water(
    log: &Log,
    cast: &Cast,
    settings: &Settings,
    composition: &Composition,
    deepest_dbar: f64,
    warnings: &mut Vec<Warning>,
) -> Result<ChosenWater, ProfileError> {
    if let Some(other) = &settings.profile {
        let reach = other.water.nodes()[other.water.nodes().len() - 1].pressure_dbar;
        if reach < deepest_dbar - 1.0 {
            warnings.push(continued(&format!("the profile of {}", other.source), reach, deepest_dbar));
        }
        return Ok(ChosenWater {
            water: other.water.with_composition(composition.clone()).continued_to(deepest_dbar),
            other_leg: None,
            origin: WaterOrigin::OtherCast,
            words: format!("profile of {}", other.source),
        });
    }
    let levels = |leg| leg_levels(log, cast, leg);
    let (down, up) = (levels(Leg::Down), levels(Leg::Up));
    let spans = |nodes: &[WaterNode], share: f64| {
        nodes.len() > 1
            && nodes[nodes.len() - 1].pressure_dbar - nodes[0].pressure_dbar > share * deepest_dbar
    };
    let (down_speaks, up_speaks) = (spans(&down, SPAN_SHARE), spans(&up, SPAN_SHARE));
    let leg = match settings.leg() {
        LegChoice::Both if down_speaks && up_speaks => LegChoice::Both,
        LegChoice::Up if up_speaks => LegChoice::Up,
        _ if down_speaks => LegChoice::Down,
        _ if up_speaks => LegChoice::Up,
        _ if down.len() + up.len() > 1 => LegChoice::Both,
        _ => {
            warnings.push(Warning::new(
                "standard_ocean",
                format!(
                    "no water of this cast is known: the standard ocean (35.165 04 g/kg, 0 degC) stands in for it, which may put the depth wrong by metres{}",
                    left_aside(log)
                ),
                "give the water of a nearby cast: --profile FILE",
            ));
            return Ok(ChosenWater {
                water: Water::standard_ocean(deepest_dbar),
                other_leg: None,
                origin: WaterOrigin::StandardOcean,
                words: "standard ocean (the log has no temperature with conductivity or salinity that can be used)".to_string(),
            });
        }
    };
    if leg != settings.leg() {
        let name = |leg| match leg {
            LegChoice::Down => "the down leg",
            LegChoice::Up => "the up leg",
            LegChoice::Both => "both legs",
        };
        warnings.push(Warning::new(
            "other_leg_used",
            format!(
                "{} spans too little of the cast; the water is that of {}",
                name(settings.leg()),
                name(leg)
            ),
            "",
        ));
    }
    let salt = if log.conductivity.is_some() { Salt::Conductivity } else { Salt::Practical };
    let water = |nodes: Vec<WaterNode>| Water::new(nodes, salt, composition.clone(), deepest_dbar);
    let other_leg = match leg {
        LegChoice::Down if spans(&up, COMPARE_SHARE) => Some(water(up.clone())?),
        LegChoice::Up if spans(&down, COMPARE_SHARE) => Some(water(down.clone())?),
        LegChoice::Both if spans(&up, COMPARE_SHARE) => Some(water(up.clone())?),
        _ => None,
    };
    let (nodes, words) = match leg {
        LegChoice::Down => (down, "down leg"),
        LegChoice::Up => (up, "up leg"),
        LegChoice::Both => (mean_of_legs(&down, &up), "mean of down and up leg"),
    };
    let reach = nodes.last().map_or(0.0, |n| n.pressure_dbar);
    if reach < deepest_dbar - 2.0 {
        warnings.push(continued("the water of this cast", reach, deepest_dbar));
    }
    Ok(ChosenWater {
        water: water(nodes)?,
        other_leg,
        origin: WaterOrigin::Log,
        words: format!("{words}, averaged by 1 dbar"),
    })
}

fn continued(what: &str, reach_dbar: f64, deepest_dbar: f64) -> Warning {
    Warning::new(
        "water_continued",
        format!(
            "{what} ends at {reach_dbar:.0} dbar; below, down to {deepest_dbar:.0} dbar, its last salinity and potential temperature are kept"
        ),
        "",
    )
}

/// The columns that nobody used: what is needed may be among them.
fn left_aside(log: &Log) -> String {
    if log.unused.is_empty() {
        return String::new();
    }
    let shown: Vec<&str> = log.unused.iter().map(String::as_str).take(8).collect();
    format!("; columns left aside: {}", shown.join(", "))
}

/// Levels of one leg; the bottom belongs to either.
fn leg_levels(log: &Log, cast: &Cast, leg: Leg) -> Vec<WaterNode> {
    let (Some(t), Some(salt)) = (&log.temperature, log.conductivity.as_ref().or(log.salinity.as_ref()))
    else {
        return Vec::new();
    };
    let samples = cast.legs.range(leg).chain(cast.legs.range(Leg::Bottom));
    bin_means(samples.filter(|&i| cast.water_usable(i)).map(|i| WaterNode {
        pressure_dbar: cast.pressure_dbar[i],
        temperature_degc: t.values[i],
        salt: salt.values[i],
    }))
}
