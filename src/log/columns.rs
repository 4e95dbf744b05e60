//! Which column holds what: the user's word first, then the names; every doubt is an error that
//! says which option settles it.

use super::header::{Field, Look, unit_suffix};
use super::role::{Meaning, compact};
use super::unit::{self, Unit};
use super::{Channel, ColumnChoice, Flag, LogError, PressureKind, ReadOptions, Role, time};
use crate::warning::Warning;

/// One column that will be read.
#[derive(Debug, Clone)]
pub(super) struct Pick {
    pub role: Role,
    pub index: usize,
    /// What the name says about the origin of a pressure.
    pub pressure_kind: Option<PressureKind>,
    unit_text: Option<String>,
    unit_how: &'static str,
    how: String,
    /// Settled by the user.
    pub chosen: bool,
}

/// The columns of a log, settled.
#[derive(Debug, Default)]
pub(super) struct Picks {
    pub roles: Vec<Pick>,
    /// Date half of a time in two columns.
    pub date: Option<usize>,
    /// Column of stamps beside a column of elapsed time: it tells the start only.
    pub start_from: Option<usize>,
    /// Flag columns of single quantities.
    pub flags_of: Vec<(Role, usize)>,
}

impl Picks {
    pub fn of(&self, role: Role) -> Option<&Pick> {
        self.roles.iter().find(|pick| pick.role == role)
    }

    /// Labels of the columns that nothing reads.
    pub fn unused(&self, fields: &[Field]) -> Vec<String> {
        let used = |i: usize| {
            self.roles.iter().any(|pick| pick.index == i)
                || self.flags_of.iter().any(|flags| flags.1 == i)
                || self.date == Some(i)
                || self.start_from == Some(i)
        };
        (0..fields.len()).filter(|i| !used(*i)).map(|i| fields[i].label.clone()).collect()
    }
}

/// Settles which column holds what. A column is a "column" or a "variable", by `noun`.
pub(super) fn resolve(
    file: &str,
    noun: &str,
    fields: &[Field],
    options: &ReadOptions,
) -> Result<Picks, LogError> {
    let mut picks = Picks::default();
    for choice in &options.columns {
        let (index, unit_text) = find(file, noun, fields, choice)?;
        if picks.of(choice.role).is_some() {
            return Err(LogError::new(
                file,
                format!("--column names two columns for {}", choice.role.name()),
            )
            .remedy("keep one of the two options"));
        }
        if let Some(other) = picks.roles.iter().find(|pick| pick.index == index) {
            let (label, one, two) = (&fields[index].label, other.role.name(), choice.role.name());
            return Err(LogError::new(
                file,
                format!("--column makes the {noun} '{label}' both {one} and {two}"),
            )
            .remedy("keep one of the two options"));
        }
        let known = fields[index].recognised;
        picks.roles.push(Pick {
            role: choice.role,
            index,
            pressure_kind: known.and_then(|r| r.pressure_kind),
            unit_how: if unit_text.is_some() { "" } else { fields[index].unit_how },
            unit_text: unit_text.or_else(|| fields[index].unit.clone()),
            how: "option --column".to_string(),
            chosen: true,
        });
    }
    by_name(file, noun, fields, &mut picks)?;
    if picks.of(Role::Pressure).is_none() {
        return Err(no_pressure(file, noun, fields));
    }
    Ok(picks)
}

