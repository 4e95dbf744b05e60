//! The cast sheet: what is known of the casts of a cruise besides their logs, as TOML.

mod error;
mod keys;
pub(crate) mod pattern;
mod read;
mod scope;
mod template;
mod value;

pub use error::{Fault, SheetError};
pub use template::{CastFacts, DeckReading, template};

use crate::log::Place;
use crate::settings::Layer;
use scope::Scope;
use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

/// A cast sheet that was read.
#[derive(Debug, Clone, PartialEq)]
pub struct Sheet {
    file: String,
    station: Scope,
    casts: Vec<Entry>,
}

/// A `[[cast]]` with the files that it names.
#[derive(Debug, Clone, PartialEq)]
struct Entry {
    log: String,
    place: Box<Place>,
    scope: Scope,
    files: Vec<Named>,
}

/// A file as the sheet names it, and the path by which it is known again.
#[derive(Debug, Clone, PartialEq)]
struct Named {
    path: PathBuf,
    identity: PathBuf,
}

impl Sheet {
    /// Reads the sheet at `path`; its own paths are counted from the folder it lies in.
    ///
    /// # Errors
    /// [`SheetError`] with everything that is wrong with it.
    pub fn read(path: &Path) -> Result<Self, SheetError> {
        let file = path.display().to_string();
        let whole = |problem: String| Fault::new(&file, None, problem);
        let bytes = std::fs::read(path).map_err(|e| whole(format!("the sheet cannot be read: {e}")))?;
        let text = String::from_utf8(bytes).map_err(|e| {
            // The lines before the fault are text.
            let valid = e.utf8_error().valid_up_to();
            let line = 1 + e.as_bytes()[..valid].iter().filter(|b| **b == b'\n').count();
            whole(format!("line {line} is not UTF-8 text")).remedy("save the sheet as UTF-8")
        })?;
        Self::from_text(&file, &text, path.parent().unwrap_or(Path::new("")))
    }

    /// Reads the text of a sheet. `file` is its name in messages, `folder` what its paths are counted from.
    ///
    /// # Errors
    /// [`SheetError`] with everything that is wrong with it.
    pub fn from_text(file: &str, text: &str, folder: &Path) -> Result<Self, SheetError> {
        let text = text.strip_prefix('\u{feff}').unwrap_or(text);
        let document = read::document(file, text, folder)?;
        let casts = document.casts.into_iter().map(|cast| Entry {
            files: pattern::files(folder, &cast.log)
                .into_iter()
                .map(|path| Named { identity: identity(&path), path })
                .collect(),
            log: cast.log,
            place: cast.place,
            scope: cast.scope,
        });
        Ok(Self { file: file.to_string(), station: document.station, casts: casts.collect() })
    }

    /// The logs that the sheet names, in its order, those of a pattern sorted, each once.
    ///
    /// # Errors
    /// [`SheetError`] for each pattern that matches nothing, and when the sheet names no log at all. A plain name is handed on,
    /// there or not: one lost log does not hold up the others.
    pub fn logs(&self) -> Result<Vec<String>, SheetError> {
        if self.casts.is_empty() {
            return Err(Fault::new(&self.file, None, "the sheet names no log")
                .remedy("add [[cast]] with log = \"FILE\", or name the logs in the call")
                .into());
        }
        let lost: Vec<Fault> = self
            .casts
            .iter()
            .filter(|cast| cast.files.is_empty())
            .map(|cast| {
                Fault::new(&self.file, Some(cast.place.clone()), format!("no file matches '{}'", cast.log))
                    .remedy("patterns are counted from the folder of the sheet; '*' stands for any part of one name, '?' for one character")
            })
            .collect();
        if !lost.is_empty() {
            return Err(SheetError { faults: lost });
        }
        let mut seen = BTreeSet::new();
        let files = self.casts.iter().flat_map(|cast| &cast.files);
        let logs = files.filter(|file| seen.insert(&file.identity));
        Ok(logs.map(|file| file.path.to_string_lossy().into_owned()).collect())
    }

    /// What the sheet says of the log at `source` (a path, or `-`): later casts before earlier ones before the station.
    pub fn layer_for(&self, source: &str) -> Layer {
        self.entries_for(source)
            .fold(self.station.clone(), |below, cast| cast.scope.clone().or(below))
            .into_layer()
    }

    /// Whether one of the casts is about the log at `source`.
    pub fn names(&self, source: &str) -> bool {
        self.entries_for(source).next().is_some()
    }

    /// Whether the sheet has casts at all, or a station only.
    pub fn has_casts(&self) -> bool {
        !self.casts.is_empty()
    }

    fn entries_for(&self, source: &str) -> impl Iterator<Item = &Entry> {
        let sought = (source != "-").then(|| identity(Path::new(source)));
        self.casts.iter().filter(move |cast| {
            sought.as_ref().is_some_and(|sought| cast.files.iter().any(|file| file.identity == *sought))
        })
    }
}

/// A path by which the same file is known again, however it was named.
fn identity(path: &Path) -> PathBuf {
    path.canonicalize().or_else(|_| std::path::absolute(path)).unwrap_or_else(|_| path.to_path_buf())
}

#[cfg(test)]
mod tests;
