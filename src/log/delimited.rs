//! Delimited text: one sample per line.

use super::cell;
use super::columns::{self, Picks};
use super::dialect::{self, Dialect};
use super::header::{Field, Look};
use super::input::{Input, decode};
use super::number::{self, Cell, Marks};
use super::role::compact;
use super::rows::{Action, Rows};
use super::unit::Unit;
use super::{Flag, Log, LogError, Place, ReadOptions, Role, TimeAxis, axis, position, time};
use crate::warning::Warning;

/// Reads a delimited text log.
pub(super) fn read(input: &Input, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    let file = input.name.as_str();
    let Some(text) = input.text() else {
        return Err(LogError::new(file, "this is neither text nor NetCDF")
            .remedy("give a delimited text log, a WHP-Exchange CTD file or a NetCDF file")
            .foreign());
    };
    let text = text.as_ref();
    let marks = Marks::new(options);
    let Some(mut dialect) = dialect::detect(text, options, &marks) else {
        let remedy = "a log has one sample per line, its cells parted by commas, semicolons, tabs or blanks";
        return Err(LogError::new(file, "no row of numbers was found").remedy(remedy).foreign());
    };
    look_at_values(text, &mut dialect, &marks);
    let picks = match columns::resolve(file, "column", &dialect.fields, options) {
        Ok(picks) => picks,
        Err(error) if !dialect.has_header && options.columns.is_empty() => {
            return Err(no_header(file, text, &dialect, &error));
        }
        Err(error) => return Err(error),
    };
    let mut warnings = Vec::new();
    if dialect.rows_above > 0 {
        let cause =
            format!("{} lines above the header look like rows; they were left out", dialect.rows_above);
        warnings.push(Warning::new(
            "rows_above_header",
            cause,
            "move the header above them if they belong to the log",
        ));
    }
    let plan = Plan::new(file, &dialect.fields, picks, &mut warnings)?;
    let rows = Rows::read(file, text, &dialect, &plan.actions, &marks)?;
    if rows.count == 0 {
        return Err(LogError::new(file, "there is a header but no row of numbers")
            .remedy("check that the log was copied completely"));
    }
    Ok(vec![plan.into_log(file, dialect, rows, warnings)?])
}

/// Looks at the first cells of every column, to tell stamps from numbers.
pub(super) fn look_at_values(text: &[u8], dialect: &mut Dialect, marks: &Marks) {
    const ROWS: usize = 50;
    let mut stamps = time::StampParser::default();
    let mut settled = vec![false; dialect.fields.len()];
    for line in text[dialect.first_byte..].split(|&b| b == b'\n').take(ROWS) {
        if dialect::is_comment_row(line.trim_ascii()) {
            continue;
        }
        let mut at = Some(0);
        for (field, settled) in dialect.fields.iter_mut().zip(&mut settled) {
            let Some(from) = at else { break };
            let cell = cell::cell(line, from, dialect.separator);
            at = cell.next;
            if number::parse(cell.text, dialect.decimal_comma, marks) == Cell::Missing {
                continue;
            }
            let look = if stamps.stamp(cell.text).is_some() {
                Look::Stamp
            } else if cell.text.contains(&b':') && time::clock(cell.text).is_some() {
                Look::Clock
            } else if stamps.date(cell.text).is_some() {
                Look::Date
            } else if number::parse(cell.text, dialect.decimal_comma, marks) == Cell::Other {
                Look::Other
            } else {
                Look::Number
            };
            if !*settled {
                (field.look, *settled) = (look, true);
            }
        }
    }
    // Beside a date, `0727` and `072730` are times of day.
    let has_date = dialect.fields.iter().any(|f| f.look == Look::Date && f.name.eq_ignore_ascii_case("date"));
    let plain_time =
        |f: &&mut Field| f.look == Look::Number && f.unit.is_none() && f.name.eq_ignore_ascii_case("time");
    if has_date && let Some(field) = dialect.fields.iter_mut().find(plain_time) {
        field.look = Look::Clock;
    }
}

