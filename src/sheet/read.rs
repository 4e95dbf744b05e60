//! From the text of a sheet to its scopes: every table and key by name, every fault with its place.

use super::error::{Fault, SheetError, line_of, place};
use super::keys::{self, CAST, CAST_LOG, DIRECT, Key, Kind, Section, UNCERTAINTY};
use super::scope::Scope;
use super::value;
use crate::log::Place;
use crate::words::nearest;
use std::ops::Range;
use std::path::Path;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// A `[[cast]]` as it is written.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct CastTable {
    /// Path or pattern of its logs.
    pub log: String,
    /// Where that stands.
    pub place: Box<Place>,
    /// What it says.
    pub scope: Scope,
}

/// A sheet as it is written.
#[derive(Debug, Clone, Default, PartialEq)]
pub(super) struct Document {
    /// What holds for every cast.
    pub station: Scope,
    /// The casts, in the order of the sheet.
    pub casts: Vec<CastTable>,
}

/// Reads a sheet. `file` is its name in messages, `folder` what its paths are counted from.
pub(super) fn document(file: &str, text: &str, folder: &Path) -> Result<Document, SheetError> {
    let table = DeTable::parse(text).map_err(|e| {
        let at = e.span().unwrap_or(0..0);
        // Some messages break their lines; here they stand on one.
        let words: Vec<&str> = e.message().split_whitespace().collect();
        Fault::new(file, Some(place(text, at)), format!("this is not TOML: {}", words.join(" ")))
            .remedy("texts stand in quotes, numbers have a decimal point, comments begin with #")
    })?;
    let mut reader = Reader { file, text, folder, sections: keys::sections(), faults: Vec::new() };
    let document = reader.document(table.get_ref());
    let mut faults = reader.faults;
    if faults.is_empty() {
        return Ok(document);
    }
    // Tables are handed over by name; people read from the top.
    faults.sort_by_key(|(at, _)| *at);
    Err(SheetError { faults: faults.into_iter().map(|(_, fault)| fault).collect() })
}

struct Reader<'a> {
    file: &'a str,
    text: &'a str,
    folder: &'a Path,
    sections: Vec<Section>,
    /// With the byte where each stands.
    faults: Vec<(usize, Fault)>,
}

/// A key that was given: what it settles, by which of several ways, and where it stands.
struct Given {
    settles: String,
    way: String,
    name: &'static str,
    at: Range<usize>,
}

