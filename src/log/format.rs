//! The formats of logs, told apart by their content.

use super::input::Input;
use super::{Log, LogError, ReadOptions, delimited, netcdf};

/// A format that can be read.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Format {
    NetCdf,
    Delimited,
}

impl Format {
    /// In the order in which they are tried; the last one takes whatever is left.
    const ALL: [Format; 2] = [Format::NetCdf, Format::Delimited];

    fn recognises(self, head: &[u8]) -> bool {
        match self {
            Format::NetCdf => netcdf::recognises(head),
            Format::Delimited => true,
        }
    }

    fn read(self, input: &Input, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
        match self {
            Format::NetCdf => netcdf::read(input, options),
            Format::Delimited => delimited::read(input, options),
        }
    }
}

/// Reads the log called `source`: a path, or `-` for standard input. One file may hold several
/// profiles, each of which becomes a [`Log`].
pub fn read(source: &str, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    read_input(&Input::open(source)?, options)
}

/// Reads a log that is already in memory; `name` stands for it in messages.
pub fn read_bytes(name: &str, bytes: Vec<u8>, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    read_input(&Input::from_bytes(name, bytes)?, options)
}

fn read_input(input: &Input, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    let format =
        Format::ALL.into_iter().find(|format| format.recognises(&input.bytes)).unwrap_or(Format::Delimited);
    format.read(input, options)
}
