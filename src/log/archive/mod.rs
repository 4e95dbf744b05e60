//! Zip archives of logs: every entry that a reader recognises becomes a log.

mod directory;

use directory::Refusal;

use super::format::read_one;
use super::input::{INFLATED_LIMIT, Input};
use super::{Log, LogError, ReadOptions};
use crate::warning::Warning;

/// Inflated archives larger than this are refused.
const TOTAL_LIMIT: u64 = 2 * INFLATED_LIMIT;

/// Bytes that may come out of an archive, whatever it says of itself.
#[derive(Debug, Clone, Copy)]
struct Limits {
    entry: u64,
    total: u64,
}

/// Whether a file begins like a zip archive (an empty one begins with its end).
pub(super) fn recognises(head: &[u8]) -> bool {
    head.starts_with(b"PK\x03\x04") || head.starts_with(b"PK\x05\x06")
}

/// Reads every log of an archive. Entries that are no logs (a readme, a picture) are left aside with a warning on the
/// first log; a log that cannot be read, is encrypted or is itself an archive is an error of its own.
pub(super) fn read(input: &Input, options: &ReadOptions) -> Result<Vec<Result<Log, LogError>>, LogError> {
    read_within(input, options, Limits { entry: INFLATED_LIMIT, total: TOTAL_LIMIT })
}

fn read_within(
    input: &Input,
    options: &ReadOptions,
    limits: Limits,
) -> Result<Vec<Result<Log, LogError>>, LogError> {
    let archive = input.name.as_str();
    let entries = directory::entries(&input.bytes).ok_or_else(|| {
        LogError::new(archive, "the zip archive is damaged or cut short")
            .remedy("copy it again, or unpack it")
    })?;
    if entries.iter().any(|entry| entry.name == "[Content_Types].xml") {
        return Err(LogError::new(archive, "this is a spreadsheet workbook, not a log")
            .remedy("save the sheet as CSV and give that file")
            .foreign());
    }
    let (mut logs, mut aside, mut left) = (Vec::new(), Vec::new(), limits.total);
    for entry in entries.iter().filter(|entry| !is_of_file_system(&entry.name)) {
        let name = format!("{archive}#{}", entry.name);
        let limit = limits.entry.min(left);
        let bytes = match entry.bytes(&input.bytes, limit) {
            Ok(bytes) => bytes,
            Err(Refusal::TooLarge) => return Err(too_large(&name, limit, left < limits.entry)),
            Err(Refusal::Other(problem)) => {
                logs.push(Err(
                    LogError::new(name, problem).remedy("unpack the archive and give the file itself")
                ));
                continue;
            }
        };
        left -= bytes.len() as u64;
        let inflated = Input::within(&name, bytes, limits.entry.min(left));
        let read = inflated.and_then(|input| {
            left = left.saturating_sub(input.bytes.len() as u64);
            if recognises(&input.bytes) {
                return Err(LogError::new(&name, "a zip archive inside a zip archive is not opened")
                    .remedy("unpack the outer one and give the inner one itself"));
            }
            read_one(&input, options)
        });
        match read {
            Ok(read) => logs.extend(read.into_iter().map(Ok)),
            Err(error) if error.foreign => aside.push(format!("'{}' ({})", entry.name, error.problem)),
            Err(error) => logs.push(Err(error)),
        }
    }
    if logs.is_empty() {
        let what = if aside.is_empty() { "it is empty".to_string() } else { listed(&aside) };
        return Err(LogError::new(archive, format!("the zip archive holds no log: {what}"))
            .remedy("check that it is the right one"));
    }
    if !aside.is_empty()
        && let Some(Ok(log)) = logs.iter_mut().find(|log| log.is_ok())
    {
        let cause = format!("left aside in the archive, since they are no logs: {}", listed(&aside));
        log.warnings.insert(0, Warning::new("entries_left_aside", cause, ""));
    }
    Ok(logs)
}

/// Folders, and the files in which some systems keep notes on other files.
fn is_of_file_system(name: &str) -> bool {
    name.ends_with(['/', '\\'])
        || name
            .split(['/', '\\'])
            .any(|part| part == "__MACOSX" || part.starts_with("._") || part == ".DS_Store")
}

fn listed(all: &[String]) -> String {
    const SHOWN: usize = 5;
    let more = all.len().saturating_sub(SHOWN);
    let shown = all[..all.len() - more].join(", ");
    if more > 0 { format!("{shown} and {more} more") } else { shown }
}

fn too_large(name: &str, limit: u64, together: bool) -> LogError {
    let limit = format!("{} MiB", limit >> 20);
    let problem = if together {
        format!("the archive inflates to more than it may: {limit} were left when this entry came")
    } else {
        format!("this entry inflates to more than {limit}")
    };
    LogError::new(name, problem).remedy("unpack the archive, if you trust it, and give the files themselves")
}

#[cfg(test)]
mod tests {
    use super::*;

    const CASTS: &[u8] = include_bytes!("../../../tests/golden/casts.zip");

    fn read(limits: Limits) -> Result<Vec<Result<Log, LogError>>, LogError> {
        let input = Input { name: "casts.zip".into(), bytes: CASTS.to_vec() };
        read_within(&input, &ReadOptions::default(), limits)
    }

    #[test]
    fn an_entry_that_inflates_too_far_is_refused() {
        assert!(read(Limits { entry: 1 << 20, total: 1 << 20 }).is_ok());
        let error = read(Limits { entry: 200, total: 1 << 20 }).unwrap_err();
        assert!(error.problem.contains("this entry inflates"), "{error}");
    }

    #[test]
    fn entries_that_inflate_too_far_together_are_refused() {
        let error = read(Limits { entry: 1 << 20, total: 2000 }).unwrap_err();
        assert!(error.problem.contains("the archive inflates"), "{error}");
    }

    #[test]
    fn notes_of_file_systems_are_no_entries() {
        let is_note = is_of_file_system;
        assert!(is_note("casts/") && is_note("__MACOSX/casts/._a.csv") && is_note("a/.DS_Store"));
        assert!(!is_note("casts/a.csv") && !is_note(".a.csv"));
    }
}