fn by_name(file: &str, noun: &str, fields: &[Field], picks: &mut Picks) -> Result<(), LogError> {
    let taken: Vec<usize> = picks.roles.iter().map(|pick| pick.index).collect();
    let meaning = |i: usize| match fields[i].recognised.map(|r| r.meaning) {
        // A column called `date` with date and clock in each cell is a time.
        Some(Meaning::Date) if fields[i].look == Look::Stamp => Some(Meaning::Role(Role::Time)),
        meaning => meaning,
    };
    let free = || (0..fields.len()).filter(|i| !taken.contains(i));
    let (mut clashes, mut remedies) = (Vec::new(), Vec::new());
    for role in Role::ALL {
        if picks.of(role).is_some() {
            continue;
        }
        let mut found: Vec<usize> = free().filter(|&i| meaning(i) == Some(Meaning::Role(role))).collect();
        if role == Role::Time && found.len() == 2 {
            // Elapsed time beside absolute time: the first carries the fractions of a second.
            let stamp = found.iter().position(|&i| fields[i].look == Look::Stamp);
            let number = found.iter().position(|&i| fields[i].look == Look::Number);
            if let (Some(stamp), Some(number)) = (stamp, number) {
                picks.start_from = Some(found[stamp]);
                found = vec![found[number]];
            }
        }
        if found.len() > 1 {
            let names = list(found.iter().map(|&i| fields[i].label.as_str()));
            clashes.push(format!("{} {noun}s look like {}: {names}", found.len(), role.name()));
            remedies.push(option(fields, role, found[0], None));
        } else if let Some(&index) = found.first() {
            let field = &fields[index];
            let known = field.recognised;
            picks.roles.push(Pick {
                role,
                index,
                pressure_kind: known.and_then(|r| r.pressure_kind),
                unit_text: field.unit.clone(),
                unit_how: field.unit_how,
                how: known.map_or(String::new(), |r| r.how.to_string()),
                chosen: false,
            });
        }
    }
    if !clashes.is_empty() {
        return Err(LogError::new(file, clashes.join("; "))
            .remedy(format!("say which to read: {}", remedies.join(" "))));
    }
    // A date helps only where the time column holds the time of day.
    let clock = picks.of(Role::Time).is_some_and(|pick| fields[pick.index].look == Look::Clock);
    picks.date = free().find(|&i| clock && meaning(i) == Some(Meaning::Date));
    for i in free() {
        if let Some(Meaning::FlagOf(role)) = meaning(i)
            && picks.of(role).is_some()
            && !picks.flags_of.iter().any(|(flagged, _)| *flagged == role)
        {
            picks.flags_of.push((role, i));
        }
    }
    Ok(())
}

/// The column that a choice names, and the unit it gives.
fn find(
    file: &str,
    noun: &str,
    fields: &[Field],
    choice: &ColumnChoice,
) -> Result<(usize, Option<String>), LogError> {
    let named = |name: &str| -> Option<Result<usize, LogError>> {
        type Same<'a> = Box<dyn Fn(&Field) -> bool + 'a>;
        let folded = name.to_lowercase();
        let ways: [Same<'_>; 4] = [
            Box::new(|f: &Field| f.label == name),
            Box::new(|f: &Field| f.name == name),
            Box::new(|f: &Field| f.label.to_lowercase() == folded),
            Box::new(|f: &Field| f.name.to_lowercase() == folded),
        ];
        for same in ways {
            let hits: Vec<usize> = (0..fields.len()).filter(|&i| same(&fields[i])).collect();
            match hits[..] {
                [] => {}
                [index] => return Some(Ok(index)),
                _ => {
                    let labels = list(hits.iter().map(|&i| fields[i].label.as_str()));
                    let first = hits[0] + 1;
                    return Some(Err(LogError::new(
                        file,
                        format!("several {noun}s are called '{name}': {labels}"),
                    )
                    .remedy(format!("name it by its number: --column {}={first}", choice.role.name()))));
                }
            }
        }
        let number = name.parse::<usize>().ok()?;
        (1..=fields.len()).contains(&number).then(|| Ok(number - 1))
    };
    if let Some(index) = named(&choice.name) {
        return Ok((index?, choice.unit.clone()));
    }
    // The colon may belong to the name.
    if let Some(unit) = &choice.unit
        && let Some(index) = named(&format!("{}:{unit}", choice.name))
    {
        return Ok((index?, None));
    }
    Err(LogError::new(file, format!("--column names '{}', but there is no such {noun}", choice.name))
        .remedy(format!("the {noun}s are {}", list(fields.iter().map(|f| f.label.as_str())))))
}

