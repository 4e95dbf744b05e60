//! WHP-Exchange CTD files: the comma separated format of the hydrographic archives.
//!
//! A first line `CTD,stamp`, comments, `NUMBER_HEADERS = n` and the n - 1 lines `KEY = value` that it counts, a line of
//! names, a line of units, the rows, `END_DATA` (Swift and Diggs, "Description of WHP-Exchange Format for CTD/Hydrographic
//! Data", 2008; recalled). The rows are read as those of any delimited text.

mod lines;

use lines::{Item, Line, Lines, bare};

use super::cell::Separator;
use super::columns::{self, Pick, Picks};
use super::delimited::{Plan, look_at_values};
use super::dialect::Dialect;
use super::header::Field;
use super::input::Input;
use super::number::{self, Cell, Marks};
use super::rows::Rows;
use super::{Log, LogError, ReadOptions, Role, position, time};
use crate::warning::Warning;

/// What the first line announces.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Kind {
    Ctd,
    Bottle,
}

/// Whether a file begins like WHP-Exchange, with the values of a CTD or of bottles.
pub(super) fn recognises(head: &[u8]) -> bool {
    kind(head).is_some()
}

fn kind(bytes: &[u8]) -> Option<Kind> {
    let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
    let first = bytes.split(|&b| b == b'\n').next()?;
    let comma = first.iter().position(|&b| b == b',')?;
    let (word, stamp) = (first[..comma].trim_ascii(), bare(&first[comma + 1..]));
    let kind = match word {
        b"CTD" => Kind::Ctd,
        b"BOTTLE" => Kind::Bottle,
        _ => return None,
    };
    // Any table may have a column called CTD: the stamp begins with a date, or the header is counted further down.
    let dated = stamp.len() >= 8 && stamp[..8].iter().all(u8::is_ascii_digit) && !stamp.contains(&b',');
    let head = &bytes[..bytes.len().min(16 * 1024)];
    let counted =
        || head.split(|&b| b == b'\n').any(|line| line.trim_ascii_start().starts_with(COUNT.as_bytes()));
    (dated || counted()).then_some(kind)
}

/// The key that opens the header.
const COUNT: &str = "NUMBER_HEADERS";
/// The line that ends the rows.
const END: &[u8] = b"END_DATA";

/// Reads the cast of a WHP-Exchange CTD file.
pub(super) fn read(input: &Input, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    let file = input.name.as_str();
    let Some(text) = input.text() else {
        return Err(LogError::new(file, "this begins like a WHP-Exchange file, but it is no text")
            .remedy("copy it again"));
    };
    if kind(&text) == Some(Kind::Bottle) {
        return Err(LogError::new(
            file,
            "this is a WHP-Exchange bottle file: values of water samples, not of a CTD",
        )
        .remedy("give the CTD file of the cast, whose first line begins with CTD")
        .foreign());
    }
    let mut warnings = Vec::new();
    let head = Head::read(file, &text)?;
    let rows_text = &text[..head.end_of_rows(&text, &mut warnings)];
    let marks = Marks::new(options);
    let mut dialect = head.dialect()?;
    look_at_values(rows_text, &mut dialect, &marks);
    let picks = columns::resolve(file, "column", &dialect.fields, options)
        .map_err(|error| error.at(head.names.place()))?;
    head.check_units(&dialect.fields, &picks, options)?;
    let (station, position, start) =
        (head.station(), head.position(&mut warnings)?, head.start(&mut warnings));
    let plan = Plan::new(file, &dialect.fields, picks, &mut warnings)?;
    let rows = Rows::read(file, rows_text, &dialect, &plan.actions, &marks)?;
    if rows.count == 0 {
        return Err(LogError::new(file, "there is a header but no row of numbers")
            .at(head.units.place())
            .remedy("check that the log was copied completely"));
    }
    let mut log = plan.into_log(file, dialect, rows, warnings)?;
    log.format = "WHP-Exchange CTD".to_string();
    log.station = station;
    log.position = log.position.or(position);
    log.start = log.start.or(start);
    Ok(vec![log])
}

