//! NetCDF logs: CF and COARDS layouts, classic and NetCDF-4.

mod container;
mod layout;
mod quality;
mod station;

use container::{Container, Kind, Variable};
use layout::Layout;

use super::columns::{self, Pick, Picks};
use super::header::{Field, Look};
use super::input::Input;
use super::number::Marks;
use super::role::{self, Meaning, Recognised};
use super::{
    Channel, Flag, Log, LogError, Position, PressureKind, ReadOptions, Role, RowLines, TimeAxis, axis,
    position, time,
};
use crate::warning::Warning;

/// Whether a file begins like NetCDF: classic, 64-bit offset, CDF-5, or HDF5 as NetCDF-4 uses it.
pub(super) fn recognises(head: &[u8]) -> bool {
    matches!(head, [b'C', b'D', b'F', 1 | 2 | 5, ..]) || head.starts_with(b"\x89HDF\r\n\x1a\n")
}

/// Reads every profile of a NetCDF file.
pub(super) fn read(input: &Input, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    let file = input.name.as_str();
    let container = Container::open(&input.bytes).map_err(|detail| damaged(file, &detail))?;
    let marks = Marks::new(options);
    // Texts can be no quantity; they are looked at for the station only.
    let numeric: Vec<&Variable> = container.variables.iter().filter(|v| v.kind == Kind::Number).collect();
    let mut fields: Vec<Field> = numeric.iter().map(|variable| field(variable)).collect();
    keep_times_of_samples(&numeric, &mut fields);
    let picks = columns::resolve(file, "variable", &fields, options)?;
    let Some(pick) = picks.of(Role::Pressure) else {
        return Err(LogError::new(file, "the log has no pressure"));
    };
    let pressure = numeric[pick.index];
    let layout = Layout::of(&container, pressure).map_err(|detail| {
        LogError::new(file, format!("the pressure variable '{}' cannot be used: {detail}", pressure.name))
    })?;
    Source { file, container: &container, marks, numeric, fields, picks, layout }.logs()
}

fn damaged(file: &str, detail: &str) -> LogError {
    LogError::new(file, format!("the NetCDF file is damaged or cut short ({detail})"))
        .remedy("copy it again; its length should be that of the original")
}

/// A variable as a column: what it holds is told by its standard name, else its WOCE name, else its own.
fn field(variable: &Variable) -> Field {
    let text = |name: &str| variable.attributes().text(name);
    let unit = text("units").map(str::to_string);
    let known = |name: &str| role::recognise(name, unit.as_deref());
    let recognised = match (text("standard_name"), text("WHPO_Variable_Name")) {
        (Some(name), _) => known(name),
        (None, Some(name)) => known(name).or_else(|| known(&variable.name)),
        (None, None) => known(&variable.name),
    };
    let quantity = |r: &Recognised| matches!(r.meaning, Meaning::Role(role) if role != Role::Flag);
    let mut recognised = recognised.filter(quantity);
    if let Some(recognised) = &mut recognised
        && recognised.pressure_kind.is_none()
        && text("long_name")
            .is_some_and(|name| name.to_ascii_lowercase().replace('-', " ").contains("equals 0 at sea level"))
    {
        recognised.pressure_kind = Some(PressureKind::Sea);
    }
    Field {
        label: variable.name.clone(),
        name: variable.name.clone(),
        unit_how: if unit.is_some() { "units attribute" } else { "" },
        unit,
        recognised,
        look: Look::Number,
    }
}

/// A file may hold the time of every sample and, beside it, a nominal time of the cast: the one along the samples of the pressure is the
/// time of the log.
fn keep_times_of_samples(variables: &[&Variable], fields: &mut [Field]) {
    let holds = |field: &Field, role| field.recognised.is_some_and(|r| r.meaning == Meaning::Role(role));
    let long = |variable: &Variable| {
        let dimensions = variable.dimensions.iter();
        dimensions.filter(|(_, size)| *size > 1).map(|(name, _)| name.clone()).collect::<Vec<_>>()
    };
    let Some(pressure) = fields.iter().position(|field| holds(field, Role::Pressure)) else { return };
    let samples = long(variables[pressure]);
    let times: Vec<usize> = (0..fields.len()).filter(|&i| holds(&fields[i], Role::Time)).collect();
    let along = |i: usize| long(variables[i]).iter().any(|name| samples.contains(name));
    if times.len() > 1 && times.iter().any(|&i| along(i)) {
        for i in times.into_iter().filter(|&i| !along(i)) {
            fields[i].recognised = None;
        }
    }
}