fn no_pressure(file: &str, noun: &str, fields: &[Field]) -> LogError {
    let labels = list(fields.iter().map(|f| f.label.as_str()));
    let example = if fields.is_empty() { "pressure=NAME:dbar".to_string() } else { String::new() };
    let remedy = if example.is_empty() {
        // Never a column that is known to be something else.
        let index = fields
            .iter()
            .position(|f| unit_is(f, Role::Pressure))
            .or_else(|| fields.iter().position(|f| f.recognised.is_none()))
            .unwrap_or(0);
        format!(
            "if one of them is pressure, say so, for example {}",
            option(fields, Role::Pressure, index, Some("dbar"))
        )
    } else {
        format!("say which is pressure: --column {example}")
    };
    LogError::new(file, format!("no {noun} looks like pressure; the {noun}s are {labels}"))
        .remedy(remedy)
        .foreign()
}

fn unit_is(field: &Field, role: Role) -> bool {
    field.unit.as_deref().is_some_and(|text| unit::parse(role, text).is_some())
        || unit_suffix(&field.label, role).is_some()
}

/// The unit of a picked column. `Ok(None)`: the column is not essential and is left aside, with a
/// warning in `warnings`.
pub(super) fn unit_of(
    file: &str,
    noun: &str,
    fields: &[Field],
    pick: &Pick,
    warnings: &mut Vec<Warning>,
) -> Result<Option<Unit>, LogError> {
    let field = &fields[pick.index];
    let role = pick.role;
    let suffix = unit_suffix(&field.label, role).map(|(_, text)| text);
    let text = pick.unit_text.as_deref().or(suffix);
    let default = match role {
        Role::Salinity => Some("1"),
        Role::Latitude | Role::Longitude => Some("degree"),
        _ => None,
    };
    if let Some(unit) = text.or(default).and_then(|text| unit::parse(role, text)) {
        return Ok(Some(unit));
    }
    let candidates = unit::candidates(role);
    let label = &field.label;
    let problem = match text {
        Some(text) => format!("'{text}' is not a known unit of {} ({noun} '{label}')", role.name()),
        None => format!("the unit of the {} {noun} '{label}' cannot be told", role.name()),
    };
    let settle = option(fields, role, pick.index, Some(candidates[0]));
    let optional =
        matches!(role, Role::Altitude | Role::Pitch | Role::Roll | Role::Latitude | Role::Longitude);
    if optional && !pick.chosen {
        let cause = format!("{problem}; the {noun} is left aside");
        warnings.push(Warning::new(
            "column_left_aside",
            cause,
            format!("say its unit, for example {settle}"),
        ));
        return Ok(None);
    }
    Err(LogError::new(file, problem)
        .remedy(format!("it may be {}: say which, for example {settle}", candidates.join(", "))))
}

/// The unit of a numeric time column: seconds per unit, and the reference time of `... since ...`.
pub(super) fn time_unit(
    file: &str,
    noun: &str,
    fields: &[Field],
    pick: &Pick,
) -> Result<(Unit, Option<time::Nanos>), LogError> {
    if let Some(text) = &pick.unit_text
        && let Some((unit, reference)) = time::since(text)
        && let Some(unit) = unit::parse(Role::Time, unit)
    {
        return Ok((unit, Some(reference)));
    }
    match unit_of(file, noun, fields, pick, &mut Vec::new())? {
        Some(unit) => Ok((unit, None)),
        None => Err(LogError::new(file, "the unit of the time cannot be told")),
    }
}

/// How name and unit of a pick were recognised, for people.
pub(super) fn recognised_by(pick: &Pick) -> String {
    if pick.unit_how.is_empty() { pick.how.clone() } else { format!("{}, {}", pick.how, pick.unit_how) }
}

/// A channel from the values of a picked column, converted to the unit of its role.
pub(super) fn channel(
    field: &Field,
    pick: &Pick,
    unit: &Unit,
    mut values: Vec<f64>,
    flags: Option<Vec<Flag>>,
) -> Channel {
    unit.convert_all(&mut values);
    Channel {
        values,
        flags,
        name: field.label.clone(),
        unit: unit.name.clone(),
        recognised_by: recognised_by(pick),
    }
}