/// Everything above the rows.
struct Head<'a> {
    file: &'a str,
    count: Line<'a>,
    items: Vec<Item<'a>>,
    names: Line<'a>,
    units: Line<'a>,
    /// Where the rows begin.
    first_byte: usize,
    first_line: u64,
}

impl<'a> Head<'a> {
    fn read(file: &'a str, text: &'a [u8]) -> Result<Self, LogError> {
        let mut lines = Lines { text, at: 0, number: 0 };
        lines.any();
        let cut = |what: &str| {
            LogError::new(file, format!("the file ends before {what}"))
                .remedy("check that it was copied completely")
        };
        let line = lines.next().ok_or_else(|| cut("its header"))?;
        let Some(count) = Item::new(line).filter(|item| item.key == COUNT) else {
            return Err(LogError::new(file, format!("expected {COUNT} = n here"))
                .at(line.place())
                .remedy("put the number of header lines, itself counted, in front of the header"));
        };
        let mut items = Vec::new();
        let names = loop {
            let line = lines.next().ok_or_else(|| cut("the names of its columns"))?;
            match Item::new(line) {
                Some(item) => items.push(item),
                None => break line,
            }
        };
        let found = items.len() + 1;
        if count.value.parse() != Ok(found) {
            let problem = format!(
                "{COUNT} says '{}', but the header has {found} lines of the form KEY = value, itself counted",
                count.value
            );
            return Err(LogError::new(file, problem)
                .at(count.place())
                .remedy(format!("write {COUNT} = {found} if no line was lost, else copy the file again")));
        }
        let units = lines.next().ok_or_else(|| cut("the units of its columns"))?;
        Ok(Self {
            file,
            count: line,
            items,
            names,
            units,
            first_byte: lines.at.min(text.len()),
            first_line: lines.number + 1,
        })
    }