fn no_header(file: &str, text: &[u8], dialect: &Dialect, error: &LogError) -> LogError {
    let line = text[dialect.first_byte..].split(|&b| b == b'\n').next().unwrap_or_default();
    let width = dialect.fields.len();
    let problem = format!("no header line names the {width} columns ({})", error.problem);
    LogError::new(file, problem)
        .at(Place::line(dialect.first_line, &decode(line)))
        .remedy(format!(
            "name the columns by their numbers, for example --column pressure={}:dbar",
            2.min(width)
        ))
        .foreign()
}

/// What is done with every column, and what becomes of it.
pub(super) struct Plan {
    picks: Picks,
    pub actions: Vec<Action>,
    /// Role, slot of its values in the rows, unit.
    numbers: Vec<(Role, usize, Unit)>,
    flags: Vec<(Role, usize)>,
    time: TimePlan,
}

enum TimePlan {
    None,
    /// Stamps, or a date and a clock, or a clock alone.
    Absolute {
        dated: bool,
    },
    /// Numbers: slot, unit, reference time.
    Counted {
        slot: usize,
        unit: Unit,
        since: Option<time::Nanos>,
    },
}

impl Plan {
    pub fn new(
        file: &str,
        fields: &[Field],
        mut picks: Picks,
        warnings: &mut Vec<Warning>,
    ) -> Result<Self, LogError> {
        let mut actions = vec![Action::Skip; fields.len()];
        let (mut numbers, mut flags, mut slots) = (Vec::new(), Vec::new(), 0);
        let mut time = TimePlan::None;
        let mut aside = Vec::new();
        for pick in &picks.roles {
            match (pick.role, fields[pick.index].look) {
                (Role::Flag, _) => {
                    actions[pick.index] = Action::Flag(flags.len());
                    flags.push((Role::Flag, pick.index));
                }
                // Cells that are no time at all are found, and named, when the rows are read.
                (Role::Time, Look::Stamp | Look::Other) => {
                    actions[pick.index] = Action::Stamp;
                    time = TimePlan::Absolute { dated: true };
                }
                (Role::Time, Look::Clock) => {
                    actions[pick.index] = Action::Clock;
                    time = TimePlan::Absolute { dated: picks.date.is_some() };
                }
                (Role::Time, Look::Date) if fields[pick.index].unit.is_none() && !pick.chosen => {
                    let label = &fields[pick.index].label;
                    return Err(LogError::new(
                        file,
                        format!("the column '{label}' holds dates without a time of day"),
                    )
                    .remedy("name the column of times, for example --column time=NAME:s"));
                }
                (Role::Time, Look::Date | Look::Number) => {
                    let (unit, since) = columns::time_unit(file, "column", fields, pick)?;
                    actions[pick.index] = Action::Number(slots);
                    time = TimePlan::Counted { slot: slots, unit, since };
                    slots += 1;
                }
                (role, _) => match columns::unit_of(file, "column", fields, pick, warnings)? {
                    Some(unit) => {
                        actions[pick.index] = Action::Number(slots);
                        numbers.push((role, slots, unit));
                        slots += 1;
                    }
                    None => aside.push(role),
                },
            }
        }
        picks.roles.retain(|pick| !aside.contains(&pick.role));
        if let Some(date) = picks.date {
            actions[date] = Action::Date;
        }
        if let Some(start) = picks.start_from {
            actions[start] = Action::StartStamp;
        }
        for &(role, index) in &picks.flags_of {
            let slot = flags.len();
            actions[index] =
                if is_woce_flag(&fields[index]) { Action::WoceFlag(slot) } else { Action::Flag(slot) };
            flags.push((role, index));
        }
        Ok(Self { picks, actions, numbers, flags, time })
    }