impl Reader<'_> {
    fn document(&mut self, table: &DeTable<'_>) -> Document {
        let mut document = Document::default();
        let mut given = Vec::new();
        for (name, value) in table {
            if name.get_ref() == CAST {
                document.casts = self.casts(value);
                continue;
            }
            let Some(index) = self.sections.iter().position(|s| s.name == name.get_ref()) else {
                let names: Vec<_> = self.sections.iter().map(|s| s.name).chain([CAST]).collect();
                self.unknown("a sheet", "section", name, &names, false);
                continue;
            };
            self.section(index, value, &mut document.station, &mut given, false);
        }
        self.clashes(given);
        document
    }

    fn casts(&mut self, value: &Spanned<DeValue<'_>>) -> Vec<CastTable> {
        let DeValue::Array(tables) = value.get_ref() else {
            let fault = self.fault(value.span(), "a cast is a table of its own: [[cast]], with two brackets");
            self.push(value.span(), fault);
            return Vec::new();
        };
        tables.iter().filter_map(|table| self.cast(table)).collect()
    }

    fn cast(&mut self, value: &Spanned<DeValue<'_>>) -> Option<CastTable> {
        let DeValue::Table(table) = value.get_ref() else {
            let problem = format!("expected a table [[cast]], found {}", value::words(value.get_ref()));
            let fault = self.fault(value.span(), problem);
            self.push(value.span(), fault);
            return None;
        };
        let (mut log, mut scope, mut given) = (None, Scope::default(), Vec::new());
        for (name, value) in table {
            let word = name.get_ref().as_ref();
            if word == CAST_LOG {
                log = self.cast_log(value);
            } else if let Some((section, key)) = self.direct(word) {
                self.key(section, key, name, value, &mut scope, &mut given);
            } else if let Some(index) =
                self.sections.iter().position(|s| s.name == word && !DIRECT.contains(&s.name))
            {
                self.section(index, value, &mut scope, &mut given, true);
            } else {
                let names: Vec<_> = std::iter::once(CAST_LOG)
                    .chain(self.sections.iter().flat_map(|s| match DIRECT.contains(&s.name) {
                        true => s.keys.iter().map(|key| key.name).collect(),
                        false => vec![s.name],
                    }))
                    .collect();
                self.unknown("[[cast]]", "key", name, &names, true);
            }
        }
        self.clashes(given);
        if !table.contains_key(CAST_LOG) {
            let fault = self
                .fault(value.span(), "this cast does not say which log it is about")
                .remedy("add its file, or a pattern for several: log = \"casts/*.csv\"");
            self.push(value.span(), fault);
        }
        let (log, at) = log?;
        Some(CastTable { log, place: place(self.text, at), scope })
    }

    fn cast_log(&mut self, value: &Spanned<DeValue<'_>>) -> Option<(String, Range<usize>)> {
        match value.get_ref() {
            DeValue::String(text) if !text.trim().is_empty() => Some((text.to_string(), value.span())),
            found => {
                let problem = format!(
                    "'{CAST_LOG}': expected the file of the cast, or a pattern for several, in quotes, found {}",
                    value::words(found)
                );
                let mut fault = self.fault(value.span(), problem);
                if matches!(found, DeValue::Table(_)) {
                    fault = fault.remedy("the keys of [log] stand directly in [[cast]]");
                }
                self.push(value.span(), fault);
                None
            }
        }
    }

    /// A key that stands directly in a `[[cast]]`.
    fn direct(&self, name: &str) -> Option<(&'static str, Key)> {
        self.sections
            .iter()
            .filter(|s| DIRECT.contains(&s.name))
            .find_map(|s| s.key(name).map(|key| (s.name, key)))
    }

    /// A section of the sheet, or of a cast.
    fn section(
        &mut self,
        index: usize,
        value: &Spanned<DeValue<'_>>,
        scope: &mut Scope,
        given: &mut Vec<Given>,
        of_cast: bool,
    ) {
        let section = self.sections[index].name;
        let header = header(section, of_cast);
        let DeValue::Table(table) = value.get_ref() else {
            let found = value::words(value.get_ref());
            let problem = format!("'{section}': expected a section {header}, found {found}");
            let fault = self.fault(value.span(), problem);
            self.push(value.span(), fault);
            return;
        };
        for (name, value) in table {
            match self.sections[index].key(name.get_ref()) {
                Some(key) => self.key(section, key, name, value, scope, given),
                None => {
                    let names: Vec<_> = self.sections[index].keys.iter().map(|key| key.name).collect();
                    self.unknown(&header, "key", name, &names, of_cast);
                }
            }
        }
    }

    fn key(
        &mut self,
        section: &'static str,
        key: Key,
        name: &Spanned<impl Sized>,
        value: &Spanned<DeValue<'_>>,
        scope: &mut Scope,
        given: &mut Vec<Given>,
    ) {
        let note = |settles: String, way: String| Given { settles, way, name: key.name, at: name.span() };
        if let Some((settles, way)) = keys::settles(section, &key) {
            given.push(note(settles, way.to_string()));
        }
        if let Kind::Uncertainty(term) = key.kind {
            given.push(note(keys::of_budget(term), format!("{section}.{}", key.name)));
        }
        if let Err(wrong) = value::put(&key, value, self.folder, scope) {
            let mut fault = self.fault(wrong.at.clone(), wrong.problem);
            fault.remedy = wrong.remedy;
            self.push(wrong.at, fault);
        }
    }

    /// Within one scope a thing is settled in one way.
    fn clashes(&mut self, mut given: Vec<Given>) {
        given.sort_by_key(|g| g.at.start);
        let mut told: Vec<Range<usize>> = Vec::new();
        for (i, later) in given.iter().enumerate() {
            let earlier = given[..i].iter().find(|g| g.settles == later.settles && g.way != later.way);
            if let Some(earlier) = earlier
                && !told.contains(&later.at)
            {
                let line = line_of(self.text, earlier.at.start);
                let problem = format!(
                    "'{}' cannot stand beside '{}' of line {line}: both settle {}",
                    later.name, earlier.name, later.settles
                );
                let fault = self.fault(later.at.clone(), problem).remedy("keep one of them");
                self.push(later.at.clone(), fault);
                told.push(later.at.clone());
            }
        }
    }

    fn unknown(
        &mut self,
        table: &str,
        what: &str,
        name: &Spanned<impl AsRef<str>>,
        names: &[&'static str],
        of_cast: bool,
    ) {
        let word = name.get_ref().as_ref();
        let elsewhere: Vec<&str> =
            self.sections.iter().filter(|s| s.key(word).is_some()).map(|s| s.name).collect();
        let remedy = match elsewhere[..] {
            [section] if section != UNCERTAINTY => format!("it belongs in {}", header(section, of_cast)),
            _ => format!("the nearest is '{}'; known are {}", nearest(word, names), names.join(", ")),
        };
        let fault = self.fault(name.span(), format!("{table} has no {what} '{word}'")).remedy(remedy);
        self.push(name.span(), fault);
    }

    fn fault(&self, at: Range<usize>, problem: impl Into<String>) -> Fault {
        Fault::new(self.file, Some(place(self.text, at)), problem)
    }

    fn push(&mut self, at: Range<usize>, fault: Fault) {
        self.faults.push((at.start, fault));
    }
}

/// How a section is opened, in the sheet or in a cast.
fn header(section: &str, of_cast: bool) -> String {
    match of_cast {
        true if DIRECT.contains(&section) => format!("[[{CAST}]]"),
        true => format!("[{CAST}.{section}]"),
        false => format!("[{section}]"),
    }
}
