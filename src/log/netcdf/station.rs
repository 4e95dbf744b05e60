//! Station, cast and start as NetCDF files tell them beside the samples.

use super::container::Container;
use super::layout::Layout;
use crate::log::number::Marks;
use crate::log::time;

/// Names of variables and attributes, in compact form, in the order in which they are tried.
const STATION: &[&str] =
    &["station", "stationid", "stationname", "stationnumber", "stnnbr", "platformnumber"];
const CAST: &[&str] = &["cast", "castid", "castnumber", "castno", "cyclenumber"];
const STATION_ATTRIBUTES: &[&str] = &["STATION_NUMBER", "station", "station_id", "station_name", "STNNBR"];
const CAST_ATTRIBUTES: &[&str] = &["CAST_NUMBER", "cast", "CASTNO"];

/// `station/cast` of every profile, or the station alone when no cast is told.
pub(super) fn names(container: &Container, layout: &Layout, used: &mut Vec<String>) -> Vec<Option<String>> {
    let stations = words(container, layout, STATION, STATION_ATTRIBUTES, used)
        .or_else(|| by_role(container, layout, used))
        .unwrap_or_default();
    let casts = words(container, layout, CAST, CAST_ATTRIBUTES, used).unwrap_or_default();
    let given = |list: &[String], i: usize| list.get(i).cloned().filter(|word| !word.is_empty());
    (0..layout.ranges.len())
        .map(|i| match (given(&stations, i), given(&casts, i)) {
            (Some(station), Some(cast)) => Some(format!("{station}/{cast}")),
            (station, _) => station,
        })
        .collect()
}

fn words(
    container: &Container,
    layout: &Layout,
    names: &[&str],
    attributes: &[&str],
    used: &mut Vec<String>,
) -> Option<Vec<String>> {
    let of_variable = names.iter().find_map(|name| {
        let variable = container.variables.iter().find(|v| crate::log::role::compact(&v.name) == *name)?;
        let words = container.words(variable).ok()?;
        let words = layout.per_profile(&variable.dimensions, &words)?;
        used.push(variable.name.clone());
        Some(words)
    });
    of_variable.or_else(|| {
        let word = attributes.iter().find_map(|name| container.globals.word(name))?;
        Some(vec![word; layout.ranges.len()])
    })
}

/// The variable that CF marks as the identifier of the profiles.
fn by_role(container: &Container, layout: &Layout, used: &mut Vec<String>) -> Option<Vec<String>> {
    let marked =
        |v: &&super::Variable| v.attributes().text("cf_role").is_some_and(|role| role.ends_with("_id"));
    let variable = container.variables.iter().find(marked)?;
    let words = layout.per_profile(&variable.dimensions, &container.words(variable).ok()?)?;
    used.push(variable.name.clone());
    Some(words)
}

/// Start of every profile from `woce_date` (yyyymmdd) and `woce_time` (hhmm), both UTC.
pub(super) fn woce_start(
    container: &Container,
    layout: &Layout,
    used: &mut Vec<String>,
) -> Option<Vec<Option<jiff::Timestamp>>> {
    let mut read = |name: &str| {
        let variable = container.variable(name)?;
        let values = container.numbers(variable, &Marks::default()).ok()?;
        used.push(variable.name.clone());
        layout.per_profile(&variable.dimensions, &values)
    };
    let (dates, clocks) = (read("woce_date")?, read("woce_time")?);
    let mut parser = time::StampParser::default();
    let mut start = |date: f64, clock: f64| {
        let date = parser.date(format!("{date:08}").as_bytes())?;
        let clock = time::clock(format!("{clock:04}").as_bytes())?;
        time::timestamp(date.checked_add(clock)?)
    };
    Some(dates.into_iter().zip(clocks).map(|(date, clock)| start(date, clock)).collect())
}