    pub fn into_log(
        self,
        file: &str,
        dialect: Dialect,
        mut rows: Rows,
        mut warnings: Vec<Warning>,
    ) -> Result<Log, LogError> {
        let fields = &dialect.fields;
        warnings.append(&mut rows.warnings);
        let assumed =
            self.flags.iter().map(|(_, index)| &fields[*index]).filter(|field| !is_woce_flag(field));
        let labels: Vec<_> = assumed.map(|field| format!("'{}'", field.label)).collect();
        if !labels.is_empty() {
            warnings.push(Warning::new(
                "flag_scheme_assumed",
                format!(
                    "the scheme of the flags in {} is not told: 1 good, 2 not evaluated, 3 questionable, 4 bad, 9 missing is assumed",
                    labels.join(", ")
                ),
                "check that the flags follow the IOC scheme",
            ));
        }
        let mut flags: Vec<(Role, Option<Vec<Flag>>)> =
            self.flags.iter().zip(rows.flags).map(|((role, _), flags)| (*role, Some(flags))).collect();
        let mut flags_of =
            |role: Role| flags.iter_mut().find(|(r, _)| *r == role).and_then(|(_, flags)| flags.take());

        let time = self.picks.of(Role::Time).and_then(|pick| {
            let axis = match &self.time {
                TimePlan::None => return None,
                TimePlan::Absolute { dated } => axis::absolute(&rows.stamps, *dated),
                TimePlan::Counted { slot, unit, since } => {
                    axis::counted(std::mem::take(&mut rows.numbers[*slot]), unit, *since, rows.start)
                }
            };
            Some(TimeAxis {
                elapsed_s: axis.0,
                start: axis.1,
                name: fields[pick.index].label.clone(),
                unit: match &self.time {
                    TimePlan::Counted { unit, since, .. } => {
                        unit.name.clone() + if since.is_some() { " since a date" } else { "" }
                    }
                    TimePlan::Absolute { dated: false } => "time of day".to_string(),
                    TimePlan::Absolute { .. } if self.picks.date.is_some() => {
                        "date and time of day".to_string()
                    }
                    _ => "ISO 8601".to_string(),
                },
                recognised_by: columns::recognised_by(pick),
            })
        });
        if rows.stamps_without_offset {
            warnings.push(Warning::new(
                "time_assumed_utc",
                "the times do not say their offset from UTC; they are taken as UTC",
                "",
            ));
        }
        let mut channel = |role: Role| {
            let (_, slot, unit) = self.numbers.iter().find(|number| number.0 == role)?;
            let pick = self.picks.of(role)?;
            let values = std::mem::take(&mut rows.numbers[*slot]);
            Some((
                columns::channel(&fields[pick.index], pick, unit, values, flags_of(role)),
                unit.pressure_kind.or(pick.pressure_kind),
            ))
        };
        let (latitude, longitude) = (channel(Role::Latitude), channel(Role::Longitude));
        let position = latitude.and_then(|(latitude, _)| {
            position::of_track(
                &latitude.values,
                longitude.as_ref().map(|l| l.0.values.as_slice()),
                &mut warnings,
            )
        });
        let Some((pressure, pressure_kind)) = channel(Role::Pressure) else {
            return Err(LogError::new(file, "the log has no pressure"));
        };
        let (temperature, conductivity, salinity) =
            (channel(Role::Temperature), channel(Role::Conductivity), channel(Role::Salinity));
        let (altitude, pitch, roll) = (channel(Role::Altitude), channel(Role::Pitch), channel(Role::Roll));
        Ok(Log {
            source: file.to_string(),
            format: format!("delimited text, {}", dialect.separator.name())
                + if dialect.decimal_comma { ", decimal comma" } else { "" },
            station: None,
            position,
            start: time.as_ref().and_then(|axis| axis.start),
            time,
            pressure,
            pressure_kind,
            temperature: temperature.map(|c| c.0),
            conductivity: conductivity.map(|c| c.0),
            salinity: salinity.map(|c| c.0),
            altitude: altitude.map(|c| c.0),
            pitch: pitch.map(|c| c.0),
            roll: roll.map(|c| c.0),
            flags: flags_of(Role::Flag),
            unused: self.picks.unused(fields),
            lines: rows.lines,
            warnings,
        })
    }
}

/// `CTDPRS_FLAG_W` and its like are names of the WOCE scheme.
fn is_woce_flag(field: &Field) -> bool {
    compact(&field.name).ends_with("flagw")
}
