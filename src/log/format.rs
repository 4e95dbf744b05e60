//! The formats of logs, told apart by their content.

use super::input::Input;
use super::{Log, LogError, ReadOptions, archive, delimited, netcdf, whp};

/// A format that holds one log or several.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Format {
    NetCdf,
    Whp,
    Delimited,
}

impl Format {
    /// In the order in which they are tried; the last one takes whatever is left.
    const ALL: [Format; 3] = [Format::NetCdf, Format::Whp, Format::Delimited];

    fn recognises(self, head: &[u8]) -> bool {
        match self {
            Format::NetCdf => netcdf::recognises(head),
            Format::Whp => whp::recognises(head),
            Format::Delimited => true,
        }
    }

    fn read(self, input: &Input, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
        match self {
            Format::NetCdf => netcdf::read(input, options),
            Format::Whp => whp::read(input, options),
            Format::Delimited => delimited::read(input, options),
        }
    }
}

/// Reads the log called `source`: a path, or `-` for standard input. One file may hold several
/// profiles, and an archive several files; each profile becomes a [`Log`].
///
/// # Errors
/// [`LogError`] when the file cannot be read, or, with the first of them, when one of its logs cannot.
pub fn read(source: &str, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    read_each(source, options)?.into_iter().collect()
}

/// The same, where a log of an archive that cannot be read does not hide the others.
///
/// # Errors
/// [`LogError`] when the file as a whole cannot be read.
pub fn read_each(source: &str, options: &ReadOptions) -> Result<Vec<Result<Log, LogError>>, LogError> {
    read_input(&Input::open(source)?, options)
}

/// Reads a log that is already in memory; `name` stands for it in messages.
///
/// # Errors
/// As those of [`read`].
pub fn read_bytes(name: &str, bytes: Vec<u8>, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    read_input(&Input::from_bytes(name, bytes)?, options)?.into_iter().collect()
}

fn read_input(input: &Input, options: &ReadOptions) -> Result<Vec<Result<Log, LogError>>, LogError> {
    if archive::recognises(&input.bytes) {
        return archive::read(input, options);
    }
    Ok(read_one(input, options)?.into_iter().map(Ok).collect())
}

/// Reads a file that is no archive.
pub(super) fn read_one(input: &Input, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    let format =
        Format::ALL.into_iter().find(|format| format.recognises(&input.bytes)).unwrap_or(Format::Delimited);
    format.read(input, options)
}