/// Everything that is known about the file before its values are read.
struct Source<'a> {
    file: &'a str,
    container: &'a Container,
    marks: Marks,
    /// Variables of numbers; `fields` and `picks` count along them.
    numeric: Vec<&'a Variable>,
    fields: Vec<Field>,
    picks: Picks,
    layout: Layout,
}

/// A time for every sample, or for every profile.
enum Times {
    None,
    Samples { values: Vec<f64>, pick: Pick },
    Starts(Vec<Option<jiff::Timestamp>>),
}

impl Source<'_> {
    fn logs(&self) -> Result<Vec<Log>, LogError> {
        let mut warnings = Vec::new();
        let mut used: Vec<String> = Vec::new();
        let pressure = self.channel(Role::Pressure, &mut used, &mut warnings)?;
        let Some((pressure, pressure_kind)) = pressure else {
            return Err(LogError::new(self.file, "the log has no pressure"));
        };
        let mut channel = |role| Ok(self.channel(role, &mut used, &mut warnings)?.map(|c| c.0));
        let temperature = channel(Role::Temperature)?;
        let conductivity = channel(Role::Conductivity)?;
        let salinity = channel(Role::Salinity)?;
        let altitude = channel(Role::Altitude)?;
        let pitch = channel(Role::Pitch)?;
        let roll = channel(Role::Roll)?;
        let flags = self.sample_flags(&mut used, &mut warnings)?;
        let times = self.times(&mut used, &mut warnings)?;
        let positions = self.positions(&mut used, &mut warnings)?;
        let stations = station::names(self.container, &self.layout, &mut used);
        let unused: Vec<String> = self
            .container
            .variables
            .iter()
            .map(|v| v.name.clone())
            .filter(|name| !used.contains(name))
            .collect();

        let mut logs = Vec::new();
        for (i, range) in self.layout.ranges.iter().enumerate() {
            let channels = [&temperature, &conductivity, &salinity, &altitude, &pitch, &roll];
            let mut range = range.clone();
            if self.layout.padded {
                let held = |at: usize| {
                    pressure.values[at].is_finite()
                        || channels.iter().any(|c| c.as_ref().is_some_and(|c| c.values[at].is_finite()))
                };
                range.end = range.clone().rposition(held).map_or(range.start, |last| range.start + last + 1);
            }
            if range.is_empty() {
                continue;
            }
            let cut =
                |channel: &Option<Channel>| channel.as_ref().map(|channel| slice(channel, range.clone()));
            let (time, start) = self.time_of(&times, i, range.clone())?;
            logs.push(Log {
                source: if self.layout.ranges.len() > 1 {
                    format!("{}#{}", self.file, i + 1)
                } else {
                    self.file.to_string()
                },
                format: self.container.format.to_string(),
                station: stations.get(i).cloned().flatten(),
                position: positions.get(i).copied().flatten(),
                start,
                time,
                pressure: slice(&pressure, range.clone()),
                pressure_kind,
                temperature: cut(&temperature),
                conductivity: cut(&conductivity),
                salinity: cut(&salinity),
                altitude: cut(&altitude),
                pitch: cut(&pitch),
                roll: cut(&roll),
                flags: flags.as_ref().map(|flags| flags[range.clone()].to_vec()),
                unused: unused.clone(),
                lines: RowLines::None,
                warnings: warnings.clone(),
            });
        }
        if logs.is_empty() {
            return Err(LogError::new(
                self.file,
                format!("the pressure variable '{}' holds no value", pressure.name),
            ));
        }
        Ok(logs)
    }

    /// The values of a picked variable.
    fn values(&self, pick: &Pick) -> Result<Vec<f64>, LogError> {
        let variable = self.numeric[pick.index];
        let values = self
            .container
            .numbers(variable, &self.marks)
            .map_err(|detail| self.damaged(variable, &detail))?;
        if let Some(at) = values.iter().position(|value| value.is_infinite()) {
            return Err(LogError::new(
                self.file,
                format!("value {} of the variable '{}' is infinite", at + 1, variable.name),
            )
            .remedy("declare it as missing_value, or correct it"));
        }
        Ok(values)
    }

    fn damaged(&self, variable: &Variable, detail: &str) -> LogError {
        damaged(self.file, &format!("variable '{}': {detail}", variable.name))
    }

    /// The channel of a role over all profiles, with its flags.
    fn channel(
        &self,
        role: Role,
        used: &mut Vec<String>,
        warnings: &mut Vec<Warning>,
    ) -> Result<Option<(Channel, Option<PressureKind>)>, LogError> {
        let Some(pick) = self.picks.of(role) else { return Ok(None) };
        let variable = self.numeric[pick.index];
        let Some(unit) = columns::unit_of(self.file, "variable", &self.fields, pick, warnings)? else {
            return Ok(None);
        };
        let Some(values) = self.layout.per_sample(variable, &self.values(pick)?) else {
            return Err(LogError::new(
                self.file,
                format!(
                    "the {} variable '{}' does not run along the samples of pressure",
                    role.name(),
                    variable.name
                ),
            )
            .remedy(format!("name another: --column {}=VARIABLE:{}", role.name(), unit.name)));
        };
        used.push(variable.name.clone());
        let flags = match quality::variable_of(self.container, variable) {
            Some(flags) => {
                let read = quality::read(self.container, flags, warnings)
                    .map_err(|detail| self.damaged(flags, &detail))?;
                let read = self.layout.per_sample(flags, &read);
                if read.is_some() {
                    used.push(flags.name.clone());
                }
                read
            }
            None => None,
        };
        let channel = columns::channel(&self.fields[pick.index], pick, &unit, values, flags);
        Ok(Some((channel, unit.pressure_kind.or(pick.pressure_kind))))
    }

    /// Flags of the whole sample, which only the user can point out.
    fn sample_flags(
        &self,
        used: &mut Vec<String>,
        warnings: &mut Vec<Warning>,
    ) -> Result<Option<Vec<Flag>>, LogError> {
        let Some(pick) = self.picks.of(Role::Flag) else { return Ok(None) };
        let variable = self.numeric[pick.index];
        used.push(variable.name.clone());
        let flags = quality::read(self.container, variable, warnings)
            .map_err(|detail| self.damaged(variable, &detail))?;
        match self.layout.per_sample(variable, &flags) {
            Some(flags) => Ok(Some(flags)),
            None => Err(LogError::new(
                self.file,
                format!("the flags '{}' do not run along the samples of pressure", variable.name),
            )
            .remedy("name another: --column flag=VARIABLE")),
        }
    }

    fn times(&self, used: &mut Vec<String>, warnings: &mut Vec<Warning>) -> Result<Times, LogError> {
        let Some(pick) = self.picks.of(Role::Time) else {
            return Ok(
                station::woce_start(self.container, &self.layout, used).map_or(Times::None, Times::Starts)
            );
        };
        let variable = self.numeric[pick.index];
        let values = self.values(pick)?;
        used.push(variable.name.clone());
        if let Some(values) = self.layout.per_sample(variable, &values) {
            // A single sample with a single time has a start and no axis.
            if values.len() > 1 {
                return Ok(Times::Samples { values, pick: pick.clone() });
            }
        }
        let Some(values) = self.layout.per_profile(&variable.dimensions, &values) else {
            warnings.push(Warning::new(
                "time_left_aside",
                format!(
                    "the time variable '{}' fits neither the samples nor the profiles; it is left aside",
                    variable.name
                ),
                "name another with --column time=VARIABLE",
            ));
            return Ok(Times::None);
        };
        let (unit, since) = columns::time_unit(self.file, "variable", &self.fields, pick)?;
        let since = since.filter(|_| self.usual_calendar(variable, warnings));
        let start = |value: f64| time::after(since?, value, unit.convert(1.0)).and_then(time::timestamp);
        Ok(Times::Starts(values.into_iter().map(start).collect()))
    }

    /// Whether dates are counted as everybody counts them.
    fn usual_calendar(&self, variable: &Variable, warnings: &mut Vec<Warning>) -> bool {
        let calendar = variable.attributes().text("calendar").unwrap_or("standard").to_ascii_lowercase();
        let usual = matches!(calendar.as_str(), "standard" | "gregorian" | "proleptic_gregorian" | "none");
        if !usual {
            warnings.push(Warning::new(
                "calendar_not_known",
                format!("the times count in the calendar '{calendar}'; the start of the cast is left out"),
                "",
            ));
        }
        usual
    }

    /// Time axis and start of one profile.
    fn time_of(
        &self,
        times: &Times,
        profile: usize,
        range: std::ops::Range<usize>,
    ) -> Result<(Option<TimeAxis>, Option<jiff::Timestamp>), LogError> {
        match times {
            Times::None => Ok((None, None)),
            Times::Starts(starts) => Ok((None, starts.get(profile).copied().flatten())),
            Times::Samples { values, pick } => {
                let variable = self.numeric[pick.index];
                let (unit, since) = columns::time_unit(self.file, "variable", &self.fields, pick)?;
                let since = since.filter(|_| self.usual_calendar(variable, &mut Vec::new()));
                let (elapsed_s, start) = axis::counted(values[range].to_vec(), &unit, since, None);
                let axis = TimeAxis {
                    elapsed_s,
                    start,
                    name: variable.name.clone(),
                    unit: unit.name + if since.is_some() { " since a date" } else { "" },
                    recognised_by: columns::recognised_by(pick),
                };
                Ok((Some(axis), start))
            }
        }
    }

    fn positions(
        &self,
        used: &mut Vec<String>,
        warnings: &mut Vec<Warning>,
    ) -> Result<Vec<Option<Position>>, LogError> {
        let mut read = |role: Role,
                        warnings: &mut Vec<Warning>|
         -> Result<Option<(Vec<f64>, &Variable)>, LogError> {
            let Some(pick) = self.picks.of(role) else { return Ok(None) };
            let Some(unit) = columns::unit_of(self.file, "variable", &self.fields, pick, warnings)? else {
                return Ok(None);
            };
            let mut values = self.values(pick)?;
            unit.convert_all(&mut values);
            used.push(self.numeric[pick.index].name.clone());
            Ok(Some((values, self.numeric[pick.index])))
        };
        let latitude = read(Role::Latitude, warnings)?;
        let longitude = read(Role::Longitude, warnings)?;
        let Some((latitude, variable)) = latitude else { return Ok(Vec::new()) };
        let of_profiles = |values: &[f64], v: &Variable| self.layout.per_profile(&v.dimensions, values);
        let of_samples = |values: &[f64], v: &Variable| self.layout.per_sample(v, values);
        if let Some(latitudes) = of_profiles(&latitude, variable) {
            let longitudes = longitude.and_then(|(values, v)| of_profiles(&values, v)).unwrap_or_default();
            let each = latitudes.iter().enumerate();
            return Ok(each
                .map(|(i, &latitude)| position::of_point(latitude, longitudes.get(i).copied(), warnings))
                .collect());
        }
        let Some(latitudes) = of_samples(&latitude, variable) else { return Ok(Vec::new()) };
        let longitudes = longitude.and_then(|(values, v)| of_samples(&values, v));
        let ranges = self.layout.ranges.iter();
        let track = |range: &std::ops::Range<usize>| {
            position::of_track(
                &latitudes[range.clone()],
                longitudes.as_ref().map(|l| &l[range.clone()]),
                warnings,
            )
        };
        Ok(ranges.map(track).collect())
    }
}

fn slice(channel: &Channel, range: std::ops::Range<usize>) -> Channel {
    Channel {
        values: channel.values[range.clone()].to_vec(),
        flags: channel.flags.as_ref().map(|flags| flags[range].to_vec()),
        name: channel.name.clone(),
        unit: channel.unit.clone(),
        recognised_by: channel.recognised_by.clone(),
    }
}