    /// The value of a key; none where it is absent, empty or the mark of a missing value.
    fn item(&self, key: &str) -> Option<&Item<'a>> {
        let missing =
            |item: &Item<'_>| number::parse(item.value.as_bytes(), false, &Marks::default()) == Cell::Missing;
        self.items.iter().find(|item| item.key == key && !missing(item))
    }

    /// Where the rows end; a warning tells when nothing says so.
    fn end_of_rows(&self, text: &[u8], warnings: &mut Vec<Warning>) -> usize {
        let mut lines = Lines { text, at: self.first_byte, number: self.first_line - 1 };
        let Some(end) = lines.by_ref().find(|line| bare(line.bytes).eq_ignore_ascii_case(END)) else {
            warnings.push(Warning::new(
                "end_data_missing",
                "there is no END_DATA behind the rows: the file may be cut short",
                "check that it was copied completely",
            ));
            return text.len();
        };
        if let Some(more) = lines.next() {
            warnings.push(Warning::new(
                "lines_after_end",
                format!("what follows END_DATA, from line {} on, was left aside", more.number),
                "one file holds one cast: part it if there is another",
            ));
        }
        end.start
    }

    /// The columns, with the units below their names.
    fn dialect(&self) -> Result<Dialect, LogError> {
        let mut names = self.names.cells();
        if names.len() > 1 && names.last().is_some_and(|cell| cell.0.is_empty()) {
            names.pop();
        }
        let mut units = self.units.cells();
        if let Some((text, start, length)) = units.first()
            && matches!(number::parse(text.as_bytes(), false, &Marks::default()), Cell::Value(_))
        {
            return Err(LogError::new(self.file, "expected the units of the columns here, found a number")
                .at(self.units.span(*start, *length))
                .remedy("put a line such as DBAR,,ITS-90,,PSS-78, below the names of the columns"));
        }
        if units.len() == names.len() + 1 && units.last().is_some_and(|cell| cell.0.is_empty()) {
            units.pop();
        }
        if units.len() != names.len() {
            return Err(LogError::new(
                self.file,
                format!("this line of units has {} cells, the line of names {}", units.len(), names.len()),
            )
            .at(self.units.place())
            .remedy("each column needs its cell; that of a column without a unit stays empty"));
        }
        let mut fields: Vec<Field> = names.iter().map(|cell| Field::from_cell(&cell.0)).collect();
        fields.iter_mut().zip(&units).for_each(|(field, unit)| field.add_unit(&unit.0));
        Ok(Dialect {
            separator: Separator::Comma,
            decimal_comma: false,
            fields,
            has_header: true,
            first_line: self.first_line,
            first_byte: self.first_byte,
            rows_above: 0,
        })
    }

    /// A unit that cannot be told, or degrees without their scale, with its place.
    fn check_units(&self, fields: &[Field], picks: &Picks, options: &ReadOptions) -> Result<(), LogError> {
        let cells = self.units.cells();
        let place = |pick: &Pick| match cells.get(pick.index) {
            Some((text, start, length)) if !text.is_empty() => self.units.span(*start, *length),
            _ => self.units.place(),
        };
        for pick in &picks.roles {
            if !matches!(pick.role, Role::Pressure | Role::Temperature | Role::Conductivity | Role::Salinity)
            {
                continue;
            }
            columns::unit_of(self.file, "column", fields, pick, &mut Vec::new())
                .map_err(|error| error.at(place(pick)))?;
            let typed = options.columns.iter().any(|c| c.role == pick.role && c.unit.is_some());
            let told =
                fields[pick.index].unit.as_deref().is_some_and(|u| u.contains("90") || u.contains("68"));
            if pick.role == Role::Temperature && !typed && !told {
                let problem = "the scale of the temperature is not told: ITS-90 or IPTS-68";
                let [new, old] = ["ITS-90", "IPTS-68"]
                    .map(|unit| columns::option(fields, Role::Temperature, pick.index, Some(unit)));
                return Err(LogError::new(self.file, problem)
                    .at(place(pick))
                    .remedy(format!("say which: {new} or {old} (older casts, to about 1990)")));
            }
        }
        Ok(())
    }

    /// Station and cast, `STN/CAST`.
    fn station(&self) -> Option<String> {
        let value = |key| self.item(key).map(|item| item.value.as_str());
        match (value("STNNBR"), value("CASTNO")) {
            (Some(station), Some(cast)) => Some(format!("{station}/{cast}")),
            (station, _) => station.map(str::to_string),
        }
    }

    fn position(&self, warnings: &mut Vec<Warning>) -> Result<Option<super::Position>, LogError> {
        let Some(latitude) = self.degrees("LATITUDE")? else {
            warnings.push(Warning::new(
                "latitude_missing",
                format!(
                    "the header (from line {} on) tells no LATITUDE, which the format asks for",
                    self.count.number
                ),
                "give it: --lat DEGREES",
            ));
            return Ok(None);
        };
        Ok(position::of_point(latitude, self.degrees("LONGITUDE")?, warnings))
    }

    fn degrees(&self, key: &str) -> Result<Option<f64>, LogError> {
        let Some(item) = self.item(key) else { return Ok(None) };
        match number::parse(item.value.as_bytes(), false, &Marks::default()) {
            Cell::Value(value) => Ok(Some(value)),
            _ => Err(LogError::new(self.file, format!("{key} '{}' is not a number of degrees", item.value))
                .at(item.place())
                .remedy(format!("write decimal degrees, north and east positive: {key} = -31.5200"))),
        }
    }

    /// `DATE` (yyyymmdd) and `TIME` (hhmm), both UTC. A cast without them is as deep as one with them: a warning will do.
    fn start(&self, warnings: &mut Vec<Warning>) -> Option<jiff::Timestamp> {
        let (date, clock) = (self.item("DATE")?, self.item("TIME")?);
        // 0027 has lost its zeros where a spreadsheet went over the file.
        let padded = format!("{:0>4}", clock.value);
        let start = time::StampParser::default()
            .date(date.value.as_bytes())
            .zip(time::clock(padded.as_bytes()))
            .and_then(|(day, clock)| time::timestamp(day.checked_add(clock)?));
        if start.is_none() {
            warnings.push(Warning::new(
                "start_not_read",
                format!(
                    "DATE '{}' and TIME '{}' (lines {} and {}) are not yyyymmdd and hhmm; the start of the cast is left out",
                    date.value, clock.value, date.line.number, clock.line.number
                ),
                "",
            ));
        }
        start
    }
}
