//! `seaplumb sheet`: a cast sheet to fill in.

use super::args::SheetArgs;
use super::output::failure;
use super::request::{self, CallError};
use super::run::Failure;
use crate::log;
use crate::sheet::{CastFacts, template};
use std::io::Write;
use std::process::ExitCode;

/// Prints the sheet to `out`; a log that cannot be read stands in it all the same, and is told on `notes`.
pub(super) fn print(
    args: &SheetArgs,
    out: &mut dyn Write,
    notes: &mut dyn Write,
) -> Result<ExitCode, Failure> {
    if args.logs.iter().any(|log| log == "-") {
        return Err(CallError("standard input ('-') has no name that a sheet could hold".to_string()).into());
    }
    let reading = request::read_options(&args.reading)?;
    let mut code = ExitCode::SUCCESS;
    let mut casts = Vec::with_capacity(args.logs.len());
    for source in &args.logs {
        casts.push(match log::read(source, &reading) {
            Ok(logs) => CastFacts::of(source, &logs),
            Err(error) => {
                code = ExitCode::from(3);
                writeln!(notes, "{}", failure(&error))?;
                CastFacts::unread(source, &error.to_string())
            }
        });
    }
    out.write_all(template(&casts, &reading).as_bytes())?;
    out.flush()?;
    Ok(code)
}