/// `--column ROLE=NAME[:UNIT]` for a column, as it can be typed in a shell.
pub(super) fn option(fields: &[Field], role: Role, index: usize, unit: Option<&str>) -> String {
    let once = |name: &str| {
        let key = name.to_lowercase();
        !name.is_empty()
            && fields.iter().filter(|f| f.label.to_lowercase() == key || f.name.to_lowercase() == key).count()
                == 1
    };
    let field = &fields[index];
    let name = [&field.name, &field.label].into_iter().find(|name| once(name));
    let name = name.map_or_else(|| (index + 1).to_string(), String::clone);
    let unit = unit.map_or_else(String::new, |unit| format!(":{unit}"));
    let plain = |c: char| c.is_alphanumeric() || matches!(c, '_' | '-' | '.' | '/' | ':');
    let value = format!("{}={name}{unit}", role.name());
    if (name.clone() + &unit).chars().all(plain) {
        format!("--column {value}")
    } else {
        format!("--column '{value}'")
    }
}

fn list<'a>(labels: impl Iterator<Item = &'a str>) -> String {
    const SHOWN: usize = 30;
    let labels: Vec<_> = labels.map(|label| format!("'{label}'")).collect();
    let more = labels.len().saturating_sub(SHOWN);
    let shown = labels[..labels.len() - more].join(", ");
    if more > 0 { format!("{shown} and {more} more") } else { shown }
}

/// Whether the user named this column in any of the ways that [`resolve`] accepts.
pub(super) fn is_named(field: &Field, options: &ReadOptions) -> bool {
    options.columns.iter().any(|choice| {
        let key = compact(&choice.name);
        !key.is_empty() && (compact(&field.label) == key || compact(&field.name) == key)
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fields(labels: &[&str]) -> Vec<Field> {
        labels.iter().map(|label| Field::from_cell(label)).collect()
    }

    fn with(choices: &[&str]) -> ReadOptions {
        ReadOptions { columns: choices.iter().map(|c| c.parse().unwrap()).collect(), missing: vec![] }
    }

    #[test]
    fn a_name_is_matched_exactly_before_case_and_number() {
        let all = fields(&["P", "p", "prs:1", "2", "x"]);
        let index =
            |choice: &str| resolve("f", "column", &all, &with(&[choice])).map(|picks| picks.roles[0].index);
        assert_eq!(index("pressure=p:dbar"), Ok(1));
        assert_eq!(index("pressure=P:dbar"), Ok(0));
        assert_eq!(index("pressure=X:dbar"), Ok(4));
        assert_eq!(index("pressure=2:dbar"), Ok(3));
        assert_eq!(index("pressure=5:dbar"), Ok(4));
        assert_eq!(index("pressure=prs:1"), Ok(2));
    }

    #[test]
    fn a_name_that_is_not_there_lists_those_that_are() {
        let error = resolve("f", "column", &fields(&["prs", "tmp"]), &with(&["pressure=press"])).unwrap_err();
        assert!(error.problem.contains("'press'"), "{error}");
        assert_eq!(error.remedy.as_deref(), Some("the columns are 'prs', 'tmp'"));
    }

    #[test]
    fn two_columns_of_one_role_are_named_with_the_option() {
        let error =
            resolve("f", "column", &fields(&["prs [dbar]", "pressure_MPa", "t"]), &with(&[])).unwrap_err();
        assert!(error.problem.contains("'prs [dbar]', 'pressure_MPa'"), "{error}");
        assert!(error.remedy.unwrap().contains("--column pressure=prs"));
    }

    #[test]
    fn options_are_proposed_in_a_form_that_can_be_typed() {
        let all = fields(&["Water Pressure [x]", "a", "a"]);
        assert_eq!(option(&all, Role::Pressure, 0, Some("dbar")), "--column 'pressure=Water Pressure:dbar'");
        assert_eq!(option(&all, Role::Pressure, 1, None), "--column pressure=2");
    }

    #[test]
    fn the_same_column_cannot_be_two_things() {
        let error =
            resolve("f", "column", &fields(&["a", "b"]), &with(&["pressure=a", "salinity=a"])).unwrap_err();
        assert!(error.problem.contains("both pressure and salinity"), "{error}");
        let error =
            resolve("f", "column", &fields(&["a", "b"]), &with(&["pressure=a", "pressure=b"])).unwrap_err();
        assert!(error.problem.contains("two columns for pressure"), "{error}");
    }
}
